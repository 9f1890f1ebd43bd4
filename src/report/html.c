#include "report/html.h"

#include <inttypes.h>
#include <string.h>

#include "base/file.h"
#include "report/chart.h"
#include "report/section.h"
#include "septum.h"

/* --- the shell ------------------------------------------------------------------------------- */

/* What a tab or a list of files shows of a title. */
enum { TITLE_LETTERS = 120, STYLE_MAX_BYTES = 64 << 10 };

static const char *shortened(const report *r, const char *title) {
  const char *end = title + strlen(title), *p = title;
  for (int n = 0; p < end; n++) {
    size_t length = text_utf8(p, end);
    if (n == TITLE_LETTERS)
      return text_format(r->arena, "%s ...", text_copyn(r->arena, title, (size_t)(p - title)));
    p += length > 0 ? length : 1;
  }
  return title;
}

static void put_meta(html *h, const char *name, const char *content) {
  markup_xml_open(&h->x, "meta");
  markup_xml_attribute(&h->x, "name", name);
  markup_xml_attribute(&h->x, "content", content);
  markup_xml_close(&h->x);
}

static void put_head(html *h, const char *kind, const char *title) {
  const report *r = h->report;
  text style;
  text_init(&style, r->arena, STYLE_MAX_BYTES);
  html_style(&style);
  chart_style(&style);
  section_style(&style, false);
  markup_xml_open(&h->x, "head");
  markup_xml_open(&h->x, "meta");
  markup_xml_attribute(&h->x, "charset", "utf-8");
  markup_xml_close(&h->x);
  put_meta(h, "viewport", "width=device-width, initial-scale=1");
  put_meta(h, "color-scheme", "light dark");
  put_meta(h, "generator", "septum " SEPTUM_VERSION);
  markup_xml_element(&h->x, "title", NULL,
                     *title ? text_format(r->arena, "%s: %s", kind, shortened(r, title)) : kind);
  markup_xml_style(&h->x, style.data);
  markup_xml_close(&h->x);
}

void html_begin(html *h, const report *r, const char *kind, const char *title, text *out) {
  if (!title || title[strspn(title, " \t\r\n")] == '\0') title = "";
  memset(h, 0, sizeof *h);
  h->report = r;
  markup_xml_init(&h->x, out);
  markup_xml_html(&h->x);
  markup_xml_open(&h->x, "html");
  markup_xml_attribute(&h->x, "lang", "en");
  put_head(h, kind, title);
  markup_xml_open(&h->x, "body");
  markup_xml_open(&h->x, "header");
  if (*title) {
    markup_xml_element(&h->x, "p", "kind", kind);
    markup_xml_open(&h->x, "h1");
    markup_xml_attribute(&h->x, "dir", "auto");
    markup_xml_text(&h->x, title);
    markup_xml_close(&h->x);
  } else
    markup_xml_element(&h->x, "h1", NULL, kind);
  markup_xml_close(&h->x);
  markup_xml_open(&h->x, "main");
}

static void put_edition(text *t, const char *path, uint32_t crc) {
  if (path) text_putf(t, "%s%s %08" PRIX32, t->len ? ", " : "", file_name(path), crc);
}

static void put_editions(html *h, const html_file *asked, int count) {
  enum { FILES_MAX_BYTES = 64 << 10 };
  const catalog *c = h->report->catalog;
  text t;
  text_init(&t, h->report->arena, FILES_MAX_BYTES);
  for (int i = 0; i < count; i++) put_edition(&t, asked[i].path, asked[i].crc);
  for (const price_book *b = h->report->prices; b; b = b->base)
    if (b->json) put_edition(&t, b->json->file, b->json->crc);
  for (int i = 0; i < CATALOG_FILES; i++) put_edition(&t, c->edition[i].file, c->edition[i].crc);
  html_fact_data(h, "Files read, with their CRC-32", t.data);
}

