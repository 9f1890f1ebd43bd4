/* The catalogs: what can be built with, the rows of fire rules and published ratings, the coefficients of the model.
 * Read from a folder with boards.json frames.json fills.json mounts.json fire.json targets.json published.json
 * acoustics.json. Every record carries its source. Indices are positions in the arrays below; they follow file order. */
#ifndef INPUT_CATALOG_H
#define INPUT_CATALOG_H

#include <stdbool.h>
#include <stddef.h>

#include "input/json.h"

enum { CATALOG_NONE = -1, CATALOG_MAX_RECORDS = 1000 };

typedef enum layer_material {
  LAYER_GYPSUM,      /* paper or glass-mat faced board */
  LAYER_CEMENT,      /* cement backer */
  LAYER_WOOD,        /* OSB, plywood */
  LAYER_FIBREBOARD,  /* sound-deadening */
  LAYER_LIMP,        /* mass-loaded vinyl: mass without stiffness */
  LAYER_DAMPING      /* viscoelastic compound between two boards */
} layer_material;

/* What people say for a record ("5/8X", "2x4", "R13"): catalog_find compares such words without blanks, hyphens, case and
 * inch marks. A word may stand with several records: then it is ambiguous. */
typedef struct said_words {
  const char *const *word; /* `count` strings */
  size_t count;
} said_words;

/* A board or membrane. */
typedef struct layer {
  const char *id, *name, *source;
  said_words said;
  layer_material material;
  bool membrane;           /* limp mass or damping: counts as no board */
  double thickness_m, mass_kg_m2;
  double coincidence_m_s;  /* critical frequency x thickness; 0 for membranes */
  double bending_n_m;      /* stiffness per width, from mass, thickness and coincidence; 0 for membranes */
  double loss_factor;      /* own loss of a damped board or layer; 0 = the model's installed loss */
  bool face;               /* may be the room-side face */
  bool face_if_asked;      /* wood panels: only where the brief allows */
  bool backing;            /* OSB, plywood, fibreboard, cement: may stand behind finish boards */
  bool type_x;             /* earns Type X fire credit (Type C too) */
  bool type_c;
  bool regular;            /* plain gypsum board */
  bool abuse, moisture;    /* fit for abuse and wet sides */
  bool noncombustible, frt; /* frt: fire-retardant-treated wood */
  bool shear;              /* may serve as a shear panel */
  bool special;            /* not a stock item */
  bool ordinary;           /* enumerated in ordinary build */
  double max_spacing_m;    /* stud spacing; 0 = any of the catalog's */
  double max_spacing_single_m; /* as a single layer; 0 = as max_spacing_m */
  int min_steel_mil;       /* steel studs must be at least so thick; 0 = any */
} layer;

typedef enum frame_material { FRAME_WOOD, FRAME_STEEL } frame_material;
typedef enum frame_layout { FRAME_SINGLE, FRAME_STAGGERED, FRAME_DOUBLE } frame_layout;

typedef struct frame {
  const char *id, *name, *source;
  said_words said;
  frame_material material;
  frame_layout layout;
  const char *stud;         /* price item of the stud (the single-row frame's id): "steel-92-18", "wood-89" */
  const char *runner;       /* price item of track or plate: "track-92-18", "plate-89", "plate-140" */
  const char *group;        /* framing group; NULL = the material's */
  double stud_depth_m;      /* of one stud: 0.0921 */
  double row_depth_m;       /* of one row: the plate or runner; staggered: the common plate (0.1397) */
  int rows;                 /* 1; double: 2 */
  int mil;                  /* steel; 0 for wood */
  double steel_thickness_m; /* design thickness; 0 for wood */
  double flange_m, stud_width_m;
  double stud_mass_kg_m, runner_mass_kg_m; /* per metre of one stud, of one runner */
  double inertia_m4;        /* gross second moment of one stud */
  double inertia_effective_m4, moment_n_m; /* steel: effective I; allowable moment. Wood: 0 */
  bool section_estimated;   /* these two are estimated from a tabulated neighbour, not tabulated (source says how) */
  double composite_inertia_m4; /* with one board each side full height (limiting-height table); 0 = not tabulated */
  double composite_moment_n_m; /* strength that table shows where it falls short of that stiffness; 0 = it does not */
  double modulus_pa;
  bool loadbearing;         /* may carry load (subject to the rules of checks/structure) */
  bool noncombustible, frt;
  bool special, ordinary;
  double max_height_m, max_height_bearing_m; /* wood: prescriptive limits; 0 = none tabulated */
  double knockout_m;        /* steel: width of the holes for services; 0 for wood */
} frame;

