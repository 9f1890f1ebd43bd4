#include "input/prices.h"

#include <string.h>

#include "base/file.h"
#include "base/text.h"
#include "base/units.h"
#include "input/fields.h"

/* Reading goes in two steps: the records by table, then their codes are looked up for everything
 * that a takeoff can ask for. */

/* ---- records ---- */

static const char *const trade_words[] = {"hanger", "taper", "insulator", NULL};

/* Wide guards against slips of a digit or a unit. */
#define MAX_MONEY       1e6
#define MAX_HOURS       1e3
#define MAX_WEEKS       200
#define MAX_SHEET_WIDTH 5 /* m */
#define MAX_QUANTITY    1e7
#define PRICE_SLACK     1e-9 /* prices this near are equal but for rounding */

typedef struct raw_item {
  price_item item;
  int unit, trade;
  double price_bought;
  const json_value *breaks;
} raw_item;

typedef struct raw_book {
  price_book book;
  const char *base;
  const json_value *factors, *rates, *heights, *short_wall, *tall_studs, *stock, *items;
} raw_book;

#define ITEM(member) offsetof(raw_item, member)
#define BOOK(member) offsetof(raw_book, member)
#define REQUIRED     FIELD_REQUIRED

static const field item_fields[] = {
    {"code", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, ITEM(item.code)},
    {"name", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, ITEM(item.name)},
    {"section", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, ITEM(item.section)},
    {"unit", FIELD_CHOICE, REQUIRED, 0, 0, 0, price_unit_words, ITEM(unit)},
    {"price", FIELD_NUMBER, 0, 0, MAX_MONEY, 0, NULL, ITEM(item.price)},
    {"price_bought", FIELD_NUMBER, 0, 0, MAX_MONEY, 0, NULL, ITEM(price_bought)},
    {"bought_as", FIELD_STRING, 0, 0, 0, 0, NULL, ITEM(item.bought_as)},
    {"bought_quantity", FIELD_NUMBER, FIELD_ABOVE_MIN, 0, MAX_QUANTITY, 0, NULL,
     ITEM(item.bought_quantity)},
    {"waste", FIELD_NUMBER, 0, 0, 2, 0, NULL, ITEM(item.waste)},
    {"hours", FIELD_NUMBER, 0, 0, MAX_HOURS, 0, NULL, ITEM(item.hours)},
    {"hours_each", FIELD_NUMBER, 0, 0, MAX_HOURS, 0, NULL, ITEM(item.hours_each)},
    {"trade", FIELD_CHOICE, REQUIRED, 0, 0, 0, trade_words, ITEM(trade)},
    {"minimum_order", FIELD_NUMBER, 0, 0, MAX_QUANTITY, 0, NULL, ITEM(item.minimum_order)},
    {"lead_weeks", FIELD_NUMBER, 0, 0, MAX_WEEKS, 0, NULL, ITEM(item.lead_weeks)},
    {"breaks", FIELD_VALUE, 0, 0, 0, 0, NULL, ITEM(breaks)},
    {"source", FIELD_STRING, 0, 0, 0, 0, NULL, ITEM(item.source)},
    {"date", FIELD_STRING, 0, 0, 0, 0, NULL, ITEM(item.date)},
};

static const field book_fields[] = {
    {"about", FIELD_IGNORE, 0, 0, 0, 0, NULL, 0},
    {"base", FIELD_STRING, 0, 0, 0, 0, NULL, BOOK(base)},
    {"place_factors", FIELD_VALUE, 0, 0, 0, 0, NULL, BOOK(factors)},
    {"name", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, BOOK(book.name)},
    {"currency", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, BOOK(book.currency)},
    {"place", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, BOOK(book.place)},
    {"date", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, BOOK(book.date)},
    {"source", FIELD_STRING, REQUIRED, 0, 0, 0, NULL, BOOK(book.source)},
    {"labour_rates", FIELD_VALUE, REQUIRED, 0, 0, 0, NULL, BOOK(rates)},
    {"overhead_profit", FIELD_NUMBER, REQUIRED, 0, 3, 0, NULL, BOOK(book.overhead_profit)},
    {"sales_tax", FIELD_NUMBER, REQUIRED, 0, 1, 0, NULL, BOOK(book.sales_tax)},
    {"heights", FIELD_VALUE, 0, 0, 0, 0, NULL, BOOK(heights)},
    {"short_wall", FIELD_VALUE, 0, 0, 0, 0, NULL, BOOK(short_wall)},
    {"tall_studs", FIELD_VALUE, 0, 0, 0, 0, NULL, BOOK(tall_studs)},
    {"stock", FIELD_VALUE, 0, 0, 0, 0, NULL, BOOK(stock)},
    {"items", FIELD_VALUE, REQUIRED, 0, 0, 0, NULL, BOOK(items)},
};

