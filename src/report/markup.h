/* All escaping and quoting of output formats: nothing else in the library writes a quote mark
 * around a value. */
#ifndef REPORT_MARKUP_H
#define REPORT_MARKUP_H

#include <stdbool.h>

#include "base/text.h"

/* JSON (RFC 8259), written front to back. Keys are NULL inside arrays. Objects and arrays stand
 * over several lines, those opened as `line` on one. Numbers go through text_number, so they do not
 * depend on the host's locale; what is not finite becomes null. */
enum { MARKUP_MAX_DEPTH = 32 };

typedef struct markup_json {
  text *out;
  int depth;
  char closing[MARKUP_MAX_DEPTH];
  bool filled[MARKUP_MAX_DEPTH]; /* something stands in it already */
  bool line[MARKUP_MAX_DEPTH];   /* on one line */
} markup_json;

void markup_json_init(markup_json *j, text *out);
void markup_json_object(markup_json *j, const char *key, bool line);
void markup_json_array(markup_json *j, const char *key, bool line);
/* Closes the innermost object or array; the outermost ends the text with a newline. */
void markup_json_close(markup_json *j);
/* NULL becomes null. Bytes that are not UTF-8 become U+FFFD. */
void markup_json_string(markup_json *j, const char *key, const char *value);
/* At most `decimals` digits after the point. */
void markup_json_number(markup_json *j, const char *key, double value, int decimals);
void markup_json_integer(markup_json *j, const char *key, long long value);
void markup_json_bool(markup_json *j, const char *key, bool value);
void markup_json_null(markup_json *j, const char *key);
/* Minor units as a number in the major unit, exactly: 1999 -> 19.99. */
void markup_json_cents(markup_json *j, const char *key, long long cents);

/* One field of a CSV line (RFC 4180): quoted where it must be. A field that a spreadsheet would
 * take for a formula gets an apostrophe in front. `first`: no comma before it. */
void markup_csv_field(text *out, const char *value, bool first);
/* Ends a CSV line: CR LF. */
void markup_csv_end(text *out);

#endif
