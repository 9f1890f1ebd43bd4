#include "base/errors.h"

const char *error_text(error_code code) {
  switch (code) {
  case ERROR_NONE:
    return "no error";
#define ERROR_CASE(number, name, text)                                                             \
  case ERROR_##name:                                                                               \
    return text;
    ERROR_LIST(ERROR_CASE)
#undef ERROR_CASE
  }
  return "unknown error";
}

status error_status(error_code code) {
  int family = (int)code / 100;
  if (code == ERROR_NONE) return STATUS_OK;
  if (family == 1) return STATUS_USAGE;
  if (family == 2 || family == 3) return STATUS_DATA;
  if (family == 4) return STATUS_SYSTEM;
  return STATUS_INTERNAL;
}
