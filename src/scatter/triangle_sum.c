/* triangle_sum.c - the phase integral over many triangles at one frequency */
#include "scatter/triangle_sum.h"
#include "base/elementary.h"

/* Under this spread of the three phases (half turns; 0.47 rad) the series takes over: 13 terms leave 2^-55. */
#define SERIES_SPREAD 0.15
#define PI RG_SIN_PI_0

/* Coefficients (-1)^(m/2)/(m + 2)! of the series, m = 0 .. 12; even m is the real part, odd m the imaginary one. */
static const double inverse_factorial[13] = {
    1.0 / 2, 1.0 / 6, -1.0 / 24, -1.0 / 120, 1.0 / 720, 1.0 / 5040, -1.0 / 40320, -1.0 / 362880, 1.0 / 3628800, 1.0 / 39916800,
    -1.0 / 479001600, -1.0 / 6227020800.0, 1.0 / 87178291200.0};

/* Sum of j^m H_m/(m + 2)!, H_m the complete homogeneous polynomials of x0, x1, x2 with x0 + x1 + x2 = 0: H_m = -e2 H_(m-2) + e3 H_(m-3). */
static void series(double x0, double x1, double x2, double *re, double *im)
{
    const double e2 = x0 * x1 + x1 * x2 + x2 * x0, e3 = x0 * x1 * x2;
    double a = 1.0, b = 0.0, c = -e2;                       /* H_(m-3), H_(m-2), H_(m-1) */
    double even = inverse_factorial[0] + c * inverse_factorial[2], odd = 0.0;
    for (int m = 3; m < 13; m++) {
        const double next = e3 * a - e2 * b;
        if (m % 2) odd += next * inverse_factorial[m]; else even += next * inverse_factorial[m];
        a = b; b = c; c = next;
    }
    *re = even;
    *im = odd;
}

static double sinc_pi(double y)
{
    double c, s;
    rg_cis_pi(y, &c, &s);
    return y == 0.0 ? 1.0 : s / (PI * y);
}

static void integral(double q0, double q1, double q2, double *re, double *im)
{
    const double low01 = q0 < q1 ? q0 : q1, high01 = q0 < q1 ? q1 : q0;
    const double low = low01 < q2 ? low01 : q2, rest = low01 < q2 ? q2 : low01;
    const double middle = high01 < rest ? high01 : rest, high = high01 < rest ? rest : high01;
    const double spread = high - low;
    if (spread < SERIES_SPREAD) {
        const double centre = ((low + middle) + high) * (1.0 / 3.0);
        double even, odd, c, s;
        series(PI * (low - centre), PI * (middle - centre), PI * (high - centre), &even, &odd);
        rg_cis_pi(centre, &c, &s);
        *re = even * c - odd * s;
        *im = even * s + odd * c;
    } else {
        double c0, s0, c1, s1;
        rg_cis_pi((low + middle) * 0.5, &c0, &s0);
        rg_cis_pi((middle + high) * 0.5, &c1, &s1);
        const double a0 = sinc_pi((middle - low) * 0.5), a1 = sinc_pi((high - middle) * 0.5), scale = 1.0 / (PI * spread);
        *re = (s1 * a1 - s0 * a0) * scale;
        *im = (c0 * a0 - c1 * a1) * scale;
    }
}

RG_TRIANGLE_SUM(rg_triangle_sum_plain)
{
    double lane_re[RG_LANES] = {0}, lane_im[RG_LANES] = {0};
    for (size_t i = 0; i < n; i++) {
        double re, im;
        integral(p0_m[i] * q_per_m, p1_m[i] * q_per_m, p2_m[i] * q_per_m, &re, &im);
        lane_re[i % RG_LANES] += weight[i] * re;
        lane_im[i % RG_LANES] += weight[i] * im;
    }
    sum[0] = fold_lanes(lane_re);
    sum[1] = fold_lanes(lane_im);
}

RG_INLINE void wide_series(f64x8 x0, f64x8 x1, f64x8 x2, f64x8 *re, f64x8 *im)
{
    const f64x8 e2 = x0 * x1 + x1 * x2 + x2 * x0, e3 = x0 * x1 * x2;
    f64x8 a = (f64x8){0} + 1.0, b = {0}, c = -e2;
    f64x8 even = inverse_factorial[0] + c * inverse_factorial[2], odd = {0};
    for (int m = 3; m < 13; m++) {
        const f64x8 next = e3 * a - e2 * b;
        if (m % 2) odd += next * inverse_factorial[m]; else even += next * inverse_factorial[m];
        a = b; b = c; c = next;
    }
    *re = even;
    *im = odd;
}

