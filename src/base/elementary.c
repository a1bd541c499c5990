/* elementary.c - sine, cosine and logarithm with the same bits on every processor */
#include "base/elementary.h"
#include <math.h>
#include <string.h>

void rg_cis_pi(double x, double *cos_pi_x, double *sin_pi_x)
{
    const double t = (x + x) + RG_ROUNDER;
    int64_t quarter;
    memcpy(&quarter, &t, sizeof quarter);
    const double r = x - (t - RG_ROUNDER) * 0.5;
    const double z = r * r;
    const double s = r * (RG_SIN_PI_0 + z * (RG_SIN_PI_1 + z * (RG_SIN_PI_2 + z * (RG_SIN_PI_3 + z * (RG_SIN_PI_4 +
                     z * (RG_SIN_PI_5 + z * (RG_SIN_PI_6 + z * (RG_SIN_PI_7 + z * RG_SIN_PI_8))))))));
    const double c = 1.0 + z * (RG_COS_PI_1 + z * (RG_COS_PI_2 + z * (RG_COS_PI_3 + z * (RG_COS_PI_4 + z * (RG_COS_PI_5 +
                     z * (RG_COS_PI_6 + z * (RG_COS_PI_7 + z * RG_COS_PI_8)))))));
    const double cosine = quarter & 1 ? s : c, sine = quarter & 1 ? c : s;
    *cos_pi_x = (quarter + 1) & 2 ? -cosine : cosine;
    *sin_pi_x = quarter & 2 ? -sine : sine;
}

/* x = m 2^exponent with m within a factor sqrt(2) of 1: exponent, and log(m) = 2 artanh(u), |u| <= 0.1716; u^25/25 is under 2^-64 of u. */
static double log_of_mantissa(double x, int *exponent)
{
    double m = frexp(x, exponent);                          /* 0.5 <= m < 1 */
    if (m < 0.70710678118654752440) { m *= 2.0; (*exponent)--; }
    const double u = (m - 1.0) / (m + 1.0), z = u * u;
    double series = 0.0;
    for (int k = 23; k >= 1; k -= 2) series = series * z + 1.0 / k;
    return 2.0 * u * series;
}

double rg_log(double x)
{
    int exponent;
    const double rest = log_of_mantissa(x, &exponent);
    return exponent * 0.69314718055994530942 + rest;
}

double rg_log10(double x)
{
    int exponent;
    const double rest = log_of_mantissa(x, &exponent);
    return exponent * 0.30102999566398119521 + rest * 0.43429448190325182765;
}

double rg_exp(double x)
{
    const double log_2_high = 0x1.62e42fefap-1, log_2_low = 0x1.cf79abc9e3b3ap-40;    /* n times the first is exact */
    const double n = rint(x * 1.44269504088896340736);
    const double r = ((x - n * log_2_high) - n * log_2_low) * 0.0625;                /* |r| <= 0.0217: r^9/9! is under 2^-67 */
    double series = 0.0;
    for (int k = 8; k >= 1; k--) series = (series + 1.0) * (r / k);
    for (int i = 0; i < 4; i++) series = series * (series + 2.0);                    /* e^2r - 1 of e^r - 1 */
    return ldexp(1.0 + series, (int)n);
}

double rg_atan2(double y, double x)
{
    const double ay = fabs(y), ax = fabs(x);
    if (ax == 0.0 && ay == 0.0) return 0.0;
    const double pi = RG_SIN_PI_0;
    const double ratio = ay < ax ? ay / ax : ax / ay;
    /* atan(ratio) = atan(c) + atan((ratio - c)/(1 + ratio c)), c = 0, 1/4, 1/2, 3/4, 1: what is left is under 0.125, its power 19 under 2^-61 */
    static const double atan_c[] = {0.0, 0.24497866312686415417, 0.46364760900080611621, 0.64350110879328438680, 0.78539816339744830962};
    const int step = (int)(ratio * 4.0 + 0.5);
    const double c = 0.25 * step, u = (ratio - c) / (1.0 + ratio * c), z = u * u;
    double series = 0.0;
    for (int k = 19; k >= 1; k -= 2) series = 1.0 / k - z * series;
    double angle = atan_c[step] + u * series;
    if (ay >= ax) angle = 0.5 * pi - angle;
    if (x < 0.0) angle = pi - angle;
    return y < 0.0 ? -angle : angle;
}
