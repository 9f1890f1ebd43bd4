/* What turns one wall into another, part by part, so that each part can be changed alone. */
#ifndef EXPLAIN_STEPS_H
#define EXPLAIN_STEPS_H

#include "wall/wall.h"

/* In the order in which they are taken: what a later part may be depends on the earlier ones. */
typedef enum step_part {
  STEP_FRAME, /* stud, rows, and with them the gap, batts of a row that goes, boards between rows */
  STEP_SPACING,
  STEP_GAP,
  STEP_FILL,
  STEP_MOUNT_A, /* a mount that goes leaves its leaf on the boards that were under it */
  STEP_MOUNT_B,
  STEP_SHEATH_A,
  STEP_SHEATH_B,
  STEP_FACE_A,
  STEP_FACE_B,
  STEP_INNER_A,
  STEP_INNER_B,
  STEP_PARTS
} step_part;

/* The wall's part becomes that of `to`; what the wall's frame has no place for stays away. */
void step_take(const catalog *c, const wall *to, step_part part, wall *w);
/* The parts that differ, in order: taken one after the other they make `to` of `from`. Returns how
 * many. */
int steps_between(const catalog *c, const wall *from, const wall *to, step_part out[STEP_PARTS]);
/* "frame", "side A"... */
const char *step_name(step_part part);
/* The part of a wall in trade words and units: "2 x 5/8 in Type X gypsum board", "24 in on centre",
 * "none". */
const char *step_words(arena *a, const catalog *c, const wall *w, step_part part, bool inches);

#endif
