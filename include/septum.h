/* septum: which wall to build between two rooms.
 * SPDX-License-Identifier: GPL-3.0-or-later
 *
 * The library neither prints nor exits. A handle belongs to one thread at a time; answers live
 * until freed, also beyond their handle. Text is UTF-8. Numbers in answers carry their unit in
 * the name. */
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
  SEPTUM_DATA = 3,     /* bad data; see the messages */
  SEPTUM_SYSTEM = 4,   /* memory or files */
  SEPTUM_INTERNAL = 5  /* a fault of the library */
} septum_status;

/* An open set of catalogs. Made by septum_open, freed by septum_close. */
typedef struct septum septum;
/* What a call found. Freed by septum_answer_free. */
typedef struct septum_answer septum_answer;

/* Units of text and CSV. JSON is always SI (and per ft2 where the key says so). */
typedef enum septum_units {
  SEPTUM_UNITS_BRIEF = 0, /* as the brief says, else US */
  SEPTUM_UNITS_US = 1,
  SEPTUM_UNITS_SI = 2
} septum_units;

/* One located message. Strings live until the callback returns. */
typedef struct septum_message {
  int severity;       /* 0 error, 1 warning, 2 note */
  int code;           /* number of docs/errors.md */
  const char *text;   /* the whole line: "file:line:column: error[E214] $.path: ..." */
} septum_message;

/* Hears each message as it is found; `user` is what septum_open was given. It must not call the
 * library. */
typedef void (*septum_listener)(void *user, const septum_message *message);

/* How far a long solve is: `stage` says which one ("plan", "without T2"); the cost of the best found
 * so far (infinite before the first) and what no better one can undercut, in the currency of the
 * price book. Called from a thread of the library's, never from two at once; it must return soon and
 * not call the library. */
typedef void (*septum_progress)(void *user, const char *stage, double found, double bound);

/* Fill with septum_options_init, then change. Strings must live during the call. Files appear
 * whole or not at all. */
typedef struct septum_options {
  const char *prices;     /* price book; NULL = the brief's, else the data folder's default */
  const char *brief;      /* rate: judge under this brief; NULL = reference wall 10 m x 3 m */
  const char *length, *height; /* rate, pick: size of the wall with its unit, "30ft", "9'-6\"", "3.2m",
                             in place of the brief's or the reference wall's; NULL = theirs */
  int corners, tees, doors; /* rate, pick: how many, 0 to 1000, for the takeoff of studs, in place of
                             the brief's; -1 (as septum_options_init sets them) = the brief's */
  const char *save_model; /* pick, plan: path for the 0-1 model in CPLEX LP format; NULL = none */
  const char *save_csv;   /* rate, pick: path for the takeoff as CSV; trim: for the log of proposals;
                             ladder: for its rungs; plan: for the schedule with what is assigned;
                             NULL = none */
  const char *save_html;  /* rate, pick, ladder, trim, plan: path for the answer as one page that needs nothing
                             else, in the units of text; NULL = none */
  const char *save_xlsx;  /* rate, pick, ladder, trim, plan: path for the answer as a workbook, in the
                             units of text; NULL = none */
  const char *save_prices; /* prices_update: path for the new price book; NULL = none */
  const char *today;      /* prices: the date that ages count to, "2031-03-01"; NULL = the newest in
                             the files. There is no clock in here */
  const char *slack;      /* trim: how much thicker than the specified wall a proposal may be, "1/2in",
                             "12 mm"; NULL = none where the brief sets no target, else no limit */
  int promised_stc, promised_fire; /* trim: STC and fire minutes that the drawings promise; 0 = none */
  const char *design;     /* trim: the listed design that they name; NULL = none */
  const char *allow;      /* trim: what may be given up, words with commas between: "thinner-studs",
                             "plain-boards", "thicker", "combustible", "less-fire"; NULL = nothing */
  const char *keep;       /* trim: what must stay as it is: "frame", "fire", "thickness"; NULL = nothing */
  double redesign_cost;   /* trim: of redesign and resubmittal, in the price book's currency */
  const char *metric;     /* ladder: "STC", "Rw", "Rw+C", "Rw+Ctr", "OITC"; NULL = the brief's, else STC */
  int from, to;           /* ladder: lowest and highest rating, 1 to 100; 0 = as far as walls reach */
  int count;              /* trim: most proposals, 1 to 100; 0 = 8 */
  double time_limit_s;    /* pick, plan: seconds for the solver; 0 = no limit */
  const volatile int *stop; /* plan: looked at again and again; as soon as it is not 0 the best plan
                             so far is the answer. A signal handler may set it. NULL = none */
  septum_progress progress; /* plan: hears how far a long solve is; NULL = none */
  void *progress_user;    /* given to it */
  septum_units units;     /* of text and CSV */
} septum_options;

