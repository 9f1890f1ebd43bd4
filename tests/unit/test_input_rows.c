/* Rows of fire/1, published/1 and listing/1: what is read, what is refused, and where. */
#include <check.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "input/rows.h"

static jmp_buf failed;
static arena *memory;
static diag_list diags;

static void setup(void) {
  memory = arena_create(0, &failed);
  ck_assert_ptr_nonnull(memory);
  if (setjmp(failed)) ck_abort_msg("memory ran out");
  diag_init(&diags, memory);
}

static void teardown(void) {
  arena_free(memory);
}

static const json_value *parsed(const char *json) {
  const json_value *root = json_parse(memory, &diags, "rows.json", json, strlen(json));
  ck_assert_msg(root != NULL, "the test's own JSON is wrong: %s",
                diags.count ? diags.items[0].message : "");
  return root;
}

#define FRAMING                                                                                    \
  "\"material\":\"wood\",\"layout\":\"single\",\"depth_mm\":88.9,\"spacing_max_mm\":609.6"
#define NAMES(id)               "\"id\":\"" id "\",\"name\":\"n\",\"source\":\"s\""
#define SIDES                   "\"side_a\":[\"typex-16\"],\"side_b\":[\"typex-16\"]"
#define OPEN                    "\"mount\":\"none\",\"fill\":\"none\""
#define ROW(id, more)           "{" NAMES(id) "," SIDES "," FRAMING "," more "}"
#define FIRE_FILE(records)      "{\"septum\":\"fire/1\",\"records\":[" records "]}"
#define PUBLISHED_FILE(records) "{\"septum\":\"published/1\",\"records\":[" records "]}"
#define LISTING_FILE(records)   "{\"septum\":\"listing/1\",\"records\":[" records "]}"

typedef struct refusal {
  const char *name, *kind, *json;
  error_code code;
  const char *words; /* in the message */
} refusal;

