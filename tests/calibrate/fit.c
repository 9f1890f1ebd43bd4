#include "fit.h"

#include <gsl/gsl_multifit_nlinear.h>
#include <math.h>

#include "base/text.h"
#include "input/fields.h"

/* Errors beyond this many points count ever less: soft-L1. */
#define ROBUST_FROM 2.0
/* Weights beside one point of STC. */
#define SHAPE_WEIGHT 0.4
#define PRIOR_WEIGHT 0.5
/* STC has corners (a band that begins to lack, the 8 dB rule) on which least squares stalls. So the
 * corners are rounded at first and less and less, and central differences are wide. */
static const struct {
  double soft_db, step;
} stages[] = {{1.0, 0.2}, {0.5, 0.1}, {0.25, 0.06}, {0.1, 0.06}, {0, 0.06}};
enum { STAGES = sizeof stages / sizeof stages[0], NEAR_STAGE = 3, MAX_ITERATIONS = 30 };
#define STEP_TOLERANCE 1e-4
/* The second start, in prior sd, alternately up and down. */
#define SECOND_START 0.8

static double from_scale(fit_scale s, double x) {
  if (s == SCALE_LN) return exp(x);
  return s == SCALE_LG ? pow(10, x) : x;
}

static double to_scale(fit_scale s, double x) {
  if (s == SCALE_LN) return log(x);
  return s == SCALE_LG ? log10(x) : x;
}

void fit_apply(const fit *f, const double *x, struct acoustics *out) {
  *out = f->start;
  for (int i = 0; i < f->parameters; i++) {
    const parameter *p = &f->parameter[i];
    double value = from_scale(p->scale, to_scale(p->scale, p->prior) + x[i] * p->prior_sd);
    *(double *)((char *)out + p->offset) = fmin(fmax(value, p->min), p->max);
  }
}

/* max(0, d) with its corner rounded over `soft`. */
static double hinge(double d, double soft) {
  if (soft <= 0) return fmax(0, d);
  return d > 30 * soft ? d : soft * log1p(exp(d / soft));
}

/* The shift at which the deficiencies sum to what E413 allows. */
static double shift_by_sum(const double *above, double soft) {
  double low = -100, high = 200;
  for (int i = 0; i < 50; i++) {
    double middle = 0.5 * (low + high), sum = 0;
    for (int b = 0; b < RATING_FIT_BANDS; b++) sum += hinge(middle - above[b], soft);
    if (sum <= RATING_SUM_LIMIT_DB)
      low = middle;
    else
      high = middle;
  }
  return low;
}

/* STC on the unrounded curve; `soft` above 0 rounds its corners. */
static double stc_of(const double tl_db[BANDS], double soft) {
  double above[RATING_FIT_BANDS];
  for (int b = 0; b < RATING_FIT_BANDS; b++)
    above[b] = tl_db[RATING_STC_FIRST + b] - rating_stc_contour[b];
  double shift = shift_by_sum(above, soft), sum = 1, least = shift;
  for (int b = 0; b < RATING_FIT_BANDS; b++) {
    double limit = above[b] + RATING_STC_LIMIT_DB;
    least = fmin(least, limit);
    if (soft > 0) sum += exp((shift - limit) / soft);
  }
  return soft > 0 ? shift - soft * log(sum) : least;
}

double fit_stc(const double tl_db[BANDS]) {
  return stc_of(tl_db, 0);
}

void fit_octaves(const double tl_db[BANDS], double octave_db[DATA_OCTAVES]) {
  for (int o = 0; o < DATA_OCTAVES; o++) {
    double tau = 0;
    for (int i = -1; i <= 1; i++) tau += pow(10, -tl_db[BAND_125 + 3 * o + i] / 10);
    octave_db[o] = -10 * log10(tau / 3);
  }
}

double fit_error(const catalog *c, const struct acoustics *k, const sample *s) {
  double tl_db[BANDS];
  predict_tl(c, k, &s->wall, tl_db);
  return s->rating - (fit_stc(tl_db) - 0.5);
}

/* The number whose square is twice soft-L1's loss. */
static double robust(double r) {
  double z = r / ROBUST_FROM;
  double loss = 2 * ROBUST_FROM * ROBUST_FROM * (sqrt(1 + z * z) - 1);
  return copysign(sqrt(loss), r);
}

bool fit_uses(const fit *f, int i) {
  return !f->use || f->use[i];
}

static size_t residual_count(const fit *f) {
  size_t n = (size_t)f->parameters;
  for (int i = 0; i < f->data->count; i++) {
    if (fit_uses(f, i)) n += f->data->row[i].curve ? DATA_OCTAVES : 1;
  }
  return n;
}

static void residuals(const fit *f, const double *x, double *out) {
  struct acoustics k;
  fit_apply(f, x, &k);
  for (int i = 0; i < f->data->count; i++) {
    const sample *s = &f->data->row[i];
    double tl_db[BANDS], octave_db[DATA_OCTAVES];
    if (!fit_uses(f, i)) continue;
    predict_tl(f->catalog, &k, &s->wall, tl_db);
    double exact = stc_of(tl_db, f->soft_db);
    if (!s->curve) {
      *out++ = robust(exact - 0.5 - s->rating);
      continue;
    }
    fit_octaves(tl_db, octave_db);
    for (int o = 0; o < DATA_OCTAVES; o++)
      *out++ = SHAPE_WEIGHT * (octave_db[o] - exact - (s->octave_db[o] - s->rating));
  }
  for (int i = 0; i < f->parameters; i++) *out++ = PRIOR_WEIGHT * x[i];
}

