/* No optimum is lost with the walls that are dropped: plans of seeded small projects over the types
 * kept, over all types, and by trying every assignment. */
#include <limits.h>
#include <stdio.h>
#include <stdlib.h>

#include "random_briefs.h"
#include "random_project.h"
#include "share.h"
#include "types_problem.h"

enum { PROJECTS = 100, CLASSES = 3, MOST_TRIALS = 300000 };

typedef struct scene {
  diag_list faults;
  project project;
  schedule *schedule;
  plan_context x;
} scene;

static const char *const aims[] = {"", "\"objective\":\"margin\",\"budget\":60000,",
                                   "\"floor_area_max_m2\":9,", ""};

static void set_scene(scene *s, int seed) {
  diag_init(&s->faults, shop.memory);
  s->schedule = project_small(shop.memory, &s->faults, shop.catalog, (unsigned)seed, CLASSES,
                              aims[seed % 4], &s->project);
  ck_assert_msg(s->schedule != NULL, "project %d reads", seed);
  s->x = (plan_context){shop.catalog, shop.prices, &s->project, s->schedule};
}

static plan_solution solved(scene *s, const plan_problem *p) {
  plan_how how = {.margin = s->project.aim == AIM_MARGIN};
  plan_solution out;
  ck_assert(plan_solve(shop.memory, &s->faults, p, &how, NULL, &out));
  return out;
}

static void same_answer(int seed, const plan_solution *x, const plan_solution *y, bool margin) {
  ck_assert_msg(x->status == y->status, "project %d", seed);
  ck_assert_int_eq(x->found, y->found);
  if (!x->found) return;
  ck_assert_msg(x->cost_cents == y->cost_cents, "project %d: %lld for %lld", seed, x->cost_cents,
                y->cost_cents);
  if (margin) ck_assert_int_eq(x->worst_margin, y->worst_margin);
}

/* ---- every assignment ---- */

static bool framed_alike(const plan_problem *p, const int *type_of) {
  for (int c = 0; p->storey && c < p->classes; c++)
    for (int d = 0; d < c; d++)
      if (p->storey[c] == p->storey[d] && p->group[type_of[c]] != p->group[type_of[d]])
        return false;
  return true;
}

static bool used_enough(const plan_problem *p, const int *type_of) {
  int types = 0;
  for (int t = 0; t < p->types; t++) {
    double run_m = 0;
    bool used = false;
    for (int c = 0; c < p->classes; c++)
      if (type_of[c] == t) {
        used = true;
        run_m += p->run_m[c];
      }
    types += used;
    if (used && run_m < p->min_run_m - 1e-9) return false;
  }
  return p->max_types == 0 || types <= p->max_types;
}

static bool keeps_rules(const plan_problem *p, const int *type_of) {
  double floor_m2 = 0;
  for (int c = 0; c < p->classes; c++) {
    if (p->cents[c * p->types + type_of[c]] < 0) return false;
    floor_m2 += p->floor_m2[c * p->types + type_of[c]];
  }
  if (p->floor_max_m2 > 0 && floor_m2 > p->floor_max_m2 + 5e-4) return false;
  return framed_alike(p, type_of) && used_enough(p, type_of);
}

static int worst_margin(const plan_problem *p, const int *type_of) {
  int worst = INT_MAX;
  for (int c = 0; c < p->classes; c++)
    if (p->margin[c * p->types + type_of[c]] < worst) worst = p->margin[c * p->types + type_of[c]];
  return worst;
}

/* The best of all assignments; LLONG_MAX when none keeps the rules. */
static long long tried(const plan_problem *p, bool margin, int *best_margin) {
  int type_of[CLASSES] = {0};
  long long best = LLONG_MAX;
  *best_margin = INT_MIN;
  for (;;) {
    if (keeps_rules(p, type_of)) {
      long long cost = plan_cost(p, type_of, NULL);
      int worst = worst_margin(p, type_of);
      bool pays = p->budget_cents == 0 || cost <= p->budget_cents;
      bool better = margin && worst != *best_margin ? worst > *best_margin : cost < best;
      if (pays && better) {
        best = cost;
        *best_margin = worst;
      }
    }
    int c = 0;
    while (c < p->classes && ++type_of[c] == p->types) type_of[c++] = 0;
    if (c == p->classes) return best;
  }
}

static bool few_enough(const plan_problem *p) {
  double trials = 1;
  for (int c = 0; c < p->classes; c++) trials *= p->types;
  return p->classes > 0 && trials <= MOST_TRIALS;
}

START_TEST(no_optimum_is_lost) {
  scene s;
  plan_types all, kept;
  set_scene(&s, _i);
  types_find(shop.memory, &s.x, TYPES_ALL, &all);
  types_find(shop.memory, &s.x, TYPES_NEEDED, &kept);
  plan_problem p = problem_of(shop.memory, &s.x, &kept), q = problem_of(shop.memory, &s.x, &all);
  ck_assert_int_eq(p.classes, q.classes);
  if (p.classes == 0) return;
  bool margin = s.project.aim == AIM_MARGIN;
  plan_solution short_list = solved(&s, &p), long_list = solved(&s, &q);
  same_answer(_i, &short_list, &long_list, margin);
  for (int k = 0; k < 2; k++) {
    const plan_problem *of = k ? &q : &p;
    int worst;
    if (!few_enough(of)) continue;
    long long best = tried(of, margin, &worst);
    ck_assert_msg((best != LLONG_MAX) == short_list.found, "project %d", _i);
    if (!short_list.found) continue;
    ck_assert_msg(best == short_list.cost_cents, "project %d: %lld for %lld", _i,
                  short_list.cost_cents, best);
    if (margin) ck_assert_int_eq(worst, short_list.worst_margin);
  }
}
END_TEST

/* A plan that has to do without one of its types: what stands in the list behind that type only
 * serves then. */
START_TEST(nor_where_a_type_is_done_without) {
  scene s;
  plan_types all, kept;
  set_scene(&s, _i);
  types_find(shop.memory, &s.x, TYPES_ALL, &all);
  types_find(shop.memory, &s.x, TYPES_AND_SECONDS, &kept);
  plan_problem p = problem_of(shop.memory, &s.x, &kept), q = problem_of(shop.memory, &s.x, &all);
  if (p.classes == 0) return;
  bool *out = arena_array(shop.memory, (size_t)p.types, sizeof *out);
  bool *out_of_all = arena_array(shop.memory, (size_t)q.types, sizeof *out_of_all);
  for (int t = 0; t < p.types; t++) out[t] = kept.type[t].behind != TYPES_NONE;
  p.locked_out = out;
  q.locked_out = out_of_all;
  plan_solution with = solved(&s, &p);
  for (int c = 0; with.found && c < p.classes; c++) {
    int gone = with.type_of[c];
    for (int t = 0; t < p.types; t++)
      out[t] = t == gone || (kept.type[t].behind != TYPES_NONE && kept.type[t].behind != gone);
    for (int t = 0; t < q.types; t++)
      out_of_all[t] = wall_same(&all.type[t].wall, &kept.type[gone].wall);
    plan_solution short_list = solved(&s, &p), long_list = solved(&s, &q);
    same_answer(_i, &short_list, &long_list, s.project.aim == AIM_MARGIN);
  }
}
END_TEST

int main(void) {
  Suite *s = suite_create("select_types");
  TCase *t = tcase_create("pruned and not");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, no_optimum_is_lost, 0, share_of(PROJECTS));
  tcase_add_loop_test(t, nor_where_a_type_is_done_without, 0, share_of(PROJECTS / 4));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
