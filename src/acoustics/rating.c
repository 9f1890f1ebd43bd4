#include "acoustics/rating.h"

#include <math.h>

#define PI    3.14159265358979323846
#define EULER 0.57722 /* Euler's constant as printed with Gomperts' formula */

/* Both fits ask for the highest shift S with sum max(0, S + contour_i - TL_i) <= 32. With x_i =
 * TL_i - contour_i sorted upwards that sum is the largest of k S - (x_1 + ... + x_k) over k, so the
 * highest S is the least of (32 + x_1 + ... + x_k) / k: no search, no step. */

/* ASTM E413 contour relative to 500 Hz, 125 to 4000 Hz. */
const double rating_stc_contour[RATING_FIT_BANDS] = {-16, -13, -10, -7, -4, -1, 0, 1,
                                                     2,   3,   4,   4,  4,  4,  4, 4};
/* ISO 717-1 reference values for airborne sound, 33 to 56 dB at 100 to 3150 Hz, relative to 52 at
 * 500 Hz. */
const double rating_rw_contour[RATING_FIT_BANDS] = {-19, -16, -13, -10, -7, -4, -1, 0,
                                                    1,   2,   3,   4,   4,  4,  4,  4};

/* ISO 717-1 spectra. 100-3150: as tabulated. 50-3150 puts three bands before it (from memory,
 * confirmed by the published values of ISO 12999-1:2020 Annex B). Spectrum 1 has a row of its own
 * up to 5000 Hz. 100-5000 are the last 18 of 50-5000. */
static const double spectrum_1_3150[] = {-40, -36, -33, -29, -26, -23, -21, -19, -17, -15,
                                         -13, -12, -11, -10, -9,  -9,  -9,  -9,  -9};
static const double spectrum_1_5000[] = {-41, -37, -34, -30, -27, -24, -22, -20, -18, -16, -14,
                                         -13, -12, -11, -10, -10, -10, -10, -10, -10, -10};
static const double spectrum_2[] = {-25, -23, -21, -20, -20, -18, -16, -15, -14, -13, -12,
                                    -11, -9,  -8,  -9,  -10, -11, -13, -15, -16, -18};

/* ASTM E1332: the source spectrum L (103 dB at 80 Hz to 84 dB at 4000 Hz) plus the A-weighting, and
 * its own A-weighted total of 100.13 dB (both from memory; the total is reproduced by the sum,
 * 100.128). */
static const double oitc_levels[] = {103 - 22.5, 102 - 19.1, 101 - 16.1, 98 - 13.4, 97 - 10.9,
                                     95 - 8.6,   94 - 6.6,   93 - 4.8,   93 - 3.2,  91 - 1.9,
                                     90 - 0.8,   89,         89 + 0.6,   88 + 1.0,  88 + 1.2,
                                     87 + 1.3,   85 + 1.2,   84 + 1.0};
#define OITC_TOTAL_DB 100.13

static int round_half_up(double x) {
  return (int)floor(x + 0.5);
}

/* 0.1 dB rounding, half up, of a value that may itself be a decimal without exact binary form; in
 * tenths. */
static double tenths_half_up(double db) {
  return floor(10.0 * db + 0.5 + RATING_STEP_SLACK);
}

static int step_below(double x) {
  return (int)floor(x + RATING_STEP_SLACK);
}

double rating_step_down(double db) {
  return floor(10.0 * db + RATING_STEP_SLACK) / 10.0;
}

/* The highest shift whose deficiencies sum to at most `limit`; sorts `x` upwards. */
static double highest_shift(double x[RATING_FIT_BANDS], double limit) {
  for (int i = 1; i < RATING_FIT_BANDS; i++) {
    double moved = x[i];
    int to = i;
    for (; to > 0 && x[to - 1] > moved; to--) x[to] = x[to - 1];
    x[to] = moved;
  }
  double total = limit, least = limit + x[0];
  for (int k = 0; k < RATING_FIT_BANDS; k++) {
    total += x[k];
    least = fmin(least, total / (k + 1));
  }
  return least;
}

/* Shift of the STC contour on curve[0..15] = 125 to 4000 Hz, neither rounded nor stepped. */
static double stc_shift(const double curve[RATING_FIT_BANDS]) {
  double x[RATING_FIT_BANDS];
  for (int i = 0; i < RATING_FIT_BANDS; i++) x[i] = curve[i] - rating_stc_contour[i];
  double by_sum = highest_shift(x, RATING_SUM_LIMIT_DB);
  return fmin(by_sum, x[0] + RATING_STC_LIMIT_DB);
}

int rating_stc(const double tl_db[BANDS], bool rounded) {
  double curve[RATING_FIT_BANDS];
  for (int i = 0; i < RATING_FIT_BANDS; i++) {
    double tl = tl_db[RATING_STC_FIRST + i];
    curve[i] = rounded ? floor(tl + 0.5) : tl;
  }
  return step_below(stc_shift(curve));
}

double rating_stc_exact(const double tl_db[BANDS]) {
  return rating_step_down(stc_shift(tl_db + RATING_STC_FIRST));
}

int rating_rw(const double r_db[BANDS]) {
  double x[RATING_FIT_BANDS]; /* tenths of dB: whole numbers, so the sum is exact */
  for (int i = 0; i < RATING_FIT_BANDS; i++)
    x[i] = tenths_half_up(r_db[RATING_RW_FIRST + i]) - 10.0 * rating_rw_contour[i];
  return step_below(highest_shift(x, 10.0 * RATING_SUM_LIMIT_DB) / 10.0);
}

