/* How materials are drawn. */
#include <math.h>

#include "report/section_parts.h"

double section_x(const section_place *p, double along_m, double deep_m) {
  return p->x + p->scale * (p->upright ? deep_m : along_m);
}

double section_y(const section_place *p, double along_m, double deep_m) {
  return p->y + p->scale * (p->upright ? -along_m : deep_m);
}

void section_box(section *s, const section_place *p, double along0, double along1, double deep0,
                 double deep1, const char *css_class) {
  double x0 = section_x(p, along0, deep0), x1 = section_x(p, along1, deep1);
  double y0 = section_y(p, along0, deep0), y1 = section_y(p, along1, deep1);
  svg_rect(&s->svg, fmin(x0, x1), fmin(y0, y1), fabs(x1 - x0), fabs(y1 - y0), css_class);
}

void section_segment(section *s, const section_place *p, double along0, double deep0, double along1,
                     double deep1, const char *css_class) {
  svg_line(&s->svg, section_x(p, along0, deep0), section_y(p, along0, deep0),
           section_x(p, along1, deep1), section_y(p, along1, deep1), css_class);
}

void section_outline(section *s, const section_place *p, const double *points, int n,
                     const char *css_class) {
  enum { MOST = 16 };
  double xy[2 * MOST];
  if (n > MOST) n = MOST;
  for (int i = 0; i < n; i++) {
    xy[2 * i] = section_x(p, points[2 * i], points[2 * i + 1]);
    xy[2 * i + 1] = section_y(p, points[2 * i], points[2 * i + 1]);
  }
  svg_polyline(&s->svg, xy, n, css_class);
}

void section_wood(section *s, const section_place *p, double along0, double along1, double deep0,
                  double deep1) {
  section_box(s, p, along0, along1, deep0, deep1, "cut-wood");
  section_segment(s, p, along0, deep0, along1, deep1, "cut-cross");
  section_segment(s, p, along0, deep1, along1, deep0, "cut-cross");
}

void section_break(section *s, const section_place *p, double along_m, double beyond) {
  double reach = beyond / p->scale, kink = 4 / p->scale, middle = s->thickness_m / 2;
  const double points[] = {along_m,           -reach,         along_m,
                           middle - 2 * kink, along_m + kink, middle - kink,
                           along_m - kink,    middle + kink,  along_m,
                           middle + 2 * kink, along_m,        s->thickness_m + reach};
  section_outline(s, p, points, 6, "cut-break");
}

/* ---- patterns ---- */

static void dots(section *s, const double *xy, int n, double radius, const char *css_class) {
  for (int i = 0; i < n; i++) svg_circle(&s->svg, xy[2 * i], xy[2 * i + 1], radius, css_class);
}

/* Strokes of a tile: x, y, dx, dy. */
static void strokes(section *s, const double *stroke, int n, const char *css_class) {
  svg_path(&s->svg, css_class);
  for (int i = 0; i < n; i++) {
    const double *at = stroke + 4 * (size_t)i;
    svg_move(&s->svg, at[0], at[1]);
    svg_to(&s->svg, at[0] + at[2], at[1] + at[3]);
  }
  svg_path_end(&s->svg);
}

static void tile(section *s, const char *name, double side, const char *ground) {
  svg_pattern(&s->svg, name, side, side);
  svg_rect(&s->svg, 0, 0, side, side, ground);
}

/* Scattered by hand so that no rows show. */
static const double stipple[] = {1.3, 1.9, 5.2, 0.9, 9.1, 2.4, 3.1, 4.6,  7.3, 5.3,  10.9, 6.2,
                                 1.0, 8.0, 5.0, 8.3, 8.8, 9.3, 3.0, 11.0, 6.9, 11.6, 11.2, 10.4};

static void define_gypsum(section *s) {
  tile(s, "gypsum", 12, "cut-gypsum");
  dots(s, stipple, 12, 0.5, "cut-stipple");
  svg_pattern_end(&s->svg);
}

