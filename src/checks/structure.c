#include "checks/structure.h"

#include <math.h>

#include "base/units.h"

/* ---- rules of the trade ---- */

#define INCH UNITS_M_PER_IN

/* Sizes in the files are given to 0.1 mm, spacings by their nominal names. */
static const double size_slack_m = 0.5e-3;

static const struct {
  double board_m, load_pa, deflection, widest_m, tile_deflection;
} height_rules = {
    /* the composite table: 5/8 in board on both flanges, 5 psf, L/240, spacings up to 24 in */
    .board_m = 15.9e-3,     /* the boards of its specimens */
    .load_pa = 240,         /* 239.4, rounded as briefs round it */
    .deflection = 240,      /* L/240 */
    .widest_m = 24 * INCH,  /* its widest spacing */
    .tile_deflection = 360, /* ANSI A108.11, from memory */
};

static const char composite_source[] = "a maker's composite limiting heights: 25 gauge studs, one "
                                       "5/8 in Type X board upright on each side, L/240 at 5 psf";
static const char bare_steel_source[] = "deflection and moment of a simply supported stud; section "
                                        "properties of a steel framing association guide, 33 ksi";
static const char bare_wood_source[] =
    "deflection of a simply supported stud; sizes and E of common lumber, from memory";
static const char wood_limit_source[] = "IRC R602.3(5) and IBC 2308, from memory";

/* Load-bearing wood: the widest spacing under so many floors and a roof; 0 = not under so many. IRC
 * R602.3(5), IBC 2308, from memory. */
enum { TABLE_FLOORS = 3 };
static const struct bearing_row {
  double depth_m;
  double spacing_m[TABLE_FLOORS];
} bearing_table[] = {
    {89e-3, {24 * INCH, 16 * INCH, 0}},
    {140e-3, {24 * INCH, 24 * INCH, 16 * INCH}},
};
enum { BEARING_ROWS = sizeof bearing_table / sizeof bearing_table[0] };

static const struct {
  int bearing_mil, floors_unsaid, shear_mil, heavy_mil, frt_minutes;
  double bearing_flange_m, heavy_spacing_m, hole_bearing, hole;
} rules = {
    /* load-bearing steel: common practice, no source */
    .bearing_mil = 33,
    .bearing_flange_m = 41e-3, /* 1-5/8 in */
    .floors_unsaid = 1,        /* taken where a brief is silent: common practice, no source */
    .shear_mil = 33,           /* wood panels on steel: common practice, no source */
    /* heavy fastening on steel: common practice, no source */
    .heavy_mil = 30,
    .heavy_spacing_m = 16 * INCH,
    .frt_minutes = 120, /* treated wood in non-bearing walls up to 2 h: IBC 603.1, from memory */
    /* holes in wood studs, share of the depth: IRC R602.6, from memory */
    .hole_bearing = 0.40,
    .hole = 0.60,
};

static const frame *frame_of(const catalog *c, const wall *w) {
  return &c->frames[w->frame];
}

static bool fails(const char **why, const char *reason) {
  if (why) *why = reason;
  return false;
}

/* ---- limiting height ---- */

/* Simply supported under a uniform load `w` (N/m): midspan deflection 5 w h^4 / (384 EI) is at most
 * h / ratio. */
static double deflection_height(double ei_n_m2, double w_n_m, double ratio) {
  return cbrt(384 * ei_n_m2 / (5 * w_n_m * ratio));
}

static double moment_height(double moment_n_m, double w_n_m) {
  return sqrt(8 * moment_n_m / w_n_m);
}

typedef struct span {
  double height_m;
  bool by_moment;
} span;

static span weaker(double deflection_m, double moment_m) {
  return moment_m < deflection_m ? (span){moment_m, true} : (span){deflection_m, false};
}

static span bare_span(const frame *f, double w_n_m, double ratio) {
  double inertia = f->inertia_effective_m4 > 0 ? f->inertia_effective_m4 : f->inertia_m4;
  double by_deflection = deflection_height(f->modulus_pa * inertia, w_n_m, ratio);
  if (!(f->moment_n_m > 0)) return (span){by_deflection, false};
  return weaker(by_deflection, moment_height(f->moment_n_m, w_n_m));
}

/* The table gives heights, not strengths. Strong enough is what its row of the widest spacing
 * carries. */
static span composite_span(const frame *f, double w_n_m, double ratio) {
  double ei = f->modulus_pa * f->composite_inertia_m4,
         table_w = height_rules.load_pa * height_rules.widest_m;
  double table_m = deflection_height(ei, table_w, height_rules.deflection);
  double shown_n_m =
      f->composite_moment_n_m > 0 ? f->composite_moment_n_m : table_w * table_m * table_m / 8;
  return weaker(deflection_height(ei, w_n_m, ratio), moment_height(shown_n_m, w_n_m));
}

