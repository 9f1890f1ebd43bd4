/* The answer of plan: its parts against costs worked out apart, marks that are locked, the drawings
 * beside it, walls that a test would find below their target. */
#include "explain/plan.h"

#include <math.h>
#include <stdlib.h>

#include "random_briefs.h"
#include "wall/line.h"

/* Phi by erfc and by the library differ in their last bits. */
static const double probability_rounding = 1e-9;

typedef struct scene {
  project project;
  schedule *schedule;
  wall mark[PROJECT_MAX_MARKS];
  plan_answer plan;
} scene;

static scene *s;
static diag_list faults;

static const char *messages(void) {
  text t;
  text_init(&t, shop.memory, 1 << 16);
  for (size_t i = 0; i < faults.count; i++) diag_print(&t, &faults.items[i]);
  return t.data;
}

#define FEW                                                                                        \
  "\"code\": \"ibc\", \"only\": [\"typex-16\", \"gyp-13\", \"frame:wood-89\", "                    \
  "\"frame:steel-92-18\", "                                                                        \
  "\"glass-89\", \"rc\"], \"wall\": {\"height_ft\": 9}"

static void plan_of(const char *members, const char *csv) {
  const plan_order order = {0};
  s = arena_alloc(shop.memory, sizeof *s);
  diag_init(&faults, shop.memory);
  const char *file =
      text_format(shop.memory, "{\"septum\": \"project/1\", \"walls\": \"w.csv\", %s}", members);
  const json_value *v = json_parse(shop.memory, &faults, "p.json", file, strlen(file));
  ck_assert_msg(v && project_read(shop.memory, &faults, shop.catalog, v, &s->project), "%s",
                messages());
  const csv_table *t = csv_parse(shop.memory, &faults, "w.csv", csv, strlen(csv));
  ck_assert_msg(t != NULL, "%s", messages());
  s->schedule = schedule_read(shop.memory, &faults, shop.catalog, &s->project, t);
  ck_assert_msg(s->schedule != NULL, "%s", messages());
  for (int i = 0; i < s->project.mark_count; i++)
    ck_assert(line_parse(shop.memory, &faults, shop.catalog, s->project.mark[i].line, &s->mark[i]));
  const plan_context x = {shop.catalog, shop.prices, &s->project, s->schedule};
  ck_assert_msg(plan_explain(shop.memory, &faults, &x, s->mark, &order, &s->plan), "%s",
                messages());
}

/* A row's takeoff as `rate` would do it. */
static long long list_cents(int row) {
  const schedule_wall *w = &s->schedule->wall[row];
  takeoff *lines = arena_alloc(shop.memory, sizeof *lines);
  cost_total total;
  brief b;
  schedule_brief(s->schedule, row, &b);
  cost_takeoff(shop.prices, shop.catalog, &b, &s->plan.place[w->of_class].wall->wall, lines,
               &total);
  return w->count * total.total_cents;
}

#define HEAD "id,storey,from,to,length,count,target,fastening a,existing type\n"

START_TEST(without_goods_each_row_costs_what_rate_says) {
  plan_of(FEW ", \"quantity_breaks\": false, \"type_setup_cost\": 250", HEAD
          "A1,1,flat,flat,24ft,2,50,,\nA2,2,flat,hall,30ft,1,45,heavy,\nA3,2,x,y,8ft,3,35,,\n");
  long long sum = 0;
  ck_assert(s->plan.found);
  ck_assert_int_eq(s->plan.goods_count, 0);
  for (int i = 0; i < s->schedule->count; i++) {
    ck_assert_int_eq(s->plan.row[i].list_cents, list_cents(i));
    ck_assert_int_eq(s->plan.row[i].money.walls, list_cents(i));
    sum += list_cents(i);
  }
  ck_assert_int_eq(s->plan.cost_cents, sum + 25000 * s->plan.type_count);
  ck_assert_int_eq(s->plan.bound_cents, s->plan.cost_cents);
}
END_TEST

START_TEST(goods_of_the_rows_are_the_goods_of_the_project) {
  plan_of(FEW ", \"stock\": [{\"item\": \"typex-16\", \"quantity\": 100, \"unit\": \"ft2\"}]",
          HEAD "A1,1,flat,flat,24ft,2,50,,\nA2,2,flat,hall,30ft,1,45,,\nA3,2,x,y,8ft,3,35,,\n");
  long long bought = 0, shared = 0;
  for (int i = 0; i < s->plan.goods_count; i++) bought += s->plan.goods[i].buy.cents;
  for (int i = 0; i < s->schedule->count; i++) shared += s->plan.row[i].money.goods;
  ck_assert_int_gt(bought, 0);
  ck_assert_int_eq(bought, shared);
  ck_assert_int_eq(bought, s->plan.money.goods);
  for (int i = 0; i < s->plan.need_count; i++) {
    const plan_need *n = &s->plan.need[i];
    if (n->goods < 0 || n->stud_m > 0) continue;
    ck_assert_double_eq_tol(n->quantity, s->plan.goods[n->goods].buy.need, 1e-4 * n->quantity);
  }
}
END_TEST

#define TYPES                                                                                      \
  ", \"types\": {\"T1\": {\"line\": \"gyp-13 | wood-89@406 | gyp-13\", \"locked\": true}, "        \
  "\"P9\": \"2*typex-16 | wood-89@406, glass-89 | 2*typex-16\"}"

