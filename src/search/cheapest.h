/* The cheapest wall of a space that breaks nothing, and no more than that, from the cheapest up: what
 * surely costs more than the best so far is not looked at, what surely breaks a rule not rated. What a
 * rule costs is found this way where giving it up changes the takeoff; tests hold it against the 0-1
 * model and against every wall. Why nothing is lost: docs/design/search.md. */
#ifndef SEARCH_CHEAPEST_H
#define SEARCH_CHEAPEST_H

#include "search/candidate.h"

/* False when no wall keeps all rules. Needs prices in the context. The answer does not depend on the
 * number of threads. */
bool cheapest_find(arena *a, const space *s, candidate *out);

/* How much was looked at; with several threads it varies. */
typedef struct cheapest_work {
  long long cores, screened, rated; /* cores; walls tested by a band, and rated in full */
} cheapest_work;
bool cheapest_search(arena *a, const space *s, candidate *out, cheapest_work *work);

#endif
