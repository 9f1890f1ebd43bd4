#include "acoustics/kernel_lanes.h"

#include <stdint.h>
#include <string.h>

/* Lanes are the innermost loops: contiguous, no branch, no libm. The same text
 * is compiled for wider vectors too and picked at run time; without contraction every width gives
 * the same bits. Plain attributes rather than target_clones: those crash under the thread
 * sanitizer, and with clang 14 do not link across files. */
#if defined(__GNUC__)
#define INLINE static inline __attribute__((always_inline))
#else
#define INLINE static inline
#endif

_Static_assert(MODEL_ANGLES == 4, "tone_add spells out four angles");

/* Lanes of a block, from .. to - 1: multiples of KERNEL_STEP. */
typedef struct lanes {
  int from, to;
} lanes;

/* ------------------------------------------------------------------ leaf on side A */

/* Points of bands first .. last with the leaf on side A, lane `at` of its block. */
INLINE void side_points(kernel_core *k, const kernel_block *a, int at, int first, int last) {
  const kernel_cavity *c = k->cavity;
  kernel_points *p = &k->point;
  double m = a->mass[at], v = a->mass_fc2[at], u = a->loss_fc2[at] + k->fill_loss * v;
  for (int i = first * KERNEL_BAND_POINTS; i < (last + 1) * KERNEL_BAND_POINTS; i++) {
    double z_re = 1.0 + c->alpha[i] * (c->g[i] * u), z_im = c->alpha[i] * (m - c->g[i] * v);
    double x_re = c->a_re[i] + (c->c_re[i] * z_re - c->c_im[i] * z_im);
    double x_im = c->a_im[i] + (c->c_re[i] * z_im + c->c_im[i] * z_re);
    double u_re = c->b_re[i] + (c->d_re[i] * z_re - c->d_im[i] * z_im);
    double u_im = c->b_im[i] + (c->d_re[i] * z_im + c->d_im[i] * z_re);
    double over = 1.0 / (x_re * x_re + x_im * x_im), own_re = c->own_re[i], own_im = c->own_im[i];
    double alpha1 = c->alpha_minus1[i], w = c->weight[i] * over;
    p->r_re[i] = alpha1 * (1.0 + over * (u_re * x_re + u_im * x_im));
    p->r_im[i] = alpha1 * (over * (u_im * x_re - u_re * x_im));
    p->k_re[i] = over * (own_re * x_re + own_im * x_im);
    p->k_im[i] = over * (own_im * x_re - own_re * x_im);
    p->q_re[i] = alpha1 * z_re + c->e_re[i];
    p->q_im[i] = alpha1 * z_im + c->e_im[i];
    p->w2[i] = w;
    p->w1[i] = 2.0 * w * own_re;
    p->w0[i] = w * (own_re * own_re + own_im * own_im);
    p->g[i] = c->g[i];
  }
}

INLINE void side_tones(kernel_core *k, const kernel_block *a, int at, int first, int last) {
  kernel_tones *t = &k->tone;
  double slack = a->slack[at], fc_minus2 = a->fc_minus2[at];
  double radiation = a->radiation[at] + k->fill_loss * a->fc_root[at];
  double mass_minus2 = a->mass_minus1[at] * a->mass_minus1[at];
  for (int i = first * MODEL_SUBBANDS; i < (last + 1) * MODEL_SUBBANDS; i++) {
    double near = 1.0 - t->f2[i] * fc_minus2;
    near = near > 0.0 ? near : 0.0;
    t->soft_a[i] = t->soft[i] + t->bay[SIDE_A][i] * slack;
    t->bridge[i] = t->bridge_k[i] * mass_minus2;
    t->below[i] = near / 2.0;
    t->above[i] = t->above_k[i] * radiation;
  }
}

INLINE void side_any(kernel_core *k, const kernel_block *a, int at, int first, int last) {
  side_points(k, a, at, first, last);
  side_tones(k, a, at, first, last);
}

/* ------------------------------------------------------------------ one tone */

/* A fraction under way: num / den. */
typedef struct fraction {
  double num, den;
} fraction;

INLINE fraction fraction_sum(fraction x, fraction y) {
  return (fraction){x.num * y.den + y.num * x.den, x.den * y.den};
}

