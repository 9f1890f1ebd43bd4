/* Single-number ratings by their standards. Pure numbers: nothing here knows walls. Method, tables
 * and worked examples: docs/methods/ratings.md. All curves are finite values in dB in the 21 bands
 * of base/bands.h. */
#ifndef ACOUSTICS_RATING_H
#define ACOUSTICS_RATING_H

#include <stdbool.h>

#include "base/bands.h"
#include "input/coefficients.h"

/* The fits look at 16 bands each: STC at 125 to 4000 Hz, Rw at 100 to 3150 Hz. */
enum { RATING_FIT_BANDS = 16, RATING_STC_FIRST = BAND_125, RATING_RW_FIRST = BAND_100 };
/* Most that the deficiencies may sum to (both fits), and most that one may be (STC only), dB. */
#define RATING_SUM_LIMIT_DB 32.0
#define RATING_STC_LIMIT_DB 8.0
/* What a value may lack, in steps, to count as having reached a step: a curve given in tenths that
 * stands exactly on a limit must pass although tenths have no exact binary form. Rounding errors of
 * the fit stay below 1e-11 steps. */
#define RATING_STEP_SLACK 1e-6

/* Contours relative to 500 Hz, and the weights of the summed ratings in dB: tables of the
 * standards, see rating.c. */
extern const double rating_stc_contour[RATING_FIT_BANDS];
extern const double rating_rw_contour[RATING_FIT_BANDS];

/* ASTM E413 from TL in the 21 bands (125 to 4000 Hz are used). `rounded`: TL is rounded to whole dB
 * first, half up. */
int rating_stc(const double tl_db[BANDS], bool rounded);
/* The highest contour, in 0.1 dB steps, that keeps both rules on the unrounded curve. */
double rating_stc_exact(const double tl_db[BANDS]);
/* ISO 717-1 from R in the 21 bands, rounded to 0.1 dB first. */
int rating_rw(const double r_db[BANDS]);
double rating_rw_exact(const double r_db[BANDS]); /* 0.1 dB steps, unrounded curve */
typedef enum rating_range {
  RANGE_100_3150,
  RANGE_50_3150,
  RANGE_50_5000,
  RANGE_100_5000
} rating_range;
/* X_A of spectrum 1 (C) or 2 (Ctr), unrounded; the adaptation term is round-half-up(X_A) - Rw. The
 * curve is taken as it is. */
double rating_adapted(const double r_db[BANDS], int spectrum, rating_range range);
/* ASTM E1332 from 80 to 4000 Hz, unrounded; OITC = round half up. */
double rating_oitc(const double tl_db[BANDS]);
/* Levels of the weighted sums, dB, in *count bands from *first: X_A and OITC are offset - 10 lg sum
 * 10^((level - TL)/10), the offset of X_A being 0. For those who sum transmission factors
 * themselves. */
const double *rating_adapted_levels(int spectrum, rating_range range, int *first, int *count);
const double *rating_oitc_levels(int *first, int *count, double *offset_db);

typedef struct ratings {
  int stc, rw, c, ctr, oitc;
} ratings;
/* Integer ratings as the standards print them: STC and OITC from TL rounded to whole dB (what ASTM
 * E90 reports), Rw, C and Ctr (100 to 3150 Hz) from R rounded to 0.1 dB. */
ratings rating_all(const double tl_db[BANDS]);
/* Integer value of a metric (Rw+C as one number). */
int rating_of(const ratings *r, sound_metric metric);
/* Exact value of a metric on the unrounded curve, in 0.1 dB steps downwards. Rw+C and Rw+Ctr are
 * X_A itself. */
double rating_exact(const double tl_db[BANDS], sound_metric metric);
/* `db` to the step of 0.1 dB at or below it (within RATING_STEP_SLACK). */
double rating_step_down(double db);

/* The TL curve's whole-wall composite: -10 lg sum(S_i 10^(-TL_i/10)) / sum S_i, band by band.
 * `parts` x BANDS values; areas at least 0, their sum above 0. */
void rating_composite(const double *tl_db, const double *area_m2, int parts, double out_db[BANDS]);
/* Gomperts' slit: transmission factor of a slit of `width_m`, `depth_m` at `f`; n 1 mid-wall, 0.5
 * in a corner. May pass 1 at resonance. For widths small against the wavelength. */
double rating_slit_tau(double f_hz, double width_m, double depth_m, double n, double sound_speed);
/* A TL curve of the shape of the STC contour whose STC is `stc`: the stand-in for an opening known
 * by its rating only. */
void rating_contour_curve(double stc, double out_db[BANDS]);

#endif
