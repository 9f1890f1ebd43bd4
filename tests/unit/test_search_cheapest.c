/* The search from the cheapest wall up against the full sweep, and both against themselves on other
 * numbers of threads. */
#include <math.h>
#include <stdlib.h>

#include "random_briefs.h"
#include "search/bound.h"
#include "search/cheapest.h"
#include "search/sweep.h"
#include "share.h"

enum { BRIEFS = 200, BRIEFS_A_GROUP = 20, SPACES = 3, MANY_THREADS = 4 };

typedef struct scene {
  brief brief;
  judge_context context;
  space space;
} scene;

/* Ordinary build, any build, and the whole catalog's leaf rule in turn. */
static void set_scene(scene *x, int seed) {
  x->brief = random_brief(7000u + (unsigned)seed);
  x->context = (judge_context){shop.catalog, shop.prices, &x->brief};
  if (seed % SPACES == 1) x->brief.build = BUILD_ANY;
  if (seed % SPACES == 2)
    space_build_whole(shop.memory, &x->context, &x->space);
  else
    space_build(shop.memory, &x->context, &x->space);
}

static bool same_wall(const candidate *p, const candidate *q) {
  return p->core == q->core && p->face_a == q->face_a && p->face_b == q->face_b;
}

static bool same(const candidate *p, const candidate *q) {
  return same_wall(p, q) && p->is.cost_cents == q->is.cost_cents &&
         p->is.total_cents == q->is.total_cents &&
         p->is.thickness_tenth_mm == q->is.thickness_tenth_mm &&
         p->is.mass_hundredth == q->is.mass_hundredth &&
         p->is.promised_hundredth == q->is.promised_hundredth &&
         p->is.height_mm == q->is.height_mm && p->is.fire_min == q->is.fire_min &&
         p->broken == q->broken && p->instead == q->instead;
}

START_TEST(finds_what_the_sweep_finds) {
  for (int seed = _i * BRIEFS_A_GROUP; seed < (_i + 1) * BRIEFS_A_GROUP; seed++) {
    scene x;
    sweep_result r;
    candidate best;
    set_scene(&x, seed);
    sweep_run(shop.memory, &x.space, &r);
    bool found = cheapest_find(shop.memory, &x.space, &best);
    ck_assert_msg(found == (r.runner_count > 0), "brief %d: one finds a wall", seed);
    ck_assert_msg(!found || same_wall(&best, &r.runners[0]), "brief %d: other walls", seed);
    ck_assert_int_eq(r.walls, space_count(&x.space));
  }
}
END_TEST

/* Hard targets and thickness limits: the whole space has to be refused, or nearly. */
START_TEST(finds_it_where_little_passes) {
  for (int seed = _i * BRIEFS_A_GROUP; seed < (_i + 1) * BRIEFS_A_GROUP; seed++) {
    scene x;
    sweep_result r;
    candidate best;
    set_scene(&x, seed);
    x.brief.targets[0].metric = METRIC_STC;
    x.brief.targets[0].value = 44 + seed % 20;
    x.brief.target_count = 1;
    x.brief.opening_count = 0;
    x.brief.targets[0].composite = false;
    x.brief.thickness_m = (limit){false, true, 0, 0.12 + 0.01 * (seed % 15)};
    sweep_run(shop.memory, &x.space, &r);
    bool found = cheapest_find(shop.memory, &x.space, &best);
    ck_assert_msg(found == (r.runner_count > 0), "brief %d: one finds a wall", seed);
    ck_assert_msg(!found || same_wall(&best, &r.runners[0]), "brief %d: other walls", seed);
  }
}
END_TEST

START_TEST(families_are_all_there) {
  int chosen[FAMILY_COUNT] = {0}, there[FAMILY_COUNT] = {0};
  for (int seed = 0; seed < BRIEFS; seed += 2) {
    scene x;
    candidate best;
    set_scene(&x, seed);
    for (int k = 0; k < x.space.core_count; k++)
      there[predict_family(shop.catalog, &x.space.cores[k])] = 1;
    if (cheapest_find(shop.memory, &x.space, &best))
      chosen[predict_family(shop.catalog, &x.space.cores[best.core])]++;
  }
  int families = 0;
  for (int f = 0; f < FAMILY_COUNT; f++) {
    ck_assert_msg(there[f], "no space has a wall of family %s", sound_family_names[f]);
    families += chosen[f] > 0;
  }
  ck_assert_int_ge(families, FAMILY_COUNT - 3); /* dear ones win seldom */
}
END_TEST

