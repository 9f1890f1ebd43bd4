/* The best worst margin that the budget pays for, then the least cost at it. The solver is not
 * asked to maximise the margin, which it proves badly; the distinct margins are bisected, each time
 * asking whether the pairs that reach a margin make a plan within the budget. */
#include <limits.h>
#include <stdlib.h>
#include <string.h>

#include "select/plan_inner.h"

typedef struct ladder {
  int *margin; /* rising, each once */
  int count;
  int reached;   /* the highest known to be affordable; -1 none */
  int ruled_out; /* the lowest known not to be; count: none */
  plan_least best;
} ladder;

static int by_value(const void *a, const void *b) {
  int x = *(const int *)a, y = *(const int *)b;
  return (x > y) - (x < y);
}

/* No plan can do better than the class that can do least. */
static int highest_for_all(const plan_problem *p) {
  int least = INT_MAX;
  for (int c = 0; c < p->classes; c++) {
    int most = INT_MIN;
    for (int t = 0; t < p->types; t++) {
      int margin = p->margin[plan_pair(p, c, t)];
      if (plan_fits(p, c, t) && margin > most) most = margin;
    }
    if (most < least) least = most;
  }
  return least;
}

static void list_margins(const plan_call *call, ladder *l) {
  const plan_problem *p = call->terms->p;
  size_t pairs = (size_t)p->classes * (size_t)p->types, n = 0;
  int highest = highest_for_all(p);
  *l = (ladder){.margin = arena_array(call->arena, pairs + 1, sizeof *l->margin), .reached = -1};
  for (int c = 0; c < p->classes; c++)
    for (int t = 0; t < p->types; t++) {
      int margin = p->margin[plan_pair(p, c, t)];
      if (plan_fits(p, c, t) && margin <= highest) l->margin[n++] = margin;
    }
  qsort(l->margin, n, sizeof *l->margin, by_value);
  for (size_t i = 0; i < n; i++)
    if (i == 0 || l->margin[i] > l->margin[l->count - 1]) l->margin[l->count++] = l->margin[i];
  l->ruled_out = l->count;
}

/* A plan may reach more than was asked of it. */
static void climb(ladder *l, const plan_least *found) {
  l->best = *found;
  while (l->reached + 1 < l->count && l->margin[l->reached + 1] <= found->tally.worst_margin)
    l->reached++;
}

/* Whether some plan reaches margin number `i` within the budget. *known: it is settled. */
static bool ask(const plan_call *call, ladder *l, int i, bool *known) {
  plan_case x;
  plan_least found;
  const plan_problem *p = call->terms->p;
  long long enough = p->budget_cents > 0 ? p->budget_cents : LLONG_MAX;
  const int *start = l->best.found ? l->best.type_of : call->how->start;
  plan_case_make(call->arena, call->terms, plan_rules_in_force(p), l->margin[i], &x);
  if (!plan_least_cost(call, &x, start, enough, &found)) return false;
  bool affordable = found.found && found.tally.cents <= enough;
  *known = true;
  if (affordable)
    climb(l, &found);
  else if (found.status == SOLVER_INFEASIBLE || plan_too_dear(call, &found))
    l->ruled_out = i;
  else
    *known = false;
  return true;
}

static bool bisect(const plan_call *call, ladder *l, bool *settled) {
  *settled = true;
  while (*settled && l->reached + 1 < l->ruled_out) {
    /* the lowest first: without it there is no plan at all */
    int i = l->reached < 0 ? 0 : (l->reached + l->ruled_out) / 2;
    if (!ask(call, l, i, settled)) return false;
  }
  return true;
}

static bool least_at(const plan_call *call, const ladder *l, plan_solution *out) {
  plan_case x;
  plan_least least;
  int margin = l->margin[l->reached];
  plan_case_make(call->arena, call->terms, plan_rules_in_force(call->terms->p), margin, &x);
  if (!plan_least_cost(call, &x, l->best.type_of, LLONG_MIN, &least)) return false;
  if (!least.found) {
    double bound = least.bound;
    least = l->best;
    least.status = SOLVER_LIMIT;
    least.bound = bound;
  }
  plan_take_least(call, &least, out);
  return true;
}

bool plan_solve_margin(const plan_call *call, const char *save_path, plan_solution *out) {
  ladder l;
  bool settled;
  plan_case all;
  plan_how quiet = *call->how;
  plan_call asked = *call;
  quiet.progress = NULL;
  asked.how = &quiet;
  list_margins(call, &l);
  if (!bisect(&asked, &l, &settled)) return false;
  int reached = l.reached >= 0 ? l.reached : 0;
  plan_case_make(call->arena, call->terms, plan_rules_in_force(call->terms->p), INT_MIN, &all);
  plan_shape shape = {.with_margin = true, .least_margin = l.count > 0 ? l.margin[reached] : 0};
  if (!plan_save(call, &all, &shape, save_path)) return false;
  out->status = SOLVER_INFEASIBLE;
  if (l.ruled_out > 0 && l.count > 0) out->margin_bound = l.margin[l.ruled_out - 1];
  if (l.reached >= 0 && !least_at(call, &l, out)) return false;
  if (!settled) out->status = SOLVER_LIMIT;
  return true;
}
