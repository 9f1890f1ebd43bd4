/* The gate to the spreadsheet library. */
#ifndef REPORT_REPORT_XLSX_H
#define REPORT_REPORT_XLSX_H

#include "report/sheet.h"

/* Whether this build can write spreadsheets; an error that says so otherwise. To be asked before
 * any work is done. */
bool report_xlsx_there(diag_list *d);
/* Writes the sheets, in their order, whole or not at all. Equal sheets give equal bytes. False
 * after an error. */
bool report_xlsx_write(arena *a, diag_list *d, const sheet_book *b, const char *path);

#endif
