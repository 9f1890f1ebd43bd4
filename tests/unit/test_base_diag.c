/* Diagnostics: one line each, statuses, the list of errors and its page. */
#include "base/diag.h"

#include <check.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/file.h"

static jmp_buf out_of_memory;
static arena *memory;
static diag_list list;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&list, memory);
}
static void teardown(void) {
  arena_free(memory);
}

static const struct print_row {
  diag item;
  const char *line;
} print_rows[] = {
    {{DIAG_ERROR,
      ERROR_FIELD_RANGE,
      {"catalogs/boards.json", 41, 18, "$.boards[3].mass_kg_m2"},
      "must be above 0, found -8.5"},
     "catalogs/boards.json:41:18: error[E214] $.boards[3].mass_kg_m2: must be above 0, found -8.5"},
    {{DIAG_WARNING, ERROR_CATALOG_UNKNOWN_ID, {"a.json", 3, 0, NULL}, "no match"},
     "a.json:3: warning[E222]: no match"},
    {{DIAG_NOTE, ERROR_SYSTEM_READ, {"a.json", 0, 0, NULL}, "gone"}, "a.json: note[E401]: gone"},
    {{DIAG_ERROR, ERROR_WALL_SYNTAX, {NULL, 1, 8, NULL}, "expected |"},
     "1:8: error[E301]: expected |"},
    {{DIAG_ERROR, ERROR_USAGE, {NULL, 0, 0, NULL}, "no such option"},
     "error[E101]: no such option"},
    /* what a file smuggles in stays one harmless line */
    {{DIAG_ERROR,
      ERROR_FIELD_CHOICE,
      {"a.json", 1, 1, NULL},
      "found \"x\ny\x1B[31m\x7F\xC2\x9B\xC3\xA9\xFF\""},
     "a.json:1:1: error[E215]: found \"x\\u000ay\\u001b[31m\\u007f\\u009b\xC3\xA9\\xff\""},
};

START_TEST(lines) {
  text t;
  text_init(&t, memory, 1000);
  diag_print(&t, &print_rows[_i].item);
  ck_assert_str_eq(t.data, print_rows[_i].line);
}
END_TEST

static const struct status_row {
  error_code code;
  status status;
} status_rows[] = {
    {ERROR_NONE, STATUS_OK},           {ERROR_USAGE, STATUS_USAGE},
    {ERROR_JSON_SYNTAX, STATUS_DATA},  {ERROR_BRIEF_CONTRADICTION, STATUS_DATA},
    {ERROR_WALL_ILLEGAL, STATUS_DATA}, {ERROR_SYSTEM_READ, STATUS_SYSTEM},
    {ERROR_INTERNAL, STATUS_INTERNAL},
};

START_TEST(statuses) {
  ck_assert_int_eq(error_status(status_rows[_i].code), status_rows[_i].status);
}
END_TEST

START_TEST(errors_are_counted_and_the_worst_remembered) {
  diag_error(&list, ERROR_FIELD_RANGE, "one %d", 1);
  diag_add(&list, DIAG_WARNING, ERROR_INTERNAL, (diag_place){0}, "a warning leads to no status");
  ck_assert_int_eq(list.worst, STATUS_DATA);
  diag_error(&list, ERROR_SYSTEM_READ, "two");
  diag_error(&list, ERROR_USAGE, "three");
  ck_assert_int_eq(list.worst, STATUS_SYSTEM);
  ck_assert_uint_eq(list.errors, 3);
  ck_assert_uint_eq(list.count, 4);
  ck_assert_str_eq(list.items[0].message, "one 1");
}
END_TEST

START_TEST(only_the_first_200_are_kept) {
  for (int i = 0; i < 1000; i++) diag_error(&list, ERROR_FIELD_RANGE, "number %d", i);
  ck_assert_uint_eq(list.count, 200);
  ck_assert_uint_eq(list.dropped, 800);
  ck_assert_uint_eq(list.errors, 1000);
  ck_assert_str_eq(list.items[199].message, "number 199");
}
END_TEST

START_TEST(places_are_copied) {
  char file[] = "a.json", path[] = "$.x";
  diag_add(&list, DIAG_ERROR, ERROR_FIELD_RANGE, (diag_place){file, 1, 2, path}, "m");
  file[0] = path[2] = '?';
  ck_assert_str_eq(list.items[0].place.file, "a.json");
  ck_assert_str_eq(list.items[0].place.path, "$.x");
}
END_TEST

static const struct error_row {
  int number;
  const char *name, *text;
} error_rows[] = {
#define ERROR_ROW(number, name, text) {number, #name, text},
    ERROR_LIST(ERROR_ROW)
#undef ERROR_ROW
};
enum { ERRORS = sizeof error_rows / sizeof error_rows[0] };

START_TEST(every_error_has_its_text) {
  ck_assert_str_eq(error_text((error_code)error_rows[_i].number), error_rows[_i].text);
  ck_assert_str_eq(error_text((error_code)999), "unknown error");
  if (_i > 0) ck_assert_int_gt(error_rows[_i].number, error_rows[_i - 1].number);
}
END_TEST

static char *page(void) {
  size_t len;
  char *text_of_page = file_read(memory, &list, TEST_ROOT "/docs/errors.md", 1 << 20, &len);
  ck_assert_msg(text_of_page != NULL, "docs/errors.md can be read");
  return text_of_page;
}

/* Each number has a section with its name and text, and in it a cause and what to do. */
START_TEST(the_page_explains_every_error) {
  const struct error_row *row = &error_rows[_i];
  const char *heading =
      text_format(memory, "\n### E%d %s: %s\n", row->number, row->name, row->text);
  const char *section = strstr(page(), heading);
  ck_assert_msg(section != NULL, "docs/errors.md lacks the heading%s", heading);
  const char *cause = strstr(section, "\nCause: "), *remedy = strstr(section, "\nWhat to do: ");
  const char *next = strstr(section + strlen(heading), "\n### ");
  ck_assert_msg(cause && (!next || cause < next), "E%d has a cause", row->number);
  ck_assert_msg(remedy && (!next || remedy < next), "E%d says what to do", row->number);
}
END_TEST

START_TEST(the_page_has_no_other_error) {
  int headings = 0;
  for (const char *p = page(); (p = strstr(p, "\n### E")) != NULL; p++) headings++;
  ck_assert_int_eq(headings, ERRORS);
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("diag");
  TCase *t = tcase_create("diag");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, lines, 0, ROWS(print_rows));
  tcase_add_loop_test(t, statuses, 0, ROWS(status_rows));
  tcase_add_test(t, errors_are_counted_and_the_worst_remembered);
  tcase_add_test(t, only_the_first_200_are_kept);
  tcase_add_test(t, places_are_copied);
  tcase_add_loop_test(t, every_error_has_its_text, 0, ERRORS);
  tcase_add_loop_test(t, the_page_explains_every_error, 0, ERRORS);
  tcase_add_test(t, the_page_has_no_other_error);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
