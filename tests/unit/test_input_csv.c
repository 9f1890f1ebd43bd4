/* Tables in CSV (RFC 4180): what is read, what is refused and where, numbers, names of columns. */
#include <check.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "input/csv.h"

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

static csv_table *read_bytes(const char *bytes, size_t len) {
  return csv_parse(memory, &diags, "list.csv", bytes, len);
}

/* The table in one line: header, then rows with their number; cells in brackets. */
static const char *shown(const csv_table *t) {
  text out;
  text_init(&out, memory, 4000);
  for (size_t i = 0; i < t->columns; i++) text_putf(&out, "[%s]", t->header[i].text);
  for (size_t i = 0; i < t->count; i++) {
    text_putf(&out, " %d:", t->rows[i].number);
    for (size_t c = 0; c < t->columns; c++) text_putf(&out, "[%s]", t->rows[i].cell[c].text);
  }
  return out.data;
}

/* ---- what is read: RFC 4180 section 2 by number, and what spreadsheets do besides ---- */
static const struct read_row {
  const char *name, *bytes, *shown;
} read_rows[] = {
    {"rule 1: lines end in CR LF", "a,b\r\n1,2\r\n", "[a][b] 2:[1][2]"},
    {"rule 2: the last line without an end", "a,b\r\n1,2", "[a][b] 2:[1][2]"},
    {"rule 4: inner blanks stay", "a,b\r\n1 2,3", "[a][b] 2:[1 2][3]"},
    {"rule 5: quotes round a cell", "\"a\",\"b\"\r\n\"1\",\"2\"", "[a][b] 2:[1][2]"},
    {"rule 6: commas and line ends in quotes", "a,b\r\n\"1,5\",\"x\r\ny\"\r\n3,4",
     "[a][b] 2:[1,5][x\ny] 3:[3][4]"},
    {"rule 7: a doubled quote", "a\r\n\"4\"\" pipe\"", "[a] 2:[4\" pipe]"},
    {"LF alone", "a,b\n1,2\n", "[a][b] 2:[1][2]"},
    {"CR alone", "a,b\r1,2\r", "[a][b] 2:[1][2]"},
    {"a byte order mark",
     "\xEF\xBB\xBF"
     "a,b\r\n1,2",
     "[a][b] 2:[1][2]"},
    {"semicolons", "a;b\r\n1,5;2", "[a][b] 2:[1,5][2]"},
    {"tabs", "a\tb\r\n1,5\t", "[a][b] 2:[1,5][]"},
    {"a separator in a quoted header", "\"a;b;c\",d\r\n1,2", "[a;b;c][d] 2:[1][2]"},
    {"blank rows are passed over and counted", "\r\na,b\r\n\r\n,,\r\n1,2\r\n\r\n",
     "[a][b] 5:[1][2]"},
    {"a short row", "a,b,c\r\n1\r\n", "[a][b][c] 2:[1][][]"},
    {"empty cells behind the header", "a,b,,\r\n1,2,,\r\n", "[a][b] 2:[1][2]"},
    {"blanks round cells", " a , b\r\n 1 ,\" 2 \" ", "[a][b] 2:[1][ 2 ]"},
    {"a quote inside a bare cell", "a,b\r\n4\" pipe,2", "[a][b] 2:[4\" pipe][2]"},
    {"more than ASCII", "a\r\n\xC3\xA9t\xC3\xA9", "[a] 2:[\xC3\xA9t\xC3\xA9]"},
};

START_TEST(tables) {
  const struct read_row *row = &read_rows[_i];
  const csv_table *t = read_bytes(row->bytes, strlen(row->bytes));
  ck_assert_msg(t != NULL, "%s: %s", row->name, diags.count ? diags.items[0].message : "");
  const char *found = shown(t);
  ck_assert_msg(strcmp(found, row->shown) == 0, "%s: %s", row->name, found);
}
END_TEST

