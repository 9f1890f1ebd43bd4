/* Suppliers' lists: units, which line prices which item, what changes, what is a fault. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/units.h"
#include "input/price_units.h"
#include "input/price_update.h"

static jmp_buf failed;
static arena *memory;
static diag_list diags;
static price_update update;

static const char *const said_board[] = {"5/8X", "5/8 type x", "5/8"};
static const char *const said_plain[] = {"5/8"};
static const char *const said_batt[] = {"R13"};
static layer layers[] = {
    {.id = "typex-16", .name = "5/8 in Type X gypsum board", .said = {said_board, 3}},
    {.id = "gyp-16", .name = "5/8 in gypsum board", .said = {said_plain, 1}},
    {.id = "osb-11", .name = "7/16 in OSB"}};
static frame frames[] = {
    {.id = "wood-89", .material = FRAME_WOOD, .stud = "wood-89", .runner = "plate-89"}};
static fill fills[] = {{.id = "glass-89",
                        .name = "3-1/2 in glass-fibre batt",
                        .material = FILL_GLASS,
                        .said = {said_batt, 1}}};
static const catalog shop = {.layers = layers,
                             .layer_count = 3,
                             .frames = frames,
                             .frame_count = 1,
                             .fills = fills,
                             .fill_count = 1};

static const char book_text[] =
    "{\"septum\":\"price-book/1\",\"name\":\"n\",\"currency\":\"USD\",\"place\":\"p\",\"date\":"
    "\"2031-03-01\",\"source\":\"s\",\"overhead_profit\":0.2,\"sales_tax\":0.07,\"labour_rates\":{"
    "\"hanger\":62,\"taper\":60,\"insulator\":48},\"items\":["
    "{\"code\":\"typex-16\",\"name\":\"Type X\",\"section\":\"09 29 "
    "00\",\"unit\":\"ft2\",\"price\":"
    "0.52,\"bought_as\":\"sheet 4 ft x 10 ft\",\"bought_quantity\":40,\"trade\":\"hanger\"},"
    "{\"code\":\"gyp-16\",\"name\":\"plain\",\"section\":\"09 29 "
    "00\",\"unit\":\"ft2\",\"price\":0.5,"
    "\"trade\":\"hanger\"},"
    "{\"code\":\"wood-89\",\"name\":\"2x4 stud\",\"section\":\"06 11 "
    "00\",\"unit\":\"ft\",\"price\":"
    "0.52,\"bought_as\":\"stud\",\"trade\":\"hanger\"},"
    "{\"code\":\"plate-89\",\"name\":\"2x4 plate\",\"section\":\"06 11 "
    "00\",\"unit\":\"m\",\"price\":"
    "2,\"bought_as\":\"piece 16 ft\",\"bought_quantity\":4.8768,\"trade\":\"hanger\"},"
    "{\"code\":\"sealant\",\"name\":\"sealant\",\"section\":\"07 92 19\",\"unit\":\"ft\","
    "\"price_bought\":9,\"bought_as\":\"tube 28 oz\",\"bought_quantity\":85,\"trade\":\"hanger\"},"
    "{\"code\":\"screw\",\"name\":\"board screw\",\"section\":\"09 29 00\",\"unit\":\"each\","
    "\"price\":0.012,\"bought_as\":\"box of "
    "1000\",\"bought_quantity\":1000,\"trade\":\"hanger\"}]}";

static const price_book *book;

static void setup(void) {
  memory = arena_create(0, &failed);
  ck_assert_ptr_nonnull(memory);
  if (setjmp(failed)) ck_abort_msg("memory ran out");
  diag_init(&diags, memory);
  book = prices_read(memory, &diags, &shop,
                     json_parse(memory, &diags, "book.json", book_text, strlen(book_text)));
  ck_assert_ptr_nonnull(book);
}

static void teardown(void) {
  arena_free(memory);
}

/* ---- units ---- */
#define FT2 UNITS_M2_PER_FT2 /* exact: international foot, base/units.h */
#define FT  UNITS_M_PER_FT
/* Equal but for rounding in doubles. */
#define SHARE 1e-12

