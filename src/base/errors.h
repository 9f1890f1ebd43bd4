/* The one list of errors: number, name, what it means. docs/errors.md is checked against it.
 * Families: 1xx usage, 20x JSON text and CSV, 21x fields, 22x catalogs, 23x prices, 24x briefs and
 * schedules, 25x listings and tests reports, 3xx walls, 4xx system, 5xx internal. Numbers are never
 * reused. */
#ifndef BASE_ERRORS_H
#define BASE_ERRORS_H

#define ERROR_LIST(X)                                                                              \
  X(101, USAGE, "the command line cannot be understood")                                           \
  X(201, JSON_SYNTAX, "the text is not JSON")                                                      \
  X(202, JSON_ENCODING, "the text is not UTF-8 or holds a character that is refused")              \
  X(203, JSON_LIMIT, "the file goes beyond a limit (size, depth, count)")                          \
  X(204, JSON_NUMBER, "a number is malformed or not finite")                                       \
  X(205, JSON_DUPLICATE_KEY, "a key stands twice in one object")                                   \
  X(206, JSON_TRAILING, "text follows the JSON value")                                             \
  X(207, CSV_SYNTAX, "the text is not a table in CSV")                                             \
  X(208, CSV_COLUMN, "a column of a table is unknown, missing or stands twice")                    \
  X(211, FIELD_UNKNOWN, "a key is not known here")                                                 \
  X(212, FIELD_MISSING, "a required key is missing")                                               \
  X(213, FIELD_TYPE, "a value has the wrong type")                                                 \
  X(214, FIELD_RANGE, "a value is out of its range")                                               \
  X(215, FIELD_CHOICE, "a word is none of those allowed")                                          \
  X(216, FIELD_UNIT, "a length or quantity has an unknown unit")                                   \
  X(217, FILE_KIND, "the file is of another kind or version")                                      \
  X(218, FIELD_CONFLICT, "two keys contradict each other or say the same thing twice")             \
  X(221, CATALOG_DUPLICATE_ID, "an id stands twice in the catalogs")                               \
  X(222, CATALOG_UNKNOWN_ID, "a record names an id that no catalog has")                           \
  X(231, PRICE_UNKNOWN_ITEM, "a price stands for an item that no catalog or rule uses")            \
  X(232, PRICE_MISSING, "the price book lacks an item that is needed")                             \
  X(233, PRICE_BASE, "a price book builds on one that cannot serve")                               \
  X(234, PRICE_BREAK, "a quantity break costs more than a smaller quantity")                       \
  X(235, PRICE_UNIT, "a supplier's unit cannot be turned into the item's")                         \
  X(241, BRIEF_CONTRADICTION, "the brief contradicts itself")                                      \
  X(242, SCHEDULE_DUPLICATE_ID, "an id stands twice in a wall schedule")                           \
  X(301, WALL_SYNTAX, "the wall line cannot be read")                                              \
  X(302, WALL_UNKNOWN_ID, "the wall names an id that no catalog has")                              \
  X(303, WALL_ILLEGAL, "the wall cannot be built")                                                 \
  X(401, SYSTEM_READ, "a file cannot be read")                                                     \
  X(402, SYSTEM_WRITE, "a file cannot be written")                                                 \
  X(403, SYSTEM_MEMORY, "memory ran out")                                                          \
  X(404, SYSTEM_MISSING_PART, "this build lacks an optional part")                                 \
  X(501, INTERNAL, "a fault of the program itself")                                                \
  X(502, INTERNAL_SOLVER, "the solver failed")

typedef enum error_code {
  ERROR_NONE = 0,
#define ERROR_ENUM(number, name, text) ERROR_##name = (number),
  ERROR_LIST(ERROR_ENUM)
#undef ERROR_ENUM
} error_code;

/* The meaning of `code` in a few words; "unknown error" for a number that is not in the list. */
const char *error_text(error_code code);

/* What the process and the API answer. The numbers are the exit statuses. */
typedef enum status {
  STATUS_OK = 0,
  STATUS_NO_WALL = 1,
  STATUS_USAGE = 2,
  STATUS_DATA = 3,
  STATUS_SYSTEM = 4,
  STATUS_INTERNAL = 5,
} status;

/* The status that an error of this number leads to (1xx usage, 2xx and 3xx data, 4xx system, 5xx
 * internal). */
status error_status(error_code code);

#endif
