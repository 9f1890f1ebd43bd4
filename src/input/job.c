#include "input/job.h"

#include <stddef.h>
#include <string.h>

#include "base/file.h"
#include "input/job_fields.h"

#define COUNT(table) (sizeof(table) / sizeof((table)[0]))

/* Ranges below are wide guards against slips of a digit or a unit, not rules of the trade. */
enum { MAX_FINISH_LEVEL = 5, MAX_PATHS = 16 };

static const char *const unit_words[] = {"us", "si", NULL};
static const char *const code_words[] = {"none", "ibc", "nbc", NULL};
const char *const job_basis_words[] = {"lab", "field", NULL};
const char *const job_evidence_words[] = {"any", "published", NULL};
const char *const job_scope_words[] = {"wall", "composite", NULL};
const char *const job_fastening_words[] = {"none", "light", "heavy", NULL};
const char *const job_noncombustible_words[] = {"no", "strict", "frt_ok", NULL};
const char *const job_shear_words[] = {"none", "a", "b", NULL};
const char *const job_top_words[] = {"deck", "ceiling", NULL};
const char *const job_head_words[] = {"rigid", "slip", NULL};
const char *const job_boards_words[] = {"lump", "vertical", "horizontal", NULL};
static const char *const build_words[] = {"ordinary", "any", NULL};

static const char opening_source[] = "common practice, no source";
const opening_kind job_opening_kinds[] = {
    {"door-hollow-core", 18, opening_source},
    {"door-solid-core", 22, opening_source},
    {"door-solid-core-gasketed", 28, opening_source},
    {"door-hollow-metal-gasketed", 30, opening_source},
    {"glass-6", 29, opening_source},
    {"glass-6-laminated", 35, opening_source},
    {"glass-25-insulating", 33, opening_source},
};
const int job_opening_kind_count = (int)COUNT(job_opening_kinds);

static const char *const ceiling_above[] = {"the ceiling of side a is above the top of the wall",
                                            "the ceiling of side b is above the top of the wall"};
static const char fastening_longer[] = "the fastening is longer than the wall";

typedef job_reader reader;

static void contradiction(reader *r, const json_value *v, const char *message) {
  diag_add(r->diags, DIAG_ERROR, ERROR_BRIEF_CONTRADICTION, json_place(r->arena, v), "%s", message);
}

static void caution(reader *r, const json_value *v, const char *message) {
  diag_add(r->diags, DIAG_WARNING, ERROR_BRIEF_CONTRADICTION, json_place(r->arena, v), "%s",
           message);
}

static void read_object(reader *r, const json_value *v, const field *table, size_t rows,
                        void *out) {
  if (v) (void)fields_read(r->arena, r->diags, v, table, rows, out);
}

static bool is_array(reader *r, const json_value *v, size_t max) {
  if (v->kind != JSON_ARRAY) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_TYPE, json_place(r->arena, v),
             "expected an array, found %s", json_kind_name(v->kind));
    return false;
  }
  if (v->count <= max) return true;
  diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(r->arena, v),
           "must have at most %zu entries, found %zu", max, v->count);
  return false;
}

void job_defaults(brief *b) {
  *b = (brief){
      .title = "",
      .units = UNITS_US,
      .code = CODE_NONE,
      .length_m = 3.0,
      .height_m = 2.7,
      .corners = -1,
      .tees = -1,
      .free_ends = -1,
      .doors = -1,
      .floors_above = -1,
      .shear_side = CATALOG_NONE,
      .lateral_pa = 240,
      .deflection = 240,
      .field_mean = 5,
      .field_sd = 2,
  };
  for (int i = 0; i < 2; i++) b->side[i] = (room_side){.room = "", .finish_level = 4};
}

/* ---- targets ---- */

typedef struct raw_target {
  target t;
  int scope;
} raw_target;

