/* fringe.c - what the currents near an edge send back beyond those of physical optics
 *
 * theta is real or j times real, so p = (phi0 + theta)/2 and q = (phi0 - theta)/2 are two reals or each other's conjugate. Both functions
 * that are wanted, h(p) + h(q) and (h(p) - h(q))/sin theta, are real either way.
 */
#include "scatter/fringe.h"
#include "base/elementary.h"
#include <stdbool.h>

#define PI RG_SIN_PI_0
#define HALF_PER_ROOT_PI 0.28209479177387814347    /* 1/(2 sqrt(pi)) */

/* Under this |x| the power series of h stands for the difference of two cotangents, which loses a digit for each digit of x. The first
 * term left out, 2 x^9/93555, is under 2^-60. */
#define SERIES_BELOW 0.03

/* Exactly along a face the limit is taken from this far off it, rad. */
#define OFF_FACE 0x1p-26

typedef struct {
    double n, phi0;
    bool lit;
    bool real;              /* theta is real */
    double theta, sine;     /* |theta|, |sin theta| */
} fringe_angles;

static double sine_of(double x)
{
    double c, s;
    rg_cis_pi(x / PI, &c, &s);
    return s;
}

static double sinh_of(double y)
{
    const double e = rg_exp(y);
    return y < 0.1 ? y * (1.0 + y * y / 6.0 * (1.0 + y * y / 20.0 * (1.0 + y * y / 42.0 * (1.0 + y * y / 72.0)))) : 0.5 * (e - 1.0 / e);
}

/* cot(x + jy), y >= 0: (sin 2x - j sinh 2y)/(cosh 2y - cos 2x) with the denominator 2 (sin^2 x + sinh^2 y) */
static double complex cotangent(double x, double y)
{
    const double s = sine_of(x), sh = sinh_of(y), below = 2.0 * (s * s + sh * sh);
    return CMPLX(sine_of(2.0 * x) / below, -sinh_of(2.0 * y) / below);
}

/* Coefficients of the power series of cot x - cot(x/n)/n: x, x^3, x^5, x^7. */
static void series_of_h(double n, double c[4])
{
    const double m = 1.0 / (n * n);
    c[0] = -(1.0 - m) / 3.0;
    c[1] = -(1.0 - m * m) / 45.0;
    c[2] = -2.0 * (1.0 - m * m * m) / 945.0;
    c[3] = -(1.0 - m * m * m * m) / 4725.0;
}

/* (6.1) h(x) = lit cot x - cot(x/n)/n */
static double complex wedge_h(const fringe_angles *w, double x, double y)
{
    if (w->lit && x * x + y * y < SERIES_BELOW * SERIES_BELOW) {
        double c[4];
        series_of_h(w->n, c);
        const double complex u = CMPLX(x, y), z = u * u;
        return u * (c[0] + z * (c[1] + z * (c[2] + z * c[3])));
    }
    const double complex nth = cotangent(x / w->n, y / w->n) / w->n;
    return w->lit ? cotangent(x, y) - nth : -nth;
}

/* sin p sin q with p, q = (phi0 +- theta)/(2 n) */
static double sine_product(const fringe_angles *w, double n)
{
    const double half = 0.5 * w->phi0 / n, t = 0.5 * w->theta / n;
    const double s = sine_of(half), st = w->real ? sine_of(t) : sinh_of(t);
    return w->real ? (s - st) * (s + st) : s * s + st * st;
}

/* (h(p) - h(q))/sin theta, by cot p - cot q = -sin(p - q)/(sin p sin q); near q = 0, where the products of a lit face grow, by h itself. */
static double difference_quotient(const fringe_angles *w)
{
    const double half = 0.5 * w->phi0, t = 0.5 * w->theta, t2 = w->real ? t * t : -t * t;
    const bool q_small = w->real ? fabs(half - t) < SERIES_BELOW : half * half + t * t < SERIES_BELOW * SERIES_BELOW;
    if (w->lit && q_small && w->theta < SERIES_BELOW) {
        double c[4];
        series_of_h(w->n, c);
        const double a = half * half, ratio = w->theta == 0.0 ? 1.0 : w->theta / w->sine;
        return ratio * (c[0] + c[1] * (3.0 * a + t2) + c[2] * (5.0 * a * a + 10.0 * a * t2 + t2 * t2) +
                        c[3] * (7.0 * a * a * a + 35.0 * a * a * t2 + 21.0 * a * t2 * t2 + t2 * t2 * t2));
    }
    if (w->lit && q_small) return creal(wedge_h(w, half + t, 0.0) - wedge_h(w, half - t, 0.0)) / w->sine;
    const double nth = w->real ? sine_of(w->theta / w->n) : sinh_of(w->theta / w->n);
    const double ratio = w->theta == 0.0 ? 1.0 / w->n : nth / w->sine;
    return (w->lit ? -1.0 / sine_product(w, 1.0) : 0.0) + ratio / (w->n * sine_product(w, w->n));
}

