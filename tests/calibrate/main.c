/* Fits the coefficients of the sound model to the published walls of tests/data, prints how well,
 * and rewrites catalogs/acoustics.json and docs/methods/sound_fit.{md,svg} of the source folder
 * given.
 * `--look` writes nothing. Running it again gives the same bytes. */
#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdio.h>

#include "base/file.h"
#include "write.h"

enum { MOST_BYTES = 1 << 20 };

static void put_error_line(text *out, const char *what, const error_summary *s) {
  text_putf(out, "%-34s rows %3d  rms ", what, s->rows);
  text_fixed(out, s->rms, 2);
  text_put(out, "  bias ");
  text_fixed(out, s->bias, 2);
  text_put(out, "  largest ");
  text_fixed(out, s->largest, 2);
  text_put(out, "  within 3: ");
  text_fixed(out, 100.0 * s->within_3 / s->rows, 1);
  text_put(out, " %\n");
}

static void put_all(text *out, const char *what, const dataset *d, const double *error) {
  error_summary s = cross_summary(d, error, FAMILY_COUNT);
  put_error_line(out, what, &s);
}

static void put_families(text *out, const dataset *d, const double *error) {
  for (int i = 0; i < FAMILY_COUNT; i++) {
    error_summary s = cross_summary(d, error, i);
    if (s.rows > 0) put_error_line(out, text_format(out->arena, "  %s", sound_family_names[i]), &s);
  }
}

static void put_coefficients(text *out, const fit *f, const double *x, const struct acoustics *k) {
  for (int i = 0; i < f->parameters; i++) {
    const parameter *p = &f->parameter[i];
    double value = *(const double *)((const char *)k + p->offset);
    bool small = fabs(value) < 1e-3;
    text_putf(out, "  %-22s ", p->id);
    text_number(out, small ? value * 1e6 : value, 4);
    text_put(out, small ? "e-6, " : ", ");
    text_fixed(out, x[i], 2);
    text_put(out, " sd from the prior\n");
  }
}

/* Shape: each octave curve minus its own STC. */
static void measure_shape(text *out, const fit *f, outcome *o) {
  double sum = 0, at_125 = 0;
  int curves = 0;
  for (int i = 0; i < f->data->count; i++) {
    const sample *s = &f->data->row[i];
    double tl_db[BANDS], octave_db[DATA_OCTAVES];
    if (!s->curve) continue;
    predict_tl(f->catalog, &o->fitted, &s->wall, tl_db);
    fit_octaves(tl_db, octave_db);
    double exact = fit_stc(tl_db);
    text_putf(out, "  %s", s->id);
    for (int b = 0; b < DATA_OCTAVES; b++) {
      double off = octave_db[b] - exact - (s->octave_db[b] - s->rating);
      sum += fabs(off);
      if (b == 0) at_125 += off;
      text_char(out, ' ');
      text_fixed(out, off, 1);
    }
    text_char(out, '\n');
    curves++;
  }
  o->shape_mae_db = sum / (curves * DATA_OCTAVES);
  o->shape_125_db = at_125 / curves;
  text_put(out, "shape, 125 to 4000 Hz: mean absolute error ");
  text_fixed(out, o->shape_mae_db, 2);
  text_put(out, " dB; mean at 125 Hz ");
  text_fixed(out, o->shape_125_db, 2);
  text_put(out, " dB\n");
}

static void run(text *out, fit *f, outcome *o) {
  double x[FIT_MAX], error[DATA_MAX_ROWS] = {0};
  double cost = fit_solve(f, x);
  fit_apply(f, x, &o->fitted);
  for (int i = 0; i < f->parameters; i++) {
    double *value = (double *)((char *)&o->fitted + f->parameter[i].offset);
    *value = write_rounded(out->arena, *value);
  }
  text_put(out, "cost ");
  text_fixed(out, cost, 2);
  text_char(out, '\n');
  put_coefficients(out, f, x, &o->fitted);
  for (int i = 0; i < f->data->count; i++)
    o->trained[i] = fit_error(f->catalog, &o->fitted, &f->data->row[i]);
  put_all(out, "trained on all", f->data, o->trained);
  put_families(out, f->data, o->trained);
  measure_shape(out, f, o);
  for (unsigned seed = 1; seed <= CROSS_SEEDS; seed++) {
    double *to = seed == 1 ? o->folds : error;
    cross_folds(f, x, seed, to);
    put_all(out, text_format(out->arena, "10 folds, seed %u", seed), f->data, to);
    o->seed_rms[seed - 1] = cross_summary(f->data, to, FAMILY_COUNT).rms;
    if (seed == 1) put_families(out, f->data, to);
  }
  cross_numbers(f, x, o->numbers);
  put_all(out, "wall numbers left out one at a time", f->data, o->numbers);
}

static void print_faults(arena *a, const diag_list *d) {
  text t;
  text_init(&t, a, MOST_BYTES);
  for (size_t i = 0; i < d->count; i++) {
    diag_print(&t, &d->items[i]);
    text_char(&t, '\n');
  }
  fputs(t.data, stderr);
}

static void save_text(diag_list *d, const char *root, const char *name, const text *t) {
  file_write(t->arena, d, file_join(t->arena, root, name), t->data, t->len);
}

static void save(arena *a, diag_list *d, const char *root, const fit *f, const json_value *old,
                 const outcome *o, const char *report) {
  text json, svg, page;
  text_init(&json, a, MOST_BYTES);
  text_init(&svg, a, MOST_BYTES);
  text_init(&page, a, MOST_BYTES);
  write_acoustics(&json, old, f, o);
  plot_fit(&svg, f, o);
  text_putf(&page,
            "# What the fit of the sound model gave\n\nWritten by the calibration tool (target "
            "`calibrate`); method and words in `sound.md`.\n\n```\n%s```\n\n![Predicted against "
            "published STC](sound_fit.svg)\n",
            report);
  save_text(d, root, "catalogs/acoustics.json", &json);
  save_text(d, root, "docs/methods/sound_fit.svg", &svg);
  save_text(d, root, "docs/methods/sound_fit.md", &page);
}

int main(int argc, char **argv) {
  arena *a = arena_create(0, NULL);
  static dataset data;
  static fit f;
  static outcome o;
  diag_list d;
  text out;
  if (!a || argc < 2) {
    fputs("usage: septum_calibrate SOURCE_FOLDER [--look]\n", stderr);
    return 2;
  }
  gsl_set_error_handler_off(); /* a step that does not help is no fault: the next stage goes on */
  diag_init(&d, a);
  text_init(&out, a, MOST_BYTES);
  const catalog *c = catalog_load(a, &d, file_join(a, argv[1], "catalogs"));
  const json_value *old = json_load(a, &d, file_join(a, argv[1], "catalogs/acoustics.json"));
  if (c && old) {
    data_read_ratings(a, &d, c, file_join(a, argv[1], "tests/data/nbc2020_stc.csv"), &data);
    data_read_curves(a, &d, c, file_join(a, argv[1], "tests/data/octave_tl.csv"), &data);
    f = (fit){.catalog = c, .data = &data, .start = *c->acoustics};
    fit_read_parameters(&f, &d, a, old);
  }
  if (d.errors == 0) {
    run(&out, &f, &o);
    fputs(out.data, stdout);
    if (argc < 3) save(a, &d, argv[1], &f, old, &o, out.data);
  }
  print_faults(a, &d);
  int answer = d.errors == 0 ? 0 : 1;
  arena_free(a);
  return answer;
}
