#include "report/chart_axis.h"

#include <math.h>
#include <string.h>

double chart_at(const chart_scale *s, double value) {
  return s->from + (value - s->low) / (s->high - s->low) * (s->to - s->from);
}

/* ---- round steps ---- */

static double finite(double value) {
  return isfinite(value) ? value : 0;
}

/* The first of 1, 2, 5, 10 times a power of ten that is not below `least`. */
static double round_step(double least) {
  static const double steps[] = {1, 2, 5, 10};
  const double slack = 1 + 1e-9; /* the power of ten may be off by its last bit */
  double ten = pow(10, floor(log10(least)));
  for (int i = 0; i < 3; i++)
    if (steps[i] * ten * slack >= least) return steps[i] * ten;
  return 10 * ten;
}

static double next_step(double step) {
  return round_step(step * 1.5);
}

static int decimals_of(double step) {
  int decimals = (int)ceil(-log10(step) - 1e-9);
  return decimals < 0 ? 0 : decimals > 9 ? 9 : decimals;
}

void chart_ticks_over(double low, double high, int most, bool whole, chart_ticks *out) {
  low = finite(low);
  high = finite(high);
  if (high < low) high = low;
  double span = high - low;
  /* Values that are all alike still have a scale: one around them. */
  if (span <= 1e-9 * fmax(fabs(high), 1)) span = fmax(fabs(high) * 1e-3, whole ? 1 : 1e-3);
  double step = round_step(span / (most - 1));
  if (whole) step = fmax(step, 1);
  double first, last;
  for (;; step = next_step(step)) {
    first = floor(low / step + 1e-9);
    last = ceil(high / step - 1e-9);
    if (last <= first) last = first + 1;
    if (last - first + 1 <= most) break;
  }
  *out =
      (chart_ticks){.count = (int)(last - first) + 1, .step = step, .decimals = decimals_of(step)};
  for (int i = 0; i < out->count; i++) out->value[i] = (first + i) * step;
}

/* ---- numbers ---- */

const char *chart_number(arena *a, double value, int decimals) {
  text plain, out;
  text_init(&plain, a, 400);
  text_init(&out, a, 600);
  text_fixed(&plain, value, decimals);
  const char *p = plain.data;
  if (*p == '-') text_char(&out, *p++);
  size_t whole = strspn(p, "0123456789");
  for (size_t i = 0; i < whole; i++) {
    if (i > 0 && (whole - i) % 3 == 0) text_char(&out, ',');
    text_char(&out, p[i]);
  }
  text_put(&out, p + whole);
  return out.data;
}

chart_money chart_money_of(const report *r, double most, const char *per) {
  static const struct {
    double divisor;
    const char *word;
  } sizes[] = {
      {1, ""}, {1e3, "thousand "}, {1e6, "million "}, {1e9, "billion "}, {1e12, "trillion "}};
  enum { SIZES = sizeof sizes / sizeof sizes[0], WIDEST = 120 };
  const double six_digits = 999999;
  int i = 0;
  while (i + 1 < SIZES && fabs(most) / sizes[i].divisor > six_digits) i++;
  const char *currency = r->prices ? r->prices->currency : "";
  const chart_lettering *l = &chart_letters[CHART_SMALL];
  currency = svg_text_cut(r->arena, currency, l->size, l->bold, WIDEST);
  return (chart_money){sizes[i].divisor, text_format(r->arena, "%s%s%s%s", sizes[i].word, currency,
                                                     per ? " per " : "", per ? per : "")};
}

const char *chart_area_name(const report *r) {
  return r->units == UNITS_US ? "ft2" : "m2";
}

double chart_per_area(const report *r, double per_m2) {
  return r->units == UNITS_US ? per_m2 * UNITS_M2_PER_FT2 : per_m2;
}

/* ---- axes ---- */

static const double number_gap = 6; /* between frame and numbers */

void chart_axis_y(chart *c, const chart_frame *f, const chart_ticks *t, const char *title) {
  double size = chart_letters[CHART_SMALL].size;
  double top = f->y.to, left = f->x.from;
  svg_group(&c->svg, "c-grid");
  for (int i = 0; i < t->count; i++) {
    double y = chart_at(&f->y, t->value[i]);
    svg_line(&c->svg, left, y, f->x.to, y, NULL);
  }
  svg_group_end(&c->svg);
  for (int i = 0; i < t->count; i++)
    chart_label(c, left - number_gap, chart_at(&f->y, t->value[i]) + 0.35 * size, SVG_END,
                CHART_SMALL, chart_number(c->report->arena, t->value[i], t->decimals));
  if (title)
    chart_label(c, CHART_EDGE, top - number_gap - 0.9 * size, SVG_START, CHART_SMALL,
                chart_cut(c, CHART_SMALL, title, CHART_WIDTH - 2 * CHART_EDGE));
}