/* Air path at point i for one lane. */
INLINE fraction air_path(const kernel_core *k, int i, double m, double v, double u, double t) {
  const kernel_points *p = &k->point;
  double g = p->g[i], y_re = g * u, y_im = m - g * v;
  double r_re = p->r_re[i] + y_re, r_im = p->r_im[i] + y_im;
  double q_re = p->q_re[i] + y_re, q_im = p->q_im[i] + y_im;
  double re = t * r_re + (p->k_re[i] * q_re - p->k_im[i] * q_im);
  double im = t * r_im + (p->k_re[i] * q_im + p->k_im[i] * q_re);
  return (fraction){(p->w2[i] * t + p->w1[i]) * t + p->w0[i], re * re + im * im};
}

/* Bridged path at tone i for lane j. */
INLINE fraction bridged_path(const kernel_core *k, int i, const kernel_block *b, int j) {
  const kernel_tones *t = &k->tone;
  const kernel_pair *p = &k->pair;
  double near = 1.0 - t->f2[i] * b->fc_minus2[j];
  near = near > 0.0 ? near : 0.0;
  double radiation = t->below[i] * near;
  radiation += t->above[i] * (b->radiation[j] + k->fill_loss * b->fc_root[j]);
  double heave = p->heave_square[j] + t->reach[i] * (t->reach[i] - p->twice_heave[j]);
  return (fraction){t->bridge[i] * p->mass_minus2[j],
                    radiation * heave * (1.0 + t->roll[i] * p->resonance[j])};
}

/* Adds the transmission of tone i: all its fractions over one division. */
INLINE void tone_add(const kernel_core *k, int i, const kernel_block *restrict b, lanes l,
                     double *restrict tau) {
  const int p = i * MODEL_ANGLES;
  for (int j = l.from; j < l.to; j++) {
    double m = b->mass[j], v = b->mass_fc2[j], u = b->loss_fc2[j] + k->fill_loss * v;
    double t = k->tone.soft_a[i] + k->tone.bay[SIDE_B][i] * b->slack[j];
    fraction x = fraction_sum(air_path(k, p, m, v, u, t), air_path(k, p + 1, m, v, u, t));
    fraction y = fraction_sum(air_path(k, p + 2, m, v, u, t), air_path(k, p + 3, m, v, u, t));
    fraction all = fraction_sum(fraction_sum(x, y), bridged_path(k, i, b, j));
    tau[j] += all.num / all.den;
  }
}

INLINE void pair_lanes(const kernel_block *restrict b, lanes l, double heave_a,
                       double mass_minus1_a, double resonance_k, kernel_pair *restrict p) {
  for (int j = l.from; j < l.to; j++) {
    double heave = heave_a + b->heave[j];
    double f0_2 = resonance_k * (mass_minus1_a + b->mass_minus1[j]);
    p->twice_heave[j] = 2.0 * heave;
    p->heave_square[j] = 2.0 * heave * heave;
    p->resonance[j] = f0_2 * f0_2;
    p->mass_minus2[j] = b->mass_minus1[j] * b->mass_minus1[j];
  }
}

INLINE void pair_set(kernel_core *k, const kernel_block *b, lanes l) {
  const kernel_block *a = k->side_block;
  pair_lanes(b, l, a->heave[k->side_lane], a->mass_minus1[k->side_lane], k->resonance_k, &k->pair);
}

