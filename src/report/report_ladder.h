/* Answers of `ladder` in words, JSON and CSV. Every function adds to `out`. Keys and columns:
 * docs/formats/answers.md. `r->brief` holds the target that climbs at its least value. */
#ifndef REPORT_REPORT_LADDER_H
#define REPORT_REPORT_LADDER_H

#include "explain/ladder.h"
#include "report/report.h"

void report_ladder_text(const report *r, const ladder_answer *l, text *out);
void report_ladder_json(const report *r, const ladder_answer *l, text *out);
void report_ladder_csv(const report *r, const ladder_answer *l, text *out);

#endif