START_TEST(a_locked_mark_keeps_its_wall_and_its_name) {
  plan_of(FEW TYPES, HEAD "A1,1,a,b,24ft,1,50,,T1\nA2,1,a,b,24ft,1,50,,P9\nA3,1,a,b,24ft,1,50,,\n");
  ck_assert_int_eq(s->plan.type_count, 2);
  const plan_used *kept = &s->plan.type[s->plan.row[0].type];
  ck_assert_str_eq(kept->name, "T1");
  ck_assert(kept->locked && !kept->without.done);
  ck_assert_str_eq(s->plan.row[0].line, "gyp-13 | wood-89@406 | gyp-13");
  ck_assert(s->plan.place[s->schedule->wall[0].of_class].wall->broken != 0);
  /* The other type takes the first name that no mark has. */
  ck_assert_str_eq(s->plan.type[s->plan.row[1].type].name, "T2");
  ck_assert_int_eq(s->plan.row[1].type, s->plan.row[2].type);
}
END_TEST

START_TEST(the_drawings_cost_what_their_rows_cost) {
  plan_of(FEW TYPES ", \"quantity_breaks\": false, \"type_setup_cost\": 100",
          HEAD "A1,1,a,b,24ft,1,50,,P9\nA2,1,a,b,30ft,2,50,,P9\nA3,1,a,b,24ft,1,50,,\n");
  const plan_comparison *c = &s->plan.against;
  ck_assert(c->done);
  ck_assert_int_eq(c->row_count, 2);
  long long drawn = s->plan.row[2].money.walls;
  takeoff *lines = arena_alloc(shop.memory, sizeof *lines);
  for (int i = 0; i < 2; i++) {
    cost_total total;
    brief b;
    schedule_brief(s->schedule, i, &b);
    cost_takeoff(shop.prices, shop.catalog, &b, &s->mark[1], lines, &total);
    drawn += s->schedule->wall[i].count * total.total_cents;
  }
  ck_assert_int_eq(c->drawings.walls, drawn);
  ck_assert_int_eq(c->types, 2); /* P9, and the plan's on the row that has none */
  ck_assert_int_eq(c->drawings.setup, 20000);
  ck_assert_int_ge(plan_money_total(&c->drawings), s->plan.cost_cents);
}
END_TEST

/* Phi((exact - T) / sd) with the field's scatter in quadrature and its 5 points given. */
START_TEST(expected_misses_are_sums_of_probabilities) {
  plan_of(FEW, HEAD "A1,1,a,b,24ft,3,44,,\n");
  const assessment *x = s->plan.place[0].wall;
  double sd = x->sd[METRIC_STC], off = x->exact[METRIC_STC] - 44;
  double inside = 0.5 * erfc(off / sqrt(2 * sd * sd));
  double field = 0.5 * erfc(off / sqrt(2 * (sd * sd + 2 * 2)));
  ck_assert_int_eq(s->plan.asked_walls, 3);
  ck_assert_double_eq_tol(s->plan.miss_laboratory, 3 * inside, probability_rounding);
  ck_assert_double_eq_tol(s->plan.miss_field, 3 * field, probability_rounding);
}
END_TEST

START_TEST(a_wall_that_nothing_fits_leaves_the_others_planned) {
  plan_of(FEW, HEAD "A1,1,a,b,24ft,1,44,,\nA2,1,a,b,24ft,4,80,,\n");
  ck_assert(s->plan.found);
  ck_assert_int_eq(s->plan.unplanned_count, 1);
  ck_assert_int_eq(s->plan.unplanned_rows, 1);
  ck_assert_int_eq(s->plan.unplanned_walls, 4);
  ck_assert_int_eq(s->plan.row[1].type, PLAN_NONE);
  const explanation *why = s->plan.unplanned[0].why;
  ck_assert_int_eq(why->conflict_count, 1);
  ck_assert(why->conflicts[0] == rule_bit(RULE_TARGET));
  ck_assert_int_gt(why->nearest_count, 0);
}
END_TEST

START_TEST(what_fights_is_named) {
  plan_of(FEW ", \"budget\": 10, \"max_types\": 1", HEAD "A1,1,a,b,24ft,1,44,,\n");
  ck_assert(!s->plan.found);
  ck_assert_int_eq(s->plan.status, SOLVER_INFEASIBLE);
  ck_assert_int_eq(s->plan.conflict_count, 1);
  ck_assert_uint_eq(s->plan.conflict[0], 1u << PLAN_RULE_BUDGET);
  ck_assert(s->plan.relaxed[PLAN_RULE_BUDGET].found);
}
END_TEST

int main(void) {
  Suite *suite = suite_create("explain plan");
  TCase *cases = tcase_create("plan");
  tcase_add_checked_fixture(cases, open_shop, close_shop);
  tcase_set_timeout(cases, 120);
  tcase_add_test(cases, without_goods_each_row_costs_what_rate_says);
  tcase_add_test(cases, goods_of_the_rows_are_the_goods_of_the_project);
  tcase_add_test(cases, a_locked_mark_keeps_its_wall_and_its_name);
  tcase_add_test(cases, the_drawings_cost_what_their_rows_cost);
  tcase_add_test(cases, expected_misses_are_sums_of_probabilities);
  tcase_add_test(cases, a_wall_that_nothing_fits_leaves_the_others_planned);
  tcase_add_test(cases, what_fights_is_named);
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
