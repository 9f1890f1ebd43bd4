#include "report/chart_cloud.h"

#include "report/chart_plane.h"
#include "report/view.h"

/* ---- points ---- */

static double per_area(const report *r, long long cents) {
  return chart_per_area(r,
                        (double)cents / 100 / (r->brief->length_m * cost_built_height_m(r->brief)));
}

static double cost_of(const report *r, const assessment *x) {
  return per_area(r, x->cost.total_cents + x->cost.floor_value_cents);
}

static double rating_of_wall(const report *r, const assessment *x) {
  return cloud_rating(r->brief, x->numbers.promised_hundredth);
}

/* What the scale of sound is. */
static const char *sound_title(const report *r) {
  const brief *b = r->brief;
  if (b->target_count != 1) return "dB beyond all targets";
  const target *t = &b->targets[0];
  text out;
  text_init(&out, r->arena, 400);
  text_putf(&out, "%s that the wall would meet%s", sound_metric_names[t->metric],
            t->basis == BASIS_FIELD ? " in the field" : " in the laboratory");
  if (t->composite && b->opening_count > 0) text_put(&out, ", openings included");
  if (t->evidence != EVIDENCE_PUBLISHED)
    text_putf(&out, ", %s %% sure", text_of(r->arena, 100 * t->confidence, 0));
  return out.data;
}

static double asked_rating(const report *r) {
  return r->brief->target_count == 1 ? r->brief->targets[0].value : 0;
}

/* Walls that break a rule: cheaper than the chosen one, or nearest where none is chosen. */
static int failing_count(const explanation *e) {
  return e->chosen ? e->cheaper_count : e->nearest_count;
}

static assessment *const *failing(const explanation *e) {
  return e->chosen ? e->cheaper : e->nearest;
}

/* Of them, those far short of what is asked would squeeze the rest of the picture. */
static bool is_near(const report *r, const explanation *e, const assessment *x) {
  const double most_short = 8;
  return !e->chosen || rating_of_wall(r, x) >= asked_rating(r) - most_short;
}

/* ---- words ---- */

static void put_wall_words(const report *r, const assessment *x, text *t) {
  text_put(t, view_money(r, cost_of(r, x), chart_area_name(r)));
  text_put(t, " at ");
  text_number(t, rating_of_wall(r, x), 1);
}

static void put_edge_words(const report *r, const cloud *c, text *t) {
  const cloud_point *low = &c->edge[0], *high = &c->edge[c->edge_count - 1];
  text_putf(t, " The stepped edge, which no wall passes, goes from %s at ",
            view_money(r, per_area(r, low->cost_cents), chart_area_name(r)));
  text_number(t, low->rating, 1);
  text_putf(t, " to %s at ", view_money(r, per_area(r, high->cost_cents), chart_area_name(r)));
  text_number(t, high->rating, 1);
  text_char(t, '.');
}

static void put_failing_words(const report *r, const explanation *e, text *t) {
  int count = failing_count(e), far = 0;
  if (count == 0) return;
  for (int i = 0; i < count; i++) far += !is_near(r, e, failing(e)[i]);
  text_putf(t, " %d %s", count, e->chosen ? "cheaper" : "near miss");
  text_putf(t, "%s %s a rule",
            e->chosen    ? (count == 1 ? " wall" : " walls")
            : count == 1 ? ""
                         : "es",
            count == 1 ? "breaks" : "break");
  if (far < count) text_put(t, " (crosses)");
  if (far > 0) text_putf(t, "; %d of them too far left to be drawn", far);
  text_char(t, '.');
}

/* What the points stand for. */
static const char *sample_words(const report *r, const cloud *c) {
  text t;
  text_init(&t, r->arena, 400);
  text_put(&t, "Points: ");
  if (c->count < c->walls) text_putf(&t, "%d of ", c->count);
  text_put(&t, "the ");
  view_count(&t, c->walls);
  text_putf(&t, " walls that keep every rule%s.",
            c->count < c->walls ? ", taken at even steps from the list of them" : "");
  return t.data;
}

