/* The cheapest wall for every set of broken rules that occurs. */
#ifndef SEARCH_MASKS_H
#define SEARCH_MASKS_H

#include "search/candidate.h"

typedef struct mask_best {
  rule_mask broken;
  candidate best;
} mask_best;

typedef struct masks {
  arena *arena;
  const space *space;
  mask_best *item; /* in order of first sight */
  int count, cap;
  int *slot; /* hash table of indices into item, -1 = free */
  int slots; /* a power of two */
} masks;

void masks_init(masks *m, arena *a, const space *s);
/* The entry of a set of rules, or NULL. */
const mask_best *masks_find(const masks *m, rule_mask broken);
/* Whether `c` comes before what is kept for the set. */
bool masks_wants(const masks *m, rule_mask broken, const candidate *c);
/* Keeps `c` for the set where it comes first. */
void masks_offer(masks *m, rule_mask broken, const candidate *c);

#endif