/* By hand from the definitions of the units; 0: refused. */
static const struct unit_row {
  const char *words, *code;
  double quantity;
} unit_rows[] = {
    {"ft2", "typex-16", FT2},
    {"SF", "typex-16", FT2},
    {"per sq. ft.", "typex-16", FT2},
    {"/ft2", "typex-16", FT2},
    {"MSF", "typex-16", 1000 * FT2},
    {"1000 ft2", "typex-16", 1000 * FT2},
    {"1,000 sq ft", "typex-16", 1000 * FT2},
    {"CSF", "typex-16", 100 * FT2},
    {"m2", "typex-16", 1},
    {"10 m2", "typex-16", 10},
    {"sheet", "typex-16", 40 * FT2},
    {"Sheet", "typex-16", 40 * FT2},
    {"each", "typex-16", 40 * FT2},
    {"sheet 4x8", "typex-16", 32 * FT2},
    {"4x12 sheet", "typex-16", 48 * FT2},
    {"sheet 4 ft x 10 ft", "typex-16", 40 * FT2},
    {"4' x 8'", "typex-16", 32 * FT2},
    {"sheet 4 x 8 ft", "typex-16", 32 * FT2},
    {"1.22 x 2.44 m", "typex-16", 1.22 * 2.44},
    {"sheet 1.22x2.44", "typex-16", 1.22 * 2.44},
    {"1200x2400 mm", "typex-16", 1.2 * 2.4},
    {"1200\xC3\x97"
     "2400",
     "typex-16", 1.2 * 2.4},
    {"48x96", "typex-16", 32 * FT2},
    {"bundle of 320 sf", "typex-16", 320 * FT2},
    {"lf", "wood-89", FT},
    {"1000 lf", "wood-89", 1000 * FT},
    {"MLF", "wood-89", 1000 * FT},
    {"m", "wood-89", 1},
    {"piece 10 ft", "wood-89", 10 * FT},
    {"10 ft piece", "wood-89", 10 * FT},
    {"stud 92-5/8in", "wood-89", 92.625 * UNITS_M_PER_IN},
    {"bundle 10 x 12 ft", "wood-89", 120 * FT},
    {"length of 3.6 m", "wood-89", 3.6},
    {"each", "plate-89", 16 * FT},
    {"piece", "plate-89", 16 * FT},
    {"tube", "sealant", 85 * FT},
    {"85 ft", "sealant", 85 * FT},
    {"each", "screw", 1},
    {"box", "screw", 1000},
    {"box of 500", "screw", 500},
    {"thousand", "screw", 1000},
    {"1,000 each", "screw", 1000},
    {"", "typex-16", 0},
    {"M", "wood-89", 0},           /* a metre or a thousand */
    {"lf", "typex-16", 0},         /* another kind */
    {"each", "wood-89", 0},        /* studs of what length */
    {"sheet", "gyp-16", 0},        /* the book does not say what a sheet is */
    {"bag", "typex-16", 0},        /* no package of this item */
    {"box of 500", "typex-16", 0}, /* pieces of an area */
    {"20x40", "typex-16", 0},      /* feet or inches */
    {"sheet 4x0", "typex-16", 0},
    {"furlong", "wood-89", 0},
    {"sheet -4x8", "typex-16", 0},
};

START_TEST(units) {
  const struct unit_row *row = &unit_rows[_i];
  const price_item *item = &book->items[prices_item(book, row->code)];
  double found = 0;
  const char *fault = NULL;
  bool good = price_units_read(memory, row->words, item, &found, &fault);
  ck_assert_msg(good == (row->quantity > 0), "\"%s\" of %s: %s", row->words, row->code,
                fault ? fault : "read");
  if (good)
    ck_assert_msg(fabs(found - row->quantity) <= SHARE * row->quantity, "\"%s\" of %s: %.9f",
                  row->words, row->code, found);
  else
    ck_assert_ptr_nonnull(fault);
}
END_TEST

