#include "report/section.h"

#include <math.h>

#include "report/section_parts.h"

/* Sizes of the two pictures in user units. */
typedef struct layout {
  double width;
  double plan_x, plan_wide;            /* the wall begins, its length on paper */
  double most_high;                    /* of the wall on paper: thicker walls get a smaller scale */
  double structure;                    /* width of the abutting structure */
  double side_size, side_gap;          /* lettering of the rooms, from there to the wall */
  double labels_x, labels_wide, right; /* 0: no labels */
} layout;

static const layout full = {820, 66, 404, 240, 20, 13, 20, 518, 218, 812};
static const layout small = {320, 44, 264, 150, 12, 11.5, 14, 0, 0, 312};

/* Length of wall that the plan would show on its whole width: one bay of the widest spacing and
 * a piece of the next, so that samples of most walls are at one scale. */
static const double usual_length_m = 0.715;
static const double title_high = 26, dimension_high = 26, tick = 3;

/* ---- scale ---- */

/* The plan ends a third of a half bay past the middle of a bay or a stud: never in a stud, neither
 * in one of the other face where studs are staggered. */
static void choose_scale(section *s, const layout *l) {
  double half_m = wall_spacing_m(s->wall->spacing_mm) / 2, scale = l->plan_wide / usual_length_m;
  if (s->thickness_m * scale > l->most_high) scale = l->most_high / s->thickness_m;
  double halves = floor(l->plan_wide / scale / half_m - 1.0 / 3);
  s->length_m = (fmax(halves, 2) + 1.0 / 3) * half_m;
  s->plan.scale = l->plan_wide / s->length_m;
  s->plan.x = l->plan_x;
}

/* ---- dimensions ---- */

static void put_tick(section *s, double x, double y) {
  svg_line(&s->svg, x - tick, y + tick, x + tick, y - tick, "cut-tick");
}

/* From x0 to x1 at height y, with lines out from the wall's face at `face_y`. */
static void dimension_along(section *s, double x0, double x1, double face_y, double y,
                            const char *words) {
  double out = y > face_y ? 1 : -1;
  const double x[] = {x0, x1};
  for (int i = 0; i < 2; i++) {
    svg_line(&s->svg, x[i], face_y + 3 * out, x[i], y + 4 * out, "cut-thin");
    put_tick(s, x[i], y);
  }
  svg_line(&s->svg, x0, y, x1, y, "cut-thin");
  svg_text(&s->svg, (x0 + x1) / 2, y - 4, SVG_MIDDLE, "cut-dim", words);
}

static void overall_dimension(section *s, const layout *l) {
  double top = s->plan.y, bottom = top + s->thickness_m * s->plan.scale;
  double x = s->plan.x - l->structure - 14, from = s->plan.x - l->structure - 4;
  svg_line(&s->svg, from, top, x - 4, top, "cut-thin");
  svg_line(&s->svg, from, bottom, x - 4, bottom, "cut-thin");
  svg_line(&s->svg, x, top, x, bottom, "cut-thin");
  put_tick(s, x, top);
  put_tick(s, x, bottom);
  svg_text_turned(&s->svg, x - 5, (top + bottom) / 2, -90, SVG_MIDDLE, "cut-dim",
                  section_length(s, s->thickness_m));
}

static void centre_line(section *s, const section_stud *stud, double deep0, double deep1) {
  double along = (stud->from_m + stud->to_m) / 2;
  section_segment(s, &s->plan, along, deep0, along, deep1, "cut-centre");
}

/* The first stud in the field of a face; staggered walls have one line of studs a face. */
static const section_stud *field_stud(const section_stud *stud, int n, int side) {
  for (int i = 0; i < n; i++)
    if (stud[i].index == 1 && stud[i].face == side) return &stud[i];
  return NULL;
}

static double middle_x(const section *s, const section_stud *stud) {
  return section_x(&s->plan, (stud->from_m + stud->to_m) / 2, 0);
}

/* Spacing from the end of the wall to its first stud in the field; of staggered studs that of face
 * A above the wall, and below it how far those of B stand off them. */
static void stud_dimensions(section *s) {
  section_stud stud[SECTION_MAX_STUDS];
  int n = section_studs(s, 0, stud);
  double spacing_m = wall_spacing_m(s->wall->spacing_mm), top = s->plan.y,
         bottom = top + s->thickness_m * s->plan.scale;
  bool staggered = s->frame->layout == FRAME_STAGGERED;
  const section_stud *first = field_stud(stud, n, staggered ? SIDE_A : CATALOG_NONE);
  if (first == NULL) return;
  const char *words = text_format(s->report->arena, "%s on centre", section_spacing(s, spacing_m));
  if (!staggered) {
    centre_line(s, first, 0, s->thickness_m);
    dimension_along(s, s->plan.x, middle_x(s, first), bottom, bottom + dimension_high, words);
    return;
  }
  const section_stud *other = field_stud(stud, n, SIDE_B);
  words = text_format(s->report->arena, "%s, each face", words);
  centre_line(s, first, 0, first->deep_to_m);
  dimension_along(s, s->plan.x, middle_x(s, first), top, top - dimension_high / 2, words);
  if (other == NULL) return;
  centre_line(s, other, other->deep_from_m, s->thickness_m);
  dimension_along(s, s->plan.x, middle_x(s, other), bottom, bottom + dimension_high,
                  section_spacing(s, spacing_m / 2));
}

