#include "data.h"

#include <stdlib.h>
#include <string.h>

#include "base/file.h"
#include "base/text.h"

enum { MAX_COLUMNS = 32, MAX_FILE_BYTES = 1 << 20 };

/* One CSV line cut into fields; quotes are taken off. */
typedef struct line {
  char *field[MAX_COLUMNS];
  int count;
} line;

typedef struct csv {
  arena *arena;
  diag_list *diags;
  const catalog *catalog;
  const char *path;
  line head, row;
  int number; /* line of the file, from 1 */
} csv;

static void cut_line(char *bytes, line *out) {
  bool quoted = false;
  out->count = 0;
  out->field[out->count++] = bytes;
  char *to = bytes;
  for (char *p = bytes; *p; p++) {
    if (*p == '"') {
      quoted = !quoted;
    } else if (*p == ',' && !quoted) {
      *to++ = '\0';
      if (out->count < MAX_COLUMNS) out->field[out->count++] = to;
    } else {
      *to++ = *p;
    }
  }
  *to = '\0';
}

static void fault(const csv *f, const char *what, const char *found) {
  diag_place place = {.file = f->path, .line = f->number, .column = 1};
  diag_add(f->diags, DIAG_ERROR, ERROR_FIELD_CHOICE, place, "%s, found \"%s\"", what, found);
}

static const char *text_at(const csv *f, const char *column) {
  for (int i = 0; i < f->head.count && i < f->row.count; i++) {
    if (text_equal(f->head.field[i], column)) return f->row.field[i];
  }
  return "";
}

static double number_at(const csv *f, const char *column) {
  return strtod(text_at(f, column), NULL);
}

static int whole_at(const csv *f, const char *column) {
  return (int)(number_at(f, column) + 0.5);
}

/* The table speaks of 400 and 600 mm for 16 and 24 in. */
static int spacing_at(const csv *f, const char *column) {
  int mm = whole_at(f, column);
  if (mm == 400) return 406;
  return mm == 600 ? 610 : mm;
}

static const struct {
  const char *written, *id;
} boards[] = {{"15.9X", "typex-16"},
              {"12.7X", "typex-13"},
              {"12.7R", "gyp-13"},
              {"15.9R", "gyp-16"},
              {"12.7OSB", "osb-13"}};

static void add_board(const csv *f, const char *written, face *out) {
  int times = 1;
  if (written[0] == '2' && written[1] == 'x') {
    times = 2;
    written += 2;
  }
  int found = CATALOG_NONE;
  for (size_t i = 0; i < sizeof boards / sizeof boards[0]; i++) {
    if (text_equal(written, boards[i].written)) found = catalog_layer(f->catalog, boards[i].id);
  }
  if (found == CATALOG_NONE) fault(f, "expected a board", written);
  for (int i = 0; i < times; i++) out->layer[out->count++] = found;
}

static void read_face(const csv *f, const char *column, face *out) {
  char *words = (char *)text_copy(f->arena, text_at(f, column));
  for (char *p = words; p;) {
    char *plus = strchr(p, '+');
    if (plus) *plus = '\0';
    add_board(f, p, out);
    p = plus ? plus + 1 : NULL;
  }
}

static int read_frame(const csv *f) {
  const char *family = text_at(f, "family");
  int depth = whole_at(f, "stud_depth_mm");
  bool heavy = number_at(f, "steel_thickness_mm") > 1;
  const char *id;
  if (text_equal(family, "wood-staggered"))
    id = "wood-89-stag-140";
  else if (text_equal(family, "wood-double"))
    id = "wood-89-double";
  else if (text_equal(family, "steel-double"))
    id = heavy ? "steel-92-54-double" : "steel-92-18-double";
  else if (text_starts(family, "wood"))
    id = text_format(f->arena, "wood-%d", depth);
  else
    id = text_format(f->arena, "steel-%d-%s", depth, heavy ? "54" : "18");
  int index = catalog_frame(f->catalog, id);
  if (index == CATALOG_NONE) fault(f, "expected a frame of the catalog", id);
  return index;
}

