#include "search/types_rules.h"

#include "search/judge_words.h"

/* Those who ask the same numbers of a wall. */
typedef struct number_group {
  ask_group who;
  rule_limits limits;
  int height; /* index of the height that masses are worked out for */
} number_group;

struct types_rules {
  arena *arena;
  const asks *asks;
  const space *space;
  face_facts *face;
  ask_set *face_keep[2];
  ask_group *frame, *height, *fire, *sized, *shear;
  int frames, heights, fires, sizes, shears;
  number_group *size; /* thickness and mass, of those who limit them */
  double *mass_height_m;
  int mass_heights;
  int height_face[TABLES_HEIGHT_KEYS]; /* a leaf of each key, or CATALOG_NONE */
  space *priced_space; /* per ask: the space as one with a cost limit sees it; no context without */
  judge_context *priced_context;
  bool published_asked;
};

/* ---- who asks the same ---- */

static bool equal(double x, double y) {
  return !(x < y) && !(x > y);
}

/* What the rules of the framing read. */
static bool same_frame(const brief *x, const brief *y) {
  return x->loadbearing == y->loadbearing && x->floors_above == y->floors_above &&
         equal(x->riser_m, y->riser_m) && equal(x->run_m, y->run_m) &&
         x->noncombustible == y->noncombustible && x->fire_min == y->fire_min &&
         x->studs.mil == y->studs.mil && x->studs.fixtures == y->studs.fixtures &&
         x->side[SIDE_A].fastening == y->side[SIDE_A].fastening &&
         x->side[SIDE_B].fastening == y->side[SIDE_B].fastening;
}

static bool same_height(const brief *x, const brief *y) {
  return equal(x->lateral_pa, y->lateral_pa) && equal(x->deflection, y->deflection) &&
         x->top == y->top && x->loadbearing == y->loadbearing && equal(x->height_m, y->height_m);
}

static bool same_fire(const brief *x, const brief *y) {
  return x->fire_min == y->fire_min && x->code == y->code && x->loadbearing == y->loadbearing &&
         x->storeys_given == y->storeys_given && x->storeys == y->storeys &&
         x->sprinklered == y->sprinklered;
}

static bool same_limit(const limit *x, const limit *y) {
  return x->has_min == y->has_min && x->has_max == y->has_max && equal(x->min, y->min) &&
         equal(x->max, y->max);
}

static bool same_size(const brief *x, const brief *y) {
  return same_limit(&x->thickness_m, &y->thickness_m) &&
         same_limit(&x->mass_kg_m2, &y->mass_kg_m2) && equal(x->height_m, y->height_m) &&
         x->thickness_exact == y->thickness_exact;
}

static bool same_shear(const brief *x, const brief *y) {
  return x->shear_side == y->shear_side;
}

static bool limited(const limit *l) {
  return l->has_min || l->has_max;
}

/* ---- leaves ---- */

/* The judgement of a leaf on its own is the tables'; who asks the same of leaves is not looked for,
 * because there are few leaves. Shear is a matter of leaf and core. */
static void set_faces(types_rules *r) {
  const space *s = r->space;
  size_t faces = (size_t)s->face_count;
  for (int side = 0; side < 2; side++)
    r->face_keep[side] = arena_array(r->arena, faces, sizeof *r->face_keep[side]);
  r->face = arena_array(r->arena, faces, sizeof *r->face);
  for (int i = 0; i < r->asks->count; i++) {
    const ask *q = &r->asks->item[i];
    judge_context context = *s->context;
    space seen = *s;
    context.brief = &q->demand;
    seen.context = &context;
    tables *t = tables_create(r->arena, &seen);
    for (int f = 0; f < s->face_count; f++) {
      const face_facts *facts = tables_face(t, f);
      r->face[f] = *facts;
      for (int side = 0; side < 2; side++)
        if ((facts->broken[side] & ~rule_bit(RULE_SHEAR)) == 0)
          ask_set_add(&r->face_keep[side][f], q->bit);
    }
  }
}

static void set_height_faces(types_rules *r) {
  for (int k = 0; k < TABLES_HEIGHT_KEYS; k++) r->height_face[k] = CATALOG_NONE;
  for (int f = r->space->face_count - 1; f >= 0; f--) r->height_face[r->face[f].height_key] = f;
}

/* ---- what is worked out once ---- */

static void set_sizes(types_rules *r) {
  r->sizes = asks_grouped(r->arena, r->asks, same_size, &r->sized);
  r->size = arena_array(r->arena, (size_t)r->sizes, sizeof *r->size);
  r->mass_height_m = arena_array(r->arena, (size_t)r->sizes, sizeof *r->mass_height_m);
  int kept = 0;
  for (int g = 0; g < r->sizes; g++) {
    const brief *b = r->sized[g].example;
    if (!limited(&b->thickness_m) && !limited(&b->mass_kg_m2)) continue;
    int h = 0;
    while (h < r->mass_heights && !equal(r->mass_height_m[h], b->height_m)) h++;
    if (h == r->mass_heights) r->mass_height_m[r->mass_heights++] = b->height_m;
    r->size[kept++] = (number_group){r->sized[g], rules_limits(b), h};
  }
  r->sizes = kept;
}

