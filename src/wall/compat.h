/* What may meet: refusals with a reason and its source. */
#ifndef WALL_COMPAT_H
#define WALL_COMPAT_H

#include "wall/wall.h"

typedef enum compat_level { COMPAT_FINE, COMPAT_UNUSUAL, COMPAT_ILLEGAL } compat_level;

typedef struct compat_finding {
  compat_level level;
  const char *rule;   /* short name: "batt-fit" */
  const char *reason; /* a sentence */
  const char *source;
} compat_finding;

enum { COMPAT_MAX = 48 }; /* more than there are rules */
typedef struct compat_report {
  int count;
  compat_level worst;
  compat_finding finding[COMPAT_MAX];
} compat_report;

/* All findings of a wall, each rule once. Unusual ones are cautions for rate and keep a wall out of
 * ordinary enumeration; one of level fine is a note only. The wall's indices must be of `c`, its
 * frame included. */
void compat_check(const catalog *c, const wall *w, compat_report *out);
/* The pieces the enumeration uses, so that it never builds what compat_check would refuse. `rate`
 * and `pick` agree by test: every enumerated wall has no illegal finding, and in ordinary build no
 * unusual one. */
compat_level compat_face(const catalog *c, const face *f);                   /* a leaf on its own */
compat_level compat_fill(const catalog *c, int frame_index, int fill_index); /* batt in a row */
compat_level compat_core(const catalog *c,
                         const wall *core); /* frame, spacing, fills, gap, mounts; faces ignored */
compat_level compat_face_on_core(const catalog *c, const wall *core, int side, const face *f);
compat_level compat_pair(const catalog *c, const face *a,
                         const face *b); /* ordinary build: counts and kinds of both sides */

/* One error for each reason why the wall cannot be built, at `place`. True when there is none. */
bool compat_buildable(diag_list *d, diag_place place, const catalog *c, const wall *w);

/* Every rule with its level, reason and source: for tests and pages. */
const compat_finding *compat_rules(size_t *count);

#endif
