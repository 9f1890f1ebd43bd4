/* A row stands for a wall when the core is at least what it asks and each leaf holds the boards it
 * asks. What a row still holds for and what voids it: docs/methods/fire.md, after the general notes
 * of GA-600 (from memory). */
#include "checks/fire.h"

static bool more_minutes(int value, int old) {
  return value > old;
}

/* Leaves */

static bool serves(const layer *l, int index, const layer_need *n) {
  bool thick = l->thickness_m >= n->thickness_m - MATCH_TOLERANCE_M;
  switch (n->kind) {
  case NEED_TYPE_X:
    return l->type_x && thick;
  case NEED_GYPSUM:
    return l->material == LAYER_GYPSUM && (l->regular || l->type_x) && thick;
  case NEED_WOOD:
    return l->material == LAYER_WOOD && thick;
  case NEED_LAYER:
    return index == n->layer;
  }
  return false;
}

/* More gypsum and wood panels do no harm anywhere. */
static bool neutral_inside(const layer *l) {
  return l->material == LAYER_WOOD || (l->material == LAYER_GYPSUM && !(l->loss_factor > 0));
}

/* Over the boards of the row other boards do no harm either; membranes and fibreboard always void
 * it. */
static bool neutral_outside(const layer *l) {
  return neutral_inside(l) || l->material == LAYER_GYPSUM || l->material == LAYER_CEMENT;
}

/* Whether the leaf is at least `need`: its items found from the stud outwards, what is left over
 * neutral. */
static bool face_is(const catalog *c, const face *f, const side_need *need) {
  int item = need->count - 1;
  for (int i = f->count - 1; i >= 0; i--) {
    const layer *l = &c->layers[f->layer[i]];
    if (item >= 0 && serves(l, f->layer[i], &need->item[item]))
      item--;
    else if (item >= 0 ? !neutral_inside(l) : !neutral_outside(l))
      return false;
  }
  return item < 0;
}

/* The order of the layers of a tabulated membrane is free. */
static bool face_is_membrane(const catalog *c, const face *f, const side_need *m) {
  if (face_is(c, f, m)) return true;
  side_need turned = *m;
  for (int i = 0; i < m->count; i++) turned.item[i] = m->item[m->count - 1 - i];
  return face_is(c, f, &turned);
}

void fire_face_set(const catalog *c, const face *f, fire_face *out) {
  *out = (fire_face){0, 0};
  for (size_t i = 0; i < c->fire_need_count; i++)
    if (face_is(c, f, &c->fire_needs[i])) out->needs |= UINT64_C(1) << i;
  for (size_t i = 0; i < c->membrane_count; i++) {
    const side_need *m = &c->membranes[i];
    if (m->minutes > out->membrane && face_is_membrane(c, f, m)) out->membrane = m->minutes;
  }
}

/* Cores */

static int minutes_of(const wall_row *row, const brief *b) {
  return b->loadbearing ? row->minutes_bearing : row->minutes_nonbearing;
}

static bool beyond_scope(const catalog *c, const brief *b) {
  return b->code == CODE_NBC && b->storeys_given && c->nbc_max_storeys > 0 &&
         b->storeys > c->nbc_max_storeys;
}

static bool code_fits(const catalog *c, const brief *b, const wall_row *row) {
  if (row->code == CODE_NONE) return true; /* a listing */
  return row->code == b->code && !beyond_scope(c, b);
}

static bool frame_fits(const catalog *c, const wall *w, const wall_row *row) {
  const frame *f = &c->frames[w->frame];
  if (f->material != row->material || f->layout != row->layout) return false;
  if (f->stud_depth_m < row->depth_m - MATCH_TOLERANCE_M || f->mil < row->mil_min) return false;
  if (f->layout == FRAME_DOUBLE && w->gap_mm * 0.001 < row->gap_m - MATCH_TOLERANCE_M) return false;
  return wall_spacing_m(w->spacing_mm) <= row->spacing_max_m + MATCH_TOLERANCE_M;
}

