#include "input/price_units.h"

#include <ctype.h>
#include <string.h>

#include "base/units.h"

#define FT2 UNITS_M2_PER_FT2
#define FT  UNITS_M_PER_FT

/* Written without blanks and full stops, in small letters. */
static const struct {
  const char *name;
  price_unit unit;
  double si;
} names[] = {
    {"ft2", UNIT_M2, FT2},
    {"sf", UNIT_M2, FT2},
    {"sqft", UNIT_M2, FT2},
    {"ft^2", UNIT_M2, FT2},
    {"squarefoot", UNIT_M2, FT2},
    {"squarefeet", UNIT_M2, FT2},
    {"csf", UNIT_M2, 100 * FT2},
    {"msf", UNIT_M2, 1000 * FT2},
    {"m2", UNIT_M2, 1},
    {"sqm", UNIT_M2, 1},
    {"m^2", UNIT_M2, 1},
    {"squaremetre", UNIT_M2, 1},
    {"squaremetres", UNIT_M2, 1},
    {"squaremeter", UNIT_M2, 1},
    {"squaremeters", UNIT_M2, 1},
    {"ft", UNIT_M, FT},
    {"lf", UNIT_M, FT},
    {"lft", UNIT_M, FT},
    {"linft", UNIT_M, FT},
    {"foot", UNIT_M, FT},
    {"feet", UNIT_M, FT},
    {"linearfoot", UNIT_M, FT},
    {"linearfeet", UNIT_M, FT},
    {"linealfoot", UNIT_M, FT},
    {"linealfeet", UNIT_M, FT},
    {"clf", UNIT_M, 100 * FT},
    {"mlf", UNIT_M, 1000 * FT},
    {"m", UNIT_M, 1},
    {"lm", UNIT_M, 1},
    {"metre", UNIT_M, 1},
    {"metres", UNIT_M, 1},
    {"meter", UNIT_M, 1},
    {"meters", UNIT_M, 1},
    {"linearmetre", UNIT_M, 1},
    {"linearmeter", UNIT_M, 1},
    {"each", UNIT_EACH, 1},
    {"ea", UNIT_EACH, 1},
    {"pc", UNIT_EACH, 1},
    {"pcs", UNIT_EACH, 1},
    {"piece", UNIT_EACH, 1},
    {"pieces", UNIT_EACH, 1},
    {"thousand", UNIT_EACH, 1000},
    {"thousandpieces", UNIT_EACH, 1000},
};

/* Words for what holds a quantity; a piece of a long good is one too. */
static const char *const packages[] = {
    "sheet",  "sheets", "sht",     "board",  "panel",   "bag",  "bundle", "bdl",   "roll",  "box",
    "carton", "ctn",    "case",    "pack",   "package", "pail", "tube",   "strip", "strap", "stud",
    "track",  "plate",  "channel", "length", "each",    "ea",   "pc",     "piece", "pcs",
};

enum { WORDS_MAX = 120 };

typedef struct quantity {
  price_unit unit;
  double si;
} quantity;

static const char *const kinds[UNIT_COUNT] = {"an area", "a length", "a number of pieces"};
static const char *const taken[UNIT_COUNT] = {"area", "length", "the piece"};

/* Small letters, single blanks, no full stops behind letters, no commas between digits; the sign of
 * multiplication becomes x. False when too long. */
static bool normalise(const char *words, char *out) {
  size_t n = 0;
  for (const char *s = words; *s; s++) {
    char before = n > 0 ? out[n - 1] : ' ';
    if (n + 2 > WORDS_MAX) return false;
    if (*s == '.' && !isdigit((unsigned char)s[1])) continue;
    if (*s == ',' && isdigit((unsigned char)before)) continue;
    if (*s == '(' || *s == ')' || (isspace((unsigned char)*s) && before == ' ')) continue;
    if (text_starts(s, "\xC3\x97")) {
      out[n++] = 'x';
      s++;
      continue;
    }
    out[n++] = isspace((unsigned char)*s) ? ' ' : (char)tolower((unsigned char)*s);
  }
  while (n > 0 && out[n - 1] == ' ') n--;
  out[n] = '\0';
  return true;
}

/* Takes `word` and what follows it away from the front, when it stands there alone. */
static bool drop_front(const char **s, const char *word) {
  size_t n = strlen(word);
  if (!text_starts(*s, word) || (isalpha((unsigned char)word[n - 1]) && (*s)[n] != ' ' && (*s)[n]))
    return false;
  *s += n;
  while (**s == ' ') (*s)++;
  return true;
}

static const char *compact(arena *a, const char *s) {
  text t;
  text_init(&t, a, WORDS_MAX);
  for (; *s; s++) {
    if (*s != ' ' && *s != '.') text_char(&t, *s);
  }
  return t.data;
}

static bool named(arena *a, const char *s, quantity *q) {
  const char *name = compact(a, s);
  for (size_t i = 0; i < sizeof names / sizeof names[0]; i++) {
    if (!text_equal(name, names[i].name)) continue;
    *q = (quantity){names[i].unit, names[i].si};
    return true;
  }
  return false;
}

/* Digits with at most one point at the front; what follows goes into *rest. */
static bool number(const char *s, double *value, const char **rest) {
  double n = 0, scale = 1;
  bool point = false, any = false;
  for (; isdigit((unsigned char)*s) || (*s == '.' && !point); s++) {
    if (*s == '.') {
      point = true;
      continue;
    }
    n = n * 10 + (*s - '0');
    if (point) scale *= 10;
    any = true;
  }
  while (*s == ' ') s++;
  *value = n / scale;
  *rest = s;
  return any;
}

