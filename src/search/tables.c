#include "search/tables.h"

#include <stdlib.h>

#include "search/judge_words.h"

enum {
  SPACINGS_MAX = 8,  /* different support spacings whose leaf costs are kept */
  CACHED_FACES = 512 /* with more leaves their costs are worked out anew for every wall */
};

/* Where a rule of the leaf alone can be seen: a core that keeps it with the right leaf.
 * CATALOG_NONE: no core does. */
typedef struct examples {
  int noncombustible;
  int shear, shear_face; /* a core and the leaf that make a shear panel */
} examples;

struct tables {
  arena *arena;
  const space *space;
  const judge_context *context;
  rule_limits limits;
  bool fire_asked, published_asked;
  face_facts *face;
  examples example;
  int spacing[SPACINGS_MAX], spacing_count;
  cost_parts *leaves[SPACINGS_MAX][SPACINGS_MAX]; /* face_count x face_count; hours below 0 = not
                                                     worked out yet */
};

/* ---- rules by their pieces ---- */

typedef struct id_bits {
  const judge_context *context;
  rule_mask broken;
} id_bits;

static bool note_id(void *user, catalog_kind kind, int index) {
  id_bits *u = user;
  const judge_context *x = u->context;
  const char *id = catalog_id(x->catalog, (catalog_ref){kind, index});
  u->broken |= rules_without(x->brief, kind, id);
  if (!rules_only_allows(x->catalog, x->brief, kind, id)) u->broken |= rule_bit(RULE_ONLY);
  return true;
}

static rule_mask bit_unless(bool ok, int rule) {
  return ok ? 0 : rule_bit(rule);
}

static bool burns_not(const tables *t, const wall *w) {
  return structure_noncombustible_ok(t->context->catalog, t->context->brief, w, NULL);
}

static bool shear(const tables *t, const wall *w) {
  return structure_shear_ok(t->context->catalog, t->context->brief, w, NULL);
}

static void find_examples(tables *t) {
  const space *s = t->space;
  int side = t->context->brief->shear_side;
  t->example = (examples){CATALOG_NONE, CATALOG_NONE, CATALOG_NONE};
  for (int k = 0; k < s->core_count && t->example.noncombustible == CATALOG_NONE; k++)
    if (burns_not(t, &s->cores[k])) t->example.noncombustible = k;
  for (int k = 0; side != CATALOG_NONE && k < s->core_count && t->example.shear == CATALOG_NONE;
       k++)
    for (int i = 0; i < s->face_count && t->example.shear == CATALOG_NONE; i++) {
      wall w = s->cores[k];
      w.side[side] = s->faces[i];
      if (!shear(t, &w)) continue;
      t->example.shear = k;
      t->example.shear_face = i;
    }
}

/* ---- leaves ---- */

static rule_mask face_bits(const tables *t, int index, int side) {
  const catalog *c = t->context->catalog;
  const brief *b = t->context->brief;
  const space *s = t->space;
  wall w = wall_empty();
  w.side[side] = s->faces[index];
  rule_mask m = bit_unless(structure_wet_ok(c, b, &w, side, NULL), RULE_WET_A + side) |
                bit_unless(structure_abuse_ok(c, b, &w, side, NULL), RULE_ABUSE_A + side);
  if (t->example.noncombustible != CATALOG_NONE) {
    w = s->cores[t->example.noncombustible];
    w.side[side] = s->faces[index];
    m |= bit_unless(burns_not(t, &w), RULE_NONCOMBUSTIBLE);
  }
  if (b->shear_side == side && t->example.shear != CATALOG_NONE) {
    w = s->cores[t->example.shear];
    w.side[side] = s->faces[index];
    m |= bit_unless(shear(t, &w), RULE_SHEAR);
  }
  id_bits ids = {t->context, 0};
  for (int i = 0; i < s->faces[index].count; i++)
    note_id(&ids, CATALOG_LAYER, s->faces[index].layer[i]);
  return m | ids.broken;
}

static void set_face(const tables *t, int i, face_facts *f) {
  const catalog *c = t->context->catalog;
  const face *leaf = &t->space->faces[i];
  f->thickness_m = face_thickness_m(c, leaf);
  f->mass_kg_m2 = face_mass_kg_m2(c, leaf);
  f->height_key = structure_height_key(c, leaf);
  fire_face_set(c, leaf, &f->fire);
  f->published = evidence_face(c, leaf);
  f->outside = predict_outside_face(c, leaf);
  for (int side = 0; side < 2; side++) f->broken[side] = face_bits(t, i, side);
}

