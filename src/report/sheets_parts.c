/* Units, and the sheet that sums up. */
#include "report/sheets_parts.h"

#include <inttypes.h>
#include <math.h>

#include "base/file.h"
#include "septum.h"

/* ---- units of columns ---- */

static bool us(const report *r) {
  return r->units == UNITS_US;
}

double sheets_thickness(const report *r, double metres) {
  return us(r) ? metres / UNITS_M_PER_IN : metres * 1e3;
}

double sheets_length(const report *r, double metres) {
  return us(r) ? metres / UNITS_M_PER_FT : metres;
}

double sheets_area(const report *r, double m2) {
  return us(r) ? m2 / UNITS_M2_PER_FT2 : m2;
}

double sheets_mass(const report *r, double kg_m2) {
  return us(r) ? kg_m2 / UNITS_KG_M2_PER_PSF : kg_m2;
}

static const char *head(const report *r, const char *what, const char *in_us, const char *in_si) {
  return text_format(r->arena, "%s, %s", what, us(r) ? in_us : in_si);
}

const char *sheets_thickness_head(const report *r, const char *what) {
  return head(r, what, "in", "mm");
}

const char *sheets_length_head(const report *r, const char *what) {
  return head(r, what, "ft", "m");
}

const char *sheets_area_head(const report *r, const char *what) {
  return head(r, what, "ft2", "m2");
}

const char *sheets_mass_head(const report *r, const char *what) {
  return head(r, what, "psf", "kg/m2");
}

static const char *currency(const report *r) {
  return r->prices ? r->prices->currency : "";
}

const char *sheets_money_head(const report *r, const char *what) {
  return head(r, what, currency(r), currency(r));
}

const char *sheets_rate_head(const report *r, const char *what) {
  return text_format(r->arena, "%s, %s per %s", what, currency(r), view_area(r));
}

sheet_style sheets_thickness_style(const report *r) {
  return us(r) ? SHEET_LENGTH : SHEET_TENTHS;
}

double sheets_sureness(double probability) {
  const double last_bits = 1e-9;
  return floor(100 * probability + last_bits) / 100;
}

double sheets_probability(const report *r, const assessment *x) {
  double least = NAN;
  for (int i = 0; i < r->brief->target_count; i++)
    least = fmin(least, x->probability[i]);
  return least;
}

/* ---- label and value ---- */

enum { LABEL_WIDTH = 30, WORDS_WIDTH = 90 };

sheet *sheets_summary(const char *kind, const char *label, const char *title, sheet_book *out) {
  sheet *s = sheet_book_add(out, "Summary");
  s->portrait = true;
  s->columns = 2;
  s->width[0] = LABEL_WIDTH;
  s->width[1] = WORDS_WIDTH;
  sheet_text(s, 0, 0, SHEET_TITLE, kind);
  s->row = 2;
  if (title && title[0] != '\0') (void)sheets_fact(s, label, title);
  return s;
}

int sheets_fact(sheet *s, const char *label, const char *words) {
  if (words == NULL) return s->row;
  sheet_text(s, s->row, 0, SHEET_LABEL, label);
  sheet_text(s, s->row, 1, SHEET_WRAP, words);
  return s->row++;
}

int sheets_value(sheet *s, const char *label, sheet_style style, double value) {
  sheet_text(s, s->row, 0, SHEET_LABEL, label);
  sheet_number(s, s->row, 1, style, value);
  return s->row++;
}

int sheets_cents(sheet *s, const char *label, long long cents) {
  return sheets_value(s, label, SHEET_MONEY, (double)cents / 100);
}

int sheets_formula(sheet *s, const char *label, sheet_style style, const char *formula,
                   double value) {
  sheet_text(s, s->row, 0, SHEET_LABEL, label);
  sheet_formula(s, s->row, 1, style, formula, value);
  return s->row++;
}

void sheets_heading(sheet *s, const char *words) {
  s->row++;
  sheet_text(s, s->row, 0, SHEET_HEAD, words);
  sheet_text(s, s->row++, 1, SHEET_HEAD, "");
}

const char *sheets_cell_of(const sheet *summary, int row) {
  return text_format(summary->arena, "%s!%s", summary->name, sheet_fixed_at(summary, row, 1));
}

