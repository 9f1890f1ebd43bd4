/* Seeded problems of `plan`, small ones for brute force and large ones like a real project; and the
 * brute force, which knows the rules from docs/design/plan.md and shares no code with the model. */
#ifndef TEST_RANDOM_PLANS_H
#define TEST_RANDOM_PLANS_H

#include <check.h>
#include <limits.h>
#include <math.h>
#include <setjmp.h>
#include <stdint.h>
#include <string.h>

#include "select/plan.h"

enum { SMALL_CLASSES = 6, SMALL_TYPES = 6, SMALL_ITEMS = 3 };

/* What a seed switches on. */
enum {
  WITH_SETUP = 1,
  WITH_TYPES = 2,
  WITH_RUN = 4,
  WITH_FLOOR = 8,
  WITH_FRAMING = 16,
  WITH_ITEMS = 32,
  WITH_STOCK = 64,
  WITH_BUDGET = 128,
  ALL_FEATURES = 255
};

static arena *plan_memory;
static jmp_buf plan_out_of_memory;

static inline void open_plans(void) {
  plan_memory = arena_create(0, &plan_out_of_memory);
  ck_assert_ptr_nonnull(plan_memory);
}

static inline void close_plans(void) {
  arena_free(plan_memory);
}

static inline uint32_t draw(uint64_t *state, uint32_t below) {
  *state = *state * 6364136223846793005u + 1442695040888963407u;
  return (uint32_t)(*state >> 33) % below;
}

typedef struct plan_arrays {
  long long *cents;
  double *need, *floor_m2, *run_m;
  int *margin, *storey, *group;
  plan_item *item;
} plan_arrays;

static inline plan_arrays plan_room(plan_problem *p, int classes, int types, int items) {
  size_t pairs = (size_t)classes * (size_t)types;
  plan_arrays m;
  m.cents = arena_array(plan_memory, pairs, sizeof *m.cents);
  m.need = arena_array(plan_memory, pairs * (size_t)items + 1, sizeof *m.need);
  m.floor_m2 = arena_array(plan_memory, pairs, sizeof *m.floor_m2);
  m.margin = arena_array(plan_memory, pairs, sizeof *m.margin);
  m.run_m = arena_array(plan_memory, (size_t)classes, sizeof *m.run_m);
  m.storey = arena_array(plan_memory, (size_t)classes, sizeof *m.storey);
  m.group = arena_array(plan_memory, (size_t)types, sizeof *m.group);
  m.item = arena_array(plan_memory, (size_t)items + 1, sizeof *m.item);
  *p = (plan_problem){.classes = classes,
                      .types = types,
                      .items = items,
                      .cents = m.cents,
                      .need = m.need,
                      .floor_m2 = m.floor_m2,
                      .margin = m.margin,
                      .run_m = m.run_m,
                      .group = m.group,
                      .groups = 2,
                      .item = m.item};
  return m;
}

static inline void draw_item(uint64_t *s, plan_item *item, int number, double most, bool stock) {
  static const char *const codes[] = {"board-16", "board 16", "e1.batt"};
  *item = (plan_item){.code = codes[number % 3], .tier_count = 1 + (int)draw(s, 3)};
  double from = draw(s, 2) ? most * draw(s, 60) / 100 : 0, price = 1 + draw(s, 900) / 100.0;
  for (int k = 0; k < item->tier_count; k++) {
    item->tier[k] = (plan_tier){from, price};
    from += most * (5 + draw(s, 40)) / 100 + 0.5;
    price *= 0.6 + draw(s, 39) / 100.0;
  }
  if (stock && draw(s, 3)) item->stock = most * draw(s, 70) / 100;
}

