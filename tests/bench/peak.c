/* Compiled with contraction, so that x * a + b is one operation where the machine has it. Chains
 * enough to hide the latency, few enough for the registers. */
#include "peak.h"

#include <stdbool.h>

#include "bench.h"

#define MEASURE_S 0.3
enum { STEPS = 20000, CHAINS = 8 };
static const double factor = 0.999999, addend = 1e-6;

/* One of these a vector width: flops done, their sum kept alive through *sink. */
#define PEAK(name, bytes, attributes)                                                              \
  typedef double name##_vector __attribute__((vector_size(bytes)));                               \
  attributes static double name##_apart(double *sink) {                                            \
    name##_vector x[CHAINS], y[CHAINS], a = {0}, b = {0};                                          \
    a += factor, b += addend;                                                                      \
    for (int i = 0; i < CHAINS; i++) x[i] = b + i, y[i] = b - i;                                   \
    for (int n = 0; n < STEPS; n++)                                                                \
      for (int i = 0; i < CHAINS; i++) {                                                           \
        x[i] *= a;                                                                                 \
        y[i] += b;                                                                                 \
      }                                                                                            \
    for (int i = 0; i < CHAINS; i++) *sink += x[i][0] + y[i][0];                                   \
    return 2.0 * STEPS * CHAINS * (bytes) / sizeof(double);                                        \
  }                                                                                                \
  attributes static double name##_fused(double *sink) {                                            \
    name##_vector x[CHAINS], a = {0}, b = {0};                                                     \
    a += factor, b += addend;                                                                      \
    for (int i = 0; i < CHAINS; i++) x[i] = b + i;                                                 \
    for (int n = 0; n < STEPS; n++)                                                                \
      for (int i = 0; i < CHAINS; i++) x[i] = x[i] * a + b;                                        \
    for (int i = 0; i < CHAINS; i++) *sink += x[i][0];                                             \
    return 2.0 * STEPS * CHAINS * (bytes) / sizeof(double);                                        \
  }

PEAK(portable, 16, )
#if defined(SEPTUM_SIMD) && defined(__x86_64__)
PEAK(avx2, 32, __attribute__((target("avx2,fma"))))
PEAK(avx512, 64, __attribute__((target("avx512f,avx512dq"))))
#endif

static double best(double (*work)(double *sink)) {
  double sink = 0, start = cpu_s(), spent = 0, flops = 0;
  for (; spent < MEASURE_S; spent = cpu_s() - start) flops += work(&sink);
  return sink > -1e300 ? flops / spent : 0;
}

static double greater(double x, double y) {
  return x > y ? x : y;
}

double peak_flops(void) {
#if defined(SEPTUM_SIMD) && defined(__x86_64__)
  if (__builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512dq"))
    return greater(best(avx512_apart), best(avx512_fused));
  if (__builtin_cpu_supports("avx2") && __builtin_cpu_supports("fma"))
    return greater(best(avx2_apart), best(avx2_fused));
#endif
  return greater(best(portable_apart), best(portable_fused));
}
