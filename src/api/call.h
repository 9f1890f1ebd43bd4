/* One call of the public API: its memory, its messages, and the one place where running out of
 * memory lands. */
#ifndef API_CALL_H
#define API_CALL_H

#include <setjmp.h>

#include "base/diag.h"
#include "input/catalog.h"
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
  arena *kept;   /* lives on in the handle or the answer when the call succeeds */
  diag_list diags;
  size_t heard; /* messages of `diags` already told */
  septum_listener listener;
  void *user;
} call;

/* Work of a call. It may jump out of any allocation. */
typedef status (*call_stage)(call *k, void *job);

/* Runs `stage`, tells the listener all messages, frees the call's memory, and `kept` too unless the
 * stage handed it on (set k->kept to NULL). Memory that ran out is STATUS_SYSTEM with a message. */
septum_status call_run(septum_listener listener, void *user, call_stage stage, void *job);
/* Tells the messages so far. */
void call_tell(call *k);
/* An answer in `kept` with copies of the texts; takes `kept` over. */
septum_answer *call_answer(call *k, const char *text, const char *json, const char *csv);

#endif
