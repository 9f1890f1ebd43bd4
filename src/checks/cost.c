#include "checks/cost.h"

#include <math.h>

#include "base/units.h"
#include "checks/structure.h"

/* ---- rules of the takeoff ----
 * Each with its source; prices, waste and hours are the price book's. */

#define INCH UNITS_M_PER_IN
#define FOOT UNITS_M_PER_FT

static const struct {
  double studs_added, studs_an_opening, stud_short_m, bridging_m, brace_m;
  int studs_a_corner, studs_a_tee, studs_an_end, jambs, headers, light_mil, jamb_mil;
  int plates, plates_bearing, tracks;
  double channel_ends_m, clip_ends_m, cut_below_m, cut_waste, opening_kept_m2, fireblock_m;
  double boxes_per_10m, finish_above_m, screws_m, sheet_m, course_m, handling;
  int finish_hidden, finish_tile;
} rules = {
    /* framing: common practice, no source */
    .studs_added = 0.10,   /* share for corners, tees and free ends that are not counted */
    .studs_an_opening = 3, /* two jambs, and the header cut from a stud */
    .studs_a_corner = 2,
    .studs_a_tee = 1,
    .studs_an_end = 1,
    .jambs = 2, /* a door that is counted */
    .headers = 1,
    .light_mil = 18, /* 25 gauge studs take jambs of 20 gauge drywall studs */
    .jamb_mil = 30,
    .stud_short_m = 0.010,   /* precut studs, made for three plates, stand with two */
    .bridging_m = 48 * INCH, /* steel that no boards hold: rows no further apart */
    .brace_m = 48 * INCH,    /* along a row of bridging: cross-braces between two rows of steel */
    .plates = 2,             /* wood, a row */
    .plates_bearing = 3,
    .tracks = 2, /* steel, a row */
    /* mounts: what first and last row leave of the height. Channel 50 and 150 mm: common practice,
     * no source; clips 75 and 150 mm: from memory: instructions for isolation clips */
    .channel_ends_m = 0.200,
    .clip_ends_m = 0.225,
    /* bays at 12 in are filled from the 16 in stock, and a quarter is lost: common practice, no
     * source */
    .cut_below_m = 14 * INCH,
    .cut_waste = 0.25,
    /* board is deducted for larger openings only, batts for all: common practice, no source */
    .opening_kept_m2 = 32 * UNITS_M2_PER_FT2,
    .fireblock_m = 10 * FOOT, /* of height, and of length between rows: IBC 718.2.1, from memory */
    .boxes_per_10m = 3,       /* a side, where the brief is silent: common practice, no source */
    /* finish: to so much above the ceiling, Level 1 beyond: ASTM C840 and GA-214, from memory;
     * Level 2 under tile: GA-214, from memory */
    .finish_above_m = 0.100,
    .finish_hidden = 1,
    .finish_tile = 2,
    .screws_m = 12 * INCH, /* at edges and in the field: ASTM C840, from memory */
    .sheet_m = 48 * INCH,
    /* sheets laid out: common practice, no source */
    .course_m = 12 * FOOT, /* lying courses are cut from sheets of this length */
    .handling = 0.05,      /* lost beside what the layout cuts off */
};

/* Lengths in inches are not exact in metres: 24 ft is 12 spaces of 24 in, not 13. */
static const double count_slack = 1e-6;

static const char bearing_steel_section[] = "05 40 00"; /* MasterFormat, from memory */

/* ---- what the brief makes of every wall ---- */

typedef struct extent {
  double length_m, height_m, area_m2;
  double board_m2, batt_m2; /* a face, a row: openings deducted */
} extent;

double cost_boxes_per_10m(const brief *b) {
  return b->boxes_given ? b->boxes_per_10m : rules.boxes_per_10m;
}

double cost_built_height_m(const brief *b) {
  if (b->top != TOP_CEILING) return b->height_m;
  double ceiling = fmax(b->ceiling_m[0], b->ceiling_m[1]);
  return ceiling > 0 ? fmin(b->height_m, ceiling + rules.finish_above_m) : b->height_m;
}

static extent extent_of(const brief *b) {
  extent e = {b->length_m, cost_built_height_m(b), 0, 0, 0};
  e.area_m2 = e.length_m * e.height_m;
  double large = 0, all = 0;
  for (int i = 0; i < b->opening_count; i++) {
    double area = b->openings[i].area_m2;
    all += area;
    if (area > rules.opening_kept_m2) large += area;
  }
  e.board_m2 = fmax(0, e.area_m2 - large);
  e.batt_m2 = fmax(0, e.area_m2 - all);
  return e;
}