const char *sheets_size(const report *r, sheet *s) {
  const brief *b = r->brief;
  (void)sheets_value(s, sheets_length_head(r, "Length"), SHEET_QUANTITY,
                     sheets_length(r, b->length_m));
  (void)sheets_value(s, sheets_length_head(r, "Height as built"), SHEET_QUANTITY,
                     sheets_length(r, cost_built_height_m(b)));
  int row = sheets_value(s, sheets_area_head(r, "Area"), SHEET_QUANTITY,
                         sheets_area(r, b->length_m * cost_built_height_m(b)));
  return sheets_cell_of(s, row);
}

/* ---- one wall ---- */

static void put_ratings(const ratings *v, sheet *s) {
  (void)sheets_value(s, "STC", SHEET_COUNT, v->stc);
  (void)sheets_value(s, "Rw", SHEET_COUNT, v->rw);
  (void)sheets_value(s, "C", SHEET_COUNT, v->c);
  (void)sheets_value(s, "Ctr", SHEET_COUNT, v->ctr);
  (void)sheets_value(s, "OITC", SHEET_COUNT, v->oitc);
}

static void put_sound(const report *r, const assessment *x, sheet *s) {
  const wall_row *match = x->evidence.match;
  sheets_heading(s, "Sound");
  put_ratings(&x->ratings, s);
  (void)sheets_fact(s, "Rests on",
                    match ? text_format(r->arena, "published: %s; %s", match->name, match->source)
                          : "a prediction, not a test");
  (void)sheets_value(s, "Predicted STC, exact", SHEET_TENTHS, x->predicted.exact[METRIC_STC]);
  (void)sheets_value(s, "Standard deviation of it, dB", SHEET_QUANTITY,
                     x->predicted.sd[METRIC_STC]);
  for (int i = 0; i < r->brief->target_count; i++)
    (void)sheets_value(s, text_format(r->arena, "Sure of %s", view_target(r, &r->brief->targets[i])),
                       SHEET_WHOLE_SHARE, sheets_sureness(x->probability[i]));
  if (x->mounted)
    (void)sheets_value(s, "STC if the mount is bridged", SHEET_COUNT,
                       x->short_predicted.ratings.stc);
  if (x->has_composite)
    (void)sheets_value(s, "STC with the openings", SHEET_COUNT, x->composite.stc);
}

static void put_measures(const report *r, const assessment *x, sheet *s) {
  sheets_heading(s, "Thickness, mass, fire, height");
  (void)sheets_value(s, sheets_thickness_head(r, "Thickness"), sheets_thickness_style(r),
                     sheets_thickness(r, x->thickness_m));
  (void)sheets_value(s, sheets_mass_head(r, "Mass"), SHEET_QUANTITY, sheets_mass(r, x->mass_kg_m2));
  if (x->fire.minutes > 0) {
    (void)sheets_value(s, "Fire rating shown, min", SHEET_COUNT, x->fire.minutes);
    (void)sheets_fact(s, "Fire basis",
                      text_format(r->arena, "%s (%s)", x->fire.basis, x->fire.source));
  } else
    (void)sheets_fact(s, "Fire rating shown, min", "not shown");
  (void)sheets_fact(s, "Fire code", view_code(r));
  (void)sheets_value(s, sheets_length_head(r, "Limiting height"), SHEET_QUANTITY,
                     sheets_length(r, x->height.limit_m));
  (void)sheets_fact(s, "Height basis",
                    text_format(r->arena, "%s (%s governs; %s)", x->height.basis,
                                x->height.governs, x->height.source));
}

void sheets_wall_facts(const report *r, const assessment *x, sheet *s) {
  put_sound(r, x, s);
  put_measures(r, x, s);
}

