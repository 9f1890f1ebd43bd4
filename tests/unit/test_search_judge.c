/* Rules, their integers and words; what a rating is worth to a target; one wall judged in full. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include "random_briefs.h"
#include "wall/line.h"

static const double z_digits = 5e-5; /* the tables of the normal distribution give four decimals */
static const double tenth_db = 0.1;  /* exact ratings are stepped down to 0.1 dB */
static const double points = 0.015;  /* probabilities given in per cent */

/* ---- integers ---- */

static const struct {
  const char *name;
  double metres;
  int tenth_mm;
} thicknesses[] = {
    {"3-5/8 in stud with two 5/8 in boards", 0.0921 + 0.0159 + 0.0159, 1239},
    {"a half is rounded up", 0.09525 + 0.0, 953},
    {"a half whatever the order of its sum", 0.015875 + 0.0635 + 0.015875, 953},
    {"just below a half", 0.0952499, 952},
};

START_TEST(thickness_in_tenths_of_a_millimetre) {
  ck_assert_msg(rules_thickness(thicknesses[_i].metres) == thicknesses[_i].tenth_mm, "%s",
                thicknesses[_i].name);
}
END_TEST

/* common practice, no source: a limit on thickness is kept by what is up to 1/32 in thicker */
START_TEST(a_thickness_limit_has_slack) {
  brief b;
  job_defaults(&b);
  b.thickness_m = (limit){false, true, 0, 0.1239};
  rule_limits l = rules_limits(&b);
  wall_numbers n = {.thickness_tenth_mm = rules_thickness(0.1239 + 0.0007), .height_mm = 9999};
  ck_assert_uint_eq(rules_broken_by(&l, &n), 0);
  n.thickness_tenth_mm = rules_thickness(0.1239 + 0.0009);
  ck_assert_uint_eq(rules_broken_by(&l, &n), rule_bit(RULE_THICKNESS_MAX));
}
END_TEST

START_TEST(each_limit_breaks_its_own_rule) {
  brief b;
  job_defaults(&b);
  b.length_m = 4, b.height_m = 2.5;
  b.thickness_m = (limit){true, true, 0.10, 0.20};
  b.mass_kg_m2 = (limit){true, true, 20, 40};
  b.cost_per_m2 = (limit){false, true, 0, 100};
  b.fire_min = 60;
  const struct {
    wall_numbers n;
    int rule;
  } rows[] = {
      {{.total_cents = 100001}, RULE_COST_MAX},
      {{.thickness_tenth_mm = 2009}, RULE_THICKNESS_MAX},
      {{.thickness_tenth_mm = 991}, RULE_THICKNESS_MIN},
      {{.mass_hundredth = 4001}, RULE_MASS_MAX},
      {{.mass_hundredth = 1999}, RULE_MASS_MIN},
      {{.fire_min = 59}, RULE_FIRE},
      {{.height_mm = 2499}, RULE_HEIGHT},
  };
  const wall_numbers good = {100000, 100000, 1500, 3000, 0, 2500, 60};
  rule_limits l = rules_limits(&b);
  ck_assert_uint_eq(rules_broken_by(&l, &good), 0);
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    wall_numbers n = good;
    const wall_numbers *bad = &rows[i].n;
    if (bad->total_cents) n.total_cents = bad->total_cents;
    if (bad->thickness_tenth_mm) n.thickness_tenth_mm = bad->thickness_tenth_mm;
    if (bad->mass_hundredth) n.mass_hundredth = bad->mass_hundredth;
    if (bad->fire_min) n.fire_min = bad->fire_min;
    if (bad->height_mm) n.height_mm = bad->height_mm;
    ck_assert_msg(rules_broken_by(&l, &n) == rule_bit(rows[i].rule), "row %zu", i);
  }
}
END_TEST

/* ---- patterns ---- */

static const struct {
  const char *pattern;
  catalog_kind kind;
  const char *id;
  bool meets;
} patterns[] = {
    {"wood-*", CATALOG_FRAME, "wood-89", true},
    {"frame:wood-*", CATALOG_FRAME, "wood-89", true},
    {"board:wood-*", CATALOG_FRAME, "wood-89", false},
    {"typex-1?", CATALOG_LAYER, "typex-16", true},
    {"typex-1?", CATALOG_LAYER, "typex-16-light", false},
    {"fill:glass-*", CATALOG_FILL, "glass-89", true},
    {"mount:*", CATALOG_FILL, "glass-89", false},
    {"mount:*", CATALOG_MOUNT, "rc", true},
    {"rc", CATALOG_MOUNT, "rc", true},
};

