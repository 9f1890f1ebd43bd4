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

typedef struct explanation {
  assessment *chosen;           /* NULL when infeasible */
  assessment **runners; int runner_count;
  assessment **cheaper; int cheaper_count;   /* cheaper_but */
  explain_rule_price *prices; int price_count;
  rule_mask *conflicts; int conflict_count;  /* smallest sets of rules that cannot hold together */
  assessment **nearest; int nearest_count;   /* when infeasible */
  long long walls;              /* judged */
  int frontier;                 /* columns given to the solver */
  solver_status status;
} explanation;

void explain_pick(arena *a, const space *s, const sweep_result *r, const pick_choice *p, explanation *out);

#endif
