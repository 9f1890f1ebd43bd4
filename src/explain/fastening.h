/* Heavy fixtures over a stretch of a side: the ways to build it, side by side. The rule stays that
 * such a side takes no mount; what is shown beside it is for whoever decides otherwise. */
#ifndef EXPLAIN_FASTENING_H
#define EXPLAIN_FASTENING_H

#include "search/judge.h"

typedef enum fastening_way {
  FASTENING_NO_MOUNT, /* no mount on the whole side */
  FASTENING_GAP,      /* a mount on that side, left out over the stretch */
  FASTENING_APART,    /* staggered or double framing without any mount */
  FASTENING_WAYS
} fastening_way;

typedef struct fastening_option {
  const assessment *wall;    /* NULL: no wall of this kind */
  const assessment *stretch; /* FASTENING_GAP: what stands over the stretch; else NULL */
  ratings ratings;           /* of the whole side; where `stretch` is, by area, band by band */
  double exact_stc;
  bool costed;           /* false: an item has no price */
  long long total_cents; /* FASTENING_GAP: both by their lengths */
  bool reaches;          /* the targets of the brief */
} fastening_option;

typedef struct fastening_choice {
  int side;
  double stretch_m;
  fastening_option way[FASTENING_WAYS];
} fastening_choice;

/* Fills up to two and returns how many: one for each side with heavy fastening over a part of the
 * wall's length. `given`: the wall that the answer is about; NULL without. It is taken for the way it
 * is built in, else the cheapest wall that keeps all rules (FASTENING_GAP: all but that of the
 * fastening). Without prices none. */
int fastening_choices(arena *a, const judge_context *x, const assessment *given,
                      fastening_choice out[2]);
/* Transmission loss of two curves side by side. Lengths above 0. */
void fastening_side_by_side(const double tl_db[BANDS], double length_m, const double other_db[BANDS],
                            double other_length_m, double out_db[BANDS]);

#endif
