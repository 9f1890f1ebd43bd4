/* What a row asks for in sound and fire, and where that comes from. */
#include <ctype.h>
#include <math.h>
#include <string.h>

#include "input/schedule_row.h"

enum { BASIS_BYTES = 2000, LIST_BYTES = 1500, MINUTES_AN_HOUR = 60, FIRE_MAX_MIN = 240 };
enum { MANY_STOREYS = 4 }; /* from which a code row may ask more minutes */
static const double LEAST_VALUE = 1, MOST_VALUE = 100, LEAST_CONFIDENCE = 0.5,
                    MOST_CONFIDENCE = 0.999;

static const char *const code_names[] = {
    [CODE_NONE] = "none", [CODE_IBC] = "ibc", [CODE_NBC] = "nbc"};

/* ---- the row's own targets ---- */

/* A metric by its name; ASTC is STC in the field. */
static bool find_metric(const char *word, sound_metric *metric, bool *field) {
  *field = csv_same(word, "ASTC");
  if (*field) *metric = METRIC_STC;
  for (int i = 0; !*field && i < METRIC_COUNT; i++) {
    if (!csv_same(word, sound_metric_names[i])) continue;
    *metric = (sound_metric)i;
    return true;
  }
  return *field;
}

/* Where the number of `STC 55` or `Rw+C 52` starts. */
static const char *number_of(const char *s) {
  while (*s && !(*s >= '0' && *s <= '9')) s++;
  return s;
}

static const char target_wanted[] =
    "ratings such as 55, STC 55, Rw 53 or Rw+C 50, \";\" between several";

/* One rating; false after a message. */
static bool read_target(row_reader *r, const row_values *v, const char *words, target *out) {
  const char *number = number_of(words), *rest = "?";
  const char *word = text_copyn(r->arena, words, (size_t)(number - words));
  bool field = false;
  sound_metric metric = (sound_metric)v->metric;
  bool named = word[strspn(word, " -_:")] != '\0';
  if (named) {
    size_t n = strlen(word);
    while (n > 0 && strchr(" -_:", word[n - 1])) n--;
    if (!find_metric(text_copyn(r->arena, word, n), &metric, &field)) number = "";
  }
  double value;
  if (!row_number(r->table, number, &value, &rest) || *rest) {
    row_expected(r, COLUMN_TARGET, ERROR_FIELD_TYPE, target_wanted);
    return false;
  }
  if (value < LEAST_VALUE || value > MOST_VALUE) {
    row_expected(r, COLUMN_TARGET, ERROR_FIELD_RANGE, "a rating from 1 to 100");
    return false;
  }
  if (named && row_gives(r, COLUMN_METRIC) && (int)metric != v->metric)
    row_fault(r, COLUMN_METRIC, DIAG_ERROR, ERROR_FIELD_CONFLICT,
              text_format(r->arena, "the target names %s itself", sound_metric_names[metric]));
  if (field && row_gives(r, COLUMN_BASIS) && v->basis == BASIS_LAB)
    row_fault(r, COLUMN_BASIS, DIAG_ERROR, ERROR_FIELD_CONFLICT, "ASTC is a rating in the field");
  *out = (target){.metric = metric,
                  .value = value,
                  .basis = field ? BASIS_FIELD : (basis)v->basis,
                  .confidence = r->project->confidence,
                  .evidence = (evidence_wanted)v->evidence,
                  .margin = v->margin};
  return true;
}

/* "STC 55; Rw 53" */
static void read_own(row_reader *r, row_values *v) {
  v->b.target_count = 0;
  for (const char *s = v->target; *s;) {
    size_t n = strcspn(s, ";\n");
    const char *part = text_copyn(r->arena, s, n);
    part += strspn(part, " ");
    s += n + (s[n] != '\0');
    if (part[0] == '\0') continue;
    if (v->b.target_count == BRIEF_MAX_TARGETS) {
      row_expected(r, COLUMN_TARGET, ERROR_FIELD_RANGE,
                   text_format(r->arena, "at most %d ratings", BRIEF_MAX_TARGETS));
      return;
    }
    if (!read_target(r, v, part, &v->b.targets[v->b.target_count])) return;
    v->b.target_count++;
  }
  if (v->b.target_count == 0) row_expected(r, COLUMN_TARGET, ERROR_FIELD_TYPE, target_wanted);
}