/* ---- what is refused ---- */
static const struct refusal {
  const char *name, *bytes;
  size_t len; /* 0 = up to the NUL */
  error_code code;
  int line, column;
  const char *path;
} refusals[] = {
    {"nothing", "", 0, ERROR_CSV_SYNTAX, 1, 1, NULL},
    {"blank lines alone", "\r\n\r\n,,\r\n", 0, ERROR_CSV_SYNTAX, 1, 1, NULL},
    {"an open quote", "a,b\r\n1,\"2\r\n3,4\r\n", 0, ERROR_CSV_SYNTAX, 2, 3, "B2 (b)"},
    {"text behind a quote", "a,b\r\n\"1\"x,2", 0, ERROR_CSV_SYNTAX, 2, 4, "A2 (a)"},
    {"too many cells", "a,b\r\n1,2,3", 0, ERROR_CSV_SYNTAX, 2, 5, "C2"},
    {"another encoding", "a,b\r\n1,\xE9", 0, ERROR_JSON_ENCODING, 2, 3, "B2 (b)"},
    {"a control character", "a,b\r\n1,x\x01", 0, ERROR_JSON_ENCODING, 2, 4, "B2 (b)"},
    {"a NUL", "a,b\r\n1,x\0y", 11, ERROR_JSON_ENCODING, 2, 4, "B2 (b)"},
    {"in a quoted cell, lines counted", "a,b\r\n\"1\r\n2\",\x01", 0, ERROR_JSON_ENCODING, 3, 4,
     "B2 (b)"},
};

START_TEST(refused) {
  const struct refusal *row = &refusals[_i];
  const csv_table *t = read_bytes(row->bytes, row->len ? row->len : strlen(row->bytes));
  ck_assert_msg(t == NULL && diags.count > 0, "%s: was read", row->name);
  const diag *d = &diags.items[0];
  ck_assert_msg(d->code == row->code, "%s: %s", row->name, d->message);
  ck_assert_msg(d->place.line == row->line && d->place.column == row->column, "%s: %d:%d",
                row->name, d->place.line, d->place.column);
  ck_assert_msg(row->path == NULL ? d->place.path == NULL : strcmp(d->place.path, row->path) == 0,
                "%s: %s", row->name, d->place.path ? d->place.path : "no cell");
}
END_TEST

START_TEST(all_faults_at_once) {
  const char *bytes = "a,b\r\n1,\"2\"x\r\n1,2,3\r\n\x01,2\r\n";
  ck_assert_ptr_null(read_bytes(bytes, strlen(bytes)));
  ck_assert_uint_eq(diags.count, 3);
}
END_TEST

/* ---- limits ---- */

START_TEST(limit_of_columns) {
  text t;
  text_init(&t, memory, 4 * CSV_MAX_COLUMNS);
  for (int i = 0; i < CSV_MAX_COLUMNS; i++) text_put(&t, i ? ",a" : "a");
  ck_assert_ptr_nonnull(read_bytes(t.data, t.len));
  text_put(&t, ",a");
  ck_assert_ptr_null(read_bytes(t.data, t.len));
  ck_assert_int_eq(diags.items[0].code, ERROR_JSON_LIMIT);
}
END_TEST

START_TEST(limit_of_cells) {
  text t;
  text_init(&t, memory, 2 * CSV_MAX_CELL);
  text_put(&t, "a\n");
  for (int i = 0; i < CSV_MAX_CELL; i++) text_char(&t, 'x');
  ck_assert_ptr_nonnull(read_bytes(t.data, t.len));
  text_char(&t, 'x');
  ck_assert_ptr_null(read_bytes(t.data, t.len));
  ck_assert_int_eq(diags.items[0].code, ERROR_JSON_LIMIT);
}
END_TEST

START_TEST(limit_of_rows) {
  text t;
  text_init(&t, memory, 4 * CSV_MAX_ROWS);
  text_put(&t, "a\n");
  for (int i = 0; i < CSV_MAX_ROWS; i++) text_put(&t, "1\n");
  ck_assert_ptr_nonnull(read_bytes(t.data, t.len));
  text_put(&t, "1\n");
  ck_assert_ptr_null(read_bytes(t.data, t.len));
  ck_assert_int_eq(diags.items[0].code, ERROR_JSON_LIMIT);
}
END_TEST

