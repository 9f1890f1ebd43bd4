#include "search/types_cost.h"

#include <math.h>
#include <string.h>

#include "base/threads.h"

enum { SPACINGS_MAX = 16, FIRST_PARTS = 64 };

/* How far a sum of parts may lie from the cost of a wall, cents a copy: an item on two parts (at
 * most those of a leaf on the other, and what fill and mount share with the frame) is rounded
 * twice instead of once, material and labour; tax, profit and the floor's value are rounded. */
static const double shared_items = WALL_MAX_LAYERS + 3 + 3;
static const double rounded_amounts = 3;

/* What tells parts of one kind apart. */
typedef struct part_key {
  int of[5];
} part_key;

typedef struct part_list {
  part_key *key;
  cost_part *part;
  wall *with, *without; /* a wall that has the part, and the same wall without it */
  int count, cap;
  int *of_core; /* index, or TYPES_NONE where the core has no such part */
} part_list;

enum { CORE_PARTS = PART_MOUNT + 1 };

struct types_cost {
  arena *arena;
  const plan_context *x;
  const goods *goods;
  const space *space;
  cost_class *classes;
  int class_count;
  part_list part[CORE_PARTS];
  int spacing[SPACINGS_MAX], spacings;
  int *spacing_of[2];               /* per core: of the support on each side */
  cost_part *leaf[SPACINGS_MAX][2]; /* per spacing and class side: per face */
  int *like;                        /* per frame: see first_like; TYPES_NONE = not asked yet */
};

/* ---- walls of a class ---- */

static bool equal(double x, double y) {
  return !(x < y) && !(x > y);
}

static bool same_openings(const brief *x, const brief *y) {
  if (x->opening_count != y->opening_count) return false;
  for (int i = 0; i < x->opening_count; i++)
    if (!equal(x->openings[i].area_m2, y->openings[i].area_m2)) return false;
  return true;
}

static bool same_sides(const brief *x, const brief *y) {
  for (int s = 0; s < 2; s++) {
    const room_side *p = &x->side[s], *q = &y->side[s];
    if (p->fastening != q->fastening || !equal(p->fastening_length_m, q->fastening_length_m) ||
        p->finish_level != q->finish_level || !equal(x->ceiling_m[s], y->ceiling_m[s]))
      return false;
  }
  return true;
}

static bool same_counts(const brief *x, const brief *y) {
  return x->corners == y->corners && x->tees == y->tees && x->free_ends == y->free_ends &&
         x->doors == y->doors;
}

/* Everything that a takeoff reads. */
static bool same_takeoff(const brief *x, const brief *y) {
  return equal(x->length_m, y->length_m) && equal(x->height_m, y->height_m) && x->top == y->top &&
         x->head == y->head && x->boards == y->boards && x->loadbearing == y->loadbearing && x->fire_min == y->fire_min &&
         x->boxes_given == y->boxes_given && equal(x->boxes_per_10m, y->boxes_per_10m) &&
         equal(x->floor_area_value_per_m2, y->floor_area_value_per_m2) && same_openings(x, y) &&
         same_counts(x, y) && same_sides(x, y);
}

static void add_row(cost_class *k, const brief *b, double count) {
  int i = 0;
  while (i < k->rows && !same_takeoff(&k->row[i].brief, b)) i++;
  if (i == k->rows) k->row[k->rows++] = (cost_row){.brief = *b};
  k->row[i].count += count;
  k->copies += count;
  k->floor_m += count * b->length_m;
  k->floor_cents_per_m += count * b->length_m * b->floor_area_value_per_m2 * 100;
}

static void set_class(types_cost *t, int c) {
  const schedule *s = t->x->schedule;
  const schedule_class *from = &s->classes[c];
  const price_book *book = t->x->prices;
  cost_class *k = &t->classes[c];
  k->row = arena_array(t->arena, (size_t)from->count, sizeof *k->row);
  for (int i = 0; i < from->count; i++) {
    brief b;
    schedule_brief(s, from->wall[i], &b);
    add_row(k, &b, s->wall[from->wall[i]].count);
  }
  double marked_up = (2 + book->sales_tax) * (1 + book->overhead_profit);
  k->stray_cents = k->copies * (shared_items * marked_up + rounded_amounts);
}

