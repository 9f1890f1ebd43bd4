/* The workbook of `plan`: what to order, storeys, sections, how many types, rules, the drawings. */
#include <math.h>

#include "report/buy_plan.h"
#include "report/sheets_plan.h"

static double money(long long cents) {
  return (double)cents / 100;
}

/* ---- what to order ---- */

enum { BUY_NAME = 2, BUY_SURPLUS = 9, BUY_AMOUNT = 11 };

static view_quantity shown(const report *r, int item, double quantity, double rate) {
  cost_line l = {
      .unit = price_unit_names[r->prices->items[item].unit], .quantity = quantity, .rate = rate};
  return view_quantity_of(r, &l);
}

static void put_buy_line(const report *r, const buy_plan_line *l, sheet *s) {
  const buy_line *b = &l->buy;
  const price_item *p = &r->prices->items[b->item];
  view_quantity needed = shown(r, b->item, b->needed, 0);
  view_quantity stock = shown(r, b->item, l->from_stock, 0);
  view_quantity bought = shown(r, b->item, b->bought, b->price);
  double surplus = fmax(bought.quantity + stock.quantity - needed.quantity, 0);
  sheet_put(s, l->section);
  sheet_put(s, p->code);
  sheet_put(s, p->name);
  sheet_put_figure(s, needed.quantity);
  sheet_put(s, needed.unit);
  sheet_put_if(s, l->from_stock > 0, stock.quantity);
  sheet_put_figure(s, (double)b->count);
  sheet_put(s, b->as);
  sheet_put_figure(s, bought.quantity);
  sheet_put_figure(s, surplus);
  sheet_put_figure(s, bought.rate);
  sheet_put_cents(s, b->cents);
  sheet_put(s, takeoff_note(r, b));
  sheet_end_row(s);
}

void sheets_plan_buy(const report *r, const plan_answer *p, sheet_book *out) {
  const sheet_column columns[] = {{"Section", 10, SHEET_TEXT},
                                  {"Item", 20, SHEET_TEXT},
                                  [BUY_NAME] = {"Name", 36, SHEET_TEXT},
                                  {"Needed", 12, SHEET_QUANTITY},
                                  {"Unit", 7, SHEET_TEXT},
                                  {"From stock", 12, SHEET_QUANTITY},
                                  {"Buy", 9, SHEET_COUNT},
                                  {"As", 22, SHEET_TEXT},
                                  {"Bought", 12, SHEET_QUANTITY},
                                  [BUY_SURPLUS] = {"Left over", 12, SHEET_QUANTITY},
                                  {"Price", 11, SHEET_RATE},
                                  [BUY_AMOUNT] = {sheets_money_head(r, "Amount"), 14, SHEET_MONEY},
                                  {"Note", 34, SHEET_WRAP}};
  buy_plan list;
  sheet *s = sheet_book_add(out, "Takeoff");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  buy_plan_of(r, p, &list);
  for (int i = 0; i < list.count; i++) put_buy_line(r, &list.line[i], s);
  sheet_end_table(s);
  if (list.count == 0) return;
  sheet_text(s, s->row, BUY_NAME, SHEET_LABEL, "Total, before tax and markups");
  sheet_formula(s, s->row, BUY_AMOUNT, SHEET_TOTAL,
                sheet_sum(s, BUY_AMOUNT, s->head + 1, s->row - 1), money(list.cents));
}

/* ---- storeys ---- */

enum {
  STOREY_NAME,
  STOREY_WALLS,
  STOREY_ROWS,
  STOREY_UNPLANNED,
  STOREY_RUN,
  STOREY_AREA,
  STOREY_FLOOR_AREA,
  STOREY_COST_WALLS,
  STOREY_GOODS,
  STOREY_FLOOR,
  STOREY_TOTAL,
  STOREY_PER_AREA,
  STOREY_COLUMNS
};

