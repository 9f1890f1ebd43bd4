/* The sound model in numbers: leaves, cavities, connections in; third-octave TL out. Method and sources in
 * docs/methods/sound.md. The plain double reference; kernel.h does the same for many walls at once. */
#ifndef ACOUSTICS_MODEL_H
#define ACOUSTICS_MODEL_H

#include "base/bands.h"
#include "input/coefficients.h"

/* One leaf as the model sees it. */
typedef struct model_leaf {
  double mass_kg_m2;      /* effective: heaviest layer + layer_share x the others */
  double critical_hz;     /* of the leaf; far above the range for a limp leaf */
  double loss;
  double bending_n_m;     /* sum over layers that slide on each other */
  double support_m;       /* spacing of its supports: studs or channels */
} model_leaf;

typedef struct model_gap {
  double depth_m;
  double resistivity_pa_s_m2; /* 0 = air */
} model_gap;

enum { MODEL_MAX_GAPS = 8 };

/* A stack from side A to side B: leaf, gaps, [inner leaf, gaps,]* leaf. `inner[i]` stands after gap `inner_after[i]`. */
enum { MODEL_MAX_INNER = 4 };
typedef struct model_wall {
  model_leaf a, b;
  model_gap gap[MODEL_MAX_GAPS]; int gaps;
  model_leaf inner[MODEL_MAX_INNER]; int inner_after[MODEL_MAX_INNER]; int inners;
  /* The connection between the leaves: compliance per metre of line C(f) = c500 (500/f)^p, lines at `line_m`. */
  int bridged;            /* 0 = no connection (double rows) */
  double bridge_c500;     /* m2/N */
  double line_m;
  double double_coupling; /* k_d for double rows, else 0 */
} model_wall;

void model_tl(const model_wall *w, const struct acoustics *k, double tl_db[BANDS]);

#endif