/* ---- adjacency ---- */

/* "dwelling to corridor", "Dwelling / Corridor": with hyphens, as the catalog has it. */
static const char *with_hyphens(arena *a, const char *s) {
  text t;
  text_init(&t, a, CSV_MAX_CELL);
  while (*s) {
    bool to = t.len > 0 && strlen(s) > 4 && csv_same(text_copyn(a, s, 4), "to") && s[0] == ' ' &&
              s[3] == ' ';
    text_char(&t, to || *s == '/' ? '-' : *s);
    s += to ? 4 : 1;
  }
  return t.data;
}

/* "corridor-dwelling" for "dwelling-corridor"; the name itself when it has not two parts. */
static const char *other_way(arena *a, const char *name) {
  const char *bar = strchr(name, '-');
  if (!bar || strchr(bar + 1, '-')) return name;
  return text_format(a, "%s-%.*s", bar + 1, (int)(bar - name), name);
}

/* How a row of the catalog answers to the name: by its id, or by its adjacency either way round. */
static bool answers(arena *a, const target_row *t, const char *name) {
  return csv_same(t->id, name) || csv_same(t->adjacency, name) ||
         csv_same(other_way(a, t->adjacency), name);
}

static void put_name(text *t, const char *name) {
  text_putf(t, "%s%s", t->len ? ", " : "", name);
}

static void report_several(row_reader *r, const char *name) {
  text ids;
  text_init(&ids, r->arena, LIST_BYTES);
  for (size_t i = 0; i < r->catalog->target_count; i++) {
    const target_row *t = &r->catalog->targets[i];
    if (t->code == CODE_NONE && answers(r->arena, t, name)) put_name(&ids, t->id);
  }
  row_expected(r, COLUMN_ADJACENCY, ERROR_FIELD_CHOICE,
               text_format(r->arena, "the one meant of %s", ids.data));
}

static void report_unknown(row_reader *r, const char *name) {
  const catalog *c = r->catalog;
  fire_code code = r->project->common.code;
  const char **names = arena_array(r->arena, 2 * c->target_count, sizeof *names);
  size_t n = 0;
  text under, known;
  text_init(&under, r->arena, LIST_BYTES);
  text_init(&known, r->arena, LIST_BYTES);
  for (size_t i = 0; i < c->target_count; i++) {
    const target_row *t = &c->targets[i];
    if (answers(r->arena, t, name)) put_name(&under, code_names[t->code]);
    if (t->code != code && t->code != CODE_NONE) continue;
    names[n++] = t->adjacency;
    names[n++] = t->id;
    if (t->code == code && code != CODE_NONE) put_name(&known, t->adjacency);
  }
  const char *near = text_nearest(name, names, n), *wanted;
  if (under.len > 0)
    wanted =
        text_format(r->arena, "an adjacency of the project's code, %s; this one is known under %s",
                    code_names[code], under.data);
  else if (near)
    wanted = text_format(r->arena, "an adjacency of targets.json; the nearest is %s", near);
  else
    wanted = text_format(r->arena, "an adjacency of targets.json%s%s",
                         known.len ? ", under this code " : "", known.data);
  row_expected(r, COLUMN_ADJACENCY, ERROR_FIELD_CHOICE, wanted);
}

/* The row of the catalog that the cell names: an id; else the code's own row; else the one
 * guideline's. NULL after a message. */
static const target_row *look_up(row_reader *r, const char *cell) {
  const char *name = with_hyphens(r->arena, cell);
  const target_row *guide = NULL;
  int guides = 0;
  fire_code code = r->project->common.code;
  for (size_t i = 0; i < r->catalog->target_count; i++) {
    const target_row *t = &r->catalog->targets[i];
    if (t->code != code && t->code != CODE_NONE) continue;
    if (csv_same(t->id, name)) return t;
    if (!answers(r->arena, t, name)) continue;
    if (t->code == code && code != CODE_NONE) return t;
    guide = t;
    guides++;
  }
  if (guides == 1) return guide;
  if (guides > 1)
    report_several(r, name);
  else
    report_unknown(r, name);
  return NULL;
}

