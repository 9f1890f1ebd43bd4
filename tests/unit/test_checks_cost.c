/* Takeoff and money: a wall worked by hand, proportions of the trade, the parts of the sweep,
 * single rules. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/units.h"
#include "checks/cost.h"
#include "wall/line.h"

static jmp_buf failed;
static arena *memory;
static diag_list diags;
static const catalog *shop;
static const price_book *book;

static void setup(void) {
  memory = arena_create(0, &failed);
  ck_assert_ptr_nonnull(memory);
  if (setjmp(failed)) ck_abort_msg("memory ran out");
  diag_init(&diags, memory);
  shop = catalog_load(memory, &diags, TEST_ROOT "/catalogs");
  ck_assert_msg(shop != NULL, "the shipped catalogs load");
  book = prices_load(memory, &diags, shop, TEST_ROOT "/prices/kestrel-yard.json");
  ck_assert_msg(book != NULL, "the shipped price book loads");
}

static void teardown(void) {
  arena_free(memory);
}

static wall parsed(const char *line) {
  wall w;
  ck_assert_msg(line_parse(memory, &diags, shop, line, &w), "%s reads", line);
  return w;
}

static brief brief_of(double length_ft, double height_ft) {
  brief b;
  job_defaults(&b);
  b.length_m = length_ft * UNITS_M_PER_FT;
  b.height_m = height_ft * UNITS_M_PER_FT;
  return b;
}

static cost_total cost_of(const brief *b, const char *line, takeoff *t) {
  wall w = parsed(line);
  cost_total total;
  cost_takeoff(book, shop, b, &w, t, &total);
  ck_assert_msg(!t->missing, "%s: no price for %s", line, t->missing ? t->missing_code : "");
  return total;
}

/* The line of an item and kind; several of one item are summed. */
static cost_line line_of(const takeoff *t, const char *code, line_kind kind) {
  cost_line found = {CATALOG_NONE, "", "", kind, 0, "", 0, 0};
  int item = prices_item(book, code);
  for (int i = 0; i < t->count; i++) {
    const cost_line *l = &t->line[i];
    if (l->item != item || l->kind != kind) continue;
    double quantity = found.quantity;
    found = *l;
    found.quantity += quantity;
  }
  return found;
}

/* ---- by hand, to the cent ----
 * 12 ft x 9 ft, 25 gauge studs at 24 in, one 5/8 in Type X board a side, 3-1/2 in glass, Level 4
 * both sides; prices of prices/kestrel-yard.json; quantities by the rules of docs/methods/cost.md.
 * Area 108 ft2; labour factor 1 (9 ft high, 12 ft long).
 *
 * studs      n = 12/2 + 1 = 7, + 10 % = 7.7 of 9 ft = 69.3 ft x 0.78           = 54.054 -> 54.05
 *            7.7 x 0.11 h = 0.847 h x 62                                       = 52.514 -> 52.51
 * track      2 x 12 = 24 ft, + 4 % = 24.96 ft x 0.718                          = 17.92128 -> 17.92
 *            24 x 0.025 = 0.6 h x 62                                           = 37.20 -> 37.20
 * batts      108 ft2 + 3 % = 111.24 ft2 x 0.56 (24 in wide)                    = 62.2944 -> 62.29
 *            108 x 0.006 = 0.648 h x 48                                        = 31.104 -> 31.10
 * sealant    2 faces x 2 (12 + 9) = 84 ft, + 15 % = 96.6 ft x 9/85             = 10.228235 -> 10.23
 *            84 x 0.015 = 1.26 h x 62                                          = 78.12 -> 78.12 box
 * pads   2 sides x 3 x 3.6576 m / 10 m = 2.19456, + 3 % = 2.2603968 x 5.50 = 12.432182  -> 12.43
 *            2.19456 x 0.10 = 0.219456 h x 62                                  = 13.606272 -> 13.61
 * boards     2 x 108 = 216 ft2, + 10 % = 237.6 ft2 x 0.52                      = 123.552    ->
 * 123.55 216 x 0.0145 = 3.132 h x 62                                       = 194.184    -> 194.18
 * screws     a sheet 4 x 9 ft on studs at 2 ft: 3 lines x 10 screws / 36 ft2 x 216 ft2 = 180, + 5 %
 * = 189 x 0.012 = 2.268 -> 2.27 finish     2 x 108 = 216 ft2 x 0.075 = 16.20      -> 16.20 216 x
 * 0.0125 = 2.7 h x 60                                         = 162.00     -> 162.00
 *
 * material   54.05 + 17.92 + 62.29 + 10.23 + 12.43 + 123.55 + 2.27 + 16.20     = 298.94
 * labour     52.51 + 37.20 + 31.10 + 78.12 + 13.61 + 194.18 + 162.00           = 568.72
 * sales tax  7 % of 298.94 = 20.9258                                           -> 20.93
 * overhead and profit 20 % of (298.94 + 568.72 + 20.93 = 888.59) = 177.718     -> 177.72
 * total      888.59 + 177.72                                                   = 1066.31
 */
