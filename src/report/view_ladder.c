#include "report/view_ladder.h"

const char view_ladder_flanking[] =
    "the wall alone: floors and walls that run through hold the field rating near 50 to 55";

const target *view_ladder_target(const report *r, const ladder_answer *l) {
  return &r->brief->targets[l->terms.climbs];
}

const char *view_ladder_metric(const report *r, const ladder_answer *l) {
  return sound_metric_names[view_ladder_target(r, l)->metric];
}

const char *view_ladder_aim(const report *r, const ladder_answer *l) {
  const target *t = view_ladder_target(r, l);
  text out;
  text_init(&out, r->arena, 400);
  text_put(&out, sound_metric_names[t->metric]);
  if (t->margin > 0) {
    text_put(&out, " + ");
    text_number(&out, t->margin, 1);
    text_put(&out, " margin");
  }
  text_put(&out, t->basis == BASIS_FIELD ? " in the field" : " in the laboratory");
  if (t->basis == BASIS_FIELD) {
    text_put(&out, " (+ ");
    text_number(&out, r->brief->field_mean, 1);
    text_put(&out, " in the laboratory)");
  }
  if (t->composite && r->brief->opening_count > 0) text_put(&out, ", openings included");
  if (t->evidence == EVIDENCE_PUBLISHED)
    text_put(&out, ", published ratings only");
  else
    text_putf(&out, ", %s %% sure", text_of(r->arena, 100 * t->confidence, 0));
  return out.data;
}

view_predicted view_ladder_predicted(const report *r, const ladder_answer *l, const assessment *x) {
  sound_metric m = view_ladder_target(r, l)->metric;
  const prediction *p = &x->predicted;
  return (view_predicted){rating_of(&p->ratings, m), p->exact[m], p->sd[m], view_published(x, m)};
}

double view_ladder_per_m2(const assessment *x, long long cents) {
  return (double)cents / 100 / x->cost.area_m2;
}

bool view_ladder_alone(const ladder_rung *g) {
  return g->rating >= LADDER_FLANKING_FROM;
}

int view_ladder_cautions(const report *r, const ladder_answer *l, int rating, const assessment *x,
                         const char *caution[VIEW_MAX_CAUTIONS]) {
  brief *b = arena_alloc(r->arena, sizeof *b);
  report at = *r;
  *b = *r->brief;
  b->targets[l->terms.climbs].value = rating;
  at.brief = b;
  return view_cautions(&at, x, caution);
}
