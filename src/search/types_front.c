#include "search/types_front.h"

#include <math.h>
#include <string.h>

enum { FIRST_ENTRIES = 256 };

void types_front_init(types_front *f, arena *a, const types_cost *cost, const goods *g, int classes,
                      int depth) {
  *f = (types_front){
      .arena = a, .cost = cost, .goods = g, .classes = classes, .depth = depth};
  f->extra = arena_array(a, (size_t)classes, sizeof *f->extra);
}

/* ---- goods ---- */

static void add_up_needs(types_front *f, types_entry *e) {
  if (e->needed) return;
  for (int way = 0; way < 2; way++) types_needs_of(f->cost, f->arena, e->part[way], &e->needs[way]);
  e->needed = true;
}

static const long long *need_of(const types_needs *n, int item, int classes) {
  for (int i = 0; i < n->count && n->item[i] <= item; i++)
    if (n->item[i] == item) return n->amount + (size_t)i * (size_t)classes;
  return NULL;
}

/* The need of a class that may take the wall: false where it depends on which way round. */
static bool need_in(const types_entry *e, const long long *const of[2], int c, long long *need) {
  long long straight = of[0] ? of[0][c] : 0, turned = of[1] ? of[1][c] : 0;
  bool may_straight = ask_set_has(&e->perhaps, c), may_turn = ask_set_has(&e->perhaps, ASK_TURNED + c);
  *need = may_straight ? straight : turned;
  return straight == turned || !(may_straight && may_turn);
}

static void add_item(types_front *f, const types_entry *x, const types_entry *y, int item) {
  const long long *of_x[2], *of_y[2];
  const goods_price *p = &f->goods->price[item];
  for (int way = 0; way < 2; way++) {
    of_x[way] = need_of(&x->needs[way], item, f->classes);
    of_y[way] = need_of(&y->needs[way], item, f->classes);
  }
  for (int c = 0; c < f->classes; c++) {
    long long is, was;
    if (!ask_set_class(&y->perhaps, c)) continue;
    if (!need_in(x, of_x, c, &is) || !need_in(y, of_y, c, &was))
      f->extra[c] = INFINITY;
    else if (is != was)
      f->extra[c] += goods_worst(p, (double)was * TYPES_NEED_UNIT, (double)is * TYPES_NEED_UNIT);
  }
}

/* What goods bought for the whole project may make of the difference between the two, per class,
 * over their lowest prices. */
static void set_extra(types_front *f, types_entry *x, types_entry *y) {
  for (int c = 0; c < f->classes; c++) f->extra[c] = 0;
  if (f->goods->count == 0) return;
  add_up_needs(f, x);
  add_up_needs(f, y);
  for (int way = 0; way < 2; way++) {
    const types_needs *p = &x->needs[way], *q = &y->needs[way];
    for (int i = 0; i < p->count; i++)
      if (way == 0 || !need_of(&x->needs[0], p->item[i], f->classes)) add_item(f, x, y, p->item[i]);
    for (int i = 0; i < q->count; i++) { /* those that only y needs */
      bool seen = need_of(&x->needs[0], q->item[i], f->classes) ||
                  need_of(&x->needs[1], q->item[i], f->classes) ||
                  (way == 1 && need_of(&y->needs[0], q->item[i], f->classes));
      if (!seen) add_item(f, x, y, q->item[i]);
    }
  }
}

/* ---- which makes which needless ---- */

static bool no_dearer(const double *worst, const double *best, int classes) {
  for (int c = 0; c < classes; c++)
    if (worst[c] > best[c]) return false;
  return true;
}

static bool no_nearer_to_targets(const types_entry *x, const types_entry *y, int classes) {
  if (!x->margin_least) return true;
  for (int c = 0; c < classes; c++)
    if (ask_set_class(&y->perhaps, c) && x->margin_least[c] < y->margin_most[c]) return false;
  return true;
}

/* Whether x, put in the place of y everywhere, costs no more and keeps every rule. */
static bool beats(types_front *f, types_entry *x, types_entry *y) {
  if (!no_dearer(x->worst, y->best, f->classes)) return false;
  if (x->group != y->group || x->thickness_nm > y->thickness_nm) return false;
  if (!no_nearer_to_targets(x, y, f->classes)) return false;
  set_extra(f, x, y);
  for (int c = 0; c < f->classes; c++)
    if (ask_set_class(&y->perhaps, c) && !(x->worst[c] + f->extra[c] <= y->best[c])) return false;
  return true;
}

bool types_front_refuses(types_front *f, types_entry *e, int *beaten) {
  *beaten = 0;
  for (int i = 0; i < f->count; i++) {
    types_entry *x = f->item[i];
    if (!beats(f, x, e)) continue;
    /* What beat one wall is apt to beat the next: nearer to the start it is found sooner. */
    int to = i / 2, times = f->beaten[i];
    f->item[i] = f->item[to];
    f->beaten[i] = f->beaten[to];
    f->item[to] = x;
    f->beaten[to] = times;
    if (++*beaten == f->depth) return true;
  }
  return false;
}

/* ---- keeping ---- */

static types_entry *copy_of(types_front *f, types_entry *e) {
  types_entry *k = arena_alloc(f->arena, sizeof *k);
  size_t n = (size_t)f->classes;
  *k = *e;
  k->worst = arena_array(f->arena, n, sizeof *k->worst);
  k->best = arena_array(f->arena, n, sizeof *k->best);
  memcpy(k->worst, e->worst, n * sizeof *k->worst);
  memcpy(k->best, e->best, n * sizeof *k->best);
  if (e->margin_least) {
    k->margin_least = arena_array(f->arena, n, sizeof *k->margin_least);
    k->margin_most = arena_array(f->arena, n, sizeof *k->margin_most);
    memcpy(k->margin_least, e->margin_least, n * sizeof *k->margin_least);
    memcpy(k->margin_most, e->margin_most, n * sizeof *k->margin_most);
  }
  add_up_needs(f, e);
  k->needed = true;
  for (int way = 0; way < 2; way++)
    k->needs[way] = types_needs_copy(f->arena, &e->needs[way], f->classes);
  return k;
}

static void drop_beaten(types_front *f, types_entry *e) {
  int kept = 0;
  for (int i = 0; i < f->count; i++) {
    if (beats(f, e, f->item[i])) f->beaten[i]++;
    if (f->beaten[i] == f->depth) continue;
    f->item[kept] = f->item[i];
    f->beaten[kept++] = f->beaten[i];
  }
  f->count = kept;
}

void types_front_add(types_front *f, types_entry *e, int beaten) {
  if (f->depth > 0) drop_beaten(f, e);
  if (f->count == f->cap) {
    int cap = f->cap ? 2 * f->cap : FIRST_ENTRIES;
    f->item = arena_grow(f->arena, f->item, (size_t)f->cap * sizeof *f->item,
                         (size_t)cap * sizeof *f->item);
    f->beaten = arena_grow(f->arena, f->beaten, (size_t)f->cap * sizeof *f->beaten,
                           (size_t)cap * sizeof *f->beaten);
    f->cap = cap;
  }
  f->item[f->count] = copy_of(f, e);
  f->beaten[f->count++] = beaten;
}