static const refusal refusals[] = {
    {"other kind", "fire", LISTING_FILE(ROW("a", OPEN)), ERROR_FILE_KIND, ""},
    {"no records", "fire", "{\"septum\":\"fire/1\"}", ERROR_FIELD_MISSING, "records"},
    {"unknown key", "fire", FIRE_FILE(ROW("a", OPEN ",\"code\":\"ibc\",\"colour\":1")),
     ERROR_FIELD_UNKNOWN, "colour"},
    {"no code", "fire", FIRE_FILE(ROW("a", OPEN)), ERROR_FIELD_MISSING, "code"},
    {"code none", "fire", FIRE_FILE(ROW("a", OPEN ",\"code\":\"none\"")), ERROR_FIELD_MISSING,
     "code"},
    {"unknown code", "fire", FIRE_FILE(ROW("a", OPEN ",\"code\":\"ubc\"")), ERROR_FIELD_CHOICE, ""},
    {"stc in a fire row", "fire", FIRE_FILE(ROW("a", OPEN ",\"code\":\"ibc\",\"stc\":50")),
     ERROR_FIELD_CONFLICT, "stc"},
    {"depth in metres", "fire",
     FIRE_FILE("{" NAMES("a") "," SIDES
                              ",\"material\":\"wood\",\"layout\":\"single\",\"depth_mm\":0.089,"
                              "\"spacing_max_mm\":610," OPEN ",\"code\":\"ibc\"}"),
     ERROR_FIELD_RANGE, ""},
    {"gauge of wood", "fire", FIRE_FILE(ROW("a", OPEN ",\"code\":\"ibc\",\"mil_min\":18")),
     ERROR_FIELD_CONFLICT, "wood"},
    {"two rows in one", "fire",
     FIRE_FILE(
         ROW("a", "\"mount\":\"none\",\"fill\":\"required\",\"filled_rows\":2,\"code\":\"ibc\"")),
     ERROR_FIELD_CONFLICT, "double"},
    {"fill of an empty wall", "fire",
     FIRE_FILE(ROW("a", OPEN ",\"fill_kg_m2\":2.8,\"code\":\"ibc\"")), ERROR_FIELD_CONFLICT,
     "fill"},
    {"unknown fibre", "fire",
     FIRE_FILE(ROW(
         "a",
         "\"mount\":\"none\",\"fill\":\"required\",\"fill_kinds\":[\"straw\"],\"code\":\"ibc\"")),
     ERROR_FIELD_CHOICE, "stone"},
    {"no boards", "fire",
     FIRE_FILE("{" NAMES("a") ",\"side_a\":[],\"side_b\":[\"x\"]," FRAMING "," OPEN
                              ",\"code\":\"ibc\"}"),
     ERROR_FIELD_RANGE, ""},
    {"a board that is no word", "fire",
     FIRE_FILE("{" NAMES("a") ",\"side_a\":[3],\"side_b\":[\"x\"]," FRAMING "," OPEN
                              ",\"code\":\"ibc\"}"),
     ERROR_FIELD_TYPE, "a number"},
    {"id twice", "fire",
     FIRE_FILE(ROW("a", OPEN ",\"code\":\"ibc\"") "," ROW("a", OPEN ",\"code\":\"nbc\"")),
     ERROR_CATALOG_DUPLICATE_ID, "a"},
    {"least above greatest", "published",
     PUBLISHED_FILE(ROW("a", OPEN ",\"spacing_min_mm\":700,\"stc\":50,\"stc_sd\":1")),
     ERROR_FIELD_CONFLICT, "greatest"},
    {"no rating", "published",
     PUBLISHED_FILE(ROW("a", OPEN ",\"spacing_min_mm\":406.4,\"stc_sd\":1")), ERROR_FIELD_MISSING,
     "stc"},
    {"no sd", "published", PUBLISHED_FILE(ROW("a", OPEN ",\"spacing_min_mm\":406.4,\"stc\":50")),
     ERROR_FIELD_MISSING, "stc_sd"},
    {"any mount", "published",
     PUBLISHED_FILE(ROW(
         "a",
         "\"mount\":\"any\",\"fill\":\"none\",\"spacing_min_mm\":406.4,\"stc\":50,\"stc_sd\":1")),
     ERROR_FIELD_CONFLICT, "mount"},
    {"channel without spacing", "published",
     PUBLISHED_FILE(ROW("a", "\"mount\":\"channel\",\"fill\":\"none\",\"spacing_min_mm\":406.4,"
                             "\"stc\":50,\"stc_sd\":1")),
     ERROR_FIELD_MISSING, "mount_spacing"},
    {"no design", "listing", LISTING_FILE(ROW("a", OPEN ",\"minutes_loadbearing\":60")),
     ERROR_FIELD_MISSING, "design"},
    {"no minutes", "listing", LISTING_FILE(ROW("a", OPEN ",\"design\":\"X 1\"")),
     ERROR_FIELD_MISSING, "minutes"},
};

START_TEST(test_refused) {
  const refusal *r = &refusals[_i];
  wall_row *rows;
  size_t count;
  const json_value *root = parsed(r->json);
  ck_assert_msg(!rows_read(memory, &diags, root, r->kind, &rows, &count), "%s: taken", r->name);
  ck_assert_msg(diags.errors == 1, "%s: %d errors", r->name, (int)diags.errors);
  ck_assert_msg(diags.items[0].code == r->code, "%s: E%d %s", r->name, (int)diags.items[0].code,
                diags.items[0].message);
  ck_assert_msg(strstr(diags.items[0].message, r->words) != NULL, "%s: %s", r->name,
                diags.items[0].message);
  ck_assert_ptr_nonnull(diags.items[0].place.file);
  ck_assert_int_ge(diags.items[0].place.line, 1);
}
END_TEST

