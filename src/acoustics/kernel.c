#include "acoustics/kernel_lanes.h"

#include <stdint.h>
#include <string.h>

/* Lanes are the innermost loops: contiguous, no branch, no libm, constant trip count. The same text
 * is compiled for wider vectors too and picked at run time; without contraction every width gives
 * the same bits. Plain attributes rather than target_clones: those crash under the thread
 * sanitizer, and with clang 14 do not link across files. */
#if defined(__GNUC__)
#define INLINE static inline __attribute__((always_inline))
#else
#define INLINE static inline
#endif

_Static_assert(MODEL_ANGLES == 4, "tone_add spells out four angles");

/* ------------------------------------------------------------------ one tone */

/* Numerator and denominator of the air path at one point. */
INLINE void point_tau(const kernel_point *p, double m, double v, double u, double t, double *num,
                      double *den) {
  double y_re = p->g * u, y_im = m - p->g * v;
  double r_re = p->r_re + y_re, r_im = p->r_im + y_im;
  double q_re = p->q_re + y_re, q_im = p->q_im + y_im;
  double re = t * r_re + (p->k_re * q_re - p->k_im * q_im);
  double im = t * r_im + (p->k_re * q_im + p->k_im * q_re);
  *num = (p->w2 * t + p->w1) * t + p->w0;
  *den = re * re + im * im;
}

/* Denominator of the bridged path. */
INLINE double bridge_den(const kernel_tone *t, const kernel_block *b, const kernel_pair *p, int j) {
  double near = 1.0 - t->f2 * b->fc_minus2[j];
  near = near > 0.0 ? near : 0.0;
  double radiation = t->below * (near * near) + t->above * b->radiation[j];
  double heave = p->heave_square[j] + t->reach * (t->reach - p->twice_heave[j]);
  return radiation * heave * (1.0 + t->roll * p->resonance[j]);
}

/* Adds n/d to *num / *den. */
INLINE void add_fraction(double n, double d, double *num, double *den) {
  *num = *num * d + n * *den;
  *den *= d;
}

/* Adds the transmission of one tone: all its fractions over one division. */
INLINE void tone_add(const kernel_tone *restrict t, const kernel_block *restrict b,
                     const kernel_pair *restrict p, double *restrict tau) {
  for (int j = 0; j < KERNEL_LANES; j++) {
    double m = b->mass[j], v = b->mass_fc2[j], u = b->loss_fc2[j];
    double soft = t->soft_a + t->soft_b * b->slack[j];
    double n0, n1, n2, n3, d0, d1, d2, d3;
    point_tau(&t->at[0], m, v, u, soft, &n0, &d0);
    point_tau(&t->at[1], m, v, u, soft, &n1, &d1);
    point_tau(&t->at[2], m, v, u, soft, &n2, &d2);
    point_tau(&t->at[3], m, v, u, soft, &n3, &d3);
    add_fraction(n1, d1, &n0, &d0);
    add_fraction(n3, d3, &n2, &d2);
    add_fraction(n2, d2, &n0, &d0);
    add_fraction(t->bridge * p->mass_minus2[j], bridge_den(t, b, p, j), &n0, &d0);
    tau[j] += n0 / d0;
  }
}

INLINE void pair_set(const kernel_core *k, const kernel_block *b, kernel_pair *restrict p) {
  for (int j = 0; j < KERNEL_LANES; j++) {
    double heave = k->heave_a + b->heave[j];
    double f0_2 = k->resonance_k * (k->mass_minus1_a + b->mass_minus1[j]);
    p->twice_heave[j] = 2.0 * heave;
    p->heave_square[j] = 2.0 * heave * heave;
    p->resonance[j] = f0_2 * f0_2;
    p->mass_minus2[j] = b->mass_minus1[j] * b->mass_minus1[j];
  }
}

/* Transmission factors of bands first .. last into k->level. */
INLINE void bands_tau(kernel_core *k, const kernel_block *b, int first, int last) {
  pair_set(k, b, &k->pair);
  for (int band = first; band <= last; band++) {
    double *tau = k->level[band];
    for (int j = 0; j < KERNEL_LANES; j++) tau[j] = k->ceiling_tau;
    for (int i = 0; i < MODEL_SUBBANDS; i++)
      tone_add(&k->tone[band * MODEL_SUBBANDS + i], b, &k->pair, tau);
  }
}

/* ------------------------------------------------------------------ ratings */

/* Natural logarithm of a positive normal number, error below 1e-13: exponent apart, mantissa m in
 * [sqrt(1/2), sqrt(2)) by 2 artanh((m - 1)/(m + 1)) as far as the 17th power. */