START_TEST(patterns_meet_ids) {
  ck_assert_int_eq(rules_pattern_meets(patterns[_i].pattern, patterns[_i].kind, patterns[_i].id),
                   patterns[_i].meets);
}
END_TEST

START_TEST(more_patterns_than_bits) {
  brief b;
  job_defaults(&b);
  for (int i = 0; i < BRIEF_MAX_PATTERNS; i++)
    b.without[b.without_count++] = i == BRIEF_MAX_PATTERNS - 1 ? "rc" : "no-such-*";
  ck_assert_uint_eq(rules_without(&b, CATALOG_MOUNT, "rc"), rule_bit(RULES_MAX - 1));
  ck_assert_int_eq(rules_count(rules_in_force(&b) & ~(rule_bit(RULE_WITHOUT) - 1)),
                   RULES_MAX_WITHOUT);
}
END_TEST

/* ---- targets ---- */

/* Standard normal distribution, from any table. */
static const struct {
  double confidence, z;
} normal[] = {
    {0.5, 0}, {0.8, 0.8416}, {0.9, 1.2816}, {0.95, 1.6449}, {0.975, 1.9600}, {0.2, -0.8416},
};

START_TEST(z_of_a_confidence) {
  ck_assert_double_eq_tol(judge_z(normal[_i].confidence), normal[_i].z, z_digits);
}
END_TEST

static const struct {
  const char *name;
  double value, margin, exact, sd, confidence;
  int printed;
  bool field, published, pass;
  double probability;
} ratings_at[] = {
    /* 51.2 with sd 1.4 is 80 % sure of 50: Phi(1.2 / 1.4) = 0.804 */
    {"51.2, sd 1.4: 80 % sure of 50", 50, 0, 51.2, 1.4, 0.8, 51, false, false, true, 0.804},
    {"51.2, sd 1.4: not 81 % sure", 50, 0, 51.2, 1.4, 0.81, 51, false, false, false, 0.804},
    {"51.1 is not enough", 50, 0, 51.1, 1.4, 0.8, 51, false, false, false, 0.784},
    {"the printed rating must reach it too", 50, 0, 50.1, 1.4, 0.5, 49, false, false, false, 0.528},
    {"bare prediction", 50, 0, 50.0, 1.4, 0.5, 50, false, false, true, 0.5},
    {"margin", 50, 1, 51.2, 1.4, 0.8, 51, false, false, false, 0.557},
    /* field: 5 points more, sd sqrt(1.4^2 + 2^2) = 2.44; Phi(2.2 / 2.44) = 0.816 */
    {"in the field", 47, 0, 54.2, 1.4, 0.8, 54, true, false, true, 0.816},
    {"in the field, not enough", 47, 0, 53.9, 1.4, 0.8, 53, true, false, false, 0.782},
    {"published", 50, 0, 50.5, 1.0, 0.99, 50, false, true, true, 1},
    {"published below", 50, 0, 49.5, 1.0, 0.5, 49, false, true, false, 0.309},
};

START_TEST(passing_a_target) {
  target t = {.metric = METRIC_STC, .value = ratings_at[_i].value, .margin = ratings_at[_i].margin};
  double probability;
  t.basis = ratings_at[_i].field ? BASIS_FIELD : BASIS_LAB;
  bool pass =
      judge_passes(&t, 5, 2, ratings_at[_i].exact, ratings_at[_i].printed, ratings_at[_i].sd,
                   ratings_at[_i].published, ratings_at[_i].confidence, &probability);
  ck_assert_msg(pass == ratings_at[_i].pass, "%s", ratings_at[_i].name);
  ck_assert_double_eq_tol(probability, ratings_at[_i].probability, points);
}
END_TEST

START_TEST(smallest_sets_without_which_a_wall_passes) {
  const rule_mask target_bit = rule_bit(RULE_TARGET), confidence = rule_bit(RULE_CONFIDENCE),
                  composite = rule_bit(RULE_COMPOSITE);
  const struct {
    judge_reach reach;
    rule_mask broken, instead;
  } rows[] = {
      {{true, true, true, true}, 0, 0},
      {{false, true, false, true}, confidence, 0},
      {{false, false, true, true}, composite, 0},
      {{false, true, true, true}, composite, confidence},
      {{false, false, false, true}, confidence | composite, 0},
      {{false, false, false, false}, target_bit, 0},
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    rule_mask broken, instead;
    judge_name_reach(&rows[i].reach, &broken, &instead);
    ck_assert_uint_eq(broken, rows[i].broken);
    ck_assert_uint_eq(instead, rows[i].instead);
  }
}
END_TEST

