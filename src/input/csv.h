/* Tables of text (RFC 4180), as spreadsheets write them: a header row, then rows of cells. Read
 * besides the standard: a byte order mark, LF or CR alone as line ends, semicolons or tabs between
 * cells, blanks round a cell that is not quoted, blank rows. Not read: other encodings than UTF-8.
 */
#ifndef INPUT_CSV_H
#define INPUT_CSV_H

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

#include "base/diag.h"

enum {
  CSV_MAX_BYTES = 16 << 20,
  CSV_MAX_ROWS = 200000,
  CSV_MAX_COLUMNS = 256,
  CSV_MAX_CELL = 16 << 10
};

typedef struct csv_cell {
  const char *text; /* UTF-8; "" when empty */
  int line, column; /* in the file, from 1; column in bytes */
} csv_cell;

typedef struct csv_row {
  int number;     /* as a spreadsheet counts: from 1, the header and blank rows included */
  csv_cell *cell; /* as many as the header has */
} csv_row;

typedef struct csv_table {
  const char *file;
  uint32_t crc;   /* CRC-32 of its bytes */
  char separator; /* ',' ';' or tab: the one that the header has most of */
  size_t columns;
  const csv_cell *header;
  csv_row *rows; /* those that are not blank */
  size_t count;
} csv_table;

/* All faults are reported, with line, column and cell; NULL when there was any. A row that is
 * shorter than the header is filled up with empty cells; one that is longer is a fault. */
csv_table *csv_parse(arena *a, diag_list *d, const char *file, const char *bytes, size_t len);
csv_table *csv_load(arena *a, diag_list *d, const char *path);

/* Whether two names or descriptions are the same without case, blanks, hyphens and underscores. */
bool csv_same(const char *one, const char *other);
/* The column of that name, compared without case, blanks, hyphens and underscores; -1 when there is
 * none. */
int csv_column(const csv_table *t, const char *name);
/* A message of level `unknown` for each header that is none of `names`, an error for one that
 * stands twice. False after an error. */
bool csv_check_header(arena *a, diag_list *d, const csv_table *t, const char *const *names,
                      size_t n, diag_level unknown);
/* The cell of a row in a column; "" in a column that is not there (-1). */
const char *csv_text(const csv_row *r, int column);
/* Where a cell stands, for diag_add: path "C14 (price)". Column -1: the row, path "row 14". */
diag_place csv_place(arena *a, const csv_table *t, const csv_row *r, int column);
/* "A", "Z", "AA" for column 0, 25, 26. */
const char *csv_letters(arena *a, size_t column);
/* Reads a whole cell as a number: sign, digits, a decimal point, commas between groups of three
 * ("1,234.50"; not where cells are separated by semicolons, since there they often mark decimals),
 * a currency sign in front. False when it is none. */
bool csv_number(const csv_table *t, const char *cell, double *value);

#endif
