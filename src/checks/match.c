#include "checks/match.h"

/* A mass that the goods meet to the figure printed on them counts as met (2.85 for 2.8 scaled
 * by 92.1/92.1 and the like). */
#define MASS_SLACK 0.995

void match_add(match_list *list, match_entry e, bool (*better)(int value, int old)) {
  for (int i = 0; i < list->count; i++) {
    match_entry *old = &list->entry[i];
    if (old->need[0] != e.need[0] || old->need[1] != e.need[1]) continue;
    if (better(e.value, old->value)) *old = e;
    return;
  }
  if (list->count < MATCH_MAX_ENTRIES)
    list->entry[list->count++] = e; /* pairs are numbered, so there is always room */
}

bool match_filled(const catalog *c, const wall *w, const wall_row *row, int r) {
  if (w->fill[r] == CATALOG_NONE) return false;
  const fill *f = &c->fills[w->fill[r]];
  if (!(row->fill_kinds & (1u << f->material))) return false;
  double cavity = wall_cavity_m(c, w);
  double full = row->fill_thickness_m > 0 ? row->fill_thickness_m : cavity;
  if (f->thickness_m < MATCH_FULL * full) return false;
  /* The mass is that of a full cavity of the row's own depth; a deeper one needs as much per depth.
   */
  double depth_ratio = cavity > row->depth_m ? cavity / row->depth_m : 1;
  return f->mass_kg_m2 >= row->fill_kg_m2 * depth_ratio * MASS_SLACK;
}

int match_filled_rows(const catalog *c, const wall *w, const wall_row *row) {
  int filled = 0;
  for (int r = 0; r < c->frames[w->frame].rows; r++) filled += match_filled(c, w, row, r) ? 1 : 0;
  return filled;
}

int match_rows_with_fill(const catalog *c, const wall *w) {
  int filled = 0;
  for (int r = 0; r < c->frames[w->frame].rows; r++) filled += w->fill[r] != CATALOG_NONE ? 1 : 0;
  return filled;
}

bool match_channel(const catalog *c, const wall *w, int side) {
  int index = w->mount[side].mount;
  return index != CATALOG_NONE && !c->mounts[index].clips &&
         w->mount[1 - side].mount == CATALOG_NONE;
}

int match_mounted_side(const wall *w) {
  if (w->mount[SIDE_A].mount != CATALOG_NONE) return SIDE_A;
  return w->mount[SIDE_B].mount != CATALOG_NONE ? SIDE_B : CATALOG_NONE;
}
