/* The walls of a project's space that no other makes needless, as far as is certain while the sweep
 * goes on: costs and ratings are known within bounds. What is kept at the end depends on the walls
 * alone, not on the order in which they come (docs/design/plan.md). */
#ifndef SEARCH_TYPES_FRONT_H
#define SEARCH_TYPES_FRONT_H

#include "search/types_cost.h"

/* A wall. */
typedef struct types_entry {
  int core, face_a, face_b; /* of the space */
  bool spare;               /* a plan may have to do without it: alone it makes nothing needless */
  ask_set certain, perhaps; /* who finds that it fits, surely and possibly */
  int group;                /* framing group; 0 where framing is free */
  long long thickness_nm;   /* 0 where floor area is free */
  int *of;                  /* classes that it may fit */
  int classes;              /* how many */
  double *best;             /* cents at least, for each of these */
  double *worst;            /* cents at most, for every class; INFINITY where it may not fit */
  int *margin_least, *margin_most; /* 0.01 dB, for every class; NULL where margin is no aim */
  const cost_part *part[2][PARTS]; /* as drawn, and turned */
  types_needs needs;               /* of these; not yet added up when `needed` is false */
  bool needed;
} types_entry;

/* A wall goes when those that make it needless weigh that much: one that is always there, or two
 * that are spare. */
enum { BEATEN_BY_SPARE = 1, BEATEN = 2 };

typedef struct types_front {
  arena *arena;
  const types_cost *cost;
  const goods *goods;
  int all_classes;
  types_entry **item;
  int *beaten; /* see BEATEN */
  int count, cap;
  double *extra; /* scratch: per class that an entry may fit */
} types_front;

void types_front_init(types_front *f, arena *a, const types_cost *cost, const goods *g,
                      int all_classes);
/* Whether others make the wall needless, whatever the bounds turn out to be; else *beaten is what
 * weighs against it. */
bool types_front_refuses(types_front *f, types_entry *e, int *beaten);
/* Keeps a copy; drops what it makes needless. */
void types_front_add(types_front *f, types_entry *e, int beaten);
/* Keeps a copy, and everything else too. */
void types_front_keep(types_front *f, types_entry *e);

#endif
