/* What a wall gives where it stands: by the depth of a room, and under a ceiling. */
#include <check.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "explain/ceiling.h"
#include "explain/rooms.h"

static const double tenth = 0.05; /* the figures below are given in tenths */

/* 10 lg(0.32 V/S), computed: the step from ASTC to NNIC by the depth of the room. */
static const struct {
  double depth_m, step_db;
} depths[] = {{2.4, -1.1}, {3.0, -0.2}, {4.5, 1.6}, {6.0, 2.8}};

START_TEST(a_deep_room_is_measured_higher) {
  /* 2.4 m gives -1.146, cut to -1.1 */
  ck_assert_double_eq_tol(rooms_step(depths[_i].depth_m), depths[_i].step_db, tenth + 1e-9);
}
END_TEST

static assessment *rated(int stc) {
  static assessment x;
  memset(&x, 0, sizeof x);
  x.ratings.stc = stc;
  return &x;
}

START_TEST(nothing_is_said_about_the_field_unless_asked) {
  brief b;
  job_defaults(&b);
  b.targets[b.target_count++] = (target){.metric = METRIC_STC, .value = 50, .basis = BASIS_LAB};
  ck_assert(!rooms_rating(&b, rated(53)).there);
  b.targets[0].basis = BASIS_FIELD;
  room_rating r = rooms_rating(&b, rated(53));
  ck_assert(r.there && !r.has_nnic[SIDE_A] && !r.has_nnic[SIDE_B]);
  ck_assert_double_eq_tol(r.astc, 48, 1e-9); /* the usual allowance of 5 */
}
END_TEST

START_TEST(each_side_has_its_own_depth) {
  brief b;
  job_defaults(&b);
  b.field_mean = 3;
  b.side[SIDE_B].room_depth_m = 6;
  assessment *x = rated(53);
  room_rating r = rooms_rating(&b, x);
  ck_assert(r.there && !r.has_nnic[SIDE_A] && r.has_nnic[SIDE_B]);
  ck_assert_double_eq_tol(r.nnic[SIDE_B], 52.8, tenth);
  x->has_composite = true; /* a door is part of what is measured */
  x->composite.stc = 40;
  ck_assert_double_eq_tol(rooms_rating(&b, x).astc, 37, 1e-9);
}
END_TEST

/* Classes and what batts add: common practice, no source. The sums are worked by hand:
 * -10 lg(10^-5.3 + 10^-3.5) = 34.9. */
static const struct {
  const char *name;
  double given;
  bool batts;
  double class_all, wall, both;
} ceilings[] = {
    {"mineral tile, not said", 0, false, 35, 53, 34.9},
    {"mineral tile with batts", 0, true, 40, 53, 39.8},
    {"glass-fibre tile", 25, false, 25, 53, 25.0},
    {"as good as the wall", 50, false, 50, 50, 47.0},
    {"a weak wall under a good ceiling", 40, true, 45, 30, 29.9},
};

START_TEST(a_ceiling_caps_the_wall) {
  brief b;
  job_defaults(&b);
  ck_assert(!ceiling_path_of(&b).there);
  b.top = TOP_CEILING;
  b.ceiling_class = ceilings[_i].given;
  b.ceiling_batts = ceilings[_i].batts;
  ceiling_path p = ceiling_path_of(&b);
  ck_assert(p.there);
  ck_assert_int_eq(p.assumed, ceilings[_i].given == 0);
  ck_assert_double_eq_tol(p.class_all, ceilings[_i].class_all, 1e-9);
  ck_assert_double_eq_tol(ceiling_capped(&p, ceilings[_i].wall), ceilings[_i].both, tenth);
}
END_TEST

START_TEST(fire_and_45_go_to_the_deck) {
  brief b;
  job_defaults(&b);
  ck_assert(!job_needs_deck(&b));
  b.targets[b.target_count++] = (target){.metric = METRIC_STC, .value = 44};
  ck_assert(!job_needs_deck(&b));
  b.targets[0].margin = 1;
  ck_assert(job_needs_deck(&b));
  b.targets[0].margin = 0;
  b.fire_min = 30;
  ck_assert(job_needs_deck(&b));
}
END_TEST

int main(void) {
  Suite *s = suite_create("explain_rooms");
  TCase *t = tcase_create("rooms");
  tcase_add_loop_test(t, a_deep_room_is_measured_higher, 0, sizeof depths / sizeof depths[0]);
  tcase_add_test(t, nothing_is_said_about_the_field_unless_asked);
  tcase_add_test(t, each_side_has_its_own_depth);
  tcase_add_loop_test(t, a_ceiling_caps_the_wall, 0, sizeof ceilings / sizeof ceilings[0]);
  tcase_add_test(t, fire_and_45_go_to_the_deck);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
