/* Fire: code-table rows, the component-additive rule, what a row still holds for and what voids it.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "checks/fire.h"
#include "code_table.h"
#include "input/rows.h"
#include "shop.h"

static table fire_table;

static brief brief_for(fire_code code, bool bearing) {
  brief b;
  memset(&b, 0, sizeof b);
  b.code = code;
  b.loadbearing = bearing;
  return b;
}

static fire_verdict judged(fire_code code, bool bearing, const char *line) {
  brief b = brief_for(code, bearing);
  wall w = parse(line);
  fire_verdict with_words = fire_judge(memory, shop, &b, &w);
  ck_assert_msg(fire_judge(NULL, shop, &b, &w).minutes == with_words.minutes,
                "words change the minutes of %s", line);
  wall m = wall_mirrored(shop, &w);
  ck_assert_msg(fire_judge(NULL, shop, &b, &m).minutes == with_words.minutes,
                "the mirror image differs: %s", line);
  return with_words;
}

enum { BEARING = 1, FREE = 0 };

typedef struct fire_case {
  const char *name;
  fire_code code;
  int bearing;
  const char *line;
  int minutes; /* 0 = not shown */
} fire_case;

static const fire_case cases[] = {
    /* IBC 722.6.2, component-additive: membrane times of Table 722.6.2(1) (International Building
     * Code 2018; 1994 UBC alike), frame 20 and dense fill 15 min from memory: Tables 722.6.2(2) and
     * (5). */
    {"additive 40 + 20", CODE_IBC, BEARING, "typex-16 | wood-89@406 | typex-16", 60},
    {"additive 25 + 20 + 15 with dense wool", CODE_IBC, BEARING,
     "typex-13 | wood-89@406, stone-89-dense | typex-13", 60},
    {"additive 25 + 20 + 15 with dense cellulose", CODE_IBC, FREE,
     "typex-13 | wood-89@406, cell-89 | typex-13", 60},
    {"additive 25 + 20", CODE_IBC, BEARING, "typex-13 | wood-89@406 | typex-13", 45},
    {"additive: ordinary wool earns nothing", CODE_IBC, BEARING,
     "typex-13 | wood-89@406, stone-89 | typex-13", 45},
    {"additive: ordinary glass earns nothing", CODE_IBC, BEARING,
     "typex-13 | wood-89@406, glass-89 | typex-13", 45},
    {"additive 15 + 20", CODE_IBC, BEARING, "gyp-13 | wood-89@406 | gyp-13", 35},
    {"additive: weaker side governs", CODE_IBC, BEARING, "typex-16 | wood-89@406 | gyp-13", 35},
    {"additive 30 + 20", CODE_IBC, BEARING, "gyp-16 | wood-89@406 | gyp-16", 50},
    {"additive: 1/2 and 3/8, either order", CODE_IBC, BEARING,
     "gyp-10 + gyp-13 | wood-89-double@406 | gyp-13 + gyp-10", 55},
    {"additive: two rows of studs", CODE_IBC, BEARING,
     "typex-16 | wood-89-double@406, glass-89 | typex-16", 60},
    {"additive: no steel", CODE_IBC, FREE, "typex-13 | steel-92-18@406 | typex-13", 0},
    {"additive: not at 24 in", CODE_IBC, FREE, "typex-13 | wood-89@610 | typex-13", 0},
    {"additive: not on 2x3", CODE_IBC, FREE, "typex-13 | wood-64@406 | typex-13", 0},
    {"additive: no channel", CODE_IBC, FREE, "typex-13 | rc@610 | wood-89@406 | typex-13", 0},
    {"additive: no membrane", CODE_IBC, FREE, "typex-13 + mlv-5 | wood-89@406 | typex-13", 0},
    /* IBC Table 721.1(2), items from memory (15-1.x: IBC 2018). */
    {"13-1.1", CODE_IBC, FREE, "typex-16 | steel-92-18@610 | typex-16", 60},
    {"13-1.1 carries no load", CODE_IBC, BEARING, "typex-16 | steel-92-33@610 | typex-16", 0},
    {"13-1.1 with batts", CODE_IBC, FREE, "typex-16 | steel-92-18@610, glass-89 | typex-16", 60},
    {"13-1.1 void with a channel", CODE_IBC, FREE, "typex-16 | rc@610 | steel-92-18@610 | typex-16",
     0},
    {"13-1.1 on the least stud", CODE_IBC, FREE, "typex-16 | steel-41-18@610 | typex-16", 60},
    {"13-1.2", CODE_IBC, FREE, "2*typex-13 | steel-41-18@610 | 2*typex-13", 120},
    {"13-1.2 thicker boards", CODE_IBC, FREE, "2*typex-16 | steel-92-18@610 | 2*typex-16", 120},
    {"13-1.2 one layer short", CODE_IBC, FREE, "2*typex-13 | steel-41-18@610 | typex-13", 0},
    {"14-1.1", CODE_IBC, BEARING, "2*gyp-10 | wood-89@406 | 2*gyp-10", 60},
    {"14-1.2", CODE_IBC, BEARING, "2*gyp-13 | wood-89@406 | 2*gyp-13", 60},
    {"14-1.3 at 24 in", CODE_IBC, BEARING, "typex-16 | wood-89@610 | typex-16", 60},
    {"14-1.5 at 16 in", CODE_IBC, BEARING, "2*typex-16 | wood-89@406 | 2*typex-16", 120},
    {"14-1.5: the closer edition is taken", CODE_IBC, BEARING,
     "2*typex-16 | wood-89@610 | 2*typex-16", 60},
    {"15-1.16", CODE_IBC, BEARING, "2*typex-16 | wood-140@610, stone-140 | 2*typex-16", 120},
    {"15-1.16: glass for mineral wool", CODE_IBC, BEARING,
     "2*typex-16 | wood-140@610, glass-140 | 2*typex-16", 60},
    /* One code at a time: NBC 2020 Table 9.10.3.1.-A rows S1, S4 give 45 where IBC 13-1.1 gives 60.
     */
    {"S4 is 45 by NBC", CODE_NBC, FREE, "typex-16 | steel-92-18@610 | typex-16", 45},
    {"no code", CODE_NONE, FREE, "typex-16 | steel-92-18@610 | typex-16", 0},
    /* NBC 2020 Table 9.10.3.1.-A, what its notes and the general notes of GA-600 (from memory)
       still allow. */
    {"deeper stud", CODE_NBC, FREE, "typex-16 | steel-102-18@610 | typex-16", 45},
    {"thicker steel", CODE_NBC, FREE, "typex-16 | steel-92-33@610 | typex-16", 45},
    {"closer spacing", CODE_NBC, FREE, "typex-16 | steel-92-18@305 | typex-16", 45},
    {"38x140 for 38x89", CODE_NBC, BEARING, "typex-16 | wood-140@406, glass-140 | typex-16", 60},
    {"more gypsum", CODE_NBC, BEARING, "gyp-13 + typex-16 | wood-89@406 | typex-16", 60},
    {"Type C for Type X", CODE_NBC, BEARING, "typec-16 | wood-89@406 | typec-16", 60},
    {"abuse board of Type X", CODE_NBC, BEARING, "abuse-16 | wood-89@406 | moist-16", 60},
    {"wood panel under", CODE_NBC, BEARING, "typex-16 + osb-11 | wood-89@406 | typex-16", 60},
    {"wood panel over", CODE_NBC, BEARING, "osb-11 + typex-16 | wood-89@406 | typex-16", 60},
    {"cement board over", CODE_NBC, BEARING, "cement-13 + typex-16 | wood-89@406 | typex-16", 60},
    {"damped board over", CODE_NBC, BEARING, "damp-16 + typex-16 | wood-89@406 | typex-16", 60},
    {"damped board alone", CODE_NBC, BEARING, "damp-16 | wood-89@406 | typex-16", 0},
    {"cement board for gypsum", CODE_NBC, BEARING, "cement-13 | wood-89@406 | typex-16", 0},
    {"damping layer", CODE_NBC, BEARING,
     "typex-16 + damp-layer + typex-16 | wood-89@406 | typex-16", 0},
    {"limp mass", CODE_NBC, BEARING, "typex-16 + mlv-5 | wood-89@406 | typex-16", 0},
    {"fibreboard", CODE_NBC, BEARING, "typex-16 + fibreboard-13 | wood-89@406 | typex-16", 0},
    {"regular for Type X", CODE_NBC, BEARING, "gyp-16 | wood-89@406, glass-89 | gyp-16", 30},
    {"thinner board", CODE_NBC, BEARING, "gyp-10 | wood-89@406 | gyp-13", 0},
    {"lighter stud", CODE_NBC, FREE, "typex-16 | steel-41-18@406 | typex-16", 0},
    {"W6i at its spacing", CODE_NBC, BEARING, "2*typex-16 | rc@406 | wood-89@406 | 2*typex-16", 90},
    {"wider than W6i: only W6j is left", CODE_NBC, BEARING,
     "2*typex-16 | rc@406 | wood-89@610 | 2*typex-16", 60},
    {"wider than W3c: no row", CODE_NBC, BEARING,
     "typex-13 | rc@406 | wood-89@610, glass-89 | typex-13", 0},
    {"clips are no channel", CODE_NBC, BEARING,
     "2*typex-16 | clip@610 | wood-89@406, glass-89 | 2*typex-16", 0},
    {"two layers on the channel side: W4", CODE_NBC, BEARING,
     "2*typex-16 | rc@406 | wood-89@406, glass-89 | typex-16", 60},
    {"one layer on the channel side: W5", CODE_NBC, BEARING,
     "typex-16 | rc@406 | wood-89@406, glass-89 | 2*typex-16", 45},
    {"W3 has no empty row", CODE_NBC, BEARING, "typex-16 | rc@406 | wood-89@406 | typex-16", 0},
    {"glass earns no bracket: W1b", CODE_NBC, BEARING,
     "typex-13 | wood-89@406, glass-89 | typex-13", 45},
    {"rock earns it: W1b", CODE_NBC, BEARING, "typex-13 | wood-89@406, stone-89 | typex-13", 60},
    {"rock that does not fill the cavity", CODE_NBC, BEARING,
     "typex-13 | wood-89@406, stone-76 | typex-13", 45},
    {"rock in one row of two: W13d", CODE_NBC, BEARING,
     "typex-13 | wood-89-double@406, stone-89 | typex-13", 45},
    {"rock in both rows: W13b", CODE_NBC, BEARING,
     "typex-13 | wood-89-double@406, stone-89, stone-89 | typex-13", 60},
    {"rock part-way in staggered studs: W7b", CODE_NBC, BEARING,
     "typex-13 | wood-89-stag-140@406, stone-89 | typex-13", 45},
    /* Batts in load-bearing steel lower the rating: rows S10b, S10e, S15c, S15d. */
    {"bearing steel empty: S10e", CODE_NBC, BEARING, "2*typex-13 | steel-92-33@406 | 2*typex-13",
     60},
    {"bearing steel with glass: S10b", CODE_NBC, BEARING,
     "2*typex-13 | steel-92-33@406, glass-89 | 2*typex-13", 45},
    {"bearing steel part-filled: no row", CODE_NBC, BEARING,
     "2*typex-13 | steel-92-33@406, stone-76 | 2*typex-13", 0},
    {"20 gauge drywall studs bear nothing", CODE_NBC, BEARING,
     "2*typex-13 | steel-92-30@406 | 2*typex-13", 0},
    {"sheet on an inner face", CODE_NBC, BEARING,
     "typex-16 | wood-89-double@406, inner-a osb-11 | typex-16", 60},
};

