/* The 0-1 model of `pick`: one column a candidate of the frontier, one row a limit
 * (docs/design/selection.md). */
#ifndef SELECT_MODEL_H
#define SELECT_MODEL_H

#include "search/sweep.h"
#include "select/solver.h"

/* Columns x1..xn in the order of the frontier; objective in the book's currency, total and floor
 * value. A frontier without walls becomes one column that may not be taken. */
void model_pick(arena *a, const space *s, const sweep_result *r, solver_model *out);

typedef struct pick_choice {
  solver_status status;
  bool found; /* `chosen` is a wall: OPTIMAL, or LIMIT with something found */
  candidate chosen;
  double objective; /* its cost in the book's currency */
  double bound;     /* no wall that keeps all rules costs less */
} pick_choice;

/* Solves, verifies the answer in integers and breaks ties. `seconds` 0 = no limit; `save_path` NULL
 * = do not save. False and a diagnostic when the file could not be written or the solver failed;
 * "no wall fits" is an answer. */
bool model_choose(arena *a, diag_list *d, const space *s, const sweep_result *r, double seconds,
                  const char *save_path, pick_choice *out);

#endif