const cost_class *types_cost_class(const types_cost *t, int of_class) {
  return &t->classes[of_class];
}

/* ---- one part in one class ---- */

/* What a part is: all that `with` has and `without` has not. */
typedef struct part_of {
  const wall *with, *without; /* without NULL: nothing */
  bool leaf;                  /* of the leaves, else of the core */
} part_of;

/* Scratch of whoever works parts out. */
typedef struct part_scratch {
  double *quantity; /* per item of the goods */
  long long *need;  /* per class and item */
  bool *missing;    /* per class */
} part_scratch;

static double marked_up(const price_book *book, const cost_parts *p) {
  return ((double)p->material_cents * (1 + book->sales_tax) + (double)p->labour_cents) *
         (1 + book->overhead_profit);
}

/* Cents (goods at no price) of one row of a class; adds what it needs of each of the goods. */
static double add_row_of(const types_cost *t, const part_of *p, const wall *w, const cost_row *row,
                         double sign, double *quantity, bool *missing) {
  cost_need need[COST_MAX_NEEDS];
  const plan_context *x = t->x;
  int n;
  cost_parts cost = p->leaf
                        ? cost_leaves_needs(&t->goods->list, x->catalog, &row->brief, w, need, &n)
                        : cost_core_needs(&t->goods->list, x->catalog, &row->brief, w, need, &n);
  for (int i = 0; t->goods->count > 0 && i < n; i++) {
    int at = t->goods->place[need[i].item];
    if (at != TYPES_NONE) quantity[at] += sign * row->count * need[i].quantity;
  }
  *missing = cost.missing;
  return sign * row->count * marked_up(&t->goods->list, &cost);
}

/* Cents of the part in all walls of the class, and its needs in millionths; `quantity` is scratch.
 */
static double part_in_class(const types_cost *t, int c, const part_of *p, double *quantity,
                            long long *need, bool *missing) {
  const cost_class *k = &t->classes[c];
  double cents = 0;
  *missing = false;
  for (int g = 0; g < t->goods->count; g++) quantity[g] = 0;
  for (int i = 0; i < k->rows; i++) {
    bool with, without = false;
    cents += add_row_of(t, p, p->with, &k->row[i], 1, quantity, &with);
    if (p->without) cents += add_row_of(t, p, p->without, &k->row[i], -1, quantity, &without);
    *missing = *missing || (with && !without);
  }
  for (int g = 0; g < t->goods->count; g++)
    need[g] = llround(fmax(0, quantity[g]) / TYPES_NEED_UNIT);
  return cents;
}

/* ---- one part in all classes ---- */

/* Item `item` of the goods from the classes' needs, if there is any. */
static void add_item(const types_cost *t, arena *a, cost_part *out, int item,
                     const long long *need) {
  size_t all = (size_t)t->goods->count;
  bool any = false;
  for (int c = 0; c < t->class_count; c++) any = any || need[(size_t)c * all] > 0;
  if (!any) return;
  long long *of = arena_array(a, (size_t)t->class_count, sizeof *of);
  for (int c = 0; c < t->class_count; c++) {
    of[c] = need[(size_t)c * all];
    out->cents[c] += (double)of[c] * TYPES_NEED_UNIT * t->goods->price[item].least;
  }
  out->item[out->needs] = item;
  out->need[out->needs++] = of;
}

static double part_thickness_m(const types_cost *t, const part_of *p) {
  double with = wall_thickness_m(t->x->catalog, p->with);
  return p->without ? with - wall_thickness_m(t->x->catalog, p->without) : with;
}

