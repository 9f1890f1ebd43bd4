/* From types and schedule to the problem that the solver sees. */
#include <string.h>

#include "explain/plan_parts.h"

/* ---- what a row costs ---- */

/* Of types.item, whether any wall needs it or not; -1: bought wall by wall. */
static int tiered(const plan_work *w, int item) {
  for (int i = 0; i < w->types.items; i++)
    if (w->types.item[i] == item) return i;
  return -1;
}

int plan_goods_index(const plan_work *w, int item) {
  int i = tiered(w, item);
  return i >= 0 ? w->goods_of[i] : -1;
}

double plan_markup(const price_book *book) {
  return (1 + book->sales_tax) * (1 + book->overhead_profit);
}

static long long goods_material(const plan_work *w, const takeoff *t) {
  long long cents = 0;
  for (int i = 0; i < t->count; i++) {
    const cost_line *l = &t->line[i];
    if (l->kind == LINE_MATERIAL && tiered(w, l->item) >= 0) cents += l->cents;
  }
  return cents;
}

plan_costed plan_cost_row(plan_work *w, int row, const wall *built) {
  const plan_context *x = w->x;
  plan_costed c;
  brief b;
  schedule_brief(x->schedule, row, &b);
  cost_takeoff(x->prices, x->catalog, &b, built, w->lines, &c.list);
  cost_parts parts = {.material_cents = c.list.material_cents - goods_material(w, w->lines),
                      .labour_cents = c.list.labour_cents,
                      .hours = c.list.hours};
  c.alone = cost_sum(x->prices, &b, wall_thickness_m(x->catalog, built), parts, (cost_parts){0});
  return c;
}

/* ---- rows that keep the drawings' type ---- */

static int find_type(const plan_work *w, const wall *given) {
  wall mirrored = wall_mirrored(w->x->catalog, given);
  for (int t = 0; t < w->types.count; t++) {
    const wall *one = &w->types.type[t].wall;
    if (wall_same(one, given) || wall_same(one, &mirrored)) return t;
  }
  return PLAN_NONE;
}

/* The wall of a mark becomes a type of its own: it serves its own rows though it may miss what they
 * ask. */
static int add_type(plan_work *w, const wall *given) {
  plan_types *all = &w->types;
  size_t bytes = (size_t)all->count * sizeof *all->type;
  plan_type *grown = arena_grow(w->arena, all->type, bytes, bytes + sizeof *grown);
  if (!types_of_wall(w->arena, w->x, all, given, &grown[all->count])) return PLAN_NONE;
  grown[all->count].behind = TYPES_NONE;
  all->type = grown;
  return all->count++;
}

/* The type as the class of its mark: its side A towards the class's side A, as the drawings have
 * it. */
static void set_locked_use(plan_work *w, int of_class, plan_type *t, const wall *given) {
  const schedule_class *k = &w->x->schedule->classes[of_class];
  judge_context asking = {.catalog = w->x->catalog, .prices = w->x->prices, .brief = &k->demand};
  assessment *judged = arena_alloc(w->arena, sizeof *judged);
  judge_wall(w->arena, &asking, given, judged);
  type_use *use = &t->use[of_class];
  double *need = t->need + (size_t)of_class * (size_t)w->types.items;
  *use = (type_use){.fits = true,
                    .turned = !wall_same(given, &t->wall),
                    .margin_hundredth = judged->numbers.promised_hundredth};
  memset(need, 0, (size_t)w->types.items * sizeof *need);
  for (int i = 0; i < k->count; i++) {
    const schedule_wall *row = &w->x->schedule->wall[k->wall[i]];
    plan_costed c = plan_cost_row(w, k->wall[i], given);
    use->cents += row->count * (c.alone.total_cents + c.alone.floor_value_cents);
    use->floor_m2 += row->count * row->length_m * judged->thickness_m;
    for (int l = 0; l < w->lines->count; l++) {
      const cost_line *line = &w->lines->line[l];
      int goods = line->kind == LINE_MATERIAL ? tiered(w, line->item) : -1;
      if (goods >= 0) need[goods] += row->count * line->quantity;
    }
  }
}

