/* A checksum that other tools know: tells editions of a file apart. Not a signature. */
#ifndef BASE_CHECKSUM_H
#define BASE_CHECKSUM_H

#include <stddef.h>
#include <stdint.h>

/* CRC-32 of ISO 3309 (HDLC) and gzip (RFC 1952, 8): that of "123456789" is CBF43926. */
uint32_t checksum_crc32(const char *bytes, size_t len);

#endif
