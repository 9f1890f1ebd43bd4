/* What one rule costs: the chosen wall against the cheapest that may break that rule and no other.
 */
#include "explain/explain.h"
#include "search/cheapest.h"

enum { THICKNESS_STEPS = 6 }; /* shown: the nearest ones */

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
  case RULE_STUDS:
    out->studs = (stud_floor){.mil = 0};
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

static bool meets_kind(const catalog *c, const char *pattern, catalog_kind kind) {
  const size_t count[CATALOG_KINDS] = {[CATALOG_LAYER] = c->layer_count,
                                       [CATALOG_FRAME] = c->frame_count,
                                       [CATALOG_FILL] = c->fill_count,
                                       [CATALOG_MOUNT] = c->mount_count};
  for (size_t i = 0; i < count[kind]; i++)
    if (rules_pattern_meets(pattern, kind, catalog_id(c, (catalog_ref){kind, (int)i}))) return true;
  return false;
}

/* A pattern that names frames goes; where it names other things too, it stays for these. */
bool explain_relax_frames(arena *a, const catalog *c, const brief *b, brief *out) {
  bool any = false;
  *out = *b;
  out->only_count = 0;
  for (int i = 0; i < b->only_count; i++) {
    const char *pattern = b->only[i];
    if (!meets_kind(c, pattern, CATALOG_FRAME)) {
      if (out->only_count < BRIEF_MAX_PATTERNS) out->only[out->only_count++] = pattern;
      continue;
    }
    any = true;
    for (int kind = 0; kind < CATALOG_KINDS; kind++)
      if (kind != CATALOG_FRAME && meets_kind(c, pattern, (catalog_kind)kind) &&
          out->only_count < BRIEF_MAX_PATTERNS)
        out->only[out->only_count++] =
            text_format(a, "%s:%s", catalog_kind_names[kind], pattern);
  }
  return any;
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

static void take_fresh(arena *a, const space *s, const brief *b, relaxed *best) {
  judge_context x = *s->context;
  x.brief = b;
  space other;
  candidate c;
  space_build(a, &x, &other);
  if (cheapest_find(a, &other, &c)) take(best, &other, &c);
}

/* The cheapest wall that need not keep `rule`. */
static relaxed without_rule(arena *a, const space *s, const sweep_result *r, int rule) {
  const judge_context *x = s->context;
  relaxed best = {.found = false};
  brief b;
  take_mask(&best, s, r, 0);
  take_mask(&best, s, r, rule_bit(rule));
  if (rule == RULE_ONLY ? explain_relax_frames(a, x->catalog, x->brief, &b)
                        : changes_walls(rule) && explain_relax(x->brief, rule, &b))
    take_fresh(a, s, &b, &best);
  return best;
}

static const char *words_after(int rule) {
  if (rule == RULE_CONFIDENCE) return "the bare prediction, 50 %";
  if (rule == RULE_COMPOSITE) return "the wall alone";
  if (rule == RULE_EVIDENCE) return "any rating";
  if (rule == RULE_ONLY) return "any frame";
  return "not asked";
}

static const char *frames_left(arena *a, const catalog *c, const brief *b) {
  text t;
  text_init(&t, a, 4000);
  for (int i = 0; i < b->only_count; i++)
    if (meets_kind(c, b->only[i], CATALOG_FRAME))
      text_putf(&t, "%s%s", t.len ? ", " : "", b->only[i]);
  return t.data;
}

static void set_price(arena *a, const space *s, const candidate *chosen, const relaxed *best,
                      explain_rule_price *out) {
  const brief *b = s->context->brief;
  out->reachable = best->found;
  if (!best->found) return;
  long long saved = chosen->is.cost_cents - best->cents;
  out->price_total = saved > 0 ? (double)saved / 100 : 0;
  out->price_per_m2 = out->price_total / (b->length_m * cost_built_height_m(b));
  out->wall = arena_alloc(a, sizeof *out->wall);
  judge_wall(a, s->context, &best->wall, out->wall);
}

static void price(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                  int rule, explain_rule_price *out) {
  const judge_context *x = s->context;
  relaxed best = without_rule(a, s, r, rule);
  *out = (explain_rule_price){.rule = rule, .to = words_after(rule)};
  out->name = rule == RULE_ONLY ? "only frame" : rule_name(a, x->brief, rule);
  out->from = rule == RULE_ONLY ? frames_left(a, x->catalog, x->brief)
                                : rule_limit(a, x->brief, rule);
  set_price(a, s, chosen, &best, out);
}

/* ---- thickness by steps ---- */

/* The cheapest wall that breaks nothing but the greatest thickness, and keeps `most_m` in its place.
 * It stands in the frontier: thickness is one of its coordinates. */
static relaxed within_thickness(const space *s, const sweep_result *r, double most_m) {
  brief b = *s->context->brief;
  relaxed best = {.found = false};
  b.thickness_m.max = most_m;
  int most = rules_limits(&b).thickness_max;
  for (int i = 0; i < r->frontier_count; i++) {
    const candidate *c = &r->frontier[i];
    if ((c->broken & ~rule_bit(RULE_THICKNESS_MAX)) == 0 && c->is.thickness_tenth_mm <= most)
      take(&best, s, c);
  }
  return best;
}

/* The next thickness above `most_m` of a wall that breaks nothing else; 0 when there is none. */
static double next_thickness(const sweep_result *r, double most_m) {
  int most = rules_thickness(most_m), next = 0;
  for (int i = 0; i < r->frontier_count; i++) {
    const candidate *c = &r->frontier[i];
    int t = c->is.thickness_tenth_mm;
    if (c->broken == rule_bit(RULE_THICKNESS_MAX) && t > most && (next == 0 || t < next)) next = t;
  }
  return next * 1e-4;
}

static void step_thickness(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                           explanation *out) {
  brief b = *s->context->brief;
  const char *from = rule_limit(a, &b, RULE_THICKNESS_MAX);
  long long cents = chosen->is.cost_cents;
  double most_m = b.thickness_m.max;
  for (int steps = 0; steps < THICKNESS_STEPS && (most_m = next_thickness(r, most_m)) > 0;) {
    relaxed best = within_thickness(s, r, most_m);
    if (!best.found || best.cents >= cents) continue;
    explain_rule_price *p = &out->prices[out->price_count++];
    b.thickness_m.max = most_m;
    *p = (explain_rule_price){.rule = RULE_THICKNESS_MAX, .step = true, .limit_m = most_m};
    p->name = rule_name(a, &b, RULE_THICKNESS_MAX);
    p->from = from;
    p->to = rule_limit(a, &b, RULE_THICKNESS_MAX);
    set_price(a, s, chosen, &best, p);
    cents = best.cents;
    steps++;
  }
}

/* ---- the whole ---- */

/* What has no price, since no wall is there even without the rule, comes last. */
static bool dearer(const explain_rule_price *x, const explain_rule_price *y) {
  if (x->reachable != y->reachable) return x->reachable;
  return x->price_total > y->price_total;
}

/* Entries stand in the order of the rules before; equals keep it. */
static void sort_dearest_first(explanation *out) {
  for (int i = 1; i < out->price_count; i++) {
    explain_rule_price p = out->prices[i];
    int at = i;
    for (; at > 0 && dearer(&p, &out->prices[at - 1]); at--)
      out->prices[at] = out->prices[at - 1];
    out->prices[at] = p;
  }
}

void explain_prices(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                    explanation *out) {
  const judge_context *x = s->context;
  brief b;
  rule_mask on =
      rules_in_force(x->brief) & ~(rule_bit(RULE_TARGET) | rule_bit(RULE_ONLY) | rule_bit(RULE_PRICE));
  if (explain_relax_frames(a, x->catalog, x->brief, &b)) on |= rule_bit(RULE_ONLY);
  out->prices = arena_array(a, (size_t)rules_count(on) + THICKNESS_STEPS, sizeof *out->prices);
  for (int rule = 0; rule < RULES_MAX; rule++) {
    if (!(on & rule_bit(rule))) continue;
    if (rule == RULE_THICKNESS_MAX) step_thickness(a, s, r, chosen, out);
    price(a, s, r, chosen, rule, &out->prices[out->price_count++]);
  }
  sort_dearest_first(out);
}
