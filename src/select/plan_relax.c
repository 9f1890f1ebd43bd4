#include "select/plan_relax.h"

#include <limits.h>
#include <math.h>
#include <string.h>

enum {
  TRY_EVERY = 8,
  PATIENCE = 10,
  THOROUGH = 100,
  MOST_NEAR = 60,
  MOST_OPEN = PLAN_MAX_TIERS * 10
};
/* The subgradient method of Held, Wolfe and Crowder (1974) with Polyak's step towards the best
 * plan; the direction keeps a part of the one before (Camerini, Fratta and Maffioli, 1975). */
static const double first_step = 1.2, least_step = 0.01, kept_direction = 0.3;
/* what is off for all goods weighs as much as this number of classes served twice: a wage moves by
 * thousands where a price moves by its tenth, and one step serves both */
static const double whole_scale = 4;
/* without a plan the step aims this share above the bound */
static const double hoped_share = 0.03;
/* an item that hides less of the gap than this is not worth parts of its own */
static const double idle_share = 0.02;
/* far above what the sums of some thousand amounts lose, far below a cent */
static const double sure = 1e-4;
/* terms as near as this are equal: what is needed may then lie anywhere between */
static const double even = 1e-6;

/* The pairs of a part, closed ones left out, a class after the other. */
typedef struct pairs {
  int *at;    /* a pair of the problem: which of these it is; PLAN_NONE */
  int *first; /* a class */
  int *pair;  /* which pair of the problem */
  int *type;
  double *cost; /* currency without goods */
  double *over; /* cost at the present prices above the class's wage */
  int count;
} pairs;

/* A type that cannot be used without buying some of an item: all its pairs take more than the
 * stock. */
typedef struct demand {
  int item, type;
} demand;

typedef struct span {
  double from, to;
} span;

struct plan_relax {
  const plan_call *call;
  const plan_case *x;
  plan_guess *guess;
  pairs in;
  double *sum, *rho,
      *run;             /* a type: of its pairs below 0; with the setup, and what its run asks; m */
  bool *active, *taken; /* a type */
  int *list, *chosen;   /* types in the part; those taken */
  int list_count, chosen_count;
  int near[MOST_NEAR];                   /* types to try in place of the chosen */
  int *helper;                           /* a type: the pair that gives it its run; PLAN_NONE */
  int *mine;                             /* pairs of one type */
  double *grad_wage, *grad_price, *need; /* and the direction's */
  double grad_floor;
  double *dir_wage, *dir_price;
  double dir_floor;
  span *assumed; /* an item: the needs that its term holds for */
  double *scale; /* an item: so that its multiplier moves like a class's */
  double floor_scale;
  demand *demand; /* by item */
  int demand_count;
  double *share, *dir_share; /* a demand */
  double *least_spend;       /* an item: currency, when any of it is bought */
  double *borne;             /* an item: sum of its shares, at most 1 */
  double *paid;              /* an item: its price, less what is borne */
  double *setup;             /* a type: with the least spends it bears */
  double *wage, *price;      /* at hand; the part holds the best */
  double floor_price;
};

static bool always_buys(const plan_case *x, int t, int i) {
  const plan_problem *p = x->terms->p;
  double enough = p->item[i].stock + x->terms->slack[i];
  for (int c = 0; c < p->classes; c++) {
    size_t k = plan_pair(p, c, t);
    if (x->open[k] && p->need[k * (size_t)p->items + (size_t)i] <= enough) return false;
  }
  return true;
}

static bool is_open(const plan_case *x, int t) {
  const plan_problem *p = x->terms->p;
  for (int c = 0; c < p->classes; c++)
    if (x->open[plan_pair(p, c, t)]) return true;
  return false;
}

static double least_spend(const plan_item *item) {
  double least = HUGE_VAL;
  for (int k = 0; k < item->tier_count; k++)
    least = fmin(least, item->tier[k].from * item->tier[k].price);
  return item->tier_count > 0 ? least : 0;
}

