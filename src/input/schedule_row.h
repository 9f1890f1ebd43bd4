/* One row of a wall schedule: its columns and cells. For schedule.c only. */
#ifndef INPUT_SCHEDULE_ROW_H
#define INPUT_SCHEDULE_ROW_H

#include "input/csv.h"
#include "input/project.h"

/* The columns that are read; docs/formats/schedule.md has them in the same order. */
typedef enum row_column {
  COLUMN_ID,
  COLUMN_STOREY,
  COLUMN_FROM,
  COLUMN_TO,
  COLUMN_LENGTH,
  COLUMN_HEIGHT,
  COLUMN_COUNT,
  COLUMN_TARGET,
  COLUMN_METRIC,
  COLUMN_BASIS,
  COLUMN_CONFIDENCE,
  COLUMN_EVIDENCE,
  COLUMN_SCOPE,
  COLUMN_MARGIN,
  COLUMN_ADJACENCY,
  COLUMN_FIRE,
  COLUMN_LOADBEARING,
  COLUMN_FLOORS_ABOVE,
  COLUMN_NONCOMBUSTIBLE,
  COLUMN_SHEAR_SIDE,
  COLUMN_LATERAL,
  COLUMN_DEFLECTION,
  COLUMN_FASTENING_A,
  COLUMN_FASTENING_B,
  COLUMN_FASTENING_LENGTH_A,
  COLUMN_FASTENING_LENGTH_B,
  COLUMN_WET_A,
  COLUMN_WET_B,
  COLUMN_ABUSE_A,
  COLUMN_ABUSE_B,
  COLUMN_FINISH_A,
  COLUMN_FINISH_B,
  COLUMN_CEILING_A,
  COLUMN_CEILING_B,
  COLUMN_TOP,
  COLUMN_HEAD,
  COLUMN_THICKNESS_MAX,
  COLUMN_MASS_MAX,
  COLUMN_RISER,
  COLUMN_RUN,
  COLUMN_OPENING_KIND,
  COLUMN_OPENING_AREA,
  COLUMN_OPENING_STC,
  COLUMN_CORNERS,
  COLUMN_TEES,
  COLUMN_FREE_ENDS,
  COLUMN_DOORS,
  COLUMN_EXISTING_TYPE,
  COLUMN_NOTE,
  ROW_COLUMNS
} row_column;

typedef struct row_values {
  brief b; /* the project's, changed by the row */
  const char *id, *storey, *from, *to, *target, *adjacency, *fire, *confidence, *deflection;
  const char *opening_kind, *existing_type, *note;
  const char *basis_words; /* see schedule_wall.basis */
  int count, metric, basis, evidence, scope,
      floors_above; /* words as indices; scope -1 = not said */
  int noncombustible, shear_side, fastening[2], top, head;
  double margin, thickness_max_m, mass_max_kg_m2, opening_area_m2, opening_stc;
  int mark;
} row_values;

/* Adjacencies met so far: thousands of rows name the same few. */
enum { ROW_MAX_KNOWN = 64 };
typedef struct row_known {
  const char *cell;
  const target_row *row;
} row_known;

/* What the reading of a table's rows needs, made once. */
typedef struct row_reader {
  arena *arena;
  diag_list *diags;
  const catalog *catalog;
  const project *project;
  const csv_table *table;
  int column[ROW_COLUMNS];  /* of the table; -1 where it is not there */
  double unit[ROW_COLUMNS]; /* SI of one unit that the header names; 0 = none */
  const csv_row *row;       /* the one being read */
  row_known known[ROW_MAX_KNOWN];
  int known_count;
} row_reader;

/* Finds the columns; faults of the header are reported. False after an error. */
bool row_find_columns(row_reader *r);
/* Reads `row` whole; its faults are reported. False after an error. */
bool row_read(row_reader *r, const csv_row *row, row_values *out);
/* A message about the cell of the current row in a column, or about the row where the column is not
 * there. */
void row_fault(row_reader *r, row_column column, diag_level level, error_code code,
               const char *message);
/* "expected <wanted>; found "<cell>"" */
void row_expected(row_reader *r, row_column column, error_code code, const char *wanted);
/* Whether the current row has something in that column. */
bool row_gives(const row_reader *r, row_column column);
/* Reads a number at the start of `words`: digits with a point, `1/2`, `1-1/2`; *rest is what
 * follows, blanks left out. False when there is none. */
bool row_number(const csv_table *t, const char *words, double *value, const char **rest);

/* Targets and minutes of fire of a row, from its cells `target`, `fire` and `adjacency` and from
 * the project (schedule_target.c). */
void row_targets(row_reader *r, row_values *v);

#endif
