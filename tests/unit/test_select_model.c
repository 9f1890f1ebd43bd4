/* GLPK's choice against brute force: judge_wall on every wall of 200 seeded briefs. The model's
 * file against what was solved, by glpsol and cbc where they are installed. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <unistd.h>

#include "base/file.h"
#include "random_briefs.h"
#include "select/model.h"
#include "share.h"

enum { BRIEFS = 200, LEAST_FEASIBLE = 60, LONGEST_FILE = 1 << 24 };

typedef struct scene {
  brief brief;
  judge_context context;
  space space;
  sweep_result sweep;
  pick_choice choice;
} scene;

static void pick(scene *x, unsigned seed, const char *save) {
  diag_list d;
  x->brief = random_brief(seed);
  x->context = (judge_context){shop.catalog, shop.prices, &x->brief};
  diag_init(&d, shop.memory);
  space_build(shop.memory, &x->context, &x->space);
  sweep_run(shop.memory, &x->space, &x->sweep);
  ck_assert(model_choose(shop.memory, &d, &x->space, &x->sweep, 0, save, &x->choice));
  ck_assert_uint_eq(d.count, 0);
}

START_TEST(the_choice_is_that_of_brute_force) {
  scene x;
  pick(&x, (unsigned)_i, NULL);
  brute all = judge_all(&x.space);
  const candidate *best = brute_cheapest(&x.space, &all, 0);
  ck_assert_int_eq(x.choice.status, best ? SOLVER_OPTIMAL : SOLVER_INFEASIBLE);
  ck_assert_int_eq(x.choice.found, best != NULL);
  if (!best) return;
  ck_assert_int_eq(x.choice.chosen.core, best->core);
  ck_assert_int_eq(x.choice.chosen.face_a, best->face_a);
  ck_assert_int_eq(x.choice.chosen.face_b, best->face_b);
  ck_assert_int_eq(llround(x.choice.objective * 100), best->is.cost_cents);
}
END_TEST

START_TEST(enough_of_the_briefs_can_be_met) {
  int found = 0;
  for (unsigned i = 0; i < BRIEFS; i++) {
    scene x;
    pick(&x, i, NULL);
    found += x.choice.found;
  }
  ck_assert_int_ge(found, LEAST_FEASIBLE);
  ck_assert_int_le(found, BRIEFS - LEAST_FEASIBLE);
}
END_TEST

/* ---- the model's rows ---- */

static double row_value(const solver_model *m, int row, int column) {
  double sum = 0;
  for (int k = 0; k < m->entry_count; k++)
    if (m->entries[k].row == row && m->entries[k].column == column) sum += m->entries[k].value;
  return sum;
}

static bool row_holds(const solver_row *r, double value) {
  switch (r->sense) {
  case ROW_LESS:
    return value <= r->bound;
  case ROW_GREATER:
    return value >= r->bound;
  case ROW_EQUAL:
    break;
  }
  return !(value < r->bound) && !(value > r->bound);
}

/* The rows are exact: a column keeps them all when, and only when, the judge says that its wall
 * breaks nothing. */
START_TEST(rows_say_what_the_judge_says) {
  scene x;
  solver_model m;
  pick(&x, (unsigned)_i, NULL);
  model_pick(shop.memory, &x.space, &x.sweep, &m);
  for (int j = 0; j < x.sweep.frontier_count; j++) {
    bool holds = true;
    for (int i = 0; i < m.row_count; i++)
      holds = holds && row_holds(&m.rows[i], row_value(&m, i, j));
    ck_assert_msg(holds == (x.sweep.frontier[j].broken == 0), "brief %d column %d", _i, j);
  }
}
END_TEST

/* ---- other solvers ---- */

static char folder[] = "/tmp/septum-model-XXXXXX";

static void open_folder(void) {
  open_shop();
  memcpy(folder + strlen(folder) - 6, "XXXXXX", 6);
  ck_assert_ptr_nonnull(mkdtemp(folder));
}

static void close_folder(void) {
  static const char *const names[] = {"pick.lp", "glpsol.txt", "cbc.txt"};
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    (void)unlink(file_join(shop.memory, folder, names[i]));
  (void)rmdir(folder);
  close_shop();
}

/* The number that follows `label`, after what stands between them; NAN without the label. */
static double number_after(const char *words, const char *label) {
  const char *at = strstr(words, label);
  return at ? strtod(at + strlen(label), NULL) : NAN;
}

/* What another solver says of the file. `label` stands before the objective in what it writes.
 * False when it is not installed. */
static bool other_says(const char *command, const char *output, const char *label,
                       const char *hopeless, bool *found, double *objective) {
  diag_list d;
  size_t len;
  diag_init(&d, shop.memory);
  if (system(command) != 0) return false;
  char *words =
      file_read(shop.memory, &d, file_join(shop.memory, folder, output), LONGEST_FILE, &len);
  ck_assert_ptr_nonnull(words);
  *found = strstr(words, hopeless) == NULL;
  *objective = number_after(words, label);
  return true;
}

static void compare(const scene *x, bool said, bool found, double objective) {
  if (!said) return;
  ck_assert_int_eq(found, x->choice.found);
  if (found) ck_assert_int_eq(llround(objective * 100), x->choice.chosen.is.cost_cents);
}

START_TEST(other_solvers_find_the_same_cost_in_the_file) {
  scene x;
  bool found = false;
  double objective = 0;
  const char *lp = file_join(shop.memory, folder, "pick.lp");
  pick(&x, (unsigned)_i, lp);
  const char *glpsol = text_format(
      shop.memory,
      "command -v glpsol >/dev/null && cd %s && glpsol --lp pick.lp -o glpsol.txt >/dev/null",
      folder);
  bool said =
      other_says(glpsol, "glpsol.txt", "Objective:  cost = ", "INTEGER EMPTY", &found, &objective);
  compare(&x, said, found, objective);
  const char *cbc = text_format(
      shop.memory,
      "command -v cbc >/dev/null && cd %s && cbc pick.lp solve solution cbc.txt >/dev/null",
      folder);
  said = other_says(cbc, "cbc.txt", "objective value", "nfeasible", &found, &objective);
  compare(&x, said, found, objective);
}
END_TEST

START_TEST(a_frontier_without_walls_is_infeasible) {
  scene x;
  pick(&x, 3, NULL);
  sweep_result none = {0};
  diag_list d;
  diag_init(&d, shop.memory);
  ck_assert(model_choose(shop.memory, &d, &x.space, &none, 0, NULL, &x.choice));
  ck_assert_int_eq(x.choice.status, SOLVER_INFEASIBLE);
  ck_assert(!x.choice.found);
}
END_TEST

int main(void) {
  Suite *s = suite_create("select_model");
  TCase *t = tcase_create("the choice");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, the_choice_is_that_of_brute_force, 0, share_of(BRIEFS));
  tcase_add_test(t, enough_of_the_briefs_can_be_met);
  tcase_add_loop_test(t, rows_say_what_the_judge_says, 0, share_of(BRIEFS / 4));
  tcase_add_test(t, a_frontier_without_walls_is_infeasible);
  suite_add_tcase(s, t);
  TCase *f = tcase_create("the file");
  tcase_set_timeout(f, 300);
  tcase_add_checked_fixture(f, open_folder, close_folder);
  tcase_add_loop_test(f, other_solvers_find_the_same_cost_in_the_file, 0, share_of(BRIEFS / 5));
  suite_add_tcase(s, f);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
