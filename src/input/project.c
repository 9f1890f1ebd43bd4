#include "input/project.h"

#include <stddef.h>
#include <string.h>

#include "base/file.h"
#include "input/csv.h"
#include "input/job_fields.h"

#define COUNT(table) (sizeof(table) / sizeof((table)[0]))

/* Wide guards against slips of a digit. */
#define MAX_MONEY    1e12
#define MAX_QUANTITY 1e9
#define MAX_RUN_M    1e6
#define MAX_AREA_M2  1e7
/* Stands for a size that the file does not say while the members are read. */
#define UNSAID_M 1e9

static const char *const framing_words[] = {"none", "storey", "all", NULL};
static const char *const aim_words[] = {"cost", "margin", NULL};

typedef struct raw_project {
  job_raw brief; /* first: job_fields point into it */
  project p;
  const json_value *stock, *types, *walls;
} raw_project;

static void fault(job_reader *r, error_code code, const json_value *v, const char *message) {
  diag_add(r->diags, DIAG_ERROR, code, json_place(r->arena, v), "%s", message);
}

/* ---- the members ---- */

#define AT(member) offsetof(raw_project, member)
static const field project_fields[] = {
    {"walls", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, AT(walls)},
    {"max_types", FIELD_INTEGER, FIELD_NULL_OK, 1, PROJECT_MAX_TYPES, 0, NULL, AT(p.max_types)},
    {"type_setup_cost", FIELD_NUMBER, 0, 0, MAX_MONEY, 0, NULL, AT(p.type_setup_cost)},
    {"min_run_m", FIELD_LENGTH, 0, 0, MAX_RUN_M, 0, NULL, AT(p.min_run_m)},
    {"floor_area_max_m2", FIELD_NUMBER, FIELD_ABOVE_MIN | FIELD_NULL_OK, 0, MAX_AREA_M2, 0, NULL,
     AT(p.floor_area_max_m2)},
    {"floor_area_max_ft2", FIELD_NUMBER, FIELD_ABOVE_MIN | FIELD_NULL_OK, 0, MAX_AREA_M2,
     UNITS_M2_PER_FT2, NULL, AT(p.floor_area_max_m2)},
    {"budget", FIELD_NUMBER, FIELD_ABOVE_MIN | FIELD_NULL_OK, 0, MAX_MONEY, 0, NULL, AT(p.budget)},
    {"same_framing", FIELD_CHOICE, 0, 0, 0, 0, framing_words, AT(p.same_framing)},
    {"objective", FIELD_CHOICE, 0, 0, 0, 0, aim_words, AT(p.aim)},
    {"quantity_breaks", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(p.quantity_breaks)},
    {"confidence", FIELD_NUMBER, 0, 0.5, 0.999, 0, NULL, AT(p.confidence)},
    {"metric", FIELD_CHOICE, 0, 0, 0, 0, sound_metric_names, AT(p.metric)},
    {"basis", FIELD_CHOICE, 0, 0, 0, 0, job_basis_words, AT(p.basis)},
    {"evidence", FIELD_CHOICE, 0, 0, 0, 0, job_evidence_words, AT(p.evidence)},
    {"margin", FIELD_NUMBER, 0, 0, 30, 0, NULL, AT(p.margin)},
    {"stock", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(stock)},
    {"types", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(types)},
};
#undef AT

/* A brief's fields but for the openings, which belong to a wall, and the project's own. */
static const field *all_fields(arena *a, size_t *count) {
  field *all = arena_array(a, job_field_count + COUNT(project_fields), sizeof *all);
  *count = 0;
  for (size_t i = 0; i < job_field_count; i++)
    if (!text_equal(job_fields[i].key, "openings")) all[(*count)++] = job_fields[i];
  memcpy(all + *count, project_fields, sizeof project_fields);
  *count += COUNT(project_fields);
  return all;
}

/* ---- stock ---- */

typedef struct raw_stock {
  const char *item, *unit;
  double quantity;
} raw_stock;

static const char *unit_list(arena *a) {
  text t;
  text_init(&t, a, 400);
  for (int i = 0; price_unit_words[i]; i++)
    text_putf(&t, "%s%s", i ? ", " : "", price_unit_words[i]);
  return t.data;
}

