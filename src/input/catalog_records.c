#include "input/catalog_records.h"

#include <string.h>

#include "input/coefficients.h"
#include "input/fields.h"

/* Ranges are wide guards against slips of a digit or a unit, not rules of the trade. Lengths are
 * read by FIELD_LENGTH, so a file may say thickness_mm or thickness_m. */

enum { ID_MAX = 40, SAID_MAX = 24 };

static const char *const layer_materials[] = {"gypsum", "cement",  "wood", "fibreboard",
                                              "limp",   "damping", NULL};
static const char *const frame_materials[] = {"wood", "steel", NULL};
static const char *const frame_layouts[] = {"single", "staggered", "double", NULL};
static const char *const fill_materials[] = {"glass", "stone", "cellulose", NULL};
static const char *const mount_kinds[] = {"channel", "clip", NULL};
static const char *const stocks[] = {"stock", "special", NULL};
static const char *const codes[] = {"none", "ibc", "nbc", NULL};
static const char *const scopes[] = {"wall", "composite", NULL};

/* A record while it is read: what the file says in other words than the catalog keeps. */
typedef struct raw_layer {
  layer l;
  const json_value *said;
  int stock;
} raw_layer;
typedef struct raw_frame {
  frame f;
  const json_value *said;
  int stock;
} raw_frame;
typedef struct raw_fill {
  fill f;
  const json_value *said;
  int stock;
} raw_fill;
typedef struct raw_mount {
  mount m;
  const json_value *said;
  int kind;
} raw_mount;
typedef struct raw_target {
  target_row t;
  int code, scope;
} raw_target;

#define AT(type, member) offsetof(type, member)
#define REQUIRED         FIELD_REQUIRED
#define POSITIVE         (FIELD_REQUIRED | FIELD_ABOVE_MIN)

static const field layer_fields[] = {
    {"id", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_layer, l.id)},
    {"name", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_layer, l.name)},
    {"material", FIELD_CHOICE, REQUIRED, 0, 0, 0, layer_materials, AT(raw_layer, l.material)},
    {"thickness_m", FIELD_LENGTH, POSITIVE, 0, 0.1, 0, NULL, AT(raw_layer, l.thickness_m)},
    {"mass_kg_m2", FIELD_NUMBER, POSITIVE, 0, 100, 0, NULL, AT(raw_layer, l.mass_kg_m2)},
    {"coincidence_m_s", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 500, 0, NULL,
     AT(raw_layer, l.coincidence_m_s)},
    {"loss_factor", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 1, 0, NULL, AT(raw_layer, l.loss_factor)},
    {"face", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.face)},
    {"face_if_asked", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.face_if_asked)},
    {"backing", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.backing)},
    {"type_x", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.type_x)},
    {"type_c", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.type_c)},
    {"regular", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.regular)},
    {"abuse", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.abuse)},
    {"moisture", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.moisture)},
    {"noncombustible", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.noncombustible)},
    {"frt", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.frt)},
    {"shear", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.shear)},
    {"ordinary", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_layer, l.ordinary)},
    {"stock", FIELD_CHOICE, 0, 0, 0, 0, stocks, AT(raw_layer, stock)},
    {"max_spacing_m", FIELD_LENGTH, 0, 0.1, 2, 0, NULL, AT(raw_layer, l.max_spacing_m)},
    {"max_spacing_single_m", FIELD_LENGTH, 0, 0.1, 2, 0, NULL,
     AT(raw_layer, l.max_spacing_single_m)},
    {"min_steel_mil", FIELD_INTEGER, 0, 10, 200, 0, NULL, AT(raw_layer, l.min_steel_mil)},
    {"said", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(raw_layer, said)},
    {"source", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_layer, l.source)},
};

