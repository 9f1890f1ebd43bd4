#include "commands.h"

#include <math.h>
#include <signal.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

/* Set by the first interrupt of a plan, which then answers with what it has. */
static volatile sig_atomic_t interrupted;
static volatile int stop_plan;

static void interrupt(int signal_number) {
  if (interrupted) { /* the second one ends the program as usual */
    signal(signal_number, SIG_DFL);
    raise(signal_number);
    return;
  }
  interrupted = 1;
  stop_plan = 1;
}

static void hear(void *user, const septum_message *message) {
  (void)user;
  fprintf(stderr, "%s\n", message->text);
}

/* The one answer that goes to stdout. */
static void show(const cli_line *line, const septum_answer *answer) {
  const char *shown = septum_answer_text(answer);
  if (line->json) shown = septum_answer_json(answer);
  if (line->csv != NULL && strcmp(line->csv, "-") == 0) shown = septum_answer_csv(answer);
  fputs(shown, stdout);
}

/* One line on the terminal, written over itself. */
static void show_progress(void *user, const char *stage, double found, double bound) {
  (void)user;
  fprintf(stderr, "\r\033[Kseptum: %s: ", stage);
  if (isfinite(found)) fprintf(stderr, "found %.2f", found);
  if (isfinite(bound)) fprintf(stderr, "%sno less than %.2f", isfinite(found) ? ", " : "", bound);
  fflush(stderr);
}

static septum_status plan(septum *handle, const cli_line *line, septum_options *options,
                          septum_answer **answer) {
  bool talk = isatty(STDERR_FILENO) != 0;
  struct sigaction how, before;
  memset(&how, 0, sizeof how);
  how.sa_handler = interrupt;
  sigemptyset(&how.sa_mask);
  sigaction(SIGINT, &how, &before);
  options->stop = &stop_plan;
  if (talk) options->progress = show_progress;
  septum_status status = septum_plan(handle, line->operands[0], options, answer);
  sigaction(SIGINT, &before, NULL);
  if (talk) fputs("\r\033[K", stderr);
  return status;
}

static septum_status run(septum *handle, const cli_line *line, septum_answer **answer) {
  septum_options options = line->options;
  if (line->csv != NULL && strcmp(line->csv, "-") != 0) options.save_csv = line->csv;
  switch (line->command) {
  case CLI_RATE:
    return septum_rate(handle, line->operands[0], &options, answer);
  case CLI_PICK:
    return septum_pick(handle, line->operands[0], &options, answer);
  case CLI_CHECK:
    return septum_check(handle, line->operands, line->operand_count, answer);
  case CLI_LADDER:
    return septum_ladder(handle, line->operands[0], line->have, &options, answer);
  case CLI_TRIM:
    return septum_trim(handle, line->operands[0], line->specified, &options, answer);
  case CLI_PLAN:
    return plan(handle, line, &options, answer);
  case CLI_PRICES:
    if (line->list != NULL) return septum_prices_update(handle, line->list, &options, answer);
    return septum_prices_list(handle, &options, answer);
  case CLI_NONE:
  case CLI_ANY:
    break;
  }
  return SEPTUM_INTERNAL;
}

septum_status commands_run(const cli_line *line) {
  septum *handle = NULL;
  septum_status status = septum_open(line->catalogs, hear, NULL, &handle);
  if (status != SEPTUM_OK) return status;
  septum_answer *answer = NULL;
  status = run(handle, line, &answer);
  if (answer != NULL) show(line, answer);
  if (status == SEPTUM_NO_WALL) fputs("septum: no wall; the answer says why\n", stderr);
  septum_answer_free(answer);
  septum_close(handle);
  return status;
}
