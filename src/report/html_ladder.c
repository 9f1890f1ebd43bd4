/* The page of `ladder`. */
#include "report/chart_ladder.h"
#include "report/html_wall.h"
#include "report/report_html.h"
#include "report/view_ladder.h"

/* Money of the whole wall, per unit of area; with its sign where that matters. */
static const char *by_area(html *h, const assessment *x, double cents, bool sign) {
  double per = view_per_area(h->report, cents / 100 / x->cost.area_m2);
  const char *words = view_cents(h->report, view_in_cents(per));
  return sign && per > 0 ? text_format(h->report->arena, "+%s", words) : words;
}

static const char *signed_cents(html *h, long long cents) {
  const char *words = view_cents(h->report, cents);
  return cents > 0 ? text_format(h->report->arena, "+%s", words) : words;
}

static const char *predicted_words(html *h, const ladder_answer *l, const assessment *x) {
  arena *a = h->report->arena;
  view_predicted p = view_ladder_predicted(h->report, l, x);
  return text_format(a, "%d (%s, sd %s)%s", p.printed, text_of(a, p.exact, 1), text_of(a, p.sd, 1),
                     p.published ? "; published instead" : "");
}

static const char *number(html *h, int value) {
  return text_format(h->report->arena, "%d", value);
}

static bool with_floor(const html *h) {
  return h->report->brief->floor_area_value_per_m2 > 0;
}

/* --- at a glance ----------------------------------------------------------------------------- */

static void put_end(html *h, const ladder_answer *l, const char *label, const ladder_rung *g) {
  const report *r = h->report;
  html_figure(
      h, label, text_format(r->arena, "%s %d", view_ladder_metric(r, l), g->rating),
      text_format(r->arena, "%s; %s; %s",
                  view_money(r, view_per_area(r, view_cost_of(r, g->wall).per_m2), view_area(r)),
                  html_thickness(h, g->wall->thickness_m),
                  g->wall->fire.minutes
                      ? text_format(r->arena, "fire %s", html_fire_words(h, g->wall))
                      : "fire not shown"));
}

static const char *answer_words(const report *r, const ladder_answer *l) {
  if (l->highest == 0) return "No wall keeps the other rules of this brief, whatever its rating.";
  const char *reach = text_format(
      r->arena,
      "The cheapest wall that keeps the other rules meets %d; the highest that any meets is %d.",
      l->lowest, l->highest);
  if (l->count > 0) return reach;
  return text_format(r->arena, "%s %s", reach,
                     l->terms.have && l->terms.have_reaches >= l->highest
                         ? "No wall of this brief goes beyond the one you have."
                         : "No rung lies between the ratings asked for.");
}

static void put_range(html *h, const ladder_answer *l) {
  const report *r = h->report;
  const ladder_terms *t = &l->terms;
  if (t->from == 0 && t->to == 0) return;
  const char *from = t->from ? text_format(r->arena, " from %d", t->from) : "";
  const char *to = t->to ? text_format(r->arena, " to %d", t->to) : "";
  html_note(h, "soft", text_format(r->arena, "Asked for ratings%s%s.", from, to));
}

static void put_glance(html *h, const ladder_answer *l) {
  const report *r = h->report;
  int worth = 0;
  text n;
  text_init(&n, r->arena, 300);
  view_count(&n, l->walls);
  text_putf(&n, " walls judged. Ratings: %s.", view_ladder_aim(r, l));
  for (int i = 0; i < l->count; i++) worth += l->rung[i].worth;
  html_section(h, "At a glance");
  html_note(h, l->count > 0 ? "good" : "bad", answer_words(r, l));
  html_note(h, "soft", n.data);
  put_range(h, l);
  for (int i = 0; i < r->brief->target_count; i++)
    if (i != l->terms.climbs)
      html_paragraph(
          h, text_format(r->arena, "Every rung keeps %s.", view_target(r, &r->brief->targets[i])));
  if (l->count > 0) {
    html_figures(h);
    put_end(h, l, "First rung", &l->rung[0]);
    put_end(h, l, "Last rung", &l->rung[l->count - 1]);
    html_figure(h, "Rungs", number(h, l->count),
                text_format(r->arena, "%d of them worth taking", worth));
    html_figures_end(h);
    const char *id = html_picture_id(h);
    chart_ladder(r, id, l, html_picture(h, HTML_CHART));
    html_picture_end(h, NULL);
  }
  html_unpriced(h);
  html_section_end(h);
}

/* --- rungs ----------------------------------------------------------------------------------- */

