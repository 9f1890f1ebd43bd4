/* How much of a seeded test runs: all, or under SEPTUM_TEST_SHARE=N every N-th part, for rounds with slow instruments. */
#ifndef TEST_SHARE_H
#define TEST_SHARE_H

#include <stdlib.h>

enum { SHARE_LEAST = 4 };

static inline int share_of(int rows) {
  const char *asked = getenv("SEPTUM_TEST_SHARE");
  int part = asked ? (int)strtol(asked, NULL, 10) : 1;
  int kept = part > 1 ? rows / part : rows;
  if (kept >= SHARE_LEAST) return kept;
  return rows < SHARE_LEAST ? rows : SHARE_LEAST;
}

#endif
