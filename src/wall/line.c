#include "wall/line.h"

#include <string.h>

#include "base/units.h"
#include "input/spoken.h"
#include "wall/parts.h"

/* Grammar and meaning: docs/formats/wall.md. The line is cut at `|`, the segment that starts with a
 * frame is found, and the segments before and after it must be face, mount, on-face from the
 * outside inwards. */

enum { LINE_MAX = 2000, SEGMENTS_MIN = 3, SEGMENTS_MAX = 7, REPEAT_MAX = 3 };

/* A stretch of the line: bytes [from, to). */
typedef struct span {
  size_t from, to;
} span;

typedef struct parser {
  arena *arena;
  diag_list *diags;
  const catalog *catalog;
  const char *line;
  bool sound;
} parser;

static void fault(parser *p, error_code code, size_t at, const char *message) {
  diag_place place = {NULL, 1, (int)at + 1, NULL};
  diag_add(p->diags, DIAG_ERROR, code, place, "%s", message);
  p->sound = false;
}

static bool blank(char ch) {
  return ch == ' ' || ch == '\t';
}

static span trim(const parser *p, span s) {
  while (s.from < s.to && blank(p->line[s.from])) s.from++;
  while (s.to > s.from && blank(p->line[s.to - 1])) s.to--;
  return s;
}

static const char *word_of(const parser *p, span s) {
  return text_copyn(p->arena, p->line + s.from, s.to - s.from);
}

/* The first `ch` in s, or s.to. */
static size_t find(const parser *p, span s, char ch) {
  size_t i = s.from;
  while (i < s.to && p->line[i] != ch) i++;
  return i;
}

/* Cuts the next piece up to `ch` off *rest; false when nothing is left. An empty piece after the
 * last `ch` counts. */
static bool next_piece(const parser *p, span *rest, char ch, span *piece) {
  if (rest->from > rest->to) return false;
  size_t end = find(p, *rest, ch);
  *piece = trim(p, (span){rest->from, end});
  rest->from = end + 1;
  return true;
}

/* ---- ids ---- */

/* The record that the words in s name, of `kind` (CATALOG_KINDS: any). Reports what it cannot find.
 */
static bool read_id(parser *p, span s, catalog_kind kind, const char *expected, catalog_ref *out) {
  if (s.from >= s.to) {
    fault(p, ERROR_WALL_SYNTAX, s.from,
          text_format(p->arena, "expected %s, found nothing", expected));
    return false;
  }
  part_answer answer = part_find(p->arena, p->catalog, word_of(p, s), kind, expected, out);
  if (answer.message) fault(p, answer.code, s.from, answer.message);
  return !answer.message;
}

/* ---- numbers ---- */

/* A whole number of mm in s: `25`, `25mm`, `1in`; -1 when it is none. */
static int read_mm(parser *p, span s, const char *expected) {
  double metres = 0;
  const char *wanted = NULL;
  const char *word = word_of(p, s);
  if (s.from < s.to && units_parse_length(word, 1e-3, &metres, &wanted) && metres > 0 &&
      metres < 10) {
    return (int)(metres * 1e3 + 0.5);
  }
  fault(p, ERROR_WALL_SYNTAX, s.from,
        text_format(p->arena, "expected %s, found \"%s\"", expected, word));
  return -1;
}

static bool all_digits(const char *s) {
  return *s != '\0' && s[strspn(s, "0123456789")] == '\0';
}

/* A spacing of the list: its nominal mm, or that in inches (`16in`, or bare 12, 16, 24 as people
 * say). */
static int read_spacing(parser *p, span s, const int *list, size_t count, const char *of) {
  double metres = 0;
  const char *wanted = NULL;
  const char *word = word_of(p, s);
  if (s.from < s.to && units_parse_length(word, 1e-3, &metres, &wanted)) {
    int nominal = part_spacing(metres, list, count);
    if (nominal == 0 && all_digits(word))
      nominal = part_spacing(metres * 1e3 * UNITS_M_PER_IN, list, count);
    if (nominal != 0) return nominal;
  }
  text t;
  text_init(&t, p->arena, 200);
  for (size_t i = 0; i < count; i++)
    text_putf(&t, "%s@%d", i == 0 ? "" : i + 1 == count ? " or " : ", ", list[i]);
  fault(p, ERROR_WALL_SYNTAX, s.from,
        text_format(p->arena, "expected a spacing of %s, %s, found \"%s\"", of, t.data, word));
  return 0;
}

