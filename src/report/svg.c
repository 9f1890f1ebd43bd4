#include "report/svg.h"

#include <string.h>

enum { DECIMALS = 2, POINTS_PER_EM = 100 };

/* ---- the drawing ---- */

static const char *id_of(const svg *s, const char *name) {
  return text_format(s->xml.out->arena, "%s-%s", s->prefix, name);
}

const char *svg_id(const svg *s, const char *name) {
  return id_of(s, name);
}

static const char *url_of(const svg *s, const char *name) {
  return text_format(s->xml.out->arena, "url(#%s-%s)", s->prefix, name);
}

static void number(svg *s, const char *name, double value) {
  markup_xml_number(&s->xml, name, value, DECIMALS);
}

static void put_view_box(svg *s, const svg_head *head) {
  text *box = markup_xml_attribute_begin(&s->xml, "viewBox");
  const double side[] = {head->x, head->y, head->width, head->height};
  for (int i = 0; i < 4; i++) {
    if (i > 0) text_char(box, ' ');
    text_number(box, side[i], DECIMALS);
  }
  markup_xml_attribute_end(&s->xml);
}

static void put_words(svg *s, const char *element, const char *value) {
  markup_xml_open(&s->xml, element);
  markup_xml_attribute(&s->xml, "id", id_of(s, element));
  markup_xml_text(&s->xml, value);
  markup_xml_close(&s->xml);
}

void svg_begin(svg *s, text *out, const svg_head *head) {
  memset(s, 0, sizeof *s);
  s->prefix = head->prefix;
  markup_xml_init(&s->xml, out);
  if (head->style) markup_xml_declaration(&s->xml);
  markup_xml_open(&s->xml, "svg");
  markup_xml_attribute(&s->xml, "xmlns", "http://www.w3.org/2000/svg");
  markup_xml_attribute(&s->xml, "class", head->css_class);
  put_view_box(s, head);
  if (head->style) {
    number(s, "width", head->width * head->scale);
    number(s, "height", head->height * head->scale);
  }
  markup_xml_attribute(&s->xml, "role", "img");
  markup_xml_attribute(&s->xml, "aria-labelledby",
                       text_format(out->arena, "%s-title %s-desc", s->prefix, s->prefix));
  put_words(s, "title", head->title);
  put_words(s, "desc", head->desc);
  if (head->style) markup_xml_style(&s->xml, head->style);
}

void svg_end(svg *s) {
  markup_xml_close(&s->xml);
}

static void begin(svg *s, const char *element, const char *css_class) {
  markup_xml_open(&s->xml, element);
  markup_xml_attribute(&s->xml, "class", css_class);
  if (s->fill) markup_xml_attribute(&s->xml, "fill", url_of(s, s->fill));
  s->fill = NULL;
}

static void end(svg *s) {
  markup_xml_close(&s->xml);
}

/* ---- groups ---- */

void svg_group(svg *s, const char *css_class) {
  begin(s, "g", css_class);
}

static void put_turn(svg *s, const char *what, const double *value, int n) {
  text *out = markup_xml_attribute_begin(&s->xml, "transform");
  text_put(out, what);
  for (int i = 0; i < n; i++) {
    text_char(out, i == 0 ? '(' : ' ');
    text_number(out, value[i], DECIMALS);
  }
  text_char(out, ')');
  markup_xml_attribute_end(&s->xml);
}

void svg_group_at(svg *s, const char *css_class, double dx, double dy) {
  begin(s, "g", css_class);
  put_turn(s, "translate", (const double[]){dx, dy}, 2);
}

void svg_group_clipped(svg *s, const char *css_class, const char *name) {
  begin(s, "g", css_class);
  markup_xml_attribute(&s->xml, "clip-path", url_of(s, name));
}

void svg_group_end(svg *s) {
  end(s);
}

/* ---- shapes ---- */

void svg_line(svg *s, double x1, double y1, double x2, double y2, const char *css_class) {
  begin(s, "line", css_class);
  number(s, "x1", x1);
  number(s, "y1", y1);
  number(s, "x2", x2);
  number(s, "y2", y2);
  end(s);
}

void svg_rect(svg *s, double x, double y, double width, double height, const char *css_class) {
  begin(s, "rect", css_class);
  number(s, "x", x);
  number(s, "y", y);
  number(s, "width", width);
  number(s, "height", height);
  end(s);
}

