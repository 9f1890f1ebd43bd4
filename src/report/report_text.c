/* `rate` for people: reads without a manual. */
#include "report/report_text.h"

#include <math.h>

#include "report/exclusions.h"
#include "report/fixtures.h"
#include "report/page.h"
#include "report/setting.h"
#include "report/view.h"
#include "septum.h"

/* --- what it is ------------------------------------------------------------------------------ */

enum { WHERE_COLUMNS = 11, SIZE_END = PAGE_WIDTH };

static void put_parts(const report *r, const assessment *x, text *out) {
  view_parts parts;
  view_parts_of(r, &x->wall, &parts);
  for (int i = 0; i < parts.count; i++) {
    const view_part *p = &parts.part[i];
    page_label(out, i == 0 ? "Made of" : "");
    text_put(out, p->where);
    text_pad(out, PAGE_LABEL + WHERE_COLUMNS);
    text_put(out, p->what);
    if (p->thickness_m > 0.0) {
      text size;
      text_init(&size, r->arena, 64);
      units_put_thickness(&size, p->thickness_m, r->units);
      page_right(out, SIZE_END, size.data);
    }
    text_char(out, '\n');
  }
  text all;
  text_init(&all, r->arena, 200);
  units_put_thickness(&all, x->thickness_m, r->units);
  text_put(&all, " thick, ");
  units_put_surface_mass(&all, x->mass_kg_m2, r->units);
  page_label(out, "");
  text_put(out, "together");
  text_pad(out, PAGE_LABEL + WHERE_COLUMNS);
  page_words(out, PAGE_LABEL, all.data);
}

/* --- sound ----------------------------------------------------------------------------------- */

static const char *percent(const report *r, double share) {
  return text_of(r->arena, 100.0 * share, 0);
}

static void put_basis(const report *r, const assessment *x, text *out) {
  const prediction *p = &x->predicted;
  double confidence = view_confidence(r);
  const char *exact = text_of(r->arena, p->exact[METRIC_STC], 1),
             *sd = text_of(r->arena, p->sd[METRIC_STC], 1);
  if (x->evidence.match != NULL) {
    const wall_row *m = x->evidence.match;
    page_line(out, "",
              text_format(r->arena, "%s: STC %d, %s (%s). Rw and OITC are predicted.",
                          m->tested ? "Tested" : "Published", m->stc, m->name, m->source));
    page_line(out, "",
              text_format(r->arena, "The prediction alone: STC %s, sd %s (family %s).", exact, sd,
                          sound_family_names[p->family]));
  } else
    page_line(out, "",
              text_format(r->arena, "Predicted STC %s, sd %s: %s %% sure of STC %d (family %s).",
                          exact, sd, percent(r, confidence),
                          view_assured(r, x, METRIC_STC, confidence),
                          sound_family_names[p->family]));
}

static bool breaks_sound(const assessment *x) {
  const rule_mask sound = (rule_mask)1 << RULE_TARGET | (rule_mask)1 << RULE_CONFIDENCE |
                          (rule_mask)1 << RULE_EVIDENCE | (rule_mask)1 << RULE_COMPOSITE;
  return (x->broken & sound) != 0;
}

static void put_targets(const report *r, const assessment *x, text *out) {
  int count = r->brief->target_count;
  const char *verdict = breaks_sound(x) ? " Not reached." : " Reached.";
  for (int i = 0; i < count; i++) {
    const target *t = &r->brief->targets[i];
    const char *found = view_published(x, t->metric)
                            ? text_format(r->arena, "%s STC %d",
                                          x->evidence.match->tested ? "tested" : "published",
                                          x->ratings.stc)
                            : text_format(r->arena, "%s %% sure", view_sureness(r, x->probability[i]));
    page_line(out, "",
              text_format(r->arena, "Target %s: %s.%s", view_target(r, t), found,
                          count == 1 ? verdict : ""));
  }
  if (count > 1) page_line(out, "", breaks_sound(x) ? "Not all reached." : "All reached.");
}

