/* check_fringe.c - fringe coefficients of half planes and wedges against the exact solution less physical optics */
#include "scatter/fringe.h"
#include "run.h"
#include <math.h>

#define PI 3.14159265358979323846
#define ROOT_PI 1.77245385090551602730

/* A wedge of exterior angle n pi along y; face 0 is z = 0, x > 0, seen from above. */
static void wedge(double n, rg_edge_face face[2])
{
    const double a = n * PI;
    face[0] = (rg_edge_face){{1.0, 0.0, 0.0}, {0.0, 0.0, 1.0}};
    face[1] = (rg_edge_face){{cos(a), 0.0, sin(a)}, {sin(a), 0.0, -cos(a)}};
}

/* The radar at phi in the plane across the edge, from face 0 toward +z: h along y, v in the plane. */
static rg_view across(double phi) { return (rg_view){.s = {cos(phi), 0.0, sin(phi)}, .h = {0.0, 1.0, 0.0}, .v = {-sin(phi), 0.0, cos(phi)}}; }

/* Normal incidence: J. B. Keller's wedge coefficients (J. Opt. Soc. Am. 52, 1962) in the backscatter direction less the edge terms of
 * physical optics, tan(phi)/2 for each lit face (P. Ya. Ufimtsev, Method of Edge Waves, 1962). */
static void exact_less_optics(double n, double phi, double *f1, double *g1)
{
    const double c = cos(PI / n), scale = sin(PI / n) / n, same = scale / (c - 1.0), mirror = scale / (c - cos(2.0 * phi / n));
    const double other = n * PI - phi;
    const double optics = 0.5 * ((phi < PI ? tan(phi) : 0.0) + (other < PI ? tan(other) : 0.0));
    *f1 = same - mirror - optics;
    *g1 = same + mirror + optics;
}

START_TEST(normal_incidence_is_exact_less_optics)
{
    srand48(_i);
    for (int i = 0; i < 200; i++) {
        const double n = 1.02 + 0.98 * drand48(), phi = n * PI * drand48();
        rg_edge_face face[2];
        double f1, g1;
        double complex m[2][2];
        if (fabs(cos(phi)) < 0.02 || fabs(cos(n * PI - phi)) < 0.02) continue;     /* the reference is a difference of infinities there */
        wedge(n, face);
        const rg_view view = across(phi);
        rg_fringe(n, face, &view, m);
        exact_less_optics(n, phi, &f1, &g1);
        ck_assert_msg(cabs(m[0][0] - f1 / ROOT_PI) < 1e-11, "n %g phi %g deg: along %.15g, want %.15g", n, phi * 180 / PI, creal(m[0][0]), f1 / ROOT_PI);
        ck_assert_msg(cabs(m[1][1] + g1 / ROOT_PI) < 1e-11, "n %g phi %g deg: across %.15g, want %.15g", n, phi * 180 / PI, creal(m[1][1]), -g1 / ROOT_PI);
        ck_assert(cabs(m[0][1]) < 1e-14);
    }
}
END_TEST

/* Where physical optics and the exact solution are both infinite their difference is not: Ufimtsev's tables of f1 and g1 (P. Ya.
 * Ufimtsev, 1962), values recomputed from the closed form. */
START_TEST(values_at_the_infinities)
{
    static const struct { double n, phi_deg, f1, g1; } value[] = {
        {2.0, 0, 0.0, -1.0}, {2.0, 45, -0.292893, -0.707107}, {2.0, 90, -0.5, -0.5}, {2.0, 180, -1.0, 0.0},
        {1.5, 0, 0.0, -0.769800}, {1.5, 90, -0.577350, -0.192450}, {1.5, 135, -0.539601, -0.230200}, {1.5, 180, -0.577350, -0.192450},
        {5.0 / 3.0, 90, -0.533401, -0.338450}, {5.0 / 3.0, 135, -0.690734, -0.181117}};
    for (size_t i = 0; i < sizeof value / sizeof value[0]; i++) {
        rg_edge_face face[2];
        double complex m[2][2];
        const rg_view view = across(value[i].phi_deg * PI / 180.0);
        wedge(value[i].n, face);
        rg_fringe(value[i].n, face, &view, m);
        ck_assert_msg(fabs(creal(m[0][0]) * ROOT_PI - value[i].f1) < 1e-6, "n %g phi %g: f1 %.7f", value[i].n, value[i].phi_deg, creal(m[0][0]) * ROOT_PI);
        ck_assert_msg(fabs(-creal(m[1][1]) * ROOT_PI - value[i].g1) < 1e-6, "n %g phi %g: g1 %.7f", value[i].n, value[i].phi_deg, -creal(m[1][1]) * ROOT_PI);
    }
}
END_TEST

