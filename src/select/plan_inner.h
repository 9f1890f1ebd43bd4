/* What the parts of `plan` tell one another; nobody else includes this (docs/design/plan.md). */
#ifndef SELECT_PLAN_INNER_H
#define SELECT_PLAN_INNER_H

#include "select/plan.h"

/* Rules compare whole numbers, so that solvers agree on what keeps a limit: lengths in mm, floor in
 * thousandths of a m2, both rounded to the nearest a class (and pair). */
enum { PLAN_MM_PER_M = 1000, PLAN_FLOOR_PER_M2 = 1000 };

/* What follows from a problem alone. */
typedef struct plan_terms {
  const plan_problem *p;
  long long *run_mm; /* a class */
  long long *floor;  /* a pair */
  double *most;      /* an item: what is needed when each class takes the most */
  double *slack;     /* an item: need above the stock up to this counts as covered */
  int *first_pair;   /* a pair's goods stand at [first_pair[i], first_pair[i + 1]) in: */
  int *good;         /* an item */
  double *amount;    /* and how much of it, above 0 */
} plan_terms;

/* What is asked of a plan in one solve. */
typedef struct plan_case {
  const plan_terms *terms;
  const bool *open;                /* a pair: may be taken */
  int max_types;                   /* 0 = any number */
  long long min_run_mm, floor_max; /* 0 = none */
  bool framed;                     /* one framing group a storey */
  int storeys;
} plan_case;

/* What a choice comes to. */
typedef struct plan_tally {
  double amount; /* currency, before rounding: what the model minimises */
  long long cents;
  int types;
  long long least_run_mm; /* of the types used */
  long long floor;
  bool framed; /* one group a storey */
  int worst_margin;
} plan_tally;

void plan_terms_make(arena *a, const plan_problem *p, plan_terms *out);
static inline size_t plan_pair(const plan_problem *p, int c, int t) {
  return (size_t)c * (size_t)p->types + (size_t)t;
}
/* Whether the problem lets class `c` be type `t`. */
bool plan_fits(const plan_problem *p, int c, int t);
/* What `wanted` units more than the stock cost: the cheapest tier, of equals the one that buys
 * less. */
double plan_spend(const plan_item *item, double wanted, int *tier, double *bought);
/* What a choice buys. */
void plan_buys(const plan_terms *s, const int *type_of, plan_buy *buy);
void plan_tally_make(const plan_terms *s, const int *type_of, plan_tally *out);
/* The plan_rule bits that a choice breaks in this case (never the budget). */
unsigned plan_broken(const plan_case *x, const plan_tally *t);
/* All pairs that fit with at least that margin; the rules of `rules` (plan_rule bits) in force. */
void plan_case_make(arena *a, const plan_terms *s, unsigned rules, int least_margin,
                    plan_case *out);

/* Where the model's columns stand; -1: none. */
typedef struct plan_columns {
  int *x;  /* a pair */
  int *y;  /* a type */
  int **z; /* an item: tier 0 = none bought, then the tiers; NULL: not in the model */
  int **q; /* an item: the tiers */
  int *w;  /* an item */
  int *u;  /* storey * groups + group */
  int s;   /* the worst margin */
} plan_columns;

typedef struct plan_shape {
  bool lean;        /* for our own solve: cost above each class's cheapest, and cuts */
  bool bare;        /* for our own question whether there is any plan: no goods, no costs */
  bool with_margin; /* a column for the worst margin, at least `least_margin` */
  int least_margin;
  const unsigned *tiers; /* an item: the tiers that may be taken, bit 0 none bought, k + 1 tier k;
                            NULL all */
} plan_shape;

/* The 0-1 model of a case. With `lean`, *base is what it leaves out of the objective, currency. */
void plan_model(arena *a, const plan_case *x, const plan_shape *shape, solver_model *m,
                plan_columns *at, double *base);
/* The values of the model's columns for a choice that keeps the case's rules. */
double *plan_values(arena *a, const plan_case *x, const solver_model *m, const plan_columns *at,
                    const int *type_of);
/* What one solve of a case needs to know of the whole call. */
typedef struct plan_call {
  arena *arena;
  diag_list *diags;
  const plan_terms *terms;
  const plan_how *how;
  double begun; /* clock, s */
} plan_call;

/* The least cost of a case. */
typedef struct plan_least {
  solver_status
      status; /* OPTIMAL; with a cut-off also when the cost only is known to be within it */
  bool found;
  int *type_of;
  plan_tally tally;
  double bound; /* currency: no choice of the case costs less; -HUGE_VAL unknown */
  int nodes;    /* of branch and bound, looked at */
} plan_least;

/* Whether the time is up or the call was stopped. */
bool plan_over(const plan_call *call);
/* Seconds left, for the solver; 0 = no limit. */
double plan_left(const plan_call *call);
/* Solves a case. `start`: a choice to begin with, NULL none; it may break rules. `enough_cents`:
 * only whether some choice costs no more is asked; LIMIT then with such a choice, or with a bound
 * above it (LLONG_MIN: the least cost is wanted). False and a diagnostic on a fault. */
bool plan_least_cost(const plan_call *call, const plan_case *x, const int *start,
                     long long enough_cents, plan_least *out);

/* Hands a case to the solver as it is. `limit`: what costs more is not looked for; HUGE_VAL none.
 * `asked`: anything within it will do. */
bool plan_ask_solver(const plan_call *call, const plan_case *x, const plan_shape *shape,
                     const int *start, double limit, bool asked, plan_least *out);
/* The rules that the problem states, as plan_rule bits. */
unsigned plan_rules_in_force(const plan_problem *p);
/* Whether an amount is above whole cents when rounded. */
bool plan_cents_above(double amount, long long cents);
/* Whether a case is shown to cost more than the budget. */
bool plan_too_dear(const plan_call *call, const plan_least *least);
/* The answer from the least cost of all rules. */
void plan_take_least(const plan_call *call, const plan_least *least, plan_solution *out);
bool plan_save(const plan_call *call, const plan_case *x, const plan_shape *shape,
               const char *path);
bool plan_solve_margin(const plan_call *call, const char *save_path, plan_solution *out);
/* Fills conflict, conflict_count, conflicts_whole. */
bool plan_conflicts(const plan_call *call, plan_solution *out);

/* How soon each column is branched on. */
int *plan_priorities(arena *a, const plan_case *x, const solver_model *m, const plan_columns *at);

#endif
