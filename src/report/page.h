/* A page of plain text, 100 columns wide: labels on the left, what belongs to them in a column of
 * its own. */
#ifndef REPORT_PAGE_H
#define REPORT_PAGE_H

#include "base/text.h"

enum { PAGE_WIDTH = 100, PAGE_LABEL = 12 };

/* Starts what belongs to `label` ("" for a further line under the same label). */
void page_label(text *out, const char *label);
/* Text from outside: what could steer a terminal is shown as it is written in JSON. */
void page_put(text *out, const char *s);
/* Words from the present column on; lines that would pass the width go on at column `indent`. Ends
 * the line. Characters that could steer a terminal are shown as they are written in JSON. */
void page_words(text *out, size_t indent, const char *words);
/* Label, words, in one. */
void page_line(text *out, const char *label, const char *words);
/* Blanks, so that `word` ends before column `end`; at least one blank, or on the next line where it
 * would pass the width. */
void page_right(text *out, size_t end, const char *word);
/* `word` cut to `columns` display columns, the last a full stop when something was cut. */
void page_cut(text *out, size_t columns, const char *word);

#endif
