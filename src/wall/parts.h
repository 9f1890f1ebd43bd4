/* What the wall line and wall/1 share: finding records by the words of a wall, and the limits of
 * its numbers. */
#ifndef WALL_PARTS_H
#define WALL_PARTS_H

#include "input/catalog.h"

enum {
  PART_GAP_DEFAULT_MM = 25, /* plates of a double wall: NBC 2020 Table 9.10.3.1.-A */
  PART_GAP_MIN_MM = 5,
  PART_GAP_MAX_MM = 1000, /* guards against slips, not rules of the trade */
  PART_CLIP_SPACING_MIN_MM = 200
};

typedef struct part_answer {
  error_code code;
  const char *message; /* NULL when found */
} part_answer;

/* The record that `word` names (id or spoken), of `kind`, or of any with CATALOG_KINDS. `expected`
 * says what is wanted. A word that several records of the kind answer to is ambiguous, and the
 * message lists them. */
part_answer part_find(arena *a, const catalog *c, const char *word, catalog_kind kind,
                      const char *expected, catalog_ref *out);
/* The nominal spacing of `list` (mm) that `metres` stands for, in mm or in exact inches; 0 when
 * none. */
int part_spacing(double metres, const int *list, size_t count);
bool part_gap_ok(int mm);
const char *part_gap_expected(arena *a);
bool part_clip_spacing_ok(const mount *m, int mm);
const char *part_clip_spacing_expected(arena *a, const mount *m);

#endif
