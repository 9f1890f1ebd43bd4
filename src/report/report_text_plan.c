/* `plan` for the developer: the types, then how many of them pay, then the money. */
#include <limits.h>
#include <math.h>

#include "report/exclusions.h"
#include "report/page.h"
#include "report/report_text.h"
#include "report/report_text_plan.h"
#include "report/view_plan.h"
#include "septum.h"

const char *report_plan_cents(const report *r, long long cents) {
  text t;
  text_init(&t, r->arena, 64);
  text_cents(&t, cents, true);
  return t.data;
}

const char *report_plan_run(const report *r, double metres) {
  text t;
  text_init(&t, r->arena, 64);
  view_count(&t, llround(r->units == UNITS_US ? metres / UNITS_M_PER_FT : metres));
  return t.data;
}

static const char *run_unit(const report *r) {
  return r->units == UNITS_US ? "ft" : "m";
}

static const char *area_unit(const report *r) {
  return r->units == UNITS_US ? "ft2" : "m2";
}

static double per_area(const report *r, double per_m2) {
  return r->units == UNITS_US ? per_m2 * UNITS_M2_PER_FT2 : per_m2;
}

/* ---- the answer ---- */

static int planned_walls(const plan_answer *p) {
  int walls = 0;
  for (int i = 0; i < p->type_count; i++) walls += p->type[i].walls;
  return walls;
}

static double planned_run(const plan_answer *p) {
  double run = 0;
  for (int i = 0; i < p->type_count; i++) run += p->type[i].run_m;
  return run;
}

static void put_found(const report *r, const plan_answer *p, text *out) {
  bool proved = p->status == SOLVER_OPTIMAL;
  const char *least =
      p->project->aim == AIM_COST
          ? (proved ? "the least cost that keeps every rule"
                    : "the cheapest plan found within the time; a cheaper one may exist")
          : (proved ? "the best worst margin that the budget pays for, at least cost"
                    : "the best plan found within the time; a better one may exist");
  page_line(out, "Answer",
            text_format(r->arena, "%s for %s, %s %s of run, at %s: %s.",
                        view_plan_count(r, p->type_count, "wall type", "wall types"),
                        view_plan_count(r, planned_walls(p), "wall", "walls"),
                        report_plan_run(r, planned_run(p)), run_unit(r),
                        view_money(r, (double)p->cost_cents / 100, NULL), least));
  if (p->unplanned_rows > 0)
    page_line(out, "",
              text_format(r->arena,
                          "%s without a type: no wall fits what is asked there, see below.",
                          view_plan_count(r, p->unplanned_walls, "wall is", "walls are")));
}

static void put_counts(const report *r, const plan_answer *p, text *out) {
  text t;
  text_init(&t, r->arena, 600);
  view_count(&t, p->schedule->count);
  text_put(&t,
           p->schedule->count == 1 ? " row of the schedule asks " : " rows of the schedule ask ");
  text_putf(&t, "%s; ", view_plan_count(r, p->schedule->class_count, "thing", "different things"));
  view_count(&t, p->walls);
  text_put(&t, " walls judged, ");
  view_count(&t, p->candidates);
  text_put(&t, " types put to the solver");
  if (p->found && p->status == SOLVER_LIMIT && p->bound_cents != LLONG_MIN)
    text_putf(&t, "; no plan costs less than %s",
              view_money(r, (double)p->bound_cents / 100, NULL));
  text_put(&t, p->found && p->status == SOLVER_OPTIMAL ? "; proven." : ".");
  page_line(out, "", t.data);
}

static void put_parts(const report *r, const plan_answer *p, text *out) {
  const plan_money *m = &p->money;
  text t;
  text_init(&t, r->arena, 600);
  text_putf(&t, "Walls %s", report_plan_cents(r, m->walls));
  if (m->goods > 0)
    text_putf(&t, ", goods that are ordered for the whole project %s",
              report_plan_cents(r, m->goods));
  if (m->setup > 0) text_putf(&t, ", setting up types %s", report_plan_cents(r, m->setup));
  if (m->floor > 0)
    text_putf(&t, ", value of the floor under the walls %s", report_plan_cents(r, m->floor));
  text_putf(&t, "; in %s, tax and markups included.", r->prices->currency);
  page_line(out, "Cost", t.data);
  text_init(&t, r->arena, 400);
  text_putf(
      &t, "The walls stand on %s %s of floor.",
      text_of(r->arena, r->units == UNITS_US ? p->floor_m2 / UNITS_M2_PER_FT2 : p->floor_m2, 1),
      area_unit(r));
  if (p->has_margin)
    text_putf(
        &t, " The wall nearest to its target holds it with %s dB to spare at the confidence asked.",
        text_of(r->arena, p->worst_margin * 0.01, 2));
  page_line(out, "", t.data);
  const char *misses = view_plan_misses(r, p);
  if (misses[0]) page_line(out, "Tests", misses);
}

