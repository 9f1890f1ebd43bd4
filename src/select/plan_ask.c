/* A case as the solver is asked it, and its answer checked in integers. */
#include <math.h>

#include "base/clock.h"
#include "select/plan_inner.h"

/* The answer's cents are counted anew; the solver's objective says the same to a cent, or the proof
 * is not one of this plan. */
static const double cent = 0.01;

bool plan_over(const plan_call *call) {
  const plan_how *how = call->how;
  if (how->stop && *how->stop) return true;
  return how->seconds > 0 && clock_seconds() - call->begun >= how->seconds;
}

double plan_left(const plan_call *call) {
  if (!(call->how->seconds > 0)) return 0;
  return fmax(call->how->seconds - (clock_seconds() - call->begun), 1e-3);
}

/* What the solver tells counts from the classes' cheapest. */
typedef struct teller {
  const plan_how *how;
  double base;
} teller;

static void tell(void *user, double found, double bound) {
  const teller *t = user;
  t->how->progress(t->how->user, found + t->base, bound + t->base);
}

static void take_choice(const plan_case *x, const plan_columns *at, const solver_result *r,
                        int *type_of) {
  const plan_problem *p = x->terms->p;
  for (int c = 0; c < p->classes; c++)
    for (int t = 0; t < p->types; t++) {
      int column = at->x[plan_pair(p, c, t)];
      if (column >= 0 && r->value[column] > 0.5) type_of[c] = t;
    }
}

static bool take_answer(const plan_call *call, const plan_case *x, const plan_shape *shape,
                        const plan_columns *at, const solver_result *r, double base,
                        plan_least *out) {
  out->status = r->status;
  out->bound = r->bound + base;
  out->nodes = r->nodes;
  out->found = r->found;
  if (!r->found) return true;
  take_choice(x, at, r, out->type_of);
  plan_tally_make(x->terms, out->type_of, &out->tally);
  if (plan_broken(x, &out->tally)) {
    diag_error(call->diags, ERROR_INTERNAL_SOLVER,
               "the solver's plan breaks a rule when it is checked in integers");
    return false;
  }
  if (!shape->bare && out->status == SOLVER_OPTIMAL &&
      out->tally.amount > r->objective + base + cent)
    out->status = SOLVER_LIMIT; /* within tolerances the solver saw another plan: not proved */
  return true;
}

bool plan_ask_solver(const plan_call *call, const plan_case *x, const plan_shape *shape,
                     const int *start, double limit, bool asked, plan_least *out) {
  solver_model m;
  plan_columns at;
  double base;
  solver_result r;
  plan_model(call->arena, x, shape, &m, &at, &base);
  teller t = {call->how, base};
  solver_how how = {.seconds = plan_left(call),
                    .nodes = call->how->nodes,
                    .priority = plan_priorities(call->arena, x, &m, &at),
                    .start = start ? plan_values(call->arena, x, &m, &at, start) : NULL,
                    .dual = true,
                    .limited = limit < HUGE_VAL,
                    .asked = asked,
                    .limit = limit - base,
                    .stop = call->how->stop,
                    .progress = call->how->progress ? tell : NULL,
                    .user = &t};
  solver_run_how(call->arena, call->diags, &m, &how, &r);
  if (r.status == SOLVER_FAILED) return false;
  return take_answer(call, x, shape, &at, &r, base, out);
}