void svg_circle(svg *s, double x, double y, double radius, const char *css_class) {
  begin(s, "circle", css_class);
  number(s, "cx", x);
  number(s, "cy", y);
  number(s, "r", radius);
  end(s);
}

static void put_pair(text *out, double x, double y) {
  text_number(out, x, DECIMALS);
  text_char(out, ' ');
  text_number(out, y, DECIMALS);
}

static void put_points(svg *s, const char *element, const double *xy, int n,
                       const char *css_class) {
  begin(s, element, css_class);
  text *out = markup_xml_attribute_begin(&s->xml, "points");
  for (int i = 0; i < n; i++) {
    if (i > 0) text_char(out, ' ');
    put_pair(out, xy[2 * i], xy[2 * i + 1]);
  }
  markup_xml_attribute_end(&s->xml);
  end(s);
}

void svg_polyline(svg *s, const double *xy, int n, const char *css_class) {
  put_points(s, "polyline", xy, n, css_class);
}

void svg_polygon(svg *s, const double *xy, int n, const char *css_class) {
  put_points(s, "polygon", xy, n, css_class);
}

/* ---- paths ---- */

void svg_path(svg *s, const char *css_class) {
  begin(s, "path", css_class);
  s->data = markup_xml_attribute_begin(&s->xml, "d");
}

/* One command of path data with its points. */
static void piece(svg *s, char command, const double *xy, int n) {
  text *out = s->data;
  text_char(out, command);
  for (int i = 0; i < n; i++) {
    if (i > 0) text_char(out, ' ');
    put_pair(out, xy[2 * i], xy[2 * i + 1]);
  }
}

void svg_move(svg *s, double x, double y) {
  piece(s, 'M', (const double[]){x, y}, 1);
}

void svg_to(svg *s, double x, double y) {
  piece(s, 'L', (const double[]){x, y}, 1);
}

void svg_curve(svg *s, double x1, double y1, double x2, double y2, double x, double y) {
  piece(s, 'C', (const double[]){x1, y1, x2, y2, x, y}, 3);
}

void svg_bend(svg *s, double x1, double y1, double x, double y) {
  piece(s, 'Q', (const double[]){x1, y1, x, y}, 2);
}

void svg_shut(svg *s) {
  text_char(s->data, 'Z');
}

void svg_path_end(svg *s) {
  markup_xml_attribute_end(&s->xml);
  end(s);
}

/* ---- text ---- */

static void begin_text(svg *s, double x, double y, svg_anchor anchor, const char *css_class) {
  static const char *const anchors[] = {NULL, "middle", "end"};
  begin(s, "text", css_class);
  number(s, "x", x);
  number(s, "y", y);
  markup_xml_attribute(&s->xml, "text-anchor", anchors[anchor]);
}

void svg_text(svg *s, double x, double y, svg_anchor anchor, const char *css_class,
              const char *value) {
  begin_text(s, x, y, anchor, css_class);
  markup_xml_text(&s->xml, value);
  end(s);
}

void svg_text_turned(svg *s, double x, double y, double degrees, svg_anchor anchor,
                     const char *css_class, const char *value) {
  begin_text(s, x, y, anchor, css_class);
  put_turn(s, "rotate", (const double[]){degrees, x, y}, 3);
  markup_xml_text(&s->xml, value);
  end(s);
}

/* ---- definitions ---- */

void svg_defs(svg *s) {
  begin(s, "defs", NULL);
}

void svg_defs_end(svg *s) {
  end(s);
}

void svg_pattern(svg *s, const char *name, double width, double height) {
  begin(s, "pattern", NULL);
  markup_xml_attribute(&s->xml, "id", id_of(s, name));
  number(s, "width", width);
  number(s, "height", height);
  markup_xml_attribute(&s->xml, "patternUnits", "userSpaceOnUse");
}

void svg_pattern_end(svg *s) {
  end(s);
}

void svg_clip(svg *s, const char *name) {
  begin(s, "clipPath", NULL);
  markup_xml_attribute(&s->xml, "id", id_of(s, name));
}

void svg_clip_end(svg *s) {
  end(s);
}

void svg_fill(svg *s, const char *name) {
  s->fill = name;
}

/* ---- how wide text is ---- */

