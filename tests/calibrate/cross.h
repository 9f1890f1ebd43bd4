/* Errors on walls that were kept out of the fit, and what they say of the sd of a prediction. */
#ifndef CALIBRATE_CROSS_H
#define CALIBRATE_CROSS_H

#include "fit.h"

enum { CROSS_FOLDS = 10, CROSS_SEEDS = 3 };

typedef struct error_summary {
  int rows, within_3;
  double bias, rms, largest;
} error_summary;

/* error[i] of every row that is no curve, predicted by a fit without its fold. Folds are drawn from
 * `seed` and stratified by family. `x` is the fit to all rows. */
void cross_folds(const fit *f, const double *x, unsigned seed, double *error);
/* The same, leaving out all walls of one number of the code table at a time. */
void cross_numbers(const fit *f, const double *x, double *error);
/* Of all rows (family FAMILY_COUNT) or of one family's. */
error_summary cross_summary(const dataset *d, const double *error, int family);
/* sd of a family: its errors shrunk to the pooled value, so that few rows do not pretend. */
double cross_sd(const error_summary *family);

#endif
