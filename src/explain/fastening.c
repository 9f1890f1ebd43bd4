#include "explain/fastening.h"

#include <math.h>
#include <string.h>

#include "search/cheapest.h"

/* ---- the cheapest wall of a way ---- */

typedef struct wanted {
  fastening_way way;
  int side;
  frame_material material;
  bool frt; /* fire-retardant wood */
} wanted;

static bool framed_apart(const frame *f) {
  return f->layout != FRAME_SINGLE;
}

static bool serves(const judge_context *x, const wanted *n, const wall *core) {
  const frame *f = &x->catalog->frames[core->frame];
  bool mounted[2];
  for (int s = 0; s < 2; s++) mounted[s] = core->mount[s].mount != CATALOG_NONE;
  if (f->material != n->material || f->frt != n->frt) return false;
  if (n->way == FASTENING_NO_MOUNT) return !mounted[n->side];
  if (n->way == FASTENING_APART) return framed_apart(f) && !mounted[SIDE_A] && !mounted[SIDE_B];
  wall bare = *core;
  bare.mount[n->side] = wall_empty().mount[n->side];
  return mounted[n->side] && structure_fastening_ok(x->catalog, x->brief, &bare, n->side, NULL);
}

/* The cores of `s` that serve; all else is shared. */
static void keep_serving(arena *a, const space *s, const wanted *n, space *out) {
  size_t room = (size_t)s->core_count;
  *out = *s;
  out->core_count = 0;
  out->cores = arena_array(a, room, sizeof *out->cores);
  out->own_mirror = arena_array(a, room, sizeof *out->own_mirror);
  out->core_text = arena_array(a, room, sizeof *out->core_text);
  for (int i = 0; i < 2; i++) out->support[i] = arena_array(a, room, sizeof *out->support[i]);
  for (int k = 0; k < s->core_count; k++) {
    int at = out->core_count;
    if (!serves(s->context, n, &s->cores[k])) continue;
    out->cores[at] = s->cores[k];
    out->own_mirror[at] = s->own_mirror[k];
    out->core_text[at] = s->core_text[k];
    for (int i = 0; i < 2; i++) out->support[i][at] = s->support[i][k];
    out->core_count++;
  }
}

static assessment *judged(arena *a, const judge_context *x, const wall *w) {
  assessment *out = arena_alloc(a, sizeof *out);
  judge_wall(a, x, w, out);
  return out;
}

static long long cost_of(const assessment *x) {
  return x->cost.total_cents + x->cost.floor_value_cents;
}

/* Where a mount is left out the search runs without the rule of the fastening, and so without its
 * backing: that costs all walls on studs of one kind the same, so kinds are searched apart and what
 * is found is costed with it. */
static const assessment *cheapest_of(arena *a, const judge_context *x, const space *all,
                                     fastening_way way, int side) {
  const assessment *best = NULL;
  brief eased = *x->brief;
  judge_context without = *x;
  without.brief = &eased;
  if (way == FASTENING_GAP) eased.side[side].fastening = FASTENING_NONE;
  static const struct {
    frame_material material;
    bool frt;
  } kinds[] = {{FRAME_WOOD, false}, {FRAME_WOOD, true}, {FRAME_STEEL, false}};
  for (size_t i = 0; i < sizeof kinds / sizeof kinds[0]; i++) {
    wanted n = {way, side, kinds[i].material, kinds[i].frt};
    candidate c;
    space some;
    keep_serving(a, all, &n, &some);
    some.context = &without;
    if (some.core_count == 0 || !cheapest_find(a, &some, &c)) continue;
    wall w = space_wall(&some, c.core, c.face_a, c.face_b);
    const assessment *found = judged(a, x, &w);
    if (best == NULL || cost_of(found) < cost_of(best)) best = found;
  }
  return best;
}

static bool is_costed(const assessment *x) {
  return !x->takeoff.missing && x->cost.area_m2 > 0;
}

/* ---- a side of two walls ---- */

void fastening_side_by_side(const double tl_db[BANDS], double length_m, const double other_db[BANDS],
                            double other_length_m, double out_db[BANDS]) {
  double both[2 * BANDS], area[2] = {length_m, other_length_m}; /* of one height */
  memcpy(both, tl_db, BANDS * sizeof *both);
  memcpy(both + BANDS, other_db, BANDS * sizeof *both);
  rating_composite(both, area, 2, out_db);
}

