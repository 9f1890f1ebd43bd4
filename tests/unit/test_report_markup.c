/* Escaping: JSON by RFC 8259, CSV by RFC 4180, XML 1.0 and HTML 5. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdlib.h>
#include <string.h>

#include "report/markup.h"

static arena *memory;
static jmp_buf no_memory;

static void set_up(void) {
  memory = arena_create(0, &no_memory);
  ck_assert_ptr_nonnull(memory);
}

static void tear_down(void) {
  arena_free(memory);
}

static text fresh(void) {
  text t;
  text_init(&t, memory, 10000);
  return t;
}

static const struct string_row {
  const char *name, *value, *expected;
} string_rows[] = {
    {"plain", "5/8 in", "\"5/8 in\"\n"},
    {"null", NULL, "null\n"},
    {"quote and backslash", "a\"b\\c", "\"a\\\"b\\\\c\"\n"},
    {"control characters (RFC 8259, 7)", "a\n\t\x01z", "\"a\\n\\t\\u0001z\"\n"},
    {"escape and delete", "\x1b[2J\x7f", "\"\\u001b[2J\\u007f\"\n"},
    {"two and three bytes", "\xC2\xB2 \xE2\x89\xA5", "\"\xC2\xB2 \xE2\x89\xA5\"\n"},
    {"four bytes", "\xF0\x9F\x9B\xA0", "\"\xF0\x9F\x9B\xA0\"\n"},
    {"lone continuation", "a\x80z", "\"a\xEF\xBF\xBDz\"\n"},
    {"cut at the end", "a\xE2\x89", "\"a\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
    {"overlong slash", "\xC0\xAF", "\"\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
    {"surrogate", "\xED\xA0\x80", "\"\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
    {"beyond U+10FFFF", "\xF4\x90\x80\x80",
     "\"\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\"\n"},
};

START_TEST(json_strings) {
  const struct string_row *row = &string_rows[_i];
  text out = fresh();
  markup_json j;
  markup_json_init(&j, &out);
  markup_json_string(&j, NULL, row->value);
  text_char(&out, '\n');
  ck_assert_msg(strcmp(out.data, row->expected) == 0, "%s: %s", row->name, out.data);
}
END_TEST

START_TEST(json_nesting) {
  text out = fresh();
  markup_json j;
  markup_json_init(&j, &out);
  markup_json_object(&j, NULL, false);
  markup_json_integer(&j, "n", -3);
  markup_json_array(&j, "list", true);
  markup_json_number(&j, NULL, 0.125, 2);
  markup_json_number(&j, NULL, HUGE_VAL, 2);
  markup_json_bool(&j, NULL, true);
  markup_json_object(&j, NULL, false);
  markup_json_null(&j, "x");
  markup_json_close(&j);
  markup_json_close(&j);
  markup_json_object(&j, "empty", false);
  markup_json_close(&j);
  markup_json_cents(&j, "money", 1999);
  markup_json_close(&j);
  ck_assert_str_eq(out.data, "{\n  \"n\": -3,\n  \"list\": [0.13, null, true, {\"x\": null}],\n"
                             "  \"empty\": {},\n  \"money\": 19.99\n}\n");
}
END_TEST

static const struct csv_row {
  const char *name, *value, *expected;
} csv_rows[] = {
    {"plain", "typex-16", "typex-16"},
    {"empty", "", ""},
    {"comma", "board, screwed", "\"board, screwed\""},
    {"quote doubled (RFC 4180, 2.7)", "3\" pipe", "\"3\"\" pipe\""},
    {"line break", "a\nb", "\"a\nb\""},
    {"negative number stays a number", "-12.5", "-12.5"},
    {"formula is text", "=1+1", "\"'=1+1\""},
    {"minus formula is text", "-1+cmd", "\"'-1+cmd\""},
    {"at sign", "@sum", "\"'@sum\""},
};

START_TEST(csv_fields) {
  const struct csv_row *row = &csv_rows[_i];
  text out = fresh();
  markup_csv_field(&out, row->value, true);
  ck_assert_msg(strcmp(out.data, row->expected) == 0, "%s: %s", row->name, out.data);
}
END_TEST

START_TEST(csv_line) {
  text out = fresh();
  markup_csv_field(&out, "a", true);
  markup_csv_field(&out, "b", false);
  markup_csv_end(&out);
  ck_assert_str_eq(out.data, "a,b\r\n");
}
END_TEST

#define REPLACED "\xEF\xBF\xBD"

/* What may stand in a page: XML 1.0, production 2 (Char); HTML 5 bars the C1 controls too. */
static const struct xml_row {
  const char *name, *value, *as_text, *as_attribute;
} xml_rows[] = {
    {"plain", "5/8 in", "5/8 in", "5/8 in"},
    {"nothing", NULL, "", ""},
    {"markup", "<b>&\"'</b>", "&lt;b&gt;&amp;\"'&lt;/b&gt;", "&lt;b&gt;&amp;&quot;'&lt;/b&gt;"},
    {"already a reference", "&lt;", "&amp;lt;", "&amp;lt;"},
    {"end of a section of data", "]]>", "]]&gt;", "]]&gt;"},
    {"line break and tab", "a\n\tb", "a\n\tb", "a&#10;&#9;b"},
    {"carriage return", "a\r\nb", "a \nb", "a &#10;b"},
    {"controls", "a\x01\x1B[2J\x7F", "a" REPLACED REPLACED "[2J" REPLACED,
     "a" REPLACED REPLACED "[2J" REPLACED},
    {"C1 controls", "a\xC2\x85\xC2\x9F", "a" REPLACED REPLACED, "a" REPLACED REPLACED},
    {"first after them", "\xC2\xA0", "\xC2\xA0", "\xC2\xA0"},
    {"U+FFFE, U+FFFF", "\xEF\xBF\xBE\xEF\xBF\xBF", REPLACED REPLACED, REPLACED REPLACED},
    {"not UTF-8", "a\x80\xC0\xAFz", "a" REPLACED REPLACED REPLACED "z",
     "a" REPLACED REPLACED REPLACED "z"},
    {"cut at the end", "a\xE2\x89", "a" REPLACED REPLACED, "a" REPLACED REPLACED},
    {"embeddings and overrides", "\xE2\x80\xAA\xE2\x80\xAE", REPLACED REPLACED, REPLACED REPLACED},
    {"isolates", "\xE2\x81\xA6\xE2\x81\xA9", REPLACED REPLACED, REPLACED REPLACED},
    {"marks beside them stay", "\xE2\x80\xA9\xE2\x80\xAF\xE2\x81\xA5\xE2\x81\xAA",
     "\xE2\x80\xA9\xE2\x80\xAF\xE2\x81\xA5\xE2\x81\xAA",
     "\xE2\x80\xA9\xE2\x80\xAF\xE2\x81\xA5\xE2\x81\xAA"},
    {"Hebrew stays", "\xD7\x97\xD7\x93\xD7\xA8", "\xD7\x97\xD7\x93\xD7\xA8",
     "\xD7\x97\xD7\x93\xD7\xA8"},
    {"four bytes", "\xF0\x9F\x9B\xA0", "\xF0\x9F\x9B\xA0", "\xF0\x9F\x9B\xA0"},
};