static const struct hand_row {
  const char *code;
  line_kind kind;
  long long cents;
  const char *section;
} hand_rows[] = {
    {"steel-92-18", LINE_MATERIAL, 5405, "09 22 16"},
    {"steel-92-18", LINE_LABOUR, 5251, "09 22 16"},
    {"track-92-18", LINE_MATERIAL, 1792, "09 22 16"},
    {"track-92-18", LINE_LABOUR, 3720, "09 22 16"},
    {"glass-89-24in", LINE_MATERIAL, 6229, "09 81 16"},
    {"glass-89-24in", LINE_LABOUR, 3110, "09 81 16"},
    {"sealant", LINE_MATERIAL, 1023, "07 92 19"},
    {"sealant", LINE_LABOUR, 7812, "07 92 19"},
    {"box-pad", LINE_MATERIAL, 1243, "07 84 13"},
    {"box-pad", LINE_LABOUR, 1361, "07 84 13"},
    {"typex-16", LINE_MATERIAL, 12355, "09 29 00"},
    {"typex-16", LINE_LABOUR, 19418, "09 29 00"},
    {"screw", LINE_MATERIAL, 227, "09 29 00"},
    {"finish-4", LINE_MATERIAL, 1620, "09 29 00"},
    {"finish-4", LINE_LABOUR, 16200, "09 29 00"},
};

enum { HAND_ROWS = sizeof hand_rows / sizeof hand_rows[0], HAND_MARKUPS = 2 };

START_TEST(by_hand) {
  brief b = brief_of(12, 9);
  takeoff t;
  cost_total total = cost_of(&b, "typex-16 | steel-92-18@610, glass-89 | typex-16", &t);
  for (int i = 0; i < HAND_ROWS; i++) {
    const struct hand_row *row = &hand_rows[i];
    cost_line l = line_of(&t, row->code, row->kind);
    ck_assert_msg(l.cents == row->cents, "%s: %lld cents, by hand %lld", row->code, l.cents,
                  row->cents);
    ck_assert_str_eq(l.section, row->section);
  }
  ck_assert_int_eq(t.count, HAND_ROWS + HAND_MARKUPS);
  ck_assert_int_eq(total.material_cents, 29894);
  ck_assert_int_eq(total.labour_cents, 56872);
  ck_assert_int_eq(t.line[t.count - 2].cents, 2093);
  ck_assert_int_eq(t.line[t.count - 1].cents, 17772);
  ck_assert_int_eq(total.total_cents, 106631);
}
END_TEST

/* ---- proportions ----
 * What such walls cost installed, $/ft2 of wall, 9 ft high, long, Level 4, at these prices: an
 * estimator's sheet with the quantities of common practice (computed, not published), itself good
 * to 15 %. */
#define PROPORTION_SHARE 0.15
#define LONG_WALL_FT     100 /* long enough for the ends not to count */

static const struct proportion_row {
  const char *line;
  double per_ft2;
} proportion_rows[] = {
    {"typex-16 | wood-89@406, glass-89 | typex-16", 9.7},
    {"typex-16 | steel-92-18@610, glass-89 | typex-16", 9.3},
    {"typex-16 | steel-92-18@406, glass-89 | typex-16", 9.9},
    {"2*typex-16 | steel-92-18@406, glass-89 | typex-16", 11.7},
    {"2*typex-16 | steel-92-18@406, glass-89 | 2*typex-16", 14.0},
    {"typex-16 | steel-92-33@406, glass-89 | typex-16", 10.9},
    {"typex-16 | rc@610 | wood-89@406, glass-89 | typex-16", 11.3},
    {"2*typex-16 | rc@610 | wood-89@406, glass-89 | typex-16", 13.7},
    {"2*typex-16 | rc@610 | wood-89@406, glass-89 | 2*typex-16", 16.0},
    {"2*typex-16 | clip@610 | wood-89@406, glass-89 | 2*typex-16", 17.7},
    {"2*typex-16 | wood-89-stag-140@406, glass-89 | 2*typex-16", 15.9},
    {"typex-16 | wood-89-double@406, glass-89, glass-89 | typex-16", 12.9},
    {"2*typex-16 | wood-89-double@406, glass-89, glass-89 | typex-16", 15.3},
    {"2*typex-16 | wood-89-double@406, glass-89, glass-89 | 2*typex-16", 17.6},
};

START_TEST(proportions) {
  const struct proportion_row *row = &proportion_rows[_i];
  brief b = brief_of(LONG_WALL_FT, 9);
  takeoff t;
  cost_total total = cost_of(&b, row->line, &t);
  double per_ft2 = (double)total.total_cents / 100 / (total.area_m2 / UNITS_M2_PER_FT2);
  ck_assert_msg(fabs(per_ft2 / row->per_ft2 - 1) <= PROPORTION_SHARE,
                "%s: %.2f, expected about %.2f", row->line, per_ft2, row->per_ft2);
}
END_TEST

/* ---- single rules: the quantity of one item, waste included ---- */
#define QUANTITY_SHARE 1e-9 /* equal but for rounding in doubles */