static void list_demands(plan_relax *r, arena *a) {
  const plan_problem *p = r->x->terms->p;
  size_t cap = 64;
  r->demand = arena_array(a, cap, sizeof *r->demand);
  for (int i = 0; i < p->items; i++) {
    r->least_spend[i] = least_spend(&p->item[i]);
    if (!(r->least_spend[i] > 0)) continue;
    for (int t = 0; t < p->types; t++) {
      if (!is_open(r->x, t) || !always_buys(r->x, t, i)) continue;
      if ((size_t)r->demand_count == cap) {
        r->demand = arena_grow(a, r->demand, cap * sizeof *r->demand, 2 * cap * sizeof *r->demand);
        cap *= 2;
      }
      r->demand[r->demand_count++] = (demand){i, t};
    }
  }
  r->share = arena_array(a, (size_t)r->demand_count + 1, sizeof *r->share);
  r->dir_share = arena_array(a, (size_t)r->demand_count + 1, sizeof *r->dir_share);
}

plan_relax *plan_relax_make(const plan_call *call, const plan_case *x, plan_guess *g) {
  const plan_problem *p = x->terms->p;
  arena *a = call->arena;
  size_t classes = (size_t)p->classes, types = (size_t)p->types, items = (size_t)p->items + 1;
  size_t pairs_room = classes * types;
  plan_relax *r = arena_alloc(a, sizeof *r);
  *r = (plan_relax){.call = call, .x = x, .guess = g};
  r->in.first = arena_array(a, classes + 1, sizeof *r->in.first);
  r->in.pair = arena_array(a, pairs_room, sizeof *r->in.pair);
  r->in.type = arena_array(a, pairs_room, sizeof *r->in.type);
  r->in.cost = arena_array(a, pairs_room, sizeof *r->in.cost);
  r->in.over = arena_array(a, pairs_room, sizeof *r->in.over);
  r->sum = arena_array(a, types, sizeof *r->sum);
  r->rho = arena_array(a, types, sizeof *r->rho);
  r->run = arena_array(a, types, sizeof *r->run);
  r->active = arena_array(a, types, sizeof *r->active);
  r->taken = arena_array(a, types, sizeof *r->taken);
  r->list = arena_array(a, types, sizeof *r->list);
  r->chosen = arena_array(a, types, sizeof *r->chosen);
  r->helper = arena_array(a, types, sizeof *r->helper);
  r->in.at = arena_array(a, pairs_room, sizeof *r->in.at);
  r->mine = arena_array(a, classes, sizeof *r->mine);
  r->grad_wage = arena_array(a, classes, sizeof *r->grad_wage);
  r->dir_wage = arena_array(a, classes, sizeof *r->dir_wage);
  r->wage = arena_array(a, classes, sizeof *r->wage);
  r->grad_price = arena_array(a, items, sizeof *r->grad_price);
  r->dir_price = arena_array(a, items, sizeof *r->dir_price);
  r->price = arena_array(a, items, sizeof *r->price);
  r->assumed = arena_array(a, items, sizeof *r->assumed);
  r->need = arena_array(a, items, sizeof *r->need);
  r->scale = arena_array(a, items, sizeof *r->scale);
  r->least_spend = arena_array(a, items, sizeof *r->least_spend);
  r->paid = arena_array(a, items, sizeof *r->paid);
  r->borne = arena_array(a, items, sizeof *r->borne);
  r->setup = arena_array(a, types, sizeof *r->setup);
  list_demands(r, a);
  for (int i = 0; i < p->items; i++)
    r->scale[i] = x->terms->most[i] > 0 ? whole_scale / x->terms->most[i] : 0;
  r->floor_scale = x->floor_max > 0 ? whole_scale / (double)x->floor_max : 0;
  return r;
}

/* ---- parts ---- */

static void part_room(plan_relax *r, plan_part *out) {
  const plan_problem *p = r->x->terms->p;
  arena *a = r->call->arena;
  out->open = arena_array(a, (size_t)p->classes * (size_t)p->types, sizeof *out->open);
  out->tiers = arena_array(a, (size_t)p->items + 1, sizeof *out->tiers);
  out->wage = arena_array(a, (size_t)p->classes, sizeof *out->wage);
  out->price = arena_array(a, (size_t)p->items + 1, sizeof *out->price);
  out->share = arena_array(a, (size_t)r->demand_count + 1, sizeof *out->share);
}

