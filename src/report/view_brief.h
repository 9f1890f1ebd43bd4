/* The brief as it was understood: every field that is in force, its value in words, and whether a
 * brief that does not say it would get the same. */
#ifndef REPORT_VIEW_BRIEF_H
#define REPORT_VIEW_BRIEF_H

#include "report/report.h"

typedef struct view_field {
  const char *name, *value;
  bool usual; /* as when the brief is silent */
} view_field;

enum { VIEW_MAX_FIELDS = 256 };
typedef struct view_brief {
  int count;
  view_field field[VIEW_MAX_FIELDS];
} view_brief;

/* `climbs`: the target whose value is not asked but varied, CATALOG_NONE without. */
void view_brief_of(const report *r, int climbs, view_brief *out);

#endif