static const target_row *find_adjacency(row_reader *r, const char *cell) {
  for (int i = 0; i < r->known_count; i++)
    if (text_equal(r->known[i].cell, cell)) return r->known[i].row;
  const target_row *row = look_up(r, cell);
  if (row && r->known_count < ROW_MAX_KNOWN) r->known[r->known_count++] = (row_known){cell, row};
  return row;
}

/* What an adjacency asks of a wall of this project. */
typedef struct asked {
  const target_row *row; /* NULL = no adjacency */
  target target;
  int minutes;           /* 0 = none stated */
  const char *condition; /* of the minutes: ", sprinklered" */
} asked;

static void ask_minutes(const brief *b, asked *out) {
  const target_row *t = out->row;
  out->minutes = t->fire_minutes;
  if (b->sprinklered && t->fire_minutes_sprinklered > 0) {
    out->minutes = t->fire_minutes_sprinklered;
    out->condition = ", sprinklered";
  }
  bool many = !b->storeys_given || b->storeys >= MANY_STOREYS;
  if (many && t->fire_minutes_from_4_storeys > 0) {
    out->minutes = t->fire_minutes_from_4_storeys;
    out->condition =
        b->storeys_given ? ", four storeys or more" : ", storeys not said: taken as four or more";
  }
}

static asked ask(row_reader *r, const row_values *v, const target_row *row) {
  asked out = {.row = row, .condition = ""};
  if (!row) return out;
  bool ours = false, field = v->basis == BASIS_FIELD && row->field_value > 0;
  out.target = (target){.value = field ? row->field_value : row->value,
                        .basis = field ? BASIS_FIELD : BASIS_LAB,
                        .confidence = r->project->confidence,
                        .evidence = (evidence_wanted)v->evidence,
                        .composite = row->composite,
                        .scope_given = true,
                        .margin = v->margin};
  (void)find_metric(row->metric, &out.target.metric, &ours);
  ask_minutes(&v->b, &out);
  return out;
}

/* ---- fire ---- */

/* "60", "60 min", "1 h", "1-1/2 hr", "none". */
static bool read_minutes(row_reader *r, const char *cell, int *out) {
  static const char *const hours[] = {"h", "hr", "hrs", "hour", "hours"};
  static const char *const minutes[] = {"", "min", "mins", "minutes"};
  const char *rest;
  double number;
  if (csv_same(cell, "none")) {
    *out = 0;
    return true;
  }
  if (row_number(r->table, cell, &number, &rest)) {
    rest += strspn(rest, " -");
    bool known = false;
    for (size_t i = 0; i < sizeof minutes / sizeof minutes[0]; i++)
      known = known || csv_same(rest, minutes[i]);
    for (size_t i = 0; !known && i < sizeof hours / sizeof hours[0]; i++) {
      if (!csv_same(rest, hours[i])) continue;
      known = true;
      number *= MINUTES_AN_HOUR;
    }
    double whole = floor(number + 0.5);
    if (known && whole >= 0 && whole <= FIRE_MAX_MIN && fabs(whole - number) < 1e-6) {
      *out = (int)whole;
      return true;
    }
  }
  row_expected(r, COLUMN_FIRE, ERROR_FIELD_TYPE,
               "minutes up to 240, hours or none: 60, 60 min, 1 h, 1-1/2 hr");
  return false;
}

static void settle_fire(row_reader *r, row_values *v, const asked *by) {
  int own = 0;
  bool said = row_gives(r, COLUMN_FIRE);
  if (said && !read_minutes(r, v->fire, &own)) return;
  if (said)
    v->b.fire_min = own;
  else if (by->minutes > 0)
    v->b.fire_min = by->minutes;
  if (said && own < by->minutes)
    row_fault(
        r, COLUMN_FIRE, DIAG_WARNING, ERROR_BRIEF_CONTRADICTION,
        text_format(r->arena, "%s asks %d min here%s", by->row->id, by->minutes, by->condition));
}

/* ---- settled ---- */

/* "0.8", "80 %", "80". */
static void settle_confidence(row_reader *r, row_values *v) {
  const char *rest;
  double share;
  if (!row_gives(r, COLUMN_CONFIDENCE)) return;
  if (row_number(r->table, v->confidence, &share, &rest) &&
      (*rest == '\0' || text_equal(rest, "%"))) {
    if (*rest || share > 1) share /= 100;
    if (share >= LEAST_CONFIDENCE && share <= MOST_CONFIDENCE) {
      for (int i = 0; i < v->b.target_count; i++) v->b.targets[i].confidence = share;
      return;
    }
  }
  row_expected(r, COLUMN_CONFIDENCE, ERROR_FIELD_RANGE,
               "a share from 0.5 to 0.999, or 50 % to 99.9 %");
}

