/* The axes of the search.
 *
 * A leaf is equal finish boards, alone, over one other board, or with one membrane: in ordinary
 * build at most two boards and nothing that compat_face calls unusual, in any build up to three. A
 * core is frame, spacing, gap, fills and mounts. What compat_check would say of the whole wall is
 * the union of what its pieces say, so that a wall is legal when its core, its leaves, each leaf on
 * its support and the pair are. Why these axes: docs/design/search.md. */
#include "search/space.h"

#include <string.h>

#include "wall/line.h"

enum { ORDINARY_BOARDS = 2, MOST_BOARDS = 3, DEFAULT_GAP_MM = 25, FILL_CHOICES = 3 };

typedef struct builder {
  arena *arena;
  const catalog *catalog;
  const brief *brief;
  space_wish wish;
  compat_level most; /* what a finding may be at most */
  bool whole;        /* all that is legal: see space_build_whole */
  space *out;
  size_t face_cap, core_cap;
} builder;

/* ---- what may be used ---- */

/* Named in full, a record may be used although ordinary build would not propose it. */
static bool named(const brief *b, catalog_kind kind, const char *id) {
  for (int i = 0; i < b->only_count; i++) {
    bool pattern = false;
    for (const char *s = b->only[i]; *s; s++) pattern = pattern || *s == '*' || *s == '?';
    if (!pattern && rules_pattern_meets(b->only[i], kind, id)) return true;
  }
  return false;
}

static bool usable(const builder *u, catalog_kind kind, int index, bool ordinary) {
  const char *id = catalog_id(u->catalog, (catalog_ref){kind, index});
  if (!rules_only_allows(u->catalog, u->brief, kind, id)) return false;
  return u->whole || ordinary || named(u->brief, kind, id);
}

static bool any_build(const builder *u) {
  return u->whole || u->brief->build == BUILD_ANY;
}

static bool layer_usable(const builder *u, int i) {
  const layer *l = &u->catalog->layers[i];
  return usable(u, CATALOG_LAYER, i, l->ordinary || (any_build(u) && l->membrane));
}
static bool fill_usable(const builder *u, int i) {
  return usable(u, CATALOG_FILL, i, u->catalog->fills[i].ordinary);
}
static bool frame_usable(const builder *u, int i) {
  return usable(u, CATALOG_FRAME, i, u->catalog->frames[i].ordinary);
}
static bool mount_usable(const builder *u, int i) {
  return usable(u, CATALOG_MOUNT, i, true);
}

/* ---- leaves ---- */

static void add_face(builder *u, const face *f) {
  space *s = u->out;
  if (compat_face(u->catalog, f) > u->most) return;
  if ((size_t)s->face_count == u->face_cap) {
    size_t cap = u->face_cap ? 2 * u->face_cap : 64;
    s->faces =
        arena_grow(u->arena, s->faces, u->face_cap * sizeof *s->faces, cap * sizeof *s->faces);
    u->face_cap = cap;
  }
  s->faces[s->face_count++] = *f;
}

/* Boards with one membrane: damping between any two of them, a limp one next to the studs. */
static void add_with_membranes(builder *u, const face *boards) {
  for (int m = 0; m < (int)u->catalog->layer_count; m++) {
    const layer *l = &u->catalog->layers[m];
    if (!l->membrane || !layer_usable(u, m)) continue;
    for (int at = l->material == LAYER_DAMPING ? 1 : boards->count; at <= boards->count; at++) {
      face f = {.count = boards->count + 1};
      for (int i = 0; i < f.count; i++)
        f.layer[i] = i < at ? boards->layer[i] : i == at ? m : boards->layer[i - 1];
      add_face(u, &f);
    }
  }
}

/* Ordinary build mixes finish boards only for a wet or an abused room, and gives the sides
 * different ones only where their rooms differ in that (common practice, no source). */
static bool rooms_particular(const brief *b) {
  return b->side[SIDE_A].wet || b->side[SIDE_B].wet || b->side[SIDE_A].abuse ||
         b->side[SIDE_B].abuse;
}

static bool rooms_differ(const brief *b) {
  return b->side[SIDE_A].wet != b->side[SIDE_B].wet ||
         b->side[SIDE_A].abuse != b->side[SIDE_B].abuse;
}

/* Whether a board may stand behind finish boards of another kind: a backing board may, and a plain
 * board behind those of wet and abused rooms. */
