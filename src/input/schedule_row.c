#include "input/schedule_row.h"

#include <ctype.h>
#include <math.h>
#include <stddef.h>
#include <string.h>

#include "input/job_fields.h"

#define COUNT(table) (sizeof(table) / sizeof((table)[0]))

/* ---- the columns ---- */

/* What a cell holds. */
typedef enum cell_kind {
  CELL_TEXT, /* const char * */
  CELL_LENGTH,
  CELL_AREA,
  CELL_MASS,
  CELL_PRESSURE, /* double, SI */
  CELL_NUMBER,   /* double */
  CELL_INTEGER,  /* int */
  CELL_YES,      /* bool */
  CELL_WORD      /* int: index in `words` */
} cell_kind;

typedef struct column_row {
  const char *names; /* the first is the column's own; bars between them */
  cell_kind kind;
  bool above_min;  /* min itself is refused */
  double min, max; /* stored unit; wide guards against slips of a digit or a unit */
  const char *const *words;
  size_t offset; /* into row_values */
} column_row;

#define AT(member) offsetof(row_values, member)
static const column_row columns[ROW_COLUMNS] = {
    [COLUMN_ID] = {"id|wall id|wall", CELL_TEXT, 0, 0, 0, NULL, AT(id)},
    [COLUMN_STOREY] = {"storey|story|level|floor", CELL_TEXT, 0, 0, 0, NULL, AT(storey)},
    [COLUMN_FROM] = {"from|room a", CELL_TEXT, 0, 0, 0, NULL, AT(from)},
    [COLUMN_TO] = {"to|room b", CELL_TEXT, 0, 0, 0, NULL, AT(to)},
    [COLUMN_LENGTH] = {"length", CELL_LENGTH, 1, 0, 1000, NULL, AT(b.length_m)},
    [COLUMN_HEIGHT] = {"height", CELL_LENGTH, 1, 0, 30, NULL, AT(b.height_m)},
    [COLUMN_COUNT] = {"count|quantity|qty", CELL_INTEGER, 0, 1, 10000, NULL, AT(count)},
    [COLUMN_TARGET] = {"target", CELL_TEXT, 0, 0, 0, NULL, AT(target)},
    [COLUMN_METRIC] = {"metric", CELL_WORD, 0, 0, 0, sound_metric_names, AT(metric)},
    [COLUMN_BASIS] = {"basis", CELL_WORD, 0, 0, 0, job_basis_words, AT(basis)},
    [COLUMN_CONFIDENCE] = {"confidence", CELL_TEXT, 0, 0, 0, NULL, AT(confidence)},
    [COLUMN_EVIDENCE] = {"evidence", CELL_WORD, 0, 0, 0, job_evidence_words, AT(evidence)},
    [COLUMN_SCOPE] = {"scope", CELL_WORD, 0, 0, 0, job_scope_words, AT(scope)},
    [COLUMN_MARGIN] = {"margin", CELL_NUMBER, 0, 0, 30, NULL, AT(margin)},
    [COLUMN_ADJACENCY] = {"adjacency", CELL_TEXT, 0, 0, 0, NULL, AT(adjacency)},
    [COLUMN_FIRE] = {"fire|fire rating|fire min", CELL_TEXT, 0, 0, 0, NULL, AT(fire)},
    [COLUMN_LOADBEARING] = {"loadbearing", CELL_YES, 0, 0, 0, NULL, AT(b.loadbearing)},
    [COLUMN_FLOORS_ABOVE] = {"floors above", CELL_INTEGER, 0, 0, 100, NULL, AT(b.floors_above)},
    [COLUMN_NONCOMBUSTIBLE] = {"noncombustible", CELL_WORD, 0, 0, 0, job_noncombustible_words,
                               AT(noncombustible)},
    [COLUMN_SHEAR_SIDE] = {"shear side", CELL_WORD, 0, 0, 0, job_shear_words, AT(shear_side)},
    [COLUMN_LATERAL] = {"lateral", CELL_PRESSURE, 1, 0, 10000, NULL, AT(b.lateral_pa)},
    [COLUMN_DEFLECTION] = {"deflection", CELL_TEXT, 0, 0, 0, NULL, AT(deflection)},
    [COLUMN_FASTENING_A] = {"fastening a", CELL_WORD, 0, 0, 0, job_fastening_words,
                            AT(fastening[0])},
    [COLUMN_FASTENING_B] = {"fastening b", CELL_WORD, 0, 0, 0, job_fastening_words,
                            AT(fastening[1])},
    [COLUMN_FASTENING_LENGTH_A] = {"fastening length a", CELL_LENGTH, 0, 0, 1000, NULL,
                                   AT(b.side[0].fastening_length_m)},
    [COLUMN_FASTENING_LENGTH_B] = {"fastening length b", CELL_LENGTH, 0, 0, 1000, NULL,
                                   AT(b.side[1].fastening_length_m)},
    [COLUMN_WET_A] = {"wet a", CELL_YES, 0, 0, 0, NULL, AT(b.side[0].wet)},
    [COLUMN_WET_B] = {"wet b", CELL_YES, 0, 0, 0, NULL, AT(b.side[1].wet)},
    [COLUMN_ABUSE_A] = {"abuse a", CELL_YES, 0, 0, 0, NULL, AT(b.side[0].abuse)},
    [COLUMN_ABUSE_B] = {"abuse b", CELL_YES, 0, 0, 0, NULL, AT(b.side[1].abuse)},
    [COLUMN_FINISH_A] = {"finish a|finish level a", CELL_INTEGER, 0, 0, 5, NULL,
                         AT(b.side[0].finish_level)},
    [COLUMN_FINISH_B] = {"finish b|finish level b", CELL_INTEGER, 0, 0, 5, NULL,
                         AT(b.side[1].finish_level)},
    [COLUMN_CEILING_A] = {"ceiling a", CELL_LENGTH, 1, 0, 30, NULL, AT(b.ceiling_m[0])},
    [COLUMN_CEILING_B] = {"ceiling b", CELL_LENGTH, 1, 0, 30, NULL, AT(b.ceiling_m[1])},
    [COLUMN_TOP] = {"top", CELL_WORD, 0, 0, 0, job_top_words, AT(top)},
    [COLUMN_HEAD] = {"head", CELL_WORD, 0, 0, 0, job_head_words, AT(head)},
    [COLUMN_THICKNESS_MAX] = {"thickness max|max thickness", CELL_LENGTH, 1, 0, 2, NULL,
                              AT(thickness_max_m)},
    [COLUMN_MASS_MAX] = {"mass max|max mass", CELL_MASS, 1, 0, 1000, NULL, AT(mass_max_kg_m2)},
    [COLUMN_RISER] = {"riser", CELL_LENGTH, 0, 0, 0.5, NULL, AT(b.riser_m)},
    [COLUMN_RUN] = {"run", CELL_LENGTH, 0, 0, 0.5, NULL, AT(b.run_m)},
    [COLUMN_OPENING_KIND] = {"opening kind|opening", CELL_TEXT, 0, 0, 0, NULL, AT(opening_kind)},
    [COLUMN_OPENING_AREA] = {"opening area", CELL_AREA, 1, 0, 1000, NULL, AT(opening_area_m2)},
    [COLUMN_OPENING_STC] = {"opening stc", CELL_NUMBER, 1, 0, 100, NULL, AT(opening_stc)},
    [COLUMN_CORNERS] = {"corners", CELL_INTEGER, 0, 0, JOB_COUNT_MAX, NULL, AT(b.corners)},
    [COLUMN_TEES] = {"tees", CELL_INTEGER, 0, 0, JOB_COUNT_MAX, NULL, AT(b.tees)},
    [COLUMN_FREE_ENDS] = {"free ends", CELL_INTEGER, 0, 0, JOB_COUNT_MAX, NULL, AT(b.free_ends)},
    [COLUMN_DOORS] = {"doors", CELL_INTEGER, 0, 0, JOB_COUNT_MAX, NULL, AT(b.doors)},
    [COLUMN_EXISTING_TYPE] = {"existing type", CELL_TEXT, 0, 0, 0, NULL, AT(existing_type)},
    [COLUMN_NOTE] = {"note|notes|remark|remarks", CELL_TEXT, 0, 0, 0, NULL, AT(note)},
};
#undef AT

