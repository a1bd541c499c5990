/* lanes.h - as many floats and doubles at a time as one register has, and comparisons as bits
 *
 * Follows the instruction set that is on where this is included: see walk_avx2.c. One register at a time, because the compiler takes
 * comparisons of wider vectors apart lane by lane.
 */
#ifndef RG_BVH_LANES_H
#define RG_BVH_LANES_H
#include "base/wide.h"
#if defined(__SSE2__)
#include <immintrin.h>
#endif

#if defined(__AVX512DQ__)
enum { RG_FLOATS = 8, RG_DOUBLES = 8 };
#elif defined(__AVX__)
enum { RG_FLOATS = 8, RG_DOUBLES = 4 };
#else
enum { RG_FLOATS = 4, RG_DOUBLES = 2 };
#endif

typedef float floats __attribute__((vector_size(4 * RG_FLOATS), aligned(4), may_alias));
typedef double doubles __attribute__((vector_size(8 * RG_DOUBLES), aligned(8), may_alias));

RG_INLINE floats floats_at(const float *p) { return *(const floats *)p; }
RG_INLINE doubles doubles_at(const double *p) { return *(const doubles *)p; }
RG_INLINE floats floats_all(float x) { return x - (floats){0}; }
RG_INLINE doubles doubles_all(double x) { return x - (doubles){0}; }

/* min, max: a where it is the smaller (larger), else b, also where one is not a number.
 * floats_at_most, doubles_over, doubles_same: bit i is set where a <= b (a > b, a == b) in lane i. */
#if defined(__AVX__)
RG_INLINE floats floats_min(floats a, floats b) { return (floats)_mm256_min_ps((__m256)a, (__m256)b); }
RG_INLINE floats floats_max(floats a, floats b) { return (floats)_mm256_max_ps((__m256)a, (__m256)b); }
RG_INLINE uint32_t floats_at_most(floats a, floats b)
{
    return (uint32_t)_mm256_movemask_ps(_mm256_cmp_ps((__m256)a, (__m256)b, _CMP_LE_OQ));
}
#elif defined(__SSE2__)
RG_INLINE floats floats_min(floats a, floats b) { return (floats)_mm_min_ps((__m128)a, (__m128)b); }
RG_INLINE floats floats_max(floats a, floats b) { return (floats)_mm_max_ps((__m128)a, (__m128)b); }
RG_INLINE uint32_t floats_at_most(floats a, floats b) { return (uint32_t)_mm_movemask_ps(_mm_cmple_ps((__m128)a, (__m128)b)); }
#else
typedef int32_t float_mask __attribute__((vector_size(16)));
RG_INLINE floats floats_pick(float_mask m, floats yes, floats no) { return (floats)(((float_mask)yes & m) | ((float_mask)no & ~m)); }
RG_INLINE floats floats_min(floats a, floats b) { return floats_pick(a < b, a, b); }
RG_INLINE floats floats_max(floats a, floats b) { return floats_pick(a > b, a, b); }
RG_INLINE uint32_t floats_at_most(floats a, floats b)
{
    const float_mask m = (a <= b) & (float_mask){1, 2, 4, 8};
    return (uint32_t)(m[0] | m[1] | m[2] | m[3]);
}
#endif

#if defined(__AVX512DQ__)
RG_INLINE doubles doubles_min(doubles a, doubles b) { return (doubles)_mm512_min_pd((__m512d)a, (__m512d)b); }
RG_INLINE doubles doubles_max(doubles a, doubles b) { return (doubles)_mm512_max_pd((__m512d)a, (__m512d)b); }
RG_INLINE uint32_t doubles_over(doubles a, doubles b) { return _mm512_cmp_pd_mask((__m512d)a, (__m512d)b, _CMP_GT_OQ); }
RG_INLINE uint32_t doubles_same(doubles a, doubles b) { return _mm512_cmp_pd_mask((__m512d)a, (__m512d)b, _CMP_EQ_OQ); }
#elif defined(__AVX__)
RG_INLINE doubles doubles_min(doubles a, doubles b) { return (doubles)_mm256_min_pd((__m256d)a, (__m256d)b); }
RG_INLINE doubles doubles_max(doubles a, doubles b) { return (doubles)_mm256_max_pd((__m256d)a, (__m256d)b); }
RG_INLINE uint32_t doubles_over(doubles a, doubles b)
{
    return (uint32_t)_mm256_movemask_pd(_mm256_cmp_pd((__m256d)a, (__m256d)b, _CMP_GT_OQ));
}
RG_INLINE uint32_t doubles_same(doubles a, doubles b)
{
    return (uint32_t)_mm256_movemask_pd(_mm256_cmp_pd((__m256d)a, (__m256d)b, _CMP_EQ_OQ));
}
#elif defined(__SSE2__)
RG_INLINE doubles doubles_min(doubles a, doubles b) { return (doubles)_mm_min_pd((__m128d)a, (__m128d)b); }
RG_INLINE doubles doubles_max(doubles a, doubles b) { return (doubles)_mm_max_pd((__m128d)a, (__m128d)b); }
RG_INLINE uint32_t doubles_over(doubles a, doubles b) { return (uint32_t)_mm_movemask_pd(_mm_cmpgt_pd((__m128d)a, (__m128d)b)); }
RG_INLINE uint32_t doubles_same(doubles a, doubles b) { return (uint32_t)_mm_movemask_pd(_mm_cmpeq_pd((__m128d)a, (__m128d)b)); }
#else
typedef int64_t double_mask __attribute__((vector_size(16)));
RG_INLINE doubles doubles_pick(double_mask m, doubles yes, doubles no) { return (doubles)(((double_mask)yes & m) | ((double_mask)no & ~m)); }
RG_INLINE doubles doubles_min(doubles a, doubles b) { return doubles_pick(a < b, a, b); }
RG_INLINE doubles doubles_max(doubles a, doubles b) { return doubles_pick(a > b, a, b); }
RG_INLINE uint32_t double_bits(double_mask m) { return (uint32_t)((m[0] & 1) | (m[1] & 2)); }
RG_INLINE uint32_t doubles_over(doubles a, doubles b) { return double_bits(a > b); }
RG_INLINE uint32_t doubles_same(doubles a, doubles b) { return double_bits(a == b); }
#endif

#endif
