#include "search/cheapest.h"

#include <limits.h>
#include <math.h>
#include <stdatomic.h>

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "base/threads.h"
#include "search/bound.h"
#include "search/sound.h"
#include "search/tables.h"

enum { CORES_A_BLOCK = 4, LIST_MAX = 512 };

/* What all workers read, and the one thing that they share: nothing dearer than that wins. */
typedef struct hunt {
  const space *space;
  bound bound;
  sound_aims aims;
  rule_limits limits;
  bool few; /* the first round: only leaves that are likely, for a good bound */
  atomic_llong best_cents;
} hunt;

typedef struct finder {
  hunt *hunt;
  const space *space;
  tables *tables;
  kernel_core *kernel;
  core_facts core;
  bool kernel_set; /* the kernel holds this core */
  const bound_list *a, *b;
  uint64_t published[2]; /* needs of the published rows that the core may be */
  unsigned outside;      /* that `screen` holds for */
  double least_stc, screen;
  bool screen_set;
  unsigned char *open; /* by place in the list of B */
  int place[LIST_MAX]; /* of the leaves on B that are left of a run */
  double exact[METRIC_COUNT][LIST_MAX];
  bool found;
  candidate best;
  cheapest_work work;
} finder;

/* ---- what is already known to lose ---- */

/* Above the sum of its keys that a wall may still cost less than the best. */
static double room_of(const finder *f) {
  long long best = atomic_load_explicit(&f->hunt->best_cents, memory_order_relaxed);
  return best == LLONG_MAX ? HUGE_VAL : (double)best + f->hunt->bound.slack;
}

static bool better(const finder *f, const candidate *c) {
  long long best = atomic_load_explicit(&f->hunt->best_cents, memory_order_relaxed);
  if (c->is.cost_cents > best) return false;
  return !f->found || candidate_compare(f->space, c, &f->best) < 0;
}

static void take(finder *f, const candidate *c) {
  atomic_llong *shared = &f->hunt->best_cents;
  long long best = atomic_load(shared);
  f->best = *c;
  f->found = true;
  while (c->is.cost_cents < best && !atomic_compare_exchange_weak(shared, &best, c->is.cost_cents))
    continue;
}

/* ---- one wall ---- */

static bool confirmed(const finder *f, const candidate *c) {
  const judge_context *x = f->space->context;
  prediction p;
  wall w = space_wall(f->space, c->core, c->face_a, c->face_b);
  predict_wall(x->catalog, &w, &p);
  return judge_targets(x, &p, evidence_match(x->catalog, &w), NULL).broken == 0;
}

/* A wall that has been rated: exact[metric][i]. Sound first: what two leaves cost is worked out for
 * few. */
static void try_wall(finder *f, int face_a, int face_b, int i) {
  candidate c;
  sound_bounds b;
  double exact[METRIC_COUNT], sd[METRIC_COUNT];
  for (int m = 0; m < METRIC_COUNT; m++) exact[m] = f->exact[m][i];
  const wall_row *match = tables_sound(f->tables, &f->core, face_a, face_b, sd);
  sound_bound(&f->hunt->aims, exact, sd, match, &b);
  if (b.evidence || !b.most.with) return;
  if (!tables_wall(f->tables, &f->core, face_a, face_b, &c) || c.broken || !better(f, &c)) return;
  if (b.least.with || confirmed(f, &c)) take(f, &c);
}

/* ---- a run of leaves on B ---- */

static void use_kernel(finder *f) {
  if (!f->kernel_set) kernel_core_set(f->kernel, &f->space->cores[f->core.core]);
  f->kernel_set = true;
}

/* Rates the places that are left and tries them in turn. */
static void rate_places(finder *f, int at_a, int count) {
  const sound_aims *g = &f->hunt->aims;
  double key_a = f->hunt->bound.core_key[f->core.core] + f->a->key[at_a];
  for (int i = 0; i < g->metrics; i++)
    kernel_rate_listed(f->kernel, f->a->leaves, at_a, f->b->leaves, f->place, count, g->metric[i],
                       f->exact[g->metric[i]]);
  f->work.rated += count;
  for (int i = 0; i < count; i++)
    if (key_a + f->b->key[f->place[i]] <= room_of(f))
      try_wall(f, f->a->face[at_a], f->b->face[f->place[i]], i);
}

