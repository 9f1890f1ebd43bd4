/* Limiting heights against published tables, and each rule of structure, sides and services. */
#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/units.h"
#include "checks/structure.h"
#include "wall/line.h"

static jmp_buf failed;
static arena *memory;
static diag_list diags;
static const catalog *shop;

static void setup(void) {
  memory = arena_create(0, &failed);
  ck_assert_ptr_nonnull(memory);
  if (setjmp(failed)) ck_abort_msg("memory ran out");
  diag_init(&diags, memory);
  shop = catalog_load(memory, &diags, TEST_ROOT "/catalogs");
  ck_assert_msg(shop != NULL, "the shipped catalogs load");
}

static void teardown(void) {
  arena_free(memory);
}

static wall parsed(const char *line) {
  wall w;
  ck_assert_msg(line_parse(memory, &diags, shop, line, &w), "%s reads", line);
  return w;
}

static brief plain_brief(void) {
  brief b;
  job_defaults(&b);
  b.shear_side = CATALOG_NONE;
  return b;
}

/* Load of the published tables: 5 psf. */
static brief table_brief(double deflection) {
  brief b = plain_brief();
  b.lateral_pa = 5 * UNITS_PA_PER_PSF;
  b.deflection = deflection;
  return b;
}

#define TABLE_IN 1.0 /* the tables print whole inches, rounded down */
#define M_PER_IN UNITS_M_PER_IN
#define IN4_M4   (UNITS_M_PER_IN * UNITS_M_PER_IN * UNITS_M_PER_IN * UNITS_M_PER_IN)

typedef struct ft_in {
  int ft, in;
} ft_in;

static void same_height(const char *name, double found_m, ft_in expected) {
  double inches = expected.ft * 12 + expected.in;
  ck_assert_msg(fabs(found_m / M_PER_IN - inches) <= TABLE_IN,
                "%s: %.2f in, the table has %d-%d (%.0f in)", name, found_m / M_PER_IN, expected.ft,
                expected.in, inches);
}

static const int table_spacings[3] = {305, 406, 610};
static const double table_deflections[3] = {120, 240, 360};

/* ---- bare studs ----
 * A manufacturer's limiting heights, interior, 5 psf, steel only, AISI S100-07: L/120, L/240, L/360
 * at 12, 16, 24 in. The inertias are the gross ones of the marks in the section tables of the same
 * goods. */
static const struct bare_row {
  const char *mark;
  double inertia_in4;
  ft_in height[3][3]; /* [spacing][deflection] */
} bare_rows[] = {
    {"250S137-33",
     .203,
     {{{17, 6}, {13, 10}, {12, 1}}, {{15, 10}, {12, 7}, {11, 0}}, {{13, 10}, {11, 0}, {9, 7}}}},
    {"250S137-43",
     .261,
     {{{19, 0}, {15, 1}, {13, 2}}, {{17, 3}, {13, 8}, {11, 11}}, {{15, 1}, {11, 11}, {10, 5}}}},
    {"250S137-54",
     .318,
     {{{20, 3}, {16, 1}, {14, 1}}, {{18, 5}, {14, 8}, {12, 9}}, {{16, 1}, {12, 9}, {11, 2}}}},
    {"250S162-33",
     .235,
     {{{18, 4}, {14, 7}, {12, 9}}, {{16, 8}, {13, 3}, {11, 7}}, {{14, 7}, {11, 7}, {10, 1}}}},
    {"250S162-43",
     .302,
     {{{19, 11}, {15, 10}, {13, 10}}, {{18, 1}, {14, 4}, {12, 7}}, {{15, 10}, {12, 7}, {10, 11}}}},
    {"250S200-33",
     .279,
     {{{19, 4}, {15, 4}, {13, 5}}, {{17, 7}, {13, 11}, {12, 2}}, {{15, 4}, {12, 2}, {10, 8}}}},
    {"250S200-43",
     .358,
     {{{21, 1}, {16, 9}, {14, 8}}, {{19, 2}, {15, 3}, {13, 4}}, {{16, 9}, {13, 4}, {11, 7}}}},
};