static void define_cement(section *s) {
  static const double coarse[] = {2, 2, 8, 4, 4, 9},
                      grit[] = {5, 2, 1.6, 1, 1, 6, 1.4, -1.2, 8, 8, 1.8, 0.4};
  tile(s, "cement", 10, "cut-cement");
  dots(s, coarse, 3, 0.9, "cut-stipple");
  strokes(s, grit, 3, "cut-hatch");
  svg_pattern_end(&s->svg);
}

static void define_panel(section *s) {
  static const double strands[] = {0.5, 1.5, 6,   0.6, 8,   2.8, 5,  -0.5, 3,    4.8, 5,
                                   0.4, 10,  6.2, 4,   0.5, 1,   8,  4.5,  -0.4, 7.5, 9,
                                   5,   0.6, 2,   11,  6,   0.3, 11, 11.4, 2.5,  0.2};
  tile(s, "panel", 14, "cut-panel");
  strokes(s, strands, 8, "cut-grain");
  svg_pattern_end(&s->svg);
}

static void define_fibreboard(section *s) {
  static const double flecks[] = {0.5, 1, 1.6, 1.4, 4,   0.6, 1.8, -0.4, 2,   4, 1.2, 1.6,
                                  5.6, 3, 1.3, 1.5, 0.6, 6.4, 1.8, 0.5,  4.5, 6, 1.4, -1};
  tile(s, "fibreboard", 8, "cut-fibreboard");
  strokes(s, flecks, 6, "cut-fleck");
  svg_pattern_end(&s->svg);
}

/* Short waves, the rows half a wave apart. */
static void define_blown(section *s) {
  svg *v = &s->svg;
  svg_pattern(v, "blown", 14, 13);
  svg_path(v, "cut-cellulose-line");
  svg_move(v, 1, 4);
  svg_bend(v, 4, 0.5, 7, 3.5);
  svg_bend(v, 9.5, 6, 12, 3);
  svg_move(v, 0, 11);
  svg_bend(v, 2, 12.5, 4.5, 9.5);
  svg_move(v, 8, 10.5);
  svg_bend(v, 10.5, 7, 14, 11);
  svg_path_end(v);
  svg_pattern_end(v);
}

static void define_hatch(section *s) {
  static const double lines[] = {-1, 8, 8, -8, 0, 14, 14, -14, 6, 15, 8, -8};
  svg_pattern(&s->svg, "hatch", 7, 7);
  strokes(s, lines, 3, "cut-hatch");
  svg_pattern_end(&s->svg);
}

static bool has_layer(const section *s, layer_material m) {
  for (int i = 0; i < s->count; i++)
    if (s->band[i].kind == VIEW_LAYERS && s->catalog->layers[s->band[i].record].material == m)
      return true;
  return false;
}

static bool has_blown(const section *s) {
  for (int i = 0; i < s->count; i++)
    if (s->band[i].kind == VIEW_FILL && s->band[i].record != CATALOG_NONE &&
        s->catalog->fills[s->band[i].record].material == FILL_CELLULOSE)
      return true;
  return false;
}

void section_patterns(section *s) {
  svg_defs(&s->svg);
  if (has_layer(s, LAYER_GYPSUM)) define_gypsum(s);
  if (has_layer(s, LAYER_CEMENT)) define_cement(s);
  if (has_layer(s, LAYER_WOOD)) define_panel(s);
  if (has_layer(s, LAYER_FIBREBOARD)) define_fibreboard(s);
  if (has_blown(s)) define_blown(s);
  define_hatch(s);
  svg_defs_end(&s->svg);
}

/* ---- boards ---- */

void section_layer(section *s, const section_place *p, const layer *l, double along0, double along1,
                   double deep0, double deep1) {
  static const char *const patterns[] = {[LAYER_GYPSUM] = "gypsum",
                                         [LAYER_CEMENT] = "cement",
                                         [LAYER_WOOD] = "panel",
                                         [LAYER_FIBREBOARD] = "fibreboard"};
  if (l->membrane) {
    bool limp = l->material == LAYER_LIMP;
    section_box(s, p, along0, along1, deep0, deep1, limp ? "cut-limp" : "cut-damping");
    return;
  }
  svg_fill(&s->svg, patterns[l->material]);
  section_box(s, p, along0, along1, deep0, deep1, "cut-layer");
  if (l->loss_factor > 0) {
    double middle = (deep0 + deep1) / 2;
    section_segment(s, p, along0, middle, along1, middle, "cut-core");
  }
}

