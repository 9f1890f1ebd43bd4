#include "input/schedule.h"

#include <stdint.h>
#include <string.h>

#include "input/schedule_row.h"

enum { KEY_BYTES = 4096, BASIS_BYTES = 4000 };

/* ---- hashing: names and demands ---- */

/* An open table of places in an array, twice as many slots as entries may come. */
typedef struct hash_table {
  int *slot; /* index + 1; 0 = free */
  size_t slots;
} hash_table;

static hash_table new_table(arena *a, size_t entries) {
  size_t slots = 16;
  while (slots < 2 * entries) slots *= 2;
  return (hash_table){arena_array(a, slots, sizeof(int)), slots};
}

/* FNV-1a, 64 bits (Fowler, Noll and Vo). */
static size_t hash_bytes(const char *bytes, size_t n) {
  uint64_t h = UINT64_C(14695981039346656037);
  for (size_t i = 0; i < n; i++) h = (h ^ (unsigned char)bytes[i]) * UINT64_C(1099511628211);
  return (size_t)(h ^ (h >> 32));
}

/* The bytes of one entry; what is equal byte for byte is one. */
typedef struct hash_key {
  const char *bytes;
  size_t n;
} hash_key;

/* The slot of `key` among `keys`: its own, or the free one where it belongs. */
static int *find_slot(const hash_table *t, const hash_key *keys, hash_key key) {
  size_t at = hash_bytes(key.bytes, key.n) & (t->slots - 1);
  while (t->slot[at] > 0) {
    const hash_key *k = &keys[t->slot[at] - 1];
    if (k->n == key.n && memcmp(k->bytes, key.bytes, key.n) == 0) break;
    at = (at + 1) & (t->slots - 1);
  }
  return &t->slot[at];
}

/* ---- under way ---- */

typedef struct builder {
  arena *arena;
  diag_list *diags;
  schedule *s;
  row_reader rows;
  hash_table ids, demands, storeys;
  hash_key *id_key, *demand_key, *storey_key;
  int ids_count; /* rows whose ids are kept, faulty ones too */
  int *id_row;   /* line of the row of an id */
  text key;      /* of the demand being looked up */
  bool told_fire;
} builder;

/* Letters and digits in lower case: what csv_same compares. */
static hash_key name_key(arena *a, const char *name) {
  text t;
  text_init(&t, a, CSV_MAX_CELL);
  for (const char *p = name; *p; p++) {
    if (strchr(" -_\n", *p)) continue;
    text_char(&t, *p >= 'A' && *p <= 'Z' ? (char)(*p - 'A' + 'a') : *p);
  }
  return (hash_key){t.data, t.len};
}

static void keep_id(builder *k, const row_values *v) {
  if (v->id[0] == '\0') return;
  hash_key key = name_key(k->arena, v->id);
  int *slot = find_slot(&k->ids, k->id_key, key);
  if (*slot > 0) {
    row_fault(
        &k->rows, COLUMN_ID, DIAG_ERROR, ERROR_SCHEDULE_DUPLICATE_ID,
        text_format(k->arena, "the wall \"%s\" stands in row %d too", v->id, k->id_row[*slot - 1]));
    return;
  }
  k->id_key[k->ids_count] = key;
  k->id_row[k->ids_count] = k->rows.row->number;
  *slot = ++k->ids_count;
}

/* The storey as it was first spelled. */
static const char *keep_storey(builder *k, const char *storey) {
  if (storey[0] == '\0') return storey;
  hash_key key = name_key(k->arena, storey);
  int *slot = find_slot(&k->storeys, k->storey_key, key);
  if (*slot == 0) {
    k->storey_key[k->s->storey_count] = key;
    k->s->storey[k->s->storey_count] = storey;
    *slot = ++k->s->storey_count;
  }
  return k->s->storey[*slot - 1];
}

/* ---- demands ---- */

static void swap_sides(brief *b) {
  room_side side = b->side[0];
  double ceiling = b->ceiling_m[0];
  b->side[0] = b->side[1];
  b->side[1] = side;
  b->ceiling_m[0] = b->ceiling_m[1];
  b->ceiling_m[1] = ceiling;
  if (b->shear_side != CATALOG_NONE) b->shear_side = 1 - b->shear_side;
}

/* How much more side A asks than side B: above 0 more, below 0 less. What asks more comes first, so
 * that mirrored demands meet. */
static int compare_sides(const brief *b) {
  const room_side *p = &b->side[0], *q = &b->side[1];
  const double none = 1e9; /* without a ceiling the face is finished to the top */
  double x = b->ceiling_m[0] > 0 ? b->ceiling_m[0] : none;
  double y = b->ceiling_m[1] > 0 ? b->ceiling_m[1] : none;
  if (p->fastening != q->fastening) return (int)p->fastening - (int)q->fastening;
  if (p->wet != q->wet) return p->wet - q->wet;
  if (p->abuse != q->abuse) return p->abuse - q->abuse;
  if (b->shear_side != CATALOG_NONE) return b->shear_side == 0 ? 1 : -1;
  if (p->finish_level != q->finish_level) return p->finish_level - q->finish_level;
  return (x > y) - (x < y);
}

