/* `plan` for people: storeys, sections, what to order, and the drawings beside it. */
#include "report/buy_plan.h"
#include "report/page.h"
#include "report/report_text_plan.h"
#include "report/view_plan.h"

/* ---- storeys and sections ---- */

enum {
  STOREY_AT = PAGE_LABEL,
  STOREY_COLUMNS = 22,
  COUNT_END = 44,
  LENGTH_END = 56,
  MONEY_END = 72
};

static void put_storeys(const report *r, const plan_answer *p, text *out) {
  text_put(out, "\nStoreys");
  page_right(out, COUNT_END, "walls");
  page_right(out, LENGTH_END, r->units == UNITS_US ? "run ft" : "run m");
  page_right(out, MONEY_END, text_format(r->arena, "cost %s", r->prices->currency));
  text_char(out, '\n');
  for (int i = 0; i < p->storey_count; i++) {
    const plan_storey *s = &p->storey[i];
    page_label(out, "");
    page_cut(out, STOREY_COLUMNS, s->name[0] ? s->name : "(none named)");
    page_right(out, COUNT_END, text_format(r->arena, "%d", s->walls));
    page_right(out, LENGTH_END, report_plan_run(r, s->run_m));
    page_right(out, MONEY_END, report_plan_cents(r, plan_money_total(&s->money)));
    if (s->unplanned > 0)
      text_putf(out, "  %s unplanned", view_plan_count(r, s->unplanned, "row", "rows"));
    text_char(out, '\n');
  }
  if (p->money.setup > 0) {
    page_label(out, "");
    text_put(out, "setting up types");
    page_right(out, MONEY_END, report_plan_cents(r, p->money.setup));
    text_char(out, '\n');
  }
}

static void put_section(const report *r, const char *name, long long material, long long labour,
                        text *out) {
  page_label(out, "");
  text_put(out, name);
  page_right(out, COUNT_END, material ? report_plan_cents(r, material) : "");
  page_right(out, LENGTH_END, labour ? report_plan_cents(r, labour) : "");
  page_right(out, MONEY_END, report_plan_cents(r, material + labour));
  text_char(out, '\n');
}

static void put_sections(const report *r, const plan_answer *p, text *out) {
  long long sum = 0;
  text_put(out, "\nSections");
  page_right(out, COUNT_END, "material");
  page_right(out, LENGTH_END, "labour");
  page_right(out, MONEY_END, text_format(r->arena, "cost %s", r->prices->currency));
  text_char(out, '\n');
  for (int i = 0; i < p->section_count; i++) {
    const plan_section *s = &p->section[i];
    put_section(r, s->section, s->material_cents, s->labour_cents, out);
    sum += s->material_cents + s->labour_cents;
  }
  page_label(out, "");
  text_put(out, "tax and markups");
  page_right(out, MONEY_END, report_plan_cents(r, p->markup_cents));
  text_char(out, '\n');
  page_label(out, "");
  text_put(out, "walls and goods");
  page_right(out, MONEY_END, report_plan_cents(r, sum + p->markup_cents));
  text_char(out, '\n');
}

/* ---- what to order ---- */

enum {
  ITEM_AT = 10,
  ITEM_COLUMNS = 32,
  NEEDED_END = 54,
  UNIT_AT = 55,
  BUY_END = 67,
  AS_AT = 68,
  AS_COLUMNS = 19,
  AMOUNT_END = 100
};

static void put_buy_line(const report *r, const buy_plan_line *l, text *out) {
  const price_item *item = &r->prices->items[l->buy.item];
  cost_line shown = {.unit = price_unit_names[item->unit], .quantity = l->buy.needed};
  view_quantity q = view_quantity_of(r, &shown);
  text count;
  text_init(&count, r->arena, 64);
  view_count(&count, l->buy.count);
  text_put(out, l->section);
  text_pad(out, ITEM_AT);
  page_cut(out, ITEM_COLUMNS, item->name);
  page_right(out, NEEDED_END, text_of(r->arena, q.quantity, 0));
  text_pad(out, UNIT_AT);
  text_put(out, q.unit);
  page_right(out, BUY_END, count.data);
  text_pad(out, AS_AT);
  page_cut(out, AS_COLUMNS, l->buy.as);
  page_right(out, AMOUNT_END, report_plan_cents(r, l->buy.cents));
  text_char(out, '\n');
}

static const char *quantity_words(const report *r, const price_item *item, double quantity) {
  cost_line shown = {.unit = price_unit_names[item->unit], .quantity = quantity};
  view_quantity q = view_quantity_of(r, &shown);
  return text_format(r->arena, "%s %s", text_of(r->arena, q.quantity, 0), q.unit);
}

/* What the order has to do with the price, and with what is on hand. */
static void put_buy_note(const report *r, const buy_plan_line *l, text *out) {
  const price_item *item = &r->prices->items[l->buy.item];
  text t;
  text_init(&t, r->arena, 400);
  if (l->buy.from > 0)
    text_putf(&t, "at the price from %s on", quantity_words(r, item, l->buy.from));
  if (l->buy.least > 0)
    text_putf(&t, "%sorder at least %s", t.len ? "; " : "", quantity_words(r, item, l->buy.least));
  if (l->from_stock > 0)
    text_putf(&t, "%s%s are on hand", t.len ? "; " : "", quantity_words(r, item, l->from_stock));
  if (t.len == 0) return;
  text_pad(out, ITEM_AT + 2);
  page_words(out, ITEM_AT + 2, t.data);
}