void plan_lock(plan_work *w) {
  const schedule *s = w->x->schedule;
  for (int c = 0; c < s->class_count; c++) {
    if (s->classes[c].locked == CATALOG_NONE) continue;
    const wall *given = &w->mark_wall[s->classes[c].locked];
    int type = find_type(w, given);
    if (type == PLAN_NONE)
      type = add_type(w, given);
    else
      w->types.type[type].behind = TYPES_NONE; /* needed, whatever other type is as good elsewhere */
    for (int t = 0; t < w->types.count; t++) w->types.type[t].use[c].fits = false;
    if (type != PLAN_NONE) set_locked_use(w, c, &w->types.type[type], given);
  }
}

/* ---- goods ---- */

/* The price from the minimum order on, and each break beyond it. */
static void set_tiers(const plan_work *w, const price_item *item, plan_item *out) {
  const price_book *book = w->x->prices;
  bool breaks = w->x->project->quantity_breaks;
  double markup = plan_markup(book);
  out->tier[0] =
      (plan_tier){.from = breaks ? item->minimum_order : 0, .price = item->price * markup};
  out->tier_count = 1;
  for (size_t i = 0; breaks && i < item->break_count; i++) {
    plan_tier next = {.from = item->breaks[i].from, .price = item->breaks[i].price * markup};
    if (next.from > out->tier[out->tier_count - 1].from && out->tier_count < PLAN_MAX_TIERS)
      out->tier[out->tier_count++] = next;
    else
      out->tier[out->tier_count - 1].price = next.price;
  }
}

/* Marks what types need where they fit. */
static void mark_typed(const plan_work *w, bool *needed) {
  int items = w->types.items;
  for (int t = 0; t < w->types.count; t++)
    for (int c = 0; c < w->x->schedule->class_count; c++) {
      const plan_type *one = &w->types.type[t];
      for (int i = 0; one->use[c].fits && i < items; i++)
        needed[i] = needed[i] || one->need[c * items + i] > 0;
    }
}

/* And what the walls of the drawings need, which the plan is compared with. */
static void mark_drawn(plan_work *w, bool *needed) {
  const schedule *s = w->x->schedule;
  for (int row = 0; row < s->count; row++) {
    if (s->wall[row].mark == CATALOG_NONE) continue;
    (void)plan_cost_row(w, row, &w->mark_wall[s->wall[row].mark]);
    for (int l = 0; l < w->lines->count; l++) {
      const cost_line *line = &w->lines->line[l];
      int at = line->kind == LINE_MATERIAL ? tiered(w, line->item) : -1;
      if (at >= 0) needed[at] = true;
    }
  }
}

static void list_goods(plan_work *w) {
  size_t items = (size_t)w->types.items;
  bool *needed = arena_array(w->arena, items, sizeof *needed);
  w->goods = arena_array(w->arena, items, sizeof *w->goods);
  w->goods_of = arena_array(w->arena, items, sizeof *w->goods_of);
  mark_typed(w, needed);
  mark_drawn(w, needed);
  for (int i = 0; i < w->types.items; i++) {
    w->goods_of[i] = needed[i] ? w->problem.items : -1;
    if (needed[i]) w->goods[w->problem.items++] = i;
  }
}

static const plan_item *set_goods(plan_work *w) {
  const project *p = w->x->project;
  plan_item *all = arena_array(w->arena, (size_t)w->problem.items, sizeof *all);
  for (int i = 0; i < w->problem.items; i++) {
    const price_item *item = &w->x->prices->items[w->types.item[w->goods[i]]];
    all[i].code = item->code;
    set_tiers(w, item, &all[i]);
    for (int k = 0; k < p->stock_count; k++)
      if (text_equal(p->stock[k].item, item->code)) all[i].stock += p->stock[k].quantity;
  }
  return all;
}

long long plan_goods_cost(plan_work *w, const double *need) {
  const long long nothing_else = 0;
  const int only = 0, margin = 0;
  const double none = 0;
  plan_problem p = {.classes = 1,
                    .types = 1,
                    .items = w->problem.items,
                    .cents = &nothing_else,
                    .need = need,
                    .floor_m2 = &none,
                    .margin = &margin,
                    .run_m = &none,
                    .item = w->problem.item};
  return plan_cost(&p, &only, NULL);
}

/* ---- the problem ---- */

static bool plannable(const plan_work *w, int of_class) {
  for (int t = 0; t < w->types.count; t++)
    if (w->types.type[t].use[of_class].fits) return true;
  return false;
}

