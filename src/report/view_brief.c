#include "report/view_brief.h"

#include <string.h>

#include "base/file.h"
#include "checks/cost.h"
#include "explain/ceiling.h"
#include "report/view.h"

typedef struct field_list {
  const report *report;
  const brief *brief;
  brief usual; /* of a brief that says nothing */
  view_brief *out;
} field_list;

static void add(field_list *l, const char *name, const char *value, bool usual) {
  if (l->out->count == VIEW_MAX_FIELDS) return;
  l->out->field[l->out->count++] = (view_field){name, value, usual};
}

static const char *height(const field_list *l, double metres) {
  text t;
  text_init(&t, l->report->arena, 100);
  units_put_height(&t, metres, l->report->units);
  return t.data;
}

static const char *thickness(const field_list *l, double metres) {
  text t;
  text_init(&t, l->report->arena, 100);
  units_put_thickness(&t, metres, l->report->units);
  return t.data;
}

static const char *number(const field_list *l, double value, int decimals) {
  text t;
  text_init(&t, l->report->arena, 100);
  text_number(&t, value, decimals);
  return t.data;
}

static const char *yes_no(bool value) {
  return value ? "yes" : "no";
}

/* ---- what the brief is about ---- */

static void add_building(field_list *l) {
  const brief *b = l->brief;
  arena *a = l->report->arena;
  add(l, "Units", l->report->units == UNITS_US ? "us" : "si", b->units == l->usual.units);
  add(l, "Code", view_code(l->report), b->code == l->usual.code);
  add(l, "Storeys", b->storeys_given ? text_format(a, "%d", b->storeys) : "not said",
      !b->storeys_given);
  add(l, "Sprinklered", yes_no(b->sprinklered), !b->sprinklered);
}

/* What was counted for the takeoff of studs. */
static void add_counts(field_list *l) {
  const brief *b = l->brief;
  const struct {
    const char *name;
    int count;
  } counts[] = {
      {"Corners", b->corners}, {"Tees", b->tees}, {"Free ends", b->free_ends}, {"Doors", b->doors}};
  for (size_t i = 0; i < sizeof counts / sizeof counts[0]; i++)
    if (counts[i].count >= 0)
      add(l, counts[i].name, text_format(l->report->arena, "%d", counts[i].count), false);
}

static void add_wall(field_list *l) {
  const brief *b = l->brief;
  static const char *const ceilings[] = {"Ceiling, side A", "Ceiling, side B"};
  add(l, "Length", height(l, b->length_m), b->length_m == l->usual.length_m);
  add(l, "Height", height(l, b->height_m), b->height_m == l->usual.height_m);
  for (int s = 0; s < 2; s++)
    if (b->ceiling_m[s] > 0) add(l, ceilings[s], height(l, b->ceiling_m[s]), false);
  add(l, "Top of the wall", b->top == TOP_CEILING ? "at the ceiling" : "at the deck",
      b->top == l->usual.top);
  if (b->top == TOP_CEILING) {
    ceiling_path path = ceiling_path_of(b);
    add(l, "Ceiling attenuation class", number(l, path.tile_class, 1), path.assumed);
    add(l, "Batts on the ceiling", yes_no(b->ceiling_batts), !b->ceiling_batts);
  }
  if (b->boards != BOARDS_LUMP)
    add(l, "Boards", b->boards == BOARDS_VERTICAL ? "upright" : "in lying courses", false);
  add_counts(l);
  add(l, "Head", b->head == HEAD_SLIP ? "slip" : "rigid", b->head == l->usual.head);
}

/* ---- sound ---- */

