/* The cheapest wall of a space that breaks nothing, and no more than that: rates only what is
 * cheaper than the best so far. What a rule costs is found this way where giving it up changes the
 * takeoff; tests hold it against the 0-1 model. */
#ifndef SEARCH_CHEAPEST_H
#define SEARCH_CHEAPEST_H

#include "search/candidate.h"

/* False when no wall keeps all rules. Needs prices in the context. */
bool cheapest_find(arena *a, const space *s, candidate *out);

#endif