static void set_part(const types_cost *t, arena *a, const part_of *p, const part_scratch *x,
                     cost_part *out) {
  size_t classes = (size_t)t->class_count, all = (size_t)t->goods->count;
  double thickness_m = part_thickness_m(t, p);
  bool any = false;
  *out = (cost_part){.cents = arena_array(a, classes, sizeof *out->cents)};
  for (size_t c = 0; c < classes; c++) {
    double cents = part_in_class(t, (int)c, p, x->quantity, x->need + c * all, &x->missing[c]);
    out->cents[c] = cents + thickness_m * t->classes[c].floor_cents_per_m;
    any = any || x->missing[c];
  }
  if (any) {
    out->missing = arena_array(a, classes, sizeof *out->missing);
    memcpy(out->missing, x->missing, classes * sizeof *out->missing);
  }
  if (all == 0) return;
  out->item = arena_array(a, all, sizeof *out->item);
  out->need = arena_array(a, all, sizeof *out->need);
  for (int g = 0; g < t->goods->count; g++) add_item(t, a, out, g, x->need + g);
}

static part_scratch scratch_create(const types_cost *t, arena *a) {
  size_t classes = (size_t)t->class_count, all = (size_t)t->goods->count;
  return (part_scratch){arena_array(a, all, sizeof(double)),
                        arena_array(a, classes * all, sizeof(long long)),
                        arena_array(a, classes, sizeof(bool))};
}

/* ---- the parts of a space ---- */

static wall bare(const wall *w) {
  wall b = wall_empty();
  b.frame = w->frame;
  b.spacing_mm = w->spacing_mm;
  b.gap_mm = w->gap_mm;
  return b;
}

static bool priced(const types_cost *t, const wall *w) {
  for (int c = 0; c < t->class_count; c++)
    for (int i = 0; i < t->classes[c].rows; i++)
      if (cost_core(t->x->prices, t->x->catalog, &t->classes[c].row[i].brief, w).missing)
        return false;
  return true;
}

/* Of the framing fills and mounts see rows, layout (a mount on a single row brings bridging),
 * material and spacing: the first frame that has them stands for all, if what it takes itself has
 * prices. */
static int find_like(const types_cost *t, const wall *w) {
  const catalog *c = t->x->catalog;
  const frame *f = &c->frames[w->frame];
  wall other = bare(w);
  for (other.frame = 0; other.frame < w->frame; other.frame++) {
    const frame *o = &c->frames[other.frame];
    bool like = o->material == f->material && o->rows == f->rows && o->layout == f->layout;
    if (like && priced(t, &other)) break;
  }
  return other.frame;
}

static int first_like(types_cost *t, const wall *w) {
  int *kept = &t->like[w->frame];
  if (*kept == TYPES_NONE) *kept = find_like(t, w);
  return *kept;
}

static int add_part(types_cost *t, part_list *l, const part_key *key, const wall *with,
                    const wall *without) {
  for (int i = l->count - 1; i >= 0; i--)
    if (memcmp(l->key[i].of, key->of, sizeof key->of) == 0) return i;
  if (l->count == l->cap) {
    size_t old = (size_t)l->cap, cap = old ? 2 * old : FIRST_PARTS;
    l->key = arena_grow(t->arena, l->key, old * sizeof *l->key, cap * sizeof *l->key);
    l->with = arena_grow(t->arena, l->with, old * sizeof *l->with, cap * sizeof *l->with);
    l->without =
        arena_grow(t->arena, l->without, old * sizeof *l->without, cap * sizeof *l->without);
    l->cap = (int)cap;
  }
  l->key[l->count] = *key;
  l->with[l->count] = *with;
  l->without[l->count] = *without;
  return l->count++;
}

static int frame_part(types_cost *t, const wall *w) {
  wall with = bare(w);
  part_key key = {{w->frame, w->spacing_mm, w->gap_mm}};
  return add_part(t, &t->part[PART_FRAME], &key, &with, &with);
}

static int fill_part(types_cost *t, const wall *w) {
  if (w->fill[0] == CATALOG_NONE && w->fill[1] == CATALOG_NONE) return TYPES_NONE;
  wall without = bare(w);
  without.frame = first_like(t, w);
  wall with = without;
  memcpy(with.fill, w->fill, sizeof with.fill);
  part_key key = {{without.frame, w->spacing_mm, w->fill[0], w->fill[1]}};
  return add_part(t, &t->part[PART_FILL], &key, &with, &without);
}