const char *chart_cloud_words(const report *r, const explanation *e, const cloud *c) {
  text t;
  text_init(&t, r->arena, 8000);
  text_putf(&t, "Cost of a wall over its sound: %s.", sound_title(r));
  if (!e->chosen || c->walls == 0) text_put(&t, " No wall keeps the brief.");
  if (c->count > 0) text_putf(&t, " %s", sample_words(r, c));
  if (c->edge_count > 0) put_edge_words(r, c, &t);
  if (e->chosen) {
    text_put(&t, " The chosen wall costs ");
    put_wall_words(r, e->chosen, &t);
    text_char(&t, '.');
  }
  for (int i = 0; i < e->runner_count; i++) {
    text_putf(&t, " Runner-up %d: ", i + 1);
    put_wall_words(r, e->runners[i], &t);
    text_char(&t, '.');
  }
  put_failing_words(r, e, &t);
  if (r->brief->floor_area_value_per_m2 > 0)
    text_put(&t, " Costs include the value of the floor under the wall.");
  return t.data;
}

/* ---- the picture ---- */

typedef struct picture {
  chart_plane plane;
  const report *report;
  const explanation *why;
  const cloud *cloud;
} picture;

static const double point_radius = 2, mark_radius = 4.5;

static void add_wall(const report *r, const assessment *x, chart_plane_head *head) {
  if (!x || x->takeoff.missing) return;
  chart_range_add(&head->x, rating_of_wall(r, x));
  chart_range_add(&head->money, cost_of(r, x));
}

static void set_ranges(const report *r, const explanation *e, const cloud *c,
                       chart_plane_head *head) {
  head->x = head->money = chart_range_none;
  for (int i = 0; i < c->count; i++) {
    chart_range_add(&head->x, c->point[i].rating);
    chart_range_add(&head->money, per_area(r, c->point[i].cost_cents));
  }
  for (int i = 0; i < c->edge_count; i++) {
    chart_range_add(&head->x, c->edge[i].rating);
    chart_range_add(&head->money, per_area(r, c->edge[i].cost_cents));
  }
  add_wall(r, e->chosen, head);
  for (int i = 0; i < e->runner_count; i++) add_wall(r, e->runners[i], head);
  for (int i = 0; i < failing_count(e); i++)
    if (is_near(r, e, failing(e)[i])) add_wall(r, failing(e)[i], head);
  chart_range_add(&head->x, asked_rating(r));
}

static double x_of(const picture *p, double rating) {
  return chart_plane_x(&p->plane, rating);
}

static double y_of(const picture *p, long long cents) {
  return chart_plane_y(&p->plane, per_area(p->report, cents));
}

static void draw_points(picture *p) {
  svg *s = &p->plane.chart.svg;
  svg_group(s, "c-cloud");
  for (int i = 0; i < p->cloud->count; i++) {
    const cloud_point *k = &p->cloud->point[i];
    svg_circle(s, x_of(p, k->rating), y_of(p, k->cost_cents), point_radius, NULL);
  }
  svg_group_end(s);
}

/* Up to the rating of a wall of the edge, what is promised costs what that wall does. */
static void draw_edge(picture *p) {
  const cloud *c = p->cloud;
  svg *s = &p->plane.chart.svg;
  if (c->edge_count == 0) return;
  chart_stair stair = {.x = x_of(p, asked_rating(p->report))};
  svg_path(s, "c-step");
  for (int i = 0; i < c->edge_count; i++)
    chart_plane_step(&p->plane, &stair, x_of(p, c->edge[i].rating), y_of(p, c->edge[i].cost_cents));
  svg_path_end(s);
}

