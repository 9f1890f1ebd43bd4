/* The brief: every field, every unit, defaults. Refusals are cases in tests/bad. */
#include "input/job.h"

#include <check.h>
#include <dirent.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/file.h"

#define SI_SHARE 1e-12 /* relative: one rounding or two of a unit conversion */

static jmp_buf out_of_memory;
static arena *memory;
static diag_list faults;
static brief b;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
}
static void teardown(void) {
  arena_free(memory);
}

static bool read(const catalog *c, const char *s, bool target_required) {
  const json_value *v = json_parse(memory, &faults, "jobs/b.json", s, strlen(s));
  ck_assert_msg(v != NULL, "%s", s);
  return job_read(memory, &faults, c, v, target_required, &b);
}

/* A brief with a target and the given members. */
static bool read_with(const char *members) {
  return read(
      NULL,
      text_format(memory, "{\"septum\": \"brief/1\", \"target\": {\"value\": 50}, %s}", members),
      true);
}

START_TEST(defaults) {
  ck_assert(read(NULL, "{\"septum\": \"brief/1\", \"target\": {\"value\": 50}}", true));
  ck_assert_str_eq(b.file, "jobs/b.json");
  ck_assert_str_eq(b.title, "");
  ck_assert_int_eq(b.units, UNITS_US);
  ck_assert_int_eq(b.code, CODE_NONE);
  ck_assert(!b.storeys_given && !b.sprinklered);
  ck_assert_double_eq(b.length_m, 3.0);
  ck_assert_double_eq(b.height_m, 2.7);
  ck_assert_double_eq(b.ceiling_m[0], 0);
  ck_assert(b.corners == -1 && b.tees == -1 && b.free_ends == -1 && b.doors == -1);
  ck_assert(b.boards == BOARDS_LUMP);
  ck_assert(b.top == TOP_DECK && b.head == HEAD_RIGID && b.build == BUILD_ORDINARY);
  ck_assert_int_eq(b.target_count, 1);
  ck_assert_int_eq(b.targets[0].metric, METRIC_STC);
  ck_assert_int_eq(b.targets[0].basis, BASIS_LAB);
  ck_assert_double_eq(b.targets[0].confidence, 0.8);
  ck_assert_int_eq(b.targets[0].evidence, EVIDENCE_ANY);
  ck_assert(!b.targets[0].composite && !b.targets[0].scope_given);
  ck_assert_double_eq(b.targets[0].margin, 0);
  ck_assert(!b.thickness_m.has_min && !b.thickness_m.has_max);
  ck_assert_int_eq(b.fire_min, 0);
  ck_assert(!b.loadbearing && b.floors_above == -1 && b.noncombustible == NONCOMBUSTIBLE_NO);
  ck_assert_int_eq(b.shear_side, CATALOG_NONE);
  ck_assert_double_eq(b.lateral_pa, 240);
  ck_assert_double_eq(b.deflection, 240);
  for (int i = 0; i < 2; i++)
    ck_assert(b.side[i].fastening == FASTENING_NONE && b.side[i].finish_level == 4 &&
              !b.side[i].wet);
  ck_assert_double_eq(b.field_mean, 5);
  ck_assert_double_eq(b.field_sd, 2);
  ck_assert(!b.boxes_given && b.opening_count == 0 && b.only_count == 0 && b.prices == NULL);
  ck_assert_uint_eq(faults.count, 0);
}
END_TEST

