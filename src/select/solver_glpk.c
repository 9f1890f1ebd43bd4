/* The gate to GLPK.
 *
 * GLPK aborts the process on a fault unless its error hook jumps away, and after such a jump its
 * environment can only be freed as a whole. So each call runs in a thread of its own: GLPK keeps
 * one environment a thread, ours can be freed without touching one that the host program may hold.
 * All memory of the library is taken before that thread starts and after it ended, because an arena
 * that runs out jumps past whoever holds GLPK objects.
 *
 * GLPK counts rows, columns and entries from 1 and takes NaN without a word: everything is checked
 * first. */
#include <ctype.h>
#include <glpk.h>
#include <limits.h>
#include <math.h>
#include <pthread.h>
#include <setjmp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "base/clock.h"
#include "base/file.h"
#include "select/solver.h"

enum { TALK_MAX = 512, MILLISECONDS = 1000, NAME_MAX_BYTES = 255, SLICE_ITERATIONS = 500 };

/* GLPK's own default for the objective, 1e-7, is relative: with an objective near a million it
 * called plans optimal that were 0.10 too dear. */
static const double objective_tolerance = 1e-9;
static const double integer_tolerance = 1e-7;

typedef enum task_state { TASK_DONE, TASK_FAULT } task_state;

/* One errand for GLPK. Everything it needs is here; the thread allocates nothing of ours. */
typedef struct task {
  const solver_model *model;
  int *row_of, *column_of; /* entries as GLPK wants them, from 1 */
  double *value_of;
  const solver_how *how;
  double begun; /* clock, s */
  bool timed, started, cut_short;
  double *start;                 /* how->start as GLPK counts, from 1 */
  double told_found, told_bound; /* what `progress` heard last */
  const char *save_path;         /* NULL: solve */
  solver_result *result;         /* NULL: save */
  task_state state;
  jmp_buf escape;
  char talk[TALK_MAX]; /* the last words of GLPK, for the diagnostic */
  size_t talk_len;
} task;

static int hear(void *info, const char *s) {
  task *t = info;
  size_t n = strlen(s);
  if (n >= TALK_MAX - 1) {
    s += n - (TALK_MAX - 1);
    n = TALK_MAX - 1;
    t->talk_len = 0;
  } else if (t->talk_len + n >= TALK_MAX) {
    t->talk_len = 0;
  }
  memcpy(t->talk + t->talk_len, s, n);
  t->talk_len += n;
  t->talk[t->talk_len] = '\0';
  return 1; /* nothing is to be printed */
}

static void flee(void *info) {
  task *t = info;
  longjmp(t->escape, 1);
}

static void load_rows(glp_prob *p, const solver_model *m) {
  static const int kind[] = {[ROW_LESS] = GLP_UP, [ROW_EQUAL] = GLP_FX, [ROW_GREATER] = GLP_LO};
  if (m->row_count == 0) return;
  glp_add_rows(p, m->row_count);
  for (int i = 0; i < m->row_count; i++) {
    glp_set_row_name(p, i + 1, m->rows[i].name);
    glp_set_row_bnds(p, i + 1, kind[m->rows[i].sense], m->rows[i].bound, m->rows[i].bound);
  }
}

static void load_columns(glp_prob *p, const solver_model *m) {
  glp_add_cols(p, m->column_count);
  for (int j = 0; j < m->column_count; j++) {
    const solver_column *c = &m->columns[j];
    glp_set_col_name(p, j + 1, c->name);
    glp_set_obj_coef(p, j + 1, c->cost);
    if (c->binary) glp_set_col_kind(p, j + 1, GLP_BV); /* sets the bounds 0 and 1 too */
    if (c->lower >= c->upper) {
      glp_set_col_bnds(p, j + 1, GLP_FX, c->lower, c->lower);
    } else if (!c->binary) {
      glp_set_col_bnds(p, j + 1, isinf(c->upper) ? GLP_LO : GLP_DB, c->lower, c->upper);
    }
  }
}

static glp_prob *load(const task *t) {
  const solver_model *m = t->model;
  glp_prob *p = glp_create_prob();
  glp_set_prob_name(p, m->name);
  glp_set_obj_name(p, "cost");
  glp_set_obj_dir(p, GLP_MIN);
  load_rows(p, m);
  load_columns(p, m);
  glp_load_matrix(p, m->entry_count, t->row_of, t->column_of, t->value_of);
  return p;
}

