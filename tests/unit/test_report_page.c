/* Pages of plain text: width, columns, and nothing that steers a terminal. */
#include <check.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "report/page.h"

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
  text_init(&t, memory, 100000);
  return t;
}

START_TEST(words_stay_within_the_width) {
  text words = fresh(), out = fresh();
  for (int i = 0; i < 200; i++) text_putf(&words, "%d ", i * i);
  page_line(&out, "Label", words.data);
  const char *line = out.data;
  int lines = 0;
  for (const char *end; (end = strchr(line, '\n')) != NULL; line = end + 1, lines++) {
    ck_assert_int_le((int)(end - line), PAGE_WIDTH);
    if (lines > 0) ck_assert_int_eq((int)strspn(line, " "), PAGE_LABEL);
  }
  ck_assert_str_eq(line, "");
  ck_assert_int_gt(lines, 5);
}
END_TEST

START_TEST(a_word_longer_than_the_width_stays_whole) {
  char word[PAGE_WIDTH + 20];
  memset(word, 'x', sizeof word);
  word[sizeof word - 1] = '\0';
  text out = fresh();
  page_words(&out, 0, word);
  ck_assert_int_eq((int)out.len, (int)sizeof word);
}
END_TEST

static const struct put_row {
  const char *name, *value, *expected;
} put_rows[] = {
    {"plain", "5/8 in", "5/8 in"},
    {"escape sequence", "\x1b[2J", "\\u001b[2J"},
    {"line end", "a\nb", "a\\u000ab"},
    {"C1 control as UTF-8",
     "\xC2\x9B"
     "1m",
     "\\u009b1m"},
    {"letters beyond ASCII", "\xC3\xA9", "\xC3\xA9"},
};

START_TEST(nothing_steers_a_terminal) {
  const struct put_row *row = &put_rows[_i];
  text out = fresh();
  page_put(&out, row->value);
  ck_assert_msg(strcmp(out.data, row->expected) == 0, "%s: %s", row->name, out.data);
}
END_TEST

START_TEST(columns) {
  text out = fresh();
  page_right(&out, 8, "12.50");
  page_right(&out, 10, "too long");
  ck_assert_str_eq(out.data, "   12.50 too long");
  out = fresh();
  page_cut(&out, 6, "abcdef");
  text_char(&out, ' ');
  page_cut(&out, 4,
           "d\xC3\xA9"
           "cidedly");
  ck_assert_str_eq(out.data, "abcdef d\xC3\xA9"
                             "c.");
}
END_TEST

int main(void) {
  Suite *suite = suite_create("report page");
  TCase *cases = tcase_create("page");
  tcase_add_checked_fixture(cases, set_up, tear_down);
  tcase_add_test(cases, words_stay_within_the_width);
  tcase_add_test(cases, a_word_longer_than_the_width_stays_whole);
  tcase_add_loop_test(cases, nothing_steers_a_terminal, 0,
                      (int)(sizeof put_rows / sizeof put_rows[0]));
  tcase_add_test(cases, columns);
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