static void put_number(text *key, double x) {
  double plain = x + 0.0; /* one zero only */
  text_putn(key, (const char *)&plain, sizeof plain);
}

static void put_limit(text *key, const limit *l) {
  put_number(key, l->has_min ? l->min : -1);
  put_number(key, l->has_max ? l->max : -1);
}

static void put_targets(text *key, const brief *b) {
  put_number(key, b->target_count);
  for (int i = 0; i < b->target_count; i++) {
    const target *t = &b->targets[i];
    const double of[] = {(double)t->metric,   t->value,     (double)t->basis, t->confidence,
                         (double)t->evidence, t->composite, t->margin};
    for (size_t k = 0; k < sizeof of / sizeof of[0]; k++) put_number(key, of[k]);
  }
}

static void put_sides(text *key, const brief *b) {
  for (int i = 0; i < 2; i++) {
    const room_side *s = &b->side[i];
    const double of[] = {(double)s->fastening, s->wet, s->abuse, s->finish_level, b->ceiling_m[i]};
    for (size_t k = 0; k < sizeof of / sizeof of[0]; k++) put_number(key, of[k]);
  }
}

/* All that a row can change of what a wall must do, and what else a rule depends on. */
static void put_demand(builder *k, const row_values *v) {
  const brief *b = &v->b;
  const double of[] = {b->height_m,
                       (double)b->top,
                       (double)b->head,
                       b->fire_min,
                       b->loadbearing,
                       b->loadbearing ? b->floors_above : -1,
                       (double)b->noncombustible,
                       b->shear_side,
                       b->lateral_pa,
                       b->deflection,
                       b->riser_m,
                       b->run_m};
  text *key = &k->key;
  key->len = 0;
  for (size_t i = 0; i < sizeof of / sizeof of[0]; i++) put_number(key, of[i]);
  put_limit(key, &b->thickness_m);
  put_limit(key, &b->mass_kg_m2);
  put_targets(key, b);
  put_sides(key, b);
  bool limited = b->cost_per_m2.has_max || b->cost_per_m2.has_min;
  if (b->opening_count > 0 || limited) put_number(key, b->length_m);
  for (int i = 0; i < b->opening_count; i++) {
    put_number(key, b->openings[i].area_m2);
    put_number(key, b->openings[i].stc);
  }
  for (int i = 0; limited && i < 2; i++) put_number(key, b->side[i].fastening_length_m);
  const int counts[] = {b->corners, b->tees, b->free_ends, b->doors};
  for (int i = 0; limited && i < 4; i++) put_number(key, counts[i]);
}

/* The index of the type that a wall keeps, CATALOG_NONE when it is free. */
static int locked_mark(const project *p, const row_values *v) {
  return v->mark != CATALOG_NONE && p->mark[v->mark].locked ? v->mark : CATALOG_NONE;
}

/* ---- classes ---- */

static void add_basis(builder *k, schedule_class *c, const char *words) {
  if (words[0] == '\0' || strstr(c->basis, words)) return;
  c->basis = c->basis[0] ? text_format(k->arena, "%s; %s", c->basis, words) : words;
}

/* The class of the wall, whose brief is already turned; -1 after a message. */
static int find_class(builder *k, const row_values *v, const char *storey) {
  const project *p = k->s->project;
  int locked = locked_mark(p, v);
  const char *floor = p->same_framing == FRAMING_BY_STOREY ? storey : "";
  put_demand(k, v);
  put_number(&k->key, locked);
  text_put(&k->key, floor);
  int *slot = find_slot(&k->demands, k->demand_key, (hash_key){k->key.data, k->key.len});
  if (*slot > 0) return *slot - 1;
  int at = k->s->class_count;
  if (at == SCHEDULE_MAX_CLASSES) {
    row_fault(&k->rows, COLUMN_ID, DIAG_ERROR, ERROR_JSON_LIMIT,
              text_format(k->arena, "a schedule may ask at most %d different things of its walls",
                          SCHEDULE_MAX_CLASSES));
    return -1;
  }
  k->demand_key[at] = (hash_key){text_copyn(k->arena, k->key.data, k->key.len), k->key.len};
  k->s->classes[at] =
      (schedule_class){.demand = v->b, .basis = "", .storey = floor, .locked = locked};
  *slot = ++k->s->class_count;
  return at;
}

static void add_wall(builder *k, row_values *v) {
  schedule_wall w = {
      .row = k->rows.row,
      .id = v->id,
      .storey = keep_storey(k, v->storey),
      .from = v->from,
      .to = v->to,
      .count = v->count,
      .length_m = v->b.length_m,
      .height_m = v->b.height_m,
      .fastening_length_m = {v->b.side[0].fastening_length_m, v->b.side[1].fastening_length_m},
      .corners = v->b.corners,
      .tees = v->b.tees,
      .free_ends = v->b.free_ends,
      .doors = v->b.doors,
      .existing_type = v->existing_type,
      .mark = v->mark,
      .basis = v->basis_words};
  w.turned = locked_mark(k->s->project, v) == CATALOG_NONE && compare_sides(&v->b) < 0;
  if (w.turned) swap_sides(&v->b);
  w.of_class = find_class(k, v, w.storey);
  if (w.of_class < 0) return;
  schedule_class *c = &k->s->classes[w.of_class];
  add_basis(k, c, w.basis);
  c->count++;
  c->run_m += w.count * w.length_m;
  k->s->wall[k->s->count++] = w;
}

