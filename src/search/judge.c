#include "search/judge.h"

#include "search/judge_words.h"
#include "wall/line.h"

static void judge_sound_of(const judge_context *x, assessment *out) {
  const wall_row *match = out->evidence.match;
  const prediction *p = &out->predicted;
  out->ratings = p->ratings;
  for (int m = 0; m < METRIC_COUNT; m++) {
    out->exact[m] = p->exact[m];
    out->sd[m] = p->sd[m];
  }
  if (match) {
    out->ratings.stc = match->stc;
    out->exact[METRIC_STC] = match->stc + 0.5; /* the centre of what a whole number stands for */
    out->sd[METRIC_STC] = match->stc_sd;
  }
  judge_sound v = judge_targets(x, p, match, out->probability);
  out->numbers.promised_hundredth = v.promised_hundredth;
  out->broken |= v.broken;
  out->instead = v.instead;
  out->has_composite = x->brief->opening_count > 0;
  if (!out->has_composite) return;
  double tl_db[BANDS];
  judge_composite(x->brief, p, match, 0, tl_db);
  out->composite = rating_all(tl_db);
  for (int m = 0; m < METRIC_COUNT; m++)
    out->composite_exact[m] = rating_exact(tl_db, (sound_metric)m);
  double most[METRIC_COUNT];
  judge_composite_most(x->brief, most);
  out->composite_ceiling = most[METRIC_STC];
}

static void judge_short_circuit(arena *a, const judge_context *x, assessment *out) {
  out->mounted = wall_is_mounted(&out->wall);
  if (!out->mounted) return;
  out->short_wall = wall_short_circuited(&out->wall);
  out->short_line = line_print(a, x->catalog, &out->short_wall);
  predict_wall(x->catalog, &out->short_wall, &out->short_predicted);
}

static void judge_numbers(arena *a, const judge_context *x, assessment *out) {
  const wall *w = &out->wall;
  wall_numbers *n = &out->numbers;
  out->thickness_m = wall_thickness_m(x->catalog, w);
  out->mass_kg_m2 = wall_mass_kg_m2(x->catalog, w, x->brief->height_m);
  out->fire = fire_judge(a, x->catalog, x->brief, w);
  out->height = structure_height(a, x->catalog, x->brief, w);
  n->thickness_tenth_mm = rules_thickness(out->thickness_m);
  n->mass_hundredth = rules_mass(out->mass_kg_m2);
  n->height_mm = rules_height(out->height.limit_m);
  n->fire_min = out->fire.minutes;
  if (!x->prices) return;
  cost_takeoff(x->prices, x->catalog, x->brief, w, &out->takeoff, &out->cost);
  if (out->takeoff.missing) out->broken |= rule_bit(RULE_PRICE);
  n->total_cents = out->cost.total_cents;
  n->cost_cents = out->cost.total_cents + out->cost.floor_value_cents;
}

typedef bool (*whole_check)(const catalog *c, const brief *b, const wall *w, const char **why);
typedef bool (*side_check)(const catalog *c, const brief *b, const wall *w, int side,
                           const char **why);

static void judge_structure(const judge_context *x, const char *why[RULE_FIXED_COUNT],
                            assessment *out) {
  static const struct {
    int rule;
    whole_check ok;
  } whole[] = {
      {RULE_LOADBEARING, structure_bearing_ok},
      {RULE_NONCOMBUSTIBLE, structure_noncombustible_ok},
      {RULE_SHEAR, structure_shear_ok},
      {RULE_SERVICES, structure_services_ok},
      {RULE_STUDS, structure_studs_ok},
  };
  static const struct {
    int rule;
    side_check ok;
  } sides[] = {
      {RULE_FASTENING_A, structure_fastening_ok},
      {RULE_WET_A, structure_wet_ok},
      {RULE_ABUSE_A, structure_abuse_ok},
  };
  for (size_t i = 0; i < sizeof whole / sizeof whole[0]; i++)
    if (!whole[i].ok(x->catalog, x->brief, &out->wall, &why[whole[i].rule]))
      out->broken |= rule_bit(whole[i].rule);
  for (size_t i = 0; i < sizeof sides / sizeof sides[0]; i++)
    for (int s = 0; s < 2; s++) /* B's rule follows A's */
      if (!sides[i].ok(x->catalog, x->brief, &out->wall, s, &why[sides[i].rule + s]))
        out->broken |= rule_bit(sides[i].rule + s);
}

typedef struct id_rules {
  const judge_context *context;
  rule_mask broken;
} id_rules;

static bool note_rules(void *user, catalog_kind kind, int index) {
  id_rules *u = user;
  const judge_context *x = u->context;
  const char *id = catalog_id(x->catalog, (catalog_ref){kind, index});
  u->broken |= rules_without(x->brief, kind, id);
  if (!rules_only_allows(x->catalog, x->brief, kind, id)) u->broken |= rule_bit(RULE_ONLY);
  return true;
}

/* Everything that decides, once the sound stands. */
static void judge_rules(arena *a, const judge_context *x, const char *why[RULE_FIXED_COUNT],
                        assessment *out) {
  judge_numbers(a, x, out);
  judge_structure(x, why, out);
  id_rules ids = {x, 0};
  judge_records(&out->wall, note_rules, &ids);
  rule_limits limits = rules_limits(x->brief);
  out->broken |= ids.broken | rules_broken_by(&limits, &out->numbers);
  const rule_mask sound = rule_bit(RULE_TARGET) | rule_bit(RULE_CONFIDENCE) |
                          rule_bit(RULE_EVIDENCE) | rule_bit(RULE_COMPOSITE);
  if (out->instead) out->instead |= out->broken & ~sound;
}

void judge_silently(const judge_context *x, const wall *w, const prediction *p,
                    const wall_row *match, assessment *out) {
  const char *why[RULE_FIXED_COUNT] = {NULL};
  *out = (assessment){.wall = *w, .predicted = *p, .mounted = wall_is_mounted(w)};
  out->evidence.match = match;
  judge_sound_of(x, out);
  judge_rules(NULL, x, why, out);
}

void judge_wall(arena *a, const judge_context *x, const wall *w, assessment *out) {
  const char *why[RULE_FIXED_COUNT] = {NULL};
  *out = (assessment){.wall = *w, .line = line_print(a, x->catalog, w)};
  compat_check(x->catalog, w, &out->compat);
  predict_wall(x->catalog, w, &out->predicted);
  evidence_find(a, x->catalog, w, &out->evidence);
  judge_sound_of(x, out);
  judge_short_circuit(a, x, out);
  judge_rules(a, x, why, out);
  judge_say_broken(a, x, why, out);
  judge_say_cautions(a, x, out);
}
