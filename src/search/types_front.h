/* The walls of a project's space that no other makes needless, as far as is certain while the sweep
 * goes on: costs and ratings are known within bounds. */
#ifndef SEARCH_TYPES_FRONT_H
#define SEARCH_TYPES_FRONT_H

#include "search/types_cost.h"

/* A wall. Arrays by class. */
typedef struct types_entry {
  int core, face_a, face_b; /* of the space */
  ask_set certain, perhaps; /* who finds that it fits, surely and possibly */
  int group;                /* framing group; 0 where framing is free */
  double *worst, *best;     /* cents: at most, INFINITY where it may not fit; at least, INFINITY where
                               it cannot fit */
  long long thickness_nm;   /* 0 where floor area is free */
  int *margin_least, *margin_most; /* 0.01 dB; NULL where margin is no aim */
  const cost_part *part[2][PARTS]; /* as drawn, and turned */
  types_needs needs[2];            /* the same; not yet added up when `needed` is false */
  bool needed;
} types_entry;

typedef struct types_front {
  arena *arena;
  const types_cost *cost;
  const goods *goods;
  int classes;
  int depth;           /* how many others it takes to make a wall needless */
  types_entry **item;
  int *beaten;         /* by how many of those kept at the time */
  int count, cap;
  double *extra; /* scratch */
} types_front;

void types_front_init(types_front *f, arena *a, const types_cost *cost, const goods *g, int classes,
                      int depth);
/* Whether enough others make the wall needless, whatever the bounds turn out to be. */
bool types_front_refuses(types_front *f, types_entry *e, int *beaten);
/* Keeps a copy; drops what it makes needless. */
void types_front_add(types_front *f, types_entry *e, int beaten);

#endif
