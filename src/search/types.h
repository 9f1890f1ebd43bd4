/* The wall types that a project can need: of all walls that some class of its schedule may be built
 * as, those that no other makes needless (docs/design/plan.md says why no optimum is lost).
 * A type may be used either way round. */
#ifndef SEARCH_TYPES_H
#define SEARCH_TYPES_H

#include "input/schedule.h"
#include "search/sweep.h"

enum { TYPES_NONE = -1 };

/* How much is kept. */
enum {
  TYPES_ALL,        /* every wall that fits somewhere: for tests on small catalogs */
  TYPES_NEEDED,     /* what a plan can need */
  TYPES_AND_SECONDS /* and what a plan can need that must do without any one of them */
};

typedef struct plan_context {
  const catalog *catalog;
  const price_book *prices;
  const project *project;
  const schedule *schedule;
} plan_context;

/* One type as one class. */
typedef struct type_use {
  bool fits;   /* judge_wall breaks no rule under the class's demand, one way round or the other */
  bool turned; /* stands with its side A towards the class's side B: where it fits both ways, the
                  cheaper; as drawn where both cost the same. Where it fits neither way: as drawn */
  long long cents; /* all walls of the class: cost and floor value, without the material of tiered
                      items and its markups */
  double floor_m2; /* floor that the walls stand on */
  int margin_hundredth; /* least over the targets of promised rating - target, 0.01 dB */
} type_use;

typedef struct plan_type {
  wall wall;
  const char *line;
  int group;     /* framing group, an index: equal for types that may stand on one storey */
  type_use *use; /* per class; of a class that it does not fit nothing else is told */
  double *need;  /* per class and tiered item (class * items + item): takeoff units, waste included,
                    in millionths; see types_of_wall */
  int behind;    /* the only type that makes it needless, by index: it serves plans without that one
                    (TYPES_AND_SECONDS); TYPES_NONE for what every plan can need */
} plan_type;

/* Why no type fits a class: a sweep of its own demand. explain_pick and its parts tell it in
 * words; the context and the brief live as long as the types. */
typedef struct type_refusal {
  judge_context context;
  space space;
  sweep_result why; /* nothing in it breaks nothing */
} type_refusal;

typedef struct plan_types {
  plan_type *type; /* in tie order: cost if all classes that it fits took it, then wall line */
  int count;
  const int *item; /* tiered items, by index in the price book: those with a minimum order, breaks
                      or stock on hand; none with quantity_breaks off and no stock */
  int items;
  const char *const *group; /* names of the framing groups */
  int groups;
  type_refusal **refused; /* per class; NULL where some type fits */
  const char *unpriced;   /* the line of some wall left out because an item of it has no price; NULL
                             when there is none */
  long long walls, rated; /* looked at; rated by the reference */
} plan_types;

/* `keep` one of TYPES_. */
void types_find(arena *a, const plan_context *x, int keep, plan_types *out);
/* Any wall as a type (a wall of the drawings), of the items and groups of `t` from types_find.
 * `use` and `need` are told in whole for the classes that it does not fit, too, as drawn; an item
 * without a price makes it fit nothing and cost nothing: then false. Needs are those of the
 * takeoff, added up part by part (framing, fills, mounts, each leaf), every part rounded to a
 * millionth of a unit. */
bool types_of_wall(arena *a, const plan_context *x, const plan_types *t, const wall *w,
                   plan_type *out);

#endif
