/* The plan: types, solves, and what they mean. */
#include "explain/plan.h"

#include <limits.h>

#include "base/clock.h"
#include "explain/plan_parts.h"

/* ---- solving ---- */

typedef struct watcher {
  const plan_order *order;
  const char *stage;
} watcher;

static void tell(void *user, double found, double bound) {
  const watcher *to = user;
  to->order->progress(to->order->user, to->stage, found, bound);
}

static bool stopped(const plan_work *w) {
  return w->order->stop && *w->order->stop;
}

/* Seconds that are left of the limit; 0 without a limit. */
static double seconds_left(const plan_work *w) {
  const double least = 1e-3; /* the solver takes 0 for no limit */
  if (w->order->seconds <= 0) return 0;
  double left = w->order->seconds - (clock_seconds() - w->began);
  return left > least ? left : least;
}

static bool out_of_time(const plan_work *w) {
  return w->order->seconds > 0 && clock_seconds() - w->began >= w->order->seconds;
}

/* `nodes`: after so many the search gives up; 0 = never. */
static bool solve(plan_work *w, const char *stage, const plan_problem *p, int nodes,
                  const char *save_path, plan_solution *out) {
  bool same_types = p->cents == w->problem.cents;
  const int *start = same_types && w->best.found ? w->best.type_of : NULL;
  watcher to = {w->order, stage};
  plan_how how = {.seconds = seconds_left(w),
                  .nodes = nodes,
                  .margin = w->x->project->aim == AIM_MARGIN,
                  .start = start,
                  .stop = w->order->stop,
                  .progress = w->order->progress ? tell : NULL,
                  .user = &to};
  return plan_solve(w->arena, w->diags, p, &how, save_path, out);
}

/* ---- further solves ---- */

static int types_in(const plan_work *w, const plan_solution *s) {
  int n = 0;
  for (int c = 0; c < w->problem.classes; c++) {
    int before = 0;
    while (before < c && s->type_of[before] != s->type_of[c]) before++;
    n += before == c;
  }
  return n;
}

static plan_point point_of(const plan_work *w, const plan_problem *p, const plan_solution *s) {
  plan_point at = {.done = true,
                   .status = s->status,
                   .found = s->found,
                   .max_types = p->max_types,
                   .bound_cents = s->bound_cents};
  if (!s->found) return at;
  at.types = types_in(w, s);
  at.cost_cents = s->cost_cents;
  at.worst_margin = s->worst_margin;
  return at;
}

/* False only when the solver failed. */
static bool solve_point(plan_work *w, const char *stage, const plan_problem *p, int nodes,
                        plan_point *out) {
  *out = (plan_point){.max_types = p->max_types};
  if (stopped(w) || out_of_time(w)) return true;
  plan_solution *s = arena_alloc(w->arena, sizeof *s);
  if (!solve(w, stage, p, nodes, NULL, s)) return false;
  *out = point_of(w, p, s);
  return true;
}

/* The point of the plan's own number of types is the plan itself. */
static bool set_curve(plan_work *w) {
  for (int i = 0; i < PLAN_CURVE; i++) {
    plan_problem p = w->problem;
    p.max_types = i + 1;
    const char *stage =
        text_format(w->arena, "at most %d type%s", p.max_types, p.max_types == 1 ? "" : "s");
    if (p.max_types == w->problem.max_types)
      w->out->curve[i] = point_of(w, &p, &w->best);
    else if (!solve_point(w, stage, &p, 0, &w->out->curve[i]))
      return false;
  }
  return true;
}

/* Whether more types would do better than this point. */
static bool improves(const plan_work *w, const plan_point *more, const plan_point *at) {
  if (w->x->project->aim == AIM_MARGIN && more->worst_margin != at->worst_margin)
    return more->worst_margin > at->worst_margin;
  return more->cost_cents < at->cost_cents;
}

static void set_stop(plan_work *w) {
  const plan_point *curve = w->out->curve, *last = &curve[PLAN_CURVE - 1];
  w->out->stops_at = 0;
  for (int i = 0; i < PLAN_CURVE; i++)
    if (curve[i].found && curve[i].status != SOLVER_OPTIMAL) return;
  if (!last->found) return;
  int n = PLAN_CURVE;
  while (n > 1 && curve[n - 2].found && !improves(w, last, &curve[n - 2])) n--;
  w->out->stops_at = n;
}

static bool set_keeping(plan_work *w) {
  for (int i = 0; i < w->out->type_count; i++) {
    plan_used *u = &w->out->type[i];
    plan_problem p;
    if (u->locked) continue;
    if (stopped(w) || out_of_time(w)) return true;
    plan_problem_without(w, u->candidate, &p);
    if (!solve_point(w, text_format(w->arena, "without %s", u->name), &p, 0, &u->without))
      return false;
  }
  return true;
}

