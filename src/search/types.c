#include "search/types.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "acoustics/predict.h"
#include "search/types_sweep.h"
#include "wall/line.h"

/* What is over this is dearer, where goods of several prices are compared: more than the last bits
 * of such sums. */
static const double last_bits_cents = 1e-3;

typedef struct finder {
  arena *arena;
  const plan_context *x;
  types_sweep sweep;
  plan_types *out;
  double *least;    /* per type and class: see least_cents */
  long long *total; /* per type: cents of all classes that it fits */
} finder;

/* ---- one type, to the cent ---- */

static wall way_round(const finder *f, const wall *w, bool turned) {
  return turned ? wall_mirrored(f->x->catalog, w) : *w;
}

/* The cheaper of the ways round that fit. False where an item has no price. */
static bool set_cents(const finder *f, int c, const wall *w, const bool fits[2], type_use *u) {
  bool found = false;
  for (int way = 0; way < 2; way++) {
    long long cents;
    wall as = way_round(f, w, way == 1);
    if (!fits[way] || !types_cost_exact(f->sweep.cost, c, &as, &cents)) continue;
    if (found && cents >= u->cents) continue;
    u->cents = cents;
    u->turned = way == 1;
    found = true;
  }
  return found;
}

static void set_use(const finder *f, int c, const wall *w, const prediction *p,
                    const wall_row *match, const ask_set *who, type_use *u) {
  bool fits[2] = {ask_set_has(who, c), ask_set_has(who, ASK_TURNED + c)};
  judge_context asking = {f->x->catalog, f->x->prices, &f->x->schedule->classes[c].demand};
  judge_sound v = judge_targets(&asking, p, match, NULL);
  if (v.broken) return;
  u->fits = set_cents(f, c, w, fits, u);
  u->margin_hundredth = v.promised_hundredth;
  u->floor_m2 = types_cost_floor_m2(f->sweep.cost, c, w);
}

static void set_needs(const finder *f, const types_entry *e, plan_type *t) {
  size_t classes = (size_t)f->x->schedule->class_count, items = (size_t)f->sweep.goods.count;
  const types_needs *n = &e->needs;
  for (int i = 0; i < n->count; i++)
    for (size_t c = 0; c < classes; c++) {
      if (!t->use[c].fits) continue;
      size_t at = c * items + (size_t)n->item[i];
      long long amount = n->amount[n->sided && t->use[c].turned][(size_t)i * classes + c];
      t->need[at] = (double)amount * TYPES_NEED_UNIT; /* the same number for the same amount */
    }
}

/* The wall as the reference rates it. False when it fits no class after all. */
static bool set_type(finder *f, const types_entry *e, plan_type *t) {
  const types_sweep *s = &f->sweep;
  size_t classes = (size_t)f->x->schedule->class_count, items = (size_t)s->goods.count;
  wall w = space_wall(&s->space, e->core, e->face_a, e->face_b);
  prediction p;
  bool any = false;
  predict_wall(f->x->catalog, &w, &p);
  const wall_row *match = evidence_match(f->x->catalog, &w);
  f->out->rated++;
  *t = (plan_type){.wall = w, .group = s->group_of[w.frame], .behind = TYPES_NONE};
  t->use = arena_array(f->arena, classes, sizeof *t->use);
  for (size_t c = 0; c < classes; c++) {
    if (!ask_set_class(&e->perhaps, (int)c)) continue;
    set_use(f, (int)c, &w, &p, match, &e->perhaps, &t->use[c]);
    any = any || t->use[c].fits;
  }
  if (!any) return false;
  t->line = line_print(f->arena, f->x->catalog, &w);
  t->need = arena_array(f->arena, classes * items, sizeof *t->need);
  set_needs(f, e, t);
  return true;
}

/* ---- which makes which needless ---- */

/* The cents of a use with goods at their lowest prices. */
static double least_cents(const finder *f, const plan_type *t, int c) {
  const goods *g = &f->sweep.goods;
  if (!t->use[c].fits) return INFINITY;
  double cents = (double)t->use[c].cents;
  for (int i = 0; i < g->count; i++)
    cents += t->need[(size_t)c * (size_t)g->count + (size_t)i] * g->price[i].least;
  return cents;
}

static void set_least(finder *f) {
  size_t classes = (size_t)f->x->schedule->class_count;
  f->least = arena_array(f->arena, (size_t)f->out->count * classes, sizeof *f->least);
  for (size_t t = 0; t < (size_t)f->out->count; t++)
    for (size_t c = 0; c < classes; c++)
      f->least[t * classes + c] = least_cents(f, &f->out->type[t], (int)c);
}

