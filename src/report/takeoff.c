#include "report/takeoff.h"

#include <string.h>

#include "report/view.h"

static const char *section_of(const cost_line *l) {
  return l->section != NULL ? l->section : "";
}

/* Markups have no section and come last; lines of one section keep their order. */
static bool stands_before(const cost_line *one, const cost_line *other) {
  const char *a = section_of(one), *b = section_of(other);
  if (a[0] == '\0' || b[0] == '\0') return a[0] != '\0' && b[0] == '\0';
  return strcmp(a, b) < 0;
}

void takeoff_rows_of(const report *r, const assessment *x, takeoff_rows *out) {
  memset(out, 0, sizeof *out);
  if (x == NULL || r->prices == NULL || x->takeoff.missing) return;
  const takeoff *t = &x->takeoff;
  buy_list_of(r, x, &out->list);
  for (int i = 0; i < t->count; i++) {
    int at = out->count++;
    while (at > 0 && stands_before(&t->line[i], &t->line[out->order[at - 1]])) {
      out->order[at] = out->order[at - 1];
      at--;
    }
    out->order[at] = i;
  }
  for (int i = 0; i < out->count; i++) {
    for (int k = 0; k < out->list.count; k++) {
      if (out->list.line[k].line == out->order[i]) out->buy[i] = &out->list.line[k];
    }
  }
}

/* A quantity of an item in the units of text. */
static view_quantity shown(const report *r, int item, double quantity, double rate) {
  cost_line l = {
      .unit = price_unit_names[r->prices->items[item].unit], .quantity = quantity, .rate = rate};
  return view_quantity_of(r, &l);
}

const char *takeoff_note(const report *r, const buy_line *b) {
  text t;
  text_init(&t, r->arena, 200);
  if (b->least > 0) {
    view_quantity q = shown(r, b->item, b->least, 0);
    text_putf(&t, "minimum order %s %s", text_of(r->arena, q.quantity, 0), q.unit);
  }
  if (b->from > 0) {
    view_quantity q = shown(r, b->item, b->from, 0);
    text_putf(&t, "%sprice from %s %s on", t.len ? "; " : "", text_of(r->arena, q.quantity, 0),
              q.unit);
  }
  return t.data;
}

/* --- sheets ---------------------------------------------------------------------------------- */

typedef struct column {
  const char *head;
  double width;
} column;

static void put_heads(sheet *s, int row, const column *columns, int n) {
  s->head = row;
  s->columns = n;
  for (int i = 0; i < n; i++) {
    s->width[i] = columns[i].width;
    sheet_text(s, row, i, SHEET_HEAD, columns[i].head);
  }
}

static double money(long long cents) {
  return (double)cents / 100;
}

enum {
  TAKEOFF_SECTION,
  TAKEOFF_ITEM,
  TAKEOFF_NAME,
  TAKEOFF_KIND,
  TAKEOFF_QUANTITY,
  TAKEOFF_UNIT,
  TAKEOFF_RATE,
  TAKEOFF_AMOUNT
};

static void takeoff_row(const report *r, const cost_line *l, int row, sheet *s) {
  view_quantity q = view_quantity_of(r, l);
  bool markup = l->kind == LINE_MARKUP;
  sheet_text(s, row, TAKEOFF_SECTION, SHEET_TEXT, section_of(l));
  sheet_text(s, row, TAKEOFF_ITEM, SHEET_TEXT, markup ? "" : view_item(r, l));
  sheet_text(s, row, TAKEOFF_NAME, SHEET_TEXT, l->name);
  sheet_text(s, row, TAKEOFF_KIND, SHEET_TEXT, view_line_kind(l));
  sheet_number(s, row, TAKEOFF_QUANTITY, SHEET_QUANTITY, q.quantity);
  sheet_text(s, row, TAKEOFF_UNIT, SHEET_TEXT, markup ? r->prices->currency : q.unit);
  sheet_number(s, row, TAKEOFF_RATE, markup ? SHEET_SHARE : SHEET_RATE, q.rate);
  sheet_number(s, row, TAKEOFF_AMOUNT, SHEET_MONEY, money(l->cents));
}