/* Gives up one rule; false when it is not in force. */
static bool relax(plan_problem *p, plan_rule rule) {
  plan_problem was = *p;
  switch (rule) {
  case PLAN_RULE_RUN:
    p->min_run_m = 0;
    return was.min_run_m > 0;
  case PLAN_RULE_BUDGET:
    p->budget_cents = 0;
    return was.budget_cents > 0;
  case PLAN_RULE_FLOOR:
    p->floor_max_m2 = 0;
    return was.floor_max_m2 > 0;
  case PLAN_RULE_FRAMING:
    p->storey = NULL;
    return was.storey != NULL;
  case PLAN_RULE_TYPES:
  case PLAN_RULES:
    break;
  }
  return false;
}

/* The number of types is left out: the curve tells its price, and without any end to it a project
 * is a far harder puzzle. Of the others, what so many nodes of branch and bound do not settle
 * stands as the best found. */
static bool set_relaxed(plan_work *w) {
  enum { MOST_NODES = 200 };
  for (int r = 0; r < PLAN_RULES; r++) {
    plan_problem p = w->problem;
    if (!relax(&p, (plan_rule)r)) continue;
    const char *stage = text_format(w->arena, "without %s", plan_rule_names[r]);
    if (!solve_point(w, stage, &p, MOST_NODES, &w->out->relaxed[r])) return false;
  }
  return true;
}

/* ---- what no type fits ---- */

static plan_reason reason_of(plan_work *w, int of_class) {
  const type_refusal *refused = w->types.refused[of_class];
  plan_reason r = {.class_of = of_class};
  if (!refused) return r;
  const pick_choice none = {.status = SOLVER_INFEASIBLE};
  r.why = arena_alloc(w->arena, sizeof *r.why);
  explain_pick(w->arena, &refused->space, &refused->why, &none, r.why);
  return r;
}

static void set_unplanned(plan_work *w) {
  const schedule *s = w->x->schedule;
  plan_answer *out = w->out;
  out->unplanned = arena_array(w->arena, (size_t)s->class_count, sizeof *out->unplanned);
  for (int c = 0; c < s->class_count; c++)
    if (w->place_of[c] == PLAN_NONE) out->unplanned[out->unplanned_count++] = reason_of(w, c);
  for (int i = 0; i < s->count; i++) {
    if (w->place_of[s->wall[i].of_class] != PLAN_NONE) continue;
    out->unplanned_rows++;
    out->unplanned_walls += s->wall[i].count;
  }
}

/* ---- the whole ---- */

static bool has_targets(const plan_work *w) {
  for (int c = 0; c < w->problem.classes; c++)
    if (w->x->schedule->classes[w->class_of[c]].demand.target_count > 0) return true;
  return false;
}

static void note_solution(plan_work *w) {
  plan_answer *out = w->out;
  const plan_solution *s = &w->best;
  out->status = s->status;
  out->found = s->found;
  out->bound_cents = s->bound_cents;
  out->margin_bound = s->margin_bound;
  out->conflict_count = s->conflict_count;
  out->conflicts_whole = s->conflicts_whole;
  for (int i = 0; i < s->conflict_count; i++) out->conflict[i] = s->conflict[i];
  if (!s->found) return;
  out->cost_cents = s->cost_cents;
  out->worst_margin = s->worst_margin;
  out->has_margin = has_targets(w);
}

/* Further solves tell what the plan's own could not when time is up, so they are left out then. */
static bool solve_all(plan_work *w) {
  if (w->problem.classes == 0) {
    w->best = (plan_solution){.status = SOLVER_INFEASIBLE, .bound_cents = LLONG_MIN};
    note_solution(w);
    return true;
  }
  if (!solve(w, "plan", &w->problem, 0, w->order->save_model, &w->best)) return false;
  note_solution(w);
  if (w->best.found && !plan_set_rows(w)) return false;
  if (w->best.status == SOLVER_LIMIT) return true;
  if (!set_curve(w) || !set_keeping(w) || !set_relaxed(w)) return false;
  set_stop(w);
  return true;
}

bool plan_explain(arena *a, diag_list *d, const plan_context *x, const wall *mark_wall,
                  const plan_order *order, plan_answer *out) {
  plan_work *w = arena_alloc(a, sizeof *w);
  *out = (plan_answer){.project = x->project, .schedule = x->schedule};
  *w = (plan_work){.arena = a,
                   .diags = d,
                   .x = x,
                   .mark_wall = mark_wall,
                   .order = order,
                   .began = clock_seconds(),
                   .lines = arena_alloc(a, sizeof *w->lines),
                   .out = out};
  out->row = arena_array(a, (size_t)x->schedule->count, sizeof *out->row);
  out->place = arena_array(a, (size_t)x->schedule->class_count, sizeof *out->place);
  for (int i = 0; i < x->schedule->count; i++) out->row[i].type = PLAN_NONE;
  for (int c = 0; c < x->schedule->class_count; c++) out->place[c].type = PLAN_NONE;
  types_find(a, x, TYPES_AND_SECONDS, &w->types);
  out->walls = w->types.walls;
  out->rated = w->types.rated;
  plan_lock(w);
  plan_set_problem(w);
  out->candidates = w->problem.types;
  set_unplanned(w);
  if (!solve_all(w)) return false;
  plan_set_drawn(w);
  return true;
}
