/* The coefficients of the sound model (catalogs/acoustics.json): meaning, unit and bounds in
 * docs/methods/sound.md. */
#ifndef INPUT_COEFFICIENTS_H
#define INPUT_COEFFICIENTS_H

#include "input/json.h"

typedef enum sound_family {
  FAMILY_WOOD,
  FAMILY_WOOD_MOUNT,
  FAMILY_WOOD_STAGGERED,
  FAMILY_WOOD_DOUBLE,
  FAMILY_STEEL,
  FAMILY_STEEL_HEAVY,
  FAMILY_STEEL_MOUNT,
  FAMILY_STEEL_STAGGERED,
  FAMILY_STEEL_DOUBLE,
  FAMILY_COUNT
} sound_family;

/* "wood", "wood-mount", "wood-staggered", "wood-double", "steel", "steel-heavy", "steel-mount"...
 */
extern const char *const sound_family_names[FAMILY_COUNT + 1]; /* NULL-ended */

typedef enum sound_metric {
  METRIC_STC,
  METRIC_RW,
  METRIC_RW_C,
  METRIC_RW_CTR,
  METRIC_OITC,
  METRIC_COUNT
} sound_metric;

/* "STC", "Rw", "Rw+C", "Rw+Ctr", "OITC" */
extern const char *const sound_metric_names[METRIC_COUNT + 1]; /* NULL-ended */

/* Why a wall lies outside the range of the fit; each widens its sd by an amount of its own. */
typedef enum sound_outside {
  OUTSIDE_GAUGE,       /* steel between 18 and 54 mil, or heavier */
  OUTSIDE_DEPTH,       /* stud depth that no fitted wall of the material has */
  OUTSIDE_SPACING,     /* studs other than 406 or 610 mm */
  OUTSIDE_CLIP,        /* isolation clips */
  OUTSIDE_DAMPED,      /* damped boards or layers */
  OUTSIDE_LIMP,        /* limp mass */
  OUTSIDE_LAYERS,      /* three boards or more a side */
  OUTSIDE_BOARD,       /* boards other than gypsum of 12.7 and 15.9 mm */
  OUTSIDE_PART_FILL,   /* fill below 90 % of the depth */
  OUTSIDE_LIGHT_MOUNT, /* a mount on light steel */
  OUTSIDE_TRAPPED,     /* a board under a mount or on an inner face */
  OUTSIDE_ROWS,        /* staggered steel, double light steel, other gaps */
  OUTSIDE_COUNT
} sound_outside;

/* Ids in acoustics.json: "gauge", "depth"... and the sentence that an answer prints. */
extern const char *const sound_outside_names[OUTSIDE_COUNT + 1];

struct acoustics {
  const char *source;
  double layer_share;     /* lambda: share of a further layer's mass that counts */
  double leaf_loss;       /* eta: installed loss factor of a leaf */
  double fill_loss;       /* added to it where fibre fills the cavity */
  double empty_loss;      /* delta: loss of an empty cavity at 500 Hz */
  double empty_loss_fall; /* it falls as f to the power of minus this */
  double spring_loss;     /* loss factor of the low-frequency spring */
  double bay_stiffness;   /* kappa: 97 simply supported, 500 clamped */
  double low_share;       /* rho: low-frequency over bridging share of a connection's compliance */
  double gauge_fall;      /* compliance falls as thickness to minus this, from light to middle gauge */
  double gauge_light_m, gauge_middle_m, gauge_heavy_m; /* design thickness of 18, 33 and 54 mil */
  double stud_static_hz;  /* f_s: where a steel stud has its static beam compliance */
  double compliance_fall; /* p: compliance falls as f^-p */
  double channel_compliance;  /* C_rc at 500 Hz, studs at 0.406 m, m2/N */
  double channel_on_steel;    /* gamma */
  double fastener_compliance; /* of screws and line contact of board and stud, wood or steel, at 500
                                 Hz, m2/N */
  double plate_compliance;    /* C_st of staggered studs on one plate at 500 Hz, m2/N */
  double clip_compliance;     /* over channel_compliance: no data */
  double double_coupling;     /* k_d, N/m3 */
  double bridge_db;           /* kb */
  double ceiling_db;          /* laboratory flanking */
  double air_density, sound_speed, fill_resistivity, test_area_m2, limit_cos2_max, bay_fade_hz;
  double screw_edge_m, steel_modulus_pa, poisson;
  double sd[FAMILY_COUNT];   /* of rating - (exact - 0.5), cross-validated and shrunk */
  double bias[FAMILY_COUNT]; /* mean residual: reported, not applied */
  int rows[FAMILY_COUNT];
  double metric_extra_sd[METRIC_COUNT]; /* added in quadrature to the family's */
  double outside_sd[OUTSIDE_COUNT];     /* added in quadrature, one a reason */
};

/* The place of one coefficient: its id in the file and its offset in struct acoustics. */
typedef struct coefficient_slot {
  const char *id;
  size_t offset;
} coefficient_slot;
extern const coefficient_slot coefficient_slots[];
extern const size_t coefficient_slot_count;

/* NULL and diagnostics when anything is missing, unknown, twice there, or out of its stated bounds.
 */
const struct acoustics *coefficients_read(arena *a, diag_list *d, const json_value *root);

#endif
