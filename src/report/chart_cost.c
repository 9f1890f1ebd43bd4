#include "report/chart_cost.h"

#include <string.h>

#include "report/view.h"

/* A wide blank that is not drawn together with others. */
#define APART "\xE2\x80\x83"

/* ---- sections of a takeoff ---- */

enum { MOST_SECTIONS = COST_MAX_LINES };

typedef struct section_sum {
  const char *name; /* "09 29 00"; the markup's name without section */
  bool markup;
  long long kind[LINE_MARKUP + 1];
  int items;
  const char *dearest; /* item */
  long long dearest_cents;
} section_sum;

typedef struct section_sums {
  int count;
  section_sum at[MOST_SECTIONS]; /* by section number; markups last, in their own order */
} section_sums;

static bool comes_before(const cost_line *l, const section_sum *s) {
  bool markup = l->kind == LINE_MARKUP;
  if (markup || s->markup) return !markup && s->markup;
  return strcmp(l->section, s->name) < 0;
}

static section_sum *section_for(section_sums *s, const cost_line *l) {
  bool markup = l->kind == LINE_MARKUP;
  const char *name = markup ? l->name : l->section;
  int at = 0;
  for (; at < s->count; at++) {
    if (s->at[at].markup == markup && strcmp(s->at[at].name, name) == 0) return &s->at[at];
    if (comes_before(l, &s->at[at])) break;
  }
  memmove(&s->at[at + 1], &s->at[at], (size_t)(s->count - at) * sizeof s->at[0]);
  s->count++;
  s->at[at] = (section_sum){.name = name, .markup = markup};
  return &s->at[at];
}

/* Material and labour of an item stand on lines of their own. */
static long long item_cents(const takeoff *t, const cost_line *l) {
  long long sum = 0;
  for (int i = 0; i < t->count; i++)
    if (t->line[i].item == l->item && t->line[i].kind != LINE_MARKUP) sum += t->line[i].cents;
  return sum;
}

static bool is_first_of_item(const takeoff *t, int line) {
  for (int i = 0; i < line; i++)
    if (t->line[i].item == t->line[line].item) return false;
  return true;
}

static void sum_sections(const report *r, const assessment *x, section_sums *out) {
  out->count = 0;
  if (!r->prices || !x || x->takeoff.missing) return;
  const takeoff *t = &x->takeoff;
  for (int i = 0; i < t->count; i++) {
    const cost_line *l = &t->line[i];
    section_sum *s = section_for(out, l);
    s->kind[l->kind] += l->cents;
    if (l->kind == LINE_MARKUP || !is_first_of_item(t, i)) continue;
    s->items++;
    long long cents = item_cents(t, l);
    if (s->dearest && cents <= s->dearest_cents) continue;
    s->dearest = l->name;
    s->dearest_cents = cents;
  }
}

static const char *section_label(const report *r, const section_sum *s) {
  if (s->markup) return s->name;
  if (s->items < 2) return text_format(r->arena, "%s" APART "%s", s->name, s->dearest);
  return text_format(r->arena, "%s" APART "%s and %d more", s->name, s->dearest, s->items - 1);
}

/* ---- cost by section ---- */

static chart_bars cost_bars(const report *r, const assessment *x) {
  section_sums *sums = arena_alloc(r->arena, sizeof *sums);
  sum_sections(r, x, sums);
  chart_bar *bar = arena_array(r->arena, (size_t)sums->count, sizeof *bar);
  for (int i = 0; i < sums->count; i++) {
    bar[i].label = section_label(r, &sums->at[i]);
    for (int k = 0; k <= LINE_MARKUP; k++) bar[i].cents[k] = sums->at[i].kind[k];
  }
  view_cost v = view_cost_of(r, x);
  const char *total = view_money(r, (double)x->cost.total_cents / 100, NULL);
  const char *lead = "The wall cannot be costed.";
  if (sums->count > 0)
    lead = text_format(r->arena, "The wall costs %s, %s, by section number:", total,
                       view_money(r, r->units == UNITS_US ? v.per_ft2 : v.per_m2,
                                  r->units == UNITS_US ? "ft2" : "m2"));
  return (chart_bars){.title = "Cost by section",
                      .lead = lead,
                      .parts = LINE_MARKUP + 1,
                      .part_name = {"material", "labour", "tax and markups"},
                      .shares = true,
                      .bar = bar,
                      .count = sums->count};
}

const char *chart_cost_words(const report *r, const assessment *x) {
  chart_bars b = cost_bars(r, x);
  return chart_bars_words(r, &b);
}

