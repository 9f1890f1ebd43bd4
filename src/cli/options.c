#include "options.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

typedef enum option_id {
  OPTION_ALLOW,
  OPTION_BRIEF,
  OPTION_CATALOGS,
  OPTION_CORNERS,
  OPTION_COUNT,
  OPTION_CSV,
  OPTION_DESIGN,
  OPTION_DOORS,
  OPTION_FIRE,
  OPTION_FROM,
  OPTION_FROM_CSV,
  OPTION_HAVE,
  OPTION_HEIGHT,
  OPTION_HELP,
  OPTION_HTML,
  OPTION_JSON,
  OPTION_KEEP,
  OPTION_LENGTH,
  OPTION_METRIC,
  OPTION_PRICES,
  OPTION_RATING,
  OPTION_REDESIGN,
  OPTION_SAVE_MODEL,
  OPTION_SLACK,
  OPTION_SPEC,
  OPTION_TEES,
  OPTION_TIME_LIMIT,
  OPTION_TO,
  OPTION_TO_CSV,
  OPTION_TODAY,
  OPTION_UNITS,
  OPTION_VERSION,
  OPTION_WRITE,
  OPTION_XLSX
} option_id;

/* A bit an option_id. */
typedef unsigned long long option_set;

typedef struct option_row {
  const char *name;
  const char *value; /* what it takes, NULL for none */
  option_id id;
  int commands; /* bits of cli_command */
  const char *help;
} option_row;

/* Sorted by name: the help and the manual keep this order. */
static const option_row option_rows[] = {
    {"allow", "WORDS", OPTION_ALLOW, CLI_TRIM,
     "what may be given up: thinner-studs, plain-boards, thicker, combustible, less-fire"},
    {"brief", "FILE", OPTION_BRIEF, CLI_RATE, "judge the wall under this brief (brief/1)"},
    {"catalogs", "DIR", OPTION_CATALOGS, CLI_ANY, "folder with the catalogs"},
    {"corners", "N", OPTION_CORNERS, CLI_RATE | CLI_PICK, "corners in the wall, for its studs"},
    {"count", "N", OPTION_COUNT, CLI_TRIM, "most walls to list, 1 to 100; default 8"},
    {"csv", "FILE", OPTION_CSV, CLI_RATE | CLI_PICK | CLI_LADDER | CLI_TRIM | CLI_PLAN,
     "also write the table of the answer as CSV; - prints it in place of the text"},
    {"design", "TEXT", OPTION_DESIGN, CLI_TRIM, "the listed design that the drawings name"},
    {"doors", "N", OPTION_DOORS, CLI_RATE | CLI_PICK, "doors in the wall, for its studs"},
    {"fire", "MINUTES", OPTION_FIRE, CLI_TRIM, "fire resistance that the drawings promise"},
    {"from", "N", OPTION_FROM, CLI_LADDER, "lowest rating, 1 to 100; default: what the cheapest wall meets"},
    {"from-csv", "FILE", OPTION_FROM_CSV, CLI_PRICES, "a supplier's list to put into the price book"},
    {"have", "LINE|FILE", OPTION_HAVE, CLI_LADDER,
     "a given wall: what it takes from there (a wall line or a wall/1 file)"},
    {"height", "LENGTH", OPTION_HEIGHT, CLI_RATE | CLI_PICK,
     "height of the wall, as 9'-6\", 9ft or 3.2m, in place of the brief's"},
    {"help", NULL, OPTION_HELP, CLI_ANY, "print this and stop"},
    {"html", "FILE", OPTION_HTML, CLI_RATE | CLI_PICK | CLI_LADDER | CLI_TRIM | CLI_PLAN,
     "also write the answer as one page with drawings and charts"},
    {"json", NULL, OPTION_JSON, CLI_ANY, "answer as JSON"},
    {"keep", "WORDS", OPTION_KEEP, CLI_TRIM, "what must stay as it is: frame, fire, thickness"},
    {"length", "LENGTH", OPTION_LENGTH, CLI_RATE | CLI_PICK,
     "length of the wall, as 30ft or 9.1m, in place of the brief's"},
    {"metric", "NAME", OPTION_METRIC, CLI_LADDER,
     "STC, Rw, Rw+C, Rw+Ctr or OITC; default: the brief's, else STC"},
    {"prices", "FILE", OPTION_PRICES,
     CLI_RATE | CLI_PICK | CLI_LADDER | CLI_TRIM | CLI_PRICES | CLI_PLAN,
     "price book (price-book/1) in place of the brief's or the default"},
    {"rating", "N", OPTION_RATING, CLI_TRIM, "STC that the drawings promise"},
    {"redesign", "COST", OPTION_REDESIGN, CLI_TRIM,
     "cost of redesign and resubmittal: savings are net of it"},
    {"save-model", "FILE", OPTION_SAVE_MODEL, CLI_PICK | CLI_PLAN, "write the 0-1 model in CPLEX LP format"},
    {"slack", "LENGTH", OPTION_SLACK, CLI_TRIM,
     "walls may be so much thicker than the specified one, as 1/2in or 12mm"},
    {"spec", "LINE|FILE", OPTION_SPEC, CLI_TRIM, "the specified wall: a wall line or a wall/1 file"},
    {"tees", "N", OPTION_TEES, CLI_RATE | CLI_PICK, "walls that meet this one, for its studs"},
    {"time-limit", "S", OPTION_TIME_LIMIT, CLI_PICK | CLI_PLAN, "seconds for the solver; the gap is printed"},
    {"to", "N", OPTION_TO, CLI_LADDER, "highest rating, 1 to 100; default: what any wall meets"},
    {"to-csv", "FILE", OPTION_TO_CSV, CLI_PRICES, "write the price book as a list; - prints it"},
    {"today", "DATE", OPTION_TODAY, CLI_PRICES,
     "what ages count to, as 2031-03-01; default: the newest date in the files"},
    {"units", "us|si", OPTION_UNITS, CLI_RATE | CLI_PICK | CLI_LADDER | CLI_TRIM | CLI_PLAN,
     "units of text and CSV; default: the brief's, else us"},
    {"version", NULL, OPTION_VERSION, CLI_ANY, "print the version and stop"},
    {"write", "FILE", OPTION_WRITE, CLI_PRICES, "write the price book with the list's prices"},
    {"xlsx", "FILE", OPTION_XLSX, CLI_RATE | CLI_PICK | CLI_LADDER | CLI_TRIM | CLI_PLAN,
     "also write the answer as a spreadsheet"},
};
enum { OPTION_ROWS = sizeof option_rows / sizeof option_rows[0] };

