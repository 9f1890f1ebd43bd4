#include "report/chart_bars.h"

#include <math.h>

#include "report/view.h"

/* ---- rows ---- */

static long long total_of(const chart_bars *b, const chart_bar *bar) {
  long long sum = 0;
  for (int i = 0; i < b->parts; i++) sum += bar->cents[i];
  return sum;
}

/* The rows that are drawn: those beyond the most are one. */
static chart_bars gathered(const report *r, const chart_bars *b) {
  chart_bars out = *b;
  if (b->count <= CHART_MAX_BARS) return out;
  chart_bar *bar = arena_array(r->arena, CHART_MAX_BARS, sizeof *bar);
  chart_bar *rest = &bar[CHART_MAX_BARS - 1];
  for (int i = 0; i < CHART_MAX_BARS - 1; i++) bar[i] = b->bar[i];
  for (int i = CHART_MAX_BARS - 1; i < b->count; i++)
    for (int k = 0; k < b->parts; k++) rest->cents[k] += b->bar[i].cents[k];
  rest->label = text_format(r->arena, "%d more", b->count - CHART_MAX_BARS + 1);
  out.bar = bar;
  out.count = CHART_MAX_BARS;
  return out;
}

/* Cents are exact here: view_money would take them through a double. */
static const char *money_words(const report *r, long long cents) {
  text t;
  text_init(&t, r->arena, 200);
  text_cents(&t, cents, true);
  text_putf(&t, " %s", r->prices ? r->prices->currency : "");
  return t.data;
}

static double share_of(const chart_bars *b, const chart_bar *bar) {
  double all = 0;
  for (int i = 0; i < b->count; i++) all += (double)total_of(b, &b->bar[i]);
  return all > 0 ? 100 * (double)total_of(b, bar) / all : 0;
}

static const char *difference_words(const report *r, const chart_bar *bar) {
  long long less = bar->cents[0] - bar->cents[1];
  if (less == 0) return "no change";
  return text_format(r->arena, "%s %s", money_words(r, less < 0 ? -less : less),
                     less < 0 ? "more" : "less");
}

static const char *figure_of(const report *r, const chart_bars *b, const chart_bar *bar) {
  if (b->paired) return difference_words(r, bar);
  const char *money = money_words(r, total_of(b, bar));
  if (!b->shares) return money;
  return text_format(r->arena, "%s, %s %%", money, text_of(r->arena, share_of(b, bar), 0));
}

static int parts_in(const chart_bars *b, const chart_bar *bar) {
  int n = 0;
  for (int i = 0; i < b->parts; i++) n += bar->cents[i] != 0;
  return n;
}

const char *chart_bars_words(const report *r, const chart_bars *given) {
  chart_bars b = gathered(r, given);
  text t;
  text_init(&t, r->arena, 64000);
  text_put(&t, b.lead);
  for (int i = 0; i < b.count; i++) {
    const chart_bar *bar = &b.bar[i];
    text_putf(&t, " %s: %s", bar->label, figure_of(r, &b, bar));
    bool named = b.paired || parts_in(&b, bar) > 1;
    for (int k = 0, put = 0; named && k < b.parts; k++) {
      if (!b.paired && bar->cents[k] == 0) continue;
      text_putf(&t, "%s%s %s", put++ ? ", " : " (", b.part_name[k], money_words(r, bar->cents[k]));
    }
    text_put(&t, named ? ");" : ";");
  }
  if (b.count == 0) text_put(&t, " Nothing to show.");
  if (b.count > 0) t.data[t.len - 1] = '.';
  return t.data;
}

/* ---- the picture ---- */

static const char *const part_class[CHART_MAX_PARTS] = {"c-one", "c-two", "c-three", "c-four"};

enum { WORDS_LINE = 15, BAR = 15, THIN_BAR = 9, ROW_APART = 11, KEY_APART = 8 };

typedef struct picture {
  chart chart;
  const chart_bars *bars;
  double left, right, most; /* greatest amount */
} picture;

static double bar_height(const chart_bars *b) {
  return b->paired ? b->parts * (THIN_BAR + 2) : BAR;
}