/* A wall costs within the slack of the sum of its keys, and its leaves stand in the lists. */
START_TEST(keys_bound_the_cost) {
  scene x;
  bound b;
  set_scene(&x, _i);
  if (x.space.core_count == 0 || x.space.face_count == 0) return;
  tables *t = tables_create(shop.memory, &x.space);
  core_facts *k = arena_alloc(shop.memory, sizeof *k);
  bound_create(shop.memory, &x.space, t, &b);
  for (int core = 0; core < x.space.core_count; core++) {
    const bound_list *on_a = bound_leaves(&b, false, core, SIDE_A);
    const bound_list *on_b = bound_leaves(&b, false, core, SIDE_B);
    tables_core(t, core, k);
    for (int i = 0; i < on_a->count; i++)
      for (int j = 0; j < on_b->count; j++) {
        candidate c;
        double key = b.core_key[core] + on_a->key[i] + on_b->key[j];
        ck_assert(tables_wall(t, k, on_a->face[i], on_b->face[j], &c));
        ck_assert_double_le(fabs(key - (double)c.is.cost_cents), b.slack);
        ck_assert_double_le(b.least[core], key);
      }
    for (int side = 0; side < 2; side++) {
      const bound_list *l = bound_leaves(&b, false, core, side);
      int able = 0;
      for (int i = 0; i < x.space.face_count; i++)
        able += x.space.on_support[(size_t)x.space.support[side][core] *
                                       (size_t)x.space.face_count +
                                   (size_t)i] &&
                !tables_face(t, i)->broken[side];
      ck_assert_int_eq(l->count, able);
      for (int g = 0; g < l->groups; g++)
        for (int p = l->group_first[g] + 1; p < l->group_first[g + 1]; p++)
          ck_assert_double_le(l->key[p - 1], l->key[p]);
    }
  }
}
END_TEST

static int list_feasible(const sweep_result *r, feasible_wall **out) {
  int count = 0;
  for (const feasible_block *b = r->feasible; b; b = b->next) count += b->count;
  *out = arena_array(shop.memory, (size_t)count, sizeof **out);
  count = 0;
  for (const feasible_block *b = r->feasible; b; b = b->next)
    for (int i = 0; i < b->count; i++) (*out)[count++] = b->wall[i];
  return count;
}

START_TEST(threads_change_nothing) {
  scene x;
  sweep_result one, many;
  candidate p, q;
  feasible_wall *f, *g;
  set_scene(&x, _i);
  x.space.threads = 1;
  sweep_run(shop.memory, &x.space, &one);
  bool found = cheapest_find(shop.memory, &x.space, &p);
  x.space.threads = MANY_THREADS;
  sweep_run(shop.memory, &x.space, &many);
  ck_assert(cheapest_find(shop.memory, &x.space, &q) == found);
  if (found) ck_assert(same_wall(&p, &q));
  ck_assert_int_eq(one.walls, many.walls);
  ck_assert_int_eq(one.frontier_count, many.frontier_count);
  for (int i = 0; i < one.frontier_count; i++)
    ck_assert(same(&one.frontier[i], &many.frontier[i]));
  ck_assert_int_eq(one.mask_count, many.mask_count);
  for (int i = 0; i < one.mask_count; i++) {
    ck_assert_uint_eq(one.masks[i].broken, many.masks[i].broken);
    ck_assert(same(&one.masks[i].best, &many.masks[i].best));
  }
  ck_assert_int_eq(one.runner_count, many.runner_count);
  for (int i = 0; i < one.runner_count; i++) ck_assert(same(&one.runners[i], &many.runners[i]));
  int count = list_feasible(&one, &f);
  ck_assert_int_eq(count, list_feasible(&many, &g));
  for (int i = 0; i < count; i++)
    ck_assert(f[i].core == g[i].core && f[i].face_a == g[i].face_a && f[i].face_b == g[i].face_b &&
              f[i].certain == g[i].certain);
}
END_TEST

int main(void) {
  Suite *s = suite_create("search_cheapest");
  TCase *t = tcase_create("bounds and threads");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, finds_what_the_sweep_finds, 0, share_of(BRIEFS / BRIEFS_A_GROUP));
  tcase_add_loop_test(t, finds_it_where_little_passes, 0, share_of(BRIEFS / BRIEFS_A_GROUP));
  tcase_add_test(t, families_are_all_there);
  tcase_add_loop_test(t, keys_bound_the_cost, 0, share_of(30));
  tcase_add_loop_test(t, threads_change_nothing, 0, share_of(30));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
