/* What answers say about a wall, before it is written down. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "report/view.h"
#include "wall/line.h"

static arena *memory;
static jmp_buf no_memory;
static const catalog *shipped;
static brief asked;
static price_book book;
static report usual;

static void set_up(void) {
  memory = arena_create(0, &no_memory);
  ck_assert_ptr_nonnull(memory);
  diag_list faults;
  diag_init(&faults, memory);
  shipped = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(shipped);
  job_defaults(&asked);
  book = (price_book){.currency = "USD"};
  usual = (report){.arena = memory,
                   .catalog = shipped,
                   .prices = &book,
                   .brief = &asked,
                   .asked = true,
                   .units = UNITS_US};
}

static void tear_down(void) {
  arena_free(memory);
}

static wall wall_of(const char *line) {
  diag_list faults;
  diag_init(&faults, memory);
  wall w = wall_empty();
  ck_assert_msg(line_parse(memory, &faults, shipped, line, &w), "%s", line);
  return w;
}

/* From room A to room B; side B is written from its own room, so it is met in reverse. */
static const struct parts_row {
  const char *line;
  const char *where[12];
} parts_rows[] = {
    {"2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16",
     {"side A", "mount A", "frame", "fill", "side B"}},
    {"gyp-13 + mlv-5 | wood-89-double@406~25, glass-89, glass-89 | typex-16 + osb-11",
     {"side A", "side A", "row A", "fill", "gap", "row B", "fill", "side B", "side B"}},
    {"typex-16 | rc@610 | on osb-11 | wood-89@406 | typex-16",
     {"side A", "mount A", "on studs A", "frame", "fill", "side B"}},
};

START_TEST(parts_in_order) {
  const struct parts_row *row = &parts_rows[_i];
  wall w = wall_of(row->line);
  view_parts parts;
  view_parts_of(&usual, &w, &parts);
  double sum = 0.0;
  for (int i = 0; i < parts.count; i++) {
    ck_assert_msg(row->where[i] != NULL && strcmp(parts.part[i].where, row->where[i]) == 0,
                  "%s: part %d is %s", row->line, i, parts.part[i].where);
    sum += parts.part[i].thickness_m;
  }
  ck_assert_ptr_null(row->where[parts.count]);
  const double last_digit_m = 1e-9;
  ck_assert_double_eq_tol(sum, wall_thickness_m(shipped, &w), last_digit_m);
}
END_TEST

START_TEST(the_inner_layer_of_side_b_comes_first) {
  wall w = wall_of("typex-16 | wood-89@406 | typex-16 + osb-11");
  view_parts parts;
  view_parts_of(&usual, &w, &parts);
  ck_assert_ptr_nonnull(strstr(parts.part[parts.count - 2].what, "OSB"));
  ck_assert_ptr_nonnull(strstr(parts.part[parts.count - 1].what, "Type X"));
}
END_TEST

/* Phi((exact - T)/sd) >= confidence and the printed rating >= T; 51.2 with sd 1.4 is 80 % sure of
 * 50 (0.804), not of 51. */
static const struct assured_row {
  double exact, sd, confidence;
  int printed, assured;
} assured_rows[] = {
    {51.2, 1.4, 0.8, 51, 50},
    {51.2, 1.4, 0.5, 51, 51},
    {51.2, 1.4, 0.95, 51, 48},
    {50.9, 0.5, 0.5, 50, 50},
};

START_TEST(sure_of) {
  const struct assured_row *row = &assured_rows[_i];
  assessment x = {.ratings = {.stc = row->printed}};
  x.exact[METRIC_STC] = row->exact;
  x.sd[METRIC_STC] = row->sd;
  ck_assert_int_eq(view_assured(&usual, &x, METRIC_STC, row->confidence), row->assured);
}
END_TEST

START_TEST(money) {
  ck_assert_str_eq(view_money(&usual, 2430.1, NULL), "2,430.10 USD");
  ck_assert_str_eq(view_money(&usual, 9.305, "ft2"), "9.31 USD per ft2");
  ck_assert_str_eq(view_money(&usual, -0.5, NULL), "-0.50 USD");
}
END_TEST

