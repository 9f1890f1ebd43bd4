#include "explain/ceiling.h"

#include <math.h>

ceiling_path ceiling_path_of(const brief *b) {
  ceiling_path p = {.there = b->top == TOP_CEILING};
  if (!p.there) return p;
  p.assumed = !(b->ceiling_class > 0);
  p.tile_class = p.assumed ? CEILING_CLASS_MINERAL_TILE : b->ceiling_class;
  p.class_all = p.tile_class + (b->ceiling_batts ? CEILING_BATTS_ADD : 0);
  return p;
}

double ceiling_capped(const ceiling_path *p, double wall_rating) {
  return -10 * log10(pow(10, -wall_rating / 10) + pow(10, -p->class_all / 10));
}