static bool mount_fits(const catalog *c, const wall *w, const wall_row *row, int side) {
  if (row->mount == ROW_MOUNT_ANY) return true;
  if (row->mount == ROW_MOUNT_NONE) return !wall_is_mounted(w);
  if (!match_channel(c, w, side)) return false;
  double most = row->mount_spacing_max_m;
  return !(most > 0) || wall_spacing_m(w->mount[side].spacing_mm) <= most + MATCH_TOLERANCE_M;
}

/* Batts may be added to wood and to steel that carries no load; in load-bearing steel they heat the
 * stud (NBC table). */
static bool fill_fits(const catalog *c, const brief *b, const wall *w, const wall_row *row) {
  bool may_add = row->material == FRAME_WOOD || !b->loadbearing;
  int filled = match_rows_with_fill(c, w);
  switch (row->fill) {
  case ROW_FILL_NONE:
    return filled == 0 || may_add;
  case ROW_FILL_OPTIONAL:
    return filled == 0 || may_add || match_filled_rows(c, w, row) == filled;
  case ROW_FILL_REQUIRED:
    break;
  }
  return match_filled_rows(c, w, row) >= row->filled_rows;
}

/* Layers that are neither leaf nor core: under a mount, or on the inner face of a row. The NBC
 * table leaves its ratings unchanged by a bracing sheet of any kind on an inner face. */
static bool hidden_layers_fit(const catalog *c, const wall *w, bool sheets_free) {
  for (int s = 0; s < 2; s++) {
    for (int i = 0; i < w->sheath[s].count; i++)
      if (!neutral_inside(&c->layers[w->sheath[s].layer[i]])) return false;
    for (int i = 0; i < w->inner[s].count; i++) {
      const layer *l = &c->layers[w->inner[s].layer[i]];
      if (sheets_free ? l->membrane : !neutral_inside(l)) return false;
    }
  }
  return true;
}

static bool row_fits(const catalog *c, const brief *b, const wall *w, const wall_row *row) {
  return minutes_of(row, b) > 0 && code_fits(c, b, row) && frame_fits(c, w, row) &&
         fill_fits(c, b, w, row) && hidden_layers_fit(c, w, row->code == CODE_NBC);
}

/* IBC 722.6: wood studs at no more than 16 in, no mount; the fill earns its minutes only when dense
 * and in every row. */
static void set_additive(const catalog *c, const brief *b, const wall *w, fire_core *out) {
  const frame *f = &c->frames[w->frame];
  out->additive = b->code == CODE_IBC && f->material == FRAME_WOOD && !wall_is_mounted(w) &&
                  f->stud_depth_m >= c->additive_min_depth_m - MATCH_TOLERANCE_M &&
                  wall_spacing_m(w->spacing_mm) <= c->additive_max_spacing_m + MATCH_TOLERANCE_M &&
                  hidden_layers_fit(c, w, false);
  out->rest_minutes = c->additive_frame_minutes + c->additive_fill_minutes;
  for (int r = 0; r < f->rows; r++) {
    const fill *fibre = w->fill[r] == CATALOG_NONE ? NULL : &c->fills[w->fill[r]];
    if (fibre && fibre->density_kg_m3 >= c->additive_fill_kg_m3[fibre->material] &&
        fibre->thickness_m >= MATCH_FULL * f->row_depth_m)
      continue;
    out->rest_minutes = c->additive_frame_minutes;
  }
}

void fire_core_set(const catalog *c, const brief *b, const wall *core, fire_core *out) {
  out->rows.count = 0;
  for (size_t i = 0; i < c->fire_count; i++) {
    const wall_row *row = &c->fire[i];
    if (!row_fits(c, b, core, row)) continue;
    for (int side = 0; side < 2; side++) { /* the row's side A on either side of the wall */
      if (!mount_fits(c, core, row, side)) continue;
      match_entry e = {.row = (short)i, .value = (short)minutes_of(row, b)};
      e.need[side] = (unsigned char)row->side_a.need;
      e.need[1 - side] = (unsigned char)row->side_b.need;
      match_add(&out->rows, e, more_minutes);
    }
  }
  set_additive(c, b, core, out);
}

