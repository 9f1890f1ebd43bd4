/* The enumerated walls: all legal, none twice, what `only` and `without` leave, order of lines. */
#include <stdio.h>
#include <stdlib.h>

#include "random_briefs.h"
#include "search/space.h"
#include "search/tables.h"
#include "wall/line.h"

/* The whole ordinary space: what a sweep of some seconds can take, and enough to choose from
 * (design: about 10^6). */
enum { FEWEST_WALLS = 100000, MOST_WALLS = 2000000, LINE_PAIRS = 20000, ANY_SAMPLES = 20000 };

static brief plain_brief(void) {
  brief b;
  job_defaults(&b);
  b.target_count = 1;
  b.targets[0] = (target){.metric = METRIC_STC, .value = 50, .confidence = 0.8};
  return b;
}

static void make_space(const brief *b, judge_context *x, space *s) {
  *x = (judge_context){shop.catalog, shop.prices, b};
  space_build(shop.memory, x, s);
}

typedef void (*each_wall)(const space *s, int core, int face_a, int face_b, void *user);

static void for_each(const space *s, each_wall visit, void *user) {
  for (int k = 0; k < s->core_count; k++)
    for (int i = 0; i < s->face_count; i++)
      for (int j = 0; j < s->face_count; j++)
        if (space_legal(s, k, i, j)) visit(s, k, i, j, user);
}

static void check_fine(const space *s, int core, int face_a, int face_b, void *user) {
  compat_report r;
  wall w = space_wall(s, core, face_a, face_b);
  compat_check(s->context->catalog, &w, &r);
  ck_assert_msg(r.worst == COMPAT_FINE, "%s: %s", line_print(shop.memory, s->context->catalog, &w),
                r.count > 0 ? r.finding[0].reason : "");
  ++*(long long *)user;
}

static void set_plain(brief *b) {
  (void)b;
}
static void set_wet(brief *b) {
  b->side[SIDE_A].wet = true;
}
static void set_abuse_both(brief *b) {
  b->side[SIDE_A].abuse = b->side[SIDE_B].abuse = true;
}

static const struct {
  const char *name;
  void (*set)(brief *);
} rooms[] = {
    {"plain rooms", set_plain},
    {"one wet room", set_wet},
    {"two abused rooms", set_abuse_both},
};

START_TEST(ordinary_walls_have_no_finding) {
  judge_context x;
  space s;
  long long count = 0;
  brief b = plain_brief();
  rooms[_i].set(&b);
  make_space(&b, &x, &s);
  for_each(&s, check_fine, &count);
  ck_assert_int_eq(count, space_count(&s));
  ck_assert_msg(count >= FEWEST_WALLS && count <= MOST_WALLS, "%s: %lld walls", rooms[_i].name,
                count);
}
END_TEST

START_TEST(any_build_has_more_walls_and_none_that_cannot_be_built) {
  judge_context x;
  space ordinary, any;
  brief b = plain_brief();
  make_space(&b, &x, &ordinary);
  long long fewer = space_count(&ordinary);
  b.build = BUILD_ANY;
  make_space(&b, &x, &any);
  ck_assert_int_gt(space_count(&any), fewer);
  dice_state = 1;
  for (int n = 0; n < ANY_SAMPLES; n++) {
    int k = (int)dice((unsigned)any.core_count), i = (int)dice((unsigned)any.face_count),
        j = (int)dice((unsigned)any.face_count);
    if (!space_legal(&any, k, i, j)) continue;
    compat_report r;
    wall w = space_wall(&any, k, i, j);
    compat_check(shop.catalog, &w, &r);
    ck_assert_int_ne(r.worst, COMPAT_ILLEGAL);
  }
}
END_TEST

/* ---- mirror images ---- */

static bool in_space(const space *s, const wall *w) {
  for (int k = 0; k < s->core_count; k++)
    for (int i = 0; i < s->face_count; i++)
      for (int j = 0; j < s->face_count; j++) {
        if (!space_legal(s, k, i, j)) continue;
        wall other = space_wall(s, k, i, j);
        if (wall_same(w, &other)) return true;
      }
  return false;
}

static brief small_brief(void) {
  brief b = plain_brief();
  add_only(&b, "typex-16");
  add_only(&b, "osb-11");
  add_only(&b, "wood-89");
  add_only(&b, "wood-89-stag-140");
  add_only(&b, "glass-89");
  add_only(&b, "rc");
  return b;
}

static void check_one_of_two(const space *s, int core, int face_a, int face_b, void *user) {
  const space *both = user;
  wall w = space_wall(s, core, face_a, face_b), m = wall_mirrored(s->context->catalog, &w);
  if (!wall_same(&w, &m)) ck_assert(!in_space(s, &m));
  ck_assert(in_space(both, &w));
  ck_assert_msg(in_space(both, &m), "%s", line_print(shop.memory, s->context->catalog, &m));
}

