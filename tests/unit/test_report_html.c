/* Parts of pages, and the brief as a page tells it. What whole pages hold: tests/html. */
#include "report/html.h"

#include <check.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "report/view_brief.h"

enum { PAGE_BYTES = 1 << 20 };

static arena *memory;
static jmp_buf no_memory;
static diag_list faults;
static const catalog *shipped;
static brief asked;
static report usual;
static text page;

static void set_up(void) {
  memory = arena_create(0, &no_memory);
  ck_assert_ptr_nonnull(memory);
  diag_init(&faults, memory);
  shipped = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(shipped);
  job_defaults(&asked);
  usual = (report){
      .arena = memory, .catalog = shipped, .brief = &asked, .asked = true, .units = UNITS_US};
  text_init(&page, memory, PAGE_BYTES);
}

static void tear_down(void) {
  arena_free(memory);
}

static int count_of(const char *word) {
  int n = 0;
  for (const char *p = page.data; (p = strstr(p, word)) != NULL; p += strlen(word)) n++;
  return n;
}

static void finish(html *h) {
  html_end(h, NULL, 0);
  ck_assert_int_eq(h->x.depth, 0);
  ck_assert_int_eq(h->x.lost, 0);
  ck_assert(!page.cut);
}

/* --- the shell ------------------------------------------------------------------------------- */

static const struct title_row {
  const char *title, *heading;
} title_rows[] = {
    {"A <b> & \"c\"", "<h1 dir=\"auto\">A &lt;b&gt; &amp; \"c\"</h1>"},
    {"", "<h1>Kind</h1>"},
    {" \t ", "<h1>Kind</h1>"},
    {NULL, "<h1>Kind</h1>"},
};

START_TEST(titles) {
  const struct title_row *row = &title_rows[_i];
  html *h = arena_alloc(memory, sizeof *h);
  html_begin(h, &usual, "Kind", row->title, &page);
  finish(h);
  ck_assert_msg(strstr(page.data, row->heading) != NULL, "%s", row->heading);
  ck_assert_int_eq(count_of("<h1"), 1);
  ck_assert_int_eq(count_of("<style>"), 1);
  ck_assert_int_eq(count_of("<title>Kind"), 1);
}
END_TEST

/* A tab has room for some words only; the heading has the rest too. */
START_TEST(a_long_title_is_cut_for_the_tab_alone) {
  enum { LONG = 5000, IN_TAB = 200 };
  char title[LONG + 1];
  memset(title, 'w', LONG);
  title[LONG] = '\0';
  html *h = arena_alloc(memory, sizeof *h);
  html_begin(h, &usual, "Kind", title, &page);
  finish(h);
  const char *tab = strstr(page.data, "<title>"), *end = strstr(page.data, "</title>");
  ck_assert(tab && end && end - tab < IN_TAB);
  ck_assert_ptr_nonnull(strstr(page.data, title));
}
END_TEST

START_TEST(a_cut_title_ends_between_letters) {
  text title;
  text_init(&title, memory, PAGE_BYTES);
  for (int i = 0; i < 400; i++) text_put(&title, "\xC3\xA9");
  html *h = arena_alloc(memory, sizeof *h);
  html_begin(h, &usual, "Kind", title.data, &page);
  finish(h);
  ck_assert_ptr_null(strstr(page.data, "\xEF\xBF\xBD"));
}
END_TEST

/* --- parts ----------------------------------------------------------------------------------- */

START_TEST(every_part_has_its_own_id) {
  static const html_column columns[] = {{"Head", HTML_HEAD}, {"Number", HTML_FIGURE}};
  html *h = arena_alloc(memory, sizeof *h);
  html_begin(h, &usual, "Kind", "", &page);
  for (int i = 0; i < 3; i++) {
    html_section(h, "Section");
    html_table(h, "Caption", columns, 2);
    html_row(h, (const char *const[]){"<row>", NULL});
    html_table_end(h);
    html_section_end(h);
  }
  finish(h);
  ck_assert_int_eq(count_of("id=\"s1\""), 1);
  ck_assert_int_eq(count_of("id=\"s3\""), 1);
  ck_assert_int_eq(count_of("id=\"t1\""), 1);
  ck_assert_int_eq(count_of("id=\"t3\""), 1);
  ck_assert_int_eq(count_of("<th scope=\"row\">&lt;row&gt;</th><td class=\"n\"></td>"), 3);
  ck_assert_str_ne(html_picture_id(h), html_picture_id(h));
}
END_TEST

