#include "report/view_trim.h"

#include <math.h>

sound_metric view_trim_metric(const report *r) {
  return r->brief->target_count > 0 ? r->brief->targets[0].metric : METRIC_STC;
}

double view_trim_shift(const report *r, const assessment *from, const assessment *to) {
  sound_metric m = view_trim_metric(r);
  return to->predicted.exact[m] - from->predicted.exact[m];
}

const char *view_trim_verdict(const trim_answer *t) {
  static const char *const words[] = {"holds", "not_shown", "fails"};
  return words[t->verdict];
}

/* Whether an earlier target asks in the same metric. */
static bool asked_before(const report *r, int i) {
  for (int k = 0; k < i; k++)
    if (r->brief->targets[k].metric == r->brief->targets[i].metric) return true;
  return false;
}

const char *view_trim_rating(const report *r, const assessment *x) {
  text t;
  text_init(&t, r->arena, 1000);
  for (int i = 0; i < r->brief->target_count; i++) {
    sound_metric m = r->brief->targets[i].metric;
    if (asked_before(r, i)) continue;
    text_putf(&t, "%s%s %d ", t.len ? ", " : "", sound_metric_names[m], rating_of(&x->ratings, m));
    if (view_published(x, m))
      text_putf(&t, "(published: %s)", x->evidence.match->name);
    else
      text_put(&t, "(predicted)");
  }
  return t.data;
}

const char *view_trim_sure(const report *r, const assessment *x) {
  const double last_bits = 1e-9; /* never rounded up: 79.9 % is not 80 % */
  text t;
  text_init(&t, r->arena, 1000);
  for (int i = 0; i < r->brief->target_count; i++) {
    const target *g = &r->brief->targets[i];
    text_put(&t, t.len ? ", " : "");
    text_fixed(&t, floor(100.0 * x->probability[i] + last_bits), 0);
    text_putf(&t, " %% sure of %s ", sound_metric_names[g->metric]);
    text_number(&t, judge_needed(g, r->brief->field_mean), 1);
  }
  return t.data;
}

const char *view_trim_fire(const report *r, const assessment *x) {
  if (x->fire.minutes == 0) return "not shown";
  return text_format(r->arena, "%d min: %s", x->fire.minutes, x->fire.basis);
}

/* Words for the bits that are set, with commas between. */
static void put_words(unsigned bits, const view_trim_word *words, text *out) {
  for (int i = 0, n = 0; words[i].word != NULL; i++)
    if (bits & words[i].bit) text_putf(out, "%s%s", n++ ? ", " : "", words[i].word);
}

const view_trim_word view_trim_waivers[] = {{TRIM_ALLOW_THINNER_STUDS, "thinner-studs"},
                                            {TRIM_ALLOW_PLAIN_BOARDS, "plain-boards"},
                                            {TRIM_ALLOW_THICKER, "thicker"},
                                            {TRIM_ALLOW_COMBUSTIBLE, "combustible"},
                                            {TRIM_ALLOW_LESS_FIRE, "less-fire"},
                                            {0, NULL}};
const view_trim_word view_trim_holds[] = {{TRIM_KEEP_FRAME, "frame"},
                                          {TRIM_KEEP_FIRE, "fire"},
                                          {TRIM_KEEP_THICKNESS, "thickness"},
                                          {0, NULL}};

const char *view_trim_promises(const report *r, const trim_answer *t) {
  const trim_terms *g = &t->terms;
  text out;
  text_init(&out, r->arena, 2000);
  if (g->promised_stc > 0) text_putf(&out, "STC %d", g->promised_stc);
  if (g->promised_fire > 0)
    text_putf(&out, "%s%d min of fire resistance", out.len ? ", " : "", g->promised_fire);
  if (g->design) text_putf(&out, "%sdesign %s", out.len ? ", " : "", g->design);
  return out.len ? out.data : NULL;
}

/* What the make of the specified wall adds to the rules. */
static void put_make(const report *r, text *out) {
  static const int rules[] = {RULE_STUDS, RULE_NONCOMBUSTIBLE, RULE_WET_A,
                              RULE_WET_B, RULE_ABUSE_A,        RULE_ABUSE_B};
  for (size_t i = 0; i < sizeof rules / sizeof rules[0]; i++) {
    if (!(rules_in_force(r->brief) & rule_bit(rules[i]))) continue;
    text_putf(out, "; %s", rule_limit(r->arena, r->brief, rules[i]));
    if (rules[i] == RULE_WET_A || rules[i] == RULE_ABUSE_A) text_put(out, " on side A");
    if (rules[i] == RULE_WET_B || rules[i] == RULE_ABUSE_B) text_put(out, " on side B");
  }
}

