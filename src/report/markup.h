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

/* XML and HTML, for text from anywhere. Bytes that are not UTF-8, control characters and what XML
 * forbids become U+FFFD; a carriage return becomes a blank. The characters that order the letters
 * around them (U+202A to U+202E, U+2066 to U+2069) become U+FFFD too: unclosed they would turn the
 * rest of the page around, and a name needs none. Text that is itself written from right to left
 * stays as it is. NULL is nothing. */
/* Between tags. */
void markup_text(text *out, const char *value);
/* Inside the double quotes of an attribute. */
void markup_attribute(text *out, const char *value);

/* Elements, written front to back, readable as XML and as HTML 5 alike: those that can hold nothing
 * (br, meta, path...) end in "/>", all others have an end tag. Names of elements and attributes are
 * the program's own and are kept by address until closed. Elements deeper than MARKUP_MAX_DEPTH are
 * left out; what they would hold stands in the deepest that is written. */
typedef struct markup_xml {
  text *out;
  int depth;
  int lost;                           /* open elements that are left out */
  bool tag_open;                      /* the start tag takes attributes still */
  const char *name[MARKUP_MAX_DEPTH]; /* of the open elements */
  bool lines[MARKUP_MAX_DEPTH];       /* something in it began on a line of its own */
  text nowhere;
} markup_xml;

void markup_xml_init(markup_xml *x, text *out);
/* The first line of a file of XML, of HTML 5. */
void markup_xml_declaration(markup_xml *x);
void markup_xml_html(markup_xml *x);
/* Opens an element on a new line, or within the line (between words, where a line break would be a
 * blank). */
void markup_xml_open(markup_xml *x, const char *name);
void markup_xml_inline(markup_xml *x, const char *name);
/* Attributes of the element just opened; not after anything was put into it. NULL: no attribute. */
void markup_xml_attribute(markup_xml *x, const char *name, const char *value);
/* At most `decimals` digits after the point, whatever the locale. Not finite: 0. */
void markup_xml_number(markup_xml *x, const char *name, double value, int decimals);
/* An attribute written in pieces by the program itself: digits, letters and blanks only. */
text *markup_xml_attribute_begin(markup_xml *x, const char *name);
void markup_xml_attribute_end(markup_xml *x);
void markup_xml_text(markup_xml *x, const char *value);
void markup_xml_close(markup_xml *x);
/* Open, text, close. `css_class` NULL: without. */
void markup_xml_element(markup_xml *x, const char *name, const char *css_class, const char *value);
/* <style> with the program's own style sheet, which holds none of < > &. */
void markup_xml_style(markup_xml *x, const char *css);
/* Ends the start tag and hands out the text, for whole elements that another writer puts here. */
text *markup_xml_embed(markup_xml *x);

/* One field of a CSV line (RFC 4180): quoted where it must be. A field that a spreadsheet would
 * take for a formula gets an apostrophe in front. `first`: no comma before it. */
void markup_csv_field(text *out, const char *value, bool first);
/* Ends a CSV line: CR LF. */
void markup_csv_end(text *out);

/* Text of a spreadsheet cell: cleaned as between tags; what the format would read as an escape of its
 * own ("_x0041_") is guarded; line feeds beyond those that a cell holds become blanks; beyond the
 * characters that it holds it is cut and ends in an ellipsis. In `a`, or `value` itself where nothing
 * changes. NULL is nothing. The limits are those that spreadsheet programs document for a cell. */
enum { MARKUP_CELL_UNITS = 32767 /* of UTF-16 */, MARKUP_CELL_LINES = 253 /* line feeds */ };
const char *markup_cell(arena *a, const char *value);

#endif
