/* Scales, steps, numbers and places of charts; bars and plan curves with whatever comes. */
#include <math.h>

#include "charts.h"
#include "report/chart_axis.h"
#include "report/chart_bars.h"
#include "report/chart_plan.h"

enum { SEEDS = 200 };
static const double last_digits = 1e-9; /* relative, of a few sums and products */

/* ---- scales ---- */

START_TEST(a_scale_meets_both_ends) {
  chart_scale s = {10, 30, 200, 100};
  ck_assert_double_eq_tol(chart_at(&s, 10), 200, last_digits);
  ck_assert_double_eq_tol(chart_at(&s, 30), 100, last_digits);
  ck_assert_double_eq_tol(chart_at(&s, 25), 125, last_digits);
}
END_TEST

/* Worked by hand: steps of 1, 2, 5 x 10^n, the fewest that cover with no more than `most` ticks. */
static const struct ticks_row {
  double low, high;
  int most;
  bool whole;
  double first, step;
  int count, decimals;
} ticks_rows[] = {
    {0, 10, 11, false, 0, 1, 11, 0},
    {0, 10, 6, false, 0, 2, 6, 0},
    {0.3, 9.7, 6, false, 0, 2, 6, 0},
    {8.43, 18.21, 9, false, 8, 2, 7, 0},
    {0, 1, 6, false, 0, 0.2, 6, 1},
    {0, 1, 6, true, 0, 1, 2, 0},
    {-7, 12, 6, false, -10, 5, 6, 0},
    {586000, 618500, 6, false, 580000, 10000, 5, 0},
    {0.0012, 0.0031, 5, false, 0.001, 0.001, 4, 3},
    {35, 62, 10, true, 35, 5, 7, 0},
};

START_TEST(round_steps) {
  for (size_t i = 0; i < sizeof ticks_rows / sizeof ticks_rows[0]; i++) {
    const struct ticks_row *row = &ticks_rows[i];
    chart_ticks t;
    chart_ticks_over(row->low, row->high, row->most, row->whole, &t);
    ck_assert_double_eq_tol(t.value[0], row->first, last_digits * fmax(1, fabs(row->first)));
    ck_assert_double_eq_tol(t.step, row->step, last_digits * row->step);
    ck_assert_int_eq(t.count, row->count);
    ck_assert_int_eq(t.decimals, row->decimals);
  }
}
END_TEST

START_TEST(steps_cover_whatever_comes) {
  static const double wild[] = {0,    1,        -1,        1e-7, 1e9,   1e15,      -3e12,
                                12.5, HUGE_VAL, -HUGE_VAL, NAN,  1e300, 99.999999, 100.0000001};
  enum { WILD = sizeof wild / sizeof wild[0] };
  for (int i = 0; i < WILD; i++)
    for (int k = 0; k < WILD; k++)
      for (int most = 2; most <= CHART_MAX_TICKS; most++) {
        chart_ticks t;
        chart_ticks_over(wild[i], wild[k], most, (i + k) % 2 == 0, &t);
        double low = isfinite(wild[i]) ? wild[i] : 0, high = isfinite(wild[k]) ? wild[k] : 0;
        if (high < low) high = low;
        double slack = 1e-6 * t.step;
        ck_assert_int_ge(t.count, 2);
        ck_assert_int_le(t.count, most < 3 ? 3 : most);
        ck_assert_msg(t.value[0] <= low + slack, "%g to %g: begins at %g", low, high, t.value[0]);
        ck_assert_msg(t.value[t.count - 1] >= high - slack, "%g to %g: ends at %g", low, high,
                      t.value[t.count - 1]);
        for (int j = 1; j < t.count; j++) ck_assert(t.value[j] > t.value[j - 1]);
      }
}
END_TEST

/* ---- numbers ---- */

static const struct number_row {
  double value;
  int decimals;
  const char *words;
} number_rows[] = {
    {0, 0, "0"},
    {999, 0, "999"},
    {1000, 0, "1,000"},
    {-1234567, 0, "-1,234,567"},
    {12500.25, 2, "12,500.25"},
    {0.5, 1, "0.5"},
    {-999.5, 1, "-999.5"},
    {100000, 0, "100,000"},
};