static const field frame_fields[] = {
    {"id", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_frame, f.id)},
    {"name", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_frame, f.name)},
    {"material", FIELD_CHOICE, REQUIRED, 0, 0, 0, frame_materials, AT(raw_frame, f.material)},
    {"layout", FIELD_CHOICE, REQUIRED, 0, 0, 0, frame_layouts, AT(raw_frame, f.layout)},
    {"stud", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_frame, f.stud)},
    {"runner", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_frame, f.runner)},
    {"group", FIELD_STRING, 0, 0, 0, 0, NULL, AT(raw_frame, f.group)},
    {"mil", FIELD_INTEGER, 0, 10, 200, 0, NULL, AT(raw_frame, f.mil)},
    {"stud_depth_m", FIELD_LENGTH, POSITIVE, 0, 0.5, 0, NULL, AT(raw_frame, f.stud_depth_m)},
    {"row_depth_m", FIELD_LENGTH, POSITIVE, 0, 0.5, 0, NULL, AT(raw_frame, f.row_depth_m)},
    {"steel_thickness_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 0.01, 0, NULL,
     AT(raw_frame, f.steel_thickness_m)},
    {"flange_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 0.2, 0, NULL, AT(raw_frame, f.flange_m)},
    {"stud_width_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 0.2, 0, NULL, AT(raw_frame, f.stud_width_m)},
    {"stud_mass_kg_m", FIELD_NUMBER, POSITIVE, 0, 50, 0, NULL, AT(raw_frame, f.stud_mass_kg_m)},
    {"runner_mass_kg_m", FIELD_NUMBER, POSITIVE, 0, 50, 0, NULL, AT(raw_frame, f.runner_mass_kg_m)},
    {"inertia_mm4", FIELD_NUMBER, POSITIVE, 0, 1e-3, 1e-12, NULL, AT(raw_frame, f.inertia_m4)},
    {"inertia_effective_mm4", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 1e-3, 1e-12, NULL,
     AT(raw_frame, f.inertia_effective_m4)},
    {"moment_n_m", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 1e5, 0, NULL, AT(raw_frame, f.moment_n_m)},
    {"section_estimated", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_frame, f.section_estimated)},
    {"composite_inertia_mm4", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 1e-3, 1e-12, NULL,
     AT(raw_frame, f.composite_inertia_m4)},
    {"composite_moment_n_m", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 1e5, 0, NULL,
     AT(raw_frame, f.composite_moment_n_m)},
    {"modulus_gpa", FIELD_NUMBER, POSITIVE, 0, 1e12, 1e9, NULL, AT(raw_frame, f.modulus_pa)},
    {"loadbearing", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_frame, f.loadbearing)},
    {"noncombustible", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_frame, f.noncombustible)},
    {"frt", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_frame, f.frt)},
    {"ordinary", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_frame, f.ordinary)},
    {"stock", FIELD_CHOICE, 0, 0, 0, 0, stocks, AT(raw_frame, stock)},
    {"max_height_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 30, 0, NULL, AT(raw_frame, f.max_height_m)},
    {"max_height_bearing_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 30, 0, NULL,
     AT(raw_frame, f.max_height_bearing_m)},
    {"knockout_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 0.5, 0, NULL, AT(raw_frame, f.knockout_m)},
    {"said", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(raw_frame, said)},
    {"source", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_frame, f.source)},
};

static const field fill_fields[] = {
    {"id", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_fill, f.id)},
    {"name", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_fill, f.name)},
    {"material", FIELD_CHOICE, REQUIRED, 0, 0, 0, fill_materials, AT(raw_fill, f.material)},
    {"thickness_m", FIELD_LENGTH, POSITIVE, 0, 0.6, 0, NULL, AT(raw_fill, f.thickness_m)},
    {"density_kg_m3", FIELD_NUMBER, POSITIVE, 0, 500, 0, NULL, AT(raw_fill, f.density_kg_m3)},
    {"mass_kg_m2", FIELD_NUMBER, POSITIVE, 0, 100, 0, NULL, AT(raw_fill, f.mass_kg_m2)},
    {"resistivity_pa_s_m2", FIELD_NUMBER, POSITIVE, 0, 1e6, 0, NULL,
     AT(raw_fill, f.resistivity_pa_s_m2)},
    {"wood_only", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_fill, f.wood_only)},
    {"ordinary", FIELD_BOOL, 0, 0, 0, 0, NULL, AT(raw_fill, f.ordinary)},
    {"stock", FIELD_CHOICE, 0, 0, 0, 0, stocks, AT(raw_fill, stock)},
    {"said", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(raw_fill, said)},
    {"source", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_fill, f.source)},
};

