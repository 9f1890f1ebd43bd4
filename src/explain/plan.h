/* Few wall types for a whole project: which wall gets which, what that costs, what each type and
 * each rule of the project is worth, and how it stands beside the drawings (docs/design/plan.md).
 * Money in cents of the book's currency. Lengths, areas and counts are of all copies of a wall. */
#ifndef EXPLAIN_PLAN_H
#define EXPLAIN_PLAN_H

#include "explain/explain.h"
#include "search/types.h"
#include "select/plan.h"

enum { PLAN_CURVE = 8 };

/* The parts add up to the objective of the model. */
typedef struct plan_money {
  long long walls; /* labour, material and markups of what each wall is costed with by itself */
  long long goods; /* what is bought for the whole project at once (orders, breaks, stock) */
  long long setup; /* of types; 0 for a row */
  long long floor; /* value of the floor under the walls */
} plan_money;

/* One of each row of the schedule, in its order. */
typedef struct plan_row {
  int type;         /* of plan_answer.type; PLAN_NONE: no type fits */
  bool mirrored;    /* the type's side A is towards `to`; false for a wall that is its own mirror */
  const char *line; /* as built, side A towards `from`; NULL when unplanned */
  plan_money money; /* its share of the goods goes by what it needs of them */
  long long list_cents; /* the row costed alone, as `rate` does: list prices, without floor value */
  double run_m, area_m2; /* area as built, one face */
  double floor_m2;
} plan_row;

/* One of each class of the schedule, in its order. */
typedef struct plan_place {
  int type;         /* PLAN_NONE: no type fits */
  bool turned;      /* against the type's own line */
  assessment *wall; /* the type as it stands here, side A as the class has it, under its demand */
  double margin_db; /* least over the targets of promised rating - target */
  double in_laboratory; /* least over the targets: probability that a wall meets it in a test in the
                           laboratory (asked in the field: there); 1 without a target */
  double in_field;      /* that a field test meets the target less the field allowance, the field's
                           scatter included; 1 without a target */
  bool locked;          /* its rows keep the drawings' type */
} plan_place;

/* Another solve: without a type, with a number of types, without a rule. */
typedef struct plan_point {
  bool done; /* false: not solved, since time ran out or the user stopped */
  solver_status status;
  bool found;
  int max_types; /* of this solve; 0 = any number */
  int types;     /* that it uses */
  long long cost_cents, bound_cents;
  int worst_margin; /* 0.01 dB */
} plan_point;

typedef struct plan_used {
  const char *name; /* the drawings' mark where the wall is one of theirs, else T1, T2... by run */
  const char *mark; /* NULL: not a wall of the drawings */
  bool locked;      /* some row keeps it by its mark */
  int candidate;    /* its index among those put to the solver */
  wall wall;
  const char *line;
  int judged_as;       /* index of the class it is judged under: where its margin is least */
  assessment *as;      /* its assessment there, seen from the type's own side A */
  const brief *demand; /* of that class, from the type's own side A */
  int *row;            /* of the schedule */
  int row_count, walls;
  double run_m, area_m2, floor_m2;
  plan_money money;
  plan_point without; /* the least cost without this type; not done for a locked one */
} plan_used;

typedef struct plan_storey {
  const char *name;                /* "" where rows name none */
  int row_count, walls, unplanned; /* unplanned counts rows */
  double run_m, area_m2, floor_m2;
  plan_money money;
} plan_storey;

/* A section of the specification, before tax and markups. */
typedef struct plan_section {
  const char *section;
  long long material_cents, labour_cents;
  double hours;
} plan_section;

/* What the walls need of an item, by the length of stud that it is cut from. */
typedef struct plan_need {
  int item; /* in the price book */
  const char *section;
  double stud_m;   /* stock length; 0: not a stud */
  double quantity; /* takeoff units, waste included */
  int goods;       /* index in plan_answer.goods; -1: bought wall by wall at the list price */
} plan_need;

