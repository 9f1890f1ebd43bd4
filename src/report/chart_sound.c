#include "report/chart_sound.h"

#include <math.h>

#include "report/view.h"

/* ---- contours ---- */

bool chart_contour(sound_metric metric, double value, int *first, double out_db[RATING_FIT_BANDS]) {
  if (metric == METRIC_OITC) return false;
  bool stc = metric == METRIC_STC;
  const double *shape = stc ? rating_stc_contour : rating_rw_contour;
  *first = stc ? RATING_STC_FIRST : RATING_RW_FIRST;
  for (int i = 0; i < RATING_FIT_BANDS; i++) out_db[i] = value + shape[i];
  return true;
}

chart_lack chart_lack_of(sound_metric metric, double value, const double tl_db[BANDS]) {
  chart_lack out = {0};
  double contour[RATING_FIT_BANDS];
  int first;
  if (!chart_contour(metric, value, &first, contour)) return out;
  /* Steps in which the standards take the curve: whole dB and tenths, half up. */
  double steps = metric == METRIC_STC ? 1 : 10;
  for (int i = 0; i < RATING_FIT_BANDS; i++) {
    double read = floor(tl_db[first + i] * steps + 0.5 + RATING_STEP_SLACK) / steps;
    double lack = contour[i] - read;
    if (lack <= 0) continue;
    out.sum += lack;
    if (lack <= out.most) continue;
    out.most = lack;
    out.most_band = first + i;
  }
  return out;
}

/* Rw+C and Rw+Ctr stand on the reference curve of Rw; C and Ctr are added after. */
static sound_metric fitted(sound_metric m) {
  return m == METRIC_STC || m == METRIC_OITC ? m : METRIC_RW;
}

static const char *contour_name(sound_metric m) {
  return m == METRIC_STC ? "contour" : "reference";
}

/* ---- words ---- */

static void put_number(text *t, double value, int decimals) {
  text_number(t, value, decimals);
}

static void put_curve_words(const assessment *x, text *t) {
  const double *tl = x->predicted.tl_db;
  int least = 0, most = 0;
  for (int i = 1; i < BANDS; i++) {
    if (tl[i] < tl[least]) least = i;
    if (tl[i] > tl[most]) most = i;
  }
  text_put(t, "Predicted transmission loss by third-octave band: from ");
  put_number(t, tl[least], 0);
  text_put(t, " dB at ");
  put_number(t, bands_hz[least], 0);
  text_put(t, " Hz to ");
  put_number(t, tl[most], 0);
  text_put(t, " dB at ");
  put_number(t, bands_hz[most], 0);
  text_put(t, " Hz; ");
  put_number(t, tl[BAND_125], 0);
  text_put(t, " dB at 125, ");
  put_number(t, tl[BAND_500], 0);
  text_put(t, " at 500 and ");
  put_number(t, tl[BAND_4000], 0);
  text_put(t, " at 4000 Hz.");
}

static void put_contour_words(const assessment *x, sound_metric metric, text *t) {
  sound_metric m = fitted(metric);
  int rating = rating_of(&x->predicted.ratings, m);
  if (m == METRIC_OITC) {
    text_putf(t, " OITC %d weighs the curve by a spectrum: it has no contour.", rating);
    return;
  }
  chart_lack lack = chart_lack_of(m, rating, x->predicted.tl_db);
  text_putf(t, " The %s of %s %d stands at %d dB at 500 Hz; ", contour_name(m),
            sound_metric_names[m], rating, rating);
  if (lack.sum <= 0) {
    text_put(t, "the curve lacks nothing of it.");
    return;
  }
  text_put(t, "the curve lacks ");
  put_number(t, lack.sum, 1);
  text_put(t, " dB of it in all (at most 32), most at ");
  put_number(t, bands_hz[lack.most_band], 0);
  text_put(t, " Hz, ");
  put_number(t, lack.most, 1);
  text_putf(t, " dB%s, the curve read in %s as in the standard.",
            m == METRIC_STC ? " (at most 8)" : "", m == METRIC_STC ? "whole dB" : "tenths");
}

