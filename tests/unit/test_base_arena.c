/* Arenas: alignment, zeroed memory, limits, and the jump when memory runs out. */
#include "base/arena.h"

#include <check.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

static bool is_zero(const unsigned char *p, size_t n) {
  for (size_t i = 0; i < n; i++)
    if (p[i]) return false;
  return true;
}

/* Sizes around the alignment step, the first block and the largest block. */
static const size_t sizes[] = {0,    1,    15,    16,    63,     64,      65,
                               1000, 4096, 16384, 16385, 100000, 1048576, 3000000};

START_TEST(memory_is_zeroed_and_aligned) {
  size_t size = sizes[_i], align = size >= 64 ? 64 : _Alignof(max_align_t);
  jmp_buf fail;
  arena *a = arena_create(0, &fail);
  for (int turn = 0; turn < 20; turn++) {
    (void)arena_alloc(a, 1); /* an odd start */
    unsigned char *p = arena_alloc(a, size);
    ck_assert_msg((uintptr_t)p % align == 0, "size %zu turn %d", size, turn);
    ck_assert_msg(is_zero(p, size), "size %zu turn %d", size, turn);
    memset(p, 0xAA, size);
  }
  ck_assert(arena_used(a) >= 20 * size);
  arena_free(a);
}
END_TEST

START_TEST(allocations_do_not_overlap) {
  enum { MANY = 3000 };
  static unsigned char *block[MANY];
  static size_t size[MANY];
  jmp_buf fail;
  arena *a = arena_create(0, &fail);
  unsigned seed = 1;
  for (int i = 0; i < MANY; i++) {
    seed = seed * 1103515245u + 12345u;
    size[i] = (seed >> 16) % 3000 + 1;
    block[i] = arena_alloc(a, size[i]);
    memset(block[i], i & 0xFF, size[i]);
  }
  int spoilt = 0;
  for (int i = 0; i < MANY; i++)
    for (size_t k = 0; k < size[i]; k++) spoilt += block[i][k] != (i & 0xFF);
  ck_assert_int_eq(spoilt, 0);
  arena_free(a);
}
END_TEST

START_TEST(the_limit_jumps) {
  jmp_buf fail;
  arena *volatile a = arena_create(1000, &fail);
  if (setjmp(fail) == 0) {
    ck_assert_ptr_nonnull(arena_alloc(a, 900));
    (void)arena_alloc(a, 200);
    ck_abort_msg("beyond the limit");
  }
  ck_assert_ptr_null(arena_try(a, 200));
  ck_assert_ptr_nonnull(arena_try(a, 50));
  ck_assert_uint_le(arena_used(a), 1000);
  arena_free(a);
}
END_TEST

START_TEST(an_array_too_large_to_count_jumps) {
  jmp_buf fail;
  arena *volatile a = arena_create(0, &fail);
  if (setjmp(fail) == 0) {
    (void)arena_array(a, SIZE_MAX / 2, 16);
    ck_abort_msg("overflow");
  }
  if (setjmp(fail) == 0) {
    (void)arena_alloc(a, SIZE_MAX - 8);
    ck_abort_msg("no such memory");
  }
  arena_free(a);
}
END_TEST

START_TEST(the_nth_allocation_fails_once) {
  jmp_buf first, second;
  arena *volatile a = arena_create(0, &first);
  arena_on_fail(a, &second);
  arena_fail_at(3);
  volatile int done = 0;
  if (setjmp(second) == 0) {
    for (; done < 10; done++) (void)arena_alloc(a, 8);
    ck_abort_msg("no failure");
  }
  ck_assert_int_eq(done, 2);
  ck_assert_ptr_nonnull(arena_try(a, 8));
  arena_fail_at(1);
  ck_assert_ptr_null(arena_create(0, &first));
  arena_fail_at(1);
  arena_fail_at(0);
  ck_assert_ptr_nonnull(arena_try(a, 8));
  arena_free(a);
}
END_TEST

START_TEST(growing_copies_and_keeps_the_old) {
  jmp_buf fail;
  arena *a = arena_create(0, &fail);
  char *old = arena_alloc(a, 4);
  memcpy(old, "abc", 4);
  char *larger = arena_grow(a, old, 4, 100);
  larger[0] = 'X';
  ck_assert_str_eq(old, "abc");
  ck_assert_str_eq(larger, "Xbc");
  ck_assert(is_zero((unsigned char *)larger + 4, 96));
  ck_assert_ptr_nonnull(arena_grow(a, NULL, 0, 10));
  arena_free(a);
  arena_free(NULL);
}
END_TEST

int main(void) {
  Suite *s = suite_create("arena");
  TCase *t = tcase_create("arena");
  tcase_add_loop_test(t, memory_is_zeroed_and_aligned, 0, (int)(sizeof sizes / sizeof sizes[0]));
  tcase_add_test(t, allocations_do_not_overlap);
  tcase_add_test(t, the_limit_jumps);
  tcase_add_test(t, an_array_too_large_to_count_jumps);
  tcase_add_test(t, the_nth_allocation_fails_once);
  tcase_add_test(t, growing_copies_and_keeps_the_old);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
