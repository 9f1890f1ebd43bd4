/* Test reports of the user (report/1, docs/formats/report.md): the rating that a laboratory found for
 * one wall. A report stands for that wall and its mirror image, and for nothing else. */
#ifndef WALL_TESTED_H
#define WALL_TESTED_H

#include "base/bands.h"
#include "wall/wall.h"

typedef struct tested_wall {
  wall_row row;          /* row.tested is set; boards are looked up by rows_check_ids */
  bool has_bands;        /* the report gives the curve */
  double tl_db[BANDS];   /* beyond what it gives: the value of the nearest band that it gives */
  const json_value *stc; /* where the rating stands in the file */
} tested_wall;

/* Reads a report/1 file. *out has *count entries in file order, in `a`. False when anything was wrong;
 * all faults are reported. */
bool tested_read(arena *a, diag_list *d, const catalog *c, const json_value *root,
                 tested_wall **out, size_t *count);

#endif
