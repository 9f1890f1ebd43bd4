/* A good plan found without the solver: which types stand open is searched, classes then take the
 * cheapest of them at prices of goods and floor that the relaxation (plan_relax.h) sets. What it
 * finds is no answer yet; the better it is, the more columns can be ruled out before the proof. */
#ifndef SELECT_PLAN_GUESS_H
#define SELECT_PLAN_GUESS_H

#include "select/plan_inner.h"

typedef struct plan_guess {
  const plan_case *x;
  double *cost;      /* a pair: currency at the present prices; HUGE_VAL closed */
  int *trial, *best; /* a class: its type */
  int *open, *other; /* types that stand open in a trial */
  long long *run;    /* a type */
  bool found;
  plan_tally tally; /* of the best */
} plan_guess;

void plan_guess_init(arena *a, const plan_case *x, plan_guess *out);
/* Prices per unit of each item and of a thousandth of a m2. */
void plan_guess_prices(plan_guess *g, const double *price, double floor_price);
/* Keeps a choice when it keeps all rules and costs less than the best so far. */
bool plan_guess_offer(plan_guess *g, const int *type_of);
/* Tries the plan with these types open. */
void plan_guess_try(plan_guess *g, const int *types, int count);
/* Starts from these types and drops, swaps and adds types out of `from` as long as that pays. */
void plan_guess_polish(plan_guess *g, const int *types, int count, const int *from, int from_count);
/* The same from the best so far; then moves single classes. */
void plan_guess_finish(plan_guess *g, const int *from, int from_count);

#endif
