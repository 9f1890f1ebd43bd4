/* The price book (price-book/1, docs/formats/price-book.md). Money in the book's currency unit as
 * double; amounts on takeoff lines in cents. Quantities in SI whatever unit the file prices in. */
#ifndef INPUT_PRICES_H
#define INPUT_PRICES_H

#include <stdbool.h>

#include "input/catalog.h"

typedef enum price_unit {
  UNIT_M2,
  UNIT_M,
  UNIT_EACH,
  UNIT_COUNT
} price_unit; /* what quantities are counted in, SI inside */
typedef enum trade { TRADE_HANGER, TRADE_TAPER, TRADE_INSULATOR, TRADE_COUNT } trade;

/* From `from` takeoff units in one order on, all of them cost `price`. */
typedef struct price_break {
  double from, price;
} price_break;

typedef struct price_item {
  const char *code, *name; /* code: a catalog id ("typex-16"), a stud or runner item, or a work item
                              ("finish-4") */
  const char *section;     /* "09 29 00" */
  price_unit unit;         /* unit of takeoff */
  const char *bought_as;   /* "sheet 1.22x2.44", "stud", "tube"; NULL = by the unit of takeoff */
  double bought_quantity;  /* takeoff units in one bought unit; 0 = unknown */
  double price;            /* material per takeoff unit, delivered */
  double waste;            /* share added to the net quantity */
  double hours;            /* labour hours per net takeoff unit */
  double hours_each; /* labour hours a piece, for studs, whose pieces are counted; 0 without */
  trade trade;
  double minimum_order; /* takeoff units; 0 = none */
  double lead_weeks;    /* from order to site; 0 = from the yard's shelf */
  const price_break
      *breaks; /* rising `from`; used where a whole project is bought, never in a wall's own cost */
  size_t break_count;
  const char *source, *date; /* the book's where the item has none */
  const char *unit_word;     /* as the file prices it: "ft2" */
  double unit_si;            /* one of that in takeoff units */
  const json_value *json;    /* where it was read last: with a base, perhaps in another file */
} price_item;

/* A thing that takeoffs ask for, by the code that prices it. `item` is CATALOG_NONE where the book
 * has no price. */
typedef struct price_slot {
  const char *code;
  int item;
} price_slot;

/* Items of work and small goods that no catalog names. */
typedef enum work_item {
  WORK_SCREW,
  WORK_SEALANT,
  WORK_HEAD_JOINT,
  WORK_BOX_PAD,
  WORK_FINISH_1,
  WORK_FINISH_2,
  WORK_FINISH_3,
  WORK_FINISH_4,
  WORK_FINISH_5,
  WORK_BACKING_STEEL,
  WORK_BACKING_WOOD,
  WORK_BACKING_FRT,
  WORK_FIREBLOCK_WOOD,
  WORK_FIREBLOCK_BATT,
  WORK_BRIDGING,
  WORK_CROSS_BRACE,
  WORK_COUNT
} work_item;

/* Widths that batts are made in, and none in particular for what is blown. */
typedef enum batt_width { BATT_15IN, BATT_23IN, BATT_16IN, BATT_24IN, BATT_WIDTHS } batt_width;

enum {
  PRICES_MAX_HEIGHTS = 8,
  PRICES_MAX_STOCK = 24,
  PRICES_MAX_WIDTHS = 4,
  PRICES_MAX_ITEMS = 4000,
  PRICES_MAX_BREAKS = 8,
  PRICES_MAX_BASES = 8 /* books below one another */
};

typedef struct stock_lengths {
  double metres[PRICES_MAX_STOCK]; /* rising */
  int count;                       /* 0 = studs are bought to length */
} stock_lengths;

/* Sheets of gypsum board of one width. */
typedef struct sheet_stock {
  double width_m;
  stock_lengths lengths;
} sheet_stock;

typedef struct price_book {
  const json_value *json;        /* the file it was read from */
  const struct price_book *base; /* the book it builds on; NULL = none. All below holds its items
                                    and figures too, place factors applied */
  const char *file, *name, *currency, *place, *date, *source;
  double rate[TRADE_COUNT];          /* per hour */
  double overhead_profit, sales_tax; /* shares */
  double height_step_m[PRICES_MAX_HEIGHTS],
      height_factor[PRICES_MAX_HEIGHTS]; /* labour of walls above a height; rising */
  int height_steps;
  double short_wall_m, short_wall_factor; /* labour of walls shorter than this; 0 m = none */
  double tall_stud_m,
      tall_stud_hours_per_m;            /* hours added to a stud for each metre above a length */
  stock_lengths stock[FRAME_STEEL + 1]; /* lengths studs are sold in, per frame_material */
  sheet_stock sheets[PRICES_MAX_WIDTHS]; /* sheets that gypsum boards are sold in; width rising */
  int sheet_widths;                      /* 0 = boards come to measure */
  price_item *items;
  size_t count;
  /* Items of the catalog's records, in its order. The book serves the catalog it was read with, and
   * no other. */
  price_slot *layers;                  /* per layer */
  price_slot *studs, *runners, *heads; /* per frame; heads: the top runner under a slip head */
  price_slot (*fills)[BATT_WIDTHS];    /* per fill; blown fill has one item in all widths */
  price_slot *rails, *clips;           /* per mount; channels have no clip (code NULL) */
  price_slot work[WORK_COUNT];
} price_book;

/* NULL when the file has an error. A price that nothing uses is a warning. A price that is lacking
 * is neither: walls that need it cannot be costed (checks/cost.h); prices_report_missing lists
 * them. `a` holds all. */
price_book *prices_load(arena *a, diag_list *d, const catalog *c, const char *path);
price_book *prices_read(arena *a, diag_list *d, const catalog *c, const json_value *root);
/* Index or CATALOG_NONE. */
int prices_item(const price_book *b, const char *code);
/* The codes that some catalog record or work asks for, once each, with whether the book prices
 * them.
 */
typedef struct price_codes {
  const char **code;
  bool *priced;
  price_unit *unit; /* that takeoffs count it in */
  size_t count;
} price_codes;
price_codes prices_codes(arena *a, const catalog *c, const price_book *b);
/* A warning for each code that some catalog record or work asks for and the book lacks; how many.
 */
int prices_report_missing(arena *a, diag_list *d, const catalog *c, const price_book *b);
/* "m2", "m", "each" */
extern const char *const price_unit_names[UNIT_COUNT];
/* The words for units that a book may use, "m2" to "each"; NULL at the end. */
extern const char *const price_unit_words[];
/* The takeoff unit of such a word and one of it in that unit; false for another word. */
bool prices_unit(const char *word, price_unit *unit, double *si);
/* "hanger", "taper", "insulator": the keys of labour rates. */
extern const char *const trade_names[TRADE_COUNT];
/* The width class of batts in bays of wood or steel studs at a spacing, and the code that prices
 * it: "glass-89-15in". */
batt_width prices_batt_width(frame_material m, double spacing_m);

#endif