START_TEST(bare) {
  const struct bare_row *row = &bare_rows[_i];
  wall w = parsed("gyp-13 | steel-64-33@406 | gyp-13"); /* 1/2 in board: no composite row */
  frame stud = shop->frames[w.frame];
  catalog one = *shop;
  stud.inertia_m4 = row->inertia_in4 * IN4_M4;
  stud.inertia_effective_m4 = 0;
  stud.moment_n_m = 0; /* the table's rows are governed by deflection */
  one.frames = &stud;
  one.frame_count = 1;
  w.frame = 0;
  for (int s = 0; s < 3; s++) {
    for (int k = 0; k < 3; k++) {
      brief b = table_brief(table_deflections[k]);
      w.spacing_mm = table_spacings[s];
      same_height(row->mark, structure_height(NULL, &one, &b, &w).limit_m, row->height[s][k]);
    }
  }
}
END_TEST

/* Drywall studs of the catalog, steel only, L/240 at 5 psf. Computed by hand from the section
 * tables (Ixe, the lower allowable moment of local and distortional buckling); `moment`: strength
 * governs. */
static const struct drywall_row {
  const char *frame;
  ft_in height[3];
  bool moment[3];
} drywall_rows[] = {
    {"steel-92-18", {{14, 0}, {12, 1}, {9, 11}}, {true, true, true}},
    {"steel-92-30", {{17, 0}, {15, 5}, {13, 6}}, {false, false, false}},
    {"steel-64-18", {{10, 6}, {9, 6}, {8, 3}}, {false, false, true}},
    {"steel-64-30", {{12, 9}, {11, 7}, {10, 1}}, {false, false, false}},
    {"steel-41-18", {{7, 7}, {6, 11}, {6, 0}}, {false, false, false}},
};

START_TEST(drywall) {
  const struct drywall_row *row = &drywall_rows[_i];
  brief b = table_brief(240);
  for (int s = 0; s < 3; s++) {
    wall w = parsed(text_format(memory, "typex-16 | rc@610 | %s@%d | typex-16", row->frame,
                                table_spacings[s])); /* a mount: bare */
    height_verdict v = structure_height(memory, shop, &b, &w);
    same_height(row->frame, v.limit_m, row->height[s]);
    ck_assert_str_eq(v.governs, row->moment[s] ? "moment" : "deflection");
    ck_assert_ptr_nonnull(strstr(v.basis, "bare"));
  }
}
END_TEST

/* ---- with boards ----
 * A manufacturer's composite limiting heights: 25 gauge studs, one 5/8 in Type X board upright on
 * each side, L/240 at 5 psf. */
static const struct composite_row {
  const char *frame;
  ft_in height[3];
} composite_rows[] = {
    {"steel-41-18", {{11, 7}, {10, 6}, {9, 1}}},    {"steel-64-18", {{14, 8}, {13, 4}, {11, 8}}},
    {"steel-92-18", {{17, 1}, {15, 6}, {13, 7}}},   {"steel-102-18", {{18, 0}, {16, 4}, {14, 4}}},
    {"steel-152-18", {{24, 2}, {21, 11}, {19, 2}}},
};

START_TEST(composite) {
  const struct composite_row *row = &composite_rows[_i];
  brief b = table_brief(240);
  for (int s = 0; s < 3; s++) {
    wall w =
        parsed(text_format(memory, "typex-16 | %s@%d | typex-16", row->frame, table_spacings[s]));
    height_verdict v = structure_height(memory, shop, &b, &w);
    same_height(row->frame, v.limit_m, row->height[s]);
    ck_assert_ptr_nonnull(strstr(v.basis, "composite"));
  }
}
END_TEST

/* ---- which walls are composite; wood and its limits ---- */

