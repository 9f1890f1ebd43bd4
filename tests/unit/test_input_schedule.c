/* The wall schedule: every column, what a cell may say, adjacency, faults with their places,
 * classes, and the page that describes the columns. */
#include "input/schedule.h"

#include <check.h>
#include <math.h>
#include <string.h>

#include "base/file.h"
#include "input/schedule_row.h"

#define COUNT(table)    (sizeof(table) / sizeof((table)[0]))
#define LENGTH_ROUNDING 1e-9 /* m: sums of lengths, each a rounding or two from the exact one */

static jmp_buf out_of_memory;
static arena *memory;
static diag_list faults;
static const catalog *shipped;
static project p;
static schedule *s;
static brief b;

static void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
  shipped = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_ptr_nonnull(shipped);
}
static void teardown(void) {
  arena_free(memory);
}

static const char *messages(void) {
  text t;
  text_init(&t, memory, 1 << 20);
  for (size_t i = 0; i < faults.count; i++) {
    diag_print(&t, &faults.items[i]);
    text_char(&t, '\n');
  }
  return t.data;
}

/* A project of these members; the schedule in `csv` read for it. */
static bool read_walls(const char *members, const char *csv) {
  const char *file =
      text_format(memory, "{\"septum\": \"project/1\", \"walls\": \"walls.csv\"%s%s}",
                  members[0] ? ", " : "", members);
  const json_value *v = json_parse(memory, &faults, "p.json", file, strlen(file));
  ck_assert_msg(v != NULL && project_read(memory, &faults, shipped, v, &p), "%s: %s", file,
                messages());
  const csv_table *t = csv_parse(memory, &faults, "walls.csv", csv, strlen(csv));
  ck_assert_msg(t != NULL, "%s: %s", csv, messages());
  s = schedule_read(memory, &faults, shipped, &p, t);
  return s != NULL;
}

#define NINE_FEET "\"wall\": {\"height_ft\": 9}"
#define IBC       "\"code\": \"ibc\", \"building\": {\"storeys\": 3, \"sprinklered\": false}, " NINE_FEET
#define IBC_TALL                                                                                   \
  "\"code\": \"ibc\", \"building\": {\"storeys\": 5, \"sprinklered\": true}, " NINE_FEET

/* ---- what a brief says, as words ---- */

static void put_value(text *t, const char *name, double value, double usual) {
  if (text_equal(text_of(memory, value, 4), text_of(memory, usual, 4))) return;
  text_putf(t, " %s=", name);
  text_number(t, value, 4);
}

static void put_flag(text *t, const char *name, bool on) {
  if (on) text_putf(t, " %s", name);
}

static void put_target(text *t, const target *g) {
  text_putf(t, " %s", sound_metric_names[g->metric]);
  text_number(t, g->value, 2);
  put_flag(t, "field", g->basis == BASIS_FIELD);
  put_flag(t, "published", g->evidence == EVIDENCE_PUBLISHED);
  put_flag(t, "composite", g->composite);
  put_value(t, "confidence", g->confidence, 0.8);
  put_value(t, "margin", g->margin, 0);
}

static void put_side(text *t, char side, const room_side *x, double ceiling) {
  static const char *const fastenings[] = {"", "light", "heavy"};
  text u;
  text_init(&u, memory, 500);
  if (x->room[0]) text_putf(&u, " %s", x->room);
  if (x->fastening) text_putf(&u, " %s", fastenings[x->fastening]);
  put_value(&u, "over", x->fastening_length_m, 0);
  put_flag(&u, "wet", x->wet);
  put_flag(&u, "abuse", x->abuse);
  put_value(&u, "finish", x->finish_level, 4);
  put_value(&u, "ceiling", ceiling, 0);
  if (u.len) text_putf(t, " %c(%s)", side, u.data + 1);
}

/* What differs from a wall of 3 m x 9 ft that must reach STC 50 and nothing else. */
static const char *shown(const brief *x) {
  text t;
  text_init(&t, memory, 2000);
  put_value(&t, "length", x->length_m, 3);
  put_value(&t, "height", x->height_m, 9 * 0.3048);
  bool usual = x->target_count == 1 && x->targets[0].metric == METRIC_STC;
  text u;
  text_init(&u, memory, 1000);
  for (int i = 0; i < x->target_count; i++) put_target(&u, &x->targets[i]);
  if (!usual || !text_equal(u.data, " STC50")) text_put(&t, u.data);
  put_value(&t, "fire", x->fire_min, 0);
  put_flag(&t, "bearing", x->loadbearing);
  put_value(&t, "floors", x->floors_above, -1);
  put_flag(&t, "strict", x->noncombustible == NONCOMBUSTIBLE_STRICT);
  put_flag(&t, "frt", x->noncombustible == NONCOMBUSTIBLE_FRT_OK);
  put_value(&t, "shear", x->shear_side, CATALOG_NONE);
  put_value(&t, "lateral", x->lateral_pa, 240);
  put_value(&t, "deflection", x->deflection, 240);
  put_side(&t, 'a', &x->side[0], x->ceiling_m[0]);
  put_side(&t, 'b', &x->side[1], x->ceiling_m[1]);
  put_flag(&t, "to-ceiling", x->top == TOP_CEILING);
  put_flag(&t, "slip", x->head == HEAD_SLIP);
  put_value(&t, "thickness-max", x->thickness_m.has_max ? x->thickness_m.max : 0, 0);
  put_value(&t, "mass-max", x->mass_kg_m2.has_max ? x->mass_kg_m2.max : 0, 0);
  put_value(&t, "riser", x->riser_m, 0);
  put_value(&t, "run", x->run_m, 0);
  for (int i = 0; i < x->opening_count; i++) {
    put_value(&t, "opening", x->openings[i].area_m2, 0);
    put_value(&t, "opening-stc", x->openings[i].stc, 0);
  }
  return t.len ? t.data + 1 : "";
}