#define COUNT(table) (sizeof(table) / sizeof((table)[0]))

/* What is kept of an item while its code is looked up. */
typedef struct kept_item {
  bool own, used,
      told; /* own: of this file, not of the base; told: its unit was reported as wrong */
} kept_item;

/* The files that are being read, each built on by the one before. */
typedef struct chain {
  const struct chain *above;
  const char *file;
  int depth;
} chain;

typedef struct reader {
  arena *arena;
  diag_list *diags;
  const catalog *catalog;
  price_book *book;
  kept_item *kept;
  chain at;
} reader;

static void fault(reader *r, error_code code, const json_value *v, const char *message) {
  diag_add(r->diags, DIAG_ERROR, code, json_place(r->arena, v), "%s", message);
}

/* An array of 1 to `max` elements. */
static bool is_array(reader *r, const json_value *v, size_t max) {
  if (v->kind != JSON_ARRAY) {
    fault(r, ERROR_FIELD_TYPE, v,
          text_format(r->arena, "expected an array, found %s", json_kind_name(v->kind)));
    return false;
  }
  if (v->count >= 1 && v->count <= max) return true;
  fault(r, ERROR_FIELD_RANGE, v,
        text_format(r->arena, "expected 1 to %zu elements, found %zu", max, v->count));
  return false;
}

static void must_rise(reader *r, const json_value *v, double value, double before) {
  if (value <= before) fault(r, ERROR_FIELD_RANGE, v, "must be more than the one before");
}

static void read_breaks(reader *r, const json_value *v, double si, price_item *out) {
  static const field table[] = {
      {"from", FIELD_NUMBER, REQUIRED | FIELD_ABOVE_MIN, 0, MAX_QUANTITY, 0, NULL,
       offsetof(price_break, from)},
      {"price", FIELD_NUMBER, REQUIRED, 0, MAX_MONEY, 0, NULL, offsetof(price_break, price)},
  };
  if (!is_array(r, v, PRICES_MAX_BREAKS)) return;
  price_break *breaks = arena_array(r->arena, v->count, sizeof *breaks);
  double before = 0;
  for (const json_value *e = v->first; e; e = e->next) {
    price_break *b = &breaks[out->break_count];
    if (!fields_read(r->arena, r->diags, e, table, COUNT(table), b)) continue;
    b->from *= si;
    b->price /= si;
    must_rise(r, e, b->from, before);
    before = b->from;
    out->break_count++;
  }
  out->breaks = breaks;
}

/* A break that costs more than less of the item is a slip somewhere, but the book can be used. */
static void check_breaks(reader *r, const price_item *item) {
  double before = item->price;
  for (size_t i = 0; i < item->break_count; i++) {
    double price = item->breaks[i].price;
    if (price > before * (1 + PRICE_SLACK)) {
      diag_add(r->diags, DIAG_WARNING, ERROR_PRICE_BREAK,
               json_place(r->arena, json_get(item->json, "breaks")),
               "the break from %s %s on costs more than a smaller quantity",
               text_of(r->arena, item->breaks[i].from / item->unit_si, 0), item->unit_word);
      return;
    }
    before = price;
  }
}

/* Price per unit, or per bought unit with its quantity: one of them. An item of the base may keep
 * its own. */