/* What is left of the time, in GLPK's unit; at least one so that a late call ends at once. */
static int left_ms(const task *t) {
  if (!t->timed) return INT_MAX;
  double ms = (t->how->seconds - (clock_seconds() - t->begun)) * MILLISECONDS;
  return ms < 1 ? 1 : ms < INT_MAX ? (int)ms : INT_MAX;
}

static bool stopped(const task *t) {
  return t->how->stop && *t->how->stop;
}

static bool out_of_time(const task *t) {
  return t->timed && clock_seconds() - t->begun >= t->how->seconds;
}

/* The first linear relaxation: branch and bound needs its optimum. The simplex has no callback, so
 * it goes by slices of iterations, between which the stop flag is looked at. True when the search
 * may go on. */
static bool relax(glp_prob *p, const task *t) {
  glp_smcp how;
  glp_init_smcp(&how);
  how.it_lim = SLICE_ITERATIONS;
  if (t->how->dual) how.meth = GLP_DUALP;
  int code = 0;
  do {
    how.tm_lim = left_ms(t);
    code = glp_simplex(p, &how);
  } while (code == GLP_EITLIM && !stopped(t) && !out_of_time(t));
  int found = glp_get_status(p);
  if (code == GLP_ETMLIM || code == GLP_EITLIM) {
    t->result->status = SOLVER_LIMIT;
  } else if (code == 0 && found == GLP_NOFEAS) {
    t->result->status = SOLVER_INFEASIBLE;
  } else if (code == 0 && found == GLP_OPT) {
    t->result->bound = glp_get_obj_val(p);
    return true;
  }
  return false;
}

/* Keeps the bound that is proved so far, and tells of progress. */
static void watch(glp_tree *tree, task *t) {
  int best = glp_ios_best_node(tree);
  solver_result *r = t->result;
  if (best != 0 && glp_ios_node_bound(tree, best) > r->bound)
    r->bound = glp_ios_node_bound(tree, best);
  if (!t->how->progress) return;
  glp_prob *p = glp_ios_get_prob(tree);
  double found = glp_mip_status(p) == GLP_FEAS ? glp_mip_obj_val(p) : HUGE_VAL;
  double bound = fmin(r->bound, found);
  if (!(found < t->told_found) && !(bound > t->told_bound)) return;
  t->told_found = found;
  t->told_bound = bound;
  t->how->progress(t->how->user, found, bound);
}

/* Of the fractional columns that come first, the one nearest to a half; the first of equals. */
static void choose_branch(glp_tree *tree, const task *t) {
  glp_prob *p = glp_ios_get_prob(tree);
  int chosen = 0;
  double nearest = 1, value = 0;
  for (int j = 1; j <= t->model->column_count; j++) {
    if (!glp_ios_can_branch(tree, j)) continue;
    double v = glp_get_col_prim(p, j);
    double off = fabs(v - floor(v) - 0.5);
    int rank = chosen ? t->how->priority[j - 1] - t->how->priority[chosen - 1] : 1;
    if (rank < 0 || (rank == 0 && off >= nearest)) continue;
    chosen = j;
    nearest = off;
    value = v;
  }
  if (chosen)
    glp_ios_branch_upon(tree, chosen, value - floor(value) < 0.5 ? GLP_DN_BRNCH : GLP_UP_BRNCH);
}

/* Whether the limit settles the search: nothing left is within it, or something found is. */
static bool settled(glp_prob *p, const task *t) {
  if (!t->how->limited) return false;
  if (t->result->bound > t->how->limit) return true;
  return t->how->asked && glp_mip_status(p) == GLP_FEAS && glp_mip_obj_val(p) <= t->how->limit;
}

static void listen(glp_tree *tree, void *info) {
  task *t = info;
  int nodes = 0;
  watch(tree, t);
  glp_ios_tree_size(tree, NULL, NULL, &nodes);
  t->result->nodes = nodes;
  bool enough = t->how->nodes > 0 && nodes > t->how->nodes;
  if (enough || stopped(t) || settled(glp_ios_get_prob(tree), t)) {
    t->cut_short = true;
    glp_ios_terminate(tree);
    return;
  }
  int reason = glp_ios_reason(tree);
  if (reason == GLP_IHEUR && t->start && !t->started) {
    t->started = true;
    (void)glp_ios_heur_sol(tree, t->start);
  } else if (reason == GLP_IBRANCH && t->how->priority) {
    choose_branch(tree, t);
  }
}

