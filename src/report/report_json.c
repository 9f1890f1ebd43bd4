/* Answers as JSON: the keys of docs/formats/answers.md. SI; money in the book's currency. Decimals
 * are as many as the figures carry: quantities and rates with six, so that quantity x rate gives
 * the amount to the cent. */
#include <math.h>

#include "report/exclusions.h"
#include "report/fixtures.h"
#include "report/report_json.h"
#include "report/setting.h"
#include "report/view.h"
#include "septum.h"

enum {
  CENT_DIGITS = 2,
  DB_DIGITS = 1,
  SD_DIGITS = 2,
  SHARE_DIGITS = 3,
  MM_DIGITS = 1,
  MASS_DIGITS = 2,
  MONEY_DIGITS = 4,
  QUANTITY_DIGITS = 6,
  HEIGHT_DIGITS = 2
};

/* --- wall/1 ---------------------------------------------------------------------------------- */

static void put_face(markup_json *j, const report *r, const char *key, const face *f) {
  markup_json_array(j, key, true);
  for (int i = 0; i < f->count; i++)
    markup_json_string(j, NULL, r->catalog->layers[f->layer[i]].id);
  markup_json_close(j);
}

static void put_fills(markup_json *j, const report *r, const wall *w) {
  int last = w->fill[1] != CATALOG_NONE ? 2 : w->fill[0] != CATALOG_NONE ? 1 : 0;
  markup_json_array(j, "fill", true);
  for (int i = 0; i < last; i++)
    markup_json_string(j, NULL,
                       w->fill[i] == CATALOG_NONE ? NULL : r->catalog->fills[w->fill[i]].id);
  markup_json_close(j);
}

static void put_mount(markup_json *j, const report *r, const char *key, const wall_mount *m) {
  if (m->mount == CATALOG_NONE) {
    markup_json_null(j, key);
    return;
  }
  markup_json_object(j, key, true);
  markup_json_string(j, "id", r->catalog->mounts[m->mount].id);
  markup_json_integer(j, "spacing_mm", m->spacing_mm);
  if (m->clip_spacing_mm > 0) markup_json_integer(j, "clip_spacing_mm", m->clip_spacing_mm);
  markup_json_close(j);
}

static void put_wall(markup_json *j, const report *r, const assessment *x) {
  const wall *w = &x->wall;
  const frame *f = &r->catalog->frames[w->frame];
  markup_json_object(j, "wall", false);
  markup_json_string(j, "septum", "wall/1");
  if (x->name != NULL) markup_json_string(j, "name", x->name);
  put_face(j, r, "side_a", &w->side[SIDE_A]);
  put_face(j, r, "side_b", &w->side[SIDE_B]);
  markup_json_object(j, "frame", true);
  markup_json_string(j, "id", f->id);
  markup_json_integer(j, "spacing_mm", w->spacing_mm);
  markup_json_close(j);
  if (f->rows > 1) markup_json_integer(j, "gap_mm", w->gap_mm);
  put_fills(j, r, w);
  put_mount(j, r, "mount_a", &w->mount[SIDE_A]);
  put_mount(j, r, "mount_b", &w->mount[SIDE_B]);
  if (w->sheath[SIDE_A].count > 0) put_face(j, r, "sheath_a", &w->sheath[SIDE_A]);
  if (w->sheath[SIDE_B].count > 0) put_face(j, r, "sheath_b", &w->sheath[SIDE_B]);
  if (w->inner[SIDE_A].count > 0) put_face(j, r, "inner_a", &w->inner[SIDE_A]);
  if (w->inner[SIDE_B].count > 0) put_face(j, r, "inner_b", &w->inner[SIDE_B]);
  markup_json_close(j);
}

/* --- sound ----------------------------------------------------------------------------------- */

static void put_bands(markup_json *j, const char *key, const double value[BANDS], int decimals) {
  markup_json_array(j, key, true);
  for (int i = 0; i < BANDS; i++) markup_json_number(j, NULL, value[i], decimals);
  markup_json_close(j);
}

void report_json_ratings(markup_json *j, const char *key, const ratings *v) {
  markup_json_object(j, key, true);
  markup_json_integer(j, "STC", v->stc);
  markup_json_integer(j, "Rw", v->rw);
  markup_json_integer(j, "C", v->c);
  markup_json_integer(j, "Ctr", v->ctr);
  markup_json_integer(j, "OITC", v->oitc);
  markup_json_close(j);
}

