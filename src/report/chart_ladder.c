#include "report/chart_ladder.h"

#include "report/chart_plane.h"
#include "report/view_ladder.h"

static double cost_of(const report *r, const assessment *x, long long cents) {
  return chart_per_area(r, view_ladder_per_m2(x, cents));
}

static double rung_cost(const report *r, const ladder_rung *g) {
  return cost_of(r, g->wall, g->cost_cents);
}

/* ---- words ---- */

static void put_rung_words(const report *r, const ladder_answer *l, const ladder_rung *g, text *t) {
  view_predicted p = view_ladder_predicted(r, l, g->wall);
  text_putf(t, " %d costs %s", g->rating, view_money(r, rung_cost(r, g), chart_area_name(r)));
  text_put(t, p.published ? ", published;" : ", predicted ");
  if (p.published) return;
  text_number(t, p.exact, 1);
  text_char(t, ';');
}

static void put_hull_words(const ladder_answer *l, text *t) {
  text_put(t, " Filled marks and the dashed line: the rungs of the lower hull, where a further "
              "point is cheapest:");
  for (int i = 0, put = 0; i < l->count; i++)
    if (l->rung[i].worth) text_putf(t, "%s %d", put++ ? "," : "", l->rung[i].rating);
  text_char(t, '.');
}

const char *chart_ladder_words(const report *r, const ladder_answer *l) {
  text t;
  text_init(&t, r->arena, 32000);
  if (l->count == 0) return "No wall keeps the other rules: there is no rung to show.";
  text_putf(&t, "The least cost of each rating: %s.", view_ladder_aim(r, l));
  for (int i = 0; i < l->count; i++) put_rung_words(r, l, &l->rung[i], &t);
  t.data[t.len - 1] = '.';
  put_hull_words(l, &t);
  text_put(&t, " Diamonds: what the same wall is predicted to reach, assured or not.");
  if (r->brief->floor_area_value_per_m2 > 0)
    text_put(&t, " Costs include the value of the floor under the wall.");
  if (view_ladder_alone(&l->rung[l->count - 1]))
    text_putf(&t, " From %d on: %s.", LADDER_FLANKING_FROM, view_ladder_flanking);
  return t.data;
}

/* ---- the picture ---- */

typedef struct picture {
  chart_plane plane;
  const report *report;
  const ladder_answer *ladder;
} picture;

static const double mark_radius = 4;

static bool has_given(const ladder_answer *l) {
  return l->terms.have && l->terms.have_reaches > 0;
}

static double given_cost(const report *r, const ladder_answer *l) {
  const assessment *x = l->terms.have;
  return cost_of(r, x, x->cost.total_cents + x->cost.floor_value_cents);
}

/* The first rung serves all values below it too: only the nearest of them are drawn. */
static int first_from(const ladder_answer *l) {
  enum { DRAWN = 4 };
  const ladder_rung *g = &l->rung[0];
  return g->serves_from < g->rating - DRAWN ? g->rating - DRAWN : g->serves_from;
}

static void set_ranges(const report *r, const ladder_answer *l, chart_plane_head *head) {
  head->x = head->money = chart_range_none;
  for (int i = 0; i < l->count; i++) {
    const ladder_rung *g = &l->rung[i];
    view_predicted v = view_ladder_predicted(r, l, g->wall);
    chart_range_add(&head->x, i == 0 ? first_from(l) - 1 : g->rating);
    chart_range_add(&head->x, g->rating + 1);
    if (!v.published) chart_range_add(&head->x, v.exact);
    chart_range_add(&head->money, rung_cost(r, g));
  }
  if (!has_given(l)) return;
  chart_range_add(&head->x, l->terms.have_reaches - 1);
  chart_range_add(&head->money, given_cost(r, l));
}

/* Ratings from which on the wall alone is spoken of, where a rung is there. */
static void draw_zone(picture *p) {
  const ladder_answer *l = p->ladder;
  chart *c = &p->plane.chart;
  if (l->count == 0 || !view_ladder_alone(&l->rung[l->count - 1])) return;
  double left = chart_plane_x(&p->plane, LADDER_FLANKING_FROM), right = p->plane.frame.x.to;
  double top = p->plane.frame.y.to, size = chart_letters[CHART_SMALL].size;
  if (left < p->plane.frame.x.from) left = p->plane.frame.x.from;
  svg_rect(&c->svg, left, top, right - left, p->plane.frame.y.from - top, "c-zone");
  const char *words = "wall alone";
  chart_box b = chart_text_box(right - 4, top + size + 2, SVG_END, CHART_SMALL, words);
  if (b.x > left && chart_is_free(c, &b))
    chart_label(c, right - 4, top + size + 2, SVG_END, CHART_SMALL, words);
}

/* Every value asked for costs what the next rung does. */
static void draw_steps(picture *p) {
  const ladder_answer *l = p->ladder;
  svg *s = &p->plane.chart.svg;
  if (l->count == 0) return;
  chart_stair stair = {.x = chart_plane_x(&p->plane, first_from(l) - 1)};
  svg_path(s, "c-step");
  for (int i = 0; i < l->count; i++)
    chart_plane_step(&p->plane, &stair, chart_plane_x(&p->plane, l->rung[i].rating),
                     chart_plane_y(&p->plane, rung_cost(p->report, &l->rung[i])));
  svg_path_end(s);
}

