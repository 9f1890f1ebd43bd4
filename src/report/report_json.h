/* Parts of JSON answers that several of them share. Keys: docs/formats/answers.md. */
#ifndef REPORT_REPORT_JSON_H
#define REPORT_REPORT_JSON_H

#include "report/markup.h"
#include "report/report.h"

/* A rating/1; null without a wall. */
void report_json_rating(markup_json *j, const report *r, const char *key, const assessment *x);
/* The same keys but "septum" and "version", into an object that is open. */
void report_json_rating_facts(markup_json *j, const report *r, const assessment *x);
/* A brief/1 that asks the same; paths are those that it was read from. */
void report_json_brief(markup_json *j, const report *r, const char *key, const brief *b);
/* {"STC", "Rw", "C", "Ctr", "OITC"} */
void report_json_ratings(markup_json *j, const char *key, const ratings *v);
/* Walls to compare with; `fails`: with the rules that they break. */
void report_json_others(markup_json *j, const report *r, const char *key, assessment *const *x,
                        int count, bool fails);
/* The rules that a wall breaks: {"rule", "limit", "found"} each. */
void report_json_broken(markup_json *j, const report *r, const char *key, const assessment *x);
/* The names of rules. */
void report_json_rules(markup_json *j, const report *r, const char *key, rule_mask mask);
/* "unpriced": codes that the price book lacks */
void report_json_unpriced(markup_json *j, const report *r);
/* "price_of_rules" */
void report_json_rule_prices(markup_json *j, const explain_rule_price *prices, int count);

#endif
