/* The ways to carry heavy fixtures over a stretch of a side, in text and JSON. */
#ifndef REPORT_FIXTURES_H
#define REPORT_FIXTURES_H

#include "explain/fastening.h"
#include "report/markup.h"
#include "report/report.h"

/* Nothing where the brief names no stretch. JSON: "fastening_options". */
void fixtures_text(const report *r, text *out);
void fixtures_json(const report *r, markup_json *j);
/* "The mount left out over the stretch" */
const char *fixtures_way(int way);
/* What is built over the stretch and how long, cost, rating, whether it reaches the targets. The wall of `o`
 * is there. */
const char *fixtures_figures(const report *r, const fastening_choice *c, const fastening_option *o);
/* "Side A carries heavy fixtures over 6 ft 7 in of 26 ft 3 in." */
const char *fixtures_intro(const report *r, const fastening_choice *c);
/* What else there is, for the designer. */
const char *fixtures_furring(void);

#endif