START_TEST(test_case) {
  const fire_case *k = &cases[_i];
  fire_verdict v = judged(k->code, k->bearing, k->line);
  ck_assert_msg(v.minutes == k->minutes, "%s: %s gives %d (%s), expected %d", k->name, k->line,
                v.minutes, v.basis, k->minutes);
  ck_assert_msg((v.minutes == 0) == (strcmp(v.basis, "not shown") == 0), "%s: basis %s", k->name,
                v.basis);
  ck_assert_msg((v.minutes == 0) == (v.source == NULL), "%s: a rating names its source", k->name);
  ck_assert_msg(v.minutes > 0 || v.note != NULL, "%s: what is not shown says why", k->name);
}
END_TEST

/* Every figure of the table, both uses: NBC 2020 Table 9.10.3.1.-A. A blank is a hyphen: not
 * assigned, so nothing is shown, unless the wall is also one of another row (bearing rows on
 * thicker steel, without a mount, used without load). */
static int table_minutes(int row, bool bearing) {
  return table_number(&fire_table, row, bearing ? "frr_loadbearing_min" : "frr_nonloadbearing_min");
}

static bool also_another_row(int row, bool bearing) {
  return !bearing && strcmp(table_get(&fire_table, row, "family"), "steel") == 0 &&
         strcmp(table_get(&fire_table, row, "steel_thickness_mm"), "1.37") == 0;
}