static int mount_part(types_cost *t, const wall *w) {
  if (!wall_is_mounted(w)) return TYPES_NONE;
  wall without = bare(w);
  without.frame = first_like(t, w);
  wall with = without;
  int side = w->mount[SIDE_A].mount == CATALOG_NONE ? SIDE_B : SIDE_A;
  const wall_mount *m = &w->mount[side];
  with.mount[SIDE_A] = *m;
  part_key key = {{without.frame, w->spacing_mm, m->mount, m->spacing_mm, m->clip_spacing_mm}};
  return add_part(t, &t->part[PART_MOUNT], &key, &with, &without);
}

static int spacing_index(types_cost *t, int mm) {
  int i = 0;
  while (i < t->spacings && t->spacing[i] != mm) i++;
  if (i == t->spacings) t->spacing[t->spacings++] = mm;
  return i;
}

static void list_parts(types_cost *t) {
  size_t cores = (size_t)t->space->core_count;
  for (int p = 0; p < CORE_PARTS; p++)
    t->part[p].of_core = arena_array(t->arena, cores, sizeof *t->part[p].of_core);
  for (int side = 0; side < 2; side++)
    t->spacing_of[side] = arena_array(t->arena, cores, sizeof *t->spacing_of[side]);
  for (int k = 0; k < t->space->core_count; k++) {
    const wall *w = &t->space->cores[k];
    t->part[PART_FRAME].of_core[k] = frame_part(t, w);
    t->part[PART_FILL].of_core[k] = fill_part(t, w);
    t->part[PART_MOUNT].of_core[k] = mount_part(t, w);
    for (int side = 0; side < 2; side++) {
      const wall_mount *m = &w->mount[side];
      t->spacing_of[side][k] =
          spacing_index(t, m->mount == CATALOG_NONE ? w->spacing_mm : m->spacing_mm);
    }
  }
}

/* Whether all walls of every class have both sides finished alike: then it does not matter which
 * side a leaf is on. */
static bool sides_alike(const types_cost *t) {
  for (int c = 0; c < t->class_count; c++)
    for (int i = 0; i < t->classes[c].rows; i++) {
      const brief *b = &t->classes[c].row[i].brief;
      if (b->side[SIDE_A].finish_level != b->side[SIDE_B].finish_level ||
          !equal(b->ceiling_m[SIDE_A], b->ceiling_m[SIDE_B]))
        return false;
    }
  return true;
}

static void set_core_part(const types_cost *t, arena *a, const part_scratch *x, int p, int i) {
  const part_list *l = &t->part[p];
  part_of of = {&l->with[i], p == PART_FRAME ? NULL : &l->without[i], false};
  set_part(t, a, &of, x, &l->part[i]);
}

static void set_leaf(const types_cost *t, arena *a, const part_scratch *x, int spacing, int at,
                     int leaf) {
  wall without = bare(&t->space->cores[0]);
  without.spacing_mm = t->spacing[spacing];
  wall with = without;
  with.side[at] = t->space->faces[leaf];
  part_of of = {&with, &without, true};
  set_part(t, a, &of, x, &t->leaf[spacing][at][leaf]);
}

/* One worker's. */
typedef struct part_worker {
  arena *arena;
  part_scratch scratch;
} part_worker;

static void *start_worker(void *shared, arena *a, int worker) {
  part_worker *w = arena_alloc(a, sizeof *w);
  (void)worker;
  *w = (part_worker){a, scratch_create(shared, a)};
  return w;
}

/* Block i: the i-th of all parts, core parts first. */
static void set_one_part(void *shared, void *own, int block) {
  const types_cost *t = shared;
  const part_worker *w = own;
  int i = block;
  for (int p = 0; p < CORE_PARTS; i -= t->part[p++].count)
    if (i < t->part[p].count) {
      set_core_part(t, w->arena, &w->scratch, p, i);
      return;
    }
  int faces = t->space->face_count, at = i / (t->spacings * faces);
  set_leaf(t, w->arena, &w->scratch, i / faces % t->spacings, at, i % faces);
}

