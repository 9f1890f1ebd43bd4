#include "search/sweep.h"

#include <stdlib.h>

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "search/front.h"
#include "search/sound.h"
#include "search/tables.h"
#include "wall/line.h"

typedef struct sweep {
  arena *arena;
  const space *space;
  tables *tables;
  kernel_core *kernel;
  kernel_leaves *leaves;
  sound_aims aims;
  core_facts core;
  double *exact; /* METRIC_COUNT x face_count: ratings of one leaf on A with all leaves on B */
  front front;
  masks masks;
  struct masks kinds; /* cheapest wall that breaks nothing, by kind_of */
  feasible_block *last;
  sweep_result *out;
} sweep;

/* ---- the reference ---- */

/* Replaces what the kernel said of a wall's sound by what the reference says. */
static void rate_exactly(sweep *s, candidate *c, rule_mask other_rules) {
  const judge_context *x = s->space->context;
  wall w = space_wall(s->space, c->core, c->face_a, c->face_b);
  prediction p;
  predict_wall(x->catalog, &w, &p);
  judge_sound v = judge_targets(x, &p, evidence_match(x->catalog, &w), NULL);
  c->is.promised_hundredth = v.promised_hundredth;
  c->broken = other_rules | v.broken;
  c->instead = v.instead ? other_rules | v.instead : 0;
  s->out->rated++;
}

static const rule_mask sound_rules = UINT64_C(1) << RULE_TARGET | UINT64_C(1) << RULE_CONFIDENCE |
                                     UINT64_C(1) << RULE_EVIDENCE | UINT64_C(1) << RULE_COMPOSITE;

/* ---- what is kept ---- */

/* Walls of one kind differ in small things: spacing, fill, boards of other sorts. */
static uint64_t kind_of(const sweep *s, const candidate *c) {
  const catalog *cat = s->space->context->catalog;
  const wall *core = &s->space->cores[c->core];
  uint64_t a = (uint64_t)face_boards(cat, &s->space->faces[c->face_a]);
  uint64_t b = (uint64_t)face_boards(cat, &s->space->faces[c->face_b]);
  uint64_t mount_a = (uint64_t)(core->mount[SIDE_A].mount + 1),
           mount_b = (uint64_t)(core->mount[SIDE_B].mount + 1);
  return (uint64_t)core->frame << 32 | mount_a << 20 | mount_b << 8 |
         (a < b ? a << 4 | b : b << 4 | a);
}

/* Whether a wall may be the cheapest of its kind or of its set of broken rules, whatever its sound
 * turns out to be. */
static bool may_be_cheapest(const sweep *s, const candidate *c, const sound_bounds *b) {
  rule_mask set[SOUND_MAX_OUTCOMES];
  int n = sound_outcomes(b, set);
  for (int i = 0; i < n; i++) {
    rule_mask broken = c->broken | set[i];
    if (masks_wants(&s->masks, broken, c)) return true;
    if (broken == 0 && masks_wants(&s->kinds, kind_of(s, c), c)) return true;
  }
  return false;
}

static void name_rules(const judge_reach *reach, rule_mask others, rule_mask *broken,
                       rule_mask *instead) {
  judge_name_reach(reach, broken, instead);
  *broken |= others;
  if (*instead) *instead |= others;
}

static void keep_cheapest(sweep *s, const candidate *c) {
  masks_offer(&s->masks, c->broken, c);
  if (c->instead) masks_offer(&s->masks, c->instead, c);
  if (c->broken == 0) masks_offer(&s->kinds, kind_of(s, c), c);
}

/* Keeps a wall, rules of sound not yet in c->broken, wherever it may be needed. */
static void keep(sweep *s, const candidate *c, const sound_bounds *b) {
  front_member m = {.wall = *c, .promised_least = b->promised_least};
  m.wall.is.promised_hundredth = b->promised_most;
  name_rules(&b->most, c->broken | b->evidence, &m.wall.broken, &m.wall.instead);
  name_rules(&b->least, c->broken | b->evidence, &m.broken_most, &m.instead_most);
  bool cheapest = may_be_cheapest(s, c, b), stays = !front_beats(&s->front, &m);
  if (!cheapest && !stays) return;
  if (!b->certain && (cheapest || b->wide)) {
    candidate sure = *c;
    rate_exactly(s, &sure, c->broken);
    m = front_exact(&sure);
    stays = !front_beats(&s->front, &m);
  }
  if (cheapest) keep_cheapest(s, &m.wall);
  if (stays) front_add(&s->front, &m);
}

