#include "base/diag.h"

#include <string.h>

enum { KEPT = 200, MESSAGE_MAX = 2000 };

void diag_init(diag_list *d, arena *a) {
  *d = (diag_list){.arena = a, .worst = STATUS_OK};
}

static void count_error(diag_list *d, error_code code) {
  status s = error_status(code);
  d->errors++;
  if (s > d->worst) d->worst = s;
}

static void add(diag_list *d, diag_level level, error_code code, diag_place place,
                const char *format, va_list args) {
  if (level == DIAG_ERROR) count_error(d, code);
  if (d->count == KEPT) {
    d->dropped++;
    return;
  }
  if (d->count == d->cap) {
    size_t cap = d->cap ? 2 * d->cap : 8;
    d->items = arena_grow(d->arena, d->items, d->count * sizeof *d->items, cap * sizeof *d->items);
    d->cap = cap;
  }
  text message;
  text_init(&message, d->arena, MESSAGE_MAX);
  text_vputf(&message, format, args);
  if (place.file) place.file = text_copy(d->arena, place.file);
  if (place.path) place.path = text_copy(d->arena, place.path);
  d->items[d->count++] =
      (diag){.level = level, .code = code, .place = place, .message = message.data};
}

void diag_add(diag_list *d, diag_level level, error_code code, diag_place place, const char *format,
              ...) {
  va_list args;
  va_start(args, format);
  add(d, level, code, place, format, args);
  va_end(args);
}

void diag_error(diag_list *d, error_code code, const char *format, ...) {
  va_list args;
  va_start(args, format);
  add(d, DIAG_ERROR, code, (diag_place){0}, format, args);
  va_end(args);
}

static bool stands_behind(const diag *a, const diag *b) {
  if (a->place.line != b->place.line) return a->place.line > b->place.line;
  return a->place.column > b->place.column;
}

void diag_sort(diag_list *d, size_t from) {
  for (size_t i = from + 1; i < d->count; i++) {
    diag moved = d->items[i];
    size_t k = i;
    for (; k > from && stands_behind(&d->items[k - 1], &moved); k--) d->items[k] = d->items[k - 1];
    d->items[k] = moved;
  }
}

bool diag_is_full(const diag_list *d) {
  return d->count == KEPT;
}

/* Text from files may hold line ends, terminal escapes (C0, DEL, and C1 as UTF-8) and bytes that
 * are no UTF-8: shown as \u00XX and \xXX, so that a message stays one harmless line of UTF-8. */
static void put_visible(text *out, const char *s) {
  const char *end = s + strlen(s);
  while (s < end) {
    size_t n = text_utf8(s, end);
    const unsigned char *u = (const unsigned char *)s;
    bool c1 = n == 2 && u[0] == 0xC2 && u[1] < 0xA0;
    if (n == 0)
      text_putf(out, "\\x%02x", u[0]);
    else if (u[0] < 0x20 || u[0] == 0x7F || c1)
      text_putf(out, "\\u%04x", u[n - 1]);
    else
      text_putn(out, s, n);
    s += n ? n : 1;
  }
}

void diag_print(text *out, const diag *item) {
  static const char *const words[] = {"error", "warning", "note"};
  if (item->place.file) {
    put_visible(out, item->place.file);
    text_char(out, ':');
  }
  if (item->place.line > 0) text_putf(out, "%d:", item->place.line);
  if (item->place.line > 0 && item->place.column > 0) text_putf(out, "%d:", item->place.column);
  if (item->place.file || item->place.line > 0) text_char(out, ' ');
  text_putf(out, "%s[E%d]", words[item->level], (int)item->code);
  if (item->place.path) {
    text_char(out, ' ');
    put_visible(out, item->place.path);
  }
  text_put(out, ": ");
  put_visible(out, item->message);
}
