#include "base/checksum.h"

/* The polynomial of ISO 3309, lowest power first. */
static const uint32_t polynomial = UINT32_C(0xEDB88320);

uint32_t checksum_crc32(const char *bytes, size_t len) {
  enum { VALUES = 256, BITS = 8 };
  uint32_t step[VALUES], crc = UINT32_MAX;
  for (uint32_t i = 0; i < VALUES; i++) {
    step[i] = i;
    for (int k = 0; k < BITS; k++) step[i] = step[i] >> 1 ^ (step[i] & 1 ? polynomial : 0);
  }
  for (size_t i = 0; i < len; i++)
    crc = crc >> BITS ^ step[(crc ^ (unsigned char)bytes[i]) % VALUES];
  return ~crc;
}
