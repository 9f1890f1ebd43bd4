#include "report/report_xlsx.h"

#include "base/file.h"

#ifdef SEPTUM_XLSX

#include <errno.h>
#include <locale.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>
#include <xlsxwriter.h>

enum { GREY = 0xDDDDDD, PATH_BYTES = 4096 };
/* 2000-01-01: the library would write the present time, and no two files would be equal. */
static const time_t made_at = 946684800;

bool report_xlsx_there(diag_list *d) {
  (void)d;
  return true;
}

/* ---- what a cell looks like ---- */

static const struct {
  const char *numbers; /* number format; NULL = general */
  bool bold, grey, wrap, line;
  double size; /* 0 = usual */
} looks[SHEET_STYLES] = {
    [SHEET_TEXT] = {NULL, false, false, false, false, 0},
    [SHEET_WRAP] = {NULL, false, false, true, false, 0},
    [SHEET_TITLE] = {NULL, true, false, false, false, 14},
    [SHEET_LABEL] = {NULL, true, false, false, false, 0},
    [SHEET_HEAD] = {NULL, true, true, true, false, 0},
    [SHEET_COUNT] = {"#,##0", false, false, false, false, 0},
    [SHEET_TENTHS] = {"#,##0.0", false, false, false, false, 0},
    [SHEET_QUANTITY] = {"#,##0.00", false, false, false, false, 0},
    [SHEET_LENGTH] = {"#,##0.000", false, false, false, false, 0},
    [SHEET_RATE] = {"#,##0.0000", false, false, false, false, 0},
    [SHEET_SHARE] = {"0.00%", false, false, false, false, 0},
    [SHEET_WHOLE_SHARE] = {"0%", false, false, false, false, 0},
    [SHEET_MONEY] = {"#,##0.00", false, false, false, false, 0},
    [SHEET_TOTAL] = {"#,##0.00", true, false, false, true, 0},
};

static void make_formats(lxw_workbook *book, lxw_format **formats) {
  for (int i = 0; i < SHEET_STYLES; i++) {
    lxw_format *f = formats[i] = workbook_add_format(book);
    if (f == NULL) continue;
    if (looks[i].numbers) format_set_num_format(f, looks[i].numbers);
    if (looks[i].bold) format_set_bold(f);
    if (looks[i].grey) format_set_bg_color(f, GREY);
    if (looks[i].wrap) format_set_text_wrap(f);
    if (looks[i].line) format_set_top(f, LXW_BORDER_THIN);
    if (looks[i].size > 0) format_set_font_size(f, looks[i].size);
    format_set_align(f, LXW_ALIGN_VERTICAL_TOP);
  }
}

/* ---- sheets ----
 * The workbook is no arena memory: nothing here allocates from an arena. */

static lxw_error put_cell(lxw_worksheet *page, const sheet_cell *c, lxw_format *format) {
  lxw_row_t row = (lxw_row_t)c->row;
  lxw_col_t column = (lxw_col_t)c->column;
  if (c->formula)
    return worksheet_write_formula_num(page, row, column, c->formula, format, c->number);
  if (c->text) return worksheet_write_string(page, row, column, c->text, format);
  return worksheet_write_number(page, row, column, c->number, format);
}

static void set_print(lxw_worksheet *page, const sheet *s) {
  enum { LETTER = 1, A4 = 9 }; /* paper sizes of the format */
  if (s->portrait)
    worksheet_set_portrait(page);
  else
    worksheet_set_landscape(page);
  worksheet_set_paper(page, s->a4 ? A4 : LETTER);
  worksheet_fit_to_pages(page, 1, 0);
  (void)worksheet_set_footer(page, "&L&F, &A&RPage &P of &N");
  if (s->head < 0) return;
  worksheet_freeze_panes(page, (lxw_row_t)s->head + 1, (lxw_col_t)s->keep);
  (void)worksheet_repeat_rows(page, (lxw_row_t)s->head, (lxw_row_t)s->head);
  if (s->filter_last > 0)
    (void)worksheet_autofilter(page, (lxw_row_t)s->head, 0, (lxw_row_t)s->filter_last,
                               (lxw_col_t)(s->columns - 1));
}