static bool backs(const builder *u, int finish, int back) {
  const layer *f = &u->catalog->layers[finish], *l = &u->catalog->layers[back];
  if (back == finish || l->membrane || !layer_usable(u, back)) return false;
  if (l->backing || l->material == LAYER_CEMENT) return true;
  if (u->whole) return false;
  bool asked = any_build(u) || u->wish.finishes_mixed;
  return l->material == LAYER_GYPSUM && (f->abuse || f->moisture) && asked;
}

static void add_faces_of(builder *u, int board, int most) {
  face f = {.count = 0};
  for (int n = 1; n <= most; n++) {
    f.layer[f.count++] = board;
    add_face(u, &f);
    add_with_membranes(u, &f);
    if (n == most) break;
    for (int back = 0; back < (int)u->catalog->layer_count; back++) {
      if (!backs(u, board, back)) continue;
      face g = f;
      g.layer[g.count++] = back;
      add_face(u, &g);
      if (u->whole) add_with_membranes(u, &g);
    }
  }
}

static void build_faces(builder *u) {
  for (int i = 0; i < (int)u->catalog->layer_count; i++) {
    const layer *l = &u->catalog->layers[i];
    bool face_board = l->face || (any_build(u) && l->face_if_asked);
    if (face_board && layer_usable(u, i))
      add_faces_of(u, i, any_build(u) ? MOST_BOARDS : ORDINARY_BOARDS);
  }
}

/* ---- cores ---- */

static int compare_int(int x, int y) {
  return (x > y) - (x < y);
}

static int compare_mounts(const wall_mount *x, const wall_mount *y) {
  int order = compare_int(
      y->mount,
      x->mount); /* a mount before none: of two mirror images the one mounted on A is kept */
  if (order == 0) order = compare_int(x->spacing_mm, y->spacing_mm);
  return order ? order : compare_int(x->clip_spacing_mm, y->clip_spacing_mm);
}

/* Order of a core and its mirror image. */
static int compare_mirror(const wall *w, const wall *m) {
  int order = compare_mounts(&w->mount[SIDE_A], &m->mount[SIDE_A]);
  if (order == 0) order = compare_mounts(&w->mount[SIDE_B], &m->mount[SIDE_B]);
  if (order == 0)
    order = compare_int(m->fill[0], w->fill[0]); /* a filled row before an empty one */
  return order;
}

static void add_core(builder *u, const wall *w) {
  space *s = u->out;
  if (compat_core(u->catalog, w) > u->most) return;
  int order = -1;
  if (s->mirror_once) {
    wall m = wall_mirrored(u->catalog, w);
    order = compare_mirror(w, &m);
    if (order > 0) return;
  }
  if ((size_t)s->core_count == u->core_cap) {
    size_t cap = u->core_cap ? 2 * u->core_cap : 256;
    s->cores =
        arena_grow(u->arena, s->cores, u->core_cap * sizeof *s->cores, cap * sizeof *s->cores);
    s->own_mirror = arena_grow(u->arena, s->own_mirror, u->core_cap * sizeof *s->own_mirror,
                               cap * sizeof *s->own_mirror);
    u->core_cap = cap;
  }
  s->own_mirror[s->core_count] = order == 0;
  s->cores[s->core_count++] = *w;
}

/* No mount, then each mount at each spacing on A, then on B. */
static void add_mounts(builder *u, wall *w) {
  add_core(u, w);
  for (int side = SIDE_A; side <= SIDE_B; side++) {
    for (int m = 0; m < (int)u->catalog->mount_count; m++) {
      if (!mount_usable(u, m)) continue;
      for (size_t i = 0; i < u->catalog->mount_spacing_count; i++) {
        w->mount[side] = (wall_mount){m, u->catalog->mount_spacings_mm[i],
                                      u->catalog->mounts[m].clip_spacing_mm};
        add_core(u, w);
      }
    }
    w->mount[side] = (wall_mount){.mount = CATALOG_NONE};
  }
}

/* Empty; then each fill: in the only row, or in both rows, in A's and in B's. Ordinary build fills
 * A's row first: the two rows are alike, so B's alone is the mirror image of a core that stands in
 * the list already. */