START_TEST(thousands_stand_apart) {
  for (size_t i = 0; i < sizeof number_rows / sizeof number_rows[0]; i++) {
    const struct number_row *row = &number_rows[i];
    ck_assert_str_eq(chart_number(shop.memory, row->value, row->decimals), row->words);
  }
}
END_TEST

START_TEST(large_money_is_named) {
  ck_assert_str_eq(chart_money_of(&shop.report, 999999, NULL).words, "USD");
  ck_assert_str_eq(chart_money_of(&shop.report, 1e6, "ft2").words, "thousand USD per ft2");
  ck_assert_str_eq(chart_money_of(&shop.report, -2.5e9, NULL).words, "million USD");
  ck_assert_double_eq_tol(chart_money_of(&shop.report, 3e12, NULL).divisor, 1e9, 1);
  ck_assert_double_eq_tol(chart_money_of(&shop.report, 1e30, NULL).divisor, 1e12, 1);
}
END_TEST

/* ---- labels ---- */

static void check_spread(void) {
  enum { MOST = 20 };
  const double pitch = 14, top = 30, bottom = top + MOST * 14;
  double y[MOST], was[MOST];
  int count = 1 + (int)dice(MOST);
  for (int i = 0; i < count; i++) was[i] = y[i] = top - 20 + dice(340);
  chart_spread(y, count, pitch, top, bottom);
  for (int i = 0; i < count; i++) {
    ck_assert(y[i] >= top - last_digits && y[i] <= bottom + last_digits);
    for (int k = 0; k < count; k++) {
      if (i == k) continue;
      ck_assert(fabs(y[i] - y[k]) >= pitch - 1e-6);
      if (was[i] < was[k]) ck_assert(y[i] < y[k]);
    }
  }
}

START_TEST(labels_spread_and_keep_their_order) {
  for (int seed = 0; seed < SEEDS; seed++) {
    dice_state = (uint32_t)seed;
    check_spread();
  }
}
END_TEST

START_TEST(labels_that_have_room_stay) {
  double y[] = {100, 40, 70};
  chart_spread(y, 3, 14, 0, 200);
  ck_assert_double_eq_tol(y[0], 100, last_digits);
  ck_assert_double_eq_tol(y[1], 40, last_digits);
  ck_assert_double_eq_tol(y[2], 70, last_digits);
  /* Two that want the same place share the way. */
  double same[] = {50, 50};
  chart_spread(same, 2, 14, 0, 200);
  ck_assert_double_eq_tol(same[0], 43, last_digits);
  ck_assert_double_eq_tol(same[1], 57, last_digits);
}
END_TEST

START_TEST(a_label_finds_a_place_or_none) {
  text *out = new_picture();
  chart c;
  chart_begin(&c, &shop.report, "t", "title", "words", 60, out);
  ck_assert(chart_label_near(&c, 280, 30, 4, CHART_PLAIN, "here"));
  ck_assert(chart_label_near(&c, 280, 30, 4, CHART_PLAIN, "there"));
  chart_box all = {0, 0, CHART_WIDTH, 60};
  chart_take(&c, &all);
  size_t before = out->len;
  ck_assert(!chart_label_near(&c, 280, 30, 4, CHART_PLAIN, "nowhere"));
  ck_assert_uint_eq(out->len, before);
  chart_end(&c);
  check_layout(out->data, "two labels");
  ck_assert_int_eq(take_apart(out->data).texts, 2);
}
END_TEST

START_TEST(a_crowded_scale_keeps_what_has_room) {
  text *out = new_picture();
  chart c;
  chart_frame f = {{0, 1, 40, 540}, {0, 1, 100, 20}};
  chart_ticks t = {.count = CHART_MAX_TICKS, .step = 1e5};
  for (int i = 0; i < t.count; i++) t.value[i] = 1e5 * i;
  f.x.high = t.value[t.count - 1];
  chart_begin(&c, &shop.report, "t", "title", "words", 150, out);
  chart_axis_x(&c, &f, &t, "a title of the scale");
  chart_end(&c);
  check_layout(out->data, "crowded");
  ck_assert_int_gt(take_apart(out->data).texts, CHART_MAX_TICKS / 4);
}
END_TEST