#define AT(member) offsetof(raw_target, member)
static void read_target(reader *r, const json_value *v, brief *out) {
  const char *metrics[METRIC_COUNT + 1] = {NULL};
  for (int i = 0; i < METRIC_COUNT; i++) metrics[i] = sound_metric_names[i];
  const field table[] = {
      {"metric", FIELD_CHOICE, 0, 0, 0, 0, metrics, AT(t.metric)},
      {"value", FIELD_NUMBER, FIELD_REQUIRED, 1, 100, 0, NULL, AT(t.value)},
      {"basis", FIELD_CHOICE, 0, 0, 0, 0, job_basis_words, AT(t.basis)},
      {"confidence", FIELD_NUMBER, 0, 0.5, 0.999, 0, NULL, AT(t.confidence)},
      {"evidence", FIELD_CHOICE, 0, 0, 0, 0, job_evidence_words, AT(t.evidence)},
      {"scope", FIELD_CHOICE, 0, 0, 0, 0, job_scope_words, AT(scope)},
      {"margin", FIELD_NUMBER, 0, 0, 30, 0, NULL, AT(t.margin)},
  };
  raw_target raw = {.t = {.metric = METRIC_STC, .confidence = 0.8}, .scope = -1};
  read_object(r, v, table, COUNT(table), &raw);
  raw.t.scope_given = raw.scope >= 0;
  raw.t.composite = raw.scope == 1;
  out->targets[out->target_count++] = raw.t;
}
#undef AT

static void read_targets(reader *r, const json_value *root, const json_value *one,
                         const json_value *many, bool required, brief *out) {
  if (one && many) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_CONFLICT, json_place(r->arena, many),
             "\"target\" stands in line %d; keep one of them", one->key_line);
    return;
  }
  if (one) read_target(r, one, out);
  if (many && is_array(r, many, BRIEF_MAX_TARGETS))
    for (const json_value *v = many->first; v; v = v->next) read_target(r, v, out);
  if (required && !one && !(many && (many->kind != JSON_ARRAY || many->count > 0)))
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_MISSING, json_place(r->arena, many ? many : root),
             "a target is needed: \"target\": {\"metric\": \"STC\", \"value\": 50}");
}

/* ---- limits ---- */

typedef struct raw_bounds {
  const json_value *min, *max;
} raw_bounds;

typedef struct raw_limits {
  const json_value *thickness, *mass, *cost;
} raw_limits;

/* A bound in SI. `unit` is a unit of length, for which text with units serves too, or NULL: number
 * x scale. */
static bool read_bound(reader *r, const json_value *v, const char *unit, double scale,
                       double *out) {
  const char *expected = NULL;
  double per_unit = 0;
  if (unit) (void)units_to_metres(unit, 1, &per_unit);
  if (v->kind == JSON_STRING && unit) {
    if (units_parse_length(v->string, per_unit, out, &expected)) return true;
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_UNIT, json_place(r->arena, v),
             "expected %s; found \"%s\"", expected, v->string);
    return false;
  }
  if (v->kind != JSON_NUMBER) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_TYPE, json_place(r->arena, v),
             "expected %s, found %s", unit ? "a number or a length with its unit" : "a number",
             json_kind_name(v->kind));
    return false;
  }
  if (v->number < 0) {
    text found;
    text_init(&found, r->arena, 400);
    text_number(&found, v->number, 3);
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(r->arena, v),
             "must be at least 0, found %s", found.data);
    return false;
  }
  if (unit) return units_to_metres(unit, v->number, out);
  *out = v->number * scale;
  return true;
}

static void read_limit(reader *r, const json_value *v, const char *unit, double scale, limit *out) {
  static const field table[] = {
      {"min", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, offsetof(raw_bounds, min)},
      {"max", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, offsetof(raw_bounds, max)},
  };
  raw_bounds raw = {NULL, NULL};
  read_object(r, v, table, COUNT(table), &raw);
  if (raw.min) out->has_min = read_bound(r, raw.min, unit, scale, &out->min);
  if (raw.max) out->has_max = read_bound(r, raw.max, unit, scale, &out->max);
  if (out->has_min && out->has_max && out->min > out->max) contradiction(r, v, "min is above max");
}

static void read_limits(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"thickness_mm", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, thickness)},
      {"thickness_in", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, thickness)},
      {"thickness_ft", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, thickness)},
      {"thickness_m", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, thickness)},
      {"mass_kg_m2", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, mass)},
      {"mass_psf", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, mass)},
      {"cost_per_m2", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, cost)},
      {"cost_per_ft2", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_limits, cost)},
  };
  raw_limits raw = {NULL, NULL, NULL};
  read_object(r, v, table, COUNT(table), &raw);
  if (raw.thickness)
    read_limit(r, raw.thickness, strrchr(raw.thickness->key, '_') + 1, 1, &out->thickness_m);
  if (raw.mass)
    read_limit(r, raw.mass, NULL, text_equal(raw.mass->key, "mass_psf") ? UNITS_KG_M2_PER_PSF : 1,
               &out->mass_kg_m2);
  if (raw.cost)
    read_limit(r, raw.cost, NULL,
               text_equal(raw.cost->key, "cost_per_ft2") ? 1 / UNITS_M2_PER_FT2 : 1,
               &out->cost_per_m2);
}

