/* The rules a wall can break, one bit each: the mask says everything about why a wall is refused.
 * Decisions are made on the integers below, which are also what the 0-1 model holds, so that judge,
 * sweep and solver cannot disagree. */
#ifndef SEARCH_RULES_H
#define SEARCH_RULES_H

#include <stdint.h>

#include "input/job.h"

typedef uint64_t rule_mask;

typedef enum rule_kind {
  RULE_TARGET,     /* does not reach the target even by the bare prediction (confidence 0.5) */
  RULE_CONFIDENCE, /* reaches it, but not at the confidence asked */
  RULE_EVIDENCE,   /* evidence: published, and the wall is not */
  RULE_COMPOSITE,  /* alone it reaches the target, with its openings it misses it (scope composite)
                    */
  RULE_THICKNESS_MAX,
  RULE_THICKNESS_MIN,
  RULE_MASS_MAX,
  RULE_MASS_MIN,
  RULE_COST_MAX,
  RULE_FIRE,
  RULE_HEIGHT,
  RULE_LOADBEARING,
  RULE_NONCOMBUSTIBLE,
  RULE_SHEAR,
  RULE_FASTENING_A,
  RULE_FASTENING_B,
  RULE_WET_A,
  RULE_WET_B,
  RULE_ABUSE_A,
  RULE_ABUSE_B,
  RULE_SERVICES,
  RULE_STUDS, /* the studs hold fixtures no worse than those of a specified wall */
  RULE_ONLY,
  RULE_PRICE,
  RULE_FIXED_COUNT,
  RULE_WITHOUT = RULE_FIXED_COUNT /* + index of the brief's `without` pattern; the last bit serves
                                     all beyond */
} rule_kind;

enum { RULES_MAX = 64, RULES_MAX_WITHOUT = RULES_MAX - RULE_FIXED_COUNT };

static inline rule_mask rule_bit(int rule) {
  return UINT64_C(1) << rule;
}
int rules_count(rule_mask m);

/* "target", "confidence", "thickness", "fire", "fastening a", "without wood-*"... in arena `a`
 * where made up. */
const char *rule_name(arena *a, const brief *b, int rule);
/* What the brief asks, in words and its units: "<= 4-7/8 in". "" for a rule that is not in force.
 */
const char *rule_limit(arena *a, const brief *b, int rule);
/* Which rules the brief has in force at all. */
rule_mask rules_in_force(const brief *b);

/* What a wall measures. A rounded length or mass that falls on a half counts as the half or above,
 * whatever the last bits of the sum it came from. */
typedef struct wall_numbers {
  long long cost_cents;  /* total + floor value, of the whole wall */
  long long total_cents; /* without floor value */
  int thickness_tenth_mm;
  int mass_hundredth;      /* 0.01 kg/m2 */
  int promised_hundredth;  /* 0.01 dB above the target, rounded down: least over the targets of
                              promised rating - target */
  int height_mm, fire_min; /* limiting height; minutes shown */
} wall_numbers;

int rules_thickness(double metres);
int rules_mass(double kg_m2);
int rules_height(double metres);
int rules_promised(double margin_db);

/* The brief's limits in the same integers; the largest or smallest number where there is none. */
typedef struct rule_limits {
  long long total_max;
  int thickness_max, thickness_min, mass_max, mass_min, height_mm, fire_min;
} rule_limits;

rule_limits rules_limits(const brief *b);
/* The bits of thickness, mass, cost, fire and height. */
rule_mask rules_broken_by(const rule_limits *limits, const wall_numbers *n);

/* Whether a pattern of `only` or `without` ("wood-*", "frame:wood-*") is meant for this record. */
bool rules_pattern_meets(const char *pattern, catalog_kind kind, const char *id);
/* The `without` bits that a record breaks. */
rule_mask rules_without(const brief *b, catalog_kind kind, const char *id);
/* Whether `only` leaves room for a record: for each kind that some pattern meets a record of, only
 * those met. */
bool rules_only_allows(const catalog *c, const brief *b, catalog_kind kind, const char *id);

#endif