static double most_of(const chart_bars *b) {
  double most = 1;
  for (int i = 0; i < b->count; i++) {
    if (!b->paired) most = fmax(most, (double)total_of(b, &b->bar[i]));
    for (int k = 0; k < b->parts; k++) most = fmax(most, (double)b->bar[i].cents[k]);
  }
  return most;
}

static double length_of(const picture *p, long long cents) {
  return cents > 0 ? (double)cents / p->most * (p->right - p->left) : 0;
}

/* The amount of a part inside of it, where that has room. */
static void put_inside(picture *p, int part, double x, double y, double length, long long cents) {
  const report *r = p->chart.report;
  enum { ROOM = 10 };
  text t;
  text_init(&t, r->arena, 100);
  text_cents(&t, cents, true);
  if (chart_text_width(CHART_INSIDE, t.data) + ROOM > length) return;
  chart_letter l = part == 0 ? CHART_INSIDE : CHART_SMALL;
  chart_label(&p->chart, x + length / 2, y + 0.5 * BAR + 0.36 * chart_letters[l].size, SVG_MIDDLE,
              l, t.data);
}

static void draw_stacked(picture *p, const chart_bar *bar, double y) {
  double x = p->left;
  bool several = parts_in(p->bars, bar) > 1;
  for (int k = 0; k < p->bars->parts; k++) {
    double length = length_of(p, bar->cents[k]);
    if (length <= 0) continue;
    svg_rect(&p->chart.svg, x, y, length, BAR, part_class[k]);
    if (several) put_inside(p, k, x, y, length, bar->cents[k]);
    x += length;
  }
}

static void draw_paired(picture *p, const chart_bar *bar, double y) {
  for (int k = 0; k < p->bars->parts; k++, y += THIN_BAR + 2) {
    double length = length_of(p, bar->cents[k]);
    if (length > 0) svg_rect(&p->chart.svg, p->left, y, length, THIN_BAR, part_class[k]);
  }
}

static void draw_row(picture *p, const chart_bar *bar, double y) {
  chart *c = &p->chart;
  const double apart = 14, line = y + 11;
  const char *figure =
      chart_cut(c, CHART_PLAIN, figure_of(c->report, p->bars, bar), 0.6 * (p->right - p->left));
  double room = p->right - p->left - apart - chart_text_width(CHART_PLAIN, figure);
  chart_label(c, p->right, line, SVG_END, CHART_PLAIN, figure);
  chart_label(c, p->left, line, SVG_START, CHART_PLAIN,
              chart_cut(c, CHART_PLAIN, bar->label, room));
  if (p->bars->paired)
    draw_paired(p, bar, y + WORDS_LINE);
  else
    draw_stacked(p, bar, y + WORDS_LINE);
}

static int key_of(const chart_bars *b, chart_key key[CHART_MAX_PARTS]) {
  int count = 0;
  for (int k = 0; k < b->parts && b->parts > 1; k++) {
    bool used = b->paired;
    for (int i = 0; i < b->count && !used; i++) used = b->bar[i].cents[k] != 0;
    if (used)
      key[count++] =
          (chart_key){.kind = KEY_AREA, .css_class = part_class[k], .words = b->part_name[k]};
  }
  return count;
}

void chart_bars_draw(const report *r, const char *id, const chart_bars *given, text *out) {
  chart_bars b = gathered(r, given);
  picture p = {.bars = &b,
               .left = CHART_EDGE + 2,
               .right = CHART_WIDTH - CHART_EDGE - 2,
               .most = most_of(&b)};
  chart_key key[CHART_MAX_PARTS];
  int keys = key_of(&b, key);
  double top = CHART_EDGE;
  if (keys > 0) top += chart_key_height(key, keys, p.left, p.right) + KEY_APART;
  double pitch = WORDS_LINE + bar_height(&b) + ROW_APART;
  double rows = b.count > 0 ? b.count * pitch : WORDS_LINE + ROW_APART;
  chart_begin(&p.chart, r, id, b.title, chart_bars_words(r, given), top + rows + CHART_EDGE, out);
  chart_put_key(&p.chart, key, keys, p.left, CHART_EDGE, p.right);
  for (int i = 0; i < b.count; i++) draw_row(&p, &b.bar[i], top + i * pitch);
  if (b.count == 0)
    chart_label(&p.chart, p.left, top + 11, SVG_START, CHART_PLAIN, "nothing to show");
  chart_end(&p.chart);
}
