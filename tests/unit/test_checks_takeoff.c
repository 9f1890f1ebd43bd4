/* Three walls taken off by hand, to the piece: what is bought of each item, and the hours. Rules: CP
 * = common practice, no source; others by their name. Waste shares and hours are those of
 * prices/kestrel-yard.json. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdlib.h>

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

/* An item of a sheet: quantity with waste in the item's unit of trade (ft, ft2, each), hours, and
 * whole packages as the yard sells them (studs of stock length, sheets, tubes...); 0 packages = sold
 * by the unit. */
typedef struct sheet_row {
  const char *code;
  double quantity, hours;
  int packages;
} sheet_row;

typedef struct sheet {
  const char *name, *line;
  double length_ft, height_ft;
  void (*brief)(brief *);
  double stud_ft; /* stock length */
  const sheet_row *row;
  int rows;
} sheet;

static void add_door(brief *b) {
  b->openings[b->opening_count++] =
      (opening){.kind = "door-solid-core", .area_m2 = 21 * UNITS_M2_PER_FT2};
}

/* ---- 30 ft of corridor wall, 9 ft, load-bearing 2x4 at 16 in, channel on the corridor's two boards,
 * one corner, three walls that meet it, two doors of 3 x 7 ft; factor on labour 1 ----
 *
 * studs    ceil(360/16) + 1 = 24, a corner + 2, tees + 3, headers + 2, jambs + 4 = 35       CP
 *          9 ft less three plates of 1-1/2 in = 103-1/2 in: precut 104-5/8 in; 0.11 h each
 * plates   load-bearing: 3 x 30 = 90 ft, + 5 % = 94.5; 0.022 h a ft                         CP
 * channel  ceil((2743.2 - 50 - 150)/609.6) + 1 = ceil(4.17) + 1 = 6 rows x 30 ft = 180,
 *          + 5 % = 189; 0.022 h a ft                                                        CP
 * batts    15 in wide: 270 - 2 x 21 = 228 ft2, + 3 % = 234.84; 0.006 h a ft2                CP
 * sealant  two faces x 2 (30 + 9) = 156 ft, + 15 % = 179.4; tubes of 85 ft: 3; 0.015 h a ft CP
 * pads     two sides x 3 in 10 m x 9.144 m = 5.4864, + 3 %; 0.1 h each                      CP
 * boards   3 x 270 = 810 ft2 (doors below 32 ft2 stay), + 10 % = 891: 23 sheets of 4 x 10;
 *          0.0145 h a ft2                                                                   CP
 * screws   a sheet 4 x 9 ft: on channel at 24 in 3 lines x 10, on studs at 16 in 4 x 10; 7.5
 *          sheets a layer: 225 + 225 + 300 = 750, + 5 %                  ASTM C840, from memory
 * finish   Level 4, two faces: 540 ft2; 0.0125 h a ft2
 * no fireblocking: 9 ft is below 10 ft                                IBC 718.2.1, from memory
 */
static void corridor(brief *b) {
  b->loadbearing = true;
  b->corners = 1;
  b->tees = 3;
  b->doors = 2;
  add_door(b);
  add_door(b);
}
static const sheet_row corridor_rows[] = {
    {"wood-89", 35 * 104.625 / 12, 35 * 0.11, 35},
    {"plate-89", 94.5, 90 * 0.022, 6},
    {"channel", 189, 180 * 0.022, 16},
    {"glass-89-15in", 234.84, 228 * 0.006, 3},
    {"sealant", 179.4, 156 * 0.015, 3},
    {"box-pad", 5.4864 * 1.03, 0.54864, 1},
    {"typex-16", 891, 810 * 0.0145, 23},
    {"screw", 787.5, 0, 1},
    {"finish-4", 540, 540 * 0.0125, 0},
};