typedef struct command_row {
  const char *name, *operands;
  cli_command command;
  size_t least, most; /* operands */
  const char *help, *more;
} command_row;

static const command_row command_rows[] = {
    {"check", "FILE...", CLI_CHECK, 1, (size_t)-1, "are these catalogs, price books, briefs sound?",
     "Reads files of any kind of septum, by their key \"septum\", and reports every fault with "
     "file,\n"
     "line, column and JSON path on stderr. One line a file on stdout.\n"},
    {"ladder", "BRIEF", CLI_LADDER, 1, 1, "what each rating costs, and the step to the next",
     "BRIEF is a brief/1 file; its target's value decides nothing, its other rules do. For each rating\n"
     "the cheapest wall, what changed from the rung below, what the step costs, and whether it is worth\n"
     "taking. From a wall that is there, with --have: what it takes to get from it to each rating.\n"},
    {"pick", "BRIEF", CLI_PICK, 1, 1, "the cheapest wall that keeps every rule of a brief",
     "BRIEF is a brief/1 file. The answer names the wall, its rating and what that rests on, the\n"
     "takeoff, what cheaper walls fail, and what each rule costs.\n"},
    {"plan", "PROJECT", CLI_PLAN, 1, 1, "few wall types for all walls of a project",
     "PROJECT is a project/1 file, which names a wall schedule (CSV). The answer names the types, which\n"
     "wall gets which, what to order, what each type costs to keep, where another type stops paying,\n"
     "and how the drawings' own types compare. --csv writes the schedule with what is assigned. An\n"
     "interrupt ends a long search with the best plan so far.\n"},
    {"prices", "OPTIONS", CLI_PRICES, 0, 0,
     "a supplier's prices into a price book, or a book as a list",
     "With --from-csv, shows which row of the list (CSV: code, description, unit, price) prices "
     "which\n"
     "item and what changes; only --write writes the new book, and never when anything is a fault.\n"
     "--to-csv writes the book out as such a list. The book is --prices, else the default.\n"},
    {"rate", "LINE|FILE", CLI_RATE, 1, 1, "rate one wall: sound, fire, height, cost",
     "LINE is a wall line, from side A to side B, or FILE a wall/1 file:\n"
     "  septum rate '2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16'\n"
     "Each face is written from its own room inwards; n* repeats, + adds a layer, @ is spacing in "
     "mm.\n"},
    {"trim", "BRIEF", CLI_TRIM, 1, 1, "cheaper walls that hold what a specified wall must hold",
     "BRIEF is a brief/1 file, --spec the specified wall. Without a target in the brief the wall is\n"
     "held to its own rating, fire minutes and thickness. Lists the cheaper walls that hold all of\n"
     "it, best saving first, with each change, its money and what it does when taken alone.\n"},
};
enum { COMMAND_COUNT = sizeof command_rows / sizeof command_rows[0] };