/* Goods at their lowest price: a line through the origin that no spend is below. */
void plan_part_whole(plan_relax *r, plan_part *out) {
  const plan_terms *s = r->x->terms;
  const plan_problem *p = s->p;
  *out = (plan_part){.bound = -HUGE_VAL, .wavers = PLAN_NONE};
  part_room(r, out);
  memcpy(out->open, r->x->open, (size_t)p->classes * (size_t)p->types * sizeof *out->open);
  for (int i = 0; i < p->items; i++) {
    const plan_item *item = &p->item[i];
    out->tiers[i] = (1u << (item->tier_count + 1)) - 1;
    out->price[i] = HUGE_VAL;
    for (int k = 0; k < item->tier_count; k++)
      out->price[i] = fmin(out->price[i], item->tier[k].price);
    if (s->most[i] <= item->stock) out->price[i] = 0;
  }
  plan_guess_prices(r->guess, out->price, 0);
  for (int c = 0; c < p->classes; c++) {
    double least = HUGE_VAL;
    for (int t = 0; t < p->types; t++) least = fmin(least, r->guess->cost[plan_pair(p, c, t)]);
    out->wage[c] = least + (double)p->setup_cents / 100 / p->classes;
  }
}

void plan_part_copy(plan_relax *r, const plan_part *from, plan_part *out) {
  const plan_problem *p = r->x->terms->p;
  if (!out->open) part_room(r, out);
  plan_part room = *out;
  *out = *from;
  out->open = room.open;
  out->tiers = room.tiers;
  out->wage = room.wage;
  out->price = room.price;
  out->share = room.share;
  memcpy(out->open, from->open, (size_t)p->classes * (size_t)p->types * sizeof *out->open);
  memcpy(out->tiers, from->tiers, (size_t)p->items * sizeof *out->tiers);
  memcpy(out->wage, from->wage, (size_t)p->classes * sizeof *out->wage);
  memcpy(out->price, from->price, (size_t)p->items * sizeof *out->price);
  memcpy(out->share, from->share, (size_t)r->demand_count * sizeof *out->share);
}

/* A pair that needs goods which this part does not buy is closed. */
static bool can_buy(const plan_relax *r, const plan_part *part, int pair) {
  const plan_terms *s = r->x->terms;
  for (int e = s->first_pair[pair]; e < s->first_pair[pair + 1]; e++) {
    int i = s->good[e];
    if (part->tiers[i] == 1u && s->amount[e] > s->p->item[i].stock + s->slack[i]) return false;
  }
  return true;
}

static void list_pairs(plan_relax *r, plan_part *part) {
  const plan_problem *p = r->x->terms->p;
  pairs *in = &r->in;
  memset(r->active, 0, (size_t)p->types * sizeof *r->active);
  in->count = 0;
  for (int c = 0; c < p->classes; c++) {
    in->first[c] = in->count;
    for (int t = 0; t < p->types; t++) {
      int k = (int)plan_pair(p, c, t);
      in->at[k] = PLAN_NONE;
      part->open[k] = part->open[k] && can_buy(r, part, k);
      if (!part->open[k]) continue;
      in->at[k] = in->count;
      in->pair[in->count] = k;
      in->type[in->count] = t;
      in->cost[in->count++] = (double)p->cents[k] / 100;
      r->active[t] = true;
    }
  }
  in->first[p->classes] = in->count;
  part->pairs = in->count;
  r->list_count = 0;
  for (int t = 0; t < p->types; t++)
    if (r->active[t]) r->list[r->list_count++] = t;
}

/* ---- one evaluation ---- */

/* The least of (spend - price x need) over the tiers left; *at: the needs where it is taken. Spend
 * is flat up to a tier's `from` and linear from there on, so only ends count. */
