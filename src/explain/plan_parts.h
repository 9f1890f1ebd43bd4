/* What the parts of plan's answer share while it is put together; nobody else includes this. */
#ifndef EXPLAIN_PLAN_PARTS_H
#define EXPLAIN_PLAN_PARTS_H

#include "explain/plan.h"

typedef struct plan_work {
  arena *arena;
  diag_list *diags;
  const plan_context *x;
  const wall *mark_wall; /* of project->mark */
  const plan_order *order;
  double began; /* clock_seconds */
  plan_types types;
  plan_problem problem;
  int *goods;    /* of types.item: those that some wall of the problem or of the drawings needs */
  int *goods_of; /* and back, of each of types.item; -1: needed by none */
  int *kind;     /* of `types`, of each type of the problem: those that a plan can need */
  int *class_of; /* schedule class of each class of the problem */
  int *place_of; /* and back; PLAN_NONE: no type fits */
  plan_solution best;
  takeoff *lines;   /* scratch */
  double *row_need; /* what each planned row needs of the goods: row * items + item, all copies */
  plan_answer *out;
} plan_work;

/* One copy of a row of the schedule, built as some wall. */
typedef struct plan_costed {
  cost_total list; /* as `rate` costs it */
  cost_total
      alone; /* without the material of goods bought for the whole project, and its markups */
} plan_costed;

/* ---- plan_problem.c ---- */

/* The index among the goods of the problem, -1 for what is bought wall by wall. */
int plan_goods_index(const plan_work *w, int item);
/* What tax, overhead and profit make of one unit of material. */
double plan_markup(const price_book *book);
/* Costs the row; its takeoff is left in w->lines. `built` is seen as the row's class is. */
plan_costed plan_cost_row(plan_work *w, int row, const wall *built);
/* Sees to it that classes of a locked mark have its wall as their only type. */
void plan_lock(plan_work *w);
/* The problem of the classes that some type fits, with the types that a plan can need. */
void plan_set_problem(plan_work *w);
/* The same without one of its types (an index of w->types), with those that serve in its place. */
void plan_problem_without(plan_work *w, int type, plan_problem *out);
/* What the goods of a need per item (problem.items values, takeoff units) cost, bought at once. */
long long plan_goods_cost(plan_work *w, const double *need);

/* ---- plan_rows.c ---- */

/* Rows, types, storeys, sections, needs and money of the choice in w->best. False and a message
 * when its parts do not add up to what the model says. */
bool plan_set_rows(plan_work *w);

/* ---- plan_drawn.c ---- */

/* The drawings' types and the comparison with them. */
void plan_set_drawn(plan_work *w);

#endif
