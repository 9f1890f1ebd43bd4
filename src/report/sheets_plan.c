/* The workbook of `plan`: the summary, the schedule, types and classes. */
#include "report/sheets_plan.h"

#include <limits.h>
#include <math.h>

static double money(long long cents) {
  return (double)cents / 100;
}

const char *sheets_plan_sum(const sheet *s, const sheet *rows, int key, int column) {
  return sheet_sum_where(s, rows, key, sheet_at(s, s->row, 0), column, rows->filter_last);
}

void sheets_plan_total(sheet *s, const double *value) {
  sheet_text(s, s->row, 0, SHEET_LABEL, "Total");
  for (int i = 1; i < s->columns; i++) {
    if (!isfinite(value[i])) continue;
    sheet_style style = s->style[i] == SHEET_MONEY ? SHEET_TOTAL : s->style[i];
    sheet_formula(s, s->row, i, style, sheet_sum(s, i, s->head + 1, s->row - 1), value[i]);
  }
}

static double *no_sums(const report *r, int columns) {
  double *value = arena_array(r->arena, (size_t)columns, sizeof *value);
  for (int i = 0; i < columns; i++) value[i] = NAN;
  return value;
}

/* ---- the schedule ---- */

static void put_schedule_heads(const report *r, sheet *s) {
  const sheet_column columns[ROW_COLUMNS] = {
      [ROW_ID] = {"Wall", 12, SHEET_TEXT},
      [ROW_STOREY] = {"Storey", 10, SHEET_TEXT},
      [ROW_FROM] = {"From", 18, SHEET_TEXT},
      [ROW_TO] = {"To", 18, SHEET_TEXT},
      [ROW_COUNT] = {"Walls", 7, SHEET_COUNT},
      [ROW_LENGTH] = {sheets_length_head(r, "Length of one"), 10, SHEET_QUANTITY},
      [ROW_HEIGHT] = {sheets_length_head(r, "Height"), 9, SHEET_QUANTITY},
      [ROW_CLASS] = {"Class", 7, SHEET_TEXT},
      [ROW_TYPE] = {"Type", 8, SHEET_TEXT},
      [ROW_MIRRORED] = {"Mirrored", 9, SHEET_TEXT},
      [ROW_LINE] = {"Wall line as built, side A towards From", 60, SHEET_WRAP},
      [ROW_STC] = {"STC", 6, SHEET_COUNT},
      [ROW_RESTS_ON] = {"Rests on", 12, SHEET_TEXT},
      [ROW_MARGIN] = {"Margin, dB", 9, SHEET_QUANTITY},
      [ROW_SURE] = {"Sure of the target", 9, SHEET_WHOLE_SHARE},
      [ROW_SURE_FIELD] = {"Sure in the field", 9, SHEET_WHOLE_SHARE},
      [ROW_FIRE] = {"Fire, min", 7, SHEET_COUNT},
      [ROW_THICKNESS] = {sheets_thickness_head(r, "Thickness"), 11, sheets_thickness_style(r)},
      [ROW_RUN] = {sheets_length_head(r, "Run of all"), 10, SHEET_QUANTITY},
      [ROW_AREA] = {sheets_area_head(r, "Area of all"), 11, SHEET_QUANTITY},
      [ROW_FLOOR_AREA] = {sheets_area_head(r, "Floor under them"), 11, SHEET_QUANTITY},
      [ROW_LIST] = {sheets_money_head(r, "Cost at list prices"), 13, SHEET_MONEY},
      [ROW_WALLS] = {sheets_money_head(r, "Cost by itself"), 13, SHEET_MONEY},
      [ROW_GOODS] = {sheets_money_head(r, "Share of goods"), 13, SHEET_MONEY},
      [ROW_COST] = {sheets_money_head(r, "Cost"), 13, SHEET_MONEY},
      [ROW_FLOOR] = {sheets_money_head(r, "Floor value"), 13, SHEET_MONEY},
      [ROW_BASIS] = {"Where target and fire come from", 50, SHEET_WRAP},
      [ROW_NOTE] = {"Note", 40, SHEET_WRAP}};
  sheet_table(s, 0, columns, ROW_COLUMNS);
  s->keep = 1;
}

