/* The wall section: what the writer of it must keep whatever the wall; what it shows is measured in
 * tests/draw from the drawing itself. */
#include <stdlib.h>
#include <string.h>

#include "report/markup.h"
#include "report/section.h"
#include "shop.h"

static const size_t most_bytes = (size_t)1 << 21;
static brief job;

static const char *draw(const wall *w, const section_options *o, units_system units) {
  report r = {.arena = memory, .catalog = shop, .brief = &job, .units = units};
  text out;
  text_init(&out, memory, most_bytes);
  section_draw(&r, w, o, &out);
  ck_assert(!out.cut);
  return out.data;
}

static void open_job(void) {
  setup();
  job_defaults(&job);
}

static const section_options plain = {.prefix = "p"};

static int count_of(const char *s, const char *word) {
  int n = 0;
  for (size_t length = strlen(word); (s = strstr(s, word)) != NULL; s += length) n++;
  return n;
}

START_TEST(same_bytes) {
  wall w = parse("2*typex-16 | rc@610 | wood-89-stag-140@406, cell-89 | typex-16");
  ck_assert_str_eq(draw(&w, &plain, UNITS_US), draw(&w, &plain, UNITS_US));
}
END_TEST

/* Each record that a wall may hold is drawn and named. */
START_TEST(every_board) {
  for (size_t i = 0; i < shop->layer_count; i++) {
    wall w = parse("typex-16 + typex-16 | wood-89@406 | typex-16");
    w.side[SIDE_A].layer[1] = (int)i;
    const char *s = draw(&w, &plain, UNITS_US);
    text name;
    text_init(&name, memory, 200);
    markup_text(&name, shop->layers[i].name);
    ck_assert_msg(strstr(s, name.data) != NULL, "%s is named", shop->layers[i].id);
  }
}
END_TEST

START_TEST(every_frame_and_fill) {
  for (size_t i = 0; i < shop->frame_count; i++)
    for (size_t k = 0; k < shop->fill_count; k++) {
      wall w = parse("typex-16 | wood-89@406 | typex-16");
      w.frame = (int)i;
      w.fill[0] = (int)k;
      if (wall_is_double(shop, &w)) w.gap_mm = 25;
      const char *s = draw(&w, &plain, UNITS_SI);
      ck_assert_ptr_nonnull(strstr(s, shop->fills[k].name));
      ck_assert_int_eq(count_of(s, "class=\"cut-studs\""), shop->frames[i].rows);
    }
}
END_TEST

START_TEST(ids_have_the_prefix) {
  wall w = parse("typex-16 | clip@610 | on osb-11 | wood-89@406, glass-89 | fibreboard-13");
  const char *s = draw(&w, &(section_options){.prefix = "type-3"}, UNITS_US);
  ck_assert_int_gt(count_of(s, " id=\""), 4);
  ck_assert_int_eq(count_of(s, " id=\""), count_of(s, " id=\"type-3-"));
  ck_assert_int_eq(count_of(s, "url(#"), count_of(s, "url(#type-3-"));
}
END_TEST

START_TEST(rooms_are_data) {
  wall w = parse("typex-16 | wood-89@406 | typex-16");
  job.side[SIDE_A].room = "</text><script>alert(1)</script>\"";
  job.side[SIDE_B].room = "turned \xE2\x80\xAE around \x1B";
  const char *s = draw(&w, &(section_options){.prefix = "p", .caption = "a & b"}, UNITS_US);
  ck_assert_ptr_null(strstr(s, "<script"));
  ck_assert_ptr_null(strstr(s, "\xE2\x80\xAE"));
  ck_assert_ptr_null(strchr(s, '\x1B'));
  ck_assert_ptr_nonnull(strstr(s, "&lt;/text&gt;&lt;script&gt;"));
  ck_assert_ptr_nonnull(strstr(s, "a &amp; b"));
}
END_TEST

/* A name of ten thousand letters makes neither a wider nor a much longer drawing. */
START_TEST(long_rooms_are_cut) {
  enum { LONG = 10000, SLACK = 1000 };
  wall w = parse("typex-16 | wood-89@406 | typex-16");
  size_t usual = strlen(draw(&w, &plain, UNITS_US));
  char *name = arena_alloc(memory, LONG + 1);
  memset(name, 'm', LONG);
  job.side[SIDE_A].room = name;
  job.side[SIDE_B].room = name;
  ck_assert_uint_lt(strlen(draw(&w, &plain, UNITS_US)), usual + SLACK);
}
END_TEST

