/* Pages that stand alone: one file, no script, nothing fetched, read by a browser and as XML alike.
 * Here are the shell of a page and its parts (sections, tables, lists of facts); what a page says
 * is put together in html_*.c. All text goes through markup.h. */
#ifndef REPORT_HTML_H
#define REPORT_HTML_H

#include "report/markup.h"
#include "report/report.h"

typedef enum html_kind {
  HTML_HEAD,   /* what the row is about: its header */
  HTML_ID,     /* the same, where it is one word that must not break */
  HTML_WORDS,  /* running text */
  HTML_CODE,   /* one word, or more that must not break */
  HTML_DATA,   /* words of the user's files: they may run from right to left */
  HTML_FIGURE, /* a number, to the right */
  HTML_LINE    /* a wall line */
} html_kind;

typedef struct html_column {
  const char *head;
  html_kind kind;
} html_column;

enum { HTML_MAX_COLUMNS = 24 };

typedef struct html {
  const report *report;
  markup_xml x;
  int sections; /* so far; also numbers the ids */
  bool grouped; /* headings stand one level lower */
  int tables;
  int columns; /* of the open table */
  html_kind kind[HTML_MAX_COLUMNS];
  int pictures; /* drawings and charts so far: their ids must differ */
} html;

/* Starts a page: head, style, and the header with what it is (`kind`) and whose (`title`, text of
 * the user; "" or NULL: the kind alone). Sections follow. */
void html_begin(html *h, const report *r, const char *kind, const char *title, text *out);
/* Ends it with what it rests on: the program, the price book (r->prices may be NULL), and the files
 * that were read, each with the CRC-32 of its bytes, so that a filed page tells their editions.
 * `asked` are those besides catalogs and price books: brief, or project and schedule. */
typedef struct html_file {
  const char *path; /* its name is shown without the folder; NULL: no file */
  uint32_t crc;
} html_file;
void html_end(html *h, const html_file *asked, int count);
/* The end of a page for one brief. */
void html_end_brief(html *h);

/* A numbered section with its heading; not one in another. */
void html_section(html *h, const char *heading);
void html_section_end(html *h);
/* A heading within a section, or within a group of it. */
void html_heading(html *h, const char *heading);
/* A part of a section with headings of its own, until the next group or the end of the section. */
void html_group(html *h, const char *heading);
void html_paragraph(html *h, const char *words);
/* As html_paragraph with a class of the style sheet. */
void html_note(html *h, const char *css_class, const char *words);
/* A wall line on a line of its own. */
void html_line(html *h, const char *line);
void html_list(html *h, const char *const *item, int count);

/* Key figures: large, each under its label, with a few words below (NULL: none). */
void html_figures(html *h);
void html_figure(html *h, const char *label, const char *figure, const char *note);
void html_figures_end(html *h);

/* Label and words, one under another. */
void html_facts(html *h);
void html_fact(html *h, const char *label, const char *words);
/* Words of the user's files. */
void html_fact_data(html *h, const char *label, const char *words);
void html_facts_end(html *h);

/* A table; it scrolls by itself where the page is narrower. */
void html_table(html *h, const char *caption, const html_column *column, int count);
void html_table_as(html *h, const char *css_class, const char *caption, const html_column *column,
                   int count);
/* As many cells as the table has columns; NULL: an empty one. */
void html_row(html *h, const char *const *cell);
void html_row_as(html *h, const char *css_class, const char *const *cell);
void html_table_end(html *h);

/* A box of a class of the style sheet. */
void html_box(html *h, const char *css_class);
void html_box_end(html *h);
/* What is seen only when asked for. */
void html_more(html *h, const char *summary);
void html_more_end(html *h);
/* The class of charts: they scroll by themselves where the page is narrower. */
#define HTML_CHART "chart"
/* A picture with words under it: between these two goes one <svg>, written to what the first hands
 * out. */
text *html_picture(html *h, const char *css_class);
/* Begins the ids of one picture: no other of the page has it. */
const char *html_picture_id(html *h);
void html_picture_end(html *h, const char *words);

/* Adds the style sheet of every page. */
void html_style(text *out);

#endif
