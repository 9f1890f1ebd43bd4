/* A wall: what is between two rooms, by catalog index. Side A is 0, side B is 1. */
#ifndef WALL_WALL_H
#define WALL_WALL_H

#include <stdbool.h>

#include "input/catalog.h"

enum { WALL_MAX_LAYERS = 6, SIDE_A = 0, SIDE_B = 1 };

/* Boards and membranes of a leaf, from its own room inwards. */
typedef struct face {
  int count;
  int layer[WALL_MAX_LAYERS];
} face;

typedef struct wall_mount {
  int mount; /* CATALOG_NONE without */
  int spacing_mm;
  int clip_spacing_mm; /* clips: along the row, default 1219; 0 for channel */
} wall_mount;

typedef struct wall {
  face side[2];   /* the leaf at the room */
  face sheath[2]; /* on the stud, under a mount */
  face inner[2];  /* on the inner face of a row of a double frame */
  int frame;
  int spacing_mm; /* nominal: 305 406 610 */
  int gap_mm;     /* between the rows of a double frame, else 0 */
  int fill[2]; /* per row, A's first; CATALOG_NONE = empty. Single and staggered frames use [0] only
                */
  wall_mount mount[2];
} wall;

/* An empty wall: no layers, no fills, no mounts. */
wall wall_empty(void);
/* Metres for a nominal spacing: 305 -> 0.3048, 406 -> 0.4064, 610 -> 0.6096 (inch goods are exact).
 */
double wall_spacing_m(int nominal_mm);
double wall_thickness_m(const catalog *c, const wall *w);
/* Depth of one row's cavity (stud depth, or common plate). */
double wall_cavity_m(const catalog *c, const wall *w);
/* Boards, frame (studs at their spacing, runners for `height_m`), fills and mounts. */
double wall_mass_kg_m2(const catalog *c, const wall *w, double height_m);
double face_thickness_m(const catalog *c, const face *f);
double face_mass_kg_m2(const catalog *c, const face *f);
/* Layers that are boards, not membranes. */
int face_boards(const catalog *c, const face *f);
bool wall_is_double(const catalog *c, const wall *w);
bool wall_is_mounted(const wall *w);
/* The wall seen from the other room. */
wall wall_mirrored(const catalog *c, const wall *w);
/* The wall without its mounts: leaf screwed to the stud (a mounted leaf with a sheath keeps both).
 */
wall wall_short_circuited(const wall *w);
bool wall_same(const wall *a, const wall *b);
/* The same but for the leaves at the rooms. */
bool wall_same_core(const wall *a, const wall *b);

#endif
