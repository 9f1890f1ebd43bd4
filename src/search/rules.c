#include "search/rules.h"

#include <limits.h>
#include <math.h>
#include <string.h>

#include "checks/cost.h"
#include "wall/wall.h"

/* A thickness limit is kept by a wall up to 1/32 in beyond it (common practice, no source: prints
 * go to 1/16 in). */
static const double thickness_slack_m = UNITS_M_PER_IN / 32;
/* What sums of records may be off in the last bits, in units of the integer. */
static const double last_bits = 1e-6;

int rules_count(rule_mask m) {
  int n = 0;
  for (; m; m &= m - 1) n++;
  return n;
}

/* ---- names and words ---- */

static const char *const names[RULE_FIXED_COUNT] = {
    [RULE_TARGET] = "target",
    [RULE_CONFIDENCE] = "confidence",
    [RULE_EVIDENCE] = "evidence",
    [RULE_COMPOSITE] = "composite",
    [RULE_THICKNESS_MAX] = "thickness",
    [RULE_THICKNESS_MIN] = "least thickness",
    [RULE_MASS_MAX] = "mass",
    [RULE_MASS_MIN] = "least mass",
    [RULE_COST_MAX] = "cost",
    [RULE_FIRE] = "fire",
    [RULE_HEIGHT] = "height",
    [RULE_LOADBEARING] = "load-bearing",
    [RULE_NONCOMBUSTIBLE] = "noncombustible",
    [RULE_SHEAR] = "shear",
    [RULE_FASTENING_A] = "fastening a",
    [RULE_FASTENING_B] = "fastening b",
    [RULE_WET_A] = "wet a",
    [RULE_WET_B] = "wet b",
    [RULE_ABUSE_A] = "abuse a",
    [RULE_ABUSE_B] = "abuse b",
    [RULE_SERVICES] = "services",
    [RULE_STUDS] = "studs for fixtures",
    [RULE_ONLY] = "only",
    [RULE_PRICE] = "price",
};

const char *rule_name(arena *a, const brief *b, int rule) {
  if (rule < RULE_WITHOUT) return names[rule];
  int i = rule - RULE_WITHOUT;
  if (i == RULES_MAX_WITHOUT - 1 && b->without_count > RULES_MAX_WITHOUT)
    return text_format(a, "without %s and the patterns after it", b->without[i]);
  return text_format(a, "without %s", b->without[i]);
}

typedef void (*put_length)(text *out, double metres, units_system u);

static const char *length_words(arena *a, const char *sense, put_length put, double metres,
                                units_system u) {
  text t;
  text_init(&t, a, 100);
  text_putf(&t, "%s ", sense);
  put(&t, metres, u);
  return t.data;
}

/* "STC 50" or "STC 50, Rw 52": what has to be reached in the laboratory, margin and field allowance
 * included. */
static const char *target_words(arena *a, const brief *b, bool composite) {
  text t;
  text_init(&t, a, 300);
  for (int i = 0; i < b->target_count; i++) {
    const target *g = &b->targets[i];
    if (composite && !g->composite) continue;
    text_putf(&t, "%s>= %s ", t.len ? ", " : "", sound_metric_names[g->metric]);
    text_number(&t, g->value + g->margin + (g->basis == BASIS_FIELD ? b->field_mean : 0), 1);
  }
  return t.data;
}

static const char *confidence_words(arena *a, const brief *b) {
  double most = 0;
  for (int i = 0; i < b->target_count; i++) most = fmax(most, b->targets[i].confidence);
  return text_format(a, ">= %s %%", text_of(a, 100 * most, 0));
}

static const char *services_words(arena *a, const brief *b) {
  if (!(b->run_m > 0)) return length_words(a, "riser", units_put_thickness, b->riser_m, b->units);
  const char *run = length_words(a, "run", units_put_thickness, b->run_m, b->units);
  if (!(b->riser_m > 0)) return run;
  return text_format(a, "%s, %s",
                     length_words(a, "riser", units_put_thickness, b->riser_m, b->units), run);
}

static const char *mass_words(arena *a, const brief *b, const char *sense, double kg_m2) {
  text t;
  text_init(&t, a, 100);
  text_putf(&t, "%s ", sense);
  units_put_surface_mass(&t, kg_m2, b->units);
  return t.data;
}

static const char *cost_words(arena *a, const brief *b) {
  return text_format(a, "<= %s per m2", text_of(a, b->cost_per_m2.max, 2));
}

static const char *stud_words(arena *a, const stud_floor *f) {
  const char *fixtures = f->fixtures ? "studs that hold heavy fastening" : "";
  if (f->mil == 0) return fixtures;
  return text_format(a, "%s%ssteel of %d mil or heavier", fixtures, f->fixtures ? ", " : "",
                     f->mil);
}

