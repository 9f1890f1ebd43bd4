/* The gate to GLPK: answers against brute force, faults told and survived, files whole and readable
 * again. */
#include <check.h>
#include <dirent.h>
#include <math.h>
#include <setjmp.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "base/file.h"
#include "select/solver.h"

enum { KNAPSACKS = 60, ITEMS = 14, SPLIT_ROWS = 5, SPLIT_COLUMNS = 45, LONGEST_FILE = 1 << 20 };
/* costs are whole cents of about a million units, summed in double: far below half a cent */
static const double cent_fraction = 1e-4;

static arena *scratch;
static diag_list faults;
static jmp_buf out_of_memory;

static void open_scratch(void) {
  scratch = arena_create(0, &out_of_memory);
  ck_assert_ptr_nonnull(scratch);
  diag_init(&faults, scratch);
}

static void close_scratch(void) {
  arena_fail_at(0);
  arena_free(scratch);
}

/* A fixed sequence: the tests are the same on every run. */
static uint32_t next_random(uint32_t *state) {
  *state = *state * 1664525u + 1013904223u;
  return *state >> 8;
}

static solver_model make(int rows, int columns) {
  solver_model m = {.name = "case", .row_count = rows, .column_count = columns};
  m.rows = arena_array(scratch, (size_t)rows, sizeof *m.rows);
  m.columns = arena_array(scratch, (size_t)columns, sizeof *m.columns);
  m.entries = arena_array(scratch, (size_t)(rows * columns), sizeof *m.entries);
  for (int i = 0; i < rows; i++) m.rows[i].name = text_format(scratch, "r%d", i + 1);
  for (int j = 0; j < columns; j++)
    m.columns[j] = (solver_column){text_format(scratch, "x%d", j + 1), 0, true, 0, 1};
  return m;
}

static void put(solver_model *m, int row, int column, double value) {
  m->entries[m->entry_count++] = (solver_entry){row, column, value};
}

/* Covering with costs near a million: where a relative tolerance of the objective would show. */
static solver_model knapsack(uint32_t seed) {
  solver_model m = make(1, ITEMS + 1);
  double weight = 0;
  for (int j = 0; j < ITEMS; j++) {
    double w = 20 + next_random(&seed) % 80;
    weight += w;
    m.columns[j].cost = w * 1000 + (next_random(&seed) % 1000) * 0.01;
    put(&m, 0, j, w);
  }
  m.columns[ITEMS] = (solver_column){"const_one", 500000, false, 1, 1};
  m.rows[0].sense = ROW_GREATER;
  m.rows[0].bound = floor(weight / 2);
  return m;
}

static double brute_force(const solver_model *m) {
  double best = HUGE_VAL;
  for (unsigned set = 0; set < 1u << ITEMS; set++) {
    double weight = 0, cost = m->columns[ITEMS].cost;
    for (int j = 0; j < ITEMS; j++) {
      if (!((set >> j) & 1u)) continue;
      weight += m->entries[j].value;
      cost += m->columns[j].cost;
    }
    if (weight >= m->rows[0].bound && cost < best) best = cost;
  }
  return best;
}

START_TEST(least_cost_is_that_of_brute_force) {
  solver_model m = knapsack((uint32_t)_i + 1);
  solver_result r;
  solver_run(scratch, &faults, &m, 0, &r);
  ck_assert_int_eq(r.status, SOLVER_OPTIMAL);
  ck_assert(r.found);
  ck_assert_double_eq_tol(r.objective, brute_force(&m), cent_fraction);
  ck_assert_double_eq_tol(r.bound, r.objective, cent_fraction);
  ck_assert_double_eq(r.value[ITEMS], 1);
}
END_TEST

START_TEST(infeasible_is_an_answer) {
  solver_model m = make(1, 2);
  solver_result r;
  put(&m, 0, 0, 1);
  put(&m, 0, 1, 1);
  m.rows[0].sense = ROW_EQUAL;
  m.rows[0].bound = 1;
  m.columns[0].upper = m.columns[1].upper = 0;
  solver_run(scratch, &faults, &m, 0, &r);
  ck_assert_int_eq(r.status, SOLVER_INFEASIBLE);
  ck_assert(!r.found);
  ck_assert_uint_eq(faults.errors, 0);
}
END_TEST

