/* check_elementary.c - sine, cosine and logarithm against the C library's long doubles, and the eight lanes against the one */
#include "base/elementary.h"
#include "run.h"
#include <math.h>
#include <string.h>

static double awkward(size_t i)
{
    static const double fixed[] = {0.0, -0.0, 0.25, -0.25, 0.5, 1.0, 1.5, 2.0, -3.0, 0.75, 1e-300, 5e-324, -1e-17, 12345.5, 1e6 + 0.25,
                                   0.24999999999999997, 0.25000000000000006, -1e9 - 0.125, 4503599627370.75};
    const size_t n = sizeof fixed / sizeof fixed[0];
    return i < n ? fixed[i] : (drand48() - 0.5) * pow(10.0, (double)(i % 9) - 2.0);
}

START_TEST(cis_is_the_long_double_one)
{
    for (size_t i = 0; i < 200000; i++) {
        const double x = awkward(i);
        double c, s;
        rg_cis_pi(x, &c, &s);
        const long double turn = fmodl(x, 2.0L), pi = 3.141592653589793238462643383279502884L;
        ck_assert_msg(fabsl(cosl(pi * turn) - c) <= 0x1p-52L, "cos(pi %.17g) = %.17g", x, c);
        ck_assert_msg(fabsl(sinl(pi * turn) - s) <= 0x1p-52L, "sin(pi %.17g) = %.17g", x, s);
    }
}
END_TEST

START_TEST(quarter_turns_are_exact)
{
    static const double want[][3] = {{0, 1, 0}, {0.5, 0, 1}, {1, -1, 0}, {1.5, 0, -1}, {2, 1, 0}, {-0.5, 0, -1}, {-1, -1, 0}};
    for (size_t i = 0; i < sizeof want / sizeof want[0]; i++) {
        double c, s;
        rg_cis_pi(want[i][0], &c, &s);
        ck_assert_double_eq(c, want[i][1]);
        ck_assert_double_eq(s, want[i][2]);
    }
}
END_TEST

START_TEST(eight_lanes_give_the_bits_of_one)
{
    for (size_t block = 0; block < 5000; block++) {
        double x[8], c1[8], s1[8];
        f64x8 wide, c8, s8;
        for (size_t i = 0; i < 8; i++) {
            x[i] = awkward(8 * block + i);
            rg_cis_pi(x[i], &c1[i], &s1[i]);
        }
        memcpy(&wide, x, sizeof wide);
        wide_cis_pi(wide, &c8, &s8);
        ck_assert_mem_eq(&c8, c1, sizeof c1);
        ck_assert_mem_eq(&s8, s1, sizeof s1);
    }
}
END_TEST

START_TEST(log10_is_the_long_double_one)
{
    for (size_t i = 0; i < 200000; i++) {
        const double x = pow(10.0, (drand48() - 0.5) * 500.0);
        const long double want = log10l(x);
        ck_assert_msg(fabsl(rg_log10(x) - want) <= 0x1p-51L * fmaxl(fabsl(want), 1.0L), "log10(%.17g) = %.17g", x, rg_log10(x));
    }
    ck_assert_double_eq(rg_log10(1.0), 0.0);
}
END_TEST

START_TEST(exp_log_and_atan2_are_the_long_double_ones)
{
    for (size_t i = 0; i < 200000; i++) {
        const double x = (drand48() - 0.5) * (i % 2 ? 1400.0 : 2.0), y = (drand48() - 0.5) * 2.0, z = (drand48() - 0.5) * (i % 3 ? 2.0 : 1e-3);
        ck_assert_msg(fabsl(rg_exp(x) / expl(x) - 1.0L) <= 0x1p-50L, "exp(%.17g) = %.17g", x, rg_exp(x));
        ck_assert_msg(fabsl(rg_atan2(y, z) - atan2l(y, z)) <= 0x1p-50L, "atan2(%.17g, %.17g) = %.17g", y, z, rg_atan2(y, z));
        const double big = (double)expl(x);
        ck_assert_msg(fabsl(rg_log(big) - logl(big)) <= 0x1p-51L * fmaxl(fabsl(logl(big)), 1.0L), "log(%.17g) = %.17g", big, rg_log(big));
    }
    ck_assert_double_eq(rg_exp(0.0), 1.0);
    ck_assert_double_eq(rg_atan2(0.0, 0.0), 0.0);
    ck_assert_double_eq(rg_atan2(1.0, 0.0), 0.5 * RG_SIN_PI_0);
    ck_assert_double_eq(rg_atan2(0.0, -1.0), RG_SIN_PI_0);
    ck_assert_double_eq(rg_atan2(-1.0, 1.0), -0.25 * RG_SIN_PI_0);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("elementary");
    TCase *tests = tcase_create("elementary");
    tcase_add_test(tests, cis_is_the_long_double_one);
    tcase_add_test(tests, quarter_turns_are_exact);
    tcase_add_test(tests, eight_lanes_give_the_bits_of_one);
    tcase_add_test(tests, log10_is_the_long_double_one);
    tcase_add_test(tests, exp_log_and_atan2_are_the_long_double_ones);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
