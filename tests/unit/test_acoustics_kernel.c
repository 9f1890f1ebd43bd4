/* The kernel against the plain reference (predict_wall) on seeded walls of every family, and the
 * bound against the kernel. */
#include "acoustics/kernel.h"

#include <check.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "acoustics/predict.h"
#include "wall/compat.h"
#include "share.h"

/* Both work in double precision on the same formulas in another order, so that they agree far
 * closer than KERNEL_ERROR_DB. In steps of 0.1 dB that means the same step, but for a curve within
 * some 1e-12 dB of one: none of the seeded is. */
#define SAME_STEP 1e-9

enum { CORES_PER_FAMILY = 40, FACES = 150, SIDES_PER_CORE = 3, TRIES = 200000 };

static arena *memory;
static jmp_buf out_of_memory;
static const catalog *cat;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_list d;
  diag_init(&d, memory);
  cat = catalog_load(memory, &d, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(cat);
}

static void teardown(void) {
  arena_free(memory);
}

typedef struct dice {
  unsigned state;
} dice;

static int roll(dice *d, size_t below) {
  d->state = d->state * 1664525u + 1013904223u;
  return (int)((d->state >> 8) % (unsigned)below);
}

static face random_face(dice *d) {
  face f = {0};
  do {
    f.count = 1 + roll(d, 4);
    for (int i = 0; i < f.count; i++) f.layer[i] = roll(d, cat->layer_count);
  } while (compat_face(cat, &f) == COMPAT_ILLEGAL || face_boards(cat, &f) == 0);
  return f;
}

/* A core of `family`, legal or unusual. */
static bool random_core(dice *d, sound_family family, wall *out) {
  for (int i = 0; i < TRIES; i++) {
    wall w = wall_empty();
    w.frame = roll(d, cat->frame_count);
    const frame *f = &cat->frames[w.frame];
    w.spacing_mm = cat->spacings_mm[roll(d, cat->spacing_count)];
    w.gap_mm = f->layout == FRAME_DOUBLE ? 10 + roll(d, 90) : 0;
    for (int row = 0; row < f->rows; row++)
      w.fill[row] = roll(d, 3) == 0 ? CATALOG_NONE : roll(d, cat->fill_count);
    if (roll(d, 2) == 0) {
      wall_mount *m = &w.mount[roll(d, 2)];
      m->mount = roll(d, cat->mount_count);
      m->spacing_mm = cat->mount_spacings_mm[roll(d, cat->mount_spacing_count)];
      m->clip_spacing_mm = cat->mounts[m->mount].clip_spacing_mm;
    }
    if (predict_family(cat, &w) != family || compat_core(cat, &w) == COMPAT_ILLEGAL) continue;
    *out = w;
    return true;
  }
  return false;
}

static void fill_faces(dice *d, face faces[FACES]) {
  for (int i = 0; i < FACES; i++) faces[i] = random_face(d);
}

static void compare(const wall *core, const face *faces, int a, int b, const double *exact, int n) {
  wall w = *core;
  prediction p;
  w.side[SIDE_A] = faces[a];
  w.side[SIDE_B] = faces[b];
  predict_wall(cat, &w, &p);
  for (int m = 0; m < METRIC_COUNT; m++) {
    double found = exact[m * n + b];
    ck_assert_msg(fabs(found - p.exact[m]) < SAME_STEP,
                  "%s, family %s, frame %s, faces %d and %d: %.3f, reference %.3f",
                  sound_metric_names[m], sound_family_names[p.family], cat->frames[w.frame].id, a,
                  b, found, p.exact[m]);
  }
}

START_TEST(agrees_with_the_reference) {
  dice d = {100u + (unsigned)_i};
  face *faces = arena_array(memory, FACES, sizeof *faces);
  double *all = arena_array(memory, FACES * METRIC_COUNT, sizeof *all);
  fill_faces(&d, faces);
  kernel_leaves *leaves = kernel_leaves_create(memory, cat, faces, FACES);
  kernel_core *k = kernel_core_create(memory, cat);
  for (int i = 0; i < share_of(CORES_PER_FAMILY); i++) {
    wall core;
    ck_assert_msg(random_core(&d, (sound_family)_i, &core), "no core of family %s",
                  sound_family_names[_i]);
    kernel_core_set(k, &core);
    for (int s = 0; s < SIDES_PER_CORE; s++) {
      int a = roll(&d, FACES);
      kernel_rate_all(k, leaves, a, 0, FACES, all);
      for (int b = roll(&d, 8); b < FACES; b += 8) compare(&core, faces, a, b, all, FACES);
    }
  }
}
END_TEST

