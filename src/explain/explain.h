/* Why: what cheaper walls lack, what each rule costs, which rules cannot hold together
 * (docs/design/selection.md). */
#ifndef EXPLAIN_EXPLAIN_H
#define EXPLAIN_EXPLAIN_H

#include "select/model.h"

/* What the chosen wall costs more, floor value included, than the cheapest that need not keep one
 * rule. */
typedef struct explain_rule_price {
  int rule;   /* RULE_ONLY: the frames that `only` leaves */
  bool step;  /* the rule is moved, not given up: a thicker wall, up to limit_m */
  double limit_m;
  const char *name, *from, *to;
  bool reachable;                   /* false: no wall even with the rule given up */
  double price_per_m2, price_total; /* >= 0; 0: the rule costs nothing */
  assessment *wall; /* the cheapest without the rule, judged by the brief as it stands */
} explain_rule_price;

/* How far the price of one item or labour rate of the chosen wall may move before another wall is
 * cheaper. */
typedef struct explain_break_even {
  const char *item;                 /* code of the price book, or of the labour rate */
  const char *unit;                 /* "m2", "m", "each", "h" */
  double price;                     /* today, per unit */
  bool has_low, has_high;           /* false: no limit on that side */
  double low, high;                 /* the chosen wall stays cheapest between these */
  const char *low_line, *high_line; /* the wall that takes over; NULL without limit */
} explain_break_even;

typedef struct explanation {
  assessment *chosen; /* NULL when infeasible */
  assessment **runners;
  int runner_count;
  assessment **cheaper;
  int cheaper_count; /* cheaper_but */
  explain_rule_price *prices;
  int price_count;
  explain_break_even *break_even;
  int break_even_count;
  rule_mask *conflicts;
  int conflict_count; /* smallest sets of rules that cannot hold together */
  assessment **nearest;
  int nearest_count; /* when infeasible: fewest rules broken, then by the least, then cheapest; one
                        a set of broken rules */
  long long walls;   /* judged */
  int frontier;      /* columns given to the solver */
  solver_status status;
} explanation;

/* Chosen, runners-up, cheaper walls, prices of rules and break-even when a wall was found;
 * conflicts and nearest misses when none is. */
void explain_pick(arena *a, const space *s, const sweep_result *r, const pick_choice *p,
                  explanation *out);

/* ---- the parts, for tests ---- */

/* The brief with every frame where `only` leaves some; false when it leaves all. */
bool explain_relax_frames(arena *a, const catalog *c, const brief *b, brief *out);
/* The brief without one of its rules; false for those that a brief cannot do without (target,
 * height, price, only). */
bool explain_relax(const brief *b, int rule, brief *out);
/* Walls that cost less than `below_cents` and break something, one a set of broken rules: those that
 * fail the fewest. Returns how many. */
int explain_cheaper(arena *a, const space *s, const sweep_result *r, long long below_cents,
                    assessment ***out);
/* The smallest sets of rules of which every wall breaks one, from the sets of rules that walls
 * break. Returns how many; *out in ascending order of size, then of value. */
int explain_conflicts(arena *a, const rule_mask *broken, int count, rule_mask **out);
/* One entry a rule in force but the target and prices (of `only`, what it leaves of the frames); of
 * the greatest thickness one more for each step at which a thicker wall costs less. The dearest
 * first, then in the order of the rules, those without a price last. Of `chosen` only the cost is
 * read. */
void explain_prices(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                    explanation *out);
/* One entry an item and a labour rate of the chosen wall. */
void explain_break_evens(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                         explanation *out);

#endif
