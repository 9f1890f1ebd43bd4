#include "search/types_front.h"

#include <math.h>
#include <string.h>

enum { FIRST_ENTRIES = 256 };

void types_front_init(types_front *f, arena *a, const types_cost *cost, const goods *g,
                      int all_classes) {
  *f = (types_front){.arena = a, .cost = cost, .goods = g, .all_classes = all_classes};
  f->extra = arena_array(a, (size_t)all_classes, sizeof *f->extra);
}

/* ---- goods ---- */

static void add_up_needs(types_front *f, types_entry *e) {
  if (!e->needed) types_needs_of(f->cost, f->arena, e->part, &e->needs);
  e->needed = true;
}

/* What an entry needs of an item, per class; `at` past its items: nothing. */
typedef struct item_need {
  const long long *straight, *turned; /* NULL: none */
  const ask_set *perhaps;
} item_need;

static item_need need_at(const types_front *f, const types_entry *e, int at, bool has) {
  item_need n = {NULL, NULL, &e->perhaps};
  if (!has) return n;
  size_t from = (size_t)at * (size_t)f->all_classes;
  n.straight = n.turned = e->needs.amount[0] + from;
  if (e->needs.sided) n.turned = e->needs.amount[1] + from;
  return n;
}

/* The need in a class; false where it depends on which way round the wall will stand. */
static bool need_in(const item_need *n, int c, long long *need) {
  *need = n->straight ? n->straight[c] : 0;
  if (n->straight == n->turned || n->straight[c] == n->turned[c]) return true;
  bool straight = ask_set_has(n->perhaps, c), turned = ask_set_has(n->perhaps, ASK_TURNED + c);
  if (turned) *need = n->turned[c];
  return !(straight && turned);
}

static void add_item(types_front *f, const types_entry *y, const goods_price *price,
                     const item_need *of_x, const item_need *of_y) {
  for (int i = 0; i < y->classes; i++) {
    long long is, was;
    bool known = need_in(of_x, y->of[i], &is);
    if (!need_in(of_y, y->of[i], &was) || !known)
      f->extra[i] = INFINITY;
    else if (is != was)
      f->extra[i] +=
          goods_worst(price, (double)was * TYPES_NEED_UNIT, (double)is * TYPES_NEED_UNIT);
  }
}

/* What goods bought for the whole project may make of the difference between the two, over their
 * lowest prices. */
static void set_extra(types_front *f, types_entry *x, types_entry *y) {
  add_up_needs(f, x);
  add_up_needs(f, y);
  for (int i = 0; i < y->classes; i++) f->extra[i] = 0;
  const types_needs *p = &x->needs, *q = &y->needs;
  for (int i = 0, j = 0; i < p->count || j < q->count;) {
    bool in_x = i < p->count && (j == q->count || p->item[i] <= q->item[j]);
    bool in_y = j < q->count && (i == p->count || q->item[j] <= p->item[i]);
    int item = in_x ? p->item[i] : q->item[j];
    item_need of_x = need_at(f, x, i, in_x), of_y = need_at(f, y, j, in_y);
    add_item(f, y, &f->goods->price[item], &of_x, &of_y);
    i += in_x;
    j += in_y;
  }
}

/* ---- which makes which needless ---- */

/* Whether x, put in the place of y everywhere, costs no more and keeps every rule. */
static bool beats(types_front *f, types_entry *x, types_entry *y) {
  for (int i = 0; i < y->classes; i++)
    if (x->worst[y->of[i]] > y->best[i]) return false;
  if (x->group != y->group || x->thickness_nm > y->thickness_nm) return false;
  for (int i = 0; x->margin_least && i < y->classes; i++)
    if (x->margin_least[y->of[i]] < y->margin_most[y->of[i]]) return false;
  if (f->goods->count == 0) return true;
  set_extra(f, x, y);
  for (int i = 0; i < y->classes; i++)
    if (!(x->worst[y->of[i]] + f->extra[i] <= y->best[i])) return false;
  return true;
}

static int weight(const types_entry *e) {
  return e->spare ? BEATEN_BY_SPARE : BEATEN;
}

bool types_front_refuses(types_front *f, types_entry *e, int *beaten) {
  *beaten = 0;
  for (int i = 0; i < f->count; i++) {
    types_entry *x = f->item[i];
    if (!beats(f, x, e)) continue;
    /* What beat one wall is apt to beat the next: nearer to the start it is found sooner. */
    int to = i / 2, weighs = f->beaten[i];
    f->item[i] = f->item[to];
    f->beaten[i] = f->beaten[to];
    f->item[to] = x;
    f->beaten[to] = weighs;
    *beaten += weight(x);
    if (*beaten >= BEATEN) return true;
  }
  return false;
}

/* ---- keeping ---- */

static void *copied(arena *a, const void *from, size_t count, size_t size) {
  void *to = arena_array(a, count, size);
  if (count > 0) memcpy(to, from, count * size);
  return to;
}

static types_entry *copy_of(types_front *f, types_entry *e) {
  types_entry *k = arena_alloc(f->arena, sizeof *k);
  size_t all = (size_t)f->all_classes, n = (size_t)e->classes;
  add_up_needs(f, e);
  *k = *e;
  k->of = copied(f->arena, e->of, n, sizeof *e->of);
  k->best = copied(f->arena, e->best, n, sizeof *e->best);
  k->worst = copied(f->arena, e->worst, all, sizeof *e->worst);
  k->needs = types_needs_copy(f->arena, &e->needs, f->all_classes);
  if (!e->margin_least) return k;
  k->margin_least = copied(f->arena, e->margin_least, all, sizeof *e->margin_least);
  k->margin_most = copied(f->arena, e->margin_most, all, sizeof *e->margin_most);
  return k;
}

static void drop_beaten(types_front *f, types_entry *e) {
  int kept = 0;
  for (int i = 0; i < f->count; i++) {
    if (beats(f, e, f->item[i])) f->beaten[i] += weight(e);
    if (f->beaten[i] >= BEATEN) continue;
    f->item[kept] = f->item[i];
    f->beaten[kept++] = f->beaten[i];
  }
  f->count = kept;
}

static void append(types_front *f, types_entry *e, int beaten) {
  if (f->count == f->cap) {
    int cap = f->cap ? 2 * f->cap : FIRST_ENTRIES;
    f->item = arena_grow(f->arena, f->item, (size_t)f->cap * sizeof *f->item,
                         (size_t)cap * sizeof *f->item);
    f->beaten = arena_grow(f->arena, f->beaten, (size_t)f->cap * sizeof *f->beaten,
                           (size_t)cap * sizeof *f->beaten);
    f->cap = cap;
  }
  f->item[f->count] = e;
  f->beaten[f->count++] = beaten;
}

void types_front_add(types_front *f, types_entry *e, int beaten) {
  types_entry *kept = copy_of(f, e);
  drop_beaten(f, kept);
  append(f, kept, beaten);
}

void types_front_keep(types_front *f, types_entry *e) {
  append(f, copy_of(f, e), 0);
}
