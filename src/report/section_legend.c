/* The legend: a sample of each material that the drawing shows. */
#include "report/section_parts.h"

static const double wide_m = 0.028, high_m = 0.013, line_high = 19, letter = 12;
static const double units_per_m = 1000; /* samples are drawn a unit for a millimetre */

typedef struct legend {
  section *section;
  bool draw;
  section_place at; /* of the next sample */
  int lines;
} legend;

static void next(legend *g, const char *words) {
  double baseline = g->at.y + 0.5 * high_m * units_per_m + 0.35 * letter;
  if (g->draw)
    svg_text(&g->section->svg, g->at.x + wide_m * units_per_m + 8, baseline, SVG_START, "cut-dim",
             words);
  g->at.y += line_high;
  g->lines++;
}

static const layer *layer_like(const section *s, layer_material m, bool damped) {
  for (int i = 0; i < s->count; i++) {
    if (s->band[i].kind != VIEW_LAYERS) continue;
    const layer *l = &s->catalog->layers[s->band[i].record];
    bool core = !l->membrane && l->loss_factor > 0;
    if (l->material == m && core == damped) return l;
  }
  return NULL;
}

static void add_layer(legend *g, layer_material m, bool damped, const char *words) {
  const layer *l = layer_like(g->section, m, damped);
  if (l == NULL) return;
  if (g->draw) {
    double high = l->membrane ? 0.25 * high_m : high_m, top = (high_m - high) / 2;
    section_layer(g->section, &g->at, l, 0, wide_m, top, top + high);
  }
  next(g, words);
}

static void add_layers(legend *g) {
  add_layer(g, LAYER_GYPSUM, false, "gypsum board");
  add_layer(g, LAYER_GYPSUM, true, "gypsum board, damped core");
  add_layer(g, LAYER_CEMENT, false, "cement board");
  add_layer(g, LAYER_WOOD, false, "wood panel");
  add_layer(g, LAYER_FIBREBOARD, false, "fibreboard");
  add_layer(g, LAYER_LIMP, false, "limp membrane");
  add_layer(g, LAYER_DAMPING, false, "damping compound");
}

static void add_frame(legend *g) {
  const frame *f = g->section->frame;
  if (f->material == FRAME_WOOD) {
    if (g->draw) section_wood(g->section, &g->at, 0, wide_m, 0, high_m);
    next(g, "wood across the grain");
  }
  if (f->material == FRAME_STEEL || wall_is_mounted(g->section->wall)) {
    const double shape[] = {0.016, 0.003, 0.016, 0.001, 0.004, 0.001,
                            0.004, 0.012, 0.016, 0.012, 0.016, 0.010};
    if (g->draw) section_outline(g->section, &g->at, shape, 6, "cut-steel");
    next(g, "sheet steel, drawn thicker");
  }
}

static void add_rail(legend *g) {
  if (!wall_is_mounted(g->section->wall)) return;
  if (g->draw) {
    section_box(g->section, &g->at, 0, wide_m, 0.0025, 0.0105, "cut-rail");
    section_segment(g->section, &g->at, 0, 0.0065, wide_m, 0.0065, "cut-slot");
  }
  next(g, "rail of the mount, from above");
}

static void add_fibre(legend *g, fill_material m, const char *words) {
  const section *s = g->section;
  for (int i = 0; i < s->count; i++) {
    section_band b = s->band[i];
    if (b.kind != VIEW_FILL || b.record == CATALOG_NONE) continue;
    if (s->catalog->fills[b.record].material != m) continue;
    b.from_m = 0;
    b.to_m = high_m;
    if (g->draw) section_fibre(g->section, &g->at, &b, 0, wide_m);
    next(g, words);
    return;
  }
}

static void add_edges(legend *g) {
  section *s = g->section;
  if (g->draw) section_box(s, &g->at, 0.008, 0.020, 0.003, 0.010, "cut-sealant");
  next(g, "acoustical sealant");
  if (g->draw) {
    svg_fill(&s->svg, "hatch");
    section_box(s, &g->at, 0, wide_m, 0, high_m, "cut-structure");
    svg_line(&s->svg, g->at.x, g->at.y, g->at.x + wide_m * units_per_m, g->at.y, "cut-face");
  }
  next(g, "abutting structure, floor");
}

static int run(section *s, double x, double y, bool draw) {
  legend g = {s, draw, {x, y, units_per_m, false}, 0};
  add_layers(&g);
  add_frame(&g);
  add_rail(&g);
  add_fibre(&g, FILL_GLASS, "glass fibre");
  add_fibre(&g, FILL_STONE, "stone wool");
  add_fibre(&g, FILL_CELLULOSE, "blown cellulose");
  add_edges(&g);
  return g.lines;
}

double section_legend_height(section *s) {
  return run(s, 0, 0, false) * line_high;
}

void section_legend_put(section *s, double x, double y) {
  svg_group(&s->svg, "cut-legend");
  run(s, x, y, true);
  svg_group_end(&s->svg);
}