static void note_feasible(sweep *s, const candidate *c, bool certain) {
  if (!s->last || s->last->count == SWEEP_BLOCK) {
    feasible_block *block = arena_alloc(s->arena, sizeof *block);
    if (s->last)
      s->last->next = block;
    else
      s->out->feasible = block;
    s->last = block;
  }
  s->last->wall[s->last->count++] =
      (feasible_wall){c->core, (unsigned short)c->face_a, (unsigned short)c->face_b, certain};
}

bool sweep_confirms(const space *s, const feasible_wall *f) {
  wall w = space_wall(s, f->core, f->face_a, f->face_b);
  prediction p;
  predict_wall(s->context->catalog, &w, &p);
  return judge_targets(s->context, &p, evidence_match(s->context->catalog, &w), NULL).broken == 0;
}

/* ---- one wall, one row of walls, one core ---- */

static void sweep_wall(sweep *s, int face_a, int face_b, const double *exact) {
  candidate c;
  s->out->walls++;
  if (!tables_wall(s->tables, &s->core, face_a, face_b, &c)) {
    wall w = space_wall(s->space, s->core.core, face_a, face_b);
    if (!s->out->unpriced) s->out->unpriced = line_print(s->arena, s->space->context->catalog, &w);
    return;
  }
  double sd[METRIC_COUNT];
  const wall_row *match = tables_sound(s->tables, &s->core, face_a, face_b, sd);
  sound_bounds b;
  sound_bound(&s->aims, exact, sd, match, &b);
  if (c.broken == 0 && b.most.with && !b.evidence) note_feasible(s, &c, b.least.with);
  keep(s, &c, &b);
}

/* Rates one leaf on A with the leaves first..last on B, in every metric asked for: exact[metric] at
 * the leaf's own place. */
static void rate_row(sweep *s, int face_a, int first, int last) {
  size_t faces = (size_t)s->space->face_count;
  for (int i = 0; i < s->aims.metrics; i++) {
    sound_metric m = s->aims.metric[i];
    kernel_rate(s->kernel, s->leaves, face_a, first, last - first + 1, m,
                s->exact + (size_t)m * faces + first);
  }
}

static void sweep_row(sweep *s, int face_a) {
  int core = s->core.core, faces = s->space->face_count, first = faces, last = -1;
  for (int j = 0; j < faces; j++) {
    if (!space_legal(s->space, core, face_a, j)) continue;
    if (first == faces) first = j;
    last = j;
  }
  if (last < 0) return;
  rate_row(s, face_a, first, last);
  for (int j = first; j <= last; j++) {
    if (!space_legal(s->space, core, face_a, j)) continue;
    double exact[METRIC_COUNT];
    for (int m = 0; m < METRIC_COUNT; m++)
      exact[m] = s->exact[(size_t)m * (size_t)faces + (size_t)j];
    sweep_wall(s, face_a, j, exact);
  }
}

static void sweep_cores(sweep *s) {
  const int *order = tables_cores_by_cost(s->arena, s->space);
  for (int k = 0; k < s->space->core_count; k++) {
    tables_core(s->tables, order[k], &s->core);
    if (s->aims.count > 0) kernel_core_set(s->kernel, &s->space->cores[order[k]]);
    for (int i = 0; i < s->space->face_count; i++) sweep_row(s, i);
  }
}

/* ---- the whole ---- */

/* Merges two runs in tie order. */
static void merge(const space *sp, const candidate *from, int first, int middle, int last,
                  candidate *to) {
  int i = first, j = middle;
  for (int k = first; k < last; k++) {
    bool left = j == last || (i < middle && candidate_compare(sp, &from[i], &from[j]) < 0);
    to[k] = left ? from[i++] : from[j++];
  }
}

