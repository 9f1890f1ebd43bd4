/* Speed of plan: 2,000 walls in 40 classes (a project made from a seed) over the shipped catalog
 * and prices, from the read schedule to the proven plan; one JSON line a figure on stdout. */
#include <string.h>

#include "../unit/random_project.h"
#include "../unit/types_problem.h"
#include "bench.h"
#include "explain/plan.h"

enum { ROWS = 2000, SEED = 1, REPEATS = 3, LIMIT_S = 40 };

static const char rules[] =
    "\"max_types\":9,\"type_setup_cost\":1500,\"min_run_m\":20,\"floor_area_value_per_m2\":60,";
/* Few enough walls that all those that fit somewhere may stand in the model. */
static const char coarse[] = "\"only\":[\"board:typex-16\",\"board:abuse-16\",\"board:moist-16\","
                             "\"board:cement-13\",\"frame:steel-92-18\",\"frame:steel-152-18\","
                             "\"frame:steel-92-33\",\"frame:steel-152-33\",\"frame:wood-89\","
                             "\"frame:wood-140\",\"frame:wood-89-double\","
                             "\"frame:steel-92-18-double\",\"frame:steel-64-33\",\"glass-89\","
                             "\"glass-140\",\"glass-65\",\"rc\"],";

typedef struct ground {
  arena *memory;
  diag_list faults;
  const catalog *catalog;
  const price_book *prices;
  project project;
  plan_context x;
} ground;

static bool set_project(ground *g, const char *keys) {
  int demand[PROJECT_DEMANDS];
  for (int i = 0; i < PROJECT_DEMANDS; i++) demand[i] = i;
  const char *walls = project_walls(g->memory, SEED, ROWS, 1, PROJECT_DEMANDS, demand);
  const schedule *s = project_from(g->memory, &g->faults, g->catalog, keys, walls, &g->project);
  g->x = (plan_context){g->catalog, g->prices, &g->project, s};
  return s != NULL;
}

typedef struct run {
  double seconds, cpu, mib;
  int types, pairs, refused;
  plan_solution plan;
} run;

/* From the schedule to the proven plan, in an arena of its own. */
static run plan_once(ground *g, jmp_buf *fail, int keep, bool plain) {
  run r = {0};
  plan_types t;
  plan_how how = {.seconds = LIMIT_S, .plain = plain};
  arena *a = arena_create(0, fail);
  if (!a) longjmp(*fail, 1);
  double start = wall_s(), cpu = cpu_s();
  types_find(a, &g->x, keep, &t);
  plan_problem p = problem_of(a, &g->x, &t);
  if (!plan_solve(a, &g->faults, &p, &how, NULL, &r.plan)) r.plan.found = false;
  r.seconds = wall_s() - start;
  r.cpu = cpu_s() - cpu;
  r.mib = (double)arena_used(a) / 1048576.0;
  r.types = t.count;
  for (int c = 0; c < g->x.schedule->class_count; c++) {
    r.refused += t.refused[c] != NULL;
    for (int i = 0; i < t.count; i++) r.pairs += t.type[i].use[c].fits;
  }
  arena_free(a);
  return r;
}

/* The best of some runs: other work on the machine only slows. */
static run plan_best(ground *g, jmp_buf *fail, int keep, bool plain, int repeats) {
  run best = plan_once(g, fail, keep, plain);
  for (int i = 1; i < repeats; i++) {
    run again = plan_once(g, fail, keep, plain);
    if (again.seconds < best.seconds) best = again;
  }
  return best;
}

static void say(const run *r, const char *what) {
  fprintf(stderr,
          "%s: %d types, %d pairs with classes, %d classes without a wall, %s, %.2f; %.2f s of "
          "processor\n",
          what, r->types, r->pairs, r->refused,
          !r->plan.found                     ? "no plan"
          : r->plan.status == SOLVER_OPTIMAL ? "proven"
                                             : "not proven in time",
          (double)r->plan.cost_cents / 100, r->cpu);
}

static double curves_seconds(ground *g, jmp_buf *fail) {
  arena *a = arena_create(0, fail);
  if (!a) longjmp(*fail, 1);
  plan_order order = {0};
  plan_answer *out = arena_alloc(a, sizeof *out);
  double start = wall_s();
  bool done = plan_explain(a, &g->faults, &g->x, NULL, &order, out);
  double spent = wall_s() - start;
  fprintf(stderr, "with curves: %s, %d types used\n", done && out->found ? "planned" : "no plan",
          out->type_count);
  arena_free(a);
  return spent;
}

static void bench_whole(ground *g, jmp_buf *fail) {
  run r = plan_best(g, fail, TYPES_NEEDED, false, REPEATS);
  say(&r, "whole catalog");
  figure(g->memory, "plan2000_seconds", r.seconds, 2, "s");
  figure(g->memory, "plan2000_memory_mib", r.mib, 0, "MiB");
  figure(g->memory, "plan2000_curves_seconds", curves_seconds(g, fail), 2, "s");
}

/* Of the whole catalog some 10^5 walls fit somewhere: no model holds them. Of a coarser one all of
 * them are given to the solver, once with its own bounds and once to branch and bound as it is. */
static void bench_coarse(ground *g, jmp_buf *fail) {
  run pruned = plan_best(g, fail, TYPES_NEEDED, false, 1);
  run all = plan_best(g, fail, TYPES_ALL, false, 1);
  run plain = plan_best(g, fail, TYPES_NEEDED, true, 1);
  say(&pruned, "coarse catalog");
  say(&all, "coarse catalog, every wall that fits somewhere");
  say(&plain, "coarse catalog, branch and bound alone");
  figure(g->memory, "plan2000_coarse_seconds", pruned.seconds, 2, "s");
  figure(g->memory, "plan2000_unpruned_seconds", all.seconds, 2, "s");
  figure(g->memory, "plan2000_coarse_plain_seconds", plain.seconds, 2, "s");
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
  diag_init(&g.faults, g.memory);
  g.catalog = catalog_load(g.memory, &g.faults, TEST_ROOT "/catalogs");
  if (g.catalog)
    g.prices = prices_load(g.memory, &g.faults, g.catalog, TEST_ROOT "/prices/kestrel-yard.json");
  if (!g.prices || !set_project(&g, rules)) return EXIT_FAILURE;
  bench_whole(&g, &out_of_memory);
  if (!set_project(&g, text_format(g.memory, "%s%s", rules, coarse))) return EXIT_FAILURE;
  bench_coarse(&g, &out_of_memory);
  arena_free(g.memory);
  return EXIT_SUCCESS;
}
