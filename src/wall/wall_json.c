#include "input/fields.h"
#include "wall/line.h"
#include "wall/parts.h"

/* wall/1: docs/formats/wall.md. Same checks as the wall line, with the place in the file. */

typedef struct raw_wall {
  const char *name;
  const json_value *side[2], *sheath[2], *inner[2], *mount[2], *frame, *fill;
  double gap_m;
} raw_wall;

typedef struct raw_frame {
  const char *id;
  double spacing_m;
} raw_frame;
typedef struct raw_mount {
  const char *id;
  double spacing_m, clip_spacing_m;
} raw_mount;

typedef struct reader {
  arena *arena;
  diag_list *diags;
  const catalog *catalog;
  bool sound;
} reader;

static void fault(reader *r, const json_value *v, error_code code, const char *message) {
  diag_add(r->diags, DIAG_ERROR, code, json_place(r->arena, v), "%s", message);
  r->sound = false;
}

static bool read_id(reader *r, const json_value *place, const char *word, catalog_kind kind,
                    const char *expected, int *index) {
  catalog_ref ref;
  part_answer answer = part_find(r->arena, r->catalog, word, kind, expected, &ref);
  if (answer.message)
    fault(r, place, answer.code, answer.message);
  else
    *index = ref.index;
  return !answer.message;
}

static const json_value *at_key(const json_value *object, const char *key) {
  const json_value *v = json_get(object, key);
  return v ? v : object;
}

static void read_face(reader *r, const json_value *list, face *out) {
  if (!list) return;
  if (list->kind != JSON_ARRAY || list->count > WALL_MAX_LAYERS) {
    fault(r, list, ERROR_FIELD_TYPE,
          text_format(r->arena, "expected an array of at most %d ids", (int)WALL_MAX_LAYERS));
    return;
  }
  for (const json_value *v = list->first; v; v = v->next) {
    int index = CATALOG_NONE;
    if (v->kind != JSON_STRING)
      fault(r, v, ERROR_FIELD_TYPE, "expected the id of a board or membrane");
    else if (read_id(r, v, v->string, CATALOG_LAYER, "a board or membrane", &index))
      out->layer[out->count++] = index;
  }
}

static int read_spacing(reader *r, const json_value *place, double metres, const int *list,
                        size_t count) {
  int nominal = part_spacing(metres, list, count);
  if (nominal != 0) return nominal;
  text t;
  text_init(&t, r->arena, 200);
  for (size_t i = 0; i < count; i++)
    text_putf(&t, "%s%d", i == 0 ? "" : i + 1 == count ? " or " : ", ", list[i]);
  fault(r, place, ERROR_FIELD_RANGE,
        text_format(r->arena, "expected a spacing of %s mm, found %s", t.data,
                    text_of(r->arena, metres * 1e3, 0)));
  return 0;
}

static void read_frame(reader *r, const json_value *object, wall *out) {
  static const field table[] = {
      {"id", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_frame, id)},
      {"spacing_m", FIELD_LENGTH, FIELD_REQUIRED | FIELD_ABOVE_MIN, 0, 10, 0, NULL,
       offsetof(raw_frame, spacing_m)},
  };
  raw_frame raw = {NULL, 0};
  if (!fields_read(r->arena, r->diags, object, table, 2, &raw)) r->sound = false;
  if (raw.id) read_id(r, at_key(object, "id"), raw.id, CATALOG_FRAME, "a frame", &out->frame);
  if (raw.spacing_m > 0) {
    out->spacing_mm = read_spacing(r, at_key(object, "spacing_mm"), raw.spacing_m,
                                   r->catalog->spacings_mm, r->catalog->spacing_count);
  }
}

static void read_clip_spacing(reader *r, const json_value *object, double metres, const mount *type,
                              wall_mount *out) {
  const json_value *place = at_key(object, "clip_spacing_mm");
  out->clip_spacing_mm = type->clips ? type->clip_spacing_mm : 0;
  if (metres <= 0) return;
  int mm = (int)(metres * 1e3 + 0.5);
  if (!type->clips)
    fault(r, place, ERROR_FIELD_CONFLICT, "expected no clip spacing: the mount has no clips");
  else if (!part_clip_spacing_ok(type, mm))
    fault(r, place, ERROR_FIELD_RANGE, part_clip_spacing_expected(r->arena, type));
  else
    out->clip_spacing_mm = mm;
}

static void read_mount(reader *r, const json_value *object, wall_mount *out) {
  static const field table[] = {
      {"id", FIELD_STRING, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_mount, id)},
      {"spacing_m", FIELD_LENGTH, FIELD_REQUIRED | FIELD_ABOVE_MIN, 0, 10, 0, NULL,
       offsetof(raw_mount, spacing_m)},
      {"clip_spacing_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 10, 0, NULL,
       offsetof(raw_mount, clip_spacing_m)},
  };
  raw_mount raw = {NULL, 0, 0};
  if (!object || object->kind == JSON_NULL) return;
  if (!fields_read(r->arena, r->diags, object, table, 3, &raw)) r->sound = false;
  if (raw.spacing_m > 0) {
    out->spacing_mm = read_spacing(r, at_key(object, "spacing_mm"), raw.spacing_m,
                                   r->catalog->mount_spacings_mm, r->catalog->mount_spacing_count);
  }
  if (raw.id && read_id(r, at_key(object, "id"), raw.id, CATALOG_MOUNT, "a mount", &out->mount)) {
    read_clip_spacing(r, object, raw.clip_spacing_m, &r->catalog->mounts[out->mount], out);
  }
}