static void nothing(brief *b) {
  (void)b;
}
static void bearing(brief *b) {
  b->loadbearing = true;
}
static void to_ceiling(brief *b) {
  b->top = TOP_CEILING;
  b->ceiling_m[0] = b->ceiling_m[1] = 2.4;
}
static void softer(brief *b) {
  b->deflection = 120;
}

/* Metres; by hand from the formula of docs/methods/structure.md at 240 Pa. */
#define HEIGHT_M 0.005 /* hand sums to the centimetre */

static const struct height_row {
  const char *name, *source, *line;
  void (*brief)(brief *);
  double limit_m;
  const char *governs;
} height_rows[] = {
    {"composite", "limiting-height table, computed", "typex-16 | steel-92-18@610 | typex-16",
     nothing, 4.129, "deflection"},
    {"two layers a side have a layer a side", "common practice",
     "2*typex-16 | steel-92-18@610 | 2*typex-16", nothing, 4.129, "deflection"},
    {"thin boards are in no row", "limiting-height table", "gyp-13 | steel-92-18@610 | gyp-13",
     nothing, 3.02, "moment"},
    {"a thin base layer is in no row", "limiting-height table",
     "typex-16 + gyp-13 | steel-92-18@610 | typex-16", nothing, 3.02, "moment"},
    {"a mount leaves the stud bare", "common practice",
     "typex-16 | rc@610 | steel-92-18@610 | typex-16", nothing, 3.02, "moment"},
    {"a wall that stops at the ceiling is bare", "common practice",
     "typex-16 | steel-92-18@610 | typex-16", to_ceiling, 3.02, "moment"},
    {"each row of a double is bare", "common practice",
     "typex-16 | steel-92-18-double@610 | typex-16", nothing, 3.02, "moment"},
    {"staggered studs are bare", "common practice",
     "typex-16 | steel-92-18-stag-152@610 | typex-16", nothing, 3.02, "moment"},
    {"softer limits find the strength shown", "common practice: no strength beyond the table's",
     "typex-16 | steel-92-18@610 | typex-16", softer, 4.129, "moment"},
    {"heavier studs are no weaker", "common practice", "typex-16 | steel-92-30@610 | typex-16",
     nothing, 4.129, "deflection"},
    {"tile", "ANSI A108.11, from memory: L/360", "cement-13 | steel-92-33@406 | typex-16", nothing,
     4.673, "deflection"},
    {"wood at 16 in", "formula, E 9.5 GPa", "typex-16 | wood-89@406 | typex-16", nothing, 4.11,
     "deflection"},
    {"wood at 24 in", "formula, E 9.5 GPa", "typex-16 | wood-89@610 | typex-16", nothing, 3.59,
     "deflection"},
    {"2x4 to 14 ft", "IRC R602.3(5), from memory", "typex-16 | wood-89@305 | typex-16", nothing,
     4.267, "prescriptive limit"},
    {"2x6 to 20 ft", "IRC R602.3(5), from memory", "typex-16 | wood-140@406 | typex-16", nothing,
     6.096, "prescriptive limit"},
    {"2x3 to 10 ft", "IRC R602.3(5), from memory", "typex-16 | wood-64@305 | typex-16", nothing,
     3.048, "prescriptive limit"},
    {"bearing wood to 10 ft", "IRC R602.3(5), from memory", "typex-16 | wood-140@406 | typex-16",
     bearing, 3.048, "prescriptive limit"},
};

START_TEST(heights) {
  const struct height_row *row = &height_rows[_i];
  brief b = plain_brief();
  row->brief(&b);
  wall w = parsed(row->line);
  height_verdict v = structure_height(memory, shop, &b, &w);
  ck_assert_msg(fabs(v.limit_m - row->limit_m) <= HEIGHT_M, "%s (%s): %.4f m, expected %.3f",
                row->name, row->source, v.limit_m, row->limit_m);
  ck_assert_msg(strcmp(v.governs, row->governs) == 0, "%s: %s governs", row->name, v.governs);
  ck_assert_ptr_nonnull(v.source);
}
END_TEST

