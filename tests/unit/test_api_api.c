/* The public API as a client sees it: answers, messages, and memory that runs out anywhere. */
#include <check.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

#include "base/arena.h"
#include "septum.h"

#define CATALOGS TEST_ROOT "/catalogs"
#define PRICES   TEST_ROOT "/prices/kestrel-yard.json"
#define BRIEF    TEST_ROOT "/docs/examples/one-hour.json"
#define WALL     "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16"

typedef struct heard {
  int errors, messages;
  int last_code;
  char last[400];
} heard;

static void listen(void *user, const septum_message *message) {
  heard *h = user;
  h->messages++;
  if (message->severity != 0) return;
  h->errors++;
  h->last_code = message->code;
  strncpy(h->last, message->text, sizeof h->last - 1);
}

static septum_options usual(void) {
  septum_options options;
  septum_options_init(&options);
  options.prices = PRICES;
  return options;
}

static septum *open_usual(heard *h) {
  septum *handle = NULL;
  ck_assert_int_eq(septum_open(CATALOGS, listen, h, &handle), SEPTUM_OK);
  ck_assert_ptr_nonnull(handle);
  return handle;
}

START_TEST(answers_outlive_their_handle) {
  heard h = {0};
  septum *handle = open_usual(&h);
  septum_options options = usual();
  septum_answer *answer = NULL;
  ck_assert_int_eq(septum_rate(handle, WALL, &options, &answer), SEPTUM_OK);
  septum_close(handle);
  ck_assert_ptr_nonnull(strstr(septum_answer_text(answer), WALL));
  ck_assert_ptr_nonnull(strstr(septum_answer_json(answer), "\"rating/1\""));
  ck_assert_ptr_nonnull(strstr(septum_answer_csv(answer), "section,item"));
  ck_assert_int_eq(h.errors, 0);
  septum_answer_free(answer);
}
END_TEST

/* Sizes and counts beside the brief: studs of 24 ft at 24 in are 13; a corner 2, a tee 1, a door 1
 * and two jambs of 20 gauge, 9 ft each. */
START_TEST(sizes_beside_the_brief) {
  heard h = {0};
  septum *handle = open_usual(&h);
  septum_options options = usual();
  septum_answer *answer = NULL;
  options.length = "24ft";
  options.height = "9'-0\"";
  options.corners = options.tees = options.doors = 1;
  options.units = SEPTUM_UNITS_US;
  const char *wall = "typex-16 | steel-92-18@610 | typex-16";
  ck_assert_int_eq(septum_rate(handle, wall, &options, &answer), SEPTUM_OK);
  const char *csv = septum_answer_csv(answer);
  ck_assert_ptr_nonnull(strstr(csv, "3-5/8 in 18 mil (25 ga) stud,material,153,ft"));
  ck_assert_ptr_nonnull(strstr(csv, "3-5/8 in 30 mil (20 ga drywall) stud,material,18,ft"));
  ck_assert_ptr_nonnull(strstr(septum_answer_text(answer), "24 ft 0 in x 9 ft 0 in"));
  septum_answer_free(answer);
  septum_close(handle);
  ck_assert_int_eq(h.errors, 0);
}
END_TEST

static const struct size_row {
  const char *name, *brief, *length, *height;
  int doors;
  const char *told;
} size_rows[] = {
    {"a length without unit", NULL, "30", NULL, -1, "the length: expected a length"},
    {"no length", NULL, "0ft", NULL, -1, "above 0, to 1000 m"},
    {"a tower", NULL, NULL, "31m", -1, "above 0, to 30 m"},
    {"fewer than no doors", NULL, NULL, NULL, -2, "the doors: expected 0 to 1000, found -2"},
    {"many doors", NULL, NULL, NULL, 1001, "found 1001"},
    {"openings larger than the wall", TEST_ROOT "/docs/examples/corridor.json", "1ft", "2ft", -1, "leave nothing of the wall"},
};

START_TEST(bad_sizes) {
  const struct size_row *row = &size_rows[_i];
  heard h = {0};
  septum *handle = open_usual(&h);
  septum_options options = usual();
  septum_answer *answer = NULL;
  options.brief = row->brief;
  options.length = row->length;
  options.height = row->height;
  options.doors = row->doors;
  ck_assert_int_eq(septum_rate(handle, WALL, &options, &answer), SEPTUM_USAGE);
  ck_assert_ptr_null(answer);
  ck_assert_msg(strstr(h.last, row->told) != NULL, "%s: %s", row->name, h.last);
  ck_assert_int_eq(h.last_code, 101);
  septum_close(handle);
}
END_TEST

static const struct bad_row {
  const char *name, *wall;
  septum_status status;
  int code; /* docs/errors.md */
} bad_rows[] = {
    {"not a wall", "typex-16 |", SEPTUM_DATA, 301},
    {"unknown id", "typex-16 | steel-92-81@610 | typex-16", SEPTUM_DATA, 302},
    {"channels on both sides", "typex-16 | rc@610 | wood-89@406 | rc@610 | typex-16", SEPTUM_DATA,
     303},
    {"no such file", "no/such/wall.json", SEPTUM_SYSTEM, 401},
    {"a brief for a wall", BRIEF, SEPTUM_DATA, 217},
};

