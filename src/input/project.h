/* The project: many walls, few types (project/1, docs/formats/project.md). SI inside. */
#ifndef INPUT_PROJECT_H
#define INPUT_PROJECT_H

#include "input/job.h"

enum { PROJECT_MAX_STOCK = 64, PROJECT_MAX_MARKS = 64, PROJECT_MAX_TYPES = 100 };

/* How far the types of a storey, or of all, must be of one framing group. */
typedef enum project_framing { FRAMING_FREE, FRAMING_BY_STOREY, FRAMING_ALL } project_framing;
typedef enum project_aim {
  AIM_COST,  /* least cost */
  AIM_MARGIN /* the best worst margin of the sound rating that the budget pays for, then least cost */
} project_aim;

/* Goods on hand, used before any are bought. */
typedef struct project_stock {
  const char *item; /* code of the price book */
  double quantity;  /* takeoff units */
  const json_value *json;
} project_stock;

/* A wall type of the drawings, by the mark that the schedule's existing_type names it with. */
typedef struct project_mark {
  const char *mark, *line; /* wall line as it stands in the file */
  bool locked;             /* walls of this mark keep it */
  const json_value *json;
} project_mark;

typedef struct project {
  const char *file, *title;
  units_system units;
  brief common; /* what every wall shares unless its row says otherwise: code, building, build, only,
                   without, services, structure, confidence; targets are the rows' */
  double confidence; /* of the rows' targets that say none; default 0.8 */
  const char *walls; /* path of the schedule, resolved beside the project file */
  int max_types;     /* 0 = as many as it takes */
  double type_setup_cost, min_run_m;     /* a type; 0 = none */
  double budget, floor_area_max_m2;      /* 0 = none */
  project_framing same_framing;
  project_aim aim;
  bool quantity_breaks; /* default true: minimum orders and breaks of the price book count */
  project_stock stock[PROJECT_MAX_STOCK];
  int stock_count;
  project_mark mark[PROJECT_MAX_MARKS];
  int mark_count;
} project;

/* Reads project/1. Paths are resolved beside the file. `c` NULL: patterns are not checked. False
 * after messages. */
bool project_read(arena *a, diag_list *d, const catalog *c, const json_value *root, project *out);

#endif
