/* What a rating, predicted or published, is worth to the targets of a brief. */
#include <math.h>

#include "search/judge.h"

/* A published rating is a whole number that stands for the values from it up to the next: its
 * centre. */
static const double published_centre = 0.5;
static const double bare_confidence = 0.5;
/* TL of a wall that lets nothing through, beside openings. */
static const double silent_db = 200;

static double phi(double z) {
  return 0.5 * erfc(-z / sqrt(2.0));
}

double judge_z(double confidence) {
  if (!(confidence < 0.5) && !(confidence > 0.5)) return 0;
  double low = -8, high = 8; /* beyond them Phi is 0 or 1 in double */
  for (int i = 0; i < 60; i++) {
    double middle = 0.5 * (low + high);
    if (phi(middle) < confidence)
      low = middle;
    else
      high = middle;
  }
  return high;
}

double judge_needed(const target *t, double field_mean) {
  return t->value + t->margin + (t->basis == BASIS_FIELD ? field_mean : 0);
}

double judge_spread(const target *t, double field_sd, double sd) {
  return t->basis == BASIS_FIELD ? sqrt(sd * sd + field_sd * field_sd) : sd;
}

/* What a wall promises for one target, above what is needed. */
typedef struct standing {
  double exact, sd; /* sd with the field's scatter */
  int printed;
  bool published;
} standing;

double judge_margin(double exact, double printed, double spread, bool published, double needed,
                    double z) {
  if (published) return printed - needed;
  return fmin(exact - z * spread, printed) - needed;
}

static double margin_at(const standing *s, double needed, double confidence) {
  return judge_margin(s->exact, s->printed, s->sd, s->published, needed, judge_z(confidence));
}

bool judge_passes(const target *t, double field_mean, double field_sd, double exact, int printed,
                  double sd, bool published, double confidence, double *probability) {
  standing s = {exact, judge_spread(t, field_sd, sd), printed, published};
  double needed = judge_needed(t, field_mean);
  bool pass = rules_promised(margin_at(&s, needed, confidence)) >= 0;
  *probability = published && pass ? 1 : phi((exact - needed) / s.sd);
  return pass;
}

/* ---- composite ---- */

static void opening_curve(const opening *o, double out_db[BANDS]) {
  if (!o->has_bands) {
    rating_contour_curve(o->stc, out_db);
    return;
  }
  for (int i = 0; i < BANDS; i++) out_db[i] = o->tl_db[i];
}

/* A wall's curve with the openings of the brief. */
static void with_openings(const brief *b, const double wall_db[BANDS], double out_db[BANDS]) {
  double tl_db[(BRIEF_MAX_OPENINGS + 1) * BANDS], area_m2[BRIEF_MAX_OPENINGS + 1];
  area_m2[0] = b->length_m * b->height_m;
  for (int i = 0; i < BANDS; i++) tl_db[i] = wall_db[i];
  for (int k = 0; k < b->opening_count; k++) {
    area_m2[k + 1] = b->openings[k].area_m2;
    area_m2[0] -= area_m2[k + 1];
    opening_curve(&b->openings[k], tl_db + (k + 1) * BANDS);
  }
  rating_composite(tl_db, area_m2, b->opening_count + 1, out_db);
}

void judge_composite(const brief *b, const prediction *p, const wall_row *match, double shift_db,
                     double tl_db[BANDS]) {
  double moved[BANDS];
  double shift = shift_db + (match ? match->stc + published_centre - p->exact[METRIC_STC] : 0);
  for (int i = 0; i < BANDS; i++) moved[i] = p->tl_db[i] + shift;
  with_openings(b, moved, tl_db);
}

void judge_composite_most(const brief *b, double *exact) {
  double wall_db[BANDS], tl_db[BANDS];
  for (int i = 0; i < BANDS; i++) wall_db[i] = silent_db;
  with_openings(b, wall_db, tl_db);
  for (int m = 0; m < METRIC_COUNT; m++) exact[m] = rating_exact(tl_db, (sound_metric)m);
}

/* ---- targets ---- */

static standing standing_of(const brief *b, const target *t, const prediction *p,
                            const wall_row *match) {
  bool published = match && t->metric == METRIC_STC;
  standing s = {p->exact[t->metric], p->sd[t->metric], rating_of(&p->ratings, t->metric),
                published};
  if (published) s = (standing){match->stc + published_centre, match->stc_sd, match->stc, true};
  s.sd = judge_spread(t, b->field_sd, s.sd);
  return s;
}

