/* The takeoff of a wall as CSV and sheets have it: the lines of the answer by section, with what to
 * buy beside them. */
#ifndef REPORT_TAKEOFF_H
#define REPORT_TAKEOFF_H

#include "report/buy.h"

typedef struct takeoff_rows {
  int count;
  int order[COST_MAX_LINES];           /* lines of the takeoff, by section; markups last */
  const buy_line *buy[COST_MAX_LINES]; /* of the line at that place; NULL = none */
  buy_list list;
} takeoff_rows;

/* Empty when `x` is NULL or cannot be costed. */
void takeoff_rows_of(const report *r, const assessment *x, takeoff_rows *out);
/* "minimum order 640 ft2", "price from 8000 ft2 on"; "" without. */
const char *takeoff_note(const report *r, const buy_line *b);

#endif
