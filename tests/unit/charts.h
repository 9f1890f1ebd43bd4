/* The demo's briefs answered as the commands do, for the tests of charts; and a written chart taken
 * apart again. */
#ifndef TESTS_CHARTS_H
#define TESTS_CHARTS_H

#include <check.h>
#include <setjmp.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "explain/cloud.h"
#include "explain/ladder.h"
#include "explain/trim.h"
#include "input/json.h"
#include "report/chart.h"
#include "report/report.h"
#include "wall/line.h"

#define EXAMPLES TEST_ROOT "/docs/examples/"

/* ---- the demo ---- */

typedef struct demo {
  arena *memory;
  jmp_buf out_of_memory;
  diag_list faults;
  const catalog *catalog;
  const price_book *prices;
  brief brief;
  judge_context context;
  report report;
} demo;

static demo shop;

/* The brief of the demo by its file's name; NULL: nobody asked for anything. */
static inline void ask(const char *file) {
  job_defaults(&shop.brief);
  if (file) {
    const json_value *root =
        json_load(shop.memory, &shop.faults, text_format(shop.memory, EXAMPLES "%s.json", file));
    ck_assert_ptr_nonnull(root);
    ck_assert(job_read(shop.memory, &shop.faults, shop.catalog, root, false, &shop.brief));
  }
  shop.context = (judge_context){shop.catalog, shop.prices, &shop.brief};
  shop.report = (report){.arena = shop.memory,
                         .catalog = shop.catalog,
                         .prices = shop.prices,
                         .brief = &shop.brief,
                         .asked = file != NULL,
                         .units = shop.brief.units};
}

