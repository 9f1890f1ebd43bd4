/* The sweep: judges every wall of the space by tables and keeps what a choice can need.
 * By as many threads as the space says; what comes out does not depend on how many. Memory grows with what is kept: the walls that break nothing at 12 bytes each, and
 * a few hundred bytes for each of the frontier. Why nothing is lost: docs/design/search.md. */
#ifndef SEARCH_SWEEP_H
#define SEARCH_SWEEP_H

#include "search/candidate.h"
#include "search/masks.h"

enum { SWEEP_RUNNERS = 24, SWEEP_BLOCK = 512 };

/* A wall that breaks nothing. Not certain: its sound is so near a limit that the reference has to
 * be asked. */
typedef struct feasible_wall {
  int core;
  unsigned short face_a, face_b;
  bool certain;
} feasible_wall;

typedef struct feasible_block {
  struct feasible_block *next;
  int count;
  feasible_wall wall[SWEEP_BLOCK];
} feasible_block;

/* Every wall that is kept has been rated by the reference: its numbers are those of judge_wall. */
typedef struct sweep_result {
  long long walls; /* judged */
  long long rated; /* of these, rated by the reference; more of them with more threads */
  candidate *frontier;
  int frontier_count; /* in tie order; what no other wall beats in any number that a rule in force
                         reads, in broken rules, and in cost and ties */
  mask_best *masks;
  int mask_count; /* cheapest wall per set of broken rules, by set */
  candidate runners[SWEEP_RUNNERS];
  int runner_count;         /* of the walls that break nothing the cheapest of each kind (frame,
                               number of boards, mounts), in tie order */
  feasible_block *feasible; /* every wall that breaks nothing, in the order of the sweep; NULL when
                               there is none */
  const char *unpriced; /* the line of some wall left out because an item of it has no price; NULL
                           when there is none */
} sweep_result;

/* Needs prices in the context. */
void sweep_run(arena *a, const space *s, sweep_result *out);
/* Whether the reference agrees that a wall which is not certain breaks nothing. */
bool sweep_confirms(const space *s, const feasible_wall *w);

#endif
