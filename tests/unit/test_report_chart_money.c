/* Charts of cost, ladder, candidates and savings: amounts are those of the answer, and the layout
 * holds for whatever comes. */
#include <math.h>

#include "charts.h"
#include "report/chart_cloud.h"
#include "report/chart_cost.h"
#include "report/chart_ladder.h"
#include "share.h"

static void check(const text *out, const char *what) {
  ck_assert(!out->cut);
  check_layout(out->data, what);
  check_well_formed(out->data);
}

static const char *const lines[] = {
    "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16",
    "typex-16 | wood-89-double@406, glass-89, glass-89 | 2*typex-16",
    "gyp-13 + mlv-5 | wood-140@406, cell-140 | typex-16 + osb-11",
    "3*abuse-16 | clip@406 | steel-152-54@305, stone-150 | 2*typec-16",
    "typex-16 | wood-89@610 | typex-16",
};
enum { LINES = sizeof lines / sizeof lines[0] };

/* Seeds of one run: the catalogs are read for each run. */
enum { A_TEST = 20 };

/* ---- cost ---- */

/* Amounts at the right end of rows, "1,234.50 USD, 31 %", in cents. */
static long long sum_of_rows(const char *drawn) {
  picture_parts p = take_apart(drawn);
  long long sum = 0;
  for (int i = 0; i < p.texts; i++) {
    const char *at = p.text[i].value;
    if (!strstr(at, " USD")) continue;
    long long cents = 0;
    for (; *at && *at != ' '; at++)
      if (*at >= '0' && *at <= '9') cents = 10 * cents + (*at - '0');
    sum += cents;
  }
  return sum;
}

START_TEST(rows_add_up_to_the_cost) {
  const assessment *x = rate(lines[_i]);
  text *out = new_picture();
  chart_cost(&shop.report, "m", x, out);
  check(out, lines[_i]);
  ck_assert_int_gt(x->cost.total_cents, 0);
  ck_assert_int_eq(sum_of_rows(out->data), x->cost.total_cents);
}
END_TEST

/* A price book whose names and currency are what a user may have written. */
static price_book *awkward_book(void) {
  price_book *b = arena_alloc(shop.memory, sizeof *b);
  *b = *shop.prices;
  price_item *items = arena_array(shop.memory, b->count, sizeof *items);
  for (size_t i = 0; i < b->count; i++) {
    items[i] = b->items[i];
    items[i].name = awkward[dice(AWKWARD)];
    if (dice(4) == 0) items[i].section = awkward[dice(AWKWARD)];
    if (dice(9) == 0) items[i].price *= 1e9;
  }
  b->items = items;
  if (dice(3) == 0) b->currency = awkward[dice(AWKWARD)];
  return b;
}

static void check_book(int seed) {
  dice_state = (uint32_t)seed;
  const price_book *shipped = shop.prices;
  shop.prices = awkward_book();
  shop.context.prices = shop.report.prices = shop.prices;
  const assessment *x = rate(lines[dice(LINES)]), *y = rate(lines[dice(LINES)]);
  const char *what = text_format(shop.memory, "book %d", seed);
  text *out = new_picture();
  chart_cost(&shop.report, "m", x, out);
  check(out, what);
  out = new_picture();
  chart_before_after(&shop.report, "m", x, y, awkward[dice(AWKWARD)], out);
  check(out, what);
  shop.context.prices = shop.report.prices = shop.prices = shipped;
}

START_TEST(cost_of_any_price_book) {
  for (int k = 0; k < A_TEST; k++) check_book(_i * A_TEST + k);
}
END_TEST

START_TEST(no_price_no_bars) {
  assessment *x = rate(lines[0]);
  x->takeoff.missing = 1;
  text *out = new_picture();
  chart_cost(&shop.report, "m", x, out);
  check(out, "no price");
  ck_assert_ptr_null(strstr(out->data, "<rect"));
  ck_assert_ptr_nonnull(strstr(out->data, "cannot be costed"));
}
END_TEST

/* ---- before and after ---- */

