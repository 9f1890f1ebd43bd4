/* What walls cost their classes: every wall of a class built the same. By parts, for the sweep,
 * within a bound; to the cent for what is kept. */
#ifndef SEARCH_TYPES_COST_H
#define SEARCH_TYPES_COST_H

#include "search/space.h"
#include "search/types_asks.h"
#include "search/types_goods.h"

enum { PART_FRAME, PART_FILL, PART_MOUNT, PART_LEAF_A, PART_LEAF_B, PARTS };

/* Needs are counted in millionths of a takeoff unit. */
#define TYPES_NEED_UNIT 1e-6

/* Part of a wall in every class; arrays by class. */
typedef struct cost_part {
  double *cents; /* with markups and the value of the floor, but for rounding; of goods bought for
                    the whole project their lowest price */
  int needs;
  int *item;        /* of the goods, rising */
  long long **need; /* per item, per class */
  bool *missing;    /* an item has no price; NULL where none lacks one */
} cost_part;

/* Walls of a class that cost the same. */
typedef struct cost_row {
  brief brief;
  double count; /* of copies */
} cost_row;

typedef struct cost_class {
  cost_row *row;
  int rows;
  double copies;
  double floor_m;           /* length of all copies */
  double floor_cents_per_m; /* value of the floor under a metre of thickness */
  double stray_cents;       /* the parts' sum is that near the cost */
} cost_class;

typedef struct types_cost types_cost;

/* Works out the parts of all walls of a space; `s` NULL: of none. Only read afterwards. */
types_cost *types_cost_create(arena *a, const plan_context *x, const goods *g, const space *s);
const cost_class *types_cost_class(const types_cost *t, int of_class);
/* Sets PART_FRAME to PART_MOUNT of a core; NULL where it has none. */
void types_cost_core(const types_cost *t, int core, const cost_part *part[PARTS]);
/* A leaf on a side of a core, towards the class's side `at`. */
const cost_part *types_cost_leaf(const types_cost *t, int core, int side, int leaf, int at);

/* What a wall needs in every class. */
typedef struct types_needs {
  int count, cap;
  bool sided;           /* as drawn and turned it needs different amounts */
  int *item;            /* of the goods, rising */
  long long *amount[2]; /* [item * classes + class], millionths: as drawn; where sided, turned */
} types_needs;
/* Adds up those of its parts (NULL where there is none), as drawn and turned. `out` zeroed before
 * its first use; its memory is of `a` and used again. */
void types_needs_of(const types_cost *t, arena *a, const cost_part *part[2][PARTS],
                    types_needs *out);
/* The same numbers in memory of their own. */
types_needs types_needs_copy(arena *a, const types_needs *n, int classes);
/* All walls of the class built as `w`, its side A at the class's side A: cost and floor value
 * without the goods. False where an item has no price. */
bool types_cost_exact(const types_cost *t, int of_class, const wall *w, long long *cents);
/* Needs of a wall of any kind: `need` (count of the goods), millionths. */
void types_cost_needs(const types_cost *t, int of_class, const wall *w, long long *need);
/* The floor under all walls of the class, m2. */
double types_cost_floor_m2(const types_cost *t, int of_class, const wall *w);

#endif