/* ---- 12 ft of double wood wall, 9 ft, two rows of 2x4 at 16 in, two boards and one, both rows
 * filled, two corners, one wall that meets it, a door of 3 x 7 ft; factor on labour 1 ----
 *
 * studs    a row: 144/16 + 1 = 10, corners + 4, tee + 1, header + 1, jambs + 2 = 18; 36      CP
 *          9 ft less two plates of 1-1/2 in = 105 in: precut 104-5/8 in, made for three plates
 * plates   two rows x 2 x 12 = 48 ft, + 5 % = 50.4                                           CP
 * batts    15 in wide, two rows x (108 - 21) = 174 ft2, + 3 % = 179.22                       CP
 * fire-    along the wall: one stop between two lengths of at most 10 ft, 9 ft high, of batt so
 * block    that nothing ties the rows; + 5 % = 9.45; 0.02 h a ft      IBC 718.2.1, from memory
 * sealant  two faces x 2 (12 + 9) = 84 ft, + 15 % = 96.6: 2 tubes                            CP
 * pads     two sides x 3 in 10 m x 3.6576 m = 2.19456, + 3 %                                 CP
 * boards   3 x 108 = 324 ft2, + 10 % = 356.4: 9 sheets of 4 x 10                             CP
 * screws   3 sheets a layer x 4 lines x 10 = 120; 360, + 5 % = 378      ASTM C840, from memory
 * finish   216 ft2
 */
static void double_wood(brief *b) {
  b->corners = 2;
  b->tees = 1;
  b->doors = 1;
  add_door(b);
}
static const sheet_row double_rows[] = {
    {"wood-89", 36 * 104.625 / 12, 36 * 0.11, 36},
    {"plate-89", 50.4, 48 * 0.022, 4},
    {"glass-89-15in", 179.22, 174 * 0.006, 3},
    {"fireblock-batt", 9.45, 9 * 0.02, 0},
    {"sealant", 96.6, 84 * 0.015, 2},
    {"box-pad", 2.19456 * 1.03, 0.219456, 1},
    {"typex-16", 356.4, 324 * 0.0145, 9},
    {"screw", 378, 0, 1},
    {"finish-4", 216, 216 * 0.0125, 0},
};

/* ---- 20 ft of steel wall, 14 ft to the deck, one hour, 6 in 33 mil studs at 16 in, slip head, two
 * boards and one, ceiling of side A at 10 ft less 100 mm, a corner, a free end, a door; walls above
 * 12 ft to 14 ft: factor on labour 1.25 ----
 *
 * studs    240/16 + 1 = 16, corner + 2, free end + 1, header + 1, jambs + 2 (33 mil: its own studs)
 *          = 22 of 14 ft; 0.1375 h each and 0.008 h for each ft above 10 ft (and 10 mm)      CP
 * track    below: 20 ft, + 4 % = 20.8; 0.025 h a ft                                          CP
 * deep-leg above: 20 ft, + 4 % = 20.8; 0.030 h a ft                                          CP
 * batts    16 in wide, 280 - 21 = 259 ft2, + 3 % = 266.77                                    CP
 * sealant  two faces x 2 (20 + 14) = 136 ft, + 15 % = 156.4: 2 tubes; none at the head:      CP
 * head     rated joint, two sides x 20 = 40 ft, + 5 % = 42; 0.05 h a ft                      CP
 * pads     two sides x 3 in 10 m x 6.096 m = 3.6576, + 3 %                                   CP
 * boards   3 x 280 = 840 ft2, + 10 % = 924: 24 sheets of 4 x 10                              CP
 * screws   a sheet 4 x 14 ft: 4 lines x 15 = 60; 5 sheets a layer: 900, + 5 % = 945
 *                                                                      ASTM C840, from memory
 * finish   side A: Level 4 to 100 mm above the ceiling = 10 ft, 200 ft2, Level 1 above, 80 ft2;
 *          side B: 280 ft2                                    ASTM C840 and GA-214, from memory
 * no bridging: boards on both flanges to the deck                                            CP
 */
static void tall_steel(brief *b) {
  b->head = HEAD_SLIP;
  b->fire_min = 60;
  b->ceiling_m[SIDE_A] = 10 * UNITS_M_PER_FT - 0.1;
  b->corners = 1;
  b->free_ends = 1;
  b->doors = 1;
  add_door(b);
}
static const double tall_factor = 1.25;
#define TALL_STUD_H (0.1375 + 0.008 * (4 - 0.010 / UNITS_M_PER_FT))
static const sheet_row tall_rows[] = {
    {"steel-152-33", 22 * 14, 22 * TALL_STUD_H, 22},
    {"track-152-33", 20.8, 20 * 0.025, 3},
    {"track-152-33-deep", 20.8, 20 * 0.030, 3},
    {"glass-140-16in", 266.77, 259 * 0.006, 5},
    {"sealant", 156.4, 136 * 0.015, 2},
    {"head-joint", 42, 40 * 0.05, 0},
    {"box-pad", 3.6576 * 1.03, 0.36576, 1},
    {"typex-16", 924, 840 * 0.0145, 24},
    {"screw", 945, 0, 1},
    {"finish-4", 480, 480 * 0.0125, 0},
    {"finish-1", 80, 80 * 0.005, 0},
};

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

