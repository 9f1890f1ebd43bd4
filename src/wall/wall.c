#include "wall/wall.h"

#include "base/units.h"

wall wall_empty(void) {
  wall w = {.frame = CATALOG_NONE, .fill = {CATALOG_NONE, CATALOG_NONE}};
  for (int s = 0; s < 2; s++) w.mount[s].mount = CATALOG_NONE;
  return w;
}

double wall_spacing_m(int nominal_mm) {
  /* Metric names of spacings that are laid out in inches. */
  static const struct {
    int nominal_mm;
    double inches;
  } inch_goods[] = {{305, 12}, {406, 16}, {610, 24}, {813, 32}, {1219, 48}};
  for (size_t i = 0; i < sizeof inch_goods / sizeof inch_goods[0]; i++) {
    if (inch_goods[i].nominal_mm == nominal_mm) return inch_goods[i].inches * UNITS_M_PER_IN;
  }
  return nominal_mm * 1e-3;
}

double face_thickness_m(const catalog *c, const face *f) {
  double sum = 0;
  for (int i = 0; i < f->count; i++) sum += c->layers[f->layer[i]].thickness_m;
  return sum;
}

double face_mass_kg_m2(const catalog *c, const face *f) {
  double sum = 0;
  for (int i = 0; i < f->count; i++) sum += c->layers[f->layer[i]].mass_kg_m2;
  return sum;
}

int face_boards(const catalog *c, const face *f) {
  int boards = 0;
  for (int i = 0; i < f->count; i++) boards += c->layers[f->layer[i]].membrane ? 0 : 1;
  return boards;
}

bool wall_is_double(const catalog *c, const wall *w) {
  return c->frames[w->frame].layout == FRAME_DOUBLE;
}

bool wall_is_mounted(const wall *w) {
  return w->mount[SIDE_A].mount != CATALOG_NONE || w->mount[SIDE_B].mount != CATALOG_NONE;
}

double wall_cavity_m(const catalog *c, const wall *w) {
  return c->frames[w->frame].row_depth_m;
}

double wall_thickness_m(const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  double sum = f->row_depth_m * f->rows;
  if (f->layout == FRAME_DOUBLE) sum += w->gap_mm * 1e-3; /* inner faces stand in the gap */
  for (int s = 0; s < 2; s++) {
    sum += face_thickness_m(c, &w->side[s]) + face_thickness_m(c, &w->sheath[s]);
    if (w->mount[s].mount != CATALOG_NONE) sum += c->mounts[w->mount[s].mount].depth_m;
  }
  return sum;
}

static double mount_mass_kg_m2(const catalog *c, const wall_mount *m) {
  if (m->mount == CATALOG_NONE) return 0;
  const mount *type = &c->mounts[m->mount];
  double row_m = wall_spacing_m(m->spacing_mm);
  double mass = type->rail_mass_kg_m / row_m;
  if (type->clips) mass += type->clip_mass_kg / (row_m * wall_spacing_m(m->clip_spacing_mm));
  return mass;
}

double wall_mass_kg_m2(const catalog *c, const wall *w, double height_m) {
  const frame *f = &c->frames[w->frame];
  /* Staggered studs: the spacing is that of each face, so two studs a spacing. */
  int studs = f->layout == FRAME_STAGGERED ? 2 : f->rows;
  double mass = studs * f->stud_mass_kg_m / wall_spacing_m(w->spacing_mm);
  mass += f->rows * 2 * f->runner_mass_kg_m / height_m; /* one at the floor, one at the head */
  for (int r = 0; r < f->rows; r++) {
    if (w->fill[r] != CATALOG_NONE) mass += c->fills[w->fill[r]].mass_kg_m2;
  }
  for (int s = 0; s < 2; s++) {
    mass += face_mass_kg_m2(c, &w->side[s]) + face_mass_kg_m2(c, &w->sheath[s]) +
            face_mass_kg_m2(c, &w->inner[s]);
    mass += mount_mass_kg_m2(c, &w->mount[s]);
  }
  return mass;
}

static void swap_faces(face pair[2]) {
  face kept = pair[0];
  pair[0] = pair[1];
  pair[1] = kept;
}

wall wall_mirrored(const catalog *c, const wall *w) {
  wall m = *w;
  swap_faces(m.side);
  swap_faces(m.sheath);
  swap_faces(m.inner);
  m.mount[SIDE_A] = w->mount[SIDE_B];
  m.mount[SIDE_B] = w->mount[SIDE_A];
  if (wall_is_double(c, w)) {
    m.fill[0] = w->fill[1];
    m.fill[1] = w->fill[0];
  }
  return m;
}

wall wall_short_circuited(const wall *w) {
  wall s = *w;
  for (int side = 0; side < 2; side++) {
    face *leaf = &s.side[side];
    for (int i = 0; i < w->sheath[side].count && leaf->count < WALL_MAX_LAYERS; i++) {
      leaf->layer[leaf->count++] = w->sheath[side].layer[i];
    }
    s.sheath[side] = (face){.count = 0};
    s.mount[side] = (wall_mount){.mount = CATALOG_NONE};
  }
  return s;
}

static bool same_face(const face *a, const face *b) {
  if (a->count != b->count) return false;
  for (int i = 0; i < a->count; i++) {
    if (a->layer[i] != b->layer[i]) return false;
  }
  return true;
}

static bool same_mount(const wall_mount *a, const wall_mount *b) {
  if (a->mount != b->mount) return false;
  return a->mount == CATALOG_NONE ||
         (a->spacing_mm == b->spacing_mm && a->clip_spacing_mm == b->clip_spacing_mm);
}

bool wall_same_core(const wall *a, const wall *b) {
  if (a->frame != b->frame || a->spacing_mm != b->spacing_mm || a->gap_mm != b->gap_mm)
    return false;
  for (int s = 0; s < 2; s++) {
    if (a->fill[s] != b->fill[s] || !same_mount(&a->mount[s], &b->mount[s])) return false;
    if (!same_face(&a->sheath[s], &b->sheath[s]) || !same_face(&a->inner[s], &b->inner[s]))
      return false;
  }
  return true;
}

bool wall_same(const wall *a, const wall *b) {
  return wall_same_core(a, b) && same_face(&a->side[SIDE_A], &b->side[SIDE_A]) &&
         same_face(&a->side[SIDE_B], &b->side[SIDE_B]);
}
