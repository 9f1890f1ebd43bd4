/* The published ratings and curves of tests/data as walls of the catalog. */
#ifndef CALIBRATE_DATA_H
#define CALIBRATE_DATA_H

#include "acoustics/predict.h"
#include "base/diag.h"

enum { DATA_OCTAVES = 6, DATA_MAX_ROWS = 200 };

/* One published wall. */
typedef struct sample {
  const char *id;
  wall wall;
  double rating; /* STC as published */
  sound_family family;
  int number; /* walls of the code table that share a wall number are variants of one wall */
  bool curve; /* an octave curve, for its shape only: its rating is not fitted */
  double octave_db[DATA_OCTAVES]; /* 125 to 4000 Hz */
} sample;

typedef struct dataset {
  sample row[DATA_MAX_ROWS];
  int count;
} dataset;

/* Adds the rows of one CSV file; what it cannot read goes to `d`. */
void data_read_ratings(arena *a, diag_list *d, const catalog *c, const char *path, dataset *out);
void data_read_curves(arena *a, diag_list *d, const catalog *c, const char *path, dataset *out);

#endif
