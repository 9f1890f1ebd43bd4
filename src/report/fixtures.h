/* The ways to carry heavy fixtures over a stretch of a side, in text and JSON. */
#ifndef REPORT_FIXTURES_H
#define REPORT_FIXTURES_H

#include "report/markup.h"
#include "report/report.h"

/* Nothing where the brief names no stretch. JSON: "fastening_options". */
void fixtures_text(const report *r, text *out);
void fixtures_json(const report *r, markup_json *j);

#endif
