/* The project: every member, defaults, marks of the drawings, stock against the price book.
 * Refusals are cases in tests/bad. */
#include "input/project.h"

#include <check.h>
#include <math.h>
#include <string.h>

#define COUNT(table) (sizeof(table) / sizeof((table)[0]))
#define SI_SHARE     1e-12 /* relative: one rounding or two of a unit conversion */

static jmp_buf out_of_memory;
static arena *memory;
static diag_list faults;
static project p;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
}
static void teardown(void) {
  arena_free(memory);
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

static bool read_project(const catalog *c, const char *members) {
  const char *file =
      text_format(memory, "{\"septum\": \"project/1\", \"walls\": \"walls.csv\"%s%s}",
                  members[0] ? ", " : "", members);
  const json_value *v = json_parse(memory, &faults, "jobs/p.json", file, strlen(file));
  ck_assert_msg(v != NULL, "%s", file);
  return project_read(memory, &faults, c, v, &p);
}

static void near(double found, double expected) {
  ck_assert_msg(fabs(found - expected) <= SI_SHARE * fabs(expected), "%.17g for %.17g", found,
                expected);
}

START_TEST(defaults) {
  ck_assert(read_project(NULL, ""));
  ck_assert_str_eq(p.file, "jobs/p.json");
  ck_assert_str_eq(p.walls, "jobs/walls.csv");
  ck_assert_str_eq(p.title, "");
  ck_assert_int_eq(p.units, UNITS_US);
  ck_assert_int_eq(p.max_types, 0);
  ck_assert_double_eq(p.type_setup_cost, 0);
  ck_assert_double_eq(p.min_run_m, 0);
  ck_assert_double_eq(p.budget, 0);
  ck_assert_double_eq(p.floor_area_max_m2, 0);
  ck_assert_int_eq(p.same_framing, FRAMING_FREE);
  ck_assert_int_eq(p.aim, AIM_COST);
  ck_assert(p.quantity_breaks);
  ck_assert_double_eq(p.confidence, 0.8);
  ck_assert_int_eq(p.metric, METRIC_STC);
  ck_assert_int_eq(p.basis, BASIS_LAB);
  ck_assert_int_eq(p.evidence, EVIDENCE_ANY);
  ck_assert_double_eq(p.margin, 0);
  ck_assert(p.stock_count == 0 && p.mark_count == 0);
  /* a brief's, but that no height is said */
  ck_assert_int_eq(p.common.code, CODE_NONE);
  ck_assert_double_eq(p.common.height_m, 0);
  ck_assert_int_eq(p.common.target_count, 0);
  ck_assert_double_eq(p.common.lateral_pa, 240);
  ck_assert_int_eq(p.common.side[1].finish_level, 4);
}
END_TEST

START_TEST(every_member) {
  ck_assert_msg(
      read_project(
          NULL, "\"title\": \"t\", \"note\": 1, \"units\": \"si\", \"max_types\": 7, "
                "\"type_setup_cost\": 1200.5, \"min_run_ft\": 60, \"floor_area_max_ft2\": 1000, "
                "\"budget\": 1e6, \"same_framing\": \"storey\", \"objective\": \"margin\", "
                "\"quantity_breaks\": false, \"confidence\": 0.9, \"metric\": \"Rw\", \"basis\": "
                "\"field\", \"evidence\": \"published\", \"margin\": 2"),
      "%s", messages());
  ck_assert_str_eq(p.title, "t");
  ck_assert_int_eq(p.units, UNITS_SI);
  ck_assert_int_eq(p.max_types, 7);
  ck_assert_double_eq(p.type_setup_cost, 1200.5);
  near(p.min_run_m, 60 * 0.3048);
  near(p.floor_area_max_m2, 1000 * 0.09290304);
  ck_assert_double_eq(p.budget, 1e6);
  ck_assert_int_eq(p.same_framing, FRAMING_BY_STOREY);
  ck_assert_int_eq(p.aim, AIM_MARGIN);
  ck_assert(!p.quantity_breaks);
  ck_assert_double_eq(p.confidence, 0.9);
  ck_assert_int_eq(p.metric, METRIC_RW);
  ck_assert_int_eq(p.basis, BASIS_FIELD);
  ck_assert_int_eq(p.evidence, EVIDENCE_PUBLISHED);
  ck_assert_double_eq(p.margin, 2);
}
END_TEST

START_TEST(shared_members) {
  ck_assert_msg(
      read_project(
          NULL,
          "\"code\": \"ibc\", \"building\": {\"storeys\": 5, \"sprinklered\": true}, \"wall\": "
          "{\"height_ft\": 9, \"ceiling_a_ft\": 8, \"head\": \"slip\"}, \"target\": {\"value\": "
          "50}, "
          "\"limits\": {\"thickness_in\": {\"max\": 6}}, \"fire_min\": 60, \"structure\": "
          "{\"loadbearing\": true}, \"sides\": {\"b\": {\"fastening\": \"heavy\", "
          "\"fastening_length_m\": 40}}, \"services\": {\"run_mm\": 20}, \"field_allowance\": "
          "{\"mean\": 4}, \"floor_area_value_per_ft2\": 10, \"build\": \"any\", \"only\": "
          "\"wood-*\", \"without\": [\"rc\"], \"prices\": \"../p.json\", \"listings\": "
          "[\"l.json\"], "
          "\"reports\": \"/r.json\""),
      "%s", messages());
  const brief *b = &p.common;
  ck_assert(b->code == CODE_IBC && b->storeys == 5 && b->storeys_given && b->sprinklered);
  near(b->height_m, 9 * 0.3048);
  near(b->ceiling_m[0], 8 * 0.3048);
  ck_assert_int_eq(b->head, HEAD_SLIP);
  ck_assert(b->target_count == 1 && b->thickness_m.has_max && b->fire_min == 60 && b->loadbearing);
  /* no wall's length is known here, so a long stretch is no contradiction */
  ck_assert_double_eq(b->side[1].fastening_length_m, 40);
  near(b->run_m, 0.02);
  ck_assert_double_eq(b->field_mean, 4);
  near(b->floor_area_value_per_m2, 10 / 0.09290304);
  ck_assert(b->build == BUILD_ANY && b->only_count == 1 && b->without_count == 1);
  ck_assert_str_eq(b->prices, "jobs/../p.json");
  ck_assert_str_eq(b->listings[0], "jobs/l.json");
  ck_assert_str_eq(b->reports[0], "/r.json");
}
END_TEST

/* ---- the drawings' types ---- */

static const struct marks_row {
  const char *name, *types;
} marks[] = {
    {"by mark",
     "{\"P1\": {\"line\": \"x | y\"}, \"P-2\": {\"line\": \"z\", \"locked\": true, \"note\": 1}}"},
    {"lines alone", "{\"P1\": \"x | y\", \"P-2\": {\"line\": \"z\", \"locked\": true}}"},
    {"a list",
     "[{\"mark\": \"P1\", \"line\": \"x | y\", \"locked\": false}, {\"locked\": true, \"line\": "
     "\"z\", \"mark\": \"P-2\"}]"},
};

START_TEST(marks_of_the_drawings) {
  const struct marks_row *row = &marks[_i];
  ck_assert_msg(read_project(NULL, text_format(memory, "\"types\": %s", row->types)), "%s: %s",
                row->name, messages());
  ck_assert_int_eq(p.mark_count, 2);
  ck_assert_str_eq(p.mark[0].mark, "P1");
  ck_assert_str_eq(p.mark[0].line, "x | y");
  ck_assert_str_eq(p.mark[0].line_json->string, "x | y");
  ck_assert(!p.mark[0].locked && p.mark[1].locked);
  ck_assert_str_eq(p.mark[1].line, "z");
  ck_assert_int_eq(project_find_mark(&p, "p 1"), 0);
  ck_assert_int_eq(project_find_mark(&p, "P2"), 1);
  ck_assert_int_eq(project_find_mark(&p, "P3"), CATALOG_NONE);
}
END_TEST

START_TEST(too_many) {
  text t;
  text_init(&t, memory, 1 << 20);
  text_put(&t, "\"types\": {");
  for (int i = 0; i <= PROJECT_MAX_MARKS; i++) text_putf(&t, "%s\"P%d\": \"x\"", i ? ", " : "", i);
  text_put(&t, "}, \"stock\": [");
  for (int i = 0; i <= PROJECT_MAX_STOCK; i++)
    text_putf(&t, "%s{\"item\": \"i%d\", \"quantity\": 1, \"unit\": \"m\"}", i ? ", " : "", i);
  text_put(&t, "]");
  ck_assert(!read_project(NULL, t.data));
  ck_assert_ptr_nonnull(strstr(messages(), "must have at most 64 types, found 65"));
  ck_assert_ptr_nonnull(strstr(messages(), "must have at most 64 entries, found 65"));
}
END_TEST

/* ---- stock ---- */

START_TEST(stock_in_takeoff_units) {
  ck_assert_msg(
      read_project(
          NULL,
          "\"stock\": [{\"item\": \"typex-16\", \"quantity\": 1000, \"unit\": \"ft2\"}, {\"item\": "
          "\"channel\", \"quantity\": 100, \"unit\": \"ft\"}, {\"item\": \"box-pad\", "
          "\"quantity\": "
          "5, \"unit\": \"each\", \"note\": \"shelf 2\"}]"),
      "%s", messages());
  ck_assert_int_eq(p.stock_count, 3);
  ck_assert_str_eq(p.stock[0].item, "typex-16");
  near(p.stock[0].quantity, 1000 * 0.09290304);
  ck_assert_int_eq(p.stock[0].unit, UNIT_M2);
  near(p.stock[1].quantity, 100 * 0.3048);
  ck_assert_int_eq(p.stock[1].unit, UNIT_M);
  ck_assert_double_eq(p.stock[2].quantity, 5);
  ck_assert_int_eq(p.stock[2].unit, UNIT_EACH);
}
END_TEST

static const struct stock_row {
  const char *name, *item, *unit, *message; /* NULL = sound */
} stocks[] = {
    {"sound", "typex-16", "ft2", NULL},
    {"sound in the other system", "typex-16", "m2", NULL},
    {"no such item", "typex-61", "ft2", "has no item \"typex-61\"; the nearest is typex-16\n"},
    {"nothing like it", "marmalade", "each", "has no item \"marmalade\"\n"},
    {"another quantity", "typex-16", "ft",
     "error[E216] $.stock[0].unit: the price book counts \"typex-16\" in ft2, not in ft\n"},
};

START_TEST(stock_against_the_price_book) {
  const struct stock_row *row = &stocks[_i];
  const catalog *c = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  const price_book *book = prices_load(memory, &faults, c, TEST_ROOT "/prices/kestrel-yard.json");
  ck_assert_ptr_nonnull(book);
  diag_init(&faults, memory);
  ck_assert(read_project(
      c, text_format(memory, "\"stock\": [{\"item\": \"%s\", \"quantity\": 1, \"unit\": \"%s\"}]",
                     row->item, row->unit)));
  bool sound = project_check_stock(memory, &faults, &p, book);
  ck_assert_msg(sound == (row->message == NULL), "%s: %s", row->name, messages());
  if (!sound)
    ck_assert_msg(strstr(messages(), row->message) != NULL, "%s: %s", row->name, messages());
}
END_TEST

START_TEST(patterns_are_checked_with_a_catalog) {
  const catalog *c = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert(read_project(c, "\"only\": [\"frame:steel-*\", \"glas-*\"]"));
  ck_assert_ptr_nonnull(strstr(messages(), "\"glas-*\" matches nothing in the catalogs"));
}
END_TEST

START_TEST(another_kind_of_file) {
  const char *file = "{\"septum\": \"brief/1\", \"walls\": \"w.csv\"}";
  const json_value *v = json_parse(memory, &faults, "p.json", file, strlen(file));
  ck_assert(!project_read(memory, &faults, NULL, v, &p));
  ck_assert_ptr_nonnull(strstr(messages(), "[E217]"));
}
END_TEST

int main(void) {
  Suite *s = suite_create("project");
  TCase *t = tcase_create("project");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, defaults);
  tcase_add_test(t, every_member);
  tcase_add_test(t, shared_members);
  tcase_add_loop_test(t, marks_of_the_drawings, 0, COUNT(marks));
  tcase_add_test(t, too_many);
  tcase_add_test(t, stock_in_takeoff_units);
  tcase_add_loop_test(t, stock_against_the_price_book, 0, COUNT(stocks));
  tcase_add_test(t, patterns_are_checked_with_a_catalog);
  tcase_add_test(t, another_kind_of_file);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? 1 : 0;
}