static const char everything[] =
    "{\"septum\": \"brief/1\", \"title\": \"Music room\", \"note\": \"invented\", \"units\": "
    "\"si\", \"code\": \"nbc\","
    "\"building\": {\"storeys\": 4, \"sprinklered\": true},"
    "\"wall\": {\"length_ft\": 30, \"height_m\": \"9ft-6in\", \"ceiling_a_mm\": 2400, "
    "\"ceiling_b_in\": 96, \"top\": \"ceiling\", "
    "\"ceiling_class\": 25, \"ceiling_batts\": true,"
    "          \"head\": \"slip\", \"boards\": \"horizontal\", \"corners\": 1, \"tees\": 2, \"free_ends\": 0, \"doors\": 3},"
    "\"targets\": [{\"metric\": \"Rw+Ctr\", \"value\": 52.5, \"basis\": \"field\", \"confidence\": "
    "0.9, \"evidence\": \"published\","
    "               \"scope\": \"composite\", \"margin\": 2}, {\"metric\": \"OITC\", \"value\": "
    "40, \"scope\": \"wall\"}],"
    "\"limits\": {\"thickness_mm\": {\"min\": 100, \"max\": \"6-1/4in\"}, \"mass_psf\": {\"max\": "
    "12}, \"cost_per_ft2\": {\"max\": 15}},"
    "\"fire_min\": 60,"
    "\"structure\": {\"loadbearing\": true, \"floors_above\": 2, \"noncombustible\": \"frt_ok\", "
    "\"shear_side\": \"b\","
    "               \"lateral_psf\": 5, \"deflection\": \"L/360\"},"
    "\"sides\": {\"a\": {\"room\": \"bedroom\", \"fastening\": \"light\", \"abuse\": true, "
    "\"finish_level\": 5},"
    "           \"b\": {\"room\": \"kitchen\", \"fastening\": \"heavy\", \"fastening_length_ft\": "
    "10, \"wet\": true, \"room_depth_in\": 120}},"
    "\"services\": {\"riser_in\": 3.5, \"run_mm\": 25, \"boxes_per_10m\": 0},"
    "\"openings\": [{\"kind\": \"door-solid-core\", \"area_ft2\": 20}, {\"kind\": \"screen\", "
    "\"area_m2\": 1.5, \"stc\": 31},"
    "  {\"area_m2\": 1, \"tl_db\": [1,2,3,4,5,6,7,8,9,10,11,12,13,14,15,16,17,18,19,20,21]}],"
    "\"field_allowance\": {\"mean\": 4, \"sd\": 1.5}, \"floor_area_value_per_ft2\": 100, "
    "\"build\": \"any\","
    "\"only\": [\"frame:wood-*\", \"rc\"], \"without\": \"damp-*\", \"prices\": \"../p.json\", "
    "\"listings\": [\"l.json\", \"/x.json\"],"
    "\"reports\": [\"r.json\"]}";

static bool near(double found, double expected) {
  return fabs(found - expected) <= SI_SHARE * fabs(expected);
}

START_TEST(every_field_is_read) {
  ck_assert(read(NULL, everything, true));
  ck_assert_str_eq(b.title, "Music room");
  ck_assert(b.units == UNITS_SI && b.code == CODE_NBC && b.storeys == 4 && b.storeys_given &&
            b.sprinklered);
  ck_assert(b.corners == 1 && b.tees == 2 && b.free_ends == 0 && b.doors == 3);
  ck_assert(near(b.length_m, 9.144) && near(b.height_m, 2.8956) && near(b.ceiling_m[0], 2.4) &&
            near(b.ceiling_m[1], 2.4384));
  ck_assert(b.top == TOP_CEILING && b.head == HEAD_SLIP && b.boards == BOARDS_HORIZONTAL);
  ck_assert(near(b.ceiling_class, 25) && b.ceiling_batts);
  ck_assert(near(b.thickness_m.min, 0.1) && near(b.thickness_m.max, 0.15875));
  ck_assert(near(b.mass_kg_m2.max, 12 * 4.882427636) && !b.mass_kg_m2.has_min);
  ck_assert(near(b.cost_per_m2.max, 15 / 0.09290304));
  ck_assert_int_eq(b.fire_min, 60);
  ck_assert(b.loadbearing && b.floors_above == 2 && b.noncombustible == NONCOMBUSTIBLE_FRT_OK &&
            b.shear_side == 1);
  ck_assert(near(b.lateral_pa, 5 * 47.88025898) && near(b.deflection, 360));
  ck_assert(near(b.riser_m, 0.0889) && near(b.run_m, 0.025) && b.boxes_given &&
            b.boxes_per_10m < 1e-9);
  ck_assert(near(b.field_mean, 4) && near(b.field_sd, 1.5) &&
            near(b.floor_area_value_per_m2, 100 / 0.09290304));
  ck_assert(b.build == BUILD_ANY);
  ck_assert_uint_eq(faults.count, 1); /* a fire rating is asked of a wall that stops at the ceiling */
  ck_assert_uint_eq(faults.errors, 0);
}
END_TEST

START_TEST(targets_are_read) {
  ck_assert(read(NULL, everything, true));
  ck_assert_int_eq(b.target_count, 2);
  const target *t = b.targets;
  ck_assert(t->metric == METRIC_RW_CTR && near(t->value, 52.5) && t->basis == BASIS_FIELD &&
            near(t->confidence, 0.9));
  ck_assert(t->evidence == EVIDENCE_PUBLISHED && t->composite && t->scope_given &&
            near(t->margin, 2));
  ck_assert(t[1].metric == METRIC_OITC && !t[1].composite && t[1].scope_given);
}
END_TEST

