#include "base/date.h"

#include <stddef.h>
#include <string.h>

static bool digits(const char *s, size_t n, long *value) {
  *value = 0;
  for (size_t i = 0; i < n; i++) {
    if (s[i] < '0' || s[i] > '9') return false;
    *value = *value * 10 + (s[i] - '0');
  }
  return true;
}

static bool is_leap(long year) {
  return (year % 4 == 0 && year % 100 != 0) || year % 400 == 0;
}

/* Days from 0001-01-01 to the first day of a year. */
static long days_before(long year) {
  long y = year - 1;
  return 365 * y + y / 4 - y / 100 + y / 400;
}

bool date_days(const char *s, long *days) {
  static const int length[] = {31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31};
  long year, month, day;
  if (strlen(s) != 10 || s[4] != '-' || s[7] != '-' || !digits(s, 4, &year) ||
      !digits(s + 5, 2, &month) || !digits(s + 8, 2, &day))
    return false;
  if (year < 1 || month < 1 || month > 12 || day < 1) return false;
  long most = length[month - 1] + (month == 2 && is_leap(year));
  if (day > most) return false;
  long n = days_before(year) - days_before(1970) + day - 1;
  for (int m = 1; m < month; m++) n += length[m - 1] + (m == 2 && is_leap(year));
  *days = n;
  return true;
}
