#include "search/judge_words.h"

#include <math.h>

#include "base/text.h"

enum { WORDS_MAX_BYTES = 2000 };

/* ---- the records of a wall ---- */

static bool visit_face(const face *f, judge_visit visit, void *user) {
  for (int i = 0; i < f->count; i++)
    if (!visit(user, CATALOG_LAYER, f->layer[i])) return false;
  return true;
}

void judge_records(const wall *w, judge_visit visit, void *user) {
  if (!visit(user, CATALOG_FRAME, w->frame)) return;
  for (int s = 0; s < 2; s++) {
    if (!visit_face(&w->side[s], visit, user) || !visit_face(&w->sheath[s], visit, user) ||
        !visit_face(&w->inner[s], visit, user))
      return;
    if (w->fill[s] != CATALOG_NONE && !visit(user, CATALOG_FILL, w->fill[s])) return;
    if (w->mount[s].mount != CATALOG_NONE && !visit(user, CATALOG_MOUNT, w->mount[s].mount)) return;
  }
}

/* The ids that break one rule, separated by commas, each once. */
typedef struct culprits {
  const judge_context *context;
  int rule;
  text words;
  catalog_ref seen[4 * WALL_MAX_LAYERS];
  int count;
} culprits;

static bool is_culprit(const culprits *u, catalog_kind kind, const char *id) {
  if (u->rule == RULE_ONLY)
    return !rules_only_allows(u->context->catalog, u->context->brief, kind, id);
  return (rules_without(u->context->brief, kind, id) & rule_bit(u->rule)) != 0;
}

static bool note_culprit(void *user, catalog_kind kind, int index) {
  culprits *u = user;
  const char *id = catalog_id(u->context->catalog, (catalog_ref){kind, index});
  for (int i = 0; i < u->count; i++)
    if (u->seen[i].kind == kind && u->seen[i].index == index) return true;
  if (u->count == (int)(sizeof u->seen / sizeof u->seen[0]) || !is_culprit(u, kind, id))
    return true;
  u->seen[u->count++] = (catalog_ref){kind, index};
  text_putf(&u->words, "%s%s", u->words.len ? ", " : "", id);
  return true;
}

static const char *culprit_ids(arena *a, const judge_context *x, const wall *w, int rule) {
  culprits u = {.context = x, .rule = rule};
  text_init(&u.words, a, WORDS_MAX_BYTES);
  judge_records(w, note_culprit, &u);
  return u.words.data;
}

/* ---- what was found ---- */

/* The target that the wall is furthest from. */
static int worst_target(const judge_context *x, const assessment *w) {
  int worst = 0;
  for (int i = 1; i < x->brief->target_count; i++)
    if (w->probability[i] < w->probability[worst]) worst = i;
  return worst;
}

static const char *rating_words(arena *a, const judge_context *x, const assessment *w,
                                bool composite) {
  sound_metric m = x->brief->targets[worst_target(x, w)].metric;
  int printed = rating_of(composite ? &w->composite : &w->ratings, m);
  double exact = composite ? w->composite_exact[m] : w->exact[m];
  return text_format(a, "%s %d (%s)", sound_metric_names[m], printed, text_of(a, exact, 1));
}

static const char *put_words(arena *a, void (*put)(text *, double, units_system), double value,
                             units_system u) {
  text t;
  text_init(&t, a, 100);
  put(&t, value, u);
  return t.data;
}

static const char *found_words(arena *a, const judge_context *x, const assessment *w, int rule) {
  const brief *b = x->brief;
  switch (rule) {
  case RULE_TARGET:
    return rating_words(a, x, w, false);
  case RULE_COMPOSITE:
    return rating_words(a, x, w, true);
  case RULE_CONFIDENCE:
    return text_format(a, "%s %%", text_of(a, floor(100 * w->probability[worst_target(x, w)]), 0));
  case RULE_EVIDENCE:
    return "a prediction";
  case RULE_THICKNESS_MAX:
  case RULE_THICKNESS_MIN:
    return put_words(a, units_put_thickness, w->thickness_m, b->units);
  case RULE_MASS_MAX:
  case RULE_MASS_MIN:
    return put_words(a, units_put_surface_mass, w->mass_kg_m2, b->units);
  case RULE_COST_MAX:
    return text_format(a, "%s per m2",
                       text_of(a, (double)w->cost.total_cents / 100 / w->cost.area_m2, 2));
  case RULE_FIRE:
    return w->fire.minutes > 0 ? text_format(a, "%d min", w->fire.minutes) : "not shown";
  case RULE_HEIGHT:
    return put_words(a, units_put_height, w->height.limit_m, b->units);
  case RULE_PRICE:
    return text_format(a, "none for %s", w->takeoff.missing_code);
  case RULE_ONLY:
    return culprit_ids(a, x, &w->wall, rule);
  default:
    return rule >= RULE_WITHOUT ? culprit_ids(a, x, &w->wall, rule) : "it is not";
  }
}

