/* The transmission loss of a wall by third-octave band, with the rating that is read off it. */
#ifndef REPORT_CHART_SOUND_H
#define REPORT_CHART_SOUND_H

#include "report/chart_axis.h"

typedef struct chart_sound_options {
  /* STC: the contour of ASTM E413. Rw and its sums: the reference of ISO 717-1. OITC has none. */
  sound_metric metric;
  bool paths; /* what passes the cavity and what passes the studs, as thin lines */
} chart_sound_options;

/* The contour of `metric` at the rating `value`, dB in the bands from *first on
 * (RATING_FIT_BANDS values). False: the metric has none. */
bool chart_contour(sound_metric metric, double value, int *first, double out_db[RATING_FIT_BANDS]);

/* How a curve lacks of a contour, rounded as the standard reads it. */
typedef struct chart_lack {
  double sum, most; /* dB */
  int most_band;    /* of bands_hz; the lowest of equals */
} chart_lack;
chart_lack chart_lack_of(sound_metric metric, double value, const double tl_db[BANDS]);

/* What the chart shows, in words; also its description. */
const char *chart_sound_words(const report *r, const assessment *x, const chart_sound_options *o);
void chart_sound(const report *r, const char *id, const assessment *x, const chart_sound_options *o,
                 text *out);

#endif