static lxw_error put_sheet(lxw_workbook *book, const sheet *s, lxw_format *const *formats) {
  lxw_worksheet *page = workbook_add_worksheet(book, s->name);
  if (page == NULL) return LXW_ERROR_MEMORY_MALLOC_FAILED;
  for (int i = 0; i < s->columns; i++)
    (void)worksheet_set_column(page, (lxw_col_t)i, (lxw_col_t)i, s->width[i], NULL);
  for (size_t i = 0; i < s->count; i++) {
    lxw_error error = put_cell(page, &s->cells[i], formats[s->cells[i].style]);
    if (error != LXW_NO_ERROR) return error;
  }
  set_print(page, s);
  return LXW_NO_ERROR;
}

static lxw_error put_book(const char *path, const sheet_book *b) {
  lxw_format *formats[SHEET_STYLES];
  lxw_workbook *book = workbook_new(path);
  if (book == NULL) return LXW_ERROR_MEMORY_MALLOC_FAILED;
  lxw_doc_properties about = {.created = made_at};
  lxw_error error = workbook_set_properties(book, &about), closed;
  make_formats(book, formats);
  for (int i = 0; i < b->count && error == LXW_NO_ERROR; i++)
    error = put_sheet(book, &b->sheet[i], formats);
  closed = workbook_close(book);
  return error != LXW_NO_ERROR ? error : closed;
}

/* The library prints numbers by the locale of the thread; a file needs the point of the C locale. */
static lxw_error put_book_in_c(const char *path, const sheet_book *b) {
  locale_t plain = newlocale(LC_ALL_MASK, "C", (locale_t)0);
  if (plain == (locale_t)0) return LXW_ERROR_MEMORY_MALLOC_FAILED;
  locale_t before = uselocale(plain);
  lxw_error error = put_book(path, b);
  (void)uselocale(before);
  freelocale(plain);
  return error;
}

/* ---- the file ----
 * The library writes to a path of its own; what it wrote is read back and written as every output
 * is. */

/* The bytes of a whole file; NULL when they cannot be read, or (*full) held. */
static char *take_file(arena *a, const char *path, size_t *len, bool *full) {
  struct stat info;
  char *bytes = NULL;
  *full = false;
  if (stat(path, &info) != 0) return NULL;
  *len = (size_t)info.st_size;
  bytes = arena_try(a, *len);
  *full = bytes == NULL;
  FILE *f = bytes ? fopen(path, "rb") : NULL;
  if (f == NULL) return NULL;
  bool whole = fread(bytes, 1, *len, f) == *len;
  return fclose(f) == 0 && whole ? bytes : NULL;
}

static int open_own(char *path) {
  const char *folder = getenv("TMPDIR");
  if (folder == NULL || *folder == '\0') folder = "/tmp";
  if (snprintf(path, PATH_BYTES, "%s/septum-XXXXXX", folder) >= PATH_BYTES) return -1;
  return mkstemp(path);
}

bool report_xlsx_write(arena *a, diag_list *d, const sheet_book *b, const char *path) {
  char own[PATH_BYTES];
  diag_place place = {.file = path};
  int descriptor = open_own(own);
  if (descriptor < 0) {
    diag_add(d, DIAG_ERROR, ERROR_SYSTEM_WRITE, place, "no room for a temporary file: %s",
             strerror(errno));
    return false;
  }
  (void)close(descriptor);
  lxw_error error = put_book_in_c(own, b);
  size_t len = 0;
  bool full = false;
  char *bytes = error == LXW_NO_ERROR ? take_file(a, own, &len, &full) : NULL;
  (void)unlink(own);
  if (full || error == LXW_ERROR_MEMORY_MALLOC_FAILED) arena_fail(a);
  if (bytes != NULL) return file_write(a, d, path, bytes, len);
  diag_add(d, DIAG_ERROR, ERROR_SYSTEM_WRITE, place, "the spreadsheet cannot be made: %s",
           error == LXW_NO_ERROR ? "its temporary file cannot be read" : lxw_strerror(error));
  return false;
}

#else

bool report_xlsx_there(diag_list *d) {
  diag_error(d, ERROR_SYSTEM_MISSING_PART,
             "this build writes no spreadsheets: it was made without libxlsxwriter; CSV is there");
  return false;
}

bool report_xlsx_write(arena *a, diag_list *d, const sheet_book *b, const char *path) {
  (void)a;
  (void)b;
  (void)path;
  return report_xlsx_there(d);
}

#endif
