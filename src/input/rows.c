/* Rows are read in two steps: words and numbers of a record by table, then the rules between them
 * (what a kind of file must and must not say). Looking up boards comes last, when the boards are
 * known. */
#include "input/rows.h"

#include <string.h>

#include "base/text.h"
#include "input/fields.h"

#define MM 0.001 /* keys end in _mm, the struct is in metres */

static const char *const codes[] = {"none", "ibc", "nbc", NULL};
static const char *const materials[] = {"wood", "steel", NULL};
static const char *const layouts[] = {"single", "staggered", "double", NULL};
static const char *const mounts[] = {"none", "channel", "any", NULL};
static const char *const fills[] = {"none", "optional", "required", NULL};
static const char *const fibres[] = {"glass", "stone", "cellulose", NULL};
static const char *const need_kinds[] = {"type_x", "gypsum", "wood", NULL};

enum { UNSAID = -1 };

/* A record before the rules between its keys are checked. */
typedef struct raw_row {
  const char *id, *name, *source, *note, *design;
  int code, material, layout, mount, fill;
  int mil_min, mil_max, filled_rows, minutes_bearing, minutes_nonbearing, stc;
  double depth_m, spacing_min_m, spacing_max_m, gap_m, mount_min_m, mount_max_m;
  double fill_kg_m2, fill_thickness_m, stc_sd;
  const json_value *side_a, *side_b, *fill_kinds;
} raw_row;

#define AT(member) offsetof(raw_row, member)

static const field row_fields[] = {
    {"id", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, AT(id)},
    {"name", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, AT(name)},
    {"source", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, AT(source)},
    {"note", FIELD_STRING, 0, 0, 0, 0, NULL, AT(note)},
    {"design", FIELD_STRING, 0, 0, 0, 0, NULL, AT(design)},
    {"code", FIELD_CHOICE, 0, 0, 0, 0, codes, AT(code)},
    {"side_a", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, AT(side_a)},
    {"side_b", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, AT(side_b)},
    {"material", FIELD_CHOICE, FIELD_REQUIRED, 0, 0, 0, materials, AT(material)},
    {"layout", FIELD_CHOICE, FIELD_REQUIRED, 0, 0, 0, layouts, AT(layout)},
    {"depth_mm", FIELD_NUMBER, FIELD_REQUIRED, 0.02, 0.5, MM, NULL, AT(depth_m)},
    {"mil_min", FIELD_INTEGER, 0, 10, 200, 0, NULL, AT(mil_min)},
    {"mil_max", FIELD_INTEGER, 0, 10, 200, 0, NULL, AT(mil_max)},
    {"spacing_min_mm", FIELD_NUMBER, 0, 0.1, 2, MM, NULL, AT(spacing_min_m)},
    {"spacing_max_mm", FIELD_NUMBER, FIELD_REQUIRED, 0.1, 2, MM, NULL, AT(spacing_max_m)},
    {"gap_mm", FIELD_NUMBER, 0, 0, 1, MM, NULL, AT(gap_m)},
    {"mount", FIELD_CHOICE, FIELD_REQUIRED, 0, 0, 0, mounts, AT(mount)},
    {"mount_spacing_min_mm", FIELD_NUMBER, 0, 0.1, 2, MM, NULL, AT(mount_min_m)},
    {"mount_spacing_max_mm", FIELD_NUMBER, 0, 0.1, 2, MM, NULL, AT(mount_max_m)},
    {"fill", FIELD_CHOICE, FIELD_REQUIRED, 0, 0, 0, fills, AT(fill)},
    {"fill_kinds", FIELD_VALUE, 0, 0, 0, 0, NULL, AT(fill_kinds)},
    {"filled_rows", FIELD_INTEGER, 0, 1, 2, 0, NULL, AT(filled_rows)},
    {"fill_kg_m2", FIELD_NUMBER, 0, 0, 50, 0, NULL, AT(fill_kg_m2)},
    {"fill_thickness_mm", FIELD_NUMBER, 0, 0, 0.5, MM, NULL, AT(fill_thickness_m)},
    {"minutes_loadbearing", FIELD_INTEGER, 0, 1, 480, 0, NULL, AT(minutes_bearing)},
    {"minutes_nonloadbearing", FIELD_INTEGER, 0, 1, 480, 0, NULL, AT(minutes_nonbearing)},
    {"stc", FIELD_INTEGER, 0, 10, 100, 0, NULL, AT(stc)},
    {"stc_sd", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, 10, 0, NULL, AT(stc_sd)},
};