/* What must be seen with the picture: whose uncertainty the band is. */
static const char *band_note(const report *r, const assessment *x, sound_metric m) {
  text t;
  text_init(&t, r->arena, 1000);
  text_put(&t, "Pale band: the curve moved up and down by ");
  text_number(&t, x->predicted.sd[m], 1);
  text_putf(&t, " dB, the standard deviation of the single number %s, not of each band.",
            sound_metric_names[m]);
  sound_metric f = fitted(m);
  int rating = rating_of(&x->predicted.ratings, f);
  chart_lack lack = chart_lack_of(f, rating, x->predicted.tl_db);
  if (lack.sum <= 0) return t.data;
  text_put(&t, " Hatched: what it lacks of the ");
  text_putf(&t, "%s of %s %d, ", contour_name(f), sound_metric_names[f], rating);
  text_number(&t, lack.sum, 1);
  text_put(&t, " dB in all; 32 may be lacking.");
  return t.data;
}

static void put_path_words(const report *r, text *t) {
  text_put(t, " Thin lines: what would pass through the cavity alone, through studs and mounts "
              "alone, and the laboratory's own limit of ");
  put_number(t, r->catalog->acoustics->ceiling_db, 1);
  text_put(t, " dB; their energies add up to the curve.");
}

const char *chart_sound_words(const report *r, const assessment *x, const chart_sound_options *o) {
  text t;
  text_init(&t, r->arena, 4000);
  put_curve_words(x, &t);
  put_contour_words(x, o->metric, &t);
  if (view_published(x, fitted(o->metric)))
    text_putf(&t,
              " The wall is published with %s %d: the answer stands on that, the curve is "
              "predicted all the same.",
              sound_metric_names[fitted(o->metric)], x->evidence.match->stc);
  text_putf(&t, " %s", band_note(r, x, o->metric));
  if (x->has_composite)
    text_putf(&t, " With the openings of the brief the whole comes to %s %d.",
              sound_metric_names[o->metric], rating_of(&x->composite, o->metric));
  if (o->paths) put_path_words(r, &t);
  return t.data;
}

/* ---- the picture ---- */

enum { MOST_CURVES = 8 };

/* A line with a label at its right end. */
typedef struct curve {
  const char *css_class, *name;
  chart_letter letter;
  const double *db; /* in the bands from `first` on */
  int first, count;
} curve;

typedef struct picture {
  chart chart;
  const assessment *x;
  const chart_sound_options *options;
  chart_frame frame;
  double foot;              /* of the chart, where the note begins */
  curve curve[MOST_CURVES]; /* the last is the prediction: drawn on top */
  int curves;
  double composite[BANDS], air[BANDS], bridge[BANDS], ceiling[BANDS];
  double contour[RATING_FIT_BANDS], proof[RATING_FIT_BANDS];
  bool has_contour;
} picture;

static void add_curve(picture *p, const char *css_class, chart_letter letter, const double *db,
                      int first, int count, const char *name) {
  p->curve[p->curves++] = (curve){css_class, name, letter, db, first, count};
}

static void add_paths(picture *p, const report *r) {
  const struct acoustics *k = r->catalog->acoustics;
  model_wall m;
  predict_model(r->catalog, k, &p->x->wall, &m);
  model_paths(&m, k, p->air, p->bridge);
  for (int i = 0; i < BANDS; i++) p->ceiling[i] = k->ceiling_db;
  add_curve(p, "c-path", CHART_SMALL, p->air, 0, BANDS, "through the cavity");
  if (isfinite(p->bridge[0]))
    add_curve(p, "c-path2", CHART_SMALL, p->bridge, 0, BANDS, "through the studs");
  add_curve(p, "c-path3", CHART_SMALL, p->ceiling, 0, BANDS, "laboratory limit");
}