void section_layers(section *s, const section_place *p, const section_band *b, double along0,
                    double along1) {
  const layer *l = &s->catalog->layers[b->record];
  for (int i = 0; i < b->copies; i++) {
    double deep = b->from_m + i * l->thickness_m;
    section_layer(s, p, l, along0, along1, deep, deep + l->thickness_m);
  }
}

void section_sealant(section *s, const section_place *p, const section_band *b) {
  const double bead_m = 0.0127; /* as deep as the joint is filled, at most: a 1/2 in bead */
  double deep_m = fmin(bead_m, b->to_m - b->from_m);
  bool a = b->side == SIDE_A;
  section_box(s, p, 0, SECTION_JOINT_M, a ? b->from_m : b->to_m - deep_m,
              a ? b->from_m + deep_m : b->to_m, "cut-sealant");
}

/* ---- fibre ---- */

static void curve(section *s, const section_place *p, const double *c) {
  svg_curve(&s->svg, section_x(p, c[0], c[1]), section_y(p, c[0], c[1]), section_x(p, c[2], c[3]),
            section_y(p, c[2], c[3]), section_x(p, c[4], c[5]), section_y(p, c[4], c[5]));
}

/* A line from one face to the other and back, once a period, in loops wider than their necks. */
static void put_loops(section *s, const section_place *p, double along0, double along1,
                      double deep0, double deep1, double period, const char *css_class) {
  const double bulge = 0.75; /* of the period, how far the handles of the curves reach */
  int loops = (int)((along1 - along0) / period);
  if (loops < 1) return;
  period = (along1 - along0) / loops;
  svg_path(&s->svg, css_class);
  svg_move(&s->svg, section_x(p, along0, deep1), section_y(p, along0, deep1));
  for (int i = 0; i < loops; i++) {
    double u = along0 + i * period;
    double out = bulge * period, middle = u + 0.5 * period, end = u + period;
    curve(s, p, (const double[]){u + out, deep1, middle - out, deep0, middle, deep0});
    curve(s, p, (const double[]){middle + out, deep0, end - out, deep1, end, deep1});
  }
  svg_path_end(&s->svg);
}

typedef struct fibre_look {
  const char *ground, *line;
  double narrow; /* period over thickness */
  double least;  /* period in units */
} fibre_look;

static const fibre_look fibre_looks[] = {
    [FILL_GLASS] = {"cut-glass", "cut-glass-line", 0.42, 9},
    [FILL_STONE] = {"cut-stone", "cut-stone-line", 0.28, 6},
    [FILL_CELLULOSE] = {"cut-cellulose", NULL, 0, 0}, /* blown in: a pattern */
};

void section_fibre(section *s, const section_place *p, const section_band *b, double along0,
                   double along1) {
  const double most = 26 / p->scale;
  const double inset = 1.2 / p->scale; /* so that the line does not touch the boards */
  if (b->record == CATALOG_NONE) return;
  fill_material material = s->catalog->fills[b->record].material;
  const fibre_look *look = &fibre_looks[material];
  double deep0 = b->from_m + inset, deep1 = b->to_m - inset;
  section_box(s, p, along0, along1, b->from_m, b->to_m, look->ground);
  if (look->line == NULL) {
    svg_fill(&s->svg, "blown");
    section_box(s, p, along0, along1, b->from_m, b->to_m, NULL);
    return;
  }
  double period = fmin(most, fmax(look->least / p->scale, look->narrow * (deep1 - deep0)));
  put_loops(s, p, along0 + inset, along1 - inset, deep0, deep1, period, look->line);
}
