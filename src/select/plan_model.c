/* The 0-1 model of `plan`, row by row as docs/design/plan.md states it. */
#include <ctype.h>
#include <math.h>
#include <stdarg.h>

#include "select/plan_inner.h"

enum { CODE_MAX = 40, NAME_MAX = 200, FIRST_ROOM = 256 };

typedef struct builder {
  arena *arena;
  const plan_case *x;
  const plan_problem *p;
  const plan_shape *shape;
  solver_model *m;
  plan_columns *at;
  size_t rows, columns, entries; /* room */
  const char **code;             /* a name an item */
  double *unit; /* an item: quantities count in the most that is ever bought, so that no coefficient
                   is above 1: with 1e5 sheets as a bound a tolerance of 1e-5 would be a sheet */
  double *base; /* a class: currency that its costs are above */
  bool *wanted; /* an item: stands in the model */
} builder;

static const char *name_v(arena *a, const char *format, va_list args) {
  text t;
  text_init(&t, a, NAME_MAX);
  text_vputf(&t, format, args);
  return t.data;
}

/* Room for one more. */
static void *room(arena *a, void *all, int count, size_t *cap, size_t size) {
  if ((size_t)count < *cap) return all;
  size_t more = *cap ? 2 * *cap : FIRST_ROOM;
  void *out = arena_grow(a, all, *cap * size, more * size);
  *cap = more;
  return out;
}

static int add_row(builder *b, row_sense sense, double bound, const char *format, ...)
    TEXT_PRINTF(4, 5);
static int add_row(builder *b, row_sense sense, double bound, const char *format, ...) {
  solver_model *m = b->m;
  va_list args;
  va_start(args, format);
  m->rows = room(b->arena, m->rows, m->row_count, &b->rows, sizeof *m->rows);
  m->rows[m->row_count] = (solver_row){name_v(b->arena, format, args), sense, bound};
  va_end(args);
  return m->row_count++;
}

static int add_column(builder *b, solver_column made, const char *format, ...) TEXT_PRINTF(3, 4);
static int add_column(builder *b, solver_column made, const char *format, ...) {
  solver_model *m = b->m;
  va_list args;
  va_start(args, format);
  made.name = name_v(b->arena, format, args);
  m->columns = room(b->arena, m->columns, m->column_count, &b->columns, sizeof *m->columns);
  m->columns[m->column_count] = made;
  va_end(args);
  return m->column_count++;
}

static void put(builder *b, int row, int column, double value) {
  solver_model *m = b->m;
  if (!(value < 0) && !(value > 0)) return;
  m->entries = room(b->arena, m->entries, m->entry_count, &b->entries, sizeof *m->entries);
  m->entries[m->entry_count++] = (solver_entry){row, column, value};
}

/* ---- names of items ---- */

static const char *clean_code(arena *a, const char *code) {
  text t;
  text_init(&t, a, CODE_MAX);
  for (const char *s = code; *s; s++) text_char(&t, isalnum((unsigned char)*s) ? *s : '_');
  return t.data;
}

/* Cleaned codes may meet; then the item's number tells them apart. */
static void name_items(builder *b) {
  const plan_problem *p = b->p;
  b->code = arena_array(b->arena, (size_t)p->items + 1, sizeof *b->code);
  for (int i = 0; i < p->items; i++) b->code[i] = clean_code(b->arena, p->item[i].code);
  for (int i = 0; i < p->items; i++)
    for (int k = 0; k < i; k++)
      if (text_equal(b->code[i], b->code[k])) {
        b->code[i] = text_format(b->arena, "i%d_%s", i + 1, b->code[i]);
        k = -1;
      }
}

/* ---- columns ---- */

static int *none(arena *a, size_t n) {
  int *at = arena_array(a, n + 1, sizeof *at);
  for (size_t i = 0; i < n; i++) at[i] = PLAN_NONE;
  return at;
}

static bool is_open(const builder *b, int c, int t) {
  return b->x->open[plan_pair(b->p, c, t)];
}

