#include "search/rungs.h"

#include <math.h>

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "search/sound.h"
#include "search/tables.h"

/* The kernel may name a rating one step of 0.1 dB below the reference's, beside its own error. */
static const double kernel_stray_db = KERNEL_ERROR_DB + 0.1;

typedef struct climber {
  const space *space;
  judge_context asking; /* the space's, but with the brief below */
  brief brief;          /* the target that climbs is moved about */
  int climbs;
  tables *tables;
  kernel_core *kernel;
  kernel_leaves *leaves;
  sound_aims all;   /* every target, that which climbs at its least */
  sound_aims alone; /* that which climbs, at its least */
  core_facts core;
  candidate *wall; /* of one leaf on A: face_count walls, by the leaf on B */
  bool *open;      /* of these, those that keep every rule but perhaps those of sound */
  double *exact;   /* METRIC_COUNT x face_count */
  rungs *out;
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
  const rung_best *r = &k->out->at[value];
  return !r->found || candidate_compare(k->space, c, &r->wall) < 0;
}

static void offer(climber *k, const candidate *c, int value) {
  rungs *r = k->out;
  if (value > r->highest) r->highest = value;
  for (int v = value; v >= RUNGS_LEAST && wants(k, c, v); v--)
    r->at[v] = (rung_best){true, *c, value};
}

/* The highest value that the kernel's figures leave open; 0 when some other target, or evidence, is
 * surely not kept. */
static int most_reached(climber *k, const candidate *c) {
  double sd[METRIC_COUNT], exact[METRIC_COUNT];
  const wall_row *match = tables_sound(k->tables, &k->core, c->face_a, c->face_b, sd);
  for (int m = 0; m < METRIC_COUNT; m++)
    exact[m] = k->exact[m * k->space->face_count + c->face_b] + kernel_stray_db;
  sound_bounds b;
  sound_bound(&k->all, exact, sd, match, &b);
  if (b.evidence || !b.most.with) return 0;
  if (k->all.count > 1) sound_bound(&k->alone, exact, sd, match, &b);
  double most = RUNGS_LEAST + floor(b.promised_most * 0.01);
  return most < RUNGS_MOST ? (int)most : RUNGS_MOST;
}

static void look_at(climber *k, const candidate *c) {
  int most = most_reached(k, c);
  if (most < RUNGS_LEAST || !wants(k, c, most)) return;
  wall w = space_wall(k->space, c->core, c->face_a, c->face_b);
  int value = reached(&k->asking, &k->brief, k->climbs, &w);
  k->out->rated++;
  if (value >= RUNGS_LEAST) offer(k, c, value);
}

/* ---- the sweep ---- */

static int open_row(climber *k, int face_a, int *first, int *last) {
  int count = 0;
  for (int j = 0; j < k->space->face_count; j++) {
    candidate *c = &k->wall[j];
    bool legal = space_legal(k->space, k->core.core, face_a, j);
    k->out->walls += legal;
    k->open[j] = legal && !k->core.broken && tables_wall(k->tables, &k->core, face_a, j, c) &&
                 c->broken == 0;
    if (!k->open[j]) continue;
    if (count++ == 0) *first = j;
    *last = j;
  }
  return count;
}

static void climb_row(climber *k, int face_a) {
  int first = 0, last = 0;
  if (open_row(k, face_a, &first, &last) == 0) return;
  for (int i = 0; i < k->all.metrics; i++) {
    sound_metric m = k->all.metric[i];
    kernel_rate(k->kernel, k->leaves, face_a, first, last - first + 1, m,
                k->exact + (size_t)m * (size_t)k->space->face_count + first);
  }
  for (int j = first; j <= last; j++)
    if (k->open[j]) look_at(k, &k->wall[j]);
}

/* The least value that is some wall's best: the cheapest wall of all reaches it. */
static int lowest_of(const rungs *r) {
  return r->at[RUNGS_LEAST].found ? r->at[RUNGS_LEAST].reaches : 0;
}

void rungs_find(arena *a, const space *s, int climbs, rungs *out) {
  const judge_context *x = s->context;
  size_t faces = (size_t)s->face_count;
  *out = (rungs){.walls = 0};
  if (s->core_count == 0 || faces == 0) return;
  climber *k = arena_alloc(a, sizeof *k);
  *k = (climber){.space = s, .asking = *x, .brief = *x->brief, .climbs = climbs, .out = out};
  k->asking.brief = &k->brief;
  k->brief.targets[climbs].value = RUNGS_LEAST;
  sound_aims_set(&k->brief, &k->all);
  brief one = k->brief;
  one.target_count = 1;
  one.targets[0] = k->brief.targets[climbs];
  sound_aims_set(&one, &k->alone);
  k->tables = tables_create(a, s);
  k->kernel = kernel_core_create(a, x->catalog);
  k->leaves = kernel_leaves_create(a, x->catalog, s->faces, s->face_count);
  k->wall = arena_array(a, faces, sizeof *k->wall);
  k->open = arena_array(a, faces, sizeof *k->open);
  k->exact = arena_array(a, METRIC_COUNT * faces, sizeof *k->exact);
  const int *order = tables_cores_by_cost(a, s);
  for (int i = 0; i < s->core_count; i++) {
    tables_core(k->tables, order[i], &k->core);
    if (!k->core.broken) kernel_core_set(k->kernel, &s->cores[order[i]]);
    for (int j = 0; j < s->face_count; j++) climb_row(k, j);
  }
  out->lowest = lowest_of(out);
}
