/* Dates: day numbers, and what is no date. */
#include <check.h>
#include <stdlib.h>

#include "base/date.h"

/* Days since 1970-01-01 as `date -u -d ... +%s` over 86400 gives them; the Gregorian rule of leap
 * years is ISO 8601's. */
static const struct day_row {
  const char *date;
  long days;
} day_rows[] = {{"1970-01-01", 0},      {"1969-12-31", -1},     {"2000-02-29", 11016},
                {"2000-03-01", 11017},  {"2031-03-01", 22339},  {"2100-03-01", 47541},
                {"1900-03-01", -25508}, {"0001-01-01", -719162}};

START_TEST(day_numbers) {
  long days = 0;
  ck_assert_msg(date_days(day_rows[_i].date, &days), "%s", day_rows[_i].date);
  ck_assert_msg(days == day_rows[_i].days, "%s: %ld", day_rows[_i].date, days);
}
END_TEST

static const char *const wrong[] = {"",           "2031-3-1",   "2031/03/01",  "2031-13-01",
                                    "2031-00-10", "2031-02-29", "2100-02-29",  "2031-04-31",
                                    "0000-01-01", "2031-01-00", "2031-01-011", "20a1-01-01",
                                    "01-03-2031", "next week"};

START_TEST(no_dates) {
  long days = 7;
  ck_assert_msg(!date_days(wrong[_i], &days), "%s", wrong[_i]);
  ck_assert_int_eq(days, 7);
}
END_TEST

int main(void) {
  Suite *s = suite_create("date");
  TCase *t = tcase_create("dates");
  tcase_add_loop_test(t, day_numbers, 0, sizeof day_rows / sizeof day_rows[0]);
  tcase_add_loop_test(t, no_dates, 0, sizeof wrong / sizeof wrong[0]);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