static void put_metrics(markup_json *j, const char *key, const double value[METRIC_COUNT],
                        int decimals) {
  markup_json_object(j, key, true);
  for (int i = 0; i < METRIC_COUNT; i++)
    markup_json_number(j, sound_metric_names[i], value[i], decimals);
  markup_json_close(j);
}

static void put_sound(markup_json *j, const assessment *x) {
  const prediction *p = &x->predicted;
  put_bands(j, "bands_hz", bands_hz, 1);
  put_bands(j, "tl_db", p->tl_db, DB_DIGITS);
  report_json_ratings(j, "ratings", &x->ratings);
  markup_json_number(j, "stc_exact", p->exact[METRIC_STC], DB_DIGITS);
  markup_json_number(j, "sd", p->sd[METRIC_STC], SD_DIGITS);
  put_metrics(j, "exact", p->exact, DB_DIGITS);
  markup_json_string(j, "family", sound_family_names[p->family]);
  markup_json_object(j, "prediction", false);
  report_json_ratings(j, "ratings", &p->ratings);
  put_metrics(j, "exact", p->exact, DB_DIGITS);
  put_metrics(j, "sd", p->sd, SD_DIGITS);
  markup_json_array(j, "outside", false);
  for (int i = 0; i < p->outside && i < PREDICT_MAX_REASONS; i++)
    markup_json_string(j, NULL, p->outside_reason[i]);
  markup_json_close(j);
  markup_json_close(j);
}

static void put_near(markup_json *j, const evidence_near *n) {
  markup_json_object(j, NULL, false);
  markup_json_string(j, "id", n->row->id);
  markup_json_integer(j, "rating", n->row->stc);
  markup_json_string(j, "line", n->line);
  markup_json_array(j, "differs", true);
  for (int i = 0; i < n->differ_count; i++) markup_json_string(j, NULL, n->differs[i]);
  markup_json_close(j);
  markup_json_string(j, "source", n->row->source);
  markup_json_close(j);
}

static void put_evidence(markup_json *j, const assessment *x) {
  const wall_row *match = x->evidence.match;
  markup_json_object(j, "evidence", false);
  markup_json_string(j, "kind", match != NULL ? "published" : "predicted");
  markup_json_string(j, "rests_on", view_rests_on(x));
  if (match != NULL) {
    markup_json_object(j, "match", true);
    markup_json_string(j, "id", match->id);
    markup_json_integer(j, "rating", match->stc);
    markup_json_number(j, "sd", match->stc_sd, SD_DIGITS);
    markup_json_string(j, "source", match->source);
    markup_json_close(j);
  } else
    markup_json_null(j, "match");
  markup_json_array(j, "nearest", false);
  for (int i = 0; i < x->evidence.nearest_count; i++) put_near(j, &x->evidence.nearest[i]);
  markup_json_close(j);
  markup_json_close(j);
}

