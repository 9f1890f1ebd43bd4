#include "input/fields.h"

#include <limits.h>
#include <math.h>
#include <string.h>

#include "base/units.h"

enum { SHOWN_DECIMALS = 6, LIST_BYTES = 1200 };
static const double longest_shown = 1e15; /* beyond, digits would only fill the line */

static const char *const length_units[] = {"m", "ft", "in", "mm"};
enum { LENGTH_UNITS = sizeof length_units / sizeof length_units[0] };

typedef struct reader {
  arena *arena;
  diag_list *diags;
  const field *table;
  size_t rows;
  const json_value **seen; /* per row: the value that was read for it */
  char *out;
} reader;

static void fault(reader *r, error_code code, const json_value *v, const char *message) {
  diag_add(r->diags, DIAG_ERROR, code, json_place(r->arena, v), "%s", message);
}

/* ---- keys ---- */

/* The unit at the end of a key (`m` in `height_m`), NULL when it has none of length. */
static const char *key_unit(const char *key) {
  const char *bar = strrchr(key, '_');
  for (int i = 0; bar && i < LENGTH_UNITS; i++)
    if (text_equal(bar + 1, length_units[i])) return length_units[i];
  return NULL;
}

/* Whether two keys differ only in their unit of length. */
static bool same_stem(const char *a, const char *b) {
  if (!key_unit(a) || !key_unit(b)) return false;
  size_t n = (size_t)(strrchr(a, '_') - a);
  return n == (size_t)(strrchr(b, '_') - b) && strncmp(a, b, n) == 0;
}

/* The row that reads `key`, `rows` when there is none. */
static size_t find_row(const reader *r, const char *key) {
  for (size_t i = 0; i < r->rows; i++)
    if (text_equal(r->table[i].key, key)) return i;
  for (size_t i = 0; i < r->rows; i++)
    if (r->table[i].kind == FIELD_LENGTH && same_stem(r->table[i].key, key)) return i;
  return r->rows;
}

/* All keys that the table takes, the spellings of lengths in other units included. */
static const char **known_keys(const reader *r, size_t *count) {
  const char **names = arena_array(r->arena, r->rows * LENGTH_UNITS, sizeof *names);
  *count = 0;
  for (size_t i = 0; i < r->rows; i++) {
    const char *key = r->table[i].key;
    bool several = r->table[i].kind == FIELD_LENGTH && key_unit(key);
    if (!several) {
      names[(*count)++] = key;
      continue;
    }
    int stem = (int)(strrchr(key, '_') - key);
    for (int u = 0; u < LENGTH_UNITS; u++)
      names[(*count)++] = text_format(r->arena, "%.*s_%s", stem, key, length_units[u]);
  }
  return names;
}

static void report_unknown(reader *r, const json_value *v) {
  size_t count;
  const char **names = known_keys(r, &count);
  const char *near = text_nearest(v->key, names, count);
  text message;
  text_init(&message, r->arena, LIST_BYTES);
  text_putf(&message, "unknown key \"%s\"", v->key);
  if (near)
    text_putf(&message, "; did you mean \"%s\"?", near);
  else
    text_put(&message, "; known here:");
  for (size_t i = 0; !near && i < r->rows; i++)
    text_putf(&message, "%s %s", i ? "," : "", r->table[i].key);
  diag_place place = {v->file, v->key_line, v->key_column, json_path(r->arena, v)};
  diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_UNKNOWN, place, "%s", message.data);
}

/* ---- values ---- */

static void store(const reader *r, const field *f, const void *value, size_t size) {
  memcpy(r->out + f->offset, value, size);
}

static void put_shown(text *out, double x) {
  if (x > longest_shown)
    text_put(out, "a number above 1e15");
  else if (x < -longest_shown)
    text_put(out, "a number below -1e15");
  else
    text_number(out, x, SHOWN_DECIMALS);
}

/* What range a row asks for, the limits divided by `per_unit` so that they read in the unit of the
 * file. */
