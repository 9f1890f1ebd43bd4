/* `ladder` for the estimator: a line of figures a rung, its wall, what changed. */
#include "report/exclusions.h"
#include "report/page.h"
#include "report/report_text.h"
#include "report/view_ladder.h"
#include "septum.h"

/* Columns of the table: where fields end or stand. */
enum {
  RATING_END = 11,
  COST_END = 23,
  TOTAL_END = 37,
  STEP_END = 49,
  POINT_END = 60,
  THICK_AT = 63,
  PREDICTED_AT = 75,
  ALONE_AT = 89
};

static const char *cents_words(const report *r, long long cents, bool sign) {
  text t;
  text_init(&t, r->arena, 64);
  if (sign && cents > 0) text_char(&t, '+');
  text_cents(&t, cents, true);
  return t.data;
}

static long long rounded(double value) {
  return (long long)(value < 0 ? value - 0.5 : value + 0.5);
}

/* Money of the whole wall, per unit of area. */
static const char *by_area(const report *r, const assessment *x, double cents, bool sign) {
  double area = r->units == UNITS_US ? UNITS_M2_PER_FT2 : 1;
  return cents_words(r, rounded(cents / x->cost.area_m2 * area), sign);
}

static const char *area_name(const report *r) {
  return r->units == UNITS_US ? "ft2" : "m2";
}

static const char *predicted_words(const report *r, const ladder_answer *l, const assessment *x) {
  view_predicted p = view_ladder_predicted(r, l, x);
  if (p.published) return "published";
  return text_format(r->arena, "%s, sd %s", text_of(r->arena, p.exact, 1),
                     text_of(r->arena, p.sd, 1));
}

static const char *money_words(const report *r, const assessment *x, long long cents) {
  const char *word = cents < 0 ? "less" : "more";
  long long plain = cents < 0 ? -cents : cents;
  return text_format(r->arena, "%s %s per %s %s, %s for the wall",
                     by_area(r, x, (double)plain, false), r->prices->currency, area_name(r), word,
                     cents_words(r, plain, false));
}

/* --- the given wall -------------------------------------------------------------------------- */

static void put_have(const report *r, const ladder_answer *l, text *out) {
  const assessment *x = l->terms.have;
  if (!x) return;
  text t;
  text_init(&t, r->arena, 1000);
  page_line(out, "You have", x->line);
  if (x->name) page_line(out, "", x->name);
  if (l->terms.have_reaches > 0)
    text_putf(&t, "It meets %s %d", view_ladder_metric(r, l), l->terms.have_reaches);
  else
    text_putf(&t, "It meets no %s of this brief", view_ladder_metric(r, l));
  text_putf(&t, " (%s); ", predicted_words(r, l, x));
  if (!x->takeoff.missing)
    text_putf(&t, "%s %s per %s, %s for the wall; ",
              by_area(r, x, (double)x->cost.total_cents, false), r->prices->currency, area_name(r),
              cents_words(r, x->cost.total_cents, false));
  units_put_thickness(&t, x->thickness_m, r->units);
  text_put(&t, " thick.");
  page_line(out, "", t.data);
  for (int i = 0; i < x->broken_count; i++) {
    const broken_rule *b = &x->broke[i];
    page_line(out, "",
              text_format(r->arena, "It breaks %s: asks %s; has: %s.",
                          rule_name(r->arena, r->brief, b->rule), b->limit,
                          view_clause(r, b->found)));
  }
}

/* ", the least for +3 and +5" */
static const char *least_words(const report *r, const ladder_answer *l, int i) {
  text t;
  text_init(&t, r->arena, 200);
  for (int gain = 0; gain < LADDER_GAINS; gain++)
    if (ladder_least_for(l, i, gain))
      text_putf(&t, "%s +%d", t.len ? " and" : ", the least for", ladder_gains[gain]);
  return t.data;
}

static void put_edits(const report *r, const ladder_answer *l, text *out) {
  if (!l->terms.have || l->edit_count == 0) return;
  text_char(out, '\n');
  page_line(out, "One change",
            "What a single change of your wall gains, each the cheapest for its rating:");
  for (int i = 0; i < l->edit_count; i++) {
    const ladder_edit *e = &l->edit[i];
    page_label(out, "");
    page_words(out, PAGE_LABEL + 2,
               text_format(r->arena, "%s %d (+%d%s): %s: %s", view_ladder_metric(r, l),
                           e->reaches, e->reaches - l->terms.have_reaches, least_words(r, l, i),
                           changes_words(r->arena, &e->change),
                           money_words(r, e->wall, e->extra_cents)));
    text_pad(out, PAGE_LABEL + 2);
    page_words(out, PAGE_LABEL + 2, e->wall->line);
  }
}

/* --- rungs ----------------------------------------------------------------------------------- */

static void put_head(const report *r, const ladder_answer *l, text *out) {
  const char *currency = r->prices->currency;
  page_right(out, RATING_END, view_ladder_metric(r, l));
  page_right(out, COST_END, text_format(r->arena, "%s/%s", currency, area_name(r)));
  page_right(out, TOTAL_END, r->brief->floor_area_value_per_m2 > 0 ? "with floor" : "the wall");
  page_right(out, STEP_END, text_format(r->arena, "step/%s", area_name(r)));
  page_right(out, POINT_END, "a point");
  text_pad(out, THICK_AT);
  text_put(out, "thickness");
  text_pad(out, PREDICTED_AT);
  text_put(out, "predicted\n");
}