static void add_fills(builder *u, wall *w) {
  static const bool filled[FILL_CHOICES][2] = {{true, true}, {true, false}, {false, true}};
  bool two = u->catalog->frames[w->frame].rows == 2;
  int choices = !two ? 1 : any_build(u) ? FILL_CHOICES : FILL_CHOICES - 1;
  add_mounts(u, w);
  for (int i = 0; i < (int)u->catalog->fill_count; i++) {
    if (!fill_usable(u, i) || compat_fill(u->catalog, w->frame, i) > u->most) continue;
    for (int k = 0; k < choices; k++) {
      w->fill[0] = filled[k][0] ? i : CATALOG_NONE;
      w->fill[1] = two && filled[k][1] ? i : CATALOG_NONE;
      add_mounts(u, w);
    }
  }
  w->fill[0] = w->fill[1] = CATALOG_NONE;
}

static void build_cores(builder *u) {
  for (int i = 0; i < (int)u->catalog->frame_count; i++) {
    if (!frame_usable(u, i)) continue;
    wall w = wall_empty();
    w.frame = i;
    if (wall_is_double(u->catalog, &w)) w.gap_mm = DEFAULT_GAP_MM;
    for (size_t k = 0; k < u->catalog->spacing_count; k++) {
      w.spacing_mm = u->catalog->spacings_mm[k];
      add_fills(u, &w);
    }
  }
}

/* ---- what meets ---- */

static space_support support_of(const catalog *c, const wall *core, int side) {
  space_support p = {.mount = core->mount[side]};
  if (p.mount.mount == CATALOG_NONE) {
    p.mount = (wall_mount){.mount = CATALOG_NONE};
    p.spacing_mm = core->spacing_mm;
    p.mil = c->frames[core->frame].mil;
  }
  return p;
}

static bool same_support(const space_support *x, const space_support *y) {
  return x->spacing_mm == y->spacing_mm && x->mil == y->mil &&
         compare_mounts(&x->mount, &y->mount) == 0;
}

static int support_index(const space *s, const space_support *p) {
  int i = 0;
  while (i < s->support_count && !same_support(&s->supports[i], p)) i++;
  return i;
}

static void build_supports(builder *u) {
  space *s = u->out;
  size_t cores = (size_t)s->core_count, faces = (size_t)s->face_count, cap = 0;
  int *example = NULL; /* a core and side of each support: 2 x core + side */
  for (int side = 0; side < 2; side++)
    s->support[side] = arena_array(u->arena, cores, sizeof *s->support[side]);
  for (int k = 0; k < 2 * s->core_count; k++) {
    space_support p = support_of(u->catalog, &s->cores[k / 2], k % 2);
    int i = support_index(s, &p);
    s->support[k % 2][k / 2] = i;
    if (i < s->support_count) continue;
    if ((size_t)i == cap) {
      size_t more = cap ? 2 * cap : 16;
      s->supports =
          arena_grow(u->arena, s->supports, cap * sizeof *s->supports, more * sizeof *s->supports);
      example = arena_grow(u->arena, example, cap * sizeof *example, more * sizeof *example);
      cap = more;
    }
    example[i] = k;
    s->supports[s->support_count++] = p;
  }
  s->on_support = arena_array(u->arena, (size_t)s->support_count * faces, sizeof *s->on_support);
  for (int i = 0; i < s->support_count; i++)
    for (int f = 0; f < s->face_count; f++)
      s->on_support[(size_t)i * faces + (size_t)f] =
          compat_face_on_core(u->catalog, &s->cores[example[i] / 2], example[i] % 2,
                              &s->faces[f]) <= u->most;
}

static bool same_boards(const catalog *c, const face *f, const face *g) {
  int i = 0, j = 0;
  for (;;) {
    while (i < f->count && c->layers[f->layer[i]].membrane) i++;
    while (j < g->count && c->layers[g->layer[j]].membrane) j++;
    if (i == f->count || j == g->count) return i == f->count && j == g->count;
    if (f->layer[i++] != g->layer[j++]) return false;
  }
}

/* Faces with the same boards, whatever their membranes: all that compat_pair looks at. `kind` gets
 * the kind of each face, `example` a face of each. Returns how many kinds. */
static int board_kinds(const builder *u, int *kind, int *example) {
  const space *s = u->out;
  int kinds = 0;
  for (int i = 0; i < s->face_count; i++) {
    int k = 0;
    while (k < kinds && !same_boards(u->catalog, &s->faces[i], &s->faces[example[k]])) k++;
    if (k == kinds) example[kinds++] = i;
    kind[i] = k;
  }
  return kinds;
}

