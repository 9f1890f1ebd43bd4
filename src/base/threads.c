#include "base/threads.h"

#include <pthread.h>
#include <stdatomic.h>
#include <stdbool.h>
#include <stdlib.h>
#include <unistd.h>

int threads_count(int asked) {
  const char *said = getenv("SEPTUM_THREADS");
  long n = asked;
  if (n <= 0 && said) n = strtol(said, NULL, 10);
  if (n <= 0) n = sysconf(_SC_NPROCESSORS_ONLN);
  return n < 1 ? 1 : n > THREADS_MAX ? THREADS_MAX : (int)n;
}

typedef struct crew {
  const threads_work *work;
  int blocks;
  atomic_int next;    /* block that nobody has taken yet */
  atomic_bool failed; /* memory ran out somewhere: take no more */
} crew;

typedef struct worker {
  crew *crew;
  int index;
  arena *arena;
  void *own;
  jmp_buf no_memory; /* each thread jumps on its own stack only */
  pthread_t thread;
  bool running;
} worker;

static void take_blocks(worker *w) {
  crew *c = w->crew;
  const threads_work *job = c->work;
  while (!atomic_load(&c->failed)) {
    int block = atomic_fetch_add(&c->next, 1);
    if (block >= c->blocks) return;
    if (!w->own) w->own = job->start ? job->start(job->shared, w->arena, w->index) : w->arena;
    job->block(job->shared, w->own, block);
  }
}

/* Nothing local changes between the setjmp and the jump. */
static void *work_on(void *user) {
  worker *w = user;
  if (setjmp(w->no_memory) == 0)
    take_blocks(w);
  else
    atomic_store(&w->crew->failed, true);
  return NULL;
}

/* Arenas before threads: once a thread runs, nothing may jump past it. False when memory ran out. */
static bool hire(arena *a, crew *c, worker *w, int count) {
  for (int i = 0; i < count; i++) {
    w[i] = (worker){.crew = c, .index = i};
    w[i].arena = arena_beside(a, &w[i].no_memory);
    if (!w[i].arena) return false;
  }
  for (int i = 1; i < count; i++)
    w[i].running = pthread_create(&w[i].thread, NULL, work_on, &w[i]) == 0;
  return true;
}

void threads_run(arena *a, int threads, int blocks, const threads_work *work, void **own) {
  int count = threads < blocks ? threads : blocks;
  if (count > THREADS_MAX) count = THREADS_MAX;
  for (int i = 0; own && i < threads; i++) own[i] = NULL;
  if (count < 1) return;
  crew *c = arena_alloc(a, sizeof *c);
  worker *w = arena_array(a, (size_t)count, sizeof *w);
  *c = (crew){.work = work, .blocks = blocks};
  if (hire(a, c, w, count))
    work_on(&w[0]);
  else
    atomic_store(&c->failed, true);
  for (int i = 0; i < count; i++) {
    if (w[i].running) pthread_join(w[i].thread, NULL);
    if (own) own[i] = w[i].own;
    arena_absorb(a, w[i].arena);
  }
  if (atomic_load(&c->failed)) arena_fail(a);
}
