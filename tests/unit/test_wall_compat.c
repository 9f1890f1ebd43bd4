/* What may meet: a row a rule, walls that nothing is said about, and the pieces against the whole.
 */
#include "wall/compat.h"

#include <check.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "base/file.h"
#include "wall/line.h"
#include "share.h"
#include "shop.h"

static bool has(const compat_report *r, const char *rule, compat_level level) {
  for (int i = 0; i < r->count; i++) {
    if (strcmp(r->finding[i].rule, rule) == 0) return r->finding[i].level == level;
  }
  return false;
}

/* What a line cannot say is changed in the wall after reading. */
typedef enum change {
  AS_READ,
  SECOND_FILL,
  SPACING_500,
  ROWS_500,
  CLIPS_2000,
  SHEATH,
  INNER,
  GAP,
  NO_GAP
} change;

static void apply(wall *w, change what) {
  int osb = catalog_layer(shop, "osb-11");
  switch (what) {
  case SECOND_FILL:
    w->fill[1] = w->fill[0];
    break;
  case SPACING_500:
    w->spacing_mm = 500;
    break;
  case ROWS_500:
    w->mount[SIDE_A].spacing_mm = 500;
    break;
  case CLIPS_2000:
    w->mount[SIDE_A].clip_spacing_mm = 2000;
    break;
  case SHEATH:
    w->sheath[SIDE_A] = (face){1, {osb}};
    break;
  case INNER:
    w->inner[SIDE_A] = (face){1, {osb}};
    break;
  case GAP:
    w->gap_mm = 25;
    break;
  case NO_GAP:
    w->gap_mm = 0;
    break;
  default:
    break;
  }
}

