/* The curve as drawn, read back from the picture, against the numbers it stands for; contours
 * against the tables of their standards. */
#include <math.h>

#include "charts.h"
#include "report/chart_sound.h"
#include "share.h"

/* ---- contours by the standards ---- */

/* ASTM E413, contour of STC 50 at 125 to 4000 Hz. */
static const double e413_stc_50[] = {34, 37, 40, 43, 46, 49, 50, 51,
                                     52, 53, 54, 54, 54, 54, 54, 54};
/* ISO 717-1, reference values at 100 to 3150 Hz: Rw 52. */
static const double iso717_rw_52[] = {33, 36, 39, 42, 45, 48, 51, 52,
                                      53, 54, 55, 56, 56, 56, 56, 56};
static const double last_digits_db = 1e-9;

START_TEST(contours_are_those_of_the_standards) {
  double db[RATING_FIT_BANDS];
  int first;
  ck_assert(chart_contour(METRIC_STC, 50, &first, db));
  ck_assert_double_eq_tol(bands_hz[first], 125, last_digits_db);
  for (int i = 0; i < RATING_FIT_BANDS; i++)
    ck_assert_double_eq_tol(db[i], e413_stc_50[i], last_digits_db);
  ck_assert(chart_contour(METRIC_RW_CTR, 52, &first, db));
  ck_assert_double_eq_tol(bands_hz[first], 100, last_digits_db);
  for (int i = 0; i < RATING_FIT_BANDS; i++)
    ck_assert_double_eq_tol(db[i], iso717_rw_52[i], last_digits_db);
  ck_assert(!chart_contour(METRIC_OITC, 30, &first, db));
}
END_TEST

START_TEST(what_a_curve_lacks) {
  double tl[BANDS];
  for (int i = 0; i < BANDS; i++) tl[i] = 60;
  for (int i = 0; i < RATING_FIT_BANDS; i++) tl[RATING_STC_FIRST + i] = e413_stc_50[i];
  ck_assert_double_eq_tol(chart_lack_of(METRIC_STC, 50, tl).sum, 0, last_digits_db);
  tl[BAND_125] -= 7.6; /* read as 26: 8 below */
  tl[BAND_500] -= 0.4; /* read as 50 */
  chart_lack lack = chart_lack_of(METRIC_STC, 50, tl);
  ck_assert_double_eq_tol(lack.sum, 8, last_digits_db);
  ck_assert_double_eq_tol(lack.most, 8, last_digits_db);
  ck_assert_int_eq(lack.most_band, BAND_125);
  lack = chart_lack_of(METRIC_RW, 52, tl); /* the same slope one band lower: tenths count */
  ck_assert_int_eq(lack.most_band, BAND_125);
  ck_assert_double_eq_tol(lack.most, 36 - 26.4, 1e-6);
}
END_TEST

/* ---- walls ---- */

static const char *random_line(void) {
  static const char *const faces[] = {"typex-16", "2*typex-16",       "gyp-13",
                                      "2*gyp-13", "3*typex-16",       "gyp-13 + mlv-5",
                                      "abuse-16", "typex-16 + osb-11"};
  static const char *const frames[] = {"wood-89@406",
                                       "wood-140@610",
                                       "steel-92-18@610",
                                       "steel-64-18@406",
                                       "steel-92-54@305",
                                       "wood-89-stag-140@406",
                                       "wood-89-double@406~100",
                                       "steel-92-18-double@610"};
  static const char *const fills[] = {"", ", glass-89", ", stone-50"};
  static const char *const mounts[] = {"", "", "rc@610 | ", "clip@406 | "};
  return text_format(shop.memory, "%s | %s%s%s | %s", faces[dice(8)], mounts[dice(4)],
                     frames[dice(8)], fills[dice(3)], faces[dice(8)]);
}

/* A wall that can be built. */
static assessment *random_wall(void) {
  wall w;
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  diag_list told;
  do {
    diag_init(&told, shop.memory);
  } while (!line_parse(shop.memory, &told, shop.catalog, random_line(), &w));
  judge_wall(shop.memory, &shop.context, &w, x);
  return x;
}

