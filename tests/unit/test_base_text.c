/* Text: numbers that read the same everywhere, bounded buffers, patterns, near names. */
#include "base/text.h"

#include <check.h>
#include <locale.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static jmp_buf out_of_memory;
static arena *memory;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
}
static void teardown(void) {
  arena_free(memory);
}

static text buffer(size_t max) {
  text t;
  text_init(&t, memory, max);
  return t;
}

/* Half away from zero on the decimal that a person would write: 2.675 is 2.68, though the nearest
 * double lies below it. */
static const struct fixed_row {
  double value;
  int decimals;
  const char *fixed, *number;
} fixed_rows[] = {
    {0, 0, "0", "0"},
    {0, 3, "0.000", "0"},
    {-0.0, 1, "0.0", "0"},
    {-0.04, 1, "0.0", "0"},
    {-0.05, 1, "-0.1", "-0.1"},
    {0.125, 2, "0.13", "0.13"},
    {2.675, 2, "2.68", "2.68"},
    {1.005, 2, "1.01", "1.01"},
    {0.15, 1, "0.2", "0.2"},
    {0.45, 1, "0.5", "0.5"},
    {0.5, 0, "1", "1"},
    {1.5, 0, "2", "2"},
    {2.5, 0, "3", "3"},
    {-2.5, 0, "-3", "-3"},
    {0.49999999999999994, 0, "0", "0"},
    {9.995, 2, "10.00", "10"},
    {99.95, 1, "100.0", "100"},
    {0.06, 1, "0.1", "0.1"},
    {0.04, 1, "0.0", "0"},
    {0.004, 1, "0.0", "0"},
    {123.9, 1, "123.9", "123.9"},
    {100, 0, "100", "100"},
    {100, 2, "100.00", "100"},
    {10.5, 3, "10.500", "10.5"},
    {0.1 + 0.2, 9, "0.300000000", "0.3"},
    {123456789.123456789, 6, "123456789.123457", "123456789.123457"},
    {9007199254740993.0, 1, "9007199254740992.0", "9007199254740992"},
    {1e22, 1, "10000000000000000000000.0", "10000000000000000000000"},
    {1e-320, 9, "0.000000000", "0"},
    {5e-10, 9, "0.000000001", "0.000000001"},
    {1.25, -3, "1", "1"},
    {0.12345678949, 12, "0.123456789", "0.123456789"},
};
enum { FIXED_ROWS = sizeof fixed_rows / sizeof fixed_rows[0] };

static void check_fixed(const struct fixed_row *row) {
  text fixed = buffer(400), number = buffer(400);
  text_fixed(&fixed, row->value, row->decimals);
  text_number(&number, row->value, row->decimals);
  ck_assert_str_eq(fixed.data, row->fixed);
  ck_assert_str_eq(number.data, row->number);
  ck_assert_str_eq(text_of(memory, row->value, row->decimals), row->fixed);
}

START_TEST(numbers) {
  check_fixed(&fixed_rows[_i]);
}
END_TEST

START_TEST(numbers_that_are_none) {
  text t = buffer(100);
  text_fixed(&t, (double)NAN, 2);
  text_char(&t, ' ');
  text_fixed(&t, (double)INFINITY, 2);
  text_char(&t, ' ');
  text_number(&t, -(double)INFINITY, 2);
  ck_assert_str_eq(t.data, "nan inf -inf");
}
END_TEST

/* The largest double has 309 digits before the point. */
START_TEST(the_largest_number_fits) {
  text t = buffer(400);
  text_fixed(&t, -1.7976931348623157e308, 9);
  ck_assert_uint_eq(t.len, 1 + 309 + 1 + 9);
  ck_assert(!t.cut);
  ck_assert(strncmp(t.data, "-17976931348623157000", 21) == 0);
}
END_TEST

/* The host may run under a locale with a decimal comma. Where the C library's tools can make one,
 * all rows are read again under it; the library itself never sets a locale. */
