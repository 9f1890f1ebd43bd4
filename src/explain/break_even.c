/* How far one price may move before another wall is cheaper. Before rounding, cost is linear in
 * every price: a wall that takes q of an item costs d f q more when its price rises by d, f being
 * the markups. So the chosen wall is passed by wall j at d = (c_j - c) / (f (q - q_j)). All walls
 * that keep the rules are tried: one that another beats today may win tomorrow. */
#include <math.h>

#include "explain/explain.h"
#include "wall/line.h"

enum { ITEMS_MAX = COST_MAX_LINES / 2 + TRADE_COUNT };
static const double same_quantity =
    1e-9; /* relative: what sums of products differ by in the last bits */

/* A price that is watched: an item of the chosen wall, or a labour rate. */
typedef struct watched {
  int item;                       /* CATALOG_NONE for a labour rate */
  trade trade;                    /* of a labour rate */
  double markup, price, quantity; /* of the chosen wall; hours for a rate */
  double up, down;                /* least moves found; HUGE_VAL = none */
  candidate up_wall, down_wall;
} watched;

/* What a part of a wall takes of the watched, and what it costs unrounded with markups. */
typedef struct part {
  bool known;
  double cost;
  double quantity[ITEMS_MAX];
} part;

typedef struct scan {
  arena *arena;
  const space *space;
  const judge_context *context;
  int count;
  watched price[ITEMS_MAX];
  double cost;     /* of the chosen wall */
  part **core;     /* per core, made when needed */
  size_t spacings; /* of studs and mounts in the catalog */
  part ***leaves;  /* spacings x spacings, each face_count x face_count, made when needed */
  takeoff lines;   /* scratch */
} scan;

static double material_markup(const price_book *b) {
  return (1 + b->sales_tax) * (1 + b->overhead_profit);
}
static double labour_markup(const price_book *b) {
  return 1 + b->overhead_profit;
}

/* ---- what a wall takes ---- */

static bool is_of(const scan *s, const watched *w, const cost_line *l) {
  const price_item *item = &s->context->prices->items[l->item];
  if (l->kind == LINE_MATERIAL) return w->item == l->item;
  return w->item == CATALOG_NONE && w->trade == item->trade;
}

/* Sums lines first..last - 1 of the takeoff in hand. */
static void sum_lines(scan *s, int first, int last, part *out) {
  const price_book *book = s->context->prices;
  out->known = true;
  out->cost = 0;
  for (int i = 0; i < s->count; i++) out->quantity[i] = 0;
  for (int k = first; k < last; k++) {
    const cost_line *l = &s->lines.line[k];
    if (l->kind == LINE_MARKUP) continue;
    out->cost += l->quantity * l->rate *
                 (l->kind == LINE_MATERIAL ? material_markup(book) : labour_markup(book));
    for (int i = 0; i < s->count; i++)
      if (is_of(s, &s->price[i], l)) out->quantity[i] += l->quantity;
  }
}

static void take_off(scan *s, const wall *w) {
  cost_total total;
  cost_takeoff(s->context->prices, s->context->catalog, s->context->brief, w, &s->lines, &total);
}

static const part *core_part(scan *s, int core) {
  if (!s->core[core]) {
    s->core[core] = arena_alloc(s->arena, sizeof **s->core);
    take_off(s, &s->space->cores[core]);
    sum_lines(s, 0, s->lines.count, s->core[core]);
  }
  return s->core[core];
}

static size_t spacing_index(const scan *s, const wall *core, int side) {
  const catalog *c = s->context->catalog;
  const wall_mount *m = &core->mount[side];
  size_t i = 0;
  if (m->mount == CATALOG_NONE) {
    while (c->spacings_mm[i] != core->spacing_mm) i++;
    return i;
  }
  while (c->mount_spacings_mm[i] != m->spacing_mm) i++;
  return c->spacing_count + i;
}

/* Leaf lines follow those of the core; what they take depends on the spacing of the leaves'
 * supports only. */
static const part *leaves_part(scan *s, const feasible_wall *f) {
  const wall *core = &s->space->cores[f->core];
  size_t n = (size_t)s->space->face_count;
  part ***table =
      &s->leaves[spacing_index(s, core, SIDE_A) * s->spacings + spacing_index(s, core, SIDE_B)];
  if (!*table) *table = arena_array(s->arena, n * n, sizeof **table);
  part **place = &(*table)[(size_t)f->face_a * n + f->face_b];
  if (!*place) {
    *place = arena_alloc(s->arena, sizeof **place);
    take_off(s, core);
    int first = 0;
    while (first < s->lines.count && s->lines.line[first].kind != LINE_MARKUP) first++;
    wall w = space_wall(s->space, f->core, f->face_a, f->face_b);
    take_off(s, &w);
    sum_lines(s, first, s->lines.count, *place);
  }
  return *place;
}

