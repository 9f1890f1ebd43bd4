/* What a page says about other walls: those next to the answer, those that fail, what rules cost.
 */
#include "report/html_wall.h"

#include "report/view.h"

static const char *per_area_head(html *h) {
  return text_format(h->report->arena, "%s per %s",
                     h->report->prices ? h->report->prices->currency : "", view_area(h->report));
}

static const char *per_area(html *h, double per_m2) {
  return view_cents(h->report, view_in_cents(view_per_area(h->report, per_m2)));
}

/* --- other walls ----------------------------------------------------------------------------- */

static const char *fails_words(html *h, const assessment *x) {
  const report *r = h->report;
  text t;
  text_init(&t, r->arena, 16 << 10);
  for (int i = 0; i < x->broken_count; i++) {
    const broken_rule *b = &x->broke[i];
    text_putf(&t, "%s%s: asks %s; has %s", i ? ". " : "", rule_name(r->arena, r->brief, b->rule),
              b->limit, view_clause(r, b->found));
  }
  return t.data;
}

void html_others(html *h, const char *caption, assessment *const *x, int count, bool fails) {
  const report *r = h->report;
  bool floor = r->brief->floor_area_value_per_m2 > 0;
  const html_column columns[] = {{"Wall", HTML_LINE},
                                 {per_area_head(h), HTML_FIGURE},
                                 {"STC", HTML_FIGURE},
                                 {"Rw (C, Ctr)", HTML_FIGURE},
                                 {"OITC", HTML_FIGURE},
                                 {"Rests on", HTML_CODE},
                                 {"Thickness", HTML_FIGURE},
                                 {"Mass", HTML_FIGURE},
                                 {fails   ? "What it fails"
                                  : floor ? "Floor under it"
                                          : "",
                                  HTML_WORDS}};
  if (count == 0) return;
  html_table(h, caption, columns, HTML_COUNT(columns) - !(fails || floor));
  for (int i = 0; i < count; i++) {
    const ratings *v = &x[i]->ratings;
    view_cost cost = view_cost_of(r, x[i]);
    const char *last = fails   ? fails_words(h, x[i])
                       : floor ? view_money(r, view_per_area(r, cost.floor_per_m2), view_area(r))
                               : NULL;
    html_row(h, HTML_CELLS(x[i]->line, cost.costed ? per_area(h, cost.per_m2) : "not known",
                           text_format(r->arena, "%d", v->stc),
                           text_format(r->arena, "%d (%d, %d)", v->rw, v->c, v->ctr),
                           text_format(r->arena, "%d", v->oitc),
                           view_published(x[i], METRIC_STC) ? "published" : "predicted",
                           html_thickness(h, x[i]->thickness_m), html_mass(h, x[i]->mass_kg_m2),
                           last));
  }
  html_table_end(h);
}

/* --- what rules cost ------------------------------------------------------------------------- */

void html_rule_prices(html *h, const char *caption, const explain_rule_price *price, int count,
                      const char *base) {
  const report *r = h->report;
  const html_column columns[] = {{"Rule", HTML_HEAD},          {"Asked", HTML_WORDS},
                                 {"In its place", HTML_WORDS}, {per_area_head(h), HTML_FIGURE},
                                 {"The wall", HTML_FIGURE},    {"Then the cheapest is", HTML_LINE}};
  if (count == 0) return;
  html_table(h, caption, columns, HTML_COUNT(columns));
  for (int i = 0; i < count; i++) {
    const explain_rule_price *p = &price[i];
    const char *then = !p->wall                                  ? "no wall"
                       : base && text_equal(p->wall->line, base) ? "the same wall"
                                                                 : p->wall->line;
    html_row(h,
             HTML_CELLS(p->name, p->from, p->to, p->reachable ? per_area(h, p->price_per_m2) : NULL,
                        p->reachable ? view_cents(r, view_in_cents(p->price_total)) : NULL, then));
  }
  html_table_end(h);
}

/* --- break-even ------------------------------------------------------------------------------ */

/* Small prices keep a third digit. */
static const char *price_words(const report *r, const explain_break_even *b, double price) {
  cost_line l = {.unit = b->unit, .rate = price};
  double rate = view_quantity_of(r, &l).rate;
  return text_of(r->arena, rate, rate < 1 ? 3 : 2);
}

void html_break_even(html *h, const explain_break_even *b, int count) {
  const report *r = h->report;
  static const html_column columns[] = {{"Item", HTML_HEAD},      {"Unit", HTML_CODE},
                                        {"Price", HTML_FIGURE},   {"Below", HTML_FIGURE},
                                        {"this wall", HTML_LINE}, {"Above", HTML_FIGURE},
                                        {"this wall", HTML_LINE}};
  text idle;
  int limited = 0;
  text_init(&idle, r->arena, 8000);
  for (int i = 0; i < count; i++) {
    if (b[i].has_low || b[i].has_high) {
      limited++;
      continue;
    }
    cost_line l = {.unit = b[i].unit};
    text_putf(&idle, "%s%s (%s per %s)", idle.len ? ", " : "", b[i].item,
              price_words(r, &b[i], b[i].price), view_quantity_of(r, &l).unit);
  }
  if (limited > 0) {
    html_table(h, "Prices at which another wall becomes the cheaper one", columns,
               HTML_COUNT(columns));
    for (int i = 0; i < count; i++) {
      if (!b[i].has_low && !b[i].has_high) continue;
      cost_line l = {.unit = b[i].unit};
      html_row(h, HTML_CELLS(b[i].item, view_quantity_of(r, &l).unit,
                             price_words(r, &b[i], b[i].price),
                             b[i].has_low ? price_words(r, &b[i], b[i].low) : NULL,
                             b[i].has_low ? b[i].low_line : NULL,
                             b[i].has_high ? price_words(r, &b[i], b[i].high) : NULL,
                             b[i].has_high ? b[i].high_line : NULL));
    }
    html_table_end(h);
  }
  if (idle.len)
    html_paragraph(h,
                   text_format(r->arena, "At any price of these the wall stays: %s.", idle.data));
}
