/* What a choice of types means for rows, types, storeys and sections, to the cent. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "explain/plan_parts.h"
#include "wall/line.h"

long long plan_money_total(const plan_money *m) {
  return m->walls + m->goods + m->setup + m->floor;
}

static void add_money(plan_money *to, const plan_money *m) {
  to->walls += m->walls;
  to->goods += m->goods;
  to->setup += m->setup;
  to->floor += m->floor;
}

/* ---- classes: the type as it stands there ---- */

/* The wall as the class sees it: its side A towards the class's side A. */
static wall as_class_sees(const plan_work *w, const plan_type *t, const type_use *use) {
  return use->turned ? wall_mirrored(w->x->catalog, &t->wall) : t->wall;
}

/* How likely a test meets a target; in the field it is held to the target less the field
 * allowance. Margins added by hand are no part of what a test asks. */
static double test_probability(const brief *b, const assessment *x, const target *asked,
                               bool in_field) {
  target t = *asked;
  double probability = 0;
  t.margin = 0;
  if (in_field && t.basis == BASIS_LAB) {
    t.basis = BASIS_FIELD;
    t.value -= b->field_mean;
  }
  bool composite = t.composite && x->has_composite;
  double exact = composite ? x->composite_exact[t.metric] : x->exact[t.metric];
  int printed = rating_of(composite ? &x->composite : &x->ratings, t.metric);
  (void)judge_passes(&t, b->field_mean, b->field_sd, exact, printed, x->sd[t.metric], false,
                     t.confidence, &probability);
  return probability;
}

static void set_probabilities(const brief *b, plan_place *at) {
  at->in_laboratory = 1;
  at->in_field = 1;
  for (int i = 0; i < b->target_count; i++) {
    at->in_laboratory =
        fmin(at->in_laboratory, test_probability(b, at->wall, &b->targets[i], false));
    at->in_field = fmin(at->in_field, test_probability(b, at->wall, &b->targets[i], true));
  }
}

/* `type` is that of w->types until the used ones have places. */
static void set_place(plan_work *w, int of_class) {
  plan_place *at = &w->out->place[of_class];
  const schedule_class *k = &w->x->schedule->classes[of_class];
  int place = w->place_of[of_class];
  *at = (plan_place){.type = PLAN_NONE, .locked = k->locked != CATALOG_NONE};
  if (place == PLAN_NONE) return;
  at->type = w->kind[w->best.type_of[place]];
  const plan_type *t = &w->types.type[at->type];
  judge_context asking = {.catalog = w->x->catalog, .prices = w->x->prices, .brief = &k->demand};
  wall seen = as_class_sees(w, t, &t->use[of_class]);
  at->wall = arena_alloc(w->arena, sizeof *at->wall);
  judge_wall(w->arena, &asking, &seen, at->wall);
  at->margin_db = at->wall->numbers.promised_hundredth * 0.01;
  set_probabilities(&k->demand, at);
}

/* ---- the types used ---- */

/* The hardest class: where the margin is least; of equals, and without targets, the longest run. */
static bool is_harder(const plan_work *w, int one, int other) {
  const schedule_class *a = &w->x->schedule->classes[one];
  const schedule_class *b = &w->x->schedule->classes[other];
  bool asks = a->demand.target_count > 0, asked = b->demand.target_count > 0;
  if (asks != asked) return asks;
  int x = w->out->place[one].wall->numbers.promised_hundredth;
  int y = w->out->place[other].wall->numbers.promised_hundredth;
  if (asks && x != y) return x < y;
  return a->run_m > b->run_m;
}

static plan_used *used_of(plan_work *w, int type_index, int *slot) {
  plan_answer *out = w->out;
  if (slot[type_index] < 0) slot[type_index] = out->type_count++;
  return &out->type[slot[type_index]];
}

static void gather_types(plan_work *w, int *slot) {
  plan_answer *out = w->out;
  int classes = w->x->schedule->class_count;
  out->type = arena_array(w->arena, (size_t)classes, sizeof *out->type);
  for (int c = 0; c < classes; c++) {
    plan_place *at = &out->place[c];
    if (at->type == PLAN_NONE) continue;
    bool first = slot[at->type] < 0;
    plan_used *u = used_of(w, at->type, slot);
    at->type = slot[at->type];
    u->run_m += w->x->schedule->classes[c].run_m;
    u->locked = u->locked || at->locked;
    if (first || is_harder(w, c, u->judged_as)) u->judged_as = c;
  }
  for (int t = 0; t < w->types.count; t++)
    if (slot[t] >= 0) out->type[slot[t]].candidate = t;
  for (int i = 0; i < out->type_count; i++) {
    plan_used *u = &out->type[i];
    u->as = out->place[u->judged_as].wall;
    u->demand = &w->x->schedule->classes[u->judged_as].demand;
    u->wall = u->as->wall;
    u->line = u->as->line;
  }
}

