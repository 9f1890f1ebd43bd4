/* The page of `plan`: how many types pay, storeys, sections, goods, the drawings. */
#include <math.h>

#include "report/buy_plan.h"
#include "report/chart_plan.h"
#include "report/html_plan.h"

static const char *number(html *h, int value) {
  return text_format(h->report->arena, "%d", value);
}

/* --- how many types -------------------------------------------------------------------------- */

static chart_solved solved(const plan_point *at) {
  if (at->found) return at->status == SOLVER_OPTIMAL ? CHART_PROVEN : CHART_FOUND;
  return at->done && at->status == SOLVER_INFEASIBLE ? CHART_INFEASIBLE : CHART_UNSOLVED;
}

static void put_chart(html *h, const plan_answer *p) {
  chart_types_point point[PLAN_CURVE];
  chart_types_data d = {.point = point,
                        .chosen = p->found ? p->type_count : 0,
                        .chosen_cents = p->cost_cents,
                        .budget_cents = cost_cents(p->project->budget)};
  for (int i = 0; i < PLAN_CURVE; i++)
    if (p->curve[i].done)
      point[d.count++] = (chart_types_point){i + 1, solved(&p->curve[i]), p->curve[i].cost_cents};
  if (d.count == 0) return;
  const char *id = html_picture_id(h);
  chart_types(h->report, id, &d, html_picture(h, HTML_CHART));
  html_picture_end(h, NULL);
}

static const char *margin_words(html *h, const plan_answer *p, const plan_point *at) {
  if (!at->found || !p->has_margin) return NULL;
  return text_of(h->report->arena, at->worst_margin * 0.01, 2);
}

static const char *status_words(const plan_point *at) {
  switch (solved(at)) {
  case CHART_PROVEN:
    return "proven";
  case CHART_FOUND:
    return "not proven";
  case CHART_INFEASIBLE:
    return "no plan keeps every rule";
  case CHART_UNSOLVED:
    break;
  }
  return "none found within the time";
}

static void put_points(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Types at most", HTML_ID},
      {text_format(r->arena, "Cost, %s", r->prices->currency), HTML_FIGURE},
      {"Saved by one more", HTML_FIGURE},
      {"Types used", HTML_FIGURE},
      {"To spare, dB", HTML_FIGURE},
      {"", HTML_WORDS}};
  html_table(h, "What the project costs by the number of types", columns, HTML_COUNT(columns));
  for (int i = 0; i < PLAN_CURVE; i++) {
    const plan_point *at = &p->curve[i];
    if (!at->done) continue;
    bool both = i > 0 && at->found && p->curve[i - 1].found;
    html_row(h, HTML_CELLS(number(h, i + 1), at->found ? view_cents(r, at->cost_cents) : NULL,
                           both ? view_cents(r, p->curve[i - 1].cost_cents - at->cost_cents) : NULL,
                           at->found ? number(h, at->types) : NULL, margin_words(h, p, at),
                           status_words(at)));
  }
  html_table_end(h);
}

static void put_rule_prices(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Rule", HTML_ID},
      {"Asks", HTML_WORDS},
      {text_format(r->arena, "Cost without it, %s", r->prices->currency), HTML_FIGURE},
      {"Saved", HTML_FIGURE},
      {"Types then", HTML_FIGURE},
      {"To spare, dB", HTML_FIGURE},
      {"", HTML_WORDS}};
  bool any = false;
  for (int i = 0; i < PLAN_RULES; i++) any = any || p->relaxed[i].done;
  if (!any) return;
  html_table(h, "What giving up one rule of the project would bring", columns, HTML_COUNT(columns));
  for (int i = 0; i < PLAN_RULES; i++) {
    const plan_point *at = &p->relaxed[i];
    if (!at->done) continue;
    html_row(
        h, HTML_CELLS(plan_rule_names[i], view_plan_rule(r, p, (plan_rule)i),
                      at->found ? view_cents(r, at->cost_cents) : NULL,
                      at->found && p->found ? view_cents(r, p->cost_cents - at->cost_cents) : NULL,
                      at->found ? number(h, at->types) : NULL, margin_words(h, p, at),
                      status_words(at)));
  }
  html_table_end(h);
}

