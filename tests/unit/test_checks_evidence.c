/* Published ratings: which walls a row stands for, and the nearest rows in words.
 * Published source of every rating: National Building Code of Canada 2020, Table 9.10.3.1.-A. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "checks/evidence.h"
#include "code_table.h"
#include "input/rows.h"
#include "shop.h"
#include "wall/tested.h"

static table stc_table;

static const wall_row *matched(const char *line) {
  wall w = parse(line);
  const wall_row *row = evidence_match(shop, &w);
  wall m = wall_mirrored(shop, &w);
  const wall_row *mirrored = evidence_match(shop, &m);
  ck_assert_msg((row == NULL) == (mirrored == NULL), "the mirror image differs: %s", line);
  if (row) ck_assert_msg(row->stc == mirrored->stc, "the mirror image differs: %s", line);
  return row;
}

static bool notes(int row, const char *words) {
  return strstr(table_get(&stc_table, row, "note"), words) != NULL;
}

/* Every row is found, with any fibre, at every spacing and gauge that its note names. */
START_TEST(test_table_row) {
  static const char *const fibres[] = {"glass", "stone"};
  static const int mils[] = {33, 43, 54};
  int both = notes(_i, "; spacing: 400 or 600") ||
             strncmp(table_get(&stc_table, _i, "note"), "spacing: 400 or 600", 19) == 0;
  int both_channels = notes(_i, "RC spacing 400 or 600");
  int light = strcmp(table_get(&stc_table, _i, "steel_thickness_mm"), "0.46") == 0;
  int gauges = light || strstr(table_get(&stc_table, _i, "family"), "wood") ? 1 : 3;
  if (strstr(table_get(&stc_table, _i, "family"), "steel-double"))
    gauges = 1; /* the catalog has 33 and 54 mil; 33 is tried */
  for (int f = 0; f < 2; f++)
    for (int s = 0; s < 1 + both; s++)
      for (int m = 0; m < 1 + both_channels; m++)
        for (int g = 0; g < gauges; g++) {
          char line[256];
          table_line(&stc_table, _i, fibres[f], 0, light ? 18 : mils[g], both ? (s ? 610 : 406) : 0,
                     both_channels ? (m ? 610 : 406) : 0, line, sizeof line);
          const wall_row *row = matched(line);
          ck_assert_msg(row != NULL, "%s: no row for %s", table_get(&stc_table, _i, "id"), line);
          ck_assert_str_eq(row->id, table_get(&stc_table, _i, "id"));
          ck_assert_int_eq(row->stc, table_number(&stc_table, _i, "rating"));
          ck_assert(row->stc_sd > 0.99 && row->stc_sd < 1.01); /* a code table: 1.0 */
        }
}
END_TEST

typedef struct match_case {
  const char *name, *line, *id; /* id NULL: no row */
} match_case;