static void put_targets(markup_json *j, const report *r, const assessment *x) {
  markup_json_array(j, "targets", false);
  for (int i = 0; i < r->brief->target_count; i++) {
    const target *t = &r->brief->targets[i];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "metric", sound_metric_names[t->metric]);
    markup_json_number(j, "value", t->value, DB_DIGITS);
    markup_json_string(j, "basis", t->basis == BASIS_FIELD ? "field" : "lab");
    markup_json_number(j, "confidence", t->confidence, SHARE_DIGITS);
    markup_json_string(j, "evidence", t->evidence == EVIDENCE_PUBLISHED ? "published" : "any");
    markup_json_string(j, "scope", t->composite ? "composite" : "wall");
    markup_json_number(j, "margin", t->margin, DB_DIGITS);
    markup_json_number(j, "probability", x->probability[i], SHARE_DIGITS);
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_other_sound(markup_json *j, const assessment *x) {
  if (x->mounted) {
    markup_json_object(j, "short_circuit", false);
    report_json_ratings(j, "ratings", &x->short_predicted.ratings);
    markup_json_number(j, "stc_exact", x->short_predicted.exact[METRIC_STC], DB_DIGITS);
    markup_json_string(j, "line", x->short_line);
    markup_json_close(j);
  } else
    markup_json_null(j, "short_circuit");
  if (!x->has_composite) {
    markup_json_null(j, "composite");
    return;
  }
  markup_json_object(j, "composite", false);
  report_json_ratings(j, "ratings", &x->composite);
  put_metrics(j, "exact", x->composite_exact, DB_DIGITS);
  markup_json_number(j, "ceiling", x->composite_ceiling, DB_DIGITS);
  markup_json_close(j);
}

/* --- other checks ---------------------------------------------------------------------------- */

static void put_checks(markup_json *j, const report *r, const assessment *x) {
  markup_json_number(j, "thickness_mm", x->thickness_m * 1e3, MM_DIGITS);
  markup_json_number(j, "mass_kg_m2", x->mass_kg_m2, MASS_DIGITS);
  markup_json_object(j, "fire", false);
  if (x->fire.minutes > 0)
    markup_json_integer(j, "minutes", x->fire.minutes);
  else
    markup_json_null(j, "minutes");
  markup_json_string(j, "basis", x->fire.minutes > 0 ? x->fire.basis : "not shown");
  markup_json_string(j, "code", view_code(r));
  markup_json_string(j, "row", x->fire.row_id);
  markup_json_string(j, "rests_on", view_fire_rests_on(r, x));
  markup_json_string(j, "source", x->fire.minutes > 0 ? x->fire.source : NULL);
  markup_json_close(j);
  markup_json_object(j, "height", false);
  markup_json_number(j, "limit_m", x->height.limit_m, HEIGHT_DIGITS);
  markup_json_string(j, "basis", x->height.basis);
  markup_json_string(j, "governs", x->height.governs);
  markup_json_string(j, "source", x->height.source);
  markup_json_close(j);
}

void report_json_broken(markup_json *j, const report *r, const char *key, const assessment *x) {
  markup_json_array(j, key, false);
  for (int i = 0; i < x->broken_count; i++) {
    const broken_rule *b = &x->broke[i];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "rule", rule_name(r->arena, r->brief, b->rule));
    markup_json_string(j, "limit", b->limit);
    markup_json_string(j, "found", b->found);
    markup_json_close(j);
  }
  markup_json_close(j);
}

void report_json_rules(markup_json *j, const report *r, const char *key, rule_mask mask) {
  markup_json_array(j, key, true);
  for (int i = 0; i < RULES_MAX; i++)
    if ((mask >> i) & 1u) markup_json_string(j, NULL, rule_name(r->arena, r->brief, i));
  markup_json_close(j);
}

static void put_rules(markup_json *j, const report *r, const assessment *x) {
  markup_json_object(j, "rules", false);
  report_json_rules(j, r, "in_force", rules_in_force(r->brief));
  report_json_broken(j, r, "broken", x);
  markup_json_close(j);
}

/* --- cost ------------------------------------------------------------------------------------ */

