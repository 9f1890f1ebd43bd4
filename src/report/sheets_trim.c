/* The workbook of `trim`. */
#include "report/sheets.h"
#include "report/sheets_parts.h"
#include "report/view_trim.h"

static const char specified[] = "specified";

static const char *name_of(const report *r, int proposal) {
  return text_format(r->arena, "wall %d", proposal + 1);
}

/* ---- proposals ---- */

enum {
  ROW_NAME,
  ROW_COST,
  ROW_PER_AREA,
  ROW_FLOOR,
  ROW_WITH_FLOOR,
  ROW_SAVING,
  ROW_NET,
  ROW_SHARE,
  ROW_SAVING_PER_AREA,
  ROW_STC,
  ROW_RW,
  ROW_C,
  ROW_CTR,
  ROW_OITC,
  ROW_RESTS_ON,
  ROW_SHIFT,
  ROW_SURE,
  ROW_BRIDGED,
  ROW_THICKNESS,
  ROW_THICKER,
  ROW_MASS,
  ROW_HEAVIER,
  ROW_FIRE,
  ROW_FIRE_BASIS,
  ROW_HEIGHT,
  ROW_HEAVY_A,
  ROW_HEAVY_B,
  ROW_LEAD,
  ROW_LEAD_ITEM,
  ROW_LOSSES,
  ROW_LINE,
  ROW_COLUMNS
};
enum { SPECIFIED_ROW = 1 };

static void put_heads(const report *r, sheet *s) {
  sheet_style length = sheets_thickness_style(r);
  const sheet_column columns[ROW_COLUMNS] = {
      [ROW_NAME] = {"Wall", 12, SHEET_TEXT},
      [ROW_COST] = {sheets_money_head(r, "Cost"), 13, SHEET_MONEY},
      [ROW_PER_AREA] = {sheets_rate_head(r, "Cost"), 11, SHEET_MONEY},
      [ROW_FLOOR] = {sheets_money_head(r, "Floor value"), 13, SHEET_MONEY},
      [ROW_WITH_FLOOR] = {sheets_money_head(r, "With floor"), 13, SHEET_MONEY},
      [ROW_SAVING] = {sheets_money_head(r, "Saving"), 13, SHEET_MONEY},
      [ROW_NET] = {sheets_money_head(r, "Saving less redesign"), 13, SHEET_MONEY},
      [ROW_SHARE] = {"Saving, share", 9, SHEET_SHARE},
      [ROW_SAVING_PER_AREA] = {sheets_rate_head(r, "Saving"), 11, SHEET_MONEY},
      [ROW_STC] = {"STC", 6, SHEET_COUNT},
      [ROW_RW] = {"Rw", 6, SHEET_COUNT},
      [ROW_C] = {"C", 6, SHEET_COUNT},
      [ROW_CTR] = {"Ctr", 6, SHEET_COUNT},
      [ROW_OITC] = {"OITC", 7, SHEET_COUNT},
      [ROW_RESTS_ON] = {"Rests on", 12, SHEET_TEXT},
      [ROW_SHIFT] = {"Prediction moves, dB", 11, SHEET_TENTHS},
      [ROW_SURE] = {"Sure of the target", 9, SHEET_WHOLE_SHARE},
      [ROW_BRIDGED] = {"STC if the mount is bridged", 11, SHEET_COUNT},
      [ROW_THICKNESS] = {sheets_thickness_head(r, "Thickness"), 11, length},
      [ROW_THICKER] = {sheets_thickness_head(r, "Thicker by"), 11, length},
      [ROW_MASS] = {sheets_mass_head(r, "Mass"), 9, SHEET_QUANTITY},
      [ROW_HEAVIER] = {sheets_mass_head(r, "Heavier by"), 9, SHEET_QUANTITY},
      [ROW_FIRE] = {"Fire, min", 7, SHEET_COUNT},
      [ROW_FIRE_BASIS] = {"Fire basis", 40, SHEET_WRAP},
      [ROW_HEIGHT] = {sheets_length_head(r, "Height up to"), 10, SHEET_QUANTITY},
      [ROW_HEAVY_A] = {"Heavy fastening, side A", 10, SHEET_TEXT},
      [ROW_HEAVY_B] = {"Heavy fastening, side B", 10, SHEET_TEXT},
      [ROW_LEAD] = {"Lead time, weeks", 9, SHEET_TENTHS},
      [ROW_LEAD_ITEM] = {"Waits for", 24, SHEET_WRAP},
      [ROW_LOSSES] = {"Gives up", 60, SHEET_WRAP},
      [ROW_LINE] = {"Wall line", 60, SHEET_WRAP}};
  sheet_table(s, 0, columns, ROW_COLUMNS);
  s->keep = 1;
}

