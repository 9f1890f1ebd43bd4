/* Who finds a wall's rating high enough: certainly, perhaps, or not, by the kernel's figures; one
 * look-up a target and wall, however many ask for it. */
#ifndef SEARCH_TYPES_SOUND_H
#define SEARCH_TYPES_SOUND_H

#include "search/sound.h"
#include "search/types_asks.h"

typedef struct types_sound types_sound;

/* What a wall's sound is known to be by. */
typedef struct types_heard {
  const double *exact; /* METRIC_COUNT values; those of types_sound_metrics are set */
  sound_family family;
  unsigned outside; /* of core and leaves */
  const wall_row *match;
} types_heard;

types_sound *types_sound_create(arena *a, const asks *k, const catalog *c);
/* The metrics that some target is in; how many. */
int types_sound_metrics(const types_sound *t, sound_metric out[METRIC_COUNT]);
/* Narrows `certain` and `perhaps` to who surely, to who possibly finds all targets reached. `t` is
 * one thread's. */
void types_sound_who(types_sound *t, const types_heard *h, ask_set *certain, ask_set *perhaps);
/* Whether some target is one of a composite: then certainty is rare. */
bool types_sound_composite(const types_sound *t);

#endif