static void put_lines(markup_json *j, const report *r, const takeoff *t) {
  markup_json_array(j, "lines", false);
  for (int i = 0; i < t->count; i++) {
    const cost_line *l = &t->line[i];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "item", view_item(r, l));
    markup_json_string(j, "name", l->name);
    markup_json_string(j, "section", l->section);
    markup_json_string(j, "kind", view_line_kind(l));
    markup_json_number(j, "quantity", l->quantity, QUANTITY_DIGITS);
    markup_json_string(j, "unit", l->unit);
    markup_json_number(j, "rate", l->rate, QUANTITY_DIGITS);
    markup_json_cents(j, "amount", l->cents);
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_book(markup_json *j, const price_book *b) {
  markup_json_object(j, "prices", true);
  markup_json_string(j, "name", b->name);
  markup_json_string(j, "place", b->place);
  markup_json_string(j, "date", b->date);
  markup_json_string(j, "source", b->source);
  markup_json_close(j);
}

static void put_cost(markup_json *j, const report *r, const assessment *x) {
  view_cost v = view_cost_of(r, x);
  if (!v.costed) {
    markup_json_null(j, "cost");
    return;
  }
  markup_json_object(j, "cost", false);
  markup_json_string(j, "currency", r->prices->currency);
  markup_json_number(j, "per_m2", v.per_m2, MONEY_DIGITS);
  markup_json_number(j, "per_ft2", v.per_ft2, MONEY_DIGITS);
  markup_json_number(j, "per_m", v.per_m, MONEY_DIGITS);
  markup_json_number(j, "per_ft", v.per_ft, MONEY_DIGITS);
  markup_json_number(j, "hours_per_m2", v.hours_per_m2, MONEY_DIGITS);
  markup_json_cents(j, "material", x->cost.material_cents);
  markup_json_cents(j, "labour", x->cost.labour_cents);
  markup_json_cents(j, "markup", x->cost.markup_cents);
  markup_json_cents(j, "total", x->cost.total_cents);
  markup_json_cents(j, "floor_value", x->cost.floor_value_cents);
  markup_json_number(j, "area_m2", x->cost.area_m2, QUANTITY_DIGITS);
  markup_json_number(j, "length_m", r->brief->length_m, QUANTITY_DIGITS);
  markup_json_number(j, "height_m", r->brief->height_m, QUANTITY_DIGITS);
  markup_json_number(j, "dead_load_kg_m", v.load_kg_m, MASS_DIGITS);
  put_book(j, r->prices);
  put_lines(j, r, &x->takeoff);
  markup_json_close(j);
}

/* --- answers --------------------------------------------------------------------------------- */

static void put_rating(markup_json *j, const report *r, const assessment *x) {
  markup_json_string(j, "septum", "rating/1");
  markup_json_string(j, "version", SEPTUM_VERSION);
  report_json_rating_facts(j, r, x);
}

void report_json_rating(markup_json *j, const report *r, const char *key, const assessment *x) {
  if (x == NULL) {
    markup_json_null(j, key);
    return;
  }
  markup_json_object(j, key, false);
  put_rating(j, r, x);
  markup_json_close(j);
}

void report_json_rating_facts(markup_json *j, const report *r, const assessment *x) {
  put_wall(j, r, x);
  markup_json_string(j, "line", x->line);
  put_sound(j, x);
  put_targets(j, r, x);
  put_evidence(j, x);
  put_checks(j, r, x);
  put_other_sound(j, x);
  setting_json(r, x, j);
  put_rules(j, r, x);
  put_cost(j, r, x);
  const char *caution[VIEW_MAX_CAUTIONS];
  int cautions = view_cautions(r, x, caution);
  markup_json_array(j, "cautions", false);
  for (int i = 0; i < cautions; i++) markup_json_string(j, NULL, caution[i]);
  markup_json_close(j);
}

void report_rate_json(const report *r, const assessment *x, text *out) {
  markup_json j;
  markup_json_init(&j, out);
  markup_json_object(&j, NULL, false);
  put_rating(&j, r, x);
  fixtures_json(r, &j);
  exclusions_json(r->brief, &j);
  markup_json_close(&j);
}

/* A wall that was not chosen: enough to compare. `fails`: with the rules it breaks. */
static void put_other(markup_json *j, const report *r, const assessment *x, bool fails) {
  view_cost v = view_cost_of(r, x);
  markup_json_object(j, NULL, false);
  markup_json_string(j, "line", x->line);
  if (v.costed)
    markup_json_number(j, "cost_per_m2", v.per_m2, MONEY_DIGITS);
  else
    markup_json_null(j, "cost_per_m2");
  markup_json_number(j, "cost_per_ft2", v.per_ft2, MONEY_DIGITS);
  markup_json_number(j, "floor_value_per_m2", v.floor_per_m2, MONEY_DIGITS);
  report_json_ratings(j, "ratings", &x->ratings);
  markup_json_string(j, "evidence", x->evidence.match != NULL ? "published" : "predicted");
  markup_json_number(j, "thickness_mm", x->thickness_m * 1e3, MM_DIGITS);
  markup_json_number(j, "mass_kg_m2", x->mass_kg_m2, MASS_DIGITS);
  if (fails) report_json_broken(j, r, "fails", x);
  markup_json_close(j);
}

void report_json_others(markup_json *j, const report *r, const char *key, assessment *const *x,
                        int count, bool fails) {
  markup_json_array(j, key, false);
  for (int i = 0; i < count; i++) put_other(j, r, x[i], fails);
  markup_json_close(j);
}

void report_json_rule_prices(markup_json *j, const explain_rule_price *prices, int count) {
  markup_json_array(j, "price_of_rules", false);
  for (int i = 0; i < count; i++) {
    const explain_rule_price *p = &prices[i];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "rule", p->name);
    markup_json_string(j, "from", p->from);
    markup_json_string(j, "to", p->to);
    double by_area = p->reachable ? p->price_per_m2 : NAN;
    markup_json_number(j, "price_per_m2", by_area, MONEY_DIGITS);
    markup_json_number(j, "price_per_ft2", by_area * UNITS_M2_PER_FT2, MONEY_DIGITS);
    markup_json_number(j, "price_total", p->reachable ? p->price_total : NAN, CENT_DIGITS);
    markup_json_string(j, "line", p->wall != NULL ? p->wall->line : NULL);
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_break_even(markup_json *j, const explanation *e) {
  markup_json_array(j, "break_even", false);
  for (int i = 0; i < e->break_even_count; i++) {
    const explain_break_even *b = &e->break_even[i];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "item", b->item);
    markup_json_string(j, "unit", b->unit);
    markup_json_number(j, "price", b->price, QUANTITY_DIGITS);
    if (b->has_low)
      markup_json_number(j, "low", b->low, QUANTITY_DIGITS);
    else
      markup_json_null(j, "low");
    markup_json_string(j, "low_line", b->has_low ? b->low_line : NULL);
    if (b->has_high)
      markup_json_number(j, "high", b->high, QUANTITY_DIGITS);
    else
      markup_json_null(j, "high");
    markup_json_string(j, "high_line", b->has_high ? b->high_line : NULL);
    markup_json_close(j);
  }
  markup_json_close(j);
}

/* What walls were left out for. */
void report_json_unpriced(markup_json *j, const report *r) {
  markup_json_array(j, "unpriced", true);
  if (r->prices != NULL) {
    price_codes l = prices_codes(r->arena, r->catalog, r->prices);
    for (size_t i = 0; i < l.count; i++)
      if (!l.priced[i]) markup_json_string(j, NULL, l.code[i]);
  }
  markup_json_close(j);
}

void report_pick_json(const report *r, const explanation *e, const pick_choice *proof, text *out) {
  markup_json j;
  markup_json_init(&j, out);
  markup_json_object(&j, NULL, false);
  markup_json_string(&j, "septum", "pick/1");
  markup_json_string(&j, "version", SEPTUM_VERSION);
  markup_json_string(&j, "title", r->brief->title);
  markup_json_string(&j, "status", view_status(e));
  markup_json_number(&j, "objective", proof->found ? proof->objective : NAN, CENT_DIGITS);
  markup_json_number(&j, "bound", proof->found ? proof->bound : NAN, CENT_DIGITS);
  markup_json_integer(&j, "walls", e->walls);
  markup_json_integer(&j, "candidates", e->frontier);
  report_json_unpriced(&j, r);
  report_json_rules(&j, r, "rules", rules_in_force(r->brief));
  report_json_rating(&j, r, "chosen", e->chosen);
  report_json_others(&j, r, "runners_up", e->runners, e->runner_count, false);
  report_json_others(&j, r, "cheaper_but", e->cheaper, e->cheaper_count, true);
  report_json_rule_prices(&j, e->prices, e->price_count);
  put_break_even(&j, e);
  markup_json_array(&j, "conflicts", false);
  for (int i = 0; i < e->conflict_count; i++) report_json_rules(&j, r, NULL, e->conflicts[i]);
  markup_json_close(&j);
  report_json_others(&j, r, "nearest", e->nearest, e->nearest_count, true);
  fixtures_json(r, &j);
  exclusions_json(r->brief, &j);
  markup_json_close(&j);
}

void report_check_json(const checked_file *files, size_t count, text *out) {
  markup_json j;
  markup_json_init(&j, out);
  markup_json_object(&j, NULL, false);
  markup_json_string(&j, "septum", "check/1");
  markup_json_array(&j, "files", false);
  for (size_t i = 0; i < count; i++) {
    markup_json_object(&j, NULL, true);
    markup_json_string(&j, "path", files[i].path);
    markup_json_string(&j, "kind", files[i].kind);
    markup_json_bool(&j, "ok", files[i].errors == 0);
    markup_json_integer(&j, "errors", (long long)files[i].errors);
    markup_json_close(&j);
  }
  markup_json_close(&j);
  markup_json_close(&j);
}
