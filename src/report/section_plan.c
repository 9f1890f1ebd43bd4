/* The plan cut: boards, rows, rails, what stands at the end. */
#include <math.h>

#include "report/section_parts.h"

/* ---- studs ---- */

/* Lips of a C: 3/16 in on flanges of 1-1/4 in, 1/2 in on wider ones (from memory: the usual drywall
 * and structural sections). */
static double lip_m(const frame *f) {
  const double narrow_m = 0.035;
  return UNITS_M_PER_IN * (f->flange_m < narrow_m ? 3.0 / 16 : 1.0 / 2);
}

/* Half the line that stands for the sheet stays inside the section. */
static void put_c_shape(section *s, const section_stud *stud) {
  double in = 1 / s->plan.scale, lip = lip_m(s->frame);
  double a0 = stud->from_m + in, a1 = stud->to_m - in, d0 = stud->deep_from_m + in,
         d1 = stud->deep_to_m - in;
  const double points[] = {a1, d0 + lip, a1, d0, a0, d0, a0, d1, a1, d1, a1, d1 - lip};
  section_outline(s, &s->plan, points, 6, "cut-steel");
}

static void put_studs(section *s, int row) {
  section_stud stud[SECTION_MAX_STUDS];
  int n = section_studs(s, row, stud);
  svg_group(&s->svg, "cut-studs");
  for (int i = 0; i < n; i++) {
    if (s->frame->material == FRAME_STEEL)
      put_c_shape(s, &stud[i]);
    else
      section_wood(s, &s->plan, stud[i].from_m, stud[i].to_m, stud[i].deep_from_m,
                   stud[i].deep_to_m);
  }
  svg_group_end(&s->svg);
}

/* ---- mounts ---- */

typedef struct rail {
  const mount *type;
  double leaf_m, stud_m; /* depth of the back of the leaf, of what the mount is fixed to */
  double sign;           /* +1: from the leaf to the stud is deeper */
} rail;

static rail rail_of(const section *s, const section_band *b) {
  bool a = b->side == SIDE_A;
  return (rail){&s->catalog->mounts[b->record], a ? b->from_m : b->to_m, a ? b->to_m : b->from_m,
                a ? 1 : -1};
}

/* A resilient channel from above: one flange on the board, the slotted leg, one on the stud. */
static void put_channel(section *s, const rail *r) {
  double middle = (r->leaf_m + r->stud_m) / 2;
  section_box(s, &s->plan, SECTION_JOINT_M, s->length_m, r->leaf_m, r->stud_m, "cut-rail");
  section_segment(s, &s->plan, SECTION_JOINT_M, middle, s->length_m, middle, "cut-slot");
}

static double hat_m(const mount *type) {
  return fmin(type->depth_m, UNITS_M_PER_IN * 7 / 8); /* furring channel of 7/8 in */
}

/* A clip stands on studs, as often as the wall has it along the row. */
static void put_clip(section *s, const rail *r, double middle_m, double hat_deep_m) {
  const double half_m = 0.022; /* half the length of the clip's foot, from memory */
  section_box(s, &s->plan, middle_m - half_m, middle_m + half_m, hat_deep_m, r->stud_m,
              "cut-rubber");
  const double foot[] = {middle_m - 1.6 * half_m, r->stud_m - r->sign / s->plan.scale,
                         middle_m + 1.6 * half_m, r->stud_m - r->sign / s->plan.scale};
  section_outline(s, &s->plan, foot, 2, "cut-steel");
}

static void put_furring(section *s, const rail *r, const wall_mount *m, int row) {
  section_stud stud[SECTION_MAX_STUDS];
  int n = section_studs(s, row, stud);
  int each = (int)lround((double)m->clip_spacing_mm / s->wall->spacing_mm);
  double hat_deep_m = r->leaf_m + r->sign * hat_m(r->type), crown_m = 0.5 * hat_m(r->type);
  section_box(s, &s->plan, SECTION_JOINT_M, s->length_m, r->leaf_m, hat_deep_m, "cut-rail");
  section_segment(s, &s->plan, SECTION_JOINT_M, r->leaf_m + r->sign * crown_m, s->length_m,
                  r->leaf_m + r->sign * crown_m, "cut-thin");
  int side = r->sign > 0 ? SIDE_A : SIDE_B;
  for (int i = 0; i < n; i++) {
    bool carries = stud[i].face == CATALOG_NONE || stud[i].face == side;
    if (carries && stud[i].index > 0 && (each < 2 || stud[i].index % each == 1))
      put_clip(s, r, (stud[i].from_m + stud[i].to_m) / 2, hat_deep_m);
  }
}

static void put_mount(section *s, const section_band *b) {
  rail r = rail_of(s, b);
  svg_group(&s->svg, "cut-mount");
  if (r.type->clips)
    put_furring(s, &r, &s->wall->mount[b->side], b->side == SIDE_A ? 0 : s->frame->rows - 1);
  else
    put_channel(s, &r);
  svg_group_end(&s->svg);
}

/* ---- the end and the whole ---- */

static void put_structure(section *s) {
  double wide = s->options->compact ? 12 : 20, beyond = s->options->compact ? 8 : 14;
  double y0 = s->plan.y - beyond, y1 = s->plan.y + s->thickness_m * s->plan.scale + beyond;
  svg_fill(&s->svg, "hatch");
  svg_rect(&s->svg, s->plan.x - wide, y0, wide, y1 - y0, "cut-structure");
  svg_line(&s->svg, s->plan.x, y0, s->plan.x, y1, "cut-face");
}

static void put_band(section *s, const section_band *b) {
  switch (b->kind) {
  case VIEW_LAYERS:
    section_layers(s, &s->plan, b, SECTION_JOINT_M, s->length_m);
    break;
  case VIEW_MOUNT:
    put_mount(s, b);
    break;
  case VIEW_FILL:
    section_fibre(s, &s->plan, b, 0, s->length_m);
    put_studs(s, b->side);
    break;
  case VIEW_ROW: /* its studs stand in its fill */
  case VIEW_GAP:
    break;
  }
}

void section_plan(section *s) {
  svg_group(&s->svg, "cut-plan");
  put_structure(s);
  for (int i = 0; i < s->count; i++) put_band(s, &s->band[i]);
  if (s->count > 0) {
    section_sealant(s, &s->plan, &s->band[0]);
    section_sealant(s, &s->plan, &s->band[s->count - 1]);
  }
  section_segment(s, &s->plan, SECTION_JOINT_M, 0, s->length_m, 0, "cut-face");
  section_segment(s, &s->plan, SECTION_JOINT_M, s->thickness_m, s->length_m, s->thickness_m,
                  "cut-face");
  section_break(s, &s->plan, s->length_m, s->options->compact ? 6 : 10);
  svg_group_end(&s->svg);
}
