/* Trim: the list against every wall judged in full, money worked by hand, changes taken alone. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include "explain/trim.h"
#include "random_briefs.h"
#include "wall/line.h"

enum { BRUTE_BRIEFS = 60, OWN_BRIEFS = 60, LIST_MOST = 100 };

typedef struct scene {
  brief brief;
  judge_context context;
  space space;
  sweep_result sweep;
  trim_terms terms;
  assessment *specified;
  trim_answer trim;
} scene;

static wall read_wall(const char *line) {
  diag_list d;
  wall w = wall_empty();
  diag_init(&d, shop.memory);
  ck_assert_msg(line_parse(shop.memory, &d, shop.catalog, line, &w), "%s", line);
  return w;
}

/* x->brief, x->terms and the price book of the context must stand. */
static void trim_wall(scene *x, const wall *w) {
  x->context.catalog = shop.catalog;
  x->context.brief = &x->brief;
  if (!x->context.prices) x->context.prices = shop.prices;
  if (x->terms.count == 0) x->terms.count = LIST_MOST;
  trim_hold_to(shop.memory, &x->context, w, &x->terms, &x->brief);
  x->specified = arena_alloc(shop.memory, sizeof *x->specified);
  judge_wall(shop.memory, &x->context, w, x->specified);
  ck_assert_int_eq(x->specified->takeoff.missing, 0);
  space_build(shop.memory, &x->context, &x->space);
  sweep_run(shop.memory, &x->space, &x->sweep);
  trim_explain(shop.memory, &x->space, &x->sweep, x->specified, &x->terms, &x->trim);
}

/* ---- money worked by hand ---- */

/* One dollar a foot or square foot of what is counted below, nothing for the rest: no waste, no
 * labour, no markups. */
static const price_book *plain_book(void) {
  static const char text_json[] =
      "{\"septum\":\"price-book/1\",\"name\":\"plain\",\"currency\":\"USD\",\"place\":\"nowhere\","
      "\"date\":\"2031-01-01\",\"source\":\"invented for this test\","
      "\"labour_rates\":{\"hanger\":0,\"taper\":0,\"insulator\":0},\"overhead_profit\":0,"
      "\"sales_tax\":0,\"items\":["
      "{\"code\":\"typex-16\",\"name\":\"b\",\"section\":\"09 29 00\",\"unit\":\"ft2\","
      "\"price\":1,\"trade\":\"hanger\"},"
      "{\"code\":\"steel-92-18\",\"name\":\"s\",\"section\":\"09 22 16\",\"unit\":\"ft\","
      "\"price\":1,\"trade\":\"hanger\"},"
      "{\"code\":\"track-92-18\",\"name\":\"t\",\"section\":\"09 22 16\",\"unit\":\"ft\","
      "\"price\":0,\"trade\":\"hanger\"},"
      "{\"code\":\"channel\",\"name\":\"c\",\"section\":\"09 22 16\",\"unit\":\"ft\","
      "\"price\":1,\"trade\":\"hanger\"},"
      "{\"code\":\"bridging\",\"name\":\"r\",\"section\":\"09 22 16\",\"unit\":\"ft\","
      "\"price\":0,\"trade\":\"hanger\"},"
      "{\"code\":\"glass-89-16in\",\"name\":\"g\",\"section\":\"09 81 16\",\"unit\":\"ft2\","
      "\"price\":1,\"trade\":\"insulator\"},"
      "{\"code\":\"glass-89-24in\",\"name\":\"g\",\"section\":\"09 81 16\",\"unit\":\"ft2\","
      "\"price\":1,\"trade\":\"insulator\"},"
      "{\"code\":\"sealant\",\"name\":\"x\",\"section\":\"07 92 19\",\"unit\":\"ft\","
      "\"price\":0,\"trade\":\"hanger\"},"
      "{\"code\":\"box-pad\",\"name\":\"x\",\"section\":\"07 84 13\",\"unit\":\"each\","
      "\"price\":0,\"trade\":\"hanger\"},"
      "{\"code\":\"screw\",\"name\":\"x\",\"section\":\"09 29 00\",\"unit\":\"each\","
      "\"price\":0,\"trade\":\"hanger\"},"
      "{\"code\":\"finish-4\",\"name\":\"x\",\"section\":\"09 29 00\",\"unit\":\"ft2\","
      "\"price\":0,\"trade\":\"taper\"}]}";
  diag_list d;
  diag_init(&d, shop.memory);
  const json_value *root =
      json_parse(shop.memory, &d, "plain.json", text_json, sizeof text_json - 1);
  ck_assert_ptr_nonnull(root);
  const price_book *b = prices_read(shop.memory, &d, shop.catalog, root);
  ck_assert_ptr_nonnull(b);
  return b;
}

