#include "input/spoken.h"

#include <stdlib.h>
#include <string.h>

#include "base/text.h"

static bool is_letter(char ch) {
  return (ch >= 'a' && ch <= 'z') || (ch >= 'A' && ch <= 'Z');
}
static bool is_digit(char ch) {
  return ch >= '0' && ch <= '9';
}
static bool is_blank(char ch) {
  return ch == ' ' || ch == '\t';
}
static char lower(char ch) {
  return ch >= 'A' && ch <= 'Z' ? (char)(ch - 'A' + 'a') : ch;
}

/* Bytes of `word` where it stands at s, in any case and not as the start of a longer one; else 0.
 */
static size_t word_at(const char *s, const char *word) {
  size_t n = 0;
  while (word[n] != '\0' && lower(s[n]) == word[n]) n++;
  return word[n] == '\0' && !is_letter(s[n]) ? n : 0;
}

static size_t any_word_at(const char *s, const char *const *words) {
  for (size_t i = 0; words[i] != NULL; i++) {
    size_t n = word_at(s, words[i]);
    if (n > 0) return n;
  }
  return 0;
}

static const char *const inch_words[] = {"inches", "inch", "in", NULL};
static const char *const gauge_words[] = {"gauge", "ga", NULL};
static const char *const gauge_tails[] = {"gauge", "ga", "mil", NULL};

/* What every good of a kind is called by. */
static const char *const common_words[CATALOG_KINDS][5] = {
    [CATALOG_LAYER] = {"board", "boards", "gypsum", NULL},
    [CATALOG_FRAME] = {"stud", "studs", NULL},
    [CATALOG_FILL] = {"batt", "batts", "insulation", NULL},
    [CATALOG_MOUNT] = {"channel", NULL}};

/* ---- words ---- */

enum { WORDS_MAX = 16 };

/* A name cut into words; `form` holds them one behind the other, each ended by 0. */
typedef struct word_list {
  char form[2 * SPOKEN_MAX];
  size_t used;
  const char *word[WORDS_MAX];
  int count;
} word_list;

static bool put(word_list *l, char ch) {
  if (l->used + 1 >= sizeof l->form) return false;
  l->form[l->used++] = ch;
  return true;
}

/* The word that starts at *s, to l->form; *s goes behind it. Inch words behind a digit are left out,
 * "gauge" becomes "ga". */
static bool read_word(word_list *l, const char **s) {
  size_t start = l->used;
  for (const char *p = *s;; *s = p) {
    bool behind_digit = l->used > start && is_digit(l->form[l->used - 1]);
    size_t inch = behind_digit ? any_word_at(p, inch_words) : 0;
    size_t gauge = any_word_at(p, gauge_words);
    if (inch > 0) {
      p += inch;
    } else if (gauge > 0) {
      if (!put(l, 'g') || !put(l, 'a')) return false;
      p += gauge;
    } else if (*p == '\0' || is_blank(*p)) {
      return true;
    } else {
      char ch = lower(*p++);
      if (ch != '-' && ch != '"' && ch != '.' && !put(l, ch)) return false;
    }
  }
}

/* Whether a word goes on with what the last began: a fraction behind its inches ("3 5/8"), "ga" or
 * "mil" behind a number. */
static bool goes_on(const word_list *l, const char *s) {
  if (l->count == 0 || l->used < 2) return false;
  if (!is_digit(l->form[l->used - 2])) return false; /* before the 0 that ends the last word */
  const char *last = l->word[l->count - 1];
  if (any_word_at(s, gauge_tails) > 0) return true;
  size_t n = strspn(s, "0123456789");
  return n > 0 && s[n] == '/' && strchr(last, '/') == NULL && strchr(last, 'g') == NULL;
}

