/* One wall judged in full against a brief: what `rate` prints and what a chosen wall is explained with. The slow, obvious
 * way; the sweep decides the same by tables and is tested against this. */
#ifndef SEARCH_JUDGE_H
#define SEARCH_JUDGE_H

#include "acoustics/predict.h"
#include "checks/cost.h"
#include "checks/evidence.h"
#include "checks/fire.h"
#include "checks/structure.h"
#include "search/rules.h"
#include "wall/compat.h"

enum { JUDGE_MAX_CAUTIONS = 40 };

typedef struct broken_rule {
  int rule;             /* rule_kind or RULE_WITHOUT + i */
  const char *limit;    /* what the brief asks, in words and units: "<= 127.0 mm" */
  const char *found;    /* what the wall has */
  double shortfall;     /* relative, >= 0; 1 for categorical rules */
} broken_rule;

typedef struct assessment {
  wall wall;
  const char *name, *line;
  prediction predicted;
  evidence evidence;
  ratings ratings;             /* what the answer stands on: STC published where matched, else predicted */
  double exact[METRIC_COUNT], sd[METRIC_COUNT]; /* what it stands on: published + 0.5 with its sd, else predicted */
  double probability[BRIEF_MAX_TARGETS]; /* P(rating >= target) per target; 1 for a published rating that reaches it */
  double thickness_m, mass_kg_m2;
  fire_verdict fire;
  height_verdict height;
  bool mounted;
  wall short_wall; const char *short_line; prediction short_predicted; /* when mounted */
  bool has_composite; ratings composite; double composite_exact[METRIC_COUNT];
  double composite_ceiling;    /* rating beyond which a better wall is pointless */
  takeoff takeoff; cost_total cost;
  rule_mask broken; int broken_count; broken_rule broke[RULES_MAX];
  compat_report compat;
  const char *caution[JUDGE_MAX_CAUTIONS]; int caution_count;
} assessment;

typedef struct judge_context {
  const catalog *catalog;
  const price_book *prices;    /* NULL: no cost */
  const brief *brief;
} judge_context;

void judge_wall(arena *a, const judge_context *x, const wall *w, assessment *out);
/* The part that decides: promised rating (exact - z sd, or published), probability. Shared with the sweep. */
bool judge_passes(const target *t, double field_mean, double field_sd, double exact, int printed, double sd, bool published,
                  double confidence, double *probability);

#endif
