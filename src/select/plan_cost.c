/* What a choice of types costs, in integers where rules compare and in the model's own reals where
 * goods are bought. */
#include <limits.h>
#include <math.h>

#include "select/plan_inner.h"

/* Needs are sums of reals: what exceeds the stock by the last bits only is covered. So small that
 * what it saves in goods for a million is no cent. */
static const double slack_share = 1e-9;
/* as in checks/cost.c: an amount that is half a cent in decimals rounds up */
static const double last_bits = 1e-7;

bool plan_fits(const plan_problem *p, int c, int t) {
  return p->cents[plan_pair(p, c, t)] >= 0 && !(p->locked_out && p->locked_out[t]);
}

/* An item's most, in `most` for all items. Counted over locked types too, so that a plan costs the
 * same with and without them. A class at a time: needs lie in memory a pair after the other. */
static void add_most_needed(const plan_problem *p, int c, double *top, double *most) {
  for (int i = 0; i < p->items; i++) top[i] = 0;
  for (int t = 0; t < p->types; t++) {
    size_t k = plan_pair(p, c, t);
    for (int i = 0; p->cents[k] >= 0 && i < p->items; i++)
      top[i] = fmax(top[i], p->need[k * (size_t)p->items + (size_t)i]);
  }
  for (int i = 0; i < p->items; i++) most[i] += top[i];
}

/* The same for one item. */
static double most_needed(const plan_problem *p, int item) {
  double sum = 0;
  for (int c = 0; c < p->classes; c++) {
    double most = 0;
    for (int t = 0; t < p->types; t++)
      if (p->cents[plan_pair(p, c, t)] >= 0)
        most = fmax(most, p->need[plan_pair(p, c, t) * (size_t)p->items + (size_t)item]);
    sum += most;
  }
  return sum;
}

static double slack_of(const plan_item *item, double most) {
  double last = item->tier_count > 0 ? item->tier[item->tier_count - 1].from : 0;
  return slack_share * fmax(last, most);
}

double plan_spend(const plan_item *item, double wanted, int *tier, double *bought) {
  double best = HUGE_VAL;
  for (int k = 0; k < item->tier_count; k++) {
    double end = k + 1 < item->tier_count ? item->tier[k + 1].from : HUGE_VAL;
    double quantity = fmax(wanted, item->tier[k].from);
    double spend = quantity * item->tier[k].price;
    if (quantity > end || spend >= best) continue;
    best = spend;
    *tier = k;
    *bought = quantity;
  }
  return best;
}

static double needed(const plan_problem *p, const int *type_of, int item) {
  double sum = 0;
  for (int c = 0; c < p->classes; c++)
    sum += p->need[plan_pair(p, c, type_of[c]) * (size_t)p->items + (size_t)item];
  return sum;
}

/* What one item costs, currency before rounding. */
static double buy_item(const plan_item *item, double need, double slack, plan_buy *out) {
  *out = (plan_buy){.need = need, .tier = PLAN_NONE, .from_stock = fmin(need, item->stock)};
  if (need <= item->stock + slack) return 0;
  double spend = plan_spend(item, need - item->stock, &out->tier, &out->bought);
  out->surplus = fmax(out->bought + out->from_stock - need, 0);
  return spend;
}

static long long whole_cents(double amount) {
  return (long long)floor(amount * 100 + 0.5 + last_bits);
}

static double spend_of(const plan_item *item, const plan_buy *b) {
  return b->tier == PLAN_NONE ? 0 : b->bought * item->tier[b->tier].price;
}

static long long cents_down(double amount) {
  return (long long)floor(amount * 100 + last_bits);
}

/* The lines of goods add up to their total, which is rounded once: each is its amount rounded down,
 * and the cents that are then short go to those cut most. */
static void share_cents(const plan_problem *p, long long total, plan_buy *buy) {
  for (int i = 0; i < p->items; i++) {
    buy[i].cents = cents_down(spend_of(&p->item[i], &buy[i]));
    total -= buy[i].cents;
  }
  for (; total > 0; total--) {
    int most = PLAN_NONE;
    double cut_most = 0;
    for (int i = 0; i < p->items; i++) {
      double cut = spend_of(&p->item[i], &buy[i]) * 100 - (double)buy[i].cents;
      if (cut <= cut_most) continue;
      most = i;
      cut_most = cut;
    }
    if (most == PLAN_NONE) return;
    buy[most].cents++;
  }
}

/* Types are few and classes some dozens: looking back is cheaper than a table of types. */
static bool seen_before(const int *type_of, int c) {
  for (int k = 0; k < c; k++)
    if (type_of[k] == type_of[c]) return true;
  return false;
}

static long long walls_cents(const plan_problem *p, const int *type_of, int *types) {
  long long cents = 0;
  *types = 0;
  for (int c = 0; c < p->classes; c++) {
    cents += p->cents[plan_pair(p, c, type_of[c])];
    if (!seen_before(type_of, c)) ++*types;
  }
  return cents + *types * p->setup_cents;
}

static long long buy_all(const plan_problem *p, const int *type_of, const double *slack,
                         plan_buy *buy) {
  int types;
  double goods = 0;
  long long walls = walls_cents(p, type_of, &types);
  for (int i = 0; i < p->items; i++) {
    double own = slack ? slack[i] : 0;
    double need = needed(p, type_of, i);
    /* it matters only where the need comes so near to the stock */
    if (!slack && need > p->item[i].stock && need <= p->item[i].stock * (1 + 1e-6) + 1e-3)
      own = slack_of(&p->item[i], most_needed(p, i));
    plan_buy one;
    goods += buy_item(&p->item[i], need, own, &one);
    if (buy) buy[i] = one;
  }
  if (buy) share_cents(p, whole_cents(goods), buy);
  return walls + whole_cents(goods);
}

