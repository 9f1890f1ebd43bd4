/* Answers of `trim` in words, JSON and CSV (a value-engineering log). Every function adds to `out`.
 * Keys and columns: docs/formats/answers.md. */
#ifndef REPORT_REPORT_TRIM_H
#define REPORT_REPORT_TRIM_H

#include "explain/trim.h"
#include "report/report.h"

void report_trim_text(const report *r, const trim_answer *t, text *out);
void report_trim_json(const report *r, const trim_answer *t, text *out);
void report_trim_csv(const report *r, const trim_answer *t, text *out);

#endif
