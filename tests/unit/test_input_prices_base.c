/* Price books that build on another: what is inherited, what is changed, what is refused. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "base/file.h"
#include "base/units.h"
#include "input/prices.h"

static jmp_buf failed;
static arena *memory;
static diag_list diags;
static char folder[] = "/tmp/septum-base-XXXXXX";

static layer board = {.id = "typex-16"};
static frame frames[] = {
    {.id = "wood-89", .material = FRAME_WOOD, .stud = "wood-89", .runner = "plate-89"}};
static const catalog shop_made = {
    .layers = &board, .layer_count = 1, .frames = frames, .frame_count = 1};
static const catalog *const shop = &shop_made;

static void setup(void) {
  memory = arena_create(0, &failed);
  ck_assert_ptr_nonnull(memory);
  if (setjmp(failed)) ck_abort_msg("memory ran out");
  diag_init(&diags, memory);
  memcpy(folder, "/tmp/septum-base-XXXXXX", sizeof folder);
  ck_assert_ptr_nonnull(mkdtemp(folder));
}

static const char *path_of(const char *name) {
  return file_join(memory, folder, name);
}

static const char *const file_names[] = {"base.json", "book.json", "a.json", "b.json", "link.json",
                                         "0.json",    "1.json",    "2.json", "3.json", "4.json",
                                         "5.json",    "6.json",    "7.json", "8.json", "9.json"};

static void teardown(void) {
  for (size_t i = 0; i < sizeof file_names / sizeof file_names[0]; i++)
    (void)unlink(path_of(file_names[i]));
  (void)rmdir(folder);
  arena_free(memory);
}

static void put_file(const char *name, const char *words) {
  ck_assert(file_write(memory, &diags, path_of(name), words, strlen(words)));
}

#define BASE                                                                                       \
  "{\"septum\":\"price-book/1\",\"name\":\"base\",\"currency\":\"USD\",\"place\":\"p\",\"date\":"  \
  "\"2031-03-01\",\"source\":\"s\",\"overhead_profit\":0.2,\"sales_tax\":0.07,\"labour_rates\":{"  \
  "\"hanger\":60,\"taper\":50,\"insulator\":40},\"heights\":[{\"above_ft\":10,\"factor\":1.2}],"   \
  "\"stock\":{\"wood\":[\"9ft\"],\"steel\":[\"10ft\"]},\"items\":["                                \
  "{\"code\":\"typex-16\",\"name\":\"Type X\",\"section\":\"09 29 "                                \
  "00\",\"unit\":\"ft2\",\"price\":"                                                               \
  "0.5,\"bought_as\":\"sheet\",\"bought_quantity\":40,\"waste\":0.1,\"hours\":0.01,\"trade\":"     \
  "\"hanger\",\"minimum_order\":640,\"breaks\":[{\"from\":8000,\"price\":0.4}]},"                  \
  "{\"code\":\"wood-89\",\"name\":\"2x4\",\"section\":\"06 11 00\",\"unit\":\"m\",\"price\":2,"    \
  "\"trade\":\"hanger\"},"                                                                         \
  "{\"code\":\"sealant\",\"name\":\"sealant\",\"section\":\"07 92 19\",\"unit\":\"ft\","           \
  "\"price_bought\":9,\"bought_quantity\":90,\"trade\":\"hanger\"}]}"
#define OVER(more)                                                                                 \
  "{\"septum\":\"price-book/1\",\"name\":\"over\",\"base\":\"base.json\",\"place\":\"q\","         \
  "\"date\":\"2031-04-01\",\"source\":\"t\"" more "}"

static const price_book *read_over(const char *words) {
  put_file("base.json", BASE);
  put_file("book.json", words);
  return prices_load(memory, &diags, shop, path_of("book.json"));
}

static const price_item *item(const price_book *b, const char *code) {
  int at = prices_item(b, code);
  ck_assert_int_ne(at, CATALOG_NONE);
  return &b->items[at];
}

/* Equal but for rounding in doubles; expected figures by hand from the two files above. */
#define SHARE 1e-12

static void near(const char *what, double found, double expected) {
  ck_assert_msg(fabs(found - expected) <= SHARE * fmax(1, fabs(expected)), "%s: %.9f, not %.9f",
                what, found, expected);
}

START_TEST(all_inherited) {
  const price_book *b = read_over(OVER(""));
  ck_assert_ptr_nonnull(b);
  ck_assert_str_eq(b->name, "over");
  ck_assert_str_eq(b->currency, "USD");
  ck_assert_str_eq(b->base->name, "base");
  ck_assert_uint_eq(b->count, 3);
  near("hanger", b->rate[TRADE_HANGER], 60);
  near("tax", b->sales_tax, 0.07);
  near("board", item(b, "typex-16")->price, 0.5 / UNITS_M2_PER_FT2);
  near("sheet", item(b, "typex-16")->bought_quantity, 40 * UNITS_M2_PER_FT2);
  near("stud", item(b, "wood-89")->price, 2);
  ck_assert_str_eq(item(b, "wood-89")->date, "2031-03-01");
  ck_assert_str_eq(item(b, "wood-89")->source, "s");
  ck_assert_int_eq(b->height_steps, 1);
}
END_TEST

