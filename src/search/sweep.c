#include "search/sweep.h"

#include <stdlib.h>

#include "acoustics/kernel.h"
#include "acoustics/predict.h"
#include "base/threads.h"
#include "search/front.h"
#include "search/sound.h"
#include "search/tables.h"
#include "wall/line.h"

enum { CORES_A_BLOCK = 4, RATED_A_BLOCK = 32 };

/* What one block of cores leaves behind, besides what its worker keeps. */
typedef struct block_result {
  feasible_block *first, *last;
  const char *unpriced;
} block_result;

/* What all workers read. */
typedef struct whole {
  const space *space;
  const int *order; /* of the cores */
  kernel_leaves *leaves;
  sound_aims aims;
  block_result *block;
} whole;

/* What one worker keeps. Everything is defined by the walls alone, so that it is no matter which
 * walls it met. */
typedef struct sweep {
  const whole *whole;
  arena *arena;
  const space *space;
  tables *tables;
  kernel_core *kernel;
  const sound_aims *aims;
  core_facts core;
  candidate *wall; /* of one leaf on A: the walls that are looked at, by their leaves on B */
  int *face_b, *left;
  double *exact;       /* METRIC_COUNT x face_count, in the order of `left` */
  double *stc_at_most; /* by leaf on B */
  front front;
  masks masks;
  struct masks kinds; /* cheapest wall that breaks nothing, by kind_of */
  block_result *now;
  long long walls, rated;
} sweep;

/* ---- the reference ---- */

