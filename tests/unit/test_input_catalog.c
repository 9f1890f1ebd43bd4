/* The shipped catalogs, and what the reader refuses. */
#include "input/catalog.h"

#include <check.h>
#include <math.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

#include "base/file.h"

#define SIZE_M         1e-9   /* the files give sizes to 0.1 mm: equal but for rounding */
#define TABLE_DIGITS_3 0.5e-3 /* published inertias have three decimals of in4 */
#define MOMENT_DIGITS  0.005  /* published moments have two decimals of kip-in */
#define MASS_DIGITS    0.01   /* weights are given to 0.01 kg/m from 0.01 lb/ft */
#define IN4_PER_M4     (1 / (0.0254 * 0.0254 * 0.0254 * 0.0254))
#define KIP_IN_PER_N_M (1 / (4448.2216 * 0.0254))
#define LB_FT_PER_KG_M (0.3048 / 0.45359237)

static arena *memory;
static diag_list faults;
static jmp_buf out_of_memory;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
}

static void teardown(void) {
  arena_free(memory);
}

static const char *first_fault(void) {
  text t;
  if (faults.count == 0) return "";
  text_init(&t, memory, 1000);
  diag_print(&t, &faults.items[0]);
  return t.data;
}

static const catalog *load(void) {
  const catalog *c = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_msg(c != NULL, "%s", first_fault());
  ck_assert_int_eq((int)faults.count, 0);
  return c;
}

/* Ids that wall lines of any user may name. */
static const char *const layer_ids[] = {
    "gyp-10",   "gyp-13",       "gyp-16",        "typex-13",       "typex-16",  "typec-16",
    "abuse-16", "moist-16",     "cement-13",     "shaft-25",       "damp-16",   "osb-11",
    "osb-13",   "ply-13",       "fibreboard-13", "mlv-5",          "mlv-2",     "damp-layer",
    "gyp-6",    "gyp-13-light", "typec-13",      "typex-16-light", "impact-16", "glassmat-16",
    "damp-13",  "ply-19",       "ply-13-frt"};
static const char *const frame_ids[] = {"wood-64",
                                        "wood-89",
                                        "wood-140",
                                        "wood-89-stag-140",
                                        "wood-89-double",
                                        "wood-140-double",
                                        "wood-89-frt",
                                        "steel-64-18-double",
                                        "steel-92-18-double",
                                        "steel-92-33-double",
                                        "steel-92-54-double",
                                        "steel-64-18-stag-102"};
static const char *const fill_ids[] = {"glass-65",  "glass-89",  "glass-140", "glass-150",
                                       "stone-50",  "stone-65",  "stone-76",  "stone-89",
                                       "stone-140", "stone-150", "cell-89",   "cell-140"};

#define ROWS(table) (int)(sizeof(table) / sizeof(table)[0])

START_TEST(every_id) {
  const catalog *c = load();
  for (int i = 0; i < ROWS(layer_ids); i++)
    ck_assert_msg(catalog_layer(c, layer_ids[i]) >= 0, "%s", layer_ids[i]);
  for (int i = 0; i < ROWS(frame_ids); i++)
    ck_assert_msg(catalog_frame(c, frame_ids[i]) >= 0, "%s", frame_ids[i]);
  for (int i = 0; i < ROWS(fill_ids); i++)
    ck_assert_msg(catalog_fill(c, fill_ids[i]) >= 0, "%s", fill_ids[i]);
  static const int webs[] = {41, 64, 92, 102, 152}, mils[] = {18, 30, 33, 43, 54};
  for (int w = 0; w < 5; w++) {
    for (int m = 0; m < 5; m++) {
      const char *id = text_format(memory, "steel-%d-%d", webs[w], mils[m]);
      int i = catalog_frame(c, id);
      ck_assert_msg(i >= 0, "%s", id);
      ck_assert_int_eq(c->frames[i].mil, mils[m]);
    }
  }
  ck_assert_int_ge(catalog_mount(c, "rc"), 0);
  ck_assert_int_ge(catalog_mount(c, "clip"), 0);
  static const int spacings[] = {305, 406, 610};
  ck_assert_int_eq((int)c->spacing_count, 3);
  ck_assert_int_eq((int)c->mount_spacing_count, 3);
  for (int i = 0; i < 3; i++)
    ck_assert(c->spacings_mm[i] == spacings[i] && c->mount_spacings_mm[i] == spacings[i]);
}
END_TEST

