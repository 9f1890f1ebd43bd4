/* The wall line and wall/1: reading, shortest form, round trip, faults at their place. */
#include "wall/line.h"

#include <check.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "share.h"
#include "shop.h"

static const char *first_fault(void) {
  text t;
  if (faults.count == 0) return "";
  text_init(&t, memory, 1000);
  diag_print(&t, &faults.items[0]);
  return t.data;
}

/* ---- lines that read ---- */

static const struct line_row {
  const char *line, *printed; /* NULL: as it stands */
} line_rows[] = {
    {"2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16", NULL},
    {"gyp-13 + mlv-5 | wood-89-double@406~25, glass-89, glass-89 | typex-16 + osb-11",
     "gyp-13 + mlv-5 | wood-89-double@406, glass-89, glass-89 | typex-16 + osb-11"},
    {"typex-16 | rc@610 | on osb-11 | wood-89@406, glass-89 | typex-16", NULL},
    {"typex-16 | wood-89@406 | on osb-11 | rc@406 | 2*typex-16", NULL},
    {"typex-16|wood-89@406|typex-16", "typex-16 | wood-89@406 | typex-16"},
    {"  typex-16\t| wood-89 @ 406 ,glass-89 |  typex-16 ",
     "typex-16 | wood-89@406, glass-89 | typex-16"},
    {"1*typex-16 | wood-89@406 | typex-16 + typex-16", "typex-16 | wood-89@406 | 2*typex-16"},
    {"typex-16+2*typex-16 | wood-89@406 | 2*typex-16+2*typex-16",
     "3*typex-16 | wood-89@406 | 3*typex-16 + typex-16"},
    {"typex-16 + gyp-16 + typex-16 | wood-89@406 | gyp-13", NULL},
    {"typex-16 | wood-89@16in | typex-16", "typex-16 | wood-89@406 | typex-16"},
    {"typex-16 | rc@24in | wood-89@12in | typex-16", "typex-16 | rc@610 | wood-89@305 | typex-16"},
    {"typex-16 | wood-89@406mm | typex-16", "typex-16 | wood-89@406 | typex-16"},
    {"typex-16 | wood-89-double@406, -, glass-89 | typex-16", NULL},
    {"typex-16 | wood-89-double@406, glass-89, - | typex-16",
     "typex-16 | wood-89-double@406, glass-89 | typex-16"},
    {"typex-16 | wood-89-double@406, -, - | typex-16", "typex-16 | wood-89-double@406 | typex-16"},
    {"typex-16 | wood-89@406, - | typex-16", "typex-16 | wood-89@406 | typex-16"},
    {"typex-16 | wood-89-double@406~50 | typex-16", NULL},
    {"typex-16 | wood-89-double~50@406 | typex-16", "typex-16 | wood-89-double@406~50 | typex-16"},
    {"typex-16 | wood-89-double@406~1in | typex-16", "typex-16 | wood-89-double@406 | typex-16"},
    {"typex-16 | wood-89-double@406, glass-89, glass-89, inner-a osb-11 | typex-16", NULL},
    {"typex-16 | wood-89-double@406, inner-b osb-11 | typex-16", NULL},
    {"typex-16 | wood-89-double@406, -, glass-89, inner-a 2*gyp-6, inner-b osb-11 + mlv-2 | "
     "typex-16",
     NULL},
    {"2*typex-16 | clip@610 | wood-89@406 | typex-16", NULL},
    {"2*typex-16 | clip@610x813 | wood-89@406 | typex-16", NULL},
    {"2*typex-16 | clip@610x1219 | wood-89@406 | typex-16",
     "2*typex-16 | clip@610 | wood-89@406 | typex-16"},
    {"typex-16 | rc@610 | on osb-11 | wood-89@406 | on ply-13 | rc@610 | typex-16", NULL},
    /* what people say */
    {"5/8X | 3-5/8 25ga @24, R13 | 5/8 type x", "typex-16 | steel-92-18@610, glass-89 | typex-16"},
    {"1/2 regular | 2x4@16 | 1/2 regular", "gyp-13 | wood-89@406 | gyp-13"},
    {"2*5/8X | RC@24 | 2x4@16, 3in mineral wool | 5/8X",
     "2*typex-16 | rc@610 | wood-89@406, stone-76 | typex-16"},
    {"5/8X | 6 in 20ga structural@16 | 5/8X", "typex-16 | steel-152-33@406 | typex-16"},
    {"5/8X | 3-5/8\" 20 gauge drywall@16 | TypeX-16", "typex-16 | steel-92-30@406 | typex-16"},
    {"5/8X + 7/16 OSB | double 2x4@16, R13, R13 | 5/8X",
     "typex-16 + osb-11 | wood-89-double@406, glass-89, glass-89 | typex-16"},
    {"5/8X | 362S125-18@24 | 5/8X", "typex-16 | steel-92-18@610 | typex-16"},
    {"5/8X | 3-5/8 25ga @24, R13 | 2x 5/8X", "typex-16 | steel-92-18@610, glass-89 | 2*typex-16"},
    {"2x5/8X | RC @ 24 | 2x4 @ 16, R13 | (2) 5/8 type X",
     "2*typex-16 | rc@610 | wood-89@406, glass-89 | 2*typex-16"},
    {"two layers of 5/8 Type X gypsum board | 25ga 3-5/8 studs @24, R13 batts | 2 layers 5/8X",
     "2*typex-16 | steel-92-18@610, glass-89 | 2*typex-16"},
    {"3 X 1/2 regular + 7/16 OSB | staggered 2x4 @16 | 1x 5/8X",
     "3*gyp-13 + osb-11 | wood-89-stag-140@406 | typex-16"},
};

