/* What fire rows and published ratings have in common: is the wall's cavity filled, its mount
 * fixed, as a row asks. */
#ifndef CHECKS_MATCH_H
#define CHECKS_MATCH_H

#include "wall/wall.h"

/* Inch goods against their metric names and rounded records: 88.9 for 89 mm, 15.875 for 15.9 mm. */
#define MATCH_TOLERANCE_M 0.0006
/* A cavity is filled from this share of its depth on (NBC 2020, notes to Table 9.10.3.1.-A). */
#define MATCH_FULL 0.9

enum { MATCH_MAX_ENTRIES = 2 * ROW_MAX_PAIRS };

/* One way in which a row may stand for a core: what each side must then be. */
typedef struct match_entry {
  short row;             /* index in the catalog's rows */
  short value;           /* minutes or rating */
  unsigned char need[2]; /* side A's and side B's, among the needs of the file */
} match_entry;

/* The rows that a core (frame, spacing, gap, fills, mounts) satisfies. One entry for each pair of
 * sides. */
typedef struct match_list {
  int count;
  match_entry entry[MATCH_MAX_ENTRIES];
} match_list;

/* Adds an entry, or replaces the one with the same sides where `better` (new value, old value) says
 * so. */
void match_add(match_list *list, match_entry e, bool (*better)(int value, int old));

/* Whether row `r` (0 or 1) of the frame is filled as `row` asks: kind, depth, mass. */
bool match_filled(const catalog *c, const wall *w, const wall_row *row, int r);
/* How many rows of the frame hold a fill that `row` accepts, and how many hold any. */
int match_filled_rows(const catalog *c, const wall *w, const wall_row *row);
int match_rows_with_fill(const catalog *c, const wall *w);
/* Whether the wall has a channel on `side` and nothing on the other. */
bool match_channel(const catalog *c, const wall *w, int side);
/* The side of the wall's mount, or CATALOG_NONE. */
int match_mounted_side(const wall *w);

#endif
