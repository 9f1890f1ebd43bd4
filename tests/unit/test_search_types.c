/* The types of seeded small projects against judge_wall and cost_takeoff, wall by wall. */
#include <stdio.h>
#include <stdlib.h>

#include "random_briefs.h"
#include "random_project.h"
#include "share.h"

enum { PROJECTS = 24, CLASSES = 4 };
/* Needs are rounded to a millionth of a unit for each of a wall's seven parts; printed are tenths.
 */
static const double need_slack = 1e-5;
/* Floor areas are sums of metres times millimetres: only the last bits differ. */
static const double floor_slack_m2 = 1e-6;

typedef struct scene {
  diag_list faults;
  project project;
  schedule *schedule;
  plan_context x;
} scene;

static void set_scene(scene *s, int seed, const char *more) {
  diag_init(&s->faults, shop.memory);
  s->schedule = project_small(shop.memory, &s->faults, shop.catalog, (unsigned)seed, CLASSES, more,
                              &s->project);
  ck_assert_msg(s->schedule != NULL, "project %d reads", seed);
  s->x = (plan_context){shop.catalog, shop.prices, &s->project, s->schedule};
}

static void set_rows(scene *s, const char *more, const char *walls) {
  diag_init(&s->faults, shop.memory);
  s->schedule = project_from(shop.memory, &s->faults, shop.catalog, more, walls, &s->project);
  ck_assert_ptr_nonnull(s->schedule);
  s->x = (plan_context){shop.catalog, shop.prices, &s->project, s->schedule};
}

/* ---- what a use must be, the slow way ---- */

static int goods_place(const plan_types *t, int item) {
  for (int i = 0; i < t->items; i++)
    if (t->item[i] == item) return i;
  return -1;
}

/* One copy of a row, line by line: goods of the whole project, and the markups on them, left out.
 */
static long long row_cents(const plan_types *t, const brief *b, const wall *w, double count,
                           double *need) {
  takeoff *lines = arena_alloc(shop.memory, sizeof *lines);
  cost_total total;
  long long material = 0, labour = 0;
  cost_takeoff(shop.prices, shop.catalog, b, w, lines, &total);
  ck_assert(!lines->missing);
  for (int i = 0; i < lines->count; i++) {
    const cost_line *l = &lines->line[i];
    int goods = l->kind == LINE_MARKUP ? -1 : goods_place(t, l->item);
    if (l->kind == LINE_LABOUR) labour += l->cents;
    if (l->kind != LINE_MATERIAL) continue;
    if (goods >= 0)
      need[goods] += count * l->quantity;
    else
      material += l->cents;
  }
  long long tax = cost_cents((double)material * shop.prices->sales_tax / 100);
  long long profit =
      cost_cents((double)(material + labour + tax) * shop.prices->overhead_profit / 100);
  return material + labour + tax + profit + total.floor_value_cents;
}

static long long class_cents(const scene *s, const plan_types *t, int c, const wall *w,
                             double *need) {
  const schedule_class *k = &s->schedule->classes[c];
  long long cents = 0;
  for (int i = 0; i < t->items; i++) need[i] = 0;
  for (int i = 0; i < k->count; i++) {
    brief b;
    int count = s->schedule->wall[k->wall[i]].count;
    schedule_brief(s->schedule, k->wall[i], &b);
    cents += count * row_cents(t, &b, w, count, need);
  }
  return cents;
}

static bool judged_fit(const scene *s, int c, const wall *w, int *margin) {
  arena *a = arena_create(0, &shop.out_of_memory);
  judge_context x = {shop.catalog, shop.prices, &s->schedule->classes[c].demand};
  ck_assert_ptr_nonnull(a);
  assessment *as = arena_alloc(a, sizeof *as);
  judge_wall(a, &x, w, as);
  bool fits = as->broken == 0;
  *margin = as->numbers.promised_hundredth;
  arena_free(a);
  return fits;
}

