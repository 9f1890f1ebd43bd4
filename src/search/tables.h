/* What a wall of a space is, put together from what its core and its two leaves are: the sweep's
 * way of judging everything but sound. Agrees with judge_wall to the last digit (tests). */
#ifndef SEARCH_TABLES_H
#define SEARCH_TABLES_H

#include "search/candidate.h"

enum { TABLES_HEIGHT_KEYS = 4 };

typedef struct face_facts {
  double thickness_m, mass_kg_m2;
  fire_face fire;
  uint64_t published; /* evidence_face */
  unsigned height_key;
  unsigned outside; /* predict_outside_face */
  rule_mask
      broken[2]; /* as the leaf of A, of B: wet, abuse, shear, noncombustible, without, only */
} face_facts;

typedef struct core_facts {
  int core; /* of the space */
  double thickness_m, mass_kg_m2;
  fire_core fire;
  match_list published;
  sound_family family;
  unsigned outside; /* predict_outside_core */
  int height_mm[TABLES_HEIGHT_KEYS][TABLES_HEIGHT_KEYS];
  rule_mask broken; /* loadbearing, noncombustible, shear, services, fastening, without, only */
  cost_parts cost;
} core_facts;

typedef struct tables tables;

tables *tables_create(arena *a, const space *s);
const face_facts *tables_face(const tables *t, int index);
/* Fills `out` for one core; `t` may be used by one thread at a time. */
void tables_core(tables *t, int core, core_facts *out);
/* The numbers and rules of a wall but its sound. False when an item has no price: then its cost is
 * not known. */
bool tables_wall(tables *t, const core_facts *k, int face_a, int face_b, candidate *out);
/* The same but cost: its figures in `out` stay 0, and of the rules the greatest cost is not asked. */
void tables_measure(const tables *t, const core_facts *k, int face_a, int face_b, candidate *out);
/* What decides about sound beside the rating: sd (METRIC_COUNT values) of the prediction, and the
 * published row that the wall is, or NULL. */
const wall_row *tables_sound(const tables *t, const core_facts *k, int face_a, int face_b,
                             double *sd);
/* The cores of a space, cheapest first: what they leave refuses most of the rest at once. */
const int *tables_cores_by_cost(arena *a, const space *s);

#endif
