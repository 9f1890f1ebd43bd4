/* plan/1: the keys of docs/formats/answers.md. */
#include <limits.h>
#include <math.h>

#include "report/buy_plan.h"
#include "report/exclusions.h"
#include "report/report_json.h"
#include "report/report_plan.h"
#include "report/view_plan.h"
#include "septum.h"

enum {
  DB_DIGITS = 2,
  SHARE_DIGITS = 3,
  MONEY_DIGITS = 4,
  METRE_DIGITS = 3,
  AREA_DIGITS = 3,
  QUANTITY_DIGITS = 6,
  COUNT_DIGITS = 2
};

static void put_money(markup_json *j, const char *key, const plan_money *m, double area_m2) {
  double per_m2 = view_plan_per_m2(m, area_m2);
  markup_json_object(j, key, true);
  markup_json_cents(j, "walls", m->walls);
  markup_json_cents(j, "goods", m->goods);
  markup_json_cents(j, "setup", m->setup);
  markup_json_cents(j, "floor_value", m->floor);
  markup_json_cents(j, "total", plan_money_total(m));
  if (area_m2 > 0) {
    markup_json_number(j, "per_m2", per_m2, MONEY_DIGITS);
    markup_json_number(j, "per_ft2", per_m2 * UNITS_M2_PER_FT2, MONEY_DIGITS);
  }
  markup_json_close(j);
}

static void put_cents_or_null(markup_json *j, const char *key, bool there, long long cents) {
  if (there)
    markup_json_cents(j, key, cents);
  else
    markup_json_null(j, key);
}

/* The best worst margin where some wall has a target. */
static void put_margin(markup_json *j, const plan_answer *p, bool there, int hundredth) {
  if (there && p->has_margin)
    markup_json_number(j, "worst_margin_db", hundredth * 0.01, DB_DIGITS);
  else
    markup_json_null(j, "worst_margin_db");
}

/* ---- types ---- */

static void put_ids(markup_json *j, const char *key, const plan_answer *p, const int *row, int n) {
  markup_json_array(j, key, true);
  for (int i = 0; i < n; i++) markup_json_string(j, NULL, p->schedule->wall[row[i]].id);
  markup_json_close(j);
}

static void put_type_storeys(markup_json *j, const plan_answer *p, const plan_used *u) {
  markup_json_array(j, "storeys", true);
  for (int s = 0; s < p->storey_count; s++) {
    bool there = false;
    for (int i = 0; i < u->row_count; i++)
      there = there || text_equal(p->schedule->wall[u->row[i]].storey, p->storey[s].name);
    if (there) markup_json_string(j, NULL, p->storey[s].name);
  }
  markup_json_close(j);
}

static void put_used(markup_json *j, const report *r, const plan_answer *p, int type) {
  const plan_used *u = &p->type[type];
  markup_json_object(j, "used", false);
  markup_json_integer(j, "walls", u->walls);
  markup_json_integer(j, "rows", u->row_count);
  markup_json_number(j, "run_m", u->run_m, METRE_DIGITS);
  markup_json_number(j, "area_m2", u->area_m2, AREA_DIGITS);
  markup_json_number(j, "floor_m2", u->floor_m2, AREA_DIGITS);
  put_type_storeys(j, p, u);
  markup_json_array(j, "classes", true);
  for (int c = 0; c < p->schedule->class_count; c++)
    if (p->place[c].type == type) markup_json_string(j, NULL, view_plan_class(r, c));
  markup_json_close(j);
  put_ids(j, "ids", p, u->row, u->row_count);
  markup_json_close(j);
}

static void put_without(markup_json *j, const plan_answer *p, const plan_used *u) {
  const plan_point *w = &u->without;
  if (!w->done) {
    markup_json_null(j, "without");
    return;
  }
  markup_json_object(j, "without", true);
  markup_json_string(j, "status", view_solver_status(w->status));
  put_cents_or_null(j, "cost_total", w->found, w->cost_cents);
  put_cents_or_null(j, "costs_more", w->found, w->cost_cents - p->cost_cents);
  markup_json_integer(j, "types", w->types);
  put_margin(j, p, w->found, w->worst_margin);
  markup_json_close(j);
}