static void read_fills(reader *r, const json_value *list, wall *out) {
  if (!list || list->kind == JSON_NULL) return;
  size_t rows = out->frame == CATALOG_NONE ? 2 : (size_t)r->catalog->frames[out->frame].rows;
  if (list->kind != JSON_ARRAY || list->count > rows) {
    const char *expected = rows == 1
                               ? "expected an array of one fill at most: the frame has one row"
                               : "expected an array of two fills at most: one a row";
    fault(r, list, ERROR_FIELD_TYPE, expected);
    return;
  }
  int row = 0;
  for (const json_value *v = list->first; v; v = v->next, row++) {
    if (v->kind == JSON_NULL) continue;
    if (v->kind != JSON_STRING)
      fault(r, v, ERROR_FIELD_TYPE, "expected the id of a fill, or null for an empty row");
    else
      read_id(r, v, v->string, CATALOG_FILL, "a fill", &out->fill[row]);
  }
}

/* What depends on the number of rows. */
static void read_rows(reader *r, const json_value *root, const raw_wall *raw, wall *out) {
  read_fills(r, raw->fill, out);
  if (out->frame == CATALOG_NONE) return;
  const json_value *gap = at_key(root, "gap_mm");
  bool rows_two = wall_is_double(r->catalog, out);
  out->gap_mm = rows_two ? PART_GAP_DEFAULT_MM : 0;
  if (raw->gap_m > 0 && !rows_two)
    fault(r, gap, ERROR_FIELD_CONFLICT, "expected no gap: the frame has one row");
  if (raw->gap_m > 0 && rows_two) {
    out->gap_mm = (int)(raw->gap_m * 1e3 + 0.5);
    if (!part_gap_ok(out->gap_mm)) fault(r, gap, ERROR_FIELD_RANGE, part_gap_expected(r->arena));
  }
  for (int s = 0; s < 2; s++) {
    if (out->inner[s].count > 0 && !rows_two) {
      fault(r, raw->inner[s], ERROR_FIELD_CONFLICT,
            "expected inner faces on frames of two rows only");
    }
  }
}

static void check_sides(reader *r, const json_value *root, const raw_wall *raw, const wall *w) {
  for (int s = 0; s < 2; s++) {
    const json_value *place = raw->side[s] ? raw->side[s] : root;
    bool no_mount = !raw->mount[s] || raw->mount[s]->kind == JSON_NULL;
    if (raw->side[s] && raw->side[s]->kind == JSON_ARRAY && raw->side[s]->count == 0) {
      fault(r, place, ERROR_FIELD_TYPE, "expected at least one board");
    }
    if (w->sheath[s].count > 0 && no_mount) {
      fault(r, raw->sheath[s], ERROR_FIELD_CONFLICT,
            "expected a mount on this side: a sheath is boards on the stud under a mount");
    }
    if (w->side[s].count + w->sheath[s].count > WALL_MAX_LAYERS) {
      fault(r, place, ERROR_FIELD_RANGE,
            text_format(r->arena, "expected at most %d layers a side", (int)WALL_MAX_LAYERS));
    }
  }
}

bool line_from_json(arena *a, diag_list *d, const catalog *c, const json_value *root, wall *out,
                    const char **name) {
  static const field table[] = {
      {"septum", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
      {"name", FIELD_STRING, 0, 0, 0, 0, NULL, offsetof(raw_wall, name)},
      {"side_a", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_wall, side[0])},
      {"side_b", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_wall, side[1])},
      {"frame", FIELD_VALUE, FIELD_REQUIRED, 0, 0, 0, NULL, offsetof(raw_wall, frame)},
      {"fill", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, offsetof(raw_wall, fill)},
      {"mount_a", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, offsetof(raw_wall, mount[0])},
      {"mount_b", FIELD_VALUE, FIELD_NULL_OK, 0, 0, 0, NULL, offsetof(raw_wall, mount[1])},
      {"sheath_a", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_wall, sheath[0])},
      {"sheath_b", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_wall, sheath[1])},
      {"inner_a", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_wall, inner[0])},
      {"inner_b", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_wall, inner[1])},
      {"gap_m", FIELD_LENGTH, FIELD_ABOVE_MIN, 0, 10, 0, NULL, offsetof(raw_wall, gap_m)},
  };
  raw_wall raw = {.gap_m = 0};
  reader r = {a, d, c, true};
  *out = wall_empty();
  *name = NULL;
  if (!json_is(a, d, root, "wall")) return false;
  if (!fields_read(a, d, root, table, sizeof table / sizeof table[0], &raw)) r.sound = false;
  *name = raw.name;
  for (int s = 0; s < 2; s++) {
    read_face(&r, raw.side[s], &out->side[s]);
    read_face(&r, raw.sheath[s], &out->sheath[s]);
    read_face(&r, raw.inner[s], &out->inner[s]);
    read_mount(&r, raw.mount[s], &out->mount[s]);
  }
  if (raw.frame) read_frame(&r, raw.frame, out);
  read_rows(&r, root, &raw, out);
  check_sides(&r, root, &raw, out);
  return r.sound;
}