/* Replaces what the kernel said of a wall's sound by what the reference says. */
static void rate_exactly(const space *sp, candidate *c, rule_mask other_rules) {
  const judge_context *x = sp->context;
  wall w = space_wall(sp, c->core, c->face_a, c->face_b);
  prediction p;
  predict_wall(x->catalog, &w, &p);
  judge_sound v = judge_targets(x, &p, evidence_match(x->catalog, &w), NULL);
  c->is.promised_hundredth = v.promised_hundredth;
  c->broken = other_rules | v.broken;
  c->instead = v.instead ? other_rules | v.instead : 0;
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

static front_member member_of(const candidate *c, const sound_bounds *b) {
  front_member m = {.wall = *c, .promised_least = b->promised_least};
  m.wall.is.promised_hundredth = b->promised_most;
  name_rules(&b->most, c->broken | b->evidence, &m.wall.broken, &m.wall.instead);
  name_rules(&b->least, c->broken | b->evidence, &m.broken_most, &m.instead_most);
  return m;
}

/* Keeps a wall, rules of sound not yet in c->broken, wherever it may be needed. */
static void keep(sweep *s, const candidate *c, const sound_bounds *b) {
  front_member m = member_of(c, b);
  bool cheapest = may_be_cheapest(s, c, b), stays = !front_beats(&s->front, &m);
  if (!cheapest && !stays) return;
  if (!b->certain && (cheapest || b->wide)) {
    candidate sure = *c;
    rate_exactly(s->space, &sure, c->broken);
    s->rated++;
    m = front_exact(&sure);
    stays = !front_beats(&s->front, &m);
  }
  if (cheapest) keep_cheapest(s, &m.wall);
  if (stays) front_add(&s->front, &m);
}

static void note_feasible(sweep *s, const candidate *c, bool certain) {
  block_result *r = s->now;
  if (!r->last || r->last->count == SWEEP_BLOCK) {
    feasible_block *block = arena_alloc(s->arena, sizeof *block);
    if (r->last)
      r->last->next = block;
    else
      r->first = block;
    r->last = block;
  }
  r->last->wall[r->last->count++] =
      (feasible_wall){c->core, (unsigned short)c->face_a, (unsigned short)c->face_b, certain};
}

bool sweep_confirms(const space *s, const feasible_wall *f) {
  wall w = space_wall(s, f->core, f->face_a, f->face_b);
  prediction p;
  predict_wall(s->context->catalog, &w, &p);
  return judge_targets(s->context, &p, evidence_match(s->context->catalog, &w), NULL).broken == 0;
}

/* ---- one wall, one row of walls, one core ---- */

static bool priced(sweep *s, int face_a, int face_b, candidate *c) {
  s->walls++;
  if (tables_wall(s->tables, &s->core, face_a, face_b, c)) return true;
  wall w = space_wall(s->space, s->core.core, face_a, face_b);
  if (!s->now->unpriced) s->now->unpriced = line_print(s->arena, s->space->context->catalog, &w);
  return false;
}

/* `exact`: METRIC_COUNT values. */
static void sweep_wall(sweep *s, const candidate *c, const double *exact) {
  double sd[METRIC_COUNT];
  const wall_row *match = tables_sound(s->tables, &s->core, c->face_a, c->face_b, sd);
  sound_bounds b;
  sound_bound(s->aims, exact, sd, match, &b);
  if (c->broken == 0 && b.most.with && !b.evidence) note_feasible(s, c, b.least.with);
  keep(s, c, &b);
}

/* Whether a wall need not be rated: its STC is surely so low that it breaks the target, and some
 * other wall stands for it even if it promises all that it may. */
static bool screened(sweep *s, const candidate *c) {
  double stc = s->stc_at_most[c->face_b], sd[METRIC_COUNT];
  if (stc >= s->aims->screen_stc) return false;
  if (tables_sound(s->tables, &s->core, c->face_a, c->face_b, sd)) return false;
  sound_bounds b;
  sound_screened(s->aims, stc, sd, &b);
  front_member m = member_of(c, &b);
  if (!front_beats(&s->front, &m)) return false;
  if (masks_wants(&s->masks, m.wall.broken, &m.wall)) masks_offer(&s->masks, m.wall.broken, &m.wall);
  return true;
}

/* Rates one leaf on A with `count` leaves on B: exact[metric x face_count + place in the list]. */
static void rate_listed(sweep *s, int face_a, const int *face_b, int count) {
  const kernel_leaves *leaves = s->whole->leaves;
  for (int i = 0; i < s->aims->metrics; i++) {
    sound_metric m = s->aims->metric[i];
    kernel_rate_listed(s->kernel, leaves, face_a, leaves, face_b, count, m,
                       s->exact + (size_t)m * (size_t)s->space->face_count);
  }
}

static void sweep_row(sweep *s, int face_a) {
  int found = space_row(s->space, s->core.core, face_a, s->face_b), left = 0;
  if (found == 0) return;
  bool screen = s->aims->screen_stc > 0;
  int first = s->face_b[0], last = s->face_b[found - 1];
  if (screen)
    kernel_bound(s->kernel, s->whole->leaves, face_a, first, last - first + 1,
                 s->stc_at_most + first);
  for (int i = 0; i < found; i++) {
    candidate *c = &s->wall[left];
    if (!priced(s, face_a, s->face_b[i], c) || (screen && screened(s, c))) continue;
    s->left[left++] = s->face_b[i];
  }
  if (left == 0) return;
  rate_listed(s, face_a, s->left, left);
  for (int i = 0; i < left; i++) {
    double exact[METRIC_COUNT];
    for (int m = 0; m < METRIC_COUNT; m++)
      exact[m] = s->exact[(size_t)m * (size_t)s->space->face_count + (size_t)i];
    sweep_wall(s, &s->wall[i], exact);
  }
}

static void sweep_block(void *shared, void *own, int block) {
  const whole *w = shared;
  sweep *s = own;
  s->now = &w->block[block];
  int first = block * CORES_A_BLOCK, last = first + CORES_A_BLOCK;
  for (int k = first; k < last && k < w->space->core_count; k++) {
    tables_core(s->tables, w->order[k], &s->core);
    if (w->aims.count > 0) kernel_core_set(s->kernel, &w->space->cores[w->order[k]]);
    for (int i = 0; i < w->space->face_count; i++) sweep_row(s, i);
  }
}

static void *sweep_start(void *shared, arena *a, int worker) {
  (void)worker;
  const whole *w = shared;
  const space *sp = w->space;
  size_t faces = (size_t)sp->face_count;
  sweep *s = arena_alloc(a, sizeof *s);
  *s = (sweep){.whole = w, .arena = a, .space = sp, .aims = &w->aims};
  s->tables = tables_create(a, sp);
  s->kernel = kernel_core_create(a, sp->context->catalog);
  s->wall = arena_array(a, faces, sizeof *s->wall);
  s->face_b = arena_array(a, faces, sizeof *s->face_b);
  s->left = arena_array(a, faces, sizeof *s->left);
  s->exact = arena_array(a, METRIC_COUNT * faces, sizeof *s->exact);
  s->stc_at_most = arena_array(a, faces, sizeof *s->stc_at_most);
  front_init(&s->front, a, sp);
  masks_init(&s->masks, a, sp);
  masks_init(&s->kinds, a, sp);
  return s;
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
static candidate *sort_in_tie_order(arena *a, const space *sp, candidate *list, int count) {
  candidate *other = arena_array(a, (size_t)count, sizeof *other);
  for (int run = 1; run < count; run *= 2) {
    for (int at = 0; at < count; at += 2 * run) {
      int middle = at + run < count ? at + run : count;
      int last = at + 2 * run < count ? at + 2 * run : count;
      merge(sp, list, at, middle, last, other);
    }
    candidate *done = other;
    other = list;
    list = done;
  }
  return list;
}

/* Walls that the reference has yet to rate, in any order. */
typedef struct unrated {
  const space *space;
  candidate **wall;
  int count;
} unrated;

static void rate_block(void *shared, void *own, int block) {
  (void)own;
  const unrated *u = shared;
  int first = block * RATED_A_BLOCK, last = first + RATED_A_BLOCK;
  for (int i = first; i < last && i < u->count; i++)
    rate_exactly(u->space, u->wall[i], u->wall[i]->broken & ~sound_rules);
}

static void rate_all(arena *a, sweep_result *r, unrated *u) {
  const threads_work work = {.block = rate_block, .shared = u};
  threads_run(a, threads_count(u->space->threads), (u->count + RATED_A_BLOCK - 1) / RATED_A_BLOCK,
              &work, NULL);
  r->rated += u->count;
}

/* The walls of the fronts as the reference rates them, again without those that another beats: in
 * tie order only an earlier wall can beat one. */
static void finish_front(arena *a, const space *sp, sweep *const *worker, int workers,
                         sweep_result *r) {
  int count = 0, all = 0;
  for (int w = 0; w < workers; w++) all += worker[w]->front.count;
  candidate *list = arena_array(a, (size_t)all, sizeof *list);
  unrated u = {sp, arena_array(a, (size_t)all, sizeof *u.wall), 0};
  for (int w = 0; w < workers; w++) {
    const front *f = &worker[w]->front;
    for (int g = 0; g < f->groups; g++)
      for (int i = 0; i < f->group[g].count; i++) {
        const front_member *m = &f->group[g].item[i];
        if (!m->exact) u.wall[u.count++] = &list[count];
        list[count++] = m->wall;
      }
  }
  rate_all(a, r, &u);
  list = sort_in_tie_order(a, sp, list, count);
  front kept;
  front_init(&kept, a, sp);
  r->frontier = arena_array(a, (size_t)count, sizeof *r->frontier);
  for (int i = 0; i < count; i++) {
    front_member m = front_exact(&list[i]);
    if (front_beats(&kept, &m)) continue;
    front_add(&kept, &m);
    r->frontier[r->frontier_count++] = list[i];
  }
}

static int compare_masks(const void *x, const void *y) {
  const mask_best *p = x, *q = y;
  return (p->broken > q->broken) - (p->broken < q->broken);
}

static void finish_masks(arena *a, const space *sp, const masks *kept, sweep_result *r) {
  unrated u = {sp, arena_array(a, (size_t)kept->count, sizeof *u.wall), kept->count};
  r->mask_count = kept->count;
  r->masks = kept->item;
  if (r->mask_count > 0) qsort(r->masks, (size_t)r->mask_count, sizeof *r->masks, compare_masks);
  for (int i = 0; i < r->mask_count; i++) u.wall[i] = &r->masks[i].best;
  rate_all(a, r, &u);
}

static void finish_runners(const space *sp, const masks *kinds, sweep_result *r) {
  for (int i = 0; i < kinds->count; i++) {
    const candidate *c = &kinds->item[i].best;
    int at = r->runner_count < SWEEP_RUNNERS ? r->runner_count++ : SWEEP_RUNNERS;
    for (; at > 0 && candidate_compare(sp, c, &r->runners[at - 1]) < 0; at--)
      if (at < SWEEP_RUNNERS) r->runners[at] = r->runners[at - 1];
    if (at < SWEEP_RUNNERS) r->runners[at] = *c;
  }
  for (int i = 0; i < r->runner_count; i++) rate_exactly(sp, &r->runners[i], 0);
  r->rated += r->runner_count;
}

static void take_masks(masks *all, const masks *some) {
  for (int i = 0; i < some->count; i++)
    masks_offer(all, some->item[i].broken, &some->item[i].best);
}

/* What the blocks noted, in the order of the cores. */
static void chain_blocks(const block_result *block, int blocks, sweep_result *r) {
  feasible_block **end = &r->feasible;
  for (int i = 0; i < blocks; i++) {
    if (!r->unpriced) r->unpriced = block[i].unpriced;
    if (!block[i].first) continue;
    *end = block[i].first;
    end = &block[i].last->next;
  }
}

void sweep_run(arena *a, const space *sp, sweep_result *out) {
  *out = (sweep_result){0};
  if (sp->core_count == 0 || sp->face_count == 0) return;
  int blocks = (sp->core_count + CORES_A_BLOCK - 1) / CORES_A_BLOCK, workers = 0;
  whole *w = arena_alloc(a, sizeof *w);
  w->space = sp;
  w->order = tables_cores_by_cost(a, sp);
  w->leaves = kernel_leaves_create(a, sp->context->catalog, sp->faces, sp->face_count);
  w->block = arena_array(a, (size_t)blocks, sizeof *w->block);
  sound_aims_set(sp->context->brief, &w->aims);
  void *own[THREADS_MAX];
  sweep *worker[THREADS_MAX];
  const threads_work work = {sweep_start, sweep_block, w};
  int threads = threads_count(sp->threads);
  threads_run(a, threads, blocks, &work, own);
  masks all, kinds;
  masks_init(&all, a, sp);
  masks_init(&kinds, a, sp);
  for (int i = 0; i < threads; i++) {
    if (!own[i]) continue;
    sweep *s = worker[workers++] = own[i];
    take_masks(&all, &s->masks);
    take_masks(&kinds, &s->kinds);
    out->walls += s->walls;
    out->rated += s->rated;
  }
  chain_blocks(w->block, blocks, out);
  finish_front(a, sp, worker, workers, out);
  finish_masks(a, sp, &all, out);
  finish_runners(sp, &kinds, out);
}
