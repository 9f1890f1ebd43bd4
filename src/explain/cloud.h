/* Walls that keep a brief as points of sound and cost, for a drawing: an even sample of them, and
 * the edge that no wall passes. Takes nothing from the search but what it found, and costs the time
 * of some hundred walls of the reference: only for those who draw. */
#ifndef EXPLAIN_CLOUD_H
#define EXPLAIN_CLOUD_H

#include "search/sweep.h"

enum { CLOUD_MOST = 400 };

typedef struct cloud_point {
  double rating;        /* see cloud_rating */
  long long cost_cents; /* of the whole wall, floor value included */
  double thickness_m;
  const char *line; /* of the edge; NULL in the sample */
} cloud_point;

typedef struct cloud {
  long long walls;    /* that the sweep lists as keeping the brief */
  cloud_point *point; /* the sample, in the order of the sweep */
  int count;
  cloud_point *edge; /* rising in rating and cost: of the walls that promise at least so much the
                        cheapest */
  int edge_count;
} cloud;

/* What a promise says on the axis, from the least margin over the brief's targets in 0.01 dB: the
 * highest value that its one target may have for the wall to meet it; with several targets how far
 * beyond all of them the wall is. */
double cloud_rating(const brief *b, int promised_hundredth);
/* The numbers of `out` are those of judge_wall; no wall stands twice in the sample. `most` at least
 * 1. Needs prices in the context. */
void cloud_sample(arena *a, const space *s, const sweep_result *r, int most, cloud *out);

#endif
