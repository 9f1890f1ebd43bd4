/* The walls that keep every rule for less than a given sum, none of them beaten by another in what
 * a buyer compares: cost, thickness, mass, rating, fire, height. Why the list is whole:
 * docs/design/trim.md. */
#ifndef SEARCH_SAVERS_H
#define SEARCH_SAVERS_H

#include "search/sweep.h"

typedef struct saver {
  candidate is;
  int rating[METRIC_COUNT]; /* printed ratings in the metrics that the brief asks for, else 0 */
} saver;

typedef struct savers {
  saver *wall; /* in tie order: the best saving first */
  int count;
  long long rated; /* walls that the reference rated on the way */
} savers;

/* Whether `x` is no worse than `y` in cost, thickness, mass, printed ratings, fire and height, and
 * better in one of them, or else earlier in tie order. */
bool savers_beats(const space *s, const saver *x, const saver *y);
/* Of the walls of a sweep that break nothing, those that cost less than `below_cents` (floor value
 * included) and that none of them beats. */
void savers_find(arena *a, const space *s, const sweep_result *r, long long below_cents,
                 savers *out);

#endif