/* What each kind of file adds to the common rules. */
typedef struct row_kind {
  const char *kind;
  bool published, listing;
  const field *root;
  size_t root_count;
} row_kind;

static const field fire_root[] = {
    {"septum", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"about", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"component_additive", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"scope", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"records", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, 0},
};
static const field published_root[] = {
    {"septum", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"about", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"distance", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"cautions", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"records", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, 0},
};
static const field listing_root[] = {
    {"septum", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"about", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"records", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, 0},
};

#define ROWS_OF(table) (table), sizeof(table) / sizeof((table)[0])

static const row_kind row_file_kinds[] = {
    {"fire", false, false, ROWS_OF(fire_root)},
    {"published", true, false, ROWS_OF(published_root)},
    {"listing", false, true, ROWS_OF(listing_root)},
};

static const row_kind *kind_of(const char *kind) {
  for (size_t i = 0; i < sizeof row_file_kinds / sizeof row_file_kinds[0]; i++)
    if (text_equal(row_file_kinds[i].kind, kind)) return &row_file_kinds[i];
  return NULL;
}

static bool wrong(arena *a, diag_list *d, const json_value *v, error_code code, const char *what) {
  diag_add(d, DIAG_ERROR, code, json_place(a, v), "%s", what);
  return false;
}

static bool array_of_words(arena *a, diag_list *d, const json_value *v, size_t max) {
  if (v->kind != JSON_ARRAY || v->count < 1 || v->count > max) {
    diag_add(d, DIAG_ERROR, v->kind == JSON_ARRAY ? ERROR_FIELD_RANGE : ERROR_FIELD_TYPE,
             json_place(a, v), "must be an array of 1 to %d words, found %s", (int)max,
             v->kind == JSON_ARRAY ? "another count" : json_kind_name(v->kind));
    return false;
  }
  for (const json_value *e = v->first; e; e = e->next)
    if (e->kind != JSON_STRING) {
      diag_add(d, DIAG_ERROR, ERROR_FIELD_TYPE, json_place(a, e), "must be a word, found %s",
               json_kind_name(e->kind));
      return false;
    }
  return true;
}

static bool read_side(arena *a, diag_list *d, const json_value *v, row_side *out) {
  if (!array_of_words(a, d, v, ROW_MAX_SIDE)) return false;
  for (const json_value *e = v->first; e; e = e->next) out->board[out->boards++] = e->string;
  return true;
}

static bool read_fibres(arena *a, diag_list *d, const json_value *v, unsigned *bits) {
  if (!array_of_words(a, d, v, FILL_CELLULOSE + 1)) return false;
  *bits = 0;
  for (const json_value *e = v->first; e; e = e->next) {
    int kind = 0;
    while (fibres[kind] && !text_equal(fibres[kind], e->string)) kind++;
    if (!fibres[kind])
      return wrong(a, d, e, ERROR_FIELD_CHOICE, "must be glass, stone or cellulose");
    *bits |= 1u << kind;
  }
  return true;
}

