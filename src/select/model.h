/* The 0-1 model of `pick`: one column a candidate of the frontier, one row a limit (docs/design/selection.md). */
#ifndef SELECT_MODEL_H
#define SELECT_MODEL_H

#include "search/sweep.h"
#include "select/solver.h"

/* Columns x1..xn in the order of the frontier; objective in the book's currency. */
void model_pick(arena *a, const space *s, const sweep_result *r, solver_model *out);

typedef struct pick_choice {
  solver_status status;
  candidate chosen;
  double objective;
} pick_choice;

/* Solves, verifies the answer in integers and breaks ties. `save_path` NULL = do not save. */
bool model_choose(arena *a, diag_list *d, const space *s, const sweep_result *r, double seconds, const char *save_path,
                  pick_choice *out);

#endif