static int table_mil(int row) {
  return strcmp(table_get(&fire_table, row, "steel_thickness_mm"), "0.46") == 0 ? 18 : 33;
}

START_TEST(test_table_row) {
  char line[256];
  table_line(&fire_table, _i, "glass", 0, table_mil(_i), 0, 0, line, sizeof line);
  for (int bearing = 0; bearing < 2; bearing++) {
    int expected = table_minutes(_i, bearing);
    fire_verdict v = judged(CODE_NBC, bearing, line);
    if (expected == 0 && also_another_row(_i, bearing)) continue;
    ck_assert_msg(v.minutes == expected, "%s: %s gives %d (%s), expected %d",
                  table_get(&fire_table, _i, "id"), line, v.minutes, v.basis, expected);
  }
}
END_TEST

/* The figure in brackets: the same wall with rock or slag fibre that fills the cavity. */
START_TEST(test_table_bracket) {
  const char *note = strstr(table_get(&fire_table, _i, "note"), "with rock or slag fibre");
  if (!note) return;
  const char *after = strstr(note, "): ");
  ck_assert_ptr_nonnull(after);
  int expected[2] = {table_minutes(_i, false), table_minutes(_i, true)};
  for (const char *s = after + 3; *s && *s != ';'; s++)
    if (strncmp(s, "LB ", 3) == 0) expected[s == after + 3 || s[-1] != 'N'] = atoi(s + 3);
  char line[256];
  table_line(&fire_table, _i, "stone", 1, table_mil(_i), 0, 0, line, sizeof line);
  for (int bearing = 0; bearing < 2; bearing++) {
    if (expected[bearing] == 0 && also_another_row(_i, bearing)) continue;
    fire_verdict v = judged(CODE_NBC, bearing, line);
    ck_assert_msg(v.minutes == expected[bearing], "%s: %s gives %d (%s), expected %d",
                  table_get(&fire_table, _i, "id"), line, v.minutes, v.basis, expected[bearing]);
  }
}
END_TEST

