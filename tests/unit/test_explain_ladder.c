/* Rungs against the cheapest wall of the brief at each rating, and against every wall judged in
 * full; the hull against its definition; single changes against the judgement of their walls. */
#include <stdlib.h>

#include "explain/ladder.h"
#include "random_briefs.h"
#include "search/cheapest.h"
#include "share.h"
#include "wall/line.h"

enum {
  LADDER_BRIEFS = 50,
  BRUTE_BRIEFS = 30,
  HAVE_BRIEFS = 24,
  HULLS = 200,
  HULL_POINTS = 30,
  CLEAR_OF_WALLS = 85 /* no wall of the catalog reaches it */
};

typedef struct scene {
  brief brief;
  int climbs;
  judge_context context;
  space space;
  rungs rungs;
} scene;

static void set_scene(scene *x, unsigned seed) {
  x->brief = random_brief(seed);
  x->climbs = (int)dice((unsigned)x->brief.target_count);
  x->context = (judge_context){shop.catalog, shop.prices, &x->brief};
  space_build(shop.memory, &x->context, &x->space);
  rungs_find(shop.memory, &x->space, x->climbs, &x->rungs);
}

static bool same_wall(const candidate *x, const candidate *y) {
  return x->core == y->core && x->face_a == y->face_a && x->face_b == y->face_b;
}

/* ---- rungs ---- */

START_TEST(each_rung_is_the_pick_at_its_rating) {
  scene x;
  set_scene(&x, (unsigned)_i);
  for (int v = RUNGS_LEAST; v < CLEAR_OF_WALLS; v++) {
    candidate best;
    space s;
    x.brief.targets[x.climbs].value = v;
    space_build(shop.memory, &x.context, &s);
    bool found = cheapest_find(shop.memory, &s, &best);
    ck_assert_msg(found == x.rungs.at[v].found, "brief %d at %d", _i, v);
    if (!found) continue;
    ck_assert_msg(same_wall(&best, &x.rungs.at[v].wall), "brief %d at %d", _i, v);
    ck_assert_int_eq(best.is.cost_cents, x.rungs.at[v].wall.is.cost_cents);
  }
  for (int v = CLEAR_OF_WALLS; v <= RUNGS_MOST; v++) ck_assert(!x.rungs.at[v].found);
}
END_TEST

START_TEST(rungs_are_the_cheapest_of_all_walls_judged) {
  scene x;
  set_scene(&x, (unsigned)_i);
  int v = x.rungs.highest > 0 ? 1 + (int)dice((unsigned)x.rungs.highest + 1) : RUNGS_LEAST;
  x.brief.targets[x.climbs].value = v;
  brute all = judge_all(&x.space);
  const candidate *best = brute_cheapest(&x.space, &all, 0);
  ck_assert_msg((best != NULL) == x.rungs.at[v].found, "brief %d at %d", _i, v);
  if (best) ck_assert_msg(same_wall(best, &x.rungs.at[v].wall), "brief %d at %d", _i, v);
}
END_TEST

START_TEST(the_value_in_the_brief_decides_nothing) {
  scene x;
  rungs again;
  set_scene(&x, (unsigned)_i);
  x.brief.targets[x.climbs].value = 20 + dice(60);
  rungs_find(shop.memory, &x.space, x.climbs, &again);
  ck_assert_int_eq(again.lowest, x.rungs.lowest);
  ck_assert_int_eq(again.highest, x.rungs.highest);
  for (int v = RUNGS_LEAST; v <= RUNGS_MOST; v++) {
    ck_assert_int_eq(again.at[v].found, x.rungs.at[v].found);
    if (!again.at[v].found) continue;
    ck_assert(same_wall(&again.at[v].wall, &x.rungs.at[v].wall));
    ck_assert_int_eq(again.at[v].reaches, x.rungs.at[v].reaches);
  }
}
END_TEST

static ladder_answer explain(scene *x, int from, int to) {
  ladder_answer out;
  ladder_terms terms = {.climbs = x->climbs, .from = from, .to = to};
  x->brief.targets[x->climbs].value = RUNGS_LEAST;
  ladder_explain(shop.memory, &x->space, &x->rungs, &terms, &out);
  return out;
}

