/* The look of the drawings. */
#include "report/section.h"

#include <string.h>

typedef struct shade {
  const char *name, *light, *dark;
} shade;

/* Shared with the page. */
static const shade page_shades[] = {
    {"paper", "#fcfbf8", "#14171a"},
    {"ink", "#1b1f24", "#e7e4dd"},
    {"soft", "#59606a", "#a5aab0"},
    {"rule", "#a8a396", "#5b6168"},
};

static const shade shades[] = {
    {"gypsum", "#efede7", "#3b4046"},      {"stipple", "#857f72", "#a3a8ad"},
    {"cement", "#d9dad8", "#4a4f52"},      {"panel", "#e2c697", "#66512f"},
    {"panel-grain", "#97713a", "#c9a468"}, {"fibreboard", "#dccbb4", "#574a3b"},
    {"limp", "#2f3138", "#c6c9ce"},        {"damping", "#7a4a86", "#c79ad2"},
    {"wood", "#f1dcb8", "#5a4526"},        {"wood-grain", "#8a6330", "#d0a565"},
    {"steel", "#34495e", "#a9c1d6"},       {"rail", "#d5dee6", "#2c3a46"},
    {"glass", "#fdf4d3", "#3a3420"},       {"glass-line", "#b48a1a", "#d3b04e"},
    {"stone", "#e6ebdd", "#2f3a2a"},       {"stone-line", "#5f7547", "#9fb884"},
    {"cellulose", "#e6e1da", "#37332e"},   {"cellulose-line", "#7a6c5a", "#b7a78f"},
    {"sealant", "#b3402f", "#e58472"},     {"rubber", "#4a4d54", "#8d9299"},
    {"hatch", "#8b8a85", "#7b8086"},
};

/* "@name" is the colour of that name. */
static const char *const rules[] = {
    ".cut text{font-family:system-ui,-apple-system,\"Segoe UI\",Roboto,\"Noto Sans\","
    "\"Liberation Sans\",sans-serif;font-size:12px;fill:@ink}",
    ".cut .cut-soft{fill:@soft}",
    ".cut .cut-dim{font-size:11px}",
    ".cut .cut-note{font-size:10.5px;fill:@soft}",
    ".cut .cut-side{font-size:13px}",
    ".cut .cut-head{font-size:12px;font-weight:600}",
    ".cut .cut-title{font-size:14px;font-weight:600}",
    ".cut .cut-name{font-weight:600}",
    ".cut .cut-room{unicode-bidi:isolate}",
    ".cut-small .cut-side{font-size:11.5px}",
    ".cut-paper{fill:@paper}",
    ".cut-edge{stroke:@ink;stroke-width:.9;fill:none}",
    ".cut-face{stroke:@ink;stroke-width:1.6;fill:none}",
    ".cut-layer{stroke:@ink;stroke-width:.8}",
    ".cut-thin{stroke:@soft;stroke-width:.7;fill:none}",
    ".cut-centre{stroke:@soft;stroke-width:.7;stroke-dasharray:9 2 2 2;fill:none}",
    ".cut-rule{stroke:@rule;stroke-width:.7}",
    ".cut-bar{fill:@soft}",
    ".cut-break{stroke:@ink;stroke-width:.8;fill:none}",
    ".cut-mask{fill:@paper;stroke:none}",
    ".cut-halo{stroke:@paper;stroke-width:3;fill:none;opacity:.75}",
    ".cut-leader{stroke:@ink;stroke-width:.7;fill:none}",
    ".cut-dot{fill:@ink;stroke:@paper;stroke-width:.6}",
    ".cut-tick{stroke:@ink;stroke-width:1.4}",
    ".cut-gypsum{fill:@gypsum}",
    ".cut-stipple{fill:@stipple}",
    ".cut-core{stroke:@damping;stroke-width:1;stroke-dasharray:5 2.5;fill:none}",
    ".cut-cement{fill:@cement}",
    ".cut-panel{fill:@panel}",
    ".cut-grain{stroke:@panel-grain;stroke-width:.7;fill:none}",
    ".cut-fibreboard{fill:@fibreboard}",
    ".cut-fleck{stroke:@panel-grain;stroke-width:.6;fill:none}",
    ".cut-limp{fill:@limp;stroke:@limp;stroke-width:1}",
    ".cut-damping{fill:@damping;stroke:@damping;stroke-width:1.1;stroke-dasharray:3 1.5}",
    ".cut-wood{fill:@wood;stroke:@ink;stroke-width:1}",
    ".cut-cross{stroke:@wood-grain;stroke-width:.8;fill:none}",
    ".cut-steel{stroke:@steel;stroke-width:1.9;stroke-linejoin:round;stroke-linecap:round;"
    "fill:none}",
    ".cut-rail{fill:@rail;stroke:@steel;stroke-width:.8}",
    ".cut-slot{stroke:@steel;stroke-width:.8;stroke-dasharray:7 5;fill:none}",
    ".cut-glass{fill:@glass}",
    ".cut-glass-line{stroke:@glass-line;stroke-width:1;fill:none}",
    ".cut-stone{fill:@stone}",
    ".cut-stone-line{stroke:@stone-line;stroke-width:1;fill:none}",
    ".cut-cellulose{fill:@cellulose}",
    ".cut-cellulose-line{stroke:@cellulose-line;stroke-width:.8;fill:none}",
    ".cut-sealant{fill:@sealant;stroke:@sealant;stroke-width:.6}",
    ".cut-rubber{fill:@rubber}",
    ".cut-hatch{stroke:@hatch;stroke-width:.8;fill:none}",
};

