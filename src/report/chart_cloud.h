/* The walls that keep a brief, as points of sound and cost, with the chosen one among them. */
#ifndef REPORT_CHART_CLOUD_H
#define REPORT_CHART_CLOUD_H

#include "explain/cloud.h"
#include "report/chart_axis.h"

const char *chart_cloud_words(const report *r, const explanation *e, const cloud *c);
void chart_cloud(const report *r, const char *id, const explanation *e, const cloud *c, text *out);

#endif
