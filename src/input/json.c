#include "input/json.h"

#include <cjson/cJSON.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/checksum.h"
#include "base/file.h"
#include "input/json_scan.h"

enum { PATH_MAX_BYTES = 1000 };

/* ---- pairing the scanner's tree with cJSON's ---- */

static const char *pool_copy(char **pool, const char *s) {
  size_t n = strlen(s) + 1;
  char *copy = *pool;
  memcpy(copy, s, n);
  *pool += n;
  return copy;
}

static bool same_kind(const json_value *v, const cJSON *c) {
  switch (v->kind) {
  case JSON_NULL:
    return cJSON_IsNull(c);
  case JSON_BOOL:
    return cJSON_IsBool(c);
  case JSON_NUMBER:
    return cJSON_IsNumber(c);
  case JSON_STRING:
    return cJSON_IsString(c);
  case JSON_ARRAY:
    return cJSON_IsArray(c);
  case JSON_OBJECT:
    return cJSON_IsObject(c);
  }
  return false;
}

/* Takes over numbers and decoded text, both trees in document order. cJSON memory is held here:
 * nothing may jump, so text goes into a pool that was made before. False when the two readers
 * disagree. */
static bool pair(json_value *v, const cJSON *c, char **pool) {
  if (!same_kind(v, c)) return false;
  if (v->kind == JSON_NUMBER) v->number = c->valuedouble;
  if (v->kind == JSON_STRING) v->string = pool_copy(pool, c->valuestring);
  if (v->key && strchr(v->key, '\\')) v->key = pool_copy(pool, c->string);
  const cJSON *other = c->child;
  for (json_value *child = v->first; child; child = child->next) {
    if (!other || !pair(child, other, pool)) return false;
    other = other->next;
  }
  return other == NULL;
}

static bool read_values(arena *a, diag_list *d, json_value *root, const char *bytes, size_t len,
                        size_t string_bytes) {
  char *pool = arena_alloc(a, string_bytes);
  cJSON *tree = cJSON_ParseWithLength(bytes, len);
  if (!tree) arena_fail(a); /* the grammar was checked: what is left is memory */
  bool agreed = pair(root, tree, &pool);
  cJSON_Delete(tree);
  if (!agreed)
    diag_add(d, DIAG_ERROR, ERROR_INTERNAL, json_place(a, root),
             "two readings of the JSON text differ");
  return agreed;
}

/* ---- checks on the tree ---- */

static int by_key(const void *x, const void *y) {
  const json_value *const *a = x, *const *b = y;
  int order = strcmp((*a)->key, (*b)->key);
  return order ? order : ((*a)->index > (*b)->index) - ((*a)->index < (*b)->index);
}

/* Reports keys that stand twice in `object`; sorted, because a file may have objects of a million
 * keys. */
static void check_keys(arena *a, diag_list *d, const json_value *object) {
  size_t n = 0, before = d->errors;
  const json_value **all = arena_array(a, object->count, sizeof *all);
  const json_value **earlier = arena_array(a, object->count, sizeof *earlier);
  for (const json_value *v = object->first; v; v = v->next) all[n++] = v;
  qsort(all, n, sizeof *all, by_key);
  for (size_t i = 1; i < n; i++)
    if (text_equal(all[i]->key, all[i - 1]->key)) earlier[all[i]->index] = all[i - 1];
  for (const json_value *v = object->first; v; v = v->next) {
    if (!earlier[v->index]) continue;
    if (d->errors > before && diag_is_full(d)) return;
    diag_place place = {v->file, v->key_line, v->key_column, json_path(a, v)};
    diag_add(d, DIAG_ERROR, ERROR_JSON_DUPLICATE_KEY, place,
             "the key \"%s\" stands already in line %d", v->key, earlier[v->index]->key_line);
  }
}

/* Duplicate keys, and numbers between the largest double and 10^309 that the scanner could not
 * tell. */
