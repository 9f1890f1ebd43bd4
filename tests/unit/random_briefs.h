/* Seeded briefs over small parts of the shipped catalog, and every wall of such a part judged in
 * full: what the search, the selection and the explanations are held against. */
#ifndef TESTS_RANDOM_BRIEFS_H
#define TESTS_RANDOM_BRIEFS_H

#include <check.h>
#include <setjmp.h>
#include <stdint.h>
#include <string.h>

#include "search/candidate.h"

typedef struct bench {
  arena *memory;
  jmp_buf out_of_memory;
  const catalog *catalog;
  const price_book *prices;
} bench;

static bench shop;

static inline void open_shop(void) {
  diag_list d;
  shop.memory = arena_create(0, &shop.out_of_memory);
  ck_assert_ptr_nonnull(shop.memory);
  diag_init(&d, shop.memory);
  shop.catalog = catalog_load(shop.memory, &d, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(shop.catalog);
  shop.prices = prices_load(shop.memory, &d, shop.catalog, TEST_ROOT "/prices/kestrel-yard.json");
  ck_assert_ptr_nonnull(shop.prices);
}

static inline void close_shop(void) {
  arena_free(shop.memory);
}

/* ---- dice ---- */

static uint32_t dice_state;
static inline unsigned dice(unsigned below) {
  dice_state = dice_state * 1664525u + 1013904223u;
  return (dice_state >> 8) % below;
}
static inline bool chance(unsigned percent) {
  return dice(100) < percent;
}

/* ---- briefs ---- */

static inline void add_only(brief *b, const char *pattern) {
  b->only[b->only_count++] = pattern;
}

static inline void choose_parts(brief *b) {
  static const char *const boards[] = {"gyp-13",   "gyp-13-light", "typex-13", "typex-16",
                                       "typec-16", "abuse-16",     "moist-16"};
  static const char *const backings[] = {"osb-11", "ply-13-frt", "damp-layer"};
  static const char *const frames[] = {"wood-64",          "wood-89",
                                       "wood-140",         "steel-64-18",
                                       "steel-92-18",      "steel-92-33",
                                       "steel-152-30",     "steel-92-54",
                                       "wood-89-stag-140", "steel-64-18-stag-102",
                                       "wood-89-double",   "steel-92-18-double",
                                       "wood-89-frt"};
  static const char *const fills[] = {"glass-65", "glass-89", "stone-89",
                                      "stone-76", "cell-89",  "glass-140"};
  add_only(b, boards[dice(7)]);
  add_only(b, boards[dice(7)]);
  if (chance(40)) add_only(b, backings[dice(3)]);
  add_only(b, frames[dice(13)]);
  add_only(b, frames[dice(13)]);
  add_only(b, fills[dice(6)]);
  add_only(b, chance(30) ? "rc" : chance(30) ? "clip" : "mount:none-of-them");
}

static inline void choose_target(target *t, const brief *b) {
  static const double confidences[] = {0.5, 0.8, 0.9, 0.4};
  *t = (target){.metric = METRIC_STC, .value = 30 + dice(18), .confidence = confidences[dice(4)]};
  if (chance(25)) t->metric = (sound_metric)dice(METRIC_COUNT);
  if (t->metric != METRIC_STC) t->value -= 5;
  if (chance(12)) t->basis = BASIS_FIELD;
  if (chance(15)) t->margin = 0.5 * dice(5);
  if (chance(6)) t->evidence = EVIDENCE_PUBLISHED;
  t->composite = b->opening_count > 0 && chance(70);
}

static inline void choose_sides(brief *b) {
  for (int s = 0; s < 2; s++) {
    if (chance(20)) b->side[s].fastening = chance(50) ? FASTENING_HEAVY : FASTENING_LIGHT;
    b->side[s].wet = chance(6);
    b->side[s].abuse = chance(6);
    if (chance(15)) b->side[s].finish_level = (int)dice(6);
  }
}

static inline void choose_limits(brief *b) {
  if (chance(35)) b->thickness_m = (limit){false, true, 0, 0.11 + 0.005 * dice(34)};
  if (chance(8)) b->thickness_m.has_min = true, b->thickness_m.min = 0.09 + 0.005 * dice(5);
  if (chance(20)) b->mass_kg_m2 = (limit){false, true, 0, 25 + dice(45)};
  if (chance(8)) b->mass_kg_m2.has_min = true, b->mass_kg_m2.min = 18 + dice(12);
  if (chance(15)) b->cost_per_m2 = (limit){false, true, 0, 110 + dice(120)};
  if (chance(25)) b->floor_area_value_per_m2 = 500 + dice(4000);
}

/* A brief that depends on `seed` alone. */
static inline brief random_brief(unsigned seed) {
  static const char *const withouts[] = {"steel-*", "typex-16", "fill:glass-*",
                                         "osb-*",   "wood-89*", "rc"};
  static const int minutes[] = {30, 45, 60};
  brief b;
  dice_state = seed * 2654435761u + 12345;
  job_defaults(&b);
  b.code = (fire_code)(1 + dice(2));
  b.length_m = 3 + 0.5 * dice(15);
  b.height_m = 2.4 + 0.3 * dice(4);
  choose_parts(&b);
  if (chance(25))
    b.openings[b.opening_count++] =
        (opening){.kind = "door", .area_m2 = 0.5 + 0.5 * dice(4), .stc = 28 + 4 * dice(5)};
  b.target_count = chance(20) ? 2 : 1;
  for (int i = 0; i < b.target_count; i++) choose_target(&b.targets[i], &b);
  choose_sides(&b);
  choose_limits(&b);
  if (chance(30)) b.fire_min = minutes[dice(3)];
  if (chance(10)) b.loadbearing = true, b.floors_above = (int)dice(3);
  if (chance(8)) b.noncombustible = chance(50) ? NONCOMBUSTIBLE_STRICT : NONCOMBUSTIBLE_FRT_OK;
  if (chance(6)) b.shear_side = (int)dice(2);
  if (chance(15)) b.riser_m = 0.06 + 0.01 * dice(6);
  if (chance(22)) b.without[b.without_count++] = withouts[dice(6)];
  if (chance(10)) b.without[b.without_count++] = withouts[dice(6)];
  if (chance(10)) b.head = HEAD_SLIP;
  return b;
}

/* ---- every wall of a space by judge_wall ---- */

typedef struct brute {
  int count;
  candidate *wall;
} brute;

static inline candidate judged(arena *a, const space *s, int core, int face_a, int face_b) {
  assessment *x = arena_alloc(a, sizeof *x);
  wall w = space_wall(s, core, face_a, face_b);
  judge_wall(a, s->context, &w, x);
  return (candidate){core, face_a, face_b, x->numbers, x->broken, x->instead};
}

static inline brute judge_all(const space *s) {
  brute all = {0, arena_array(shop.memory, (size_t)space_count(s), sizeof *all.wall)};
  for (int k = 0; k < s->core_count; k++)
    for (int i = 0; i < s->face_count; i++)
      for (int j = 0; j < s->face_count; j++) {
        if (!space_legal(s, k, i, j)) continue;
        arena *a =
            arena_create(0, &shop.out_of_memory); /* a judged wall is some hundred KiB of words */
        ck_assert_ptr_nonnull(a);
        all.wall[all.count++] = judged(a, s, k, i, j);
        arena_free(a);
      }
  return all;
}

/* The first in tie order that breaks nothing but what is given up; NULL when there is none. */
static inline const candidate *brute_cheapest(const space *s, const brute *all,
                                              rule_mask given_up) {
  const candidate *best = NULL;
  for (int i = 0; i < all->count; i++) {
    const candidate *c = &all->wall[i];
    bool passes = (c->broken & ~given_up) == 0 || (c->instead && (c->instead & ~given_up) == 0);
    if (passes && (!best || candidate_compare(s, c, best) < 0)) best = c;
  }
  return best;
}

#endif