/* The NBC table serves Part 9 buildings, up to 3 storeys (from memory: NBC 2020, Division
 * A 1.3.3.3.). */
START_TEST(test_scope) {
  brief b = brief_for(CODE_NBC, true);
  wall w = parse("typex-16 | wood-89@406 | typex-16");
  b.storeys_given = true;
  b.storeys = 3;
  ck_assert_int_eq(fire_judge(memory, shop, &b, &w).minutes, 60);
  b.storeys = 4;
  fire_verdict v = fire_judge(memory, shop, &b, &w);
  ck_assert_int_eq(v.minutes, 0);
  ck_assert_ptr_nonnull(strstr(v.note, "3 storeys"));
  b.code = CODE_IBC;
  ck_assert_int_eq(fire_judge(memory, shop, &b, &w).minutes, 60);
}
END_TEST

START_TEST(test_words) {
  fire_verdict v = judged(CODE_IBC, false, "typex-16 | steel-92-18@610 | typex-16");
  ck_assert_str_eq(v.row_id, "fire-ibc-13-1.1");
  ck_assert_ptr_nonnull(strstr(v.source, "from memory"));
  v = judged(CODE_IBC, true, "typex-13 | wood-89@406, cell-89 | gyp-13");
  ck_assert_str_eq(
      v.basis,
      "component-additive: membrane 15 + frame 20 + dense fill 15 min, side B governs, at most 60");
  v = judged(CODE_NBC, true, "typex-16 | rc@406 | wood-89@406 | typex-16");
  ck_assert_ptr_nonnull(strstr(v.note, "listed fire design"));
}
END_TEST