/* A problem of 2 to 6 classes and types; `features` says which rules it has. */
static inline plan_problem small_plan(unsigned seed, unsigned features) {
  uint64_t s = seed * 2654435761u + 12345u;
  for (int i = 0; i < 4; i++) (void)draw(&s, 2);
  plan_problem p;
  int classes = 2 + (int)draw(&s, SMALL_CLASSES - 1), types = 2 + (int)draw(&s, SMALL_TYPES - 1);
  int items = features & WITH_ITEMS ? 1 + (int)draw(&s, SMALL_ITEMS) : 0;
  plan_arrays m = plan_room(&p, classes, types, items);
  double run = 0, floor_least = 0, most[SMALL_ITEMS] = {0};
  for (int t = 0; t < types; t++) m.group[t] = (int)draw(&s, 2);
  for (int c = 0; c < classes; c++) {
    int sure = (int)draw(&s, (uint32_t)types);
    double least = HUGE_VAL;
    m.run_m[c] = 2 + draw(&s, 6000) / 100.0;
    m.storey[c] = (int)draw(&s, 2);
    run += m.run_m[c];
    for (int t = 0; t < types; t++) {
      int k = c * types + t;
      bool fits = t == sure || draw(&s, 10) < 7;
      m.cents[k] = fits ? (long long)(m.run_m[c] * (2000.0 + 300 * t + draw(&s, 2500))) : -1;
      m.floor_m2[k] = m.run_m[c] * (0.10 + 0.02 * t + draw(&s, 40) / 1000.0);
      m.margin[k] = (int)draw(&s, 12) * 25;
      if (fits) least = fmin(least, m.floor_m2[k]);
      for (int i = 0; i < items; i++)
        m.need[k * items + i] = draw(&s, 4) ? m.run_m[c] * (1 + draw(&s, 400) / 100.0) : 0;
    }
    for (int i = 0; i < items; i++) {
      double top = 0;
      for (int t = 0; t < types; t++)
        if (m.cents[c * types + t] >= 0) top = fmax(top, m.need[(c * types + t) * items + i]);
      most[i] += top;
    }
    floor_least += least;
  }
  for (int i = 0; i < items; i++) draw_item(&s, &m.item[i], i, most[i], features & WITH_STOCK);
  if (features & WITH_SETUP) p.setup_cents = draw(&s, 60000);
  if (features & WITH_TYPES) p.max_types = 1 + (int)draw(&s, 3);
  if (features & WITH_RUN) p.min_run_m = run * draw(&s, 60) / 100;
  if (features & WITH_FLOOR) p.floor_max_m2 = floor_least * (0.98 + draw(&s, 30) / 100.0);
  if (features & WITH_FRAMING) {
    p.storeys = 1 + (int)draw(&s, 2);
    if (p.storeys == 1) memset(m.storey, 0, (size_t)classes * sizeof *m.storey);
    p.storey = m.storey;
  }
  return p;
}

/* A problem of the size of a real project: walls of `classes` demands that need a quality, types
 * that have one and cost by it, goods that types share: some in tiers, the others with a minimum
 * order. */
static inline plan_problem large_plan(unsigned seed, int classes, int types, int items) {
  uint64_t s = seed * 2654435761u + 99u;
  for (int i = 0; i < 4; i++) (void)draw(&s, 2);
  plan_problem p;
  plan_arrays m = plan_room(&p, classes, types, items);
  double *quality = arena_array(plan_memory, (size_t)types, sizeof *quality);
  double *rate = arena_array(plan_memory, (size_t)types, sizeof *rate);
  double *use = arena_array(plan_memory, (size_t)(types * items) + 1, sizeof *use);
  int *kind = arena_array(plan_memory, (size_t)types, sizeof *kind);
  double run = 0;
  for (int t = 0; t < types; t++) {
    quality[t] = draw(&s, 1000) / 1000.0;
    rate[t] = 60 + 90 * quality[t] * quality[t] + draw(&s, 2500) / 100.0;
    kind[t] = (int)draw(&s, 4);
    m.group[t] = (int)draw(&s, 2);
    for (int i = 0; i < items; i++) /* the first goods are everybody's, the others some types' */
      if (i < 3 ? draw(&s, 10) < 7 : draw(&s, 10) == 0)
        use[t * items + i] = 1 + (double)draw(&s, 2);
  }
  for (int c = 0; c < classes; c++) {
    double asked = draw(&s, 850) / 1000.0, height = 2.4 + draw(&s, 12) / 10.0;
    int wants = (int)draw(&s, 4) ? -1 : (int)draw(&s, 4);
    m.run_m[c] = 20 + draw(&s, 30000) / 100.0;
    m.storey[c] = (int)draw(&s, 5);
    run += m.run_m[c];
    for (int t = 0; t < types; t++) {
      int k = c * types + t;
      bool fits = (quality[t] >= asked && (wants < 0 || kind[t] == wants)) || t == types - 1;
      double area = m.run_m[c] * height;
      if (t == types - 1) rate[t] = 190; /* one that does everything */
      m.cents[k] = fits ? (long long)(area * (rate[t] + draw(&s, 300) / 100.0) * 100) : -1;
      m.floor_m2[k] = m.run_m[c] * (0.1 + 0.15 * quality[t]);
      m.margin[k] = (int)(100 * 20 * (quality[t] - asked));
      for (int i = 0; i < items; i++) m.need[k * items + i] = area * use[t * items + i];
    }
  }
  for (int i = 0; i < items; i++) {
    m.item[i] = (plan_item){.code = text_format(plan_memory, "goods-%d", i + 1), .tier_count = 1};
    m.item[i].tier[0] =
        (plan_tier){i < 3 ? 0 : 200 + (double)draw(&s, 400), 3 + (double)draw(&s, 4)};
    for (int k = 1; i < 3 && k < 3; k++)
      m.item[i].tier[k] =
          (plan_tier){run * 0.9 * k * k + draw(&s, 500), m.item[i].tier[k - 1].price * 0.93};
    m.item[i].tier_count = i < 3 ? 3 : 1;
  }
  p.setup_cents = 250000;
  p.max_types = 6;
  p.min_run_m = 60;
  return p;
}

