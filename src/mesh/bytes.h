/* bytes.h - numbers of binary files, whatever the machine's own byte order */
#ifndef RG_MESH_BYTES_H
#define RG_MESH_BYTES_H
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>
#include <string.h>

static inline uint64_t rg_bytes_whole(const void *at, size_t n, bool big_endian)
{
    const unsigned char *b = at;
    uint64_t value = 0;
    for (size_t i = 0; i < n; i++) value = value << 8 | b[big_endian ? i : n - 1 - i];
    return value;
}

static inline float rg_bytes_single(const void *at, bool big_endian)
{
    const uint32_t bits = (uint32_t)rg_bytes_whole(at, 4, big_endian);
    float value;
    memcpy(&value, &bits, sizeof value);
    return value;
}

static inline double rg_bytes_double(const void *at, bool big_endian)
{
    const uint64_t bits = rg_bytes_whole(at, 8, big_endian);
    double value;
    memcpy(&value, &bits, sizeof value);
    return value;
}

#endif