/* IBC Table 722.6.2(1): minutes of one layer as a membrane (International Building Code 2018); what the
 * table does not name earns nothing. A panel earns what the thinner one of the table does. */
static const struct {
  const char *id;
  double minutes;
} membranes[] = {{"gyp-10", 10},   {"gyp-13", 15},   {"gyp-16", 30},       {"typex-13", 25},
                 {"typex-16", 40}, {"ply-13", 10},   {"osb-11", 5},        {"cement-13", 0},
                 {"damp-16", 0},   {"shaft-25", 0},  {"fibreboard-13", 0}, {"mlv-5", 0},
                 {"abuse-16", 40}, {"moist-16", 40}, {"typec-16", 40}};

START_TEST(test_membrane) {
  face f = {.count = 1, .layer = {catalog_layer(shop, membranes[_i].id)}};
  fire_face is;
  ck_assert_int_ge(f.layer[0], 0);
  fire_face_set(shop, &f, &is);
  ck_assert_msg(is.membrane == membranes[_i].minutes, "%s earns %g min, expected %g",
                membranes[_i].id, is.membrane, membranes[_i].minutes);
}
END_TEST

/* A listing counts under every code, for the very boards it names. */
START_TEST(test_listing) {
  static const char text_json[] = "{\"septum\":\"listing/"
                                  "1\",\"records\":[{\"id\":\"yard-1\",\"name\":\"invented\","
                                  "\"design\":\"X 101\",\"source\":\"invented\","
                                  "\"side_a\":[\"typex-16\"],\"side_b\":[\"typex-16\"],"
                                  "\"material\":\"wood\",\"layout\":\"single\",\"depth_mm\":88.9,"
                                  "\"spacing_max_mm\":609.6,\"mount\":\"channel\",\"mount_spacing_"
                                  "max_mm\":609.6,\"fill\":\"optional\","
                                  "\"minutes_loadbearing\":60}]}";
  wall_row *rows;
  size_t count;
  const json_value *root =
      json_parse(memory, &faults, "listing.json", text_json, sizeof text_json - 1);
  ck_assert_ptr_nonnull(root);
  ck_assert(rows_read(memory, &faults, root, "listing", &rows, &count));
  ck_assert_int_eq((int)count, 1);
  catalog *with = arena_alloc(memory, sizeof *with);
  wall_row *all = arena_array(memory, shop->fire_count + 1, sizeof *all);
  *with = *shop;
  memcpy(all, shop->fire, shop->fire_count * sizeof *all);
  all[with->fire_count++] = rows[0];
  with->fire = all;
  ck_assert(rows_check_ids(memory, &faults, with));
  shop = with;
  fire_verdict v = judged(CODE_NONE, true, "typex-16 | rc@610 | wood-89@406, glass-89 | typex-16");
  ck_assert_int_eq(v.minutes, 60);
  ck_assert_str_eq(v.row_id, "yard-1");
  ck_assert_int_eq(
      judged(CODE_NONE, true, "typec-16 | rc@610 | wood-89@406, glass-89 | typex-16").minutes, 0);
}
END_TEST

int main(void) {
  int rows = table_read(&fire_table, TEST_ROOT "/tests/data/nbc2020_fire.csv");
  Suite *s = suite_create("fire");
  TCase *t = tcase_create("fire");
  tcase_set_timeout(t, 60);
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, test_case, 0, (int)(sizeof cases / sizeof cases[0]));
  tcase_add_loop_test(t, test_table_row, 0, rows > 0 ? rows : 1);
  tcase_add_loop_test(t, test_table_bracket, 0, rows > 0 ? rows : 1);
  tcase_add_loop_test(t, test_membrane, 0, (int)(sizeof membranes / sizeof membranes[0]));
  tcase_add_test(t, test_scope);
  tcase_add_test(t, test_words);
  tcase_add_test(t, test_listing);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad || rows != 172 ? EXIT_FAILURE : EXIT_SUCCESS;
}
