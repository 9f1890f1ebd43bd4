/* The shipped catalogs, opened for each test: what the tests of walls stand on. */
#ifndef TEST_SHOP_H
#define TEST_SHOP_H

#include <check.h>
#include <setjmp.h>

#include "wall/line.h"

static arena *memory;
static diag_list faults;
static const catalog *shop;
static jmp_buf out_of_memory;

static inline void setup(void) {
  memory = arena_create(0, &out_of_memory);
  diag_init(&faults, memory);
  shop = catalog_load(memory, &faults, TEST_ROOT "/catalogs");
  ck_assert_msg(shop != NULL, "the shipped catalogs load");
}

static inline void teardown(void) {
  arena_free(memory);
}

/* The wall of a line that must read. */
static inline wall parse(const char *line) {
  wall w;
  ck_assert_msg(line_parse(memory, &faults, shop, line, &w), "%s reads", line);
  return w;
}

#endif
