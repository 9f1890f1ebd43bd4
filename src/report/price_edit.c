#include "report/price_edit.h"

#include <stdlib.h>
#include <string.h>

#include "report/markup.h"

static const char no_date[] = "not stated";
enum { ITEM_BYTES = 4000 };

/* `cut` bytes at `at` give way to `put`. */
typedef struct edit {
  size_t at, cut;
  const char *put;
} edit;

typedef struct editor {
  arena *arena;
  const price_update *update;
  const char *bytes;
  size_t len, *line_start;
  edit *edits;
  size_t count;
  text added; /* new items, each with a comma and a line break before it */
  size_t added_count;
} editor;

bool price_edit_touches(const update_line *l) {
  return l->kind == UPDATE_CONFIRMED || l->kind == UPDATE_CHANGED || l->kind == UPDATE_NEW;
}

/* ---- places in the file ---- */

static void find_lines(editor *e) {
  size_t lines = 1;
  for (size_t i = 0; i < e->len; i++) lines += e->bytes[i] == '\n';
  e->line_start = arena_array(e->arena, lines + 1, sizeof *e->line_start);
  size_t n = 0;
  for (size_t i = 0; i < e->len; i++) {
    if (e->bytes[i] == '\n') e->line_start[++n] = i + 1;
  }
}

static size_t offset_of(const editor *e, const json_value *v) {
  return e->line_start[v->line - 1] + (size_t)v->column - 1;
}

/* Behind a string that starts at `at`. The file was parsed: it is sound. */
static size_t string_end(const editor *e, size_t at) {
  for (at++; e->bytes[at] != '"'; at++) at += e->bytes[at] == '\\';
  return at + 1;
}

static size_t value_end(const editor *e, const json_value *v) {
  size_t at = offset_of(e, v);
  if (v->kind == JSON_STRING) return string_end(e, at);
  if (v->kind != JSON_OBJECT && v->kind != JSON_ARRAY)
    return at + strcspn(e->bytes + at, ",]} \t\r\n");
  int depth = 0;
  do {
    char c = e->bytes[at];
    if (c == '"') {
      at = string_end(e, at);
      continue;
    }
    depth += (c == '{' || c == '[') - (c == '}' || c == ']');
    at++;
  } while (depth > 0);
  return at;
}

static void put_edit(editor *e, size_t at, size_t cut, const char *put) {
  e->edits[e->count++] = (edit){at, cut, put};
}

/* ---- words ---- */

static const char *quoted(editor *e, const char *words) {
  text t;
  markup_json j;
  text_init(&t, e->arena, ITEM_BYTES);
  markup_json_init(&j, &t);
  markup_json_string(&j, NULL, words);
  return t.data;
}

static const char *date_of(const editor *e, const update_line *l) {
  if (l->date) return l->date;
  return e->update->today_given ? e->update->today : no_date;
}

/* "list.csv, row 14" */
static const char *source_of(editor *e, const update_line *l) {
  const char *path = e->update->table->file, *slash = strrchr(path, '/');
  return text_format(e->arena, "%s, row %d", slash ? slash + 1 : path, l->row->number);
}

/* ---- items ---- */

/* Puts `words` in place of the value of a key, or behind `more` when the item has none. */
static void put_key(editor *e, const json_value *item, const char *key, const char *words,
                    text *more) {
  const json_value *v = json_get(item, key);
  if (v)
    put_edit(e, offset_of(e, v), value_end(e, v) - offset_of(e, v), words);
  else
    text_putf(more, ", \"%s\": %s", key, words);
}

/* An item that leaves its price to the base gets one behind its code. */
static void change_item(editor *e, const update_line *l, const json_value *item) {
  const json_value *price = json_get(item, l->by_bought ? "price_bought" : "price");
  const json_value *anchor = price ? price : json_get(item, "code");
  size_t at = offset_of(e, anchor), end = value_end(e, anchor);
  text put;
  text_init(&put, e->arena, ITEM_BYTES);
  if (!price || l->kind == UPDATE_CONFIRMED) text_putn(&put, e->bytes + at, end - at);
  if (!price) text_put(&put, ", \"price\": ");
  if (!price || l->kind == UPDATE_CHANGED) text_number(&put, l->after, PRICE_DECIMALS);
  put_key(e, item, "date", quoted(e, date_of(e, l)), &put);
  put_key(e, item, "source", quoted(e, source_of(e, l)), &put);
  put_edit(e, at, end - at, put.data);
}

