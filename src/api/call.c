#include "api/call.h"

#include <stddef.h>
#include <string.h>

#include "base/file.h"
#include "report/report_xlsx.h"

enum { LINE_MAX_BYTES = 4000, ANSWER_MAX_BYTES = 64 << 20 };

static void tell_item(call *k, const diag *item) {
  text line;
  text_init(&line, k->memory, LINE_MAX_BYTES);
  diag_print(&line, item);
  septum_message message = {
      .severity = (int)item->level, .code = (int)item->code, .text = line.data};
  k->listener(k->user, &message);
}

void call_tell(call *k) {
  if (k->listener == NULL) return;
  while (k->heard < k->diags.count) tell_item(k, &k->diags.items[k->heard++]);
  if (k->diags.dropped == 0) return;
  const char *more =
      text_format(k->memory, "note: %zu further messages are not shown", k->diags.dropped);
  k->diags.dropped = 0;
  septum_message message = {.severity = DIAG_NOTE, .code = ERROR_NONE, .text = more};
  k->listener(k->user, &message);
}

/* No allocation here: there is no memory for one. */
static status out_of_memory(septum_listener listener, void *user) {
  static const septum_message message = {
      .severity = DIAG_ERROR, .code = ERROR_SYSTEM_MEMORY, .text = "error[E403]: memory ran out"};
  if (listener != NULL) listener(user, &message);
  return STATUS_SYSTEM;
}

/* The only setjmp: nothing local changes between it and the jump. */
static status guarded(call *k, call_stage stage, void *job) {
  if (setjmp(k->no_memory) != 0) return out_of_memory(k->listener, k->user);
  status answer = stage(k, job);
  call_tell(k);
  k->complete = true;
  return answer;
}

septum_status call_run(septum_listener listener, void *user, call_stage stage, void *job,
                       bool *made) {
  call k;
  memset(&k, 0, sizeof k);
  k.listener = listener;
  k.user = user;
  k.memory = arena_create(0, &k.no_memory);
  k.kept = arena_create(0, &k.no_memory);
  status answer = STATUS_SYSTEM;
  if (k.memory == NULL || k.kept == NULL) {
    answer = out_of_memory(listener, user);
  } else {
    diag_init(&k.diags, k.memory);
    answer = guarded(&k, stage, job);
  }
  *made = k.complete && k.keep;
  arena_free(k.memory);
  if (!*made) arena_free(k.kept);
  return (septum_status)answer;
}

septum_answer *call_answer(call *k, const char *words, const char *json, const char *csv) {
  septum_answer *answer = arena_alloc(k->kept, sizeof *answer);
  answer->text = text_copy(k->kept, words);
  answer->json = text_copy(k->kept, json);
  answer->csv = text_copy(k->kept, csv);
  answer->memory = k->kept;
  k->keep = true;
  return answer;
}

void call_texts_init(call *k, call_texts *t) {
  text_init(&t->words, k->memory, ANSWER_MAX_BYTES);
  text_init(&t->json, k->memory, ANSWER_MAX_BYTES);
  text_init(&t->csv, k->memory, ANSWER_MAX_BYTES);
  text_init(&t->page, k->memory, ANSWER_MAX_BYTES);
}

bool call_texts_whole(call *k, const call_texts *t) {
  if (!t->words.cut && !t->json.cut && !t->csv.cut && !t->page.cut) return true;
  diag_error(&k->diags, ERROR_INTERNAL, "the answer is larger than any answer should be");
  return false;
}

bool call_save_page(call *k, const call_texts *t, const char *path) {
  if (path == NULL) return true;
  return call_texts_whole(k, t) &&
         file_write(k->memory, &k->diags, path, t->page.data, t->page.len);
}

bool call_can_write(call *k, const septum_options *options) {
  return options->save_xlsx == NULL || report_xlsx_there(&k->diags);
}

sheet_book *call_book(call *k, const septum_options *options) {
  return options->save_xlsx ? arena_alloc(k->memory, sizeof(sheet_book)) : NULL;
}

bool call_save_book(call *k, const call_texts *t, const sheet_book *book, const char *path) {
  if (path == NULL) return true;
  return call_texts_whole(k, t) && report_xlsx_write(k->memory, &k->diags, book, path);
}

septum_answer *call_deliver(call *k, const call_texts *t, const char *csv_path) {
  if (!call_texts_whole(k, t)) return NULL;
  if (csv_path != NULL && !file_write(k->memory, &k->diags, csv_path, t->csv.data, t->csv.len))
    return NULL;
  return call_answer(k, t->words.data, t->json.data, t->csv.data);
}
