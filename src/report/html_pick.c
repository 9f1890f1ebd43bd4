/* The page of `pick`. */
#include "report/chart_cloud.h"
#include "report/html_wall.h"
#include "report/report_html.h"
#include "report/view.h"

/* What was done to find it. */
static const char *search_words(const report *r, const explanation *e, const pick_choice *proof) {
  text t;
  text_init(&t, r->arena, 1000);
  view_count(&t, e->walls);
  text_put(&t, " walls judged, ");
  view_count(&t, e->frontier);
  text_put(&t, " of them put to the solver");
  if (proof->found) {
    text_putf(&t, e->status == SOLVER_OPTIMAL ? "; proven cheapest at %s" : "; it costs %s",
              view_money(r, proof->objective, NULL));
    if (r->brief->floor_area_value_per_m2 > 0) text_put(&t, ", the floor under it included");
    text_putf(&t, ": no wall that keeps all rules costs less than %s.",
              view_money(r, proof->bound, NULL));
  } else
    text_put(&t, ".");
  return t.data;
}

static const char *verdict(const explanation *e) {
  if (e->chosen)
    return e->status == SOLVER_OPTIMAL
               ? "The cheapest wall that keeps every rule of the brief."
               : "The cheapest wall found within the time limit; a cheaper one may exist.";
  return e->status == SOLVER_INFEASIBLE ? "No wall fits this brief."
                                        : "No wall found within the time limit; one may exist.";
}

static void put_decides(html *h, const explanation *e) {
  const report *r = h->report;
  const explain_rule_price *p = NULL;
  for (int i = 0; i < e->price_count; i++)
    if (e->prices[i].price_total > 0 && (!p || e->prices[i].price_total > p->price_total))
      p = &e->prices[i];
  html_paragraph(
      h, !p ? "Decided by the sound target: no other rule, given up alone, would save anything."
            : text_format(r->arena,
                          "Decided by %s (%s), beside the sound target. With \"%s\" instead the "
                          "wall would cost %s less.",
                          p->name, p->from, p->to,
                          view_money(r, view_per_area(r, p->price_per_m2), view_area(r))));
}

static void put_cloud(html *h, const explanation *e, const cloud *c) {
  if (!c || c->count == 0) return;
  const char *id = html_picture_id(h);
  html_section(h, "Among the walls that keep the brief");
  chart_cloud(h->report, id, e, c, html_picture(h, HTML_CHART));
  html_picture_end(h, NULL);
  html_section_end(h);
}

static void put_glance(html *h, const explanation *e, const pick_choice *proof) {
  html_section(h, "At a glance");
  if (e->chosen) html_line(h, e->chosen->line);
  html_note(h, e->chosen ? e->status == SOLVER_OPTIMAL ? "good" : "care" : "bad", verdict(e));
  html_note(h, "soft", search_words(h->report, e, proof));
  if (e->chosen) {
    put_decides(h, e);
    html_wall_figures(h, e->chosen);
    html_wall_drawing(h, e->chosen, false);
  } else
    html_conflicts(h, e->conflicts, e->conflict_count);
  html_unpriced(h);
  html_section_end(h);
}

static void put_others(html *h, const explanation *e) {
  html_section(h, "Other walls");
  html_others(h, "Next best: walls that keep every rule too", e->runners, e->runner_count, false);
  html_others(h, "Cheaper walls, and what they fail", e->cheaper, e->cheaper_count, true);
  if (e->runner_count + e->cheaper_count == 0)
    html_paragraph(h, "No other wall keeps every rule, and none is cheaper.");
  html_section_end(h);
}

static void put_rules(html *h, const explanation *e) {
  if (e->price_count == 0) return;
  html_section(h, "What the rules cost");
  html_rule_prices(h, "What giving up one rule would save, floor value included", e->prices,
                   e->price_count, e->chosen->line);
  html_section_end(h);
}

static void put_chosen(html *h, const explanation *e, const cloud *c) {
  const assessment *x = e->chosen;
  html_wall_parts(h, x);
  html_wall_sound(h, x);
  html_wall_checks(h, x);
  html_fixtures(h);
  html_wall_cost(h, x);
  put_cloud(h, e, c);
  put_others(h, e);
  put_rules(h, e);
  if (e->break_even_count > 0) {
    html_section(h, "Break-even");
    html_break_even(h, e->break_even, e->break_even_count);
    html_section_end(h);
  }
  html_wall_takeoff(h, x);
}

static void put_nearest(html *h, const explanation *e) {
  if (e->nearest_count == 0) return;
  html_section(h, "Walls that come nearest");
  html_others(h, "Nearest misses, and what they fail", e->nearest, e->nearest_count, true);
  html_heading(h, "The nearest of them");
  html_line(h, e->nearest[0]->line);
  html_wall_figures(h, e->nearest[0]);
  html_wall_drawing(h, e->nearest[0], false);
  html_section_end(h);
}

void report_pick_html(const report *r, const explanation *e, const pick_choice *proof,
                      const cloud *c, text *out) {
  html *h = arena_alloc(r->arena, sizeof *h);
  html_begin(h, r, e->chosen ? "The wall for a brief" : "No wall for a brief", r->brief->title,
             out);
  put_glance(h, e, proof);
  if (e->chosen)
    put_chosen(h, e, c);
  else
    put_nearest(h, e);
  html_brief(h, CATALOG_NONE);
  if (e->chosen) html_wall_cautions(h, e->chosen);
  html_end_brief(h);
}