static const struct rule_row {
  const char *rule;
  compat_level level;
  const char *line;
  change change;
} rule_rows[] = {
    {"no-board", COMPAT_ILLEGAL, "mlv-5 | wood-89@406 | typex-16", AS_READ},
    {"damping-between-boards", COMPAT_ILLEGAL, "typex-16 + damp-layer | wood-89@406 | typex-16",
     AS_READ},
    {"damping-between-boards", COMPAT_ILLEGAL, "damp-layer + typex-16 | wood-89@406 | typex-16",
     AS_READ},
    {"damping-between-boards", COMPAT_ILLEGAL,
     "typex-16 + damp-layer + mlv-5 + typex-16 | wood-89@406 | typex-16", AS_READ},
    {"batt-fit", COMPAT_ILLEGAL, "typex-16 | wood-64@406, glass-89 | typex-16", AS_READ},
    {"batt-fit", COMPAT_ILLEGAL, "typex-16 | wood-89-double@406, glass-89, glass-140 | typex-16",
     AS_READ},
    {"batt-squeezed", COMPAT_ILLEGAL, "typex-16 | steel-64-18@406, stone-76 | typex-16", AS_READ},
    {"batt-squeezed", COMPAT_ILLEGAL, "typex-16 | steel-41-18@406, stone-50 | typex-16", AS_READ},
    {"fill-rows", COMPAT_ILLEGAL, "typex-16 | wood-89@406, glass-89 | typex-16", SECOND_FILL},
    {"stud-spacing", COMPAT_ILLEGAL, "typex-16 | wood-89@406 | typex-16", SPACING_500},
    {"mount-spacing", COMPAT_ILLEGAL, "typex-16 | rc@610 | wood-89@406 | typex-16", ROWS_500},
    {"clip-spacing", COMPAT_ILLEGAL, "typex-16 | clip@610 | wood-89@406 | typex-16", CLIPS_2000},
    {"mount-both-sides", COMPAT_ILLEGAL, "typex-16 | rc@610 | wood-89@406 | rc@610 | typex-16",
     AS_READ},
    {"sheath-without-mount", COMPAT_ILLEGAL, "typex-16 | wood-89@406 | typex-16", SHEATH},
    {"inner-single", COMPAT_ILLEGAL, "typex-16 | wood-89@406 | typex-16", INNER},
    {"inner-full", COMPAT_ILLEGAL,
     "typex-16 | wood-89-double@406~20, inner-a osb-11, inner-b osb-11 | typex-16", AS_READ},
    {"gap-single", COMPAT_ILLEGAL, "typex-16 | wood-89-stag-140@406 | typex-16", GAP},
    {"gap-missing", COMPAT_ILLEGAL, "typex-16 | wood-89-double@406 | typex-16", NO_GAP},
    {"face-board", COMPAT_UNUSUAL, "fibreboard-13 + typex-16 | wood-89@406 | typex-16", AS_READ},
    {"face-board", COMPAT_UNUSUAL, "mlv-5 + typex-16 | wood-89@406 | typex-16", AS_READ},
    {"face-board", COMPAT_UNUSUAL, "shaft-25 | wood-89@406 | shaft-25", AS_READ},
    {"wood-face", COMPAT_UNUSUAL, "osb-11 | wood-89@406 | osb-11", AS_READ},
    {"fibreboard-cover", COMPAT_UNUSUAL, "osb-11 + fibreboard-13 | wood-89@406 | typex-16",
     AS_READ},
    {"cement-behind", COMPAT_UNUSUAL, "typex-16 + cement-13 | wood-89@406 | typex-16", AS_READ},
    {"limp-membrane", COMPAT_UNUSUAL, "typex-16 + mlv-5 | wood-89@406 | typex-16", AS_READ},
    {"membranes", COMPAT_UNUSUAL, "typex-16 + mlv-5 + typex-16 + mlv-2 | wood-89@406 | typex-16",
     AS_READ},
    {"damping-mixed", COMPAT_UNUSUAL, "typex-16 + damp-layer + osb-11 | wood-89@406 | typex-16",
     AS_READ},
    {"layers", COMPAT_UNUSUAL, "3*typex-16 | wood-89@406 | 2*typex-16", AS_READ},
    {"mixed-leaf", COMPAT_UNUSUAL, "typec-16 + typex-16 | wood-89@406 | typec-16", AS_READ},
    {"special-board", COMPAT_UNUSUAL, "typec-13 | wood-89@406 | typec-13", AS_READ},
    {"board-spacing", COMPAT_UNUSUAL, "2*gyp-10 | wood-89@610 | 2*gyp-10", AS_READ},
    {"board-spacing", COMPAT_UNUSUAL, "2*gyp-10 | rc@610 | wood-89@406 | 2*gyp-10", AS_READ},
    {"board-spacing", COMPAT_UNUSUAL, "cement-13 | wood-89@610 | typex-16", AS_READ},
    {"board-single", COMPAT_UNUSUAL, "gyp-6 | wood-89@406 | gyp-6", AS_READ},
    {"steel-gauge", COMPAT_UNUSUAL, "cement-13 | steel-92-18@406 | typex-16", AS_READ},
    {"channel-load", COMPAT_UNUSUAL, "3*typex-16 | rc@406 | wood-89@406 | 2*typex-16", AS_READ},
    {"channel-load", COMPAT_UNUSUAL, "2*impact-16 | rc@406 | wood-89@406 | impact-16", AS_READ},
    {"clip-load", COMPAT_UNUSUAL, "3*typex-16 | clip@610 | wood-89@406 | 2*typex-16", AS_READ},
    {"special-frame", COMPAT_UNUSUAL, "typex-16 | steel-92-27@406 | typex-16", AS_READ},
    {"special-fill", COMPAT_UNUSUAL, "typex-16 | wood-89@406, stone-89-dense | typex-16", AS_READ},
    {"batt-loose", COMPAT_UNUSUAL, "typex-16 | steel-152-18@406, stone-65 | typex-16", AS_READ},
    {"batt-steel-width", COMPAT_UNUSUAL, "typex-16 | wood-89@406, glass-65 | typex-16", AS_READ},
    {"batt-pressed", COMPAT_UNUSUAL, "a thinner stud, see pressed_batt", AS_READ},
    {"cellulose-steel", COMPAT_UNUSUAL, "typex-16 | steel-92-18@406, cell-89 | typex-16", AS_READ},
    {"rows-differ", COMPAT_UNUSUAL, "typex-16 | wood-89-double@406, glass-89, stone-89 | typex-16",
     AS_READ},
    {"mount-light-steel", COMPAT_UNUSUAL, "typex-16 | rc@610 | steel-92-18@610 | typex-16",
     AS_READ},
    {"mount-double", COMPAT_UNUSUAL, "typex-16 | rc@610 | wood-89-double@406 | typex-16", AS_READ},
    {"mount-staggered", COMPAT_FINE, "typex-16 | rc@610 | wood-89-stag-140@406 | typex-16",
     AS_READ},
    {"mount-rows", COMPAT_UNUSUAL, "typex-16 | rc@305 | wood-89@406 | typex-16", AS_READ},
    {"trapped-layer", COMPAT_UNUSUAL, "typex-16 | rc@610 | on osb-11 | wood-89@406 | typex-16",
     AS_READ},
    {"inner-one", COMPAT_UNUSUAL, "typex-16 | wood-89-double@406, inner-a osb-11 | typex-16",
     AS_READ},
    {"inner-both", COMPAT_UNUSUAL,
     "typex-16 | wood-89-double@406, inner-a osb-11, inner-b osb-11 | typex-16", AS_READ},
    {"gap-narrow", COMPAT_UNUSUAL, "typex-16 | wood-89-double@406~10 | typex-16", AS_READ},
    {"layer-balance", COMPAT_UNUSUAL, "3*typex-16 | wood-89@406 | typex-16", AS_READ},
    {"board-kinds", COMPAT_UNUSUAL, "typex-16 + osb-11 | wood-89@406 | typex-16 + ply-13", AS_READ},
    {"faces-differ", COMPAT_UNUSUAL, "typex-16 | wood-89@406 | typec-16", AS_READ},
    {"board-thickness", COMPAT_UNUSUAL, "gyp-13 | wood-89@406 | typex-16", AS_READ},
};