static const match_case cases[] = {
    {"2+1 is 1+2 without a mount", "typex-16 | steel-92-18@610, glass-89 | 2*typex-16", "NBC-S5a"},
    {"with a mount it is not", "typex-16 | rc@406 | wood-89@406, glass-89 | 2*typex-16", NULL},
    {"the mount on side B is the same wall turned",
     "typex-16 | wood-89@406, glass-89 | rc@610 | 2*typex-16", "NBC-W4a"},
    {"board of Type C", "typec-16 | wood-89@610, glass-89 | typex-16", "NBC-W1a"},
    {"cellulose is a fibre too", "typex-16 | wood-89@610, cell-89 | typex-16", "NBC-W1a"},
    {"65 mm in 63.5 mm", "typex-16 | steel-64-18@406, stone-65 | typex-16", "NBC-S1b"},
    /* 76 mm stone wool in a 92 mm stud: 83 %, under the 90 % of the table's notes. */
    {"part-filled cavity", "2*typex-16 | steel-92-18@610, stone-76 | typex-16", NULL},
    {"spacing that the row does not name", "typex-16 | steel-64-18@610, glass-65 | typex-16", NULL},
    {"12 in spacing", "typex-16 | wood-89@305, glass-89 | typex-16", NULL},
    {"20 gauge drywall stud", "2*typex-16 | steel-92-30@610, glass-89 | typex-16", NULL},
    {"lighter board of today", "2*gyp-13-light | wood-89@406, glass-89 | 2*gyp-13-light", NULL},
    {"heavy board", "abuse-16 | wood-89@406, glass-89 | typex-16", NULL},
    {"damped board", "damp-16 | wood-89@406, glass-89 | typex-16", NULL},
    {"membrane", "typex-16 + mlv-5 | wood-89@406, glass-89 | typex-16", NULL},
    {"clips", "2*typex-16 | clip@610 | wood-89@406, glass-89 | typex-16", NULL},
    {"board behind the channel",
     "2*typex-16 | rc@610 | on osb-11 | wood-89@406, glass-89 | typex-16", NULL},
    {"wider gap", "typex-16 | wood-89-double@406~50, glass-89 | typex-16", NULL},
    {"one row filled, either one", "typex-16 | wood-89-double@406, -, glass-89 | typex-16",
     "NBC-W13c"},
    {"board on an inner face", "typex-16 | wood-89-double@406, glass-89, inner-a osb-11 | typex-16",
     NULL},
    {"deeper stud", "typex-16 | wood-140@406, glass-140 | typex-16", NULL},
    {"full common plate of staggered studs",
     "typex-16 | wood-89-stag-140@406, glass-140 | typex-16", "NBC-W7a"},
    {"wood shear panel: S13a",
     "2*typex-13 | rc@406 | steel-92-43@610, glass-89 | typex-13 + osb-13", "NBC-S13a"},
};

START_TEST(test_match) {
  const match_case *k = &cases[_i];
  const wall_row *row = matched(k->line);
  if (k->id == NULL)
    ck_assert_msg(row == NULL, "%s: %s is taken for %s", k->name, k->line, row ? row->id : "");
  else
    ck_assert_msg(row != NULL && strcmp(row->id, k->id) == 0, "%s: %s is %s, expected %s", k->name,
                  k->line, row ? row->id : "no row", k->id);
}
END_TEST

typedef struct near_case {
  const char *line;    /* the wall judged */
  const char *id;      /* nearest row, NULL = any */
  const char *differs; /* joined with "; " */
} near_case;

static const near_case near_cases[] = {
    {"2*typex-16 | steel-92-18@610, stone-76 | typex-16", "NBC-S5a", "full for part-filled cavity"},
    {"typex-16 | steel-64-18@610, glass-65 | typex-16", "NBC-S1b", "studs at 406 for 610 mm"},
    {"2*gyp-13-light | wood-89@406, glass-89 | 2*gyp-13", "NBC-W2c",
     "gyp-13 for gyp-13-light on side A; gyp-13 for gyp-13-light on side A"},
    {"2*typex-16 | clip@406 | wood-89@406, glass-89 | typex-16", "NBC-W4a", "channel for clips"},
    {"typex-16 | wood-89-double@406~51, glass-89 | typex-16", "NBC-W13c", "gap of 25 for 51 mm"},
    {"2*typex-16 | rc@610 | on gyp-13 | wood-89@406, glass-89 | typex-16", "NBC-W4a",
     "no gyp-13 behind the mount on side A"},
    {"typex-16 | steel-92-18@305 | typex-16", "NBC-S4d", "studs at 406 for 305 mm"},
    {"typex-16 | wood-89@406, glass-89 | rc@406 | 3*typex-16", "NBC-W4a",
     "one layer fewer on side B"},
    {"typex-16 | steel-102-18@406 | typex-16", "NBC-S4d", "92 for 102 mm studs"},
    {"2*typex-16 | steel-92-27@406, glass-89 | typex-16", "NBC-S5b", "18 for 27 mil steel"},
};

