/* What to order for all walls of a project: one list, in whole packages, with what is on hand used
 * first and orders rounded up to the breaks that the plan buys at. */
#ifndef REPORT_BUY_PLAN_H
#define REPORT_BUY_PLAN_H

#include "explain/plan.h"
#include "report/buy.h"

typedef struct buy_plan_line {
  buy_line buy; /* `line` is not used; `needed` includes what is on hand; `least`: units that a
                   minimum order or a break asks for beyond the need; 0 = none */
  const char *section;
  double from_stock; /* units on hand that are used */
} buy_plan_line;

typedef struct buy_plan {
  buy_plan_line *line;
  int count;
  long long cents; /* sum of the lines: material, before tax and markups */
} buy_plan;

/* One line an item and, for studs, a stock length; by section. Empty without a plan. */
void buy_plan_of(const report *r, const plan_answer *p, buy_plan *out);

#endif