static void put_choices(const trim_terms *g, text *out) {
  if (g->keep) {
    text_put(out, "; to be kept as it is: ");
    put_words(g->keep, view_trim_holds, out);
  }
  if (g->allow) {
    text_put(out, "; waived: ");
    put_words(g->allow, view_trim_waivers, out);
  }
}

const char *view_trim_terms(const report *r, const trim_answer *t) {
  const brief *b = r->brief;
  text out;
  text_init(&out, r->arena, 2000);
  text_put(&out, t->terms.own ? "its own figures, as the brief sets no target: " : "the brief: ");
  for (int i = 0; i < b->target_count; i++)
    text_putf(&out, "%s%s", i ? "; " : "", view_target(r, &b->targets[i]));
  if (b->fire_min > 0) text_putf(&out, "; fire %d min", b->fire_min);
  text_put(&out, "; height ");
  units_put_height(&out, b->height_m, r->units);
  if (b->thickness_m.has_max) {
    text_put(&out, "; no thicker than ");
    units_put_thickness(&out, b->thickness_m.max, r->units);
  }
  put_make(r, &out);
  put_choices(&t->terms, &out);
  text_put(&out, "; and every other rule of the brief.");
  return out.data;
}

/* ---- what one change does ---- */

static void start(text *t) {
  if (t->len) text_put(t, ", ");
}

static void put_sound(const report *r, const assessment *from, const assessment *to, text *t) {
  sound_metric m = view_trim_metric(r);
  int before = rating_of(&from->ratings, m), after = rating_of(&to->ratings, m);
  double shift = view_trim_shift(r, from, to);
  bool moved = fabs(shift) > 0.05; /* less prints as 0.0 */
  if (before == after && !moved) return;
  start(t);
  text_putf(t, "%s %d ", sound_metric_names[m], before);
  if (before == after)
    text_put(t, "stays");
  else
    text_putf(t, "becomes %d", after);
  if (moved)
    text_putf(t, " (%s%s dB predicted)", shift > 0 ? "+" : "", text_of(r->arena, shift, 1));
  if (view_published(from, m) && !view_published(to, m)) text_put(t, ", no longer published");
}

static void put_thickness(const report *r, const assessment *from, const assessment *to, text *t) {
  int tenths = to->numbers.thickness_tenth_mm - from->numbers.thickness_tenth_mm;
  if (tenths == 0) return;
  start(t);
  units_put_thickness(t, fabs(to->thickness_m - from->thickness_m), r->units);
  text_put(t, tenths > 0 ? " thicker" : " thinner");
}

static void put_fire_and_height(const report *r, const assessment *from, const assessment *to,
                                text *t) {
  if (to->fire.minutes != from->fire.minutes) {
    start(t);
    text_putf(t, "fire %d min becomes %s", from->fire.minutes,
              to->fire.minutes ? text_format(r->arena, "%d min", to->fire.minutes) : "not shown");
  }
  if (to->numbers.height_mm == from->numbers.height_mm) return;
  start(t);
  text_put(t, "height ");
  units_put_height(t, from->height.limit_m, r->units);
  text_put(t, " becomes ");
  units_put_height(t, to->height.limit_m, r->units);
}

static void put_fastening(const bool before[2], const bool after[2], text *t) {
  for (int s = 0; s < 2; s++) {
    if (before[s] == after[s]) continue;
    start(t);
    text_putf(t, "side %s takes heavy fastening%s", s == SIDE_A ? "A" : "B",
              after[s] ? "" : " no longer");
  }
}

static void put_breaks(const report *r, rule_mask broken, text *t) {
  if (broken == 0) return;
  start(t);
  text_put(t, "breaks ");
  for (int i = 0, n = 0; i < RULES_MAX; i++)
    if ((broken >> i) & 1u)
      text_putf(t, "%s%s", n++ ? " and " : "", rule_name(r->arena, r->brief, i));
}

const char *view_trim_effect(const report *r, const trim_answer *t, const trim_change *c) {
  const assessment *from = t->specified;
  text out;
  if (!c->alone) return text_format(r->arena, "cannot be taken alone: %s", c->why_not);
  text_init(&out, r->arena, 2000);
  put_sound(r, from, c->alone, &out);
  put_thickness(r, from, c->alone, &out);
  put_fire_and_height(r, from, c->alone, &out);
  put_fastening(t->heavy, c->heavy, &out);
  put_breaks(r, c->breaks, &out);
  return out.len ? text_format(r->arena, "alone: %s.", out.data)
                 : "alone: rating, thickness, fire, height and fastening stay.";
}

const char *view_trim_losses(const report *r, const trim_proposal *p) {
  text t;
  text_init(&t, r->arena, 2000);
  for (int i = 0; i < p->loss_count; i++) text_putf(&t, "%s%s", i ? "; " : "", p->loss[i]);
  return t.len ? t.data : "nothing of what is judged here";
}