long long plan_cost(const plan_problem *p, const int *type_of, plan_buy *buy) {
  return buy_all(p, type_of, NULL, buy);
}

void plan_buys(const plan_terms *s, const int *type_of, plan_buy *buy) {
  (void)buy_all(s->p, type_of, s->slack, buy);
}

/* ---- terms ---- */

static void list_goods(arena *a, plan_terms *s) {
  const plan_problem *p = s->p;
  size_t pairs = (size_t)p->classes * (size_t)p->types, items = (size_t)p->items, n = 0;
  for (size_t k = 0; k < pairs; k++)
    for (size_t i = 0; p->cents[k] >= 0 && i < items; i++) n += p->need[k * items + i] > 0;
  s->first_pair = arena_array(a, pairs + 1, sizeof *s->first_pair);
  s->good = arena_array(a, n + 1, sizeof *s->good);
  s->amount = arena_array(a, n + 1, sizeof *s->amount);
  n = 0;
  for (size_t k = 0; k < pairs; k++) {
    for (size_t i = 0; p->cents[k] >= 0 && i < items; i++) {
      if (!(p->need[k * items + i] > 0)) continue;
      s->good[n] = (int)i;
      s->amount[n++] = p->need[k * items + i];
    }
    s->first_pair[k + 1] = (int)n;
  }
}

void plan_terms_make(arena *a, const plan_problem *p, plan_terms *out) {
  size_t pairs = (size_t)p->classes * (size_t)p->types;
  *out = (plan_terms){.p = p};
  out->run_mm = arena_array(a, (size_t)p->classes, sizeof *out->run_mm);
  out->floor = arena_array(a, pairs, sizeof *out->floor);
  out->most = arena_array(a, (size_t)p->items + 1, sizeof *out->most);
  out->slack = arena_array(a, (size_t)p->items + 1, sizeof *out->slack);
  for (int c = 0; c < p->classes; c++) out->run_mm[c] = llround(p->run_m[c] * PLAN_MM_PER_M);
  for (size_t k = 0; k < pairs; k++) out->floor[k] = llround(p->floor_m2[k] * PLAN_FLOOR_PER_M2);
  double *top = arena_array(a, (size_t)p->items + 1, sizeof *top);
  for (int c = 0; c < p->classes; c++) add_most_needed(p, c, top, out->most);
  for (int i = 0; i < p->items; i++) out->slack[i] = slack_of(&p->item[i], out->most[i]);
  list_goods(a, out);
}

/* ---- tally ---- */

static bool same_frames(const plan_problem *p, const int *type_of) {
  if (!p->storey) return true;
  for (int c = 0; c < p->classes; c++)
    for (int k = 0; k < c; k++)
      if (p->storey[k] == p->storey[c] && p->group[type_of[k]] != p->group[type_of[c]])
        return false;
  return true;
}

static long long shortest_run(const plan_terms *s, const int *type_of) {
  long long least = LLONG_MAX;
  for (int c = 0; c < s->p->classes; c++) {
    long long run = 0;
    for (int k = 0; k < s->p->classes; k++)
      if (type_of[k] == type_of[c]) run += s->run_mm[k];
    if (run < least) least = run;
  }
  return least;
}

void plan_tally_make(const plan_terms *s, const int *type_of, plan_tally *out) {
  const plan_problem *p = s->p;
  double goods = 0;
  *out = (plan_tally){.worst_margin = INT_MAX};
  long long walls = walls_cents(p, type_of, &out->types);
  for (int i = 0; i < p->items; i++) {
    plan_buy buy;
    goods += buy_item(&p->item[i], needed(p, type_of, i), s->slack[i], &buy);
  }
  for (int c = 0; c < p->classes; c++) {
    size_t k = plan_pair(p, c, type_of[c]);
    out->floor += s->floor[k];
    if (p->margin[k] < out->worst_margin) out->worst_margin = p->margin[k];
  }
  out->amount = (double)walls / 100 + goods;
  out->cents = walls + whole_cents(goods);
  out->least_run_mm = shortest_run(s, type_of);
  out->framed = same_frames(p, type_of);
}

unsigned plan_broken(const plan_case *x, const plan_tally *t) {
  unsigned broken = 0;
  if (x->max_types > 0 && t->types > x->max_types) broken |= 1u << PLAN_RULE_TYPES;
  if (t->least_run_mm < x->min_run_mm) broken |= 1u << PLAN_RULE_RUN;
  if (x->floor_max > 0 && t->floor > x->floor_max) broken |= 1u << PLAN_RULE_FLOOR;
  if (x->framed && !t->framed) broken |= 1u << PLAN_RULE_FRAMING;
  return broken;
}

void plan_case_make(arena *a, const plan_terms *s, unsigned rules, int least_margin,
                    plan_case *out) {
  const plan_problem *p = s->p;
  bool *open = arena_array(a, (size_t)p->classes * (size_t)p->types, sizeof *open);
  for (int c = 0; c < p->classes; c++)
    for (int t = 0; t < p->types; t++)
      open[plan_pair(p, c, t)] =
          plan_fits(p, c, t) && p->margin[plan_pair(p, c, t)] >= least_margin;
  *out = (plan_case){.terms = s, .open = open, .storeys = p->storeys};
  if (rules & 1u << PLAN_RULE_TYPES) out->max_types = p->max_types;
  if (rules & 1u << PLAN_RULE_RUN) out->min_run_mm = llround(p->min_run_m * PLAN_MM_PER_M);
  if (rules & 1u << PLAN_RULE_FLOOR) out->floor_max = llround(p->floor_max_m2 * PLAN_FLOOR_PER_M2);
  if (rules & 1u << PLAN_RULE_FRAMING) out->framed = p->storey != NULL;
}
