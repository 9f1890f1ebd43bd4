/* What a page says about a wall, in parts that pages share. Facts are those of rating/1. */
#ifndef REPORT_HTML_WALL_H
#define REPORT_HTML_WALL_H

#include "report/html.h"

/* A key and a value of a table literal. */
#define HTML_CELLS(...)   ((const char *const[]){__VA_ARGS__})
#define HTML_COUNT(array) ((int)(sizeof(array) / sizeof(array)[0]))

/* The figures that answer at one glance: rating, cost, thickness, mass, fire, height. */
void html_wall_figures(html *h, const assessment *x);
/* The section through the wall, drawn. `compact`: the plan alone, for a card; else in full, and
 * where the page is narrow the plan alone. */
void html_wall_drawing(html *h, const assessment *x, bool compact);
/* Sections of their own. */
void html_wall_parts(html *h, const assessment *x);
void html_wall_sound(html *h, const assessment *x);
void html_wall_checks(html *h, const assessment *x);
void html_wall_cost(html *h, const assessment *x);
void html_wall_takeoff(html *h, const assessment *x);

/* What stands in these sections, for pages of several walls. */
void html_sound_parts(html *h, const assessment *x);
void html_check_parts(html *h, const assessment *x);
void html_cost_parts(html *h, const assessment *x);
/* The same in brief, for pages of many walls: sound, fire, height, what it breaks. */
void html_brief_sheet(html *h, const assessment *x);

/* Parts of sections. */
/* Money by section of the specification, material and labour apart. */
void html_cost_by_section(html *h, const assessment *x);
/* The lines of the takeoff. */
void html_takeoff_table(html *h, const char *caption, const assessment *x);
/* Ratings of every metric, where they come from, and what else they would be. */
void html_ratings_table(html *h, const assessment *x);
/* The curve of transmission loss, and its figures. */
void html_curve(html *h, const assessment *x);
void html_bands(html *h, const assessment *x);
/* Published walls beside it. */
void html_evidence(html *h, const assessment *x);
/* The rules it breaks; nothing without. */
void html_broken(html *h, const char *caption, const assessment *x);

/* "typex-16 | ...: STC 47, ..." in words where `x` cannot be costed. */
const char *html_cost_words(html *h, const assessment *x);
/* "60 min", "not shown" */
const char *html_fire_words(html *h, const assessment *x);
/* "30 ft 0 in x 9 ft 0 in" */
const char *html_size_words(html *h);
const char *html_thickness(html *h, double metres);
const char *html_height(html *h, double metres);
const char *html_mass(html *h, double kg_m2);

/* Sections at the end of every page of a wall. */
/* `climbs` as in view_brief_of. */
void html_brief(html *h, int climbs);
void html_cautions(html *h, const char *const *caution, int count);
/* Ways to carry heavy fixtures over a stretch, as a section; nothing where the brief names none. */
void html_fixtures(html *h);
/* What the price does not hold under a brief, as a section. */
void html_exclusions(html *h, const brief *b);
void html_wall_cautions(html *h, const assessment *x);
/* Codes that the price book has no price for; nothing when it has all. */
void html_unpriced(html *h);

/* Walls to compare with; `fails`: with the rules that they break. Nothing without walls. */
void html_others(html *h, const char *caption, assessment *const *x, int count, bool fails);
/* What giving up each rule would save; `base` is the line that it is counted against. */
void html_rule_prices(html *h, const char *caption, const explain_rule_price *price, int count,
                      const char *base);
/* Between which prices the wall stays the cheapest. */
void html_break_even(html *h, const explain_break_even *b, int count);
/* Sets of rules that no wall keeps together, as a list. */
void html_conflicts(html *h, const rule_mask *conflict, int count);
/* "target and fire" */
const char *html_rules(html *h, rule_mask mask);

#endif
