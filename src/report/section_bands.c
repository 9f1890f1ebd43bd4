/* The parts of a wall, in order and in place, for drawing. */
#include <math.h>
#include <string.h>

#include "report/section_parts.h"

const char *section_length(const section *s, double metres) {
  text t;
  text_init(&t, s->report->arena, 64);
  units_put_thickness(&t, metres, s->report->units);
  return t.data;
}

const char *section_spacing(const section *s, double metres) {
  static const double mm_per_m = 1000;
  if (s->report->units == UNITS_US) return section_length(s, metres);
  return text_format(s->report->arena, "%s mm", text_of(s->report->arena, metres * mm_per_m, 0));
}

/* "B" at the end of "side B", "mount B", "inner B". */
static int side_of(const char *where) {
  size_t n = strlen(where);
  return n > 0 && where[n - 1] == 'B' ? SIDE_B : SIDE_A;
}

static const char *words_of(const section *s, const view_part *p, int side) {
  arena *a = s->report->arena;
  const char *row = side == SIDE_A ? "row A" : "row B";
  if (p->kind == VIEW_FILL && p->record == CATALOG_NONE) return "bays left empty";
  if (p->kind == VIEW_GAP) return "clear gap between the rows";
  if (p->kind == VIEW_ROW && wall_is_double(s->catalog, s->wall))
    return text_format(a, "%s: %s", row, p->what);
  if (text_starts(p->where, "on studs")) return text_format(a, "on the studs: %s", p->what);
  if (text_starts(p->where, "inner")) return text_format(a, "inner face, %s: %s", row, p->what);
  return p->what;
}

/* A batt stands against the leaf of its row's side: against A in a frame of one row. It is as thick
 * as it is made, or as the cavity that presses it. */
static void set_fill(const section *s, section_band *b, double row_m) {
  double depth_m = s->frame->row_depth_m, thick_m = depth_m;
  if (b->record != CATALOG_NONE) thick_m = fmin(depth_m, s->catalog->fills[b->record].thickness_m);
  b->from_m = b->side == SIDE_A ? row_m : row_m + depth_m - thick_m;
  b->to_m = b->from_m + thick_m;
}

/* Inner faces stand in the gap: what they leave of it is drawn and told. */
static void set_gap(const section *s, section_band *b, double clear_m) {
  b->to_m = b->from_m + clear_m;
  b->thickness = section_length(s, clear_m);
}

static const char *thickness_of(const section *s, const view_part *p) {
  if (!(p->thickness_m > 0)) return "";
  const char *said = section_length(s, p->thickness_m);
  return text_equal(said, "0 in") ? "" : said; /* a coat of compound is under a sixteenth */
}

void section_bands(section *s) {
  view_parts parts;
  view_parts_of(s->report, s->wall, &parts);
  double at_m = 0, inner_m = face_thickness_m(s->catalog, &s->wall->inner[SIDE_A]) +
                             face_thickness_m(s->catalog, &s->wall->inner[SIDE_B]);
  int row = -1;
  for (int i = 0; i < parts.count; i++) {
    const view_part *p = &parts.part[i];
    section_band *b = &s->band[s->count++];
    *b = (section_band){.kind = p->kind,
                        .record = p->record,
                        .copies = p->copies,
                        .side = side_of(p->where),
                        .leaf = text_starts(p->where, "side"),
                        .words = words_of(s, p, side_of(p->where)),
                        .thickness = thickness_of(s, p)};
    if (p->kind == VIEW_ROW) row++;
    if (p->kind == VIEW_ROW || p->kind == VIEW_FILL) b->side = row;
    b->from_m = at_m;
    b->to_m = at_m + p->thickness_m;
    if (p->kind == VIEW_GAP) set_gap(s, b, p->thickness_m - inner_m);
    if (p->kind == VIEW_FILL) set_fill(s, b, at_m - s->frame->row_depth_m);
    if (p->kind != VIEW_FILL) at_m = b->to_m;
  }
  s->thickness_m = at_m;
}

/* ---- studs ---- */

static double stud_width_m(const frame *f) {
  return f->material == FRAME_STEEL ? f->flange_m : f->stud_width_m;
}

static void add_stud(const section *s, section_stud *out, int *n, section_stud stud,
                     double middle_m) {
  double half_m = stud_width_m(s->frame) / 2;
  stud.from_m = middle_m - half_m;
  stud.to_m = middle_m + half_m;
  if (stud.to_m <= s->length_m && *n < SECTION_MAX_STUDS) out[(*n)++] = stud;
}

/* Studs of one line: at the abutting structure, then by the spacing from it; `offset_m` for the
 * second line of staggered studs, whose first stands beside that of the first line. */
static void add_line(const section *s, section_stud *out, int *n, section_stud stud,
                     double offset_m) {
  double width_m = stud_width_m(s->frame), spacing_m = wall_spacing_m(s->wall->spacing_mm);
  stud.index = 0;
  add_stud(s, out, n, stud, offset_m > 0 ? 1.5 * width_m : 0.5 * width_m);
  for (int i = 1; i * spacing_m - offset_m < s->length_m; i++) {
    stud.index = i;
    add_stud(s, out, n, stud, i * spacing_m - offset_m);
  }
}

int section_studs(const section *s, int row, section_stud out[SECTION_MAX_STUDS]) {
  const frame *f = s->frame;
  int n = 0;
  section_stud stud = {.face = CATALOG_NONE};
  for (int i = 0; i < s->count; i++)
    if (s->band[i].kind == VIEW_ROW && s->band[i].side == row) stud.deep_from_m = s->band[i].from_m;
  stud.deep_to_m = stud.deep_from_m + f->row_depth_m;
  if (f->layout != FRAME_STAGGERED) {
    add_line(s, out, &n, stud, 0);
    return n;
  }
  section_stud a = stud, b = stud;
  a.face = SIDE_A;
  a.deep_to_m = a.deep_from_m + f->stud_depth_m;
  b.face = SIDE_B;
  b.deep_from_m = b.deep_to_m - f->stud_depth_m;
  add_line(s, out, &n, a, 0);
  add_line(s, out, &n, b, wall_spacing_m(s->wall->spacing_mm) / 2);
  return n;
}
