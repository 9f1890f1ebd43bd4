#include "report/chart_plan.h"

#include "report/chart_plane.h"
#include "report/view.h"

/* ---- cost over the number of types ---- */

static const char *money_words(const report *r, long long cents) {
  text t;
  text_init(&t, r->arena, 200);
  text_cents(&t, cents, true);
  text_putf(&t, " %s", r->prices ? r->prices->currency : "");
  return t.data;
}

static bool has_cost(const chart_types_point *p) {
  return p->solved == CHART_FOUND || p->solved == CHART_PROVEN;
}

static void put_point_words(const report *r, const chart_types_point *p, text *t) {
  const char *noun = p->types == 1 ? "type" : "types";
  text_putf(t, " %d %s: ", p->types, noun);
  if (p->solved == CHART_INFEASIBLE)
    text_put(t, "no plan;");
  else if (p->solved == CHART_UNSOLVED)
    text_put(t, "not solved in time;");
  else
    text_putf(t, "%s%s;", money_words(r, p->cost_cents),
              p->solved == CHART_FOUND ? ", not proven cheapest" : "");
}

const char *chart_types_words(const report *r, const chart_types_data *d) {
  text t;
  text_init(&t, r->arena, 8000);
  text_put(&t, "The least cost of the project with at most so many wall types:");
  for (int i = 0; i < d->count; i++) put_point_words(r, &d->point[i], &t);
  if (d->count == 0) text_put(&t, " nothing was solved;");
  t.data[t.len - 1] = '.';
  if (d->chosen > 0)
    text_putf(&t, " The plan has %d and costs %s.", d->chosen, money_words(r, d->chosen_cents));
  if (d->budget_cents > 0) text_putf(&t, " The budget is %s.", money_words(r, d->budget_cents));
  return t.data;
}

static const double mark_radius = 4.5;

static double currency_of(long long cents) {
  return (double)cents / 100;
}

static void set_ranges(const chart_types_data *d, chart_plane_head *head) {
  head->x = head->money = chart_range_none;
  for (int i = 0; i < d->count; i++) {
    chart_range_add(&head->x, d->point[i].types);
    if (has_cost(&d->point[i])) chart_range_add(&head->money, currency_of(d->point[i].cost_cents));
  }
  if (d->chosen > 0) {
    chart_range_add(&head->x, d->chosen);
    chart_range_add(&head->money, currency_of(d->chosen_cents));
  }
  if (d->budget_cents > 0) chart_range_add(&head->money, currency_of(d->budget_cents));
  if (head->x.low > head->x.high) return;
  chart_range_add(&head->x, head->x.low - 1);
  chart_range_add(&head->x, head->x.high + 1);
}

static void add_point(chart_plane *p, double *xy, int *n, int types, long long cents) {
  double *at = xy + 2 * *n;
  at[0] = chart_plane_x(p, types);
  at[1] = chart_plane_y(p, currency_of(cents));
  if (*n > 0) chart_take_line(&p->chart, at[-2], at[-1], at[0], at[1]);
  ++*n;
}

/* The plan itself may have more types than were tried apart. */
static void draw_curve(chart_plane *p, const report *r, const chart_types_data *d) {
  double *xy = arena_array(r->arena, 2 * ((size_t)d->count + 1), sizeof *xy);
  int n = 0, last = 0;
  for (int i = 0; i < d->count; i++) {
    last = d->point[i].types;
    if (has_cost(&d->point[i])) add_point(p, xy, &n, last, d->point[i].cost_cents);
  }
  if (d->chosen > last) add_point(p, xy, &n, d->chosen, d->chosen_cents);
  if (n > 1) svg_polyline(&p->chart.svg, xy, n, "c-step");
}

/* Numbers of types without a plan stand at the foot. */
static void draw_points(chart_plane *p, const report *r, const chart_types_data *d) {
  chart *c = &p->chart;
  double foot = p->frame.y.from - 2 * mark_radius;
  for (int i = 0; i < d->count; i++) {
    const chart_types_point *k = &d->point[i];
    bool cost = has_cost(k);
    double x = chart_plane_x(p, k->types);
    double y = cost ? chart_plane_y(p, currency_of(k->cost_cents)) : foot;
    chart_mark mark = k->solved == CHART_PROVEN ? CHART_DOT : cost ? CHART_RING : CHART_CROSS;
    if (k->solved == CHART_UNSOLVED) mark = CHART_DIAMOND;
    const char *css_class = k->solved == CHART_PROVEN       ? "c-full"
                            : cost                          ? "c-open"
                            : k->solved == CHART_INFEASIBLE ? "c-fail"
                                                            : "c-other";
    text hint;
    text_init(&hint, r->arena, 200);
    put_point_words(r, k, &hint);
    chart_put_mark(c, mark, x, y, mark_radius, css_class, hint.data + 1);
    chart_take_mark(c, x, y, mark_radius);
  }
}

