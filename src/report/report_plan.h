/* Answers of `plan` in words, JSON and CSV (the schedule with what is assigned). Every function
 * adds to `out`. Keys and columns: docs/formats/answers.md. */
#ifndef REPORT_REPORT_PLAN_H
#define REPORT_REPORT_PLAN_H

#include "explain/plan.h"
#include "report/report.h"

/* `r->brief` is what all walls of the project share. */
void report_plan_text(const report *r, const plan_answer *p, text *out);
void report_plan_json(const report *r, const plan_answer *p, text *out);
void report_plan_csv(const report *r, const plan_answer *p, text *out);

#endif
