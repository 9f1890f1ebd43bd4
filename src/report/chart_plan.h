/* What a project costs by the number of its wall types, by type and by storey. Takes plain numbers.
 */
#ifndef REPORT_CHART_PLAN_H
#define REPORT_CHART_PLAN_H

#include "report/chart_bars.h"

typedef enum chart_solved {
  CHART_UNSOLVED,   /* time ran out: nothing is known */
  CHART_INFEASIBLE, /* proven: no plan with so few types */
  CHART_FOUND,      /* a plan, not proven cheapest */
  CHART_PROVEN      /* the cheapest */
} chart_solved;

/* The plan with at most `types` types. */
typedef struct chart_types_point {
  int types;
  chart_solved solved;
  long long cost_cents; /* of a plan that was found */
} chart_types_point;

typedef struct chart_types_data {
  const chart_types_point *point; /* rising in types */
  int count;
  int chosen; /* number of types of the plan; 0 = no plan */
  long long chosen_cents;
  long long budget_cents; /* 0 = none */
} chart_types_data;

const char *chart_types_words(const report *r, const chart_types_data *d);
void chart_types(const report *r, const char *id, const chart_types_data *d, text *out);

/* One type or one storey: what its walls cost, its goods bought for the whole project, its set-up,
 * the floor under it. */
typedef struct chart_plan_part {
  const char *label;
  long long walls_cents, goods_cents, setup_cents, floor_cents;
} chart_plan_part;

/* `by` "type", "storey". */
const char *chart_plan_cost_words(const report *r, const char *by, const chart_plan_part *part,
                                  int count);
void chart_plan_cost(const report *r, const char *id, const char *by, const chart_plan_part *part,
                     int count, text *out);

#endif