/* ---- cells ---- */

/* A wall of 3 m that must reach STC 50, with one more column (or one in place of these). */
static const struct cell_row {
  const char *name, *header, *cell, *shown;
} cells[] = {
    /* lengths; exact from inch and foot */
    {"feet and inches", "length", "24ft-6in", "length=7.4676"},
    {"marks of feet and inches", "length", "\"12' 6\"\"\"", "length=3.81"},
    {"metres in the cell", "length", "7.3 m", "length=7.3"},
    {"header in feet", "length_ft", "10", "length=3.048"},
    {"header in brackets", "Length (ft)", "10", "length=3.048"},
    {"header in square brackets", "LENGTH [mm]", "2500", "length=2.5"},
    {"header with a blank", "length in", "120", "length=3.048"},
    {"a unit in the cell wins", "length_ft", "2 m", "length=2"},
    {"centimetres", "length_cm", "250", "length=2.5"},
    {"height", "height", "10ft", "height=3.048"},
    {"blanks inside quotes", "height", "\" 10ft \"", "height=3.048"},
    /* targets */
    {"a bare number", "target", "55", "STC55"},
    {"a metric", "target", "STC 55", "STC55"},
    {"without a blank, any case", "target", "stc55", "STC55"},
    {"with a hyphen", "target", "STC-55", "STC55"},
    {"a fraction of a point", "target", "52.5", "STC52.5"},
    {"Rw", "target", "Rw 53", "Rw53"},
    {"Rw and C", "target", "Rw+C 50", "Rw+C50"},
    {"Rw and Ctr", "target", "rw + ctr 45", "Rw+Ctr45"},
    {"OITC", "target", "OITC 38", "OITC38"},
    {"in the field", "target", "ASTC 47", "STC47 field"},
    {"several", "target", "\"STC 55; Rw+Ctr 48;60\"", "STC55 Rw+Ctr48 STC60"},
    {"one a line", "target", "\"55\n Rw 53\"", "STC55 Rw53"},
    {"metric", "metric", "oitc", "OITC50"},
    {"basis", "basis", "field", "STC50 field"},
    {"confidence", "confidence", "0.9", "STC50 confidence=0.9"},
    {"confidence in percent", "confidence", "90 %", "STC50 confidence=0.9"},
    {"confidence as a bare percent", "Confidence", "95", "STC50 confidence=0.95"},
    {"evidence", "evidence", "published", "STC50 published"},
    {"scope", "scope", "composite", "STC50 composite"},
    {"margin", "margin", "2.5", "STC50 margin=2.5"},
    /* fire */
    {"minutes", "fire", "60", "fire=60"},
    {"minutes with a word", "fire_min", "45 min", "fire=45"},
    {"an hour", "Fire rating", "1 h", "fire=60"},
    {"hours", "fire", "2hr", "fire=120"},
    {"with a hyphen", "fire", "2-hour", "fire=120"},
    {"half an hour", "fire", "1/2 h", "fire=30"},
    {"an hour and a half", "fire", "1-1/2 hr", "fire=90"},
    {"hours with a point", "fire", "1.5 hours", "fire=90"},
    {"none", "fire", "none", ""},
    /* structure */
    {"bearing", "loadbearing", "yes", "bearing"},
    {"bearing with hyphens", "Load-bearing", "x", "bearing"},
    {"not bearing", "loadbearing", "No", ""},
    {"strict", "noncombustible", "strict", "strict"},
    {"treated wood", "noncombustible", "FRT ok", "frt"},
    {"combustible", "noncombustible", "no", ""},
    {"shear", "shear side", "a", "shear=0"},
    {"lateral in psf", "lateral", "10 psf", "lateral=478.8026"},
    {"lateral in the header", "lateral_Pa", "480", "lateral=480"},
    {"deflection", "deflection", "L/360", "deflection=360"},
    {"deflection as a number", "deflection", "360", "deflection=360"},
    /* sides */
    {"from", "from", "kitchen", "a(kitchen)"},
    {"to", "Room B", "corridor", "b(corridor)"},
    {"fastening", "fastening_a", "heavy", "a(heavy)"},
    {"wet", "wet-a", "true", "a(wet)"},
    {"abuse", "abuse a", "1", "a(abuse)"},
    {"finish", "finish_a", "5", "a(finish=5)"},
    {"finish level", "finish level A", "3", "b(finish=3)"},
    {"ceiling", "ceiling_a", "2.4 m", "b(ceiling=2.4)"},
    {"top", "top", "ceiling", "to-ceiling"},
    {"head", "head", "slip", "slip"},
    /* limits and services */
    {"thickness", "thickness_max", "4-7/8in", "thickness-max=0.1238"},
    {"thickness in the header", "max thickness (in)", "4-7/8", "thickness-max=0.1238"},
    {"mass", "mass_max", "10 psf", "mass-max=48.8243"},
    {"mass in SI", "mass_max", "50 kg/m2", "mass-max=50"},
    {"mass in the header", "mass_max_kg_m2", "50", "mass-max=50"},
    {"riser", "riser_in", "3", "riser=0.0762"},
    {"run", "run", "50 mm", "run=0.05"},
    /* an opening needs two columns: its area stands in the second */
    {"opening by its kind", "opening_area_ft2,opening kind", "20,door solid core",
     "opening=1.8581 opening-stc=22"},
    {"opening by its rating", "opening_stc,opening_area", "35,2 m2", "opening=2 opening-stc=35"},
    {"square feet", "opening stc,opening area", "35,20 sf", "opening=1.8581 opening-stc=35"},
    /* what is not said */
    {"a hyphen alone is empty", "fire", "-", ""},
    {"a column of the user's", "colour", "red", ""},
    {"a note", "Remarks", "anything, at all", ""},
};

static bool names(const char *header, const char *column) {
  return strncmp(header, column, strlen(column)) == 0;
}

