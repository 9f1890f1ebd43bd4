/* Price books: what is read and in which units, what is refused and where, codes that nothing uses
 * or that are lacking. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/file.h"
#include "base/units.h"
#include "input/prices.h"

static jmp_buf failed;
static arena *memory;
static diag_list diags;

/* A shop of one board, one wood and one steel frame, a batt, blown fill, and both mounts: enough
 * for every kind of code. */
static layer board = {.id = "typex-16"};
static frame frames[2] = {
    {.id = "wood-89", .material = FRAME_WOOD, .stud = "wood-89", .runner = "plate-89"},
    {.id = "steel-92-18", .material = FRAME_STEEL, .stud = "steel-92-18", .runner = "track-92-18"}};
static fill fills[2] = {{.id = "glass-89", .material = FILL_GLASS},
                        {.id = "cell-89", .material = FILL_CELLULOSE}};
static mount mounts[2] = {{.id = "rc", .rail = "channel"},
                          {.id = "clip", .clips = true, .rail = "furring", .clip = "clip"}};
static const catalog shop = {.layers = &board,
                             .layer_count = 1,
                             .frames = frames,
                             .frame_count = 2,
                             .fills = fills,
                             .fill_count = 2,
                             .mounts = mounts,
                             .mount_count = 2};

static void setup(void) {
  memory = arena_create(0, &failed);
  ck_assert_ptr_nonnull(memory);
  if (setjmp(failed)) ck_abort_msg("memory ran out");
  diag_init(&diags, memory);
}

static void teardown(void) {
  arena_free(memory);
}

static price_book *read_text(const char *json) {
  const json_value *root = json_parse(memory, &diags, "book.json", json, strlen(json));
  ck_assert_msg(root != NULL, "the test's own JSON is wrong: %s",
                diags.count ? diags.items[0].message : "");
  return prices_read(memory, &diags, &shop, root);
}

#define HEAD                                                                                       \
  "\"septum\":\"price-book/"                                                                       \
  "1\",\"name\":\"n\",\"currency\":\"USD\",\"place\":\"p\",\"date\":\"d\",\"source\":\"s\","       \
  "\"overhead_profit\":0.2,\"sales_tax\":0.07,"
#define RATES       "\"labour_rates\":{\"hanger\":62,\"taper\":60,\"insulator\":48},"
#define BOOK(items) "{" HEAD RATES "\"items\":[" items "]}"
#define MORE(more)  "{" HEAD RATES more ",\"items\":[" BOARD "]}"
#define NAMED(code)                                                                                \
  "\"code\":\"" code "\",\"name\":\"n\",\"section\":\"09 29 00\",\"trade\":\"hanger\","
#define BOARD            "{" NAMED("typex-16") "\"unit\":\"ft2\",\"price\":0.52}"
#define ITEM(code, rest) "{" NAMED(code) rest "}"

/* ---- what is read ---- */
#define SHARE 1e-12 /* equal but for rounding in doubles */

static void near(const char *what, double found, double expected) {
  ck_assert_msg(fabs(found - expected) <= SHARE * fmax(1, fabs(expected)),
                "%s: %.9f, expected %.9f", what, found, expected);
}

START_TEST(units) {
  const price_book *b = read_text(BOOK(
      ITEM("typex-16",
           "\"unit\":\"ft2\",\"price\":0.52,\"hours\":0.0145,\"waste\":0.1,\"bought_as\":\"sheet\","
           "\"bought_quantity\":40,"
           "\"minimum_order\":640,\"breaks\":[{\"from\":8000,\"price\":0.49},{\"from\":24000,"
           "\"price\":0.46}]") "," ITEM("wood-89", "\"unit\":\"m\",\"price\":1.7,\"hours_each\":0."
                                                   "11") "," ITEM("sealant",
                                                                  "\"unit\":\"ft\",\"price_"
                                                                  "bought\":9,\"bought_quantity\":"
                                                                  "85") "," ITEM("clip", "\"unit\":"
                                                                                         "\"each\","
                                                                                         "\"price\""
                                                                                         ":4.75")));
  ck_assert_ptr_nonnull(b);
  const price_item *x = &b->items[prices_item(b, "typex-16")];
  ck_assert_int_eq(x->unit, UNIT_M2);
  near("price", x->price, 0.52 / UNITS_M2_PER_FT2);
  near("hours", x->hours, 0.0145 / UNITS_M2_PER_FT2);
  near("waste", x->waste, 0.1);
  near("sheet", x->bought_quantity, 40 * UNITS_M2_PER_FT2);
  near("minimum", x->minimum_order, 640 * UNITS_M2_PER_FT2);
  ck_assert_uint_eq(x->break_count, 2);
  near("break", x->breaks[1].from, 24000 * UNITS_M2_PER_FT2);
  near("price at the break", x->breaks[1].price, 0.46 / UNITS_M2_PER_FT2);
  ck_assert_str_eq(x->source, "s");
  const price_item *stud = &b->items[prices_item(b, "wood-89")];
  ck_assert_int_eq(stud->unit, UNIT_M);
  near("price a metre", stud->price, 1.7);
  near("hours a stud", stud->hours_each, 0.11);
  near("price by the tube", b->items[prices_item(b, "sealant")].price, 9 / 85.0 / UNITS_M_PER_FT);
  ck_assert_int_eq(b->items[prices_item(b, "clip")].unit, UNIT_EACH);
  near("taper", b->rate[TRADE_TAPER], 60);
}
END_TEST