/* The rules of one kind of file. */
static bool kind_rules(arena *a, diag_list *d, const json_value *v, const row_kind *k,
                       const raw_row *r) {
  if (k->published) {
    if (r->stc == 0 || !(r->stc_sd > 0) || !(r->spacing_min_m > 0))
      return wrong(a, d, v, ERROR_FIELD_MISSING,
                   "a published rating needs stc, stc_sd and spacing_min_mm");
    if (r->minutes_bearing || r->minutes_nonbearing || r->code != UNSAID ||
        r->mount == ROW_MOUNT_ANY || r->fill == ROW_FILL_OPTIONAL)
      return wrong(
          a, d, v, ERROR_FIELD_CONFLICT,
          "a published rating has no code, no minutes, and says which mount and fill it has");
    if (r->mount == ROW_MOUNT_CHANNEL && (!(r->mount_min_m > 0) || !(r->mount_max_m > 0)))
      return wrong(a, d, v, ERROR_FIELD_MISSING,
                   "a channel needs mount_spacing_min_mm and mount_spacing_max_mm");
    return true;
  }
  if (r->stc != 0) return wrong(a, d, v, ERROR_FIELD_CONFLICT, "a fire row has no stc");
  if (k->listing && (!r->design || r->code != UNSAID))
    return wrong(a, d, v, ERROR_FIELD_MISSING, "a listing needs its design number and no code");
  if (k->listing && !r->minutes_bearing && !r->minutes_nonbearing)
    return wrong(a, d, v, ERROR_FIELD_MISSING,
                 "a listing needs minutes_loadbearing or minutes_nonloadbearing");
  if (!k->listing && r->code != CODE_IBC && r->code != CODE_NBC)
    return wrong(a, d, v, ERROR_FIELD_MISSING, "a fire row needs code: ibc or nbc");
  return true;
}

static bool common_rules(arena *a, diag_list *d, const json_value *v, const raw_row *r) {
  bool ok = true;
  if (r->spacing_min_m > r->spacing_max_m || r->mount_min_m > r->mount_max_m ||
      (r->mil_max != 0 && r->mil_min > r->mil_max))
    ok = wrong(a, d, v, ERROR_FIELD_CONFLICT, "a least value lies above the greatest");
  if (r->material == FRAME_WOOD && (r->mil_min || r->mil_max))
    ok = wrong(a, d, v, ERROR_FIELD_CONFLICT, "wood studs have no mil_min or mil_max");
  if (r->filled_rows > 1 && r->layout != FRAME_DOUBLE)
    ok = wrong(a, d, v, ERROR_FIELD_CONFLICT, "filled_rows above 1 needs layout: double");
  if (r->fill == ROW_FILL_NONE && (r->fill_kinds || r->filled_rows || r->fill_kg_m2 > 0))
    ok = wrong(a, d, v, ERROR_FIELD_CONFLICT, "fill: none leaves nothing to say of the fill");
  return ok;
}

static void convert(const raw_row *r, const json_value *v, const row_kind *k, wall_row *out) {
  out->id = r->id;
  out->name = r->design ? r->design : r->name;
  out->source = r->source;
  out->note = r->note ? r->note : "";
  out->code = k->published || k->listing ? CODE_NONE : (fire_code)r->code;
  out->material = (frame_material)r->material;
  out->layout = (frame_layout)r->layout;
  out->depth_m = r->depth_m;
  out->mil_min = r->mil_min;
  out->mil_max = r->mil_max;
  out->spacing_min_m = r->spacing_min_m;
  out->spacing_max_m = r->spacing_max_m;
  out->gap_m = r->gap_m;
  out->mount = (row_mount)r->mount;
  out->mount_spacing_min_m = r->mount_min_m;
  out->mount_spacing_max_m = r->mount_max_m;
  out->fill = (row_fill)r->fill;
  out->filled_rows = r->fill == ROW_FILL_NONE ? 0 : r->filled_rows ? r->filled_rows : 1;
  out->fill_kg_m2 = r->fill_kg_m2;
  out->fill_thickness_m = r->fill_thickness_m;
  out->minutes_bearing = r->minutes_bearing;
  out->minutes_nonbearing = r->minutes_nonbearing;
  out->stc = r->stc;
  out->stc_sd = r->stc_sd;
  out->json = v;
}

