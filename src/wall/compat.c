#include "wall/compat.h"

/* Limits of the trade that the rules below use; the rule that names one carries its source. */
static const struct {
  double batt_squeezed; /* batt over cavity: above it stone wool and cellulose are refused */
  double batt_refused;  /* batt over cavity: above it all are */
  double batt_least;    /* batt over cavity: below it the batt slumps */
  double batt_wood;     /* batt over stud depth in wood: thinner ones come in widths of steel studs */
  int boards;           /* ordinary build: layers of board a side */
  int boards_differ;    /* ordinary build: by how many they may differ between the sides */
  int kinds;            /* ordinary build: kinds of board in a wall */
  int channel_boards;   /* layers a resilient channel carries */
  int light_steel_mil;  /* studs below it give as much as a channel */
  int mount_rows_mm;    /* rows closer than this are for leaves of three layers */
  int gap_mm;           /* rows of studs closer than this may touch */
} limits = {.batt_squeezed = 1.10,
            .batt_refused = 1.25,
            .batt_least = 0.5,
            .batt_wood = 0.8,
            .boards = 2,
            .boards_differ = 1,
            .kinds = 2,
            .channel_boards = 2,
            .light_steel_mil = 27,
            .mount_rows_mm = 406,
            .gap_mm = 13};

static const double size_slack_m = 0.5e-4; /* sizes in the files are given to 0.1 mm */

typedef enum rule {
  NO_BOARD,
  DAMPING_LOOSE,
  BATT_TOO_THICK,
  BATT_SQUEEZED,
  FILL_ROWS,
  STUD_SPACING,
  MOUNT_SPACING,
  CLIP_SPACING,
  MOUNT_BOTH,
  SHEATH_BARE,
  INNER_SINGLE,
  INNER_FULL,
  GAP_SINGLE,
  GAP_MISSING,
  FACE_BOARD,
  WOOD_FACE,
  FIBREBOARD_COVER,
  CEMENT_BEHIND,
  LIMP_MEMBRANE,
  MEMBRANES,
  DAMPING_MIXED,
  LAYERS,
  MIXED_LEAF,
  SPECIAL_BOARD,
  BOARD_SPACING,
  BOARD_SINGLE,
  STEEL_GAUGE,
  CHANNEL_LOAD,
  CLIP_LOAD,
  SPECIAL_FRAME,
  SPECIAL_FILL,
  BATT_LOOSE,
  BATT_STEEL_WIDTH,
  BATT_PRESSED,
  CELLULOSE_STEEL,
  ROWS_DIFFER,
  MOUNT_LIGHT_STEEL,
  MOUNT_DOUBLE,
  MOUNT_STAGGERED,
  MOUNT_ROWS,
  TRAPPED_LAYER,
  INNER_ONE,
  INNER_BOTH,
  GAP_NARROW,
  BALANCE,
  KINDS,
  FACES_DIFFER,
  THICKNESS_DIFFER,
  RULES
} rule;

#define COMMON    "common practice, no source"
#define NBC_NOTES "NBC 2020, notes to Table 9.10.3.1.-A"