/* Sets every field to its default. */
void septum_options_init(septum_options *options);

/* A new handle with the catalogs in `catalogs_dir`. NULL: those of the data folder, which is
 * $SEPTUM_DATA, else `<folder of the executable>/../share/septum`, and holds catalogs/ and prices/.
 * The listener (NULL = none) hears every message of this handle. *out is NULL unless SEPTUM_OK. */
septum_status septum_open(const char *catalogs_dir, septum_listener listener, void *user,
                          septum **out);
/* Frees the handle. NULL is fine. */
void septum_close(septum *handle);

/* Rates one wall: a wall line (it holds a `|`), or the path of a wall/1 file. `options` NULL =
 * defaults. SEPTUM_OK, SEPTUM_DATA (a wall that cannot be read or built), SEPTUM_SYSTEM. *out is
 * NULL unless SEPTUM_OK. */
septum_status septum_rate(septum *handle, const char *wall, const septum_options *options,
                          septum_answer **out);
/* The cheapest wall for the brief at `path`. SEPTUM_OK and SEPTUM_NO_WALL both give an answer. */
septum_status septum_pick(septum *handle, const char *path, const septum_options *options,
                          septum_answer **out);
/* A specified wall (a wall line, or the path of a wall/1 file) under the brief at `path`, and the
 * cheaper walls that hold everything, best saving first. A brief without a target holds the wall to
 * its own figures. SEPTUM_NO_WALL: an answer, nothing cheaper holds. SEPTUM_DATA: also a specified
 * wall that cannot be read, built or costed. The answer's CSV is a value-engineering log. */
septum_status septum_trim(septum *handle, const char *path, const char *specified,
                          const septum_options *options, septum_answer **out);
/* The cheapest wall for each rating under the brief at `path`, whose own target value decides nothing
 * (a brief without a target climbs in STC). `have` (NULL = none): a given wall, as in septum_rate, and
 * what it takes from there; then the rungs above what it meets. SEPTUM_NO_WALL: an answer, no rung
 * can be reached. SEPTUM_DATA: also a given wall that cannot be read, built or costed. */
septum_status septum_ladder(septum *handle, const char *path, const char *have,
                            const septum_options *options, septum_answer **out);
/* Few wall types for all walls of the project at `path` (project/1, which names its wall schedule),
 * at least cost, and which wall gets which. The answer's CSV is the schedule with what is assigned.
 * SEPTUM_NO_WALL: an answer, in which some wall has no type (the others are planned all the same),
 * or rules of the project that no plan keeps together, or nothing found within the time limit.
 * SEPTUM_DATA: also a fault of the schedule, or of a wall type of the drawings. */
septum_status septum_plan(septum *handle, const char *path, const septum_options *options,
                          septum_answer **out);
/* Checks `count` files of any kind that septum reads, by their key "septum"; messages go to the
 * listener. The answer has a line a file and is given also with SEPTUM_DATA and SEPTUM_SYSTEM,
 * which say that at least one file has a fault (NULL only when memory ran out). */
septum_status septum_check(septum *handle, const char *const *paths, size_t count,
                           septum_answer **out);

/* What a supplier's list (CSV, docs/formats/prices-csv.md) does to a price book: which row prices
 * which item, what changes, what is left alone. With options->save_prices the new book is written
 * there, unless anything in either file is a fault (SEPTUM_DATA, *out NULL, nothing written). */
septum_status septum_prices_update(septum *handle, const char *list, const septum_options *options,
                                   septum_answer **out);
/* The price book as such a list: the answer's CSV, and options->save_csv. */
septum_status septum_prices_list(septum *handle, const septum_options *options,
                                 septum_answer **out);

/* The answer as text for people, as JSON, and (rate and pick; else empty) its takeoff as CSV. All
 * live as long as the answer. */
const char *septum_answer_text(const septum_answer *answer);
const char *septum_answer_json(const septum_answer *answer);
const char *septum_answer_csv(const septum_answer *answer);
/* Frees the answer. NULL is fine. */
void septum_answer_free(septum_answer *answer);

/* "0.1.0" */
const char *septum_version(void);
/* The one of `n` names that is nearest to `word` in spelling, NULL when none is near: for hints. */
const char *septum_nearest(const char *word, const char *const *names, size_t n);

#ifdef __cplusplus
}
#endif
#endif