static double labour_factor(const price_book *book, const extent *e) {
  double factor = 1;
  for (int i = 0; i < book->height_steps; i++) {
    if (e->height_m > book->height_step_m[i] + count_slack) factor = book->height_factor[i];
  }
  if (e->length_m < book->short_wall_m) factor *= book->short_wall_factor;
  return factor;
}

/* ---- a bag of items ----
 * Quantities are summed per item before anything is rounded, for the full takeoff and for the parts
 * alike. */

enum { BAG_MAX = 56, NET_WASTE = -1 };

typedef struct bag_entry {
  int item;
  const char *section;
  double bought, hours;
} bag_entry;

typedef struct bag {
  const price_book *book;
  double factor; /* on labour */
  const char *missing;
  int count;
  bag_entry entry[BAG_MAX];
} bag;

static void bag_start(bag *g, const price_book *book, const extent *e) {
  g->book = book;
  g->factor = labour_factor(book, e);
  g->missing = NULL;
  g->count = 0;
}

static bag_entry *entry_of(bag *g, int item, const char *section) {
  for (int i = 0; i < g->count; i++) {
    if (g->entry[i].item == item && g->entry[i].section == section) return &g->entry[i];
  }
  bag_entry *e = &g->entry[g->count++];
  *e = (bag_entry){item, section, 0, 0};
  return e;
}

/* `net` takeoff units, and `hours` of labour besides those of the item's own rate. */
static void put_all(bag *g, price_slot slot, double net, double waste, double hours,
                    const char *section) {
  if (!(net > 0)) return;
  if (slot.item == CATALOG_NONE) {
    if (!g->missing) g->missing = slot.code;
    return;
  }
  const price_item *item = &g->book->items[slot.item];
  bag_entry *e = entry_of(g, slot.item, section ? section : item->section);
  e->bought += net * (1 + (waste < 0 ? item->waste : waste));
  e->hours += (net * item->hours + hours) * g->factor;
}

static void put(bag *g, price_slot slot, double net) {
  put_all(g, slot, net, NET_WASTE, 0, NULL);
}

static void put_work(bag *g, work_item work, double net) {
  put(g, g->book->work[work], net);
}

/* ---- framing ---- */

static double stock_length(const stock_lengths *s, double needed_m) {
  for (int i = 0; i < s->count; i++) {
    if (s->metres[i] + rules.stud_short_m >= needed_m) return s->metres[i];
  }
  return needed_m; /* longer ones are made to length */
}

static int stud_rows(const frame *f) {
  /* Staggered: the spacing is that of each face, so each has its studs. */
  return f->layout == FRAME_STAGGERED ? 2 : f->rows;
}

static int runner_count(const brief *b, const frame *f) {
  if (f->material == FRAME_STEEL) return rules.tracks;
  return b->loadbearing ? rules.plates_bearing : rules.plates;
}

double cost_stud_length_m(const price_book *book, const catalog *c, const brief *b, const wall *w) {
  const frame *f = &c->frames[w->frame];
  double clear = cost_built_height_m(b);
  if (f->material == FRAME_WOOD) clear -= runner_count(b, f) * f->stud_width_m;
  return stock_length(&book->stock[f->material], clear);
}

static bool is_counted(const brief *b) {
  return b->corners >= 0 || b->tees >= 0 || b->free_ends >= 0 || b->doors >= 0;
}

static int counted(int n) {
  return n > 0 ? n : 0; /* what is not said beside other counts is none */
}

/* The frame whose studs are the jambs of a counted door: of light steel the same web in 30 mil,
 * where the catalog has it. */
static int jamb_frame(const catalog *c, int frame_index) {
  const frame *f = &c->frames[frame_index];
  if (f->material != FRAME_STEEL || f->mil > rules.light_mil) return frame_index;
  for (size_t i = 0; i < c->frame_count; i++) {
    const frame *o = &c->frames[i];
    bool heavier = o->material == FRAME_STEEL && o->layout == FRAME_SINGLE &&
                   o->mil == rules.jamb_mil &&
                   fabs(o->stud_depth_m - f->stud_depth_m) < count_slack;
    if (heavier) return (int)i;
  }
  return frame_index;
}