/* ---- units ---- */

typedef struct cell_unit {
  cell_kind kind;
  const char *word; /* compared as headers are */
  double si;
} cell_unit;

static const cell_unit cell_units[] = {
    {CELL_LENGTH, "m", 1},
    {CELL_LENGTH, "mm", 0.001},
    {CELL_LENGTH, "cm", 0.01},
    {CELL_LENGTH, "ft", UNITS_M_PER_FT},
    {CELL_LENGTH, "in", UNITS_M_PER_IN},
    {CELL_AREA, "m2", 1},
    {CELL_AREA, "ft2", UNITS_M2_PER_FT2},
    {CELL_AREA, "sf", UNITS_M2_PER_FT2},
    {CELL_MASS, "kg m2", 1},
    {CELL_MASS, "psf", UNITS_KG_M2_PER_PSF},
    {CELL_PRESSURE, "pa", 1},
    {CELL_PRESSURE, "psf", UNITS_PA_PER_PSF},
};

static const char *const unit_examples[] = {
    [CELL_AREA] = "an area such as 21 ft2 or 2 m2",
    [CELL_MASS] = "a mass per area such as 12 psf or 58 kg/m2",
    [CELL_PRESSURE] = "a pressure such as 5 psf or 240 Pa",
};

static bool is_quantity(cell_kind k) {
  return k == CELL_LENGTH || k == CELL_AREA || k == CELL_MASS || k == CELL_PRESSURE;
}

