/* Projects made from a seed, and types as the solver's problem: for the tests and the measurements of
 * plan. */
#ifndef TESTS_RANDOM_PROJECT_H
#define TESTS_RANDOM_PROJECT_H

#include <string.h>

#include "base/text.h"
#include "search/types.h"
#include "select/plan.h"

/* ---- dice ---- */

static uint32_t project_dice_state;
static inline unsigned project_dice(unsigned below) {
  project_dice_state = project_dice_state * 1664525u + 1013904223u;
  return (project_dice_state >> 8) % below;
}

/* ---- a project as text ---- */

/* What the walls of one class ask, as the columns of a schedule: target, fire, loadbearing, floors
 * above, noncombustible, fastening a and b, wet a and b, abuse a and b, thickness max, riser, head. */
static const char *const project_demands[] = {
    /* between dwellings, on each storey */
    "36,1 h,yes,3,,,,,,,,,,",
    "36,1 h,yes,2,,,,,,,,,,",
    "50,1 h,yes,1,,,,,,,,,,",
    "50,1 h,yes,0,,,,,,,,,,",
    "55,1 h,yes,1,,,,,,,,,,",
    "55,1 h,yes,0,,,,,,,,,,",
    "50,1 h,no,,,,,yes,yes,,,,,",
    "50,1 h,no,,,heavy,,,,,,,,",
    "50,1 h,no,,,heavy,heavy,,,,,,,",
    "55,1 h,no,,,,,,,,,,,",
    "60,1 h,no,,,,,,,,,,,",
    /* to corridors, stairs and shafts */
    "36,1 h,yes,2,,,,,,,yes,,,",
    "50,1 h,yes,1,,,,,,,yes,,,",
    "47,1 h,no,,,heavy,,,,,,,,",
    "50,2 h,no,,,,,,,,,,,",
    "45,2 h,no,,,,,,,,,165,,",
    "50,2 h,no,,strict,,,,,,,,,slip",
    /* within dwellings */
    "40,,yes,2,,,,,,,,,,",
    "40,,yes,1,,,,,,,,,,",
    "40,,no,,,,,,,,,,,",
    "40,,no,,,,,yes,,,,,,",
    "40,,no,,,heavy,,,,,,,,",
    "35,,no,,,,,,,,,124,,",
    "35,,no,,,,,yes,yes,,,,,",
    "44,,no,,,,,,yes,,,,89,",
    "30,,no,,,,,,,,,,,",
    /* shops, a school and what stands beside them */
    "50,1 h,no,,strict,,,,,,,,,slip",
    "50,1 h,no,,strict,heavy,,,,,,,,slip",
    "50,1 h,no,,strict,,,yes,,yes,,,,slip",
    "45,,no,,strict,,,,,yes,yes,,,slip",
    "45,,no,,strict,,,,,,yes,,,slip",
    "55,1 h,no,,strict,,,,,,,,,slip",
    "60,1 h,no,,strict,,,,,,,,,slip",
    "40,,no,,strict,,,,,,,,,",
    "40,,no,,strict,,,,,yes,,,,",
    "35,,no,,strict,,,,,,,,,",
    "45,1 h,no,,strict,,,,,,,,,",
    "50,,no,,strict,,,,,,,140,,",
    "45,,no,,strict,,heavy,,,,,,,",
    "50,1 h,no,,,,,,,yes,,,,",
};
enum { PROJECT_DEMANDS = sizeof project_demands / sizeof project_demands[0] };

/* A schedule of `rows` rows over the first `classes` demands from `first` on (round the end). */
static inline const char *project_walls(arena *a, unsigned seed, int rows, int classes,
                                        const int *demand) {
  text t;
  text_init(&t, a, (size_t)rows * 120 + 400);
  text_putf(&t, "id,storey,length,height,count,target,fire,loadbearing,floors_above,noncombustible,"
                "fastening_a,fastening_b,wet_a,wet_b,abuse_a,abuse_b,thickness_max_mm,riser_mm,head\n");
  project_dice_state = seed * 2654435761u + 99;
  for (int i = 0; i < rows; i++) {
    int c = i < classes ? i : (int)project_dice((unsigned)classes);
    unsigned tenths = 12 + project_dice(96); /* 1.2 to 10.7 m */
    const char *asked = project_demands[demand[c]];
    bool podium = strstr(asked, "strict") != NULL;
    text_putf(&t, "W%d,%s,%u.%um,%s,1,%s\n", i + 1, podium ? "1" : "2", tenths / 10, tenths % 10,
              podium ? "3.6m" : "2.7m", asked);
  }
  return t.data;
}

/* Reads both; NULL after messages. `more` are further keys of the project, each with a comma behind.
 */
