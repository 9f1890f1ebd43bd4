/* Money and goods of one wall. */
#include "report/html_wall.h"

#include <string.h>

#include "report/chart_cost.h"
#include "report/takeoff.h"
#include "report/view.h"

const char *html_cost_words(html *h, const assessment *x) {
  if (view_cost_of(h->report, x).costed) return "";
  return text_format(h->report->arena, "the price book has no price for %s",
                     x->takeoff.missing_code ? x->takeoff.missing_code : "some item");
}

/* --- by section ------------------------------------------------------------------------------ */

typedef struct section_sum {
  const char *section; /* "": tax and markups */
  long long cents[LINE_MARKUP + 1];
} section_sum;

static int sum_sections(const assessment *x, const takeoff_rows *rows, section_sum *sum) {
  int count = 0;
  for (int i = 0; i < rows->count; i++) {
    const cost_line *l = &x->takeoff.line[rows->order[i]];
    const char *section = l->section ? l->section : "";
    if (count == 0 || strcmp(section, sum[count - 1].section) != 0)
      sum[count++] = (section_sum){.section = section};
    sum[count - 1].cents[l->kind] += l->cents;
  }
  return count;
}

static const char *cents_if(html *h, long long cents) {
  return cents ? view_cents(h->report, cents) : NULL;
}

void html_cost_by_section(html *h, const assessment *x) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Section", HTML_ID},
      {"Material", HTML_FIGURE},
      {"Labour", HTML_FIGURE},
      {text_format(r->arena, "Together, %s", r->prices->currency), HTML_FIGURE}};
  takeoff_rows *rows = arena_alloc(r->arena, sizeof *rows);
  section_sum *sum = arena_array(r->arena, COST_MAX_LINES, sizeof *sum);
  takeoff_rows_of(r, x, rows);
  int count = sum_sections(x, rows, sum);
  html_table(h, "Cost by section of the specification", columns, HTML_COUNT(columns));
  for (int i = 0; i < count; i++) {
    const long long *c = sum[i].cents;
    html_row(h, HTML_CELLS(sum[i].section[0] ? sum[i].section : "tax, overhead and profit",
                           cents_if(h, c[LINE_MATERIAL]), cents_if(h, c[LINE_LABOUR]),
                           view_cents(r, c[LINE_MATERIAL] + c[LINE_LABOUR] + c[LINE_MARKUP])));
  }
  html_row_as(h, "total",
              HTML_CELLS("total", view_cents(r, x->cost.material_cents),
                         view_cents(r, x->cost.labour_cents), view_cents(r, x->cost.total_cents)));
  html_table_end(h);
}

/* --- what it comes to ------------------------------------------------------------------------ */

static void put_rates(html *h, const assessment *x) {
  const report *r = h->report;
  view_cost v = view_cost_of(r, x);
  bool us = r->units == UNITS_US;
  html_facts(h);
  html_fact(h, "Per area of wall",
            text_format(r->arena, "%s; %s", view_money(r, us ? v.per_ft2 : v.per_m2, view_area(r)),
                        view_money(r, us ? v.per_m2 : v.per_ft2, us ? "m2" : "ft2")));
  html_fact(h, "Per length of wall",
            text_format(r->arena, "%s; %s", view_money(r, us ? v.per_ft : v.per_m, us ? "ft" : "m"),
                        view_money(r, us ? v.per_m : v.per_ft, us ? "m" : "ft")));
  html_fact(h, r->asked ? "The wall" : "The reference wall",
            text_format(r->arena, "%s for %s, %s %s",
                        view_money(r, (double)x->cost.total_cents / 100, NULL), html_size_words(h),
                        text_of(r->arena, x->cost.area_m2 / (us ? UNITS_M2_PER_FT2 : 1), 1),
                        view_area(r)));
  html_fact(h, "Of this tax, overhead and profit",
            view_money(r, (double)x->cost.markup_cents / 100, NULL));
  if (x->cost.floor_value_cents > 0)
    html_fact(h, "Value of the floor under it",
              text_format(r->arena, "%s, apart from the cost",
                          view_money(r, (double)x->cost.floor_value_cents / 100, NULL)));
  html_fact(h, "Labour",
            text_format(r->arena, "%s hours per %s",
                        text_of(r->arena, us ? v.hours_per_ft2 : v.hours_per_m2, us ? 3 : 2),
                        view_area(r)));
  html_fact(h, "Dead load",
            us ? text_format(r->arena, "%s lb per ft of wall",
                             text_of(r->arena, v.load_kg_m * UNITS_M_PER_FT / UNITS_KG_PER_LB, 0))
               : text_format(r->arena, "%s kg per m of wall", text_of(r->arena, v.load_kg_m, 0)));
  html_facts_end(h);
}

