#include "search/front.h"

void front_init(front *f, arena *a, const space *s) {
  *f = (front){.arena = a, .space = s, .in_force = rules_in_force(s->context->brief)};
  f->floor_value = s->context->brief->floor_area_value_per_m2 > 0;
}

front_member front_exact(const candidate *c) {
  return (front_member){*c, c->is.promised_hundredth, c->broken, c->instead, true};
}

static bool counts(const front *f, int rule) {
  return (f->in_force & rule_bit(rule)) != 0;
}

/* Whether `x` at its worst can stand for `y` at its best everywhere: cheaper, or as dear and
 * earlier in the order of ties, and no worse in any number that a rule in force reads, nor in any
 * rule. */
static bool beats(const front *f, const front_member *x, const front_member *y) {
  const wall_numbers *p = &x->wall.is, *q = &y->wall.is;
  if (p->cost_cents > q->cost_cents) return false;
  if (counts(f, RULE_TARGET) && x->promised_least < q->promised_hundredth) return false;
  if (counts(f, RULE_HEIGHT) && p->height_mm < q->height_mm) return false;
  if (counts(f, RULE_FIRE) && p->fire_min < q->fire_min) return false;
  if (counts(f, RULE_THICKNESS_MAX) && p->thickness_tenth_mm > q->thickness_tenth_mm) return false;
  if (counts(f, RULE_THICKNESS_MIN) && p->thickness_tenth_mm < q->thickness_tenth_mm) return false;
  if (counts(f, RULE_MASS_MAX) && p->mass_hundredth > q->mass_hundredth) return false;
  if (counts(f, RULE_MASS_MIN) && p->mass_hundredth < q->mass_hundredth) return false;
  if (counts(f, RULE_COST_MAX) && f->floor_value && p->total_cents > q->total_cents) return false;
  candidate worst = {.broken = x->broken_most, .instead = x->instead_most};
  if (!candidate_passes_where(&worst, &y->wall)) return false;
  return candidate_compare(f->space, &x->wall, &y->wall) < 0;
}

bool front_beats(front *f, const front_member *m) {
  for (int i = 0; i < f->count; i++) {
    if (!beats(f, &f->item[i], m)) continue;
    /* What beat one wall is apt to beat the next: nearer to the front it is found sooner. */
    int to = i / 2;
    front_member kept = f->item[to];
    f->item[to] = f->item[i];
    f->item[i] = kept;
    return true;
  }
  return false;
}

void front_add(front *f, const front_member *m) {
  int kept = 0;
  for (int i = 0; i < f->count; i++)
    if (!beats(f, m, &f->item[i])) f->item[kept++] = f->item[i];
  f->count = kept;
  if (f->count == f->cap) {
    int cap = f->cap ? 2 * f->cap : 256;
    f->item = arena_grow(f->arena, f->item, (size_t)f->cap * sizeof *f->item,
                         (size_t)cap * sizeof *f->item);
    f->cap = cap;
  }
  f->item[f->count++] = *m;
}