/* ---- faces ---- */

/* `n*` before an item, or what people say for it ("2x ", "two layers of "): returns n and moves *s
 * behind it; 1 without, 0 after a fault. */
static int read_repeat(parser *p, span *s) {
  size_t star = find(p, *s, '*'), skip = 0;
  if (star == s->to) {
    int said = spoken_count(p->line + s->from, s->to - s->from, &skip);
    if (said == 0) return 1;
    if (said > REPEAT_MAX)
      fault(p, ERROR_WALL_SYNTAX, s->from,
            text_format(p->arena, "expected 1 to %d layers, found %d", (int)REPEAT_MAX, said));
    s->from += skip;
    return said > REPEAT_MAX ? 0 : said;
  }
  span digits = trim(p, (span){s->from, star});
  int n = 0;
  bool number = digits.from < digits.to;
  for (size_t i = digits.from; i < digits.to; i++) {
    number = number && p->line[i] >= '0' && p->line[i] <= '9';
    if (number && n < 100) n = 10 * n + (p->line[i] - '0');
  }
  if (!number || n < 1 || n > REPEAT_MAX) {
    fault(p, ERROR_WALL_SYNTAX, s->from,
          text_format(p->arena, "expected 2* or 3* before an item, found \"%s*\"",
                      word_of(p, digits)));
    n = 0;
  }
  *s = trim(p, (span){star + 1, s->to});
  return n;
}

static void read_face(parser *p, span s, face *out) {
  span rest = s, item;
  out->count = 0;
  while (next_piece(p, &rest, '+', &item)) {
    catalog_ref ref;
    int n = read_repeat(p, &item);
    size_t end = item.from;
    while (end < item.to && !strchr("@~,", p->line[end])) end++;
    if (!read_id(p, trim(p, (span){item.from, end}), CATALOG_LAYER, "a board or membrane", &ref))
      continue;
    if (end < item.to) {
      fault(p, ERROR_WALL_SYNTAX, end, "expected + or | after an item of a face");
      continue;
    }
    if (out->count + n > WALL_MAX_LAYERS) {
      fault(p, ERROR_WALL_SYNTAX, item.from,
            text_format(p->arena, "expected at most %d layers", (int)WALL_MAX_LAYERS));
      return;
    }
    while (n-- > 0) out->layer[out->count++] = ref.index;
  }
}

/* ---- mounts ---- */

static void read_mount(parser *p, span s, wall_mount *out) {
  size_t at = find(p, s, '@');
  catalog_ref ref;
  if (!read_id(p, trim(p, (span){s.from, at}), CATALOG_MOUNT, "a mount", &ref)) return;
  const mount *type = &p->catalog->mounts[ref.index];
  out->mount = ref.index;
  out->clip_spacing_mm = type->clips ? type->clip_spacing_mm : 0;
  if (at == s.to) {
    fault(p, ERROR_WALL_SYNTAX, s.to,
          text_format(p->arena, "expected the spacing of its rows, such as %s@610", type->id));
    return;
  }
  span spacing = {at + 1, s.to};
  size_t cross = type->clips ? find(p, spacing, 'x') : s.to;
  out->spacing_mm = read_spacing(p, trim(p, (span){at + 1, cross}), p->catalog->mount_spacings_mm,
                                 p->catalog->mount_spacing_count, "a mount's rows");
  if (cross == s.to) return;
  span clip = trim(p, (span){cross + 1, s.to});
  int mm = read_mm(p, clip, "the spacing of clips along their row in mm");
  if (mm >= 0 && !part_clip_spacing_ok(type, mm)) {
    fault(p, ERROR_WALL_SYNTAX, clip.from, part_clip_spacing_expected(p->arena, type));
  }
  out->clip_spacing_mm = mm;
}

/* ---- the frame ---- */

static void read_gap(parser *p, span s, const frame *f, wall *out) {
  if (f->layout != FRAME_DOUBLE) {
    fault(p, ERROR_WALL_SYNTAX, s.from - 1,
          text_format(p->arena, "expected no gap: %s has one row", f->id));
    return;
  }
  int mm = read_mm(p, trim(p, s), "the gap between the rows in mm");
  if (mm >= 0 && !part_gap_ok(mm)) fault(p, ERROR_WALL_SYNTAX, s.from, part_gap_expected(p->arena));
  out->gap_mm = mm;
}