static const char *note_of(const report *r, const plan_answer *p, int of_class) {
  const plan_place *at = &p->place[of_class];
  const brief *b = &p->schedule->classes[of_class].demand;
  text t;
  if (at->type == PLAN_NONE) {
    for (int i = 0; i < p->unplanned_count; i++)
      if (p->unplanned[i].class_of == of_class)
        return text_format(r->arena, "no type: %s", view_plan_reason(r, p, &p->unplanned[i]));
    return "no plan was found";
  }
  text_init(&t, r->arena, 16 << 10);
  for (int i = 0; i < at->wall->broken_count; i++)
    text_putf(&t, "%s%s", i ? ", " : "kept by its mark; misses ",
              rule_name(r->arena, b, at->wall->broke[i].rule));
  return t.data;
}

static void put_row_sound(const plan_answer *p, int of_class, sheet *s) {
  const plan_place *at = &p->place[of_class];
  bool asked = p->schedule->classes[of_class].demand.target_count > 0;
  sheet_put_figure(s, at->wall->ratings.stc);
  sheet_put(s, view_rests_on(at->wall));
  sheet_put_if(s, asked, at->margin_db);
  sheet_put_if(s, asked, sheets_sureness(view_plan_probability(p, of_class)));
  sheet_put_if(s, asked, sheets_sureness(at->in_field));
}

static void put_row_plan(const report *r, const plan_answer *p, int row, sheet *s) {
  const plan_row *as = &p->row[row];
  int c = p->schedule->wall[row].of_class;
  const assessment *x = p->place[c].wall;
  sheet_put(s, p->type[as->type].name);
  sheet_put(s, as->mirrored ? "yes" : "no");
  sheet_put(s, as->line);
  put_row_sound(p, c, s);
  sheet_put_if(s, x->fire.minutes > 0, x->fire.minutes);
  sheet_put_figure(s, sheets_thickness(r, x->thickness_m));
  sheet_put_figure(s, sheets_length(r, as->run_m));
  sheet_put_figure(s, sheets_area(r, as->area_m2));
  sheet_put_figure(s, sheets_area(r, as->floor_m2));
  sheet_put_cents(s, as->list_cents);
  sheet_put_cents(s, as->money.walls);
  sheet_put_cents(s, as->money.goods);
  sheet_put_formula(s, text_format(r->arena, "=%s+%s", sheet_at(s, s->row, ROW_WALLS),
                                   sheet_at(s, s->row, ROW_GOODS)),
                    money(as->money.walls + as->money.goods));
  sheet_put_cents(s, as->money.floor);
}

static void put_row_unplanned(const report *r, const schedule_wall *w, sheet *s) {
  sheet_skip(s, ROW_RUN - ROW_TYPE);
  sheet_put_figure(s, sheets_length(r, w->count * w->length_m));
  sheet_skip(s, ROW_BASIS - ROW_AREA);
}

static void put_schedule_total(const report *r, const plan_answer *p, sheet *s) {
  double *value = no_sums(r, ROW_COLUMNS);
  long long list = 0;
  double run_m = 0, area_m2 = 0;
  int walls = 0;
  for (int i = 0; i < p->schedule->count; i++) {
    const schedule_wall *w = &p->schedule->wall[i];
    walls += w->count;
    run_m += w->count * w->length_m;
    if (p->row[i].type == PLAN_NONE) continue;
    list += p->row[i].list_cents;
    area_m2 += p->row[i].area_m2;
  }
  value[ROW_COUNT] = walls;
  value[ROW_RUN] = sheets_length(r, run_m);
  value[ROW_AREA] = sheets_area(r, area_m2);
  value[ROW_FLOOR_AREA] = sheets_area(r, p->floor_m2);
  value[ROW_LIST] = money(list);
  value[ROW_WALLS] = money(p->money.walls);
  value[ROW_GOODS] = money(p->money.goods);
  value[ROW_COST] = money(p->money.walls + p->money.goods);
  value[ROW_FLOOR] = money(p->money.floor);
  sheets_plan_total(s, value);
}