/* ---- wall, building, structure, sides, services ---- */

#define AT(member) offsetof(brief, member)
static void read_wall(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"length_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, JOB_LENGTH_MAX_M, 0, NULL, AT(length_m)},
      {"height_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, JOB_HEIGHT_MAX_M, 0, NULL, AT(height_m)},
      {"ceiling_a_m", FIELD_LENGTH, FIELD_ABOVE_MIN | FIELD_NULL_OK, 0, 30, 0, NULL,
       AT(ceiling_m[0])},
      {"ceiling_b_m", FIELD_LENGTH, FIELD_ABOVE_MIN | FIELD_NULL_OK, 0, 30, 0, NULL,
       AT(ceiling_m[1])},
      {"top", FIELD_CHOICE, 0, 0, 0, 0, job_top_words, AT(top)},
      {"ceiling_class", FIELD_NUMBER, FIELD_NULL_OK, 5, 70, 0, NULL, AT(ceiling_class)},
      {"ceiling_batts", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(ceiling_batts)},
      {"head", FIELD_CHOICE, 0, 0, 0, 0, job_head_words, AT(head)},
      {"boards", FIELD_CHOICE, 0, 0, 0, 0, job_boards_words, AT(boards)},
      {"corners", FIELD_INTEGER, 0, 0, JOB_COUNT_MAX, 0, NULL, AT(corners)},
      {"tees", FIELD_INTEGER, 0, 0, JOB_COUNT_MAX, 0, NULL, AT(tees)},
      {"free_ends", FIELD_INTEGER, 0, 0, JOB_COUNT_MAX, 0, NULL, AT(free_ends)},
      {"doors", FIELD_INTEGER, 0, 0, JOB_COUNT_MAX, 0, NULL, AT(doors)},
  };
  read_object(r, v, table, COUNT(table), out);
  for (int i = 0; v && i < 2; i++)
    if (out->ceiling_m[i] > out->height_m) contradiction(r, v, ceiling_above[i]);
  if (v && out->top != TOP_CEILING && (out->ceiling_class > 0 || out->ceiling_batts))
    caution(r, v, "ceiling_class and ceiling_batts count only where top is \"ceiling\"");
}

static void read_building(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"storeys", FIELD_INTEGER, 0, 1, 200, 0, NULL, AT(storeys)},
      {"sprinklered", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(sprinklered)},
  };
  read_object(r, v, table, COUNT(table), out);
  out->storeys_given = out->storeys > 0;
}

static void read_services(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"riser_m", FIELD_LENGTH, 0, 0, 0.5, 0, NULL, AT(riser_m)},
      {"run_m", FIELD_LENGTH, 0, 0, 0.5, 0, NULL, AT(run_m)},
      {"boxes_per_10m", FIELD_NUMBER, 0, 0, 100, 0, NULL, AT(boxes_per_10m)},
  };
  read_object(r, v, table, COUNT(table), out);
  out->boxes_given = v && json_get(v, "boxes_per_10m");
}

static void read_allowance(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"mean", FIELD_NUMBER, 0, 0, 20, 0, NULL, AT(field_mean)},
      {"sd", FIELD_NUMBER, 0, 0, 10, 0, NULL, AT(field_sd)},
  };
  read_object(r, v, table, COUNT(table), out);
}
#undef AT

typedef struct raw_structure {
  bool loadbearing;
  int floors_above, noncombustible, shear;
  double lateral_pa;
  const json_value *deflection;
} raw_structure;

bool job_span(const char *words, double *span) {
  static const double most = 2000;
  const char *p = text_starts(words, "L/") || text_starts(words, "l/") ? words + 2 : words;
  double found = 0;
  for (; *p; p++)
    found = *p >= '0' && *p <= '9' && found < most ? found * 10 + (*p - '0') : most + 1;
  if (found < JOB_SPAN_MIN || found > JOB_SPAN_MAX) return false;
  *span = found;
  return true;
}

