/* check_range.c - lists from text: what is taken, and what is said of what is not */
#include "base/range.h"
#include "run.h"
#include <stdio.h>
#include <string.h>

START_TEST(lists)
{
    static const struct { rg_dimension dimension; const char *text; size_t n; double first, second, last; } good[] = {
        {RG_ANGLE, "0,15,30", 3, 0, 15, 30}, {RG_ANGLE, "-180:180:0.1", 3601, -180, -179.9, 180}, {RG_ANGLE, "0:1:0.3", 4, 0, 0.3, 0.9},
        {RG_FREQUENCY, "76GHz:81GHz/1001", 1001, 76e9, 76.005e9, 81e9}, {RG_FREQUENCY, "76:81:1GHz", 6, 76e9, 77e9, 81e9},
        {RG_ANGLE, "10:-10:-5", 5, 10, 5, -10}, {RG_ANGLE, "0,10:20:5,-3", 5, 0, 10, -3}, {RG_ANGLE, "5:5:1,6", 2, 5, 6, 6},
        {RG_ANGLE, " 1 , 2 ", 2, 1, 2, 2}, {RG_ANGLE, "1,\n 2\n", 2, 1, 2, 2}, {RG_ANGLE, "1:2/2", 2, 1, 2, 2}, {RG_ANGLE, "0:359.9:0.1", 3600, 0, 0.1, 359.9}};
    for (size_t i = 0; i < sizeof good / sizeof good[0]; i++) {
        rg_list list = {0};
        rg_error err = {{0}};
        ck_assert_msg(rg_take_list(&list, good[i].dimension, good[i].text, &err) == RG_OK, "%s: %s", good[i].text, err.text);
        ck_assert_msg(list.n == good[i].n, "%s: %zu values", good[i].text, list.n);
        ck_assert_double_eq(list.value[0], good[i].first);
        ck_assert_double_eq(list.value[1], good[i].second);
        ck_assert_double_eq(list.value[list.n - 1], good[i].last);
        rg_list_free(&list);
        ck_assert(list.n == 0 && !list.value);
    }
}
END_TEST

/* Each value of a range of decimals is the double nearest to the decimal. */
START_TEST(ranges_hit_their_decimals)
{
    rg_list list = {0};
    ck_assert(rg_take_list(&list, RG_ANGLE, "-180:180:0.01", NULL) == RG_OK);
    ck_assert_uint_eq(list.n, 36001);
    for (size_t i = 0; i < list.n; i++) {
        char text[32];
        const int hundredths = (int)i - 18000;
        snprintf(text, sizeof text, "%s%d.%02d", hundredths < 0 ? "-" : "", abs(hundredths) / 100, abs(hundredths) % 100);
        ck_assert_msg(list.value[i] == strtod(text, NULL), "%.17g for %s", list.value[i], text);
    }
    rg_list_free(&list);
}
END_TEST

START_TEST(bad_lists)
{
    static const struct { const char *text, *part; } bad[] = {
        {"", "nothing between"}, {"1,,2", "nothing between"}, {"1,", "nothing between"}, {"10:0:1", "10:0:1 runs downward, so its step has the wrong sign: write 10:0:-1"},
        {"0:10:-1", "write 0:10:1"}, {"7,5deg:0:+1", "5deg:0:+1 runs downward, so its step has the wrong sign: write 5deg:0:-1"}, {"0:1:0", "step of 0"}, {"0:1", "has no step"}, {"0:1:2:3", "no range"}, {"0/5", "no range"},
        {"0:1/0", "how many values"}, {"0:1/1", "a count of 2 or more"}, {"0:1/2.5", "how many values"}, {"0:1/x", "how many values"}, {"0:1/0x9", "how many values"},
        {"0:1e9:1e-3", "more than"}, {"0:1:1e-300", "more than"}, {"a", "not an angle"}, {"1:b:2", "not an angle"}, {"0:1:1:", "no range"},
        {"0:5000000:1,0:5000000:1", "more than"}, {"0:1/", "how many values"}, {"0 15 30", "by commas, such as 0,15,30"}, {"0..30", "START:STOP:STEP"},
        {"0:10-1:1", "START:STOP:STEP"}};
    for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
        rg_list list = {0};
        rg_error err = {{0}};
        ck_assert_msg(rg_take_list(&list, RG_ANGLE, bad[i].text, &err) == RG_BAD_VALUE, "%s was taken", bad[i].text);
        ck_assert_msg(strstr(err.text, bad[i].part), "%s: %s", bad[i].text, err.text);
        ck_assert(list.n == 0 && !list.value);
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("range");
    TCase *tests = tcase_create("range");
    tcase_add_test(tests, lists);
    tcase_add_test(tests, ranges_hit_their_decimals);
    tcase_add_test(tests, bad_lists);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
