/* Published ratings beside predictions (docs/methods/evidence.md). */
#ifndef CHECKS_EVIDENCE_H
#define CHECKS_EVIDENCE_H

#include <stdint.h>

#include "checks/match.h"
#include "wall/wall.h"

enum { EVIDENCE_NEAREST = 3, EVIDENCE_MAX_DIFFERS = 16, EVIDENCE_MAX_CAUTIONS = 2 };

typedef struct evidence_near {
  const wall_row *row;
  const char *line; /* the published wall as a wall line with catalog ids nearest to it, turned as
                       the judged wall stands */
  const char *differs[EVIDENCE_MAX_DIFFERS];
  int differ_count; /* published for ours: "one layer more on side A", "studs at 610 for 406 mm" */
  double distance;  /* points; 0 = nothing found that differs */
} evidence_near;

typedef struct evidence {
  const wall_row *
      match; /* the published row that the wall is, or NULL; the lowest rating when several match */
  const char *caution[EVIDENCE_MAX_CAUTIONS];
  int caution_count; /* what may keep today's goods from being the match */
  evidence_near nearest[EVIDENCE_NEAREST];
  int nearest_count; /* nearest first; the match is not among them */
} evidence;

/* The row that exactly covers the wall (mirrored too), or NULL. */
const wall_row *evidence_match(const catalog *c, const wall *w);
void evidence_find(arena *a, const catalog *c, const wall *w, evidence *out);

/* evidence_match in three steps, for many walls. The room-side leaves of `core` are ignored. */
void evidence_core_set(const catalog *c, const wall *core, match_list *out);
/* Bit per side_need of the published rows that the leaf is. */
uint64_t evidence_face(const catalog *c, const face *f);
const wall_row *evidence_pair(const catalog *c, const match_list *core, uint64_t face_a,
                              uint64_t face_b);

#endif
