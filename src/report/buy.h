/* What a takeoff means at the yard: whole sheets, studs of a stock length, bags, tubes, with
 * minimum orders and quantity breaks. Beside the cost, never in it: a wall's own cost counts what
 * it uses. */
#ifndef REPORT_BUY_H
#define REPORT_BUY_H

#include "report/report.h"

typedef struct buy_line {
  int item;        /* in the price book */
  int line;        /* the first line of the takeoff that needs it */
  double needed;   /* takeoff units, waste included, of all its lines */
  double least;    /* the minimum order where that is more; 0 = it does not matter */
  bool whole;      /* bought by the package of known content, else by the unit */
  double package;  /* takeoff units in one; 1 where it is bought by the unit */
  long long count; /* packages or, by the unit, whole units of the printed system */
  const char *as;  /* "sheet 4 ft x 10 ft", "stud 9 ft", "ft2" */
  double bought;   /* takeoff units */
  double price;    /* per takeoff unit, at the break that the order reaches */
  double from;     /* takeoff units where that break starts; 0 = no break */
  long long cents;
} buy_line;

typedef struct buy_list {
  buy_line line[COST_MAX_LINES];
  int count;
  long long cents; /* sum of the lines: material, before tax and markups */
} buy_list;

/* One line a material of the takeoff, in its order. Empty when the wall cannot be costed. */
void buy_list_of(const report *r, const assessment *x, buy_list *out);

/* ---- parts, for the list of a whole project ---- */

/* Sets package, whole and as of a line whose item is set. `stud_m` the stock length that studs are
 * cut from; 0 for what is no stud. */
void buy_package(const report *r, double stud_m, buy_line *b);
/* As many whole packages as hold `wanted` units: sets count and bought. */
void buy_count(double wanted, buy_line *b);

#endif
