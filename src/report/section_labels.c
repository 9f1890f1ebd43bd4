/* Labels of a wall section: words in a column, leaders that do not cross. */
#include <math.h>
#include <string.h>

#include "report/labels.h"
#include "report/section_parts.h"

static const double letter = 12, line_high = 14, ascent = 10.5, first_middle = 6.5, between = 5;

void section_label_add(section_column *c, section_label label) {
  if (c->count < VIEW_MAX_PARTS) c->label[c->count++] = label;
}

/* Where a line may break: at a blank, but not between a number and its unit. */
static size_t word_end(const char *words, size_t at) {
  for (size_t end = at;; end++) {
    end += strcspn(words + end, " ");
    bool number = end > at && words[end - 1] >= '0' && words[end - 1] <= '9';
    if (words[end] == '\0' || !number) return end;
  }
}

/* How many bytes of `words` make the next line: whole words while they fit, at least one. */
static size_t line_of(section *s, const char *words, double width) {
  size_t kept = 0;
  for (size_t at = 0; words[at] != '\0';) {
    size_t end = word_end(words, at);
    const char *so_far = text_copyn(s->report->arena, words, end);
    if (kept > 0 && svg_text_width(so_far, letter, false) > width) break;
    kept = end;
    at = end + strspn(words + end, " ");
  }
  return kept;
}

static void break_lines(section *s, section_label *l, double width) {
  arena *a = s->report->arena;
  const char *rest = l->words;
  l->lines = 0;
  while (*rest != '\0' && l->lines < SECTION_MAX_LINES) {
    size_t n = l->lines + 1 < SECTION_MAX_LINES ? line_of(s, rest, width) : strlen(rest);
    l->line[l->lines++] = svg_text_cut(a, text_copyn(a, rest, n), letter, false, width);
    rest += n;
    rest += strspn(rest, " ");
  }
}

static void sort_labels(section_column *c) {
  for (int i = 1; i < c->count; i++) {
    section_label moved = c->label[i];
    int at = i;
    for (; at > 0 && c->label[at - 1].y > moved.y; at--) c->label[at] = c->label[at - 1];
    c->label[at] = moved;
  }
}

static int slots_of(const section_column *c, label_slot slot[VIEW_MAX_PARTS]) {
  for (int i = 0; i < c->count; i++) {
    const section_label *l = &c->label[i];
    double height = line_high * l->lines;
    double middle = (l->y + l->to_y) / 2;
    slot[i] = (label_slot){middle - first_middle + height / 2, height, 0};
  }
  return c->count;
}

double section_column_height(section *s, section_column *c) {
  label_slot slot[VIEW_MAX_PARTS];
  for (int i = 0; i < c->count; i++) break_lines(s, &c->label[i], c->width);
  sort_labels(c);
  return labels_height(slot, slots_of(c, slot), between);
}

static void put_leader(section *s, const section_column *c, const section_label *l, double y) {
  double middle = (l->y + l->to_y) / 2, end = c->x + (c->left ? 6 : -6);
  const double level[] = {l->x, middle, c->knee_x, middle};
  const double path[] = {l->x, middle, c->knee_x, middle, end + (c->left ? 4 : -4), y, end, y};
  svg_polyline(&s->svg, level, 2, "cut-halo");
  svg_polyline(&s->svg, path, 4, "cut-leader");
  if (l->dots > 1) svg_line(&s->svg, l->x, l->y, l->x, l->to_y, "cut-leader");
  for (int k = 0; k < l->dots; k++) {
    double share = l->dots > 1 ? (double)k / (l->dots - 1) : 0;
    svg_circle(&s->svg, l->x, l->y + share * (l->to_y - l->y), 1.8, "cut-dot");
  }
}

static void put_words(section *s, const section_column *c, const section_label *l, double top) {
  for (int k = 0; k < l->lines; k++)
    svg_text(&s->svg, c->x, top + ascent + k * line_high, c->left ? SVG_END : SVG_START, NULL,
             l->line[k]);
  if (l->aside[0] != '\0')
    svg_text(&s->svg, c->aside_x, top + ascent, SVG_END, "cut-soft", l->aside);
}

void section_column_put(section *s, section_column *c, double first, double last) {
  label_slot slot[VIEW_MAX_PARTS];
  int n = slots_of(c, slot);
  labels_place(slot, n, between, first, last);
  for (int i = 0; i < n; i++) put_leader(s, c, &c->label[i], slot[i].top + first_middle);
  for (int i = 0; i < n; i++) put_words(s, c, &c->label[i], slot[i].top);
}

/* ---- what the plan names ---- */

static double plan_y(const section *s, double deep_m) {
  return section_y(&s->plan, 0, deep_m);
}

