#include "search/cheapest.h"

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "search/sound.h"
#include "search/tables.h"

typedef struct finder {
  const space *space;
  tables *tables;
  kernel_core *kernel;
  kernel_leaves *leaves;
  sound_aims aims;
  core_facts core;
  candidate *wall; /* of one leaf on A: face_count walls, by the leaf on B */
  bool *open;      /* of these, those that may still be the answer */
  double *exact;   /* METRIC_COUNT x face_count */
  bool found;
  candidate best;
} finder;

static bool better(const finder *f, const candidate *c) {
  return !f->found || candidate_compare(f->space, c, &f->best) < 0;
}

/* Walls of one row that keep every rule but perhaps those of sound. Returns how many; *first and
 * *last span them. */
static int open_row(finder *f, int face_a, int *first, int *last) {
  int count = 0;
  for (int j = 0; j < f->space->face_count; j++) {
    candidate *c = &f->wall[j];
    f->open[j] = space_legal(f->space, f->core.core, face_a, j) &&
                 tables_wall(f->tables, &f->core, face_a, j, c) && c->broken == 0 && better(f, c);
    if (!f->open[j]) continue;
    if (count++ == 0) *first = j;
    *last = j;
  }
  return count;
}

static bool passes(finder *f, const candidate *c) {
  const judge_context *x = f->space->context;
  wall w = space_wall(f->space, c->core, c->face_a, c->face_b);
  double sd[METRIC_COUNT], exact[METRIC_COUNT];
  const wall_row *match = tables_sound(f->tables, &f->core, c->face_a, c->face_b, sd);
  for (int m = 0; m < METRIC_COUNT; m++) exact[m] = f->exact[m * f->space->face_count + c->face_b];
  sound_bounds b;
  sound_bound(&f->aims, exact, sd, match, &b);
  if (b.evidence || !b.most.with) return false;
  if (b.least.with) return true;
  prediction p;
  predict_wall(x->catalog, &w, &p);
  return judge_targets(x, &p, evidence_match(x->catalog, &w), NULL).broken == 0;
}

static void find_in_row(finder *f, int face_a) {
  int first = 0, last = 0;
  if (open_row(f, face_a, &first, &last) == 0) return;
  for (int i = 0; i < f->aims.metrics; i++) {
    sound_metric m = f->aims.metric[i];
    kernel_rate(f->kernel, f->leaves, face_a, first, last - first + 1, m,
                f->exact + (size_t)m * (size_t)f->space->face_count + first);
  }
  for (int j = first; j <= last; j++) {
    if (!f->open[j] || !better(f, &f->wall[j]) || !passes(f, &f->wall[j])) continue;
    f->best = f->wall[j];
    f->found = true;
  }
}

bool cheapest_find(arena *a, const space *s, candidate *out) {
  const judge_context *x = s->context;
  size_t faces = (size_t)s->face_count;
  if (s->core_count == 0 || faces == 0) return false;
  finder f = {.space = s, .tables = tables_create(a, s)};
  sound_aims_set(x->brief, &f.aims);
  f.kernel = kernel_core_create(a, x->catalog);
  f.leaves = kernel_leaves_create(a, x->catalog, s->faces, s->face_count);
  f.wall = arena_array(a, faces, sizeof *f.wall);
  f.open = arena_array(a, faces, sizeof *f.open);
  f.exact = arena_array(a, METRIC_COUNT * faces, sizeof *f.exact);
  const int *order = tables_cores_by_cost(a, s);
  for (int k = 0; k < s->core_count; k++) {
    tables_core(f.tables, order[k], &f.core);
    if (f.core.broken) continue;
    if (f.aims.count > 0) kernel_core_set(f.kernel, &s->cores[order[k]]);
    for (int i = 0; i < s->face_count; i++) find_in_row(&f, i);
  }
  *out = f.best;
  return f.found;
}