/* 240, or "L/240". */
static void read_deflection(reader *r, const json_value *v, brief *out) {
  double span = v->kind == JSON_NUMBER ? v->number : 0;
  bool words = v->kind == JSON_STRING && text_starts(v->string, "L/") && job_span(v->string, &span);
  if (words || (span >= JOB_SPAN_MIN && span <= JOB_SPAN_MAX)) {
    out->deflection = span;
    return;
  }
  diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(r->arena, v),
           "expected the span over the deflection, from 60 to 2000: 240 or \"L/240\"");
}

#define AT(member) offsetof(raw_structure, member)
static void read_structure(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"loadbearing", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(loadbearing)},
      {"floors_above", FIELD_INTEGER, FIELD_NULL_OK, 0, 100, 0, NULL, AT(floors_above)},
      {"noncombustible", FIELD_CHOICE, 0, 0, 0, 0, job_noncombustible_words, AT(noncombustible)},
      {"shear_side", FIELD_CHOICE, 0, 0, 0, 0, job_shear_words, AT(shear)},
      {"lateral_pa", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 10000, 0, NULL, AT(lateral_pa)},
      {"lateral_psf", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 10000, UNITS_PA_PER_PSF, NULL,
       AT(lateral_pa)},
      {"deflection", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(deflection)},
  };
  raw_structure raw = {.floors_above = out->floors_above, .lateral_pa = out->lateral_pa};
  read_object(r, v, table, COUNT(table), &raw);
  out->loadbearing = raw.loadbearing;
  out->floors_above = raw.floors_above;
  out->noncombustible = (noncombustible)raw.noncombustible;
  out->shear_side = raw.shear - 1; /* "none" is CATALOG_NONE */
  out->lateral_pa = raw.lateral_pa;
  if (raw.deflection) read_deflection(r, raw.deflection, out);
  if (v && raw.floors_above >= 0 && !raw.loadbearing)
    caution(r, v, "floors_above counts only where loadbearing is true");
}
#undef AT

typedef struct raw_sides {
  const json_value *side[2];
} raw_sides;

#define AT(member) offsetof(room_side, member)
static void read_side(reader *r, const json_value *v, const brief *b, room_side *out) {
  static const field table[] = {
      {"room", FIELD_STRING, 0, 0, 0, 0, NULL, AT(room)},
      {"fastening", FIELD_CHOICE, 0, 0, 0, 0, job_fastening_words, AT(fastening)},
      {"fastening_length_m", FIELD_LENGTH, 0, 0, 1000, 0, NULL, AT(fastening_length_m)},
      {"room_depth_m", FIELD_LENGTH, FIELD_ABOVE_MIN | FIELD_NULL_OK, 0, 300, 0, NULL,
       AT(room_depth_m)},
      {"wet", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(wet)},
      {"abuse", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(abuse)},
      {"finish_level", FIELD_INTEGER, 0, 0, MAX_FINISH_LEVEL, 0, NULL, AT(finish_level)},
  };
  read_object(r, v, table, COUNT(table), out);
  if (v && out->fastening_length_m > b->length_m)
    contradiction(r, v, fastening_longer);
  if (v && out->fastening_length_m > 0 && out->fastening == FASTENING_NONE)
    caution(r, v, "a fastening length without a fastening has no effect");
}
#undef AT

static void read_sides(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"a", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_sides, side[0])},
      {"b", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_sides, side[1])},
  };
  raw_sides raw = {{NULL, NULL}};
  read_object(r, v, table, COUNT(table), &raw);
  for (int i = 0; i < 2; i++) read_side(r, raw.side[i], out, &out->side[i]);
}

/* ---- openings ---- */

typedef struct raw_opening {
  const char *kind;
  double area_m2, stc;
  const json_value *bands;
} raw_opening;

static void read_bands(reader *r, const json_value *v, opening *out) {
  if (!is_array(r, v, BANDS)) return;
  if (v->count != BANDS) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(r->arena, v),
             "expected %d values, the third octaves from 50 to 5000 Hz, found %zu", BANDS,
             v->count);
    return;
  }
  for (const json_value *x = v->first; x; x = x->next) {
    if (x->kind == JSON_NUMBER && x->number >= 0 && x->number <= 150)
      out->tl_db[x->index] = x->number;
    else
      diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(r->arena, x),
               "expected a transmission loss from 0 to 150 dB");
  }
  out->has_bands = true;
}

