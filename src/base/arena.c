#include "base/arena.h"

#include <stdatomic.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

enum {
  SMALL_ALIGN = 16,
  LINE_ALIGN = 64, /* a cache line, and the widest vector */
  FIRST_BLOCK = 16 << 10,
  LARGEST_BLOCK = 1 << 20
};
_Static_assert(_Alignof(max_align_t) <= SMALL_ALIGN, "small allocations serve any type");

typedef struct block {
  struct block *next;
  unsigned char *at; /* first free byte */
  unsigned char *end;
} block;

struct arena {
  block *blocks; /* the first is the one that is being filled */
  size_t next_size;
  size_t used, limit;
  jmp_buf *on_fail;
};

/* Test hook only: allocations left until one fails; 0 = off. Atomic, because arenas of several
 * threads count here. */
static atomic_long fail_countdown;

static bool must_fail(void) {
  if (atomic_load_explicit(&fail_countdown, memory_order_relaxed) <= 0) return false;
  return atomic_fetch_sub(&fail_countdown, 1) == 1;
}

void arena_fail_at(long n) {
  atomic_store(&fail_countdown, n > 0 ? n : 0);
}

arena *arena_create(size_t limit_bytes, jmp_buf *on_fail) {
  if (must_fail()) return NULL;
  arena *a = calloc(1, sizeof *a);
  if (!a) return NULL;
  a->next_size = FIRST_BLOCK;
  a->limit = limit_bytes ? limit_bytes : SIZE_MAX;
  a->on_fail = on_fail;
  return a;
}

void arena_free(arena *a) {
  if (!a) return;
  for (block *b = a->blocks, *next; b; b = next) {
    next = b->next;
    free(b);
  }
  free(a);
}

arena *arena_beside(const arena *a, jmp_buf *on_fail) {
  /* a limit of 0 would be none: one byte serves nobody either */
  size_t left = a->limit > a->used ? a->limit - a->used : 1;
  return arena_create(a->limit == SIZE_MAX ? 0 : left, on_fail);
}

void arena_absorb(arena *a, arena *from) {
  if (!from) return;
  block **end = &a->blocks;
  while (*end) end = &(*end)->next; /* behind: the block being filled stays first */
  *end = from->blocks;
  a->used += from->used;
  free(from);
}

void arena_on_fail(arena *a, jmp_buf *on_fail) {
  a->on_fail = on_fail;
}

_Noreturn void arena_fail(arena *a) {
  if (!a->on_fail) abort();
  longjmp(*a->on_fail, 1);
}

/* Start of `size` bytes in `b` at that alignment, or NULL when they don't fit. */
static unsigned char *place_in(const block *b, size_t size, size_t align) {
  size_t room = (size_t)(b->end - b->at);
  size_t pad = (align - ((uintptr_t)b->at & (align - 1))) & (align - 1);
  return pad <= room && size <= room - pad ? b->at + pad : NULL;
}

/* A zeroed block with room for `size` bytes at any alignment used here. A large request gets a
 * block of its own behind the one being filled, so that the rest of that one is not lost. */
static block *add_block(arena *a, size_t size) {
  size_t overhead = sizeof(block) + LINE_ALIGN;
  if (size > SIZE_MAX - overhead) return NULL;
  bool own = size > a->next_size / 4;
  size_t payload = own ? size : a->next_size;
  block *b = calloc(1, overhead + payload);
  if (!b) return NULL;
  b->at = (unsigned char *)(b + 1);
  b->end = (unsigned char *)b + overhead + payload;
  if (own && a->blocks) {
    b->next = a->blocks->next;
    a->blocks->next = b;
  } else {
    b->next = a->blocks;
    a->blocks = b;
  }
  if (!own && a->next_size < LARGEST_BLOCK) a->next_size *= 2;
  return b;
}

void *arena_try(arena *a, size_t size) {
  if (must_fail()) return NULL;
  size_t align = size >= LINE_ALIGN ? LINE_ALIGN : SMALL_ALIGN;
  if (size == 0) size = 1;
  if (a->used > a->limit || size > a->limit - a->used) return NULL;
  block *b = a->blocks;
  unsigned char *start = b ? place_in(b, size, align) : NULL;
  if (!start) {
    b = add_block(a, size);
    if (!b) return NULL;
    start = place_in(b, size, align);
  }
  b->at = start + size;
  a->used += size;
  return start;
}

void *arena_alloc(arena *a, size_t size) {
  void *p = arena_try(a, size);
  if (!p) arena_fail(a);
  return p;
}

void *arena_array(arena *a, size_t count, size_t size) {
  if (size && count > SIZE_MAX / size) arena_fail(a);
  return arena_alloc(a, count * size);
}

void *arena_grow(arena *a, const void *old, size_t old_bytes, size_t new_bytes) {
  void *p = arena_alloc(a, new_bytes);
  size_t kept = old_bytes < new_bytes ? old_bytes : new_bytes;
  if (kept) memcpy(p, old, kept);
  return p;
}

size_t arena_used(const arena *a) {
  return a->used;
}