static void branch(glp_prob *p, task *t) {
  glp_iocp how;
  glp_init_iocp(&how);
  how.presolve = GLP_OFF;
  how.mip_gap = 0.0;
  how.tol_obj = objective_tolerance;
  how.tol_int = integer_tolerance;
  how.tm_lim = left_ms(t);
  if (t->how->priority) how.bt_tech = GLP_BT_DFS;
  how.cb_func = listen;
  how.cb_info = t;
  int code = glp_intopt(p, &how);
  int found = glp_mip_status(p);
  solver_result *r = t->result;
  if (code != 0 && code != GLP_ETMLIM && code != GLP_ESTOP) return;
  r->status = code != 0 || t->cut_short ? SOLVER_LIMIT
              : found == GLP_OPT        ? SOLVER_OPTIMAL
              : found == GLP_NOFEAS     ? SOLVER_INFEASIBLE
                                        : SOLVER_FAILED;
  r->found = found == GLP_OPT || found == GLP_FEAS;
  if (!r->found) return;
  r->objective = glp_mip_obj_val(p);
  for (int j = 0; j < t->model->column_count; j++) r->value[j] = glp_mip_col_val(p, j + 1);
  r->bound = r->status == SOLVER_OPTIMAL ? r->objective : fmin(r->bound, r->objective);
}

static void *errand(void *info) {
  task *t = info;
  t->state = TASK_FAULT;
  if (setjmp(t->escape) == 0) {
    glp_term_hook(hear, t);
    glp_error_hook(flee, t);
    glp_prob *p = load(t);
    if (t->save_path) {
      if (glp_write_lp(p, NULL, t->save_path) == 0) t->state = TASK_DONE;
    } else {
      if (relax(p, t)) branch(p, t);
      t->state = TASK_DONE;
    }
  }
  /* after a fault the environment still holds what was allocated; this frees everything of this
   * thread */
  glp_error_hook(NULL, NULL);
  glp_term_hook(NULL, NULL);
  glp_free_env();
  return NULL;
}

static bool name_ok(const char *name) {
  if (!name || !isalpha((unsigned char)name[0])) return false;
  if ((name[0] == 'e' || name[0] == 'E') && isdigit((unsigned char)name[1])) return false;
  for (const char *s = name; *s; s++)
    if (!isalnum((unsigned char)*s) && *s != '_') return false;
  return strlen(name) <= NAME_MAX_BYTES; /* the most GLPK takes */
}

/* NULL when GLPK may have the model, else what is wrong with it. */
static const char *model_fault(const solver_model *m) {
  if (m->column_count < 1) return "the model has no column";
  if (!name_ok(m->name)) return "the model's name cannot be written to a file";
  for (int i = 0; i < m->row_count; i++) {
    if (!isfinite(m->rows[i].bound)) return "a row's bound is not finite";
    if (!name_ok(m->rows[i].name)) return "a row's name cannot be written to a file";
  }
  for (int j = 0; j < m->column_count; j++) {
    const solver_column *c = &m->columns[j];
    if (!isfinite(c->cost)) return "a column's cost is not finite";
    if (!isfinite(c->lower) || isnan(c->upper) || c->lower > c->upper)
      return "a column's bounds are wrong";
    if (c->binary && (c->lower < 0 || c->upper > 1)) return "a binary column's bounds are wrong";
    if (!name_ok(c->name)) return "a column's name cannot be written to a file";
  }
  for (int k = 0; k < m->entry_count; k++) {
    const solver_entry *e = &m->entries[k];
    if (e->row < 0 || e->row >= m->row_count || e->column < 0 || e->column >= m->column_count)
      return "an entry is outside of the matrix";
    if (!isfinite(e->value)) return "an entry is not finite";
  }
  return NULL;
}

/* Fills GLPK's view of the entries. */
static void prepare(arena *a, const solver_model *m, task *t) {
  size_t n = (size_t)m->entry_count + 1;
  t->model = m;
  t->row_of = arena_array(a, n, sizeof *t->row_of);
  t->column_of = arena_array(a, n, sizeof *t->column_of);
  t->value_of = arena_array(a, n, sizeof *t->value_of);
  for (int k = 0; k < m->entry_count; k++) {
    t->row_of[k + 1] = m->entries[k].row + 1;
    t->column_of[k + 1] = m->entries[k].column + 1;
    t->value_of[k + 1] = m->entries[k].value;
  }
}

static bool send(task *t) {
  pthread_t thread;
  if (pthread_create(&thread, NULL, errand, t) != 0) return false;
  pthread_join(thread, NULL);
  return true;
}