static void put_rung(html *h, const ladder_answer *l, const ladder_rung *g) {
  const report *r = h->report;
  const assessment *x = g->wall;
  double step = (double)g->step_cents;
  bool first = g->points == 0;
  html_row(h,
           HTML_CELLS(number(h, g->rating), g->worth ? "worth taking" : NULL,
                      by_area(h, x, (double)x->cost.total_cents, false),
                      view_cents(r, x->cost.total_cents), first ? NULL : by_area(h, x, step, true),
                      first ? NULL : by_area(h, x, step / g->points, true),
                      html_thickness(h, x->thickness_m), html_mass(h, x->mass_kg_m2),
                      predicted_words(h, l, x), x->line,
                      with_floor(h) ? view_cents(r, x->cost.floor_value_cents) : NULL,
                      with_floor(h) ? view_cents(r, g->cost_cents) : NULL));
}

static void put_rungs(html *h, const ladder_answer *l) {
  const report *r = h->report;
  const char *area = view_area(r), *currency = r->prices->currency;
  const html_column columns[] = {{view_ladder_metric(r, l), HTML_ID},
                                 {"", HTML_CODE},
                                 {text_format(r->arena, "%s per %s", currency, area), HTML_FIGURE},
                                 {"The wall", HTML_FIGURE},
                                 {text_format(r->arena, "Step, per %s", area), HTML_FIGURE},
                                 {"A point", HTML_FIGURE},
                                 {"Thickness", HTML_FIGURE},
                                 {"Mass", HTML_FIGURE},
                                 {"Predicted", HTML_WORDS},
                                 {"Wall", HTML_LINE},
                                 {"Floor under it", HTML_FIGURE},
                                 {"With the floor", HTML_FIGURE}};
  html_section(h, "The rungs");
  html_table(h, "For each rating the cheapest wall", columns,
             HTML_COUNT(columns) - (with_floor(h) ? 0 : 2));
  for (int i = 0; i < l->count; i++) put_rung(h, l, &l->rung[i]);
  html_table_end(h);
  html_paragraph(h, "Worth taking: between two such rungs none in between gives its points as "
                    "cheaply. Step and point: what a rung costs more than the one above it here. "
                    "Ratings that are left out cost as much as the next rung.");
  if (with_floor(h))
    html_paragraph(h, "Steps and points count the wall and the floor area under it.");
}

static const char *remarks(html *h, const ladder_rung *g) {
  arena *a = h->report->arena;
  text t;
  text_init(&t, a, 1000);
  if (g->serves_from < g->rating && g->serves_from > RUNGS_LEAST)
    text_putf(&t, "Also the cheapest for %s. ", view_ladder_served(h->report, g));
  if (g->reaches > g->rating) text_putf(&t, "This wall meets %d. ", g->reaches);
  if (view_ladder_alone(g))
    text_put(&t, "The wall alone: what surrounds it decides what is heard.");
  return t.data;
}

static void put_changes(html *h, const ladder_answer *l) {
  const report *r = h->report;
  const html_column columns[] = {{view_ladder_metric(r, l), HTML_ID},
                                 {"From the rung below", HTML_WORDS},
                                 {"Step", HTML_FIGURE},
                                 {"Remarks", HTML_WORDS},
                                 {"From your wall", HTML_WORDS},
                                 {text_format(r->arena, "More per %s", view_area(r)), HTML_FIGURE},
                                 {"More for the wall", HTML_FIGURE}};
  html_table(h, "What changes from rung to rung", columns,
             HTML_COUNT(columns) - (l->terms.have ? 0 : 3));
  for (int i = 0; i < l->count; i++) {
    const ladder_rung *g = &l->rung[i];
    bool first = g->points == 0;
    html_row(h, HTML_CELLS(number(h, g->rating),
                           first ? "the first rung"
                                 : text_format(r->arena, "from %d: %s", g->rating - g->points,
                                               changes_words(r->arena, &g->changes)),
                           first ? NULL : signed_cents(h, g->step_cents), remarks(h, g),
                           l->terms.have ? changes_words(r->arena, &g->from_have) : NULL,
                           l->terms.have ? by_area(h, g->wall, (double)g->extra_cents, true) : NULL,
                           l->terms.have ? signed_cents(h, g->extra_cents) : NULL));
  }
  html_table_end(h);
  html_section_end(h);
}

static void put_card(html *h, const ladder_answer *l, const ladder_rung *g) {
  const report *r = h->report;
  const assessment *x = g->wall;
  html_box(h, "card");
  html_heading(h, text_format(r->arena, "%s %d", view_ladder_metric(r, l), g->rating));
  html_line(h, x->line);
  html_figures(h);
  html_figure(h, text_format(r->arena, "%s per %s", r->prices->currency, view_area(r)),
              by_area(h, x, (double)x->cost.total_cents, false), NULL);
  html_figure(h, "Thickness", html_thickness(h, x->thickness_m), NULL);
  html_figure(h, "Fire", html_fire_words(h, x), NULL);
  html_figure(h, "Mass", html_mass(h, x->mass_kg_m2), NULL);
  html_figures_end(h);
  html_wall_drawing(h, x, true);
  html_box_end(h);
}

