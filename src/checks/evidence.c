/* A published rating stands for a wall that is that wall: same boards, framing, mount, fill. The
 * rest are neighbours, ranked by the sum of what their differences weigh. */
#include "checks/evidence.h"

#include <math.h>
#include <stdlib.h>

#include "base/units.h"
#include "wall/line.h"

/* Boards of one kind and thickness count as the same up to this difference of mass: makes differ by
 * so much, and a rating by less than half a point (mass law: 20 lg 1.05 = 0.4 dB). */
#define SAME_MASS 0.05
/* Gaps between rows, drawn to the nearest mm. */
#define SAME_GAP_M 0.0011

static bool lower_rating(int value, int old) {
  return value < old;
}

static double apart(double x, double y) {
  return fabs(x - y);
}

/* Matching */

static bool same_board(const catalog *c, int i, int j) {
  if (i == j) return true;
  const layer *x = &c->layers[i], *y = &c->layers[j];
  if (x->membrane || y->membrane || x->loss_factor > 0 || y->loss_factor > 0) return false;
  return x->material == y->material && x->type_x == y->type_x && x->regular == y->regular &&
         apart(x->thickness_m, y->thickness_m) <= MATCH_TOLERANCE_M &&
         apart(x->mass_kg_m2, y->mass_kg_m2) <= SAME_MASS * y->mass_kg_m2;
}

uint64_t evidence_face(const catalog *c, const face *f) {
  uint64_t bits = 0;
  for (size_t n = 0; n < c->published_need_count; n++) {
    const side_need *need = &c->published_needs[n];
    bool same = need->count == f->count;
    for (int i = 0; same && i < f->count; i++)
      same = same_board(c, f->layer[i], need->item[i].layer);
    if (same) bits |= UINT64_C(1) << n;
  }
  return bits;
}

static bool within(double value, double least, double most) {
  return value >= least - MATCH_TOLERANCE_M && value <= most + MATCH_TOLERANCE_M;
}

static bool frame_is(const catalog *c, const wall *w, const wall_row *row) {
  const frame *f = &c->frames[w->frame];
  if (f->material != row->material || f->layout != row->layout) return false;
  if (apart(f->stud_depth_m, row->depth_m) > MATCH_TOLERANCE_M) return false;
  if (f->material == FRAME_STEEL &&
      (f->mil < row->mil_min || (row->mil_max > 0 && f->mil > row->mil_max)))
    return false;
  if (row->gap_m > 0 && apart(w->gap_mm * 0.001, row->gap_m) > SAME_GAP_M) return false;
  return within(wall_spacing_m(w->spacing_mm), row->spacing_min_m, row->spacing_max_m);
}

static bool mount_is(const catalog *c, const wall *w, const wall_row *row, int side) {
  if (row->mount == ROW_MOUNT_NONE) return !wall_is_mounted(w);
  return match_channel(c, w, side) && within(wall_spacing_m(w->mount[side].spacing_mm),
                                             row->mount_spacing_min_m, row->mount_spacing_max_m);
}

static bool fill_is(const catalog *c, const wall *w, const wall_row *row) {
  int filled = match_rows_with_fill(c, w);
  return filled == row->filled_rows && match_filled_rows(c, w, row) == filled;
}

static bool has_hidden_layers(const wall *w) {
  return w->sheath[0].count + w->sheath[1].count + w->inner[0].count + w->inner[1].count > 0;
}

/* Whether a core is that of a row whose side A stands on `side`. */
static bool core_is(const catalog *c, const wall *core, const wall_row *row, int side) {
  if (row->tested) {
    wall turned = side == SIDE_A ? *row->tested : wall_mirrored(c, row->tested);
    return wall_same_core(&turned, core);
  }
  return !has_hidden_layers(core) && frame_is(c, core, row) && fill_is(c, core, row) &&
         mount_is(c, core, row, side);
}

/* A test of the very wall comes before a code's table; among equals the lower rating counts. */
static short rank_of(const wall_row *row) {
  const int tested_first = 1000;
  return (short)(row->tested ? row->stc - tested_first : row->stc);
}