/* The test of the tests: what they must find. */
START_TEST(an_overlap_is_seen) {
  chart_box a = chart_text_box(10, 20, SVG_START, CHART_PLAIN, "one");
  chart c = {.report = &shop.report, .height = 100};
  chart_take(&c, &a);
  chart_box on = a, right = a, under = a, out = a;
  on.x += a.width / 2;
  right.x += a.width;
  under.y += a.height;
  out.x = -1;
  ck_assert(!chart_is_free(&c, &on));
  ck_assert(chart_is_free(&c, &right));
  ck_assert(chart_is_free(&c, &under));
  ck_assert(!chart_is_free(&c, &out));
}
END_TEST

/* ---- bars ---- */

static void check_bars(int seed) {
  dice_state = (uint32_t)seed;
  chart_bar bar[60];
  int count = (int)dice(3) == 0 ? (int)dice(60) : (int)dice(12);
  for (int i = 0; i < count; i++) {
    bar[i].label = awkward[dice(AWKWARD)];
    for (int k = 0; k < CHART_MAX_PARTS; k++) bar[i].cents[k] = awkward_cents();
    if (dice(20) == 0) bar[i].cents[0] = -500;
  }
  chart_bars b = {.title = awkward[dice(AWKWARD)],
                  .lead = "Bars:",
                  .parts = 1 + (int)dice(CHART_MAX_PARTS),
                  .part_name = {"one", "two", awkward[dice(AWKWARD)], "four"},
                  .shares = dice(2),
                  .bar = bar,
                  .count = count};
  b.paired = b.parts == 2 && dice(2);
  text *out = new_picture();
  chart_bars_draw(&shop.report, "b", &b, out);
  ck_assert(!out->cut);
  check_layout(out->data, text_format(shop.memory, "bars %d", seed));
  check_well_formed(out->data);
}

START_TEST(bars_of_anything) {
  for (int seed = 0; seed < SEEDS; seed++) check_bars(seed);
}
END_TEST

/* Lengths of bars are in the proportion of their amounts. */
START_TEST(lengths_are_amounts) {
  const chart_bar bar[] = {{"a", {30000, 10000}}, {"b", {5000, 0}}, {"c", {0, 20000}}};
  const chart_bars b = {
      .title = "t", .lead = "Bars:", .parts = 2, .part_name = {"m", "l"}, .bar = bar, .count = 3};
  text *out = new_picture();
  chart_bars_draw(&shop.report, "b", &b, out);
  double length[16];
  int n = 0;
  for (const char *at = out->data; (at = strstr(at, "<rect")) != NULL; at++) {
    const char *end = strchr(at, '>');
    ck_assert_int_lt(n, 16);
    length[n++] = attribute_of(at, end, "width", NULL);
  }
  ck_assert_int_eq(n, 2 + 4); /* two samples of the key */
  double per_cent = length[2] / 30000;
  ck_assert_double_gt(length[2], 100);
  ck_assert_double_eq_tol(length[3], 10000 * per_cent, rounding_px);
  ck_assert_double_eq_tol(length[4], 5000 * per_cent, rounding_px);
  ck_assert_double_eq_tol(length[5], 20000 * per_cent, rounding_px);
}
END_TEST

START_TEST(rows_beyond_the_most_are_one) {
  chart_bar bar[CHART_MAX_BARS + 3];
  for (int i = 0; i < CHART_MAX_BARS + 3; i++) bar[i] = (chart_bar){"row", {100}};
  const chart_bars b = {.title = "t",
                        .lead = "Bars:",
                        .parts = 1,
                        .part_name = {"m"},
                        .bar = bar,
                        .count = CHART_MAX_BARS + 3};
  const char *said = chart_bars_words(&shop.report, &b);
  ck_assert_ptr_nonnull(strstr(said, " 4 more: 4.00 USD."));
}
END_TEST

/* ---- plan ---- */