static void put_near(const report *r, const evidence_near *n, text *out) {
  page_line(out, "", text_format(r->arena, "%s, STC %d: %s", n->row->id, n->row->stc, n->line));
  text differs;
  text_init(&differs, r->arena, 2000);
  for (int i = 0; i < n->differ_count; i++)
    text_putf(&differs, "%s%s", i == 0 ? "" : "; ", n->differs[i]);
  page_label(out, "");
  text_put(out, "  ");
  page_words(out, PAGE_LABEL + 2,
             text_format(r->arena, "%s. %s.", n->differ_count == 0 ? "the same wall" : differs.data,
                         n->row->source));
}

static void put_evidence(const report *r, const assessment *x, text *out) {
  const evidence *e = &x->evidence;
  if (e->nearest_count > 0)
    page_line(out, "Evidence", "Nearest published walls, and what they have otherwise:");
  for (int i = 0; i < e->nearest_count; i++) put_near(r, &e->nearest[i], out);
}

static void put_sound(const report *r, const assessment *x, text *out) {
  page_line(out, "Sound", text_format(r->arena, "%s.", view_ratings(r, &x->ratings)));
  put_basis(r, x, out);
  put_targets(r, x, out);
  if (x->mounted)
    page_line(out, "",
              text_format(r->arena, "If a fixture or a long screw bridges the mount: %s (%s).",
                          view_ratings(r, &x->short_predicted.ratings), x->short_line));
  if (x->has_composite)
    page_line(out, "",
              text_format(r->arena, "With its openings: %s; no wall gets past STC %s with these.",
                          view_ratings(r, &x->composite),
                          text_of(r->arena, x->composite_ceiling, 1)));
  setting_text(r, x, out);
  put_evidence(r, x, out);
}

/* --- other checks ---------------------------------------------------------------------------- */

static void put_fire(const report *r, const assessment *x, text *out) {
  bool code = r->brief->code != CODE_NONE;
  const char *under = code ? text_format(r->arena, " under code %s", view_code(r)) : "";
  const char *asked =
      r->brief->fire_min > 0 ? text_format(r->arena, "; asked %d min", r->brief->fire_min) : "";
  const char *words;
  if (x->fire.minutes > 0)
    words = text_format(r->arena, "%d min%s%s: %s. Source: %s.", x->fire.minutes, under, asked,
                        x->fire.basis, x->fire.source);
  else
    words = text_format(r->arena, "not shown%s%s: %s.", under, asked,
                        code ? "no rule, row or listing covers this wall"
                             : "no code is named, and no listing covers this wall");
  page_line(out, "Fire", words);
}

static void put_height(const report *r, const assessment *x, text *out) {
  text t;
  text_init(&t, r->arena, 2000);
  text_put(&t, "up to ");
  units_put_height(&t, x->height.limit_m, r->units);
  text_put(&t, r->asked ? "; asked " : "; reference wall ");
  units_put_height(&t, r->brief->height_m, r->units);
  text_putf(&t, ". Basis: %s (%s governs).", x->height.basis, x->height.governs);
  page_line(out, "Height", t.data);
}

static void put_kept(const report *r, const assessment *x, text *out) {
  text kept;
  text_init(&kept, r->arena, 4000);
  /* A price for every item is a condition of any answer, not a rule that somebody set. */
  rule_mask mask = rules_in_force(r->brief) & ~x->broken & ~((rule_mask)1 << RULE_PRICE);
  for (int i = 0; i < RULES_MAX; i++)
    if ((mask >> i) & 1u)
      text_putf(&kept, "%s%s", kept.len ? ", " : "", rule_name(r->arena, r->brief, i));
  page_line(out, "Rules", text_format(r->arena, "Kept: %s.", kept.len ? kept.data : "none"));
}

static void put_rules(const report *r, const assessment *x, text *out) {
  if (r->asked) put_kept(r, x, out);
  for (int i = 0; i < x->broken_count; i++) {
    const broken_rule *b = &x->broke[i];
    page_line(out, r->asked || i > 0 ? "" : "Rules",
              text_format(r->arena, "Broken: %s: asks %s; has: %s.",
                          rule_name(r->arena, r->brief, b->rule), b->limit,
                          view_clause(r, b->found)));
  }
}