static void draw_chosen(chart_plane *p, const chart_types_data *d) {
  if (d->chosen <= 0) return;
  double x = chart_plane_x(p, d->chosen), y = chart_plane_y(p, currency_of(d->chosen_cents));
  chart_put_mark(&p->chart, CHART_DOT, x, y, mark_radius + 1.5, "c-best", NULL);
  chart_take_mark(&p->chart, x, y, mark_radius + 1.5);
}

static void label_points(chart_plane *p, const report *r, const chart_types_data *d) {
  if (d->chosen > 0)
    chart_label_near(&p->chart, chart_plane_x(p, d->chosen),
                     chart_plane_y(p, currency_of(d->chosen_cents)), mark_radius + 4, CHART_STRONG,
                     text_format(r->arena, "the plan: %s", money_words(r, d->chosen_cents)));
  for (int i = 0; i < d->count; i++) {
    const chart_types_point *k = &d->point[i];
    if (!has_cost(k) || k->types == d->chosen) continue;
    chart_label_near(
        &p->chart, chart_plane_x(p, k->types), chart_plane_y(p, currency_of(k->cost_cents)),
        mark_radius + 3, CHART_SMALL,
        chart_number(r->arena, currency_of(k->cost_cents) / p->money.divisor, p->y.decimals));
  }
}

static int keys_of(const chart_types_data *d, chart_key key[5]) {
  static const chart_key all[] = {
      [CHART_UNSOLVED] = {KEY_MARK, CHART_DIAMOND, "c-other", NULL, "not solved in time"},
      [CHART_INFEASIBLE] = {KEY_MARK, CHART_CROSS, "c-fail", NULL, "no plan with so few"},
      [CHART_FOUND] = {KEY_MARK, CHART_RING, "c-open", NULL, "found, not proven cheapest"},
      [CHART_PROVEN] = {KEY_MARK, CHART_DOT, "c-full", NULL, "proven cheapest"}};
  int n = 0;
  for (int s = CHART_PROVEN; s >= CHART_UNSOLVED; s--) {
    bool used = false;
    for (int i = 0; i < d->count; i++) used = used || (int)d->point[i].solved == s;
    if (used) key[n++] = all[s];
  }
  if (d->chosen > 0) key[n++] = (chart_key){KEY_MARK, CHART_DOT, "c-best", NULL, "the plan"};
  return n;
}

void chart_types(const report *r, const char *id, const chart_types_data *d, text *out) {
  chart_key key[5];
  chart_plane *p = arena_alloc(r->arena, sizeof *p);
  chart_plane_head head = {.id = id,
                           .title = "Cost of the project over the number of wall types",
                           .words = chart_types_words(r, d),
                           .x_title = "most wall types",
                           .y_words = "cost of the project",
                           .whole = true,
                           .key = key,
                           .keys = keys_of(d, key),
                           .height = 300};
  set_ranges(d, &head);
  chart_plane_begin(p, r, &head, out);
  draw_curve(p, r, d);
  if (d->budget_cents > 0) chart_plane_level(p, currency_of(d->budget_cents), "budget");
  draw_points(p, r, d);
  draw_chosen(p, d);
  label_points(p, r, d);
  chart_end(&p->chart);
}

/* ---- cost by type and by storey ---- */

static chart_bars parts_bars(const report *r, const char *by, const chart_plan_part *part,
                             int count) {
  chart_bar *bar = arena_array(r->arena, (size_t)count, sizeof *bar);
  for (int i = 0; i < count; i++)
    bar[i] = (chart_bar){
        part[i].label,
        {part[i].walls_cents, part[i].goods_cents, part[i].setup_cents, part[i].floor_cents}};
  return (chart_bars){.title = text_format(r->arena, "Cost by %s", by),
                      .lead = text_format(r->arena, "The cost of the project by %s:", by),
                      .parts = 4,
                      .part_name = {"walls", "bought for the whole project", "set-up of types",
                                    "floor under walls"},
                      .shares = true,
                      .bar = bar,
                      .count = count};
}

const char *chart_plan_cost_words(const report *r, const char *by, const chart_plan_part *part,
                                  int count) {
  chart_bars b = parts_bars(r, by, part, count);
  return chart_bars_words(r, &b);
}

void chart_plan_cost(const report *r, const char *id, const char *by, const chart_plan_part *part,
                     int count, text *out) {
  chart_bars b = parts_bars(r, by, part, count);
  chart_bars_draw(r, id, &b, out);
}
