/* `trim` for the contractor: the specified wall, then what may stand in its place. */
#include <math.h>

#include "report/exclusions.h"
#include "report/page.h"
#include "report/report_text.h"
#include "report/report_trim.h"
#include "report/view_trim.h"
#include "septum.h"

enum { MONEY_END = PAGE_LABEL + 10, ITEM_AT = MONEY_END + 2 };

static const char *cents_words(const report *r, long long cents) {
  text t;
  text_init(&t, r->arena, 64);
  text_cents(&t, cents, true);
  return t.data;
}

static double per_area(const report *r, double per_m2) {
  return r->units == UNITS_US ? per_m2 * UNITS_M2_PER_FT2 : per_m2;
}

static const char *area(const report *r) {
  return r->units == UNITS_US ? "ft2" : "m2";
}

/* --- the walls ------------------------------------------------------------------------------- */

static void put_figures(const report *r, const assessment *x, text *out) {
  text t;
  text_init(&t, r->arena, 2000);
  text_putf(&t, "%s, %s; fire %s; height up to ", view_trim_rating(r, x), view_trim_sure(r, x),
            view_trim_fire(r, x));
  units_put_height(&t, x->height.limit_m, r->units);
  text_put(&t, "; ");
  units_put_thickness(&t, x->thickness_m, r->units);
  text_put(&t, " thick; ");
  units_put_surface_mass(&t, x->mass_kg_m2, r->units);
  text_char(&t, '.');
  page_line(out, "", t.data);
}

static void put_specified(const report *r, const trim_answer *t, text *out) {
  const assessment *x = t->specified;
  view_cost v = view_cost_of(r, x);
  page_line(out, "Specified", x->line);
  if (x->name) page_line(out, "", x->name);
  put_figures(r, x, out);
  text c;
  text_init(&c, r->arena, 500);
  text_putf(&c, "%s, %s for the wall of ", view_money(r, per_area(r, v.per_m2), area(r)),
            view_money(r, (double)x->cost.total_cents / 100, NULL));
  units_put_height(&c, r->brief->length_m, r->units);
  text_put(&c, " x ");
  units_put_height(&c, r->brief->height_m, r->units);
  if (x->cost.floor_value_cents > 0)
    text_putf(&c, ", and %s of floor under it",
              view_money(r, (double)x->cost.floor_value_cents / 100, NULL));
  text_char(&c, '.');
  page_line(out, "", c.data);
  const char *promises = view_trim_promises(r, t);
  if (promises)
    page_line(out, "Drawings", text_format(r->arena, "They promise %s.", promises));
  page_line(out, "Held to", view_trim_terms(r, t));
}

/* When the goods are on site, where they are not on the shelf. */
static void put_lead(const report *r, const assessment *x, text *out) {
  const char *item;
  double weeks = view_lead_weeks(r, x, &item);
  if (weeks > 0)
    page_line(out, "Lead time",
              text_format(r->arena, "%s weeks: %s.", text_of(r->arena, weeks, 1), item));
}

static void put_verdict(const report *r, const trim_answer *t, text *out) {
  static const char *const words[] = {
      "The specified wall holds all of that.",
      "The specified wall cannot be shown to hold all of that:",
      "The specified wall does not hold all of that:",
  };
  page_line(out, "Verdict", words[t->verdict]);
  for (int i = 0; i < t->specified->broken_count; i++) {
    const broken_rule *b = &t->specified->broke[i];
    page_line(out, "",
              text_format(r->arena, "%s: asks %s; has: %s.", rule_name(r->arena, r->brief, b->rule),
                          b->limit, view_clause(r, b->found)));
  }
}

/* --- one proposal ---------------------------------------------------------------------------- */

/* The number of the first proposal that has the same change, told there already; 0 = none. */
static int told_before(const trim_answer *t, int proposal, const trim_change *c) {
  for (int i = 0; i < proposal; i++)
    for (int k = 0; k < t->proposal[i].change_count; k++) {
      const trim_change *d = &t->proposal[i].change[k];
      if (c->alone && d->alone && text_equal(c->alone->line, d->alone->line)) return i + 1;
    }
  return 0;
}

static void put_change(const report *r, const trim_answer *t, int proposal, const trim_change *c,
                       text *out) {
  int told = told_before(t, proposal, c);
  page_label(out, "");
  page_right(out, MONEY_END, c->alone ? cents_words(r, c->saving_cents) : "-");
  text_pad(out, ITEM_AT);
  page_words(out, ITEM_AT + 2,
             text_format(r->arena, "%s%s", c->what,
                         told ? text_format(r->arena, "; alone as under wall %d", told) : ""));
  if (told) return;
  text_pad(out, ITEM_AT + 2);
  page_words(out, ITEM_AT + 2, view_trim_effect(r, t, c));
}