/* Seeded walls of one run: the catalogs are read for each run. */
enum { WALLS_A_TEST = 10 };

/* ---- read back ---- */

/* dB by place, from the numbers of the scale. */
typedef struct axis {
  double y, db, db_per_px;
} axis;

static axis read_axis(const picture_parts *p) {
  const double below = 0.35 * chart_letters[CHART_SMALL].size; /* a number below its line */
  axis a = {0};
  double y0 = 0, v0 = 0;
  int found = 0;
  for (int i = 0; i < p->texts; i++) {
    char *end;
    double v = strtod(p->text[i].value, &end);
    if (*end || end == p->text[i].value || p->text[i].x > 60) continue;
    if (found++ == 0) {
      y0 = p->text[i].y - below;
      v0 = v;
      continue;
    }
    double y = p->text[i].y - below;
    a = (axis){y0, v0, (v - v0) / (y - y0)};
  }
  ck_assert_int_ge(found, 3);
  return a;
}

/* The points of the polyline of a class. Returns how many. */
static int read_points(const char *drawn, const char *css_class, double *x, double *y) {
  const char *at =
      strstr(drawn, text_format(shop.memory, "<polyline class=\"%s\" points=\"", css_class));
  ck_assert_msg(at != NULL, "no %s", css_class);
  at = strchr(strstr(at, "points="), '"') + 1;
  int n = 0;
  while (*at != '"') {
    char *end;
    x[n] = strtod(at, &end);
    y[n++] = strtod(end, &end);
    at = end;
    while (*at == ' ') at++;
    ck_assert_int_le(n, BANDS);
  }
  return n;
}

static double db_at(const axis *a, double y) {
  return a->db + (y - a->y) * a->db_per_px;
}

static const char *drawn_of(const assessment *x, sound_metric m, bool paths) {
  text *out = new_picture();
  const chart_sound_options o = {m, paths};
  chart_sound(&shop.report, "s", x, &o, out);
  return out->data;
}

/* Places are written to 0.01 px; a picture has some 5 px a dB. */
static const double read_error_db = 0.02;

static void numbers_of(void) {
  const assessment *x = random_wall();
  const char *drawn = drawn_of(x, METRIC_STC, dice(2));
  picture_parts parts = take_apart(drawn);
  axis a = read_axis(&parts);
  double px[BANDS], py[BANDS];
  ck_assert_int_eq(read_points(drawn, "c-curve", px, py), BANDS);
  for (int b = 0; b < BANDS; b++)
    ck_assert_double_eq_tol(db_at(&a, py[b]), x->predicted.tl_db[b], read_error_db);
  double band_px = (px[BANDS - 1] - px[0]) / (BANDS - 1);
  for (int b = 0; b < BANDS; b++) ck_assert_double_eq_tol(px[b], px[0] + b * band_px, rounding_px);
  double cx[BANDS], cy[BANDS];
  ck_assert_int_eq(read_points(drawn, "c-contour", cx, cy), RATING_FIT_BANDS);
  for (int i = 0; i < RATING_FIT_BANDS; i++) {
    ck_assert_double_eq_tol(cx[i], px[RATING_STC_FIRST + i], rounding_px);
    double want = x->predicted.ratings.stc - 50 + e413_stc_50[i];
    ck_assert_double_eq_tol(db_at(&a, cy[i]), want, read_error_db);
  }
}

START_TEST(the_picture_says_the_numbers) {
  for (int k = 0; k < WALLS_A_TEST; k++) {
    dice_state = (uint32_t)(_i * WALLS_A_TEST + k);
    numbers_of();
  }
}
END_TEST

/* The bars of deficiency reach from curve to contour, in just the bands where the curve is lower.
 */