static void put_pieces(bag *g, price_slot stud, double pieces, double length, const char *section) {
  double hours = 0;
  if (stud.item != CATALOG_NONE) {
    double above = fmax(0, length - g->book->tall_stud_m - rules.stud_short_m);
    hours =
        pieces * (g->book->items[stud.item].hours_each + g->book->tall_stud_hours_per_m * above);
  }
  put_all(g, stud, pieces * length, NET_WASTE, hours, section);
}

/* Studs at the spacing from end to end, and what stands besides: counted, or a share. */
static void put_studs(bag *g, const brief *b, const extent *e, const catalog *c, const wall *w,
                      const char *section) {
  int rows = stud_rows(&c->frames[w->frame]);
  double length = cost_stud_length_m(g->book, c, b, w);
  double run = ceil(e->length_m / wall_spacing_m(w->spacing_mm) - count_slack) + 1;
  price_slot stud = g->book->studs[w->frame];
  if (!is_counted(b)) {
    run = run * (1 + rules.studs_added) + rules.studs_an_opening * b->opening_count;
    put_pieces(g, stud, rows * run, length, section);
    return;
  }
  int framed = b->doors > b->opening_count ? b->doors : b->opening_count;
  run += rules.studs_a_corner * counted(b->corners) + rules.studs_a_tee * counted(b->tees) +
         rules.studs_an_end * counted(b->free_ends) + rules.headers * framed;
  put_pieces(g, stud, rows * run, length, section);
  put_pieces(g, g->book->studs[jamb_frame(c, w->frame)], rows * rules.jambs * framed, length,
             section);
}

/* Rows across steel studs that no boards hold on both flanges. The rule looks at no leaf, so that
 * bridging belongs to the core. Two rows are also braced to one another, as those of the published
 * ratings are. */
static void put_bridging(bag *g, const brief *b, const extent *e, const catalog *c, const wall *w,
                         const char *section) {
  const frame *f = &c->frames[w->frame];
  bool bridged = f->material == FRAME_STEEL && (b->loadbearing || structure_bare(c, b, w));
  if (!bridged) return;
  double rows = ceil(e->height_m / rules.bridging_m - count_slack) - 1;
  put_all(g, g->book->work[WORK_BRIDGING], stud_rows(f) * rows * e->length_m, NET_WASTE, 0,
          section);
  if (f->layout != FRAME_DOUBLE) return;
  double along = ceil(e->length_m / rules.brace_m - count_slack);
  put_all(g, g->book->work[WORK_CROSS_BRACE], rows * along, NET_WASTE, 0, section);
}

static void put_frame(bag *g, const brief *b, const extent *e, const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  bool bearing_steel = b->loadbearing && f->material == FRAME_STEEL;
  const char *section = bearing_steel ? bearing_steel_section : NULL;
  put_studs(g, b, e, c, w, section);
  int below = runner_count(b, f);
  if (b->head == HEAD_SLIP) {
    below--;
    put_all(g, g->book->heads[w->frame], f->rows * e->length_m, NET_WASTE, 0, section);
  }
  put_all(g, g->book->runners[w->frame], f->rows * below * e->length_m, NET_WASTE, 0, section);
  put_bridging(g, b, e, c, w, section);
}

/* Plates close the bays of wood studs at floor and ceiling; more stands between, and between two
 * rows also along the wall. */
static void put_fireblocking(bag *g, const extent *e, const frame *f) {
  if (f->material != FRAME_WOOD) return;
  bool apart = f->layout != FRAME_SINGLE;
  double heights = ceil(e->height_m / rules.fireblock_m - count_slack) - 1;
  put_work(g, apart ? WORK_FIREBLOCK_BATT : WORK_FIREBLOCK_WOOD, heights * e->length_m);
  if (!apart) return;
  double lengths = ceil(e->length_m / rules.fireblock_m - count_slack) - 1;
  put_work(g, WORK_FIREBLOCK_BATT, lengths * e->height_m);
}

static void put_fills(bag *g, const extent *e, const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  double spacing = wall_spacing_m(w->spacing_mm);
  for (int r = 0; r < f->rows; r++) {
    if (w->fill[r] == CATALOG_NONE) continue;
    bool cut = c->fills[w->fill[r]].material != FILL_CELLULOSE && spacing < rules.cut_below_m;
    price_slot slot = g->book->fills[w->fill[r]][prices_batt_width(f->material, spacing)];
    put_all(g, slot, e->batt_m2, cut ? rules.cut_waste : NET_WASTE, 0, NULL);
  }
}

