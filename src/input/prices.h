/* The price book (price-book/1). Money in the book's currency unit as double; amounts on takeoff lines in cents. */
#ifndef INPUT_PRICES_H
#define INPUT_PRICES_H

#include <stdbool.h>

#include "input/catalog.h"

typedef enum price_unit { UNIT_M2, UNIT_M, UNIT_EACH } price_unit; /* what quantities are counted in, SI inside */
typedef enum trade { TRADE_HANGER, TRADE_TAPER, TRADE_INSULATOR, TRADE_COUNT } trade;

typedef struct price_item {
  const char *code, *name;    /* code: a catalog id ("typex-16"), a stud or runner item, or a work item ("finish-4") */
  const char *section;        /* "09 29 00" */
  price_unit unit;            /* unit of takeoff */
  const char *bought_as;      /* "sheet 1.22x2.44", "stud", "tube" */
  double bought_quantity;     /* takeoff units in one bought unit; 0 = unknown */
  double price;               /* material per takeoff unit, delivered */
  double waste;               /* share added to the net quantity */
  double hours;               /* labour hours per net takeoff unit */
  trade trade;
  double minimum_order;
  const char *source;
} price_item;

typedef struct price_book {
  const char *file, *name, *currency, *place, *date, *source;
  double rate[TRADE_COUNT];   /* per hour */
  double overhead_profit, sales_tax; /* shares */
  double height_step_m[4], height_factor[4]; int height_steps; /* labour above a height */
  price_item *items; size_t count;
} price_book;

price_book *prices_load(arena *a, diag_list *d, const catalog *c, const char *path);
price_book *prices_read(arena *a, diag_list *d, const catalog *c, const json_value *root);
/* Index or CATALOG_NONE. */
int prices_item(const price_book *b, const char *code);

#endif
