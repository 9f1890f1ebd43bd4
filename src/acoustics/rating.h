/* Single-number ratings by their standards. Pure numbers: nothing here knows walls. */
#ifndef ACOUSTICS_RATING_H
#define ACOUSTICS_RATING_H

#include <stdbool.h>

#include "base/bands.h"
#include "input/coefficients.h"

/* ASTM E413 from TL in the 21 bands (125 to 4000 Hz are used). `rounded`: TL is rounded to whole dB first, half up. */
int rating_stc(const double tl_db[BANDS], bool rounded);
/* The highest contour, in 0.1 dB steps, that keeps both rules on the unrounded curve. */
double rating_stc_exact(const double tl_db[BANDS]);
/* ISO 717-1 from R in the 21 bands, rounded to 0.1 dB first. */
int rating_rw(const double r_db[BANDS]);
double rating_rw_exact(const double r_db[BANDS]); /* 0.1 dB steps, unrounded curve */
typedef enum rating_range { RANGE_100_3150, RANGE_50_3150, RANGE_50_5000, RANGE_100_5000 } rating_range;
/* X_A of spectrum 1 (C) or 2 (Ctr), unrounded; the adaptation term is round-half-up(X_A) - Rw. */
double rating_adapted(const double r_db[BANDS], int spectrum, rating_range range);
/* ASTM E1332, unrounded; OITC = round half up. */
double rating_oitc(const double tl_db[BANDS]);

typedef struct ratings {
  int stc, rw, c, ctr, oitc;
} ratings;
ratings rating_all(const double tl_db[BANDS]);
/* Integer value of a metric (Rw+C as one number). */
int rating_of(const ratings *r, sound_metric metric);
/* Exact value of a metric on the unrounded curve. */
double rating_exact(const double tl_db[BANDS], sound_metric metric);

/* The TL curve's whole-wall composite: -10 lg sum(S_i 10^(-TL_i/10)) / sum S_i, band by band. `parts` x BANDS values. */
void rating_composite(const double *tl_db, const double *area_m2, int parts, double out_db[BANDS]);
/* Gomperts' slit: transmission factor of a slit of `width_m`, `depth_m` at `f`; n 1 mid-wall, 0.5 in a corner. */
double rating_slit_tau(double f_hz, double width_m, double depth_m, double n, double sound_speed);
/* A TL curve of the shape of the STC contour whose STC is `stc`: the stand-in for an opening known by its rating only. */
void rating_contour_curve(double stc, double out_db[BANDS]);

#endif
