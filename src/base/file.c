#include "base/file.h"

#include <errno.h>
#include <fcntl.h>
#include <stdio.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

enum { FIRST_READ = 16 << 10, TEMPORARY_NAMES = 100, LINKS_MAX = 8, PATH_BYTES = 4096 };
static const mode_t new_file_mode = 0666; /* less the user's umask */

static diag_place place_of(const char *path) {
  return (diag_place){.file = path};
}

static void report(diag_list *d, error_code code, const char *path, const char *what, int error) {
  diag_add(d, DIAG_ERROR, code, place_of(path), "%s: %s", what, strerror(error));
}

/* ---- reading ---- */

typedef enum read_end { READ_DONE, READ_ERROR, READ_TOO_LARGE, READ_NO_MEMORY } read_end;

typedef struct reading {
  int descriptor;
  char *bytes;
  size_t len, cap; /* cap counts the NUL */
} reading;

/* Doubles the buffer. The file is open: no jump may leave here. */
static bool more_room(arena *a, reading *r) {
  size_t cap = r->cap ? 2 * r->cap : FIRST_READ;
  char *larger = arena_try(a, cap);
  if (!larger) return false;
  if (r->len) memcpy(larger, r->bytes, r->len);
  r->bytes = larger;
  r->cap = cap;
  return true;
}

static read_end read_all(arena *a, reading *r, size_t max_bytes) {
  for (;;) {
    if (r->len + 1 >= r->cap && !more_room(a, r)) return READ_NO_MEMORY;
    ssize_t n = read(r->descriptor, r->bytes + r->len, r->cap - r->len - 1);
    if (n < 0 && errno == EINTR) continue;
    if (n < 0) return READ_ERROR;
    if (n == 0) break;
    r->len += (size_t)n;
    if (r->len > max_bytes) return READ_TOO_LARGE;
  }
  r->bytes[r->len] = '\0';
  return READ_DONE;
}

/* Reads an open file whose size is known when it is a regular one. */
static read_end read_open(arena *a, reading *r, size_t max_bytes, int *error) {
  struct stat info;
  if (fstat(r->descriptor, &info) != 0) {
    *error = errno;
    return READ_ERROR;
  }
  if (S_ISDIR(info.st_mode)) {
    *error = EISDIR;
    return READ_ERROR;
  }
  if (S_ISREG(info.st_mode) && info.st_size > 0) {
    if ((unsigned long long)info.st_size > max_bytes) return READ_TOO_LARGE;
    r->cap = (size_t)info.st_size +
             2; /* the NUL, and one byte to see the end of the file without growing */
    r->bytes = arena_try(a, r->cap);
    if (!r->bytes) return READ_NO_MEMORY;
  }
  read_end end = read_all(a, r, max_bytes);
  *error = errno;
  return end;
}

char *file_read(arena *a, diag_list *d, const char *path, size_t max_bytes, size_t *len) {
  int error = 0;
  reading r = {.descriptor = open(path, O_RDONLY | O_CLOEXEC | O_NOCTTY)};
  if (r.descriptor < 0) {
    report(d, ERROR_SYSTEM_READ, path, "cannot be opened", errno);
    return NULL;
  }
  read_end end = read_open(a, &r, max_bytes, &error);
  (void)close(r.descriptor);
  if (end == READ_NO_MEMORY) arena_fail(a);
  if (end == READ_ERROR) report(d, ERROR_SYSTEM_READ, path, "cannot be read", error);
  if (end == READ_TOO_LARGE)
    diag_add(d, DIAG_ERROR, ERROR_JSON_LIMIT, place_of(path), "must have at most %zu bytes",
             max_bytes);
  if (end != READ_DONE) return NULL;
  *len = r.len;
  return r.bytes;
}

/* ---- writing ---- */

static bool write_all(int descriptor, const char *bytes, size_t len) {
  while (len > 0) {
    ssize_t n = write(descriptor, bytes, len);
    if (n < 0 && errno == EINTR) continue;
    if (n < 0) return false;
    bytes += n;
    len -= (size_t)n;
  }
  return true;
}