START_TEST(xml_text) {
  const struct xml_row *row = &xml_rows[_i];
  text out = fresh(), attribute = fresh();
  markup_text(&out, row->value);
  markup_attribute(&attribute, row->value);
  ck_assert_msg(strcmp(out.data, row->as_text) == 0, "%s: %s", row->name, out.data);
  ck_assert_msg(strcmp(attribute.data, row->as_attribute) == 0, "%s: %s", row->name,
                attribute.data);
}
END_TEST

START_TEST(xml_elements) {
  text out = fresh();
  markup_xml x;
  markup_xml_init(&x, &out);
  markup_xml_html(&x);
  markup_xml_open(&x, "html");
  markup_xml_attribute(&x, "lang", "en");
  markup_xml_attribute(&x, "class", NULL);
  markup_xml_open(&x, "meta");
  markup_xml_attribute(&x, "charset", "utf-8");
  markup_xml_close(&x);
  markup_xml_style(&x, "p{color:red}");
  markup_xml_open(&x, "p");
  markup_xml_text(&x, "a <");
  markup_xml_inline(&x, "b");
  markup_xml_number(&x, "data-n", 2.5000001, 2);
  markup_xml_text(&x, "word");
  markup_xml_close(&x);
  markup_xml_close(&x);
  markup_xml_open(&x, "td");
  markup_xml_close(&x);
  text_put(markup_xml_embed(&x), "<hr/>");
  markup_xml_element(&x, "p", "c", "d & e");
  markup_xml_close(&x);
  markup_xml_close(&x); /* one too many is nothing */
  ck_assert_str_eq(out.data, "<!DOCTYPE html>\n<html lang=\"en\">\n<meta charset=\"utf-8\"/>\n"
                             "<style>p{color:red}</style>\n"
                             "<p>a &lt;<b data-n=\"2.5\">word</b></p>\n<td></td><hr/>\n"
                             "<p class=\"c\">d &amp; e</p>\n</html>\n");
}
END_TEST

