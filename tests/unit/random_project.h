/* Projects made from a seed, for the tests and the measurements of plan. */
#ifndef TESTS_RANDOM_PROJECT_H
#define TESTS_RANDOM_PROJECT_H

#include <string.h>

#include "base/text.h"
#include "search/types.h"

/* ---- dice ---- */

static uint32_t project_dice_state;
static inline unsigned project_dice(unsigned below) {
  project_dice_state = project_dice_state * 1664525u + 1013904223u;
  return (project_dice_state >> 8) % below;
}

/* ---- a project as text ---- */

/* What the walls of one class ask, as the columns of a schedule: target, fire, loadbearing, floors
 * above, noncombustible, fastening a and b, wet a and b, abuse a and b, thickness max, riser, head.
 */
static const char *const project_demands[] = {
    /* between dwellings, on each storey */
    "36,1 h,yes,3,,,,,,,,,,",
    "36,1 h,yes,2,,,,,,,,,,",
    "50,1 h,yes,1,,,,,,,,,,",
    "50,1 h,yes,0,,,,,,,,,,",
    "55,1 h,yes,1,,,,,,,,,,",
    "55,1 h,yes,0,,,,,,,,,,",
    "50,1 h,no,,,,,yes,yes,,,,,",
    "50,1 h,no,,,heavy,,,,,,,,",
    "50,1 h,no,,,heavy,heavy,,,,,,,",
    "55,1 h,no,,,,,,,,,,,",
    "60,1 h,no,,,,,,,,,,,",
    /* to corridors, stairs and shafts */
    "36,1 h,yes,2,,,,,,,yes,,,",
    "50,1 h,yes,1,,,,,,,yes,,,",
    "47,1 h,no,,,heavy,,,,,,,,",
    "50,2 h,no,,,,,,,,,,,",
    "45,2 h,no,,,,,,,,,165,,",
    "50,2 h,no,,strict,,,,,,,,,slip",
    /* within dwellings */
    "40,,yes,2,,,,,,,,,,",
    "40,,yes,1,,,,,,,,,,",
    "40,,no,,,,,,,,,,,",
    "40,,no,,,,,yes,,,,,,",
    "40,,no,,,heavy,,,,,,,,",
    "35,,no,,,,,,,,,124,,",
    "35,,no,,,,,yes,yes,,,,,",
    "44,,no,,,,,,yes,,,,89,",
    "30,,no,,,,,,,,,,,",
    /* shops, a school and what stands beside them */
    "50,1 h,no,,strict,,,,,,,,,slip",
    "50,1 h,no,,strict,heavy,,,,,,,,slip",
    "50,1 h,no,,strict,,,yes,,yes,,,,slip",
    "45,,no,,strict,,,,,yes,yes,,,slip",
    "45,,no,,strict,,,,,,yes,,,slip",
    "55,1 h,no,,strict,,,,,,,,,slip",
    "60,1 h,no,,strict,,,,,,,,,slip",
    "40,,no,,strict,,,,,,,,,",
    "40,,no,,strict,,,,,yes,,,,",
    "35,,no,,strict,,,,,,,,,",
    "45,1 h,no,,strict,,,,,,,,,",
    "50,,no,,strict,,,,,,,140,,",
    "45,,no,,strict,,heavy,,,,,,,",
    "50,1 h,no,,,,,,,yes,,,,",
};
enum { PROJECT_DEMANDS = sizeof project_demands / sizeof project_demands[0] };

/* A schedule of `rows` rows of up to `copies` walls, each of one of the `classes` demands
 * (indices), which may stand twice in the list. */
static inline const char *project_walls(arena *a, unsigned seed, int rows, unsigned copies,
                                        int classes, const int *demand) {
  text t;
  text_init(&t, a, (size_t)rows * 120 + 400);
  text_putf(&t,
            "id,storey,length,height,count,target,fire,loadbearing,floors_above,noncombustible,"
            "fastening_a,fastening_b,wet_a,wet_b,abuse_a,abuse_b,thickness_max_mm,riser_mm,head\n");
  project_dice_state = seed * 2654435761u + 99;
  for (int i = 0; i < rows; i++) {
    int c = i < classes ? i : (int)project_dice((unsigned)classes);
    unsigned tenths = 12 + project_dice(96); /* 1.2 to 10.7 m */
    const char *asked = project_demands[demand[c]];
    bool podium = strstr(asked, "strict") != NULL;
    text_putf(&t, "W%d,%s,%u.%um,%s,%u,%s\n", i + 1, podium ? "1" : "2", tenths / 10, tenths % 10,
              podium ? "3.6m" : "2.7m", 1 + project_dice(copies), asked);
  }
  return t.data;
}

