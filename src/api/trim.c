/* septum_trim: a specified wall, and what may stand in its place. */
#include <string.h>

#include "api/call.h"
#include "api/request.h"
#include "report/report_html.h"
#include "report/report_trim.h"
#include "report/sheets.h"
#include "report/view_trim.h"

static const double SLACK_UNIT_M = 1e-3; /* a bare number is in millimetres */
static const double SLACK_MAX_M = 1;     /* a guard against slips of a unit */
static const double REDESIGN_MAX = 1e9;

typedef struct trim_job {
  const septum *handle;
  const char *path, *specified;
  septum_options options;
  septum_answer *made;
} trim_job;

static bool read_word(call *k, const char *name, const char *word, const view_trim_word *known,
                      unsigned *bits) {
  text all;
  text_init(&all, k->memory, 200);
  for (int i = 0; known[i].word != NULL; i++) {
    if (text_equal(known[i].word, word)) {
      *bits |= known[i].bit;
      return true;
    }
    text_putf(&all, "%s%s", i == 0 ? "" : known[i + 1].word ? ", " : " or ", known[i].word);
  }
  diag_error(&k->diags, ERROR_USAGE, "%s: expected %s, found \"%s\"", name, all.data, word);
  return false;
}

/* Words with commas between, as bits. */
static bool read_words(call *k, const char *name, const char *list, const view_trim_word *known,
                       unsigned *bits) {
  bool sound = true;
  for (const char *at = list; at != NULL;) {
    size_t n = strcspn(at, ",");
    sound = read_word(k, name, text_copyn(k->memory, at, n), known, bits) && sound;
    at = at[n] == ',' ? at + n + 1 : NULL;
  }
  return sound;
}

static bool read_promises(call *k, const septum_options *options, trim_terms *out) {
  out->promised_stc = options->promised_stc;
  out->promised_fire = options->promised_fire;
  out->design = options->design;
  out->redesign_cents = cost_cents(options->redesign_cost);
  bool sound = options->promised_stc >= 0 && options->promised_stc <= 100 &&
               options->promised_fire >= 0 && options->promised_fire <= 480;
  if (!sound)
    diag_error(&k->diags, ERROR_USAGE,
               "expected a promised rating of at most 100 and at most 480 minutes, found %d and %d",
               options->promised_stc, options->promised_fire);
  if (!(options->redesign_cost >= 0 && options->redesign_cost <= REDESIGN_MAX)) {
    diag_error(&k->diags, ERROR_USAGE, "the cost of redesign: expected 0 to 1e9");
    sound = false;
  }
  sound = read_words(k, "allow", options->allow, view_trim_waivers, &out->allow) && sound;
  sound = read_words(k, "keep", options->keep, view_trim_holds, &out->keep) && sound;
  if (sound && out->keep & TRIM_KEEP_THICKNESS && (out->allow & TRIM_ALLOW_THICKER || options->slack)) {
    diag_error(&k->diags, ERROR_USAGE, "the thickness is either kept or may grow, not both");
    return false;
  }
  return sound;
}

static bool read_terms(call *k, const septum_options *options, trim_terms *out) {
  const char *expected = NULL;
  *out = (trim_terms){.count = options->count > 0 ? options->count : TRIM_DEFAULT_COUNT,
                      .slack_given = options->slack != NULL};
  if (options->count < 0 || options->count > TRIM_MAX_COUNT) {
    diag_error(&k->diags, ERROR_USAGE, "expected a count from 1 to %d, found %d", TRIM_MAX_COUNT,
               options->count);
    return false;
  }
  if (!read_promises(k, options, out)) return false;
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

/* Leaves of the fire rows only what shows the specified wall's rating. False after a message. */
static bool keep_fire(call *k, request *q, const wall *w) {
  fire_verdict v = fire_judge(k->memory, &q->catalog, &q->brief, w);
  if (v.minutes == 0) {
    diag_error(&k->diags, ERROR_USAGE, "keep fire: no fire rating is shown for the specified wall");
    return false;
  }
  catalog *c = &q->catalog;
  const wall_row *row = NULL;
  for (size_t i = 0; i < c->fire_count && v.row_id; i++)
    if (text_equal(c->fire[i].id, v.row_id)) row = &c->fire[i];
  wall_row *only = arena_array(k->memory, 1, sizeof *only);
  if (row) *only = *row;
  c->fire = only;
  c->fire_count = row ? 1 : 0;
  if (row) c->membrane_count = 0; /* the component-additive rule is another one */
  if (v.minutes > q->brief.fire_min) q->brief.fire_min = v.minutes;
  return true;
}

/* A promised rating comes beside what the brief and the wall itself ask. */
static bool has_room(call *k, const request *q, const trim_terms *terms) {
  int most = BRIEF_MAX_TARGETS - 1;
  if (terms->promised_stc == 0 || q->brief.target_count <= most) return true;
  diag_error(&k->diags, ERROR_USAGE, "a promised rating goes with at most %d targets, found %d", most,
             q->brief.target_count);
  return false;
}

/* The specified wall, judged by what it is held to. NULL after messages. */
static assessment *specify(call *k, request *q, const wall *w, const char *name,
                           trim_terms *terms) {
  assessment *x = arena_alloc(k->memory, sizeof *x);
  if (!has_room(k, q, terms)) return NULL;
  if (terms->keep & TRIM_KEEP_FIRE && !keep_fire(k, q, w)) return NULL;
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
  if (job->options.save_html) report_trim_html(&q->report, found, &t.page);
  sheet_book *book = call_book(k, &job->options);
  if (book) sheets_trim(&q->report, found, book);
  if (!call_save_book(k, &t, book, job->options.save_xlsx) ||
      !call_save_page(k, &t, job->options.save_html))
    return k->diags.worst;
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
  if (!call_can_write(k, &job->options)) return k->diags.worst;
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
