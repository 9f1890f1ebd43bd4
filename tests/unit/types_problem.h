/* The types of a project as the solver's problem: for the tests and the measurements of plan. */
#ifndef TESTS_TYPES_PROBLEM_H
#define TESTS_TYPES_PROBLEM_H

#include <string.h>

#include "search/types.h"
#include "select/plan.h"

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