/* What the row says about the project's own default targets. */
static void settle_default(row_reader *r, row_values *v) {
  for (int i = 0; i < v->b.target_count; i++) {
    target *t = &v->b.targets[i];
    if (row_gives(r, COLUMN_BASIS)) t->basis = (basis)v->basis;
    if (row_gives(r, COLUMN_EVIDENCE)) t->evidence = (evidence_wanted)v->evidence;
    if (row_gives(r, COLUMN_MARGIN)) t->margin = v->margin;
  }
}

static void settle_scope(row_reader *r, row_values *v, const asked *by) {
  for (int i = 0; i < v->b.target_count; i++) {
    target *t = &v->b.targets[i];
    if (row_gives(r, COLUMN_SCOPE))
      t->composite = v->scope == 1, t->scope_given = true;
    else if (by->row)
      t->composite = by->row->composite, t->scope_given = true;
  }
}

/* A row that asks less than the code does is told so; it wins all the same. */
static void compare(row_reader *r, const row_values *v, const asked *by) {
  if (!by->row || by->row->code == CODE_NONE) return;
  for (int i = 0; i < v->b.target_count; i++) {
    const target *t = &v->b.targets[i];
    if (t->metric != by->target.metric || t->basis != by->target.basis ||
        !(t->value < by->target.value))
      continue;
    row_fault(r, COLUMN_TARGET, DIAG_WARNING, ERROR_BRIEF_CONTRADICTION,
              text_format(r->arena, "%s asks %s %s here", by->row->id, by->row->metric,
                          text_of(r->arena, by->target.value, 0)));
  }
}

static void put_target(text *out, const target *t) {
  text_putf(out, "%s ", sound_metric_names[t->metric]);
  text_number(out, t->value, 1);
  if (t->basis == BASIS_FIELD) text_put(out, " in the field");
}

/* Where target and fire come from, for the answer. */
static void put_basis(row_reader *r, row_values *v, const asked *by, bool own) {
  if (!by->row) return;
  text t;
  text_init(&t, r->arena, BASIS_BYTES);
  text_putf(&t, "%s (%s): ", by->row->name, by->row->id);
  put_target(&t, &by->target);
  if (own) {
    text_put(&t, ", in place of which the schedule asks ");
    for (int i = 0; i < v->b.target_count; i++) {
      if (i) text_put(&t, " and ");
      put_target(&t, &v->b.targets[i]);
    }
  }
  if (by->minutes > 0) text_putf(&t, "; fire %d min%s", by->minutes, by->condition);
  if (row_gives(r, COLUMN_FIRE))
    text_putf(&t, "%s the schedule asks %d min",
              by->minutes > 0 ? ", in place of which" : "; fire:", v->b.fire_min);
  if (v->basis == BASIS_FIELD && !own && by->target.basis == BASIS_LAB)
    text_put(&t, "; no value in the field is stated, so the laboratory's holds");
  text_putf(&t, ". %s", by->row->source);
  v->basis_words = t.data;
}

void row_targets(row_reader *r, row_values *v) {
  bool own = row_gives(r, COLUMN_TARGET), near = row_gives(r, COLUMN_ADJACENCY);
  const target_row *row = near ? find_adjacency(r, v->adjacency) : NULL;
  asked by = ask(r, v, row);
  if (own) {
    read_own(r, v);
    compare(r, v, &by);
  } else if (row) {
    v->b.target_count = 1;
    v->b.targets[0] = by.target;
  } else if (!near && v->b.target_count > 0) {
    settle_default(r, v);
  } else if (!near) {
    row_fault(r, r->column[COLUMN_TARGET] >= 0 ? COLUMN_TARGET : COLUMN_ADJACENCY, DIAG_ERROR,
              ERROR_FIELD_MISSING,
              "a target or an adjacency is needed; the project gives no default target");
  }
  settle_confidence(r, v);
  settle_scope(r, v, &by);
  settle_fire(r, v, &by);
  put_basis(r, v, &by, own);
}
