#include "input/price_update.h"

#include <math.h>
#include <string.h>

#include "base/date.h"
#include "input/price_units.h"

/* Common practice, no source: a price that moves by more than half is rather a wrong unit. */
#define FAR_SHARE 0.5
/* Guards against slips, as in a price book. */
#define MAX_LISTED 1e7
#define MAX_FIGURE 1e7

enum { CANDIDATES = 16 };

typedef enum column {
  COLUMN_CODE,
  COLUMN_DESCRIPTION,
  COLUMN_UNIT,
  COLUMN_PRICE,
  COLUMN_CURRENCY,
  COLUMN_DATE,
  COLUMN_SECTION,
  COLUMN_BOUGHT_AS,
  COLUMN_BOUGHT_QUANTITY,
  COLUMN_WASTE,
  COLUMN_HOURS,
  COLUMN_HOURS_EACH,
  COLUMN_TRADE,
  COLUMN_MINIMUM_ORDER,
  COLUMN_LEAD_WEEKS,
  COLUMN_COUNT
} column;

const char *const price_columns[] = {
    "code",  "description", "unit",      "price",           "currency",
    "date",  "section",     "bought_as", "bought_quantity", "waste",
    "hours", "hours_each",  "trade",     "minimum_order",   "lead_weeks",
    NULL};

/* Other names that suppliers give the first columns. */
static const struct {
  column column;
  const char *name;
} aliases[] = {
    {COLUMN_CODE, "item"},        {COLUMN_CODE, "sku"},        {COLUMN_DESCRIPTION, "desc"},
    {COLUMN_DESCRIPTION, "name"}, {COLUMN_UNIT, "uom"},        {COLUMN_UNIT, "unit of measure"},
    {COLUMN_PRICE, "unit price"}, {COLUMN_PRICE, "net price"}, {COLUMN_DATE, "price date"}};

/* Columns that are known and not read. */
static const char *const unread[] = {"note", "row", "supplier"};

typedef struct matcher {
  arena *arena;
  diag_list *diags;
  const catalog *catalog;
  price_update *out;
  int at[COLUMN_COUNT]; /* columns of the table; -1 = not there */
} matcher;

/* ---- messages ---- */

static void fault(matcher *m, error_code code, const update_line *l, column c,
                  const char *message) {
  diag_add(m->diags, DIAG_ERROR, code, csv_place(m->arena, m->out->table, l->row, m->at[c]), "%s",
           message);
}

/* Lists hold much that no wall needs: what is no fault goes into the answer, not among the
 * messages. */
static void remark(matcher *m, update_line *l, const char *words) {
  l->remark = l->remark ? text_format(m->arena, "%s; %s", l->remark, words) : words;
}

/* ---- columns ---- */

static bool find_columns(matcher *m) {
  enum {
    ALIASES = sizeof aliases / sizeof aliases[0],
    UNREAD = sizeof unread / sizeof unread[0],
    NAMES = COLUMN_COUNT + ALIASES + UNREAD
  };
  const csv_table *t = m->out->table;
  const char *names[NAMES];
  size_t n = 0, before = m->diags->errors;
  for (; n < COLUMN_COUNT; n++) {
    names[n] = price_columns[n];
    m->at[n] = csv_column(t, price_columns[n]);
  }
  for (size_t i = 0; i < UNREAD; i++) names[n++] = unread[i];
  for (size_t i = 0; i < ALIASES; i++) {
    names[n++] = aliases[i].name;
    int *at = &m->at[aliases[i].column];
    if (*at < 0) *at = csv_column(t, aliases[i].name);
  }
  (void)csv_check_header(m->arena, m->diags, t, names, n, DIAG_NOTE);
  diag_place place = {t->file, t->header[0].line, 1, NULL};
  if (m->at[COLUMN_CODE] < 0 && m->at[COLUMN_DESCRIPTION] < 0)
    diag_add(m->diags, DIAG_ERROR, ERROR_CSV_COLUMN, place,
             "expected a column \"code\" or \"description\"");
  for (int c = COLUMN_UNIT; c <= COLUMN_PRICE; c++) {
    if (m->at[c] < 0)
      diag_add(m->diags, DIAG_ERROR, ERROR_CSV_COLUMN, place, "expected a column \"%s\"",
               price_columns[c]);
  }
  return m->diags->errors == before;
}

