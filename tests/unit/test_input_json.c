/* The JSON gate: values, places, paths. Grammar: RFC 8259. Refusals are cases in tests/bad. */
#include "input/json.h"

#include <check.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

static jmp_buf out_of_memory;
static arena *memory;
static diag_list faults;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
}
static void teardown(void) {
  arena_free(memory);
}

static const json_value *parse(const char *s) {
  return json_parse(memory, &faults, "f.json", s, strlen(s));
}

static const struct number_row {
  const char *written;
  double value;
} number_rows[] = {
    {"0", 0},
    {"-0", 0},
    {"7", 7},
    {"-12.5", -12.5},
    {"1e3", 1000},
    {"1E+3", 1000},
    {"25e-1", 2.5},
    {"0.1", 0.1},
    {"0.0000001", 1e-7},
    {"1e-400", 0},
    {"0e999", 0},
    {"1.7976931348623157e308", 1.7976931348623157e308},
    {"0.00001e312", 1e307},
    {"123456789012345678", 123456789012345678.0},
};

START_TEST(numbers) {
  const json_value *v = parse(number_rows[_i].written);
  ck_assert_msg(v != NULL, "%s", number_rows[_i].written);
  ck_assert_int_eq(v->kind, JSON_NUMBER);
  ck_assert_double_eq(v->number, number_rows[_i].value);
}
END_TEST

static const struct string_row {
  const char *written, *value;
} string_rows[] = {
    {"\"\"", ""},
    {"\"wall\"", "wall"},
    {"\"a\\\"b\\\\c\\/d\"", "a\"b\\c/d"},
    {"\"\\b\\f\\n\\r\\t\"", "\b\f\n\r\t"},
    {"\"\\u0041\\u00e9\\u20AC\"", "A\xC3\xA9\xE2\x82\xAC"},
    {"\"\\ud83d\\ude00\"", "\xF0\x9F\x98\x80"},
    {"\"caf\xC3\xA9 \xF0\x9F\x98\x80\"", "caf\xC3\xA9 \xF0\x9F\x98\x80"},
    {"\"\x7F\"", "\x7F"},
};

START_TEST(strings) {
  const json_value *v = parse(string_rows[_i].written);
  ck_assert_msg(v != NULL, "%s", string_rows[_i].written);
  ck_assert_int_eq(v->kind, JSON_STRING);
  ck_assert_str_eq(v->string, string_rows[_i].value);
}
END_TEST

START_TEST(words_and_empty_containers) {
  const json_value *v = parse(" [true, false, null, {}, [] ]\r\n");
  ck_assert_ptr_nonnull(v);
  ck_assert_uint_eq(v->count, 5);
  const json_value *x = v->first;
  ck_assert(x->kind == JSON_BOOL && x->boolean);
  x = x->next;
  ck_assert(x->kind == JSON_BOOL && !x->boolean);
  x = x->next;
  ck_assert(x->kind == JSON_NULL);
  x = x->next;
  ck_assert(x->kind == JSON_OBJECT && x->count == 0 && !x->first);
  x = x->next;
  ck_assert(x->kind == JSON_ARRAY && x->count == 0 && x->index == 4 && !x->next);
}
END_TEST

static const char sample[] =
    "{\n  \"a\": [1,\n    {\"b c\": \"x\"}],\n\t\"\\u0064\": {\"e\": true}, \"q\\\"\": 5\n}\n";

START_TEST(places_and_paths) {
  const json_value *root = parse(sample);
  ck_assert_ptr_nonnull(root);
  const json_value *b = json_get(json_get(root, "a")->first->next, "b c");
  ck_assert_int_eq(b->line, 3);
  ck_assert_int_eq(b->column, 13);
  ck_assert_int_eq(b->key_line, 3);
  ck_assert_int_eq(b->key_column, 6);
  ck_assert_str_eq(json_path(memory, b), "$.a[1][\"b c\"]");
  const json_value *e = json_get(json_get(root, "d"), "e");
  ck_assert_str_eq(json_path(memory, e), "$.d.e");
  ck_assert_int_eq(e->parent->key_column, 2);
  ck_assert_str_eq(json_path(memory, json_get(root, "q\"")), "$[\"q\\\"\"]");
  diag_place place = json_place(memory, e);
  ck_assert_str_eq(place.file, "f.json");
  ck_assert_int_eq(place.line, 4);
  ck_assert_str_eq(json_path(memory, root), "$");
}
END_TEST

START_TEST(keys_are_exact) {
  const json_value *root = parse("{\"Key\": 1, \"key\": 2, \"\": 3}");
  ck_assert_double_eq(json_get(root, "Key")->number, 1);
  ck_assert_double_eq(json_get(root, "key")->number, 2);
  ck_assert_double_eq(json_get(root, "")->number, 3);
  ck_assert_ptr_null(json_get(root, "KEY"));
  ck_assert_ptr_null(json_get(json_get(root, "key"), "x"));
}
END_TEST

