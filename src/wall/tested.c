#include "wall/tested.h"

#include "input/fields.h"
#include "wall/compat.h"
#include "wall/line.h"

/* Spread of repeated tests of one wall, 1.2 points: common practice, no source (as for the code tables'
 * 1.0, see docs/methods/evidence.md). */
static const double report_sd = 1.2;

typedef struct raw_report {
  const char *number, *laboratory, *date, *note;
  int stc;
  double sd;
  const json_value *wall, *curve;
} raw_report;

#define AT(member) offsetof(raw_report, member)

static const field report_fields[] = {
    {"number", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, AT(number)},
    {"laboratory", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, AT(laboratory)},
    {"date", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, AT(date)},
    {"note", FIELD_STRING, 0, 0, 0, 0, NULL, AT(note)},
    {"stc", FIELD_INTEGER, FIELD_REQUIRED, 10, 100, 0, NULL, AT(stc)},
    {"sd", FIELD_NUMBER, 0, 0.5, 10, 0, NULL, AT(sd)},
    {"wall", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, AT(wall)},
    {"tl_db", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, AT(curve)},
};

static bool wrong(arena *a, diag_list *d, const json_value *v, error_code code, const char *what) {
  diag_add(d, DIAG_ERROR, code, json_place(a, v), "%s", what);
  return false;
}

/* ---- the curve ---- */

/* The band that a key names by its nominal centre frequency in Hz. */
static int band_of(arena *a, const char *key) {
  for (int b = 0; b < BANDS; b++)
    if (text_equal(key, text_format(a, "%d", (int)bands_hz[b]))) return b;
  return CATALOG_NONE;
}

/* The bands that no report gives take the value of the nearest that it gives: no rating reads them.
 */
static void fill_up(const bool given[BANDS], double tl_db[BANDS]) {
  int last = BAND_125;
  for (int b = BAND_125; b < BANDS; b++) {
    if (given[b])
      last = b;
    else
      tl_db[b] = tl_db[last];
  }
  last = BAND_125;
  for (int b = BAND_125; b >= 0; b--) {
    if (given[b])
      last = b;
    else
      tl_db[b] = tl_db[last];
  }
}

/* {"125": 23.1, ...}: every band that STC reads, others as the report has them. */
static bool read_curve(arena *a, diag_list *d, const json_value *v, double tl_db[BANDS]) {
  bool given[BANDS] = {false}, sound = true;
  if (v->kind != JSON_OBJECT)
    return wrong(a, d, v, ERROR_FIELD_TYPE, "must be an object of bands, such as {\"125\": 23.1}");
  for (const json_value *e = v->first; e; e = e->next) {
    int b = band_of(a, e->key);
    if (b == CATALOG_NONE) {
      sound = wrong(a, d, e, ERROR_FIELD_UNKNOWN, "expected a third-octave band, 50 to 5000 Hz");
      continue;
    }
    given[b] = true;
    tl_db[b] = e->number;
    if (e->kind != JSON_NUMBER || e->number < 0 || e->number > 150)
      sound = wrong(a, d, e, ERROR_FIELD_RANGE, "expected a transmission loss of 0 to 150 dB");
  }
  for (int b = BAND_125; b <= BAND_4000; b++) {
    if (given[b]) continue;
    diag_add(d, DIAG_ERROR, ERROR_FIELD_MISSING, json_place(a, v),
             "expected the band of %d Hz: STC reads 125 to 4000 Hz", (int)bands_hz[b]);
    return false;
  }
  fill_up(given, tl_db);
  return sound;
}

/* ---- the wall ---- */

static bool read_wall(arena *a, diag_list *d, const catalog *c, const json_value *v, wall *out) {
  const char *name;
  if (v->kind == JSON_OBJECT) return line_from_json(a, d, c, v, out, &name);
  if (v->kind == JSON_STRING) return line_parse_value(a, d, c, v, out);
  return wrong(a, d, v, ERROR_FIELD_TYPE, "must be a wall line or a wall/1 object");
}