/* ---- whole walls ---- */

static void judge_line(const brief *b, const char *line, assessment *out) {
  diag_list d;
  wall w;
  judge_context x = {shop.catalog, shop.prices, b};
  diag_init(&d, shop.memory);
  ck_assert_msg(line_parse(shop.memory, &d, shop.catalog, line, &w), "%s", line);
  judge_wall(shop.memory, &x, &w, out);
}

static brief asking(double stc) {
  brief b;
  job_defaults(&b);
  b.code = CODE_NBC;
  b.target_count = 1;
  b.targets[0] = (target){.metric = METRIC_STC, .value = stc, .confidence = 0.8};
  return b;
}

static const broken_rule *broke(const assessment *x, int rule) {
  for (int i = 0; i < x->broken_count; i++)
    if (x->broke[i].rule == rule) return &x->broke[i];
  return NULL;
}

START_TEST(a_heavy_side_with_a_channel_is_refused_and_told_why) {
  brief b = asking(45);
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  b.side[SIDE_A].fastening = FASTENING_HEAVY;
  judge_line(&b, "typex-16 | rc@610 | wood-89@406, glass-89 | typex-16", x);
  const broken_rule *r = broke(x, RULE_FASTENING_A);
  ck_assert_ptr_nonnull(r);
  ck_assert_str_eq(r->limit, "heavy");
  ck_assert_ptr_nonnull(strstr(r->found, "mount"));
  ck_assert_ptr_null(broke(x, RULE_FASTENING_B));
}
END_TEST

/* common practice, no source: a channel helps on wood, and its short-circuit takes most of that
 * away */
START_TEST(a_mounted_leaf_has_its_short_circuited_rating) {
  brief b = asking(45);
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  judge_line(&b, "2*typex-16 | rc@610 | wood-89@406, glass-89 | typex-16", x);
  ck_assert(x->mounted);
  ck_assert_str_eq(x->short_line, "2*typex-16 | wood-89@406, glass-89 | typex-16");
  ck_assert_int_le(x->short_predicted.ratings.stc, x->predicted.ratings.stc - 5);
  judge_line(&b, "typex-16 | wood-89@406, glass-89 | typex-16", x);
  ck_assert(!x->mounted);
}
END_TEST

/* NBC 2020, Table 9.10.3.1.-A, row S2a */
static const char published_line[] = "2*typex-16 | steel-64-18@610, glass-65 | typex-16";

START_TEST(a_published_rating_replaces_stc_alone) {
  brief b = asking(30);
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  judge_line(&b, published_line, x);
  ck_assert_ptr_nonnull(x->evidence.match);
  ck_assert_str_eq(x->evidence.match->id, "NBC-S2a");
  ck_assert_int_eq(x->ratings.stc, x->evidence.match->stc);
  ck_assert_double_eq_tol(x->exact[METRIC_STC], x->ratings.stc + 0.5, 1e-9);
  ck_assert_int_eq(x->ratings.rw, x->predicted.ratings.rw);
  ck_assert_int_eq(x->ratings.oitc, x->predicted.ratings.oitc);
  ck_assert_double_eq(x->probability[0], 1);
}
END_TEST

START_TEST(evidence_published_refuses_predictions) {
  brief b = asking(30);
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  b.targets[0].evidence = EVIDENCE_PUBLISHED;
  judge_line(&b, published_line, x);
  ck_assert_ptr_null(broke(x, RULE_EVIDENCE));
  judge_line(&b, "abuse-16 | steel-92-18@610, glass-89 | abuse-16", x);
  ck_assert_ptr_nonnull(broke(x, RULE_EVIDENCE));
}
END_TEST

/* With a STC 28 door in 270 ft2 of wall no wall can pass 39 (calculated: 10 lg (270 / 21) above the
 * door). */
