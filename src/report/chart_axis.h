/* Scales: from values to places in the picture, round steps, numbers and labels along an axis. */
#ifndef REPORT_CHART_AXIS_H
#define REPORT_CHART_AXIS_H

#include "report/chart.h"

/* Linear: the value `low` lies at `from`, `high` at `to`; from may be above to. high > low. */
typedef struct chart_scale {
  double low, high, from, to;
} chart_scale;

double chart_at(const chart_scale *s, double value);

enum { CHART_MAX_TICKS = 24 };
/* Round values, rising by one step of 1, 2 or 5 times a power of ten. */
typedef struct chart_ticks {
  int count;
  double value[CHART_MAX_TICKS];
  double step;
  int decimals; /* that the labels need, 0..9 */
} chart_ticks;

/* The ticks that cover `low` to `high`, so that the first is at or below `low` and the last at or
 * above `high`; at most `most` (2..CHART_MAX_TICKS) where that can be. `whole`: no step below 1.
 * What is not finite counts as 0. */
void chart_ticks_over(double low, double high, int most, bool whole, chart_ticks *out);

/* "12,500.25": thousands apart, exactly `decimals` digits after the point. */
const char *chart_number(arena *a, double value, int decimals);

/* How amounts are named along an axis: in the currency unit, thousands, millions... of it, so that
 * no number has more than six digits before the point. */
typedef struct chart_money {
  double divisor;
  const char *words; /* "USD", "thousand USD", "million USD per ft2"; cut where the book's currency
                        is long */
} chart_money;
/* `most` is the greatest amount shown, in currency; `per` NULL or "ft2". */
chart_money chart_money_of(const report *r, double most, const char *per);

/* "ft2" or "m2", and what an amount per m2 is per that. */
const char *chart_area_name(const report *r);
double chart_per_area(const report *r, double per_m2);

/* The frame of a chart with two scales: x from left to right, y upwards. */
typedef struct chart_frame {
  chart_scale x, y;
} chart_frame;

/* Horizontal lines at the ticks of y with their numbers to the left of the frame, `title` above
 * them. */
void chart_axis_y(chart *c, const chart_frame *f, const chart_ticks *t, const char *title);
/* Numbers under the frame, as many as there is room for, `title` under them to the right. */
void chart_axis_x(chart *c, const chart_frame *f, const chart_ticks *t, const char *title);
/* Third-octave bands 50 to 5000 Hz under the frame, equally spaced: x of the frame goes by index of
 * band. Every band has its line, the octaves their numbers. */
void chart_axis_bands(chart *c, const chart_frame *f);

/* Places for labels beside the heights `y` (downwards in the picture): at least `pitch` apart,
 * within top..bottom, in the same order, moved as little as can be. `count` values in and out;
 * count x pitch must not be above bottom - top. Equal heights keep their order. */
void chart_spread(double *y, int count, double pitch, double top, double bottom);

#endif