static void put_type(markup_json *j, const report *r, const plan_answer *p, int type) {
  const plan_used *u = &p->type[type];
  report as = view_plan_report(r, p, u->judged_as);
  markup_json_object(j, NULL, false);
  markup_json_string(j, "name", u->name);
  markup_json_string(j, "mark", u->mark);
  markup_json_bool(j, "locked", u->locked);
  put_used(j, r, p, type);
  put_money(j, "cost_of_use", &u->money, u->area_m2);
  put_without(j, p, u);
  markup_json_string(j, "judged_as", view_plan_class(r, u->judged_as));
  report_json_rating_facts(j, &as, u->as);
  markup_json_close(j);
}

/* ---- classes and rows ---- */

static void put_class(markup_json *j, const report *r, const plan_answer *p, int c) {
  const schedule_class *k = &p->schedule->classes[c];
  const plan_place *at = &p->place[c];
  bool planned = at->type != PLAN_NONE;
  markup_json_object(j, NULL, false);
  markup_json_string(j, "class", view_plan_class(r, c));
  markup_json_string(j, "words", view_plan_demand(r, p, c));
  markup_json_string(j, "basis", k->basis);
  markup_json_string(j, "storey", k->storey[0] ? k->storey : NULL);
  markup_json_string(j, "locked",
                     k->locked != CATALOG_NONE ? p->project->mark[k->locked].mark : NULL);
  markup_json_integer(j, "rows", k->count);
  markup_json_number(j, "run_m", k->run_m, METRE_DIGITS);
  put_ids(j, "ids", p, k->wall, k->count);
  markup_json_string(j, "type", planned ? p->type[at->type].name : NULL);
  markup_json_string(j, "line", planned ? at->wall->line : NULL);
  markup_json_array(j, "misses", true);
  for (int i = 0; planned && i < at->wall->broken_count; i++)
    markup_json_string(j, NULL, rule_name(r->arena, &k->demand, at->wall->broke[i].rule));
  markup_json_close(j);
  report_json_brief(j, r, "brief", &k->demand);
  markup_json_close(j);
}

static void put_assignment(markup_json *j, const report *r, const plan_answer *p, int row) {
  const schedule_wall *from = &p->schedule->wall[row];
  const plan_row *as = &p->row[row];
  const plan_place *at = &p->place[from->of_class];
  bool asked = p->schedule->classes[from->of_class].demand.target_count > 0;
  markup_json_object(j, NULL, true);
  markup_json_string(j, "wall", from->id);
  markup_json_string(j, "type", p->type[as->type].name);
  markup_json_bool(j, "mirrored", as->mirrored);
  markup_json_string(j, "line", as->line);
  markup_json_string(j, "class", view_plan_class(r, from->of_class));
  markup_json_string(j, "storey", from->storey);
  markup_json_integer(j, "count", from->count);
  markup_json_number(j, "margin_db", asked ? at->margin_db : NAN, DB_DIGITS);
  markup_json_number(j, "probability", asked ? view_plan_probability(p, from->of_class) : NAN,
                     SHARE_DIGITS);
  markup_json_number(j, "probability_field", asked ? at->in_field : NAN, SHARE_DIGITS);
  markup_json_cents(j, "cost_list", as->list_cents);
  markup_json_cents(j, "cost_walls", as->money.walls);
  markup_json_cents(j, "cost_goods", as->money.goods);
  markup_json_cents(j, "floor_value", as->money.floor);
  markup_json_close(j);
}

static const plan_reason *reason_of(const plan_answer *p, int of_class) {
  for (int i = 0; i < p->unplanned_count; i++)
    if (p->unplanned[i].class_of == of_class) return &p->unplanned[i];
  return NULL;
}

/* Rows of one class share its reasons, which stand under `unplanned_classes`. */
static void put_unplanned(markup_json *j, const report *r, const plan_answer *p) {
  markup_json_array(j, "unplanned", false);
  for (int row = 0; row < p->schedule->count; row++) {
    const schedule_wall *from = &p->schedule->wall[row];
    const plan_reason *why = reason_of(p, from->of_class);
    if (!why) continue;
    markup_json_object(j, NULL, true);
    markup_json_string(j, "wall", from->id);
    markup_json_string(j, "class", view_plan_class(r, from->of_class));
    markup_json_string(j, "reason", view_plan_reason(r, p, why));
    markup_json_close(j);
  }
  markup_json_close(j);
  markup_json_array(j, "unplanned_classes", false);
  for (int i = 0; i < p->unplanned_count; i++) {
    const plan_reason *why = &p->unplanned[i];
    report as = view_plan_report(r, p, why->class_of);
    markup_json_object(j, NULL, false);
    markup_json_string(j, "class", view_plan_class(r, why->class_of));
    markup_json_string(j, "reason", view_plan_reason(r, p, why));
    markup_json_array(j, "conflicts", true);
    for (int k = 0; why->why && k < why->why->conflict_count; k++)
      report_json_rules(j, &as, NULL, why->why->conflicts[k]);
    markup_json_close(j);
    report_json_others(j, &as, "nearest", why->why ? why->why->nearest : NULL,
                       why->why ? why->why->nearest_count : 0, true);
    markup_json_close(j);
  }
  markup_json_close(j);
}