static const char *cell(const matcher *m, const update_line *l, column c) {
  return csv_text(l->row, m->at[c]);
}

/* ---- which item ---- */

typedef struct candidates {
  const char *code[CANDIDATES];
  size_t count;
} candidates;

static void add_candidate(candidates *c, const char *code) {
  for (size_t i = 0; i < c->count; i++) {
    if (text_equal(c->code[i], code)) return;
  }
  if (c->count < CANDIDATES) c->code[c->count++] = code;
}

static const char *known_code(const matcher *m, const char *code) {
  const price_book *b = m->out->book;
  int item = prices_item(b, code);
  if (item != CATALOG_NONE) return b->items[item].code;
  const price_codes *l = &m->out->codes;
  for (size_t i = 0; i < l->count; i++) {
    if (text_equal(l->code[i], code)) return l->code[i];
  }
  return NULL;
}

/* The codes that price a record: a batt has those of its widths where the book prices these. */
static void add_record(const matcher *m, catalog_ref ref, candidates *out) {
  const catalog *c = m->catalog;
  const price_book *b = m->out->book;
  if (ref.kind == CATALOG_LAYER) add_candidate(out, c->layers[ref.index].id);
  if (ref.kind == CATALOG_FRAME) add_candidate(out, c->frames[ref.index].stud);
  if (ref.kind == CATALOG_MOUNT) {
    add_candidate(out, c->mounts[ref.index].rail);
    if (c->mounts[ref.index].clip) add_candidate(out, c->mounts[ref.index].clip);
  }
  if (ref.kind != CATALOG_FILL) return;
  for (int w = 0; w < BATT_WIDTHS; w++) add_candidate(out, b->fills[ref.index][w].code);
}

static void add_spoken(const matcher *m, const char *words, candidates *out) {
  catalog_ref refs[CANDIDATES];
  size_t n = words[0] ? catalog_find(m->catalog, words, refs, CANDIDATES) : 0;
  for (size_t i = 0; i < n && i < CANDIDATES; i++) add_record(m, refs[i], out);
}

static void add_named(const matcher *m, const char *words, candidates *out) {
  const price_book *b = m->out->book;
  const catalog *c = m->catalog;
  if (!words[0]) return;
  for (size_t i = 0; i < b->count; i++) {
    if (csv_same(b->items[i].name, words)) add_candidate(out, b->items[i].code);
  }
  if (out->count > 0) return;
  for (size_t i = 0; i < c->layer_count; i++) {
    if (csv_same(c->layers[i].name, words))
      add_record(m, (catalog_ref){CATALOG_LAYER, (int)i}, out);
  }
  for (size_t i = 0; i < c->fill_count; i++) {
    if (csv_same(c->fills[i].name, words)) add_record(m, (catalog_ref){CATALOG_FILL, (int)i}, out);
  }
}

static const char *list_codes(const matcher *m, const candidates *c) {
  text t;
  text_init(&t, m->arena, 1000);
  for (size_t i = 0; i < c->count; i++) text_putf(&t, "%s%s", i ? ", " : "", c->code[i]);
  return t.data;
}

static const char *nearest_code(const matcher *m, const char *code) {
  const price_codes *l = &m->out->codes;
  return code[0] ? text_nearest(code, l->code, l->count) : NULL;
}

static void unmatched(matcher *m, update_line *l, const candidates *found) {
  bool several = found->count > 1;
  l->kind = several ? UPDATE_AMBIGUOUS : UPDATE_UNMATCHED;
  l->others = several ? list_codes(m, found) : nearest_code(m, cell(m, l, COLUMN_CODE));
  if (several)
    remark(m, l, text_format(m->arena, "may be %s; write the code", l->others));
  else if (l->others)
    remark(m, l, text_format(m->arena, "the nearest code is %s", l->others));
}