/* Leaves of equal keys give equal heights: over all faces of one board on all single frames of the
 * catalog. */
START_TEST(height_keys) {
  brief b = plain_brief();
  double seen[64][4];
  ck_assert(shop->frame_count <= 64);
  for (size_t k = 0; k < shop->frame_count; k++) {
    for (int key = 0; key < 4; key++) seen[k][key] = 0;
    for (size_t i = 0; i < shop->layer_count; i++) {
      wall w = wall_empty();
      w.frame = (int)k;
      w.spacing_mm = 406;
      w.side[0] = w.side[1] = (face){1, {(int)i}};
      unsigned key = structure_height_key(shop, &w.side[0]);
      double found = structure_height(NULL, shop, &b, &w).limit_m;
      ck_assert(key < 4);
      ck_assert(seen[k][key] <= 0 || fabs(seen[k][key] - found) <= 0);
      seen[k][key] = found;
    }
  }
}
END_TEST

/* ---- rules ---- */

typedef bool rule(const catalog *c, const brief *b, const wall *w, const char **why);

static bool fastening_a(const catalog *c, const brief *b, const wall *w, const char **why) {
  return structure_fastening_ok(c, b, w, SIDE_A, why);
}
static bool wet_a(const catalog *c, const brief *b, const wall *w, const char **why) {
  return structure_wet_ok(c, b, w, SIDE_A, why);
}
static bool abuse_a(const catalog *c, const brief *b, const wall *w, const char **why) {
  return structure_abuse_ok(c, b, w, SIDE_A, why);
}
#define bearing_ok        structure_bearing_ok
#define shear_ok          structure_shear_ok
#define noncombustible_ok structure_noncombustible_ok
#define services_ok       structure_services_ok

static void floors(brief *b, int n) {
  b->loadbearing = true;
  b->floors_above = n;
}
static void roof(brief *b) {
  floors(b, 0);
}
static void one_floor(brief *b) {
  floors(b, 1);
}
static void two_floors(brief *b) {
  floors(b, 2);
}
static void five_floors(brief *b) {
  floors(b, 5);
}
static void unsaid(brief *b) {
  floors(b, -1);
}
static void shear_a(brief *b) {
  b->shear_side = SIDE_A;
}
static void strict(brief *b) {
  b->noncombustible = NONCOMBUSTIBLE_STRICT;
}
static void frt(brief *b) {
  b->noncombustible = NONCOMBUSTIBLE_FRT_OK;
}
static void frt_bearing(brief *b) {
  frt(b);
  b->loadbearing = true;
}
static void frt_3h(brief *b) {
  frt(b);
  b->fire_min = 180;
}
static void heavy(brief *b) {
  b->side[SIDE_A].fastening = FASTENING_HEAVY;
}
static void light(brief *b) {
  b->side[SIDE_A].fastening = FASTENING_LIGHT;
}
static void wet(brief *b) {
  b->side[SIDE_A].wet = true;
}
static void abuse(brief *b) {
  b->side[SIDE_A].abuse = true;
}
static void wet_abuse(brief *b) {
  wet(b);
  abuse(b);
}
static void riser(brief *b, double mm) {
  b->riser_m = mm * 1e-3;
}
static void riser_89(brief *b) {
  riser(b, 89);
}
static void riser_105(brief *b) {
  riser(b, 105);
}
static void riser_130(brief *b) {
  riser(b, 130);
}
static void run_50(brief *b) {
  b->run_m = 0.050;
}
static void run_50_bearing(brief *b) {
  run_50(b);
  b->loadbearing = true;
}
static void run_38(brief *b) {
  b->run_m = 0.038;
}

#define CP       "common practice, no source"
#define IRC      "IRC R602.3(5), IBC 2308, from memory"
#define IBC603   "IBC 603.1, from memory"
#define IRC6026  "IRC R602.6, from memory"
#define WOOD4_24 "typex-16 | wood-89@610 | typex-16"
#define WOOD4_16 "typex-16 | wood-89@406 | typex-16"
#define WOOD6_24 "typex-16 | wood-140@610 | typex-16"
#define WOOD6_16 "typex-16 | wood-140@406 | typex-16"
#define LIGHT_24 "typex-16 | steel-92-18@610 | typex-16"