/* The rating of a kind that is named without one. */
static double kind_stc(reader *r, const json_value *v, const char *kind) {
  text known;
  text_init(&known, r->arena, 1000);
  for (int i = 0; i < job_opening_kind_count; i++) {
    if (text_equal(kind, job_opening_kinds[i].kind)) return job_opening_kinds[i].stc;
    text_putf(&known, "%s%s", i ? ", " : "", job_opening_kinds[i].kind);
  }
  diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_MISSING, json_place(r->arena, v),
           "give \"stc\" or \"tl_db\", or a kind whose rating is known (%s)", known.data);
  return 0;
}

#define AT(member) offsetof(raw_opening, member)
static void read_opening(reader *r, const json_value *v, brief *out) {
  static const field table[] = {
      {"kind", FIELD_STRING, 0, 0, 0, 0, NULL, AT(kind)},
      {"area_m2", FIELD_NUMBER, FIELD_REQUIRED | FIELD_ABOVE_MIN, 0, 1000, 0, NULL, AT(area_m2)},
      {"area_ft2", FIELD_NUMBER, FIELD_REQUIRED | FIELD_ABOVE_MIN, 0, 1000, UNITS_M2_PER_FT2, NULL,
       AT(area_m2)},
      {"stc", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 100, 0, NULL, AT(stc)},
      {"tl_db", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(bands)},
  };
  raw_opening raw = {.kind = ""};
  if (!fields_read(r->arena, r->diags, v, table, COUNT(table), &raw)) return;
  opening *o = &out->openings[out->opening_count++];
  *o = (opening){.kind = raw.kind, .area_m2 = raw.area_m2, .stc = raw.stc};
  if (raw.bands && raw.stc > 0)
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_CONFLICT, json_place(r->arena, raw.bands),
             "\"stc\" stands here too; keep one of them");
  if (raw.bands)
    read_bands(r, raw.bands, o);
  else if (!(raw.stc > 0))
    o->stc = kind_stc(r, v, raw.kind);
}
#undef AT

static double openings_m2(const brief *b) {
  double area = 0;
  for (int i = 0; i < b->opening_count; i++) area += b->openings[i].area_m2;
  return area;
}

const char *job_misfit(const brief *b) {
  for (int i = 0; i < 2; i++) {
    if (b->ceiling_m[i] > b->height_m) return ceiling_above[i];
    if (b->side[i].fastening_length_m > b->length_m) return fastening_longer;
  }
  if (b->opening_count > 0 && openings_m2(b) >= b->length_m * b->height_m)
    return "the openings leave nothing of the wall";
  return NULL;
}

static void read_openings(reader *r, const json_value *v, brief *out) {
  if (!v || !is_array(r, v, BRIEF_MAX_OPENINGS)) return;
  for (const json_value *x = v->first; x; x = x->next) read_opening(r, x, out);
  double area = openings_m2(out);
  if (area >= out->length_m * out->height_m)
    contradiction(r, v,
                  text_format(r->arena, "the openings (%s m2) leave nothing of the wall (%s m2)",
                              text_of(r->arena, area, 2),
                              text_of(r->arena, out->length_m * out->height_m, 2)));
}

/* ---- patterns and paths ---- */

/* Whether `pattern`, less its prefix, matches an id of the kinds that the prefix names. */
static bool matches_any(const catalog *c, const char *kind, const char *pattern) {
  bool all = kind[0] == '\0';
  for (size_t i = 0; (all || text_equal(kind, "board")) && i < c->layer_count; i++)
    if (text_match(pattern, c->layers[i].id)) return true;
  for (size_t i = 0; (all || text_equal(kind, "frame")) && i < c->frame_count; i++)
    if (text_match(pattern, c->frames[i].id)) return true;
  for (size_t i = 0; (all || text_equal(kind, "mount")) && i < c->mount_count; i++)
    if (text_match(pattern, c->mounts[i].id)) return true;
  for (size_t i = 0; (all || text_equal(kind, "fill")) && i < c->fill_count; i++)
    if (text_match(pattern, c->fills[i].id)) return true;
  return false;
}