static void draw_hull(picture *p) {
  const ladder_answer *l = p->ladder;
  double *xy = arena_array(p->report->arena, 2 * (size_t)l->count, sizeof *xy);
  int n = 0;
  for (int i = 0; i < l->count; i++) {
    if (!l->rung[i].worth) continue;
    xy[2 * n] = chart_plane_x(&p->plane, l->rung[i].rating);
    xy[2 * n + 1] = chart_plane_y(&p->plane, rung_cost(p->report, &l->rung[i]));
    if (n > 0)
      chart_take_line(&p->plane.chart, xy[2 * n - 2], xy[2 * n - 1], xy[2 * n], xy[2 * n + 1]);
    n++;
  }
  if (n > 1) svg_polyline(&p->plane.chart.svg, xy, n, "c-hull");
}

static const char *rung_hint(const picture *p, const ladder_rung *g) {
  const report *r = p->report;
  return text_format(r->arena, "%s %d: %s, %s", view_ladder_metric(r, p->ladder), g->rating,
                     view_money(r, rung_cost(r, g), chart_area_name(r)), g->wall->line);
}

static void draw_marks(picture *p) {
  const ladder_answer *l = p->ladder;
  chart *c = &p->plane.chart;
  for (int i = 0; i < l->count; i++) {
    const ladder_rung *g = &l->rung[i];
    view_predicted v = view_ladder_predicted(p->report, l, g->wall);
    double x = chart_plane_x(&p->plane, g->rating), at = chart_plane_x(&p->plane, v.exact);
    double y = chart_plane_y(&p->plane, rung_cost(p->report, g));
    if (!v.published) {
      svg_line(&c->svg, x, y, at, y, "c-lead");
      chart_put_mark(c, CHART_DIAMOND, at, y, mark_radius, "c-other", NULL);
      chart_take_mark(c, at, y, mark_radius);
    }
    chart_put_mark(c, g->worth ? CHART_DOT : CHART_RING, x, y, mark_radius,
                   g->worth ? "c-full" : "c-open", rung_hint(p, g));
    chart_take_mark(c, x, y, mark_radius);
  }
}

static void label_rungs(picture *p, bool worth) {
  const ladder_answer *l = p->ladder;
  for (int i = 0; i < l->count; i++) {
    const ladder_rung *g = &l->rung[i];
    if (g->worth != worth) continue;
    double cost = rung_cost(p->report, g);
    const char *words = chart_number(p->report->arena, cost / p->plane.money.divisor, 2);
    chart_label_near(&p->plane.chart, chart_plane_x(&p->plane, g->rating),
                     chart_plane_y(&p->plane, cost), mark_radius + 3,
                     worth ? CHART_STRONG : CHART_SMALL, words);
  }
}

static void draw_given(picture *p) {
  const ladder_answer *l = p->ladder;
  if (!has_given(l)) return;
  double x = chart_plane_x(&p->plane, l->terms.have_reaches);
  double y = chart_plane_y(&p->plane, given_cost(p->report, l));
  chart *c = &p->plane.chart;
  chart_put_mark(c, CHART_TRIANGLE, x, y, mark_radius + 1.5, "c-best", l->terms.have->line);
  chart_take_mark(c, x, y, mark_radius + 1.5);
  chart_label_near(c, x, y, mark_radius + 4, CHART_STRONG, "given wall");
}

static int keys_of(const ladder_answer *l, chart_key key[4]) {
  int n = 0;
  key[n++] = (chart_key){KEY_MARK, CHART_DOT, "c-full", NULL, "rung of the hull"};
  key[n++] = (chart_key){KEY_MARK, CHART_RING, "c-open", NULL, "other rung"};
  key[n++] = (chart_key){KEY_MARK, CHART_DIAMOND, "c-other", NULL, "the same wall, predicted"};
  if (has_given(l))
    key[n++] = (chart_key){KEY_MARK, CHART_TRIANGLE, "c-best", NULL, "the given wall"};
  return n;
}

void chart_ladder(const report *r, const char *id, const ladder_answer *l, text *out) {
  chart_key key[4];
  picture *p = arena_alloc(r->arena, sizeof *p);
  p->report = r;
  p->ladder = l;
  chart_plane_head head = {.id = id,
                           .title = "What each rating costs",
                           .words = chart_ladder_words(r, l),
                           .x_title = view_ladder_aim(r, l),
                           .y_words = "cost",
                           .per = chart_area_name(r),
                           .whole = true,
                           .key = key,
                           .keys = l->count > 0 ? keys_of(l, key) : 0,
                           .height = 350};
  set_ranges(r, l, &head);
  chart_plane_begin(&p->plane, r, &head, out);
  draw_zone(p);
  draw_steps(p);
  draw_hull(p);
  draw_marks(p);
  draw_given(p);
  label_rungs(p, true);
  label_rungs(p, false);
  chart_end(&p->plane.chart);
}
