/* What it is, fire, height and rules of one wall. */
#include "report/html_wall.h"

#include "report/exclusions.h"
#include "report/section.h"
#include "report/view.h"

/* --- words ----------------------------------------------------------------------------------- */

const char *html_thickness(html *h, double metres) {
  text t;
  text_init(&t, h->report->arena, 100);
  units_put_thickness(&t, metres, h->report->units);
  return t.data;
}

const char *html_height(html *h, double metres) {
  text t;
  text_init(&t, h->report->arena, 100);
  units_put_height(&t, metres, h->report->units);
  return t.data;
}

const char *html_mass(html *h, double kg_m2) {
  text t;
  text_init(&t, h->report->arena, 100);
  units_put_surface_mass(&t, kg_m2, h->report->units);
  return t.data;
}

const char *html_size_words(html *h) {
  const brief *b = h->report->brief;
  return text_format(h->report->arena, "%s x %s", html_height(h, b->length_m),
                     html_height(h, b->height_m));
}

const char *html_fire_words(html *h, const assessment *x) {
  if (x->fire.minutes == 0) return "not shown";
  return text_format(h->report->arena, "%d min", x->fire.minutes);
}

/* --- at a glance ----------------------------------------------------------------------------- */

static void put_rating(html *h, const assessment *x) {
  const report *r = h->report;
  const brief *b = r->brief;
  bool asked = b->target_count > 0;
  sound_metric m = asked ? b->targets[0].metric : METRIC_STC;
  const char *note;
  if (view_published(x, m))
    note = text_format(r->arena, "published: %s", x->evidence.match->name);
  else if (asked)
    note = text_format(r->arena, "predicted; %s %% sure of the target, %s",
                       view_sureness(r, x->probability[0]), view_target(r, &b->targets[0]));
  else
    note = text_format(r->arena, "predicted; %s %% sure of %s %d",
                       view_sureness(r, view_confidence(r)), sound_metric_names[m],
                       view_assured(r, x, m, view_confidence(r)));
  html_figure(h, "Sound rating",
              text_format(r->arena, "%s %d", sound_metric_names[m], rating_of(&x->ratings, m)),
              note);
}

static void put_cost(html *h, const assessment *x) {
  const report *r = h->report;
  view_cost v = view_cost_of(r, x);
  if (!v.costed) {
    html_figure(h, "Cost", "not known", html_cost_words(h, x));
    return;
  }
  html_figure(h, text_format(r->arena, "Cost, %s per %s", r->prices->currency, view_area(r)),
              view_cents(r, view_in_cents(view_per_area(r, v.per_m2))),
              text_format(r->arena, "%s for %s of %s",
                          view_money(r, (double)x->cost.total_cents / 100, NULL),
                          r->asked ? "the wall" : "a reference wall", html_size_words(h)));
  if (x->cost.floor_value_cents > 0)
    html_figure(h, "Floor under it", view_cents(r, x->cost.floor_value_cents),
                text_format(r->arena, "%s, value of the floor area; apart from the cost",
                            r->prices->currency));
}

void html_wall_figures(html *h, const assessment *x) {
  const report *r = h->report;
  const brief *b = r->brief;
  html_figures(h);
  put_rating(h, x);
  put_cost(h, x);
  html_figure(h, "Thickness", html_thickness(h, x->thickness_m),
              b->thickness_m.has_max
                  ? text_format(r->arena, "at most %s", html_thickness(h, b->thickness_m.max))
                  : NULL);
  html_figure(h, "Mass", html_mass(h, x->mass_kg_m2), NULL);
  html_figure(h, "Fire rating", html_fire_words(h, x),
              b->fire_min > 0
                  ? text_format(r->arena, "asked %d min; code %s", b->fire_min, view_code(r))
                  : text_format(r->arena, "none asked; code %s", view_code(r)));
  html_figure(h, "Height up to", html_height(h, x->height.limit_m),
              text_format(r->arena, "%s %s", r->asked ? "asked" : "reference wall",
                          html_height(h, b->height_m)));
  html_figures_end(h);
}

static void put_drawing(html *h, const assessment *x, const char *css_class, bool compact) {
  section_options o = {.prefix = html_picture_id(h), .compact = compact};
  section_draw(h->report, &x->wall, &o, html_picture(h, css_class));
  html_picture_end(h, NULL);
}

void html_wall_drawing(html *h, const assessment *x, bool compact) {
  if (!compact) put_drawing(h, x, "drawing wide", false);
  put_drawing(h, x, compact ? "card-drawing" : "card-drawing narrow", true);
}

/* --- what it is ------------------------------------------------------------------------------ */

void html_wall_parts(html *h, const assessment *x) {
  static const html_column columns[] = {
      {"Where", HTML_HEAD}, {"What", HTML_WORDS}, {"Thickness", HTML_FIGURE}};
  view_parts *parts = arena_alloc(h->report->arena, sizeof *parts);
  view_parts_of(h->report, &x->wall, parts);
  html_section(h, "What it is made of");
  html_table(h, "From the room on side A to the room on side B", columns, HTML_COUNT(columns));
  for (int i = 0; i < parts->count; i++) {
    const view_part *p = &parts->part[i];
    html_row(h, HTML_CELLS(p->where, p->what,
                           p->thickness_m > 0 ? html_thickness(h, p->thickness_m) : NULL));
  }
  html_row_as(h, "total",
              HTML_CELLS("together",
                         text_format(h->report->arena, "%s of wall", html_mass(h, x->mass_kg_m2)),
                         html_thickness(h, x->thickness_m)));
  html_table_end(h);
  html_section_end(h);
}

/* --- fire, height, rules --------------------------------------------------------------------- */

