/* What walls cost at least and rate at most, without looking at each: for searches that go from the
 * cheapest wall up. A wall costs about as much as its core, its leaf on A and its leaf on B do apart
 * (their keys, in cents); the rest is rounding. See docs/design/search.md. */
#ifndef SEARCH_BOUND_H
#define SEARCH_BOUND_H

#include "acoustics/kernel.h"
#include "search/tables.h"

/* The leaves that may stand on one support of one side and break no rule by themselves, in groups
 * whose leaves are alike in what a whole group can be refused for; in a group the cheapest first. */
typedef struct bound_list {
  int count;
  int *face;   /* of the space */
  double *key; /* cents */
  int groups, *group_first; /* groups + 1 places */
  double *group_thickness_m; /* of the thinnest leaf */
  double key_least, thickness_least_m, mass_least_kg_m2;
  uint64_t fire_needs; /* union over the leaves, as in fire_face */
  double fire_membrane;
  kernel_leaves *leaves; /* in the order of `face`; NULL when there is none */
} bound_list;

typedef struct bound {
  const space *space;
  double slack; /* cents: a wall costs within so much of the sum of its three keys */
  bound_list *all, *few; /* support x 2 + side. few: of all, those that nothing cheaper is as heavy as */
  double *core_key;
  double *least; /* per core: key with the cheapest leaves; HUGE_VAL when none may stand there */
  int *order;    /* of the cores, by `least` */
} bound;

/* `t` is only read. Needs prices in the context. */
void bound_create(arena *a, const space *s, const tables *t, bound *out);
const bound_list *bound_leaves(const bound *b, bool few, int core, int side);
/* How many leaves of a group have a key of at most `key`. */
int bound_within(const bound_list *l, int group, double key);

#endif