static bool read_row(arena *a, diag_list *d, const json_value *v, const row_kind *k,
                     wall_row *out) {
  raw_row raw = {.code = UNSAID};
  if (!fields_read(a, d, v, row_fields, sizeof row_fields / sizeof row_fields[0], &raw))
    return false;
  bool ok = kind_rules(a, d, v, k, &raw);
  if (!common_rules(a, d, v, &raw)) ok = false;
  convert(&raw, v, k, out);
  if (!read_side(a, d, raw.side_a, &out->side_a) || !read_side(a, d, raw.side_b, &out->side_b))
    ok = false;
  out->fill_kinds = (1u << FILL_GLASS) | (1u << FILL_STONE) | (1u << FILL_CELLULOSE);
  if (raw.fill_kinds && !read_fibres(a, d, raw.fill_kinds, &out->fill_kinds)) ok = false;
  return ok;
}

static bool new_id(arena *a, diag_list *d, const wall_row *rows, size_t count,
                   const wall_row *row) {
  for (size_t i = 0; i < count; i++)
    if (text_equal(rows[i].id, row->id)) {
      diag_add(d, DIAG_ERROR, ERROR_CATALOG_DUPLICATE_ID, json_place(a, row->json),
               "id %s stands twice", row->id);
      return false;
    }
  return true;
}

bool rows_read(arena *a, diag_list *d, const json_value *root, const char *kind, wall_row **rows,
               size_t *count) {
  *rows = NULL;
  *count = 0;
  const row_kind *k = kind_of(kind);
  if (!k || !json_is(a, d, root, kind)) return false;
  const json_value *records = NULL;
  bool ok = fields_read(a, d, root, k->root, k->root_count, &records);
  if (!records) return false;
  if (records->kind != JSON_ARRAY)
    return wrong(a, d, records, ERROR_FIELD_TYPE, "must be an array of records");
  if (records->count > CATALOG_MAX_RECORDS)
    return wrong(a, d, records, ERROR_JSON_LIMIT, "too many records");
  *rows = arena_array(a, records->count, sizeof(wall_row));
  for (const json_value *v = records->first; v; v = v->next) {
    wall_row row = {.id = NULL};
    if (!read_row(a, d, v, k, &row) || !new_id(a, d, *rows, *count, &row)) {
      ok = false;
      continue;
    }
    (*rows)[(*count)++] = row;
  }
  return ok;
}

/* The component-additive rule */

static bool read_layer_need(arena *a, diag_list *d, const json_value *v, layer_need *out) {
  typedef struct raw_need {
    int kind;
    double thickness_m;
  } raw_need;
  static const field table[] = {
      {"kind", FIELD_CHOICE, FIELD_REQUIRED, 0, 0, 0, need_kinds, offsetof(raw_need, kind)},
      {"thickness_mm", FIELD_NUMBER, FIELD_REQUIRED, 0.001, 0.1, MM, NULL,
       offsetof(raw_need, thickness_m)},
  };
  raw_need raw = {0, 0};
  if (!fields_read(a, d, v, table, sizeof table / sizeof table[0], &raw)) return false;
  *out = (layer_need){(need_kind)raw.kind, raw.thickness_m, CATALOG_NONE};
  return true;
}

static bool read_membrane(arena *a, diag_list *d, const json_value *v, side_need *out) {
  typedef struct raw_membrane {
    const json_value *layers;
    double minutes;
  } raw_membrane;
  static const field table[] = {
      {"name", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
      {"layers", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_membrane, layers)},
      {"minutes", FIELD_NUMBER, FIELD_REQUIRED, 1, 480, 0, NULL, offsetof(raw_membrane, minutes)},
  };
  raw_membrane raw = {NULL, 0};
  if (!fields_read(a, d, v, table, sizeof table / sizeof table[0], &raw)) return false;
  if (raw.layers->kind != JSON_ARRAY || raw.layers->count < 1 || raw.layers->count > ROW_MAX_SIDE)
    return wrong(a, d, raw.layers, ERROR_FIELD_TYPE, "must be an array of 1 to 4 layers");
  bool ok = true;
  out->minutes = raw.minutes;
  for (const json_value *e = raw.layers->first; e; e = e->next)
    if (!read_layer_need(a, d, e, &out->item[out->count++])) ok = false;
  return ok;
}

