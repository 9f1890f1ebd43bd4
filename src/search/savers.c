#include "search/savers.h"

#include <math.h>

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "search/sound.h"
#include "search/tables.h"

enum { FIRST_SAVERS = 64 };

/* No printed rating stands further above the kernel's: rounding the curve to whole dB lifts a
 * contour by at most 0.5 dB, the step down to 0.1 dB hides less than 0.1 dB, and OITC is rounded
 * half up once more. */
static const double printed_above_db = 1.1;

typedef struct finder {
  arena *arena;
  const space *space;
  tables *tables;
  kernel_core *kernel;
  kernel_leaves *leaves;
  sound_aims aims;
  core_facts core;
  bool kernel_set; /* the kernel holds this core */
  candidate *wall; /* of one leaf on A: face_count walls, by the leaf on B */
  bool *open;      /* of these, those that are cheap enough */
  double *exact;   /* METRIC_COUNT x face_count */
  long long below_cents;
  savers *out;
  int cap;
} finder;

/* ---- which wall beats which ---- */

static bool no_worse(const saver *x, const saver *y) {
  const wall_numbers *p = &x->is.is, *q = &y->is.is;
  if (p->cost_cents > q->cost_cents || p->thickness_tenth_mm > q->thickness_tenth_mm ||
      p->mass_hundredth > q->mass_hundredth || p->fire_min < q->fire_min ||
      p->height_mm < q->height_mm)
    return false;
  for (int m = 0; m < METRIC_COUNT; m++)
    if (x->rating[m] < y->rating[m]) return false;
  return true;
}

bool savers_beats(const space *s, const saver *x, const saver *y) {
  if (!no_worse(x, y)) return false;
  return !no_worse(y, x) || candidate_compare(s, &x->is, &y->is) < 0;
}

static bool beaten(finder *f, const saver *y) {
  savers *o = f->out;
  for (int i = 0; i < o->count; i++) {
    if (!savers_beats(f->space, &o->wall[i], y)) continue;
    /* What beat one wall is apt to beat the next: nearer to the start it is found sooner. */
    saver kept = o->wall[i / 2];
    o->wall[i / 2] = o->wall[i];
    o->wall[i] = kept;
    return true;
  }
  return false;
}

static void add(finder *f, const saver *x) {
  savers *o = f->out;
  int kept = 0;
  for (int i = 0; i < o->count; i++)
    if (!savers_beats(f->space, x, &o->wall[i])) o->wall[kept++] = o->wall[i];
  o->count = kept;
  if (o->count == f->cap) {
    int cap = f->cap ? 2 * f->cap : FIRST_SAVERS;
    o->wall = arena_grow(f->arena, o->wall, (size_t)f->cap * sizeof *o->wall,
                         (size_t)cap * sizeof *o->wall);
    f->cap = cap;
  }
  o->wall[o->count++] = *x;
}

/* ---- one wall ---- */

/* The best that the wall's printed ratings may be, by the kernel. */
static void rate_at_most(const finder *f, saver *x) {
  double sd[METRIC_COUNT];
  const wall_row *match = tables_sound(f->tables, &f->core, x->is.face_a, x->is.face_b, sd);
  for (int i = 0; i < f->aims.metrics; i++) {
    sound_metric m = f->aims.metric[i];
    double exact = f->exact[(size_t)m * (size_t)f->space->face_count + (size_t)x->is.face_b];
    x->rating[m] = match && m == METRIC_STC ? match->stc : (int)floor(exact + printed_above_db);
  }
}

/* By the reference. False when it finds that the wall does not reach the targets after all. */
static bool rate(finder *f, const wall *w, saver *x) {
  const judge_context *c = f->space->context;
  prediction p;
  predict_wall(c->catalog, w, &p);
  const wall_row *match = evidence_match(c->catalog, w);
  f->out->rated++;
  judge_sound v = judge_targets(c, &p, match, NULL);
  if (v.broken) return false;
  x->is.is.promised_hundredth = v.promised_hundredth;
  for (int i = 0; i < f->aims.metrics; i++) {
    sound_metric m = f->aims.metric[i];
    x->rating[m] = match && m == METRIC_STC ? match->stc : rating_of(&p.ratings, m);
  }
  return true;
}