static void set_bases(builder *b, double *base) {
  const plan_problem *p = b->p;
  b->base = arena_array(b->arena, (size_t)p->classes, sizeof *b->base);
  *base = 0;
  for (int c = 0; b->shape->lean && c < p->classes; c++) {
    long long least = -1;
    for (int t = 0; t < p->types; t++) {
      long long cents = p->cents[plan_pair(p, c, t)];
      if (is_open(b, c, t) && (least < 0 || cents < least)) least = cents;
    }
    b->base[c] = least > 0 ? (double)least / 100 : 0;
    *base += b->base[c];
  }
}

static void choice_columns(builder *b) {
  const plan_problem *p = b->p;
  double setup = b->shape->bare ? 0 : (double)p->setup_cents / 100;
  b->at->x = none(b->arena, (size_t)p->classes * (size_t)p->types);
  b->at->y = none(b->arena, (size_t)p->types);
  for (int t = 0; t < p->types; t++)
    for (int c = 0; c < p->classes && b->at->y[t] < 0; c++)
      if (is_open(b, c, t))
        b->at->y[t] = add_column(b, (solver_column){.cost = setup, .binary = true, .upper = 1},
                                 "y_t%d", t + 1);
  for (int c = 0; c < p->classes; c++)
    for (int t = 0; t < p->types; t++) {
      if (!is_open(b, c, t)) continue;
      size_t k = plan_pair(p, c, t);
      double cost = b->shape->bare ? 0 : (double)p->cents[k] / 100 - b->base[c];
      b->at->x[k] = add_column(b, (solver_column){.cost = cost, .binary = true, .upper = 1},
                               "x_c%d_t%d", c + 1, t + 1);
    }
}

static double tier_end(const plan_item *item, int k, double most) {
  return k + 1 < item->tier_count ? item->tier[k + 1].from : fmax(item->tier[k].from, most);
}

/* z: which tier is bought in; q: how much, in the item's unit; w: from the stock. */
static void item_columns(builder *b, int i) {
  const plan_item *item = &b->p->item[i];
  int n = item->tier_count;
  plan_columns *at = b->at;
  double most = b->x->terms->most[i];
  b->unit[i] = n > 0 ? tier_end(item, n - 1, most) : most;
  if (!(b->unit[i] > 0)) b->unit[i] = 1;
  at->z[i] = none(b->arena, (size_t)n + 1);
  at->q[i] = none(b->arena, (size_t)n);
  for (int k = 0; k <= n; k++) {
    bool may = !b->shape->tiers || b->shape->tiers[i] & 1u << k;
    at->z[i][k] = add_column(b, (solver_column){.binary = true, .upper = may ? 1 : 0}, "z_%s_%d",
                             b->code[i], k);
  }
  for (int k = 0; k < n; k++)
    at->q[i][k] =
        add_column(b, (solver_column){.cost = item->tier[k].price * b->unit[i], .upper = HUGE_VAL},
                   "q_%s_%d", b->code[i], k + 1);
  if (item->stock > 0)
    at->w[i] =
        add_column(b, (solver_column){.upper = (item->stock + b->x->terms->slack[i]) / b->unit[i]},
                   "w_%s", b->code[i]);
}

/* Of our own model goods are left out that no open pair takes. */
static void list_wanted(builder *b) {
  const plan_terms *s = b->x->terms;
  const plan_problem *p = b->p;
  b->wanted = arena_array(b->arena, (size_t)p->items + 1, sizeof *b->wanted);
  for (int i = 0; i < p->items; i++) b->wanted[i] = !b->shape->lean && !b->shape->bare;
  if (!b->shape->lean) return;
  for (size_t k = 0; k < (size_t)p->classes * (size_t)p->types; k++)
    for (int e = s->first_pair[k]; b->x->open[k] && e < s->first_pair[k + 1]; e++)
      b->wanted[s->good[e]] = true;
}