/* 64 deep is read, 65 is not. */
START_TEST(depth) {
  char s[200];
  for (int deep = JSON_MAX_DEPTH; deep <= JSON_MAX_DEPTH + 1; deep++) {
    memset(s, '[', (size_t)deep);
    memset(s + deep, ']', (size_t)deep);
    s[2 * deep] = '\0';
    ck_assert((parse(s) != NULL) == (deep == JSON_MAX_DEPTH));
  }
  ck_assert_int_eq(faults.items[0].code, ERROR_JSON_LIMIT);
}
END_TEST

START_TEST(text_need_not_end_in_nul) {
  const char s[] = {'[', '1', ',', '2', ']', '9'};
  const json_value *v = json_parse(memory, &faults, "f", s, 5);
  ck_assert_ptr_nonnull(v);
  ck_assert_double_eq(v->first->next->number, 2);
  ck_assert_ptr_null(json_parse(memory, &faults, "f", s, 4));
  ck_assert_ptr_null(json_parse(memory, &faults, "f", s, 6));
}
END_TEST

/* Many keys, and a duplicate far from the first: found without comparing all with all. */
START_TEST(large_objects) {
  enum { KEYS = 200000 };
  text t;
  text_init(&t, memory, 1 << 24);
  text_char(&t, '{');
  for (int i = 0; i < KEYS; i++) text_putf(&t, "\"k%d\":%d,\n", i, i);
  text_put(&t, "\"last\":1");
  size_t sound = t.len;
  text_put(&t, ",\"k7\":0}");
  ck_assert_ptr_null(json_parse(memory, &faults, "f", t.data, t.len));
  ck_assert_uint_eq(faults.errors, 1);
  ck_assert_str_eq(faults.items[0].message, "the key \"k7\" stands already in line 8");
  t.data[sound] = '}';
  const json_value *v = json_parse(memory, &faults, "f", t.data, sound + 1);
  ck_assert_ptr_nonnull(v);
  ck_assert_uint_eq(v->count, KEYS + 1);
}
END_TEST

/* A list that is full of warnings hides no fault. */
START_TEST(a_full_list_of_messages_hides_nothing) {
  for (int i = 0; i < 300; i++)
    diag_add(&faults, DIAG_WARNING, ERROR_FIELD_RANGE, (diag_place){0}, "w");
  ck_assert_ptr_null(parse("{\"a\": 1, \"a\": 2}"));
  ck_assert_ptr_null(parse("{\"a\": 01}"));
  ck_assert_uint_eq(faults.errors, 2);
}
END_TEST

START_TEST(memory_may_run_out_anywhere) {
  volatile long n = 1;
  for (;; n++) {
    arena *volatile a = arena_create(0, &out_of_memory);
    if (setjmp(out_of_memory) == 0) {
      diag_list list;
      diag_init(&list, a);
      arena_fail_at(n);
      const json_value *v = json_parse(a, &list, "f.json", sample, sizeof sample - 1);
      arena_fail_at(0);
      ck_assert_ptr_nonnull(v);
      arena_free(a);
      break;
    }
    arena_free(a);
  }
  ck_assert_int_gt(n, 10);
}
END_TEST

START_TEST(kinds_of_files) {
  ck_assert(json_is(memory, &faults, parse("{\"septum\": \"brief/1\"}"), "brief"));
  ck_assert(!json_is(memory, &faults, parse("{\"septum\": \"brief/10\"}"), "brief"));
  ck_assert(!json_is(memory, &faults, parse("{}"), "brief"));
  ck_assert(!json_is(memory, &faults, parse("[]"), "brief"));
  ck_assert_uint_eq(faults.errors, 3);
  ck_assert_int_eq(faults.items[0].code, ERROR_FILE_KIND);
}
END_TEST

START_TEST(files_are_loaded) {
  const json_value *v = json_load(memory, &faults, TEST_ROOT "/catalogs/boards.json");
  ck_assert_ptr_nonnull(v);
  ck_assert_str_eq(v->file, TEST_ROOT "/catalogs/boards.json");
  ck_assert_ptr_null(json_load(memory, &faults, TEST_ROOT "/catalogs/none.json"));
  ck_assert_int_eq(faults.worst, STATUS_SYSTEM);
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("json");
  TCase *t = tcase_create("json");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_set_timeout(t, 60);
  tcase_add_loop_test(t, numbers, 0, ROWS(number_rows));
  tcase_add_loop_test(t, strings, 0, ROWS(string_rows));
  tcase_add_test(t, words_and_empty_containers);
  tcase_add_test(t, places_and_paths);
  tcase_add_test(t, keys_are_exact);
  tcase_add_test(t, depth);
  tcase_add_test(t, text_need_not_end_in_nul);
  tcase_add_test(t, large_objects);
  tcase_add_test(t, a_full_list_of_messages_hides_nothing);
  tcase_add_test(t, memory_may_run_out_anywhere);
  tcase_add_test(t, kinds_of_files);
  tcase_add_test(t, files_are_loaded);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