RG_INLINE f64x8 wide_sinc_pi(f64x8 y)
{
    f64x8 c, s;
    wide_cis_pi(y, &c, &s);
    const f64x8 one = (f64x8){0} + 1.0;
    const i64x8 zero = y == 0.0;
    return wide_pick(zero, one, s / wide_pick(zero, one, PI * y));
}

RG_INLINE int any_lane(i64x8 mask)
{
    return (mask[0] | mask[1] | mask[2] | mask[3] | mask[4] | mask[5] | mask[6] | mask[7]) != 0;
}

RG_INLINE void wide_integral(f64x8 q0, f64x8 q1, f64x8 q2, f64x8 *re, f64x8 *im)
{
    const f64x8 low01 = wide_pick(q0 < q1, q0, q1), high01 = wide_pick(q0 < q1, q1, q0);
    const f64x8 low = wide_pick(low01 < q2, low01, q2), rest = wide_pick(low01 < q2, q2, low01);
    const f64x8 middle = wide_pick(high01 < rest, high01, rest), high = wide_pick(high01 < rest, rest, high01);
    const f64x8 spread = high - low;
    const i64x8 near = spread < SERIES_SPREAD;
    f64x8 near_re = {0}, near_im = {0}, far_re = {0}, far_im = {0};
    if (any_lane(near)) {
        const f64x8 centre = ((low + middle) + high) * (1.0 / 3.0);
        f64x8 even, odd, c, s;
        wide_series(PI * (low - centre), PI * (middle - centre), PI * (high - centre), &even, &odd);
        wide_cis_pi(centre, &c, &s);
        near_re = even * c - odd * s;
        near_im = even * s + odd * c;
    }
    if (any_lane(~near)) {
        f64x8 c0, s0, c1, s1;
        wide_cis_pi((low + middle) * 0.5, &c0, &s0);
        wide_cis_pi((middle + high) * 0.5, &c1, &s1);
        const f64x8 a0 = wide_sinc_pi((middle - low) * 0.5), a1 = wide_sinc_pi((high - middle) * 0.5);
        const f64x8 scale = 1.0 / (PI * wide_pick(near, (f64x8){0} + 1.0, spread));
        far_re = (s1 * a1 - s0 * a0) * scale;
        far_im = (c0 * a0 - c1 * a1) * scale;
    }
    *re = wide_pick(near, near_re, far_re);
    *im = wide_pick(near, near_im, far_im);
}

RG_INLINE RG_TRIANGLE_SUM(triangle_sum)
{
    const f64x8 *p0 = (const void *)p0_m, *p1 = (const void *)p1_m, *p2 = (const void *)p2_m, *w = (const void *)weight;
    f64x8 lane_re = {0}, lane_im = {0};
    for (size_t i = 0; i < n / RG_LANES; i++) {
        f64x8 re, im;
        wide_integral(p0[i] * q_per_m, p1[i] * q_per_m, p2[i] * q_per_m, &re, &im);
        lane_re += w[i] * re;
        lane_im += w[i] * im;
    }
    sum[0] = fold_lanes((const double *)&lane_re);
    sum[1] = fold_lanes((const double *)&lane_im);
}

static RG_TRIANGLE_SUM(triangle_sum_wide) { triangle_sum(n, p0_m, p1_m, p2_m, weight, q_per_m, sum); }
#if RG_HAS_X86
RG_TARGET("avx2") static RG_TRIANGLE_SUM(triangle_sum_avx2) { triangle_sum(n, p0_m, p1_m, p2_m, weight, q_per_m, sum); }
RG_TARGET("avx512f,avx512dq,avx512vl") static RG_TRIANGLE_SUM(triangle_sum_avx512)
{
    triangle_sum(n, p0_m, p1_m, p2_m, weight, q_per_m, sum);
}
#endif

rg_triangle_sum_fn *rg_triangle_sum_for(rg_cpu cpu)
{
    switch (cpu) {
#if RG_HAS_X86
    case RG_CPU_AVX512: return triangle_sum_avx512;
    case RG_CPU_AVX2: return triangle_sum_avx2;
#endif
    case RG_CPU_WIDE: return triangle_sum_wide;
    default: return rg_triangle_sum_plain;
    }
}