/* The column of the specified wall's row less that of this row, or the other way round. */
static const char *against(const report *r, const sheet *s, int column, bool saved) {
  const char *own = sheet_at(s, s->row, column);
  const char *base = sheet_fixed_at(s, SPECIFIED_ROW, column);
  return text_format(r->arena, "=%s-%s", saved ? base : own, saved ? own : base);
}

static void put_costs(const report *r, const assessment *x, const char *area, const sheet *takeoffs,
                      sheet *s) {
  const char *cost = sheet_at(s, s->row, ROW_COST);
  sheet_put_formula(s, sheets_takeoff_total(s, takeoffs, sheet_at(s, s->row, ROW_NAME)),
                    (double)x->cost.total_cents / 100);
  sheet_put_formula(s, text_format(r->arena, "=%s/%s", cost, area),
                    view_per_area(r, view_cost_of(r, x).per_m2));
  sheet_put_cents(s, x->cost.floor_value_cents);
  sheet_put_formula(s, text_format(r->arena, "=%s+%s", cost, sheet_at(s, s->row, ROW_FLOOR)),
                    (double)x->numbers.cost_cents / 100);
}

static void put_savings(const report *r, const trim_answer *t, const trim_proposal *p,
                        const char *area, const char *redesign, sheet *s) {
  const char *saving = sheet_at(s, s->row, ROW_SAVING);
  sheet_put_formula(s, against(r, s, ROW_WITH_FLOOR, true), (double)p->saving_cents / 100);
  sheet_put_formula(s, text_format(r->arena, "=%s-%s", saving, redesign),
                    (double)p->net_cents / 100);
  sheet_put_formula(s, text_format(r->arena, "=%s/%s", saving,
                                   sheet_fixed_at(s, SPECIFIED_ROW, ROW_WITH_FLOOR)),
                    (double)p->saving_cents / (double)t->specified->numbers.cost_cents);
  sheet_put_formula(s, text_format(r->arena, "=%s/%s", saving, area),
                    view_per_area(r, p->saving_per_m2));
}

static void put_sound(const report *r, const trim_answer *t, const assessment *x, sheet *s) {
  const ratings *v = &x->ratings;
  sheet_put_figure(s, v->stc);
  sheet_put_figure(s, v->rw);
  sheet_put_figure(s, v->c);
  sheet_put_figure(s, v->ctr);
  sheet_put_figure(s, v->oitc);
  sheet_put(s, x->evidence.match ? "published" : "predicted");
  sheet_put_if(s, x != t->specified, view_trim_shift(r, t->specified, x));
  sheet_put_figure(s, sheets_sureness(sheets_probability(r, x)));
  sheet_put_if(s, x->mounted, x->short_predicted.ratings.stc);
}

static void put_measures(const report *r, const trim_answer *t, const assessment *x, sheet *s) {
  const assessment *from = t->specified;
  sheet_put_figure(s, sheets_thickness(r, x->thickness_m));
  sheet_put_formula(s, against(r, s, ROW_THICKNESS, false),
                    sheets_thickness(r, x->thickness_m) - sheets_thickness(r, from->thickness_m));
  sheet_put_figure(s, sheets_mass(r, x->mass_kg_m2));
  sheet_put_formula(s, against(r, s, ROW_MASS, false),
                    sheets_mass(r, x->mass_kg_m2) - sheets_mass(r, from->mass_kg_m2));
  sheet_put_if(s, x->fire.minutes > 0, x->fire.minutes);
  sheet_put(s, x->fire.minutes > 0 ? x->fire.basis : "not shown");
  sheet_put_figure(s, sheets_length(r, x->height.limit_m));
}

