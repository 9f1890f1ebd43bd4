#include "api/request.h"

#include <string.h>

#include "acoustics/rating.h"
#include "api/data.h"
#include "base/file.h"
#include "input/rows.h"
#include "wall/compat.h"
#include "wall/line.h"
#include "wall/tested.h"

/* Rating without a brief: cost and height are those of this wall. */
static const double REFERENCE_LENGTH_M = 10.0, REFERENCE_HEIGHT_M = 3.0;

static bool read_brief(call *k, const catalog *c, const char *path, bool target_required,
                       brief *out) {
  job_defaults(out);
  if (path == NULL) {
    out->length_m = REFERENCE_LENGTH_M;
    out->height_m = REFERENCE_HEIGHT_M;
    return true;
  }
  const json_value *root = json_load(k->memory, &k->diags, path);
  return root != NULL && job_read(k->memory, &k->diags, c, root, target_required, out);
}

static const price_book *read_prices(call *k, const septum_options *options, const request *q) {
  const char *path = options->prices != NULL ? options->prices : q->brief.prices;
  if (path == NULL) path = data_default_prices(k->memory, &k->diags);
  return path == NULL ? NULL : prices_load(k->memory, &k->diags, &q->catalog, path);
}

static bool add_listing(call *k, catalog *c, const char *path) {
  const json_value *root = json_load(k->memory, &k->diags, path);
  wall_row *rows = NULL;
  size_t count = 0;
  if (root == NULL || !rows_read(k->memory, &k->diags, root, "listing", &rows, &count))
    return false;
  wall_row *all = arena_array(k->memory, c->fire_count + count, sizeof *all);
  if (c->fire_count > 0) memcpy(all, c->fire, c->fire_count * sizeof *all);
  if (count > 0) memcpy(all + c->fire_count, rows, count * sizeof *all);
  c->fire = all;
  c->fire_count += count;
  return true;
}

void request_check_curve(call *k, const tested_wall *t) {
  int found = rating_stc(t->tl_db, true);
  if (!t->has_bands || found == t->row.stc) return;
  diag_add(&k->diags, DIAG_WARNING, ERROR_FIELD_CONFLICT, json_place(k->memory, t->stc),
           "expected STC %d, that of the curve by ASTM E413, found %d: the lower one is taken", found,
           t->row.stc);
}

static bool add_report(call *k, catalog *c, const char *path) {
  const json_value *root = json_load(k->memory, &k->diags, path);
  tested_wall *tested = NULL;
  size_t count = 0;
  if (root == NULL || !tested_read(k->memory, &k->diags, c, root, &tested, &count)) return false;
  wall_row *all = arena_array(k->memory, c->published_count + count, sizeof *all);
  if (c->published_count > 0) memcpy(all, c->published, c->published_count * sizeof *all);
  for (size_t i = 0; i < count; i++) {
    wall_row *row = &all[c->published_count + i];
    request_check_curve(k, &tested[i]);
    *row = tested[i].row;
    if (tested[i].has_bands && rating_stc(tested[i].tl_db, true) < row->stc)
      row->stc = rating_stc(tested[i].tl_db, true);
  }
  c->published = all;
  c->published_count += count;
  return true;
}

/* The user's fire listings and test reports stand beside the rows of the catalog, in copies: the
 * handle's rows stay as they are. */
static bool add_evidence(call *k, const brief *b, catalog *c) {
  if (b->listing_count == 0 && b->report_count == 0) return true;
  wall_row *fire = arena_array(k->memory, c->fire_count, sizeof *fire);
  wall_row *published = arena_array(k->memory, c->published_count, sizeof *published);
  if (c->fire_count > 0) memcpy(fire, c->fire, c->fire_count * sizeof *fire);
  if (c->published_count > 0)
    memcpy(published, c->published, c->published_count * sizeof *published);
  c->fire = fire;
  c->published = published;
  bool sound = true;
  for (int i = 0; i < b->listing_count; i++) sound = add_listing(k, c, b->listings[i]) && sound;
  for (int i = 0; i < b->report_count; i++) sound = add_report(k, c, b->reports[i]) && sound;
  return sound && rows_check_ids(k->memory, &k->diags, c);
}

