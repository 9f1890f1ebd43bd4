/* What kernel_tables.c prepares and kernel.c sweeps; private to the two. Derivation and symbols:
 * docs/methods/kernel.md. A tone is one frequency (a sub-band of a band), a point one angle of
 * incidence at a tone. Lanes are leaves of side B. Every table is an array by point, tone or lane,
 * so that loops over them run in vectors. */
#ifndef ACOUSTICS_KERNEL_LANES_H
#define ACOUSTICS_KERNEL_LANES_H

#include "acoustics/kernel.h"
#include "acoustics/model.h"
#include "acoustics/rating.h"

enum {
  KERNEL_LANES = 64, /* of a block: what it works on stays in the first cache */
  KERNEL_STEP = 8,   /* lanes are taken in whole multiples of the widest vector */
  KERNEL_TONES = BANDS * MODEL_SUBBANDS,
  KERNEL_POINTS = KERNEL_TONES * MODEL_ANGLES,
  KERNEL_BAND_POINTS = MODEL_SUBBANDS * MODEL_ANGLES,
  KERNEL_CAVITIES = 48 /* kept, the oldest goes first: 40 KiB each */
};

/* What the cavity says of a point. Cores that differ in what stands in the cavity's sides only
 * (spacing, gauge of the studs) have the same. */
typedef struct kernel_cavity {
  model_cavity of;
  bool ready[BANDS]; /* tables are made when a band is first asked for */
  double alpha[KERNEL_POINTS], alpha_minus1[KERNEL_POINTS]; /* w/z0 */
  double g[KERNEL_POINTS];                                  /* f^2 sin^4 */
  double a_re[KERNEL_POINTS], a_im[KERNEL_POINTS], b_re[KERNEL_POINTS], b_im[KERNEL_POINTS];
  double c_re[KERNEL_POINTS], c_im[KERNEL_POINTS], d_re[KERNEL_POINTS], d_im[KERNEL_POINTS];
  double own_re[KERNEL_POINTS], own_im[KERNEL_POINTS]; /* c/(j w z0) */
  double e_re[KERNEL_POINTS], e_im[KERNEL_POINTS];     /* [1 + (a + d - 2)/c]/alpha */
  double weight[KERNEL_POINTS];                        /* 4 x share of the band / alpha^2 */
} kernel_cavity;

/* The air path with the leaf on side A, for a lane with y = g u + j (m - g v) and t the reciprocal
 * of its low-frequency spring: tau = (w2 t^2 + w1 t + w0) / |t (r + y) + k (q + y)|^2. */
typedef struct kernel_points {
  double g[KERNEL_POINTS]; /* the cavity's, here for the loops over lanes to read */
  double r_re[KERNEL_POINTS], r_im[KERNEL_POINTS], k_re[KERNEL_POINTS], k_im[KERNEL_POINTS];
  double q_re[KERNEL_POINTS], q_im[KERNEL_POINTS];
  double w2[KERNEL_POINTS], w1[KERNEL_POINTS], w0[KERNEL_POINTS];
} kernel_points;

/* By tone, of the core; below those of the leaf on side A as well. */
typedef struct kernel_tones {
  double f2[KERNEL_TONES], roll[KERNEL_TONES];          /* f^2, 1/f^4 */
  double reach[KERNEL_TONES];                           /* 4 w^1.5 c C */
  double soft[KERNEL_TONES], bay[2][KERNEL_TONES];      /* t = soft + bay[A]/B_A + bay[B]/B */
  double bridge_k[KERNEL_TONES], above_k[KERNEL_TONES]; /* without what leaf A adds */
  double soft_a[KERNEL_TONES];                          /* soft + bay[A]/B_A */
  double bridge[KERNEL_TONES]; /* bridged path: numerator without 1/m^2 of the lane */
  double below[KERNEL_TONES],
      above[KERNEL_TONES]; /* its radiation below and above the critical frequencies */
} kernel_tones;

/* What a leaf is known by: m mass, fc critical frequency, eta loss, B bending stiffness. As lanes:
 */
typedef struct kernel_block {
  double mass[KERNEL_LANES];        /* m */
  double mass_fc2[KERNEL_LANES];    /* v = m/fc^2 */
  double loss_fc2[KERNEL_LANES];    /* u = v eta */
  double slack[KERNEL_LANES];       /* 1/B */
  double fc_minus2[KERNEL_LANES];   /* 1/fc^2 */
  double radiation[KERNEL_LANES];   /* eta/sqrt(fc) */
  double fc_root[KERNEL_LANES];     /* 1/sqrt(fc) */
  double mass_minus1[KERNEL_LANES]; /* 1/m */
  double heave[KERNEL_LANES];       /* h = sqrt(2 pi fc)/m */
} kernel_block;

struct kernel_leaves {
  int count, blocks;
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

/* Bands that a metric looks at, and for weighted sums: offset - 10 lg sum weight x tau. */
typedef struct kernel_sum {
  int first, last;
  double offset_db, weight[BANDS];
} kernel_sum;

/* One step of a sorting network: the lesser of two rows goes to `low`. */
typedef struct kernel_order {
  unsigned char low, high;
} kernel_order;
enum { KERNEL_SORT_STEPS = 63 }; /* Batcher's merge exchange of 16 rows */

typedef struct kernel_build kernel_build;

struct kernel_core {
  const catalog *catalog;
  const kernel_build *build; /* of the loops over lanes */
  double ceiling_tau;
  double fill_loss; /* of the core, added to the loss of every leaf */
  kernel_sum sum[METRIC_COUNT];
  kernel_order order[KERNEL_SORT_STEPS];
  model_wall model;            /* of the core; its leaves stand for none */
  double resonance_k;          /* f0^2 = resonance_k (1/m_A + 1/m) */
  const kernel_block *side_block; /* of the leaf on side A that was swept last; NULL = none */
  int side_lane;
  bool core_ready[BANDS], side_ready[BANDS]; /* tables are made when a band is first asked for */
  arena *arena;
  kernel_cavity *kept[KERNEL_CAVITIES], *cavity; /* the core's is one of those kept */
  int cavities, oldest;
  kernel_tones tone;
  kernel_points point;
  kernel_pair pair;
  double level[BANDS][KERNEL_LANES];          /* tau, then TL in dB */
  double fit[RATING_FIT_BANDS][KERNEL_LANES]; /* TL less contour, sorted */
  double result[METRIC_COUNT][KERNEL_LANES];
  unsigned char open[KERNEL_LANES]; /* of the screen */
  kernel_block gathered;            /* lanes from here and there, side by side */
};

/* The tables of one band as far as the core decides them. */
void kernel_core_band(kernel_core *k, int band);

#endif
