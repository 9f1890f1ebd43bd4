#include "search/rungs.h"

#include <math.h>

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "base/threads.h"
#include "search/sound.h"
#include "search/tables.h"

/* The kernel may name a rating one step of 0.1 dB below the reference's, beside its own error. */
static const double kernel_stray_db = KERNEL_ERROR_DB + 0.1;
/* A rating that no wall has: for metrics that are not looked at. */
static const double any_rating_db = 1000;

enum { CORES_A_BLOCK = 4 };

/* What all workers read. */
typedef struct climb {
  const space *space;
  int climbs;
  bool by_stc;      /* the target that climbs is one of STC */
  const int *order; /* of the cores */
  kernel_leaves *leaves;
  brief least, one; /* the brief with the target that climbs at its least; and with that alone */
  sound_aims all, alone;
} climb;

typedef struct climber {
  const climb *climb;
  const space *space;
  judge_context asking; /* the space's, but with the brief below */
  brief brief;          /* the target that climbs is moved about */
  int climbs;
  tables *tables;
  kernel_core *kernel;
  core_facts core;
  candidate *wall; /* of one leaf on A: the walls that keep every rule but perhaps those of sound */
  int *face_b;     /* their leaves on B */
  double *exact;   /* METRIC_COUNT x face_count, in the same order */
  double *stc_at_most; /* by leaf on B */
  rungs found;     /* by this worker */
} climber;

/* ---- the reference ---- */

static bool keeps_at(const judge_context *x, brief *b, int climbs, const prediction *p,
                     const wall_row *match, int value) {
  b->targets[climbs].value = value;
  return judge_targets(x, p, match, NULL).broken == 0;
}

/* What keeps a value keeps all below: the highest lies between two that are tried. `x` asks by
 * `b`. */
static int reached(const judge_context *x, brief *b, int climbs, const wall *w) {
  prediction p;
  predict_wall(x->catalog, w, &p);
  const wall_row *match = evidence_match(x->catalog, w);
  int keeps = RUNGS_LEAST, fails = RUNGS_MOST + 1;
  if (!keeps_at(x, b, climbs, &p, match, keeps)) return 0;
  while (fails - keeps > 1) {
    int middle = (keeps + fails) / 2;
    if (keeps_at(x, b, climbs, &p, match, middle))
      keeps = middle;
    else
      fails = middle;
  }
  return keeps;
}

int rungs_reached(const judge_context *x, int climbs, const wall *w) {
  brief b = *x->brief;
  judge_context asking = *x;
  asking.brief = &b;
  return reached(&asking, &b, climbs, w);
}

/* ---- what is kept ---- */

/* The rungs below are no dearer than those above: what does not come first at the highest value
 * that it can reach does so nowhere. */
static bool wants(const climber *k, const candidate *c, int value) {
  const rung_best *r = &k->found.at[value];
  return !r->found || candidate_compare(k->space, c, &r->wall) < 0;
}

static void offer(climber *k, const candidate *c, int value) {
  rungs *r = &k->found;
  if (value > r->highest) r->highest = value;
  for (int v = value; v >= RUNGS_LEAST && wants(k, c, v); v--)
    r->at[v] = (rung_best){true, *c, value};
}

/* The highest value that ratings of at most `exact` (METRIC_COUNT values) leave open; 0 when some
 * other target, or evidence, is surely not kept. */
static int most_reached(const climber *k, const candidate *c, const double *exact) {
  const climb *m = k->climb;
  double sd[METRIC_COUNT];
  const wall_row *match = tables_sound(k->tables, &k->core, c->face_a, c->face_b, sd);
  sound_bounds b;
  sound_bound(&m->all, exact, sd, match, &b);
  if (b.evidence || !b.most.with) return 0;
  if (m->all.count > 1) sound_bound(&m->alone, exact, sd, match, &b);
  double most = RUNGS_LEAST + floor(b.promised_most * 0.01);
  return most < RUNGS_MOST ? (int)most : RUNGS_MOST;
}

/* Whether a wall may come first somewhere, the band at 125 Hz being all that is known of it. */
static bool may_come_first(const climber *k, const candidate *c, double stc_at_most) {
  double exact[METRIC_COUNT];
  for (int m = 0; m < METRIC_COUNT; m++) exact[m] = any_rating_db;
  exact[METRIC_STC] = stc_at_most + kernel_stray_db;
  int most = most_reached(k, c, exact);
  return most >= RUNGS_LEAST && wants(k, c, most);
}

/* `i`: place in the row. */
static void look_at(climber *k, const candidate *c, int i) {
  double exact[METRIC_COUNT];
  for (int m = 0; m < METRIC_COUNT; m++)
    exact[m] = k->exact[m * k->space->face_count + i] + kernel_stray_db;
  int most = most_reached(k, c, exact);
  if (most < RUNGS_LEAST || !wants(k, c, most)) return;
  wall w = space_wall(k->space, c->core, c->face_a, c->face_b);
  int value = reached(&k->asking, &k->brief, k->climbs, &w);
  k->found.rated++;
  if (value >= RUNGS_LEAST) offer(k, c, value);
}

