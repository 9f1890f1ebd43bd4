/* Answers as pages: the facts of --json with drawings and charts, in the units of text. Each adds a
 * whole page to `out`. */
#ifndef REPORT_REPORT_HTML_H
#define REPORT_REPORT_HTML_H

#include "report/html.h"

void report_rate_html(const report *r, const assessment *x, text *out);

#endif
