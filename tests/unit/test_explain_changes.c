/* Differences of two walls in trade words, from wall lines. */
#include <check.h>
#include <setjmp.h>
#include <stdlib.h>

#include "explain/changes.h"
#include "wall/line.h"

static arena *memory;
static jmp_buf out_of_memory;
static const catalog *shelf;

static void open_catalogs(void) {
  diag_list d;
  memory = arena_create(0, &out_of_memory);
  ck_assert_ptr_nonnull(memory);
  diag_init(&d, memory);
  shelf = catalog_load(memory, &d, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(shelf);
}

static void close_catalogs(void) {
  arena_free(memory);
}

static wall read(const char *line) {
  diag_list d;
  wall w = wall_empty();
  diag_init(&d, memory);
  ck_assert_msg(line_parse(memory, &d, shelf, line, &w), "%s", line);
  return w;
}

static const struct {
  const char *from, *to, *words;
} pairs[] = {
    {"typex-16 | wood-89@406 | typex-16", "typex-16 | wood-89@406 | typex-16", "no change"},
    {"typex-16 | wood-89@406 | typex-16", "typex-16 | wood-89@406 | 2*typex-16",
     "second layer on side B"},
    {"typex-16 | wood-89@406 | typex-16", "2*typex-16 | wood-89@406 | 2*typex-16",
     "second layer on both sides"},
    {"typex-16 | wood-89@406 | typex-16", "3*typex-16 | wood-89@610 | typex-16",
     "24 in for 16 in stud spacing; second to third layers on side A"},
    {"3*typex-16 | wood-89@406 | 2*typex-16", "typex-16 | wood-89@406 | typex-16",
     "2 layers less on side A; one layer less on side B"},
    {"gyp-13 | wood-89@406 | gyp-13", "2*typex-16 | wood-89@406 | typex-16",
     "5/8 in Type X gypsum board for 1/2 in regular gypsum board on both sides; second layer on "
     "side A"},
    {"typex-16 | wood-89@406 | typex-16", "typex-16 + osb-11 | wood-89@406 | typex-16",
     "7/16 in OSB added on side A"},
    {"typex-16 | wood-89@406 | typex-16 + osb-11", "typex-16 | wood-89@406 | typex-16",
     "no 7/16 in OSB on side B"},
    {"gyp-13 + osb-11 | wood-89@406 | typex-16", "2*typex-16 | wood-89@406 | typex-16",
     "2 x 5/8 in Type X gypsum board for 1/2 in regular gypsum board + 7/16 in OSB on side A"},
    {"typex-16 | wood-89@406 | typex-16", "typex-16 | rc@610 | wood-89@406 | typex-16",
     "resilient channel at 24 in on side A"},
    {"typex-16 | rc@406 | wood-89@406 | typex-16", "typex-16 | rc@610 | wood-89@406 | typex-16",
     "24 in for 16 in between channels on side A"},
    {"typex-16 | rc@406 | wood-89@406 | typex-16", "typex-16 | clip@610 | wood-89@406 | typex-16",
     "clips and furring channel at 24 in for resilient channel on side A"},
    {"typex-16 | wood-89@406 | rc@406 | typex-16", "typex-16 | wood-89@406 | typex-16",
     "no resilient channel on side B"},
    {"typex-16 | rc@610 | wood-89@406 | typex-16",
     "typex-16 | rc@610 | on osb-11 | wood-89@406 | typex-16",
     "7/16 in OSB added on the studs of side A"},
    {"typex-16 | wood-89@406 | typex-16", "typex-16 | wood-89@406, glass-89 | typex-16",
     "3-1/2 in glass-fibre batt added"},
    {"typex-16 | wood-89@406, glass-89 | typex-16", "typex-16 | wood-89@406 | typex-16",
     "no 3-1/2 in glass-fibre batt"},
    {"typex-16 | wood-89@406, glass-89 | typex-16", "typex-16 | wood-89@406, stone-89 | typex-16",
     "3-1/2 in stone-wool batt for 3-1/2 in glass-fibre batt"},
    {"typex-16 | wood-89@406, glass-89 | typex-16",
     "typex-16 | wood-89-double@406, glass-89 | typex-16",
     "two rows of 2x4 studs for 2x4 studs; 1 in between the rows; batts in one row, the other "
     "empty"},
    {"typex-16 | wood-89-double@406, glass-89 | typex-16",
     "typex-16 | wood-89-double@406~50, glass-89, glass-89 | typex-16",
     "1-15/16 in for 1 in between the rows; batts in the second row too"},
    {"typex-16 | wood-89-double@406, glass-89, glass-89 | typex-16",
     "typex-16 | wood-89@406, glass-89 | typex-16", "2x4 studs for two rows of 2x4 studs"},
    {"typex-16 | wood-89-double@406, glass-89, glass-89 | typex-16",
     "typex-16 | wood-89-double@406, glass-89 | typex-16", "no batts in the second row"},
    {"typex-16 | wood-89-double@406, -, glass-89 | typex-16",
     "typex-16 | wood-89-double@406, glass-89 | typex-16", "batts in the other row"},
};

START_TEST(walls_differ_in_trade_words) {
  change_list l;
  wall from = read(pairs[_i].from), to = read(pairs[_i].to);
  changes_list(memory, shelf, &from, &to, true, &l);
  ck_assert_str_eq(changes_words(memory, &l), pairs[_i].words);
}
END_TEST

START_TEST(spacings_are_metric_where_asked) {
  change_list l;
  wall from = read("typex-16 | wood-89@406 | typex-16");
  wall to = read("typex-16 | rc@610 | wood-89@610 | typex-16");
  changes_list(memory, shelf, &from, &to, false, &l);
  ck_assert_str_eq(changes_words(memory, &l),
                   "610 mm for 406 mm stud spacing; resilient channel at 610 mm on side A");
}
END_TEST

START_TEST(the_nearer_of_two_mirror_images) {
  wall other = read("2*typex-16 | rc@610 | wood-89@406 | typex-16");
  wall near = read("2*typex-16 | rc@406 | wood-89@406 | typex-16");
  wall far = wall_mirrored(shelf, &near);
  wall found = changes_nearer(shelf, &other, &far);
  ck_assert(wall_same(&found, &near));
  found = changes_nearer(shelf, &other, &near);
  ck_assert(wall_same(&found, &near));
}
END_TEST

int main(void) {
  Suite *s = suite_create("explain_changes");
  TCase *t = tcase_create("changes");
  tcase_add_checked_fixture(t, open_catalogs, close_catalogs);
  tcase_add_loop_test(t, walls_differ_in_trade_words, 0, sizeof pairs / sizeof pairs[0]);
  tcase_add_test(t, spacings_are_metric_where_asked);
  tcase_add_test(t, the_nearer_of_two_mirror_images);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