static void put_terms(const report *r, const plan_answer *p, text *out) {
  text t;
  text_init(&t, r->arena, 600);
  for (int i = 0; i < PLAN_RULES; i++) {
    const char *words = view_plan_rule(r, p, (plan_rule)i);
    if (words[0]) text_putf(&t, "%s%s", t.len ? "; " : "", words);
  }
  if (t.len > 0) page_line(out, "Kept", text_format(r->arena, "%s.", t.data));
}

/* ---- the types ---- */

enum {
  NAME_COLUMNS = 10,
  WALLS_END = 18,
  RUN_END = 26,
  RATE_END = 35,
  TOTAL_END = 49,
  WITHOUT_END = 62,
  STC_END = 67,
  FIRE_END = 73,
  THICK_AT = 76
};

static void put_type_heads(const report *r, text *out) {
  text_put(out, "\nTypes");
  page_right(out, WALLS_END, "walls");
  page_right(out, RUN_END, text_format(r->arena, "run %s", run_unit(r)));
  page_right(out, RATE_END, text_format(r->arena, "per %s", area_unit(r)));
  page_right(out, TOTAL_END, r->prices->currency);
  page_right(out, WITHOUT_END, "without it");
  page_right(out, STC_END, "STC");
  page_right(out, FIRE_END, "fire");
  text_pad(out, THICK_AT);
  text_put(out, "thickness\n");
}

static const char *without_words(const report *r, const plan_answer *p, const plan_used *u) {
  const plan_point *w = &u->without;
  if (u->locked) return "kept";
  if (!w->done || (w->status == SOLVER_LIMIT && !w->found)) return "?";
  if (!w->found) return "no plan";
  text t;
  text_init(&t, r->arena, 64);
  if (w->cost_cents >= p->cost_cents) text_char(&t, '+');
  text_cents(&t, w->cost_cents - p->cost_cents, true);
  return t.data;
}

static void put_type_row(const report *r, const plan_answer *p, const plan_used *u, text *out) {
  text thick;
  text_init(&thick, r->arena, 64);
  page_cut(out, NAME_COLUMNS, u->name);
  page_right(out, WALLS_END, text_format(r->arena, "%d", u->walls));
  page_right(out, RUN_END, report_plan_run(r, u->run_m));
  page_right(out, RATE_END,
             text_of(r->arena, per_area(r, view_plan_per_m2(&u->money, u->area_m2)), 2));
  page_right(out, TOTAL_END, report_plan_cents(r, plan_money_total(&u->money)));
  page_right(out, WITHOUT_END, without_words(r, p, u));
  page_right(out, STC_END, text_format(r->arena, "%d", u->as->ratings.stc));
  page_right(out, FIRE_END,
             u->as->fire.minutes > 0 ? text_format(r->arena, "%d", u->as->fire.minutes) : "-");
  text_pad(out, THICK_AT);
  units_put_thickness(&thick, u->as->thickness_m, r->units);
  text_putf(out, "%s\n", thick.data);
}

static void put_type_table(const report *r, const plan_answer *p, text *out) {
  put_type_heads(r, out);
  for (int i = 0; i < p->type_count; i++) put_type_row(r, p, &p->type[i], out);
  page_line(
      out, "",
      "Per area: what all its walls cost, without floor and set-up. Without it: what the project "
      "would cost more if this type were not to be had.");
}

static const char *storeys_words(const report *r, const plan_answer *p, const plan_used *u) {
  text t;
  text_init(&t, r->arena, 2000);
  for (int s = 0; s < p->storey_count; s++) {
    int walls = 0;
    for (int i = 0; i < u->row_count; i++) {
      const schedule_wall *w = &p->schedule->wall[u->row[i]];
      if (text_equal(w->storey, p->storey[s].name)) walls += w->count;
    }
    if (walls > 0)
      text_putf(&t, "%s%s: %d", t.len ? ", " : "",
                p->storey[s].name[0] ? p->storey[s].name : "(none)", walls);
  }
  return t.data;
}

