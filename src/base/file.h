/* Files: read whole, written whole or not at all. */
#ifndef BASE_FILE_H
#define BASE_FILE_H

#include <stdbool.h>
#include <stddef.h>

#include "base/diag.h"

/* The file's bytes with a NUL behind, in `a`; *len without it. NULL and a diagnostic when it cannot
 * be read, is a directory, or is larger than `max_bytes`. "-" is not special. */
char *file_read(arena *a, diag_list *d, const char *path, size_t max_bytes, size_t *len);
/* Writes `len` bytes to a temporary neighbour, flushes, renames. A symbolic link stays and its
 * target is replaced; devices, pipes and names below /dev are written to directly. False and a
 * diagnostic when that fails. */
bool file_write(arena *a, diag_list *d, const char *path, const char *bytes, size_t len);
bool file_exists(const char *path);
/* Whether two paths lead to one file, through links too. False when one of them is not there. */
bool file_same(const char *one, const char *other);
/* `relative` seen from the folder of `file`; absolute paths stay. */
const char *file_beside(arena *a, const char *file, const char *relative);
const char *file_join(arena *a, const char *folder, const char *name);
/* The last part of `path`, in it. */
const char *file_name(const char *path);

#endif
