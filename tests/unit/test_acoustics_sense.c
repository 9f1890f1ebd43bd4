/* Sense beyond the fitted walls: monotone where physics is, smooth everywhere. Thousands of seeded
 * legal walls of the shipped catalog against their neighbours. The exceptions are those of
 * docs/methods/sound.md, "Sense beyond the data". */
#include <check.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "acoustics/predict.h"
#include "wall/compat.h"
#include "wall/line.h"

/* What a step that physics calls an improvement may cost, points. */
#define LOSS_MOST 0.3
/* What one per cent of any continuous input may change, points; 1.5 is the most between neighbours.
 */
#define JUMP_MOST 1.0
enum { TRIES = 60000, PAIRS = 1200, SMOOTH_WALLS = 400 };

static arena *memory;
static jmp_buf out_of_memory;
static const catalog *cat;
static unsigned state;

static void setup(void) {
  diag_list d;
  memory = arena_create(0, &out_of_memory);
  diag_init(&d, memory);
  cat = catalog_load(memory, &d, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(cat);
  state = 20;
}

static void teardown(void) {
  arena_free(memory);
}

static int roll(size_t below) {
  state = state * 1664525u + 1013904223u;
  return (int)((state >> 8) % (unsigned)below);
}

static double exact(const wall *w) {
  prediction p;
  predict_wall(cat, w, &p);
  return p.exact[METRIC_STC];
}

static bool legal(const wall *w) {
  compat_report r;
  compat_check(cat, w, &r);
  return r.worst != COMPAT_ILLEGAL;
}

static face random_face(void) {
  static const char *const boards[] = {"gyp-13", "typex-13", "gyp-16", "typex-16", "abuse-16"};
  face f = {.count = 1 + roll(2)};
  int board = catalog_layer(cat, boards[roll(5)]);
  for (int i = 0; i < f.count; i++) f.layer[i] = board;
  return f;
}

/* A fill for the row, full: the thickest that goes in. */
static int full_fill(int frame_index) {
  const frame *f = &cat->frames[frame_index];
  int best = CATALOG_NONE;
  for (int i = 0; i < (int)cat->fill_count; i++) {
    if (compat_fill(cat, frame_index, i) == COMPAT_ILLEGAL) continue;
    if (cat->fills[i].thickness_m < 0.9 * f->row_depth_m) continue;
    if (best == CATALOG_NONE || cat->fills[i].thickness_m > cat->fills[best].thickness_m) best = i;
  }
  return best;
}

static wall random_wall(void) {
  wall w = wall_empty();
  w.frame = roll(cat->frame_count);
  const frame *f = &cat->frames[w.frame];
  w.spacing_mm = cat->spacings_mm[roll(cat->spacing_count)];
  w.gap_mm = f->layout == FRAME_DOUBLE ? 25 : 0;
  for (int row = 0; row < f->rows; row++) w.fill[row] = roll(2) ? full_fill(w.frame) : CATALOG_NONE;
  for (int s = 0; s < 2; s++) w.side[s] = random_face();
  if (f->layout == FRAME_SINGLE && roll(2))
    w.mount[SIDE_A] = (wall_mount){catalog_mount(cat, "rc"), cat->mount_spacings_mm[roll(3)], 0};
  return w;
}

/* ---- steps for the better: false when the wall has no such neighbour ---- */

/* Thin rows, and bays so short that the boards are stiff, have their resonance near 125 Hz, and
 * more so with fill, whose air is softer: there the 8 dB rule of STC decides. */
#define THIN_M   0.06
#define CLOSE_MM 400

static bool fill_of(wall *w, bool thin) {
  const frame *f = &cat->frames[w->frame];
  const wall_mount *m = &w->mount[SIDE_A];
  bool close = w->spacing_mm < CLOSE_MM || (m->mount != CATALOG_NONE && m->spacing_mm < CLOSE_MM);
  bool near_125 = f->row_depth_m * f->rows < THIN_M || close;
  if (w->fill[0] != CATALOG_NONE || thin != near_125) return false;
  w->fill[0] = full_fill(w->frame);
  return w->fill[0] != CATALOG_NONE;
}

static bool more_fill(wall *w) {
  return fill_of(w, false);
}
static bool more_fill_thin(wall *w) {
  return fill_of(w, true);
}

static bool wider_studs(wall *w) {
  w->spacing_mm = w->spacing_mm == 305 ? 406 : 610;
  return true;
}

static bool wider_channel(wall *w) {
  wall_mount *m = &w->mount[SIDE_A];
  if (m->mount == CATALOG_NONE || m->spacing_mm == 610) return false;
  m->spacing_mm = m->spacing_mm == 305 ? 406 : 610;
  return true;
}

static bool lighter_gauge(wall *w) {
  const frame *f = &cat->frames[w->frame];
  int best = CATALOG_NONE;
  for (int i = 0; i < (int)cat->frame_count; i++) {
    const frame *g = &cat->frames[i];
    if (g->material != FRAME_STEEL || f->material != FRAME_STEEL || g->layout != f->layout)
      continue;
    if (fabs(g->stud_depth_m - f->stud_depth_m) > 1e-6 || g->mil >= f->mil) continue;
    if (best == CATALOG_NONE || g->mil > cat->frames[best].mil) best = i;
  }
  w->frame = best;
  return best != CATALOG_NONE;
}

static bool another_layer(wall *w) {
  face *f = &w->side[roll(2)];
  f->layer[f->count] = f->layer[f->count - 1];
  f->count++;
  return true;
}

static bool limp_layer(wall *w) {
  face *f = &w->side[roll(2)];
  f->layer[f->count++] = catalog_layer(cat, "mlv-5");
  return true;
}

static bool heavier_board(wall *w) {
  int board = w->side[SIDE_A].layer[0], heavier = CATALOG_NONE;
  if (board == catalog_layer(cat, "gyp-13")) heavier = catalog_layer(cat, "typex-13");
  if (board == catalog_layer(cat, "gyp-16")) heavier = catalog_layer(cat, "typex-16");
  if (board == catalog_layer(cat, "typex-16")) heavier = catalog_layer(cat, "abuse-16");
  for (int i = 0; i < w->side[SIDE_A].count; i++) w->side[SIDE_A].layer[i] = heavier;
  return heavier != CATALOG_NONE;
}

static bool channel(wall *w) {
  if (wall_is_mounted(w) || cat->frames[w->frame].layout != FRAME_SINGLE) return false;
  w->mount[SIDE_A] = (wall_mount){catalog_mount(cat, "rc"), w->spacing_mm, 0};
  return true;
}

static bool clips_for_channel(wall *w) {
  wall_mount *m = &w->mount[SIDE_A];
  if (m->mount == CATALOG_NONE) return false;
  m->mount = catalog_mount(cat, "clip");
  m->clip_spacing_mm = cat->mounts[m->mount].clip_spacing_mm;
  return true;
}

/* Filled walls only: a deeper empty cavity is an exception. */
static bool deeper_studs(wall *w) {
  const frame *f = &cat->frames[w->frame];
  int best = CATALOG_NONE;
  if (w->fill[0] == CATALOG_NONE || f->layout != FRAME_SINGLE) return false;
  for (int i = 0; i < (int)cat->frame_count; i++) {
    const frame *g = &cat->frames[i];
    if (g->material != f->material || g->layout != f->layout || g->mil != f->mil ||
        g->frt != f->frt)
      continue;
    if (g->stud_depth_m <= f->stud_depth_m) continue;
    if (best == CATALOG_NONE || g->stud_depth_m < cat->frames[best].stud_depth_m) best = i;
  }
  if (best == CATALOG_NONE) return false;
  w->frame = best;
  w->fill[0] = full_fill(best);
  return w->fill[0] != CATALOG_NONE;
}

static bool wider_gap(wall *w) {
  if (w->gap_mm == 0) return false;
  w->gap_mm += 25;
  return true;
}

/* `lost`: the share of pairs that may lose more than LOSS_MOST all the same, and by how much at
 * most, with the reason. */
static const struct {
  const char *name;
  bool (*step)(wall *);
  double lost, worst;
  const char *reason;
} steps[] = {
    {"more fill", more_fill, 0.005, 1.0,
     "resonance moves into 125 Hz, light boards on 64 mm studs"},
    {"more fill, studs of 41 mm, studs or channels at 305 mm", more_fill_thin, 0.3, 5.5,
     "resonance moves into 125 Hz"},
    {"wider studs", wider_studs, 0.005, 1.5, "the same, studs of 41 mm"},
    {"wider channel", wider_channel, 0, 0, ""},
    {"lighter gauge", lighter_gauge, 0.02, 1.6,
     "interference in the bridged path between stiff and soft"},
    {"another layer", another_layer, 0.01, 2.5, "resonance moves into 125 Hz"},
    {"limp layer", limp_layer, 0.02, 2.0, "resonance moves into 125 Hz"},
    {"heavier board of the same thickness", heavier_board, 0.005, 0.6,
     "resonance moves into 125 Hz"},
    {"channel", channel, 0.005, 0.8, "on studs of 41 mm"},
    {"clips for channel", clips_for_channel, 0, 0, ""},
    {"deeper filled cavity", deeper_studs, 0.03, 1.6, "a deeper stud is softer: as lighter gauge"},
    {"wider gap between rows", wider_gap, 0, 0, ""},
};

START_TEST(steps_for_the_better) {
  int pairs = 0, lost = 0;
  double worst = 0;
  const char *line = "", *then = "";
  for (int i = 0; i < TRIES && pairs < PAIRS; i++) {
    wall w = random_wall(), better = w;
    if (!steps[_i].step(&better) || !legal(&w) || !legal(&better)) continue;
    double loss = exact(&w) - exact(&better);
    pairs++;
    if (loss > LOSS_MOST + 1e-9) lost++;
    if (loss <= worst) continue;
    worst = loss;
    line = line_print(memory, cat, &w);
    then = line_print(memory, cat, &better);
  }
  ck_assert_msg(pairs >= 100, "%s: %d pairs", steps[_i].name, pairs);
  double most = fmax(steps[_i].worst, LOSS_MOST) + 1e-9;
  ck_assert_msg(lost <= steps[_i].lost * pairs && worst <= most,
                "%s: %d of %d pairs, worst %.1f, from %s to %s", steps[_i].name, lost, pairs, worst,
                line, then);
}
END_TEST

/* ---- smooth ---- */

static double stc_of(const model_wall *m) {
  double tl[BANDS];
  model_tl(m, cat->acoustics, tl);
  return rating_exact(tl, METRIC_STC);
}

static void scale(model_wall *m, int what, double by) {
  switch (what) {
  case 0:
    m->leaf[0].mass_kg_m2 *= by;
    break;
  case 1:
    m->leaf[0].critical_hz *= by;
    break;
  case 2:
    m->leaf[0].bending_n_m *= by;
    break;
  case 3:
    m->leaf[0].loss *= by;
    break;
  case 4:
    m->cavity[0].gap[0].depth_m *= by;
    break;
  case 5:
    m->c500_m2_n *= by;
    break;
  case 6:
    m->line_m *= by;
    break;
  default:
    m->support_m[0] *= by;
    break;
  }
}

START_TEST(one_per_cent_changes_little) {
  for (int i = 0; i < SMOOTH_WALLS; i++) {
    wall w = random_wall();
    model_wall m, n;
    if (!legal(&w)) continue;
    predict_model(cat, cat->acoustics, &w, &m);
    n = m;
    scale(&n, _i, 1.01);
    ck_assert_msg(fabs(stc_of(&n) - stc_of(&m)) < JUMP_MOST, "input %d: %s", _i,
                  line_print(memory, cat, &w));
  }
}
END_TEST

static Suite *suite(void) {
  Suite *s = suite_create("acoustics_sense");
  TCase *t = tcase_create("all");
  tcase_set_timeout(t, 300);
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, steps_for_the_better, 0, (int)(sizeof steps / sizeof steps[0]));
  tcase_add_loop_test(t, one_per_cent_changes_little, 0, 8);
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
