#include "search/front.h"

enum { FIRST_GROUPS = 16, FIRST_MEMBERS = 16 };

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

/* Whether `x` at its worst is no worse than `y` at its best in any number that a rule in force
 * reads, and cheaper, or as dear and earlier in the order of ties. The rules are the group's. */
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
  return candidate_compare(f->space, &x->wall, &y->wall) < 0;
}

static bool group_beats(const front *f, front_group *g, const front_member *m) {
  for (int i = 0; i < g->count; i++) {
    if (!beats(f, &g->item[i], m)) continue;
    /* What beat one wall is apt to beat the next: nearer to the start it is found sooner. */
    int to = i / 2;
    front_member kept = g->item[to];
    g->item[to] = g->item[i];
    g->item[i] = kept;
    return true;
  }
  return false;
}

bool front_beats(front *f, const front_member *m) {
  for (int i = 0; i < f->groups; i++) {
    front_group *g = &f->group[i];
    candidate worst = {.broken = g->broken, .instead = g->instead};
    if (candidate_passes_where(&worst, &m->wall) && group_beats(f, g, m)) return true;
  }
  return false;
}

static front_group *group_of(front *f, rule_mask broken, rule_mask instead) {
  for (int i = 0; i < f->groups; i++)
    if (f->group[i].broken == broken && f->group[i].instead == instead) return &f->group[i];
  if (f->groups == f->group_cap) {
    int cap = f->group_cap ? 2 * f->group_cap : FIRST_GROUPS;
    f->group = arena_grow(f->arena, f->group, (size_t)f->group_cap * sizeof *f->group,
                          (size_t)cap * sizeof *f->group);
    f->group_cap = cap;
  }
  f->group[f->groups] = (front_group){.broken = broken, .instead = instead};
  return &f->group[f->groups++];
}

/* Drops what `m` beats among the members that break the same rules, where most of it is. */
static void drop_beaten(front *f, front_group *g, const front_member *m) {
  int kept = 0;
  for (int i = 0; i < g->count; i++) {
    const front_member *y = &g->item[i];
    candidate worst = {.broken = m->broken_most, .instead = m->instead_most};
    bool beaten = candidate_passes_where(&worst, &y->wall) && beats(f, m, y);
    if (!beaten) g->item[kept++] = *y;
  }
  f->count -= g->count - kept;
  g->count = kept;
}

void front_add(front *f, const front_member *m) {
  front_group *g = group_of(f, m->broken_most, m->instead_most);
  drop_beaten(f, g, m);
  if (g->count == g->cap) {
    int cap = g->cap ? 2 * g->cap : FIRST_MEMBERS;
    g->item = arena_grow(f->arena, g->item, (size_t)g->cap * sizeof *g->item,
                         (size_t)cap * sizeof *g->item);
    g->cap = cap;
  }
  g->item[g->count++] = *m;
  f->count++;
}
