#include "acoustics/predict.h"

#include <math.h>

#include "base/units.h"

/* A leaf's loss never counts for more: constrained layers reach about this (docs/methods/sound.md).
 */
#define LOSS_MOST 0.3
/* Below this share of its cavity's depth a fill is a part fill (National Building Code of Canada
 * 2020, table 9.10.3.1.-A: "at least 90 %"). */
#define FULL_SHARE 0.9
/* Fitted boards: gypsum of 12.7 and 15.9 mm. */
#define FITTED_THIN_M       0.0126
#define FITTED_THICK_M      0.0160
#define REFERENCE_SPACING_M (16 * UNITS_M_PER_IN) /* of channel_compliance */

static const char *const outside_words[OUTSIDE_COUNT] = {
    [OUTSIDE_GAUGE] = "steel studs between 18 and 54 mil: few published ratings",
    [OUTSIDE_DEPTH] = "a stud depth that no fitted wall has",
    [OUTSIDE_SPACING] = "studs closer than 406 mm or wider than 610 mm: no fitted wall has them",
    [OUTSIDE_CLIP] = "isolation clips: no public rating to fit to",
    [OUTSIDE_DAMPED] = "damped boards or layers: no public rating to fit to",
    [OUTSIDE_LIMP] = "limp mass: no public rating to fit to",
    [OUTSIDE_LAYERS] = "three or more boards on a side",
    [OUTSIDE_BOARD] = "boards other than 12.7 and 15.9 mm gypsum",
    [OUTSIDE_PART_FILL] = "insulation that fills less than 90 % of the depth",
    [OUTSIDE_LIGHT_MOUNT] = "resilient mounts on light steel",
    [OUTSIDE_TRAPPED] = "a board under a mount or on the inner face of a row",
    [OUTSIDE_ROWS] = "a kind of double or staggered framing that no fitted wall has",
};

/* ---------------------------------------------------------------- leaves */

typedef struct stack {
  const layer *item[3 * WALL_MAX_LAYERS];
  int count;
} stack;

static void stack_add(stack *s, const catalog *c, const face *f) {
  for (int i = 0; i < f->count; i++) s->item[s->count++] = &c->layers[f->layer[i]];
}

/* Damped boards lend their loss by their share of the stiffness; a damping layer damps the boards
 * it touches. */
static double stack_loss(const struct acoustics *k, const stack *s, double bending) {
  double loss = k->leaf_loss;
  for (int i = 0; i < s->count; i++) {
    const layer *l = s->item[i];
    double touched = l->bending_n_m;
    if (l->material == LAYER_DAMPING) {
      if (i > 0) touched += s->item[i - 1]->bending_n_m;
      if (i + 1 < s->count) touched += s->item[i + 1]->bending_n_m;
    }
    if (bending > 0) loss += l->loss_factor * touched / bending;
  }
  return fmin(loss, fmax(LOSS_MOST, k->leaf_loss));
}

static model_leaf stack_leaf(const struct acoustics *k, const stack *s) {
  double heaviest = 0, sum = 0, stiff = 0, bending = 0;
  for (int i = 0; i < s->count; i++) {
    const layer *l = s->item[i];
    heaviest = fmax(heaviest, l->mass_kg_m2);
    sum += l->mass_kg_m2;
    bending += l->bending_n_m;
    if (l->coincidence_m_s > 0) {
      double critical = l->coincidence_m_s / l->thickness_m;
      stiff += l->mass_kg_m2 / (critical * critical);
    }
  }
  model_leaf out = {.mass_kg_m2 = heaviest + k->layer_share * (sum - heaviest),
                    .critical_hz = stiff > 0 ? sqrt(sum / stiff) : MODEL_LIMP_HZ,
                    .loss = stack_loss(k, s, bending),
                    .bending_n_m = bending};
  return out;
}

model_leaf predict_leaf(const catalog *c, const struct acoustics *k, const face *f) {
  stack s = {.count = 0};
  stack_add(&s, c, f);
  return stack_leaf(k, &s);
}

/* --------------------------------------------------------------- cavities */

static void add_gap(model_cavity *v, double depth_m, bool filled) {
  if (depth_m <= 0) return;
  if (v->gaps > 0 && v->gap[v->gaps - 1].filled == filled) {
    v->gap[v->gaps - 1].depth_m += depth_m;
    return;
  }
  v->gap[v->gaps++] = (model_gap){depth_m, filled};
}

