/* Parts of text answers that several of them share. */
#ifndef REPORT_REPORT_TEXT_H
#define REPORT_REPORT_TEXT_H

#include "report/report.h"

/* Everything about one wall: what it is, sound, fire, height, rules, cost, takeoff, cautions. */
void report_wall_text(const report *r, const assessment *x, text *out);

#endif
