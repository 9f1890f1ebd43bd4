/* The least cost of one case: what our own search finds and rules out, then the solver's proof. */
#include <limits.h>
#include <math.h>
#include <string.h>

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

static bool no_way(const plan_case *x) {
  const plan_problem *p = x->terms->p;
  for (int c = 0; c < p->classes; c++) {
    bool any = false;
    for (int t = 0; t < p->types && !any; t++) any = x->open[plan_pair(p, c, t)];
    if (!any) return true;
  }
  return false;
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

static bool take_answer(const plan_call *call, const plan_case *x, const plan_columns *at,
                        const solver_result *r, double base, plan_least *out) {
  out->status = r->status;
  out->bound = r->bound + base;
  out->found = r->found;
  if (!r->found) return true;
  take_choice(x, at, r, out->type_of);
  plan_tally_make(x->terms, out->type_of, &out->tally);
  if (plan_broken(x, &out->tally)) {
    diag_error(call->diags, ERROR_INTERNAL_SOLVER,
               "the solver's plan breaks a rule when it is checked in integers");
    return false;
  }
  if (out->status == SOLVER_OPTIMAL && out->tally.amount > r->objective + base + cent)
    out->status = SOLVER_LIMIT; /* within tolerances the solver saw another plan: not proved */
  return true;
}

static bool ask_solver(const plan_call *call, const plan_case *x, const int *start,
                       long long enough_cents, plan_least *out) {
  solver_model m;
  plan_columns at;
  double base;
  solver_result r;
  plan_model(call->arena, x, &(plan_shape){.lean = true}, &m, &at, &base);
  teller t = {call->how, base};
  solver_how how = {.seconds = plan_left(call),
                    .nodes = call->how->nodes,
                    .priority = plan_priorities(call->arena, x, &m, &at),
                    .start = start ? plan_values(call->arena, x, &m, &at, start) : NULL,
                    .dual = true,
                    .stop = call->how->stop,
                    .progress = call->how->progress ? tell : NULL,
                    .user = &t};
  if (enough_cents > LLONG_MIN) {
    how.asked = true;
    how.limit = ((double)enough_cents + 0.5) / 100 - base;
  }
  solver_run_how(call->arena, call->diags, &m, &how, &r);
  if (r.status == SOLVER_FAILED) return false;
  return take_answer(call, x, &at, &r, base, out);
}

/* A choice to begin with counts only where it keeps the case's rules. */
static bool usable(const plan_case *x, const int *start) {
  const plan_problem *p = x->terms->p;
  plan_tally t;
  if (!start) return false;
  for (int c = 0; c < p->classes; c++)
    if (start[c] < 0 || start[c] >= p->types || !x->open[plan_pair(p, c, start[c])]) return false;
  plan_tally_make(x->terms, start, &t);
  return plan_broken(x, &t) == 0;
}

bool plan_least_cost(const plan_call *call, const plan_case *x, const int *start,
                     long long enough_cents, plan_least *out) {
  const plan_problem *p = x->terms->p;
  *out = (plan_least){.status = SOLVER_INFEASIBLE, .bound = -HUGE_VAL};
  out->type_of = arena_array(call->arena, (size_t)p->classes, sizeof *out->type_of);
  if (no_way(x)) return true;
  return ask_solver(call, x, usable(x, start) ? start : NULL, enough_cents, out);
}