/* Code, then description as a name, then both as spoken words. */
static bool match(matcher *m, update_line *l) {
  const char *code = cell(m, l, COLUMN_CODE), *words = cell(m, l, COLUMN_DESCRIPTION);
  l->said =
      code[0] && words[0] ? text_format(m->arena, "%s %s", code, words) : (code[0] ? code : words);
  candidates found = {{NULL}, 0};
  const char *known = code[0] ? known_code(m, code) : NULL;
  l->match = MATCH_CODE;
  if (known) add_candidate(&found, known);
  if (found.count == 0) {
    l->match = MATCH_NAME;
    add_named(m, words, &found);
  }
  if (found.count == 0) {
    l->match = MATCH_SPOKEN;
    add_spoken(m, words, &found);
  }
  if (found.count == 0) add_spoken(m, code, &found);
  if (found.count != 1) {
    unmatched(m, l, &found);
    return false;
  }
  l->code = found.code[0];
  l->item = prices_item(m->out->book, l->code);
  return true;
}

/* ---- what it costs ---- */

static double rounded(double price) {
  double scale = pow(10, PRICE_DECIMALS);
  return floor(price * scale + 0.5) / scale;
}

static bool read_number(matcher *m, const update_line *l, column c, double most, double *out) {
  const char *words = cell(m, l, c);
  if (!csv_number(m->out->table, words, out)) {
    fault(m, ERROR_FIELD_TYPE, l, c,
          text_format(m->arena, "expected a number with a decimal point, found \"%s\"", words));
    return false;
  }
  if (*out >= 0 && *out <= most) return true;
  fault(m, ERROR_FIELD_RANGE, l, c,
        text_format(m->arena, "expected 0 to %s, found \"%s\"", text_of(m->arena, most, 0), words));
  return false;
}

static void read_date(matcher *m, update_line *l, const price_item *item) {
  const char *date = cell(m, l, COLUMN_DATE);
  long days = 0, known = 0;
  if (!date[0]) return;
  l->date = date;
  bool same = item && text_equal(date, item->date); /* a book may say more than a date */
  if (!date_days(date, &days)) {
    if (!same)
      fault(m, ERROR_FIELD_TYPE, l, COLUMN_DATE,
            text_format(m->arena, "expected a date such as 2031-03-01, found \"%s\"", date));
    return;
  }
  if (item && date_days(item->date, &known) && days < known)
    remark(m, l, text_format(m->arena, "older than the book's price (%s)", item->date));
}

static void check_currency(matcher *m, const update_line *l) {
  const char *said = cell(m, l, COLUMN_CURRENCY);
  if (said[0] && !text_equal(said, m->out->book->currency))
    fault(m, ERROR_FIELD_CONFLICT, l, COLUMN_CURRENCY,
          text_format(m->arena, "the price book is in %s, found \"%s\"", m->out->book->currency,
                      said));
}

static bool read_unit(matcher *m, update_line *l, const price_item *item) {
  double takeoff = 0;
  const char *why = NULL;
  l->unit = cell(m, l, COLUMN_UNIT);
  if (!price_units_read(m->arena, l->unit, item, &takeoff, &why)) {
    fault(m, ERROR_PRICE_UNIT, l, COLUMN_UNIT, why);
    return false;
  }
  l->holds = takeoff / item->unit_si;
  return true;
}

static void warn_far(matcher *m, update_line *l) {
  l->far = l->before > 0 && fabs(l->after - l->before) > FAR_SHARE * l->before;
  if (l->far) remark(m, l, "moves by more than half: is the unit right?");
}

/* The price in the book's terms, and whether it is another one. */
static void compare(matcher *m, update_line *l, const price_item *item) {
  double units = item->bought_quantity / item->unit_si; /* in a bought unit */
  l->by_bought = json_get(item->json, "price_bought") != NULL;
  double share = l->by_bought ? units : 1, before = item->price * item->unit_si * share;
  l->per = l->by_bought && item->bought_as ? item->bought_as : item->unit_word;
  l->before = rounded(before);
  l->after = rounded(l->listed / l->holds * share);
  long mine = 0, theirs = 0;
  bool later =
      l->date && date_days(l->date, &mine) && (!date_days(item->date, &theirs) || mine > theirs);
  /* A difference that rounding made is none. */
  bool same = fabs(l->after - before) <= 0.6 * pow(10, -PRICE_DECIMALS);
  l->kind = !same ? UPDATE_CHANGED : later ? UPDATE_CONFIRMED : UPDATE_SAME;
  if (l->kind == UPDATE_CHANGED) warn_far(m, l);
}