/* Blanks, hyphens, underscores and what sets a unit off in a header: "Length (ft)", "kg/m2". */
static bool is_filler(char c) {
  return c != '\0' && strchr(" \t\n-_()[]/.,", c) != NULL;
}

/* Steps over as much of `s` as spells `word`, of `n` letters; NULL where it spells another. */
static const char *spells(const char *s, const char *word, size_t n) {
  for (size_t i = 0; i < n; i++) {
    if (is_filler(word[i])) continue;
    while (is_filler(*s)) s++;
    if (tolower((unsigned char)*s) != tolower((unsigned char)word[i])) return NULL;
    s++;
  }
  return s;
}

static bool is_rest(const char *s) {
  while (is_filler(*s)) s++;
  return *s == '\0';
}

static const cell_unit *find_unit(cell_kind kind, const char *word) {
  for (size_t i = 0; i < COUNT(cell_units); i++) {
    if (cell_units[i].kind != kind) continue;
    const char *rest = spells(word, cell_units[i].word, strlen(cell_units[i].word));
    if (rest && is_rest(rest)) return &cell_units[i];
  }
  return NULL;
}

/* Whether a header is one of the column's names, with a unit behind where it holds a quantity. */
static bool is_header(const column_row *c, const char *header, double *unit) {
  *unit = 0;
  for (const char *name = c->names; *name;) {
    size_t n = strcspn(name, "|");
    const char *rest = spells(header, name, n);
    if (rest && is_rest(rest)) return true;
    const cell_unit *u = rest && is_quantity(c->kind) ? find_unit(c->kind, rest) : NULL;
    if (u) {
      *unit = u->si;
      return true;
    }
    name += n + (name[n] == '|');
  }
  return false;
}

static const char *column_name(arena *a, row_column c) {
  text t;
  text_init(&t, a, CSV_MAX_CELL);
  for (const char *p = columns[c].names; *p && *p != '|'; p++) text_char(&t, *p == ' ' ? '_' : *p);
  return t.data;
}

static diag_place header_place(row_reader *r, size_t i) {
  csv_row *header = arena_alloc(r->arena, sizeof *header);
  *header = (csv_row){1, (csv_cell *)r->table->header};
  return csv_place(r->arena, r->table, header, (int)i);
}

/* A column that is none of ours is kept as it is; one that looks like a slip is said louder. */
static void unknown_column(row_reader *r, size_t i) {
  const char *names[ROW_COLUMNS];
  for (int k = 0; k < ROW_COLUMNS; k++) names[k] = column_name(r->arena, (row_column)k);
  const char *header = r->table->header[i].text, *near = text_nearest(header, names, ROW_COLUMNS);
  if (header[0] == '\0') return;
  diag_add(r->diags, near ? DIAG_WARNING : DIAG_NOTE, ERROR_CSV_COLUMN, header_place(r, i),
           "the column \"%s\" is kept and not used%s%s%s", header, near ? "; did you mean \"" : "",
           near ? near : "", near ? "\"?" : "");
}

