#include "select/model.h"

#include <ctype.h>
#include <math.h>

/* What a row reads of a wall. */
typedef double (*row_value)(const candidate *c, int rule, double offset);

typedef struct row_plan {
  int rule;
  row_value value;
  double offset;
} row_plan;

typedef struct builder {
  arena *arena;
  const space *space;
  const sweep_result *sweep;
  solver_model *model;
  row_plan plan[RULES_MAX + 1];
} builder;

/* ---- what a wall puts into a row ---- */

static double value_one(const candidate *c, int rule, double offset) {
  (void)c, (void)rule, (void)offset;
  return 1;
}
static double value_thickness(const candidate *c, int rule, double offset) {
  (void)rule, (void)offset;
  return c->is.thickness_tenth_mm;
}
static double value_mass(const candidate *c, int rule, double offset) {
  (void)rule, (void)offset;
  return c->is.mass_hundredth;
}
static double value_total(const candidate *c, int rule, double offset) {
  (void)rule, (void)offset;
  return (double)c->is.total_cents;
}
static double value_promised(const candidate *c, int rule, double offset) {
  (void)rule;
  return c->is.promised_hundredth + offset;
}
static double value_fire(const candidate *c, int rule, double offset) {
  (void)rule, (void)offset;
  return c->is.fire_min;
}
static double value_height(const candidate *c, int rule, double offset) {
  (void)rule, (void)offset;
  return c->is.height_mm;
}
static double value_broken(const candidate *c, int rule, double offset) {
  (void)offset;
  return c->broken & rule_bit(rule) ? 1 : 0;
}

/* ---- rows ---- */

static void add_row(builder *u, const char *name, row_sense sense, double bound, row_plan plan) {
  solver_model *m = u->model;
  u->plan[m->row_count] = plan;
  m->rows[m->row_count++] = (solver_row){name, sense, bound};
}

/* One target: promised and needed as ratings. Several: the least of what is promised above them. */
static void add_promised(builder *u, const brief *b) {
  double offset =
      b->target_count == 1 ? floor(100 * judge_needed(&b->targets[0], b->field_mean) + 0.5) : 0;
  add_row(u, "promised", ROW_GREATER, offset, (row_plan){RULE_TARGET, value_promised, offset});
}

static const char *categorical_name(builder *u, const brief *b, int rule) {
  if (rule >= RULE_WITHOUT) return text_format(u->arena, "without_%d", rule - RULE_WITHOUT + 1);
  text t;
  text_init(&t, u->arena, 100);
  text_put(&t, "rule_");
  for (const char *s = rule_name(u->arena, b, rule); *s; s++)
    text_char(&t, isalnum((unsigned char)*s) ? *s : '_');
  return t.data;
}

/* Whether a rule is kept or broken as a whole. */
static bool is_categorical(int rule) {
  switch (rule) {
  case RULE_TARGET:
  case RULE_CONFIDENCE: /* the row `promised` */
  case RULE_THICKNESS_MAX:
  case RULE_THICKNESS_MIN:
  case RULE_MASS_MAX:
  case RULE_MASS_MIN:
  case RULE_COST_MAX:
  case RULE_FIRE:
  case RULE_HEIGHT:
  case RULE_ONLY:  /* what it leaves out is no candidate */
  case RULE_PRICE: /* nor is what has no price */
    return false;
  default:
    return true;
  }
}

static void add_rows(builder *u) {
  const brief *b = u->space->context->brief;
  rule_limits l = rules_limits(b);
  rule_mask on = rules_in_force(b);
  add_row(u, "one", ROW_EQUAL, 1, (row_plan){0, value_one, 0});
  if (on & rule_bit(RULE_TARGET)) add_promised(u, b);
  const struct {
    int rule;
    const char *name;
    row_sense sense;
    double bound;
    row_value value;
  } limits[] = {
      {RULE_THICKNESS_MAX, "thickness_max", ROW_LESS, l.thickness_max, value_thickness},
      {RULE_THICKNESS_MIN, "thickness_min", ROW_GREATER, l.thickness_min, value_thickness},
      {RULE_MASS_MAX, "mass_max", ROW_LESS, l.mass_max, value_mass},
      {RULE_MASS_MIN, "mass_min", ROW_GREATER, l.mass_min, value_mass},
      {RULE_COST_MAX, "cost_max", ROW_LESS, (double)l.total_max, value_total},
      {RULE_FIRE, "fire", ROW_GREATER, l.fire_min, value_fire},
      {RULE_HEIGHT, "height", ROW_GREATER, l.height_mm, value_height},
  };
  for (size_t i = 0; i < sizeof limits / sizeof limits[0]; i++)
    if (on & rule_bit(limits[i].rule))
      add_row(u, limits[i].name, limits[i].sense, limits[i].bound,
              (row_plan){limits[i].rule, limits[i].value, 0});
  for (int rule = 0; rule < RULES_MAX; rule++)
    if ((on & rule_bit(rule)) && is_categorical(rule))
      add_row(u, categorical_name(u, b, rule), ROW_LESS, 0, (row_plan){rule, value_broken, 0});
}

