#include "explain/ladder.h"

static const double usual_confidence = 0.8; /* a brief's own default */

int ladder_target(brief *b, sound_metric metric) {
  if (b->target_count == 0) {
    b->targets[b->target_count++] = (target){.metric = METRIC_STC, .confidence = usual_confidence};
  }
  int climbs = 0;
  if (metric != METRIC_COUNT) {
    while (climbs < b->target_count && b->targets[climbs].metric != metric) climbs++;
    if (climbs == b->target_count) climbs = 0;
    b->targets[climbs].metric = metric;
  }
  b->targets[climbs].value = RUNGS_LEAST; /* what stood there decides nothing */
  return climbs;
}

/* A wall judged with the target that climbs at `value`. */
static assessment *judge_at(arena *a, const judge_context *x, int climbs, int value,
                            const wall *w) {
  brief *b = arena_alloc(a, sizeof *b);
  judge_context asking = *x;
  assessment *out = arena_alloc(a, sizeof *out);
  *b = *x->brief;
  b->targets[climbs].value = value;
  asking.brief = b;
  judge_wall(a, &asking, w, out);
  return out;
}

/* ---- rungs ---- */

/* The highest value up to `most` that costs as much as `value`; values above the highest that is
 * reached cost nothing. */
static int highest_at_cost(const rungs *r, int value, int most) {
  long long cents = r->at[value].wall.is.cost_cents;
  while (value < most && r->at[value + 1].found && r->at[value + 1].wall.is.cost_cents == cents)
    value++;
  return value;
}

static void add_rung(arena *a, const space *s, const rungs *r, int first, int value,
                     ladder_answer *out) {
  const rung_best *best = &r->at[value];
  const candidate *c = &best->wall;
  ladder_rung *g = &out->rung[out->count];
  wall w = space_wall(s, c->core, c->face_a, c->face_b);
  *g = (ladder_rung){.rating = value, .serves_from = first, .reaches = best->reaches};
  g->cost_cents = c->is.cost_cents;
  g->wall = judge_at(a, s->context, out->terms.climbs, value, &w);
  if (out->count > 0) {
    g->step_cents = g->cost_cents - g[-1].cost_cents;
    g->points = g->rating - g[-1].rating;
  }
  out->count++;
}

static void list_rungs(arena *a, const space *s, const rungs *r, ladder_answer *out) {
  const ladder_terms *t = &out->terms;
  int first = t->from > RUNGS_LEAST ? t->from : RUNGS_LEAST;
  int last = t->to > 0 && t->to < r->highest ? t->to : r->highest;
  if (t->have && t->have_reaches >= first) first = t->have_reaches + 1;
  out->rung = arena_array(a, RUNGS_MOST, sizeof *out->rung);
  for (int v = first; v <= last; v++) {
    int from = v;
    v = highest_at_cost(r, v, last);
    add_rung(a, s, r, from, v, out);
  }
}

/* Integers throughout: a point is left out when it lies on or above the line between its
 * neighbours on the hull. */
void ladder_mark_hull(ladder_rung *rung, int count) {
  int hull[RUNGS_MOST], n = 0;
  for (int i = 0; i < count; i++) {
    while (n >= 2) {
      const ladder_rung *p = &rung[hull[n - 2]], *q = &rung[hull[n - 1]];
      long long to_q = (q->cost_cents - p->cost_cents) * (rung[i].rating - p->rating);
      long long to_i = (rung[i].cost_cents - p->cost_cents) * (q->rating - p->rating);
      if (to_q < to_i) break;
      n--;
    }
    hull[n++] = i;
  }
  for (int i = 0; i < count; i++) rung[i].worth = false;
  for (int i = 0; i < n; i++) rung[hull[i]].worth = true;
}

/* ---- changes ---- */

/* Where both rooms ask the same, a wall and its mirror image are one: the words are those of the
 * nearer. */
static void list_changes(arena *a, const space *s, ladder_answer *out) {
  const catalog *c = s->context->catalog;
  bool inches = s->context->brief->units == UNITS_US;
  for (int i = 0; i < out->count; i++) {
    ladder_rung *g = &out->rung[i];
    const wall *to = &g->wall->wall;
    if (i > 0) {
      wall below = g[-1].wall->wall;
      if (s->mirror_once) below = changes_nearer(c, to, &below);
      changes_list(a, c, &below, to, inches, &g->changes);
    }
    if (!out->terms.have) continue;
    const wall *have = &out->terms.have->wall;
    wall nearer = s->mirror_once ? changes_nearer(c, have, to) : *to;
    changes_list(a, c, have, &nearer, inches, &g->from_have);
    g->extra_cents = g->cost_cents - out->terms.have->numbers.cost_cents;
  }
}

