#include "report/chart.h"

#include <math.h>
#include <string.h>

const chart_lettering chart_letters[CHART_LETTERS] = {
    [CHART_PLAIN] = {"c-plain", 12, false},
    [CHART_STRONG] = {"c-strong", 12, true},
    [CHART_SMALL] = {"c-small", 10.5, false},
    [CHART_INSIDE] = {"c-inside", 10.5, false},
};

/* Shares of the size that letters stand above and below their line. */
static const double ascent = 0.8, descent = 0.24;

/* ---- the picture ---- */

void chart_begin(chart *c, const report *r, const char *id, const char *title, const char *words,
                 double height, text *out) {
  memset(c, 0, sizeof *c);
  c->report = r;
  c->height = height;
  svg_head head = {.prefix = id,
                   .title = title,
                   .desc = words,
                   .css_class = "plot",
                   .width = CHART_WIDTH,
                   .height = height};
  svg_begin(&c->svg, out, &head);
}

void chart_end(chart *c) {
  svg_end(&c->svg);
}

void chart_patterns(chart *c) {
  enum { PITCH = 6 };
  svg *s = &c->svg;
  svg_defs(s);
  svg_pattern(s, "lean", PITCH, PITCH);
  svg_path(s, "c-hatch");
  for (int i = -1; i <= 1; i++) {
    svg_move(s, PITCH * i - 1, PITCH + 1);
    svg_to(s, PITCH * (i + 1) + 1, -1);
  }
  svg_path_end(s);
  svg_pattern_end(s);
  svg_defs_end(s);
}

/* ---- places that are taken ---- */

double chart_text_width(chart_letter l, const char *value) {
  return svg_text_width(value, chart_letters[l].size, chart_letters[l].bold);
}

double chart_text_height(chart_letter l) {
  return (ascent + descent) * chart_letters[l].size;
}

chart_box chart_text_box(double x, double y, svg_anchor anchor, chart_letter l, const char *value) {
  double width = chart_text_width(l, value);
  double share = anchor == SVG_START ? 0 : anchor == SVG_MIDDLE ? 0.5 : 1;
  return (chart_box){x - share * width, y - ascent * chart_letters[l].size, width,
                     chart_text_height(l)};
}

static bool apart(const chart_box *a, const chart_box *b) {
  return a->x + a->width <= b->x || b->x + b->width <= a->x || a->y + a->height <= b->y ||
         b->y + b->height <= a->y;
}

bool chart_is_free(const chart *c, const chart_box *b) {
  if (b->x < CHART_EDGE || b->x + b->width > CHART_WIDTH - CHART_EDGE) return false;
  if (b->y < CHART_EDGE || b->y + b->height > c->height - CHART_EDGE) return false;
  for (size_t i = 0; i < c->count; i++)
    if (!apart(b, &c->taken[i])) return false;
  return true;
}

void chart_take(chart *c, const chart_box *b) {
  if (c->count == c->cap) {
    size_t cap = c->cap ? 2 * c->cap : 64;
    c->taken = arena_grow(c->report->arena, c->taken, c->cap * sizeof *b, cap * sizeof *b);
    c->cap = cap;
  }
  c->taken[c->count++] = *b;
}

void chart_take_mark(chart *c, double x, double y, double radius) {
  chart_box b = {x - radius, y - radius, 2 * radius, 2 * radius};
  chart_take(c, &b);
}

void chart_take_line(chart *c, double x1, double y1, double x2, double y2) {
  const double step = 4, half = 1;
  int steps = (int)ceil(hypot(x2 - x1, y2 - y1) / step) + 1;
  for (int i = 0; i <= steps; i++) {
    double share = (double)i / steps;
    chart_take_mark(c, x1 + share * (x2 - x1), y1 + share * (y2 - y1), half);
  }
}

/* ---- labels ---- */

const char *chart_cut(const chart *c, chart_letter l, const char *value, double width) {
  return svg_text_cut(c->report->arena, value, chart_letters[l].size, chart_letters[l].bold, width);
}

void chart_label(chart *c, double x, double y, svg_anchor anchor, chart_letter l,
                 const char *value) {
  chart_box b = chart_text_box(x, y, anchor, l, value);
  chart_take(c, &b);
  svg_text(&c->svg, x, y, anchor, chart_letters[l].css_class, value);
}

bool chart_label_near(chart *c, double x, double y, double gap, chart_letter l, const char *value) {
  static const struct {
    double dx, dy; /* of the gap */
    svg_anchor anchor;
    double rise; /* of the size: the text's line below the place */
  } places[] = {{0, -1, SVG_MIDDLE, -0.24}, {1, 0, SVG_START, 0.28},  {-1, 0, SVG_END, 0.28},
                {0, 1, SVG_MIDDLE, 0.8},    {1, -1, SVG_START, -0.1}, {-1, -1, SVG_END, -0.1},
                {1, 1, SVG_START, 0.7},     {-1, 1, SVG_END, 0.7}};
  static const double farther[] = {1, 2, 3.5};
  double size = chart_letters[l].size;
  for (size_t far = 0; far < sizeof farther / sizeof farther[0]; far++) {
    for (size_t i = 0; i < sizeof places / sizeof places[0]; i++) {
      double at_x = x + places[i].dx * gap * farther[far];
      double at_y = y + places[i].dy * gap * farther[far] + places[i].rise * size;
      chart_box b = chart_text_box(at_x, at_y, places[i].anchor, l, value);
      if (!chart_is_free(c, &b)) continue;
      chart_label(c, at_x, at_y, places[i].anchor, l, value);
      return true;
    }
  }
  return false;
}