void evidence_core_set(const catalog *c, const wall *core, match_list *out) {
  out->count = 0;
  for (size_t i = 0; i < c->published_count; i++) {
    const wall_row *row = &c->published[i];
    for (int side = 0; side < 2; side++) {
      if (!core_is(c, core, row, side)) continue;
      match_entry e = {.row = (short)i, .value = rank_of(row)};
      e.need[side] = (unsigned char)row->side_a.need;
      e.need[1 - side] = (unsigned char)row->side_b.need;
      match_add(out, e, lower_rating);
    }
  }
}

const wall_row *evidence_pair(const catalog *c, const match_list *core, uint64_t face_a,
                              uint64_t face_b) {
  const match_entry *best = NULL;
  for (int i = 0; i < core->count; i++) {
    const match_entry *e = &core->entry[i];
    if ((face_a >> e->need[SIDE_A] & 1u) && (face_b >> e->need[SIDE_B] & 1u) &&
        (!best || e->value < best->value))
      best = e;
  }
  return best ? &c->published[best->row] : NULL;
}

const wall_row *evidence_match(const catalog *c, const wall *w) {
  match_list core;
  evidence_core_set(c, w, &core);
  if (core.count == 0) return NULL;
  return evidence_pair(c, &core, evidence_face(c, &w->side[SIDE_A]),
                       evidence_face(c, &w->side[SIDE_B]));
}

/* Distance: one walk adds up weights and, when asked, says each difference. */

typedef struct walk {
  arena *arena; /* NULL: no words */
  const catalog *c;
  const wall *w;
  const wall_row *row;
  int side; /* of the wall, where the row's side A stands */
  double distance;
  evidence_near *out; /* NULL with the arena */
} walk;

static char letter(int side) {
  return side == SIDE_A ? 'A' : 'B';
}

static void say(walk *k, double weight, const char *format, ...) TEXT_PRINTF(3, 4);

static void say(walk *k, double weight, const char *format, ...) {
  k->distance += weight;
  if (!k->arena || k->out->differ_count == EVIDENCE_MAX_DIFFERS) return;
  text t;
  va_list args;
  text_init(&t, k->arena, 256);
  va_start(args, format);
  text_vputf(&t, format, args);
  va_end(args);
  k->out->differs[k->out->differ_count++] = t.data;
}

static int nominal(double metres) {
  return (int)lround(metres * 1000);
}

/* What is left of two leaves once equal layers are taken away in pairs, whatever their order. */
static int unmatched(const catalog *c, const int *of, int n, const int *against, int m, int *left) {
  bool used[WALL_MAX_LAYERS] = {false};
  int count = 0;
  for (int i = 0; i < n; i++) {
    int j = 0;
    while (j < m && (used[j] || !same_board(c, of[i], against[j]))) j++;
    if (j < m)
      used[j] = true;
    else
      left[count++] = of[i];
  }
  return count;
}

static const char *layers_word(arena *a, int count, const char *more_or_fewer) {
  if (count == 1) return text_format(a, "one layer %s", more_or_fewer);
  return text_format(a, "%d layers %s", count, more_or_fewer);
}

static void compare_leaf(walk *k, const row_side *published, const face *ours, int side) {
  const side_need *need = &k->c->published_needs[published->need];
  int theirs[ROW_MAX_SIDE], only_theirs[ROW_MAX_SIDE], only_ours[WALL_MAX_LAYERS];
  for (int i = 0; i < need->count; i++) theirs[i] = need->item[i].layer;
  int p = unmatched(k->c, theirs, need->count, ours->layer, ours->count, only_theirs);
  int q = unmatched(k->c, ours->layer, ours->count, theirs, need->count, only_ours);
  const evidence_weights *weight = &k->c->distance;
  int pairs = p < q ? p : q;
  for (int i = 0; i < pairs; i++)
    say(k, weight->board, "%s for %s on side %c", k->c->layers[only_theirs[i]].id,
        k->c->layers[only_ours[i]].id, letter(side));
  if (p == q) return;
  int extra = p > q ? p - q : q - p;
  const char *words = k->arena ? layers_word(k->arena, extra, p > q ? "more" : "fewer") : "";
  say(k, extra * weight->layer, "%s on side %c", words, letter(side));
}