static void list_walls(builder *k) {
  schedule *s = k->s;
  for (int i = 0; i < s->class_count; i++) {
    schedule_class *c = &s->classes[i];
    c->wall = arena_array(k->arena, (size_t)c->count, sizeof *c->wall);
    c->count = 0;
  }
  for (int i = 0; i < s->count; i++) {
    schedule_class *c = &s->classes[s->wall[i].of_class];
    c->wall[c->count++] = i;
  }
}

/* ---- the table ---- */

/* Said once, however many rows ask for fire. */
static void caution_fire(builder *k, const row_values *v) {
  const brief *b = &v->b;
  if (k->told_fire || b->fire_min == 0 || b->code != CODE_NONE || b->listing_count > 0) return;
  k->told_fire = true;
  row_fault(&k->rows, COLUMN_FIRE, DIAG_WARNING, ERROR_BRIEF_CONTRADICTION,
            "without a code and without listings no wall can be shown to have a fire rating");
}

/* The column that says a mark, where the project tells what none of its marks is. */
static void caution_marks(builder *k) {
  int column = k->rows.column[COLUMN_EXISTING_TYPE];
  if (column < 0 || k->s->project->mark_count > 0) return;
  csv_row *header = arena_alloc(k->arena, sizeof *header);
  *header = (csv_row){1, (csv_cell *)k->s->table->header};
  diag_add(k->diags, DIAG_WARNING, ERROR_FIELD_MISSING,
           csv_place(k->arena, k->s->table, header, column),
           "the project has no \"types\", so what these marks cost cannot be told");
}

static builder *start(arena *a, diag_list *d, const catalog *c, const project *p,
                      const csv_table *table) {
  builder *k = arena_alloc(a, sizeof *k);
  size_t n = table->count;
  *k = (builder){.arena = a,
                 .diags = d,
                 .rows = {.arena = a, .diags = d, .catalog = c, .project = p, .table = table}};
  k->s = arena_alloc(a, sizeof *k->s);
  *k->s = (schedule){.table = table,
                     .project = p,
                     .wall = arena_array(a, n, sizeof(schedule_wall)),
                     .classes = arena_array(a, SCHEDULE_MAX_CLASSES, sizeof(schedule_class)),
                     .storey = arena_array(a, n, sizeof(char *))};
  k->ids = new_table(a, n);
  k->storeys = new_table(a, n);
  k->demands = new_table(a, SCHEDULE_MAX_CLASSES);
  k->id_key = arena_array(a, n, sizeof *k->id_key);
  k->id_row = arena_array(a, n, sizeof *k->id_row);
  k->storey_key = arena_array(a, n, sizeof *k->storey_key);
  k->demand_key = arena_array(a, SCHEDULE_MAX_CLASSES, sizeof *k->demand_key);
  text_init(&k->key, a, KEY_BYTES + CSV_MAX_CELL);
  return k;
}

schedule *schedule_read(arena *a, diag_list *d, const catalog *c, const project *p,
                        const csv_table *table) {
  size_t before = d->errors;
  if (table->count == 0 || table->count > SCHEDULE_MAX_WALLS) {
    diag_add(d, DIAG_ERROR, table->count ? ERROR_JSON_LIMIT : ERROR_FIELD_MISSING,
             (diag_place){table->file, 1, 1, NULL}, "a schedule has from 1 to %d walls, found %zu",
             SCHEDULE_MAX_WALLS, table->count);
    return NULL;
  }
  builder *k = start(a, d, c, p, table);
  bool columns = row_find_columns(&k->rows);
  caution_marks(k);
  row_values *v = arena_alloc(a, sizeof *v);
  for (size_t i = 0; i < table->count && !diag_is_full(d); i++) {
    size_t first = d->count;
    bool sound = row_read(&k->rows, &table->rows[i], v);
    keep_id(k, v);
    caution_fire(k, v);
    diag_sort(d, first);
    if (columns && sound) add_wall(k, v);
  }
  if (d->errors > before) return NULL;
  list_walls(k);
  return k->s;
}

void schedule_brief(const schedule *s, int wall, brief *out) {
  const schedule_wall *w = &s->wall[wall];
  const char *const room[] = {w->from, w->to};
  *out = s->classes[w->of_class].demand;
  out->title = w->id;
  out->length_m = w->length_m;
  out->corners = w->corners;
  out->tees = w->tees;
  out->free_ends = w->free_ends;
  out->doors = w->doors;
  for (int i = 0; i < 2; i++) {
    int own = w->turned ? 1 - i : i;
    out->side[i].room = room[own];
    out->side[i].fastening_length_m = w->fastening_length_m[own];
  }
}