static void put_cards(html *h, const ladder_answer *l) {
  html_section(h, "The rungs worth taking");
  html_box(h, "cards");
  for (int i = 0; i < l->count; i++)
    if (l->rung[i].worth) put_card(h, l, &l->rung[i]);
  html_box_end(h);
  html_section_end(h);
}

/* --- the given wall -------------------------------------------------------------------------- */

static void put_edits(html *h, const ladder_answer *l) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Change", HTML_HEAD},
      {view_ladder_metric(r, l), HTML_FIGURE},
      {"Gain", HTML_FIGURE},
      {text_format(r->arena, "More per %s", view_area(r)), HTML_FIGURE},
      {"More for the wall", HTML_FIGURE},
      {text_format(r->arena, "%s per %s", r->prices->currency, view_area(r)), HTML_FIGURE},
      {"Thickness", HTML_FIGURE},
      {"Mass", HTML_FIGURE},
      {"Predicted", HTML_WORDS},
      {"Then the wall is", HTML_LINE}};
  if (l->edit_count == 0) return;
  html_table(h, "Single changes of your wall, each the cheapest for its rating", columns,
             HTML_COUNT(columns));
  for (int i = 0; i < l->edit_count; i++) {
    const ladder_edit *e = &l->edit[i];
    const assessment *x = e->wall;
    html_row(h, HTML_CELLS(changes_words(r->arena, &e->change), number(h, e->reaches),
                           text_format(r->arena, "+%d", e->reaches - l->terms.have_reaches),
                           by_area(h, x, (double)e->extra_cents, true),
                           signed_cents(h, e->extra_cents),
                           by_area(h, x, (double)x->cost.total_cents, false),
                           html_thickness(h, x->thickness_m), html_mass(h, x->mass_kg_m2),
                           predicted_words(h, l, x), x->line));
  }
  html_table_end(h);
}

static void put_have(html *h, const ladder_answer *l) {
  const assessment *x = l->terms.have;
  const report *r = h->report;
  if (!x) return;
  html_section(h, "The wall you have");
  html_line(h, x->line);
  if (x->name) html_paragraph(h, x->name);
  html_paragraph(h, l->terms.have_reaches > 0
                        ? text_format(r->arena, "It meets %s %d; predicted %s.",
                                      view_ladder_metric(r, l), l->terms.have_reaches,
                                      predicted_words(h, l, x))
                        : text_format(r->arena, "It meets no %s of this brief; predicted %s.",
                                      view_ladder_metric(r, l), predicted_words(h, l, x)));
  html_wall_figures(h, x);
  html_wall_drawing(h, x, false);
  html_broken(h, "Rules that it breaks", x);
  put_edits(h, l);
  const char *caution[VIEW_MAX_CAUTIONS];
  int count = view_ladder_cautions(r, l, l->terms.have_reaches, x, caution);
  html_heading(h, "Cautions");
  html_list(h, caution, count);
  html_section_end(h);
}

/* --- together -------------------------------------------------------------------------------- */

static void put_none(html *h, const explanation *e) {
  html_section(h, "In the way");
  html_conflicts(h, e->conflicts, e->conflict_count);
  html_others(h, "Walls that come nearest, and what they fail", e->nearest, e->nearest_count, true);
  html_section_end(h);
}

static void put_prices(html *h, const ladder_answer *l) {
  const report *r = h->report;
  if (l->price_count == 0) return;
  html_section(h, "What the other rules cost");
  html_paragraph(
      h,
      text_format(r->arena, "Priced at %s %d, %s.", view_ladder_metric(r, l), l->priced_at,
                  l->terms.to > 0 ? "the end of the range asked for" : "the value of the brief"));
  html_rule_prices(h, "What giving up one rule would save, floor value included", l->prices,
                   l->price_count, NULL);
  html_section_end(h);
}

void report_ladder_html(const report *r, const ladder_answer *l, text *out) {
  html *h = arena_alloc(r->arena, sizeof *h);
  const char *caution[VIEW_LADDER_CAUTIONS];
  html_begin(h, r, "What each rating costs", r->brief->title, out);
  put_glance(h, l);
  put_have(h, l);
  if (l->why) put_none(h, l->why);
  if (l->count > 0) {
    put_rungs(h, l);
    put_changes(h, l);
    put_cards(h, l);
  }
  put_prices(h, l);
  html_brief(h, l->terms.climbs);
  int count = view_ladder_all_cautions(r, l, caution);
  if (count > 0) html_cautions(h, caution, count);
  html_exclusions(h, r->brief);
  html_end_brief(h);
}
