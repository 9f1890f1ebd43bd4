/* What differs between two walls in the words of the trade: "second layer on side B", "24 in for
 * 16 in stud spacing". */
#ifndef EXPLAIN_CHANGES_H
#define EXPLAIN_CHANGES_H

#include "wall/wall.h"

enum { CHANGES_MAX = 16 };

typedef struct change_list {
  int count; /* 0: the same wall */
  const char *item[CHANGES_MAX];
} change_list;

/* What is done to `from` to get `to`; sides are named as in `to`. Words live in `a`. */
void changes_list(arena *a, const catalog *c, const wall *from, const wall *to, bool inches,
                  change_list *out);
/* All of them in one line, "; " between; "no change" without. */
const char *changes_words(arena *a, const change_list *l);
/* `w`, or its mirror image where fewer parts of that differ from `other`. */
wall changes_nearer(const catalog *c, const wall *other, const wall *w);

#endif