static const compat_finding rules[RULES] = {
    [NO_BOARD] = {COMPAT_ILLEGAL, "no-board", "A leaf needs a board: a membrane alone is no face.",
                  COMMON},
    [DAMPING_LOOSE] = {COMPAT_ILLEGAL, "damping-between-boards",
                       "A damping layer works between two boards and needs one on both its faces.",
                       COMMON},
    [BATT_TOO_THICK] = {COMPAT_ILLEGAL, "batt-fit",
                        "The batt is more than a quarter thicker than the cavity.", COMMON},
    [BATT_SQUEEZED] = {COMPAT_ILLEGAL, "batt-squeezed",
                       "The batt is over 10 % thicker than the cavity and so stiff that it pushes "
                       "the boards off.",
                       COMMON},
    [FILL_ROWS] = {COMPAT_ILLEGAL, "fill-rows",
                   "A frame of one row has one cavity and takes one fill.", COMMON},
    [STUD_SPACING] = {COMPAT_ILLEGAL, "stud-spacing",
                      "Boards meet on studs at 305, 406 or 610 mm (12, 16, 24 in) only.", COMMON},
    [MOUNT_SPACING] = {COMPAT_ILLEGAL, "mount-spacing",
                       "Rows of a mount stand at 305, 406 or 610 mm (12, 16, 24 in).", COMMON},
    [CLIP_SPACING] = {COMPAT_ILLEGAL, "clip-spacing",
                      "Clips stand no further apart along a row than 1219 mm (48 in).",
                      "from memory: instructions for isolation clips"},
    [MOUNT_BOTH] = {COMPAT_ILLEGAL, "mount-both-sides",
                    "A mount belongs on one side only: a second one leaves the studs without a "
                    "board to hold them.",
                    COMMON},
    [SHEATH_BARE] = {COMPAT_ILLEGAL, "sheath-without-mount",
                     "A sheath is a board on the stud under a mount; there is no mount.", COMMON},
    [INNER_SINGLE] = {COMPAT_ILLEGAL, "inner-single", "Only a frame of two rows has inner faces.",
                      COMMON},
    [INNER_FULL] = {COMPAT_ILLEGAL, "inner-full",
                    "The boards on the inner faces fill the gap between the rows.", COMMON},
    [GAP_SINGLE] = {COMPAT_ILLEGAL, "gap-single", "Only a frame of two rows has a gap.", COMMON},
    [GAP_MISSING] = {COMPAT_ILLEGAL, "gap-missing", "Two rows need a gap between them.", NBC_NOTES},
    [FACE_BOARD] = {COMPAT_UNUSUAL, "face-board",
                    "The face at the room is no finish board: membranes, fibreboard and shaft "
                    "liner stay behind boards.",
                    COMMON},
    [WOOD_FACE] = {COMPAT_UNUSUAL, "wood-face",
                   "A wood panel faces the room: only where the brief allows it.", COMMON},
    [FIBREBOARD_COVER] = {COMPAT_UNUSUAL, "fibreboard-cover",
                          "Fibreboard goes under gypsum board only.", COMMON},
    [CEMENT_BEHIND] = {COMPAT_UNUSUAL, "cement-behind",
                       "Cement board carries tile at the face; behind other boards it only costs.",
                       COMMON},
    [LIMP_MEMBRANE] = {COMPAT_UNUSUAL, "limp-membrane",
                       "Loaded vinyl in a leaf is not commonly bid.", COMMON},
    [MEMBRANES] = {COMPAT_UNUSUAL, "membranes", "More than one membrane in a leaf.", COMMON},
    [DAMPING_MIXED] = {COMPAT_UNUSUAL, "damping-mixed",
                       "The boards on both faces of the damping layer differ.", COMMON},
    [LAYERS] = {COMPAT_UNUSUAL, "layers", "More than two layers of board on a side.", COMMON},
    [MIXED_LEAF] =
        {COMPAT_UNUSUAL, "mixed-leaf",
         "The finish boards of a leaf differ, and neither a wet nor an abused face asks for it.",
         COMMON},
    [SPECIAL_BOARD] = {COMPAT_UNUSUAL, "special-board",
                       "A board of this wall is not stocked: a special order.", COMMON},
    [BOARD_SPACING] = {COMPAT_UNUSUAL, "board-spacing",
                       "A board of this leaf is too thin or too brittle for its supports' spacing.",
                       "from memory: ASTM C840; for cement board " COMMON},
    [BOARD_SINGLE] = {COMPAT_UNUSUAL, "board-single",
                      "This board is not used as a single layer over so wide a spacing.", COMMON},
    [STEEL_GAUGE] = {COMPAT_UNUSUAL, "steel-gauge",
                     "A board of this leaf needs heavier steel studs (cement board 30 mil).",
                     COMMON},
    [CHANNEL_LOAD] = {COMPAT_UNUSUAL, "channel-load",
                      "A resilient channel carries at most two layers of 5/8 in board.", COMMON},
    [CLIP_LOAD] = {COMPAT_UNUSUAL, "clip-load",
                   "The leaf weighs more a clip than about 16 kg: closer rows or clips.",
                   "from memory: instructions for isolation clips"},
    [SPECIAL_FRAME] = {COMPAT_UNUSUAL, "special-frame",
                       "The framing is not stocked: a special order.", COMMON},
    [SPECIAL_FILL] = {COMPAT_UNUSUAL, "special-fill", "The fill is not stocked: a special order.",
                      COMMON},
    [BATT_LOOSE] = {COMPAT_UNUSUAL, "batt-loose",
                    "The batt fills less than half of the cavity and may slump.", COMMON},
    [BATT_STEEL_WIDTH] = {COMPAT_UNUSUAL, "batt-steel-width",
                          "Batts much thinner than a wood stud come in the widths of steel studs.",
                          COMMON},
    [BATT_PRESSED] = {COMPAT_UNUSUAL, "batt-pressed",
                      "The glass batt is 10 to 25 % thicker than the cavity: it goes in pressed.",
                      COMMON},
    [CELLULOSE_STEEL] = {COMPAT_UNUSUAL, "cellulose-steel",
                         "Dense-packed cellulose is blown into wood framing only.", COMMON},
    [ROWS_DIFFER] = {COMPAT_UNUSUAL, "rows-differ", "The two rows take different fills.", COMMON},
    [MOUNT_LIGHT_STEEL] =
        {COMPAT_UNUSUAL, "mount-light-steel",
         "On steel studs under 27 mil, which give by themselves, a mount gains 0 to 2 points.",
         COMMON},
    [MOUNT_DOUBLE] = {COMPAT_UNUSUAL, "mount-double",
                      "On two separate rows a mount gains 0 to 2 points.", COMMON},
    [MOUNT_STAGGERED] = {COMPAT_FINE, "mount-staggered",
                         "On staggered studs a mount gains 0 to 2 points.", COMMON},
    [MOUNT_ROWS] = {COMPAT_UNUSUAL, "mount-rows",
                    "Rows of a mount closer than 406 mm (16 in) are for leaves of three layers.",
                    COMMON},
    [TRAPPED_LAYER] =
        {COMPAT_UNUSUAL, "trapped-layer",
         "A mount over a board traps a thin layer of air, which costs 15 to 20 points.",
         "a consultant's figure, from memory"},
    [INNER_ONE] = {COMPAT_UNUSUAL, "inner-one",
                   "A board on one inner face of a double wall costs 3 points of STC.", NBC_NOTES},
    [INNER_BOTH] = {COMPAT_UNUSUAL, "inner-both",
                    "Boards on both inner faces of a double wall may cost many points; no rating "
                    "is published.",
                    NBC_NOTES},
    [GAP_NARROW] = {COMPAT_UNUSUAL, "gap-narrow",
                    "Rows closer than 13 mm (1/2 in) are apt to touch.", COMMON},
    [BALANCE] = {COMPAT_UNUSUAL, "layer-balance",
                 "The layer counts of the sides differ by more than one.", COMMON},
    [KINDS] = {COMPAT_UNUSUAL, "board-kinds", "More than two kinds of board in one wall.", COMMON},
    [FACES_DIFFER] =
        {COMPAT_UNUSUAL, "faces-differ",
         "The sides have different face boards, and neither is for wet or abused rooms.", COMMON},
    [THICKNESS_DIFFER] = {COMPAT_UNUSUAL, "board-thickness",
                          "Gypsum boards of more than one thickness in one wall.", COMMON},
};