START_TEST(a_cell_is_read) {
  const struct cell_row *row = &cells[_i];
  const char *h = row->header, *comma = strchr(row->cell, ',');
  bool length = csv_same(text_copyn(memory, h, strlen(h) < 6 ? strlen(h) : 6), "length");
  bool two = strchr(h, ',') != NULL;
  const char *cell = comma && !two ? text_format(memory, "\"%s\"", row->cell) : row->cell;
  const char *csv = text_format(memory, "id,%s%s%s\nW1,%s%s%s\n", length ? "" : "length_m,",
                                names(h, "target") ? "" : "target,", h, length ? "" : "3,",
                                names(h, "target") ? "" : "50,", cell);
  ck_assert_msg(read_walls(IBC, csv), "%s: %s", row->name, messages());
  schedule_brief(s, 0, &b);
  ck_assert_msg(text_equal(shown(&b), row->shown), "%s: %s", row->name, shown(&b));
}
END_TEST

START_TEST(columns_of_a_pair_belong_to_their_sides) {
  ck_assert_msg(read_walls(IBC, "id;length;target;from;to;fastening_b;fastening length b;wet_b;"
                                "abuse_b;finish_b;ceiling_b;fastening a;floors above;loadbearing\n"
                                "W1;3m;50;x;y;heavy;1m;yes;yes;2;2m;heavy;2;yes\n"),
                "%s", messages());
  /* side B asks more, so the wall is turned; its class is seen from the other side */
  schedule_brief(s, 0, &b);
  ck_assert_str_eq(shown(&b), "bearing floors=2 a(y heavy over=1 wet abuse finish=2 ceiling=2) "
                              "b(x heavy)");
  ck_assert(s->wall[0].turned);
  ck_assert_double_eq(s->wall[0].fastening_length_m[1], 1);
}
END_TEST

START_TEST(what_is_not_a_demand_stays_with_the_wall) {
  ck_assert_msg(
      read_walls(IBC ", \"types\": {\"P1\": \"typex-16 | wood-89@406 | typex-16\"}",
                 "id,level,from,to,length_ft,target,qty,corners,tees,free ends,doors,Existing "
                 "Type,paint\n"
                 "W-1,L2,a,b,10,50,3,2,0,1,1,p-1,red\n"
                 "W2,l 2,c,d,20,50,,,,,,,\n"),
      "%s", messages());
  const schedule_wall *one = &s->wall[0], *two = &s->wall[1];
  ck_assert_int_eq(s->count, 2);
  ck_assert_int_eq(s->class_count, 1);
  ck_assert_str_eq(one->id, "W-1");
  ck_assert_str_eq(two->storey, "L2");
  ck_assert_int_eq(s->storey_count, 1);
  ck_assert_int_eq(one->count, 3);
  ck_assert_int_eq(two->count, 1);
  ck_assert(one->corners == 2 && one->tees == 0 && one->free_ends == 1 && one->doors == 1);
  ck_assert(two->corners == -1 && two->tees == -1 && two->free_ends == -1 && two->doors == -1);
  ck_assert_int_eq(one->mark, 0);
  ck_assert_int_eq(two->mark, CATALOG_NONE);
  ck_assert_str_eq(csv_text(one->row, csv_column(s->table, "paint")), "red");
  ck_assert(fabs(s->classes[0].run_m - 50 * 0.3048) < LENGTH_ROUNDING);
  schedule_brief(s, 0, &b);
  ck_assert(b.corners == 2 && b.tees == 0 && b.free_ends == 1 && b.doors == 1);
  schedule_brief(s, 1, &b);
  ck_assert(b.corners == -1 && b.doors == -1);
  ck_assert_str_eq(b.title, "W2");
  ck_assert_str_eq(shown(&b), "length=6.096 a(c) b(d)");
}
END_TEST

/* ---- defaults of the project ---- */

static const struct default_row {
  const char *name, *members, *cells, *shown; /* cells: header, newline, row */
} defaults[] = {
    {"target", "\"target\": {\"value\": 48, \"confidence\": 0.7}, " IBC, "id,length\nW1,3m",
     "STC48 confidence=0.7"},
    {"a row that gives a target takes none of it",
     "\"target\": {\"value\": 48, \"margin\": 3}, " IBC, "id,length,target\nW1,3m,50", ""},
    {"a row changes the default target",
     "\"targets\": [{\"value\": 48}, {\"metric\": \"Rw\", \"value\": 51}], " IBC,
     "id,length,basis,margin,evidence,scope\nW1,3m,field,1,published,composite",
     "STC48 field published composite margin=1 Rw51 field published composite margin=1"},
    {"metric, basis, confidence, evidence, margin",
     "\"metric\": \"Rw\", \"basis\": \"field\", \"confidence\": 0.6, \"evidence\": \"published\", "
     "\"margin\": 2, " IBC,
     "id,length,target\nW1,3m,50", "Rw50 field published confidence=0.6 margin=2"},
    {"an adjacency takes them too", "\"confidence\": 0.6, \"margin\": 2, " IBC,
     "id,length,adjacency\nW1,3m,dwelling-dwelling", "STC50 confidence=0.6 margin=2 fire=60"},
    {"structure, services, sides",
     "\"structure\": {\"loadbearing\": true, \"floors_above\": 1, \"noncombustible\": \"frt_ok\", "
     "\"lateral_psf\": 10}, \"services\": {\"riser_in\": 3}, \"sides\": {\"a\": {\"room\": \"x\", "
     "\"finish_level\": 5}}, " IBC,
     "id,length,target\nW1,3m,50",
     "bearing floors=1 frt lateral=478.8026 a(x finish=5) riser=0.0762"},
    {"a row says no to them",
     "\"structure\": {\"loadbearing\": true, \"noncombustible\": \"strict\"}, \"sides\": {\"b\": "
     "{\"wet\": true, \"fastening\": \"heavy\"}}, \"limits\": {\"thickness_in\": {\"max\": "
     "6}}, " IBC,
     "id,length,target,loadbearing,noncombustible,wet b,fastening b,thickness_max\n"
     "W1,3m,50,no,no,no,none,200mm",
     "thickness-max=0.2"},
    {"limits and fire",
     "\"limits\": {\"thickness_mm\": {\"max\": 150}, \"mass_kg_m2\": {\"max\": 60}}, "
     "\"fire_min\": 45, " IBC,
     "id,length,target\nW1,3m,50", "fire=45 thickness-max=0.15 mass-max=60"},
    {"an adjacency without minutes keeps the project's", "\"fire_min\": 45, " IBC,
     "id,length,adjacency\nW1,3m,retail-retail", "fire=45"},
    {"an adjacency with minutes does not", "\"fire_min\": 45, " IBC,
     "id,length,adjacency\nW1,3m,dwelling-dwelling", "fire=60"},
    {"top, head and ceilings",
     "\"code\": \"ibc\", \"wall\": {\"height_ft\": 9, \"head\": \"slip\", \"top\": \"ceiling\", "
     "\"ceiling_a_m\": 2, \"ceiling_b_m\": 2}",
     "id,length,target\nW1,3m,50", "a(ceiling=2) b(ceiling=2) to-ceiling slip"},
};

