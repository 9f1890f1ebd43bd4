/* Sound and evidence of one wall. */
#include "report/html_wall.h"

#include "report/chart_sound.h"
#include "report/setting.h"
#include "report/view.h"

static const char *decimal(html *h, double value, int decimals) {
  return text_of(h->report->arena, value, decimals);
}

static const char *whole(html *h, int value) {
  return text_format(h->report->arena, "%d", value);
}

/* --- ratings --------------------------------------------------------------------------------- */

static void put_ratings(html *h, const char *css_class, const char *name, const ratings *v) {
  html_row_as(h, css_class,
              HTML_CELLS(name, whole(h, v->stc), whole(h, v->rw), whole(h, v->c), whole(h, v->ctr),
                         whole(h, v->oitc)));
}

void html_ratings_table(html *h, const assessment *x) {
  static const html_column columns[] = {{"", HTML_HEAD},      {"STC", HTML_FIGURE},
                                        {"Rw", HTML_FIGURE},  {"C", HTML_FIGURE},
                                        {"Ctr", HTML_FIGURE}, {"OITC", HTML_FIGURE}};
  bool published = x->evidence.match != NULL;
  html_table(h, "Ratings", columns, HTML_COUNT(columns));
  put_ratings(h, "chosen",
              published ? "What this answer stands on: STC published, the rest predicted"
                        : "What this answer stands on: predicted",
              &x->ratings);
  if (published) put_ratings(h, NULL, "The prediction alone", &x->predicted.ratings);
  if (x->mounted)
    put_ratings(h, NULL, "If a fixture or a long screw bridges the mount",
                &x->short_predicted.ratings);
  if (x->has_composite) put_ratings(h, NULL, "With its openings", &x->composite);
  html_table_end(h);
}

static void put_prediction(html *h, const assessment *x) {
  static const html_column columns[] = {
      {"Metric", HTML_HEAD}, {"Exact", HTML_FIGURE}, {"Standard deviation", HTML_FIGURE}};
  static const html_column with_openings[] = {{"Metric", HTML_HEAD},
                                              {"Exact", HTML_FIGURE},
                                              {"Standard deviation", HTML_FIGURE},
                                              {"Exact, with the openings", HTML_FIGURE}};
  const prediction *p = &x->predicted;
  bool more = x->has_composite;
  html_table(h,
             text_format(h->report->arena,
                         "The prediction (family %s): highest contour in steps of 0.1 dB",
                         sound_family_names[p->family]),
             more ? with_openings : columns, HTML_COUNT(columns) + more);
  for (int m = 0; m < METRIC_COUNT; m++)
    html_row(h, HTML_CELLS(sound_metric_names[m], decimal(h, p->exact[m], 1),
                           decimal(h, p->sd[m], 2), decimal(h, x->composite_exact[m], 1)));
  html_table_end(h);
}

/* --- targets --------------------------------------------------------------------------------- */

static bool breaks_sound(const assessment *x) {
  return (x->broken & (rule_bit(RULE_TARGET) | rule_bit(RULE_CONFIDENCE) | rule_bit(RULE_EVIDENCE) |
                       rule_bit(RULE_COMPOSITE))) != 0;
}

static void put_targets(html *h, const assessment *x) {
  static const html_column columns[] = {{"Target", HTML_HEAD},
                                        {"In the laboratory", HTML_FIGURE},
                                        {"The wall", HTML_WORDS},
                                        {"How sure", HTML_FIGURE}};
  const report *r = h->report;
  const brief *b = r->brief;
  if (b->target_count == 0) return;
  html_table(h,
             breaks_sound(x)        ? "Targets: not reached"
             : b->target_count == 1 ? "Target: reached"
                                    : "Targets: all reached",
             columns, HTML_COUNT(columns));
  for (int i = 0; i < b->target_count; i++) {
    const target *t = &b->targets[i];
    html_row(h, HTML_CELLS(view_target(r, t), decimal(h, judge_needed(t, b->field_mean), 1),
                           text_format(r->arena, "%s %d, %s", sound_metric_names[t->metric],
                                       rating_of(&x->ratings, t->metric),
                                       view_published(x, t->metric) ? "published" : "predicted"),
                           text_format(r->arena, "%s %%", view_sureness(r, x->probability[i]))));
  }
  html_table_end(h);
}

/* --- evidence -------------------------------------------------------------------------------- */

