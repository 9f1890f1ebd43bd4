#include "explain/explain.h"

#include <stdlib.h>

enum { RUNNERS_SHOWN = 5, CHEAPER_SHOWN = 6, NEAREST_SHOWN = 5 };

static assessment *judge(arena *a, const space *s, const candidate *c) {
  assessment *x = arena_alloc(a, sizeof *x);
  wall w = space_wall(s, c->core, c->face_a, c->face_b);
  judge_wall(a, s->context, &w, x);
  return x;
}

static bool same_wall(const candidate *x, const candidate *y) {
  return x->core == y->core && x->face_a == y->face_a && x->face_b == y->face_b;
}

/* ---- beside the chosen wall ---- */

static void list_runners(arena *a, const space *s, const sweep_result *r, const candidate *chosen,
                         explanation *out) {
  out->runners = arena_array(a, RUNNERS_SHOWN, sizeof *out->runners);
  for (int i = 0; i < r->runner_count && out->runner_count < RUNNERS_SHOWN; i++)
    if (!same_wall(&r->runners[i], chosen))
      out->runners[out->runner_count++] = judge(a, s, &r->runners[i]);
}

typedef struct ranked {
  const candidate *wall;
  int rules;
  double shortfall;
} ranked;

static int compare_cost(const ranked *p, const ranked *q) {
  long long x = p->wall->is.cost_cents, y = q->wall->is.cost_cents;
  if (x != y) return x < y ? -1 : 1;
  /* what follows only makes the order the same on every run */
  if (p->wall->core != q->wall->core) return p->wall->core < q->wall->core ? -1 : 1;
  if (p->wall->face_a != q->wall->face_a) return p->wall->face_a < q->wall->face_a ? -1 : 1;
  return (p->wall->face_b > q->wall->face_b) - (p->wall->face_b < q->wall->face_b);
}

static int fewest_rules(const void *x, const void *y) {
  const ranked *p = x, *q = y;
  return p->rules != q->rules ? p->rules - q->rules : compare_cost(p, q);
}

static int nearest_first(const void *x, const void *y) {
  const ranked *p = x, *q = y;
  if (p->rules != q->rules) return p->rules - q->rules;
  if (p->shortfall < q->shortfall || p->shortfall > q->shortfall)
    return p->shortfall < q->shortfall ? -1 : 1;
  return compare_cost(p, q);
}

static int cheapest_first(const void *x, const void *y) {
  return compare_cost(x, y);
}

/* Of the cheaper walls those that fail the fewest rules, cheapest last: what a little more money
 * brings comes last. */
int explain_cheaper(arena *a, const space *s, const sweep_result *r, long long below_cents,
                    assessment ***out) {
  ranked *rank = arena_array(a, (size_t)r->mask_count, sizeof *rank);
  int n = 0;
  for (int i = 0; i < r->mask_count; i++) {
    const candidate *c = &r->masks[i].best;
    bool twice = r->masks[i].broken != c->broken; /* kept again under what would save it instead */
    if (twice || c->broken == 0 || c->is.cost_cents >= below_cents) continue;
    rank[n++] = (ranked){c, rules_count(c->broken), 0};
  }
  if (n > 0) qsort(rank, (size_t)n, sizeof *rank, fewest_rules);
  if (n > CHEAPER_SHOWN) n = CHEAPER_SHOWN;
  if (n > 0) qsort(rank, (size_t)n, sizeof *rank, cheapest_first);
  *out = arena_array(a, CHEAPER_SHOWN, sizeof **out);
  for (int i = 0; i < n; i++) (*out)[i] = judge(a, s, rank[i].wall);
  return n;
}

/* ---- when nothing fits ---- */

static double part(double over, double of) {
  return over > 0 && of > 0 ? over / of : 0;
}

/* How far a wall is from what it breaks, relative and summed; a rule that is kept or broken as a
 * whole counts one. */
