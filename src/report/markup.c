#include "report/markup.h"

#include <math.h>
#include <stddef.h>
#include <string.h>

/* Length of the well-formed UTF-8 sequence at `s` (Unicode 15, table 3-7), 0 when there is none. */
static size_t utf8_length(const unsigned char *s) {
  static const struct {
    unsigned char first, last, second_low, second_high, length;
  } forms[] = {
      {0x01, 0x7F, 0, 0, 1},       {0xC2, 0xDF, 0x80, 0xBF, 2}, {0xE0, 0xE0, 0xA0, 0xBF, 3},
      {0xE1, 0xEC, 0x80, 0xBF, 3}, {0xED, 0xED, 0x80, 0x9F, 3}, {0xEE, 0xEF, 0x80, 0xBF, 3},
      {0xF0, 0xF0, 0x90, 0xBF, 4}, {0xF1, 0xF3, 0x80, 0xBF, 4}, {0xF4, 0xF4, 0x80, 0x8F, 4},
  };
  for (size_t i = 0; i < sizeof forms / sizeof forms[0]; i++) {
    if (s[0] < forms[i].first || s[0] > forms[i].last) continue;
    if (forms[i].length == 1) return 1;
    if (s[1] < forms[i].second_low || s[1] > forms[i].second_high) return 0;
    for (size_t k = 2; k < forms[i].length; k++)
      if (s[k] < 0x80 || s[k] > 0xBF) return 0;
    return forms[i].length;
  }
  return 0;
}

static void put_json_character(text *out, const unsigned char *s, size_t length) {
  if (length == 0)
    text_put(out, "\xEF\xBF\xBD");
  else if (*s == '"' || *s == '\\') {
    text_char(out, '\\');
    text_char(out, (char)*s);
  } else if (*s == '\n')
    text_put(out, "\\n");
  else if (*s == '\t')
    text_put(out, "\\t");
  else if (*s < 0x20 || *s == 0x7F)
    text_putf(out, "\\u%04x", (unsigned)*s);
  else
    text_putn(out, (const char *)s, length);
}

static void put_json_quoted(text *out, const char *value) {
  text_char(out, '"');
  for (const unsigned char *s = (const unsigned char *)value; *s != '\0';) {
    size_t length = utf8_length(s);
    put_json_character(out, s, length);
    s += length ? length : 1;
  }
  text_char(out, '"');
}

static void new_line(markup_json *j) {
  text_char(j->out, '\n');
  for (int i = 0; i < j->depth; i++) text_put(j->out, "  ");
}

/* What stands before a value: comma, line break, key. */
static void begin_value(markup_json *j, const char *key) {
  if (j->depth > 0) {
    int in = j->depth - 1;
    if (j->filled[in]) text_char(j->out, ',');
    if (!j->line[in])
      new_line(j);
    else if (j->filled[in])
      text_char(j->out, ' ');
    j->filled[in] = true;
  }
  if (key == NULL) return;
  put_json_quoted(j->out, key);
  text_put(j->out, ": ");
}

static void open_container(markup_json *j, const char *key, bool line, char opening, char closing) {
  begin_value(j, key);
  text_char(j->out, opening);
  if (j->depth == MARKUP_MAX_DEPTH) return;
  j->closing[j->depth] = closing;
  j->filled[j->depth] = false;
  j->line[j->depth] = line || (j->depth > 0 && j->line[j->depth - 1]);
  j->depth++;
}

void markup_json_init(markup_json *j, text *out) {
  memset(j, 0, sizeof *j);
  j->out = out;
}

void markup_json_object(markup_json *j, const char *key, bool line) {
  open_container(j, key, line, '{', '}');
}

void markup_json_array(markup_json *j, const char *key, bool line) {
  open_container(j, key, line, '[', ']');
}

void markup_json_close(markup_json *j) {
  if (j->depth == 0) return;
  j->depth--;
  if (j->filled[j->depth] && !j->line[j->depth]) new_line(j);
  text_char(j->out, j->closing[j->depth]);
  if (j->depth == 0) text_char(j->out, '\n');
}

void markup_json_string(markup_json *j, const char *key, const char *value) {
  begin_value(j, key);
  if (value == NULL)
    text_put(j->out, "null");
  else
    put_json_quoted(j->out, value);
}

void markup_json_number(markup_json *j, const char *key, double value, int decimals) {
  begin_value(j, key);
  if (isfinite(value))
    text_number(j->out, value, decimals);
  else
    text_put(j->out, "null");
}

void markup_json_integer(markup_json *j, const char *key, long long value) {
  begin_value(j, key);
  text_putf(j->out, "%lld", value);
}

void markup_json_bool(markup_json *j, const char *key, bool value) {
  begin_value(j, key);
  text_put(j->out, value ? "true" : "false");
}