void html_end(html *h, const html_file *asked, int count) {
  const price_book *b = h->report->prices;
  markup_xml_close(&h->x);
  markup_xml_open(&h->x, "footer");
  markup_xml_element(&h->x, "h2", NULL, "What this page rests on");
  html_facts(h);
  html_fact(h, "Program", "septum " SEPTUM_VERSION);
  if (b) {
    html_fact_data(h, "Price book", b->name);
    html_fact_data(h, "Place of the prices", b->place);
    html_fact_data(h, "Date of the prices", b->date);
    html_fact_data(h, "Source of the prices", b->source);
  }
  put_editions(h, asked, count);
  html_fact(h, "What decides",
            "Ratings predicted here are estimates, not tests; fire and structure are screened "
            "only. Local code, the listed fire design and licensed practice decide.");
  html_facts_end(h);
  markup_xml_close(&h->x);
  markup_xml_close(&h->x);
  markup_xml_close(&h->x);
}

void html_end_brief(html *h) {
  const brief *b = h->report->brief;
  html_end(h, &(html_file){b->file, b->crc}, 1);
}

/* --- sections -------------------------------------------------------------------------------- */

void html_section(html *h, const char *heading) {
  const char *id = text_format(h->report->arena, "s%d", ++h->sections);
  h->grouped = false;
  markup_xml_open(&h->x, "section");
  markup_xml_attribute(&h->x, "aria-labelledby", id);
  markup_xml_open(&h->x, "h2");
  markup_xml_attribute(&h->x, "id", id);
  markup_xml_text(&h->x, heading);
  markup_xml_close(&h->x);
}

void html_section_end(html *h) {
  markup_xml_close(&h->x);
}

void html_heading(html *h, const char *heading) {
  markup_xml_element(&h->x, h->grouped ? "h4" : "h3", NULL, heading);
}

void html_group(html *h, const char *heading) {
  h->grouped = true;
  markup_xml_element(&h->x, "h3", NULL, heading);
}

void html_paragraph(html *h, const char *words) {
  markup_xml_element(&h->x, "p", NULL, words);
}

void html_note(html *h, const char *css_class, const char *words) {
  markup_xml_element(&h->x, "p", css_class, words);
}

void html_line(html *h, const char *line) {
  markup_xml_open(&h->x, "p");
  markup_xml_attribute(&h->x, "class", "line");
  markup_xml_inline(&h->x, "code");
  markup_xml_text(&h->x, line);
  markup_xml_close(&h->x);
  markup_xml_close(&h->x);
}

void html_list(html *h, const char *const *item, int count) {
  if (count == 0) return;
  markup_xml_open(&h->x, "ul");
  for (int i = 0; i < count; i++) markup_xml_element(&h->x, "li", NULL, item[i]);
  markup_xml_close(&h->x);
}

void html_box(html *h, const char *css_class) {
  markup_xml_open(&h->x, "div");
  markup_xml_attribute(&h->x, "class", css_class);
}

void html_box_end(html *h) {
  markup_xml_close(&h->x);
}

text *html_picture(html *h, const char *css_class) {
  markup_xml_open(&h->x, "figure");
  markup_xml_attribute(&h->x, "class", css_class);
  if (text_equal(css_class, HTML_CHART)) markup_xml_attribute(&h->x, "tabindex", "0");
  return markup_xml_embed(&h->x);
}

void html_more(html *h, const char *summary) {
  markup_xml_open(&h->x, "details");
  markup_xml_element(&h->x, "summary", NULL, summary);
}

void html_more_end(html *h) {
  markup_xml_close(&h->x);
}

const char *html_picture_id(html *h) {
  return text_format(h->report->arena, "d%d", ++h->pictures);
}

void html_picture_end(html *h, const char *words) {
  if (words) markup_xml_element(&h->x, "figcaption", NULL, words);
  markup_xml_close(&h->x);
}

/* --- facts ----------------------------------------------------------------------------------- */

static void open_list(html *h, const char *css_class) {
  markup_xml_open(&h->x, "dl");
  markup_xml_attribute(&h->x, "class", css_class);
}

void html_figures(html *h) {
  open_list(h, "figures");
}

void html_figure(html *h, const char *label, const char *figure, const char *note) {
  markup_xml_open(&h->x, "div");
  markup_xml_element(&h->x, "dt", NULL, label);
  markup_xml_element(&h->x, "dd", NULL, figure);
  if (note) markup_xml_element(&h->x, "dd", "note", note);
  markup_xml_close(&h->x);
}

