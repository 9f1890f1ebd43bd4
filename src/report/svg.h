/* Drawings as SVG 1.1, over markup.h: elements, attributes, paths, text, patterns. One drawing is
 * one <svg> with title and description; it takes no colour but through the classes given, which a
 * page, or the drawing's own style sheet when it stands alone, defines by custom properties.
 * Lengths are user units of the view box, written to 0.01. */
#ifndef REPORT_SVG_H
#define REPORT_SVG_H

#include "report/markup.h"

typedef struct svg {
  markup_xml xml; /* for elements that have no function here; keep it balanced */
  const char *prefix;
  const char *fill; /* pattern of the next shape; NULL without */
  text *data;       /* of the open path */
} svg;

typedef struct svg_head {
  const char *prefix;       /* begins every id of the drawing: unique on its page, letters first */
  const char *title, *desc; /* what a screen reader says; user text is fine */
  const char *css_class;    /* of the <svg>; NULL without */
  double x, y, width, height; /* view box */
  /* NULL: the page has the style. Else the drawing is a file of its own, with this style sheet (no
   * < > & in it), a size of `scale` px a unit, and the line that begins a file of XML. */
  const char *style;
  double scale;
} svg_head;

void svg_begin(svg *s, text *out, const svg_head *head);
void svg_end(svg *s);

/* The id of `name` in this drawing: "prefix-name". */
const char *svg_id(const svg *s, const char *name);

void svg_group(svg *s, const char *css_class);
/* A group moved by (dx, dy). */
void svg_group_at(svg *s, const char *css_class, double dx, double dy);
void svg_group_end(svg *s);

/* Shapes. `css_class` NULL: that of the group. */
void svg_line(svg *s, double x1, double y1, double x2, double y2, const char *css_class);
void svg_rect(svg *s, double x, double y, double width, double height, const char *css_class);
void svg_circle(svg *s, double x, double y, double radius, const char *css_class);
/* `n` points, x before y: 2n numbers. */
void svg_polyline(svg *s, const double *xy, int n, const char *css_class);
void svg_polygon(svg *s, const double *xy, int n, const char *css_class);

/* A path: begin, any number of pieces, end. */
void svg_path(svg *s, const char *css_class);
void svg_move(svg *s, double x, double y);
void svg_to(svg *s, double x, double y);
/* A cubic curve with its two handles; a quadratic one with one. */
void svg_curve(svg *s, double x1, double y1, double x2, double y2, double x, double y);
void svg_bend(svg *s, double x1, double y1, double x, double y);
void svg_shut(svg *s);
void svg_path_end(svg *s);

/* Where the point (x, y) lies in the line of text. */
typedef enum svg_anchor { SVG_START, SVG_MIDDLE, SVG_END } svg_anchor;
void svg_text(svg *s, double x, double y, svg_anchor anchor, const char *css_class,
              const char *value);
/* Turned by `degrees` clockwise about (x, y). */
void svg_text_turned(svg *s, double x, double y, double degrees, svg_anchor anchor,
                     const char *css_class, const char *value);

/* Definitions: between svg_defs and svg_defs_end. A pattern holds shapes, a clip holds shapes whose
 * union is kept. */
void svg_defs(svg *s);
void svg_defs_end(svg *s);
void svg_pattern(svg *s, const char *name, double width, double height);
void svg_pattern_end(svg *s);
void svg_clip(svg *s, const char *name);
void svg_clip_end(svg *s);
/* The next rectangle, polygon or path is filled with the pattern `name`; its class must then set no
 * fill. */
void svg_fill(svg *s, const char *name);
/* A group of which only what the clip `name` keeps is seen. */
void svg_group_clipped(svg *s, const char *css_class, const char *name);

/* How wide a line of text will be at most with the system's sans serif: `size` in user units, bold
 * is wider. Never less than what the fonts in use come to, some 5 to 15 % more for most: for
 * deciding what overlaps, not for aligning. */
double svg_text_width(const char *value, double size, bool bold);
/* `value`, or its first words with an ellipsis, so that it is no wider than `width`. */
const char *svg_text_cut(arena *a, const char *value, double size, bool bold, double width);

#endif