static sheet *put_schedule(const report *r, const plan_answer *p, sheet_book *out) {
  sheet *s = sheet_book_add(out, "Schedule");
  put_schedule_heads(r, s);
  for (int i = 0; i < p->schedule->count; i++) {
    const schedule_wall *w = &p->schedule->wall[i];
    sheet_put(s, w->id);
    sheet_put(s, w->storey);
    sheet_put(s, w->from);
    sheet_put(s, w->to);
    sheet_put_figure(s, w->count);
    sheet_put_figure(s, sheets_length(r, w->length_m));
    sheet_put_figure(s, sheets_length(r, w->height_m));
    sheet_put(s, view_plan_class(r, w->of_class));
    if (p->row[i].type != PLAN_NONE)
      put_row_plan(r, p, i, s);
    else
      put_row_unplanned(r, w, s);
    sheet_put(s, w->basis);
    sheet_put(s, note_of(r, p, w->of_class));
    sheet_end_row(s);
  }
  sheet_end_table(s);
  put_schedule_total(r, p, s);
  return s;
}

/* ---- types ---- */

enum {
  TYPE_NAME,
  TYPE_LINE,
  TYPE_MARK,
  TYPE_KEPT,
  TYPE_WALLS,
  TYPE_ROWS,
  TYPE_RUN,
  TYPE_AREA,
  TYPE_FLOOR_AREA,
  TYPE_COST_WALLS,
  TYPE_COST_GOODS,
  TYPE_SETUP,
  TYPE_FLOOR,
  TYPE_TOTAL,
  TYPE_PER_AREA,
  TYPE_WITHOUT,
  TYPE_STC,
  TYPE_RW,
  TYPE_C,
  TYPE_CTR,
  TYPE_OITC,
  TYPE_RESTS_ON,
  TYPE_BRIDGED,
  TYPE_THICKNESS,
  TYPE_MASS,
  TYPE_FIRE,
  TYPE_FIRE_BASIS,
  TYPE_HEIGHT,
  TYPE_JUDGED_AS,
  TYPE_CLASSES,
  TYPE_IDS,
  TYPE_COLUMNS
};

static void put_type_heads(const report *r, sheet *s) {
  const sheet_column columns[TYPE_COLUMNS] = {
      [TYPE_NAME] = {"Type", 8, SHEET_TEXT},
      [TYPE_LINE] = {"Wall line", 60, SHEET_WRAP},
      [TYPE_MARK] = {"Mark of the drawings", 12, SHEET_TEXT},
      [TYPE_KEPT] = {"Kept by its mark", 9, SHEET_TEXT},
      [TYPE_WALLS] = {"Walls", 7, SHEET_COUNT},
      [TYPE_ROWS] = {"Rows of the schedule", 9, SHEET_COUNT},
      [TYPE_RUN] = {sheets_length_head(r, "Run"), 10, SHEET_QUANTITY},
      [TYPE_AREA] = {sheets_area_head(r, "Area"), 11, SHEET_QUANTITY},
      [TYPE_FLOOR_AREA] = {sheets_area_head(r, "Floor under it"), 11, SHEET_QUANTITY},
      [TYPE_COST_WALLS] = {sheets_money_head(r, "Walls by themselves"), 13, SHEET_MONEY},
      [TYPE_COST_GOODS] = {sheets_money_head(r, "Share of goods"), 13, SHEET_MONEY},
      [TYPE_SETUP] = {sheets_money_head(r, "Setup"), 12, SHEET_MONEY},
      [TYPE_FLOOR] = {sheets_money_head(r, "Floor value"), 13, SHEET_MONEY},
      [TYPE_TOTAL] = {sheets_money_head(r, "Total"), 13, SHEET_MONEY},
      [TYPE_PER_AREA] = {sheets_rate_head(r, "Cost"), 11, SHEET_MONEY},
      [TYPE_WITHOUT] = {sheets_money_head(r, "The plan without it costs more by"), 14, SHEET_MONEY},
      [TYPE_STC] = {"STC", 6, SHEET_COUNT},
      [TYPE_RW] = {"Rw", 6, SHEET_COUNT},
      [TYPE_C] = {"C", 6, SHEET_COUNT},
      [TYPE_CTR] = {"Ctr", 6, SHEET_COUNT},
      [TYPE_OITC] = {"OITC", 7, SHEET_COUNT},
      [TYPE_RESTS_ON] = {"Rests on", 12, SHEET_TEXT},
      [TYPE_BRIDGED] = {"STC if the mount is bridged", 11, SHEET_COUNT},
      [TYPE_THICKNESS] = {sheets_thickness_head(r, "Thickness"), 11, sheets_thickness_style(r)},
      [TYPE_MASS] = {sheets_mass_head(r, "Mass"), 9, SHEET_QUANTITY},
      [TYPE_FIRE] = {"Fire, min", 7, SHEET_COUNT},
      [TYPE_FIRE_BASIS] = {"Fire basis", 40, SHEET_WRAP},
      [TYPE_HEIGHT] = {sheets_length_head(r, "Height up to"), 10, SHEET_QUANTITY},
      [TYPE_JUDGED_AS] = {"Judged as class", 9, SHEET_TEXT},
      [TYPE_CLASSES] = {"Classes", 20, SHEET_WRAP},
      [TYPE_IDS] = {"Its walls", 40, SHEET_WRAP}};
  sheet_table(s, 0, columns, TYPE_COLUMNS);
  s->keep = 1;
}

