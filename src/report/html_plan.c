/* The page of `plan`: the answer and what it was asked. */
#include "report/html_plan.h"

#include <limits.h>
#include <math.h>

#include "report/report_html.h"
#include "report/view_brief.h"

const char *html_run(html *h, double metres) {
  bool us = h->report->units == UNITS_US;
  text t;
  text_init(&t, h->report->arena, 64);
  view_count(&t, llround(us ? metres / UNITS_M_PER_FT : metres));
  text_put(&t, us ? " ft" : " m");
  return t.data;
}

const char *html_area(html *h, double m2) {
  const report *r = h->report;
  bool us = r->units == UNITS_US;
  return text_format(r->arena, "%s %s", text_of(r->arena, us ? m2 / UNITS_M2_PER_FT2 : m2, 1),
                     view_area(r));
}

const char *html_storey(const char *name) {
  return name[0] ? name : "(none named)";
}

/* --- at a glance ----------------------------------------------------------------------------- */

static const char *verdict(const plan_answer *p) {
  bool proved = p->status == SOLVER_OPTIMAL;
  if (!p->found)
    return p->status == SOLVER_LIMIT ? "No plan found within the time; one may exist."
           : p->unplanned_rows == p->schedule->count
               ? "No wall of the schedule has a type that fits."
               : "No plan keeps every rule of the project.";
  if (p->project->aim == AIM_COST)
    return proved ? "The least cost that keeps every rule, proven."
                  : "The cheapest plan found within the time; a cheaper one may exist.";
  return proved ? "The best worst margin that the budget pays for, at least cost, proven."
                : "The best plan found within the time; a better one may exist.";
}

static const char *search_words(const report *r, const plan_answer *p) {
  text t;
  text_init(&t, r->arena, 1000);
  text_putf(&t, "%s of the schedule, %s asked; ",
            view_plan_count(r, p->schedule->count, "row", "rows"),
            view_plan_count(r, p->schedule->class_count, "thing", "different things"));
  view_count(&t, p->walls);
  text_put(&t, " walls judged, ");
  view_count(&t, p->candidates);
  text_put(&t, " types put to the solver.");
  if (p->found && p->bound_cents != LLONG_MIN)
    text_putf(&t, " No plan costs less than %s.",
              view_money(r, (double)p->bound_cents / 100, NULL));
  return t.data;
}

static const char *parts_words(const report *r, const plan_answer *p) {
  const plan_money *m = &p->money;
  text t;
  text_init(&t, r->arena, 1000);
  text_putf(&t, "walls %s", view_cents(r, m->walls));
  if (p->goods_count > 0)
    text_putf(&t, ", goods ordered for the whole project %s", view_cents(r, m->goods));
  if (m->setup > 0) text_putf(&t, ", setting up types %s", view_cents(r, m->setup));
  if (m->floor > 0) text_putf(&t, ", floor under the walls %s", view_cents(r, m->floor));
  return t.data;
}

static void put_figures(html *h, const plan_answer *p) {
  const report *r = h->report;
  int walls = 0;
  double run = 0;
  for (int i = 0; i < p->type_count; i++) {
    walls += p->type[i].walls;
    run += p->type[i].run_m;
  }
  html_figures(h);
  html_figure(h, text_format(r->arena, "Cost, %s", r->prices->currency),
              view_cents(r, p->cost_cents), parts_words(r, p));
  html_figure(h, "Wall types", text_format(r->arena, "%d", p->type_count),
              view_plan_rule(r, p, PLAN_RULE_TYPES));
  html_figure(h, "Walls", text_format(r->arena, "%d", walls),
              p->unplanned_walls > 0
                  ? text_format(r->arena, "%d more have no type", p->unplanned_walls)
                  : "every wall has its type");
  html_figure(h, "Run", html_run(h, run), NULL);
  html_figure(h, "Floor they stand on", html_area(h, p->floor_m2), NULL);
  if (p->has_margin)
    html_figure(h, "Least to spare",
                text_format(r->arena, "%s dB", text_of(r->arena, p->worst_margin * 0.01, 2)),
                "of the wall nearest to its target, at the confidence asked");
  if (p->against.done) {
    long long saving = view_plan_saving(&p->against);
    html_figure(
        h, saving >= 0 ? "Saves against the drawings" : "Costs more than the drawings",
        view_cents(r, saving >= 0 ? saving : -saving),
        text_format(r->arena, "%s; rows compared: %d", r->prices->currency, p->against.row_count));
  }
  html_figures_end(h);
}

static void put_conflicts(html *h, const plan_answer *p) {
  const report *r = h->report;
  const char *item[sizeof p->conflict / sizeof p->conflict[0]];
  for (int i = 0; i < p->conflict_count; i++) {
    int rules = 0;
    text t;
    text_init(&t, r->arena, 1000);
    for (int k = 0; k < PLAN_RULES; k++)
      if (p->conflict[i] >> k & 1u)
        text_putf(&t, "%s%s: %s", rules++ ? "; and " : "", plan_rule_names[k],
                  view_plan_rule(r, p, (plan_rule)k));
    item[i] = text_format(r->arena, "Cannot be had%s: %s.", rules > 1 ? " together" : "", t.data);
  }
  html_list(h, item, p->conflict_count);
}

