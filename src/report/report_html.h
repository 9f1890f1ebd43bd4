/* Answers as pages: the facts of --json with drawings and charts, in the units of text. Each adds a
 * whole page to `out`. */
#ifndef REPORT_REPORT_HTML_H
#define REPORT_REPORT_HTML_H

#include "explain/cloud.h"
#include "explain/plan.h"
#include "explain/trim.h"
#include "report/html.h"
#include "report/report_ladder.h"

void report_rate_html(const report *r, const assessment *x, text *out);
/* `c` NULL: without the chart of candidates. */
void report_pick_html(const report *r, const explanation *e, const pick_choice *proof,
                      const cloud *c, text *out);
void report_ladder_html(const report *r, const ladder_answer *l, text *out);
void report_trim_html(const report *r, const trim_answer *t, text *out);
/* `r->brief` is what all walls of the project share. */
void report_plan_html(const report *r, const plan_answer *p, text *out);

#endif