/* One row: the batt stands in the middle of what it leaves empty, so that a wall and its mirror
 * image are one. */
static void add_row(const catalog *c, model_cavity *v, double depth_m, int fill_index) {
  double thick = fill_index == CATALOG_NONE ? 0 : fmin(c->fills[fill_index].thickness_m, depth_m);
  /* A nominal batt that fills the depth but for the tolerance of sizes is full. */
  if (thick >= FULL_SHARE * depth_m) thick = depth_m;
  double air = depth_m - thick;
  add_gap(v, air / 2, false);
  add_gap(v, thick, true);
  add_gap(v, air / 2, false);
}

static double mount_air(const catalog *c, const wall *w, int side) {
  const wall_mount *m = &w->mount[side];
  return m->mount == CATALOG_NONE ? 0 : c->mounts[m->mount].depth_m;
}

/* -------------------------------------------------------------- connection */

static double stud_c500(const struct acoustics *k, const frame *f) {
  if (f->material == FRAME_WOOD) return k->fastener_compliance;
  return k->fastener_compliance + model_stud_c500(k, f->stud_depth_m, f->steel_thickness_m);
}

static double mount_c500(const catalog *c, const struct acoustics *k, const wall *w, int side) {
  const frame *f = &c->frames[w->frame];
  double spring = k->channel_compliance * wall_spacing_m(w->spacing_mm) / REFERENCE_SPACING_M;
  if (f->material == FRAME_STEEL) spring *= k->channel_on_steel;
  if (c->mounts[w->mount[side].mount].clips) spring *= k->clip_compliance;
  return spring;
}

static double fill_loss(const struct acoustics *k, const wall *w) {
  return w->fill[0] == CATALOG_NONE && w->fill[1] == CATALOG_NONE ? 0 : k->fill_loss;
}

static void connect(const catalog *c, const struct acoustics *k, const wall *w, model_wall *out) {
  const frame *f = &c->frames[w->frame];
  double stud_m = wall_spacing_m(w->spacing_mm);
  double base = stud_c500(k, f) + (f->layout == FRAME_STAGGERED ? k->plate_compliance : 0);
  out->line_m = stud_m;
  out->fill_loss = fill_loss(k, w);
  for (int s = 0; s < 2; s++) {
    out->support_m[s] = stud_m;
    if (w->mount[s].mount != CATALOG_NONE)
      out->support_m[s] = wall_spacing_m(w->mount[s].spacing_mm);
  }
  out->bridge = f->layout == FRAME_DOUBLE ? BRIDGE_NONE : BRIDGE_LINE;
  out->c500_m2_n = base;
  for (int s = 0; s < 2; s++) {
    if (w->mount[s].mount == CATALOG_NONE) continue;
    out->line_m = out->support_m[s];
    out->c500_m2_n = base * stud_m / out->line_m + mount_c500(c, k, w, s);
  }
}

void predict_core(const catalog *c, const struct acoustics *k, const wall *w, model_wall *out) {
  const frame *f = &c->frames[w->frame];
  model_cavity *v = &out->cavity[0];
  *out = (model_wall){.leaves = 2};
  connect(c, k, w, out);
  add_gap(v, mount_air(c, w, SIDE_A), false);
  add_row(c, v, f->row_depth_m, w->fill[0]);
  if (f->layout == FRAME_DOUBLE) {
    add_gap(v, w->gap_mm * 1e-3, false);
    add_row(c, v, f->row_depth_m, w->fill[1]);
  }
  add_gap(v, mount_air(c, w, SIDE_B), false);
}

/* ------------------------------------------------------------ whole walls */

typedef struct chain {
  const catalog *catalog;
  const struct acoustics *k;
  model_wall *out;
} chain;

/* Closes the cavity under way with an inner leaf. `tied`: studs in that cavity are screwed to both
 * its leaves. */
static void chain_leaf(chain *ch, const face *f, bool tied) {
  model_wall *o = ch->out;
  o->tied[o->leaves - 1] = tied;
  o->leaf[o->leaves] = predict_leaf(ch->catalog, ch->k, f);
  o->leaves++;
}

