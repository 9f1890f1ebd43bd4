/* The sweep: judges every wall of the space by tables and keeps what a choice can need. */
#ifndef SEARCH_SWEEP_H
#define SEARCH_SWEEP_H

#include "search/space.h"

/* A wall in the integers of the 0-1 model. */
typedef struct candidate {
  int core, face_a, face_b;
  long long cost_cents;      /* total + floor value */
  long long total_cents;
  int thickness_tenth_mm;    /* rounded */
  int mass_hundredth;        /* 0.01 kg/m2 */
  int promised_hundredth;    /* 0.01 dB: exact - z sd, or published x 100, least over targets minus its target */
  int height_mm, fire_min;
  rule_mask broken;
} candidate;

typedef struct mask_best { rule_mask broken; candidate best; } mask_best;

enum { SWEEP_RUNNERS = 24 };

typedef struct sweep_result {
  long long walls;           /* judged */
  candidate *frontier; int frontier_count; /* Pareto over cost, thickness, mass, promised, height, fire and broken rules */
  mask_best *masks; int mask_count;        /* cheapest wall per set of broken rules */
  candidate runners[SWEEP_RUNNERS]; int runner_count; /* cheapest walls that break nothing, in tie order */
} sweep_result;

/* Tie order: cost, thickness, mass, wall line. */
int candidate_compare(const space *s, const candidate *x, const candidate *y);
void sweep_run(arena *a, const space *s, sweep_result *out);

#endif
