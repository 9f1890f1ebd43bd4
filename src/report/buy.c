#include "report/buy.h"

#include <math.h>
#include <string.h>

#include "report/view.h"

/* Waste and areas are sums of decimals: 40 sheets are 40, not 41, for a hair of rounding. */
static const double count_slack = 1e-6;

static buy_line *line_of(buy_list *list, int item, int line) {
  for (int i = 0; i < list->count; i++) {
    if (list->line[i].item == item) return &list->line[i];
  }
  buy_line *b = &list->line[list->count++];
  memset(b, 0, sizeof *b);
  b->item = item;
  b->line = line;
  return b;
}

static bool is_stud(const report *r, const assessment *x, int item) {
  return r->prices->studs[x->wall.frame].item == item;
}

/* "9 ft", "92-5/8 in", "2.74 m". */
static void put_length(text *out, double metres, units_system u) {
  double feet = metres / UNITS_M_PER_FT, whole = floor(feet + 0.5);
  if (u == UNITS_US && fabs(feet - whole) < 1e-6) {
    text_fixed(out, whole, 0);
    text_put(out, " ft");
  } else if (u == UNITS_US) {
    units_put_thickness(out, metres, u);
  } else {
    units_put_height(out, metres, u);
  }
}

void buy_package(const report *r, double stud_m, buy_line *b) {
  const price_item *p = &r->prices->items[b->item];
  if (stud_m > 0) {
    text words;
    text_init(&words, r->arena, 100);
    b->package = stud_m;
    b->whole = true;
    text_put(&words, "stud ");
    put_length(&words, b->package, r->units);
    b->as = words.data;
    return;
  }
  b->whole = p->bought_quantity > 0;
  b->package = p->bought_quantity;
  b->as = p->bought_as;
  if (b->whole && b->as != NULL) return;
  cost_line unit = {.unit = price_unit_names[p->unit], .quantity = 1};
  view_quantity shown = view_quantity_of(r, &unit);
  if (!b->whole) b->package = 1 / shown.quantity; /* one printed unit */
  b->as = b->whole ? text_format(r->arena, "package of %s %s",
                                 text_of(r->arena, b->package * shown.quantity, 0), shown.unit)
                   : shown.unit;
}

void buy_count(double wanted, buy_line *b) {
  b->count = (long long)ceil(wanted / b->package - count_slack);
  if (b->count < 0) b->count = 0;
  b->bought = (double)b->count * b->package;
}

static void settle(const report *r, const assessment *x, buy_line *b) {
  const price_item *p = &r->prices->items[b->item];
  double stud_m = is_stud(r, x, b->item)
                      ? cost_stud_length_m(r->prices, r->catalog, r->brief, &x->wall)
                      : 0;
  buy_package(r, stud_m, b);
  double wanted = b->needed;
  if (p->minimum_order > wanted) wanted = b->least = p->minimum_order;
  buy_count(wanted, b);
  b->price = p->price;
  for (size_t i = 0; i < p->break_count; i++) {
    if (b->bought < p->breaks[i].from * (1 - count_slack)) break;
    b->price = p->breaks[i].price;
    b->from = p->breaks[i].from;
  }
  b->cents = cost_cents(b->bought * b->price);
}

void buy_list_of(const report *r, const assessment *x, buy_list *out) {
  out->count = 0;
  out->cents = 0;
  if (r->prices == NULL || x == NULL || x->takeoff.missing) return;
  for (int i = 0; i < x->takeoff.count; i++) {
    const cost_line *l = &x->takeoff.line[i];
    if (l->kind == LINE_MATERIAL) line_of(out, l->item, i)->needed += l->quantity;
  }
  for (int i = 0; i < out->count; i++) {
    settle(r, x, &out->line[i]);
    out->cents += out->line[i].cents;
  }
}