/* ---- the sweep ---- */

/* The walls with one leaf on A that have to be rated. Returns how many. */
static int open_row(climber *k, int face_a) {
  int legal = space_row(k->space, k->core.core, face_a, k->face_b), count = 0;
  k->found.walls += legal;
  if (k->core.broken || legal == 0) return 0;
  int first = k->face_b[0], last = k->face_b[legal - 1];
  if (k->climb->by_stc)
    kernel_bound(k->kernel, k->climb->leaves, face_a, first, last - first + 1,
                 k->stc_at_most + first);
  for (int i = 0; i < legal; i++) {
    candidate *c = &k->wall[count];
    int face_b = k->face_b[i];
    if (!tables_wall(k->tables, &k->core, face_a, face_b, c) || c->broken) continue;
    if (k->climb->by_stc && !may_come_first(k, c, k->stc_at_most[face_b])) continue;
    k->face_b[count++] = face_b;
  }
  return count;
}

static void climb_row(climber *k, int face_a) {
  const climb *m = k->climb;
  int count = open_row(k, face_a);
  if (count == 0) return;
  for (int i = 0; i < m->all.metrics; i++) {
    sound_metric metric = m->all.metric[i];
    kernel_rate_listed(k->kernel, m->leaves, face_a, m->leaves, k->face_b, count, metric,
                       k->exact + (size_t)metric * (size_t)k->space->face_count);
  }
  for (int i = 0; i < count; i++) look_at(k, &k->wall[i], i);
}

static void climb_block(void *shared, void *own, int block) {
  const climb *m = shared;
  climber *k = own;
  int first = block * CORES_A_BLOCK, last = first + CORES_A_BLOCK;
  for (int i = first; i < last && i < m->space->core_count; i++) {
    tables_core(k->tables, m->order[i], &k->core);
    if (!k->core.broken) kernel_core_set(k->kernel, &m->space->cores[m->order[i]]);
    for (int j = 0; j < m->space->face_count; j++) climb_row(k, j);
  }
}

static void *climb_start(void *shared, arena *a, int worker) {
  (void)worker;
  const climb *m = shared;
  const space *s = m->space;
  size_t faces = (size_t)s->face_count;
  climber *k = arena_alloc(a, sizeof *k);
  *k = (climber){.climb = m, .space = s, .asking = *s->context, .brief = m->least};
  k->climbs = m->climbs;
  k->asking.brief = &k->brief;
  k->tables = tables_create(a, s);
  k->kernel = kernel_core_create(a, s->context->catalog);
  k->wall = arena_array(a, faces, sizeof *k->wall);
  k->face_b = arena_array(a, faces, sizeof *k->face_b);
  k->exact = arena_array(a, METRIC_COUNT * faces, sizeof *k->exact);
  k->stc_at_most = arena_array(a, faces, sizeof *k->stc_at_most);
  return k;
}

/* ---- the whole ---- */

/* At each value the first in tie order of what the workers found. */
static void take(const space *s, const rungs *some, rungs *all) {
  for (int v = RUNGS_LEAST; v <= RUNGS_MOST; v++) {
    const rung_best *r = &some->at[v];
    rung_best *best = &all->at[v];
    if (r->found && (!best->found || candidate_compare(s, &r->wall, &best->wall) < 0)) *best = *r;
  }
  all->walls += some->walls;
  all->rated += some->rated;
  if (some->highest > all->highest) all->highest = some->highest;
}

/* The least value that is some wall's best: the cheapest wall of all reaches it. */
static int lowest_of(const rungs *r) {
  return r->at[RUNGS_LEAST].found ? r->at[RUNGS_LEAST].reaches : 0;
}

void rungs_find(arena *a, const space *s, int climbs, rungs *out) {
  *out = (rungs){.walls = 0};
  if (s->core_count == 0 || s->face_count == 0) return;
  climb *m = arena_alloc(a, sizeof *m);
  m->space = s;
  m->climbs = climbs;
  m->by_stc = s->context->brief->targets[climbs].metric == METRIC_STC;
  m->order = tables_cores_by_cost(a, s);
  m->leaves = kernel_leaves_create(a, s->context->catalog, s->faces, s->face_count);
  m->least = *s->context->brief;
  m->least.targets[climbs].value = RUNGS_LEAST;
  sound_aims_set(&m->least, &m->all);
  m->one = m->least;
  m->one.target_count = 1;
  m->one.targets[0] = m->least.targets[climbs];
  sound_aims_set(&m->one, &m->alone);
  void *own[THREADS_MAX];
  int threads = threads_count(s->threads);
  const threads_work work = {climb_start, climb_block, m};
  threads_run(a, threads, (s->core_count + CORES_A_BLOCK - 1) / CORES_A_BLOCK, &work, own);
  for (int i = 0; i < threads; i++) {
    const climber *k = own[i];
    if (k) take(s, &k->found, out);
  }
  out->lowest = lowest_of(out);
}