/* A limit on cost is asked by few, if any: they have tables of their own. */
static void set_priced(types_rules *r) {
  size_t n = (size_t)r->asks->count;
  r->priced_space = arena_array(r->arena, n, sizeof *r->priced_space);
  r->priced_context = arena_array(r->arena, n, sizeof *r->priced_context);
  for (size_t i = 0; i < n; i++) {
    const brief *b = &r->asks->item[i].demand;
    if (!b->cost_per_m2.has_max) continue;
    r->priced_context[i] = *r->space->context;
    r->priced_context[i].brief = b;
    r->priced_space[i] = *r->space;
    r->priced_space[i].context = &r->priced_context[i];
  }
}

/* Groups that ask for something; the rest of the asks has every wall keep it. */
static int keep_asking(ask_group *g, int count, bool (*asking)(const brief *b)) {
  int kept = 0;
  for (int i = 0; i < count; i++)
    if (asking(g[i].example)) g[kept++] = g[i];
  return kept;
}

static bool asks_fire(const brief *b) {
  return b->fire_min > 0;
}
static bool asks_shear(const brief *b) {
  return b->shear_side != CATALOG_NONE;
}

types_rules *types_rules_create(arena *a, const asks *k, const space *s) {
  types_rules *r = arena_alloc(a, sizeof *r);
  *r = (types_rules){.arena = a, .asks = k, .space = s};
  set_faces(r);
  set_height_faces(r);
  r->frames = asks_grouped(a, k, same_frame, &r->frame);
  r->heights = asks_grouped(a, k, same_height, &r->height);
  r->fires = asks_grouped(a, k, same_fire, &r->fire);
  r->fires = keep_asking(r->fire, r->fires, asks_fire);
  r->shears = asks_grouped(a, k, same_shear, &r->shear);
  r->shears = keep_asking(r->shear, r->shears, asks_shear);
  set_sizes(r);
  set_priced(r);
  for (int i = 0; i < k->count; i++)
    for (int t = 0; t < k->item[i].demand.target_count; t++)
      r->published_asked |= k->item[i].demand.targets[t].metric == METRIC_STC;
  return r;
}

types_core *types_core_create(arena *a, const types_rules *r) {
  types_core *k = arena_alloc(a, sizeof *k);
  k->fire = arena_array(a, (size_t)r->fires, sizeof *k->fire);
  k->mass_kg_m2 = arena_array(a, (size_t)r->mass_heights, sizeof *k->mass_kg_m2);
  k->priced = arena_array(a, (size_t)r->asks->count, sizeof *k->priced);
  k->dear = arena_array(a, (size_t)r->asks->count, sizeof *k->dear);
  for (int i = 0; i < r->asks->count; i++) {
    if (!r->priced_space[i].context) continue;
    k->dear[i] = tables_create(a, &r->priced_space[i]);
    k->priced[i] = arena_alloc(a, sizeof *k->priced[i]);
  }
  return k;
}

/* ---- cores ---- */

static bool frame_keeps(const catalog *c, const brief *b, const wall *w) {
  return structure_bearing_ok(c, b, w, NULL) && structure_services_ok(c, b, w, NULL) &&
         structure_noncombustible_ok(c, b, w, NULL) && structure_studs_ok(c, b, w, NULL) &&
         structure_fastening_ok(c, b, w, SIDE_A, NULL) &&
         structure_fastening_ok(c, b, w, SIDE_B, NULL);
}

static bool note_without(void *user, catalog_kind kind, int index) {
  const types_rules *const *u = user;
  const judge_context *x = (*u)->space->context;
  const char *id = catalog_id(x->catalog, (catalog_ref){kind, index});
  if (rules_without(x->brief, kind, id) == 0 && rules_only_allows(x->catalog, x->brief, kind, id))
    return true;
  *(const types_rules **)user = NULL;
  return false;
}

/* `without` and `only` are the whole project's. */
static bool records_allowed(const types_rules *r, const wall *core) {
  const types_rules *allowed = r;
  judge_records(core, note_without, &allowed);
  return allowed != NULL;
}

static void set_keep(const types_rules *r, const wall *w, types_core *out) {
  out->keep = (ask_set){{0}};
  if (!records_allowed(r, w)) return;
  out->keep = r->asks->all;
  for (int g = 0; g < r->frames; g++)
    if (!frame_keeps(r->space->context->catalog, r->frame[g].example, w))
      ask_set_drop(&out->keep, &r->frame[g].members);
}