void html_figures_end(html *h) {
  markup_xml_close(&h->x);
}

void html_facts(html *h) {
  open_list(h, "facts");
}

static void put_fact(html *h, const char *label, const char *words, bool data) {
  markup_xml_open(&h->x, "div");
  markup_xml_element(&h->x, "dt", NULL, label);
  markup_xml_open(&h->x, "dd");
  if (data) markup_xml_attribute(&h->x, "dir", "auto");
  markup_xml_text(&h->x, words);
  markup_xml_close(&h->x);
  markup_xml_close(&h->x);
}

void html_fact(html *h, const char *label, const char *words) {
  put_fact(h, label, words, false);
}

void html_fact_data(html *h, const char *label, const char *words) {
  put_fact(h, label, words, true);
}

void html_facts_end(html *h) {
  markup_xml_close(&h->x);
}

/* --- tables ---------------------------------------------------------------------------------- */

static const char *class_of(html_kind kind) {
  switch (kind) {
  case HTML_FIGURE:
    return "n";
  case HTML_LINE:
    return "w";
  case HTML_ID:
  case HTML_CODE:
    return "i";
  case HTML_HEAD:
  case HTML_WORDS:
  case HTML_DATA:
    break;
  }
  return NULL;
}

static void put_column_head(html *h, const html_column *c) {
  markup_xml_open(&h->x, "th");
  markup_xml_attribute(&h->x, "scope", "col");
  markup_xml_attribute(&h->x, "class", class_of(c->kind));
  markup_xml_text(&h->x, c->head);
  markup_xml_close(&h->x);
}

void html_table_as(html *h, const char *css_class, const char *caption, const html_column *column,
                   int count) {
  const char *id = text_format(h->report->arena, "t%d", ++h->tables);
  h->columns = count;
  for (int i = 0; i < count; i++) h->kind[i] = column[i].kind;
  markup_xml_open(&h->x, "div");
  markup_xml_attribute(&h->x, "class", "scroll");
  markup_xml_attribute(&h->x, "role", "region");
  markup_xml_attribute(&h->x, "aria-labelledby", id);
  markup_xml_attribute(&h->x, "tabindex", "0");
  markup_xml_open(&h->x, "table");
  markup_xml_attribute(&h->x, "class", css_class);
  markup_xml_open(&h->x, "caption");
  markup_xml_attribute(&h->x, "id", id);
  markup_xml_text(&h->x, caption);
  markup_xml_close(&h->x);
  markup_xml_open(&h->x, "thead");
  markup_xml_open(&h->x, "tr");
  for (int i = 0; i < count; i++) put_column_head(h, &column[i]);
  markup_xml_close(&h->x);
  markup_xml_close(&h->x);
  markup_xml_open(&h->x, "tbody");
}

void html_table(html *h, const char *caption, const html_column *column, int count) {
  html_table_as(h, NULL, caption, column, count);
}

static void put_cell(html *h, html_kind kind, const char *words) {
  bool head = kind == HTML_HEAD || kind == HTML_ID;
  markup_xml_inline(&h->x, head ? "th" : "td");
  if (head) markup_xml_attribute(&h->x, "scope", "row");
  if (kind == HTML_DATA) markup_xml_attribute(&h->x, "dir", "auto");
  markup_xml_attribute(&h->x, "class", class_of(kind));
  markup_xml_text(&h->x, words ? words : "");
  markup_xml_close(&h->x);
}

void html_row_as(html *h, const char *css_class, const char *const *cell) {
  markup_xml_open(&h->x, "tr");
  markup_xml_attribute(&h->x, "class", css_class);
  for (int i = 0; i < h->columns; i++) put_cell(h, h->kind[i], cell[i]);
  markup_xml_close(&h->x);
}

void html_row(html *h, const char *const *cell) {
  html_row_as(h, NULL, cell);
}

void html_table_end(html *h) {
  markup_xml_close(&h->x);
  markup_xml_close(&h->x);
  markup_xml_close(&h->x);
}
