/* The gate to JSON: the only file pair that sees cJSON. Beyond cJSON it refuses, with place,
 * duplicate keys, numbers that are malformed or not finite, trailing text, a BOM, raw control
 * characters, bad UTF-8, `\u0000`, and sizes beyond the limits. */
#ifndef INPUT_JSON_H
#define INPUT_JSON_H

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

#include "base/diag.h"

enum { JSON_MAX_DEPTH = 64, JSON_MAX_BYTES = 64 << 20, JSON_MAX_VALUES = 4 << 20 };

typedef enum json_kind {
  JSON_NULL,
  JSON_BOOL,
  JSON_NUMBER,
  JSON_STRING,
  JSON_ARRAY,
  JSON_OBJECT
} json_kind;

typedef struct json_value json_value;
struct json_value {
  json_kind kind;
  int line, column;         /* where the value starts, from 1 */
  int key_line, key_column; /* where its key starts; 0 without one */
  uint32_t crc;             /* of the outermost value: CRC-32 of the bytes it was read from */
  const char *file;
  const char *key; /* in an object, else NULL */
  size_t index;    /* position in its parent */
  size_t count;    /* children */
  json_value *parent, *first, *next;
  bool boolean;
  double number;
  const char *string; /* UTF-8, without NUL inside */
};

/* Parses `bytes`. All faults that can be told apart are reported; NULL when there was any error.
 * `file` names the source. */
json_value *json_parse(arena *a, diag_list *d, const char *file, const char *bytes, size_t len);
json_value *json_load(arena *a, diag_list *d, const char *path);
/* The child of an object by exact key, or NULL. */
const json_value *json_get(const json_value *object, const char *key);
/* `$.boards[3].mass_kg_m2` */
const char *json_path(arena *a, const json_value *v);
/* The place of the value, for diag_add. */
diag_place json_place(arena *a, const json_value *v);
/* The kind in words: "a number", "an object"... */
const char *json_kind_name(json_kind kind);
/* Checks that `root` is an object with "septum": "<kind>/1"; reports and returns false otherwise.
 */
bool json_is(arena *a, diag_list *d, const json_value *root, const char *kind);

#endif
