/* The wall schedule of a project: a table as a spreadsheet exports it (docs/formats/schedule.md),
 * and its walls grouped into classes that ask the same. */
#ifndef INPUT_SCHEDULE_H
#define INPUT_SCHEDULE_H

#include "input/csv.h"
#include "input/project.h"

enum { SCHEDULE_MAX_WALLS = 20000, SCHEDULE_MAX_CLASSES = 256 };

typedef struct schedule_wall {
  const csv_row *row; /* where it stands; columns that are not ours are kept there */
  const char *id, *storey, *from, *to; /* "" where not said; from is the room of side A. Storeys are
                                          spelled as in schedule.storey */
  int count;                           /* copies, at least 1 */
  double length_m, height_m;           /* of one copy */
  double fastening_length_m[2];        /* of the wall's own sides; 0 = the whole side */
  int corners, tees, free_ends, doors; /* of one copy; -1 = not said */
  const char *existing_type;           /* "" = none */
  int mark;                            /* index of existing_type in the project's types;
                                          CATALOG_NONE without */
  const char *basis;                   /* where its target and fire come from, as in its class */
  int of_class;                        /* index of its class */
  bool turned;                         /* its side A is the class's side B */
} schedule_wall;

/* Walls with the same demands, as seen from the same side. Height is a demand; length only where
 * the rating or a cost limit depends on it (openings, limits.cost). */
typedef struct schedule_class {
  brief demand;       /* full brief; length and rooms are those of its first wall */
  const char *basis;  /* where target and fire come from: the rows of targets.json with their
                         sources, "; " between them; "" where the schedule says them itself */
  const char *storey; /* with FRAMING_BY_STOREY part of the demands, else "" */
  int locked;         /* the project's type that its walls keep, side A of the line towards side A;
                         CATALOG_NONE where the type is free. Locked walls are never turned */
  int *wall;          /* indices, in the order of the schedule */
  int count;
  double run_m; /* length of all copies */
} schedule_class;

typedef struct schedule {
  const csv_table *table;
  const project *project;
  schedule_wall *wall;
  int count;
  schedule_class *classes; /* in the order of their first walls */
  int class_count;
  const char *
      *storey; /* distinct, in the order of the schedule; walls that name none are of none */
  int storey_count;
} schedule;

/* All faults of all cells are reported, by row and column; NULL when there was any. */
schedule *schedule_read(arena *a, diag_list *d, const catalog *c, const project *p,
                        const csv_table *table);
/* The brief of one copy of a wall, seen as its class is (turned where the wall is); its title is
 * the wall's id. */
void schedule_brief(const schedule *s, int wall, brief *out);

#endif
