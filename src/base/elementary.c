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

double rg_log10(double x)
{
    int exponent;
    double m = frexp(x, &exponent);                         /* 0.5 <= m < 1 */
    if (m < 0.70710678118654752440) { m *= 2.0; exponent--; }
    /* log(m) = 2 artanh(u) with |u| <= 0.1716; u^25/25 is under 2^-64 of u */
    const double u = (m - 1.0) / (m + 1.0), z = u * u;
    double series = 0.0;
    for (int k = 23; k >= 1; k -= 2) series = series * z + 1.0 / k;
    const double log10_e = 0.43429448190325182765, log10_2 = 0.30102999566398119521;
    return exponent * log10_2 + 2.0 * u * series * log10_e;
}
