/* The least cost of a case. A good plan is searched first; lower bounds then close whatever costs
 * more, by itself and split by the tiers that goods are bought in; what is left goes to the solver,
 * which proves it (docs/design/plan.md, "Solving"). */
#include <limits.h>
#include <math.h>
#include <string.h>

#include "select/plan_relax.h"

enum {
  FIRST_STEPS = 150,
  NEXT_STEPS = 60,
  ROUNDS = 4,
  PART_STEPS = 40,
  MOST_PARTS = 200,
  DEEPEST = 16
};
/* pairs a class that the solver settles at once */
enum { FEW_PAIRS = 2 };
static const double sure = 1e-4;

typedef struct search {
  const plan_call *call;
  const plan_case *x;
  plan_guess guess;
  plan_relax *relax;
  double limit; /* what costs more is not wanted; HUGE_VAL none */
  bool asked;
  double unsettled; /* the least bound of parts that were left; HUGE_VAL none was */
  double root;      /* bound of the whole */
  double told;      /* the least cost that progress told */
  int parts;
  int nodes;                /* the solver looked at, in all parts */
  plan_part below[DEEPEST]; /* the part at work a depth */
} search;

static bool no_way(const plan_case *x) {
  const plan_problem *p = x->terms->p;
  for (int c = 0; c < p->classes; c++) {
    bool any = false;
    for (int t = 0; t < p->types && !any; t++) any = x->open[plan_pair(p, c, t)];
    if (!any) return true;
  }
  return false;
}

static double ceiling(const search *s) {
  return s->guess.found ? fmin(s->guess.tally.amount, s->limit) : s->limit;
}

static bool has_enough(const search *s) {
  return s->asked && s->guess.found && s->guess.tally.amount <= s->limit;
}

/* Found only falls and the bound is that of the whole, whatever part is at work. */
static void tell(search *s, double found) {
  const plan_how *how = s->call->how;
  s->told = fmin(s->told, found);
  if (how->progress) how->progress(how->user, s->told, fmin(s->root, s->told));
}

static void tell_progress(search *s) {
  tell(s, s->guess.found ? s->guess.tally.amount : HUGE_VAL);
}

/* What the solver tells of a part. */
static void relay(void *user, double found, double bound) {
  search *s = user;
  (void)bound;
  if (found < s->told) tell(s, found);
}

/* ---- whether there is any plan ---- */

/* Whether type `t` can stand in for `u` wherever rules alone are asked about. */
static bool stands_for(const plan_case *x, const bool *open, int t, int u) {
  const plan_problem *p = x->terms->p;
  if (x->framed && p->group[t] != p->group[u]) return false;
  for (int c = 0; c < p->classes; c++) {
    size_t a = plan_pair(p, c, t), b = plan_pair(p, c, u);
    if (open[b] && (!open[a] || (x->floor_max > 0 && x->terms->floor[a] > x->terms->floor[b])))
      return false;
  }
  return true;
}

static bool *needed_types(arena *a, const plan_case *x) {
  const plan_problem *p = x->terms->p;
  size_t pairs = (size_t)p->classes * (size_t)p->types;
  bool *open = arena_array(a, pairs, sizeof *open);
  memcpy(open, x->open, pairs * sizeof *open);
  for (int u = 0; u < p->types; u++) {
    bool needless = false;
    for (int t = 0; t < p->types && !needless; t++)
      needless = t != u && stands_for(x, open, t, u) && (t < u || !stands_for(x, open, u, t));
    for (int c = 0; needless && c < p->classes; c++) open[plan_pair(p, c, u)] = false;
  }
  return open;
}

/* Without costs and goods, and without types that others can stand in for. */
static bool find_any(search *s, plan_least *out) {
  plan_case rules = *s->x;
  rules.open = needed_types(s->call->arena, s->x);
  plan_shape bare = {.bare = true};
  plan_call quiet_call = *s->call;
  plan_how quiet = *s->call->how;
  quiet.progress = NULL; /* its costs are none */
  quiet_call.how = &quiet;
  if (!plan_ask_solver(&quiet_call, &rules, &bare, NULL, HUGE_VAL, false, out)) return false;
  if (out->found) (void)plan_guess_offer(&s->guess, out->type_of);
  out->found = false;
  out->bound = -HUGE_VAL;
  return true;
}

/* ---- parts ---- */

static bool fits_part(const search *s, const plan_part *part) {
  const plan_problem *p = s->x->terms->p;
  plan_buy *buy = arena_array(s->call->arena, (size_t)p->items + 1, sizeof *buy);
  if (!s->guess.found) return false;
  for (int c = 0; c < p->classes; c++)
    if (!part->open[plan_pair(p, c, s->guess.best[c])]) return false;
  plan_buys(s->x->terms, s->guess.best, buy);
  for (int i = 0; i < p->items; i++)
    if (!(part->tiers[i] & 1u << (buy[i].tier + 1))) return false;
  return true;
}

static void leave(search *s, double bound) {
  s->unsettled = fmin(s->unsettled, bound);
}

static bool prove(search *s, const plan_part *part) {
  plan_case x = *s->x;
  plan_least found = {.type_of = s->guess.trial};
  plan_shape shape = {.lean = true, .tiers = part->tiers};
  x.open = part->open;
  const int *start = fits_part(s, part) ? s->guess.best : NULL;
  double limit = ceiling(s);
  if (limit < HUGE_VAL) limit += sure;
  plan_call part_call = *s->call;
  plan_how how = *s->call->how;
  if (how.nodes > 0 && s->nodes >= how.nodes) {
    leave(s, part->bound);
    return true;
  }
  if (how.nodes > 0) how.nodes -= s->nodes;
  if (how.progress) how.progress = relay;
  how.user = s;
  part_call.how = &how;
  if (!plan_ask_solver(&part_call, &x, &shape, start, limit, s->asked, &found)) return false;
  s->nodes += found.nodes;
  if (found.found) (void)plan_guess_offer(&s->guess, found.type_of);
  bool beyond = found.status == SOLVER_INFEASIBLE || found.bound > limit;
  if (found.status != SOLVER_OPTIMAL && !beyond && !has_enough(s))
    leave(s, fmax(part->bound, found.bound));
  tell_progress(s);
  return true;
}

