#include "base/diag.h"

enum { KEPT = 200, MESSAGE_MAX = 2000 };

void diag_init(diag_list *d, arena *a) {
  *d = (diag_list){.arena = a, .worst = STATUS_OK};
}

static void count_error(diag_list *d, error_code code) {
  status s = error_status(code);
  d->errors++;
  if (s > d->worst) d->worst = s;
}

static void add(diag_list *d, diag_level level, error_code code, diag_place place, const char *format,
                va_list args) {
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

void diag_add(diag_list *d, diag_level level, error_code code, diag_place place, const char *format, ...) {
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

/* Text from files may hold line ends and terminal escapes (C0, DEL, and C1 as UTF-8): shown as \u00XX, so that a message stays
 * one harmless line. */
static void put_visible(text *out, const char *s) {
  for (const unsigned char *p = (const unsigned char *)s; *p; p++) {
    bool c1 = p[0] == 0xC2 && p[1] >= 0x80 && p[1] < 0xA0;
    if (c1) {
      text_putf(out, "\\u%04x", p[1]);
      p++;
    } else if (*p < 0x20 || *p == 0x7F) {
      text_putf(out, "\\u%04x", *p);
    } else {
      text_char(out, (char)*p);
    }
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
