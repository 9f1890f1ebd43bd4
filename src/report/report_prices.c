#include "report/report_prices.h"

#include <math.h>
#include <string.h>

#include "report/markup.h"
#include "report/page.h"

enum { PERCENT_DIGITS = 1, FIGURE_DIGITS = 9, SHOWN_DIGITS = 4, WORDS_BYTES = 4000 };

static const char *const kind_names[UPDATE_KINDS] = {
    "same", "confirmed", "changed", "new", "incomplete", "no-price", "unmatched", "ambiguous"};
static const char *const kind_words[UPDATE_KINDS] = {"as the book has them",
                                                     "the same at a later date",
                                                     "changed",
                                                     "new in the book",
                                                     "not in the book and incomplete",
                                                     "without a price",
                                                     "fit no item",
                                                     "fit several items"};
static const char *const match_names[] = {"code", "name", "spoken"};

static bool is_diff(const update_line *l) {
  return l->kind == UPDATE_CONFIRMED || l->kind == UPDATE_CHANGED || l->kind == UPDATE_NEW;
}

static bool is_left(const update_line *l) {
  return l->kind > UPDATE_NEW;
}

static bool has_percent(const update_line *l) {
  return l->kind <= UPDATE_CHANGED && l->before > 0;
}

static double percent(const update_line *l) {
  return 100 * (l->after / l->before - 1);
}

/* --- text ------------------------------------------------------------------------------------ */

static const char *days(arena *a, long n) {
  return text_format(a, "%ld %s", n, n == 1 || n == -1 ? "day" : "days");
}

static void put_book(arena *a, const price_update *u, text *out) {
  const price_book *b = u->book;
  page_line(out, "Price book",
            text_format(a, "%s; %s; %s%s%s.", b->name, b->place, b->date,
                        u->aged ? text_format(a, ", %s old on ", days(a, u->age_days)) : "",
                        u->aged ? u->today : ""));
  page_line(out, "",
            text_format(a, "%zu items, in %s%s%s.", b->count, b->currency,
                        b->base ? ", built on " : "", b->base ? b->base->name : ""));
}

static void put_counts(arena *a, const price_update *u, text *out) {
  text t;
  text_init(&t, a, WORDS_BYTES);
  text_putf(&t, "%s: %zu rows", u->table->file, u->count);
  bool begun = false;
  for (int k = 0; k < UPDATE_KINDS; k++) {
    if (u->of_kind[k] == 0) continue;
    text_putf(&t, "%s%zu %s", begun ? ", " : "; ", u->of_kind[k], kind_words[k]);
    begun = true;
  }
  text_char(&t, '.');
  page_line(out, "List", t.data);
}

/* Columns of the table of changes; numbers by their ends. */
enum {
  CODE_AT = 6,
  CODE_COLUMNS = 26,
  PER_AT = 33,
  PER_COLUMNS = 16,
  BEFORE_END = 60,
  AFTER_END = 71,
  PERCENT_END = 79,
  DATE_AT = 81,
  AGE_END = 100
};

static void put_remark(const update_line *l, text *out) {
  if (!l->remark) return;
  text_pad(out, CODE_AT);
  page_words(out, CODE_AT, l->remark);
}

static void put_diff(arena *a, const update_line *l, text *out) {
  text_putf(out, "%d", l->row->number);
  text_pad(out, CODE_AT);
  page_cut(out, CODE_COLUMNS, l->code);
  text_pad(out, PER_AT);
  page_cut(out, PER_COLUMNS, l->per);
  page_right(out, BEFORE_END, l->kind == UPDATE_NEW ? "none" : text_of(a, l->before, SHOWN_DIGITS));
  page_right(out, AFTER_END, text_of(a, l->after, SHOWN_DIGITS));
  if (has_percent(l)) {
    double p = percent(l);
    page_right(out, PERCENT_END,
               text_format(a, "%s%s %%", p > 0.05 ? "+" : "", text_of(a, p, PERCENT_DIGITS)));
  }
  text_pad(out, DATE_AT);
  page_cut(out, 10, l->date ? l->date : "no date");
  if (l->aged) page_right(out, AGE_END, text_format(a, "%ld d", l->age_days));
  text_char(out, '\n');
  put_remark(l, out);
}

