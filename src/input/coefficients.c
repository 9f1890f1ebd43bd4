#include "input/coefficients.h"

#include <math.h>

#include "base/text.h"
#include "input/fields.h"

const char *const sound_family_names[FAMILY_COUNT + 1] = {
    "wood",        "wood-mount",  "wood-staggered",  "wood-double",  "steel",
    "steel-heavy", "steel-mount", "steel-staggered", "steel-double", NULL};

const char *const sound_metric_names[METRIC_COUNT + 1] = {"STC",    "Rw",   "Rw+C",
                                                          "Rw+Ctr", "OITC", NULL};

const char *const sound_outside_names[OUTSIDE_COUNT + 1] = {
    "gauge", "depth",     "spacing",     "clip",    "damped", "limp", "layers",
    "board", "part-fill", "light-mount", "trapped", "rows",   NULL};

#define SLOT(name)                                                                                 \
  { #name, offsetof(struct acoustics, name) }
const coefficient_slot coefficient_slots[] = {
    SLOT(layer_share),      SLOT(leaf_loss),           SLOT(fill_loss),
    SLOT(empty_loss),       SLOT(empty_loss_fall),     SLOT(spring_loss),
    SLOT(bay_stiffness),    SLOT(fastener_compliance), SLOT(low_share),
    SLOT(gauge_fall),       SLOT(gauge_light_m),       SLOT(gauge_middle_m),
    SLOT(gauge_heavy_m),    SLOT(stud_static_hz),   SLOT(compliance_fall),     SLOT(channel_compliance),
    SLOT(channel_on_steel), SLOT(plate_compliance),    SLOT(clip_compliance),
    SLOT(double_coupling),  SLOT(bridge_db),           SLOT(ceiling_db),
    SLOT(air_density),      SLOT(sound_speed),         SLOT(fill_resistivity),
    SLOT(test_area_m2),     SLOT(limit_cos2_max),      SLOT(bay_fade_hz),
    SLOT(screw_edge_m),     SLOT(steel_modulus_pa),    SLOT(poisson)};
const size_t coefficient_slot_count = sizeof coefficient_slots / sizeof coefficient_slots[0];

typedef struct coefficient_record {
  const char *id, *unit, *meaning, *source;
  double value, min, max, prior, prior_sd;
  bool fitted;
} coefficient_record;

static const field coefficient_fields[] = {
    {.key = "id",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, id)},
    {.key = "value",
     .kind = FIELD_NUMBER,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, value)},
    {.key = "unit",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, unit)},
    {.key = "meaning",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, meaning)},
    {.key = "min",
     .kind = FIELD_NUMBER,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, min)},
    {.key = "max",
     .kind = FIELD_NUMBER,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, max)},
    {.key = "prior", .kind = FIELD_NUMBER, .offset = offsetof(coefficient_record, prior)},
    {.key = "prior_sd", .kind = FIELD_NUMBER, .offset = offsetof(coefficient_record, prior_sd)},
    {.key = "scale", .kind = FIELD_IGNORE},
    {.key = "fitted",
     .kind = FIELD_BOOL,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, fitted)},
    {.key = "source",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(coefficient_record, source)},
};

typedef struct spread_record {
  const char *id, *source;
  int rows;
  double bias, sd;
} spread_record;

static const field family_fields[] = {
    {.key = "id",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(spread_record, id)},
    {.key = "rows",
     .kind = FIELD_INTEGER,
     .flags = FIELD_REQUIRED,
     .min = 0,
     .max = 1e6,
     .offset = offsetof(spread_record, rows)},
    {.key = "bias",
     .kind = FIELD_NUMBER,
     .flags = FIELD_REQUIRED,
     .min = -20,
     .max = 20,
     .offset = offsetof(spread_record, bias)},
    {.key = "rms", .kind = FIELD_IGNORE},
    {.key = "cross_bias", .kind = FIELD_IGNORE},
    {.key = "cross_rms", .kind = FIELD_IGNORE},
    {.key = "sd",
     .kind = FIELD_NUMBER,
     .flags = FIELD_REQUIRED | FIELD_ABOVE_MIN,
     .min = 0,
     .max = 20,
     .offset = offsetof(spread_record, sd)},
    {.key = "source", .kind = FIELD_STRING, .offset = offsetof(spread_record, source)},
};

static const field extra_fields[] = {
    {.key = "id",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(spread_record, id)},
    {.key = "sd",
     .kind = FIELD_NUMBER,
     .flags = FIELD_REQUIRED,
     .min = 0,
     .max = 20,
     .offset = offsetof(spread_record, sd)},
    {.key = "source",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(spread_record, source)},
};

typedef struct acoustics_file {
  const char *about, *source;
  const json_value *coefficients, *families, *metrics, *outside, *fit;
} acoustics_file;

static const field file_fields[] = {
    {.key = "about", .kind = FIELD_STRING, .offset = offsetof(acoustics_file, about)},
    {.key = "source",
     .kind = FIELD_STRING,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(acoustics_file, source)},
    {.key = "coefficients",
     .kind = FIELD_VALUE,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(acoustics_file, coefficients)},
    {.key = "families",
     .kind = FIELD_VALUE,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(acoustics_file, families)},
    {.key = "metrics",
     .kind = FIELD_VALUE,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(acoustics_file, metrics)},
    {.key = "outside",
     .kind = FIELD_VALUE,
     .flags = FIELD_REQUIRED,
     .offset = offsetof(acoustics_file, outside)},
    {.key = "fit", .kind = FIELD_VALUE, .offset = offsetof(acoustics_file, fit)},
};

