#include "report/view.h"

#include <math.h>
#include <string.h>

#include "explain/ceiling.h"

/* --- what it is ------------------------------------------------------------------------------ */

static void add_part(view_parts *out, view_part part) {
  if (out->count < VIEW_MAX_PARTS) out->part[out->count++] = part;
}

/* "24 in" or "610 mm": nominal spacings are whole inches. */
static const char *spacing_words(const report *r, int spacing_mm) {
  if (r->units == UNITS_SI) return text_format(r->arena, "%d mm", spacing_mm);
  return text_format(r->arena, "%s in", text_of(r->arena, spacing_mm * 1e-3 / UNITS_M_PER_IN, 0));
}

/* Runs of equal layers, in the order of the room on side A: side B is written from its room, so it
 * is walked backwards. */
static void add_face(const report *r, view_parts *out, const char *where, const face *f,
                     bool backwards) {
  for (int i = 0; i < f->count;) {
    int at = backwards ? f->count - 1 - i : i;
    int index = f->layer[at], n = 1;
    while (i + n < f->count && f->layer[backwards ? at - n : at + n] == index) n++;
    const layer *l = &r->catalog->layers[index];
    const char *what = n == 1 ? l->name : text_format(r->arena, "%d x %s", n, l->name);
    add_part(out, (view_part){where, what, n * l->thickness_m, VIEW_LAYERS, index, n});
    i += n;
  }
}

static void add_mount(const report *r, view_parts *out, const wall *w, int side) {
  const wall_mount *m = &w->mount[side];
  if (m->mount == CATALOG_NONE) return;
  const mount *type = &r->catalog->mounts[m->mount];
  const char *what = text_format(r->arena, "%s at %s", type->name, spacing_words(r, m->spacing_mm));
  if (m->clip_spacing_mm > 0)
    what = text_format(r->arena, "%s, clips at %s", what, spacing_words(r, m->clip_spacing_mm));
  const char *where = side == SIDE_A ? "mount A" : "mount B";
  add_part(out, (view_part){where, what, type->depth_m, VIEW_MOUNT, m->mount, 1});
}

static void add_row(const report *r, view_parts *out, const wall *w, int row) {
  const frame *f = &r->catalog->frames[w->frame];
  const char *where = f->rows == 1 ? "frame" : row == 0 ? "row A" : "row B";
  int single = f->rows == 1 ? CATALOG_NONE : catalog_frame(r->catalog, f->stud);
  const char *name = single == CATALOG_NONE ? f->name : r->catalog->frames[single].name;
  const char *what =
      text_format(r->arena, "%s at %s on centre", name, spacing_words(r, w->spacing_mm));
  add_part(out, (view_part){where, what, f->row_depth_m, VIEW_ROW, w->frame, 1});
  int filled = w->fill[row];
  what = filled == CATALOG_NONE ? "none: the bays are empty" : r->catalog->fills[filled].name;
  add_part(out, (view_part){"fill", what, 0.0, VIEW_FILL, filled, 1});
}

void view_parts_of(const report *r, const wall *w, view_parts *out) {
  out->count = 0;
  add_face(r, out, "side A", &w->side[SIDE_A], false);
  add_mount(r, out, w, SIDE_A);
  add_face(r, out, "on studs A", &w->sheath[SIDE_A], false);
  add_row(r, out, w, 0);
  if (r->catalog->frames[w->frame].rows > 1) {
    add_face(r, out, "inner A", &w->inner[SIDE_A], true);
    add_part(out, (view_part){"gap", "air between the rows, nothing across", w->gap_mm * 1e-3,
                              VIEW_GAP, CATALOG_NONE, 1});
    add_face(r, out, "inner B", &w->inner[SIDE_B], false);
    add_row(r, out, w, 1);
  }
  add_face(r, out, "on studs B", &w->sheath[SIDE_B], true);
  add_mount(r, out, w, SIDE_B);
  add_face(r, out, "side B", &w->side[SIDE_B], true);
}

/* --- money ----------------------------------------------------------------------------------- */

view_cost view_cost_of(const report *r, const assessment *x) {
  view_cost v = {0};
  v.load_kg_m = x->mass_kg_m2 * r->brief->height_m;
  v.costed = r->prices != NULL && !x->takeoff.missing && x->cost.area_m2 > 0.0;
  if (!v.costed) return v;
  double total = (double)x->cost.total_cents / 100.0;
  v.per_m2 = total / x->cost.area_m2;
  v.per_ft2 = v.per_m2 * UNITS_M2_PER_FT2;
  v.per_m = total / r->brief->length_m;
  v.per_ft = v.per_m * UNITS_M_PER_FT;
  v.hours_per_m2 = x->cost.hours / x->cost.area_m2;
  v.hours_per_ft2 = v.hours_per_m2 * UNITS_M2_PER_FT2;
  v.floor_per_m2 = (double)x->cost.floor_value_cents / 100.0 / x->cost.area_m2;
  return v;
}

