/* What each rating costs, as steps. */
#ifndef REPORT_CHART_LADDER_H
#define REPORT_CHART_LADDER_H

#include "report/chart_axis.h"
#include "report/report_ladder.h"

const char *chart_ladder_words(const report *r, const ladder_answer *l);
void chart_ladder(const report *r, const char *id, const ladder_answer *l, text *out);

#endif
