/* What the text, JSON and CSV of `trim` say alike. */
#ifndef REPORT_VIEW_TRIM_H
#define REPORT_VIEW_TRIM_H

#include "explain/trim.h"
#include "report/view.h"

/* The metric that the wall is held to first. */
sound_metric view_trim_metric(const report *r);
/* "STC 52 (predicted)", "STC 54 (published: NBC 2020 ...)": the ratings that the targets ask for.
 */
const char *view_trim_rating(const report *r, const assessment *x);
/* "83 % sure of STC 50": for each target how sure it is. */
const char *view_trim_sure(const report *r, const assessment *x);
/* "60 min: ..." or "not shown". */
const char *view_trim_fire(const report *r, const assessment *x);
/* What the wall is held to, as one sentence. */
const char *view_trim_terms(const report *r, const trim_answer *t);
/* "STC 52 becomes 49 (-2.8 dB), 5/8 in thinner, breaks confidence": what a change does when it is
 * taken alone. */
const char *view_trim_effect(const report *r, const trim_answer *t, const trim_change *c);
/* What the proposal gives up, as one clause. */
const char *view_trim_losses(const report *r, const trim_proposal *p);
/* "holds", "not_shown", "fails" */
const char *view_trim_verdict(const trim_answer *t);
/* What the drawings promise, "STC 55, 60 min of fire resistance, design 42"; NULL when nothing was
 * said. */
const char *view_trim_promises(const report *r, const trim_answer *t);
/* Words of the terms' bits; a NULL word ends them. */
typedef struct view_trim_word {
  unsigned bit;
  const char *word;
} view_trim_word;
extern const view_trim_word view_trim_waivers[], view_trim_holds[];
/* By how much the predicted rating moves, dB: of the metric that the wall is held to first. */
double view_trim_shift(const report *r, const assessment *from, const assessment *to);

#endif
