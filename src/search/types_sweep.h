/* The sweep over all walls of a project's space, and what it leaves: walls that some class may be
 * built as, and that no other certainly makes needless. */
#ifndef SEARCH_TYPES_SWEEP_H
#define SEARCH_TYPES_SWEEP_H

#include "acoustics/kernel.h"
#include "search/types_front.h"
#include "search/types_rules.h"
#include "search/types_sound.h"

typedef struct types_sweep {
  arena *arena;
  const plan_context *x;
  int keep;              /* TYPES_ */
  judge_context context; /* of the space: the project's own brief */
  asks asks;
  goods goods;
  space space;
  const types_rules *rules;
  const types_cost *cost;
  const kernel_leaves *leaves;
  const char **group; /* framing groups by name */
  int groups;
  int *group_of;      /* per frame */
  int *order;         /* cores, cheapest for the whole project first */
  types_entry **item; /* what is left, in no order that means anything */
  int count;
  long long walls, rated;
  const char *unpriced; /* see plan_types */
} types_sweep;

/* The framing group of a frame: its own, else its material's. */
const char *types_group_name(const frame *f);
void types_sweep_run(arena *a, const plan_context *x, int keep, types_sweep *out);

#endif