static void set_hand_brief(scene *x) {
  job_defaults(&x->brief);
  x->brief.code = CODE_IBC;
  x->brief.length_m = 24 * UNITS_M_PER_FT;
  x->brief.height_m = 9 * UNITS_M_PER_FT;
  x->brief.target_count = 1;
  x->brief.targets[0] = (target){.metric = METRIC_STC, .value = 42, .confidence = 0.8};
  x->brief.fire_min = 60;
  add_only(&x->brief, "typex-16");
  add_only(&x->brief, "steel-92-18");
  add_only(&x->brief, "glass-89");
}

/* 24 x 9 ft. Quantities by the rules of docs/methods/cost.md:
 *   a layer of board        24 x 9 = 216.00 ft2
 *   studs at 16 in          (24/1.333 + 1) x 1.1 x 9 = 20.9 x 9 = 188.10 ft
 *   studs at 24 in          (24/2 + 1) x 1.1 x 9 = 14.3 x 9 = 128.70 ft
 *   channel at 24 in        9 ft less 8 in over 24 in: 5 spaces, 6 rows x 24 = 144.00 ft
 * From 2+2 with channel at 16 in to 1+1 at 24 in: 216 + 216 + 144 + 59.40 = 635.40, and nothing
 * beyond, as no item's quantity depends on two of the changes. */
START_TEST(each_change_costs_what_hand_work_gives) {
  static const struct {
    step_part part;
    long long cents;
    const char *from, *to;
  } rows[] = {
      {STEP_SPACING, 5940, "16 in on centre", "24 in on centre"},
      {STEP_MOUNT_A, 14400, "1/2 in resilient channel at 24 in", "none"},
      {STEP_FACE_A, 21600, "2 x 5/8 in Type X gypsum board", "5/8 in Type X gypsum board"},
      {STEP_FACE_B, 21600, "2 x 5/8 in Type X gypsum board", "5/8 in Type X gypsum board"},
  };
  scene x = {.context.prices = plain_book()};
  set_hand_brief(&x);
  wall w = read_wall("2*typex-16 | rc@610 | steel-92-18@406, glass-89 | 2*typex-16");
  trim_wall(&x, &w);
  ck_assert_int_gt(x.trim.proposal_count, 0);
  const trim_proposal *p = &x.trim.proposal[0];
  ck_assert_str_eq(p->wall->line, "typex-16 | steel-92-18@610, glass-89 | typex-16");
  ck_assert_int_eq(p->saving_cents, 63540);
  ck_assert_int_eq(p->together_cents, 0);
  ck_assert_int_eq(llround(p->saving_per_m2 * UNITS_M2_PER_FT2 * 216 * 100), 63540);
  ck_assert_int_eq(p->change_count, (int)(sizeof rows / sizeof rows[0]));
  for (int i = 0; i < p->change_count; i++) {
    ck_assert_int_eq(p->change[i].part, rows[i].part);
    ck_assert_int_eq(p->change[i].saving_cents, rows[i].cents);
    ck_assert_str_eq(p->change[i].from, rows[i].from);
    ck_assert_str_eq(p->change[i].to, rows[i].to);
  }
}
END_TEST

/* ---- the list against every wall ---- */

typedef struct full {
  candidate is;
  int rating[METRIC_COUNT];
} full;

/* Every figure of a wall by judge_wall. */
static full full_of(const scene *x, int core, int i, int j) {
  arena *a = arena_create(0, &shop.out_of_memory);
  ck_assert_ptr_nonnull(a);
  assessment *y = arena_alloc(a, sizeof *y);
  wall w = space_wall(&x->space, core, i, j);
  judge_wall(a, &x->context, &w, y);
  full f = {.is = {core, i, j, y->numbers, y->broken, y->instead}};
  for (int m = 0; m < METRIC_COUNT; m++) f.rating[m] = rating_of(&y->ratings, (sound_metric)m);
  arena_free(a);
  return f;
}

static bool asked(const brief *b, int metric) {
  for (int i = 0; i < b->target_count; i++)
    if ((int)b->targets[i].metric == metric) return true;
  return false;
}

