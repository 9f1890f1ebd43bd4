#include "input/csv.h"

#include <ctype.h>
#include <stdlib.h>
#include <string.h>

#include "base/checksum.h"
#include "base/file.h"

static const char byte_order_mark[] = "\xEF\xBB\xBF";

typedef struct scan {
  arena *arena;
  diag_list *diags;
  csv_table *table;
  const char *at, *end, *line_start;
  int line, row;   /* of the file; of the table as a spreadsheet counts */
  size_t cells;    /* of the row being read */
  csv_cell *found; /* CSV_MAX_COLUMNS of them */
  size_t room;     /* of table->rows */
  bool broken;     /* nothing sensible follows */
} scan;

/* ---- places ---- */

const char *csv_letters(arena *a, size_t column) {
  char letters[8];
  size_t at = sizeof letters;
  letters[--at] = '\0';
  for (size_t n = column + 1; n > 0 && at > 0; n = (n - 1) / 26) {
    letters[--at] = (char)('A' + (n - 1) % 26);
  }
  return text_copy(a, letters + at);
}

static diag_place cell_place(const scan *s, size_t column, int line, int byte) {
  const csv_table *t = s->table;
  const char *letters = csv_letters(s->arena, column);
  bool named = t->header != NULL && column < t->columns && t->header[column].text[0] != '\0';
  const char *path =
      named ? text_format(s->arena, "%s%d (%s)", letters, s->row, t->header[column].text)
            : text_format(s->arena, "%s%d", letters, s->row);
  return (diag_place){t->file, line, byte, path};
}

diag_place csv_place(arena *a, const csv_table *t, const csv_row *r, int column) {
  if (column < 0)
    return (diag_place){t->file, r->cell[0].line, 1, text_format(a, "row %d", r->number)};
  const csv_cell *c = &r->cell[column];
  return (diag_place){t->file, c->line, c->column,
                      text_format(a, "%s%d (%s)", csv_letters(a, (size_t)column), r->number,
                                  t->header[column].text)};
}

static int byte_column(const scan *s) {
  return (int)(s->at - s->line_start) + 1;
}

static void fault_here(scan *s, error_code code, const char *message) {
  diag_add(s->diags, DIAG_ERROR, code, cell_place(s, s->cells, s->line, byte_column(s)), "%s",
           message);
}

/* ---- characters ---- */

/* Steps over one line end, if there is one. */
static bool take_line_end(scan *s) {
  if (s->at == s->end || (*s->at != '\n' && *s->at != '\r')) return false;
  if (*s->at == '\r' && s->at + 1 < s->end && s->at[1] == '\n') s->at++;
  s->at++;
  s->line++;
  s->line_start = s->at;
  return true;
}

/* Length of the character here; a fault and 0 where it is refused. */
static size_t take_character(scan *s) {
  size_t n = text_utf8(s->at, s->end);
  unsigned char c = (unsigned char)*s->at;
  if (n > 0 && (c >= 0x20 || c == '\t') && c != 0x7F) return n;
  fault_here(s, ERROR_JSON_ENCODING,
             n == 0 ? "expected UTF-8 text; save the file as UTF-8"
                    : text_format(s->arena, "a control character (0x%02x) is refused", c));
  return 0;
}

/* ---- cells ---- */

static void put_cell(scan *s, text *t, int line, int column) {
  if (t->cut) {
    diag_add(s->diags, DIAG_ERROR, ERROR_JSON_LIMIT, cell_place(s, s->cells, line, column),
             "a cell may have at most %d bytes", CSV_MAX_CELL);
  }
  s->found[s->cells++] = (csv_cell){t->data, line, column};
}

static void skip_blanks(scan *s) {
  while (s->at < s->end && (*s->at == ' ' || (*s->at == '\t' && s->table->separator != '\t'))) {
    s->at++;
  }
}

static bool at_cell_end(const scan *s) {
  return s->at == s->end || *s->at == s->table->separator || *s->at == '\n' || *s->at == '\r';
}

/* After the opening quote. */
static void read_quoted(scan *s, text *t, int line, int column) {
  while (s->at < s->end) {
    if (*s->at == '"') {
      s->at++;
      if (s->at == s->end || *s->at != '"') return;
      text_char(t, '"');
      s->at++;
    } else if (take_line_end(s)) {
      text_char(t, '\n');
    } else {
      size_t n = take_character(s);
      text_putn(t, s->at, n);
      s->at += n ? n : 1;
    }
  }
  diag_add(s->diags, DIAG_ERROR, ERROR_CSV_SYNTAX, cell_place(s, s->cells, line, column),
           "this quoted cell is never closed");
  s->broken = true;
}

