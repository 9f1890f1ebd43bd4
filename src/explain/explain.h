/* Why: what cheaper walls lack, what each rule costs, which rules cannot hold together. All from the masks of one sweep. */
#ifndef EXPLAIN_EXPLAIN_H
#define EXPLAIN_EXPLAIN_H

#include "select/model.h"

typedef struct explain_near { candidate wall; assessment *facts; } explain_near;

typedef struct explain_rule_price {
  int rule;
  const char *name, *from, *to;
  bool reachable;               /* false: no wall even with the rule relaxed */
  double price_per_m2, price_total;
  assessment *wall;             /* the cheapest without the rule */
} explain_rule_price;

/* How far the price of one item or labour rate of the chosen wall may move before another wall is cheaper. */
typedef struct explain_break_even {
  const char *item;             /* code of the price book, or of the labour rate */
  const char *unit;             /* "m2", "m", "each", "h" */
  double price;                 /* today, per unit */
  bool has_low, has_high;       /* false: no limit on that side */
  double low, high;             /* the chosen wall stays cheapest between these */
  const char *low_line, *high_line; /* the wall that takes over; NULL without limit */
} explain_break_even;

typedef struct explanation {
  assessment *chosen;           /* NULL when infeasible */
  assessment **runners; int runner_count;
  assessment **cheaper; int cheaper_count;   /* cheaper_but */
  explain_rule_price *prices; int price_count;
  explain_break_even *break_even; int break_even_count;
  rule_mask *conflicts; int conflict_count;  /* smallest sets of rules that cannot hold together */
  assessment **nearest; int nearest_count;   /* when infeasible */
  long long walls;              /* judged */
  int frontier;                 /* columns given to the solver */
  solver_status status;
} explanation;

void explain_pick(arena *a, const space *s, const sweep_result *r, const pick_choice *p, explanation *out);

#endif
