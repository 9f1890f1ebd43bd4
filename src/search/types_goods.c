#include "search/types_goods.h"

#include <math.h>
#include <string.h>

/* Spending on an item is rounded to the cent, before and after. */
static const double rounding_cents = 1;

static double stock_of(const project *p, const char *code) {
  double stock = 0;
  for (int i = 0; i < p->stock_count; i++)
    if (strcmp(p->stock[i].item, code) == 0) stock += p->stock[i].quantity;
  return stock;
}

static bool tiered(const plan_context *x, const price_item *item) {
  if (stock_of(x->project, item->code) > 0) return true;
  return x->project->quantity_breaks && (item->minimum_order > 0 || item->break_count > 0);
}

/* Price and least quantity of a tier; the first is the item's own. */
static double tier_price(const price_item *item, size_t k) {
  return k == 0 ? item->price : item->breaks[k - 1].price;
}
static double tier_from(const price_item *item, size_t k) {
  return k == 0 ? item->minimum_order : item->breaks[k - 1].from;
}

/* What `need` units cost, in the tier that makes the least of them. */
static double spent(const price_item *item, double need) {
  double least = INFINITY;
  for (size_t k = 0; k <= item->break_count; k++)
    least = fmin(least, tier_price(item, k) * fmax(need, tier_from(item, k)));
  return least;
}

/* The most that spending on any need lies above `least` a unit: where more than needed is bought.
 * It is a matter of straight lines, whose corners lie where a tier begins, and where a smaller
 * quantity costs as much as a whole tier's beginning. */
static double buys_up(const price_item *item, double least) {
  double most = spent(item, 0);
  for (size_t k = 0; k <= item->break_count; k++)
    for (size_t j = 0; j <= k; j++) {
      if (!(tier_price(item, j) > 0)) continue;
      double at = tier_from(item, k) * tier_price(item, k) / tier_price(item, j);
      most = fmax(most, spent(item, at) - least * at);
    }
  return most;
}

static goods_price price_of(const plan_context *x, const price_item *item) {
  const price_book *book = x->prices;
  double markup = (1 + book->sales_tax) * (1 + book->overhead_profit) * 100;
  goods_price p = {.most = item->price * markup, .least = item->price * markup, .falls = true};
  p.stock = stock_of(x->project, item->code);
  if (!x->project->quantity_breaks) {
    p.buys_up = 0;
    return p;
  }
  p.minimum = item->minimum_order;
  for (size_t k = 0; k < item->break_count; k++) {
    double price = item->breaks[k].price * markup;
    p.falls = p.falls && price <= p.least;
    p.least = fmin(p.least, price);
    p.most = fmax(p.most, price);
  }
  p.buys_up = buys_up(item, p.least / markup) * markup;
  if (!p.falls) p.least = 0;
  return p;
}

void goods_set(arena *a, const plan_context *x, goods *out) {
  const price_book *book = x->prices;
  *out = (goods){.item = arena_array(a, book->count, sizeof *out->item),
                 .price = arena_array(a, book->count, sizeof *out->price),
                 .place = arena_array(a, book->count, sizeof *out->place),
                 .list = *book};
  out->list.items = arena_array(a, book->count, sizeof *out->list.items);
  for (size_t i = 0; i < book->count; i++) {
    out->list.items[i] = book->items[i];
    out->place[i] = TYPES_NONE;
    if (!tiered(x, &book->items[i])) continue;
    out->place[i] = out->count;
    out->item[out->count] = (int)i;
    out->price[out->count++] = price_of(x, &book->items[i]);
    out->list.items[i].price = 0;
  }
}

double goods_worst(const goods_price *p, double was, double is) {
  if (is > was) {
    if (!p->falls) return INFINITY;
    double short_of = p->stock > 0 ? p->minimum : fmax(0, p->minimum - is);
    bool first = p->stock > 0 || !(was > 0);
    return (p->most - p->least) * (is - was) + (first ? p->most * short_of : 0) + rounding_cents;
  }
  if (is < was) /* spending on less never rises, rounded or not */
    return fmin(p->buys_up + p->least * p->stock + rounding_cents, p->least * (was - is));
  return 0;
}