static const field mount_fields[] = {
    {"id", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_mount, m.id)},
    {"name", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_mount, m.name)},
    {"kind", FIELD_CHOICE, REQUIRED, 0, 0, 0, mount_kinds, AT(raw_mount, kind)},
    {"depth_m", FIELD_LENGTH, POSITIVE, 0, 0.2, 0, NULL, AT(raw_mount, m.depth_m)},
    {"rail", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_mount, m.rail)},
    {"rail_mass_kg_m", FIELD_NUMBER, POSITIVE, 0, 20, 0, NULL, AT(raw_mount, m.rail_mass_kg_m)},
    {"max_leaf_kg_m2", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 500, 0, NULL,
     AT(raw_mount, m.max_leaf_kg_m2)},
    {"clip", FIELD_STRING, 0, 0, 0, 0, NULL, AT(raw_mount, m.clip)},
    {"clip_mass_kg", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 10, 0, NULL, AT(raw_mount, m.clip_mass_kg)},
    {"clip_capacity_kg", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 500, 0, NULL,
     AT(raw_mount, m.clip_capacity_kg)},
    {"max_clip_spacing_mm", FIELD_INTEGER, 0, 100, 3000, 0, NULL, AT(raw_mount, m.clip_spacing_mm)},
    {"said", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(raw_mount, said)},
    {"source", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_mount, m.source)},
};

static const field target_fields[] = {
    {"id", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_target, t.id)},
    {"adjacency", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_target, t.adjacency)},
    {"name", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_target, t.name)},
    {"code", FIELD_CHOICE, 0, 0, 0, 0, codes, AT(raw_target, code)},
    {"level", FIELD_STRING, 0, 0, 0, 0, NULL, AT(raw_target, t.level)},
    {"metric", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_target, t.metric)},
    {"value", FIELD_INTEGER, REQUIRED, 20, 90, 0, NULL, AT(raw_target, t.value)},
    {"field_value", FIELD_INTEGER, 0, 15, 90, 0, NULL, AT(raw_target, t.field_value)},
    {"scope", FIELD_CHOICE, REQUIRED, 0, 0, 0, scopes, AT(raw_target, scope)},
    {"fire_minutes", FIELD_INTEGER, 0, 15, 240, 0, NULL, AT(raw_target, t.fire_minutes)},
    {"fire_minutes_sprinklered", FIELD_INTEGER, 0, 15, 240, 0, NULL,
     AT(raw_target, t.fire_minutes_sprinklered)},
    {"fire_minutes_from_4_storeys", FIELD_INTEGER, 0, 15, 240, 0, NULL,
     AT(raw_target, t.fire_minutes_from_4_storeys)},
    {"source", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, AT(raw_target, t.source)},
};

#define ROWS(table) (sizeof(table) / sizeof(table)[0])

static void fault(catalog_reader *r, const json_value *v, error_code code, const char *message) {
  diag_add(r->diags, DIAG_ERROR, code, json_place(r->arena, v), "%s", message);
}

/* The place of a key of a record, or the record itself when the key is absent. */
static const json_value *at_key(const json_value *record, const char *key) {
  const json_value *v = json_get(record, key);
  return v ? v : record;
}

/* Ids stand bare in wall lines: small letters, digits and hyphens, a letter first. */
static bool id_sound(const char *id) {
  size_t n = strlen(id);
  if (n == 0 || n > ID_MAX || id[0] < 'a' || id[0] > 'z') return false;
  for (size_t i = 0; i < n; i++) {
    bool letter = (id[i] >= 'a' && id[i] <= 'z') || (id[i] >= '0' && id[i] <= '9') || id[i] == '-';
    if (!letter) return false;
  }
  return !text_equal(id, "on") && !text_equal(id, "inner-a") && !text_equal(id, "inner-b");
}

static bool take_id(catalog_reader *r, const json_value *record, const char *id) {
  if (!id) return false; /* reported as missing */
  const json_value *place = at_key(record, "id");
  if (!id_sound(id)) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(r->arena, place),
             "expected an id of small letters, digits and hyphens, at most %d, a letter first, "
             "found \"%s\"",
             (int)ID_MAX, id);
    return false;
  }
  for (size_t i = 0; i < r->id_count; i++) {
    if (!text_equal(r->ids[i], id)) continue;
    diag_add(r->diags, DIAG_ERROR, ERROR_CATALOG_DUPLICATE_ID, json_place(r->arena, place),
             "expected an id of its own, \"%s\" stands in the catalogs already", id);
    return false;
  }
  if (r->id_count == r->id_cap) {
    size_t cap = r->id_cap ? 2 * r->id_cap : 128;
    r->ids = arena_grow(r->arena, r->ids, r->id_cap * sizeof *r->ids, cap * sizeof *r->ids);
    r->id_cap = cap;
  }
  r->ids[r->id_count++] = id;
  return true;
}

