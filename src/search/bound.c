#include "search/bound.h"

#include <math.h>
#include <stdlib.h>

/* Lines of the takeoff that the leaves of a wall can share: a board for each layer of the fuller
 * leaf, screws, two levels of finish. Each may be rounded by a cent otherwise when leaves are priced
 * apart, material and labour; tax, profit and floor value once. */
enum { SHARED_LINES = WALL_MAX_LAYERS + 3, SINGLE_LINES = 4, THICKNESS_GROUPS = 8 };

typedef struct maker {
  arena *arena;
  const space *space;
  const tables *tables;
  double material, labour, thickness; /* cents of cost a cent, a cent, a metre */
  bool by_board;                      /* most pairs are refused for their face boards */
} maker;

/* ---- keys ---- */

static void set_weights(maker *m) {
  const price_book *book = m->space->context->prices;
  const brief *b = m->space->context->brief;
  m->labour = 1 + book->overhead_profit;
  m->material = (1 + book->sales_tax) * m->labour;
  m->thickness = 100 * b->length_m * b->floor_area_value_per_m2;
}

static double key_of(const maker *m, cost_parts p, double thickness_m) {
  return (double)p.material_cents * m->material + (double)p.labour_cents * m->labour +
         thickness_m * m->thickness;
}

/* ---- lists ---- */

typedef struct entry {
  int face, board;
  double key, thickness_m, mass_kg_m2;
} entry;

static int order_of(double x, double y) {
  return (x > y) - (x < y);
}

static int by_key(const void *x, const void *y) {
  const entry *p = x, *q = y;
  int order = order_of(p->key, q->key);
  return order ? order : (p->face > q->face) - (p->face < q->face);
}

static int by_thickness(const void *x, const void *y) {
  const entry *p = x, *q = y;
  int order = order_of(p->thickness_m, q->thickness_m);
  return order ? order : by_key(x, y);
}

static int by_board(const void *x, const void *y) {
  const entry *p = x, *q = y;
  int order = (p->board > q->board) - (p->board < q->board);
  return order ? order : by_key(x, y);
}

/* The leaves of a support on one side. `core` is one that has it there. */
static int collect(const maker *m, int core, int side, entry *out) {
  const space *s = m->space;
  const judge_context *x = s->context;
  size_t row = (size_t)s->support[side][core] * (size_t)s->face_count;
  int count = 0;
  for (int i = 0; i < s->face_count; i++) {
    const face_facts *f = tables_face(m->tables, i);
    if (!s->on_support[row + (size_t)i] || f->broken[side]) continue;
    wall w = s->cores[core];
    w.side[side] = s->faces[i];
    cost_parts p = cost_leaves(x->prices, x->catalog, x->brief, &w);
    if (p.missing) continue;
    out[count++] = (entry){i, s->faces[i].layer[0], key_of(m, p, f->thickness_m), f->thickness_m,
                           f->mass_kg_m2};
  }
  return count;
}

/* Of entries by key, those that nothing cheaper is as heavy as. */
static int keep_heavy(entry *e, int count) {
  double heaviest = 0;
  int kept = 0;
  for (int i = 0; i < count; i++) {
    if (e[i].mass_kg_m2 <= heaviest) continue;
    heaviest = e[i].mass_kg_m2;
    e[kept++] = e[i];
  }
  return kept;
}

static void start_group(bound_list *l, const entry *e) {
  l->group_first[l->groups] = l->count;
  l->group_thickness_m[l->groups++] = e->thickness_m;
}

/* Puts sorted entries into groups: by board, or by thickness where it is limited, or one. */
static void set_groups(const maker *m, entry *e, int count, bound_list *l) {
  bool thin = m->space->context->brief->thickness_m.has_max;
  int part = thin ? (count + THICKNESS_GROUPS - 1) / THICKNESS_GROUPS : count;
  int cap = m->by_board ? count : THICKNESS_GROUPS;
  l->group_first = arena_array(m->arena, (size_t)cap + 1, sizeof *l->group_first);
  l->group_thickness_m = arena_array(m->arena, (size_t)cap, sizeof *l->group_thickness_m);
  qsort(e, (size_t)count, sizeof *e, m->by_board ? by_board : by_thickness);
  for (int i = 0; i < count && !m->by_board; i += part)
    qsort(e + i, (size_t)(i + part < count ? part : count - i), sizeof *e, by_key);
  for (int i = 0; i < count; i++) {
    if (m->by_board ? i == 0 || e[i].board != e[i - 1].board : i % part == 0) start_group(l, &e[i]);
    double *thinnest = &l->group_thickness_m[l->groups - 1];
    *thinnest = fmin(*thinnest, e[i].thickness_m);
    l->face[l->count] = e[i].face;
    l->key[l->count++] = e[i].key;
  }
  l->group_first[l->groups] = l->count;
}