static const char *fixed_words(const brief *b, int rule) {
  static const char *const fastenings[] = {"none", "light", "heavy"};
  switch (rule) {
  case RULE_EVIDENCE:
    return "published ratings";
  case RULE_LOADBEARING:
    return "carries load";
  case RULE_NONCOMBUSTIBLE:
    return b->noncombustible == NONCOMBUSTIBLE_STRICT
               ? "no combustible part"
               : "no combustible part but fire-retardant wood";
  case RULE_SHEAR:
    return b->shear_side == SIDE_A ? "a shear panel on side A" : "a shear panel on side B";
  case RULE_FASTENING_A:
    return fastenings[b->side[SIDE_A].fastening];
  case RULE_FASTENING_B:
    return fastenings[b->side[SIDE_B].fastening];
  case RULE_WET_A:
  case RULE_WET_B:
    return "a board for wet rooms";
  case RULE_ABUSE_A:
  case RULE_ABUSE_B:
    return "an abuse-resistant board";
  case RULE_ONLY:
    return "the ids of `only`";
  case RULE_PRICE:
    return "a price for every item";
  default:
    return "none of these";
  }
}

const char *rule_limit(arena *a, const brief *b, int rule) {
  if (!(rules_in_force(b) & rule_bit(rule))) return "";
  switch (rule) {
  case RULE_TARGET:
    return target_words(a, b, false);
  case RULE_COMPOSITE:
    return target_words(a, b, true);
  case RULE_CONFIDENCE:
    return confidence_words(a, b);
  case RULE_THICKNESS_MAX:
    return length_words(a, "<=", units_put_thickness, b->thickness_m.max, b->units);
  case RULE_THICKNESS_MIN:
    return length_words(a, ">=", units_put_thickness, b->thickness_m.min, b->units);
  case RULE_MASS_MAX:
    return mass_words(a, b, "<=", b->mass_kg_m2.max);
  case RULE_MASS_MIN:
    return mass_words(a, b, ">=", b->mass_kg_m2.min);
  case RULE_COST_MAX:
    return cost_words(a, b);
  case RULE_FIRE:
    return text_format(a, ">= %d min", b->fire_min);
  case RULE_HEIGHT:
    return length_words(a, ">=", units_put_height, b->height_m, b->units);
  case RULE_SERVICES:
    return services_words(a, b);
  case RULE_STUDS:
    return stud_words(a, &b->studs);
  default:
    return fixed_words(b, rule);
  }
}

/* ---- in force ---- */

static rule_mask bit_if(bool asked, int rule) {
  return asked ? rule_bit(rule) : 0;
}

static rule_mask targets_in_force(const brief *b) {
  rule_mask m = bit_if(b->target_count > 0, RULE_TARGET);
  for (int i = 0; i < b->target_count; i++) {
    m |= bit_if(b->targets[i].confidence > 0.5, RULE_CONFIDENCE);
    m |= bit_if(b->targets[i].evidence == EVIDENCE_PUBLISHED, RULE_EVIDENCE);
    m |= bit_if(b->targets[i].composite && b->opening_count > 0, RULE_COMPOSITE);
  }
  return m;
}

rule_mask rules_in_force(const brief *b) {
  rule_mask m = targets_in_force(b) | rule_bit(RULE_HEIGHT) | rule_bit(RULE_PRICE);
  m |= bit_if(b->thickness_m.has_max, RULE_THICKNESS_MAX) |
       bit_if(b->thickness_m.has_min, RULE_THICKNESS_MIN);
  m |= bit_if(b->mass_kg_m2.has_max, RULE_MASS_MAX) | bit_if(b->mass_kg_m2.has_min, RULE_MASS_MIN);
  m |= bit_if(b->cost_per_m2.has_max, RULE_COST_MAX) | bit_if(b->fire_min > 0, RULE_FIRE);
  m |= bit_if(b->loadbearing, RULE_LOADBEARING) |
       bit_if(b->noncombustible != NONCOMBUSTIBLE_NO, RULE_NONCOMBUSTIBLE);
  m |= bit_if(b->shear_side != CATALOG_NONE, RULE_SHEAR) |
       bit_if(b->riser_m > 0 || b->run_m > 0, RULE_SERVICES);
  m |= bit_if(b->studs.mil > 0 || b->studs.fixtures, RULE_STUDS);
  for (int s = 0; s < 2; s++) {
    m |= bit_if(b->side[s].fastening != FASTENING_NONE, RULE_FASTENING_A + s);
    m |= bit_if(b->side[s].wet, RULE_WET_A + s) | bit_if(b->side[s].abuse, RULE_ABUSE_A + s);
  }
  m |= bit_if(b->only_count > 0, RULE_ONLY);
  for (int i = 0; i < b->without_count && i < RULES_MAX_WITHOUT; i++)
    m |= rule_bit(RULE_WITHOUT + i);
  return m;
}