static bool take_said(catalog_reader *r, const json_value *list, said_words *out) {
  if (!list) return true;
  if (list->kind != JSON_ARRAY || list->count > SAID_MAX) {
    fault(r, list, ERROR_FIELD_TYPE, "expected an array of at most 24 strings");
    return false;
  }
  const char **words = arena_array(r->arena, list->count, sizeof *words);
  size_t n = 0;
  bool sound = true;
  for (const json_value *v = list->first; v; v = v->next) {
    if (v->kind == JSON_STRING && v->string[0] != '\0')
      words[n++] = v->string;
    else {
      fault(r, v, ERROR_FIELD_TYPE, "expected a word people say, as a string");
      sound = false;
    }
  }
  *out = (said_words){words, n};
  return sound;
}

typedef struct head {
  const json_value *records, *spacings;
} head;

/* The frame of every file: its kind, its records, and where it has them its spacings. */
static bool read_head(catalog_reader *r, const json_value *root, const char *kind,
                      bool with_spacings, head *out) {
  static const field table[] = {
      {"septum", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
      {"about", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
      {"records", FIELD_VALUE, REQUIRED, 0, 0, 0, NULL, AT(head, records)},
      {"spacings_mm", FIELD_VALUE, REQUIRED, 0, 0, 0, NULL, AT(head, spacings)},
  };
  *out = (head){NULL, NULL};
  if (!json_is(r->arena, r->diags, root, kind)) return false;
  bool sound = fields_read(r->arena, r->diags, root, table, with_spacings ? 4 : 3, out);
  if (!out->records) return false;
  if (out->records->kind != JSON_ARRAY || out->records->count == 0 ||
      out->records->count > CATALOG_MAX_RECORDS) {
    fault(r, out->records, ERROR_FIELD_TYPE, "expected an array of 1 to 1000 records");
    out->records = NULL;
    return false;
  }
  return sound;
}

static bool read_spacings(catalog_reader *r, const json_value *list, int **out, size_t *count) {
  if (!list) return false;
  if (list->kind != JSON_ARRAY || list->count == 0 || list->count > 8) {
    fault(r, list, ERROR_FIELD_TYPE, "expected an array of 1 to 8 spacings in mm");
    return false;
  }
  int *values = arena_array(r->arena, list->count, sizeof *values);
  size_t n = 0;
  for (const json_value *v = list->first; v; v = v->next) {
    bool whole = v->kind == JSON_NUMBER && v->number >= 100 && v->number <= 2000 &&
                 v->number == (double)(int)v->number;
    if (!whole || (n > 0 && (int)v->number <= values[n - 1])) {
      fault(r, v, ERROR_FIELD_RANGE,
            "expected a whole number of mm from 100 to 2000, larger than the one before");
      return false;
    }
    values[n++] = (int)v->number;
  }
  *out = values;
  *count = n;
  return true;
}

/* Critical frequency x thickness gives the stiffness: fc = c^2 / (2 pi) sqrt(m / B) (any text on
 * bending waves). */
static double bending_stiffness(const layer *l) {
  static const double pi = 3.14159265358979323846;
  static const double sound_speed = 343.0; /* m/s at 20 degrees C */
  if (l->membrane || l->coincidence_m_s <= 0) return 0;
  double critical_hz = l->coincidence_m_s / l->thickness_m;
  double w = sound_speed * sound_speed / (2 * pi * critical_hz);
  return l->mass_kg_m2 * w * w;
}

static bool check_layer(catalog_reader *r, const json_value *record, const layer *l) {
  bool sound = true;
  if (!l->membrane && l->coincidence_m_s <= 0) {
    fault(r, record, ERROR_FIELD_MISSING,
          "expected \"coincidence_m_s\": a board has a critical frequency");
    sound = false;
  }
  if (l->membrane && (l->coincidence_m_s > 0 || l->face || l->face_if_asked || l->backing)) {
    fault(r, record, ERROR_FIELD_CONFLICT,
          "a membrane has no critical frequency and is neither face nor backing");
    sound = false;
  }
  if (l->material == LAYER_DAMPING && l->loss_factor <= 0) {
    fault(r, record, ERROR_FIELD_MISSING, "expected \"loss_factor\": a damping layer has one");
    sound = false;
  }
  if ((l->type_c && !l->type_x) || (l->type_x && l->regular)) {
    fault(r, record, ERROR_FIELD_CONFLICT,
          "Type C boards are Type X too, and regular boards are neither");
    sound = false;
  }
  return sound;
}

bool catalog_read_layers(catalog_reader *r, const json_value *root, catalog *out) {
  head h;
  bool sound = read_head(r, root, "boards", false, &h);
  if (!h.records) return false;
  out->layers = arena_array(r->arena, h.records->count, sizeof *out->layers);
  for (const json_value *v = h.records->first; v; v = v->next) {
    raw_layer raw = {.stock = 0};
    bool good = fields_read(r->arena, r->diags, v, layer_fields, ROWS(layer_fields), &raw);
    layer *l = &raw.l;
    l->membrane = l->material == LAYER_LIMP || l->material == LAYER_DAMPING;
    l->special = raw.stock == 1;
    good = take_id(r, v, l->id) && good;
    good = take_said(r, raw.said, &l->said) && good;
    if (good) good = check_layer(r, v, l);
    if (good) l->bending_n_m = bending_stiffness(l);
    if (good) out->layers[out->layer_count++] = *l;
    sound = sound && good;
  }
  return sound;
}

static bool check_frame(catalog_reader *r, const json_value *record, const frame *f) {
  bool sound = true;
  bool steel_parts = f->mil > 0 && f->steel_thickness_m > 0 && f->flange_m > 0 &&
                     f->inertia_effective_m4 > 0 && f->moment_n_m > 0;
  if (f->material == FRAME_STEEL && !steel_parts) {
    fault(r, record, ERROR_FIELD_MISSING,
          "expected \"mil\", \"steel_thickness_mm\", \"flange_mm\", \"inertia_effective_mm4\" and "
          "\"moment_n_m\" for steel");
    sound = false;
  }
  if (f->material == FRAME_WOOD &&
      (f->stud_width_m <= 0 || f->mil > 0 || f->steel_thickness_m > 0)) {
    fault(r, record, ERROR_FIELD_CONFLICT,
          "expected \"stud_width_mm\" and nothing of steel for wood");
    sound = false;
  }
  bool deeper = f->row_depth_m > f->stud_depth_m;
  if (f->row_depth_m < f->stud_depth_m || deeper != (f->layout == FRAME_STAGGERED)) {
    fault(r, at_key(record, "row_depth_mm"), ERROR_FIELD_CONFLICT,
          "expected the depth of the stud, or of the wider common plate of a staggered frame");
    sound = false;
  }
  return sound;
}

bool catalog_read_frames(catalog_reader *r, const json_value *root, catalog *out) {
  head h;
  bool sound = read_head(r, root, "frames", true, &h);
  if (h.spacings)
    sound = read_spacings(r, h.spacings, &out->spacings_mm, &out->spacing_count) && sound;
  if (!h.records) return false;
  out->frames = arena_array(r->arena, h.records->count, sizeof *out->frames);
  for (const json_value *v = h.records->first; v; v = v->next) {
    raw_frame raw = {.stock = 0};
    bool good = fields_read(r->arena, r->diags, v, frame_fields, ROWS(frame_fields), &raw);
    frame *f = &raw.f;
    f->special = raw.stock == 1;
    f->rows = f->layout == FRAME_DOUBLE ? 2 : 1;
    good = take_id(r, v, f->id) && good;
    good = take_said(r, raw.said, &f->said) && good;
    if (good) good = check_frame(r, v, f);
    if (good) out->frames[out->frame_count++] = *f;
    sound = sound && good;
  }
  return sound;
}

/* Mass per area must be the density times the thickness, within the rounding of the file. */
static bool check_fill(catalog_reader *r, const json_value *record, const fill *f) {
  static const double rounding = 0.02;
  double expected = f->density_kg_m3 * f->thickness_m;
  if (f->mass_kg_m2 > expected * (1 + rounding) || f->mass_kg_m2 < expected * (1 - rounding)) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_CONFLICT,
             json_place(r->arena, at_key(record, "mass_kg_m2")),
             "expected density x thickness, %s kg/m2, found %s", text_of(r->arena, expected, 2),
             text_of(r->arena, f->mass_kg_m2, 2));
    return false;
  }
  return true;
}

