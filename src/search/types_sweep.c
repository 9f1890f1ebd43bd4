#include "search/types_sweep.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "acoustics/predict.h"
#include "base/threads.h"
#include "wall/line.h"

/* The kernel may name a rating one step of 0.1 dB off the reference's. */
static const double kernel_step_db = 0.1;
/* A rating that reaches every target: of metrics that have no bound. */
static const double any_rating_db = 150;

/* A wall by its place in the sweep. */
typedef struct sweep_place {
  int order, face_a, face_b; /* order: of its core; TYPES_NONE: no wall */
} sweep_place;

/* One thread's part of the sweep. */
typedef struct looker {
  types_sweep *all;
  arena *arena;
  types_front front;
  types_core *core;
  types_sound *sound;
  kernel_core *kernel;
  int order;                   /* of the core */
  bool kernel_set;             /* the kernel holds the core */
  double *core_cents;          /* per class */
  double *row_cents[2];        /* with the leaf on A, as drawn and turned */
  ask_set *who;                /* per leaf on B: who finds all rules kept but those of sound */
  int *open;                   /* leaves on B that somebody may take */
  double *bound;               /* per leaf on B: STC at most */
  double *exact[METRIC_COUNT]; /* per open leaf */
  sound_metric metric[METRIC_COUNT];
  int metrics;
  bool bounded;     /* some target is one of STC */
  sound_aims *aims; /* per class, where margin is the aim */
  types_entry entry;
  long long walls;
  sweep_place unpriced; /* the first wall that was left out for want of a price */
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

static void set_margin_room(looker *k, size_t classes) {
  const schedule *s = k->all->x->schedule;
  k->entry.margin_least = arena_array(k->arena, classes, sizeof *k->entry.margin_least);
  k->entry.margin_most = arena_array(k->arena, classes, sizeof *k->entry.margin_most);
  k->aims = arena_array(k->arena, classes, sizeof *k->aims);
  for (size_t c = 0; c < classes; c++) sound_aims_set(&s->classes[c].demand, &k->aims[c]);
}

static void set_metrics(looker *k, size_t faces) {
  k->metrics = types_sound_metrics(k->sound, k->metric);
  for (int i = 0; i < k->metrics; i++) {
    k->bounded = k->bounded || k->metric[i] == METRIC_STC;
    k->exact[k->metric[i]] = arena_array(k->arena, faces, sizeof *k->exact[0]);
  }
}

static void *looker_create(void *shared, arena *a, int worker) {
  types_sweep *s = shared;
  looker *k = arena_alloc(a, sizeof *k);
  size_t faces = (size_t)s->space.face_count, n = (size_t)s->x->schedule->class_count;
  (void)worker;
  *k = (looker){.all = s, .arena = a, .unpriced = {TYPES_NONE, 0, 0}};
  types_front_init(&k->front, a, s->cost, &s->goods, (int)n);
  k->core = types_core_create(a, s->rules);
  k->sound = types_sound_create(a, &s->asks, s->x->catalog);
  k->kernel = kernel_core_create(a, s->x->catalog);
  k->core_cents = arena_array(a, n, sizeof *k->core_cents);
  for (int way = 0; way < 2; way++)
    k->row_cents[way] = arena_array(a, n, sizeof *k->row_cents[way]);
  k->who = arena_array(a, faces, sizeof *k->who);
  k->open = arena_array(a, faces, sizeof *k->open);
  k->bound = arena_array(a, faces, sizeof *k->bound);
  set_metrics(k, faces);
  k->entry.of = arena_array(a, n, sizeof *k->entry.of);
  k->entry.worst = arena_array(a, n, sizeof *k->entry.worst);
  k->entry.best = arena_array(a, n, sizeof *k->entry.best);
  if (s->x->project->aim == AIM_MARGIN) set_margin_room(k, n);
  return k;
}

/* ---- one wall ---- */

static double cheaper_way(const ask_set *who, int c, double straight, double turned) {
  double cents = ask_set_has(who, c) ? straight : INFINITY;
  return ask_set_has(who, ASK_TURNED + c) ? fmin(cents, turned) : cents;
}

/* What goods differ in by the way round is not told here: see need_in of the front. */
static void set_cents(looker *k) {
  types_entry *e = &k->entry;
  const double *leaf[2] = {e->part[0][PART_LEAF_B]->cents, e->part[1][PART_LEAF_B]->cents};
  e->classes = 0;
  for (int c = 0; c < k->front.all_classes; c++) {
    e->worst[c] = INFINITY;
    if (!ask_set_class(&e->perhaps, c)) continue;
    double straight = k->row_cents[0][c] + leaf[0][c], turned = k->row_cents[1][c] + leaf[1][c];
    double stray = types_cost_class(k->all->cost, c)->stray_cents;
    e->worst[c] = cheaper_way(&e->certain, c, straight, turned) + stray;
    e->best[e->classes] = cheaper_way(&e->perhaps, c, straight, turned) - stray;
    e->of[e->classes++] = c;
  }
}

static void set_margins(looker *k, const types_heard *h) {
  types_entry *e = &k->entry;
  double sd[METRIC_COUNT], low[METRIC_COUNT], high[METRIC_COUNT];
  predict_sd_of(k->all->x->catalog, h->family, h->outside, sd);
  for (int m = 0; m < METRIC_COUNT; m++) {
    low[m] = h->exact[m] - kernel_step_db;
    high[m] = h->exact[m] + kernel_step_db;
  }
  for (int i = 0; i < e->classes; i++) {
    int c = e->of[i];
    sound_bounds b;
    sound_bound(&k->aims[c], low, sd, h->match, &b);
    e->margin_least[c] = b.promised_least;
    sound_bound(&k->aims[c], high, sd, h->match, &b);
    e->margin_most[c] = b.promised_most;
  }
}

/* Everything of the entry but who finds that it fits. */
static void set_wall(looker *k, int face_a, int face_b) {
  types_sweep *s = k->all;
  types_entry *e = &k->entry;
  e->core = k->core->core;
  e->face_a = face_a;
  e->face_b = face_b;
  for (int way = 0; way < 2; way++) {
    e->part[way][PART_LEAF_A] = types_cost_leaf(s->cost, e->core, SIDE_A, face_a, way);
    e->part[way][PART_LEAF_B] = types_cost_leaf(s->cost, e->core, SIDE_B, face_b, 1 - way);
  }
  e->needed = false;
  double thickness_m = k->core->thickness_m + types_face(s->rules, face_a)->thickness_m +
                       types_face(s->rules, face_b)->thickness_m;
  e->thickness_nm = s->x->project->floor_area_max_m2 > 0 ? llround(thickness_m * 1e9) : 0;
}

static types_heard heard_of(const looker *k, int face_a, int face_b, const double *exact) {
  const types_sweep *s = k->all;
  const face_facts *a = types_face(s->rules, face_a), *b = types_face(s->rules, face_b);
  types_heard h = {exact, k->core->family, k->core->outside | a->outside | b->outside, NULL};
  if (k->core->published.count > 0)
    h.match = evidence_pair(s->x->catalog, &k->core->published, a->published, b->published);
  return h;
}

/* The wall with its ratings. */
static void look_at(looker *k, int face_a, int face_b, const double *exact) {
  types_entry *e = &k->entry;
  types_heard heard = heard_of(k, face_a, face_b, exact);
  e->certain = e->perhaps = k->who[face_b];
  types_sound_who(k->sound, &heard, &e->certain, &e->perhaps);
  if (ask_set_empty(&e->perhaps)) return;
  set_wall(k, face_a, face_b);
  set_cents(k);
  if (e->margin_least) set_margins(k, &heard);
  if (k->all->keep == TYPES_ALL) {
    types_front_keep(&k->front, e);
    return;
  }
  int beaten;
  if (!types_front_refuses(&k->front, e, &beaten)) types_front_add(&k->front, e, beaten);
}

/* Whether the wall is needless or useless already by the best that its ratings may be. */
static bool hopeless(looker *k, int face_a, int face_b) {
  types_entry *e = &k->entry;
  double most[METRIC_COUNT];
  for (int m = 0; m < METRIC_COUNT; m++) most[m] = any_rating_db;
  most[METRIC_STC] = k->bound[face_b];
  types_heard heard = heard_of(k, face_a, face_b, most);
  e->certain = (ask_set){{0}};
  e->perhaps = k->who[face_b];
  types_sound_who(k->sound, &heard, &e->certain, &e->perhaps);
  if (ask_set_empty(&e->perhaps)) return true;
  if (k->all->keep == TYPES_ALL || e->margin_least) return false;
  set_wall(k, face_a, face_b);
  set_cents(k);
  int beaten;
  return types_front_refuses(&k->front, e, &beaten);
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

static void note_unpriced(looker *k, int face_a, int face_b) {
  if (k->unpriced.order == TYPES_NONE) k->unpriced = (sweep_place){k->order, face_a, face_b};
}

/* Who may take the wall, sound apart. Where it is for want of a price that nobody may, the wall is
 * noted. */
static ask_set who_of(looker *k, int face_a, int face_b, ask_set who) {
  const types_sweep *s = k->all;
  who = ask_set_both(who, types_face_keep(s->rules, SIDE_B, face_b));
  if (ask_set_empty(&who)) return who;
  who = types_keep(s->rules, k->core, face_a, face_b, who);
  if (ask_set_empty(&who)) return who;
  int core = k->core->core, classes = k->front.all_classes;
  for (int p = 0; p < PART_LEAF_A; p++) drop_missing(k->entry.part[0][p], classes, &who);
  drop_missing(types_cost_leaf(s->cost, core, SIDE_A, face_a, 0), classes, &who);
  drop_missing(types_cost_leaf(s->cost, core, SIDE_B, face_b, 1), classes, &who);
  if (ask_set_empty(&who)) note_unpriced(k, face_a, face_b);
  return who;
}

/* Leaves on B that make walls that somebody may take, sound apart. */
static int open_row(looker *k, int face_a, const ask_set *may) {
  int count = 0;
  for (int j = 0; j < k->all->space.face_count; j++) {
    bool legal = space_legal(&k->all->space, k->core->core, face_a, j);
    k->walls += legal;
    if (!legal) continue;
    k->who[j] = who_of(k, face_a, j, *may);
    if (!ask_set_empty(&k->who[j])) k->open[count++] = j;
  }
  return count;
}

static void set_row_cents(looker *k, int face_a) {
  for (int way = 0; way < 2; way++) {
    const double *leaf = types_cost_leaf(k->all->cost, k->core->core, SIDE_A, face_a, way)->cents;
    for (int c = 0; c < k->front.all_classes; c++)
      k->row_cents[way][c] = k->core_cents[c] + leaf[c];
  }
}

/* Drops leaves on B that need no rating. */
static int drop_hopeless(looker *k, int face_a, int count) {
  int first = k->open[0], last = k->open[count - 1], kept = 0;
  if (k->bounded)
    kernel_bound(k->kernel, k->all->leaves, face_a, first, last - first + 1, k->bound + first);
  for (int i = 0; i < count; i++)
    if (!hopeless(k, face_a, k->open[i])) k->open[kept++] = k->open[i];
  return kept;
}

static void look_at_row(looker *k, int face_a) {
  const types_sweep *s = k->all;
  ask_set may = ask_set_both(k->core->keep, types_face_keep(s->rules, SIDE_A, face_a));
  int count = open_row(k, face_a, &may);
  if (count == 0) return;
  set_row_cents(k, face_a);
  if (k->metrics > 0) {
    if (!k->kernel_set) kernel_core_set(k->kernel, &s->space.cores[k->core->core]);
    k->kernel_set = true;
    count = drop_hopeless(k, face_a, count);
  }
  for (int i = 0; i < k->metrics && count > 0; i++)
    kernel_rate_listed(k->kernel, s->leaves, face_a, s->leaves, k->open, count, k->metric[i],
                       k->exact[k->metric[i]]);
  for (int i = 0; i < count; i++) {
    double exact[METRIC_COUNT] = {0};
    for (int m = 0; m < k->metrics; m++) exact[k->metric[m]] = k->exact[k->metric[m]][i];
    look_at(k, face_a, k->open[i], exact);
  }
}

/* ---- one core ---- */

static void look_at_core(void *shared, void *own, int order) {
  types_sweep *s = shared;
  looker *k = own;
  int core = s->order[order];
  types_core_set(s->rules, core, k->core);
  k->order = order;
  k->kernel_set = false;
  for (int way = 0; way < 2; way++) types_cost_core(s->cost, core, k->entry.part[way]);
  bool free = s->x->project->same_framing == FRAMING_FREE;
  k->entry.group = free ? 0 : s->group_of[s->space.cores[core].frame];
  k->entry.spare = s->keep == TYPES_AND_SECONDS;
  for (int c = 0; c < k->front.all_classes; c++) {
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
static void set_order(types_sweep *s) {
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
  s->order = arena_array(s->arena, (size_t)cores, sizeof *s->order);
  for (int k = 0; k < cores; k++) s->order[k] = order[k].core;
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
  set_order(s);
}

/* Puts together what the threads left. */
static void merge(types_sweep *s, void *const *own, int threads) {
  types_front whole;
  sweep_place unpriced = {TYPES_NONE, 0, 0};
  types_front_init(&whole, s->arena, s->cost, &s->goods, s->x->schedule->class_count);
  for (int i = 0; i < threads; i++) {
    const looker *k = own[i];
    if (!k) continue;
    s->walls += k->walls;
    if (k->unpriced.order != TYPES_NONE &&
        (unpriced.order == TYPES_NONE || k->unpriced.order < unpriced.order))
      unpriced = k->unpriced;
    for (int j = 0; j < k->front.count; j++) {
      types_entry *e = k->front.item[j];
      int beaten = 0;
      if (s->keep == TYPES_ALL)
        types_front_keep(&whole, e);
      else if (!types_front_refuses(&whole, e, &beaten))
        types_front_add(&whole, e, beaten);
    }
  }
  s->item = whole.item;
  s->count = whole.count;
  if (unpriced.order == TYPES_NONE) return;
  wall w = space_wall(&s->space, s->order[unpriced.order], unpriced.face_a, unpriced.face_b);
  s->unpriced = line_print(s->arena, s->x->catalog, &w);
}

void types_sweep_run(arena *a, const plan_context *x, int keep, types_sweep *out) {
  *out = (types_sweep){.arena = a, .x = x, .keep = keep};
  set_axes(out);
  if (!out->rules || out->asks.count == 0) return;
  int threads = threads_count(0);
  void **own = arena_array(a, (size_t)threads, sizeof *own);
  threads_work work = {looker_create, look_at_core, out};
  threads_run(a, threads, out->space.core_count, &work, own);
  merge(out, own, threads);
}
