/* septum_prices_update and septum_prices_list: supplier's lists and price books. */
#include <math.h>
#include <string.h>

#include "api/call.h"
#include "api/data.h"
#include "base/file.h"
#include "report/price_edit.h"
#include "report/report_prices.h"

typedef struct prices_job {
  const septum *handle;
  const char *list;
  septum_options options;
  septum_answer *made;
} prices_job;

/* The book of the options or the data folder, read with its bytes. */
static const price_book *load_book(call *k, const prices_job *job, const char **bytes,
                                   size_t *len) {
  const char *path = job->options.prices;
  if (path == NULL) path = data_default_prices(k->memory, &k->diags);
  if (path == NULL) return NULL;
  *bytes = file_read(k->memory, &k->diags, path, JSON_MAX_BYTES, len);
  if (*bytes == NULL) return NULL;
  const json_value *root = json_parse(k->memory, &k->diags, path, *bytes, *len);
  return root == NULL ? NULL : prices_read(k->memory, &k->diags, job->handle->catalog, root);
}

/* Whether the new book has every price that the list brings. */
static bool has_prices(const price_update *u, const price_book *b) {
  for (size_t i = 0; i < u->count; i++) {
    const update_line *l = &u->line[i];
    if (!price_edit_touches(l)) continue;
    int at = prices_item(b, l->code);
    if (at == CATALOG_NONE) return false;
    const price_item *x = &b->items[at];
    double price = x->price * x->unit_si * (l->by_bought ? x->bought_quantity / x->unit_si : 1);
    if (fabs(price - l->after) > pow(10, -PRICE_DECIMALS)) return false;
  }
  return true;
}

/* What is going to be written is read first, as a file at its new place: a book with a fault is
 * never written. Warnings are told once, but those of quantity breaks come from the new prices. */
static bool check_book(call *k, const prices_job *job, const price_update *u, const text *made) {
  diag_list found;
  diag_init(&found, k->memory);
  const json_value *root =
      json_parse(k->memory, &found, job->options.save_prices, made->data, made->len);
  const price_book *b =
      root == NULL ? NULL : prices_read(k->memory, &found, job->handle->catalog, root);
  for (size_t i = 0; i < found.count; i++) {
    const diag *item = &found.items[i];
    if (item->level == DIAG_ERROR || item->code == ERROR_PRICE_BREAK)
      diag_add(&k->diags, item->level, item->code, item->place, "%s", item->message);
  }
  if (b == NULL) return false;
  if (has_prices(u, b)) return true;
  diag_error(&k->diags, ERROR_INTERNAL, "the new price book does not read as it was meant");
  return false;
}

static bool write_book(call *k, const prices_job *job, const price_update *u, const char *bytes,
                       size_t len) {
  if (job->options.save_prices == NULL) return true;
  text made;
  text_init(&made, k->memory, JSON_MAX_BYTES);
  price_edit(k->memory, u, bytes, len, &made);
  return check_book(k, job, u, &made) &&
         file_write(k->memory, &k->diags, job->options.save_prices, made.data, made.len);
}

static status update_stage(call *k, void *given) {
  prices_job *job = given;
  const char *bytes = NULL;
  size_t len = 0;
  const price_book *b = load_book(k, job, &bytes, &len);
  const csv_table *t = csv_load(k->memory, &k->diags, job->list);
  if (b == NULL || t == NULL) return k->diags.worst;
  price_update *u = arena_alloc(k->memory, sizeof *u);
  if (!price_update_read(k->memory, &k->diags, job->handle->catalog, b, t, job->options.today, u) ||
      !write_book(k, job, u, bytes, len))
    return k->diags.worst;
  text words, json;
  text_init(&words, k->memory, JSON_MAX_BYTES);
  text_init(&json, k->memory, JSON_MAX_BYTES);
  report_prices_text(k->memory, u, job->options.save_prices, &words);
  report_prices_json(u, job->options.save_prices, &json);
  job->made = call_answer(k, words.data, json.data, "");
  return STATUS_OK;
}

static status list_stage(call *k, void *given) {
  prices_job *job = given;
  const char *bytes = NULL, *path = job->options.save_csv;
  size_t len = 0;
  const price_book *b = load_book(k, job, &bytes, &len);
  if (b == NULL) return k->diags.worst;
  price_update *u = arena_alloc(k->memory, sizeof *u);
  if (!price_update_age(k->memory, &k->diags, job->handle->catalog, b, job->options.today, u))
    return k->diags.worst;
  call_texts t;
  call_texts_init(k, &t);
  report_book_text(k->memory, u, path, &t.words);
  report_book_json(u, path, &t.json);
  report_book_csv(k->memory, b, &t.csv);
  job->made = call_deliver(k, &t, path);
  if (job->made == NULL) return k->diags.worst;
  return STATUS_OK;
}

static septum_status run(septum *handle, prices_job *job, const septum_options *options,
                         call_stage stage, septum_answer **out) {
  if (options != NULL) job->options = *options;
  bool made = false;
  septum_status answer = call_run(handle->listener, handle->user, stage, job, &made);
  *out = made ? job->made : NULL;
  return answer;
}

septum_status septum_prices_update(septum *handle, const char *list, const septum_options *options,
                                   septum_answer **out) {
  prices_job job = {.handle = handle, .list = list};
  return run(handle, &job, options, update_stage, out);
}

septum_status septum_prices_list(septum *handle, const septum_options *options,
                                 septum_answer **out) {
  prices_job job = {.handle = handle};
  return run(handle, &job, options, list_stage, out);
}