static double shortfall_of(const brief *b, const candidate *c) {
  rule_limits l = rules_limits(b);
  double needed = b->target_count > 0 ? judge_needed(&b->targets[0], b->field_mean) : 0;
  double sum = 0;
  for (int rule = 0; rule < RULES_MAX; rule++) {
    if (!(c->broken & rule_bit(rule))) continue;
    switch (rule) {
    case RULE_TARGET:
    case RULE_CONFIDENCE:
      sum += part(-c->is.promised_hundredth * 0.01, needed);
      break;
    case RULE_THICKNESS_MAX:
      sum += part(c->is.thickness_tenth_mm - l.thickness_max, l.thickness_max);
      break;
    case RULE_THICKNESS_MIN:
      sum += part(l.thickness_min - c->is.thickness_tenth_mm, l.thickness_min);
      break;
    case RULE_MASS_MAX:
      sum += part(c->is.mass_hundredth - l.mass_max, l.mass_max);
      break;
    case RULE_MASS_MIN:
      sum += part(l.mass_min - c->is.mass_hundredth, l.mass_min);
      break;
    case RULE_COST_MAX:
      sum += part((double)(c->is.total_cents - l.total_max), (double)l.total_max);
      break;
    case RULE_FIRE:
      sum += part(l.fire_min - c->is.fire_min, l.fire_min);
      break;
    case RULE_HEIGHT:
      sum += part(l.height_mm - c->is.height_mm, l.height_mm);
      break;
    default:
      sum += 1;
      break;
    }
  }
  return sum;
}

static bool listed(const ranked *rank, int count, rule_mask broken) {
  for (int i = 0; i < count; i++)
    if (rank[i].wall->broken == broken) return true;
  return false;
}

/* The nearest wall of each set of broken rules stands in the frontier: what beats it is no further
 * away. */
static void list_nearest(arena *a, const space *s, const sweep_result *r, explanation *out) {
  ranked *rank = arena_array(a, (size_t)r->frontier_count, sizeof *rank);
  for (int i = 0; i < r->frontier_count; i++) {
    const candidate *c = &r->frontier[i];
    rank[i] = (ranked){c, rules_count(c->broken), shortfall_of(s->context->brief, c)};
  }
  if (r->frontier_count > 0) qsort(rank, (size_t)r->frontier_count, sizeof *rank, nearest_first);
  out->nearest = arena_array(a, NEAREST_SHOWN, sizeof *out->nearest);
  int taken = 0;
  for (int i = 0; i < r->frontier_count && taken < NEAREST_SHOWN; i++) {
    if (listed(rank, taken, rank[i].wall->broken)) continue;
    rank[taken++] = rank[i];
  }
  for (int i = 0; i < taken; i++) out->nearest[out->nearest_count++] = judge(a, s, rank[i].wall);
}

static void list_conflicts(arena *a, const sweep_result *r, explanation *out) {
  rule_mask *broken = arena_array(a, (size_t)r->mask_count, sizeof *broken);
  for (int i = 0; i < r->mask_count; i++) broken[i] = r->masks[i].broken;
  out->conflict_count = explain_conflicts(a, broken, r->mask_count, &out->conflicts);
}

/* ---- the whole ---- */

void explain_pick(arena *a, const space *s, const sweep_result *r, const pick_choice *p,
                  explanation *out) {
  *out = (explanation){.walls = r->walls, .frontier = r->frontier_count, .status = p->status};
  if (p->found) {
    out->chosen = judge(a, s, &p->chosen);
    list_runners(a, s, r, &p->chosen, out);
    out->cheaper_count = explain_cheaper(a, s, r, p->chosen.is.cost_cents, &out->cheaper);
    explain_prices(a, s, r, &p->chosen, out);
    explain_break_evens(a, s, r, &p->chosen, out);
  } else if (p->status == SOLVER_INFEASIBLE) {
    list_conflicts(a, r, out);
    list_nearest(a, s, r, out);
  }
}