/* ---- words around the plan ---- */

/* A bar of a round length with its top at y, from x to the right, or up to x. */
static const double longest_bar = 130, scale_bar_room = 210;

static void scale_bar(section *s, double x, double y, double scale, bool up_to) {
  static const double si_m[] = {0.05, 0.1, 0.2, 0.5, 1, 2, 5};
  static const double us_in[] = {2, 4, 8, 12, 24, 48, 96};
  enum { BARS = 7 };
  const double high = 4;
  bool us = s->report->units == UNITS_US;
  double length_m = us ? us_in[0] * UNITS_M_PER_IN : si_m[0];
  for (int i = 1; i < BARS; i++) {
    double next_m = us ? us_in[i] * UNITS_M_PER_IN : si_m[i];
    if (next_m * scale <= longest_bar) length_m = next_m;
  }
  double wide = length_m * scale, left = up_to ? x - wide : x;
  svg_rect(&s->svg, left, y, wide / 2, high, "cut-bar");
  svg_rect(&s->svg, left, y, wide, high, "cut-thin");
  svg_text(&s->svg, up_to ? left - 6 : left + wide + 6, y + high + 1, up_to ? SVG_END : SVG_START,
           "cut-note", section_spacing(s, length_m));
}

static void put_side(section *s, const layout *l, int side, double baseline) {
  const char *name = side == SIDE_A ? "Side A" : "Side B",
             *room = s->report->brief->side[side].room;
  double left = s->plan.x + 2, used = svg_text_width("Side A  ", l->side_size, true);
  markup_xml *x = &s->svg.xml;
  markup_xml_open(x, "text");
  markup_xml_attribute(x, "class", "cut-side");
  markup_xml_number(x, "x", left, 2);
  markup_xml_number(x, "y", baseline, 2);
  markup_xml_inline(x, "tspan");
  markup_xml_attribute(x, "class", "cut-name");
  markup_xml_text(x, name);
  markup_xml_close(x);
  if (room != NULL && room[0] != '\0') {
    double bar = side == SIDE_B && l->labels_x > 0 ? scale_bar_room : 0;
    double width = l->plan_wide - 4 - used - bar;
    markup_xml_text(x, "  ");
    markup_xml_inline(x, "tspan");
    markup_xml_attribute(x, "class", "cut-room");
    markup_xml_text(x, svg_text_cut(s->report->arena, room, l->side_size, false, width));
    markup_xml_close(x);
  }
  markup_xml_close(x);
}

static const char *room_words(const section *s, int side) {
  enum { LONGEST = 500 }; /* units of width: some eighty letters */
  const char *room = s->report->brief->side[side].room;
  if (room == NULL || room[0] == '\0') return "";
  return text_format(s->report->arena, " (%s)",
                     svg_text_cut(s->report->arena, room, 12, false, LONGEST));
}

/* What a screen reader says. */
static const char *describe(const section *s) {
  text t;
  text_init(&t, s->report->arena, 8000);
  text_putf(&t, "Plan cut to scale. From side A%s to side B%s: ", room_words(s, SIDE_A),
            room_words(s, SIDE_B));
  for (int i = 0; i < s->count; i++) {
    const section_band *b = &s->band[i];
    text_putf(&t, "%s%s", i > 0 ? "; " : "", b->words);
    if (b->thickness[0] != '\0') text_putf(&t, ", %s", b->thickness);
  }
  text_put(&t, ".");
  if (!s->options->compact)
    text_put(&t, " Beside it a cut at the floor: boards stop short of the floor, the joint is "
                 "sealed.");
  return t.data;
}

/* ---- the whole ---- */

static void begin(section *s, const layout *l, double height, text *out) {
  const section_options *o = s->options;
  text style;
  text_init(&style, s->report->arena, 20000);
  if (o->standalone) section_style(&style, true);
  const char *title =
      text_format(s->report->arena, "Wall section, %s thick", section_length(s, s->thickness_m));
  svg_head head = {.prefix = o->prefix,
                   .title = title,
                   .desc = describe(s),
                   .css_class = o->compact ? "cut cut-small" : "cut",
                   .width = l->width,
                   .height = height,
                   .style = o->standalone ? style.data : NULL,
                   .scale = 1};
  svg_begin(&s->svg, out, &head);
  section_patterns(s);
  if (o->standalone) svg_rect(&s->svg, 0, 0, l->width, height, "cut-paper");
  if (o->caption)
    svg_text(&s->svg, 8, 18, SVG_START, "cut-title",
             svg_text_cut(s->report->arena, o->caption, 14, true, l->width - 16));
}

static double plan_gap_above(const section *s, const layout *l) {
  bool staggered = s->frame->layout == FRAME_STAGGERED;
  return l->side_size + l->side_gap + (staggered ? dimension_high : 0);
}

