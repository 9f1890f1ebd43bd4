/* A brief as a brief/1 file says it (docs/formats/brief.md), so that another call may be given it.
 */
#include "input/job_fields.h"
#include "report/report_json.h"
#include "report/view.h"

enum {
  LENGTH_DIGITS = 9, /* what was read in inches comes back as it was */
  DIGITS = 9
};

static void put_length(markup_json *j, const char *key, double metres) {
  if (metres > 0) markup_json_number(j, key, metres, LENGTH_DIGITS);
}

static void put_count(markup_json *j, const char *key, int count) {
  if (count >= 0) markup_json_number(j, key, count, 0);
}

static void put_size(markup_json *j, const brief *b) {
  markup_json_object(j, "wall", true);
  put_length(j, "length_m", b->length_m);
  put_length(j, "height_m", b->height_m);
  put_length(j, "ceiling_a_m", b->ceiling_m[SIDE_A]);
  put_length(j, "ceiling_b_m", b->ceiling_m[SIDE_B]);
  markup_json_string(j, "top", job_top_words[b->top]);
  if (b->ceiling_class > 0) markup_json_number(j, "ceiling_class", b->ceiling_class, DIGITS);
  if (b->ceiling_batts) markup_json_bool(j, "ceiling_batts", true);
  markup_json_string(j, "head", job_head_words[b->head]);
  if (b->boards != BOARDS_LUMP) markup_json_string(j, "boards", job_boards_words[b->boards]);
  put_count(j, "corners", b->corners);
  put_count(j, "tees", b->tees);
  put_count(j, "free_ends", b->free_ends);
  put_count(j, "doors", b->doors);
  markup_json_close(j);
}

static void put_targets(markup_json *j, const brief *b) {
  if (b->target_count == 0) return;
  markup_json_array(j, "targets", false);
  for (int i = 0; i < b->target_count; i++) {
    const target *t = &b->targets[i];
    markup_json_object(j, NULL, true);
    markup_json_string(j, "metric", sound_metric_names[t->metric]);
    markup_json_number(j, "value", t->value, DIGITS);
    markup_json_string(j, "basis", job_basis_words[t->basis]);
    markup_json_number(j, "confidence", t->confidence, DIGITS);
    markup_json_string(j, "evidence", job_evidence_words[t->evidence]);
    markup_json_string(j, "scope", job_scope_words[t->composite]);
    markup_json_number(j, "margin", t->margin, DIGITS);
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_limit(markup_json *j, const char *key, const limit *l, double unit) {
  if (!l->has_min && !l->has_max) return;
  markup_json_object(j, key, true);
  if (l->has_min) markup_json_number(j, "min", l->min * unit, DIGITS);
  if (l->has_max) markup_json_number(j, "max", l->max * unit, DIGITS);
  markup_json_close(j);
}

static void put_limits(markup_json *j, const brief *b) {
  markup_json_object(j, "limits", true);
  put_limit(j, "thickness_m", &b->thickness_m, 1);
  put_limit(j, "mass_kg_m2", &b->mass_kg_m2, 1);
  put_limit(j, "cost_per_m2", &b->cost_per_m2, 1);
  markup_json_close(j);
}

static void put_structure(markup_json *j, const brief *b) {
  markup_json_object(j, "structure", true);
  markup_json_bool(j, "loadbearing", b->loadbearing);
  if (b->floors_above >= 0) markup_json_integer(j, "floors_above", b->floors_above);
  markup_json_string(j, "noncombustible", job_noncombustible_words[b->noncombustible]);
  markup_json_string(j, "shear_side", job_shear_words[b->shear_side + 1]);
  markup_json_number(j, "lateral_pa", b->lateral_pa, DIGITS);
  markup_json_number(j, "deflection", b->deflection, DIGITS);
  markup_json_close(j);
}

static void put_side(markup_json *j, const char *key, const room_side *s) {
  markup_json_object(j, key, true);
  if (s->room != NULL && s->room[0] != '\0') markup_json_string(j, "room", s->room);
  markup_json_string(j, "fastening", job_fastening_words[s->fastening]);
  put_length(j, "fastening_length_m", s->fastening_length_m);
  put_length(j, "room_depth_m", s->room_depth_m);
  markup_json_bool(j, "wet", s->wet);
  markup_json_bool(j, "abuse", s->abuse);
  markup_json_integer(j, "finish_level", s->finish_level);
  markup_json_close(j);
}

static void put_services(markup_json *j, const brief *b) {
  markup_json_object(j, "services", true);
  put_length(j, "riser_m", b->riser_m);
  put_length(j, "run_m", b->run_m);
  if (b->boxes_given) markup_json_number(j, "boxes_per_10m", b->boxes_per_10m, DIGITS);
  markup_json_close(j);
}

static void put_openings(markup_json *j, const brief *b) {
  if (b->opening_count == 0) return;
  markup_json_array(j, "openings", false);
  for (int i = 0; i < b->opening_count; i++) {
    const opening *o = &b->openings[i];
    markup_json_object(j, NULL, true);
    if (o->kind != NULL && o->kind[0] != '\0') markup_json_string(j, "kind", o->kind);
    markup_json_number(j, "area_m2", o->area_m2, DIGITS);
    if (!o->has_bands) {
      markup_json_number(j, "stc", o->stc, DIGITS);
    } else {
      markup_json_array(j, "tl_db", true);
      for (int k = 0; k < BANDS; k++) markup_json_number(j, NULL, o->tl_db[k], DIGITS);
      markup_json_close(j);
    }
    markup_json_close(j);
  }
  markup_json_close(j);
}

static void put_words(markup_json *j, const char *key, const char *const *words, int n) {
  if (n == 0) return;
  markup_json_array(j, key, true);
  for (int i = 0; i < n; i++) markup_json_string(j, NULL, words[i]);
  markup_json_close(j);
}

static void put_building(markup_json *j, const brief *b) {
  markup_json_object(j, "building", true);
  if (b->storeys_given) markup_json_integer(j, "storeys", b->storeys);
  markup_json_bool(j, "sprinklered", b->sprinklered);
  markup_json_close(j);
}

void report_json_brief(markup_json *j, const report *r, const char *key, const brief *b) {
  report own = *r;
  own.brief = b;
  markup_json_object(j, key, false);
  markup_json_string(j, "septum", "brief/1");
  if (b->title != NULL && b->title[0] != '\0') markup_json_string(j, "title", b->title);
  markup_json_string(j, "units", b->units == UNITS_SI ? "si" : "us");
  markup_json_string(j, "code", view_code(&own));
  put_building(j, b);
  put_size(j, b);
  put_targets(j, b);
  put_limits(j, b);
  markup_json_integer(j, "fire_min", b->fire_min);
  put_structure(j, b);
  markup_json_object(j, "sides", false);
  put_side(j, "a", &b->side[SIDE_A]);
  put_side(j, "b", &b->side[SIDE_B]);
  markup_json_close(j);
  put_services(j, b);
  put_openings(j, b);
  markup_json_object(j, "field_allowance", true);
  markup_json_number(j, "mean", b->field_mean, DIGITS);
  markup_json_number(j, "sd", b->field_sd, DIGITS);
  markup_json_close(j);
  markup_json_number(j, "floor_area_value_per_m2", b->floor_area_value_per_m2, DIGITS);
  markup_json_string(j, "build", b->build == BUILD_ANY ? "any" : "ordinary");
  put_words(j, "only", b->only, b->only_count);
  put_words(j, "without", b->without, b->without_count);
  put_words(j, "listings", b->listings, b->listing_count);
  put_words(j, "reports", b->reports, b->report_count);
  markup_json_close(j);
}
