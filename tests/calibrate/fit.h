/* Least squares for the coefficients of the sound model: what is fitted, the residuals, the solver.
 */
#ifndef CALIBRATE_FIT_H
#define CALIBRATE_FIT_H

#include "data.h"

enum { FIT_MAX = 24 };

typedef enum fit_scale { SCALE_LINEAR, SCALE_LN, SCALE_LG } fit_scale;

/* One coefficient: its place in struct acoustics and what is known of it beforehand. */
typedef struct parameter {
  const char *id;
  size_t offset;
  fit_scale scale; /* prior_sd is in units of the value, of its ln, of its lg */
  double prior, prior_sd;
  double min, max; /* hard bounds of the value */
} parameter;

typedef struct fit {
  const catalog *catalog;
  const dataset *data;
  struct acoustics start; /* coefficients that are not fitted */
  parameter parameter[FIT_MAX];
  int parameters;
  const bool *use; /* per row: whether it counts; NULL = all */
  double soft_db;  /* width over which the corners of STC are rounded while solving; 0 = none */
  double step;     /* of the central differences, prior sd */
} fit;

/* The parameters as catalogs/acoustics.json states them. */
void fit_read_parameters(fit *f, diag_list *d, arena *a, const json_value *root);

/* Coefficients from the solver's numbers: prior + x prior_sd on the parameter's scale, within
 * bounds. */
void fit_apply(const fit *f, const double *x, struct acoustics *out);
/* STC neither rounded nor stepped. */
double fit_stc(const double tl_db[BANDS]);
/* Octave values of a third-octave curve, 125 to 4000 Hz: energy means of three. */
void fit_octaves(const double tl_db[BANDS], double octave_db[DATA_OCTAVES]);
/* rating - (exact - 0.5) of one row. */
double fit_error(const catalog *c, const struct acoustics *k, const sample *s);
/* Whether row `i` counts. */
bool fit_uses(const fit *f, int i);
/* From the priors and from a second start; `x` gets the better. Returns the cost, half the sum of
 * squares. */
double fit_solve(fit *f, double *x);
/* From `x` on, which lies near: for folds. */
double fit_refine(fit *f, double *x);

#endif