static void read_stock(job_reader *r, const json_value *v, project *out) {
  static const field table[] = {
      {"item", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_stock, item)},
      {"quantity", FIELD_NUMBER, FIELD_REQUIRED | FIELD_ABOVE_MIN, 0, MAX_QUANTITY, 0, NULL,
       offsetof(raw_stock, quantity)},
      {"unit", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_stock, unit)},
      {"note", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
  };
  raw_stock raw = {NULL, NULL, 0};
  if (!fields_read(r->arena, r->diags, v, table, COUNT(table), &raw)) return;
  double si = 0;
  project_stock s = {.item = raw.item, .unit_word = raw.unit, .json = v};
  if (!prices_unit(raw.unit, &s.unit, &si)) {
    fault(r, ERROR_FIELD_UNIT, json_get(v, "unit"),
          text_format(r->arena, "expected one of %s; found \"%s\"", unit_list(r->arena), raw.unit));
    return;
  }
  s.quantity = raw.quantity * si;
  for (int i = 0; i < out->stock_count; i++) {
    if (!text_equal(out->stock[i].item, s.item)) continue;
    fault(r, ERROR_FIELD_CONFLICT, json_get(v, "item"),
          text_format(r->arena, "\"%s\" stands in line %d too; add them up", s.item,
                      out->stock[i].json->line));
    return;
  }
  out->stock[out->stock_count++] = s;
}

static bool is_list(job_reader *r, const json_value *v, size_t max) {
  if (v->kind != JSON_ARRAY)
    fault(r, ERROR_FIELD_TYPE, v,
          text_format(r->arena, "expected an array, found %s", json_kind_name(v->kind)));
  else if (v->count > max)
    fault(r, ERROR_FIELD_RANGE, v,
          text_format(r->arena, "must have at most %zu entries, found %zu", max, v->count));
  else
    return true;
  return false;
}

/* ---- the drawings' types ---- */

typedef struct raw_mark {
  const char *mark, *line;
  bool locked;
} raw_mark;

static void put_mark(job_reader *r, const json_value *v, const raw_mark *raw, project *out) {
  if (raw->mark[0] == '\0' || raw->line[0] == '\0') {
    fault(r, ERROR_FIELD_RANGE, v, "the mark and the wall line of a type must not be empty");
    return;
  }
  int other = project_find_mark(out, raw->mark);
  if (other != CATALOG_NONE) {
    fault(r, ERROR_FIELD_CONFLICT, v,
          text_format(r->arena, "the mark \"%s\" stands in line %d too", raw->mark,
                      out->mark[other].json->line));
    return;
  }
  out->mark[out->mark_count++] = (project_mark){
      .mark = raw->mark,
      .line = raw->line,
      .locked = raw->locked,
      .json = v,
      .line_json = v->kind == JSON_STRING ? v : json_get(v, "line"),
  };
}

/* {"P1": {"line": ..., "locked": ...}} or {"P1": "line"}: `v` is the member; in a list the mark
 * stands inside. */
static void read_mark(job_reader *r, const json_value *v, bool inside, project *out) {
  static const field table[] = {
      {"line", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_mark, line)},
      {"locked", FIELD_BOOL, 0, 0, 0, 0, NULL, offsetof(raw_mark, locked)},
      {"note", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
      {"mark", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_mark, mark)},
  };
  raw_mark raw = {.mark = v->key};
  if (!inside && v->kind == JSON_STRING)
    raw.line = v->string;
  else if (!fields_read(r->arena, r->diags, v, table, COUNT(table) - !inside, &raw))
    return;
  put_mark(r, v, &raw, out);
}

static void read_types(job_reader *r, const json_value *v, project *out) {
  bool list = v->kind == JSON_ARRAY;
  if (!list && v->kind != JSON_OBJECT) {
    fault(r, ERROR_FIELD_TYPE, v,
          text_format(r->arena, "expected an object with the marks of the drawings, found %s",
                      json_kind_name(v->kind)));
    return;
  }
  if (v->count > PROJECT_MAX_MARKS) {
    fault(r, ERROR_FIELD_RANGE, v,
          text_format(r->arena, "must have at most %d types, found %zu", PROJECT_MAX_MARKS,
                      v->count));
    return;
  }
  for (const json_value *x = v->first; x; x = x->next) read_mark(r, x, list, out);
}