static void takeoff_sheet(const report *r, const assessment *x, const takeoff_rows *rows,
                          sheet *s) {
  const column columns[] = {
      {"Section", 10},  {"Item", 20},
      {"Name", 40},     {"Kind", 10},
      {"Quantity", 12}, {"Unit", 8},
      {"Rate", 12},     {text_format(r->arena, "Amount %s", r->prices->currency), 14}};
  put_heads(s, 0, columns, sizeof columns / sizeof columns[0]);
  for (int i = 0; i < rows->count; i++) takeoff_row(r, &x->takeoff.line[rows->order[i]], i + 1, s);
  int last = rows->count + 1;
  sheet_text(s, last, TAKEOFF_NAME, SHEET_LABEL, "Total");
  sheet_formula(s, last, TAKEOFF_AMOUNT, SHEET_TOTAL, text_format(r->arena, "=SUM(H2:H%d)", last),
                money(x->cost.total_cents));
}

static void buy_row(const report *r, const buy_line *b, int row, sheet *s) {
  const price_item *p = &r->prices->items[b->item];
  view_quantity needed = shown(r, b->item, b->needed, 0);
  view_quantity bought = shown(r, b->item, b->bought, b->price);
  sheet_text(s, row, 0, SHEET_TEXT, p->section);
  sheet_text(s, row, 1, SHEET_TEXT, p->code);
  sheet_text(s, row, 2, SHEET_TEXT, p->name);
  sheet_number(s, row, 3, SHEET_QUANTITY, needed.quantity);
  sheet_text(s, row, 4, SHEET_TEXT, needed.unit);
  sheet_number(s, row, 5, SHEET_COUNT, (double)b->count);
  sheet_text(s, row, 6, SHEET_TEXT, b->as);
  sheet_number(s, row, 7, SHEET_QUANTITY, bought.quantity);
  sheet_number(s, row, 8, SHEET_RATE, bought.rate);
  sheet_number(s, row, 9, SHEET_MONEY, money(b->cents));
  sheet_text(s, row, 10, SHEET_TEXT, takeoff_note(r, b));
}

static void buy_sheet(const report *r, const takeoff_rows *rows, sheet *s) {
  const column columns[] = {
      {"Section", 10}, {"Item", 20},
      {"Name", 36},    {"Needed", 11},
      {"Unit", 7},     {"Buy", 8},
      {"As", 22},      {"Bought", 11},
      {"Price", 11},   {text_format(r->arena, "Amount %s", r->prices->currency), 14},
      {"Note", 30}};
  put_heads(s, 0, columns, sizeof columns / sizeof columns[0]);
  int row = 1;
  for (int i = 0; i < rows->count; i++) {
    if (rows->buy[i] != NULL) buy_row(r, rows->buy[i], row++, s);
  }
  sheet_text(s, row, 2, SHEET_LABEL, "Total, before tax and markups");
  sheet_formula(s, row, 9, SHEET_TOTAL, text_format(r->arena, "=SUM(J2:J%d)", row),
                money(rows->list.cents));
}

/* --- summary --------------------------------------------------------------------------------- */

static int put_fact(sheet *s, int row, const char *label, const char *words) {
  sheet_text(s, row, 0, SHEET_LABEL, label);
  sheet_text(s, row, 1, SHEET_WRAP, words);
  return row + 1;
}

static int put_facts(const report *r, const assessment *x, sheet *s, int row) {
  const price_book *b = r->prices;
  text t;
  if (r->asked && r->brief->title[0] != '\0') row = put_fact(s, row, "Brief", r->brief->title);
  row = put_fact(s, row, "Wall", x->line);
  if (x->name != NULL) row = put_fact(s, row, "Name", x->name);
  row = put_fact(s, row, "Sound",
                 text_format(r->arena, "STC %d (%s), predicted %s, standard deviation %s",
                             x->ratings.stc, x->evidence.match ? "published" : "predicted",
                             text_of(r->arena, x->predicted.exact[METRIC_STC], 1),
                             text_of(r->arena, x->predicted.sd[METRIC_STC], 1)));
  text_init(&t, r->arena, 200);
  units_put_height(&t, r->brief->length_m, r->units);
  text_put(&t, " x ");
  units_put_height(&t, cost_built_height_m(r->brief), r->units);
  row = put_fact(s, row, "Size", t.data);
  row = put_fact(s, row, "Prices",
                 text_format(r->arena, "%s; %s; %s; %s", b->name, b->place, b->date, b->source));
  return row + 1;
}