static void complain(const char *what, const char *word) {
  fprintf(stderr, "septum: %s%s%s\n", what, *word ? " " : "", word);
}

static void hint(const char *near, const char *dashes) {
  if (near != NULL) fprintf(stderr, "septum: did you mean %s%s?\n", dashes, near);
}

static const option_row *find_option(const char *name, size_t length) {
  for (size_t i = 0; i < OPTION_ROWS; i++) {
    const char *known = option_rows[i].name;
    if (strlen(known) == length && strncmp(known, name, length) == 0) return &option_rows[i];
  }
  return NULL;
}

static bool unknown_option(const char *word) {
  const char *names[OPTION_ROWS];
  for (size_t i = 0; i < OPTION_ROWS; i++) names[i] = option_rows[i].name;
  char name[64];
  size_t length = strcspn(word, "=");
  complain("unknown option", word);
  if (length < sizeof name && strncmp(word, "--", 2) == 0) {
    memcpy(name, word + 2, length - 2);
    name[length - 2] = '\0';
    hint(septum_nearest(name, names, OPTION_ROWS), "--");
  }
  return false;
}

static bool read_seconds(const char *value, double *seconds) {
  char *end = NULL;
  errno = 0;
  *seconds = strtod(value, &end);
  if (end != value && *end == '\0' && errno == 0 && *seconds >= 0.0 && *seconds <= 1e9) return true;
  complain("--time-limit wants seconds from 0 to 1000000000, found", value);
  return false;
}

static bool read_number(const char *name, const char *value, int least, int most, int *number) {
  char *end = NULL;
  long n = strtol(value, &end, 10);
  if (end != value && *end == '\0' && n >= least && n <= most) {
    *number = (int)n;
    return true;
  }
  fprintf(stderr, "septum: --%s wants a number from %d to %d, found %s\n", name, least, most, value);
  return false;
}

static bool read_whole(const char *name, const char *value, int *count) {
  return read_number(name, value, 1, 100, count);
}

static bool read_count(const char *name, const char *value, int *count) {
  return read_number(name, value, 0, 1000, count);
}

static bool read_money(const char *name, const char *value, double *money) {
  char *end = NULL;
  errno = 0;
  *money = strtod(value, &end);
  if (end != value && *end == '\0' && errno == 0 && *money >= 0.0 && *money <= 1e9) return true;
  fprintf(stderr, "septum: --%s wants an amount from 0 to 1000000000, found %s\n", name, value);
  return false;
}

static bool read_units(const char *value, septum_units *units) {
  if (strcmp(value, "us") == 0)
    *units = SEPTUM_UNITS_US;
  else if (strcmp(value, "si") == 0)
    *units = SEPTUM_UNITS_SI;
  else {
    complain("--units wants us or si, found", value);
    return false;
  }
  return true;
}

/* The size of the wall and what stands in it. */
static bool apply_size(option_id id, const char *value, septum_options *options) {
  if (id == OPTION_LENGTH)
    options->length = value;
  else if (id == OPTION_HEIGHT)
    options->height = value;
  else if (id == OPTION_CORNERS)
    return read_count("corners", value, &options->corners);
  else if (id == OPTION_TEES)
    return read_count("tees", value, &options->tees);
  else
    return read_count("doors", value, &options->doors);
  return true;
}

