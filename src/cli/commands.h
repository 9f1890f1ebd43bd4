/* What each command does with the library. */
#ifndef CLI_COMMANDS_H
#define CLI_COMMANDS_H

#include "options.h"

/* Runs the command of `line`; results to stdout, talk to stderr. Returns the exit status. */
septum_status commands_run(const cli_line *line);

#endif