/* ---- items that the book lacks ---- */

static const column needed[] = {COLUMN_DESCRIPTION, COLUMN_SECTION, COLUMN_TRADE, COLUMN_WASTE,
                                COLUMN_HOURS};

static bool is_complete(matcher *m, update_line *l) {
  text t;
  text_init(&t, m->arena, 200);
  for (size_t i = 0; i < sizeof needed / sizeof needed[0]; i++) {
    if (cell(m, l, needed[i])[0]) continue;
    text_putf(&t, "%s%s", t.len ? ", " : "", price_columns[needed[i]]);
  }
  if (t.len == 0) return true;
  l->kind = UPDATE_INCOMPLETE;
  l->lacks = t.data;
  remark(m, l, text_format(m->arena, "not in the book; to add it the line lacks %s", l->lacks));
  return false;
}

static bool read_trade(matcher *m, const update_line *l, trade *out) {
  const char *word = cell(m, l, COLUMN_TRADE);
  for (int t = 0; t < TRADE_COUNT; t++) {
    if (!text_equal(word, trade_names[t])) continue;
    *out = (trade)t;
    return true;
  }
  fault(m, ERROR_FIELD_CHOICE, l, COLUMN_TRADE,
        text_format(m->arena, "expected hanger, taper or insulator, found \"%s\"", word));
  return false;
}

/* An optional figure of a new item. */
static bool read_figure(matcher *m, const update_line *l, column c, double factor, double *out) {
  if (!cell(m, l, c)[0]) return true;
  if (!read_number(m, l, c, MAX_FIGURE, out)) return false;
  *out *= factor;
  return true;
}

static price_unit unit_of(const matcher *m, const char *code) {
  const price_codes *l = &m->out->codes;
  for (size_t i = 0; i < l->count; i++) {
    if (text_equal(l->code[i], code)) return l->unit[i];
  }
  return UNIT_EACH;
}

/* Figures of a new item count the unit of its line, which must be one of the book's. */
static bool complete(matcher *m, update_line *l) {
  price_item *x = &l->completed;
  double si = 1;
  l->unit = cell(m, l, COLUMN_UNIT);
  if (!prices_unit(l->unit, &x->unit, &si) || x->unit != unit_of(m, l->code)) {
    fault(m, ERROR_PRICE_UNIT, l, COLUMN_UNIT,
          text_format(m->arena, "a new item \"%s\" is priced by one of the book's units of %s",
                      l->code, price_unit_names[unit_of(m, l->code)]));
    return false;
  }
  size_t i = 0;
  while (!text_equal(price_unit_words[i], l->unit)) i++;
  x->code = l->code;
  x->unit_word = price_unit_words[i];
  x->unit_si = si;
  x->name = cell(m, l, COLUMN_DESCRIPTION);
  x->section = cell(m, l, COLUMN_SECTION);
  if (cell(m, l, COLUMN_BOUGHT_AS)[0]) x->bought_as = cell(m, l, COLUMN_BOUGHT_AS);
  x->price = l->listed / si;
  l->holds = 1;
  l->per = x->unit_word;
  l->after = rounded(l->listed);
  bool good = read_trade(m, l, &x->trade);
  good = read_figure(m, l, COLUMN_WASTE, 1, &x->waste) && good;
  good = read_figure(m, l, COLUMN_HOURS, 1 / si, &x->hours) && good;
  good = read_figure(m, l, COLUMN_HOURS_EACH, 1, &x->hours_each) && good;
  good = read_figure(m, l, COLUMN_BOUGHT_QUANTITY, si, &x->bought_quantity) && good;
  good = read_figure(m, l, COLUMN_LEAD_WEEKS, 1, &x->lead_weeks) && good;
  return read_figure(m, l, COLUMN_MINIMUM_ORDER, si, &x->minimum_order) && good;
}

/* ---- lines ---- */