START_TEST(place) {
  const price_book *b = read_over(
      OVER(",\"place_factors\":{\"material\":1.1,\"labour\":0.9},\"labour_rates\":{\"taper\":55},"
           "\"items\":[{\"code\":\"wood-89\",\"price\":3}]"));
  ck_assert_ptr_nonnull(b);
  near("board", item(b, "typex-16")->price, 0.55 / UNITS_M2_PER_FT2);
  near("break", item(b, "typex-16")->breaks[0].price, 0.44 / UNITS_M2_PER_FT2);
  near("by the tube", item(b, "sealant")->price, 0.11 / UNITS_M_PER_FT);
  near("own price as it stands", item(b, "wood-89")->price, 3);
  near("rate of the base", b->rate[TRADE_HANGER], 54);
  near("own rate as it stands", b->rate[TRADE_TAPER], 55);
  near("the base itself", item(b->base, "typex-16")->price, 0.5 / UNITS_M2_PER_FT2);
}
END_TEST

START_TEST(overrides) {
  const price_book *b = read_over(OVER(
      ",\"items\":[{\"code\":\"typex-16\",\"unit\":\"m2\",\"price\":6,\"hours\":0.2},"
      "{\"code\":\"wood-89\",\"waste\":0.05},{\"code\":\"sealant\",\"price_bought\":18},"
      "{\"code\":\"plate-89\",\"name\":\"plate\",\"section\":\"06 11 00\",\"unit\":\"m\",\"price\":"
      "2,\"trade\":\"hanger\"}]"));
  ck_assert_ptr_nonnull(b);
  const price_item *x = item(b, "typex-16");
  near("price per m2", x->price, 6);
  near("hours per m2", x->hours, 0.2);
  near("waste of the base", x->waste, 0.1);
  near("sheet of the base", x->bought_quantity, 40 * UNITS_M2_PER_FT2);
  near("order of the base", x->minimum_order, 640 * UNITS_M2_PER_FT2);
  ck_assert_uint_eq(x->break_count, 0); /* they belonged to another price */
  ck_assert_str_eq(x->date, "2031-04-01");
  ck_assert_str_eq(x->name, "Type X");
  near("waste", item(b, "wood-89")->waste, 0.05);
  near("price of the base", item(b, "wood-89")->price, 2);
  ck_assert_str_eq(item(b, "wood-89")->date, "2031-03-01");
  near("by the tube", item(b, "sealant")->price, 18 / 90.0 / UNITS_M_PER_FT);
  near("new", item(b, "plate-89")->price, 2);
  ck_assert_uint_eq(b->count, 4);
}
END_TEST

START_TEST(parts_replaced_whole) {
  const price_book *b = read_over(OVER(
      ",\"heights\":[{\"above_ft\":12,\"factor\":1.3}],\"stock\":{\"wood\":[\"8ft\",\"12ft\"]}"));
  ck_assert_ptr_nonnull(b);
  ck_assert_int_eq(b->height_steps, 1);
  near("height", b->height_step_m[0], 12 * UNITS_M_PER_FT);
  ck_assert_int_eq(b->stock[FRAME_WOOD].count, 2);
  near("steel of the base", b->stock[FRAME_STEEL].metres[0], 10 * UNITS_M_PER_FT);
}
END_TEST

static const struct refusal {
  const char *name, *words;
  error_code code;
  const char *path, *says;
} refusals[] = {
    {"itself",
     "{\"septum\":\"price-book/1\",\"base\":\"book.json\",\"name\":\"n\",\"place\":\"p\","
     "\"date\":\"d\",\"source\":\"s\"}",
     ERROR_PRICE_BASE, "$.base", "itself"},
    {"not there",
     "{\"septum\":\"price-book/1\",\"base\":\"none.json\",\"name\":\"n\",\"place\":"
     "\"p\",\"date\":\"d\",\"source\":\"s\"}",
     ERROR_PRICE_BASE, "$.base", "not there"},
    {"no name of a base",
     "{\"septum\":\"price-book/1\",\"base\":1,\"name\":\"n\",\"place\":\"p\","
     "\"date\":\"d\",\"source\":\"s\"}",
     ERROR_FIELD_TYPE, "$.base", "string"},
    {"another currency", OVER(",\"currency\":\"CAD\""), ERROR_PRICE_BASE, "$.currency", "USD"},
    {"a new item that is not whole", OVER(",\"items\":[{\"code\":\"plate-89\",\"price\":2}]"),
     ERROR_FIELD_MISSING, "$.items[0]", ""},
    {"an item twice",
     OVER(",\"items\":[{\"code\":\"wood-89\",\"price\":2},{\"code\":\"wood-89\","
          "\"price\":3}]"),
     ERROR_FIELD_CONFLICT, "$.items[1]", "already"},
    {"a unit of another kind",
     OVER(",\"items\":[{\"code\":\"wood-89\",\"unit\":\"ft2\",\"price\":"
          "2}]"),
     ERROR_FIELD_UNIT, "$.items[0].unit", "length"},
    {"a factor out of range", OVER(",\"place_factors\":{\"material\":0}"), ERROR_FIELD_RANGE,
     "$.place_factors.material", ""},
    {"no date",
     "{\"septum\":\"price-book/1\",\"name\":\"over\",\"base\":\"base.json\",\"place\":"
     "\"q\",\"source\":\"t\"}",
     ERROR_FIELD_MISSING, "$", "date"},
};