static void settle_price(reader *r, const json_value *v, raw_item *raw, const price_item *base) {
  bool by_unit = json_get(v, "price") != NULL, by_bought = json_get(v, "price_bought") != NULL;
  if (by_unit && by_bought) {
    fault(r, ERROR_FIELD_CONFLICT, v, "has both \"price\" and \"price_bought\"; keep one of them");
  } else if (!by_unit && !by_bought) {
    if (base) return;
    fault(r, ERROR_FIELD_MISSING, v, "the key \"price\" (or \"price_bought\") is missing");
  } else if (by_bought && !(raw->item.bought_quantity > 0)) {
    fault(r, ERROR_FIELD_MISSING, v, "\"price_bought\" needs \"bought_quantity\"");
  } else if (by_bought) {
    raw->item.price = raw->price_bought / raw->item.bought_quantity;
  }
}

/* Figures of an item that count units, and their kind: per unit, or units. */
static const struct {
  const char *key, *other; /* other: a second key that gives it */
  size_t offset;
  bool per_unit;
} figures[] = {
    {"price", "price_bought", offsetof(price_item, price), true},
    {"hours", NULL, offsetof(price_item, hours), true},
    {"bought_quantity", NULL, offsetof(price_item, bought_quantity), false},
    {"minimum_order", NULL, offsetof(price_item, minimum_order), false},
};

/* From the units of the file to those of takeoff; what the file does not say stays the base's. */
static void settle_figures(const json_value *v, price_item *item, const price_item *base) {
  for (size_t i = 0; i < COUNT(figures); i++) {
    double *value = (double *)(void *)((char *)item + figures[i].offset);
    bool given = json_get(v, figures[i].key) || (figures[i].other && json_get(v, figures[i].other));
    if (!given && base) {
      *value = *(const double *)(const void *)((const char *)base + figures[i].offset);
    } else if (figures[i].per_unit) {
      *value /= item->unit_si;
    } else {
      *value *= item->unit_si;
    }
  }
}

/* What a file says of an item of its base, over what the base says. The rows of `item_fields`, none
 * of them required but the code. */
static bool read_fields(reader *r, const json_value *v, const price_item *base, raw_item *raw) {
  field table[COUNT(item_fields)];
  memcpy(table, item_fields, sizeof table);
  raw->item.source = r->book->source;
  raw->item.date = r->book->date;
  if (base) {
    for (size_t i = 1; i < COUNT(table); i++) table[i].flags &= ~(unsigned)REQUIRED;
    raw->item = *base;
    raw->trade = (int)base->trade;
    while (!text_equal(price_unit_words[raw->unit], base->unit_word)) raw->unit++;
    if (json_get(v, "price") || json_get(v, "price_bought")) {
      raw->item.source = r->book->source;
      raw->item.date = r->book->date;
      raw->item.breaks = NULL; /* they belong to the base's price */
      raw->item.break_count = 0;
    }
  }
  return fields_read(r->arena, r->diags, v, table, COUNT(table), raw);
}

/* The item of this code so far; CATALOG_NONE for a new one and after a fault. */
static int find_base_item(reader *r, const json_value *v, bool *twice) {
  const json_value *code = json_get(v, "code");
  *twice = false;
  if (!code || code->kind != JSON_STRING) return CATALOG_NONE;
  int same = prices_item(r->book, code->string);
  if (same == CATALOG_NONE || !r->kept[same].own) return same;
  *twice = true;
  fault(r, ERROR_FIELD_CONFLICT, v,
        text_format(r->arena, "the code \"%s\" stands already in line %d", code->string,
                    r->book->items[same].json->line));
  return CATALOG_NONE;
}

static void read_item(reader *r, const json_value *v) {
  raw_item raw;
  bool twice = false;
  memset(&raw, 0, sizeof raw);
  int at = find_base_item(r, v, &twice);
  const price_item *base = at == CATALOG_NONE ? NULL : &r->book->items[at];
  if (!read_fields(r, v, base, &raw) || twice) return;
  price_item *item = &raw.item;
  item->unit_word = price_unit_words[raw.unit];
  (void)prices_unit(item->unit_word, &item->unit, &item->unit_si);
  if (base && !json_get(v, "bought_quantity"))
    item->bought_quantity = base->bought_quantity / item->unit_si;
  settle_price(r, v, &raw, base);
  item->trade = (trade)raw.trade;
  item->json = v;
  settle_figures(v, item, base);
  if (raw.breaks) {
    item->break_count = 0;
    read_breaks(r, raw.breaks, item->unit_si, item);
    check_breaks(r, item);
  }
  if (at == CATALOG_NONE) at = (int)r->book->count++;
  r->kept[at].own = true;
  r->book->items[at] = *item;
}