/* The curve that a wall's rating stands on: a published one's is moved to its rating. */
static void curve_of(const brief *b, const assessment *x, double tl_db[BANDS]) {
  brief alone = *b;
  alone.opening_count = 0;
  judge_composite(&alone, &x->predicted, x->evidence.match, 0, tl_db);
}

static bool sound_reached(const judge_context *x, const prediction *p, const wall_row *match) {
  return judge_targets(x, p, match, NULL).broken == 0;
}

/* The stretch as one wall with the rest: its curve, and the less certain of both. */
static void put_together(const judge_context *x, double stretch_m, fastening_option *out) {
  const brief *b = x->brief;
  const assessment *w = out->wall, *bare = out->stretch;
  double rest_m = b->length_m - stretch_m, share = stretch_m / b->length_m;
  double of_wall[BANDS], of_bare[BANDS];
  prediction p = w->predicted;
  curve_of(b, w, of_wall);
  curve_of(b, bare, of_bare);
  fastening_side_by_side(of_wall, rest_m, of_bare, stretch_m, p.tl_db);
  p.ratings = rating_all(p.tl_db);
  for (int m = 0; m < METRIC_COUNT; m++) {
    p.exact[m] = rating_exact(p.tl_db, (sound_metric)m);
    p.sd[m] = fmax(w->predicted.sd[m], bare->predicted.sd[m]);
  }
  out->ratings = p.ratings;
  out->exact_stc = p.exact[METRIC_STC];
  out->reaches = sound_reached(x, &p, NULL);
  out->costed = is_costed(w) && is_costed(bare);
  out->total_cents = llround((double)w->cost.total_cents * (1 - share) +
                             (double)bare->cost.total_cents * share);
}

static void fill_option(arena *a, const judge_context *x, fastening_way way,
                        const fastening_choice *of, fastening_option *out) {
  const assessment *w = out->wall;
  if (way == FASTENING_GAP) {
    wall bare = w->wall;
    bare.mount[of->side] = wall_empty().mount[of->side];
    out->stretch = judged(a, x, &bare);
    put_together(x, of->stretch_m, out);
    return;
  }
  out->ratings = w->ratings;
  out->exact_stc = w->exact[METRIC_STC];
  out->costed = is_costed(w);
  out->total_cents = w->cost.total_cents;
  out->reaches = sound_reached(x, &w->predicted, w->evidence.match);
}

/* ---- the choice ---- */

/* A given wall stands for the way that it is built in. */
static bool given_is(const judge_context *x, const assessment *given, fastening_way way, int side) {
  if (given == NULL || !is_costed(given)) return false;
  const wall *w = &given->wall;
  const frame *f = &x->catalog->frames[w->frame];
  wanted n = {way, side, f->material, f->frt};
  return way != FASTENING_APART && serves(x, &n, w);
}

static void compare(arena *a, const judge_context *x, const space *all, const assessment *given,
                    fastening_choice *out) {
  for (int way = 0; way < FASTENING_WAYS; way++) {
    fastening_option *o = &out->way[way];
    o->wall = given_is(x, given, (fastening_way)way, out->side)
                  ? given
                  : cheapest_of(a, x, all, (fastening_way)way, out->side);
    if (o->wall != NULL) fill_option(a, x, (fastening_way)way, out, o);
  }
}

static bool over_a_stretch(const brief *b, int side) {
  const room_side *s = &b->side[side];
  return s->fastening == FASTENING_HEAVY && s->fastening_length_m > 0 &&
         s->fastening_length_m < b->length_m;
}

int fastening_choices(arena *a, const judge_context *x, const assessment *given,
                      fastening_choice out[2]) {
  int count = 0;
  space all;
  space_wish wish = space_wishes(x->brief);
  wish.mirror_once = false; /* a mount left out on one side makes the sides differ */
  if (x->prices == NULL) return 0;
  for (int s = 0; s < 2; s++) {
    if (!over_a_stretch(x->brief, s)) continue;
    if (count == 0) space_build_for(a, x, &wish, &all);
    out[count] = (fastening_choice){.side = s, .stretch_m = x->brief->side[s].fastening_length_m};
    compare(a, x, &all, given, &out[count++]);
  }
  return count;
}
