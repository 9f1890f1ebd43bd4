/* What a wall gives where it stands: by the depth of the rooms, under its ceiling. Text and JSON. */
#ifndef REPORT_SETTING_H
#define REPORT_SETTING_H

#include "report/markup.h"
#include "report/report.h"

/* The rating in the building, as a sentence; NULL where the brief says nothing of the kind. */
const char *setting_words(const report *r, const assessment *x);
/* Nothing where the brief says nothing of the kind. JSON: "field", "ceiling_path". */
void setting_text(const report *r, const assessment *x, text *out);
void setting_json(const report *r, const assessment *x, markup_json *j);

#endif
