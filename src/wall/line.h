/* The wall line and wall/1 (design: "A wall, in text and JSON"). */
#ifndef WALL_LINE_H
#define WALL_LINE_H

#include "wall/wall.h"

/* Reads a wall line. Faults are reported at their column (file NULL, line 1) with what was
 * expected, and for an unknown id the nearest one. Syntax and ids only: compat_check says whether
 * it can be built. */
bool line_parse(arena *a, diag_list *d, const catalog *c, const char *line, wall *out);
/* The same for a line that stands in a JSON file: faults are reported at that value. */
bool line_parse_value(arena *a, diag_list *d, const catalog *c, const json_value *v, wall *out);
/* Canonical, shortest form. */
const char *line_print(arena *a, const catalog *c, const wall *w);
/* Reads wall/1. *name stays NULL without one. */
bool line_from_json(arena *a, diag_list *d, const catalog *c, const json_value *root, wall *out,
                    const char **name);

#endif