static double goods_term(const plan_relax *r, const unsigned *tiers, int i, double price,
                         span *at) {
  const plan_item *item = &r->x->terms->p->item[i];
  double most = r->x->terms->most[i], least = HUGE_VAL;
  double stock = item->stock + r->x->terms->slack[i];
  *at = (span){0, 0};
  for (int k = -1; k < item->tier_count; k++) {
    if (!(tiers[i] & 1u << (k + 1))) continue;
    double from = k < 0 ? 0 : item->tier[k].from;
    double end = k < 0 ? 0 : k + 1 < item->tier_count ? item->tier[k + 1].from : HUGE_VAL;
    for (int side = 0; side < 2; side++) {
      double need = fmin(most, stock + (side ? end : from));
      double spend = k < 0 ? 0 : item->tier[k].price * fmax(from, need - stock);
      double term = spend - price * need;
      if (term < least - even)
        *at = (span){need, need};
      else if (term <= least + even)
        *at = (span){fmin(at->from, need), fmax(at->to, need)};
      least = fmin(least, term);
    }
  }
  return least;
}

static double run_of(const plan_relax *r, int k) {
  const plan_terms *s = r->x->terms;
  return (double)s->run_mm[r->in.pair[k] / s->p->types] / PLAN_MM_PER_M;
}

/* The least cost of `lacks` m of run from `n` pairs shorter than that, at best in parts. */
static double fill_in_parts(plan_relax *r, int n, double lacks) {
  double more = 0;
  while (lacks > sure && n > 0) {
    int best = 0;
    for (int i = 1; i < n; i++)
      if (r->in.over[r->mine[i]] * run_of(r, r->mine[best]) <
          r->in.over[r->mine[best]] * run_of(r, r->mine[i]))
        best = i;
    int k = r->mine[best];
    more += r->in.over[k] * fmin(1, lacks / run_of(r, k));
    lacks -= run_of(r, k);
    r->mine[best] = r->mine[--n];
  }
  return lacks > sure ? HUGE_VAL : more;
}

/* What a type with too short a run must take on besides: one class that is long enough, or shorter
 * ones, of which the last may be a part; no less. `forced` (PLAN_NONE: none) is taken anyway.
 * *whole: the one class, where that is the least. */
static double run_short(plan_relax *r, int t, int forced, int *whole) {
  const plan_problem *p = r->x->terms->p;
  double lacks = (double)r->x->min_run_mm / PLAN_MM_PER_M - r->run[t], least = HUGE_VAL;
  int n = 0;
  *whole = PLAN_NONE;
  if (forced != PLAN_NONE && r->in.over[forced] >= 0) lacks -= run_of(r, forced);
  if (lacks <= sure) return 0;
  for (int c = 0; c < p->classes; c++) {
    int k = r->in.at[plan_pair(p, c, t)];
    if (k == PLAN_NONE || k == forced || r->in.over[k] < 0 || !(run_of(r, k) > 0)) continue;
    if (run_of(r, k) < lacks) {
      r->mine[n++] = k;
    } else if (r->in.over[k] < least) {
      least = r->in.over[k];
      *whole = k;
    }
  }
  double parts = fill_in_parts(r, n, lacks);
  if (parts >= least) return least;
  *whole = PLAN_NONE;
  return parts;
}

/* Setups with the shares of least spends, and what that leaves to be paid by quantity. */
static void bear_least_spends(plan_relax *r) {
  const plan_problem *p = r->x->terms->p;
  for (int i = 0; i < r->list_count; i++) r->setup[r->list[i]] = (double)p->setup_cents / 100;
  for (int i = 0; i < p->items; i++) r->borne[i] = 0;
  for (int d = 0; d < r->demand_count; d++) {
    const demand *of = &r->demand[d];
    if (!r->active[of->type]) r->share[d] = 0;
    r->borne[of->item] += r->share[d];
  }
  for (int d = 0; d < r->demand_count; d++) {
    const demand *of = &r->demand[d];
    if (r->borne[of->item] > 1) r->share[d] /= r->borne[of->item];
    r->setup[of->type] += r->share[d] * r->least_spend[of->item];
  }
  for (int i = 0; i < p->items; i++) {
    r->borne[i] = fmin(r->borne[i], 1);
    r->paid[i] = (1 - r->borne[i]) * r->price[i];
  }
}

