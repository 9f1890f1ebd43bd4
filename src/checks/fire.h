/* Fire-resistance by one code's rules (trade: one code at a time). Screening only. */
#ifndef CHECKS_FIRE_H
#define CHECKS_FIRE_H

#include "input/job.h"
#include "wall/wall.h"

typedef struct fire_verdict {
  int minutes;          /* 0 = not shown */
  const char *basis;    /* row or rule that covers it, or "not shown" */
  const char *row_id;   /* NULL when none */
  const char *source;
} fire_verdict;

/* The best that a rule or row of the brief's code shows for the wall in the brief's use (load-bearing or not). `a` holds the
 * basis text; NULL: minutes only, no text (for the sweep). */
fire_verdict fire_judge(arena *a, const catalog *c, const brief *b, const wall *w);

#endif
