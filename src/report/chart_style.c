/* The look of charts; sizes of letters come from chart.c, so that what is measured is what is
 * drawn. No < > & in here (markup.h). */
#include "report/chart.h"

static const char lines[] =
    ".plot{overflow:hidden}\n"
    ".c-grid{stroke:var(--hair);stroke-width:1}\n"
    ".c-axis{stroke:var(--rule);stroke-width:1}\n"
    ".c-lead{fill:none;stroke:var(--rule);stroke-width:.75}\n"
    ".c-curve{fill:none;stroke:var(--key);stroke-width:2.2;stroke-linejoin:round}\n"
    ".c-contour{fill:none;stroke:var(--warm);stroke-width:1.6;stroke-dasharray:7 3}\n"
    ".c-proof{fill:none;stroke:var(--good);stroke-width:1.6;stroke-dasharray:2 2.5}\n"
    ".c-joint{fill:none;stroke:var(--ink);stroke-width:1.6;stroke-dasharray:9 3 2 3}\n"
    ".c-path,.c-path2,.c-path3{fill:none;stroke:var(--soft);stroke-width:1}\n"
    ".c-path2{stroke-dasharray:4 2}\n"
    ".c-path3{stroke-dasharray:1.5 2}\n"
    ".c-limit{fill:none;stroke:var(--ink);stroke-width:1.2;stroke-dasharray:5 3}\n"
    ".c-step{fill:none;stroke:var(--key);stroke-width:2}\n"
    ".c-hull{fill:none;stroke:var(--warm);stroke-width:1.4;stroke-dasharray:6 3}\n"
    ".c-hatch{fill:none;stroke:var(--ink);stroke-width:1;stroke-opacity:.55}\n";

static const char areas[] = ".c-band{fill:var(--key);fill-opacity:.14}\n"
                            ".c-lack{fill:var(--warm);fill-opacity:.28}\n"
                            ".c-zone{fill:var(--wash)}\n"
                            ".c-one{fill:var(--key)}\n"
                            ".c-two{fill:var(--wash);stroke:var(--key);stroke-width:1}\n"
                            ".c-three{fill:var(--rule)}\n"
                            ".c-four{fill:var(--warm);fill-opacity:.45}\n"
                            ".c-cloud{fill:var(--key);fill-opacity:.4}\n"
                            ".c-full{fill:var(--key);stroke:var(--paper);stroke-width:1}\n"
                            ".c-open{fill:var(--paper);stroke:var(--key);stroke-width:1.5}\n"
                            ".c-best{fill:var(--warm);stroke:var(--paper);stroke-width:1.2}\n"
                            ".c-other{fill:var(--paper);stroke:var(--ink);stroke-width:1.4}\n"
                            ".c-fail{fill:none;stroke:var(--bad);stroke-width:1.6}\n";

/* Paper around letters, so that they can be read on lines and points. */
static const char halo[] =
    ";paint-order:stroke;stroke:var(--paper);stroke-width:3px;stroke-linejoin:round";

void chart_style(text *out) {
  text_put(out, lines);
  text_put(out, areas);
  for (int i = 0; i < CHART_LETTERS; i++) {
    const chart_lettering *l = &chart_letters[i];
    text_putf(out, ".%s{font-size:", l->css_class);
    text_number(out, l->size, 1);
    text_putf(out, "px;font-weight:%d;fill:var(--%s)%s}\n", l->bold ? 700 : 400,
              i == CHART_INSIDE  ? "paper"
              : i == CHART_SMALL ? "soft"
                                 : "ink",
              i == CHART_INSIDE ? "" : halo);
  }
}
