#include "explain/trim.h"

#include <math.h>

#include "explain/changes.h"
#include "search/savers.h"
#include "wall/line.h"

static const double usual_confidence = 0.8; /* a brief's own default */

static assessment *judge(arena *a, const judge_context *x, const wall *w) {
  assessment *out = arena_alloc(a, sizeof *out);
  judge_wall(a, x, w, out);
  return out;
}

static void take_heavy(const judge_context *x, const wall *w, bool heavy[2]) {
  brief asking = *x->brief;
  for (int s = 0; s < 2; s++) {
    asking.side[s].fastening = FASTENING_HEAVY;
    heavy[s] = structure_fastening_ok(x->catalog, &asking, w, s, NULL);
  }
}

/* ---- what the wall is held to ---- */

static void add_target(brief *b, int value, double confidence) {
  if (value < 1 || b->target_count == BRIEF_MAX_TARGETS) return; /* no target asks for less */
  b->targets[b->target_count++] =
      (target){.metric = METRIC_STC, .value = value, .confidence = confidence};
}

/* The rating as it is printed, as sure as the wall itself is of it (in whole percent), and what the
 * usual confidence assures where that is less: a proposal that lowered either would not be the same
 * wall to its owner. */
static void hold_to_rating(const assessment *x, brief *b) {
  bool published = x->evidence.match != NULL;
  int printed = x->ratings.stc;
  double exact = x->exact[METRIC_STC], sd = x->sd[METRIC_STC], probability = 1;
  double margin = judge_margin(exact, printed, sd, published, 0, judge_z(usual_confidence));
  int assured = (int)floor(rules_promised(margin) * 0.01);
  add_target(b, assured, usual_confidence);
  if (printed <= assured) return;
  target t = {.metric = METRIC_STC, .value = printed};
  (void)judge_passes(&t, 0, 0, exact, printed, sd, published, usual_confidence, &probability);
  add_target(b, printed, floor(100 * probability) * 0.01);
}

/* The floor is the larger of what is promised and what is shown. A rating that nothing but our
 * prediction speaks for is not shown to anybody. */
static void hold_to_promises(const assessment *own, const trim_terms *terms, brief *b) {
  bool shown = terms->own || terms->promised_fire > 0;
  if (terms->promised_stc > 0) {
    int published = own->evidence.match ? own->evidence.match->stc : 0;
    double confidence = terms->own ? usual_confidence : b->targets[0].confidence;
    add_target(b, published > terms->promised_stc ? published : terms->promised_stc, confidence);
  } else if (terms->own) {
    hold_to_rating(own, b);
  }
  if (terms->promised_fire > b->fire_min) b->fire_min = terms->promised_fire;
  if (shown && !(terms->allow & TRIM_ALLOW_LESS_FIRE) && own->fire.minutes > b->fire_min)
    b->fire_min = own->fire.minutes;
}

static void hold_to_thickness(const assessment *own, const trim_terms *terms, brief *b) {
  /* In the whole tenths of a millimetre that the rule counts in. */
  double most_m = rules_thickness(own->thickness_m + terms->slack_m) * 1e-4;
  if (terms->keep & TRIM_KEEP_THICKNESS) {
    bool more = b->thickness_m.has_min && b->thickness_m.min > own->thickness_m;
    if (!more) b->thickness_m.min = own->thickness_m;
    b->thickness_m.has_min = true;
  }
  if (!terms->thickness || (b->thickness_m.has_max && b->thickness_m.max < most_m)) return;
  b->thickness_m.has_max = true;
  b->thickness_m.max = most_m;
  b->thickness_exact = true;
}