START_TEST(integer_infeasible_is_an_answer) {
  solver_model m = make(1, 2); /* 2 x1 + 2 x2 = 1 has fractional solutions only */
  solver_result r;
  put(&m, 0, 0, 2);
  put(&m, 0, 1, 2);
  m.rows[0].sense = ROW_EQUAL;
  m.rows[0].bound = 1;
  solver_run(scratch, &faults, &m, 0, &r);
  ck_assert_int_eq(r.status, SOLVER_INFEASIBLE);
}
END_TEST

START_TEST(a_fixed_column_stays_at_zero) {
  solver_model m = make(1, 2);
  solver_result r;
  put(&m, 0, 0, 1);
  put(&m, 0, 1, 1);
  m.rows[0].sense = ROW_EQUAL;
  m.rows[0].bound = 1;
  m.columns[0].cost = 1;
  m.columns[0].upper = 0;
  m.columns[1].cost = 2;
  solver_run(scratch, &faults, &m, 0, &r);
  ck_assert_int_eq(r.status, SOLVER_OPTIMAL);
  ck_assert_double_eq(r.value[0], 0);
  ck_assert_double_eq(r.value[1], 1);
}
END_TEST

/* A market split of this size (Cornuejols and Dawande 1998) is far beyond branch and bound within
 * milliseconds. */
START_TEST(time_runs_out) {
  uint32_t seed = 7;
  solver_model m = make(SPLIT_ROWS, SPLIT_COLUMNS + 2 * SPLIT_ROWS);
  for (int i = 0; i < SPLIT_ROWS; i++) {
    double sum = 0;
    for (int j = 0; j < SPLIT_COLUMNS; j++) {
      double v = next_random(&seed) % 100;
      sum += v;
      put(&m, i, j, v);
    }
    for (int k = 0; k < 2; k++) { /* what is over and what is short of the half */
      int j = SPLIT_COLUMNS + 2 * i + k;
      m.columns[j] = (solver_column){m.columns[j].name, 1, false, 0, HUGE_VAL};
      put(&m, i, j, k == 0 ? 1 : -1);
    }
    m.rows[i].sense = ROW_EQUAL;
    m.rows[i].bound = floor(sum / 2);
  }
  solver_result r;
  solver_run(scratch, &faults, &m, 0.02, &r);
  ck_assert_int_eq(r.status, SOLVER_LIMIT);
  if (r.found) ck_assert_double_ge(r.objective, r.bound);
}
END_TEST

/* ---- faults ---- */

static void spoil_cost(solver_model *m) {
  m->columns[0].cost = NAN;
}
static void spoil_bound(solver_model *m) {
  m->rows[0].bound = INFINITY;
}
static void spoil_entry(solver_model *m) {
  m->entries[0].value = NAN;
}
static void spoil_place(solver_model *m) {
  m->entries[0].column = m->column_count;
}
static void spoil_row_name(solver_model *m) {
  m->rows[0].name = "limit[1]";
}
static void spoil_column_name(solver_model *m) {
  m->columns[0].name = "e1";
}
static void spoil_limits(solver_model *m) {
  m->columns[0].lower = 2;
}
/* GLPK itself finds this one, and would abort the process */
static void spoil_twice(solver_model *m) {
  put(m, 0, 0, 1);
}

static const struct {
  const char *name;
  void (*spoil)(solver_model *);
} spoilt[] = {
    {"cost is no number", spoil_cost},          {"bound of a row is infinite", spoil_bound},
    {"entry is no number", spoil_entry},        {"entry outside of the matrix", spoil_place},
    {"row name with brackets", spoil_row_name}, {"column name like a number", spoil_column_name},
    {"bounds that cross", spoil_limits},        {"the same place twice", spoil_twice},
};

START_TEST(faults_are_told_and_survived) {
  solver_model m = knapsack(3), good = knapsack(4);
  m.entries =
      arena_grow(scratch, m.entries, ITEMS * sizeof *m.entries, (ITEMS + 1) * sizeof *m.entries);
  spoilt[_i].spoil(&m);
  solver_result r;
  solver_run(scratch, &faults, &m, 0, &r);
  ck_assert_msg(r.status == SOLVER_FAILED, "%s", spoilt[_i].name);
  ck_assert_uint_eq(faults.errors, 1);
  ck_assert_int_eq(faults.items[0].code, ERROR_INTERNAL_SOLVER);
  solver_run(scratch, &faults, &good, 0, &r);
  ck_assert_msg(r.status == SOLVER_OPTIMAL, "after: %s", spoilt[_i].name);
}
END_TEST

