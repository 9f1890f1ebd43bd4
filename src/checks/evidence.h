/* Published ratings beside predictions. */
#ifndef CHECKS_EVIDENCE_H
#define CHECKS_EVIDENCE_H

#include "input/job.h"
#include "wall/wall.h"

enum { EVIDENCE_NEAREST = 3 };

typedef struct evidence_near {
  const wall_row *row;
  const char *line;     /* the published wall as a wall line with catalog ids nearest to it */
  const char *differs[8]; int differ_count; /* "one layer more on A", "610 for 406 mm" */
  double distance;
} evidence_near;

typedef struct evidence {
  const wall_row *match; /* the published row that the wall is, or NULL; the lowest rating when several match */
  evidence_near nearest[EVIDENCE_NEAREST]; int nearest_count;
} evidence;

/* The row that exactly covers the wall (mirrored too), or NULL. Cheap: for the sweep. */
const wall_row *evidence_match(const catalog *c, const wall *w);
void evidence_find(arena *a, const catalog *c, const wall *w, evidence *out);

#endif