/* The composite has no sd of its own: what is unsure is the wall, so its whole curve is moved by
 * what the confidence asks. */
static double composite_margin(const brief *b, const target *t, const prediction *p,
                               const wall_row *match, const standing *s, double confidence) {
  double needed = judge_needed(t, b->field_mean);
  double tl_db[BANDS], lowered_db[BANDS];
  judge_composite(b, p, match, 0, tl_db);
  ratings r = rating_all(tl_db);
  double printed = rating_of(&r, t->metric);
  if (s->published) return printed - needed;
  judge_composite(b, p, match, -judge_z(confidence) * s->sd, lowered_db);
  return fmin(rating_exact(lowered_db, t->metric), printed) - needed;
}

/* P that the wall is so good that the composite reaches what is needed. */
static double composite_probability(const brief *b, const target *t, const prediction *p,
                                    const wall_row *match, const standing *s) {
  double needed = judge_needed(t, b->field_mean);
  double low = -6 * s->sd, high = 6 * s->sd; /* Phi is 0 or 1 to nine digits there */
  for (int i = 0; i < 40; i++) {
    double tl_db[BANDS], middle = 0.5 * (low + high);
    judge_composite(b, p, match, middle, tl_db);
    if (rating_exact(tl_db, t->metric) < needed)
      low = middle;
    else
      high = middle;
  }
  return phi(-high / s->sd);
}

/* Adds what one target says; returns the margin that is promised for it. */
static int judge_target(const brief *b, const target *t, const prediction *p, const wall_row *match,
                        const standing *s, judge_reach *all) {
  double needed = judge_needed(t, b->field_mean);
  int promised = rules_promised(margin_at(s, needed, t->confidence));
  bool alone = promised >= 0;
  bool alone_bare = alone || rules_promised(margin_at(s, needed, bare_confidence)) >= 0;
  all->alone = all->alone && alone;
  all->alone_bare = all->alone_bare && alone_bare;
  if (!t->composite || b->opening_count == 0) {
    all->with = all->with && alone;
    all->with_bare = all->with_bare && alone_bare;
    return promised;
  }
  int with = rules_promised(composite_margin(b, t, p, match, s, t->confidence));
  bool bare =
      with >= 0 || rules_promised(composite_margin(b, t, p, match, s, bare_confidence)) >= 0;
  all->with = all->with && with >= 0;
  all->with_bare = all->with_bare && bare;
  /* Openings better than the wall may lift it over the target: then it is the composite that is
   * promised. */
  return with >= 0 && with > promised ? with : promised;
}

static double probability_of(const brief *b, const target *t, const prediction *p,
                             const wall_row *match, const standing *s) {
  judge_reach one = {true, true, true, true};
  if (s->published && judge_target(b, t, p, match, s, &one) >= 0 && one.with) return 1;
  if (t->composite && b->opening_count > 0) return composite_probability(b, t, p, match, s);
  return phi((s->exact - judge_needed(t, b->field_mean)) / s->sd);
}

void judge_name_reach(const judge_reach *r, rule_mask *broken, rule_mask *instead) {
  const rule_mask confidence = rule_bit(RULE_CONFIDENCE), composite = rule_bit(RULE_COMPOSITE);
  *broken = *instead = 0;
  if (r->with) return;
  if (r->alone) {
    *broken = composite;
    if (r->with_bare) *instead = confidence;
  } else if (r->with_bare) {
    *broken = confidence;
  } else {
    *broken = r->alone_bare ? confidence | composite : rule_bit(RULE_TARGET);
  }
}

judge_sound judge_targets(const judge_context *x, const prediction *p, const wall_row *match,
                          double *probability) {
  const brief *b = x->brief;
  judge_sound out = {0, 0, 0};
  rule_mask unpublished = 0;
  judge_reach all = {true, true, true, true};
  for (int i = 0; i < b->target_count; i++) {
    const target *t = &b->targets[i];
    standing s = standing_of(b, t, p, match);
    int promised = judge_target(b, t, p, match, &s, &all);
    if (i == 0 || promised < out.promised_hundredth) out.promised_hundredth = promised;
    if (t->evidence == EVIDENCE_PUBLISHED && !s.published) unpublished = rule_bit(RULE_EVIDENCE);
    if (probability) probability[i] = probability_of(b, t, p, match, &s);
  }
  judge_name_reach(&all, &out.broken, &out.instead);
  if (out.instead) out.instead |= unpublished;
  out.broken |= unpublished;
  return out;
}