START_TEST(numbers_under_a_decimal_comma) {
  const char *folder = TEST_BINARY_DIR "/test-locale";
  const char *command =
      "mkdir -p '" TEST_BINARY_DIR "/test-locale' && localedef -i de_DE -f UTF-8 '" TEST_BINARY_DIR
      "/test-locale/de_DE.UTF-8' >/dev/null 2>&1";
  bool made = system(command) == 0 && setenv("LOCPATH", folder, 1) == 0 &&
              setlocale(LC_ALL, "de_DE.UTF-8") != NULL;
  if (!made) {
    (void)fprintf(stderr, "note: no locale with a decimal comma can be made here; skipped\n");
    return;
  }
  char comma[16];
  (void)snprintf(comma, sizeof comma, "%.1f", 0.5);
  ck_assert_str_eq(comma, "0,5"); /* the locale is in force */
  for (int i = 0; i < FIXED_ROWS; i++) check_fixed(&fixed_rows[i]);
}
END_TEST

/* A slow check of the rounding: 3-digit decimals k/1000 to 2 digits, with the answer from whole
 * numbers. */
START_TEST(every_thousandth_rounds_half_away) {
  for (int k = 0; k < 20000; k++) {
    int cents = (k + 5) / 10;
    text t = buffer(40);
    text_fixed(&t, k / 1000.0, 2);
    char expected[40];
    (void)snprintf(expected, sizeof expected, "%d.%02d", cents / 100, cents % 100);
    if (strcmp(t.data, expected)) ck_abort_msg("%d/1000: %s", k, t.data);
  }
}
END_TEST

static const struct cents_row {
  long long cents;
  bool thousands;
  const char *shown;
} cents_rows[] = {
    {0, false, "0.00"},
    {5, false, "0.05"},
    {-5, true, "-0.05"},
    {123450, false, "1234.50"},
    {123450, true, "1,234.50"},
    {99999, true, "999.99"},
    {-100000000, true, "-1,000,000.00"},
    {INT64_MIN, false, "-92233720368547758.08"},
    {INT64_MAX, true, "92,233,720,368,547,758.07"},
};

START_TEST(cents) {
  text t = buffer(100);
  text_cents(&t, cents_rows[_i].cents, cents_rows[_i].thousands);
  ck_assert_str_eq(t.data, cents_rows[_i].shown);
}
END_TEST

START_TEST(a_full_buffer_is_cut_at_a_whole_character) {
  text t = buffer(5);
  text_put(&t, "ab\xC3\xA9\xE2\x82\xAC"); /* 2 + 2 + 3 bytes */
  ck_assert(t.cut);
  ck_assert_str_eq(t.data, "ab\xC3\xA9");
  text_put(&t, "x"); /* nothing follows a gap */
  ck_assert_str_eq(t.data, "ab\xC3\xA9");
  text exact = buffer(3);
  text_put(&exact, "abc");
  ck_assert(!exact.cut);
  text none = buffer(0);
  text_putf(&none, "%d", 7);
  ck_assert_str_eq(none.data, "");
  ck_assert(none.cut);
}
END_TEST

START_TEST(a_buffer_grows) {
  text t = buffer(100000);
  for (int i = 0; i < 10000; i++) text_putf(&t, "%d,", i % 10);
  ck_assert_uint_eq(t.len, 20000);
  ck_assert_uint_eq(strlen(t.data), 20000);
  const char *long_one = text_format(memory, "%0600d|%s", 7, "end");
  ck_assert_uint_eq(strlen(long_one), 604);
  ck_assert_str_eq(long_one + 599, "7|end");
}
END_TEST

START_TEST(padding_counts_characters_of_the_last_line) {
  text t = buffer(100);
  text_put(&t, "first line\nm\xC2\xB2");
  text_pad(&t, 5);
  text_char(&t, '|');
  text_pad(&t, 2); /* already beyond */
  ck_assert_str_eq(t.data, "first line\nm\xC2\xB2   |");
}
END_TEST

static const struct match_row {
  const char *pattern, *name;
  bool matches;
} match_rows[] = {
    {"typex-16", "typex-16", true},
    {"typex-16", "typex-1", false},
    {"typex-*", "typex-16", true},
    {"*", "", true},
    {"*", "anything", true},
    {"", "", true},
    {"", "a", false},
    {"*-16", "typex-16", true},
    {"*-16", "typex-16b", false},
    {"a*b*c", "aXbYbZc", true},
    {"a*b*c", "aXbYbZ", false},
    {"steel-?\?-18", "steel-92-18", true},
    {"steel-?\?-18", "steel-152-18", false},
    {"?", "", false},
    {"**", "x", true},
    {"[ab]", "a", false},
};

