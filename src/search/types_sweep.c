#include "search/types_sweep.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "acoustics/predict.h"
#include "wall/line.h"


/* One thread's part of the sweep. */
typedef struct looker {
  types_sweep *all;
  arena *arena;
  types_front front;
  types_core *core;
  types_sound *sound;
  kernel_core *kernel;
  bool kernel_set;      /* the kernel holds the core */
  int classes;
  double *core_cents;   /* per class */
  double *row_cents[2]; /* with the leaf on A, as drawn and turned */
  ask_set *who;         /* per leaf on B: who finds all rules kept but those of sound */
  double *exact;        /* METRIC_COUNT x face_count */
  sound_metric metric[METRIC_COUNT];
  int metrics;
  sound_aims *aims; /* per class, where margin is the aim */
  types_entry entry;
  long long walls;
  int unpriced[3]; /* core and leaves of the first wall without a price; TYPES_NONE: none */
} looker;

/* ---- the axes ---- */

/* What all rooms of the project ask of the space; any wall may be used either way round. */
static space_wish wish_of(const schedule *s) {
  space_wish all = {.mirror_once = true};
  for (int c = 0; c < s->class_count; c++) {
    space_wish one = space_wishes(&s->classes[c].demand);
    all.finishes_mixed = all.finishes_mixed || one.finishes_mixed;
    all.finishes_differ = all.finishes_differ || one.finishes_differ;
  }
  return all;
}

const char *types_group_name(const frame *f) {
  if (f->group) return f->group;
  return f->material == FRAME_WOOD ? "wood" : "steel";
}

static void set_groups(types_sweep *s) {
  size_t n = s->x->catalog->frame_count;
  s->group_of = arena_array(s->arena, n, sizeof *s->group_of);
  s->group = arena_array(s->arena, n, sizeof *s->group);
  for (size_t i = 0; i < n; i++) {
    const char *name = types_group_name(&s->x->catalog->frames[i]);
    int g = 0;
    while (g < s->groups && strcmp(s->group[g], name) != 0) g++;
    if (g == s->groups) s->group[s->groups++] = name;
    s->group_of[i] = g;
  }
}

static looker *looker_create(types_sweep *s, arena *a) {
  looker *k = arena_alloc(a, sizeof *k);
  size_t faces = (size_t)s->space.face_count;
  int classes = s->x->schedule->class_count;
  size_t n = (size_t)classes;
  *k = (looker){.all = s, .arena = a, .classes = classes};
  types_front_init(&k->front, a, s->cost, &s->goods, classes, s->keep);
  k->core = types_core_create(a, s->rules);
  k->sound = types_sound_create(a, &s->asks, s->x->catalog);
  k->kernel = kernel_core_create(a, s->x->catalog);
  k->core_cents = arena_array(a, n, sizeof *k->core_cents);
  for (int way = 0; way < 2; way++)
    k->row_cents[way] = arena_array(a, n, sizeof *k->row_cents[way]);
  k->who = arena_array(a, faces, sizeof *k->who);
  k->exact = arena_array(a, METRIC_COUNT * faces, sizeof *k->exact);
  k->metrics = types_sound_metrics(k->sound, k->metric);
  k->entry.worst = arena_array(a, n, sizeof *k->entry.worst);
  k->entry.best = arena_array(a, n, sizeof *k->entry.best);
  k->unpriced[0] = TYPES_NONE;
  if (s->x->project->aim != AIM_MARGIN) return k;
  k->entry.margin_least = arena_array(a, n, sizeof *k->entry.margin_least);
  k->entry.margin_most = arena_array(a, n, sizeof *k->entry.margin_most);
  k->aims = arena_array(a, n, sizeof *k->aims);
  for (int c = 0; c < classes; c++)
    sound_aims_set(&s->x->schedule->classes[c].demand, &k->aims[c]);
  return k;
}

/* ---- one wall ---- */

static void set_cents(looker *k) {
  types_entry *e = &k->entry;
  const double *leaf[2] = {e->part[0][PART_LEAF_B]->cents, e->part[1][PART_LEAF_B]->cents};
  for (int c = 0; c < k->classes; c++) {
    double straight = k->row_cents[0][c] + leaf[0][c], turned = k->row_cents[1][c] + leaf[1][c];
    double worst = ask_set_has(&e->certain, c) ? straight : INFINITY;
    double best = ask_set_has(&e->perhaps, c) ? straight : INFINITY;
    if (ask_set_has(&e->certain, ASK_TURNED + c)) worst = fmin(worst, turned);
    if (ask_set_has(&e->perhaps, ASK_TURNED + c)) best = fmin(best, turned);
    double stray = types_cost_class(k->all->cost, c)->stray_cents;
    e->worst[c] = worst + stray;
    e->best[c] = best - stray;
  }
}