static bool read_membranes(arena *a, diag_list *d, const json_value *v, catalog *out) {
  if (v->kind != JSON_ARRAY || v->count < 1 || v->count > ROW_MAX_NEEDS)
    return wrong(a, d, v, ERROR_FIELD_TYPE, "must be an array of 1 to 64 membranes");
  bool ok = true;
  out->membranes = arena_array(a, v->count, sizeof(side_need));
  out->membrane_count = 0;
  for (const json_value *e = v->first; e; e = e->next)
    if (!read_membrane(a, d, e, &out->membranes[out->membrane_count++])) ok = false;
  return ok;
}

static bool read_densities(arena *a, diag_list *d, const json_value *v, catalog *out) {
  typedef struct raw_density {
    double glass, stone, cellulose;
  } raw_density;
  static const field table[] = {
      {"glass", FIELD_NUMBER, FIELD_REQUIRED, 1, 500, 0, NULL, offsetof(raw_density, glass)},
      {"stone", FIELD_NUMBER, FIELD_REQUIRED, 1, 500, 0, NULL, offsetof(raw_density, stone)},
      {"cellulose", FIELD_NUMBER, FIELD_REQUIRED, 1, 500, 0, NULL,
       offsetof(raw_density, cellulose)},
  };
  raw_density raw = {0, 0, 0};
  if (!fields_read(a, d, v, table, sizeof table / sizeof table[0], &raw)) return false;
  out->additive_fill_kg_m3[FILL_GLASS] = raw.glass;
  out->additive_fill_kg_m3[FILL_STONE] = raw.stone;
  out->additive_fill_kg_m3[FILL_CELLULOSE] = raw.cellulose;
  return true;
}

typedef struct raw_additive {
  int code;
  const char *source;
  double frame_minutes, fill_minutes, max_minutes, max_spacing_m, min_depth_m;
  const json_value *density, *membranes;
} raw_additive;

#define OF(member) offsetof(raw_additive, member)

static bool read_component_additive(arena *a, diag_list *d, const json_value *v, catalog *out) {
  static const field table[] = {
      {"code", FIELD_CHOICE, FIELD_REQUIRED, 0, 0, 0, codes, OF(code)},
      {"source", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, OF(source)},
      {"frame_minutes", FIELD_NUMBER, FIELD_REQUIRED, 0, 240, 0, NULL, OF(frame_minutes)},
      {"fill_minutes", FIELD_NUMBER, FIELD_REQUIRED, 0, 240, 0, NULL, OF(fill_minutes)},
      {"fill_min_kg_m3", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, OF(density)},
      {"max_minutes", FIELD_NUMBER, FIELD_REQUIRED, 1, 480, 0, NULL, OF(max_minutes)},
      {"max_spacing_mm", FIELD_NUMBER, FIELD_REQUIRED, 0.1, 2, MM, NULL, OF(max_spacing_m)},
      {"min_depth_mm", FIELD_NUMBER, FIELD_REQUIRED, 0.02, 0.5, MM, NULL, OF(min_depth_m)},
      {"membranes", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, OF(membranes)},
  };
  raw_additive raw = {.source = NULL};
  if (!fields_read(a, d, v, table, sizeof table / sizeof table[0], &raw)) return false;
  if (raw.code != CODE_IBC)
    return wrong(a, d, v, ERROR_FIELD_CHOICE, "the component-additive rule is that of code ibc");
  out->additive_source = raw.source;
  out->additive_frame_minutes = raw.frame_minutes;
  out->additive_fill_minutes = raw.fill_minutes;
  out->additive_max_minutes = raw.max_minutes;
  out->additive_max_spacing_m = raw.max_spacing_m;
  out->additive_min_depth_m = raw.min_depth_m;
  bool ok = read_densities(a, d, raw.density, out);
  return read_membranes(a, d, raw.membranes, out) && ok;
}

