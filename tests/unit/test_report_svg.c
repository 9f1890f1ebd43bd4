/* Drawings: elements as SVG 1.1 wants them, widths of text, columns of labels. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "report/labels.h"
#include "report/svg.h"

static arena *memory;
static jmp_buf no_memory;
static const double exact = 1e-9; /* sums of a few numbers near 1 */

static void set_up(void) {
  memory = arena_create(0, &no_memory);
  ck_assert_ptr_nonnull(memory);
}

static void tear_down(void) {
  arena_free(memory);
}

static text fresh(void) {
  text t;
  text_init(&t, memory, 10000);
  return t;
}

START_TEST(whole_drawing) {
  text out = fresh();
  svg s;
  svg_begin(&s, &out,
            &(svg_head){.prefix = "a",
                        .title = "A < B",
                        .desc = "words",
                        .css_class = "cut",
                        .width = 40,
                        .height = 20.125});
  svg_defs(&s);
  svg_pattern(&s, "dots", 4, 4);
  svg_circle(&s, 1, 1, 0.5, NULL);
  svg_pattern_end(&s);
  svg_clip(&s, "bay");
  svg_rect(&s, 0, 0, 10, 10, NULL);
  svg_clip_end(&s);
  svg_defs_end(&s);
  svg_group_clipped(&s, "fill", "bay");
  svg_fill(&s, "dots");
  svg_rect(&s, 1, 2, 3.456, 4, "board");
  svg_line(&s, 0, 0, -1.5, 1e-9, NULL);
  svg_group_end(&s);
  svg_text(&s, 1, 2, SVG_END, NULL, "5\" & 6");
  svg_text_turned(&s, 1, 2, -90, SVG_MIDDLE, "d", "x");
  svg_end(&s);
  ck_assert_str_eq(
      out.data,
      "<svg xmlns=\"http://www.w3.org/2000/svg\" class=\"cut\" viewBox=\"0 0 40 20.13\""
      " role=\"img\" aria-labelledby=\"a-title a-desc\">\n"
      "<title id=\"a-title\">A &lt; B</title>\n<desc id=\"a-desc\">words</desc>\n"
      "<defs>\n<pattern id=\"a-dots\" width=\"4\" height=\"4\" patternUnits=\"userSpaceOnUse\">\n"
      "<circle cx=\"1\" cy=\"1\" r=\"0.5\"/>\n</pattern>\n"
      "<clipPath id=\"a-bay\">\n<rect x=\"0\" y=\"0\" width=\"10\" height=\"10\"/>\n</clipPath>\n"
      "</defs>\n<g class=\"fill\" clip-path=\"url(#a-bay)\">\n"
      "<rect class=\"board\" fill=\"url(#a-dots)\" x=\"1\" y=\"2\" width=\"3.46\" height=\"4\"/>\n"
      "<line x1=\"0\" y1=\"0\" x2=\"-1.5\" y2=\"0\"/>\n</g>\n"
      "<text x=\"1\" y=\"2\" text-anchor=\"end\">5\" &amp; 6</text>\n"
      "<text class=\"d\" x=\"1\" y=\"2\" text-anchor=\"middle\" transform=\"rotate(-90 1 2)\">x"
      "</text>\n</svg>\n");
}
END_TEST

START_TEST(paths) {
  text out = fresh();
  svg s;
  svg_begin(&s, &out,
            &(svg_head){.prefix = "p", .title = "t", .desc = "d", .width = 1, .height = 1});
  svg_path(&s, "w");
  svg_move(&s, 0, 1);
  svg_to(&s, 2, -3);
  svg_curve(&s, 1, 2, 3, 4, 5, 6);
  svg_bend(&s, 1.005, 2, 3, 4);
  svg_shut(&s);
  svg_path_end(&s);
  svg_polyline(&s, (const double[]){0, 1, 2, 3.5}, 2, NULL);
  svg_polygon(&s, (const double[]){0, 1, 2, 3, 4, 5}, 3, "q");
  svg_group_at(&s, NULL, 3, -4.25);
  svg_group_end(&s);
  svg_end(&s);
  ck_assert_ptr_nonnull(
      strstr(out.data, "<path class=\"w\" d=\"M0 1L2 -3C1 2 3 4 5 6Q1.01 2 3 4Z\"/>"));
  ck_assert_ptr_nonnull(strstr(out.data, "<polyline points=\"0 1 2 3.5\"/>"));
  ck_assert_ptr_nonnull(strstr(out.data, "<polygon class=\"q\" points=\"0 1 2 3 4 5\"/>"));
  ck_assert_ptr_nonnull(strstr(out.data, "<g transform=\"translate(3 -4.25)\"></g>"));
}
END_TEST

