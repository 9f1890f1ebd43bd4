/* Files: read whole with a limit, written whole or not at all. */
#include "base/file.h"

#include <check.h>
#include <dirent.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

static jmp_buf out_of_memory;
static arena *memory;
static diag_list list;
static const char *folder;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&list, memory);
  char *name = arena_alloc(memory, 100);
  (void)snprintf(name, 100, "/tmp/septum-test-XXXXXX");
  folder = mkdtemp(name);
  ck_assert_ptr_nonnull(folder);
}

static int count_files(void) {
  int n = 0;
  DIR *d = opendir(folder);
  for (struct dirent *e; (e = readdir(d)) != NULL;) n += e->d_name[0] != '.';
  (void)closedir(d);
  return n;
}

static void teardown(void) {
  DIR *d = opendir(folder);
  for (struct dirent *e; (e = readdir(d)) != NULL;)
    if (e->d_name[0] != '.') (void)remove(file_join(memory, folder, e->d_name));
  (void)closedir(d);
  (void)rmdir(folder);
  arena_free(memory);
}

static const char *in_folder(const char *name) {
  return file_join(memory, folder, name);
}

static const size_t lengths[] = {0, 1, 100, 16383, 16384, 16385, 300000};

START_TEST(what_is_written_reads_back) {
  size_t len = lengths[_i], found = 99;
  char *bytes = arena_alloc(memory, len + 1);
  for (size_t i = 0; i < len; i++) bytes[i] = (char)(i * 7);
  ck_assert(file_write(memory, &list, in_folder("f"), bytes, len));
  char *back = file_read(memory, &list, in_folder("f"), len, &found);
  ck_assert_ptr_nonnull(back);
  ck_assert_uint_eq(found, len);
  ck_assert(memcmp(back, bytes, len) == 0);
  ck_assert_int_eq(back[len], 0);
  ck_assert_int_eq(count_files(), 1);
  ck_assert_uint_eq(list.count, 0);
}
END_TEST

START_TEST(a_file_beyond_the_limit_is_refused) {
  size_t len;
  ck_assert(file_write(memory, &list, in_folder("f"), "12345", 5));
  ck_assert_ptr_null(file_read(memory, &list, in_folder("f"), 4, &len));
  ck_assert_int_eq(list.items[0].code, ERROR_JSON_LIMIT);
  /* a stream has no size beforehand */
  ck_assert_ptr_null(file_read(memory, &list, "/dev/zero", 100000, &len));
  ck_assert_int_eq(list.items[1].code, ERROR_JSON_LIMIT);
}
END_TEST

START_TEST(what_cannot_be_read_is_reported) {
  size_t len;
  ck_assert_ptr_null(file_read(memory, &list, folder, 100, &len));
  ck_assert_ptr_null(file_read(memory, &list, in_folder("none"), 100, &len));
  ck_assert_uint_eq(list.errors, 2);
  ck_assert_int_eq(list.worst, STATUS_SYSTEM);
  ck_assert_str_eq(list.items[0].place.file, folder);
}
END_TEST

/* The descriptor is closed before the jump: after many failures there is still one to open. */
START_TEST(memory_that_runs_out_leaves_no_open_file) {
  size_t len;
  ck_assert(file_write(memory, &list, in_folder("f"), "12345", 5));
  const char *volatile path = in_folder("f");
  struct rlimit few = {32, 32};
  ck_assert_int_eq(setrlimit(RLIMIT_NOFILE, &few), 0);
  for (volatile int i = 0; i < 100; i++) {
    if (setjmp(out_of_memory) == 0) {
      arena_fail_at(1);
      (void)file_read(memory, &list, path, 100, &len);
      ck_abort_msg("the allocation fails");
    }
  }
  ck_assert_uint_eq(list.errors, 0);
  ck_assert_ptr_nonnull(file_read(memory, &list, path, 100, &len));
}
END_TEST

