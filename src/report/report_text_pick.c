/* `pick` for people: the wall, then why this one. */
#include "report/fixtures.h"
#include "report/page.h"
#include "report/report_text.h"
#include "report/view.h"
#include "septum.h"

static const char *per_area(const report *r) {
  return r->units == UNITS_US ? "ft2" : "m2";
}

static double in_area(const report *r, double per_m2) {
  return r->units == UNITS_US ? per_m2 * UNITS_M2_PER_FT2 : per_m2;
}

static const char *amount(const report *r, double value) {
  text t;
  text_init(&t, r->arena, 64);
  double minor = value * 100.0;
  text_cents(&t, (long long)(minor < 0.0 ? minor - 0.5 : minor + 0.5), true);
  return t.data;
}

/* --- other walls ----------------------------------------------------------------------------- */

enum { COST_COLUMNS = 9, FAIL_INDENT = PAGE_LABEL + COST_COLUMNS + 2 };

static void put_other(const report *r, const char *label, const assessment *x, text *out) {
  view_cost v = view_cost_of(r, x);
  page_label(out, label);
  page_right(out, PAGE_LABEL + COST_COLUMNS, v.costed ? amount(r, in_area(r, v.per_m2)) : "?");
  text_put(out, "  ");
  text t;
  text_init(&t, r->arena, 2000);
  text_putf(&t, "STC %d, ", x->ratings.stc);
  units_put_thickness(&t, x->thickness_m, r->units);
  text_putf(&t, ": %s", x->line);
  page_words(out, FAIL_INDENT, t.data);
}

static void put_fails(const report *r, const assessment *x, text *out) {
  for (int i = 0; i < x->broken_count; i++) {
    const broken_rule *b = &x->broke[i];
    text_pad(out, FAIL_INDENT);
    page_words(out, FAIL_INDENT + 2,
               text_format(r->arena, "fails %s: asks %s; has: %s",
                           rule_name(r->arena, r->brief, b->rule), b->limit,
                           view_clause(r, b->found)));
  }
}

void report_others_text(const report *r, const char *label, const char *intro,
                        assessment *const *x, int count, bool fails, text *out) {
  if (count == 0) return;
  page_line(out, label,
            text_format(r->arena, "%s, in %s per %s:", intro,
                        r->prices != NULL ? r->prices->currency : "", per_area(r)));
  for (int i = 0; i < count; i++) {
    put_other(r, "", x[i], out);
    if (fails) put_fails(r, x[i], out);
  }
}

/* --- prices of rules and break-even ---------------------------------------------------------- */

static const explain_rule_price *dearest(const explanation *e) {
  const explain_rule_price *best = NULL;
  for (int i = 0; i < e->price_count; i++)
    if (e->prices[i].price_total > 0.0 &&
        (best == NULL || e->prices[i].price_total > best->price_total))
      best = &e->prices[i];
  return best;
}

static void put_decides(const report *r, const explanation *e, text *out) {
  const explain_rule_price *p = dearest(e);
  if (p == NULL) {
    page_line(out, "Decided by",
              "the sound target: no other rule, given up alone, would save anything.");
    return;
  }
  page_line(
      out, "Decided by",
      text_format(
          r->arena,
          "%s (%s), beside the sound target. With \"%s\" instead the wall would cost %s less.",
          p->name, p->from, p->to, view_money(r, in_area(r, p->price_per_m2), per_area(r))));
}

void report_rule_prices_text(const report *r, const explain_rule_price *prices, int count,
                             const char *base, text *out) {
  if (count == 0) return;
  page_line(out, "Rules cost",
            text_format(r->arena, "What giving up one rule would save, in %s per %s:",
                        r->prices != NULL ? r->prices->currency : "", per_area(r)));
  for (int i = 0; i < count; i++) {
    const explain_rule_price *p = &prices[i];
    page_label(out, "");
    page_right(out, PAGE_LABEL + COST_COLUMNS, amount(r, in_area(r, p->price_per_m2)));
    text_put(out, "  ");
    const char *then = "";
    if (p->price_total > 0.0 && p->wall != NULL)
      then =
          text_format(r->arena, "; %s for the wall; then %s",
                      view_money(r, p->price_total, NULL),
                      text_equal(p->wall->line, base) ? "the same wall" : p->wall->line);
    page_words(out, FAIL_INDENT,
               text_format(r->arena, "%s: %s in place of %s%s", p->name, p->to, p->from, then));
  }
}

