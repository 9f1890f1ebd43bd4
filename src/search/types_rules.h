/* Which of those who ask a wall keeps every rule of but those of sound: put together from what its
 * core and its leaves are, once for all who ask the same. */
#ifndef SEARCH_TYPES_RULES_H
#define SEARCH_TYPES_RULES_H

#include "search/tables.h"
#include "search/types_asks.h"

typedef struct types_rules types_rules;

/* One core. */
typedef struct types_core {
  int core; /* of the space */
  double thickness_m;
  sound_family family;
  unsigned outside;
  match_list published;
  ask_set keep; /* bearing, services, noncombustible, fastening, without */
  ask_set height[TABLES_HEIGHT_KEYS][TABLES_HEIGHT_KEYS];
  fire_core *fire;    /* per kind of fire question */
  double *mass_kg_m2; /* per wall height asked of a mass */
  tables **dear;      /* per ask, NULL without a cost limit */
  core_facts **priced;
} types_core;

/* `s` outlives the rules; its context is the project's. */
types_rules *types_rules_create(arena *a, const asks *k, const space *s);
/* One thread's. */
types_core *types_core_create(arena *a, const types_rules *r);
/* Fills `out` for one core. */
void types_core_set(const types_rules *r, int core, types_core *out);
/* Who may get leaf `leaf` on `side`. */
const ask_set *types_face_keep(const types_rules *r, int side, int leaf);
const face_facts *types_face(const types_rules *r, int leaf);
/* Of those in `who`, who finds every rule kept but those of sound and of lacking prices. */
ask_set types_keep(const types_rules *r, const types_core *k, int face_a, int face_b, ask_set who);

#endif