static void plain(brief *b) {
  (void)b;
}
static void bearing(brief *b) {
  b->loadbearing = true;
}
static void to_ceiling(brief *b) {
  b->top = TOP_CEILING;
  b->ceiling_m[0] = b->ceiling_m[1] = 9 * UNITS_M_PER_FT - 0.1;
}
static void upright(brief *b) {
  b->boards = BOARDS_VERTICAL;
}
static void courses(brief *b) {
  b->boards = BOARDS_HORIZONTAL;
}
static void slip(brief *b) {
  b->head = HEAD_SLIP;
}
static void slip_rated(brief *b) {
  b->head = HEAD_SLIP;
  b->fire_min = 60;
}
static void heavy_a(brief *b) {
  b->side[0].fastening = FASTENING_HEAVY;
}
static void heavy_stretch(brief *b) {
  heavy_a(b);
  b->side[0].fastening_length_m = 5 * UNITS_M_PER_FT;
}
static void no_boxes(brief *b) {
  b->boxes_given = true;
}
static void ceiling_8ft(brief *b) {
  b->ceiling_m[0] = 8 * UNITS_M_PER_FT - 0.1;
}
static void wet_a(brief *b) {
  b->side[0].wet = true;
}
static void bare(brief *b) {
  b->side[0].finish_level = 0;
}
static void door(brief *b) {
  b->opening_count = 1;
  b->openings[0] = (opening){.kind = "door", .area_m2 = 21 * UNITS_M2_PER_FT2};
}
static void large_opening(brief *b) {
  b->opening_count = 1;
  b->openings[0] = (opening){.kind = "glazing", .area_m2 = 40 * UNITS_M2_PER_FT2};
}

/* What stands in the wall, counted. */
static void counted(brief *b, int corners, int tees, int free_ends, int doors) {
  b->corners = corners;
  b->tees = tees;
  b->free_ends = free_ends;
  b->doors = doors;
}
static void none_counted(brief *b) {
  counted(b, 0, 0, 0, 0);
}
static void one_corner(brief *b) {
  counted(b, 1, -1, -1, -1);
}
static void two_tees(brief *b) {
  counted(b, -1, 2, -1, -1);
}
static void one_free_end(brief *b) {
  counted(b, -1, -1, 1, -1);
}
static void one_door(brief *b) {
  counted(b, -1, -1, -1, 1);
}
static void door_among_openings(brief *b) {
  door(b);
  counted(b, 0, 0, 0, 2);
}
static void opening_beside_counts(brief *b) {
  door(b);
  counted(b, 0, -1, -1, -1);
}
static void corridor_wall(brief *b) {
  counted(b, 1, 3, 0, 2);
}

#define STEEL_LINE   "typex-16 | steel-92-18@610, glass-89 | typex-16"
#define BEARING_LINE "typex-16 | steel-92-33@406, glass-89 | typex-16"
#define WOOD_LINE    "typex-16 | wood-89@406, glass-89 | typex-16"
#define DOUBLE_LINE  "typex-16 | wood-89-double@406, glass-89, glass-89 | typex-16"
#define STAG_LINE    "typex-16 | wood-89-stag-140@406, glass-89 | typex-16"
#define RC_LINE      "typex-16 | rc@610 | wood-89@406, glass-89 | typex-16"
#define CLIP_LINE    "typex-16 | clip@610 | wood-89@406, glass-89 | typex-16"
#define STEEL_RC     "typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16"
#define STEEL_DOUBLE "typex-16 | steel-92-18-double@610, glass-89, glass-89 | typex-16"
#define STEEL_STAG   "typex-16 | steel-64-18-stag-102@610, glass-65 | typex-16"

