#include "report/markup.h"
#include "report/view.h"

enum { FIGURE_DIGITS = 6 };

static void put_number(const report *r, text *out, double value) {
  text t;
  text_init(&t, r->arena, 64);
  text_number(&t, value, FIGURE_DIGITS);
  markup_csv_field(out, t.data, false);
}

static void put_line(const report *r, const cost_line *l, text *out) {
  view_quantity q = view_quantity_of(r, l);
  text amount;
  text_init(&amount, r->arena, 64);
  text_cents(&amount, l->cents, false);
  markup_csv_field(out, l->section, true);
  markup_csv_field(out, view_item(r, l), false);
  markup_csv_field(out, l->name, false);
  markup_csv_field(out, view_line_kind(l), false);
  put_number(r, out, q.quantity);
  markup_csv_field(out, q.unit, false);
  put_number(r, out, q.rate);
  markup_csv_field(out, amount.data, false);
  markup_csv_field(out, r->prices->currency, false);
  markup_csv_end(out);
}

void report_takeoff_csv(const report *r, const assessment *x, text *out) {
  static const char *const heads[] = {"section", "item", "name",   "kind",    "quantity",
                                      "unit",    "rate", "amount", "currency"};
  for (size_t i = 0; i < sizeof heads / sizeof heads[0]; i++)
    markup_csv_field(out, heads[i], i == 0);
  markup_csv_end(out);
  if (x == NULL || r->prices == NULL) return;
  for (int i = 0; i < x->takeoff.count; i++) put_line(r, &x->takeoff.line[i], out);
}