START_TEST(patterns) {
  const struct match_row *row = &match_rows[_i];
  ck_assert_msg(text_match(row->pattern, row->name) == row->matches, "%s on %s", row->pattern,
                row->name);
}
END_TEST

/* A pattern of many stars stays quick: backtracking goes to the last star only. */
START_TEST(a_hostile_pattern_ends) {
  char name[2001], pattern[401];
  memset(name, 'a', 2000);
  name[2000] = '\0';
  for (int i = 0; i < 200; i++) memcpy(pattern + 2 * i, "*a", 2);
  pattern[399] = 'b';
  pattern[400] = '\0';
  ck_assert(!text_match(pattern, name));
}
END_TEST

static const char *const names[] = {"height_m", "length_m", "typex-16",   "typex-13",
                                    "rc",       "clip",     "steel-92-18"};
static const struct near_row {
  const char *word, *nearest;
} near_rows[] = {
    {"heigth_m", "height_m"},
    {"height", "height_m"},
    {"typex16", "typex-16"},
    {"tpyex-13", "typex-13"},
    {"rx", NULL},
    {"clips", "clip"},
    {"banana", NULL},
    {"", NULL},
    {"steel-92-81", "steel-92-18"},
};

START_TEST(near_names) {
  const struct near_row *row = &near_rows[_i];
  const char *found = text_nearest(row->word, names, sizeof names / sizeof names[0]);
  if (row->nearest)
    ck_assert_pstr_eq(found, row->nearest);
  else
    ck_assert_msg(!found, "%s is near %s", row->word, found ? found : "");
}
END_TEST

START_TEST(a_very_long_word_has_no_near_name) {
  char word[500];
  memset(word, 'h', sizeof word - 1);
  word[sizeof word - 1] = '\0';
  ck_assert_ptr_null(text_nearest(word, names, 1));
}
END_TEST

/* Lengths from the table of well-formed byte sequences, Unicode Standard 3.9, table 3-7. */
static const struct utf8_row {
  const char *bytes;
  size_t length;
} utf8_rows[] = {
    {"a", 1},
    {"\xC2\xA0", 2},
    {"\xE0\xA0\x80", 3},
    {"\xED\x9F\xBF", 3},
    {"\xF0\x90\x80\x80", 4},
    {"\xF4\x8F\xBF\xBF", 4},
    {"\x80", 0},             /* continuation alone */
    {"\xC0\xAF", 0},         /* overlong */
    {"\xE0\x9F\xBF", 0},     /* overlong */
    {"\xED\xA0\x80", 0},     /* half a surrogate pair */
    {"\xF0\x8F\xBF\xBF", 0}, /* overlong */
    {"\xF4\x90\x80\x80", 0}, /* beyond U+10FFFF */
    {"\xF5\x80\x80\x80", 0},
    {"\xE2\x82", 0}, /* cut off */
    {"\xFF", 0},
};

START_TEST(utf8) {
  const char *p = utf8_rows[_i].bytes;
  ck_assert_uint_eq(text_utf8(p, p + strlen(p)), utf8_rows[_i].length);
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("text");
  TCase *t = tcase_create("text");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_set_timeout(t, 60);
  tcase_add_loop_test(t, numbers, 0, FIXED_ROWS);
  tcase_add_test(t, numbers_that_are_none);
  tcase_add_test(t, the_largest_number_fits);
  tcase_add_test(t, numbers_under_a_decimal_comma);
  tcase_add_test(t, every_thousandth_rounds_half_away);
  tcase_add_loop_test(t, cents, 0, ROWS(cents_rows));
  tcase_add_test(t, a_full_buffer_is_cut_at_a_whole_character);
  tcase_add_test(t, a_buffer_grows);
  tcase_add_test(t, padding_counts_characters_of_the_last_line);
  tcase_add_loop_test(t, patterns, 0, ROWS(match_rows));
  tcase_add_test(t, a_hostile_pattern_ends);
  tcase_add_loop_test(t, near_names, 0, ROWS(near_rows));
  tcase_add_test(t, a_very_long_word_has_no_near_name);
  tcase_add_loop_test(t, utf8, 0, ROWS(utf8_rows));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
