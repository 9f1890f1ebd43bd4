/* The command: usage, one library call, and an exit status that notices when the answer could not
 * be written. */
#include <stdio.h>

#include "commands.h"

static septum_status answer(int argc, char **argv) {
  cli_line line;
  if (!options_read(argc, argv, &line)) return SEPTUM_USAGE;
  if (line.help) {
    options_help(line.command);
    return SEPTUM_OK;
  }
  if (line.version) {
    printf("septum %s\n", septum_version());
    return SEPTUM_OK;
  }
  return commands_run(&line);
}

int main(int argc, char **argv) {
  septum_status status = answer(argc, argv);
  if (fflush(stdout) != 0 || ferror(stdout) != 0 || fclose(stdout) != 0) {
    fputs("septum: the answer could not be written\n", stderr);
    return SEPTUM_SYSTEM;
  }
  return (int)status;
}
