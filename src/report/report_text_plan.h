/* The two halves of plan's text: what is chosen and why; what it costs and takes. */
#ifndef REPORT_REPORT_TEXT_PLAN_H
#define REPORT_REPORT_TEXT_PLAN_H

#include "report/report_plan.h"

/* An amount with its thousands, without the currency. */
const char *report_plan_cents(const report *r, long long cents);
/* A length of run in whole feet, or metres. */
const char *report_plan_run(const report *r, double metres);
/* Storeys, sections, what to order. Nothing without a plan. */
void report_plan_quantities_text(const report *r, const plan_answer *p, text *out);
/* The drawings' types beside the plan; nothing where the project names none. */
void report_plan_drawings_text(const report *r, const plan_answer *p, text *out);

#endif
