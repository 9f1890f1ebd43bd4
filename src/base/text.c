#include "base/text.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum {
  FIRST_CAP = 64,
  NUMBER_MAX = 340, /* sign, 309 digits, point, 9 decimals, NUL */
  MAX_DECIMALS = 9,
  SHORTEST_FIRST = 15, /* every decimal of so many digits survives a double */
  SHORTEST_LAST = 17,  /* so many tell any two doubles apart */
  WORD_MAX = 80        /* longer words have no near name */
};

/* ---- the buffer ---- */

void text_init(text *t, arena *a, size_t max_bytes) {
  *t = (text){.arena = a, .max = max_bytes};
  t->cap = max_bytes < FIRST_CAP ? max_bytes + 1 : FIRST_CAP;
  t->data = arena_alloc(a, t->cap);
}

/* Room for `n` more bytes within `max`; returns how many may be written. */
static size_t make_room(text *t, size_t n) {
  size_t room = t->max - t->len;
  if (n > room) {
    n = room;
    t->cut = true;
  }
  if (t->len + n + 1 > t->cap) {
    size_t cap = t->cap > SIZE_MAX / 2 ? SIZE_MAX : 2 * t->cap;
    if (cap < t->len + n + 1) cap = t->len + n + 1;
    if (cap > t->max && t->max < SIZE_MAX) cap = t->max + 1;
    t->data = arena_grow(t->arena, t->data, t->len + 1, cap);
    t->cap = cap;
  }
  return n;
}

/* Bytes of `s` up to `n` that end at a whole UTF-8 code point. */
static size_t whole_points(const char *s, size_t n) {
  while (n > 0 && ((unsigned char)s[n] & 0xC0) == 0x80) n--;
  return n;
}

void text_putn(text *t, const char *s, size_t n) {
  if (t->cut) return; /* nothing may follow a gap */
  size_t fits = make_room(t, n);
  if (fits < n) fits = whole_points(s, fits);
  if (fits) memcpy(t->data + t->len, s, fits);
  t->len += fits;
  t->data[t->len] = '\0';
}

void text_put(text *t, const char *s) {
  text_putn(t, s, strlen(s));
}

void text_char(text *t, char c) {
  text_putn(t, &c, 1);
}

void text_vputf(text *t, const char *format, va_list args) {
  va_list again;
  va_copy(again, args);
  char small[256];
  int n = vsnprintf(small, sizeof small, format, args);
  if (n > 0 && (size_t)n < sizeof small) {
    text_putn(t, small, (size_t)n);
  } else if (n > 0) {
    size_t size = (size_t)n + 1;
    char *large = arena_alloc(t->arena, size);
    (void)vsnprintf(large, size, format, again);
    text_putn(t, large, (size_t)n);
  }
  va_end(again);
}

void text_putf(text *t, const char *format, ...) {
  va_list args;
  va_start(args, format);
  text_vputf(t, format, args);
  va_end(args);
}

void text_pad(text *t, size_t column) {
  size_t start = t->len;
  while (start > 0 && t->data[start - 1] != '\n') start--;
  size_t points = 0;
  for (size_t i = start; i < t->len; i++) points += ((unsigned char)t->data[i] & 0xC0) != 0x80;
  for (; points < column && !t->cut; points++) text_char(t, ' ');
}

/* ---- numbers ---- */

typedef struct decimal {
  bool negative;
  int exponent; /* value = 0.d1d2d3... x 10^exponent */
  int count;
  char digit[SHORTEST_LAST + 1];
} decimal;

/* Reads what printf %e wrote, whatever the locale's decimal point: only digits, sign and exponent
 * count. */
static decimal read_scientific(const char *s) {
  decimal x = {0};
  if (*s == '-') x.negative = true;
  for (; *s && *s != 'e'; s++)
    if (*s >= '0' && *s <= '9' && x.count < SHORTEST_LAST) x.digit[x.count++] = *s;
  x.exponent = (int)strtol(s + 1, NULL, 10) + 1;
  return x;
}

