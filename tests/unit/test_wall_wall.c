/* Sizes, masses and turned walls. */
#include "wall/wall.h"

#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdlib.h>

#include "wall/line.h"
#include "shop.h"

#define SIZE_M         1e-9 /* sums of sizes that the files give to 0.1 mm: equal but for rounding */
#define SIXTEENTH_IN_M (0.0254 / 16) /* thickness is printed to 1/16 in */
#define MASS_KG_M2     0.05          /* the hand sums below are rounded to 0.1 kg/m2 */

/* Actual sizes by hand, in mm. */
static const struct thickness_row {
  const char *line;
  double mm;
} thickness_rows[] = {
    {"typex-16 | steel-92-18@610, glass-89 | typex-16", 15.9 + 92.1 + 15.9},
    {"2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16", 31.8 + 13 + 92.1 + 15.9},
    {"gyp-13 + mlv-5 | wood-89-double@406, glass-89, glass-89 | typex-16 + osb-11",
     12.7 + 2.6 + 88.9 + 25 + 88.9 + 15.9 + 11.1},
    {"typex-16 | wood-89-stag-140@406, glass-89 | typex-16", 15.9 + 139.7 + 15.9},
    {"typex-16 | rc@610 | on osb-11 | wood-89@406, glass-89 | typex-16",
     15.9 + 13 + 11.1 + 88.9 + 15.9},
    {"typex-16 | clip@610 | wood-89@406 | typex-16", 15.9 + 41 + 88.9 + 15.9},
    {"typex-16 | wood-89-double@406~50, glass-89, inner-a osb-11 | typex-16",
     15.9 + 88.9 + 50 + 88.9 + 15.9},
};

START_TEST(thickness) {
  const struct thickness_row *row = &thickness_rows[_i];
  wall w = parse(row->line);
  ck_assert_msg(fabs(wall_thickness_m(shop, &w) - row->mm * 1e-3) < SIZE_M, "%s: %f", row->line,
                wall_thickness_m(shop, &w));
}
END_TEST

/* The commonest door-frame throat: 3-5/8 in studs and two 5/8 in boards are 4-7/8 in (municipal
 * copy of GA-600, WP 1200). */
START_TEST(door_throat) {
  wall w = parse("typex-16 | steel-92-18@610 | typex-16");
  double sixteenths = wall_thickness_m(shop, &w) / SIXTEENTH_IN_M;
  ck_assert_int_eq((int)lround(sixteenths), 4 * 16 + 14);
}
END_TEST

/* Sums by hand from the records: boards, studs a metre of wall, two runners over 3 m, batts, rails
 * and clips. */
static const struct mass_row {
  const char *line;
  double kg_m2;
} mass_rows[] = {
    {"typex-16 | steel-92-18@610 | typex-16", 22.0 + 0.60 / 0.6096 + 2 * 0.58 / 3},
    {"typex-16 | steel-92-18@610, glass-89 | typex-16", 22.0 + 0.60 / 0.6096 + 2 * 0.58 / 3 + 1.07},
    {"typex-16 | wood-89-double@406, stone-89, stone-89 | typex-16",
     22.0 + 2 * 1.52 / 0.4064 + 4 * 1.52 / 3 + 2 * 2.85},
    {"typex-16 | wood-89-stag-140@406 | typex-16", 22.0 + 2 * 1.52 / 0.4064 + 2 * 2.40 / 3},
    {"typex-16 | rc@406 | wood-89@406 | typex-16",
     22.0 + 1.52 / 0.4064 + 2 * 1.52 / 3 + 0.22 / 0.4064},
    {"typex-16 | clip@610 | wood-89@406 | typex-16",
     22.0 + 1.52 / 0.4064 + 2 * 1.52 / 3 + 0.40 / 0.6096 + 0.08 / (0.6096 * 1.2192)},
};

START_TEST(mass) {
  const struct mass_row *row = &mass_rows[_i];
  wall w = parse(row->line);
  double found = wall_mass_kg_m2(shop, &w, 3.0);
  ck_assert_msg(fabs(found - row->kg_m2) < MASS_KG_M2, "%s: %f for %f", row->line, found,
                row->kg_m2);
}
END_TEST

