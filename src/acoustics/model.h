/* The sound model in numbers: leaves, cavities, connections in; third-octave TL out. Method,
 * symbols and sources in docs/methods/sound.md. The plain double reference; kernel.h does the same
 * for many walls at once. */
#ifndef ACOUSTICS_MODEL_H
#define ACOUSTICS_MODEL_H

#include <complex.h>
#include <stdbool.h>

#include "base/bands.h"
#include "input/coefficients.h"

/* Quadrature is part of the model: fixed before the fit. */
enum { MODEL_ANGLES = 4, MODEL_SUBBANDS = 3 };

/* One leaf as the model sees it. */
typedef struct model_leaf {
  double mass_kg_m2;  /* effective: heaviest layer + layer_share x the others */
  double critical_hz; /* of the leaf; MODEL_LIMP_HZ for one without stiffness */
  double loss;
  double bending_n_m; /* sum over layers, which slide on each other */
} model_leaf;

#define MODEL_LIMP_HZ 1e6

/* A part of the cavity, in order from side A. */
typedef struct model_gap {
  double depth_m;
  bool filled;
} model_gap;

/* What connects the leaves. Compliance per metre of line at frequency f: c500 (500/f)^p. */
typedef enum model_bridge { BRIDGE_NONE, BRIDGE_LINE } model_bridge;

/* Between two leaves there is a cavity of gaps. A wall is a chain of leaves: two, or more with a
 * trapped board. */
/* Most gaps: two rows with a part fill each (air, fill, air between, fill, air). */
enum { MODEL_MAX_GAPS = 5, MODEL_MAX_LEAVES = 5 };

typedef struct model_cavity {
  int gaps;
  model_gap gap[MODEL_MAX_GAPS];
} model_cavity;

typedef struct model_wall {
  int leaves; /* 2 .. MODEL_MAX_LEAVES, A first */
  model_leaf leaf[MODEL_MAX_LEAVES];
  model_cavity cavity[MODEL_MAX_LEAVES - 1]; /* cavity[i] between leaf[i] and leaf[i + 1] */
  bool tied[MODEL_MAX_LEAVES -
            1]; /* studs screwed to both leaves stand in cavity[i], in chains of three or more */
  double support_m[2]; /* spacing of the supports of the outer leaves: studs or channels */
  model_bridge bridge; /* between the outer leaves */
  double c500_m2_n;    /* compliance per metre of line at 500 Hz */
  double line_m;       /* spacing of the lines */
  double fill_loss;    /* what the fill adds to the loss of every leaf; already in leaf[] */
} model_wall;

/* Parts, apart: the kernel and the tests use them too. Frequencies in Hz. */
typedef struct model_matrix {
  double complex a, b, c, d;
} model_matrix;

/* Sub-band frequency: f 2^((i - 1)/9), i = 0, 1, 2. */
double model_subband_hz(int band, int i);
/* sin^2 of the i-th angle at f, and its weight (weights sum to 1). */
double model_sin2(const struct acoustics *k, double f_hz, int i, double *weight);
/* Impedance of a leaf over rho c / cos, at sin^2 = s2. */
double complex model_leaf_z(const struct acoustics *k, const model_leaf *l, double f_hz, double s2);
model_matrix model_cavity_matrix(const struct acoustics *k, const model_cavity *c, double f_hz,
                                 double s2);
/* Propagation in the fibre fill (Miki 1990): relative impedance and wave number. */
void model_fibre(const struct acoustics *k, double f_hz, double complex *z_rel,
                 double complex *k_rel);
double model_compliance(const struct acoustics *k, double c500_m2_n, double f_hz);
/* Compliance per metre of a C-stud's flange and web at 500 Hz, from its static beam value at
 * stud_static_hz. */
double model_stud_c500(const struct acoustics *k, double web_m, double thickness_m);
/* Static value by the beam formula: (2 e^3/3 + e^2 h)/D. */
double model_stud_static(const struct acoustics *k, double web_m, double thickness_m);
/* Stiffness per area (N/m3) of the connection beside the air spring at f. */
double model_low_spring(const struct acoustics *k, const model_wall *w, double f_hz);
/* The bridged path at f. */
double model_bridge_tau(const struct acoustics *k, const model_wall *w, double f_hz);
/* The air path at f (average over angles). */
double model_air_tau(const struct acoustics *k, const model_wall *w, double f_hz);
/* Mass-air-mass resonance of the outer leaves over the whole cavity depth, air adiabatic. */
double model_resonance_hz(const struct acoustics *k, const model_wall *w);

/* All paths, energy sum, averaged over each band. */
void model_tl(const model_wall *w, const struct acoustics *k, double tl_db[BANDS]);
/* The two paths apart, for drawing: dB each. */
void model_paths(const model_wall *w, const struct acoustics *k, double air_db[BANDS],
                 double bridge_db[BANDS]);

/* Two leaves that studs tie move as one at low frequency. */
model_leaf model_tied(const model_leaf *x, const model_leaf *y);

#endif
