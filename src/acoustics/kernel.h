/* Many walls at once: for one core (frame, spacing, gap, fills, mounts) and one leaf on side A, all leaves of side B in
 * contiguous lanes. Same model as model.h in double precision, arranged so that everything with a logarithm, a power or a
 * division by a component is in tables; derivation in docs/methods/kernel.md. Agrees with the reference (predict_wall) within
 * KERNEL_ERROR_DB before the step down to 0.1 dB; a value right at a step may come out one step off. For walls without
 * sheaths and inner faces. */
#ifndef ACOUSTICS_KERNEL_H
#define ACOUSTICS_KERNEL_H

#include "wall/wall.h"
#include "input/coefficients.h"

#define KERNEL_ERROR_DB 0.05 /* what falls so near a limit is decided by the reference */

typedef struct kernel_core kernel_core;
typedef struct kernel_leaves kernel_leaves;

/* Tables of `n` faces, none empty (leaf scalars are per face; support spacing enters by the core). Lives in `a`; only
 * read afterwards, so that threads may share it. */
kernel_leaves *kernel_leaves_create(arena *a, const catalog *c, const face *faces, int n);
/* Tables of one core; its faces, sheaths and inner faces are ignored (they must be empty). Scratch for one thread, up to 2 MiB
 * in `a` as cavities are met. */
kernel_core *kernel_core_create(arena *a, const catalog *c);
/* Makes `k` the tables of `core`. Costs the time of some hundred walls. */
void kernel_core_set(kernel_core *k, const wall *core);
/* exact[j] = exact rating in `metric` (as rating_exact) of face `side_a` on A and face first_b + j on B, j < n. A new side_a
 * costs the time of a few walls. Lanes are filled in blocks of 64 faces counted from face 0. */
void kernel_rate(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n, sound_metric metric,
                 double *exact);
/* As above, for all five metrics: exact[metric * n + j], METRIC_COUNT x n. */
void kernel_rate_all(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n, double *exact);
/* stc_at_most[j] >= the exact STC that kernel_rate gives for the same wall, from the band at 125 Hz alone: no contour passes a
 * curve by more than 8 dB. At a small part of the time of kernel_rate. */
void kernel_bound(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n, double *stc_at_most);
/* What kernel_screen takes for `stc`. */
double kernel_screen_of(double stc);
/* The quick test: open[j] = 0 only where the exact STC of face `a` of leaves_a on A and face first_b + j of leaves_b on B is
 * surely below the `stc` of kernel_screen_of, by the band at 125 Hz or a part of it; else 1. */
void kernel_screen(kernel_core *k, const kernel_leaves *leaves_a, int a, const kernel_leaves *leaves_b, int first_b, int n,
                   double screen, unsigned char *open);
/* kernel_rate for the `n` faces b[] of leaves_b: the same bits. */
void kernel_rate_listed(kernel_core *k, const kernel_leaves *leaves_a, int a, const kernel_leaves *leaves_b, const int *b, int n,
                        sound_metric metric, double *exact);
/* For tests: makes `k` run in these vectors (NULL: the widest, as created). False when this machine or this build lacks them. */
bool kernel_use(kernel_core *k, const char *vectors);
/* Which vectors the lanes run in on this machine: "avx512", "avx2" or "portable". All give the same bits. */
const char *kernel_vectors(void);

#endif