void html_plan_curve(html *h, const plan_answer *p) {
  bool any = false;
  for (int i = 0; i < PLAN_CURVE; i++) any = any || p->curve[i].done;
  for (int i = 0; i < PLAN_RULES; i++) any = any || p->relaxed[i].done;
  if (!any) return;
  html_section(h, "How many types pay");
  put_chart(h, p);
  put_points(h, p);
  put_rule_prices(h, p);
  html_section_end(h);
}

/* --- storeys and sections -------------------------------------------------------------------- */

static void put_storey_chart(html *h, const plan_answer *p) {
  chart_plan_part *part = arena_array(h->report->arena, (size_t)p->storey_count, sizeof *part);
  const char *id = html_picture_id(h);
  for (int i = 0; i < p->storey_count; i++) {
    const plan_money *m = &p->storey[i].money;
    part[i] =
        (chart_plan_part){html_storey(p->storey[i].name), m->walls, m->goods, m->setup, m->floor};
  }
  chart_plan_cost(h->report, id, "storey", part, p->storey_count, html_picture(h, HTML_CHART));
  html_picture_end(h, NULL);
}

void html_plan_storeys(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Storey", HTML_HEAD},
      {"Walls", HTML_FIGURE},
      {"Rows", HTML_FIGURE},
      {"Rows without a type", HTML_FIGURE},
      {"Run", HTML_FIGURE},
      {"Area", HTML_FIGURE},
      {"Floor", HTML_FIGURE},
      {text_format(r->arena, "%s per %s", r->prices->currency, view_area(r)), HTML_FIGURE},
      {"Walls", HTML_FIGURE},
      {"Goods", HTML_FIGURE},
      {"Value of floor", HTML_FIGURE},
      {text_format(r->arena, "Together, %s", r->prices->currency), HTML_FIGURE}};
  if (!p->found || p->storey_count == 0) return;
  html_section(h, "By storey");
  put_storey_chart(h, p);
  html_table(h, "What stands on each storey", columns, HTML_COUNT(columns));
  for (int i = 0; i < p->storey_count; i++) {
    const plan_storey *s = &p->storey[i];
    const plan_money *m = &s->money;
    html_row(h, HTML_CELLS(
                    html_storey(s->name), number(h, s->walls), number(h, s->row_count),
                    number(h, s->unplanned), html_run(h, s->run_m), html_area(h, s->area_m2),
                    html_area(h, s->floor_m2),
                    view_cents(r, view_in_cents(view_per_area(r, view_plan_per_m2(m, s->area_m2)))),
                    view_cents(r, m->walls), view_cents(r, m->goods), view_cents(r, m->floor),
                    view_cents(r, plan_money_total(m))));
  }
  html_table_end(h);
  html_section_end(h);
}

void html_plan_sections(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Section", HTML_ID},
      {"Material", HTML_FIGURE},
      {"Labour", HTML_FIGURE},
      {"Hours", HTML_FIGURE},
      {text_format(r->arena, "Together, %s", r->prices->currency), HTML_FIGURE}};
  long long sum = p->markup_cents;
  if (!p->found) return;
  html_section(h, "Cost by section");
  html_table(h, "Walls and goods by section of the specification", columns, HTML_COUNT(columns));
  for (int i = 0; i < p->section_count; i++) {
    const plan_section *s = &p->section[i];
    sum += s->material_cents + s->labour_cents;
    html_row(h, HTML_CELLS(s->section, s->material_cents ? view_cents(r, s->material_cents) : NULL,
                           s->labour_cents ? view_cents(r, s->labour_cents) : NULL,
                           text_of(r->arena, s->hours, 2),
                           view_cents(r, s->material_cents + s->labour_cents)));
  }
  html_row(
      h, HTML_CELLS("tax, overhead and profit", NULL, NULL, NULL, view_cents(r, p->markup_cents)));
  html_row_as(h, "total", HTML_CELLS("walls and goods", NULL, NULL, NULL, view_cents(r, sum)));
  html_table_end(h);
  html_section_end(h);
}

/* --- what to order --------------------------------------------------------------------------- */