int project_find_mark(const project *p, const char *mark) {
  for (int i = 0; i < p->mark_count; i++)
    if (csv_same(p->mark[i].mark, mark)) return i;
  return CATALOG_NONE;
}

/* ---- the project ---- */

static void read_walls(job_reader *r, const json_value *v, project *out) {
  if (!v) return;
  if (v->kind != JSON_STRING || v->string[0] == '\0') {
    fault(r, ERROR_FIELD_TYPE, v,
          text_format(r->arena, "expected the path of a wall schedule (CSV), found %s",
                      v->kind == JSON_STRING ? "an empty string" : json_kind_name(v->kind)));
    return;
  }
  out->walls = file_beside(r->arena, v->file, v->string);
  out->walls_json = v;
}

/* Sizes that no project states for all its walls, and those it may leave to the rows. */
static void settle_sizes(job_reader *r, const json_value *wall, brief *common) {
  if (common->corners >= 0 || common->tees >= 0 || common->free_ends >= 0 || common->doors >= 0)
    fault(r, ERROR_FIELD_UNKNOWN, wall,
          "the corners, tees, free ends and doors of each wall stand in its row of the schedule, "
          "not here");
  if (common->length_m < UNSAID_M)
    fault(r, ERROR_FIELD_UNKNOWN, wall,
          "the length of each wall stands in its row of the schedule, not here");
  if (!(common->height_m < UNSAID_M)) common->height_m = 0;
}

static void check_whole(job_reader *r, const json_value *root, const project *p) {
  if (p->aim == AIM_MARGIN && !(p->budget > 0))
    fault(r, ERROR_BRIEF_CONTRADICTION, json_get(root, "objective"),
          "the best margin has no end without a budget: give \"budget\" too");
}

bool project_read(arena *a, diag_list *d, const catalog *c, const json_value *root, project *out) {
  size_t before = d->errors, first = d->count, rows;
  job_reader r = {a, d, c};
  *out = (project){.file = root->file, .crc = root->crc, .title = ""};
  job_defaults(&out->common);
  if (!json_is(a, d, root, "project")) return false;
  raw_project *raw = arena_alloc(a, sizeof *raw);
  raw->brief.b = out->common;
  raw->brief.b.length_m = raw->brief.b.height_m = UNSAID_M;
  raw->p = *out;
  raw->p.confidence = 0.8;
  raw->p.quantity_breaks = true;
  const field *table = all_fields(a, &rows);
  (void)fields_read(a, d, root, table, rows, raw);
  *out = raw->p;
  job_take(&r, root, &raw->brief, false, &out->common);
  settle_sizes(&r, raw->brief.wall, &out->common);
  out->title = out->common.title;
  out->units = out->common.units;
  read_walls(&r, raw->walls, out);
  if (raw->stock && is_list(&r, raw->stock, PROJECT_MAX_STOCK))
    for (const json_value *v = raw->stock->first; v; v = v->next) read_stock(&r, v, out);
  if (raw->types) read_types(&r, raw->types, out);
  check_whole(&r, root, out);
  diag_sort(d, first);
  return d->errors == before;
}

/* ---- stock and the price book ---- */

static const char *nearest_item(arena *a, const price_book *book, const char *word) {
  const char **codes = arena_array(a, book->count, sizeof *codes);
  for (size_t i = 0; i < book->count; i++) codes[i] = book->items[i].code;
  return text_nearest(word, codes, book->count);
}

bool project_check_stock(arena *a, diag_list *d, const project *p, const price_book *book) {
  size_t before = d->errors;
  for (int i = 0; i < p->stock_count; i++) {
    const project_stock *s = &p->stock[i];
    int item = prices_item(book, s->item);
    if (item == CATALOG_NONE) {
      const char *near = nearest_item(a, book, s->item);
      diag_add(d, DIAG_ERROR, ERROR_PRICE_UNKNOWN_ITEM, json_place(a, json_get(s->json, "item")),
               "the price book %s has no item \"%s\"%s%s", book->file, s->item,
               near ? "; the nearest is " : "", near ? near : "");
    } else if (book->items[item].unit != s->unit) {
      diag_add(d, DIAG_ERROR, ERROR_FIELD_UNIT, json_place(a, json_get(s->json, "unit")),
               "the price book counts \"%s\" in %s, not in %s", s->item,
               book->items[item].unit_word, s->unit_word);
    }
  }
  return d->errors == before;
}