static void check_curve(int seed) {
  dice_state = (uint32_t)seed + 7;
  chart_types_point point[12];
  int count = (int)dice(12);
  long long base = awkward_cents();
  for (int i = 0; i < count; i++)
    point[i] = (chart_types_point){i + 1 + (int)dice(2), (chart_solved)dice(4),
                                   base + awkward_cents() / 1000};
  for (int i = 1; i < count; i++)
    if (point[i].types <= point[i - 1].types) point[i].types = point[i - 1].types + 1;
  chart_types_data d = {point, count, 0, 0, dice(3) == 0 ? base : 0};
  if (count > 0 && point[count / 2].solved >= CHART_FOUND) {
    d.chosen = point[count / 2].types;
    d.chosen_cents = point[count / 2].cost_cents;
  }
  text *out = new_picture();
  chart_types(&shop.report, "c", &d, out);
  check_layout(out->data, text_format(shop.memory, "plan %d", seed));
  check_well_formed(out->data);
}

START_TEST(curves_of_anything) {
  for (int seed = 0; seed < SEEDS; seed++) check_curve(seed);
}
END_TEST

START_TEST(the_curve_goes_on_to_the_plan) {
  const chart_types_point point[] = {
      {1, CHART_INFEASIBLE, 0}, {2, CHART_PROVEN, 300000}, {3, CHART_PROVEN, 200000}};
  const chart_types_data d = {point, 3, 5, 150000, 0};
  text *out = new_picture();
  chart_types(&shop.report, "c", &d, out);
  const char *at = strstr(out->data, "<polyline class=\"c-step\" points=\"");
  ck_assert_ptr_nonnull(at);
  at = strstr(at, "points=\"") + strlen("points=\"");
  double xy[6];
  char *end = NULL;
  for (int i = 0; i < 6; i++, at = end) xy[i] = strtod(at, &end);
  ck_assert_int_eq(*end, '"');
  ck_assert_double_eq_tol(xy[4] - xy[2], 2 * (xy[2] - xy[0]), 2 * rounding_px);
  ck_assert_double_eq_tol(xy[3] - xy[1], 2 * (xy[5] - xy[3]), 2 * rounding_px);
}
END_TEST

START_TEST(the_plan_in_words) {
  const chart_types_point point[] = {{2, CHART_INFEASIBLE, 0},
                                     {3, CHART_PROVEN, 12345600},
                                     {4, CHART_FOUND, 12000050},
                                     {5, CHART_UNSOLVED, 0}};
  const chart_types_data d = {point, 4, 3, 12345600, 0};
  ck_assert_str_eq(chart_types_words(&shop.report, &d),
                   "The least cost of the project with at most so many wall types: 2 types: no "
                   "plan; 3 types: 123,456.00 USD; 4 types: 120,000.50 USD, not proven cheapest; 5 "
                   "types: not solved in time. The plan has 3 and costs 123,456.00 USD.");
}
END_TEST

static Suite *all_tests(void) {
  Suite *s = suite_create("report_chart");
  TCase *c = tcase_create("chart");
  tcase_add_checked_fixture(c, open_demo, close_demo);
  tcase_set_timeout(c, 120);
  tcase_add_test(c, a_scale_meets_both_ends);
  tcase_add_test(c, round_steps);
  tcase_add_test(c, steps_cover_whatever_comes);
  tcase_add_test(c, thousands_stand_apart);
  tcase_add_test(c, large_money_is_named);
  tcase_add_test(c, labels_spread_and_keep_their_order);
  tcase_add_test(c, labels_that_have_room_stay);
  tcase_add_test(c, a_label_finds_a_place_or_none);
  tcase_add_test(c, a_crowded_scale_keeps_what_has_room);
  tcase_add_test(c, an_overlap_is_seen);
  tcase_add_test(c, bars_of_anything);
  tcase_add_test(c, lengths_are_amounts);
  tcase_add_test(c, rows_beyond_the_most_are_one);
  tcase_add_test(c, curves_of_anything);
  tcase_add_test(c, the_curve_goes_on_to_the_plan);
  tcase_add_test(c, the_plan_in_words);
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
