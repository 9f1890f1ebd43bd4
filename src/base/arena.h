/* Memory: one arena per lifetime (catalog, job, sweep scratch, answer). Nothing else in the library
 * calls malloc. An arena never returns NULL: when memory runs out, or its limit is reached, it
 * jumps to its owner's `on_fail` (set by the API at the start of each call), so that code between
 * need not check. Whoever holds something that is not arena memory (an open file, a GLPK problem, a
 * cJSON tree) allocates from arenas before opening it or after closing it, never in between. */
#ifndef BASE_ARENA_H
#define BASE_ARENA_H

#include <setjmp.h>
#include <stddef.h>

typedef struct arena arena;

/* A new arena; NULL when memory ran out. `limit_bytes` 0 = no limit. `on_fail` outlives the arena's
 * use; an arena without one ends the program (abort) when memory runs out. */
arena *arena_create(size_t limit_bytes, jmp_buf *on_fail);
/* Frees the arena and all that came from it. NULL is fine. */
void arena_free(arena *a);
/* Changes where the arena jumps when memory runs out. */
void arena_on_fail(arena *a, jmp_buf *on_fail);
/* Zeroed, aligned for any type (and to 64 bytes from 64 bytes up); lives as long as the arena. size
 * 0 is fine. */
void *arena_alloc(arena *a, size_t size);
/* `count` x `size` zeroed bytes; overflow counts as memory that ran out. */
void *arena_array(arena *a, size_t count, size_t size);
/* A larger copy of an array; the old one stays in the arena. */
void *arena_grow(arena *a, const void *old, size_t old_bytes, size_t new_bytes);
/* As arena_alloc, but NULL when memory ran out: for whoever must close something before the jump.
 */
void *arena_try(arena *a, size_t size);
/* Jumps to `on_fail` as if memory had run out: after closing what was open. */
_Noreturn void arena_fail(arena *a);
/* A new arena that may take what is left of `a`'s limit at this moment; for work that another thread
 * does. NULL when memory ran out. */
arena *arena_beside(const arena *a, jmp_buf *on_fail);
/* Everything that came from `from` lives on in `a`; `from` itself is gone. NULL is fine. */
void arena_absorb(arena *a, arena *from);
/* Bytes handed out so far. */
size_t arena_used(const arena *a);
/* For tests: the n-th allocation from now on fails (0 = never), over all arenas; those after it
 * succeed again. */
void arena_fail_at(long n);

#endif
