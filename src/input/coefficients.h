/* The coefficients of the sound model (catalogs/acoustics.json): meaning, unit and bounds in docs/methods/sound.md. */
#ifndef INPUT_COEFFICIENTS_H
#define INPUT_COEFFICIENTS_H

#include "input/json.h"

typedef enum sound_family {
  FAMILY_WOOD, FAMILY_WOOD_MOUNT, FAMILY_WOOD_STAGGERED, FAMILY_WOOD_DOUBLE,
  FAMILY_STEEL, FAMILY_STEEL_HEAVY, FAMILY_STEEL_MOUNT, FAMILY_STEEL_STAGGERED, FAMILY_STEEL_DOUBLE,
  FAMILY_COUNT
} sound_family;

/* "wood", "wood-mount", "wood-staggered", "wood-double", "steel", "steel-heavy", "steel-mount", ... */
extern const char *const sound_family_names[FAMILY_COUNT];

typedef enum sound_metric { METRIC_STC, METRIC_RW, METRIC_RW_C, METRIC_RW_CTR, METRIC_OITC, METRIC_COUNT } sound_metric;

/* "STC", "Rw", "Rw+C", "Rw+Ctr", "OITC" */
extern const char *const sound_metric_names[METRIC_COUNT];

struct acoustics {
  const char *source;
  /* fitted: engineering structure of docs/methods/sound.md */
  double layer_share;         /* lambda: share of a further layer's mass that counts */
  double leaf_loss;           /* eta: installed loss of a leaf */
  double empty_loss;          /* delta: loss of an empty cavity */
  double bay_stiffness;       /* kappa */
  double low_share;           /* rho: low-frequency over bridging share of the compliance */
  double stud_static_hz;      /* f_s: where a stud has its static beam compliance */
  double compliance_fall;     /* p: fall of all compliances with frequency */
  double channel_compliance;  /* C_rc at 500 Hz, studs at 0.406 m, m2/N */
  double channel_on_steel;    /* gamma */
  double plate_compliance;    /* C_st at 500 Hz, m2/N */
  double clip_compliance;     /* at 500 Hz, m2/N: no data, from memory */
  double double_coupling;     /* k_d, N/m3 */
  double bridge_db;           /* kb */
  double ceiling_db;
  /* held fixed */
  double air_density, sound_speed, fill_resistivity, test_area_m2, limit_cos2_max, bay_fade_hz;
  double screw_edge_m;        /* beam formula of a steel stud */
  double steel_modulus_pa, poisson;
  /* uncertainty, in points: per family for STC, factors for other metrics and for walls outside the fitted range */
  double sd[FAMILY_COUNT];
  double bias[FAMILY_COUNT];  /* residual mean, reported, not applied */
  int rows[FAMILY_COUNT];
  double metric_sd_extra[METRIC_COUNT]; /* added in quadrature */
  double outside_sd;          /* added in quadrature once per reason outside the range, see predict */
};

const struct acoustics *coefficients_read(arena *a, diag_list *d, const json_value *root);

#endif
