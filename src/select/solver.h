/* A small 0-1 linear model and its solution: what GLPK is asked, in our words. Only solver_glpk.c
 * sees GLPK. */
#ifndef SELECT_SOLVER_H
#define SELECT_SOLVER_H

#include <stdbool.h>
#include <stddef.h>

#include "base/diag.h"

typedef enum row_sense { ROW_LESS, ROW_EQUAL, ROW_GREATER } row_sense;

/* Names: a letter first, then letters, digits and `_`; not `e` and a digit (CPLEX LP reads that as
 * a number); no name twice. */
typedef struct solver_row {
  const char *name;
  row_sense sense;
  double bound;
} solver_row;

typedef struct solver_column {
  const char *name;
  double cost;
  bool binary;
  double lower, upper; /* upper 0 on a binary fixes it at 0 */
} solver_column;

/* Counted from 0; each place of the matrix at most once. */
typedef struct solver_entry {
  int row, column;
  double value;
} solver_entry;

typedef struct solver_model {
  const char *name;
  solver_row *rows;
  int row_count;
  solver_column *columns;
  int column_count;
  solver_entry *entries;
  int entry_count;
} solver_model;

/* LIMIT: time ran out, or nodes, or it was stopped; the result then holds the best found, if any.
 * FAILED: a fault, in the diagnostics. */
typedef enum solver_status {
  SOLVER_OPTIMAL,
  SOLVER_INFEASIBLE,
  SOLVER_LIMIT,
  SOLVER_FAILED
} solver_status;

typedef struct solver_result {
  solver_status status;
  bool found;       /* value[] and objective are a solution */
  double objective; /* in the unit of the columns' costs */
  double bound;     /* no solution is below it; -HUGE_VAL when nothing was proved */
  int nodes;        /* of branch and bound, looked at */
  double *value;    /* column_count values, in the arena given to solver_run */
} solver_result;

/* How a model is solved; all zero is: to the end. Without `seconds` and `stop` the result is the
 * same on every run. */
typedef struct solver_how {
  double seconds;      /* 0 = no limit */
  int nodes;           /* most nodes of branch and bound; 0 = no limit */
  const int *priority; /* a column; of those that are fractional the greatest is branched on first,
                          depth first; NULL = the solver's own rule */
  const double *start; /* a solution to begin with, column_count values, whole where binary: it must
                          keep all rows, which is not checked; NULL = none */
  bool limited; /* what costs more than `limit` is not looked for: LIMIT with a bound above it
                   where all that is left does */
  bool asked;   /* and the first solution within the limit will do: LIMIT with it */
  double limit;
  bool dual; /* the first relaxation by the dual simplex: for many rows that start kept */
  const volatile int *stop; /* ends early where it turns non-zero; may be NULL */
  /* Told of each better solution (HUGE_VAL before the first) and bound, from the solver's thread;
   * must return. May be NULL. */
  void (*progress)(void *user, double found, double bound);
  void *user;
} solver_how;

/* Minimises. LIMIT when seconds, nodes or `stop` ended it. */
void solver_run_how(arena *a, diag_list *d, const solver_model *m, const solver_how *how,
                    solver_result *out);
/* The same with nothing but a limit of time. `seconds` 0 = no limit; without one the result is the
 * same on every run. */
void solver_run(arena *a, diag_list *d, const solver_model *m, double seconds, solver_result *out);
/* Writes the exact model in CPLEX LP format, whole or not at all. False and a diagnostic when that
 * fails. */
bool solver_save(arena *a, diag_list *d, const solver_model *m, const char *path);

#endif