static void put_row(const report *r, const trim_answer *t, const trim_proposal *p,
                    const char *area, const char *redesign, const sheet *takeoffs, sheet *s) {
  enum { SAVINGS = 4 };
  const assessment *x = p ? p->wall : t->specified;
  const bool *heavy = p ? p->heavy : t->heavy;
  const char *item;
  double weeks = view_lead_weeks(r, x, &item);
  sheet_put(s, p ? name_of(r, (int)(p - t->proposal)) : specified);
  put_costs(r, x, area, takeoffs, s);
  if (p)
    put_savings(r, t, p, area, redesign, s);
  else
    sheet_skip(s, SAVINGS);
  put_sound(r, t, x, s);
  put_measures(r, t, x, s);
  sheet_put(s, heavy[SIDE_A] ? "yes" : "no");
  sheet_put(s, heavy[SIDE_B] ? "yes" : "no");
  sheet_put_figure(s, weeks);
  sheet_put(s, item);
  sheet_put(s, p ? view_trim_losses(r, p) : "");
  sheet_put(s, x->line);
  sheet_end_row(s);
}

/* ---- changes ---- */

enum { CHANGE_NAME, CHANGE_WHAT, CHANGE_PART, CHANGE_FROM, CHANGE_TO, CHANGE_SAVING };

/* What a proposal saves beyond its changes taken alone, then all of it as their sum. */
static void put_sums(const trim_proposal *p, const char *name, int first, sheet *s) {
  sheet_put(s, name);
  sheet_put(s, "together: what all of them save beyond that");
  sheet_skip(s, CHANGE_SAVING - CHANGE_PART);
  sheet_put_cents(s, p->together_cents);
  sheet_end_row(s);
  sheet_put(s, name);
  sheet_text(s, s->row, CHANGE_WHAT, SHEET_LABEL, "saving");
  sheet_formula(s, s->row, CHANGE_SAVING, SHEET_TOTAL,
                sheet_sum(s, CHANGE_SAVING, first, s->row - 1), (double)p->saving_cents / 100);
  sheet_end_row(s);
}