bool catalog_read_fills(catalog_reader *r, const json_value *root, catalog *out) {
  head h;
  bool sound = read_head(r, root, "fills", false, &h);
  if (!h.records) return false;
  out->fills = arena_array(r->arena, h.records->count, sizeof *out->fills);
  for (const json_value *v = h.records->first; v; v = v->next) {
    raw_fill raw = {.stock = 0};
    bool good = fields_read(r->arena, r->diags, v, fill_fields, ROWS(fill_fields), &raw);
    raw.f.special = raw.stock == 1;
    good = take_id(r, v, raw.f.id) && good;
    good = take_said(r, raw.said, &raw.f.said) && good;
    if (good) good = check_fill(r, v, &raw.f);
    if (good) out->fills[out->fill_count++] = raw.f;
    sound = sound && good;
  }
  return sound;
}

static bool check_mount(catalog_reader *r, const json_value *record, const mount *m) {
  bool clip_parts =
      m->clip && m->clip_mass_kg > 0 && m->clip_capacity_kg > 0 && m->clip_spacing_mm > 0;
  bool any_part =
      m->clip || m->clip_mass_kg > 0 || m->clip_capacity_kg > 0 || m->clip_spacing_mm > 0;
  if (m->clips ? !clip_parts : any_part) {
    fault(r, record, ERROR_FIELD_CONFLICT,
          "expected \"clip\", \"clip_mass_kg\", \"clip_capacity_kg\" and \"max_clip_spacing_mm\" "
          "for clips, none for a channel");
    return false;
  }
  return true;
}

