/* Escaping: JSON by RFC 8259, CSV by RFC 4180. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "report/markup.h"

static arena *memory;
static jmp_buf no_memory;

static void set_up(void) {
  memory = arena_create(0, &no_memory);
  ck_assert_ptr_nonnull(memory);
}

static void tear_down(void) {
  arena_free(memory);
}

static text fresh(void) {
  text t;
  text_init(&t, memory, 10000);
  return t;
}

static const struct string_row {
  const char *name, *value, *expected;
} string_rows[] = {
    {"plain", "5/8 in", "\"5/8 in\"\n"},
    {"null", NULL, "null\n"},
    {"quote and backslash", "a\"b\\c", "\"a\\\"b\\\\c\"\n"},
    {"control characters (RFC 8259, 7)", "a\n\t\x01z", "\"a\\n\\t\\u0001z\"\n"},
    {"escape and delete", "\x1b[2J\x7f", "\"\\u001b[2J\\u007f\"\n"},
    {"two and three bytes", "\xC2\xB2 \xE2\x89\xA5", "\"\xC2\xB2 \xE2\x89\xA5\"\n"},
    {"four bytes", "\xF0\x9F\x9B\xA0", "\"\xF0\x9F\x9B\xA0\"\n"},
    {"lone continuation", "a\x80z", "\"a\xEF\xBF\xBDz\"\n"},
    {"cut at the end", "a\xE2\x89", "\"a\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
    {"overlong slash", "\xC0\xAF", "\"\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
    {"surrogate", "\xED\xA0\x80", "\"\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
    {"beyond U+10FFFF", "\xF4\x90\x80\x80",
     "\"\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
};

START_TEST(json_strings) {
  const struct string_row *row = &string_rows[_i];
  text out = fresh();
  markup_json j;
  markup_json_init(&j, &out);
  markup_json_string(&j, NULL, row->value);
  text_char(&out, '\n');
  ck_assert_msg(strcmp(out.data, row->expected) == 0, "%s: %s", row->name, out.data);
}
END_TEST

START_TEST(json_nesting) {
  text out = fresh();
  markup_json j;
  markup_json_init(&j, &out);
  markup_json_object(&j, NULL, false);
  markup_json_integer(&j, "n", -3);
  markup_json_array(&j, "list", true);
  markup_json_number(&j, NULL, 0.125, 2);
  markup_json_number(&j, NULL, HUGE_VAL, 2);
  markup_json_bool(&j, NULL, true);
  markup_json_object(&j, NULL, false);
  markup_json_null(&j, "x");
  markup_json_close(&j);
  markup_json_close(&j);
  markup_json_object(&j, "empty", false);
  markup_json_close(&j);
  markup_json_cents(&j, "money", 1999);
  markup_json_close(&j);
  ck_assert_str_eq(out.data, "{\n  \"n\": -3,\n  \"list\": [0.13, null, true, {\"x\": null}],\n"
                             "  \"empty\": {},\n  \"money\": 19.99\n}\n");
}
END_TEST

static const struct csv_row {
  const char *name, *value, *expected;
} csv_rows[] = {
    {"plain", "typex-16", "typex-16"},
    {"empty", "", ""},
    {"comma", "board, screwed", "\"board, screwed\""},
    {"quote doubled (RFC 4180, 2.7)", "3\" pipe", "\"3\"\" pipe\""},
    {"line break", "a\nb", "\"a\nb\""},
    {"negative number stays a number", "-12.5", "-12.5"},
    {"formula is text", "=1+1", "\"'=1+1\""},
    {"minus formula is text", "-1+cmd", "\"'-1+cmd\""},
    {"at sign", "@sum", "\"'@sum\""},
};

START_TEST(csv_fields) {
  const struct csv_row *row = &csv_rows[_i];
  text out = fresh();
  markup_csv_field(&out, row->value, true);
  ck_assert_msg(strcmp(out.data, row->expected) == 0, "%s: %s", row->name, out.data);
}
END_TEST

START_TEST(csv_line) {
  text out = fresh();
  markup_csv_field(&out, "a", true);
  markup_csv_field(&out, "b", false);
  markup_csv_end(&out);
  ck_assert_str_eq(out.data, "a,b\r\n");
}
END_TEST

int main(void) {
  Suite *suite = suite_create("report markup");
  TCase *cases = tcase_create("escaping");
  tcase_add_checked_fixture(cases, set_up, tear_down);
  tcase_add_loop_test(cases, json_strings, 0, (int)(sizeof string_rows / sizeof string_rows[0]));
  tcase_add_test(cases, json_nesting);
  tcase_add_loop_test(cases, csv_fields, 0, (int)(sizeof csv_rows / sizeof csv_rows[0]));
  tcase_add_test(cases, csv_line);
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