static bool may_meet(const builder *u, const face *a, const face *b) {
  bool same_board = a->layer[0] == b->layer[0];
  if (!same_board && !u->wish.finishes_differ) return false;
  return compat_pair(u->catalog, a, b) <= (same_board || u->whole ? u->most : COMPAT_FINE);
}

static void build_pairs(builder *u) {
  space *s = u->out;
  size_t n = (size_t)s->face_count;
  int *kind = arena_array(u->arena, n, sizeof *kind);
  int *example = arena_array(u->arena, n, sizeof *example);
  size_t kinds = (size_t)board_kinds(u, kind, example);
  bool *meet = arena_array(u->arena, kinds * kinds, sizeof *meet);
  for (size_t p = 0; p < kinds; p++)
    for (size_t q = 0; q < kinds; q++)
      meet[p * kinds + q] = may_meet(u, &s->faces[example[p]], &s->faces[example[q]]);
  s->pair = arena_array(u->arena, n * n, sizeof *s->pair);
  for (size_t i = 0; i < n; i++)
    for (size_t j = 0; j < n; j++)
      s->pair[i * n + j] = meet[(size_t)kind[i] * kinds + (size_t)kind[j]];
}

static void build_partners(builder *u) {
  space *s = u->out;
  size_t n = (size_t)s->face_count, count = 0;
  for (size_t i = 0; i < n * n; i++) count += s->pair[i];
  s->partner = arena_array(u->arena, count, sizeof *s->partner);
  s->partner_first = arena_array(u->arena, n + 1, sizeof *s->partner_first);
  count = 0;
  for (size_t i = 0; i < n; i++) {
    for (size_t j = 0; j < n; j++)
      if (s->pair[i * n + j]) s->partner[count++] = (unsigned short)j;
    s->partner_first[i + 1] = (int)count;
  }
}

/* ---- wall lines in pieces ---- */

/* The line of core `k` between leaves `i` and `j`. */
static const char *line_of(builder *u, int k, int i, int j) {
  wall w = space_wall(u->out, k, i, j);
  return line_print(u->arena, u->catalog, &w);
}

/* A line is face, core, face; no face holds a bar. */
static void build_texts(builder *u) {
  space *s = u->out;
  if (s->core_count == 0 || s->face_count == 0) return;
  s->face_text = arena_array(u->arena, (size_t)s->face_count, sizeof *s->face_text);
  s->core_text = arena_array(u->arena, (size_t)s->core_count, sizeof *s->core_text);
  for (int i = 0; i < s->face_count; i++) {
    const char *line = line_of(u, 0, i, i);
    s->face_text[i] = text_copyn(u->arena, line, (size_t)(strchr(line, '|') - line) - 1);
  }
  size_t edge = strlen(s->face_text[0]);
  for (int k = 0; k < s->core_count; k++) {
    const char *line = line_of(u, k, 0, 0);
    s->core_text[k] = text_copyn(u->arena, line + edge, strlen(line) - 2 * edge);
  }
}

/* Compares two texts given in three pieces each. */
static int compare_pieces(const char *const x[3], const char *const y[3]) {
  int i = 0, j = 0;
  const char *p = x[0], *q = y[0];
  for (;;) {
    while (*p == '\0' && i < 2) p = x[++i];
    while (*q == '\0' && j < 2) q = y[++j];
    if (*p != *q || *p == '\0') return compare_int((unsigned char)*p, (unsigned char)*q);
    p++;
    q++;
  }
}

int space_compare_lines(const space *s, int core, int face_a, int face_b, int other_core,
                        int other_a, int other_b) {
  const char *const x[3] = {s->face_text[face_a], s->core_text[core], s->face_text[face_b]};
  const char *const y[3] = {s->face_text[other_a], s->core_text[other_core], s->face_text[other_b]};
  return compare_pieces(x, y);
}

/* ---- the whole ---- */

static bool rooms_alike(const brief *b) {
  const room_side *p = &b->side[SIDE_A], *q = &b->side[SIDE_B];
  bool same_length = !(p->fastening_length_m < q->fastening_length_m) &&
                     !(p->fastening_length_m > q->fastening_length_m);
  bool same_ceiling = !(b->ceiling_m[0] < b->ceiling_m[1]) && !(b->ceiling_m[0] > b->ceiling_m[1]);
  return p->fastening == q->fastening && same_length && p->wet == q->wet && p->abuse == q->abuse &&
         p->finish_level == q->finish_level && same_ceiling && b->shear_side == CATALOG_NONE;
}

