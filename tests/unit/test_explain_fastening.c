/* Heavy fixtures over a stretch: the side of two walls by hand, the ways against every wall. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include "explain/fastening.h"
#include "random_briefs.h"
#include "share.h"

enum { BRIEFS = 32 };

/* ---- a side of two walls ---- */

/* Computed: STC 54 over 6 m with 38 over 2 m gives 43.7. */
START_TEST(a_quarter_without_the_channel_takes_ten_points) {
  double good[BANDS], poor[BANDS], both[BANDS];
  for (int i = 0; i < BANDS; i++) good[i] = 54, poor[i] = 38;
  fastening_side_by_side(good, 6, poor, 2, both);
  for (int i = 0; i < BANDS; i++) ck_assert_double_eq_tol(both[i], 43.7, 0.05);
  rating_contour_curve(54, good);
  rating_contour_curve(38, poor);
  fastening_side_by_side(good, 6, poor, 2, both);
  ck_assert_double_eq_tol(rating_stc_exact(both), 43.7, 0.1); /* the rating goes in tenths */
}
END_TEST

/* ---- the ways ---- */

typedef struct scene {
  brief brief;
  judge_context context;
  fastening_choice choice[2];
  int count;
} scene;

/* A brief whose side A, now and then B too, carries heavy fixtures over a third of the wall; walls
 * with channels among those allowed. */
static void set_scene(scene *x, unsigned seed) {
  x->brief = random_brief(seed);
  x->brief.side[SIDE_A].fastening = FASTENING_HEAVY;
  x->brief.side[SIDE_A].fastening_length_m = x->brief.length_m / 3;
  if (seed % 4 == 0) x->brief.side[SIDE_B] = x->brief.side[SIDE_A];
  x->brief.only[x->brief.only_count++] = "rc";
  x->context = (judge_context){shop.catalog, shop.prices, &x->brief};
  x->count = fastening_choices(shop.memory, &x->context, NULL, x->choice);
}

static bool mounted(const wall *w, int side) {
  return w->mount[side].mount != CATALOG_NONE;
}

static bool is_of_way(const scene *x, const wall *w, fastening_way way, int side) {
  wall bare = *w;
  if (way == FASTENING_NO_MOUNT) return !mounted(w, side);
  if (way == FASTENING_APART)
    return shop.catalog->frames[w->frame].layout != FRAME_SINGLE && !mounted(w, SIDE_A) &&
           !mounted(w, SIDE_B);
  bare.mount[side] = wall_empty().mount[side];
  return mounted(w, side) && structure_fastening_ok(shop.catalog, &x->brief, &bare, side, NULL);
}

/* Cents of the cheapest wall of a way by judging every one, mirror images too; -1 when there is
 * none. */
static long long cheapest_by_hand(const scene *x, const space *s, const brute *all,
                                  fastening_way way, int side) {
  rule_mask given_up = way == FASTENING_GAP ? rule_bit(RULE_FASTENING_A + side) : 0;
  long long best = -1;
  for (int i = 0; i < all->count; i++) {
    const candidate *c = &all->wall[i];
    wall w = space_wall(s, c->core, c->face_a, c->face_b);
    bool passes = (c->broken & ~given_up) == 0 || (c->instead && (c->instead & ~given_up) == 0);
    if (passes && is_of_way(x, &w, way, side) && (best < 0 || c->is.cost_cents < best))
      best = c->is.cost_cents;
  }
  return best;
}

/* A third of what comes through is that of the bare wall; it alone lets the whole gain no more than
 * 10 lg 3 over itself. */