/* ---- rules and number of types ---- */

static void put_bound(markup_json *j, const plan_answer *p) {
  put_cents_or_null(j, "bound", p->found && p->bound_cents != LLONG_MIN, p->bound_cents);
}

static void put_terms(markup_json *j, const plan_answer *p) {
  static const char *const framings[] = {"none", "storey", "all"};
  const project *from = p->project;
  markup_json_object(j, "rules", true);
  if (from->max_types > 0)
    markup_json_integer(j, "max_types", from->max_types);
  else
    markup_json_null(j, "max_types");
  markup_json_number(j, "min_run_m", from->min_run_m, METRE_DIGITS);
  markup_json_number(j, "type_setup_cost", from->type_setup_cost, COUNT_DIGITS);
  markup_json_number(j, "budget", from->budget > 0 ? from->budget : NAN, COUNT_DIGITS);
  markup_json_number(j, "floor_area_max_m2",
                     from->floor_area_max_m2 > 0 ? from->floor_area_max_m2 : NAN, AREA_DIGITS);
  markup_json_string(j, "same_framing", framings[from->same_framing]);
  markup_json_bool(j, "quantity_breaks", from->quantity_breaks);
  markup_json_close(j);
}

static void put_curve(markup_json *j, const report *r, const plan_answer *p) {
  plan_point point[VIEW_PLAN_POINTS];
  int count = view_plan_curve(p, point);
  markup_json_array(j, "curve", false);
  for (int i = 0; i < count; i++) {
    const plan_point *at = &point[i];
    bool both = i > 0 && at->found && point[i - 1].found;
    markup_json_object(j, NULL, true);
    markup_json_integer(j, "max_types", at->max_types);
    markup_json_string(j, "status", view_solver_status(at->status));
    put_cents_or_null(j, "cost_total", at->found, at->cost_cents);
    put_cents_or_null(j, "saves", both, both ? point[i - 1].cost_cents - at->cost_cents : 0);
    markup_json_integer(j, "types", at->types);
    put_margin(j, p, at->found, at->worst_margin);
    markup_json_close(j);
  }
  markup_json_close(j);
  if (p->stops_at > 0)
    markup_json_integer(j, "stops_at", p->stops_at);
  else
    markup_json_null(j, "stops_at");
  markup_json_string(j, "stops_at_words", view_plan_stop(r, p));
}