/* Class of the boards that people touch, studs that hold fixtures, parts that do not burn. */
static void hold_to_make(const judge_context *x, const wall *w, const trim_terms *terms, brief *b) {
  const catalog *c = x->catalog;
  const frame *f = &c->frames[w->frame];
  brief strict = *b;
  for (int s = 0; s < 2 && !(terms->allow & TRIM_ALLOW_PLAIN_BOARDS); s++) {
    const layer *room = w->side[s].count > 0 ? &c->layers[w->side[s].layer[0]] : NULL;
    b->side[s].wet = b->side[s].wet || (room && room->moisture);
    b->side[s].abuse = b->side[s].abuse || (room && room->abuse);
  }
  if (!(terms->allow & TRIM_ALLOW_THINNER_STUDS)) {
    brief asking = *b;
    asking.studs = (stud_floor){.fixtures = true};
    b->studs.mil = f->material == FRAME_STEEL ? f->mil : 0;
    b->studs.fixtures = structure_studs_ok(c, &asking, w, NULL);
  }
  strict.noncombustible = NONCOMBUSTIBLE_STRICT;
  bool burns_not = structure_noncombustible_ok(c, &strict, w, NULL);
  if (burns_not && !(terms->allow & TRIM_ALLOW_COMBUSTIBLE))
    b->noncombustible = NONCOMBUSTIBLE_STRICT;
}

static void hold_to_frame(arena *a, const judge_context *x, const wall *w, brief *b) {
  brief free;
  (void)explain_relax_frames(a, x->catalog, b, &free);
  *b = free;
  const char *id = x->catalog->frames[w->frame].id;
  if (b->only_count < BRIEF_MAX_PATTERNS)
    b->only[b->only_count++] = text_format(a, "frame:%s", id);
}

void trim_hold_to(arena *a, const judge_context *x, const wall *w, trim_terms *terms, brief *b) {
  brief as_given = *x->brief;
  judge_context given = *x;
  given.brief = &as_given;
  terms->own = as_given.target_count == 0;
  terms->thickness = terms->slack_given || terms->keep & TRIM_KEEP_THICKNESS ||
                     !(terms->allow & TRIM_ALLOW_THICKER);
  const assessment *own = judge(a, &given, w);
  hold_to_promises(own, terms, b);
  hold_to_thickness(own, terms, b);
  hold_to_make(&given, w, terms, b);
  if (terms->keep & TRIM_KEEP_FRAME) hold_to_frame(a, &given, w, b);
}

static trim_verdict verdict_of(const assessment *x) {
  rule_mask unshown = rule_bit(RULE_CONFIDENCE) | rule_bit(RULE_EVIDENCE);
  if (x->fire.minutes == 0) unshown |= rule_bit(RULE_FIRE);
  if (x->broken == 0) return TRIM_HOLDS;
  return x->broken & ~unshown ? TRIM_FAILS : TRIM_NOT_SHOWN;
}

/* ---- one change ---- */

static const char *first_refusal(const compat_report *r) {
  for (int i = 0; i < r->count; i++)
    if (r->finding[i].level == COMPAT_ILLEGAL) return r->finding[i].reason;
  return NULL;
}

/* What the change does on the specified wall while all else stays. */
static void take_alone(arena *a, const judge_context *x, const assessment *from, const wall *to,
                       trim_change *c) {
  wall w = from->wall;
  compat_report fits;
  step_take(x->catalog, to, c->part, &w);
  if (wall_same(&w, &from->wall)) {
    c->why_not = "The specified wall has no place for it.";
    return;
  }
  compat_check(x->catalog, &w, &fits);
  c->why_not = first_refusal(&fits);
  if (c->why_not) return;
  c->alone = judge(a, x, &w);
  if (c->alone->takeoff.missing) {
    c->alone = NULL;
    c->why_not = "The price book lacks an item of that wall.";
    return;
  }
  c->saving_cents = from->numbers.cost_cents - c->alone->numbers.cost_cents;
  c->breaks = c->alone->broken & ~from->broken;
  take_heavy(x, &w, c->heavy);
}

static void list_changes(arena *a, const judge_context *x, const assessment *from,
                         trim_proposal *p) {
  const catalog *cat = x->catalog;
  bool inches = x->brief->units == UNITS_US;
  step_part part[STEP_PARTS];
  wall now = from->wall;
  p->change_count = steps_between(cat, &from->wall, &p->wall->wall, part);
  p->together_cents = p->saving_cents;
  for (int i = 0; i < p->change_count; i++) {
    trim_change *c = &p->change[i];
    *c = (trim_change){.part = part[i], .name = step_name(part[i])};
    c->from = step_words(a, cat, &now, part[i], inches);
    wall before = now;
    change_list words;
    step_take(cat, &p->wall->wall, part[i], &now);
    changes_list(a, cat, &before, &now, inches, &words);
    c->what = changes_words(a, &words);
    c->to = step_words(a, cat, &now, part[i], inches);
    take_alone(a, x, from, &p->wall->wall, c);
    p->together_cents -= c->saving_cents;
  }
}

