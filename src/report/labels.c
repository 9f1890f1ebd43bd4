#include "report/labels.h"

/* Labels that touch stand together: a stack. Its best top is the mean of the tops that its labels
 * would best have it at; stacks that meet become one (pool adjacent violators). */
typedef struct stack {
  int count;
  double height; /* gaps within it included */
  double sum;    /* of the tops that its labels want for it */
  double top;
} stack;

static void settle(stack *s, double first, double last) {
  s->top = s->sum / s->count;
  if (s->top + s->height > last) s->top = last - s->height;
  if (s->top < first) s->top = first;
}

static void join(stack *upper, const stack *lower, double gap) {
  upper->sum += lower->sum - lower->count * (upper->height + gap);
  upper->height += gap + lower->height;
  upper->count += lower->count;
}

void labels_place(label_slot *slot, int n, double gap, double first, double last) {
  stack stacks[LABELS_MAX];
  int count = 0;
  for (int i = 0; i < n; i++) {
    stack s = {.count = 1, .height = slot[i].height, .sum = slot[i].want - slot[i].height / 2};
    settle(&s, first, last);
    stacks[count++] = s;
    while (count > 1 &&
           stacks[count - 2].top + stacks[count - 2].height + gap > stacks[count - 1].top) {
      join(&stacks[count - 2], &stacks[count - 1], gap);
      settle(&stacks[--count - 1], first, last);
    }
  }
  for (int k = 0, i = 0; k < count; k++) {
    double top = stacks[k].top;
    for (int j = 0; j < stacks[k].count; j++, i++) {
      slot[i].top = top;
      top += slot[i].height + gap;
    }
  }
}

double labels_height(const label_slot *slot, int n, double gap) {
  double sum = n > 0 ? (n - 1) * gap : 0;
  for (int i = 0; i < n; i++) sum += slot[i].height;
  return sum;
}