/* All faults of a file show at once, and the sound rows are kept. */
START_TEST(test_goes_on) {
  wall_row *rows;
  size_t count;
  const json_value *root = parsed(FIRE_FILE(ROW("a", OPEN) ",\n" ROW(
      "b", OPEN ",\"code\":\"ibc\"") ",\n" ROW("c", OPEN ",\"code\":\"x\"")));
  ck_assert(!rows_read(memory, &diags, root, "fire", &rows, &count));
  ck_assert_int_eq((int)diags.errors, 2);
  ck_assert_int_eq(diags.items[0].place.line, 1);
  ck_assert_int_eq(diags.items[1].place.line, 3);
  ck_assert_int_eq((int)count, 1);
  ck_assert_str_eq(rows[0].id, "b");
}
END_TEST

#define EXACT 1e-12 /* decimal fractions scaled by a power of ten */

START_TEST(test_values) {
  wall_row *rows;
  size_t count;
  const json_value *root = parsed(
      FIRE_FILE("{" NAMES("a") ",\"note\":\"joints\",\"code\":\"nbc\",\"side_a\":[\"typex-16\","
                               "\"gyp-13\"],\"side_b\":[\"osb-13\"],"
                               "\"material\":\"steel\",\"layout\":\"double\",\"depth_mm\":92.1,"
                               "\"mil_min\":33,\"spacing_max_mm\":406.4,\"gap_mm\":25,"
                               "\"mount\":\"channel\",\"mount_spacing_max_mm\":609.6,\"fill\":"
                               "\"required\",\"fill_kinds\":[\"stone\",\"cellulose\"],"
                               "\"filled_rows\":2,\"fill_kg_m2\":2.8,\"fill_thickness_mm\":88.9,"
                               "\"minutes_nonloadbearing\":90}"));
  ck_assert(rows_read(memory, &diags, root, "fire", &rows, &count));
  ck_assert_int_eq((int)count, 1);
  ck_assert_int_eq(rows->code, CODE_NBC);
  ck_assert_int_eq(rows->material, FRAME_STEEL);
  ck_assert_int_eq(rows->layout, FRAME_DOUBLE);
  ck_assert_int_eq(rows->side_a.boards, 2);
  ck_assert_str_eq(rows->side_a.board[1], "gyp-13");
  ck_assert_str_eq(rows->side_b.board[0], "osb-13");
  ck_assert_double_eq_tol(rows->depth_m, 0.0921, EXACT);
  ck_assert_double_eq_tol(rows->spacing_max_m, 0.4064, EXACT);
  ck_assert_double_eq_tol(rows->mount_spacing_max_m, 0.6096, EXACT);
  ck_assert_double_eq_tol(rows->gap_m, 0.025, EXACT);
  ck_assert_double_eq_tol(rows->fill_thickness_m, 0.0889, EXACT);
  ck_assert_double_eq_tol(rows->fill_kg_m2, 2.8, EXACT);
  ck_assert_int_eq(rows->mil_min, 33);
  ck_assert_int_eq(rows->filled_rows, 2);
  ck_assert_uint_eq(rows->fill_kinds, (1u << FILL_STONE) | (1u << FILL_CELLULOSE));
  ck_assert_int_eq(rows->minutes_bearing, 0); /* absent: not assigned */
  ck_assert_int_eq(rows->minutes_nonbearing, 90);
  ck_assert_str_eq(rows->note, "joints");
}
END_TEST

/* IBC 722.6.2 (International Building Code 2018): 5/8 in Type X is worth 40 min, two 1/2 in boards
 * 40; at most 60 on studs at no more than 16 in. NBC scope of 3 storeys from memory. */