static void price_pairs(plan_relax *r) {
  const plan_terms *s = r->x->terms;
  const plan_problem *p = s->p;
  bear_least_spends(r);
  for (int i = 0; i < r->list_count; i++) {
    r->sum[r->list[i]] = r->setup[r->list[i]];
    r->run[r->list[i]] = 0;
  }
  for (int c = 0; c < p->classes; c++) {
    double run = (double)s->run_mm[c] / PLAN_MM_PER_M;
    for (int k = r->in.first[c]; k < r->in.first[c + 1]; k++) {
      int pair = r->in.pair[k];
      double over = r->in.cost[k] - r->wage[c] + r->floor_price * (double)s->floor[pair];
      for (int e = s->first_pair[pair]; e < s->first_pair[pair + 1]; e++)
        over += r->paid[s->good[e]] * s->amount[e];
      r->in.over[k] = over;
      if (over >= 0) continue;
      r->sum[r->in.type[k]] += over;
      r->run[r->in.type[k]] += run;
    }
  }
  for (int i = 0; i < r->list_count; i++) {
    int t = r->list[i];
    bool is_short = r->x->min_run_mm > 0 && r->sum[t] < 0 &&
                    r->run[t] * PLAN_MM_PER_M < (double)r->x->min_run_mm;
    r->helper[t] = PLAN_NONE;
    r->rho[t] = r->sum[t] + (is_short ? run_short(r, t, PLAN_NONE, &r->helper[t]) : 0);
  }
}

/* The types that pay: all, or the best of them. Their sum. */
static double choose(plan_relax *r) {
  int most = r->x->max_types > 0 ? r->x->max_types : r->list_count;
  double sum = 0;
  r->chosen_count = 0;
  for (int i = 0; i < r->list_count; i++) {
    int t = r->list[i];
    r->taken[t] = false;
    if (!(r->rho[t] < 0)) continue;
    int at = r->chosen_count < most ? r->chosen_count++ : most;
    if (at == most && r->rho[t] >= r->rho[r->chosen[most - 1]]) continue;
    if (at == most) at--;
    for (; r->x->max_types > 0 && at > 0 && r->rho[r->chosen[at - 1]] > r->rho[t]; at--)
      r->chosen[at] = r->chosen[at - 1];
    r->chosen[at] = t;
  }
  for (int i = 0; i < r->chosen_count; i++) {
    r->taken[r->chosen[i]] = true;
    sum += r->rho[r->chosen[i]];
  }
  return sum;
}

/* The bound at the multipliers at hand, without the types' part. */
static double fixed_terms(plan_relax *r, const plan_part *part, bool with_gradient) {
  const plan_problem *p = r->x->terms->p;
  double sum = -r->floor_price * (double)r->x->floor_max;
  for (int c = 0; c < p->classes; c++) sum += r->wage[c];
  for (int i = 0; i < p->items; i++) {
    span at;
    sum += (1 - r->borne[i]) * goods_term(r, part->tiers, i, r->price[i], &at);
    if (with_gradient) r->assumed[i] = at;
  }
  return sum;
}

static double evaluate(plan_relax *r, const plan_part *part) {
  price_pairs(r);
  double bound = fixed_terms(r, part, true);
  return bound + choose(r);
}

/* What the relaxed choice breaks: classes served not once, goods and floor taken above what the
 * terms assume. */
static double gradient(plan_relax *r) {
  const plan_terms *s = r->x->terms;
  const plan_problem *p = s->p;
  double norm = 0;
  memset(r->need, 0, ((size_t)p->items + 1) * sizeof *r->need);
  r->grad_floor = -(double)r->x->floor_max;
  for (int c = 0; c < p->classes; c++) {
    r->grad_wage[c] = 1;
    for (int k = r->in.first[c]; k < r->in.first[c + 1]; k++) {
      int type = r->in.type[k];
      if (!r->taken[type] || (r->in.over[k] >= 0 && r->helper[type] != k)) continue;
      int pair = r->in.pair[k];
      r->grad_wage[c] -= 1;
      r->grad_floor += (double)s->floor[pair];
      for (int e = s->first_pair[pair]; e < s->first_pair[pair + 1]; e++)
        r->need[s->good[e]] += s->amount[e];
    }
    norm += r->grad_wage[c] * r->grad_wage[c];
  }
  for (int i = 0; i < p->items; i++) {
    double assumed = fmin(fmax(r->need[i], r->assumed[i].from), r->assumed[i].to);
    r->grad_price[i] = (r->need[i] - assumed) * r->scale[i];
    norm += r->grad_price[i] * r->grad_price[i];
  }
  r->grad_floor *= r->floor_scale;
  return norm + r->grad_floor * r->grad_floor;
}

