/* The public API: runs the stages of each call and hands out what they found. */
#include <string.h>

#include "api/call.h"
#include "api/data.h"
#include "api/request.h"
#include "base/file.h"
#include "report/report_html.h"
#include "report/sheets.h"

void septum_options_init(septum_options *options) {
  memset(options, 0, sizeof *options);
  options->corners = options->tees = options->doors = -1;
}

const char *septum_version(void) {
  return SEPTUM_VERSION;
}

const char *septum_nearest(const char *word, const char *const *names, size_t n) {
  return text_nearest(word, names, n);
}

/* --- open and close -------------------------------------------------------------------------- */

typedef struct open_job {
  const char *catalogs;
  septum *made;
} open_job;

static status open_stage(call *k, void *given) {
  open_job *job = given;
  const char *folder = job->catalogs;
  if (folder == NULL) {
    const char *data = data_folder(k->memory, &k->diags);
    if (data == NULL) return k->diags.worst;
    folder = file_join(k->kept, data, "catalogs");
  }
  const catalog *c = catalog_load(k->kept, &k->diags, folder);
  if (c == NULL) return k->diags.worst;
  septum *handle = arena_alloc(k->kept, sizeof *handle);
  *handle = (septum){.memory = k->kept, .catalog = c, .listener = k->listener, .user = k->user};
  job->made = handle;
  k->keep = true;
  return STATUS_OK;
}

septum_status septum_open(const char *catalogs_dir, septum_listener listener, void *user,
                          septum **out) {
  open_job job = {.catalogs = catalogs_dir};
  bool made = false;
  septum_status answer = call_run(listener, user, open_stage, &job, &made);
  *out = made ? job.made : NULL;
  return answer;
}

void septum_close(septum *handle) {
  if (handle != NULL) arena_free(handle->memory);
}

/* --- rate and pick --------------------------------------------------------------------------- */

typedef struct answer_job {
  const septum *handle;
  const char *operand;
  septum_options options;
  septum_answer *made;
} answer_job;

/* Writes the files that the options name, if any, and hands the answer out. */
static status hand_out(call *k, answer_job *job, const sheet_book *book, const call_texts *t,
                       status when_done) {
  if (!call_texts_whole(k, t) || !call_save_book(k, t, book, job->options.save_xlsx) ||
      !call_save_page(k, t, job->options.save_html))
    return k->diags.worst;
  job->made = call_deliver(k, t, job->options.save_csv);
  return job->made != NULL ? when_done : k->diags.worst;
}

static void compare_fastening(call *k, request *r, const assessment *given) {
  fastening_choice *ways = arena_array(k->memory, 2, sizeof *ways);
  r->report.fastening = ways;
  r->report.fastening_count =
      r->report.asked ? fastening_choices(k->memory, &r->context, given, ways) : 0;
}

static status rate_stage(call *k, void *given) {
  answer_job *job = given;
  if (!call_can_write(k, &job->options)) return k->diags.worst;
  request *prepared = arena_alloc(k->memory, sizeof *prepared);
  bool ready =
      request_prepare(k, job->handle, &job->options, job->options.brief, false, prepared) &&
      request_resize(k, &job->options, &prepared->brief);
  wall w = wall_empty();
  const char *name = NULL;
  if (!request_wall(k, job->handle->catalog, job->operand, &w, &name) || !ready)
    return k->diags.worst;
  assessment *x = arena_alloc(k->memory, sizeof *x);
  judge_wall(k->memory, &prepared->context, &w, x);
  x->name = name;
  if (x->takeoff.missing)
    diag_add(&k->diags, DIAG_WARNING, ERROR_PRICE_MISSING,
             (diag_place){.file = prepared->prices->file},
             "no price for \"%s\": the wall is not costed", x->takeoff.missing_code);
  compare_fastening(k, prepared, x);
  call_texts t;
  call_texts_init(k, &t);
  report_rate_text(&prepared->report, x, &t.words);
  report_rate_json(&prepared->report, x, &t.json);
  report_takeoff_csv(&prepared->report, x, &t.csv);
  if (job->options.save_html) report_rate_html(&prepared->report, x, &t.page);
  sheet_book *book = call_book(k, &job->options);
  if (book) sheets_rate(&prepared->report, x, book);
  return hand_out(k, job, book, &t, STATUS_OK);
}

