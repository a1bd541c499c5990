/* check_segment_sum.c - the integral of exp(j phi) along edges, against long-double quadrature; all variants the same bits */
#include "scatter/segment_sum.h"
#include "run.h"
#include <gsl/gsl_integration.h>
#include <math.h>
#include <string.h>

enum { N = 64, POINTS = 256 };       /* a count whose nodes GSL has tabulated in full precision */

/* Gauss-Legendre over the edge, phases in half turns at its ends. */
static void quadrature(double q0, double q1, double out[2])
{
    gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc(POINTS);
    long double re = 0.0L, im = 0.0L;
    for (size_t i = 0; i < POINTS; i++) {
        double t, w;
        gsl_integration_glfixed_point(0.0, 1.0, i, &t, &w, table);
        const long double phi = 3.141592653589793238462643L * (q0 + (long double)t * (q1 - q0));
        re += w * cosl(phi);
        im += w * sinl(phi);
    }
    gsl_integration_glfixed_table_free(table);
    out[0] = (double)re;
    out[1] = (double)im;
}

START_TEST(integral_is_the_quadrature)
{
    srand48(_i);
    for (int n = 0; n < 40; n++) {
        const double spread = n % 8 == 0 ? 0.0 : pow(10.0, 7.0 * drand48() - 5.0), q0 = 2000.0 * (drand48() - 0.5), q1 = q0 + spread * (drand48() - 0.5);
        double p0[RG_LANES] = {q0}, p1[RG_LANES] = {q1}, w[RG_SEGMENT_WEIGHTS][RG_LANES] = {{1.0}, {-2.0}, {0.0}}, want[2], got[RG_SEGMENT_WEIGHTS][2];
        double *const weight[RG_SEGMENT_WEIGHTS] = {w[0], w[1], w[2]};
        rg_segment_sum_plain(RG_LANES, p0, p1, weight, 1.0, got);
        quadrature(q0, q1, want);
        for (int i = 0; i < 2; i++) {
            ck_assert_msg(fabs(got[0][i] - want[i]) <= 2e-12, "%.17g to %.17g half turns: %.17g, quadrature %.17g", q0, q1, got[0][i], want[i]);
            ck_assert(got[1][i] == -2.0 * got[0][i] && got[2][i] == 0.0);
        }
    }
}
END_TEST

/* Random, and: end-on (equal phases), -0.0, denormal, hair's breadths, a lorry's edge by a bolt's. */
START_TEST(every_variant_gives_the_plain_bits)
{
    static double p[2][N], w[RG_SEGMENT_WEIGHTS][N], want[RG_SEGMENT_WEIGHTS][2], got[RG_SEGMENT_WEIGHTS][2];
    double *const weight[RG_SEGMENT_WEIGHTS] = {w[0], w[1], w[2]};
    srand48(_i);
    for (int i = 0; i < N; i++) {
        p[0][i] = 20.0 * (drand48() - 0.5);
        p[1][i] = p[0][i] + pow(10.0, 18.0 * drand48() - 17.0) * (drand48() - 0.5);
        if (i % 5 == 1) p[1][i] = p[0][i];
        if (i % 11 == 3) { p[0][i] = -0.0; p[1][i] = 5e-324; }
        for (int k = 0; k < RG_SEGMENT_WEIGHTS; k++) w[k][i] = i % 17 == 5 ? 0.0 : (drand48() - 0.5) * pow(10.0, -6.0 * drand48());
    }
    rg_segment_sum_plain(N, p[0], p[1], weight, 513.7, want);
    for (rg_cpu cpu = RG_CPU_PLAIN; cpu <= rg_cpu_best(); cpu++) {
        rg_segment_sum_for(cpu)(N, p[0], p[1], weight, 513.7, got);
        ck_assert_msg(memcmp(got, want, sizeof got) == 0, "%s, seed %d", rg_cpu_name(cpu), _i);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("segment_sum");
    TCase *tests = tcase_create("segment_sum");
    tcase_add_loop_test(tests, integral_is_the_quadrature, 0, 40);
    tcase_add_loop_test(tests, every_variant_gives_the_plain_bits, 0, 200);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