START_TEST(reads) {
  const struct line_row *row = &line_rows[_i];
  const char *expected = row->printed ? row->printed : row->line;
  wall w, again;
  ck_assert_msg(line_parse(memory, &faults, shop, row->line, &w), "%s: %s", row->line,
                first_fault());
  ck_assert_str_eq(line_print(memory, shop, &w), expected);
  ck_assert(line_parse(memory, &faults, shop, expected, &again));
  ck_assert(wall_same(&w, &again));
}
END_TEST

/* Side B is written from its room inwards too: Type X at the room, OSB on the stud. */
START_TEST(side_b_from_its_room) {
  wall w;
  ck_assert(
      line_parse(memory, &faults, shop, "gyp-13 + mlv-5 | wood-89@406 | typex-16 + osb-11", &w));
  ck_assert_str_eq(shop->layers[w.side[SIDE_B].layer[0]].id, "typex-16");
  ck_assert_str_eq(shop->layers[w.side[SIDE_B].layer[1]].id, "osb-11");
  ck_assert_int_eq(w.fill[0], CATALOG_NONE);
}
END_TEST

/* ---- lines that do not ---- */

static const struct error_row {
  const char *line;
  int column;
  error_code code;
  const char *says;
} error_rows[] = {
    {"", 1, ERROR_WALL_SYNTAX, "face | frame | face"},
    {"typex-16 | wood-89@406", 23, ERROR_WALL_SYNTAX, "face | frame | face"},
    {"typex-61 | wood-89@406 | typex-16", 1, ERROR_WALL_UNKNOWN_ID, "nearest id is \"typex-16\""},
    {"typex-16 | wood-98@406 | typex-16", 12, ERROR_WALL_UNKNOWN_ID, "wood-89"},
    {"typex-16 | wood-89@406, glas-89 | typex-16", 25, ERROR_WALL_UNKNOWN_ID, "glass-89"},
    {"typex-16 | rx@610 | wood-89@406 | typex-16", 12, ERROR_WALL_UNKNOWN_ID, "expected a mount"},
    {"typex-16 | wood-89@406 | typex-16 + zzzzzzzzzzzz", 37, ERROR_WALL_UNKNOWN_ID,
     "unknown id \"zzzzzzzzzzzz\""},
    {"typex-16 | wood-89@407 | typex-16", 20, ERROR_WALL_SYNTAX, "@305, @406 or @610"},
    {"typex-16 | wood-89@600 | typex-16", 20, ERROR_WALL_SYNTAX, "found \"600\""},
    {"typex-16 | wood-89@12mm | typex-16", 20, ERROR_WALL_SYNTAX, "found \"12mm\""},
    {"typex-16 | wood-89@18in | typex-16", 20, ERROR_WALL_SYNTAX, "found \"18in\""},
    {"typex-16 | wood-89 | typex-16", 19, ERROR_WALL_SYNTAX, "wood-89@406"},
    {"typex-16 | wood-89@ | typex-16", 20, ERROR_WALL_SYNTAX, "@305"},
    {"typex-16 | rc | wood-89@406 | typex-16", 14, ERROR_WALL_SYNTAX, "rc@610"},
    {"typex-16 | rc@400 | wood-89@406 | typex-16", 15, ERROR_WALL_SYNTAX, "a mount's rows"},
    {"4*typex-16 | wood-89@406 | typex-16", 1, ERROR_WALL_SYNTAX, "2* or 3*"},
    {"0*typex-16 | wood-89@406 | typex-16", 1, ERROR_WALL_SYNTAX, "2* or 3*"},
    {"*typex-16 | wood-89@406 | typex-16", 1, ERROR_WALL_SYNTAX, "2* or 3*"},
    {"2*| wood-89@406 | typex-16", 3, ERROR_WALL_SYNTAX, "found nothing"},
    {"typex-16 + | wood-89@406 | typex-16", 11, ERROR_WALL_SYNTAX, "found nothing"},
    {" | wood-89@406 | typex-16", 2, ERROR_WALL_SYNTAX, "found nothing"},
    {"typex-16 | wood-89@406, | typex-16", 24, ERROR_WALL_SYNTAX, "found nothing"},
    {"typex-16 | wood-89@406, glass-89, glass-89 | typex-16", 35, ERROR_WALL_SYNTAX,
     "one fill at most"},
    {"typex-16 | wood-89-stag-140@406, glass-89, glass-89 | typex-16", 44, ERROR_WALL_SYNTAX,
     "one fill at most"},
    {"typex-16 | wood-89-double@406, glass-89, -, glass-89 | typex-16", 45, ERROR_WALL_SYNTAX,
     "two fills at most"},
    {"typex-16 | wood-89@406~25 | typex-16", 23, ERROR_WALL_SYNTAX, "one row"},
    {"typex-16 | wood-89-stag-140@406~25 | typex-16", 32, ERROR_WALL_SYNTAX, "one row"},
    {"typex-16 | wood-89-double@406~0 | typex-16", 31, ERROR_WALL_SYNTAX, "gap"},
    {"typex-16 | wood-89-double@406~x | typex-16", 31, ERROR_WALL_SYNTAX, "gap"},
    {"typex-16 | wood-89-double@406~4000 | typex-16", 31, ERROR_WALL_SYNTAX, "5 to 1000"},
    {"typex-16 | wood-89@406, inner-a osb-11 | typex-16", 25, ERROR_WALL_SYNTAX, "two rows only"},
    {"typex-16 | wood-89-double@406, inner-b osb-11, inner-a osb-11 | typex-16", 48,
     ERROR_WALL_SYNTAX, "inner-a once"},
    {"typex-16 | wood-89-double@406, inner-a osb-11, inner-a osb-11 | typex-16", 48,
     ERROR_WALL_SYNTAX, "inner-a once"},
    {"typex-16 | wood-89-double@406, inner-a osb-11, glass-89 | typex-16", 48, ERROR_WALL_SYNTAX,
     "before inner faces"},
    {"typex-16 | wood-89-double@406, inner-a | typex-16", 39, ERROR_WALL_SYNTAX, "found nothing"},
    {"typex-16 | on osb-11 | wood-89@406 | typex-16", 12, ERROR_WALL_SYNTAX,
     "expected a mount before \"on\""},
    {"typex-16 | rc@610 | osb-11 | wood-89@406 | typex-16", 21, ERROR_WALL_SYNTAX,
     "expected \"on\""},
    {"typex-16 | osb-11 | wood-89@406 | typex-16", 12, ERROR_WALL_SYNTAX,
     "found the board \"osb-11\""},
    {"rc@610 | typex-16 | wood-89@406 | typex-16", 1, ERROR_WALL_SYNTAX,
     "expected a board or membrane"},
    {"typex-16@406 | wood-89@406 | typex-16", 9, ERROR_WALL_SYNTAX, "+ or |"},
    {"wood-89@406 | typex-16 | typex-16", 1, ERROR_WALL_SYNTAX, "a face on each side"},
    {"typex-16 | wood-89@406 | wood-89@406 | typex-16", 26, ERROR_WALL_SYNTAX, "found a second"},
    {"typex-16 | rc@610 | typex-16", 1, ERROR_WALL_SYNTAX, "expected a frame"},
    {"a | b | c | d | e | f | g | h", 29, ERROR_WALL_SYNTAX, "3 to 5"},
    {"glass-89 | wood-89@406 | typex-16", 1, ERROR_WALL_SYNTAX, "found the fill \"glass-89\""},
    {"typex-16 | wood-89@406, typex-16 | typex-16", 25, ERROR_WALL_SYNTAX, "found the board"},
    {"typex-16 | rc@610x400 | wood-89@406 | typex-16", 15, ERROR_WALL_SYNTAX, "found \"610x400\""},
    {"typex-16 | clip@610x2000 | wood-89@406 | typex-16", 21, ERROR_WALL_SYNTAX, "200 to 1219"},
    {"typex-16 | clip@610xtwo | wood-89@406 | typex-16", 21, ERROR_WALL_SYNTAX, "found \"two\""},
    {"3*typex-16 + 3*typex-16 + typex-16 | wood-89@406 | typex-16", 27, ERROR_WALL_SYNTAX,
     "at most 6"},
    {"3*typex-16 + typex-16 | rc@610 | on 3*osb-11 | wood-89@406 | typex-16", 1, ERROR_WALL_SYNTAX,
     "at most 6"},
    {"4x 5/8X | 2x4@16 | 5/8X", 1, ERROR_WALL_SYNTAX, "expected 1 to 3 layers, found 4"},
    {"2x4 | 2x4@16 | 5/8X", 7, ERROR_WALL_SYNTAX, "expected one frame, found a second"},
    {"5/8 | 2x4@16 | 5/8X", 1, ERROR_WALL_UNKNOWN_ID, "may mean gyp-16 or typex-16"},
    {"5/8X | 3-5/8 20ga@16 | 5/8X", 8, ERROR_WALL_UNKNOWN_ID,
     "may mean steel-92-30 or steel-92-33"},
    {"5/8X | 2x4@16, mineral wool | 5/8X", 16, ERROR_WALL_UNKNOWN_ID, "stone-50"},
};

