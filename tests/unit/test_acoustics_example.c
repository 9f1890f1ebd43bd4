/* The worked example of docs/methods/sound.md: computed here, looked for there. */
#include <check.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "acoustics/predict.h"
#include "base/file.h"
#include "base/text.h"
#include "wall/line.h"

#define EXAMPLE_LINE "typex-16 | steel-92-18@610, glass-89 | typex-16"
enum { DOC_BYTES = 1 << 20 };

static arena *memory;
static jmp_buf out_of_memory;
static const catalog *cat;
static const char *doc;

static void setup(void) {
  diag_list d;
  size_t len;
  memory = arena_create(0, &out_of_memory);
  diag_init(&d, memory);
  cat = catalog_load(memory, &d, TEST_ROOT "/catalogs");
  doc = file_read(memory, &d, TEST_ROOT "/docs/methods/sound.md", DOC_BYTES, &len);
  ck_assert(cat && doc);
}

static void teardown(void) {
  arena_free(memory);
}

static void must_hold(const text *line) {
  ck_assert_msg(strstr(doc, line->data), "sound.md lacks: %s", line->data);
}

static void put(text *t, const char *before, double value, int decimals, const char *after) {
  text_put(t, before);
  text_fixed(t, value, decimals);
  text_put(t, after);
}

static void put_octaves(text *t, const char *name, const double db[BANDS]) {
  text_init(t, memory, 400);
  text_putf(t, "%-9s", name);
  for (int band = BAND_125; band < BANDS; band += 3) put(t, " ", db[band], 1, "");
}

START_TEST(parts) {
  const struct acoustics *k = cat->acoustics;
  diag_list d;
  wall w;
  model_wall m;
  text t;
  diag_init(&d, memory);
  ck_assert(line_parse(memory, &d, cat, EXAMPLE_LINE, &w));
  predict_model(cat, k, &w, &m);
  text_init(&t, memory, 400);
  put(&t, "leaf: m ", m.leaf[0].mass_kg_m2, 2, " kg/m2, ");
  put(&t, "fc ", m.leaf[0].critical_hz, 0, " Hz, ");
  put(&t, "eta ", m.leaf[0].loss, 3, ", ");
  put(&t, "B ", m.leaf[0].bending_n_m, 0, " N m");
  must_hold(&t);
  text_init(&t, memory, 400);
  put(&t, "stud: C at 500 Hz ", m.c500_m2_n * 1e6, 3, "e-6 m2/N, ");
  put(&t, "at 125 Hz ", model_compliance(k, m.c500_m2_n, 125) * 1e6, 3, "e-6");
  must_hold(&t);
  text_init(&t, memory, 400);
  put(&t, "low-frequency spring at 125 Hz ", model_low_spring(k, &m, 125) * 1e-3, 0, " kN/m3, ");
  put(&t, "f0 ", model_resonance_hz(k, &m), 0, " Hz");
  must_hold(&t);
}
END_TEST

START_TEST(curves) {
  diag_list d;
  wall w;
  model_wall m;
  prediction p;
  text t;
  double air[BANDS], bridge[BANDS];
  diag_init(&d, memory);
  ck_assert(line_parse(memory, &d, cat, EXAMPLE_LINE, &w));
  predict_model(cat, cat->acoustics, &w, &m);
  predict_wall(cat, &w, &p);
  model_paths(&m, cat->acoustics, air, bridge);
  put_octaves(&t, "air", air);
  must_hold(&t);
  put_octaves(&t, "bridged", bridge);
  must_hold(&t);
  put_octaves(&t, "all", p.tl_db);
  must_hold(&t);
  text_init(&t, memory, 400);
  put(&t, "exact STC ", p.exact[METRIC_STC], 1, ", ");
  text_putf(&t, "printed STC %d, Rw %d", p.ratings.stc, p.ratings.rw);
  must_hold(&t);
}
END_TEST

static Suite *suite(void) {
  Suite *s = suite_create("acoustics_example");
  TCase *t = tcase_create("all");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, parts);
  tcase_add_test(t, curves);
  suite_add_tcase(s, t);
  return s;
}

int main(void) {
  SRunner *r = srunner_create(suite());
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
