#include "explain/changes.h"

#include "base/units.h"
#include "explain/steps.h"

static const char *const side_names[] = {"A", "B"};

static void add(change_list *l, const char *words) {
  if (l->count < CHANGES_MAX) l->item[l->count++] = words;
}

/* ---- a face ---- */

/* Whether `less` is `more` with some of its layers left out; what is left out goes to `rest`. */
static bool left_out(const face *less, const face *more, face *rest) {
  int kept = 0;
  *rest = (face){.count = 0};
  for (int i = 0; i < more->count; i++) {
    if (kept < less->count && more->layer[i] == less->layer[kept])
      kept++;
    else
      rest->layer[rest->count++] = more->layer[i];
  }
  return kept == less->count;
}

static bool all_same(const face *f) {
  for (int i = 1; i < f->count; i++)
    if (f->layer[i] != f->layer[0]) return false;
  return f->count > 0;
}

/* "second layer", "second and third layers": more of the same board. */
static const char *more_layers(arena *a, const face *from, const face *to) {
  static const char *const ordinals[] = {"first", "second", "third", "fourth", "fifth", "sixth"};
  const char *first = ordinals[from->count], *last = ordinals[to->count - 1];
  if (to->count == from->count + 1) return text_format(a, "%s layer", first);
  return text_format(a, "%s to %s layers", first, last);
}

static const char *layers_words(arena *a, const catalog *c, const face *f) {
  text t;
  text_init(&t, a, 1000);
  for (int i = 0, n; i < f->count; i += n) {
    for (n = 1; i + n < f->count && f->layer[i + n] == f->layer[i];) n++;
    text_put(&t, i ? " + " : "");
    if (n > 1) text_putf(&t, "%d x ", n);
    text_put(&t, c->layers[f->layer[i]].name);
  }
  return t.data;
}

/* What changes on one face, without its place: other boards, then more or fewer of them. NULL where
 * nothing does. */
typedef struct face_change {
  const char *boards, *layers;
} face_change;

static const char *count_words(arena *a, const face *from, const face *to) {
  int less = from->count - to->count;
  if (less == 0) return NULL;
  if (less < 0) return more_layers(a, from, to);
  return less == 1 ? "one layer less" : text_format(a, "%d layers less", less);
}

static face_change change_of(arena *a, const catalog *c, const face *from, const face *to) {
  face rest;
  if (all_same(from) && all_same(to)) {
    const char *had = c->layers[from->layer[0]].name, *has = c->layers[to->layer[0]].name;
    bool other = from->layer[0] != to->layer[0];
    return (face_change){other ? text_format(a, "%s for %s", has, had) : NULL,
                         count_words(a, from, to)};
  }
  if (left_out(from, to, &rest)) {
    if (rest.count == 0) return (face_change){NULL, NULL};
    return (face_change){NULL, text_format(a, "%s added", layers_words(a, c, &rest))};
  }
  if (left_out(to, from, &rest))
    return (face_change){NULL, text_format(a, "no %s", layers_words(a, c, &rest))};
  return (face_change){
      text_format(a, "%s for %s", layers_words(a, c, to), layers_words(a, c, from)), NULL};
}

/* What is done to both sides alike is told once. */
static void add_sided(arena *a, const char *words[2], const char *place, change_list *out) {
  if (words[0] && words[1] && text_equal(words[0], words[1])) {
    add(out, text_format(a, "%s %s both sides", words[0], place));
    return;
  }
  for (int s = 0; s < 2; s++)
    if (words[s]) add(out, text_format(a, "%s %s side %s", words[s], place, side_names[s]));
}

static void add_faces(arena *a, const catalog *c, const char *place, const face from[2],
                      const face to[2], change_list *out) {
  const char *boards[2], *layers[2];
  for (int s = 0; s < 2; s++) {
    face_change f = change_of(a, c, &from[s], &to[s]);
    boards[s] = f.boards;
    layers[s] = f.layers;
  }
  add_sided(a, boards, place, out);
  add_sided(a, layers, place, out);
}

/* ---- the rest ---- */

static const char *spacing_words(arena *a, int mm, bool inches) {
  if (!inches) return text_format(a, "%d mm", mm);
  return text_format(a, "%s in", text_of(a, mm * 1e-3 / UNITS_M_PER_IN, 0));
}

static const char *mount_word(const catalog *c, const wall_mount *m) {
  return c->mounts[m->mount].clips ? "clips and furring channel" : "resilient channel";
}

static void add_mount(arena *a, const catalog *c, const wall_mount *from, const wall_mount *to,
                      int side, bool inches, change_list *out) {
  const char *on = side_names[side];
  bool had = from->mount != CATALOG_NONE, has = to->mount != CATALOG_NONE;
  if (!had && !has) return;
  if (!has) {
    add(out, text_format(a, "no %s on side %s", mount_word(c, from), on));
  } else if (!had || from->mount != to->mount) {
    add(out, text_format(a, "%s at %s%s%s on side %s", mount_word(c, to),
                         spacing_words(a, to->spacing_mm, inches), had ? " for " : "",
                         had ? mount_word(c, from) : "", on));
  } else {
    if (from->spacing_mm != to->spacing_mm)
      add(out, text_format(a, "%s for %s between channels on side %s",
                           spacing_words(a, to->spacing_mm, inches),
                           spacing_words(a, from->spacing_mm, inches), on));
    if (from->clip_spacing_mm != to->clip_spacing_mm)
      add(out, text_format(a, "%s for %s between clips on side %s",
                           spacing_words(a, to->clip_spacing_mm, inches),
                           spacing_words(a, from->clip_spacing_mm, inches), on));
  }
}