static void check_sound(const scene *x, const fastening_option *o) {
  double both[BANDS];
  for (int i = 0; i < BANDS; i++)
    both[i] = -10 * log10((2 * pow(10, -o->wall->predicted.tl_db[i] / 10) +
                           pow(10, -o->stretch->predicted.tl_db[i] / 10)) /
                          3);
  ck_assert_double_eq_tol(o->exact_stc, rating_stc_exact(both), 1e-9);
  ck_assert_double_le(o->exact_stc, o->stretch->exact[METRIC_STC] + 4.8);
  ck_assert_int_eq(o->ratings.stc, rating_all(both).stc);
  const brief *b = &x->brief;
  const target *t = &b->targets[0];
  double probability, sd = fmax(o->wall->sd[t->metric], o->stretch->sd[t->metric]);
  if (b->target_count > 1 || b->opening_count > 0) return;
  ratings r = rating_all(both);
  bool passes = judge_passes(t, b->field_mean, b->field_sd, rating_exact(both, t->metric),
                             rating_of(&r, t->metric), sd, false, t->confidence, &probability);
  ck_assert_int_eq(o->reaches, passes && t->evidence == EVIDENCE_ANY);
}

static void check_option(const scene *x, const fastening_choice *c, fastening_way way,
                         long long cents) {
  const fastening_option *o = &c->way[way];
  ck_assert_int_eq(o->wall != NULL, cents >= 0);
  if (!o->wall) return;
  ck_assert_int_eq(o->wall->cost.total_cents + o->wall->cost.floor_value_cents, cents);
  ck_assert_int_eq(o->stretch != NULL, way == FASTENING_GAP);
  if (!o->stretch) {
    ck_assert(o->reaches);
    ck_assert_int_eq(o->total_cents, o->wall->cost.total_cents);
    return;
  }
  ck_assert(!mounted(&o->stretch->wall, c->side));
  ck_assert(!(o->stretch->broken & rule_bit(RULE_FASTENING_A + c->side)));
  /* two parts of the length at the wall's price, one at the bare one's */
  double cost = (2.0 * (double)o->wall->cost.total_cents + (double)o->stretch->cost.total_cents) / 3;
  ck_assert_double_eq_tol((double)o->total_cents, cost, 0.51);
  ck_assert_int_lt(o->total_cents, o->wall->cost.total_cents);
  if (!o->wall->evidence.match && !o->stretch->evidence.match) check_sound(x, o);
}

START_TEST(each_way_is_the_cheapest_of_its_kind) {
  scene x;
  space s;
  set_scene(&x, (unsigned)_i);
  ck_assert_int_eq(x.count, _i % 4 == 0 ? 2 : 1);
  space_wish wish = space_wishes(&x.brief);
  wish.mirror_once = false;
  space_build_for(shop.memory, &x.context, &wish, &s);
  brute all = judge_all(&s);
  for (int i = 0; i < x.count; i++)
    for (int way = 0; way < FASTENING_WAYS; way++)
      check_option(&x, &x.choice[i], (fastening_way)way,
                   cheapest_by_hand(&x, &s, &all, (fastening_way)way, x.choice[i].side));
}
END_TEST

START_TEST(a_whole_side_leaves_no_choice) {
  brief b = random_brief(3);
  fastening_choice choice[2];
  judge_context x = {shop.catalog, shop.prices, &b};
  b.side[SIDE_A].fastening = FASTENING_HEAVY;
  b.side[SIDE_A].fastening_length_m = 0;
  b.side[SIDE_B].fastening = FASTENING_LIGHT;
  b.side[SIDE_B].fastening_length_m = 1;
  ck_assert_int_eq(fastening_choices(shop.memory, &x, NULL, choice), 0);
  b.side[SIDE_A].fastening_length_m = b.length_m;
  ck_assert_int_eq(fastening_choices(shop.memory, &x, NULL, choice), 0);
}
END_TEST

int main(void) {
  Suite *s = suite_create("explain_fastening");
  TCase *t = tcase_create("fastening");
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_set_timeout(t, 0);
  tcase_add_test(t, a_quarter_without_the_channel_takes_ten_points);
  tcase_add_test(t, a_whole_side_leaves_no_choice);
  tcase_add_loop_test(t, each_way_is_the_cheapest_of_its_kind, 0, share_of(BRIEFS));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