void sheets_cost_facts(const report *r, const assessment *x, const char *formula,
                       const char *area, sheet *s) {
  view_cost v = view_cost_of(r, x);
  if (!v.costed) return;
  int total = sheets_formula(s, "Total", SHEET_TOTAL, formula,
                             (double)x->cost.total_cents / 100);
  (void)sheets_formula(s, text_format(r->arena, "Cost per %s", view_area(r)), SHEET_MONEY,
                       text_format(r->arena, "=%s/%s", sheet_at(s, total, 1), area),
                       view_per_area(r, v.per_m2));
  if (x->cost.floor_value_cents > 0) {
    int floor = sheets_cents(s, "Value of the floor under it", x->cost.floor_value_cents);
    (void)sheets_formula(s, "Total with floor", SHEET_TOTAL,
                         text_format(r->arena, "=%s+%s", sheet_at(s, total, 1),
                                     sheet_at(s, floor, 1)),
                         (double)x->numbers.cost_cents / 100);
  }
  (void)sheets_value(s, "Labour hours", SHEET_QUANTITY, x->cost.hours);
  (void)sheets_value(s, us(r) ? "Dead load, lb/ft" : "Dead load, kg/m", SHEET_QUANTITY,
                     us(r) ? v.load_kg_m / UNITS_KG_PER_LB * UNITS_M_PER_FT : v.load_kg_m);
}

/* ---- the ends of a summary ---- */

void sheets_unpriced(const report *r, sheet *s) {
  text t;
  if (!r->prices) return;
  price_codes l = prices_codes(r->arena, r->catalog, r->prices);
  text_init(&t, r->arena, 64 << 10);
  for (size_t i = 0; i < l.count; i++)
    if (!l.priced[i]) text_putf(&t, "%s%s", t.len ? ", " : "", l.code[i]);
  if (t.len == 0) return;
  (void)sheets_fact(s, "No price for",
                    text_format(r->arena, "%s: walls that need one of these are left out", t.data));
}

void sheets_conflicts(const report *r, const rule_mask *conflict, int count, sheet *s) {
  for (int i = 0; i < count; i++) {
    text t;
    int rules = 0;
    text_init(&t, r->arena, 16 << 10);
    for (int k = 0; k < RULES_MAX; k++)
      if ((conflict[i] >> k) & 1u)
        text_putf(&t, "%s%s", rules++ ? " and " : "", rule_name(r->arena, r->brief, k));
    text_put(&t, rules > 1 ? " cannot be had together" : " cannot be had at all");
    (void)sheets_fact(s, i == 0 ? "In the way" : "", t.data);
  }
}

void sheets_cautions(sheet *s, const char *const *caution, int count) {
  if (count == 0) return;
  sheets_heading(s, "Cautions");
  for (int i = 0; i < count; i++) (void)sheets_fact(s, "", caution[i]);
}

static void put_edition(text *t, const char *path, uint32_t crc) {
  if (path) text_putf(t, "%s%s %08" PRIX32, t->len ? ", " : "", file_name(path), crc);
}

void sheets_rests_on(const report *r, const sheets_file *asked, int count, sheet *s) {
  enum { FILES_MAX_BYTES = 64 << 10 };
  const price_book *b = r->prices;
  text t;
  sheets_heading(s, "What it rests on");
  (void)sheets_fact(s, "Program", "septum " SEPTUM_VERSION);
  if (b) {
    (void)sheets_fact(s, "Price book", b->name);
    (void)sheets_fact(s, "Place of the prices", b->place);
    (void)sheets_fact(s, "Date of the prices", b->date);
    (void)sheets_fact(s, "Source of the prices", b->source);
    (void)sheets_fact(s, "Currency", b->currency);
  }
  text_init(&t, r->arena, FILES_MAX_BYTES);
  for (int i = 0; i < count; i++) put_edition(&t, asked[i].path, asked[i].crc);
  for (; b; b = b->base)
    if (b->json) put_edition(&t, b->json->file, b->json->crc);
  for (int i = 0; i < CATALOG_FILES; i++)
    put_edition(&t, r->catalog->edition[i].file, r->catalog->edition[i].crc);
  (void)sheets_fact(s, "Files read, with their CRC-32", t.data);
  (void)sheets_fact(s, "What decides",
                    "Ratings predicted here are estimates, not tests; fire and structure are "
                    "screened only. Local code, the listed fire design and licensed practice "
                    "decide.");
}

void sheets_rests_on_brief(const report *r, sheet *s) {
  const brief *b = r->brief;
  sheets_rests_on(r, &(sheets_file){b->file, b->crc}, 1, s);
}