/* The kernel may name a rating one step of 0.1 dB off the reference's: every margin moves by no
 * more. */
static void set_margins(looker *k, const types_heard *h) {
  types_entry *e = &k->entry;
  double sd[METRIC_COUNT], low[METRIC_COUNT], high[METRIC_COUNT];
  predict_sd_of(k->all->x->catalog, h->family, h->outside, sd);
  for (int m = 0; m < METRIC_COUNT; m++) {
    low[m] = h->exact[m] - 0.1;
    high[m] = h->exact[m] + 0.1;
  }
  for (int c = 0; c < k->classes; c++) {
    sound_bounds b;
    if (!ask_set_class(&e->perhaps, c)) continue;
    sound_bound(&k->aims[c], low, sd, h->match, &b);
    e->margin_least[c] = b.promised_least;
    sound_bound(&k->aims[c], high, sd, h->match, &b);
    e->margin_most[c] = b.promised_most;
  }
}

static void set_parts(looker *k) {
  types_entry *e = &k->entry;
  const types_cost *cost = k->all->cost;
  for (int way = 0; way < 2; way++) {
    e->part[way][PART_LEAF_A] = types_cost_leaf(cost, e->core, SIDE_A, e->face_a, way);
    e->part[way][PART_LEAF_B] = types_cost_leaf(cost, e->core, SIDE_B, e->face_b, 1 - way);
  }
  e->needed = false;
}

static void look_at(looker *k, int face_a, int face_b) {
  types_sweep *s = k->all;
  types_entry *e = &k->entry;
  const face_facts *a = types_face(s->rules, face_a), *b = types_face(s->rules, face_b);
  double exact[METRIC_COUNT];
  for (int m = 0; m < METRIC_COUNT; m++)
    exact[m] = k->exact[m * s->space.face_count + face_b];
  types_heard heard = {exact, k->core->family, k->core->outside | a->outside | b->outside, NULL};
  if (k->core->published.count > 0)
    heard.match =
        evidence_pair(s->x->catalog, &k->core->published, a->published, b->published);
  e->certain = e->perhaps = k->who[face_b];
  types_sound_who(k->sound, &heard, &e->certain, &e->perhaps);
  if (ask_set_empty(&e->perhaps)) return;
  e->core = k->core->core;
  e->face_a = face_a;
  e->face_b = face_b;
  set_parts(k);
  set_cents(k);
  if (e->margin_least) set_margins(k, &heard);
  double thickness_m = k->core->thickness_m + a->thickness_m + b->thickness_m;
  e->thickness_nm = s->x->project->floor_area_max_m2 > 0 ? llround(thickness_m * 1e9) : 0;
  int beaten = 0;
  if (s->keep != TYPES_ALL && types_front_refuses(&k->front, e, &beaten)) return;
  types_front_add(&k->front, e, beaten);
}

/* ---- one row: a core and a leaf on A ---- */

static void drop_missing(const cost_part *p, int classes, ask_set *who) {
  if (!p || !p->missing) return;
  for (int c = 0; c < classes; c++) {
    if (!p->missing[c]) continue;
    for (int bit = c; bit < ASKS_MAX; bit += ASK_TURNED)
      who->word[bit / 64] &= ~(UINT64_C(1) << bit % 64);
  }
}

/* Who may take the wall, sound apart. Where it is for want of a price that nobody may, the wall is
 * noted. */
static ask_set who_of(looker *k, int face_a, int face_b, ask_set who) {
  const types_sweep *s = k->all;
  who = ask_set_both(who, types_face_keep(s->rules, SIDE_B, face_b));
  if (ask_set_empty(&who)) return who;
  who = types_keep(s->rules, k->core, face_a, face_b, who);
  if (ask_set_empty(&who)) return who;
  for (int p = 0; p < PART_LEAF_A; p++) drop_missing(k->entry.part[0][p], k->classes, &who);
  int core = k->core->core;
  drop_missing(types_cost_leaf(s->cost, core, SIDE_A, face_a, 0), k->classes, &who);
  drop_missing(types_cost_leaf(s->cost, core, SIDE_B, face_b, 1), k->classes, &who);
  if (ask_set_empty(&who) && k->unpriced[0] == TYPES_NONE) {
    k->unpriced[0] = core;
    k->unpriced[1] = face_a;
    k->unpriced[2] = face_b;
  }
  return who;
}

static int open_row(looker *k, int face_a, const ask_set *may, int *first, int *last) {
  int count = 0;
  for (int j = 0; j < k->all->space.face_count; j++) {
    bool legal = space_legal(&k->all->space, k->core->core, face_a, j);
    k->walls += legal;
    k->who[j] = legal ? who_of(k, face_a, j, *may) : (ask_set){{0}};
    if (ask_set_empty(&k->who[j])) continue;
    if (count++ == 0) *first = j;
    *last = j;
  }
  return count;
}

