#include "input/json_scan.h"

#include <string.h>

enum {
  NUMBER_CHARACTERS = 60, /* cJSON copies at most 63 bytes of a number */
  DOUBLE_MAX_EXPONENT = 308,
  SHOWN = 24 /* bytes of a wrong word that a message quotes */
};

typedef struct scanner {
  arena *arena;
  diag_list *diags;
  const char *file;
  const char *at, *end;
  const char *line_start;
  int line;
  int depth;
  size_t values;
  size_t string_bytes;
  bool stopped; /* a fault that cannot be passed over, or more faults than are kept */
} scanner;

static int column_of(const scanner *s, const char *where) {
  return (int)(where - s->line_start) + 1;
}

static void fault(scanner *s, error_code code, const char *where, const char *message) {
  diag_place place = {.file = s->file, .line = s->line, .column = column_of(s, where)};
  diag_add(s->diags, DIAG_ERROR, code, place, "%s", message);
  if (diag_is_full(s->diags)) s->stopped = true;
}

static void stop(scanner *s, error_code code, const char *where, const char *message) {
  fault(s, code, where, message);
  s->stopped = true;
}

static bool is_digit(char c) {
  return c >= '0' && c <= '9';
}
static bool is_letter(char c) {
  return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_';
}
static bool is_number_part(char c) {
  return is_digit(c) || c == '+' || c == '-' || c == '.';
}

static void skip_space(scanner *s) {
  for (; s->at < s->end; s->at++) {
    if (*s->at == '\n') {
      s->line++;
      s->line_start = s->at + 1;
    } else if (*s->at != ' ' && *s->at != '\t' && *s->at != '\r') {
      return;
    }
  }
}

/* What stands at the scanner's place, in words. */
static const char *found(const scanner *s) {
  const char *p = s->at;
  if (p >= s->end) return "the end of the file";
  if (p + 1 < s->end && p[0] == '/' && (p[1] == '/' || p[1] == '*'))
    return "a comment (JSON has none)";
  if (is_letter(*p) || is_number_part(*p)) {
    size_t n = 0;
    while (p + n < s->end && n < SHOWN && (is_letter(p[n]) || is_number_part(p[n]))) n++;
    return text_format(s->arena, "%.*s", (int)n, p);
  }
  size_t n = text_utf8(p, s->end);
  if (n == 0 || (unsigned char)*p < 0x20)
    return text_format(s->arena, "the byte 0x%02x", (unsigned char)*p);
  return *p == '"' ? "a string" : text_format(s->arena, "\"%.*s\"", (int)n, p);
}

/* Stops with what was expected and what is there. */
static void stop_unexpected(scanner *s, const char *expected) {
  bool bad_byte = s->at < s->end && text_utf8(s->at, s->end) == 0;
  stop(s, bad_byte ? ERROR_JSON_ENCODING : ERROR_JSON_SYNTAX, s->at,
       text_format(s->arena, "expected %s, found %s", expected, found(s)));
}

/* ---- strings ---- */

static int hex_digit(char c) {
  if (is_digit(c)) return c - '0';
  if (c >= 'a' && c <= 'f') return c - 'a' + 10;
  if (c >= 'A' && c <= 'F') return c - 'A' + 10;
  return -1;
}

/* The value of `\uXXXX` at `p`, -1 when it is none. */
static int escaped_unit(const char *p, const char *end) {
  int value = 0;
  if (end - p < 6 || p[0] != '\\' || p[1] != 'u') return -1;
  for (int i = 2; i < 6; i++) {
    int digit = hex_digit(p[i]);
    if (digit < 0) return -1;
    value = value * 16 + digit;
  }
  return value;
}

static void scan_unicode_escape(scanner *s) {
  int unit = escaped_unit(s->at, s->end);
  if (unit < 0) {
    fault(s, ERROR_JSON_SYNTAX, s->at, "expected four hexadecimal digits after \\u");
    s->at += 2;
    return;
  }
  bool high = unit >= 0xD800 && unit < 0xDC00, low = unit >= 0xDC00 && unit < 0xE000;
  int second = high ? escaped_unit(s->at + 6, s->end) : -1;
  bool pair = second >= 0xDC00 && second < 0xE000;
  if (unit == 0) fault(s, ERROR_JSON_ENCODING, s->at, "the character \\u0000 is refused in text");
  if (low || (high && !pair))
    fault(s, ERROR_JSON_ENCODING, s->at, "half a surrogate pair is no character");
  s->at += pair ? 12 : 6;
}

