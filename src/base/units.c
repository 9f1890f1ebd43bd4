#include "base/units.h"

#include <math.h>
#include <string.h>

/* How a unit of length is written; a quotient of whole numbers keeps 610 mm the double nearest to
 * 0.61 and 12 in that nearest to 0.3048. */
typedef struct length_unit {
  const char *word;
  double factor, divisor; /* metres = value x factor / divisor */
} length_unit;

enum {
  INCH = 254,
  FOOT = 3048,
  PER_METRE = 10000
}; /* tenths of a millimetre: international inch and foot, exact */

/* Longer words first where one begins another. */
static const length_unit length_units[] = {
    {"inches", INCH, PER_METRE},
    {"inch", INCH, PER_METRE},
    {"in", INCH, PER_METRE},
    {"\"", INCH, PER_METRE},
    {"''", INCH, PER_METRE},
    {"\xE2\x80\xB3", INCH, PER_METRE},
    {"feet", FOOT, PER_METRE},
    {"foot", FOOT, PER_METRE},
    {"ft", FOOT, PER_METRE},
    {"'", FOOT, PER_METRE},
    {"\xE2\x80\xB2", FOOT, PER_METRE},
    {"mm", 1, 1000},
    {"cm", 1, 100},
    {"m", 1, 1},
};
enum { LENGTH_UNITS = sizeof length_units / sizeof length_units[0], MAX_DIGITS = 15 };

static const char *const length_wanted = "a length such as 16in, 3-5/8in, 9ft-6in, 610mm or 3.6m";

static double in_metres(const length_unit *u, double value) {
  return value * u->factor / u->divisor;
}

bool units_to_metres(const char *unit, double value, double *metres) {
  for (int i = 0; i < LENGTH_UNITS; i++) {
    if (!text_equal(unit, length_units[i].word)) continue;
    *metres = in_metres(&length_units[i], value);
    return true;
  }
  return false;
}

static const char *skip_blanks(const char *s) {
  while (*s == ' ' || *s == '\t') s++;
  return s;
}

static bool is_digit(char c) {
  return c >= '0' && c <= '9';
}

/* Digits with at most one point; exact up to 15 digits, refused beyond. */
static bool read_decimal(const char **at, double *value, bool *whole) {
  const char *s = *at;
  double mantissa = 0, divisor = 1;
  int digits = 0;
  bool point = false;
  for (; is_digit(*s) || (*s == '.' && !point); s++) {
    if (*s == '.') {
      point = true;
      continue;
    }
    mantissa = mantissa * 10 + (*s - '0');
    if (point) divisor *= 10;
    digits++;
  }
  if (digits == 0 || digits > MAX_DIGITS) return false;
  *value = mantissa / divisor;
  *whole = !point;
  *at = s;
  return true;
}

/* `/8` behind a whole number. */
static bool read_divisor(const char **at, double *divisor) {
  const char *s = skip_blanks(*at);
  bool whole;
  if (*s != '/') return false;
  s = skip_blanks(s + 1);
  if (!read_decimal(&s, divisor, &whole) || !whole || !(*divisor > 0)) return false;
  *at = s;
  return true;
}

/* `3.6`, `5/8`, `3-5/8`, `3 5/8`. */
static bool read_quantity(const char **at, double *value) {
  const char *s = *at;
  bool whole;
  double divisor;
  if (!read_decimal(&s, value, &whole)) return false;
  *at = s;
  if (!whole) return true;
  if (read_divisor(at, &divisor)) {
    *value /= divisor;
    return true;
  }
  s = skip_blanks(s);
  bool joined = *s == '-' || s != *at;
  if (*s == '-') s = skip_blanks(s + 1);
  double part;
  if (!joined || !read_decimal(&s, &part, &whole) || !whole) return true;
  if (!read_divisor(&s, &divisor)) return true;
  *value += part / divisor;
  *at = s;
  return true;
}

static const length_unit *read_unit(const char **at) {
  const char *s = skip_blanks(*at);
  for (int i = 0; i < LENGTH_UNITS; i++) {
    if (!text_starts(s, length_units[i].word)) continue;
    *at = s + strlen(length_units[i].word);
    return &length_units[i];
  }
  return NULL;
}

/* Inches behind feet: `-6in`, ` 6in`, `6"`. True with nothing there too; *at moves behind what was
 * read. */
static bool read_inches(const char **at, double *metres) {
  const char *s = skip_blanks(*at);
  if (*s == '\0') return true;
  if (*s == '-') s = skip_blanks(s + 1);
  double value;
  if (!read_quantity(&s, &value)) return false;
  const length_unit *u = read_unit(&s);
  if (!u || u->factor != INCH) return false;
  *metres += in_metres(u, value);
  *at = s;
  return true;
}

static bool parse(const char *s, double default_unit_m, double *metres) {
  double value;
  s = skip_blanks(s);
  if (!read_quantity(&s, &value)) return false;
  const length_unit *u = read_unit(&s);
  if (!u) {
    if (!(default_unit_m > 0)) return false;
    *metres = value * default_unit_m;
  } else {
    *metres = in_metres(u, value);
    if (u->factor == FOOT && !read_inches(&s, metres)) return false;
  }
  return *skip_blanks(s) == '\0';
}

bool units_parse_length(const char *s, double default_unit_m, double *metres,
                        const char **expected) {
  double found = 0;
  *expected = length_wanted;
  if (!parse(s, default_unit_m, &found)) return false;
  *metres = found;
  return true;
}

/* ---- printing ---- */

static const double mm_per_m = 1000;
static const double sixteenths_per_in = 16;

/* `4-7/8`, `1/2`, `4` from sixteenths of an inch. */
static void put_sixteenths(text *out, long long n) {
  long long whole = n / 16, part = n % 16, divisor = 16;
  while (part && part % 2 == 0) {
    part /= 2;
    divisor /= 2;
  }
  if (whole || !part) text_putf(out, "%lld", whole);
  if (whole && part) text_char(out, '-');
  if (part) text_putf(out, "%lld/%lld", part, divisor);
}

/* Rounds to sixteenths; writes the sign. */
static long long sixteenths(text *out, double metres) {
  long long n = llround(metres / UNITS_M_PER_IN * sixteenths_per_in);
  if (n < 0) text_char(out, '-');
  return n < 0 ? -n : n;
}

void units_put_thickness(text *out, double metres, units_system u) {
  if (u == UNITS_SI) {
    text_fixed(out, metres * mm_per_m, 1);
    text_put(out, " mm");
    return;
  }
  put_sixteenths(out, sixteenths(out, metres));
  text_put(out, " in");
}

void units_put_height(text *out, double metres, units_system u) {
  if (u == UNITS_SI) {
    text_fixed(out, metres, 2);
    text_put(out, " m");
    return;
  }
  const long long per_foot = 12 * 16;
  long long n = sixteenths(out, metres);
  text_putf(out, "%lld ft ", n / per_foot);
  put_sixteenths(out, n % per_foot);
  text_put(out, " in");
}

void units_put_surface_mass(text *out, double kg_m2, units_system u) {
  text_fixed(out, u == UNITS_SI ? kg_m2 : kg_m2 / UNITS_KG_M2_PER_PSF, 1);
  text_put(out, u == UNITS_SI ? " kg/m2" : " psf");
}