space_wish space_wishes(const brief *b) {
  return (space_wish){rooms_particular(b), rooms_differ(b), rooms_alike(b)};
}

static void build_axes(arena *a, const judge_context *x, const space_wish *wish, bool whole,
                       space *out) {
  *out = (space){.context = x, .mirror_once = wish->mirror_once};
  builder u = {.arena = a, .catalog = x->catalog, .brief = x->brief, .wish = *wish, .out = out};
  u.whole = whole;
  u.most = any_build(&u) ? COMPAT_UNUSUAL : COMPAT_FINE;
  build_faces(&u);
  build_cores(&u);
  build_supports(&u);
  build_pairs(&u);
  build_partners(&u);
  build_texts(&u);
}

void space_build_for(arena *a, const judge_context *x, const space_wish *wish, space *out) {
  build_axes(a, x, wish, false, out);
}

void space_build(arena *a, const judge_context *x, space *out) {
  space_wish wish = space_wishes(x->brief);
  build_axes(a, x, &wish, false, out);
}

void space_build_whole(arena *a, const judge_context *x, space *out) {
  space_wish wish = space_wishes(x->brief);
  wish.finishes_differ = true;
  build_axes(a, x, &wish, true, out);
}

bool space_legal(const space *s, int core, int face_a, int face_b) {
  size_t n = (size_t)s->face_count, i = (size_t)face_a, j = (size_t)face_b;
  if (s->own_mirror[core] && face_b < face_a) return false;
  return s->on_support[(size_t)s->support[SIDE_A][core] * n + i] &&
         s->on_support[(size_t)s->support[SIDE_B][core] * n + j] && s->pair[i * n + j];
}

int space_row(const space *s, int core, int face_a, int *face_b) {
  size_t n = (size_t)s->face_count;
  const bool *on_a = s->on_support + (size_t)s->support[SIDE_A][core] * n;
  const bool *on_b = s->on_support + (size_t)s->support[SIDE_B][core] * n;
  int count = 0;
  if (!on_a[face_a]) return 0;
  for (int i = s->partner_first[face_a]; i < s->partner_first[face_a + 1]; i++) {
    int j = s->partner[i];
    if (on_b[j] && !(s->own_mirror[core] && j < face_a)) face_b[count++] = j;
  }
  return count;
}

wall space_wall(const space *s, int core, int face_a, int face_b) {
  wall w = s->cores[core];
  w.side[SIDE_A] = s->faces[face_a];
  w.side[SIDE_B] = s->faces[face_b];
  return w;
}

/* Pairs of faces that may stand on supports p (A) and q (B); `ordered`: of two mirror images one. */
static long long count_pairs(const space *s, int p, int q, bool ordered) {
  size_t n = (size_t)s->face_count;
  long long count = 0;
  for (size_t i = 0; i < n; i++) {
    if (!s->on_support[(size_t)p * n + i]) continue;
    const bool *on = s->on_support + (size_t)q * n, *pair = s->pair + i * n;
    for (size_t j = ordered ? i : 0; j < n; j++) count += on[j] && pair[j];
  }
  return count;
}

/* Cores on the same supports have as many walls each: remembered for as many supports as fit. */
typedef struct counted {
  int a, b;
  bool ordered;
  long long pairs;
} counted;
enum { COUNTED_MAX = 512 };

long long space_count(const space *s) {
  counted known[COUNTED_MAX];
  int kinds = 0;
  long long count = 0;
  for (int k = 0; k < s->core_count; k++) {
    counted c = {s->support[SIDE_A][k], s->support[SIDE_B][k], s->own_mirror[k], 0};
    int i = 0;
    while (i < kinds && (known[i].a != c.a || known[i].b != c.b || known[i].ordered != c.ordered))
      i++;
    if (i == kinds) {
      c.pairs = count_pairs(s, c.a, c.b, c.ordered);
      if (kinds < COUNTED_MAX) known[kinds++] = c;
      count += c.pairs;
    } else {
      count += known[i].pairs;
    }
  }
  return count;
}