/* `frame@spacing[~gap]` */
static void read_frame(parser *p, span s, wall *out) {
  size_t at = find(p, s, '@'), tilde = find(p, s, '~');
  catalog_ref ref;
  size_t end = at < tilde ? at : tilde;
  if (!read_id(p, trim(p, (span){s.from, end}), CATALOG_FRAME, "a frame", &ref)) return;
  const frame *f = &p->catalog->frames[ref.index];
  out->frame = ref.index;
  out->gap_mm = f->layout == FRAME_DOUBLE ? PART_GAP_DEFAULT_MM : 0;
  if (at == s.to) {
    fault(p, ERROR_WALL_SYNTAX, end,
          text_format(p->arena, "expected the spacing of its studs, such as %s@406", f->id));
  } else {
    span spacing = {at + 1, tilde > at ? tilde : s.to};
    out->spacing_mm = read_spacing(p, trim(p, spacing), p->catalog->spacings_mm,
                                   p->catalog->spacing_count, "studs");
  }
  if (tilde < s.to) read_gap(p, (span){tilde + 1, at > tilde ? at : s.to}, f, out);
}

/* Whether s starts with the bare word; *after is what follows it. */
static bool starts_with(const parser *p, span s, const char *word, span *after) {
  size_t n = strlen(word);
  if (s.to - s.from < n || strncmp(p->line + s.from, word, n) != 0) return false;
  if (s.to - s.from > n && !blank(p->line[s.from + n])) return false;
  *after = trim(p, (span){s.from + n, s.to});
  return true;
}

static void read_inner(parser *p, span item, span faces, int side, const frame *f, bool seen[2],
                       wall *out) {
  if (f && f->layout != FRAME_DOUBLE) {
    fault(p, ERROR_WALL_SYNTAX, item.from, "expected inner faces on frames of two rows only");
  } else if (seen[side] || (side == SIDE_A && seen[SIDE_B])) {
    fault(p, ERROR_WALL_SYNTAX, item.from, "expected inner-a once, then inner-b once");
  }
  seen[side] = true;
  read_face(p, faces, &out->inner[side]);
}

static void read_fill(parser *p, span item, int row, int rows, wall *out) {
  catalog_ref ref;
  bool dash = item.to - item.from == 1 && p->line[item.from] == '-';
  if (row >= rows) {
    fault(p, ERROR_WALL_SYNTAX, item.from,
          rows == 1 ? "expected one fill at most: the frame has one row"
                    : "expected two fills at most: the frame has two rows");
    return;
  }
  if (!dash && read_id(p, item, CATALOG_FILL, "a fill, or - for an empty row", &ref))
    out->fill[row] = ref.index;
}

/* `frame [, fill]... [, inner-a face] [, inner-b face]` */
static void read_core(parser *p, span s, wall *out) {
  span rest = s, item = s, faces;
  bool seen[2] = {false, false};
  int row = 0;
  next_piece(p, &rest, ',', &item);
  read_frame(p, item, out);
  const frame *f = out->frame == CATALOG_NONE ? NULL : &p->catalog->frames[out->frame];
  while (next_piece(p, &rest, ',', &item)) {
    if (starts_with(p, item, "inner-a", &faces))
      read_inner(p, item, faces, SIDE_A, f, seen, out);
    else if (starts_with(p, item, "inner-b", &faces))
      read_inner(p, item, faces, SIDE_B, f, seen, out);
    else if (seen[SIDE_A] || seen[SIDE_B])
      fault(p, ERROR_WALL_SYNTAX, item.from, "expected fills before inner faces");
    else
      read_fill(p, item, row++, f ? f->rows : 2, out);
  }
}

/* ---- the line ---- */

typedef enum segment_kind {
  SEGMENT_UNKNOWN,
  SEGMENT_FACE,
  SEGMENT_MOUNT,
  SEGMENT_ON,
  SEGMENT_FRAME
} segment_kind;