/* Shares rise for types that are taken while an item's quantity pays less than its least spend. */
static void share_gradient(plan_relax *r, const plan_part *part, double *norm) {
  for (int d = 0; d < r->demand_count; d++) {
    const demand *of = &r->demand[d];
    if (!r->active[of->type] || !(part->tiers[of->item] & 1u)) continue;
    double pays = fmin(r->price[of->item] * r->need[of->item] / r->least_spend[of->item], 2);
    double up = (r->taken[of->type] ? 1 : 0) - pays;
    if (up <= 0 && !(r->share[d] > 0)) {
      r->dir_share[d] = 0;
      continue;
    }
    r->dir_share[d] = up + kept_direction * r->dir_share[d];
    *norm += r->dir_share[d] * r->dir_share[d];
  }
}

static void move(plan_relax *r, const plan_part *part, double step, double towards) {
  const plan_problem *p = r->x->terms->p;
  double norm = 0;
  share_gradient(r, part, &norm);
  for (int c = 0; c < p->classes; c++) {
    r->dir_wage[c] = r->grad_wage[c] + kept_direction * r->dir_wage[c];
    norm += r->dir_wage[c] * r->dir_wage[c];
  }
  for (int i = 0; i < p->items; i++) {
    r->dir_price[i] = r->grad_price[i] + kept_direction * r->dir_price[i];
    norm += r->dir_price[i] * r->dir_price[i];
  }
  r->dir_floor = r->grad_floor + kept_direction * r->dir_floor;
  norm += r->dir_floor * r->dir_floor;
  if (!(norm > 0)) return;
  double by = step * towards / norm;
  for (int c = 0; c < p->classes; c++) r->wage[c] += by * r->dir_wage[c];
  for (int i = 0; i < p->items; i++)
    r->price[i] = fmax(r->price[i] + by * r->scale[i] * r->dir_price[i], 0);
  for (int d = 0; d < r->demand_count; d++) {
    double least = r->least_spend[r->demand[d].item];
    r->share[d] = fmax(r->share[d] + by * r->dir_share[d] / least, 0);
  }
  r->floor_price = fmax(r->floor_price + by * r->floor_scale * r->dir_floor, 0);
}

static void keep_best(plan_relax *r, plan_part *part) {
  const plan_problem *p = r->x->terms->p;
  memcpy(part->wage, r->wage, (size_t)p->classes * sizeof *part->wage);
  memcpy(part->price, r->price, (size_t)p->items * sizeof *part->price);
  memcpy(part->share, r->share, (size_t)r->demand_count * sizeof *part->share);
  part->floor_price = r->floor_price;
}

static void recall_best(plan_relax *r, const plan_part *part) {
  const plan_problem *p = r->x->terms->p;
  memcpy(r->wage, part->wage, (size_t)p->classes * sizeof *part->wage);
  memcpy(r->price, part->price, (size_t)p->items * sizeof *part->price);
  memcpy(r->share, part->share, (size_t)r->demand_count * sizeof *part->share);
  r->floor_price = part->floor_price;
}

/* ---- what a bound rules out ---- */

/* Types by rho with one class left out: the `most` smallest below 0, rising. */
typedef struct front {
  double sum;  /* of all kept */
  double last; /* the greatest kept; 0 while there is room */
  int count, most;
} front;

/* Closes the pairs of class `c` that cost too much: the bound with the class taken out of the
 * relaxation and given to the pair's type, which then stands open. */
