/* Sheets before they are written: text of cells, references, tables. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "report/markup.h"
#include "report/sheet.h"

static arena *memory;
static jmp_buf no_memory;

static void open_memory(void) {
  memory = arena_create(0, &no_memory);
  ck_assert_ptr_nonnull(memory);
}

static void close_memory(void) {
  arena_free(memory);
}

/* ---- text of cells ---- */

#define GONE "\xEF\xBF\xBD"

static const struct {
  const char *name, *given, *cell;
} texts[] = {
    {"nothing", NULL, ""},
    {"plain", "=1+1 <b> \"&\"", "=1+1 <b> \"&\""},
    {"lines", "one\n\ttwo", "one\n\ttwo"},
    {"carriage return", "one\r\ntwo", "one \ntwo"},
    {"control", "a\001b\033c\177", "a" GONE "b" GONE "c" GONE},
    {"not UTF-8", "a\xFFz\xC3", "a" GONE "z" GONE},
    {"half a pair", "\xED\xA0\x80", GONE GONE GONE},
    {"no character", "\xEF\xBF\xBF", GONE},
    {"turned round", "\xE2\x80\xAE" "abc", GONE "abc"},
    {"right to left", "\xD7\xA7\xD7\x99\xD7\xA8", "\xD7\xA7\xD7\x99\xD7\xA8"},
    /* ECMA-376, 22.9.2.19 ST_Xstring: _xHHHH_ is the character of that number, _x005F_ the line. */
    {"like an escape", "_x0041_", "_x005F_x0041_"},
    {"two that share a line", "_x0041_x0042_", "_x005F_x0041_x005F_x0042_"},
    {"guarded already", "_x005F_", "_x005F_x005F_"},
    {"no escape", "_x41_ _X0041_ _x00410_ _x0041", "_x41_ _X0041_ _x00410_ _x0041"},
};

START_TEST(cells_hold_text) {
  ck_assert_msg(strcmp(markup_cell(memory, texts[_i].given), texts[_i].cell) == 0, "%s: %s",
                texts[_i].name, markup_cell(memory, texts[_i].given));
}
END_TEST

/* `copies` of a letter. */
static char *many(const char *letter, int copies) {
  size_t n = strlen(letter);
  char *all = arena_alloc(memory, n * (size_t)copies + 1);
  for (int i = 0; i < copies; i++) memcpy(all + (size_t)i * n, letter, n);
  all[n * (size_t)copies] = '\0';
  return all;
}

static const struct {
  const char *name, *letter;
  int fit, kept; /* so many fit whole; of more so many are kept */
} lengths[] = {
    {"one byte", "w", MARKUP_CELL_UNITS, MARKUP_CELL_UNITS - 1},
    {"two bytes", "\xC3\xA4", MARKUP_CELL_UNITS, MARKUP_CELL_UNITS - 1},
    {"two units of UTF-16", "\xF0\x9F\xA7\xB1", MARKUP_CELL_UNITS / 2, MARKUP_CELL_UNITS / 2},
};

START_TEST(cells_are_cut) {
  static const char ellipsis[] = "\xE2\x80\xA6";
  const char *letter = lengths[_i].letter;
  const char *whole = many(letter, lengths[_i].fit);
  ck_assert_str_eq(markup_cell(memory, whole), whole);
  const char *cut = markup_cell(memory, many(letter, lengths[_i].fit + 1));
  size_t kept = strlen(letter) * (size_t)lengths[_i].kept;
  ck_assert_uint_eq(strlen(cut), kept + strlen(ellipsis));
  ck_assert_str_eq(cut + kept, ellipsis);
}
END_TEST

START_TEST(cells_hold_so_many_lines) {
  const char *full = many("\n", MARKUP_CELL_LINES);
  ck_assert_ptr_eq(markup_cell(memory, full), full);
  const char *over = markup_cell(memory, many("\n", MARKUP_CELL_LINES + 2));
  ck_assert_uint_eq(strlen(over), MARKUP_CELL_LINES + 2);
  ck_assert_uint_eq(strspn(over, "\n"), MARKUP_CELL_LINES);
  ck_assert_str_eq(over + MARKUP_CELL_LINES, "  ");
}
END_TEST

/* ---- references ---- */

