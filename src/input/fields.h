/* Reads objects by table: one row a key. Unknown keys, missing keys, wrong kinds and ranges are all
 * reported, with places, and reading goes on. */
#ifndef INPUT_FIELDS_H
#define INPUT_FIELDS_H

#include <stdbool.h>
#include <stddef.h>

#include "input/json.h"

typedef enum field_kind {
  FIELD_NUMBER,  /* double, stored as number x scale */
  FIELD_INTEGER, /* int */
  FIELD_BOOL,    /* bool */
  FIELD_STRING,  /* const char * */
  FIELD_CHOICE,  /* int: index in `choices` */
  FIELD_LENGTH,  /* double metres. Key `thing_m` also reads `thing_ft`, `thing_in`, `thing_mm` and
                    strings with units
                    ("9ft-6in") under any of these; two of them at once is an error */
  FIELD_VALUE,   /* const json_value *: read by the caller (object, array, mixed) */
  FIELD_IGNORE   /* allowed, not stored */
} field_kind;

enum { FIELD_REQUIRED = 1, FIELD_ABOVE_MIN = 2 /* min itself is refused */, FIELD_NULL_OK = 4 };

typedef struct field {
  const char *key;
  field_kind kind;
  unsigned flags;
  double min, max; /* numbers and lengths, in the stored unit; both 0 = any (with FIELD_ABOVE_MIN:
                      above 0); max below min = no maximum */
  double scale;    /* stored = number x scale; 0 means 1 */
  const char *const *choices; /* NULL-ended, for FIELD_CHOICE */
  size_t offset;              /* into `out` */
} field;

/* Two rows with the same offset are two names of one thing: a file may use one of them, and one
 * satisfies FIELD_REQUIRED. The key "septum" of a whole file is taken without a row (json_is reads
 * it). Fields that are absent (or null where FIELD_NULL_OK) leave `out` as it was, so fill in
 * defaults first. True when no error. */
bool fields_read(arena *a, diag_list *d, const json_value *object, const field *table, size_t rows,
                 void *out);

#endif
