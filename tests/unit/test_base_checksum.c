/* The checksum beside values that its users publish. */
#include "base/checksum.h"

#include <check.h>
#include <stdlib.h>
#include <string.h>

static const struct crc_row {
  const char *bytes;
  uint32_t crc;
  const char *source;
} crc_rows[] = {
    {"123456789", 0xCBF43926, "ITU-T V.42 check value, as catalogued for CRC-32/ISO-HDLC"},
    {"", 0x00000000, "no bytes: the complement of the start value complemented"},
    {"a", 0xE8B7BE43, "zlib's crc32 of \"a\""},
    {"The quick brown fox jumps over the lazy dog", 0x414FA339, "the pangram, as zlib gives it"},
};

START_TEST(known_values) {
  const struct crc_row *row = &crc_rows[_i];
  uint32_t found = checksum_crc32(row->bytes, strlen(row->bytes));
  ck_assert_msg(found == row->crc, "%s: found %08x", row->source, (unsigned)found);
}
END_TEST

/* A CRC tells any two texts apart that differ in one bit. */
START_TEST(every_single_bit_counts) {
  char bytes[64];
  memset(bytes, 'x', sizeof bytes);
  uint32_t whole = checksum_crc32(bytes, sizeof bytes);
  for (size_t bit = 0; bit < 8 * sizeof bytes; bit++) {
    bytes[bit / 8] = (char)(bytes[bit / 8] ^ 1 << bit % 8);
    ck_assert_msg(checksum_crc32(bytes, sizeof bytes) != whole, "bit %zu", bit);
    bytes[bit / 8] = 'x';
  }
}
END_TEST

int main(void) {
  Suite *s = suite_create("checksum");
  TCase *t = tcase_create("crc32");
  tcase_add_loop_test(t, known_values, 0, sizeof crc_rows / sizeof crc_rows[0]);
  tcase_add_test(t, every_single_bit_counts);
  suite_add_tcase(s, t);
  SRunner *r = srunner_create(s);
  srunner_run_all(r, CK_NORMAL);
  int failed = srunner_ntests_failed(r);
  srunner_free(r);
  return failed == 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
