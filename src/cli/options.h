/* The command line: options in one sorted table, anywhere among the operands. */
#ifndef CLI_OPTIONS_H
#define CLI_OPTIONS_H

#include <stdbool.h>
#include <stddef.h>

#include "septum.h"

/* Commands as bits, so that an option can name those it belongs to. */
typedef enum cli_command {
  CLI_NONE = 0,
  CLI_RATE = 1,
  CLI_PICK = 2,
  CLI_CHECK = 4,
  CLI_LADDER = 8,
  CLI_TRIM = 16,
  CLI_PRICES = 32,
  CLI_PLAN = 64,
  CLI_ANY = CLI_RATE | CLI_PICK | CLI_CHECK | CLI_LADDER | CLI_TRIM | CLI_PRICES | CLI_PLAN
} cli_command;

typedef struct cli_line {
  cli_command command;
  const char *const *operands; /* of `argv`, the command left out */
  size_t operand_count;
  septum_options options;
  const char *catalogs; /* NULL = those of the data folder */
  const char *csv;      /* "-" = stdout, in place of the text */
  const char *specified; /* trim: wall line or wall/1 file */
  const char *have;     /* ladder: wall line or wall/1 file */
  const char *list;     /* prices: the supplier's list */
  bool json, help, version;
} cli_line;

/* Reads argv; the operands are gathered at the front of `argv`. False after a message on stderr. */
bool options_read(int argc, char **argv, cli_line *out);
/* Help on stdout: of one command, or of all with CLI_NONE. */
void options_help(cli_command command);

#endif