/* What a segment is, from the catalog that its first id stands in. */
static segment_kind classify(const parser *p, span s) {
  span after;
  if (starts_with(p, s, "on", &after)) return SEGMENT_ON;
  size_t star = find(p, s, '*'), end = s.from, skip = 0;
  while (end < s.to && !strchr("+,@~", p->line[end])) end++;
  if (star >= end && spoken_count(p->line + s.from, end - s.from, &skip) > 0) s.from += skip;
  span first = trim(p, (span){star < end ? star + 1 : s.from, end});
  catalog_ref ref[1];
  if (first.from >= first.to || catalog_find(p->catalog, word_of(p, first), ref, 1) == 0)
    return SEGMENT_UNKNOWN;
  if (ref[0].kind == CATALOG_FRAME) return SEGMENT_FRAME;
  if (ref[0].kind == CATALOG_MOUNT) return SEGMENT_MOUNT;
  return ref[0].kind == CATALOG_LAYER ? SEGMENT_FACE : SEGMENT_UNKNOWN;
}

/* The segments of one side, from the room inwards: seg[first], then in steps of `step`, n of them.
 */
static void read_side(parser *p, const span *seg, const segment_kind *kind, int first, int step,
                      int n, int side, wall *out) {
  int next = 0;
  read_face(p, seg[first], &out->side[side]);
  next = 1;
  if (next < n && kind[first + step] != SEGMENT_ON) {
    read_mount(p, seg[first + step], &out->mount[side]);
    next = 2;
  }
  if (next < n) {
    span s = seg[first + next * step], after = s;
    if (next < 2)
      fault(p, ERROR_WALL_SYNTAX, s.from,
            "expected a mount before \"on\": boards on the stud under a mount");
    if (!starts_with(p, s, "on", &after))
      fault(p, ERROR_WALL_SYNTAX, s.from, "expected \"on\" and a face here");
    read_face(p, after, &out->sheath[side]);
    next++;
  }
  if (next < n)
    fault(p, ERROR_WALL_SYNTAX, seg[first + next * step].from,
          "expected face, mount, on-face, then the frame");
}

static void check_side(parser *p, span face_span, int side, const wall *w) {
  if (w->side[side].count + w->sheath[side].count > WALL_MAX_LAYERS) {
    fault(p, ERROR_WALL_SYNTAX, face_span.from,
          text_format(p->arena, "expected at most %d layers a side", (int)WALL_MAX_LAYERS));
  }
}

/* Where the frame is: the segment that starts with one. Without any, the one the order leaves over
 * when all others are known; else none. */
static int frame_segment(parser *p, const span *seg, const segment_kind *kind, int n) {
  int found = -1, unknown = -1, unknowns = 0;
  for (int i = 0; i < n; i++) {
    if (kind[i] == SEGMENT_UNKNOWN) {
      unknown = i;
      unknowns++;
    }
    if (kind[i] != SEGMENT_FRAME) continue;
    if (found >= 0)
      fault(p, ERROR_WALL_SYNTAX, seg[i].from, "expected one frame, found a second");
    else
      found = i;
  }
  if (found < 0 && unknowns == 1 && unknown > 0 && unknown < n - 1) return unknown;
  return found;
}

/* Every id that no catalog has, when the order cannot be told: so that all slips show at once. */
static void report_unknown(parser *p, const span *seg, const segment_kind *kind, int n) {
  for (int i = 0; i < n; i++) {
    if (kind[i] != SEGMENT_UNKNOWN) continue;
    catalog_ref ref;
    size_t end = seg[i].from;
    while (end < seg[i].to && !strchr("+,@~", p->line[end])) end++;
    read_id(p, trim(p, (span){seg[i].from, end}), CATALOG_KINDS, "a board, mount or frame", &ref);
  }
}

static void read_line(parser *p, wall *out) {
  span seg[SEGMENTS_MAX], rest = {0, strlen(p->line)}, piece;
  segment_kind kind[SEGMENTS_MAX];
  int n = 0;
  while (next_piece(p, &rest, '|', &piece)) {
    if (n == SEGMENTS_MAX) {
      fault(p, ERROR_WALL_SYNTAX, piece.from,
            "expected 3 to 5 parts between |, 7 with a mount over boards on both sides");
      return;
    }
    seg[n++] = piece;
  }
  if (n < SEGMENTS_MIN) {
    fault(p, ERROR_WALL_SYNTAX, rest.to, "expected face | frame | face, with | between them");
    return;
  }
  for (int i = 0; i < n; i++) kind[i] = classify(p, seg[i]);
  int at = frame_segment(p, seg, kind, n);
  if (at <= 0 || at == n - 1) {
    report_unknown(p, seg, kind, n);
    if (at >= 0)
      fault(p, ERROR_WALL_SYNTAX, seg[at].from, "expected a face on each side of the frame");
    else if (p->sound)
      fault(p, ERROR_WALL_SYNTAX, 0, "expected a frame between the faces, found none");
    return;
  }
  read_side(p, seg, kind, 0, 1, at, SIDE_A, out);
  read_core(p, seg[at], out);
  read_side(p, seg, kind, n - 1, -1, n - 1 - at, SIDE_B, out);
  check_side(p, seg[0], SIDE_A, out);
  check_side(p, seg[n - 1], SIDE_B, out);
}

