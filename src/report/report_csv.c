#include "report/markup.h"
#include "report/takeoff.h"
#include "report/view.h"

enum { FIGURE_DIGITS = 6 };

static const char *const heads[] = {"section", "item",         "name",       "kind",     "quantity",
                                    "unit",    "rate",         "amount",     "currency", "buy",
                                    "buy_as",  "buy_quantity", "buy_amount", "buy_note"};

static void put_number(const report *r, text *out, double value) {
  text t;
  text_init(&t, r->arena, 64);
  text_number(&t, value, FIGURE_DIGITS);
  markup_csv_field(out, t.data, false);
}

static void put_cents(const report *r, text *out, long long cents) {
  text t;
  text_init(&t, r->arena, 64);
  text_cents(&t, cents, false);
  markup_csv_field(out, t.data, false);
}

static void put_words(text *out, const char *const *words, int n) {
  for (int i = 0; i < n; i++) markup_csv_field(out, words[i], false);
}

static void put_buy(const report *r, const buy_line *b, text *out) {
  static const char *const nothing[] = {"", "", "", "", ""};
  if (b == NULL) {
    put_words(out, nothing, sizeof nothing / sizeof nothing[0]);
    return;
  }
  cost_line bought = {.unit = price_unit_names[r->prices->items[b->item].unit],
                      .quantity = b->bought};
  put_number(r, out, (double)b->count);
  markup_csv_field(out, b->as, false);
  put_number(r, out, view_quantity_of(r, &bought).quantity);
  put_cents(r, out, b->cents);
  markup_csv_field(out, takeoff_note(r, b), false);
}

static void put_line(const report *r, const cost_line *l, const buy_line *b, text *out) {
  view_quantity q = view_quantity_of(r, l);
  markup_csv_field(out, l->section, true);
  markup_csv_field(out, view_item(r, l), false);
  markup_csv_field(out, l->name, false);
  markup_csv_field(out, view_line_kind(l), false);
  put_number(r, out, q.quantity);
  markup_csv_field(out, q.unit, false);
  put_number(r, out, q.rate);
  put_cents(r, out, l->cents);
  markup_csv_field(out, r->prices->currency, false);
  put_buy(r, b, out);
  markup_csv_end(out);
}

/* Sums of the amounts above it. */
static void put_total(const report *r, const assessment *x, const takeoff_rows *rows, text *out) {
  static const char *const before[] = {"total", "total of the lines", "total", "", "", ""};
  static const char *const between[] = {"", "", ""};
  markup_csv_field(out, "", true);
  put_words(out, before, sizeof before / sizeof before[0]);
  put_cents(r, out, x->cost.total_cents);
  markup_csv_field(out, r->prices->currency, false);
  put_words(out, between, sizeof between / sizeof between[0]);
  put_cents(r, out, rows->list.cents);
  markup_csv_field(out, "material to buy, before tax and markups", false);
  markup_csv_end(out);
}

void report_takeoff_csv(const report *r, const assessment *x, text *out) {
  for (size_t i = 0; i < sizeof heads / sizeof heads[0]; i++)
    markup_csv_field(out, heads[i], i == 0);
  markup_csv_end(out);
  takeoff_rows *rows = arena_alloc(r->arena, sizeof *rows);
  takeoff_rows_of(r, x, rows);
  if (rows->count == 0) return;
  for (int i = 0; i < rows->count; i++)
    put_line(r, &x->takeoff.line[rows->order[i]], rows->buy[i], out);
  put_total(r, x, rows, out);
}
