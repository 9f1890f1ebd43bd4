/* Reads the records of one catalog file each: boards, frames, fills, mounts, targets. Part of
 * catalog.c, split for size. */
#ifndef INPUT_CATALOG_RECORDS_H
#define INPUT_CATALOG_RECORDS_H

#include "input/catalog.h"

/* Ids met so far, over all files that a wall line names records from. */
typedef struct catalog_reader {
  arena *arena;
  diag_list *diags;
  const char **ids;
  size_t id_count, id_cap;
} catalog_reader;

/* Each reads the file `root` into `out` (its arrays and counts), reports every fault and goes on.
 * True when sound. */
bool catalog_read_layers(catalog_reader *r, const json_value *root, catalog *out);
bool catalog_read_frames(catalog_reader *r, const json_value *root, catalog *out);
bool catalog_read_fills(catalog_reader *r, const json_value *root, catalog *out);
bool catalog_read_mounts(catalog_reader *r, const json_value *root, catalog *out);
bool catalog_read_targets(catalog_reader *r, const json_value *root, catalog *out);

#endif