START_TEST(rungs_rise_and_cover_every_rating) {
  scene x;
  set_scene(&x, (unsigned)_i);
  ladder_answer l = explain(&x, 0, 0);
  ck_assert_int_eq(l.count > 0, x.rungs.highest > 0);
  ck_assert_int_eq(l.why != NULL, x.rungs.highest == 0);
  if (l.why) ck_assert_int_gt(l.why->nearest_count + (l.why->walls == 0), 0);
  for (int i = 0; i < l.count; i++) {
    const ladder_rung *g = &l.rung[i];
    ck_assert_int_eq(g->serves_from, i > 0 ? g[-1].rating + 1 : RUNGS_LEAST);
    ck_assert_int_ge(g->rating, g->serves_from);
    ck_assert_int_eq(g->reaches, g->rating);
    ck_assert_uint_eq(g->wall->broken, 0);
    ck_assert_int_eq(g->wall->numbers.cost_cents, g->cost_cents);
    for (int v = g->serves_from; v <= g->rating; v++)
      ck_assert_int_eq(x.rungs.at[v].wall.is.cost_cents, g->cost_cents);
    if (i == 0) continue;
    ck_assert_int_gt(g->cost_cents, g[-1].cost_cents);
    ck_assert_int_eq(g->step_cents, g->cost_cents - g[-1].cost_cents);
    ck_assert_int_eq(g->points, g->rating - g[-1].rating);
    ck_assert_int_gt(g->changes.count, 0);
  }
  if (l.count == 0) return;
  ck_assert_int_eq(l.rung[l.count - 1].rating, l.highest);
  ck_assert_int_eq(l.rung[0].rating, l.lowest);
}
END_TEST

START_TEST(a_range_cuts_the_same_ladder) {
  scene x;
  set_scene(&x, (unsigned)_i);
  if (x.rungs.highest == 0) return;
  int from = 1 + (int)dice((unsigned)x.rungs.highest), to = from + (int)dice(8);
  ladder_answer l = explain(&x, from, to);
  int last = to < x.rungs.highest ? to : x.rungs.highest;
  ck_assert_int_gt(l.count, 0);
  ck_assert_int_eq(l.rung[0].serves_from, from);
  ck_assert_int_eq(l.rung[l.count - 1].rating, last);
  for (int i = 0; i < l.count; i++)
    ck_assert_int_eq(l.rung[i].cost_cents, x.rungs.at[l.rung[i].rating].wall.is.cost_cents);
  l = explain(&x, x.rungs.highest + 1, 0);
  ck_assert_int_eq(l.count, 0);
  ck_assert_ptr_null(l.why);
}
END_TEST

/* ---- hull ---- */

/* By definition: a point is a corner of the lower hull when no segment between a point before it
 * and one after it passes on or below it. Andrew, Another efficient algorithm for convex hulls in
 * two dimensions, 1979, is what the module does; this is the slow way round. */
static bool is_corner(const ladder_rung *r, int count, int i) {
  for (int p = 0; p < i; p++)
    for (int q = i + 1; q < count; q++) {
      long long run = r[q].rating - r[p].rating;
      long long line =
          r[p].cost_cents * run + (r[q].cost_cents - r[p].cost_cents) * (r[i].rating - r[p].rating);
      if (line <= r[i].cost_cents * run) return false;
    }
  return true;
}

START_TEST(worth_taking_are_the_corners_of_the_lower_hull) {
  ladder_rung rung[HULL_POINTS] = {{0}};
  dice_state = (uint32_t)_i + 7;
  int count = (int)dice(HULL_POINTS + 1), rating = 20;
  long long cents = 100000;
  unsigned steepest = 1 + dice(400); /* small steps make many points on one line */
  for (int i = 0; i < count; i++) {
    rung[i].rating = rating += 1 + (int)dice(4);
    rung[i].cost_cents = cents += 1 + dice(steepest);
  }
  ladder_mark_hull(rung, count);
  for (int i = 0; i < count; i++) ck_assert_int_eq(rung[i].worth, is_corner(rung, count, i));
}
END_TEST

/* ---- targets ---- */

START_TEST(the_target_that_climbs) {
  brief b;
  job_defaults(&b);
  ck_assert_int_eq(ladder_target(&b, METRIC_COUNT), 0);
  ck_assert_int_eq(b.target_count, 1);
  ck_assert_int_eq(b.targets[0].metric, METRIC_STC);
  ck_assert_double_eq(b.targets[0].confidence, 0.8);
  b.target_count = 2;
  b.targets[1] = (target){.metric = METRIC_RW, .value = 52, .confidence = 0.9};
  ck_assert_int_eq(ladder_target(&b, METRIC_RW), 1);
  ck_assert_int_eq(ladder_target(&b, METRIC_OITC), 0);
  ck_assert_int_eq(b.targets[0].metric, METRIC_OITC);
  ck_assert_int_eq(b.target_count, 2);
}
END_TEST