static void scan_escape(scanner *s) {
  char c = s->at + 1 < s->end ? s->at[1] : '\0';
  if (c == 'u') {
    scan_unicode_escape(s);
  } else if (c && strchr("\"\\/bfnrt", c)) {
    s->at += 2;
  } else {
    fault(s, ERROR_JSON_SYNTAX, s->at, "unknown escape; a backslash itself is written \\\\");
    s->at += 1;
  }
}

/* One character of a string. False when the string cannot go on. */
static bool scan_character(scanner *s, bool *bad_before) {
  unsigned char c = (unsigned char)*s->at;
  if (c == '\n') {
    stop(s, ERROR_JSON_SYNTAX, s->at, "the string is not closed on its line");
    return false;
  }
  if (c == '\\') {
    scan_escape(s);
    return !s->stopped;
  }
  if (c < 0x20)
    fault(s, ERROR_JSON_SYNTAX, s->at,
          text_format(s->arena, "a raw control character; write \\u%04x", c));
  size_t n = text_utf8(s->at, s->end);
  if (n == 0 && !*bad_before) {
    fault(s, ERROR_JSON_ENCODING, s->at,
          text_format(s->arena, "the byte 0x%02x is not UTF-8 here", c));
    *bad_before = true; /* once a string is enough */
  }
  s->at += n ? n : 1;
  return !s->stopped;
}

/* At the opening quote. The raw text lies between *from and *to. */
static bool scan_string(scanner *s, const char **from, const char **to) {
  const char *open = s->at++;
  bool bad_before = false;
  *from = s->at;
  while (s->at < s->end && *s->at != '"')
    if (!scan_character(s, &bad_before)) return false;
  if (s->at >= s->end) {
    stop(s, ERROR_JSON_SYNTAX, open, "the string is not closed");
    return false;
  }
  *to = s->at++;
  s->string_bytes += (size_t)(*to - *from) + 1;
  return true;
}

/* ---- numbers and words ---- */

static size_t count_digits(const char *p, const char *end) {
  size_t n = 0;
  while (p + n < end && is_digit(p[n])) n++;
  return n;
}

/* RFC 8259 section 6: -? (0 | [1-9][0-9]*) (. [0-9]+)? ([eE] [+-]? [0-9]+)? */
static bool is_number(const char *p, const char *end) {
  if (p < end && *p == '-') p++;
  size_t n = count_digits(p, end);
  if (n == 0 || (n > 1 && *p == '0')) return false;
  p += n;
  if (p < end && *p == '.') {
    n = count_digits(++p, end);
    if (n == 0) return false;
    p += n;
  }
  if (p < end && (*p == 'e' || *p == 'E')) {
    p++;
    if (p < end && (*p == '+' || *p == '-')) p++;
    n = count_digits(p, end);
    if (n == 0) return false;
    p += n;
  }
  return p == end;
}

/* Whether a well-formed number surely exceeds a double: its first digit that is not 0 stands above
 * 10^308. What lies between the largest double and 10^309 is left to the check after conversion. */
static bool is_beyond_double(const char *p, const char *end) {
  long before_point = 0, place = 0, exponent = 0;
  bool point = false, leading = false, negative = false;
  if (*p == '-') p++;
  for (; p < end && *p != 'e' && *p != 'E'; p++) {
    if (*p == '.') {
      point = true;
      continue;
    }
    leading = leading || *p != '0';
    if (!point && leading) before_point++;
    if (point && !leading) place--;
  }
  if (!leading) return false;
  if (p < end) p++;
  if (p < end && (*p == '+' || *p == '-')) negative = *p++ == '-';
  for (; p < end; p++)
    if (exponent < 1000000) exponent = exponent * 10 + (*p - '0');
  long first = before_point > 0 ? before_point - 1 : place - 1;
  return first + (negative ? -exponent : exponent) > DOUBLE_MAX_EXPONENT;
}

