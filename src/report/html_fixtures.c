/* Heavy fixtures over a stretch of a side: the ways to build it. */
#include "report/fixtures.h"
#include "report/html_wall.h"

static void put_choice(html *h, const fastening_choice *c) {
  const report *r = h->report;
  const html_column columns[] = {{"Way", HTML_HEAD},
                                 {"Wall", HTML_LINE},
                                 {"Over the stretch", HTML_LINE},
                                 {"Cost and rating", HTML_WORDS}};
  html_table(h, fixtures_intro(r, c), columns, HTML_COUNT(columns));
  for (int way = 0; way < FASTENING_WAYS; way++) {
    const fastening_option *o = &c->way[way];
    html_row(h, HTML_CELLS(fixtures_way(way), o->wall ? o->wall->line : NULL,
                           o->stretch ? o->stretch->line : NULL,
                           o->wall ? fixtures_figures(r, c, o)
                                   : "No wall that keeps the other rules."));
  }
  html_table_end(h);
}

void html_fixtures(html *h) {
  const report *r = h->report;
  if (r->fastening_count == 0) return;
  html_section(h, "Heavy fixtures over a stretch");
  for (int i = 0; i < r->fastening_count; i++) put_choice(h, &r->fastening[i]);
  html_paragraph(h, fixtures_furring());
  html_section_end(h);
}