void markup_json_null(markup_json *j, const char *key) {
  begin_value(j, key);
  text_put(j->out, "null");
}

void markup_json_cents(markup_json *j, const char *key, long long cents) {
  begin_value(j, key);
  text_cents(j->out, cents, false);
}

/* ---- XML and HTML ---- */

static bool in(const unsigned char *s, unsigned char b0, unsigned char b1, unsigned char low,
               unsigned char high) {
  return s[0] == b0 && s[1] == b1 && s[2] >= low && s[2] <= high;
}

/* Whether a well-formed sequence may not stand in a page: control characters (C0 but tab and line
 * breaks, DEL, C1), U+FFFE and U+FFFF, and the characters that order others by direction. */
static bool barred(const unsigned char *s, size_t length) {
  if (length == 1) return (*s < 0x20 && *s != '\t' && *s != '\n' && *s != '\r') || *s == 0x7F;
  if (length == 2) return s[0] == 0xC2 && s[1] < 0xA0;
  if (length == 3)
    return in(s, 0xEF, 0xBF, 0xBE, 0xBF) || in(s, 0xE2, 0x80, 0xAA, 0xAE) ||
           in(s, 0xE2, 0x81, 0xA6, 0xA9);
  return false;
}

/* The reference that stands for a character; NULL when it stands for itself. */
static const char *reference_of(unsigned char c, bool attribute) {
  switch (c) {
  case '&':
    return "&amp;";
  case '<':
    return "&lt;";
  case '>':
    return "&gt;";
  case '"':
    return attribute ? "&quot;" : NULL;
  case '\t':
    return attribute ? "&#9;" : NULL;
  case '\n':
    return attribute ? "&#10;" : NULL;
  case '\r':
    return " ";
  default:
    return NULL;
  }
}

static void put_escaped(text *out, const char *value, bool attribute) {
  if (value == NULL) return;
  for (const unsigned char *s = (const unsigned char *)value; *s != '\0';) {
    size_t length = utf8_length(s);
    const char *instead = length == 1 ? reference_of(*s, attribute) : NULL;
    if (length == 0 || barred(s, length))
      text_put(out, "\xEF\xBF\xBD");
    else if (instead)
      text_put(out, instead);
    else
      text_putn(out, (const char *)s, length);
    s += length ? length : 1;
  }
}

void markup_text(text *out, const char *value) {
  put_escaped(out, value, false);
}

void markup_attribute(text *out, const char *value) {
  put_escaped(out, value, true);
}

/* Elements without content: those of HTML 5 that have no end tag (12.1.2), and shapes of SVG. */
static bool holds_nothing(const char *name) {
  static const char *const names[] = {"br",      "circle",  "col",  "hr",       "img",
                                      "input",   "line",    "link", "meta",     "path",
                                      "ellipse", "polygon", "rect", "polyline", "use"};
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    if (text_equal(name, names[i])) return true;
  return false;
}

void markup_xml_init(markup_xml *x, text *out) {
  memset(x, 0, sizeof *x);
  x->out = out;
  text_init(&x->nowhere, out->arena, 0);
}

void markup_xml_declaration(markup_xml *x) {
  text_put(x->out, "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n");
}

void markup_xml_html(markup_xml *x) {
  text_put(x->out, "<!DOCTYPE html>\n");
}

static void end_tag_start(markup_xml *x) {
  if (x->tag_open) text_char(x->out, '>');
  x->tag_open = false;
}

void markup_xml_inline(markup_xml *x, const char *name) {
  end_tag_start(x);
  if (x->depth == MARKUP_MAX_DEPTH) {
    x->lost++;
    return;
  }
  text_char(x->out, '<');
  text_put(x->out, name);
  x->name[x->depth] = name;
  x->lines[x->depth++] = false;
  x->tag_open = true;
}

void markup_xml_open(markup_xml *x, const char *name) {
  end_tag_start(x);
  if (x->depth > 0 && x->depth < MARKUP_MAX_DEPTH) {
    text_char(x->out, '\n');
    x->lines[x->depth - 1] = true;
  }
  markup_xml_inline(x, name);
}

text *markup_xml_attribute_begin(markup_xml *x, const char *name) {
  if (x->lost || !x->tag_open) return &x->nowhere;
  text_char(x->out, ' ');
  text_put(x->out, name);
  text_put(x->out, "=\"");
  return x->out;
}

void markup_xml_attribute_end(markup_xml *x) {
  if (!x->lost && x->tag_open) text_char(x->out, '"');
}

void markup_xml_attribute(markup_xml *x, const char *name, const char *value) {
  if (value == NULL) return;
  markup_attribute(markup_xml_attribute_begin(x, name), value);
  markup_xml_attribute_end(x);
}

