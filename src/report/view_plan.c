#include "report/view_plan.h"

#include <ctype.h>
#include <limits.h>
#include <stdlib.h>
#include <string.h>

enum { WORDS_MAX = 64 << 10 };

const char *view_plan_class(const report *r, int of_class) {
  return text_format(r->arena, "C%d", of_class + 1);
}

report view_plan_report(const report *r, const plan_answer *p, int of_class) {
  report own = *r;
  own.brief = &p->schedule->classes[of_class].demand;
  return own;
}

const char *view_plan_count(const report *r, int n, const char *one, const char *many) {
  text t;
  text_init(&t, r->arena, 100);
  view_count(&t, n);
  text_putf(&t, " %s", n == 1 ? one : many);
  return t.data;
}

double view_plan_per_m2(const plan_money *m, double area_m2) {
  return area_m2 > 0 ? (double)(m->walls + m->goods) / 100 / area_m2 : 0;
}

/* ---- what a class asks ---- */

static void add(text *t, const char *words) {
  text_putf(t, "%s%s", t->len ? "; " : "", words);
}

static void add_side(const report *r, const brief *b, int s, text *t) {
  const room_side *side = &b->side[s];
  text own;
  text_init(&own, r->arena, 200);
  if (side->fastening == FASTENING_HEAVY) text_put(&own, ", heavy fastening");
  if (side->fastening == FASTENING_LIGHT) text_put(&own, ", light fastening");
  if (side->wet) text_put(&own, ", wet");
  if (side->abuse) text_put(&own, ", abuse");
  if (own.len > 0) add(t, text_format(r->arena, "side %s%s", s == SIDE_A ? "A" : "B", own.data));
}

static void add_limits(const report *r, const brief *b, text *t) {
  text own;
  text_init(&own, r->arena, 400);
  if (b->thickness_m.has_max) {
    text_put(&own, "at most ");
    units_put_thickness(&own, b->thickness_m.max, r->units);
    text_put(&own, " thick");
  }
  if (b->mass_kg_m2.has_max) {
    text_put(&own, own.len ? ", at most " : "at most ");
    units_put_surface_mass(&own, b->mass_kg_m2.max, r->units);
  }
  if (own.len > 0) add(t, own.data);
}

const char *view_plan_demand(const report *r, const plan_answer *p, int of_class) {
  const schedule_class *k = &p->schedule->classes[of_class];
  const brief *b = &k->demand;
  report own = view_plan_report(r, p, of_class);
  text t, high;
  text_init(&t, r->arena, 2000);
  text_init(&high, r->arena, 100);
  for (int i = 0; i < b->target_count; i++) add(&t, view_target(&own, &b->targets[i]));
  if (b->target_count == 0) add(&t, "no sound rating");
  if (b->fire_min > 0) add(&t, text_format(r->arena, "fire %d min", b->fire_min));
  units_put_height(&high, b->height_m, r->units);
  add(&t, text_format(r->arena, "%s high", high.data));
  if (b->loadbearing) add(&t, "load-bearing");
  if (b->noncombustible != NONCOMBUSTIBLE_NO) add(&t, "noncombustible");
  if (b->shear_side != CATALOG_NONE)
    add(&t, b->shear_side == SIDE_A ? "shear panel on side A" : "shear panel on side B");
  for (int s = 0; s < 2; s++) add_side(r, b, s, &t);
  add_limits(r, b, &t);
  if (b->riser_m > 0 || b->run_m > 0) add(&t, "pipes");
  if (b->opening_count > 0) add(&t, "openings");
  if (k->storey[0]) add(&t, text_format(r->arena, "storey %s", k->storey));
  if (k->locked != CATALOG_NONE)
    add(&t, text_format(r->arena, "kept as %s", p->project->mark[k->locked].mark));
  return t.data;
}

/* ---- ids ---- */

/* Bytes before the digits that an id ends with. */
static size_t stem(const char *id) {
  size_t n = strlen(id);
  while (n > 0 && isdigit((unsigned char)id[n - 1])) n--;
  return n;
}

/* Whether `next` is `id` counted one on: the same words and as many digits. */
static bool follows(const char *id, const char *next) {
  enum { DIGITS_MAX = 9 };
  size_t n = stem(id), length = strlen(id);
  if (n == length || length - n > DIGITS_MAX || strlen(next) != length) return false;
  if (strncmp(id, next, n) != 0 || stem(next) != n) return false;
  return atol(id + n) + 1 == atol(next + n);
}

