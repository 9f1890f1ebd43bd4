/* One wall of a space in numbers, and the order in which equals are told apart. */
#ifndef SEARCH_CANDIDATE_H
#define SEARCH_CANDIDATE_H

#include "search/space.h"

typedef struct candidate {
  int core, face_a, face_b; /* of the space */
  wall_numbers is;
  rule_mask broken;
  rule_mask instead; /* see judge_sound: another set without which it would pass; 0 = none */
} candidate;

/* Tie order: cost, thickness, mass, wall line. Below 0 when `x` comes first; 0 only for the same
 * wall. */
int candidate_compare(const space *s, const candidate *x, const candidate *y);
/* Whether `x` passes wherever `y` does when rules are given up: each set that saves `y` saves `x`.
 */
bool candidate_passes_where(const candidate *x, const candidate *y);

#endif
