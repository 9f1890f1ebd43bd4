#include "search/front.h"

#include <limits.h>

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

/* ---- keys: a quick no ---- */

enum { KEY_COST, KEY_PROMISED }; /* the rest follows in the order of key_of */

static int clipped(long long x) {
  return x < INT_MAX ? (int)x : INT_MAX;
}

static front_key key_of(const front *f, const front_member *m, int promised) {
  const wall_numbers *n = &m->wall.is;
  front_key k = {{clipped(n->cost_cents)}};
  if (counts(f, RULE_TARGET)) k.v[KEY_PROMISED] = promised > INT_MIN ? -promised : INT_MAX;
  if (counts(f, RULE_HEIGHT)) k.v[2] = -n->height_mm;
  if (counts(f, RULE_FIRE)) k.v[3] = -n->fire_min;
  if (counts(f, RULE_THICKNESS_MAX)) k.v[4] = n->thickness_tenth_mm;
  if (counts(f, RULE_THICKNESS_MIN)) k.v[5] = -n->thickness_tenth_mm;
  if (counts(f, RULE_MASS_MAX)) k.v[6] = n->mass_hundredth;
  if (counts(f, RULE_MASS_MIN)) k.v[7] = -n->mass_hundredth;
  return k;
}

static bool worse_nowhere(const front_key *x, const front_key *y) {
  int worse = 0;
  for (int i = 0; i < FRONT_COORDINATES; i++) worse |= x->v[i] > y->v[i];
  return !worse;
}

/* ---- members ---- */

/* Swaps a member nearer to the start: what beat one wall is apt to beat the next, and is found
 * sooner there. */
static void move_up(front_group *g, int from) {
  int to = from / 2;
  front_member kept = g->item[to];
  front_key key = g->key[to];
  g->item[to] = g->item[from];
  g->key[to] = g->key[from];
  g->item[from] = kept;
  g->key[from] = key;
}

static bool group_beats(const front *f, front_group *g, const front_member *m,
                        const front_key *key) {
  for (int i = 0; i < g->count; i++) {
    if (!worse_nowhere(&g->key[i], key) || !beats(f, &g->item[i], m)) continue;
    if (i > 0) move_up(g, i);
    return true;
  }
  return false;
}

bool front_beats(front *f, const front_member *m) {
  front_key key = key_of(f, m, m->wall.is.promised_hundredth);
  for (int i = 0; i < f->groups; i++) {
    front_group *g = &f->group[i];
    if (!worse_nowhere(&g->least, &key)) continue;
    candidate worst = {.broken = g->broken, .instead = g->instead};
    if (candidate_passes_where(&worst, &m->wall) && group_beats(f, g, m, &key)) return true;
  }
  return false;
}

static front_group *group_of(front *f, const front_member *m, const front_key *key) {
  for (int i = 0; i < f->groups; i++)
    if (f->group[i].broken == m->broken_most && f->group[i].instead == m->instead_most)
      return &f->group[i];
  if (f->groups == f->group_cap) {
    int cap = f->group_cap ? 2 * f->group_cap : FIRST_GROUPS;
    f->group = arena_grow(f->arena, f->group, (size_t)f->group_cap * sizeof *f->group,
                          (size_t)cap * sizeof *f->group);
    f->group_cap = cap;
  }
  f->group[f->groups] =
      (front_group){.broken = m->broken_most, .instead = m->instead_most, .least = *key};
  return &f->group[f->groups++];
}

/* Drops what `m` beats among the members that break the same rules, where most of it is. */
static void drop_beaten(front *f, front_group *g, const front_member *m, front_key key) {
  int kept = 0;
  candidate worst = {.broken = m->broken_most, .instead = m->instead_most};
  key.v[KEY_PROMISED] = INT_MIN; /* the members' keys hold what they promise at least */
  for (int i = 0; i < g->count; i++) {
    const front_member *y = &g->item[i];
    if (worse_nowhere(&key, &g->key[i]) && candidate_passes_where(&worst, &y->wall) &&
        beats(f, m, y))
      continue;
    if (kept != i) {
      g->item[kept] = *y;
      g->key[kept] = g->key[i];
    }
    kept++;
  }
  f->count -= g->count - kept;
  g->count = kept;
}

void front_add(front *f, const front_member *m) {
  front_key key = key_of(f, m, m->promised_least);
  front_group *g = group_of(f, m, &key);
  drop_beaten(f, g, m, key);
  if (g->count == g->cap) {
    size_t kept = (size_t)g->cap;
    g->cap = g->cap ? 2 * g->cap : FIRST_MEMBERS;
    g->item = arena_grow(f->arena, g->item, kept * sizeof *g->item,
                         (size_t)g->cap * sizeof *g->item);
    g->key = arena_grow(f->arena, g->key, kept * sizeof *g->key, (size_t)g->cap * sizeof *g->key);
  }
  for (int i = 0; i < FRONT_COORDINATES; i++)
    if (key.v[i] < g->least.v[i]) g->least.v[i] = key.v[i];
  g->key[g->count] = key;
  g->item[g->count++] = *m;
  f->count++;
}
