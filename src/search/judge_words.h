/* What a broken rule says to people. */
#ifndef SEARCH_JUDGE_WORDS_H
#define SEARCH_JUDGE_WORDS_H

#include "search/judge.h"

/* Fills out->broke from out->broken; everything else of `out` must stand. `why` holds a sentence
 * per fixed rule, NULL where there is none. */
void judge_say_broken(arena *a, const judge_context *x, const char *const why[RULE_FIXED_COUNT],
                      assessment *out);
/* Fills out->caution. */
void judge_say_cautions(arena *a, const judge_context *x, assessment *out);
/* Every record that a wall uses, each once, with `visit`; stops when it answers false. */
typedef bool (*judge_visit)(void *user, catalog_kind kind, int index);
void judge_records(const wall *w, judge_visit visit, void *user);

#endif