enum { LEAF_STIFFENS = 1, LEAF_TILED = 2 };

unsigned structure_height_key(const catalog *c, const face *f) {
  if (f->count == 0) return 0;
  const layer *room = &c->layers[f->layer[0]], *base = &c->layers[f->layer[f->count - 1]];
  bool stiffens =
      base->material == LAYER_GYPSUM && base->thickness_m > height_rules.board_m - size_slack_m;
  return (stiffens ? LEAF_STIFFENS : 0u) | (room->material == LAYER_CEMENT ? LEAF_TILED : 0u);
}

bool structure_bare(const catalog *c, const brief *b, const wall *w) {
  return frame_of(c, w)->layout != FRAME_SINGLE || wall_is_mounted(w) || b->top == TOP_CEILING;
}

/* Boards help only where they are screwed straight to both flanges over the full height. */
static bool acts_composite(const catalog *c, const brief *b, const wall *w) {
  if (structure_bare(c, b, w)) return false;
  unsigned both =
      structure_height_key(c, &w->side[SIDE_A]) & structure_height_key(c, &w->side[SIDE_B]);
  return (both & LEAF_STIFFENS) != 0;
}

/* The tabulated row that a stud is at least as good as: its own, or that of a lighter stud of its
 * depth. NULL when none is. */
static const frame *composite_row(const catalog *c, const frame *f) {
  const frame *best = NULL;
  if (f->material != FRAME_STEEL) return NULL;
  for (size_t i = 0; i < c->frame_count; i++) {
    const frame *o = &c->frames[i];
    bool lighter = o->material == FRAME_STEEL && o->layout == FRAME_SINGLE && o->mil <= f->mil &&
                   o->composite_inertia_m4 > 0;
    bool same_depth = fabs(o->stud_depth_m - f->stud_depth_m) < size_slack_m;
    if (lighter && same_depth && (!best || o->composite_inertia_m4 > best->composite_inertia_m4))
      best = o;
  }
  return best;
}

static const char *height_basis(arena *a, const brief *b, const wall *w, const frame *f,
                                bool composite, double ratio) {
  if (!a) return NULL;
  const char *stud = composite ? "composite, 5/8 in gypsum board on both flanges full height"
                     : f->layout == FRAME_DOUBLE    ? "each row by itself, bare studs"
                     : f->layout == FRAME_STAGGERED ? "each face's studs by themselves, bare"
                     : wall_is_mounted(w) ? "bare stud: a mounted leaf does not stiffen it"
                                          : "bare stud";
  const char *tile = ratio > b->deflection ? " behind tile" : "";
  return text_format(a, "%s, L/%s%s at %s Pa", stud, text_of(a, ratio, 0), tile,
                     text_of(a, b->lateral_pa, 0));
}

height_verdict structure_height(arena *a, const catalog *c, const brief *b, const wall *w) {
  const frame *f = frame_of(c, w);
  double load = b->lateral_pa * wall_spacing_m(w->spacing_mm), ratio = b->deflection;
  unsigned any =
      structure_height_key(c, &w->side[SIDE_A]) | structure_height_key(c, &w->side[SIDE_B]);
  if (any & LEAF_TILED) ratio = fmax(ratio, height_rules.tile_deflection);
  span s = bare_span(f, load, ratio);
  bool composite = false;
  const frame *row = acts_composite(c, b, w) ? composite_row(c, f) : NULL;
  if (row) {
    span with_boards = composite_span(row, load, ratio);
    composite = with_boards.height_m > s.height_m;
    if (composite) s = with_boards;
  }
  height_verdict v = {s.height_m, NULL, s.by_moment ? "moment" : "deflection", NULL};
  v.source = composite                    ? composite_source
             : f->material == FRAME_STEEL ? bare_steel_source
                                          : bare_wood_source;
  double cap =
      b->loadbearing && f->max_height_bearing_m > 0 ? f->max_height_bearing_m : f->max_height_m;
  if (cap > 0 && cap < v.limit_m) {
    v.limit_m = cap;
    v.governs = "prescriptive limit";
    v.source = wood_limit_source;
  }
  v.basis = height_basis(a, b, w, f, composite, ratio);
  return v;
}

/* ---- load-bearing ---- */

static int floors_above(const brief *b) {
  return b->floors_above < 0 ? rules.floors_unsaid : b->floors_above;
}

