#include "report/fixtures.h"

#include "report/page.h"
#include "report/report_json.h"
#include "report/view.h"

static const char *const way_words[FASTENING_WAYS] = {
    [FASTENING_NO_MOUNT] = "No mount on the whole side",
    [FASTENING_GAP] = "The mount left out over the stretch",
    [FASTENING_APART] = "Staggered or double framing without a mount",
};
static const char *const way_keys[FASTENING_WAYS] = {
    [FASTENING_NO_MOUNT] = "no_mount",
    [FASTENING_GAP] = "mount_left_out",
    [FASTENING_APART] = "framed_apart",
};
static const char gap_note[] =
    "the leaf over the stretch is packed out to line, the packing is not priced; the rule of the "
    "brief stays that such a side takes no mount";
static const char furring_note[] =
    "A furring that stands off the finished leaf and carries the fixtures: its fixings, its load and "
    "what it does to the sound are for the designer.";

static const char *sides[] = {"A", "B"};

/* ---- text ---- */

static const char *length(const report *r, double metres) {
  text t;
  text_init(&t, r->arena, 100);
  units_put_height(&t, metres, r->units);
  return t.data;
}

const char *fixtures_way(int way) {
  return way_words[way];
}

const char *fixtures_furring(void) {
  return furring_note;
}

const char *fixtures_intro(const report *r, const fastening_choice *c) {
  return text_format(r->arena, "Side %s carries heavy fixtures over %s of %s. Ways to build it:",
                     sides[c->side], length(r, c->stretch_m), length(r, r->brief->length_m));
}

const char *fixtures_figures(const report *r, const fastening_choice *c, const fastening_option *o) {
  text t;
  text_init(&t, r->arena, 1000);
  if (o->costed) {
    double total = (double)o->total_cents / 100;
    text_putf(&t, "%s, ",
              view_money(r, view_per_area(r, total / o->wall->cost.area_m2), view_area(r)));
    text_putf(&t, "%s; ", view_money(r, total, NULL));
  } else
    text_put(&t, "no price; ");
  text_putf(&t, "STC %d", o->ratings.stc);
  if (o->stretch)
    text_putf(&t, " with STC %d over %s and %d over %s", o->wall->ratings.stc,
              length(r, r->brief->length_m - c->stretch_m), o->stretch->ratings.stc,
              length(r, c->stretch_m));
  if (r->brief->target_count > 0)
    text_put(&t, o->reaches ? "; the targets are reached" : "; the targets are not reached");
  if (o->stretch) text_putf(&t, "; %s", gap_note);
  text_char(&t, '.');
  return t.data;
}

static void put_item(text *out, const char *words) {
  page_label(out, "");
  text_put(out, "- ");
  page_words(out, PAGE_LABEL + 2, words);
}

static void put_more(text *out, const char *words) {
  page_label(out, "");
  text_put(out, "  ");
  page_words(out, PAGE_LABEL + 2, words);
}

static void put_way(const report *r, const fastening_choice *c, int way, text *out) {
  const fastening_option *o = &c->way[way];
  if (o->wall == NULL) {
    put_item(out, text_format(r->arena, "%s: no wall that keeps the other rules.", way_words[way]));
    return;
  }
  put_item(out, text_format(r->arena, "%s:", way_words[way]));
  put_more(out, o->wall->line);
  if (o->stretch) put_more(out, text_format(r->arena, "over the stretch %s", o->stretch->line));
  put_more(out, fixtures_figures(r, c, o));
}

void fixtures_text(const report *r, text *out) {
  for (int i = 0; i < r->fastening_count; i++) {
    const fastening_choice *c = &r->fastening[i];
    page_line(out, "Fastening", fixtures_intro(r, c));
    for (int way = 0; way < FASTENING_WAYS; way++) put_way(r, c, way, out);
    put_item(out, furring_note);
  }
}

/* ---- JSON ---- */

enum { CENTS_A_UNIT = 100, MONEY_DIGITS = 4, RATING_DIGITS = 1, LENGTH_DIGITS = 6 };

static void put_option(const report *r, int way, const fastening_option *o, markup_json *j) {
  markup_json_object(j, NULL, false);
  markup_json_string(j, "way", way_keys[way]);
  markup_json_string(j, "what", way_words[way]);
  markup_json_string(j, "line", o->wall ? o->wall->line : NULL);
  markup_json_string(j, "stretch_line", o->stretch ? o->stretch->line : NULL);
  if (o->wall) {
    if (o->costed) {
      markup_json_cents(j, "cost_total", o->total_cents);
      markup_json_number(j, "cost_per_m2",
                         (double)o->total_cents / CENTS_A_UNIT / o->wall->cost.area_m2,
                         MONEY_DIGITS);
    } else {
      markup_json_null(j, "cost_total");
      markup_json_null(j, "cost_per_m2");
    }
    report_json_ratings(j, "ratings", &o->ratings);
    markup_json_number(j, "stc_exact", o->exact_stc, RATING_DIGITS);
    if (r->brief->target_count > 0)
      markup_json_bool(j, "reaches_targets", o->reaches);
    else
      markup_json_null(j, "reaches_targets");
  }
  markup_json_string(j, "note", o->stretch ? gap_note : NULL);
  markup_json_close(j);
}

static void put_furring(markup_json *j) {
  markup_json_object(j, NULL, false);
  markup_json_string(j, "way", "stand_off");
  markup_json_string(j, "what", "Furring that stands off the finished leaf");
  markup_json_null(j, "line");
  markup_json_null(j, "stretch_line");
  markup_json_string(j, "note", furring_note);
  markup_json_close(j);
}

void fixtures_json(const report *r, markup_json *j) {
  if (r->fastening_count == 0) return;
  markup_json_array(j, "fastening_options", false);
  for (int i = 0; i < r->fastening_count; i++) {
    const fastening_choice *c = &r->fastening[i];
    markup_json_object(j, NULL, false);
    markup_json_string(j, "side", c->side == SIDE_A ? "a" : "b");
    markup_json_number(j, "stretch_m", c->stretch_m, LENGTH_DIGITS);
    markup_json_array(j, "options", false);
    for (int way = 0; way < FASTENING_WAYS; way++) put_option(r, way, &c->way[way], j);
    put_furring(j);
    markup_json_close(j);
    markup_json_close(j);
  }
  markup_json_close(j);
}