/* Quantities in the unit of the item: ft, ft2 or each. Sources: CP = common practice, no source. */
static const struct rule_row {
  const char *name, *source, *line;
  double length_ft, height_ft;
  void (*brief)(brief *);
  const char *code;
  double quantity;
} rule_rows[] = {
    {"studs at 24 in in 24 ft", "CP: n = ceil(L/s) + 1, + 10 %", STEEL_LINE, 24, 9, plain,
     "steel-92-18", 13 * 1.1 * 9},
    {"a foot more is a stud more", "CP", STEEL_LINE, 25, 9, plain, "steel-92-18", 14 * 1.1 * 9},
    {"next stock length", "CP: steel 8 9 10 12 14 16 ft", STEEL_LINE, 24, 10.5, plain,
     "steel-92-18", 13 * 1.1 * 12},
    {"precut wood under 8 ft", "CP: 92-5/8 in", WOOD_LINE, 24, 8, plain, "wood-89",
     19 * 1.1 * 92.625 / 12},
    {"wood beyond precut", "CP: then 2 ft steps", WOOD_LINE, 24, 11, plain, "wood-89",
     19 * 1.1 * 12},
    {"staggered: each face its studs", "CP", STAG_LINE, 24, 8, plain, "wood-89",
     2 * 19 * 1.1 * 92.625 / 12},
    {"staggered: one wide plate", "CP: 2 L", STAG_LINE, 24, 8, plain, "plate-140", 2 * 24 * 1.05},
    {"double: twice the studs", "CP", DOUBLE_LINE, 24, 8, plain, "wood-89",
     2 * 19 * 1.1 * 92.625 / 12},
    {"double: twice the plates", "CP", DOUBLE_LINE, 24, 8, plain, "plate-89", 4 * 24 * 1.05},
    {"plates, load-bearing", "CP: 3 L", WOOD_LINE, 24, 8, bearing, "plate-89", 3 * 24 * 1.05},
    {"bridging of bearing steel", "CP: rows 48 in apart or closer", BEARING_LINE, 24, 9, bearing,
     "bridging", 2 * 24 * 1.04},
    /* bare steel: ceil(9/4) - 1 = 2 rows, of each row of studs, + 4 % */
    {"boards hold both flanges", "CP: no bridging", STEEL_LINE, 24, 9, plain, "bridging", 0},
    {"a mounted side leaves them bare", "CP: bridging at 48 in or closer", STEEL_RC, 24, 9, plain,
     "bridging", 2 * 24 * 1.04},
    {"boards that stop at the ceiling", "CP: bridging", STEEL_LINE, 24, 12, to_ceiling, "bridging",
     2 * 24 * 1.04},
    {"staggered studs", "CP: bridging, each face's", STEEL_STAG, 24, 9, plain, "bridging",
     2 * 2 * 24 * 1.04},
    {"two rows", "CP: bridging, each row's", STEEL_DOUBLE, 24, 9, plain, "bridging",
     2 * 2 * 24 * 1.04},
    {"two rows at 8 ft", "CP: one row each", STEEL_DOUBLE, 24, 8, plain, "bridging", 2 * 24 * 1.04},
    {"wood takes none", "CP: bare or not", RC_LINE, 24, 9, plain, "bridging", 0},
    {"load-bearing and mounted: once", "CP",
     "typex-16 | rc@610 | steel-92-33@406, glass-89 | typex-16", 24, 9, bearing, "bridging",
     2 * 24 * 1.04},
    {"two rows of steel are braced", "CP: every 48 in of a row of bridging", STEEL_DOUBLE, 25, 9,
     plain, "cross-brace", 2 * 7 * 1.05},
    {"two rows of wood are not tied", "IBC 718.2.1 accepts batts, from memory", DOUBLE_LINE, 25, 9,
     plain, "cross-brace", 0},
    /* boards laid out: sheets 48 in x 8 9 10 12 14 ft, 54 in x 12 ft; 5 % handling */
    {"upright sheets of 9 ft", "CP", STEEL_LINE, 24, 9, upright, "typex-16", 2 * 216 * 1.05},
    {"upright sheets of 12 ft for 10-1/2 ft", "CP: next length", STEEL_LINE, 24, 10.5, upright,
     "typex-16", 2 * 24 * 12 * 1.05},
    {"upright, higher than any sheet", "CP: 14 ft and 8 ft for 16 ft", STEEL_LINE, 24, 16, upright,
     "typex-16", 2 * 24 * 22 * 1.05},
    {"upright, two of the longest", "CP: 14 ft and 14 ft", STEEL_LINE, 24, 28, upright, "typex-16",
     2 * 24 * 28 * 1.05},
    {"two courses of 54 in for 9 ft", "CP: ceil(H/width)", STEEL_LINE, 24, 9, courses, "typex-16",
     2 * 216 * 1.05},
    {"three courses of 48 in for 10 ft", "CP: 12 ft, not 13-1/2", STEEL_LINE, 24, 10, courses,
     "typex-16", 2 * 24 * 12 * 1.05},
    {"wood panels are not laid out", "sheets of their own: the item's waste",
     "typex-16 + osb-11 | wood-89@406 | typex-16", 24, 9, courses, "osb-11", 216 * 1.1},
    {"the board over them is", "CP", "typex-16 + osb-11 | wood-89@406 | typex-16", 24, 10, upright,
     "typex-16", 2 * 240 * 1.05},
    {"door: two jambs and a header", "CP", STEEL_LINE, 24, 9, door, "steel-92-18",
     (13 * 1.1 + 3) * 9},
    /* counted: n + 2 a corner + 1 a tee + 1 a free end + header and two jambs a door */
    {"nothing beside the studs", "CP: counts take the place of 10 %", STEEL_LINE, 24, 9,
     none_counted, "steel-92-18", 13 * 9},
    {"a corner", "CP: + 2", STEEL_LINE, 24, 9, one_corner, "steel-92-18", (13 + 2) * 9},
    {"two tees", "CP: + 1 each", STEEL_LINE, 24, 9, two_tees, "steel-92-18", (13 + 2) * 9},
    {"a free end", "CP: + 1", STEEL_LINE, 24, 9, one_free_end, "steel-92-18", (13 + 1) * 9},
    {"a door in 25 gauge: header", "CP", STEEL_LINE, 24, 9, one_door, "steel-92-18", (13 + 1) * 9},
    {"a door in 25 gauge: jambs", "CP: 20 gauge", STEEL_LINE, 24, 9, one_door, "steel-92-30",
     2 * 9},
    {"a door in 20 gauge", "CP: its own studs", "typex-16 | steel-92-33@406 | typex-16", 24, 9,
     one_door, "steel-92-33", (19 + 3) * 9},
    {"a door in wood", "CP", WOOD_LINE, 24, 8, one_door, "wood-89", (19 + 3) * 92.625 / 12},
    {"staggered: each face", "CP", STAG_LINE, 24, 8, two_tees, "wood-89",
     2 * (19 + 2) * 92.625 / 12},
    {"staggered steel: jambs of the face's studs", "CP",
     "typex-16 | steel-64-18-stag-102@610, glass-65 | typex-16", 24, 9, one_door, "steel-64-30",
     2 * 2 * 9},
    {"two doors, one of them an opening: headers", "CP: once each", STEEL_LINE, 24, 9,
     door_among_openings, "steel-92-18", (13 + 2) * 9},
    {"two doors, one of them an opening: jambs", "CP: once each", STEEL_LINE, 24, 9,
     door_among_openings, "steel-92-30", 4 * 9},
    {"an opening beside other counts", "CP: framed as a door", STEEL_LINE, 24, 9,
     opening_beside_counts, "steel-92-30", 2 * 9},
    /* 30 ft of corridor at 16 in: ceil(360/16) + 1 = 24, a corner 2, tees 3, headers 2, jambs 4 */
    {"by hand: corridor wall in 25 gauge at 16 in", "CP", "typex-16 | steel-92-18@406 | typex-16", 30, 9,
     corridor_wall, "steel-92-18", 31 * 9},
    {"by hand: its jambs", "CP", "typex-16 | steel-92-18@406 | typex-16", 30, 9, corridor_wall,
     "steel-92-30", 4 * 9},
    {"door: board is not deducted", "CP: only above 32 ft2", STEEL_LINE, 24, 9, door, "typex-16",
     2 * 216 * 1.1},
    {"door: batts are deducted", "CP", STEEL_LINE, 24, 9, door, "glass-89-24in", (216 - 21) * 1.03},
    {"large opening: board is deducted", "CP: only above 32 ft2", STEEL_LINE, 24, 9, large_opening,
     "typex-16", 2 * (216 - 40) * 1.1},
    {"channel rows", "CP: ceil((H - 50 - 150 mm)/s) + 1: 9 ft at 24 in is 6", RC_LINE, 24, 9, plain,
     "channel", 6 * 24 * 1.05},
    {"channel rows at 8 ft", "CP: ceil(3.67) + 1 = 5", RC_LINE, 24, 8, plain, "channel",
     5 * 24 * 1.05},
    {"furring rows", "CP: ceil((2743 - 225)/610) + 1", CLIP_LINE, 24, 9, plain, "furring",
     6 * 24 * 1.05},
    {"clips", "CP: every 1219 mm: 6 rows of 6", CLIP_LINE, 24, 9, plain, "clip", 36 * 1.03},
    {"batts of wood bays at 16 in", "CP: 15 in wide", WOOD_LINE, 24, 9, plain, "glass-89-15in",
     216 * 1.03},
    {"batts of wood bays at 24 in", "CP: 23 in wide", "typex-16 | wood-89@610, glass-89 | typex-16",
     24, 9, plain, "glass-89-23in", 216 * 1.03},
    {"batts of steel bays at 16 in", "CP: 16 in wide",
     "typex-16 | steel-92-18@406, glass-89 | typex-16", 24, 9, plain, "glass-89-16in", 216 * 1.03},
    {"batts of bays at 12 in are cut", "CP: 25 % waste",
     "typex-16 | steel-92-18@305, glass-89 | typex-16", 24, 9, plain, "glass-89-16in", 216 * 1.25},
    {"both rows filled", "CP", DOUBLE_LINE, 24, 9, plain, "glass-89-15in", 2 * 216 * 1.03},
    {"sealant round each face", "CP: one bead, + 15 %", STEEL_LINE, 24, 9, plain, "sealant",
     2 * 2 * (24 + 9) * 1.15},
    {"slip head: deep-leg track", "CP", STEEL_LINE, 24, 9, slip, "track-92-18-deep", 24 * 1.04},
    {"slip head: one plain track", "CP", STEEL_LINE, 24, 9, slip, "track-92-18", 24 * 1.04},
    {"slip head: sealant", "CP", STEEL_LINE, 24, 9, slip, "sealant", (132 + 48) * 1.15},
    {"rated slip head: listed joint", "CP: both sides", STEEL_LINE, 24, 9, slip_rated, "head-joint",
     48 * 1.05},
    {"backing of a heavy side", "CP", "typex-16 | steel-92-30@406 | typex-16", 24, 9, heavy_a,
     "backing-strap", 24 * 1.05},
    {"backing of a stretch", "CP", WOOD_LINE, 24, 9, heavy_stretch, "backing-2x8", 5 * 1.1},
    {"no boxes", "the brief's count stands", STEEL_LINE, 24, 9, no_boxes, "box-pad", 0},
    {"no fireblocking below 10 ft", "IBC 718.2.1, from memory", WOOD_LINE, 24, 10, plain,
     "fireblock-2x", 0},
    {"fireblocking every 10 ft of height", "IBC 718.2.1, from memory", WOOD_LINE, 24, 11, plain,
     "fireblock-2x", 24 * 1.1},
    {"fireblocking every 10 ft of length", "IBC 718.2.1, from memory: two rows", DOUBLE_LINE, 24, 9,
     plain, "fireblock-batt", 2 * 9 * 1.05},
    {"finish to 100 mm above the ceiling", "ASTM C840, GA-214, from memory", STEEL_LINE, 24, 12,
     ceiling_8ft, "finish-4", 24 * 8 + 24 * 12},
    {"Level 1 above the ceiling", "ASTM C840, GA-214, from memory", STEEL_LINE, 24, 12, ceiling_8ft,
     "finish-1", 24 * 4},
    {"Level 2 on a cement board face", "GA-214, from memory", "cement-13 | wood-89@406 | typex-16",
     24, 9, wet_a, "finish-2", 216},
    {"no finish asked", "the brief's level", STEEL_LINE, 24, 9, bare, "finish-4", 216},
    {"base layers are not finished", "GA-214, from memory",
     "2*typex-16 | steel-92-18@610 | 2*typex-16", 24, 9, plain, "finish-4", 432},
    {"screws at 16 in", "computed: 1.11 a ft2 of layer at 12/12 in, 9 ft", WOOD_LINE, 24, 9, plain,
     "screw", 432 * 40 / 36.0 * 1.05},
    {"board under a mount", "both lines of the item",
     "typex-16 | rc@610 | on typex-16 | wood-89@406 | typex-16", 24, 9, plain, "typex-16",
     3 * 216 * 1.1},
};