static void goods_columns(builder *b) {
  size_t n = (size_t)b->p->items;
  b->unit = arena_array(b->arena, n + 1, sizeof *b->unit);
  b->at->z = arena_array(b->arena, n + 1, sizeof *b->at->z);
  b->at->q = arena_array(b->arena, n + 1, sizeof *b->at->q);
  b->at->w = none(b->arena, n);
  for (size_t i = 0; i < n; i++)
    if (b->wanted[i]) item_columns(b, (int)i);
}

/* ---- rows ---- */

static void assign_rows(builder *b) {
  const plan_problem *p = b->p;
  for (int c = 0; c < p->classes; c++) {
    int row = add_row(b, ROW_EQUAL, 1, "assign_c%d", c + 1);
    for (int t = 0; t < p->types; t++)
      if (is_open(b, c, t)) put(b, row, b->at->x[plan_pair(p, c, t)], 1);
  }
  for (int c = 0; c < p->classes; c++)
    for (int t = 0; t < p->types; t++) {
      if (!is_open(b, c, t)) continue;
      int row = add_row(b, ROW_LESS, 0, "open_c%d_t%d", c + 1, t + 1);
      put(b, row, b->at->x[plan_pair(p, c, t)], 1);
      put(b, row, b->at->y[t], -1);
    }
}

/* A type counts only when it is used, and only as long as its walls are together. */
static void use_rows(builder *b, int t) {
  const plan_problem *p = b->p;
  int used = add_row(b, ROW_GREATER, 0, "used_t%d", t + 1);
  put(b, used, b->at->y[t], -1);
  for (int c = 0; c < p->classes; c++)
    if (is_open(b, c, t)) put(b, used, b->at->x[plan_pair(p, c, t)], 1);
  if (b->x->min_run_mm <= 0) return;
  int run = add_row(b, ROW_GREATER, 0, "run_t%d", t + 1);
  put(b, run, b->at->y[t], -(double)b->x->min_run_mm / PLAN_MM_PER_M);
  for (int c = 0; c < p->classes; c++)
    if (is_open(b, c, t))
      put(b, run, b->at->x[plan_pair(p, c, t)], (double)b->x->terms->run_mm[c] / PLAN_MM_PER_M);
}

static void type_rows(builder *b) {
  const plan_problem *p = b->p;
  if (b->x->max_types > 0) {
    int row = add_row(b, ROW_LESS, b->x->max_types, "types");
    for (int t = 0; t < p->types; t++)
      if (b->at->y[t] >= 0) put(b, row, b->at->y[t], 1);
  }
  for (int t = 0; t < p->types; t++)
    if (b->at->y[t] >= 0) use_rows(b, t);
}

static void tier_rows(builder *b, int i) {
  const plan_item *item = &b->p->item[i];
  const plan_columns *at = b->at;
  int row = add_row(b, ROW_EQUAL, 1, "tier_%s", b->code[i]);
  for (int k = 0; k <= item->tier_count; k++) put(b, row, at->z[i][k], 1);
  for (int k = 0; k < item->tier_count; k++) {
    double end = tier_end(item, k, b->x->terms->most[i]);
    int lo = add_row(b, ROW_GREATER, 0, "lo_%s_%d", b->code[i], k + 1);
    put(b, lo, at->q[i][k], 1);
    put(b, lo, at->z[i][k + 1], -item->tier[k].from / b->unit[i]);
    int up = add_row(b, ROW_LESS, 0, "up_%s_%d", b->code[i], k + 1);
    put(b, up, at->q[i][k], 1);
    put(b, up, at->z[i][k + 1], -end / b->unit[i]);
  }
}