/* ---- numbers ---- */

static int nearest(double value) {
  return (int)floor(value + 0.5 + last_bits);
}

int rules_thickness(double metres) {
  return nearest(metres * 1e4);
}
int rules_mass(double kg_m2) {
  return nearest(kg_m2 * 100);
}
int rules_height(double metres) {
  return metres < INT_MAX * 1e-3 - 1 ? nearest(metres * 1e3) : INT_MAX;
}
int rules_promised(double margin_db) {
  return (int)floor(margin_db * 100 + last_bits);
}

rule_limits rules_limits(const brief *b) {
  rule_limits l = {.total_max = LLONG_MAX, .thickness_max = INT_MAX, .mass_max = INT_MAX};
  if (b->thickness_m.has_max)
    l.thickness_max =
        (int)floor((b->thickness_m.max + (b->thickness_exact ? 0 : thickness_slack_m)) * 1e4 +
                   last_bits);
  if (b->thickness_m.has_min)
    l.thickness_min = (int)ceil((b->thickness_m.min - thickness_slack_m) * 1e4 - last_bits);
  if (b->mass_kg_m2.has_max) l.mass_max = (int)floor(b->mass_kg_m2.max * 100 + last_bits);
  if (b->mass_kg_m2.has_min) l.mass_min = (int)ceil(b->mass_kg_m2.min * 100 - last_bits);
  if (b->cost_per_m2.has_max)
    l.total_max = (long long)floor(b->cost_per_m2.max * b->length_m * cost_built_height_m(b) * 100 +
                                   last_bits);
  l.height_mm = rules_height(b->height_m);
  l.fire_min = b->fire_min;
  return l;
}

rule_mask rules_broken_by(const rule_limits *l, const wall_numbers *n) {
  return bit_if(n->thickness_tenth_mm > l->thickness_max, RULE_THICKNESS_MAX) |
         bit_if(n->thickness_tenth_mm < l->thickness_min, RULE_THICKNESS_MIN) |
         bit_if(n->mass_hundredth > l->mass_max, RULE_MASS_MAX) |
         bit_if(n->mass_hundredth < l->mass_min, RULE_MASS_MIN) |
         bit_if(n->total_cents > l->total_max, RULE_COST_MAX) |
         bit_if(n->fire_min < l->fire_min, RULE_FIRE) |
         bit_if(n->height_mm < l->height_mm, RULE_HEIGHT);
}

/* ---- only and without ---- */

bool rules_pattern_meets(const char *pattern, catalog_kind kind, const char *id) {
  for (int k = 0; k < CATALOG_KINDS; k++) {
    size_t n = strlen(catalog_kind_names[k]);
    if (text_starts(pattern, catalog_kind_names[k]) && pattern[n] == ':')
      return k == (int)kind && text_match(pattern + n + 1, id);
  }
  return text_match(pattern, id);
}

rule_mask rules_without(const brief *b, catalog_kind kind, const char *id) {
  rule_mask m = 0;
  for (int i = 0; i < b->without_count; i++) {
    int rule = RULE_WITHOUT + (i < RULES_MAX_WITHOUT ? i : RULES_MAX_WITHOUT - 1);
    if (rules_pattern_meets(b->without[i], kind, id)) m |= rule_bit(rule);
  }
  return m;
}

static size_t kind_count(const catalog *c, catalog_kind kind) {
  switch (kind) {
  case CATALOG_LAYER:
    return c->layer_count;
  case CATALOG_FRAME:
    return c->frame_count;
  case CATALOG_FILL:
    return c->fill_count;
  case CATALOG_MOUNT:
    return c->mount_count;
  case CATALOG_KINDS:
    break;
  }
  return 0;
}

static bool only_meets(const brief *b, catalog_kind kind, const char *id) {
  for (int i = 0; i < b->only_count; i++)
    if (rules_pattern_meets(b->only[i], kind, id)) return true;
  return false;
}

bool rules_only_allows(const catalog *c, const brief *b, catalog_kind kind, const char *id) {
  if (b->only_count == 0 || only_meets(b, kind, id)) return true;
  for (size_t i = 0; i < kind_count(c, kind); i++)
    if (only_meets(b, kind, catalog_id(c, (catalog_ref){kind, (int)i}))) return false;
  return true;
}
