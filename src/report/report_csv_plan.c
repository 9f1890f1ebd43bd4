/* The schedule as it came, and what the plan says of each row. */
#include "report/markup.h"
#include "report/report_plan.h"
#include "report/view_plan.h"

typedef struct row_writer {
  const report *r;
  text *out;
  bool begun;
} row_writer;

static void put(row_writer *w, const char *value) {
  markup_csv_field(w->out, value, !w->begun);
  w->begun = true;
}

static void put_number(row_writer *w, double value, int decimals) {
  text t;
  text_init(&t, w->r->arena, 64);
  text_fixed(&t, value, decimals);
  put(w, t.data);
}

static void put_cents(row_writer *w, long long cents) {
  text t;
  text_init(&t, w->r->arena, 64);
  text_cents(&t, cents, false);
  put(w, t.data);
}

/* Prefixed, so that no column of the schedule has the same name; its own may be read again. */
static void put_head(row_writer *w, const plan_answer *p) {
  bool us = w->r->units == UNITS_US;
  const char *const heads[] = {"plan_type",
                               "plan_mirrored",
                               "plan_line",
                               "plan_stc",
                               "plan_rests_on",
                               "plan_margin_db",
                               "plan_probability",
                               "plan_probability_field",
                               "plan_fire_min",
                               us ? "plan_thickness_in" : "plan_thickness_mm",
                               us ? "plan_area_ft2" : "plan_area_m2",
                               "plan_cost_list",
                               "plan_cost",
                               "plan_floor_value",
                               "plan_currency",
                               "plan_class",
                               "plan_basis",
                               "plan_note"};
  for (size_t i = 0; i < p->schedule->table->columns; i++)
    put(w, p->schedule->table->header[i].text);
  for (size_t i = 0; i < sizeof heads / sizeof heads[0]; i++) put(w, heads[i]);
  markup_csv_end(w->out);
}

static void put_sound(row_writer *w, const plan_answer *p, int of_class) {
  const plan_place *at = &p->place[of_class];
  put_number(w, at->wall->ratings.stc, 0);
  put(w, view_rests_on(at->wall));
  if (p->schedule->classes[of_class].demand.target_count == 0) {
    for (int i = 0; i < 3; i++) put(w, "");
    return;
  }
  put_number(w, at->margin_db, 2);
  put_number(w, view_plan_probability(p, of_class), 3);
  put_number(w, at->in_field, 3);
}

static const char *note_of(const plan_answer *p, const row_writer *w, int of_class) {
  const plan_place *at = &p->place[of_class];
  const brief *b = &p->schedule->classes[of_class].demand;
  text t;
  text_init(&t, w->r->arena, 1000);
  for (int i = 0; i < at->wall->broken_count; i++)
    text_putf(&t, "%s%s", i ? ", " : "kept by its mark; misses ",
              rule_name(w->r->arena, b, at->wall->broke[i].rule));
  return t.data;
}

static void put_planned(row_writer *w, const plan_answer *p, int row) {
  const plan_row *as = &p->row[row];
  int c = p->schedule->wall[row].of_class;
  const plan_place *at = &p->place[c];
  bool us = w->r->units == UNITS_US;
  put(w, p->type[as->type].name);
  put(w, as->mirrored ? "yes" : "no");
  put(w, as->line);
  put_sound(w, p, c);
  put(w, at->wall->fire.minutes > 0 ? text_format(w->r->arena, "%d", at->wall->fire.minutes) : "");
  put_number(w, us ? at->wall->thickness_m / UNITS_M_PER_IN : at->wall->thickness_m * 1e3,
             us ? 3 : 1);
  put_number(w, us ? as->area_m2 / UNITS_M2_PER_FT2 : as->area_m2, 2);
  put_cents(w, as->list_cents);
  put_cents(w, as->money.walls + as->money.goods);
  put_cents(w, as->money.floor);
  put(w, w->r->prices->currency);
  put(w, view_plan_class(w->r, c));
  put(w, p->schedule->wall[row].basis);
  put(w, note_of(p, w, c));
}

static void put_unplanned(row_writer *w, const plan_answer *p, int row) {
  enum { EMPTY = 15 };
  int c = p->schedule->wall[row].of_class;
  const char *reason = "no plan was found";
  for (int i = 0; i < p->unplanned_count; i++)
    if (p->unplanned[i].class_of == c) reason = view_plan_reason(w->r, p, &p->unplanned[i]);
  for (int i = 0; i < EMPTY; i++) put(w, "");
  put(w, view_plan_class(w->r, c));
  put(w, p->schedule->wall[row].basis);
  put(w, reason);
}

void report_plan_csv(const report *r, const plan_answer *p, text *out) {
  row_writer head = {r, out, false};
  put_head(&head, p);
  for (int i = 0; i < p->schedule->count; i++) {
    row_writer line = {r, out, false};
    const csv_row *own = p->schedule->wall[i].row;
    for (size_t k = 0; k < p->schedule->table->columns; k++) put(&line, own->cell[k].text);
    if (p->row[i].type != PLAN_NONE)
      put_planned(&line, p, i);
    else
      put_unplanned(&line, p, i);
    markup_csv_end(out);
  }
}