START_TEST(labour_and_stock) {
  const price_book *b = read_text(
      MORE("\"heights\":[{\"above_ft\":10,\"factor\":1.15},{\"above_m\":3.6,\"factor\":1.25}],"
           "\"short_wall\":{\"below_ft\":4,\"factor\":1.3},\"tall_studs\":{\"above_ft\":10,\"hours_"
           "per_ft\":0.008},"
           "\"stock\":{\"wood\":[\"92-5/8in\",\"12ft\"],\"steel\":[\"2.44m\"],"
           "\"sheets\":[{\"width_in\":48,\"lengths\":[\"8ft\",\"9ft\"]},{\"width_mm\":1372,"
           "\"lengths\":[\"12ft\"]}]}"));
  ck_assert_ptr_nonnull(b);
  ck_assert_int_eq(b->height_steps, 2);
  near("height", b->height_step_m[0], 10 * UNITS_M_PER_FT);
  near("factor", b->height_factor[1], 1.25);
  near("short", b->short_wall_m, 4 * UNITS_M_PER_FT);
  near("tall", b->tall_stud_hours_per_m, 0.008 / UNITS_M_PER_FT);
  ck_assert_int_eq(b->stock[FRAME_WOOD].count, 2);
  near("precut", b->stock[FRAME_WOOD].metres[0], 92.625 * UNITS_M_PER_IN);
  near("steel", b->stock[FRAME_STEEL].metres[0], 2.44);
  ck_assert_int_eq(b->sheet_widths, 2);
  near("sheet", b->sheets[0].width_m, 4 * UNITS_M_PER_FT);
  ck_assert_int_eq(b->sheets[0].lengths.count, 2);
  near("its length", b->sheets[0].lengths.metres[1], 9 * UNITS_M_PER_FT);
  near("wide sheet", b->sheets[1].width_m, 1.372);
}
END_TEST

/* A batt is priced by its width; one price for all widths serves those that have none of their own.
 */
START_TEST(batt_codes) {
  const price_book *b =
      read_text(BOOK(ITEM("glass-89-15in", "\"unit\":\"ft2\",\"price\":0.55") "," ITEM(
          "glass-89", "\"unit\":\"ft2\",\"price\":0.6")));
  ck_assert_ptr_nonnull(b);
  ck_assert_uint_eq(diags.count, 0);
  ck_assert_int_eq(b->fills[0][BATT_15IN].item, prices_item(b, "glass-89-15in"));
  ck_assert_int_eq(b->fills[0][BATT_24IN].item, prices_item(b, "glass-89"));
  ck_assert_int_eq(b->fills[1][BATT_15IN].item, CATALOG_NONE);
}
END_TEST

static const struct width_row {
  const char *name;
  frame_material material;
  double spacing_in;
  batt_width width;
} width_rows[] = {
    {"wood at 12", FRAME_WOOD, 12, BATT_15IN},   {"wood at 16", FRAME_WOOD, 16, BATT_15IN},
    {"wood at 24", FRAME_WOOD, 24, BATT_23IN},   {"steel at 12", FRAME_STEEL, 12, BATT_16IN},
    {"steel at 16", FRAME_STEEL, 16, BATT_16IN}, {"steel at 24", FRAME_STEEL, 24, BATT_24IN},
};

/* Common practice, no source: batts 15 and 23 in wide between wood studs, 16 and 24 in open steel
 * ones. */
START_TEST(batt_widths) {
  const struct width_row *row = &width_rows[_i];
  ck_assert_msg(prices_batt_width(row->material, row->spacing_in * UNITS_M_PER_IN) == row->width,
                "%s", row->name);
}
END_TEST