/* ---- lines ---- */

static bool read_list(const char *bytes, const char *today) {
  const csv_table *t = csv_parse(memory, &diags, "list.csv", bytes, strlen(bytes));
  ck_assert_ptr_nonnull(t);
  return price_update_read(memory, &diags, &shop, book, t, today, &update);
}

#define HEADS "code,description,unit,price,date,currency,section,trade,waste,hours\n"

/* Prices after by hand: listed price over what its unit holds, in the book's unit. */
static const struct line_row {
  const char *name, *line;
  update_kind kind;
  const char *code;
  update_match match;
  double after; /* 0 = not looked at */
} line_rows[] = {
    {"by code", "typex-16,,ft2,0.52,,,,,,", UPDATE_SAME, "typex-16", MATCH_CODE, 0.52},
    {"per sheet", "typex-16,,sheet,22.40,,,,,,", UPDATE_CHANGED, "typex-16", MATCH_CODE, 0.56},
    {"per 1000 ft2", "typex-16,,MSF,520,,,,,,", UPDATE_SAME, "typex-16", MATCH_CODE, 0.52},
    {"per m2", "gyp-16,,m2,5.60,,,,,,", UPDATE_CHANGED, "gyp-16", MATCH_CODE, 0.520257},
    {"per bought unit", "sealant,,tube,9.60,,,,,,", UPDATE_CHANGED, "sealant", MATCH_CODE, 9.6},
    {"per unit of an item by bought unit", "sealant,,85 ft,9,,,,,,", UPDATE_SAME, "sealant",
     MATCH_CODE, 9},
    {"a later date", "typex-16,,ft2,0.52,2031-06-01,,,,,", UPDATE_CONFIRMED, "typex-16", MATCH_CODE,
     0.52},
    {"the same date", "typex-16,,ft2,0.52,2031-03-01,,,,,", UPDATE_SAME, "typex-16", MATCH_CODE,
     0.52},
    {"an earlier date", "typex-16,,ft2,0.52,2030-03-01,,,,,", UPDATE_SAME, "typex-16", MATCH_CODE,
     0.52},
    {"by the book's name", "X1,TYPE-X,ft2,0.6,,,,,,", UPDATE_CHANGED, "typex-16", MATCH_NAME, 0.6},
    {"by the catalog's name", "X1,5/8 in gypsum board,ft2,0.6,,,,,,", UPDATE_CHANGED, "gyp-16",
     MATCH_NAME, 0.6},
    {"by a spoken word", "X1,5/8 Type X,ft2,0.6,,,,,,", UPDATE_CHANGED, "typex-16", MATCH_SPOKEN,
     0.6},
    {"by a spoken word as code", "5/8X,whatever,ft2,0.6,,,,,,", UPDATE_CHANGED, "typex-16",
     MATCH_SPOKEN, 0.6},
    {"the code goes before words", "gyp-16,5/8X,ft2,0.6,,,,,,", UPDATE_CHANGED, "gyp-16",
     MATCH_CODE, 0.6},
    {"ambiguous", "X1,5/8,ft2,0.6,,,,,,", UPDATE_AMBIGUOUS, NULL, MATCH_CODE, 0},
    {"batts of four widths", "X1,R13,ft2,0.6,,,,,,", UPDATE_AMBIGUOUS, NULL, MATCH_CODE, 0},
    {"nothing of ours", "X1,trowel,each,31,,,,,,", UPDATE_UNMATCHED, NULL, MATCH_CODE, 0},
    {"bad figures of nothing of ours", "X1,trowel,hogshead,call,,,,,,", UPDATE_UNMATCHED, NULL,
     MATCH_CODE, 0},
    {"no price", "typex-16,,ft2,,,,,,,", UPDATE_NO_PRICE, "typex-16", MATCH_CODE, 0},
    {"not in the book", "osb-11,,ft2,0.55,,,,,,", UPDATE_INCOMPLETE, "osb-11", MATCH_CODE, 0},
    {"new", "osb-11,OSB,ft2,0.55,,,06 16 00,hanger,0.1,0.014", UPDATE_NEW, "osb-11", MATCH_CODE,
     0.55},
    {"work is priced too", "finish-4,finish,ft2,0.075,,,09 29 00,taper,0,0.0125", UPDATE_NEW,
     "finish-4", MATCH_CODE, 0.075},
};

