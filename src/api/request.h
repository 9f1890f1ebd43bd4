/* What rate and pick share: the brief, its price book and listings, the wall. */
#ifndef API_REQUEST_H
#define API_REQUEST_H

#include "api/call.h"
#include "report/report.h"
#include "wall/tested.h"

typedef struct request {
  brief brief;
  catalog catalog; /* the handle's, with the brief's listings among the fire rows */
  const price_book *prices;
  judge_context context;
  report report;
} request;

/* Reads everything that the options and the brief name. `brief_path` NULL: the reference wall.
 * False after messages. */
bool request_prepare(call *k, const septum *handle, const septum_options *options,
                     const char *brief_path, bool target_required, request *out);
/* The same for a brief that is there already, in out->brief; `asked`: somebody gave it. */
bool request_settle(call *k, const septum *handle, const septum_options *options, bool asked,
                    request *out);
/* Length, height and counts that the options give in place of the brief's. False after messages. */
bool request_resize(call *k, const septum_options *options, brief *b);
/* The wall of a wall line or wall/1 file, checked: it can be built. False after messages. */
bool request_wall(call *k, const catalog *c, const char *words, wall *out, const char **name);

/* A report that gives its curve is held against it: a slip of the pen in either would pass for
 * evidence. A warning when the two differ. */
void request_check_curve(call *k, const tested_wall *t);

#endif