static void say_unknown(reader *r, const json_value *v, const char *pattern) {
  const char *near = catalog_nearest(r->catalog, pattern);
  diag_add(r->diags, DIAG_WARNING, ERROR_CATALOG_UNKNOWN_ID, json_place(r->arena, v),
           "\"%s\" matches nothing in the catalogs%s%s%s", v->string,
           near ? "; did you mean \"" : "", near ? near : "", near ? "\"?" : "");
}

enum { MEANINGS_SHOWN = 8 };

static void say_ambiguous(reader *r, const json_value *v, const catalog_ref *found, size_t count) {
  text t;
  text_init(&t, r->arena, 1000);
  for (size_t i = 0; i < count && i < MEANINGS_SHOWN; i++)
    text_putf(&t, "%s%s", i ? ", " : "", catalog_id(r->catalog, found[i]));
  diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_CHOICE, json_place(r->arena, v),
           "\"%s\" may mean %s; name one, or use * and ? for several", v->string, t.data);
}

/* What people say for one record ("5/8X") becomes its id; a pattern stays one. */
static const char *said_id(reader *r, const json_value *v, const char *kind, const char *word) {
  catalog_ref found[MEANINGS_SHOWN], kept[MEANINGS_SHOWN];
  bool open = strpbrk(word, "*?") != NULL;
  size_t count = 0, all = open ? 0 : catalog_find(r->catalog, word, found, MEANINGS_SHOWN);
  for (size_t i = 0; i < all && i < MEANINGS_SHOWN; i++)
    if (!kind[0] || text_equal(kind, catalog_kind_names[found[i].kind])) kept[count++] = found[i];
  if (count == 1)
    return text_format(r->arena, "%s:%s", catalog_kind_names[kept[0].kind],
                       catalog_id(r->catalog, kept[0]));
  if (count > 1)
    say_ambiguous(r, v, kept, count);
  else
    say_unknown(r, v, word);
  return v->string;
}

/* The pattern as it is used from here on. */
static const char *check_pattern(reader *r, const json_value *v) {
  static const char *const kinds[] = {"board", "frame", "mount", "fill"};
  const char *colon = strchr(v->string, ':');
  const char *kind = colon ? text_copyn(r->arena, v->string, (size_t)(colon - v->string)) : "";
  const char *pattern = colon ? colon + 1 : v->string;
  bool known = !colon;
  for (size_t i = 0; i < COUNT(kinds); i++) known = known || text_equal(kind, kinds[i]);
  if (!known) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_CHOICE, json_place(r->arena, v),
             "expected board:, frame:, mount: or fill: before the pattern; found \"%s:\"", kind);
    return v->string;
  }
  if (!r->catalog || matches_any(r->catalog, kind, pattern)) return v->string;
  return said_id(r, v, kind, pattern);
}

static bool is_text(reader *r, const json_value *v) {
  if (v->kind == JSON_STRING && v->string[0]) return true;
  diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_TYPE, json_place(r->arena, v),
           "expected a string, found %s",
           v->kind == JSON_STRING ? "an empty one" : json_kind_name(v->kind));
  return false;
}

/* A list of words, or one word. */
static int read_words(reader *r, const json_value *v, int max, const char **out) {
  int count = 0;
  if (!v) return 0;
  if (v->kind == JSON_STRING) {
    if (is_text(r, v)) out[count++] = v->string;
    return count;
  }
  if (!is_array(r, v, (size_t)max)) return 0;
  for (const json_value *x = v->first; x; x = x->next)
    if (is_text(r, x)) out[count++] = x->string;
  return count;
}

static int read_patterns(reader *r, const json_value *v, const char **out) {
  int count = read_words(r, v, BRIEF_MAX_PATTERNS, out);
  if (!v) return 0;
  int at = 0;
  if (v->kind == JSON_STRING && count > 0) out[at++] = check_pattern(r, v);
  for (const json_value *x = v->first; x && at < count; x = x->next)
    if (x->kind == JSON_STRING && x->string[0]) out[at++] = check_pattern(r, x);
  return count;
}

static int read_paths(reader *r, const json_value *v, const char *file, const char **out) {
  int count = read_words(r, v, MAX_PATHS, out);
  for (int i = 0; i < count; i++) out[i] = file_beside(r->arena, file, out[i]);
  return count;
}

/* ---- the brief ---- */