void markup_xml_number(markup_xml *x, const char *name, double value, int decimals) {
  text_number(markup_xml_attribute_begin(x, name), isfinite(value) ? value : 0, decimals);
  markup_xml_attribute_end(x);
}

void markup_xml_text(markup_xml *x, const char *value) {
  end_tag_start(x);
  markup_text(x->out, value);
}

void markup_xml_close(markup_xml *x) {
  if (x->lost > 0) {
    x->lost--;
    return;
  }
  if (x->depth == 0) return;
  const char *name = x->name[--x->depth];
  if (x->tag_open && holds_nothing(name)) {
    text_put(x->out, "/>");
    x->tag_open = false;
  } else {
    end_tag_start(x);
    if (x->lines[x->depth]) text_char(x->out, '\n');
    text_put(x->out, "</");
    text_put(x->out, name);
    text_char(x->out, '>');
  }
  if (x->depth == 0) text_char(x->out, '\n');
}

void markup_xml_element(markup_xml *x, const char *name, const char *css_class, const char *value) {
  markup_xml_open(x, name);
  markup_xml_attribute(x, "class", css_class);
  markup_xml_text(x, value);
  markup_xml_close(x);
}

void markup_xml_style(markup_xml *x, const char *css) {
  markup_xml_open(x, "style");
  end_tag_start(x);
  text_put(x->out, css);
  markup_xml_close(x);
}

text *markup_xml_embed(markup_xml *x) {
  end_tag_start(x);
  return x->out;
}

/* ---- CSV ---- */

void markup_csv_field(text *out, const char *value, bool first) {
  if (!first) text_char(out, ',');
  bool formula = strchr("=+-@\t\r", value[0]) != NULL && value[0] != '\0';
  bool number =
      formula && strspn(value + 1, "0123456789.") == strlen(value + 1) && value[1] != '\0';
  bool guard = formula && !(number && value[0] == '-');
  if (!guard && strpbrk(value, ",\"\r\n") == NULL) {
    text_put(out, value);
    return;
  }
  text_char(out, '"');
  if (guard) text_char(out, '\'');
  for (const char *s = value; *s != '\0'; s++) {
    if (*s == '"') text_char(out, '"');
    text_char(out, *s);
  }
  text_char(out, '"');
}

void markup_csv_end(text *out) {
  text_put(out, "\r\n");
}

/* ---- spreadsheet cells ---- */

/* "_xHHHH_" stands for one character there (ECMA-376, ST_Xstring). */
static bool is_cell_escape(const char *s) {
  if (s[0] != '_' || s[1] != 'x') return false;
  return strspn(s + 2, "0123456789ABCDEFabcdef") >= 4 && s[6] == '_';
}

static bool is_plain_cell(const char *value) {
  size_t n = 0, lines = 0;
  for (const unsigned char *s = (const unsigned char *)value; *s != '\0'; s++, n++) {
    if (*s >= 0x7F || (*s < 0x20 && *s != '\n' && *s != '\t') || is_cell_escape((const char *)s))
      return false;
    lines += *s == '\n';
  }
  return n <= MARKUP_CELL_UNITS && lines <= MARKUP_CELL_LINES;
}

/* One character and what it counts: units of UTF-16, an escape as it is written. */
static int put_cell_character(text *out, const char *s, size_t length, int *lines) {
  static const char guard[] = "_x005F_";
  if (length == 0 || barred((const unsigned char *)s, length)) {
    text_put(out, "\xEF\xBF\xBD");
    return 1;
  }
  if (is_cell_escape(s)) {
    text_put(out, guard);
    return (int)sizeof guard - 1;
  }
  if (*s == '\r' || (*s == '\n' && ++*lines > MARKUP_CELL_LINES))
    text_char(out, ' ');
  else
    text_putn(out, s, length);
  return length == 4 ? 2 : 1;
}

const char *markup_cell(arena *a, const char *value) {
  enum { MAX_BYTES = 4 * MARKUP_CELL_UNITS };
  if (value == NULL) return "";
  if (is_plain_cell(value)) return value;
  text out;
  text_init(&out, a, MAX_BYTES);
  int units = 0, lines = 0;
  size_t cut = 0; /* where an ellipsis still has room */
  for (const char *s = value; *s != '\0';) {
    size_t length = utf8_length((const unsigned char *)s);
    if (units < MARKUP_CELL_UNITS) cut = out.len;
    units += put_cell_character(&out, s, length, &lines);
    s += length ? length : 1;
    if (units > MARKUP_CELL_UNITS) {
      out.len = cut;
      out.data[cut] = '\0';
      text_put(&out, "\xE2\x80\xA6");
      break;
    }
  }
  return out.data;
}
