/* septum_plan: few wall types for a whole project. */
#include "api/call.h"
#include "api/request.h"
#include "base/file.h"
#include "report/report_html.h"
#include "report/report_plan.h"
#include "report/sheets.h"
#include "wall/compat.h"
#include "wall/line.h"

typedef struct plan_job {
  const septum *handle;
  const char *path;
  septum_options options;
  septum_answer *made;
} plan_job;

typedef struct plan_request {
  request q; /* its brief is what all walls share */
  project project;
  schedule *schedule;
  wall mark[PROJECT_MAX_MARKS];
} plan_request;

/* The walls of the drawings' marks: they can be built, whatever they keep. */
static bool read_marks(call *k, const catalog *c, const project *p, wall *out) {
  bool sound = true;
  for (int i = 0; i < p->mark_count; i++) {
    const json_value *v = p->mark[i].json;
    if (v->kind != JSON_STRING) v = json_get(v, "line");
    out[i] = wall_empty();
    sound = line_parse_value(k->memory, &k->diags, c, v, &out[i]) &&
            compat_buildable(&k->diags, json_place(k->memory, v), c, &out[i]) && sound;
  }
  return sound;
}

/* The schedule that the project names. NULL after messages. */
static schedule *read_schedule(call *k, const catalog *c, const project *p) {
  if (!file_exists(p->walls)) {
    diag_add(&k->diags, DIAG_ERROR, ERROR_SYSTEM_READ, json_place(k->memory, p->walls_json),
             "expected the path of a wall schedule beside this file, found none at \"%s\"",
             p->walls);
    return NULL;
  }
  const csv_table *table = csv_load(k->memory, &k->diags, p->walls);
  return table ? schedule_read(k->memory, &k->diags, c, p, table) : NULL;
}

/* Every file is read before any of them stops the call, so that all faults show at once. */
static bool prepare(call *k, const plan_job *job, plan_request *out) {
  const json_value *root = json_load(k->memory, &k->diags, job->path);
  const catalog *c = job->handle->catalog;
  if (!root || !project_read(k->memory, &k->diags, c, root, &out->project)) return false;
  project *p = &out->project;
  out->q.brief = p->common;
  bool sound = request_settle(k, job->handle, &job->options, true, &out->q);
  if (out->q.prices) sound = project_check_stock(k->memory, &k->diags, p, out->q.prices) && sound;
  sound = read_marks(k, c, p, out->mark) && sound;
  out->schedule = read_schedule(k, c, p);
  if (!sound || !out->schedule) return false;
  for (int i = 0; i < out->schedule->class_count; i++)
    out->schedule->classes[i].demand.units = out->q.brief.units; /* limits are words too */
  return true;
}

static status hand_out(call *k, plan_job *job, const report *r, const plan_answer *found) {
  call_texts t;
  call_texts_init(k, &t);
  report_plan_text(r, found, &t.words);
  report_plan_json(r, found, &t.json);
  report_plan_csv(r, found, &t.csv);
  if (job->options.save_html) report_plan_html(r, found, &t.page);
  sheet_book *book = call_book(k, &job->options);
  if (book) sheets_plan(r, found, book);
  if (!call_save_book(k, &t, book, job->options.save_xlsx) ||
      !call_save_page(k, &t, job->options.save_html))
    return k->diags.worst;
  job->made = call_deliver(k, &t, job->options.save_csv);
  if (job->made == NULL) return k->diags.worst;
  return found->found && found->unplanned_rows == 0 ? STATUS_OK : STATUS_NO_WALL;
}

static status plan_stage(call *k, void *given) {
  plan_job *job = given;
  plan_request *p = arena_alloc(k->memory, sizeof *p);
  plan_answer *found = arena_alloc(k->memory, sizeof *found);
  if (!call_can_write(k, &job->options) || !prepare(k, job, p)) return k->diags.worst;
  call_tell(k); /* a long solve should not hold warnings back */
  const plan_context x = {.catalog = &p->q.catalog,
                          .prices = p->q.prices,
                          .project = &p->project,
                          .schedule = p->schedule};
  const plan_order order = {.seconds = job->options.time_limit_s,
                            .stop = job->options.stop,
                            .progress = job->options.progress,
                            .user = job->options.progress_user,
                            .save_model = job->options.save_model};
  if (!plan_explain(k->memory, &k->diags, &x, p->mark, &order, found))
    return k->diags.worst == STATUS_OK ? STATUS_INTERNAL : k->diags.worst;
  return hand_out(k, job, &p->q.report, found);
}

septum_status septum_plan(septum *handle, const char *path, const septum_options *options,
                          septum_answer **out) {
  plan_job job = {.handle = handle, .path = path};
  if (options != NULL) job.options = *options;
  bool made = false;
  septum_status answer = call_run(handle->listener, handle->user, plan_stage, &job, &made);
  *out = made ? job.made : NULL;
  return answer;
}