static void add_target(field_list *l, int i, bool climbs) {
  const target *t = &l->brief->targets[i];
  arena *a = l->report->arena;
  const char *of = l->brief->target_count > 1 ? text_format(a, "Target %d", i + 1) : "Target";
  add(l, of,
      climbs ? text_format(a, "%s, every value", sound_metric_names[t->metric])
             : text_format(a, "%s %s", sound_metric_names[t->metric], number(l, t->value, 1)),
      false);
  add(l, text_format(a, "%s: where", of),
      t->basis == BASIS_FIELD ? "in the field" : "in the laboratory", t->basis == BASIS_LAB);
  add(l, text_format(a, "%s: confidence", of),
      text_format(a, "%s %%", number(l, 100 * t->confidence, 1)),
      t->confidence == view_usual_confidence());
  add(l, text_format(a, "%s: evidence", of),
      t->evidence == EVIDENCE_PUBLISHED ? "published ratings only" : "published or predicted",
      t->evidence == EVIDENCE_ANY);
  add(l, text_format(a, "%s: scope", of),
      t->composite ? "the wall with its openings" : "the wall alone", !t->scope_given);
  add(l, text_format(a, "%s: margin", of), text_format(a, "%s points", number(l, t->margin, 1)),
      t->margin == 0);
}

static void add_openings(field_list *l) {
  const brief *b = l->brief;
  arena *a = l->report->arena;
  for (int i = 0; i < b->opening_count; i++) {
    const opening *o = &b->openings[i];
    bool us = l->report->units == UNITS_US;
    const char *rated = o->has_bands ? "transmission loss given by bands"
                                     : text_format(a, "STC %s", number(l, o->stc, 1));
    add(l, text_format(a, "Opening %d", i + 1),
        text_format(a, "%s%s%s %s, %s", o->kind, o->kind[0] ? ", " : "",
                    text_of(a, us ? o->area_m2 / UNITS_M2_PER_FT2 : o->area_m2, 2),
                    us ? "ft2" : "m2", rated),
        false);
  }
}

static void add_sound(field_list *l, int climbs) {
  const brief *b = l->brief;
  bool field = false;
  for (int i = 0; i < b->target_count; i++) {
    add_target(l, i, i == climbs);
    field = field || b->targets[i].basis == BASIS_FIELD;
  }
  if (field)
    add(l, "Step from laboratory to field",
        text_format(l->report->arena, "%s points, standard deviation %s",
                    number(l, b->field_mean, 2), number(l, b->field_sd, 2)),
        b->field_mean == l->usual.field_mean && b->field_sd == l->usual.field_sd);
  add_openings(l);
}

/* ---- limits and structure ---- */

static const char *surface_mass(const field_list *l, double kg_m2) {
  text t;
  text_init(&t, l->report->arena, 100);
  units_put_surface_mass(&t, kg_m2, l->report->units);
  return t.data;
}

static void add_limits(field_list *l) {
  const brief *b = l->brief;
  bool us = l->report->units == UNITS_US;
  if (b->thickness_m.has_min) add(l, "Thickness at least", thickness(l, b->thickness_m.min), false);
  if (b->thickness_m.has_max) add(l, "Thickness at most", thickness(l, b->thickness_m.max), false);
  if (b->mass_kg_m2.has_min) add(l, "Mass at least", surface_mass(l, b->mass_kg_m2.min), false);
  if (b->mass_kg_m2.has_max) add(l, "Mass at most", surface_mass(l, b->mass_kg_m2.max), false);
  if (b->cost_per_m2.has_max)
    add(l, "Cost at most",
        view_money(l->report, us ? b->cost_per_m2.max * UNITS_M2_PER_FT2 : b->cost_per_m2.max,
                   us ? "ft2" : "m2"),
        false);
  add(l, "Fire rating asked",
      b->fire_min > 0 ? text_format(l->report->arena, "%d min", b->fire_min) : "none",
      b->fire_min == 0);
}

static const char *noncombustible_words(noncombustible n) {
  return n == NONCOMBUSTIBLE_STRICT   ? "no combustible part"
         : n == NONCOMBUSTIBLE_FRT_OK ? "no combustible part but fire-retardant wood"
                                      : "not asked";
}