static void bars_of(void) {
  const assessment *x = random_wall();
  const char *drawn = drawn_of(x, METRIC_STC, false);
  picture_parts parts = take_apart(drawn);
  axis a = read_axis(&parts);
  const char *at = strstr(drawn, "class=\"c-lack\""), *end = strstr(at, "</g>");
  double contour[RATING_FIT_BANDS], sum = 0, want = 0;
  int first, bars = 0, lacking = 0;
  chart_contour(METRIC_STC, x->predicted.ratings.stc, &first, contour);
  for (int i = 0; i < RATING_FIT_BANDS; i++) {
    double lack = contour[i] - x->predicted.tl_db[first + i];
    lacking += lack > 0;
    want += fmax(0, lack);
  }
  for (const char *p = at; (p = strstr(p, "<rect")) != NULL && p < end; p++, bars++)
    sum -= attribute_of(p, strchr(p, '>'), "height", NULL) * a.db_per_px;
  ck_assert_int_eq(bars, lacking);
  ck_assert_double_eq_tol(sum, want, RATING_FIT_BANDS * read_error_db);
}

START_TEST(bars_are_deficiencies) {
  for (int k = 0; k < WALLS_A_TEST; k++) {
    dice_state = (uint32_t)(_i * WALLS_A_TEST + k);
    bars_of();
  }
}
END_TEST

static void contour_of(void) {
  const assessment *x = random_wall();
  const double *tl = x->predicted.tl_db;
  chart_lack lack = chart_lack_of(METRIC_STC, x->predicted.ratings.stc, tl);
  ck_assert(lack.sum <= RATING_SUM_LIMIT_DB && lack.most <= RATING_STC_LIMIT_DB);
  lack = chart_lack_of(METRIC_STC, x->predicted.ratings.stc + 1, tl);
  ck_assert(lack.sum > RATING_SUM_LIMIT_DB || lack.most > RATING_STC_LIMIT_DB);
  lack = chart_lack_of(METRIC_RW, x->predicted.ratings.rw, tl);
  ck_assert_double_le(lack.sum, RATING_SUM_LIMIT_DB + 1e-6); /* tenths have no exact binary form */
  lack = chart_lack_of(METRIC_RW, x->predicted.ratings.rw + 1, tl);
  ck_assert_double_gt(lack.sum, RATING_SUM_LIMIT_DB);
}

START_TEST(the_contour_is_the_highest_that_the_standard_allows) {
  for (int k = 0; k < WALLS_A_TEST; k++) {
    dice_state = (uint32_t)(_i * WALLS_A_TEST + k);
    contour_of();
  }
}
END_TEST

static void add_opening(double stc, double area_m2) {
  shop.brief.openings[shop.brief.opening_count++] =
      (opening){.kind = "door", .area_m2 = area_m2, .stc = stc};
}

static void labels_of(void) {
  shop.brief.opening_count = 0;
  if (dice(3) == 0) add_opening(18 + dice(30), 2);
  const assessment *x = random_wall();
  for (int m = 0; m < METRIC_COUNT; m++) {
    const char *drawn = drawn_of(x, (sound_metric)m, dice(2));
    const char *what = text_format(shop.memory, "%s by %s", x->line, sound_metric_names[m]);
    check_layout(drawn, what);
    check_well_formed(drawn);
    ck_assert_int_eq(strstr(drawn, "class=\"c-joint\"") != NULL, x->has_composite);
    ck_assert_int_eq(strstr(drawn, "class=\"c-contour\"") != NULL, m != METRIC_OITC);
  }
}

START_TEST(no_label_stands_on_another) {
  for (int k = 0; k < WALLS_A_TEST; k++) {
    dice_state = (uint32_t)(_i * WALLS_A_TEST + k);
    labels_of();
  }
}
END_TEST

/* ---- published walls ---- */