static const struct {
  int row, column;
  const char *at, *fixed;
} places[] = {{0, 0, "A1", "$A$1"},   {9, 25, "Z10", "$Z$10"},  {4, 26, "AA5", "$AA$5"},
              {4, 39, "AN5", "$AN$5"}, {99, 51, "AZ100", "$AZ$100"}, {0, 52, "BA1", "$BA$1"}};

START_TEST(references_name_cells) {
  sheet s;
  sheet_init(&s, memory, "S");
  ck_assert_str_eq(sheet_at(&s, places[_i].row, places[_i].column), places[_i].at);
  ck_assert_str_eq(sheet_fixed_at(&s, places[_i].row, places[_i].column), places[_i].fixed);
}
END_TEST

/* ---- tables ---- */

START_TEST(tables_fill_from_the_left) {
  static const sheet_column columns[] = {
      {"What", 20, SHEET_WRAP}, {"Each, USD", 10, SHEET_MONEY}, {"Sum, USD", 10, SHEET_MONEY}};
  sheet s;
  sheet_init(&s, memory, "S");
  sheet_table(&s, 2, columns, 3);
  sheet_end_table(&s);
  ck_assert_int_eq(s.filter_last, 0); /* nothing to filter yet */
  sheet_put(&s, "=1+1");
  sheet_put_cents(&s, 1999);
  sheet_put_formula(&s, "=B4", 19.99);
  sheet_end_row(&s);
  sheet_put(&s, "");
  sheet_put_if(&s, false, 3);
  sheet_put_figure(&s, NAN);
  sheet_end_row(&s);
  sheet_end_table(&s);
  ck_assert_int_eq(s.head, 2);
  ck_assert_int_eq(s.filter_last, 4);
  ck_assert_uint_eq(s.count, 6); /* three heads; of the second row nothing */
  ck_assert_str_eq(s.cells[3].text, "=1+1");
  ck_assert_ptr_null(s.cells[3].formula);
  ck_assert_int_eq(s.cells[3].style, SHEET_WRAP);
  ck_assert(s.cells[4].number == 19.99 && s.cells[4].style == SHEET_MONEY && s.cells[4].column == 1);
  ck_assert_str_eq(s.cells[5].formula, "=B4");
  ck_assert_str_eq(sheet_sum(&s, 2, s.head + 1, s.row - 1), "=SUM(C4:C5)");
}
END_TEST

/* Sums leave last bits behind: 2.7 m are 8.858...; 9 ft written in metres comes back as
 * 8.999999999999998. */
START_TEST(numbers_are_tidy) {
  sheet s;
  sheet_init(&s, memory, "S");
  sheet_number(&s, 0, 0, SHEET_QUANTITY, 8.999999999999998);
  sheet_number(&s, 1, 0, SHEET_QUANTITY, 1234567.8900000001);
  sheet_number(&s, 2, 0, SHEET_QUANTITY, -0.1);
  ck_assert(s.cells[0].number == 9);
  ck_assert(s.cells[1].number == 1234567.8900000001);
  ck_assert(s.cells[2].number == -0.1);
}
END_TEST

START_TEST(books_hold_sheets_in_order) {
  sheet_book *b = arena_alloc(memory, sizeof *b);
  sheet_book_init(b, memory, true);
  sheet *one = sheet_book_add(b, "One"), *two = sheet_book_add(b, "Two");
  ck_assert_int_eq(b->count, 2);
  ck_assert_ptr_eq(one, &b->sheet[0]);
  ck_assert(two->a4 && two->head < 0);
}
END_TEST

#define ROWS(array) ((int)(sizeof(array) / sizeof(array)[0]))

int main(void) {
  Suite *suite = suite_create("report_sheet");
  TCase *cells = tcase_create("cells");
  tcase_add_checked_fixture(cells, open_memory, close_memory);
  tcase_add_loop_test(cells, cells_hold_text, 0, ROWS(texts));
  tcase_add_loop_test(cells, cells_are_cut, 0, ROWS(lengths));
  tcase_add_test(cells, cells_hold_so_many_lines);
  tcase_add_loop_test(cells, references_name_cells, 0, ROWS(places));
  tcase_add_test(cells, tables_fill_from_the_left);
  tcase_add_test(cells, numbers_are_tidy);
  tcase_add_test(cells, books_hold_sheets_in_order);
  suite_add_tcase(suite, cells);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
