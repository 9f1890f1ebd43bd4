/* Answers of `prices`: what a supplier's list does to a price book, and a book as a list
 * (docs/formats/prices-csv.md). */
#ifndef REPORT_REPORT_PRICES_H
#define REPORT_REPORT_PRICES_H

#include "input/price_update.h"

/* `written`: path of the new book; NULL = nothing was written. */
void report_prices_text(arena *a, const price_update *u, const char *written, text *out);
void report_prices_json(const price_update *u, const char *written, text *out);

/* Every item in the book's own units, in the order of `price_columns`: read again, it changes
 * nothing. */
void report_book_csv(arena *a, const price_book *b, text *out);
/* That a book was listed. `u` without a list (table NULL) holds its age and what has no price;
 * `written`: path of the list, NULL = none. */
void report_book_text(arena *a, const price_update *u, const char *written, text *out);
void report_book_json(const price_update *u, const char *written, text *out);

#endif
