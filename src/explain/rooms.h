/* What a wall gives between two rooms in the building, as it would be measured there: ASTC by the
 * brief's allowance, NNIC by the depth of the receiving room. Information: decisions use the
 * allowance. */
#ifndef EXPLAIN_ROOMS_H
#define EXPLAIN_ROOMS_H

#include "search/judge.h"

typedef struct room_rating {
  bool there;        /* a target is one of the field, or a depth is given */
  double astc;       /* STC, openings included, less the allowance */
  bool has_nnic[2];  /* the depth of the room on that side is given */
  double nnic[2];    /* received in the room on that side */
} room_rating;

room_rating rooms_rating(const brief *b, const assessment *x);
/* 10 lg(0.32 V/S), dB: NNIC less ASTC where the wall is the whole side of a room of this depth. The
 * normalised reduction refers to 0.5 s of reverberation, and 0.161 V/(0.5 S) = 0.32 V/S. */
double rooms_step(double depth_m);

#endif