static void check_use(const scene *s, const plan_types *t, const plan_type *type, int c) {
  const type_use *u = &type->use[c];
  wall way[2] = {type->wall, wall_mirrored(shop.catalog, &type->wall)};
  bool fits[2];
  long long cents[2];
  double *need[2];
  int margin[2];
  for (int i = 0; i < 2; i++) {
    fits[i] = judged_fit(s, c, &way[i], &margin[i]);
    need[i] = arena_array(shop.memory, (size_t)t->items, sizeof *need[i]);
    cents[i] = class_cents(s, t, c, &way[i], need[i]);
  }
  ck_assert_msg(u->fits == (fits[0] || fits[1]), "%s in class %d", type->line, c);
  if (!u->fits) return;
  bool turned = !fits[0] || (fits[1] && cents[1] < cents[0]);
  ck_assert_int_eq(u->turned, turned);
  ck_assert_int_eq(u->cents, cents[turned]);
  ck_assert_int_eq(u->margin_hundredth, margin[turned]);
  for (int i = 0; i < t->items; i++)
    ck_assert_double_eq_tol(type->need[c * t->items + i], need[turned][i], need_slack);
  double floor_m2 = 0;
  for (int i = 0; i < s->schedule->classes[c].count; i++) {
    const schedule_wall *row = &s->schedule->wall[s->schedule->classes[c].wall[i]];
    floor_m2 += row->count * row->length_m * wall_thickness_m(shop.catalog, &type->wall);
  }
  ck_assert_double_eq_tol(u->floor_m2, floor_m2, floor_slack_m2);
}

/* Every so many of a long list, the first always. */
static int stride(int count, int most) {
  return count > most ? count / most : 1;
}

START_TEST(uses_are_what_the_judge_and_the_takeoff_say) {
  scene s;
  plan_types t;
  set_scene(&s, _i, "");
  types_find(shop.memory, &s.x, TYPES_ALL, &t);
  for (int i = 0; i < t.count; i += stride(t.count, 40))
    for (int c = 0; c < s.schedule->class_count; c++) check_use(&s, &t, &t.type[i], c);
  types_find(shop.memory, &s.x, TYPES_NEEDED, &t);
  for (int i = 0; i < t.count; i += stride(t.count, 20))
    for (int c = 0; c < s.schedule->class_count; c++) check_use(&s, &t, &t.type[i], c);
}
END_TEST

/* ---- nothing is left out ---- */

static const plan_type *type_of(const plan_types *t, const wall *w) {
  wall other = wall_mirrored(shop.catalog, w);
  for (int i = 0; i < t->count; i++)
    if (wall_same(&t->type[i].wall, w) || wall_same(&t->type[i].wall, &other)) return &t->type[i];
  return NULL;
}

/* Each class's own space, as `pick` goes through it. */
START_TEST(every_wall_that_keeps_a_demand_is_a_type) {
  scene s;
  plan_types t;
  set_scene(&s, _i, "");
  types_find(shop.memory, &s.x, TYPES_ALL, &t);
  for (int c = 0; c < s.schedule->class_count; c++) {
    judge_context x = {shop.catalog, shop.prices, &s.schedule->classes[c].demand};
    space own;
    sweep_result r;
    int looked = 0;
    space_build(shop.memory, &x, &own);
    sweep_run(shop.memory, &own, &r);
    for (const feasible_block *b = r.feasible; b; b = b->next)
      for (int i = 0; i < b->count; i++) {
        const feasible_wall *f = &b->wall[i];
        if (!f->certain && !sweep_confirms(&own, f)) continue;
        wall w = space_wall(&own, f->core, f->face_a, f->face_b);
        const plan_type *found = type_of(&t, &w);
        ck_assert_msg(found && found->use[c].fits, "class %d of project %d", c, _i);
        looked++;
      }
    ck_assert_int_eq(t.refused[c] == NULL, looked > 0);
  }
}
END_TEST

static bool needs_no_more(const plan_types *t, const plan_type *x, const plan_type *y, int c) {
  for (int i = 0; i < t->items; i++)
    if (x->need[c * t->items + i] > y->need[c * t->items + i]) return false;
  return true;
}