START_TEST(a_default_of_the_project) {
  const struct default_row *row = &defaults[_i];
  ck_assert_msg(read_walls(row->members, row->cells), "%s: %s", row->name, messages());
  schedule_brief(s, 0, &b);
  ck_assert_msg(text_equal(shown(&b), row->shown), "%s: %s", row->name, shown(&b));
}
END_TEST

/* ---- adjacency: values of catalogs/targets.json, whose sources they carry (IBC 2021 1206.2 and
 * IBC from memory, NBC 2020 from memory, ANSI S12.60-2010 from memory, FGI 2018, HUD 1967, LEED v4)
 * ---- */

static const struct adjacency_row {
  const char *name, *members, *columns, *cells, *shown;
  const char *basis; /* stands in the words about where it comes from */
} adjacencies[] = {
    {"the code's row", IBC, "adjacency", "dwelling-dwelling", "fire=60", "IBC 2021 1206.2"},
    {"named in the answer", IBC, "adjacency", "dwelling-dwelling", "fire=60",
     "dwelling unit to dwelling unit (ibc-dwelling-dwelling): STC 50; fire 60 min. STC 50"},
    {"any case, blanks", IBC, "Adjacency", "Dwelling Dwelling", "fire=60", "ibc-dwelling-dwelling"},
    {"the other way round", IBC, "adjacency", "corridor-dwelling", "fire=60",
     "ibc-dwelling-corridor"},
    {"with to", IBC, "adjacency", "corridor to dwelling", "fire=60", "ibc-dwelling-corridor"},
    {"with a stroke", IBC, "adjacency", "dwelling / corridor", "fire=60", "ibc-dwelling-corridor"},
    {"sprinklered", IBC_TALL, "adjacency", "dwelling-corridor", "fire=30", "30 min, sprinklered"},
    {"sprinklered, where nothing is said of that", IBC_TALL, "adjacency", "dwelling-dwelling",
     "fire=60", "fire 60 min."},
    {"a shop", IBC, "adjacency", "dwelling-shop", "fire=120", "fire 120 min"},
    {"a shop, sprinklered", IBC_TALL, "adjacency", "dwelling-shop", "fire=60", "sprinklered"},
    {"below four storeys", IBC, "adjacency", "dwelling-stair", "fire=60", "fire 60 min."},
    {"from four storeys", IBC_TALL, "adjacency", "dwelling-shaft", "fire=120",
     "120 min, four storeys or more"},
    {"storeys not said", "\"code\": \"ibc\", " NINE_FEET, "adjacency", "dwelling-shaft", "fire=120",
     "storeys not said: taken as four or more"},
    {"another code", "\"code\": \"nbc\", " NINE_FEET, "adjacency", "dwelling-dwelling", "fire=60",
     "nbc-dwelling-dwelling"},
    {"that code's own value", "\"code\": \"nbc\", " NINE_FEET, "adjacency", "dwelling-shaft",
     "STC55", "NBC 2020"},
    {"the field value", IBC, "adjacency,basis", "dwelling-dwelling,field", "STC45 field fire=60",
     "STC 45 in the field"},
    {"no field value stated", IBC, "adjacency,basis", "classroom-music,field", "STC60",
     "no value in the field is stated"},
    {"a guideline", IBC, "adjacency", "classroom-corridor", "STC45", "ANSI S12.60"},
    {"a guideline's scope", IBC, "adjacency", "patient-corridor", "STC35 composite", "FGI 2018"},
    {"the row's own scope", IBC, "adjacency,scope", "patient-corridor,wall", "STC35", "FGI 2018"},
    {"by id", IBC, "adjacency", "hud-bedroom-bedroom-ii", "STC52", "grade II"},
    {"an id of a guideline beside the code's row", IBC, "adjacency", "icc-g2-preferred", "STC60",
     "ICC G2-2010"},
    {"the row's own target", IBC, "adjacency,target", "dwelling-dwelling,STC 55", "STC55 fire=60",
     "STC 50, in place of which the schedule asks STC 55"},
    {"its own targets", IBC, "adjacency,target", "dwelling-dwelling,\"55;Rw 54\"",
     "STC55 Rw54 fire=60", "asks STC 55 and Rw 54"},
    {"the row's own fire", IBC, "adjacency,fire", "dwelling-dwelling,2 h", "fire=120",
     "fire 60 min, in place of which the schedule asks 120 min"},
    {"its own fire where none is stated", IBC, "adjacency,fire", "retail-retail,1 h", "fire=60",
     "; fire: the schedule asks 60 min"},
    {"no adjacency", IBC, "target", "50", "", ""},
};