/* No worse in every figure that a buyer compares; *better: and in some it is better. */
static bool as_good(const brief *b, const full *p, const full *q, bool *better) {
  const wall_numbers *x = &p->is.is, *y = &q->is.is;
  const long long gain[] = {y->cost_cents - x->cost_cents,
                            y->thickness_tenth_mm - x->thickness_tenth_mm,
                            y->mass_hundredth - x->mass_hundredth, x->fire_min - y->fire_min,
                            x->height_mm - y->height_mm};
  *better = false;
  for (size_t i = 0; i < sizeof gain / sizeof gain[0]; i++) {
    if (gain[i] < 0) return false;
    *better = *better || gain[i] > 0;
  }
  for (int m = 0; m < METRIC_COUNT; m++) {
    if (!asked(b, m)) continue;
    if (p->rating[m] < q->rating[m]) return false;
    *better = *better || p->rating[m] > q->rating[m];
  }
  return true;
}

static bool some_beats(const scene *x, const full *all, int count, int at) {
  for (int i = 0; i < count; i++) {
    bool better;
    if (i == at || !as_good(&x->brief, &all[i], &all[at], &better)) continue;
    if (better || candidate_compare(&x->space, &all[i].is, &all[at].is) < 0) return true;
  }
  return false;
}

/* All walls that break nothing and cost less than the specified one. */
static int all_savers(const scene *x, full *out) {
  const space *s = &x->space;
  int count = 0;
  for (int k = 0; k < s->core_count; k++)
    for (int i = 0; i < s->face_count; i++)
      for (int j = 0; j < s->face_count; j++) {
        if (!space_legal(s, k, i, j)) continue;
        full f = full_of(x, k, i, j);
        long long below = x->specified->numbers.cost_cents - x->terms.redesign_cents;
        if (f.is.broken == 0 && f.is.is.cost_cents < below)
          out[count++] = f;
      }
  return count;
}

/* Some wall of a brief's space, by the dice; false when the space is empty. */
static bool roll_wall(const brief *b, unsigned seed, wall *out) {
  judge_context x = {shop.catalog, shop.prices, b};
  space s;
  space_build(shop.memory, &x, &s);
  dice_state = seed * 747796405u + 1;
  for (int tries = 0; tries < 1000 && s.core_count > 0 && s.face_count > 0; tries++) {
    int k = (int)dice((unsigned)s.core_count), i = (int)dice((unsigned)s.face_count),
        j = (int)dice((unsigned)s.face_count);
    if (!space_legal(&s, k, i, j)) continue;
    *out = space_wall(&s, k, i, j);
    return true;
  }
  return false;
}

static bool set_scene(scene *x, unsigned seed) {
  wall w;
  *x = (scene){.brief = random_brief(seed)};
  if (seed % 2) x->brief.target_count = 0;
  x->terms.slack_given = seed % 3 == 0;
  x->terms.slack_m = seed % 6 == 0 ? 0.02 : 0;
  x->terms.allow = seed % 4 == 0 ? ~0u : seed / 4 & 31u;
  if (!x->terms.slack_given && seed % 5 == 1) x->terms.keep = TRIM_KEEP_FRAME;
  if (!x->terms.slack_given && seed % 5 == 2) x->terms.keep = TRIM_KEEP_THICKNESS;
  x->terms.redesign_cents = seed % 7 == 0 ? 2000 : 0;
  if (!roll_wall(&x->brief, seed, &w)) return false;
  trim_wall(x, &w);
  return true;
}

START_TEST(every_cheaper_wall_that_no_other_beats_is_listed) {
  scene x;
  if (!set_scene(&x, (unsigned)_i)) return;
  full *all = arena_array(shop.memory, (size_t)space_count(&x.space) + 1, sizeof *all);
  int count = all_savers(&x, all), unbeaten = 0;
  for (int i = 0; i < count; i++) unbeaten += !some_beats(&x, all, count, i);
  ck_assert_int_eq(x.trim.found, unbeaten);
  ck_assert_int_eq(x.trim.proposal_count, unbeaten < LIST_MOST ? unbeaten : LIST_MOST);
  for (int i = 0; i < count; i++) {
    if (some_beats(&x, all, count, i)) continue;
    wall w = space_wall(&x.space, all[i].is.core, all[i].is.face_a, all[i].is.face_b);
    wall other = wall_mirrored(shop.catalog, &w);
    bool listed = false;
    for (int k = 0; k < x.trim.proposal_count; k++) {
      const wall *told = &x.trim.proposal[k].wall->wall;
      listed = listed || wall_same(told, &w) || (x.space.mirror_once && wall_same(told, &other));
    }
    ck_assert_msg(listed || unbeaten > LIST_MOST, "brief %d lacks %s", _i,
                  line_print(shop.memory, shop.catalog, &w));
  }
}
END_TEST