START_TEST(a_door_caps_the_composite) {
  brief b = asking(50);
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  b.length_m = 270 * UNITS_M2_PER_FT2 / 3;
  b.height_m = 3;
  b.openings[b.opening_count++] =
      (opening){.kind = "door", .area_m2 = 21 * UNITS_M2_PER_FT2, .stc = 28};
  judge_line(&b, "2*typex-16 | steel-92-18-double@610, glass-89, glass-89 | 2*typex-16", x);
  ck_assert(x->has_composite);
  ck_assert_double_eq_tol(x->composite_ceiling, 28 + 10 * log10(270.0 / 21), tenth_db);
  ck_assert_int_le(x->composite.stc, 39);
  ck_assert_int_ge(x->ratings.stc, 55);
  ck_assert_ptr_null(broke(x, RULE_COMPOSITE)); /* scope wall: shown, not judged */
  b.targets[0].composite = true;
  judge_line(&b, "2*typex-16 | steel-92-18-double@610, glass-89, glass-89 | 2*typex-16", x);
  ck_assert_ptr_nonnull(broke(x, RULE_COMPOSITE));
  ck_assert_ptr_null(broke(x, RULE_TARGET));
  ck_assert_double_lt(x->probability[0], 0.01);
  b.targets[0].value = 35;
  judge_line(&b, "2*typex-16 | steel-92-18-double@610, glass-89, glass-89 | 2*typex-16", x);
  ck_assert_uint_eq(
      x->broken & (rule_bit(RULE_COMPOSITE) | rule_bit(RULE_TARGET) | rule_bit(RULE_CONFIDENCE)),
      0);
}
END_TEST

START_TEST(several_targets_must_all_hold) {
  brief b = asking(30);
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  b.target_count = 2;
  b.targets[1] = (target){.metric = METRIC_OITC, .value = 60, .confidence = 0.5};
  judge_line(&b, published_line, x);
  ck_assert_ptr_nonnull(broke(x, RULE_TARGET));
  ck_assert_double_eq(x->probability[0], 1);
  ck_assert_double_lt(x->probability[1], 0.01);
  ck_assert_int_lt(x->numbers.promised_hundredth, 0);
}
END_TEST

START_TEST(what_without_and_only_name_is_told_by_id) {
  brief b = asking(30);
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  b.without[b.without_count++] = "glass-*";
  b.only[b.only_count++] = "wood-*";
  judge_line(&b, "typex-16 | steel-92-18@610, glass-89 | typex-16", x);
  ck_assert_str_eq(broke(x, RULE_WITHOUT)->found, "glass-89");
  ck_assert_str_eq(rule_name(shop.memory, &b, RULE_WITHOUT), "without glass-*");
  ck_assert_str_eq(broke(x, RULE_ONLY)->found, "steel-92-18");
}
END_TEST

START_TEST(every_rule_in_force_has_a_name_and_a_limit) {
  for (unsigned seed = 0; seed < 100; seed++) {
    brief b = random_brief(seed);
    rule_mask on = rules_in_force(&b);
    for (int rule = 0; rule < RULES_MAX; rule++) {
      if (!(on & rule_bit(rule))) continue;
      ck_assert_str_ne(rule_name(shop.memory, &b, rule), "");
      ck_assert_str_ne(rule_limit(shop.memory, &b, rule), "");
    }
  }
}
END_TEST

#define COUNT(rows) ((int)(sizeof rows / sizeof rows[0]))

int main(void) {
  Suite *s = suite_create("search_judge");
  TCase *t = tcase_create("numbers");
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_loop_test(t, thickness_in_tenths_of_a_millimetre, 0, COUNT(thicknesses));
  tcase_add_test(t, a_thickness_limit_has_slack);
  tcase_add_test(t, each_limit_breaks_its_own_rule);
  tcase_add_loop_test(t, patterns_meet_ids, 0, COUNT(patterns));
  tcase_add_test(t, more_patterns_than_bits);
  tcase_add_loop_test(t, z_of_a_confidence, 0, COUNT(normal));
  tcase_add_loop_test(t, passing_a_target, 0, COUNT(ratings_at));
  tcase_add_test(t, smallest_sets_without_which_a_wall_passes);
  suite_add_tcase(s, t);
  TCase *w = tcase_create("walls");
  tcase_add_checked_fixture(w, open_shop, close_shop);
  tcase_add_test(w, a_heavy_side_with_a_channel_is_refused_and_told_why);
  tcase_add_test(w, a_mounted_leaf_has_its_short_circuited_rating);
  tcase_add_test(w, a_published_rating_replaces_stc_alone);
  tcase_add_test(w, evidence_published_refuses_predictions);
  tcase_add_test(w, a_door_caps_the_composite);
  tcase_add_test(w, several_targets_must_all_hold);
  tcase_add_test(w, what_without_and_only_name_is_told_by_id);
  tcase_add_test(w, every_rule_in_force_has_a_name_and_a_limit);
  suite_add_tcase(s, w);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