/* A bare size of a sheet: whole feet up to 16, metres below 5, inches from 24 to 192, millimetres
 * from 600. */
static double bare_unit_m(double one, double other) {
  bool whole = one == (int)one && other == (int)other;
  if (one <= 0 || other <= 0) return 0;
  if (whole && one <= 16 && other <= 16) return FT;
  if (!whole && one < 5 && other < 5) return 1;
  if (one >= 600 && other >= 600) return 0.001;
  return one >= 24 && one <= 192 && other >= 24 && other <= 192 ? UNITS_M_PER_IN : 0;
}

/* "4x8", "4 ft x 8 ft", "1.22x2.44 m", "1200 x 2400 mm"; for goods by length "10 x 12 ft" is ten
 * pieces. */
static bool product(arena *a, const char *s, price_unit wanted, quantity *q) {
  const char *cross = strchr(s, 'x'), *rest = NULL, *fault = NULL;
  if (!cross) return false;
  const char *left = text_copyn(a, s, (size_t)(cross - s)), *right = cross + 1;
  while (*right == ' ') right++;
  double l = 0, r = 0, lm = 0, rm = 0;
  bool bare_left = number(left, &l, &rest) && *rest == '\0';
  bool bare_right = number(right, &r, &rest) && *rest == '\0';
  if (bare_left && !bare_right && wanted == UNIT_M && units_parse_length(right, 0, &rm, &fault)) {
    *q = (quantity){UNIT_M, l * rm};
    return l > 0 && rm > 0;
  }
  double unit = 0;
  if (bare_left && bare_right) {
    unit = bare_unit_m(l, r);
  } else if (bare_left) { /* the unit of the second holds for both */
    quantity second;
    if (!number(right, &r, &rest)) return false;
    if (named(a, rest, &second) && second.unit == UNIT_M)
      unit = second.si;
    else if (!units_to_metres(rest, 1, &unit))
      return false;
  }
  if (!units_parse_length(left, unit, &lm, &fault) || !units_parse_length(right, unit, &rm, &fault))
    return false;
  *q = (quantity){UNIT_M2, lm * rm};
  return q->si > 0;
}

/* What a package holds, in words: "88 sf", "4x8", "10 ft", "100". */
static bool content(arena *a, const char *s, price_unit wanted, quantity *q) {
  const char *rest = NULL, *fault = NULL;
  double n = 0, metres = 0;
  if (product(a, s, wanted, q)) return true;
  if (number(s, &n, &rest) && n > 0) {
    *q = (quantity){UNIT_EACH, n};
    if (*rest == '\0') return true;
    if (named(a, rest, q)) {
      q->si *= n;
      return true;
    }
  }
  if (!units_parse_length(s, 0, &metres, &fault) || !(metres > 0)) return false;
  *q = (quantity){UNIT_M, metres};
  return true;
}

/* The package word that `s` starts or ends with; *rest is the remainder, in `a`. */
static const char *package(arena *a, const char *s, const char **rest) {
  size_t length = strlen(s);
  for (size_t i = 0; i < sizeof packages / sizeof packages[0]; i++) {
    const char *word = packages[i], *front = s;
    size_t n = strlen(word);
    if (drop_front(&front, word)) {
      if (!drop_front(&front, "of")) (void)drop_front(&front, "for");
      *rest = front;
      return word;
    }
    if (length > n + 1 && text_equal(s + length - n, word) && s[length - n - 1] == ' ') {
      *rest = text_copyn(a, s, length - n - 1);
      return word;
    }
  }
  return NULL;
}

/* One bought unit as the book knows it: where the words name its package, or any piece. */
static bool book_package(const char *word, const price_item *item, quantity *q) {
  static const char *const any[] = {"each", "ea", "pc", "pcs", "piece", NULL};
  bool fits = item->bought_as != NULL && text_starts(item->bought_as, word);
  for (int i = 0; any[i]; i++) fits = fits || text_equal(word, any[i]);
  *q = (quantity){item->unit, item->bought_quantity};
  return fits && item->bought_quantity > 0;
}

static bool understood(arena *a, const char *s, const price_item *item, quantity *q,
                       const char **fault) {
  const char *rest = NULL;
  if (named(a, s, q) && q->unit == item->unit) return true;
  const char *word = package(a, s, &rest);
  if (word && *rest == '\0') {
    if (book_package(word, item, q)) return true;
    *fault = text_format(a, "what a %s of %s holds is said neither here nor in the price book",
                         word, item->code);
    return false;
  }
  if (content(a, word ? rest : s, item->unit, q) || named(a, s, q)) return true;
  *fault = text_format(a, "the unit \"%s\" is not understood", s);
  return false;
}

bool price_units_read(arena *a, const char *words, const price_item *item, double *out,
                      const char **fault) {
  char small[WORDS_MAX + 1];
  quantity q = {UNIT_COUNT, 0};
  if (text_equal(words, "M") || text_equal(words, "/M") || text_equal(words, "per M")) {
    *fault = "\"M\" may be a metre or a thousand: write m, MSF, MLF or 1000 each";
    return false;
  }
  if (!normalise(words, small) || small[0] == '\0') {
    *fault = small[0] == '\0' ? "the unit is missing" : "the unit is too long";
    return false;
  }
  const char *s = small;
  if (*s == '$') s++;
  (void)(drop_front(&s, "/") || drop_front(&s, "per"));
  if (!understood(a, s, item, &q, fault)) return false;
  if (q.unit != item->unit) {
    *fault = text_format(a, "\"%s\" is %s, and %s is taken off by %s", words, kinds[q.unit],
                         item->code, taken[item->unit]);
    return false;
  }
  *out = q.si;
  return true;
}
