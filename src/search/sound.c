#include "search/sound.h"

#include <limits.h>
#include <math.h>

#include "acoustics/kernel.h"

/* The kernel's ratings and the reference's are steps of 0.1 dB, so that within the kernel's error
 * they are the same: that is relied on to compare walls. What falls so near a limit is decided by
 * the reference all the same. */
static const double stray_db = KERNEL_ERROR_DB;
/* The printed rating comes from the curve rounded to whole dB, which moves no band by more than 0.5
 * dB, and so the contour neither; the exact one is stepped down by less than 0.1 dB. OITC is
 * rounded half up once more. */
static const double printed_below_db = 0.5;
/* So far below what is needed a rating misses it whatever the kernel's error and the rounding to
 * 0.01 dB. */
static const double screen_below_db = 2 * KERNEL_ERROR_DB;
/* A rating that no wall has: for metrics that are not looked at. */
static const double any_rating_db = 1000;
static double printed_above(sound_metric m) {
  return m == METRIC_OITC ? 1.1 : 0.6;
}

static void add_metric(sound_aims *g, sound_metric m) {
  for (int i = 0; i < g->metrics; i++)
    if (g->metric[i] == m) return;
  g->metric[g->metrics++] = m;
}

/* With openings in scope a wall may pass by less than it has, as far as the lift goes. */
static double allowance(const sound_aims *g, const sound_aim *a) {
  return screen_below_db + (a->composite ? g->lift_db : 0);
}

/* Below even odds the standard deviation lifts what is promised: then nothing is known. */
static void set_screen(sound_aims *g) {
  for (int i = 0; i < g->count; i++) {
    const sound_aim *a = &g->aim[i];
    if (a->z < 0) {
      g->screen_stc = 0;
      return;
    }
    if (a->metric == METRIC_STC) g->screen_stc = fmax(g->screen_stc, a->needed - allowance(g, a));
  }
}

void sound_aims_set(const brief *b, sound_aims *out) {
  *out = (sound_aims){.count = b->target_count, .field_sd = b->field_sd};
  double whole = b->length_m * b->height_m, open = 0;
  for (int i = 0; i < b->opening_count; i++) open += b->openings[i].area_m2;
  if (open > 0) out->lift_db = 10 * log10(whole / (whole - open));
  double most[METRIC_COUNT];
  judge_composite_most(b, most);
  for (int i = 0; i < b->target_count; i++) {
    const target *t = &b->targets[i];
    sound_aim *a = &out->aim[i];
    *a = (sound_aim){
        .metric = t->metric, .needed = judge_needed(t, b->field_mean), .z = judge_z(t->confidence)};
    a->field = t->basis == BASIS_FIELD;
    a->published_only = t->evidence == EVIDENCE_PUBLISHED;
    a->composite = t->composite && b->opening_count > 0;
    a->shut = a->composite &&
              fmax(most[t->metric], floor(most[t->metric] + printed_above(t->metric))) < a->needed;
    add_metric(out, t->metric);
  }
  set_screen(out);
}

/* What is known of one target's rating. */
typedef struct range {
  double exact, low, high, printed_low, printed_high, spread;
  bool published;
} range;

static double spread_of(const sound_aims *g, const sound_aim *a, double sd) {
  return a->field ? sqrt(sd * sd + g->field_sd * g->field_sd) : sd;
}

static range range_of(const sound_aims *g, const sound_aim *a, const double *exact,
                      const double *sd, const wall_row *match) {
  range r = {.spread = sd[a->metric], .published = match && a->metric == METRIC_STC};
  if (r.published) {
    r.exact = r.low = r.high = r.printed_low = r.printed_high = match->stc;
    r.spread = match->stc_sd;
  } else {
    r.exact = exact[a->metric];
    r.low = r.exact - stray_db;
    r.high = r.exact + stray_db;
    r.printed_low = floor(r.exact - printed_below_db);
    r.printed_high = floor(r.exact + printed_above(a->metric));
  }
  r.spread = spread_of(g, a, r.spread);
  return r;
}

static int promise(double exact, double printed, const range *r, double needed, double z) {
  return rules_promised(judge_margin(exact, printed, r->spread, r->published, needed, z));
}

/* The widest that openings make of it: nothing is sure, and the composite may lie above the wall.
 */
