/* Dates as ISO 8601 writes them, "2031-03-01". There is no clock here: today comes from outside. */
#ifndef BASE_DATE_H
#define BASE_DATE_H

#include <stdbool.h>

/* Days since 1970-01-01 in the Gregorian calendar. False when `s` is no date from year 1 to 9999.
 */
bool date_days(const char *s, long *days);

#endif
