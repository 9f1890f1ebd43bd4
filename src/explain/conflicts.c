/* A set of rules cannot hold together when every wall breaks one of them. With the sets of rules
 * that walls break given, the smallest such sets are their minimal hitting sets, built up one
 * broken set after the other (Berge, Hypergraphs, 1989). */
#include <stdlib.h>
#include <string.h>

#include "explain/explain.h"

static int by_size(const void *x, const void *y) {
  rule_mask p = *(const rule_mask *)x, q = *(const rule_mask *)y;
  int m = rules_count(p), n = rules_count(q);
  return m != n ? m - n : (p > q) - (p < q);
}

/* Keeps, in order of size, the sets that contain no other. Returns how many. */
static int keep_minimal(rule_mask *set, int count) {
  int kept = 0;
  if (count > 0) qsort(set, (size_t)count, sizeof *set, by_size);
  for (int i = 0; i < count; i++) {
    bool minimal = true;
    for (int j = 0; j < kept && minimal; j++) minimal = (set[j] & ~set[i]) != 0;
    if (minimal) set[kept++] = set[i];
  }
  return kept;
}

/* The hitting sets of what came before, made to hit one more set. */
static int hit_one_more(arena *a, rule_mask **hitting, int count, rule_mask must) {
  int bits = rules_count(must), next = 0;
  rule_mask *grown = arena_array(a, (size_t)count * (size_t)bits, sizeof *grown);
  for (int i = 0; i < count; i++) {
    rule_mask h = (*hitting)[i];
    if (h & must) {
      grown[next++] = h;
      continue;
    }
    for (rule_mask rest = must; rest; rest &= rest - 1) grown[next++] = h | (rest & -rest);
  }
  *hitting = grown;
  return keep_minimal(grown, next);
}

int explain_conflicts(arena *a, const rule_mask *broken, int count, rule_mask **out) {
  rule_mask *minimal = arena_array(a, (size_t)count, sizeof *minimal);
  if (count > 0) memcpy(minimal, broken, (size_t)count * sizeof *minimal);
  int sets = keep_minimal(minimal, count);
  *out = NULL;
  if (sets == 0 || minimal[0] == 0) return 0; /* no wall at all, or one that breaks nothing */
  rule_mask *hitting = arena_alloc(a, sizeof *hitting);
  hitting[0] = 0;
  int found = 1;
  for (int i = 0; i < sets; i++) found = hit_one_more(a, &hitting, found, minimal[i]);
  *out = hitting;
  return found;
}
