/* septum_trim: a specified wall, and what may stand in its place. */
#include "api/call.h"
#include "api/request.h"
#include "report/report_trim.h"

static const double SLACK_UNIT_M = 1e-3; /* a bare number is in millimetres */
static const double SLACK_MAX_M = 1;     /* a guard against slips of a unit */

typedef struct trim_job {
  const septum *handle;
  const char *path, *specified;
  septum_options options;
  septum_answer *made;
} trim_job;

static bool read_terms(call *k, const septum_options *options, trim_terms *out) {
  const char *expected = NULL;
  *out = (trim_terms){.count = options->count > 0 ? options->count : TRIM_DEFAULT_COUNT,
                      .slack_given = options->slack != NULL};
  if (options->count < 0 || options->count > TRIM_MAX_COUNT) {
    diag_error(&k->diags, ERROR_USAGE, "expected a count from 1 to %d, found %d", TRIM_MAX_COUNT,
               options->count);
    return false;
  }
  if (!options->slack) return true;
  if (!units_parse_length(options->slack, SLACK_UNIT_M, &out->slack_m, &expected)) {
    diag_error(&k->diags, ERROR_USAGE, "the slack: expected %s, found \"%s\"", expected,
               options->slack);
    return false;
  }
  if (out->slack_m >= 0 && out->slack_m <= SLACK_MAX_M) return true;
  diag_error(&k->diags, ERROR_USAGE, "the slack: expected 0 to 1 m, found \"%s\"", options->slack);
  return false;
}

/* The specified wall, judged by what it is held to. NULL after messages. */
static assessment *specify(call *k, request *q, const wall *w, const char *name,
                           trim_terms *terms) {
  assessment *x = arena_alloc(k->memory, sizeof *x);
  trim_hold_to(k->memory, &q->context, w, terms, &q->brief);
  judge_wall(k->memory, &q->context, w, x);
  x->name = name;
  if (!x->takeoff.missing) return x;
  diag_error(&k->diags, ERROR_PRICE_MISSING,
             "the specified wall cannot be costed: the price book has no price for %s",
             x->takeoff.missing_code ? x->takeoff.missing_code : "an item of it");
  return NULL;
}

static trim_answer *compare(call *k, const request *q, assessment *specified,
                            const trim_terms *terms) {
  space *s = arena_alloc(k->memory, sizeof *s);
  sweep_result *swept = arena_alloc(k->memory, sizeof *swept);
  trim_answer *found = arena_alloc(k->memory, sizeof *found);
  space_build(k->memory, &q->context, s);
  sweep_run(k->memory, s, swept);
  trim_explain(k->memory, s, swept, specified, terms, found);
  return found;
}

static status hand_out(call *k, trim_job *job, const request *q, const trim_answer *found) {
  call_texts t;
  call_texts_init(k, &t);
  report_trim_text(&q->report, found, &t.words);
  report_trim_json(&q->report, found, &t.json);
  report_trim_csv(&q->report, found, &t.csv);
  job->made = call_deliver(k, &t, job->options.save_csv);
  if (job->made == NULL) return k->diags.worst;
  return found->proposal_count > 0 ? STATUS_OK : STATUS_NO_WALL;
}

static status trim_stage(call *k, void *given) {
  trim_job *job = given;
  request *q = arena_alloc(k->memory, sizeof *q);
  trim_terms terms;
  wall w = wall_empty();
  const char *name = NULL;
  if (!read_terms(k, &job->options, &terms)) return k->diags.worst;
  bool ready = request_prepare(k, job->handle, &job->options, job->path, false, q);
  if (!request_wall(k, job->handle->catalog, job->specified, &w, &name) || !ready)
    return k->diags.worst;
  assessment *specified = specify(k, q, &w, name, &terms);
  if (!specified) return k->diags.worst;
  return hand_out(k, job, q, compare(k, q, specified, &terms));
}

septum_status septum_trim(septum *handle, const char *path, const char *specified,
                          const septum_options *options, septum_answer **out) {
  trim_job job = {.handle = handle, .path = path, .specified = specified};
  if (options != NULL) job.options = *options;
  bool made = false;
  septum_status answer = call_run(handle->listener, handle->user, trim_stage, &job, &made);
  *out = made ? job.made : NULL;
  return answer;
}