/* --- cost ------------------------------------------------------------------------------------ */

static void put_size(const report *r, text *out) {
  units_put_height(out, r->brief->length_m, r->units);
  text_put(out, " x ");
  units_put_height(out, r->brief->height_m, r->units);
}

static void put_cost(const report *r, const assessment *x, text *out) {
  view_cost v = view_cost_of(r, x);
  if (!v.costed) {
    page_line(out, "Cost",
              text_format(r->arena, "not known: the price book has no price for %s.",
                          x->takeoff.missing_code ? x->takeoff.missing_code : "some item"));
    return;
  }
  bool us = r->units == UNITS_US;
  text t;
  text_init(&t, r->arena, 1000);
  text_putf(&t, "%s, ", view_money(r, us ? v.per_ft2 : v.per_m2, us ? "ft2" : "m2"));
  text_putf(&t, "%s, ", view_money(r, us ? v.per_m2 : v.per_ft2, us ? "m2" : "ft2"));
  text_putf(&t, "%s; ", view_money(r, us ? v.per_ft : v.per_m, us ? "ft of wall" : "m of wall"));
  text_putf(&t, "%s for %s of ", view_money(r, (double)x->cost.total_cents / 100.0, NULL),
            r->asked ? "the wall" : "a reference wall");
  put_size(r, &t);
  text_char(&t, '.');
  page_line(out, "Cost", t.data);
  const char *load =
      us ? text_format(r->arena, "%s lb per ft",
                       text_of(r->arena, v.load_kg_m * UNITS_M_PER_FT / UNITS_KG_PER_LB, 0))
         : text_format(r->arena, "%s kg per m", text_of(r->arena, v.load_kg_m, 0));
  page_line(out, "",
            text_format(r->arena, "%s hours per %s; dead load %s of wall.",
                        text_of(r->arena, us ? v.hours_per_ft2 : v.hours_per_m2, us ? 3 : 2),
                        us ? "ft2" : "m2", load));
  if (x->cost.floor_value_cents > 0)
    page_line(out, "",
              text_format(r->arena, "Value of the floor under it: %s, apart from the cost.",
                          view_money(r, (double)x->cost.floor_value_cents / 100.0, NULL)));
  page_line(out, "",
            text_format(r->arena, "Price book: %s; %s; %s; %s.", r->prices->name, r->prices->place,
                        r->prices->date, r->prices->source));
}

/* Columns of the takeoff table, each the end of its field. */
enum {
  ITEM_AT = 10,
  ITEM_COLUMNS = 41,
  KIND_AT = 53,
  QUANTITY_END = 74,
  UNIT_AT = 75,
  RATE_END = 88,
  AMOUNT_END = 100
};

static void put_takeoff_line(const report *r, const cost_line *l, text *out) {
  view_quantity q = view_quantity_of(r, l);
  text_put(out, l->section != NULL ? l->section : "");
  text_pad(out, ITEM_AT);
  page_cut(out, ITEM_COLUMNS, l->name);
  text_pad(out, KIND_AT);
  text_put(out, view_line_kind(l));
  page_right(out, QUANTITY_END, text_of(r->arena, q.quantity, 2));
  text_pad(out, UNIT_AT);
  text_put(out, q.unit);
  page_right(out, RATE_END, text_of(r->arena, q.rate, q.unit[0] != '\0' ? 3 : 4));
  text amount;
  text_init(&amount, r->arena, 64);
  text_cents(&amount, l->cents, true);
  page_right(out, AMOUNT_END, amount.data);
  text_char(out, '\n');
}