static void put_storey(const report *r, const plan_storey *k, const sheet *rows, sheet *s) {
  const plan_money *m = &k->money;
  int row = s->row;
  /* A cell of its own even where the rows name no storey: sums compare with it. */
  sheet_text(s, row, STOREY_NAME, SHEET_TEXT, k->name);
  sheet_skip(s, 1);
  sheet_put_figure(s, k->walls);
  sheet_put_figure(s, k->row_count);
  sheet_put_figure(s, k->unplanned);
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_STOREY, ROW_RUN),
                    sheets_length(r, k->run_m));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_STOREY, ROW_AREA),
                    sheets_area(r, k->area_m2));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_STOREY, ROW_FLOOR_AREA),
                    sheets_area(r, k->floor_m2));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_STOREY, ROW_WALLS), money(m->walls));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_STOREY, ROW_GOODS), money(m->goods));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_STOREY, ROW_FLOOR), money(m->floor));
  sheet_put_formula(s, text_format(r->arena, "=SUM(%s:%s)", sheet_at(s, row, STOREY_COST_WALLS),
                                   sheet_at(s, row, STOREY_FLOOR)),
                    money(plan_money_total(m)));
  if (k->area_m2 > 0)
    sheet_put_formula(s, text_format(r->arena, "=(%s+%s)/%s", sheet_at(s, row, STOREY_COST_WALLS),
                                     sheet_at(s, row, STOREY_GOODS), sheet_at(s, row, STOREY_AREA)),
                      view_per_area(r, view_plan_per_m2(m, k->area_m2)));
  sheet_end_row(s);
}

static void put_storey_total(const report *r, const plan_answer *p, sheet *s) {
  double value[STOREY_COLUMNS];
  long long total = p->money.walls + p->money.goods + p->money.floor;
  for (int i = 0; i < STOREY_COLUMNS; i++) value[i] = NAN;
  value[STOREY_WALLS] = value[STOREY_ROWS] = 0;
  for (int i = 0; i < p->storey_count; i++) {
    value[STOREY_WALLS] += p->storey[i].walls;
    value[STOREY_ROWS] += p->storey[i].row_count;
  }
  value[STOREY_UNPLANNED] = p->unplanned_rows;
  value[STOREY_FLOOR_AREA] = sheets_area(r, p->floor_m2);
  value[STOREY_COST_WALLS] = money(p->money.walls);
  value[STOREY_GOODS] = money(p->money.goods);
  value[STOREY_FLOOR] = money(p->money.floor);
  value[STOREY_TOTAL] = money(total);
  sheets_plan_total(s, value);
}

void sheets_plan_storeys(const report *r, const plan_answer *p, const sheet *rows,
                         sheet_book *out) {
  const sheet_column columns[STOREY_COLUMNS] = {
      [STOREY_NAME] = {"Storey", 14, SHEET_TEXT},
      [STOREY_WALLS] = {"Walls", 8, SHEET_COUNT},
      [STOREY_ROWS] = {"Rows of the schedule", 10, SHEET_COUNT},
      [STOREY_UNPLANNED] = {"of them without a type", 10, SHEET_COUNT},
      [STOREY_RUN] = {sheets_length_head(r, "Run"), 11, SHEET_QUANTITY},
      [STOREY_AREA] = {sheets_area_head(r, "Area"), 12, SHEET_QUANTITY},
      [STOREY_FLOOR_AREA] = {sheets_area_head(r, "Floor under them"), 12, SHEET_QUANTITY},
      [STOREY_COST_WALLS] = {sheets_money_head(r, "Walls by themselves"), 14, SHEET_MONEY},
      [STOREY_GOODS] = {sheets_money_head(r, "Share of goods"), 14, SHEET_MONEY},
      [STOREY_FLOOR] = {sheets_money_head(r, "Floor value"), 14, SHEET_MONEY},
      [STOREY_TOTAL] = {sheets_money_head(r, "Total without setup"), 14, SHEET_MONEY},
      [STOREY_PER_AREA] = {sheets_rate_head(r, "Cost"), 12, SHEET_MONEY}};
  sheet *s = sheet_book_add(out, "By storey");
  sheet_table(s, 0, columns, STOREY_COLUMNS);
  for (int i = 0; i < p->storey_count; i++) put_storey(r, &p->storey[i], rows, s);
  put_storey_total(r, p, s);
}

/* ---- sections ---- */