/* Every one of a run when it is short. */
static void put_run(const char *const *id, int n, text *out) {
  enum { SHORT_RUN = 2 };
  if (n > SHORT_RUN) {
    text_putf(out, "%s%s to %s", out->len ? ", " : "", id[0], id[n - 1]);
    return;
  }
  for (int i = 0; i < n; i++) text_putf(out, "%s%s", out->len ? ", " : "", id[i]);
}

static const char *ids_words(const report *r, const char *const *id, int n) {
  text t;
  text_init(&t, r->arena, WORDS_MAX);
  for (int i = 0; i < n;) {
    int run = 1;
    while (i + run < n && follows(id[i + run - 1], id[i + run])) run++;
    put_run(id + i, run, &t);
    i += run;
  }
  return t.data;
}

const char *view_plan_ids(const report *r, const plan_answer *p, const int *row, int n,
                          bool mirrored) {
  const char **id = arena_array(r->arena, (size_t)n, sizeof *id);
  int count = 0;
  for (int i = 0; i < n; i++)
    if (p->row[row[i]].mirrored == mirrored) id[count++] = p->schedule->wall[row[i]].id;
  return ids_words(r, id, count);
}

const char *view_plan_all_ids(const report *r, const plan_answer *p, const int *row, int n) {
  const char **id = arena_array(r->arena, (size_t)n, sizeof *id);
  for (int i = 0; i < n; i++) id[i] = p->schedule->wall[row[i]].id;
  return ids_words(r, id, n);
}

/* ---- how many types ---- */

static const char *ordinal(const report *r, int n) {
  static const char *const words[] = {"",      "first", "second",  "third", "fourth",
                                      "fifth", "sixth", "seventh", "eighth"};
  return n <= PLAN_CURVE ? words[n] : text_format(r->arena, "%dth", n);
}

int view_plan_curve(const plan_answer *p, plan_point out[VIEW_PLAN_POINTS]) {
  int count = 0, own = p->project->max_types > 0 ? p->project->max_types : p->type_count;
  for (int i = 0; i < PLAN_CURVE; i++)
    if (p->curve[i].done) out[count++] = p->curve[i];
  if (count == 0 || !p->found || own <= PLAN_CURVE) return count;
  out[count++] = (plan_point){.done = true,
                              .status = p->status,
                              .found = true,
                              .max_types = own,
                              .types = p->type_count,
                              .cost_cents = p->cost_cents,
                              .bound_cents = p->bound_cents,
                              .worst_margin = p->worst_margin};
  return count;
}

static bool all_proved(const plan_answer *p) {
  for (int i = 0; i < PLAN_CURVE; i++)
    if (!p->curve[i].done || p->curve[i].status == SOLVER_LIMIT) return false;
  return true;
}

/* The fewest types with which there is a plan; 0 when none of the curve has one. */
static int fewest(const plan_answer *p) {
  for (int i = 0; i < PLAN_CURVE; i++)
    if (p->curve[i].found) return i + 1;
  return 0;
}

static const char *cents_words(const report *r, long long cents) {
  return view_money(r, (double)cents / 100, NULL);
}

const char *view_plan_stop(const report *r, const plan_answer *p) {
  if (!all_proved(p) || p->stops_at == 0) return "";
  const plan_point *at = &p->curve[p->stops_at - 1];
  const plan_point *before = p->stops_at > 1 ? &p->curve[p->stops_at - 2] : NULL;
  text t;
  text_init(&t, r->arena, 1000);
  if (fewest(p) > 1)
    text_putf(&t, "No plan with fewer than %s. ", view_plan_count(r, fewest(p), "type", "types"));
  if (p->stops_at < PLAN_CURVE)
    text_putf(&t, "Beyond %s another, up to %d, gains nothing",
              view_plan_count(r, p->stops_at, "type", "types"), PLAN_CURVE);
  else
    text_putf(&t, "Up to %d types the last one still pays", PLAN_CURVE);
  if (before && before->found && p->project->aim == AIM_COST)
    text_putf(&t, "; the %s saves %s", ordinal(r, p->stops_at),
              cents_words(r, before->cost_cents - at->cost_cents));
  text_char(&t, '.');
  if (p->found && p->type_count > PLAN_CURVE && p->project->aim == AIM_COST)
    text_putf(&t, " The %d types of the plan save %s more.", p->type_count,
              cents_words(r, p->curve[PLAN_CURVE - 1].cost_cents - p->cost_cents));
  return t.data;
}

