/* Goods that are bought for the whole project: what one unit more of them costs at most, and one
 * less saves at least, whatever else the project buys (docs/design/plan.md). */
#ifndef SEARCH_TYPES_GOODS_H
#define SEARCH_TYPES_GOODS_H

#include "search/types.h"

/* Amounts in cents, tax and markups included, a unit. */
typedef struct goods_price {
  double most, least; /* of any quantity; least 0 where prices do not fall with the quantity */
  double minimum;     /* least order, units */
  double stock;       /* units on hand */
  double buys_up;     /* what a smaller need may fail to save, because more than needed is bought */
  bool falls;         /* no break costs more than a smaller quantity */
} goods_price;

typedef struct goods {
  int *item; /* in the price book */
  goods_price *price;
  int count;
  int *place; /* per item of the price book: its index here, TYPES_NONE */
  price_book
      list; /* the project's book with these goods at no price: what walls cost without them */
} goods;

void goods_set(arena *a, const plan_context *x, goods *out);
/* Cents that a need of `is` units of an item may cost more than one of `was`, over
 * goods_price.least a unit of the difference: in any plan, at most. Infinite where nothing can be
 * said. */
double goods_worst(const goods_price *p, double was, double is);

#endif
