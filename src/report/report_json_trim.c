/* trim/1: the keys of docs/formats/answers.md. */
#include "report/exclusions.h"
#include "report/report_json.h"
#include "report/report_trim.h"
#include "report/view_trim.h"
#include "septum.h"

enum {
  CENT_DIGITS = 2,
  DB_DIGITS = 1,
  MM_DIGITS = 1,
  MASS_DIGITS = 2,
  MONEY_DIGITS = 4,
  METRE_DIGITS = 3,
  SHARE_DIGITS = 3
};

static void put_heavy(markup_json *j, const bool heavy[2]) {
  markup_json_object(j, "heavy_fastening", true);
  markup_json_bool(j, "a", heavy[SIDE_A]);
  markup_json_bool(j, "b", heavy[SIDE_B]);
  markup_json_close(j);
}

static void put_minutes(markup_json *j, const char *key, int minutes) {
  if (minutes > 0)
    markup_json_integer(j, key, minutes);
  else
    markup_json_null(j, key);
}

/* What a wall has, and by how much it differs from the specified one. */
static void put_figures(markup_json *j, const report *r, const assessment *from,
                        const assessment *x) {
  const wall_numbers *n = &x->numbers, *m = &from->numbers;
  report_json_ratings(j, "ratings", &x->ratings);
  markup_json_string(j, "evidence", x->evidence.match ? "published" : "predicted");
  markup_json_number(j, "rating_change_db", view_trim_shift(r, from, x), DB_DIGITS);
  markup_json_array(j, "probability", true);
  for (int i = 0; i < r->brief->target_count; i++)
    markup_json_number(j, NULL, x->probability[i], SHARE_DIGITS);
  markup_json_close(j);
  markup_json_number(j, "thickness_mm", n->thickness_tenth_mm * 0.1, MM_DIGITS);
  markup_json_number(j, "thickness_change_mm",
                     (n->thickness_tenth_mm - m->thickness_tenth_mm) * 0.1, MM_DIGITS);
  markup_json_number(j, "mass_kg_m2", n->mass_hundredth * 0.01, MASS_DIGITS);
  markup_json_number(j, "mass_change_kg_m2", (n->mass_hundredth - m->mass_hundredth) * 0.01,
                     MASS_DIGITS);
  put_minutes(j, "fire_minutes", n->fire_min);
  markup_json_integer(j, "fire_change_minutes", n->fire_min - m->fire_min);
  markup_json_string(j, "fire_basis", x->fire.minutes > 0 ? x->fire.basis : "not shown");
  markup_json_number(j, "height_m", n->height_mm * 1e-3, METRE_DIGITS);
  markup_json_number(j, "height_change_m", (n->height_mm - m->height_mm) * 1e-3, METRE_DIGITS);
}

static void put_lead(markup_json *j, const report *r, const assessment *x) {
  const char *item;
  double weeks = view_lead_weeks(r, x, &item);
  markup_json_object(j, "lead_time", true);
  markup_json_number(j, "weeks", weeks, 1);
  markup_json_string(j, "item", item);
  markup_json_close(j);
}

static void put_change(markup_json *j, const report *r, const trim_answer *t,
                       const trim_change *c) {
  markup_json_object(j, NULL, false);
  markup_json_string(j, "what", c->what);
  markup_json_string(j, "part", c->name);
  markup_json_string(j, "from", c->from);
  markup_json_string(j, "to", c->to);
  if (!c->alone) {
    markup_json_null(j, "saving_total");
    markup_json_null(j, "saving_per_m2");
    markup_json_null(j, "alone");
    markup_json_string(j, "why_not", c->why_not);
    markup_json_close(j);
    return;
  }
  double area_m2 = t->specified->cost.area_m2;
  markup_json_cents(j, "saving_total", c->saving_cents);
  markup_json_number(j, "saving_per_m2", (double)c->saving_cents / 100 / area_m2, MONEY_DIGITS);
  markup_json_object(j, "alone", false);
  markup_json_string(j, "line", c->alone->line);
  put_figures(j, r, t->specified, c->alone);
  put_heavy(j, c->heavy);
  report_json_rules(j, r, "breaks", c->breaks);
  markup_json_string(j, "effect", view_trim_effect(r, t, c));
  markup_json_close(j);
  markup_json_null(j, "why_not");
  markup_json_close(j);
}