static void add_structure(field_list *l) {
  const brief *b = l->brief;
  arena *a = l->report->arena;
  bool us = l->report->units == UNITS_US;
  add(l, "Load-bearing", yes_no(b->loadbearing), !b->loadbearing);
  if (b->loadbearing)
    add(l, "Floors above",
        b->floors_above >= 0 ? text_format(a, "%d", b->floors_above) : "not said",
        b->floors_above < 0);
  add(l, "Noncombustible", noncombustible_words(b->noncombustible),
      b->noncombustible == NONCOMBUSTIBLE_NO);
  add(l, "Shear panel",
      b->shear_side == SIDE_A   ? "on side A"
      : b->shear_side == SIDE_B ? "on side B"
                                : "none",
      b->shear_side == CATALOG_NONE);
  add(l, "Load across the wall",
      us ? text_format(a, "%s psf", number(l, b->lateral_pa / UNITS_PA_PER_PSF, 2))
         : text_format(a, "%s Pa", number(l, b->lateral_pa, 1)),
      b->lateral_pa == l->usual.lateral_pa);
  add(l, "Deflection", text_format(a, "span / %s", number(l, b->deflection, 1)),
      b->deflection == l->usual.deflection);
}

/* ---- sides, services, what may be used ---- */

static void add_side(field_list *l, int s) {
  static const char *const fastenings[] = {"none", "light", "heavy"};
  const room_side *side = &l->brief->side[s];
  arena *a = l->report->arena;
  const char *of = s == SIDE_A ? "Side A" : "Side B";
  if (side->room[0]) add(l, text_format(a, "%s: room", of), side->room, false);
  add(l, text_format(a, "%s: fastening", of), fastenings[side->fastening],
      side->fastening == FASTENING_NONE);
  if (side->fastening != FASTENING_NONE)
    add(l, text_format(a, "%s: fastening over", of),
        side->fastening_length_m > 0 ? height(l, side->fastening_length_m) : "the whole side",
        side->fastening_length_m == 0);
  if (side->room_depth_m > 0)
    add(l, text_format(a, "%s: depth of the room", of), height(l, side->room_depth_m), false);
  add(l, text_format(a, "%s: wet", of), yes_no(side->wet), !side->wet);
  add(l, text_format(a, "%s: abuse", of), yes_no(side->abuse), !side->abuse);
  add(l, text_format(a, "%s: finish", of), text_format(a, "Level %d", side->finish_level),
      side->finish_level == l->usual.side[s].finish_level);
}

static void add_services(field_list *l) {
  const brief *b = l->brief;
  if (b->riser_m > 0) add(l, "Pipe within the studs", thickness(l, b->riser_m), false);
  if (b->run_m > 0) add(l, "Pipe through the studs", thickness(l, b->run_m), false);
  add(l, "Electrical boxes",
      text_format(l->report->arena, "%s a side in 10 m", number(l, cost_boxes_per_10m(b), 2)),
      !b->boxes_given);
}

static void add_patterns(field_list *l, const char *name, const char *const *pattern, int count) {
  text t;
  text_init(&t, l->report->arena, 64 << 10);
  for (int i = 0; i < count; i++) text_putf(&t, "%s%s", i ? ", " : "", pattern[i]);
  if (count > 0) add(l, name, t.data, false);
}

static void add_means(field_list *l) {
  const brief *b = l->brief;
  bool us = l->report->units == UNITS_US;
  double value = b->floor_area_value_per_m2;
  add(l, "Value of floor area",
      value > 0 ? view_money(l->report, us ? value * UNITS_M2_PER_FT2 : value, us ? "ft2" : "m2")
                : "not counted",
      value == 0);
  add(l, "Build", b->build == BUILD_ANY ? "any legal wall" : "ordinary",
      b->build == l->usual.build);
  add_patterns(l, "Only", b->only, b->only_count);
  add_patterns(l, "Without", b->without, b->without_count);
  if (l->report->prices) add(l, "Price book", l->report->prices->name, l->report->usual_prices);
  for (int i = 0; i < b->listing_count; i++)
    add(l, "Fire listings", file_name(b->listings[i]), false);
}

void view_brief_of(const report *r, int climbs, view_brief *out) {
  field_list l = {.report = r, .brief = r->brief, .out = out};
  job_defaults(&l.usual);
  out->count = 0;
  if (r->asked && r->brief->title[0]) add(&l, "Title", r->brief->title, false);
  add_building(&l);
  add_wall(&l);
  add_sound(&l, climbs);
  add_limits(&l);
  add_structure(&l);
  add_side(&l, SIDE_A);
  add_side(&l, SIDE_B);
  add_services(&l);
  add_means(&l);
}