static void put_type_money(const report *r, const plan_used *u, const sheet *rows, sheet *s) {
  const plan_money *m = &u->money;
  int row = s->row;
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_TYPE, ROW_COUNT), u->walls);
  sheet_put_figure(s, u->row_count);
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_TYPE, ROW_RUN), sheets_length(r, u->run_m));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_TYPE, ROW_AREA),
                    sheets_area(r, u->area_m2));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_TYPE, ROW_FLOOR_AREA),
                    sheets_area(r, u->floor_m2));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_TYPE, ROW_WALLS), money(m->walls));
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_TYPE, ROW_GOODS), money(m->goods));
  sheet_put_cents(s, m->setup);
  sheet_put_formula(s, sheets_plan_sum(s, rows, ROW_TYPE, ROW_FLOOR), money(m->floor));
  sheet_put_formula(s, text_format(r->arena, "=SUM(%s:%s)", sheet_at(s, row, TYPE_COST_WALLS),
                                   sheet_at(s, row, TYPE_FLOOR)),
                    money(plan_money_total(m)));
  sheet_put_formula(s, text_format(r->arena, "=(%s+%s)/%s", sheet_at(s, row, TYPE_COST_WALLS),
                                   sheet_at(s, row, TYPE_COST_GOODS), sheet_at(s, row, TYPE_AREA)),
                    view_per_area(r, view_plan_per_m2(m, u->area_m2)));
}

static const char *class_words(const report *r, const plan_answer *p, int type) {
  text t;
  text_init(&t, r->arena, 4000);
  for (int c = 0; c < p->schedule->class_count; c++)
    if (p->place[c].type == type) text_putf(&t, "%s%s", t.len ? ", " : "", view_plan_class(r, c));
  return t.data;
}

static void put_type_wall(const report *r, const plan_answer *p, int type, sheet *s) {
  const plan_used *u = &p->type[type];
  const assessment *x = u->as;
  const ratings *v = &x->ratings;
  sheet_put_figure(s, v->stc);
  sheet_put_figure(s, v->rw);
  sheet_put_figure(s, v->c);
  sheet_put_figure(s, v->ctr);
  sheet_put_figure(s, v->oitc);
  sheet_put(s, view_rests_on(x));
  sheet_put_if(s, x->mounted, x->short_predicted.ratings.stc);
  sheet_put_figure(s, sheets_thickness(r, x->thickness_m));
  sheet_put_figure(s, sheets_mass(r, x->mass_kg_m2));
  sheet_put_if(s, x->fire.minutes > 0, x->fire.minutes);
  sheet_put(s, x->fire.minutes > 0 ? x->fire.basis : "not shown");
  sheet_put_figure(s, sheets_length(r, x->height.limit_m));
  sheet_put(s, view_plan_class(r, u->judged_as));
  sheet_put(s, class_words(r, p, type));
  sheet_put(s, view_plan_all_ids(r, p, u->row, u->row_count));
}

static void put_type_total(const report *r, const plan_answer *p, sheet *s) {
  double *value = no_sums(r, TYPE_COLUMNS);
  double run_m = 0, area_m2 = 0;
  int walls = 0, rows = 0;
  for (int i = 0; i < p->type_count; i++) {
    walls += p->type[i].walls;
    rows += p->type[i].row_count;
    run_m += p->type[i].run_m;
    area_m2 += p->type[i].area_m2;
  }
  value[TYPE_WALLS] = walls;
  value[TYPE_ROWS] = rows;
  value[TYPE_RUN] = sheets_length(r, run_m);
  value[TYPE_AREA] = sheets_area(r, area_m2);
  value[TYPE_FLOOR_AREA] = sheets_area(r, p->floor_m2);
  value[TYPE_COST_WALLS] = money(p->money.walls);
  value[TYPE_COST_GOODS] = money(p->money.goods);
  value[TYPE_SETUP] = money(p->money.setup);
  value[TYPE_FLOOR] = money(p->money.floor);
  value[TYPE_TOTAL] = money(plan_money_total(&p->money));
  sheets_plan_total(s, value);
}