/* An item that is bought for the whole project. */
typedef struct plan_goods {
  int item;
  plan_buy buy;
} plan_goods;

/* A wall type of the drawings. */
typedef struct plan_drawn {
  const char *mark, *line; /* line canonical; NULL: the mark has no wall in the project file */
  wall wall;
  bool locked, costed;
  const char *missing_code; /* what the price book lacks, when not costed */
  int row_count, walls;
  double run_m;
  long long list_cents;    /* rows costed alone, as plan_row; 0 when not costed */
  int used;                /* the plan's type that is the same wall; PLAN_NONE */
  const assessment **miss; /* for each class that it misses the demand of */
  int *miss_class;
  int miss_count;
  int miss_rows, miss_walls;
} plan_drawn;

/* The drawings against the plan, over the rows that both have a wall for. */
typedef struct plan_comparison {
  bool done;
  int row_count,
      left_out; /* rows compared; with a wall in the drawings that has no cost or no plan */
  int types;    /* of the drawings on the compared rows */
  plan_money drawings, plan;
  double drawings_floor_m2, plan_floor_m2;
} plan_comparison;

typedef struct plan_reason {
  int class_of;
  explanation *why; /* conflicts and nearest misses, judged by the class's demand */
} plan_reason;

typedef struct plan_answer {
  const project *project;
  const schedule *schedule;
  solver_status status; /* of the plan itself */
  bool found;
  plan_row *row;     /* schedule->count */
  plan_place *place; /* schedule->class_count */
  plan_used *type;
  int type_count; /* by run length, longest first */
  plan_money money;
  long long cost_cents, bound_cents; /* bound LLONG_MIN: nothing was proved */
  int worst_margin;                  /* 0.01 dB, least over all planned walls */
  int margin_bound;                  /* of AIM_MARGIN: no plan has a better one */
  bool has_margin;                   /* some planned wall has a target */
  plan_storey *storey;
  int storey_count; /* in the order of the schedule */
  plan_section *section;
  int section_count;
  long long markup_cents; /* tax, overhead and profit on all of it */
  plan_need *need;
  int need_count; /* by section, then as the takeoff has them */
  plan_goods *goods;
  int goods_count;
  plan_point curve[PLAN_CURVE];
  int stops_at; /* the fewest types that no further one up to PLAN_CURVE improves on; 0: unknown */
  plan_point relaxed[PLAN_RULES]; /* without one rule of the project but the number of types; done
                                    where it is in force */
  plan_reason *unplanned;
  int unplanned_count; /* classes that no type fits */
  int unplanned_rows, unplanned_walls;
  unsigned conflict[PLAN_MAX_CONFLICTS]; /* infeasible: the smallest sets of plan_rule bits that
                                            cannot hold */
  int conflict_count;
  bool conflicts_whole; /* false: time ran out before all were settled */
  plan_drawn *drawn;
  int drawn_count;
  plan_comparison against;
  double floor_m2;
  int asked_walls; /* planned walls with a sound target */
  double miss_laboratory,
      miss_field; /* of them, how many are expected to miss it: see plan_place */
  long long walls, rated;
  int candidates; /* types put to the solver */
} plan_answer;

/* How it is worked out. */
typedef struct plan_order {
  double seconds; /* for all solves together; 0 = no limit */
  const volatile int *stop;
  void (*progress)(void *user, const char *stage, double found, double bound);
  void *user;
  const char *save_model; /* of the plan itself; NULL = none */
} plan_order;

/* Finds the types, solves, and explains. `mark_wall` holds the wall of each mark of the project.
 * False after messages. "No plan" is an answer. Without time limit and stop the answer is the same
 * on every run. */
bool plan_explain(arena *a, diag_list *d, const plan_context *x, const wall *mark_wall,
                  const plan_order *order, plan_answer *out);

long long plan_money_total(const plan_money *m);

#endif
