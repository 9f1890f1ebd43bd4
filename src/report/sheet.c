#include "report/sheet.h"

#include <string.h>

void sheet_init(sheet *s, arena *a, const char *name) {
  memset(s, 0, sizeof *s);
  s->arena = a;
  s->name = name;
  s->head = -1;
}

static void add(sheet *s, sheet_cell cell) {
  if (s->count == s->room) {
    size_t more = s->room ? 2 * s->room : 64;
    s->cells = arena_grow(s->arena, s->cells, s->count * sizeof cell, more * sizeof cell);
    s->room = more;
  }
  s->cells[s->count++] = cell;
}

void sheet_text(sheet *s, int row, int column, sheet_style style, const char *words) {
  add(s, (sheet_cell){row, column, style, words, 0, NULL});
}

void sheet_number(sheet *s, int row, int column, sheet_style style, double value) {
  add(s, (sheet_cell){row, column, style, NULL, value, NULL});
}

void sheet_formula(sheet *s, int row, int column, sheet_style style, const char *formula,
                   double value) {
  add(s, (sheet_cell){row, column, style, NULL, value, formula});
}