_Static_assert((int)RULES <= (int)COMPAT_MAX, "a report holds every rule");

static void add(compat_report *r, rule which) {
  const compat_finding *f = &rules[which];
  for (int i = 0; i < r->count; i++) {
    if (r->finding[i].rule == f->rule) return;
  }
  if (f->level > r->worst) r->worst = f->level;
  r->finding[r->count++] = *f;
}

const compat_finding *compat_rules(size_t *count) {
  *count = RULES;
  return rules;
}

static void start(compat_report *r) {
  r->count = 0;
  r->worst = COMPAT_FINE;
}

/* ---- a leaf on its own ---- */

static bool is_finish(const layer *l) {
  return l->material == LAYER_GYPSUM || l->material == LAYER_CEMENT;
}
/* Boards that only one of two rooms may ask for. */
static bool is_particular(const layer *l) {
  return l->abuse || l->moisture;
}

static void check_damping(const catalog *c, const face *f, int i, compat_report *r) {
  bool between = i > 0 && i + 1 < f->count && !c->layers[f->layer[i - 1]].membrane &&
                 !c->layers[f->layer[i + 1]].membrane;
  if (!between)
    add(r, DAMPING_LOOSE);
  else if (f->layer[i - 1] != f->layer[i + 1])
    add(r, DAMPING_MIXED);
}

