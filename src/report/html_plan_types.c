/* The page of `plan`: its types, which wall gets which, and what is asked of walls. */
#include "report/chart_plan.h"
#include "report/html_plan.h"
#include "report/view_brief.h"

static const char *number(html *h, int value) {
  return text_format(h->report->arena, "%d", value);
}

static const char *per_area(html *h, const plan_money *m, double area_m2) {
  const report *r = h->report;
  return view_cents(r, view_in_cents(view_per_area(r, view_plan_per_m2(m, area_m2))));
}

/* --- tables of types ------------------------------------------------------------------------- */

static const char *storeys_words(html *h, const plan_answer *p, const plan_used *u) {
  text t;
  text_init(&t, h->report->arena, 16 << 10);
  for (int s = 0; s < p->storey_count; s++) {
    int walls = 0;
    for (int i = 0; i < u->row_count; i++) {
      const schedule_wall *w = &p->schedule->wall[u->row[i]];
      if (text_equal(w->storey, p->storey[s].name)) walls += w->count;
    }
    if (walls > 0)
      text_putf(&t, "%s%s: %d", t.len ? ", " : "", html_storey(p->storey[s].name), walls);
  }
  return t.data;
}

static void put_where(html *h, const plan_answer *p) {
  static const html_column columns[] = {
      {"Type", HTML_ID},        {"Walls", HTML_FIGURE},     {"Rows", HTML_FIGURE},
      {"Run", HTML_FIGURE},     {"Area", HTML_FIGURE},      {"STC", HTML_FIGURE},
      {"Fire", HTML_FIGURE},    {"Thickness", HTML_FIGURE}, {"Floor", HTML_FIGURE},
      {"By storey", HTML_DATA}, {"Wall", HTML_LINE}};
  html_table(h, "Types and where they stand", columns, HTML_COUNT(columns));
  for (int i = 0; i < p->type_count; i++) {
    const plan_used *u = &p->type[i];
    html_row(h, HTML_CELLS(u->name, number(h, u->walls), number(h, u->row_count),
                           html_run(h, u->run_m), html_area(h, u->area_m2),
                           number(h, u->as->ratings.stc), html_fire_words(h, u->as),
                           html_thickness(h, u->as->thickness_m), html_area(h, u->floor_m2),
                           storeys_words(h, p, u), u->line));
  }
  html_table_end(h);
}

/* What the project would cost more without the type. */
static const char *without_words(html *h, const plan_answer *p, const plan_used *u) {
  const plan_point *w = &u->without;
  if (u->locked) return "kept";
  if (!w->done || (w->status == SOLVER_LIMIT && !w->found)) return "not known";
  if (!w->found) return "no plan";
  long long more = w->cost_cents - p->cost_cents;
  return text_format(h->report->arena, "%s%s%s", more >= 0 ? "+" : "", view_cents(h->report, more),
                     w->status == SOLVER_OPTIMAL ? "" : ", not proven");
}

static void put_money(html *h, const plan_answer *p) {
  const report *r = h->report;
  const html_column columns[] = {
      {"Type", HTML_ID},
      {text_format(r->arena, "%s per %s", r->prices->currency, view_area(r)), HTML_FIGURE},
      {"Walls", HTML_FIGURE},
      {"Goods", HTML_FIGURE},
      {"Set-up", HTML_FIGURE},
      {"Floor", HTML_FIGURE},
      {text_format(r->arena, "Together, %s", r->prices->currency), HTML_FIGURE},
      {"Without it", HTML_FIGURE},
      {"Types then", HTML_FIGURE}};
  html_table(h,
             "What each type costs, and what the project would cost more if it were not to be had",
             columns, HTML_COUNT(columns));
  for (int i = 0; i < p->type_count; i++) {
    const plan_used *u = &p->type[i];
    const plan_money *m = &u->money;
    bool known = !u->locked && u->without.done && u->without.found;
    html_row(h, HTML_CELLS(u->name, per_area(h, m, u->area_m2), view_cents(r, m->walls),
                           view_cents(r, m->goods), view_cents(r, m->setup),
                           view_cents(r, m->floor), view_cents(r, plan_money_total(m)),
                           without_words(h, p, u), known ? number(h, u->without.types) : NULL));
  }
  const plan_money *all = &p->money;
  html_row_as(h, "total",
              HTML_CELLS("total", NULL, view_cents(r, all->walls), view_cents(r, all->goods),
                         view_cents(r, all->setup), view_cents(r, all->floor),
                         view_cents(r, plan_money_total(all)), NULL, NULL));
  html_table_end(h);
}

static void put_chart(html *h, const plan_answer *p) {
  chart_plan_part *part = arena_array(h->report->arena, (size_t)p->type_count, sizeof *part);
  const char *id = html_picture_id(h);
  for (int i = 0; i < p->type_count; i++) {
    const plan_money *m = &p->type[i].money;
    part[i] = (chart_plan_part){p->type[i].name, m->walls, m->goods, m->setup, m->floor};
  }
  chart_plan_cost(h->report, id, "type", part, p->type_count, html_picture(h, HTML_CHART));
  html_picture_end(h, NULL);
}