static bool read_scope(arena *a, diag_list *d, const json_value *v, catalog *out) {
  typedef struct raw_scope {
    int code, storeys;
    const char *says, *source;
  } raw_scope;
  static const field table[] = {
      {"code", FIELD_CHOICE, FIELD_REQUIRED, 0, 0, 0, codes, offsetof(raw_scope, code)},
      {"max_storeys", FIELD_INTEGER, FIELD_REQUIRED, 1, 100, 0, NULL, offsetof(raw_scope, storeys)},
      {"says", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_scope, says)},
      {"source", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_scope, source)},
  };
  raw_scope raw = {0, 0, NULL, NULL};
  if (!fields_read(a, d, v, table, sizeof table / sizeof table[0], &raw)) return false;
  if (raw.code != CODE_NBC)
    return wrong(a, d, v, ERROR_FIELD_CHOICE, "a scope is known for code nbc only");
  out->nbc_max_storeys = raw.storeys;
  out->nbc_scope = text_format(a, "%s (%s)", raw.says, raw.source);
  return true;
}

bool rows_read_additive(arena *a, diag_list *d, const json_value *root, catalog *out) {
  const json_value *rule = json_get(root, "component_additive");
  const json_value *scope = json_get(root, "scope");
  if (!rule) return wrong(a, d, root, ERROR_FIELD_MISSING, "component_additive is missing");
  if (!scope) return wrong(a, d, root, ERROR_FIELD_MISSING, "scope is missing");
  bool ok = read_component_additive(a, d, rule, out);
  return read_scope(a, d, scope, out) && ok;
}

