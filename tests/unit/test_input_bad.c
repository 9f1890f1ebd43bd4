/* Bad files: every tests/bad/NAME.json is read as what it claims to be (a brief when it claims
 * nothing), every NAME.csv as a wall schedule, and the messages must be the lines of NAME.expect. A
 * new case needs two files and no compiler. With SEPTUM_REWRITE set in the environment the .expect
 * files are written instead; look at the difference before keeping it. */
#include <check.h>
#include <dirent.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "base/file.h"
#include "input/catalog.h"
#include "input/schedule.h"

#define FOLDER TEST_ROOT "/tests/bad/"
enum { CASES_MAX = 1000, FILE_BYTES = 16 << 20 };

static jmp_buf out_of_memory;
static const char *names[CASES_MAX];
static int count;

static int by_name(const void *a, const void *b) {
  return strcmp(*(const char *const *)a, *(const char *const *)b);
}

/* The project of the schedules: its rows must say storey and height. */
static const char project_file[] =
    "{\"septum\": \"project/1\", \"walls\": \"walls.csv\", \"code\": \"ibc\", \"same_framing\": "
    "\"storey\", \"types\": {\"P1\": \"typex-16 | wood-89@406 | typex-16\"}}";
static const catalog *shipped; /* read once, outside of any test */

/* Whole names, sorted. */
static void find_cases(arena *a) {
  DIR *folder = opendir(FOLDER);
  if (!folder) return;
  for (struct dirent *e; (e = readdir(folder)) != NULL && count < CASES_MAX;) {
    const char *dot = strrchr(e->d_name, '.');
    if (dot && (text_equal(dot, ".json") || text_equal(dot, ".csv")))
      names[count++] = text_copy(a, e->d_name);
  }
  (void)closedir(folder);
  qsort(names, (size_t)count, sizeof *names, by_name);
}

static bool is_catalog_kind(const char *mark) {
  static const char *const kinds[] = {"boards/", "frames/",  "fills/",     "mounts/",
                                      "fire/",   "targets/", "published/", "acoustics/"};
  for (size_t i = 0; i < sizeof kinds / sizeof kinds[0]; i++)
    if (text_starts(mark, kinds[i])) return true;
  return false;
}

static bool read_json(arena *a, diag_list *faults, const char *file, const char *bytes,
                      size_t len) {
  const json_value *root = json_parse(a, faults, file, bytes, len);
  const json_value *mark = root ? json_get(root, "septum") : NULL;
  const char *kind = mark && mark->kind == JSON_STRING ? mark->string : "";
  if (!root) return false;
  if (is_catalog_kind(kind)) return catalog_check_file(a, faults, root);
  if (text_starts(kind, "project/"))
    return project_read(a, faults, NULL, root, arena_alloc(a, sizeof(project)));
  return job_read(a, faults, NULL, root, true, arena_alloc(a, sizeof(brief)));
}

static bool read_csv(arena *a, diag_list *faults, const char *file, const char *bytes, size_t len) {
  project *p = arena_alloc(a, sizeof *p);
  const json_value *root = json_parse(a, faults, "p.json", project_file, sizeof project_file - 1);
  ck_assert(root != NULL && project_read(a, faults, shipped, root, p));
  const csv_table *t = csv_parse(a, faults, file, bytes, len);
  return t != NULL && schedule_read(a, faults, shipped, p, t) != NULL;
}

/* The faults of one file, a line each, under its bare name. */
static const char *messages_of(arena *a, const char *name) {
  diag_list faults;
  size_t len = 0;
  text lines;
  diag_init(&faults, a);
  text_init(&lines, a, FILE_BYTES);
  const char *bytes = file_read(a, &faults, file_join(a, FOLDER, name), FILE_BYTES, &len);
  ck_assert_msg(bytes != NULL, "%s can be read", name);
  bool csv = text_equal(strrchr(name, '.'), ".csv");
  bool sound = (csv ? read_csv : read_json)(a, &faults, name, bytes, len);
  ck_assert_msg(sound == (faults.errors == 0), "%s: the answer and the messages agree", name);
  ck_assert_msg(faults.count > 0, "%s: at least one message", name);
  for (size_t i = 0; i < faults.count; i++) {
    diag_print(&lines, &faults.items[i]);
    text_char(&lines, '\n');
  }
  return lines.data;
}