static inline schedule *project_from(arena *a, diag_list *d, const catalog *c, const char *more,
                                     const char *walls, project *out) {
  const char *json = text_format(
      a, "{\"septum\":\"project/1\",\"units\":\"si\",\"code\":\"ibc\",%s\"walls\":\"walls.csv\"}",
      more);
  json_value *root = json_parse(a, d, "project.json", json, strlen(json));
  if (!root || !project_read(a, d, c, root, out)) return NULL;
  csv_table *t = csv_parse(a, d, "walls.csv", walls, strlen(walls));
  return t ? schedule_read(a, d, c, out, t) : NULL;
}

/* ---- types as a problem ---- */

static inline void problem_items(arena *a, const plan_context *x, const plan_types *t,
                                 plan_problem *p) {
  const price_book *book = x->prices;
  double markup = (1 + book->sales_tax) * (1 + book->overhead_profit);
  plan_item *item = arena_array(a, (size_t)t->items, sizeof *item);
  for (int i = 0; i < t->items; i++) {
    const price_item *from = &book->items[t->item[i]];
    bool breaks = x->project->quantity_breaks;
    item[i] = (plan_item){.code = from->code, .tier_count = 1};
    item[i].tier[0] = (plan_tier){breaks ? from->minimum_order : 0, from->price * markup};
    for (size_t k = 0; breaks && k < from->break_count; k++)
      item[i].tier[item[i].tier_count++] =
          (plan_tier){from->breaks[k].from, from->breaks[k].price * markup};
    for (int s = 0; s < x->project->stock_count; s++)
      if (strcmp(x->project->stock[s].item, from->code) == 0)
        item[i].stock += x->project->stock[s].quantity;
  }
  p->item = item;
  p->items = t->items;
}

static inline void problem_uses(arena *a, const plan_context *x, const plan_types *t,
                                const int *class_of, plan_problem *p) {
  size_t classes = (size_t)p->classes, types = (size_t)p->types, items = (size_t)t->items;
  long long *cents = arena_array(a, classes * types, sizeof *cents);
  double *need = arena_array(a, classes * types * items, sizeof *need);
  double *floor_m2 = arena_array(a, classes * types, sizeof *floor_m2);
  int *margin = arena_array(a, classes * types, sizeof *margin);
  double *run_m = arena_array(a, classes, sizeof *run_m);
  for (size_t k = 0; k < classes; k++) {
    size_t c = (size_t)class_of[k];
    run_m[k] = x->schedule->classes[c].run_m;
    for (size_t i = 0; i < types; i++) {
      const type_use *u = &t->type[i].use[c];
      cents[k * types + i] = u->fits ? u->cents : -1;
      floor_m2[k * types + i] = u->floor_m2;
      margin[k * types + i] = u->margin_hundredth;
      for (size_t n = 0; n < items; n++)
        need[(k * types + i) * items + n] = t->type[i].need[c * items + n];
    }
  }
  p->cents = cents;
  p->need = need;
  p->floor_m2 = floor_m2;
  p->margin = margin;
  p->run_m = run_m;
}

static inline void problem_framing(arena *a, const plan_context *x, const plan_types *t,
                                   const int *class_of, plan_problem *p) {
  int *storey = arena_array(a, (size_t)p->classes, sizeof *storey),
      *group = arena_array(a, (size_t)p->types, sizeof *group);
  for (int i = 0; i < p->types; i++) group[i] = t->type[i].group;
  p->group = group;
  p->groups = t->groups;
  if (x->project->same_framing == FRAMING_FREE) return;
  p->storey = storey;
  p->storeys = 1;
  if (x->project->same_framing == FRAMING_ALL) return;
  p->storeys = x->schedule->storey_count + 1;
  for (int k = 0; k < p->classes; k++) {
    storey[k] = x->schedule->storey_count;
    for (int s = 0; s < x->schedule->storey_count; s++)
      if (strcmp(x->schedule->storey[s], x->schedule->classes[class_of[k]].storey) == 0)
        storey[k] = s;
  }
}

/* The problem of the classes that some type fits. */
static inline plan_problem problem_of(arena *a, const plan_context *x, const plan_types *t) {
  plan_problem p = {.types = t->count};
  int *class_of = arena_array(a, (size_t)x->schedule->class_count, sizeof *class_of);
  for (int c = 0; c < x->schedule->class_count; c++)
    if (!t->refused[c]) class_of[p.classes++] = c;
  problem_items(a, x, t, &p);
  problem_uses(a, x, t, class_of, &p);
  problem_framing(a, x, t, class_of, &p);
  p.setup_cents = (long long)(x->project->type_setup_cost * 100 + 0.5);
  p.budget_cents = (long long)(x->project->budget * 100 + 0.5);
  p.min_run_m = x->project->min_run_m;
  p.floor_max_m2 = x->project->floor_area_max_m2;
  p.max_types = x->project->max_types;
  return p;
}

#endif