static model_cavity *chain_cavity(chain *ch) {
  return &ch->out->cavity[ch->out->leaves - 1];
}

/* The outer leaf with the boards under it; a sheath under a mount stands apart, as a leaf of its
 * own. */
static model_leaf outer_leaf(const chain *ch, const wall *w, int side) {
  stack s = {.count = 0};
  stack_add(&s, ch->catalog, &w->side[side]);
  if (w->mount[side].mount == CATALOG_NONE) stack_add(&s, ch->catalog, &w->sheath[side]);
  return stack_leaf(ch->k, &s);
}

static bool trapped(const wall *w, int side) {
  return w->mount[side].mount != CATALOG_NONE && w->sheath[side].count > 0;
}

void predict_model(const catalog *c, const struct acoustics *k, const wall *w, model_wall *out) {
  const frame *f = &c->frames[w->frame];
  chain ch = {c, k, out};
  bool single = f->layout == FRAME_SINGLE;
  *out = (model_wall){.leaves = 1};
  connect(c, k, w, out);
  out->leaf[0] = outer_leaf(&ch, w, SIDE_A);
  add_gap(chain_cavity(&ch), mount_air(c, w, SIDE_A), false);
  if (trapped(w, SIDE_A)) chain_leaf(&ch, &w->sheath[SIDE_A], false);
  add_row(c, chain_cavity(&ch), f->row_depth_m, w->fill[0]);
  if (f->layout == FRAME_DOUBLE) {
    if (w->inner[SIDE_A].count > 0) chain_leaf(&ch, &w->inner[SIDE_A], true);
    double taken = face_thickness_m(c, &w->inner[SIDE_A]) + face_thickness_m(c, &w->inner[SIDE_B]);
    add_gap(chain_cavity(&ch), fmax(w->gap_mm * 1e-3 - taken, 1e-3), false);
    if (w->inner[SIDE_B].count > 0) chain_leaf(&ch, &w->inner[SIDE_B], false);
    add_row(c, chain_cavity(&ch), f->row_depth_m, w->fill[1]);
  }
  bool tie_last = f->layout == FRAME_DOUBLE ? w->inner[SIDE_B].count > 0
                                            : single && (trapped(w, SIDE_A) || trapped(w, SIDE_B));
  if (trapped(w, SIDE_B)) {
    chain_leaf(&ch, &w->sheath[SIDE_B], tie_last);
    tie_last = false;
  }
  add_gap(chain_cavity(&ch), mount_air(c, w, SIDE_B), false);
  out->tied[out->leaves - 1] = tie_last;
  out->leaf[out->leaves] = outer_leaf(&ch, w, SIDE_B);
  out->leaves++;
  for (int i = 0; i < out->leaves; i++) out->leaf[i].loss += out->fill_loss;
}

void predict_tl(const catalog *c, const struct acoustics *k, const wall *w, double tl_db[BANDS]) {
  model_wall m;
  predict_model(c, k, w, &m);
  model_tl(&m, k, tl_db);
}

sound_family predict_family(const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  bool wood = f->material == FRAME_WOOD;
  if (f->layout == FRAME_DOUBLE) return wood ? FAMILY_WOOD_DOUBLE : FAMILY_STEEL_DOUBLE;
  if (f->layout == FRAME_STAGGERED) return wood ? FAMILY_WOOD_STAGGERED : FAMILY_STEEL_STAGGERED;
  if (wall_is_mounted(w)) return wood ? FAMILY_WOOD_MOUNT : FAMILY_STEEL_MOUNT;
  if (wood) return FAMILY_WOOD;
  return f->mil <= 27 ? FAMILY_STEEL : FAMILY_STEEL_HEAVY;
}

/* ------------------------------------------------------- how sure it is */

static unsigned bit(sound_outside reason) {
  return 1u << reason;
}

unsigned predict_outside_face(const catalog *c, const face *f) {
  unsigned mask = face_boards(c, f) > 2 ? bit(OUTSIDE_LAYERS) : 0;
  for (int i = 0; i < f->count; i++) {
    const layer *l = &c->layers[f->layer[i]];
    if (l->loss_factor > 0) mask |= bit(OUTSIDE_DAMPED);
    if (l->material == LAYER_LIMP) mask |= bit(OUTSIDE_LIMP);
    if (l->membrane) continue;
    bool fitted = l->material == LAYER_GYPSUM && l->thickness_m > FITTED_THIN_M &&
                  l->thickness_m < FITTED_THICK_M;
    if (!fitted) mask |= bit(OUTSIDE_BOARD);
  }
  return mask;
}

