#include "select/plan_guess.h"

#include <limits.h>
#include <math.h>
#include <string.h>

enum { PASSES = 12 };
/* more than any project costs */
static const double currency_per_excess = 1e9, currency_per_class_left = 1e15;
/* less is rounding */
static const double worthwhile = 1e-6;

void plan_guess_init(arena *a, const plan_case *x, plan_guess *out) {
  const plan_problem *p = x->terms->p;
  size_t classes = (size_t)p->classes, types = (size_t)p->types;
  *out = (plan_guess){.x = x};
  out->cost = arena_array(a, classes * types, sizeof *out->cost);
  out->trial = arena_array(a, classes, sizeof *out->trial);
  out->best = arena_array(a, classes, sizeof *out->best);
  out->open = arena_array(a, types + 1, sizeof *out->open);
  out->other = arena_array(a, types + 1, sizeof *out->other);
  out->run = arena_array(a, types, sizeof *out->run);
}

void plan_guess_prices(plan_guess *g, const double *price, double floor_price) {
  const plan_terms *s = g->x->terms;
  size_t pairs = (size_t)s->p->classes * (size_t)s->p->types;
  for (size_t k = 0; k < pairs; k++) {
    double cost = (double)s->p->cents[k] / 100 + floor_price * (double)s->floor[k];
    for (int e = s->first_pair[k]; e < s->first_pair[k + 1]; e++)
      cost += price[s->good[e]] * s->amount[e];
    g->cost[k] = g->x->open[k] ? cost : HUGE_VAL;
  }
}

bool plan_guess_offer(plan_guess *g, const int *type_of) {
  plan_tally t;
  const plan_problem *p = g->x->terms->p;
  for (int c = 0; c < p->classes; c++)
    if (type_of[c] < 0 || type_of[c] >= p->types || !g->x->open[plan_pair(p, c, type_of[c])])
      return false;
  plan_tally_make(g->x->terms, type_of, &t);
  if (plan_broken(g->x, &t) || (g->found && t.amount >= g->tally.amount)) return false;
  g->found = true;
  g->tally = t;
  memcpy(g->best, type_of, (size_t)p->classes * sizeof *type_of);
  return true;
}

/* The cheapest open type of a class; only those of `group` unless that is PLAN_NONE. */
static int cheapest(const plan_guess *g, int c, const int *open, int count, int group) {
  const plan_problem *p = g->x->terms->p;
  int best = PLAN_NONE;
  double least = HUGE_VAL;
  for (int i = 0; i < count; i++) {
    double cost = g->cost[plan_pair(p, c, open[i])];
    if (cost >= least || (group != PLAN_NONE && p->group[open[i]] != group)) continue;
    least = cost;
    best = open[i];
  }
  return best;
}

/* What the classes of a storey cost when they are framed in one group. */
static double storey_cost(const plan_guess *g, int storey, const int *open, int count, int group) {
  const plan_problem *p = g->x->terms->p;
  double sum = 0;
  for (int c = 0; c < p->classes; c++) {
    if (p->storey[c] != storey) continue;
    int t = cheapest(g, c, open, count, group);
    if (t == PLAN_NONE) return HUGE_VAL;
    sum += g->cost[plan_pair(p, c, t)];
  }
  return sum;
}

/* Both return how many classes find no open type. */
static int assign_storey(plan_guess *g, int storey, const int *open, int count) {
  const plan_problem *p = g->x->terms->p;
  int group = PLAN_NONE, left = 0;
  double least = HUGE_VAL;
  for (int k = 0; k < p->groups; k++) {
    double cost = storey_cost(g, storey, open, count, k);
    if (cost >= least) continue;
    least = cost;
    group = k;
  }
  for (int c = 0; c < p->classes; c++) {
    if (p->storey[c] != storey) continue;
    g->trial[c] = group == PLAN_NONE ? PLAN_NONE : cheapest(g, c, open, count, group);
    left += group == PLAN_NONE;
  }
  return left;
}

static int assign(plan_guess *g, const int *open, int count) {
  const plan_problem *p = g->x->terms->p;
  int left = 0;
  if (g->x->framed) {
    for (int s = 0; s < g->x->storeys; s++) left += assign_storey(g, s, open, count);
    return left;
  }
  for (int c = 0; c < p->classes; c++) {
    g->trial[c] = cheapest(g, c, open, count, PLAN_NONE);
    left += g->trial[c] == PLAN_NONE;
  }
  return left;
}

/* Where in `open` the used type stands whose run is short and shortest; PLAN_NONE when none is. */
static int shortest(plan_guess *g, const int *open, int count) {
  const plan_terms *s = g->x->terms;
  int at = PLAN_NONE;
  for (int i = 0; i < count; i++) g->run[open[i]] = 0;
  for (int c = 0; c < s->p->classes; c++) g->run[g->trial[c]] += s->run_mm[c];
  for (int i = 0; i < count; i++) {
    long long run = g->run[open[i]];
    if (run == 0 || run >= g->x->min_run_mm) continue;
    if (at == PLAN_NONE || run < g->run[open[at]]) at = i;
  }
  return at;
}

/* What giving up an open type costs: its classes take the cheapest of the others. */
static double cost_of_closing(const plan_guess *g, const int *open, int count, int type) {
  const plan_problem *p = g->x->terms->p;
  double sum = 0;
  for (int c = 0; c < p->classes; c++) {
    double least = HUGE_VAL;
    if (g->trial[c] != type) continue;
    for (int i = 0; i < count; i++)
      if (open[i] != type && (!g->x->framed || p->group[open[i]] == p->group[type]))
        least = fmin(least, g->cost[plan_pair(p, c, open[i])]);
    sum += least - g->cost[plan_pair(p, c, type)];
  }
  return sum - (double)p->setup_cents / 100;
}

