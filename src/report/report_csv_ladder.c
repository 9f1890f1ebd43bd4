/* One rung a row. */
#include "report/markup.h"
#include "report/view_ladder.h"

typedef struct row {
  const report *r;
  text *out;
  bool begun;
} row;

static void put(row *w, const char *value) {
  markup_csv_field(w->out, value, !w->begun);
  w->begun = true;
}

static void put_integer(row *w, int value) {
  put(w, text_format(w->r->arena, "%d", value));
}

static void put_number(row *w, double value, int decimals) {
  text t;
  text_init(&t, w->r->arena, 64);
  text_fixed(&t, value, decimals);
  put(w, t.data);
}

static void put_cents(row *w, long long cents) {
  text t;
  text_init(&t, w->r->arena, 64);
  text_cents(&t, cents, false);
  put(w, t.data);
}

static double area(const row *w) {
  return w->r->units == UNITS_US ? UNITS_M2_PER_FT2 : 1;
}

static void put_head(row *w, const ladder_answer *l) {
  bool us = w->r->units == UNITS_US;
  const char *const heads[] = {"rating",
                               "metric",
                               "serves_from",
                               "worth_taking",
                               us ? "cost_per_ft2" : "cost_per_m2",
                               "cost_total",
                               "floor_value_total",
                               "cost_with_floor_total",
                               "currency",
                               "step_points",
                               "step_total",
                               us ? "step_per_point_per_ft2" : "step_per_point_per_m2",
                               us ? "thickness_in" : "thickness_mm",
                               us ? "mass_psf" : "mass_kg_m2",
                               "evidence",
                               "predicted_exact",
                               "predicted_sd",
                               "line",
                               "changes"};
  const char *const more[] = {us ? "extra_per_ft2" : "extra_per_m2", "extra_total",
                              "changes_from_have"};
  for (size_t i = 0; i < sizeof heads / sizeof heads[0]; i++) put(w, heads[i]);
  for (size_t i = 0; l->terms.have && i < sizeof more / sizeof more[0]; i++) put(w, more[i]);
  put(w, "caution");
  markup_csv_end(w->out);
}

static void put_step(row *w, const ladder_rung *g) {
  if (g->points == 0) {
    for (int i = 0; i < 3; i++) put(w, "");
    return;
  }
  put_integer(w, g->points);
  put_cents(w, g->step_cents);
  put_number(w, view_ladder_per_m2(g->wall, g->step_cents) * area(w) / g->points, 4);
}

static void put_rung(row *w, const ladder_answer *l, const ladder_rung *g) {
  const report *r = w->r;
  const assessment *x = g->wall;
  bool us = r->units == UNITS_US;
  view_predicted p = view_ladder_predicted(r, l, x);
  put_integer(w, g->rating);
  put(w, view_ladder_metric(r, l));
  put_integer(w, g->serves_from);
  put(w, g->worth ? "yes" : "no");
  put_number(w, view_ladder_per_m2(x, x->cost.total_cents) * area(w), 4);
  put_cents(w, x->cost.total_cents);
  put_cents(w, x->cost.floor_value_cents);
  put_cents(w, g->cost_cents);
  put(w, r->prices->currency);
  put_step(w, g);
  put_number(w, us ? x->thickness_m / UNITS_M_PER_IN : x->thickness_m * 1e3, us ? 3 : 1);
  put_number(w, x->mass_kg_m2 / (us ? UNITS_KG_M2_PER_PSF : 1), 2);
  put(w, p.published ? "published" : "predicted");
  put_number(w, p.exact, 1);
  put_number(w, p.sd, 1);
  put(w, x->line);
  put(w, g->points > 0 ? changes_words(r->arena, &g->changes) : "");
  if (l->terms.have) {
    put_number(w, view_ladder_per_m2(x, g->extra_cents) * area(w), 4);
    put_cents(w, g->extra_cents);
    put(w, changes_words(r->arena, &g->from_have));
  }
  put(w, view_ladder_alone(g) ? view_ladder_flanking : "");
  markup_csv_end(w->out);
}

void report_ladder_csv(const report *r, const ladder_answer *l, text *out) {
  row head = {r, out, false};
  put_head(&head, l);
  for (int i = 0; i < l->count; i++) {
    row line = {r, out, false};
    put_rung(&line, l, &l->rung[i]);
  }
}