static int solver_residuals(const gsl_vector *x, void *params, gsl_vector *out) {
  residuals(params, gsl_vector_const_ptr(x, 0), gsl_vector_ptr(out, 0));
  return GSL_SUCCESS;
}

static int solver_slopes(const gsl_vector *at, void *params, gsl_matrix *out) {
  const fit *f = params;
  gsl_vector *up = gsl_vector_alloc(out->size1), *down = gsl_vector_alloc(out->size1);
  double x[FIT_MAX];
  for (int i = 0; i < f->parameters; i++) x[i] = gsl_vector_get(at, (size_t)i);
  for (int i = 0; i < f->parameters; i++) {
    double kept = x[i];
    x[i] = kept + f->step;
    residuals(f, x, gsl_vector_ptr(up, 0));
    x[i] = kept - f->step;
    residuals(f, x, gsl_vector_ptr(down, 0));
    x[i] = kept;
    gsl_vector_sub(up, down);
    gsl_vector_scale(up, 1 / (2 * f->step));
    gsl_matrix_set_col(out, (size_t)i, up);
  }
  gsl_vector_free(up);
  gsl_vector_free(down);
  return GSL_SUCCESS;
}

static double solve_stage(fit *f, double *x) {
  size_t n = residual_count(f), p = (size_t)f->parameters;
  gsl_multifit_nlinear_parameters settings = gsl_multifit_nlinear_default_parameters();
  gsl_multifit_nlinear_fdf system = {
      .f = solver_residuals, .df = solver_slopes, .n = n, .p = p, .params = f};
  gsl_multifit_nlinear_workspace *w =
      gsl_multifit_nlinear_alloc(gsl_multifit_nlinear_trust, &settings, n, p);
  gsl_vector_view start = gsl_vector_view_array(x, p);
  int info;
  double sum;
  gsl_multifit_nlinear_init(&start.vector, &system, w);
  gsl_multifit_nlinear_driver(MAX_ITERATIONS, STEP_TOLERANCE, STEP_TOLERANCE, 0, NULL, NULL, &info,
                              w);
  gsl_vector *r = gsl_multifit_nlinear_residual(w), *best = gsl_multifit_nlinear_position(w);
  sum = 0;
  for (size_t i = 0; i < n; i++) sum += gsl_vector_get(r, i) * gsl_vector_get(r, i);
  for (size_t i = 0; i < p; i++) x[i] = gsl_vector_get(best, i);
  gsl_multifit_nlinear_free(w);
  return sum / 2;
}

static double solve_from(fit *f, double *x, int stage) {
  double cost = 0;
  for (; stage < STAGES; stage++) {
    f->soft_db = stages[stage].soft_db;
    f->step = stages[stage].step;
    cost = solve_stage(f, x);
  }
  return cost;
}

double fit_refine(fit *f, double *x) {
  return solve_from(f, x, NEAR_STAGE);
}

double fit_solve(fit *f, double *x) {
  double other[FIT_MAX];
  for (int i = 0; i < f->parameters; i++) {
    x[i] = 0;
    other[i] = i % 2 ? SECOND_START : -SECOND_START;
  }
  double cost = solve_from(f, x, 0), second = solve_from(f, other, 0);
  if (second >= cost) return cost;
  for (int i = 0; i < f->parameters; i++) x[i] = other[i];
  return second;
}

/* ---- what the file says of the parameters ---- */

static const char *const scale_names[] = {"linear", "ln", "lg", NULL};

typedef struct record {
  const char *id;
  bool fitted;
  int scale;
  double min, max, prior, prior_sd;
} record;

static const field record_fields[] = {
    {.key = "id", .kind = FIELD_STRING, .flags = FIELD_REQUIRED, .offset = offsetof(record, id)},
    {.key = "fitted",
     .kind = FIELD_BOOL,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(record, fitted)},
    {.key = "scale",
     .kind = FIELD_CHOICE,
     .choices = scale_names,
     .offset = offsetof(record, scale)},
    {.key = "min", .kind = FIELD_NUMBER, .flags = FIELD_REQUIRED, .offset = offsetof(record, min)},
    {.key = "max", .kind = FIELD_NUMBER, .flags = FIELD_REQUIRED, .offset = offsetof(record, max)},
    {.key = "prior", .kind = FIELD_NUMBER, .offset = offsetof(record, prior)},
    {.key = "prior_sd", .kind = FIELD_NUMBER, .offset = offsetof(record, prior_sd)},
    {.key = "value", .kind = FIELD_IGNORE},
    {.key = "unit", .kind = FIELD_IGNORE},
    {.key = "meaning", .kind = FIELD_IGNORE},
    {.key = "source", .kind = FIELD_IGNORE},
};

void fit_read_parameters(fit *f, diag_list *d, arena *a, const json_value *root) {
  const json_value *list = json_get(root, "coefficients");
  for (const json_value *v = list ? list->first : NULL; v; v = v->next) {
    record r = {0};
    bool sound =
        fields_read(a, d, v, record_fields, sizeof record_fields / sizeof record_fields[0], &r);
    if (!sound || !r.fitted || f->parameters == FIT_MAX) continue;
    for (size_t i = 0; i < coefficient_slot_count; i++) {
      if (!text_equal(coefficient_slots[i].id, r.id)) continue;
      f->parameter[f->parameters++] = (parameter){
          r.id, coefficient_slots[i].offset, (fit_scale)r.scale, r.prior, r.prior_sd, r.min, r.max};
    }
  }
}
