/* The rules a wall can break, one bit each: the mask says everything about why a wall is refused. */
#ifndef SEARCH_RULES_H
#define SEARCH_RULES_H

#include <stdint.h>

#include "input/job.h"

typedef uint64_t rule_mask;

typedef enum rule_kind {
  RULE_TARGET,      /* does not reach the target even by the bare prediction (confidence 0.5) */
  RULE_CONFIDENCE,  /* reaches it, but not at the confidence asked */
  RULE_EVIDENCE,    /* evidence: published, and the wall is not */
  RULE_COMPOSITE,   /* with its openings it misses the target (scope composite) */
  RULE_THICKNESS_MAX, RULE_THICKNESS_MIN, RULE_MASS_MAX, RULE_MASS_MIN, RULE_COST_MAX,
  RULE_FIRE, RULE_HEIGHT, RULE_LOADBEARING, RULE_NONCOMBUSTIBLE, RULE_SHEAR,
  RULE_FASTENING_A, RULE_FASTENING_B, RULE_WET_A, RULE_WET_B, RULE_ABUSE_A, RULE_ABUSE_B,
  RULE_SERVICES, RULE_ONLY, RULE_PRICE,
  RULE_FIXED_COUNT,
  RULE_WITHOUT = RULE_FIXED_COUNT /* + index of the brief's `without` pattern, up to bit 63 */
} rule_kind;

enum { RULES_MAX = 64, RULES_MAX_WITHOUT = RULES_MAX - RULE_FIXED_COUNT };

/* "target", "confidence", "thickness", "fire", "fastening a", "without wood-*"... in arena `a` where made up. */
const char *rule_name(arena *a, const brief *b, int rule);
/* Which rules the brief has in force at all. */
rule_mask rules_in_force(const brief *b);

#endif