_Static_assert(COUNT(((brief *)0)->listings) == MAX_PATHS &&
                   COUNT(((brief *)0)->reports) == MAX_PATHS,
               "places for paths");

#define AT(member) offsetof(job_raw, member)
const field job_fields[] = {
    {"title", FIELD_STRING, 0, 0, 0, 0, NULL, AT(b.title)},
    {"note", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"source", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"units", FIELD_CHOICE, 0, 0, 0, 0, unit_words, AT(b.units)},
    {"code", FIELD_CHOICE, 0, 0, 0, 0, code_words, AT(b.code)},
    {"building", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(building)},
    {"wall", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(wall)},
    {"target", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, AT(target)},
    {"targets", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, AT(targets)},
    {"limits", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(limits)},
    {"fire_min", FIELD_INTEGER, FIELD_NULL_OK, 0, 240, 0, NULL, AT(b.fire_min)},
    {"structure", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(structure)},
    {"sides", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(sides)},
    {"services", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(services)},
    {"openings", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(openings)},
    {"field_allowance", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(allowance)},
    {"floor_area_value_per_m2", FIELD_NUMBER, 0, 0, 1e6, 0, NULL, AT(b.floor_area_value_per_m2)},
    {"floor_area_value_per_ft2", FIELD_NUMBER, 0, 0, 1e6, 1 / UNITS_M2_PER_FT2, NULL,
     AT(b.floor_area_value_per_m2)},
    {"build", FIELD_CHOICE, 0, 0, 0, 0, build_words, AT(b.build)},
    {"only", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, AT(only)},
    {"without", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, AT(without)},
    {"prices", FIELD_STRING, FIELD_NULL_OK, 0, 0, 0, NULL, AT(b.prices)},
    {"listings", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, AT(listings)},
    {"reports", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, AT(reports)},
};
#undef AT
const size_t job_field_count = COUNT(job_fields);

static void read_lists(reader *r, const json_value *root, const job_raw *raw, brief *out) {
  out->only_count = read_patterns(r, raw->only, out->only);
  out->without_count = read_patterns(r, raw->without, out->without);
  out->listing_count = read_paths(r, raw->listings, root->file, out->listings);
  out->report_count = read_paths(r, raw->reports, root->file, out->reports);
  if (out->prices) out->prices = file_beside(r->arena, root->file, out->prices);
}

bool job_needs_deck(const brief *b) {
  for (int i = 0; i < b->target_count; i++)
    if (b->targets[i].value + b->targets[i].margin >= JOB_DECK_FROM) return true;
  return b->fire_min > 0;
}

/* What only the whole brief shows. */
static void check_whole(reader *r, const json_value *root, const brief *b) {
  const json_value *fire = json_get(root, "fire_min"), *wall = json_get(root, "wall");
  if (b->fire_min > 0 && b->code == CODE_NONE && b->listing_count == 0)
    caution(r, fire,
            "without a code and without listings no wall can be shown to have a fire rating");
  if (b->top == TOP_CEILING && job_needs_deck(b))
    caution(r, wall ? wall : root,
            "fire-rated walls and walls for targets of 45 or more have to run to the deck; this one "
            "stops at the ceiling");
}

void job_take(job_reader *r, const json_value *root, const job_raw *raw, bool target_required,
              brief *out) {
  *out = raw->b;
  out->file = root->file;
  read_building(r, raw->building, out);
  read_wall(r, raw->wall, out);
  read_targets(r, root, raw->target, raw->targets, target_required, out);
  read_limits(r, raw->limits, out);
  read_structure(r, raw->structure, out);
  read_sides(r, raw->sides, out);
  read_services(r, raw->services, out);
  read_openings(r, raw->openings, out);
  read_allowance(r, raw->allowance, out);
  read_lists(r, root, raw, out);
  check_whole(r, root, out);
}

bool job_read(arena *a, diag_list *d, const catalog *c, const json_value *root,
              bool target_required, brief *out) {
  size_t before = d->errors, first = d->count;
  job_reader r = {a, d, c};
  job_defaults(out);
  if (!json_is(a, d, root, "brief")) return false;
  job_raw *raw = arena_alloc(a, sizeof *raw);
  raw->b = *out;
  read_object(&r, root, job_fields, COUNT(job_fields), raw);
  job_take(&r, root, raw, target_required, out);
  out->crc = root->crc;
  diag_sort(d, first);
  return d->errors == before;
}