/* ---- when there is no rung ---- */

/* With the target at its least only the other rules are in the way. */
static void explain_none(arena *a, const space *s, ladder_answer *out) {
  sweep_result *swept = arena_alloc(a, sizeof *swept);
  pick_choice none = {.status = SOLVER_INFEASIBLE};
  out->why = arena_alloc(a, sizeof *out->why);
  sweep_run(a, s, swept);
  explain_pick(a, s, swept, &none, out->why);
}

/* What the other rules cost at one rung: a pick with the target there, which alone has all walls at
 * hand that a rule given up lets in. */
static void price_rules(arena *a, const judge_context *x, const ladder_terms *terms,
                        ladder_answer *out) {
  int value = terms->to > 0 ? terms->to : terms->own_value;
  if (value < out->lowest || value > out->highest) return;
  brief *asked = arena_alloc(a, sizeof *asked);
  judge_context *asking = arena_alloc(a, sizeof *asking);
  space *s = arena_alloc(a, sizeof *s);
  sweep_result *swept = arena_alloc(a, sizeof *swept);
  explanation *e = arena_alloc(a, sizeof *e);
  *asked = *x->brief;
  asked->targets[terms->climbs].value = value;
  *asking = *x;
  asking->brief = asked;
  space_build(a, asking, s);
  sweep_run(a, s, swept);
  if (swept->runner_count == 0) return;
  explain_prices(a, s, swept, &swept->runners[0], e);
  out->priced_at = value;
  out->prices = e->prices;
  out->price_count = e->price_count;
}

void ladder_explain(arena *a, const space *s, const rungs *r, const ladder_terms *terms,
                    ladder_answer *out) {
  *out = (ladder_answer){.terms = *terms, .lowest = r->lowest, .highest = r->highest};
  out->walls = r->walls;
  out->rated = r->rated;
  if (r->highest == 0) {
    explain_none(a, s, out);
  } else {
    list_rungs(a, s, r, out);
    ladder_mark_hull(out->rung, out->count);
    list_changes(a, s, out);
    price_rules(a, s->context, terms, out);
  }
  if (terms->have) ladder_edits(a, s->context, out);
}

/* ---- single changes of the given wall ---- */

const int ladder_gains[LADDER_GAINS] = {3, 5};

/* They rise in rating and in cost: the first that gains enough is the cheapest. */
bool ladder_least_for(const ladder_answer *l, int i, int gain) {
  int wanted = l->terms.have_reaches + ladder_gains[gain];
  return l->edit[i].reaches >= wanted && (i == 0 || l->edit[i - 1].reaches < wanted);
}

typedef struct editor {
  arena *arena;
  const judge_context *context;
  ladder_answer *out;
} editor;

/* Keeps what is cheaper than every change that gains as much, and drops what that beats. */
static void keep_edit(ladder_answer *out, const ladder_edit *e) {
  int kept = 0;
  for (int i = 0; i < out->edit_count; i++)
    if (out->edit[i].reaches >= e->reaches && out->edit[i].extra_cents <= e->extra_cents) return;
  for (int i = 0; i < out->edit_count; i++) {
    const ladder_edit *f = &out->edit[i];
    if (f->reaches > e->reaches || f->extra_cents < e->extra_cents) out->edit[kept++] = *f;
  }
  int at = kept < LADDER_MAX_EDITS ? kept : LADDER_MAX_EDITS - 1;
  for (; at > 0 && out->edit[at - 1].reaches > e->reaches; at--) out->edit[at] = out->edit[at - 1];
  out->edit[at] = *e;
  out->edit_count = kept < LADDER_MAX_EDITS ? kept + 1 : LADDER_MAX_EDITS;
}

static bool has_finding(const compat_report *r, const char *rule) {
  for (int i = 0; i < r->count; i++)
    if (text_equal(r->finding[i].rule, rule)) return true;
  return false;
}