/* Goods bought and on hand cover what the chosen pairs take. */
static void need_rows(builder *b) {
  const plan_problem *p = b->p;
  const plan_terms *s = b->x->terms;
  int *row_of = none(b->arena, (size_t)p->items);
  for (int i = 0; i < p->items; i++) {
    if (!b->wanted[i]) continue;
    row_of[i] = add_row(b, ROW_GREATER, 0, "need_%s", b->code[i]);
    for (int k = 0; k < p->item[i].tier_count; k++) put(b, row_of[i], b->at->q[i][k], 1);
    if (b->at->w[i] >= 0) put(b, row_of[i], b->at->w[i], 1);
  }
  size_t pairs = (size_t)p->classes * (size_t)p->types;
  for (size_t k = 0; k < pairs && !b->shape->bare; k++) {
    if (!b->x->open[k]) continue;
    for (int e = s->first_pair[k]; e < s->first_pair[k + 1]; e++)
      put(b, row_of[s->good[e]], b->at->x[k], -s->amount[e] / b->unit[s->good[e]]);
  }
  for (int i = 0; i < p->items; i++)
    if (b->wanted[i]) tier_rows(b, i);
}

static void floor_row(builder *b) {
  const plan_problem *p = b->p;
  if (b->x->floor_max <= 0) return;
  int row = add_row(b, ROW_LESS, (double)b->x->floor_max / PLAN_FLOOR_PER_M2, "area");
  size_t pairs = (size_t)p->classes * (size_t)p->types;
  for (size_t k = 0; k < pairs; k++)
    if (b->x->open[k]) put(b, row, b->at->x[k], (double)b->x->terms->floor[k] / PLAN_FLOOR_PER_M2);
}

/* One framing group a storey. */
static void framing_rows(builder *b) {
  const plan_problem *p = b->p;
  b->at->u = none(b->arena, (size_t)b->x->storeys * (size_t)p->groups);
  if (!b->x->framed) return;
  for (int s = 0; s < b->x->storeys; s++) {
    int row = add_row(b, ROW_LESS, 1, "framing_s%d", s + 1);
    for (int g = 0; g < p->groups; g++) {
      int u = add_column(b, (solver_column){.binary = true, .upper = 1}, "u_s%d_g%d", s + 1, g + 1);
      b->at->u[s * p->groups + g] = u;
      put(b, row, u, 1);
    }
  }
  for (int c = 0; c < p->classes; c++)
    for (int t = 0; t < p->types; t++) {
      if (!is_open(b, c, t)) continue;
      int row = add_row(b, ROW_LESS, 0, "group_c%d_t%d", c + 1, t + 1);
      put(b, row, b->at->x[plan_pair(p, c, t)], 1);
      put(b, row, b->at->u[p->storey[c] * p->groups + p->group[t]], -1);
    }
}

/* The worst margin, dB: no class is below it. */
static void margin_rows(builder *b) {
  const plan_problem *p = b->p;
  b->at->s = PLAN_NONE;
  if (!b->shape->with_margin) return;
  double least = (double)b->shape->least_margin / 100;
  b->at->s = add_column(b, (solver_column){.lower = least, .upper = HUGE_VAL}, "s");
  for (int c = 0; c < p->classes; c++) {
    int row = add_row(b, ROW_GREATER, 0, "margin_c%d", c + 1);
    put(b, row, b->at->s, -1);
    for (int t = 0; t < p->types; t++)
      if (is_open(b, c, t))
        put(b, row, b->at->x[plan_pair(p, c, t)], (double)p->margin[plan_pair(p, c, t)] / 100);
  }
}

/* The least of an item that the type takes, whichever of its classes it is used for. */
static double least_need(const builder *b, int t, int i) {
  const plan_problem *p = b->p;
  double least = HUGE_VAL;
  for (int c = 0; c < p->classes; c++)
    if (is_open(b, c, t))
      least = fmin(least, p->need[plan_pair(p, c, t) * (size_t)p->items + (size_t)i]);
  return least;
}

/* Cuts for our own solve: whoever uses a type buys what all its walls take more of than is on hand.
 * Without them the relaxation buys a sliver of a minimum order. */