/* Widths from the blank to the tilde in hundredths of the size, rounded up. Measured in a browser
 * on DejaVu Sans; the sans serifs that other systems bring are narrower letter by letter (from
 * memory: Arial and Helvetica have digits of 56 against 64). */
static const unsigned char ascii_width[] = {
    32, 41, 46, 84, 64, 96, 78, 28, 40,  40, 50, 84, 32, 37, 32, 34, 64, 64, 64, 64, 64, 64, 64, 64,
    64, 64, 34, 34, 84, 84, 84, 54, 100, 69, 69, 70, 78, 64, 58, 78, 76, 30, 30, 66, 56, 87, 75, 79,
    61, 79, 70, 64, 62, 74, 69, 99, 69,  62, 69, 40, 34, 40, 84, 50, 50, 62, 64, 55, 64, 62, 36, 64,
    64, 28, 28, 58, 28, 98, 64, 62, 64,  64, 42, 53, 40, 64, 60, 82, 60, 60, 53, 64, 34, 64, 84};

/* Other letters by range, the widest of common ones; U+FFFD and pictures among the last. */
static const struct {
  unsigned long last;
  int width;
} other_width[] = {{0x24F, 100}, {0x2FF, 100},  {0x36F, 0},    {0x52F, 110},
                   {0x6FF, 95},  {0x1FFF, 110}, {0x20FF, 100}, {0x10FFFF, 130}};

static const double bold_share = 1.22; /* the widest gain in DejaVu Sans Bold: i, l */

/* The code point at `p`, its bytes in *length; what is none counts as U+FFFD, as it is written. */
static unsigned long point_at(const char *p, const char *stop, size_t *length) {
  *length = text_utf8(p, stop);
  const unsigned char *b = (const unsigned char *)p;
  switch (*length) {
  case 1:
    return b[0];
  case 2:
    return (b[0] & 0x1FUL) << 6 | (b[1] & 0x3FUL);
  case 3:
    return (b[0] & 0x0FUL) << 12 | (b[1] & 0x3FUL) << 6 | (b[2] & 0x3FUL);
  case 4:
    return (b[0] & 0x07UL) << 18 | (b[1] & 0x3FUL) << 12 | (b[2] & 0x3FUL) << 6 | (b[3] & 0x3FUL);
  default:
    *length = 1;
    return 0xFFFD;
  }
}

static int point_width(unsigned long point) {
  if (point >= ' ' && point <= '~') return ascii_width[point - ' '];
  if (point == '\t' || point == '\n' || point == '\r') return ascii_width[0];
  if (point < ' ') point = 0xFFFD;
  for (size_t i = 0; i + 1 < sizeof other_width / sizeof other_width[0]; i++)
    if (point <= other_width[i].last) return other_width[i].width;
  return other_width[sizeof other_width / sizeof other_width[0] - 1].width;
}

/* Whole characters at the start of `value` that are no wider than `most`; their width in *width. */
static size_t fitting(const char *value, double scale, double most, double *width) {
  const char *stop = value + strlen(value);
  long sum = 0;
  for (const char *p = value; p < stop;) {
    size_t length;
    long next = sum + point_width(point_at(p, stop, &length));
    if ((double)next * scale > most) {
      *width = (double)sum * scale;
      return (size_t)(p - value);
    }
    sum = next;
    p += length;
  }
  *width = (double)sum * scale;
  return (size_t)(stop - value);
}

static double scale_of(double size, bool bold) {
  return size * (bold ? bold_share : 1) / POINTS_PER_EM;
}

double svg_text_width(const char *value, double size, bool bold) {
  double width;
  fitting(value, scale_of(size, bold), 1e300, &width);
  return width;
}

const char *svg_text_cut(arena *a, const char *value, double size, bool bold, double width) {
  static const char *const ellipsis = "\xE2\x80\xA6";
  double scale = scale_of(size, bold), is;
  if (fitting(value, scale, width, &is) == strlen(value)) return value;
  size_t kept = fitting(value, scale, width - svg_text_width(ellipsis, size, bold), &is);
  size_t word = kept;
  while (word > 0 && value[word] != ' ') word--;
  if (2 * word > kept) kept = word; /* a word's end, where that leaves most of it */
  while (kept > 0 && value[kept - 1] == ' ') kept--;
  return text_format(a, "%s%s", text_copyn(a, value, kept), ellipsis);
}
