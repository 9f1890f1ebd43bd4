#include "input/catalog.h"

#include <string.h>

#include "base/file.h"
#include "input/catalog_records.h"
#include "input/coefficients.h"
#include "input/rows.h"
#include "input/spoken.h"

/* ---- reading ---- */

typedef bool file_reader(catalog_reader *r, const json_value *root, catalog *out);

static bool read_fire(catalog_reader *r, const json_value *root, catalog *out) {
  bool rows = rows_read(r->arena, r->diags, root, "fire", &out->fire, &out->fire_count);
  return rows_read_additive(r->arena, r->diags, root, out) && rows;
}

static bool read_published(catalog_reader *r, const json_value *root, catalog *out) {
  bool rows =
      rows_read(r->arena, r->diags, root, "published", &out->published, &out->published_count);
  return rows_read_distance(r->arena, r->diags, root, out) && rows;
}

static bool read_acoustics(catalog_reader *r, const json_value *root, catalog *out) {
  out->acoustics = coefficients_read(r->arena, r->diags, root);
  return out->acoustics != NULL;
}

/* The files of a folder, in reading order. */
static const struct catalog_file {
  const char *kind, *file;
  file_reader *read;
} files[] = {
    {"boards", "boards.json", catalog_read_layers},
    {"frames", "frames.json", catalog_read_frames},
    {"fills", "fills.json", catalog_read_fills},
    {"mounts", "mounts.json", catalog_read_mounts},
    {"fire", "fire.json", read_fire},
    {"targets", "targets.json", catalog_read_targets},
    {"published", "published.json", read_published},
    {"acoustics", "acoustics.json", read_acoustics},
};

enum { FILES = sizeof files / sizeof files[0] };
_Static_assert((int)FILES == (int)CATALOG_FILES, "a catalog tells the edition of each of its files");

catalog *catalog_load(arena *a, diag_list *d, const char *folder) {
  catalog *c = arena_alloc(a, sizeof *c);
  catalog_reader r = {a, d, NULL, 0, 0};
  bool sound = true;
  c->folder = text_copy(a, folder);
  for (int i = 0; i < FILES; i++) {
    const json_value *root = json_load(a, d, file_join(a, folder, files[i].file));
    c->edition[i] = (catalog_edition){files[i].file, root ? root->crc : 0};
    sound = root && files[i].read(&r, root, c) && sound;
  }
  return sound && rows_check_ids(a, d, c) ? c : NULL;
}

bool catalog_check_file(arena *a, diag_list *d, const json_value *root) {
  const json_value *septum = root->kind == JSON_OBJECT ? json_get(root, "septum") : NULL;
  catalog nothing;
  catalog_reader r = {a, d, NULL, 0, 0};
  memset(&nothing, 0, sizeof nothing);
  for (int i = 0; i < FILES && septum && septum->kind == JSON_STRING; i++) {
    size_t n = strlen(files[i].kind);
    bool same = strncmp(septum->string, files[i].kind, n) == 0 && septum->string[n] == '/';
    if (same) return files[i].read(&r, root, &nothing);
  }
  diag_add(d, DIAG_ERROR, ERROR_FILE_KIND, json_place(a, septum ? septum : root),
           "expected a catalog file (\"septum\": \"boards/1\", frames, fills, mounts, fire, "
           "targets, published or acoustics)");
  return false;
}

/* ---- names ---- */

const char *const catalog_kind_names[CATALOG_KINDS] = {"board", "frame", "fill", "mount"};

static size_t count_of(const catalog *c, catalog_kind kind) {
  switch (kind) {
  case CATALOG_LAYER:
    return c->layer_count;
  case CATALOG_FRAME:
    return c->frame_count;
  case CATALOG_FILL:
    return c->fill_count;
  default:
    return c->mount_count;
  }
}

