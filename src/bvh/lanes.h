/* lanes.h - eight floats at a time, and masks as bits: what the vector extensions of the compiler cannot say in one instruction
 *
 * Follows the instruction set that is on where this is included: see walk_avx2.c.
 */
#ifndef RG_BVH_LANES_H
#define RG_BVH_LANES_H
#include "base/wide.h"
#include <string.h>
#if defined(__SSE2__)
#include <immintrin.h>
#endif

typedef float f32x8 __attribute__((vector_size(32), aligned(4), may_alias));
typedef int32_t i32x8 __attribute__((vector_size(32), aligned(4), may_alias));

RG_INLINE f32x8 f32x8_all(float x) { return (f32x8){x, x, x, x, x, x, x, x}; }
RG_INLINE f64x8 f64x8_all(double x) { return (f64x8){x, x, x, x, x, x, x, x}; }

/* a where it is the larger (smaller), else b: also where one is not a number. */
#if defined(__AVX__)
RG_INLINE f32x8 f32x8_max(f32x8 a, f32x8 b) { return (f32x8)_mm256_max_ps((__m256)a, (__m256)b); }
RG_INLINE f32x8 f32x8_min(f32x8 a, f32x8 b) { return (f32x8)_mm256_min_ps((__m256)a, (__m256)b); }
RG_INLINE uint32_t f32x8_at_most(f32x8 a, f32x8 b)
{
    return (uint32_t)_mm256_movemask_ps(_mm256_cmp_ps((__m256)a, (__m256)b, _CMP_LE_OQ));
}
#else
RG_INLINE f32x8 f32x8_pick(i32x8 mask, f32x8 yes, f32x8 no) { return (f32x8)(((i32x8)yes & mask) | ((i32x8)no & ~mask)); }
RG_INLINE f32x8 f32x8_max(f32x8 a, f32x8 b) { return f32x8_pick(a > b, a, b); }
RG_INLINE f32x8 f32x8_min(f32x8 a, f32x8 b) { return f32x8_pick(a < b, a, b); }
RG_INLINE uint32_t f32x8_at_most(f32x8 a, f32x8 b)
{
    const i32x8 mask = a <= b;
    uint32_t bits = 0;
    for (int i = 0; i < 8; i++) bits |= (uint32_t)(mask[i] & 1) << i;
    return bits;
}
#endif

/* Bit i is set where lane i's mask is. */
RG_INLINE uint32_t i64x8_bits(i64x8 mask)
{
#if defined(__AVX512DQ__)
    return (uint32_t)_mm512_movepi64_mask((__m512i)mask);
#elif defined(__AVX__)
    union { i64x8 all; __m256d half[2]; } m = {mask};
    return (uint32_t)(_mm256_movemask_pd(m.half[0]) | _mm256_movemask_pd(m.half[1]) << 4);
#else
    uint32_t bits = 0;
    for (int i = 0; i < 8; i++) bits |= (uint32_t)(mask[i] & 1) << i;
    return bits;
#endif
}

#endif
