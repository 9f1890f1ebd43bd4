#include "search/types_asks.h"

brief asks_turned(const brief *b) {
  brief t = *b;
  for (int s = 0; s < 2; s++) {
    t.side[s] = b->side[1 - s];
    t.ceiling_m[s] = b->ceiling_m[1 - s];
  }
  if (b->shear_side != CATALOG_NONE) t.shear_side = 1 - b->shear_side;
  return t;
}

static void add(asks *k, const brief *demand, int of_class, int bit) {
  k->item[k->count++] = (ask){*demand, of_class, bit};
  ask_set_add(&k->all, bit);
}

void asks_set(arena *a, const plan_context *x, asks *out) {
  const schedule *s = x->schedule;
  *out = (asks){.x = x, .item = arena_array(a, 2 * (size_t)s->class_count, sizeof *out->item)};
  for (int c = 0; c < s->class_count; c++) {
    const brief *demand = &s->classes[c].demand;
    if (s->classes[c].locked != CATALOG_NONE) continue;
    add(out, demand, c, c);
    if (space_wishes(demand).mirror_once) continue; /* from either side it asks the same */
    brief turned = asks_turned(demand);
    add(out, &turned, c, ASK_TURNED + c);
  }
}

int asks_grouped(arena *a, const asks *k, ask_same same, ask_group **out) {
  int count = 0;
  ask_group *group = arena_array(a, (size_t)k->count, sizeof *group);
  for (int i = 0; i < k->count; i++) {
    const brief *b = &k->item[i].demand;
    int g = 0;
    while (g < count && !same(group[g].example, b)) g++;
    if (g == count) group[count++] = (ask_group){.example = b};
    ask_set_add(&group[g].members, k->item[i].bit);
  }
  *out = group;
  return count;
}
