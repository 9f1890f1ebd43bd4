/* Test reports (report/1): what is read, what is refused, and which walls a report stands for. */
#include <stdlib.h>
#include <string.h>

#include "input/rows.h"
#include "shop.h"
#include "wall/tested.h"

#define RECORD(wall, more)                                                                         \
  "{\"septum\":\"report/1\",\"records\":[{\"number\":\"T-1\",\"laboratory\":\"an invented one\"," \
  "\"date\":\"2031-02-11\",\"wall\":" wall ",\"stc\":55" more "}]}"
#define PLAIN "\"2x 5/8X | RC@24 | 2x4@16, R13 | 5/8X\""
#define CURVE(rest)                                                                                \
  ",\"tl_db\":{\"100\":20,\"125\":23,\"160\":28,\"200\":32,\"250\":36,\"315\":40,\"400\":43,"    \
  "\"500\":46,\"630\":49,\"800\":52,\"1000\":54,\"1250\":56,\"1600\":57,\"2000\":56,"            \
  "\"2500\":54,\"3150\":57" rest "}"

static bool read(const char *json, tested_wall **out, size_t *count) {
  const json_value *root = json_parse(memory, &faults, "report.json", json, strlen(json));
  ck_assert_ptr_nonnull(root);
  return tested_read(memory, &faults, shop, root, out, count);
}

START_TEST(a_report) {
  tested_wall *t;
  size_t n;
  ck_assert(read(RECORD(PLAIN, CURVE(",\"4000\":60")), &t, &n));
  ck_assert_int_eq((int)n, 1);
  ck_assert_str_eq(t->row.id, "T-1");
  ck_assert_str_eq(t->row.name, "test report T-1");
  ck_assert_str_eq(t->row.source, "an invented one, 2031-02-11");
  ck_assert_int_eq(t->row.stc, 55);
  ck_assert_double_eq(t->row.stc_sd, 1.2); /* common practice, no source: a test of one wall */
  ck_assert_str_eq(line_print(memory, shop, t->row.tested),
                   "2*typex-16 | rc@610 | wood-89@406, glass-89 | typex-16");
  ck_assert(t->has_bands);
  ck_assert_double_eq(t->tl_db[BAND_100], 20);
  ck_assert_double_eq(t->tl_db[0], 20);         /* below what is given: its nearest */
  ck_assert_double_eq(t->tl_db[BANDS - 1], 60); /* above */
}
END_TEST

/* The mount of a row stands on side A, however the report was written. */
START_TEST(turned) {
  tested_wall *t;
  size_t n;
  ck_assert(read(RECORD("\"5/8X | 2x4@16, R13 | RC@24 | 2x 5/8X\"", ",\"sd\":2"), &t, &n));
  ck_assert_str_eq(line_print(memory, shop, t->row.tested),
                   "2*typex-16 | rc@610 | wood-89@406, glass-89 | typex-16");
  ck_assert_double_eq(t->row.stc_sd, 2);
  ck_assert(!t->has_bands);
}
END_TEST

START_TEST(wall_as_an_object) {
  tested_wall *t;
  size_t n;
  ck_assert(read(RECORD("{\"septum\":\"wall/1\",\"side_a\":[\"typex-16\"],\"side_b\":[\"typex-16\"],"
                        "\"frame\":{\"id\":\"2x4\",\"spacing_mm\":406}}",
                        ""),
                 &t, &n));
  ck_assert_str_eq(line_print(memory, shop, t->row.tested), "typex-16 | wood-89@406 | typex-16");
}
END_TEST

static const struct bad_row {
  const char *json;
  error_code code;
  const char *path, *words;
} bad_rows[] = {
    {RECORD("\"5/8 | 2x4@16 | 5/8X\"", ""), ERROR_WALL_UNKNOWN_ID, "$.records[0].wall",
     "column 1: expected a board or membrane, \"5/8\" may mean gyp-16 or typex-16"},
    {RECORD("7", ""), ERROR_FIELD_TYPE, "$.records[0].wall", "must be a wall line"},
    {RECORD("\"5/8X | rc@610 | 2x4@16 | rc@610 | 5/8X\"", ""), ERROR_WALL_ILLEGAL,
     "$.records[0].wall", ""},
    {RECORD(PLAIN, ",\"sd\":0"), ERROR_FIELD_RANGE, "$.records[0].sd", ""},
    {RECORD(PLAIN, CURVE("")), ERROR_FIELD_MISSING, "$.records[0].tl_db", "4000 Hz"},
    {RECORD(PLAIN, CURVE(",\"4000\":60,\"4100\":60")), ERROR_FIELD_UNKNOWN,
     "tl_db[\"4100\"]", "third-octave band"},
    {RECORD(PLAIN, CURVE(",\"4000\":600")), ERROR_FIELD_RANGE, "tl_db[\"4000\"]", "150 dB"},
    {RECORD(PLAIN, ",\"tl_db\":[1]"), ERROR_FIELD_TYPE, "$.records[0].tl_db", "object of bands"},
    {"{\"septum\":\"report/1\",\"records\":[{\"number\":\"T-1\"}]}", ERROR_FIELD_MISSING,
     "$.records[0]", ""},
    {"{\"septum\":\"report/1\",\"records\":7}", ERROR_FIELD_TYPE, "$.records", ""},
};

START_TEST(refused) {
  const struct bad_row *row = &bad_rows[_i];
  tested_wall *t;
  size_t n;
  ck_assert(!read(row->json, &t, &n));
  bool met = false;
  for (size_t i = 0; i < faults.count; i++) {
    const diag *d = &faults.items[i];
    bool there = d->place.path && strstr(d->place.path, row->path) != NULL;
    met = met || (d->code == row->code && there && strstr(d->message, row->words) != NULL);
  }
  text all;
  text_init(&all, memory, 4000);
  for (size_t i = 0; i < faults.count; i++) {
    diag_print(&all, &faults.items[i]);
    text_put(&all, "\n");
  }
  ck_assert_msg(met, "expected %d at %s, found:\n%s", (int)row->code, row->path, all.data);
}
END_TEST

int main(void) {
  Suite *s = suite_create("test reports");
  TCase *t = tcase_create("test reports");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, a_report);
  tcase_add_test(t, turned);
  tcase_add_test(t, wall_as_an_object);
  tcase_add_loop_test(t, refused, 0, (int)(sizeof bad_rows / sizeof bad_rows[0]));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad ? EXIT_FAILURE : EXIT_SUCCESS;
}