/* "(specified 1.00 USD, other 2.00 USD)" in each row's words: the sums of both. */
static void sum_words(const char *said, const char *name, long long *sum) {
  const char *key = text_format(shop.memory, "%s ", name);
  *sum = 0;
  const char *at = strstr(said, "by section number");
  ck_assert_ptr_nonnull(at);
  while ((at = strstr(at, key)) != NULL) {
    at += strlen(key);
    long long cents = 0;
    const char *p = at;
    for (; *p && *p != ' '; p++)
      if (*p >= '0' && *p <= '9') cents = 10 * cents + (*p - '0');
    *sum += cents;
  }
}

START_TEST(both_sides_add_up) {
  const assessment *x = rate(lines[_i]);
  for (int k = 0; k < LINES; k++) {
    const assessment *y = rate(lines[k]);
    long long before, after;
    const char *said = chart_before_after_words(&shop.report, x, y, "other");
    sum_words(said, "(specified", &before);
    sum_words(said, " other", &after);
    ck_assert_int_eq(before, x->cost.total_cents);
    ck_assert_int_eq(after, y->cost.total_cents);
    text *out = new_picture();
    chart_before_after(&shop.report, "m", x, y, "other", out);
    check(out, said);
  }
}
END_TEST

static void check_savings(int seed) {
  dice_state = (uint32_t)seed;
  trim_answer *t = arena_alloc(shop.memory, sizeof *t);
  t->proposal_count = seed == 0 ? 0 : 1 + (int)dice(TRIM_MAX_COUNT);
  t->proposal = arena_array(shop.memory, (size_t)t->proposal_count, sizeof *t->proposal);
  assessment *wall_of = rate(lines[0]);
  for (int i = 0; i < t->proposal_count; i++) {
    t->proposal[i].wall = wall_of;
    t->proposal[i].saving_cents = awkward_cents() / 100;
  }
  wall_of->line = awkward[dice(AWKWARD)];
  text *out = new_picture();
  chart_savings(&shop.report, "m", t, out);
  check(out, text_format(shop.memory, "savings %d", seed));
}

START_TEST(savings_of_many_walls) {
  for (int k = 0; k < A_TEST; k++) check_savings(_i * A_TEST + k);
}
END_TEST

/* ---- ladder ---- */

/* A ladder of `count` rungs with figures of no real walls. */
static ladder_answer *made_ladder(int count) {
  ladder_answer *l = arena_alloc(shop.memory, sizeof *l);
  l->count = count;
  l->rung = arena_array(shop.memory, (size_t)count, sizeof *l->rung);
  int rating = 1 + (int)dice(30);
  long long cents = 100 + awkward_cents() / 1000;
  for (int i = 0; i < count; i++) {
    ladder_rung *g = &l->rung[i];
    g->wall = rate(lines[dice(LINES)]);
    g->wall->predicted.exact[METRIC_STC] = rating + dice(50) / 10.0;
    g->serves_from = i == 0 ? 1 : rating;
    rating += (int)dice(dice(4) == 0 ? 8 : 2);
    g->rating = rating++;
    g->cost_cents = cents;
    cents += 1 + awkward_cents() / (1 + (long long)dice(1000));
  }
  if (count > 0) ladder_mark_hull(l->rung, count);
  if (dice(3) == 0) {
    l->terms.have = rate(lines[dice(LINES)]);
    l->terms.have_reaches = (int)dice(70);
  }
  return l;
}

static void check_ladder(int seed) {
  dice_state = (uint32_t)seed;
  shop.brief.target_count = 1;
  shop.brief.targets[0] = (target){.metric = METRIC_STC, .value = 1, .confidence = 0.8};
  shop.report.units = dice(2) ? UNITS_SI : UNITS_US;
  ladder_answer *l = made_ladder(seed < 3 ? seed : (int)dice(45));
  text *out = new_picture();
  chart_ladder(&shop.report, "m", l, out);
  check(out, text_format(shop.memory, "ladder %d of %d rungs", seed, l->count));
  int marks = 0;
  for (const char *at = out->data; (at = strstr(at, "<title>STC ")) != NULL; at++) marks++;
  ck_assert_int_eq(marks, l->count);
}