static void compare_frame(walk *k) {
  static const char *const layouts[] = {"one row of studs", "staggered studs", "two rows of studs"};
  const frame *f = &k->c->frames[k->w->frame];
  const wall_row *row = k->row;
  const evidence_weights *weight = &k->c->distance;
  if (f->material != row->material)
    say(k, weight->material,
        row->material == FRAME_STEEL ? "steel for wood studs" : "wood for steel studs");
  if (f->layout != row->layout)
    say(k, weight->layout, "%s for %s", layouts[row->layout], layouts[f->layout]);
  double depth = apart(f->stud_depth_m, row->depth_m);
  if (depth > MATCH_TOLERANCE_M)
    say(k, weight->depth * depth / UNITS_M_PER_IN, "%d for %d mm studs", nominal(row->depth_m),
        nominal(f->stud_depth_m));
  if (f->material == FRAME_STEEL && row->material == FRAME_STEEL) {
    int mil = f->mil < row->mil_min                       ? row->mil_min
              : row->mil_max > 0 && f->mil > row->mil_max ? row->mil_max
                                                          : f->mil;
    if (mil != f->mil)
      say(k, weight->steel * fabs(log2((double)f->mil / mil)), "%d for %d mil steel", mil, f->mil);
  }
  if (f->layout == FRAME_DOUBLE && row->gap_m > 0) {
    double gap = apart(k->w->gap_mm * 0.001, row->gap_m);
    if (gap > SAME_GAP_M)
      say(k, weight->gap * gap / UNITS_M_PER_IN, "gap of %d for %d mm", nominal(row->gap_m),
          k->w->gap_mm);
  }
}

/* Steps of 8 in between spacings; 0 when the published range holds ours. *nearest is the published
 * spacing nearest to ours. */
static double spacing_steps(double ours, double least, double most, double *nearest) {
  const double step = 8 * UNITS_M_PER_IN;
  *nearest = ours < least ? least : ours > most ? most : ours;
  double steps = apart(ours, *nearest) / step;
  return apart(ours, *nearest) > MATCH_TOLERANCE_M ? steps : 0;
}

static void compare_spacing(walk *k) {
  double nearest;
  double steps = spacing_steps(wall_spacing_m(k->w->spacing_mm), k->row->spacing_min_m,
                               k->row->spacing_max_m, &nearest);
  if (steps > 0)
    say(k, k->c->distance.spacing * steps, "studs at %d for %d mm", nominal(nearest),
        k->w->spacing_mm);
}

/* Clips are known of tested walls only: no code table holds them. */
static bool row_has_clips(const walk *k) {
  const wall *t = k->row->tested;
  return t && t->mount[SIDE_A].mount != CATALOG_NONE && k->c->mounts[t->mount[SIDE_A].mount].clips;
}

static void compare_mount(walk *k) {
  const evidence_weights *weight = &k->c->distance;
  int ours = match_mounted_side(k->w);
  bool clips = ours != CATALOG_NONE && k->c->mounts[k->w->mount[ours].mount].clips;
  const char *kind = clips ? "clips" : "channel", *theirs = row_has_clips(k) ? "clips" : "channel";
  if (k->row->mount == ROW_MOUNT_NONE) {
    if (ours != CATALOG_NONE) say(k, weight->mount, "no %s on side %c", kind, letter(ours));
    return;
  }
  if (ours == CATALOG_NONE) {
    say(k, weight->mount, "%s on side %c", theirs, letter(k->side));
    return;
  }
  if (ours != k->side)
    say(k, weight->mount_side, "%s on side %c for side %c", theirs, letter(k->side), letter(ours));
  if (clips != row_has_clips(k)) say(k, weight->mount_kind, "%s for %s", theirs, kind);
  double nearest;
  double steps = spacing_steps(wall_spacing_m(k->w->mount[ours].spacing_mm),
                               k->row->mount_spacing_min_m, k->row->mount_spacing_max_m, &nearest);
  if (steps > 0)
    say(k, weight->mount_spacing * steps, "%s at %d for %s at %d mm", theirs, nominal(nearest), kind,
        k->w->mount[ours].spacing_mm);
}