/* The kernel's least STC for walls with this leaf on A; HUGE_VAL when only published ones pass. */
static void set_screen(finder *f, int face_a) {
  unsigned outside = f->core.outside | tables_face(f->tables, face_a)->outside;
  if (f->screen_set && f->outside == outside) return;
  double sd[METRIC_COUNT];
  predict_sd_of(f->space->context->catalog, f->core.family, outside, sd);
  f->outside = outside;
  f->least_stc = sound_least_stc(&f->hunt->aims, sd);
  f->screen = f->least_stc > 0 && f->least_stc < HUGE_VAL ? kernel_screen_of(f->least_stc) : 0;
  f->screen_set = true;
}

/* Which leaves on B, places first .. first + n - 1, are worth a rating. */
static void screen(finder *f, int at_a, int first, int n) {
  int face_a = f->a->face[at_a];
  set_screen(f, face_a);
  use_kernel(f);
  if (f->least_stc > 0 && f->least_stc < HUGE_VAL)
    kernel_screen(f->kernel, f->a->leaves, at_a, f->b->leaves, first, n, f->screen, f->open + first);
  else
    for (int p = first; p < first + n; p++) f->open[p] = !(f->least_stc > 0);
  if (!(tables_face(f->tables, face_a)->published & f->published[SIDE_A])) return;
  for (int p = first; p < first + n; p++)
    if (tables_face(f->tables, f->b->face[p])->published & f->published[SIDE_B]) f->open[p] = 1;
}

static bool keeps_other_rules(const finder *f, int face_a, int face_b) {
  candidate c;
  if (!space_legal(f->space, f->core.core, face_a, face_b)) return false;
  tables_measure(f->tables, &f->core, face_a, face_b, &c);
  return c.broken == 0;
}

static void find_in_run(finder *f, int at_a, int first, int n) {
  int count = 0, face_a = f->a->face[at_a];
  screen(f, at_a, first, n);
  f->work.screened += n;
  for (int p = first; p < first + n; p++) {
    if (!f->open[p] || !keeps_other_rules(f, face_a, f->b->face[p])) continue;
    f->place[count++] = p;
    if (count < LIST_MAX) continue;
    rate_places(f, at_a, count);
    count = 0;
  }
  if (count > 0) rate_places(f, at_a, count);
}

/* ---- one core ---- */

/* Whether no leaf on B can show the fire rating with this one on A. */
static bool burns(const finder *f, int face_a) {
  if (f->hunt->limits.fire_min <= 0) return false;
  const fire_face any = {f->b->fire_needs, f->b->fire_membrane};
  return fire_pair(f->space->context->catalog, &f->core.fire,
                   &tables_face(f->tables, face_a)->fire, &any,
                   NULL) < f->hunt->limits.fire_min;
}

/* Whether some leaf of a group on B may stand opposite. */
static bool meets(const finder *f, int face_a, int group) {
  const bool *pair = f->space->pair + (size_t)face_a * (size_t)f->space->face_count;
  for (int p = f->b->group_first[group]; p < f->b->group_first[group + 1]; p++)
    if (pair[f->b->face[p]]) return true;
  return false;
}

static void find_with(finder *f, int at_a) {
  const rule_limits *limits = &f->hunt->limits;
  int face_a = f->a->face[at_a];
  double key = f->hunt->bound.core_key[f->core.core] + f->a->key[at_a];
  double thickness_m = f->core.thickness_m + tables_face(f->tables, face_a)->thickness_m;
  if (key + f->b->key_least > room_of(f) || burns(f, face_a)) return;
  for (int g = 0; g < f->b->groups; g++) {
    if (rules_thickness(thickness_m + f->b->group_thickness_m[g]) > limits->thickness_max) continue;
    int first = f->b->group_first[g];
    if (!meets(f, face_a, g)) continue;
    int n = bound_within(f->b, g, room_of(f) - key);
    if (n > 0) find_in_run(f, at_a, first, n);
  }
}