START_TEST(lines) {
  const struct line_row *row = &line_rows[_i];
  bool good = read_list(text_format(memory, HEADS "%s\n", row->line), NULL);
  ck_assert_msg(good, "%s: %s", row->name, diags.count ? diags.items[0].message : "");
  ck_assert_uint_eq(update.count, 1);
  const update_line *l = &update.line[0];
  ck_assert_msg(l->kind == row->kind, "%s: kind %d", row->name, (int)l->kind);
  ck_assert_uint_eq(update.of_kind[row->kind], 1);
  ck_assert_int_eq(l->row->number, 2);
  if (row->code == NULL) {
    ck_assert_msg(l->code == NULL, "%s: %s", row->name, l->code);
    return;
  }
  ck_assert_str_eq(l->code, row->code);
  ck_assert_msg(l->match == row->match, "%s: match %d", row->name, (int)l->match);
  /* prices are kept to six decimals */
  if (row->after > 0)
    ck_assert_msg(fabs(l->after - row->after) < 1e-9, "%s: %f", row->name, l->after);
}
END_TEST

/* ---- faults: each with its cell ---- */
static const struct fault_row {
  const char *name, *lines;
  error_code code;
  const char *path;
} fault_rows[] = {
    {"no number", "typex-16,,ft2,call,,,,,,", ERROR_FIELD_TYPE, "D2 (price)"},
    {"a decimal comma", "typex-16,,ft2,\"0,52\",,,,,,", ERROR_FIELD_TYPE, "D2 (price)"},
    {"below nothing", "typex-16,,ft2,-1,,,,,,", ERROR_FIELD_RANGE, "D2 (price)"},
    {"unit of another kind", "typex-16,,lf,1,,,,,,", ERROR_PRICE_UNIT, "C2 (unit)"},
    {"unit unknown", "typex-16,,hogshead,1,,,,,,", ERROR_PRICE_UNIT, "C2 (unit)"},
    {"no date", "typex-16,,ft2,1,yesterday,,,,,", ERROR_FIELD_TYPE, "E2 (date)"},
    {"another currency", "typex-16,,ft2,0.52,,EUR,,,,", ERROR_FIELD_CONFLICT, "F2 (currency)"},
    {"two prices for one item", "typex-16,,ft2,0.52,,,,,,\n5/8X,,ft2,0.53,,,,,,",
     ERROR_FIELD_CONFLICT, "D3 (price)"},
    {"a new item in a package", "osb-11,OSB,sheet,18,,,06 16 00,hanger,0.1,0.014", ERROR_PRICE_UNIT,
     "C2 (unit)"},
    {"a new item by length", "osb-11,OSB,ft,18,,,06 16 00,hanger,0.1,0.014", ERROR_PRICE_UNIT,
     "C2 (unit)"},
    {"a new item of no trade", "osb-11,OSB,ft2,0.5,,,06 16 00,plumber,0.1,0.014",
     ERROR_FIELD_CHOICE, "H2 (trade)"},
    {"a new item with bad hours", "osb-11,OSB,ft2,0.5,,,06 16 00,hanger,0.1,soon", ERROR_FIELD_TYPE,
     "J2 (hours)"},
};

START_TEST(faults) {
  const struct fault_row *row = &fault_rows[_i];
  ck_assert_msg(!read_list(text_format(memory, HEADS "%s\n", row->lines), NULL), "%s", row->name);
  ck_assert_msg(diags.errors == 1, "%s: %zu errors", row->name, diags.errors);
  ck_assert_msg(diags.items[0].code == row->code, "%s: %s", row->name, diags.items[0].message);
  ck_assert_msg(strcmp(diags.items[0].place.path, row->path) == 0, "%s: %s", row->name,
                diags.items[0].place.path);
}
END_TEST

