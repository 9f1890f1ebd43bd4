/* All legal walls of a brief as cores x pairs of leaves; nothing is stored per wall. */
#ifndef SEARCH_SPACE_H
#define SEARCH_SPACE_H

#include "search/judge.h"

typedef struct space {
  const judge_context *context;
  face *faces; int face_count;          /* leaves that may stand at a room */
  wall *cores; int core_count;          /* frame, spacing, gap, fills, mounts */
  bool mirror_once;                     /* both rooms ask the same: one of two mirror images is enumerated */
} space;

/* Builds the axes after `only`, `without` (kept, as rules), build and compatibility. */
void space_build(arena *a, const judge_context *x, space *out);
/* Whether face i on A and j on B may stand on core k. */
bool space_legal(const space *s, int core, int face_a, int face_b);
wall space_wall(const space *s, int core, int face_a, int face_b);
/* How many legal walls. */
long long space_count(const space *s);

#endif
