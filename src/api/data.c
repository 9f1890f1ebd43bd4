#include "api/data.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

enum { PATH_BYTES = 4096, NAME_BYTES = 1024 };

const char *data_folder(arena *a, diag_list *d) {
  const char *named = getenv("SEPTUM_DATA");
  if (named != NULL && *named != '\0') return text_copy(a, named);
  char path[PATH_BYTES];
  ssize_t n = readlink("/proc/self/exe", path, sizeof path);
  if (n > 0 && (size_t)n < sizeof path) {
    path[n] = '\0';
    return file_beside(a, path, "../share/septum");
  }
  diag_error(d, ERROR_SYSTEM_READ,
             "expected the data folder in $SEPTUM_DATA or beside the program, found neither");
  return NULL;
}

const char *data_default_prices(arena *a, diag_list *d) {
  const char *data = data_folder(a, d);
  if (data == NULL) return NULL;
  const char *prices = file_join(a, data, "prices");
  const char *path = file_join(a, prices, "default");
  size_t length = 0;
  const char *name = file_read(a, d, path, NAME_BYTES, &length);
  if (name == NULL) return NULL;
  name = text_copyn(a, name, strcspn(name, "\r\n"));
  if (*name == '\0') {
    diag_add(d, DIAG_ERROR, ERROR_SYSTEM_READ, (diag_place){.file = path, .line = 1, .column = 1},
             "expected the name of a price book of this folder, found nothing");
    return NULL;
  }
  return file_join(a, prices, name);
}