#define ROWS(table) (int)(sizeof(table) / sizeof(table)[0])

/* No stud and glass batt of the shipped catalogs meet between 1.10 and 1.25 x the cavity: a catalog
 * with a thinner stud. */
static wall pressed_batt(void) {
  catalog *other = arena_alloc(memory, sizeof *other);
  *other = *shop;
  other->frames = arena_array(memory, shop->frame_count, sizeof *other->frames);
  memcpy(other->frames, shop->frames, shop->frame_count * sizeof *other->frames);
  shop = other;
  wall w = parse("typex-16 | wood-89@406, glass-89 | typex-16");
  other->frames[w.frame].row_depth_m = 0.076; /* 89 / 76 = 1.17 */
  return w;
}

START_TEST(a_row_a_rule) {
  const struct rule_row *row = &rule_rows[_i];
  compat_report r;
  wall w = strcmp(row->rule, "batt-pressed") == 0 ? pressed_batt() : parse(row->line);
  apply(&w, row->change);
  compat_check(shop, &w, &r);
  ck_assert_msg(has(&r, row->rule, row->level), "%s: %s is found", row->line, row->rule);
  ck_assert_int_ge(r.worst, row->level);
  /* Illegal is only what cannot be built: everything else is a verdict or caution in a normal
   * answer. */
  if (row->level != COMPAT_ILLEGAL) ck_assert_int_ne(r.worst, COMPAT_ILLEGAL);
  for (int i = 0; i < r.count; i++) {
    ck_assert(r.finding[i].reason && strlen(r.finding[i].reason) > 20);
    ck_assert(r.finding[i].source && strlen(r.finding[i].source) > 5);
  }
}
END_TEST

START_TEST(every_rule_has_a_row_and_stands_in_the_page) {
  size_t count = 0, len = 0;
  const compat_finding *rules = compat_rules(&count);
  const char *page = file_read(memory, &faults, TEST_ROOT "/docs/formats/wall.md", 1 << 20, &len);
  ck_assert_ptr_nonnull(page);
  for (size_t k = 0; k < count; k++) {
    bool found = false;
    for (int i = 0; i < ROWS(rule_rows); i++)
      found = found || strcmp(rule_rows[i].rule, rules[k].rule) == 0;
    ck_assert_msg(found, "%s has a row", rules[k].rule);
    ck_assert_msg(strstr(page, text_format(memory, "`%s`", rules[k].rule)) != NULL,
                  "%s stands in wall.md", rules[k].rule);
  }
}
END_TEST

/* Walls that practice builds every day: nothing to say about them. */
static const char *const plain_walls[] = {
    "typex-16 | steel-92-18@610, glass-89 | typex-16",
    "2*typex-16 | steel-92-18@610, glass-89 | typex-16",
    "2*typex-16 | steel-92-18@406, stone-76 | 2*typex-16",
    "typex-16 | wood-89@406, glass-89 | typex-16",
    "2*typex-16 | rc@610 | wood-89@406, stone-89 | typex-16",
    "2*typex-16 | clip@610 | wood-89@406, stone-89 | 2*typex-16",
    "2*typex-16 | wood-89-stag-140@406, glass-140 | typex-16",
    "2*typex-16 | wood-89-double@406, glass-89, glass-89 | 2*typex-16",
    "typex-16 | wood-89-double@406, glass-89 | typex-16",
    "typex-16 + osb-11 | wood-89@406, glass-89 | typex-16",
    "cement-13 + typex-16 | wood-89@406, glass-89 | typex-16",
    "moist-16 | steel-92-33@406, glass-89 | typex-16",
    "abuse-16 + typex-16 | steel-92-33@406, glass-89 | typex-16",
    "typex-16 + damp-layer + typex-16 | steel-92-18@610, glass-89 | typex-16",
    "typex-16 + fibreboard-13 | wood-89@406, glass-89 | typex-16",
    "gyp-13 | wood-64@610 | gyp-13",
    "2*typex-16 | rc@610 | steel-92-54@406, stone-89 | 2*typex-16",
    "typex-16 | steel-152-18@610, glass-150 | typex-16",
    "typex-16 | steel-152-33@610, glass-89 | typex-16",
};

