/* elementary.h - sine, cosine and logarithm with the same bits on every processor
 *
 * The C library picks variants by processor and they differ in the last bit; a table must not. All are built of plain adds and
 * multiplies in one written order.
 */
#ifndef RG_BASE_ELEMENTARY_H
#define RG_BASE_ELEMENTARY_H
#include "base/wide.h"

/* Taylor coefficients of sin(pi r)/r and cos(pi r) in r^2. |r| <= 1/4, so what is left out is under 2^-57. */
#define RG_SIN_PI_0 3.14159265358979323846
#define RG_SIN_PI_1 -5.16771278004997002925
#define RG_SIN_PI_2 2.55016403987734544386
#define RG_SIN_PI_3 -0.599264529320792076888
#define RG_SIN_PI_4 0.0821458866111282287988
#define RG_SIN_PI_5 -0.00737043094571435077726
#define RG_SIN_PI_6 0.000466302805767612564421
#define RG_SIN_PI_7 -0.0000219153534478302158274
#define RG_SIN_PI_8 7.95205400147551278478e-7
#define RG_COS_PI_1 -4.93480220054467930942
#define RG_COS_PI_2 4.05871212641676821819
#define RG_COS_PI_3 -1.33526276885458949588
#define RG_COS_PI_4 0.235330630358893204542
#define RG_COS_PI_5 -0.0258068913900140600126
#define RG_COS_PI_6 0.00192957430940392304790
#define RG_COS_PI_7 -0.000104638104924845707118
#define RG_COS_PI_8 0.00000430306958703294700730

/* Added and taken away, it rounds a double under 2^50 to the nearest whole number, whose low bits then stand in the sum's. */
#define RG_ROUNDER 6755399441055744.0   /* 1.5 * 2^52 */

/* cos(pi x) and sin(pi x), |x| <= 2^49; error under 2^-52. A multiple of 1/2 gives 0, 1 and -1 exactly. */
void rg_cis_pi(double x, double *cos_pi_x, double *sin_pi_x);

/* log10(x) for finite x > 0, relative error under 2^-51 (absolute near 1). */
double rg_log10(double x);

/* e^x for |x| <= 700, relative error under 2^-50; natural logarithm of finite x > 0, as rg_log10; angle of (x, y) in -pi .. pi, 0 for
 * (0, 0), error under 2^-50. */
double rg_exp(double x);
double rg_log(double x);
double rg_atan2(double y, double x);

/* rg_cis_pi for eight values, same bits. */
RG_INLINE void wide_cis_pi(f64x8 x, f64x8 *cos_pi_x, f64x8 *sin_pi_x)
{
    const f64x8 t = (x + x) + RG_ROUNDER;
    const i64x8 quarter = (i64x8)t;
    const f64x8 r = x - (t - RG_ROUNDER) * 0.5;
    const f64x8 z = r * r;
    const f64x8 s = r * (RG_SIN_PI_0 + z * (RG_SIN_PI_1 + z * (RG_SIN_PI_2 + z * (RG_SIN_PI_3 + z * (RG_SIN_PI_4 +
                    z * (RG_SIN_PI_5 + z * (RG_SIN_PI_6 + z * (RG_SIN_PI_7 + z * RG_SIN_PI_8))))))));
    const f64x8 c = 1.0 + z * (RG_COS_PI_1 + z * (RG_COS_PI_2 + z * (RG_COS_PI_3 + z * (RG_COS_PI_4 + z * (RG_COS_PI_5 +
                    z * (RG_COS_PI_6 + z * (RG_COS_PI_7 + z * RG_COS_PI_8)))))));
    const i64x8 odd = -(quarter & 1);                       /* all bits where sine and cosine change places */
    const i64x8 sin_sign = (quarter & 2) << 62, cos_sign = ((quarter + 1) & 2) << 62;
    *cos_pi_x = (f64x8)((i64x8)wide_pick(odd, s, c) ^ cos_sign);
    *sin_pi_x = (f64x8)((i64x8)wide_pick(odd, c, s) ^ sin_sign);
}

#endif
