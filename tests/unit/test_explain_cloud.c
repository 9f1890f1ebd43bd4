/* The drawn sample of walls and its edge against every wall of seeded briefs judged in full. */
#include <math.h>
#include <stdlib.h>

#include "explain/cloud.h"
#include "random_briefs.h"
#include "share.h"

enum { BRIEFS = 40, MANY = 100000 };

typedef struct scene {
  brief brief;
  judge_context context;
  space space;
  brute all; /* of these the first `keep` keep the brief */
  int keep;
  sweep_result swept;
} scene;

static void set_scene(scene *x, unsigned seed) {
  x->brief = random_brief(seed);
  x->context = (judge_context){shop.catalog, shop.prices, &x->brief};
  space_build(shop.memory, &x->context, &x->space);
  x->all = judge_all(&x->space);
  x->keep = 0;
  for (int i = 0; i < x->all.count; i++) {
    if (x->all.wall[i].broken != 0) continue;
    candidate kept = x->all.wall[i];
    x->all.wall[i] = x->all.wall[x->keep];
    x->all.wall[x->keep++] = kept;
  }
  sweep_run(shop.memory, &x->space, &x->swept);
}

/* A point of a wall that judge_all found. */
typedef struct spot {
  double rating;
  long long cents;
} spot;

static int by_spot(const void *one, const void *other) {
  const spot *x = one, *y = other;
  if (x->cents != y->cents) return x->cents < y->cents ? -1 : 1;
  return x->rating < y->rating ? -1 : x->rating > y->rating;
}

static spot spot_of(const scene *x, int i) {
  const wall_numbers *n = &x->all.wall[i].is;
  double asked = x->brief.target_count == 1 ? x->brief.targets[0].value : 0;
  return (spot){asked + n->promised_hundredth / 100.0, n->cost_cents};
}

static const double same_db = 1e-9; /* the last bits of a sum */

START_TEST(a_sample_of_all_is_all) {
  scene x;
  cloud found;
  set_scene(&x, (unsigned)_i);
  cloud_sample(shop.memory, &x.space, &x.swept, MANY, &found);
  ck_assert_int_eq(found.count, x.keep);
  spot *want = arena_array(shop.memory, (size_t)x.keep, sizeof *want);
  spot *is = arena_array(shop.memory, (size_t)x.keep, sizeof *is);
  for (int i = 0; i < x.keep; i++) {
    want[i] = spot_of(&x, i);
    is[i] = (spot){found.point[i].rating, found.point[i].cost_cents};
  }
  qsort(want, (size_t)x.keep, sizeof *want, by_spot);
  qsort(is, (size_t)x.keep, sizeof *is, by_spot);
  for (int i = 0; i < x.keep; i++) {
    ck_assert_int_eq(is[i].cents, want[i].cents);
    ck_assert_double_eq_tol(is[i].rating, want[i].rating, same_db);
  }
}
END_TEST

START_TEST(a_small_sample_is_of_walls_that_keep_the_brief) {
  enum { FEW = 7 };
  scene x;
  cloud found, again;
  set_scene(&x, (unsigned)_i);
  cloud_sample(shop.memory, &x.space, &x.swept, FEW, &found);
  cloud_sample(shop.memory, &x.space, &x.swept, FEW, &again);
  ck_assert_int_le(found.count, FEW);
  if (found.walls == x.keep) ck_assert_int_eq(found.count, x.keep < FEW ? x.keep : FEW);
  ck_assert_int_eq(found.count, again.count);
  for (int i = 0; i < found.count; i++) {
    bool known = false;
    for (int k = 0; k < x.keep && !known; k++) {
      spot s = spot_of(&x, k);
      known = s.cents == found.point[i].cost_cents &&
              fabs(s.rating - found.point[i].rating) < same_db &&
              fabs(x.all.wall[k].is.thickness_tenth_mm * 1e-4 - found.point[i].thickness_m) < 1e-4;
    }
    ck_assert_msg(known, "brief %d: point %d is no wall", _i, i);
    ck_assert_int_eq(found.point[i].cost_cents, again.point[i].cost_cents);
  }
}
END_TEST

/* Costs rise with the rating along the edge, no wall lies beyond it, and each of its points is a
 * wall. */
START_TEST(the_edge_is_passed_by_none) {
  scene x;
  cloud found;
  set_scene(&x, (unsigned)_i);
  cloud_sample(shop.memory, &x.space, &x.swept, 1, &found);
  ck_assert_int_eq(found.edge_count > 0, x.keep > 0);
  for (int k = 0; k < x.keep; k++) {
    spot s = spot_of(&x, k);
    bool held = false;
    for (int i = 0; i < found.edge_count && !held; i++)
      held = found.edge[i].rating >= s.rating - same_db && found.edge[i].cost_cents <= s.cents;
    ck_assert_msg(held, "brief %d: wall %d lies beyond the edge", _i, k);
  }
  for (int i = 0; i < found.edge_count; i++) {
    const cloud_point *p = &found.edge[i];
    ck_assert_ptr_nonnull(p->line);
    bool known = false;
    for (int k = 0; k < x.keep && !known; k++)
      known = spot_of(&x, k).cents == p->cost_cents &&
              fabs(spot_of(&x, k).rating - p->rating) < same_db;
    ck_assert(known);
    if (i == 0) continue;
    ck_assert(found.edge[i - 1].rating < p->rating);
    ck_assert(found.edge[i - 1].cost_cents < p->cost_cents);
  }
}
END_TEST

/* The list holds walls of which the kernel could not be sure: the reference refuses those that miss
 * the target. */
START_TEST(a_wall_that_misses_is_no_point) {
  scene x;
  cloud found;
  feasible_block list = {0};
  set_scene(&x, (unsigned)_i);
  int misses = 0;
  for (int i = x.keep; i < x.all.count && list.count < SWEEP_BLOCK; i++) {
    const candidate *c = &x.all.wall[i];
    if (c->is.promised_hundredth >= 0) continue;
    list.wall[list.count++] =
        (feasible_wall){c->core, (unsigned short)c->face_a, (unsigned short)c->face_b, false};
    misses++;
  }
  x.swept.feasible = &list;
  cloud_sample(shop.memory, &x.space, &x.swept, MANY, &found);
  ck_assert_int_eq(found.walls, misses);
  ck_assert_int_eq(found.count, 0);
}
END_TEST

START_TEST(a_promise_on_the_axis) {
  brief b;
  job_defaults(&b);
  b.target_count = 1;
  b.targets[0] = (target){.metric = METRIC_STC, .value = 50};
  ck_assert_double_eq_tol(cloud_rating(&b, 137), 51.37, same_db);
  b.target_count = 2;
  ck_assert_double_eq_tol(cloud_rating(&b, 137), 1.37, same_db);
}
END_TEST

static Suite *all_tests(void) {
  Suite *s = suite_create("explain_cloud");
  TCase *c = tcase_create("cloud");
  int n = share_of(BRIEFS);
  tcase_add_checked_fixture(c, open_shop, close_shop);
  tcase_set_timeout(c, 120);
  tcase_add_loop_test(c, a_sample_of_all_is_all, 0, n);
  tcase_add_loop_test(c, a_small_sample_is_of_walls_that_keep_the_brief, 0, n);
  tcase_add_loop_test(c, the_edge_is_passed_by_none, 0, n);
  tcase_add_loop_test(c, a_wall_that_misses_is_no_point, 0, n);
  tcase_add_test(c, a_promise_on_the_axis);
  suite_add_tcase(s, c);
  return s;
}

int main(void) {
  SRunner *r = srunner_create(all_tests());
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