START_TEST(nothing_to_say) {
  compat_report r;
  wall w = parse(plain_walls[_i]);
  compat_check(shop, &w, &r);
  ck_assert_msg(r.count == 0, "%s: %s", plain_walls[_i], r.count ? r.finding[0].rule : "");
}
END_TEST

static unsigned long long seed;

static int draw(int n) {
  seed = seed * 6364136223846793005ULL + 1442695040888963407ULL;
  return (int)((seed >> 33) % (unsigned long long)n);
}

static face draw_face(void) {
  face f = {.count = 1 + draw(3)};
  for (int i = 0; i < f.count; i++) f.layer[i] = draw((int)shop->layer_count);
  return f;
}

static wall draw_wall(void) {
  wall w = wall_empty();
  w.frame = draw((int)shop->frame_count);
  const frame *f = &shop->frames[w.frame];
  w.spacing_mm = shop->spacings_mm[draw((int)shop->spacing_count)];
  w.gap_mm = f->layout == FRAME_DOUBLE ? 25 : 0;
  for (int r = 0; r < f->rows; r++) w.fill[r] = draw((int)shop->fill_count + 1) - 1;
  for (int s = 0; s < 2; s++) {
    w.side[s] = draw_face();
    if (draw(3) > 0) continue;
    w.mount[s].mount = draw((int)shop->mount_count);
    w.mount[s].spacing_mm = shop->mount_spacings_mm[draw((int)shop->mount_spacing_count)];
    w.mount[s].clip_spacing_mm = shop->mounts[w.mount[s].mount].clip_spacing_mm;
  }
  return w;
}

static compat_level worse(compat_level a, compat_level b) {
  return a > b ? a : b;
}

/* The pieces that the enumeration uses say together what the whole says. */
START_TEST(pieces_make_the_whole) {
  enum { WALLS = 20000 };
  seed = 20240229;
  int levels[3] = {0, 0, 0};
  for (int i = 0; i < share_of(WALLS); i++) {
    wall w = draw_wall();
    compat_report r;
    compat_check(shop, &w, &r);
    compat_level pieces = worse(compat_core(shop, &w), compat_pair(shop, &w.side[0], &w.side[1]));
    for (int s = 0; s < 2; s++) {
      pieces = worse(pieces, compat_face(shop, &w.side[s]));
      pieces = worse(pieces, compat_face_on_core(shop, &w, s, &w.side[s]));
    }
    ck_assert_msg(pieces == r.worst, "%s", line_print(memory, shop, &w));
    wall m = wall_mirrored(shop, &w);
    compat_report mirrored;
    compat_check(shop, &m, &mirrored);
    ck_assert_msg(mirrored.worst == r.worst && mirrored.count == r.count, "mirrored: %s",
                  line_print(memory, shop, &w));
    levels[r.worst]++;
  }
  ck_assert_int_gt(levels[COMPAT_FINE], 0);
  ck_assert_int_gt(levels[COMPAT_UNUSUAL], 0);
  ck_assert_int_gt(levels[COMPAT_ILLEGAL], 0);
}
END_TEST

/* A batt fits when it is no more than a tenth thicker than the cavity (common practice, no source):
 * every pair by arithmetic. */
START_TEST(fits_of_batts) {
  static const double rounding = 1e-4; /* sizes are given to 0.1 mm */
  for (size_t f = 0; f < shop->frame_count; f++) {
    for (size_t b = 0; b < shop->fill_count; b++) {
      double ratio = shop->fills[b].thickness_m / shop->frames[f].row_depth_m;
      bool illegal = compat_fill(shop, (int)f, (int)b) == COMPAT_ILLEGAL;
      double limit = shop->fills[b].material == FILL_GLASS ? 1.25 : 1.10;
      if (ratio > limit + rounding / 0.04)
        ck_assert_msg(illegal, "%s in %s", shop->fills[b].id, shop->frames[f].id);
      if (ratio < limit - rounding / 0.04)
        ck_assert_msg(!illegal, "%s in %s", shop->fills[b].id, shop->frames[f].id);
    }
  }
}
END_TEST

int main(void) {
  Suite *suite = suite_create("wall/compat");
  TCase *t = tcase_create("rules");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_set_timeout(t, 60);
  tcase_add_loop_test(t, a_row_a_rule, 0, ROWS(rule_rows));
  tcase_add_test(t, every_rule_has_a_row_and_stands_in_the_page);
  tcase_add_loop_test(t, nothing_to_say, 0, ROWS(plain_walls));
  tcase_add_test(t, pieces_make_the_whole);
  tcase_add_test(t, fits_of_batts);
  suite_add_tcase(suite, t);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
