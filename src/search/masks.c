#include "search/masks.h"

enum { FIRST_SLOTS = 1024 };

static size_t hash_of(rule_mask m, int slots) {
  m *= UINT64_C(0x9e3779b97f4a7c15); /* 2^64 over the golden ratio: spreads neighbours */
  return (size_t)(m >> 32) & (size_t)(slots - 1);
}

static void make_slots(masks *m, int slots) {
  m->slots = slots;
  m->slot = arena_array(m->arena, (size_t)slots, sizeof *m->slot);
  for (int i = 0; i < slots; i++) m->slot[i] = -1;
}

void masks_init(masks *m, arena *a, const space *s) {
  *m = (masks){.arena = a, .space = s};
  make_slots(m, FIRST_SLOTS);
}

/* Where the set stands, or would stand. */
static size_t place_of(const masks *m, rule_mask broken) {
  size_t at = hash_of(broken, m->slots);
  while (m->slot[at] >= 0 && m->item[m->slot[at]].broken != broken)
    at = (at + 1) & (size_t)(m->slots - 1);
  return at;
}

const mask_best *masks_find(const masks *m, rule_mask broken) {
  int i = m->slot[place_of(m, broken)];
  return i < 0 ? NULL : &m->item[i];
}

bool masks_wants(const masks *m, rule_mask broken, const candidate *c) {
  const mask_best *kept = masks_find(m, broken);
  return !kept || candidate_compare(m->space, c, &kept->best) < 0;
}

static void grow(masks *m) {
  int cap = m->cap ? 2 * m->cap : FIRST_SLOTS / 2;
  m->item = arena_grow(m->arena, m->item, (size_t)m->cap * sizeof *m->item,
                       (size_t)cap * sizeof *m->item);
  m->cap = cap;
  if (2 * cap <= m->slots) return;
  make_slots(m, 2 * cap);
  for (int i = 0; i < m->count; i++) m->slot[place_of(m, m->item[i].broken)] = i;
}

void masks_offer(masks *m, rule_mask broken, const candidate *c) {
  int i = m->slot[place_of(m, broken)];
  if (i >= 0) {
    if (candidate_compare(m->space, c, &m->item[i].best) < 0) m->item[i].best = *c;
    return;
  }
  if (m->count == m->cap) grow(m);
  m->slot[place_of(m, broken)] = m->count;
  m->item[m->count++] = (mask_best){broken, *c};
}
