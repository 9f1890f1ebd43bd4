/* Few types for many walls: the 0-1 model of `plan` (docs/design/plan.md), apart from what walls
 * are.
 */
#ifndef SELECT_PLAN_H
#define SELECT_PLAN_H

#include "select/solver.h"

enum { PLAN_MAX_TIERS = 10, PLAN_NONE = -1, PLAN_MAX_CONFLICTS = 32 };

/* All units of an order at `price` when the order is from `from` units on, up to the next tier. */
typedef struct plan_tier {
  double from, price; /* currency, markups included */
} plan_tier;

/* Bought as needed or more: buying up to the next tier's `from` is allowed. */
typedef struct plan_item {
  const char *code;
  int tier_count; /* at least 1; `from` rising; the first `from` is the minimum order, 0 = none */
  plan_tier tier[PLAN_MAX_TIERS];
  double stock; /* on hand at no cost */
} plan_item;

/* Arrays by class and type are class-major: [class * types + type]. */
typedef struct plan_problem {
  int classes, types, items;
  const long long *cents; /* without tiered items; below 0: the type does not fit */
  const double *need;     /* [(class * types + type) * items + item], units */
  const double *floor_m2;
  const int *margin;   /* 0.01 dB */
  const double *run_m; /* per class */
  const int *storey;   /* per class: index among those that must be framed alike; NULL = framing is
                          free */
  const int *group;    /* per type, 0 .. groups - 1 */
  int storeys, groups;
  const plan_item *item;
  long long setup_cents, budget_cents; /* setup: a type used; budget 0 = none */
  double min_run_m, floor_max_m2;      /* 0 = none; compared in whole mm and 0.001 m2 */
  int max_types;                       /* 0 = any number */
  const bool *locked_out; /* per type: may not be used; NULL = none (for "without this type") */
} plan_problem;

typedef struct plan_how {
  double seconds; /* 0 = no limit */
  int nodes;      /* most nodes of branch and bound, over all parts of a solve; 0 = no limit: an end
                     that is the same on every run */
  bool margin;    /* best worst margin within the budget, then least cost */
  bool plain;     /* the whole model to the solver, nothing found or ruled out before: for tests */
  bool no_conflicts;        /* INFEASIBLE need not say why: for the points of a curve */
  const int *start;         /* a choice to begin with, per class; may be NULL, may break rules */
  const volatile int *stop; /* ends early where it turns non-zero; may be NULL */
  /* currency; HUGE_VAL before the first plan; from another thread; must return. May be NULL. */
  void (*progress)(void *user, double found, double bound);
  void *user;
} plan_how;

typedef struct plan_buy {
  double need, bought, surplus, from_stock; /* units; need includes what stock covers */
  int tier;                                 /* PLAN_NONE: none bought */
  long long cents; /* bought at the tier's price, rounded up or down so that the goods add up to
                      their total, which is rounded half-up once */
} plan_buy;

/* Which coupling rules cannot hold together. */
typedef enum plan_rule {
  PLAN_RULE_TYPES,
  PLAN_RULE_RUN,
  PLAN_RULE_BUDGET,
  PLAN_RULE_FLOOR,
  PLAN_RULE_FRAMING,
  PLAN_RULES
} plan_rule;
extern const char *const plan_rule_names[PLAN_RULES];

typedef struct plan_solution {
  solver_status status; /* LIMIT: by seconds, nodes or stop; also when the best margin was not
                           settled */
  bool found;
  int *type_of;          /* per class */
  long long cost_cents;  /* counted anew from the choice: cents, setup and goods */
  long long bound_cents; /* no plan costs less (with `margin`: none of that worst margin); LLONG_MIN
                            when nothing was proved */
  int worst_margin;      /* 0.01 dB */
  int margin_bound;      /* with `margin`: no plan within the budget has a better worst margin */
  plan_buy *buy;         /* per item */
  unsigned conflict[PLAN_MAX_CONFLICTS]; /* INFEASIBLE: the smallest sets of plan_rule bits that
                                            cannot hold together; none when a class has no type, or
                                            none were asked */
  int conflict_count;
  bool conflicts_whole; /* false: time or nodes ran out before all sets were settled */
} plan_solution;

/* Every class should have a type that fits; without one the answer is INFEASIBLE. Writes the model
 * to `save_path` (NULL: no). False and a diagnostic when the solver or the file failed; "no plan"
 * is an answer. */
bool plan_solve(arena *a, diag_list *d, const plan_problem *p, const plan_how *how,
                const char *save_path, plan_solution *out);
/* The cost of a given choice, without the solver; what it buys in `buy` (items), may be NULL. */
long long plan_cost(const plan_problem *p, const int *type_of, plan_buy *buy);

#endif