static const char *mark_of(const plan_work *w, const wall *given) {
  const project *p = w->x->project;
  for (int i = 0; i < p->mark_count; i++) {
    wall mirrored = wall_mirrored(w->x->catalog, &w->mark_wall[i]);
    if (wall_same(given, &w->mark_wall[i]) || wall_same(given, &mirrored)) return p->mark[i].mark;
  }
  return NULL;
}

static bool is_mark(const project *p, const char *name) {
  return project_find_mark(p, name) != CATALOG_NONE;
}

static void name_types(plan_work *w) {
  int next = 0;
  for (int i = 0; i < w->out->type_count; i++) {
    plan_used *u = &w->out->type[i];
    u->mark = mark_of(w, &u->wall);
    u->name = u->mark;
    if (u->name) continue;
    do {
      u->name = text_format(w->arena, "T%d", ++next);
    } while (is_mark(w->x->project, u->name));
  }
}

typedef struct ranked_type {
  plan_used used;
  int was;
} ranked_type;

static int longest_first(const void *x, const void *y) {
  const ranked_type *p = x, *q = y;
  if (p->used.run_m < q->used.run_m || p->used.run_m > q->used.run_m)
    return p->used.run_m > q->used.run_m ? -1 : 1;
  return strcmp(p->used.line, q->used.line);
}

static void sort_types(plan_work *w) {
  plan_answer *out = w->out;
  size_t n = (size_t)out->type_count;
  ranked_type *rank = arena_array(w->arena, n, sizeof *rank);
  int *now = arena_array(w->arena, n, sizeof *now);
  for (size_t i = 0; i < n; i++) rank[i] = (ranked_type){out->type[i], (int)i};
  if (n > 0) qsort(rank, n, sizeof *rank, longest_first);
  for (size_t i = 0; i < n; i++) {
    out->type[i] = rank[i].used;
    now[rank[i].was] = (int)i;
  }
  for (int c = 0; c < w->x->schedule->class_count; c++)
    if (out->place[c].type != PLAN_NONE) out->place[c].type = now[out->place[c].type];
}

static void set_types(plan_work *w) {
  int *slot = arena_array(w->arena, (size_t)w->types.count, sizeof *slot);
  for (int t = 0; t < w->types.count; t++) slot[t] = PLAN_NONE;
  gather_types(w, slot);
  sort_types(w);
  name_types(w);
  for (int c = 0; c < w->x->schedule->class_count; c++) {
    plan_place *at = &w->out->place[c];
    if (at->type != PLAN_NONE)
      at->turned = !wall_same(&at->wall->wall, &w->out->type[at->type].wall);
  }
}

/* ---- rows ---- */

/* Sums under way. */
typedef struct tally {
  plan_work *w;
  int section_cap, need_cap;
} tally;

static plan_section *section_of(tally *k, const char *name) {
  plan_answer *out = k->w->out;
  for (int i = 0; i < out->section_count; i++)
    if (text_equal(out->section[i].section, name)) return &out->section[i];
  if (out->section_count == k->section_cap) {
    size_t bytes = (size_t)k->section_cap * sizeof *out->section;
    out->section = arena_grow(k->w->arena, out->section, bytes, 2 * bytes);
    k->section_cap *= 2;
  }
  out->section[out->section_count] = (plan_section){.section = name};
  return &out->section[out->section_count++];
}

static plan_need *need_of(tally *k, int item, const char *section, double stud_m) {
  plan_answer *out = k->w->out;
  for (int i = 0; i < out->need_count; i++) {
    plan_need *n = &out->need[i];
    bool same_length = fabs(n->stud_m - stud_m) < 1e-9; /* stock lengths are of one list */
    if (n->item == item && same_length && text_equal(n->section, section)) return n;
  }
  if (out->need_count == k->need_cap) {
    size_t bytes = (size_t)k->need_cap * sizeof *out->need;
    out->need = arena_grow(k->w->arena, out->need, bytes, 2 * bytes);
    k->need_cap *= 2;
  }
  plan_need *n = &out->need[out->need_count++];
  *n = (plan_need){.item = item, .section = section, .stud_m = stud_m};
  n->goods = plan_goods_index(k->w, item);
  return n;
}