START_TEST(single_rule) {
  const struct rule_row *row = &rule_rows[_i];
  brief b = brief_of(row->length_ft, row->height_ft);
  takeoff t;
  row->brief(&b);
  (void)cost_of(&b, row->line, &t);
  int item = prices_item(book, row->code);
  ck_assert_msg(item != CATALOG_NONE, "%s is priced", row->code);
  price_unit u = book->items[item].unit;
  double unit = u == UNIT_M2 ? UNITS_M2_PER_FT2 : u == UNIT_M ? UNITS_M_PER_FT : 1;
  double found = line_of(&t, row->code, LINE_MATERIAL).quantity / unit;
  ck_assert_msg(fabs(found - row->quantity) <= QUANTITY_SHARE * (1 + row->quantity),
                "%s (%s): %s %.6f, expected %.6f", row->name, row->source, row->code, found,
                row->quantity);
}
END_TEST

/* ---- labour ---- */
/* Hours of an item against those at 9 ft and the same count of pieces; factors of the price book
 * (common practice, no source). */
static const struct labour_row {
  const char *name;
  double length_ft, height_ft, factor;
} labour_rows[] = {
    {"to 10 ft", 24, 10, 1},
    {"above 10 ft", 24, 10.5, 1.15},
    {"to 12 ft", 24, 12, 1.15},
    {"above 12 ft", 24, 12.5, 1.25},
    {"above 14 ft", 24, 15, 1.4},
    {"short wall", 3, 9, 1.3},
    {"short and high", 3, 13, 1.3 * 1.25},
};

