/* Words of price books. */
#include "base/text.h"
#include "base/units.h"
#include "input/prices.h"

const char *const price_unit_names[UNIT_COUNT] = {"m2", "m", "each"};
const char *const trade_names[TRADE_COUNT] = {"hanger", "taper", "insulator"};

const char *const price_unit_words[] = {"m2", "ft2", "m", "ft", "each", NULL};
/* What the words mean, in their order. */
static const struct {
  price_unit unit;
  double si; /* one of it in the SI unit of takeoff */
} units[] = {{UNIT_M2, 1},
             {UNIT_M2, UNITS_M2_PER_FT2},
             {UNIT_M, 1},
             {UNIT_M, UNITS_M_PER_FT},
             {UNIT_EACH, 1}};

bool prices_unit(const char *word, price_unit *unit, double *si) {
  for (size_t i = 0; price_unit_words[i]; i++) {
    if (!text_equal(word, price_unit_words[i])) continue;
    *unit = units[i].unit;
    *si = units[i].si;
    return true;
  }
  return false;
}

batt_width prices_batt_width(frame_material m, double spacing_m) {
  /* Between the usual 16 and 24 in: 20 in. Bays at 12 in are cut from the narrow stock. */
  bool wide = spacing_m > 20 * UNITS_M_PER_IN;
  if (m == FRAME_WOOD) return wide ? BATT_23IN : BATT_15IN;
  return wide ? BATT_24IN : BATT_16IN;
}
