/* The brief: what one wall must do (brief/1). SI inside. */
#ifndef INPUT_JOB_H
#define INPUT_JOB_H

#include <stdbool.h>
#include <stdint.h>

#include "base/bands.h"
#include "base/units.h"
#include "input/catalog.h"
#include "input/coefficients.h"

/* Guards against slips: length and height of a wall in metres; corners, tees, free ends, doors. */
enum { JOB_LENGTH_MAX_M = 1000, JOB_HEIGHT_MAX_M = 30, JOB_COUNT_MAX = 1000 };
enum { BRIEF_MAX_TARGETS = 5, BRIEF_MAX_OPENINGS = 16, BRIEF_MAX_PATTERNS = 64 };

typedef enum basis { BASIS_LAB, BASIS_FIELD } basis;
typedef enum evidence_wanted { EVIDENCE_ANY, EVIDENCE_PUBLISHED } evidence_wanted;
typedef enum fastening { FASTENING_NONE, FASTENING_LIGHT, FASTENING_HEAVY } fastening;
typedef enum noncombustible {
  NONCOMBUSTIBLE_NO,
  NONCOMBUSTIBLE_STRICT,
  NONCOMBUSTIBLE_FRT_OK
} noncombustible;
typedef enum wall_top { TOP_DECK, TOP_CEILING } wall_top;
typedef enum wall_head { HEAD_RIGID, HEAD_SLIP } wall_head;
/* How sheets are hung, for the takeoff: not said (a share is lost), upright, or lying in courses. */
typedef enum board_layout { BOARDS_LUMP, BOARDS_VERTICAL, BOARDS_HORIZONTAL } board_layout;
typedef enum build { BUILD_ORDINARY, BUILD_ANY } build;

typedef struct target {
  sound_metric metric;
  double value;
  basis basis;
  double confidence; /* default 0.8 */
  evidence_wanted evidence;
  bool composite; /* scope */
  bool scope_given;
  double margin; /* points added by hand */
} target;

typedef struct limit {
  bool has_min, has_max;
  double min, max;
} limit;

typedef struct room_side {
  const char *room;
  fastening fastening;
  double fastening_length_m; /* 0 = the whole side */
  double room_depth_m;       /* away from the wall; 0 = not said */
  bool wet, abuse;
  int finish_level; /* 0..5, default 4 */
} room_side;

/* What the studs of another wall offer to fixtures and this one must not fall short of (trim); a
 * brief/1 file has no key for it. */
typedef struct stud_floor {
  int mil;       /* steel studs at least so thick; 0 = any */
  bool fixtures; /* cabinets and grab bars may be screwed to them, where no mount is between */
} stud_floor;

/* A door or window: its rating, or its transmission loss per band. */
typedef struct opening {
  const char *kind; /* "" when not said */
  double area_m2;
  bool has_bands;
  double stc;
  double tl_db[BANDS];
} opening;

typedef struct brief {
  const char *file; /* NULL for the default brief */
  uint32_t crc;     /* CRC-32 of its bytes */
  const char *title;
  units_system units;
  fire_code code;
  int storeys;
  bool storeys_given, sprinklered;
  double length_m, height_m; /* default 3.0 x 2.7 in a brief; 10 x 3 when rating without one */
  double ceiling_m[2];       /* 0 = none: boards to the deck */
  int corners, tees, free_ends, doors; /* for the takeoff of studs; -1 = not said */
  wall_top top;
  double ceiling_class; /* attenuation class of the ceilings; 0 = not said */
  bool ceiling_batts;   /* laid on the ceilings along the wall */
  wall_head head;
  board_layout boards;
  target targets[BRIEF_MAX_TARGETS];
  int target_count;
  limit thickness_m, mass_kg_m2, cost_per_m2;
  bool thickness_exact; /* the greatest thickness is another wall's own: nothing beyond it passes */
  int fire_min; /* minutes, 0 = none asked */
  bool loadbearing;
  int floors_above; /* floors_above -1 = not said */
  noncombustible noncombustible;
  int shear_side;    /* CATALOG_NONE, SIDE_A, SIDE_B */
  double lateral_pa; /* default 240 */
  double deflection; /* span over this: default 240 */
  room_side side[2];
  stud_floor studs;
  double riser_m, run_m; /* clear pipe in the stud depth; through holes */
  double boxes_per_10m;
  bool boxes_given;
  opening openings[BRIEF_MAX_OPENINGS];
  int opening_count;
  double field_mean, field_sd; /* default 5, 2 */
  double floor_area_value_per_m2;
  build build;
  const char *only[BRIEF_MAX_PATTERNS];
  int only_count;
  const char *without[BRIEF_MAX_PATTERNS];
  int without_count;
  const char *prices; /* path, resolved beside the brief; NULL = the default book */
  const char *listings[16];
  int listing_count;
  const char *reports[16];
  int report_count;
} brief;

/* A target from which on a wall has to run to the deck: common practice, no source. */
#define JOB_DECK_FROM 45.0
/* Whether the brief asks what a wall that stops at the ceiling cannot be trusted with: a fire rating,
 * or a target of JOB_DECK_FROM or more. It does not depend on the wall. */
bool job_needs_deck(const brief *b);

/* The defaults: 3.0 x 2.7 m, no target, ordinary build. */
void job_defaults(brief *b);
/* What of the brief does not fit the size of its wall: a static sentence; NULL when all does. Of a
 * brief as read nothing does not. */
const char *job_misfit(const brief *b);
/* A kind of opening that may be named without a rating. */
typedef struct opening_kind {
  const char *kind;
  double stc;
  const char *source;
} opening_kind;
extern const opening_kind job_opening_kinds[];
extern const int job_opening_kind_count;

/* Reads brief/1 from parsed JSON (docs/formats/brief.md). Without a catalog (NULL) patterns are not
 * checked. `target_required` false for trim and rate. Patterns of only/without are checked against
 * the catalog's ids: one that matches nothing is a warning with the nearest id. */
bool job_read(arena *a, diag_list *d, const catalog *c, const json_value *root,
              bool target_required, brief *out);

#endif
