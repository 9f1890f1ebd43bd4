/* Speed of the sweep's kernel against the plain reference, in one run: one JSON line a figure on
 * stdout. */
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "base/text.h"
#include "wall/compat.h"

enum { FACES_MAX = 4096, CORES_MAX = 64, REFERENCE_WALLS = 400 };
#define MEASURE_S         1.0 /* long against the clock's step, short enough to repeat */
#define BOUND_TARGET_LOW  50.0
#define BOUND_TARGET_HIGH 60.0

typedef struct ground {
  arena *memory;
  const catalog *catalog;
  face faces[FACES_MAX];
  int face_count;
  wall cores[CORES_MAX];
  int core_count;
  kernel_leaves *leaves;
  kernel_core *kernel;
  double exact[FACES_MAX * METRIC_COUNT];
} ground;

/* Time of this process on a core: other work on the machine does not count. */
static double now_s(void) {
  struct timespec t;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
  return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static void figure(arena *a, const char *name, double value, int decimals, const char *unit) {
  printf("{\"name\":\"%s\",\"value\":%s,\"unit\":\"%s\"}\n", name, text_of(a, value, decimals),
         unit);
  fflush(stdout);
}

/* One to three equal boards, alone or over one other layer. */
static void faces_build(ground *g) {
  int n = (int)g->catalog->layer_count;
  for (int count = 1; count <= 3; count++)
    for (int top = 0; top < n; top++)
      for (int under = CATALOG_NONE; under < n; under++) {
        face f = {0};
        for (int i = 0; i < count; i++) f.layer[f.count++] = top;
        if (under != CATALOG_NONE) f.layer[f.count++] = under;
        bool boards = !g->catalog->layers[top].membrane;
        if (!boards || compat_face(g->catalog, &f) != COMPAT_FINE || g->face_count == FACES_MAX)
          continue;
        g->faces[g->face_count++] = f;
      }
}

/* Cores spread over the frames: each frame that takes it, empty and filled, plain and mounted. */
static void cores_build(ground *g) {
  const catalog *c = g->catalog;
  for (size_t i = 0; i < 4 * c->frame_count && g->core_count < CORES_MAX; i++) {
    wall w = wall_empty();
    w.frame = (int)(i / 4 * 7 % c->frame_count);
    const frame *f = &c->frames[w.frame];
    w.spacing_mm = c->spacings_mm[i % c->spacing_count];
    w.gap_mm = f->layout == FRAME_DOUBLE ? 25 : 0;
    if (i & 1) {
      int fits = 0;
      while (fits < (int)c->fill_count && compat_fill(c, w.frame, fits) != COMPAT_FINE) fits++;
      if (fits < (int)c->fill_count) w.fill[0] = fits;
    }
    if ((i & 2) && c->mount_count > 0)
      w.mount[SIDE_A] = (wall_mount){0, c->mount_spacings_mm[0], c->mounts[0].clip_spacing_mm};
    if (compat_core(c, &w) != COMPAT_ILLEGAL) g->cores[g->core_count++] = w;
  }
}

typedef enum sweep_kind { SWEEP_STC, SWEEP_ALL, SWEEP_BOUND } sweep_kind;

/* Walls a second over the cores and side A's leaves in turn, tables included. */
static double sweep_rate(ground *g, sweep_kind kind) {
  double start = now_s(), spent = 0.0, walls = 0.0;
  for (int i = 0; spent < MEASURE_S; i++) {
    if (i % g->face_count == 0)
      kernel_core_set(g->kernel, &g->cores[i / g->face_count % g->core_count]);
    int a = i % g->face_count;
    if (kind == SWEEP_STC)
      kernel_rate(g->kernel, g->leaves, a, 0, g->face_count, METRIC_STC, g->exact);
    else if (kind == SWEEP_ALL)
      kernel_rate_all(g->kernel, g->leaves, a, 0, g->face_count, g->exact);
    else
      kernel_bound(g->kernel, g->leaves, a, 0, g->face_count, g->exact);
    walls += g->face_count;
    spent = now_s() - start;
  }
  return walls / spent;
}

static double reference_rate(const ground *g) {
  double start = now_s(), sum = 0.0;
  for (int i = 0; i < REFERENCE_WALLS; i++) {
    prediction p;
    wall w = g->cores[i % g->core_count];
    w.side[SIDE_A] = g->faces[i * 31 % g->face_count];
    w.side[SIDE_B] = g->faces[i * 17 % g->face_count];
    predict_wall(g->catalog, &w, &p);
    sum += p.exact[METRIC_STC];
  }
  double spent = now_s() - start;
  return sum > 0.0 ? REFERENCE_WALLS / spent : 0.0;
}

/* Share of walls below `target` that the bound alone refuses. */
static double bound_share(ground *g, double target) {
  static double bound[FACES_MAX];
  double failing = 0.0, refused = 0.0;
  for (int i = 0; i < g->core_count; i++) {
    int a = i * 13 % g->face_count;
    kernel_core_set(g->kernel, &g->cores[i]);
    kernel_rate(g->kernel, g->leaves, a, 0, g->face_count, METRIC_STC, g->exact);
    kernel_bound(g->kernel, g->leaves, a, 0, g->face_count, bound);
    for (int b = 0; b < g->face_count; b++) {
      failing += g->exact[b] < target;
      refused += bound[b] < target;
    }
  }
  return failing > 0.0 ? refused / failing : 0.0;
}

static int run(ground *g) {
  diag_list d;
  diag_init(&d, g->memory);
  g->catalog = catalog_load(g->memory, &d, TEST_ROOT "/catalogs");
  if (!g->catalog) return EXIT_FAILURE;
  faces_build(g);
  cores_build(g);
  g->leaves = kernel_leaves_create(g->memory, g->catalog, g->faces, g->face_count);
  g->kernel = kernel_core_create(g->memory, g->catalog);
  fprintf(stderr, "%d leaves, %d cores, double precision, vectors: %s\n", g->face_count,
          g->core_count, kernel_vectors());
  double reference = reference_rate(g), full = sweep_rate(g, SWEEP_STC);
  figure(g->memory, "full_walls_per_second_per_core", full, 0, "walls/s");
  figure(g->memory, "full_ratio_to_reference", full / reference, 1, "1");
  figure(g->memory, "reference_walls_per_second", reference, 0, "walls/s");
  figure(g->memory, "all_metrics_walls_per_second", sweep_rate(g, SWEEP_ALL), 0, "walls/s");
  figure(g->memory, "bound_walls_per_second", sweep_rate(g, SWEEP_BOUND), 0, "walls/s");
  figure(g->memory, "bound_refused_of_failing_stc50", bound_share(g, BOUND_TARGET_LOW), 2, "1");
  figure(g->memory, "bound_refused_of_failing_stc60", bound_share(g, BOUND_TARGET_HIGH), 2, "1");
  return EXIT_SUCCESS;
}

int main(void) {
  static ground g;
  static jmp_buf out_of_memory;
  if (setjmp(out_of_memory)) {
    fprintf(stderr, "memory ran out\n");
    return EXIT_FAILURE;
  }
  g.memory = arena_create(0, &out_of_memory);
  if (!g.memory) return EXIT_FAILURE;
  int result = run(&g);
  arena_free(g.memory);
  return result;
}