tables *tables_create(arena *a, const space *s) {
  tables *t = arena_alloc(a, sizeof *t);
  const brief *b = s->context->brief;
  *t = (tables){.arena = a, .space = s, .context = s->context, .limits = rules_limits(b)};
  t->fire_asked = b->fire_min > 0;
  for (int i = 0; i < b->target_count; i++)
    if (b->targets[i].metric == METRIC_STC) t->published_asked = true;
  find_examples(t);
  t->face = arena_array(a, (size_t)s->face_count, sizeof *t->face);
  for (int i = 0; i < s->face_count; i++) set_face(t, i, &t->face[i]);
  return t;
}

const face_facts *tables_face(const tables *t, int index) {
  return &t->face[index];
}

/* ---- cores ---- */

static rule_mask core_bits(const tables *t, const wall *core) {
  const catalog *c = t->context->catalog;
  const brief *b = t->context->brief;
  rule_mask m = bit_unless(structure_bearing_ok(c, b, core, NULL), RULE_LOADBEARING) |
                bit_unless(structure_services_ok(c, b, core, NULL), RULE_SERVICES) |
                bit_unless(structure_studs_ok(c, b, core, NULL), RULE_STUDS) |
                bit_unless(burns_not(t, core), RULE_NONCOMBUSTIBLE);
  for (int s = 0; s < 2; s++)
    m |= bit_unless(structure_fastening_ok(c, b, core, s, NULL), RULE_FASTENING_A + s);
  if (b->shear_side != CATALOG_NONE) {
    wall w = *core;
    if (t->example.shear != CATALOG_NONE)
      w.side[b->shear_side] = t->space->faces[t->example.shear_face];
    m |= bit_unless(shear(t, &w), RULE_SHEAR);
  }
  id_bits ids = {t->context, 0};
  judge_records(core, note_id, &ids);
  return m | ids.broken;
}

/* A leaf of each height key, or CATALOG_NONE. */
static void key_examples(const tables *t, int example[TABLES_HEIGHT_KEYS]) {
  for (int k = 0; k < TABLES_HEIGHT_KEYS; k++) example[k] = CATALOG_NONE;
  for (int i = t->space->face_count - 1; i >= 0; i--) example[t->face[i].height_key] = i;
}

static void set_heights(const tables *t, const wall *core, core_facts *out) {
  int example[TABLES_HEIGHT_KEYS];
  key_examples(t, example);
  for (int i = 0; i < TABLES_HEIGHT_KEYS; i++)
    for (int j = 0; j < TABLES_HEIGHT_KEYS; j++) {
      if (example[i] == CATALOG_NONE || example[j] == CATALOG_NONE) continue;
      wall w = *core;
      w.side[SIDE_A] = t->space->faces[example[i]];
      w.side[SIDE_B] = t->space->faces[example[j]];
      out->height_mm[i][j] =
          rules_height(structure_height(NULL, t->context->catalog, t->context->brief, &w).limit_m);
    }
}

void tables_core(tables *t, int core, core_facts *out) {
  const judge_context *x = t->context;
  const wall *w = &t->space->cores[core];
  out->core = core;
  out->thickness_m = wall_thickness_m(x->catalog, w);
  out->mass_kg_m2 = wall_mass_kg_m2(x->catalog, w, x->brief->height_m);
  if (t->fire_asked) fire_core_set(x->catalog, x->brief, w, &out->fire);
  if (t->published_asked)
    evidence_core_set(x->catalog, w, &out->published);
  else
    out->published.count = 0;
  set_heights(t, w, out);
  out->broken = core_bits(t, w);
  out->family = predict_family(x->catalog, w);
  out->outside = predict_outside_core(x->catalog, w);
  out->cost = cost_core(x->prices, x->catalog, x->brief, w);
}

/* ---- walls ---- */

static int spacing_index(tables *t, const wall *core, int side) {
  const wall_mount *m = &core->mount[side];
  int mm = m->mount == CATALOG_NONE ? core->spacing_mm : m->spacing_mm;
  for (int i = 0; i < t->spacing_count; i++)
    if (t->spacing[i] == mm) return i;
  if (t->spacing_count == SPACINGS_MAX) return CATALOG_NONE;
  t->spacing[t->spacing_count] = mm;
  return t->spacing_count++;
}

static cost_parts leaf_cost(const tables *t, int core, int face_a, int face_b) {
  wall w = space_wall(t->space, core, face_a, face_b);
  return cost_leaves(t->context->prices, t->context->catalog, t->context->brief, &w);
}