/* ---- what is refused ---- */
static const struct refusal {
  const char *name, *json;
  error_code code;
  const char *words, *path;
} refusals[] = {
    {"another kind", "{\"septum\":\"boards/1\"}", ERROR_FILE_KIND, "", "$.septum"},
    {"no rates", "{" HEAD "\"items\":[" BOARD "]}", ERROR_FIELD_MISSING, "labour_rates", "$"},
    {"a rate is lacking",
     "{" HEAD "\"labour_rates\":{\"hanger\":62,\"taper\":60},\"items\":[" BOARD "]}",
     ERROR_FIELD_MISSING, "insulator", "$.labour_rates"},
    {"an unknown key", MORE("\"colour\":1"), ERROR_FIELD_UNKNOWN, "colour", "$.colour"},
    {"no items", BOOK(""), ERROR_FIELD_RANGE, "1 to", "$.items"},
    {"items are no array", "{" HEAD RATES "\"items\":{}}", ERROR_FIELD_TYPE, "an array", "$.items"},
    {"a unit is unknown", BOOK(ITEM("typex-16", "\"unit\":\"sheet\",\"price\":1")),
     ERROR_FIELD_CHOICE, "ft2", "$.items[0].unit"},
    {"a unit of the wrong kind", BOOK(ITEM("typex-16", "\"unit\":\"ft\",\"price\":1")),
     ERROR_FIELD_UNIT, "area", "$.items[0].unit"},
    {"a stud by the piece", BOOK(ITEM("wood-89", "\"unit\":\"each\",\"price\":1")),
     ERROR_FIELD_UNIT, "length", "$.items[0].unit"},
    {"no price", BOOK(ITEM("typex-16", "\"unit\":\"ft2\"")), ERROR_FIELD_MISSING, "price",
     "$.items[0]"},
    {"two prices",
     BOOK(ITEM("typex-16",
               "\"unit\":\"ft2\",\"price\":1,\"price_bought\":40,\"bought_quantity\":40")),
     ERROR_FIELD_CONFLICT, "price_bought", "$.items[0]"},
    {"a price of an unknown quantity",
     BOOK(ITEM("typex-16", "\"unit\":\"ft2\",\"price_bought\":40")), ERROR_FIELD_MISSING,
     "bought_quantity", "$.items[0]"},
    {"a negative price", BOOK(ITEM("typex-16", "\"unit\":\"ft2\",\"price\":-1")), ERROR_FIELD_RANGE,
     "", "$.items[0].price"},
    {"negative waste", BOOK(ITEM("typex-16", "\"unit\":\"ft2\",\"price\":1,\"waste\":-0.1")),
     ERROR_FIELD_RANGE, "", "$.items[0].waste"},
    {"a code twice", BOOK(BOARD "," BOARD), ERROR_FIELD_CONFLICT, "typex-16", "$.items[1]"},
    {"breaks that fall",
     BOOK(ITEM("typex-16", "\"unit\":\"ft2\",\"price\":1,\"breaks\":[{\"from\":20,\"price\":1},{"
                           "\"from\":10,\"price\":1}]")),
     ERROR_FIELD_RANGE, "before", "$.items[0].breaks[1]"},
    {"heights that fall",
     MORE("\"heights\":[{\"above_m\":4,\"factor\":1.2},{\"above_m\":3,\"factor\":1.3}]"),
     ERROR_FIELD_RANGE, "before", "$.heights[1]"},
    {"a factor below 1", MORE("\"heights\":[{\"above_m\":4,\"factor\":0.9}]"), ERROR_FIELD_RANGE,
     "", "$.heights[0].factor"},
    {"a stock length without unit", MORE("\"stock\":{\"wood\":[8]}"), ERROR_FIELD_UNIT, "length",
     "$.stock.wood[0]"},
    {"stock lengths that fall", MORE("\"stock\":{\"wood\":[\"9ft\",\"8ft\"]}"), ERROR_FIELD_RANGE,
     "before", "$.stock.wood[1]"},
    {"sheets without a width", MORE("\"stock\":{\"sheets\":[{\"lengths\":[\"8ft\"]}]}"),
     ERROR_FIELD_MISSING, "width", "$.stock.sheets[0]"},
    {"sheets of no length", MORE("\"stock\":{\"sheets\":[{\"width_in\":48,\"lengths\":[]}]}"),
     ERROR_FIELD_RANGE, "", "$.stock.sheets[0].lengths"},
    {"widths that fall",
     MORE("\"stock\":{\"sheets\":[{\"width_in\":54,\"lengths\":[\"12ft\"]},{\"width_in\":48,"
          "\"lengths\":[\"8ft\"]}]}"),
     ERROR_FIELD_RANGE, "before", "$.stock.sheets[1]"},
    {"stock of what", MORE("\"stock\":{\"brick\":[\"9ft\"]}"), ERROR_FIELD_UNKNOWN, "brick",
     "$.stock.brick"},
    {"tall studs twice said",
     MORE("\"tall_studs\":{\"above_ft\":10,\"hours_per_ft\":1,\"hours_per_m\":1}"),
     ERROR_FIELD_CONFLICT, "hours_per_ft", "$.tall_studs.hours_per_m"},
};

