/* The search: the cheapest wall over the whole catalog, how the sweep grows, one thread and two. */
#include "bench.h"

#include <math.h>
#include <sys/resource.h>

#include "search/cheapest.h"
#include "search/sweep.h"

#define STC_LOW         50
#define STC_HIGH        60
#define THICKNESS_MAX_M 0.250
#define LENGTH_M        6.0
enum { POINTS = 4, REPEATS = 3 };

typedef struct ground {
  arena *memory;
  const catalog *catalog;
  const price_book *prices;
} ground;

/* Scratch of one measurement, freed after it. */
static arena *scratch(jmp_buf *fail) {
  arena *a = arena_create(0, fail);
  if (!a) exit(EXIT_FAILURE);
  return a;
}

static brief asking(int stc) {
  brief b;
  job_defaults(&b);
  b.length_m = LENGTH_M;
  b.target_count = 1;
  b.targets[0] = (target){.metric = METRIC_STC, .value = stc, .confidence = 0.8};
  return b;
}

static double peak_mib(void) {
  struct rusage r;
  getrusage(RUSAGE_SELF, &r);
  return (double)r.ru_maxrss / 1024;
}

/* ---- the cheapest wall of the whole catalog ---- */

static double pick_seconds(ground *g, arena *a, const brief *b, long long *walls) {
  judge_context x = {g->catalog, g->prices, b};
  space s;
  candidate best;
  cheapest_work work;
  double start = wall_s();
  space_build_whole(a, &x, &s);
  double built = wall_s();
  bool found = cheapest_search(a, &s, &best, &work);
  double spent = wall_s() - start;
  if (walls) *walls = space_count(&s);
  fprintf(stderr, "STC %d: %d cores, %d leaves; %s %.2f; looked at: %lld cores, %lld walls screened, ",
          (int)b->targets[0].value, s.core_count, s.face_count, found ? "least cost" : "no wall",
          found ? (double)best.is.cost_cents / 100 : 0.0, work.cores, work.screened);
  fprintf(stderr, "%lld rated; space %.3f s\n", work.rated, built - start);
  return spent;
}

static void bench_pick(ground *g, jmp_buf *fail) {
  brief low = asking(STC_LOW), high = asking(STC_HIGH);
  long long walls;
  high.thickness_m = (limit){false, true, 0, THICKNESS_MAX_M};
  arena *a = scratch(fail);
  double seconds = pick_seconds(g, a, &low, NULL), mib = peak_mib();
  arena_free(a);
  a = scratch(fail);
  double seconds_high = pick_seconds(g, a, &high, &walls);
  arena_free(a);
  figure(g->memory, "pick_catalog_seconds", seconds, 3, "s");
  figure(g->memory, "pick_catalog_walls", (double)walls, 0, "walls");
  figure(g->memory, "pick_peak_mib", mib, 1, "MiB");
  figure(g->memory, "pick_catalog_seconds_stc60", seconds_high, 3, "s");
}

/* ---- the full sweep ---- */

/* Spaces of some 10^5 to 10^7 walls with the same leaves, more cores each: what `only` leaves of any
 * build. */
static void narrow(brief *b, int point) {
  static const char *const leaves[] = {"typex-16", "gyp-13", "gyp-16",        "moist-16",
                                       "abuse-16", "osb-11", "ply-13",        "fibreboard-13",
                                       "mlv-5",    "mlv-2",  "damp-layer"};
  static const char *const cores[POINTS][3] = {
      {"frame:wood-89", "rc", NULL},
      {"frame:steel-92-*", "fill:glass-89", "rc"},
      {"frame:steel-92-*", "fill:glass-*", NULL},
      {NULL, NULL, NULL},
  };
  for (size_t i = 0; i < sizeof leaves / sizeof *leaves; i++) b->only[b->only_count++] = leaves[i];
  for (int i = 0; i < 3 && cores[point][i]; i++) b->only[b->only_count++] = cores[point][i];
  b->build = BUILD_ANY;
}

static double sweep_seconds(ground *g, jmp_buf *fail, const brief *b, int threads, bool cpu,
                            long long *walls) {
  arena *a = scratch(fail);
  judge_context x = {g->catalog, g->prices, b};
  space *s = arena_alloc(a, sizeof *s);
  sweep_result *r = arena_alloc(a, sizeof *r);
  space_build(a, &x, s);
  s->threads = threads;
  double start = cpu ? cpu_s() : wall_s();
  sweep_run(a, s, r);
  double spent = (cpu ? cpu_s() : wall_s()) - start;
  *walls = r->walls;
  arena_free(a);
  return spent;
}

/* Slope of the line of least squares through n points. */
static double slope(const double *x, const double *y, int n) {
  double sx = 0, sy = 0, sxx = 0, sxy = 0;
  for (int i = 0; i < n; i++) sx += x[i], sy += y[i], sxx += x[i] * x[i], sxy += x[i] * y[i];
  return (n * sxy - sx * sy) / (n * sxx - sx * sx);
}

/* From the start of the program to the walls of a small brief: processor time, catalogs read. */
static void bench_first_answer(ground *g, jmp_buf *fail) {
  long long walls;
  brief b = asking(STC_LOW);
  b.only[b.only_count++] = "frame:wood-89";
  sweep_seconds(g, fail, &b, 1, true, &walls);
  figure(g->memory, "first_answer_seconds", cpu_s(), 3, "s");
}

static void bench_sweep(ground *g, jmp_buf *fail) {
  double x[POINTS], y[POINTS];
  long long walls = 0;
  for (int i = 0; i < POINTS; i++) {
    brief b = asking(STC_LOW);
    narrow(&b, i);
    double seconds = sweep_seconds(g, fail, &b, 1, true, &walls);
    x[i] = log10((double)walls);
    y[i] = log10(seconds);
    fprintf(stderr, "sweep of %lld walls: %.3f s of processor\n", walls, seconds);
  }
  figure(g->memory, "scaling_slope", slope(x, y, POINTS), 3, "1");
  figure(g->memory, "sweep_walls_per_second_per_core", pow(10, x[POINTS - 1] - y[POINTS - 1]), 0,
         "walls/s");
}

/* The best of some runs each, in turn: other work on the machine only slows. */
static void bench_threads(ground *g, jmp_buf *fail) {
  double one = HUGE_VAL, two = HUGE_VAL;
  long long walls;
  brief b = asking(STC_LOW);
  for (int i = 0; i < REPEATS; i++) {
    one = fmin(one, sweep_seconds(g, fail, &b, 1, false, &walls));
    two = fmin(two, sweep_seconds(g, fail, &b, 2, false, &walls));
  }
  figure(g->memory, "threads2_speedup", one / two, 2, "1");
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
  diag_list d;
  diag_init(&d, g.memory);
  g.catalog = catalog_load(g.memory, &d, TEST_ROOT "/catalogs");
  if (g.catalog)
    g.prices = prices_load(g.memory, &d, g.catalog, TEST_ROOT "/prices/kestrel-yard.json");
  if (!g.prices) return EXIT_FAILURE;
  bench_first_answer(&g, &out_of_memory);
  bench_pick(&g, &out_of_memory);
  bench_sweep(&g, &out_of_memory);
  bench_threads(&g, &out_of_memory);
  arena_free(g.memory);
  return EXIT_SUCCESS;
}
