/* What the calibration leaves behind: catalogs/acoustics.json and the plot. Same input, same bytes.
 */
#ifndef CALIBRATE_WRITE_H
#define CALIBRATE_WRITE_H

#include "base/text.h"
#include "cross.h"

/* All that was found. Errors are rating - (exact - 0.5), by row. */
typedef struct outcome {
  struct acoustics fitted;
  double trained[DATA_MAX_ROWS], folds[DATA_MAX_ROWS], numbers[DATA_MAX_ROWS];
  double seed_rms[CROSS_SEEDS];      /* of folds drawn from seed 1, which is `folds`, 2, 3 */
  double shape_mae_db, shape_125_db; /* of the octave curves; mean difference at 125 Hz */
} outcome;

enum { WRITE_DIGITS = 5 };
/* A coefficient to WRITE_DIGITS digits, as it is written; what the program then reads. */
double write_rounded(arena *a, double value);
/* The whole of acoustics.json; words, priors and bounds are those of `old`. */
void write_acoustics(text *out, const json_value *old, const fit *f, const outcome *o);
/* Predicted against published, as SVG. */
void plot_fit(text *out, const fit *f, const outcome *o);

#endif
