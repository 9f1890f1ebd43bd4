/* Speed of the sweep's kernel against the plain reference, in one run: one JSON line a figure on
 * stdout. */
#include "bench.h"
#include "peak.h"

#include "acoustics/kernel.h"
#include "acoustics/model.h"
#include "acoustics/predict.h"
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

typedef enum sweep_kind { SWEEP_STC, SWEEP_ALL, SWEEP_BOUND, SWEEP_DECIDE } sweep_kind;

/* Of one core and one leaf on A every leaf on B: does it reach `target`? The screen, then the full
 * STC of what it leaves open. Returns how many do. */
static int decide_row(ground *g, int a, double target) {
  static unsigned char open[FACES_MAX];
  static int list[FACES_MAX];
  int left = 0, reached = 0;
  kernel_screen(g->kernel, g->leaves, a, g->leaves, 0, g->face_count, kernel_screen_of(target),
                open);
  for (int b = 0; b < g->face_count; b++)
    if (open[b]) list[left++] = b;
  kernel_rate_listed(g->kernel, g->leaves, a, g->leaves, list, left, METRIC_STC, g->exact);
  for (int i = 0; i < left; i++) reached += g->exact[i] >= target;
  return reached;
}

/* Walls a second over the cores and side A's leaves in turn, tables included. */
static double sweep_rate(ground *g, sweep_kind kind, double target) {
  double start = cpu_s(), spent = 0.0, walls = 0.0;
  for (int i = 0; spent < MEASURE_S; i++) {
    if (i % g->face_count == 0)
      kernel_core_set(g->kernel, &g->cores[i / g->face_count % g->core_count]);
    int a = i % g->face_count;
    if (kind == SWEEP_STC)
      kernel_rate(g->kernel, g->leaves, a, 0, g->face_count, METRIC_STC, g->exact);
    else if (kind == SWEEP_ALL)
      kernel_rate_all(g->kernel, g->leaves, a, 0, g->face_count, g->exact);
    else if (kind == SWEEP_BOUND)
      kernel_bound(g->kernel, g->leaves, a, 0, g->face_count, g->exact);
    else
      decide_row(g, a, target);
    walls += g->face_count;
    spent = cpu_s() - start;
  }
  return walls / spent;
}

/* Whether deciding finds the same number of walls as rating them all, row by row. */
static bool decides_alike(ground *g, double target) {
  for (int i = 0; i < g->core_count; i++)
    for (int a = i % 3; a < g->face_count; a += 3) {
      int reached = 0;
      kernel_core_set(g->kernel, &g->cores[i]);
      kernel_rate(g->kernel, g->leaves, a, 0, g->face_count, METRIC_STC, g->exact);
      for (int b = 0; b < g->face_count; b++) reached += g->exact[b] >= target;
      if (decide_row(g, a, target) != reached) return false;
    }
  return true;
}

/* Multiplications, divisions, additions and subtractions of one wall rated in all metrics, counted
 * in the source of the kernel's loops over lanes; least and greatest, comparisons, whole-number
 * work and the tables of core and side A do not count. */
static double flops_of_a_wall(void) {
  const double air_path = 24, fraction_sum = 4, bridged_path = 15, lane = 4, add = 2;
  const double tone = MODEL_ANGLES * air_path + 4 * fraction_sum + bridged_path + lane + add;
  const double logarithm = 4 + 8 * 2 + 5, step_down = 6, pair = 9;
  const double fit = RATING_FIT_BANDS * (1 + 1 + 1) + 1 + step_down;
  const double sums = 2 * (16 + 16 + 18) + 3 * (logarithm + 1 + step_down); /* C, Ctr, OITC */
  return BANDS * (MODEL_SUBBANDS * tone + logarithm) + pair + 2 * fit + sums;
}

static double reference_rate(const ground *g) {
  double start = cpu_s(), sum = 0.0;
  for (int i = 0; i < REFERENCE_WALLS; i++) {
    prediction p;
    wall w = g->cores[i % g->core_count];
    w.side[SIDE_A] = g->faces[i * 31 % g->face_count];
    w.side[SIDE_B] = g->faces[i * 17 % g->face_count];
    predict_wall(g->catalog, &w, &p);
    sum += p.exact[METRIC_STC];
  }
  double spent = cpu_s() - start;
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
  if (!decides_alike(g, BOUND_TARGET_LOW) || !decides_alike(g, BOUND_TARGET_HIGH)) {
    fprintf(stderr, "deciding and rating differ\n");
    return EXIT_FAILURE;
  }
  double peak = peak_flops(), reference = reference_rate(g), full = sweep_rate(g, SWEEP_ALL, 0);
  figure(g->memory, "full_walls_per_second_per_core", full, 0, "walls/s");
  figure(g->memory, "full_ratio_to_reference", full / reference, 1, "1");
  figure(g->memory, "full_share_of_peak", full * flops_of_a_wall() / peak, 3, "1");
  figure(g->memory, "decide_walls_per_second_per_core_stc50",
         sweep_rate(g, SWEEP_DECIDE, BOUND_TARGET_LOW), 0, "walls/s");
  figure(g->memory, "decide_walls_per_second_per_core_stc60",
         sweep_rate(g, SWEEP_DECIDE, BOUND_TARGET_HIGH), 0, "walls/s");
  figure(g->memory, "stc_walls_per_second_per_core", sweep_rate(g, SWEEP_STC, 0), 0, "walls/s");
  figure(g->memory, "bound_walls_per_second", sweep_rate(g, SWEEP_BOUND, 0), 0, "walls/s");
  figure(g->memory, "reference_walls_per_second", reference, 0, "walls/s");
  figure(g->memory, "peak_flops_per_core", peak, 0, "flop/s");
  figure(g->memory, "full_flops_a_wall", flops_of_a_wall(), 0, "flop");
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
