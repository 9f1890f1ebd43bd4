/* One wall judged in full against a brief: what `rate` prints and what a chosen wall is explained
 * with. The slow, obvious way; the sweep decides the same by tables and is tested against this. */
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
  int rule;          /* rule_kind or RULE_WITHOUT + i */
  const char *limit; /* what the brief asks, in words and units: "<= 127.0 mm" */
  const char *found; /* what the wall has */
  double shortfall;  /* relative, >= 0; 1 for categorical rules */
} broken_rule;

typedef struct assessment {
  wall wall;
  const char *name, *line;
  prediction predicted;
  evidence evidence;
  ratings ratings; /* what the answer stands on: STC published where matched, else predicted */
  double exact[METRIC_COUNT],
      sd[METRIC_COUNT]; /* what it stands on: published + 0.5 with its sd, else predicted */
  double probability[BRIEF_MAX_TARGETS]; /* P(rating >= target) per target; 1 for a published rating
                                            that reaches it */
  double thickness_m, mass_kg_m2;
  fire_verdict fire;
  height_verdict height;
  bool mounted;
  wall short_wall;
  const char *short_line;
  prediction short_predicted; /* when mounted */
  bool has_composite;
  ratings composite;
  double composite_exact[METRIC_COUNT];
  double composite_ceiling; /* STC that no wall gets past with these openings */
  takeoff takeoff;
  cost_total cost;
  wall_numbers numbers;
  rule_mask broken;
  int broken_count;
  broken_rule broke[RULES_MAX];
  rule_mask instead; /* another set without which it would pass (see judge_sound); 0 = none */
  compat_report compat;
  const char *caution[JUDGE_MAX_CAUTIONS];
  int caution_count;
} assessment;

typedef struct judge_context {
  const catalog *catalog;
  const price_book *prices; /* NULL: no cost */
  const brief *brief;
} judge_context;

/* `out` is filled whole; words live in `a`. out->name is left to the caller. */
void judge_wall(arena *a, const judge_context *x, const wall *w, assessment *out);

/* The same decisions without a word, for many briefs and one wall: `p` is its prediction, `match` the
 * published row that it is, or NULL. Of `out` sound, numbers, takeoff, broken and instead are filled.
 */
void judge_silently(const judge_context *x, const wall *w, const prediction *p,
                    const wall_row *match, assessment *out);

/* ---- what decides about sound; shared with the sweep ---- */

/* z with Phi(z) = confidence, 0 < confidence < 1. */
double judge_z(double confidence);
/* What a rating has to reach in the laboratory: value, margin, and the field allowance where the
 * target is one of the field. */
double judge_needed(const target *t, double field_mean);
/* The standard deviation that counts for a target: the field's scatter is added where it is one of
 * the field. */
double judge_spread(const target *t, double field_sd, double sd);
/* Passes when P(rating >= needed) >= confidence and the printed integer reaches it too; a published
 * rating when it does. */
bool judge_passes(const target *t, double field_mean, double field_sd, double exact, int printed,
                  double sd, bool published, double confidence, double *probability);

typedef struct judge_sound {
  int promised_hundredth; /* see wall_numbers */
  rule_mask broken;       /* target, confidence, evidence, composite */
  rule_mask instead; /* another smallest set without which the wall would pass as well; 0 = none.
                        With openings a wall may be saved by giving up the confidence or by leaving
                        the openings out */
} judge_sound;

/* Whether a wall passes at the confidence asked and at the bare prediction, with its openings and
 * alone. */
typedef struct judge_reach {
  bool with, with_bare, alone, alone_bare;
} judge_reach;

/* The smallest sets of rules without which the wall would pass: *instead as in judge_sound. */
void judge_name_reach(const judge_reach *r, rule_mask *broken, rule_mask *instead);
/* What is promised above `needed`, dB: least of exact - z spread and printed, or the published
 * rating. */
double judge_margin(double exact, double printed, double spread, bool published, double needed,
                    double z);

/* All targets of the brief. `match` NULL: predicted only. `probability` (BRIEF_MAX_TARGETS values)
 * may be NULL. */
judge_sound judge_targets(const judge_context *x, const prediction *p, const wall_row *match,
                          double *probability);
/* The wall's curve moved by `shift_db`, together with the brief's openings; a published wall's
 * curve is the predicted one moved to the published rating. */
void judge_composite(const brief *b, const prediction *p, const wall_row *match, double shift_db,
                     double tl_db[BANDS]);
/* The exact ratings (METRIC_COUNT values) of the openings beside a wall that lets nothing through.
 */
void judge_composite_most(const brief *b, double *exact);

#endif