static void put_range(text *out, const field *f, double per_unit, bool has_max) {
  bool above = (f->flags & FIELD_ABOVE_MIN) != 0;
  text_put(out, above ? "above " : has_max ? "from " : "at least ");
  put_shown(out, f->min / per_unit);
  if (!has_max) return;
  text_put(out, above ? " and at most " : " to ");
  put_shown(out, f->max / per_unit);
}

/* Whether `stored` is in the row's range; reports it in units of `per_unit` otherwise. */
static bool in_range(reader *r, const field *f, const json_value *v, double stored,
                     double per_unit) {
  bool above = (f->flags & FIELD_ABOVE_MIN) != 0;
  bool limited = f->min < 0 || f->min > 0 || f->max < 0 || f->max > 0;
  bool has_max = limited && f->max >= f->min;
  if (!limited && !above) return true;
  bool low = above ? !(stored > f->min) : stored < f->min;
  if (!low && !(has_max && stored > f->max)) return true;
  text message;
  text_init(&message, r->arena, LIST_BYTES);
  text_put(&message, "must be ");
  put_range(&message, f, per_unit, has_max);
  text_put(&message, ", found ");
  put_shown(&message, stored / per_unit);
  fault(r, ERROR_FIELD_RANGE, v, message.data);
  return false;
}

static bool is_kind(reader *r, const json_value *v, json_kind kind, const char *expected) {
  if (v->kind == kind) return true;
  fault(r, ERROR_FIELD_TYPE, v,
        text_format(r->arena, "expected %s, found %s", expected, json_kind_name(v->kind)));
  return false;
}

static void read_number(reader *r, const field *f, const json_value *v) {
  if (!is_kind(r, v, JSON_NUMBER, "a number")) return;
  double scale = f->scale < 0 || f->scale > 0 ? f->scale : 1;
  double stored = v->number * scale;
  if (in_range(r, f, v, stored, scale)) store(r, f, &stored, sizeof stored);
}

static void read_integer(reader *r, const field *f, const json_value *v) {
  if (!is_kind(r, v, JSON_NUMBER, "a whole number")) return;
  if (v->number < INT_MIN || v->number > INT_MAX || v->number < floor(v->number) ||
      v->number > floor(v->number)) {
    text message;
    text_init(&message, r->arena, LIST_BYTES);
    text_put(&message, "must be a whole number, found ");
    put_shown(&message, v->number);
    fault(r, ERROR_FIELD_RANGE, v, message.data);
    return;
  }
  int stored = (int)v->number;
  if (in_range(r, f, v, stored, 1)) store(r, f, &stored, sizeof stored);
}

static void read_choice(reader *r, const field *f, const json_value *v) {
  text words;
  text_init(&words, r->arena, LIST_BYTES);
  for (int i = 0; f->choices[i]; i++) {
    if (v->kind == JSON_STRING && text_equal(v->string, f->choices[i])) {
      store(r, f, &i, sizeof i);
      return;
    }
    text_putf(&words, "%s\"%s\"", i ? ", " : "", f->choices[i]);
  }
  if (!is_kind(r, v, JSON_STRING, text_format(r->arena, "one of %s", words.data))) return;
  fault(r, ERROR_FIELD_CHOICE, v,
        text_format(r->arena, "expected one of %s; found \"%s\"", words.data, v->string));
}

static void read_length(reader *r, const field *f, const json_value *v) {
  const char *unit = key_unit(v->key),
             *expected = "a length with its unit, such as \"16in\" or \"610mm\"";
  double per_unit = 0, metres = 0;
  if (unit) (void)units_to_metres(unit, 1, &per_unit);
  if (v->kind == JSON_NUMBER && unit) {
    (void)units_to_metres(unit, v->number, &metres);
  } else if (v->kind == JSON_STRING) {
    if (!units_parse_length(v->string, per_unit, &metres, &expected)) {
      fault(r, ERROR_FIELD_UNIT, v,
            text_format(r->arena, "expected %s; found \"%s\"", expected, v->string));
      return;
    }
  } else {
    error_code code = v->kind == JSON_NUMBER ? ERROR_FIELD_UNIT : ERROR_FIELD_TYPE;
    fault(r, code, v,
          text_format(r->arena, "expected %s, found %s",
                      unit ? "a number or a length with its unit" : expected,
                      v->kind == JSON_NUMBER ? "a bare number" : json_kind_name(v->kind)));
    return;
  }
  if (in_range(r, f, v, metres, unit ? per_unit : 1)) store(r, f, &metres, sizeof metres);
}