static void close_class(plan_relax *r, plan_part *part, int c, double fixed, double ceiling,
                        double *kept) {
  front f = {.most = r->x->max_types};
  for (int k = r->in.first[c]; k < r->in.first[c + 1]; k++)
    if (r->in.over[k] < 0) r->sum[r->in.type[k]] -= r->in.over[k];
  for (int i = 0; i < r->list_count; i++) {
    double rho = fmax(r->sum[r->list[i]], r->rho[r->list[i]]);
    if (rho >= 0) continue;
    if (f.most <= 0) {
      f.sum += rho;
      continue;
    }
    int at = f.count < f.most ? f.count++ : f.most;
    if (at == f.most && rho >= kept[f.most - 1]) continue;
    if (at == f.most) at--;
    for (; at > 0 && kept[at - 1] > rho; at--) kept[at] = kept[at - 1];
    kept[at] = rho;
  }
  for (int i = 0; i < f.count; i++) f.sum += kept[i];
  f.last = f.most > 0 && f.count == f.most ? kept[f.most - 1] : 0;
  for (int k = r->in.first[c]; k < r->in.first[c + 1]; k++) {
    int t = r->in.type[k], whole;
    double rho = fmax(r->sum[t], r->rho[t]);
    /* the type itself is open: it takes the place of its own term, or of the least of the others */
    double others = f.sum - (rho < 0 && rho <= f.last ? rho : f.last);
    if (f.most <= 0) others = f.sum - fmin(rho, 0);
    double own = r->sum[t] + r->in.over[k];
    if (r->x->min_run_mm > 0) own += run_short(r, t, k, &whole);
    if (fixed + own + others > ceiling + sure) part->open[r->in.pair[k]] = false;
  }
  for (int k = r->in.first[c]; k < r->in.first[c + 1]; k++)
    if (r->in.over[k] < 0) r->sum[r->in.type[k]] += r->in.over[k];
}

/* A type that stands open costs its rho, whatever else does. */
static void close_types(plan_relax *r, plan_part *part, double bound, double ceiling) {
  const plan_problem *p = r->x->terms->p;
  bool full = r->x->max_types > 0 && r->chosen_count == r->x->max_types;
  double least = full ? r->rho[r->chosen[r->chosen_count - 1]] : 0;
  for (int i = 0; i < r->list_count; i++) {
    int t = r->list[i];
    if (r->taken[t] || bound + r->rho[t] - least <= ceiling + sure) continue;
    for (int c = 0; c < p->classes; c++) part->open[plan_pair(p, c, t)] = false;
  }
}

static void close_pairs(plan_relax *r, plan_part *part, double ceiling) {
  if (ceiling >= HUGE_VAL) return;
  double fixed = fixed_terms(r, part, false), kept[MOST_OPEN];
  double bound = fixed;
  for (int i = 0; i < r->chosen_count; i++) bound += r->rho[r->chosen[i]];
  if (r->x->max_types <= MOST_OPEN)
    for (int c = 0; c < r->x->terms->p->classes; c++) close_class(r, part, c, fixed, ceiling, kept);
  close_types(r, part, bound, ceiling);
}

/* The item whose spend is furthest above what the bound counts for it, at the need of the relaxed
 * choice and at that of the best plan. */
static int waverer(plan_relax *r, const plan_part *part, double ceiling) {
  const plan_terms *s = r->x->terms;
  const plan_problem *p = s->p;
  int most = PLAN_NONE;
  double gap_most = fmax(sure, idle_share * (fmin(ceiling, 2 * part->bound) - part->bound));
  for (int i = 0; i < p->items; i++) {
    if ((part->tiers[i] & (part->tiers[i] - 1)) == 0) continue; /* one tier left */
    span at;
    double needs[2] = {r->need[i], 0}, gap = 0;
    double term = goods_term(r, part->tiers, i, r->price[i], &at);
    for (int c = 0; r->guess->found && c < p->classes; c++)
      needs[1] += p->need[plan_pair(p, c, r->guess->best[c]) * (size_t)p->items + (size_t)i];
    for (int k = 0; k < 2; k++) {
      int tier;
      double bought, spend = 0;
      if (needs[k] > p->item[i].stock + s->slack[i])
        spend = plan_spend(&p->item[i], needs[k] - p->item[i].stock, &tier, &bought);
      double least = needs[k] > p->item[i].stock ? r->borne[i] * r->least_spend[i] : 0;
      gap = fmax(gap, spend - (1 - r->borne[i]) * (r->price[i] * needs[k] + term) - least);
    }
    if (gap <= gap_most) continue;
    gap_most = gap;
    most = i;
  }
  return most;
}

