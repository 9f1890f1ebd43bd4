#include "commands.h"

#include <stdio.h>
#include <string.h>

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
