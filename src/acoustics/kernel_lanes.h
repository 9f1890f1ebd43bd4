/* What kernel_tables.c prepares and kernel.c sweeps; private to the two. Derivation:
 * docs/methods/kernel.md. A tone is one frequency (a sub-band of a band), a point one angle of
 * incidence at a tone. Lanes are leaves of side B. */
#ifndef ACOUSTICS_KERNEL_LANES_H
#define ACOUSTICS_KERNEL_LANES_H

#include "acoustics/kernel.h"
#include "acoustics/model.h"
#include "acoustics/rating.h"

enum {
  KERNEL_LANES = 64, /* fewer make gcc unroll and spill; more leave the first cache */
  KERNEL_TONES = BANDS * MODEL_SUBBANDS
};

/* Air path at one point, for a lane with y = g u + j (m - g v) and t the reciprocal of its
 * low-frequency spring: tau = (w2 t^2 + w1 t + w0) / |t (r + y) + k (q + y)|^2. */
typedef struct kernel_point {
  double g, r_re, r_im, k_re, k_im, q_re, q_im, w2, w1, w0;
} kernel_point;

typedef struct kernel_tone {
  kernel_point at[MODEL_ANGLES];
  double soft_a, soft_b; /* t = soft_a + soft_b / B of the lane */
  double f2;             /* frequency squared */
  double bridge;         /* bridged path: numerator without 1/m^2 of the lane */
  double reach;          /* its compliance term 4 w^1.5 c C */
  double below,
      above;   /* leaf A's factors of the radiation below and above the critical frequencies */
  double roll; /* 1/f^4 */
} kernel_tone;

/* What a lane is known by, m mass, fc critical frequency, eta loss, B bending stiffness. */
typedef struct kernel_block {
  double mass[KERNEL_LANES];        /* m */
  double mass_fc2[KERNEL_LANES];    /* v = m/fc^2 */
  double loss_fc2[KERNEL_LANES];    /* u = v eta */
  double slack[KERNEL_LANES];       /* 1/B */
  double fc_minus2[KERNEL_LANES];   /* 1/fc^2 */
  double radiation[KERNEL_LANES];   /* eta/sqrt(fc) */
  double mass_minus1[KERNEL_LANES]; /* 1/m */
  double heave[KERNEL_LANES];       /* h = sqrt(2 pi fc)/m */
} kernel_block;

struct kernel_leaves {
  int count, blocks;
  model_leaf *leaf;    /* `count` */
  kernel_block *block; /* leaf i is lane i % KERNEL_LANES of block i / KERNEL_LANES; the last one is
                          filled up with copies */
};

/* What depends on a lane and on leaf A. */
typedef struct kernel_pair {
  double twice_heave[KERNEL_LANES];  /* 2H of H = h_A + h */
  double heave_square[KERNEL_LANES]; /* 2H^2 */
  double resonance[KERNEL_LANES];    /* f0^4 */
  double mass_minus2[KERNEL_LANES];  /* 1/m^2 */
} kernel_pair;

/* A point as far as the core alone decides it. */
typedef struct kernel_cavity {
  model_matrix m;
  double complex spring;    /* 1/(j w z0): what the spring is divided by, inverted */
  double alpha, s2, weight; /* w/z0, sin^2, share of the band */
} kernel_cavity;

/* Bands that a metric looks at, and for weighted sums: offset - 10 lg sum weight x tau. */
typedef struct kernel_sum {
  int first, last;
  double offset_db, weight[BANDS];
} kernel_sum;

struct kernel_core {
  const catalog *catalog;
  double ceiling_tau;
  kernel_sum sum[METRIC_COUNT];
  model_wall model; /* of the core; its leaves stand for none */
  double depth_m;
  kernel_cavity cavity[KERNEL_TONES][MODEL_ANGLES];
  double reach[KERNEL_TONES];
  double soft[KERNEL_TONES]; /* fade x share of the connection, or of double rows the whole */
  double fade[KERNEL_TONES];
  /* for the leaf on side A that was swept last */
  const kernel_leaves *leaves;
  int side_a;
  double heave_a, mass_minus1_a, resonance_k; /* f0^2 = resonance_k (1/m_A + 1/m) */
  kernel_tone tone[KERNEL_TONES];
  kernel_pair pair;
  double level[BANDS][KERNEL_LANES];          /* tau, then TL in dB */
  double fit[RATING_FIT_BANDS][KERNEL_LANES]; /* TL less contour, sorted */
  double result[METRIC_COUNT][KERNEL_LANES];
};

/* Tables for leaf `side_a`; nothing when they are there already. */
void kernel_core_side(kernel_core *k, const kernel_leaves *leaves, int side_a);

#endif
