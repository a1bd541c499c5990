/* check_quantity.c - a number with its unit: what is taken, and what is said of what is not */
#include "base/quantity.h"
#include "run.h"
#include <locale.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

START_TEST(quantities)
{
    static const struct { rg_dimension dimension; const char *text; double want; } good[] = {
        {RG_FREQUENCY, "77GHz", 77e9}, {RG_FREQUENCY, "76.5e9Hz", 76.5e9}, {RG_FREQUENCY, "77e9", 77e9}, {RG_FREQUENCY, "24125 MHz", 24.125e9},
        {RG_LENGTH, "120mm", 0.12}, {RG_LENGTH, "0.5m", 0.5}, {RG_LENGTH, "25m", 25.0}, {RG_LENGTH, ".5", 0.5}, {RG_LENGTH, "2.", 2.0},
        {RG_LENGTH, "1ft", 0.3048}, {RG_LENGTH, "12in", 0.3048}, {RG_ANGLE, "-30", -30.0}, {RG_ANGLE, "3.14159265358979323846rad", 180.0},
        {RG_ANGLE, "+1e1deg", 10.0}, {RG_LEVEL, "-10dBsm", -10.0}, {RG_LEVEL, "3dB", 3.0}, {RG_NUMBER, "1e-3", 1e-3}};
    static const struct { rg_dimension dimension; const char *text, *part; } bad[] = {
        {RG_FREQUENCY, "", "such as 77GHz"}, {RG_FREQUENCY, "GHz", "such as 77GHz"}, {RG_FREQUENCY, "77 parsec", "GHz"},
        {RG_FREQUENCY, "77mm", "it takes Hz, kHz, MHz, GHz or THz"}, {RG_LENGTH, "nan", "such as 120mm"}, {RG_LENGTH, "inf", "such as 120mm"},
        {RG_LENGTH, "0x10", "'x10' is no unit"}, {RG_LENGTH, "1e999", "too large"}, {RG_FREQUENCY, "1e300GHz", "too large"},
        {RG_LENGTH, "1,5m", "',5m' is no unit"}, {RG_NUMBER, "5m", "no unit"}, {RG_LENGTH, "--5", "is not a length"}};
    for (size_t i = 0; i < sizeof good / sizeof good[0]; i++) {
        double got = NAN;
        rg_error err = {{0}};
        ck_assert_msg(rg_take_quantity(&got, good[i].dimension, good[i].text, &err) == RG_OK, "%s: %s", good[i].text, err.text);
        ck_assert_msg(fabs(got - good[i].want) <= 1e-15 * fabs(good[i].want), "%s: %.17g", good[i].text, got);
    }
    for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
        double got = 7.0;
        rg_error err = {{0}};
        ck_assert_msg(rg_take_quantity(&got, bad[i].dimension, bad[i].text, &err) == RG_BAD_VALUE, "%s was taken", bad[i].text);
        ck_assert_msg(strstr(err.text, bad[i].part), "%s: %s", bad[i].text, err.text);
        ck_assert_double_eq(got, 7.0);
    }
}
END_TEST

START_TEST(another_locale_changes_nothing)
{
    double got;
    setlocale(LC_ALL, "de_DE.UTF-8");                       /* where it is not installed this test is the one before */
    ck_assert(rg_take_quantity(&got, RG_LENGTH, "0.5m", NULL) == RG_OK && got == 0.5);
    setlocale(LC_ALL, "C");
}
END_TEST

/* 9mm is the double nearest to 0.009, as 9e-3 is: the C library's strtod says so. */
START_TEST(units_hit_their_decimals)
{
    static const struct { rg_dimension dimension; const char *unit; int exponent; } unit[] = {
        {RG_LENGTH, "mm", -3}, {RG_LENGTH, "cm", -2}, {RG_LENGTH, "um", -6}, {RG_LENGTH, "km", 3},
        {RG_FREQUENCY, "kHz", 3}, {RG_FREQUENCY, "MHz", 6}, {RG_FREQUENCY, "GHz", 9}, {RG_FREQUENCY, "THz", 12}};
    for (unsigned i = 1; i < 20000; i++) {
        char text[48], plain[48];
        double got = NAN;
        const double number = (double)(i * 2654435761u % 1000000007u) * 1e-7;
        snprintf(text, sizeof text, "%.11f%s", number, unit[_i].unit);
        snprintf(plain, sizeof plain, "%.11fe%d", number, unit[_i].exponent);
        ck_assert_int_eq(rg_take_quantity(&got, unit[_i].dimension, text, NULL), RG_OK);
        ck_assert_msg(got == strtod(plain, NULL), "%s: %.17g, not %.17g", text, got, strtod(plain, NULL));
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("quantity");
    TCase *tests = tcase_create("quantity");
    tcase_add_test(tests, quantities);
    tcase_add_test(tests, another_locale_changes_nothing);
    tcase_add_loop_test(tests, units_hit_their_decimals, 0, 8);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