static void offer(finder *f, const candidate *c) {
  const judge_context *x = f->space->context;
  saver s = {.is = *c};
  wall w = space_wall(f->space, c->core, c->face_a, c->face_b);
  if (x->brief->fire_min == 0) /* then no table holds it */
    s.is.is.fire_min = fire_judge(NULL, x->catalog, x->brief, &w).minutes;
  rate_at_most(f, &s);
  if (beaten(f, &s) || !rate(f, &w, &s) || beaten(f, &s)) return;
  add(f, &s);
}

/* ---- a run of walls of one core and one leaf on A ---- */

static void rate_run(finder *f, int face_a, int first, int last) {
  if (!f->kernel_set && f->aims.count > 0) {
    kernel_core_set(f->kernel, &f->space->cores[f->core.core]);
    f->kernel_set = true;
  }
  for (int i = 0; i < f->aims.metrics; i++) {
    sound_metric m = f->aims.metric[i];
    kernel_rate(f->kernel, f->leaves, face_a, first, last - first + 1, m,
                f->exact + (size_t)m * (size_t)f->space->face_count + first);
  }
}

static void find_in_run(finder *f, const feasible_wall *run, int count) {
  int face_a = run[0].face_a, open = 0;
  for (int i = 0; i < count; i++) {
    int j = run[i].face_b;
    f->open[i] = tables_wall(f->tables, &f->core, face_a, j, &f->wall[i]) &&
                 f->wall[i].is.cost_cents < f->below_cents;
    open += f->open[i];
  }
  if (open == 0) return;
  rate_run(f, face_a, run[0].face_b, run[count - 1].face_b);
  for (int i = 0; i < count; i++)
    if (f->open[i]) offer(f, &f->wall[i]);
}

/* The sweep notes walls core by core, leaf by leaf on A, leaves on B rising. */
static void find_in_block(finder *f, const feasible_block *b) {
  for (int i = 0; i < b->count;) {
    const feasible_wall *run = &b->wall[i];
    int n = 1;
    while (i + n < b->count && run[n].core == run->core && run[n].face_a == run->face_a) n++;
    if (f->core.core != run->core) {
      tables_core(f->tables, run->core, &f->core);
      f->kernel_set = false;
    }
    find_in_run(f, run, n);
    i += n;
  }
}

/* ---- the whole ---- */

static void sort(const space *s, savers *o) {
  for (int i = 1; i < o->count; i++) {
    saver x = o->wall[i];
    int at = i;
    for (; at > 0 && candidate_compare(s, &x.is, &o->wall[at - 1].is) < 0; at--)
      o->wall[at] = o->wall[at - 1];
    o->wall[at] = x;
  }
}

void savers_find(arena *a, const space *s, const sweep_result *r, long long below_cents,
                 savers *out) {
  const judge_context *x = s->context;
  *out = (savers){0};
  if (!r->feasible) return;
  size_t faces = (size_t)s->face_count;
  finder f = {.arena = a, .space = s, .tables = tables_create(a, s), .out = out};
  f.below_cents = below_cents;
  sound_aims_set(x->brief, &f.aims);
  f.kernel = kernel_core_create(a, x->catalog);
  f.leaves = kernel_leaves_create(a, x->catalog, s->faces, s->face_count);
  f.wall = arena_array(a, faces, sizeof *f.wall);
  f.open = arena_array(a, faces, sizeof *f.open);
  f.exact = arena_array(a, METRIC_COUNT * faces, sizeof *f.exact);
  f.core.core = CATALOG_NONE;
  for (const feasible_block *b = r->feasible; b; b = b->next) find_in_block(&f, b);
  sort(s, out);
}