static double bearing_spacing_m(const frame *f, int floors) {
  double spacing = 0;
  for (int i = 0; i < BEARING_ROWS; i++) {
    if (f->stud_depth_m > bearing_table[i].depth_m - size_slack_m)
      spacing = bearing_table[i].spacing_m[floors];
  }
  return spacing;
}

bool structure_bearing_ok(const catalog *c, const brief *b, const wall *w, const char **why) {
  const frame *f = frame_of(c, w);
  if (!b->loadbearing) return true;
  if (!f->loadbearing) return fails(why, "The framing is not allowed to carry load.");
  if (f->material == FRAME_STEEL) {
    bool strong =
        f->mil >= rules.bearing_mil && f->flange_m >= rules.bearing_flange_m - size_slack_m;
    return strong || fails(why, "Load-bearing steel studs need 33 mil and flanges of 1-5/8 in.");
  }
  /* The table ends at two floors and a roof; beyond it no smaller stud will do than there, and an
   * engineer decides. */
  int floors = floors_above(b);
  double widest = bearing_spacing_m(f, floors < TABLE_FLOORS ? floors : TABLE_FLOORS - 1);
  if (!(widest > 0)) return fails(why, "Studs of this size do not carry so many floors.");
  if (wall_spacing_m(w->spacing_mm) <= widest + size_slack_m) return true;
  return fails(why, "Studs of this size must stand closer under so many floors.");
}

bool structure_shear_ok(const catalog *c, const brief *b, const wall *w, const char **why) {
  if (b->shear_side == CATALOG_NONE) return true;
  int s = b->shear_side;
  const face *on_studs = w->mount[s].mount == CATALOG_NONE ? &w->side[s] : &w->sheath[s];
  bool panel = on_studs->count > 0 && c->layers[on_studs->layer[on_studs->count - 1]].shear;
  if (!panel) return fails(why, "The shear side needs a wood structural panel on the studs.");
  const frame *f = frame_of(c, w);
  if (f->material == FRAME_STEEL && f->mil < rules.shear_mil)
    return fails(why, "A wood panel serves as shear on steel studs of 33 mil and heavier only.");
  return true;
}

/* ---- noncombustible ---- */

static bool face_noncombustible(const catalog *c, const face *f, bool treated_wood) {
  for (int i = 0; i < f->count; i++) {
    const layer *l = &c->layers[f->layer[i]];
    if (!l->noncombustible && !(treated_wood && l->frt)) return false;
  }
  return true;
}

bool structure_noncombustible_ok(const catalog *c, const brief *b, const wall *w,
                                 const char **why) {
  if (b->noncombustible == NONCOMBUSTIBLE_NO) return true;
  bool treated = b->noncombustible == NONCOMBUSTIBLE_FRT_OK && !b->loadbearing &&
                 b->fire_min <= rules.frt_minutes;
  const frame *f = frame_of(c, w);
  if (!f->noncombustible && !(treated && f->frt)) return fails(why, "The framing is combustible.");
  for (int s = 0; s < 2; s++) {
    bool ok = face_noncombustible(c, &w->side[s], treated) &&
              face_noncombustible(c, &w->sheath[s], treated) &&
              face_noncombustible(c, &w->inner[s], treated);
    if (!ok) return fails(why, "A board or membrane is combustible.");
  }
  for (int r = 0; r < f->rows; r++) {
    bool burns = w->fill[r] != CATALOG_NONE && c->fills[w->fill[r]].material == FILL_CELLULOSE;
    if (burns) return fails(why, "Cellulose fill is combustible.");
  }
  return true;
}

/* ---- sides ---- */

/* Whether cabinets may be screwed to the studs, whatever is between. */
static bool studs_hold_heavy(const catalog *c, const wall *w, const char **why) {
  const frame *f = frame_of(c, w);
  if (f->material != FRAME_STEEL) return true;
  if (f->mil < rules.heavy_mil)
    return fails(why, "Heavy fastening needs steel studs of 30 mil or heavier.");
  if (wall_spacing_m(w->spacing_mm) > rules.heavy_spacing_m + size_slack_m)
    return fails(why, "Heavy fastening needs steel studs at 406 mm (16 in) or closer.");
  return true;
}

bool structure_fastening_ok(const catalog *c, const brief *b, const wall *w, int side,
                            const char **why) {
  if (b->side[side].fastening != FASTENING_HEAVY) return true;
  if (w->mount[side].mount != CATALOG_NONE)
    return fails(why, "Heavy fastenings through a mounted leaf bridge its mount.");
  return studs_hold_heavy(c, w, why);
}