static const layer *at_room(const wall *w, int side) {
  return &shop.catalog->layers[w->side[side].layer[0]];
}

static bool burns_nowhere(const scene *x, const wall *w) {
  brief strict = x->brief;
  strict.noncombustible = NONCOMBUSTIBLE_STRICT;
  return structure_noncombustible_ok(shop.catalog, &strict, w, NULL);
}

/* A substitute has no plainer boards where people touch them, no lighter steel, no combustible part in
 * place of none, unless that is waived: common practice, no source. */
static void check_that_stays(const scene *x) {
  static const double same_thickness_m = 0.0254 / 32 + 1e-6; /* the slack of thickness limits */
  const wall *from = &x->specified->wall;
  for (int i = 0; i < x->trim.proposal_count; i++) {
    const wall *to = &x->trim.proposal[i].wall->wall;
    const frame *f = &shop.catalog->frames[from->frame], *g = &shop.catalog->frames[to->frame];
    for (int s = 0; s < 2 && !(x->terms.allow & TRIM_ALLOW_PLAIN_BOARDS); s++) {
      ck_assert(at_room(to, s)->abuse || !at_room(from, s)->abuse);
      ck_assert(at_room(to, s)->moisture || !at_room(from, s)->moisture);
    }
    if (!(x->terms.allow & TRIM_ALLOW_THINNER_STUDS) && f->mil > 0 && g->mil > 0)
      ck_assert_int_ge(g->mil, f->mil);
    if (!(x->terms.allow & TRIM_ALLOW_COMBUSTIBLE) && burns_nowhere(x, from))
      ck_assert(burns_nowhere(x, to));
    if (x->terms.keep & TRIM_KEEP_FRAME) ck_assert_int_eq(to->frame, from->frame);
    if (x->terms.keep & TRIM_KEEP_THICKNESS)
      ck_assert(fabs(x->trim.proposal[i].wall->thickness_m - x->specified->thickness_m) <
                same_thickness_m);
  }
}

START_TEST(every_listed_wall_holds_and_its_money_adds_up) {
  scene x;
  if (!set_scene(&x, (unsigned)_i)) return;
  for (int i = 0; i < x.trim.proposal_count; i++) {
    const trim_proposal *p = &x.trim.proposal[i];
    ck_assert_uint_eq(p->wall->broken, 0);
    ck_assert_int_gt(p->saving_cents, x.terms.redesign_cents);
    ck_assert_int_eq(p->net_cents, p->saving_cents - x.terms.redesign_cents);
    ck_assert_int_eq(p->saving_cents,
                     x.specified->numbers.cost_cents - p->wall->numbers.cost_cents);
    if (i > 0) ck_assert_int_le(p->saving_cents, x.trim.proposal[i - 1].saving_cents);
    if (x.terms.thickness)
      ck_assert_int_le(p->wall->numbers.thickness_tenth_mm,
                       rules_thickness(x.specified->thickness_m + x.terms.slack_m));
    wall now = x.specified->wall;
    long long sum = p->together_cents;
    for (int k = 0; k < p->change_count; k++) {
      const trim_change *c = &p->change[k];
      step_take(shop.catalog, &p->wall->wall, c->part, &now);
      sum += c->saving_cents;
      ck_assert((c->alone == NULL) == (c->why_not != NULL));
      if (!c->alone) {
        ck_assert_int_eq(c->saving_cents, 0);
        continue;
      }
      ck_assert_int_eq(c->saving_cents,
                       x.specified->numbers.cost_cents - c->alone->numbers.cost_cents);
      ck_assert_uint_eq(c->breaks & x.specified->broken, 0);
    }
    ck_assert_int_eq(sum, p->saving_cents);
    ck_assert(wall_same(&now, &p->wall->wall));
  }
  check_that_stays(&x);
}
END_TEST

