/* The cheapest wall for every whole value that one target of a brief may have, all in one sweep.
 * Why nothing is lost: docs/design/ladder.md. */
#ifndef SEARCH_RUNGS_H
#define SEARCH_RUNGS_H

#include "search/candidate.h"

enum { RUNGS_LEAST = 1, RUNGS_MOST = 100 }; /* values that a target may have */

typedef struct rung_best {
  bool found;
  candidate wall; /* first in tie order of the walls that keep the brief with the target there */
  int reaches;    /* highest value of the target that this wall keeps, >= its own place */
} rung_best;

typedef struct rungs {
  rung_best at[RUNGS_MOST + 1]; /* by the target's value; [0] is not used */
  long long walls;              /* legal walls that were looked at */
  long long rated;              /* of these, rated by the reference; varies with the threads */
  int lowest, highest;          /* values that some wall reaches as its best; 0 when none keeps the
                                   rest of the brief */
} rungs;

/* The highest whole value of the brief's target `climbs` at which the sound of `w` keeps all
 * targets; 0 when it keeps them at no value. The value that stands in the brief decides nothing. */
int rungs_reached(const judge_context *x, int climbs, const wall *w);
/* All rungs of the target `climbs`; its value in the brief decides nothing. Needs prices in the
 * context. */
void rungs_find(arena *a, const space *s, int climbs, rungs *out);

#endif
