/* The workbook of `ladder`. */
#include "report/sheets.h"
#include "report/sheets_parts.h"
#include "report/view_ladder.h"

static const char given[] = "given wall";

/* ---- rungs ---- */

enum {
  RUNG_RATING,
  RUNG_SERVES,
  RUNG_REACHES,
  RUNG_WORTH,
  RUNG_COST,
  RUNG_PER_AREA,
  RUNG_FLOOR,
  RUNG_WITH_FLOOR,
  RUNG_POINTS,
  RUNG_STEP,
  RUNG_PER_POINT,
  RUNG_THICKNESS,
  RUNG_MASS,
  RUNG_FIRE,
  RUNG_HEIGHT,
  RUNG_RESTS_ON,
  RUNG_EXACT,
  RUNG_SD,
  RUNG_LINE,
  RUNG_CHANGES,
  RUNG_CARE,
  RUNG_EXTRA,
  RUNG_FROM_HAVE,
  RUNG_COLUMNS
};

static void put_heads(const report *r, const ladder_answer *l, sheet *s) {
  const sheet_column columns[RUNG_COLUMNS] = {
      [RUNG_RATING] = {view_ladder_metric(r, l), 8, SHEET_COUNT},
      [RUNG_SERVES] = {"Cheapest from", 9, SHEET_COUNT},
      [RUNG_REACHES] = {"Meets", 7, SHEET_COUNT},
      [RUNG_WORTH] = {"Worth taking", 8, SHEET_TEXT},
      [RUNG_COST] = {sheets_money_head(r, "Cost"), 13, SHEET_MONEY},
      [RUNG_PER_AREA] = {sheets_rate_head(r, "Cost"), 11, SHEET_MONEY},
      [RUNG_FLOOR] = {sheets_money_head(r, "Floor value"), 13, SHEET_MONEY},
      [RUNG_WITH_FLOOR] = {sheets_money_head(r, "With floor"), 13, SHEET_MONEY},
      [RUNG_POINTS] = {"Points above", 8, SHEET_COUNT},
      [RUNG_STEP] = {sheets_money_head(r, "Step"), 12, SHEET_MONEY},
      [RUNG_PER_POINT] = {sheets_money_head(r, "A point"), 12, SHEET_MONEY},
      [RUNG_THICKNESS] = {sheets_thickness_head(r, "Thickness"), 11, sheets_thickness_style(r)},
      [RUNG_MASS] = {sheets_mass_head(r, "Mass"), 9, SHEET_QUANTITY},
      [RUNG_FIRE] = {"Fire, min", 7, SHEET_COUNT},
      [RUNG_HEIGHT] = {sheets_length_head(r, "Height up to"), 10, SHEET_QUANTITY},
      [RUNG_RESTS_ON] = {"Rests on", 12, SHEET_TEXT},
      [RUNG_EXACT] = {"Predicted, exact", 10, SHEET_TENTHS},
      [RUNG_SD] = {"Standard deviation, dB", 10, SHEET_TENTHS},
      [RUNG_LINE] = {"Wall", 60, SHEET_WRAP},
      [RUNG_CHANGES] = {"Changes from the rung below", 50, SHEET_WRAP},
      [RUNG_CARE] = {"Caution", 40, SHEET_WRAP},
      [RUNG_EXTRA] = {sheets_money_head(r, "Beyond the given wall"), 13, SHEET_MONEY},
      [RUNG_FROM_HAVE] = {"Changes from the given wall", 50, SHEET_WRAP}};
  sheet_table(s, 0, columns, l->terms.have ? RUNG_COLUMNS : RUNG_EXTRA);
  s->keep = 1;
}

static void put_costs(const report *r, const ladder_rung *g, const char *area, const sheet *takeoffs,
                      sheet *s) {
  const assessment *x = g->wall;
  const char *cost = sheet_at(s, s->row, RUNG_COST);
  sheet_put_formula(s, sheets_takeoff_total(s, takeoffs, sheet_at(s, s->row, RUNG_RATING)),
                    (double)x->cost.total_cents / 100);
  sheet_put_formula(s, text_format(r->arena, "=%s/%s", cost, area),
                    view_per_area(r, view_cost_of(r, x).per_m2));
  sheet_put_cents(s, x->cost.floor_value_cents);
  sheet_put_formula(s, text_format(r->arena, "=%s+%s", cost, sheet_at(s, s->row, RUNG_FLOOR)),
                    (double)g->cost_cents / 100);
}

/* What it takes from the row above. */
static void put_step(const report *r, const ladder_rung *g, sheet *s) {
  enum { STEP_COLUMNS = 3 };
  if (g->points == 0) {
    sheet_skip(s, STEP_COLUMNS);
    return;
  }
  int row = s->row;
  sheet_put_formula(s, text_format(r->arena, "=%s-%s", sheet_at(s, row, RUNG_RATING),
                                   sheet_at(s, row - 1, RUNG_RATING)),
                    g->points);
  sheet_put_formula(s, text_format(r->arena, "=%s-%s", sheet_at(s, row, RUNG_WITH_FLOOR),
                                   sheet_at(s, row - 1, RUNG_WITH_FLOOR)),
                    (double)g->step_cents / 100);
  sheet_put_formula(s, text_format(r->arena, "=%s/%s", sheet_at(s, row, RUNG_STEP),
                                   sheet_at(s, row, RUNG_POINTS)),
                    (double)g->step_cents / 100 / g->points);
}