START_TEST(refuses) {
  const struct error_row *row = &error_rows[_i];
  wall w;
  ck_assert_msg(!line_parse(memory, &faults, shop, row->line, &w), "%s is refused", row->line);
  ck_assert_int_ge((int)faults.count, 1);
  const diag *f = &faults.items[0];
  ck_assert_ptr_null(f->place.file);
  ck_assert_int_eq(f->place.line, 1);
  ck_assert_msg(f->place.column == row->column, "%s: column %d, %s", row->line, f->place.column,
                first_fault());
  ck_assert_msg(f->code == row->code, "%s: %s", row->line, first_fault());
  ck_assert_msg(strstr(f->message, row->says) != NULL, "%s: %s", row->line, first_fault());
}
END_TEST

START_TEST(all_faults_show_at_once) {
  wall w;
  ck_assert(!line_parse(memory, &faults, shop,
                        "typx-16 | rc@600 | wood-89@406, glas-89 | 4*typex-16 + foo", &w));
  static const int columns[] = {1, 14, 33, 43, 56};
  ck_assert_int_eq((int)faults.count, 5);
  for (int i = 0; i < 5; i++) {
    bool found = false;
    for (size_t k = 0; k < faults.count; k++)
      found = found || faults.items[k].place.column == columns[i];
    ck_assert_msg(found, "a fault at column %d", columns[i]);
  }
}
END_TEST

