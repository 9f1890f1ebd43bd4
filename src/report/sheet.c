#include "report/sheet.h"

#include <math.h>
#include <string.h>

#include "report/markup.h"

void sheet_init(sheet *s, arena *a, const char *name) {
  memset(s, 0, sizeof *s);
  s->arena = a;
  s->name = name;
  s->head = -1;
}

static void add(sheet *s, sheet_cell cell) {
  if (s->count == s->room) {
    size_t more = s->room ? 2 * s->room : 64;
    s->cells = arena_grow(s->arena, s->cells, s->count * sizeof cell, more * sizeof cell);
    s->room = more;
  }
  s->cells[s->count++] = cell;
}

void sheet_text(sheet *s, int row, int column, sheet_style style, const char *words) {
  if (words == NULL) return;
  add(s, (sheet_cell){row, column, style, markup_cell(s->arena, words), 0, NULL});
}

/* Without the last bits that sums leave behind: 9, not 8.999999999999998. */
static double tidy(double value) {
  const double steps = 1e9, most = 1e6; /* both together stay within the whole numbers of a double */
  return fabs(value) < most ? round(value * steps) / steps : value;
}

void sheet_number(sheet *s, int row, int column, sheet_style style, double value) {
  if (!isfinite(value)) return;
  add(s, (sheet_cell){row, column, style, NULL, tidy(value), NULL});
}

void sheet_formula(sheet *s, int row, int column, sheet_style style, const char *formula,
                   double value) {
  if (!isfinite(value)) return;
  add(s, (sheet_cell){row, column, style, NULL, value, formula});
}

/* ---- tables ---- */

void sheet_table(sheet *s, int row, const sheet_column *column, int count) {
  s->head = row;
  s->columns = count;
  for (int i = 0; i < count; i++) {
    s->width[i] = column[i].width;
    s->style[i] = column[i].style;
    sheet_text(s, row, i, SHEET_HEAD, column[i].head);
  }
  s->row = row + 1;
  s->column = 0;
}

static sheet_style figures_of(const sheet *s) {
  sheet_style style = s->style[s->column];
  return style == SHEET_TEXT || style == SHEET_WRAP ? SHEET_COUNT : style;
}

void sheet_put(sheet *s, const char *words) {
  sheet_style style = s->style[s->column];
  if (style != SHEET_WRAP) style = SHEET_TEXT;
  if (words && words[0] != '\0') sheet_text(s, s->row, s->column, style, words);
  s->column++;
}

void sheet_put_figure(sheet *s, double value) {
  sheet_number(s, s->row, s->column, figures_of(s), value);
  s->column++;
}

void sheet_put_if(sheet *s, bool there, double value) {
  if (there)
    sheet_put_figure(s, value);
  else
    sheet_skip(s, 1);
}

void sheet_put_cents(sheet *s, long long cents) {
  sheet_put_figure(s, (double)cents / 100);
}

void sheet_put_formula(sheet *s, const char *formula, double value) {
  sheet_formula(s, s->row, s->column, figures_of(s), formula, value);
  s->column++;
}

void sheet_skip(sheet *s, int columns) {
  s->column += columns;
}

void sheet_end_row(sheet *s) {
  s->row++;
  s->column = 0;
}

void sheet_end_table(sheet *s) {
  s->filter_last = s->row > s->head + 1 ? s->row - 1 : 0;
}

/* ---- references ---- */

/* "A".."Z", "AA"... */
static const char *letters(const sheet *s, int column) {
  enum { LETTERS = 26 };
  if (column < LETTERS) return text_format(s->arena, "%c", 'A' + column);
  return text_format(s->arena, "%c%c", 'A' + column / LETTERS - 1, 'A' + column % LETTERS);
}

const char *sheet_at(const sheet *s, int row, int column) {
  return text_format(s->arena, "%s%d", letters(s, column), row + 1);
}

const char *sheet_fixed_at(const sheet *s, int row, int column) {
  return text_format(s->arena, "$%s$%d", letters(s, column), row + 1);
}

const char *sheet_sum(const sheet *s, int column, int first, int last) {
  return text_format(s->arena, "=SUM(%s:%s)", sheet_at(s, first, column),
                     sheet_at(s, last, column));
}

const char *sheet_sum_where(const sheet *s, const sheet *other, int key, const char *wanted,
                            int column, int last) {
  const char *name = other->name;
  int first = other->head + 1;
  return text_format(s->arena, "=SUMPRODUCT((%s!%s:%s=%s)*%s!%s:%s)", name,
                     sheet_fixed_at(s, first, key), sheet_fixed_at(s, last, key), wanted, name,
                     sheet_fixed_at(s, first, column), sheet_fixed_at(s, last, column));
}

/* ---- workbooks ---- */

void sheet_book_init(sheet_book *b, arena *a, bool a4) {
  memset(b, 0, sizeof *b);
  b->arena = a;
  b->a4 = a4;
}

sheet *sheet_book_add(sheet_book *b, const char *name) {
  sheet *s = &b->sheet[b->count < SHEETS_MAX ? b->count++ : SHEETS_MAX - 1];
  sheet_init(s, b->arena, name);
  s->a4 = b->a4;
  return s;
}
