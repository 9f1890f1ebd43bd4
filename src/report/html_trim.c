/* The page of `trim`: the specified wall, and what may stand in its place. */
#include "report/chart_cost.h"
#include "report/html_wall.h"
#include "report/report_html.h"
#include "report/view_trim.h"

static const char *signed_words(html *h, double value, int decimals) {
  arena *a = h->report->arena;
  const char *words = text_of(a, value, decimals);
  return value > 0 && words[0] != '0' ? text_format(a, "+%s", words) : words;
}

/* A change of a length or a mass with its sign: "-5/8 in", "0". */
static const char *change_of(html *h, double change, const char *size) {
  return change == 0 ? "0" : text_format(h->report->arena, "%s%s", change > 0 ? "+" : "-", size);
}

static const char *thickness_change(html *h, const assessment *from, const assessment *to) {
  int tenths = to->numbers.thickness_tenth_mm - from->numbers.thickness_tenth_mm;
  return change_of(h, tenths, html_thickness(h, (tenths < 0 ? -tenths : tenths) * 1e-4));
}

static const char *mass_change(html *h, const assessment *from, const assessment *to) {
  int hundredths = to->numbers.mass_hundredth - from->numbers.mass_hundredth;
  return change_of(h, hundredths, html_mass(h, (hundredths < 0 ? -hundredths : hundredths) * 0.01));
}

static const char *height_change(html *h, const assessment *from, const assessment *to) {
  int mm = to->numbers.height_mm - from->numbers.height_mm;
  return change_of(h, mm, html_height(h, (mm < 0 ? -mm : mm) * 1e-3));
}

static const char *heavy_words(const bool heavy[2]) {
  return heavy[SIDE_A]   ? heavy[SIDE_B] ? "on both sides" : "on side A"
         : heavy[SIDE_B] ? "on side B"
                         : "on neither side";
}

static const char *saving_area(html *h, double per_m2) {
  const report *r = h->report;
  return view_cents(r, view_in_cents(view_per_area(r, per_m2)));
}

static const char *share_words(html *h, const trim_answer *t, long long saving) {
  double before = (double)t->specified->numbers.cost_cents;
  return text_format(h->report->arena, "%s %%",
                     text_of(h->report->arena, 100 * (double)saving / before, 1));
}

/* --- at a glance ----------------------------------------------------------------------------- */

static const char *answer_words(const report *r, const trim_answer *t) {
  if (t->proposal_count == 0) return "Nothing cheaper holds all that the specified wall must hold.";
  return text_format(
      r->arena,
      "%d cheaper %s all of that, beaten by no other in cost, thickness, mass, rating, fire and "
      "height; best saving first%s.",
      t->found, t->found == 1 ? "wall holds" : "walls hold",
      t->found > t->proposal_count
          ? text_format(r->arena, ", the first %d are shown", t->proposal_count)
          : "");
}

static const char *verdict_words(const trim_answer *t) {
  static const char *const words[] = {
      "The specified wall holds all that it is held to.",
      "The specified wall cannot be shown to hold all that it is held to.",
      "The specified wall does not hold all that it is held to.",
  };
  return words[t->verdict];
}

static void put_one(html *h, const char *heading, const assessment *x) {
  html_box(h, "card");
  html_heading(h, heading);
  html_line(h, x->line);
  if (x->name) html_paragraph(h, x->name);
  html_wall_figures(h, x);
  html_wall_drawing(h, x, true);
  html_box_end(h);
}

static void put_pair(html *h, const trim_answer *t) {
  html_box(h, "pair");
  put_one(h, "Before: as specified", t->specified);
  if (t->proposal_count > 0) {
    const trim_proposal *p = &t->proposal[0];
    put_one(h,
            text_format(h->report->arena, "After: wall 1, saves %s for the wall",
                        view_money(h->report, (double)p->saving_cents / 100, NULL)),
            p->wall);
  }
  html_box_end(h);
}

