/* One call of the public API: its memory, its messages, and the one place where running out of
 * memory lands. */
#ifndef API_CALL_H
#define API_CALL_H

#include <setjmp.h>

#include "base/diag.h"
#include "base/text.h"
#include "input/catalog.h"
#include "report/sheet.h"
#include "septum.h"

struct septum {
  arena *memory; /* holds this and the catalogs */
  const catalog *catalog;
  septum_listener listener;
  void *user;
};

struct septum_answer {
  arena *memory; /* holds this and the texts */
  const char *text, *json, *csv;
};

typedef struct call {
  jmp_buf no_memory;
  arena *memory; /* freed at the end of the call */
  arena *kept;   /* holds what the call makes: a handle or an answer */
  bool keep;     /* set by the stage: `kept` lives on */
  bool complete; /* the stage and its messages are done */
  diag_list diags;
  size_t heard; /* messages of `diags` already told */
  septum_listener listener;
  void *user;
} call;

/* Work of a call. It may jump out of any allocation. */
typedef status (*call_stage)(call *k, void *job);

/* Runs `stage`, tells the listener all messages, and frees the call's memory. *made says whether
 * the stage made something that lives on in `kept`; otherwise that is freed too. Memory that ran
 * out is STATUS_SYSTEM with a message, and nothing made. */
septum_status call_run(septum_listener listener, void *user, call_stage stage, void *job,
                       bool *made);
/* Tells the messages so far. */
void call_tell(call *k);
/* An answer in `kept` with copies of the texts; it lives on. */
septum_answer *call_answer(call *k, const char *text, const char *json, const char *csv);

/* The writings of one answer, under way. */
typedef struct call_texts {
  text words, json, csv;
  text page; /* HTML; empty where nobody asks for it */
} call_texts;

/* Empty, in the call's memory. */
void call_texts_init(call *k, call_texts *t);
/* Whether all are whole; a message when one is cut, and then no file should be written. */
bool call_texts_whole(call *k, const call_texts *t);
/* Writes the page to `path` (NULL: nothing is done). False after messages. */
bool call_save_page(call *k, const call_texts *t, const char *path);
/* What the options ask for and this build lacks is said before any work: false after that. */
bool call_can_write(call *k, const septum_options *options);
/* A workbook to fill, in the call's memory; NULL where the options ask for none. */
sheet_book *call_book(call *k, const septum_options *options);
/* Writes the workbook to `path` (NULL: nothing is done), nothing when a text is cut. False after
 * messages. */
bool call_save_book(call *k, const call_texts *t, const sheet_book *book, const char *path);
/* The answer, and its CSV in the file `csv_path` (NULL: none). NULL after messages. */
septum_answer *call_deliver(call *k, const call_texts *t, const char *csv_path);

#endif
