/* The drawings' wall types: what they cost, what they miss, and the plan beside them. */
#include "explain/plan_parts.h"
#include "wall/line.h"

/* The project built as drawn: rows with a wall of the drawings take it, the other planned rows the
 * plan's. */
typedef struct scenario {
  plan_money money;
  double floor_m2;
  double *need;    /* per item of the goods */
  bool *mark_used; /* per mark */
  bool *type_used; /* per type of the plan */
} scenario;

/* ---- one mark ---- */

static assessment *judge(plan_work *w, int of_class, const wall *given) {
  assessment *x = arena_alloc(w->arena, sizeof *x);
  judge_context asking = {.catalog = w->x->catalog,
                          .prices = w->x->prices,
                          .brief = &w->x->schedule->classes[of_class].demand};
  judge_wall(w->arena, &asking, given, x);
  return x;
}

/* The mark's wall in a class: as drawn, or the other way round where only that keeps the demand. */
static const assessment *stand(plan_work *w, int mark, int of_class, bool turned) {
  const catalog *c = w->x->catalog;
  const wall *drawn = &w->mark_wall[mark];
  wall mirrored = wall_mirrored(c, drawn);
  const wall *seen = turned ? &mirrored : drawn, *other = turned ? drawn : &mirrored;
  const assessment *x = judge(w, of_class, seen);
  if (x->broken == 0 || wall_same(drawn, &mirrored)) return x;
  const assessment *y = judge(w, of_class, other);
  return y->broken == 0 ? y : x;
}

static void note_miss(plan_work *w, plan_drawn *d, int of_class, const assessment *x) {
  for (int i = 0; i < d->miss_count; i++)
    if (d->miss_class[i] == of_class) return;
  if (d->miss == NULL) {
    size_t classes = (size_t)w->x->schedule->class_count;
    d->miss = arena_array(w->arena, classes, sizeof *d->miss);
    d->miss_class = arena_array(w->arena, classes, sizeof *d->miss_class);
  }
  d->miss[d->miss_count] = x;
  d->miss_class[d->miss_count++] = of_class;
}

static void add_drawn_row(scenario *s, plan_work *w, int row, int mark, const plan_costed *c,
                          const assessment *x) {
  const schedule_wall *from = &w->x->schedule->wall[row];
  s->mark_used[mark] = true;
  s->money.walls += from->count * c->alone.total_cents;
  s->money.floor += from->count * c->alone.floor_value_cents;
  s->floor_m2 += from->count * from->length_m * x->thickness_m;
  for (int i = 0; i < w->lines->count; i++) {
    const cost_line *l = &w->lines->line[i];
    int goods = l->kind == LINE_MATERIAL ? plan_goods_index(w, l->item) : -1;
    if (goods >= 0) s->need[goods] += from->count * l->quantity;
  }
}

static void add_planned_row(scenario *s, const plan_work *w, int row) {
  const plan_row *r = &w->out->row[row];
  if (r->type == PLAN_NONE) return;
  s->type_used[r->type] = true;
  s->money.walls += r->money.walls;
  s->money.floor += r->money.floor;
  s->floor_m2 += r->floor_m2;
  for (int i = 0; i < w->problem.items; i++) s->need[i] += w->row_need[row * w->problem.items + i];
}

/* `known` holds, per class and way round, how the mark stands there. */
static void add_row(plan_work *w, scenario *s, int row, const assessment **known) {
  const schedule_wall *from = &w->x->schedule->wall[row];
  plan_drawn *d = &w->out->drawn[from->mark];
  const assessment **x = &known[2 * from->of_class + from->turned];
  if (*x == NULL) *x = stand(w, from->mark, from->of_class, from->turned);
  d->row_count++;
  d->walls += from->count;
  d->run_m += from->count * from->length_m;
  if ((*x)->broken != 0) {
    note_miss(w, d, from->of_class, *x);
    d->miss_rows++;
    d->miss_walls += from->count;
  }
  if ((*x)->takeoff.missing) {
    d->costed = false;
    d->missing_code = (*x)->takeoff.missing_code;
    w->out->against.left_out++;
    add_planned_row(s, w, row);
    return;
  }
  plan_costed c = plan_cost_row(w, row, &(*x)->wall);
  d->list_cents += from->count * c.list.total_cents;
  if (w->out->row[row].type == PLAN_NONE) {
    w->out->against.left_out++;
    return;
  }
  w->out->against.row_count++;
  add_drawn_row(s, w, row, from->mark, &c, *x);
}

static int used_as(const plan_answer *out, const catalog *c, const wall *drawn) {
  wall mirrored = wall_mirrored(c, drawn);
  for (int i = 0; i < out->type_count; i++) {
    const wall *w = &out->type[i].wall;
    if (wall_same(w, drawn) || wall_same(w, &mirrored)) return i;
  }
  return PLAN_NONE;
}

static void start_marks(plan_work *w) {
  const project *p = w->x->project;
  plan_answer *out = w->out;
  out->drawn_count = p->mark_count;
  out->drawn = arena_array(w->arena, (size_t)p->mark_count, sizeof *out->drawn);
  for (int i = 0; i < p->mark_count; i++)
    out->drawn[i] = (plan_drawn){.mark = p->mark[i].mark,
                                 .line = line_print(w->arena, w->x->catalog, &w->mark_wall[i]),
                                 .wall = w->mark_wall[i],
                                 .locked = p->mark[i].locked,
                                 .costed = true,
                                 .used = used_as(out, w->x->catalog, &w->mark_wall[i])};
}

/* ---- the comparison ---- */

/* Walls that the project would be built of: a type of the plan that is a mark's wall counts with
 * it. */
static int count_walls(const plan_work *w, const scenario *s) {
  int n = 0;
  for (int m = 0; m < w->out->drawn_count; m++) {
    n += s->mark_used[m];
    if (s->mark_used[m] && w->out->drawn[m].used != PLAN_NONE)
      s->type_used[w->out->drawn[m].used] = false;
  }
  for (int t = 0; t < w->out->type_count; t++) n += s->type_used[t];
  return n;
}

static void compare(plan_work *w, scenario *s) {
  plan_comparison *c = &w->out->against;
  if (!w->out->found || c->row_count == 0) return;
  c->done = true;
  c->types = count_walls(w, s);
  s->money.setup = c->types * w->problem.setup_cents;
  s->money.goods = plan_goods_cost(w, s->need);
  c->drawings = s->money;
  c->plan = w->out->money;
  c->drawings_floor_m2 = s->floor_m2;
  c->plan_floor_m2 = w->out->floor_m2;
}

void plan_set_drawn(plan_work *w) {
  const schedule *sched = w->x->schedule;
  size_t classes = (size_t)sched->class_count, marks = (size_t)w->x->project->mark_count;
  if (marks == 0) return;
  scenario s = {.need = arena_array(w->arena, (size_t)w->problem.items, sizeof *s.need),
                .mark_used = arena_array(w->arena, marks, sizeof *s.mark_used),
                .type_used =
                    arena_array(w->arena, (size_t)w->out->type_count, sizeof *s.type_used)};
  const assessment **known = arena_array(w->arena, 2 * classes * marks, sizeof(assessment *));
  start_marks(w);
  for (int row = 0; row < sched->count; row++) {
    int mark = sched->wall[row].mark;
    if (mark != CATALOG_NONE)
      add_row(w, &s, row, known + 2 * classes * (size_t)mark);
    else if (w->out->found)
      add_planned_row(&s, w, row);
  }
  compare(w, &s);
}
