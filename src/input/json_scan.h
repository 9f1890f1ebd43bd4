/* The tokenizer in front of cJSON: grammar, encoding, limits and places. Only input/json.c uses it.
 */
#ifndef INPUT_JSON_SCAN_H
#define INPUT_JSON_SCAN_H

#include "input/json.h"

/* Reads `bytes` and builds the tree of its values in document order: kinds, places, keys, links and
 * booleans. Numbers and strings are still empty, and a key with escapes is still as written.
 * *string_bytes is room enough for all strings and keys, NULs included. All faults that can be told
 * apart are reported; after one that cannot be passed over, the tree ends there. NULL when there is
 * no value at all. */
json_value *json_scan(arena *a, diag_list *d, const char *file, const char *bytes, size_t len,
                      size_t *string_bytes);

#endif
