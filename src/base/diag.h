/* Located faults: collected, never printed by the library. */
#ifndef BASE_DIAG_H
#define BASE_DIAG_H

#include <stdbool.h>
#include <stddef.h>

#include "base/arena.h"
#include "base/errors.h"
#include "base/text.h"

typedef enum diag_level { DIAG_ERROR, DIAG_WARNING, DIAG_NOTE } diag_level;

typedef struct diag_place {
  const char *file; /* NULL when the fault has no file */
  int line, column; /* from 1; 0 = unknown. Column in bytes */
  const char *path; /* JSON path or CSV cell, NULL when none */
} diag_place;

typedef struct diag {
  diag_level level;
  error_code code;
  diag_place place;
  const char *message; /* what was expected, what was found */
} diag;

typedef struct diag_list {
  arena *arena;
  diag *items;
  size_t count, cap;
  size_t errors;  /* all errors met, kept or not */
  size_t dropped; /* beyond the first 200 */
  status worst;   /* highest status of an error so far */
} diag_list;

void diag_init(diag_list *d, arena *a);
void diag_add(diag_list *d, diag_level level, error_code code, diag_place place, const char *format,
              ...) TEXT_PRINTF(5, 6);
/* An error without a place. */
void diag_error(diag_list *d, error_code code, const char *format, ...) TEXT_PRINTF(3, 4);
/* Orders what was kept from index `from` on by line and column; equal places keep their order. For
 * one file's messages. */
void diag_sort(diag_list *d, size_t from);
/* Whether the list is full: what is found from here on is counted and not kept, so that reading may
 * stop. */
bool diag_is_full(const diag_list *d);
/* One diagnostic as one line without newline: `file:line:column: error[E214] $.path: message`. */
void diag_print(text *out, const diag *item);

#endif