/* --- cards and sheets ------------------------------------------------------------------------ */

static void put_card(html *h, const plan_used *u) {
  const report *r = h->report;
  html_box(h, "card");
  html_heading(h, u->name);
  html_line(h, u->line);
  html_figures(h);
  html_figure(h, "Rating", text_format(r->arena, "STC %d", u->as->ratings.stc),
              view_published(u->as, METRIC_STC) ? "published" : "predicted");
  html_figure(h, text_format(r->arena, "%s per %s", r->prices->currency, view_area(r)),
              per_area(h, &u->money, u->area_m2),
              text_format(r->arena, "%s in all", view_cents(r, plan_money_total(&u->money))));
  html_figure(h, "Thickness", html_thickness(h, u->as->thickness_m), NULL);
  html_figure(h, "Fire", html_fire_words(h, u->as), NULL);
  html_figure(h, "Run", html_run(h, u->run_m), view_plan_count(r, u->walls, "wall", "walls"));
  html_figure(h, "Height up to", html_height(h, u->as->height.limit_m), NULL);
  html_figures_end(h);
  html_wall_drawing(h, u->as, true);
  html_box_end(h);
}

static const char *classes_words(html *h, const plan_answer *p, int type) {
  text t;
  text_init(&t, h->report->arena, 4000);
  for (int c = 0; c < p->schedule->class_count; c++)
    if (p->place[c].type == type)
      text_putf(&t, "%s%s", t.len ? ", " : "", view_plan_class(h->report, c));
  return t.data;
}

/* All about one type, judged where its margin is least. */
static void put_sheet(html *h, const plan_answer *p, int type) {
  const plan_used *u = &p->type[type];
  const report *all = h->report;
  report own = view_plan_report(all, p, u->judged_as);
  const char *as_is = view_plan_ids(all, p, u->row, u->row_count, false);
  const char *mirrored = view_plan_ids(all, p, u->row, u->row_count, true);
  own.brief = u->demand;
  h->report = &own;
  html_group(h, u->name);
  html_line(h, u->line);
  html_facts(h);
  if (u->mark) html_fact_data(h, "Mark of the drawings", u->mark);
  html_fact(h, "Classes", classes_words(h, p, type));
  html_fact(h, u->demand->target_count > 0 ? "Hardest for" : "Longest run in",
            text_format(all->arena, "%s: %s", view_plan_class(all, u->judged_as),
                        view_plan_demand(all, p, u->judged_as)));
  if (as_is[0]) html_fact_data(h, "Walls", as_is);
  if (mirrored[0]) html_fact_data(h, "Walls, the other way round", mirrored);
  html_facts_end(h);
  html_brief_sheet(h, u->as);
  h->report = all;
}

void html_plan_types(html *h, const plan_answer *p) {
  if (!p->found) return;
  html_section(h, "The types");
  html_box(h, "cards");
  for (int i = 0; i < p->type_count; i++) put_card(h, &p->type[i]);
  html_box_end(h);
  put_where(h, p);
  put_chart(h, p);
  put_money(h, p);
  html_section_end(h);
  html_section(h, "The types one by one");
  for (int i = 0; i < p->type_count; i++) put_sheet(h, p, i);
  html_section_end(h);
}

/* --- which wall gets which ------------------------------------------------------------------- */

static void put_row(html *h, const plan_answer *p, int row) {
  const report *r = h->report;
  arena *a = r->arena;
  const schedule_wall *w = &p->schedule->wall[row];
  const plan_row *as = &p->row[row];
  const plan_place *at = &p->place[w->of_class];
  bool asked = p->schedule->classes[w->of_class].demand.target_count > 0;
  bool planned = as->type != PLAN_NONE;
  const char *sure =
      planned && asked
          ? text_format(a, "%s %%", view_sureness(r, view_plan_probability(p, w->of_class)))
          : NULL;
  html_row(h,
           HTML_CELLS(
               w->id, w->storey, w->from, w->to, number(h, w->count), html_height(h, w->length_m),
               html_height(h, w->height_m), planned ? p->type[as->type].name : "none",
               planned && as->mirrored ? "other way round" : NULL, view_plan_class(r, w->of_class),
               planned && asked ? text_of(a, at->margin_db, 2) : NULL, sure,
               planned && asked ? text_format(a, "%s %%", view_sureness(r, at->in_field)) : NULL,
               planned ? view_cents(r, as->list_cents) : NULL,
               planned ? view_cents(r, as->money.walls) : NULL,
               planned ? view_cents(r, as->money.goods) : NULL,
               planned ? view_cents(r, as->money.floor) : NULL, planned ? as->line : NULL));
}