static void scan_number(scanner *s) {
  const char *from = s->at;
  while (s->at < s->end && (is_number_part(*s->at) || is_letter(*s->at))) s->at++;
  size_t n = (size_t)(s->at - from);
  int shown = n > SHOWN ? SHOWN : (int)n;
  const char *more = n > SHOWN ? "..." : "";
  if (!is_number(from, s->at))
    fault(s, ERROR_JSON_NUMBER, from,
          text_format(s->arena, "malformed number %.*s%s", shown, from, more));
  else if (n > NUMBER_CHARACTERS)
    fault(s, ERROR_JSON_NUMBER, from,
          text_format(s->arena, "a number of %zu characters; at most %d are read", n,
                      NUMBER_CHARACTERS));
  else if (is_beyond_double(from, s->at))
    fault(s, ERROR_JSON_NUMBER, from,
          text_format(s->arena, "must be a finite number, found %.*s", shown, from));
}

static bool is_word(const char *from, const char *to, const char *word) {
  size_t n = strlen(word);
  return (size_t)(to - from) == n && memcmp(from, word, n) == 0;
}

static void scan_word(scanner *s, json_value *v) {
  const char *from = s->at;
  while (s->at < s->end && (is_letter(*s->at) || is_digit(*s->at))) s->at++;
  if (is_word(from, s->at, "true") || is_word(from, s->at, "false")) {
    v->kind = JSON_BOOL;
    v->boolean = *from == 't';
  } else if (is_word(from, s->at, "NaN") || is_word(from, s->at, "Infinity")) {
    fault(s, ERROR_JSON_NUMBER, from,
          text_format(s->arena, "must be a finite number, found %.*s", (int)(s->at - from), from));
  } else if (!is_word(from, s->at, "null")) {
    int n = s->at - from > SHOWN ? SHOWN : (int)(s->at - from);
    fault(s, ERROR_JSON_SYNTAX, from,
          text_format(
              s->arena,
              "expected a value, found %.*s; text stands in double quotes, and the words are true, "
              "false, null",
              n, from));
  }
}

/* ---- values ---- */

static json_value *scan_value(scanner *s, json_value *parent);

static bool starts_value(char c) {
  return c == '"' || c == '{' || c == '[' || is_letter(c) || is_number_part(c);
}

/* Behind a child: whether another follows. Passes over a missing or a needless comma, reporting it.
 */
static bool another_follows(scanner *s, char close) {
  const char *close_name = close == '}' ? "a comma or }" : "a comma or ]";
  const char *behind = s->at;
  int line = s->line;
  const char *line_start = s->line_start;
  skip_space(s);
  char c = s->at < s->end ? *s->at : '\0';
  if (c == ',') {
    const char *comma = s->at++;
    int comma_line = s->line;
    const char *comma_start = s->line_start;
    skip_space(s);
    if (s->at >= s->end || *s->at != close) return true;
    diag_place place = {
        .file = s->file, .line = comma_line, .column = (int)(comma - comma_start) + 1};
    diag_add(s->diags, DIAG_ERROR, ERROR_JSON_SYNTAX, place, "a comma before the closing %c",
             close);
    return false;
  }
  if (c == close) return false;
  if (c == '"' || (close == ']' && starts_value(c))) {
    diag_place place = {.file = s->file, .line = line, .column = (int)(behind - line_start) + 1};
    diag_add(s->diags, DIAG_ERROR, ERROR_JSON_SYNTAX, place, "a comma is missing");
    return true;
  }
  stop_unexpected(s, close_name);
  return false;
}

/* `"key" :` in front of a value; sets the key of the child later. */
static bool scan_key(scanner *s, const char **from, const char **to) {
  skip_space(s);
  if (s->at >= s->end || *s->at != '"') {
    stop_unexpected(s, "a key in double quotes");
    return false;
  }
  if (!scan_string(s, from, to)) return false;
  skip_space(s);
  if (s->at >= s->end || *s->at != ':') {
    stop_unexpected(s, "a colon behind the key");
    return false;
  }
  s->at++;
  return true;
}

