/* `plan`: the least cost, and why there is no plan. */
#include <limits.h>
#include <math.h>
#include <string.h>

#include "base/clock.h"
#include "select/plan_inner.h"

bool plan_save(const plan_call *call, const plan_case *x, const plan_shape *shape,
               const char *path) {
  solver_model m;
  plan_columns at;
  double base;
  if (!path) return true;
  plan_model(call->arena, x, shape, &m, &at, &base);
  return solver_save(call->arena, call->diags, &m, path);
}

bool plan_cents_above(double amount, long long cents) {
  return amount * 100 > (double)cents + 0.5;
}

static long long bound_in_cents(double amount) {
  if (!isfinite(amount)) return LLONG_MIN;
  return (long long)floor(amount * 100 + 0.5);
}

static void take_plan(const plan_call *call, const plan_least *least, plan_solution *out) {
  const plan_problem *p = call->terms->p;
  out->found = true;
  memcpy(out->type_of, least->type_of, (size_t)p->classes * sizeof *out->type_of);
  out->cost_cents = plan_cost(p, out->type_of, out->buy);
  out->worst_margin = least->tally.worst_margin;
}

static bool has_room(const plan_call *call, const plan_least *least) {
  const plan_problem *p = call->terms->p;
  return p->budget_cents <= 0 || least->tally.cents <= p->budget_cents;
}

bool plan_too_dear(const plan_call *call, const plan_least *least) {
  const plan_problem *p = call->terms->p;
  if (p->budget_cents <= 0) return false;
  if (least->status == SOLVER_OPTIMAL) return least->tally.cents > p->budget_cents;
  return plan_cents_above(least->bound, p->budget_cents);
}

void plan_take_least(const plan_call *call, const plan_least *least, plan_solution *out) {
  out->status = least->status;
  out->bound_cents = bound_in_cents(least->bound);
  if (plan_too_dear(call, least)) out->status = SOLVER_INFEASIBLE;
  if (out->status == SOLVER_INFEASIBLE || !least->found || !has_room(call, least)) return;
  take_plan(call, least, out);
  if (out->status == SOLVER_OPTIMAL || out->bound_cents > out->cost_cents)
    out->bound_cents = out->cost_cents;
}

static bool solve_cost(const plan_call *call, const char *save_path, plan_solution *out) {
  plan_case x;
  plan_least least;
  plan_case_make(call->arena, call->terms, plan_rules_in_force(call->terms->p), INT_MIN, &x);
  if (!plan_save(call, &x, &(plan_shape){0}, save_path)) return false;
  if (!plan_least_cost(call, &x, call->how->start, LLONG_MIN, &least)) return false;
  plan_take_least(call, &least, out);
  return true;
}

static bool any_class_is_stuck(const plan_problem *p) {
  for (int c = 0; c < p->classes; c++) {
    bool any = false;
    for (int t = 0; t < p->types && !any; t++) any = plan_fits(p, c, t);
    if (!any) return true;
  }
  return false;
}

/* Progress speaks of the least cost only, not of the questions around it. */
static bool explain_none(const plan_call *call, plan_solution *out) {
  plan_how quiet = *call->how;
  plan_call asked = *call;
  quiet.progress = NULL;
  asked.how = &quiet;
  if (any_class_is_stuck(call->terms->p)) {
    out->conflicts_whole = true;
    return true;
  }
  return plan_conflicts(&asked, out);
}

bool plan_solve(arena *a, diag_list *d, const plan_problem *p, const plan_how *how,
                const char *save_path, plan_solution *out) {
  plan_terms terms;
  plan_terms_make(a, p, &terms);
  plan_call call = {a, d, &terms, how, clock_seconds()};
  *out = (plan_solution){.status = SOLVER_FAILED, .bound_cents = LLONG_MIN};
  out->type_of = arena_array(a, (size_t)p->classes, sizeof *out->type_of);
  out->buy = arena_array(a, (size_t)p->items + 1, sizeof *out->buy);
  bool solved =
      how->margin ? plan_solve_margin(&call, save_path, out) : solve_cost(&call, save_path, out);
  if (!solved) {
    out->status = SOLVER_FAILED;
    return false;
  }
  if (out->status != SOLVER_INFEASIBLE || how->no_conflicts) return true;
  return explain_none(&call, out);
}
