/* Tables of a spreadsheet before anything writes them: cells with a style, and formulas with the
 * value that this program found for them. All text goes through markup_cell. */
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
  SHEET_TENTHS, /* one decimal */
  SHEET_QUANTITY,
  SHEET_LENGTH, /* three decimals */
  SHEET_RATE,
  SHEET_SHARE, /* per cent */
  SHEET_WHOLE_SHARE,
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

enum { SHEET_MAX_COLUMNS = 40 };

typedef struct sheet_column {
  const char *head; /* with its unit: "Thickness, in" */
  double width;     /* characters */
  sheet_style style;
} sheet_column;

typedef struct sheet {
  arena *arena;
  const char *name; /* at most 31 characters, none of []:*?/\ */
  sheet_cell *cells;
  size_t count, room;
  int head; /* the row that stays in sight and repeats in print; -1 = none */
  int keep; /* columns that stay in sight */
  double width[SHEET_MAX_COLUMNS];
  sheet_style style[SHEET_MAX_COLUMNS];
  int columns;
  int row, column;  /* of the next cell of a table */
  int filter_last;  /* the heads filter the rows down to this one; 0 = they do not */
  bool portrait, a4; /* else landscape, letter */
} sheet;

void sheet_init(sheet *s, arena *a, const char *name);
/* A cell anywhere. NULL: nothing. A number that is not finite: nothing. */
void sheet_text(sheet *s, int row, int column, sheet_style style, const char *words);
void sheet_number(sheet *s, int row, int column, sheet_style style, double value);
void sheet_formula(sheet *s, int row, int column, sheet_style style, const char *formula,
                   double value);

/* A table: its heads in `row`, then the cells of the rows below one after the other, each in the
 * style of its column (figures in a column of text count as whole numbers). */
void sheet_table(sheet *s, int row, const sheet_column *column, int count);
void sheet_put(sheet *s, const char *words);
void sheet_put_figure(sheet *s, double value);
/* An empty cell where it is not there. */
void sheet_put_if(sheet *s, bool there, double value);
void sheet_put_cents(sheet *s, long long cents);
void sheet_put_formula(sheet *s, const char *formula, double value);
void sheet_skip(sheet *s, int columns);
void sheet_end_row(sheet *s);
/* The heads filter (and sort) all rows so far; not for rows whose formulas read other rows. */
void sheet_end_table(sheet *s);

/* "C5", from 0 as everywhere here; "$C$5". */
const char *sheet_at(const sheet *s, int row, int column);
const char *sheet_fixed_at(const sheet *s, int row, int column);
/* "=SUM(C2:C9)" over the rows from `first` to `last` of a column. */
const char *sheet_sum(const sheet *s, int column, int first, int last);
/* "=SUMPRODUCT(...)": the sum of a column of another sheet over the rows below its heads down to
 * `last` whose `key` column is as the cell `wanted` (of `s`) has it. Not SUMIF: that takes words of the
 * user's for patterns and comparisons. */
const char *sheet_sum_where(const sheet *s, const sheet *other, int key, const char *wanted,
                            int column, int last);

/* A workbook. */
enum { SHEETS_MAX = 12 };
typedef struct sheet_book {
  arena *arena;
  bool a4;
  int count;
  sheet sheet[SHEETS_MAX];
} sheet_book;

void sheet_book_init(sheet_book *b, arena *a, bool a4);
/* One more sheet at the end. */
sheet *sheet_book_add(sheet_book *b, const char *name);

#endif
