/* Which coupling rules of a plan cannot hold together: every smallest set of them. */
#include <limits.h>
#include <math.h>
#include <string.h>

#include "select/plan_inner.h"

const char *const plan_rule_names[PLAN_RULES] = {
    [PLAN_RULE_TYPES] = "max_types",      [PLAN_RULE_RUN] = "min_run_m",
    [PLAN_RULE_BUDGET] = "budget",        [PLAN_RULE_FLOOR] = "floor_area_max_m2",
    [PLAN_RULE_FRAMING] = "same_framing",
};

enum { SETS = 1 << PLAN_RULES };

typedef struct search {
  const plan_call *call;
  unsigned in_force;
  unsigned kept[SETS]; /* sets of rules that some plan met so far keeps */
  int kept_count;
  plan_solution *out;
} search;

static bool within(unsigned part, unsigned whole) {
  return (part & ~whole) == 0;
}

static int size_of(unsigned set) {
  int n = 0;
  for (; set; set &= set - 1) n++;
  return n;
}

unsigned plan_rules_in_force(const plan_problem *p) {
  unsigned rules = 0;
  if (p->max_types > 0) rules |= 1u << PLAN_RULE_TYPES;
  if (p->min_run_m > 0) rules |= 1u << PLAN_RULE_RUN;
  if (p->budget_cents > 0) rules |= 1u << PLAN_RULE_BUDGET;
  if (p->floor_max_m2 > 0) rules |= 1u << PLAN_RULE_FLOOR;
  if (p->storey) rules |= 1u << PLAN_RULE_FRAMING;
  return rules;
}

/* A plan that was found shows more than was asked: all rules that it happens to keep. */
static void remember(search *s, const plan_tally *t) {
  plan_case all;
  const plan_problem *p = s->call->terms->p;
  plan_case_make(s->call->arena, s->call->terms, s->in_force, INT_MIN, &all);
  unsigned broken = plan_broken(&all, t);
  if (p->budget_cents > 0 && t->cents > p->budget_cents) broken |= 1u << PLAN_RULE_BUDGET;
  s->kept[s->kept_count++] = s->in_force & ~broken;
}

static bool known_to_hold(const search *s, unsigned set) {
  for (int i = 0; i < s->kept_count; i++)
    if (within(set, s->kept[i])) return true;
  return false;
}

static bool holds_a_conflict(const search *s, unsigned set) {
  for (int i = 0; i < s->out->conflict_count; i++)
    if (within(s->out->conflict[i], set)) return true;
  return false;
}

static bool try_set(search *s, unsigned set) {
  plan_case x;
  plan_least least;
  const plan_problem *p = s->call->terms->p;
  bool paid = set & 1u << PLAN_RULE_BUDGET;
  plan_case_make(s->call->arena, s->call->terms, set, INT_MIN, &x);
  /* without a budget any plan will do */
  long long enough = paid ? p->budget_cents : LLONG_MAX;
  if (!plan_least_cost(s->call, &x, NULL, enough, &least)) return false;
  if (least.found) remember(s, &least.tally);
  if (known_to_hold(s, set)) return true;
  bool dear = paid && plan_cents_above(least.bound, p->budget_cents);
  if (least.status == SOLVER_INFEASIBLE || dear)
    s->out->conflict[s->out->conflict_count++] = set;
  else
    s->out->conflicts_whole = false;
  return true;
}

bool plan_conflicts(const plan_call *call, plan_solution *out) {
  search s = {.call = call, .in_force = plan_rules_in_force(call->terms->p), .out = out};
  out->conflict_count = 0;
  out->conflicts_whole = true;
  for (int size = 1; size <= PLAN_RULES; size++)
    for (unsigned set = 1; set < SETS; set++) {
      if (size_of(set) != size || !within(set, s.in_force)) continue;
      if (holds_a_conflict(&s, set) || known_to_hold(&s, set)) continue;
      if (plan_over(call)) {
        out->conflicts_whole = false;
        return true;
      }
      if (!try_set(&s, set)) return false;
    }
  return true;
}