/* Ids are nominal, records carry actual sizes. */
static const struct size_row {
  const char *id;
  double mm;
} size_rows[] = {{"gyp-13", 12.7},
                 {"typex-16", 15.9},
                 {"osb-11", 11.1},
                 {"wood-64", 63.5},
                 {"wood-89", 88.9},
                 {"wood-140", 139.7},
                 {"steel-41-18", 41.3},
                 {"steel-64-18", 63.5},
                 {"steel-92-18", 92.1},
                 {"steel-102-18", 101.6},
                 {"steel-152-18", 152.4},
                 {"wood-89-stag-140", 139.7},
                 {"steel-64-18-stag-102", 101.6}};

START_TEST(sizes) {
  const catalog *c = load();
  const struct size_row *row = &size_rows[_i];
  int l = catalog_layer(c, row->id), f = catalog_frame(c, row->id);
  double metres = l >= 0 ? c->layers[l].thickness_m : c->frames[f].row_depth_m;
  ck_assert_msg(fabs(metres - row->mm * 1e-3) < SIZE_M, "%s: %f", row->id, metres);
}
END_TEST

/* Masses held in the fit of the sound model. */
static const struct {
  const char *id;
  double kg_m2;
} mass_rows[] = {
    {"typex-16", 11.0}, {"typex-13", 9.8}, {"gyp-13", 7.8}, {"gyp-16", 10.0}, {"osb-13", 8.0}};

START_TEST(board_masses) {
  const catalog *c = load();
  ck_assert_double_eq(c->layers[catalog_layer(c, mass_rows[_i].id)].mass_kg_m2,
                      mass_rows[_i].kg_m2);
}
END_TEST

/* Section properties of a steel framing association guide, 33 ksi: weight lb/ft, Ix, Ixe in4,
 * allowable moment kip-in (the lower of local and distortional buckling). */
static const struct section_row {
  const char *id, *mark;
  double weight, inertia, effective, moment;
} section_rows[] = {
    {"steel-41-18", "162S125-18", .27, .038, .034, .61},
    {"steel-64-18", "250S125-18", .33, .099, .089, 1.03},
    {"steel-64-30", "250S125-30", .54, .161, .159, 2.09},
    {"steel-92-18", "362S125-18", .40, .234, .221, 1.48},
    {"steel-92-27", "362S125-27", .60, .347, .342, 2.67},
    {"steel-92-30", "362S125-30", .66, .381, .376, 3.08},
    {"steel-92-33", "362S162-33", .89, .551, .551, 5.29},
    {"steel-92-43", "362S162-43", 1.16, .710, .710, 7.34},
    {"steel-92-54", "362S162-54", 1.43, .873, .873, 9.22},
    {"steel-152-30", "600S125-30", .91, 1.275, 1.218, 5.39},
};

START_TEST(sections) {
  const catalog *c = load();
  const struct section_row *row = &section_rows[_i];
  const frame *f = &c->frames[catalog_frame(c, row->id)];
  ck_assert_msg(fabs(f->stud_mass_kg_m * LB_FT_PER_KG_M - row->weight) < MASS_DIGITS, "%s weight",
                row->mark);
  ck_assert_msg(fabs(f->inertia_m4 * IN4_PER_M4 - row->inertia) < TABLE_DIGITS_3, "%s Ix",
                row->mark);
  ck_assert_msg(fabs(f->inertia_effective_m4 * IN4_PER_M4 - row->effective) < TABLE_DIGITS_3,
                "%s Ixe", row->mark);
  ck_assert_msg(fabs(f->moment_n_m * KIP_IN_PER_N_M - row->moment) < MOMENT_DIGITS, "%s Ma",
                row->mark);
  ck_assert(!f->section_estimated);
}
END_TEST

/* Ix of structural marks whose published heights the deflection formula reproduces (a
 * manufacturer's table, AISI S100-07). */
static const struct {
  const char *id;
  double inertia;
} structural_rows[] = {{"steel-64-33", .235}, {"steel-64-43", .302}, {"steel-64-54", .370}};

START_TEST(structural_sections) {
  const catalog *c = load();
  const frame *f = &c->frames[catalog_frame(c, structural_rows[_i].id)];
  ck_assert(fabs(f->inertia_m4 * IN4_PER_M4 - structural_rows[_i].inertia) < TABLE_DIGITS_3);
}
END_TEST

