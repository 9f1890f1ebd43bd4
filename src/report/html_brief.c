#include "report/html_wall.h"
#include "report/view_brief.h"

void html_brief(html *h, int climbs) {
  static const html_column columns[] = {
      {"Field", HTML_HEAD}, {"Value", HTML_DATA}, {"", HTML_CODE}};
  const report *r = h->report;
  view_brief *b = arena_alloc(r->arena, sizeof *b);
  view_brief_of(r, climbs, b);
  html_section(h, "The brief as understood");
  if (!r->asked)
    html_paragraph(h, "No brief was given: cost and height are those of a reference wall, and "
                      "everything else is as in a brief that says nothing.");
  html_table(h, "Every field that is in force", columns, HTML_COUNT(columns));
  for (int i = 0; i < b->count; i++) {
    const view_field *f = &b->field[i];
    html_row(h, HTML_CELLS(f->name, f->value, f->usual ? "default" : NULL));
  }
  html_table_end(h);
  html_section_end(h);
}
