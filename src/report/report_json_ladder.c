/* ladder/1: the keys of docs/formats/answers.md. */
#include "report/exclusions.h"
#include "report/report_json.h"
#include "report/view_ladder.h"
#include "septum.h"

enum { DB_DIGITS = 1, MM_DIGITS = 1, MASS_DIGITS = 2, MONEY_DIGITS = 4, SHARE_DIGITS = 3 };

static void put_value(markup_json *j, const char *key, int value) {
  if (value > 0)
    markup_json_integer(j, key, value);
  else
    markup_json_null(j, key);
}

static void put_changes(markup_json *j, const char *key, const change_list *c) {
  markup_json_array(j, key, false);
  for (int i = 0; i < c->count; i++) markup_json_string(j, NULL, c->item[i]);
  markup_json_close(j);
}

static void put_sound(markup_json *j, const report *r, const ladder_answer *l,
                      const assessment *x) {
  view_predicted p = view_ladder_predicted(r, l, x);
  markup_json_integer(j, "predicted", p.printed);
  markup_json_number(j, "predicted_exact", p.exact, DB_DIGITS);
  markup_json_number(j, "predicted_sd", p.sd, DB_DIGITS);
  markup_json_string(j, "evidence", p.published ? "published" : "predicted");
}

static void put_figures(markup_json *j, const report *r, const assessment *x) {
  view_cost v = view_cost_of(r, x);
  markup_json_number(j, "cost_per_m2", v.per_m2, MONEY_DIGITS);
  markup_json_number(j, "cost_per_ft2", v.per_ft2, MONEY_DIGITS);
  markup_json_cents(j, "cost_total", x->cost.total_cents);
  markup_json_cents(j, "floor_value_total", x->cost.floor_value_cents);
  markup_json_cents(j, "cost_with_floor_total", x->numbers.cost_cents);
  markup_json_number(j, "thickness_mm", x->thickness_m * 1e3, MM_DIGITS);
  markup_json_number(j, "mass_kg_m2", x->mass_kg_m2, MASS_DIGITS);
  markup_json_string(j, "line", x->line);
}

static void put_cautions(markup_json *j, const report *r, const ladder_answer *l, int rating,
                         const assessment *x) {
  const char *caution[VIEW_MAX_CAUTIONS];
  int count = view_ladder_cautions(r, l, rating, x, caution);
  markup_json_array(j, "cautions", false);
  for (int i = 0; i < count; i++) markup_json_string(j, NULL, caution[i]);
  markup_json_close(j);
}

/* Money of a step or an edit, floor value included. */
static void put_money(markup_json *j, const assessment *x, const char *total, const char *per_m2,
                      const char *per_ft2, long long cents) {
  double by_area = view_ladder_per_m2(x, cents);
  markup_json_cents(j, total, cents);
  markup_json_number(j, per_m2, by_area, MONEY_DIGITS);
  markup_json_number(j, per_ft2, by_area * UNITS_M2_PER_FT2, MONEY_DIGITS);
}

static void put_step(markup_json *j, const ladder_rung *g) {
  if (g->points == 0) {
    markup_json_null(j, "step");
    return;
  }
  double by_point = (double)g->step_cents / 100 / g->points;
  markup_json_object(j, "step", false);
  markup_json_integer(j, "points", g->points);
  put_money(j, g->wall, "cost_total", "cost_per_m2", "cost_per_ft2", g->step_cents);
  markup_json_number(j, "per_point_total", by_point, MONEY_DIGITS);
  by_point /= g->wall->cost.area_m2;
  markup_json_number(j, "per_point_per_m2", by_point, MONEY_DIGITS);
  markup_json_number(j, "per_point_per_ft2", by_point * UNITS_M2_PER_FT2, MONEY_DIGITS);
  put_changes(j, "changes", &g->changes);
  markup_json_close(j);
}

static void put_rung(markup_json *j, const report *r, const ladder_answer *l,
                     const ladder_rung *g) {
  markup_json_object(j, NULL, false);
  markup_json_integer(j, "rating", g->rating);
  markup_json_integer(j, "serves_from", g->serves_from);
  markup_json_integer(j, "reaches", g->reaches);
  put_sound(j, r, l, g->wall);
  put_figures(j, r, g->wall);
  markup_json_bool(j, "worth_taking", g->worth);
  markup_json_bool(j, "wall_alone", view_ladder_alone(g));
  put_step(j, g);
  if (l->terms.have) {
    markup_json_object(j, "from_have", false);
    put_money(j, g->wall, "extra_total", "extra_per_m2", "extra_per_ft2", g->extra_cents);
    put_changes(j, "changes", &g->from_have);
    markup_json_close(j);
  }
  put_cautions(j, r, l, g->rating, g->wall);
  markup_json_close(j);
}