/* The shortest decimal that reads back as `value`: what a person would have written. */
static decimal shortest(double value) {
  char s[48];
  for (int digits = SHORTEST_FIRST; digits < SHORTEST_LAST; digits++) {
    (void)snprintf(s, sizeof s, "%.*e", digits - 1, value);
    double back = strtod(s, NULL);
    if (!(back < value) && !(back > value)) return read_scientific(s);
  }
  (void)snprintf(s, sizeof s, "%.*e", SHORTEST_LAST - 1, value);
  return read_scientific(s);
}

/* Keeps `decimals` digits behind the point, half away from zero. */
static void round_decimal(decimal *x, int decimals) {
  int keep = x->exponent + decimals;
  if (keep >= x->count) return;
  bool up = keep >= 0 && x->digit[keep] >= '5';
  x->count = keep > 0 ? keep : 0;
  if (!up) return;
  int i = x->count - 1;
  while (i >= 0 && x->digit[i] == '9') x->digit[i--] = '0';
  if (i >= 0) {
    x->digit[i]++;
    return;
  }
  /* 9.99 became 10.0: one more digit in front */
  x->digit[0] = '1';
  for (int k = 1; k < x->count; k++) x->digit[k] = '0';
  if (x->count == 0) x->count = 1;
  x->exponent++;
}

static bool is_zero(const decimal *x) {
  for (int i = 0; i < x->count; i++)
    if (x->digit[i] != '0') return false;
  return true;
}

static char digit_at(const decimal *x, int place) {
  return place >= 0 && place < x->count ? x->digit[place] : '0';
}

/* Writes into `out` (NUMBER_MAX bytes) and returns the length. */
static size_t write_fixed(char *out, double value, int decimals) {
  decimal x = shortest(value);
  size_t n = 0;
  round_decimal(&x, decimals);
  if (x.negative && !is_zero(&x)) out[n++] = '-';
  if (x.exponent <= 0) out[n++] = '0';
  for (int i = 0; i < x.exponent; i++) out[n++] = digit_at(&x, i);
  if (decimals > 0) out[n++] = '.';
  for (int i = 0; i < decimals; i++) out[n++] = digit_at(&x, x.exponent + i);
  return n;
}

static bool put_not_finite(text *t, double value) {
  if (isfinite(value)) return false;
  text_put(t, isnan(value) ? "nan" : value > 0 ? "inf" : "-inf");
  return true;
}

static int clamp_decimals(int decimals) {
  return decimals < 0 ? 0 : decimals > MAX_DECIMALS ? MAX_DECIMALS : decimals;
}

void text_fixed(text *t, double value, int decimals) {
  if (put_not_finite(t, value)) return;
  char s[NUMBER_MAX];
  text_putn(t, s, write_fixed(s, value, clamp_decimals(decimals)));
}

void text_number(text *t, double value, int decimals) {
  if (put_not_finite(t, value)) return;
  char s[NUMBER_MAX];
  decimals = clamp_decimals(decimals);
  size_t n = write_fixed(s, value, decimals);
  if (decimals > 0) {
    while (s[n - 1] == '0') n--;
    if (s[n - 1] == '.') n--;
  }
  text_putn(t, s, n);
}

void text_cents(text *t, long long cents, bool thousands) {
  unsigned long long left =
      cents < 0 ? 0ULL - (unsigned long long)cents : (unsigned long long)cents;
  char s[40];
  size_t at = sizeof s;
  int digits = 0;
  for (int i = 0; i < 2; i++, left /= 10) s[--at] = (char)('0' + (int)(left % 10));
  s[--at] = '.';
  do {
    if (thousands && digits > 0 && digits % 3 == 0) s[--at] = ',';
    s[--at] = (char)('0' + (int)(left % 10));
    left /= 10;
    digits++;
  } while (left);
  if (cents < 0) s[--at] = '-';
  text_putn(t, s + at, sizeof s - at);
}