/* Composite height 3-5/8 in, 24 in on centre, L/240 at 5 psf: 13 ft 7 in (a manufacturer's
 * composite table): back from its inertia, h^3 = 384 E I / (5 w 240). */
START_TEST(composite_height) {
  static const double one_inch_m = 0.0254;
  const catalog *c = load();
  const frame *f = &c->frames[catalog_frame(c, "steel-92-18")];
  double load_n_m = 5 * 47.88025898 * 0.6096;
  double height = cbrt(384 * f->modulus_pa * f->composite_inertia_m4 / (5 * load_n_m * 240));
  ck_assert_msg(fabs(height - (13 * 0.3048 + 7 * 0.0254)) < one_inch_m, "%f", height);
  ck_assert(c->frames[catalog_frame(c, "steel-92-18-double")].composite_inertia_m4 == 0);
}
END_TEST

/* What the records must be among themselves, whoever edits them. */
START_TEST(records_hang_together) {
  const catalog *c = load();
  for (size_t i = 0; i < c->frame_count; i++) {
    const frame *f = &c->frames[i];
    int single = catalog_frame(c, f->stud);
    ck_assert_msg(single >= 0, "%s: its stud %s is a frame", f->id, f->stud);
    ck_assert_msg(c->frames[single].layout == FRAME_SINGLE &&
                      c->frames[single].stud_depth_m == f->stud_depth_m,
                  "%s", f->id);
    ck_assert_msg(c->frames[single].inertia_m4 == f->inertia_m4, "%s: one stud, one inertia",
                  f->id);
    ck_assert_int_eq(f->rows, f->layout == FRAME_DOUBLE ? 2 : 1);
    ck_assert_msg(!(f->special && f->ordinary), "%s", f->id);
    ck_assert_msg(f->noncombustible == (f->material == FRAME_STEEL), "%s", f->id);
    /* Load-bearing steel is 33 mil or more with a 1-5/8 in flange (common practice, no source). */
    if (f->loadbearing && f->material == FRAME_STEEL)
      ck_assert_msg(f->mil >= 33 && f->flange_m > 0.041, "%s", f->id);
    /* Load-bearing height of wood at most 10 ft, 2x3 never (IRC R602.3(5), IBC 2308: from memory).
     */
    if (f->material == FRAME_WOOD)
      ck_assert_msg(f->loadbearing == (f->stud_depth_m > 0.08), "%s", f->id);
  }
  for (size_t i = 0; i < c->layer_count; i++) {
    const layer *l = &c->layers[i];
    ck_assert_msg(l->membrane == (l->bending_n_m == 0), "%s", l->id);
    ck_assert_msg(!(l->special && l->ordinary), "%s", l->id);
    ck_assert_msg(l->noncombustible == (l->material == LAYER_GYPSUM || l->material == LAYER_CEMENT),
                  "%s", l->id);
    if (l->shear) ck_assert_msg(l->material == LAYER_WOOD, "%s", l->id);
  }
}
END_TEST

/* Bending stiffness: 12.7 mm board with E 1.9 GPa (Long's 38 m/s at 700 kg/m3): E h^3 / 12 (1 -
 * nu^2), nu 0.3, within the mass's difference from 700 kg/m3, 12 %. */
START_TEST(stiffness_of_gypsum) {
  static const double share = 0.15;
  const catalog *c = load();
  double b = 1.9e9 * 0.0127 * 0.0127 * 0.0127 / (12 * (1 - 0.09));
  double found = c->layers[catalog_layer(c, "gyp-13")].bending_n_m;
  ck_assert_msg(fabs(found / b - 1) < share, "%f for %f", found, b);
}
END_TEST

/* IBC 2021 1206.2: 50, or 45 in the field. FGI 2018 Table 1.2-6 is composite. */
START_TEST(targets) {
  const catalog *c = load();
  const target_row *t = catalog_target(c, "dwelling-corridor", CODE_IBC);
  ck_assert_ptr_nonnull(t);
  ck_assert(t->value == 50 && t->field_value == 45 && !t->composite);
  ck_assert(t->fire_minutes == 60 && t->fire_minutes_sprinklered == 30);
  t = catalog_target(c, "patient-patient", CODE_NONE);
  ck_assert(t && t->value == 45 && t->composite);
  t = catalog_target(c, "dwelling-dwelling", CODE_NBC);
  ck_assert(t && t->value == 50 && t->field_value == 47);
  ck_assert_ptr_null(catalog_target(c, "dwelling-moon", CODE_IBC));
}
END_TEST