/* Oblique incidence: an edge of 100 mm along y at 77 GHz; computed from quadrature of the exact wedge currents less those of physical
 * optics along the diffracted rays (A. Michaeli, IEEE Trans. AP 34, 1986), amplitudes in metres, to the digits written. */
START_TEST(oblique_values)
{
    static const struct { double n, az_deg, el_deg, vv, hh, hv; } value[] = {
        {2.0, 180, 45, 1.652473e-2, -3.989423e-2, 0.0}, {2.0, 180, 90, 2.820948e-2, -2.820948e-2, 0.0}, {2.0, 0, 45, 3.989423e-2, -1.652473e-2, 0.0},
        {2.0, 150, 30, 8.540730e-5, -3.721504e-4, -1.053960e-4}, {2.0, 120, 20, -1.523145e-6, 9.788135e-5, 5.228661e-5},
        {1.5, 180, 45, 1.298762e-2, -3.044371e-2, 0.0}, {1.5, 180, 0, 1.085783e-2, -3.257350e-2, 0.0},
        {1.5, 150, 30, 6.840562e-5, -2.391989e-4, -1.084412e-4}, {1.5, 120, 20, 9.459744e-6, 4.962527e-5, 4.424633e-5}};
    const double k = 2.0 * PI * 77e9 / 299792458.0, length_m = 0.1;
    for (size_t i = 0; i < sizeof value / sizeof value[0]; i++) {
        rg_edge_face face[2];
        double complex m[2][2];
        const rg_view view = rg_view_of_deg(value[i].az_deg, value[i].el_deg);
        const double x = k * length_m * view.s.y, scale = length_m * (x == 0.0 ? 1.0 : sin(x) / x);
        wedge(value[i].n, face);
        rg_fringe(value[i].n, face, &view, m);
        ck_assert_double_eq_tol(creal(m[1][1]) * scale, value[i].vv, 1e-8);
        ck_assert_double_eq_tol(creal(m[0][0]) * scale, value[i].hh, 1e-8);
        ck_assert_double_eq_tol(creal(m[0][1]) * scale, value[i].hv, 1e-8);
    }
}
END_TEST

/* No aspect may blow up, nor jump but where a face passes from light to grazing: every direction of a fine grid, its boundaries included. */
START_TEST(finite_from_everywhere)
{
    static const double n[] = {2.0, 1.5, 5.0 / 3.0, 1.1, 1.001};
    rg_edge_face face[2];
    wedge(n[_i], face);
    for (int az = 0; az <= 720; az++)
        for (int el = -180; el <= 180; el++) {
            double complex m[2][2];
            const rg_view view = rg_view_of_deg(0.5 * az, 0.5 * el);
            rg_fringe(n[_i], face, &view, m);
            for (int i = 0; i < 4; i++)
                ck_assert_msg(cabs(m[i / 2][i % 2]) < 4.0, "n %g, az %g, el %g: %g", n[_i], 0.5 * az, 0.5 * el, cabs(m[i / 2][i % 2]));
        }
}
END_TEST

/* The branches of the code meet: small steps in aspect make small steps in the result. */
START_TEST(branches_meet)
{
    rg_edge_face face[2];
    srand48(_i);
    const double n = 1.1 + 0.9 * drand48();
    wedge(n, face);
    for (int i = 0; i < 20000; i++) {
        const double az = 360.0 * drand48(), el = 178.0 * drand48() - 89.0;
        double complex a[2][2], b[2][2];
        const rg_view here = rg_view_of_deg(az, el), there = rg_view_of_deg(az + 1e-9, el + 1e-9);
        rg_fringe(n, face, &here, a);
        rg_fringe(n, face, &there, b);
        for (int c = 0; c < 4; c++)
            ck_assert_msg(cabs(a[c / 2][c % 2] - b[c / 2][c % 2]) < 1e-6, "n %g az %.9f el %.9f: a step of %g", n, az, el, cabs(a[c / 2][c % 2] - b[c / 2][c % 2]));
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("fringe");
    TCase *tests = tcase_create("fringe");
    tcase_add_loop_test(tests, normal_incidence_is_exact_less_optics, 0, 20);
    tcase_add_test(tests, values_at_the_infinities);
    tcase_add_test(tests, oblique_values);
    tcase_add_loop_test(tests, finite_from_everywhere, 0, 5);
    tcase_add_loop_test(tests, branches_meet, 0, 10);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