static void put_judged(const report *r, const plan_answer *p, const plan_used *u, text *out) {
  const assessment *x = u->as;
  bool asked = u->demand->target_count > 0;
  text t;
  text_init(&t, r->arena, 3000);
  text_putf(&t, "STC %d %s", x->ratings.stc,
            view_published(x, METRIC_STC)
                ? text_format(r->arena, "(published: %s)", x->evidence.match->name)
                : text_format(r->arena, "(predicted %s, sd %s)",
                              text_of(r->arena, x->predicted.exact[METRIC_STC], 1),
                              text_of(r->arena, x->predicted.sd[METRIC_STC], 1)));
  text_putf(&t, "; fire %s; height up to ",
            x->fire.minutes > 0
                ? text_format(r->arena, "%d min: %s", x->fire.minutes, x->fire.basis)
                : "not shown");
  units_put_height(&t, x->height.limit_m, r->units);
  text_put(&t, ".");
  page_line(out, "", t.data);
  const char *sure = view_published(x, METRIC_STC)
                         ? " There the published rating counts as it stands."
                         : text_format(r->arena, " There %s %% sure.",
                                       view_sureness(r, view_plan_probability(p, u->judged_as)));
  page_line(out, "",
            text_format(r->arena, "%s %s: %s.%s", asked ? "Hardest for" : "Longest run in",
                        view_plan_class(r, u->judged_as), view_plan_demand(r, p, u->judged_as),
                        asked ? sure : ""));
}

static void put_type(const report *r, const plan_answer *p, const plan_used *u, text *out) {
  const char *as_is = view_plan_ids(r, p, u->row, u->row_count, false);
  const char *mirrored = view_plan_ids(r, p, u->row, u->row_count, true);
  text_char(out, '\n');
  page_line(out, u->name, u->line);
  put_judged(r, p, u, out);
  if (p->storey_count > 1)
    page_line(out, "", text_format(r->arena, "Walls by storey: %s.", storeys_words(r, p, u)));
  if (as_is[0]) page_line(out, "", text_format(r->arena, "Walls: %s.", as_is));
  if (mirrored[0])
    page_line(out, "", text_format(r->arena, "Walls, the other way round: %s.", mirrored));
}

/* ---- how many, and at what price ---- */

enum { POINT_END = 20, COST_END = 36, SAVES_END = 52, NOTE_AT = 55 };

static const char *point_note(const report *r, const plan_answer *p, const plan_point *at) {
  text t;
  text_init(&t, r->arena, 200);
  if (at->max_types == p->project->max_types || at->types > PLAN_CURVE) text_put(&t, "the plan");
  if (at->types < at->max_types) text_putf(&t, "%suses %d", t.len ? ", " : "", at->types);
  if (p->project->aim == AIM_MARGIN)
    text_putf(&t, "%smargin %s dB", t.len ? ", " : "",
              text_of(r->arena, at->worst_margin * 0.01, 2));
  if (at->status != SOLVER_OPTIMAL) text_putf(&t, "%snot proven", t.len ? ", " : "");
  return t.data;
}

/* `before` NULL on the first. */
static void put_point(const report *r, const plan_answer *p, const plan_point *before,
                      const plan_point *at, text *out) {
  page_label(out, "");
  page_right(out, POINT_END, text_format(r->arena, "%d", at->max_types));
  if (!at->found) {
    text_pad(out, POINT_END + 2);
    text_put(out, at->status == SOLVER_INFEASIBLE ? "no plan keeps every rule\n"
                                                  : "none found within the time\n");
    return;
  }
  page_right(out, COST_END, report_plan_cents(r, at->cost_cents));
  if (before && before->found)
    page_right(out, SAVES_END, report_plan_cents(r, before->cost_cents - at->cost_cents));
  const char *note = point_note(r, p, at);
  if (note[0]) text_pad(out, NOTE_AT);
  text_putf(out, "%s\n", note);
}

static void put_curve(const report *r, const plan_answer *p, text *out) {
  plan_point point[VIEW_PLAN_POINTS];
  int count = view_plan_curve(p, point);
  if (count == 0) return;
  text_put(out, "\nHow many");
  page_right(out, POINT_END, "types");
  page_right(out, COST_END, text_format(r->arena, "cost %s", r->prices->currency));
  page_right(out, SAVES_END, "less than above");
  text_char(out, '\n');
  for (int i = 0; i < count; i++) put_point(r, p, i > 0 ? &point[i - 1] : NULL, &point[i], out);
  const char *stop = view_plan_stop(r, p);
  if (stop[0]) page_line(out, "", stop);
}