START_TEST(ladders_of_any_height) {
  for (int k = 0; k < A_TEST; k++) check_ladder(_i * A_TEST + k);
}
END_TEST

/* ---- the cloud ---- */

static cloud made_cloud(void) {
  cloud c = {.walls = 1000 + dice(100000), .count = (int)dice(3) == 0 ? 0 : (int)dice(CLOUD_MOST)};
  c.point = arena_array(shop.memory, CLOUD_MOST, sizeof *c.point);
  long long base = 1000 + awkward_cents() / 1000;
  for (int i = 0; i < c.count; i++)
    c.point[i] = (cloud_point){.rating = 50 + dice(200) / 10.0, .cost_cents = base + dice(100000)};
  c.edge_count = (int)dice(30);
  c.edge = arena_array(shop.memory, 30, sizeof *c.edge);
  for (int i = 0; i < c.edge_count; i++)
    c.edge[i] = (cloud_point){.rating = 50.2 + i * 0.7, .cost_cents = base + 300 * i, .line = "x"};
  return c;
}

static assessment **made_walls(int *count) {
  *count = (int)dice(12);
  assessment **x = arena_array(shop.memory, 12, sizeof *x);
  for (int i = 0; i < *count; i++) {
    x[i] = rate(lines[dice(LINES)]);
    x[i]->numbers.promised_hundredth = (int)dice(3000) - 1000;
    x[i]->takeoff.missing = dice(20) == 0;
    x[i]->line = awkward[dice(AWKWARD)];
  }
  return x;
}

static void check_cloud(int seed) {
  dice_state = (uint32_t)seed;
  brief *b = &shop.brief;
  b->target_count = 1 + (int)dice(2);
  for (int i = 0; i < b->target_count; i++)
    b->targets[i] = (target){.metric = (sound_metric)dice(METRIC_COUNT),
                             .value = 20 + dice(40),
                             .confidence = 0.8,
                             .basis = dice(4) ? BASIS_LAB : BASIS_FIELD};
  if (dice(3) == 0) b->cost_per_m2 = (limit){false, true, 0, 50 + dice(300)};
  shop.report.units = dice(2) ? UNITS_SI : UNITS_US;
  cloud c = made_cloud();
  explanation e = {0};
  int chosen;
  assessment **wall_of = made_walls(&chosen);
  if (chosen > 0 && dice(3) > 0) e.chosen = wall_of[0];
  e.runners = made_walls(&e.runner_count);
  e.cheaper = made_walls(&e.cheaper_count);
  e.nearest = made_walls(&e.nearest_count);
  text *out = new_picture();
  chart_cloud(&shop.report, "m", &e, &c, out);
  check(out, text_format(shop.memory, "cloud %d", seed));
  int points = 0;
  const char *at = strstr(out->data, "<g class=\"c-cloud\"");
  ck_assert_ptr_nonnull(at);
  if (c.count > 0)
    for (const char *end = strstr(at, "</g>"); (at = strstr(at, "<circle")) != NULL && at < end;
         at++)
      points++;
  ck_assert_int_eq(points, c.count);
}

START_TEST(clouds_of_anything) {
  for (int k = 0; k < A_TEST; k++) check_cloud(_i * A_TEST + k);
}
END_TEST

static Suite *all_tests(void) {
  Suite *s = suite_create("report_chart_money");
  TCase *c = tcase_create("money");
  enum { SEEDS = 5 };
  tcase_add_checked_fixture(c, open_demo, close_demo);
  tcase_set_timeout(c, 120);
  tcase_add_loop_test(c, rows_add_up_to_the_cost, 0, LINES);
  tcase_add_loop_test(c, cost_of_any_price_book, 0, share_of(SEEDS));
  tcase_add_test(c, no_price_no_bars);
  tcase_add_loop_test(c, both_sides_add_up, 0, LINES);
  tcase_add_loop_test(c, savings_of_many_walls, 0, 1);
  tcase_add_loop_test(c, ladders_of_any_height, 0, share_of(SEEDS));
  tcase_add_loop_test(c, clouds_of_anything, 0, share_of(SEEDS));
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