START_TEST(an_adjacency) {
  const struct adjacency_row *row = &adjacencies[_i];
  const char *csv = text_format(memory, "id,length,%s\nW1,3m,%s\n", row->columns, row->cells);
  ck_assert_msg(read_walls(row->members, csv), "%s: %s", row->name, messages());
  schedule_brief(s, 0, &b);
  ck_assert_msg(text_equal(shown(&b), row->shown), "%s: %s", row->name, shown(&b));
  const char *words = s->classes[0].basis;
  ck_assert_msg(row->basis[0] ? strstr(words, row->basis) != NULL : words[0] == '\0', "%s: %s",
                row->name, words);
  ck_assert_str_eq(s->wall[0].basis, words);
}
END_TEST

START_TEST(a_class_names_each_source_once) {
  ck_assert(read_walls(IBC, "id,length,adjacency\nW1,3m,dwelling-dwelling\nW2,3m,dwelling-service\n"
                            "W3,3m,dwelling-dwelling\n"));
  ck_assert_int_eq(s->class_count, 1);
  const char *words = s->classes[0].basis;
  const char *first = strstr(words, "(ibc-dwelling-dwelling)");
  ck_assert_ptr_nonnull(first);
  ck_assert_ptr_null(strstr(first + 1, "(ibc-dwelling-dwelling)"));
  ck_assert_ptr_nonnull(strstr(words, "; dwelling unit to service area (ibc-dwelling-service)"));
}
END_TEST

/* ---- warnings and notes ---- */

static const struct warning_row {
  const char *name, *members, *csv, *message;
} warnings[] = {
    {"a target below the code's", IBC, "id,length,adjacency,target\nW1,3m,dwelling-dwelling,45",
     "walls.csv:2:25: warning[E241] D2 (target): ibc-dwelling-dwelling asks STC 50 here\n"},
    {"minutes below the code's", IBC, "id,length,adjacency,fire\nW1,3m,dwelling-dwelling,30",
     "walls.csv:2:25: warning[E241] D2 (fire): ibc-dwelling-dwelling asks 60 min here\n"},
    {"a length without a fastening", IBC, "id,length,target,fastening_length_a\nW1,3m,50,1m",
     "walls.csv:2:10: warning[E241] D2 (fastening_length_a): a fastening length without a "
     "fastening "
     "has no effect\n"},
    {"floors on nothing", IBC, "id,length,target,floors_above\nW1,3m,50,1",
     "walls.csv:2:10: warning[E241] D2 (floors_above): floors above count only where the wall is "
     "load-bearing\n"},
    {"fire without a code, once", NINE_FEET, "id,length,target,fire\nW1,3m,50,60\nW2,3m,50,60",
     "walls.csv:2:10: warning[E241] D2 (fire): without a code and without listings no wall can be "
     "shown to have a fire rating\n"},
    {"marks of nothing", IBC, "id,length,target,existing_type\nW1,3m,50,P1",
     "walls.csv:1:18: warning[E212] D1 (existing_type): the project has no \"types\", so what "
     "these "
     "marks cost cannot be told\n"},
    {"a column of the user's", IBC, "id,length,target,paint\nW1,3m,50,red",
     "walls.csv:1:18: note[E208] D1 (paint): the column \"paint\" is kept and not used\n"},
    {"a slip of a name", IBC, "id,length,target,existing tipe\nW1,3m,50,P1",
     "walls.csv:1:18: warning[E208] D1 (existing tipe): the column \"existing tipe\" is kept and "
     "not "
     "used; did you mean \"existing_type\"?\n"},
    {"a length in a unit of mass is another column", IBC, "id,length,target,height_psf\nW1,3m,50,9",
     "walls.csv:1:18: note[E208] D1 (height_psf): the column \"height_psf\" is kept and not "
     "used\n"},
};

START_TEST(a_warning) {
  const struct warning_row *row = &warnings[_i];
  ck_assert_msg(read_walls(row->members, row->csv), "%s: %s", row->name, messages());
  ck_assert_msg(text_equal(messages(), row->message), "%s: %s", row->name, messages());
}
END_TEST

/* ---- the file ---- */

static const struct file_row {
  const char *name, *csv;
} files[] = {
    {"plain", "id,length,target,fire\nW1,9ft-6in,STC 50,1 h\nW2,3 m,\"55;Rw 50\",-\n"},
    {"other order", "fire,target,ID,Length\n1 h,STC 50,W1,9ft-6in\n-,\"55;Rw 50\",W2,3 m\n"},
    {"CRLF, no end", "id,length,target,fire\r\nW1,9ft-6in,STC 50,1 h\r\nW2,3 m,\"55;Rw 50\","},
    {"a byte order mark",
     "\xEF\xBB\xBFid,length,target,fire\nW1,9ft-6in,STC 50,60\nW2,3 m,55;Rw 50,\n"},
    {"semicolons", "id;length;target;fire\nW1;9ft-6in;STC 50;1 h\nW2;3 m;\"55;Rw 50\";\n"},
    {"tabs", "id\tlength\ttarget\tfire\nW1\t9ft-6in\tSTC 50\t1 h\nW2\t3 m\t55;Rw 50\t\n"},
    {"blank rows",
     "\nid,length,target,fire\n\n,,,\nW1,9ft-6in,STC 50,1 h\n\n\nW2,3 m,55;Rw 50,\n,,,\n"},
    {"short rows, quotes",
     "\"id\",\"length\",\"target\",\"fire\",,\n\"W1\",\"9' 6\"\"\",\"50\",\"1 h\"\nW2,3 "
     "m,\"55; Rw 50\"\n"},
};

START_TEST(a_spreadsheet_exports_it_so) {
  ck_assert_msg(read_walls(IBC, files[_i].csv), "%s: %s", files[_i].name, messages());
  ck_assert_msg(s->count == 2 && s->class_count == 2, "%s", files[_i].name);
  schedule_brief(s, 0, &b);
  ck_assert_str_eq(b.title, "W1");
  ck_assert_str_eq(shown(&b), "length=2.8956 fire=60");
  schedule_brief(s, 1, &b);
  ck_assert_str_eq(b.title, "W2");
  ck_assert_str_eq(shown(&b), "STC55 Rw50");
}
END_TEST