INLINE double lane_ln(double x) {
  const uint64_t one = 0x3FF0000000000000u, root_half = 0x3FE6A09E00000000u;
  const uint64_t mantissa = 0x000FFFFFFFFFFFFFu, two52 = 0x4330000000000000u;
  uint64_t bits, exponent;
  double m, e;
  memcpy(&bits, &x, sizeof bits);
  bits += one - root_half;
  exponent = (bits >> 52) | two52; /* as a double: 2^52 + biased exponent */
  bits = (bits & mantissa) + root_half;
  memcpy(&m, &bits, sizeof m);
  memcpy(&e, &exponent, sizeof e);
  double s = (m - 1.0) / (m + 1.0), z = s * s, p = 1.0 / 17;
  p = p * z + 1.0 / 15;
  p = p * z + 1.0 / 13;
  p = p * z + 1.0 / 11;
  p = p * z + 1.0 / 9;
  p = p * z + 1.0 / 7;
  p = p * z + 1.0 / 5;
  p = p * z + 1.0 / 3;
  p = p * z + 1.0;
  return 2.0 * s * p + (e - (4503599627370496.0 + 1023.0)) * 0.69314718055994530942;
}

/* 10/ln 10 */
INLINE double lane_db(double tau) {
  return -4.3429448190325182765 * lane_ln(tau);
}

/* rating_step_down without a library call: adding and taking away 1.5 x 2^52 rounds to a whole
 * number. */
INLINE double lane_step_down(double db) {
  const double whole = 6755399441055744.0;
  double x = 10.0 * db + RATING_STEP_SLACK, near = (x + whole) - whole;
  return (near > x ? near - 1.0 : near) / 10.0;
}

INLINE void lanes_order(double *restrict low, double *restrict high) {
  for (int j = 0; j < KERNEL_LANES; j++) {
    double x = low[j], y = high[j];
    low[j] = x < y ? x : y;
    high[j] = x < y ? y : x;
  }
}

/* Batcher's merge exchange: sorts the 16 rows upwards, lane by lane. */
INLINE void lanes_sort(double x[RATING_FIT_BANDS][KERNEL_LANES]) {
  const int n = RATING_FIT_BANDS;
  for (int p = 1; p < n; p *= 2)
    for (int q = p; q >= 1; q /= 2)
      for (int j = q % p; j + q < n; j += 2 * q)
        for (int i = j; i < j + q && i + q < n; i++)
          if (i / (2 * p) == (i + q) / (2 * p)) lanes_order(x[i], x[i + q]);
}

/* Highest contour on the 16 bands of TL from `first`, as in rating.c: least of (32 + x_1 + ... +
 * x_i)/i and x_1 + `most`. */
INLINE void lanes_fit(kernel_core *k, int first, const double *contour, double most,
                      double *restrict out) {
  double total[KERNEL_LANES];
  for (int i = 0; i < RATING_FIT_BANDS; i++)
    for (int j = 0; j < KERNEL_LANES; j++) k->fit[i][j] = k->level[first + i][j] - contour[i];
  lanes_sort(k->fit);
  for (int j = 0; j < KERNEL_LANES; j++) {
    total[j] = RATING_SUM_LIMIT_DB;
    out[j] = k->fit[0][j] + most;
  }
  for (int i = 0; i < RATING_FIT_BANDS; i++) {
    double share = 1.0 / (i + 1);
    for (int j = 0; j < KERNEL_LANES; j++) {
      total[j] += k->fit[i][j];
      double at_most = total[j] * share;
      out[j] = at_most < out[j] ? at_most : out[j];
    }
  }
  for (int j = 0; j < KERNEL_LANES; j++) out[j] = lane_step_down(out[j]);
}

INLINE void lanes_weighted(const kernel_core *k, const kernel_sum *s, double *restrict out) {
  for (int j = 0; j < KERNEL_LANES; j++) out[j] = 0.0;
  for (int band = s->first; band <= s->last; band++)
    for (int j = 0; j < KERNEL_LANES; j++) out[j] += s->weight[band] * k->level[band][j];
  for (int j = 0; j < KERNEL_LANES; j++) out[j] = lane_step_down(s->offset_db + lane_db(out[j]));
}

INLINE void bands_db(kernel_core *k, int first, int last) {
  for (int band = first; band <= last; band++)
    for (int j = 0; j < KERNEL_LANES; j++) k->level[band][j] = lane_db(k->level[band][j]);
}

/* ------------------------------------------------------------------ one block */

/* What a call wants of the blocks it goes over. */
typedef struct kernel_job {
  bool want[METRIC_COUNT];
  bool bound; /* the bound from 125 Hz instead, as result of METRIC_STC */
} kernel_job;