static void put_mount(bag *g, const extent *e, const catalog *c, const wall_mount *m) {
  if (m->mount == CATALOG_NONE) return;
  const mount *type = &c->mounts[m->mount];
  double ends = type->clips ? rules.clip_ends_m : rules.channel_ends_m;
  double rows = ceil(fmax(0, e->height_m - ends) / wall_spacing_m(m->spacing_mm) - count_slack) + 1;
  put(g, g->book->rails[m->mount], rows * e->length_m);
  if (!type->clips) return;
  /* Rows start half a clip spacing from the ends. */
  double along = ceil(e->length_m / wall_spacing_m(m->clip_spacing_mm) - count_slack);
  put(g, g->book->clips[m->mount], rows * along);
}

/* ---- what every face has ---- */

static void put_seals(bag *g, const brief *b, const extent *e) {
  double beads = 2 * 2 * (e->length_m + e->height_m); /* round each face, under the base layer */
  if (b->head == HEAD_SLIP) {
    double joint = 2 * e->length_m;
    if (b->fire_min > 0)
      put_work(g, WORK_HEAD_JOINT, joint);
    else
      beads += joint;
  }
  put_work(g, WORK_SEALANT, beads);
  put_work(g, WORK_BOX_PAD, 2 * cost_boxes_per_10m(b) * e->length_m / 10);
}

static void put_backing(bag *g, const brief *b, const extent *e, const frame *f) {
  work_item work = f->material == FRAME_STEEL ? WORK_BACKING_STEEL
                   : f->frt                   ? WORK_BACKING_FRT
                                              : WORK_BACKING_WOOD;
  for (int s = 0; s < 2; s++) {
    const room_side *side = &b->side[s];
    if (side->fastening != FASTENING_HEAVY) continue;
    bool stretch = side->fastening_length_m > 0;
    put_work(g, work, stretch ? fmin(side->fastening_length_m, e->length_m) : e->length_m);
  }
}

/* ---- boards ---- */

/* Screws of a layer per m2: two edges and the field of a sheet of full height on supports `spacing`
 * apart. */
static double screws_per_m2(const extent *e, double spacing) {
  double lines = 2 + (rules.sheet_m / spacing - 1);
  return lines * (e->height_m / rules.screws_m + 1) / (rules.sheet_m * e->height_m);
}

/* Upright sheets: the next length, on top of whole ones of the longest where a face is higher than
 * that. */
static double upright_m(const stock_lengths *s, double height_m) {
  double longest = s->metres[s->count - 1], whole = floor(height_m / longest + count_slack);
  double rest = height_m - whole * longest;
  for (int i = 0; i < s->count; i++) {
    if (rest <= count_slack) break;
    if (s->metres[i] + count_slack < rest) continue;
    return whole * longest + s->metres[i];
  }
  return whole * longest;
}

/* Lying sheets: whole courses of the width that wastes least, of those sold in the length that
 * courses are cut from. */
static double courses_m(const price_book *book, double height_m) {
  double least = HUGE_VAL;
  for (int i = 0; i < book->sheet_widths; i++) {
    const sheet_stock *s = &book->sheets[i];
    if (s->lengths.metres[s->lengths.count - 1] + count_slack < rules.course_m) continue;
    least = fmin(least, ceil(height_m / s->width_m - count_slack) * s->width_m);
  }
  return isfinite(least) ? least : height_m;
}

/* What is lost of a gypsum board, as a share of the face. Upright sheets are of the narrowest width:
 * their edges stand on studs. */
static double layout_waste(const price_book *book, const brief *b, const extent *e) {
  double cut = e->height_m;
  if (book->sheet_widths > 0)
    cut = b->boards == BOARDS_VERTICAL ? upright_m(&book->sheets[0].lengths, e->height_m)
                                       : courses_m(book, e->height_m);
  return cut / e->height_m * (1 + rules.handling) - 1;
}