static void put_changes(const report *r, const trim_answer *t, int proposal, text *out) {
  const trim_proposal *p = &t->proposal[proposal];
  page_line(out, "Changes",
            text_format(r->arena, "What each saves when it is taken alone, in %s for the wall:",
                        r->prices->currency));
  for (int i = 0; i < p->change_count; i++) put_change(r, t, proposal, &p->change[i], out);
  page_label(out, "");
  page_right(out, MONEY_END, cents_words(r, p->together_cents));
  text_pad(out, ITEM_AT);
  page_words(out, ITEM_AT + 2, "together: what all of them save beyond that");
  page_label(out, "");
  page_right(out, MONEY_END, cents_words(r, p->saving_cents));
  text_pad(out, ITEM_AT);
  page_words(out, ITEM_AT + 2, "saving");
}

static void put_proposal(const report *r, const trim_answer *t, int i, text *out) {
  const trim_proposal *p = &t->proposal[i];
  double before = (double)t->specified->numbers.cost_cents;
  text_char(out, '\n');
  page_line(out, text_format(r->arena, "Wall %d", i + 1), p->wall->line);
  page_line(out, "Saves",
            text_format(r->arena, "%s, %s for the wall: %s %% of the specified one%s.",
                        view_money(r, per_area(r, p->saving_per_m2), area(r)),
                        view_money(r, (double)p->saving_cents / 100, NULL),
                        text_of(r->arena, 100 * (double)p->saving_cents / before, 1),
                        r->brief->floor_area_value_per_m2 > 0 ? ", floor area included" : ""));
  if (t->terms.redesign_cents > 0)
    page_line(out, "",
              text_format(r->arena, "%s after %s for redesign and resubmittal.",
                          view_money(r, (double)p->net_cents / 100, NULL),
                          view_money(r, (double)t->terms.redesign_cents / 100, NULL)));
  put_figures(r, p->wall, out);
  put_lead(r, p->wall, out);
  put_changes(r, t, i, out);
  text losses;
  text_init(&losses, r->arena, 3000);
  text_putf(&losses, "%s.", view_trim_losses(r, p));
  page_line(out, "Gives up", losses.data);
}

/* --- together -------------------------------------------------------------------------------- */

static void put_answer(const report *r, const trim_answer *t, text *out) {
  text n;
  text_init(&n, r->arena, 100);
  view_count(&n, t->walls);
  text_put(&n, " walls judged.");
  if (t->proposal_count == 0)
    page_line(out, "Answer", "Nothing cheaper holds all of that.");
  else
    page_line(out, "Answer",
              text_format(r->arena,
                          "%d cheaper %s all of that, beaten by no other in cost, thickness, mass, "
                          "rating, fire and height; best saving first%s.",
                          t->found, t->found == 1 ? "wall holds" : "walls hold",
                          t->found > t->proposal_count
                              ? text_format(r->arena, ", the first %d are shown", t->proposal_count)
                              : ""));
  page_line(out, "", n.data);
}

static void put_cheapest(const report *r, const trim_answer *t, text *out) {
  if (!t->cheapest) {
    page_line(out, "Cheapest", "No wall of those judged holds all of that, at any cost.");
    return;
  }
  if (text_equal(t->cheapest->line, t->specified->line)) {
    page_line(out, "Cheapest", "The specified wall is the cheapest that holds all of that.");
    return;
  }
  page_line(
      out, "Cheapest",
      text_format(r->arena, "The cheapest of the walls judged that holds it costs %s more: %s",
                  view_money(r, (double)t->cheapest_more_cents / 100, NULL), t->cheapest->line));
}

static void put_cautions(const report *r, const trim_answer *t, text *out) {
  const char *caution[VIEW_MAX_CAUTIONS];
  const assessment *x = t->proposal_count > 0 ? t->proposal[0].wall : t->specified;
  int count = view_cautions(r, x, caution);
  for (int i = 0; i < count; i++) {
    page_label(out, i == 0 ? "Cautions" : "");
    text_put(out, "- ");
    page_words(out, PAGE_LABEL + 2, caution[i]);
  }
  page_label(out, "");
  text_put(out, "- ");
  page_words(out, PAGE_LABEL + 2,
             "A change of a specified wall needs the acceptance of the owner and the designer; see "
             "`septum rate` for all about one wall.");
  if (t->terms.design == NULL) return;
  page_label(out, "");
  text_put(out, "- ");
  page_words(out, PAGE_LABEL + 2,
             text_format(r->arena,
                         "Design %s covers the wall that it describes: any other wall needs a listed "
                         "design of its own.",
                         t->terms.design));
}

void report_trim_text(const report *r, const trim_answer *t, text *out) {
  if (r->brief->title[0] != '\0') page_line(out, "Brief", r->brief->title);
  put_specified(r, t, out);
  put_verdict(r, t, out);
  put_answer(r, t, out);
  report_unpriced_text(r, out);
  for (int i = 0; i < t->proposal_count; i++) put_proposal(r, t, i, out);
  if (t->proposal_count == 0) {
    put_cheapest(r, t, out);
    report_others_text(r, "Cheaper but", "Cheaper walls, and what they fail", t->cheaper,
                       t->cheaper_count, true, out);
  }
  text_char(out, '\n');
  report_rule_prices_text(r, t->prices, t->price_count, t->base_line, out);
  put_cautions(r, t, out);
  exclusions_text(r->brief, out);
  page_line(out, "Made by", "septum " SEPTUM_VERSION);
}