START_TEST(test_nearest) {
  const near_case *k = &near_cases[_i];
  wall w = parse(k->line);
  evidence e;
  evidence_find(memory, shop, &w, &e);
  ck_assert_int_eq(e.nearest_count, EVIDENCE_NEAREST);
  ck_assert_msg(strcmp(e.nearest[0].row->id, k->id) == 0, "%s: nearest is %s, expected %s", k->line,
                e.nearest[0].row->id, k->id);
  text t;
  text_init(&t, memory, 1000);
  for (int i = 0; i < e.nearest[0].differ_count; i++)
    text_putf(&t, "%s%s", i ? "; " : "", e.nearest[0].differs[i]);
  ck_assert_str_eq(t.data, k->differs);
  for (int i = 1; i < e.nearest_count; i++)
    ck_assert(e.nearest[i].distance >= e.nearest[i - 1].distance);
}
END_TEST

/* The line of each published wall is a wall of the catalog that the row stands for. */
START_TEST(test_line_is_the_row) {
  char line[256];
  int light = strcmp(table_get(&stc_table, _i, "steel_thickness_mm"), "0.46") == 0;
  table_line(&stc_table, _i, "stone", 0, light ? 18 : 54, 305, 0, line, sizeof line);
  wall w = parse(line);
  evidence e;
  evidence_find(memory, shop, &w, &e);
  ck_assert_ptr_null(e.match); /* no row names 12 in */
  for (int i = 0; i < e.nearest_count; i++) {
    ck_assert_ptr_nonnull(e.nearest[i].line);
    const wall_row *row = matched(e.nearest[i].line);
    ck_assert_msg(row != NULL, "%s: the line of %s is no row: %s", line, e.nearest[i].row->id,
                  e.nearest[i].line);
    ck_assert_int_eq(row->stc, e.nearest[i].row->stc);
    wall published = parse(e.nearest[i].line);
    evidence same;
    evidence_find(memory, shop, &published, &same);
    ck_assert_ptr_eq(same.match, row);
  }
}
END_TEST

START_TEST(test_cautions) {
  evidence e;
  wall w = parse("2*gyp-13 | wood-89@406, glass-89 | 2*gyp-13");
  evidence_find(memory, shop, &w, &e);
  ck_assert_str_eq(e.match->id, "NBC-W2c");
  ck_assert_int_eq(e.caution_count, 1);
  ck_assert_ptr_nonnull(strstr(e.caution[0], "lighter"));
  w = parse("2*typex-16 | steel-92-18@610, glass-89 | typex-16");
  evidence_find(memory, shop, &w, &e);
  ck_assert_int_eq(e.caution_count, 1);
  ck_assert_ptr_nonnull(strstr(e.caution[0], "15 mil"));
  w = parse("typex-16 | wood-89@406, glass-89 | typex-16");
  evidence_find(memory, shop, &w, &e);
  ck_assert_int_eq(e.caution_count, 0);
  for (int i = 0; i < e.nearest_count; i++) ck_assert_ptr_ne(e.nearest[i].row, e.match);
}
END_TEST

/* ---- test reports ---- */

/* The catalog with the reports of a file among its rows. */
static catalog *with_reports(const char *json) {
  tested_wall *tested;
  size_t count;
  const json_value *root = json_parse(memory, &faults, "report.json", json, strlen(json));
  ck_assert_ptr_nonnull(root);
  ck_assert(tested_read(memory, &faults, shop, root, &tested, &count));
  catalog *c = arena_alloc(memory, sizeof *c);
  *c = *shop;
  wall_row *all = arena_array(memory, shop->published_count + count, sizeof *all);
  memcpy(all, shop->published, shop->published_count * sizeof *all);
  for (size_t i = 0; i < count; i++) all[shop->published_count + i] = tested[i].row;
  c->published = all;
  c->published_count += count;
  ck_assert(rows_check_ids(memory, &faults, c));
  return c;
}

#define TESTED(number, wall, stc)                                                                  \
  "{\"number\":\"" number "\",\"laboratory\":\"invented\",\"date\":\"2031\",\"wall\":\"" wall      \
  "\",\"stc\":" stc "}"