static double floor_value(const scan *s, int core, int face_a, int face_b) {
  const brief *b = s->context->brief;
  if (!(b->floor_area_value_per_m2 > 0)) return 0;
  wall w = space_wall(s->space, core, face_a, face_b);
  return wall_thickness_m(s->context->catalog, &w) * b->length_m * b->floor_area_value_per_m2;
}

/* ---- the prices ---- */

static void watch(scan *s, watched w) {
  w.up = w.down = HUGE_VAL;
  s->price[s->count++] = w;
}

static bool watching(const scan *s, int item) {
  for (int i = 0; i < s->count; i++)
    if (s->price[i].item == item) return true;
  return false;
}

static void watch_chosen(scan *s, const wall *w) {
  const price_book *book = s->context->prices;
  take_off(s, w);
  for (int k = 0; k < s->lines.count; k++) {
    const cost_line *l = &s->lines.line[k];
    if (l->kind == LINE_MATERIAL && !watching(s, l->item))
      watch(s, (watched){.item = l->item, .markup = material_markup(book), .price = l->rate});
  }
  for (int t = 0; t < TRADE_COUNT; t++)
    watch(s, (watched){.item = CATALOG_NONE,
                       .trade = (trade)t,
                       .markup = labour_markup(book),
                       .price = book->rate[t]});
  part whole;
  sum_lines(s, 0, s->lines.count, &whole);
  s->cost = whole.cost;
  for (int i = 0; i < s->count; i++) s->price[i].quantity = whole.quantity[i];
}

/* ---- the walls ---- */

/* Whether a wall would pass the chosen one sooner than what is known. */
static bool sooner(const scan *s, const watched *w, double cost, double quantity, double *move,
                   bool *up) {
  double less = w->quantity - quantity;
  if (fabs(less) <= same_quantity * fmax(w->quantity, quantity)) return false;
  *up = less > 0;
  *move = fmax(0, cost - s->cost) / (w->markup * fabs(less));
  return *up ? *move < w->up : *move < w->down && *move < w->price;
}

static void try_wall(scan *s, const feasible_wall *f) {
  const part *core = core_part(s, f->core), *leaves = leaves_part(s, f);
  double cost = core->cost + leaves->cost + floor_value(s, f->core, f->face_a, f->face_b);
  bool sure = f->certain;
  for (int i = 0; i < s->count; i++) {
    watched *w = &s->price[i];
    double move;
    bool up;
    if (!sooner(s, w, cost, core->quantity[i] + leaves->quantity[i], &move, &up)) continue;
    if (!sure && !sweep_confirms(s->space, f)) return;
    sure = true;
    candidate c = {.core = f->core, .face_a = f->face_a, .face_b = f->face_b};
    if (up)
      w->up = move, w->up_wall = c;
    else
      w->down = move, w->down_wall = c;
  }
}

/* ---- the answer ---- */

static const char *line_of(const scan *s, const candidate *c) {
  wall w = space_wall(s->space, c->core, c->face_a, c->face_b);
  return line_print(s->arena, s->context->catalog, &w);
}

static void answer(const scan *s, const watched *w, explain_break_even *out) {
  static const char *const trades[TRADE_COUNT] = {"labour hanger", "labour taper",
                                                  "labour insulator"};
  const price_book *book = s->context->prices;
  bool labour = w->item == CATALOG_NONE;
  *out = (explain_break_even){.price = w->price};
  out->item = labour ? trades[w->trade] : book->items[w->item].code;
  out->unit = labour ? "h" : price_unit_names[book->items[w->item].unit];
  out->has_low = w->down < HUGE_VAL;
  out->has_high = w->up < HUGE_VAL;
  if (out->has_low) {
    out->low = w->price - w->down;
    out->low_line = line_of(s, &w->down_wall);
  }
  if (out->has_high) {
    out->high = w->price + w->up;
    out->high_line = line_of(s, &w->up_wall);
  }
}

void explain_break_evens(arena *a, const space *sp, const sweep_result *r, const candidate *chosen,
                         explanation *out) {
  scan *s = arena_alloc(a, sizeof *s);
  s->arena = a;
  s->space = sp;
  s->context = sp->context;
  s->core = arena_array(a, (size_t)sp->core_count, sizeof *s->core);
  s->spacings = sp->context->catalog->spacing_count + sp->context->catalog->mount_spacing_count;
  s->leaves = arena_array(a, s->spacings * s->spacings, sizeof *s->leaves);
  wall w = space_wall(sp, chosen->core, chosen->face_a, chosen->face_b);
  watch_chosen(s, &w);
  s->cost += floor_value(s, chosen->core, chosen->face_a, chosen->face_b);
  for (const feasible_block *b = r->feasible; b; b = b->next)
    for (int i = 0; i < b->count; i++) try_wall(s, &b->wall[i]);
  out->break_even = arena_array(a, (size_t)s->count, sizeof *out->break_even);
  for (int i = 0; i < s->count; i++)
    if (s->price[i].quantity > 0)
      answer(s, &s->price[i], &out->break_even[out->break_even_count++]);
}