typedef enum fill_material { FILL_GLASS, FILL_STONE, FILL_CELLULOSE } fill_material;

typedef struct fill {
  const char *id, *name, *source;
  said_words said;
  fill_material material;
  double thickness_m, density_kg_m3, mass_kg_m2, resistivity_pa_s_m2;
  bool wood_only;           /* dense-packed cellulose in ordinary build */
  bool special, ordinary;
} fill;

typedef struct mount {
  const char *id, *name, *source;
  said_words said;
  bool clips;               /* isolation clips with furring channel, else resilient channel */
  double depth_m;           /* air it adds behind the leaf (channel 0.013; clip and furring 0.041) */
  double rail_mass_kg_m;    /* channel or furring, per metre */
  double clip_mass_kg;
  double max_leaf_kg_m2;    /* 0 = none stated */
  double clip_capacity_kg;  /* per clip; 0 for channel */
  int clip_spacing_mm;      /* along the row: the default and the most; 0 for channel */
  const char *rail, *clip;  /* price items; clip NULL for channel */
} mount;

/* What a fire row, a published row or a listing asks of one side: layers from the room inwards. */
enum { ROW_MAX_SIDE = 4, ROW_MAX_NEEDS = 64, ROW_MAX_PAIRS = 128 };

/* What one layer must be. Which layers of a wall serve is for the checks to say (fire: Type X for Type X, any plain or better
 * gypsum for gypsum, a wood panel for wood, at least as thick; published ratings: the layer itself or its like). */
typedef enum need_kind { NEED_TYPE_X, NEED_GYPSUM, NEED_WOOD, NEED_LAYER } need_kind;
typedef struct layer_need {
  need_kind kind;
  double thickness_m;       /* least thickness; 0 for NEED_LAYER */
  int layer;                /* catalog index; CATALOG_NONE in a need of a membrane table */
} layer_need;

/* The distinct sides that the rows of a file ask for; a leaf is matched against each once. */
typedef struct side_need {
  int count;
  layer_need item[ROW_MAX_SIDE];
  double minutes;           /* component-additive membranes only: the time the membrane earns */
} side_need;

typedef struct row_side {
  int boards;               /* number of layers */
  const char *board[ROW_MAX_SIDE]; /* layer ids from the room inwards */
  int need;                 /* index among the needs of the file; set by rows_check_ids */
} row_side;

typedef enum row_mount { ROW_MOUNT_NONE, ROW_MOUNT_CHANNEL, ROW_MOUNT_ANY } row_mount;
typedef enum row_fill { ROW_FILL_NONE, ROW_FILL_OPTIONAL, ROW_FILL_REQUIRED } row_fill;
typedef enum fire_code { CODE_NONE, CODE_IBC, CODE_NBC } fire_code;

/* One prescriptive fire row, listing, or published rating. */
typedef struct wall_row {
  const char *id, *name, *source, *note; /* note: "" when none */
  fire_code code;           /* fire rows; CODE_NONE = a listing, which serves under every code */
  frame_material material;
  frame_layout layout;
  double depth_m;           /* stud depth */
  int mil_min, mil_max;     /* steel; 0 = any */
  double spacing_min_m, spacing_max_m; /* published: both count; fire: the maximum */
  double gap_m;             /* between the rows of a double frame; 0 = not stated. Fire: the least */
  row_side side_a, side_b;  /* side_a is the side of the mount */
  int pair;                 /* index of the distinct (need of A, need of B), below ROW_MAX_PAIRS; set by rows_check_ids */
  row_mount mount;
  double mount_spacing_min_m, mount_spacing_max_m; /* 0 = any */
  row_fill fill;
  unsigned fill_kinds;      /* bit per fill_material */
  int filled_rows;          /* rows of the frame that are filled; 0 without fill */
  double fill_kg_m2;        /* least mass of the fill per row at the row's own depth; 0 = any */
  double fill_thickness_m;  /* least thickness where the cavity need not be full; 0 = at least 90 % of the cavity */
  int minutes_bearing, minutes_nonbearing; /* fire; 0 = not assigned */
  int stc;                  /* published rating; 0 = none */
  double stc_sd;            /* 1.0 code table, 1.2 test report */
  const struct wall *tested; /* of a test report: the row stands for this wall only (wall/tested.h); NULL = in general terms */
  const json_value *json;   /* where it was read, for messages while loading */
} wall_row;