/* ---- brute force ---- */

typedef struct brute_rules {
  unsigned rules; /* plan_rule bits to keep */
  int least_margin;
} brute_rules;

static inline double brute_goods(const plan_item *item, double need) {
  if (need <= item->stock * (1 + 1e-12)) return 0;
  double wanted = need - item->stock, best = HUGE_VAL;
  for (int k = 0; k < item->tier_count; k++) { /* one order, all of it at its tier's price */
    double order = wanted > item->tier[k].from ? wanted : item->tier[k].from;
    bool last = k + 1 == item->tier_count;
    if (last || order < item->tier[k + 1].from) best = fmin(best, order * item->tier[k].price);
  }
  return best;
}

static inline long long brute_cost(const plan_problem *p, const int *type_of) {
  long long cents = 0;
  double goods = 0;
  for (int t = 0; t < p->types; t++) {
    bool used = false;
    for (int c = 0; c < p->classes; c++) {
      if (type_of[c] != t) continue;
      used = true;
      cents += p->cents[c * p->types + t];
    }
    if (used) cents += p->setup_cents;
  }
  for (int i = 0; i < p->items; i++) {
    double need = 0;
    for (int c = 0; c < p->classes; c++)
      need += p->need[(c * p->types + type_of[c]) * p->items + i];
    goods += brute_goods(&p->item[i], need);
  }
  return cents + (long long)floor(goods * 100 + 0.5 + 1e-7);
}

static inline bool brute_run_kept(const plan_problem *p, const int *type_of) {
  for (int t = 0; t < p->types; t++) {
    double run = 0;
    for (int c = 0; c < p->classes; c++)
      if (type_of[c] == t) run += p->run_m[c];
    if (run > 0 && llround(run * 1000) < llround(p->min_run_m * 1000)) return false;
  }
  return true;
}

static inline int brute_types(const plan_problem *p, const int *type_of) {
  int n = 0;
  for (int t = 0; t < p->types; t++)
    for (int c = 0; c < p->classes; c++)
      if (type_of[c] == t) {
        n++;
        break;
      }
  return n;
}

static inline bool brute_keeps(const plan_problem *p, const int *type_of, brute_rules r) {
  long long area = 0;
  bool framed = true;
  for (int c = 0; c < p->classes; c++) {
    int k = c * p->types + type_of[c];
    if (p->cents[k] < 0 || p->margin[k] < r.least_margin) return false;
    if (p->locked_out && p->locked_out[type_of[c]]) return false;
    area += llround(p->floor_m2[k] * 1000);
    for (int j = 0; p->storey && j < c; j++)
      framed =
          framed && (p->storey[j] != p->storey[c] || p->group[type_of[j]] == p->group[type_of[c]]);
  }
  if (r.rules & 1u << PLAN_RULE_FLOOR && p->floor_max_m2 > 0 &&
      area > llround(p->floor_max_m2 * 1000))
    return false;
  if (r.rules & 1u << PLAN_RULE_FRAMING && !framed) return false;
  if (r.rules & 1u << PLAN_RULE_TYPES && p->max_types > 0 && brute_types(p, type_of) > p->max_types)
    return false;
  if (r.rules & 1u << PLAN_RULE_RUN && !brute_run_kept(p, type_of)) return false;
  return !(r.rules & 1u << PLAN_RULE_BUDGET && p->budget_cents > 0 &&
           brute_cost(p, type_of) > p->budget_cents);
}

static inline bool brute_next(const plan_problem *p, int *type_of) {
  for (int c = 0; c < p->classes; c++) {
    if (++type_of[c] < p->types) return true;
    type_of[c] = 0;
  }
  return false;
}

/* The least cost over all choices, LLONG_MAX when none keeps the rules. */
static inline long long brute_least(const plan_problem *p, brute_rules r) {
  int type_of[SMALL_CLASSES] = {0};
  long long best = LLONG_MAX;
  do {
    if (!brute_keeps(p, type_of, r)) continue;
    long long cost = brute_cost(p, type_of);
    if (cost < best) best = cost;
  } while (brute_next(p, type_of));
  return best;
}

#endif