START_TEST(bad_walls) {
  const struct bad_row *row = &bad_rows[_i];
  heard h = {0};
  septum *handle = open_usual(&h);
  septum_options options = usual();
  septum_answer *answer = NULL;
  ck_assert_msg(septum_rate(handle, row->wall, &options, &answer) == row->status, "%s: %s",
                row->name, h.last);
  ck_assert_ptr_null(answer);
  ck_assert_msg(h.last_code == row->code, "%s: %s", row->name, h.last);
  septum_close(handle);
}
END_TEST

START_TEST(a_faulty_folder_opens_nothing) {
  heard h = {0};
  septum *handle = NULL;
  ck_assert_int_eq(septum_open(TEST_ROOT "/no-such-folder", listen, &h, &handle), SEPTUM_SYSTEM);
  ck_assert_ptr_null(handle);
  ck_assert_int_gt(h.errors, 0);
  septum_close(handle);
  ck_assert_int_eq(septum_open(TEST_ROOT "/no-such-folder", NULL, NULL, &handle), SEPTUM_SYSTEM);
}
END_TEST

START_TEST(pick_answers_as_text_and_json) {
  heard h = {0};
  septum *handle = open_usual(&h);
  septum_options options = usual();
  septum_answer *answer = NULL;
  ck_assert_int_eq(septum_pick(handle, BRIEF, &options, &answer), SEPTUM_OK);
  ck_assert_ptr_nonnull(strstr(septum_answer_json(answer), "\"status\": \"optimal\""));
  septum_answer_free(answer);
  septum_close(handle);
}
END_TEST

START_TEST(null_is_fine) {
  septum_close(NULL);
  septum_answer_free(NULL);
  ck_assert_str_eq(septum_version(), SEPTUM_VERSION);
}
END_TEST

typedef septum_status (*try_call)(septum *handle, const septum_options *options,
                                  septum_answer **out);

static septum_status try_rate(septum *handle, const septum_options *options, septum_answer **out) {
  septum_options judged = *options;
  judged.brief = BRIEF;
  return septum_rate(handle, WALL, &judged, out);
}

static septum_status try_pick(septum *handle, const septum_options *options, septum_answer **out) {
  return septum_pick(handle, BRIEF, options, out);
}

/* Opens and calls with the n-th allocation failing; true when nothing failed. */
static bool try_all(try_call try, long n) {
  heard h = {0};
  septum *handle = NULL;
  septum_answer *answer = NULL;
  septum_options options = usual();
  arena_fail_at(n);
  septum_status status = septum_open(CATALOGS, listen, &h, &handle);
  if (status == SEPTUM_OK) status = try(handle, &options, &answer);
  arena_fail_at(0);
  bool failed = h.errors > 0;
  if (failed) {
    ck_assert_int_eq(status, SEPTUM_SYSTEM);
    ck_assert_int_eq(h.last_code, 403);
    ck_assert_ptr_null(answer);
  } else
    ck_assert_int_eq(status, SEPTUM_OK);
  septum_answer_free(answer);
  septum_close(handle);
  return !failed;
}

/* Every one of the first `each` allocations fails once, then ever fewer of the many that follow. */
static void fail_anywhere(try_call try, long each, long growth_percent) {
  enum { MANY = 100000000 };
  long n = 1;
  long failures = 0;
  while (n < MANY && !try_all(try, n)) {
    failures++;
    n = n < each ? n + 1 : n + n * growth_percent / 100;
  }
  ck_assert_int_gt((int)failures, (int)each);
  ck_assert_int_lt((int)n, MANY);
}

START_TEST(memory_runs_out_in_rate) {
  fail_anywhere(try_rate, 100, 8);
}
END_TEST

START_TEST(memory_runs_out_in_pick) {
  fail_anywhere(try_pick, 20, 20);
}
END_TEST

int main(void) {
  Suite *suite = suite_create("api");
  TCase *cases = tcase_create("api");
  tcase_set_timeout(cases, 300);
  tcase_add_test(cases, answers_outlive_their_handle);
  tcase_add_loop_test(cases, bad_walls, 0, (int)(sizeof bad_rows / sizeof bad_rows[0]));
  tcase_add_test(cases, sizes_beside_the_brief);
  tcase_add_loop_test(cases, bad_sizes, 0, (int)(sizeof size_rows / sizeof size_rows[0]));
  tcase_add_test(cases, a_faulty_folder_opens_nothing);
  tcase_add_test(cases, pick_answers_as_text_and_json);
  tcase_add_test(cases, null_is_fine);
  suite_add_tcase(suite, cases);
  TCase *memory = tcase_create("memory");
  tcase_set_timeout(memory, 300);
  tcase_add_test(memory, memory_runs_out_in_rate);
  tcase_add_test(memory, memory_runs_out_in_pick);
  suite_add_tcase(suite, memory);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