/* The class that best helps a type to its run: the least cost per length that counts. Its own type
 * is left with enough, or with nothing. */
static int best_helper(const plan_guess *g, int type, long long lacks, double *cost) {
  const plan_terms *s = g->x->terms;
  const plan_problem *p = s->p;
  int best = PLAN_NONE;
  double least = HUGE_VAL;
  for (int c = 0; c < p->classes; c++) {
    int from = g->trial[c];
    double more = g->cost[plan_pair(p, c, type)] - g->cost[plan_pair(p, c, from)];
    long long after = g->run[from] - s->run_mm[c];
    if (from == type || s->run_mm[c] <= 0 || !(more < HUGE_VAL)) continue;
    if (after > 0 && after < g->x->min_run_mm) continue;
    if (g->x->framed && p->group[from] != p->group[type]) continue;
    double counts = (double)(s->run_mm[c] < lacks ? s->run_mm[c] : lacks);
    if (more / counts >= least) continue;
    least = more / counts;
    *cost = more;
    best = c;
  }
  return best;
}

/* Moves classes to a short type when that is cheaper than to close it. */
static bool fill(plan_guess *g, const int *open, int count, int type) {
  const plan_terms *s = g->x->terms;
  double close = cost_of_closing(g, open, count, type), spent = 0;
  while (g->run[type] < g->x->min_run_mm) {
    double more = 0;
    int c = best_helper(g, type, g->x->min_run_mm - g->run[type], &more);
    spent += more;
    if (c == PLAN_NONE || spent >= close) return false;
    g->run[g->trial[c]] -= s->run_mm[c];
    g->run[type] += s->run_mm[c];
    g->trial[c] = type;
  }
  return true;
}

/* Types with too little to do get more, or are closed, until none is left. */
static int assign_with_runs(plan_guess *g, int *open, int count) {
  for (;;) {
    int left = assign(g, open, count), at = PLAN_NONE;
    if (left > 0 || g->x->min_run_mm <= 0) return left;
    do {
      at = shortest(g, open, count);
    } while (at != PLAN_NONE && fill(g, open, count, open[at]));
    if (at == PLAN_NONE) return 0;
    open[at] = open[--count];
  }
}

/* What the plan with these types open costs; classes left over and excess of floor weighed in, so
 * that the search first gets rid of them. */
static double score(plan_guess *g, const int *types, int count) {
  plan_tally t;
  memcpy(g->other, types, (size_t)count * sizeof *types);
  int left = assign_with_runs(g, g->other, count);
  if (left > 0) return left * currency_per_class_left;
  (void)plan_guess_offer(g, g->trial);
  plan_tally_make(g->x->terms, g->trial, &t);
  long long excess = g->x->floor_max > 0 ? t.floor - g->x->floor_max : 0;
  return t.amount + (excess > 0 ? (double)excess * currency_per_excess : 0);
}

void plan_guess_try(plan_guess *g, const int *types, int count) {
  (void)score(g, types, count);
}

static bool stands_open(const int *open, int count, int type) {
  for (int i = 0; i < count; i++)
    if (open[i] == type) return true;
  return false;
}

/* One round of drops and swaps and, where there is room, additions. */
static bool improve(plan_guess *g, int *count, double *least, const int *from, int from_count) {
  bool better = false;
  for (int i = 0; i < *count; i++) {
    int kept = g->open[i];
    g->open[i] = g->open[*count - 1];
    double s = score(g, g->open, *count - 1);
    if (s < *least - worthwhile) {
      *least = s;
      --*count;
      better = true;
      continue;
    }
    g->open[i] = kept;
  }
  int room = g->x->max_types > 0 ? g->x->max_types : g->x->terms->p->classes;
  for (int k = 0; k < from_count; k++) {
    if (stands_open(g->open, *count, from[k])) continue;
    for (int i = 0; i <= *count && i < room; i++) {
      int kept = g->open[i], now = i == *count ? *count + 1 : *count;
      g->open[i] = from[k];
      double s = score(g, g->open, now);
      if (s < *least - worthwhile) {
        *least = s;
        *count = now;
        better = true;
        break;
      }
      g->open[i] = kept;
    }
  }
  return better;
}

/* Minimum orders and tiers make single moves worthwhile that no unit price shows. */
static void move_classes(plan_guess *g, const int *open, int count) {
  const plan_problem *p = g->x->terms->p;
  bool better = g->found;
  for (int pass = 0; better && pass < PASSES; pass++) {
    better = false;
    for (int c = 0; c < p->classes; c++)
      for (int i = 0; i < count; i++) {
        memcpy(g->trial, g->best, (size_t)p->classes * sizeof *g->trial);
        g->trial[c] = open[i];
        better = plan_guess_offer(g, g->trial) || better;
      }
  }
}

static int list_used(plan_guess *g, int *open) {
  int count = 0;
  for (int c = 0; c < g->x->terms->p->classes; c++)
    if (!stands_open(open, count, g->best[c])) open[count++] = g->best[c];
  return count;
}

static void polish_open(plan_guess *g, int count, const int *from, int from_count) {
  double least = score(g, g->open, count);
  for (int pass = 0; pass < PASSES && improve(g, &count, &least, from, from_count); pass++)
    continue;
}

void plan_guess_polish(plan_guess *g, const int *types, int count, const int *from,
                       int from_count) {
  memcpy(g->open, types, (size_t)count * sizeof *types);
  polish_open(g, count, from, from_count);
}

void plan_guess_finish(plan_guess *g, const int *from, int from_count) {
  if (!g->found) return;
  polish_open(g, list_used(g, g->open), from, from_count);
  move_classes(g, g->open, list_used(g, g->open));
}