static void check_room_board(const catalog *c, const face *f, compat_report *r) {
  const layer *room = &c->layers[f->layer[0]];
  if (room->face_if_asked)
    add(r, WOOD_FACE);
  else if (!room->face)
    add(r, FACE_BOARD);
}

/* Finish boards of a leaf are alike, unless the one at the room is for a wet or abused side. */
static void check_alike(const catalog *c, const face *f, compat_report *r) {
  int first = CATALOG_NONE, base = CATALOG_NONE;
  for (int i = 0; i < f->count; i++) {
    const layer *l = &c->layers[f->layer[i]];
    if (l->membrane || !is_finish(l)) continue;
    if (first == CATALOG_NONE) {
      first = f->layer[i];
      continue;
    }
    if (l->material == LAYER_CEMENT && c->layers[first].material != LAYER_CEMENT)
      add(r, CEMENT_BEHIND);
    bool plain_base = is_particular(&c->layers[first]) && !is_particular(l);
    bool same = f->layer[i] == (base == CATALOG_NONE ? first : base);
    if (!same && !(base == CATALOG_NONE && plain_base)) add(r, MIXED_LEAF);
    base = f->layer[i];
  }
}

static void check_leaf(const catalog *c, const face *f, compat_report *r) {
  int membranes = 0, boards = face_boards(c, f);
  bool gypsum_outside = false;
  if (boards == 0) add(r, NO_BOARD);
  if (boards > limits.boards) add(r, LAYERS);
  for (int i = 0; i < f->count; i++) {
    const layer *l = &c->layers[f->layer[i]];
    if (l->membrane) membranes++;
    if (l->material == LAYER_DAMPING) check_damping(c, f, i, r);
    if (l->material == LAYER_LIMP) add(r, LIMP_MEMBRANE);
    if (l->material == LAYER_FIBREBOARD && !gypsum_outside) add(r, FIBREBOARD_COVER);
    if (l->special) add(r, SPECIAL_BOARD);
    if (l->material == LAYER_GYPSUM) gypsum_outside = true;
  }
  if (membranes > 1) add(r, MEMBRANES);
  check_alike(c, f, r);
}

static void check_face(const catalog *c, const face *f, compat_report *r) {
  check_leaf(c, f, r);
  if (f->count > 0) check_room_board(c, f, r);
}

/* ---- frame, fills, mounts ---- */

static void check_fill(const catalog *c, int frame_index, int fill_index, compat_report *r) {
  if (fill_index == CATALOG_NONE) return;
  const frame *f = &c->frames[frame_index];
  const fill *batt = &c->fills[fill_index];
  double cavity = f->row_depth_m;
  if (batt->thickness_m > limits.batt_refused * cavity + size_slack_m)
    add(r, BATT_TOO_THICK);
  else if (batt->thickness_m > limits.batt_squeezed * cavity + size_slack_m) {
    add(r, batt->material == FILL_GLASS ? BATT_PRESSED : BATT_SQUEEZED);
  }
  if (batt->thickness_m < limits.batt_least * cavity - size_slack_m) add(r, BATT_LOOSE);
  if (f->material == FRAME_WOOD && batt->thickness_m < limits.batt_wood * f->stud_depth_m)
    add(r, BATT_STEEL_WIDTH);
  if (batt->wood_only && f->material == FRAME_STEEL) add(r, CELLULOSE_STEEL);
  if (batt->special) add(r, SPECIAL_FILL);
}

static bool in_list(int mm, const int *list, size_t count) {
  for (size_t i = 0; i < count; i++) {
    if (list[i] == mm) return true;
  }
  return false;
}

static void check_mount(const catalog *c, const frame *f, const wall_mount *m, compat_report *r) {
  if (m->mount == CATALOG_NONE) return;
  const mount *type = &c->mounts[m->mount];
  if (!in_list(m->spacing_mm, c->mount_spacings_mm, c->mount_spacing_count))
    add(r, MOUNT_SPACING);
  else if (m->spacing_mm < limits.mount_rows_mm)
    add(r, MOUNT_ROWS);
  if (type->clips && (m->clip_spacing_mm <= 0 || m->clip_spacing_mm > type->clip_spacing_mm))
    add(r, CLIP_SPACING);
  if (f->layout == FRAME_DOUBLE)
    add(r, MOUNT_DOUBLE);
  else if (f->layout == FRAME_STAGGERED)
    add(r, MOUNT_STAGGERED);
  if (f->material == FRAME_STEEL && f->mil < limits.light_steel_mil) add(r, MOUNT_LIGHT_STEEL);
}