/* ---- notes ---- */

enum { NOTE_PITCH = 14 };

/* The first words of `words` that one line holds; *rest begins with those that follow. */
static const char *note_line(const report *r, const char *words, const char **rest) {
  const double room = CHART_WIDTH - 2 * CHART_EDGE;
  size_t kept = 0;
  for (size_t i = 1; words[i - 1]; i++) {
    if (words[i] != ' ' && words[i]) continue;
    if (kept > 0 && chart_text_width(CHART_SMALL, text_copyn(r->arena, words, i)) > room) break;
    kept = i;
  }
  *rest = words + kept;
  while (**rest == ' ') ++*rest;
  return text_copyn(r->arena, words, kept);
}

double chart_note_height(const report *r, const char *words) {
  double height = 0;
  for (; *words; height += NOTE_PITCH) note_line(r, words, &words);
  return height;
}

void chart_put_note(chart *c, double y, const char *words) {
  for (; *words; y += NOTE_PITCH) {
    const char *line = note_line(c->report, words, &words);
    chart_label(c, CHART_EDGE, y + chart_letters[CHART_SMALL].size, SVG_START, CHART_SMALL,
                chart_cut(c, CHART_SMALL, line, CHART_WIDTH - 2 * CHART_EDGE));
  }
}

/* ---- marks ---- */

static void hint_words(chart *c, const char *hint) {
  if (hint) markup_xml_element(&c->svg.xml, "title", NULL, hint);
}

static void put_path_mark(chart *c, chart_mark m, double x, double y, double r) {
  svg *s = &c->svg;
  svg_path(s, NULL);
  if (m == CHART_CROSS) {
    svg_move(s, x - r, y - r);
    svg_to(s, x + r, y + r);
    svg_move(s, x - r, y + r);
    svg_to(s, x + r, y - r);
  } else {
    bool diamond = m == CHART_DIAMOND;
    svg_move(s, x, y - r);
    svg_to(s, x + r, diamond ? y : y + 0.8 * r);
    if (diamond) svg_to(s, x, y + r);
    svg_to(s, x - r, diamond ? y : y + 0.8 * r);
    svg_shut(s);
  }
  svg_path_end(s);
}

void chart_put_mark(chart *c, chart_mark m, double x, double y, double radius,
                    const char *css_class, const char *hint) {
  svg *s = &c->svg;
  bool round = m == CHART_DOT || m == CHART_RING;
  if (round && !hint) {
    svg_circle(s, x, y, radius, css_class);
    return;
  }
  svg_group(s, css_class);
  hint_words(c, hint);
  if (round)
    svg_circle(s, x, y, radius, NULL);
  else
    put_path_mark(c, m, x, y, radius);
  svg_group_end(s);
}

/* ---- keys ---- */

enum { KEY_SAMPLE = 18, KEY_PITCH = 18, KEY_APART = 16, KEY_SPACE = 6 };

static double key_width(const chart_key *k) {
  return KEY_SAMPLE + KEY_SPACE + chart_text_width(CHART_SMALL, k->words);
}

/* Moves (x, y) to the place of an entry that begins at `left` where its line is full. */
static void key_place(const chart_key *k, double left, double right, double *x, double *y) {
  if (*x > left && *x + key_width(k) > right) {
    *x = left;
    *y += KEY_PITCH;
  }
}

double chart_key_height(const chart_key *key, int count, double x, double right) {
  double at = x, y = 0;
  for (int i = 0; i < count; i++) {
    key_place(&key[i], x, right, &at, &y);
    at += key_width(&key[i]) + KEY_APART;
  }
  return y + KEY_PITCH;
}

static void put_sample(chart *c, const chart_key *k, double x, double y) {
  const double middle = y + KEY_PITCH / 2.0, half = 5;
  if (k->kind == KEY_LINE)
    svg_line(&c->svg, x, middle, x + KEY_SAMPLE, middle, k->css_class);
  else if (k->kind == KEY_MARK)
    chart_put_mark(c, k->mark, x + KEY_SAMPLE / 2.0, middle, half - 1, k->css_class, NULL);
  else {
    svg_rect(&c->svg, x, middle - half, KEY_SAMPLE, 2 * half, k->css_class);
    if (!k->pattern) return;
    svg_fill(&c->svg, k->pattern);
    svg_rect(&c->svg, x, middle - half, KEY_SAMPLE, 2 * half, NULL);
  }
}

void chart_put_key(chart *c, const chart_key *key, int count, double x, double y, double right) {
  double at = x;
  for (int i = 0; i < count; i++) {
    key_place(&key[i], x, right, &at, &y);
    put_sample(c, &key[i], at, y);
    double words_at = at + KEY_SAMPLE + KEY_SPACE;
    chart_label(c, words_at, y + KEY_PITCH / 2.0 + 0.36 * chart_letters[CHART_SMALL].size,
                SVG_START, CHART_SMALL,
                chart_cut(c, CHART_SMALL, key[i].words, CHART_WIDTH - CHART_EDGE - words_at));
    at += key_width(&key[i]) + KEY_APART;
  }
}