/* ---- rules of the project ---- */

static const char *length(const report *r, double metres) {
  text t;
  text_init(&t, r->arena, 100);
  units_put_height(&t, metres, r->units);
  return t.data;
}

static const char *area(const report *r, double m2) {
  bool us = r->units == UNITS_US;
  return text_format(r->arena, "%s %s", text_of(r->arena, us ? m2 / UNITS_M2_PER_FT2 : m2, 1),
                     us ? "ft2" : "m2");
}

const char *view_plan_rule(const report *r, const plan_answer *p, plan_rule rule) {
  const project *from = p->project;
  switch (rule) {
  case PLAN_RULE_TYPES:
    return from->max_types > 0 ? text_format(r->arena, "at most %s",
                                             view_plan_count(r, from->max_types, "type", "types"))
                               : "";
  case PLAN_RULE_RUN:
    return from->min_run_m > 0
               ? text_format(r->arena, "a type runs at least %s", length(r, from->min_run_m))
               : "";
  case PLAN_RULE_BUDGET:
    return from->budget > 0 ? text_format(r->arena, "at most %s", view_money(r, from->budget, NULL))
                            : "";
  case PLAN_RULE_FLOOR:
    return from->floor_area_max_m2 > 0 ? text_format(r->arena, "walls stand on at most %s",
                                                     area(r, from->floor_area_max_m2))
                                       : "";
  case PLAN_RULE_FRAMING:
    return from->same_framing == FRAMING_FREE        ? ""
           : from->same_framing == FRAMING_BY_STOREY ? "one framing a storey"
                                                     : "one framing for all";
  case PLAN_RULES:
    break;
  }
  return "";
}

const char *view_plan_rules(const report *r, unsigned rules) {
  text t;
  text_init(&t, r->arena, 300);
  for (int i = 0; i < PLAN_RULES; i++)
    if (rules >> i & 1u) text_putf(&t, "%s%s", t.len ? " and " : "", plan_rule_names[i]);
  return t.data;
}

const char *view_plan_reason(const report *r, const plan_answer *p, const plan_reason *why) {
  const schedule_class *k = &p->schedule->classes[why->class_of];
  if (!why->why)
    return text_format(r->arena, "the wall of mark %s, which is locked, cannot be costed",
                       k->locked == CATALOG_NONE ? "?" : p->project->mark[k->locked].mark);
  text t;
  text_init(&t, r->arena, 2000);
  for (int i = 0; i < why->why->conflict_count; i++) {
    int rules = 0;
    text_put(&t, i ? "; " : "");
    for (int k2 = 0; k2 < RULES_MAX; k2++)
      if (why->why->conflicts[i] >> k2 & 1u)
        text_putf(&t, "%s%s", rules++ ? " and " : "", rule_name(r->arena, &k->demand, k2));
    text_put(&t, rules > 1 ? " cannot be had together" : " cannot be had at all");
  }
  return t.len ? t.data : "no wall of the catalog can be built here";
}

/* ---- tests that would fail ---- */

double view_plan_probability(const plan_answer *p, int of_class) {
  const brief *b = &p->schedule->classes[of_class].demand;
  double least = 1;
  for (int i = 0; i < b->target_count; i++)
    if (p->place[of_class].wall->probability[i] < least)
      least = p->place[of_class].wall->probability[i];
  return least;
}

const char *view_plan_misses(const report *r, const plan_answer *p) {
  if (!p->found || p->asked_walls == 0) return "";
  return text_format(r->arena,
                     "%s with a sound target: %s of them would be expected to miss it in a "
                     "laboratory's test, %s in a "
                     "test in the building that allows %s points for the field. Walls of one type "
                     "share its error: "
                     "most of a type pass, or most miss.",
                     view_plan_count(r, p->asked_walls, "wall", "walls"),
                     text_of(r->arena, p->miss_laboratory, 1), text_of(r->arena, p->miss_field, 1),
                     text_of(r->arena, r->brief->field_mean, 0));
}

long long view_plan_saving(const plan_comparison *c) {
  return plan_money_total(&c->drawings) - plan_money_total(&c->plan);
}

/* ---- cautions ---- */