static void put_figures(const report *r, const ladder_answer *l, const ladder_rung *g, text *out) {
  const assessment *x = g->wall;
  double step = (double)g->step_cents;
  text_put(out, g->worth ? " *" : "");
  page_right(out, RATING_END, text_format(r->arena, "%d", g->rating));
  page_right(out, COST_END, by_area(r, x, (double)x->cost.total_cents, false));
  page_right(out, TOTAL_END, cents_words(r, g->cost_cents, false));
  page_right(out, STEP_END, g->points ? by_area(r, x, step, true) : "-");
  page_right(out, POINT_END, g->points ? by_area(r, x, step / g->points, true) : "-");
  text_pad(out, THICK_AT);
  units_put_thickness(out, x->thickness_m, r->units);
  text_pad(out, PREDICTED_AT);
  text_put(out, predicted_words(r, l, x));
  if (view_ladder_alone(g)) {
    text_pad(out, ALONE_AT);
    text_put(out, "wall alone");
  }
  text_char(out, '\n');
}

static const char *changes_from(const report *r, const ladder_rung *g) {
  return text_format(r->arena, "from %d: %s.", g->rating - g->points,
                     changes_words(r->arena, &g->changes));
}

static void put_rung(const report *r, const ladder_answer *l, const ladder_rung *g, text *out) {
  put_figures(r, l, g, out);
  page_line(out, "", g->wall->line);
  if (g->points > 0) page_line(out, "", changes_from(r, g));
  if (l->terms.have)
    page_line(out, "",
              text_format(r->arena, "From your wall: %s. %s.",
                          changes_words(r->arena, &g->from_have),
                          money_words(r, g->wall, g->extra_cents)));
  if (g->serves_from < g->rating && g->serves_from > RUNGS_LEAST)
    page_line(out, "", text_format(r->arena, "Also the cheapest for %s.", view_ladder_served(r, g)));
  if (g->reaches > g->rating)
    page_line(out, "", text_format(r->arena, "This wall meets %d.", g->reaches));
}

/* --- together -------------------------------------------------------------------------------- */

static void put_reach(const report *r, const ladder_answer *l, text *out) {
  const ladder_terms *t = &l->terms;
  text n;
  text_init(&n, r->arena, 200);
  view_count(&n, l->walls);
  text_put(&n, " walls judged.");
  page_line(out, "Ladder", text_format(r->arena, "%s.", view_ladder_aim(r, l)));
  for (int i = 0; i < r->brief->target_count; i++)
    if (i != t->climbs)
      page_line(
          out, "",
          text_format(r->arena, "Every rung keeps %s.", view_target(r, &r->brief->targets[i])));
  if (l->highest == 0)
    page_line(out, "Answer", "No wall keeps the other rules of this brief, whatever its rating.");
  else
    page_line(out, "Answer",
              text_format(r->arena,
                          "The cheapest wall that keeps the other rules meets %d; the highest that "
                          "any meets is %d.",
                          l->lowest, l->highest));
  if (l->highest > 0 && l->count == 0)
    page_line(out, "",
              t->have && t->have_reaches >= l->highest
                  ? "No wall of this brief goes beyond the one you have."
                  : "No rung lies between the ratings asked for.");
  page_line(out, "", n.data);
}

static void put_legend(const report *r, text *out) {
  page_line(out, "*",
            "Worth taking: between two starred rungs no rung in between gives its points as "
            "cheaply.");
  page_line(out, "",
            "Step and point: what a rung costs more than the one above it here. Ratings that are "
            "left out cost as much as the next rung.");
  if (r->brief->floor_area_value_per_m2 > 0)
    page_line(out, "",
              "With floor: the wall and the floor area under it; so are steps and points.");
}

static void put_cautions(const report *r, const ladder_answer *l, text *out) {
  const char *caution[VIEW_LADDER_CAUTIONS];
  int count = view_ladder_all_cautions(r, l, caution);
  for (int i = 0; i < count; i++) {
    page_label(out, i == 0 ? "Cautions" : "");
    text_put(out, "- ");
    page_words(out, PAGE_LABEL + 2, caution[i]);
  }
}

void report_ladder_text(const report *r, const ladder_answer *l, text *out) {
  if (r->brief->title[0] != '\0') page_line(out, "Brief", r->brief->title);
  put_reach(r, l, out);
  report_unpriced_text(r, out);
  put_have(r, l, out);
  if (l->why) report_conflicts_text(r, l->why, out);
  if (l->count > 0) {
    text_char(out, '\n');
    put_head(r, l, out);
    for (int i = 0; i < l->count; i++) put_rung(r, l, &l->rung[i], out);
    text_char(out, '\n');
    put_legend(r, out);
  }
  put_edits(r, l, out);
  if (l->price_count > 0) {
    page_line(
        out, "Priced at",
        text_format(r->arena, "%s %d, %s:", view_ladder_metric(r, l), l->priced_at,
                    l->terms.to > 0 ? "the end of the range asked for" : "the value of the brief"));
    report_rule_prices_text(r, l->prices, l->price_count, "", out);
  }
  put_cautions(r, l, out);
  exclusions_text(r->brief, out);
  page_line(out, "Made by", "septum " SEPTUM_VERSION);
}
