/* The workbook of `pick`. */
#include "report/sheets.h"
#include "report/sheets_parts.h"

static const char *verdict(const explanation *e) {
  if (e->chosen)
    return e->status == SOLVER_OPTIMAL
               ? "the cheapest wall that keeps every rule of the brief, proven"
               : "the cheapest wall found within the time limit; a cheaper one may exist";
  return e->status == SOLVER_INFEASIBLE ? "no wall fits this brief"
                                        : "no wall found within the time limit; one may exist";
}

static void put_search(const report *r, const explanation *e, const pick_choice *proof, sheet *s) {
  (void)sheets_fact(s, "Answer", verdict(e));
  (void)sheets_value(s, "Walls judged", SHEET_COUNT, (double)e->walls);
  (void)sheets_value(s, "Walls put to the solver", SHEET_COUNT, e->frontier);
  if (proof->found) {
    (void)sheets_value(s, sheets_money_head(r, "Objective"), SHEET_MONEY, proof->objective);
    (void)sheets_value(s, sheets_money_head(r, "No wall costs less than"), SHEET_MONEY,
                       proof->bound);
  }
  sheets_unpriced(r, s);
}

/* ---- break-even ---- */

static double rate(const report *r, const explain_break_even *b, double price) {
  cost_line l = {.unit = b->unit, .rate = price};
  return view_quantity_of(r, &l).rate;
}

static void put_break_even(const report *r, const explanation *e, sheet_book *out) {
  const sheet_column columns[] = {{"Item", 22, SHEET_TEXT},
                                  {sheets_money_head(r, "Price"), 12, SHEET_RATE},
                                  {"per", 8, SHEET_TEXT},
                                  {"Cheapest from", 14, SHEET_RATE},
                                  {"below it this wall", 60, SHEET_WRAP},
                                  {"Cheapest up to", 14, SHEET_RATE},
                                  {"above it this wall", 60, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Break-even");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int i = 0; i < e->break_even_count; i++) {
    const explain_break_even *b = &e->break_even[i];
    cost_line l = {.unit = b->unit};
    sheet_put(s, b->item);
    sheet_put_figure(s, rate(r, b, b->price));
    sheet_put(s, view_quantity_of(r, &l).unit);
    if (b->has_low) {
      sheet_put_figure(s, rate(r, b, b->low));
      sheet_put(s, b->low_line);
    } else
      sheet_skip(s, 2);
    if (b->has_high) {
      sheet_put_figure(s, rate(r, b, b->high));
      sheet_put(s, b->high_line);
    }
    sheet_end_row(s);
  }
  sheet_end_table(s);
}

/* ---- together ---- */

static void put_chosen(const report *r, const explanation *e, sheet *s, sheet_book *out) {
  const assessment *x = e->chosen;
  const char *caution[VIEW_MAX_CAUTIONS];
  const char *area = sheets_size(r, s);
  sheets_wall_facts(r, x, s);
  sheets_wall_money(r, x, area, s, out);
  sheet *all = sheets_candidates(r, out);
  sheets_candidate(r, "chosen", x, area, x, all);
  sheets_others(r, "keeps every rule too", e->runners, e->runner_count, area, x, all);
  sheets_others(r, "cheaper, but fails", e->cheaper, e->cheaper_count, area, x, all);
  sheet_end_table(all);
  sheets_rules(r, x, e->prices, e->price_count, x->line, area, out);
  put_break_even(r, e, out);
  sheets_sound(r, x, out);
  sheets_cautions(s, caution, view_cautions(r, x, caution));
}

static void put_none(const report *r, const explanation *e, sheet *s, sheet_book *out) {
  sheets_conflicts(r, e->conflicts, e->conflict_count, s);
  const char *area = sheets_size(r, s);
  sheet *all = sheets_candidates(r, out);
  sheets_others(r, "comes near", e->nearest, e->nearest_count, area, NULL, all);
  sheet_end_table(all);
  sheets_rules(r, NULL, e->prices, e->price_count, NULL, area, out);
}

void sheets_pick(const report *r, const explanation *e, const pick_choice *proof,
                 sheet_book *out) {
  sheet_book_init(out, r->arena, r->units == UNITS_SI);
  sheet *s = sheets_summary(e->chosen ? "The wall for a brief" : "No wall for a brief", "Brief",
                            r->brief->title, out);
  if (e->chosen) (void)sheets_fact(s, "Wall", e->chosen->line);
  put_search(r, e, proof, s);
  if (e->chosen)
    put_chosen(r, e, s, out);
  else
    put_none(r, e, s, out);
  sheets_brief(r, CATALOG_NONE, out);
  sheets_rests_on_brief(r, s);
}
