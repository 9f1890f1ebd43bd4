#include "report/buy_plan.h"

/* The last line of a project's goods orders what their break asks for beyond the need. */
static bool is_last_of(const plan_answer *p, int line) {
  for (int i = line + 1; i < p->need_count; i++)
    if (p->need[i].goods == p->need[line].goods) return false;
  return true;
}

/* Price and start of the break that the plan buys the goods at. */
static void set_break(const price_item *item, const plan_buy *bought, buy_line *b) {
  b->price = item->price;
  b->from = 0;
  for (size_t i = 0; i < item->break_count; i++) {
    if (bought->bought < item->breaks[i].from) break;
    b->price = item->breaks[i].price;
    b->from = item->breaks[i].from;
  }
}

static void set_goods(const report *r, const plan_answer *p, int line, double *stock_left,
                      buy_plan_line *out) {
  const plan_need *n = &p->need[line];
  const plan_buy *bought = &p->goods[n->goods].buy;
  buy_line *b = &out->buy;
  out->from_stock = n->quantity < *stock_left ? n->quantity : *stock_left;
  *stock_left -= out->from_stock;
  double wanted = n->quantity - out->from_stock;
  if (is_last_of(p, line) && bought->surplus > 0) {
    b->least = wanted + bought->surplus;
    wanted = b->least;
  }
  buy_count(wanted, b);
  if (p->project->quantity_breaks) set_break(&r->prices->items[n->item], bought, b);
}

void buy_plan_of(const report *r, const plan_answer *p, buy_plan *out) {
  *out = (buy_plan){.line = arena_array(r->arena, (size_t)p->need_count, sizeof *out->line)};
  double *stock_left = arena_array(r->arena, (size_t)p->goods_count, sizeof *stock_left);
  for (int i = 0; i < p->goods_count; i++) stock_left[i] = p->goods[i].buy.from_stock;
  for (int i = 0; i < p->need_count; i++) {
    const plan_need *n = &p->need[i];
    buy_plan_line *l = &out->line[out->count++];
    *l = (buy_plan_line){.section = n->section};
    l->buy.item = n->item;
    l->buy.needed = n->quantity;
    l->buy.price = r->prices->items[n->item].price;
    buy_package(r, n->stud_m, &l->buy);
    if (n->goods >= 0)
      set_goods(r, p, i, &stock_left[n->goods], l);
    else
      buy_count(n->quantity, &l->buy);
    l->buy.cents = cost_cents(l->buy.bought * l->buy.price);
    out->cents += l->buy.cents;
  }
}