START_TEST(sides_are_read) {
  ck_assert(read(NULL, everything, true));
  const room_side *x = &b.side[0], *y = &b.side[1];
  ck_assert_str_eq(x->room, "bedroom");
  ck_assert(x->fastening == FASTENING_LIGHT && x->abuse && !x->wet && x->finish_level == 5);
  ck_assert_str_eq(y->room, "kitchen");
  ck_assert(y->fastening == FASTENING_HEAVY && y->wet && near(y->fastening_length_m, 3.048) &&
            y->finish_level == 4);
  ck_assert(near(y->room_depth_m, 3.048) && !(x->room_depth_m > 0));
}
END_TEST

START_TEST(openings_are_read) {
  ck_assert(read(NULL, everything, true));
  ck_assert_int_eq(b.opening_count, 3);
  ck_assert_str_eq(b.openings[0].kind, "door-solid-core");
  ck_assert(near(b.openings[0].area_m2, 1.8580608) && near(b.openings[0].stc, 22) &&
            !b.openings[0].has_bands);
  ck_assert(near(b.openings[1].stc, 31));
  ck_assert(b.openings[2].has_bands && near(b.openings[2].tl_db[20], 21) &&
            near(b.openings[2].tl_db[0], 1));
}
END_TEST

/* Paths in a brief are seen from its folder. */
START_TEST(lists_and_paths_are_read) {
  ck_assert(read(NULL, everything, true));
  ck_assert_int_eq(b.only_count, 2);
  ck_assert_str_eq(b.only[0], "frame:wood-*");
  ck_assert_int_eq(b.without_count, 1);
  ck_assert_str_eq(b.without[0], "damp-*");
  ck_assert_str_eq(b.prices, "jobs/../p.json");
  ck_assert_int_eq(b.listing_count, 2);
  ck_assert_str_eq(b.listings[0], "jobs/l.json");
  ck_assert_str_eq(b.listings[1], "/x.json");
  ck_assert_int_eq(b.report_count, 1);
}
END_TEST

/* The same limit in each spelling. */
static const struct limit_row {
  const char *members;
  double thickness_m;
} limit_rows[] = {
    {"\"thickness_mm\": {\"max\": 123.825}", 0.123825},
    {"\"thickness_in\": {\"max\": 4.875}", 0.123825},
    {"\"thickness_in\": {\"max\": \"4-7/8\"}", 0.123825},
    {"\"thickness_mm\": {\"max\": \"4-7/8in\", \"min\": null}", 0.123825},
    {"\"thickness_m\": {\"max\": 0.123825}", 0.123825},
    {"\"thickness_ft\": {\"max\": 0.40625}", 0.123825},
};

START_TEST(a_limit_in_any_unit) {
  ck_assert(read_with(text_format(memory, "\"limits\": {%s}", limit_rows[_i].members)));
  ck_assert(b.thickness_m.has_max && !b.thickness_m.has_min);
  ck_assert_msg(near(b.thickness_m.max, limit_rows[_i].thickness_m), "%s: %.17g",
                limit_rows[_i].members, b.thickness_m.max);
}
END_TEST

START_TEST(a_target_may_be_left_out_where_it_is_not_needed) {
  ck_assert(read(NULL, "{\"septum\": \"brief/1\"}", false));
  ck_assert_int_eq(b.target_count, 0);
  ck_assert(!read(NULL, "{\"septum\": \"brief/1\"}", true));
  ck_assert(!read(NULL, "{\"septum\": \"brief/1\", \"targets\": [{}]}", false));
}
END_TEST

START_TEST(every_kind_of_opening_has_a_rating_and_a_source) {
  ck_assert_int_gt(job_opening_kind_count, 0);
  for (int i = 0; i < job_opening_kind_count; i++) {
    ck_assert(read_with(text_format(memory, "\"openings\": [{\"kind\": \"%s\", \"area_m2\": 1}]",
                                    job_opening_kinds[i].kind)));
    ck_assert_double_eq(b.openings[0].stc, job_opening_kinds[i].stc);
    ck_assert_str_ne(job_opening_kinds[i].source, "");
  }
}
END_TEST

