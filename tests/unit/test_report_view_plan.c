/* Words that all writers of a plan share. */
#include <check.h>
#include <setjmp.h>
#include <stdlib.h>

#include "report/view_plan.h"

enum { MOST_IDS = 8 };

static arena *memory;
static jmp_buf no_memory;
static price_book book;
static brief asked;
static report usual;

static void set_up(void) {
  memory = arena_create(0, &no_memory);
  ck_assert_ptr_nonnull(memory);
  book = (price_book){.currency = "USD"};
  job_defaults(&asked);
  usual = (report){.arena = memory, .prices = &book, .brief = &asked, .units = UNITS_US};
}

static void tear_down(void) {
  arena_free(memory);
}

static const struct ids_row {
  const char *name;
  const char *id[MOST_IDS];
  const char *words;
} ids_rows[] = {
    {"one", {"A1"}, "A1"},
    {"two stay two", {"A1", "A2"}, "A1, A2"},
    {"a run", {"A1", "A2", "A3"}, "A1 to A3"},
    {"a gap", {"A1", "A2", "A3", "A5"}, "A1 to A3, A5"},
    {"another stem", {"A8", "A9", "B10", "B11", "B12"}, "A8, A9, B10 to B12"},
    {"one digit more", {"A8", "A9", "A10"}, "A8, A9, A10"},
    {"leading zeros", {"W-008", "W-009", "W-010"}, "W-008 to W-010"},
    {"falling", {"A3", "A2", "A1"}, "A3, A2, A1"},
    {"no digits", {"north", "south"}, "north, south"},
    {"bare numbers", {"7", "8", "9"}, "7 to 9"},
};

START_TEST(runs_of_ids) {
  const struct ids_row *row = &ids_rows[_i];
  schedule_wall named[MOST_IDS] = {{0}};
  plan_row as[MOST_IDS] = {{0}};
  int at[MOST_IDS], n = 0;
  for (; n < MOST_IDS && row->id[n]; n++) {
    named[n].id = row->id[n];
    at[n] = n;
  }
  schedule s = {.wall = named, .count = n};
  plan_answer p = {.schedule = &s, .row = as};
  ck_assert_str_eq(view_plan_all_ids(&usual, &p, at, n), row->words);
  ck_assert_str_eq(view_plan_ids(&usual, &p, at, n, true), "");
  as[0].mirrored = true;
  ck_assert_str_eq(view_plan_ids(&usual, &p, at, n, true), row->id[0]);
}
END_TEST

static plan_answer curve_of(const project *of, const long long *cents) {
  plan_answer p = {.project = of, .found = true};
  for (int i = 0; i < PLAN_CURVE; i++)
    p.curve[i] = (plan_point){.done = true,
                              .status = cents[i] ? SOLVER_OPTIMAL : SOLVER_INFEASIBLE,
                              .found = cents[i] != 0,
                              .max_types = i + 1,
                              .types = i + 1,
                              .cost_cents = cents[i]};
  return p;
}

START_TEST(where_types_stop_paying) {
  const long long cents[PLAN_CURVE] = {0, 90000, 85000, 84900, 84900, 84900, 84900, 84900};
  project of = {.max_types = 3};
  plan_answer p = curve_of(&of, cents);
  p.stops_at = 4;
  ck_assert_str_eq(view_plan_stop(&usual, &p),
                   "No plan with fewer than 2 types. Beyond 4 types another, up to 8, gains "
                   "nothing; the fourth saves 1.00 USD.");
  p.curve[5].status = SOLVER_LIMIT; /* what is not proved tells nothing */
  ck_assert_str_eq(view_plan_stop(&usual, &p), "");
}
END_TEST

START_TEST(a_plan_beyond_the_curve_stands_behind_it) {
  const long long cents[PLAN_CURVE] = {800, 700, 600, 500, 400, 300, 200, 100};
  project of = {.max_types = 10};
  plan_point point[VIEW_PLAN_POINTS];
  plan_answer p = curve_of(&of, cents);
  p.cost_cents = 40;
  p.type_count = 9;
  ck_assert_int_eq(view_plan_curve(&p, point), PLAN_CURVE + 1);
  ck_assert_int_eq(point[PLAN_CURVE].max_types, 10);
  ck_assert_int_eq(point[PLAN_CURVE].cost_cents, 40);
  of.max_types = 8;
  ck_assert_int_eq(view_plan_curve(&p, point), PLAN_CURVE);
}
END_TEST

START_TEST(rules_that_fight) {
  ck_assert_str_eq(view_plan_rules(&usual, 1u << PLAN_RULE_TYPES | 1u << PLAN_RULE_BUDGET),
                   "max_types and budget");
}
END_TEST

int main(void) {
  Suite *suite = suite_create("report view plan");
  TCase *cases = tcase_create("view");
  tcase_add_checked_fixture(cases, set_up, tear_down);
  tcase_add_loop_test(cases, runs_of_ids, 0, (int)(sizeof ids_rows / sizeof ids_rows[0]));
  tcase_add_test(cases, where_types_stop_paying);
  tcase_add_test(cases, a_plan_beyond_the_curve_stands_behind_it);
  tcase_add_test(cases, rules_that_fight);
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