void chart_cost(const report *r, const char *id, const assessment *x, text *out) {
  chart_bars b = cost_bars(r, x);
  chart_bars_draw(r, id, &b, out);
}

/* ---- savings ---- */

static chart_bars savings_bars(const report *r, const trim_answer *t) {
  chart_bar *bar = arena_array(r->arena, (size_t)t->proposal_count, sizeof *bar);
  for (int i = 0; i < t->proposal_count; i++) {
    const trim_proposal *p = &t->proposal[i];
    bar[i].label = text_format(r->arena, "%d" APART "%s", i + 1, p->wall->line);
    bar[i].cents[0] = p->saving_cents;
  }
  return (chart_bars){.title = "What each wall saves",
                      .lead = r->brief->floor_area_value_per_m2 > 0
                                  ? "What each wall saves against the specified one, the value of "
                                    "the floor under it included:"
                                  : "What each wall saves against the specified one:",
                      .parts = 1,
                      .part_name = {"saving"},
                      .bar = bar,
                      .count = t->proposal_count};
}

const char *chart_savings_words(const report *r, const trim_answer *t) {
  chart_bars b = savings_bars(r, t);
  return chart_bars_words(r, &b);
}

void chart_savings(const report *r, const char *id, const trim_answer *t, text *out) {
  chart_bars b = savings_bars(r, t);
  chart_bars_draw(r, id, &b, out);
}

/* ---- before and after ---- */

static const section_sum *find_section(const section_sums *s, const section_sum *like) {
  for (int i = 0; i < s->count; i++)
    if (s->at[i].markup == like->markup && strcmp(s->at[i].name, like->name) == 0) return &s->at[i];
  return NULL;
}

static long long section_cents(const section_sum *s) {
  long long sum = 0;
  for (int k = 0; s && k <= LINE_MARKUP; k++) sum += s->kind[k];
  return sum;
}

static bool section_before(const section_sum *a, const section_sum *b) {
  if (a->markup || b->markup) return !a->markup && b->markup;
  return strcmp(a->name, b->name) < 0;
}

/* The sections of either, in their order; those of `one` first among equals. */
static int union_of(const section_sums *one, const section_sums *two, const section_sum **out) {
  int count = 0;
  for (int i = 0; i < one->count; i++) out[count++] = &one->at[i];
  for (int i = 0; i < two->count; i++) {
    if (find_section(one, &two->at[i])) continue;
    int at = count++;
    for (; at > 0 && section_before(&two->at[i], out[at - 1]); at--) out[at] = out[at - 1];
    out[at] = &two->at[i];
  }
  return count;
}

static int pair_bars(const report *r, const section_sums *one, const section_sums *two,
                     chart_bar **out) {
  size_t most = (size_t)(one->count + two->count);
  const section_sum **all = arena_array(r->arena, most, sizeof *all);
  chart_bar *bar = arena_array(r->arena, most, sizeof *bar);
  int count = union_of(one, two, all);
  for (int i = 0; i < count; i++)
    bar[i] = (chart_bar){
        section_label(r, all[i]),
        {section_cents(find_section(one, all[i])), section_cents(find_section(two, all[i]))}};
  *out = bar;
  return count;
}

static chart_bars before_after_bars(const report *r, const assessment *before,
                                    const assessment *after, const char *after_name) {
  section_sums *sums = arena_array(r->arena, 2, sizeof *sums);
  sum_sections(r, before, &sums[0]);
  sum_sections(r, after, &sums[1]);
  chart_bar *bar;
  int count = pair_bars(r, &sums[0], &sums[1], &bar);
  return (chart_bars){
      .title = text_format(r->arena, "Cost by section: the specified wall and %s", after_name),
      .lead = text_format(r->arena, "The specified wall costs %s, %s %s; by section number:",
                          view_money(r, (double)before->cost.total_cents / 100, NULL), after_name,
                          view_money(r, (double)after->cost.total_cents / 100, NULL)),
      .parts = 2,
      .part_name = {"specified", after_name},
      .paired = true,
      .bar = bar,
      .count = count};
}

const char *chart_before_after_words(const report *r, const assessment *before,
                                     const assessment *after, const char *after_name) {
  chart_bars b = before_after_bars(r, before, after, after_name);
  return chart_bars_words(r, &b);
}

void chart_before_after(const report *r, const char *id, const assessment *before,
                        const assessment *after, const char *after_name, text *out) {
  chart_bars b = before_after_bars(r, before, after, after_name);
  chart_bars_draw(r, id, &b, out);
}