static void put_glance(html *h, const trim_answer *t) {
  const report *r = h->report;
  text n;
  text_init(&n, r->arena, 100);
  view_count(&n, t->walls);
  text_put(&n, " walls judged.");
  html_section(h, "At a glance");
  html_note(h, t->verdict == TRIM_HOLDS ? "good" : "care", verdict_words(t));
  html_note(h, t->proposal_count > 0 ? "good" : "care", answer_words(r, t));
  html_note(h, "soft", n.data);
  put_pair(h, t);
  html_unpriced(h);
  html_section_end(h);
}

/* --- what it is held to ---------------------------------------------------------------------- */

static void put_terms(html *h, const trim_answer *t) {
  const report *r = h->report;
  const char *promises = view_trim_promises(r, t);
  html_section(h, "What the wall is held to");
  html_paragraph(h, text_format(r->arena, "Held to %s", view_trim_terms(r, t)));
  html_facts(h);
  html_fact(h, "Rules in force", html_rules(h, rules_in_force(r->brief)));
  html_fact(h, "Thicker by at most", html_thickness(h, t->terms.slack_m));
  if (promises) html_fact(h, "The drawings promise", promises);
  html_fact(h, "Takes heavy fastening", heavy_words(t->heavy));
  html_facts_end(h);
  html_broken(h, "What the specified wall does not keep", t->specified);
  html_section_end(h);
}

/* "STC 54", and what it rests on where that is no prediction. */
static const char *rating_words(html *h, const assessment *x) {
  sound_metric m = view_trim_metric(h->report);
  return text_format(h->report->arena, "%s %d%s", sound_metric_names[m], rating_of(&x->ratings, m),
                     view_published(x, m) ? ", published" : "");
}

static const char *sure_words(html *h, const assessment *x) {
  const report *r = h->report;
  text t;
  text_init(&t, r->arena, 200);
  for (int i = 0; i < r->brief->target_count; i++)
    text_putf(&t, "%s%s %%", i ? ", " : "", view_sureness(r, x->probability[i]));
  return t.data;
}

/* --- the log --------------------------------------------------------------------------------- */

static void put_log_row(html *h, const trim_answer *t, int i) {
  const report *r = h->report;
  const trim_proposal *p = &t->proposal[i];
  const assessment *from = t->specified, *x = p->wall;
  html_row(h,
           HTML_CELLS(text_format(r->arena, "%d", i + 1), x->line, view_cents(r, p->saving_cents),
                      saving_area(h, p->saving_per_m2), share_words(h, t, p->saving_cents),
                      rating_words(h, x), signed_words(h, view_trim_shift(r, from, x), 1),
                      sure_words(h, x), thickness_change(h, from, x), mass_change(h, from, x),
                      html_fire_words(h, x), view_trim_losses(r, p)));
}

static void put_log(html *h, const trim_answer *t) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Wall", HTML_ID},
      {"Proposed", HTML_LINE},
      {text_format(r->arena, "Saves, %s", r->prices->currency), HTML_FIGURE},
      {text_format(r->arena, "per %s", view_area(r)), HTML_FIGURE},
      {"Share", HTML_FIGURE},
      {"Rating", HTML_CODE},
      {"Predicted, dB", HTML_FIGURE},
      {"How sure", HTML_FIGURE},
      {"Thickness", HTML_FIGURE},
      {"Mass", HTML_FIGURE},
      {"Fire", HTML_FIGURE},
      {"Gives up", HTML_WORDS}};
  html_section(h, "Proposals");
  const char *id = html_picture_id(h);
  chart_savings(r, id, t, html_picture(h, HTML_CHART));
  html_picture_end(h, NULL);
  html_table_as(h, "dense",
                text_format(r->arena, "Against the specified wall: %s, %s, %s, up to %s",
                            view_trim_rating(r, t->specified),
                            html_thickness(h, t->specified->thickness_m),
                            html_mass(h, t->specified->mass_kg_m2),
                            html_height(h, t->specified->height.limit_m)),
                columns, HTML_COUNT(columns));
  for (int i = 0; i < t->proposal_count; i++) put_log_row(h, t, i);
  html_table_end(h);
  html_section_end(h);
}