/* The plain rule, without what prices of goods can do: whoever is beaten by it must go. */
static bool plainly_stands_for(const scene *s, const plan_types *t, const plan_type *x,
                               const plan_type *y) {
  if (s->project.same_framing != FRAMING_FREE && x->group != y->group) return false;
  for (int c = 0; c < s->schedule->class_count; c++) {
    const type_use *u = &x->use[c], *v = &y->use[c];
    if (!v->fits) continue;
    if (!u->fits || u->cents > v->cents || !needs_no_more(t, x, y, c)) return false;
    if (s->project.aim == AIM_MARGIN && u->margin_hundredth < v->margin_hundredth) return false;
    if (s->project.floor_area_max_m2 > 0 && u->floor_m2 > v->floor_m2) return false;
  }
  return true;
}

/* Extremes and the ordinary: aims and limits that a wall has to be as good in. */
static const char *const aims[] = {"", "\"objective\":\"margin\",\"budget\":900000,",
                                   "\"floor_area_max_m2\":40,"};

START_TEST(what_is_dropped_is_beaten_and_what_is_kept_is_not) {
  scene s;
  plan_types all, kept;
  set_scene(&s, _i, aims[_i % 3]);
  types_find(shop.memory, &s.x, TYPES_ALL, &all);
  types_find(shop.memory, &s.x, TYPES_NEEDED, &kept);
  ck_assert_int_le(kept.count, all.count);
  for (int i = 0; i < kept.count; i++) {
    ck_assert_ptr_nonnull(type_of(&all, &kept.type[i].wall));
    for (int j = 0; j < kept.count; j++)
      ck_assert(i == j || !plainly_stands_for(&s, &kept, &kept.type[i], &kept.type[j]));
  }
  if (all.items > 0) return; /* then a plan's cost decides: tests of the selection */
  for (int i = 0; i < all.count; i++) {
    bool found = false;
    for (int j = 0; j < kept.count && !found; j++)
      found = plainly_stands_for(&s, &all, &kept.type[j], &all.type[i]);
    ck_assert_msg(found, "%s", all.type[i].line);
  }
}
END_TEST

/* ---- the rest ---- */

static void same_types(const plan_types *x, const plan_types *y, int classes) {
  ck_assert_int_eq(x->count, y->count);
  ck_assert_int_eq(x->walls, y->walls);
  ck_assert_int_eq(x->rated, y->rated);
  for (int i = 0; i < x->count; i++) {
    const plan_type *p = &x->type[i], *q = &y->type[i];
    ck_assert_str_eq(p->line, q->line);
    ck_assert_int_eq(p->behind, q->behind);
    for (int c = 0; c < classes; c++) {
      ck_assert_int_eq(p->use[c].fits, q->use[c].fits);
      ck_assert_int_eq(p->use[c].turned, q->use[c].turned);
      ck_assert_int_eq(p->use[c].cents, q->use[c].cents);
      for (int k = 0; k < x->items; k++)
        ck_assert_double_eq(p->need[c * x->items + k], q->need[c * x->items + k]);
    }
  }
}

START_TEST(threads_change_nothing) {
  static const int keeps[] = {TYPES_NEEDED, TYPES_AND_SECONDS};
  scene s;
  set_scene(&s, _i, aims[_i % 3]);
  for (int k = 0; k < 2; k++) {
    plan_types one, more;
    ck_assert_int_eq(setenv("SEPTUM_THREADS", "1", 1), 0);
    types_find(shop.memory, &s.x, keeps[k], &one);
    ck_assert_int_eq(setenv("SEPTUM_THREADS", "3", 1), 0);
    types_find(shop.memory, &s.x, keeps[k], &more);
    ck_assert_int_eq(unsetenv("SEPTUM_THREADS"), 0);
    same_types(&one, &more, s.schedule->class_count);
  }
}
END_TEST

START_TEST(a_wall_of_the_drawings_is_the_type_that_it_is) {
  scene s;
  plan_types t;
  set_scene(&s, _i, "");
  types_find(shop.memory, &s.x, TYPES_NEEDED, &t);
  for (int i = 0; i < t.count; i += stride(t.count, 12)) {
    const plan_type *p = &t.type[i];
    plan_type q;
    ck_assert(types_of_wall(shop.memory, &s.x, &t, &p->wall, &q));
    ck_assert_str_eq(p->line, q.line);
    ck_assert_int_eq(p->group, q.group);
    for (int c = 0; c < s.schedule->class_count; c++) {
      ck_assert_int_eq(p->use[c].fits, q.use[c].fits);
      if (!p->use[c].fits) continue;
      ck_assert_int_eq(p->use[c].turned, q.use[c].turned);
      ck_assert_int_eq(p->use[c].cents, q.use[c].cents);
      ck_assert_int_eq(p->use[c].margin_hundredth, q.use[c].margin_hundredth);
      ck_assert_double_eq_tol(p->use[c].floor_m2, q.use[c].floor_m2, floor_slack_m2);
      for (int k = 0; k < t.items; k++)
        ck_assert_double_eq_tol(p->need[c * t.items + k], q.need[c * t.items + k], need_slack);
    }
  }
}
END_TEST