START_TEST(refused) {
  const struct refusal *row = &refusals[_i];
  ck_assert_msg(read_over(row->words) == NULL, "%s is refused", row->name);
  const diag *d = &diags.items[0];
  ck_assert_msg(d->code == row->code, "%s: E%d %s", row->name, (int)d->code, d->message);
  ck_assert_msg(strcmp(d->place.path, row->path) == 0, "%s: %s", row->name, d->place.path);
  ck_assert_msg(strstr(d->message, row->says) != NULL, "%s: %s", row->name, d->message);
  ck_assert_str_eq(d->place.file, path_of("book.json"));
}
END_TEST

START_TEST(factors_without_base) {
  char *book = arena_alloc(memory, sizeof BASE + 64);
  (void)snprintf(book, sizeof BASE + 64, "%.*s,\"place_factors\":{\"labour\":1.1}}",
                 (int)sizeof BASE - 2, BASE);
  ck_assert_ptr_null(read_over(book));
  ck_assert_int_eq(diags.items[0].code, ERROR_FIELD_CONFLICT);
}
END_TEST

static void put_link(const char *name, const char *base) {
  put_file(name, text_format(memory,
                             "{\"septum\":\"price-book/1\",\"name\":\"n\",\"base\":\"%s\","
                             "\"place\":\"p\",\"date\":\"d\",\"source\":\"s\"}",
                             base));
}

/* Through another file, another spelling of the path, a link. */
START_TEST(cycles) {
  put_link("a.json", "b.json");
  put_link("b.json", "././a.json");
  ck_assert_ptr_null(prices_load(memory, &diags, shop, path_of("a.json")));
  ck_assert_int_eq(diags.items[0].code, ERROR_PRICE_BASE);
  ck_assert_ptr_nonnull(strstr(diags.items[0].message, "itself"));
  diag_init(&diags, memory);
  ck_assert_int_eq(symlink("a.json", path_of("link.json")), 0);
  put_link("a.json", "link.json");
  ck_assert_ptr_null(prices_load(memory, &diags, shop, path_of("a.json")));
  ck_assert_ptr_nonnull(strstr(diags.items[0].message, "itself"));
}
END_TEST

START_TEST(chains) {
  put_file("0.json", BASE);
  for (int i = 1; i <= PRICES_MAX_BASES + 1; i++)
    put_link(text_format(memory, "%d.json", i), text_format(memory, "%d.json", i - 1));
  const price_book *b =
      prices_load(memory, &diags, shop, path_of(text_format(memory, "%d.json", PRICES_MAX_BASES)));
  ck_assert_ptr_nonnull(b);
  near("through all", item(b, "wood-89")->price, 2);
  ck_assert_ptr_null(prices_load(memory, &diags, shop,
                                 path_of(text_format(memory, "%d.json", PRICES_MAX_BASES + 1))));
  ck_assert_int_eq(diags.items[0].code, ERROR_PRICE_BASE);
}
END_TEST

/* Faults of a base are told in its own file, then where it is named. */
START_TEST(faulty_base) {
  put_file("base.json", "{\"septum\":\"price-book/1\"}");
  put_file("book.json", OVER(""));
  ck_assert_ptr_null(prices_load(memory, &diags, shop, path_of("book.json")));
  ck_assert_str_eq(diags.items[0].place.file, path_of("base.json"));
  ck_assert_str_eq(diags.items[diags.count - 1].place.path, "$.base");
}
END_TEST

START_TEST(dear_break) {
  const price_book *b = read_over(
      OVER(",\"items\":[{\"code\":\"typex-16\",\"price\":0.5,\"breaks\":[{\"from\":100,\"price\":"
           "0.6}]}]"));
  ck_assert_ptr_nonnull(b);
  ck_assert_int_eq(diags.items[0].code, ERROR_PRICE_BREAK);
  ck_assert_int_eq(diags.items[0].level, DIAG_WARNING);
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("price books on others");
  TCase *t = tcase_create("base");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_test(t, all_inherited);
  tcase_add_test(t, place);
  tcase_add_test(t, overrides);
  tcase_add_test(t, parts_replaced_whole);
  tcase_add_loop_test(t, refused, 0, ROWS(refusals));
  tcase_add_test(t, factors_without_base);
  tcase_add_test(t, cycles);
  tcase_add_test(t, chains);
  tcase_add_test(t, faulty_base);
  tcase_add_test(t, dear_break);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_ENV);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
