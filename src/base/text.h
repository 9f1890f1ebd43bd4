/* Text: bounded growing buffer, copies, the one number formatter, patterns and near names. */
#ifndef BASE_TEXT_H
#define BASE_TEXT_H

#include <stdarg.h>
#include <stdbool.h>
#include <stddef.h>

#include "base/arena.h"

#if defined(__GNUC__)
#define TEXT_PRINTF(f, a) __attribute__((format(printf, f, a)))
#else
#define TEXT_PRINTF(f, a)
#endif

typedef struct text {
  arena *arena;
  char *data; /* always ends in NUL once text_init ran */
  size_t len; /* bytes before the NUL */
  size_t cap;
  size_t max; /* what would go beyond is cut and `cut` set */
  bool cut;
} text;

void text_init(text *t, arena *a, size_t max_bytes);
void text_put(text *t, const char *s);
void text_putn(text *t, const char *s, size_t n);
void text_char(text *t, char c);
/* printf into the buffer. No %f or %g: they follow the host's locale. Numbers go through text_fixed
 * or text_number. */
void text_putf(text *t, const char *format, ...) TEXT_PRINTF(2, 3);
void text_vputf(text *t, const char *format, va_list args);
/* `value` with exactly `decimals` (0..9) digits after a point, half away from zero on the decimal
 * value, "-0" as "0". Independent of locale. Not finite prints "nan", "inf", "-inf". */
void text_fixed(text *t, double value, int decimals);
/* Shortest form with at most `decimals` digits: trailing zeros and a bare point are dropped. */
void text_number(text *t, double value, int decimals);
/* Money in minor units (cents) as "1234.50"; with `thousands` as "1,234.50". */
void text_cents(text *t, long long cents, bool thousands);
/* Pads with blanks up to `column` display columns since the last newline (UTF-8 counts a code point
 * as one). */
void text_pad(text *t, size_t column);

const char *text_copy(arena *a, const char *s);
const char *text_copyn(arena *a, const char *s, size_t n);
const char *text_format(arena *a, const char *format, ...) TEXT_PRINTF(2, 3);
/* `value` as text_fixed, in arena memory. */
const char *text_of(arena *a, double value, int decimals);

/* Whether `name` matches a shell-style pattern of * and ?. */
bool text_match(const char *pattern, const char *name);
/* The name nearest to `word` by edit distance, NULL when none is near (more than a third of the
 * letters differ). */
const char *text_nearest(const char *word, const char *const *names, size_t n);
/* Length in bytes of the UTF-8 code point that starts at `p` (< end), 0 when it is none: overlong,
 * half a surrogate pair, beyond U+10FFFF, cut off. */
size_t text_utf8(const char *p, const char *end);
bool text_equal(const char *a, const char *b);
bool text_starts(const char *s, const char *prefix);

#endif