static void put_buy(const report *r, const plan_answer *p, text *out) {
  buy_plan list;
  buy_plan_of(r, p, &list);
  text_put(out, "\nTo order");
  text_pad(out, ITEM_AT);
  text_put(out, "item");
  page_right(out, NEEDED_END, "needed");
  page_right(out, BUY_END, "order");
  text_pad(out, AS_AT);
  text_put(out, "as");
  page_right(out, AMOUNT_END, r->prices->currency);
  text_char(out, '\n');
  for (int i = 0; i < list.count; i++) {
    put_buy_line(r, &list.line[i], out);
    put_buy_note(r, &list.line[i], out);
  }
  text_pad(out, ITEM_AT);
  text_put(out, "material in whole packages, before tax and markups");
  page_right(out, AMOUNT_END, report_plan_cents(r, list.cents));
  text_char(out, '\n');
}

void report_plan_quantities_text(const report *r, const plan_answer *p, text *out) {
  if (!p->found) return;
  put_storeys(r, p, out);
  put_sections(r, p, out);
  put_buy(r, p, out);
}

/* ---- the drawings ---- */

static void put_misses(const report *r, const plan_answer *p, const plan_drawn *d, text *out) {
  for (int i = 0; i < d->miss_count; i++) {
    const schedule_class *k = &p->schedule->classes[d->miss_class[i]];
    text t;
    text_init(&t, r->arena, 2000);
    for (int b = 0; b < d->miss[i]->broken_count; b++) {
      const broken_rule *broke = &d->miss[i]->broke[b];
      text_putf(&t, "%s%s: asks %s; has: %s", b ? "; " : "",
                rule_name(r->arena, &k->demand, broke->rule), broke->limit,
                view_clause(r, broke->found));
    }
    text_pad(out, PAGE_LABEL + 2);
    page_words(
        out, PAGE_LABEL + 4,
        text_format(r->arena, "misses %s (%s)", view_plan_class(r, d->miss_class[i]), t.data));
  }
}

static void put_drawn(const report *r, const plan_answer *p, const plan_drawn *d, text *out) {
  const char *cost = d->costed ? view_money(r, (double)d->list_cents / 100, NULL)
                               : text_format(r->arena, "no cost: no price for %s",
                                             d->missing_code ? d->missing_code : "an item");
  page_line(out, "",
            text_format(r->arena, "%s%s, %s, %s %s, %s: %s%s", d->mark, d->locked ? " (kept)" : "",
                        view_plan_count(r, d->walls, "wall", "walls"), report_plan_run(r, d->run_m),
                        r->units == UNITS_US ? "ft" : "m", cost, d->line,
                        d->used != PLAN_NONE && p->type[d->used].walls > 0
                            ? text_format(r->arena, " (%s walls of the plan)",
                                          text_of(r->arena, p->type[d->used].walls, 0))
                            : ""));
  put_misses(r, p, d, out);
}

static void put_comparison(const report *r, const plan_answer *p, text *out) {
  const plan_comparison *c = &p->against;
  long long drawn = plan_money_total(&c->drawings), saving = view_plan_saving(c);
  double gained = c->drawings_floor_m2 - c->plan_floor_m2;
  bool us = r->units == UNITS_US;
  text t;
  text_init(&t, r->arena, 1000);
  text_putf(&t, "As drawn the same walls cost %s with %s: the plan %s %s",
            view_money(r, (double)drawn / 100, NULL), view_plan_count(r, c->types, "type", "types"),
            saving >= 0 ? "saves" : "costs more by",
            view_money(r, (double)(saving >= 0 ? saving : -saving) / 100, NULL));
  if (drawn > 0)
    text_putf(&t, " (%s %%)", text_of(r->arena, 100 * (double)saving / (double)drawn, 1));
  text_putf(&t, " and %s %s %s of floor area.", gained >= 0 ? "gains" : "takes",
            text_of(r->arena, (gained >= 0 ? gained : -gained) / (us ? UNITS_M2_PER_FT2 : 1), 1),
            us ? "ft2" : "m2");
  page_line(out, "", t.data);
  if (c->row_count < p->schedule->count)
    page_line(
        out, "",
        text_format(r->arena,
                    "%s compared; where the drawings have no wall that can be costed, the plan's "
                    "stands on both sides.",
                    view_plan_count(r, c->row_count, "row is", "rows are")));
}

void report_plan_drawings_text(const report *r, const plan_answer *p, text *out) {
  if (p->drawn_count == 0) return;
  text_char(out, '\n');
  page_line(out, "Drawings", "The wall types of the drawings, each row costed by itself:");
  int missed = 0;
  for (int i = 0; i < p->drawn_count; i++) {
    put_drawn(r, p, &p->drawn[i], out);
    missed += p->drawn[i].miss_walls;
  }
  if (missed > 0)
    page_line(out, "",
              text_format(r->arena, "%s drawn with a type that misses what is asked there.",
                          view_plan_count(r, missed, "wall is", "walls are")));
  if (p->against.done) put_comparison(r, p, out);
}