static void put_edits(markup_json *j, const report *r, const ladder_answer *l) {
  markup_json_array(j, "single_changes", false);
  for (int i = 0; i < l->edit_count; i++) {
    const ladder_edit *e = &l->edit[i];
    markup_json_object(j, NULL, false);
    put_changes(j, "changes", &e->change);
    markup_json_integer(j, "rating", e->reaches);
    markup_json_integer(j, "points", e->reaches - l->terms.have_reaches);
    markup_json_array(j, "least_for", true);
    for (int gain = 0; gain < LADDER_GAINS; gain++)
      if (ladder_least_for(l, i, gain)) markup_json_integer(j, NULL, ladder_gains[gain]);
    markup_json_close(j);
    put_money(j, e->wall, "extra_total", "extra_per_m2", "extra_per_ft2", e->extra_cents);
    put_sound(j, r, l, e->wall);
    put_figures(j, r, e->wall);
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_have(markup_json *j, const report *r, const ladder_answer *l) {
  const assessment *x = l->terms.have;
  if (!x) {
    markup_json_null(j, "have");
    return;
  }
  markup_json_object(j, "have", false);
  put_value(j, "rating", l->terms.have_reaches);
  put_sound(j, r, l, x);
  put_figures(j, r, x);
  report_json_broken(j, r, "broken", x);
  put_edits(j, r, l);
  put_cautions(j, r, l, l->terms.have_reaches, x);
  markup_json_close(j);
}

static void put_target(markup_json *j, const report *r, const ladder_answer *l) {
  const target *t = view_ladder_target(r, l);
  markup_json_object(j, "target", false);
  markup_json_string(j, "metric", sound_metric_names[t->metric]);
  markup_json_string(j, "basis", t->basis == BASIS_FIELD ? "field" : "lab");
  markup_json_number(j, "confidence", t->confidence, SHARE_DIGITS);
  markup_json_string(j, "evidence", t->evidence == EVIDENCE_PUBLISHED ? "published" : "any");
  markup_json_string(j, "scope", t->composite ? "composite" : "wall");
  markup_json_number(j, "margin", t->margin, DB_DIGITS);
  markup_json_string(j, "words", view_ladder_aim(r, l));
  markup_json_array(j, "others", false);
  for (int i = 0; i < r->brief->target_count; i++)
    if (i != l->terms.climbs) markup_json_string(j, NULL, view_target(r, &r->brief->targets[i]));
  markup_json_close(j);
  markup_json_close(j);
}

static void put_why(markup_json *j, const report *r, const explanation *e) {
  markup_json_array(j, "conflicts", false);
  for (int i = 0; e && i < e->conflict_count; i++) report_json_rules(j, r, NULL, e->conflicts[i]);
  markup_json_close(j);
  report_json_others(j, r, "nearest", e ? e->nearest : NULL, e ? e->nearest_count : 0, true);
}

void report_ladder_json(const report *r, const ladder_answer *l, text *out) {
  markup_json j;
  markup_json_init(&j, out);
  markup_json_object(&j, NULL, false);
  markup_json_string(&j, "septum", "ladder/1");
  markup_json_string(&j, "version", SEPTUM_VERSION);
  markup_json_string(&j, "title", r->brief->title);
  markup_json_string(&j, "metric", view_ladder_metric(r, l));
  put_target(&j, r, l);
  markup_json_string(&j, "currency", r->prices->currency);
  markup_json_integer(&j, "walls", l->walls);
  report_json_unpriced(&j, r);
  report_json_rules(&j, r, "rules", rules_in_force(r->brief));
  put_value(&j, "from", l->terms.from);
  put_value(&j, "to", l->terms.to);
  put_value(&j, "lowest", l->lowest);
  put_value(&j, "highest", l->highest);
  put_have(&j, r, l);
  markup_json_array(&j, "rungs", false);
  for (int i = 0; i < l->count; i++) put_rung(&j, r, l, &l->rung[i]);
  markup_json_close(&j);
  put_value(&j, "priced_at", l->priced_at);
  report_json_rule_prices(&j, l->prices, l->price_count);
  put_why(&j, r, l->why);
  exclusions_json(r->brief, &j);
  markup_json_close(&j);
}