static void set_parts(types_cost *t) {
  size_t faces = (size_t)t->space->face_count;
  int ways = sides_alike(t) ? 1 : 2, parts = ways * t->spacings * t->space->face_count;
  for (int p = 0; p < CORE_PARTS; p++) {
    part_list *l = &t->part[p];
    l->part = arena_array(t->arena, (size_t)l->count, sizeof *l->part);
    parts += l->count;
  }
  for (int i = 0; i < t->spacings; i++)
    for (int at = 0; at < 2; at++)
      t->leaf[i][at] =
          at < ways ? arena_array(t->arena, faces, sizeof *t->leaf[i][at]) : t->leaf[i][0];
  threads_work work = {start_worker, set_one_part, t};
  threads_run(t->arena, threads_count(0), parts, &work, NULL);
}

types_cost *types_cost_create(arena *a, const plan_context *x, const goods *g, const space *s) {
  types_cost *t = arena_alloc(a, sizeof *t);
  *t = (types_cost){.arena = a, .x = x, .goods = g, .space = s};
  t->class_count = x->schedule->class_count;
  t->classes = arena_array(a, (size_t)t->class_count, sizeof *t->classes);
  t->like = arena_array(a, x->catalog->frame_count, sizeof *t->like);
  for (size_t i = 0; i < x->catalog->frame_count; i++) t->like[i] = TYPES_NONE;
  for (int c = 0; c < t->class_count; c++) set_class(t, c);
  if (!s || s->core_count == 0) return t;
  list_parts(t);
  set_parts(t);
  return t;
}

void types_cost_core(const types_cost *t, int core, const cost_part *part[PARTS]) {
  for (int p = 0; p < CORE_PARTS; p++) {
    const part_list *l = &t->part[p];
    part[p] = l->of_core[core] == TYPES_NONE ? NULL : &l->part[l->of_core[core]];
  }
}

const cost_part *types_cost_leaf(const types_cost *t, int core, int side, int leaf, int at) {
  return &t->leaf[t->spacing_of[side][core]][at][leaf];
}

/* ---- needs of a wall ---- */

static void make_room(const types_cost *t, arena *a, types_needs *n, int items) {
  if (items <= n->cap) return;
  n->cap = 2 * items;
  n->item = arena_array(a, (size_t)n->cap, sizeof *n->item);
  for (int way = 0; way < 2; way++)
    n->amount[way] =
        arena_array(a, (size_t)n->cap * (size_t)t->class_count, sizeof *n->amount[way]);
}

static int place_of(const types_needs *n, int item) {
  int at = 0;
  while (at < n->count && n->item[at] < item) at++;
  return at;
}

/* Makes a place for the item, in both ways round. */
static int item_place(types_needs *n, int item, size_t classes) {
  int at = place_of(n, item);
  if (at < n->count && n->item[at] == item) return at;
  size_t rest = (size_t)(n->count - at);
  memmove(n->item + at + 1, n->item + at, rest * sizeof *n->item);
  n->item[at] = item;
  n->count++;
  for (int way = 0; way <= n->sided; way++) {
    long long *to = n->amount[way] + (size_t)at * classes;
    memmove(to + classes, to, rest * classes * sizeof *to);
    memset(to, 0, classes * sizeof *to);
  }
  return at;
}

static void add_needs_of(types_needs *n, int way, const cost_part *p, size_t classes) {
  for (int i = 0; p && i < p->needs; i++) {
    long long *to = n->amount[way] + (size_t)item_place(n, p->item[i], classes) * classes;
    for (size_t c = 0; c < classes; c++) to[c] += p->need[i][c];
  }
}

static bool same_needs(const cost_part *p, const cost_part *q, size_t classes) {
  if (p == q) return true;
  if (p->needs != q->needs) return false;
  for (int i = 0; i < p->needs; i++)
    if (p->item[i] != q->item[i] ||
        memcmp(p->need[i], q->need[i], classes * sizeof *p->need[i]) != 0)
      return false;
  return true;
}

