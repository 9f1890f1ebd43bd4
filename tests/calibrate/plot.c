#include "write.h"

/* A square of STC against STC: a unit is so many pixels. */
enum { FROM = 30, TO = 70, UNIT = 12, LEFT = 60, TOP = 40, SIDE = (TO - FROM) * UNIT };

static double across(double stc) {
  return LEFT + (stc - FROM) * UNIT;
}
static double down(double stc) {
  return TOP + (TO - stc) * UNIT;
}

/* Colours that stay apart in print and for the colour-blind, and a shape of its own for each
 * family. */
static const char *const colours[FAMILY_COUNT] = {"#8c510a", "#d8790f", "#1b7837",
                                                  "#35978f", "#2166ac", "#762a83",
                                                  "#c51b7d", "#666666", "#000000"};

static void put_line(text *out, double x1, double y1, double x2, double y2, const char *style) {
  const double at[4] = {x1, y1, x2, y2};
  static const char *const names[4] = {"x1", "y1", "x2", "y2"};
  text_put(out, "<line");
  for (int i = 0; i < 4; i++) {
    text_putf(out, " %s=\"", names[i]);
    text_number(out, at[i], 1);
    text_put(out, "\"");
  }
  text_putf(out, " %s/>\n", style);
}

static void put_words(text *out, double x, double y, const char *anchor, const char *words) {
  text_put(out, "<text x=\"");
  text_number(out, x, 1);
  text_put(out, "\" y=\"");
  text_number(out, y, 1);
  text_putf(out, "\" text-anchor=\"%s\">%s</text>\n", anchor, words);
}

static void put_mark(text *out, double x, double y, int family) {
  static const char *const shapes[3] = {"M-4 0a4 4 0 1 0 8 0a4 4 0 1 0-8 0z", "M-4-4h8v8h-8z",
                                        "M0-5L5 4H-5z"};
  text_put(out, "<path transform=\"translate(");
  text_number(out, x, 1);
  text_char(out, ' ');
  text_number(out, y, 1);
  text_putf(out, ")\" d=\"%s\" fill=\"%s\" fill-opacity=\"0.65\" stroke=\"%s\"/>\n",
            shapes[family % 3], colours[family], colours[family]);
}

static void put_axes(text *out) {
  for (int stc = FROM; stc <= TO; stc += 5) {
    const char *number = text_format(out->arena, "%d", stc);
    put_line(out, across(stc), down(FROM), across(stc), down(TO), "stroke=\"#ddd\"");
    put_line(out, across(FROM), down(stc), across(TO), down(stc), "stroke=\"#ddd\"");
    put_words(out, across(stc), down(FROM) + 18, "middle", number);
    put_words(out, across(FROM) - 8, down(stc) + 4, "end", number);
  }
  put_line(out, across(FROM), down(FROM), across(TO), down(TO), "stroke=\"#333\"");
  put_line(out, across(FROM), down(FROM + 3), across(TO - 3), down(TO),
           "stroke=\"#999\" stroke-dasharray=\"4 4\"");
  put_line(out, across(FROM + 3), down(FROM), across(TO), down(TO - 3),
           "stroke=\"#999\" stroke-dasharray=\"4 4\"");
  put_words(out, LEFT + SIDE / 2, TOP + SIDE + 40, "middle", "published STC");
  put_words(out, LEFT, TOP - 14, "start",
            "predicted STC by fits that did not see the wall; dashed: 3 points off");
}

static void put_legend(text *out, const fit *f, const outcome *o) {
  double y = TOP + 16;
  for (int i = 0; i < FAMILY_COUNT; i++) {
    error_summary s = cross_summary(f->data, o->folds, i);
    if (s.rows == 0) continue;
    put_mark(out, LEFT + 16, y - 4, i);
    put_words(out, LEFT + 28, y, "start",
              text_format(out->arena, "%s (%d)", sound_family_names[i], s.rows));
    y += 18;
  }
}

void plot_fit(text *out, const fit *f, const outcome *o) {
  text_putf(
      out,
      "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 %d %d\" font-family=\"sans-serif\" "
      "font-size=\"13\">\n<title>Predicted against published STC</title>\n"
      "<rect width=\"100%%\" height=\"100%%\" fill=\"#fff\"/>\n",
      LEFT + SIDE + 30, TOP + SIDE + 60);
  put_axes(out);
  for (int i = 0; i < f->data->count; i++) {
    const sample *s = &f->data->row[i];
    if (!s->curve) put_mark(out, across(s->rating), down(s->rating - o->folds[i]), (int)s->family);
  }
  put_legend(out, f, o);
  text_put(out, "</svg>\n");
}
