#include "search/types_sound.h"

#include "acoustics/predict.h"

enum {
  FAMILY_KEYS = FAMILY_COUNT << OUTSIDE_COUNT,
  TENTHS_LEAST = -500, /* no exact rating lies beyond these, in 0.1 dB */
  TENTHS_MOST = 2000
};
/* The kernel may name a rating one step of 0.1 dB off the reference's. */
enum { STRAY_TENTHS = 1 };

/* One target of whoever has it. */
typedef struct aim_group {
  const brief *example;
  int target; /* of the example */
  sound_aims aims;
  ask_set members;
} aim_group;

/* Rating from which on a target may be, and is sure to be reached, for one sd. */
typedef struct aim_limits {
  double perhaps, certain;
} aim_limits;

struct types_sound {
  arena *arena;
  const catalog *catalog;
  aim_group *aim;
  int aims;
  sound_metric metric[METRIC_COUNT];
  int metrics;
  bool composite;
  aim_limits **limits; /* per family and reasons to doubt: `aims` values, NULL = not asked yet */
};

/* ---- targets ---- */

static bool equal(double x, double y) {
  return !(x < y) && !(x > y);
}

static bool same_opening(const opening *x, const opening *y) {
  if (!equal(x->area_m2, y->area_m2) || x->has_bands != y->has_bands) return false;
  if (!x->has_bands) return equal(x->stc, y->stc);
  for (int i = 0; i < BANDS; i++)
    if (!equal(x->tl_db[i], y->tl_db[i])) return false;
  return true;
}

static bool same_composite(const brief *x, const brief *y) {
  if (!equal(x->length_m, y->length_m) || !equal(x->height_m, y->height_m) ||
      x->opening_count != y->opening_count)
    return false;
  for (int i = 0; i < x->opening_count; i++)
    if (!same_opening(&x->openings[i], &y->openings[i])) return false;
  return true;
}

static bool same_target(const brief *x, const target *p, const brief *y, const target *q) {
  return p->metric == q->metric && equal(p->value, q->value) && p->basis == q->basis &&
         equal(p->confidence, q->confidence) && p->evidence == q->evidence &&
         p->composite == q->composite && equal(p->margin, q->margin) &&
         equal(x->field_mean, y->field_mean) && equal(x->field_sd, y->field_sd) &&
         (!p->composite || same_composite(x, y));
}

static void set_aims(const brief *b, int which, sound_aims *out) {
  brief one = *b;
  one.targets[0] = b->targets[which];
  one.target_count = 1;
  sound_aims_set(&one, out);
}

static void add_target(types_sound *t, const brief *b, int which, int bit) {
  int g = 0;
  while (g < t->aims &&
         !same_target(t->aim[g].example, &t->aim[g].example->targets[t->aim[g].target], b,
                      &b->targets[which]))
    g++;
  if (g == t->aims) {
    t->aim[t->aims++] = (aim_group){.example = b, .target = which};
    set_aims(b, which, &t->aim[g].aims);
    t->composite = t->composite || t->aim[g].aims.aim[0].composite;
    int m = 0;
    while (m < t->metrics && t->metric[m] != b->targets[which].metric) m++;
    if (m == t->metrics) t->metric[t->metrics++] = b->targets[which].metric;
  }
  ask_set_add(&t->aim[g].members, bit);
}

types_sound *types_sound_create(arena *a, const asks *k, const catalog *c) {
  types_sound *t = arena_alloc(a, sizeof *t);
  *t = (types_sound){.arena = a, .catalog = c};
  t->aim = arena_array(a, (size_t)k->count * BRIEF_MAX_TARGETS, sizeof *t->aim);
  t->limits = arena_array(a, FAMILY_KEYS, sizeof *t->limits);
  for (int i = 0; i < k->count; i++)
    for (int g = 0; g < k->item[i].demand.target_count; g++)
      add_target(t, &k->item[i].demand, g, k->item[i].bit);
  return t;
}

int types_sound_metrics(const types_sound *t, sound_metric out[METRIC_COUNT]) {
  for (int i = 0; i < t->metrics; i++) out[i] = t->metric[i];
  return t->metrics;
}

bool types_sound_composite(const types_sound *t) {
  return t->composite;
}

/* ---- limits ---- */

static sound_bounds bounds_at(const sound_aims *g, const double *sd, const wall_row *match,
                              double exact_db) {
  double exact[METRIC_COUNT];
  sound_bounds b;
  for (int m = 0; m < METRIC_COUNT; m++) exact[m] = exact_db;
  sound_bound(g, exact, sd, match, &b);
  return b;
}

static bool reached(const sound_aims *g, const double *sd, int tenths, bool certain) {
  sound_bounds b = bounds_at(g, sd, NULL, tenths * 0.1);
  return b.evidence == 0 && (certain ? b.least.with : b.most.with);
}

/* The first step of 0.1 dB at which the target is reached; what reaches it there does so above. */
static int first_tenth(const sound_aims *g, const double *sd, bool certain) {
  int below = TENTHS_LEAST, at = TENTHS_MOST;
  while (at - below > 1) {
    int middle = (below + at) / 2;
    if (reached(g, sd, middle, certain))
      at = middle;
    else
      below = middle;
  }
  return at;
}

static const aim_limits *limits_of(types_sound *t, sound_family family, unsigned outside) {
  aim_limits **slot = &t->limits[(unsigned)family << OUTSIDE_COUNT | outside];
  if (*slot) return *slot;
  double sd[METRIC_COUNT];
  predict_sd_of(t->catalog, family, outside, sd);
  *slot = arena_array(t->arena, (size_t)t->aims, sizeof **slot);
  for (int g = 0; g < t->aims; g++) { /* half a step more, so that no last bit decides */
    (*slot)[g].perhaps = (first_tenth(&t->aim[g].aims, sd, false) - STRAY_TENTHS) * 0.1 - 0.05;
    (*slot)[g].certain = (first_tenth(&t->aim[g].aims, sd, true) + STRAY_TENTHS) * 0.1 - 0.05;
  }
  return *slot;
}

/* ---- walls ---- */

static void who_of_published(const types_sound *t, const types_heard *h, ask_set *certain,
                             ask_set *perhaps) {
  double sd[METRIC_COUNT], least[METRIC_COUNT], most[METRIC_COUNT];
  predict_sd_of(t->catalog, h->family, h->outside, sd);
  for (int m = 0; m < METRIC_COUNT; m++) {
    least[m] = h->exact[m] - STRAY_TENTHS * 0.1;
    most[m] = h->exact[m] + STRAY_TENTHS * 0.1;
  }
  for (int g = 0; g < t->aims; g++) {
    sound_bounds low, high;
    sound_bound(&t->aim[g].aims, least, sd, h->match, &low);
    sound_bound(&t->aim[g].aims, most, sd, h->match, &high);
    if (high.evidence || !high.most.with) ask_set_drop(perhaps, &t->aim[g].members);
    if (low.evidence || !low.least.with) ask_set_drop(certain, &t->aim[g].members);
  }
}

void types_sound_who(types_sound *t, const types_heard *h, ask_set *certain, ask_set *perhaps) {
  if (h->match) {
    who_of_published(t, h, certain, perhaps);
    return;
  }
  const aim_limits *l = limits_of(t, h->family, h->outside);
  for (int g = 0; g < t->aims; g++) {
    double exact = h->exact[t->aim[g].aims.aim[0].metric];
    if (exact < l[g].perhaps) ask_set_drop(perhaps, &t->aim[g].members);
    if (exact < l[g].certain) ask_set_drop(certain, &t->aim[g].members);
  }
}