bool structure_studs_ok(const catalog *c, const brief *b, const wall *w, const char **why) {
  const frame *f = frame_of(c, w);
  if (f->material == FRAME_STEEL && f->mil < b->studs.mil)
    return fails(why, "The steel studs are thinner than the specified ones.");
  return !b->studs.fixtures || studs_hold_heavy(c, w, why);
}

static const layer *room_board(const catalog *c, const wall *w, int side) {
  return w->side[side].count > 0 ? &c->layers[w->side[side].layer[0]] : NULL;
}

bool structure_wet_ok(const catalog *c, const brief *b, const wall *w, int side, const char **why) {
  const layer *l = room_board(c, w, side);
  if (!b->side[side].wet || (l && l->moisture)) return true;
  return fails(why, "A wet side needs a moisture-resistant or cement board at the room.");
}

bool structure_abuse_ok(const catalog *c, const brief *b, const wall *w, int side,
                        const char **why) {
  const layer *l = room_board(c, w, side);
  /* Cement board stands in a wet room under tile, which takes the knocks. */
  bool tiled = b->side[side].wet && l && l->material == LAYER_CEMENT;
  if (!b->side[side].abuse || (l && l->abuse) || tiled) return true;
  return fails(why, "An abused side needs an abuse-resistant board at the room.");
}

/* ---- services ---- */

/* Room for a pipe that stands in a bay without touching the leaves, or the other row of a double
 * frame. */
static double riser_room_m(const catalog *c, const wall *w) {
  const frame *f = frame_of(c, w);
  if (f->layout != FRAME_DOUBLE) return f->row_depth_m;
  double gap = w->gap_mm * 1e-3 - face_thickness_m(c, &w->inner[SIDE_A]) -
               face_thickness_m(c, &w->inner[SIDE_B]);
  bool lined = w->inner[SIDE_A].count > 0 && w->inner[SIDE_B].count > 0;
  return lined ? f->row_depth_m : f->row_depth_m + fmax(0, gap);
}

static double hole_room_m(const brief *b, const frame *f) {
  if (f->material == FRAME_STEEL) return f->knockout_m;
  return f->stud_depth_m * (b->loadbearing ? rules.hole_bearing : rules.hole);
}

bool structure_services_ok(const catalog *c, const brief *b, const wall *w, const char **why) {
  if (b->riser_m > riser_room_m(c, w) + size_slack_m)
    return fails(why, "The riser does not fit between the leaves.");
  if (b->run_m > hole_room_m(b, frame_of(c, w)) + size_slack_m)
    return fails(why, "The run needs larger holes than the studs may have.");
  return true;
}

/* ---- cautions ---- */

typedef struct cautions {
  const char **out;
  int count;
} cautions;

static void say(cautions *k, bool when, const char *sentence) {
  if (when && k->count < STRUCTURE_MAX_CAUTIONS) k->out[k->count++] = sentence;
}

static void say_bearing(cautions *k, const brief *b, const frame *f) {
  if (!b->loadbearing) return;
  bool wood = f->material == FRAME_WOOD;
  say(k, !wood,
      "Load-bearing steel is always engineered: studs, tracks, bridging and connections.");
  say(k, wood && b->floors_above < 0,
      "The brief does not say how many floors the wall carries: one floor and a roof is assumed.");
  say(k, wood && floors_above(b) >= TABLE_FLOORS,
      "The prescriptive table ends at two floors and a roof: an engineer must size these studs.");
}

int structure_cautions(const catalog *c, const brief *b, const wall *w,
                       const char *out[STRUCTURE_MAX_CAUTIONS]) {
  const frame *f = frame_of(c, w);
  cautions k = {out, 0};
  bool heavy = false, light = false;
  for (int s = 0; s < 2; s++) {
    heavy = heavy || b->side[s].fastening == FASTENING_HEAVY;
    light = light || b->side[s].fastening == FASTENING_LIGHT;
  }
  say_bearing(&k, b, f);
  say(&k, b->shear_side != CATALOG_NONE,
      "A shear panel is checked for its presence only: nailing, chords and hold-downs are "
      "engineered.");
  say(&k, f->material == FRAME_STEEL && !acts_composite(c, b, w),
      "The limiting height holds with bridging at 1219 mm (48 in) or closer.");
  say(&k, f->section_estimated,
      "The strength of these studs is estimated from a tabulated neighbour: check the maker's "
      "table.");
  say(&k, heavy,
      "Heavy fastening needs backing in the wall; its length is in the takeoff, its place is for "
      "the drawings.");
  say(&k, light, "Light fastening: anchors up to 23 kg (50 lb) each.");
  say(&k, b->riser_m > 0,
      "Drains in a party wall are heard in both rooms: better a wall of their own.");
  return k.count;
}
