/* septum: which wall to build between two rooms.
 * SPDX-License-Identifier: GPL-3.0-or-later
 *
 * The library neither prints nor exits. A handle belongs to one thread at a time; answers belong to their handle until
 * freed. Text is UTF-8. All numbers in answers carry their unit in the name. */
#ifndef SEPTUM_H
#define SEPTUM_H

#include <stddef.h>

#ifdef __cplusplus
extern "C" {
#endif

#define SEPTUM_VERSION "0.1.0"

/* Answers of every call; the numbers are the exit statuses of the command. */
typedef enum septum_status {
  SEPTUM_OK = 0,       /* an answer */
  SEPTUM_NO_WALL = 1,  /* an answer: no wall fits */
  SEPTUM_USAGE = 2,    /* an argument cannot be used */
  SEPTUM_DATA = 3,     /* bad data; see the diagnostics */
  SEPTUM_SYSTEM = 4,   /* memory or files */
  SEPTUM_INTERNAL = 5  /* a fault of the library */
} septum_status;

typedef struct septum septum;
typedef struct septum_answer septum_answer;

typedef enum septum_units { SEPTUM_UNITS_BRIEF = 0, SEPTUM_UNITS_US = 1, SEPTUM_UNITS_SI = 2 } septum_units;

/* One located message. Strings live until the callback returns. */
typedef struct septum_message {
  int severity;       /* 0 error, 1 warning, 2 note */
  int code;           /* number of docs/errors.md */
  const char *text;   /* the whole line: "file:line:column: error[E214] $.path: ..." */
} septum_message;
typedef void (*septum_listener)(void *user, const septum_message *message);

/* Fill with septum_options_init, then change. Strings must live during the call. */
typedef struct septum_options {
  const char *prices;      /* price book; NULL = the brief's, else the default book */
  const char *brief;       /* rate: judge under this brief; NULL = reference wall 10 m x 3 m */
  const char *save_model;  /* pick: write the 0-1 model in CPLEX LP format; NULL = don't */
  double time_limit_s;     /* 0 = none */
  septum_units units;
} septum_options;

void septum_options_init(septum_options *options);

/* A new handle with the catalogs of `data_dir`/catalogs (or of `catalogs_dir` when not NULL). NULL data_dir:
 * $SEPTUM_DATA, then `<directory of the executable>/../share/septum`. The listener hears every message of this handle. */
septum_status septum_open(const char *catalogs_dir, septum_listener listener, void *user, septum **out);
void septum_close(septum *handle);

/* Rates one wall: a wall line, or the path of a wall/1 file. */
septum_status septum_rate(septum *handle, const char *wall, const septum_options *options, septum_answer **out);
/* The cheapest wall for the brief at `path`. */
septum_status septum_pick(septum *handle, const char *path, const septum_options *options, septum_answer **out);
/* Checks files of any kind that septum reads; messages go to the listener. *out gets a line a file. */
septum_status septum_check(septum *handle, const char *const *paths, size_t count, septum_answer **out);

/* The answer as text for people, and as JSON; both live as long as the answer. */
const char *septum_answer_text(const septum_answer *answer);
const char *septum_answer_json(const septum_answer *answer);
void septum_answer_free(septum_answer *answer);

/* "0.1.0" */
const char *septum_version(void);

#ifdef __cplusplus
}
#endif
#endif