START_TEST(unknown_frame_shows_other_faults_too) {
  wall w;
  ck_assert(!line_parse(memory, &faults, shop, "typx-16 | wod-89@406 | typex-16", &w));
  ck_assert_int_eq((int)faults.count, 2);
}
END_TEST

START_TEST(long_lines_are_refused) {
  char line[5000];
  wall w;
  memset(line, '+', sizeof line);
  line[sizeof line - 1] = '\0';
  ck_assert(!line_parse(memory, &faults, shop, line, &w));
}
END_TEST

/* ---- round trip ---- */

static unsigned long long seed;

static int draw(int n) {
  seed = seed * 6364136223846793005ULL + 1442695040888963407ULL;
  return (int)((seed >> 33) % (unsigned long long)n);
}

static face draw_face(int most) {
  face f = {.count = 1 + draw(most)};
  for (int i = 0; i < f.count; i++)
    f.layer[i] = i > 0 && draw(2) ? f.layer[i - 1] : draw((int)shop->layer_count);
  return f;
}

static void draw_side(wall *w, int s) {
  w->side[s] = draw_face(4);
  if (draw(2)) return;
  w->mount[s].mount = draw((int)shop->mount_count);
  w->mount[s].spacing_mm = shop->mount_spacings_mm[draw((int)shop->mount_spacing_count)];
  int most = shop->mounts[w->mount[s].mount].clip_spacing_mm;
  if (most > 0) w->mount[s].clip_spacing_mm = draw(2) ? most : 200 + draw(most - 199);
  if (draw(3) == 0) w->sheath[s] = draw_face(2);
}