void html_cost_parts(html *h, const assessment *x) {
  if (!view_cost_of(h->report, x).costed) {
    html_note(h, "care", text_format(h->report->arena, "Not known: %s.", html_cost_words(h, x)));
  } else {
    put_rates(h, x);
    const char *id = html_picture_id(h);
    chart_cost(h->report, id, x, html_picture(h, HTML_CHART));
    html_picture_end(h, NULL);
    html_cost_by_section(h, x);
  }
}

void html_wall_cost(html *h, const assessment *x) {
  html_section(h, "Cost");
  html_cost_parts(h, x);
  html_section_end(h);
}

/* --- takeoff --------------------------------------------------------------------------------- */

static const char *rate_words(const report *r, const view_quantity *q) {
  bool markup = q->unit[0] == '\0';
  if (!markup) return text_of(r->arena, q->rate, 3);
  return text_format(r->arena, "%s %%", text_of(r->arena, 100 * q->rate, 2));
}

void html_takeoff_table(html *h, const char *caption, const assessment *x) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Section", HTML_CODE},
      {"Item", HTML_ID},
      {"Name", HTML_DATA},
      {"Kind", HTML_CODE},
      {"Quantity", HTML_FIGURE},
      {"Unit", HTML_CODE},
      {"Rate", HTML_FIGURE},
      {text_format(r->arena, "Amount, %s", r->prices->currency), HTML_FIGURE}};
  takeoff_rows *rows = arena_alloc(r->arena, sizeof *rows);
  takeoff_rows_of(r, x, rows);
  html_table(h, caption, columns, HTML_COUNT(columns));
  for (int i = 0; i < rows->count; i++) {
    const cost_line *l = &x->takeoff.line[rows->order[i]];
    view_quantity q = view_quantity_of(r, l);
    bool markup = l->kind == LINE_MARKUP;
    html_row(h, HTML_CELLS(l->section, markup ? NULL : view_item(r, l), l->name, view_line_kind(l),
                           text_of(r->arena, q.quantity, 2), markup ? r->prices->currency : q.unit,
                           rate_words(r, &q), view_cents(r, l->cents)));
  }
  html_row_as(
      h, "total",
      HTML_CELLS(NULL, "total", NULL, NULL, NULL, NULL, NULL, view_cents(r, x->cost.total_cents)));
  html_table_end(h);
}

static void put_buy_list(html *h, const assessment *x) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Item", HTML_ID},
      {"Name", HTML_DATA},
      {"Needed", HTML_FIGURE},
      {"Unit", HTML_CODE},
      {"Buy", HTML_FIGURE},
      {"As", HTML_DATA},
      {"Price", HTML_FIGURE},
      {text_format(r->arena, "Amount, %s", r->prices->currency), HTML_FIGURE},
      {"Note", HTML_WORDS}};
  buy_list *list = arena_alloc(r->arena, sizeof *list);
  buy_list_of(r, x, list);
  html_table(h, "What to buy: whole packages, material alone, before tax and markups", columns,
             HTML_COUNT(columns));
  for (int i = 0; i < list->count; i++) {
    const buy_line *b = &list->line[i];
    const price_item *p = &r->prices->items[b->item];
    cost_line l = {.unit = price_unit_names[p->unit], .quantity = b->needed, .rate = b->price};
    view_quantity q = view_quantity_of(r, &l);
    html_row(h,
             HTML_CELLS(p->code, p->name, text_of(r->arena, q.quantity, 2), q.unit,
                        text_format(r->arena, "%lld", b->count), b->as,
                        text_of(r->arena, q.rate, 3), view_cents(r, b->cents), takeoff_note(r, b)));
  }
  html_row_as(
      h, "total",
      HTML_CELLS("total", NULL, NULL, NULL, NULL, NULL, NULL, view_cents(r, list->cents), NULL));
  html_table_end(h);
}

void html_wall_takeoff(html *h, const assessment *x) {
  if (!view_cost_of(h->report, x).costed) return;
  html_section(h, "Takeoff");
  html_takeoff_table(h, "What the wall uses, waste included", x);
  put_buy_list(h, x);
  html_section_end(h);
}
