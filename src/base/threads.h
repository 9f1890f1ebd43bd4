/* Work in blocks over several threads. Which thread does which block is chance; whoever wants
 * results that do not depend on it keeps them by block, or merges what each worker kept in a way
 * that the order does not matter to. */
#ifndef BASE_THREADS_H
#define BASE_THREADS_H

#include "base/arena.h"

enum { THREADS_MAX = 64 };

/* How many threads work: `asked`, at most THREADS_MAX; 0: as the environment's SEPTUM_THREADS says,
 * else one a processor that is online. */
int threads_count(int asked);

typedef struct threads_work {
  /* Called once by each worker before its first block, with the arena that is its own: what comes
   * from there lives as long as the caller's arena. Gives what `block` gets as `own`. NULL: own is
   * the arena. */
  void *(*start)(void *shared, arena *a, int worker);
  /* Called for every block 0 .. blocks - 1, once each, low ones first. May allocate from the arena
   * of `start` alone: when that runs out of memory, the caller's arena fails, in the caller's
   * thread, after all workers have stopped. */
  void (*block)(void *shared, void *own, int block);
  void *shared; /* for both; what is written there by two blocks needs care of its own */
} threads_work;

/* Does the blocks with up to `threads` workers, the caller's thread being worker 0, and returns when
 * all are done. A thread that cannot be started is done without. `own` (`threads` values, may be
 * NULL) gets what `start` gave for each worker, NULL for one that did no block. */
void threads_run(arena *a, int threads, int blocks, const threads_work *work, void **own);

#endif
