/* What charts have in common: one picture of a fixed width, its lettering, and a ledger of the
 * places that are taken, so that no label stands on another or leaves the picture. Colours, line
 * styles and sizes are classes of chart_style(), on the custom properties of the page; whatever a
 * colour says, a line style, a pattern or a shape of mark says too. */
#ifndef REPORT_CHART_H
#define REPORT_CHART_H

#include "report/report.h"
#include "report/svg.h"

#define CHART_WIDTH 560.0 /* of every view box, user units */
#define CHART_EDGE  6.0   /* free all around */

/* Kinds of lettering; sizes in chart.c. */
typedef enum chart_letter {
  CHART_PLAIN,  /* labels */
  CHART_STRONG, /* of what the chart is about */
  CHART_SMALL,  /* scales, notes */
  CHART_INSIDE, /* on a filled bar */
  CHART_LETTERS
} chart_letter;

/* Class and size of each, as chart_style() writes them. */
typedef struct chart_lettering {
  const char *css_class;
  double size;
  bool bold;
} chart_lettering;
extern const chart_lettering chart_letters[CHART_LETTERS];

typedef struct chart_box {
  double x, y, width, height; /* of the upper left corner */
} chart_box;

typedef struct chart {
  const report *report;
  svg svg;
  double height;
  chart_box *taken;
  size_t count, cap;
} chart;

/* `id` begins every id in the picture: unique on its page, letters first. `words` say in one or
 * more sentences what the picture shows, for those who do not see it. */
void chart_begin(chart *c, const report *r, const char *id, const char *title, const char *words,
                 double height, text *out);
void chart_end(chart *c);

/* Where a line of text will stand: from its tallest letter to its lowest, as wide as it may be. */
chart_box chart_text_box(double x, double y, svg_anchor anchor, chart_letter l, const char *value);
double chart_text_width(chart_letter l, const char *value);
/* The height of such a box. */
double chart_text_height(chart_letter l);
/* Whether a box lies in the picture, on nothing that is taken. */
bool chart_is_free(const chart *c, const chart_box *b);
void chart_take(chart *c, const chart_box *b);
/* Takes the square around a mark. */
void chart_take_mark(chart *c, double x, double y, double radius);
/* Takes a straight line, as a row of small squares. */
void chart_take_line(chart *c, double x1, double y1, double x2, double y2);

/* Writes a label where the layout has reserved room for it, and takes the place. */
void chart_label(chart *c, double x, double y, svg_anchor anchor, chart_letter l,
                 const char *value);
/* Writes a label beside the point (x, y), `gap` from it, at the first of several places around it
 * that are free, nearer ones first. False, and nothing written, when none is. */
bool chart_label_near(chart *c, double x, double y, double gap, chart_letter l, const char *value);
/* `value` cut to a width of lettering `l`. */
const char *chart_cut(const chart *c, chart_letter l, const char *value, double width);

/* A note across the picture under a chart, from `y` down, in as many lines as it takes; the height
 * it will take. */
double chart_note_height(const report *r, const char *words);
void chart_put_note(chart *c, double y, const char *words);

/* Marks of five shapes, told apart without colour. */
typedef enum chart_mark {
  CHART_DOT,
  CHART_RING,
  CHART_DIAMOND,
  CHART_CROSS,
  CHART_TRIANGLE
} chart_mark;
/* `css_class` "c-mark" and the like; `hint` becomes a <title> of the mark, NULL: none. */
void chart_put_mark(chart *c, chart_mark m, double x, double y, double radius,
                    const char *css_class, const char *hint);

/* A key to the picture: mark or sample, then words, one after another from (x, y) on, in as many
 * lines as it takes up to `right`. */
typedef struct chart_key {
  enum { KEY_MARK, KEY_LINE, KEY_AREA } kind;
  chart_mark mark;
  const char *css_class;
  const char *pattern; /* of an area: NULL = none */
  const char *words;
} chart_key;
/* The height it will take. */
double chart_key_height(const chart_key *key, int count, double x, double right);
void chart_put_key(chart *c, const chart_key *key, int count, double x, double y, double right);

/* The patterns that areas are filled with: "lean" (lines that lean right), "cross". To be called
 * once, before anything else is drawn. */
void chart_patterns(chart *c);

/* Adds the style sheet of all charts: it uses the custom properties paper, ink, soft, rule, hair,
 * wash, key, warm, good and bad of the page. */
void chart_style(text *out);

#endif
