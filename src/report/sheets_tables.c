/* The brief, its rules, walls to compare, takeoffs: sheets that several workbooks have. */
#include "report/sheets_parts.h"
#include "report/view_brief.h"

void sheets_brief(const report *r, int climbs, sheet_book *out) {
  static const sheet_column columns[] = {
      {"Field", 34, SHEET_TEXT}, {"Value", 80, SHEET_WRAP}, {"Where from", 14, SHEET_TEXT}};
  view_brief *b = arena_alloc(r->arena, sizeof *b);
  view_brief_of(r, climbs, b);
  sheet *s = sheet_book_add(out, "Brief");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  for (int i = 0; i < b->count; i++) {
    sheet_put(s, b->field[i].name);
    sheet_put(s, b->field[i].value);
    sheet_put(s, b->field[i].usual ? "default" : "given");
    sheet_end_row(s);
  }
  sheet_end_table(s);
}

/* ---- sound ---- */

static const char *differ_words(const report *r, const evidence_near *n) {
  text t;
  text_init(&t, r->arena, 4000);
  for (int i = 0; i < n->differ_count; i++) text_putf(&t, "%s%s", i ? "; " : "", n->differs[i]);
  return t.data;
}

void sheets_sound(const report *r, const assessment *x, sheet_book *out) {
  static const sheet_column bands[] = {{"Band, Hz", 10, SHEET_COUNT},
                                       {"Predicted transmission loss, dB", 16, SHEET_TENTHS}};
  static const sheet_column walls[] = {{"Published wall", 20, SHEET_TEXT},
                                       {"STC", 6, SHEET_COUNT},
                                       {"Wall line", 60, SHEET_WRAP},
                                       {"What differs from it", 50, SHEET_WRAP},
                                       {"Source", 50, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Curve");
  sheet_table(s, 0, bands, SHEETS_COUNT(bands));
  for (int i = 0; i < BANDS; i++) {
    sheet_put_figure(s, bands_hz[i]);
    sheet_put_figure(s, x->predicted.tl_db[i]);
    sheet_end_row(s);
  }
  s = sheet_book_add(out, "Evidence");
  sheet_table(s, 0, walls, SHEETS_COUNT(walls));
  for (int i = 0; i < x->evidence.nearest_count; i++) {
    const evidence_near *n = &x->evidence.nearest[i];
    sheet_put(s, n->row->id);
    sheet_put_figure(s, n->row->stc);
    sheet_put(s, n->line);
    sheet_put(s, differ_words(r, n));
    sheet_put(s, n->row->source);
    sheet_end_row(s);
  }
  sheet_end_table(s);
}

/* ---- rules ---- */

static const char *put_words(const report *r, void (*put)(text *, double, units_system),
                             double value) {
  text t;
  text_init(&t, r->arena, 100);
  put(&t, value, r->units);
  return t.data;
}

static const char *rating_words(const report *r, const ratings *v) {
  text t;
  text_init(&t, r->arena, 500);
  for (int i = 0; i < r->brief->target_count; i++) {
    sound_metric m = r->brief->targets[i].metric;
    text_putf(&t, "%s%s %d", i ? ", " : "", sound_metric_names[m], rating_of(v, m));
  }
  return t.data;
}

/* What a wall has where it keeps a rule. */
static const char *kept_words(const report *r, const assessment *x, int rule) {
  switch (rule) {
  case RULE_TARGET:
    return rating_words(r, &x->ratings);
  case RULE_COMPOSITE:
    return rating_words(r, x->has_composite ? &x->composite : &x->ratings);
  case RULE_CONFIDENCE:
    return text_format(r->arena, "%s %%", view_sureness(r, sheets_probability(r, x)));
  case RULE_EVIDENCE:
    return view_rests_on(x);
  case RULE_THICKNESS_MAX:
  case RULE_THICKNESS_MIN:
    return put_words(r, units_put_thickness, x->thickness_m);
  case RULE_MASS_MAX:
  case RULE_MASS_MIN:
    return put_words(r, units_put_surface_mass, x->mass_kg_m2);
  case RULE_COST_MAX:
    return view_money(r, view_per_area(r, view_cost_of(r, x).per_m2), view_area(r));
  case RULE_FIRE:
    return text_format(r->arena, "%d min", x->fire.minutes);
  case RULE_HEIGHT:
    return put_words(r, units_put_height, x->height.limit_m);
  default:
    return "kept";
  }
}

static void put_found(const report *r, const assessment *x, int rule, sheet *s) {
  if (!x) {
    sheet_skip(s, 2);
    return;
  }
  for (int i = 0; i < x->broken_count; i++) {
    if (x->broke[i].rule != rule) continue;
    sheet_put(s, view_clause(r, x->broke[i].found));
    sheet_put(s, "no");
    return;
  }
  sheet_put(s, kept_words(r, x, rule));
  sheet_put(s, "yes");
}

static bool is_priced(const explain_rule_price *price, int count, int rule) {
  for (int i = 0; i < count; i++)
    if (price[i].rule == rule) return true;
  return false;
}

enum { RULE_PRICE_COLUMN = 6 };

static void put_price(const report *r, const explain_rule_price *p, const char *base,
                      const char *area, sheet *s) {
  sheet_put(s, p->to);
  if (p->reachable) {
    const char *total = sheet_at(s, s->row, RULE_PRICE_COLUMN);
    sheet_put_formula(s, text_format(r->arena, "=%s/%s", total, area),
                      view_per_area(r, p->price_per_m2));
    sheet_put_figure(s, p->price_total);
  } else
    sheet_skip(s, 2);
  sheet_put(s, !p->wall                                   ? "no wall"
               : base && text_equal(p->wall->line, base) ? "the same wall"
                                                          : p->wall->line);
}

/* Rules in force that have no price: they cannot be given up, or none was asked for. */
static void put_unpriced_rules(const report *r, const assessment *x,
                               const explain_rule_price *price, int count, sheet *s) {
  rule_mask kept = rules_in_force(r->brief) & ~rule_bit(RULE_PRICE);
  for (int i = 0; i < RULES_MAX; i++) {
    if (!((kept >> i) & 1u) || is_priced(price, count, i)) continue;
    sheet_put(s, rule_name(r->arena, r->brief, i));
    sheet_put(s, rule_limit(r->arena, r->brief, i));
    put_found(r, x, i, s);
    sheet_end_row(s);
  }
}

void sheets_rules(const report *r, const assessment *x, const explain_rule_price *price, int count,
                  const char *base, const char *area, sheet_book *out) {
  const sheet_column columns[] = {{"Rule", 20, SHEET_TEXT},
                                  {"Asked", 40, SHEET_WRAP},
                                  {"Found", 30, SHEET_WRAP},
                                  {"Kept", 7, SHEET_TEXT},
                                  {"In its place", 26, SHEET_WRAP},
                                  {sheets_rate_head(r, "Price"), 14, SHEET_MONEY},
                                  {sheets_money_head(r, "Price"), 14, SHEET_MONEY},
                                  {"The cheapest wall without it", 60, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Rules");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  put_unpriced_rules(r, x, price, count, s);
  for (int i = 0; i < count; i++) {
    sheet_put(s, price[i].name);
    sheet_put(s, price[i].from);
    put_found(r, x, price[i].rule, s);
    put_price(r, &price[i], base, area, s);
    sheet_end_row(s);
  }
  sheet_end_table(s);
}

/* ---- walls to compare ---- */

enum {
  CANDIDATE_ROLE,
  CANDIDATE_LINE,
  CANDIDATE_COST,
  CANDIDATE_RATE,
  CANDIDATE_FLOOR,
  CANDIDATE_WITH_FLOOR
};

sheet *sheets_candidates(const report *r, sheet_book *out) {
  const sheet_column columns[] = {
      [CANDIDATE_ROLE] = {"What it is", 22, SHEET_WRAP},
      [CANDIDATE_LINE] = {"Wall", 60, SHEET_WRAP},
      [CANDIDATE_COST] = {sheets_money_head(r, "Cost"), 13, SHEET_MONEY},
      [CANDIDATE_RATE] = {sheets_rate_head(r, "Cost"), 11, SHEET_MONEY},
      [CANDIDATE_FLOOR] = {sheets_money_head(r, "Floor value"), 13, SHEET_MONEY},
      [CANDIDATE_WITH_FLOOR] = {sheets_money_head(r, "With floor"), 13, SHEET_MONEY},
      {sheets_money_head(r, "Beyond the first"), 13, SHEET_MONEY},
      {"STC", 6, SHEET_COUNT},
      {"Rw", 6, SHEET_COUNT},
      {"C", 6, SHEET_COUNT},
      {"Ctr", 6, SHEET_COUNT},
      {"OITC", 7, SHEET_COUNT},
      {"Rests on", 12, SHEET_TEXT},
      {"Sure of the target", 9, SHEET_WHOLE_SHARE},
      {sheets_thickness_head(r, "Thickness"), 11, sheets_thickness_style(r)},
      {sheets_mass_head(r, "Mass"), 9, SHEET_QUANTITY},
      {"Fire, min", 7, SHEET_COUNT},
      {sheets_length_head(r, "Height up to"), 10, SHEET_QUANTITY},
      {"What it fails", 60, SHEET_WRAP}};
  sheet *s = sheet_book_add(out, "Candidates");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  s->keep = 1;
  return s;
}

static const char *fails_words(const report *r, const assessment *x) {
  text t;
  text_init(&t, r->arena, 16 << 10);
  for (int i = 0; i < x->broken_count; i++) {
    const broken_rule *b = &x->broke[i];
    text_putf(&t, "%s%s: asks %s; has %s", i ? ". " : "", rule_name(r->arena, r->brief, b->rule),
              b->limit, view_clause(r, b->found));
  }
  return t.data;
}

static void put_candidate_money(const report *r, const assessment *x, const char *area,
                                const assessment *first, sheet *s) {
  enum { MONEY_COLUMNS = 5, FIRST_ROW = 1 };
  view_cost v = view_cost_of(r, x);
  if (!v.costed) {
    sheet_skip(s, MONEY_COLUMNS);
    return;
  }
  const char *cost = sheet_at(s, s->row, CANDIDATE_COST);
  sheet_put_cents(s, x->cost.total_cents);
  sheet_put_formula(s, text_format(r->arena, "=%s/%s", cost, area), view_per_area(r, v.per_m2));
  sheet_put_cents(s, x->cost.floor_value_cents);
  sheet_put_formula(
      s, text_format(r->arena, "=%s+%s", cost, sheet_at(s, s->row, CANDIDATE_FLOOR)),
      (double)x->numbers.cost_cents / 100);
  if (!first) {
    sheet_skip(s, 1);
    return;
  }
  sheet_put_formula(s,
                    text_format(r->arena, "=%s-%s", sheet_at(s, s->row, CANDIDATE_WITH_FLOOR),
                                sheet_fixed_at(s, FIRST_ROW, CANDIDATE_WITH_FLOOR)),
                    (double)(x->numbers.cost_cents - first->numbers.cost_cents) / 100);
}

void sheets_candidate(const report *r, const char *role, const assessment *x, const char *area,
                      const assessment *first, sheet *s) {
  const ratings *v = &x->ratings;
  sheet_put(s, role);
  sheet_put(s, x->line);
  put_candidate_money(r, x, area, first, s);
  sheet_put_figure(s, v->stc);
  sheet_put_figure(s, v->rw);
  sheet_put_figure(s, v->c);
  sheet_put_figure(s, v->ctr);
  sheet_put_figure(s, v->oitc);
  sheet_put(s, x->evidence.match ? "published" : "predicted");
  sheet_put_figure(s, sheets_sureness(sheets_probability(r, x)));
  sheet_put_figure(s, sheets_thickness(r, x->thickness_m));
  sheet_put_figure(s, sheets_mass(r, x->mass_kg_m2));
  sheet_put_if(s, x->fire.minutes > 0, x->fire.minutes);
  sheet_put_figure(s, sheets_length(r, x->height.limit_m));
  sheet_put(s, fails_words(r, x));
  sheet_end_row(s);
}

void sheets_others(const report *r, const char *role, assessment *const *x, int count,
                   const char *area, const assessment *first, sheet *s) {
  for (int i = 0; i < count; i++) sheets_candidate(r, role, x[i], area, first, s);
}

/* ---- takeoffs ---- */

void sheets_takeoff_columns(const report *r, sheet_column out[SHEETS_TAKEOFF_COLUMNS]) {
  const sheet_column columns[SHEETS_TAKEOFF_COLUMNS] = {
      {"Section", 10, SHEET_TEXT},
      {"Item", 20, SHEET_TEXT},
      {"Name", 40, SHEET_TEXT},
      {"Kind", 10, SHEET_TEXT},
      {"Quantity", 12, SHEET_QUANTITY},
      {"Unit", 8, SHEET_TEXT},
      {"Rate", 12, SHEET_RATE},
      {sheets_money_head(r, "Amount"), 14, SHEET_MONEY}};
  for (int i = 0; i < SHEETS_TAKEOFF_COLUMNS; i++) out[i] = columns[i];
}

void sheets_takeoff_line(const report *r, const cost_line *l, sheet *s) {
  view_quantity q = view_quantity_of(r, l);
  bool markup = l->kind == LINE_MARKUP;
  sheet_put(s, l->section);
  sheet_put(s, markup ? "" : view_item(r, l));
  sheet_put(s, l->name);
  sheet_put(s, view_line_kind(l));
  sheet_put_figure(s, q.quantity);
  sheet_put(s, markup ? r->prices->currency : q.unit);
  sheet_number(s, s->row, s->column, markup ? SHEET_SHARE : SHEET_RATE, q.rate);
  sheet_skip(s, 1);
  sheet_put_cents(s, l->cents);
}

sheet *sheets_takeoffs(const report *r, const char *head, const sheets_wall *walls, int count,
                       sheet_book *out) {
  sheet_column columns[1 + SHEETS_TAKEOFF_COLUMNS] = {{head, 14, SHEET_TEXT}};
  takeoff_rows *rows = arena_alloc(r->arena, sizeof *rows);
  sheets_takeoff_columns(r, columns + 1);
  sheet *s = sheet_book_add(out, "Takeoff");
  sheet_table(s, 0, columns, SHEETS_COUNT(columns));
  s->keep = 1;
  for (int i = 0; i < count; i++) {
    takeoff_rows_of(r, walls[i].wall, rows);
    for (int k = 0; k < rows->count; k++) {
      if (walls[i].name)
        sheet_put(s, walls[i].name);
      else
        sheet_put_figure(s, walls[i].number);
      sheets_takeoff_line(r, &walls[i].wall->takeoff.line[rows->order[k]], s);
      sheet_end_row(s);
    }
  }
  sheet_end_table(s);
  return s;
}

const char *sheets_takeoff_total(const sheet *s, const sheet *takeoffs, const char *key) {
  enum { NAME = 0, AMOUNT = SHEETS_TAKEOFF_COLUMNS }; /* the name comes before the columns of a line */
  return sheet_sum_where(s, takeoffs, NAME, key, AMOUNT, takeoffs->row - 1);
}
