/* triangle_sum.h - the phase integral over many triangles at one frequency */
#ifndef RG_SCATTER_TRIANGLE_SUM_H
#define RG_SCATTER_TRIANGLE_SUM_H
#include "base/cpu.h"
#include "base/sum.h"
#include <stddef.h>

/* Sum over triangles of weight * Int exp(j phi) over the unit simplex, phi linear with the values pi q p0, pi q p1, pi q p2 at the
 * corners (the integral is 1/2 where phi is 0). docs/physics.md (2.2b): the second divided difference of -exp(jx) at the three
 * phases (Hermite and Genocchi), by two half-difference sincs where they are apart and by a Taylor series about the centroid where
 * they are not; both hold to some 2^-50 at the seam, and the result is smooth through every degenerate case.
 *
 *    n                     a multiple of RG_LANES, padded with triangles of weight 0
 *    p0_m, p1_m, p2_m[n]   two-way paths 2 s.r of the corners, m
 *    weight[n]             m^2
 *    q_per_m               half turns of phase for a metre of two-way path: 2 f/c
 *    sum[2]                out: real and imaginary part, m^2
 */
#define RG_TRIANGLE_SUM(name) void name(size_t n, const double p0_m[restrict], const double p1_m[restrict], \
                                        const double p2_m[restrict], const double weight[restrict], double q_per_m, \
                                        double sum[2])
typedef RG_TRIANGLE_SUM(rg_triangle_sum_fn);

RG_TRIANGLE_SUM(rg_triangle_sum_plain);     /* the definition; the others give its bits */

/* The variant for a processor's level. */
rg_triangle_sum_fn *rg_triangle_sum_for(rg_cpu cpu);

#endif