START_TEST(alike_rooms_see_one_of_two_mirror_images) {
  judge_context x, y;
  space once, both;
  brief b = small_brief(), c = small_brief();
  make_space(&b, &x, &once);
  ck_assert(once.mirror_once);
  c.side[SIDE_B].fastening = FASTENING_HEAVY;
  make_space(&c, &y, &both);
  ck_assert(!both.mirror_once);
  for_each(&once, check_one_of_two, &both);
  long long symmetric = 0;
  for (int k = 0; k < once.core_count; k++)
    for (int i = 0; i < once.face_count; i++)
      symmetric += once.own_mirror[k] && space_legal(&once, k, i, i);
  ck_assert_int_eq(2 * space_count(&once) - symmetric, space_count(&both));
}
END_TEST

/* common practice, no source: where one row of two is filled it is A's */
START_TEST(a_row_alone_is_filled_on_side_a) {
  judge_context x;
  space s;
  brief b = plain_brief();
  int alone = 0;
  b.side[SIDE_B].fastening = FASTENING_LIGHT;
  make_space(&b, &x, &s);
  for (int k = 0; k < s.core_count; k++) {
    const wall *w = &s.cores[k];
    if (!wall_is_double(shop.catalog, w) || w->fill[0] == w->fill[1]) continue;
    ck_assert_int_ne(w->fill[0], CATALOG_NONE);
    alone++;
  }
  ck_assert_int_gt(alone, 0);
}
END_TEST

/* ---- only ---- */

static void check_only(const space *s, int core, int face_a, int face_b, void *user) {
  (void)user;
  const catalog *c = s->context->catalog;
  wall w = space_wall(s, core, face_a, face_b);
  const char *frame_id = c->frames[w.frame].id;
  ck_assert(text_equal(frame_id, "wood-89") || text_equal(frame_id, "wood-89-stag-140"));
  for (int side = 0; side < 2; side++) {
    for (int i = 0; i < w.side[side].count; i++) {
      const char *id = c->layers[w.side[side].layer[i]].id;
      ck_assert(text_equal(id, "typex-16") || text_equal(id, "osb-11"));
    }
    if (w.fill[side] != CATALOG_NONE) ck_assert_str_eq(c->fills[w.fill[side]].id, "glass-89");
    if (w.mount[side].mount != CATALOG_NONE)
      ck_assert_str_eq(c->mounts[w.mount[side].mount].id, "rc");
  }
}

START_TEST(only_leaves_what_it_names_and_none) {
  judge_context x;
  space s;
  brief b = small_brief();
  make_space(&b, &x, &s);
  ck_assert_int_gt(space_count(&s), 0);
  for_each(&s, check_only, NULL);
  wall w;
  diag_list d;
  diag_init(&d, shop.memory);
  ck_assert(line_parse(shop.memory, &d, shop.catalog, "typex-16 | wood-89@406 | typex-16", &w));
  ck_assert(in_space(&s, &w)); /* no fill and no mount are always allowed */
}
END_TEST

START_TEST(kinds_that_only_does_not_name_are_free) {
  judge_context x, y;
  space all, some;
  brief b = plain_brief(), c = plain_brief();
  add_only(&c, "frame:wood-*");
  make_space(&b, &x, &all);
  make_space(&c, &y, &some);
  ck_assert_int_eq(all.face_count, some.face_count);
  ck_assert_int_lt(some.core_count, all.core_count);
  for (int k = 0; k < some.core_count; k++)
    ck_assert_int_eq(shop.catalog->frames[some.cores[k].frame].material, FRAME_WOOD);
}
END_TEST

START_TEST(a_record_named_in_full_is_used_though_not_proposed) {
  judge_context x;
  space s;
  brief b = plain_brief();
  add_only(&b, "steel-92-27"); /* special: unusual in ordinary build */
  make_space(&b, &x, &s);
  ck_assert_int_eq(s.core_count, 0);
  b.only[0] = "steel-64-30"; /* stocked, not proposed */
  make_space(&b, &x, &s);
  ck_assert_int_gt(s.core_count, 0);
  b.only[0] = "steel-64-3?"; /* a pattern proposes what ordinary build would */
  make_space(&b, &x, &s);
  for (int k = 0; k < s.core_count; k++)
    ck_assert_str_eq(shop.catalog->frames[s.cores[k].frame].id, "steel-64-33");
}
END_TEST

/* ---- heavy sides ---- */

static void check_heavy(const space *s, int core, int face_a, int face_b, void *user) {
  tables *t = user;
  candidate c;
  core_facts *k = arena_alloc(shop.memory, sizeof *k);
  if (s->cores[core].mount[SIDE_A].mount == CATALOG_NONE) return;
  tables_core(t, core, k);
  ck_assert(tables_wall(t, k, face_a, face_b, &c));
  ck_assert(c.broken & rule_bit(RULE_FASTENING_A));
}

/* common practice, no source: fixtures through a mounted leaf bridge its mount */
START_TEST(a_heavy_side_never_gets_a_mount) {
  judge_context x;
  space s;
  brief b = small_brief();
  b.side[SIDE_A].fastening = FASTENING_HEAVY;
  make_space(&b, &x, &s);
  for_each(&s, check_heavy, tables_create(shop.memory, &s));
}
END_TEST