/* Two lines for one item must say the same. */
static void check_twice(matcher *m, const update_line *l) {
  price_update *u = m->out;
  for (size_t i = 0; &u->line[i] != l; i++) {
    const update_line *other = &u->line[i];
    if (!other->code || !text_equal(other->code, l->code) || other->kind > UPDATE_NEW) continue;
    if (fabs(other->after - l->after) <= pow(10, -PRICE_DECIMALS)) continue;
    fault(m, ERROR_FIELD_CONFLICT, l, COLUMN_PRICE,
          text_format(m->arena, "row %d gives %s another price: keep one of them",
                      other->row->number, l->code));
    return;
  }
}

static void read_price(matcher *m, update_line *l) {
  const price_item *item = l->item == CATALOG_NONE ? NULL : &m->out->book->items[l->item];
  read_date(m, l, item);
  check_currency(m, l);
  if (!cell(m, l, COLUMN_PRICE)[0]) {
    l->kind = UPDATE_NO_PRICE;
    l->unit = cell(m, l, COLUMN_UNIT);
    return;
  }
  if (!read_number(m, l, COLUMN_PRICE, MAX_LISTED, &l->listed)) return;
  if (item) {
    if (!read_unit(m, l, item)) return;
    compare(m, l, item);
  } else {
    if (!is_complete(m, l) || !complete(m, l)) return;
    l->kind = UPDATE_NEW;
  }
  check_twice(m, l);
}

static void read_line(matcher *m, const csv_row *row) {
  price_update *u = m->out;
  update_line *l = &u->line[u->count++];
  l->row = row;
  l->item = CATALOG_NONE;
  l->kind = UPDATE_SAME;
  if (match(m, l)) read_price(m, l);
  u->of_kind[l->kind]++;
}

/* ---- dates, and what stays without a price ---- */

static void newest(const char *date, const char **best) {
  long days = 0, most = 0;
  if (!date || !date_days(date, &days)) return;
  if (*best && date_days(*best, &most) && most >= days) return;
  *best = date;
}

static void set_ages(price_update *u, const char *today) {
  const price_book *b = u->book;
  long now = 0, then = 0;
  u->today = today;
  u->today_given = today != NULL;
  if (!today) {
    newest(b->date, &u->today);
    for (size_t i = 0; i < b->count; i++) newest(b->items[i].date, &u->today);
    for (size_t i = 0; i < u->count; i++) newest(u->line[i].date, &u->today);
  }
  if (!u->today || !date_days(u->today, &now)) return;
  u->aged = date_days(b->date, &then);
  u->age_days = now - then;
  for (size_t i = 0; i < u->count; i++) {
    update_line *l = &u->line[i];
    l->aged = l->date && date_days(l->date, &then);
    if (l->aged) l->age_days = now - then;
  }
}

static void set_priced(price_update *u) {
  for (size_t i = 0; i < u->count; i++) {
    for (size_t k = 0; u->line[i].kind == UPDATE_NEW && k < u->codes.count; k++) {
      if (text_equal(u->codes.code[k], u->line[i].code)) u->codes.priced[k] = true;
    }
  }
}

static bool start(arena *a, diag_list *d, const catalog *c, const price_book *b, const char *today,
                  price_update *out) {
  long days = 0;
  memset(out, 0, sizeof *out);
  out->book = b;
  out->codes = prices_codes(a, c, b);
  if (!today || date_days(today, &days)) return true;
  diag_error(d, ERROR_USAGE, "expected today as a date such as 2031-03-01, found \"%s\"", today);
  return false;
}

bool price_update_age(arena *a, diag_list *d, const catalog *c, const price_book *b,
                      const char *today, price_update *out) {
  if (!start(a, d, c, b, today, out)) return false;
  set_ages(out, today);
  return true;
}

bool price_update_read(arena *a, diag_list *d, const catalog *c, const price_book *b,
                       const csv_table *t, const char *today, price_update *out) {
  size_t before = d->errors;
  if (!start(a, d, c, b, today, out)) return false;
  out->table = t;
  out->line = arena_array(a, t->count, sizeof *out->line);
  matcher m = {.arena = a, .diags = d, .catalog = c, .out = out};
  if (!find_columns(&m)) return false;
  for (size_t i = 0; i < t->count; i++) read_line(&m, &t->rows[i]);
  set_ages(out, today);
  set_priced(out);
  return d->errors == before;
}
