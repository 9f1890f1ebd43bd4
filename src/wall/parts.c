#include "wall/parts.h"

#include "wall/wall.h"

enum { MAX_MEANINGS = 12 };

static const char *list_of(arena *a, const catalog *c, const catalog_ref *refs, size_t n,
                           size_t all) {
  text t;
  text_init(&t, a, 600);
  for (size_t i = 0; i < n; i++)
    text_putf(&t, "%s%s", i == 0 ? "" : i + 1 == all ? " or " : ", ", catalog_id(c, refs[i]));
  if (all > n) text_put(&t, "...");
  return t.data;
}

part_answer part_find(arena *a, const catalog *c, const char *word, catalog_kind kind,
                      const char *expected, catalog_ref *out) {
  catalog_ref found[MAX_MEANINGS], fit[MAX_MEANINGS];
  size_t all = catalog_find(c, word, found, MAX_MEANINGS),
         kept = all < MAX_MEANINGS ? all : MAX_MEANINGS, n = 0;
  for (size_t i = 0; i < kept; i++) {
    if (kind == CATALOG_KINDS || found[i].kind == kind) fit[n++] = found[i];
  }
  if (n == 1) {
    *out = fit[0];
    return (part_answer){ERROR_NONE, NULL};
  }
  if (n > 1) {
    const char *ids = list_of(a, c, fit, n, n + (all - kept));
    return (part_answer){ERROR_WALL_UNKNOWN_ID,
                         text_format(a, "expected %s, \"%s\" may mean %s", expected, word, ids)};
  }
  if (kept > 0) {
    const char *what = catalog_kind_names[found[0].kind];
    return (part_answer){ERROR_WALL_SYNTAX,
                         text_format(a, "expected %s, found the %s \"%s\"", expected, what, word)};
  }
  const char *near = catalog_nearest(c, word);
  const char *hint = near ? text_format(a, "; the nearest id is \"%s\"", near) : "";
  return (part_answer){
      ERROR_WALL_UNKNOWN_ID,
      text_format(a, "expected %s, found unknown id \"%s\"%s", expected, word, hint)};
}

int part_spacing(double metres, const int *list, size_t count) {
  static const double same_m = 1e-6; /* a millionth of a metre: equal but for rounding */
  for (size_t i = 0; i < count; i++) {
    double off_nominal = metres - list[i] * 1e-3, off_exact = metres - wall_spacing_m(list[i]);
    bool nominal = off_nominal < same_m && off_nominal > -same_m;
    bool exact = off_exact < same_m && off_exact > -same_m;
    if (nominal || exact) return list[i];
  }
  return 0;
}

bool part_gap_ok(int mm) {
  return mm >= PART_GAP_MIN_MM && mm <= PART_GAP_MAX_MM;
}

const char *part_gap_expected(arena *a) {
  return text_format(a, "expected a gap of %d to %d mm", (int)PART_GAP_MIN_MM,
                     (int)PART_GAP_MAX_MM);
}

bool part_clip_spacing_ok(const mount *m, int mm) {
  return mm >= PART_CLIP_SPACING_MIN_MM && mm <= m->clip_spacing_mm;
}

const char *part_clip_spacing_expected(arena *a, const mount *m) {
  return text_format(a, "expected clips every %d to %d mm", (int)PART_CLIP_SPACING_MIN_MM,
                     m->clip_spacing_mm);
}