static void put_wall(const report *r, const ladder_answer *l, const ladder_rung *g, sheet *s) {
  const assessment *x = g->wall;
  view_predicted p = view_ladder_predicted(r, l, x);
  sheet_put_figure(s, sheets_thickness(r, x->thickness_m));
  sheet_put_figure(s, sheets_mass(r, x->mass_kg_m2));
  sheet_put_if(s, x->fire.minutes > 0, x->fire.minutes);
  sheet_put_figure(s, sheets_length(r, x->height.limit_m));
  sheet_put(s, p.published ? "published" : "predicted");
  sheet_put_figure(s, p.exact);
  sheet_put_figure(s, p.sd);
  sheet_put(s, x->line);
  sheet_put(s, g->points > 0 ? changes_words(r->arena, &g->changes) : "");
  sheet_put(s, view_ladder_alone(g) ? view_ladder_flanking : "");
}

static void put_rungs(const report *r, const ladder_answer *l, const char *area, const sheet *takeoffs,
                      const char *have, sheet_book *out) {
  sheet *s = sheet_book_add(out, "Candidates");
  put_heads(r, l, s);
  for (int i = 0; i < l->count; i++) {
    const ladder_rung *g = &l->rung[i];
    sheet_put_figure(s, g->rating);
    sheet_put_figure(s, g->serves_from);
    sheet_put_figure(s, g->reaches);
    sheet_put(s, g->worth ? "yes" : "no");
    put_costs(r, g, area, takeoffs, s);
    put_step(r, g, s);
    put_wall(r, l, g, s);
    if (have) {
      sheet_put_formula(
          s, text_format(r->arena, "=%s-%s", sheet_at(s, s->row, RUNG_WITH_FLOOR), have),
          (double)g->extra_cents / 100);
      sheet_put(s, changes_words(r->arena, &g->from_have));
    }
    sheet_end_row(s);
  }
}

/* ---- single changes of the given wall ---- */

enum { EDIT_COST = 4, EDIT_FLOOR = 5, EDIT_WITH_FLOOR = 6 };