static void put_glance(html *h, const plan_answer *p) {
  const report *r = h->report;
  bool good = p->found && p->status == SOLVER_OPTIMAL && p->unplanned_rows == 0;
  html_section(h, "At a glance");
  html_note(h, good ? "good" : p->found ? "care" : "bad", verdict(p));
  html_note(h, "soft", search_words(r, p));
  if (p->found) put_figures(h, p);
  put_conflicts(h, p);
  const char *misses = view_plan_misses(r, p);
  if (misses[0]) html_paragraph(h, misses);
  const char *stop = view_plan_stop(r, p);
  if (stop[0]) html_paragraph(h, stop);
  html_unpriced(h);
  html_section_end(h);
}

/* --- the project as understood --------------------------------------------------------------- */

static void put_rules(html *h, const plan_answer *p) {
  static const char *const framings[] = {"free", "one framing a storey", "one framing for all"};
  const report *r = h->report;
  const project *from = p->project;
  html_facts(h);
  html_fact(h, "Objective",
            from->aim == AIM_MARGIN ? "the best worst margin within the budget, then least cost"
                                    : "least cost");
  html_fact(h, "Types",
            from->max_types > 0 ? view_plan_rule(r, p, PLAN_RULE_TYPES)
                                : "as many as it takes (default)");
  html_fact(h, "Run of a type",
            from->min_run_m > 0 ? view_plan_rule(r, p, PLAN_RULE_RUN) : "any (default)");
  html_fact(h, "Setting up a type",
            from->type_setup_cost > 0 ? view_money(r, from->type_setup_cost, NULL)
                                      : "nothing (default)");
  html_fact(h, "Budget", from->budget > 0 ? view_money(r, from->budget, NULL) : "none (default)");
  html_fact(h, "Floor under the walls",
            from->floor_area_max_m2 > 0 ? view_plan_rule(r, p, PLAN_RULE_FLOOR) : "any (default)");
  html_fact(h, "Framing", framings[from->same_framing]);
  html_fact(h, "Orders for the whole project",
            from->quantity_breaks ? "minimum orders and quantity breaks count"
                                  : "every wall at list prices");
  for (int i = 0; i < from->stock_count; i++) {
    const project_stock *s = &from->stock[i];
    html_fact_data(h, "On hand",
                   text_format(r->arena, "%s %s of %s", text_of(r->arena, s->quantity, 2),
                               price_unit_names[s->unit], s->item));
  }
  html_facts_end(h);
}

/* Length and height are the rows' own. */
static bool is_of_rows(const view_field *f) {
  return text_equal(f->name, "Length") || text_equal(f->name, "Height");
}

static void put_common(html *h) {
  static const html_column columns[] = {
      {"Field", HTML_HEAD}, {"Value", HTML_DATA}, {"", HTML_CODE}};
  view_brief *b = arena_alloc(h->report->arena, sizeof *b);
  view_brief_of(h->report, CATALOG_NONE, b);
  html_table(h, "What every wall shares unless its row says otherwise", columns,
             HTML_COUNT(columns));
  for (int i = 0; i < b->count; i++) {
    const view_field *f = &b->field[i];
    if (!is_of_rows(f)) html_row(h, HTML_CELLS(f->name, f->value, f->usual ? "default" : NULL));
  }
  html_table_end(h);
}

static void put_project(html *h, const plan_answer *p) {
  html_section(h, "The project as understood");
  put_rules(h, p);
  put_common(h);
  html_section_end(h);
}

/* --- together -------------------------------------------------------------------------------- */

void report_plan_html(const report *r, const plan_answer *p, text *out) {
  html *h = arena_alloc(r->arena, sizeof *h);
  const html_file files[] = {{p->project->file, p->project->crc},
                             {p->schedule->table->file, p->schedule->table->crc}};
  html_begin(h, r, "Wall types for a project", p->project->title, out);
  put_glance(h, p);
  html_plan_curve(h, p);
  html_plan_types(h, p);
  html_plan_unplanned(h, p);
  html_plan_schedule(h, p);
  html_plan_storeys(h, p);
  html_plan_sections(h, p);
  html_plan_buy(h, p);
  html_plan_drawings(h, p);
  html_plan_classes(h, p);
  put_project(h, p);
  if (p->found) {
    const char *caution[VIEW_MAX_PLAN_CAUTIONS];
    html_cautions(h, caution, view_plan_cautions(r, p, caution));
    html_exclusions(h, view_plan_any_brief(r, p));
  }
  html_end(h, files, HTML_COUNT(files));
}