/* Tie order needs the space for its lines, which qsort has no place for. */
static candidate *sort_in_tie_order(sweep *s, candidate *list, int count) {
  candidate *other = arena_array(s->arena, (size_t)count, sizeof *other);
  for (int run = 1; run < count; run *= 2) {
    for (int at = 0; at < count; at += 2 * run) {
      int middle = at + run < count ? at + run : count;
      int last = at + 2 * run < count ? at + 2 * run : count;
      merge(s->space, list, at, middle, last, other);
    }
    candidate *done = other;
    other = list;
    list = done;
  }
  return list;
}

/* The walls of the front as the reference rates them, again without those that another beats: in
 * tie order only an earlier wall can beat one. */
static void finish_front(sweep *s) {
  front kept = s->front;
  sweep_result *r = s->out;
  candidate *list = arena_array(s->arena, (size_t)kept.count, sizeof *list);
  int count = 0;
  for (int g = 0; g < kept.groups; g++)
    for (int i = 0; i < kept.group[g].count; i++) {
      front_member *m = &kept.group[g].item[i];
      if (!m->exact) rate_exactly(s, &m->wall, m->wall.broken & ~sound_rules);
      list[count++] = m->wall;
    }
  list = sort_in_tie_order(s, list, count);
  front_init(&s->front, s->arena, s->space);
  r->frontier = arena_array(s->arena, (size_t)count, sizeof *r->frontier);
  for (int i = 0; i < count; i++) {
    front_member m = front_exact(&list[i]);
    if (front_beats(&s->front, &m)) continue;
    front_add(&s->front, &m);
    r->frontier[r->frontier_count++] = list[i];
  }
}

static int compare_masks(const void *x, const void *y) {
  const mask_best *p = x, *q = y;
  return (p->broken > q->broken) - (p->broken < q->broken);
}

static void finish_masks(sweep *s) {
  sweep_result *r = s->out;
  r->mask_count = s->masks.count;
  r->masks = s->masks.item;
  if (r->mask_count > 0) qsort(r->masks, (size_t)r->mask_count, sizeof *r->masks, compare_masks);
  for (int i = 0; i < r->mask_count; i++)
    rate_exactly(s, &r->masks[i].best, r->masks[i].best.broken & ~sound_rules);
}

static void finish_runners(sweep *s) {
  sweep_result *r = s->out;
  for (int i = 0; i < s->kinds.count; i++) {
    const candidate *c = &s->kinds.item[i].best;
    int at = r->runner_count < SWEEP_RUNNERS ? r->runner_count++ : SWEEP_RUNNERS;
    for (; at > 0 && candidate_compare(s->space, c, &r->runners[at - 1]) < 0; at--)
      if (at < SWEEP_RUNNERS) r->runners[at] = r->runners[at - 1];
    if (at < SWEEP_RUNNERS) r->runners[at] = *c;
  }
  for (int i = 0; i < r->runner_count; i++) rate_exactly(s, &r->runners[i], 0);
}

void sweep_run(arena *a, const space *sp, sweep_result *out) {
  const judge_context *x = sp->context;
  *out = (sweep_result){0};
  sweep s = {.arena = a, .space = sp, .out = out};
  if (sp->core_count == 0 || sp->face_count == 0) return;
  s.tables = tables_create(a, sp);
  sound_aims_set(x->brief, &s.aims);
  s.kernel = kernel_core_create(a, x->catalog);
  s.leaves = kernel_leaves_create(a, x->catalog, sp->faces, sp->face_count);
  s.exact = arena_array(a, (size_t)METRIC_COUNT * (size_t)sp->face_count, sizeof *s.exact);
  front_init(&s.front, a, sp);
  masks_init(&s.masks, a, sp);
  masks_init(&s.kinds, a, sp);
  sweep_cores(&s);
  finish_front(&s);
  finish_masks(&s);
  finish_runners(&s);
}