static void take_column(row_reader *r, size_t i) {
  for (int k = 0; k < ROW_COLUMNS; k++) {
    double unit;
    if (!is_header(&columns[k], r->table->header[i].text, &unit)) continue;
    if (r->column[k] >= 0) {
      diag_add(r->diags, DIAG_ERROR, ERROR_CSV_COLUMN, header_place(r, i),
               "says the same as the column \"%s\"; keep one of them",
               r->table->header[r->column[k]].text);
      return;
    }
    r->column[k] = (int)i;
    r->unit[k] = unit;
    return;
  }
  unknown_column(r, i);
}

static void need_column(row_reader *r, row_column c, const char *why) {
  if (r->column[c] >= 0) return;
  diag_add(r->diags, DIAG_ERROR, ERROR_CSV_COLUMN,
           (diag_place){r->table->file, r->table->header[0].line, 1, NULL},
           "the column \"%s\" is missing%s", column_name(r->arena, c), why);
}

bool row_find_columns(row_reader *r) {
  size_t before = r->diags->errors;
  for (int k = 0; k < ROW_COLUMNS; k++) r->column[k] = -1;
  for (size_t i = 0; i < r->table->columns; i++) take_column(r, i);
  need_column(r, COLUMN_ID, "");
  need_column(r, COLUMN_LENGTH, "");
  if (!(r->project->common.height_m > 0))
    need_column(r, COLUMN_HEIGHT, ", and the project gives no \"wall\": {\"height_ft\": ...}");
  if (r->project->same_framing == FRAMING_BY_STOREY)
    need_column(r, COLUMN_STOREY, ", which \"same_framing\": \"storey\" needs");
  return r->diags->errors == before;
}

/* ---- cells ---- */

/* Without the blanks that quotes may keep. */
static const char *cell_of(const row_reader *r, row_column c) {
  const char *s = csv_text(r->row, r->column[c]);
  s += strspn(s, " \t\n");
  size_t n = strlen(s), kept = n;
  while (kept > 0 && strchr(" \t\n", s[kept - 1])) kept--;
  if (text_equal(s, "-")) return ""; /* as people write "none" */
  return kept == n ? s : text_copyn(r->arena, s, kept);
}

bool row_gives(const row_reader *r, row_column c) {
  return cell_of(r, c)[0] != '\0';
}

void row_fault(row_reader *r, row_column c, diag_level level, error_code code,
               const char *message) {
  diag_add(r->diags, level, code, csv_place(r->arena, r->table, r->row, r->column[c]), "%s",
           message);
}

void row_expected(row_reader *r, row_column c, error_code code, const char *wanted) {
  row_fault(r, c, DIAG_ERROR, code,
            text_format(r->arena, "expected %s; found \"%s\"", wanted, cell_of(r, c)));
}

static bool is_digit(char c) {
  return c >= '0' && c <= '9';
}

/* Digits, with a point and with commas between groups as csv_number takes them. */
static bool take_decimal(const csv_table *t, const char **at, double *value) {
  enum { LONGEST = 40 };
  char digits[LONGEST + 1];
  size_t n = strspn(*at, "0123456789.,");
  if (n == 0 || n > LONGEST) return false;
  memcpy(digits, *at, n);
  digits[n] = '\0';
  if (!csv_number(t, digits, value)) return false;
  *at += n;
  return true;
}

/* `/8` behind a whole number. */
static bool take_divisor(const csv_table *t, const char **at, double *divisor) {
  if (**at != '/') return false;
  ++*at;
  return take_decimal(t, at, divisor) && *divisor > 0;
}

bool row_number(const csv_table *t, const char *words, double *value, const char **rest) {
  const char *s = words;
  double part, divisor;
  if (!take_decimal(t, &s, value)) return false;
  if (*s == '/') {
    if (!take_divisor(t, &s, &divisor)) return false;
    *value /= divisor;
  } else if ((*s == '-' || *s == ' ') && is_digit(s[1])) {
    s++;
    if (!take_decimal(t, &s, &part) || !take_divisor(t, &s, &divisor)) return false;
    *value += part / divisor;
  }
  while (*s == ' ') s++;
  *rest = s;
  return true;
}

