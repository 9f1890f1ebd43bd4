/* The cut at the floor: what a plan cannot show, the shape of rails and the joint under the boards.
 */
#include <math.h>

#include "report/section_parts.h"

/* Sizes of common sections, from memory: legs of a track 1-1/4 in; a resilient channel's flanges on
 * stud and board; a hat's crown, feet and slope. */
static const double track_leg_m = 0.0318, channel_foot_m = 0.018, channel_leg_m = 0.012,
                    channel_flange_m = 0.034, hat_crown_m = 0.032, hat_slope_m = 0.008,
                    hat_foot_m = 0.013;

/* Within 2 in of the floor for channels, 3 in for clips (common practice, no source). */
double section_first_rail_m(const mount *type) {
  return type->clips ? 0.075 : 0.05;
}

static double clear(const section *s) {
  return 1 / s->floor.scale; /* half the line that stands for the sheet */
}

static void put_track(section *s, double deep0, double deep1) {
  double in = clear(s);
  const double points[] = {track_leg_m, deep0 + in, in,          deep0 + in,
                           in,          deep1 - in, track_leg_m, deep1 - in};
  section_outline(s, &s->floor, points, 4, "cut-steel");
}

/* Plate or track, the fill above it. */
static void put_row(section *s, const section_band *row, const section_band *batt) {
  bool steel = s->frame->material == FRAME_STEEL;
  double plate_m = steel ? 0 : s->frame->stud_width_m;
  section_fibre(s, &s->floor, batt, steel ? 2 * clear(s) : plate_m, s->floor_high_m);
  if (steel)
    put_track(s, row->from_m, row->to_m);
  else
    section_wood(s, &s->floor, 0, plate_m, row->from_m, row->to_m);
}

/* Single leg: the foot on the stud below, the flange on the board above. */
static void put_channel(section *s, double at_m, double stud_m, double leaf_m, double sign) {
  double in = sign * clear(s), leaf = leaf_m + in, stud = stud_m - in;
  const double points[] = {at_m - channel_leg_m - channel_foot_m,
                           stud,
                           at_m - channel_leg_m,
                           stud,
                           at_m,
                           leaf,
                           at_m + channel_flange_m,
                           leaf};
  section_outline(s, &s->floor, points, 4, "cut-steel");
}

/* The hat's crown lies on the board, its feet are held by the clip. */
static void put_clip(section *s, double at_m, double stud_m, double leaf_m, double sign) {
  double in = sign * clear(s), base = leaf_m + sign * UNITS_M_PER_IN * 7 / 8;
  double crown = hat_crown_m / 2, side = crown + hat_slope_m, foot = side + hat_foot_m;
  if (sign * (stud_m - base) > 0) {
    section_box(s, &s->floor, at_m - 0.6 * side, at_m + 0.6 * side, base, stud_m, "cut-rubber");
    const double bracket[] = {at_m - foot,       base + in,   at_m - 0.6 * side, stud_m - in,
                              at_m + 0.6 * side, stud_m - in, at_m + foot,       base + in};
    section_outline(s, &s->floor, bracket, 4, "cut-steel");
  }
  const double hat[] = {at_m - foot,  base - in,   at_m - side,  base - in,
                        at_m - crown, leaf_m + in, at_m + crown, leaf_m + in,
                        at_m + side,  base - in,   at_m + foot,  base - in};
  section_outline(s, &s->floor, hat, 6, "cut-steel");
}

static void put_mount(section *s, const section_band *b) {
  const mount *type = &s->catalog->mounts[b->record];
  double spacing_m = wall_spacing_m(s->wall->mount[b->side].spacing_mm), half_m = 0.04;
  bool a = b->side == SIDE_A;
  double leaf_m = a ? b->from_m : b->to_m, stud_m = a ? b->to_m : b->from_m, sign = a ? 1 : -1;
  svg_group(&s->svg, "cut-mount");
  for (double at_m = section_first_rail_m(type); at_m + half_m < s->floor_high_m;
       at_m += spacing_m) {
    if (type->clips)
      put_clip(s, at_m, stud_m, leaf_m, sign);
    else
      put_channel(s, at_m, stud_m, leaf_m, sign);
  }
  svg_group_end(&s->svg);
}

static void put_floor(section *s) {
  const double deep = 16, beyond = 16;
  double x0 = s->floor.x - beyond, x1 = s->floor.x + s->thickness_m * s->floor.scale + beyond;
  svg_fill(&s->svg, "hatch");
  svg_rect(&s->svg, x0, s->floor.y, x1 - x0, deep, "cut-structure");
  svg_line(&s->svg, x0, s->floor.y, x1, s->floor.y, "cut-face");
}

void section_floor(section *s) {
  const section_place *p = &s->floor;
  svg_group(&s->svg, "cut-floor");
  put_floor(s);
  for (int i = 0; i < s->count; i++) {
    const section_band *b = &s->band[i];
    if (b->kind == VIEW_LAYERS) section_layers(s, p, b, SECTION_JOINT_M, s->floor_high_m);
    if (b->kind == VIEW_MOUNT) put_mount(s, b);
    if (b->kind == VIEW_ROW && i + 1 < s->count) put_row(s, b, &s->band[i + 1]);
  }
  if (s->count > 0) {
    section_sealant(s, p, &s->band[0]);
    section_sealant(s, p, &s->band[s->count - 1]);
  }
  section_segment(s, p, SECTION_JOINT_M, 0, s->floor_high_m, 0, "cut-face");
  section_segment(s, p, SECTION_JOINT_M, s->thickness_m, s->floor_high_m, s->thickness_m,
                  "cut-face");
  section_break(s, p, s->floor_high_m, 8);
  svg_group_end(&s->svg);
}
