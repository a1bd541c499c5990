/* check_triangle_sum.c - the integral of exp(j phi) over the unit simplex, against long-double quadrature; all variants the same bits */
#include "scatter/triangle_sum.h"
#include "run.h"
#include <gsl/gsl_integration.h>
#include <math.h>
#include <string.h>

enum { N = 64, POINTS = 96 };

/* Tensor Gauss-Legendre over the simplex by the map (x, y (1 - x)): independent of any closed form. Phases in half turns. */
static void quadrature(const double q[3], double out[2])
{
    gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc(POINTS);
    long double re = 0.0L, im = 0.0L;
    for (size_t i = 0; i < POINTS; i++)
        for (size_t k = 0; k < POINTS; k++) {
            double x, y, wx, wy;
            gsl_integration_glfixed_point(0.0, 1.0, i, &x, &wx, table);
            gsl_integration_glfixed_point(0.0, 1.0, k, &y, &wy, table);
            const double a = x, b = y * (1.0 - x), w = wx * wy * (1.0 - x);
            const long double phi = 3.141592653589793238462643L * ((long double)q[0] * (1.0 - a - b) + q[1] * a + q[2] * b);
            re += w * cosl(phi);
            im += w * sinl(phi);
        }
    gsl_integration_glfixed_table_free(table);
    out[0] = (double)re;
    out[1] = (double)im;
}

static void one(const double q[3], double out[2])
{
    double p[3][RG_LANES] = {{0}}, weight[RG_LANES] = {1.0};
    for (int i = 0; i < 3; i++) p[i][0] = q[i];
    rg_triangle_sum_plain(RG_LANES, p[0], p[1], p[2], weight, 1.0, out);
}

START_TEST(integral_is_the_quadrature)
{
    srand48(_i);
    for (int n = 0; n < 12; n++) {
        const double spread = pow(10.0, 4.5 * drand48() - 3.0), middle = 2000.0 * (drand48() - 0.5);
        double q[3], want[2], got[2];
        for (int i = 0; i < 3; i++) q[i] = middle + spread * (drand48() - 0.5);
        if (n % 3 == 0) q[1] = q[0];                                        /* phase constant along an edge */
        quadrature(q, want);
        one(q, got);
        for (int i = 0; i < 2; i++)
            ck_assert_msg(fabs(got[i] - want[i]) <= 2e-12, "phases %.17g %.17g %.17g half turns: %.17g, quadrature %.17g", q[0], q[1],
                          q[2], got[i], want[i]);                           /* 2e-12: pi 1000 times 2^-53 and a few roundings */
    }
}
END_TEST

START_TEST(no_step_at_the_seam_nor_anywhere)
{
    for (double spread = 0.02; spread < 0.6; spread *= 1.0009765625) {
        double q[3] = {0.3, 0.3 + spread, 0.3 + spread * drand48()}, a[2], b[2];
        one(q, a);
        q[1] += 1e-15;
        one(q, b);
        ck_assert_msg(hypot(a[0] - b[0], a[1] - b[1]) < 4e-15, "a step of %g at a spread of %.9g", hypot(a[0] - b[0], a[1] - b[1]), spread);
    }
}
END_TEST

START_TEST(equal_phases_give_half)
{
    static const double turn[] = {0.0, 0.5, 1.0, 1.5, 1e6};
    for (size_t i = 0; i < sizeof turn / sizeof turn[0]; i++) {
        double got[2];
        one((double[3]){turn[i], turn[i], turn[i]}, got);
        ck_assert_double_eq_tol(hypot(got[0], got[1]), 0.5, 1e-15);
    }
}
END_TEST

/* Random, and: equal phases, phases equal in pairs, -0.0, denormal, spreads around the seam, a lorry's side by a bolt. */
static void awkward(double p[3][N], double weight[N], unsigned seed)
{
    srand48(seed);
    for (int i = 0; i < N; i++) {
        const double spread = pow(10.0, 8.0 * drand48() - 6.0), middle = 20.0 * (drand48() - 0.5);
        for (int c = 0; c < 3; c++) p[c][i] = middle + spread * (drand48() - 0.5);
        if (i % 5 == 1) p[1][i] = p[0][i];
        if (i % 7 == 2) p[2][i] = p[1][i] = p[0][i];
        if (i % 11 == 3) { p[0][i] = -0.0; p[1][i] = 5e-324; p[2][i] = 0.0; }
        if (i % 13 == 4) { p[1][i] = p[0][i] + 0.15 / 513.7; p[2][i] = p[0][i]; }
        weight[i] = i % 17 == 5 ? 0.0 : drand48() * pow(10.0, -6.0 * drand48());
    }
}

START_TEST(every_variant_gives_the_plain_bits)
{
    static double p[3][N], weight[N], want[2], got[2];
    awkward(p, weight, (unsigned)_i);
    rg_triangle_sum_plain(N, p[0], p[1], p[2], weight, 513.7, want);
    for (rg_cpu cpu = RG_CPU_PLAIN; cpu <= rg_cpu_best(); cpu++) {
        rg_triangle_sum_for(cpu)(N, p[0], p[1], p[2], weight, 513.7, got);
        ck_assert_msg(memcmp(got, want, sizeof got) == 0, "%s: %a %a, plain %a %a, seed %d", rg_cpu_name(cpu), got[0], got[1], want[0],
                      want[1], _i);
    }
}
END_TEST

/* Bits change only in a commit that says so. */
START_TEST(digest_of_the_kernel)
{
    static double p[3][N], weight[N], got[2];
    for (int i = 0; i < N; i++) {
        for (int c = 0; c < 3; c++) p[c][i] = (double)((i * 37 + c * 101) % 97) / 64.0 - 0.625;
        weight[i] = (double)(i % 9 + 1) / 1024.0;
    }
    rg_triangle_sum_plain(N, p[0], p[1], p[2], weight, 3.7, got);
    ck_assert_msg(got[0] == 0x1.167c93c8d0c6bp-8 && got[1] == 0x1.0fe6350a3a6a8p-6, "%a %a", got[0], got[1]);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("triangle_sum");
    TCase *tests = tcase_create("triangle_sum");
    tcase_add_loop_test(tests, integral_is_the_quadrature, 0, 40);
    tcase_add_test(tests, no_step_at_the_seam_nor_anywhere);
    tcase_add_test(tests, equal_phases_give_half);
    tcase_add_loop_test(tests, every_variant_gives_the_plain_bits, 0, 200);
    tcase_add_test(tests, digest_of_the_kernel);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
