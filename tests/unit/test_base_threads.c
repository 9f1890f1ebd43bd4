/* Blocks over threads: each once, arenas of their own, memory that runs out in any of them. */
#include "base/threads.h"

#include <check.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdlib.h>

enum { BLOCKS = 500, ALLOCATION = 100 };
static const int thread_counts[] = {1, 2, 3, 4, 8};
enum { COUNTS = sizeof thread_counts / sizeof *thread_counts };

typedef struct tally {
  int done[BLOCKS]; /* one writer each */
  int *made[BLOCKS];
} tally;

typedef struct mine {
  arena *arena;
  int worker, blocks;
} mine;

static void *start(void *shared, arena *a, int worker) {
  (void)shared;
  mine *m = arena_alloc(a, sizeof *m);
  *m = (mine){.arena = a, .worker = worker};
  return m;
}

static void block(void *shared, void *own, int number) {
  tally *t = shared;
  mine *m = own;
  m->blocks++;
  t->done[number]++;
  t->made[number] = arena_array(m->arena, ALLOCATION, sizeof(int));
  for (int i = 0; i < ALLOCATION; i++) t->made[number][i] = number + i;
}

START_TEST(every_block_once_and_its_memory_stays) {
  jmp_buf fail;
  arena *a = arena_create(0, &fail);
  tally *t = arena_alloc(a, sizeof *t);
  void *own[8];
  int threads = thread_counts[_i], blocks = 0;
  threads_work work = {start, block, t};
  threads_run(a, threads, BLOCKS, &work, own);
  for (int i = 0; i < BLOCKS; i++) {
    ck_assert_int_eq(t->done[i], 1);
    for (int k = 0; k < ALLOCATION; k++) ck_assert_int_eq(t->made[i][k], i + k);
  }
  for (int i = 0; i < threads; i++) {
    mine *m = own[i];
    if (m) ck_assert_int_eq(m->worker, i);
    if (m) blocks += m->blocks;
  }
  ck_assert_int_eq(blocks, BLOCKS);
  ck_assert(arena_used(a) >= BLOCKS * ALLOCATION * sizeof(int));
  (void)arena_alloc(a, 1 << 20); /* it goes on working */
  arena_free(a);
}
END_TEST

static void bare_block(void *shared, void *own, int number) {
  tally *t = shared;
  t->made[number] = arena_array(own, ALLOCATION, sizeof(int));
  t->done[number]++;
}

START_TEST(no_start_and_no_blocks) {
  jmp_buf fail;
  arena *a = arena_create(0, &fail);
  tally *t = arena_alloc(a, sizeof *t);
  threads_work work = {.block = bare_block, .shared = t};
  threads_run(a, 4, 0, &work, NULL);
  ck_assert_int_eq(t->done[0], 0);
  threads_run(a, 4, 3, &work, NULL);
  for (int i = 0; i < 3; i++) ck_assert_int_eq(t->done[i], 1);
  ck_assert_int_eq(t->done[3], 0);
  arena_free(a);
}
END_TEST

/* The n-th allocation fails, whichever thread makes it; n rises until all succeed. */
START_TEST(memory_that_runs_out_reaches_the_caller) {
  int threads = thread_counts[_i];
  volatile int failures = 0;
  for (volatile long n = 1;; n += 7) {
    jmp_buf fail;
    arena_fail_at(0);
    arena *volatile a = arena_create(0, &fail);
    volatile bool whole = false;
    if (setjmp(fail) == 0) {
      tally *t = arena_alloc(a, sizeof *t);
      threads_work work = {start, block, t};
      arena_fail_at(n);
      threads_run(a, threads, BLOCKS, &work, NULL);
      whole = true;
    }
    arena_fail_at(0);
    arena_free(a);
    if (whole) break;
    failures++;
  }
  ck_assert_int_gt(failures, BLOCKS / 7 - 1);
}
END_TEST

START_TEST(the_limit_holds_for_workers) {
  jmp_buf fail;
  arena *volatile a = arena_create(100000, &fail);
  volatile bool jumped = true;
  tally *t = malloc(sizeof *t);
  if (setjmp(fail) == 0) {
    threads_work work = {start, block, t};
    *t = (tally){.done = {0}};
    threads_run(a, 1, BLOCKS, &work, NULL);
    jumped = false;
  }
  ck_assert(jumped);
  arena_free(a);
  free(t);
}
END_TEST

START_TEST(how_many) {
  unsetenv("SEPTUM_THREADS");
  ck_assert_int_ge(threads_count(0), 1);
  ck_assert_int_eq(threads_count(3), 3);
  ck_assert_int_eq(threads_count(1000000), THREADS_MAX);
  setenv("SEPTUM_THREADS", "5", 1);
  ck_assert_int_eq(threads_count(0), 5);
  ck_assert_int_eq(threads_count(2), 2);
  setenv("SEPTUM_THREADS", "many", 1);
  ck_assert_int_ge(threads_count(0), 1);
  unsetenv("SEPTUM_THREADS");
}
END_TEST

int main(void) {
  Suite *s = suite_create("base_threads");
  TCase *t = tcase_create("blocks");
  tcase_set_timeout(t, 120);
  tcase_add_loop_test(t, every_block_once_and_its_memory_stays, 0, COUNTS);
  tcase_add_test(t, no_start_and_no_blocks);
  tcase_add_loop_test(t, memory_that_runs_out_reaches_the_caller, 0, COUNTS);
  tcase_add_test(t, the_limit_holds_for_workers);
  tcase_add_test(t, how_many);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
