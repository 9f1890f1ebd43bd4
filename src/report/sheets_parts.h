/* What workbooks of several answers have in common. */
#ifndef REPORT_SHEETS_PARTS_H
#define REPORT_SHEETS_PARTS_H

#include "report/sheet.h"
#include "report/takeoff.h"
#include "report/view.h"

#define SHEETS_COUNT(array) ((int)(sizeof(array) / sizeof(array)[0]))

/* ---- units of columns ---- */

double sheets_thickness(const report *r, double metres); /* in or mm */
double sheets_length(const report *r, double metres);    /* ft or m */
double sheets_area(const report *r, double m2);          /* ft2 or m2 */
double sheets_mass(const report *r, double kg_m2);       /* psf or kg/m2 */
/* "Thickness, in", "Run, ft", "Area, ft2", "Mass, psf" of a word for it. */
const char *sheets_thickness_head(const report *r, const char *what);
const char *sheets_length_head(const report *r, const char *what);
const char *sheets_area_head(const report *r, const char *what);
const char *sheets_mass_head(const report *r, const char *what);
/* "Cost, USD", "Cost, USD per ft2" */
const char *sheets_money_head(const report *r, const char *what);
const char *sheets_rate_head(const report *r, const char *what);
sheet_style sheets_thickness_style(const report *r);
/* Never rounded up: 79.9 % is 79 %. */
double sheets_sureness(double probability);
/* The least over the targets of the brief; NaN without a target. */
double sheets_probability(const report *r, const assessment *x);

/* ---- the summary ---- */

/* The first sheet: what it is, and the title of what was asked (`label` "Brief", "Project"; NULL or
 * empty: nothing). Facts follow from its row on, one under the other. */
sheet *sheets_summary(const char *kind, const char *label, const char *title, sheet_book *out);
/* Each answers in which row it stands. Words NULL: nothing, and no row. */
int sheets_fact(sheet *s, const char *label, const char *words);
int sheets_value(sheet *s, const char *label, sheet_style style, double value);
int sheets_cents(sheet *s, const char *label, long long cents);
int sheets_formula(sheet *s, const char *label, sheet_style style, const char *formula,
                   double value);
void sheets_heading(sheet *s, const char *words);
/* "Summary!$B$5" */
const char *sheets_cell_of(const sheet *summary, int row);
/* Length, height and area of the brief's wall; answers the reference of the area's cell. */
const char *sheets_size(const report *r, sheet *s);
/* Ratings and what they rest on; thickness, mass, fire, height. */
void sheets_wall_facts(const report *r, const assessment *x, sheet *s);
/* Total, per area, floor value of a wall, whose total is `formula`; nothing where it has no cost. */
void sheets_cost_facts(const report *r, const assessment *x, const char *formula,
                       const char *area, sheet *s);
void sheets_unpriced(const report *r, sheet *s);
void sheets_conflicts(const report *r, const rule_mask *conflict, int count, sheet *s);
void sheets_cautions(sheet *s, const char *const *caution, int count);
/* Program, prices, and which edition of each file was read: `asked` besides catalogs and books. */
typedef struct sheets_file {
  const char *path;
  uint32_t crc;
} sheets_file;
void sheets_rests_on(const report *r, const sheets_file *asked, int count, sheet *s);
void sheets_rests_on_brief(const report *r, sheet *s);

/* ---- sheets of several answers ---- */

/* The brief as understood; `climbs` as in view_brief_of. */
void sheets_brief(const report *r, int climbs, sheet_book *out);

/* What each rule asks, what `x` has (NULL: no wall), what giving it up would save; `base` is the line
 * that this is counted against, `area` a cell with the area of the wall. */
void sheets_rules(const report *r, const assessment *x, const explain_rule_price *price, int count,
                  const char *base, const char *area, sheet_book *out);

/* The predicted curve by bands, and the published walls nearest to it. */
void sheets_sound(const report *r, const assessment *x, sheet_book *out);

/* Walls to compare, one a row. */
sheet *sheets_candidates(const report *r, sheet_book *out);
/* `first`: the wall of the first row, which costs are held against; NULL: none. */
void sheets_candidate(const report *r, const char *role, const assessment *x, const char *area,
                      const assessment *first, sheet *s);
void sheets_others(const report *r, const char *role, assessment *const *x, int count,
                   const char *area, const assessment *first, sheet *s);

/* Takeoff and buy list of one wall as sheets, and its money by section, total and rates in the
 * summary; there the reason where it has no cost. */
void sheets_wall_money(const report *r, const assessment *x, const char *area, sheet *summary,
                       sheet_book *out);
/* A line of a buy list, from `section` to `note`. */
enum { SHEETS_BUY_COLUMNS = 11 };
void sheets_buy_columns(const report *r, sheet_column out[SHEETS_BUY_COLUMNS]);

/* The takeoffs of several walls, one under another. */
typedef struct sheets_wall {
  const char *name; /* in the first column; NULL: `number` */
  int number;
  const assessment *wall;
} sheets_wall;
/* Nothing for walls without a cost. */
sheet *sheets_takeoffs(const report *r, const char *head, const sheets_wall *walls, int count,
                       sheet_book *out);
/* The formula of the total of the wall that the cell `key` of `s` names. */
const char *sheets_takeoff_total(const sheet *s, const sheet *takeoffs, const char *key);
/* The columns of a takeoff from `section` to `amount`, as one row of an open table. */
enum { SHEETS_TAKEOFF_COLUMNS = 8 };
void sheets_takeoff_columns(const report *r, sheet_column out[SHEETS_TAKEOFF_COLUMNS]);
void sheets_takeoff_line(const report *r, const cost_line *l, sheet *s);

#endif