/* Most points of the chart of candidates. */
enum { CLOUD_POINTS = 300 };

/* Sweeps, chooses and explains; *candidates (NULL without a page) are for its chart. False after
 * messages. */
static bool choose(call *k, const answer_job *job, const request *prepared, pick_choice *choice,
                   explanation *why, cloud **candidates) {
  space *s = arena_alloc(k->memory, sizeof *s);
  sweep_result *swept = arena_alloc(k->memory, sizeof *swept);
  space_build(k->memory, &prepared->context, s);
  sweep_run(k->memory, s, swept);
  if (!model_choose(k->memory, &k->diags, s, swept, job->options.time_limit_s,
                    job->options.save_model, choice))
    return false;
  explain_pick(k->memory, s, swept, choice, why);
  *candidates = NULL;
  if (job->options.save_html && choice->found) {
    *candidates = arena_alloc(k->memory, sizeof **candidates);
    cloud_sample(k->memory, s, swept, CLOUD_POINTS, *candidates);
  }
  return true;
}

static status pick_stage(call *k, void *given) {
  answer_job *job = given;
  if (!call_can_write(k, &job->options)) return k->diags.worst;
  request *prepared = arena_alloc(k->memory, sizeof *prepared);
  explanation *why = arena_alloc(k->memory, sizeof *why);
  pick_choice *choice = arena_alloc(k->memory, sizeof *choice);
  if (!request_prepare(k, job->handle, &job->options, job->operand, true, prepared) ||
      !request_resize(k, &job->options, &prepared->brief))
    return k->diags.worst;
  cloud *candidates = NULL;
  if (!choose(k, job, prepared, choice, why, &candidates))
    return k->diags.worst == STATUS_OK ? STATUS_INTERNAL : k->diags.worst;
  compare_fastening(k, prepared, why->chosen);
  call_texts t;
  call_texts_init(k, &t);
  report_pick_text(&prepared->report, why, choice, &t.words);
  report_pick_json(&prepared->report, why, choice, &t.json);
  report_takeoff_csv(&prepared->report, why->chosen, &t.csv);
  if (job->options.save_html)
    report_pick_html(&prepared->report, why, choice, candidates, &t.page);
  sheet_book *book = call_book(k, &job->options);
  if (book) sheets_pick(&prepared->report, why, choice, book);
  return hand_out(k, job, book, &t,
                  why->chosen != NULL ? STATUS_OK : STATUS_NO_WALL);
}

static septum_status run(septum *handle, const char *operand, const septum_options *options,
                         call_stage stage, septum_answer **out) {
  answer_job job = {.handle = handle, .operand = operand};
  septum_options_init(&job.options);
  if (options != NULL) job.options = *options;
  bool made = false;
  septum_status answer = call_run(handle->listener, handle->user, stage, &job, &made);
  *out = made ? job.made : NULL;
  return answer;
}

septum_status septum_rate(septum *handle, const char *wall_words, const septum_options *options,
                          septum_answer **out) {
  return run(handle, wall_words, options, rate_stage, out);
}

septum_status septum_pick(septum *handle, const char *path, const septum_options *options,
                          septum_answer **out) {
  return run(handle, path, options, pick_stage, out);
}

/* --- answers --------------------------------------------------------------------------------- */

const char *septum_answer_text(const septum_answer *answer) {
  return answer->text;
}

const char *septum_answer_json(const septum_answer *answer) {
  return answer->json;
}

const char *septum_answer_csv(const septum_answer *answer) {
  return answer->csv;
}

void septum_answer_free(septum_answer *answer) {
  if (answer != NULL) arena_free(answer->memory);
}