static void set_heights(const types_rules *r, const wall *core, types_core *out) {
  for (int i = 0; i < TABLES_HEIGHT_KEYS; i++)
    for (int j = 0; j < TABLES_HEIGHT_KEYS; j++) {
      out->height[i][j] = out->keep;
      if (r->height_face[i] == CATALOG_NONE || r->height_face[j] == CATALOG_NONE) continue;
      wall w = *core;
      w.side[SIDE_A] = r->space->faces[r->height_face[i]];
      w.side[SIDE_B] = r->space->faces[r->height_face[j]];
      for (int g = 0; g < r->heights; g++) {
        const brief *b = r->height[g].example;
        double limit_m = structure_height(NULL, r->space->context->catalog, b, &w).limit_m;
        if (rules_height(limit_m) < rules_height(b->height_m))
          ask_set_drop(&out->height[i][j], &r->height[g].members);
      }
    }
}

void types_core_set(const types_rules *r, int core, types_core *out) {
  const catalog *c = r->space->context->catalog;
  const wall *w = &r->space->cores[core];
  out->core = core;
  set_keep(r, w, out);
  if (ask_set_empty(&out->keep)) return;
  out->thickness_m = wall_thickness_m(c, w);
  out->family = predict_family(c, w);
  out->outside = predict_outside_core(c, w);
  out->published.count = 0;
  if (r->published_asked) evidence_core_set(c, w, &out->published);
  set_heights(r, w, out);
  for (int g = 0; g < r->fires; g++) fire_core_set(c, r->fire[g].example, w, &out->fire[g]);
  for (int h = 0; h < r->mass_heights; h++)
    out->mass_kg_m2[h] = wall_mass_kg_m2(c, w, r->mass_height_m[h]);
  for (int i = 0; i < r->asks->count; i++)
    if (out->dear[i]) tables_core(out->dear[i], core, out->priced[i]);
}

const ask_set *types_face_keep(const types_rules *r, int side, int leaf) {
  return &r->face_keep[side][leaf];
}

const face_facts *types_face(const types_rules *r, int leaf) {
  return &r->face[leaf];
}

/* ---- walls ---- */

static void drop_unsized(const types_rules *r, const types_core *k, const face_facts *a,
                         const face_facts *b, ask_set *who) {
  const rule_mask size = rule_bit(RULE_THICKNESS_MAX) | rule_bit(RULE_THICKNESS_MIN) |
                         rule_bit(RULE_MASS_MAX) | rule_bit(RULE_MASS_MIN);
  wall_numbers n = {0};
  n.thickness_tenth_mm = rules_thickness(k->thickness_m + a->thickness_m + b->thickness_m);
  for (int g = 0; g < r->sizes; g++) {
    const number_group *q = &r->size[g];
    n.mass_hundredth = rules_mass(k->mass_kg_m2[q->height] + a->mass_kg_m2 + b->mass_kg_m2);
    if (rules_broken_by(&q->limits, &n) & size) ask_set_drop(who, &q->who.members);
  }
}

static void drop_dear(const types_rules *r, const types_core *k, int face_a, int face_b,
                      ask_set *who) {
  for (int i = 0; i < r->asks->count; i++) {
    int bit = r->asks->item[i].bit;
    candidate c;
    if (!k->dear[i] || !ask_set_has(who, bit)) continue;
    tables_wall(k->dear[i], k->priced[i], face_a, face_b, &c);
    if (c.broken & rule_bit(RULE_COST_MAX)) who->word[bit / 64] &= ~(UINT64_C(1) << bit % 64);
  }
}

static void drop_unbraced(const types_rules *r, const types_core *k, int face_a, int face_b,
                          ask_set *who) {
  wall w = space_wall(r->space, k->core, face_a, face_b);
  for (int g = 0; g < r->shears; g++)
    if (!structure_shear_ok(r->space->context->catalog, r->shear[g].example, &w, NULL))
      ask_set_drop(who, &r->shear[g].members);
}

ask_set types_keep(const types_rules *r, const types_core *k, int face_a, int face_b, ask_set who) {
  const face_facts *a = &r->face[face_a], *b = &r->face[face_b];
  who = ask_set_both(who, &k->height[a->height_key][b->height_key]);
  if (r->sizes > 0) drop_unsized(r, k, a, b, &who);
  for (int g = 0; g < r->fires; g++) {
    const ask_group *q = &r->fire[g];
    int minutes = fire_pair(r->space->context->catalog, &k->fire[g], &a->fire, &b->fire, NULL);
    if (minutes < q->example->fire_min) ask_set_drop(&who, &q->members);
  }
  if (r->shears > 0) drop_unbraced(r, k, face_a, face_b, &who);
  drop_dear(r, k, face_a, face_b, &who);
  return who;
}