/* ---- classes ---- */

static const struct class_row {
  const char *name, *members, *columns;
  const char *one, *other; /* cells of two walls */
  bool same;
  int turned; /* of the second; -1 = not asked */
} classes[] = {
    {"length", IBC, "length,target", "3m,50", "4m,50", true, 0},
    {"count", IBC, "length,target,count", "3m,50,1", "3m,50,9", true, 0},
    {"rooms", IBC, "length,target,from", "3m,50,x", "3m,50,y", true, 0},
    {"ends and doors", IBC, "length,target,corners,tees,doors", "3m,50,1,2,3", "3m,50,,,", true, 0},
    {"storey", IBC, "length,target,storey", "3m,50,1", "3m,50,2", true, 0},
    {"storey with framing by storey", "\"same_framing\": \"storey\", " IBC, "length,target,storey",
     "3m,50,1", "3m,50,2", false, 0},
    {"storey spelled otherwise", "\"same_framing\": \"storey\", " IBC, "length,target,storey",
     "3m,50,Level 1", "3m,50,level-1", true, 0},
    {"one framing for all", "\"same_framing\": \"all\", " IBC, "length,target,storey", "3m,50,1",
     "3m,50,2", true, 0},
    {"a target said twice", IBC, "length,target,adjacency", "3m,50,", "3m,,classroom-classroom",
     true, 0},
    {"target", IBC, "length,target", "3m,50", "3m,51", false, 0},
    {"metric", IBC, "length,target", "3m,50", "3m,Rw 50", false, 0},
    {"basis", IBC, "length,target", "3m,50", "3m,ASTC 50", false, 0},
    {"confidence", IBC, "length,target,confidence", "3m,50,", "3m,50,0.9", false, 0},
    {"evidence", IBC, "length,target,evidence", "3m,50,", "3m,50,published", false, 0},
    {"scope", IBC, "length,target,scope", "3m,50,", "3m,50,composite", false, 0},
    {"margin", IBC, "length,target,margin", "3m,50,", "3m,50,1", false, 0},
    {"how many targets", IBC, "length,target", "3m,50", "3m,50;50", false, 0},
    {"height", IBC, "length,target,height", "3m,50,9ft", "3m,50,10ft", false, 0},
    {"height in other words", IBC, "length,target,height", "3m,50,9ft", "3m,50,108in", true, 0},
    {"fire", IBC, "length,target,fire", "3m,50,60", "3m,50,45", false, 0},
    {"bearing", IBC, "length,target,loadbearing", "3m,50,no", "3m,50,yes", false, 0},
    {"floors above", IBC, "length,target,loadbearing,floors_above", "3m,50,yes,1", "3m,50,yes,2",
     false, 0},
    {"floors above a wall that bears nothing", IBC, "length,target,floors_above", "3m,50,1",
     "3m,50,2", true, 0},
    {"noncombustible", IBC, "length,target,noncombustible", "3m,50,strict", "3m,50,frt_ok", false,
     0},
    {"lateral", IBC, "length,target,lateral", "3m,50,5psf", "3m,50,10psf", false, 0},
    {"deflection", IBC, "length,target,deflection", "3m,50,L/240", "3m,50,L/360", false, 0},
    {"top", IBC, "length,target,top", "3m,50,deck", "3m,50,ceiling", false, 0},
    {"head", IBC, "length,target,head", "3m,50,rigid", "3m,50,slip", false, 0},
    {"thickness", IBC, "length,target,thickness_max", "3m,50,", "3m,50,6in", false, 0},
    {"mass", IBC, "length,target,mass_max", "3m,50,", "3m,50,10psf", false, 0},
    {"riser", IBC, "length,target,riser", "3m,50,", "3m,50,3in", false, 0},
    {"run", IBC, "length,target,run", "3m,50,", "3m,50,1in", false, 0},
    {"stretch of fastening", IBC, "length,target,fastening_a,fastening_length_a", "3m,50,heavy,",
     "3m,50,heavy,1m", true, 0},
    {"both sides", IBC, "length,target,wet_a,wet_b", "3m,50,yes,no", "3m,50,yes,yes", false, 0},
    /* an opening's share of the wall decides about the composite rating */
    {"length with an opening", IBC, "length,target,opening_area,opening_stc", "3m,50,2m2,30",
     "4m,50,2m2,30", false, 0},
    {"same opening", IBC, "length,target,opening_area,opening_stc", "3m,50,2m2,30", "3m,50,2m2,30",
     true, 0},
    {"opening", IBC, "length,target,opening_area,opening_stc", "3m,50,2m2,30", "3m,50,2m2,31",
     false, 0},
    {"length with a limit of cost", "\"limits\": {\"cost_per_m2\": {\"max\": 200}}, " IBC,
     "length,target", "3m,50", "4m,50", false, 0},
    {"doors with a limit of cost", "\"limits\": {\"cost_per_m2\": {\"max\": 200}}, " IBC,
     "length,target,doors", "3m,50,0", "3m,50,1", false, 0},
    /* mirrored demands: the side that asks more is the class's side A */
    {"fastening turned", IBC, "length,target,fastening_a,fastening_b", "3m,50,heavy,",
     "3m,50,,heavy", true, 1},
    {"heavy beside light", IBC, "length,target,fastening_a,fastening_b", "3m,50,heavy,light",
     "3m,50,light,heavy", true, 1},
    {"wet turned", IBC, "length,target,wet_a,wet_b", "3m,50,x,", "3m,50,,x", true, 1},
    {"abuse turned", IBC, "length,target,abuse_a,abuse_b", "3m,50,x,", "3m,50,,x", true, 1},
    {"finish turned", IBC, "length,target,finish_a,finish_b", "3m,50,5,4", "3m,50,4,5", true, 1},
    {"ceiling turned", IBC, "length,target,ceiling_a,ceiling_b", "3m,50,,2m", "3m,50,2m,", true, 1},
    {"shear turned", IBC, "length,target,shear_side", "3m,50,a", "3m,50,b", true, 1},
    {"shear against fastening", IBC, "length,target,shear_side,fastening_a,fastening_b",
     "3m,50,a,heavy,", "3m,50,b,heavy,", false, 0},
    {"shear and fastening turned together", IBC, "length,target,shear_side,fastening_a,fastening_b",
     "3m,50,a,heavy,", "3m,50,b,,heavy", true, 1},
    {"crossed demands are no mirror", IBC, "length,target,fastening_a,fastening_b,wet_a,wet_b",
     "3m,50,heavy,,x,", "3m,50,heavy,,,x", false, 0},
    {"crossed demands mirrored", IBC, "length,target,fastening_a,fastening_b,wet_a,wet_b",
     "3m,50,heavy,,,x", "3m,50,,heavy,x,", true, 1},
    /* locked types */
    {"free marks", IBC ", \"types\": {\"P1\": \"x\", \"P2\": \"y\"}", "length,target,existing_type",
     "3m,50,P1", "3m,50,P2", true, 0},
    {"a locked mark",
     IBC ", \"types\": {\"P1\": {\"line\": \"x\", \"locked\": true}, \"P2\": \"y\"}",
     "length,target,existing_type", "3m,50,P1", "3m,50,P2", false, 0},
    {"two walls of a locked mark", IBC ", \"types\": {\"P1\": {\"line\": \"x\", \"locked\": true}}",
     "length,target,existing_type", "3m,50,P1", "4m,50,p 1", true, 0},
    {"a locked wall keeps its sides",
     IBC ", \"types\": {\"P1\": {\"line\": \"x\", \"locked\": true}}",
     "length,target,existing_type,wet_a,wet_b", "3m,50,P1,x,", "3m,50,P1,,x", false, 0},
};

