/* `plan` against brute force on seeded small problems with every rule on and off; and cases worked
 * by hand. */
#include <stdlib.h>

#include "random_plans.h"
#include "share.h"

enum { PROBLEMS = 320, EVERY_RULE = (1 << PLAN_RULES) - 1, NO_MARGIN = INT_MIN };

static diag_list faults;

static void open_all(void) {
  open_plans();
  diag_init(&faults, plan_memory);
}

static plan_solution solve(const plan_problem *p, plan_how how) {
  plan_solution out;
  ck_assert(plan_solve(plan_memory, &faults, p, &how, NULL, &out));
  ck_assert_uint_eq(faults.count, 0);
  return out;
}

/* Features by the bits of the seed, so that each meets each; a budget now and then too small. */
static plan_problem seeded(int seed) {
  unsigned features = (unsigned)seed * 37u % (ALL_FEATURES + 1);
  plan_problem p = small_plan((unsigned)seed, features);
  if (features & WITH_BUDGET) {
    long long least = brute_least(&p, (brute_rules){EVERY_RULE, NO_MARGIN});
    long long loose = brute_least(&p, (brute_rules){0, NO_MARGIN});
    p.budget_cents = seed % 3 == 0 || least == LLONG_MAX ? loose + seed % 5 * 100 : least + 7000;
  }
  return p;
}

static void check_plan(const plan_problem *p, const plan_solution *s) {
  ck_assert(brute_keeps(p, s->type_of, (brute_rules){EVERY_RULE, NO_MARGIN}));
  ck_assert_int_eq(s->cost_cents, brute_cost(p, s->type_of));
  long long goods = 0;
  for (int i = 0; i < p->items; i++) {
    const plan_buy *b = &s->buy[i];
    ck_assert_double_ge(b->bought + b->from_stock + 1e-6, b->need);
    ck_assert_double_eq_tol(b->bought + b->from_stock - b->need, b->surplus, 1e-6);
    if (b->tier == PLAN_NONE)
      ck_assert_int_eq(b->cents, 0);
    else
      ck_assert_double_le(fabs(b->bought * p->item[i].tier[b->tier].price * 100 - (double)b->cents),
                          1 + 1e-6);
    goods += b->cents;
  }
  long long walls = brute_types(p, s->type_of) * p->setup_cents;
  for (int c = 0; c < p->classes; c++) walls += p->cents[c * p->types + s->type_of[c]];
  ck_assert_int_eq(walls + goods, s->cost_cents);
}

START_TEST(cost_is_that_of_brute_force) {
  plan_problem p = seeded(_i);
  long long best = brute_least(&p, (brute_rules){EVERY_RULE, NO_MARGIN});
  for (int plain = 0; plain < 2; plain++) {
    plan_solution s = solve(&p, (plan_how){.plain = plain});
    ck_assert_int_eq(s.status, best == LLONG_MAX ? SOLVER_INFEASIBLE : SOLVER_OPTIMAL);
    ck_assert_int_eq(s.found, best != LLONG_MAX);
    if (!s.found) continue;
    ck_assert_int_eq(s.cost_cents, best);
    ck_assert_int_eq(s.bound_cents, best);
    check_plan(&p, &s);
  }
}
END_TEST

START_TEST(enough_of_them_have_a_plan_and_enough_none) {
  int none = 0;
  for (int i = 0; i < PROBLEMS; i++) {
    plan_problem p = seeded(i);
    none += brute_least(&p, (brute_rules){EVERY_RULE, NO_MARGIN}) == LLONG_MAX;
  }
  ck_assert_int_ge(none, PROBLEMS / 8);
  ck_assert_int_le(none, PROBLEMS / 2);
}
END_TEST

/* ---- margin ---- */