static int preferred_tier(const search *s, int item) {
  const plan_problem *p = s->x->terms->p;
  plan_buy *buy = arena_array(s->call->arena, (size_t)p->items + 1, sizeof *buy);
  if (!s->guess.found) return 0;
  plan_buys(s->x->terms, s->guess.best, buy);
  return buy[item].tier + 1;
}

static bool settle(search *s, plan_part *part, int depth);

static bool split(search *s, const plan_part *part, int depth) {
  int item = part->wavers, first = preferred_tier(s, item);
  int tiers = s->x->terms->p->item[item].tier_count + 1;
  for (int k = 0; k < tiers; k++) {
    int tier = k == 0 ? first : k <= first ? k - 1 : k;
    if (!(part->tiers[item] & 1u << tier)) continue;
    plan_part *one = &s->below[depth];
    plan_part_copy(s->relax, part, one);
    one->tiers[item] = 1u << tier;
    if (tier > 0) one->price[item] = s->x->terms->p->item[item].tier[tier - 1].price;
    if (!settle(s, one, depth + 1)) return false;
  }
  return true;
}

static bool settle(search *s, plan_part *part, int depth) {
  if (has_enough(s)) return true;
  if (plan_over(s->call)) {
    leave(s, part->bound);
    return true;
  }
  if (depth > 0) plan_relax_part(s->relax, part, ceiling(s), PART_STEPS);
  if (part->bound > ceiling(s) + sure || has_enough(s)) return true;
  bool small = part->pairs <= FEW_PAIRS * s->x->terms->p->classes;
  if (small || part->wavers == PLAN_NONE || depth >= DEEPEST || ++s->parts > MOST_PARTS)
    return prove(s, part);
  return split(s, part, depth);
}

/* ---- the whole ---- */

static int list_types(const search *s, const plan_part *part, int *types) {
  const plan_problem *p = s->x->terms->p;
  int n = 0;
  for (int t = 0; t < p->types; t++) {
    bool any = false;
    for (int c = 0; c < p->classes && !any; c++) any = part->open[plan_pair(p, c, t)];
    if (any) types[n++] = t;
  }
  return n;
}

/* Bound and plan help each other: the better the plan, the fewer pairs are left to bound and
 * search. */
static void narrow(search *s, plan_part *whole) {
  int *types = arena_array(s->call->arena, (size_t)s->x->terms->p->types, sizeof *types);
  plan_relax_part(s->relax, whole, s->limit, FIRST_STEPS);
  for (int round = 0; round < ROUNDS; round++) {
    if (whole->bound > ceiling(s) + sure || has_enough(s) || plan_over(s->call)) break;
    int before = whole->pairs;
    plan_guess_finish(&s->guess, types, list_types(s, whole, types));
    plan_relax_part(s->relax, whole, s->limit, NEXT_STEPS);
    s->root = whole->bound;
    tell_progress(s);
    if (whole->pairs * 5 > before * 4) break;
  }
  s->root = whole->bound;
}

static void conclude(const search *s, plan_least *out) {
  out->found = s->guess.found;
  out->bound = fmin(s->unsettled, ceiling(s));
  if (s->guess.found) {
    out->tally = s->guess.tally;
    memcpy(out->type_of, s->guess.best, (size_t)s->x->terms->p->classes * sizeof *out->type_of);
  }
  bool all = s->unsettled >= HUGE_VAL;
  out->status = all && !s->asked && s->guess.found ? SOLVER_OPTIMAL : SOLVER_LIMIT;
  if (all && s->asked && !has_enough(s)) out->bound = s->limit + sure;
  if (has_enough(s)) out->bound = -HUGE_VAL;
}

static bool search_plan(search *s, const int *start, plan_least *out) {
  plan_part whole;
  plan_guess_init(s->call->arena, s->x, &s->guess);
  s->relax = plan_relax_make(s->call, s->x, &s->guess);
  plan_part_whole(s->relax, &whole);
  if (start) (void)plan_guess_offer(&s->guess, start);
  narrow(s, &whole);
  if (!s->guess.found && !(whole.bound > s->limit + sure)) {
    if (!find_any(s, out)) return false;
    if (out->status == SOLVER_INFEASIBLE) return true;
    if (s->guess.found) narrow(s, &whole);
  }
  if (!settle(s, &whole, 0)) return false;
  conclude(s, out);
  return true;
}

bool plan_least_cost(const plan_call *call, const plan_case *x, const int *start,
                     long long enough_cents, plan_least *out) {
  const plan_problem *p = x->terms->p;
  search s = {.call = call, .x = x, .unsettled = HUGE_VAL, .root = -HUGE_VAL, .told = HUGE_VAL};
  *out = (plan_least){.status = SOLVER_INFEASIBLE, .bound = -HUGE_VAL};
  out->type_of = arena_array(call->arena, (size_t)p->classes, sizeof *out->type_of);
  s.asked = enough_cents > LLONG_MIN;
  s.limit = !s.asked || enough_cents == LLONG_MAX ? HUGE_VAL : ((double)enough_cents + 0.5) / 100;
  if (no_way(x)) return true;
  if (call->how->plain)
    return plan_ask_solver(call, x, &(plan_shape){.lean = true}, NULL, s.limit, s.asked, out);
  return search_plan(&s, start, out);
}