static void put_rules(markup_json *j, const report *r, const plan_answer *p) {
  markup_json_array(j, "price_of_rules", false);
  for (int i = 0; i < PLAN_RULES; i++) {
    const plan_point *at = &p->relaxed[i];
    if (!at->done) continue;
    markup_json_object(j, NULL, true);
    markup_json_string(j, "rule", plan_rule_names[i]);
    markup_json_string(j, "from", view_plan_rule(r, p, (plan_rule)i));
    markup_json_string(j, "status", view_solver_status(at->status));
    put_cents_or_null(j, "cost_total", at->found, at->cost_cents);
    put_cents_or_null(j, "price_total", at->found && p->found, p->cost_cents - at->cost_cents);
    markup_json_integer(j, "types", at->types);
    put_margin(j, p, at->found, at->worst_margin);
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_conflicts(markup_json *j, const plan_answer *p) {
  markup_json_array(j, "conflicts", true);
  for (int i = 0; i < p->conflict_count; i++) {
    markup_json_array(j, NULL, true);
    for (int k = 0; k < PLAN_RULES; k++)
      if (p->conflict[i] >> k & 1u) markup_json_string(j, NULL, plan_rule_names[k]);
    markup_json_close(j);
  }
  markup_json_close(j);
}

/* ---- quantities ---- */

static void put_storeys(markup_json *j, const plan_answer *p) {
  markup_json_array(j, "storeys", false);
  for (int i = 0; i < p->storey_count; i++) {
    const plan_storey *s = &p->storey[i];
    markup_json_object(j, NULL, false);
    markup_json_string(j, "storey", s->name);
    markup_json_integer(j, "walls", s->walls);
    markup_json_integer(j, "rows", s->row_count);
    markup_json_integer(j, "unplanned", s->unplanned);
    markup_json_number(j, "run_m", s->run_m, METRE_DIGITS);
    markup_json_number(j, "area_m2", s->area_m2, AREA_DIGITS);
    markup_json_number(j, "floor_m2", s->floor_m2, AREA_DIGITS);
    put_money(j, "cost", &s->money, s->area_m2);
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_sections(markup_json *j, const plan_answer *p) {
  markup_json_array(j, "sections", false);
  for (int i = 0; i < p->section_count; i++) {
    const plan_section *s = &p->section[i];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "section", s->section);
    markup_json_cents(j, "material", s->material_cents);
    markup_json_cents(j, "labour", s->labour_cents);
    markup_json_number(j, "hours", s->hours, COUNT_DIGITS);
    markup_json_close(j);
  }
  markup_json_close(j);
  markup_json_cents(j, "markup", p->markup_cents);
}

static void put_buy(markup_json *j, const report *r, const plan_answer *p) {
  buy_plan list;
  buy_plan_of(r, p, &list);
  markup_json_array(j, "buy", false);
  for (int i = 0; i < list.count; i++) {
    const buy_plan_line *l = &list.line[i];
    const price_item *item = &r->prices->items[l->buy.item];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "section", l->section);
    markup_json_string(j, "item", item->code);
    markup_json_string(j, "name", item->name);
    markup_json_number(j, "needed", l->buy.needed, QUANTITY_DIGITS);
    markup_json_string(j, "unit", price_unit_names[item->unit]);
    markup_json_number(j, "from_stock", l->from_stock, QUANTITY_DIGITS);
    markup_json_integer(j, "buy", l->buy.count);
    markup_json_string(j, "buy_as", l->buy.as);
    markup_json_number(j, "bought", l->buy.bought, QUANTITY_DIGITS);
    markup_json_number(j, "surplus", fmax(l->buy.bought + l->from_stock - l->buy.needed, 0),
                       QUANTITY_DIGITS);
    markup_json_number(j, "rate", l->buy.price, QUANTITY_DIGITS);
    markup_json_number(j, "break_from", l->buy.from > 0 ? l->buy.from : NAN, QUANTITY_DIGITS);
    markup_json_cents(j, "amount", l->buy.cents);
    markup_json_close(j);
  }
  markup_json_close(j);
  markup_json_cents(j, "buy_total", list.cents);
  markup_json_array(j, "goods", false);
  for (int i = 0; i < p->goods_count; i++) {
    const plan_goods *g = &p->goods[i];
    if (g->buy.need <= 0) continue;
    markup_json_object(j, NULL, true);
    markup_json_string(j, "item", r->prices->items[g->item].code);
    markup_json_number(j, "need", g->buy.need, QUANTITY_DIGITS);
    markup_json_number(j, "from_stock", g->buy.from_stock, QUANTITY_DIGITS);
    markup_json_number(j, "bought", g->buy.bought, QUANTITY_DIGITS);
    markup_json_number(j, "surplus", g->buy.surplus, QUANTITY_DIGITS);
    markup_json_cents(j, "cost", g->buy.cents);
    markup_json_close(j);
  }
  markup_json_close(j);
}

/* ---- drawings, tests ---- */

static void put_drawn(markup_json *j, const report *r, const plan_answer *p, const plan_drawn *d) {
  markup_json_object(j, NULL, false);
  markup_json_string(j, "mark", d->mark);
  markup_json_string(j, "line", d->line);
  markup_json_bool(j, "locked", d->locked);
  markup_json_integer(j, "walls", d->walls);
  markup_json_integer(j, "rows", d->row_count);
  markup_json_number(j, "run_m", d->run_m, METRE_DIGITS);
  put_cents_or_null(j, "cost_list", d->costed, d->list_cents);
  markup_json_string(j, "unpriced", d->costed ? NULL : d->missing_code);
  markup_json_string(j, "type", d->used != PLAN_NONE ? p->type[d->used].name : NULL);
  markup_json_integer(j, "misses_walls", d->miss_walls);
  markup_json_array(j, "misses", false);
  for (int i = 0; i < d->miss_count; i++) {
    report as = view_plan_report(r, p, d->miss_class[i]);
    markup_json_object(j, NULL, true);
    markup_json_string(j, "class", view_plan_class(r, d->miss_class[i]));
    report_json_rules(j, &as, "rules", d->miss[i]->broken);
    markup_json_close(j);
  }
  markup_json_close(j);
  markup_json_close(j);
}

static void put_drawings(markup_json *j, const report *r, const plan_answer *p) {
  const plan_comparison *c = &p->against;
  if (p->drawn_count == 0) {
    markup_json_null(j, "drawings");
    return;
  }
  markup_json_object(j, "drawings", false);
  markup_json_array(j, "types", false);
  for (int i = 0; i < p->drawn_count; i++) put_drawn(j, r, p, &p->drawn[i]);
  markup_json_close(j);
  markup_json_integer(j, "rows_compared", c->row_count);
  markup_json_integer(j, "rows_left_out", c->left_out);
  if (c->done) {
    markup_json_integer(j, "types_used", c->types);
    put_money(j, "cost", &c->drawings, 0);
    markup_json_cents(j, "saving_total", view_plan_saving(c));
    markup_json_number(j, "floor_m2", c->drawings_floor_m2, AREA_DIGITS);
    markup_json_number(j, "floor_gained_m2", c->drawings_floor_m2 - c->plan_floor_m2, AREA_DIGITS);
  } else
    markup_json_null(j, "saving_total");
  markup_json_close(j);
}

static void put_tests(markup_json *j, const report *r, const plan_answer *p) {
  markup_json_object(j, "tests", true);
  markup_json_integer(j, "walls", p->asked_walls);
  markup_json_number(j, "expected_misses_laboratory", p->miss_laboratory, COUNT_DIGITS);
  markup_json_number(j, "expected_misses_field", p->miss_field, COUNT_DIGITS);
  markup_json_string(j, "words", view_plan_misses(r, p));
  markup_json_close(j);
}

/* ---- together ---- */

static void put_head(markup_json *j, const report *r, const plan_answer *p) {
  markup_json_string(j, "septum", "plan/1");
  markup_json_string(j, "version", SEPTUM_VERSION);
  markup_json_string(j, "title", p->project->title);
  markup_json_string(j, "status", view_solver_status(p->status));
  markup_json_string(j, "objective", p->project->aim == AIM_MARGIN ? "margin" : "cost");
  put_cents_or_null(j, "cost_total", p->found, p->cost_cents);
  put_bound(j, p);
  markup_json_string(j, "currency", r->prices->currency);
  put_money(j, "parts", &p->money, 0);
  put_margin(j, p, p->found, p->worst_margin);
  markup_json_number(j, "floor_m2", p->floor_m2, AREA_DIGITS);
  markup_json_integer(j, "walls", p->walls);
  markup_json_integer(j, "candidates", p->candidates);
  report_json_unpriced(j, r);
  put_terms(j, p);
}

void report_plan_json(const report *r, const plan_answer *p, text *out) {
  markup_json j;
  const char *caution[VIEW_MAX_PLAN_CAUTIONS];
  markup_json_init(&j, out);
  markup_json_object(&j, NULL, false);
  put_head(&j, r, p);
  markup_json_array(&j, "types", false);
  for (int i = 0; i < p->type_count; i++) put_type(&j, r, p, i);
  markup_json_close(&j);
  markup_json_array(&j, "assignments", false);
  for (int i = 0; i < p->schedule->count; i++)
    if (p->row[i].type != PLAN_NONE) put_assignment(&j, r, p, i);
  markup_json_close(&j);
  put_unplanned(&j, r, p);
  markup_json_array(&j, "classes", false);
  for (int c = 0; c < p->schedule->class_count; c++) put_class(&j, r, p, c);
  markup_json_close(&j);
  put_curve(&j, r, p);
  put_rules(&j, r, p);
  put_conflicts(&j, p);
  put_storeys(&j, p);
  put_sections(&j, p);
  put_buy(&j, r, p);
  put_drawings(&j, r, p);
  put_tests(&j, r, p);
  int cautions = p->found ? view_plan_cautions(r, p, caution) : 0;
  markup_json_array(&j, "cautions", false);
  for (int i = 0; i < cautions; i++) markup_json_string(&j, NULL, caution[i]);
  markup_json_close(&j);
  exclusions_json(view_plan_any_brief(r, p), &j);
  markup_json_close(&j);
}
