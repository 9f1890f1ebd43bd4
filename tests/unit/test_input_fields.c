/* Objects read by table. */
#include "input/fields.h"

#include <check.h>
#include <stddef.h>
#include <stdlib.h>
#include <string.h>

#define LENGTH_M 1e-12 /* one rounding of a unit conversion */

static jmp_buf out_of_memory;
static arena *memory;
static diag_list faults;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
}
static void teardown(void) {
  arena_free(memory);
}

static const char *const colours[] = {"red", "green", NULL};

typedef struct thing {
  double number, scaled, length, any, area;
  int whole, colour;
  bool flag;
  const char *name;
  const json_value *list;
} thing;

#define AT(member) offsetof(thing, member)
static const field table[] = {
    {"number", FIELD_NUMBER, FIELD_REQUIRED | FIELD_ABOVE_MIN, 0, 10, 0, NULL, AT(number)},
    {"scaled_gpa", FIELD_NUMBER, 0, 1e9, 5e9, 1e9, NULL, AT(scaled)},
    {"size_mm", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 2, 0, NULL, AT(length)},
    {"any", FIELD_NUMBER, FIELD_NULL_OK, 0, 0, 0, NULL, AT(any)},
    {"area_m2", FIELD_NUMBER, 0, 1, 0, 0, NULL, AT(area)},
    {"area_ft2", FIELD_NUMBER, 0, 1, 0, 0.09290304, NULL, AT(area)},
    {"whole", FIELD_INTEGER, 0, -5, 5, 0, NULL, AT(whole)},
    {"colour", FIELD_CHOICE, 0, 0, 0, 0, colours, AT(colour)},
    {"flag", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(flag)},
    {"name", FIELD_STRING, 0, 0, 0, 0, NULL, AT(name)},
    {"list", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(list)},
    {"note", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
};

static bool read(const char *s, thing *out) {
  const json_value *v = json_parse(memory, &faults, "f", s, strlen(s));
  ck_assert_msg(v != NULL, "%s", s);
  return fields_read(memory, &faults, v, table, sizeof table / sizeof table[0], out);
}

START_TEST(every_kind_is_stored) {
  thing t = {.any = 7};
  ck_assert(read("{\"septum\": \"thing/1\", \"number\": 2.5, \"scaled_gpa\": 2, \"size_mm\": 610, "
                 "\"any\": null, \"area_ft2\": 100, "
                 "\"whole\": -5, \"colour\": \"green\", \"flag\": true, \"name\": \"n\", \"list\": "
                 "[1], \"note\": {}}",
                 &t));
  ck_assert_double_eq(t.number, 2.5);
  ck_assert_double_eq(t.scaled, 2e9);
  ck_assert_double_eq_tol(t.length, 0.61, LENGTH_M);
  ck_assert_double_eq(t.any, 7);
  ck_assert_double_eq_tol(t.area, 9.290304, LENGTH_M);
  ck_assert_int_eq(t.whole, -5);
  ck_assert_int_eq(t.colour, 1);
  ck_assert(t.flag);
  ck_assert_str_eq(t.name, "n");
  ck_assert_uint_eq(t.list->count, 1);
  ck_assert_uint_eq(faults.count, 0);
}
END_TEST

START_TEST(what_is_absent_keeps_its_default) {
  thing t = {.colour = 1, .whole = 3, .flag = true, .name = "default", .length = 0.1};
  ck_assert(read("{\"number\": 1}", &t));
  ck_assert(t.colour == 1 && t.whole == 3 && t.flag);
  ck_assert_str_eq(t.name, "default");
  ck_assert_double_eq(t.length, 0.1);
}
END_TEST

static const struct length_row {
  const char *member;
  double metres;
} length_rows[] = {
    {"\"size_mm\": 610", 0.61},
    {"\"size_in\": 24", 0.6096},
    {"\"size_ft\": 2", 0.6096},
    {"\"size_m\": 0.61", 0.61},
    {"\"size_mm\": \"24in\"", 0.6096},
    {"\"size_in\": \"3-5/8\"", 0.092075},
    {"\"size_ft\": \"5'-6\\\"\"", 1.6764},
    {"\"size_m\": \"61 cm\"", 0.61},
};

START_TEST(lengths_in_any_unit) {
  thing t = {0};
  ck_assert(read(text_format(memory, "{\"number\": 1, %s}", length_rows[_i].member), &t));
  ck_assert_double_eq_tol(t.length, length_rows[_i].metres, LENGTH_M);
}
END_TEST

/* One fault each: code, and what the message must say. */
static const struct fault_row {
  const char *text;
  error_code code;
  const char *message;
} fault_rows[] = {
    {"[]", ERROR_FIELD_TYPE, "expected an object, found an array"},
    {"{}", ERROR_FIELD_MISSING, "the key \"number\" is missing"},
    {"{\"number\": 0}", ERROR_FIELD_RANGE, "must be above 0 and at most 10, found 0"},
    {"{\"number\": 10.5}", ERROR_FIELD_RANGE, "must be above 0 and at most 10, found 10.5"},
    {"{\"number\": 1e300}", ERROR_FIELD_RANGE,
     "must be above 0 and at most 10, found a number above 1e15"},
    {"{\"number\": null}", ERROR_FIELD_TYPE, "expected a number, found null"},
    {"{\"number\": 1, \"scaled_gpa\": 6}", ERROR_FIELD_RANGE, "must be from 1 to 5, found 6"},
    {"{\"number\": 1, \"area_m2\": 0.5}", ERROR_FIELD_RANGE, "must be at least 1, found 0.5"},
    {"{\"number\": 1, \"area_m2\": 2, \"area_ft2\": 20}", ERROR_FIELD_CONFLICT,
     "says the same as \"area_m2\" in line 1; keep one of them"},
    {"{\"number\": 1, \"size_in\": 2, \"size_ft\": 3}", ERROR_FIELD_CONFLICT,
     "says the same as \"size_in\" in line 1; keep one of them"},
    {"{\"number\": 1, \"size_mm\": 2500}", ERROR_FIELD_RANGE,
     "must be above 0 and at most 2000, found 2500"},
    {"{\"number\": 1, \"size_in\": \"9ft\"}", ERROR_FIELD_RANGE,
     "must be above 0 and at most 78.740157, found 108"},
    {"{\"number\": 1, \"whole\": 1.5}", ERROR_FIELD_RANGE, "must be a whole number, found 1.5"},
    {"{\"number\": 1, \"whole\": 1e10}", ERROR_FIELD_RANGE,
     "must be a whole number, found 10000000000"},
    {"{\"number\": 1, \"whole\": 6}", ERROR_FIELD_RANGE, "must be from -5 to 5, found 6"},
    {"{\"number\": 1, \"colour\": \"blue\"}", ERROR_FIELD_CHOICE,
     "expected one of \"red\", \"green\"; found \"blue\""},
    {"{\"number\": 1, \"colour\": 1}", ERROR_FIELD_TYPE,
     "expected one of \"red\", \"green\", found a number"},
    {"{\"number\": 1, \"flag\": 1}", ERROR_FIELD_TYPE, "expected true or false, found a number"},
    {"{\"number\": 1, \"name\": []}", ERROR_FIELD_TYPE, "expected a string, found an array"},
    {"{\"number\": 1, \"nmae\": \"x\"}", ERROR_FIELD_UNKNOWN,
     "unknown key \"nmae\"; did you mean \"name\"?"},
    {"{\"number\": 1, \"siez_ft\": 1}", ERROR_FIELD_UNKNOWN,
     "unknown key \"siez_ft\"; did you mean \"size_ft\"?"},
    {"{\"number\": 1, \"size_km\": 1}", ERROR_FIELD_UNKNOWN,
     "unknown key \"size_km\"; did you mean \"size_m\"?"},
};

START_TEST(faults_are_reported) {
  thing t = {0};
  const struct fault_row *row = &fault_rows[_i];
  ck_assert(!read(row->text, &t));
  ck_assert_uint_eq(faults.errors, 1);
  ck_assert_int_eq(faults.items[0].code, row->code);
  ck_assert_str_eq(faults.items[0].message, row->message);
}
END_TEST

/* The mark of a file's kind is no key of the objects inside. */
START_TEST(the_mark_stands_at_the_top_only) {
  thing t = {0};
  const char *s = "{\"inside\": {\"septum\": \"thing/1\", \"number\": 1}}";
  const json_value *v = json_parse(memory, &faults, "f", s, strlen(s));
  ck_assert(!fields_read(memory, &faults, v->first, table, sizeof table / sizeof table[0], &t));
  ck_assert_int_eq(faults.items[0].code, ERROR_FIELD_UNKNOWN);
}
END_TEST

START_TEST(all_faults_show_at_once_and_sound_fields_are_read) {
  thing t = {0};
  ck_assert(!read(
      "{\"nmae\": 1, \"whole\": \"x\", \"colour\": \"red\", \"flag\": 2, \"name\": \"sound\"}",
      &t));
  ck_assert_uint_eq(faults.errors, 4);
  ck_assert_str_eq(t.name, "sound");
}
END_TEST

START_TEST(a_full_list_of_messages_hides_nothing) {
  thing t = {0};
  for (int i = 0; i < 300; i++)
    diag_add(&faults, DIAG_WARNING, ERROR_FIELD_RANGE, (diag_place){0}, "w");
  ck_assert(read("{\"number\": 1, \"name\": \"read\"}", &t));
  ck_assert_str_eq(t.name, "read");
  ck_assert(!read("{\"number\": 1, \"x\": 1, \"y\": 1}", &t));
}
END_TEST

#define ROWS(rows) (int)(sizeof(rows) / sizeof((rows)[0]))

int main(void) {
  Suite *s = suite_create("fields");
  TCase *t = tcase_create("fields");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, every_kind_is_stored);
  tcase_add_test(t, what_is_absent_keeps_its_default);
  tcase_add_loop_test(t, lengths_in_any_unit, 0, ROWS(length_rows));
  tcase_add_loop_test(t, faults_are_reported, 0, ROWS(fault_rows));
  tcase_add_test(t, the_mark_stands_at_the_top_only);
  tcase_add_test(t, all_faults_show_at_once_and_sound_fields_are_read);
  tcase_add_test(t, a_full_list_of_messages_hides_nothing);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
