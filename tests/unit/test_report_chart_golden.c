/* Charts of the demo as they were when they were last looked at: tests/golden/charts. With
 * SEPTUM_GOLDEN=write in the environment they are written anew (tests/golden/rewrite.sh). */
#include <stdio.h>

#include "charts.h"
#include "report/chart_cloud.h"
#include "report/chart_cost.h"
#include "report/chart_ladder.h"
#include "report/chart_plan.h"
#include "report/chart_sound.h"

static const char *const party_wall =
    "2*typex-16 | wood-89-double@406, glass-89, glass-89 | 2*typex-16";

static void sound_of(const char *line, sound_metric metric, bool paths, text *out) {
  chart_sound_options o = {metric, paths};
  chart_sound(&shop.report, "g", rate(line), &o, out);
}

static void sound_predicted(text *out) {
  sound_of("2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16", METRIC_STC, false, out);
}

static void sound_paths(text *out) {
  sound_of("typex-16 | wood-89-stag-140@406 | typex-16", METRIC_STC, true, out);
}

static void sound_published(text *out) {
  sound_of("typex-16 | wood-89@610, glass-89 | typex-16", METRIC_STC, true, out);
}

static void sound_openings(text *out) {
  ask("corridor");
  sound_of("typex-16 | steel-92-18@610, glass-89 | typex-16", METRIC_STC, false, out);
}

static void sound_rw(text *out) {
  sound_of("typex-16 | steel-92-18@610, glass-89 | typex-16", METRIC_RW_CTR, false, out);
}

static void cost_by_section(text *out) {
  ask("party-wall");
  chart_cost(&shop.report, "g", rate(party_wall), out);
}

static void ladder_one_hour(text *out) {
  ask("one-hour");
  chart_ladder(&shop.report, "g", climb("typex-16 | wood-89@406, glass-89 | typex-16"), out);
}

static void ladder_party_wall(text *out) {
  ask("party-wall");
  shop.report.units = UNITS_SI;
  chart_ladder(&shop.report, "g", climb(NULL), out);
}

static void pick_of(const char *brief_file, text *out) {
  ask(brief_file);
  cloud around;
  explanation *why = pick(&around);
  chart_cloud(&shop.report, "g", why, &around, out);
}

static void pick_party_wall(text *out) {
  pick_of("party-wall", out);
}

static void pick_heavy_fastening(text *out) {
  pick_of("heavy-fastening", out);
}

static void pick_impossible(text *out) {
  pick_of("impossible", out);
}

static void trim_savings(text *out) {
  ask("party-wall");
  chart_savings(&shop.report, "g", trim(party_wall), out);
}

static void trim_before_after(text *out) {
  ask("party-wall");
  chart_before_after(&shop.report, "g", rate(party_wall),
                     rate("typex-16 | wood-89-double@406, glass-89 | typex-16"), "wall 1", out);
}

/* Invented figures. */
static void plan_types(text *out) {
  const chart_types_point point[] = {
      {1, CHART_INFEASIBLE, 0},    {2, CHART_INFEASIBLE, 0},    {3, CHART_PROVEN, 61850000},
      {4, CHART_PROVEN, 59210000}, {5, CHART_PROVEN, 58640000}, {6, CHART_FOUND, 58600000},
      {7, CHART_UNSOLVED, 0},
  };
  const chart_types_data d = {point, sizeof point / sizeof point[0], 4, 59210000, 60000000};
  chart_types(&shop.report, "g", &d, out);
}

static void plan_by_type(text *out) {
  const chart_plan_part part[] = {
      {"T1  typex-16 | wood-89-double@406, glass-89 | typex-16", 21450012, 6100000, 50000, 0},
      {"T2  typex-16 | wood-89@406, glass-89 | typex-16", 13310050, 3000000, 50000, 0},
      {"T3  2*typex-16 | rc@610 | steel-92-18@610, glass-89 | 2*typex-16", 2999900, 450000, 50000,
       0}};
  chart_plan_cost(&shop.report, "g", "type", part, 3, out);
}

static const struct golden_row {
  const char *name;
  void (*draw)(text *out);
} golden_rows[] = {
    {"sound-predicted", sound_predicted},
    {"sound-paths", sound_paths},
    {"sound-published", sound_published},
    {"sound-openings", sound_openings},
    {"sound-rw", sound_rw},
    {"cost-by-section", cost_by_section},
    {"ladder-one-hour", ladder_one_hour},
    {"ladder-party-wall", ladder_party_wall},
    {"pick-party-wall", pick_party_wall},
    {"pick-heavy-fastening", pick_heavy_fastening},
    {"pick-impossible", pick_impossible},
    {"trim-savings", trim_savings},
    {"trim-before-after", trim_before_after},
    {"plan-types", plan_types},
    {"plan-by-type", plan_by_type},
};
enum { GOLDEN = sizeof golden_rows / sizeof golden_rows[0] };

static void write_golden(const char *path, const text *is) {
  FILE *f = fopen(path, "wb");
  ck_assert_msg(f != NULL, "%s cannot be written", path);
  ck_assert_uint_eq(fwrite(is->data, 1, is->len, f), is->len);
  ck_assert_int_eq(fclose(f), 0);
}

static const char *read_golden(const char *path) {
  FILE *f = fopen(path, "rb");
  ck_assert_msg(f != NULL, "%s is not there: sh tests/golden/rewrite.sh BUILD", path);
  text all;
  char piece[4096];
  size_t n;
  text_init(&all, shop.memory, 4 << 20);
  while ((n = fread(piece, 1, sizeof piece, f)) > 0) text_putn(&all, piece, n);
  ck_assert_int_eq(fclose(f), 0);
  return all.data;
}

START_TEST(as_looked_at) {
  const struct golden_row *row = &golden_rows[_i];
  text *out = new_picture();
  row->draw(out);
  text_char(out, '\n');
  ck_assert(!out->cut);
  check_layout(out->data, row->name);
  check_well_formed(out->data);
  const char *path = text_format(shop.memory, TEST_ROOT "/tests/golden/charts/%s.svg", row->name);
  const char *asked = getenv("SEPTUM_GOLDEN");
  if (asked && strcmp(asked, "write") == 0) {
    write_golden(path, out);
    return;
  }
  const char *want = read_golden(path);
  size_t same = 0;
  while (want[same] && want[same] == out->data[same]) same++;
  ck_assert_msg(want[same] == out->data[same],
                "%s: differs from byte %zu on: \"%.60s\" for \"%.60s\"; if that is meant: "
                "tests/golden/rewrite.sh, then look at the picture",
                row->name, same, out->data + same, want + same);
}
END_TEST

static Suite *all_tests(void) {
  Suite *s = suite_create("report_chart_golden");
  TCase *c = tcase_create("golden");
  tcase_add_checked_fixture(c, open_demo, close_demo);
  tcase_set_timeout(c, 180);
  tcase_add_loop_test(c, as_looked_at, 0, GOLDEN);
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
