/* Takeoff and cost of one wall of the brief's length and height (docs/methods/cost.md).
 * Money rule: each line is quantity (fractional, waste included) x rate, rounded to the cent
 * half-up; the total is the sum of rounded lines; per_m2 = total / area. Lines of the core
 * (framing, fills, mounts, boards that are no room-side leaf, sealant, backing) are summed and
 * rounded apart from those of the leaves (boards, membranes, screws, tape and finish), so cost =
 * core + leaves, exactly, in cents, before markups, and markups depend only on the summed material
 * and labour cents. */
#ifndef CHECKS_COST_H
#define CHECKS_COST_H

#include "input/job.h"
#include "input/prices.h"
#include "wall/wall.h"

typedef enum line_kind { LINE_MATERIAL, LINE_LABOUR, LINE_MARKUP } line_kind;

/* An item may stand on two lines of a kind: once in the core (a board under a mount), once in the
 * leaves. */
typedef struct cost_line {
  int item;         /* in the price book; CATALOG_NONE for markups */
  const char *name; /* item name */
  const char *section;
  line_kind kind;
  double quantity;  /* in `unit`; labour in hours; markups: the base amount in currency */
  const char *unit; /* "m2", "m", "each", "h", "" */
  double rate;      /* per unit, in currency; markups: the share */
  long long cents;
} cost_line;

enum {
  COST_MAX_LINES = 144
}; /* more than the items of a wall with all its faces full and different */
typedef struct takeoff {
  int count;
  cost_line line[COST_MAX_LINES];
  double hours;
  int missing; /* an item without a price: its code below; the wall cannot be costed */
  const char *missing_code;
} takeoff;

typedef struct cost_parts {
  long long material_cents, labour_cents;
  double hours;
  bool missing;
} cost_parts;

typedef struct cost_total {
  long long material_cents, labour_cents, markup_cents, total_cents;
  long long floor_value_cents; /* value of the floor under the thickness: apart from the total */
  double area_m2, hours;
} cost_total;

/* An amount of money to the cent, half-up. */
long long cost_cents(double amount);
/* The height that is built: to the ceiling (plus what stands above it) where the wall stops there,
 * else the brief's. */
double cost_built_height_m(const brief *b);
/* Electrical boxes a side in 10 m of wall: the brief's, else what is usual. */
double cost_boxes_per_10m(const brief *b);
/* The stock length that the studs of a wall are cut from. */
double cost_stud_length_m(const price_book *book, const catalog *c, const brief *b, const wall *w);
/* The full takeoff with markup lines. `book` was read with `c`. */
void cost_takeoff(const price_book *book, const catalog *c, const brief *b, const wall *w,
                  takeoff *out, cost_total *total);
/* The two parts, for the sweep. core: room-side faces ignored. leaves: of the core only its frame's
 * record, spacing and mounts matter, and of these only the spacing of each side's supports. */
cost_parts cost_core(const price_book *book, const catalog *c, const brief *b, const wall *core);
cost_parts cost_leaves(const price_book *book, const catalog *c, const brief *b, const wall *w);
/* What a wall needs of an item, waste included, in takeoff units. */
typedef struct cost_need {
  int item; /* in the price book; the same item may come twice */
  double quantity;
} cost_need;
enum { COST_MAX_NEEDS = 56 }; /* more than the items of a core or of two leaves */
/* As cost_core and cost_leaves, and what their material lines say of quantities, whatever the
 * items' prices: *count of them in `need`. */
cost_parts cost_core_needs(const price_book *book, const catalog *c, const brief *b,
                           const wall *core, cost_need need[COST_MAX_NEEDS], int *count);
cost_parts cost_leaves_needs(const price_book *book, const catalog *c, const brief *b,
                             const wall *w, cost_need need[COST_MAX_NEEDS], int *count);
/* Markups and total from summed parts; the same arithmetic that cost_takeoff uses. */
cost_total cost_sum(const price_book *book, const brief *b, double thickness_m, cost_parts core,
                    cost_parts leaves);

#endif
