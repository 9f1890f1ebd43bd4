/* Bars of money: a row for each thing, its name and its amount above its bar. */
#ifndef REPORT_CHART_BARS_H
#define REPORT_CHART_BARS_H

#include "report/chart.h"

enum { CHART_MAX_PARTS = 4, CHART_MAX_BARS = 40 };

typedef struct chart_bar {
  const char *label;
  long long cents[CHART_MAX_PARTS]; /* below 0 counts as nothing to draw; figures show it */
} chart_bar;

typedef struct chart_bars {
  const char *title, *lead; /* of the picture; what the words begin with: a sentence */
  int parts;                /* 1..CHART_MAX_PARTS; filled, outlined, grey, tinted in this order */
  const char *part_name[CHART_MAX_PARTS];
  bool paired; /* parts one under the other, to be compared, instead of one after the other */
  bool shares; /* each row's share of all rows beside its amount */
  const chart_bar *bar;
  int count; /* of more than CHART_MAX_BARS the last become one row */
} chart_bars;

const char *chart_bars_words(const report *r, const chart_bars *b);
/* With no rows: the title, and words that there is nothing to show. */
void chart_bars_draw(const report *r, const char *id, const chart_bars *b, text *out);

#endif