/* The stock length that an item of the wall is cut from; 0 for what is no stud. */
static double stud_length(const plan_work *w, int row, const wall *built, int item) {
  if (w->x->prices->studs[built->frame].item != item) return 0;
  brief b;
  schedule_brief(w->x->schedule, row, &b);
  return cost_stud_length_m(w->x->prices, w->x->catalog, &b, built);
}

/* The takeoff of one copy, in w->lines, into sections and needs. */
static void tally_lines(tally *k, int row, const wall *built) {
  plan_work *w = k->w;
  int copies = w->x->schedule->wall[row].count;
  for (int i = 0; i < w->lines->count; i++) {
    const cost_line *l = &w->lines->line[i];
    if (l->kind == LINE_MARKUP) continue;
    plan_section *s = section_of(k, l->section);
    if (l->kind == LINE_LABOUR) {
      s->labour_cents += copies * l->cents;
      s->hours += copies * l->quantity;
      continue;
    }
    plan_need *n = need_of(k, l->item, l->section, stud_length(w, row, built, l->item));
    n->quantity += copies * l->quantity;
    if (n->goods < 0) s->material_cents += copies * l->cents;
    if (n->goods >= 0) w->row_need[row * w->problem.items + n->goods] += copies * l->quantity;
  }
}

static void set_row(tally *k, int row) {
  plan_work *w = k->w;
  const schedule_wall *from = &w->x->schedule->wall[row];
  const plan_place *at = &w->out->place[from->of_class];
  plan_row *r = &w->out->row[row];
  *r = (plan_row){.type = at->type, .run_m = from->count * from->length_m};
  if (at->type == PLAN_NONE) return;
  wall built = from->turned ? wall_mirrored(w->x->catalog, &at->wall->wall) : at->wall->wall;
  r->mirrored = !wall_same(&built, &w->out->type[at->type].wall);
  r->line = line_print(w->arena, w->x->catalog, &built);
  plan_costed c = plan_cost_row(w, row, &at->wall->wall);
  r->money.walls = from->count * c.alone.total_cents;
  r->money.floor = from->count * c.alone.floor_value_cents;
  r->list_cents = from->count * c.list.total_cents;
  r->area_m2 = from->count * c.list.area_m2;
  r->floor_m2 = r->run_m * at->wall->thickness_m;
  tally_lines(k, row, &at->wall->wall);
}

/* Each row bears of an item's price what it needs of it: shares that add up to the whole. */
static void share_goods(plan_work *w) {
  plan_answer *out = w->out;
  int items = w->problem.items;
  for (int i = 0; i < items; i++) {
    double all = 0, before = 0;
    long long given = 0;
    for (int row = 0; row < w->x->schedule->count; row++) all += w->row_need[row * items + i];
    for (int row = 0; all > 0 && row < w->x->schedule->count; row++) {
      before += w->row_need[row * items + i];
      double part = before < all ? before / all : 1;
      long long upto = llround(part * (double)w->best.buy[i].cents);
      out->row[row].money.goods += upto - given;
      given = upto;
    }
  }
}

/* ---- sums of rows ---- */

static void add_to_type(plan_work *w, int row) {
  const plan_row *r = &w->out->row[row];
  plan_used *u = &w->out->type[r->type];
  u->row[u->row_count++] = row;
  u->walls += w->x->schedule->wall[row].count;
  u->area_m2 += r->area_m2;
  u->floor_m2 += r->floor_m2;
  add_money(&u->money, &r->money);
}

static plan_storey *storey_of(plan_work *w, const char *name) {
  plan_answer *out = w->out;
  for (int i = 0; i < out->storey_count; i++)
    if (text_equal(out->storey[i].name, name)) return &out->storey[i];
  out->storey[out->storey_count] = (plan_storey){.name = name};
  return &out->storey[out->storey_count++];
}

static void add_to_storey(plan_work *w, int row) {
  const schedule_wall *from = &w->x->schedule->wall[row];
  const plan_row *r = &w->out->row[row];
  plan_storey *s = storey_of(w, from->storey);
  s->row_count++;
  s->walls += from->count;
  s->unplanned += r->type == PLAN_NONE;
  s->run_m += r->run_m;
  s->area_m2 += r->area_m2;
  s->floor_m2 += r->floor_m2;
  add_money(&s->money, &r->money);
}