static void read_items(reader *r, const json_value *v) {
  if (!is_array(r, v, PRICES_MAX_ITEMS)) return;
  price_book *b = r->book;
  size_t room = b->count + v->count;
  b->items = arena_grow(r->arena, b->items, b->count * sizeof *b->items, room * sizeof *b->items);
  r->kept = arena_array(r->arena, room, sizeof *r->kept);
  for (const json_value *e = v->first; e; e = e->next) read_item(r, e);
}

static void read_rates(reader *r, const json_value *v) {
  static const field table[] = {
      {"hanger", FIELD_NUMBER, REQUIRED, 0, MAX_MONEY, 0, NULL, TRADE_HANGER * sizeof(double)},
      {"taper", FIELD_NUMBER, REQUIRED, 0, MAX_MONEY, 0, NULL, TRADE_TAPER * sizeof(double)},
      {"insulator", FIELD_NUMBER, REQUIRED, 0, MAX_MONEY, 0, NULL,
       TRADE_INSULATOR * sizeof(double)},
  };
  field own[COUNT(table)];
  memcpy(own, table, sizeof own);
  for (size_t i = 0; r->book->base && i < COUNT(own); i++) own[i].flags &= ~(unsigned)REQUIRED;
  (void)fields_read(r->arena, r->diags, v, own, COUNT(own), r->book->rate);
}

/* A length with what it does to labour: a factor, or hours. */
typedef struct step {
  double length_m, value;
} step;

static void read_heights(reader *r, const json_value *v) {
  static const field table[] = {
      {"above_m", FIELD_LENGTH, REQUIRED, 0, 100, 0, NULL, offsetof(step, length_m)},
      {"factor", FIELD_NUMBER, REQUIRED, 1, 10, 0, NULL, offsetof(step, value)},
  };
  price_book *b = r->book;
  double before = -1;
  if (!is_array(r, v, PRICES_MAX_HEIGHTS)) return;
  b->height_steps = 0;
  for (const json_value *e = v->first; e; e = e->next) {
    step s = {0, 0};
    if (!fields_read(r->arena, r->diags, e, table, COUNT(table), &s)) continue;
    must_rise(r, e, s.length_m, before);
    before = s.length_m;
    b->height_step_m[b->height_steps] = s.length_m;
    b->height_factor[b->height_steps++] = s.value;
  }
}

static void read_short_wall(reader *r, const json_value *v) {
  static const field table[] = {
      {"below_m", FIELD_LENGTH, REQUIRED, 0, 100, 0, NULL, offsetof(step, length_m)},
      {"factor", FIELD_NUMBER, REQUIRED, 1, 10, 0, NULL, offsetof(step, value)},
  };
  step s = {0, 0};
  if (!fields_read(r->arena, r->diags, v, table, COUNT(table), &s)) return;
  r->book->short_wall_m = s.length_m;
  r->book->short_wall_factor = s.value;
}

static void read_tall_studs(reader *r, const json_value *v) {
  static const field table[] = {
      {"above_m", FIELD_LENGTH, REQUIRED, 0, 100, 0, NULL, offsetof(step, length_m)},
      {"hours_per_m", FIELD_NUMBER, REQUIRED, 0, MAX_HOURS, 0, NULL, offsetof(step, value)},
      {"hours_per_ft", FIELD_NUMBER, REQUIRED, 0, MAX_HOURS, 1 / UNITS_M_PER_FT, NULL,
       offsetof(step, value)},
  };
  step s = {0, 0};
  if (!fields_read(r->arena, r->diags, v, table, COUNT(table), &s)) return;
  r->book->tall_stud_m = s.length_m;
  r->book->tall_stud_hours_per_m = s.value;
}