/* Whether every wall of the core breaks a rule: by itself, or with the leaves that do best. */
static bool dead(const finder *f) {
  const core_facts *k = &f->core;
  const rule_limits *limits = &f->hunt->limits;
  double thickness_m = k->thickness_m + f->a->thickness_least_m + f->b->thickness_least_m;
  double mass = k->mass_kg_m2 + f->a->mass_least_kg_m2 + f->b->mass_least_kg_m2;
  int height = 0;
  for (int i = 0; i < TABLES_HEIGHT_KEYS; i++)
    for (int j = 0; j < TABLES_HEIGHT_KEYS; j++)
      if (k->height_mm[i][j] > height) height = k->height_mm[i][j];
  return k->broken || rules_thickness(thickness_m) > limits->thickness_max ||
         rules_mass(mass) > limits->mass_max || height < limits->height_mm;
}

static void find_in_core(finder *f, int core) {
  const bound *b = &f->hunt->bound;
  if (!(b->least[core] < HUGE_VAL) || b->least[core] > room_of(f)) return;
  f->a = bound_leaves(b, f->hunt->few, core, SIDE_A);
  f->b = bound_leaves(b, f->hunt->few, core, SIDE_B);
  tables_core(f->tables, core, &f->core);
  f->work.cores++;
  if (dead(f)) return;
  f->kernel_set = f->screen_set = false;
  f->published[0] = f->published[1] = 0;
  for (int i = 0; i < f->core.published.count; i++)
    for (int side = 0; side < 2; side++)
      f->published[side] |= UINT64_C(1) << f->core.published.entry[i].need[side];
  for (int i = 0; i < f->a->count; i++) find_with(f, i);
}

/* ---- the whole ---- */

static void *find_start(void *shared, arena *a, int worker) {
  (void)worker;
  hunt *h = shared;
  const space *s = h->space;
  finder *f = arena_alloc(a, sizeof *f);
  f->hunt = h;
  f->space = s;
  f->tables = tables_create(a, s);
  f->kernel = kernel_core_create(a, s->context->catalog);
  f->open = arena_array(a, (size_t)s->face_count, sizeof *f->open);
  return f;
}

static void find_block(void *shared, void *own, int block) {
  hunt *h = shared;
  int first = block * CORES_A_BLOCK, last = first + CORES_A_BLOCK;
  for (int k = first; k < last && k < h->space->core_count; k++)
    find_in_core(own, h->bound.order[k]);
}

static void find_round(arena *a, hunt *h, finder *best, cheapest_work *work) {
  void *own[THREADS_MAX];
  int threads = threads_count(h->space->threads);
  const threads_work job = {find_start, find_block, h};
  threads_run(a, threads, (h->space->core_count + CORES_A_BLOCK - 1) / CORES_A_BLOCK, &job, own);
  for (int i = 0; i < threads; i++) {
    const finder *f = own[i];
    if (!f) continue;
    work->cores += f->work.cores;
    work->screened += f->work.screened;
    work->rated += f->work.rated;
    if (!f->found) continue;
    if (!best->found || candidate_compare(h->space, &f->best, &best->best) < 0)
      best->best = f->best;
    best->found = true;
  }
}

bool cheapest_search(arena *a, const space *s, candidate *out, cheapest_work *work) {
  *work = (cheapest_work){0};
  if (s->core_count == 0 || s->face_count == 0) return false;
  hunt *h = arena_alloc(a, sizeof *h);
  finder *best = arena_alloc(a, sizeof *best);
  h->space = s;
  h->limits = rules_limits(s->context->brief);
  sound_aims_set(s->context->brief, &h->aims);
  bound_create(a, s, tables_create(a, s), &h->bound);
  atomic_init(&h->best_cents, LLONG_MAX);
  h->few = true;
  find_round(a, h, best, work);
  h->few = false;
  find_round(a, h, best, work);
  *out = best->best;
  return best->found;
}

bool cheapest_find(arena *a, const space *s, candidate *out) {
  cheapest_work work;
  return cheapest_search(a, s, out, &work);
}