/* "3-1/2 in glass-fibre batt in the bays", "... in both rows", "... in one row". */
static const char *fill_words(arena *a, const catalog *c, const wall *w) {
  int x = w->fill[0], y = w->fill[1];
  if (x == CATALOG_NONE && y == CATALOG_NONE) return NULL;
  if (!wall_is_double(c, w)) return c->fills[x].name;
  if (x == y) return text_format(a, "%s in both rows", c->fills[x].name);
  if (x == CATALOG_NONE || y == CATALOG_NONE)
    return text_format(a, "%s in row %s", c->fills[x == CATALOG_NONE ? y : x].name,
                       side_names[x == CATALOG_NONE]);
  return text_format(a, "%s in row A, %s in row B", c->fills[x].name, c->fills[y].name);
}

/* How many rows the batt fills, where it is the only one; else 0. */
static int rows_filled(const catalog *c, const wall *w) {
  bool first = w->fill[0] != CATALOG_NONE;
  bool second = wall_is_double(c, w) && w->fill[1] != CATALOG_NONE;
  if (first && second && w->fill[0] != w->fill[1]) return 0;
  return first + second;
}

static int batt_of(const wall *w) {
  return w->fill[0] != CATALOG_NONE ? w->fill[0] : w->fill[1];
}

/* The same batt in another number of rows. False where it is another. */
static bool add_rows(const catalog *c, const wall *from, const wall *to, change_list *out) {
  int had = rows_filled(c, from), has = rows_filled(c, to);
  if (had == 0 || has == 0 || batt_of(from) != batt_of(to)) return false;
  if (had == has) {
    if (has == 1 && wall_is_double(c, to) && !wall_is_double(c, from))
      add(out, "batts in one row, the other empty");
    else if (has == 1 && wall_is_double(c, from) && wall_is_double(c, to))
      add(out, "batts in the other row");
    return true;
  }
  if (has == 2)
    add(out, wall_is_double(c, from) ? "batts in the second row too" : "batts in both rows");
  else if (wall_is_double(c, to))
    add(out, "no batts in the second row");
  return true;
}

static void add_fill(arena *a, const catalog *c, const wall *from, const wall *to,
                     change_list *out) {
  const char *had = fill_words(a, c, from), *has = fill_words(a, c, to);
  if (!had && !has) return;
  if (had && has && text_equal(had, has)) return;
  if (add_rows(c, from, to, out)) return;
  if (!has)
    add(out, text_format(a, "no %s", had));
  else if (!had)
    add(out, text_format(a, "%s added", has));
  else
    add(out, text_format(a, "%s for %s", has, had));
}

static void add_gap(arena *a, const catalog *c, const wall *from, const wall *to, bool inches,
                    change_list *out) {
  if (from->gap_mm == to->gap_mm || !wall_is_double(c, to)) return;
  units_system u = inches ? UNITS_US : UNITS_SI;
  text t;
  text_init(&t, a, 200);
  units_put_thickness(&t, to->gap_mm * 1e-3, u);
  if (wall_is_double(c, from)) {
    text_put(&t, " for ");
    units_put_thickness(&t, from->gap_mm * 1e-3, u);
  }
  text_put(&t, " between the rows");
  add(out, t.data);
}

void changes_list(arena *a, const catalog *c, const wall *from, const wall *to, bool inches,
                  change_list *out) {
  out->count = 0;
  if (from->frame != to->frame)
    add(out, text_format(a, "%s for %s", c->frames[to->frame].name, c->frames[from->frame].name));
  if (from->spacing_mm != to->spacing_mm)
    add(out, text_format(a, "%s for %s stud spacing", spacing_words(a, to->spacing_mm, inches),
                         spacing_words(a, from->spacing_mm, inches)));
  add_gap(a, c, from, to, inches, out);
  add_fill(a, c, from, to, out);
  for (int s = 0; s < 2; s++) add_mount(a, c, &from->mount[s], &to->mount[s], s, inches, out);
  add_faces(a, c, "on the studs of", from->sheath, to->sheath, out);
  add_faces(a, c, "on", from->side, to->side, out);
  add_faces(a, c, "between the rows,", from->inner, to->inner, out);
}

const char *changes_words(arena *a, const change_list *l) {
  text t;
  if (l->count == 0) return "no change";
  text_init(&t, a, 4000);
  for (int i = 0; i < l->count; i++) text_putf(&t, "%s%s", i ? "; " : "", l->item[i]);
  return t.data;
}

wall changes_nearer(const catalog *c, const wall *other, const wall *w) {
  step_part part[STEP_PARTS];
  wall mirrored = wall_mirrored(c, w);
  int as_is = steps_between(c, other, w, part), turned = steps_between(c, other, &mirrored, part);
  return turned < as_is ? mirrored : *w;
}