START_TEST(headings_go_down_by_one) {
  html *h = arena_alloc(memory, sizeof *h);
  html_begin(h, &usual, "Kind", "", &page);
  html_section(h, "One");
  html_heading(h, "under one");
  html_group(h, "group");
  html_heading(h, "under group");
  html_section_end(h);
  html_section(h, "Two");
  html_heading(h, "under two");
  html_section_end(h);
  finish(h);
  ck_assert_ptr_nonnull(strstr(page.data, "<h3>under one</h3>"));
  ck_assert_ptr_nonnull(strstr(page.data, "<h3>group</h3>"));
  ck_assert_ptr_nonnull(strstr(page.data, "<h4>under group</h4>"));
  ck_assert_ptr_nonnull(strstr(page.data, "<h3>under two</h3>"));
}
END_TEST

/* A page that is filed tells the edition of each file: CRC-32 as zlib gives it, folders left out. */
START_TEST(editions_stand_at_the_end) {
  html *h = arena_alloc(memory, sizeof *h);
  const html_file files[] = {{"some/where/brief.json", 0xCBF43926}, {NULL, 1}, {"walls.csv", 0x1F}};
  html_begin(h, &usual, "Kind", "", &page);
  html_end(h, files, 3);
  const char *end = strstr(page.data, "<footer");
  ck_assert_ptr_nonnull(end);
  ck_assert_ptr_nonnull(strstr(end, ">brief.json CBF43926, walls.csv 0000001F, boards.json "));
  ck_assert_ptr_null(strstr(end, "where/"));
}
END_TEST

/* --- the brief as understood ----------------------------------------------------------------- */

static void understand(const char *json, int climbs, view_brief *out) {
  const json_value *root = json_parse(memory, &faults, "brief.json", json, strlen(json));
  ck_assert_msg(root && job_read(memory, &faults, shipped, root, false, &asked), "%s", json);
  usual.units = asked.units;
  view_brief_of(&usual, climbs, out);
}

static const view_field *field_of(const view_brief *b, const char *name) {
  for (int i = 0; i < b->count; i++)
    if (text_equal(b->field[i].name, name)) return &b->field[i];
  return NULL;
}

static const struct field_row {
  const char *json; /* members of a brief, after its mark */
  const char *name, *value;
  bool usual;
} field_rows[] = {
    {"", "Length", "9 ft 10-1/8 in", true},
    {"\"wall\":{\"length_m\":3.0}", "Length", "9 ft 10-1/8 in", true}, /* said or not: the same */
    {"\"units\":\"si\",\"wall\":{\"length_m\":4.5}", "Length", "4.50 m", false},
    {"\"wall\":{\"height_ft\":9}", "Height", "9 ft 0 in", false},
    {"\"wall\":{\"ceiling_b_ft\":8}", "Ceiling, side B", "8 ft 0 in", false},
    {"\"wall\":{\"head\":\"slip\"}", "Head", "slip", false},
    {"\"code\":\"nbc\"", "Code", "nbc", false},
    {"", "Code", "none", true},
    {"\"building\":{\"storeys\":4,\"sprinklered\":true}", "Storeys", "4", false},
    {"", "Storeys", "not said", true},
    {"\"building\":{\"storeys\":4,\"sprinklered\":true}", "Sprinklered", "yes", false},
    {"\"target\":{\"value\":52}", "Target", "STC 52", false},
    {"\"target\":{\"value\":52}", "Target: confidence", "80 %", true},
    {"\"target\":{\"value\":52,\"confidence\":0.95}", "Target: confidence", "95 %", false},
    {"\"target\":{\"value\":52,\"basis\":\"field\"}", "Target: where", "in the field", false},
    {"\"target\":{\"value\":52,\"basis\":\"field\"}", "Step from laboratory to field",
     "5 points, standard deviation 2", true},
    {"\"target\":{\"value\":52,\"evidence\":\"published\"}", "Target: evidence",
     "published ratings only", false},
    {"\"target\":{\"value\":52,\"margin\":2.5}", "Target: margin", "2.5 points", false},
    {"\"target\":{\"value\":52,\"scope\":\"composite\"}", "Target: scope",
     "the wall with its openings", false},
    {"\"targets\":[{\"value\":50},{\"metric\":\"Rw\",\"value\":48}]", "Target 2", "Rw 48", false},
    {"\"openings\":[{\"kind\":\"door <b>\",\"area_ft2\":20,\"stc\":28}]", "Opening 1",
     "door <b>, 20.00 ft2, STC 28", false},
    {"\"limits\":{\"thickness_in\":{\"max\":6}}", "Thickness at most", "6 in", false},
    {"\"limits\":{\"mass_psf\":{\"min\":5}}", "Mass at least", "5.0 psf", false},
    {"\"fire_min\":60", "Fire rating asked", "60 min", false},
    {"", "Fire rating asked", "none", true},
    {"\"structure\":{\"loadbearing\":true,\"floors_above\":2}", "Floors above", "2", false},
    {"\"structure\":{\"noncombustible\":\"strict\"}", "Noncombustible", "no combustible part",
     false},
    {"\"structure\":{\"shear_side\":\"b\"}", "Shear panel", "on side B", false},
    {"", "Load across the wall", "5.01 psf", true}, /* 240 Pa over 47.88 Pa per psf */
    {"\"structure\":{\"deflection\":360}", "Deflection", "span / 360", false},
    {"\"sides\":{\"a\":{\"room\":\"hall\"}}", "Side A: room", "hall", false},
    {"\"sides\":{\"b\":{\"fastening\":\"heavy\"}}", "Side B: fastening", "heavy", false},
    {"\"sides\":{\"b\":{\"fastening\":\"heavy\"}}", "Side B: fastening over", "the whole side",
     true},
    {"\"sides\":{\"a\":{\"wet\":true}}", "Side A: wet", "yes", false},
    {"\"sides\":{\"a\":{\"abuse\":true}}", "Side A: abuse", "yes", false},
    {"\"sides\":{\"a\":{\"finish_level\":5}}", "Side A: finish", "Level 5", false},
    {"\"services\":{\"riser_in\":3}", "Pipe within the studs", "3 in", false},
    {"", "Electrical boxes", "3 a side in 10 m", true}, /* common practice, no source */
    {"\"services\":{\"boxes_per_10m\":3}", "Electrical boxes", "3 a side in 10 m", false},
    {"\"build\":\"any\"", "Build", "any legal wall", false},
    {"\"only\":[\"wood-*\",\"frame:steel-92-*\"]", "Only", "wood-*, frame:steel-92-*", false},
    {"\"without\":\"rc\"", "Without", "rc", false},
    {"\"title\":\"Hall\"", "Title", "Hall", false},
};