static bool cut(const char *words, word_list *l) {
  l->used = 0;
  l->count = 0;
  for (const char *s = words;;) {
    while (is_blank(*s)) s++;
    if (*s == '\0') return true;
    size_t inch = l->count > 0 ? any_word_at(s, inch_words) : 0;
    if (inch > 0 && is_digit(l->form[l->used - 2])) {
      s += inch;
      continue;
    }
    if (goes_on(l, s)) {
      l->used--; /* the 0 that ended it */
    } else {
      if (l->count == WORDS_MAX) return false;
      l->word[l->count++] = l->form + l->used;
    }
    size_t before = l->used;
    if (!read_word(l, &s)) return false;
    if (l->used == before && l->word[l->count - 1] == l->form + before) {
      l->count--; /* nothing but marks */
      continue;
    }
    if (!put(l, '\0')) return false;
  }
}

static bool is_common(const char *word, catalog_kind kind) {
  for (size_t i = 0; common_words[kind][i] != NULL; i++)
    if (text_equal(word, common_words[kind][i])) return true;
  return false;
}

static int compare_words(const void *x, const void *y) {
  return strcmp(*(const char *const *)x, *(const char *const *)y);
}

bool spoken_read(const char *words, catalog_kind kind, spoken_way way, spoken *out) {
  word_list l;
  if (!cut(words, &l)) return false;
  size_t n = 0;
  if (way == SPOKEN_IN_ANY_ORDER && l.count > 1)
    qsort(l.word, (size_t)l.count, sizeof l.word[0], compare_words);
  for (int i = 0; i < l.count; i++) {
    if (way == SPOKEN_IN_ANY_ORDER && is_common(l.word[i], kind)) continue;
    for (const char *p = l.word[i]; *p != '\0'; p++) {
      if (n + 1 >= SPOKEN_MAX) return false;
      out->form[n++] = *p;
    }
  }
  out->form[n] = '\0';
  return n > 0;
}

bool spoken_same(const spoken *one, const spoken *other) {
  return text_equal(one->form, other->form);
}

/* ---- counts ---- */

static const char *const count_words[] = {"one", "two", "three", "four", NULL};
static const char *const layer_words[] = {"layers", "layer", "ply", NULL};

/* A number said in figures or in a word; 0 when there is none. */
static int number_at(const char *s, size_t *len) {
  if (is_digit(s[0]) && s[0] != '0' && !is_digit(s[1])) {
    *len = 1;
    return s[0] - '0';
  }
  for (int i = 0; count_words[i] != NULL; i++) {
    *len = word_at(s, count_words[i]);
    if (*len > 0) return i + 1;
  }
  return 0;
}

static size_t blanks_at(const char *s) {
  return strspn(s, " \t");
}

/* Bytes of what stands between the number and the name: "x", "layers of"; 0 when it is no count. An
 * x with no blank behind it is one only before a fraction: "2x4" is a stud. */
static size_t count_tail(const char *s) {
  size_t at = blanks_at(s);
  if (lower(s[at]) == 'x') {
    at++;
    size_t gap = blanks_at(s + at), digits = strspn(s + at, "0123456789");
    if (gap > 0 || (digits > 0 && s[at + digits] == '/')) return at + gap;
    return 0;
  }
  size_t layers = any_word_at(s + at, layer_words);
  if (layers == 0) return 0;
  at += layers;
  at += blanks_at(s + at);
  size_t of = word_at(s + at, "of");
  return at + of + blanks_at(s + at + of);
}

int spoken_count(const char *s, size_t len, size_t *skip) {
  char words[SPOKEN_MAX];
  size_t digits = 0, n = len < SPOKEN_MAX - 1 ? len : SPOKEN_MAX - 1;
  memcpy(words, s, n);
  words[n] = '\0';
  bool bracket = words[0] == '(';
  int count = number_at(words + (bracket ? 1 : 0), &digits);
  if (count == 0) return 0;
  size_t at = (bracket ? 1 : 0) + digits;
  if (bracket) {
    if (words[at] != ')') return 0;
    at++;
    size_t tail = count_tail(words + at);
    *skip = at + (tail > 0 ? tail : blanks_at(words + at));
    return count;
  }
  size_t tail = count_tail(words + at);
  *skip = at + tail;
  return tail > 0 ? count : 0;
}