static void read_lengths(reader *r, const json_value *v, stock_lengths *out) {
  if (!is_array(r, v, PRICES_MAX_STOCK)) return;
  out->count = 0;
  double before = 0;
  for (const json_value *e = v->first; e; e = e->next) {
    const char *expected = "a length with its unit, such as \"9ft\"";
    double metres = 0;
    if (e->kind != JSON_STRING || !units_parse_length(e->string, 0, &metres, &expected)) {
      fault(r, ERROR_FIELD_UNIT, e, text_format(r->arena, "expected %s", expected));
      continue;
    }
    must_rise(r, e, metres, before);
    before = metres;
    out->metres[out->count++] = metres;
  }
}

typedef struct raw_sheets {
  double width_m;
  const json_value *lengths;
} raw_sheets;

static void read_sheets(reader *r, const json_value *v) {
  static const field table[] = {
      {"width_m", FIELD_LENGTH, REQUIRED | FIELD_ABOVE_MIN, 0, MAX_SHEET_WIDTH, 0, NULL,
       offsetof(raw_sheets, width_m)},
      {"lengths", FIELD_VALUE, REQUIRED, 0, 0, 0, NULL, offsetof(raw_sheets, lengths)},
  };
  price_book *b = r->book;
  double before = 0;
  if (!is_array(r, v, PRICES_MAX_WIDTHS)) return;
  b->sheet_widths = 0;
  for (const json_value *e = v->first; e; e = e->next) {
    raw_sheets raw = {0, NULL};
    sheet_stock *s = &b->sheets[b->sheet_widths];
    if (!fields_read(r->arena, r->diags, e, table, COUNT(table), &raw)) continue;
    must_rise(r, e, raw.width_m, before);
    before = s->width_m = raw.width_m;
    read_lengths(r, raw.lengths, &s->lengths);
    b->sheet_widths++;
  }
}

static void read_stock(reader *r, const json_value *v) {
  typedef struct raw_stock {
    const json_value *of[FRAME_STEEL + 1], *sheets;
  } raw_stock;
  static const field table[] = {
      {"wood", FIELD_VALUE, 0, 0, 0, 0, NULL, FRAME_WOOD * sizeof(const json_value *)},
      {"steel", FIELD_VALUE, 0, 0, 0, 0, NULL, FRAME_STEEL * sizeof(const json_value *)},
      {"sheets", FIELD_VALUE, 0, 0, 0, 0, NULL, offsetof(raw_stock, sheets)},
  };
  raw_stock raw = {{NULL, NULL}, NULL};
  if (!fields_read(r->arena, r->diags, v, table, COUNT(table), &raw)) return;
  for (int m = FRAME_WOOD; m <= FRAME_STEEL; m++) {
    if (raw.of[m]) read_lengths(r, raw.of[m], &r->book->stock[m]);
  }
  if (raw.sheets) read_sheets(r, raw.sheets);
}

/* ---- what a takeoff can ask for ---- */

static const struct {
  const char *code;
  price_unit unit;
} work_goods[WORK_COUNT] = {
    [WORK_SCREW] = {"screw", UNIT_EACH},
    [WORK_SEALANT] = {"sealant", UNIT_M},
    [WORK_HEAD_JOINT] = {"head-joint", UNIT_M},
    [WORK_BOX_PAD] = {"box-pad", UNIT_EACH},
    [WORK_FINISH_1] = {"finish-1", UNIT_M2},
    [WORK_FINISH_2] = {"finish-2", UNIT_M2},
    [WORK_FINISH_3] = {"finish-3", UNIT_M2},
    [WORK_FINISH_4] = {"finish-4", UNIT_M2},
    [WORK_FINISH_5] = {"finish-5", UNIT_M2},
    [WORK_BACKING_STEEL] = {"backing-strap", UNIT_M},
    [WORK_BACKING_WOOD] = {"backing-2x8", UNIT_M},
    [WORK_BACKING_FRT] = {"backing-ply-frt", UNIT_M},
    [WORK_FIREBLOCK_WOOD] = {"fireblock-2x", UNIT_M},
    [WORK_FIREBLOCK_BATT] = {"fireblock-batt", UNIT_M},
    [WORK_BRIDGING] = {"bridging", UNIT_M},
    [WORK_CROSS_BRACE] = {"cross-brace", UNIT_EACH},
};