static void start_added(editor *e, const update_line *l, markup_json *j) {
  text_put(&e->added, e->added_count++ ? ",\n    " : "\n    ");
  markup_json_init(j, &e->added);
  markup_json_object(j, NULL, true);
  markup_json_string(j, "code", l->code);
}

static void end_added(editor *e, const update_line *l, markup_json *j) {
  markup_json_string(j, "date", date_of(e, l));
  markup_json_string(j, "source", source_of(e, l));
  text_put(&e->added, "}"); /* without the line break of a whole text */
}

/* An item of the base, priced here. */
static void add_override(editor *e, const update_line *l) {
  const price_item *item = &e->update->book->items[l->item];
  markup_json j;
  start_added(e, l, &j);
  markup_json_string(&j, "unit", item->unit_word);
  markup_json_number(&j, l->by_bought ? "price_bought" : "price", l->after, PRICE_DECIMALS);
  end_added(e, l, &j);
}

static void add_item(editor *e, const update_line *l) {
  const price_item *x = &l->completed;
  markup_json j;
  start_added(e, l, &j);
  markup_json_string(&j, "name", x->name);
  markup_json_string(&j, "section", x->section);
  markup_json_string(&j, "unit", x->unit_word);
  markup_json_number(&j, "price", l->after, PRICE_DECIMALS);
  if (x->bought_as) markup_json_string(&j, "bought_as", x->bought_as);
  if (x->bought_quantity > 0)
    markup_json_number(&j, "bought_quantity", x->bought_quantity / x->unit_si, PRICE_DECIMALS);
  markup_json_number(&j, "waste", x->waste, PRICE_DECIMALS);
  markup_json_number(&j, "hours", x->hours * x->unit_si, PRICE_DECIMALS);
  if (x->hours_each > 0) markup_json_number(&j, "hours_each", x->hours_each, PRICE_DECIMALS);
  markup_json_string(&j, "trade", trade_names[x->trade]);
  if (x->minimum_order > 0)
    markup_json_number(&j, "minimum_order", x->minimum_order / x->unit_si, PRICE_DECIMALS);
  if (x->lead_weeks > 0) markup_json_number(&j, "lead_weeks", x->lead_weeks, PRICE_DECIMALS);
  end_added(e, l, &j);
}

static bool is_first(const price_update *u, const update_line *l) {
  for (const update_line *other = u->line; other != l; other++) {
    if (price_edit_touches(other) && text_equal(other->code, l->code)) return false;
  }
  return true;
}

static void edit_line(editor *e, const update_line *l) {
  const price_book *b = e->update->book;
  if (!price_edit_touches(l) || !is_first(e->update, l)) return;
  if (l->item == CATALOG_NONE) {
    add_item(e, l);
    return;
  }
  const json_value *item = b->items[l->item].json;
  if (item->parent != NULL && item->parent->parent == b->json)
    change_item(e, l, item);
  else
    add_override(e, l);
}

/* New items behind the last one of the file, or a list of items behind its last key. */
static void place_added(editor *e) {
  const json_value *root = e->update->book->json, *items = json_get(root, "items");
  const json_value *last = items ? items->first : root->first;
  if (e->added_count == 0) return;
  while (last->next) last = last->next;
  const char *put = items ? text_format(e->arena, ",%s", e->added.data)
                          : text_format(e->arena, ",\n  \"items\": [%s\n  ]", e->added.data);
  put_edit(e, value_end(e, last), 0, put);
}

/* ---- together ---- */

static int by_place(const void *one, const void *other) {
  const edit *a = one, *b = other;
  return (a->at > b->at) - (a->at < b->at);
}

void price_edit(arena *a, const price_update *u, const char *bytes, size_t len, text *out) {
  enum { EDITS_A_LINE = 3 };
  editor e = {.arena = a, .update = u, .bytes = bytes, .len = len};
  e.edits = arena_array(a, EDITS_A_LINE * u->count + 1, sizeof *e.edits);
  text_init(&e.added, a, JSON_MAX_BYTES);
  find_lines(&e);
  for (size_t i = 0; i < u->count; i++) edit_line(&e, &u->line[i]);
  place_added(&e);
  qsort(e.edits, e.count, sizeof *e.edits, by_place);
  size_t at = 0;
  for (size_t i = 0; i < e.count; i++) {
    text_putn(out, bytes + at, e.edits[i].at - at);
    text_put(out, e.edits[i].put);
    at = e.edits[i].at + e.edits[i].cut;
  }
  text_putn(out, bytes + at, len - at);
}