/* A line a section, then the markups, as sums over the takeoff. */
static int put_sections(const report *r, const assessment *x, const takeoff_rows *rows, sheet *s,
                        int row) {
  int last = rows->count + 1, first = row + 1;
  sheet_text(s, row, 0, SHEET_HEAD, "Section");
  sheet_text(s, row++, 1, SHEET_HEAD, text_format(r->arena, "Amount %s", r->prices->currency));
  for (int i = 0; i < rows->count;) {
    const cost_line *l = &x->takeoff.line[rows->order[i]];
    long long cents = 0;
    bool markup = l->kind == LINE_MARKUP;
    for (; i < rows->count; i++) {
      const cost_line *next = &x->takeoff.line[rows->order[i]];
      if (strcmp(section_of(next), section_of(l)) != 0) break;
      cents += next->cents;
    }
    sheet_text(s, row, 0, SHEET_TEXT, markup ? "Tax and markups" : section_of(l));
    const char *sum =
        markup ? text_format(r->arena, "=SUMIF(Takeoff!$D$2:$D$%d,\"markup\",Takeoff!$H$2:$H$%d)",
                             last, last)
               : text_format(r->arena, "=SUMIF(Takeoff!$A$2:$A$%d,A%d,Takeoff!$H$2:$H$%d)", last,
                             row + 1, last);
    sheet_formula(s, row++, 1, SHEET_MONEY, sum, money(cents));
  }
  sheet_text(s, row, 0, SHEET_LABEL, "Total");
  sheet_formula(s, row, 1, SHEET_TOTAL, text_format(r->arena, "=SUM(B%d:B%d)", first + 1, row),
                money(x->cost.total_cents));
  return row + 1;
}

static int put_rates(const report *r, const assessment *x, sheet *s, int total_row, int row) {
  view_cost v = view_cost_of(r, x);
  bool us = r->units == UNITS_US;
  double area = x->cost.area_m2 / (us ? UNITS_M2_PER_FT2 : 1);
  sheet_text(s, row, 0, SHEET_TEXT, us ? "Area, ft2" : "Area, m2");
  sheet_number(s, row, 1, SHEET_QUANTITY, area);
  sheet_text(s, row + 1, 0, SHEET_TEXT, us ? "Cost per ft2" : "Cost per m2");
  sheet_formula(s, row + 1, 1, SHEET_MONEY, text_format(r->arena, "=B%d/B%d", total_row, row + 1),
                us ? v.per_ft2 : v.per_m2);
  sheet_text(s, row + 2, 0, SHEET_TEXT, "Labour hours");
  sheet_number(s, row + 2, 1, SHEET_QUANTITY, x->cost.hours);
  return row + 4;
}

static void summary_sheet(const report *r, const assessment *x, const takeoff_rows *rows,
                          sheet *s) {
  enum { LABEL_WIDTH = 20, WORDS_WIDTH = 90 };
  const char *caution[VIEW_MAX_CAUTIONS];
  s->portrait = true;
  s->columns = 2;
  s->width[0] = LABEL_WIDTH;
  s->width[1] = WORDS_WIDTH;
  sheet_text(s, 0, 0, SHEET_TITLE, "Takeoff of a wall");
  int row = put_facts(r, x, s, 2);
  if (rows->count > 0) {
    row = put_sections(r, x, rows, s, row);
    row = put_rates(r, x, s, row, row);
  } else {
    row = put_fact(s, row, "Cost",
                   text_format(r->arena, "not known: the price book has no price for %s.",
                               x->takeoff.missing_code ? x->takeoff.missing_code : "some item"));
  }
  int count = view_cautions(r, x, caution);
  for (int i = 0; i < count; i++) row = put_fact(s, row, i == 0 ? "Cautions" : "", caution[i]);
}

void takeoff_sheets(const report *r, const assessment *x, sheet out[TAKEOFF_SHEETS]) {
  static const char *const names[TAKEOFF_SHEETS] = {"Summary", "Takeoff", "Buy list"};
  takeoff_rows *rows = arena_alloc(r->arena, sizeof *rows);
  takeoff_rows_of(r, x, rows);
  for (int i = 0; i < TAKEOFF_SHEETS; i++) {
    sheet_init(&out[i], r->arena, names[i]);
    out[i].a4 = r->units == UNITS_SI;
  }
  summary_sheet(r, x, rows, &out[0]);
  takeoff_sheet(r, x, rows, &out[1]);
  buy_sheet(r, rows, &out[2]);
}
