/* Height, load-bearing, shear, noncombustible, services. Screening only. */
#ifndef CHECKS_STRUCTURE_H
#define CHECKS_STRUCTURE_H

#include "input/job.h"
#include "wall/wall.h"

typedef struct height_verdict {
  double limit_m;
  const char *basis;    /* "composite, one board each side full height; ..." or "bare stud, deflection L/240 at 240 Pa" */
  const char *governs;  /* "deflection", "moment", "prescriptive limit" */
  const char *source;
} height_verdict;

/* Limiting height under the brief's lateral load and deflection limit. `a` NULL: no text. */
height_verdict structure_height(arena *a, const catalog *c, const brief *b, const wall *w);
/* Each answers true when the wall keeps the rule; *why (may be NULL) gets a static sentence when it does not. */
bool structure_bearing_ok(const catalog *c, const brief *b, const wall *w, const char **why);
bool structure_shear_ok(const catalog *c, const brief *b, const wall *w, const char **why);
bool structure_noncombustible_ok(const catalog *c, const brief *b, const wall *w, const char **why);
bool structure_fastening_ok(const catalog *c, const brief *b, const wall *w, int side, const char **why);
bool structure_wet_ok(const catalog *c, const brief *b, const wall *w, int side, const char **why);
bool structure_abuse_ok(const catalog *c, const brief *b, const wall *w, int side, const char **why);
bool structure_services_ok(const catalog *c, const brief *b, const wall *w, const char **why);

#endif