static void add_contours(picture *p, const report *r) {
  sound_metric m = fitted(p->options->metric);
  int first, rating = rating_of(&p->x->predicted.ratings, m);
  p->has_contour = chart_contour(m, rating, &first, p->contour);
  if (!p->has_contour) return;
  bool published = view_published(p->x, m);
  bool same = published && p->x->evidence.match->stc == rating;
  const char *name = text_format(r->arena, same ? "published %s %d" : "%s %d %s",
                                 sound_metric_names[m], rating, contour_name(m));
  add_curve(p, "c-contour", CHART_PLAIN, p->contour, first, RATING_FIT_BANDS, name);
  if (!published || same) return;
  chart_contour(m, p->x->evidence.match->stc, &first, p->proof);
  name = text_format(r->arena, "published %s %d", sound_metric_names[m], p->x->evidence.match->stc);
  add_curve(p, "c-proof", CHART_PLAIN, p->proof, first, RATING_FIT_BANDS, name);
}

static void collect(picture *p, const report *r) {
  if (p->options->paths) add_paths(p, r);
  if (p->x->has_composite) {
    judge_composite(r->brief, &p->x->predicted, p->x->evidence.match, 0, p->composite);
    add_curve(p, "c-joint", CHART_PLAIN, p->composite, 0, BANDS, "with openings");
  }
  add_contours(p, r);
  add_curve(p, "c-curve", CHART_STRONG, p->x->predicted.tl_db, 0, BANDS, "predicted");
}

/* Paths may lie far above the curve: what is beyond this is not drawn. */
static const double above_db = 15;

static void set_frame(picture *p, chart_ticks *ticks) {
  double low = HUGE_VAL, high = -HUGE_VAL, sd = p->x->predicted.sd[p->options->metric];
  for (int i = 0; i < p->curves; i++) {
    const curve *k = &p->curve[i];
    if (k->letter == CHART_SMALL) continue; /* paths */
    for (int b = 0; b < k->count; b++) {
      low = fmin(low, k->db[b]);
      high = fmax(high, k->db[b]);
    }
  }
  if (p->options->paths) high += above_db;
  enum { GRID_DB = 10, MOST_TICKS = 20, LEFT = 40, NAMES = 138, TOP = 34, BELOW = 40 };
  chart_ticks_over((low - sd) / GRID_DB, (high + sd) / GRID_DB, MOST_TICKS, true, ticks);
  for (int i = 0; i < ticks->count; i++) ticks->value[i] *= GRID_DB;
  p->frame = (chart_frame){{0, BANDS - 1, LEFT + 8, CHART_WIDTH - NAMES},
                           {ticks->value[0], ticks->value[ticks->count - 1], p->foot - BELOW, TOP}};
}

static void draw_band(picture *p) {
  double xy[4 * BANDS], sd = p->x->predicted.sd[p->options->metric];
  const double *tl = p->x->predicted.tl_db;
  for (int i = 0; i < BANDS; i++) {
    int back = 2 * BANDS - 1 - i;
    xy[2 * i] = xy[2 * back] = chart_at(&p->frame.x, i);
    xy[2 * i + 1] = chart_at(&p->frame.y, tl[i] + sd);
    xy[2 * back + 1] = chart_at(&p->frame.y, tl[i] - sd);
  }
  svg_polygon(&p->chart.svg, xy, 2 * BANDS, "c-band");
}

/* A bar from curve to contour in each band where the curve lies below. */
static void draw_lacks(picture *p) {
  if (!p->has_contour) return;
  sound_metric m = fitted(p->options->metric);
  int first = m == METRIC_STC ? RATING_STC_FIRST : RATING_RW_FIRST;
  double width = 0.5 * (chart_at(&p->frame.x, 1) - chart_at(&p->frame.x, 0));
  svg *s = &p->chart.svg;
  for (int pass = 0; pass < 2; pass++) {
    svg_group(s, pass == 0 ? "c-lack" : NULL);
    for (int i = 0; i < RATING_FIT_BANDS; i++) {
      double tl = p->x->predicted.tl_db[first + i];
      if (tl >= p->contour[i]) continue;
      double top = chart_at(&p->frame.y, p->contour[i]), x = chart_at(&p->frame.x, first + i);
      if (pass == 1) svg_fill(s, "lean");
      svg_rect(s, x - width / 2, top, width, chart_at(&p->frame.y, tl) - top, NULL);
    }
    svg_group_end(s);
  }
}