void sheets_plan_sections(const report *r, const plan_answer *p, sheet_book *out) {
  enum { SECTION, MATERIAL, LABOUR, BOTH, HOURS, COLUMNS };
  const sheet_column columns[COLUMNS] = {
      [SECTION] = {"Section", 22, SHEET_TEXT},
      [MATERIAL] = {sheets_money_head(r, "Material"), 15, SHEET_MONEY},
      [LABOUR] = {sheets_money_head(r, "Labour"), 15, SHEET_MONEY},
      [BOTH] = {sheets_money_head(r, "Both"), 15, SHEET_MONEY},
      [HOURS] = {"Labour, h", 12, SHEET_QUANTITY}};
  double value[COLUMNS] = {[SECTION] = NAN};
  long long material = 0, labour = 0;
  sheet *s = sheet_book_add(out, "By section");
  sheet_table(s, 0, columns, COLUMNS);
  for (int i = 0; i < p->section_count; i++) {
    const plan_section *k = &p->section[i];
    sheet_put(s, k->section);
    sheet_put_cents(s, k->material_cents);
    sheet_put_cents(s, k->labour_cents);
    sheet_put_formula(s, text_format(r->arena, "=%s+%s", sheet_at(s, s->row, MATERIAL),
                                     sheet_at(s, s->row, LABOUR)),
                      money(k->material_cents + k->labour_cents));
    sheet_put_figure(s, k->hours);
    sheet_end_row(s);
    material += k->material_cents;
    labour += k->labour_cents;
    value[HOURS] += k->hours;
  }
  sheet_put(s, "Tax and markups");
  sheet_number(s, s->row, BOTH, SHEET_MONEY, money(p->markup_cents));
  sheet_end_row(s);
  value[MATERIAL] = money(material);
  value[LABOUR] = money(labour);
  value[BOTH] = money(material + labour + p->markup_cents);
  sheets_plan_total(s, value);
}

/* ---- how many types ---- */

static const char *status_words(const plan_point *at) {
  if (at->found) return at->status == SOLVER_OPTIMAL ? "proven" : "found in time, not proven";
  return at->status == SOLVER_INFEASIBLE ? "no plan" : "not settled";
}

static void put_margin(const plan_answer *p, const plan_point *at, sheet *s) {
  sheet_put_if(s, at->found && p->has_margin, at->worst_margin * 0.01);
}

void sheets_plan_curve(const report *r, const plan_answer *p, sheet_book *out) {
  enum { MOST, TYPES, STATUS, COST, SAVES, MARGIN, COLUMNS };
  const sheet_column columns[COLUMNS] = {
      [MOST] = {"Types, at most", 10, SHEET_COUNT},
      [TYPES] = {"Types used", 10, SHEET_COUNT},
      [STATUS] = {"Answer", 26, SHEET_TEXT},
      [COST] = {sheets_money_head(r, "Cost"), 15, SHEET_MONEY},
      [SAVES] = {sheets_money_head(r, "Saves against the row above"), 15, SHEET_MONEY},
      [MARGIN] = {"Least margin, dB", 10, SHEET_QUANTITY}};
  plan_point point[VIEW_PLAN_POINTS];
  int count = view_plan_curve(p, point);
  sheet *s = sheet_book_add(out, "How many types");
  sheet_table(s, 0, columns, COLUMNS);
  for (int i = 0; i < count; i++) {
    const plan_point *at = &point[i];
    sheet_put_figure(s, at->max_types);
    sheet_put_if(s, at->found, at->types);
    sheet_put(s, status_words(at));
    sheet_put_if(s, at->found, money(at->cost_cents));
    if (i > 0 && at->found && point[i - 1].found)
      sheet_put_formula(s, text_format(r->arena, "=%s-%s", sheet_at(s, s->row - 1, COST),
                                       sheet_at(s, s->row, COST)),
                        money(point[i - 1].cost_cents - at->cost_cents));
    else
      sheet_skip(s, 1);
    put_margin(p, at, s);
    sheet_end_row(s);
  }
}

/* ---- rules ---- */

static const char *found_words(const report *r, const plan_answer *p, plan_rule rule) {
  double least_m = HUGE_VAL;
  text t;
  text_init(&t, r->arena, 100);
  switch (rule) {
  case PLAN_RULE_TYPES:
    return view_plan_count(r, p->type_count, "type", "types");
  case PLAN_RULE_RUN:
    for (int i = 0; i < p->type_count; i++) least_m = fmin(least_m, p->type[i].run_m);
    units_put_height(&t, least_m, r->units);
    return text_format(r->arena, "at least %s", t.data);
  case PLAN_RULE_BUDGET:
    return view_money(r, money(p->cost_cents), NULL);
  case PLAN_RULE_FLOOR:
    return text_format(r->arena, "%s %s", text_of(r->arena, sheets_area(r, p->floor_m2), 1),
                       view_area(r));
  case PLAN_RULE_FRAMING:
  case PLAN_RULES:
    break;
  }
  return "kept";
}