static void report_fault(diag_list *d, task *t, bool sent) {
  if (!sent) {
    diag_error(d, ERROR_SYSTEM_MEMORY, "no thread for the solver could be started");
    return;
  }
  for (size_t i = 0; i < t->talk_len; i++)
    if (t->talk[i] == '\n') t->talk[i] = ' ';
  while (t->talk_len > 0 && t->talk[t->talk_len - 1] == ' ') t->talk[--t->talk_len] = '\0';
  diag_error(d, ERROR_INTERNAL_SOLVER, "the solver gave no answer: %s",
             t->talk_len ? t->talk : "no reason given");
}

/* GLPK counts from 1. */
static double *counted_from_one(arena *a, const double *from, int n) {
  double *out = arena_array(a, (size_t)n + 1, sizeof *out);
  memcpy(out + 1, from, (size_t)n * sizeof *out);
  return out;
}

void solver_run_how(arena *a, diag_list *d, const solver_model *m, const solver_how *how,
                    solver_result *out) {
  *out = (solver_result){.status = SOLVER_FAILED, .bound = -HUGE_VAL};
  const char *fault = model_fault(m);
  if (fault) {
    diag_error(d, ERROR_INTERNAL_SOLVER, "%s", fault);
    return;
  }
  out->value = arena_array(a, (size_t)m->column_count, sizeof *out->value);
  task *t = arena_alloc(a, sizeof *t);
  prepare(a, m, t);
  t->how = how;
  if (how->start) t->start = counted_from_one(a, how->start, m->column_count);
  t->timed = how->seconds > 0;
  t->begun = clock_seconds();
  t->told_found = HUGE_VAL;
  t->told_bound = -HUGE_VAL;
  t->result = out;
  bool sent = send(t);
  if (!sent || t->state != TASK_DONE) out->status = SOLVER_FAILED;
  if (out->status == SOLVER_FAILED) report_fault(d, t, sent);
}

void solver_run(arena *a, diag_list *d, const solver_model *m, double seconds, solver_result *out) {
  solver_run_how(a, d, m, &(solver_how){.seconds = seconds}, out);
}

/* The bytes of GLPK's file, which is gone afterwards. NULL when it cannot be read; never jumps
 * while the file is open. */
static char *take_file(arena *a, const char *path, size_t *len) {
  FILE *f = fopen(path, "rb");
  (void)unlink(path);
  if (!f) return NULL;
  long size = fseek(f, 0, SEEK_END) == 0 ? ftell(f) : -1;
  rewind(f);
  char *bytes = size >= 0 ? arena_try(a, (size_t)size + 1) : NULL;
  *len = bytes ? fread(bytes, 1, (size_t)size, f) : 0;
  (void)fclose(f);
  if (size >= 0 && !bytes) arena_fail(a);
  return bytes;
}

/* GLPK reports no error when the disk is full; a whole file ends with this. */
static bool ends_well(const char *bytes, size_t len) {
  static const char end[] = "End\n";
  size_t n = sizeof end - 1;
  return len >= n && memcmp(bytes + len - n, end, n) == 0;
}

/* An empty file beside `path` for GLPK to write, for it takes only names. NULL when none can be
 * made. */
static char *make_part(arena *a, const char *path) {
  static const char ending[] = ".XXXXXX";
  size_t n = strlen(path);
  char *part = arena_alloc(a, n + sizeof ending);
  memcpy(part, path, n);
  memcpy(part + n, ending, sizeof ending);
  int fd = mkstemp(part);
  if (fd < 0) return NULL;
  (void)close(fd);
  return part;
}

bool solver_save(arena *a, diag_list *d, const solver_model *m, const char *path) {
  const char *fault = model_fault(m);
  if (fault) {
    diag_error(d, ERROR_INTERNAL_SOLVER, "%s", fault);
    return false;
  }
  task *t = arena_alloc(a, sizeof *t);
  prepare(a, m, t);
  t->save_path = make_part(a, path);
  if (!t->save_path) {
    diag_error(d, ERROR_SYSTEM_WRITE, "%s: no file can be made there", path);
    return false;
  }
  bool sent = send(t);
  size_t len = 0;
  char *bytes = take_file(a, t->save_path, &len);
  if (!sent) {
    report_fault(d, t, sent);
    return false;
  }
  if (t->state != TASK_DONE || !bytes || !ends_well(bytes, len)) {
    diag_error(d, ERROR_SYSTEM_WRITE, "%s: the model could not be written whole", path);
    return false;
  }
  return file_write(a, d, path, bytes, len);
}