static wall draw_wall(void) {
  wall w = wall_empty();
  w.frame = draw((int)shop->frame_count);
  const frame *f = &shop->frames[w.frame];
  w.spacing_mm = shop->spacings_mm[draw((int)shop->spacing_count)];
  for (int r = 0; r < f->rows; r++) w.fill[r] = draw((int)shop->fill_count + 1) - 1;
  for (int s = 0; s < 2; s++) draw_side(&w, s);
  if (f->layout == FRAME_DOUBLE) {
    w.gap_mm = draw(2) ? 25 : 5 + draw(996);
    for (int s = 0; s < 2; s++) {
      if (draw(4) == 0) w.inner[s] = draw_face(3);
    }
  }
  return w;
}

/* The same line without blanks, but for those after the words on, inner-a and inner-b. */
static const char *squeezed(const char *line) {
  text t;
  text_init(&t, memory, 4000);
  for (size_t i = 0; line[i]; i++) {
    bool word =
        (i >= 2 && strncmp(line + i - 2, "on ", 3) == 0 && (i == 2 || line[i - 3] == ' ')) ||
        (i >= 7 &&
         (strncmp(line + i - 7, "inner-a ", 8) == 0 || strncmp(line + i - 7, "inner-b ", 8) == 0));
    if (line[i] != ' ' || word) text_char(&t, line[i]);
  }
  return t.data;
}

START_TEST(round_trip) {
  enum { WALLS = 5000 };
  seed = 20240301;
  for (int i = 0; i < share_of(WALLS); i++) {
    wall w = draw_wall(), again, tight;
    const char *line = line_print(memory, shop, &w);
    ck_assert_msg(line_parse(memory, &faults, shop, line, &again), "%s: %s", line, first_fault());
    ck_assert_msg(wall_same(&w, &again), "%s", line);
    ck_assert_str_eq(line_print(memory, shop, &again), line);
    ck_assert_msg(line_parse(memory, &faults, shop, squeezed(line), &tight), "%s: %s",
                  squeezed(line), first_fault());
    ck_assert_msg(wall_same(&w, &tight), "%s", line);
  }
}
END_TEST

/* Bytes changed at random: nothing crashes, faults come with a column inside the line, what reads
 * prints and reads again. */
