/* Where the money of a wall is, and what a cheaper wall saves of it. */
#ifndef REPORT_CHART_COST_H
#define REPORT_CHART_COST_H

#include "explain/trim.h"
#include "report/chart_bars.h"

/* What the charts show, in words; also their descriptions. */
const char *chart_cost_words(const report *r, const assessment *x);
const char *chart_savings_words(const report *r, const trim_answer *t);
const char *chart_before_after_words(const report *r, const assessment *before,
                                     const assessment *after, const char *after_name);

/* Material and labour by section number, markups last. Nothing to show where the wall cannot be
 * costed. */
void chart_cost(const report *r, const char *id, const assessment *x, text *out);
/* The saving of each proposal, in order. */
void chart_savings(const report *r, const char *id, const trim_answer *t, text *out);
/* Section by section the specified wall and another: `after_name` "wall 1". */
void chart_before_after(const report *r, const char *id, const assessment *before,
                        const assessment *after, const char *after_name, text *out);

#endif