/* ---- names ---- */

static const struct said_row {
  const char *word, *ids; /* the ids it means, in order, with blanks between */
} said_rows[] = {{"typex-16", "typex-16"},
                 {"TypeX-16", "typex-16"},
                 {"5/8X", "typex-16"},
                 {"5/8 in X", "typex-16"},
                 {"5/8\" Type X", "typex-16"},
                 {"1/2 regular", "gyp-13"},
                 {"3-5/8 25ga", "steel-92-18"},
                 {"3 5/8 in 25 gauge", "steel-92-18"},
                 {"2x4", "wood-89"},
                 {"R13", "glass-89"},
                 {"r-13", "glass-89"},
                 {"3in mineral wool", "stone-76"},
                 {"RC", "rc"},
                 {"6 in 20ga structural", "steel-152-33"},
                 {"6in 20 ga drywall", "steel-152-30"},
                 {"3-5/8 20ga", "steel-92-30 steel-92-33"},
                 {"5/8", "gyp-16 typex-16"},
                 {"cellulose", "cell-89 cell-140"},
                 {"MLV", "mlv-5 mlv-2"},
                 {"1 inch shaft liner", "shaft-25"},
                 {"3-5/8 22ga", "steel-92-27"},
                 {"nothing like it", ""},
                 {"", ""},
                 {" - ", ""},
                 {"5/8 insulation", ""},
                 /* words in another order, and those that every good of the kind is called by */
                 {"25ga 3-5/8", "steel-92-18"},
                 {"20 gauge structural 3 5/8 in stud", "steel-92-33"},
                 {"18 mil 3-5/8 stud", "steel-92-18"},
                 {"2x4 stud", "wood-89"},
                 {"20ga 6", "steel-152-30 steel-152-33"},
                 {"type X 5/8", "typex-16"},
                 {"5/8 in Type X gypsum board", "typex-16"},
                 {"regular 1/2 board", "gyp-13"},
                 {"R13 batt insulation", "glass-89"},
                 {"mineral wool batt 3 in", "stone-76"},
                 {"board", ""},
                 {"stud", ""},
                 {"25 ga", ""},
                 {"R13 board", ""}};

START_TEST(what_people_say) {
  const catalog *c = load();
  catalog_ref refs[8];
  size_t n = catalog_find(c, said_rows[_i].word, refs, 8);
  text t;
  text_init(&t, memory, 400);
  for (size_t i = 0; i < n && i < 8; i++)
    text_putf(&t, "%s%s", i ? " " : "", catalog_id(c, refs[i]));
  ck_assert_str_eq(t.data, said_rows[_i].ids);
}
END_TEST

START_TEST(nearest) {
  const catalog *c = load();
  ck_assert_str_eq(catalog_nearest(c, "typex-61"), "typex-16");
  ck_assert_str_eq(catalog_nearest(c, "glas-89"), "glass-89");
  ck_assert_ptr_null(catalog_nearest(c, "qqqqqqqqqqqq"));
}
END_TEST

/* ---- faults ---- */

#define BOARD(rest)                                                                                \
  "{\"septum\":\"boards/"                                                                          \
  "1\",\"records\":[{\"id\":\"gyp-99\",\"name\":\"x\",\"material\":\"gypsum\",\"thickness_mm\":"   \
  "12.7,"                                                                                          \
  "\"source\":\"x\"" rest "}]}"
#define FILL(rest)                                                                                 \
  "{\"septum\":\"fills/"                                                                           \
  "1\",\"records\":[{\"id\":\"x-1\",\"name\":\"x\",\"material\":\"glass\",\"thickness_mm\":89,"    \
  "\"density_kg_m3\":12,\"resistivity_pa_s_m2\":5000,\"source\":\"x\"" rest "}]}"
#define MOUNT(spacings, rest)                                                                      \
  "{\"septum\":\"mounts/1\",\"spacings_mm\":" spacings                                             \
  ",\"records\":[{\"id\":\"x-1\",\"name\":\"x\",\"depth_mm\":13,"                                  \
  "\"rail\":\"x\",\"rail_mass_kg_m\":1,\"source\":\"x\"" rest "}]}"
