/* The workbook of `rate`, and the money of one wall as sheets. */
#include <string.h>

#include "report/sheets.h"
#include "report/sheets_parts.h"

/* ---- takeoff ---- */

enum { TAKEOFF_SECTION, TAKEOFF_NAME = 2, TAKEOFF_AMOUNT = 7 };

static sheet *put_takeoff(const report *r, const assessment *x, const takeoff_rows *rows,
                          sheet_book *out) {
  sheet_column columns[SHEETS_TAKEOFF_COLUMNS];
  sheet *s = sheet_book_add(out, "Takeoff");
  sheets_takeoff_columns(r, columns);
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int i = 0; i < rows->count; i++) {
    sheets_takeoff_line(r, &x->takeoff.line[rows->order[i]], s);
    sheet_end_row(s);
  }
  sheet_end_table(s);
  if (rows->count == 0) return s;
  sheet_text(s, s->row, TAKEOFF_NAME, SHEET_LABEL, "Total");
  sheet_formula(s, s->row, TAKEOFF_AMOUNT, SHEET_TOTAL,
                sheet_sum(s, TAKEOFF_AMOUNT, s->head + 1, s->row - 1),
                (double)x->cost.total_cents / 100);
  return s;
}

/* ---- what to buy ---- */

enum { BUY_NAME = 2, BUY_AMOUNT = 9 };

void sheets_buy_columns(const report *r, sheet_column out[SHEETS_BUY_COLUMNS]) {
  const sheet_column columns[SHEETS_BUY_COLUMNS] = {
      {"Section", 10, SHEET_TEXT},
      {"Item", 20, SHEET_TEXT},
      {"Name", 36, SHEET_TEXT},
      {"Needed", 12, SHEET_QUANTITY},
      {"Unit", 7, SHEET_TEXT},
      {"Buy", 9, SHEET_COUNT},
      {"As", 22, SHEET_TEXT},
      {"Bought", 12, SHEET_QUANTITY},
      {"Price", 11, SHEET_RATE},
      {sheets_money_head(r, "Amount"), 14, SHEET_MONEY},
      {"Note", 34, SHEET_WRAP}};
  for (int i = 0; i < SHEETS_BUY_COLUMNS; i++) out[i] = columns[i];
}

/* A quantity of an item in the units of text. */
static view_quantity shown(const report *r, int item, double quantity, double rate) {
  cost_line l = {
      .unit = price_unit_names[r->prices->items[item].unit], .quantity = quantity, .rate = rate};
  return view_quantity_of(r, &l);
}

static void put_buy_line(const report *r, const buy_line *b, sheet *s) {
  const price_item *p = &r->prices->items[b->item];
  view_quantity needed = shown(r, b->item, b->needed, 0);
  view_quantity bought = shown(r, b->item, b->bought, b->price);
  sheet_put(s, p->section);
  sheet_put(s, p->code);
  sheet_put(s, p->name);
  sheet_put_figure(s, needed.quantity);
  sheet_put(s, needed.unit);
  sheet_put_figure(s, (double)b->count);
  sheet_put(s, b->as);
  sheet_put_figure(s, bought.quantity);
  sheet_put_figure(s, bought.rate);
  sheet_put_cents(s, b->cents);
  sheet_put(s, takeoff_note(r, b));
  sheet_end_row(s);
}

static void put_buy(const report *r, const takeoff_rows *rows, sheet_book *out) {
  sheet_column columns[SHEETS_BUY_COLUMNS];
  sheet *s = sheet_book_add(out, "Buy list");
  sheets_buy_columns(r, columns);
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int i = 0; i < rows->count; i++)
    if (rows->buy[i] != NULL) put_buy_line(r, rows->buy[i], s);
  sheet_end_table(s);
  if (s->filter_last == 0) return;
  sheet_text(s, s->row, BUY_NAME, SHEET_LABEL, "Total, before tax and markups");
  sheet_formula(s, s->row, BUY_AMOUNT, SHEET_TOTAL,
                sheet_sum(s, BUY_AMOUNT, s->head + 1, s->row - 1),
                (double)rows->list.cents / 100);
}

/* ---- money by section ---- */

static const char *section_of(const cost_line *l) {
  return l->section ? l->section : "";
}

/* A line a section, then the markups, as sums over the takeoff. Answers the formula of the total. */
static const char *put_sections(const report *r, const assessment *x, const takeoff_rows *rows,
                                const sheet *lines, sheet *s) {
  int last = rows->count + 1;
  sheets_heading(s, text_format(r->arena, "Cost by section, %s", r->prices->currency));
  int first = s->row;
  for (int i = 0; i < rows->count;) {
    const cost_line *l = &x->takeoff.line[rows->order[i]];
    const char *section = section_of(l);
    bool markup = l->kind == LINE_MARKUP;
    long long cents = 0;
    for (; i < rows->count; i++) {
      const cost_line *next = &x->takeoff.line[rows->order[i]];
      if (strcmp(section_of(next), section) != 0) break;
      cents += next->cents;
    }
    const char *sum =
        markup ? text_format(r->arena, "=SUMIF(Takeoff!$D$2:$D$%d,\"markup\",Takeoff!$H$2:$H$%d)",
                             last, last)
               : sheet_sum_where(s, lines, TAKEOFF_SECTION, sheet_at(s, s->row, 0),
                                 TAKEOFF_AMOUNT, rows->count);
    (void)sheets_formula(s, markup ? "Tax and markups" : section, SHEET_MONEY, sum,
                         (double)cents / 100);
  }
  return sheet_sum(s, 1, first, s->row - 1);
}

void sheets_wall_money(const report *r, const assessment *x, const char *area, sheet *summary,
                       sheet_book *out) {
  takeoff_rows *rows = arena_alloc(r->arena, sizeof *rows);
  takeoff_rows_of(r, x, rows);
  const sheet *lines = put_takeoff(r, x, rows, out);
  if (rows->count > 0) {
    const char *total = put_sections(r, x, rows, lines, summary);
    sheets_cost_facts(r, x, total, area, summary);
  } else {
    sheets_heading(summary, "Cost");
    (void)sheets_fact(summary, "Cost",
                      text_format(r->arena, "not known: the price book has no price for %s.",
                                  x->takeoff.missing_code ? x->takeoff.missing_code : "some item"));
  }
  put_buy(r, rows, out);
}

/* ---- rate ---- */

void sheets_rate(const report *r, const assessment *x, sheet_book *out) {
  const char *caution[VIEW_MAX_CAUTIONS];
  sheet_book_init(out, r->arena, r->units == UNITS_SI);
  sheet *s = sheets_summary(
      "A wall rated", "Brief",
      r->asked ? r->brief->title
               : "none was given: cost and height are those of a reference wall",
      out);
  (void)sheets_fact(s, "Wall", x->line);
  (void)sheets_fact(s, "Name", x->name);
  const char *area = sheets_size(r, s);
  sheets_wall_facts(r, x, s);
  sheets_wall_money(r, x, area, s, out);
  sheets_rules(r, x, NULL, 0, NULL, area, out);
  sheets_sound(r, x, out);
  sheets_brief(r, CATALOG_NONE, out);
  sheets_cautions(s, caution, view_cautions(r, x, caution));
  sheets_rests_on_brief(r, s);
}