static void compare_fill(walk *k) {
  const evidence_weights *weight = &k->c->distance;
  int theirs = k->row->filled_rows;
  int ours = match_rows_with_fill(k->c, k->w);
  if (theirs > 0 && ours > 0) {
    if (theirs != ours && k->row->layout == k->c->frames[k->w->frame].layout)
      say(k, weight->fill_row,
          theirs > ours ? "both rows filled for one" : "one row filled for both");
    if (match_filled_rows(k->c, k->w, k->row) < ours)
      say(k, weight->partial_fill, "full for part-filled cavity");
    return;
  }
  if (theirs > 0) say(k, weight->fill, "filled for empty cavity");
  if (ours > 0) say(k, weight->fill, "empty for filled cavity");
}

static void compare_hidden(walk *k) {
  for (int s = 0; s < 2; s++) {
    for (int i = 0; i < k->w->sheath[s].count; i++)
      say(k, k->c->distance.mount, "no %s behind the mount on side %c",
          k->c->layers[k->w->sheath[s].layer[i]].id, letter(s));
    for (int i = 0; i < k->w->inner[s].count; i++)
      say(k, k->c->distance.mount, "no %s on the inner face of side %c",
          k->c->layers[k->w->inner[s].layer[i]].id, letter(s));
  }
}

static double compare(walk *k) {
  k->distance = 0;
  compare_leaf(k, &k->row->side_a, &k->w->side[k->side], k->side);
  compare_leaf(k, &k->row->side_b, &k->w->side[1 - k->side], 1 - k->side);
  compare_frame(k);
  compare_spacing(k);
  compare_mount(k);
  compare_fill(k);
  compare_hidden(k);
  return k->distance;
}

/* The published wall in catalog parts, as near to the judged wall as the row allows. */

static int frame_of(const catalog *c, const wall_row *row, const frame *ours) {
  int best = CATALOG_NONE;
  double best_cost = INFINITY;
  for (size_t i = 0; i < c->frame_count; i++) {
    const frame *f = &c->frames[i];
    if (f->material != row->material || f->layout != row->layout || f->frt) continue;
    if (f->material == FRAME_STEEL && (f->mil < row->mil_min || f->mil > row->mil_max)) continue;
    double cost = apart(f->stud_depth_m, row->depth_m) * 1000 + abs(f->mil - ours->mil) * 0.001;
    if (cost < best_cost) {
      best_cost = cost;
      best = (int)i;
    }
  }
  return best;
}

static int nearest_of(const int *values, size_t count, double metres) {
  int best = values[0];
  for (size_t i = 1; i < count; i++)
    if (apart(wall_spacing_m(values[i]), metres) < apart(wall_spacing_m(best), metres))
      best = values[i];
  return best;
}

static int fill_of(const catalog *c, const wall_row *row, double depth_m, int ours) {
  int kind = ours != CATALOG_NONE ? (int)c->fills[ours].material : FILL_GLASS;
  if (!(row->fill_kinds & (1u << kind))) kind = FILL_STONE;
  int best = CATALOG_NONE;
  for (size_t i = 0; i < c->fill_count; i++) {
    if ((int)c->fills[i].material != kind || c->fills[i].special) continue;
    if (best == CATALOG_NONE ||
        apart(c->fills[i].thickness_m, depth_m) < apart(c->fills[best].thickness_m, depth_m))
      best = (int)i;
  }
  return best;
}

static int channel_of(const catalog *c) {
  for (size_t i = 0; i < c->mount_count; i++)
    if (!c->mounts[i].clips) return (int)i;
  return CATALOG_NONE;
}

static face leaf_of(const catalog *c, const row_side *side) {
  const side_need *need = &c->published_needs[side->need];
  face f = {.count = need->count};
  for (int i = 0; i < need->count; i++) f.layer[i] = need->item[i].layer;
  return f;
}

