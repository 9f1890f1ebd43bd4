/* All legal walls of a brief as cores x pairs of leaves; nothing is stored per wall. */
#ifndef SEARCH_SPACE_H
#define SEARCH_SPACE_H

#include "search/judge.h"

/* The support of a leaf: what decides whether a leaf may be screwed there. */
typedef struct space_support {
  int spacing_mm, mil; /* studs: 0 under a mount */
  wall_mount mount;
} space_support;

typedef struct space {
  const judge_context *context;
  face *faces;
  int face_count; /* leaves that may stand at a room, those with the same face board together */
  wall *cores;
  int core_count;   /* frame, spacing, gap, fills, mounts */
  bool mirror_once; /* both rooms ask the same: one of two mirror images is enumerated */
  bool *own_mirror; /* per core, with mirror_once: its mirror image is itself, so of two leaves the
                       first stands on A */
  int *support[2];  /* per core and side: index into supports */
  space_support *supports;
  int support_count;
  bool *on_support; /* support_count x face_count */
  bool *pair;       /* face_count x face_count: may stand opposite */
  unsigned short *partner; /* the same as lists: faces partner[partner_first[i]] .. before
                       partner[partner_first[i + 1]], rising, may stand opposite i */
  int *partner_first;
  int threads; /* that may work on it (base/threads.h); 0, as built: as many as there are */
  const char **face_text,
      **core_text; /* pieces of the wall line: a face; what stands between the faces */
} space;

/* What the rooms on both sides ask of the axes. */
typedef struct space_wish {
  bool finishes_mixed;  /* some room is wet or abused: such boards may stand over plain ones */
  bool finishes_differ; /* and not all are alike in it: the sides may have different boards */
  bool mirror_once;     /* one of two mirror images stands for both */
} space_wish;

/* What one brief asks. */
space_wish space_wishes(const brief *b);
/* As space_build, for the rooms of several briefs; of the context's brief only build and `only`
 * matter. */
void space_build_for(arena *a, const judge_context *x, const space_wish *wish, space *out);
/* Builds the axes after `only`, `without` (kept, as rules), build and compatibility. */
void space_build(arena *a, const judge_context *x, space *out);
/* The whole catalog under one rule for leaves: 1 to 3 boards, n equal finish boards, alone or over one
 * backing board, with at most one membrane; any core and any pair that is legal. Of the brief's
 * `build` and stock nothing is asked. Some 10^9 walls: for searches that do not look at each. */
void space_build_whole(arena *a, const judge_context *x, space *out);
/* Whether face i on A and j on B may stand on core k. */
bool space_legal(const space *s, int core, int face_a, int face_b);
/* The faces, rising, that may stand on B when face_a stands on A of a core: fills `face_b` (face_count
 * places) and returns how many. */
int space_row(const space *s, int core, int face_a, int *face_b);
wall space_wall(const space *s, int core, int face_a, int face_b);
/* Order of two walls' lines, as strings. */
int space_compare_lines(const space *s, int core, int face_a, int face_b, int other_core,
                        int other_a, int other_b);
/* How many legal walls. */
long long space_count(const space *s);

#endif
