/* What brief/1 and project/1 have in common: the fields of a brief, their words, and how they are
 * read. For the readers of this layer; its words also for the writer of briefs. */
#ifndef INPUT_JOB_FIELDS_H
#define INPUT_JOB_FIELDS_H

#include "input/fields.h"
#include "input/job.h"

/* NULL-ended, in the order of the enums of job.h; shear: "none" is CATALOG_NONE + 1. */
extern const char *const job_basis_words[];
extern const char *const job_evidence_words[];
extern const char *const job_scope_words[];
extern const char *const job_fastening_words[];
extern const char *const job_noncombustible_words[];
extern const char *const job_shear_words[];
extern const char *const job_top_words[];
extern const char *const job_head_words[];
extern const char *const job_boards_words[];

enum { JOB_SPAN_MIN = 60, JOB_SPAN_MAX = 2000 };
/* The span over the deflection from "L/240" or "240"; false when it is none or out of range. */
bool job_span(const char *words, double *span);

typedef struct job_reader {
  arena *arena;
  diag_list *diags;
  const catalog *catalog; /* NULL: patterns are not checked */
} job_reader;

/* A brief's members as they stand in the file: what needs more than a row of the table is a value
 * that job_take reads. */
typedef struct job_raw {
  brief b; /* set to the defaults before reading */
  const json_value *building, *wall, *target, *targets, *limits, *structure, *sides, *services,
      *openings, *allowance;
  const json_value *only, *without, *listings, *reports;
} job_raw;

/* Offsets into job_raw. */
extern const field job_fields[];
extern const size_t job_field_count;

/* Reads the members; faults are reported. `target_required`: as in job_read. */
void job_take(job_reader *r, const json_value *root, const job_raw *raw, bool target_required,
              brief *out);

#endif