START_TEST(walls_of_one_class) {
  const struct class_row *row = &classes[_i];
  const char *csv =
      text_format(memory, "id,%s\nW1,%s\nW2,%s\n", row->columns, row->one, row->other);
  ck_assert_msg(read_walls(row->members, csv), "%s: %s", row->name, messages());
  ck_assert_msg((s->wall[0].of_class == s->wall[1].of_class) == row->same, "%s", row->name);
  ck_assert_int_eq(s->class_count, row->same ? 1 : 2);
  ck_assert_msg(!s->wall[0].turned, "%s: the first is turned", row->name);
  ck_assert_msg(s->wall[1].turned == (row->turned == 1), "%s: the second turned or not", row->name);
}
END_TEST

/* Both walls of a class ask the same of its two sides; each keeps its own rooms and stretches. */
START_TEST(a_turned_wall_is_seen_from_the_other_side) {
  ck_assert(read_walls(IBC, "id,length,target,from,to,fastening_a,fastening_b,fastening_length_a,"
                            "fastening_length_b,abuse_a,abuse_b\n"
                            "W1,3m,50,kitchen,hall,heavy,,2m,,,yes\n"
                            "W2,4m,50,hall 2,kitchen 2,,heavy,,1m,yes,\n"));
  ck_assert_int_eq(s->class_count, 1);
  schedule_brief(s, 0, &b);
  ck_assert_str_eq(shown(&b), "a(kitchen heavy over=2) b(hall abuse)");
  schedule_brief(s, 1, &b);
  ck_assert_str_eq(shown(&b), "length=4 a(kitchen 2 heavy over=1) b(hall 2 abuse)");
  ck_assert_str_eq(s->wall[1].from, "hall 2");
}
END_TEST

START_TEST(locked_classes_name_their_type) {
  ck_assert(read_walls(IBC
                       ", \"types\": {\"A\": \"x\", \"B\": {\"line\": \"y\", \"locked\": true}}",
                       "id,length,target,existing_type\nW1,3m,50,A\nW2,3m,50,B\nW3,3m,50,\n"));
  ck_assert_int_eq(s->class_count, 2);
  ck_assert_int_eq(s->classes[0].locked, CATALOG_NONE);
  ck_assert_int_eq(s->classes[1].locked, 1);
  ck_assert_int_eq(s->classes[0].count, 2);
  ck_assert_int_eq(s->classes[0].wall[1], 2);
}
END_TEST

/* ---- many walls ---- */

enum { MANY = 5000, KINDS = 40 };

START_TEST(five_thousand_walls_in_forty_classes) {
  text csv;
  text_init(&csv, memory, 1 << 20);
  text_put(&csv,
           "id,storey,from,to,length,height,target,fire,fastening_a,fastening_b,adjacency\r\n");
  for (int i = 0; i < MANY; i++) {
    int kind = (i * 7) % KINDS;
    text_putf(&csv, "W%d,%d,room %d,room %d,%dft-%din,9ft,STC %d,%d min,%s,%s,\r\n", i, i % 5, i,
              i + 1, 8 + i % 20, i % 12, 40 + kind / 2, 60, kind % 2 && i % 3 ? "heavy" : "",
              kind % 2 && i % 3 == 0 ? "heavy" : "");
  }
  ck_assert_msg(read_walls(IBC, csv.data), "%s", messages());
  ck_assert_int_eq(s->count, MANY);
  ck_assert_int_eq(s->class_count, KINDS);
  ck_assert_int_eq(s->storey_count, 5);
  int walls = 0;
  for (int i = 0; i < s->class_count; i++) {
    walls += s->classes[i].count;
    for (int k = 0; k < s->classes[i].count; k++)
      ck_assert_int_eq(s->wall[s->classes[i].wall[k]].of_class, i);
  }
  ck_assert_int_eq(walls, MANY);
}
END_TEST