/* Where a chain of symbolic links ends, so that the file is replaced and not the link. */
static const char *follow_links(arena *a, const char *path) {
  for (int i = 0; i < LINKS_MAX; i++) {
    char target[PATH_BYTES];
    ssize_t n = readlink(path, target, sizeof target - 1);
    if (n < 0) break;
    target[n] = '\0';
    path = file_beside(a, path, target);
  }
  return path;
}

/* Devices, pipes and the names that stand for open files (/dev/stdout) cannot be replaced: the
 * bytes go straight into them. */
static bool is_stream(const char *path, const struct stat *info) {
  return !S_ISREG(info->st_mode) || text_starts(path, "/dev/") || text_starts(path, "/proc/");
}

static bool write_through(const char *path, const char *bytes, size_t len) {
  int descriptor = open(path, O_WRONLY | O_APPEND | O_CLOEXEC | O_NOCTTY);
  if (descriptor < 0) return false;
  bool good = write_all(descriptor, bytes, len);
  int error = errno;
  if (close(descriptor) != 0 && good) return false;
  errno = error;
  return good;
}

/* A new file beside `path`; its name goes into `name`. -1 and errno on failure. */
static int open_temporary(char *name, size_t size, const char *path) {
  for (int i = 0; i < TEMPORARY_NAMES; i++) {
    (void)snprintf(name, size, "%s.%ld-%d.tmp", path, (long)getpid(), i);
    int descriptor = open(name, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, new_file_mode);
    if (descriptor >= 0 || errno != EEXIST) return descriptor;
  }
  return -1;
}

/* `old` is the file that will be replaced, NULL when there is none: the new one keeps its
 * permissions. */
static bool replace(const char *path, char *temporary, size_t size, const struct stat *old,
                    const char *bytes, size_t len) {
  int descriptor = open_temporary(temporary, size, path);
  if (descriptor < 0) return false;
  bool good = write_all(descriptor, bytes, len);
  if (good && old) good = fchmod(descriptor, old->st_mode & 0777) == 0;
  good = good && fsync(descriptor) == 0;
  int error = errno;
  if (close(descriptor) != 0 && good) {
    good = false;
    error = errno;
  }
  if (good && rename(temporary, path) != 0) {
    good = false;
    error = errno;
  }
  if (!good) (void)unlink(temporary);
  errno = error;
  return good;
}

bool file_write(arena *a, diag_list *d, const char *path, const char *bytes, size_t len) {
  const char *real = follow_links(a, path);
  size_t size = strlen(real) + 40; /* the longest ending of open_temporary */
  char *temporary = arena_alloc(a, size);
  struct stat info;
  bool there = stat(path, &info) == 0;
  bool good;
  if (there && S_ISDIR(info.st_mode)) {
    errno = EISDIR;
    good = false;
  } else if (there && is_stream(path, &info)) {
    good = write_through(path, bytes, len);
  } else {
    good = replace(real, temporary, size, there ? &info : NULL, bytes, len);
  }
  if (!good) report(d, ERROR_SYSTEM_WRITE, path, "cannot be written", errno);
  return good;
}

/* ---- names ---- */

bool file_exists(const char *path) {
  struct stat info;
  return stat(path, &info) == 0;
}

bool file_same(const char *one, const char *other) {
  struct stat a, b;
  return stat(one, &a) == 0 && stat(other, &b) == 0 && a.st_dev == b.st_dev && a.st_ino == b.st_ino;
}

const char *file_beside(arena *a, const char *file, const char *relative) {
  const char *slash = file ? strrchr(file, '/') : NULL;
  if (relative[0] == '/' || !slash) return text_copy(a, relative);
  return text_format(a, "%.*s/%s", (int)(slash - file), file, relative);
}

const char *file_join(arena *a, const char *folder, const char *name) {
  size_t n = strlen(folder);
  bool bare = n == 0 || folder[n - 1] == '/';
  return text_format(a, "%s%s%s", folder, bare ? "" : "/", name);
}

const char *file_name(const char *path) {
  const char *slash = strrchr(path, '/');
  return slash ? slash + 1 : path;
}
