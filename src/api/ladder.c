/* septum_ladder: what each rating costs. */
#include "api/call.h"
#include "api/request.h"
#include "report/report_html.h"
#include "report/report_ladder.h"
#include "report/sheets.h"

typedef struct ladder_job {
  const septum *handle;
  const char *path, *have;
  septum_options options;
  septum_answer *made;
} ladder_job;

static bool in_range(call *k, const char *name, int value) {
  if (value == 0 || (value >= RUNGS_LEAST && value <= RUNGS_MOST)) return true;
  diag_error(&k->diags, ERROR_USAGE, "%s: expected a rating from %d to %d, found %d", name,
             RUNGS_LEAST, RUNGS_MOST, value);
  return false;
}

/* METRIC_COUNT without one. */
static bool read_metric(call *k, const char *word, sound_metric *out) {
  *out = METRIC_COUNT;
  if (word == NULL) return true;
  for (int m = 0; m < METRIC_COUNT; m++)
    if (text_equal(word, sound_metric_names[m])) *out = (sound_metric)m;
  if (*out != METRIC_COUNT) return true;
  diag_error(&k->diags, ERROR_USAGE,
             "the metric: expected STC, Rw, Rw+C, Rw+Ctr or OITC, found \"%s\"", word);
  return false;
}

static bool read_terms(call *k, const septum_options *options, sound_metric *metric,
                       ladder_terms *out) {
  *out = (ladder_terms){.from = options->from, .to = options->to};
  bool sound = in_range(k, "from", options->from);
  sound = in_range(k, "to", options->to) && sound;
  sound = read_metric(k, options->metric, metric) && sound;
  if (sound && out->from > 0 && out->to > 0 && out->from > out->to) {
    diag_error(&k->diags, ERROR_USAGE, "from %d to %d: expected a rising range", out->from,
               out->to);
    return false;
  }
  return sound;
}

/* The given wall, judged with the target at what it meets. False after messages. */
static bool read_have(call *k, const ladder_job *job, const request *q, ladder_terms *terms) {
  wall w = wall_empty();
  const char *name = NULL;
  if (job->have == NULL) return true;
  if (!request_wall(k, job->handle->catalog, job->have, &w, &name)) return false;
  brief *b = arena_alloc(k->memory, sizeof *b);
  assessment *x = arena_alloc(k->memory, sizeof *x);
  judge_context asking = q->context;
  *b = q->brief;
  asking.brief = b;
  terms->have_reaches = rungs_reached(&q->context, terms->climbs, &w);
  if (terms->have_reaches > 0) b->targets[terms->climbs].value = terms->have_reaches;
  judge_wall(k->memory, &asking, &w, x);
  x->name = name;
  terms->have = x;
  if (!x->takeoff.missing) return true;
  diag_error(&k->diags, ERROR_PRICE_MISSING,
             "the given wall cannot be costed: the price book has no price for %s",
             x->takeoff.missing_code ? x->takeoff.missing_code : "an item of it");
  return false;
}

static ladder_answer *climb(call *k, const request *q, const ladder_terms *terms) {
  space *s = arena_alloc(k->memory, sizeof *s);
  rungs *found = arena_alloc(k->memory, sizeof *found);
  ladder_answer *answer = arena_alloc(k->memory, sizeof *answer);
  space_build(k->memory, &q->context, s);
  rungs_find(k->memory, s, terms->climbs, found);
  ladder_explain(k->memory, s, found, terms, answer);
  return answer;
}

static status hand_out(call *k, ladder_job *job, const request *q, const ladder_answer *found) {
  call_texts t;
  call_texts_init(k, &t);
  report_ladder_text(&q->report, found, &t.words);
  report_ladder_json(&q->report, found, &t.json);
  report_ladder_csv(&q->report, found, &t.csv);
  if (job->options.save_html) report_ladder_html(&q->report, found, &t.page);
  sheet_book *book = call_book(k, &job->options);
  if (book) sheets_ladder(&q->report, found, book);
  if (!call_save_book(k, &t, book, job->options.save_xlsx) ||
      !call_save_page(k, &t, job->options.save_html))
    return k->diags.worst;
  job->made = call_deliver(k, &t, job->options.save_csv);
  if (job->made == NULL) return k->diags.worst;
  return found->count > 0 ? STATUS_OK : STATUS_NO_WALL;
}

/* What the brief asks in the metric that climbs (METRIC_COUNT: that of its first target); 0 =
 * nothing. */
static int own_value(const brief *b, sound_metric metric) {
  for (int i = 0; i < b->target_count; i++)
    if (metric == METRIC_COUNT || b->targets[i].metric == metric) return (int)b->targets[i].value;
  return 0;
}

static status ladder_stage(call *k, void *given) {
  ladder_job *job = given;
  request *q = arena_alloc(k->memory, sizeof *q);
  ladder_terms terms;
  sound_metric metric;
  if (!call_can_write(k, &job->options)) return k->diags.worst;
  if (!read_terms(k, &job->options, &metric, &terms)) return k->diags.worst;
  if (!request_prepare(k, job->handle, &job->options, job->path, false, q)) return k->diags.worst;
  terms.own_value = own_value(&q->brief, metric);
  terms.climbs = ladder_target(&q->brief, metric);
  if (!read_have(k, job, q, &terms)) return k->diags.worst;
  return hand_out(k, job, q, climb(k, q, &terms));
}

septum_status septum_ladder(septum *handle, const char *path, const char *have,
                            const septum_options *options, septum_answer **out) {
  ladder_job job = {.handle = handle, .path = path, .have = have};
  if (options != NULL) job.options = *options;
  bool made = false;
  septum_status answer = call_run(handle->listener, handle->user, ladder_stage, &job, &made);
  *out = made ? job.made : NULL;
  return answer;
}
