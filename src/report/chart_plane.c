#include "report/chart_plane.h"

#include <math.h>
#include <string.h>

const chart_range chart_range_none = {HUGE_VAL, -HUGE_VAL};

void chart_range_add(chart_range *r, double value) {
  if (!isfinite(value)) return;
  r->low = fmin(r->low, value);
  r->high = fmax(r->high, value);
}

/* A range with room at both ends, so that marks and labels stand clear of the frame. */
static chart_range roomy(chart_range r, double least_span) {
  const double share = 0.05;
  if (r.low > r.high) return (chart_range){0, least_span};
  double more = fmax(share * (r.high - r.low), (least_span - (r.high - r.low)) / 2);
  chart_range out = {r.low - more, r.high + more};
  if (r.low >= 0 && out.low < 0) out.low = 0;
  return out;
}

enum { TOP = 30, BELOW = 40, RIGHT = 16, TICK_PX = 34, NUMBER_PX = 30 };

static void set_ticks(chart_plane *p, const report *r, const chart_plane_head *head) {
  const double least_share = 0.1; /* of money that is all alike */
  chart_range x = head->whole ? head->x : roomy(head->x, 2);
  if (x.low > x.high) x = (chart_range){0, 1};
  chart_range y = roomy(head->money, least_share * fmax(head->money.high, 1));
  p->money = chart_money_of(r, fmax(fabs(y.low), fabs(y.high)), head->per);
  int most_y = (int)((head->height - TOP - BELOW) / TICK_PX) + 1;
  int most_x = (int)((CHART_WIDTH - TOP) / NUMBER_PX);
  chart_ticks_over(x.low, x.high, most_x, head->whole, &p->x);
  chart_ticks_over(y.low / p->money.divisor, y.high / p->money.divisor, most_y, false, &p->y);
}

/* Room for the widest number of the scale. */
static double left_edge(const report *r, const chart_ticks *t) {
  const double gap = 8;
  double widest = 0;
  for (int i = 0; i < t->count; i++)
    widest = fmax(widest,
                  chart_text_width(CHART_SMALL, chart_number(r->arena, t->value[i], t->decimals)));
  return CHART_EDGE + widest + gap;
}

static chart_scale over(const chart_ticks *t, double from, double to) {
  return (chart_scale){t->value[0], t->value[t->count - 1], from, to};
}

void chart_plane_begin(chart_plane *p, const report *r, const chart_plane_head *head, text *out) {
  double left = CHART_EDGE, right = CHART_WIDTH - CHART_EDGE;
  double key = head->keys > 0 ? chart_key_height(head->key, head->keys, left, right) + 4 : 0;
  double note = head->note ? chart_note_height(r, head->note) + CHART_EDGE : 0;
  memset(p, 0, sizeof *p);
  set_ticks(p, r, head);
  chart_begin(&p->chart, r, head->id, head->title, head->words, head->height + key + note, out);
  chart_patterns(&p->chart);
  chart_put_key(&p->chart, head->key, head->keys, left, CHART_EDGE, right);
  p->frame.x = over(&p->x, left_edge(r, &p->y), CHART_WIDTH - RIGHT);
  p->frame.y = over(&p->y, key + head->height - BELOW, key + TOP);
  chart_axis_y(&p->chart, &p->frame, &p->y,
               text_format(r->arena, "%s, %s", head->y_words, p->money.words));
  chart_axis_x(&p->chart, &p->frame, &p->x, head->x_title);
  if (head->note) chart_put_note(&p->chart, key + head->height, head->note);
}

double chart_plane_x(const chart_plane *p, double value) {
  return chart_at(&p->frame.x, value);
}

double chart_plane_y(const chart_plane *p, double currency) {
  return chart_at(&p->frame.y, currency / p->money.divisor);
}

/* Writes words where they are free, else not at all. */
static bool put_if_free(chart *c, double x, double y, svg_anchor anchor, const char *words) {
  chart_box b = chart_text_box(x, y, anchor, CHART_SMALL, words);
  if (!chart_is_free(c, &b)) return false;
  chart_label(c, x, y, anchor, CHART_SMALL, words);
  return true;
}

void chart_plane_upright(chart_plane *p, double value, const char *words) {
  double x = chart_plane_x(p, value), top = p->frame.y.to, bottom = p->frame.y.from;
  const double gap = 4, size = chart_letters[CHART_SMALL].size;
  svg_line(&p->chart.svg, x, top, x, bottom, "c-limit");
  chart_take_line(&p->chart, x, top, x, bottom);
  for (double y = top + size; y < top + 4 * size; y += 1.2 * size) {
    if (put_if_free(&p->chart, x + gap, y, SVG_START, words)) return;
    if (put_if_free(&p->chart, x - gap, y, SVG_END, words)) return;
  }
}

void chart_plane_level(chart_plane *p, double money, const char *words) {
  double y = chart_plane_y(p, money), left = p->frame.x.from, right = p->frame.x.to;
  const double gap = 4, size = chart_letters[CHART_SMALL].size;
  svg_line(&p->chart.svg, left, y, right, y, "c-limit");
  chart_take_line(&p->chart, left, y, right, y);
  if (!put_if_free(&p->chart, left + gap, y - gap, SVG_START, words))
    put_if_free(&p->chart, right - gap, y + size + 2, SVG_END, words);
}

void chart_plane_step(chart_plane *p, chart_stair *t, double x, double y) {
  svg *s = &p->chart.svg;
  if (!t->begun)
    svg_move(s, t->x, y);
  else {
    svg_to(s, t->x, y);
    chart_take_line(&p->chart, t->x, t->y, t->x, y);
  }
  svg_to(s, x, y);
  chart_take_line(&p->chart, t->x, y, x, y);
  *t = (chart_stair){x, y, true};
}