START_TEST(refused) {
  const struct refusal *row = &refusals[_i];
  ck_assert_msg(read_text(row->json) == NULL, "%s is refused", row->name);
  ck_assert_msg(diags.errors == 1 && diags.count == 1, "%s: one error, found %zu", row->name,
                diags.errors);
  const diag *d = &diags.items[0];
  ck_assert_msg(d->code == row->code, "%s: E%d %s", row->name, (int)d->code, d->message);
  ck_assert_msg(strstr(d->message, row->words) != NULL, "%s: \"%s\" in: %s", row->name, row->words,
                d->message);
  ck_assert_msg(strcmp(d->place.path, row->path) == 0, "%s at %s", row->name, d->place.path);
  ck_assert_int_gt(d->place.line, 0);
}
END_TEST

START_TEST(all_faults_at_once) {
  ck_assert_ptr_null(read_text(BOOK(ITEM("typex-16", "\"unit\":\"ft2\",\"price\":-1") "," ITEM(
      "wood-89", "\"unit\":\"inch\",\"price\":1"))));
  ck_assert_uint_eq(diags.errors, 2);
}
END_TEST

/* ---- codes ---- */
START_TEST(unknown_code) {
  ck_assert_ptr_nonnull(read_text(BOOK(ITEM("typex16", "\"unit\":\"ft2\",\"price\":1"))));
  ck_assert_uint_eq(diags.errors, 0);
  ck_assert_uint_eq(diags.count, 1);
  ck_assert_int_eq(diags.items[0].level, DIAG_WARNING);
  ck_assert_int_eq(diags.items[0].code, ERROR_PRICE_UNKNOWN_ITEM);
  ck_assert_ptr_nonnull(strstr(diags.items[0].message, "typex-16"));
}
END_TEST

/* The shop asks for 1 board, 2 studs, 2 runners, 1 deep-leg track, 4 widths of the batt, 1 blown
 * fill, channel, furring, clip and the items of work; all but the board are lacking. */
START_TEST(missing_codes) {
  const price_book *b = read_text(BOOK(BOARD));
  ck_assert_ptr_nonnull(b);
  int missing = prices_report_missing(memory, &diags, &shop, b);
  ck_assert_int_eq(missing, 2 + 2 + 1 + 4 + 1 + 3 + WORK_COUNT);
  ck_assert_uint_eq(diags.errors, 0);
  ck_assert_int_eq(diags.items[0].code, ERROR_PRICE_MISSING);
}
END_TEST

/* prices/default names a book beside it, and every shipped book says that it is invented. */
START_TEST(shipped) {
  size_t len = 0;
  const char *name = file_read(memory, &diags, TEST_ROOT "/prices/default", 4096, &len);
  ck_assert_ptr_nonnull(name);
  ck_assert_str_eq(name, "kestrel-yard.json\n");
  const json_value *root = json_load(memory, &diags, TEST_ROOT "/prices/kestrel-yard.json");
  ck_assert_ptr_nonnull(root);
  ck_assert_ptr_nonnull(strstr(json_get(root, "about")->string, "Invented"));
  ck_assert_ptr_nonnull(strstr(json_get(root, "source")->string, "invented"));
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("prices");
  TCase *t = tcase_create("prices");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, units);
  tcase_add_test(t, labour_and_stock);
  tcase_add_test(t, batt_codes);
  tcase_add_loop_test(t, batt_widths, 0, ROWS(width_rows));
  tcase_add_loop_test(t, refused, 0, ROWS(refusals));
  tcase_add_test(t, all_faults_at_once);
  tcase_add_test(t, unknown_code);
  tcase_add_test(t, missing_codes);
  tcase_add_test(t, shipped);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