static const struct rule_row {
  const char *name, *source;
  rule *rule;
  void (*brief)(brief *);
  const char *line;
  bool keeps;
} rule_rows[] = {
    {"no load, no rule", CP, bearing_ok, nothing, LIGHT_24, true},
    {"2x4 at 24 in under a roof", IRC, bearing_ok, roof, WOOD4_24, true},
    {"2x4 at 24 in under a floor", IRC, bearing_ok, one_floor, WOOD4_24, false},
    {"2x4 at 16 in under a floor", IRC, bearing_ok, one_floor, WOOD4_16, true},
    {"2x4 under two floors", IRC, bearing_ok, two_floors, "typex-16 | wood-89@305 | typex-16",
     false},
    {"2x6 at 24 in under a floor", IRC, bearing_ok, one_floor, WOOD6_24, true},
    {"2x6 at 24 in under two floors", IRC, bearing_ok, two_floors, WOOD6_24, false},
    {"2x6 at 16 in under two floors", IRC, bearing_ok, two_floors, WOOD6_16, true},
    {"2x6 at 24 in under more", CP, bearing_ok, five_floors, WOOD6_24, false},
    {"2x6 at 16 in under more: an engineer", CP, bearing_ok, five_floors, WOOD6_16, true},
    {"floors not said: one is taken", CP, bearing_ok, unsaid, WOOD4_24, false},
    {"floors not said, close studs", CP, bearing_ok, unsaid, WOOD4_16, true},
    {"2x3 never bears", IRC, bearing_ok, roof, "typex-16 | wood-64@305 | typex-16", false},
    {"staggered counts by its studs", IRC, bearing_ok, two_floors,
     "typex-16 | wood-89-stag-140@406 | typex-16", false},
    {"light steel", CP, bearing_ok, roof, "typex-16 | steel-92-30@406 | typex-16", false},
    {"33 mil steel", CP, bearing_ok, five_floors, "typex-16 | steel-92-33@406 | typex-16", true},
    {"no shear side", CP, shear_ok, nothing, LIGHT_24, true},
    {"no panel", CP, shear_ok, shear_a, WOOD4_16, false},
    {"panel at the studs", CP, shear_ok, shear_a, "typex-16 + osb-11 | wood-89@406 | typex-16",
     true},
    {"panel on the other side", CP, shear_ok, shear_a, "typex-16 | wood-89@406 | typex-16 + osb-11",
     false},
    {"panel off the studs", CP, shear_ok, shear_a, "osb-11 + typex-16 | wood-89@406 | typex-16",
     false},
    {"panel on a channel", CP, shear_ok, shear_a,
     "typex-16 + osb-11 | rc@610 | wood-89@406 | typex-16", false},
    {"panel under a channel", CP, shear_ok, shear_a,
     "typex-16 | rc@610 | on osb-11 | wood-89@406 | typex-16", true},
    {"panel on light steel", CP, shear_ok, shear_a,
     "typex-16 + ply-13 | steel-92-30@406 | typex-16", false},
    {"panel on 33 mil", CP, shear_ok, shear_a, "typex-16 + ply-13 | steel-92-33@406 | typex-16",
     true},
    {"wood anywhere", IBC603, noncombustible_ok, nothing, WOOD4_16, true},
    {"wood, strict", IBC603, noncombustible_ok, strict, WOOD4_16, false},
    {"steel, strict", IBC603, noncombustible_ok, strict, LIGHT_24, true},
    {"OSB, strict", CP, noncombustible_ok, strict, "typex-16 + osb-11 | steel-92-33@406 | typex-16",
     false},
    {"vinyl, strict", CP, noncombustible_ok, strict,
     "typex-16 + mlv-5 | steel-92-33@406 | typex-16", false},
    {"fibreboard, strict", CP, noncombustible_ok, strict,
     "typex-16 + fibreboard-13 | steel-92-33@406 | typex-16", false},
    {"cellulose, strict", CP, noncombustible_ok, strict,
     "typex-16 | steel-92-33@406, cell-89 | typex-16", false},
    {"OSB on an inner face, strict", CP, noncombustible_ok, strict,
     "typex-16 | steel-92-18-double@610, inner-a osb-11 | typex-16", false},
    {"treated wood, strict", IBC603, noncombustible_ok, strict,
     "typex-16 | wood-89-frt@406 | typex-16", false},
    {"treated wood allowed", IBC603, noncombustible_ok, frt,
     "typex-16 + ply-13-frt | wood-89-frt@406 | typex-16", true},
    {"untreated wood", IBC603, noncombustible_ok, frt, WOOD4_16, false},
    {"untreated plywood", IBC603, noncombustible_ok, frt,
     "typex-16 + ply-13 | wood-89-frt@406 | typex-16", false},
    {"treated wood that bears", IBC603, noncombustible_ok, frt_bearing,
     "typex-16 | wood-89-frt@406 | typex-16", false},
    {"treated wood beyond 2 h", IBC603, noncombustible_ok, frt_3h,
     "typex-16 | wood-89-frt@406 | typex-16", false},
    {"anchors in any wall", CP, fastening_a, light,
     "typex-16 | rc@610 | steel-92-18@610 | typex-16", true},
    {"heavy on wood", CP, fastening_a, heavy, WOOD4_24, true},
    {"heavy on a mount", CP, fastening_a, heavy, "typex-16 | rc@610 | wood-89@406 | typex-16",
     false},
    {"heavy opposite a mount", CP, fastening_a, heavy, "typex-16 | wood-89@406 | rc@610 | typex-16",
     true},
    {"heavy on 18 mil", CP, fastening_a, heavy, "typex-16 | steel-92-18@406 | typex-16", false},
    {"heavy on 30 mil at 24 in", CP, fastening_a, heavy, "typex-16 | steel-92-30@610 | typex-16",
     false},
    {"heavy on 30 mil at 16 in", CP, fastening_a, heavy, "typex-16 | steel-92-30@406 | typex-16",
     true},
    {"plain board, wet", CP, wet_a, wet, WOOD4_16, false},
    {"moisture board, wet", CP, wet_a, wet, "moist-16 | wood-89@406 | typex-16", true},
    {"cement over Type X, wet", CP, wet_a, wet, "cement-13 + typex-16 | wood-89@406 | typex-16",
     true},
    {"cement behind, wet", CP, wet_a, wet, "typex-16 + cement-13 | wood-89@406 | typex-16", false},
    {"plain board, abused", CP, abuse_a, abuse, WOOD4_16, false},
    {"abuse board", CP, abuse_a, abuse, "abuse-16 | wood-89@406 | typex-16", true},
    {"abuse board on the other side", CP, abuse_a, abuse, "typex-16 | wood-89@406 | abuse-16",
     false},
    {"tiled and abused", CP, abuse_a, wet_abuse, "cement-13 | wood-89@406 | typex-16", true},
    {"cement is no abuse board", CP, abuse_a, abuse, "cement-13 | wood-89@406 | typex-16", false},
    {"3 in drain in a 2x4", CP, services_ok, riser_89, WOOD4_16, true},
    {"3 in hub in a 2x4", CP, services_ok, riser_105, WOOD4_16, false},
    {"4 in hub in a 2x6", CP, services_ok, riser_130, WOOD6_16, true},
    {"4 in hub between staggered studs", CP, services_ok, riser_130,
     "typex-16 | wood-89-stag-140@406 | typex-16", true},
    {"3 in hub in a row and its gap", CP, services_ok, riser_105,
     "typex-16 | wood-89-double@406 | typex-16", true},
    {"4 in hub in a row and its gap", CP, services_ok, riser_130,
     "typex-16 | wood-89-double@406 | typex-16", false},
    {"3 in hub, gap lined", CP, services_ok, riser_105,
     "typex-16 | wood-89-double@406, inner-a typex-16 | typex-16", false},
    {"50 mm hole in a 2x4", IRC6026, services_ok, run_50, WOOD4_16, true},
    {"50 mm hole in a bearing 2x4", IRC6026, services_ok, run_50_bearing, WOOD4_16, false},
    {"50 mm hole in a bearing 2x6", IRC6026, services_ok, run_50_bearing, WOOD6_16, true},
    {"50 mm in a knock-out", CP, services_ok, run_50, LIGHT_24, false},
    {"38 mm in a knock-out", CP, services_ok, run_38, LIGHT_24, true},
    {"38 mm in a small stud", CP, services_ok, run_38, "typex-16 | steel-41-18@406 | typex-16",
     false},
};