static const shade *find(const char *name, size_t length, const shade *list, size_t count) {
  for (size_t i = 0; i < count; i++)
    if (strlen(list[i].name) == length && strncmp(list[i].name, name, length) == 0) return &list[i];
  return NULL;
}

static const shade *shade_of(const char *name, size_t length) {
  const shade *found = find(name, length, shades, sizeof shades / sizeof shades[0]);
  return found ? found : find(name, length, page_shades, sizeof page_shades / sizeof *page_shades);
}

static size_t name_length(const char *name) {
  return strspn(name, "abcdefghijklmnopqrstuvwxyz-");
}

/* A declaration "property:@name", first with the plain colour where viewers may need it. */
static void put_declaration(text *out, const char *declaration, size_t length, bool plainly) {
  const char *at = memchr(declaration, '@', length);
  if (at == NULL) {
    text_putn(out, declaration, length);
    return;
  }
  size_t before = (size_t)(at - declaration), name = name_length(at + 1);
  if (plainly) {
    text_putn(out, declaration, before);
    text_put(out, shade_of(at + 1, name)->light);
    text_char(out, ';');
  }
  text_putn(out, declaration, before);
  text_put(out, "var(--");
  text_putn(out, at + 1, name);
  text_char(out, ')');
}

static void put_rule(text *out, const char *rule, bool plainly) {
  size_t selector = strcspn(rule, "{") + 1;
  text_putn(out, rule, selector);
  for (const char *s = rule + selector; *s != '\0';) {
    size_t length = strcspn(s, ";}");
    put_declaration(out, s, length, plainly);
    text_char(out, s[length]);
    s += length + 1;
  }
  text_char(out, '\n');
}

static void put_shades(text *out, const shade *list, size_t count, bool dark) {
  for (size_t i = 0; i < count; i++)
    text_putf(out, "--%s:%s;", list[i].name, dark ? list[i].dark : list[i].light);
}

static void put_root(text *out, bool dark, bool standalone) {
  text_put(out, ":root{");
  if (standalone) put_shades(out, page_shades, sizeof page_shades / sizeof *page_shades, dark);
  put_shades(out, shades, sizeof shades / sizeof shades[0], dark);
  text_put(out, "}");
}

void section_style(text *out, bool standalone) {
  put_root(out, false, standalone);
  text_put(out, "\n@media (prefers-color-scheme:dark){");
  put_root(out, true, standalone);
  text_put(out, "}\n@media print{");
  put_root(out, false, standalone);
  text_put(out, "}\n");
  for (size_t i = 0; i < sizeof rules / sizeof rules[0]; i++) put_rule(out, rules[i], standalone);
}
