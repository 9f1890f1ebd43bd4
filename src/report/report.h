/* Answers in words and in JSON: the same facts, drawn from one assessment or explanation (view.h).
 * Every function adds to `out`. Text fits 100 columns but for wall lines that are longer
 * themselves. Keys of JSON: docs/formats/answers.md. */
#ifndef REPORT_REPORT_H
#define REPORT_REPORT_H

#include "explain/explain.h"
#include "explain/fastening.h"

typedef struct report {
  arena *arena;
  const catalog *catalog;
  const price_book *prices;
  const brief *brief;
  bool asked;         /* somebody gave this brief; false: the reference wall, nothing is asked */
  bool usual_prices;  /* neither brief nor options name the price book */
  const fastening_choice *fastening; /* ways to carry heavy fixtures over a stretch of a side */
  int fastening_count;
  units_system units; /* of text, CSV and pages; JSON is SI */
} report;

void report_rate_text(const report *r, const assessment *x, text *out);
void report_rate_json(const report *r, const assessment *x, text *out);

void report_pick_text(const report *r, const explanation *e, const pick_choice *proof, text *out);
void report_pick_json(const report *r, const explanation *e, const pick_choice *proof, text *out);
/* The takeoff of a wall, one line a line (RFC 4180), with a header. NULL: the header alone. */
void report_takeoff_csv(const report *r, const assessment *x, text *out);

/* One checked file. */
typedef struct checked_file {
  const char *path;
  const char *kind; /* "brief/1"; NULL when it could not be told */
  size_t errors;
} checked_file;
void report_check_text(const checked_file *files, size_t count, text *out);
void report_check_json(const checked_file *files, size_t count, text *out);

#endif
