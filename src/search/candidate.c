#include "search/candidate.h"

static int order_of(long long x, long long y) {
  return (x > y) - (x < y);
}

int candidate_compare(const space *s, const candidate *x, const candidate *y) {
  int order = order_of(x->is.cost_cents, y->is.cost_cents);
  if (order == 0) order = order_of(x->is.thickness_tenth_mm, y->is.thickness_tenth_mm);
  if (order == 0) order = order_of(x->is.mass_hundredth, y->is.mass_hundredth);
  if (order == 0)
    order = space_compare_lines(s, x->core, x->face_a, x->face_b, y->core, y->face_a, y->face_b);
  return order;
}

/* The target is never given up alone: a wall that misses it even by the bare prediction fails at
 * every confidence and in every scope. */
static rule_mask all_that_fails(rule_mask m) {
  return m & rule_bit(RULE_TARGET) ? m | rule_bit(RULE_CONFIDENCE) | rule_bit(RULE_COMPOSITE) : m;
}

static bool saved_by(const candidate *x, rule_mask given_up) {
  if ((all_that_fails(x->broken) & ~given_up) == 0) return true;
  return x->instead && (all_that_fails(x->instead) & ~given_up) == 0;
}

bool candidate_passes_where(const candidate *x, const candidate *y) {
  if (!saved_by(x, all_that_fails(y->broken))) return false;
  return y->instead == 0 || saved_by(x, all_that_fails(y->instead));
}
