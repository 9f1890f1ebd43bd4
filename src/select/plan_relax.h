/* Lower bounds of a case by Lagrangian relaxation, and what they rule out (docs/design/plan.md,
 * "Solving"). */
#ifndef SELECT_PLAN_RELAX_H
#define SELECT_PLAN_RELAX_H

#include "select/plan_guess.h"

/* Pairs and tiers that are still in question. Tiers are bits: 0 none bought, k + 1 tier k. */
typedef struct plan_part {
  bool *open;         /* a pair */
  unsigned *tiers;    /* an item */
  double bound;       /* currency: no plan of this part costs less */
  double *wage;       /* a class: its multiplier */
  double *price;      /* an item: likewise, currency per unit */
  double *share;      /* a demand (plan_relax.c): how much of an item's least spend it bears */
  double floor_price; /* per thousandth of a m2 */
  int pairs;          /* still open */
  int wavers;         /* the item whose tier matters most to the bound; PLAN_NONE: none does */
} plan_part;

typedef struct plan_relax plan_relax;

plan_relax *plan_relax_make(const plan_call *call, const plan_case *x, plan_guess *g);
/* All open pairs of the case and all tiers. */
void plan_part_whole(plan_relax *r, plan_part *out);
/* A copy to work on, in the memory of `out` where it has some (all zero: none yet). */
void plan_part_copy(plan_relax *r, const plan_part *from, plan_part *out);
/* Raises the bound of a part by `steps` of the subgradient, tries plans on the way, and closes
 * pairs that no plan of the part below `ceiling` uses. */
void plan_relax_part(plan_relax *r, plan_part *part, double ceiling, int steps);

#endif
