/* Reads tests/data/nbc2020_fire.csv and nbc2020_stc.csv and writes each row as a wall line of the
 * shipped catalog. Published source: National Building Code of Canada 2020, Table 9.10.3.1.-A. */
#ifndef CODE_TABLE_H
#define CODE_TABLE_H

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { TABLE_MAX_ROWS = 200, TABLE_MAX_FIELDS = 20, TABLE_LINE = 1024 };

typedef struct table_row {
  char text[TABLE_LINE]; /* the fields below point in here */
  const char *field[TABLE_MAX_FIELDS];
} table_row;

typedef struct table {
  int count, columns;
  table_row head, row[TABLE_MAX_ROWS];
} table;

/* Splits one CSV record without line breaks inside. */
static int table_split(table_row *r) {
  char *from = r->text, *to = r->text;
  int n = 0;
  r->field[n++] = to;
  for (int quoted = 0; *from; from++) {
    if (*from == '"')
      quoted = !quoted;
    else if (*from == ',' && !quoted && n < TABLE_MAX_FIELDS) {
      *to++ = '\0';
      r->field[n++] = to;
    } else if (*from != '\n' && *from != '\r')
      *to++ = *from;
  }
  *to = '\0';
  return n;
}

static int table_read(table *t, const char *path) {
  FILE *f = fopen(path, "r");
  if (!f) return 0;
  t->count = 0;
  if (fgets(t->head.text, TABLE_LINE, f)) t->columns = table_split(&t->head);
  while (t->count < TABLE_MAX_ROWS && fgets(t->row[t->count].text, TABLE_LINE, f))
    if (table_split(&t->row[t->count]) == t->columns) t->count++;
  fclose(f);
  return t->count;
}

static const char *table_get(const table *t, int row, const char *column) {
  for (int i = 0; i < t->columns; i++)
    if (strcmp(t->head.field[i], column) == 0) return t->row[row].field[i];
  return "";
}

static int table_number(const table *t, int row, const char *column) {
  return atoi(table_get(t, row, column));
}

/* "2x15.9X" or "12.7X+12.7OSB" as a leaf of the wall line. */
static void table_leaf(const char *leaf, char *out, size_t size) {
  static const char *const boards[][2] = {
      {"15.9X", "typex-16"}, {"12.7X", "typex-13"}, {"12.7R", "gyp-13"}, {"12.7OSB", "osb-13"}};
  out[0] = '\0';
  for (const char *s = leaf; *s;) {
    int twice = strncmp(s, "2x", 2) == 0;
    if (twice) s += 2;
    for (size_t i = 0; i < sizeof boards / sizeof boards[0]; i++) {
      size_t n = strlen(boards[i][0]);
      if (strncmp(s, boards[i][0], n) != 0 || (s[n] != '\0' && s[n] != '+')) continue;
      size_t len = strlen(out);
      snprintf(out + len, size - len, "%s%s%s", len ? " + " : "", twice ? "2*" : "", boards[i][1]);
      s += n;
      break;
    }
    if (*s == '+')
      s++;
    else
      break;
  }
}

static int table_inches(int mm) {
  return mm == 400 ? 406 : mm == 600 ? 610 : mm;
}

static void table_frame(const table *t, int row, int mil, char *out, size_t size) {
  const char *family = table_get(t, row, "family");
  int depth = table_number(t, row, "stud_depth_mm");
  int twin = strstr(family, "double") != NULL;
  if (strstr(family, "staggered"))
    snprintf(out, size, "wood-89-stag-140");
  else if (strncmp(family, "wood", 4) == 0)
    snprintf(out, size, "wood-%d%s", depth, twin ? "-double" : "");
  else
    snprintf(out, size, "steel-%d-%d%s", depth, mil, twin ? "-double" : "");
}

/* The wall of a row as a wall line. `fibre`: "glass", "stone"; `full`: fills the whole common plate
 * of staggered studs; `spacing_mm`, `mount_mm`: in place of the row's when not 0. */
static void table_line(const table *t, int row, const char *fibre, int full, int mil,
                       int spacing_mm, int mount_mm, char *out, size_t size) {
  char leaf_a[64], leaf_b[64], frame_id[48], fills[64] = "", channel[32] = "";
  int fill_mm = table_number(t, row, "fill_mm"), depth = table_number(t, row, "stud_depth_mm");
  int staggered = strstr(table_get(t, row, "family"), "staggered") != NULL;
  int batt = depth == 92         ? 89
             : depth == 64       ? 65
             : depth == 152      ? 150
             : staggered && full ? 140
                                 : depth;
  table_leaf(table_get(t, row, "leaf_a"), leaf_a, sizeof leaf_a);
  table_leaf(table_get(t, row, "leaf_b"), leaf_b, sizeof leaf_b);
  table_frame(t, row, mil, frame_id, sizeof frame_id);
  if (fill_mm > 0) snprintf(fills, sizeof fills, ", %s-%d", fibre, batt);
  if (fill_mm > 150) snprintf(fills, sizeof fills, ", %s-%d, %s-%d", fibre, batt, fibre, batt);
  if (strcmp(table_get(t, row, "mount"), "none") != 0)
    snprintf(channel, sizeof channel, " | rc@%d",
             mount_mm ? mount_mm : table_inches(table_number(t, row, "mount_spacing_mm")));
  snprintf(out, size, "%s%s | %s@%d%s | %s", leaf_a, channel, frame_id,
           spacing_mm ? spacing_mm : table_inches(table_number(t, row, "spacing_mm")), fills,
           leaf_b);
}

#endif