static void put_nearest(html *h, const assessment *x) {
  static const html_column columns[] = {{"Row", HTML_ID},
                                        {"STC", HTML_FIGURE},
                                        {"Wall", HTML_LINE},
                                        {"What it has otherwise", HTML_WORDS},
                                        {"Source", HTML_DATA}};
  const evidence *e = &x->evidence;
  if (e->nearest_count == 0) return;
  html_table(h, "Nearest published walls", columns, HTML_COUNT(columns));
  for (int i = 0; i < e->nearest_count; i++) {
    const evidence_near *n = &e->nearest[i];
    text differs;
    text_init(&differs, h->report->arena, 2000);
    for (int k = 0; k < n->differ_count; k++)
      text_putf(&differs, "%s%s", k ? "; " : "", n->differs[k]);
    html_row(h,
             HTML_CELLS(n->row->id, whole(h, n->row->stc), n->line,
                        n->differ_count ? differs.data : "nothing: the same wall", n->row->source));
  }
  html_table_end(h);
}

static void put_basis(html *h, const assessment *x) {
  const report *r = h->report;
  const wall_row *m = x->evidence.match;
  const prediction *p = &x->predicted;
  html_facts(h);
  html_fact(h, "The STC rests on", m ? "a published rating" : "a prediction, not a test");
  if (m) {
    html_fact_data(h, "Published wall", text_format(r->arena, "%s: %s", m->id, m->name));
    html_fact(
        h, "Its rating",
        text_format(r->arena, "STC %d, standard deviation %s", m->stc, decimal(h, m->stc_sd, 2)));
    html_fact_data(h, "Its source", m->source);
  } else
    html_fact(h, "Confidence",
              text_format(r->arena, "%s %% sure of STC %d", view_sureness(r, view_confidence(r)),
                          view_assured(r, x, METRIC_STC, view_confidence(r))));
  for (int i = 0; i < p->outside && i < PREDICT_MAX_REASONS; i++)
    html_fact(h, "Beyond the fitted walls", p->outside_reason[i]);
  html_facts_end(h);
}

void html_evidence(html *h, const assessment *x) {
  put_basis(h, x);
  put_nearest(h, x);
}

/* --- bands ----------------------------------------------------------------------------------- */

void html_bands(html *h, const assessment *x) {
  html_column columns[BANDS + 1] = {{"Hz", HTML_HEAD}};
  const char *cell[BANDS + 1] = {"TL, dB"};
  for (int i = 0; i < BANDS; i++) {
    text hz;
    text_init(&hz, h->report->arena, 40);
    text_number(&hz, bands_hz[i], 1);
    columns[i + 1] = (html_column){hz.data, HTML_FIGURE};
    cell[i + 1] = decimal(h, x->predicted.tl_db[i], 1);
  }
  html_table_as(h, "bands", "Transmission loss by third octaves, predicted", columns, BANDS + 1);
  html_row(h, cell);
  html_table_end(h);
}

static void put_curve(html *h, const assessment *x, bool paths) {
  const brief *b = h->report->brief;
  sound_metric asked = b->target_count > 0 ? b->targets[0].metric : METRIC_STC;
  chart_sound_options o = {.metric = asked, .paths = paths};
  const char *id = html_picture_id(h);
  chart_sound(h->report, id, x, &o, html_picture(h, HTML_CHART));
  html_picture_end(h, NULL);
}

void html_curve(html *h, const assessment *x) {
  put_curve(h, x, false);
}

static void put_other_sound(html *h, const assessment *x) {
  const report *r = h->report;
  if (!x->mounted && !x->has_composite) return;
  html_facts(h);
  if (x->mounted)
    html_fact(h, "Short-circuited mount",
              text_format(r->arena, "%s (exact %s): %s",
                          view_ratings(r, &x->short_predicted.ratings),
                          decimal(h, x->short_predicted.exact[METRIC_STC], 1), x->short_line));
  if (x->has_composite)
    html_fact(h, "No wall with these openings passes",
              text_format(r->arena, "STC %s", decimal(h, x->composite_ceiling, 1)));
  html_facts_end(h);
}

void html_sound_parts(html *h, const assessment *x) {
  put_targets(h, x);
  html_curve(h, x);
  html_more(h, "The curve with its paths: what passes the cavity and what passes the studs");
  put_curve(h, x, true);
  html_more_end(h);
  html_ratings_table(h, x);
  put_other_sound(h, x);
  put_prediction(h, x);
  html_bands(h, x);
  html_heading(h, "Evidence");
  html_evidence(h, x);
}

void html_wall_sound(html *h, const assessment *x) {
  const char *there = setting_words(h->report, x);
  html_section(h, "Sound");
  html_sound_parts(h, x);
  if (there) {
    html_heading(h, "In the building");
    html_paragraph(h, there);
  }
  html_section_end(h);
}