static void read_bare(scan *s, text *t) {
  while (!at_cell_end(s)) {
    size_t n = take_character(s);
    text_putn(t, s->at, n);
    s->at += n ? n : 1;
  }
  while (t->len > 0 && (t->data[t->len - 1] == ' ' || t->data[t->len - 1] == '\t')) {
    t->data[--t->len] = '\0';
  }
}

static void read_cell(scan *s) {
  text t;
  text_init(&t, s->arena, CSV_MAX_CELL);
  skip_blanks(s);
  int line = s->line, column = byte_column(s);
  if (s->at < s->end && *s->at == '"') {
    s->at++;
    read_quoted(s, &t, line, column);
    skip_blanks(s);
    if (!s->broken && !at_cell_end(s)) {
      fault_here(s, ERROR_CSV_SYNTAX, "text follows a closing quote; write a quote inside as \"\"");
      while (!at_cell_end(s)) s->at++;
    }
  } else {
    read_bare(s, &t);
  }
  put_cell(s, &t, line, column);
}

/* Cells up to the end of the line. */
static void read_cells(scan *s) {
  s->cells = 0;
  for (;;) {
    read_cell(s);
    if (s->at == s->end || *s->at != s->table->separator) break;
    if (s->cells == CSV_MAX_COLUMNS) {
      s->cells--;
      fault_here(s, ERROR_JSON_LIMIT,
                 text_format(s->arena, "a row may have at most %d cells", CSV_MAX_COLUMNS));
      s->broken = true;
      return;
    }
    s->at++;
  }
  if (!take_line_end(s) && s->at < s->end) s->broken = true;
}

static bool is_blank(const csv_cell *cell, size_t n) {
  for (size_t i = 0; i < n; i++) {
    if (cell[i].text[0] != '\0') return false;
  }
  return true;
}

/* ---- rows ---- */

static csv_cell *keep_cells(scan *s, size_t columns) {
  csv_cell *kept = arena_array(s->arena, columns, sizeof *kept);
  for (size_t i = 0; i < columns; i++) {
    csv_cell empty = {"", s->found[s->cells - 1].line, s->found[s->cells - 1].column};
    kept[i] = i < s->cells ? s->found[i] : empty;
  }
  return kept;
}

static void put_row(scan *s) {
  csv_table *t = s->table;
  if (s->cells > t->columns && !is_blank(s->found + t->columns, s->cells - t->columns)) {
    const csv_cell *c = &s->found[t->columns];
    diag_add(s->diags, DIAG_ERROR, ERROR_CSV_SYNTAX, cell_place(s, t->columns, c->line, c->column),
             "expected %zu cells as in the header, found %zu; quote cells that hold a '%c'",
             t->columns, s->cells, t->separator == '\t' ? ' ' : t->separator);
    return;
  }
  if (t->count == s->room) {
    size_t more = s->room ? 2 * s->room : 64;
    t->rows = arena_grow(s->arena, t->rows, s->room * sizeof *t->rows, more * sizeof *t->rows);
    s->room = more;
  }
  t->rows[t->count++] = (csv_row){s->row, keep_cells(s, t->columns)};
}

static void read_row(scan *s) {
  s->row++;
  read_cells(s);
  if (s->broken || is_blank(s->found, s->cells)) return;
  if (s->table->header != NULL) {
    put_row(s);
    return;
  }
  while (s->cells > 1 && s->found[s->cells - 1].text[0] == '\0') s->cells--;
  s->table->columns = s->cells;
  s->table->header = keep_cells(s, s->cells);
}

/* The separator that the first line with text has most of outside quotes; the comma when none is
 * there. */
static char find_separator(const char *at, const char *end) {
  static const char marks[] = {',', ';', '\t'};
  size_t seen[sizeof marks] = {0};
  bool quoted = false;
  while (at < end && (*at == '\n' || *at == '\r' || *at == ' ')) at++;
  for (; at < end && (quoted || (*at != '\n' && *at != '\r')); at++) {
    if (*at == '"') quoted = !quoted;
    for (size_t i = 0; i < sizeof marks; i++) seen[i] += !quoted && *at == marks[i];
  }
  size_t most = 0;
  for (size_t i = 1; i < sizeof marks; i++) {
    if (seen[i] > seen[most]) most = i;
  }
  return marks[most];
}

csv_table *csv_parse(arena *a, diag_list *d, const char *file, const char *bytes, size_t len) {
  size_t before = d->errors;
  scan s = {.arena = a, .diags = d, .at = bytes, .end = bytes + len, .line = 1};
  s.table = arena_alloc(a, sizeof *s.table);
  s.found = arena_array(a, CSV_MAX_COLUMNS, sizeof *s.found);
  s.table->file = file;
  s.table->crc = checksum_crc32(bytes, len);
  size_t mark = sizeof byte_order_mark - 1;
  if (len >= mark && memcmp(bytes, byte_order_mark, mark) == 0) s.at += mark;
  s.line_start = s.at;
  s.table->separator = find_separator(s.at, s.end);
  while (s.at < s.end && !s.broken && !diag_is_full(d)) {
    if (s.table->count == CSV_MAX_ROWS) {
      diag_add(d, DIAG_ERROR, ERROR_JSON_LIMIT, (diag_place){file, s.line, 1, NULL},
               "a table may have at most %d rows", CSV_MAX_ROWS);
      break;
    }
    read_row(&s);
  }
  if (s.table->header == NULL && d->errors == before)
    diag_add(d, DIAG_ERROR, ERROR_CSV_SYNTAX, (diag_place){file, 1, 1, NULL},
             "expected a row with the names of the columns, found nothing");
  return d->errors == before ? s.table : NULL;
}