/* ---- copies ---- */

const char *text_copyn(arena *a, const char *s, size_t n) {
  char *copy = arena_alloc(a, n + 1);
  if (n) memcpy(copy, s, n);
  return copy;
}

const char *text_copy(arena *a, const char *s) {
  return text_copyn(a, s, strlen(s));
}

const char *text_format(arena *a, const char *format, ...) {
  text t;
  text_init(&t, a, SIZE_MAX / 4);
  va_list args;
  va_start(args, format);
  text_vputf(&t, format, args);
  va_end(args);
  return t.data;
}

const char *text_of(arena *a, double value, int decimals) {
  text t;
  text_init(&t, a, NUMBER_MAX);
  text_fixed(&t, value, decimals);
  return t.data;
}

/* ---- words ---- */

bool text_match(const char *pattern, const char *name) {
  const char *star = NULL, *retry = NULL; /* last * met, and where its match would go on */
  while (*name) {
    if (*pattern == '*') {
      star = pattern++;
      retry = name;
    } else if (*pattern == '?' || *pattern == *name) {
      pattern++;
      name++;
    } else if (star) {
      pattern = star + 1;
      name = ++retry;
    } else {
      return false;
    }
  }
  while (*pattern == '*') pattern++;
  return *pattern == '\0';
}

static size_t least(size_t a, size_t b) {
  return a < b ? a : b;
}

/* Edit distance where two swapped neighbours count once (the commonest slip of typing). */
static size_t distance(const char *a, size_t n, const char *b, size_t m) {
  size_t rows[3][WORD_MAX + 1];
  size_t *before = rows[0], *last = rows[1], *now = rows[2];
  for (size_t j = 0; j <= m; j++) last[j] = j;
  for (size_t i = 1; i <= n; i++) {
    now[0] = i;
    for (size_t j = 1; j <= m; j++) {
      size_t change = last[j - 1] + (a[i - 1] != b[j - 1]);
      now[j] = least(change, least(last[j], now[j - 1]) + 1);
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
        now[j] = least(now[j], before[j - 2] + 1);
    }
    size_t *spare = before;
    before = last;
    last = now;
    now = spare;
  }
  return last[m];
}

const char *text_nearest(const char *word, const char *const *names, size_t n) {
  const char *best = NULL;
  size_t best_distance = SIZE_MAX, length = strlen(word);
  if (length > WORD_MAX) return NULL;
  for (size_t i = 0; i < n; i++) {
    size_t other = strlen(names[i]);
    if (other > WORD_MAX) continue;
    size_t far = distance(word, length, names[i], other);
    if (3 * far > (length > other ? length : other) || far >= best_distance) continue;
    best = names[i];
    best_distance = far;
  }
  return best;
}

size_t text_utf8(const char *p, const char *end) {
  const unsigned char *u = (const unsigned char *)p;
  size_t n = u[0] < 0x80   ? 1
             : u[0] < 0xC2 ? 0
             : u[0] < 0xE0 ? 2
             : u[0] < 0xF0 ? 3
             : u[0] < 0xF5 ? 4
                           : 0;
  if (n == 0 || (size_t)(end - p) < n) return 0;
  for (size_t i = 1; i < n; i++)
    if ((u[i] & 0xC0) != 0x80) return 0;
  if (u[0] == 0xE0 && u[1] < 0xA0) return 0;
  if (u[0] == 0xED && u[1] > 0x9F) return 0;
  if (u[0] == 0xF0 && u[1] < 0x90) return 0;
  if (u[0] == 0xF4 && u[1] > 0x8F) return 0;
  return n;
}

bool text_equal(const char *a, const char *b) {
  return strcmp(a, b) == 0;
}

bool text_starts(const char *s, const char *prefix) {
  return strncmp(s, prefix, strlen(prefix)) == 0;
}
