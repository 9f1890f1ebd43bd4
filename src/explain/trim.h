/* A specified wall beside the cheaper walls that hold everything it has to hold
 * (docs/design/trim.md). */
#ifndef EXPLAIN_TRIM_H
#define EXPLAIN_TRIM_H

#include "explain/explain.h"
#include "explain/steps.h"

enum { TRIM_DEFAULT_COUNT = 8, TRIM_MAX_COUNT = 100, TRIM_MAX_LOSSES = 16 };

/* What the specified wall has and a proposal must have too, unless it is waived. */
typedef enum trim_waiver {
  TRIM_ALLOW_THINNER_STUDS = 1, /* steel lighter than the specified; sides that take no fixtures */
  TRIM_ALLOW_PLAIN_BOARDS = 2,  /* faces that are abuse- or moisture-resistant no longer */
  TRIM_ALLOW_THICKER = 4,
  TRIM_ALLOW_COMBUSTIBLE = 8, /* combustible parts in place of none */
  TRIM_ALLOW_LESS_FIRE = 16   /* fewer minutes than are shown; what is asked or promised stays */
} trim_waiver;
/* What a proposal must not change at all. */
typedef enum trim_hold {
  TRIM_KEEP_FRAME = 1,    /* the frame, its spacing aside */
  TRIM_KEEP_FIRE = 2,     /* the row, rule or listing that shows its fire rating */
  TRIM_KEEP_THICKNESS = 4 /* neither thicker nor thinner */
} trim_hold;

typedef struct trim_terms {
  int count;        /* most proposals, 1..TRIM_MAX_COUNT */
  int promised_stc, promised_fire; /* what the drawings promise, 0 = nothing said */
  const char *design;              /* and the listed design that they name; NULL = none */
  unsigned allow, keep;            /* bits of trim_waiver, trim_hold */
  long long redesign_cents;        /* of redesign and resubmittal: a saving must be above it */
  bool slack_given; /* a thickness limit holds though the brief sets a target */
  double slack_m;   /* a proposal may be so much thicker than the specified wall */
  /* Set by trim_hold_to. */
  bool own;       /* the brief sets no target: the specified wall is held to its own figures */
  bool thickness; /* no thicker than the specified wall and the slack */
} trim_terms;

typedef enum trim_verdict {
  TRIM_HOLDS,     /* the specified wall keeps every rule */
  TRIM_NOT_SHOWN, /* it may keep them, but it cannot be shown: confidence, evidence, no fire row */
  TRIM_FAILS      /* it breaks a rule */
} trim_verdict;

/* One part of the wall changed. */
typedef struct trim_change {
  step_part part;
  const char *what;             /* "second layer off side A" (explain/changes.h) */
  const char *name, *from, *to; /* of the part, in trade words */
  assessment *alone;      /* the specified wall with this change only; NULL when it cannot be */
  const char *why_not;    /* why it cannot be taken alone: a sentence; NULL when it can */
  long long saving_cents; /* of the change alone, floor value included; may be below 0 */
  rule_mask breaks;       /* rules that the change alone breaks and the specified wall keeps */
  bool heavy[2];          /* the sides take heavy fastening after the change alone */
} trim_change;

typedef struct trim_proposal {
  assessment *wall;
  bool heavy[2];
  long long saving_cents;   /* floor value included */
  long long net_cents;      /* less redesign and resubmittal */
  long long together_cents; /* saving less that of the changes that can be taken alone */
  double saving_per_m2;
  trim_change change[STEP_PARTS];
  int change_count;
  const char *loss[TRIM_MAX_LOSSES]; /* what it gives up against the specified wall, in words */
  int loss_count;
} trim_proposal;

typedef struct trim_answer {
  trim_terms terms;
  trim_verdict verdict;
  assessment *specified;
  bool heavy[2];
  trim_proposal *proposal; /* best saving first; none beaten by another (savers_beats) */
  int proposal_count;
  int found;            /* so many there are in all */
  assessment *cheapest; /* the cheapest wall that holds everything, whatever it costs; NULL: none */
  long long cheapest_more_cents; /* what it costs beyond the specified wall */
  assessment **cheaper;          /* without proposals: cheaper walls and what they break */
  int cheaper_count;
  explain_rule_price *prices; /* against the cheapest wall that holds everything */
  const char *base_line;      /* that wall, where there are prices */
  int price_count;
  long long walls; /* judged */
} trim_answer;

/* What the wall is held to, put into `b`: without a target its own rating (as printed and as sure,
 * and what the usual confidence assures) and the fire minutes that are shown for it; what the drawings
 * promise; its thickness and the slack, class of boards at the rooms, studs and noncombustible parts,
 * as far as the terms do not waive them. Needs prices in the context; x->brief is read as the brief
 * came. A promised rating stands in place of the wall's own and needs room for one target more
 * (BRIEF_MAX_TARGETS). */
void trim_hold_to(arena *a, const judge_context *x, const wall *w, trim_terms *terms, brief *b);
/* `r` is the sweep of `s`, whose brief is that of trim_hold_to; `specified` was judged by it and
 * can be costed. */
void trim_explain(arena *a, const space *s, const sweep_result *r, assessment *specified,
                  const trim_terms *terms, trim_answer *out);

#endif