START_TEST(standing_alone) {
  text out = fresh();
  svg s;
  svg_begin(&s, &out,
            &(svg_head){.prefix = "p",
                        .title = "t",
                        .desc = "d",
                        .width = 10,
                        .height = 5,
                        .style = ".a{fill:red}",
                        .scale = 2});
  svg_end(&s);
  ck_assert_msg(text_starts(out.data, "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n<svg "),
                "begins as a file of XML: %s", out.data);
  ck_assert_ptr_nonnull(strstr(out.data, " width=\"20\" height=\"10\" "));
  ck_assert_ptr_nonnull(strstr(out.data, "<style>.a{fill:red}</style>"));
}
END_TEST

/* Advance widths of DejaVu Sans in its own units of 2048 an em (its hmtx table, read in a browser):
 * i 569, m 1995, 0 1303, W 2025, blank 651. */
static const struct width_row {
  const char *name, *value;
  double em; /* of DejaVu Sans */
} width_rows[] = {
    {"nothing", "", 0},
    {"narrow", "iiii", 4 * 569 / 2048.0},
    {"wide", "mmmm", 4 * 1995 / 2048.0},
    {"digits", "2030", 4 * 1303 / 2048.0},
    {"capitals and blank", "W W", (2 * 2025 + 651) / 2048.0},
};

START_TEST(text_widths) {
  const struct width_row *row = &width_rows[_i];
  const double size = 12, slack = 1.05; /* widths are rounded up to hundredths of the size */
  double width = svg_text_width(row->value, size, false);
  ck_assert_msg(width >= row->em * size - exact, "%s is no wider than %g", row->name, width);
  ck_assert_msg(width <= row->em * size * slack + exact, "%s is not so wide as %g", row->name,
                width);
  ck_assert_msg(svg_text_width(row->value, size, true) >= width, "%s is wider in bold", row->name);
}
END_TEST

START_TEST(widths_of_others) {
  double one = svg_text_width("\xE5\xAF\x9D", 10, false);
  ck_assert_msg(one >= 10, "a CJK letter is an em wide, found %g", one);
  ck_assert_double_eq_tol(svg_text_width("e\xCC\x81", 10, false), svg_text_width("e", 10, false),
                          exact); /* a combining accent takes no room */
  ck_assert_msg(svg_text_width("\x80", 10, false) >= 10, "what is no UTF-8 shows as U+FFFD");
  ck_assert_msg(svg_text_width("\x01", 10, false) >= 10, "so do controls");
}
END_TEST

START_TEST(cutting) {
  static const char *const words = "bedroom of flat twelve";
  const char *whole = svg_text_cut(memory, words, 12, false, 500);
  ck_assert_str_eq(whole, words);
  for (double width = 30; width < 150; width += 1) {
    const char *cut = svg_text_cut(memory, words, 12, false, width);
    ck_assert_msg(svg_text_width(cut, 12, false) <= width, "%s in %g", cut, width);
  }
  ck_assert_str_eq(svg_text_cut(memory, words, 12, false, 100), "bedroom of\xE2\x80\xA6");
  ck_assert_str_eq(svg_text_cut(memory, "\xD7\x97\xD7\x97\xD7\x97\xD7\x97", 10, false, 30),
                   "\xD7\x97\xD7\x97\xE2\x80\xA6"); /* whole letters only */
}
END_TEST

/* ---- columns of labels ---- */

START_TEST(labels_fit_where_they_want) {
  label_slot slot[] = {{10, 10, 0}, {40, 10, 0}, {70, 20, 0}};
  labels_place(slot, 3, 5, 0, 100);
  ck_assert_double_eq_tol(slot[0].top, 5, exact);
  ck_assert_double_eq_tol(slot[1].top, 35, exact);
  ck_assert_double_eq_tol(slot[2].top, 60, exact);
}
END_TEST