START_TEST(described_from_a_to_b) {
  wall w = parse("2*typex-16 | steel-92-18@610, glass-89 | gyp-13");
  job.side[SIDE_A].room = "ward";
  const char *s = draw(&w, &plain, UNITS_US);
  ck_assert_ptr_nonnull(strstr(s, ">Wall section, 5-3/8 in thick</title>"));
  ck_assert_ptr_nonnull(
      strstr(s, ">Plan cut to scale. From side A (ward) to side B: 2 x 5/8 in Type X gypsum board, "
                "1-1/4 in; 3-5/8 in 18 mil (25 ga) steel studs at 24 in on centre, 3-5/8 in; "
                "3-1/2 in glass-fibre batt; 1/2 in regular gypsum board, 1/2 in."));
}
END_TEST

/* On a card there are the plan and its outer dimensions, nothing else. */
START_TEST(card) {
  wall w = parse("2*typex-16 | rc@610 | wood-89@406, glass-89 | typex-16");
  const char *s = draw(&w, &(section_options){.prefix = "c", .compact = true}, UNITS_US);
  ck_assert_ptr_nonnull(strstr(s, "viewBox=\"0 0 320 "));
  ck_assert_ptr_nonnull(strstr(s, ">16 in on centre</text>"));
  ck_assert_ptr_null(strstr(s, "cut-floor"));
  ck_assert_ptr_null(strstr(s, "cut-legend"));
  ck_assert_ptr_null(strstr(s, "cut-leader"));
}
END_TEST

/* Every class that drawings use has a rule or is a mere name of a group; every colour is defined.
 */
START_TEST(style_is_whole) {
  text style;
  text_init(&style, memory, most_bytes);
  section_style(&style, true);
  ck_assert(!style.cut);
  ck_assert_ptr_null(strpbrk(style.data, "<>&"));
  ck_assert_int_eq(count_of(style.data, "@"), count_of(style.data, "@media"));
  for (const char *at = style.data; (at = strstr(at, "var(--")) != NULL; at++) {
    size_t length = strcspn(at + 4, ")");
    const char *name = text_format(memory, "%s:", text_copyn(memory, at + 4, length));
    ck_assert_msg(count_of(style.data, name) >= 3, "%s in light, dark and print", name);
  }
}
END_TEST

static const char *const groups[] = {"cut-plan",      "cut-studs",  "cut-mount", "cut-floor",
                                     "cut-structure", "cut-legend", "cut-small", "cut"};

static bool is_group(const char *name) {
  for (size_t i = 0; i < sizeof groups / sizeof groups[0]; i++)
    if (text_equal(name, groups[i])) return true;
  return false;
}

START_TEST(classes_have_rules) {
  static const char *const lines[] = {
      "typex-16 + mlv-5 + damp-16 | clip@610 | on osb-11 | wood-89-double@406, stone-89, cell-89, "
      "inner-b fibreboard-13 | typex-16 + damp-layer + typex-16",
      "cement-13 + typex-16 | rc@610 | steel-92-33@406, glass-65 | typex-16"};
  text style;
  text_init(&style, memory, most_bytes);
  section_style(&style, false);
  wall w = parse(lines[_i]);
  const char *at = draw(&w, &(section_options){.prefix = "p", .caption = "c"}, UNITS_US);
  for (; (at = strstr(at, " class=\"")) != NULL;) {
    at += strlen(" class=\"");
    const char *name = text_copyn(memory, at, strcspn(at, "\""));
    bool has_rule = strstr(style.data, text_format(memory, ".%s{", name)) != NULL;
    ck_assert_msg(has_rule || is_group(name), "no rule for %s", name);
  }
}
END_TEST

int main(void) {
  Suite *suite = suite_create("report section");
  TCase *cases = tcase_create("drawing");
  tcase_set_timeout(cases, 120);
  tcase_add_checked_fixture(cases, open_job, teardown);
  tcase_add_test(cases, same_bytes);
  tcase_add_test(cases, every_board);
  tcase_add_test(cases, every_frame_and_fill);
  tcase_add_test(cases, ids_have_the_prefix);
  tcase_add_test(cases, rooms_are_data);
  tcase_add_test(cases, long_rooms_are_cut);
  tcase_add_test(cases, described_from_a_to_b);
  tcase_add_test(cases, card);
  tcase_add_test(cases, style_is_whole);
  tcase_add_loop_test(cases, classes_have_rules, 0, 2);
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
