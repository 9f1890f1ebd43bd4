#include "report/takeoff.h"

#include <string.h>

#include "report/view.h"

static const char *section_of(const cost_line *l) {
  return l->section != NULL ? l->section : "";
}

/* Markups have no section and come last; lines of one section keep their order. */
static bool stands_before(const cost_line *one, const cost_line *other) {
  const char *a = section_of(one), *b = section_of(other);
  if (a[0] == '\0' || b[0] == '\0') return a[0] != '\0' && b[0] == '\0';
  return strcmp(a, b) < 0;
}

void takeoff_rows_of(const report *r, const assessment *x, takeoff_rows *out) {
  memset(out, 0, sizeof *out);
  if (x == NULL || r->prices == NULL || x->takeoff.missing) return;
  const takeoff *t = &x->takeoff;
  buy_list_of(r, x, &out->list);
  for (int i = 0; i < t->count; i++) {
    int at = out->count++;
    while (at > 0 && stands_before(&t->line[i], &t->line[out->order[at - 1]])) {
      out->order[at] = out->order[at - 1];
      at--;
    }
    out->order[at] = i;
  }
  for (int i = 0; i < out->count; i++) {
    for (int k = 0; k < out->list.count; k++) {
      if (out->list.line[k].line == out->order[i]) out->buy[i] = &out->list.line[k];
    }
  }
}

/* A quantity of an item in the units of text. */
static view_quantity shown(const report *r, int item, double quantity, double rate) {
  cost_line l = {
      .unit = price_unit_names[r->prices->items[item].unit], .quantity = quantity, .rate = rate};
  return view_quantity_of(r, &l);
}

const char *takeoff_note(const report *r, const buy_line *b) {
  text t;
  text_init(&t, r->arena, 200);
  if (b->least > 0) {
    view_quantity q = shown(r, b->item, b->least, 0);
    text_putf(&t, "minimum order %s %s", text_of(r->arena, q.quantity, 0), q.unit);
  }
  if (b->from > 0) {
    view_quantity q = shown(r, b->item, b->from, 0);
    text_putf(&t, "%sprice from %s %s on", t.len ? "; " : "", text_of(r->arena, q.quantity, 0),
              q.unit);
  }
  return t.data;
}