view_quantity view_quantity_of(const report *r, const cost_line *l) {
  view_quantity q = {l->quantity, l->rate, l->unit};
  double in_si = 1.0;
  if (r->units == UNITS_SI) return q;
  if (strcmp(l->unit, "m2") == 0) {
    in_si = UNITS_M2_PER_FT2;
    q.unit = "ft2";
  } else if (strcmp(l->unit, "m") == 0) {
    in_si = UNITS_M_PER_FT;
    q.unit = "ft";
  }
  q.quantity /= in_si;
  q.rate *= in_si;
  return q;
}

const char *view_item(const report *r, const cost_line *l) {
  return l->item == CATALOG_NONE ? l->name : r->prices->items[l->item].code;
}

const char *view_line_kind(const cost_line *l) {
  static const char *const kinds[] = {"material", "labour", "markup"};
  return kinds[l->kind];
}

long long view_in_cents(double amount) {
  double minor = amount * 100.0;
  return (long long)(minor < 0.0 ? minor - 0.5 : minor + 0.5);
}

const char *view_cents(const report *r, long long cents) {
  text t;
  text_init(&t, r->arena, 64);
  text_cents(&t, cents, true);
  return t.data;
}

const char *view_area(const report *r) {
  return r->units == UNITS_US ? "ft2" : "m2";
}

double view_per_area(const report *r, double per_m2) {
  return r->units == UNITS_US ? per_m2 * UNITS_M2_PER_FT2 : per_m2;
}

const char *view_money(const report *r, double amount, const char *per) {
  text t;
  text_init(&t, r->arena, 200);
  text_cents(&t, view_in_cents(amount), true);
  text_putf(&t, " %s", r->prices != NULL ? r->prices->currency : "");
  if (per != NULL) text_putf(&t, " per %s", per);
  return t.data;
}

void view_count(text *out, long long count) {
  if (count >= 1000) {
    view_count(out, count / 1000);
    text_putf(out, ",%03d", (int)(count % 1000));
  } else
    text_putf(out, "%d", (int)count);
}

/* --- sound ----------------------------------------------------------------------------------- */

const char *view_target(const report *r, const target *t) {
  text out;
  text_init(&out, r->arena, 300);
  text_putf(&out, "%s ", sound_metric_names[t->metric]);
  text_number(&out, t->value, 1);
  if (t->margin > 0.0) {
    text_put(&out, " + ");
    text_number(&out, t->margin, 1);
    text_put(&out, " margin");
  }
  if (t->basis == BASIS_FIELD) {
    text_put(&out, " in the field (+ ");
    text_number(&out, r->brief->field_mean, 1);
    text_put(&out, " in the laboratory)");
  } else
    text_put(&out, " in the laboratory");
  if (t->composite) text_put(&out, ", openings included");
  if (t->evidence == EVIDENCE_PUBLISHED) {
    text_put(&out, ", published ratings only");
    return out.data;
  }
  text_putf(&out, ", %s %% sure", text_of(r->arena, 100.0 * t->confidence, 0));
  return out.data;
}

const char *view_rests_on(const assessment *x) {
  const wall_row *match = x->evidence.match;
  if (match == NULL) return "predicted";
  return match->tested != NULL ? "test_report" : "code_table";
}

const char *view_fire_rests_on(const report *r, const assessment *x) {
  if (x->fire.minutes == 0) return NULL;
  for (size_t i = 0; i < r->catalog->fire_count && x->fire.row_id != NULL; i++) {
    const wall_row *row = &r->catalog->fire[i];
    if (row->code == CODE_NONE && text_equal(row->id, x->fire.row_id)) return "listing";
  }
  return "code_table";
}

double view_lead_weeks(const report *r, const assessment *x, const char **item) {
  double most = 0;
  *item = NULL;
  for (int i = 0; i < x->takeoff.count; i++) {
    int at = x->takeoff.line[i].item;
    if (at == CATALOG_NONE || !(r->prices->items[at].lead_weeks > most)) continue;
    most = r->prices->items[at].lead_weeks;
    *item = r->prices->items[at].name;
  }
  return most;
}

bool view_published(const assessment *x, sound_metric metric) {
  return x->evidence.match != NULL && metric == METRIC_STC;
}

double view_usual_confidence(void) {
  enum { USUAL_PERCENT = 80 }; /* the brief's default */
  return USUAL_PERCENT / 100.0;
}

double view_confidence(const report *r) {
  return r->brief->target_count > 0 ? r->brief->targets[0].confidence : view_usual_confidence();
}

const char *view_ratings(const report *r, const ratings *v) {
  return text_format(r->arena, "STC %d, Rw %d (C %d, Ctr %d), OITC %d", v->stc, v->rw, v->c, v->ctr,
                     v->oitc);
}

