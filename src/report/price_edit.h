/* A price book with the prices of a supplier's list: the same file with the words that change
 * exchanged, so that order, layout and notes of its owner stay. */
#ifndef REPORT_PRICE_EDIT_H
#define REPORT_PRICE_EDIT_H

#include "input/price_update.h"

/* `bytes` are those that `u->book` was read from. Prices of the base are written as items of this
 * book. What changes gets the date and the name and row of the list as its source. Adds to `out`;
 * the bytes themselves when nothing changes. */
void price_edit(arena *a, const price_update *u, const char *bytes, size_t len, text *out);
/* Whether the line changes the book. */
bool price_edit_touches(const update_line *l);

#endif