INLINE void block_bound(kernel_core *k, const kernel_block *b) {
  const double contour = rating_stc_contour[BAND_125 - RATING_STC_FIRST];
  double *restrict out = k->result[METRIC_STC];
  bands_tau(k, b, BAND_125, BAND_125);
  for (int j = 0; j < KERNEL_LANES; j++) {
    double shift = lane_db(k->level[BAND_125][j]) - contour;
    out[j] = lane_step_down(shift + RATING_STC_LIMIT_DB);
  }
}

INLINE void block_rate(kernel_core *k, const kernel_block *b, const kernel_job *job) {
  const bool *want = job->want;
  int first = BANDS, last = 0;
  for (int metric = 0; metric < METRIC_COUNT; metric++) {
    if (!want[metric]) continue;
    first = k->sum[metric].first < first ? k->sum[metric].first : first;
    last = k->sum[metric].last > last ? k->sum[metric].last : last;
  }
  bands_tau(k, b, first, last);
  for (int metric = METRIC_RW_C; metric < METRIC_COUNT; metric++)
    if (want[metric]) lanes_weighted(k, &k->sum[metric], k->result[metric]);
  if (want[METRIC_STC] || want[METRIC_RW]) bands_db(k, first, last);
  if (want[METRIC_STC])
    lanes_fit(k, RATING_STC_FIRST, rating_stc_contour, RATING_STC_LIMIT_DB, k->result[METRIC_STC]);
  if (want[METRIC_RW])
    lanes_fit(k, RATING_RW_FIRST, rating_rw_contour, RATING_SUM_LIMIT_DB, k->result[METRIC_RW]);
}

INLINE void block_any(kernel_core *k, const kernel_block *b, const kernel_job *job) {
  if (job->bound)
    block_bound(k, b);
  else
    block_rate(k, b, job);
}

static void block_portable(kernel_core *k, const kernel_block *b, const kernel_job *job) {
  block_any(k, b, job);
}

typedef struct kernel_build {
  const char *vectors;
  void (*block)(kernel_core *k, const kernel_block *b, const kernel_job *job);
} kernel_build;

#if defined(SEPTUM_SIMD) && defined(__GNUC__) && defined(__x86_64__)
__attribute__((target("avx2"))) static void block_avx2(kernel_core *k, const kernel_block *b,
                                                       const kernel_job *job) {
  block_any(k, b, job);
}

__attribute__((target("avx512f,avx512dq,avx512bw,avx512vl"))) static void
block_avx512(kernel_core *k, const kernel_block *b, const kernel_job *job) {
  block_any(k, b, job);
}

static kernel_build widest(void) {
  if (__builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512dq") &&
      __builtin_cpu_supports("avx512bw") && __builtin_cpu_supports("avx512vl"))
    return (kernel_build){"avx512", block_avx512};
  if (__builtin_cpu_supports("avx2")) return (kernel_build){"avx2", block_avx2};
  return (kernel_build){"portable", block_portable};
}
#else
static kernel_build widest(void) {
  return (kernel_build){"portable", block_portable};
}
#endif

const char *kernel_vectors(void) {
  return widest().vectors;
}

/* Goes over the blocks that hold faces first_b .. first_b + n - 1; wanted metrics one after another
 * in `out`. */
static void sweep(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                  const kernel_job *job, double *out) {
  kernel_build build = widest();
  kernel_core_side(k, leaves, side_a);
  for (int done = 0, lanes; done < n; done += lanes) {
    int block = (first_b + done) / KERNEL_LANES, lane = (first_b + done) % KERNEL_LANES;
    double *to = out + done;
    lanes = KERNEL_LANES - lane < n - done ? KERNEL_LANES - lane : n - done;
    build.block(k, &leaves->block[block], job);
    for (int metric = 0; metric < METRIC_COUNT; metric++) {
      if (!job->want[metric]) continue;
      memcpy(to, &k->result[metric][lane], (size_t)lanes * sizeof *to);
      to += n;
    }
  }
}

void kernel_rate(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                 sound_metric metric, double *exact) {
  kernel_job job = {{false}, false};
  job.want[metric] = true;
  sweep(k, leaves, side_a, first_b, n, &job, exact);
}

void kernel_rate_all(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                     double *exact) {
  kernel_job job = {{true, true, true, true, true}, false};
  sweep(k, leaves, side_a, first_b, n, &job, exact);
}

void kernel_bound(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                  double *stc_at_most) {
  kernel_job job = {{false}, true};
  job.want[METRIC_STC] = true;
  sweep(k, leaves, side_a, first_b, n, &job, stc_at_most);
}