static void put_edits(const report *r, const ladder_answer *l, const char *have,
                      sheet_book *out) {
  const sheet_column columns[] = {{"Change", 50, SHEET_WRAP},
                                  {view_ladder_metric(r, l), 8, SHEET_COUNT},
                                  {"Points gained", 8, SHEET_COUNT},
                                  {sheets_money_head(r, "Beyond the given wall"), 13, SHEET_MONEY},
                                  [EDIT_COST] = {sheets_money_head(r, "Cost"), 13, SHEET_MONEY},
                                  [EDIT_FLOOR] = {sheets_money_head(r, "Floor value"), 13, SHEET_MONEY},
                                  [EDIT_WITH_FLOOR] = {sheets_money_head(r, "With floor"), 13, SHEET_MONEY},
                                  {sheets_thickness_head(r, "Thickness"), 11, sheets_thickness_style(r)},
                                  {"Wall", 60, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Single changes");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int i = 0; i < l->edit_count; i++) {
    const ladder_edit *e = &l->edit[i];
    sheet_put(s, changes_words(r->arena, &e->change));
    sheet_put_figure(s, e->reaches);
    sheet_put_figure(s, e->reaches - l->terms.have_reaches);
    sheet_put_formula(
        s, text_format(r->arena, "=%s-%s", sheet_at(s, s->row, EDIT_WITH_FLOOR), have),
        (double)e->extra_cents / 100);
    sheet_put_cents(s, e->wall->cost.total_cents);
    sheet_put_cents(s, e->wall->cost.floor_value_cents);
    sheet_put_formula(s, text_format(r->arena, "=%s+%s", sheet_at(s, s->row, EDIT_COST),
                                     sheet_at(s, s->row, EDIT_FLOOR)),
                      (double)e->wall->numbers.cost_cents / 100);
    sheet_put_figure(s, sheets_thickness(r, e->wall->thickness_m));
    sheet_put(s, e->wall->line);
    sheet_end_row(s);
  }
  sheet_end_table(s);
}

/* ---- together ---- */

static void put_reach(const report *r, const ladder_answer *l, sheet *s) {
  const ladder_terms *t = &l->terms;
  (void)sheets_fact(s, "Rungs mean", view_ladder_aim(r, l));
  for (int i = 0; i < r->brief->target_count; i++)
    if (i != t->climbs)
      (void)sheets_fact(s, "Every rung keeps", view_target(r, &r->brief->targets[i]));
  if (l->highest == 0)
    (void)sheets_fact(s, "Answer",
                      "no wall keeps the other rules of this brief, whatever its rating");
  else {
    (void)sheets_value(s, "The cheapest wall meets", SHEET_COUNT, l->lowest);
    (void)sheets_value(s, "The most that any meets", SHEET_COUNT, l->highest);
  }
  if (t->from > 0) (void)sheets_value(s, "Asked from", SHEET_COUNT, t->from);
  if (t->to > 0) (void)sheets_value(s, "Asked up to", SHEET_COUNT, t->to);
  (void)sheets_value(s, "Walls judged", SHEET_COUNT, (double)l->walls);
  sheets_unpriced(r, s);
}

/* Answers the cell with its cost, floor included; NULL without a given wall. */
static const char *put_have(const report *r, const ladder_answer *l, const sheet *takeoffs, sheet *s) {
  const assessment *x = l->terms.have;
  if (!x) return NULL;
  sheets_heading(s, "The given wall");
  (void)sheets_fact(s, "Wall", x->line);
  (void)sheets_fact(s, "Name", x->name);
  if (l->terms.have_reaches > 0)
    (void)sheets_value(s, text_format(r->arena, "Meets %s", view_ladder_metric(r, l)), SHEET_COUNT,
                       l->terms.have_reaches);
  else
    (void)sheets_fact(s, "Meets", "no value of this brief");
  (void)sheets_value(s, sheets_thickness_head(r, "Thickness"), sheets_thickness_style(r),
                     sheets_thickness(r, x->thickness_m));
  for (int i = 0; i < x->broken_count; i++)
    (void)sheets_fact(s, text_format(r->arena, "Breaks %s",
                                     rule_name(r->arena, r->brief, x->broke[i].rule)),
                      text_format(r->arena, "asks %s; has %s", x->broke[i].limit,
                                  view_clause(r, x->broke[i].found)));
  const char *key = text_format(r->arena, "\"%s\"", given);
  int cost = sheets_formula(s, sheets_money_head(r, "Cost"), SHEET_MONEY,
                            sheets_takeoff_total(s, takeoffs, key), (double)x->cost.total_cents / 100);
  int floor = sheets_cents(s, sheets_money_head(r, "Floor value"), x->cost.floor_value_cents);
  int both = sheets_formula(s, sheets_money_head(r, "With floor"), SHEET_MONEY,
                            text_format(r->arena, "=%s+%s", sheet_at(s, cost, 1),
                                        sheet_at(s, floor, 1)),
                            (double)x->numbers.cost_cents / 100);
  return sheets_cell_of(s, both);
}

static const sheet *put_takeoffs(const report *r, const ladder_answer *l, sheet_book *out) {
  int count = 0;
  sheets_wall *walls = arena_array(r->arena, (size_t)l->count + 1, sizeof *walls);
  if (l->terms.have) walls[count++] = (sheets_wall){given, 0, l->terms.have};
  for (int i = 0; i < l->count; i++)
    walls[count++] = (sheets_wall){NULL, l->rung[i].rating, l->rung[i].wall};
  return sheets_takeoffs(r, text_format(r->arena, "%s of the rung", view_ladder_metric(r, l)),
                         walls, count, out);
}

static void put_none(const report *r, const explanation *e, const char *area, sheet *s,
                     sheet_book *out) {
  sheets_conflicts(r, e->conflicts, e->conflict_count, s);
  sheet *all = sheets_candidates(r, out);
  sheets_others(r, "comes near", e->nearest, e->nearest_count, area, NULL, all);
  sheet_end_table(all);
}

/* Rules with the target at the value that they are priced at; without one the target that climbs is
 * no rule. */
static void put_rules(const report *r, const ladder_answer *l, const char *area, sheet_book *out) {
  brief *b = arena_alloc(r->arena, sizeof *b);
  report priced = *r;
  *b = *r->brief;
  priced.brief = b;
  if (l->priced_at > 0)
    b->targets[l->terms.climbs].value = l->priced_at;
  else
    b->targets[l->terms.climbs] = b->targets[--b->target_count];
  sheets_rules(&priced, NULL, l->prices, l->price_count, NULL, area, out);
}

void sheets_ladder(const report *r, const ladder_answer *l, sheet_book *out) {
  const char *caution[VIEW_LADDER_CAUTIONS];
  sheet_book_init(out, r->arena, r->units == UNITS_SI);
  sheet *s = sheets_summary("What each rating costs", "Brief", r->brief->title, out);
  put_reach(r, l, s);
  const char *area = sheets_size(r, s);
  const sheet *takeoffs = put_takeoffs(r, l, out);
  const char *have = put_have(r, l, takeoffs, s);
  if (l->why)
    put_none(r, l->why, area, s, out);
  else
    put_rungs(r, l, area, takeoffs, have, out);
  if (have) put_edits(r, l, have, out);
  if (l->priced_at > 0)
    (void)sheets_value(s, text_format(r->arena, "Rules are priced at %s", view_ladder_metric(r, l)),
                       SHEET_COUNT, l->priced_at);
  put_rules(r, l, area, out);
  sheets_brief(r, l->terms.climbs, out);
  sheets_cautions(s, caution, view_ladder_all_cautions(r, l, caution));
  sheets_rests_on_brief(r, s);
}