/* It can be built, and is unusual in nothing that the given wall is not. */
static bool fits(const editor *e, const wall *w) {
  const compat_report *had = &e->out->terms.have->compat;
  compat_report r;
  compat_check(e->context->catalog, w, &r);
  if (r.worst == COMPAT_ILLEGAL) return false;
  if (e->context->brief->build == BUILD_ANY) return true;
  for (int i = 0; i < r.count; i++)
    if (r.finding[i].level != COMPAT_FINE && !has_finding(had, r.finding[i].rule)) return false;
  return true;
}

static bool may_use(const editor *e, bool ordinary) {
  return ordinary || e->context->brief->build == BUILD_ANY;
}

static void try_edit(editor *e, const wall *w) {
  const ladder_terms *t = &e->out->terms;
  const judge_context *x = e->context;
  if (!fits(e, w)) return;
  ladder_edit d = {.reaches = rungs_reached(x, t->climbs, w)};
  if (d.reaches <= t->have_reaches) return;
  d.wall = judge_at(e->arena, x, t->climbs, d.reaches, w);
  if (d.wall->takeoff.missing || (d.wall->broken & ~t->have->broken)) return;
  d.extra_cents = d.wall->numbers.cost_cents - t->have->numbers.cost_cents;
  changes_list(e->arena, x->catalog, &t->have->wall, w, x->brief->units == UNITS_US, &d.change);
  keep_edit(e->out, &d);
}

/* One layer more, as the last of the leaf or at the room, or other boards of the same number. */
static void edit_layers(editor *e, int side) {
  const catalog *c = e->context->catalog;
  const wall *have = &e->out->terms.have->wall;
  for (size_t i = 0; i < c->layer_count; i++) {
    if (!may_use(e, c->layers[i].ordinary)) continue;
    const face *f = &have->side[side];
    wall w = *have;
    face *g = &w.side[side];
    for (int k = 0; k < g->count; k++) g->layer[k] = (int)i;
    try_edit(e, &w);
    if (f->count == WALL_MAX_LAYERS) continue;
    *g = *f;
    g->layer[g->count++] = (int)i;
    try_edit(e, &w);
    *g = *f;
    for (int k = g->count++; k > 0; k--) g->layer[k] = f->layer[k - 1];
    g->layer[0] = (int)i;
    try_edit(e, &w);
  }
}

static void edit_mount(editor *e, int side) {
  const catalog *c = e->context->catalog;
  const wall *have = &e->out->terms.have->wall;
  for (size_t i = 0; i < c->mount_count; i++)
    for (size_t k = 0; k < c->mount_spacing_count; k++) {
      wall w = *have;
      w.mount[side] = (wall_mount){(int)i, c->mount_spacings_mm[k], c->mounts[i].clip_spacing_mm};
      try_edit(e, &w);
    }
}

/* Of two rows both, or either. */
static void edit_fill(editor *e) {
  const catalog *c = e->context->catalog;
  const wall *have = &e->out->terms.have->wall;
  bool two = wall_is_double(c, have);
  for (size_t i = 0; i < c->fill_count; i++) {
    if (!may_use(e, c->fills[i].ordinary)) continue;
    wall w = *have;
    w.fill[0] = (int)i;
    try_edit(e, &w);
    if (!two) continue;
    w.fill[1] = (int)i;
    try_edit(e, &w);
    w.fill[0] = have->fill[0];
    try_edit(e, &w);
  }
}

static void edit_frame(editor *e) {
  const catalog *c = e->context->catalog;
  const wall *have = &e->out->terms.have->wall;
  for (size_t i = 0; i < c->spacing_count; i++) {
    wall w = *have;
    w.spacing_mm = c->spacings_mm[i];
    try_edit(e, &w);
  }
  for (size_t i = 0; i < c->frame_count; i++) {
    wall w = *have;
    bool as_many =
        c->frames[i].rows == c->frames[have->frame].rows; /* else it is more than one change */
    if (!as_many || !may_use(e, c->frames[i].ordinary)) continue;
    w.frame = (int)i;
    try_edit(e, &w);
  }
}

void ladder_edits(arena *a, const judge_context *x, ladder_answer *out) {
  editor e = {a, x, out};
  out->edit_count = 0;
  if (out->terms.have->takeoff.missing) return;
  for (int side = 0; side < 2; side++) {
    edit_layers(&e, side);
    edit_mount(&e, side);
  }
  edit_fill(&e);
  edit_frame(&e);
}