static void put_diffs(arena *a, const price_update *u, text *out) {
  size_t n = u->of_kind[UPDATE_CONFIRMED] + u->of_kind[UPDATE_CHANGED] + u->of_kind[UPDATE_NEW];
  if (n == 0) {
    page_line(out, "Changes", "none.");
    return;
  }
  text_put(out, "\nRow   Item");
  text_pad(out, PER_AT);
  text_put(out, "per");
  page_right(out, BEFORE_END, "before");
  page_right(out, AFTER_END, "after");
  page_right(out, PERCENT_END, "change");
  text_pad(out, DATE_AT);
  text_put(out, "priced");
  page_right(out, AGE_END, "age");
  text_char(out, '\n');
  for (size_t i = 0; i < u->count; i++) {
    if (is_diff(&u->line[i])) put_diff(a, &u->line[i], out);
  }
  text_char(out, '\n');
}

static void put_left(arena *a, const price_update *u, text *out) {
  bool begun = false;
  for (size_t i = 0; i < u->count; i++) {
    const update_line *l = &u->line[i];
    if (!is_left(l)) continue;
    if (!begun) text_put(out, "Left alone\n");
    begun = true;
    text_putf(out, "%d", l->row->number);
    text_pad(out, CODE_AT);
    page_words(out, CODE_AT,
               text_format(a, "%s: %s%s%s", l->said[0] ? l->said : "(nothing)", kind_words[l->kind],
                           l->remark ? "; " : "", l->remark ? l->remark : ""));
  }
  if (begun) text_char(out, '\n');
}

static size_t count_unpriced(const price_update *u) {
  size_t n = 0;
  for (size_t i = 0; i < u->codes.count; i++) n += !u->codes.priced[i];
  return n;
}

static void put_unpriced(arena *a, const price_update *u, text *out) {
  size_t n = count_unpriced(u);
  if (n == 0) {
    page_line(out, "Unpriced", "nothing: every item of the catalogs has a price.");
    return;
  }
  text t;
  text_init(&t, a, JSON_MAX_BYTES);
  text_putf(&t, "%zu items of the catalogs, so walls that need them are left out: ", n);
  for (size_t i = 0, k = 0; i < u->codes.count; i++) {
    if (!u->codes.priced[i]) text_putf(&t, "%s%s", k++ ? ", " : "", u->codes.code[i]);
  }
  text_char(&t, '.');
  page_line(out, "Unpriced", t.data);
}

void report_prices_text(arena *a, const price_update *u, const char *written, text *out) {
  put_book(a, u, out);
  put_counts(a, u, out);
  put_diffs(a, u, out);
  put_left(a, u, out);
  put_unpriced(a, u, out);
  page_line(out, "Written", written ? written : "nothing; --write FILE writes the book.");
}

void report_book_text(arena *a, const price_update *u, const char *written, text *out) {
  put_book(a, u, out);
  put_unpriced(a, u, out);
  page_line(out, "Written", written ? written : "nothing.");
}

/* --- JSON ------------------------------------------------------------------------------------ */

static void json_book(markup_json *j, const price_update *u) {
  const price_book *b = u->book;
  markup_json_object(j, "book", true);
  markup_json_string(j, "file", b->file);
  markup_json_string(j, "name", b->name);
  markup_json_string(j, "place", b->place);
  markup_json_string(j, "date", b->date);
  if (u->aged)
    markup_json_integer(j, "age_days", u->age_days);
  else
    markup_json_null(j, "age_days");
  markup_json_string(j, "currency", b->currency);
  markup_json_string(j, "base", b->base ? b->base->name : NULL);
  markup_json_integer(j, "items", (long long)b->count);
  markup_json_close(j);
  markup_json_string(j, "today", u->today);
}

static void json_line(markup_json *j, const update_line *l) {
  bool priced = l->kind <= UPDATE_NEW;
  markup_json_object(j, NULL, true);
  markup_json_integer(j, "row", l->row->number);
  markup_json_string(j, "kind", kind_names[l->kind]);
  markup_json_string(j, "said", l->said);
  markup_json_string(j, "code", l->code);
  if (l->code) markup_json_string(j, "match", match_names[l->match]);
  if (priced) {
    markup_json_string(j, "unit", l->unit);
    markup_json_number(j, "listed", l->listed, PRICE_DECIMALS);
    markup_json_number(j, "holds", l->holds, PRICE_DECIMALS);
    markup_json_string(j, "per", l->per);
    if (l->kind == UPDATE_NEW)
      markup_json_null(j, "before");
    else
      markup_json_number(j, "before", l->before, PRICE_DECIMALS);
    markup_json_number(j, "after", l->after, PRICE_DECIMALS);
    if (has_percent(l))
      markup_json_number(j, "percent", percent(l), PERCENT_DIGITS);
    else
      markup_json_null(j, "percent");
    markup_json_bool(j, "far", l->far);
  }
  markup_json_string(j, "date", l->date);
  if (l->aged)
    markup_json_integer(j, "age_days", l->age_days);
  else
    markup_json_null(j, "age_days");
  markup_json_string(j, "remark", l->remark);
  markup_json_close(j);
}