static void put_face(bag *g, const brief *b, const extent *e, const catalog *c, const face *f,
                     double spacing) {
  if (f->count == 0) return;
  double screws = screws_per_m2(e, spacing) * e->board_m2;
  for (int i = 0; i < f->count; i++) {
    const layer *l = &c->layers[f->layer[i]];
    /* Other panels, and gypsum that is no face (shaft liner), have sheets of their own. */
    bool laid_out = b->boards != BOARDS_LUMP && l->material == LAYER_GYPSUM && l->face;
    put_all(g, g->book->layers[f->layer[i]], e->board_m2,
            laid_out ? layout_waste(g->book, b, e) : NET_WASTE, 0, NULL);
    if (!l->membrane) put_work(g, WORK_SCREW, screws);
  }
}

static void put_level(bag *g, int level, double area_m2) {
  if (level < 1) return;
  int highest = WORK_FINISH_5 - WORK_FINISH_1 + 1;
  put_work(g, (work_item)(WORK_FINISH_1 + (level < highest ? level : highest) - 1), area_m2);
}

/* Only the face layer is finished; base layers and wood panels are left as they are. */
static void put_finish(bag *g, const brief *b, const extent *e, const catalog *c, const wall *w,
                       int s) {
  const face *f = &w->side[s];
  if (f->count == 0) return;
  layer_material m = c->layers[f->layer[0]].material;
  if (m != LAYER_GYPSUM && m != LAYER_CEMENT) return;
  int level = b->side[s].finish_level;
  if (m == LAYER_CEMENT && level > rules.finish_tile) level = rules.finish_tile;
  int hidden = level < rules.finish_hidden ? level : rules.finish_hidden;
  double top = b->ceiling_m[s] > 0 ? b->ceiling_m[s] + rules.finish_above_m : e->height_m;
  double seen = fmin(1, top / e->height_m);
  put_level(g, level, e->board_m2 * seen);
  put_level(g, hidden, e->board_m2 * (1 - seen));
}

static double support_spacing_m(const wall *w, int s) {
  return wall_spacing_m(w->mount[s].mount == CATALOG_NONE ? w->spacing_mm : w->mount[s].spacing_mm);
}

/* ---- the two parts ---- */

static void fill_core(bag *g, const brief *b, const extent *e, const catalog *c, const wall *w) {
  const frame *f = &c->frames[w->frame];
  double stud_spacing = wall_spacing_m(w->spacing_mm);
  put_frame(g, b, e, c, w);
  put_fireblocking(g, e, f);
  for (int s = 0; s < 2; s++) put_mount(g, e, c, &w->mount[s]);
  put_fills(g, e, c, w);
  for (int s = 0; s < 2; s++) {
    put_face(g, b, e, c, &w->sheath[s], stud_spacing);
    put_face(g, b, e, c, &w->inner[s], stud_spacing);
  }
  put_seals(g, b, e);
  put_backing(g, b, e, f);
}

static void fill_leaves(bag *g, const brief *b, const extent *e, const catalog *c, const wall *w) {
  for (int s = 0; s < 2; s++) put_face(g, b, e, c, &w->side[s], support_spacing_m(w, s));
  for (int s = 0; s < 2; s++) put_finish(g, b, e, c, w, s);
}

/* ---- money ---- */

/* The little more than a half lifts amounts that are half a cent in decimals
 * but a hair less in binary. */
long long cost_cents(double amount) {
  return (long long)floor(amount * 100 + 0.5 + 1e-7);
}

static long long material_cents(const price_book *book, const bag_entry *e) {
  return cost_cents(e->bought * book->items[e->item].price);
}

static long long labour_cents(const price_book *book, const bag_entry *e) {
  return cost_cents(e->hours * book->rate[book->items[e->item].trade]);
}

static cost_parts bag_sum(const bag *g) {
  cost_parts sum = {0, 0, 0, g->missing != NULL};
  for (int i = 0; i < g->count; i++) {
    sum.material_cents += material_cents(g->book, &g->entry[i]);
    sum.labour_cents += labour_cents(g->book, &g->entry[i]);
    sum.hours += g->entry[i].hours;
  }
  return sum;
}

cost_parts cost_core(const price_book *book, const catalog *c, const brief *b, const wall *core) {
  extent e = extent_of(b);
  bag g;
  bag_start(&g, book, &e);
  fill_core(&g, b, &e, c, core);
  return bag_sum(&g);
}

cost_parts cost_leaves(const price_book *book, const catalog *c, const brief *b, const wall *w) {
  extent e = extent_of(b);
  bag g;
  bag_start(&g, book, &e);
  fill_leaves(&g, b, &e, c, w);
  return bag_sum(&g);
}