/* --- one proposal ---------------------------------------------------------------------------- */

static void put_changes(html *h, const trim_answer *t, const trim_proposal *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Change", HTML_HEAD},
      {"From", HTML_WORDS},
      {"To", HTML_WORDS},
      {text_format(r->arena, "Saves alone, %s", r->prices->currency), HTML_FIGURE},
      {"What it does when taken alone", HTML_WORDS},
      {"Then the wall is", HTML_LINE}};
  html_table(h, "Change by change", columns, HTML_COUNT(columns));
  for (int i = 0; i < p->change_count; i++) {
    const trim_change *c = &p->change[i];
    html_row(h,
             HTML_CELLS(c->what, c->from, c->to, c->alone ? view_cents(r, c->saving_cents) : NULL,
                        view_trim_effect(r, t, c), c->alone ? c->alone->line : NULL));
  }
  html_row(h, HTML_CELLS("together", NULL, NULL, view_cents(r, p->together_cents),
                         "what all of them save beyond that", NULL));
  html_row_as(h, "total",
              HTML_CELLS("saving", NULL, NULL, view_cents(r, p->saving_cents), NULL, NULL));
  html_table_end(h);
}

static void put_differences(html *h, const trim_answer *t, const trim_proposal *p) {
  const report *r = h->report;
  const assessment *from = t->specified, *x = p->wall;
  int fire = x->numbers.fire_min - from->numbers.fire_min;
  html_facts(h);
  html_fact(h, "Saves",
            text_format(r->arena, "%s for the wall, %s: %s of the specified one",
                        view_money(r, (double)p->saving_cents / 100, NULL),
                        view_money(r, view_per_area(r, p->saving_per_m2), view_area(r)),
                        share_words(h, t, p->saving_cents)));
  if (r->brief->floor_area_value_per_m2 > 0)
    html_fact(h, "Of this floor area",
              view_money(r,
                         (double)(from->cost.floor_value_cents - x->cost.floor_value_cents) / 100,
                         NULL));
  if (t->terms.redesign_cents > 0)
    html_fact(h, "Net of redesign and resubmittal",
              view_money(r, (double)p->net_cents / 100, NULL));
  html_fact(h, "Rating",
            text_format(r->arena, "%s; %s; predicted %s dB", view_trim_rating(r, x),
                        view_trim_sure(r, x), signed_words(h, view_trim_shift(r, from, x), 1)));
  html_fact(h, "Thickness",
            text_format(r->arena, "%s (%s)", html_thickness(h, x->thickness_m),
                        thickness_change(h, from, x)));
  html_fact(h, "Mass",
            text_format(r->arena, "%s (%s)", html_mass(h, x->mass_kg_m2), mass_change(h, from, x)));
  html_fact(h, "Fire",
            text_format(r->arena, "%s (%s min)", view_trim_fire(r, x), signed_words(h, fire, 0)));
  html_fact(h, "Height",
            text_format(r->arena, "up to %s (%s); %s", html_height(h, x->height.limit_m),
                        height_change(h, from, x), x->height.basis));
  html_fact(h, "Takes heavy fastening", heavy_words(p->heavy));
  html_facts_end(h);
}

static void put_losses(html *h, const trim_proposal *p) {
  html_group(h, "What it gives up");
  if (p->loss_count == 0)
    html_paragraph(h, "Nothing of what is judged here.");
  else
    html_list(h, p->loss, p->loss_count);
}

static void put_own_cautions(html *h, const assessment *x) {
  const char *caution[VIEW_MAX_CAUTIONS];
  html_group(h, "Cautions");
  html_list(h, caution, view_cautions(h->report, x, caution));
}