static void draw_wall(picture *p, const assessment *x, chart_mark m, const char *css_class,
                      chart_letter letter, const char *label) {
  if (x->takeoff.missing) return;
  chart *c = &p->plane.chart;
  double at = x_of(p, rating_of_wall(p->report, x));
  double y = chart_plane_y(&p->plane, cost_of(p->report, x));
  chart_put_mark(c, m, at, y, mark_radius, css_class, x->line);
  chart_take_mark(c, at, y, mark_radius);
  if (label) chart_label_near(c, at, y, mark_radius + 3, letter, label);
}

static void draw_walls(picture *p) {
  const explanation *e = p->why;
  for (int i = 0; i < failing_count(e); i++)
    if (is_near(p->report, e, failing(e)[i]))
      draw_wall(p, failing(e)[i], CHART_CROSS, "c-fail", CHART_SMALL, NULL);
  /* All marks first, so that no label stands on a later one. */
  for (int i = 0; i < e->runner_count; i++)
    draw_wall(p, e->runners[i], CHART_DIAMOND, "c-other", CHART_SMALL, NULL);
  if (e->chosen) draw_wall(p, e->chosen, CHART_DOT, "c-best", CHART_STRONG, "chosen");
  for (int i = 0; i < e->runner_count; i++) {
    const assessment *x = e->runners[i];
    if (x->takeoff.missing) continue;
    chart_label_near(&p->plane.chart, x_of(p, rating_of_wall(p->report, x)),
                     chart_plane_y(&p->plane, cost_of(p->report, x)), mark_radius + 3, CHART_SMALL,
                     text_format(p->report->arena, "%d", i + 1));
  }
}

static void draw_limits(picture *p) {
  const report *r = p->report;
  const brief *b = r->brief;
  const char *asked = "all targets";
  if (b->target_count == 1)
    asked = text_format(r->arena, "asked: %s %s", sound_metric_names[b->targets[0].metric],
                        text_of(r->arena, b->targets[0].value, 0));
  chart_plane_upright(&p->plane, asked_rating(r), asked);
  if (!b->cost_per_m2.has_max || b->floor_area_value_per_m2 > 0) return;
  double most = chart_per_area(r, b->cost_per_m2.max);
  if (most / p->plane.money.divisor <= p->plane.frame.y.high)
    chart_plane_level(&p->plane, most, "most that it may cost");
}

static int keys_of(const explanation *e, const cloud *c, chart_key key[5]) {
  int n = 0;
  if (c->count > 0)
    key[n++] = (chart_key){KEY_MARK, CHART_DOT, "c-cloud", NULL, "a wall that keeps every rule"};
  if (c->edge_count > 0) key[n++] = (chart_key){KEY_LINE, CHART_DOT, "c-step", NULL, "least cost"};
  if (e->chosen) key[n++] = (chart_key){KEY_MARK, CHART_DOT, "c-best", NULL, "chosen"};
  if (e->runner_count > 0)
    key[n++] = (chart_key){KEY_MARK, CHART_DIAMOND, "c-other", NULL, "runner-up"};
  if (failing_count(e) > 0)
    key[n++] = (chart_key){KEY_MARK, CHART_CROSS, "c-fail", NULL,
                           e->chosen ? "cheaper, breaks a rule" : "nearest miss"};
  return n;
}

void chart_cloud(const report *r, const char *id, const explanation *e, const cloud *c, text *out) {
  chart_key key[5];
  picture *p = arena_alloc(r->arena, sizeof *p);
  p->report = r;
  p->why = e;
  p->cloud = c;
  chart_plane_head head = {.id = id,
                           .title = "Cost over sound of the walls that keep the brief",
                           .words = chart_cloud_words(r, e, c),
                           .x_title = sound_title(r),
                           .y_words = "cost",
                           .per = chart_area_name(r),
                           .key = key,
                           .keys = keys_of(e, c, key),
                           .note = c->count > 0 ? sample_words(r, c) : NULL,
                           .height = 350};
  set_ranges(r, e, c, &head);
  chart_plane_begin(&p->plane, r, &head, out);
  draw_points(p);
  draw_edge(p);
  draw_limits(p);
  draw_walls(p);
  chart_end(&p->plane.chart);
}
