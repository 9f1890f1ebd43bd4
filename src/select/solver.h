/* A small 0-1 linear model and its solution: what GLPK is asked, in our words. Only solver_glpk.c sees GLPK. */
#ifndef SELECT_SOLVER_H
#define SELECT_SOLVER_H

#include <stdbool.h>
#include <stddef.h>

#include "base/diag.h"

typedef enum row_sense { ROW_LESS, ROW_EQUAL, ROW_GREATER } row_sense;

typedef struct solver_row { const char *name; row_sense sense; double bound; } solver_row;
typedef struct solver_column {
  const char *name; double cost; bool binary; double lower, upper; /* upper 0 on a binary fixes it at 0 */
} solver_column;
typedef struct solver_entry { int row, column; double value; } solver_entry; /* from 0 */

typedef struct solver_model {
  const char *name;
  solver_row *rows; int row_count;
  solver_column *columns; int column_count;
  solver_entry *entries; int entry_count;
} solver_model;

typedef enum solver_status { SOLVER_OPTIMAL, SOLVER_INFEASIBLE, SOLVER_LIMIT, SOLVER_FAILED } solver_status;

typedef struct solver_result {
  solver_status status;
  double objective, bound;
  double *value;         /* column_count values */
} solver_result;

/* Minimises. `seconds` 0 = no limit. */
void solver_run(arena *a, diag_list *d, const solver_model *m, double seconds, solver_result *out);
/* Writes the exact model in CPLEX LP format, whole or not at all. */
bool solver_save(arena *a, diag_list *d, const solver_model *m, const char *path);

#endif