static void rate_row(looker *k, int face_a, int first, int last) {
  if (k->metrics > 0 && !k->kernel_set)
    kernel_core_set(k->kernel, &k->all->space.cores[k->core->core]);
  k->kernel_set = true;
  for (int i = 0; i < k->metrics; i++)
    kernel_rate(k->kernel, k->all->leaves, face_a, first, last - first + 1, k->metric[i],
                k->exact + (size_t)k->metric[i] * (size_t)k->all->space.face_count + first);
}

static void look_at_row(looker *k, int face_a) {
  const types_sweep *s = k->all;
  ask_set may = ask_set_both(k->core->keep, types_face_keep(s->rules, SIDE_A, face_a));
  int first = 0, last = 0;
  if (open_row(k, face_a, &may, &first, &last) == 0) return;
  rate_row(k, face_a, first, last);
  for (int way = 0; way < 2; way++) {
    const double *leaf = types_cost_leaf(s->cost, k->core->core, SIDE_A, face_a, way)->cents;
    for (int c = 0; c < k->classes; c++) k->row_cents[way][c] = k->core_cents[c] + leaf[c];
  }
  for (int j = first; j <= last; j++)
    if (!ask_set_empty(&k->who[j])) look_at(k, face_a, j);
}

/* ---- one core ---- */

static void look_at_core(looker *k, int core) {
  types_sweep *s = k->all;
  types_core_set(s->rules, core, k->core);
  k->kernel_set = false;
  types_cost_core(s->cost, core, k->entry.part[0]);
  types_cost_core(s->cost, core, k->entry.part[1]);
  k->entry.group = s->x->project->same_framing == FRAMING_FREE
                       ? 0
                       : s->group_of[s->space.cores[core].frame];
  for (int c = 0; c < k->classes; c++) {
    k->core_cents[c] = 0;
    for (int p = 0; p < PART_LEAF_A; p++)
      if (k->entry.part[0][p]) k->core_cents[c] += k->entry.part[0][p]->cents[c];
  }
  for (int i = 0; i < s->space.face_count; i++) look_at_row(k, i);
}

/* ---- the whole ---- */

typedef struct ordered_core {
  double cents;
  int core;
} ordered_core;

static int cheaper_first(const void *x, const void *y) {
  const ordered_core *p = x, *q = y;
  if (p->cents < q->cents || p->cents > q->cents) return p->cents < q->cents ? -1 : 1;
  return (p->core > q->core) - (p->core < q->core);
}

/* The cores, cheapest for the whole project first: what they leave refuses most of the rest. */
static ordered_core *cores_in_order(const types_sweep *s) {
  int cores = s->space.core_count;
  ordered_core *order = arena_array(s->arena, (size_t)cores, sizeof *order);
  for (int k = 0; k < cores; k++) {
    const cost_part *part[PARTS];
    types_cost_core(s->cost, k, part);
    order[k].core = k;
    for (int p = 0; p < PART_LEAF_A; p++)
      for (int c = 0; part[p] && c < s->x->schedule->class_count; c++)
        order[k].cents += part[p]->cents[c];
  }
  qsort(order, (size_t)cores, sizeof *order, cheaper_first);
  return order;
}

static void set_axes(types_sweep *s) {
  const plan_context *x = s->x;
  s->context = (judge_context){x->catalog, x->prices, &x->project->common};
  space_wish wish = wish_of(x->schedule);
  asks_set(s->arena, x, &s->asks);
  goods_set(s->arena, x, &s->goods);
  set_groups(s);
  space_build_for(s->arena, &s->context, &wish, &s->space);
  s->cost = types_cost_create(s->arena, x, &s->goods, &s->space);
  if (s->space.core_count == 0 || s->space.face_count == 0) return;
  s->rules = types_rules_create(s->arena, &s->asks, &s->space);
  s->leaves = kernel_leaves_create(s->arena, x->catalog, s->space.faces, s->space.face_count);
}

void types_sweep_run(arena *a, const plan_context *x, int keep, types_sweep *out) {
  *out = (types_sweep){.arena = a, .x = x, .keep = keep};
  set_axes(out);
  if (!out->rules || out->asks.count == 0) return;
  looker *k = looker_create(out, a);
  const ordered_core *order = cores_in_order(out);
  for (int i = 0; i < out->space.core_count; i++) look_at_core(k, order[i].core);
  out->item = k->front.item;
  out->count = k->front.count;
  out->walls = k->walls;
  if (k->unpriced[0] == TYPES_NONE) return;
  wall w = space_wall(&out->space, k->unpriced[0], k->unpriced[1], k->unpriced[2]);
  out->unpriced = line_print(a, x->catalog, &w);
}