static const sheet *put_types(const report *r, const plan_answer *p, const sheet *rows,
                              sheet_book *out) {
  sheet *s = sheet_book_add(out, "Types");
  put_type_heads(r, s);
  for (int i = 0; i < p->type_count; i++) {
    const plan_used *u = &p->type[i];
    const plan_point *w = &u->without;
    sheet_put(s, u->name);
    sheet_put(s, u->line);
    sheet_put(s, u->mark);
    sheet_put(s, u->locked ? "yes" : "no");
    put_type_money(r, u, rows, s);
    if (w->done && !w->found)
      sheet_put(s, w->status == SOLVER_INFEASIBLE ? "no plan" : "not settled");
    else
      sheet_put_if(s, w->done, money(w->cost_cents - p->cost_cents));
    put_type_wall(r, p, i, s);
    sheet_end_row(s);
  }
  sheet_end_table(s);
  if (p->type_count > 0) put_type_total(r, p, s);
  return s;
}

/* ---- classes ---- */

static void put_classes(const report *r, const plan_answer *p, sheet_book *out) {
  const sheet_column columns[] = {{"Class", 8, SHEET_TEXT},
                                  {"What it asks", 70, SHEET_WRAP},
                                  {"Where target and fire come from", 50, SHEET_WRAP},
                                  {"Rows of the schedule", 10, SHEET_COUNT},
                                  {sheets_length_head(r, "Run"), 10, SHEET_QUANTITY},
                                  {"Type", 8, SHEET_TEXT},
                                  {"Wall line, side A as the class has it", 60, SHEET_WRAP},
                                  {"Note", 40, SHEET_WRAP},
                                  {"Its walls", 40, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Classes");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int c = 0; c < p->schedule->class_count; c++) {
    const schedule_class *k = &p->schedule->classes[c];
    const plan_place *at = &p->place[c];
    bool planned = at->type != PLAN_NONE;
    sheet_put(s, view_plan_class(r, c));
    sheet_put(s, view_plan_demand(r, p, c));
    sheet_put(s, k->basis);
    sheet_put_figure(s, k->count);
    sheet_put_figure(s, sheets_length(r, k->run_m));
    sheet_put(s, planned ? p->type[at->type].name : "");
    sheet_put(s, planned ? at->wall->line : "");
    sheet_put(s, note_of(r, p, c));
    sheet_put(s, view_plan_all_ids(r, p, k->wall, k->count));
    sheet_end_row(s);
  }
  sheet_end_table(s);
}

/* ---- the summary ---- */

static const char *verdict(const report *r, const plan_answer *p) {
  const char *aim = p->project->aim == AIM_MARGIN
                        ? "the best worst margin that the budget pays for, then the least cost"
                        : "the least cost";
  if (p->found)
    return text_format(r->arena, p->status == SOLVER_OPTIMAL ? "%s, proven" : "%s found in time, not proven",
                       aim);
  return p->status == SOLVER_INFEASIBLE ? "no plan keeps the rules of the project"
                                        : "no plan found in time; one may exist";
}

static const char *sum_of(const report *r, const sheet *from, int column) {
  int first = from->head + 1, last = from->filter_last > first ? from->filter_last : first;
  return text_format(r->arena, "=SUM(%s!%s:%s)", from->name, sheet_fixed_at(from, first, column),
                     sheet_fixed_at(from, last, column));
}

static void put_money(const report *r, const plan_answer *p, const sheet *rows,
                      const sheet *types, sheet *s) {
  sheets_heading(s, "Cost");
  int first = sheets_formula(s, sheets_money_head(r, "Walls by themselves"), SHEET_MONEY,
                             sum_of(r, rows, ROW_WALLS), money(p->money.walls));
  (void)sheets_formula(s, sheets_money_head(r, "Goods bought for the whole project"), SHEET_MONEY,
                       sum_of(r, rows, ROW_GOODS), money(p->money.goods));
  (void)sheets_formula(s, sheets_money_head(r, "Setup of types"), SHEET_MONEY,
                       sum_of(r, types, TYPE_SETUP), money(p->money.setup));
  int last = sheets_formula(s, sheets_money_head(r, "Floor value"), SHEET_MONEY,
                            sum_of(r, rows, ROW_FLOOR), money(p->money.floor));
  (void)sheets_formula(s, "Total", SHEET_TOTAL, sheet_sum(s, 1, first, last),
                       money(p->cost_cents));
  if (p->bound_cents != LLONG_MIN)
    (void)sheets_cents(s, sheets_money_head(r, "No plan costs less than"), p->bound_cents);
}

static void put_found(const report *r, const plan_answer *p, const sheet *rows,
                      const sheet *types, sheet *s) {
  put_money(r, p, rows, types, s);
  (void)sheets_formula(s, sheets_area_head(r, "Floor under the walls"), SHEET_QUANTITY,
                       sum_of(r, rows, ROW_FLOOR_AREA), sheets_area(r, p->floor_m2));
  if (p->against.done)
    (void)sheets_cents(s, sheets_money_head(r, "Saving against the drawings"),
                       view_plan_saving(&p->against));
  sheets_heading(s, "Sound");
  if (p->has_margin)
    (void)sheets_value(s, "Least margin, dB", SHEET_QUANTITY, p->worst_margin * 0.01);
  if (p->asked_walls > 0) {
    (void)sheets_value(s, "Walls with a sound target", SHEET_COUNT, p->asked_walls);
    (void)sheets_value(s, "of them expected to miss it in a laboratory", SHEET_TENTHS,
                       p->miss_laboratory);
    (void)sheets_value(s, "and in the field", SHEET_TENTHS, p->miss_field);
    (void)sheets_fact(s, "Which means", view_plan_misses(r, p));
  }
}

static void put_counts(const report *r, const plan_answer *p, sheet *s) {
  int walls = 0;
  for (int i = 0; i < p->schedule->count; i++) walls += p->schedule->wall[i].count;
  (void)sheets_fact(s, "Answer", verdict(r, p));
  (void)sheets_value(s, "Types", SHEET_COUNT, p->type_count);
  (void)sheets_value(s, "Rows of the schedule", SHEET_COUNT, p->schedule->count);
  (void)sheets_value(s, "Walls", SHEET_COUNT, walls);
  (void)sheets_value(s, "Classes of walls that ask the same", SHEET_COUNT, p->schedule->class_count);
  (void)sheets_value(s, "Rows without a type", SHEET_COUNT, p->unplanned_rows);
  (void)sheets_value(s, "Walls of the catalog looked at", SHEET_COUNT, (double)p->walls);
  (void)sheets_value(s, "Types put to the solver", SHEET_COUNT, p->candidates);
  sheets_unpriced(r, s);
  for (int i = 0; i < p->conflict_count; i++)
    (void)sheets_fact(s, i == 0 ? "In the way" : "",
                      text_format(r->arena, "%s cannot be had%s", view_plan_rules(r, p->conflict[i]),
                                  p->conflict[i] & (p->conflict[i] - 1) ? " together" : ""));
  const char *stop = view_plan_stop(r, p);
  if (stop[0] != '\0') (void)sheets_fact(s, "How many types", stop);
}

void sheets_plan(const report *r, const plan_answer *p, sheet_book *out) {
  const sheets_file files[] = {{p->project->file, p->project->crc},
                               {p->schedule->table->file, p->schedule->table->crc}};
  const char *caution[VIEW_MAX_PLAN_CAUTIONS];
  sheet_book_init(out, r->arena, r->units == UNITS_SI);
  sheet *s = sheets_summary("Wall types for a project", "Project", p->project->title, out);
  put_counts(r, p, s);
  const sheet *rows = put_schedule(r, p, out);
  const sheet *types = put_types(r, p, rows, out);
  put_classes(r, p, out);
  sheets_plan_curve(r, p, out);
  sheets_plan_rules(r, p, out);
  if (p->found) {
    put_found(r, p, rows, types, s);
    sheets_plan_buy(r, p, out);
    sheets_plan_storeys(r, p, rows, out);
    sheets_plan_sections(r, p, out);
    sheets_cautions(s, caution, view_plan_cautions(r, p, caution));
  }
  if (p->drawn_count > 0) sheets_plan_drawings(r, p, out);
  sheets_rests_on(r, files, SHEETS_COUNT(files), s);
}