/* Whether all that goods can make of it leaves x no dearer than y in class c. */
static bool costs_no_more(const finder *f, int x, int y, int c) {
  const goods *g = &f->sweep.goods;
  const type_use *p = &f->out->type[x].use[c], *q = &f->out->type[y].use[c];
  size_t from = (size_t)c * (size_t)g->count;
  const double *is = f->out->type[x].need + from, *was = f->out->type[y].need + from;
  double change = 0;
  bool more = false; /* x needs more of something */
  for (int i = 0; i < g->count; i++) {
    if (!(is[i] < was[i]) && !(is[i] > was[i])) continue;
    more = more || is[i] > was[i];
    change += g->price[i].least * (is[i] - was[i]) + goods_worst(&g->price[i], was[i], is[i]);
  }
  if (!more && p->cents <= q->cents) return true;
  return (double)(p->cents - q->cents) + change <= -last_bits_cents;
}

/* Most pairs are told apart by this: goods make no difference smaller than their lowest prices do.
 */
static bool may_cost_no_more(const finder *f, int x, int y) {
  size_t classes = (size_t)f->x->schedule->class_count;
  const double *p = f->least + (size_t)x * classes, *q = f->least + (size_t)y * classes;
  for (size_t c = 0; c < classes; c++)
    if (p[c] > q[c] + last_bits_cents) return false;
  return true;
}

/* Whether x in the place of y keeps every rule of the project and never costs more. */
static bool stands_for(const finder *f, int x, int y) {
  const plan_type *p = &f->out->type[x], *q = &f->out->type[y];
  const project *j = f->x->project;
  if (!may_cost_no_more(f, x, y)) return false;
  if (j->same_framing != FRAMING_FREE && p->group != q->group) return false;
  for (int c = 0; c < f->x->schedule->class_count; c++) {
    const type_use *u = &p->use[c], *v = &q->use[c];
    if (!v->fits) continue;
    if (!u->fits) return false;
    if (j->floor_area_max_m2 > 0 && u->floor_m2 > v->floor_m2) return false;
    if (j->aim == AIM_MARGIN && u->margin_hundredth < v->margin_hundredth) return false;
    if (!costs_no_more(f, x, y, c)) return false;
  }
  return true;
}

/* How many make type y needless, up to two; *by one of them. Types are in tie order: of two that
 * stand for each other the first does. */
static int beaten_by(const finder *f, int y, int *by) {
  int times = 0;
  for (int x = 0; x < f->out->count && times < 2; x++) {
    if (x == y || !stands_for(f, x, y) || (x > y && stands_for(f, y, x))) continue;
    *by = x;
    times++;
  }
  return times;
}

static void drop_beaten(finder *f, int keep) {
  plan_types *o = f->out;
  size_t n = (size_t)o->count;
  int *by = arena_array(f->arena, n, sizeof *by), *times = arena_array(f->arena, n, sizeof *times);
  int *place = arena_array(f->arena, n, sizeof *place), kept = 0;
  set_least(f);
  for (int i = 0; i < o->count; i++) times[i] = beaten_by(f, i, &by[i]);
  for (int i = 0; i < o->count; i++) place[i] = times[i] < keep ? kept++ : TYPES_NONE;
  for (int i = 0; i < o->count; i++) {
    if (place[i] == TYPES_NONE) continue;
    plan_type t = o->type[i];
    t.behind = times[i] == 1 ? place[by[i]] : TYPES_NONE;
    o->type[place[i]] = t;
  }
  o->count = kept;
}

/* ---- order ---- */

typedef struct ordered_type {
  plan_type type;
  long long total;
} ordered_type;

static int in_tie_order(const void *x, const void *y) {
  const ordered_type *p = x, *q = y;
  if (p->total != q->total) return p->total < q->total ? -1 : 1;
  return strcmp(p->type.line, q->type.line);
}

static long long total_of(const plan_type *t, int classes) {
  long long sum = 0;
  for (int c = 0; c < classes; c++)
    if (t->use[c].fits) sum += t->use[c].cents;
  return sum;
}

static void set_types(finder *f) {
  const types_sweep *s = &f->sweep;
  size_t n = (size_t)s->count;
  ordered_type *list = arena_array(f->arena, n, sizeof *list);
  int count = 0;
  for (int i = 0; i < s->count; i++) {
    ordered_type *t = &list[count];
    if (!set_type(f, s->item[i], &t->type)) continue;
    t->total = total_of(&t->type, f->x->schedule->class_count);
    count++;
  }
  if (count > 0) qsort(list, (size_t)count, sizeof *list, in_tie_order);
  f->out->type = arena_array(f->arena, (size_t)count, sizeof *f->out->type);
  for (int i = 0; i < count; i++) f->out->type[i] = list[i].type;
  f->out->count = count;
}