static void put_takeoff(const report *r, const assessment *x, text *out) {
  if (r->prices == NULL || x->takeoff.count == 0 || x->takeoff.missing) return;
  text_put(out, "\nTakeoff");
  text_pad(out, ITEM_AT);
  text_put(out, "item");
  text_pad(out, KIND_AT);
  text_put(out, "kind");
  page_right(out, QUANTITY_END, "quantity");
  text_pad(out, UNIT_AT);
  text_put(out, "unit");
  page_right(out, RATE_END, "rate");
  page_right(out, AMOUNT_END, text_format(r->arena, "amount %s", r->prices->currency));
  text_char(out, '\n');
  for (int i = 0; i < x->takeoff.count; i++) put_takeoff_line(r, &x->takeoff.line[i], out);
  text total;
  text_init(&total, r->arena, 64);
  text_cents(&total, x->cost.total_cents, true);
  text_pad(out, ITEM_AT);
  text_put(out, "total");
  page_right(out, AMOUNT_END, total.data);
  text_put(out, "\n\n");
}

/* --- together -------------------------------------------------------------------------------- */

static void put_cautions(const report *r, const assessment *x, text *out) {
  const char *caution[VIEW_MAX_CAUTIONS];
  int count = view_cautions(r, x, caution);
  for (int i = 0; i < count; i++) {
    page_label(out, i == 0 ? "Cautions" : "");
    text_put(out, "- ");
    page_words(out, PAGE_LABEL + 2, caution[i]);
  }
}

void report_wall_text(const report *r, const assessment *x, text *out) {
  page_line(out, "Wall", x->line);
  if (x->name != NULL) page_line(out, "", x->name);
  put_parts(r, x, out);
  put_sound(r, x, out);
  put_fire(r, x, out);
  put_height(r, x, out);
  put_rules(r, x, out);
  put_cost(r, x, out);
  put_takeoff(r, x, out);
  put_cautions(r, x, out);
  exclusions_text(r->brief, out);
}

void report_unpriced_text(const report *r, text *out) {
  if (r->prices == NULL) return;
  price_codes l = prices_codes(r->arena, r->catalog, r->prices);
  text t;
  size_t n = 0;
  text_init(&t, r->arena, 64 << 10);
  for (size_t i = 0; i < l.count; i++) {
    if (!l.priced[i]) text_putf(&t, "%s%s", n++ ? ", " : "No price for ", l.code[i]);
  }
  if (n == 0) return;
  text_put(&t, ": walls that need one of these are left out.");
  page_line(out, "Unpriced", t.data);
}

void report_rate_text(const report *r, const assessment *x, text *out) {
  if (r->asked && r->brief->title[0] != '\0') page_line(out, "Brief", r->brief->title);
  report_wall_text(r, x, out);
  fixtures_text(r, out);
  page_line(out, "Made by", "septum " SEPTUM_VERSION);
}

void report_check_text(const checked_file *files, size_t count, text *out) {
  enum { WHAT_AT = 6, PATH_AT = 22 };
  for (size_t i = 0; i < count; i++) {
    const checked_file *f = &files[i];
    text_put(out, f->errors == 0 ? "ok" : "bad");
    text_pad(out, WHAT_AT);
    page_put(out, f->kind != NULL ? f->kind : "?");
    text_pad(out, PATH_AT);
    page_put(out, f->path);
    if (f->errors > 0) text_putf(out, "  (%zu error%s)", f->errors, f->errors == 1 ? "" : "s");
    text_char(out, '\n');
  }
}

void report_conflicts_text(const report *r, const explanation *e, text *out) {
  for (int i = 0; i < e->conflict_count; i++) {
    text t;
    int rules = 0;
    text_init(&t, r->arena, 2000);
    for (int k = 0; k < RULES_MAX; k++)
      if ((e->conflicts[i] >> k) & 1u)
        text_putf(&t, "%s%s", rules++ ? " and " : "", rule_name(r->arena, r->brief, k));
    text_put(&t, rules > 1 ? " cannot be had together." : " cannot be had at all.");
    page_line(out, i == 0 ? "In the way" : "", t.data);
  }
  report_others_text(r, "Near misses", "Walls that come nearest", e->nearest, e->nearest_count,
                     true, out);
}