START_TEST(test_shipped_rule) {
  const json_value *root = json_load(memory, &diags, TEST_ROOT "/catalogs/fire.json");
  ck_assert_ptr_nonnull(root);
  catalog c;
  memset(&c, 0, sizeof c);
  ck_assert(rows_read_additive(memory, &diags, root, &c));
  ck_assert_double_eq_tol(c.additive_frame_minutes, 20, EXACT);
  ck_assert_double_eq_tol(c.additive_fill_minutes, 15, EXACT);
  ck_assert_double_eq_tol(c.additive_max_minutes, 60, EXACT);
  ck_assert_double_eq_tol(c.additive_max_spacing_m, 0.4064, EXACT);
  ck_assert_int_eq((int)c.membrane_count, 11);
  int found = 0;
  for (size_t i = 0; i < c.membrane_count; i++) {
    const side_need *m = &c.membranes[i];
    bool x16 = m->count == 1 && m->item[0].kind == NEED_TYPE_X && m->item[0].thickness_m > 0.015;
    bool two13 = m->count == 2 && m->item[0].thickness_m > 0.012 && m->item[1].thickness_m > 0.012;
    if (x16 || two13) {
      ck_assert_double_eq_tol(m->minutes, 40, EXACT);
      found++;
    }
  }
  ck_assert_int_eq(found, 2);
  ck_assert_int_eq(c.nbc_max_storeys, 3);
}
END_TEST

typedef struct part_case {
  const char *name, *json;
  error_code code;
} part_case;

static const part_case parts[] = {
    {"no rule", "{\"septum\":\"fire/1\",\"scope\":{}}", ERROR_FIELD_MISSING},
    {"no scope", "{\"septum\":\"fire/1\",\"component_additive\":{}}", ERROR_FIELD_MISSING},
    {"empty parts", "{\"septum\":\"fire/1\",\"component_additive\":{},\"scope\":{}}",
     ERROR_FIELD_MISSING},
};

START_TEST(test_parts) {
  catalog c;
  memset(&c, 0, sizeof c);
  ck_assert(!rows_read_additive(memory, &diags, parsed(parts[_i].json), &c));
  ck_assert_int_ge((int)diags.errors, 1);
  ck_assert_msg(diags.items[0].code == parts[_i].code, "%s", parts[_i].name);
}
END_TEST

/* Boards that no catalog has are reported at the row; equal sides share one need. */
START_TEST(test_ids) {
  layer boards[2] = {
      {.id = "typex-16", .material = LAYER_GYPSUM, .type_x = true, .thickness_m = 0.0159},
      {.id = "gyp-13", .material = LAYER_GYPSUM, .regular = true, .thickness_m = 0.0127}};
  catalog c;
  memset(&c, 0, sizeof c);
  c.layers = boards;
  c.layer_count = 2;
  const json_value *root =
      parsed(FIRE_FILE(ROW("a", OPEN ",\"code\":\"ibc\"") "," ROW("b", OPEN ",\"code\":\"nbc\"")));
  ck_assert(rows_read(memory, &diags, root, "fire", &c.fire, &c.fire_count));
  ck_assert(rows_check_ids(memory, &diags, &c));
  ck_assert_int_eq((int)c.fire_need_count, 1);
  ck_assert_int_eq(c.fire_needs[0].item[0].kind, NEED_TYPE_X);
  ck_assert_int_eq(c.fire[0].pair, c.fire[1].pair);
  c.layers = &boards[1];
  c.layer_count = 1;
  ck_assert(!rows_check_ids(memory, &diags, &c));
  ck_assert_int_eq(diags.items[0].code, ERROR_CATALOG_UNKNOWN_ID);
  ck_assert_ptr_nonnull(strstr(diags.items[0].message, "typex-16"));
}
END_TEST

int main(void) {
  Suite *s = suite_create("rows");
  TCase *t = tcase_create("rows");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, test_refused, 0, (int)(sizeof refusals / sizeof refusals[0]));
  tcase_add_test(t, test_goes_on);
  tcase_add_test(t, test_values);
  tcase_add_test(t, test_shipped_rule);
  tcase_add_loop_test(t, test_parts, 0, (int)(sizeof parts / sizeof parts[0]));
  tcase_add_test(t, test_ids);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad ? EXIT_FAILURE : EXIT_SUCCESS;
}
