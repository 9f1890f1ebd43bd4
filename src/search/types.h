/* The wall types that a project can need: of all walls that some class of its schedule may be built
 * as, those that no other makes needless (docs/design/plan.md says why no optimum is lost). */
#ifndef SEARCH_TYPES_H
#define SEARCH_TYPES_H

#include "input/schedule.h"
#include "search/judge.h"

typedef struct plan_context {
  const catalog *catalog;
  const price_book *prices;
  const project *project;
  const schedule *schedule;
} plan_context;

/* One type as one class. */
typedef struct type_use {
  bool fits;
  bool turned;     /* fits with its side A towards the class's side B (where it fits both ways, the
                      cheaper; as drawn where both cost the same) */
  long long cents; /* all walls of the class: cost and floor value, without the material of tiered
                      items and its markups */
  double floor_m2; /* floor that the walls stand on */
  int margin_hundredth; /* least over the targets of promised rating - target, 0.01 dB */
} type_use;

typedef struct plan_type {
  wall wall;
  const char *line;
  int group;     /* framing group, an index: equal for types that may stand on one storey */
  type_use *use; /* per class */
  double *need;  /* per class and tiered item (class * items + item): takeoff units, waste included */
} plan_type;

typedef struct plan_types {
  plan_type *type; /* in tie order: cost if all classes that it fits took it, then wall line */
  int count;
  const int *item; /* tiered items, by index in the price book: those with a minimum order, breaks or
                      stock on hand; none with quantity_breaks off and no stock */
  int items;
  const char *const *group; /* names of the framing groups */
  int groups;
  bool *plannable;   /* per class: some type fits */
  assessment ***miss; /* per class that is not: nearest misses as in explain (judged under its demand) */
  int *miss_count;
  rule_mask **conflict; /* and the smallest sets of rules that cannot hold together */
  int *conflict_count;
  long long walls, rated; /* looked at; rated by the reference */
} plan_types;

/* `prune` false keeps every wall that fits somewhere: for tests on small catalogs. */
void types_find(arena *a, const plan_context *x, bool prune, plan_types *out);

#endif
