/* Tables of a spreadsheet before anything writes them: cells with a style, and formulas with the
 * value that this program found for them. */
#ifndef REPORT_SHEET_H
#define REPORT_SHEET_H

#include <stdbool.h>

#include "base/diag.h"

typedef enum sheet_style {
  SHEET_TEXT,
  SHEET_WRAP, /* long text in one cell */
  SHEET_TITLE,
  SHEET_LABEL, /* bold */
  SHEET_HEAD,  /* head of a column: bold on grey */
  SHEET_COUNT,
  SHEET_QUANTITY,
  SHEET_RATE,
  SHEET_SHARE, /* per cent */
  SHEET_MONEY,
  SHEET_TOTAL, /* money, bold with a line above */
  SHEET_STYLES
} sheet_style;

typedef struct sheet_cell {
  int row, column; /* from 0 */
  sheet_style style;
  const char *text;    /* NULL: a number */
  double number;       /* with a formula: its value */
  const char *formula; /* "=SUM(A1:A3)"; NULL without */
} sheet_cell;

enum { SHEET_MAX_COLUMNS = 16 };

typedef struct sheet {
  arena *arena;
  const char *name;
  sheet_cell *cells;
  size_t count, room;
  int head;                        /* the row that stays in sight and repeats in print; -1 = none */
  double width[SHEET_MAX_COLUMNS]; /* characters */
  int columns;
  bool portrait, a4; /* else landscape, letter */
} sheet;

void sheet_init(sheet *s, arena *a, const char *name);
void sheet_text(sheet *s, int row, int column, sheet_style style, const char *words);
void sheet_number(sheet *s, int row, int column, sheet_style style, double value);
void sheet_formula(sheet *s, int row, int column, sheet_style style, const char *formula,
                   double value);

#endif
