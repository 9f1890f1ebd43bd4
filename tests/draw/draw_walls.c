/* Draws walls for the checks beside it. Usage:
 *   draw_walls LINE [us|si] [full|card]    one wall, to stdout
 *   draw_walls --many FOLDER COUNT         COUNT seeded walls that can be built, every frame with
 * no mount, channel and clips in turn; FOLDER/walls.tsv lists file, units, size and wall line Exit
 * 2 when something is wrong with the call, 1 when a drawing could not be written. */
#include <setjmp.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "report/section.h"
#include "wall/compat.h"
#include "wall/line.h"

static jmp_buf out_of_memory;
static const size_t most_bytes = (size_t)1 << 22;

typedef struct desk {
  arena *memory;
  catalog *catalog;
  brief brief;
  report report;
} desk;

static bool write_drawing(FILE *to, desk *d, const wall *w, const section_options *o) {
  text out;
  text_init(&out, d->memory, most_bytes);
  section_draw(&d->report, w, o, &out);
  return !out.cut && fwrite(out.data, 1, out.len, to) == out.len;
}

static int draw_line(desk *d, int argc, char **argv) {
  diag_list faults;
  wall w;
  diag_init(&faults, d->memory);
  if (!line_parse(d->memory, &faults, d->catalog, argv[1], &w)) return 2;
  section_options o = {.prefix = "w", .standalone = true};
  d->brief.side[SIDE_A].room = "bedroom of flat 12";
  d->brief.side[SIDE_B].room = "corridor";
  for (int i = 2; i < argc; i++) {
    if (strcmp(argv[i], "si") == 0) d->report.units = UNITS_SI;
    if (strcmp(argv[i], "card") == 0) o.compact = true;
  }
  return write_drawing(stdout, d, &w, &o) ? 0 : 1;
}

/* ---- many ---- */

static uint32_t dice_state = 20260717u;
static int dice(int below) {
  dice_state = dice_state * 1664525u + 1013904223u;
  return (int)((dice_state >> 8) % (uint32_t)below);
}

static void some_layers(const catalog *c, face *f, int most) {
  int kind = dice((int)c->layer_count);
  for (int n = 1 + dice(most); n > 0 && f->count < WALL_MAX_LAYERS; n--) {
    if (dice(3) == 0) kind = dice((int)c->layer_count);
    f->layer[f->count++] = kind;
  }
}

static int some_fill(const catalog *c) {
  return dice(5) == 0 ? CATALOG_NONE : dice((int)c->fill_count);
}

static wall_mount some_mount(const catalog *c, int type) {
  static const int clip_mm[] = {1219, 1219, 610, 813, 406};
  bool clips = c->mounts[type].clips;
  return (wall_mount){type, c->mount_spacings_mm[dice((int)c->mount_spacing_count)],
                      clips ? clip_mm[dice(5)] : 0};
}

/* Any wall on a frame with a mount (CATALOG_NONE: without), whether or not it can be built. */
static wall some_wall(const catalog *c, int frame_index, int mount_index) {
  static const int gap_mm[] = {25, 25, 13, 50, 100, 400};
  wall w = wall_empty();
  w.frame = frame_index;
  w.spacing_mm = c->spacings_mm[dice((int)c->spacing_count)];
  for (int s = 0; s < 2; s++) some_layers(c, &w.side[s], dice(4) == 0 ? 5 : 2);
  w.fill[0] = some_fill(c);
  if (wall_is_double(c, &w)) {
    w.gap_mm = gap_mm[dice(6)];
    w.fill[1] = some_fill(c);
    for (int s = 0; s < 2; s++)
      if (dice(6) == 0) some_layers(c, &w.inner[s], 1);
  }
  if (mount_index == CATALOG_NONE) return w;
  int side = dice(2);
  w.mount[side] = some_mount(c, mount_index);
  if (dice(3) == 0) some_layers(c, &w.sheath[side], 2);
  return w;
}

