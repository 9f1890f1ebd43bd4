#include "explain/steps.h"

#include "base/units.h"

/* ---- taking a part over ---- */

static void take_frame(const catalog *c, const wall *to, wall *w) {
  bool was_double = wall_is_double(c, w);
  w->frame = to->frame;
  if (!wall_is_double(c, w)) {
    w->gap_mm = 0;
    w->fill[1] = CATALOG_NONE;
    w->inner[SIDE_A].count = w->inner[SIDE_B].count = 0;
  } else if (!was_double) {
    w->gap_mm = to->gap_mm;
  }
}

/* As wall_short_circuited, for one side. */
static void take_mount(const wall *to, int side, wall *w) {
  face *leaf = &w->side[side], *under = &w->sheath[side];
  w->mount[side] = to->mount[side];
  if (w->mount[side].mount != CATALOG_NONE) return;
  for (int i = 0; i < under->count && leaf->count < WALL_MAX_LAYERS; i++)
    leaf->layer[leaf->count++] = under->layer[i];
  *under = (face){.count = 0};
}

void step_take(const catalog *c, const wall *to, step_part part, wall *w) {
  switch (part) {
  case STEP_FRAME:
    take_frame(c, to, w);
    break;
  case STEP_SPACING:
    w->spacing_mm = to->spacing_mm;
    break;
  case STEP_GAP:
    if (wall_is_double(c, w)) w->gap_mm = to->gap_mm;
    break;
  case STEP_FILL:
    w->fill[0] = to->fill[0];
    if (wall_is_double(c, w)) w->fill[1] = to->fill[1];
    break;
  case STEP_MOUNT_A:
  case STEP_MOUNT_B:
    take_mount(to, (int)(part - STEP_MOUNT_A), w);
    break;
  case STEP_SHEATH_A:
  case STEP_SHEATH_B:
    w->sheath[part - STEP_SHEATH_A] = to->sheath[part - STEP_SHEATH_A];
    break;
  case STEP_FACE_A:
  case STEP_FACE_B:
    w->side[part - STEP_FACE_A] = to->side[part - STEP_FACE_A];
    break;
  case STEP_INNER_A:
  case STEP_INNER_B:
    if (wall_is_double(c, w)) w->inner[part - STEP_INNER_A] = to->inner[part - STEP_INNER_A];
    break;
  case STEP_PARTS:
    break;
  }
}

int steps_between(const catalog *c, const wall *from, const wall *to, step_part out[STEP_PARTS]) {
  wall now = *from;
  int count = 0;
  for (int part = 0; part < STEP_PARTS; part++) {
    wall next = now;
    step_take(c, to, (step_part)part, &next);
    if (wall_same(&next, &now)) continue;
    out[count++] = (step_part)part;
    now = next;
  }
  return count;
}

/* ---- words ---- */

const char *step_name(step_part part) {
  static const char *const names[STEP_PARTS] = {"frame",      "stud spacing",    "gap between rows",
                                                "fill",       "mount A",         "mount B",
                                                "on studs A", "on studs B",      "side A",
                                                "side B",     "between rows, A", "between rows, B"};
  return names[part];
}

static const char *spacing_words(arena *a, int mm, bool inches) {
  if (!inches) return text_format(a, "%d mm", mm);
  return text_format(a, "%s in", text_of(a, mm * 1e-3 / UNITS_M_PER_IN, 0));
}

static const char *face_words(arena *a, const catalog *c, const face *f) {
  text t;
  if (f->count == 0) return "none";
  text_init(&t, a, 1000);
  for (int i = 0, n; i < f->count; i += n) {
    for (n = 1; i + n < f->count && f->layer[i + n] == f->layer[i];) n++;
    text_put(&t, i ? " + " : "");
    if (n > 1) text_putf(&t, "%d x ", n);
    text_put(&t, c->layers[f->layer[i]].name);
  }
  return t.data;
}

static const char *mount_words(arena *a, const catalog *c, const wall_mount *m, bool inches) {
  if (m->mount == CATALOG_NONE) return "none";
  const mount *type = &c->mounts[m->mount];
  const char *words =
      text_format(a, "%s at %s", type->name, spacing_words(a, m->spacing_mm, inches));
  if (m->clip_spacing_mm == 0) return words;
  return text_format(a, "%s, clips at %s", words, spacing_words(a, m->clip_spacing_mm, inches));
}

static const char *fill_words(arena *a, const catalog *c, const wall *w) {
  const char *first = w->fill[0] == CATALOG_NONE ? "none" : c->fills[w->fill[0]].name;
  if (!wall_is_double(c, w)) return first;
  const char *second = w->fill[1] == CATALOG_NONE ? "none" : c->fills[w->fill[1]].name;
  if (w->fill[0] == w->fill[1])
    return w->fill[0] == CATALOG_NONE ? "none" : text_format(a, "%s in both rows", first);
  return text_format(a, "%s in row A, %s in row B", first, second);
}

const char *step_words(arena *a, const catalog *c, const wall *w, step_part part, bool inches) {
  text t;
  switch (part) {
  case STEP_FRAME:
    return c->frames[w->frame].name;
  case STEP_SPACING:
    return text_format(a, "%s on centre", spacing_words(a, w->spacing_mm, inches));
  case STEP_GAP:
    text_init(&t, a, 64);
    units_put_thickness(&t, w->gap_mm * 1e-3, inches ? UNITS_US : UNITS_SI);
    return t.data;
  case STEP_FILL:
    return fill_words(a, c, w);
  case STEP_MOUNT_A:
  case STEP_MOUNT_B:
    return mount_words(a, c, &w->mount[part - STEP_MOUNT_A], inches);
  case STEP_SHEATH_A:
  case STEP_SHEATH_B:
    return face_words(a, c, &w->sheath[part - STEP_SHEATH_A]);
  case STEP_FACE_A:
  case STEP_FACE_B:
    return face_words(a, c, &w->side[part - STEP_FACE_A]);
  case STEP_INNER_A:
  case STEP_INNER_B:
    return face_words(a, c, &w->inner[part - STEP_INNER_A]);
  case STEP_PARTS:
    break;
  }
  return "";
}