/* Against the shipped catalogs: a pattern that matches nothing is a warning with the nearest id. */
START_TEST(patterns_are_checked_against_the_catalogs) {
  const catalog *c = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(c);
  ck_assert(read(c,
                 "{\"septum\": \"brief/1\", \"target\": {\"value\": 50}, \"only\": [\"typex-*\", "
                 "\"frame:wood-89\", \"*\"],"
                 " \"without\": [\"mount:rc\", \"fill:glass-??\"]}",
                 true));
  ck_assert_uint_eq(faults.count, 0);
  ck_assert(read(c,
                 "{\"septum\": \"brief/1\", \"target\": {\"value\": 50}, \"only\": [\"typx-16\", "
                 "\"board:rc\", \"frame:zzz\"]}",
                 true));
  ck_assert_uint_eq(faults.count, 3);
  ck_assert_int_eq(faults.items[0].level, DIAG_WARNING);
  ck_assert_int_eq(faults.items[0].code, ERROR_CATALOG_UNKNOWN_ID);
  ck_assert_str_eq(faults.items[0].message,
                   "\"typx-16\" matches nothing in the catalogs; did you mean \"typex-16\"?");
  ck_assert_str_eq(faults.items[2].message, "\"frame:zzz\" matches nothing in the catalogs");
}
END_TEST

/* Words of the shipped catalogs that stand for one record become its id; patterns and ids stay. */
START_TEST(spoken_words_name_records) {
  const catalog *c = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(c);
  ck_assert(read(c,
                 "{\"septum\": \"brief/1\", \"target\": {\"value\": 50}, \"only\": [\"5/8X\", "
                 "\"frame:2x4\", \"typex-16\", \"typex-*\"], \"without\": \"5/8 Type X\"}",
                 true));
  ck_assert_uint_eq(faults.count, 0);
  ck_assert_int_eq(b.only_count, 4);
  ck_assert_str_eq(b.only[0], "board:typex-16");
  ck_assert_str_eq(b.only[1], "frame:wood-89");
  ck_assert_str_eq(b.only[2], "typex-16");
  ck_assert_str_eq(b.only[3], "typex-*");
  ck_assert_int_eq(b.without_count, 1);
  ck_assert_str_eq(b.without[0], "board:typex-16");
}
END_TEST

START_TEST(an_ambiguous_word_lists_its_meanings) {
  const catalog *c = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(c);
  ck_assert(!read(c,
                  "{\"septum\": \"brief/1\", \"target\": {\"value\": 50}, \"without\": "
                  "[\"5/8\", \"board:2x4\"]}",
                  true));
  ck_assert_uint_eq(faults.count, 2);
  ck_assert_uint_eq(faults.errors, 1);
  ck_assert_str_eq(
      faults.items[0].message,
      "\"5/8\" may mean gyp-16, typex-16; name one, or use * and ? for several");
  /* what the prefix names is no frame */
  ck_assert_int_eq(faults.items[1].code, ERROR_CATALOG_UNKNOWN_ID);
}
END_TEST

/* Every shipped brief reads without a message. */
START_TEST(shipped_briefs_are_sound) {
  DIR *folder = opendir(TEST_ROOT "/docs/examples");
  ck_assert_ptr_nonnull(folder);
  for (struct dirent *e; (e = readdir(folder)) != NULL;) {
    size_t n = strlen(e->d_name);
    if (n < 5 || !text_equal(e->d_name + n - 5, ".json")) continue;
    const json_value *v =
        json_load(memory, &faults, file_join(memory, TEST_ROOT "/docs/examples", e->d_name));
    ck_assert_msg(v != NULL, "%s", e->d_name);
    const json_value *mark = json_get(v, "septum");
    if (!mark || mark->kind != JSON_STRING || !text_equal(mark->string, "brief/1")) continue;
    ck_assert_msg(job_read(memory, &faults, NULL, v, false, &b), "%s", e->d_name);
    ck_assert_msg(faults.count == 0, "%s: %s", e->d_name,
                  faults.count ? faults.items[0].message : "");
  }
  (void)closedir(folder);
}
END_TEST

/* Where the schema describes an object, and a brief with one key in that object. */
static const struct object_row {
  const char *at[2]; /* keys down from the schema's top; NULL = the top itself */
  const char *before, *behind;
} object_rows[] = {
    {{NULL, NULL}, "", ""},
    {{"properties", "building"}, "\"building\": {", "}"},
    {{"properties", "wall"}, "\"wall\": {", "}"},
    {{"properties", "limits"}, "\"limits\": {", "}"},
    {{"properties", "structure"}, "\"structure\": {", "}"},
    {{"properties", "sides"}, "\"sides\": {", "}"},
    {{"properties", "services"}, "\"services\": {", "}"},
    {{"properties", "field_allowance"}, "\"field_allowance\": {", "}"},
    {{"$defs", "target"}, "\"target\": {", "}"},
    {{"$defs", "side"}, "\"sides\": {\"a\": {", "}}"},
    {{"$defs", "opening"}, "\"openings\": [{", "}]"},
    {{"$defs", "bounds"}, "\"limits\": {\"mass_psf\": {", "}}"},
    {{"$defs", "length_bounds"}, "\"limits\": {\"thickness_in\": {", "}}"},
};