bool line_parse(arena *a, diag_list *d, const catalog *c, const char *line, wall *out) {
  parser p = {a, d, c, line, true};
  *out = wall_empty();
  if (strlen(line) > LINE_MAX) {
    fault(&p, ERROR_WALL_SYNTAX, LINE_MAX, "expected at most 2000 bytes in a wall line");
    return false;
  }
  read_line(&p, out);
  return p.sound;
}

bool line_parse_value(arena *a, diag_list *d, const catalog *c, const json_value *v, wall *out) {
  diag_list found;
  diag_init(&found, a);
  bool sound = line_parse(a, &found, c, v->string, out);
  for (size_t i = 0; i < found.count; i++) {
    const diag *f = &found.items[i];
    diag_add(d, f->level, f->code, json_place(a, v), "wall line, column %d: %s", f->place.column,
             f->message);
  }
  return sound;
}

/* ---- printing ---- */

static void put_face(text *t, const catalog *c, const face *f) {
  for (int i = 0; i < f->count;) {
    int run = 1;
    while (run < REPEAT_MAX && i + run < f->count && f->layer[i + run] == f->layer[i]) run++;
    if (i > 0) text_put(t, " + ");
    if (run > 1) text_putf(t, "%d*", run);
    text_put(t, c->layers[f->layer[i]].id);
    i += run;
  }
}

static void put_mount(text *t, const catalog *c, const wall_mount *m) {
  const mount *type = &c->mounts[m->mount];
  text_putf(t, "%s@%d", type->id, m->spacing_mm);
  if (type->clips && m->clip_spacing_mm != type->clip_spacing_mm)
    text_putf(t, "x%d", m->clip_spacing_mm);
}

static void put_core(text *t, const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  text_putf(t, "%s@%d", f->id, w->spacing_mm);
  if (f->layout == FRAME_DOUBLE && w->gap_mm != PART_GAP_DEFAULT_MM) text_putf(t, "~%d", w->gap_mm);
  int last = f->rows;
  while (last > 0 && w->fill[last - 1] == CATALOG_NONE) last--;
  for (int r = 0; r < last; r++)
    text_putf(t, ", %s", w->fill[r] == CATALOG_NONE ? "-" : c->fills[w->fill[r]].id);
  for (int s = 0; s < 2; s++) {
    if (w->inner[s].count == 0) continue;
    text_put(t, s == SIDE_A ? ", inner-a " : ", inner-b ");
    put_face(t, c, &w->inner[s]);
  }
}

static void put_sheath(text *t, const catalog *c, const face *f) {
  text_put(t, "on ");
  put_face(t, c, f);
}

const char *line_print(arena *a, const catalog *c, const wall *w) {
  text t;
  text_init(&t, a, LINE_MAX);
  put_face(&t, c, &w->side[SIDE_A]);
  text_put(&t, " | ");
  if (w->mount[SIDE_A].mount != CATALOG_NONE) {
    put_mount(&t, c, &w->mount[SIDE_A]);
    text_put(&t, " | ");
  }
  if (w->sheath[SIDE_A].count > 0) {
    put_sheath(&t, c, &w->sheath[SIDE_A]);
    text_put(&t, " | ");
  }
  put_core(&t, c, w);
  text_put(&t, " | ");
  if (w->sheath[SIDE_B].count > 0) {
    put_sheath(&t, c, &w->sheath[SIDE_B]);
    text_put(&t, " | ");
  }
  if (w->mount[SIDE_B].mount != CATALOG_NONE) {
    put_mount(&t, c, &w->mount[SIDE_B]);
    text_put(&t, " | ");
  }
  put_face(&t, c, &w->side[SIDE_B]);
  return t.data;
}