START_TEST(labour) {
  const struct labour_row *row = &labour_rows[_i];
  brief b = brief_of(row->length_ft, row->height_ft);
  takeoff t;
  (void)cost_of(&b, STEEL_LINE, &t);
  double boards =
      line_of(&t, "typex-16", LINE_LABOUR).quantity / (2 * row->length_ft * row->height_ft);
  ck_assert_msg(fabs(boards / (0.0145 * row->factor) - 1) <= QUANTITY_SHARE, "%s: %.6f h/ft2",
                row->name, boards);
}
END_TEST

/* 0.11 h a stud to 10 ft and 0.008 h a foot above: 16 ft studs for 15 ft. */
START_TEST(tall_studs) {
  brief b = brief_of(24, 15);
  takeoff t;
  (void)cost_of(&b, STEEL_LINE, &t);
  double each = line_of(&t, "steel-92-18", LINE_LABOUR).quantity / (13 * 1.1) / 1.4;
  /* stock lengths stand 10 mm short of the clear height, so tall begins 10 mm later */
  ck_assert_msg(fabs(each - (0.11 + 0.008 * (6 - 0.010 / UNITS_M_PER_FT))) < 1e-9, "%.6f h a stud",
                each);
}
END_TEST

/* ---- parts and sums ---- */

static const char *const part_lines[] = {
    STEEL_LINE,
    WOOD_LINE,
    DOUBLE_LINE,
    STAG_LINE,
    RC_LINE,
    CLIP_LINE,
    BEARING_LINE,
    STEEL_RC,
    STEEL_STAG,
    "moist-16 + typex-16 | rc@406 | on osb-11 | wood-140@610, stone-140 | abuse-16 + mlv-5",
    "damp-16 | wood-89-double@406~50, cell-89, inner-a osb-11 | cement-13 + typex-16",
    "gyp-13 + damp-layer + gyp-13 | steel-64-18-double@305, glass-65, stone-65 | 3*gyp-13",
};
enum { PART_LINES = sizeof part_lines / sizeof part_lines[0], SEEDED = 400 };

