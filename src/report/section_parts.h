/* What the files that draw a wall section share. */
#ifndef REPORT_SECTION_PARTS_H
#define REPORT_SECTION_PARTS_H

#include "report/section.h"
#include "report/svg.h"
#include "report/view.h"

/* One part of the wall, by its depth from the face of side A. */
typedef struct section_band {
  view_kind kind;
  int record;            /* catalog index; CATALOG_NONE: empty bays, gap */
  int copies;            /* layers of equal board, one on the other */
  int side;              /* whose it is: layers, mounts; of a row and its fill: the row */
  bool leaf;             /* layers at a room: their edge is sealed */
  const char *words;     /* the label */
  const char *thickness; /* "5/8 in"; "" for what takes none */
  double from_m, to_m;
} section_band;

/* How a cut lies on paper. Points of it are (along, deep): `along` the wall in the plan, up from
 * the floor in the cut there; `deep` from the face of side A. */
typedef struct section_place {
  double x, y;  /* of (0, 0) */
  double scale; /* units a metre */
  bool upright; /* along runs up, deep to the right; else along to the right, deep down */
} section_place;

typedef struct section {
  const report *report;
  const wall *wall;
  const catalog *catalog;
  const frame *frame;
  const section_options *options;
  svg svg;
  section_band band[VIEW_MAX_PARTS];
  int count;
  double thickness_m;
  double length_m; /* of wall that the plan shows */
  section_place plan, floor;
  double floor_high_m; /* what the cut at the floor shows */
} section;

/* A stud as the plan cuts it. */
typedef struct section_stud {
  double from_m, to_m; /* along */
  double deep_from_m, deep_to_m;
  int index; /* 0 at the abutting structure, then by spacings */
  int face;  /* staggered: whose leaf it carries; else CATALOG_NONE */
} section_stud;
enum { SECTION_MAX_STUDS = 64 };

/* section_bands.c: the parts in order from A to B, their words and places. */
void section_bands(section *s);
/* The studs of row `row` within the plan. */
int section_studs(const section *s, int row, section_stud out[SECTION_MAX_STUDS]);
/* The nominal spacing in the units of the answer: "16 in", "406 mm". */
const char *section_spacing(const section *s, double metres);
const char *section_length(const section *s, double metres);

/* section_hatch.c: materials. Depths may be given in either order. */
double section_x(const section_place *p, double along_m, double deep_m);
double section_y(const section_place *p, double along_m, double deep_m);
/* Defines the patterns that the drawing of this wall needs. */
void section_patterns(section *s);
void section_box(section *s, const section_place *p, double along0, double along1, double deep0,
                 double deep1, const char *css_class);
void section_segment(section *s, const section_place *p, double along0, double deep0, double along1,
                     double deep1, const char *css_class);
/* Points along, deep. */
void section_outline(section *s, const section_place *p, const double *points, int n,
                     const char *css_class);
void section_layer(section *s, const section_place *p, const layer *l, double along0, double along1,
                   double deep0, double deep1);
/* A run of equal layers. */
void section_layers(section *s, const section_place *p, const section_band *b, double along0,
                    double along1);
/* Fibre that fills along0..along1. */
void section_fibre(section *s, const section_place *p, const section_band *b, double along0,
                   double along1);
/* Wood across the grain. */
void section_wood(section *s, const section_place *p, double along0, double along1, double deep0,
                  double deep1);
void section_sealant(section *s, const section_place *p, const section_band *b);
/* The zigzag line where a drawing ends, across the wall at `along_m`, `beyond` units past it. */
void section_break(section *s, const section_place *p, double along_m, double beyond);
#define SECTION_JOINT_M 0.00635 /* 1/4 in joint filled with sealant: common practice, no source */

/* section_plan.c, section_floor.c: the cuts themselves. */
void section_plan(section *s);
void section_floor(section *s);
/* Middle of the first rail of a mount above the floor. */
double section_first_rail_m(const mount *type);

/* section_labels.c: a column of labels with leaders to what they name. */
enum { SECTION_MAX_LINES = 4 };
typedef struct section_label {
  double x, y; /* what it names: a dot stands there */
  double to_y; /* several equal layers: the dot of the last; else y */
  int dots;
  const char *words;
  const char *aside; /* at the column's far edge: the thickness; "" none */
  const char *line[SECTION_MAX_LINES];
  int lines;
} section_label;

typedef struct section_column {
  section_label label[VIEW_MAX_PARTS];
  int count;
  double x, width; /* of the words; they begin at x, or end there when `left` */
  double aside_x;  /* where `aside` ends */
  double knee_x;   /* leaders are level up to here */
  bool left;       /* the column stands left of what it names */
} section_column;

void section_label_add(section_column *c, section_label label);
/* Breaks the words into lines and sorts by height; the least height of the column. */
double section_column_height(section *s, section_column *c);
void section_column_put(section *s, section_column *c, double first, double last);
/* The labels of the parts, in order, with their places in the plan. */
void section_plan_labels(section *s, section_column *c);
void section_floor_labels(section *s, section_column *left, section_column *right);

/* section_legend.c: the materials of this drawing, one a line. Its height. */
double section_legend_height(section *s);
void section_legend_put(section *s, double x, double y);

#endif