START_TEST(the_messages_are_those_expected) {
  arena *a = arena_create(0, &out_of_memory);
  diag_list faults;
  size_t len = 0;
  diag_init(&faults, a);
  int stem = (int)(strrchr(names[_i], '.') - names[_i]);
  const char *expect = text_format(a, FOLDER "%.*s.expect", stem, names[_i]);
  const char *found = messages_of(a, names[_i]);
  if (getenv("SEPTUM_REWRITE")) ck_assert(file_write(a, &faults, expect, found, strlen(found)));
  const char *expected = file_read(a, &faults, expect, FILE_BYTES, &len);
  ck_assert_msg(expected != NULL, "%s can be read", expect);
  ck_assert_msg(text_equal(found, expected), "%s\nexpected:\n%sfound:\n%s", names[_i], expected,
                found);
  arena_free(a);
}
END_TEST

/* Memory may run out anywhere while a bad file is read: each time the jump is taken, and nothing
 * else is touched. */
START_TEST(memory_may_run_out_anywhere) {
  volatile long n = 1;
  for (;; n++) {
    arena *volatile a = arena_create(0, &out_of_memory);
    if (setjmp(out_of_memory) == 0) {
      arena_fail_at(n);
      (void)messages_of(a, "json-several-faults.json");
      (void)messages_of(a, "field-wrong-kinds.json");
      (void)messages_of(a, "project-several-faults.json");
      (void)messages_of(a, "schedule-cells.csv");
      arena_fail_at(0);
      arena_free(a);
      break;
    }
    arena_free(a);
  }
  ck_assert_int_gt(n, 50);
}
END_TEST

/* A file cut off anywhere, or with one byte changed, is read or refused, never more. */
START_TEST(damaged_files_are_refused_or_read) {
  static const char whole[] =
      "{\"septum\": \"brief/1\", \"title\": \"caf\xC3\xA9 \\ud83d\\ude00\", \"target\": "
      "{\"value\": 5.0e1, \"margin\": -0},\n"
      "\"only\": [\"rc\", \"wood-*\"], \"building\": {\"sprinklered\": true}, \"prices\": null}";
  static const char bytes[] = "{}[]\",:\\u0e-9.tn \n\x01\x80\xC3\xFF";
  for (size_t i = 0; i < sizeof whole; i++) {
    for (size_t k = 0; k < sizeof bytes; k++) {
      arena *a = arena_create(0, &out_of_memory);
      char damaged[sizeof whole];
      diag_list faults;
      brief b;
      diag_init(&faults, a);
      memcpy(damaged, whole, sizeof whole);
      if (k > 0) damaged[i] = bytes[k - 1];
      const json_value *root = json_parse(a, &faults, "f", damaged, k > 0 ? sizeof whole - 1 : i);
      if (root) (void)job_read(a, &faults, NULL, root, true, &b);
      if (!root && faults.errors == 0)
        ck_abort_msg("place %zu byte %zu: refused without a message", i, k);
      arena_free(a);
    }
  }
}
END_TEST

START_TEST(damaged_schedules_are_refused_or_read) {
  static const char whole[] = "id;storey;length (ft);height;target;fire;thickness_max\r\n"
                              "W1;2;12;9ft-6in;\"STC 50; Rw+C 48\";1-1/2 h;4-7/8in\r\n";
  static const char bytes[] = ";\",'-/ \n\x01\x80\xC3\xFF"
                              "09.RhiL";
  for (size_t i = 0; i < sizeof whole; i++) {
    for (size_t k = 0; k < sizeof bytes; k++) {
      arena *a = arena_create(0, &out_of_memory);
      char damaged[sizeof whole];
      diag_list faults;
      diag_init(&faults, a);
      memcpy(damaged, whole, sizeof whole);
      if (k > 0) damaged[i] = bytes[k - 1];
      bool read = read_csv(a, &faults, "f", damaged, k > 0 ? sizeof whole - 1 : i);
      if (read != (faults.errors == 0))
        ck_abort_msg("place %zu byte %zu: the answer and the messages agree", i, k);
      arena_free(a);
    }
  }
}
END_TEST

int main(void) {
  arena *a = arena_create(0, NULL);
  diag_list none;
  diag_init(&none, a);
  shipped = catalog_load(a, &none, TEST_ROOT "/catalogs");
  if (!shipped) return EXIT_FAILURE;
  find_cases(a);
  Suite *s = suite_create("bad files");
  TCase *t = tcase_create("bad files");
  tcase_set_timeout(t, 120);
  tcase_add_loop_test(t, the_messages_are_those_expected, 0, count);
  tcase_add_test(t, memory_may_run_out_anywhere);
  tcase_add_test(t, damaged_files_are_refused_or_read);
  tcase_add_test(t, damaged_schedules_are_refused_or_read);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  arena_free(a);
  return failed || count == 0 ? EXIT_FAILURE : EXIT_SUCCESS;
}
