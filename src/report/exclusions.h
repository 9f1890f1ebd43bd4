/* What a price does not hold: a bid says so, or it is argued about. */
#ifndef REPORT_EXCLUSIONS_H
#define REPORT_EXCLUSIONS_H

#include "report/markup.h"
#include "report/report.h"

enum { EXCLUSIONS_MAX = 16 };

/* Static sentences under a brief, at most EXCLUSIONS_MAX; how many. Common practice, no source. */
int exclusions_of(const brief *b, const char *out[EXCLUSIONS_MAX]);
/* Under the label "Excluded". */
void exclusions_text(const brief *b, text *out);
/* "exclusions": [...] */
void exclusions_json(const brief *b, markup_json *j);

#endif
