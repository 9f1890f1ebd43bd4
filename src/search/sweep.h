/* The sweep: judges every wall of the space by tables and keeps what a choice can need. Deterministic. Memory grows with what is
 * kept, not with the walls. Why nothing is lost: docs/design/search.md. */
#ifndef SEARCH_SWEEP_H
#define SEARCH_SWEEP_H

#include "search/candidate.h"
#include "search/masks.h"

enum { SWEEP_RUNNERS = 24 };

/* Every wall that is kept has been rated by the reference: its numbers are those of judge_wall. */
typedef struct sweep_result {
  long long walls;           /* judged */
  long long rated;           /* of these, rated by the reference */
  candidate *frontier; int frontier_count; /* in tie order; what no other wall beats in any number that a rule in force reads, in
                                              broken rules, and in cost and ties */
  mask_best *masks; int mask_count;        /* cheapest wall per set of broken rules, by set */
  candidate runners[SWEEP_RUNNERS]; int runner_count; /* of the walls that break nothing the cheapest of each kind (frame,
                                                         number of boards, mounts), in tie order */
  const char *unpriced;      /* the line of some wall left out because an item of it has no price; NULL when there is none */
} sweep_result;

/* Needs prices in the context. */
void sweep_run(arena *a, const space *s, sweep_result *out);

#endif