/* ---- lines ---- */

START_TEST(lines_compare_as_strings) {
  judge_context x;
  space s;
  brief b = plain_brief();
  make_space(&b, &x, &s);
  dice_state = 5;
  for (int n = 0; n < LINE_PAIRS; n++) {
    int core[2], a[2], c[2];
    const char *line[2];
    for (int i = 0; i < 2; i++) {
      core[i] = (int)dice((unsigned)s.core_count);
      a[i] = n % 2 && i == 1
                 ? a[0]
                 : (int)dice((unsigned)s.face_count); /* half of them alike at the start */
      c[i] = (int)dice((unsigned)s.face_count);
      wall w = space_wall(&s, core[i], a[i], c[i]);
      line[i] = line_print(shop.memory, shop.catalog, &w);
    }
    int order = space_compare_lines(&s, core[0], a[0], c[0], core[1], a[1], c[1]),
        as_strings = strcmp(line[0], line[1]);
    ck_assert_msg((order > 0) - (order < 0) == (as_strings > 0) - (as_strings < 0), "%s / %s",
                  line[0], line[1]);
  }
}
END_TEST

/* Leaves of the whole catalog: n equal finish boards, alone or over one backing board, at most one
 * membrane; their walls can all be built, and any two leaves that compat lets meet do. */
START_TEST(the_whole_catalog_keeps_its_leaf_rule) {
  brief b = plain_brief();
  judge_context x = {shop.catalog, shop.prices, &b};
  space s;
  space_build_whole(shop.memory, &x, &s);
  for (int i = 0; i < s.face_count; i++) {
    const face *f = &s.faces[i];
    int boards = face_boards(shop.catalog, f), others = 0;
    ck_assert(boards >= 1 && boards <= 3 && f->count - boards <= 1);
    for (int k = 0; k < f->count; k++)
      others += f->layer[k] != f->layer[0] && !shop.catalog->layers[f->layer[k]].membrane;
    ck_assert_int_le(others, 1);
  }
  ck_assert(space_count(&s) >= 500000000LL);
  dice_state = 5;
  int legal = 0;
  for (int n = 0; n < ANY_SAMPLES; n++) {
    int core = (int)dice((unsigned)s.core_count), i = (int)dice((unsigned)s.face_count);
    int j = (int)dice((unsigned)s.face_count);
    bool meet = compat_pair(shop.catalog, &s.faces[i], &s.faces[j]) <= COMPAT_UNUSUAL;
    ck_assert(s.pair[(size_t)i * (size_t)s.face_count + (size_t)j] == meet);
    if (!space_legal(&s, core, i, j)) continue;
    compat_report r;
    wall w = space_wall(&s, core, i, j);
    compat_check(shop.catalog, &w, &r);
    ck_assert_int_le(r.worst, COMPAT_UNUSUAL);
    legal++;
  }
  ck_assert_int_gt(legal, ANY_SAMPLES / 10);
}
END_TEST

/* The row of a leaf is what is legal, and the count is their sum. */
START_TEST(rows_and_count_are_what_is_legal) {
  for (unsigned seed = 0; seed < 40; seed++) {
    brief b = random_brief(seed);
    judge_context x = {shop.catalog, shop.prices, &b};
    space s;
    if (seed % 2)
      space_build_whole(shop.memory, &x, &s);
    else
      space_build(shop.memory, &x, &s);
    int *row = arena_array(shop.memory, (size_t)s.face_count, sizeof *row);
    long long count = 0;
    for (int k = 0; k < s.core_count; k++)
      for (int i = 0; i < s.face_count; i++) {
        int n = space_row(&s, k, i, row), at = 0;
        for (int j = 0; j < s.face_count; j++) {
          if (!space_legal(&s, k, i, j)) continue;
          ck_assert(at < n && row[at] == j);
          at++;
        }
        ck_assert_int_eq(at, n);
        count += n;
      }
    ck_assert_int_eq(count, space_count(&s));
  }
}
END_TEST

int main(void) {
  Suite *s = suite_create("search_space");
  TCase *t = tcase_create("walls");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, ordinary_walls_have_no_finding, 0, (int)(sizeof rooms / sizeof rooms[0]));
  tcase_add_test(t, any_build_has_more_walls_and_none_that_cannot_be_built);
  tcase_add_test(t, alike_rooms_see_one_of_two_mirror_images);
  tcase_add_test(t, a_row_alone_is_filled_on_side_a);
  tcase_add_test(t, only_leaves_what_it_names_and_none);
  tcase_add_test(t, kinds_that_only_does_not_name_are_free);
  tcase_add_test(t, a_record_named_in_full_is_used_though_not_proposed);
  tcase_add_test(t, a_heavy_side_never_gets_a_mount);
  tcase_add_test(t, lines_compare_as_strings);
  tcase_add_test(t, the_whole_catalog_keeps_its_leaf_rule);
  tcase_add_test(t, rows_and_count_are_what_is_legal);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