static void put_rule_price(const report *r, const plan_answer *p, int rule, text *out) {
  const plan_point *at = &p->relaxed[rule];
  const char *words = view_plan_rule(r, p, (plan_rule)rule);
  const char *then = at->found                         ? text_format(r->arena, "%s with %s",
                                                                     view_money(r, (double)at->cost_cents / 100, NULL),
                                                                     view_plan_count(r, at->types, "type", "types"))
                     : at->status == SOLVER_INFEASIBLE ? "no plan even then"
                                                       : "none found within the time";
  if (p->found && at->found && at->cost_cents == p->cost_cents) then = "nothing changes";
  page_line(out, "",
            text_format(r->arena, "Without \"%s\": %s%s.", words, then,
                        p->found && at->found && at->cost_cents < p->cost_cents
                            ? text_format(r->arena, ", %s less",
                                          report_plan_cents(r, p->cost_cents - at->cost_cents))
                            : ""));
}

static void put_rule_prices(const report *r, const plan_answer *p, text *out) {
  bool any = false;
  for (int i = 0; i < PLAN_RULES; i++) {
    if (!p->relaxed[i].done) continue;
    if (!any) page_line(out, "Rules cost", "What giving up one rule of the project would bring:");
    any = true;
    put_rule_price(r, p, i, out);
  }
}

/* ---- what has no plan ---- */

static void put_conflicts(const report *r, const plan_answer *p, text *out) {
  for (int i = 0; i < p->conflict_count; i++) {
    text t;
    int rules = 0;
    text_init(&t, r->arena, 1000);
    for (int k = 0; k < PLAN_RULES; k++)
      if (p->conflict[i] >> k & 1u)
        text_putf(&t, "%s\"%s\"", rules++ ? " and " : "", view_plan_rule(r, p, (plan_rule)k));
    page_line(out, i == 0 ? "In the way" : "",
              text_format(r->arena, "%s cannot be had%s.", t.data, rules > 1 ? " together" : ""));
  }
}

static void put_unplanned(const report *r, const plan_answer *p, text *out) {
  for (int i = 0; i < p->unplanned_count; i++) {
    const plan_reason *why = &p->unplanned[i];
    const schedule_class *k = &p->schedule->classes[why->class_of];
    report as = view_plan_report(r, p, why->class_of);
    text_char(out, '\n');
    page_line(out, "Unplanned",
              text_format(r->arena, "%s: %s.", view_plan_all_ids(r, p, k->wall, k->count),
                          view_plan_reason(r, p, why)));
    page_line(out, "",
              text_format(r->arena, "Asked (%s): %s.", view_plan_class(r, why->class_of),
                          view_plan_demand(r, p, why->class_of)));
    if (why->why)
      report_others_text(&as, "Near misses", "Walls that come nearest", why->why->nearest,
                         why->why->nearest_count, true, out);
  }
}

static void put_cautions(const report *r, const plan_answer *p, text *out) {
  const char *caution[VIEW_MAX_PLAN_CAUTIONS];
  int count = view_plan_cautions(r, p, caution);
  text_char(out, '\n');
  for (int i = 0; i < count; i++) {
    page_label(out, i == 0 ? "Cautions" : "");
    text_put(out, "- ");
    page_words(out, PAGE_LABEL + 2, caution[i]);
  }
}

/* ---- together ---- */

static void put_none(const report *r, const plan_answer *p, text *out) {
  bool all = p->unplanned_rows == p->schedule->count;
  page_line(out, "Answer",
            p->status == SOLVER_LIMIT ? "No plan found within the time; one may exist."
            : all                     ? "No wall of the schedule has a type that fits."
                                      : "No plan keeps every rule of the project.");
  put_counts(r, p, out);
  put_terms(r, p, out);
  put_conflicts(r, p, out);
  put_curve(r, p, out);
  put_rule_prices(r, p, out);
  put_unplanned(r, p, out);
  report_unpriced_text(r, out);
}

static void put_plan(const report *r, const plan_answer *p, text *out) {
  put_found(r, p, out);
  put_counts(r, p, out);
  put_parts(r, p, out);
  put_terms(r, p, out);
  report_unpriced_text(r, out);
  put_type_table(r, p, out);
  for (int i = 0; i < p->type_count; i++) put_type(r, p, &p->type[i], out);
  put_unplanned(r, p, out);
  put_curve(r, p, out);
  put_rule_prices(r, p, out);
  report_plan_drawings_text(r, p, out);
  report_plan_quantities_text(r, p, out);
  put_cautions(r, p, out);
  exclusions_text(view_plan_any_brief(r, p), out);
}

void report_plan_text(const report *r, const plan_answer *p, text *out) {
  if (p->project->title[0] != '\0') page_line(out, "Project", p->project->title);
  if (p->found)
    put_plan(r, p, out);
  else
    put_none(r, p, out);
  page_line(out, "Made by", "septum " SEPTUM_VERSION);
}
