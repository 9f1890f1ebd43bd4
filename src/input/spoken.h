/* What people say for goods, "3-5/8 25 gauge stud", brought to a form in which it can be compared
 * (docs/formats/wall.md, "Spoken names"). */
#ifndef INPUT_SPOKEN_H
#define INPUT_SPOKEN_H

#include "input/catalog.h"

enum { SPOKEN_MAX = 96 };

typedef struct spoken {
  char form[SPOKEN_MAX];
} spoken;

typedef enum spoken_way {
  SPOKEN_AS_IT_STANDS, /* blanks, hyphens, case, inch marks and the long form of "ga" do not count */
  SPOKEN_IN_ANY_ORDER  /* nor does the order of words, nor those that every good of a kind is called
                          by: "stud", "batt", "board" */
} spoken_way;

/* False when nothing is left of `words`, or more than a name can have. */
bool spoken_read(const char *words, catalog_kind kind, spoken_way way, spoken *out);
bool spoken_same(const spoken *one, const spoken *other);

/* How many of a layer are said in front of its name, "2x 5/8X", "(2) 5/8X", "two layers of 5/8X", and
 * in *skip the bytes up to the name; 0 when the `len` bytes of `s` do not start so. `2*` is grammar of
 * the wall line and not read here. */
int spoken_count(const char *s, size_t len, size_t *skip);

#endif