START_TEST(a_published_wall_shows_its_contour) {
  /* NBC 2020, table 9.10.3.1.-A: published STC 36; predicted other than that is its own contour. */
  assessment *x = rate("typex-16 | wood-89@610, glass-89 | typex-16");
  ck_assert_ptr_nonnull(x->evidence.match);
  x->predicted.ratings.stc = x->evidence.match->stc + 2;
  const char *drawn = drawn_of(x, METRIC_STC, false);
  picture_parts parts = take_apart(drawn);
  axis a = read_axis(&parts);
  double px[BANDS], py[BANDS];
  ck_assert_int_eq(read_points(drawn, "c-proof", px, py), RATING_FIT_BANDS);
  for (int i = 0; i < RATING_FIT_BANDS; i++)
    ck_assert_double_eq_tol(db_at(&a, py[i]), x->evidence.match->stc - 50 + e413_stc_50[i],
                            read_error_db);
  ck_assert_ptr_nonnull(
      strstr(drawn, text_format(shop.memory, ">published STC %d<", x->evidence.match->stc)));
  /* Of the same height one contour is enough. */
  x->predicted.ratings.stc = x->evidence.match->stc;
  ck_assert_ptr_null(strstr(drawn_of(x, METRIC_STC, false), "c-proof"));
  /* Rw of the table is not published. */
  ck_assert_ptr_null(strstr(drawn_of(x, METRIC_RW, false), "published"));
}
END_TEST

START_TEST(paths_are_drawn_on_request) {
  const assessment *x = rate("typex-16 | wood-89-stag-140@406 | typex-16");
  const char *with = drawn_of(x, METRIC_STC, true), *without = drawn_of(x, METRIC_STC, false);
  picture_parts parts = take_apart(with);
  axis a = read_axis(&parts);
  double px[BANDS], air[BANDS], studs[BANDS], lab[BANDS];
  ck_assert_int_eq(read_points(with, "c-path", px, air), BANDS);
  ck_assert_int_eq(read_points(with, "c-path2", px, studs), BANDS);
  ck_assert_int_eq(read_points(with, "c-path3", px, lab), BANDS);
  for (int b = 0; b < BANDS; b++) {
    double tau = pow(10, -db_at(&a, air[b]) / 10) + pow(10, -db_at(&a, studs[b]) / 10) +
                 pow(10, -db_at(&a, lab[b]) / 10);
    ck_assert_double_eq_tol(-10 * log10(tau), x->predicted.tl_db[b], read_error_db);
  }
  ck_assert_ptr_null(strstr(without, "c-path"));
  /* Rows that nothing joins have no path through studs. */
  const assessment *rows = rate("typex-16 | wood-89-double@406, glass-89 | typex-16");
  ck_assert_ptr_null(strstr(drawn_of(rows, METRIC_STC, true), "c-path2"));
}
END_TEST

START_TEST(words_say_what_counts) {
  const assessment *x = rate("2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16");
  const chart_sound_options o = {METRIC_STC, true};
  const char *said = chart_sound_words(&shop.report, x, &o);
  ck_assert_ptr_nonnull(
      strstr(said, "the standard deviation of the single number STC, not of each band"));
  ck_assert_ptr_nonnull(strstr(said, "not of each band"));
  ck_assert_ptr_nonnull(
      strstr(said, text_format(shop.memory, "contour of STC %d stands at %d dB",
                               x->predicted.ratings.stc, x->predicted.ratings.stc)));
  ck_assert_ptr_nonnull(strstr(said, "their energies add up to the curve"));
}
END_TEST

static Suite *all_tests(void) {
  Suite *s = suite_create("report_chart_sound");
  TCase *c = tcase_create("sound");
  enum { SEEDS = 8 };
  tcase_add_checked_fixture(c, open_demo, close_demo);
  tcase_set_timeout(c, 120);
  tcase_add_test(c, contours_are_those_of_the_standards);
  tcase_add_test(c, what_a_curve_lacks);
  tcase_add_loop_test(c, the_picture_says_the_numbers, 0, share_of(SEEDS));
  tcase_add_loop_test(c, bars_are_deficiencies, 0, share_of(SEEDS));
  tcase_add_loop_test(c, the_contour_is_the_highest_that_the_standard_allows, 0, share_of(SEEDS));
  tcase_add_loop_test(c, no_label_stands_on_another, 0, share_of(SEEDS));
  tcase_add_test(c, a_published_wall_shows_its_contour);
  tcase_add_test(c, paths_are_drawn_on_request);
  tcase_add_test(c, words_say_what_counts);
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
