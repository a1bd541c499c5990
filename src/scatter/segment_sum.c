/* segment_sum.c - the phase integral over many straight edges at one frequency */
#include "scatter/segment_sum.h"
#include "base/elementary.h"

#define PI RG_SIN_PI_0

RG_SEGMENT_SUM(rg_segment_sum_plain)
{
    double lane_re[RG_SEGMENT_WEIGHTS][RG_LANES] = {{0}}, lane_im[RG_SEGMENT_WEIGHTS][RG_LANES] = {{0}};
    for (size_t i = 0; i < n; i++) {
        const double q0 = p0_m[i] * q_per_m, q1 = p1_m[i] * q_per_m, half = (q1 - q0) * 0.5;
        double c, s, unused, sine;
        rg_cis_pi((q0 + q1) * 0.5, &c, &s);
        rg_cis_pi(half, &unused, &sine);
        const double a = half == 0.0 ? 1.0 : sine / (PI * half);
        for (int w = 0; w < RG_SEGMENT_WEIGHTS; w++) {
            lane_re[w][i % RG_LANES] += weight[w][i] * (c * a);
            lane_im[w][i % RG_LANES] += weight[w][i] * (s * a);
        }
    }
    for (int w = 0; w < RG_SEGMENT_WEIGHTS; w++) {
        sum[w][0] = fold_lanes(lane_re[w]);
        sum[w][1] = fold_lanes(lane_im[w]);
    }
}

RG_INLINE RG_SEGMENT_SUM(segment_sum)
{
    const f64x8 *p0 = (const void *)p0_m, *p1 = (const void *)p1_m, one = (f64x8){0} + 1.0;
    f64x8 lane_re[RG_SEGMENT_WEIGHTS] = {{0}}, lane_im[RG_SEGMENT_WEIGHTS] = {{0}};
    for (size_t i = 0; i < n / RG_LANES; i++) {
        const f64x8 q0 = p0[i] * q_per_m, q1 = p1[i] * q_per_m, half = (q1 - q0) * 0.5;
        const i64x8 zero = half == 0.0;
        f64x8 c, s, unused, sine;
        wide_cis_pi((q0 + q1) * 0.5, &c, &s);
        wide_cis_pi(half, &unused, &sine);
        const f64x8 a = wide_pick(zero, one, sine / wide_pick(zero, one, PI * half));
        for (int w = 0; w < RG_SEGMENT_WEIGHTS; w++) {
            const f64x8 *weights = (const void *)weight[w];
            lane_re[w] += weights[i] * (c * a);
            lane_im[w] += weights[i] * (s * a);
        }
    }
    for (int w = 0; w < RG_SEGMENT_WEIGHTS; w++) {
        sum[w][0] = fold_lanes((const double *)&lane_re[w]);
        sum[w][1] = fold_lanes((const double *)&lane_im[w]);
    }
}

static RG_SEGMENT_SUM(segment_sum_wide) { segment_sum(n, p0_m, p1_m, weight, q_per_m, sum); }
#if RG_HAS_X86
RG_TARGET("avx2") static RG_SEGMENT_SUM(segment_sum_avx2) { segment_sum(n, p0_m, p1_m, weight, q_per_m, sum); }
RG_TARGET("avx512f,avx512dq,avx512vl") static RG_SEGMENT_SUM(segment_sum_avx512) { segment_sum(n, p0_m, p1_m, weight, q_per_m, sum); }
#endif

rg_segment_sum_fn *rg_segment_sum_for(rg_cpu cpu)
{
    switch (cpu) {
#if RG_HAS_X86
    case RG_CPU_AVX512: return segment_sum_avx512;
    case RG_CPU_AVX2: return segment_sum_avx2;
#endif
    case RG_CPU_WIDE: return segment_sum_wide;
    default: return rg_segment_sum_plain;
    }
}