/* 300,000 cents over 30 m2 of a wall 10 m long: 100 per m2, 9.290304 per ft2, 300 per m, 91.44 per
 * ft (exact units). */
START_TEST(cost_as_quoted) {
  asked.length_m = 10.0;
  asked.height_m = 3.0;
  assessment x = {.mass_kg_m2 = 20.0};
  x.cost = (cost_total){
      .total_cents = 300000, .floor_value_cents = 3000, .area_m2 = 30.0, .hours = 27.0};
  view_cost v = view_cost_of(&usual, &x);
  const double last_digit = 1e-9;
  ck_assert(v.costed);
  ck_assert_double_eq_tol(v.per_m2, 100.0, last_digit);
  ck_assert_double_eq_tol(v.per_ft2, 9.290304, last_digit);
  ck_assert_double_eq_tol(v.per_m, 300.0, last_digit);
  ck_assert_double_eq_tol(v.per_ft, 91.44, last_digit);
  ck_assert_double_eq_tol(v.hours_per_m2, 0.9, last_digit);
  ck_assert_double_eq_tol(v.floor_per_m2, 1.0, last_digit);
  ck_assert_double_eq_tol(v.load_kg_m, 60.0, last_digit);
  x.takeoff.missing = 1;
  ck_assert(!view_cost_of(&usual, &x).costed);
}
END_TEST

/* A square foot is 0.09290304 m2, a foot 0.3048 m: exact. */
START_TEST(quantities_in_feet) {
  cost_line l = {.quantity = 9.290304, .rate = 10.0, .unit = "m2"};
  const double last_digit = 1e-9;
  view_quantity q = view_quantity_of(&usual, &l);
  ck_assert_str_eq(q.unit, "ft2");
  ck_assert_double_eq_tol(q.quantity, 100.0, last_digit);
  ck_assert_double_eq_tol(q.rate, 0.9290304, last_digit);
  l.unit = "h";
  ck_assert_str_eq(view_quantity_of(&usual, &l).unit, "h");
  usual.units = UNITS_SI;
  l.unit = "m";
  ck_assert_str_eq(view_quantity_of(&usual, &l).unit, "m");
}
END_TEST

static const struct caution_row {
  const char *name;
  int stc;
  bool published;
  const char *has, *lacks;
} caution_rows[] = {
    {"every answer defers to code and practice", 40, true, "local code", "Workmanship"},
    {"a prediction says so", 40, false, "prediction, not a test", "STC 60"},
    {"care at boxes and seals from 50", 50, false, "sealed", "STC 60"},
    {"flanking from 60", 60, false, "STC 60", NULL},
};

START_TEST(standing_cautions) {
  const struct caution_row *row = &caution_rows[_i];
  wall_row match = {.id = "x"};
  assessment x = {.ratings = {.stc = row->stc}};
  if (row->published) x.evidence.match = &match;
  const char *caution[VIEW_MAX_CAUTIONS];
  int count = view_cautions(&usual, &x, caution), has = 0, lacks = 0;
  for (int i = 0; i < count; i++) {
    if (strstr(caution[i], row->has) != NULL) has++;
    if (row->lacks != NULL && strstr(caution[i], row->lacks) != NULL) lacks++;
  }
  ck_assert_msg(has == 1 && lacks == 0, "%s", row->name);
}
END_TEST

int main(void) {
  Suite *suite = suite_create("report view");
  TCase *cases = tcase_create("view");
  tcase_add_checked_fixture(cases, set_up, tear_down);
  tcase_add_loop_test(cases, parts_in_order, 0, (int)(sizeof parts_rows / sizeof parts_rows[0]));
  tcase_add_test(cases, the_inner_layer_of_side_b_comes_first);
  tcase_add_loop_test(cases, sure_of, 0, (int)(sizeof assured_rows / sizeof assured_rows[0]));
  tcase_add_test(cases, money);
  tcase_add_test(cases, cost_as_quoted);
  tcase_add_test(cases, quantities_in_feet);
  tcase_add_loop_test(cases, standing_cautions, 0,
                      (int)(sizeof caution_rows / sizeof caution_rows[0]));
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