#define FRAME(rest)                                                                                \
  "{\"septum\":\"frames/"                                                                          \
  "1\",\"spacings_mm\":[406],\"records\":[{\"id\":\"x-1\",\"name\":\"x\",\"stud\":\"x\","          \
  "\"runner\":\"x\","                                                                              \
  "\"stud_depth_mm\":90,\"stud_mass_kg_m\":1,\"runner_mass_kg_m\":1,\"inertia_mm4\":1000,"         \
  "\"modulus_gpa\":9,\"source\":\"x\"" rest "}]}"
#define TARGET(rest)                                                                               \
  "{\"septum\":\"targets/"                                                                         \
  "1\",\"records\":[{\"id\":\"x-1\",\"adjacency\":\"a-b\",\"name\":\"x\",\"scope\":\"wall\","      \
  "\"source\":\"x\"" rest "}]}"

static const struct fault_row {
  const char *json;
  error_code code;
  const char *path;
} fault_rows[] = {
    {BOARD(",\"mass_kg_m2\":-8.5,\"coincidence_m_s\":38"), ERROR_FIELD_RANGE,
     "$.records[0].mass_kg_m2"},
    {BOARD(",\"mass_kg_m2\":8.5"), ERROR_FIELD_MISSING, "$.records[0]"},
    {BOARD(",\"mass_kg_m2\":8.5,\"coincidence_m_s\":38,\"colour\":1"), ERROR_FIELD_UNKNOWN,
     "$.records[0].colour"},
    {BOARD(",\"mass_kg_m2\":\"8.5\",\"coincidence_m_s\":38"), ERROR_FIELD_TYPE,
     "$.records[0].mass_kg_m2"},
    {BOARD(",\"mass_kg_m2\":8.5,\"coincidence_m_s\":38,\"stock\":\"rare\""), ERROR_FIELD_CHOICE,
     "$.records[0].stock"},
    {BOARD(",\"mass_kg_m2\":8.5,\"coincidence_m_s\":38,\"said\":\"x\""), ERROR_FIELD_TYPE,
     "$.records[0].said"},
    {BOARD(",\"mass_kg_m2\":8.5,\"coincidence_m_s\":38,\"said\":[1]"), ERROR_FIELD_TYPE,
     "$.records[0].said[0]"},
    {BOARD(",\"mass_kg_m2\":8.5,\"coincidence_m_s\":38,\"type_c\":true"), ERROR_FIELD_CONFLICT,
     "$.records[0]"},
    {"{\"septum\":\"boards/1\",\"records\":[]}", ERROR_FIELD_TYPE, "$.records"},
    {"{\"septum\":\"boards/1\"}", ERROR_FIELD_MISSING, "$"},
    {"{\"septum\":\"boards/2\",\"records\":[]}", ERROR_FILE_KIND, "$.septum"},
    {"{\"septum\":\"planks/1\",\"records\":[]}", ERROR_FILE_KIND, "$.septum"},
    {"[]", ERROR_FILE_KIND, "$"},
    {FILL(",\"mass_kg_m2\":1.9"), ERROR_FIELD_CONFLICT, "$.records[0].mass_kg_m2"},
    {FILL(""), ERROR_FIELD_MISSING, "$.records[0]"},
    {MOUNT("[406]", ",\"kind\":\"clip\""), ERROR_FIELD_CONFLICT, "$.records[0]"},
    {MOUNT("[406]", ",\"kind\":\"channel\",\"clip\":\"x\""), ERROR_FIELD_CONFLICT, "$.records[0]"},
    {MOUNT("[610,406]", ",\"kind\":\"channel\""), ERROR_FIELD_RANGE, "$.spacings_mm[1]"},
    {MOUNT("[]", ",\"kind\":\"channel\""), ERROR_FIELD_TYPE, "$.spacings_mm"},
    {MOUNT("[406.5]", ",\"kind\":\"channel\""), ERROR_FIELD_RANGE, "$.spacings_mm[0]"},
    {FRAME(",\"material\":\"steel\",\"layout\":\"single\",\"row_depth_mm\":90"),
     ERROR_FIELD_MISSING, "$.records[0]"},
    {FRAME(",\"material\":\"wood\",\"layout\":\"single\",\"row_depth_mm\":90"),
     ERROR_FIELD_CONFLICT, "$.records[0]"},
    {FRAME(
         ",\"material\":\"wood\",\"stud_width_mm\":38,\"layout\":\"single\",\"row_depth_mm\":140"),
     ERROR_FIELD_CONFLICT, "$.records[0].row_depth_mm"},
    {FRAME(",\"material\":\"wood\",\"stud_width_mm\":38,\"layout\":\"staggered\",\"row_depth_mm\":"
           "90"),
     ERROR_FIELD_CONFLICT, "$.records[0].row_depth_mm"},
    {TARGET(",\"metric\":\"dB\",\"value\":50"), ERROR_FIELD_CHOICE, "$.records[0].metric"},
    {TARGET(",\"metric\":\"STC\",\"value\":50,\"field_value\":55"), ERROR_FIELD_RANGE,
     "$.records[0].field_value"},
    {TARGET(",\"metric\":\"STC\",\"value\":50.5"), ERROR_FIELD_RANGE, "$.records[0].value"},
};

