/* What the text, JSON, CSV and page of `plan` say alike. */
#ifndef REPORT_VIEW_PLAN_H
#define REPORT_VIEW_PLAN_H

#include "explain/plan.h"
#include "report/view.h"

/* "C3": how answers name a class of walls. */
const char *view_plan_class(const report *r, int of_class);
/* The report of one class: its brief is the class's demand. */
report view_plan_report(const report *r, const plan_answer *p, int of_class);
/* What a class asks, for people: "STC 50 in the laboratory, 80 % sure; fire 60 min; 9 ft 0 in high;
 * side A heavy, wet". */
const char *view_plan_demand(const report *r, const plan_answer *p, int of_class);
/* Ids of rows, runs of them as "W-101 to W-112": for all of `row` (n of them, in the order of the
 * schedule) whose way round is `mirrored`; "" without any. */
const char *view_plan_ids(const report *r, const plan_answer *p, const int *row, int n,
                          bool mirrored);
/* The same whichever way round. */
const char *view_plan_all_ids(const report *r, const plan_answer *p, const int *row, int n);
/* "6 types", "1 type" */
const char *view_plan_count(const report *r, int n, const char *one, const char *many);
/* Cost a unit of area (m2 of wall) without floor value and setup. */
double view_plan_per_m2(const plan_money *m, double area_m2);
/* The points of cost against number of types that were solved, and behind them the plan's own where
 * it has more types than the curve; each with the number of types allowed. How many. */
enum { VIEW_PLAN_POINTS = PLAN_CURVE + 1 };
int view_plan_curve(const plan_answer *p, plan_point out[VIEW_PLAN_POINTS]);
/* Where another type stops paying, in a sentence; "" when the curve does not tell. */
const char *view_plan_stop(const report *r, const plan_answer *p);
/* What a rule of the project asks: "6 types", "100 ft"; "" for one that is not in force. */
const char *view_plan_rule(const report *r, const plan_answer *p, plan_rule rule);
/* "max_types and min_run": the rules of a set. */
const char *view_plan_rules(const report *r, unsigned rules);
/* The least of the targets' probabilities; 1 without a target. */
double view_plan_probability(const plan_answer *p, int of_class);
/* How many walls a test would find below their target, as sentences; "" without targets. */
const char *view_plan_misses(const report *r, const plan_answer *p);
/* Why no type fits a class, as one clause: the smallest sets of rules that cannot be had together.
 */
const char *view_plan_reason(const report *r, const plan_answer *p, const plan_reason *why);
/* "USD 1,234.50 saved" has no sign: the saving of the plan against the drawings, cents. */
long long view_plan_saving(const plan_comparison *c);
/* Cautions of the whole answer: those of any type used, each once, then the plan's own. At most
 * `max`; returns how many. */
enum { VIEW_MAX_PLAN_CAUTIONS = 120 };
int view_plan_cautions(const report *r, const plan_answer *p,
                       const char *caution[VIEW_MAX_PLAN_CAUTIONS]);
/* What the project asks of some wall or other, as one brief, for what is said of all of them. */
const brief *view_plan_any_brief(const report *r, const plan_answer *p);

#endif
