/* Parts of the page of `plan`. */
#ifndef REPORT_HTML_PLAN_H
#define REPORT_HTML_PLAN_H

#include "report/html_wall.h"
#include "report/view_plan.h"

/* "8,212 ft" of run; "1,234.5 ft2" */
const char *html_run(html *h, double metres);
const char *html_area(html *h, double m2);
/* The name of a storey; "(none named)" */
const char *html_storey(const char *name);

/* Sections: types one by one; which wall gets which; what was asked. */
void html_plan_types(html *h, const plan_answer *p);
void html_plan_schedule(html *h, const plan_answer *p);
void html_plan_classes(html *h, const plan_answer *p);
void html_plan_unplanned(html *h, const plan_answer *p);

/* How many types, storeys, sections, goods, the drawings. Each nothing where there is nothing. */
void html_plan_curve(html *h, const plan_answer *p);
void html_plan_storeys(html *h, const plan_answer *p);
void html_plan_sections(html *h, const plan_answer *p);
void html_plan_buy(html *h, const plan_answer *p);
void html_plan_drawings(html *h, const plan_answer *p);

#endif