START_TEST(slips) {
  enum { SLIPS = 5000 };
  static const char bytes[] = "|+*@~,- x0123456789abcdefghijklmnopqrstuvwxyz/\"\t\n\x80\xff";
  seed = 20240302;
  int read = 0;
  for (int i = 0; i < share_of(SLIPS); i++) {
    wall w = draw_wall(), again;
    const char *line = line_print(memory, shop, &w);
    char *slip = arena_alloc(memory, strlen(line) + 1);
    memcpy(slip, line, strlen(line) + 1);
    for (int k = 0; k < 1 + draw(3); k++)
      slip[draw((int)strlen(line))] = bytes[draw((int)sizeof bytes - 1)];
    diag_init(&faults, memory);
    if (!line_parse(memory, &faults, shop, slip, &w)) {
      ck_assert_int_ge((int)faults.errors, 1);
      ck_assert_int_le(faults.items[0].place.column, (int)strlen(slip) + 1);
      ck_assert_int_ge(faults.items[0].place.column, 1);
      continue;
    }
    read++;
    const char *printed = line_print(memory, shop, &w);
    ck_assert_msg(line_parse(memory, &faults, shop, printed, &again) && wall_same(&w, &again),
                  "%s / %s", slip, printed);
  }
  ck_assert_int_gt(read, 0);
}
END_TEST

/* ---- wall/1 ---- */

static bool from_json(const char *json, wall *w, const char **name) {
  const json_value *root = json_parse(memory, &faults, "wall.json", json, strlen(json));
  return root && line_from_json(memory, &faults, shop, root, w, name);
}

static const struct json_row {
  const char *json, *line;
} json_rows[] = {
    {"{\"septum\":\"wall/1\",\"name\":\"corridor "
     "wall\",\"side_a\":[\"typex-16\",\"typex-16\"],\"side_b\":[\"typex-16\"],"
     "\"frame\":{\"id\":\"steel-92-18\",\"spacing_mm\":610},\"fill\":[\"glass-89\"],"
     "\"mount_a\":{\"id\":\"rc\",\"spacing_mm\":610},\"mount_b\":null}",
     "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16"},
    {"{\"septum\":\"wall/"
     "1\",\"side_a\":[\"gyp-13\",\"mlv-5\"],\"side_b\":[\"typex-16\",\"osb-11\"],"
     "\"frame\":{\"id\":\"wood-89-double\",\"spacing_in\":16},\"fill\":[null,\"glass-89\"],\"gap_"
     "mm\":50}",
     "gyp-13 + mlv-5 | wood-89-double@406~50, -, glass-89 | typex-16 + osb-11"},
    {"{\"septum\":\"wall/1\",\"side_a\":[\"typex-16\"],\"sheath_a\":[\"osb-11\"],\"side_b\":[\"5/"
     "8X\"],"
     "\"frame\":{\"id\":\"2x4\",\"spacing_mm\":\"16in\"},\"mount_a\":{\"id\":\"clip\",\"spacing_"
     "mm\":610,\"clip_spacing_mm\":813}}",
     "typex-16 | clip@610x813 | on osb-11 | wood-89@406 | typex-16"},
    {"{\"septum\":\"wall/"
     "1\",\"side_a\":[\"typex-16\"],\"side_b\":[\"typex-16\"],\"inner_a\":[\"osb-11\"],\"inner_b\":"
     "[],"
     "\"frame\":{\"id\":\"wood-89-double\",\"spacing_mm\":610},\"fill\":[\"glass-89\"]}",
     "typex-16 | wood-89-double@610, glass-89, inner-a osb-11 | typex-16"},
};

START_TEST(json_reads) {
  wall w, same;
  const char *name = NULL;
  ck_assert_msg(from_json(json_rows[_i].json, &w, &name), "%s", first_fault());
  ck_assert_str_eq(line_print(memory, shop, &w), json_rows[_i].line);
  ck_assert(line_parse(memory, &faults, shop, json_rows[_i].line, &same) && wall_same(&w, &same));
  if (_i == 0)
    ck_assert_str_eq(name, "corridor wall");
  else
    ck_assert_ptr_null(name);
}
END_TEST

#define SIDES "\"side_a\":[\"typex-16\"],\"side_b\":[\"typex-16\"]"
#define WOOD  "\"frame\":{\"id\":\"wood-89\",\"spacing_mm\":406}"