/* Whether `value` is in the column's range; reported in `unit` otherwise. */
static bool in_range(row_reader *r, row_column c, double value, double unit) {
  const column_row *k = &columns[c];
  if (!(value < k->min) && !(value > k->max) && (!k->above_min || value > k->min)) return true;
  text t;
  text_init(&t, r->arena, 400);
  text_put(&t, k->above_min ? "must be above " : "must be from ");
  text_number(&t, k->min / unit, 3);
  text_put(&t, k->above_min ? " and at most " : " to ");
  text_number(&t, k->max / unit, 3);
  text_putf(&t, ", found \"%s\"", cell_of(r, c));
  row_fault(r, c, DIAG_ERROR, ERROR_FIELD_RANGE, t.data);
  return false;
}

static bool read_length(row_reader *r, row_column c, double *out) {
  const char *wanted;
  if (units_parse_length(cell_of(r, c), r->unit[c], out, &wanted)) return true;
  bool bare = r->unit[c] > 0 || !units_parse_length(cell_of(r, c), 1, out, &wanted);
  row_expected(r, c, ERROR_FIELD_UNIT,
               bare ? wanted
                    : text_format(r->arena,
                                  "a unit in the cell, as in 24ft-6in or 7.3 m, or in the "
                                  "name of the column, as in %s_ft",
                                  column_name(r->arena, c)));
  return false;
}

static bool read_quantity(row_reader *r, row_column c, double *out) {
  const char *rest;
  double number;
  if (row_number(r->table, cell_of(r, c), &number, &rest)) {
    const cell_unit *u = *rest ? find_unit(columns[c].kind, rest) : NULL;
    double unit = u ? u->si : *rest ? 0 : r->unit[c];
    *out = number * unit;
    if (unit > 0) return true;
  }
  row_expected(r, c, ERROR_FIELD_UNIT, unit_examples[columns[c].kind]);
  return false;
}

static bool read_number(row_reader *r, row_column c, double *out) {
  if (csv_number(r->table, cell_of(r, c), out)) return true;
  row_expected(r, c, ERROR_FIELD_TYPE, "a number with a decimal point");
  return false;
}

static bool read_integer(row_reader *r, row_column c, int *out) {
  double number;
  if (!csv_number(r->table, cell_of(r, c), &number) || number < floor(number) ||
      number > floor(number)) {
    row_expected(r, c, ERROR_FIELD_TYPE, "a whole number");
    return false;
  }
  if (!in_range(r, c, number, 1)) return false;
  *out = (int)number;
  return true;
}

static bool read_yes(row_reader *r, row_column c, bool *out) {
  static const char *const yes[] = {"yes", "y", "true", "1", "x"}, *const no[] = {"no", "n",
                                                                                  "false", "0"};
  bool is_yes = false, is_no = false;
  for (size_t i = 0; i < COUNT(yes); i++) is_yes = is_yes || csv_same(cell_of(r, c), yes[i]);
  for (size_t i = 0; i < COUNT(no); i++) is_no = is_no || csv_same(cell_of(r, c), no[i]);
  if (is_yes || is_no)
    *out = is_yes;
  else
    row_expected(r, c, ERROR_FIELD_CHOICE, "yes or no (also y, n, true, false, 1, 0, x)");
  return is_yes || is_no;
}

static bool read_word(row_reader *r, row_column c, int *out) {
  text list;
  text_init(&list, r->arena, 400);
  for (int i = 0; columns[c].words[i]; i++) {
    if (csv_same(cell_of(r, c), columns[c].words[i])) {
      *out = i;
      return true;
    }
    text_putf(&list, "%s%s", i ? ", " : "one of ", columns[c].words[i]);
  }
  row_expected(r, c, ERROR_FIELD_CHOICE, list.data);
  return false;
}

