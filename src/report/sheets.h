/* Answers as workbooks: the facts of --json in the units of text, figures as numbers, totals as
 * formulas that hold their values. docs/formats/answers.md names the sheets. */
#ifndef REPORT_SHEETS_H
#define REPORT_SHEETS_H

#include "explain/plan.h"
#include "explain/trim.h"
#include "report/report_ladder.h"
#include "report/sheet.h"

void sheets_rate(const report *r, const assessment *x, sheet_book *out);
void sheets_pick(const report *r, const explanation *e, const pick_choice *proof, sheet_book *out);
void sheets_ladder(const report *r, const ladder_answer *l, sheet_book *out);
void sheets_trim(const report *r, const trim_answer *t, sheet_book *out);
/* `r->brief` is what all walls of the project share. */
void sheets_plan(const report *r, const plan_answer *p, sheet_book *out);

#endif