#define WEIGHT(key)                                                                                \
  { #key, FIELD_NUMBER, FIELD_REQUIRED, 0, 100, 0, NULL, offsetof(evidence_weights, key) }

bool rows_read_distance(arena *a, diag_list *d, const json_value *root, catalog *out) {
  static const field table[] = {
      {"source", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(evidence_weights, source)},
      WEIGHT(layer),
      WEIGHT(board),
      WEIGHT(material),
      WEIGHT(layout),
      WEIGHT(mount),
      WEIGHT(mount_kind),
      WEIGHT(mount_side),
      WEIGHT(mount_spacing),
      WEIGHT(spacing),
      WEIGHT(depth),
      WEIGHT(steel),
      WEIGHT(fill),
      WEIGHT(partial_fill),
      WEIGHT(fill_row),
      WEIGHT(gap),
  };
  static const field sentences[] = {
      {"light_board", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL,
       offsetof(catalog, caution_light_board)},
      {"thin_steel", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL,
       offsetof(catalog, caution_thin_steel)},
      {"source", FIELD_IGNORE, FIELD_REQUIRED, 0, 0, 0, NULL, 0},
  };
  const json_value *v = json_get(root, "distance"), *says = json_get(root, "cautions");
  if (!v) return wrong(a, d, root, ERROR_FIELD_MISSING, "distance is missing");
  if (!says) return wrong(a, d, root, ERROR_FIELD_MISSING, "cautions is missing");
  bool ok = fields_read(a, d, v, table, sizeof table / sizeof table[0], &out->distance);
  return fields_read(a, d, says, sentences, sizeof sentences / sizeof sentences[0], out) && ok;
}

/* Boards by id, distinct sides, distinct pairs of sides */

static layer_need need_of(const catalog *c, const wall_row *row, int index) {
  const layer *l = &c->layers[index];
  bool generic =
      row->code != CODE_NONE; /* a code table means any board to the standard, a listing that one */
  if (generic && l->material == LAYER_GYPSUM && l->type_x)
    return (layer_need){NEED_TYPE_X, l->thickness_m, index};
  if (generic && l->material == LAYER_GYPSUM && l->regular)
    return (layer_need){NEED_GYPSUM, l->thickness_m, index};
  if (generic && l->material == LAYER_WOOD) return (layer_need){NEED_WOOD, l->thickness_m, index};
  return (layer_need){NEED_LAYER, 0, index};
}

static bool same_need(const side_need *x, const side_need *y) {
  if (x->count != y->count) return false;
  for (int i = 0; i < x->count; i++)
    if (x->item[i].kind != y->item[i].kind || x->item[i].layer != y->item[i].layer) return false;
  return true;
}

typedef struct row_set {
  wall_row *rows;
  size_t count;
  side_need *needs;
  size_t need_count;
  int pairs;
} row_set;

static bool resolve_side(arena *a, diag_list *d, const catalog *c, row_set *s, const wall_row *row,
                         row_side *side) {
  side_need need = {.count = 0};
  bool ok = true;
  for (int i = 0; i < side->boards; i++) {
    int index = catalog_layer(c, side->board[i]);
    if (index == CATALOG_NONE) {
      const char *near = catalog_nearest(c, side->board[i]);
      diag_add(d, DIAG_ERROR, ERROR_CATALOG_UNKNOWN_ID, json_place(a, row->json),
               "no board has the id %s%s%s", side->board[i], near ? "; nearest: " : "",
               near ? near : "");
      ok = false;
      continue;
    }
    need.item[need.count++] = need_of(c, row, index);
  }
  if (!ok) return false;
  for (side->need = 0; (size_t)side->need < s->need_count; side->need++)
    if (same_need(&need, &s->needs[side->need])) return true;
  if (s->need_count == ROW_MAX_NEEDS)
    return wrong(a, d, row->json, ERROR_JSON_LIMIT, "too many different sides");
  s->needs[s->need_count++] = need;
  return true;
}

static bool number_pairs(arena *a, diag_list *d, row_set *s) {
  for (size_t i = 0; i < s->count; i++) {
    wall_row *row = &s->rows[i];
    row->pair = CATALOG_NONE;
    for (size_t j = 0; j < i && row->pair == CATALOG_NONE; j++)
      if (s->rows[j].side_a.need == row->side_a.need && s->rows[j].side_b.need == row->side_b.need)
        row->pair = s->rows[j].pair;
    if (row->pair != CATALOG_NONE) continue;
    if (s->pairs == ROW_MAX_PAIRS)
      return wrong(a, d, row->json, ERROR_JSON_LIMIT, "too many different pairs of sides");
    row->pair = s->pairs++;
  }
  return true;
}

static bool resolve(arena *a, diag_list *d, const catalog *c, row_set *s) {
  bool ok = true;
  s->needs = arena_array(a, ROW_MAX_NEEDS, sizeof(side_need));
  for (size_t i = 0; i < s->count; i++) {
    wall_row *row = &s->rows[i];
    if (!resolve_side(a, d, c, s, row, &row->side_a)) ok = false;
    if (!resolve_side(a, d, c, s, row, &row->side_b)) ok = false;
  }
  return ok && number_pairs(a, d, s);
}

bool rows_check_ids(arena *a, diag_list *d, catalog *c) {
  row_set fire = {.rows = c->fire, .count = c->fire_count};
  row_set published = {.rows = c->published, .count = c->published_count};
  bool ok = resolve(a, d, c, &fire);
  if (!resolve(a, d, c, &published)) ok = false;
  c->fire_needs = fire.needs;
  c->fire_need_count = fire.need_count;
  c->published_needs = published.needs;
  c->published_need_count = published.need_count;
  return ok;
}