START_TEST(a_failed_write_leaves_the_old_file) {
  size_t len;
  ck_assert(file_write(memory, &list, in_folder("f"), "old", 3));
  struct rlimit small = {1000, RLIM_INFINITY};
  char *large = arena_alloc(memory, 100000);
  (void)signal(SIGXFSZ, SIG_IGN);
  ck_assert_int_eq(setrlimit(RLIMIT_FSIZE, &small), 0);
  ck_assert(!file_write(memory, &list, in_folder("f"), large, 100000));
  ck_assert_int_eq(list.items[0].code, ERROR_SYSTEM_WRITE);
  ck_assert_str_eq(file_read(memory, &list, in_folder("f"), 100, &len), "old");
  ck_assert_int_eq(count_files(), 1);
}
END_TEST

START_TEST(what_cannot_be_written_is_reported) {
  ck_assert(!file_write(memory, &list, folder, "x", 1));
  ck_assert(!file_write(memory, &list, in_folder("none/f"), "x", 1));
  ck_assert(!file_write(memory, &list, "/dev/full", "x", 1));
  ck_assert_uint_eq(list.errors, 3);
  ck_assert_int_eq(count_files(), 0);
}
END_TEST

START_TEST(devices_are_written_to) {
  ck_assert(file_write(memory, &list, "/dev/null", "x", 1));
}
END_TEST

START_TEST(a_link_stays_and_its_target_is_replaced) {
  size_t len;
  struct stat info;
  ck_assert(file_write(memory, &list, in_folder("target"), "old", 3));
  ck_assert_int_eq(symlink("target", in_folder("link")), 0);
  ck_assert(file_write(memory, &list, in_folder("link"), "new", 3));
  ck_assert_int_eq(lstat(in_folder("link"), &info), 0);
  ck_assert(S_ISLNK(info.st_mode));
  ck_assert_str_eq(file_read(memory, &list, in_folder("target"), 100, &len), "new");
}
END_TEST

START_TEST(permissions_are_kept) {
  struct stat info;
  ck_assert(file_write(memory, &list, in_folder("f"), "old", 3));
  ck_assert_int_eq(chmod(in_folder("f"), 0640), 0);
  ck_assert(file_write(memory, &list, in_folder("f"), "new", 3));
  ck_assert_int_eq(stat(in_folder("f"), &info), 0);
  ck_assert_int_eq(info.st_mode & 0777, 0640);
}
END_TEST

static const struct name_row {
  const char *file, *relative, *beside;
} name_rows[] = {
    {"a/b/brief.json", "prices.json", "a/b/prices.json"},
    {"brief.json", "prices.json", "prices.json"},
    {"/brief.json", "p.json", "/p.json"},
    {"a/brief.json", "/x/p.json", "/x/p.json"},
    {NULL, "p.json", "p.json"},
    {"a/b.json", "../p.json", "a/../p.json"},
};

START_TEST(names_beside) {
  const struct name_row *row = &name_rows[_i];
  ck_assert_str_eq(file_beside(memory, row->file, row->relative), row->beside);
}
END_TEST

START_TEST(joined_names) {
  ck_assert_str_eq(file_join(memory, "a", "b"), "a/b");
  ck_assert_str_eq(file_join(memory, "a/", "b"), "a/b");
  ck_assert_str_eq(file_join(memory, "", "b"), "b");
  ck_assert(file_exists(folder));
  ck_assert(!file_exists(in_folder("none")));
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("file");
  TCase *t = tcase_create("file");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, what_is_written_reads_back, 0, ROWS(lengths));
  tcase_add_test(t, a_file_beyond_the_limit_is_refused);
  tcase_add_test(t, what_cannot_be_read_is_reported);
  tcase_add_test(t, memory_that_runs_out_leaves_no_open_file);
  tcase_add_test(t, a_failed_write_leaves_the_old_file);
  tcase_add_test(t, what_cannot_be_written_is_reported);
  tcase_add_test(t, devices_are_written_to);
  tcase_add_test(t, a_link_stays_and_its_target_is_replaced);
  tcase_add_test(t, permissions_are_kept);
  tcase_add_loop_test(t, names_beside, 0, ROWS(name_rows));
  tcase_add_test(t, joined_names);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