static const struct floor_row {
  const char *name, *line;
  unsigned allow;
  const char *lost; /* what the best proposal gives up then; NULL: not this */
} floor_rows[] = {
    {"abuse boards stay", "2*abuse-16 | wood-89@406, glass-89 | 2*abuse-16",
     TRIM_ALLOW_THICKER | TRIM_ALLOW_LESS_FIRE, NULL},
    {"plain boards waived", "2*abuse-16 | wood-89@406, glass-89 | 2*abuse-16",
     TRIM_ALLOW_PLAIN_BOARDS | TRIM_ALLOW_LESS_FIRE, "side A has an abuse-resistant board no longer"},
    {"studs stay", "2*typex-16 | steel-92-33@406, glass-89 | 2*typex-16", 0, NULL},
    {"studs waived", "2*typex-16 | steel-92-33@406, glass-89 | 2*typex-16", TRIM_ALLOW_THINNER_STUDS,
     "steel of 33 mil becomes 18 mil"},
};

START_TEST(a_waiver_is_told) {
  const struct floor_row *row = &floor_rows[_i];
  scene x = {.terms.allow = row->allow};
  wall w = read_wall(row->line);
  job_defaults(&x.brief);
  x.brief.code = CODE_IBC;
  trim_wall(&x, &w);
  bool told = false, some = false;
  for (int i = 0; i < x.trim.proposal_count; i++)
    for (int k = 0; k < x.trim.proposal[i].loss_count; k++) {
      const char *loss = x.trim.proposal[i].loss[k];
      told = told || (row->lost && strcmp(loss, row->lost) == 0);
      some = some || strstr(loss, "abuse-resistant") || strstr(loss, " mil becomes ");
    }
  ck_assert_msg(row->lost ? told : !some, "%s", row->name);
}
END_TEST

/* The floor is the larger of what the drawings promise and what is shown: NBC 2020 Table
 * 9.10.3.1.-A gives row W6a STC 55; clips stand in no code table; IBC 13-1.1 gives one layer each side
 * of light steel 60 min (from memory). */
#define W6A     "2*typex-16 | rc@406 | wood-89@406, glass-89 | 2*typex-16"
#define CLIPS   "2*typex-16 | clip@610 | wood-89@406, glass-89 | typex-16"
#define IBC1311 "typex-16 | steel-92-18@610, glass-89 | typex-16"
static const struct promise_row {
  const char *name, *line;
  int stc, fire;           /* promised */
  int value, minutes_held; /* what the wall is held to */
} promise_rows[] = {
    {"a promise below a published rating", W6A, 50, 0, 55, 0},
    {"a promise above a published rating", W6A, 57, 0, 57, 0},
    {"a promise below a mere prediction", CLIPS, 50, 0, 50, 0},
    {"fire promised below what is shown", IBC1311, 40, 45, 40, 60},
    {"fire promised above what is shown", IBC1311, 40, 90, 40, 90},
};

START_TEST(promises) {
  const struct promise_row *row = &promise_rows[_i];
  scene x = {.terms = {.promised_stc = row->stc, .promised_fire = row->fire}};
  wall w = read_wall(row->line);
  job_defaults(&x.brief);
  x.brief.code = CODE_IBC;
  trim_wall(&x, &w);
  ck_assert_int_eq(x.brief.target_count, 1);
  ck_assert_msg((int)x.brief.targets[0].value == row->value, "%s: held to %g", row->name,
                x.brief.targets[0].value);
  if (row->fire > 0) ck_assert_int_eq(x.brief.fire_min, row->minutes_held);
}
END_TEST

/* ---- what the wall is held to ---- */

/* What is taken from the wall itself, the wall keeps; a rating one point better it would not. */
START_TEST(a_wall_keeps_its_own_figures) {
  scene x = {.brief = random_brief((unsigned)_i)};
  wall w;
  x.brief.target_count = 0;
  x.brief.thickness_m.has_max = false; /* the brief's own limit may be below the wall */
  if (!roll_wall(&x.brief, (unsigned)_i, &w)) return;
  int asked_min = x.brief.fire_min;
  trim_wall(&x, &w);
  rule_mask own = rule_bit(RULE_TARGET) | rule_bit(RULE_CONFIDENCE) | rule_bit(RULE_THICKNESS_MAX);
  ck_assert_int_gt(x.brief.target_count, 0);
  ck_assert_uint_eq(x.specified->broken & own, 0);
  if (x.specified->fire.minutes >= asked_min)
    ck_assert_int_eq(x.brief.fire_min, x.specified->fire.minutes);
  brief better = x.brief;
  for (int i = 0; i < better.target_count; i++) better.targets[i].value++;
  judge_context harder = x.context;
  assessment *y = arena_alloc(shop.memory, sizeof *y);
  harder.brief = &better;
  judge_wall(shop.memory, &harder, &w, y);
  ck_assert_uint_ne(y->broken & (rule_bit(RULE_TARGET) | rule_bit(RULE_CONFIDENCE)), 0);
  for (int i = 0; i < x.trim.proposal_count; i++)
    ck_assert_int_ge(x.trim.proposal[i].wall->ratings.stc, x.specified->ratings.stc);
}
END_TEST