START_TEST(rules) {
  const struct rule_row *row = &rule_rows[_i];
  brief b = plain_brief();
  const char *why = NULL;
  row->brief(&b);
  wall w = parsed(row->line);
  bool keeps = row->rule(shop, &b, &w, &why);
  ck_assert_msg(keeps == row->keeps, "%s (%s): %s", row->name, row->source,
                keeps ? "keeps the rule" : why);
  ck_assert_msg(keeps == (why == NULL), "%s: a reason stands with a refusal, and only there",
                row->name);
  ck_assert(row->rule(shop, &b, &w, NULL) == keeps);
}
END_TEST

/* ---- cautions ---- */
static const struct caution_row {
  void (*brief)(brief *);
  const char *line, *words;
  bool said;
} caution_rows[] = {
    {roof, "typex-16 | steel-92-33@406 | typex-16", "always engineered", true},
    {unsaid, WOOD4_16, "one floor and a roof is assumed", true},
    {one_floor, WOOD4_16, "assumed", false},
    {five_floors, WOOD6_16, "engineer must size", true},
    {two_floors, WOOD6_16, "engineer must size", false},
    {nothing, "typex-16 | rc@610 | steel-92-18@610 | typex-16", "bridging", true},
    {nothing, LIGHT_24, "bridging", false},
    {nothing, "typex-16 | steel-41-30@406 | typex-16", "estimated", true},
    {heavy, WOOD4_16, "backing", true},
    {light, WOOD4_16, "50 lb", true},
    {riser_89, WOOD4_16, "Drains", true},
    {shear_a, "typex-16 + osb-11 | wood-89@406 | typex-16", "shear", true},
};