void types_needs_of(const types_cost *t, arena *a, const cost_part *part[2][PARTS],
                    types_needs *out) {
  size_t classes = (size_t)t->class_count;
  int most = 0;
  for (int p = 0; p < PARTS; p++) most += part[0][p] ? part[0][p]->needs : 0;
  for (int p = PART_LEAF_A; p < PARTS; p++) most += part[1][p]->needs;
  make_room(t, a, out, most);
  out->count = 0;
  out->sided = false;
  for (int p = PART_LEAF_A; p < PARTS; p++)
    out->sided = out->sided || !same_needs(part[0][p], part[1][p], classes);
  for (int way = 0; way <= out->sided; way++)
    for (int p = 0; p < PARTS; p++) add_needs_of(out, way, part[way][p], classes);
}

types_needs types_needs_copy(arena *a, const types_needs *n, int classes) {
  types_needs c = {.count = n->count, .cap = n->count, .sided = n->sided};
  size_t items = (size_t)n->count, all = items * (size_t)classes;
  if (items == 0) return c;
  c.item = arena_array(a, items, sizeof *c.item);
  memcpy(c.item, n->item, items * sizeof *c.item);
  for (int way = 0; way <= n->sided; way++) {
    c.amount[way] = arena_array(a, all, sizeof *c.amount[way]);
    memcpy(c.amount[way], n->amount[way], all * sizeof *c.amount[way]);
  }
  return c;
}

/* ---- exact ---- */

bool types_cost_exact(const types_cost *t, int of_class, const wall *w, long long *cents) {
  const plan_context *x = t->x;
  const cost_class *k = &t->classes[of_class];
  double thickness_m = wall_thickness_m(x->catalog, w);
  *cents = 0;
  for (int i = 0; i < k->rows; i++) {
    const brief *b = &k->row[i].brief;
    cost_parts core = cost_core(&t->goods->list, x->catalog, b, w);
    cost_parts leaves = cost_leaves(&t->goods->list, x->catalog, b, w);
    if (core.missing || leaves.missing) return false;
    cost_total total = cost_sum(&t->goods->list, b, thickness_m, core, leaves);
    *cents += (long long)k->row[i].count * (total.total_cents + total.floor_value_cents);
  }
  return true;
}

static void add_part_needs(const types_cost *t, int c, const part_of *p, const part_scratch *x,
                           long long *sum) {
  bool missing;
  part_in_class(t, c, p, x->quantity, x->need, &missing);
  for (int g = 0; g < t->goods->count; g++) sum[g] += x->need[g];
}

/* The parts that the sweep has, and sheaths and inner faces, which it does not. */
void types_cost_needs(const types_cost *t, int of_class, const wall *w, long long *need) {
  part_scratch x = scratch_create(t, t->arena);
  wall framing = bare(w), more = framing, without = framing;
  part_of of = {&framing, NULL, false};
  for (int g = 0; g < t->goods->count; g++) need[g] = 0;
  add_part_needs(t, of_class, &of, &x, need);
  of = (part_of){&more, &without, false};
  memcpy(more.fill, w->fill, sizeof more.fill);
  add_part_needs(t, of_class, &of, &x, need);
  more = framing;
  memcpy(more.mount, w->mount, sizeof more.mount);
  add_part_needs(t, of_class, &of, &x, need);
  more = framing;
  memcpy(more.sheath, w->sheath, sizeof more.sheath);
  memcpy(more.inner, w->inner, sizeof more.inner);
  add_part_needs(t, of_class, &of, &x, need);
  memcpy(without.mount, w->mount, sizeof without.mount); /* what leaves are screwed to */
  of.leaf = true;
  for (int s = 0; s < 2; s++) {
    more = without;
    more.side[s] = w->side[s];
    add_part_needs(t, of_class, &of, &x, need);
  }
}

double types_cost_floor_m2(const types_cost *t, int of_class, const wall *w) {
  /* Thickness to the nanometre: walls as thick as one another stand on the same floor. */
  return round(wall_thickness_m(t->x->catalog, w) * 1e9) * 1e-9 * t->classes[of_class].floor_m;
}
