/* Who asks in a project: each class from one side and, where its rooms differ, from the other, so
 * that a wall as drawn is looked at both ways round. Sets of who asks are bits. */
#ifndef SEARCH_TYPES_ASKS_H
#define SEARCH_TYPES_ASKS_H

#include "search/types.h"

enum { ASK_WORDS = 8, ASK_TURNED = SCHEDULE_MAX_CLASSES, ASKS_MAX = 2 * SCHEDULE_MAX_CLASSES };

/* Bit class: the class as it is; bit ASK_TURNED + class: seen from its side B. */
typedef struct ask_set {
  uint64_t word[ASK_WORDS];
} ask_set;

typedef struct ask {
  brief demand; /* as seen by a wall as drawn */
  int of_class, bit;
} ask;

typedef struct asks {
  const plan_context *x;
  ask *item;
  int count;
  ask_set all;
} asks;

/* Those of every class whose type is free. */
void asks_set(arena *a, const plan_context *x, asks *out);
/* The brief seen from the other side. */
brief asks_turned(const brief *b);

static inline void ask_set_add(ask_set *s, int bit) {
  s->word[bit / 64] |= UINT64_C(1) << bit % 64;
}
static inline bool ask_set_has(const ask_set *s, int bit) {
  return s->word[bit / 64] >> bit % 64 & 1;
}
static inline ask_set ask_set_both(ask_set x, const ask_set *y) {
  for (int i = 0; i < ASK_WORDS; i++) x.word[i] &= y->word[i];
  return x;
}
static inline void ask_set_drop(ask_set *x, const ask_set *y) {
  for (int i = 0; i < ASK_WORDS; i++) x->word[i] &= ~y->word[i];
}
static inline bool ask_set_empty(const ask_set *x) {
  uint64_t any = 0;
  for (int i = 0; i < ASK_WORDS; i++) any |= x->word[i];
  return any == 0;
}
static inline bool ask_set_same(const ask_set *x, const ask_set *y) {
  uint64_t differs = 0;
  for (int i = 0; i < ASK_WORDS; i++) differs |= x->word[i] ^ y->word[i];
  return differs == 0;
}
/* Whether a class is in it, as it is or turned. */
static inline bool ask_set_class(const ask_set *x, int of_class) {
  return ask_set_has(x, of_class) || ask_set_has(x, ASK_TURNED + of_class);
}

/* Briefs that are the same to some question, together. */
typedef struct ask_group {
  const brief *example;
  ask_set members;
} ask_group;

typedef bool (*ask_same)(const brief *x, const brief *y);
/* Groups all asks by `same`. Returns how many groups. */
int asks_grouped(arena *a, const asks *k, ask_same same, ask_group **out);

#endif
