#include "input/catalog.h"

#include <string.h>

#include "base/file.h"
#include "input/catalog_records.h"
#include "input/coefficients.h"
#include "input/rows.h"

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

catalog *catalog_load(arena *a, diag_list *d, const char *folder) {
  catalog *c = arena_alloc(a, sizeof *c);
  catalog_reader r = {a, d, NULL, 0, 0};
  bool sound = true;
  c->folder = text_copy(a, folder);
  for (int i = 0; i < FILES; i++) {
    const json_value *root = json_load(a, d, file_join(a, folder, files[i].file));
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

static bool is_letter(char ch) {
  return (ch >= 'a' && ch <= 'z') || (ch >= 'A' && ch <= 'Z');
}
static bool is_digit(char ch) {
  return ch >= '0' && ch <= '9';
}
static char lower(char ch) {
  return ch >= 'A' && ch <= 'Z' ? (char)(ch - 'A' + 'a') : ch;
}

enum { SPOKEN_MAX = 96 };

/* Bytes of an inch word ("in", "inch", "inches") at s, 0 without; a word that merely starts so is
 * none. */
static size_t inch_word(const char *s) {
  static const char *const words[] = {"inches", "inch", "in"};
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++) {
    size_t n = strlen(words[i]), k = 0;
    while (k < n && lower(s[k]) == words[i][k]) k++;
    if (k == n && !is_letter(s[n])) return n;
  }
  return 0;
}

/* What is left of a spoken word when blanks, hyphens, case, inch marks and the long form of "ga" do
 * not count. */
static bool spoken_form(const char *s, char out[SPOKEN_MAX]) {
  size_t n = 0;
  for (size_t i = 0; s[i] != '\0';) {
    size_t inch = n > 0 && is_digit(out[n - 1]) ? inch_word(s + i) : 0;
    if (inch > 0) {
      i += inch;
    } else if (lower(s[i]) == 'g' && strlen(s + i) >= 5 && lower(s[i + 1]) == 'a' &&
               lower(s[i + 2]) == 'u' && lower(s[i + 3]) == 'g' && lower(s[i + 4]) == 'e') {
      if (n + 2 >= SPOKEN_MAX) return false;
      out[n++] = 'g';
      out[n++] = 'a';
      i += 5;
    } else {
      char ch = lower(s[i++]);
      if (ch == ' ' || ch == '\t' || ch == '-' || ch == '"' || ch == '.') continue;
      if (n + 1 >= SPOKEN_MAX) return false;
      out[n++] = ch;
    }
  }
  out[n] = '\0';
  return n > 0;
}

static bool is_said(const catalog *c, catalog_ref ref, const char *form) {
  char other[SPOKEN_MAX];
  if (spoken_form(catalog_id(c, ref), other) && text_equal(other, form)) return true;
  said_words said = said_of(c, ref);
  for (size_t i = 0; i < said.count; i++) {
    if (spoken_form(said.word[i], other) && text_equal(other, form)) return true;
  }
  return false;
}

size_t catalog_find(const catalog *c, const char *word, catalog_ref *out, size_t max) {
  char form[SPOKEN_MAX];
  for (int k = 0; k < CATALOG_KINDS; k++) {
    int index = find_id(c, (catalog_kind)k, word);
    if (index == CATALOG_NONE) continue;
    if (max > 0) out[0] = (catalog_ref){(catalog_kind)k, index};
    return 1;
  }
  if (!spoken_form(word, form)) return 0;
  size_t found = 0;
  for (int k = 0; k < CATALOG_KINDS; k++) {
    int n = (int)count_of(c, (catalog_kind)k);
    for (int i = 0; i < n; i++) {
      catalog_ref ref = {(catalog_kind)k, i};
      if (!is_said(c, ref, form)) continue;
      if (found < max) out[found] = ref;
      found++;
    }
  }
  return found;
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