/* Numbers and title stand on these lines below the frame. */
static double number_line(const chart_frame *f) {
  return f->y.from + number_gap + chart_letters[CHART_SMALL].size;
}

static void put_x_title(chart *c, const chart_frame *f, const char *title) {
  if (!title) return;
  double most = f->x.to - CHART_EDGE;
  chart_label(c, f->x.to, number_line(f) + 1.45 * chart_letters[CHART_SMALL].size, SVG_END,
              CHART_SMALL, chart_cut(c, CHART_SMALL, title, most));
}

static void base_line(chart *c, const chart_frame *f) {
  svg_line(&c->svg, f->x.from, f->y.from, f->x.to, f->y.from, "c-axis");
}

/* Writes the number under x where there is room. */
static void put_number(chart *c, const chart_frame *f, double x, const char *number) {
  const double apart_px = 3;
  chart_box b = chart_text_box(x, number_line(f), SVG_MIDDLE, CHART_SMALL, number);
  chart_box with_room = {b.x - apart_px, b.y, b.width + 2 * apart_px, b.height};
  if (!chart_is_free(c, &with_room)) return;
  chart_label(c, x, number_line(f), SVG_MIDDLE, CHART_SMALL, number);
}

void chart_axis_x(chart *c, const chart_frame *f, const chart_ticks *t, const char *title) {
  const double tick = 4;
  base_line(c, f);
  for (int i = 0; i < t->count; i++) {
    double x = chart_at(&f->x, t->value[i]);
    svg_line(&c->svg, x, f->y.from, x, f->y.from + tick, "c-axis");
    put_number(c, f, x, chart_number(c->report->arena, t->value[i], t->decimals));
  }
  put_x_title(c, f, title);
}

/* The octaves are 63, 125, ... 4000 Hz: every third band from the second on. */
void chart_axis_bands(chart *c, const chart_frame *f) {
  enum { OCTAVE = 3, FIRST_OCTAVE = 1 };
  base_line(c, f);
  for (int i = 0; i < BANDS; i++) {
    bool octave = i % OCTAVE == FIRST_OCTAVE;
    double x = chart_at(&f->x, i);
    svg_line(&c->svg, x, f->y.from, x, f->y.from + (octave ? 6 : 3), "c-axis");
    if (octave) put_number(c, f, x, text_of(c->report->arena, bands_hz[i], 0));
  }
  put_x_title(c, f, "third-octave band from 50 to 5000, Hz");
}

/* ---- labels beside a frame ---- */

/* Labels that touch, and move together. */
typedef struct spread_group {
  double start; /* of its first label */
  double sum;   /* of what its labels want their first one's place to be */
  int first, count;
} spread_group;

static void set_start(spread_group *g, double pitch, double top, double bottom) {
  double last = bottom - (g->count - 1) * pitch;
  g->start = fmax(top, fmin(last, g->sum / g->count));
}

/* Joins the last group to the one before while it would stand on it. Returns how many are left. */
static int join_groups(spread_group *group, int groups, double pitch, double top, double bottom) {
  for (;; groups--) {
    spread_group *last = &group[groups - 1];
    set_start(last, pitch, top, bottom);
    if (groups == 1) return groups;
    spread_group *before = last - 1;
    if (last->start >= before->start + before->count * pitch) return groups;
    before->sum += last->sum - last->count * before->count * pitch;
    before->count += last->count;
  }
}

/* Each group's mean stays with the mean of what its labels want: the least squares of moves. */
void chart_spread(double *y, int count, double pitch, double top, double bottom) {
  enum { MOST = 64 };
  spread_group group[MOST];
  int order[MOST], groups = 0;
  if (count > MOST) count = MOST;
  for (int i = 0; i < count; i++) {
    int at = i;
    for (; at > 0 && y[order[at - 1]] > y[i]; at--) order[at] = order[at - 1];
    order[at] = i;
  }
  for (int i = 0; i < count; i++) {
    group[groups] = (spread_group){.sum = y[order[i]], .first = i, .count = 1};
    groups = join_groups(group, groups + 1, pitch, top, bottom);
  }
  for (int g = 0; g < groups; g++)
    for (int k = 0; k < group[g].count; k++)
      y[order[group[g].first + k]] = group[g].start + k * pitch;
}