static void check_tree(arena *a, diag_list *d, const json_value *v) {
  if (v->kind == JSON_OBJECT && v->count > 1) check_keys(a, d, v);
  if (v->kind == JSON_NUMBER && !isfinite(v->number))
    diag_add(d, DIAG_ERROR, ERROR_JSON_NUMBER, json_place(a, v), "must be a finite number");
  for (const json_value *child = v->first; child; child = child->next) check_tree(a, d, child);
}

json_value *json_parse(arena *a, diag_list *d, const char *file, const char *bytes, size_t len) {
  size_t before = d->errors, string_bytes;
  json_value *root = json_scan(a, d, file, bytes, len, &string_bytes);
  if (root && d->errors == before) read_values(a, d, root, bytes, len, string_bytes);
  if (root) check_tree(a, d, root);
  if (root) root->crc = checksum_crc32(bytes, len);
  return d->errors == before ? root : NULL;
}

json_value *json_load(arena *a, diag_list *d, const char *path) {
  size_t len;
  const char *bytes = file_read(a, d, path, JSON_MAX_BYTES, &len);
  return bytes ? json_parse(a, d, text_copy(a, path), bytes, len) : NULL;
}

/* ---- looking around ---- */

const json_value *json_get(const json_value *object, const char *key) {
  for (const json_value *v = object->kind == JSON_OBJECT ? object->first : NULL; v; v = v->next)
    if (text_equal(v->key, key)) return v;
  return NULL;
}

static bool is_plain_key(const char *key) {
  for (const char *p = key; *p; p++) {
    bool letter = (*p >= 'a' && *p <= 'z') || (*p >= 'A' && *p <= 'Z') || *p == '_';
    bool digit = *p >= '0' && *p <= '9' && p > key;
    if (!letter && !digit) return false;
  }
  return *key != '\0';
}

static void put_quoted(text *out, const char *key) {
  text_put(out, "[\"");
  for (; *key; key++) {
    if (*key == '"' || *key == '\\') text_char(out, '\\');
    text_char(out, *key);
  }
  text_put(out, "\"]");
}

static void put_path(text *out, const json_value *v) {
  if (!v->parent) {
    text_char(out, '$');
    return;
  }
  put_path(out, v->parent);
  if (!v->key)
    text_putf(out, "[%zu]", v->index);
  else if (is_plain_key(v->key))
    text_putf(out, ".%s", v->key);
  else
    put_quoted(out, v->key);
}

const char *json_path(arena *a, const json_value *v) {
  text t;
  text_init(&t, a, PATH_MAX_BYTES);
  put_path(&t, v);
  return t.data;
}

diag_place json_place(arena *a, const json_value *v) {
  return (diag_place){v->file, v->line, v->column, json_path(a, v)};
}

const char *json_kind_name(json_kind kind) {
  static const char *const names[] = {"null",     "true or false", "a number",
                                      "a string", "an array",      "an object"};
  return names[kind];
}

bool json_is(arena *a, diag_list *d, const json_value *root, const char *kind) {
  const json_value *mark = json_get(root, "septum");
  const char *wanted = text_format(a, "%s/1", kind);
  if (mark && mark->kind == JSON_STRING && text_equal(mark->string, wanted)) return true;
  if (root->kind != JSON_OBJECT)
    diag_add(d, DIAG_ERROR, ERROR_FILE_KIND, json_place(a, root),
             "expected an object with \"septum\": \"%s\", found %s", wanted,
             json_kind_name(root->kind));
  else if (!mark)
    diag_add(d, DIAG_ERROR, ERROR_FILE_KIND, json_place(a, root),
             "expected \"septum\": \"%s\", found no such key", wanted);
  else if (mark->kind != JSON_STRING)
    diag_add(d, DIAG_ERROR, ERROR_FILE_KIND, json_place(a, mark), "expected \"%s\", found %s",
             wanted, json_kind_name(mark->kind));
  else
    diag_add(d, DIAG_ERROR, ERROR_FILE_KIND, json_place(a, mark), "expected \"%s\", found \"%s\"",
             wanted, mark->string);
  return false;
}