/* ---- what a proposal gives up ---- */

static void lose(trim_proposal *p, const char *words) {
  if (p->loss_count < TRIM_MAX_LOSSES) p->loss[p->loss_count++] = words;
}

static bool stands_published(const assessment *x, sound_metric m) {
  return m == METRIC_STC && x->evidence.match != NULL;
}

static void lose_sound(arena *a, const brief *b, const assessment *x, const assessment *y,
                       trim_proposal *p) {
  for (int i = 0; i < b->target_count; i++) {
    sound_metric m = b->targets[i].metric;
    bool again = false;
    for (int k = 0; k < i; k++) again = again || b->targets[k].metric == m;
    if (again) continue;
    int from = rating_of(&x->ratings, m), to = rating_of(&y->ratings, m);
    if (to < from) lose(p, text_format(a, "%s %d becomes %d", sound_metric_names[m], from, to));
    if (stands_published(x, m) && !stands_published(y, m))
      lose(p, text_format(a, "a published rating (%s) becomes a prediction",
                          x->evidence.match->source));
  }
  if (y->mounted && !x->mounted)
    lose(p, text_format(a, "it stands on its mount: STC %d where a screw or fixture bridges it",
                        y->short_predicted.ratings.stc));
}

typedef void (*put_size)(text *out, double value, units_system u);

static void lose_size(arena *a, const brief *b, const char *words, put_size put, double from,
                      double to, trim_proposal *p) {
  text t;
  text_init(&t, a, 300);
  text_putf(&t, "%s ", words);
  put(&t, from, b->units);
  text_put(&t, " becomes ");
  put(&t, to, b->units);
  lose(p, t.data);
}

static void lose_rest(arena *a, const brief *b, const assessment *x, const assessment *y,
                      const bool heavy[2], trim_proposal *p) {
  static const char *const sides[] = {"side A", "side B"};
  const wall_numbers *from = &x->numbers, *to = &y->numbers;
  if (to->fire_min < from->fire_min && to->fire_min == 0)
    lose(p, text_format(a, "%d min of fire resistance are shown no longer", from->fire_min));
  else if (to->fire_min < from->fire_min)
    lose(p, text_format(a, "%d min of fire resistance become %d", from->fire_min, to->fire_min));
  if (to->height_mm < from->height_mm)
    lose_size(a, b, "limiting height", units_put_height, x->height.limit_m, y->height.limit_m, p);
  if (to->thickness_tenth_mm > from->thickness_tenth_mm)
    lose_size(a, b, "thickness", units_put_thickness, x->thickness_m, y->thickness_m, p);
  if (to->mass_hundredth > from->mass_hundredth)
    lose_size(a, b, "mass", units_put_surface_mass, x->mass_kg_m2, y->mass_kg_m2, p);
  for (int s = 0; s < 2; s++)
    if (heavy[s] && !p->heavy[s])
      lose(p, text_format(a, "%s takes heavy fastening (cabinets, grab bars) no longer", sides[s]));
}

static const layer *room_board(const catalog *c, const wall *w, int side) {
  return w->side[side].count > 0 ? &c->layers[w->side[side].layer[0]] : NULL;
}

/* Boards that people touch, studs that hold fixtures, parts that do not burn. */
static void lose_make(arena *a, const judge_context *x, const wall *from, const wall *to,
                      trim_proposal *p) {
  const catalog *c = x->catalog;
  const frame *f = &c->frames[from->frame], *g = &c->frames[to->frame];
  brief strict = *x->brief;
  for (int s = 0; s < 2; s++) {
    const layer *had = room_board(c, from, s), *has = room_board(c, to, s);
    if (had && had->abuse && !(has && has->abuse))
      lose(p, text_format(a, "side %c has an abuse-resistant board no longer", "AB"[s]));
    if (had && had->moisture && !(has && has->moisture))
      lose(p, text_format(a, "side %c has a moisture-resistant board no longer", "AB"[s]));
  }
  if (f->mil > 0 && g->mil > 0 && g->mil < f->mil)
    lose(p, text_format(a, "steel of %d mil becomes %d mil", f->mil, g->mil));
  strict.noncombustible = NONCOMBUSTIBLE_STRICT;
  if (structure_noncombustible_ok(c, &strict, from, NULL) &&
      !structure_noncombustible_ok(c, &strict, to, NULL))
    lose(p, "it has combustible parts where the specified wall has none");
}

