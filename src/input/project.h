/* The project: many walls, few types (project/1, docs/formats/project.md). SI inside. */
#ifndef INPUT_PROJECT_H
#define INPUT_PROJECT_H

#include "input/job.h"
#include "input/prices.h"

enum { PROJECT_MAX_STOCK = 64, PROJECT_MAX_MARKS = 64, PROJECT_MAX_TYPES = 100 };

/* How far the types of a storey, or of all, must be of one framing group. */
typedef enum project_framing { FRAMING_FREE, FRAMING_BY_STOREY, FRAMING_ALL } project_framing;
typedef enum project_aim {
  AIM_COST,  /* least cost */
  AIM_MARGIN /* the best worst margin of the sound rating that the budget pays for, then least cost
              */
} project_aim;

/* Goods on hand, used before any are bought. */
typedef struct project_stock {
  const char *item; /* code of the price book */
  double quantity;  /* takeoff units */
  price_unit unit;  /* of the file's quantity; project_check_stock compares it with the item's */
  const char *unit_word; /* as in the file: "ft2" */
  const json_value *json;
} project_stock;

/* A wall type of the drawings, by the mark that the schedule's existing_type names it with. */
typedef struct project_mark {
  const char *mark, *line; /* wall line as it stands in the file; side A towards a wall's `from` */
  bool locked;             /* walls of this mark keep it */
  const json_value *json;  /* of the mark */
  const json_value *line_json; /* a string */
} project_mark;

typedef struct project {
  const char *file, *title;
  uint32_t crc; /* CRC-32 of the file's bytes */
  units_system units;
  brief
      common; /* what every wall shares unless its row says otherwise: code, building, build, only,
                 without, services, structure, limits, sides, top and head; its targets are those
                 of rows that say none; height_m 0 = rows must say it. Its length is no wall's */
  double confidence;   /* of the rows' targets that say none; default 0.8 */
  sound_metric metric; /* of bare numbers in the rows; default STC */
  basis basis;         /* of rows that say none */
  evidence_wanted evidence;
  double margin;
  const char *walls; /* path of the schedule, resolved beside the project file */
  const json_value *walls_json;
  int max_types;                     /* 0 = as many as it takes */
  double type_setup_cost, min_run_m; /* a type; 0 = none */
  double budget, floor_area_max_m2;  /* 0 = none */
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
/* Index of a mark of the drawings, compared without case, blanks, hyphens and underscores;
 * CATALOG_NONE when the project has no such type. */
int project_find_mark(const project *p, const char *mark);
/* Whether the stock is of items that the book has, in their units. False after messages. */
bool project_check_stock(arena *a, diag_list *d, const project *p, const price_book *book);

#endif