static const char *const batt_suffixes[BATT_WIDTHS] = {"15in", "23in", "16in", "24in"};

int prices_item(const price_book *b, const char *code) {
  for (size_t i = 0; i < b->count; i++) {
    if (text_equal(b->items[i].code, code)) return (int)i;
  }
  return CATALOG_NONE;
}

static const char *const unit_kinds[UNIT_COUNT] = {"area: m2 or ft2", "length: m or ft",
                                                   "the piece: each"};

static price_slot slot(reader *r, const char *code, price_unit unit) {
  price_slot s = {code, prices_item(r->book, code)};
  if (s.item == CATALOG_NONE) return s;
  kept_item *kept = &r->kept[s.item];
  kept->used = true;
  if (r->book->items[s.item].unit != unit && !kept->told) {
    kept->told = true;
    const json_value *json = r->book->items[s.item].json, *said = json_get(json, "unit");
    fault(r, ERROR_FIELD_UNIT, said ? said : json,
          text_format(r->arena, "\"%s\" is taken off by %s", code, unit_kinds[unit]));
  }
  return s;
}

static void fill_slots(reader *r, const fill *f, price_slot out[BATT_WIDTHS]) {
  price_slot any = slot(r, f->id, UNIT_M2);
  for (int w = 0; w < BATT_WIDTHS; w++) {
    out[w] = any;
    if (f->material == FILL_CELLULOSE) continue;
    price_slot own = slot(r, text_format(r->arena, "%s-%s", f->id, batt_suffixes[w]), UNIT_M2);
    if (own.item != CATALOG_NONE || any.item == CATALOG_NONE) out[w] = own;
  }
}

static void bind_frames(reader *r) {
  const catalog *c = r->catalog;
  price_book *b = r->book;
  b->studs = arena_array(r->arena, c->frame_count, sizeof *b->studs);
  b->runners = arena_array(r->arena, c->frame_count, sizeof *b->runners);
  b->heads = arena_array(r->arena, c->frame_count, sizeof *b->heads);
  for (size_t i = 0; i < c->frame_count; i++) {
    const frame *f = &c->frames[i];
    b->studs[i] = slot(r, f->stud, UNIT_M);
    b->runners[i] = slot(r, f->runner, UNIT_M);
    /* Studs slip in a deep-leg track; wood plates hang from clips that cost little. */
    b->heads[i] = f->material == FRAME_STEEL
                      ? slot(r, text_format(r->arena, "%s-deep", f->runner), UNIT_M)
                      : b->runners[i];
  }
}

static void bind(reader *r) {
  const catalog *c = r->catalog;
  price_book *b = r->book;
  b->layers = arena_array(r->arena, c->layer_count, sizeof *b->layers);
  for (size_t i = 0; i < c->layer_count; i++) b->layers[i] = slot(r, c->layers[i].id, UNIT_M2);
  bind_frames(r);
  b->fills = arena_array(r->arena, c->fill_count, sizeof *b->fills);
  for (size_t i = 0; i < c->fill_count; i++) fill_slots(r, &c->fills[i], b->fills[i]);
  b->rails = arena_array(r->arena, c->mount_count, sizeof *b->rails);
  b->clips = arena_array(r->arena, c->mount_count, sizeof *b->clips);
  for (size_t i = 0; i < c->mount_count; i++) {
    const mount *m = &c->mounts[i];
    b->rails[i] = slot(r, m->rail, UNIT_M);
    b->clips[i] = m->clip ? slot(r, m->clip, UNIT_EACH) : (price_slot){NULL, CATALOG_NONE};
  }
  for (int i = 0; i < WORK_COUNT; i++) b->work[i] = slot(r, work_goods[i].code, work_goods[i].unit);
}

/* ---- all codes, once each ---- */

static void list_slot(price_codes *l, price_slot s, price_unit unit) {
  if (!s.code) return;
  for (size_t i = 0; i < l->count; i++) {
    if (text_equal(l->code[i], s.code)) return;
  }
  l->code[l->count] = s.code;
  l->unit[l->count] = unit;
  l->priced[l->count++] = s.item != CATALOG_NONE;
}