static bool apply(option_id id, const char *value, cli_line *out) {
  switch (id) {
  case OPTION_ALLOW:
    out->options.allow = value;
    return true;
  case OPTION_DESIGN:
    out->options.design = value;
    return true;
  case OPTION_FIRE:
    return read_number("fire", value, 1, 480, &out->options.promised_fire);
  case OPTION_KEEP:
    out->options.keep = value;
    return true;
  case OPTION_RATING:
    return read_whole("rating", value, &out->options.promised_stc);
  case OPTION_REDESIGN:
    return read_money("redesign", value, &out->options.redesign_cost);
  case OPTION_BRIEF:
    out->options.brief = value;
    return true;
  case OPTION_CATALOGS:
    out->catalogs = value;
    return true;
  case OPTION_CORNERS:
  case OPTION_DOORS:
  case OPTION_HEIGHT:
  case OPTION_LENGTH:
  case OPTION_TEES:
    return apply_size(id, value, &out->options);
  case OPTION_COUNT:
    return read_whole("count", value, &out->options.count);
  case OPTION_CSV:
    out->csv = value;
    return true;
  case OPTION_FROM:
    return read_whole("from", value, &out->options.from);
  case OPTION_FROM_CSV:
    out->list = value;
    return true;
  case OPTION_HAVE:
    out->have = value;
    return true;
  case OPTION_HELP:
    out->help = true;
    return true;
  case OPTION_HTML:
    out->options.save_html = value;
    return true;
  case OPTION_JSON:
    out->json = true;
    return true;
  case OPTION_METRIC:
    out->options.metric = value;
    return true;
  case OPTION_PRICES:
    out->options.prices = value;
    return true;
  case OPTION_SAVE_MODEL:
    out->options.save_model = value;
    return true;
  case OPTION_SLACK:
    out->options.slack = value;
    return true;
  case OPTION_SPEC:
    out->specified = value;
    return true;
  case OPTION_TIME_LIMIT:
    return read_seconds(value, &out->options.time_limit_s);
  case OPTION_TO:
    return read_whole("to", value, &out->options.to);
  case OPTION_TO_CSV:
    out->csv = value;
    return true;
  case OPTION_TODAY:
    out->options.today = value;
    return true;
  case OPTION_UNITS:
    return read_units(value, &out->options.units);
  case OPTION_VERSION:
    out->version = true;
    return true;
  case OPTION_WRITE:
    out->options.save_prices = value;
    return true;
  case OPTION_XLSX:
    out->options.save_xlsx = value;
    return true;
  }
  return false;
}

/* One option at argv[i]; returns how many words it took, 0 after a message. */
static int read_option(int argc, char **argv, int i, cli_line *out, option_set *used) {
  const char *word = argv[i] + 2;
  size_t length = strcspn(word, "=");
  const option_row *row = find_option(word, length);
  if (row == NULL) return unknown_option(argv[i]);
  const char *value = word[length] == '=' ? word + length + 1 : NULL;
  int words = 1;
  if (row->value == NULL && value != NULL) {
    complain("this option takes no value:", argv[i]);
    return 0;
  }
  if (row->value != NULL && value == NULL) {
    value = i + 1 < argc ? argv[i + 1] : NULL;
    words = 2;
  }
  if (row->value != NULL && (value == NULL || *value == '\0')) {
    fprintf(stderr, "septum: --%s wants %s\n", row->name, row->value);
    return 0;
  }
  *used |= (option_set)1 << row->id;
  return apply(row->id, value, out) ? words : 0;
}

static const command_row *find_command(const char *name) {
  for (size_t i = 0; i < COMMAND_COUNT; i++)
    if (strcmp(command_rows[i].name, name) == 0) return &command_rows[i];
  const char *names[COMMAND_COUNT];
  for (size_t i = 0; i < COMMAND_COUNT; i++) names[i] = command_rows[i].name;
  complain("unknown command", name);
  hint(septum_nearest(name, names, COMMAND_COUNT), "");
  return NULL;
}