static bool near(double x, double y) {
  return fabs(x - y) < 1e-3;
}

static unsigned outside_frame(const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  unsigned mask = 0;
  if (f->material == FRAME_STEEL) {
    bool light = f->mil <= 18;
    if (!light && f->mil != 54) mask |= bit(OUTSIDE_GAUGE);
    bool depth = near(f->stud_depth_m, 0.0921) ||
                 (light && (near(f->stud_depth_m, 0.0635) || near(f->stud_depth_m, 0.1524)));
    if (!depth) mask |= bit(OUTSIDE_DEPTH);
    if (light && wall_is_mounted(w)) mask |= bit(OUTSIDE_LIGHT_MOUNT);
    if (f->layout == FRAME_STAGGERED || (f->layout == FRAME_DOUBLE && f->mil != 54))
      mask |= bit(OUTSIDE_ROWS);
  } else if (!near(f->stud_depth_m, 0.0889)) {
    mask |= bit(OUTSIDE_DEPTH);
  }
  if (f->layout == FRAME_DOUBLE && w->gap_mm != 25) mask |= bit(OUTSIDE_ROWS);
  if (w->spacing_mm < 406 || w->spacing_mm > 610) mask |= bit(OUTSIDE_SPACING);
  return mask;
}

unsigned predict_outside_core(const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  unsigned mask = outside_frame(c, w);
  for (int r = 0; r < f->rows; r++) {
    if (w->fill[r] == CATALOG_NONE) continue;
    /* Published staggered walls have a batt of one stud's depth in the common plate's cavity. */
    double depth = f->layout == FRAME_STAGGERED ? f->stud_depth_m : f->row_depth_m;
    if (c->fills[w->fill[r]].thickness_m < FULL_SHARE * depth) mask |= bit(OUTSIDE_PART_FILL);
  }
  for (int s = 0; s < 2; s++) {
    const wall_mount *m = &w->mount[s];
    if (m->mount != CATALOG_NONE && c->mounts[m->mount].clips) mask |= bit(OUTSIDE_CLIP);
  }
  return mask;
}

void predict_sd_of(const catalog *c, sound_family family, unsigned outside,
                   double sd[METRIC_COUNT]) {
  const struct acoustics *k = c->acoustics;
  double square = k->sd[family] * k->sd[family];
  for (int i = 0; i < OUTSIDE_COUNT; i++) {
    if (outside & (1u << i)) square += k->outside_sd[i] * k->outside_sd[i];
  }
  for (int m = 0; m < METRIC_COUNT; m++)
    sd[m] = sqrt(square + k->metric_extra_sd[m] * k->metric_extra_sd[m]);
}

int predict_sd(const catalog *c, const wall *w, double sd[METRIC_COUNT],
               const char *reasons[PREDICT_MAX_REASONS]) {
  unsigned mask = predict_outside_core(c, w);
  int count = 0;
  for (int s = 0; s < 2; s++) {
    mask |= predict_outside_face(c, &w->side[s]) | predict_outside_face(c, &w->sheath[s]) |
            predict_outside_face(c, &w->inner[s]);
    if (trapped(w, s) || w->inner[s].count > 0) mask |= bit(OUTSIDE_TRAPPED);
  }
  predict_sd_of(c, predict_family(c, w), mask, sd);
  for (int i = 0; i < OUTSIDE_COUNT; i++) {
    if (!(mask & (1u << i))) continue;
    if (reasons) reasons[count] = outside_words[i];
    count++;
  }
  return count;
}

void predict_wall(const catalog *c, const wall *w, prediction *out) {
  *out = (prediction){.family = predict_family(c, w)};
  predict_tl(c, c->acoustics, w, out->tl_db);
  out->ratings = rating_all(out->tl_db);
  for (int m = 0; m < METRIC_COUNT; m++) out->exact[m] = rating_exact(out->tl_db, (sound_metric)m);
  out->outside = predict_sd(c, w, out->sd, out->outside_reason);
}
