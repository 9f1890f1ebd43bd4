/* What the measurements share: clocks, one JSON line a figure, the shipped data. */
#ifndef TESTS_BENCH_H
#define TESTS_BENCH_H

#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "base/text.h"

/* Time of this process over all its threads: other work on the machine does not count. */
static inline double cpu_s(void) {
  struct timespec t;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
  return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

/* Time as a user waits it. */
static inline double wall_s(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static inline void figure(arena *a, const char *name, double value, int decimals,
                          const char *unit) {
  printf("{\"name\":\"%s\",\"value\":%s,\"unit\":\"%s\"}\n", name, text_of(a, value, decimals),
         unit);
  fflush(stdout);
}

#endif
