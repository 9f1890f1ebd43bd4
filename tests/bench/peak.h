/* The multiply-add peak of one core in double precision, with the widest vectors that the kernel
 * would take here. */
#ifndef TESTS_BENCH_PEAK_H
#define TESTS_BENCH_PEAK_H

/* Flops a second: the greater of multiplications and additions apart, and of the two fused where
 * the machine has that. */
double peak_flops(void);

#endif