START_TEST(verdicts) {
  static const struct {
    const char *name, *line;
    double target, confidence;
    int fire_min;
    trim_verdict verdict;
  } rows[] = {
      {"holds", "typex-16 | steel-92-18@610, glass-89 | typex-16", 40, 0.8, 60, TRIM_HOLDS},
      {"far below", "typex-16 | steel-92-18@610, glass-89 | typex-16", 60, 0.8, 60, TRIM_FAILS},
      {"no fire row with a channel", "typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16", 30,
       0.8, 60, TRIM_NOT_SHOWN},
      {"a fire row, but too few minutes", "typex-16 | steel-92-18@610, glass-89 | typex-16", 40,
       0.8, 120, TRIM_FAILS},
  };
  scene x = {.context.prices = NULL};
  wall w = read_wall(rows[_i].line);
  set_hand_brief(&x);
  x.brief.targets[0].value = rows[_i].target;
  x.brief.targets[0].confidence = rows[_i].confidence;
  x.brief.fire_min = rows[_i].fire_min;
  trim_wall(&x, &w);
  ck_assert_msg(x.trim.verdict == rows[_i].verdict, "%s: %d", rows[_i].name, (int)x.trim.verdict);
}
END_TEST

/* A rating that the wall reaches by the bare prediction, but not as surely as asked. */
START_TEST(a_rating_that_is_not_sure_enough_is_not_shown) {
  scene x = {.context.prices = NULL};
  prediction p;
  wall w = read_wall("2*typex-16 | rc@610 | steel-92-18@406, glass-89 | 2*typex-16");
  set_hand_brief(&x);
  predict_wall(shop.catalog, &w, &p);
  x.brief.fire_min = 0;
  x.brief.targets[0].value = floor(p.exact[METRIC_STC]) - 1;
  x.brief.targets[0].confidence = 0.999;
  trim_wall(&x, &w);
  ck_assert_uint_eq(x.specified->broken, rule_bit(RULE_CONFIDENCE));
  ck_assert_int_eq(x.trim.verdict, TRIM_NOT_SHOWN);
}
END_TEST

START_TEST(nothing_is_cheaper_than_the_cheapest) {
  scene x = {.context.prices = NULL}, y = {.context.prices = NULL};
  wall w = read_wall("2*typex-16 | rc@610 | steel-92-18@406, glass-89 | 2*typex-16");
  set_hand_brief(&x);
  trim_wall(&x, &w);
  ck_assert_int_gt(x.trim.proposal_count, 0);
  set_hand_brief(&y);
  trim_wall(&y, &x.trim.proposal[0].wall->wall);
  ck_assert_int_eq(y.trim.proposal_count, 0);
  ck_assert_int_eq(y.trim.cheapest_more_cents, 0);
  ck_assert_int_gt(y.trim.cheaper_count, 0);
  for (int i = 0; i < y.trim.cheaper_count; i++) {
    ck_assert_int_gt(y.trim.cheaper[i]->broken_count, 0);
    ck_assert_int_lt(y.trim.cheaper[i]->numbers.cost_cents, y.specified->numbers.cost_cents);
  }
}
END_TEST

/* A wall that no search proposes is compared all the same. */
START_TEST(an_unusual_wall_may_be_specified) {
  scene x = {.context.prices = NULL};
  wall w = read_wall("3*typex-16 | rc@610 | on osb-11 | steel-92-18@406, glass-89 | 2*typex-16");
  set_hand_brief(&x);
  trim_wall(&x, &w);
  ck_assert_int_gt(x.trim.proposal_count, 0);
  ck_assert_int_gt(x.trim.proposal[0].change_count, 2);
}
END_TEST