static void put_proposal(markup_json *j, const report *r, const trim_answer *t,
                         const trim_proposal *p) {
  const assessment *x = p->wall;
  long long before = t->specified->numbers.cost_cents;
  markup_json_object(j, NULL, false);
  markup_json_string(j, "line", x->line);
  markup_json_number(j, "saving_per_m2", p->saving_per_m2, MONEY_DIGITS);
  markup_json_number(j, "saving_per_ft2", p->saving_per_m2 * UNITS_M2_PER_FT2, MONEY_DIGITS);
  markup_json_cents(j, "saving_total", p->saving_cents);
  markup_json_cents(j, "net_saving_total", p->net_cents);
  markup_json_number(j, "saving_share", (double)p->saving_cents / (double)before, SHARE_DIGITS);
  markup_json_cents(j, "saving_floor_value",
                    t->specified->cost.floor_value_cents - x->cost.floor_value_cents);
  put_figures(j, r, t->specified, x);
  put_lead(j, r, x);
  put_heavy(j, p->heavy);
  markup_json_array(j, "changes", false);
  for (int i = 0; i < p->change_count; i++) put_change(j, r, t, &p->change[i]);
  markup_json_close(j);
  markup_json_cents(j, "together", p->together_cents);
  markup_json_array(j, "gives_up", false);
  for (int i = 0; i < p->loss_count; i++) markup_json_string(j, NULL, p->loss[i]);
  markup_json_close(j);
  report_json_rating(j, r, "rating", x);
  markup_json_close(j);
}

static void put_promises(markup_json *j, const trim_answer *t) {
  markup_json_object(j, "promised", true);
  if (t->terms.promised_stc > 0)
    markup_json_integer(j, "stc", t->terms.promised_stc);
  else
    markup_json_null(j, "stc");
  put_minutes(j, "fire_minutes", t->terms.promised_fire);
  markup_json_string(j, "design", t->terms.design);
  markup_json_close(j);
}

static void put_bits(markup_json *j, const char *key, unsigned bits, const view_trim_word *words) {
  markup_json_array(j, key, true);
  for (int i = 0; words[i].word != NULL; i++)
    if (bits & words[i].bit) markup_json_string(j, NULL, words[i].word);
  markup_json_close(j);
}

static void put_terms(markup_json *j, const report *r, const trim_answer *t) {
  const brief *b = r->brief;
  markup_json_object(j, "held_to", false);
  markup_json_bool(j, "own", t->terms.own);
  markup_json_array(j, "targets", false);
  for (int i = 0; i < b->target_count; i++) {
    markup_json_object(j, NULL, true);
    markup_json_string(j, "metric", sound_metric_names[b->targets[i].metric]);
    markup_json_number(j, "value", b->targets[i].value, DB_DIGITS);
    markup_json_number(j, "confidence", b->targets[i].confidence, SHARE_DIGITS);
    markup_json_close(j);
  }
  markup_json_close(j);
  put_minutes(j, "fire_minutes", b->fire_min);
  markup_json_number(j, "height_m", b->height_m, METRE_DIGITS);
  if (b->thickness_m.has_max)
    markup_json_number(j, "thickness_mm", b->thickness_m.max * 1e3, MM_DIGITS);
  else
    markup_json_null(j, "thickness_mm");
  markup_json_number(j, "slack_mm", t->terms.slack_m * 1e3, MM_DIGITS);
  put_promises(j, t);
  put_bits(j, "allow", t->terms.allow, view_trim_waivers);
  put_bits(j, "keep", t->terms.keep, view_trim_holds);
  markup_json_cents(j, "redesign_cost", t->terms.redesign_cents);
  markup_json_string(j, "words", view_trim_terms(r, t));
  report_json_rules(j, r, "rules", rules_in_force(b));
  markup_json_close(j);
}

static void put_cheapest(markup_json *j, const trim_answer *t) {
  if (!t->cheapest) {
    markup_json_null(j, "cheapest");
    return;
  }
  markup_json_object(j, "cheapest", true);
  markup_json_string(j, "line", t->cheapest->line);
  markup_json_cents(j, "costs_more", t->cheapest_more_cents);
  markup_json_close(j);
}

void report_trim_json(const report *r, const trim_answer *t, text *out) {
  markup_json j;
  markup_json_init(&j, out);
  markup_json_object(&j, NULL, false);
  markup_json_string(&j, "septum", "trim/1");
  markup_json_string(&j, "version", SEPTUM_VERSION);
  markup_json_string(&j, "title", r->brief->title);
  markup_json_string(&j, "verdict", view_trim_verdict(t));
  put_terms(&j, r, t);
  markup_json_integer(&j, "walls", t->walls);
  markup_json_integer(&j, "found", t->found);
  report_json_unpriced(&j, r);
  report_json_rating(&j, r, "specified", t->specified);
  markup_json_array(&j, "alternatives", false);
  for (int i = 0; i < t->proposal_count; i++) put_proposal(&j, r, t, &t->proposal[i]);
  markup_json_close(&j);
  put_cheapest(&j, t);
  report_json_others(&j, r, "cheaper_but", t->cheaper, t->cheaper_count, true);
  report_json_rule_prices(&j, t->prices, t->price_count);
  exclusions_json(r->brief, &j);
  markup_json_close(&j);
}