static void put_fire(html *h, const assessment *x) {
  const report *r = h->report;
  bool code = r->brief->code != CODE_NONE;
  html_fact(h, "Fire rating shown",
            text_format(r->arena, "%s%s", html_fire_words(h, x),
                        code ? text_format(r->arena, " under code %s", view_code(r))
                             : "; no code is named"));
  html_fact(h, "Fire rating asked",
            r->brief->fire_min > 0 ? text_format(r->arena, "%d min", r->brief->fire_min) : "none");
  html_fact(h, "Basis",
            x->fire.minutes > 0 ? x->fire.basis
            : code              ? "no rule, row or listing covers this wall"
                                : "no listing covers this wall");
  if (x->fire.minutes > 0) html_fact(h, "Source", x->fire.source);
  if (x->fire.row_id) html_fact_data(h, "Row", x->fire.row_id);
  if (x->fire.note) html_fact(h, "Besides", x->fire.note);
}

static void put_height(html *h, const assessment *x) {
  const report *r = h->report;
  html_fact(h, "Limiting height", html_height(h, x->height.limit_m));
  html_fact(h, r->asked ? "Height asked" : "Height of the reference wall",
            html_height(h, r->brief->height_m));
  html_fact(h, "Basis",
            text_format(r->arena, "%s (%s governs)", x->height.basis, x->height.governs));
  html_fact(h, "Source", x->height.source);
}

const char *html_rules(html *h, rule_mask mask) {
  const report *r = h->report;
  text t;
  int n = 0, all = rules_count(mask);
  text_init(&t, r->arena, 64 << 10);
  for (int i = 0; i < RULES_MAX; i++) {
    if (!((mask >> i) & 1u)) continue;
    text_put(&t, n == 0 ? "" : n == all - 1 ? " and " : ", ");
    text_put(&t, rule_name(r->arena, r->brief, i));
    n++;
  }
  return t.data;
}

void html_broken(html *h, const char *caption, const assessment *x) {
  static const html_column columns[] = {
      {"Rule", HTML_HEAD}, {"Asks", HTML_WORDS}, {"The wall has", HTML_WORDS}};
  if (x->broken_count == 0) return;
  html_table(h, caption, columns, HTML_COUNT(columns));
  for (int i = 0; i < x->broken_count; i++) {
    const broken_rule *b = &x->broke[i];
    html_row(h, HTML_CELLS(rule_name(h->report->arena, h->report->brief, b->rule), b->limit,
                           view_clause(h->report, b->found)));
  }
  html_table_end(h);
}

static void put_rules(html *h, const assessment *x) {
  const report *r = h->report;
  rule_mask price = rule_bit(RULE_PRICE); /* a condition of any answer, not a rule somebody set */
  rule_mask kept = rules_in_force(r->brief) & ~x->broken & ~price;
  html_heading(h, "Rules");
  if (r->asked)
    html_paragraph(h, text_format(r->arena, "Kept: %s.", kept ? html_rules(h, kept) : "none"));
  else
    html_paragraph(h, "No brief was given: nothing is asked but the height of the reference wall.");
  html_broken(h, "Rules that this wall breaks", x);
}

void html_check_parts(html *h, const assessment *x) {
  html_heading(h, "Fire");
  html_facts(h);
  put_fire(h, x);
  html_facts_end(h);
  html_heading(h, "Height");
  html_facts(h);
  put_height(h, x);
  html_facts_end(h);
  put_rules(h, x);
}

void html_wall_checks(html *h, const assessment *x) {
  html_section(h, "Fire, height and rules");
  html_check_parts(h, x);
  html_section_end(h);
}

void html_brief_sheet(html *h, const assessment *x) {
  html_curve(h, x);
  html_bands(h, x);
  html_ratings_table(h, x);
  html_evidence(h, x);
  html_facts(h);
  put_fire(h, x);
  html_facts_end(h);
  html_facts(h);
  put_height(h, x);
  html_facts_end(h);
  html_broken(h, "Rules that it breaks there", x);
}

/* --- the ends of a page ---------------------------------------------------------------------- */

void html_cautions(html *h, const char *const *caution, int count) {
  html_section(h, "Cautions");
  html_list(h, caution, count);
  html_section_end(h);
}

void html_exclusions(html *h, const brief *b) {
  const char *words[EXCLUSIONS_MAX];
  html_section(h, "Not in the price");
  html_list(h, words, exclusions_of(b, words));
  html_section_end(h);
}

void html_wall_cautions(html *h, const assessment *x) {
  const char *caution[VIEW_MAX_CAUTIONS];
  html_cautions(h, caution, view_cautions(h->report, x, caution));
  html_exclusions(h, h->report->brief);
}

void html_unpriced(html *h) {
  const report *r = h->report;
  text t;
  size_t n = 0;
  if (!r->prices) return;
  price_codes l = prices_codes(r->arena, r->catalog, r->prices);
  text_init(&t, r->arena, 64 << 10);
  for (size_t i = 0; i < l.count; i++)
    if (!l.priced[i]) text_putf(&t, "%s%s", n++ ? ", " : "No price for ", l.code[i]);
  if (n == 0) return;
  text_put(&t, ": walls that need one of these are left out.");
  html_note(h, "care", t.data);
}

void html_conflicts(html *h, const rule_mask *conflict, int count) {
  const report *r = h->report;
  const char **item = arena_array(r->arena, (size_t)count, sizeof *item);
  for (int i = 0; i < count; i++)
    item[i] = text_format(r->arena, "%s cannot be had %s.", html_rules(h, conflict[i]),
                          rules_count(conflict[i]) > 1 ? "together" : "at all");
  html_list(h, item, count);
}