/* ---- a given wall ---- */

START_TEST(from_a_given_wall) {
  scene x;
  set_scene(&x, (unsigned)_i);
  if (x.rungs.highest == 0) return;
  const candidate *c = &x.rungs.at[RUNGS_LEAST].wall; /* the cheapest: no change is cheaper */
  wall w = space_wall(&x.space, c->core, c->face_a, c->face_b);
  assessment *have = arena_alloc(shop.memory, sizeof *have);
  ladder_answer l;
  x.brief.targets[x.climbs].value = RUNGS_LEAST;
  judge_wall(shop.memory, &x.context, &w, have);
  ladder_terms terms = {.climbs = x.climbs, .have = have};
  terms.have_reaches = rungs_reached(&x.context, x.climbs, &w);
  ck_assert_int_eq(terms.have_reaches, x.rungs.lowest);
  ladder_explain(shop.memory, &x.space, &x.rungs, &terms, &l);
  for (int i = 0; i < l.count; i++) {
    ck_assert_int_gt(l.rung[i].rating, terms.have_reaches);
    ck_assert_int_eq(l.rung[i].extra_cents, l.rung[i].cost_cents - have->numbers.cost_cents);
    ck_assert_int_gt(l.rung[i].from_have.count, 0);
  }
  for (int i = 0; i < l.edit_count; i++) {
    const ladder_edit *e = &l.edit[i];
    ck_assert_int_gt(e->reaches, terms.have_reaches);
    ck_assert_uint_eq(e->wall->broken, 0);
    ck_assert_int_eq(e->reaches, rungs_reached(&x.context, x.climbs, &e->wall->wall));
    ck_assert_int_eq(e->extra_cents, e->wall->numbers.cost_cents - have->numbers.cost_cents);
    ck_assert_int_gt(e->change.count, 0);
    if (i == 0) continue;
    ck_assert_int_gt(e->reaches, e[-1].reaches);
    ck_assert_int_gt(e->extra_cents, e[-1].extra_cents);
  }
}
END_TEST

/* Changes of a wall that reaches 36, rising in cost: the first that gains 3, and 5, is the least. */
static const struct {
  int reaches[3], least_for_3, least_for_5; /* -1: none gains as much */
} gains[] = {{{38, 39, 44}, 1, 2}, {{41, 45, 50}, 0, 0}, {{37, 38, 40}, 2, -1}, {{37, 38, 38}, -1, -1}};

START_TEST(small_steps_at_least_cost) {
  ladder_answer l = {.terms.have_reaches = 36, .edit_count = 3};
  for (int i = 0; i < 3; i++) l.edit[i].reaches = gains[_i].reaches[i];
  for (int i = 0; i < 3; i++) {
    ck_assert_int_eq(ladder_least_for(&l, i, 0), i == gains[_i].least_for_3);
    ck_assert_int_eq(ladder_least_for(&l, i, 1), i == gains[_i].least_for_5);
  }
}
END_TEST

int main(void) {
  Suite *s = suite_create("explain_ladder");
  TCase *t = tcase_create("ladder");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, each_rung_is_the_pick_at_its_rating, 0, share_of(LADDER_BRIEFS));
  tcase_add_loop_test(t, rungs_are_the_cheapest_of_all_walls_judged, 0, share_of(BRUTE_BRIEFS));
  tcase_add_loop_test(t, the_value_in_the_brief_decides_nothing, 0, share_of(LADDER_BRIEFS));
  tcase_add_loop_test(t, rungs_rise_and_cover_every_rating, 0, share_of(LADDER_BRIEFS));
  tcase_add_loop_test(t, a_range_cuts_the_same_ladder, 0, share_of(LADDER_BRIEFS));
  tcase_add_loop_test(t, worth_taking_are_the_corners_of_the_lower_hull, 0, HULLS);
  tcase_add_test(t, the_target_that_climbs);
  tcase_add_loop_test(t, small_steps_at_least_cost, 0, sizeof gains / sizeof gains[0]);
  tcase_add_loop_test(t, from_a_given_wall, 0, share_of(HAVE_BRIEFS));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