/* ---- by how much ---- */

static double over(double found, double asked) {
  return asked > 0 ? fmax(0, found / asked - 1) : 1;
}
static double under(double found, double asked) {
  return asked > 0 ? fmax(0, 1 - found / asked) : 1;
}

static double sound_shortfall(const judge_context *x, const assessment *w) {
  const target *t = &x->brief->targets[worst_target(x, w)];
  double needed = judge_needed(t, x->brief->field_mean);
  return under(needed + w->numbers.promised_hundredth * 0.01, needed);
}

static double composite_shortfall(const judge_context *x, const assessment *w) {
  const target *t = &x->brief->targets[worst_target(x, w)];
  return under(w->composite_exact[t->metric], judge_needed(t, x->brief->field_mean));
}

static double shortfall(const judge_context *x, const assessment *w, int rule) {
  const brief *b = x->brief;
  switch (rule) {
  case RULE_TARGET:
  case RULE_CONFIDENCE:
    return sound_shortfall(x, w);
  case RULE_COMPOSITE:
    return composite_shortfall(x, w);
  case RULE_THICKNESS_MAX:
    return over(w->thickness_m, b->thickness_m.max);
  case RULE_THICKNESS_MIN:
    return under(w->thickness_m, b->thickness_m.min);
  case RULE_MASS_MAX:
    return over(w->mass_kg_m2, b->mass_kg_m2.max);
  case RULE_MASS_MIN:
    return under(w->mass_kg_m2, b->mass_kg_m2.min);
  case RULE_COST_MAX:
    return over((double)w->cost.total_cents / 100 / w->cost.area_m2, b->cost_per_m2.max);
  case RULE_FIRE:
    return under(w->fire.minutes, b->fire_min);
  case RULE_HEIGHT:
    return under(w->height.limit_m, b->height_m);
  default:
    return 1;
  }
}

void judge_say_broken(arena *a, const judge_context *x, const char *const why[RULE_FIXED_COUNT],
                      assessment *out) {
  out->broken_count = 0;
  for (int rule = 0; rule < RULES_MAX; rule++) {
    if (!(out->broken & rule_bit(rule))) continue;
    const char *said = rule < RULE_FIXED_COUNT ? why[rule] : NULL;
    out->broke[out->broken_count++] = (broken_rule){
        .rule = rule,
        .limit = rule_limit(a, x->brief, rule),
        .found = said ? said : found_words(a, x, out, rule),
        .shortfall = shortfall(x, out, rule),
    };
  }
}

/* ---- cautions ---- */

static void add_caution(assessment *out, const char *words) {
  if (!words || !words[0]) return;
  for (int i = 0; i < out->caution_count; i++)
    if (text_equal(out->caution[i], words)) return;
  if (out->caution_count < JUDGE_MAX_CAUTIONS) out->caution[out->caution_count++] = words;
}

void judge_say_cautions(arena *a, const judge_context *x, assessment *out) {
  out->caution_count = 0;
  for (int i = 0; i < out->compat.count; i++) add_caution(out, out->compat.finding[i].reason);
  for (int i = 0; i < out->predicted.outside; i++)
    add_caution(out, text_format(a, "The prediction goes beyond the walls it was fitted to: %s.",
                                 out->predicted.outside_reason[i]));
  for (int i = 0; i < out->evidence.caution_count; i++) add_caution(out, out->evidence.caution[i]);
  add_caution(out, out->fire.note);
  if (out->mounted)
    add_caution(out, "A screw, box or fixture that reaches from the mounted leaf to a stud takes "
                     "the gain of the mount away: "
                     "no fastening but to the leaf itself on that side.");
  const char *structure[STRUCTURE_MAX_CAUTIONS];
  int count = structure_cautions(x->catalog, x->brief, &out->wall, structure);
  for (int i = 0; i < count; i++) add_caution(out, structure[i]);
}