static uint64_t next_random(uint64_t *state) {
  /* A linear congruential generator (Knuth, MMIX). */
  *state = *state * 6364136223846793005u + 1442695040888963407u;
  return *state >> 33;
}

/* A brief from the seed: sizes to the millimetre, sides, head, openings. */
static brief seeded_brief(uint64_t *s) {
  brief b;
  job_defaults(&b);
  b.length_m = 0.6 + (double)(next_random(s) % 20000) / 1000;
  b.height_m = 2.2 + (double)(next_random(s) % 3500) / 1000;
  b.loadbearing = next_random(s) % 2 == 0;
  b.head = next_random(s) % 2 == 0 ? HEAD_RIGID : HEAD_SLIP;
  b.fire_min = next_random(s) % 2 == 0 ? 0 : 60;
  b.floor_area_value_per_m2 = (double)(next_random(s) % 5000);
  for (int i = 0; i < 2; i++) {
    b.side[i].finish_level = (int)(next_random(s) % 6);
    b.side[i].fastening = (fastening)(next_random(s) % 3);
    b.ceiling_m[i] = next_random(s) % 2 == 0 ? 0 : 2.1;
  }
  b.top = next_random(s) % 4 == 0 ? TOP_CEILING : TOP_DECK;
  b.boards = (board_layout)(next_random(s) % 3);
  b.opening_count = (int)(next_random(s) % 2);
  b.openings[0] = (opening){.kind = "door", .area_m2 = 1.9};
  if (next_random(s) % 2) counted(&b, (int)(next_random(s) % 3), (int)(next_random(s) % 3), -1, 1);
  return b;
}

/* The sum of the parts is the takeoff, its lines add up to its total, and each line is quantity x
 * rate to the cent. */
START_TEST(parts) {
  uint64_t seed = 20310301u + (uint64_t)_i;
  for (int n = 0; n < SEEDED; n++) {
    brief b = seeded_brief(&seed);
    wall w = parsed(part_lines[next_random(&seed) % PART_LINES]), core = w;
    takeoff t;
    cost_total full;
    cost_takeoff(book, shop, &b, &w, &t, &full);
    for (int s = 0; s < 2; s++) core.side[s].count = 0;
    cost_parts k = cost_core(book, shop, &b, &core), l = cost_leaves(book, shop, &b, &w);
    cost_total sum = cost_sum(book, &b, wall_thickness_m(shop, &w), k, l);
    ck_assert_int_eq(sum.total_cents, full.total_cents);
    ck_assert_int_eq(sum.material_cents, full.material_cents);
    ck_assert_int_eq(sum.labour_cents, full.labour_cents);
    ck_assert_int_eq(sum.floor_value_cents, full.floor_value_cents);
    long long cents = 0;
    for (int i = 0; i < t.count; i++) {
      cents += t.line[i].cents;
      double exact = t.line[i].quantity * t.line[i].rate * 100;
      ck_assert_msg(fabs((double)t.line[i].cents - exact) <= 0.5 + 1e-6, "%s: %f rounds to %lld",
                    t.line[i].name, exact, t.line[i].cents);
    }
    ck_assert_int_eq(cents, full.total_cents);
  }
}
END_TEST

/* Leaves depend on the core by the spacing of their supports only. */
START_TEST(leaves_apart) {
  brief b = brief_of(24, 9);
  wall x = parsed("2*typex-16 | steel-92-18@610, glass-89 | typex-16");
  wall y = parsed("2*typex-16 | wood-89-double@610, cell-89 | typex-16");
  wall z = parsed("2*typex-16 | rc@610 | wood-89@610 | typex-16");
  wall other = parsed("2*typex-16 | steel-92-18@406, glass-89 | typex-16");
  cost_parts p = cost_leaves(book, shop, &b, &x), q = cost_leaves(book, shop, &b, &y),
             r = cost_leaves(book, shop, &b, &z);
  ck_assert_int_eq(p.material_cents, q.material_cents);
  ck_assert_int_eq(p.labour_cents, q.labour_cents);
  ck_assert_int_eq(p.material_cents, r.material_cents);
  ck_assert_int_ne(p.material_cents, cost_leaves(book, shop, &b, &other).material_cents);
}
END_TEST

/* Twice the hourly rates are twice the labour; a dearer board adds its quantity x the rise: each
 * line is linear in its price. */
START_TEST(linear_in_prices) {
  brief b = brief_of(24, 9);
  takeoff t, u;
  cost_total before = cost_of(&b, WOOD_LINE, &t);
  price_book *dear = arena_alloc(memory, sizeof *dear);
  *dear = *book;
  for (int i = 0; i < TRADE_COUNT; i++) dear->rate[i] *= 2;
  wall w = parsed(WOOD_LINE);
  cost_total after;
  cost_takeoff(dear, shop, &b, &w, &u, &after);
  ck_assert_int_eq(after.material_cents, before.material_cents);
  ck_assert_msg(llabs(after.labour_cents - 2 * before.labour_cents) <= t.count,
                "each line is off by a cent at most");
  dear->rate[TRADE_HANGER] = book->rate[TRADE_HANGER];
  dear->items = arena_array(memory, book->count, sizeof *dear->items);
  memcpy(dear->items, book->items, book->count * sizeof *dear->items);
  int board = prices_item(book, "typex-16");
  dear->items[board].price += 1 / UNITS_M2_PER_FT2; /* a dollar a ft2 */
  cost_takeoff(dear, shop, &b, &w, &u, &after);
  long long rise = after.material_cents - before.material_cents;
  ck_assert_msg(llabs(rise - 43200 * 11 / 10) <= 1, "432 ft2 + 10 %%: %lld cents more", rise);
}
END_TEST