/* ---- the model ---- */

static double money(long long cents) {
  return (double)cents / 100;
}

static void add_column(builder *u, int j) {
  solver_model *m = u->model;
  const candidate *c = &u->sweep->frontier[j];
  m->columns[j] =
      (solver_column){text_format(u->arena, "x%d", j + 1), money(c->is.cost_cents), true, 0, 1};
  for (int i = 0; i < m->row_count; i++) {
    double value = u->plan[i].value(c, u->plan[i].rule, u->plan[i].offset);
    if (value < 0 || value > 0) m->entries[m->entry_count++] = (solver_entry){i, j, value};
  }
}

void model_pick(arena *a, const space *s, const sweep_result *r, solver_model *out) {
  builder u = {.arena = a, .space = s, .sweep = r, .model = out};
  size_t columns = r->frontier_count > 0 ? (size_t)r->frontier_count : 1;
  *out = (solver_model){.name = "pick"};
  out->rows = arena_array(a, RULES_MAX + 1, sizeof *out->rows);
  add_rows(&u);
  out->columns = arena_array(a, columns, sizeof *out->columns);
  out->entries = arena_array(a, columns * (size_t)out->row_count, sizeof *out->entries);
  out->column_count = (int)columns;
  if (r->frontier_count == 0) {
    out->columns[0] = (solver_column){"none", 0, true, 0, 0};
    out->entries[out->entry_count++] = (solver_entry){0, 0, 1};
  }
  for (int j = 0; j < r->frontier_count; j++) add_column(&u, j);
}

/* ---- the choice ---- */

/* A column that breaks a row by itself cannot be chosen. With these at 0 the linear relaxation has
 * whole solutions: nothing is left but to take one column. */
static void fix_broken(const sweep_result *r, solver_model *m) {
  for (int j = 0; j < r->frontier_count; j++)
    if (r->frontier[j].broken) m->columns[j].upper = 0;
}

static bool keeps_all(const brief *b, const candidate *c) {
  rule_limits l = rules_limits(b);
  bool reached = b->target_count == 0 || c->is.promised_hundredth >= 0;
  return c->broken == 0 && reached && rules_broken_by(&l, &c->is) == 0;
}

static bool same_cents(double amount, long long cents) {
  return fabs(amount * 100 - (double)cents) < 0.5;
}

/* GLPK proves the least cost; of the walls that cost it the first in tie order is taken. */
static bool take_answer(diag_list *d, const space *s, const sweep_result *r,
                        const solver_result *found, pick_choice *out) {
  for (int j = 0; j < r->frontier_count; j++) {
    const candidate *c = &r->frontier[j];
    if (!same_cents(found->objective, c->is.cost_cents) || !keeps_all(s->context->brief, c))
      continue;
    out->found = true;
    out->chosen = *c;
    out->objective = money(c->is.cost_cents);
    return true;
  }
  diag_error(d, ERROR_INTERNAL_SOLVER,
             "the solver's answer breaks a rule when it is checked in integers");
  return false;
}

bool model_choose(arena *a, diag_list *d, const space *s, const sweep_result *r, double seconds,
                  const char *save_path, pick_choice *out) {
  solver_model m;
  *out = (pick_choice){.status = SOLVER_FAILED, .bound = -HUGE_VAL};
  model_pick(a, s, r, &m);
  if (save_path && !solver_save(a, d, &m, save_path)) return false;
  fix_broken(r, &m);
  solver_result found;
  solver_run(a, d, &m, seconds, &found);
  out->status = found.status;
  out->bound = found.bound;
  if (found.status == SOLVER_FAILED) return false;
  if (!found.found) return true;
  return take_answer(d, s, r, &found, out);
}
