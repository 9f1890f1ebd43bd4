/* Units of suppliers' lists (docs/formats/prices-csv.md): "MSF", "sheet 4x8", "bag of 88 sf". */
#ifndef INPUT_PRICE_UNITS_H
#define INPUT_PRICE_UNITS_H

#include "input/prices.h"

/* How many takeoff units of `item` one of what `words` names holds. Packages whose content the
 * words leave out hold what the book says (bought_quantity). False, and *fault says why, when the
 * words are not understood or count something else than the item's takeoff. */
bool price_units_read(arena *a, const char *words, const price_item *item, double *quantity,
                      const char **fault);

#endif