static void read_value(reader *r, const field *f, const json_value *v) {
  if (v->kind == JSON_NULL && (f->flags & FIELD_NULL_OK)) return;
  switch (f->kind) {
  case FIELD_NUMBER:
    read_number(r, f, v);
    break;
  case FIELD_INTEGER:
    read_integer(r, f, v);
    break;
  case FIELD_BOOL:
    if (is_kind(r, v, JSON_BOOL, "true or false")) store(r, f, &v->boolean, sizeof v->boolean);
    break;
  case FIELD_STRING:
    if (is_kind(r, v, JSON_STRING, "a string")) store(r, f, &v->string, sizeof v->string);
    break;
  case FIELD_CHOICE:
    read_choice(r, f, v);
    break;
  case FIELD_LENGTH:
    read_length(r, f, v);
    break;
  case FIELD_VALUE:
    store(r, f, &v, sizeof v);
    break;
  case FIELD_IGNORE:
    break;
  }
}

/* ---- the object ---- */

/* Whether two rows fill the same place: one thing under two names, of which a file may use one. */
static bool same_place(const field *a, const field *b) {
  return a->kind != FIELD_IGNORE && b->kind != FIELD_IGNORE && a->offset == b->offset;
}

/* The value that already fills the place of `row`, NULL when none does. */
static const json_value *filled_by(const reader *r, size_t row) {
  for (size_t i = 0; i < r->rows; i++)
    if (r->seen[i] && (i == row || same_place(&r->table[i], &r->table[row]))) return r->seen[i];
  return NULL;
}

static void read_member(reader *r, const json_value *v) {
  size_t row = find_row(r, v->key);
  if (row == r->rows) {
    /* the mark of a file's kind, which json_is reads */
    bool mark = !v->parent->parent && text_equal(v->key, "septum");
    if (!mark) report_unknown(r, v);
    return;
  }
  const json_value *other = filled_by(r, row);
  if (other) {
    fault(r, ERROR_FIELD_CONFLICT, v,
          text_format(r->arena, "says the same as \"%s\" in line %d; keep one of them", other->key,
                      other->key_line));
    return;
  }
  r->seen[row] = v;
  read_value(r, &r->table[row], v);
}

/* One message for a place that may be filled under several names. */
static void report_missing(reader *r, const json_value *object) {
  for (size_t i = 0; i < r->rows; i++) {
    if (!(r->table[i].flags & FIELD_REQUIRED) || filled_by(r, i)) continue;
    bool said = false;
    for (size_t k = 0; k < i; k++)
      said =
          said || ((r->table[k].flags & FIELD_REQUIRED) && same_place(&r->table[k], &r->table[i]));
    if (!said)
      fault(r, ERROR_FIELD_MISSING, object,
            text_format(r->arena, "the key \"%s\" is missing", r->table[i].key));
  }
}

bool fields_read(arena *a, diag_list *d, const json_value *object, const field *table, size_t rows,
                 void *out) {
  size_t before = d->errors;
  reader r = {.arena = a, .diags = d, .table = table, .rows = rows, .out = out};
  if (!is_kind(&r, object, JSON_OBJECT, "an object")) return false;
  r.seen = arena_array(a, rows, sizeof *r.seen);
  for (const json_value *v = object->first; v; v = v->next) {
    if (d->errors > before && diag_is_full(d)) return false;
    read_member(&r, v);
  }
  report_missing(&r, object);
  return d->errors == before;
}