/* A plumbing wall between a bath and a classroom has a different board on either side: drawn the
 * other way round it serves the same rows as well. */
START_TEST(a_type_serves_from_either_side) {
  static const char walls[] = "id,length,height,target,wet_a,wet_b,abuse_a,abuse_b,fastening_a\n"
                              "W1,6m,2.7m,40,yes,,,yes,light\nW2,4m,2.7m,40,,yes,yes,,none\n";
  static const char more[] =
      "\"only\":[\"moist-16\",\"abuse-16\",\"steel-92-18\",\"glass-89\",\"mount:none-of-them\"],";
  scene s;
  plan_types t;
  plan_type other;
  set_rows(&s, more, walls);
  types_find(shop.memory, &s.x, TYPES_NEEDED, &t);
  ck_assert_int_gt(t.count, 0);
  wall mirrored = wall_mirrored(shop.catalog, &t.type[0].wall);
  ck_assert(!wall_same(&mirrored, &t.type[0].wall));
  ck_assert(types_of_wall(shop.memory, &s.x, &t, &mirrored, &other));
  for (int c = 0; c < s.schedule->class_count; c++) {
    check_use(&s, &t, &t.type[0], c);
    check_use(&s, &t, &other, c);
    ck_assert(t.type[0].use[c].fits && other.use[c].fits);
    ck_assert_int_eq(t.type[0].use[c].turned, !other.use[c].turned);
    ck_assert_int_eq(t.type[0].use[c].cents, other.use[c].cents);
  }
}
END_TEST

START_TEST(what_no_wall_can_be_is_told_why) {
  static const char walls[] = "id,length,height,target,thickness_max_mm\n"
                              "W1,6m,2.7m,65,90\nW2,4m,2.7m,40,\n";
  static const char more[] =
      "\"only\":[\"typex-16\",\"steel-92-18\",\"steel-64-18\",\"glass-89\"],";
  scene s;
  plan_types t;
  set_rows(&s, more, walls);
  types_find(shop.memory, &s.x, TYPES_NEEDED, &t);
  ck_assert_ptr_null(t.refused[1]);
  ck_assert_ptr_nonnull(t.refused[0]);
  const type_refusal *r = t.refused[0];
  ck_assert_ptr_eq(r->context.brief, &s.schedule->classes[0].demand);
  ck_assert_int_gt(r->why.mask_count, 0);
  for (int i = 0; i < r->why.mask_count; i++) ck_assert_uint_ne(r->why.masks[i].broken, 0);
  ck_assert_int_gt(t.count, 0);
  for (int i = 0; i < t.count; i++) ck_assert(!t.type[i].use[0].fits && t.type[i].use[1].fits);
}
END_TEST

int main(void) {
  Suite *s = suite_create("search_types");
  TCase *t = tcase_create("against judge and takeoff");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, uses_are_what_the_judge_and_the_takeoff_say, 0, share_of(PROJECTS));
  tcase_add_loop_test(t, every_wall_that_keeps_a_demand_is_a_type, 0, share_of(PROJECTS));
  tcase_add_loop_test(t, what_is_dropped_is_beaten_and_what_is_kept_is_not, 0,
                      share_of(2 * PROJECTS));
  tcase_add_loop_test(t, threads_change_nothing, 0, share_of(PROJECTS));
  tcase_add_loop_test(t, a_wall_of_the_drawings_is_the_type_that_it_is, 0, share_of(PROJECTS));
  tcase_add_test(t, a_type_serves_from_either_side);
  tcase_add_test(t, what_no_wall_can_be_is_told_why);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
