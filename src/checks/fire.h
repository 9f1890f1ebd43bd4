/* Fire-resistance by one code's rules (docs/methods/fire.md): prescriptive rows, the
 * component-additive rule, the user's listings. Never the best of several codes. Screening only. */
#ifndef CHECKS_FIRE_H
#define CHECKS_FIRE_H

#include <stdint.h>

#include "checks/match.h"
#include "input/job.h"
#include "wall/wall.h"

typedef struct fire_verdict {
  int minutes;        /* 0 = not shown */
  const char *basis;  /* row or rule that covers it, or "not shown" */
  const char *row_id; /* NULL when none */
  const char *source; /* NULL when not shown */
  const char *note;   /* what the row asks besides, or why nothing is shown; NULL when nothing is to
                         be said */
} fire_verdict;

/* The best that a rule or row of the brief's code shows for the wall in the brief's use
 * (load-bearing or not). `a` holds the basis text; NULL: minutes only, no text (for the sweep). */
fire_verdict fire_judge(arena *a, const catalog *c, const brief *b, const wall *w);

/* The same in three steps, for many walls: what a core and a leaf are good for, then the pair. */
typedef struct fire_core {
  match_list rows;
  bool additive;       /* the component-additive rule may be used */
  double rest_minutes; /* frame and fill of that rule */
} fire_core;

typedef struct fire_face {
  uint64_t needs;  /* bit per side_need of the fire rows that the leaf is at least */
  double membrane; /* minutes of the leaf as component-additive membrane; 0 = none tabulated */
} fire_face;

/* The room-side leaves of `core` are ignored; its sheaths and inner faces count. */
void fire_core_set(const catalog *c, const brief *b, const wall *core, fire_core *out);
void fire_face_set(const catalog *c, const face *f, fire_face *out);
/* Minutes of leaf `a` on side A and leaf `b` on side B; the weaker side governs. *row (may be NULL)
 * gets the index of the fire row, or CATALOG_NONE for the component-additive rule and for nothing.
 */
int fire_pair(const catalog *c, const fire_core *core, const fire_face *a, const fire_face *b,
              int *row);

#endif