START_TEST(fields_of_the_brief) {
  const struct field_row *row = &field_rows[_i];
  view_brief *b = arena_alloc(memory, sizeof *b);
  understand(text_format(memory, "{\"septum\":\"brief/1\"%s%s}", row->json[0] ? "," : "", row->json),
             CATALOG_NONE, b);
  const view_field *f = field_of(b, row->name);
  ck_assert_msg(f != NULL, "%s: no field %s", row->json, row->name);
  ck_assert_msg(text_equal(f->value, row->value), "%s: %s is %s, expected %s", row->json, row->name,
                f->value, row->value);
  ck_assert_msg(f->usual == row->usual, "%s: %s default or not", row->json, row->name);
}
END_TEST

START_TEST(what_is_not_in_force_is_not_listed) {
  static const char *const names[] = {"Title",           "Thickness at most",
                                      "Mass at least",   "Cost at most",
                                      "Ceiling, side A", "Floors above",
                                      "Side A: room",    "Side A: fastening over",
                                      "Only",            "Without",
                                      "Opening 1",       "Step from laboratory to field",
                                      "Target"};
  view_brief *b = arena_alloc(memory, sizeof *b);
  understand("{\"septum\":\"brief/1\"}", CATALOG_NONE, b);
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++)
    ck_assert_msg(field_of(b, names[i]) == NULL, "%s is listed", names[i]);
  for (int i = 0; i < b->count; i++)
    ck_assert_msg(b->field[i].usual, "%s of a brief that says nothing", b->field[i].name);
}
END_TEST

START_TEST(the_target_that_climbs_has_no_value) {
  view_brief *b = arena_alloc(memory, sizeof *b);
  understand("{\"septum\":\"brief/1\",\"target\":{\"value\":52}}", 0, b);
  ck_assert_str_eq(field_of(b, "Target")->value, "STC, every value");
}
END_TEST

int main(void) {
  Suite *s = suite_create("html");
  TCase *t = tcase_create("page");
  tcase_add_checked_fixture(t, set_up, tear_down);
  tcase_add_loop_test(t, titles, 0, sizeof title_rows / sizeof title_rows[0]);
  tcase_add_test(t, a_long_title_is_cut_for_the_tab_alone);
  tcase_add_test(t, a_cut_title_ends_between_letters);
  tcase_add_test(t, every_part_has_its_own_id);
  tcase_add_test(t, headings_go_down_by_one);
  tcase_add_test(t, editions_stand_at_the_end);
  tcase_add_loop_test(t, fields_of_the_brief, 0, sizeof field_rows / sizeof field_rows[0]);
  tcase_add_test(t, what_is_not_in_force_is_not_listed);
  tcase_add_test(t, the_target_that_climbs_has_no_value);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
