#include <math.h>

#include "acoustics/kernel_lanes.h"
#include "acoustics/predict.h"

#define PI 3.14159265358979323846

/* 1/B of a leaf without stiffness, 1/(N m): its spring is then a millionth of any air spring. */
#define KERNEL_SLACK_MAX 1e3
/* Double rows without coupling: N/m3, as little. */
#define KERNEL_COUPLING_MIN 1e-3

static double slack_of(const model_leaf *l) {
  return 1 / fmax(l->bending_n_m, 1 / KERNEL_SLACK_MAX);
}

static double heave_of(const model_leaf *l) {
  return sqrt(2 * PI * l->critical_hz) / l->mass_kg_m2;
}

static void block_put(kernel_block *b, int lane, const model_leaf *l) {
  double m = l->mass_kg_m2, fc = l->critical_hz;
  b->mass[lane] = m;
  b->mass_fc2[lane] = m / (fc * fc);
  b->loss_fc2[lane] = m * l->loss / (fc * fc);
  b->slack[lane] = slack_of(l);
  b->fc_minus2[lane] = 1 / (fc * fc);
  b->radiation[lane] = l->loss / sqrt(fc);
  b->mass_minus1[lane] = 1 / m;
  b->heave[lane] = heave_of(l);
}

kernel_leaves *kernel_leaves_create(arena *a, const catalog *c, const face *faces, int n) {
  kernel_leaves *l = arena_alloc(a, sizeof *l);
  l->count = n;
  l->blocks = (n + KERNEL_LANES - 1) / KERNEL_LANES;
  l->leaf = arena_array(a, (size_t)n, sizeof *l->leaf);
  l->block = arena_array(a, (size_t)l->blocks, sizeof *l->block);
  for (int i = 0; i < n; i++) l->leaf[i] = predict_leaf(c, c->acoustics, &faces[i]);
  for (int i = 0; i < l->blocks * KERNEL_LANES; i++)
    block_put(&l->block[i / KERNEL_LANES], i % KERNEL_LANES, &l->leaf[i < n ? i : n - 1]);
  return l;
}

static void sum_set(kernel_sum *s, const double *level, int first, int count, double offset_db) {
  s->first = first;
  s->last = first + count - 1;
  s->offset_db = offset_db;
  for (int i = 0; i < count; i++) s->weight[first + i] = pow(10, level[i] / 10);
}

/* The bands of each metric; weights of those that are weighted sums. */
static void sums_set(kernel_sum sum[METRIC_COUNT]) {
  static const double fit[RATING_FIT_BANDS] = {0}; /* fits do not weigh */
  int first, count;
  double offset;
  sum_set(&sum[METRIC_STC], fit, RATING_STC_FIRST, RATING_FIT_BANDS, 0);
  sum_set(&sum[METRIC_RW], fit, RATING_RW_FIRST, RATING_FIT_BANDS, 0);
  for (int spectrum = 1; spectrum <= 2; spectrum++) {
    const double *level = rating_adapted_levels(spectrum, RANGE_100_3150, &first, &count);
    sum_set(&sum[spectrum == 1 ? METRIC_RW_C : METRIC_RW_CTR], level, first, count, 0);
  }
  const double *level = rating_oitc_levels(&first, &count, &offset);
  sum_set(&sum[METRIC_OITC], level, first, count, offset);
}

kernel_core *kernel_core_create(arena *a, const catalog *c) {
  kernel_core *k = arena_alloc(a, sizeof *k);
  k->catalog = c;
  sums_set(k->sum);
  k->ceiling_tau = pow(10, -c->acoustics->ceiling_db / 10);
  return k;
}

static void cavity_set(kernel_core *k, int tone, double f) {
  const struct acoustics *x = k->catalog->acoustics;
  double omega = 2 * PI * f;
  for (int i = 0; i < MODEL_ANGLES; i++) {
    kernel_cavity *p = &k->cavity[tone][i];
    p->s2 = model_sin2(x, f, i, &p->weight);
    p->weight /= MODEL_SUBBANDS;
    double z0 = x->air_density * x->sound_speed / sqrt(1 - p->s2);
    p->alpha = omega / z0;
    p->spring = 1 / (I * omega * z0);
    p->m = model_cavity_matrix(x, &k->model.cavity[0], f, p->s2);
  }
}