static bool wall_of(const walk *k, wall *out) {
  const catalog *c = k->c;
  const wall_row *row = k->row;
  double spacing;
  if (row->tested) {
    *out = k->side == SIDE_A ? *row->tested : wall_mirrored(c, row->tested);
    return true;
  }
  *out = wall_empty();
  out->frame = frame_of(c, row, &c->frames[k->w->frame]);
  if (out->frame == CATALOG_NONE) return false;
  out->side[k->side] = leaf_of(c, &row->side_a);
  out->side[1 - k->side] = leaf_of(c, &row->side_b);
  (void)spacing_steps(wall_spacing_m(k->w->spacing_mm), row->spacing_min_m, row->spacing_max_m,
                      &spacing);
  out->spacing_mm = nearest_of(c->spacings_mm, c->spacing_count, spacing);
  if (row->layout == FRAME_DOUBLE) out->gap_mm = row->gap_m > 0 ? nominal(row->gap_m) : 25;
  double depth =
      row->fill_thickness_m > 0 ? row->fill_thickness_m : c->frames[out->frame].row_depth_m;
  for (int r = 0; r < row->filled_rows; r++) out->fill[r] = fill_of(c, row, depth, k->w->fill[0]);
  if (row->mount == ROW_MOUNT_CHANNEL) {
    int ours = match_mounted_side(k->w);
    double wanted = ours != CATALOG_NONE ? wall_spacing_m(k->w->mount[ours].spacing_mm)
                                         : row->mount_spacing_max_m;
    (void)spacing_steps(wanted, row->mount_spacing_min_m, row->mount_spacing_max_m, &spacing);
    out->mount[k->side].mount = channel_of(c);
    out->mount[k->side].spacing_mm =
        nearest_of(c->mount_spacings_mm, c->mount_spacing_count, spacing);
  }
  return true;
}

static void describe(walk *k, arena *a, evidence_near *out) {
  wall published;
  *out = (evidence_near){.row = k->row};
  k->arena = a;
  k->out = out;
  out->distance = compare(k);
  k->arena = NULL;
  out->line = wall_of(k, &published) ? line_print(a, k->c, &published) : NULL;
}

/* The nearer way round of one row. */
static walk turned(const catalog *c, const wall *w, const wall_row *row) {
  walk straight = {.c = c, .w = w, .row = row, .side = SIDE_A}, mirrored = straight;
  mirrored.side = SIDE_B;
  compare(&straight);
  compare(&mirrored);
  return mirrored.distance < straight.distance ? mirrored : straight;
}

static void find_nearest(arena *a, const catalog *c, const wall *w, evidence *out) {
  walk best[EVIDENCE_NEAREST];
  int count = 0;
  for (size_t i = 0; i < c->published_count; i++) {
    if (&c->published[i] == out->match) continue;
    walk k = turned(c, w, &c->published[i]);
    int at = count;
    while (at > 0 && k.distance < best[at - 1].distance) at--; /* file order decides ties */
    if (at == EVIDENCE_NEAREST) continue;
    if (count < EVIDENCE_NEAREST) count++;
    for (int j = count - 1; j > at; j--) best[j] = best[j - 1];
    best[at] = k;
  }
  for (int i = 0; i < count; i++) describe(&best[i], a, &out->nearest[i]);
  out->nearest_count = count;
}

static bool has_light_prone_board(const catalog *c, const wall *w) {
  for (int s = 0; s < 2; s++)
    for (int i = 0; i < w->side[s].count; i++)
      if (c->layers[w->side[s].layer[i]].regular) return true;
  return false;
}

/* The thinnest stud that any published row names is where "equivalents" are sold in its place. */
static bool has_thinnest_studs(const catalog *c, const wall *w) {
  int thinnest = 0;
  for (size_t i = 0; i < c->published_count; i++) {
    int mil = c->published[i].mil_min;
    if (mil > 0 && (thinnest == 0 || mil < thinnest)) thinnest = mil;
  }
  return thinnest > 0 && c->frames[w->frame].mil == thinnest;
}

void evidence_find(arena *a, const catalog *c, const wall *w, evidence *out) {
  *out = (evidence){.match = evidence_match(c, w)};
  if (out->match) {
    if (has_light_prone_board(c, w)) out->caution[out->caution_count++] = c->caution_light_board;
    if (has_thinnest_studs(c, w)) out->caution[out->caution_count++] = c->caution_thin_steel;
  }
  find_nearest(a, c, w, out);
}