static void read_cell(row_reader *r, row_column c, row_values *v) {
  const column_row *k = &columns[c];
  void *place = (char *)v + k->offset;
  double number = 0;
  double unit = r->unit[c] > 0 ? r->unit[c] : 1;
  switch (k->kind) {
  case CELL_TEXT: {
    const char *s = cell_of(r, c);
    memcpy(place, &s, sizeof s);
    break;
  }
  case CELL_LENGTH:
    if (read_length(r, c, &number) && in_range(r, c, number, unit))
      memcpy(place, &number, sizeof number);
    break;
  case CELL_AREA:
  case CELL_MASS:
  case CELL_PRESSURE:
    if (read_quantity(r, c, &number) && in_range(r, c, number, unit))
      memcpy(place, &number, sizeof number);
    break;
  case CELL_NUMBER:
    if (read_number(r, c, &number) && in_range(r, c, number, 1))
      memcpy(place, &number, sizeof number);
    break;
  case CELL_INTEGER:
    (void)read_integer(r, c, place);
    break;
  case CELL_YES:
    (void)read_yes(r, c, place);
    break;
  case CELL_WORD:
    (void)read_word(r, c, place);
    break;
  }
}

/* ---- the row ---- */

static void set_defaults(const project *p, row_values *v) {
  const brief *b = &p->common;
  *v = (row_values){
      .b = *b,
      .id = "",
      .storey = "",
      .from = b->side[0].room,
      .to = b->side[1].room,
      .target = "",
      .adjacency = "",
      .fire = "",
      .confidence = "",
      .deflection = "",
      .opening_kind = "",
      .existing_type = "",
      .note = "",
      .basis_words = "",
      .count = 1,
      .metric = (int)p->metric,
      .basis = (int)p->basis,
      .evidence = (int)p->evidence,
      .scope = -1,
      .noncombustible = (int)b->noncombustible,
      .shear_side = b->shear_side + 1,
      .fastening = {(int)b->side[0].fastening, (int)b->side[1].fastening},
      .top = (int)b->top,
      .head = (int)b->head,
      .margin = p->margin,
      .mark = CATALOG_NONE,
  };
  v->b.title = "";
}

/* What needs more than a cell. */
static void settle(row_reader *r, row_values *v) {
  brief *b = &v->b;
  b->noncombustible = (noncombustible)v->noncombustible;
  b->shear_side = v->shear_side - 1;
  b->top = (wall_top)v->top;
  b->head = (wall_head)v->head;
  for (int i = 0; i < 2; i++) b->side[i].fastening = (fastening)v->fastening[i];
  b->side[0].room = v->from;
  b->side[1].room = v->to;
  if (row_gives(r, COLUMN_THICKNESS_MAX)) {
    b->thickness_m.has_max = true;
    b->thickness_m.max = v->thickness_max_m;
  }
  if (row_gives(r, COLUMN_MASS_MAX)) {
    b->mass_kg_m2.has_max = true;
    b->mass_kg_m2.max = v->mass_max_kg_m2;
  }
  if (row_gives(r, COLUMN_DEFLECTION) && !job_span(v->deflection, &b->deflection))
    row_expected(r, COLUMN_DEFLECTION, ERROR_FIELD_RANGE,
                 "the span over the deflection, L/60 to L/2000, as in L/240 or 240");
}

static void need_cell(row_reader *r, row_column c) {
  if (r->column[c] < 0 || row_gives(r, c)) return;
  row_fault(r, c, DIAG_ERROR, ERROR_FIELD_MISSING,
            text_format(r->arena, "the %s is missing", column_name(r->arena, c)));
}

static void contradiction(row_reader *r, row_column c, const char *message) {
  row_fault(r, c, DIAG_ERROR, ERROR_BRIEF_CONTRADICTION, message);
}