price_codes prices_codes(arena *a, const catalog *c, const price_book *b) {
  size_t most = c->layer_count + 3 * c->frame_count + BATT_WIDTHS * c->fill_count +
                2 * c->mount_count + WORK_COUNT;
  price_codes l = {arena_array(a, most, sizeof *l.code), arena_array(a, most, sizeof *l.priced),
                   arena_array(a, most, sizeof *l.unit), 0};
  for (size_t i = 0; i < c->layer_count; i++) list_slot(&l, b->layers[i], UNIT_M2);
  for (size_t i = 0; i < c->frame_count; i++) {
    list_slot(&l, b->studs[i], UNIT_M);
    list_slot(&l, b->runners[i], UNIT_M);
    list_slot(&l, b->heads[i], UNIT_M);
  }
  for (size_t i = 0; i < c->fill_count; i++) {
    for (int w = 0; w < BATT_WIDTHS; w++) list_slot(&l, b->fills[i][w], UNIT_M2);
  }
  for (size_t i = 0; i < c->mount_count; i++) {
    list_slot(&l, b->rails[i], UNIT_M);
    list_slot(&l, b->clips[i], UNIT_EACH);
  }
  for (int i = 0; i < WORK_COUNT; i++) list_slot(&l, b->work[i], work_goods[i].unit);
  return l;
}

int prices_report_missing(arena *a, diag_list *d, const catalog *c, const price_book *b) {
  price_codes l = prices_codes(a, c, b);
  int missing = 0;
  for (size_t i = 0; i < l.count; i++) {
    if (l.priced[i]) continue;
    diag_place place = {b->file, 0, 0, NULL};
    diag_add(d, DIAG_WARNING, ERROR_PRICE_MISSING, place,
             "no price for \"%s\": walls that need it cannot be costed", l.code[i]);
    missing++;
  }
  return missing;
}

static void report_unused(reader *r) {
  price_codes l = prices_codes(r->arena, r->catalog, r->book);
  for (size_t i = 0; i < r->book->count; i++) {
    if (r->kept[i].used) continue;
    const price_item *item = &r->book->items[i];
    const char *code = item->code, *near = text_nearest(code, l.code, l.count);
    const char *hint = near ? text_format(r->arena, "; did you mean \"%s\"?", near) : "";
    diag_add(r->diags, DIAG_WARNING, ERROR_PRICE_UNKNOWN_ITEM,
             json_place(r->arena, json_get(item->json, "code")),
             "nothing is priced by the code \"%s\"%s", code, hint);
  }
}

/* ---- the book ---- */

static void read_parts(reader *r, const raw_book *raw) {
  if (raw->rates) read_rates(r, raw->rates);
  if (raw->heights) read_heights(r, raw->heights);
  if (raw->short_wall) read_short_wall(r, raw->short_wall);
  if (raw->tall_studs) read_tall_studs(r, raw->tall_studs);
  if (raw->stock) read_stock(r, raw->stock);
  if (raw->items) read_items(r, raw->items);
}

static price_book *read_book(arena *a, diag_list *d, const catalog *c, const json_value *root,
                             const chain *above, reader *r);

/* The book that the key "base" names; NULL after a fault. */
static const price_book *read_base(reader *r, const json_value *v) {
  arena *a = r->arena;
  if (v->kind != JSON_STRING) return NULL; /* told with the fields */
  const char *path = file_beside(a, r->book->file, v->string);
  const char *wrong = NULL;
  for (const chain *k = &r->at; k; k = k->above) {
    if (k->file && file_same(k->file, path)) wrong = "builds on itself";
  }
  if (!file_exists(path)) wrong = "is not there";
  if (!wrong && r->at.depth == PRICES_MAX_BASES) wrong = "stands below too many others";
  if (wrong) {
    fault(r, ERROR_PRICE_BASE, v, text_format(a, "the base \"%s\" %s", v->string, wrong));
    return NULL;
  }
  size_t before = r->diags->errors;
  reader below;
  const json_value *root = json_load(a, r->diags, path);
  price_book *base = root ? read_book(a, r->diags, r->catalog, root, &r->at, &below) : NULL;
  if (base && r->diags->errors == before) return base;
  fault(r, ERROR_PRICE_BASE, v, text_format(a, "the base \"%s\" has faults", v->string));
  return NULL;
}

