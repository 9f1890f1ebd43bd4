/* What the text, JSON and CSV of `ladder` say alike. */
#ifndef REPORT_VIEW_LADDER_H
#define REPORT_VIEW_LADDER_H

#include "report/report_ladder.h"
#include "report/view.h"

const target *view_ladder_target(const report *r, const ladder_answer *l);
/* "STC" */
const char *view_ladder_metric(const report *r, const ladder_answer *l);
/* "STC in the laboratory, 80 % sure": what a rung's rating means. */
const char *view_ladder_aim(const report *r, const ladder_answer *l);
/* The bare prediction of the metric that climbs: printed, exact, standard deviation. */
typedef struct view_predicted {
  int printed;
  double exact, sd;
  bool published; /* the rung stands on a published rating instead */
} view_predicted;
view_predicted view_ladder_predicted(const report *r, const ladder_answer *l, const assessment *x);
/* Money of the whole wall per m2 of it. */
double view_ladder_per_m2(const assessment *x, long long cents);
/* The rung is so high that it speaks of the wall alone. */
bool view_ladder_alone(const ladder_rung *g);
/* The caution of such rungs. */
extern const char view_ladder_flanking[];
/* As view_cautions, with the target at what the wall is rated for. */
int view_ladder_cautions(const report *r, const ladder_answer *l, int rating, const assessment *x,
                         const char *caution[VIEW_MAX_CAUTIONS]);
/* The cautions of all rungs, what is said of several once, with the rungs in front: "54 and up: ...".
 */
enum { VIEW_LADDER_CAUTIONS = 200 };
int view_ladder_all_cautions(const report *r, const ladder_answer *l,
                             const char *caution[VIEW_LADDER_CAUTIONS]);
/* Lower values at the same cost: "46", "41 to 44". Only where the rung serves some. */
const char *view_ladder_served(const report *r, const ladder_rung *g);

#endif