bool catalog_read_mounts(catalog_reader *r, const json_value *root, catalog *out) {
  head h;
  bool sound = read_head(r, root, "mounts", true, &h);
  if (h.spacings)
    sound =
        read_spacings(r, h.spacings, &out->mount_spacings_mm, &out->mount_spacing_count) && sound;
  if (!h.records) return false;
  out->mounts = arena_array(r->arena, h.records->count, sizeof *out->mounts);
  for (const json_value *v = h.records->first; v; v = v->next) {
    raw_mount raw = {.kind = 0};
    bool good = fields_read(r->arena, r->diags, v, mount_fields, ROWS(mount_fields), &raw);
    raw.m.clips = raw.kind == 1;
    good = take_id(r, v, raw.m.id) && good;
    good = take_said(r, raw.said, &raw.m.said) && good;
    if (good) good = check_mount(r, v, &raw.m);
    if (good) out->mounts[out->mount_count++] = raw.m;
    sound = sound && good;
  }
  return sound;
}

static bool check_target(catalog_reader *r, const json_value *record, const target_row *t) {
  bool known = false;
  for (int i = 0; i < METRIC_COUNT; i++)
    known = known || text_equal(t->metric, sound_metric_names[i]);
  if (!known)
    fault(r, at_key(record, "metric"), ERROR_FIELD_CHOICE,
          "expected STC, Rw, Rw+C, Rw+Ctr or OITC");
  if (t->field_value > t->value) {
    fault(r, at_key(record, "field_value"), ERROR_FIELD_RANGE,
          "expected at most the laboratory value");
    known = false;
  }
  return known;
}

bool catalog_read_targets(catalog_reader *r, const json_value *root, catalog *out) {
  head h;
  bool sound = read_head(r, root, "targets", false, &h);
  if (!h.records) return false;
  /* A target is no part of a wall: its ids are apart from the others'. */
  catalog_reader own = {r->arena, r->diags, NULL, 0, 0};
  out->targets = arena_array(r->arena, h.records->count, sizeof *out->targets);
  for (const json_value *v = h.records->first; v; v = v->next) {
    raw_target raw = {.code = 0};
    bool good = fields_read(r->arena, r->diags, v, target_fields, ROWS(target_fields), &raw);
    raw.t.code = raw.code == 1 ? CODE_IBC : raw.code == 2 ? CODE_NBC : CODE_NONE;
    raw.t.composite = raw.scope == 1;
    good = take_id(&own, v, raw.t.id) && good;
    if (good) good = check_target(r, v, &raw.t);
    if (good) out->targets[out->target_count++] = raw.t;
    sound = sound && good;
  }
  return sound;
}