static view_quantity shown(html *h, int item, double quantity, double rate) {
  cost_line l = {.unit = price_unit_names[h->report->prices->items[item].unit],
                 .quantity = quantity,
                 .rate = rate};
  return view_quantity_of(h->report, &l);
}

static const char *quantity(html *h, int item, double value) {
  return text_of(h->report->arena, shown(h, item, value, 0).quantity, 2);
}

static const char *order_note(html *h, const buy_plan_line *l) {
  text t;
  text_init(&t, h->report->arena, 400);
  const char *unit = shown(h, l->buy.item, 0, 0).unit;
  if (l->buy.from > 0)
    text_putf(&t, "at the price from %s %s on", quantity(h, l->buy.item, l->buy.from), unit);
  if (l->buy.least > 0)
    text_putf(&t, "%sat least %s %s", t.len ? "; " : "", quantity(h, l->buy.item, l->buy.least),
              unit);
  return t.data;
}

static void put_order(html *h, const buy_plan_line *l) {
  const report *r = h->report;
  const price_item *item = &r->prices->items[l->buy.item];
  view_quantity needed = shown(h, l->buy.item, l->buy.needed, l->buy.price);
  double over = fmax(l->buy.bought + l->from_stock - l->buy.needed, 0);
  text count;
  text_init(&count, r->arena, 64);
  view_count(&count, l->buy.count);
  html_row(h, HTML_CELLS(l->section, item->code, item->name, text_of(r->arena, needed.quantity, 2),
                         needed.unit,
                         l->from_stock > 0 ? quantity(h, l->buy.item, l->from_stock) : NULL,
                         count.data, l->buy.as, quantity(h, l->buy.item, l->buy.bought),
                         quantity(h, l->buy.item, over), text_of(r->arena, needed.rate, 3),
                         view_cents(r, l->buy.cents), order_note(h, l)));
}

static void put_goods(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Item", HTML_ID},
      {"Unit", HTML_CODE},
      {"Needed", HTML_FIGURE},
      {"On hand", HTML_FIGURE},
      {"Bought", HTML_FIGURE},
      {"Over", HTML_FIGURE},
      {text_format(r->arena, "In the plan, %s", r->prices->currency), HTML_FIGURE}};
  if (p->goods_count == 0) return;
  html_table(h, "Goods of the plan: ordered together, tax and markups included", columns,
             HTML_COUNT(columns));
  for (int i = 0; i < p->goods_count; i++) {
    const plan_goods *g = &p->goods[i];
    if (g->buy.need <= 0) continue;
    html_row(h,
             HTML_CELLS(r->prices->items[g->item].code, shown(h, g->item, 0, 0).unit,
                        quantity(h, g->item, g->buy.need), quantity(h, g->item, g->buy.from_stock),
                        quantity(h, g->item, g->buy.bought), quantity(h, g->item, g->buy.surplus),
                        view_cents(r, g->buy.cents)));
  }
  html_table_end(h);
}

void html_plan_buy(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Section", HTML_CODE},
      {"Item", HTML_ID},
      {"Name", HTML_DATA},
      {"Needed", HTML_FIGURE},
      {"Unit", HTML_CODE},
      {"On hand", HTML_FIGURE},
      {"Order", HTML_FIGURE},
      {"As", HTML_DATA},
      {"Bought", HTML_FIGURE},
      {"Over", HTML_FIGURE},
      {"Price", HTML_FIGURE},
      {text_format(r->arena, "Amount, %s", r->prices->currency), HTML_FIGURE},
      {"Note", HTML_WORDS}};
  buy_plan list;
  if (!p->found) return;
  buy_plan_of(r, p, &list);
  html_section(h, "What to order");
  html_table_as(h, "dense", "Material in whole packages, before tax and markups", columns,
                HTML_COUNT(columns));
  for (int i = 0; i < list.count; i++) put_order(h, &list.line[i]);
  html_row_as(h, "total",
              HTML_CELLS(NULL, "total", NULL, NULL, NULL, NULL, NULL, NULL, NULL, NULL, NULL,
                         view_cents(r, list.cents), NULL));
  html_table_end(h);
  put_goods(h, p);
  html_section_end(h);
}

/* --- the drawings ---------------------------------------------------------------------------- */