static const char *const bad_heads[] = {"code,unit\n", "unit,price\n", "code,price\n",
                                        "code,unit,price,price\n"};

START_TEST(heads_refused) {
  ck_assert_msg(!read_list(bad_heads[_i], NULL), "%s", bad_heads[_i]);
  ck_assert_int_eq(diags.items[0].code, ERROR_CSV_COLUMN);
}
END_TEST

START_TEST(all_faults_at_once) {
  ck_assert(
      !read_list(HEADS "typex-16,,lf,1,,,,,,\ngyp-16,,ft2,x,,,,,,\nwood-89,,ft,1,x,,,,,\n", NULL));
  ck_assert_uint_eq(diags.errors, 3);
}
END_TEST

/* A list of many lines that are not ours: no messages, and the last line is read. */
START_TEST(long_lists) {
  text t;
  text_init(&t, memory, 1 << 20);
  text_put(&t, HEADS);
  for (int i = 0; i < 1000; i++) text_putf(&t, "S%d,trowel,each,1,,,,,,\n", i);
  text_put(&t, "typex-16,,ft2,0.6,,,,,,\n");
  ck_assert(read_list(t.data, NULL));
  ck_assert_uint_eq(diags.count, 0);
  ck_assert_uint_eq(update.of_kind[UPDATE_UNMATCHED], 1000);
  ck_assert_uint_eq(update.of_kind[UPDATE_CHANGED], 1);
}
END_TEST

/* ---- dates ---- */

START_TEST(ages) {
  ck_assert(read_list(HEADS "typex-16,,ft2,0.6,2031-06-01,,,,,\ngyp-16,,ft2,0.5,2031-05-31,,,,,\n",
                      NULL));
  ck_assert_str_eq(update.today, "2031-06-01");
  ck_assert_int_eq(update.line[0].age_days, 0);
  ck_assert_int_eq(update.line[1].age_days, 1);
  ck_assert_int_eq(update.age_days, 92); /* of the book: March 31, April 30, May 31 */
  ck_assert(read_list(HEADS "typex-16,,ft2,0.6,2031-06-01,,,,,\n", "2031-07-01"));
  ck_assert_int_eq(update.line[0].age_days, 30);
  ck_assert(!read_list(HEADS "typex-16,,ft2,0.6,,,,,,\n", "soon"));
}
END_TEST

START_TEST(remarks) {
  ck_assert(read_list(HEADS "typex-16,,ft2,5.2,,,,,,\ngyp-16,,ft2,0.6,2030-01-01,,,,,\n", NULL));
  ck_assert(update.line[0].far);
  ck_assert_ptr_nonnull(strstr(update.line[0].remark, "unit"));
  ck_assert(!update.line[1].far);
  ck_assert_ptr_nonnull(strstr(update.line[1].remark, "older"));
}
END_TEST

static bool is_priced(const char *code) {
  for (size_t i = 0; i < update.codes.count; i++)
    if (strcmp(update.codes.code[i], code) == 0) return update.codes.priced[i];
  ck_abort_msg("%s is no code", code);
}

START_TEST(unpriced) {
  ck_assert(read_list(HEADS "osb-11,OSB,ft2,0.55,,,06 16 00,hanger,0.1,0.014\n", NULL));
  ck_assert(is_priced("osb-11"));
  ck_assert(is_priced("typex-16"));
  ck_assert(!is_priced("glass-89-15in"));
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("price update");
  TCase *t = tcase_create("lists");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, units, 0, ROWS(unit_rows));
  tcase_add_loop_test(t, lines, 0, ROWS(line_rows));
  tcase_add_loop_test(t, faults, 0, ROWS(fault_rows));
  tcase_add_loop_test(t, heads_refused, 0, ROWS(bad_heads));
  tcase_add_test(t, all_faults_at_once);
  tcase_add_test(t, long_lists);
  tcase_add_test(t, ages);
  tcase_add_test(t, remarks);
  tcase_add_test(t, unpriced);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