static inline void open_demo(void) {
  memset(&shop, 0, sizeof shop);
  shop.memory = arena_create(0, &shop.out_of_memory);
  ck_assert_ptr_nonnull(shop.memory);
  diag_init(&shop.faults, shop.memory);
  shop.catalog = catalog_load(shop.memory, &shop.faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(shop.catalog);
  shop.prices =
      prices_load(shop.memory, &shop.faults, shop.catalog, TEST_ROOT "/prices/kestrel-yard.json");
  ck_assert_ptr_nonnull(shop.prices);
  ask(NULL);
}

static inline void close_demo(void) {
  arena_free(shop.memory);
}

static inline assessment *rate(const char *line) {
  wall w = wall_empty();
  assessment *x = arena_alloc(shop.memory, sizeof *x);
  ck_assert_msg(line_parse(shop.memory, &shop.faults, shop.catalog, line, &w), "%s", line);
  judge_wall(shop.memory, &shop.context, &w, x);
  return x;
}

/* What `pick` finds, and the cloud around it. */
static inline explanation *pick(cloud *around) {
  space *s = arena_alloc(shop.memory, sizeof *s);
  sweep_result *swept = arena_alloc(shop.memory, sizeof *swept);
  explanation *why = arena_alloc(shop.memory, sizeof *why);
  pick_choice choice;
  space_build(shop.memory, &shop.context, s);
  sweep_run(shop.memory, s, swept);
  ck_assert(model_choose(shop.memory, &shop.faults, s, swept, 0, NULL, &choice));
  explain_pick(shop.memory, s, swept, &choice, why);
  cloud_sample(shop.memory, s, swept, CLOUD_MOST, around);
  return why;
}

static inline ladder_answer *climb(const char *have) {
  space *s = arena_alloc(shop.memory, sizeof *s);
  rungs *found = arena_alloc(shop.memory, sizeof *found);
  ladder_answer *answer = arena_alloc(shop.memory, sizeof *answer);
  ladder_terms terms = {.climbs = ladder_target(&shop.brief, METRIC_COUNT)};
  if (have) {
    assessment *x = rate(have);
    terms.have_reaches = rungs_reached(&shop.context, terms.climbs, &x->wall);
    terms.have = x;
  }
  space_build(shop.memory, &shop.context, s);
  rungs_find(shop.memory, s, terms.climbs, found);
  ladder_explain(shop.memory, s, found, &terms, answer);
  return answer;
}

static inline trim_answer *trim(const char *line) {
  space *s = arena_alloc(shop.memory, sizeof *s);
  sweep_result *swept = arena_alloc(shop.memory, sizeof *swept);
  trim_answer *found = arena_alloc(shop.memory, sizeof *found);
  trim_terms terms = {.count = TRIM_DEFAULT_COUNT};
  wall w = wall_empty();
  ck_assert(line_parse(shop.memory, &shop.faults, shop.catalog, line, &w));
  trim_hold_to(shop.memory, &shop.context, &w, &terms, &shop.brief);
  assessment *specified = rate(line);
  space_build(shop.memory, &shop.context, s);
  sweep_run(shop.memory, s, swept);
  trim_explain(shop.memory, s, swept, specified, &terms, found);
  return found;
}

/* ---- what may come ---- */

static uint32_t dice_state;
static inline unsigned dice(unsigned below) {
  dice_state = dice_state * 1664525u + 1013904223u;
  return (dice_state >> 8) % below;
}

static const char *const awkward[] = {
    "",
    "x",
    "<script>alert(1)</script>",
    "a \"name\" & 'another'",
    "\xD7\xA7\xD7\x99\xD7\xA8 \xD7\x92\xD7\x91\xD7\xA1",
    "WWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWWW"
    "WWWWWW",
    "a name of many words that goes on and on until it has passed one hundred letters and still "
    "goes on",
    "\xFF\xFE broken bytes \x01",
};
enum { AWKWARD = sizeof awkward / sizeof awkward[0] };

static inline long long awkward_cents(void) {
  static const long long size[] = {
      0, 1, 99, 12345, 9999999, 123456789012LL, 900000000000000000LL / 8};
  long long most = size[dice(7)];
  return most == 0 ? 0 : most - (long long)dice(7) * (most / 10);
}

/* ---- a chart taken apart ---- */

enum { PIECES_MOST = 4000, WORDS_MOST = 600 };

typedef struct words {
  char value[WORDS_MOST]; /* entities resolved */
  chart_box box;
  double x, y;
} words;

typedef struct picture_parts {
  double width, height;
  words *text;
  int texts;
} picture_parts;

static inline double attribute_of(const char *tag, const char *end, const char *name, bool *found) {
  const char *key = text_format(shop.memory, " %s=\"", name);
  const char *at = strstr(tag, key);
  if (found) *found = at && at < end;
  return at && at < end ? strtod(at + strlen(key), NULL) : 0;
}

static inline bool has_word(const char *tag, const char *end, const char *word) {
  const char *at = strstr(tag, word);
  return at && at < end;
}

/* The letter of a text's class; every text must have one. */
static inline chart_letter letter_of(const char *tag, const char *end) {
  for (int i = 0; i < CHART_LETTERS; i++)
    if (has_word(tag, end, text_format(shop.memory, "class=\"%s\"", chart_letters[i].css_class)))
      return (chart_letter)i;
  ck_abort_msg("text without lettering: %.*s", (int)(end - tag), tag);
  return CHART_PLAIN;
}

static inline void resolve(const char *from, const char *end, char *out) {
  static const struct {
    const char *entity;
    char is;
  } entities[] = {{"&amp;", '&'}, {"&lt;", '<'}, {"&gt;", '>'}, {"&quot;", '"'}, {"&#39;", '\''}};
  size_t n = 0;
  while (from < end) {
    ck_assert_uint_lt(n + 1, WORDS_MOST);
    size_t step = 1;
    char is = *from;
    for (size_t i = 0; i < sizeof entities / sizeof entities[0]; i++) {
      if (strncmp(from, entities[i].entity, strlen(entities[i].entity)) != 0) continue;
      step = strlen(entities[i].entity);
      is = entities[i].is;
    }
    out[n++] = is;
    from += step;
  }
  out[n] = '\0';
}

static inline picture_parts take_apart(const char *drawn) {
  picture_parts p = {0};
  const char *box = strstr(drawn, "viewBox=\"0 0 ");
  ck_assert_ptr_nonnull(box);
  char *rest;
  p.width = strtod(box + strlen("viewBox=\"0 0 "), &rest);
  p.height = strtod(rest, NULL);
  p.text = arena_array(shop.memory, PIECES_MOST, sizeof *p.text);
  for (const char *at = drawn; (at = strstr(at, "<text")) != NULL;) {
    const char *tag_end = strchr(at, '>'), *end = strstr(at, "</text>");
    ck_assert(tag_end && end && p.texts < PIECES_MOST);
    words *w = &p.text[p.texts++];
    w->x = attribute_of(at, tag_end, "x", NULL);
    w->y = attribute_of(at, tag_end, "y", NULL);
    svg_anchor anchor = has_word(at, tag_end, "\"middle\"") ? SVG_MIDDLE
                        : has_word(at, tag_end, "\"end\"")  ? SVG_END
                                                            : SVG_START;
    resolve(tag_end + 1, end, w->value);
    w->box = chart_text_box(w->x, w->y, anchor, letter_of(at, tag_end), w->value);
    at = end;
  }
  return p;
}

static const double rounding_px = 0.02; /* places are written to 0.01 */

/* All text within the picture, none on another. `what` names the case. */
static inline void check_layout(const char *drawn, const char *what) {
  picture_parts p = take_apart(drawn);
  for (int i = 0; i < p.texts; i++) {
    const chart_box *a = &p.text[i].box;
    ck_assert_msg(a->x >= -rounding_px && a->y >= -rounding_px &&
                      a->x + a->width <= p.width + rounding_px &&
                      a->y + a->height <= p.height + rounding_px,
                  "%s: \"%s\" leaves the picture", what, p.text[i].value);
    for (int k = 0; k < i; k++) {
      const chart_box *b = &p.text[k].box;
      bool apart = a->x + a->width <= b->x + rounding_px || b->x + b->width <= a->x + rounding_px ||
                   a->y + a->height <= b->y + rounding_px || b->y + b->height <= a->y + rounding_px;
      ck_assert_msg(apart, "%s: \"%s\" stands on \"%s\"", what, p.text[i].value, p.text[k].value);
    }
  }
}

/* ---- well-formed ---- */

static inline bool name_letter(char c) {
  return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || c == '-' ||
         c == ':';
}

/* After an ampersand: an entity of XML or a number. */
static inline bool is_entity(const char *p) {
  static const char *const known[] = {"amp;", "lt;", "gt;", "quot;", "apos;", "#"};
  for (size_t i = 0; i < sizeof known / sizeof known[0]; i++)
    if (strncmp(p, known[i], strlen(known[i])) == 0) return true;
  return false;
}

/* Attributes up to the end of a tag: name="value", values without < and bare &. */
static inline const char *check_attributes(const char *p) {
  while (*p == ' ') {
    p++;
    if (*p == '/' || *p == '>') break;
    ck_assert_msg(name_letter(*p), "attribute: %.40s", p);
    while (name_letter(*p)) p++;
    ck_assert_msg(p[0] == '=' && p[1] == '"', "attribute: %.40s", p);
    for (p += 2; *p != '"'; p++)
      ck_assert_msg(*p && *p != '<' && (*p != '&' || is_entity(p + 1)), "value: %.40s", p);
    p++;
  }
  return p;
}

/* XML by its grammar as far as charts use it, and no number that is none. The golden charts are
 * read by a parser of its own besides (tests/golden/check_charts.sh). */
static inline void check_well_formed(const char *drawn) {
  enum { DEEP = 40 };
  const char *open[DEEP];
  size_t length[DEEP];
  int depth = 0;
  for (const char *p = drawn; *p;) {
    ck_assert_msg((unsigned char)*p >= 0x20 || *p == '\n', "control character");
    if (*p == '&') ck_assert_msg(is_entity(p + 1), "entity: %.40s", p);
    ck_assert_msg(*p != '>', "bare >: %.40s", p);
    if (*p++ != '<') continue;
    bool closing = *p == '/';
    if (closing) p++;
    const char *name = p;
    while (name_letter(*p)) p++;
    size_t n = (size_t)(p - name);
    ck_assert_msg(n > 0, "tag: %.40s", p);
    if (closing) {
      ck_assert_msg(depth > 0 && length[depth - 1] == n && !strncmp(open[depth - 1], name, n),
                    "closes what is not open: %.40s", name);
      depth--;
    } else {
      p = check_attributes(p);
      if (*p == '/')
        p++;
      else {
        ck_assert_int_lt(depth, DEEP);
        open[depth] = name;
        length[depth++] = n;
      }
    }
    ck_assert_msg(*p == '>', "tag end: %.40s", p);
    p++;
  }
  ck_assert_int_eq(depth, 0);
  ck_assert_ptr_null(strstr(drawn, "nan"));
  ck_assert_ptr_null(strstr(drawn, "=\"inf"));
}

static inline text *new_picture(void) {
  enum { MOST = 4 << 20 };
  text *out = arena_alloc(shop.memory, sizeof *out);
  text_init(out, shop.memory, MOST);
  return out;
}

#endif