static void bound_composite(const sound_aims *g, const sound_aim *a, const range *r,
                            sound_bounds *out, int *most) {
  out->least.with = out->least.with_bare = false;
  if (a->shut) {
    out->most.with = out->most.with_bare = false;
    return;
  }
  out->wide = true;
  double printed = floor(r->high + g->lift_db + printed_above(a->metric));
  if (r->published) printed = fmax(printed, r->printed_high);
  int with = promise(r->high + g->lift_db, printed, r, a->needed, a->z);
  out->most.with = out->most.with && with >= 0;
  out->most.with_bare = out->most.with_bare &&
                        (with >= 0 || promise(r->high + g->lift_db, printed, r, a->needed, 0) >= 0);
  if (with > *most) *most = with;
}

static bool same_reach(const judge_reach *x, const judge_reach *y) {
  return x->with == y->with && x->with_bare == y->with_bare && x->alone == y->alone &&
         x->alone_bare == y->alone_bare;
}

void sound_bound(const sound_aims *g, const double *exact, const double *sd, const wall_row *match,
                 sound_bounds *out) {
  *out = (sound_bounds){.least = {true, true, true, true}, .most = {true, true, true, true}};
  for (int i = 0; i < g->count; i++) {
    const sound_aim *a = &g->aim[i];
    range r = range_of(g, a, exact, sd, match);
    int low = promise(r.low, r.printed_low, &r, a->needed, a->z),
        high = promise(r.high, r.printed_high, &r, a->needed, a->z);
    int most = promise(r.exact, r.printed_high, &r, a->needed, a->z);
    bool bare_low = low >= 0 || promise(r.low, r.printed_low, &r, a->needed, 0) >= 0;
    bool bare_high = high >= 0 || promise(r.high, r.printed_high, &r, a->needed, 0) >= 0;
    out->least.alone = out->least.alone && low >= 0;
    out->most.alone = out->most.alone && high >= 0;
    out->least.alone_bare = out->least.alone_bare && bare_low;
    out->most.alone_bare = out->most.alone_bare && bare_high;
    if (a->composite) {
      out->composite = true;
      bound_composite(g, a, &r, out, &most);
    } else {
      out->least.with = out->least.with && low >= 0;
      out->most.with = out->most.with && high >= 0;
      out->least.with_bare = out->least.with_bare && bare_low;
      out->most.with_bare = out->most.with_bare && bare_high;
    }
    int least = promise(r.exact, r.printed_low, &r, a->needed, a->z);
    if (i == 0 || least < out->promised_least) out->promised_least = least;
    if (i == 0 || most < out->promised_most) out->promised_most = most;
    if (a->published_only && !r.published) out->evidence = rule_bit(RULE_EVIDENCE);
  }
  out->certain = same_reach(&out->least, &out->most);
  out->wide = out->wide && !out->certain;
}

double sound_least_stc(const sound_aims *g, const double *sd) {
  double least = g->screen_stc;
  for (int i = 0; i < g->count; i++) {
    const sound_aim *a = &g->aim[i];
    if (a->published_only) return HUGE_VAL;
    if (least > 0 && a->metric == METRIC_STC)
      least = fmax(least, a->needed + a->z * spread_of(g, a, sd[METRIC_STC]) - allowance(g, a));
  }
  return least;
}

void sound_screened(const sound_aims *g, double stc_at_most, const double *sd, sound_bounds *out) {
  double exact[METRIC_COUNT];
  for (int m = 0; m < METRIC_COUNT; m++) exact[m] = any_rating_db;
  exact[METRIC_STC] = stc_at_most;
  sound_bound(g, exact, sd, NULL, out);
  out->least = out->most = (judge_reach){false, false, false, false};
  out->promised_least = INT_MIN;
  out->certain = false;
}

int sound_outcomes(const sound_bounds *b, rule_mask out[SOUND_MAX_OUTCOMES]) {
  const rule_mask confidence = rule_bit(RULE_CONFIDENCE), composite = rule_bit(RULE_COMPOSITE);
  int n = 0;
  if (b->most.with) out[n++] = b->evidence;
  if (b->least.with) return n;
  if (b->composite && b->most.alone) out[n++] = composite | b->evidence;
  if (b->most.with_bare) out[n++] = confidence | b->evidence;
  if (b->composite && b->most.alone_bare) out[n++] = confidence | composite | b->evidence;
  if (!b->least.alone_bare && !b->least.with_bare) out[n++] = rule_bit(RULE_TARGET) | b->evidence;
  return n;
}