static void number_classes(plan_work *w) {
  int n = w->x->schedule->class_count;
  w->class_of = arena_array(w->arena, (size_t)n, sizeof *w->class_of);
  w->place_of = arena_array(w->arena, (size_t)n, sizeof *w->place_of);
  for (int c = 0; c < n; c++) {
    w->place_of[c] = PLAN_NONE;
    if (!plannable(w, c)) continue;
    w->place_of[c] = w->problem.classes;
    w->class_of[w->problem.classes++] = c;
  }
}

/* Storeys that must be framed alike, as indices; NULL when framing is free. */
static int *storeys_of(plan_work *w, int *count) {
  const schedule *s = w->x->schedule;
  project_framing framing = w->x->project->same_framing;
  *count = 0;
  if (framing == FRAMING_FREE) return NULL;
  int *storey = arena_array(w->arena, (size_t)w->problem.classes, sizeof *storey);
  for (int c = 0; c < w->problem.classes; c++) {
    int before = 0;
    while (before < c &&
           !text_equal(s->classes[w->class_of[before]].storey, s->classes[w->class_of[c]].storey))
      before++;
    bool alike = framing == FRAMING_ALL && c > 0;
    storey[c] = alike ? 0 : before < c ? storey[before] : (*count)++;
  }
  return storey;
}

/* The types that plans without type `without` can need (PLAN_NONE: all plans). */
static int *list_kinds(plan_work *w, int without, int *count) {
  int *kind = arena_array(w->arena, (size_t)w->types.count, sizeof *kind);
  *count = 0;
  for (int t = 0; t < w->types.count; t++) {
    int behind = w->types.type[t].behind;
    bool needed = behind == TYPES_NONE || (without != PLAN_NONE && behind == without);
    if (t != without && needed) kind[(*count)++] = t;
  }
  return kind;
}

static void set_pairs(plan_work *w, const int *kind, plan_problem *p) {
  size_t items = (size_t)p->items, all = (size_t)w->types.items;
  size_t types = (size_t)p->types, pairs = (size_t)p->classes * types;
  long long *cents = arena_array(w->arena, pairs, sizeof *cents);
  double *need = arena_array(w->arena, pairs * items, sizeof *need);
  double *floor_m2 = arena_array(w->arena, pairs, sizeof *floor_m2);
  int *margin = arena_array(w->arena, pairs, sizeof *margin);
  for (size_t k = 0; k < pairs; k++) {
    size_t of_class = (size_t)w->class_of[k / types];
    const plan_type *t = &w->types.type[kind[k % types]];
    const type_use *use = &t->use[of_class];
    cents[k] = use->fits ? use->cents : -1;
    if (!use->fits) continue;
    floor_m2[k] = use->floor_m2;
    margin[k] = use->margin_hundredth;
    for (size_t i = 0; i < items; i++)
      need[k * items + i] = t->need[of_class * all + (size_t)w->goods[i]];
  }
  p->cents = cents;
  p->need = need;
  p->floor_m2 = floor_m2;
  p->margin = margin;
}

static void set_types(plan_work *w, const int *kind, plan_problem *p) {
  int *group = arena_array(w->arena, (size_t)p->types, sizeof *group);
  p->groups = 0;
  for (int t = 0; t < p->types; t++) {
    group[t] = w->types.type[kind[t]].group;
    if (group[t] >= p->groups) p->groups = group[t] + 1;
  }
  p->group = group;
  set_pairs(w, kind, p);
}

static void set_rules(plan_work *w) {
  const project *from = w->x->project;
  plan_problem *p = &w->problem;
  p->setup_cents = cost_cents(from->type_setup_cost);
  p->budget_cents = cost_cents(from->budget);
  p->min_run_m = from->min_run_m;
  p->floor_max_m2 = from->floor_area_max_m2;
  p->max_types = from->max_types;
  p->storey = storeys_of(w, &p->storeys);
}

void plan_set_problem(plan_work *w) {
  plan_problem *p = &w->problem;
  *p = (plan_problem){0};
  number_classes(w);
  list_goods(w);
  p->item = set_goods(w);
  w->kind = list_kinds(w, PLAN_NONE, &p->types);
  set_types(w, w->kind, p);
  double *run_m = arena_array(w->arena, (size_t)p->classes, sizeof *run_m);
  for (int c = 0; c < p->classes; c++) run_m[c] = w->x->schedule->classes[w->class_of[c]].run_m;
  p->run_m = run_m;
  set_rules(w);
}

void plan_problem_without(plan_work *w, int type, plan_problem *out) {
  *out = w->problem;
  set_types(w, list_kinds(w, type, &out->types), out);
}
