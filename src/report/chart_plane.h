/* A chart of money over something: scales, frame and axes of the charts whose height is cost. */
#ifndef REPORT_CHART_PLANE_H
#define REPORT_CHART_PLANE_H

#include "report/chart_axis.h"

/* What has to find room. Starts with chart_range_none. */
typedef struct chart_range {
  double low, high;
} chart_range;
extern const chart_range chart_range_none;
/* What is not finite is left out. */
void chart_range_add(chart_range *r, double value);

typedef struct chart_plane {
  chart chart;
  chart_frame frame;
  chart_ticks x, y;
  chart_money money;
} chart_plane;

typedef struct chart_plane_head {
  const char *id, *title, *words;
  const char *x_title;  /* under the scale */
  const char *y_words;  /* "cost": the currency is added */
  const char *per;      /* "ft2", "m2" or NULL */
  chart_range x, money; /* money in currency; ranges without a value show 0 to 1 */
  bool whole;           /* x: whole numbers only */
  const chart_key *key; /* above the chart */
  int keys;
  const char *note; /* under the chart; NULL = none */
  double height;    /* without key and note */
} chart_plane_head;

/* Begins the picture and draws key and axes; the caller draws the rest and calls chart_end. */
void chart_plane_begin(chart_plane *p, const report *r, const chart_plane_head *head, text *out);
double chart_plane_x(const chart_plane *p, double value);
double chart_plane_y(const chart_plane *p, double currency);
/* A line across the frame, up at `x` or level at `money`, with its words at the end; the words stay
 * away where there is no room. */
void chart_plane_upright(chart_plane *p, double x, const char *words);
void chart_plane_level(chart_plane *p, double money, const char *words);

/* A line in steps, in an open path: what holds up to a value costs what the point there does. Starts
 * with the place that the first step comes from. */
typedef struct chart_stair {
  double x, y; /* in the picture */
  bool begun;
} chart_stair;
/* The next step, level to `x` at `y` of the picture. */
void chart_plane_step(chart_plane *p, chart_stair *t, double x, double y);

#endif