#define ROWS(table) (sizeof(table) / sizeof((table)[0]))

typedef struct reader {
  arena *arena;
  diag_list *diags;
  struct acoustics *out;
} reader;

static int index_of(const char *id, const char *const *names) {
  for (int i = 0; names[i]; i++) {
    if (text_equal(id, names[i])) return i;
  }
  return -1;
}

static int slot_of(const char *id) {
  for (size_t i = 0; i < coefficient_slot_count; i++) {
    if (text_equal(id, coefficient_slots[i].id)) return (int)i;
  }
  return -1;
}

static void refuse(reader *r, const json_value *v, error_code code, const char *what,
                   const char *id) {
  diag_add(r->diags, DIAG_ERROR, code, json_place(r->arena, v), "%s, found \"%s\"", what, id);
}

static bool list_of(reader *r, const json_value *v) {
  if (v && v->kind == JSON_ARRAY) return true;
  if (v) {
    diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_TYPE, json_place(r->arena, v),
             "expected a list, found %s", json_kind_name(v->kind));
  }
  return false;
}

/* `seen` has one flag a known id: every one must come exactly once. */
static bool take(reader *r, const json_value *record, int index, const char *id, bool *seen) {
  if (index < 0) {
    refuse(r, record, ERROR_FIELD_CHOICE, "expected an id of the sound model", id);
    return false;
  }
  if (seen[index]) refuse(r, record, ERROR_CATALOG_DUPLICATE_ID, "each id may stand once", id);
  seen[index] = true;
  return true;
}

static void all_seen(reader *r, const json_value *list, const bool *seen, size_t n,
                     const char *(*name)(size_t)) {
  for (size_t i = 0; i < n; i++) {
    if (!seen[i]) {
      diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_MISSING, json_place(r->arena, list),
               "expected a record with the id \"%s\"", name(i));
    }
  }
}

static const char *slot_name(size_t i) {
  return coefficient_slots[i].id;
}
static const char *family_name(size_t i) {
  return sound_family_names[i];
}
static const char *metric_name(size_t i) {
  return sound_metric_names[i];
}
static const char *outside_name(size_t i) {
  return sound_outside_names[i];
}

static void read_coefficients(reader *r, const json_value *list) {
  bool *seen = arena_array(r->arena, coefficient_slot_count, sizeof *seen);
  if (!list_of(r, list)) return;
  for (const json_value *v = list->first; v; v = v->next) {
    coefficient_record c = {.prior = NAN, .prior_sd = NAN};
    bool sound =
        fields_read(r->arena, r->diags, v, coefficient_fields, ROWS(coefficient_fields), &c);
    int slot = c.id ? slot_of(c.id) : -1;
    if (!sound && slot >= 0) seen[slot] = true; /* one message is enough */
    if (!sound || !take(r, v, slot, c.id, seen)) continue;
    if (c.value < c.min || c.value > c.max) {
      diag_add(r->diags, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(r->arena, json_get(v, "value")),
               "%s must lie within its own bounds \"min\" and \"max\"", c.id);
    }
    *(double *)((char *)r->out + coefficient_slots[slot].offset) = c.value;
  }
  all_seen(r, list, seen, coefficient_slot_count, slot_name);
}

static void read_families(reader *r, const json_value *list) {
  bool seen[FAMILY_COUNT] = {false};
  if (!list_of(r, list)) return;
  for (const json_value *v = list->first; v; v = v->next) {
    spread_record s = {0};
    bool sound = fields_read(r->arena, r->diags, v, family_fields, ROWS(family_fields), &s);
    int i = s.id ? index_of(s.id, sound_family_names) : -1;
    if (!sound && i >= 0) seen[i] = true;
    if (!sound || !take(r, v, i, s.id, seen)) continue;
    r->out->rows[i] = s.rows;
    r->out->bias[i] = s.bias;
    r->out->sd[i] = s.sd;
  }
  all_seen(r, list, seen, FAMILY_COUNT, family_name);
}

static void read_extras(reader *r, const json_value *list, const char *const *names, size_t n,
                        const char *(*name)(size_t), double *out) {
  bool *seen = arena_array(r->arena, n, sizeof *seen);
  if (!list_of(r, list)) return;
  for (const json_value *v = list->first; v; v = v->next) {
    spread_record s = {0};
    bool sound = fields_read(r->arena, r->diags, v, extra_fields, ROWS(extra_fields), &s);
    int i = s.id ? index_of(s.id, names) : -1;
    if (!sound && i >= 0) seen[i] = true;
    if (sound && take(r, v, i, s.id, seen)) out[i] = s.sd;
  }
  all_seen(r, list, seen, n, name);
}

const struct acoustics *coefficients_read(arena *a, diag_list *d, const json_value *root) {
  reader r = {a, d, arena_alloc(a, sizeof(struct acoustics))};
  acoustics_file file = {0};
  size_t before = d->errors;
  if (!json_is(a, d, root, "acoustics")) return NULL;
  fields_read(a, d, root, file_fields, ROWS(file_fields), &file);
  r.out->source = file.source;
  read_coefficients(&r, file.coefficients);
  read_families(&r, file.families);
  read_extras(&r, file.metrics, sound_metric_names, METRIC_COUNT, metric_name,
              r.out->metric_extra_sd);
  read_extras(&r, file.outside, sound_outside_names, OUTSIDE_COUNT, outside_name,
              r.out->outside_sd);
  return d->errors == before ? r.out : NULL;
}