/* The message about an unknown key when a brief holds `key` in that object; NULL when the key is
 * known. */
static const char *unknown_message(const struct object_row *row, const char *key) {
  diag_init(&faults, memory);
  const char *mark = text_equal(key, "septum") ? "" : "\"septum\": \"brief/1\", ";
  const char *value = text_equal(key, "septum") ? "\"brief/1\"" : "null";
  (void)read(NULL,
             text_format(memory, "{%s%s\"%s\": %s%s}", mark, row->before, key, value, row->behind),
             false);
  for (size_t i = 0; i < faults.count; i++)
    if (faults.items[i].code == ERROR_FIELD_UNKNOWN) return faults.items[i].message;
  return NULL;
}

static const json_value *schema_keys(const struct object_row *row) {
  const json_value *v = json_load(memory, &faults, TEST_ROOT "/docs/formats/brief.schema.json");
  ck_assert_ptr_nonnull(v);
  for (int i = 0; i < 2 && row->at[i]; i++) {
    v = json_get(v, row->at[i]);
    ck_assert_ptr_nonnull(v);
  }
  return json_get(v, "properties");
}

START_TEST(the_reader_knows_the_keys_of_the_schema) {
  const json_value *keys = schema_keys(&object_rows[_i]);
  ck_assert_uint_gt(keys->count, 0);
  for (const json_value *key = keys->first; key; key = key->next) {
    const char *message = unknown_message(&object_rows[_i], key->key);
    ck_assert_msg(!message, "%s", message);
  }
}
END_TEST

START_TEST(the_schema_knows_the_keys_of_the_reader) {
  const json_value *keys = schema_keys(&object_rows[_i]);
  const char *message = unknown_message(&object_rows[_i], "qqqqqqqqqqqqqqqq");
  ck_assert_ptr_nonnull(message);
  const char *list = strstr(message, "known here: ");
  ck_assert_ptr_nonnull(list);
  list += strlen("known here: ");
  for (size_t n; *list; list += n + strspn(list + n, ", ")) {
    n = strcspn(list, ",");
    const char *key = text_copyn(memory, list, n);
    ck_assert_msg(json_get(keys, key) != NULL, "the schema lacks %s", key);
  }
}
END_TEST

/* The page names every key of the schema; of a length in other units it names the one that ends in
 * _m. */
START_TEST(the_page_names_every_key) {
  size_t len;
  const char *page = file_read(memory, &faults, TEST_ROOT "/docs/formats/brief.md", 1 << 20, &len);
  ck_assert_ptr_nonnull(page);
  for (const json_value *key = schema_keys(&object_rows[_i])->first; key; key = key->next) {
    const char *bar = strrchr(key->key, '_');
    int stem = bar ? (int)(bar - key->key) : (int)strlen(key->key);
    const char *quoted = text_format(memory, "`%s`", key->key),
               *in_metres = text_format(memory, "`%.*s_m`", stem, key->key);
    bool named = strstr(page, quoted) || strstr(page, in_metres) ||
                 strstr(page, text_format(memory, "\"%s\"", key->key));
    ck_assert_msg(named, "brief.md lacks %s", key->key);
  }
}
END_TEST

#define ROWS(rows) (int)(sizeof(rows) / sizeof((rows)[0]))

int main(void) {
  Suite *s = suite_create("brief");
  TCase *t = tcase_create("brief");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, defaults);
  tcase_add_test(t, every_field_is_read);
  tcase_add_test(t, targets_are_read);
  tcase_add_test(t, sides_are_read);
  tcase_add_test(t, openings_are_read);
  tcase_add_test(t, lists_and_paths_are_read);
  tcase_add_loop_test(t, a_limit_in_any_unit, 0, ROWS(limit_rows));
  tcase_add_test(t, a_target_may_be_left_out_where_it_is_not_needed);
  tcase_add_test(t, every_kind_of_opening_has_a_rating_and_a_source);
  tcase_add_test(t, patterns_are_checked_against_the_catalogs);
  tcase_add_test(t, spoken_words_name_records);
  tcase_add_test(t, an_ambiguous_word_lists_its_meanings);
  tcase_add_test(t, shipped_briefs_are_sound);
  tcase_add_loop_test(t, the_reader_knows_the_keys_of_the_schema, 0, ROWS(object_rows));
  tcase_add_loop_test(t, the_schema_knows_the_keys_of_the_reader, 0, ROWS(object_rows));
  tcase_add_loop_test(t, the_page_names_every_key, 0, ROWS(object_rows));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
