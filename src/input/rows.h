/* Rows: prescriptive fire walls (fire/1), published ratings (published/1) and the user's fire
 * listings (listing/1). A row says which walls it stands for; src/checks decides whether a wall is
 * one of them. Formats: docs/formats/fire.md. */
#ifndef INPUT_ROWS_H
#define INPUT_ROWS_H

#include "input/catalog.h"

/* Reads the records of a file of `kind` "fire", "published" or "listing". Ids of boards stay words
 * until rows_check_ids. *rows has *count entries in file order, in `a`. False when anything was
 * wrong (all faults are reported; *rows then holds what was sound). */
bool rows_read(arena *a, diag_list *d, const json_value *root, const char *kind, wall_row **rows,
               size_t *count);
/* Reads "component_additive" and "scope" of a fire/1 file into the catalog's fields of that rule.
 */
bool rows_read_additive(arena *a, diag_list *d, const json_value *root, catalog *out);
/* Reads "distance" and "cautions" of a published/1 file into the catalog. */
bool rows_read_distance(arena *a, diag_list *d, const json_value *root, catalog *out);
/* Looks up every board that the rows of `c->fire` and `c->published` name, reports those that no
 * catalog has, and sets the distinct sides (fire_needs, published_needs) and `pair`. To be called
 * after boards and rows are read, and again when rows were added. */
bool rows_check_ids(arena *a, diag_list *d, catalog *c);

#endif