static double plan_gap_below(const layout *l) {
  return dimension_high + 10 + l->side_size + 8;
}

static void put_plan(section *s, const layout *l) {
  double bottom = s->plan.y + s->thickness_m * s->plan.scale;
  section_plan(s);
  overall_dimension(s, l);
  stud_dimensions(s);
  put_side(s, l, SIDE_A, s->plan.y - plan_gap_above(s, l) + l->side_size);
  put_side(s, l, SIDE_B, bottom + dimension_high + 10 + l->side_size);
}

static void draw_small(section *s, text *out) {
  const layout *l = &small;
  double top = s->options->caption ? title_high : 4;
  choose_scale(s, l);
  s->plan.y = top + plan_gap_above(s, l);
  begin(s, l, s->plan.y + s->thickness_m * s->plan.scale + plan_gap_below(l), out);
  put_plan(s, l);
  svg_end(&s->svg);
}

/* Where the lower half of the full picture stands. */
static const double floor_middle_x = 276, floor_high = 160, floor_most_wide = 190,
                    floor_most_scale = 1250, floor_least_gain = 1.25, legend_x = 590,
                    head_high = 24;

/* Larger than the plan where that has room; beside it on the left there are labels only for a mount
 * of side A. */
static void place_floor(section *s, double top) {
  double scale = fmin(floor_most_scale, floor_most_wide / s->thickness_m);
  if (scale < floor_least_gain * s->plan.scale) scale = s->plan.scale;
  bool left = s->wall->mount[SIDE_A].mount != CATALOG_NONE;
  double x = left ? floor_middle_x - s->thickness_m * scale / 2 : s->plan.x;
  s->floor = (section_place){x, top + head_high + 10 + floor_high, scale, true};
  s->floor_high_m = floor_high / scale;
}

static const char *floor_heading(const section *s) {
  double gain = s->floor.scale / s->plan.scale;
  if (gain < floor_least_gain) return "At the floor, scale as in the plan";
  return text_format(s->report->arena, "At the floor, %s times the scale of the plan",
                     text_of(s->report->arena, gain, 1));
}

static void put_floor(section *s, double top) {
  section_column left = {.left = true}, right = {.left = false};
  double x1 = s->floor.x + s->thickness_m * s->floor.scale;
  left.x = s->floor.x - 34;
  left.width = left.x - 14;
  left.knee_x = s->floor.x - 12;
  right.x = x1 + 40;
  right.width = legend_x - 24 - right.x;
  right.knee_x = x1 + 14;
  svg_text(&s->svg, 8, top + 12, SVG_START, "cut-head", floor_heading(s));
  section_floor(s);
  section_floor_labels(s, &left, &right);
  section_column_height(s, &left);
  section_column_height(s, &right);
  section_column_put(s, &left, top + head_high, s->floor.y + 20);
  section_column_put(s, &right, top + head_high, s->floor.y + 20);
  scale_bar(s, s->floor.x, s->floor.y + 30, s->floor.scale, false);
}

static void put_legend(section *s, double top) {
  svg_text(&s->svg, legend_x, top + 12, SVG_START, "cut-head", "Materials");
  section_legend_put(s, legend_x, top + head_high);
}

static void draw_full(section *s, text *out) {
  const layout *l = &full;
  choose_scale(s, l);
  double top = s->options->caption ? title_high + 4 : 6;
  double wall_high = s->thickness_m * s->plan.scale;
  double needed = plan_gap_above(s, l) + wall_high + plan_gap_below(l);
  section_column column = {.x = l->labels_x,
                           .width = l->labels_wide,
                           .aside_x = l->right,
                           .knee_x = l->plan_x + l->plan_wide + 16};
  /* The height of the column depends on its words alone, so that it can tell where the wall is. */
  section_plan_labels(s, &column);
  double high = fmax(needed, section_column_height(s, &column));
  s->plan.y = top + (high - needed) / 2 + plan_gap_above(s, l);
  column.count = 0;
  section_plan_labels(s, &column);
  section_column_height(s, &column);
  double lower = top + high + 20;
  place_floor(s, lower);
  double end = fmax(s->floor.y + 42, lower + head_high + section_legend_height(s) + 6);
  begin(s, l, end, out);
  put_plan(s, l);
  scale_bar(s, l->plan_x + l->plan_wide, s->plan.y + wall_high + dimension_high + 18, s->plan.scale,
            true);
  section_column_put(s, &column, top, top + high);
  svg_line(&s->svg, 8, lower - 8, l->right, lower - 8, "cut-rule");
  put_floor(s, lower);
  put_legend(s, lower);
  svg_end(&s->svg);
}

void section_draw(const report *r, const wall *w, const section_options *o, text *out) {
  section *s = arena_alloc(r->arena, sizeof *s);
  *s = (section){.report = r,
                 .wall = w,
                 .catalog = r->catalog,
                 .options = o,
                 .frame = &r->catalog->frames[w->frame]};
  section_bands(s);
  if (o->compact)
    draw_small(s, out);
  else
    draw_full(s, out);
}