/* One opening a row, as a brief's. */
static void settle_opening(row_reader *r, row_values *v) {
  bool area = row_gives(r, COLUMN_OPENING_AREA), stc = row_gives(r, COLUMN_OPENING_STC),
       kind = row_gives(r, COLUMN_OPENING_KIND);
  if (!area && !stc && !kind) return;
  opening *o = &v->b.openings[v->b.opening_count++];
  *o = (opening){.kind = v->opening_kind, .area_m2 = v->opening_area_m2, .stc = v->opening_stc};
  if (!area)
    row_fault(r, kind ? COLUMN_OPENING_KIND : COLUMN_OPENING_STC, DIAG_ERROR, ERROR_FIELD_MISSING,
              "an opening needs its area: the column opening_area_ft2 or opening_area_m2");
  else if (o->area_m2 >= v->b.length_m * v->b.height_m && v->b.length_m > 0 && v->b.height_m > 0)
    contradiction(r, COLUMN_OPENING_AREA, "the opening leaves nothing of the wall");
  if (stc) return;
  text known;
  text_init(&known, r->arena, 1000);
  for (int i = 0; i < job_opening_kind_count; i++) {
    if (csv_same(v->opening_kind, job_opening_kinds[i].kind)) o->stc = job_opening_kinds[i].stc;
    text_putf(&known, "%s%s", i ? ", " : "", job_opening_kinds[i].kind);
  }
  if (!(o->stc > 0))
    row_fault(r, kind ? COLUMN_OPENING_KIND : COLUMN_OPENING_AREA, DIAG_ERROR, ERROR_FIELD_MISSING,
              text_format(r->arena, "give opening_stc, or a kind whose rating is known (%s)",
                          known.data));
}

static void settle_mark(row_reader *r, row_values *v) {
  const project *p = r->project;
  if (v->existing_type[0] == '\0' || p->mark_count == 0) return;
  v->mark = project_find_mark(p, v->existing_type);
  if (v->mark != CATALOG_NONE) return;
  const char *marks[PROJECT_MAX_MARKS];
  for (int i = 0; i < p->mark_count; i++) marks[i] = p->mark[i].mark;
  const char *near = text_nearest(v->existing_type, marks, (size_t)p->mark_count);
  text list;
  text_init(&list, r->arena, 1000);
  for (int i = 0; i < p->mark_count && !near; i++)
    text_putf(&list, "%s%s", i ? ", " : "; known there: ", marks[i]);
  row_fault(r, COLUMN_EXISTING_TYPE, DIAG_ERROR, ERROR_FIELD_CHOICE,
            text_format(r->arena, "the project's types have no mark \"%s\"%s%s", v->existing_type,
                        near ? "; the nearest is " : list.data, near ? near : ""));
}

static void check_row(row_reader *r, const row_values *v) {
  const brief *b = &v->b;
  for (int i = 0; i < 2; i++) {
    row_column fixed = i ? COLUMN_FASTENING_LENGTH_B : COLUMN_FASTENING_LENGTH_A;
    if (row_gives(r, fixed) && b->length_m > 0 && b->side[i].fastening_length_m > b->length_m)
      contradiction(r, fixed, "the fastening is longer than the wall");
    if (row_gives(r, fixed) && b->side[i].fastening == FASTENING_NONE)
      row_fault(r, fixed, DIAG_WARNING, ERROR_BRIEF_CONTRADICTION,
                "a fastening length without a fastening has no effect");
    if (b->height_m > 0 && b->ceiling_m[i] > b->height_m)
      contradiction(r, i ? COLUMN_CEILING_B : COLUMN_CEILING_A,
                    "the ceiling is above the top of the wall");
  }
  if (row_gives(r, COLUMN_FLOORS_ABOVE) && !b->loadbearing)
    row_fault(r, COLUMN_FLOORS_ABOVE, DIAG_WARNING, ERROR_BRIEF_CONTRADICTION,
              "floors above count only where the wall is load-bearing");
}

bool row_read(row_reader *r, const csv_row *row, row_values *v) {
  size_t before = r->diags->errors;
  r->row = row;
  set_defaults(r->project, v);
  v->b.length_m = 0;
  for (int c = 0; c < ROW_COLUMNS; c++)
    if (row_gives(r, (row_column)c)) read_cell(r, (row_column)c, v);
  need_cell(r, COLUMN_ID);
  need_cell(r, COLUMN_LENGTH);
  if (!(r->project->common.height_m > 0)) need_cell(r, COLUMN_HEIGHT);
  if (r->project->same_framing == FRAMING_BY_STOREY) need_cell(r, COLUMN_STOREY);
  settle(r, v);
  settle_opening(r, v);
  settle_mark(r, v);
  row_targets(r, v);
  check_row(r, v);
  return r->diags->errors == before;
}