static void add_caution(const char **caution, int *count, const char *words) {
  for (int i = 0; i < *count; i++)
    if (strcmp(caution[i], words) == 0) return;
  if (*count < VIEW_MAX_PLAN_CAUTIONS) caution[(*count)++] = words;
}

static const char *locked_caution(const report *r, const plan_answer *p, const plan_used *u) {
  text t;
  text_init(&t, r->arena, 1000);
  for (int c = 0; c < p->schedule->class_count; c++) {
    const plan_place *at = &p->place[c];
    if (at->type == PLAN_NONE || &p->type[at->type] != u || !at->locked) continue;
    if (at->wall->broken != 0) text_putf(&t, "%s%s", t.len ? ", " : "", view_plan_class(r, c));
  }
  if (t.len == 0) return NULL;
  return text_format(
      r->arena,
      "%s is kept because its mark is locked, though it misses what these classes ask: "
      "%s.",
      u->name, t.data);
}

typedef struct caution_list {
  const char *words[VIEW_MAX_PLAN_CAUTIONS];
  int types[VIEW_MAX_PLAN_CAUTIONS]; /* how many say it */
  const char *names[VIEW_MAX_PLAN_CAUTIONS];
  int count;
} caution_list;

static void note_caution(const report *r, caution_list *l, const char *words, const char *type) {
  int at = 0;
  while (at < l->count && strcmp(l->words[at], words) != 0) at++;
  if (at == VIEW_MAX_PLAN_CAUTIONS) return;
  bool fresh = at == l->count;
  l->words[at] = words;
  l->names[at] = fresh ? type : text_format(r->arena, "%s, %s", l->names[at], type);
  l->types[at] = fresh ? 1 : l->types[at] + 1;
  l->count += fresh;
}

/* What all types say comes last and without their names. */
static void add_type_cautions(const report *r, const plan_answer *p, const char **caution,
                              int *count) {
  caution_list *l = arena_alloc(r->arena, sizeof *l);
  for (int i = 0; i < p->type_count; i++) {
    const char *own[VIEW_MAX_CAUTIONS];
    report as = view_plan_report(r, p, p->type[i].judged_as);
    int n = view_cautions(&as, p->type[i].as, own);
    for (int k = 0; k < n; k++) note_caution(r, l, own[k], p->type[i].name);
  }
  for (int i = 0; i < l->count; i++)
    if (l->types[i] < p->type_count)
      add_caution(caution, count, text_format(r->arena, "%s: %s", l->names[i], l->words[i]));
  for (int i = 0; i < l->count; i++)
    if (l->types[i] == p->type_count) add_caution(caution, count, l->words[i]);
}

int view_plan_cautions(const report *r, const plan_answer *p,
                       const char *caution[VIEW_MAX_PLAN_CAUTIONS]) {
  int count = 0;
  for (int i = 0; i < p->type_count; i++) {
    const char *locked = locked_caution(r, p, &p->type[i]);
    if (locked) add_caution(caution, &count, locked);
  }
  if (p->unplanned_rows > 0)
    add_caution(caution, &count,
                "Costs, quantities and what to order leave out the walls that have no type.");
  add_type_cautions(r, p, caution, &count);
  return count;
}

const brief *view_plan_any_brief(const report *r, const plan_answer *p) {
  brief *any = arena_alloc(r->arena, sizeof *any);
  *any = p->project->common;
  for (int i = 0; i < p->schedule->class_count; i++) {
    const brief *b = &p->schedule->classes[i].demand;
    for (int s = 0; s < 2; s++) {
      any->side[s].wet = any->side[s].wet || b->side[s].wet;
      if (b->side[s].fastening > any->side[s].fastening)
        any->side[s].fastening = b->side[s].fastening;
    }
    any->loadbearing = any->loadbearing || b->loadbearing;
    if (b->riser_m > any->riser_m) any->riser_m = b->riser_m;
    if (b->run_m > any->run_m) any->run_m = b->run_m;
    if (b->opening_count > any->opening_count) any->opening_count = b->opening_count;
    for (int t = 0; t < b->target_count; t++)
      if (b->targets[t].basis == BASIS_FIELD) {
        any->target_count = 1;
        any->targets[0] = b->targets[t];
      }
  }
  for (int i = 0; i < p->schedule->count; i++)
    if (p->schedule->wall[i].doors > any->doors) any->doors = p->schedule->wall[i].doors;
  return any;
}