static double sum_of_both(const fringe_angles *w)
{
    const double half = 0.5 * w->phi0, t = 0.5 * w->theta;
    return w->real ? creal(wedge_h(w, half + t, 0.0) + wedge_h(w, half - t, 0.0)) : 2.0 * creal(wedge_h(w, half, t));
}

/* (6.3) theta = arccos(-mu), j arcosh(-mu) for mu < -1; 1 - mu comes apart, for it is small near the face. */
static fringe_angles angles_of(double n, double phi0, double mu, double one_less_mu)
{
    fringe_angles w = {.n = n, .phi0 = phi0, .lit = phi0 > 0.0 && phi0 < PI, .real = mu >= -1.0};
    w.sine = sqrt(fabs(one_less_mu * (1.0 + mu)));
    w.theta = w.real ? rg_atan2(w.sine, -mu) : rg_log(w.sine - mu);
    return w;
}

/* (6.4) k P of one face for the transmit vector p, and its part of m: received along each of the view's two vectors. */
static void add_face(double n, const rg_edge_face *face, const rg_view *view, double complex m[2][2])
{
    vec3 s = view->s, q[2] = {view->h, view->v};
    double across = vec3_dot(s, face->into), over = vec3_dot(s, face->normal);
    const double end_on = across * across + over * over;
    if (end_on < 0x1p-80) return;                                       /* radar along the edge: nothing comes back */
    if (across > 0.0 && fabs(over) < OFF_FACE * across) {
        s = vec3_add(s, vec3_scale(face->normal, OFF_FACE * across - over));
        over = OFF_FACE * across;
        for (int i = 0; i < 2; i++) q[i] = vec3_sub(q[i], vec3_scale(s, vec3_dot(q[i], s)));
    }
    double phi0 = rg_atan2(over, across);
    if (phi0 < 0.0) phi0 += 2.0 * PI;
    if (phi0 > n * PI) return;                                          /* inside the body */

    const vec3 t = vec3_cross(face->into, face->normal);
    const double cb = -vec3_dot(s, t), sb2 = across * across + over * over, sb = sqrt(sb2);
    const double oblique = 2.0 * cb * cb / sb2, mu = across / sb - oblique;
    const double one_less_cos = across > 0.0 ? over * over / (sb * (sb + across)) : 1.0 - across / sb;
    const fringe_angles w = angles_of(n, phi0, mu, one_less_cos + oblique);
    const double a = difference_quotient(&w), b = -sum_of_both(&w);     /* A = -j a, B = b */
    const double u0 = 2.0 / n - (w.lit ? 2.0 : 0.0);
    for (int transmitted = 0; transmitted < 2; transmitted++) {
        const double ez = vec3_dot(q[transmitted], t);
        const double hz = vec3_dot(vec3_cross(q[transmitted], s), t);   /* (-s) x p */
        const double along = -ez * b + cb * hz * (-mu * a - u0);        /* over j */
        for (int received = 0; received < 2; received++)
            m[received][transmitted] += HALF_PER_ROOT_PI * (-hz * a / sb * vec3_dot(q[received], face->into) +
                                                            along / sb2 * vec3_dot(q[received], t));
    }
}

void rg_fringe(double n, const rg_edge_face face[2], const rg_view *view, double complex m[2][2])
{
    for (int i = 0; i < 4; i++) m[i / 2][i % 2] = 0.0;
    add_face(n, &face[0], view, m);
    add_face(n, &face[1], view, m);
    m[0][1] = m[1][0] = 0.5 * (m[0][1] + m[1][0]);
}
