/* wide.h - eight doubles at a time: two registers of AVX2, one of AVX-512, four of NEON, or plain code where there are none */
#ifndef RG_BASE_WIDE_H
#define RG_BASE_WIDE_H
#include "base/sum.h"
#include <stdint.h>

typedef double f64x8 __attribute__((vector_size(64), aligned(8), may_alias));
typedef int64_t i64x8 __attribute__((vector_size(64), aligned(8), may_alias));

#define RG_INLINE static inline __attribute__((always_inline))

/* Functions for one level of the processor; other processors have only the plain and the portable wide variants. */
#if defined(__x86_64__)
#define RG_TARGET(isa) __attribute__((target(isa)))
#define RG_HAS_X86 1
#else
#define RG_HAS_X86 0
#endif

RG_INLINE f64x8 wide_pick(i64x8 mask, f64x8 yes, f64x8 no) { return (f64x8)(((i64x8)yes & mask) | ((i64x8)no & ~mask)); }
RG_INLINE f64x8 wide_min(f64x8 a, f64x8 b) { return wide_pick(a < b, a, b); }
RG_INLINE f64x8 wide_max(f64x8 a, f64x8 b) { return wide_pick(a < b, b, a); }

#endif