static bool buildable(arena *a, diag_list *d, const catalog *c, const json_value *v,
                      const wall *w) {
  bool sound = compat_buildable(d, json_place(a, v), c, w);
  for (int s = 0; s < 2; s++)
    if (w->side[s].count > ROW_MAX_SIDE) {
      diag_add(d, DIAG_ERROR, ERROR_FIELD_RANGE, json_place(a, v),
               "expected at most %d layers at a room of a tested wall", (int)ROW_MAX_SIDE);
      sound = false;
    }
  return sound;
}

static row_side side_of(const catalog *c, const face *f) {
  row_side s = {.boards = f->count};
  for (int i = 0; i < f->count; i++) s.board[i] = c->layers[f->layer[i]].id;
  return s;
}

/* The row in general terms, so that walls beside it can be compared with it. */
static void set_row(const catalog *c, const wall *w, wall_row *row) {
  const frame *f = &c->frames[w->frame];
  const wall_mount *m = &w->mount[SIDE_A];
  row->material = f->material;
  row->layout = f->layout;
  row->depth_m = f->stud_depth_m;
  row->mil_min = row->mil_max = f->mil;
  row->spacing_min_m = row->spacing_max_m = wall_spacing_m(w->spacing_mm);
  row->gap_m = w->gap_mm * 0.001;
  row->side_a = side_of(c, &w->side[SIDE_A]);
  row->side_b = side_of(c, &w->side[SIDE_B]);
  row->mount = m->mount == CATALOG_NONE ? ROW_MOUNT_NONE : ROW_MOUNT_CHANNEL;
  if (m->mount != CATALOG_NONE)
    row->mount_spacing_min_m = row->mount_spacing_max_m = wall_spacing_m(m->spacing_mm);
  for (int r = 0; r < f->rows; r++) {
    if (w->fill[r] == CATALOG_NONE) continue;
    const fill *fibre = &c->fills[w->fill[r]];
    row->fill = ROW_FILL_REQUIRED;
    row->filled_rows++;
    row->fill_kinds |= 1u << fibre->material;
    row->fill_thickness_m = fibre->thickness_m;
  }
}

static bool read_report(arena *a, diag_list *d, const catalog *c, const json_value *v,
                        tested_wall *out) {
  raw_report raw = {.sd = report_sd};
  bool sound = fields_read(a, d, v, report_fields, sizeof report_fields / sizeof report_fields[0],
                           &raw);
  if (raw.wall == NULL || !sound) return false;
  wall *w = arena_alloc(a, sizeof *w);
  if (!read_wall(a, d, c, raw.wall, w) || !buildable(a, d, c, raw.wall, w)) return false;
  if (w->mount[SIDE_B].mount != CATALOG_NONE) *w = wall_mirrored(c, w); /* a row's mount is on A */
  *out = (tested_wall){.stc = json_get(v, "stc"), .has_bands = raw.curve != NULL};
  if (out->has_bands && raw.curve->kind == JSON_NULL) out->has_bands = false;
  if (out->has_bands && !read_curve(a, d, raw.curve, out->tl_db)) return false;
  out->row = (wall_row){.id = raw.number, .stc = raw.stc, .stc_sd = raw.sd, .json = v, .tested = w};
  out->row.note = raw.note != NULL ? raw.note : "";
  out->row.name = text_format(a, "test report %s", raw.number);
  out->row.source = text_format(a, "%s, %s", raw.laboratory, raw.date);
  set_row(c, w, &out->row);
  return true;
}

bool tested_read(arena *a, diag_list *d, const catalog *c, const json_value *root,
                 tested_wall **out, size_t *count) {
  static const field table[] = {
      {"septum", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
      {"about", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
      {"records", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, 0},
  };
  const json_value *records = NULL;
  *out = NULL;
  *count = 0;
  if (!json_is(a, d, root, "report")) return false;
  bool sound = fields_read(a, d, root, table, sizeof table / sizeof table[0], &records);
  if (records == NULL) return false;
  if (records->kind != JSON_ARRAY || records->count > CATALOG_MAX_RECORDS)
    return wrong(a, d, records, ERROR_FIELD_TYPE, "must be an array of at most 1000 reports");
  *out = arena_array(a, records->count, sizeof **out);
  for (const json_value *v = records->first; v; v = v->next) {
    tested_wall *t = &(*out)[*count];
    if (read_report(a, d, c, v, t))
      (*count)++;
    else
      sound = false;
  }
  return sound;
}