static int note_needs(const bag *g, cost_need *out) {
  int n = 0;
  for (int i = 0; i < g->count; i++)
    if (g->entry[i].bought > 0) out[n++] = (cost_need){g->entry[i].item, g->entry[i].bought};
  return n;
}

cost_parts cost_core_needs(const price_book *book, const catalog *c, const brief *b,
                           const wall *core, cost_need need[COST_MAX_NEEDS], int *count) {
  extent e = extent_of(b);
  bag g;
  bag_start(&g, book, &e);
  fill_core(&g, b, &e, c, core);
  *count = note_needs(&g, need);
  return bag_sum(&g);
}

cost_parts cost_leaves_needs(const price_book *book, const catalog *c, const brief *b,
                             const wall *w, cost_need need[COST_MAX_NEEDS], int *count) {
  extent e = extent_of(b);
  bag g;
  bag_start(&g, book, &e);
  fill_leaves(&g, b, &e, c, w);
  *count = note_needs(&g, need);
  return bag_sum(&g);
}

static long long tax_cents(const price_book *book, long long material) {
  return cost_cents((double)material * book->sales_tax / 100);
}

static long long profit_cents(const price_book *book, long long base) {
  return cost_cents((double)base * book->overhead_profit / 100);
}

cost_total cost_sum(const price_book *book, const brief *b, double thickness_m, cost_parts core,
                    cost_parts leaves) {
  cost_total t;
  t.material_cents = core.material_cents + leaves.material_cents;
  t.labour_cents = core.labour_cents + leaves.labour_cents;
  long long direct = t.material_cents + t.labour_cents, tax = tax_cents(book, t.material_cents);
  t.markup_cents = tax + profit_cents(book, direct + tax);
  t.total_cents = direct + t.markup_cents;
  t.floor_value_cents = cost_cents(thickness_m * b->length_m * b->floor_area_value_per_m2);
  t.area_m2 = b->length_m * cost_built_height_m(b);
  t.hours = core.hours + leaves.hours;
  return t;
}

/* ---- the full takeoff ---- */

static void add_line(takeoff *out, cost_line line) {
  out->line[out->count++] = line;
}

static void add_lines(takeoff *out, const bag *g) {
  for (int i = 0; i < g->count; i++) {
    const bag_entry *e = &g->entry[i];
    const price_item *item = &g->book->items[e->item];
    cost_line line = {e->item,     item->name,
                      e->section,  LINE_MATERIAL,
                      e->bought,   price_unit_names[item->unit],
                      item->price, material_cents(g->book, e)};
    if (item->price > 0) add_line(out, line);
    line.kind = LINE_LABOUR;
    line.quantity = e->hours;
    line.unit = "h";
    line.rate = g->book->rate[item->trade];
    line.cents = labour_cents(g->book, e);
    if (e->hours > 0) add_line(out, line);
  }
  if (g->missing && !out->missing) {
    out->missing = 1;
    out->missing_code = g->missing;
  }
}

static void add_markups(takeoff *out, const price_book *book, const cost_total *t) {
  long long tax = tax_cents(book, t->material_cents),
            base = t->material_cents + t->labour_cents + tax;
  cost_line line = {
      CATALOG_NONE, "sales tax on material", "", LINE_MARKUP, (double)t->material_cents / 100,
      "",           book->sales_tax,         tax};
  add_line(out, line);
  line.name = "overhead and profit";
  line.quantity = (double)base / 100;
  line.rate = book->overhead_profit;
  line.cents = profit_cents(book, base);
  add_line(out, line);
}

void cost_takeoff(const price_book *book, const catalog *c, const brief *b, const wall *w,
                  takeoff *out, cost_total *total) {
  extent e = extent_of(b);
  bag g;
  out->count = 0;
  out->missing = 0;
  out->missing_code = NULL;
  bag_start(&g, book, &e);
  fill_core(&g, b, &e, c, w);
  cost_parts core = bag_sum(&g);
  add_lines(out, &g);
  bag_start(&g, book, &e);
  fill_leaves(&g, b, &e, c, w);
  cost_parts leaves = bag_sum(&g);
  add_lines(out, &g);
  *total = cost_sum(book, b, wall_thickness_m(c, w), core, leaves);
  out->hours = total->hours;
  add_markups(out, book, total);
}
