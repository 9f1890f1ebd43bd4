#include "explain/cloud.h"

#include <stdlib.h>

#include "wall/line.h"

double cloud_rating(const brief *b, int promised_hundredth) {
  double asked = b->target_count == 1 ? b->targets[0].value : 0;
  return asked + promised_hundredth / 100.0;
}

/* ---- the sample ---- */

static long long count_walls(const sweep_result *r) {
  long long walls = 0;
  for (const feasible_block *b = r->feasible; b; b = b->next) walls += b->count;
  return walls;
}

/* Rates one wall by the reference. False when that finds that the wall keeps not all targets. */
static bool point_of(const space *s, const feasible_wall *f, cloud_point *out) {
  const judge_context *x = s->context;
  wall w = space_wall(s, f->core, f->face_a, f->face_b);
  prediction p;
  predict_wall(x->catalog, &w, &p);
  judge_sound sound = judge_targets(x, &p, evidence_match(x->catalog, &w), NULL);
  if (sound.broken != 0) return false;
  double thickness_m = wall_thickness_m(x->catalog, &w);
  cost_parts core = cost_core(x->prices, x->catalog, x->brief, &w);
  cost_parts leaves = cost_leaves(x->prices, x->catalog, x->brief, &w);
  cost_total cost = cost_sum(x->prices, x->brief, thickness_m, core, leaves);
  *out = (cloud_point){.rating = cloud_rating(x->brief, sound.promised_hundredth),
                       .cost_cents = cost.total_cents + cost.floor_value_cents,
                       .thickness_m = thickness_m};
  return true;
}

/* The middle of each of `most` equal stretches of the list. */
static void take_sample(const space *s, const sweep_result *r, int most, cloud *out) {
  long long shares = out->walls < most ? out->walls : most, passed = 0;
  int share = 0;
  for (const feasible_block *b = r->feasible; b; b = b->next) {
    for (; share < shares; share++) {
      long long at = (2 * share + 1) * out->walls / (2 * shares) - passed;
      if (at >= b->count) break;
      if (point_of(s, &b->wall[at], &out->point[out->count])) out->count++;
    }
    passed += b->count;
  }
}

/* ---- the edge ---- */

/* Highest promise first; of equals the cheapest. */
static int by_rating(const void *one, const void *other) {
  const candidate *x = *(const candidate *const *)one, *y = *(const candidate *const *)other;
  if (x->is.promised_hundredth != y->is.promised_hundredth)
    return x->is.promised_hundredth > y->is.promised_hundredth ? -1 : 1;
  if (x->is.cost_cents != y->is.cost_cents) return x->is.cost_cents < y->is.cost_cents ? -1 : 1;
  return x < y ? -1 : x > y; /* the frontier's own order: ties as everywhere */
}

static cloud_point edge_point(arena *a, const space *s, const candidate *c) {
  const judge_context *x = s->context;
  wall w = space_wall(s, c->core, c->face_a, c->face_b);
  return (cloud_point){.rating = cloud_rating(x->brief, c->is.promised_hundredth),
                       .cost_cents = c->is.cost_cents,
                       .thickness_m = wall_thickness_m(x->catalog, &w),
                       .line = line_print(a, x->catalog, &w)};
}

/* The frontier holds, for whatever a wall promises, one that promises no less and costs no more. */
static void take_edge(arena *a, const space *s, const sweep_result *r, cloud *out) {
  const candidate **kept = arena_array(a, (size_t)r->frontier_count, sizeof *kept);
  int count = 0;
  for (int i = 0; i < r->frontier_count; i++)
    if (r->frontier[i].broken == 0) kept[count++] = &r->frontier[i];
  qsort(kept, (size_t)count, sizeof *kept, by_rating);
  int left = 0;
  for (int i = 0; i < count; i++) {
    if (left > 0 && kept[i]->is.cost_cents >= kept[left - 1]->is.cost_cents) continue;
    kept[left++] = kept[i];
  }
  out->edge = arena_array(a, (size_t)left, sizeof *out->edge);
  out->edge_count = left;
  for (int i = 0; i < left; i++) out->edge[left - 1 - i] = edge_point(a, s, kept[i]);
}

void cloud_sample(arena *a, const space *s, const sweep_result *r, int most, cloud *out) {
  *out = (cloud){.walls = count_walls(r)};
  out->point = arena_array(a, (size_t)most, sizeof *out->point);
  take_sample(s, r, most, out);
  take_edge(a, s, r, out);
}