const char *view_sureness(const report *r, double probability) {
  const double last_bits = 1e-9;
  return text_of(r->arena, floor(100.0 * probability + last_bits), 0);
}

int view_assured(const report *r, const assessment *x, sound_metric metric, double confidence) {
  int printed = rating_of(&x->ratings, metric);
  if (view_published(x, metric)) return printed;
  int least = printed - 30; /* beyond any standard deviation of the model */
  for (int value = printed; value > least; value--) {
    target t = {.metric = metric, .value = value, .basis = BASIS_LAB, .confidence = confidence};
    double probability = 0.0;
    if (judge_passes(&t, r->brief->field_mean, r->brief->field_sd, x->exact[metric], printed,
                     x->sd[metric], false, confidence, &probability))
      return value;
  }
  return least;
}

/* --- words ----------------------------------------------------------------------------------- */

const char *view_code(const report *r) {
  switch (r->brief->code) {
  case CODE_IBC:
    return "ibc";
  case CODE_NBC:
    return "nbc";
  case CODE_NONE:
    break;
  }
  return "none";
}

const char *view_solver_status(solver_status s) {
  switch (s) {
  case SOLVER_OPTIMAL:
    return "optimal";
  case SOLVER_INFEASIBLE:
    return "infeasible";
  case SOLVER_LIMIT:
  case SOLVER_FAILED:
    break; /* the API answers a failure itself */
  }
  return "limit";
}

const char *view_status(const explanation *e) {
  return view_solver_status(e->status);
}

const char *view_clause(const report *r, const char *sentence) {
  size_t n = strlen(sentence);
  return n > 0 && sentence[n - 1] == '.' ? text_copyn(r->arena, sentence, n - 1) : sentence;
}

/* With a capital letter and a full stop. */
static const char *as_sentence(const report *r, const char *words) {
  if (words[0] == '\0') return words;
  text t;
  text_init(&t, r->arena, 4000);
  bool small = words[0] >= 'a' && words[0] <= 'z';
  text_char(&t, small ? (char)(words[0] - 'a' + 'A') : words[0]);
  text_put(&t, view_clause(r, words + 1));
  text_char(&t, '.');
  return t.data;
}

static void add_caution(const char **caution, int *count, const char *words) {
  for (int i = 0; i < *count; i++)
    if (strcmp(caution[i], words) == 0) return;
  if (*count < VIEW_MAX_CAUTIONS) caution[(*count)++] = words;
}

static void add_ceiling(const report *r, const assessment *x, const char **caution, int *count) {
  ceiling_path path = ceiling_path_of(r->brief);
  if (!path.there) return;
  const char *batts = r->brief->ceiling_batts ? ", batts laid on it included" : "";
  const char *said = path.assumed ? ": mineral tile, assumed as the brief does not say" : "";
  add_caution(caution, count,
              text_format(r->arena,
                          "The wall stops at the ceiling: with the path over it (ceiling "
                          "attenuation class %s%s%s; common practice, no source) STC %d of the wall "
                          "comes to about %s.",
                          text_of(r->arena, path.class_all, 0), batts, said, x->ratings.stc,
                          text_of(r->arena, ceiling_capped(&path, x->ratings.stc), 1)));
  if (job_needs_deck(r->brief))
    add_caution(caution, count,
                "Fire-rated walls and walls for targets of 45 or more have to run to the deck: "
                "this one stops at the ceiling.");
}

int view_cautions(const report *r, const assessment *x, const char *caution[VIEW_MAX_CAUTIONS]) {
  /* From these ratings on, what surrounds a wall decides (common practice, no source). */
  enum { CARE_FROM = 50, FLANKING_FROM = 60 };
  int count = 0;
  for (int i = 0; i < x->caution_count; i++)
    add_caution(caution, &count, as_sentence(r, x->caution[i]));
  add_ceiling(r, x, caution, &count);
  int best = x->ratings.stc;
  for (int i = 0; i < r->brief->target_count; i++)
    if (r->brief->targets[i].value > best) best = (int)r->brief->targets[i].value;
  if (best >= CARE_FROM)
    add_caution(caution, &count,
                "From STC 50 on, workmanship decides: boxes never back to back in one bay and "
                "padded, the perimeter of "
                "every face sealed.");
  if (best >= FLANKING_FROM)
    add_caution(caution, &count,
                "From STC 60 on, floors and walls that run through hold the field rating near 50 "
                "to 55 whatever this "
                "wall is.");
  if (!view_published(x, METRIC_STC))
    add_caution(caution, &count, "The sound rating is a prediction, not a test.");
  add_caution(caution, &count,
              "Fire, height and load are screened only: local code, the listed fire design and "
              "licensed practice "
              "decide.");
  return count;
}
