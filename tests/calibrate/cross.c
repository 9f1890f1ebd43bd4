#include "cross.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

/* sd of a family: inverse gamma with so many rows' worth of the pooled value beforehand; never
 * below what laboratories agree to (u(Rw) 1.2 dB, ISO 12999-1). */
#define PRIOR_ROWS 6.0
#define PRIOR_SD   1.4
#define LEAST_SD   1.2
enum { MOST_NUMBERS = 200 };

/* A linear congruential generator (Knuth's MMIX constants): the same folds everywhere. */
static unsigned draw(uint64_t *state, unsigned below) {
  *state = *state * 6364136223846793005u + 1442695040888963407u;
  return (unsigned)(*state >> 33) % below;
}

static void family_folds(const dataset *d, int family, uint64_t *state, int *next, int *fold) {
  int rows[DATA_MAX_ROWS], n = 0;
  for (int i = 0; i < d->count; i++) {
    if (!d->row[i].curve && (int)d->row[i].family == family) rows[n++] = i;
  }
  for (int i = n - 1; i > 0; i--) {
    int j = (int)draw(state, (unsigned)i + 1), kept = rows[i];
    rows[i] = rows[j];
    rows[j] = kept;
  }
  for (int i = 0; i < n; i++) fold[rows[i]] = (*next)++ % CROSS_FOLDS;
}

/* Fits without part `part` of `fold` and fills in the errors of that part. */
static void leave_out(const fit *f, const double *x, const int *fold, int part, double *error) {
  fit without = *f;
  bool use[DATA_MAX_ROWS];
  double y[FIT_MAX];
  struct acoustics k;
  for (int i = 0; i < f->data->count; i++) use[i] = f->data->row[i].curve || fold[i] != part;
  without.use = use;
  memcpy(y, x, sizeof y);
  fit_refine(&without, y);
  fit_apply(&without, y, &k);
  for (int i = 0; i < f->data->count; i++) {
    if (!use[i]) error[i] = fit_error(f->catalog, &k, &f->data->row[i]);
  }
}

void cross_folds(const fit *f, const double *x, unsigned seed, double *error) {
  int fold[DATA_MAX_ROWS] = {0}, next = 0;
  uint64_t state = seed;
  for (int family = 0; family < FAMILY_COUNT; family++)
    family_folds(f->data, family, &state, &next, fold);
  for (int part = 0; part < CROSS_FOLDS; part++) leave_out(f, x, fold, part, error);
}

void cross_numbers(const fit *f, const double *x, double *error) {
  int number[DATA_MAX_ROWS];
  for (int i = 0; i < f->data->count; i++) number[i] = f->data->row[i].number;
  for (int part = 0; part < MOST_NUMBERS; part++) {
    bool any = false;
    for (int i = 0; i < f->data->count; i++) any = any || number[i] == part;
    if (any) leave_out(f, x, number, part, error);
  }
}

error_summary cross_summary(const dataset *d, const double *error, int family) {
  error_summary s = {0};
  double sum = 0, squares = 0;
  for (int i = 0; i < d->count; i++) {
    if (d->row[i].curve || (family != FAMILY_COUNT && (int)d->row[i].family != family)) continue;
    s.rows++;
    sum += error[i];
    squares += error[i] * error[i];
    s.largest = fmax(s.largest, fabs(error[i]));
    if (fabs(error[i]) <= 3) s.within_3++;
  }
  if (s.rows > 0) {
    s.bias = sum / s.rows;
    s.rms = sqrt(squares / s.rows);
  }
  return s;
}

double cross_sd(const error_summary *family) {
  double squares = PRIOR_ROWS * PRIOR_SD * PRIOR_SD + family->rows * family->rms * family->rms;
  return fmax(LEAST_SD, sqrt(squares / (PRIOR_ROWS + family->rows)));
}
