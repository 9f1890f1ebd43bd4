/* The wall drawn to scale: a plan cut through its bays beside the structure it abuts, a cut at the
 * floor, the names and thicknesses of its parts, and a legend. All from the wall's own data.
 *
 * Conventions, after common drafting practice: what is cut has a firm outline; wood across the
 * grain is crossed; gypsum is stippled; fibre is a looping line, as thick as the batt; sheet steel
 * is a thick line; what lies beyond the cut is thin. Rails of a mount run along the wall, so the
 * plan shows them from above and the cut at the floor shows their shape. */
#ifndef REPORT_SECTION_H
#define REPORT_SECTION_H

#include "report/report.h"

typedef struct section_options {
  const char *prefix;  /* begins the ids of the drawing: unique on its page, letters first */
  const char *caption; /* written above; NULL: none */
  bool compact;        /* plan and outer dimensions alone, for a card: 320 units wide, else 820 */
  bool standalone;     /* a file of its own, with section_style() in it */
} section_options;

/* Lettering is 10.5 to 14 units: below a width of some 500 px the full drawing is hard to read, and
 * a page does better to show the compact one there.
 *
 * One <svg> of class "cut". The wall can be built (compat.h); rooms are the brief's, lengths in
 * r->units. */
void section_draw(const report *r, const wall *w, const section_options *o, text *out);

/* The style sheet of the drawings, once a page. Light and dark are told apart by custom properties:
 * of the page it needs --paper, --ink, --soft, --rule, which it sets itself only when `standalone`;
 * its own are --gypsum --stipple --cement --panel --panel-grain --fibreboard --limp --damping
 * --wood
 * --wood-grain --steel --rail --glass --glass-line --stone --stone-line --cellulose
 * --cellulose-line --sealant --rubber --hatch. Standing alone it also gives every colour plainly,
 * for viewers that know no custom properties. */
void section_style(text *out, bool standalone);

#endif