static wall buildable_wall(const catalog *c, int turn) {
  enum { TRIES = 100000 };
  int frames = (int)c->frame_count, mounts = (int)c->mount_count + 1;
  for (int i = 0; i < TRIES; i++) {
    wall w = some_wall(c, turn % frames, turn / frames % mounts - 1);
    compat_report found;
    compat_check(c, &w, &found);
    if (found.worst != COMPAT_ILLEGAL) return w;
  }
  return wall_empty();
}

/* Names as people give them, and as people who mean ill do. */
static const char *room_of(desk *d, int turn) {
  static const char *const rooms[] = {"bedroom of flat 12",
                                      "corridor",
                                      "",
                                      "Wohnzimmer s\xC3\xBC"
                                      "dlich & K\xC3\xBC"
                                      "che",
                                      "\xD7\x97\xD7\x93\xD7\xA8 \xD7\xA9\xD7\x99\xD7\xA0\xD7\x94",
                                      "</text><script>alert(1)</script>",
                                      "\"quoted\" 'room' ]]> &amp;",
                                      "turned \xE2\x80\xAE around \xE2\x81\xA7",
                                      "bad \x80\xC0\xAF bytes \x01\x1B[2J",
                                      "\xE5\xAF\x9D\xE5\xAE\xA4",
                                      "WWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWW"};
  enum { ROOMS = sizeof rooms / sizeof rooms[0], LONG = 10000 };
  if (turn % (ROOMS + 1) < ROOMS) return rooms[turn % (ROOMS + 1)];
  char *name = arena_alloc(d->memory, LONG + 1);
  for (int i = 0; i < LONG; i++) name[i] = i % 7 == 6 ? ' ' : 'm';
  return name;
}

static int draw_many(desk *d, const char *folder, int count) {
  FILE *list = fopen(text_format(d->memory, "%s/walls.tsv", folder), "w");
  if (list == NULL) return 1;
  bool written = true;
  for (int i = 0; i < count && written; i++) {
    wall w = buildable_wall(d->catalog, i);
    section_options o = {.prefix = text_format(d->memory, "w%d", i),
                         .standalone = true,
                         .compact = dice(4) == 0,
                         .caption = dice(3) == 0 ? room_of(d, dice(12)) : NULL};
    d->report.units = dice(2) ? UNITS_SI : UNITS_US;
    d->brief.side[SIDE_A].room = room_of(d, dice(12));
    d->brief.side[SIDE_B].room = room_of(d, dice(12));
    FILE *to = fopen(text_format(d->memory, "%s/%d.svg", folder, i), "wb");
    written = w.frame != CATALOG_NONE && to != NULL && write_drawing(to, d, &w, &o);
    if (to != NULL && fclose(to) != 0) written = false;
    fprintf(list, "%d.svg\t%s\t%s\t%s\n", i, d->report.units == UNITS_SI ? "si" : "us",
            o.compact ? "card" : "full", line_print(d->memory, d->catalog, &w));
  }
  if (fclose(list) != 0) written = false;
  return written ? 0 : 1;
}

int main(int argc, char **argv) {
  static desk d;
  diag_list faults;
  if (setjmp(out_of_memory) != 0 || argc < 2) return 2;
  d.memory = arena_create(0, &out_of_memory);
  if (d.memory == NULL) return 2;
  diag_init(&faults, d.memory);
  d.catalog = catalog_load(d.memory, &faults, TEST_ROOT "/catalogs");
  if (d.catalog == NULL) return 2;
  job_defaults(&d.brief);
  d.report =
      (report){.arena = d.memory, .catalog = d.catalog, .brief = &d.brief, .units = UNITS_US};
  bool many = argc == 4 && strcmp(argv[1], "--many") == 0;
  int failed =
      many ? draw_many(&d, argv[2], (int)strtol(argv[3], NULL, 10)) : draw_line(&d, argc, argv);
  arena_free(d.memory);
  return failed;
}
