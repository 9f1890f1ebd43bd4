/* Labels in a column that never overlap: each as near as may be to what it belongs to. */
#ifndef REPORT_LABELS_H
#define REPORT_LABELS_H

enum { LABELS_MAX = 64 };

typedef struct label_slot {
  double want;   /* where its middle would best be */
  double height; /* above 0 */
  double top;    /* set by labels_place */
} label_slot;

/* Places `n` (at most LABELS_MAX) labels, given by rising `want`, one below another with `gap`
 * between neighbours, within first..last. Among all such placings the one with the least sum of
 * squares of the ways from `want`. Where they need more room than there is they begin at `first`
 * and pass `last`: see labels_height. The order is kept, so straight leaders do not cross. */
void labels_place(label_slot *slot, int n, double gap, double first, double last);
/* Least height for `n` labels. */
double labels_height(const label_slot *slot, int n, double gap);

#endif
