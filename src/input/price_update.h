/* A supplier's list against a price book: which line prices which item, and what would change
 * (docs/formats/prices-csv.md). Nothing is written here. */
#ifndef INPUT_PRICE_UPDATE_H
#define INPUT_PRICE_UPDATE_H

#include "input/csv.h"
#include "input/prices.h"

typedef enum update_kind {
  UPDATE_SAME,      /* the book says so already */
  UPDATE_CONFIRMED, /* the same price at a later date */
  UPDATE_CHANGED,
  UPDATE_NEW,        /* the book gets an item */
  UPDATE_INCOMPLETE, /* the book lacks the item, and the line too little to make one */
  UPDATE_NO_PRICE,   /* matched, but the price is left empty */
  UPDATE_UNMATCHED,
  UPDATE_AMBIGUOUS,
  UPDATE_KINDS
} update_kind;

typedef enum update_match { MATCH_CODE, MATCH_NAME, MATCH_SPOKEN } update_match;

typedef struct update_line {
  const csv_row *row;
  update_kind kind;
  update_match match;
  const char *code;   /* of the price book; NULL when unmatched or ambiguous */
  const char *others; /* ambiguous: the codes it may be; unmatched: the nearest, NULL = none */
  int item;           /* in the book; CATALOG_NONE for new ones */
  const char *said;   /* what the line calls it: its code and description */
  const char *unit;   /* as the line says */
  double holds;       /* units of the item in one listed unit */
  double listed;      /* the line's price, per its unit */
  bool by_bought;     /* `before` and `after` are per bought unit, as the book has it */
  double before, after;
  const char *per;  /* "ft2", "tube 28 oz" */
  const char *date; /* of the line; NULL = it has none */
  bool aged;
  long age_days;        /* of the price that the line brings */
  bool far;             /* the price moves by more than half */
  const char *lacks;    /* incomplete: the columns */
  const char *remark;   /* what a person should know of this line; NULL = nothing */
  price_item completed; /* new: what the book gets; figures in takeoff units */
} update_line;

typedef struct price_update {
  const price_book *book;
  const csv_table *table; /* NULL without a list */
  update_line *line;
  size_t count;
  size_t of_kind[UPDATE_KINDS];
  const char *today; /* what ages count to: given, else the newest date of list and book; NULL =
                        neither has one */
  bool today_given;
  bool aged;
  long age_days;     /* of the book */
  price_codes codes; /* with `priced` as it will be */
} price_update;

/* Reads every line; all faults are reported, with their cells. False after an error. Lines that fit
 * no item or several, or have no price, are no faults: they are left alone. `today` NULL = see
 * above. */
bool price_update_read(arena *a, diag_list *d, const catalog *c, const price_book *b,
                       const csv_table *t, const char *today, price_update *out);

/* The same without a list: age of the book, and what has no price. */
bool price_update_age(arena *a, diag_list *d, const catalog *c, const price_book *b,
                      const char *today, price_update *out);

/* Prices are kept to this many decimals. */
enum { PRICE_DECIMALS = 6 };
/* The columns that a list may have, in the order in which one is written; NULL at the end. */
extern const char *const price_columns[];

#endif