const char *catalog_id(const catalog *c, catalog_ref ref) {
  switch (ref.kind) {
  case CATALOG_LAYER:
    return c->layers[ref.index].id;
  case CATALOG_FRAME:
    return c->frames[ref.index].id;
  case CATALOG_FILL:
    return c->fills[ref.index].id;
  default:
    return c->mounts[ref.index].id;
  }
}

static said_words said_of(const catalog *c, catalog_ref ref) {
  switch (ref.kind) {
  case CATALOG_LAYER:
    return c->layers[ref.index].said;
  case CATALOG_FRAME:
    return c->frames[ref.index].said;
  case CATALOG_FILL:
    return c->fills[ref.index].said;
  default:
    return c->mounts[ref.index].said;
  }
}

static int find_id(const catalog *c, catalog_kind kind, const char *id) {
  int n = (int)count_of(c, kind);
  for (int i = 0; i < n; i++) {
    if (text_equal(catalog_id(c, (catalog_ref){kind, i}), id)) return i;
  }
  return CATALOG_NONE;
}

int catalog_layer(const catalog *c, const char *id) {
  return find_id(c, CATALOG_LAYER, id);
}
int catalog_frame(const catalog *c, const char *id) {
  return find_id(c, CATALOG_FRAME, id);
}
int catalog_fill(const catalog *c, const char *id) {
  return find_id(c, CATALOG_FILL, id);
}
int catalog_mount(const catalog *c, const char *id) {
  return find_id(c, CATALOG_MOUNT, id);
}

static bool is_said(const catalog *c, catalog_ref ref, const spoken *form, spoken_way way) {
  spoken other;
  if (spoken_read(catalog_id(c, ref), ref.kind, way, &other) && spoken_same(&other, form))
    return true;
  said_words said = said_of(c, ref);
  for (size_t i = 0; i < said.count; i++)
    if (spoken_read(said.word[i], ref.kind, way, &other) && spoken_same(&other, form)) return true;
  return false;
}

/* Every record that `word` is said for, from out[found] on. Returns how many there are now. */
static size_t find_said(const catalog *c, const char *word, spoken_way way, catalog_ref *out,
                        size_t max) {
  size_t found = 0;
  for (int k = 0; k < CATALOG_KINDS; k++) {
    spoken form;
    if (!spoken_read(word, (catalog_kind)k, way, &form)) continue;
    int n = (int)count_of(c, (catalog_kind)k);
    for (int i = 0; i < n; i++) {
      catalog_ref ref = {(catalog_kind)k, i};
      if (!is_said(c, ref, &form, way)) continue;
      if (found < max) out[found] = ref;
      found++;
    }
  }
  return found;
}

size_t catalog_find(const catalog *c, const char *word, catalog_ref *out, size_t max) {
  for (int k = 0; k < CATALOG_KINDS; k++) {
    int index = find_id(c, (catalog_kind)k, word);
    if (index == CATALOG_NONE) continue;
    if (max > 0) out[0] = (catalog_ref){(catalog_kind)k, index};
    return 1;
  }
  size_t found = find_said(c, word, SPOKEN_AS_IT_STANDS, out, max);
  return found > 0 ? found : find_said(c, word, SPOKEN_IN_ANY_ORDER, out, max);
}

const target_row *catalog_target(const catalog *c, const char *adjacency, fire_code code) {
  for (size_t i = 0; i < c->target_count; i++) {
    const target_row *t = &c->targets[i];
    if (t->code == code && text_equal(t->adjacency, adjacency)) return t;
  }
  return NULL;
}

const char *catalog_nearest(const catalog *c, const char *word) {
  const char *ids[CATALOG_KINDS * CATALOG_MAX_RECORDS];
  size_t n = 0;
  for (int k = 0; k < CATALOG_KINDS; k++) {
    int count = (int)count_of(c, (catalog_kind)k);
    for (int i = 0; i < count; i++) ids[n++] = catalog_id(c, (catalog_ref){(catalog_kind)k, i});
  }
  return text_nearest(word, ids, n);
}