static void draw_curve(picture *p, const curve *k) {
  double xy[2 * BANDS];
  for (int i = 0; i < k->count; i++) {
    xy[2 * i] = chart_at(&p->frame.x, k->first + i);
    xy[2 * i + 1] = chart_at(&p->frame.y, k->db[i]);
  }
  svg_polyline(&p->chart.svg, xy, k->count, k->css_class);
}

/* Right of the frame each curve has its name, with a line that leads to its end. */
static void draw_names(picture *p) {
  double y[MOST_CURVES], end[MOST_CURVES];
  const double pitch = chart_text_height(CHART_STRONG) + 2, gap = 22;
  double top = p->frame.y.to, bottom = p->frame.y.from, right = p->frame.x.to;
  for (int i = 0; i < p->curves; i++) {
    const curve *k = &p->curve[i];
    double at = chart_at(&p->frame.y, k->db[k->count - 1]);
    end[i] = y[i] = fmin(fmax(at, top), bottom);
  }
  chart_spread(y, p->curves, pitch, top, bottom);
  svg_group(&p->chart.svg, "c-lead");
  for (int i = 0; i < p->curves; i++) {
    const curve *k = &p->curve[i];
    double from = chart_at(&p->frame.x, k->first + k->count - 1);
    const double xy[] = {from + 3, end[i], right + 8, end[i], right + gap - 3, y[i]};
    svg_polyline(&p->chart.svg, xy, 3, NULL);
  }
  svg_group_end(&p->chart.svg);
  for (int i = 0; i < p->curves; i++) {
    const curve *k = &p->curve[i];
    double size = chart_letters[k->letter].size;
    chart_label(&p->chart, right + gap, y[i] + 0.35 * size, SVG_START, k->letter, k->name);
  }
}

static void draw_curves(picture *p) {
  svg *s = &p->chart.svg;
  svg_group_clipped(s, NULL, "frame");
  draw_band(p);
  draw_lacks(p);
  for (int i = 0; i < p->curves; i++) draw_curve(p, &p->curve[i]);
  svg_group_end(s);
  const double radius = 2.4;
  svg_group(s, "c-full");
  for (int i = 0; i < BANDS; i++)
    svg_circle(s, chart_at(&p->frame.x, i), chart_at(&p->frame.y, p->x->predicted.tl_db[i]), radius,
               NULL);
  svg_group_end(s);
}

static void define_frame(picture *p) {
  svg *s = &p->chart.svg;
  const double room = 4;
  svg_defs(s);
  svg_clip(s, "frame");
  svg_rect(s, p->frame.x.from - room, p->frame.y.to, p->frame.x.to - p->frame.x.from + 2 * room,
           p->frame.y.from - p->frame.y.to, NULL);
  svg_clip_end(s);
  svg_defs_end(s);
}

void chart_sound(const report *r, const char *id, const assessment *x, const chart_sound_options *o,
                 text *out) {
  const double height = 350;
  picture *p = arena_alloc(r->arena, sizeof *p);
  chart_ticks ticks;
  p->x = x;
  p->options = o;
  collect(p, r);
  const char *title = text_format(r->arena, "Transmission loss, %s %d",
                                  sound_metric_names[o->metric], rating_of(&x->ratings, o->metric));
  const char *note = band_note(r, x, o->metric);
  p->foot = height;
  chart_begin(&p->chart, r, id, title, chart_sound_words(r, x, o),
              height + chart_note_height(r, note) + CHART_EDGE, out);
  set_frame(p, &ticks);
  chart_patterns(&p->chart);
  define_frame(p);
  chart_axis_y(&p->chart, &p->frame, &ticks, "transmission loss, dB");
  chart_axis_bands(&p->chart, &p->frame);
  draw_curves(p);
  draw_names(p);
  chart_put_note(&p->chart, p->foot, note);
  chart_end(&p->chart);
}