csv_table *csv_load(arena *a, diag_list *d, const char *path) {
  size_t len = 0;
  const char *bytes = file_read(a, d, path, CSV_MAX_BYTES, &len);
  return bytes ? csv_parse(a, d, path, bytes, len) : NULL;
}

/* ---- columns ---- */

static bool is_filler(char c) {
  return c == ' ' || c == '-' || c == '_' || c == '\n';
}

bool csv_same(const char *a, const char *b) {
  for (;;) {
    while (is_filler(*a)) a++;
    while (is_filler(*b)) b++;
    if (tolower((unsigned char)*a) != tolower((unsigned char)*b)) return false;
    if (*a == '\0') return true;
    a++;
    b++;
  }
}

int csv_column(const csv_table *t, const char *name) {
  for (size_t i = 0; i < t->columns; i++) {
    if (csv_same(t->header[i].text, name)) return (int)i;
  }
  return -1;
}

bool csv_check_header(arena *a, diag_list *d, const csv_table *t, const char *const *names,
                      size_t n, diag_level unknown) {
  size_t before = d->errors;
  const csv_row header = {1, (csv_cell *)t->header};
  for (size_t i = 0; i < t->columns; i++) {
    const char *name = t->header[i].text;
    size_t known = 0;
    while (known < n && !csv_same(name, names[known])) known++;
    diag_place place = csv_place(a, t, &header, (int)i);
    if (known == n) {
      const char *near = text_nearest(name, names, n);
      diag_add(d, unknown, ERROR_CSV_COLUMN, place, "the column \"%s\" is not known here%s%s", name,
               near ? "; the nearest is " : "", near ? near : "");
    } else if (csv_column(t, name) != (int)i) {
      diag_add(d, DIAG_ERROR, ERROR_CSV_COLUMN, place, "the column \"%s\" stands twice", name);
    }
  }
  return d->errors == before;
}

const char *csv_text(const csv_row *r, int column) {
  return column < 0 ? "" : r->cell[column].text;
}

/* ---- numbers ---- */

enum { NUMBER_MAX = 40 };

/* Digits without their group commas into `out`; false when a comma stands where no group ends. */
static bool copy_digits(const char *from, bool groups, char *out) {
  size_t n = strspn(from, "0123456789,"), kept = 0;
  const char *comma = memchr(from, ',', n);
  if (comma != NULL && (!groups || comma == from || comma - from > 3)) return false;
  for (size_t i = 0; i < n; i++) {
    if (from[i] != ',') {
      out[kept++] = from[i];
      continue;
    }
    size_t group = strspn(from + i + 1, "0123456789");
    if (group != 3) return false;
  }
  size_t rest = strlen(from + n);
  memcpy(out + kept, from + n, rest + 1);
  return kept > 0 || rest > 0;
}

bool csv_number(const csv_table *t, const char *cell, double *value) {
  static const char *const signs[] = {"$", "\xE2\x82\xAC", "\xC2\xA3"}; /* dollar, euro, pound */
  char digits[NUMBER_MAX + 1];
  bool minus = *cell == '-';
  if (minus || *cell == '+') cell++;
  for (size_t i = 0; i < sizeof signs / sizeof signs[0]; i++) {
    if (!text_starts(cell, signs[i])) continue;
    cell += strlen(signs[i]);
    break;
  }
  while (*cell == ' ') cell++;
  if (strlen(cell) > NUMBER_MAX || !copy_digits(cell, t->separator != ';', digits)) return false;
  size_t whole = strspn(digits, "0123456789"), point = digits[whole] == '.';
  size_t part = point ? strspn(digits + whole + 1, "0123456789") : 0;
  if (whole + part == 0 || digits[whole + point + part] != '\0') return false;
  /* Whole numbers and powers of ten, so that the host's decimal mark does not matter. */
  double number = 0, scale = 1;
  if (whole + part <= 15) {
    for (size_t i = 0; i < whole + point + part; i++) {
      if (digits[i] == '.') continue;
      number = number * 10 + (digits[i] - '0');
      if (i > whole) scale *= 10;
    }
    *value = (minus ? -number : number) / scale;
    return true;
  }
  return false;
}
