/* The walls that no other beats: what a choice under the brief, under any of its limits moved and
 * under any of its rules given up can need. See docs/design/search.md for why nothing is lost. */
#ifndef SEARCH_FRONT_H
#define SEARCH_FRONT_H

#include "search/candidate.h"

/* A candidate whose sound is known only within bounds while the kernel's figure stands: `wall` is
 * the best that it may turn out to be, the rest the worst. */
typedef struct front_member {
  candidate wall;
  int promised_least;
  rule_mask broken_most, instead_most;
  bool exact; /* rated by the reference: best and worst are the same */
} front_member;

/* A member whose figures are those of the reference. */
front_member front_exact(const candidate *c);

/* The numbers of a member that some rule in force reads, turned so that less is better: what beats
 * another is no greater in any. */
enum { FRONT_COORDINATES = 8 };
typedef struct front_key {
  int v[FRONT_COORDINATES];
} front_key;

/* Members that break the same rules at their worst. */
typedef struct front_group {
  rule_mask broken, instead;
  front_key least; /* of all that ever were members, each coordinate apart */
  front_key *key;  /* of each item */
  front_member *item;
  int count, cap;
} front_group;

typedef struct front {
  arena *arena;
  const space *space;
  rule_mask in_force; /* a coordinate that no rule reads decides nothing */
  bool floor_value;   /* cost and total differ */
  front_group *group;
  int groups, group_cap;
  int count; /* members of all groups */
} front;

void front_init(front *f, arena *a, const space *s);
/* Whether some member is no worse in everything that counts, whatever the bounds turn out to be. */
bool front_beats(front *f, const front_member *m);
/* Adds a member that front_beats said no of. Members that it beats may stay: once all are exact,
 * they fall out when they are gone through in tie order (front_beats asks only for earlier ones).
 */
void front_add(front *f, const front_member *m);

#endif