START_TEST(cautions) {
  const struct caution_row *row = &caution_rows[_i];
  brief b = plain_brief();
  row->brief(&b);
  wall w = parsed(row->line);
  const char *out[STRUCTURE_MAX_CAUTIONS];
  int n = structure_cautions(shop, &b, &w, out);
  bool said = false;
  for (int i = 0; i < n; i++) said = said || strstr(out[i], row->words) != NULL;
  ck_assert_msg(said == row->said, "%s: \"%s\" is%s said", row->line, row->words,
                said ? "" : " not");
}
END_TEST

#define ROWS(table) (int)(sizeof(table) / sizeof((table)[0]))

int main(void) {
  Suite *s = suite_create("structure");
  TCase *t = tcase_create("structure");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, bare, 0, ROWS(bare_rows));
  tcase_add_loop_test(t, drywall, 0, ROWS(drywall_rows));
  tcase_add_loop_test(t, composite, 0, ROWS(composite_rows));
  tcase_add_loop_test(t, heights, 0, ROWS(height_rows));
  tcase_add_test(t, height_keys);
  tcase_add_loop_test(t, rules, 0, ROWS(rule_rows));
  tcase_add_loop_test(t, cautions, 0, ROWS(caution_rows));
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int bad = srunner_ntests_failed(r);
  srunner_free(r);
  return bad == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