/* How far apart a wall and a published one are, in points: what a difference of each kind weighs (docs/methods/evidence.md). */
typedef struct evidence_weights {
  double layer, board, material, layout, mount, mount_kind, mount_side, mount_spacing, spacing, depth, steel, fill, partial_fill,
      fill_row, gap;
  const char *source;
} evidence_weights;

typedef struct target_row {
  const char *id;           /* unique: "ibc-dwelling-corridor" */
  const char *adjacency;    /* "dwelling-corridor": several rows may share it, by code or guideline */
  const char *name, *metric, *source;
  const char *level;        /* "preferred", "grade II"; NULL without */
  fire_code code;           /* CODE_NONE: a guideline, not a code */
  int value;                /* laboratory rating */
  int field_value;          /* 0 = none stated */
  bool composite;           /* scope */
  int fire_minutes;         /* 0 = none stated */
  int fire_minutes_sprinklered;     /* 0 = as fire_minutes */
  int fire_minutes_from_4_storeys;  /* 0 = as fire_minutes */
} target_row;

typedef struct acoustics acoustics; /* acoustics/coefficients: see input/coefficients.h */

/* Which edition of a file was read. */
typedef struct catalog_edition { const char *file; uint32_t crc; } catalog_edition;
enum { CATALOG_FILES = 8 };

typedef struct catalog {
  const char *folder;
  catalog_edition edition[CATALOG_FILES];
  layer *layers;   size_t layer_count;
  frame *frames;   size_t frame_count;
  fill *fills;     size_t fill_count;
  mount *mounts;   size_t mount_count;
  wall_row *fire;  size_t fire_count;
  wall_row *published; size_t published_count;
  target_row *targets; size_t target_count;
  int *spacings_mm; size_t spacing_count;             /* 305 406 610 */
  int *mount_spacings_mm; size_t mount_spacing_count; /* 305 406 610 */
  /* component-additive rule (fire.json "component_additive") */
  double additive_frame_minutes, additive_fill_minutes, additive_max_minutes, additive_max_spacing_m;
  double additive_min_depth_m;
  double additive_fill_kg_m3[FILL_CELLULOSE + 1]; /* least density that earns the fill's minutes, per fill_material */
  const char *additive_source;
  side_need *membranes; size_t membrane_count; /* tabulated membranes with their minutes */
  side_need *fire_needs; size_t fire_need_count;           /* distinct sides of `fire`; at most ROW_MAX_NEEDS */
  side_need *published_needs; size_t published_need_count; /* of `published` */
  int nbc_max_storeys;                         /* the NBC table serves buildings up to so many; 0 = any */
  const char *nbc_scope;                       /* sentence for buildings above, with its source */
  evidence_weights distance;
  const char *caution_light_board, *caution_thin_steel; /* sentences for matches that today's goods may miss */
  const acoustics *acoustics;
} catalog;

/* Reads all files of `folder`. NULL when any has an error. */
catalog *catalog_load(arena *a, diag_list *d, const char *folder);
/* Reads one catalog file of any kind into nothing, to check it. True when sound. */
bool catalog_check_file(arena *a, diag_list *d, const json_value *root);

/* Index by exact id or CATALOG_NONE. */
int catalog_layer(const catalog *c, const char *id);
int catalog_frame(const catalog *c, const char *id);
int catalog_fill(const catalog *c, const char *id);
int catalog_mount(const catalog *c, const char *id);

typedef enum catalog_kind { CATALOG_LAYER, CATALOG_FRAME, CATALOG_FILL, CATALOG_MOUNT, CATALOG_KINDS } catalog_kind;
typedef struct catalog_ref { catalog_kind kind; int index; } catalog_ref;

/* "board", "frame", "fill", "mount" */
extern const char *const catalog_kind_names[CATALOG_KINDS];
/* What `word` may mean: the record of that exact id, else every record whose id or said word it is (compared as said_words
 * tells). Fills at most `max` of `out`, returns how many there are: 0 unknown, above 1 ambiguous. */
size_t catalog_find(const catalog *c, const char *word, catalog_ref *out, size_t max);
const char *catalog_id(const catalog *c, catalog_ref ref);
/* The first row of `targets` for an adjacency under a code, or NULL. */
const target_row *catalog_target(const catalog *c, const char *adjacency, fire_code code);
/* The id nearest to a word among all ids, or NULL. */
const char *catalog_nearest(const catalog *c, const char *word);

#endif