/* What two leaves cost depends on the spacing of their supports only: each pair is worked out once.
 */
static cost_parts cached_cost(tables *t, int core, int face_a, int face_b) {
  const wall *k = &t->space->cores[core];
  size_t n = (size_t)t->space->face_count;
  int i = n <= CACHED_FACES ? spacing_index(t, k, SIDE_A) : CATALOG_NONE;
  int j = n <= CACHED_FACES ? spacing_index(t, k, SIDE_B) : CATALOG_NONE;
  if (i == CATALOG_NONE || j == CATALOG_NONE) return leaf_cost(t, core, face_a, face_b);
  if (!t->leaves[i][j]) {
    t->leaves[i][j] = arena_array(t->arena, n * n, sizeof *t->leaves[i][j]);
    for (size_t q = 0; q < n * n; q++) t->leaves[i][j][q].hours = -1;
  }
  cost_parts *kept = &t->leaves[i][j][(size_t)face_a * n + (size_t)face_b];
  if (kept->hours < 0) *kept = leaf_cost(t, core, face_a, face_b);
  return *kept;
}

/* Everything but cost, and the rules that ask it. Returns the thickness in metres. */
static double measure(const tables *t, const core_facts *k, int face_a, int face_b,
                      candidate *out) {
  const face_facts *a = &t->face[face_a], *b = &t->face[face_b];
  double thickness_m = k->thickness_m + a->thickness_m + b->thickness_m;
  *out = (candidate){.core = k->core, .face_a = face_a, .face_b = face_b};
  out->is.thickness_tenth_mm = rules_thickness(thickness_m);
  out->is.mass_hundredth = rules_mass(k->mass_kg_m2 + a->mass_kg_m2 + b->mass_kg_m2);
  out->is.height_mm = k->height_mm[a->height_key][b->height_key];
  if (t->fire_asked)
    out->is.fire_min = fire_pair(t->context->catalog, &k->fire, &a->fire, &b->fire, NULL);
  return thickness_m;
}

static void break_rules(const tables *t, const core_facts *k, candidate *out) {
  const face_facts *a = &t->face[out->face_a], *b = &t->face[out->face_b];
  out->broken =
      k->broken | a->broken[SIDE_A] | b->broken[SIDE_B] | rules_broken_by(&t->limits, &out->is);
}

void tables_measure(const tables *t, const core_facts *k, int face_a, int face_b, candidate *out) {
  measure(t, k, face_a, face_b, out);
  break_rules(t, k, out);
}

bool tables_wall(tables *t, const core_facts *k, int face_a, int face_b, candidate *out) {
  cost_parts leaves = cached_cost(t, k->core, face_a, face_b);
  double thickness_m = measure(t, k, face_a, face_b, out);
  cost_total cost = cost_sum(t->context->prices, t->context->brief, thickness_m, k->cost, leaves);
  out->is.total_cents = cost.total_cents;
  out->is.cost_cents = cost.total_cents + cost.floor_value_cents;
  break_rules(t, k, out);
  return !k->cost.missing && !leaves.missing;
}

const wall_row *tables_sound(const tables *t, const core_facts *k, int face_a, int face_b,
                             double *sd) {
  const catalog *c = t->context->catalog;
  const face_facts *a = &t->face[face_a], *b = &t->face[face_b];
  predict_sd_of(c, k->family, k->outside | a->outside | b->outside, sd);
  return k->published.count > 0 ? evidence_pair(c, &k->published, a->published, b->published)
                                : NULL;
}

/* ---- order ---- */

typedef struct ordered_core {
  long long cents;
  int core;
} ordered_core;

static int compare_cores(const void *x, const void *y) {
  const ordered_core *p = x, *q = y;
  if (p->cents != q->cents) return p->cents < q->cents ? -1 : 1;
  return (p->core > q->core) - (p->core < q->core);
}

const int *tables_cores_by_cost(arena *a, const space *s) {
  const judge_context *x = s->context;
  size_t n = (size_t)s->core_count;
  ordered_core *order = arena_array(a, n, sizeof *order);
  int *index = arena_array(a, n, sizeof *index);
  for (size_t k = 0; k < n; k++) {
    cost_parts p = cost_core(x->prices, x->catalog, x->brief, &s->cores[k]);
    order[k] = (ordered_core){p.material_cents + p.labour_cents, (int)k};
  }
  if (n > 0) qsort(order, n, sizeof *order, compare_cores);
  for (size_t k = 0; k < n; k++) index[k] = order[k].core;
  return index;
}
