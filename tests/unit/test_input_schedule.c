/* The wall schedule: every column, what a cell may say, faults with their places, classes. */
#include "input/schedule.h"

#include <check.h>
#include <math.h>
#include <string.h>

#define LENGTH_ROUNDING 1e-12 /* m: a rounding or two of a unit conversion */

static jmp_buf out_of_memory;
static arena *memory;
static diag_list faults;
static const catalog *shipped;
static project p;
static schedule *s;
static brief b;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
  shipped = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(shipped);
}
static void teardown(void) {
  arena_free(memory);
}

/* A project with the given members beside those that all of them have. */
static bool have_project(const char *members) {
  const char *file = text_format(memory,
                                 "{\"septum\": \"project/1\", \"walls\": \"walls.csv\"%s%s}",
                                 members[0] ? ", " : "", members);
  const json_value *v = json_parse(memory, &faults, "p.json", file, strlen(file));
  ck_assert_msg(v != NULL, "%s", file);
  return project_read(memory, &faults, shipped, v, &p);
}

static bool read_walls(const char *members, const char *csv) {
  ck_assert_msg(have_project(members), "%s", faults.count ? faults.items[0].message : "");
  const csv_table *t = csv_parse(memory, &faults, "walls.csv", csv, strlen(csv));
  ck_assert_msg(t != NULL, "%s", csv);
  s = schedule_read(memory, &faults, shipped, &p, t);
  return s != NULL;
}

static const char *messages(void) {
  text t;
  text_init(&t, memory, 1 << 20);
  for (size_t i = 0; i < faults.count; i++) {
    diag_print(&t, &faults.items[i]);
    text_char(&t, '\n');
  }
  return t.data;
}

#define STANDARD "\"code\": \"ibc\", \"building\": {\"storeys\": 5, \"sprinklered\": true}, \"wall\": {\"height_ft\": 9}"

/* ---- cells ---- */

typedef double (*look)(const brief *);
static double length(const brief *x) { return x->length_m; }
static double height(const brief *x) { return x->height_m; }

static const struct cell_row {
  const char *name, *header, *cell;
  look look;
  double expected, tolerance;
} cells[] = {
    {"feet and inches", "length", "24ft-6in", length, 24.5 * 0.3048, LENGTH_ROUNDING},
    {"marks of feet and inches", "length", "\"12' 6\"\"\"", length, 12.5 * 0.3048, LENGTH_ROUNDING},
    {"metres", "Length", "7.3 m", length, 7.3, LENGTH_ROUNDING},
    {"header in feet", "length_ft", "10", length, 3.048, LENGTH_ROUNDING},
    {"header in brackets", "Length (ft)", "10", length, 3.048, LENGTH_ROUNDING},
    {"a unit in the cell beats that of the header", "length_ft", "2 m", length, 2, LENGTH_ROUNDING},
    {"inches", "LENGTH-IN", "120", length, 3.048, LENGTH_ROUNDING},
    {"millimetres", "length mm", "2500", length, 2.5, LENGTH_ROUNDING},
    {"the project's height", "length_m", "2", height, 9 * 0.3048, LENGTH_ROUNDING},
};

START_TEST(a_cell_is_read) {
  const struct cell_row *row = &cells[_i];
  const char *csv = text_format(memory, "id,target,%s\nW1,STC 50,%s\n", row->header, row->cell);
  ck_assert_msg(read_walls(STANDARD, csv), "%s: %s", row->name, messages());
  schedule_brief(s, 0, &b);
  double found = row->look(&b);
  ck_assert_msg(fabs(found - row->expected) <= row->tolerance, "%s: %g", row->name, found);
}
END_TEST

int main(void) {
  Suite *suite = suite_create("schedule");
  TCase *t = tcase_create("cells");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, a_cell_is_read, 0, sizeof cells / sizeof cells[0]);
  suite_add_tcase(suite, t);
  SRunner *r = srunner_create(suite);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? 1 : 0;
}