static void read_fill(const csv *f, wall *w) {
  int mm = whole_at(f, "fill_mm");
  int rows = f->catalog->frames[w->frame].rows;
  if (mm == 0) return;
  bool both = rows == 2 && mm > 150;
  if (both) mm /= 2;
  const char *kind =
      text_equal(text_at(f, "fill"), "stone") || mm == 51 || mm == 76 ? "stone" : "glass";
  int index = catalog_fill(f->catalog, text_format(f->arena, "%s-%d", kind, mm == 51 ? 50 : mm));
  if (index == CATALOG_NONE) fault(f, "expected a fill of the catalog", text_at(f, "fill_mm"));
  w->fill[0] = index;
  if (both) w->fill[1] = index;
}

static void read_mount(const csv *f, wall *w) {
  if (!text_equal(text_at(f, "mount"), "resilient-channel")) return;
  int mm = spacing_at(f, "mount_spacing_mm");
  w->mount[SIDE_A] = (wall_mount){.mount = catalog_mount(f->catalog, "rc"), .spacing_mm = mm};
}

static void read_wall(const csv *f, sample *out) {
  wall *w = &out->wall;
  *w = wall_empty();
  out->id = text_copy(f->arena, text_at(f, "id"));
  w->frame = read_frame(f);
  if (w->frame == CATALOG_NONE) return;
  w->spacing_mm = spacing_at(f, "spacing_mm");
  w->gap_mm = wall_is_double(f->catalog, w) ? 25 : 0;
  read_face(f, "leaf_a", &w->side[SIDE_A]);
  read_face(f, "leaf_b", &w->side[SIDE_B]);
  read_fill(f, w);
  read_mount(f, w);
  out->family = predict_family(f->catalog, w);
}

/* NBC-W14b -> 14, NBC-S2c -> 102. */
static int wall_number(const char *id) {
  const char *p = strchr(id, '-');
  if (!p) return -1;
  return (p[1] == 'S' ? 100 : 0) + (int)strtol(p + 2, NULL, 10);
}

/* `take` is called for every line after the head. */
static void read_csv(csv *f, dataset *out, void (*take)(csv *, sample *)) {
  size_t len;
  char *bytes = file_read(f->arena, f->diags, f->path, MAX_FILE_BYTES, &len);
  for (char *p = bytes; p && *p;) {
    char *end = p + strcspn(p, "\r\n");
    char *next = end + strspn(end, "\r\n");
    *end = '\0';
    f->number++;
    if (f->number == 1) {
      cut_line(p, &f->head);
    } else if (out->count < DATA_MAX_ROWS) {
      cut_line(p, &f->row);
      sample *s = &out->row[out->count++];
      *s = (sample){.number = -1};
      read_wall(f, s);
      take(f, s);
    } else {
      fault(f, "expected fewer rows", text_at(f, "id"));
    }
    p = next;
  }
}

static void take_rating(csv *f, sample *s) {
  s->rating = number_at(f, "rating");
  s->number = wall_number(s->id);
}

static void take_curve(csv *f, sample *s) {
  static const char *const columns[DATA_OCTAVES] = {"tl125",  "tl250",  "tl500",
                                                    "tl1000", "tl2000", "tl4000"};
  s->rating = number_at(f, "rating_stc");
  s->curve = true;
  /* The channel spacing of one curve is not recalled: the README of the data takes 610 mm. */
  if (s->wall.mount[SIDE_A].mount != CATALOG_NONE && s->wall.mount[SIDE_A].spacing_mm == 0)
    s->wall.mount[SIDE_A].spacing_mm = 610;
  for (int i = 0; i < DATA_OCTAVES; i++) s->octave_db[i] = number_at(f, columns[i]);
}

void data_read_ratings(arena *a, diag_list *d, const catalog *c, const char *path, dataset *out) {
  csv f = {.arena = a, .diags = d, .catalog = c, .path = path};
  read_csv(&f, out, take_rating);
}

void data_read_curves(arena *a, diag_list *d, const catalog *c, const char *path, dataset *out) {
  csv f = {.arena = a, .diags = d, .catalog = c, .path = path};
  read_csv(&f, out, take_curve);
}