void sheets_plan_rules(const report *r, const plan_answer *p, sheet_book *out) {
  enum { RULE, ASKED, FOUND, PRICE, COST, TYPES, STATUS, MARGIN, COLUMNS };
  const sheet_column columns[COLUMNS] = {
      [RULE] = {"Rule", 18, SHEET_TEXT},
      [ASKED] = {"Asked", 34, SHEET_WRAP},
      [FOUND] = {"Found", 26, SHEET_WRAP},
      [PRICE] = {sheets_money_head(r, "Price"), 14, SHEET_MONEY},
      [COST] = {sheets_money_head(r, "The plan without it costs"), 15, SHEET_MONEY},
      [TYPES] = {"and has types", 10, SHEET_COUNT},
      [STATUS] = {"Answer", 26, SHEET_TEXT},
      [MARGIN] = {"Least margin, dB", 10, SHEET_QUANTITY}};
  sheet *s = sheet_book_add(out, "Rules");
  sheet_table(s, 0, columns, COLUMNS);
  for (int i = 0; i < PLAN_RULES; i++) {
    const plan_point *at = &p->relaxed[i];
    const char *asked = view_plan_rule(r, p, (plan_rule)i);
    if (asked[0] == '\0') continue;
    sheet_put(s, plan_rule_names[i]);
    sheet_put(s, asked);
    sheet_put(s, p->found ? found_words(r, p, (plan_rule)i) : "");
    sheet_put_if(s, at->done && at->found && p->found, money(p->cost_cents - at->cost_cents));
    sheet_put_if(s, at->done && at->found, money(at->cost_cents));
    sheet_put_if(s, at->done && at->found, at->types);
    sheet_put(s, at->done ? status_words(at) : "not worked out");
    if (at->done) put_margin(p, at, s);
    sheet_end_row(s);
  }
}

/* ---- the drawings ---- */

static const char *miss_words(const report *r, const plan_answer *p, const plan_drawn *d) {
  text t;
  text_init(&t, r->arena, 16 << 10);
  for (int i = 0; i < d->miss_count; i++) {
    const brief *b = &p->schedule->classes[d->miss_class[i]].demand;
    text_putf(&t, "%s%s: ", i ? "; " : "", view_plan_class(r, d->miss_class[i]));
    for (int k = 0, n = 0; k < RULES_MAX; k++)
      if (d->miss[i]->broken >> k & 1u)
        text_putf(&t, "%s%s", n++ ? ", " : "", rule_name(r->arena, b, k));
  }
  return t.data;
}

static void put_drawn(const report *r, const plan_answer *p, const plan_drawn *d, sheet *s) {
  sheet_put(s, d->mark);
  sheet_put(s, d->line ? d->line : "no wall in the project file");
  sheet_put(s, d->locked ? "yes" : "no");
  sheet_put_figure(s, d->walls);
  sheet_put_figure(s, d->row_count);
  sheet_put_figure(s, sheets_length(r, d->run_m));
  sheet_put_if(s, d->costed, money(d->list_cents));
  sheet_put(s, d->used != PLAN_NONE ? p->type[d->used].name : "");
  sheet_put_figure(s, d->miss_walls);
  sheet_put(s, miss_words(r, p, d));
  sheet_put(s, d->line && !d->costed && d->missing_code
                   ? text_format(r->arena, "no price for %s", d->missing_code)
                   : "");
  sheet_end_row(s);
}

void sheets_plan_drawings(const report *r, const plan_answer *p, sheet_book *out) {
  const sheet_column columns[] = {{"Mark", 10, SHEET_TEXT},
                                  {"Wall line", 60, SHEET_WRAP},
                                  {"Kept", 7, SHEET_TEXT},
                                  {"Walls", 8, SHEET_COUNT},
                                  {"Rows of the schedule", 10, SHEET_COUNT},
                                  {sheets_length_head(r, "Run"), 11, SHEET_QUANTITY},
                                  {sheets_money_head(r, "Cost at list prices"), 15, SHEET_MONEY},
                                  {"Type of the plan", 9, SHEET_TEXT},
                                  {"Walls that ask more", 10, SHEET_COUNT},
                                  {"What it misses, by class", 60, SHEET_WRAP},
                                  {"Note", 30, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Drawings");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int i = 0; i < p->drawn_count; i++) put_drawn(r, p, &p->drawn[i], s);
  sheet_end_table(s);
}
