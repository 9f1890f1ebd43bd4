/* septum_check: any file that septum reads, by its key "septum". */
#include <string.h>

#include "api/call.h"
#include "api/request.h"
#include "input/rows.h"
#include "input/schedule.h"
#include "wall/compat.h"
#include "wall/line.h"

typedef struct check_job {
  const septum *handle;
  const char *const *paths;
  size_t count;
  septum_answer *made;
} check_job;

typedef bool (*check_reader)(call *k, const septum *handle, const json_value *root);

static bool check_catalog(call *k, const septum *handle, const json_value *root) {
  (void)handle;
  return catalog_check_file(k->memory, &k->diags, root);
}

static bool check_brief(call *k, const septum *handle, const json_value *root) {
  const catalog *c = handle->catalog;
  brief *b = arena_alloc(k->memory, sizeof *b);
  job_defaults(b);
  return job_read(k->memory, &k->diags, c, root, false, b);
}

static bool check_prices(call *k, const septum *handle, const json_value *root) {
  const catalog *c = handle->catalog;
  const price_book *book = prices_read(k->memory, &k->diags, c, root);
  if (book != NULL) (void)prices_report_missing(k->memory, &k->diags, c, book);
  return book != NULL;
}

static bool check_wall(call *k, const septum *handle, const json_value *root) {
  const catalog *c = handle->catalog;
  wall w = wall_empty();
  const char *name = NULL;
  return line_from_json(k->memory, &k->diags, c, root, &w, &name) &&
         compat_buildable(&k->diags, (diag_place){root->file, 0, 0, NULL}, c, &w);
}

/* A listing's boards are looked up in the catalog as they are when a brief names it. */
static bool check_listing(call *k, const septum *handle, const json_value *root) {
  catalog alone = *handle->catalog;
  alone.published_count = 0;
  return rows_read(k->memory, &k->diags, root, "listing", &alone.fire, &alone.fire_count) &&
         rows_check_ids(k->memory, &k->diags, &alone);
}

static bool check_report(call *k, const septum *handle, const json_value *root) {
  const catalog *c = handle->catalog;
  tested_wall *tested = NULL;
  size_t count = 0;
  if (!tested_read(k->memory, &k->diags, c, root, &tested, &count)) return false;
  for (size_t i = 0; i < count; i++) request_check_curve(k, &tested[i]);
  return true;
}

/* The types of the drawings: lines that can be read and walls that can be built. */
static bool check_marks(call *k, const catalog *c, const project *p) {
  bool sound = true;
  for (int i = 0; i < p->mark_count; i++) {
    wall w = wall_empty();
    const json_value *line = p->mark[i].line_json;
    bool read = line_parse_value(k->memory, &k->diags, c, line, &w);
    sound = read && compat_buildable(&k->diags, json_place(k->memory, line), c, &w) && sound;
  }
  return sound;
}

/* A project with all that it names: its price book, listings and reports, and its schedule. */
static bool check_project(call *k, const septum *handle, const json_value *root) {
  project *p = arena_alloc(k->memory, sizeof *p);
  request *q = arena_alloc(k->memory, sizeof *q);
  septum_options plain;
  if (!project_read(k->memory, &k->diags, handle->catalog, root, p)) return false;
  septum_options_init(&plain);
  q->brief = p->common;
  bool sound = request_settle(k, handle, &plain, true, q);
  size_t first = k->diags.count;
  sound = check_marks(k, handle->catalog, p) && sound;
  if (q->prices != NULL) sound = project_check_stock(k->memory, &k->diags, p, q->prices) && sound;
  diag_sort(&k->diags, first);
  const csv_table *t = csv_load(k->memory, &k->diags, p->walls);
  return t != NULL && schedule_read(k->memory, &k->diags, handle->catalog, p, t) != NULL && sound;
}

static const struct check_kind {
  const char *kind;
  check_reader reader;
} check_kinds[] = {
    {"acoustics", check_catalog}, {"boards", check_catalog},
    {"brief", check_brief},       {"fills", check_catalog},
    {"fire", check_catalog},      {"frames", check_catalog},
    {"listing", check_listing},   {"mounts", check_catalog},
    {"price-book", check_prices}, {"project", check_project},
    {"published", check_catalog}, {"report", check_report},
    {"targets", check_catalog},   {"wall", check_wall},
};
enum { CHECK_KINDS = sizeof check_kinds / sizeof check_kinds[0] };

static const struct check_kind *find_kind(const char *word) {
  size_t n = strcspn(word, "/");
  for (size_t i = 0; i < CHECK_KINDS; i++)
    if (strlen(check_kinds[i].kind) == n && strncmp(check_kinds[i].kind, word, n) == 0)
      return &check_kinds[i];
  return NULL;
}

static void unknown_kind(call *k, const json_value *root, const json_value *said) {
  const char *names[CHECK_KINDS];
  for (size_t i = 0; i < CHECK_KINDS; i++) names[i] = check_kinds[i].kind;
  const json_value *at = said != NULL ? said : root;
  bool word = said != NULL && said->kind == JSON_STRING;
  const char *near =
      word ? text_nearest(text_copyn(k->memory, said->string, strcspn(said->string, "/")), names,
                          CHECK_KINDS)
           : NULL;
  diag_add(&k->diags, DIAG_ERROR, ERROR_FILE_KIND, json_place(k->memory, at),
           "expected an object with the key \"septum\" naming a kind of file that septum reads, "
           "found %s%s%s%s%s",
           word ? "\"" : "", word ? said->string : json_kind_name(at->kind), word ? "\"" : "",
           near ? "; the nearest is " : "", near ? near : "");
}

static void check_root(call *k, const septum *handle, const json_value *root, checked_file *out) {
  const json_value *said = json_get(root, "septum");
  const struct check_kind *kind =
      said != NULL && said->kind == JSON_STRING ? find_kind(said->string) : NULL;
  if (kind == NULL) {
    unknown_kind(k, root, said);
    return;
  }
  out->kind = text_format(k->memory, "%s/1", kind->kind);
  (void)kind->reader(k, handle, root); /* which checks the version too */
}

static status check_stage(call *k, void *given) {
  check_job *job = given;
  checked_file *files = arena_array(k->memory, job->count, sizeof *files);
  status worst = STATUS_OK;
  for (size_t i = 0; i < job->count; i++) {
    files[i].path = job->paths[i];
    const json_value *root = json_load(k->memory, &k->diags, job->paths[i]);
    if (root != NULL) check_root(k, job->handle, root, &files[i]);
    files[i].errors = k->diags.errors;
    if (k->diags.worst > worst) worst = k->diags.worst;
    call_tell(k);
    diag_init(&k->diags, k->memory);
    k->heard = 0;
  }
  text words, json;
  text_init(&words, k->memory, JSON_MAX_BYTES);
  text_init(&json, k->memory, JSON_MAX_BYTES);
  report_check_text(files, job->count, &words);
  report_check_json(files, job->count, &json);
  job->made = call_answer(k, words.data, json.data, "");
  return worst;
}

septum_status septum_check(septum *handle, const char *const *paths, size_t count,
                           septum_answer **out) {
  check_job job = {.handle = handle, .paths = paths, .count = count};
  bool made = false;
  septum_status answer = call_run(handle->listener, handle->user, check_stage, &job, &made);
  *out = made ? job.made : NULL;
  return answer;
}