static json_value *scan_member(scanner *s, json_value *object) {
  const char *from, *to;
  skip_space(s);
  int line = s->line, column = column_of(s, s->at);
  if (!scan_key(s, &from, &to)) return NULL;
  const char *key = text_copyn(s->arena, from, (size_t)(to - from));
  json_value *v = scan_value(s, object);
  if (!v) return NULL;
  v->key = key;
  v->key_line = line;
  v->key_column = column;
  return v;
}

/* At the opening bracket. */
static void scan_children(scanner *s, json_value *parent) {
  char close = parent->kind == JSON_OBJECT ? '}' : ']';
  json_value *last = NULL;
  if (++s->depth > JSON_MAX_DEPTH) {
    stop(s, ERROR_JSON_LIMIT, s->at,
         text_format(s->arena, "values may be nested %d deep at most", JSON_MAX_DEPTH));
    return;
  }
  s->at++;
  skip_space(s);
  bool more = s->at >= s->end || *s->at != close;
  while (more) {
    json_value *child = close == '}' ? scan_member(s, parent) : scan_value(s, parent);
    if (!child) return;
    child->index = parent->count++;
    if (last)
      last->next = child;
    else
      parent->first = child;
    last = child;
    if (s->stopped) return;
    more = another_follows(s, close);
    if (s->stopped) return;
  }
  s->at++;
  s->depth--;
}

/* NULL when there is no value. A value that stopped the scanner inside is still returned. */
static json_value *scan_value(scanner *s, json_value *parent) {
  skip_space(s);
  char c = s->at < s->end ? *s->at : '\0';
  if (!starts_value(c)) {
    stop_unexpected(s, "a value");
    return NULL;
  }
  if (++s->values > JSON_MAX_VALUES) {
    stop(s, ERROR_JSON_LIMIT, s->at,
         text_format(s->arena, "at most %d values are read", JSON_MAX_VALUES));
    return NULL;
  }
  json_value *v = arena_alloc(s->arena, sizeof *v);
  *v = (json_value){.kind = JSON_NULL,
                    .line = s->line,
                    .column = column_of(s, s->at),
                    .file = s->file,
                    .parent = parent};
  if (c == '{' || c == '[') {
    v->kind = c == '{' ? JSON_OBJECT : JSON_ARRAY;
    scan_children(s, v);
  } else if (c == '"') {
    const char *from, *to;
    v->kind = JSON_STRING;
    (void)scan_string(s, &from, &to);
  } else if (is_letter(c)) {
    scan_word(s, v);
  } else {
    v->kind = JSON_NUMBER;
    scan_number(s);
  }
  return v;
}

/* A byte order mark, or none. */
static void scan_mark(scanner *s) {
  size_t n = (size_t)(s->end - s->at);
  if (n >= 3 && memcmp(s->at, "\xEF\xBB\xBF", 3) == 0) {
    fault(s, ERROR_JSON_ENCODING, s->at,
          "a byte order mark is refused; save the file as plain UTF-8");
    s->at += 3;
  } else if (n >= 2 && (memcmp(s->at, "\xFF\xFE", 2) == 0 || memcmp(s->at, "\xFE\xFF", 2) == 0)) {
    stop(s, ERROR_JSON_ENCODING, s->at, "the file is UTF-16; save it as plain UTF-8");
  }
}

json_value *json_scan(arena *a, diag_list *d, const char *file, const char *bytes, size_t len,
                      size_t *string_bytes) {
  scanner s = {.arena = a,
               .diags = d,
               .file = file,
               .at = bytes,
               .end = bytes + len,
               .line_start = bytes,
               .line = 1};
  *string_bytes = 0;
  if (len > JSON_MAX_BYTES) {
    stop(&s, ERROR_JSON_LIMIT, s.at, text_format(a, "must have at most %d bytes", JSON_MAX_BYTES));
    return NULL;
  }
  scan_mark(&s);
  skip_space(&s);
  if (!s.stopped && s.at == s.end) stop(&s, ERROR_JSON_SYNTAX, s.at, "the file is empty");
  if (s.stopped) return NULL;
  json_value *root = scan_value(&s, NULL);
  *string_bytes = s.string_bytes;
  if (s.stopped) return root;
  skip_space(&s);
  if (s.at < s.end)
    fault(&s, ERROR_JSON_TRAILING, s.at,
          text_format(a, "expected the end of the file, found %s", found(&s)));
  return root;
}
