/* The file of a plan's model, solved by glpsol and cbc where they are installed, costs what `plan`
 * says; and its names are readable, each once. */
#include <stdio.h>
#include <stdlib.h>
#include <unistd.h>

#include "base/file.h"
#include "random_plans.h"

enum { FILES = 24, LONGEST_FILE = 1 << 24 };
/* the model buys fractions of cents that the answer rounds once */
static const double cent = 1;

static char folder[] = "/tmp/septum-plan-XXXXXX";
static diag_list faults;

static void open_folder(void) {
  open_plans();
  diag_init(&faults, plan_memory);
  memcpy(folder + strlen(folder) - 6, "XXXXXX", 6);
  ck_assert_ptr_nonnull(mkdtemp(folder));
}

static void close_folder(void) {
  static const char *const names[] = {"plan.lp", "glpsol.txt", "cbc.txt"};
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    (void)unlink(file_join(plan_memory, folder, names[i]));
  (void)rmdir(folder);
  close_plans();
}

static char *read_all(const char *name) {
  size_t len;
  char *words =
      file_read(plan_memory, &faults, file_join(plan_memory, folder, name), LONGEST_FILE, &len);
  ck_assert_ptr_nonnull(words);
  return words;
}

/* The objective that another solver finds, in cents; HUGE_VAL when it finds none; NAN when it is
 * not installed. `label` stands before the objective in what it writes. */
static double other_says(const char *command, const char *output, const char *label,
                         const char *hopeless) {
  if (system(text_format(plan_memory, command, folder)) != 0) return NAN;
  const char *words = read_all(output);
  if (strstr(words, hopeless)) return HUGE_VAL;
  const char *at = strstr(words, label);
  ck_assert_ptr_nonnull(at);
  return strtod(at + strlen(label), NULL) * 100;
}

static void compare(const plan_solution *s, double cents) {
  if (isnan(cents)) return;
  ck_assert_int_eq(s->found, cents < HUGE_VAL);
  if (s->found) ck_assert_double_eq_tol(cents, (double)s->cost_cents, cent);
}

static plan_problem problem(int seed) {
  unsigned features = (unsigned)seed * 37u % (ALL_FEATURES + 1) & ~(unsigned)WITH_BUDGET;
  if (seed % 3 == 0) return large_plan((unsigned)seed, 8, 12, 3 + seed % 5);
  return small_plan((unsigned)seed, features | WITH_ITEMS);
}

START_TEST(other_solvers_find_the_same_cost) {
  plan_problem p = problem(_i);
  plan_solution s;
  plan_how how = {.margin = _i % 4 == 1};
  if (how.margin) { /* a budget that pays for a little more than the least */
    plan_how least = {0};
    ck_assert(plan_solve(plan_memory, &faults, &p, &least, NULL, &s));
    if (s.found) p.budget_cents = s.cost_cents + s.cost_cents / 20;
  }
  const char *lp = file_join(plan_memory, folder, "plan.lp");
  ck_assert(plan_solve(plan_memory, &faults, &p, &how, lp, &s));
  ck_assert_int_ne(s.status, SOLVER_LIMIT);
  compare(&s, other_says("command -v glpsol >/dev/null && cd %s && glpsol --lp plan.lp --mipgap 0 "
                         "--tmlim 60 -o glpsol.txt >/dev/null",
                         "glpsol.txt", "Objective:  cost = ", "EMPTY"));
  compare(&s, other_says("command -v cbc >/dev/null && cd %s && cbc plan.lp ratio 0 allow 0 sec 60 "
                         "solve solution cbc.txt >/dev/null",
                         "cbc.txt", "objective value", "nfeasible"));
}
END_TEST

START_TEST(names_are_readable) {
  plan_problem p = small_plan(3, WITH_ITEMS | WITH_STOCK | WITH_TYPES | WITH_RUN | WITH_FRAMING);
  plan_item *items = arena_array(plan_memory, 2, sizeof *items);
  items[0] = items[1] = p.item[0]; /* codes that meet when cleaned */
  items[0].code = "board-16";
  items[1].code = "board 16";
  items[0].stock = 1;
  p.items = 2;
  p.item = items;
  p.need = arena_array(plan_memory, (size_t)(2 * p.classes * p.types), sizeof *p.need);
  plan_solution s;
  plan_how how = {0};
  const char *lp = file_join(plan_memory, folder, "plan.lp");
  ck_assert(plan_solve(plan_memory, &faults, &p, &how, lp, &s));
  const char *words = read_all("plan.lp");
  static const char *const wanted[] = {"assign_c1:",     "open_c1_t",         "types:",
                                       "used_t1:",       "run_t1:",           "x_c1_t",
                                       "y_t1",           "w_board_16",        "u_s1_g1",
                                       "framing_s1:",    "group_c1_t",        "z_board_16_0",
                                       "need_board_16:", "need_i2_board_16:", "q_i2_board_16_1"};
  for (size_t i = 0; i < sizeof wanted / sizeof wanted[0]; i++)
    ck_assert_msg(strstr(words, wanted[i]) != NULL, "no %s", wanted[i]);
}
END_TEST

START_TEST(no_file_where_none_can_be) {
  plan_problem p = small_plan(3, 0);
  plan_solution s;
  plan_how how = {0};
  const char *lp = file_join(plan_memory, folder, "no-such-folder/plan.lp");
  ck_assert(!plan_solve(plan_memory, &faults, &p, &how, lp, &s));
  ck_assert_int_eq(s.status, SOLVER_FAILED);
  ck_assert_int_eq(faults.items[0].code, ERROR_SYSTEM_WRITE);
}
END_TEST

int main(void) {
  Suite *s = suite_create("select_plan_file");
  TCase *t = tcase_create("the file");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_folder, close_folder);
  tcase_add_loop_test(t, other_solvers_find_the_same_cost, 0, FILES);
  tcase_add_test(t, names_are_readable);
  tcase_add_test(t, no_file_where_none_can_be);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
