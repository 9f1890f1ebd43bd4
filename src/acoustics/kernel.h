/* Many walls at once: for one core (frame, spacing, gap, fills, mounts) and one leaf on side A, all leaves of side B in
 * contiguous lanes. Same model as model.h, arranged so that everything with a logarithm, power or division by a
 * component is in tables. Agrees with the reference within KERNEL_ERROR_DB. */
#ifndef ACOUSTICS_KERNEL_H
#define ACOUSTICS_KERNEL_H

#include "wall/wall.h"
#include "input/coefficients.h"

#define KERNEL_ERROR_DB 0.05 /* what falls so near a limit is decided by the reference */

typedef struct kernel_core kernel_core;
typedef struct kernel_leaves kernel_leaves;

/* Tables of `n` faces (leaf scalars are per face; support spacing enters by the core). Lives in `a`. */
kernel_leaves *kernel_leaves_create(arena *a, const catalog *c, const face *faces, int n);
/* Tables of one core; its faces, sheaths and inner faces are ignored (they must be empty). Scratch for one thread. */
kernel_core *kernel_core_create(arena *a, const catalog *c);
void kernel_core_set(kernel_core *k, const wall *core);
/* exact[j] = exact rating in `metric` of face `side_a` on A and face first_b + j on B, j < n. */
void kernel_rate(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n, sound_metric metric,
                 double *exact);
/* As above, for all five metrics and the integer STC etc. when a brief has several targets: exact is METRIC_COUNT x n. */
void kernel_rate_all(kernel_core *k, const kernel_leaves *leaves, int side_a, int first_b, int n, double *exact);

#endif