/* Small prices keep a third digit. */
static const char *price_in(const report *r, const explain_break_even *b, double price) {
  cost_line l = {.unit = b->unit, .rate = price};
  double rate = view_quantity_of(r, &l).rate;
  return text_of(r->arena, rate, rate < 1.0 ? 3 : 2);
}

static void put_limits(const report *r, const explain_break_even *b, text *out) {
  enum { ITEM_COLUMNS = 18, INDENT = PAGE_LABEL + ITEM_COLUMNS + 1 };
  cost_line l = {.unit = b->unit};
  const char *unit = view_quantity_of(r, &l).unit;
  text t;
  text_init(&t, r->arena, 2000);
  text_putf(&t, "%s %s%s", price_in(r, b, b->price), text_equal(unit, "each") ? "" : "per ", unit);
  if (b->has_low) text_putf(&t, "; below %s: %s", price_in(r, b, b->low), b->low_line);
  if (b->has_high) text_putf(&t, "; above %s: %s", price_in(r, b, b->high), b->high_line);
  page_label(out, "");
  page_cut(out, ITEM_COLUMNS, b->item);
  text_pad(out, INDENT);
  page_words(out, INDENT, t.data);
}

static void put_break_even(const report *r, const explanation *e, text *out) {
  if (e->break_even_count == 0) return;
  text idle;
  text_init(&idle, r->arena, 4000);
  page_line(out, "Break-even", "How far one price may move before another wall is cheaper:");
  for (int i = 0; i < e->break_even_count; i++) {
    const explain_break_even *b = &e->break_even[i];
    if (b->has_low || b->has_high)
      put_limits(r, b, out);
    else
      text_putf(&idle, "%s%s", idle.len ? ", " : "", b->item);
  }
  if (idle.len > 0)
    page_line(out, "", text_format(r->arena, "At any price of these it stays: %s.", idle.data));
}

/* --- together -------------------------------------------------------------------------------- */

static void put_counts(const report *r, const explanation *e, const pick_choice *proof, text *out) {
  text t;
  text_init(&t, r->arena, 400);
  view_count(&t, e->walls);
  text_put(&t, " walls judged, ");
  view_count(&t, e->frontier);
  text_put(&t, " of them put to the solver");
  if (e->status == SOLVER_OPTIMAL)
    text_put(&t, "; proven cheapest.");
  else if (proof->found)
    text_putf(&t, "; it costs %s, no wall less than %s.", view_money(r, proof->objective, NULL),
              view_money(r, proof->bound, NULL));
  else
    text_put(&t, ".");
  page_line(out, "", t.data);
}

void report_pick_text(const report *r, const explanation *e, const pick_choice *proof, text *out) {
  if (r->brief->title[0] != '\0') page_line(out, "Brief", r->brief->title);
  if (e->chosen == NULL) {
    page_line(out, "Answer",
              e->status == SOLVER_INFEASIBLE
                  ? "No wall fits this brief."
                  : "No wall found within the time limit; one may exist.");
    put_counts(r, e, proof, out);
    report_unpriced_text(r, out);
    fixtures_text(r, out);
    report_conflicts_text(r, e, out);
    page_line(out, "Made by", "septum " SEPTUM_VERSION);
    return;
  }
  page_line(out, "Answer",
            e->status == SOLVER_OPTIMAL
                ? "The cheapest wall that keeps every rule of the brief."
                : "The cheapest wall found within the time limit; a cheaper one may exist.");
  put_counts(r, e, proof, out);
  report_unpriced_text(r, out);
  put_decides(r, e, out);
  report_wall_text(r, e->chosen, out);
  text_char(out, '\n');
  report_others_text(r, "Next best", "Walls that keep every rule too", e->runners, e->runner_count,
                     false, out);
  fixtures_text(r, out);
  report_others_text(r, "Cheaper but", "Cheaper walls, and what they fail", e->cheaper,
                     e->cheaper_count, true, out);
  report_rule_prices_text(r, e->prices, e->price_count, e->chosen->line, out);
  put_break_even(r, e, out);
  page_line(out, "Made by", "septum " SEPTUM_VERSION);
}
