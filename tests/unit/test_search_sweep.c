/* The sweep and its tables against judge_wall on every wall of seeded briefs. */
#include <stdio.h>
#include <stdlib.h>

#include "random_briefs.h"
#include "search/cheapest.h"
#include "search/sweep.h"
#include "search/tables.h"
#include "share.h"

enum { BRIEFS = 60 };

typedef struct scene {
  brief brief;
  judge_context context;
  space space;
  brute all;
} scene;

static void set_scene(scene *x, unsigned seed) {
  x->brief = random_brief(seed);
  x->context = (judge_context){shop.catalog, shop.prices, &x->brief};
  space_build(shop.memory, &x->context, &x->space);
  x->all = judge_all(&x->space);
}

static const rule_mask sound_rules = UINT64_C(1) << RULE_TARGET | UINT64_C(1) << RULE_CONFIDENCE |
                                     UINT64_C(1) << RULE_EVIDENCE | UINT64_C(1) << RULE_COMPOSITE;

START_TEST(tables_agree_with_the_judge) {
  scene x;
  set_scene(&x, (unsigned)_i);
  if (x.all.count == 0) return;
  tables *t = tables_create(shop.memory, &x.space);
  core_facts *k = arena_alloc(shop.memory, sizeof *k);
  k->core = -1;
  for (int i = 0; i < x.all.count; i++) {
    const candidate *w = &x.all.wall[i];
    candidate c;
    if (k->core != w->core) tables_core(t, w->core, k);
    ck_assert(tables_wall(t, k, w->face_a, w->face_b, &c));
    ck_assert_int_eq(c.is.cost_cents, w->is.cost_cents);
    ck_assert_int_eq(c.is.total_cents, w->is.total_cents);
    ck_assert_int_eq(c.is.thickness_tenth_mm, w->is.thickness_tenth_mm);
    ck_assert_int_eq(c.is.mass_hundredth, w->is.mass_hundredth);
    ck_assert_int_eq(c.is.height_mm, w->is.height_mm);
    if (x.brief.fire_min > 0) ck_assert_int_eq(c.is.fire_min, w->is.fire_min);
    ck_assert_msg(c.broken == (w->broken & ~sound_rules), "brief %d wall %d: %llx for %llx", _i, i,
                  (unsigned long long)c.broken, (unsigned long long)(w->broken & ~sound_rules));
  }
}
END_TEST

static const candidate *mask_best_of(const scene *x, rule_mask broken) {
  const candidate *best = NULL;
  for (int i = 0; i < x->all.count; i++) {
    const candidate *c = &x->all.wall[i];
    if (c->broken != broken && !(c->instead && c->instead == broken)) continue;
    if (!best || candidate_compare(&x->space, c, best) < 0) best = c;
  }
  return best;
}

static bool same_wall(const candidate *p, const candidate *q) {
  return p->core == q->core && p->face_a == q->face_a && p->face_b == q->face_b;
}

START_TEST(the_cheapest_of_each_set_of_broken_rules) {
  scene x;
  sweep_result r;
  set_scene(&x, (unsigned)_i);
  sweep_run(shop.memory, &x.space, &r);
  ck_assert_int_eq(r.walls, x.all.count);
  ck_assert_ptr_null(r.unpriced);
  for (int i = 0; i < r.mask_count; i++) {
    const candidate *best = mask_best_of(&x, r.masks[i].broken);
    ck_assert_ptr_nonnull(best);
    ck_assert(same_wall(best, &r.masks[i].best));
    ck_assert_int_eq(best->is.promised_hundredth, r.masks[i].best.is.promised_hundredth);
    ck_assert_uint_eq(best->broken, r.masks[i].best.broken);
  }
  for (int i = 0; i < x.all.count; i++) {
    bool found = false;
    for (int m = 0; m < r.mask_count; m++)
      found = found || r.masks[m].broken == x.all.wall[i].broken;
    ck_assert(found);
  }
}
END_TEST

/* No worse in anything that a brief may ask, and not after it in the order of ties. */
static bool stands_for(const scene *x, const candidate *p, const candidate *q) {
  rule_mask on = rules_in_force(&x->brief);
  bool sound =
      !(on & rule_bit(RULE_TARGET)) || p->is.promised_hundredth >= q->is.promised_hundredth;
  bool thin =
      !(on & rule_bit(RULE_THICKNESS_MAX)) || p->is.thickness_tenth_mm <= q->is.thickness_tenth_mm;
  bool light = !(on & rule_bit(RULE_MASS_MAX)) || p->is.mass_hundredth <= q->is.mass_hundredth;
  bool fire = !(on & rule_bit(RULE_FIRE)) || p->is.fire_min >= q->is.fire_min;
  bool cheap = !(on & rule_bit(RULE_COST_MAX)) || p->is.total_cents <= q->is.total_cents;
  return sound && thin && light && fire && cheap && p->is.height_mm >= q->is.height_mm &&
         p->is.cost_cents <= q->is.cost_cents && candidate_passes_where(p, q);
}

START_TEST(every_wall_has_one_in_the_frontier_that_stands_for_it) {
  scene x;
  sweep_result r;
  set_scene(&x, (unsigned)_i);
  sweep_run(shop.memory, &x.space, &r);
  for (int i = 0; i < x.all.count; i++) {
    bool found = false;
    for (int j = 0; j < r.frontier_count && !found; j++)
      found = stands_for(&x, &r.frontier[j], &x.all.wall[i]);
    ck_assert_msg(found, "brief %d wall %d", _i, i);
  }
  for (int j = 0; j < r.frontier_count; j++) { /* and each of its walls is as the judge says */
    const candidate *c = &r.frontier[j];
    candidate w = judged(shop.memory, &x.space, c->core, c->face_a, c->face_b);
    ck_assert_int_eq(c->is.promised_hundredth, w.is.promised_hundredth);
    ck_assert_uint_eq(c->broken, w.broken);
    ck_assert_int_eq(c->is.cost_cents, w.is.cost_cents);
    if (j > 0) ck_assert_int_lt(candidate_compare(&x.space, &r.frontier[j - 1], c), 0);
  }
}
END_TEST

START_TEST(feasible_walls_and_the_cheapest) {
  scene x;
  sweep_result r;
  candidate found;
  set_scene(&x, (unsigned)_i);
  sweep_run(shop.memory, &x.space, &r);
  int feasible = 0, listed = 0;
  for (int i = 0; i < x.all.count; i++) feasible += x.all.wall[i].broken == 0;
  for (const feasible_block *b = r.feasible; b; b = b->next)
    for (int i = 0; i < b->count; i++)
      listed += b->wall[i].certain || sweep_confirms(&x.space, &b->wall[i]);
  ck_assert_int_eq(listed, feasible);
  const candidate *best = brute_cheapest(&x.space, &x.all, 0);
  ck_assert_int_eq(cheapest_find(shop.memory, &x.space, &found), best != NULL);
  if (best) ck_assert(same_wall(best, &found));
  if (best) ck_assert(r.runner_count > 0 && same_wall(best, &r.runners[0]));
}
END_TEST

int main(void) {
  Suite *s = suite_create("search_sweep");
  TCase *t = tcase_create("against the judge");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, tables_agree_with_the_judge, 0, share_of(BRIEFS));
  tcase_add_loop_test(t, the_cheapest_of_each_set_of_broken_rules, 0, share_of(BRIEFS));
  tcase_add_loop_test(t, every_wall_has_one_in_the_frontier_that_stands_for_it, 0, share_of(BRIEFS));
  tcase_add_loop_test(t, feasible_walls_and_the_cheapest, 0, share_of(BRIEFS));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