/* ---- numbers ---- */
static const struct number_row {
  const char *cell;
  char separator;
  bool good;
  double value;
} number_rows[] = {
    {"12", ',', true, 12},
    {"0.52", ',', true, 0.52},
    {".5", ',', true, 0.5},
    {"5.", ',', true, 5},
    {"-1.25", ',', true, -1.25},
    {"+3", ',', true, 3},
    {"1,234.50", ',', true, 1234.5},
    {"1,234,567", ',', true, 1234567},
    {"$22.40", ',', true, 22.4},
    {"$ 22.40", ',', true, 22.4},
    {"\xE2\x82\xAC"
     "5",
     ',', true, 5},
    {"0,52", ',', false, 0},
    {"1,23", ',', false, 0},
    {"1234,567", ',', false, 0},
    {",5", ',', false, 0},
    {"1,234", ';', false, 0},
    {"1.2.3", ',', false, 0},
    {"", ',', false, 0},
    {"-", ',', false, 0},
    {".", ',', false, 0},
    {"12 ft", ',', false, 0},
    {"1e3", ',', false, 0},
    {"call", ',', false, 0},
    {"nan", ',', false, 0},
    {"1234567890123456", ',', false, 0},
};

START_TEST(numbers) {
  const struct number_row *row = &number_rows[_i];
  const csv_table t = {.separator = row->separator};
  double value = 0;
  bool good = csv_number(&t, row->cell, &value);
  ck_assert_msg(good == row->good, "%s", row->cell);
  if (good) ck_assert_double_eq(value, row->value); /* the double nearest to the decimal */
}
END_TEST

/* ---- columns ---- */

START_TEST(letters) {
  static const struct {
    size_t column;
    const char *letters;
  } rows[] = {{0, "A"}, {25, "Z"}, {26, "AA"}, {51, "AZ"}, {52, "BA"}, {255, "IV"}, {702, "AAA"}};
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++)
    ck_assert_str_eq(csv_letters(memory, rows[i].column), rows[i].letters);
}
END_TEST

START_TEST(columns) {
  const char *bytes = "Code,Unit Price,bought-as\n1,2,3\n";
  const csv_table *t = read_bytes(bytes, strlen(bytes));
  ck_assert_int_eq(csv_column(t, "code"), 0);
  ck_assert_int_eq(csv_column(t, "unit_price"), 1);
  ck_assert_int_eq(csv_column(t, "bought_as"), 2);
  ck_assert_int_eq(csv_column(t, "price"), -1);
  ck_assert_str_eq(csv_text(&t->rows[0], 1), "2");
  ck_assert_str_eq(csv_text(&t->rows[0], -1), "");
  ck_assert_str_eq(csv_place(memory, t, &t->rows[0], 1).path, "B2 (Unit Price)");
  ck_assert_str_eq(csv_place(memory, t, &t->rows[0], -1).path, "row 2");
}
END_TEST

START_TEST(headers) {
  static const char *const names[] = {"code", "price"};
  const char *bytes = "code,prize,Code\n1,2,3\n";
  const csv_table *t = read_bytes(bytes, strlen(bytes));
  ck_assert(!csv_check_header(memory, &diags, t, names, 2, DIAG_NOTE));
  ck_assert_uint_eq(diags.count, 2);
  ck_assert_int_eq(diags.items[0].level, DIAG_NOTE);
  ck_assert_ptr_nonnull(strstr(diags.items[0].message, "price"));
  ck_assert_int_eq(diags.items[1].level, DIAG_ERROR);
  ck_assert_str_eq(diags.items[1].place.path, "C1 (Code)");
  ck_assert(!csv_check_header(memory, &diags, t, names, 2, DIAG_ERROR));
  ck_assert_uint_eq(diags.errors, 3);
}
END_TEST

int main(void) {
  Suite *s = suite_create("csv");
  TCase *t = tcase_create("csv");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, tables, 0, sizeof read_rows / sizeof read_rows[0]);
  tcase_add_loop_test(t, refused, 0, sizeof refusals / sizeof refusals[0]);
  tcase_add_test(t, all_faults_at_once);
  tcase_add_test(t, limit_of_columns);
  tcase_add_test(t, limit_of_cells);
  tcase_add_test(t, limit_of_rows);
  tcase_add_loop_test(t, numbers, 0, sizeof number_rows / sizeof number_rows[0]);
  tcase_add_test(t, letters);
  tcase_add_test(t, columns);
  tcase_add_test(t, headers);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
