#include <math.h>
#include <string.h>

#include "acoustics/kernel_lanes.h"
#include "acoustics/predict.h"

#define PI 3.14159265358979323846

/* 1/B of a leaf without stiffness, 1/(N m): its spring is then a millionth of any air spring. */
#define KERNEL_SLACK_MAX 1e3
/* Double rows without coupling: N/m3, as little. */
#define KERNEL_COUPLING_MIN 1e-3

static void block_put(kernel_block *b, int lane, const model_leaf *l) {
  double m = l->mass_kg_m2, fc = l->critical_hz;
  b->mass[lane] = m;
  b->mass_fc2[lane] = m / (fc * fc);
  b->loss_fc2[lane] = m * l->loss / (fc * fc);
  b->slack[lane] = 1 / fmax(l->bending_n_m, 1 / KERNEL_SLACK_MAX);
  b->fc_minus2[lane] = 1 / (fc * fc);
  b->radiation[lane] = l->loss / sqrt(fc);
  b->fc_root[lane] = 1 / sqrt(fc);
  b->mass_minus1[lane] = 1 / m;
  b->heave[lane] = sqrt(2 * PI * fc) / m;
}

kernel_leaves *kernel_leaves_create(arena *a, const catalog *c, const face *faces, int n) {
  kernel_leaves *l = arena_alloc(a, sizeof *l);
  l->count = n;
  l->blocks = (n + KERNEL_LANES - 1) / KERNEL_LANES;
  l->block = arena_array(a, (size_t)l->blocks, sizeof *l->block);
  for (int i = 0; i < l->blocks * KERNEL_LANES; i++) {
    model_leaf leaf = predict_leaf(c, c->acoustics, &faces[i < n ? i : n - 1]);
    block_put(&l->block[i / KERNEL_LANES], i % KERNEL_LANES, &leaf);
  }
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

/* Batcher's merge exchange (Knuth, The Art of Computer Programming, volume 3, algorithm 5.2.2M):
 * any 16 rows sorted upwards by the same steps, as lanes need. */
static void order_set(kernel_order order[KERNEL_SORT_STEPS]) {
  const int n = RATING_FIT_BANDS;
  int steps = 0;
  for (int p = 1; p < n; p *= 2)
    for (int q = p; q >= 1; q /= 2)
      for (int j = q % p; j + q < n; j += 2 * q)
        for (int i = j; i < j + q && i + q < n; i++)
          if (i / (2 * p) == (i + q) / (2 * p))
            order[steps++] = (kernel_order){(unsigned char)i, (unsigned char)(i + q)};
}

kernel_core *kernel_core_create(arena *a, const catalog *c) {
  kernel_core *k = arena_alloc(a, sizeof *k);
  k->arena = a;
  kernel_use(k, NULL);
  k->catalog = c;
  sums_set(k->sum);
  order_set(k->order);
  k->ceiling_tau = pow(10, -c->acoustics->ceiling_db / 10);
  return k;
}

static bool same_cavity(const model_cavity *x, const model_cavity *y) {
  bool same = x->gaps == y->gaps;
  for (int g = 0; same && g < x->gaps; g++)
    same = x->gap[g].filled == y->gap[g].filled && !(x->gap[g].depth_m < y->gap[g].depth_m) &&
           !(x->gap[g].depth_m > y->gap[g].depth_m);
  return same;
}

/* The tables of a cavity, from earlier cores where they are kept. */
static kernel_cavity *cavity_of(kernel_core *k, const model_cavity *c) {
  for (int i = 0; i < k->cavities; i++)
    if (same_cavity(&k->kept[i]->of, c)) return k->kept[i];
  int at = k->cavities;
  if (at < KERNEL_CAVITIES) {
    k->kept[at] = arena_alloc(k->arena, sizeof *k->kept[at]);
    k->cavities++;
  } else {
    at = k->oldest;
    k->oldest = (k->oldest + 1) % KERNEL_CAVITIES;
  }
  k->kept[at]->of = *c;
  memset(k->kept[at]->ready, 0, sizeof k->kept[at]->ready);
  return k->kept[at];
}

void kernel_core_set(kernel_core *k, const wall *core) {
  const struct acoustics *x = k->catalog->acoustics;
  double depth = 0, turn = x->sound_speed / (2 * PI);
  predict_core(k->catalog, x, core, &k->model);
  for (int g = 0; g < k->model.cavity[0].gaps; g++) depth += k->model.cavity[0].gap[g].depth_m;
  k->resonance_k = turn * turn * x->air_density / depth;
  k->fill_loss = k->model.fill_loss;
  k->cavity = cavity_of(k, &k->model.cavity[0]);
  k->side_block = NULL;
  memset(k->core_ready, 0, sizeof k->core_ready);
}

/* The lane's leaf enters N as y alone. With Z = 1 + z of leaf A, X = a + c Z, U = b + d Z and s =
 * 1/(j w z0): N (t + c s) = alpha X { t [(X + U)/(alpha X) + y] + c s/X [(c (1 + Z) + a + d -
 * 2)/(alpha c) + y] }. */
static void point_set(kernel_core *k, int at, double f, int angle) {
  const struct acoustics *x = k->catalog->acoustics;
  kernel_cavity *p = k->cavity;
  double weight, omega = 2 * PI * f, s2 = model_sin2(x, f, angle, &weight);
  double z0 = x->air_density * x->sound_speed / sqrt(1 - s2), alpha = omega / z0;
  model_matrix m = model_cavity_matrix(x, &k->model.cavity[0], f, s2);
  double complex own = (1 + I * x->spring_loss) * m.c / (I * omega * z0), e = (1 + (m.a + m.d - 2) / m.c) / alpha;
  p->alpha[at] = alpha, p->alpha_minus1[at] = 1 / alpha;
  p->g[at] = f * f * s2 * s2;
  p->a_re[at] = creal(m.a), p->a_im[at] = cimag(m.a);
  p->b_re[at] = creal(m.b), p->b_im[at] = cimag(m.b);
  p->c_re[at] = creal(m.c), p->c_im[at] = cimag(m.c);
  p->d_re[at] = creal(m.d), p->d_im[at] = cimag(m.d);
  p->own_re[at] = creal(own), p->own_im[at] = cimag(own);
  p->e_re[at] = creal(e), p->e_im[at] = cimag(e);
  p->weight[at] = 4 * weight / MODEL_SUBBANDS / (alpha * alpha);
}

static void tone_set(kernel_core *k, int at, double f) {
  const struct acoustics *x = k->catalog->acoustics;
  const model_wall *w = &k->model;
  kernel_tones *t = &k->tone;
  double omega = 2 * PI * f, c = x->sound_speed, rho = x->air_density;
  double compliance = model_compliance(x, w->c500_m2_n, f);
  double fade = 1 + (f / x->bay_fade_hz) * (f / x->bay_fade_hz);
  double constant = 64 * rho * rho * c * c * c * pow(10, x->bridge_db / 10);
  bool bridged = w->bridge != BRIDGE_NONE;
  t->f2[at] = f * f;
  t->roll[at] = 1 / (f * f * f * f);
  t->reach[at] = 4 * pow(omega, 1.5) * c * compliance;
  t->above_k[at] = 8 * f / PI;
  t->bridge_k[at] = bridged ? constant / (w->line_m * omega * omega) / MODEL_SUBBANDS : 0;
  t->soft[at] = fade * (bridged ? x->low_share * compliance * w->line_m
                                : 1 / fmax(x->double_coupling, KERNEL_COUPLING_MIN));
  for (int side = 0; side < 2; side++)
    t->bay[side][at] = bridged ? fade * pow(w->support_m[side], 4) / x->bay_stiffness : 0;
}

void kernel_core_band(kernel_core *k, int band) {
  for (int i = 0; i < MODEL_SUBBANDS; i++) {
    int tone = band * MODEL_SUBBANDS + i;
    double f = model_subband_hz(band, i);
    tone_set(k, tone, f);
    for (int angle = 0; angle < MODEL_ANGLES && !k->cavity->ready[band]; angle++)
      point_set(k, tone * MODEL_ANGLES + angle, f, angle);
  }
  k->core_ready[band] = k->cavity->ready[band] = true;
}

/* What rounding can make of the screen's sum and of kernel_rate's curve is far less. */
static const double screen_slack_db = 1e-3;

double kernel_screen_of(double stc) {
  double most_db = RATING_STC_LIMIT_DB - rating_stc_contour[BAND_125 - RATING_STC_FIRST];
  return pow(10, -(stc - screen_slack_db - most_db) / 10);
}