/* ---- files ---- */

static char folder[] = "/tmp/septum-solver-XXXXXX";

static void make_folder(void) {
  open_scratch();
  memcpy(folder + strlen(folder) - 6, "XXXXXX", 6);
  ck_assert_ptr_nonnull(mkdtemp(folder));
}

static int files_in_folder(void) {
  int n = 0;
  DIR *d = opendir(folder);
  ck_assert_ptr_nonnull(d);
  for (struct dirent *e; (e = readdir(d)) != NULL;) n += e->d_name[0] != '.';
  closedir(d);
  return n;
}

static void drop_folder(void) {
  (void)unlink(file_join(scratch, folder, "m.lp"));
  (void)rmdir(folder);
  close_scratch();
}

START_TEST(the_file_holds_the_whole_model) {
  solver_model m = knapsack(11);
  const char *path = file_join(scratch, folder, "m.lp");
  ck_assert(solver_save(scratch, &faults, &m, path));
  size_t len;
  char *lines = file_read(scratch, &faults, path, LONGEST_FILE, &len);
  ck_assert_ptr_nonnull(lines);
  ck_assert_ptr_nonnull(strstr(lines, "Minimize"));
  ck_assert_ptr_nonnull(strstr(lines, "500000 const_one"));
  ck_assert_ptr_nonnull(strstr(lines, " x14"));
  ck_assert_str_eq(lines + len - 4, "End\n");
  ck_assert_int_eq(files_in_folder(), 1);
}
END_TEST

START_TEST(no_file_where_none_can_be) {
  solver_model m = knapsack(11);
  const char *path = file_join(scratch, folder, "no-such-folder/m.lp");
  ck_assert(!solver_save(scratch, &faults, &m, path));
  ck_assert_int_eq(faults.items[0].code, ERROR_SYSTEM_WRITE);
  ck_assert_int_eq(files_in_folder(), 0);
}
END_TEST

/* Every allocation fails once: nothing is left behind, nothing leaks (the sanitizers look). */
START_TEST(memory_may_run_out_anywhere) {
  solver_model m = knapsack(5);
  const char *path = file_join(scratch, folder, "m.lp");
  volatile int failures = 0, done = 0;
  for (volatile long n = 1; !done; n++) {
    jmp_buf here;
    arena *inner = arena_create(0, &here);
    ck_assert_ptr_nonnull(inner);
    if (setjmp(here) == 0) {
      diag_list d;
      solver_result r;
      diag_init(&d, inner);
      arena_fail_at(n);
      solver_run(inner, &d, &m, 0, &r);
      done = solver_save(inner, &d, &m, path);
    } else {
      failures++;
    }
    arena_fail_at(0);
    arena_free(inner);
    ck_assert_int_le(files_in_folder(), 1);
  }
  ck_assert_int_ge(failures, 3);
}
END_TEST

int main(void) {
  Suite *s = suite_create("select_solver");
  TCase *t = tcase_create("answers");
  tcase_add_checked_fixture(t, open_scratch, close_scratch);
  tcase_add_loop_test(t, least_cost_is_that_of_brute_force, 0, KNAPSACKS);
  tcase_add_test(t, infeasible_is_an_answer);
  tcase_add_test(t, integer_infeasible_is_an_answer);
  tcase_add_test(t, a_fixed_column_stays_at_zero);
  tcase_add_test(t, time_runs_out);
  tcase_add_loop_test(t, faults_are_told_and_survived, 0, (int)(sizeof spoilt / sizeof spoilt[0]));
  suite_add_tcase(s, t);
  TCase *f = tcase_create("files");
  tcase_add_checked_fixture(f, make_folder, drop_folder);
  tcase_add_test(f, the_file_holds_the_whole_model);
  tcase_add_test(f, no_file_where_none_can_be);
  tcase_add_test(f, memory_may_run_out_anywhere);
  suite_add_tcase(s, f);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