/* ---- proposals ---- */

/* Where both rooms ask the same, the space holds one of two mirror images: the nearer one is told.
 */
static assessment *nearer_image(arena *a, const space *s, const assessment *from, wall w,
                                long long cost_cents) {
  const catalog *c = s->context->catalog;
  step_part part[STEP_PARTS];
  wall other = wall_mirrored(c, &w);
  assessment *x = judge(a, s->context, &w);
  if (!s->mirror_once ||
      steps_between(c, &from->wall, &w, part) <= steps_between(c, &from->wall, &other, part))
    return x;
  assessment *y = judge(a, s->context, &other);
  bool same = y->broken == 0 && y->numbers.cost_cents == cost_cents;
  return same ? y : x;
}

static void propose(arena *a, const space *s, const trim_answer *t, const candidate *c,
                    trim_proposal *p) {
  const judge_context *x = s->context;
  const assessment *from = t->specified;
  *p = (trim_proposal){0};
  p->wall =
      nearer_image(a, s, from, space_wall(s, c->core, c->face_a, c->face_b), c->is.cost_cents);
  p->saving_cents = from->numbers.cost_cents - p->wall->numbers.cost_cents;
  p->net_cents = p->saving_cents - t->terms.redesign_cents;
  p->saving_per_m2 = (double)p->saving_cents / 100 / from->cost.area_m2;
  take_heavy(x, &p->wall->wall, p->heavy);
  list_changes(a, x, from, p);
  lose_sound(a, x->brief, from, p->wall, p);
  lose_rest(a, x->brief, from, p->wall, t->heavy, p);
  lose_make(a, x, &from->wall, &p->wall->wall, p);
}

static const candidate *cheapest_of(const sweep_result *r) {
  return r->mask_count > 0 && r->masks[0].broken == 0 ? &r->masks[0].best : NULL;
}

/* Against the cheapest wall that holds everything: one of the space, or the specified one. */
static void price_rules(arena *a, const space *s, const sweep_result *r, const candidate *best,
                        trim_answer *out) {
  explanation e = {0};
  candidate base = {.core = CATALOG_NONE, .is = out->specified->numbers};
  bool holds = out->verdict == TRIM_HOLDS;
  if (best && (!holds || best->is.cost_cents <= base.is.cost_cents)) base = *best;
  if (!best && !holds) return;
  out->base_line = best && base.core == best->core ? out->cheapest->line : out->specified->line;
  explain_prices(a, s, r, &base, &e);
  if (out->proposal_count > 0)
    out->base_line = out->proposal[0].wall->line; /* or its mirror image */
  out->prices = e.prices;
  out->price_count = e.price_count;
}

void trim_explain(arena *a, const space *s, const sweep_result *r, assessment *specified,
                  const trim_terms *terms, trim_answer *out) {
  savers found;
  long long cost_cents = specified->numbers.cost_cents;
  *out = (trim_answer){.terms = *terms, .specified = specified, .walls = r->walls};
  out->verdict = verdict_of(specified);
  take_heavy(s->context, &specified->wall, out->heavy);
  savers_find(a, s, r, cost_cents - terms->redesign_cents, &found);
  out->found = found.count;
  out->proposal_count = found.count < terms->count ? found.count : terms->count;
  out->proposal = arena_array(a, (size_t)out->proposal_count, sizeof *out->proposal);
  for (int i = 0; i < out->proposal_count; i++)
    propose(a, s, out, &found.wall[i].is, &out->proposal[i]);
  const candidate *best = cheapest_of(r);
  if (best) {
    wall w = space_wall(s, best->core, best->face_a, best->face_b);
    out->cheapest = judge(a, s->context, &w);
    out->cheapest_more_cents = best->is.cost_cents - cost_cents;
  }
  if (out->proposal_count == 0)
    out->cheaper_count = explain_cheaper(a, s, r, cost_cents, &out->cheaper);
  price_rules(a, s, r, best, out);
}
