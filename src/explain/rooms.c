#include "explain/rooms.h"

#include <math.h>

double rooms_step(double depth_m) {
  return 10 * log10(0.32 * depth_m);
}

room_rating rooms_rating(const brief *b, const assessment *x) {
  room_rating r = {.there = false};
  for (int i = 0; i < b->target_count; i++)
    r.there = r.there || b->targets[i].basis == BASIS_FIELD;
  r.astc = (x->has_composite ? x->composite.stc : x->ratings.stc) - b->field_mean;
  for (int s = 0; s < 2; s++) {
    r.has_nnic[s] = b->side[s].room_depth_m > 0;
    r.there = r.there || r.has_nnic[s];
    if (r.has_nnic[s]) r.nnic[s] = r.astc + rooms_step(b->side[s].room_depth_m);
  }
  return r;
}