static const char reports[] =
    "{\"septum\":\"report/1\",\"records\":[" TESTED(
        "T-1", "2*typex-16 | clip@610 | wood-89@406, glass-89 | typex-16", "58") ","
    TESTED("T-2", "typex-16 | wood-89@406, glass-89 | typex-16", "35") ","
    TESTED("T-3", "typex-16 | wood-89@406, glass-89 | typex-16", "34") ","
    TESTED("T-4", "typex-16 | rc@610 | on osb-11 | wood-89@406, glass-89 | typex-16", "44") "]}";

/* Order of evidence: a test of the very wall, then the code's table (practice of submittals: common
 * practice, no source). NBC-W1a gives 36 for the second wall, any fibre, 400 or 600. */
static const struct tested_case {
  const char *line, *id;
  int stc;
} tested_cases[] = {
    {"2*typex-16 | clip@610 | wood-89@406, glass-89 | typex-16", "T-1", 58},
    {"typex-16 | wood-89@406, glass-89 | clip@610 | 2*typex-16", "T-1", 58},
    {"2*typex-16 | clip@406 | wood-89@406, glass-89 | typex-16", NULL, 0},
    {"2*typex-16 | clip@610 | wood-89@610, glass-89 | typex-16", NULL, 0},
    {"2*typex-16 | clip@610 | wood-89@406, stone-89 | typex-16", NULL, 0},
    {"typex-16 | wood-89@406, glass-89 | typex-16", "T-3", 34},
    {"typex-16 | wood-89@406, stone-89 | typex-16", "NBC-W1a", 36},
    {"typex-16 | rc@610 | on osb-11 | wood-89@406, glass-89 | typex-16", "T-4", 44},
    {"typex-16 | rc@610 | on osb-13 | wood-89@406, glass-89 | typex-16", NULL, 0},
};

START_TEST(test_reports) {
  const struct tested_case *k = &tested_cases[_i];
  const catalog *c = with_reports(reports);
  wall w = parse(k->line);
  const wall_row *row = evidence_match(c, &w);
  ck_assert_msg((row == NULL) == (k->id == NULL), "%s: %s", k->line, row ? row->id : "no match");
  if (!row) return;
  ck_assert_str_eq(row->id, k->id);
  ck_assert_int_eq(row->stc, k->stc);
}
END_TEST

/* A tested wall is a neighbour as a row of the table is, and says how it differs. */
START_TEST(near_a_report) {
  const catalog *c = with_reports(reports);
  wall w = parse("2*typex-16 | clip@406 | wood-89@406, glass-89 | typex-16");
  evidence e;
  evidence_find(memory, c, &w, &e);
  ck_assert_str_eq(e.nearest[0].row->id, "T-1");
  ck_assert_str_eq(e.nearest[0].line, "2*typex-16 | clip@610 | wood-89@406, glass-89 | typex-16");
  ck_assert_int_eq(e.nearest[0].differ_count, 1);
  ck_assert_str_eq(e.nearest[0].differs[0], "clips at 610 for clips at 406 mm");
}
END_TEST

int main(void) {
  int rows = table_read(&stc_table, TEST_ROOT "/tests/data/nbc2020_stc.csv");
  int last = rows > 0 ? rows : 1;
  Suite *s = suite_create("evidence");
  TCase *t = tcase_create("evidence");
  tcase_set_timeout(t, 60);
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, test_table_row, 0, last);
  tcase_add_loop_test(t, test_match, 0, (int)(sizeof cases / sizeof cases[0]));
  tcase_add_loop_test(t, test_nearest, 0, (int)(sizeof near_cases / sizeof near_cases[0]));
  tcase_add_loop_test(t, test_line_is_the_row, 0, last);
  tcase_add_test(t, test_cautions);
  tcase_add_loop_test(t, test_reports, 0, (int)(sizeof tested_cases / sizeof tested_cases[0]));
  tcase_add_test(t, near_a_report);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad || rows != 102 ? EXIT_FAILURE : EXIT_SUCCESS;
}