static section_label label_of(const section_band *b, double x, double y) {
  return (section_label){
      .x = x, .y = y, .to_y = y, .dots = 1, .words = b->words, .aside = b->thickness};
}

/* Of the row's studs the last of the plan, at a quarter of its depth; staggered: of A's. */
static section_label stud_label(const section *s, const section_band *b) {
  section_stud stud[SECTION_MAX_STUDS];
  int n = section_studs(s, b->side, stud), last = 0;
  for (int i = 0; i < n; i++)
    if (stud[i].face != SIDE_B && stud[i].from_m > stud[last].from_m) last = i;
  double share = s->frame->material == FRAME_STEEL ? 0 : 0.5; /* the web of a C, the middle */
  double along = stud[last].from_m + share * (stud[last].to_m - stud[last].from_m);
  if (s->frame->material == FRAME_STEEL) along += 1 / s->plan.scale;
  double deep = stud[last].deep_from_m + 0.25 * (stud[last].deep_to_m - stud[last].deep_from_m);
  return label_of(b, section_x(&s->plan, along, deep), plan_y(s, deep));
}

static section_label band_label(const section *s, const section_band *b, double edge) {
  double step = (b->to_m - b->from_m) / b->copies;
  section_label l = label_of(b, edge - 9, plan_y(s, b->from_m + step / 2));
  l.dots = b->copies;
  l.to_y = plan_y(s, b->to_m - step / 2);
  return l;
}

/* In the fibre, away from the level of the stud's leader. */
static section_label fill_label(const section *s, const section_band *b, double stud_y,
                                double edge) {
  const double apart = 8;
  double y = plan_y(s, b->from_m + 0.7 * (b->to_m - b->from_m));
  if (fabs(y - stud_y) < apart) y = plan_y(s, b->from_m + 0.25 * (b->to_m - b->from_m));
  if (fabs(y - stud_y) < apart) y = stud_y + apart;
  return label_of(b, edge - 9, y);
}

void section_plan_labels(section *s, section_column *c) {
  double edge = section_x(&s->plan, s->length_m, 0), stud_y = 0;
  for (int i = 0; i < s->count; i++) {
    const section_band *b = &s->band[i];
    section_label l = b->kind == VIEW_ROW    ? stud_label(s, b)
                      : b->kind == VIEW_FILL ? fill_label(s, b, stud_y, edge)
                                             : band_label(s, b, edge);
    if (b->kind == VIEW_ROW) stud_y = l.y;
    section_label_add(c, l);
  }
}

/* ---- what the cut at the floor names ---- */

static section_label floor_label(const section *s, double along_m, double deep_m,
                                 const char *words) {
  double y = section_y(&s->floor, along_m, deep_m);
  return (section_label){.x = section_x(&s->floor, along_m, deep_m),
                         .y = y,
                         .to_y = y,
                         .dots = 1,
                         .words = words,
                         .aside = ""};
}

void section_floor_labels(section *s, section_column *left, section_column *right) {
  const double deep_m = s->thickness_m, bead_m = 0.004;
  const section_band *last_row = NULL;
  for (int i = 0; i < s->count; i++) {
    const section_band *b = &s->band[i];
    if (b->kind == VIEW_ROW) last_row = b;
    if (b->kind != VIEW_MOUNT) continue;
    bool clips = s->catalog->mounts[b->record].clips;
    bool us = s->report->units == UNITS_US;
    double along_m = section_first_rail_m(&s->catalog->mounts[b->record]);
    const char *words = text_format(s->report->arena, "first %s, within %s of the floor",
                                    clips ? "rail, on its clip" : "channel",
                                    clips ? (us ? "3 in" : "75 mm") : (us ? "2 in" : "50 mm"));
    /* On the leg of a channel, the middle of a clip. */
    section_label l =
        floor_label(s, along_m - (clips ? 0 : 0.006), (b->from_m + b->to_m) / 2, words);
    section_label_add(b->side == SIDE_A ? left : right, l);
  }
  bool steel = s->frame->material == FRAME_STEEL;
  section_label_add(right, floor_label(s, SECTION_JOINT_M / 2, deep_m - bead_m,
                                       "acoustical sealant under each face, all round"));
  if (last_row && steel) /* on the leg at the leaf of B */
    section_label_add(right,
                      floor_label(s, 0.025, last_row->to_m - 1 / s->floor.scale, "runner track"));
  if (last_row && !steel)
    section_label_add(right,
                      floor_label(s, 0.6 * s->frame->stud_width_m,
                                  0.3 * last_row->from_m + 0.7 * last_row->to_m, "bottom plate"));
  section_label_add(right, (section_label){.x = section_x(&s->floor, 0, deep_m) + 8,
                                           .y = s->floor.y + 8,
                                           .to_y = s->floor.y + 8,
                                           .dots = 1,
                                           .words = "floor, by others",
                                           .aside = ""});
}
