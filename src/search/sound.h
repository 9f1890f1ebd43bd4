/* What the kernel's rating of a wall says about the targets: within bounds, because the kernel is
 * near the reference but not the same, and gives no printed integer. */
#ifndef SEARCH_SOUND_H
#define SEARCH_SOUND_H

#include "search/candidate.h"

/* One target, worked out once. */
typedef struct sound_aim {
  sound_metric metric;
  double needed, z;
  bool field, composite, published_only;
  bool shut; /* composite: the openings alone keep every wall from it */
} sound_aim;

typedef struct sound_aims {
  int count;
  sound_aim aim[BRIEF_MAX_TARGETS];
  sound_metric metric[METRIC_COUNT]; /* those that are asked for, each once */
  int metrics;
  double field_sd;
  double screen_stc; /* no wall whose STC the kernel puts below this reaches the targets even by the
                        bare prediction, but for published ones; 0 = not known */
  double lift_db; /* what a composite may be above the wall itself: openings that let nothing
                     through */
} sound_aims;

typedef struct sound_bounds {
  int promised_least, promised_most; /* 0.01 dB, as in wall_numbers */
  judge_reach least, most;           /* surely reached; perhaps reached */
  rule_mask evidence;                /* RULE_EVIDENCE when broken */
  bool composite;                    /* some target is one of the composite */
  bool wide;                         /* and the bounds say little of it */
  bool certain;                      /* least and most are the same */
} sound_bounds;

void sound_aims_set(const brief *b, sound_aims *out);
/* `exact` by metric (METRIC_COUNT values, those asked for are set), from the kernel; `sd` of the
 * wall; `match` or NULL. */
void sound_bound(const sound_aims *g, const double *exact, const double *sd, const wall_row *match,
                 sound_bounds *out);

/* No wall that is in no published row and whose STC the kernel puts below this reaches all targets at
 * their confidence, its standard deviation being at least `sd`; 0 = not known. HUGE_VAL: no such wall does at
 * all. */
double sound_least_stc(const sound_aims *g, const double *sd);
/* What is certain of a wall that is in no published row when its STC is at most `stc_at_most`, less than
 * screen_stc: it breaks the target, and promises at most so much. */
void sound_screened(const sound_aims *g, double stc_at_most, const double *sd, sound_bounds *out);

enum { SOUND_MAX_OUTCOMES = 5 };
/* The sets of broken rules of sound that a wall may turn out to have. Returns how many. */
int sound_outcomes(const sound_bounds *b, rule_mask out[SOUND_MAX_OUTCOMES]);

#endif