static units_system text_units(const septum_options *options, const brief *b) {
  if (options->units == SEPTUM_UNITS_US) return UNITS_US;
  if (options->units == SEPTUM_UNITS_SI) return UNITS_SI;
  return b->units;
}

bool request_settle(call *k, const septum *handle, const septum_options *options, bool asked,
                    request *out) {
  out->catalog = *handle->catalog;
  bool sound = add_evidence(k, &out->brief, &out->catalog);
  out->prices = read_prices(k, options, out);
  if (!sound || out->prices == NULL) return false;
  out->brief.units = text_units(options, &out->brief); /* limits and findings are words too */
  out->context =
      (judge_context){.catalog = &out->catalog, .prices = out->prices, .brief = &out->brief};
  out->report = (report){.arena = k->memory,
                         .catalog = &out->catalog,
                         .prices = out->prices,
                         .brief = &out->brief,
                         .asked = asked,
                         .usual_prices = !options->prices && !out->brief.prices,
                         .units = out->brief.units};
  return true;
}

bool request_prepare(call *k, const septum *handle, const septum_options *options,
                     const char *brief_path, bool target_required, request *out) {
  bool sound = read_brief(k, handle->catalog, brief_path, target_required, &out->brief);
  if (sound) return request_settle(k, handle, options, brief_path != NULL, out);
  out->catalog = *handle->catalog;
  (void)read_prices(k, options, out); /* its faults are told too */
  return false;
}

static bool resize(call *k, const char *what, const char *words, int most_m, double *metres) {
  const char *expected = NULL;
  if (words == NULL) return true;
  double found = 0;
  if (!units_parse_length(words, 0, &found, &expected)) {
    diag_error(&k->diags, ERROR_USAGE, "the %s: expected %s, found \"%s\"", what, expected, words);
    return false;
  }
  if (found > 0 && found <= most_m) {
    *metres = found;
    return true;
  }
  diag_error(&k->diags, ERROR_USAGE, "the %s: expected above 0, to %d m, found \"%s\"", what, most_m,
             words);
  return false;
}

static bool recount(call *k, const char *what, int given, int *count) {
  if (given == -1) return true;
  if (given >= 0 && given <= JOB_COUNT_MAX) {
    *count = given;
    return true;
  }
  diag_error(&k->diags, ERROR_USAGE, "the %s: expected 0 to %d, found %d", what, JOB_COUNT_MAX,
             given);
  return false;
}

bool request_resize(call *k, const septum_options *options, brief *b) {
  bool sound = resize(k, "length", options->length, JOB_LENGTH_MAX_M, &b->length_m);
  sound = resize(k, "height", options->height, JOB_HEIGHT_MAX_M, &b->height_m) && sound;
  sound = recount(k, "corners", options->corners, &b->corners) && sound;
  sound = recount(k, "tees", options->tees, &b->tees) && sound;
  sound = recount(k, "doors", options->doors, &b->doors) && sound;
  const char *misfit = sound ? job_misfit(b) : NULL;
  if (misfit != NULL) diag_error(&k->diags, ERROR_USAGE, "a wall of this size: %s", misfit);
  return sound && misfit == NULL;
}

/* A wall line holds bars; what holds none is a path when such a file is there or it looks like one.
 */
static bool is_path(const char *words) {
  if (strchr(words, '|') != NULL) return false;
  size_t n = strlen(words);
  return file_exists(words) || strchr(words, '/') != NULL ||
         (n > 5 && strcmp(words + n - 5, ".json") == 0);
}

bool request_wall(call *k, const catalog *c, const char *words, wall *out, const char **name) {
  *name = NULL;
  if (!is_path(words))
    return line_parse(k->memory, &k->diags, c, words, out) && compat_buildable(&k->diags, (diag_place){NULL, 0, 0, NULL}, c, out);
  const json_value *root = json_load(k->memory, &k->diags, words);
  return root != NULL && line_from_json(k->memory, &k->diags, c, root, out, name) &&
         compat_buildable(&k->diags, (diag_place){words, 0, 0, NULL}, c, out);
}