/* ---- what no type fits ---- */

static bool fits_some(const plan_types *o, int c) {
  for (int i = 0; i < o->count; i++)
    if (o->type[i].use[c].fits) return true;
  return false;
}

static type_refusal *refusal_of(const finder *f, int c) {
  type_refusal *r = arena_alloc(f->arena, sizeof *r);
  r->context = (judge_context){f->x->catalog, f->x->prices, &f->x->schedule->classes[c].demand};
  space_build(f->arena, &r->context, &r->space);
  sweep_run(f->arena, &r->space, &r->why);
  return r;
}

static void set_refused(finder *f) {
  const schedule *s = f->x->schedule;
  f->out->refused = arena_array(f->arena, (size_t)s->class_count, sizeof *f->out->refused);
  for (int c = 0; c < s->class_count; c++)
    if (s->classes[c].locked == CATALOG_NONE && !fits_some(f->out, c))
      f->out->refused[c] = refusal_of(f, c);
}

/* ---- the whole ---- */

void types_find(arena *a, const plan_context *x, int keep, plan_types *out) {
  *out = (plan_types){0};
  finder *f = arena_alloc(a, sizeof *f);
  *f = (finder){.arena = a, .x = x, .out = out};
  types_sweep_run(a, x, keep, &f->sweep);
  out->walls = f->sweep.walls;
  out->unpriced = f->sweep.unpriced;
  out->item = f->sweep.goods.item;
  out->items = f->sweep.goods.count;
  out->group = f->sweep.group;
  out->groups = f->sweep.groups;
  set_types(f);
  if (keep != TYPES_ALL) drop_beaten(f, keep);
  set_refused(f);
}

/* ---- a wall of the drawings ---- */

/* One wall, one way round. */
typedef struct drawn {
  wall wall;
  prediction predicted;
  const wall_row *match;
} drawn;

static void set_drawn(const catalog *c, const wall *w, drawn *out) {
  out->wall = *w;
  predict_wall(c, w, &out->predicted);
  out->match = evidence_match(c, w);
}

/* `as` is scratch. */
static bool set_drawn_use(const finder *f, int c, const drawn way[2], assessment *as, type_use *u) {
  judge_context asking = {f->x->catalog, f->x->prices, &f->x->schedule->classes[c].demand};
  bool fits[2];
  int margin[2];
  for (int i = 0; i < 2; i++) {
    judge_silently(&asking, &way[i].wall, &way[i].predicted, way[i].match, as);
    fits[i] = as->broken == 0;
    margin[i] = as->numbers.promised_hundredth;
  }
  u->fits = fits[0] || fits[1];
  if (!u->fits) fits[0] = true;
  if (!set_cents(f, c, &way[0].wall, fits, u)) return u->fits = false;
  u->margin_hundredth = margin[u->turned];
  u->floor_m2 = types_cost_floor_m2(f->sweep.cost, c, &way[0].wall);
  return true;
}

/* Framing group by the names that the types have. */
static int group_of(const catalog *c, const plan_types *t, const wall *w) {
  const char *name = types_group_name(&c->frames[w->frame]);
  int g = 0;
  while (g < t->groups && strcmp(t->group[g], name) != 0) g++;
  return g;
}

bool types_of_wall(arena *a, const plan_context *x, const plan_types *t, const wall *w,
                   plan_type *out) {
  finder f = {.arena = a, .x = x};
  size_t classes = (size_t)x->schedule->class_count;
  goods_set(a, x, &f.sweep.goods);
  f.sweep.cost = types_cost_create(a, x, &f.sweep.goods, NULL);
  *out = (plan_type){.wall = *w, .line = line_print(a, x->catalog, w), .behind = TYPES_NONE};
  out->group = group_of(x->catalog, t, w);
  size_t items = (size_t)f.sweep.goods.count;
  long long *micro = arena_array(a, items, sizeof *micro);
  out->use = arena_array(a, classes, sizeof *out->use);
  out->need = arena_array(a, classes * items, sizeof *out->need);
  drawn *way = arena_array(a, 2, sizeof *way);
  assessment *as = arena_alloc(a, sizeof *as);
  wall other = wall_mirrored(x->catalog, w);
  set_drawn(x->catalog, w, &way[0]);
  set_drawn(x->catalog, &other, &way[1]);
  bool priced = true;
  for (size_t c = 0; c < classes; c++) {
    priced = set_drawn_use(&f, (int)c, way, as, &out->use[c]) && priced;
    types_cost_needs(f.sweep.cost, (int)c, &way[out->use[c].turned].wall, micro);
    for (size_t i = 0; i < items; i++)
      out->need[c * items + i] = (double)micro[i] * TYPES_NEED_UNIT;
  }
  return priced;
}