static void json_end(markup_json *j, const price_update *u, const char *written) {
  markup_json_array(j, "unpriced", true);
  for (size_t i = 0; i < u->codes.count; i++) {
    if (!u->codes.priced[i]) markup_json_string(j, NULL, u->codes.code[i]);
  }
  markup_json_close(j);
  markup_json_string(j, "written", written);
  markup_json_close(j);
}

static void json_start(markup_json *j, const price_update *u, text *out) {
  markup_json_init(j, out);
  markup_json_object(j, NULL, false);
  markup_json_string(j, "septum", "prices/1");
  json_book(j, u);
}

void report_prices_json(const price_update *u, const char *written, text *out) {
  markup_json j;
  json_start(&j, u, out);
  markup_json_string(&j, "list", u->table->file);
  markup_json_object(&j, "rows", true);
  for (int k = 0; k < UPDATE_KINDS; k++)
    markup_json_integer(&j, kind_names[k], (long long)u->of_kind[k]);
  markup_json_close(&j);
  markup_json_array(&j, "lines", false);
  for (size_t i = 0; i < u->count; i++) json_line(&j, &u->line[i]);
  markup_json_close(&j);
  json_end(&j, u, written);
}

void report_book_json(const price_update *u, const char *written, text *out) {
  markup_json j;
  json_start(&j, u, out);
  json_end(&j, u, written);
}

/* --- CSV ------------------------------------------------------------------------------------- */

static void csv_figure(arena *a, text *out, double value) {
  text t;
  text_init(&t, a, 64);
  if (value > 0) text_number(&t, value, FIGURE_DIGITS);
  markup_csv_field(out, t.data, false);
}

static void csv_number_always(arena *a, text *out, double value) {
  text t;
  text_init(&t, a, 64);
  text_number(&t, value, FIGURE_DIGITS);
  markup_csv_field(out, t.data, false);
}

/* Items priced by what they are bought as say so: "85 ft". */
static void csv_price(arena *a, const price_item *x, text *out) {
  double units = x->bought_quantity / x->unit_si;
  bool by_bought = json_get(x->json, "price_bought") != NULL;
  text unit;
  text_init(&unit, a, 100);
  if (by_bought) {
    text_number(&unit, units, FIGURE_DIGITS);
    text_char(&unit, ' ');
  }
  text_put(&unit, x->unit_word);
  markup_csv_field(out, unit.data, false);
  csv_number_always(a, out, x->price * x->unit_si * (by_bought ? units : 1));
}

static void csv_item(arena *a, const price_book *b, const price_item *x, text *out) {
  markup_csv_field(out, x->code, true);
  markup_csv_field(out, x->name, false);
  csv_price(a, x, out);
  markup_csv_field(out, b->currency, false);
  markup_csv_field(out, x->date, false);
  markup_csv_field(out, x->section, false);
  markup_csv_field(out, x->bought_as ? x->bought_as : "", false);
  csv_figure(a, out, x->bought_quantity / x->unit_si);
  csv_number_always(a, out, x->waste);
  csv_number_always(a, out, x->hours * x->unit_si);
  csv_figure(a, out, x->hours_each);
  markup_csv_field(out, trade_names[x->trade], false);
  csv_figure(a, out, x->minimum_order / x->unit_si);
  csv_figure(a, out, x->lead_weeks);
  markup_csv_end(out);
}

void report_book_csv(arena *a, const price_book *b, text *out) {
  for (size_t i = 0; price_columns[i]; i++) markup_csv_field(out, price_columns[i], i == 0);
  markup_csv_end(out);
  for (size_t i = 0; i < b->count; i++) csv_item(a, b, &b->items[i], out);
}