START_TEST(refuses) {
  const struct fault_row *row = &fault_rows[_i];
  const json_value *root = json_parse(memory, &faults, "x.json", row->json, strlen(row->json));
  ck_assert_ptr_nonnull(root);
  ck_assert_msg(!catalog_check_file(memory, &faults, root), "%s is refused", row->json);
  ck_assert_int_ge((int)faults.count, 1);
  ck_assert_msg(faults.items[0].code == row->code, "%s: %s", row->json, first_fault());
  ck_assert_msg(faults.items[0].place.path && strcmp(faults.items[0].place.path, row->path) == 0,
                "%s", first_fault());
  ck_assert_int_gt(faults.items[0].place.line, 0);
}
END_TEST

static const char *const bad_ids[] = {
    "",       "Gyp",     "9gyp",
    "gyp 13", "gyp_13",  "gyp|13",
    "on",     "inner-a", "g1234567890123456789012345678901234567890"};

START_TEST(ids) {
  const char *json = text_format(
      memory,
      "{\"septum\":\"boards/1\",\"records\":[{\"id\":\"%s\",\"name\":\"x\",\"material\":\"gypsum\","
      "\"thickness_mm\":12.7,\"mass_kg_m2\":8,\"coincidence_m_s\":38,\"source\":\"x\"}]}",
      bad_ids[_i]);
  const json_value *root = json_parse(memory, &faults, "x.json", json, strlen(json));
  ck_assert_ptr_nonnull(root);
  ck_assert_msg(!catalog_check_file(memory, &faults, root), "\"%s\" is refused", bad_ids[_i]);
}
END_TEST

/* Every fault of a file shows, not the first only. */
START_TEST(all_faults_show) {
  static const char json[] =
      "{\"septum\":\"fills/"
      "1\",\"records\":[{\"id\":\"a\"},{\"id\":\"b\",\"name\":7},{\"id\":\"a\"}]}";
  const json_value *root = json_parse(memory, &faults, "x.json", json, strlen(json));
  ck_assert(!catalog_check_file(memory, &faults, root));
  bool duplicate = false, type = false, third = false;
  for (size_t i = 0; i < faults.count; i++) {
    duplicate = duplicate || faults.items[i].code == ERROR_CATALOG_DUPLICATE_ID;
    type = type || strcmp(faults.items[i].place.path, "$.records[1].name") == 0;
    third = third || strncmp(faults.items[i].place.path, "$.records[2]", 12) == 0;
  }
  ck_assert(duplicate && type && third);
}
END_TEST

static const char *const file_names[] = {"boards.json",    "frames.json",   "fills.json",
                                         "mounts.json",    "fire.json",     "targets.json",
                                         "published.json", "acoustics.json"};

