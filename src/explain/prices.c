/* What one rule costs: the chosen wall against the cheapest that may break that rule and no other.
 */
#include "explain/explain.h"
#include "search/cheapest.h"

/* ---- the brief without a rule ---- */

static void relax_targets(brief *b, int rule) {
  for (int i = 0; i < b->target_count; i++) {
    if (rule == RULE_CONFIDENCE && b->targets[i].confidence > 0.5) b->targets[i].confidence = 0.5;
    if (rule == RULE_EVIDENCE) b->targets[i].evidence = EVIDENCE_ANY;
    if (rule == RULE_COMPOSITE) b->targets[i].composite = false;
  }
}

static void relax_without(brief *b, int pattern) {
  if (pattern == RULES_MAX_WITHOUT - 1) { /* the last bit stands for all from there on */
    b->without_count = pattern;
    return;
  }
  b->without_count--;
  for (int i = pattern; i < b->without_count; i++) b->without[i] = b->without[i + 1];
}

static void relax_side(brief *b, int rule) {
  switch (rule) {
  case RULE_FASTENING_A:
  case RULE_FASTENING_B:
    b->side[rule - RULE_FASTENING_A].fastening = FASTENING_NONE;
    b->side[rule - RULE_FASTENING_A].fastening_length_m = 0;
    break;
  case RULE_WET_A:
  case RULE_WET_B:
    b->side[rule - RULE_WET_A].wet = false;
    break;
  case RULE_ABUSE_A:
  case RULE_ABUSE_B:
    b->side[rule - RULE_ABUSE_A].abuse = false;
    break;
  default:
    break;
  }
}

bool explain_relax(const brief *b, int rule, brief *out) {
  *out = *b;
  if (rule >= RULE_WITHOUT) {
    relax_without(out, rule - RULE_WITHOUT);
    return true;
  }
  switch (rule) {
  case RULE_CONFIDENCE:
  case RULE_EVIDENCE:
  case RULE_COMPOSITE:
    relax_targets(out, rule);
    return true;
  case RULE_THICKNESS_MAX:
    out->thickness_m.has_max = false;
    return true;
  case RULE_THICKNESS_MIN:
    out->thickness_m.has_min = false;
    return true;
  case RULE_MASS_MAX:
    out->mass_kg_m2.has_max = false;
    return true;
  case RULE_MASS_MIN:
    out->mass_kg_m2.has_min = false;
    return true;
  case RULE_COST_MAX:
    out->cost_per_m2.has_max = false;
    return true;
  case RULE_FIRE:
    out->fire_min = 0;
    return true;
  case RULE_LOADBEARING:
    out->loadbearing = false;
    return true;
  case RULE_NONCOMBUSTIBLE:
    out->noncombustible = NONCOMBUSTIBLE_NO;
    return true;
  case RULE_SHEAR:
    out->shear_side = CATALOG_NONE;
    return true;
  case RULE_SERVICES:
    out->riser_m = out->run_m = 0;
    return true;
  case RULE_FASTENING_A:
  case RULE_FASTENING_B:
  case RULE_WET_A:
  case RULE_WET_B:
  case RULE_ABUSE_A:
  case RULE_ABUSE_B:
    relax_side(out, rule);
    return true;
  default:
    return false;
  }
}

/* Rules that do more than refuse walls: with them goes backing or a third plate, fire rows change,
 * other leaves are enumerated. What they cost is found by picking anew. */
static bool changes_walls(int rule) {
  switch (rule) {
  case RULE_FIRE:
  case RULE_LOADBEARING:
  case RULE_FASTENING_A:
  case RULE_FASTENING_B:
  case RULE_WET_A:
  case RULE_WET_B:
  case RULE_ABUSE_A:
  case RULE_ABUSE_B:
    return true;
  default:
    return false;
  }
}

/* ---- prices ---- */

typedef struct relaxed {
  bool found;
  long long cents;
  wall wall;
} relaxed;

static void take(relaxed *best, const space *s, const candidate *c) {
  if (best->found && best->cents <= c->is.cost_cents) return;
  *best = (relaxed){true, c->is.cost_cents, space_wall(s, c->core, c->face_a, c->face_b)};
}

static void take_mask(relaxed *best, const space *s, const sweep_result *r, rule_mask broken) {
  for (int i = 0; i < r->mask_count; i++)
    if (r->masks[i].broken == broken) take(best, s, &r->masks[i].best);
}

/* The cheapest wall that need not keep `rule`. */
static relaxed without_rule(arena *a, const space *s, const sweep_result *r, int rule) {
  relaxed best = {.found = false};
  take_mask(&best, s, r, 0);
  take_mask(&best, s, r, rule_bit(rule));
  brief b;
  if (!changes_walls(rule) || !explain_relax(s->context->brief, rule, &b)) return best;
  judge_context x = *s->context;
  x.brief = &b;
  space other;
  candidate c;
  space_build(a, &x, &other);
  if (cheapest_find(a, &other, &c)) take(&best, &other, &c);
  return best;
}

static const char *words_after(const brief *b, int rule) {
  (void)b;
  if (rule == RULE_CONFIDENCE) return "the bare prediction, 50 %";
  if (rule == RULE_COMPOSITE) return "the wall alone";
  if (rule == RULE_EVIDENCE) return "any rating";
  return "not asked";
}

static void price(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                  int rule, explain_rule_price *out) {
  const brief *b = s->context->brief;
  relaxed best = without_rule(a, s, r, rule);
  *out = (explain_rule_price){.rule = rule, .reachable = best.found};
  out->name = rule_name(a, b, rule);
  out->from = rule_limit(a, b, rule);
  out->to = words_after(b, rule);
  if (!best.found) return;
  long long saved = chosen->is.cost_cents - best.cents;
  out->price_total = saved > 0 ? (double)saved / 100 : 0;
  out->price_per_m2 = out->price_total / (b->length_m * cost_built_height_m(b));
  out->wall = arena_alloc(a, sizeof *out->wall);
  judge_wall(a, s->context, &best.wall, out->wall);
}

void explain_prices(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                    explanation *out) {
  const rule_mask never = rule_bit(RULE_TARGET) | rule_bit(RULE_ONLY) | rule_bit(RULE_PRICE);
  rule_mask on = rules_in_force(s->context->brief) & ~never;
  out->prices = arena_array(a, (size_t)rules_count(on), sizeof *out->prices);
  for (int rule = 0; rule < RULES_MAX; rule++)
    if (on & rule_bit(rule)) price(a, s, r, chosen, rule, &out->prices[out->price_count++]);
}
