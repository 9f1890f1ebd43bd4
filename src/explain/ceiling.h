/* The path over a wall that stops at the ceiling: up through one ceiling, down through the other. It
 * caps what any wall under it gives between the rooms. Information: decisions are about the wall. */
#ifndef EXPLAIN_CEILING_H
#define EXPLAIN_CEILING_H

#include "input/job.h"

/* Ceiling attenuation classes and what batts laid 1.2 m (48 in) to each side add: common practice,
 * no source. */
#define CEILING_CLASS_GLASS_TILE   25.0
#define CEILING_CLASS_MINERAL_TILE 35.0
#define CEILING_BATTS_ADD          5.0

typedef struct ceiling_path {
  bool there;        /* false: the wall runs to the deck, and nothing below is set */
  bool assumed;      /* the brief does not say the class: mineral tile */
  double tile_class; /* of the ceilings without batts */
  double class_all;  /* batts included */
} ceiling_path;

ceiling_path ceiling_path_of(const brief *b);
/* The rating of wall and ceiling path together: the sum of what both let through. */
double ceiling_capped(const ceiling_path *p, double wall_rating);

#endif