typedef struct place_factors {
  double material, labour;
} place_factors;

/* The base's figures at this place. */
static void take_base(reader *r, const price_book *base, place_factors f) {
  price_book *b = r->book;
  const json_value *json = b->json;
  *b = *base;
  b->json = json;
  b->file = json->file;
  b->base = base;
  b->items = arena_array(r->arena, b->count, sizeof *b->items);
  for (size_t i = 0; i < b->count; i++) {
    price_item *item = &b->items[i];
    *item = base->items[i];
    item->price *= f.material;
    price_break *breaks = arena_array(r->arena, item->break_count, sizeof *breaks);
    for (size_t k = 0; k < item->break_count; k++) {
      breaks[k] = item->breaks[k];
      breaks[k].price *= f.material;
    }
    item->breaks = breaks;
  }
  for (int t = 0; t < TRADE_COUNT; t++) b->rate[t] *= f.labour;
  r->kept = arena_array(r->arena, b->count, sizeof *r->kept);
}

static place_factors read_factors(reader *r, const json_value *v) {
  static const field table[] = {
      {"material", FIELD_NUMBER, 0, 0.1, 10, 0, NULL, offsetof(place_factors, material)},
      {"labour", FIELD_NUMBER, 0, 0.1, 10, 0, NULL, offsetof(place_factors, labour)},
  };
  place_factors f = {1, 1};
  if (v) (void)fields_read(r->arena, r->diags, v, table, COUNT(table), &f);
  return f;
}

/* What a book with a base need not say again. */
static void relax(field *table, size_t rows) {
  static const char *const inherited[] = {"currency", "labour_rates", "overhead_profit",
                                          "sales_tax", "items"};
  for (size_t i = 0; i < rows; i++) {
    for (size_t k = 0; k < COUNT(inherited); k++) {
      if (text_equal(table[i].key, inherited[k])) table[i].flags &= ~(unsigned)REQUIRED;
    }
  }
}

static price_book *read_book(arena *a, diag_list *d, const catalog *c, const json_value *root,
                             const chain *above, reader *r) {
  if (!json_is(a, d, root, "price-book")) return NULL;
  raw_book *raw = arena_alloc(a, sizeof *raw);
  *r = (reader){a, d, c, &raw->book, NULL, {above, root->file, above ? above->depth + 1 : 0}};
  raw->book.json = root;
  raw->book.file = root->file;
  field table[COUNT(book_fields)];
  memcpy(table, book_fields, sizeof table);
  const json_value *named = json_get(root, "base"), *factors = json_get(root, "place_factors");
  if (named) {
    const price_book *base = read_base(r, named);
    if (base) take_base(r, base, read_factors(r, factors));
    relax(table, COUNT(table));
  } else if (factors) {
    fault(r, ERROR_FIELD_CONFLICT, factors, "place factors need a \"base\" to act on");
  }
  const char *currency = raw->book.currency;
  (void)fields_read(a, d, root, table, COUNT(table), raw);
  if (raw->book.base && !text_equal(raw->book.currency, currency))
    fault(r, ERROR_PRICE_BASE, json_get(root, "currency"),
          text_format(a, "the base prices in %s", currency));
  read_parts(r, raw);
  return r->book;
}

price_book *prices_read(arena *a, diag_list *d, const catalog *c, const json_value *root) {
  size_t before = d->errors;
  reader r;
  if (!read_book(a, d, c, root, NULL, &r)) return NULL;
  bind(&r);
  if (d->errors == before) report_unused(&r);
  return d->errors == before ? r.book : NULL;
}

price_book *prices_load(arena *a, diag_list *d, const catalog *c, const char *path) {
  const json_value *root = json_load(a, d, path);
  return root ? prices_read(a, d, c, root) : NULL;
}