START_TEST(count_cuts_the_list_at_the_worst_saving) {
  scene x = {.context.prices = NULL}, y = {.context.prices = NULL, .terms.count = 1};
  wall w = read_wall("2*typex-16 | rc@610 | steel-92-18@406, glass-89 | 2*typex-16");
  set_hand_brief(&x);
  set_hand_brief(&y);
  trim_wall(&x, &w);
  trim_wall(&y, &w);
  ck_assert_int_gt(x.trim.proposal_count, 1);
  ck_assert_int_eq(y.trim.proposal_count, 1);
  ck_assert_int_eq(y.trim.found, x.trim.found);
  ck_assert_str_eq(y.trim.proposal[0].wall->line, x.trim.proposal[0].wall->line);
}
END_TEST

/* ---- steps ---- */

static const struct step_row {
  const char *from, *to, *parts;
} step_rows[] = {
    {"typex-16 | wood-89@406, glass-89 | typex-16", "typex-16 | wood-89@406, glass-89 | typex-16",
     ""},
    {"typex-16 | wood-89@406, glass-89 | typex-16", "typex-16 | wood-89@610 | 2*typex-16",
     "stud spacing, fill, side B"},
    {"typex-16 | wood-89-double@406~50, glass-89, glass-89 | typex-16",
     "typex-16 | wood-89@406, glass-89 | typex-16", "frame"},
    {"typex-16 | wood-89@406, glass-89 | typex-16",
     "typex-16 | wood-89-double@406~50, glass-89, glass-89 | typex-16", "frame, fill"},
    {"typex-16 | wood-89-double@406, glass-89 | typex-16",
     "typex-16 | wood-89-double@406~50, glass-89, glass-89 | typex-16", "gap between rows, fill"},
    {"typex-16 | rc@610 | on osb-11 | wood-89@406 | typex-16",
     "typex-16 + osb-11 | wood-89@406 | typex-16", "mount A"},
    {"typex-16 | rc@610 | on osb-11 | wood-89@406 | typex-16", "typex-16 | wood-89@406 | typex-16",
     "mount A, side A"},
    {"typex-16 | wood-89@406 | typex-16", "typex-16 | rc@610 | on osb-11 | wood-89@406 | typex-16",
     "mount A, on studs A"},
    {"typex-16 | rc@610 | wood-89@406 | typex-16", "typex-16 | wood-89@406 | rc@406 | typex-16",
     "mount A, mount B"},
};

START_TEST(steps_lead_from_one_wall_to_the_other) {
  const struct step_row *row = &step_rows[_i];
  wall from = read_wall(row->from), to = read_wall(row->to);
  step_part part[STEP_PARTS];
  text names;
  int n = steps_between(shop.catalog, &from, &to, part);
  text_init(&names, shop.memory, 1000);
  for (int i = 0; i < n; i++) {
    text_putf(&names, "%s%s", i ? ", " : "", step_name(part[i]));
    step_take(shop.catalog, &to, part[i], &from);
  }
  ck_assert_str_eq(names.data, row->parts);
  ck_assert(wall_same(&from, &to));
}
END_TEST

int main(void) {
  Suite *s = suite_create("explain_trim");
  TCase *t = tcase_create("trim");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, open_shop, close_shop);
  tcase_add_test(t, each_change_costs_what_hand_work_gives);
  tcase_add_loop_test(t, every_cheaper_wall_that_no_other_beats_is_listed, 0, BRUTE_BRIEFS);
  tcase_add_loop_test(t, every_listed_wall_holds_and_its_money_adds_up, 0, BRUTE_BRIEFS);
  tcase_add_loop_test(t, a_wall_keeps_its_own_figures, 0, OWN_BRIEFS);
  tcase_add_loop_test(t, a_waiver_is_told, 0, (int)(sizeof floor_rows / sizeof floor_rows[0]));
  tcase_add_loop_test(t, promises, 0, (int)(sizeof promise_rows / sizeof promise_rows[0]));
  tcase_add_loop_test(t, verdicts, 0, 4);
  tcase_add_test(t, a_rating_that_is_not_sure_enough_is_not_shown);
  tcase_add_test(t, nothing_is_cheaper_than_the_cheapest);
  tcase_add_test(t, an_unusual_wall_may_be_specified);
  tcase_add_test(t, count_cuts_the_list_at_the_worst_saving);
  tcase_add_loop_test(t, steps_lead_from_one_wall_to_the_other, 0,
                      (int)(sizeof step_rows / sizeof step_rows[0]));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