static void put_proposal(html *h, const trim_answer *t, int i) {
  const report *r = h->report;
  const trim_proposal *p = &t->proposal[i];
  const char *name = text_format(r->arena, "wall %d", i + 1);
  html_section(h, text_format(r->arena, "Wall %d: saves %s", i + 1,
                              view_money(r, (double)p->saving_cents / 100, NULL)));
  html_line(h, p->wall->line);
  html_wall_drawing(h, p->wall, false);
  put_differences(h, t, p);
  put_losses(h, p);
  html_group(h, "Changes");
  put_changes(h, t, p);
  html_group(h, "Cost, before and after");
  const char *id = html_picture_id(h);
  chart_before_after(r, id, t->specified, p->wall, name, html_picture(h, HTML_CHART));
  html_picture_end(h, NULL);
  html_group(h, "Sound");
  html_sound_parts(h, p->wall);
  html_group(h, "Fire, height and rules");
  html_check_parts(h, p->wall);
  html_group(h, "Cost");
  html_cost_parts(h, p->wall);
  put_own_cautions(h, p->wall);
  html_section_end(h);
}

/* --- without proposals ----------------------------------------------------------------------- */

static void put_cheapest(html *h, const trim_answer *t) {
  const report *r = h->report;
  const char *words = "No wall of those judged holds all of that, at any cost.";
  html_section(h, "Why there is nothing cheaper");
  if (t->cheapest && text_equal(t->cheapest->line, t->specified->line))
    words = "The specified wall is the cheapest that holds all of that.";
  else if (t->cheapest)
    words = text_format(
        r->arena, "The cheapest of the walls judged that holds all of that costs %s more: %s",
        view_money(r, (double)t->cheapest_more_cents / 100, NULL), t->cheapest->line);
  html_paragraph(h, words);
  html_others(h, "Cheaper walls, and what they fail", t->cheaper, t->cheaper_count, true);
  html_section_end(h);
}

/* --- together -------------------------------------------------------------------------------- */

static void put_specified(html *h, const trim_answer *t) {
  html_section(h, "The specified wall");
  html_line(h, t->specified->line);
  html_wall_figures(h, t->specified);
  html_wall_drawing(h, t->specified, false);
  html_group(h, "Sound");
  html_sound_parts(h, t->specified);
  html_group(h, "Fire, height and rules");
  html_check_parts(h, t->specified);
  html_group(h, "Cost");
  html_cost_parts(h, t->specified);
  put_own_cautions(h, t->specified);
  html_section_end(h);
}

static void put_takeoffs(html *h, const trim_answer *t) {
  html_section(h, "Takeoffs");
  html_takeoff_table(h, "The specified wall", t->specified);
  for (int i = 0; i < t->proposal_count; i++)
    html_takeoff_table(h, text_format(h->report->arena, "Wall %d", i + 1), t->proposal[i].wall);
  html_section_end(h);
}

static void put_cautions(html *h, const trim_answer *t) {
  const char *caution[VIEW_MAX_CAUTIONS + 1];
  const assessment *x = t->proposal_count > 0 ? t->proposal[0].wall : t->specified;
  int count = view_cautions(h->report, x, caution);
  caution[count++] = "A change of a specified wall needs the acceptance of the owner and the "
                     "designer.";
  html_cautions(h, caution, count);
  html_exclusions(h, h->report->brief);
}

void report_trim_html(const report *r, const trim_answer *t, text *out) {
  html *h = arena_alloc(r->arena, sizeof *h);
  html_begin(h, r, "Cheaper walls for a specified one", r->brief->title, out);
  put_glance(h, t);
  put_terms(h, t);
  if (t->proposal_count > 0) put_log(h, t);
  for (int i = 0; i < t->proposal_count; i++) put_proposal(h, t, i);
  if (t->proposal_count == 0) put_cheapest(h, t);
  put_specified(h, t);
  if (t->price_count > 0) {
    html_section(h, "What the rules cost");
    html_rule_prices(h, "What giving up one rule would save, against the cheapest wall that holds",
                     t->prices, t->price_count, t->base_line);
    html_section_end(h);
  }
  put_takeoffs(h, t);
  html_brief(h, CATALOG_NONE);
  put_cautions(h, t);
  html_end_brief(h);
}
