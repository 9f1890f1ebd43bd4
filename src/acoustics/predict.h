/* From a wall to its predicted sound insulation: the only part of acoustics that knows walls. */
#ifndef ACOUSTICS_PREDICT_H
#define ACOUSTICS_PREDICT_H

#include "acoustics/model.h"
#include "acoustics/rating.h"
#include "wall/wall.h"

enum { PREDICT_MAX_REASONS = OUTSIDE_COUNT };

typedef struct prediction {
  double tl_db[BANDS];
  ratings ratings;
  double exact[METRIC_COUNT];
  double sd[METRIC_COUNT]; /* of rating - (exact - 0.5) */
  sound_family family;
  int outside; /* reasons why the wall lies outside the fitted range */
  const char *outside_reason[PREDICT_MAX_REASONS];
} prediction;

void predict_wall(const catalog *c, const wall *w, prediction *out);
/* The curve only, under other coefficients than the catalog's: for the fit and its tests. */
void predict_tl(const catalog *c, const struct acoustics *k, const wall *w, double tl_db[BANDS]);
/* The wall in the model's numbers. */
void predict_model(const catalog *c, const struct acoustics *k, const wall *w, model_wall *out);
/* One leaf in the model's numbers; an empty face is not allowed. */
model_leaf predict_leaf(const catalog *c, const struct acoustics *k, const face *f);
/* What the frame, spacing, fills and mounts give: everything of `out` but its leaves (two are
 * assumed). */
void predict_core(const catalog *c, const struct acoustics *k, const wall *w, model_wall *out);
sound_family predict_family(const catalog *c, const wall *w);
/* sd per metric, and the reasons for widening it (their number is returned). `reasons` may be NULL.
 */
int predict_sd(const catalog *c, const wall *w, double sd[METRIC_COUNT],
               const char *reasons[PREDICT_MAX_REASONS]);
/* The same in parts, for the sweep: bit i of the mask is sound_outside i; a wall's mask is the
 * union of its parts'. */
unsigned predict_outside_face(const catalog *c, const face *f);
unsigned predict_outside_core(const catalog *c, const wall *w);
void predict_sd_of(const catalog *c, sound_family family, unsigned outside,
                   double sd[METRIC_COUNT]);

#endif