void kernel_core_set(kernel_core *k, const wall *core) {
  const struct acoustics *x = k->catalog->acoustics;
  predict_core(k->catalog, x, core, &k->model);
  k->leaves = NULL;
  k->depth_m = 0;
  for (int g = 0; g < k->model.cavity[0].gaps; g++) k->depth_m += k->model.cavity[0].gap[g].depth_m;
  double c = x->sound_speed, turn = c / (2 * PI);
  k->resonance_k = turn * turn * x->air_density / k->depth_m;
  for (int t = 0; t < KERNEL_TONES; t++) {
    double f = model_subband_hz(t / MODEL_SUBBANDS, t % MODEL_SUBBANDS);
    double compliance = model_compliance(x, k->model.c500_m2_n, f);
    k->fade[t] = 1 + (f / x->bay_fade_hz) * (f / x->bay_fade_hz);
    k->soft[t] = k->model.bridge == BRIDGE_NONE
                     ? k->fade[t] / fmax(x->double_coupling, KERNEL_COUPLING_MIN)
                     : k->fade[t] * x->low_share * compliance * k->model.line_m;
    k->reach[t] = 4 * pow(2 * PI * f, 1.5) * c * compliance;
    cavity_set(k, t, f);
  }
}

/* The lane's leaf enters as y alone: with Z = 1 + z of leaf A, X = a + c Z and U = b + d Z,
 * N (t + c s) = alpha X { t [(X + U)/(alpha X) + y] + s c/X [(c (1 + Z) + a + d - 2)/(alpha c) + y]
 * }, s = 1/(j w z0). */
static void point_set(const struct acoustics *x, const kernel_cavity *p, const model_leaf *a,
                      double f, kernel_point *out) {
  const model_matrix *m = &p->m;
  double complex z = 1 + model_leaf_z(x, a, f, p->s2);
  double complex through = m->a + m->c * z, own = m->c * p->spring;
  double complex r = (through + m->b + m->d * z) / (p->alpha * through);
  double complex q = (m->c * (1 + z) + m->a + m->d - 2) / (p->alpha * m->c);
  double complex k = own / through;
  double scale = p->alpha * cabs(through);
  double w = 4 * p->weight / (scale * scale);
  out->g = f * f * p->s2 * p->s2;
  out->r_re = creal(r), out->r_im = cimag(r);
  out->k_re = creal(k), out->k_im = cimag(k);
  out->q_re = creal(q), out->q_im = cimag(q);
  out->w2 = w;
  out->w1 = 2 * w * creal(own);
  out->w0 = w * (creal(own) * creal(own) + cimag(own) * cimag(own));
}

static void tone_set(kernel_core *k, int at, const model_leaf *a) {
  const struct acoustics *x = k->catalog->acoustics;
  const model_wall *w = &k->model;
  kernel_tone *t = &k->tone[at];
  double f = model_subband_hz(at / MODEL_SUBBANDS, at % MODEL_SUBBANDS), omega = 2 * PI * f;
  for (int i = 0; i < MODEL_ANGLES; i++) point_set(x, &k->cavity[at][i], a, f, &t->at[i]);
  bool bridged = w->bridge != BRIDGE_NONE;
  double bays[2]; /* per 1/B */
  for (int side = 0; side < 2; side++)
    bays[side] = bridged ? k->fade[at] * pow(w->support_m[side], 4) / x->bay_stiffness : 0;
  t->soft_a = k->soft[at] + bays[SIDE_A] * slack_of(a);
  t->soft_b = bays[SIDE_B];
  t->f2 = f * f;
  t->roll = 1 / (t->f2 * t->f2);
  t->reach = k->reach[at];
  double c = x->sound_speed, rho = x->air_density, m = a->mass_kg_m2;
  double near = fmax(0, 1 - t->f2 / (a->critical_hz * a->critical_hz));
  t->below = near * near / 2;
  t->above = 8 * f * a->loss / (PI * sqrt(a->critical_hz));
  double constant = 64 * rho * rho * c * c * c * pow(10, x->bridge_db / 10);
  t->bridge = bridged ? constant / (w->line_m * omega * omega * m * m) / MODEL_SUBBANDS : 0;
}

void kernel_core_side(kernel_core *k, const kernel_leaves *leaves, int side_a) {
  if (k->leaves == leaves && k->side_a == side_a) return;
  k->leaves = leaves;
  k->side_a = side_a;
  const model_leaf *a = &leaves->leaf[side_a];
  k->heave_a = heave_of(a);
  k->mass_minus1_a = 1 / a->mass_kg_m2;
  for (int t = 0; t < KERNEL_TONES; t++) tone_set(k, t, a);
}