double rating_rw_exact(const double r_db[BANDS]) {
  double x[RATING_FIT_BANDS];
  for (int i = 0; i < RATING_FIT_BANDS; i++)
    x[i] = r_db[RATING_RW_FIRST + i] - rating_rw_contour[i];
  return rating_step_down(highest_shift(x, RATING_SUM_LIMIT_DB));
}

const double *rating_adapted_levels(int spectrum, rating_range range, int *first, int *count) {
  bool from_50 = range == RANGE_50_3150 || range == RANGE_50_5000;
  bool to_5000 = range == RANGE_50_5000 || range == RANGE_100_5000;
  const double *one = to_5000 ? spectrum_1_5000 : spectrum_1_3150;
  *first = from_50 ? 0 : BAND_100;
  *count = (to_5000 ? BANDS : BAND_3150 + 1) - *first;
  return (spectrum == 1 ? one : spectrum_2) + *first;
}

const double *rating_oitc_levels(int *first, int *count, double *offset_db) {
  *first = BAND_80;
  *count = BAND_4000 + 1 - BAND_80;
  *offset_db = OITC_TOTAL_DB;
  return oitc_levels;
}

static double weighted_level(const double *level, const double *tl_db, int count) {
  double sum = 0.0;
  for (int i = 0; i < count; i++) sum += pow(10.0, (level[i] - tl_db[i]) / 10.0);
  return 10.0 * log10(sum);
}

double rating_adapted(const double r_db[BANDS], int spectrum, rating_range range) {
  int first, count;
  const double *level = rating_adapted_levels(spectrum, range, &first, &count);
  return -weighted_level(level, r_db + first, count);
}

double rating_oitc(const double tl_db[BANDS]) {
  int first, count;
  double offset;
  const double *level = rating_oitc_levels(&first, &count, &offset);
  return offset - weighted_level(level, tl_db + first, count);
}

ratings rating_all(const double tl_db[BANDS]) {
  double tenths[BANDS], whole[BANDS];
  for (int i = 0; i < BANDS; i++) {
    tenths[i] = tenths_half_up(tl_db[i]) / 10.0;
    whole[i] = floor(tl_db[i] + 0.5);
  }
  ratings r;
  r.stc = rating_stc(tl_db, true);
  r.rw = rating_rw(tl_db);
  r.c = round_half_up(rating_adapted(tenths, 1, RANGE_100_3150)) - r.rw;
  r.ctr = round_half_up(rating_adapted(tenths, 2, RANGE_100_3150)) - r.rw;
  r.oitc = round_half_up(rating_oitc(whole));
  return r;
}

int rating_of(const ratings *r, sound_metric metric) {
  switch (metric) {
  case METRIC_STC:
    return r->stc;
  case METRIC_RW:
    return r->rw;
  case METRIC_RW_C:
    return r->rw + r->c;
  case METRIC_RW_CTR:
    return r->rw + r->ctr;
  case METRIC_OITC:
  case METRIC_COUNT:
    break;
  }
  return r->oitc;
}

double rating_exact(const double tl_db[BANDS], sound_metric metric) {
  switch (metric) {
  case METRIC_STC:
    return rating_stc_exact(tl_db);
  case METRIC_RW:
    return rating_rw_exact(tl_db);
  case METRIC_RW_C:
    return rating_step_down(rating_adapted(tl_db, 1, RANGE_100_3150));
  case METRIC_RW_CTR:
    return rating_step_down(rating_adapted(tl_db, 2, RANGE_100_3150));
  case METRIC_OITC:
  case METRIC_COUNT:
    break;
  }
  return rating_step_down(rating_oitc(tl_db));
}

void rating_composite(const double *tl_db, const double *area_m2, int parts, double out_db[BANDS]) {
  double whole = 0.0;
  for (int p = 0; p < parts; p++) whole += area_m2[p];
  for (int i = 0; i < BANDS; i++) {
    double through = 0.0;
    for (int p = 0; p < parts; p++) through += area_m2[p] * pow(10.0, -tl_db[p * BANDS + i] / 10.0);
    out_db[i] = -10.0 * log10(through / whole);
  }
}

/* Gomperts (1964), Gomperts and Kihlman (1967), from memory; diffuse incidence (m = 8). */
double rating_slit_tau(double f_hz, double width_m, double depth_m, double n, double sound_speed) {
  const double diffuse = 8.0;
  double K = 2.0 * PI * f_hz * width_m / sound_speed, X = depth_m / width_m;
  double end = (log(8.0 / K) - EULER) / PI;
  double cos2 = cos(K * end) * cos(K * end);
  double whole = K * (X + 2.0 * end), n2 = n * n;
  double resonance = sin(whole) * sin(whole) / cos2;
  double radiation = K * K / (2.0 * n2 * n2) * (1.0 + cos(whole) * cos(K * X));
  return diffuse * K * cos2 / (2.0 * n2 * (resonance + radiation));
}

void rating_contour_curve(double stc, double out_db[BANDS]) {
  /* Below the contour by the deficiency that all 16 bands may have at once. Outside its range: 3 dB
   * a third-octave downwards as its first bands (and as the reference of ISO 717-1 at 100 Hz),
   * level upwards. */
  const double below = RATING_SUM_LIMIT_DB / RATING_FIT_BANDS, slope = 3.0;
  for (int i = 0; i < BANDS; i++) {
    int at = i - RATING_STC_FIRST;
    double contour = at < 0                   ? rating_stc_contour[0] + slope * at
                     : at >= RATING_FIT_BANDS ? rating_stc_contour[RATING_FIT_BANDS - 1]
                                              : rating_stc_contour[at];
    out_db[i] = stc + contour - below;
  }
}