/* Transmission factors of bands first .. last into k->level. */
INLINE void bands_tau(kernel_core *k, const kernel_block *b, lanes l, int first, int last) {
  const double ceiling = k->ceiling_tau;
  pair_set(k, b, l);
  for (int band = first; band <= last; band++) {
    double *restrict tau = k->level[band];
    for (int j = l.from; j < l.to; j++) tau[j] = ceiling;
    for (int i = 0; i < MODEL_SUBBANDS; i++) tone_add(k, band * MODEL_SUBBANDS + i, b, l, tau);
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

INLINE void lanes_order(double *restrict low, double *restrict high, lanes l) {
  for (int j = l.from; j < l.to; j++) {
    double x = low[j], y = high[j];
    low[j] = x < y ? x : y;
    high[j] = x < y ? y : x;
  }
}

/* Highest contour on the 16 bands of TL from `first`, as in rating.c: least of (32 + x_1 + ... +
 * x_i)/i and x_1 + `most`. */
INLINE void lanes_fit(kernel_core *k, lanes l, int first, const double *contour, double most,
                      double *restrict out) {
  double total[KERNEL_LANES];
  for (int i = 0; i < RATING_FIT_BANDS; i++)
    for (int j = l.from; j < l.to; j++) k->fit[i][j] = k->level[first + i][j] - contour[i];
  for (int i = 0; i < KERNEL_SORT_STEPS; i++)
    lanes_order(k->fit[k->order[i].low], k->fit[k->order[i].high], l);
  for (int j = l.from; j < l.to; j++) {
    total[j] = RATING_SUM_LIMIT_DB;
    out[j] = k->fit[0][j] + most;
  }
  for (int i = 0; i < RATING_FIT_BANDS; i++) {
    double share = 1.0 / (i + 1);
    for (int j = l.from; j < l.to; j++) {
      total[j] += k->fit[i][j];
      double at_most = total[j] * share;
      out[j] = at_most < out[j] ? at_most : out[j];
    }
  }
  for (int j = l.from; j < l.to; j++) out[j] = lane_step_down(out[j]);
}

INLINE void lanes_weighted(const kernel_core *k, lanes l, const kernel_sum *s,
                           double *restrict out) {
  for (int j = l.from; j < l.to; j++) out[j] = 0.0;
  for (int band = s->first; band <= s->last; band++)
    for (int j = l.from; j < l.to; j++) out[j] += s->weight[band] * k->level[band][j];
  for (int j = l.from; j < l.to; j++) out[j] = lane_step_down(s->offset_db + lane_db(out[j]));
}

INLINE void bands_db(kernel_core *k, lanes l, int first, int last) {
  for (int band = first; band <= last; band++)
    for (int j = l.from; j < l.to; j++) k->level[band][j] = lane_db(k->level[band][j]);
}

/* ------------------------------------------------------------------ one block */

/* What a call wants of the blocks it goes over: metrics, or the bound from 125 Hz as result of
 * METRIC_STC. */
typedef struct kernel_job {
  bool want[METRIC_COUNT];
  bool bound, screen;
  int first, last;  /* bands */
  double tau_most;  /* screen: what lets more through at 125 Hz is refused */
} kernel_job;

INLINE void block_bound(kernel_core *k, const kernel_block *b, lanes l) {
  const double contour = rating_stc_contour[BAND_125 - RATING_STC_FIRST];
  double *restrict out = k->result[METRIC_STC];
  bands_tau(k, b, l, BAND_125, BAND_125);
  for (int j = l.from; j < l.to; j++) {
    double shift = lane_db(k->level[BAND_125][j]) - contour;
    out[j] = lane_step_down(shift + RATING_STC_LIMIT_DB);
  }
}

/* One tone after another, since more tones only let more through: mostly the first refuses all. */
INLINE void block_screen(kernel_core *k, const kernel_block *b, lanes l, double tau_most) {
  double *restrict tau = k->level[BAND_125];
  unsigned char *restrict open = k->open;
  const double ceiling = k->ceiling_tau;
  int left = 1;
  pair_set(k, b, l);
  for (int j = l.from; j < l.to; j++) tau[j] = ceiling;
  for (int i = 0; i < MODEL_SUBBANDS && left; i++) {
    left = 0;
    tone_add(k, BAND_125 * MODEL_SUBBANDS + i, b, l, tau);
    for (int j = l.from; j < l.to; j++) left |= tau[j] <= tau_most;
  }
  for (int j = l.from; j < l.to; j++) open[j] = tau[j] <= tau_most;
}

INLINE void block_rate(kernel_core *k, const kernel_block *b, lanes l, const kernel_job *job) {
  const bool *want = job->want;
  bands_tau(k, b, l, job->first, job->last);
  for (int metric = METRIC_RW_C; metric < METRIC_COUNT; metric++)
    if (want[metric]) lanes_weighted(k, l, &k->sum[metric], k->result[metric]);
  if (want[METRIC_STC] || want[METRIC_RW]) bands_db(k, l, job->first, job->last);
  if (want[METRIC_STC])
    lanes_fit(k, l, RATING_STC_FIRST, rating_stc_contour, RATING_STC_LIMIT_DB,
              k->result[METRIC_STC]);
  if (want[METRIC_RW]) /* no rule of 8 dB: the sum alone never lets one band lack more than 32 */
    lanes_fit(k, l, RATING_RW_FIRST, rating_rw_contour, RATING_SUM_LIMIT_DB, k->result[METRIC_RW]);
}

INLINE void block_any(kernel_core *k, const kernel_block *b, lanes l, const kernel_job *job) {
  if (job->screen)
    block_screen(k, b, l, job->tau_most);
  else if (job->bound)
    block_bound(k, b, l);
  else
    block_rate(k, b, l, job);
}

/* ------------------------------------------------------------------ widths */

/* One compilation of the loops above. */
struct kernel_build {
  const char *vectors;
  bool (*able)(void); /* whether this machine is */
  void (*side)(kernel_core *k, const kernel_block *a, int at, int first, int last);
  void (*block)(kernel_core *k, const kernel_block *b, lanes l, const kernel_job *job);
};

static bool able_always(void) {
  return true;
}

static void side_portable(kernel_core *k, const kernel_block *a, int at, int first, int last) {
  side_any(k, a, at, first, last);
}
static void block_portable(kernel_core *k, const kernel_block *b, lanes l, const kernel_job *job) {
  block_any(k, b, l, job);
}

#if defined(SEPTUM_SIMD) && defined(__GNUC__) && defined(__x86_64__)
#define AVX2   __attribute__((target("avx2")))
#define AVX512 __attribute__((target("avx512f,avx512dq,avx512bw,avx512vl")))

AVX2 static void side_avx2(kernel_core *k, const kernel_block *a, int at, int first, int last) {
  side_any(k, a, at, first, last);
}
AVX2 static void block_avx2(kernel_core *k, const kernel_block *b, lanes l, const kernel_job *job) {
  block_any(k, b, l, job);
}
AVX512 static void side_avx512(kernel_core *k, const kernel_block *a, int at, int first, int last) {
  side_any(k, a, at, first, last);
}
AVX512 static void block_avx512(kernel_core *k, const kernel_block *b, lanes l,
                                const kernel_job *job) {
  block_any(k, b, l, job);
}

static bool able_avx2(void) {
  return __builtin_cpu_supports("avx2");
}
static bool able_avx512(void) {
  return __builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512dq") &&
         __builtin_cpu_supports("avx512bw") && __builtin_cpu_supports("avx512vl");
}
#endif

/* The widest first. */
static const kernel_build builds[] = {
#if defined(SEPTUM_SIMD) && defined(__GNUC__) && defined(__x86_64__)
    {"avx512", able_avx512, side_avx512, block_avx512},
    {"avx2", able_avx2, side_avx2, block_avx2},
#endif
    {"portable", able_always, side_portable, block_portable},
};
enum { BUILDS = sizeof builds / sizeof *builds };

bool kernel_use(kernel_core *k, const char *vectors) {
  for (int i = 0; i < BUILDS; i++) {
    if (vectors && strcmp(vectors, builds[i].vectors) != 0) continue;
    if (!builds[i].able()) continue;
    k->build = &builds[i];
    return true;
  }
  return false;
}

const char *kernel_vectors(void) {
  int i = 0;
  while (!builds[i].able()) i++;
  return builds[i].vectors;
}

/* ------------------------------------------------------------------ calls */

/* Makes the tables of bands first .. last that are not there yet, with leaf `a` on side A. */
static void prepare(kernel_core *k, const kernel_leaves *leaves, int a, int first, int last) {
  const kernel_block *block = &leaves->block[a / KERNEL_LANES];
  int lane = a % KERNEL_LANES;
  if (k->side_block != block || k->side_lane != lane)
    memset(k->side_ready, 0, sizeof k->side_ready);
  k->side_block = block;
  k->side_lane = lane;
  while (first <= last && k->side_ready[first]) first++;
  if (first > last) return;
  for (int band = first; band <= last; band++) {
    if (!k->core_ready[band]) kernel_core_band(k, band);
    k->side_ready[band] = true;
  }
  k->build->side(k, block, lane, first, last);
}

static int step_up(int lane) {
  return (lane + KERNEL_STEP - 1) / KERNEL_STEP * KERNEL_STEP;
}

/* The part of faces first_b + done .. first_b + n - 1 that lies in one block. */
typedef struct stretch {
  int block, lane, count;
  lanes lanes;
} stretch;

static stretch stretch_at(int first_b, int done, int n) {
  stretch s = {(first_b + done) / KERNEL_LANES, (first_b + done) % KERNEL_LANES, n - done, {0, 0}};
  if (s.count > KERNEL_LANES - s.lane) s.count = KERNEL_LANES - s.lane;
  s.lanes = (lanes){s.lane / KERNEL_STEP * KERNEL_STEP, step_up(s.lane + s.count)};
  return s;
}

/* The wanted metrics of `count` lanes from `lane`, one after another at `out`, `apart` values
 * apart. */
static void hand_out(const kernel_core *k, const kernel_job *job, int lane, int count, int apart,
                     double *out) {
  for (int metric = 0; metric < METRIC_COUNT; metric++) {
    if (!job->want[metric]) continue;
    memcpy(out, &k->result[metric][lane], (size_t)count * sizeof *out);
    out += apart;
  }
}

/* Goes over the blocks that hold faces first_b .. first_b + n - 1; wanted metrics one after another
 * in `out`. */
static void sweep(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                  const kernel_job *job, double *out) {
  prepare(k, leaves, side_a, job->first, job->last);
  for (int done = 0; done < n;) {
    stretch s = stretch_at(first_b, done, n);
    k->build->block(k, &leaves->block[s.block], s.lanes, job);
    hand_out(k, job, s.lane, s.count, n, out + done);
    done += s.count;
  }
}

static kernel_job job_of(const kernel_core *k, sound_metric metric) {
  kernel_job job = {.first = k->sum[metric].first, .last = k->sum[metric].last};
  job.want[metric] = true;
  return job;
}

void kernel_rate(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                 sound_metric metric, double *exact) {
  kernel_job job = job_of(k, metric);
  sweep(k, leaves, side_a, first_b, n, &job, exact);
}

void kernel_rate_all(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                     double *exact) {
  kernel_job job = job_of(k, METRIC_OITC);
  for (int metric = 0; metric < METRIC_COUNT; metric++) {
    job.want[metric] = true;
    job.first = k->sum[metric].first < job.first ? k->sum[metric].first : job.first;
    job.last = k->sum[metric].last > job.last ? k->sum[metric].last : job.last;
  }
  sweep(k, leaves, side_a, first_b, n, &job, exact);
}

void kernel_bound(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n,
                  double *stc_at_most) {
  kernel_job job = {.bound = true, .first = BAND_125, .last = BAND_125};
  job.want[METRIC_STC] = true;
  sweep(k, leaves, side_a, first_b, n, &job, stc_at_most);
}

void kernel_screen(kernel_core *k, const kernel_leaves *leaves_a, int a,
                   const kernel_leaves *leaves_b, int first_b, int n, double screen,
                   unsigned char *open) {
  kernel_job job = {.screen = true, .first = BAND_125, .last = BAND_125, .tau_most = screen};
  prepare(k, leaves_a, a, BAND_125, BAND_125);
  for (int done = 0; done < n;) {
    stretch s = stretch_at(first_b, done, n);
    k->build->block(k, &leaves_b->block[s.block], s.lanes, &job);
    memcpy(open + done, &k->open[s.lane], (size_t)s.count);
    done += s.count;
  }
}

/* The blocks are arrays of one lane count and nothing else. */
_Static_assert(sizeof(kernel_block) % (KERNEL_LANES * sizeof(double)) == 0, "arrays of lanes");

static void gather(kernel_block *to, int lane, const kernel_leaves *leaves, int b) {
  enum { ARRAYS = sizeof(kernel_block) / (KERNEL_LANES * sizeof(double)) };
  const double *from = (const double *)&leaves->block[b / KERNEL_LANES] + b % KERNEL_LANES;
  double *at = (double *)to + lane;
  for (int i = 0; i < ARRAYS; i++) at[i * KERNEL_LANES] = from[i * KERNEL_LANES];
}

void kernel_rate_listed(kernel_core *k, const kernel_leaves *leaves_a, int a,
                        const kernel_leaves *leaves_b, const int *b, int n, sound_metric metric,
                        double *exact) {
  kernel_job job = job_of(k, metric);
  prepare(k, leaves_a, a, job.first, job.last);
  for (int done = 0, count; done < n; done += count) {
    count = n - done < KERNEL_LANES ? n - done : KERNEL_LANES;
    lanes l = {0, step_up(count)};
    for (int i = 0; i < l.to; i++)
      gather(&k->gathered, i, leaves_b, b[done + (i < count ? i : count - 1)]);
    k->build->block(k, &k->gathered, l, &job);
    hand_out(k, &job, 0, count, n, exact + done);
  }
}
