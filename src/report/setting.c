#include "report/setting.h"

#include "explain/ceiling.h"
#include "explain/rooms.h"
#include "report/page.h"

static const char assumption[] =
    "NNIC = ASTC + 10 lg(0.32 V/S), taken that the wall is the whole side of the room";

enum { SETTING_DIGITS = 1 };

static const char *received(const report *r, const room_rating *f, int side) {
  text depth;
  text_init(&depth, r->arena, 100);
  units_put_height(&depth, r->brief->side[side].room_depth_m, r->units);
  return text_format(r->arena, ", NNIC %s in room %s (%s deep)",
                     text_of(r->arena, f->nnic[side], SETTING_DIGITS), side == SIDE_A ? "A" : "B",
                     depth.data);
}

const char *setting_words(const report *r, const assessment *x) {
  room_rating f = rooms_rating(r->brief, x);
  if (!f.there) return NULL;
  text t;
  text_init(&t, r->arena, 2000);
  text_putf(&t, "In the building about ASTC %s", text_of(r->arena, f.astc, SETTING_DIGITS));
  for (int s = 0; s < 2; s++)
    if (f.has_nnic[s]) text_put(&t, received(r, &f, s));
  text_putf(&t, " (STC%s less %s points", x->has_composite ? " with openings" : "",
            text_of(r->arena, r->brief->field_mean, SETTING_DIGITS));
  if (f.has_nnic[SIDE_A] || f.has_nnic[SIDE_B]) text_putf(&t, "; %s", assumption);
  text_put(&t, ").");
  return t.data;
}

void setting_text(const report *r, const assessment *x, text *out) {
  const char *words = setting_words(r, x);
  if (words) page_line(out, "", words);
}

static void put_field(const report *r, const assessment *x, markup_json *j) {
  static const char *const keys[] = {"a", "b"};
  room_rating f = rooms_rating(r->brief, x);
  if (!f.there) return;
  markup_json_object(j, "field", false);
  markup_json_number(j, "astc", f.astc, SETTING_DIGITS);
  markup_json_object(j, "nnic", true);
  for (int s = 0; s < 2; s++) {
    if (f.has_nnic[s])
      markup_json_number(j, keys[s], f.nnic[s], SETTING_DIGITS);
    else
      markup_json_null(j, keys[s]);
  }
  markup_json_close(j);
  markup_json_string(j, "assumption", assumption);
  markup_json_close(j);
}

void setting_json(const report *r, const assessment *x, markup_json *j) {
  ceiling_path path = ceiling_path_of(r->brief);
  put_field(r, x, j);
  if (!path.there) return;
  markup_json_object(j, "ceiling_path", true);
  markup_json_number(j, "class", path.class_all, SETTING_DIGITS);
  markup_json_bool(j, "assumed", path.assumed);
  markup_json_bool(j, "batts", r->brief->ceiling_batts);
  markup_json_number(j, "stc", ceiling_capped(&path, x->ratings.stc), SETTING_DIGITS);
  markup_json_bool(j, "needs_deck", job_needs_deck(r->brief));
  markup_json_close(j);
}
