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

/* What is said of several rungs is said once. */
typedef struct said_caution {
  const char *words;
  bool of[RUNGS_MOST];
} said_caution;

static int gather_cautions(const report *r, const ladder_answer *l, said_caution *said) {
  int kinds = 0;
  for (int i = 0; i < l->count; i++) {
    const char *caution[VIEW_MAX_CAUTIONS];
    int n = view_ladder_cautions(r, l, l->rung[i].rating, l->rung[i].wall, caution);
    for (int k = 0; k < n; k++) {
      int at = 0;
      while (at < kinds && !text_equal(said[at].words, caution[k])) at++;
      if (at == VIEW_LADDER_CAUTIONS) continue;
      if (at == kinds) said[kinds++] = (said_caution){.words = caution[k]};
      said[at].of[i] = true;
    }
  }
  return kinds;
}

/* "" for all rungs, "54 and up: ", "40, 57: ". */
static const char *rungs_words(const report *r, const ladder_answer *l, const said_caution *c) {
  int first = 0, last = l->count;
  text t;
  text_init(&t, r->arena, 1000);
  while (!c->of[first]) first++;
  while (last > 0 && c->of[last - 1]) last--;
  if (last <= first && first == 0) return "";
  if (last <= first && first < l->count - 1)
    return text_format(r->arena, "%d and up: ", l->rung[first].rating);
  for (int i = first; i < l->count; i++)
    if (c->of[i]) text_putf(&t, "%s%d", t.len ? ", " : "", l->rung[i].rating);
  text_put(&t, ": ");
  return t.data;
}

int view_ladder_all_cautions(const report *r, const ladder_answer *l,
                             const char *caution[VIEW_LADDER_CAUTIONS]) {
  said_caution *said = arena_array(r->arena, VIEW_LADDER_CAUTIONS, sizeof *said);
  int count = gather_cautions(r, l, said);
  for (int i = 0; i < count; i++)
    caution[i] = text_format(r->arena, "%s%s", rungs_words(r, l, &said[i]), said[i].words);
  return count;
}

const char *view_ladder_served(const report *r, const ladder_rung *g) {
  int last = g->rating - 1;
  if (g->serves_from == last) return text_format(r->arena, "%d", last);
  return text_format(r->arena, "%d to %d", g->serves_from, last);
}