static const char *misses_words(html *h, const plan_answer *p, const plan_drawn *d) {
  const report *r = h->report;
  text t;
  text_init(&t, r->arena, 16 << 10);
  for (int i = 0; i < d->miss_count; i++) {
    report own = view_plan_report(r, p, d->miss_class[i]);
    text_putf(&t, "%s%s (", i ? "; " : "", view_plan_class(r, d->miss_class[i]));
    for (int b = 0; b < d->miss[i]->broken_count; b++) {
      const broken_rule *broke = &d->miss[i]->broke[b];
      text_putf(&t, "%s%s: asks %s, has %s", b ? "; " : "",
                rule_name(r->arena, own.brief, broke->rule), broke->limit,
                view_clause(r, broke->found));
    }
    text_put(&t, ")");
  }
  return t.data;
}

static void put_drawn(html *h, const plan_answer *p, const plan_drawn *d) {
  const report *r = h->report;
  html_row(h, HTML_CELLS(d->mark, d->locked ? "kept" : NULL, number(h, d->walls),
                         number(h, d->row_count), html_run(h, d->run_m),
                         d->costed ? view_cents(r, d->list_cents)
                                   : text_format(r->arena, "no price for %s",
                                                 d->missing_code ? d->missing_code : "an item"),
                         d->used != PLAN_NONE ? p->type[d->used].name : NULL,
                         number(h, d->miss_walls), misses_words(h, p, d), d->line));
}

static void put_comparison(html *h, const plan_answer *p) {
  const report *r = h->report;
  const plan_comparison *c = &p->against;
  const html_column columns[] = {
      {"", HTML_HEAD},
      {"Walls", HTML_FIGURE},
      {"Goods", HTML_FIGURE},
      {"Set-up", HTML_FIGURE},
      {"Value of floor", HTML_FIGURE},
      {text_format(r->arena, "Together, %s", r->prices->currency), HTML_FIGURE},
      {"Types", HTML_FIGURE},
      {"Floor", HTML_FIGURE}};
  const plan_money *a = &c->drawings, *b = &c->plan;
  html_table(h,
             text_format(r->arena, "As drawn and as planned, over %s; left out: %d",
                         view_plan_count(r, c->row_count, "row", "rows"), c->left_out),
             columns, HTML_COUNT(columns));
  html_row(h, HTML_CELLS("as drawn", view_cents(r, a->walls), view_cents(r, a->goods),
                         view_cents(r, a->setup), view_cents(r, a->floor),
                         view_cents(r, plan_money_total(a)), number(h, c->types),
                         html_area(h, c->drawings_floor_m2)));
  html_row(h, HTML_CELLS("as planned", view_cents(r, b->walls), view_cents(r, b->goods),
                         view_cents(r, b->setup), view_cents(r, b->floor),
                         view_cents(r, plan_money_total(b)), NULL, html_area(h, c->plan_floor_m2)));
  html_row_as(h, "total",
              HTML_CELLS("saved", view_cents(r, a->walls - b->walls),
                         view_cents(r, a->goods - b->goods), view_cents(r, a->setup - b->setup),
                         view_cents(r, a->floor - b->floor), view_cents(r, view_plan_saving(c)),
                         NULL, html_area(h, c->drawings_floor_m2 - c->plan_floor_m2)));
  html_table_end(h);
}

void html_plan_drawings(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Mark", HTML_HEAD},
      {"", HTML_CODE},
      {"Walls", HTML_FIGURE},
      {"Rows", HTML_FIGURE},
      {"Run", HTML_FIGURE},
      {text_format(r->arena, "Cost by itself, %s", r->prices->currency), HTML_FIGURE},
      {"Type of the plan", HTML_CODE},
      {"Walls that miss", HTML_FIGURE},
      {"What it misses", HTML_WORDS},
      {"Wall", HTML_LINE}};
  if (p->drawn_count == 0) return;
  html_section(h, "Beside the drawings");
  if (p->against.done) put_comparison(h, p);
  html_table_as(h, "dense", "The wall types of the drawings", columns, HTML_COUNT(columns));
  for (int i = 0; i < p->drawn_count; i++) put_drawn(h, p, &p->drawn[i]);
  html_table_end(h);
  html_section_end(h);
}