/* ---- the method ---- */

static void begin(plan_relax *r, plan_part *part) {
  const plan_problem *p = r->x->terms->p;
  list_pairs(r, part);
  for (int d = 0; d < r->demand_count; d++) /* where it is bought its term says the least spend */
    if (!(part->tiers[r->demand[d].item] & 1u)) part->share[d] = 0;
  recall_best(r, part);
  memset(r->dir_share, 0, (size_t)r->demand_count * sizeof *r->dir_share);
  memset(r->dir_wage, 0, (size_t)p->classes * sizeof *r->dir_wage);
  memset(r->dir_price, 0, ((size_t)p->items + 1) * sizeof *r->dir_price);
  r->dir_floor = 0;
}

static bool all_served(const plan_relax *r) {
  for (int c = 0; c < r->x->terms->p->classes; c++)
    if (r->in.first[c] == r->in.first[c + 1]) return false;
  return true;
}

/* The types that pay best or come nearest to it. */
static int nearest_types(plan_relax *r) {
  int n = 0;
  for (int i = 0; i < r->list_count; i++) {
    int t = r->list[i], at = n < MOST_NEAR ? n++ : MOST_NEAR;
    if (at == MOST_NEAR && r->rho[t] >= r->rho[r->near[MOST_NEAR - 1]]) continue;
    if (at == MOST_NEAR) at--;
    for (; at > 0 && r->rho[r->near[at - 1]] > r->rho[t]; at--) r->near[at] = r->near[at - 1];
    r->near[at] = t;
  }
  return n;
}

static void climb(plan_relax *r, plan_part *part, double ceiling, int steps) {
  double step = first_step, best = -HUGE_VAL;
  int waited = 0;
  for (int n = 0; n < steps && step > least_step; n++) {
    double bound = evaluate(r, part);
    double norm = gradient(r);
    if (bound > best) {
      if (bound > best + hoped_share * 1e-3 * fabs(best)) waited = 0;
      best = bound;
      keep_best(r, part);
    } else if (++waited > PATIENCE) {
      waited = 0;
      step /= 2;
    }
    if (best > part->bound) part->bound = best;
    if (part->bound > ceiling + sure || !(norm > 0)) break;
    if (n % TRY_EVERY == 0) {
      plan_guess_prices(r->guess, r->price, r->floor_price);
      if (steps >= THOROUGH && n >= TRY_EVERY)
        plan_guess_polish(r->guess, r->chosen, r->chosen_count, r->near, nearest_types(r));
      else
        plan_guess_try(r->guess, r->chosen, r->chosen_count);
      if (plan_over(r->call)) break;
    }
    double aim =
        r->guess->found ? fmin(r->guess->tally.amount, ceiling) : best + hoped_share * fabs(best);
    if (ceiling < HUGE_VAL && !r->guess->found) aim = fmax(aim, ceiling);
    move(r, part, step, fmax(aim - bound, sure));
  }
}

void plan_relax_part(plan_relax *r, plan_part *part, double ceiling, int steps) {
  begin(r, part);
  part->wavers = PLAN_NONE;
  if (!all_served(r)) {
    part->bound = HUGE_VAL;
    return;
  }
  climb(r, part, ceiling, steps);
  recall_best(r, part);
  (void)evaluate(r, part);
  (void)gradient(r);
  if (r->guess->found) ceiling = fmin(ceiling, r->guess->tally.amount);
  if (part->bound > ceiling + sure) return;
  part->wavers = waverer(r, part, ceiling);
  close_pairs(r, part, ceiling);
  list_pairs(r, part);
}