static void add_misses(plan_work *w, int row) {
  const schedule_wall *from = &w->x->schedule->wall[row];
  const plan_place *at = &w->out->place[from->of_class];
  if (at->type == PLAN_NONE || w->x->schedule->classes[from->of_class].demand.target_count == 0)
    return;
  w->out->asked_walls += from->count;
  w->out->miss_laboratory += from->count * (1 - at->in_laboratory);
  w->out->miss_field += from->count * (1 - at->in_field);
}

static void sum_rows(plan_work *w) {
  const schedule *s = w->x->schedule;
  plan_answer *out = w->out;
  out->storey = arena_array(w->arena, (size_t)s->storey_count + 1, sizeof *out->storey);
  for (int i = 0; i < out->type_count; i++)
    out->type[i].row = arena_array(w->arena, (size_t)s->count, sizeof(int));
  for (int row = 0; row < s->count; row++) {
    add_to_storey(w, row);
    add_misses(w, row);
    if (out->row[row].type == PLAN_NONE) continue;
    add_to_type(w, row);
    out->floor_m2 += out->row[row].floor_m2;
    add_money(&out->money, &out->row[row].money);
  }
  for (int i = 0; i < out->type_count; i++) {
    out->type[i].money.setup = w->problem.setup_cents;
    out->money.setup += w->problem.setup_cents;
  }
}

/* ---- goods, sections ---- */

static const char *goods_section(const plan_answer *out, const price_book *book, int goods) {
  for (int i = 0; i < out->need_count; i++)
    if (out->need[i].goods == goods) return out->need[i].section;
  return book->items[out->goods[goods].item].section;
}

static void set_goods(tally *k) {
  plan_work *w = k->w;
  plan_answer *out = w->out;
  double markup = plan_markup(w->x->prices);
  out->goods_count = w->problem.items;
  out->goods = arena_array(w->arena, (size_t)out->goods_count, sizeof *out->goods);
  for (int i = 0; i < out->goods_count; i++) {
    out->goods[i] = (plan_goods){.item = w->types.item[w->goods[i]], .buy = w->best.buy[i]};
    if (out->goods[i].buy.cents == 0) continue;
    section_of(k, goods_section(out, w->x->prices, i))->material_cents +=
        llround((double)out->goods[i].buy.cents / markup);
  }
}

static int by_section(const void *x, const void *y) {
  const plan_section *p = x, *q = y;
  return strcmp(p->section, q->section);
}

static int by_section_and_item(const void *x, const void *y) {
  const plan_need *p = x, *q = y;
  int order = strcmp(p->section, q->section);
  if (order != 0) return order;
  if (p->item != q->item) return p->item - q->item;
  return (p->stud_m > q->stud_m) - (p->stud_m < q->stud_m);
}

static void finish_sections(plan_work *w) {
  plan_answer *out = w->out;
  if (out->need_count > 0)
    qsort(out->need, (size_t)out->need_count, sizeof *out->need, by_section_and_item);
  if (out->section_count > 0)
    qsort(out->section, (size_t)out->section_count, sizeof *out->section, by_section);
  out->markup_cents = out->money.walls + out->money.goods;
  for (int i = 0; i < out->section_count; i++)
    out->markup_cents -= out->section[i].material_cents + out->section[i].labour_cents;
}

/* ---- the whole ---- */

bool plan_set_rows(plan_work *w) {
  enum { SECTIONS_AT_FIRST = 16, NEEDS_AT_FIRST = 64 };
  const schedule *s = w->x->schedule;
  plan_answer *out = w->out;
  tally k = {.w = w, .section_cap = SECTIONS_AT_FIRST, .need_cap = NEEDS_AT_FIRST};
  out->section = arena_array(w->arena, SECTIONS_AT_FIRST, sizeof *out->section);
  out->need = arena_array(w->arena, NEEDS_AT_FIRST, sizeof *out->need);
  w->row_need = arena_array(w->arena, (size_t)(s->count * w->problem.items), sizeof *w->row_need);
  for (int c = 0; c < s->class_count; c++) set_place(w, c);
  set_types(w);
  for (int row = 0; row < s->count; row++) set_row(&k, row);
  share_goods(w);
  sum_rows(w);
  set_goods(&k);
  finish_sections(w);
  if (plan_money_total(&out->money) == w->best.cost_cents) return true;
  diag_error(w->diags, ERROR_INTERNAL, "the parts of the plan add up to %lld, the model says %lld",
             plan_money_total(&out->money), w->best.cost_cents);
  return false;
}
