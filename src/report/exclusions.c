#include "report/exclusions.h"

#include "report/page.h"

typedef bool (*condition)(const brief *b);

static bool always(const brief *b) {
  (void)b;
  return true;
}

static bool has_openings(const brief *b) {
  return b->opening_count > 0 || b->doors > 0;
}

static bool heavy(const brief *b) {
  return b->side[SIDE_A].fastening == FASTENING_HEAVY ||
         b->side[SIDE_B].fastening == FASTENING_HEAVY;
}

static bool not_heavy(const brief *b) {
  return !heavy(b);
}

static bool wet(const brief *b) {
  return b->side[SIDE_A].wet || b->side[SIDE_B].wet;
}

static bool bearing(const brief *b) {
  return b->loadbearing || b->shear_side != CATALOG_NONE;
}

static bool piped(const brief *b) {
  return b->riser_m > 0 || b->run_m > 0;
}

static bool in_the_field(const brief *b) {
  for (int i = 0; i < b->target_count; i++)
    if (b->targets[i].basis == BASIS_FIELD) return true;
  return false;
}

/* What a drywall bid usually leaves to others: common practice, no source. */
static const struct {
  condition when;
  const char *words;
} rows[] = {
    {always, "Painting, wall coverings and bases."},
    {wet, "Tile, waterproofing membranes and their setting."},
    {has_openings, "Doors, frames, hardware, glazing and their setting."},
    {not_heavy, "Backing and blocking for fixtures: the brief asks for none."},
    {heavy, "Fixtures themselves, and backing for any beyond those of the brief."},
    {always, "Firestopping of pipes, ducts and cables through the wall, and dampers (box pads are in)."},
    {piped, "Pipes, their insulation and the holes for them."},
    {bearing, "Engineering, hold-downs, chords and connections of load-bearing and shear walls."},
    {always, "Floors, ceilings and junctions that carry sound past the wall."},
    {in_the_field, "The acoustical test in the building, and what a failed one costs."},
    {always, "Lifts and scaffolds, heating of the rooms, protection of finished work."},
    {always, "Permits, bonds, overtime, and delivery beyond the usual unloading."},
};

int exclusions_of(const brief *b, const char *out[EXCLUSIONS_MAX]) {
  int count = 0;
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++)
    if (rows[i].when(b)) out[count++] = rows[i].words;
  return count;
}

void exclusions_text(const brief *b, text *out) {
  const char *words[EXCLUSIONS_MAX];
  int count = exclusions_of(b, words);
  for (int i = 0; i < count; i++) {
    page_label(out, i == 0 ? "Excluded" : "");
    text_put(out, "- ");
    page_words(out, PAGE_LABEL + 2, words[i]);
  }
}

void exclusions_json(const brief *b, markup_json *j) {
  const char *words[EXCLUSIONS_MAX];
  int count = exclusions_of(b, words);
  markup_json_array(j, "exclusions", false);
  for (int i = 0; i < count; i++) markup_json_string(j, NULL, words[i]);
  markup_json_close(j);
}