static void put_changes(const report *r, const trim_answer *t, sheet_book *out) {
  const sheet_column columns[] = {
      [CHANGE_NAME] = {"Wall", 12, SHEET_TEXT},
      [CHANGE_WHAT] = {"Change", 46, SHEET_WRAP},
      [CHANGE_PART] = {"Part", 14, SHEET_TEXT},
      [CHANGE_FROM] = {"From", 40, SHEET_WRAP},
      [CHANGE_TO] = {"To", 40, SHEET_WRAP},
      [CHANGE_SAVING] = {sheets_money_head(r, "Saving, taken alone"), 13, SHEET_MONEY},
      {"What it does", 60, SHEET_WRAP},
      {"Wall line, taken alone", 60, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Changes");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int i = 0; i < t->proposal_count; i++) {
    const trim_proposal *p = &t->proposal[i];
    int first = s->row;
    for (int k = 0; k < p->change_count; k++) {
      const trim_change *c = &p->change[k];
      sheet_put(s, name_of(r, i));
      sheet_put(s, c->what);
      sheet_put(s, c->name);
      sheet_put(s, c->from);
      sheet_put(s, c->to);
      sheet_put_if(s, c->alone != NULL, (double)c->saving_cents / 100);
      sheet_put(s, view_trim_effect(r, t, c));
      sheet_put(s, c->alone ? c->alone->line : "");
      sheet_end_row(s);
    }
    put_sums(p, name_of(r, i), first, s);
  }
}

/* ---- together ---- */

static const char *verdict(const report *r, const trim_answer *t) {
  static const char *const words[] = {"holds all of that", "cannot be shown to hold all of that",
                                      "does not hold all of that"};
  text out;
  text_init(&out, r->arena, 16 << 10);
  text_put(&out, words[t->verdict]);
  for (int i = 0; i < t->specified->broken_count; i++) {
    const broken_rule *b = &t->specified->broke[i];
    text_putf(&out, "%s%s: asks %s; has %s", i ? ". " : ": ",
              rule_name(r->arena, r->brief, b->rule), b->limit, view_clause(r, b->found));
  }
  return out.data;
}

/* Answers the cell with the cost of redesign. */
static const char *put_terms(const report *r, const trim_answer *t, sheet *s) {
  (void)sheets_fact(s, "Specified", t->specified->line);
  (void)sheets_fact(s, "Name", t->specified->name);
  (void)sheets_fact(s, "Drawings promise", view_trim_promises(r, t));
  (void)sheets_fact(s, "Held to", view_trim_terms(r, t));
  (void)sheets_fact(s, "The specified wall", verdict(r, t));
  (void)sheets_value(s, "Cheaper walls that hold it", SHEET_COUNT, t->found);
  (void)sheets_value(s, "of them shown", SHEET_COUNT, t->proposal_count);
  (void)sheets_value(s, "Walls judged", SHEET_COUNT, (double)t->walls);
  int row = sheets_cents(s, sheets_money_head(r, "Redesign and resubmittal"),
                         t->terms.redesign_cents);
  sheets_unpriced(r, s);
  return sheets_cell_of(s, row);
}

static void put_cheapest(const report *r, const trim_answer *t, sheet *s) {
  if (t->proposal_count > 0) return;
  if (!t->cheapest) {
    (void)sheets_fact(s, "Cheapest", "no wall of those judged holds all of that, at any cost");
    return;
  }
  (void)sheets_fact(s, "Cheapest that holds it", t->cheapest->line);
  (void)sheets_cents(s, sheets_money_head(r, "It costs more by"), t->cheapest_more_cents);
}

static const sheet *put_takeoffs(const report *r, const trim_answer *t, sheet_book *out) {
  sheets_wall *walls = arena_array(r->arena, (size_t)t->proposal_count + 1, sizeof *walls);
  walls[0] = (sheets_wall){specified, 0, t->specified};
  for (int i = 0; i < t->proposal_count; i++)
    walls[i + 1] = (sheets_wall){name_of(r, i), 0, t->proposal[i].wall};
  return sheets_takeoffs(r, "Wall", walls, t->proposal_count + 1, out);
}

static void put_cautions(const report *r, const trim_answer *t, sheet *s) {
  const char *caution[VIEW_MAX_CAUTIONS + 2];
  const assessment *x = t->proposal_count > 0 ? t->proposal[0].wall : t->specified;
  int count = view_cautions(r, x, caution);
  caution[count++] =
      "A change of a specified wall needs the acceptance of the owner and the designer.";
  if (t->terms.design)
    caution[count++] = text_format(r->arena,
                                   "Design %s covers the wall that it describes: any other wall "
                                   "needs a listed design of its own.",
                                   t->terms.design);
  sheets_cautions(s, caution, count);
}

void sheets_trim(const report *r, const trim_answer *t, sheet_book *out) {
  sheet_book_init(out, r->arena, r->units == UNITS_SI);
  sheet *s = sheets_summary("Cheaper walls for a specified one", "Brief", r->brief->title, out);
  const char *redesign = put_terms(r, t, s);
  put_cheapest(r, t, s);
  const char *area = sheets_size(r, s);
  const sheet *takeoffs = put_takeoffs(r, t, out);
  sheet *all = sheet_book_add(out, "Candidates");
  put_heads(r, all);
  put_row(r, t, NULL, area, redesign, takeoffs, all);
  for (int i = 0; i < t->proposal_count; i++)
    put_row(r, t, &t->proposal[i], area, redesign, takeoffs, all);
  if (t->proposal_count > 0) put_changes(r, t, out);
  if (t->cheaper_count > 0) {
    sheet *fails = sheets_candidates(r, out);
    fails->name = "Cheaper but";
    sheets_others(r, "cheaper, but fails", t->cheaper, t->cheaper_count, area, NULL, fails);
    sheet_end_table(fails);
  }
  sheets_rules(r, t->specified, t->prices, t->price_count, t->base_line, area, out);
  sheets_brief(r, CATALOG_NONE, out);
  put_cautions(r, t, s);
  sheets_rests_on_brief(r, s);
}