/* A copy of the shipped catalogs with one word of one file replaced by another. */
static const char *copy_with(const char *folder, const char *file, const char *from,
                             const char *to) {
  const char *path = file_join(memory, TEST_BINARY_DIR, folder);
  mkdir(path, 0777);
  for (int i = 0; i < ROWS(file_names); i++) {
    size_t len = 0;
    char *bytes = file_read(memory, &faults,
                            file_join(memory, TEST_ROOT "/catalogs", file_names[i]), 1 << 24, &len);
    ck_assert_ptr_nonnull(bytes);
    const char *at = strcmp(file, file_names[i]) == 0 ? strstr(bytes, from) : NULL;
    if (strcmp(file, file_names[i]) == 0) ck_assert_ptr_nonnull(at);
    text t;
    text_init(&t, memory, 1 << 24);
    text_putn(&t, bytes, at ? (size_t)(at - bytes) : len);
    if (at) {
      text_put(&t, to);
      text_put(&t, at + strlen(from));
    }
    ck_assert(file_write(memory, &faults, file_join(memory, path, file_names[i]), t.data, t.len));
  }
  return path;
}

START_TEST(one_id_in_two_files) {
  const char *folder =
      copy_with("catalog-twice", "mounts.json", "\"id\": \"rc\"", "\"id\": \"typex-16\"");
  ck_assert_ptr_null(catalog_load(memory, &faults, folder));
  ck_assert_int_eq(faults.items[0].code, ERROR_CATALOG_DUPLICATE_ID);
  ck_assert_ptr_nonnull(strstr(faults.items[0].place.file, "mounts.json"));
}
END_TEST

START_TEST(a_missing_file) {
  const char *folder =
      copy_with("catalog-missing", "mounts.json", "\"id\": \"rc\"", "\"id\": \"rc\"");
  ck_assert_int_eq(remove(file_join(memory, folder, "fills.json")), 0);
  ck_assert_int_eq(remove(file_join(memory, folder, "boards.json")), 0);
  ck_assert_ptr_null(catalog_load(memory, &faults, folder));
  ck_assert_int_ge((int)faults.errors, 2);
  ck_assert_int_eq(faults.items[0].code, ERROR_SYSTEM_READ);
}
END_TEST

START_TEST(shipped_files_one_by_one) {
  const json_value *root =
      json_load(memory, &faults, file_join(memory, TEST_ROOT "/catalogs", file_names[_i]));
  ck_assert_ptr_nonnull(root);
  ck_assert_msg(catalog_check_file(memory, &faults, root), "%s", first_fault());
}
END_TEST

/* Memory that runs out anywhere ends in the jump, never in a crash. Steps grow, for time. */
START_TEST(memory_runs_out) {
  volatile long n = 1;
  volatile int failures = 0;
  for (;;) {
    jmp_buf failed;
    arena *a = arena_create(0, &failed);
    volatile bool done = false;
    ck_assert_ptr_nonnull(a);
    if (setjmp(failed) == 0) {
      diag_list d;
      diag_init(&d, a);
      arena_fail_at(n);
      done = catalog_load(a, &d, TEST_ROOT "/catalogs") != NULL;
    } else {
      failures++;
    }
    arena_fail_at(0);
    arena_free(a);
    if (done) break;
    n += 1 + n / 4;
  }
  ck_assert_int_gt(failures, 10);
}
END_TEST

int main(void) {
  Suite *suite = suite_create("input/catalog");
  TCase *t = tcase_create("catalog");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_set_timeout(t, 120);
  tcase_add_test(t, every_id);
  tcase_add_loop_test(t, sizes, 0, ROWS(size_rows));
  tcase_add_loop_test(t, board_masses, 0, ROWS(mass_rows));
  tcase_add_loop_test(t, sections, 0, ROWS(section_rows));
  tcase_add_loop_test(t, structural_sections, 0, ROWS(structural_rows));
  tcase_add_test(t, composite_height);
  tcase_add_test(t, records_hang_together);
  tcase_add_test(t, stiffness_of_gypsum);
  tcase_add_test(t, targets);
  tcase_add_loop_test(t, what_people_say, 0, ROWS(said_rows));
  tcase_add_test(t, nearest);
  tcase_add_loop_test(t, refuses, 0, ROWS(fault_rows));
  tcase_add_loop_test(t, ids, 0, ROWS(bad_ids));
  tcase_add_test(t, all_faults_show);
  tcase_add_test(t, one_id_in_two_files);
  tcase_add_test(t, a_missing_file);
  tcase_add_loop_test(t, shipped_files_one_by_one, 0, ROWS(file_names));
  tcase_add_test(t, memory_runs_out);
  suite_add_tcase(suite, t);
  SRunner *runner = srunner_create(suite);
  srunner_run_all(runner, CK_NORMAL);
  int failed = srunner_ntests_failed(runner);
  srunner_free(runner);
  return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}