static bool has(const fire_face *f, int need) {
  return (f->needs >> need) & 1u;
}

int fire_pair(const catalog *c, const fire_core *core, const fire_face *a, const fire_face *b,
              int *row) {
  int best = 0, best_row = CATALOG_NONE;
  for (int i = 0; i < core->rows.count; i++) {
    const match_entry *e = &core->rows.entry[i];
    if (e->value > best && has(a, e->need[SIDE_A]) && has(b, e->need[SIDE_B])) {
      best = e->value;
      best_row = e->row;
    }
  }
  if (core->additive && a->membrane > 0 && b->membrane > 0) {
    double minutes = (a->membrane < b->membrane ? a->membrane : b->membrane) + core->rest_minutes;
    if (minutes > c->additive_max_minutes) minutes = c->additive_max_minutes;
    if ((int)minutes > best) {
      best = (int)minutes;
      best_row = CATALOG_NONE;
    }
  }
  if (row) *row = best_row;
  return best;
}

/* Words */

static void say_row(arena *a, const catalog *c, const brief *b, int row, fire_verdict *v) {
  const wall_row *r = &c->fire[row];
  v->row_id = r->id;
  v->source = r->source;
  if (r->note[0]) v->note = r->note;
  v->basis =
      text_format(a, "%s (%s)", r->name, b->loadbearing ? "load-bearing" : "non-load-bearing");
}

static void say_additive(arena *a, const catalog *c, const fire_core *core, const fire_face leaf[2],
                         fire_verdict *v) {
  int weak = leaf[SIDE_B].membrane < leaf[SIDE_A].membrane ? SIDE_B : SIDE_A;
  bool even = !(leaf[SIDE_B].membrane < leaf[SIDE_A].membrane) &&
              !(leaf[SIDE_A].membrane < leaf[SIDE_B].membrane);
  double dense = core->rest_minutes - c->additive_frame_minutes;
  v->source = c->additive_source;
  v->basis = text_format(a, "component-additive: membrane %d + frame %d%s min, %s, at most %d",
                         (int)leaf[weak].membrane, (int)c->additive_frame_minutes,
                         dense > 0 ? text_format(a, " + dense fill %d", (int)dense) : "",
                         even             ? "either side"
                         : weak == SIDE_A ? "side A governs"
                                          : "side B governs",
                         (int)c->additive_max_minutes);
}

static const char *why_not(const catalog *c, const brief *b, const wall *w) {
  if (b->code == CODE_NONE) return "the brief names no code: only listed fire designs count";
  if (beyond_scope(c, b)) return c->nbc_scope;
  if (wall_is_mounted(w))
    return "no row of this code covers the wall with its mount: a listed fire design is needed";
  return "no row or rule of this code covers the wall: a listed fire design or a test is needed";
}

fire_verdict fire_judge(arena *a, const catalog *c, const brief *b, const wall *w) {
  fire_verdict v = {.basis = "not shown"};
  fire_core core;
  fire_face leaf[2];
  int row;
  fire_core_set(c, b, w, &core);
  for (int s = 0; s < 2; s++) fire_face_set(c, &w->side[s], &leaf[s]);
  v.minutes = fire_pair(c, &core, &leaf[SIDE_A], &leaf[SIDE_B], &row);
  if (v.minutes == 0)
    v.note = why_not(c, b, w);
  else if (!a)
    v.basis = "shown";
  else if (row != CATALOG_NONE)
    say_row(a, c, b, row, &v);
  else
    say_additive(a, c, &core, leaf, &v);
  return v;
}
