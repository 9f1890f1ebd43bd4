/* What each rating costs: the cheapest wall of every rung under one brief, what changes from rung
 * to rung, and what it takes from a given wall to each of them (docs/design/ladder.md). */
#ifndef EXPLAIN_LADDER_H
#define EXPLAIN_LADDER_H

#include "explain/changes.h"
#include "explain/explain.h"
#include "search/rungs.h"

/* From this rating on, what surrounds a wall decides the field rating (common practice, no source).
 */
enum { LADDER_FLANKING_FROM = 60, LADDER_MAX_EDITS = 16 };
/* Small steps that people ask for: this many points more. */
enum { LADDER_GAINS = 2 };
extern const int ladder_gains[LADDER_GAINS];

typedef struct ladder_terms {
  int climbs;             /* index of the brief's target whose value is varied */
  int from, to;           /* values asked for, 0 = no end on that side */
  const assessment *have; /* the given wall; NULL without. Then only rungs above its rating stand */
  int have_reaches;       /* what it meets, 0 = it meets no value */
  int own_value;          /* what the brief asks of that target, 0 = nothing */
} ladder_terms;

typedef struct ladder_rung {
  int rating;       /* the highest value asked for that is met at this cost */
  int serves_from;  /* the lowest that costs as much: values between are not worth a wall of their
                       own */
  int reaches;      /* what the wall meets; above `rating` only on the last rung of a range */
  assessment *wall; /* judged with the target at `rating` */
  long long cost_cents;  /* floor value included */
  long long step_cents;  /* beyond the rung below; 0 on the first */
  int points;            /* above the rung below; 0 on the first */
  bool worth;            /* on the lower convex hull of cost over rating */
  change_list changes;   /* from the rung below */
  long long extra_cents; /* beyond the given wall; may be below 0 */
  change_list from_have; /* sides as in the given wall */
} ladder_rung;

/* One change of the given wall. */
typedef struct ladder_edit {
  assessment *wall; /* judged with the target at what it reaches */
  int reaches;
  long long extra_cents;
  change_list change;
} ladder_edit;

typedef struct ladder_answer {
  ladder_terms terms;
  int lowest, highest; /* of all rungs, whatever the range; 0 when no wall keeps the other rules */
  ladder_rung *rung;   /* rising in rating and in cost */
  int count;
  ladder_edit edit[LADDER_MAX_EDITS]; /* rising in rating and in cost: for each gain the cheapest */
  int edit_count;
  int priced_at; /* the value at which rules are priced: `to`, else the brief's own; 0 = none */
  explain_rule_price *prices; /* as pick's with that value */
  int price_count;
  explanation *why; /* no wall keeps the other rules: conflicts and near misses; else NULL */
  long long walls, rated;
} ladder_answer;

/* The brief whose target climbs: that of `metric` where the brief has one, else its first one
 * turned to `metric`, else STC as a brief would ask for it. METRIC_COUNT: whatever the first has.
 * Returns its index in b->targets. */
int ladder_target(brief *b, sound_metric metric);
/* Marks the points of the lower convex hull of cost over rating; both rise. The first and the last
 * are on it. */
void ladder_mark_hull(ladder_rung *rung, int count);
/* `r` is what rungs_find found on `s`; terms->have was judged by the same brief. */
void ladder_explain(arena *a, const space *s, const rungs *r, const ladder_terms *terms,
                    ladder_answer *out);
/* Single changes of the given wall that keep what it keeps: see ladder_answer. */
void ladder_edits(arena *a, const judge_context *x, ladder_answer *out);
/* Whether edit `i` is the single change that gains at least ladder_gains[gain] at the least cost. */
bool ladder_least_for(const ladder_answer *l, int i, int gain);

#endif