static const sheet sheets[] = {
    {"30 ft corridor wall with two doors", "2*typex-16 | rc@610 | wood-89@406, glass-89 | typex-16", 30,
     9, corridor, 104.625 / 12, corridor_rows, ROWS(corridor_rows)},
    {"9 ft double wood wall", "2*typex-16 | wood-89-double@406, glass-89, glass-89 | typex-16", 12, 9,
     double_wood, 104.625 / 12, double_rows, ROWS(double_rows)},
    {"14 ft steel wall with a slip head", "2*typex-16 | steel-152-33@406, glass-140 | typex-16", 20,
     14, tall_steel, 14, tall_rows, ROWS(tall_rows)},
};

/* Equal but for rounding in doubles. */
static const double share = 1e-9;

static void near(const sheet *s, const char *code, const char *what, double found, double by_hand) {
  ck_assert_msg(fabs(found - by_hand) <= share * (1 + by_hand), "%s: %s: %s %.6f, by hand %.6f",
                s->name, code, what, found, by_hand);
}

static double sum_of(const takeoff *t, int item, line_kind kind) {
  double sum = 0;
  for (int i = 0; i < t->count; i++)
    if (t->line[i].item == item && t->line[i].kind == kind) sum += t->line[i].quantity;
  return sum;
}

static void check_row(const sheet *s, const sheet_row *row, double factor, const takeoff *t,
                      double stud_m) {
  int at = prices_item(book, row->code);
  ck_assert_msg(at != CATALOG_NONE, "%s is priced", row->code);
  const price_item *item = &book->items[at];
  double quantity = sum_of(t, at, LINE_MATERIAL);
  near(s, row->code, "quantity", quantity / item->unit_si, row->quantity);
  near(s, row->code, "hours", sum_of(t, at, LINE_LABOUR), row->hours * factor);
  double package = item->hours_each > 0 ? stud_m : item->bought_quantity;
  if (row->packages == 0)
    ck_assert_msg(!(package > 0), "%s: %s is sold by the package", s->name, row->code);
  else
    ck_assert_int_eq((int)ceil(quantity / package - 1e-6), row->packages);
}

START_TEST(by_hand) {
  const sheet *s = &sheets[_i];
  brief b;
  wall w;
  takeoff t;
  cost_total total;
  job_defaults(&b);
  b.length_m = s->length_ft * UNITS_M_PER_FT;
  b.height_m = s->height_ft * UNITS_M_PER_FT;
  s->brief(&b);
  ck_assert_msg(line_parse(memory, &diags, shop, s->line, &w), "%s reads", s->line);
  cost_takeoff(book, shop, &b, &w, &t, &total);
  ck_assert_int_eq(t.missing, 0);
  double stud_m = cost_stud_length_m(book, shop, &b, &w);
  near(s, "studs", "stock length", stud_m / UNITS_M_PER_FT, s->stud_ft);
  for (int i = 0; i < s->rows; i++)
    check_row(s, &s->row[i], s->brief == tall_steel ? tall_factor : 1, &t, stud_m);
  /* and nothing beside them */
  for (int i = 0; i < t.count; i++) {
    bool known = t.line[i].kind == LINE_MARKUP;
    for (int k = 0; k < s->rows; k++)
      known = known || prices_item(book, s->row[k].code) == t.line[i].item;
    ck_assert_msg(known, "%s: \"%s\" is not on the sheet", s->name, t.line[i].name);
  }
}
END_TEST

int main(void) {
  Suite *s = suite_create("takeoff by hand");
  TCase *t = tcase_create("takeoff by hand");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, by_hand, 0, ROWS(sheets));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
