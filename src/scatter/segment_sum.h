/* segment_sum.h - the phase integral over many straight edges at one frequency */
#ifndef RG_SCATTER_SEGMENT_SUM_H
#define RG_SCATTER_SEGMENT_SUM_H
#include "base/cpu.h"
#include "base/sum.h"
#include <stddef.h>

enum { RG_SEGMENT_WEIGHTS = 3 };    /* hh, vv, and hv with vh */

/* Sums over segments of weight * exp(j phi_mean) sinc(phi_half), docs/physics.md (6.5), for three weights at once: phi_mean and phi_half
 * are half the sum and half the difference of the phases pi q p0 and pi q p1 at the ends.
 *
 *    n                  a multiple of RG_LANES, padded with segments of weight 0
 *    p0_m, p1_m[n]      two-way paths 2 s.r of the ends, m
 *    weight[3][n]       m
 *    q_per_m            half turns of phase for a metre of two-way path: 2 f/c
 *    sum[3][2]          out: real and imaginary parts, m
 */
#define RG_SEGMENT_SUM(name) void name(size_t n, const double p0_m[restrict], const double p1_m[restrict], \
                                       double *const weight[RG_SEGMENT_WEIGHTS], double q_per_m, double sum[RG_SEGMENT_WEIGHTS][2])
typedef RG_SEGMENT_SUM(rg_segment_sum_fn);

RG_SEGMENT_SUM(rg_segment_sum_plain);     /* the definition; the others give its bits */

rg_segment_sum_fn *rg_segment_sum_for(rg_cpu cpu);

#endif