static void check_core(const catalog *c, const wall *w, compat_report *r) {
  const frame *f = &c->frames[w->frame];
  if (!in_list(w->spacing_mm, c->spacings_mm, c->spacing_count)) add(r, STUD_SPACING);
  if (f->special) add(r, SPECIAL_FRAME);
  if (f->rows == 1 && w->fill[1] != CATALOG_NONE) add(r, FILL_ROWS);
  for (int i = 0; i < f->rows; i++) check_fill(c, w->frame, w->fill[i], r);
  if (f->rows == 2 && w->fill[0] != CATALOG_NONE && w->fill[1] != CATALOG_NONE &&
      w->fill[0] != w->fill[1])
    add(r, ROWS_DIFFER);
  if (f->layout != FRAME_DOUBLE && w->gap_mm != 0) add(r, GAP_SINGLE);
  if (f->layout == FRAME_DOUBLE && w->gap_mm <= 0)
    add(r, GAP_MISSING);
  else if (f->layout == FRAME_DOUBLE && w->gap_mm < limits.gap_mm)
    add(r, GAP_NARROW);
  if (w->mount[SIDE_A].mount != CATALOG_NONE && w->mount[SIDE_B].mount != CATALOG_NONE)
    add(r, MOUNT_BOTH);
  for (int s = 0; s < 2; s++) check_mount(c, f, &w->mount[s], r);
}

/* ---- a leaf on its core ---- */

/* Boards on studs or channels `spacing_mm` apart; `mil` of the steel studs they are screwed to, 0
 * for wood and channels. */
static void check_supports(const catalog *c, const face *f, int spacing_mm, int mil,
                           compat_report *r) {
  double spacing = wall_spacing_m(spacing_mm);
  for (int i = 0; i < f->count; i++) {
    const layer *l = &c->layers[f->layer[i]];
    /* 406 in a file is the nominal name of 406.4 mm: compare with half a millimetre of slack */
    static const double slack = 0.5e-3;
    if (l->max_spacing_m > 0 && spacing > l->max_spacing_m + slack) add(r, BOARD_SPACING);
    bool single = face_boards(c, f) == 1;
    if (single && l->max_spacing_single_m > 0 && spacing > l->max_spacing_single_m + slack)
      add(r, BOARD_SINGLE);
    if (mil > 0 && mil < l->min_steel_mil) add(r, STEEL_GAUGE);
  }
}

static void check_load(const catalog *c, const wall_mount *m, const face *f, compat_report *r) {
  const mount *type = &c->mounts[m->mount];
  double mass = face_mass_kg_m2(c, f);
  if (!type->clips) {
    bool heavy = type->max_leaf_kg_m2 > 0 && mass > type->max_leaf_kg_m2;
    if (heavy || face_boards(c, f) > limits.channel_boards) add(r, CHANNEL_LOAD);
    return;
  }
  double area = wall_spacing_m(m->spacing_mm) * wall_spacing_m(m->clip_spacing_mm);
  if (mass * area > type->clip_capacity_kg) add(r, CLIP_LOAD);
}

static void check_face_on_core(const catalog *c, const wall *core, int side, const face *f,
                               compat_report *r) {
  const wall_mount *m = &core->mount[side];
  if (m->mount == CATALOG_NONE) {
    check_supports(c, f, core->spacing_mm, c->frames[core->frame].mil, r);
    return;
  }
  check_supports(c, f, m->spacing_mm, 0, r);
  check_load(c, m, f, r);
}

/* ---- both leaves ---- */

static void note_kind(int index, int kinds[2 * WALL_MAX_LAYERS], int *n) {
  for (int i = 0; i < *n; i++) {
    if (kinds[i] == index) return;
  }
  kinds[(*n)++] = index;
}