static void set_list(const maker *m, entry *e, int count, bound_list *l) {
  const space *s = m->space;
  *l = (bound_list){.key_least = HUGE_VAL,
                    .thickness_least_m = HUGE_VAL,
                    .mass_least_kg_m2 = HUGE_VAL};
  if (count == 0) return;
  l->face = arena_array(m->arena, (size_t)count, sizeof *l->face);
  l->key = arena_array(m->arena, (size_t)count, sizeof *l->key);
  set_groups(m, e, count, l);
  face *faces = arena_array(m->arena, (size_t)count, sizeof *faces);
  for (int i = 0; i < count; i++) {
    const face_facts *f = tables_face(m->tables, l->face[i]);
    faces[i] = s->faces[l->face[i]];
    l->key_least = fmin(l->key_least, l->key[i]);
    l->thickness_least_m = fmin(l->thickness_least_m, f->thickness_m);
    l->mass_least_kg_m2 = fmin(l->mass_least_kg_m2, f->mass_kg_m2);
    l->fire_needs |= f->fire.needs;
    l->fire_membrane = fmax(l->fire_membrane, f->fire.membrane);
  }
  l->leaves = kernel_leaves_create(m->arena, s->context->catalog, faces, count);
}

static void make_lists(const maker *m, bound *out) {
  const space *s = m->space;
  size_t lists = 2 * (size_t)s->support_count;
  bool *made = arena_array(m->arena, lists, sizeof *made);
  entry *e = arena_array(m->arena, (size_t)s->face_count, sizeof *e);
  out->all = arena_array(m->arena, lists, sizeof *out->all);
  out->few = arena_array(m->arena, lists, sizeof *out->few);
  for (int k = 0; k < 2 * s->core_count; k++) {
    int core = k / 2, side = k % 2;
    size_t at = 2 * (size_t)s->support[side][core] + (size_t)side;
    if (made[at]) continue;
    made[at] = true;
    int count = collect(m, core, side, e);
    set_list(m, e, count, &out->all[at]);
    if (count > 0) qsort(e, (size_t)count, sizeof *e, by_key);
    set_list(m, e, keep_heavy(e, count), &out->few[at]);
  }
}

/* ---- cores ---- */

typedef struct ordered_core {
  double least;
  int core;
} ordered_core;

static int compare_cores(const void *x, const void *y) {
  const ordered_core *p = x, *q = y;
  int order = order_of(p->least, q->least);
  return order ? order : (p->core > q->core) - (p->core < q->core);
}

static void order_cores(const maker *m, bound *out) {
  const space *s = m->space;
  const judge_context *x = s->context;
  size_t n = (size_t)s->core_count;
  ordered_core *order = arena_array(m->arena, n, sizeof *order);
  out->core_key = arena_array(m->arena, n, sizeof *out->core_key);
  out->least = arena_array(m->arena, n, sizeof *out->least);
  out->order = arena_array(m->arena, n, sizeof *out->order);
  for (int k = 0; k < s->core_count; k++) {
    cost_parts p = cost_core(x->prices, x->catalog, x->brief, &s->cores[k]);
    out->core_key[k] = key_of(m, p, wall_thickness_m(x->catalog, &s->cores[k]));
    out->least[k] = out->core_key[k] + bound_leaves(out, false, k, SIDE_A)->key_least +
                    bound_leaves(out, false, k, SIDE_B)->key_least;
    if (p.missing) out->least[k] = HUGE_VAL;
    order[k] = (ordered_core){out->least[k], k};
  }
  qsort(order, n, sizeof *order, compare_cores);
  for (size_t k = 0; k < n; k++) out->order[k] = order[k].core;
}

/* ---- the whole ---- */

void bound_create(arena *a, const space *s, const tables *t, bound *out) {
  size_t faces = (size_t)s->face_count;
  maker m = {.arena = a, .space = s, .tables = t};
  set_weights(&m);
  m.by_board = 2 * (size_t)s->partner_first[faces] < faces * faces;
  *out = (bound){.space = s};
  out->slack = SHARED_LINES * (m.material + m.labour) + SINGLE_LINES;
  make_lists(&m, out);
  order_cores(&m, out);
}

const bound_list *bound_leaves(const bound *b, bool few, int core, int side) {
  const bound_list *list = few ? b->few : b->all;
  return &list[2 * (size_t)b->space->support[side][core] + (size_t)side];
}

int bound_within(const bound_list *l, int group, double key) {
  int low = l->group_first[group], high = l->group_first[group + 1];
  while (low < high) {
    int middle = (low + high) / 2;
    if (l->key[middle] <= key)
      low = middle + 1;
    else
      high = middle;
  }
  return low - l->group_first[group];
}