void html_plan_schedule(html *h, const plan_answer *p) {
  static const html_column columns[] = {{"Wall", HTML_ID},
                                        {"Storey", HTML_DATA},
                                        {"From", HTML_DATA},
                                        {"To", HTML_DATA},
                                        {"Copies", HTML_FIGURE},
                                        {"Length", HTML_FIGURE},
                                        {"Height", HTML_FIGURE},
                                        {"Type", HTML_CODE},
                                        {"", HTML_CODE},
                                        {"Class", HTML_CODE},
                                        {"To spare, dB", HTML_FIGURE},
                                        {"How sure", HTML_FIGURE},
                                        {"in a field test", HTML_FIGURE},
                                        {"By itself", HTML_FIGURE},
                                        {"Walls", HTML_FIGURE},
                                        {"Goods", HTML_FIGURE},
                                        {"Floor", HTML_FIGURE},
                                        {"As built, side A towards From", HTML_LINE}};
  if (!p->found) return;
  html_section(h, "Which wall gets which type");
  html_paragraph(
      h, text_format(h->report->arena,
                     "Money in %s for all copies of a row: by itself at list prices, as `rate` "
                     "costs it; then its part of the plan, where goods are ordered together.",
                     h->report->prices->currency));
  html_table_as(h, "dense", "The schedule", columns, HTML_COUNT(columns));
  for (int i = 0; i < p->schedule->count; i++) put_row(h, p, i);
  html_table_end(h);
  html_section_end(h);
}

/* --- what is asked --------------------------------------------------------------------------- */

/* The fields of a class that the project's common ones do not say. */
static const char *own_words(html *h, const plan_answer *p, int of_class,
                             const view_brief *common) {
  report own = view_plan_report(h->report, p, of_class);
  view_brief *b = arena_alloc(own.arena, sizeof *b);
  text t;
  text_init(&t, own.arena, 64 << 10);
  view_brief_of(&own, CATALOG_NONE, b);
  for (int i = 0; i < b->count; i++) {
    const view_field *f = &b->field[i];
    bool said = text_equal(f->name, "Title") || text_equal(f->name, "Length");
    for (int k = 0; k < common->count && !said; k++)
      said = text_equal(f->name, common->field[k].name) &&
             text_equal(f->value, common->field[k].value);
    if (!said)
      text_putf(&t, "%s%s: %s%s", t.len ? "; " : "", f->name, f->value,
                f->usual ? " (default)" : "");
  }
  return t.data;
}

static const char *misses_words(html *h, const plan_answer *p, int of_class) {
  const plan_place *at = &p->place[of_class];
  text t;
  text_init(&t, h->report->arena, 4000);
  for (int i = 0; at->type != PLAN_NONE && i < at->wall->broken_count; i++)
    text_putf(&t, "%s%s", i ? ", " : "",
              rule_name(h->report->arena, &p->schedule->classes[of_class].demand,
                        at->wall->broke[i].rule));
  return t.data;
}

static void put_class(html *h, const plan_answer *p, int c, const view_brief *common) {
  const report *r = h->report;
  const schedule_class *k = &p->schedule->classes[c];
  const plan_place *at = &p->place[c];
  bool planned = at->type != PLAN_NONE;
  html_row(h, HTML_CELLS(view_plan_class(r, c), planned ? p->type[at->type].name : "none",
                         number(h, k->count), html_run(h, k->run_m), view_plan_demand(r, p, c),
                         own_words(h, p, c, common), k->basis, misses_words(h, p, c),
                         view_plan_all_ids(r, p, k->wall, k->count)));
}

void html_plan_classes(html *h, const plan_answer *p) {
  static const html_column columns[] = {
      {"Class", HTML_ID},         {"Type", HTML_CODE},
      {"Rows", HTML_FIGURE},      {"Run", HTML_FIGURE},
      {"Asks", HTML_WORDS},       {"Fields beyond the project's common ones", HTML_DATA},
      {"Comes from", HTML_WORDS}, {"Its type misses", HTML_WORDS},
      {"Walls", HTML_DATA}};
  view_brief *common = arena_alloc(h->report->arena, sizeof *common);
  view_brief_of(h->report, CATALOG_NONE, common);
  html_section(h, "What the walls must do");
  html_table_as(h, "dense", "Walls that ask the same, side A as the class has it", columns,
                HTML_COUNT(columns));
  for (int c = 0; c < p->schedule->class_count; c++) put_class(h, p, c, common);
  html_table_end(h);
  html_section_end(h);
}

void html_plan_unplanned(html *h, const plan_answer *p) {
  const report *all = h->report;
  if (p->unplanned_count == 0) return;
  html_section(h, "Walls without a type");
  for (int i = 0; i < p->unplanned_count; i++) {
    const plan_reason *why = &p->unplanned[i];
    const schedule_class *k = &p->schedule->classes[why->class_of];
    report own = view_plan_report(all, p, why->class_of);
    html_heading(h, text_format(all->arena, "Class %s", view_plan_class(all, why->class_of)));
    html_facts(h);
    html_fact_data(h, "Walls", view_plan_all_ids(all, p, k->wall, k->count));
    html_fact(h, "Asked", view_plan_demand(all, p, why->class_of));
    html_fact(h, "Reason", view_plan_reason(all, p, why));
    html_facts_end(h);
    if (!why->why) continue;
    h->report = &own;
    html_others(h, "Walls that come nearest, and what they fail", why->why->nearest,
                why->why->nearest_count, true);
    h->report = all;
  }
  html_section_end(h);
}