static void check_pair(const catalog *c, const face *a, const face *b, compat_report *r) {
  const face *leaf[2] = {a, b};
  int kinds[2 * WALL_MAX_LAYERS], n = 0;
  int difference = face_boards(c, a) - face_boards(c, b);
  double thickness = 0;
  for (int s = 0; s < 2; s++) {
    for (int i = 0; i < leaf[s]->count; i++) {
      const layer *l = &c->layers[leaf[s]->layer[i]];
      if (l->membrane) continue;
      note_kind(leaf[s]->layer[i], kinds, &n);
      if (l->material != LAYER_GYPSUM) continue;
      bool other = thickness > 0 && (l->thickness_m > thickness + size_slack_m ||
                                     l->thickness_m < thickness - size_slack_m);
      if (other) add(r, THICKNESS_DIFFER);
      thickness = l->thickness_m;
    }
  }
  if (n > limits.kinds) add(r, KINDS);
  if (difference > limits.boards_differ || difference < -limits.boards_differ) add(r, BALANCE);
  if (a->count == 0 || b->count == 0 || a->layer[0] == b->layer[0]) return;
  if (!is_particular(&c->layers[a->layer[0]]) && !is_particular(&c->layers[b->layer[0]]))
    add(r, FACES_DIFFER);
}

/* ---- the whole ---- */

static void check_sheath(const catalog *c, const wall *w, int side, compat_report *r) {
  if (w->sheath[side].count == 0) return;
  add(r, w->mount[side].mount == CATALOG_NONE ? SHEATH_BARE : TRAPPED_LAYER);
  check_leaf(c, &w->sheath[side], r);
  check_supports(c, &w->sheath[side], w->spacing_mm, c->frames[w->frame].mil, r);
}

static void check_inner(const catalog *c, const wall *w, compat_report *r) {
  int faces = 0;
  double thickness = 0;
  for (int s = 0; s < 2; s++) {
    if (w->inner[s].count == 0) continue;
    faces++;
    thickness += face_thickness_m(c, &w->inner[s]);
    check_leaf(c, &w->inner[s], r);
    check_supports(c, &w->inner[s], w->spacing_mm, c->frames[w->frame].mil, r);
  }
  if (faces == 0) return;
  if (c->frames[w->frame].layout != FRAME_DOUBLE)
    add(r, INNER_SINGLE);
  else if (thickness >= w->gap_mm * 1e-3)
    add(r, INNER_FULL);
  add(r, faces == 2 ? INNER_BOTH : INNER_ONE);
}

void compat_check(const catalog *c, const wall *w, compat_report *out) {
  start(out);
  check_core(c, w, out);
  for (int s = 0; s < 2; s++) {
    check_face(c, &w->side[s], out);
    check_face_on_core(c, w, s, &w->side[s], out);
    check_sheath(c, w, s, out);
  }
  check_inner(c, w, out);
  check_pair(c, &w->side[SIDE_A], &w->side[SIDE_B], out);
}

compat_level compat_face(const catalog *c, const face *f) {
  compat_report r;
  start(&r);
  check_face(c, f, &r);
  return r.worst;
}

compat_level compat_fill(const catalog *c, int frame_index, int fill_index) {
  compat_report r;
  start(&r);
  check_fill(c, frame_index, fill_index, &r);
  return r.worst;
}

compat_level compat_core(const catalog *c, const wall *core) {
  compat_report r;
  start(&r);
  check_core(c, core, &r);
  return r.worst;
}

compat_level compat_face_on_core(const catalog *c, const wall *core, int side, const face *f) {
  compat_report r;
  start(&r);
  check_face_on_core(c, core, side, f, &r);
  return r.worst;
}

compat_level compat_pair(const catalog *c, const face *a, const face *b) {
  compat_report r;
  start(&r);
  check_pair(c, a, b, &r);
  return r.worst;
}

bool compat_buildable(diag_list *d, diag_place place, const catalog *c, const wall *w) {
  compat_report found;
  compat_check(c, w, &found);
  for (int i = 0; i < found.count; i++) {
    const compat_finding *f = &found.finding[i];
    if (f->level == COMPAT_ILLEGAL)
      diag_add(d, DIAG_ERROR, ERROR_WALL_ILLEGAL, place, "%s: %s (%s)", f->rule, f->reason,
               f->source);
  }
  return found.worst < COMPAT_ILLEGAL;
}
