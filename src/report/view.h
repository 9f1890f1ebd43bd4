/* What every answer says about a wall, worked out once; text and JSON only write it down. */
#ifndef REPORT_VIEW_H
#define REPORT_VIEW_H

#include "report/report.h"

typedef enum view_kind { VIEW_LAYERS, VIEW_MOUNT, VIEW_ROW, VIEW_FILL, VIEW_GAP } view_kind;

/* One thing a wall is made of, in plain words, in the order one meets it from room A to room B. */
typedef struct view_part {
  const char *where;  /* "side A", "mount A", "frame", "fill", ... */
  const char *what;   /* "2 x 5/8 in Type X gypsum board" */
  double thickness_m; /* what it adds to the wall; 0 = nothing (a fill stands in the frame) */
  view_kind kind;
  int record; /* catalog index: layer, mount, frame, fill; CATALOG_NONE: empty bays, gap */
  int copies; /* equal layers, one on the other */
} view_part;

enum { VIEW_MAX_PARTS = 48 };
typedef struct view_parts {
  int count;
  view_part part[VIEW_MAX_PARTS];
} view_parts;

void view_parts_of(const report *r, const wall *w, view_parts *out);

/* Cost as people quote it. All 0 when the wall cannot be costed (`costed` false). */
typedef struct view_cost {
  bool costed;
  double per_m2, per_ft2, per_m, per_ft; /* without floor area; per_m and per_ft of wall length */
  double hours_per_m2, hours_per_ft2;
  double floor_per_m2; /* value of the floor under the wall, per m2 of wall */
  double load_kg_m;    /* dead load per metre of wall */
} view_cost;

view_cost view_cost_of(const report *r, const assessment *x);

/* Quantity and rate of a takeoff line in the units of text and CSV. */
typedef struct view_quantity {
  double quantity, rate;
  const char *unit;
} view_quantity;
view_quantity view_quantity_of(const report *r, const cost_line *l);
/* The code of a takeoff line: the price book's, or its name where it has none (markups). */
const char *view_item(const report *r, const cost_line *l);
/* "material", "labour", "markup" */
const char *view_line_kind(const cost_line *l);
/* "2,430.10 USD" without, "9.00 USD per ft2" with a unit. */
const char *view_money(const report *r, double amount, const char *per);
/* "2,430.10", without the currency. */
const char *view_cents(const report *r, long long cents);
/* Minor units, half away from zero. */
long long view_in_cents(double amount);
/* "ft2" or "m2", and what a figure per m2 is per that. */
const char *view_area(const report *r);
double view_per_area(const report *r, double per_m2);
/* "183,456" */
void view_count(text *out, long long count);
/* "STC 50 in the laboratory, 80 % sure" */
const char *view_target(const report *r, const target *t);
/* The highest whole rating that the wall reaches in the laboratory with the brief's confidence (0.8
 * without a target). */
int view_assured(const report *r, const assessment *x, sound_metric metric, double confidence);
double view_confidence(const report *r);
/* What a brief gets that says none: 0.8. */
double view_usual_confidence(void);
/* "STC 47, Rw 46 (C -6, Ctr -14), OITC 25" */
const char *view_ratings(const report *r, const ratings *v);
/* A probability in per cent, never rounded up: 79.9 % is not 80 %. */
const char *view_sureness(const report *r, double probability);
/* Whether the metric of this wall stands on a published rating. */
bool view_published(const assessment *x, sound_metric metric);
/* What the sound rating rests on, in the order in which evidence counts: "test_report", "code_table",
 * "predicted". */
const char *view_rests_on(const assessment *x);
/* What the fire rating rests on: "listing", "code_table"; NULL when nothing is shown. */
const char *view_fire_rests_on(const report *r, const assessment *x);
/* Weeks until the last item of the wall is on site, and which item that is (NULL at 0: all of it is on
 * the shelf, as far as the price book says). */
double view_lead_weeks(const report *r, const assessment *x, const char **item);
/* "optimal", "infeasible", "limit": what the solver proved. */
const char *view_solver_status(solver_status s);
const char *view_status(const explanation *e);
/* "ibc" */
const char *view_code(const report *r);
/* A sentence as the end of another: without its full stop. */
const char *view_clause(const report *r, const char *sentence);
/* The cautions of the wall, then the standing ones of every answer, as sentences. At most `max`;
 * returns how many.
 */
enum { VIEW_MAX_CAUTIONS = JUDGE_MAX_CAUTIONS + 8 };
int view_cautions(const report *r, const assessment *x, const char *caution[VIEW_MAX_CAUTIONS]);

#endif