START_TEST(spacings) {
  /* The inch is 25.4 mm by definition. */
  ck_assert(fabs(wall_spacing_m(305) - 12 * 0.0254) < SIZE_M);
  ck_assert(fabs(wall_spacing_m(406) - 16 * 0.0254) < SIZE_M);
  ck_assert(fabs(wall_spacing_m(610) - 24 * 0.0254) < SIZE_M);
  ck_assert(fabs(wall_spacing_m(1219) - 48 * 0.0254) < SIZE_M);
  ck_assert(fabs(wall_spacing_m(500) - 0.5) < SIZE_M);
}
END_TEST

/* Seen from the other room, and without the mount. */
static const struct turned_row {
  const char *line, *mirrored, *shorted;
} turned_rows[] = {
    {"2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16",
     "typex-16 | steel-92-18@610, glass-89 | rc@610 | 2*typex-16",
     "2*typex-16 | steel-92-18@610, glass-89 | typex-16"},
    {"gyp-13 | wood-89-double@406, glass-89 | typex-16 + osb-11",
     "typex-16 + osb-11 | wood-89-double@406, -, glass-89 | gyp-13",
     "gyp-13 | wood-89-double@406, glass-89 | typex-16 + osb-11"},
    {"typex-16 | clip@610x813 | on osb-11 | wood-89@406 | gyp-16",
     "gyp-16 | wood-89@406 | on osb-11 | clip@610x813 | typex-16",
     "typex-16 + osb-11 | wood-89@406 | gyp-16"},
    {"gyp-13 | wood-89-double@406, inner-a osb-11 | gyp-16",
     "gyp-16 | wood-89-double@406, inner-b osb-11 | gyp-13",
     "gyp-13 | wood-89-double@406, inner-a osb-11 | gyp-16"},
};

START_TEST(turned) {
  const struct turned_row *row = &turned_rows[_i];
  wall w = parse(row->line), m = wall_mirrored(shop, &w), s = wall_short_circuited(&w),
       back = wall_mirrored(shop, &m);
  ck_assert_str_eq(line_print(memory, shop, &m), row->mirrored);
  ck_assert_str_eq(line_print(memory, shop, &s), row->shorted);
  ck_assert(wall_same(&w, &back));
  ck_assert(!wall_is_mounted(&s));
}
END_TEST

START_TEST(same_tells_apart) {
  static const char *const lines[] = {"typex-16 | wood-89@406 | typex-16",
                                      "typex-16 | wood-89@610 | typex-16",
                                      "typex-16 | wood-89@406, glass-89 | typex-16",
                                      "typex-16 | rc@610 | wood-89@406 | typex-16",
                                      "typex-16 | rc@406 | wood-89@406 | typex-16",
                                      "2*typex-16 | wood-89@406 | typex-16",
                                      "typex-16 | wood-89-double@406 | typex-16",
                                      "typex-16 | wood-89-double@406~40 | typex-16",
                                      "typex-16 | wood-89-double@406, inner-a osb-11 | typex-16",
                                      "typex-16 | clip@610 | wood-89@406 | typex-16",
                                      "typex-16 | clip@610x813 | wood-89@406 | typex-16"};
  size_t n = sizeof lines / sizeof lines[0];
  for (size_t i = 0; i < n; i++) {
    for (size_t j = 0; j < n; j++) {
      wall a = parse(lines[i]), b = parse(lines[j]);
      ck_assert_msg(wall_same(&a, &b) == (i == j), "%s / %s", lines[i], lines[j]);
    }
  }
}
END_TEST

START_TEST(counts) {
  wall w = parse("typex-16 + damp-layer + typex-16 | wood-89-double@406 | typex-16 + osb-11");
  ck_assert_int_eq(w.side[SIDE_A].count, 3);
  ck_assert_int_eq(face_boards(shop, &w.side[SIDE_A]), 2);
  ck_assert_int_eq(face_boards(shop, &w.side[SIDE_B]), 2);
  ck_assert(wall_is_double(shop, &w));
  ck_assert(!wall_is_mounted(&w));
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof(table)[0])

int main(void) {
  Suite *suite = suite_create("wall/wall");
  TCase *t = tcase_create("walls");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, thickness, 0, ROWS(thickness_rows));
  tcase_add_test(t, door_throat);
  tcase_add_loop_test(t, mass, 0, ROWS(mass_rows));
  tcase_add_test(t, spacings);
  tcase_add_loop_test(t, turned, 0, ROWS(turned_rows));
  tcase_add_test(t, same_tells_apart);
  tcase_add_test(t, counts);
  suite_add_tcase(suite, t);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