static void buying_cuts(builder *b) {
  const plan_problem *p = b->p;
  for (int i = 0; i < p->items; i++)
    for (int t = 0; t < p->types; t++) {
      if (!b->wanted[i] || b->at->y[t] < 0) continue;
      if (least_need(b, t, i) <= p->item[i].stock + b->x->terms->slack[i]) continue;
      int row = add_row(b, ROW_LESS, 1, "buys_%s_t%d", b->code[i], t + 1);
      put(b, row, b->at->y[t], 1);
      put(b, row, b->at->z[i][0], 1);
    }
}

void plan_model(arena *a, const plan_case *x, const plan_shape *shape, solver_model *m,
                plan_columns *at, double *base) {
  builder b = {.arena = a, .x = x, .p = x->terms->p, .shape = shape, .m = m, .at = at};
  *m = (solver_model){.name = "plan"};
  name_items(&b);
  list_wanted(&b);
  set_bases(&b, base);
  choice_columns(&b);
  goods_columns(&b);
  assign_rows(&b);
  type_rows(&b);
  need_rows(&b);
  floor_row(&b);
  framing_rows(&b);
  margin_rows(&b);
  if (shape->lean) buying_cuts(&b);
}

/* ---- a choice in the model's columns ---- */

static void put_goods(const plan_case *x, const plan_columns *at, const int *type_of, int i,
                      double *value) {
  const plan_problem *p = x->terms->p;
  const plan_item *item = &p->item[i];
  double unit = item->tier_count > 0 ? tier_end(item, item->tier_count - 1, x->terms->most[i]) : 0;
  double need = 0, bought = 0;
  int tier = PLAN_NONE;
  for (int c = 0; c < p->classes; c++)
    need += p->need[plan_pair(p, c, type_of[c]) * (size_t)p->items + (size_t)i];
  if (!(unit > 0)) unit = 1;
  if (at->w[i] >= 0) value[at->w[i]] = fmin(need, item->stock + x->terms->slack[i]) / unit;
  if (need > item->stock + x->terms->slack[i])
    (void)plan_spend(item, need - item->stock, &tier, &bought);
  value[at->z[i][tier + 1]] = 1;
  if (tier != PLAN_NONE) value[at->q[i][tier]] = bought / unit;
}

double *plan_values(arena *a, const plan_case *x, const solver_model *m, const plan_columns *at,
                    const int *type_of) {
  const plan_problem *p = x->terms->p;
  double *value = arena_array(a, (size_t)m->column_count, sizeof *value);
  int worst = 0;
  for (int c = 0; c < p->classes; c++) {
    size_t k = plan_pair(p, c, type_of[c]);
    value[at->x[k]] = 1;
    value[at->y[type_of[c]]] = 1;
    if (x->framed) value[at->u[p->storey[c] * p->groups + p->group[type_of[c]]]] = 1;
    if (c == 0 || p->margin[k] < worst) worst = p->margin[k];
  }
  for (int i = 0; i < p->items; i++)
    if (at->z[i]) put_goods(x, at, type_of, i, value);
  if (at->s >= 0) value[at->s] = (double)worst / 100;
  return value;
}

enum { FIRST_GROUPS = 4, THEN_TYPES = 3, THEN_TIERS = 2, THEN_PAIRS = 1 };

int *plan_priorities(arena *a, const plan_case *x, const solver_model *m, const plan_columns *at) {
  const plan_problem *p = x->terms->p;
  int *rank = arena_array(a, (size_t)m->column_count, sizeof *rank);
  size_t pairs = (size_t)p->classes * (size_t)p->types;
  for (size_t k = 0; k < pairs; k++)
    if (at->x[k] >= 0) rank[at->x[k]] = THEN_PAIRS;
  for (int t = 0; t < p->types; t++)
    if (at->y[t] >= 0) rank[at->y[t]] = THEN_TYPES;
  for (int i = 0; i < p->items; i++)
    for (int k = 0; at->z[i] && k <= p->item[i].tier_count; k++) rank[at->z[i][k]] = THEN_TIERS;
  if (x->framed)
    for (int k = 0; k < x->storeys * p->groups; k++) rank[at->u[k]] = FIRST_GROUPS;
  return rank;
}