/* Reads both; NULL after messages. `more` are further keys of the project, each with a comma
 * behind.
 */
static inline schedule *project_from(arena *a, diag_list *d, const catalog *c, const char *more,
                                     const char *walls, project *out) {
  const char *json = text_format(
      a, "{\"septum\":\"project/1\",\"units\":\"si\",\"code\":\"ibc\",%s\"walls\":\"walls.csv\"}",
      more);
  json_value *root = json_parse(a, d, "project.json", json, strlen(json));
  if (!root || !project_read(a, d, c, root, out)) return NULL;
  csv_table *t = csv_parse(a, d, "walls.csv", walls, strlen(walls));
  return t ? schedule_read(a, d, c, out, t) : NULL;
}

/* ---- small projects ---- */

/* Parts of the catalog for a small project, as patterns of `only`: goods of every kind that are
 * bought with a least order or breaks among them. */
static inline const char *project_only(arena *a) {
  static const char *const boards[] = {"typex-16", "gyp-13-light", "typec-13", "typex-13"};
  static const char *const special[] = {"abuse-16", "moist-16", "damp-16", "osb-11"};
  static const char *const frames[] = {"steel-92-18", "steel-92-43", "steel-64-33",
                                       "wood-89",     "wood-140",    "wood-89-double"};
  static const char *const fills[] = {"glass-89", "stone-89-dense", "cell-89", "glass-140"};
  return text_format(a, "\"only\":[\"%s\",\"%s\",\"%s\",\"%s\",\"%s\",\"%s\",\"mount:%s\"],",
                     boards[project_dice(4)], special[project_dice(4)], frames[project_dice(3)],
                     frames[3 + project_dice(3)], fills[project_dice(4)], fills[project_dice(4)],
                     project_dice(3) == 0 ? "rc" : "none-of-them");
}

/* Keys of the project that change what a type may be replaced by. */
static inline const char *project_rules(arena *a) {
  static const char *const framing[] = {"none", "none", "storey", "all"};
  text t;
  text_init(&t, a, 600);
  text_putf(&t, "\"quantity_breaks\":%s,", project_dice(4) ? "true" : "false");
  text_putf(&t, "\"same_framing\":\"%s\",", framing[project_dice(4)]);
  if (project_dice(2)) text_putf(&t, "\"max_types\":%u,", 1 + project_dice(3));
  if (project_dice(2)) text_putf(&t, "\"type_setup_cost\":%u,", 200 * project_dice(8));
  if (project_dice(4) == 0) text_putf(&t, "\"min_run_m\":%u,", 4 * project_dice(8));
  if (project_dice(2)) text_putf(&t, "\"floor_area_value_per_m2\":%u,", 400 * project_dice(9));
  if (project_dice(4) == 0)
    text_putf(&t, "\"stock\":[{\"item\":\"typex-16\",\"quantity\":%u,\"unit\":\"m2\"}],",
              100 * (1 + project_dice(9)));
  return t.data;
}

/* The project of a seed: up to `classes` demands that every one of a few walls may keep. */
static inline schedule *project_small(arena *a, diag_list *d, const catalog *c, unsigned seed,
                                      int classes, const char *more, project *out) {
  /* undemanding ones, so that small parts of the catalog have walls for them */
  static const int modest[] = {17, 18, 19, 20, 21, 22, 23, 25, 33, 34, 35, 29, 30};
  int demand[8];
  project_dice_state = seed * 2246822519u + 7;
  const char *keys = text_format(a, "%s%s%s", project_only(a), project_rules(a), more);
  for (int i = 0; i < classes; i++) demand[i] = modest[project_dice(13)];
  unsigned copies = project_dice(3) ? 3 : 40; /* enough for breaks to count */
  const char *walls = project_walls(a, seed, classes + 3, copies, classes, demand);
  return project_from(a, d, c, keys, walls, out);
}

#endif