/* A wall of twice the length costs twice as much but for its ends: one stud and the height of its
 * seals. */
START_TEST(linear_in_length) {
  brief b = brief_of(40, 9), twice = brief_of(80, 9);
  takeoff t, u;
  (void)cost_of(&b, RC_LINE, &t);
  (void)cost_of(&twice, RC_LINE, &u);
  ck_assert_int_eq(t.count, u.count);
  for (int i = 0; i < t.count; i++) {
    if (t.line[i].kind == LINE_MARKUP) continue;
    const char *code = book->items[t.line[i].item].code;
    bool ends = strcmp(code, "sealant") == 0 || strcmp(code, "wood-89") == 0;
    double ratio = u.line[i].quantity / t.line[i].quantity;
    ck_assert_msg(ends ? ratio < 2 && ratio > 1.8 : fabs(ratio - 2) < QUANTITY_SHARE,
                  "%s: %.6f times as much", code, ratio);
  }
}
END_TEST

/* A wall that stops at the ceiling is built and measured to 100 mm above it. */
START_TEST(stops_at_ceiling) {
  brief b = brief_of(24, 12), low = brief_of(24, 9);
  takeoff t, u;
  to_ceiling(&b);
  ck_assert_int_eq(cost_of(&b, WOOD_LINE, &t).total_cents,
                   cost_of(&low, WOOD_LINE, &u).total_cents);
}
END_TEST

START_TEST(floor_value) {
  brief b = brief_of(24, 9);
  takeoff t;
  long long without = cost_of(&b, STEEL_LINE, &t).total_cents;
  b.floor_area_value_per_m2 = 3000;
  cost_total total = cost_of(&b, STEEL_LINE, &t);
  /* 123.9 mm x 7.3152 m x 3000 = 2719.06 (by hand: 0.1239 x 7.3152 = 0.90635328 m2) */
  ck_assert_int_eq(total.floor_value_cents, 271906);
  ck_assert_int_eq(total.total_cents, without);
}
END_TEST

/* Whatever the catalog holds has a price in the shipped book, and a missing one is told by its
 * code. */
START_TEST(missing) {
  ck_assert_int_eq(prices_report_missing(memory, &diags, shop, book), 0);
  price_book *poor = arena_alloc(memory, sizeof *poor);
  *poor = *book;
  poor->work[WORK_SEALANT].item = CATALOG_NONE;
  brief b = brief_of(24, 9);
  wall w = parsed(STEEL_LINE);
  takeoff t;
  cost_total total;
  cost_takeoff(poor, shop, &b, &w, &t, &total);
  ck_assert_int_eq(t.missing, 1);
  ck_assert_str_eq(t.missing_code, "sealant");
  ck_assert(cost_core(poor, shop, &b, &w).missing);
  ck_assert(!cost_leaves(poor, shop, &b, &w).missing);
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

/* A door's jambs by hand: 25 gauge, 9 ft, 24 in: two studs of 20 gauge are 18 ft x 1.20 = 21.60 and
 * 2 x 0.132 h x 62 = 16.368; the other studs lose 10 % of 13 and gain the header. */
START_TEST(jambs_have_their_own_price) {
  takeoff t;
  brief b = brief_of(24, 9);
  one_door(&b);
  (void)cost_of(&b, STEEL_LINE, &t);
  ck_assert_int_eq(line_of(&t, "steel-92-30", LINE_MATERIAL).cents, 2160);
  ck_assert_int_eq(line_of(&t, "steel-92-30", LINE_LABOUR).cents, 1637);
  ck_assert_int_eq(line_of(&t, "steel-92-18", LINE_LABOUR).cents, 9548); /* 14 x 0.11 x 62 */
}
END_TEST

int main(void) {
  Suite *s = suite_create("cost");
  TCase *t = tcase_create("cost");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, by_hand);
  tcase_add_loop_test(t, proportions, 0, ROWS(proportion_rows));
  tcase_add_test(t, jambs_have_their_own_price);
  tcase_add_loop_test(t, single_rule, 0, ROWS(rule_rows));
  tcase_add_loop_test(t, labour, 0, ROWS(labour_rows));
  tcase_add_test(t, tall_studs);
  tcase_add_loop_test(t, parts, 0, 4);
  tcase_add_test(t, leaves_apart);
  tcase_add_test(t, linear_in_prices);
  tcase_add_test(t, linear_in_length);
  tcase_add_test(t, stops_at_ceiling);
  tcase_add_test(t, floor_value);
  tcase_add_test(t, missing);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
