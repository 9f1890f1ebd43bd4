/* From a wall to its predicted sound insulation: the only part of acoustics that knows walls. */
#ifndef ACOUSTICS_PREDICT_H
#define ACOUSTICS_PREDICT_H

#include "acoustics/model.h"
#include "acoustics/rating.h"
#include "wall/wall.h"

enum { PREDICT_MAX_REASONS = 12 };

typedef struct prediction {
  double tl_db[BANDS];
  ratings ratings;
  double exact[METRIC_COUNT];
  double sd[METRIC_COUNT];   /* of rating - (exact - 0.5) */
  sound_family family;
  int outside;               /* reasons why the wall lies outside the fitted range */
  const char *outside_reason[PREDICT_MAX_REASONS];
} prediction;

void predict_wall(const catalog *c, const wall *w, prediction *out);
/* The wall in the model's numbers. */
void predict_model(const catalog *c, const wall *w, model_wall *out);
sound_family predict_family(const catalog *c, const wall *w);
/* sd per metric and the reasons for widening it: depends on the wall only, cheap. `reasons` may be NULL. */
int predict_sd(const catalog *c, const wall *w, double sd[METRIC_COUNT], const char *reasons[PREDICT_MAX_REASONS]);

#endif