START_TEST(labels_share_the_way) {
  label_slot slot[] = {{50, 10, 0}, {50, 10, 0}, {50, 10, 0}};
  labels_place(slot, 3, 2, 0, 100);
  ck_assert_double_eq_tol(slot[0].top, 33, exact); /* 34 high, about 50 */
  ck_assert_double_eq_tol(slot[1].top, 45, exact);
  ck_assert_double_eq_tol(slot[2].top, 57, exact);
}
END_TEST

START_TEST(labels_stay_inside) {
  label_slot slot[] = {{-30, 10, 0}, {2, 10, 0}, {99, 10, 0}, {200, 10, 0}};
  labels_place(slot, 4, 0, 0, 100);
  ck_assert_double_eq_tol(slot[0].top, 0, exact);
  ck_assert_double_eq_tol(slot[1].top, 10, exact);
  ck_assert_double_eq_tol(slot[2].top, 80, exact);
  ck_assert_double_eq_tol(slot[3].top, 90, exact);
  ck_assert_double_eq_tol(labels_height(slot, 4, 3), 49, exact);
}
END_TEST

static double sum_of_squares(const label_slot *slot, int n) {
  double sum = 0;
  for (int i = 0; i < n; i++) sum += pow(slot[i].top + slot[i].height / 2 - slot[i].want, 2);
  return sum;
}

static bool placed_well(const label_slot *slot, int n, double gap, double first, double last) {
  if (slot[0].top < first - exact || slot[n - 1].top + slot[n - 1].height > last + exact)
    return false;
  for (int i = 1; i < n; i++)
    if (slot[i].top < slot[i - 1].top + slot[i - 1].height + gap - exact) return false;
  return true;
}

/* Seeded columns: apart, inside, in order; and moving any stretch of labels a little up or down, as
 * far as that is allowed, makes the sum of squares no smaller (the problem is convex, so then there
 * is no better placing). */
START_TEST(labels_are_best_placed) {
  enum { MOST = 12 };
  unsigned state = (unsigned)_i * 7919u + 17;
  label_slot slot[MOST];
  double want = 0;
  int n = 1 + _i % MOST;
  for (int i = 0; i < n; i++) {
    state = state * 1664525u + 1013904223u;
    want += (double)((state >> 8) % 30);
    slot[i] = (label_slot){want, 8 + (double)((state >> 20) % 12), 0};
  }
  double last = labels_height(slot, n, 3) + (double)((state >> 9) % 150);
  labels_place(slot, n, 3, 0, last);
  ck_assert(placed_well(slot, n, 3, 0, last));
  double best = sum_of_squares(slot, n);
  for (int from = 0; from < n; from++)
    for (int to = from; to < n; to++)
      for (double by = -0.5; by <= 0.5; by += 1) {
        label_slot other[MOST];
        memcpy(other, slot, sizeof slot);
        for (int i = from; i <= to; i++) other[i].top += by;
        ck_assert_msg(!placed_well(other, n, 3, 0, last) ||
                          sum_of_squares(other, n) >= best - exact,
                      "labels %d to %d of %d would be better %g on", from, to, n, by);
      }
}
END_TEST

int main(void) {
  Suite *suite = suite_create("report svg");
  TCase *cases = tcase_create("drawings");
  tcase_add_checked_fixture(cases, set_up, tear_down);
  tcase_add_test(cases, whole_drawing);
  tcase_add_test(cases, paths);
  tcase_add_test(cases, standing_alone);
  tcase_add_loop_test(cases, text_widths, 0, (int)(sizeof width_rows / sizeof width_rows[0]));
  tcase_add_test(cases, widths_of_others);
  tcase_add_test(cases, cutting);
  tcase_add_test(cases, labels_fit_where_they_want);
  tcase_add_test(cases, labels_share_the_way);
  tcase_add_test(cases, labels_stay_inside);
  tcase_add_loop_test(cases, labels_are_best_placed, 0, 200);
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