static const struct json_error_row {
  const char *json;
  error_code code;
  const char *path;
} json_error_rows[] = {
    {"{\"septum\":\"wall/2\"," SIDES "," WOOD "}", ERROR_FILE_KIND, "$.septum"},
    {"{\"septum\":\"wall/1\"," SIDES "}", ERROR_FIELD_MISSING, "$"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD ",\"fills\":[]}", ERROR_FIELD_UNKNOWN, "$.fills"},
    {"{\"septum\":\"wall/1\",\"side_a\":[\"typex-61\"],\"side_b\":[\"typex-16\"]," WOOD "}",
     ERROR_WALL_UNKNOWN_ID, "$.side_a[0]"},
    {"{\"septum\":\"wall/1\",\"side_a\":[],\"side_b\":[\"typex-16\"]," WOOD "}", ERROR_FIELD_TYPE,
     "$.side_a"},
    {"{\"septum\":\"wall/1\",\"side_a\":\"typex-16\",\"side_b\":[\"typex-16\"]," WOOD "}",
     ERROR_FIELD_TYPE, "$.side_a"},
    {"{\"septum\":\"wall/1\",\"side_a\":[16],\"side_b\":[\"typex-16\"]," WOOD "}", ERROR_FIELD_TYPE,
     "$.side_a[0]"},
    {"{\"septum\":\"wall/1\"," SIDES ",\"frame\":{\"id\":\"wood-89\",\"spacing_mm\":400}}",
     ERROR_FIELD_RANGE, "$.frame.spacing_mm"},
    {"{\"septum\":\"wall/1\"," SIDES ",\"frame\":{\"id\":\"glass-89\",\"spacing_mm\":406}}",
     ERROR_WALL_SYNTAX, "$.frame.id"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD ",\"fill\":[\"glass-89\",\"glass-89\"]}",
     ERROR_FIELD_TYPE, "$.fill"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD ",\"gap_mm\":25}", ERROR_FIELD_CONFLICT, "$.gap_mm"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD ",\"inner_a\":[\"osb-11\"]}", ERROR_FIELD_CONFLICT,
     "$.inner_a"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD ",\"sheath_a\":[\"osb-11\"]}", ERROR_FIELD_CONFLICT,
     "$.sheath_a"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD ",\"mount_a\":{\"id\":\"rc\",\"spacing_mm\":500}}",
     ERROR_FIELD_RANGE, "$.mount_a.spacing_mm"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD
     ",\"mount_b\":{\"id\":\"rc\",\"spacing_mm\":610,\"clip_spacing_mm\":610}}",
     ERROR_FIELD_CONFLICT, "$.mount_b.clip_spacing_mm"},
    {"{\"septum\":\"wall/1\"," SIDES "," WOOD
     ",\"mount_b\":{\"id\":\"clip\",\"spacing_mm\":610,\"clip_spacing_mm\":1500}}",
     ERROR_FIELD_RANGE, "$.mount_b.clip_spacing_mm"},
};

START_TEST(json_refuses) {
  const struct json_error_row *row = &json_error_rows[_i];
  wall w;
  const char *name = NULL;
  ck_assert_msg(!from_json(row->json, &w, &name), "%s is refused", row->json);
  const diag *f = &faults.items[0];
  ck_assert_msg(f->code == row->code, "%s: %s", row->json, first_fault());
  ck_assert_msg(f->place.path && strcmp(f->place.path, row->path) == 0, "%s: %s", row->json,
                first_fault());
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof(table)[0])

int main(void) {
  Suite *suite = suite_create("wall/line");
  TCase *t = tcase_create("lines");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_set_timeout(t, 120);
  tcase_add_loop_test(t, reads, 0, ROWS(line_rows));
  tcase_add_test(t, side_b_from_its_room);
  tcase_add_loop_test(t, refuses, 0, ROWS(error_rows));
  tcase_add_test(t, all_faults_show_at_once);
  tcase_add_test(t, unknown_frame_shows_other_faults_too);
  tcase_add_test(t, long_lines_are_refused);
  tcase_add_test(t, round_trip);
  tcase_add_test(t, slips);
  tcase_add_loop_test(t, json_reads, 0, ROWS(json_rows));
  tcase_add_loop_test(t, json_refuses, 0, ROWS(json_error_rows));
  suite_add_tcase(suite, t);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
