/* The page of `rate`. */
#include "report/html_wall.h"
#include "report/report_html.h"

static void put_glance(html *h, const assessment *x) {
  const report *r = h->report;
  html_section(h, "At a glance");
  html_line(h, x->line);
  if (r->asked && x->broken_count == 0)
    html_note(h, "good", "The wall keeps every rule of the brief.");
  else if (r->asked)
    html_note(h, "bad",
              text_format(r->arena, "The wall does not keep every rule of the brief: %s.",
                          html_rules(h, x->broken)));
  html_wall_figures(h, x);
  html_wall_drawing(h, x, false);
  html_section_end(h);
}

void report_rate_html(const report *r, const assessment *x, text *out) {
  html *h = arena_alloc(r->arena, sizeof *h);
  const char *title = x->name ? x->name : r->asked ? r->brief->title : "";
  html_begin(h, r, "Wall rating", title, out);
  put_glance(h, x);
  html_wall_parts(h, x);
  html_wall_sound(h, x);
  html_wall_checks(h, x);
  html_fixtures(h);
  html_wall_cost(h, x);
  html_wall_takeoff(h, x);
  html_brief(h, CATALOG_NONE);
  html_wall_cautions(h, x);
  html_end_brief(h);
}