/* Whether the options used belong to the command and the operands are as many as it takes. */
static bool fits(const command_row *command, option_set used, size_t operands) {
  for (size_t i = 0; i < OPTION_ROWS; i++) {
    const option_row *row = &option_rows[i];
    if ((used & (option_set)1 << row->id) == 0 || (row->commands & (int)command->command) != 0) continue;
    fprintf(stderr, "septum: --%s is not an option of %s\n", row->name, command->name);
    return false;
  }
  if (operands >= command->least && operands <= command->most) return true;
  fprintf(stderr, "septum: %s wants %s, found %zu operands\n", command->name, command->operands,
          operands);
  return false;
}

/* `prices` goes one way or the other. */
static bool prices_fits(const cli_line *line) {
  if (line->command != CLI_PRICES) return true;
  if ((line->list == NULL) == (line->csv == NULL)) {
    complain("prices wants either --from-csv or --to-csv", "");
    return false;
  }
  if (line->list == NULL && line->options.save_prices != NULL) {
    complain("--write goes with --from-csv", "");
    return false;
  }
  return true;
}

static bool trim_fits(const cli_line *line) {
  if (line->command != CLI_TRIM || line->specified != NULL) return true;
  complain("trim wants the specified wall: --spec 'LINE' or --spec FILE", "");
  return false;
}

bool options_read(int argc, char **argv, cli_line *out) {
  memset(out, 0, sizeof *out);
  septum_options_init(&out->options);
  option_set used = 0;
  int kept = 0;
  bool options_end = false;
  for (int i = 1; i < argc;) {
    bool option = !options_end && argv[i][0] == '-' && argv[i][1] != '\0';
    if (!option) {
      argv[kept++] = argv[i++];
    } else if (strcmp(argv[i], "--") == 0) {
      options_end = true;
      i++;
    } else {
      int words =
          argv[i][1] == '-' ? read_option(argc, argv, i, out, &used) : unknown_option(argv[i]);
      if (words == 0) return false;
      i += words;
    }
  }
  const command_row *command = kept > 0 ? find_command(argv[0]) : NULL;
  if (kept > 0 && command == NULL) return false;
  if (command != NULL) out->command = command->command;
  if (out->help || out->version) return true;
  if (command == NULL) {
    complain("no command; try septum --help", "");
    return false;
  }
  out->operands = (const char *const *)argv + 1;
  out->operand_count = (size_t)kept - 1;
  if (out->json && out->csv != NULL && strcmp(out->csv, "-") == 0) {
    complain("--json and --csv - both want stdout", "");
    return false;
  }
  return fits(command, used, out->operand_count) && prices_fits(out) && trim_fits(out);
}

static void print_options(int commands) {
  printf("Options, before or after the operands; -- ends them:\n");
  for (size_t i = 0; i < OPTION_ROWS; i++) {
    const option_row *row = &option_rows[i];
    if ((row->commands & commands) == 0) continue;
    int width =
        printf("  --%s%s%s", row->name, row->value ? " " : "", row->value ? row->value : "");
    printf("%*s%s\n", width < 21 ? 22 - width : 1, "", row->help);
  }
}

void options_help(cli_command command) {
  if (command == CLI_NONE) {
    printf("septum %s: which wall to build between two rooms.\n\n", septum_version());
    for (size_t i = 0; i < COMMAND_COUNT; i++)
      printf("  septum %-6s %-10s %s\n", command_rows[i].name, command_rows[i].operands,
             command_rows[i].help);
    printf("\n");
    print_options(CLI_ANY);
    printf("\nData: --catalogs and --prices, else $SEPTUM_DATA, else ../share/septum beside the "
           "program.\n");
  }
  for (size_t i = 0; i < COMMAND_COUNT; i++) {
    const command_row *row = &command_rows[i];
    if (row->command != command) continue;
    printf("septum %s %s: %s\n\n%s\n", row->name, row->operands, row->help, row->more);
    print_options((int)row->command);
  }
  printf("\nExit status: 0 answer, 1 no wall fits, 2 usage, 3 bad data, 4 system, 5 internal.\n"
         "Ratings predicted here are estimates; fire and structure are screened only. Local code, "
         "the\n"
         "listed fire design and licensed practice decide.\n");
}