/* One metric alone, and any part of the faces, give the values of all: the same bits. */
START_TEST(parts_give_the_same) {
  dice d = {7u};
  face *faces = arena_array(memory, FACES, sizeof *faces);
  double *all = arena_array(memory, FACES * METRIC_COUNT, sizeof *all);
  double *part = arena_array(memory, FACES, sizeof *part);
  fill_faces(&d, faces);
  kernel_leaves *leaves = kernel_leaves_create(memory, cat, faces, FACES);
  kernel_core *k = kernel_core_create(memory, cat);
  wall core;
  ck_assert(random_core(&d, FAMILY_STEEL, &core));
  kernel_core_set(k, &core);
  for (int a = 0; a < 20; a++) {
    int first = roll(&d, FACES), n = 1 + roll(&d, (size_t)(FACES - first));
    kernel_rate_all(k, leaves, a, 0, FACES, all);
    for (int m = 0; m < METRIC_COUNT; m++) {
      kernel_rate(k, leaves, a, first, n, (sound_metric)m, part);
      for (int j = 0; j < n; j++) ck_assert_double_eq(part[j], all[m * FACES + first + j]);
    }
  }
}
END_TEST

START_TEST(bound_is_never_passed) {
  dice d = {900u + (unsigned)_i};
  face *faces = arena_array(memory, FACES, sizeof *faces);
  double *exact = arena_array(memory, FACES, sizeof *exact);
  double *bound = arena_array(memory, FACES, sizeof *bound);
  fill_faces(&d, faces);
  kernel_leaves *leaves = kernel_leaves_create(memory, cat, faces, FACES);
  kernel_core *k = kernel_core_create(memory, cat);
  int tight = 0;
  for (int i = 0; i < share_of(CORES_PER_FAMILY); i++) {
    wall core;
    ck_assert(random_core(&d, (sound_family)_i, &core));
    kernel_core_set(k, &core);
    int a = roll(&d, FACES);
    kernel_bound(k, leaves, a, 0, FACES, bound);
    kernel_rate(k, leaves, a, 0, FACES, METRIC_STC, exact);
    for (int b = 0; b < FACES; b++) {
      ck_assert_msg(exact[b] <= bound[b], "%.1f above its bound %.1f", exact[b], bound[b]);
      if (bound[b] - exact[b] < 6) tight++;
    }
  }
  ck_assert_int_gt(tight, 0); /* a bound that refuses nothing would be useless */
}
END_TEST

/* A side A from other tables, and faces from here and there: the same bits as in order. */
START_TEST(listed_faces_give_the_same) {
  dice d = {31u};
  face *faces = arena_array(memory, FACES, sizeof *faces);
  double *all = arena_array(memory, FACES, sizeof *all);
  double *listed = arena_array(memory, FACES, sizeof *listed);
  int *list = arena_array(memory, FACES, sizeof *list);
  fill_faces(&d, faces);
  kernel_leaves *leaves = kernel_leaves_create(memory, cat, faces, FACES);
  kernel_leaves *others = kernel_leaves_create(memory, cat, faces + 70, FACES - 70);
  kernel_core *k = kernel_core_create(memory, cat);
  for (int i = 0; i < 3 * FAMILY_COUNT; i++) {
    wall core;
    ck_assert(random_core(&d, (sound_family)(i % FAMILY_COUNT), &core));
    kernel_core_set(k, &core);
    int a = roll(&d, FACES - 70), n = 1 + roll(&d, FACES);
    sound_metric m = (sound_metric)roll(&d, METRIC_COUNT);
    kernel_rate(k, leaves, a + 70, 0, FACES, m, all);
    for (int j = 0; j < n; j++) list[j] = roll(&d, FACES);
    kernel_rate_listed(k, others, a, leaves, list, n, m, listed);
    for (int j = 0; j < n; j++) ck_assert_double_eq(listed[j], all[list[j]]);
  }
}
END_TEST