static int brute_best_margin(const plan_problem *p) {
  int best = INT_MIN, type_of[SMALL_CLASSES] = {0};
  do {
    int worst = INT_MAX;
    if (!brute_keeps(p, type_of, (brute_rules){EVERY_RULE, NO_MARGIN})) continue;
    for (int c = 0; c < p->classes; c++) {
      int margin = p->margin[c * p->types + type_of[c]];
      if (margin < worst) worst = margin;
    }
    if (worst > best) best = worst;
  } while (brute_next(p, type_of));
  return best;
}

START_TEST(margin_is_that_of_brute_force) {
  plan_problem p = seeded(_i);
  if (_i % 2) { /* a budget that pays for something, not for everything */
    long long least = brute_least(&p, (brute_rules){EVERY_RULE, NO_MARGIN});
    if (least < LLONG_MAX) p.budget_cents = least + least * (_i % 20) / 100;
  }
  plan_solution s = solve(&p, (plan_how){.margin = true});
  int best = brute_best_margin(&p);
  ck_assert_int_eq(s.status, best == INT_MIN ? SOLVER_INFEASIBLE : SOLVER_OPTIMAL);
  ck_assert_int_eq(s.found, best != INT_MIN);
  if (!s.found) return;
  ck_assert_int_eq(s.worst_margin, best);
  ck_assert_int_eq(s.margin_bound, best);
  ck_assert_int_eq(s.cost_cents, brute_least(&p, (brute_rules){EVERY_RULE, best}));
  check_plan(&p, &s);
}
END_TEST

/* ---- conflicts ---- */

static unsigned stated_rules(const plan_problem *p) {
  unsigned rules = 0;
  if (p->max_types > 0) rules |= 1u << PLAN_RULE_TYPES;
  if (p->min_run_m > 0) rules |= 1u << PLAN_RULE_RUN;
  if (p->budget_cents > 0) rules |= 1u << PLAN_RULE_BUDGET;
  if (p->floor_max_m2 > 0) rules |= 1u << PLAN_RULE_FLOOR;
  if (p->storey) rules |= 1u << PLAN_RULE_FRAMING;
  return rules;
}

static bool listed(const plan_solution *s, unsigned set) {
  for (int i = 0; i < s->conflict_count; i++)
    if (s->conflict[i] == set) return true;
  return false;
}

START_TEST(conflicts_are_all_smallest_sets) {
  plan_problem p = small_plan((unsigned)_i, ALL_FEATURES);
  p.budget_cents = brute_least(&p, (brute_rules){0, NO_MARGIN}) + _i % 7 * 3000;
  plan_solution s = solve(&p, (plan_how){0});
  bool impossible[1 << PLAN_RULES];
  int smallest = 0;
  for (unsigned set = 0; set <= EVERY_RULE; set++)
    impossible[set] = brute_least(&p, (brute_rules){set, NO_MARGIN}) == LLONG_MAX;
  for (unsigned set = 0; set <= EVERY_RULE; set++) {
    if ((set & ~stated_rules(&p)) || !impossible[set]) continue;
    bool is_smallest = true;
    for (int r = 0; r < PLAN_RULES; r++)
      if (set & 1u << r && impossible[set & ~(1u << r)]) is_smallest = false;
    smallest += is_smallest;
    ck_assert_int_eq(listed(&s, set), is_smallest);
  }
  ck_assert_int_eq(s.conflict_count, smallest);
  if (s.status == SOLVER_INFEASIBLE) ck_assert(s.conflicts_whole);
}
END_TEST

int main(void) {
  Suite *s = suite_create("select_plan");
  TCase *t = tcase_create("brute force");
  tcase_set_timeout(t, 10);
  tcase_add_checked_fixture(t, open_all, close_plans);
  tcase_add_loop_test(t, cost_is_that_of_brute_force, 0, share_of(PROBLEMS));
  tcase_add_test(t, enough_of_them_have_a_plan_and_enough_none);
  tcase_add_loop_test(t, margin_is_that_of_brute_force, 0, share_of(PROBLEMS / 2));
  tcase_add_loop_test(t, conflicts_are_all_smallest_sets, 0, share_of(PROBLEMS / 2));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
