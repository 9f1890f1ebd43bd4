/* Height, load-bearing, shear, noncombustible, fastening, wet and abused sides, services
 * (docs/methods/structure.md). Screening only: local code, the maker's tables and licensed practice
 * decide. */
#ifndef CHECKS_STRUCTURE_H
#define CHECKS_STRUCTURE_H

#include "input/job.h"
#include "wall/wall.h"

typedef struct height_verdict {
  double limit_m;
  const char *basis;   /* "bare stud, L/240 at 240 Pa"...; NULL without an arena */
  const char *governs; /* "deflection", "moment", "prescriptive limit" */
  const char *source;
} height_verdict;

/* Limiting height under the brief's lateral load and deflection limit (both above 0). `a` NULL: no
 * basis. */
height_verdict structure_height(arena *a, const catalog *c, const brief *b, const wall *w);
/* Whether the studs stand bare whatever the leaves: by brief, frame and mounts alone no boards hold
 * both flanges over the full height. Steel studs that do take bridging. */
bool structure_bare(const catalog *c, const brief *b, const wall *w);
/* All that the height depends on in a room-side leaf, as bits (0..3): walls of one core whose
 * leaves have the same bits, side by side, have the same limiting height. */
unsigned structure_height_key(const catalog *c, const face *f);

/* Each answers true when the wall keeps the rule; *why (may be NULL) gets a static sentence when it
 * does not. */
bool structure_bearing_ok(const catalog *c, const brief *b, const wall *w, const char **why);
bool structure_shear_ok(const catalog *c, const brief *b, const wall *w, const char **why);
bool structure_noncombustible_ok(const catalog *c, const brief *b, const wall *w, const char **why);
bool structure_fastening_ok(const catalog *c, const brief *b, const wall *w, int side,
                            const char **why);
bool structure_studs_ok(const catalog *c, const brief *b, const wall *w, const char **why);
bool structure_wet_ok(const catalog *c, const brief *b, const wall *w, int side, const char **why);
bool structure_abuse_ok(const catalog *c, const brief *b, const wall *w, int side,
                        const char **why);
bool structure_services_ok(const catalog *c, const brief *b, const wall *w, const char **why);

enum { STRUCTURE_MAX_CAUTIONS = 10 };
/* What holds beside the verdicts and must be said with them: static sentences, at most
 * STRUCTURE_MAX_CAUTIONS; how many. */
int structure_cautions(const catalog *c, const brief *b, const wall *w,
                       const char *out[STRUCTURE_MAX_CAUTIONS]);

#endif