/* Every width that this machine has gives the same bits. */
START_TEST(vectors_give_the_same) {
  static const char *const vectors[] = {"portable", "avx2", "avx512"};
  dice d = {77u + (unsigned)_i};
  face *faces = arena_array(memory, FACES, sizeof *faces);
  double *all = arena_array(memory, FACES * METRIC_COUNT, sizeof *all);
  double *other = arena_array(memory, FACES * METRIC_COUNT, sizeof *other);
  unsigned char *open = arena_array(memory, 2 * FACES, sizeof *open);
  double screen = kernel_screen_of(50);
  fill_faces(&d, faces);
  kernel_leaves *leaves = kernel_leaves_create(memory, cat, faces, FACES);
  kernel_core *k = kernel_core_create(memory, cat);
  ck_assert(kernel_use(k, "portable"));
  ck_assert(kernel_use(k, kernel_vectors()));
  ck_assert(!kernel_use(k, "none of them"));
  for (int i = 0; i < 4; i++) {
    wall core;
    ck_assert(random_core(&d, (sound_family)_i, &core));
    int a = roll(&d, FACES);
    ck_assert(kernel_use(k, NULL));
    kernel_core_set(k, &core);
    kernel_rate_all(k, leaves, a, 0, FACES, all);
    kernel_screen(k, leaves, a, leaves, 0, FACES, screen, open);
    for (size_t v = 0; v < sizeof vectors / sizeof *vectors; v++) {
      if (!kernel_use(k, vectors[v])) continue;
      kernel_core_set(k, &core);
      kernel_rate_all(k, leaves, a, 0, FACES, other);
      kernel_screen(k, leaves, a, leaves, 0, FACES, screen, open + FACES);
      ck_assert_msg(memcmp(all, other, FACES * METRIC_COUNT * sizeof *all) == 0, "%s", vectors[v]);
      for (int j = 0; j < FACES; j++)
        ck_assert_msg(open[j] == open[FACES + j], "%s: screen of face %d", vectors[v], j);
    }
  }
}
END_TEST

/* Refuses no wall that reaches the value, and of those that miss it most. */
START_TEST(screen_refuses_what_fails_only) {
  static const double values[] = {40, 45.3, 50, 55, 60.1};
  dice d = {4000u + (unsigned)_i};
  face *faces = arena_array(memory, FACES, sizeof *faces);
  double *exact = arena_array(memory, FACES, sizeof *exact);
  unsigned char *open = arena_array(memory, FACES, sizeof *open);
  fill_faces(&d, faces);
  kernel_leaves *leaves = kernel_leaves_create(memory, cat, faces, FACES);
  kernel_core *k = kernel_core_create(memory, cat);
  int refused = 0;
  for (int i = 0; i < share_of(CORES_PER_FAMILY); i++) {
    wall core;
    ck_assert(random_core(&d, (sound_family)_i, &core));
    kernel_core_set(k, &core);
    int a = roll(&d, FACES), first = roll(&d, FACES), n = FACES - first;
    kernel_rate(k, leaves, a, first, n, METRIC_STC, exact);
    for (size_t v = 0; v < sizeof values / sizeof *values; v++) {
      kernel_screen(k, leaves, a, leaves, first, n, kernel_screen_of(values[v]), open);
      for (int j = 0; j < n; j++) {
        ck_assert_msg(open[j] || exact[j] < values[v], "%.1f refused at %.1f", exact[j], values[v]);
        refused += !open[j];
      }
    }
  }
  ck_assert_int_gt(refused, 0);
}
END_TEST

int main(void) {
  Suite *s = suite_create("acoustics_kernel");
  TCase *t = tcase_create("kernel");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, agrees_with_the_reference, 0, FAMILY_COUNT);
  tcase_add_test(t, parts_give_the_same);
  tcase_add_loop_test(t, bound_is_never_passed, 0, FAMILY_COUNT);
  tcase_add_test(t, listed_faces_give_the_same);
  tcase_add_loop_test(t, vectors_give_the_same, 0, FAMILY_COUNT);
  tcase_add_loop_test(t, screen_refuses_what_fails_only, 0, FAMILY_COUNT);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