START_TEST(xml_late_attribute) {
  text out = fresh();
  markup_xml x;
  markup_xml_init(&x, &out);
  markup_xml_open(&x, "p");
  markup_xml_text(&x, "a");
  markup_xml_attribute(&x, "id", "b");
  markup_xml_number(&x, "n", HUGE_VAL, 1);
  markup_xml_close(&x);
  ck_assert_str_eq(out.data, "<p>a</p>\n");
}
END_TEST

/* Too deep: what is left out is left out whole, and the rest stays balanced. */
START_TEST(xml_depth) {
  text out = fresh();
  markup_xml x;
  markup_xml_init(&x, &out);
  for (int i = 0; i < MARKUP_MAX_DEPTH + 3; i++) {
    markup_xml_open(&x, "g");
    markup_xml_number(&x, "n", i, 0);
  }
  markup_xml_text(&x, "deep");
  for (int i = 0; i < MARKUP_MAX_DEPTH + 3; i++) markup_xml_close(&x);
  int opened = 0, closed = 0;
  for (const char *s = out.data; (s = strstr(s, "<g ")) != NULL; s++) opened++;
  for (const char *s = out.data; (s = strstr(s, "</g>")) != NULL; s++) closed++;
  ck_assert_int_eq(opened, MARKUP_MAX_DEPTH);
  ck_assert_int_eq(closed, MARKUP_MAX_DEPTH);
  ck_assert_ptr_nonnull(strstr(out.data, "n=\"31\">deep</g>"));
  ck_assert_ptr_null(strstr(out.data, "n=\"32\""));
  ck_assert_int_eq(x.depth, 0);
}
END_TEST

int main(void) {
  Suite *suite = suite_create("report markup");
  TCase *cases = tcase_create("escaping");
  tcase_add_checked_fixture(cases, set_up, tear_down);
  tcase_add_loop_test(cases, json_strings, 0, (int)(sizeof string_rows / sizeof string_rows[0]));
  tcase_add_test(cases, json_nesting);
  tcase_add_loop_test(cases, csv_fields, 0, (int)(sizeof csv_rows / sizeof csv_rows[0]));
  tcase_add_test(cases, csv_line);
  tcase_add_loop_test(cases, xml_text, 0, (int)(sizeof xml_rows / sizeof xml_rows[0]));
  tcase_add_test(cases, xml_elements);
  tcase_add_test(cases, xml_late_attribute);
  tcase_add_test(cases, xml_depth);
  suite_add_tcase(suite, cases);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
