/* Parts of text answers that several of them share. */
#ifndef REPORT_REPORT_TEXT_H
#define REPORT_REPORT_TEXT_H

#include "report/report.h"

/* Everything about one wall: what it is, sound, fire, height, rules, cost, takeoff, cautions. */
void report_wall_text(const report *r, const assessment *x, text *out);

/* Walls to compare with, under a label and an introduction; `fails`: with the rules they break. */
void report_others_text(const report *r, const char *label, const char *intro,
                        assessment *const *x, int count, bool fails, text *out);
/* Without a wall: the rules that cannot be had together, and the walls that come nearest. */
void report_conflicts_text(const report *r, const explanation *e, text *out);
/* What giving up a rule would save; `base` is the line of the wall that it is counted against. */
void report_rule_prices_text(const report *r, const explain_rule_price *prices, int count,
                             const char *base, text *out);

/* What the price book has no price for, since walls that need it are left out; nothing when it has
 * all. */
void report_unpriced_text(const report *r, text *out);

#endif