START_TEST(too_many_classes) {
  text csv;
  text_init(&csv, memory, 1 << 20);
  text_put(&csv, "id,length,target,height_mm\n");
  for (int i = 0; i <= SCHEDULE_MAX_CLASSES; i++) text_putf(&csv, "W%d,3m,50,%d\n", i, 2500 + i);
  ck_assert(!read_walls(IBC, csv.data));
  ck_assert_str_eq(messages(),
                   "walls.csv:258:1: error[E203] A258 (id): a schedule may ask at most 256 "
                   "different things of its walls\n");
}
END_TEST

START_TEST(too_many_walls) {
  text csv;
  text_init(&csv, memory, 1 << 20);
  text_put(&csv, "id,length\n");
  for (int i = 0; i <= SCHEDULE_MAX_WALLS; i++) text_putf(&csv, "W%d,3m\n", i);
  ck_assert(!read_walls(IBC, csv.data));
  ck_assert_str_eq(
      messages(),
      "walls.csv:1:1: error[E203]: a schedule has from 1 to 20000 walls, found 20001\n");
}
END_TEST

/* ---- the page ---- */

/* The next word in backquotes of a table cell that ends at a bar; NULL at its end. */
static const char *next_name(const char **at) {
  const char *open = *at + strcspn(*at, "`|");
  if (*open != '`') return NULL;
  const char *close = strchr(open + 1, '`');
  *at = close + 1;
  return text_copyn(memory, open + 1, (size_t)(close - open - 1));
}

/* Every name on the page is read, and every column that is read is on the page. */
START_TEST(the_page_lists_the_columns) {
  size_t len;
  const char *page =
      file_read(memory, &faults, TEST_ROOT "/docs/formats/schedule.md", 1 << 20, &len);
  ck_assert_ptr_nonnull(page);
  const char *at = strstr(page, "## Columns"), *end = strstr(page, "## Adjacency");
  ck_assert(at != NULL && end != NULL);
  text header;
  text_init(&header, memory, 1 << 16);
  int columns = 0;
  const char *others[100];
  int other_count = 0;
  for (at = strstr(at, "\n| `"); at != NULL && at < end; at = strstr(at, "\n| `")) {
    const char *name;
    for (at += 2; (name = next_name(&at)) != NULL; columns++)
      text_putf(&header, "%s%s", header.len ? "," : "", name);
    for (at = strchr(at, '|') + 1; (name = next_name(&at)) != NULL;) others[other_count++] = name;
  }
  ck_assert_int_eq(columns, ROW_COLUMNS);
  const char *csv = text_format(memory, "%s\nW1\n", header.data);
  (void)read_walls(IBC, csv); /* the row lacks a length; the header is what counts */
  ck_assert_msg(strstr(messages(), "[E208]") == NULL, "%s", messages());
  ck_assert_int_gt(other_count, 10);
  for (int i = 0; i < other_count; i++) {
    diag_init(&faults, memory);
    (void)read_walls(IBC, text_format(memory, "id2,length,%s\n,3m,1\n", others[i]));
    const char *unread = text_format(memory, "the column \"%s\" is kept", others[i]);
    ck_assert_msg(strstr(messages(), unread) == NULL, "%s", messages());
  }
}
END_TEST

/* The demo is a whole building. */
START_TEST(the_demo_is_read) {
  const json_value *v = json_load(memory, &faults, TEST_ROOT "/docs/examples/kestrel-yard.json");
  ck_assert(v != NULL && project_read(memory, &faults, shipped, v, &p));
  const csv_table *t = csv_load(memory, &faults, p.walls);
  ck_assert_ptr_nonnull(t);
  s = schedule_read(memory, &faults, shipped, &p, t);
  ck_assert_msg(s != NULL && faults.count == 0, "%s", messages());
  ck_assert_int_ge(s->count, 300);
  ck_assert_int_ge(s->class_count, 20);
  ck_assert_int_eq(s->storey_count, 5);
  int turned = 0, counted = 0;
  for (int i = 0; i < s->count; i++) {
    turned += s->wall[i].turned;
    counted += s->wall[i].count > 1;
    ck_assert_msg(s->wall[i].mark != CATALOG_NONE, "%s has a mark", s->wall[i].id);
  }
  ck_assert_int_gt(turned, 0);
  ck_assert_int_gt(counted, 0);
}
END_TEST

int main(void) {
  Suite *suite = suite_create("schedule");
  TCase *t = tcase_create("schedule");
  tcase_add_checked_fixture(t, setup, teardown);
  tcase_add_loop_test(t, a_cell_is_read, 0, COUNT(cells));
  tcase_add_test(t, columns_of_a_pair_belong_to_their_sides);
  tcase_add_test(t, what_is_not_a_demand_stays_with_the_wall);
  tcase_add_loop_test(t, a_default_of_the_project, 0, COUNT(defaults));
  tcase_add_loop_test(t, an_adjacency, 0, COUNT(adjacencies));
  tcase_add_test(t, a_class_names_each_source_once);
  tcase_add_loop_test(t, a_warning, 0, COUNT(warnings));
  tcase_add_loop_test(t, a_spreadsheet_exports_it_so, 0, COUNT(files));
  tcase_add_loop_test(t, walls_of_one_class, 0, COUNT(classes));
  tcase_add_test(t, a_turned_wall_is_seen_from_the_other_side);
  tcase_add_test(t, locked_classes_name_their_type);
  tcase_add_test(t, five_thousand_walls_in_forty_classes);
  tcase_add_test(t, too_many_classes);
  tcase_add_test(t, too_many_walls);
  tcase_add_test(t, the_page_lists_the_columns);
  tcase_add_test(t, the_demo_is_read);
  suite_add_tcase(suite, t);
  SRunner *r = srunner_create(suite);
  srunner_run_all(r, CK_ENV);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed ? 1 : 0;
}
