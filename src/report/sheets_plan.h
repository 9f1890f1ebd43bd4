/* The sheets of `plan`, in two halves: what is chosen, and what it costs and takes. */
#ifndef REPORT_SHEETS_PLAN_H
#define REPORT_SHEETS_PLAN_H

#include "report/sheets.h"
#include "report/sheets_parts.h"
#include "report/view_plan.h"

/* Columns of the sheet Schedule: a row of it a row of the schedule. */
enum {
  ROW_ID,
  ROW_STOREY,
  ROW_FROM,
  ROW_TO,
  ROW_COUNT,
  ROW_LENGTH,
  ROW_HEIGHT,
  ROW_CLASS,
  ROW_TYPE,
  ROW_MIRRORED,
  ROW_LINE,
  ROW_STC,
  ROW_RESTS_ON,
  ROW_MARGIN,
  ROW_SURE,
  ROW_SURE_FIELD,
  ROW_FIRE,
  ROW_THICKNESS,
  ROW_RUN,
  ROW_AREA,
  ROW_FLOOR_AREA,
  ROW_LIST,
  ROW_WALLS,
  ROW_GOODS,
  ROW_COST,
  ROW_FLOOR,
  ROW_BASIS,
  ROW_NOTE,
  ROW_COLUMNS
};

/* The formula of a sum over the rows of the schedule whose `key` column is as the next row's own first
 * cell has it. */
const char *sheets_plan_sum(const sheet *s, const sheet *rows, int key, int column);
/* A label below a table, and sums of some of its columns in whose cells `value` is held (NaN: no
 * sum). */
void sheets_plan_total(sheet *s, const double *value);

void sheets_plan_buy(const report *r, const plan_answer *p, sheet_book *out);
void sheets_plan_storeys(const report *r, const plan_answer *p, const sheet *rows,
                         sheet_book *out);
void sheets_plan_sections(const report *r, const plan_answer *p, sheet_book *out);
void sheets_plan_curve(const report *r, const plan_answer *p, sheet_book *out);
void sheets_plan_rules(const report *r, const plan_answer *p, sheet_book *out);
void sheets_plan_drawings(const report *r, const plan_answer *p, sheet_book *out);

#endif
