/* The value-engineering log: one proposal a row, with what its acceptance turns on; the last
 * columns are for whoever decides. */
#include "report/markup.h"
#include "report/report_trim.h"
#include "report/view_trim.h"

typedef struct row {
  const report *r;
  text *out;
  bool begun;
} row;

static void put(row *w, const char *value) {
  markup_csv_field(w->out, value, !w->begun);
  w->begun = true;
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

static void put_height(row *w, double metres) {
  text t;
  text_init(&t, w->r->arena, 64);
  units_put_height(&t, metres, w->r->units);
  put(w, t.data);
}

static void put_head(row *w) {
  bool us = w->r->units == UNITS_US;
  const char *const heads[] = {"proposal",
                               "brief",
                               "specified_wall",
                               "proposed_wall",
                               "changes",
                               "asked",
                               "rating_specified",
                               "rating_proposed",
                               "sureness_proposed",
                               "fire_specified",
                               "fire_proposed",
                               us ? "thickness_specified_in" : "thickness_specified_mm",
                               us ? "thickness_change_in" : "thickness_change_mm",
                               us ? "mass_change_psf" : "mass_change_kg_m2",
                               "height_asked",
                               "height_limit_specified",
                               "height_limit_proposed",
                               "heavy_fastening_proposed",
                               "rating_if_mount_bridged",
                               us ? "cost_specified_per_ft2" : "cost_specified_per_m2",
                               us ? "saving_per_ft2" : "saving_per_m2",
                               "saving_total",
                               "net_saving_total",
                               "currency",
                               "lead_weeks",
                               "drawings_promise",
                               "gives_up",
                               "cautions",
                               "status",
                               "decided_by",
                               "date",
                               "remarks"};
  for (size_t i = 0; i < sizeof heads / sizeof heads[0]; i++) put(w, heads[i]);
  markup_csv_end(w->out);
}

static const char *changes_words(const report *r, const trim_proposal *p) {
  text t;
  text_init(&t, r->arena, 4000);
  for (int i = 0; i < p->change_count; i++) text_putf(&t, "%s%s", i ? "; " : "", p->change[i].what);
  return t.data;
}

static const char *heavy_words(const bool heavy[2]) {
  if (heavy[SIDE_A] && heavy[SIDE_B]) return "both sides";
  if (heavy[SIDE_A]) return "side A only";
  return heavy[SIDE_B] ? "side B only" : "neither side";
}

static const char *caution_words(const report *r, const assessment *x) {
  const char *caution[VIEW_MAX_CAUTIONS];
  int count = view_cautions(r, x, caution);
  text t;
  text_init(&t, r->arena, 8000);
  for (int i = 0; i < count; i++) text_putf(&t, "%s%s", i ? " " : "", caution[i]);
  return t.data;
}

static void put_sizes(row *w, const assessment *from, const assessment *x) {
  bool us = w->r->units == UNITS_US;
  double length = us ? UNITS_M_PER_IN : 1e-3, mass = us ? UNITS_KG_M2_PER_PSF : 1;
  put_number(w, from->thickness_m / length, us ? 3 : 1);
  put_number(w, (x->thickness_m - from->thickness_m) / length, us ? 3 : 1);
  put_number(w, (x->mass_kg_m2 - from->mass_kg_m2) / mass, 2);
  put_height(w, w->r->brief->height_m);
  put_height(w, from->height.limit_m);
  put_height(w, x->height.limit_m);
}

static void put_money(row *w, const trim_answer *t, const trim_proposal *p) {
  double area = w->r->units == UNITS_US ? UNITS_M2_PER_FT2 : 1;
  const assessment *from = t->specified;
  put_number(w, (double)from->numbers.cost_cents / 100 / from->cost.area_m2 * area, 2);
  put_number(w, p->saving_per_m2 * area, 2);
  put_cents(w, p->saving_cents);
  put_cents(w, p->net_cents);
  put(w, w->r->prices->currency);
}

static void put_proposal(row *w, const trim_answer *t, int i) {
  const report *r = w->r;
  const trim_proposal *p = &t->proposal[i];
  const assessment *from = t->specified, *x = p->wall;
  put(w, text_format(r->arena, "%d", i + 1));
  put(w, r->brief->title);
  put(w, from->line);
  put(w, x->line);
  put(w, changes_words(r, p));
  put(w, view_trim_terms(r, t));
  put(w, view_trim_rating(r, from));
  put(w, view_trim_rating(r, x));
  put(w, view_trim_sure(r, x));
  put(w, view_trim_fire(r, from));
  put(w, view_trim_fire(r, x));
  put_sizes(w, from, x);
  put(w, heavy_words(p->heavy));
  put(w, x->mounted ? text_format(r->arena, "STC %d", x->short_predicted.ratings.stc) : "");
  put_money(w, t, p);
  const char *item, *promises = view_trim_promises(r, t);
  put_number(w, view_lead_weeks(r, x, &item), 1);
  put(w, promises ? promises : "");
  put(w, view_trim_losses(r, p));
  put(w, caution_words(r, x));
  for (int k = 0; k < 4; k++) put(w, ""); /* status, decided by, date, remarks */
  markup_csv_end(w->out);
}

void report_trim_csv(const report *r, const trim_answer *t, text *out) {
  row head = {r, out, false};
  put_head(&head);
  for (int i = 0; i < t->proposal_count; i++) {
    row line = {r, out, false};
    put_proposal(&line, t, i);
  }
}
