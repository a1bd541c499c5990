/* check_table.c - numbers as the C library would print and read them, tables there and back, and what is said of bad ones */
#include "base/level.h"
#include "run.h"
#include "table/decimal.h"
#include "table/table.h"
#include <locale.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

/* Doubles of every size, and those that lie halfway between two texts or beside it. */
static double awkward(int i, double largest)
{
    static const double fixed[] = {0.0, 1.0, -1.0, 0.5, 1.5, 0.25, 0.125, 9.9999999999995, 9.99999999999949, 99.99999995, 0.00000005, 0.00000015,
                                   1e-14, 9.999999999999e-15, 5e-324, 2.2250738585072014e-308, 1e-10, 1e-15, 0.1, 0.3, 0.30000000000000004,
                                   77e9, 76.5e9, 76004999999.999985, 1e15, 123456789012345680.0, 1e22, -200.0, -199.99999995, 359.9, 1e-7,
                                   1.0000000000005, 2.0000000000015, 1024.0 + 1.0 / 1024, 1e12, 999999999999.95, 4503599627370497.5};
    const int n = sizeof fixed / sizeof fixed[0];
    if (i < n) return fabs(fixed[i]) < largest ? fixed[i] : 0.0;
    const double sign = i % 2 ? 1.0 : -1.0;
    switch (i % 6) {
    case 0: return sign * drand48() * 300.0;
    case 1: return sign * pow(10.0, -20.0 * drand48());
    case 2: return sign * (double)(lrand48() % 4000000) / 4096.0;              /* binary fractions: exact halves among them */
    case 3: return sign * (double)(lrand48() % 3600000) * 1e-4;
    case 4: return sign * nextafter((double)(lrand48() % 100000) * 1e-5, i);
    default: return sign * fmin(pow(10.0, 330.0 * drand48() - 310.0), 0.9 * largest);
    }
}

static const char *without_sign_of_zero(const char *text) { return text[0] == '-' && strspn(text, "-0.e+") == strlen(text) ? text + 1 : text; }

START_TEST(numbers_are_printed_as_the_c_library_does)
{
    for (int i = 0; i < 300000; i++) {
        char got[RG_DECIMAL_ROOM + 1], want[80];
        const double level = awkward(i, 1e9), v = awkward(i, INFINITY);
        *rg_put_level(got, level) = 0;
        snprintf(want, sizeof want, "%.7f", level);
        ck_assert_str_eq(got, without_sign_of_zero(want));
        *rg_put_amplitude(got, v) = 0;
        snprintf(want, sizeof want, "%.12e", v);
        ck_assert_str_eq(got, without_sign_of_zero(want));
    }
}
END_TEST

static int figures_of(const char *text)
{
    int n = 0, zeros = 0;
    for (; *text && *text != 'e'; text++) {
        if (*text < '0' || *text > '9' || (n == 0 && *text == '0')) continue;
        n++;
        zeros = *text == '0' ? zeros + 1 : 0;
    }
    return n - zeros;
}

START_TEST(the_shortest_text_reads_back_as_the_same_double)
{
    for (int i = 0; i < 300000; i++) {
        char got[RG_DECIMAL_ROOM + 1], fifteen[80];
        const double v = awkward(i, INFINITY);
        *rg_put_shortest(got, v) = 0;
        ck_assert_msg(strtod(got, NULL) == v, "%a is written %s", v, got);
        snprintf(fifteen, sizeof fifteen, "%.15g", v);
        if (strtod(fifteen, NULL) == v) ck_assert_msg(figures_of(got) <= figures_of(fifteen), "%s where %s would do", got, fifteen);
        double back;
        if (rg_get_decimal(&back, got)) ck_assert_msg(back == v, "%s is read as %a", got, back);
    }
}
END_TEST

START_TEST(decimals_are_read_as_the_c_library_does)
{
    int taken = 0;
    for (int i = 0; i < 300000; i++) {
        char text[80];
        double got;
        snprintf(text, sizeof text, i % 3 == 0 ? "%.7f" : i % 3 == 1 ? "%.12e" : "%.4f", awkward(i, 1e9));
        if (!rg_get_decimal(&got, text)) continue;
        ck_assert_msg(got == strtod(text, NULL), "%s is read as %.17g", text, got);
        taken++;
    }
    ck_assert_int_gt(taken, 200000);
    static const char *const no_number[] = {"", "-", ".", "1e", "1e+", "1.2.3", "1,5", " 1", "1 ", "0x10", "nan", "inf", "--1", "1e5x", "e5"};
    for (size_t i = 0; i < sizeof no_number / sizeof no_number[0]; i++) {
        double v;
        ck_assert_msg(!rg_get_decimal(&v, no_number[i]), "'%s' is taken for a number", no_number[i]);
    }
}
END_TEST

START_TEST(well_known_numbers)
{
    static const struct { double v; const char *want; } number[] = {
        {0.1, "0.1"}, {77e9, "77000000000"}, {76.5e9, "76500000000"}, {-180.0, "-180"}, {-0.0, "0"}, {0.30000000000000004, "0.30000000000000004"},
        {359.9, "359.9"}, {12.345678, "12.345678"}};
    for (size_t i = 0; i < sizeof number / sizeof number[0]; i++) {
        char got[RG_DECIMAL_ROOM + 1];
        *rg_put_shortest(got, number[i].v) = 0;
        ck_assert_str_eq(got, number[i].want);
    }
}
END_TEST

START_TEST(level_is_that_of_the_amplitude_and_never_less_than_the_floor)
{
    for (int i = 0; i < 100000; i++) {
        const double size = pow(10.0, 14.0 * drand48() - 9.9), turn = 6.3 * drand48();
        const double complex s = CMPLX(size * cos(turn), size * sin(turn));
        const double want = 20.0 * log10(hypot(creal(s), cimag(s)));           /* the C library's; 1e-12: a few units of the last place of 200 */
        ck_assert_double_eq_tol(rg_level_db(s), want, 1e-12);
    }
    ck_assert_double_eq(rg_level_db(0.0), -200.0);
    ck_assert_double_eq(rg_level_db(9.9e-11), -200.0);
    ck_assert_double_gt(rg_level_db(1.1e-10), -200.0);
    ck_assert_double_eq(rg_level_db(CMPLX(NAN, 1.0)), -200.0);
    ck_assert_double_eq(rg_level_db(1.0), 0.0);
    ck_assert_double_eq_tol(rg_level_db(CMPLX(0.0, 1e200)), 4000.0, 1e-9);
    ck_assert(isfinite(rg_level_db(CMPLX(INFINITY, INFINITY))));
}
END_TEST

static char path[] = "/tmp/check_table.XXXXXX";

static void new_path(void)
{
    strcpy(path, "/tmp/check_table.XXXXXX");
    const int fd = mkstemp(path);
    ck_assert_int_ge(fd, 0);
    close(fd);
}

static void remove_path(void) { unlink(path); }

static void put_file(const char *text, size_t n)
{
    FILE *file = fopen(path, "wb");
    ck_assert_ptr_nonnull(file);
    ck_assert_uint_eq(fwrite(text, 1, n, file), n);
    ck_assert_int_eq(fclose(file), 0);
}

static rg_status read_text(rg_table *t, const char *text, rg_error *err)
{
    put_file(text, strlen(text));
    return rg_table_read(t, path, err);
}

static void write_table(const char *locale)
{
    static const double complex s_m[3][RG_TABLE_N_POL] = {
        {CMPLX(0.3, -0.4), CMPLX(-3.0, 4.0), 1e-12, CMPLX(0.0, 1.0)}, {0.0, 1e-3, 2e-3, 3e-3}, {CMPLX(1.0 / 3.0, 2e-19), 1.0, 1.0, 1.0}};
    static const char *const part[] = {"total", "door, \"left\"", "two\nlines"};
    const rg_row_format format = {.pol = {true, true, false, true}, .complex_columns = true, .part_column = true};
    FILE *out = fopen(path, "wb");
    ck_assert_ptr_nonnull(out);
    if (locale) setlocale(LC_ALL, locale);
    ck_assert_int_eq(rg_csv_head(out, "mesh", "a\nb: c", NULL), RG_OK);
    ck_assert_int_eq(rg_csv_header(out, &format, NULL), RG_OK);
    for (int i = 0; i < 3; i++) ck_assert_int_eq(rg_csv_row(out, &format, 0.1 * i, -0.0, 76.5e9, part[i], s_m[i], NULL), RG_OK);
    setlocale(LC_ALL, "C");
    ck_assert_int_eq(fclose(out), 0);
}

static void check_bytes(void)
{
    static const char want[] =
        "# mesh: a b: c\n"
        "az_deg,el_deg,freq_hz,part,sigma_hh_dbsm,sigma_vv_dbsm,sigma_vh_dbsm,re_hh_m,im_hh_m,re_vv_m,im_vv_m,re_vh_m,im_vh_m\n"
        "0,0,76500000000,total,-6.0205999,13.9794001,0.0000000,3.000000000000e-01,-4.000000000000e-01,-3.000000000000e+00,"
        "4.000000000000e+00,0.000000000000e+00,1.000000000000e+00\n"
        "0.1,0,76500000000,\"door, \"\"left\"\"\",-200.0000000,-60.0000000,-50.4575749,0.000000000000e+00,0.000000000000e+00,"
        "1.000000000000e-03,0.000000000000e+00,3.000000000000e-03,0.000000000000e+00\n"
        "0.2,0,76500000000,\"two\nlines\",-9.5424251,0.0000000,0.0000000,3.333333333333e-01,2.000000000000e-19,"
        "1.000000000000e+00,0.000000000000e+00,1.000000000000e+00,0.000000000000e+00\n";
    char got[2000];
    FILE *file = fopen(path, "rb");
    const size_t n = fread(got, 1, sizeof got - 1, file);
    fclose(file);
    got[n] = 0;
    ck_assert_str_eq(got, want);
}

START_TEST(a_table_is_these_bytes_and_reads_back)
{
    rg_table t = {0};
    rg_error err = {{0}};
    write_table(NULL);
    check_bytes();
    ck_assert_msg(rg_table_read(&t, path, &err) == RG_OK, "%s", err.text);
    ck_assert_uint_eq(t.n_rows, 3);
    ck_assert_uint_eq(t.n_head, 1);
    ck_assert_str_eq(t.head_key[0], "mesh");
    ck_assert_str_eq(t.head_value[0], "a b: c");
    ck_assert_str_eq(t.part[1], "door, \"left\"");
    ck_assert_str_eq(t.part[2], "two\nlines");
    ck_assert_ptr_null(t.sigma_dbsm[RG_TABLE_HV]);
    ck_assert_ptr_null(t.s_m[RG_TABLE_HV]);
    ck_assert_double_eq(t.az_deg[1], 0.1);
    ck_assert_double_eq(t.freq_hz[2], 76.5e9);
    ck_assert_double_eq(creal(t.s_m[RG_TABLE_VV][0]), -3.0);
    for (int p = 0; p < RG_TABLE_N_POL; p++)
        for (size_t i = 0; i < t.n_rows && t.s_m[p]; i++)                      /* tolerance: the level's last digit */
            ck_assert_double_eq_tol(t.sigma_dbsm[p][i], rg_level_db(t.s_m[p][i]), 0.51e-7);
    rg_table_free(&t);
    ck_assert_ptr_null(t.az_deg);
}
END_TEST

START_TEST(a_locale_with_a_decimal_comma_changes_nothing)
{
    static const char *const comma[] = {"de_DE.UTF-8", "de_DE.utf8", "fr_FR.UTF-8", "nl_NL.UTF-8"};
    for (size_t i = 0; i < sizeof comma / sizeof comma[0]; i++)
        if (setlocale(LC_ALL, comma[i])) {
            write_table(comma[i]);
            check_bytes();
        }
    setlocale(LC_ALL, "C");
}
END_TEST

START_TEST(many_forms_of_a_table_are_read)
{
    static const char *const form[] = {
        "az_deg,el_deg,freq_hz,sigma_hh_dbsm\n30,5,77e9,-3.25\n",
        "# a remark\r\n# key: value\r\naz_deg,el_deg,freq_hz,sigma_hh_dbsm\r\n30,5,77e9,-3.25\r\n",
        "az_deg,el_deg,freq_hz,sigma_hh_dbsm\n30,5,77e9,-3.25",
        "\xef\xbb\xbf" "az_deg,el_deg,freq_hz,sigma_hh_dbsm\n30,5,77e9,-3.25\n",
        "range_m,sigma_hh_dbsm,freq_hz,el_deg,az_deg,who\n8,-3.25,77000000000,5.0,3.0e1,nobody\n",
        "\"az_deg\",\"el_deg\",\"freq_hz\",\"sigma_hh_dbsm\"\n\"30\",\"5\",\"77e9\",\"-3.25\"\n",
        "az_deg, el_deg, freq_hz, sigma_hh_dbsm\n 30, 5 ,77e9,\t-3.25\n\n",
        "who,az_deg,el_deg,freq_hz,sigma_hh_dbsm\n\"a \"\"b\"\",\nc\",30,5,77e9,-3.25\n",
        "az_deg,el_deg,freq_hz,sigma_hh_dbsm\n30.0000000000000000000000,5,77e9,-32500e-4\n"};
    for (size_t i = 0; i < sizeof form / sizeof form[0]; i++) {
        rg_table t = {0};
        rg_error err = {{0}};
        ck_assert_msg(read_text(&t, form[i], &err) == RG_OK, "form %zu: %s", i, err.text);
        ck_assert_uint_eq(t.n_rows, 1);
        ck_assert_double_eq(t.az_deg[0], 30.0);
        ck_assert_double_eq(t.el_deg[0], 5.0);
        ck_assert_double_eq(t.freq_hz[0], 77e9);
        ck_assert_double_eq(t.sigma_dbsm[RG_TABLE_HH][0], -3.25);
        ck_assert_ptr_null(t.sigma_dbsm[RG_TABLE_VV]);
        ck_assert_ptr_null(t.part);
        rg_table_free(&t);
    }
}
END_TEST

START_TEST(a_solution_by_moments_is_read)
{
    /* The first rows of a full-wave cut of a plate as another program wrote them: four digits, amplitudes of its own precision. */
    static const char text[] =
        "# target: plate_5x5\n# method: moment method, RWG basis (Rao, Wilton, Glisson 1982), 77 GHz\n# time: exp(+jwt)\n# phase: target origin\n"
        "az_deg,el_deg,freq_hz,sigma_hh_dbsm,sigma_vv_dbsm,sigma_hv_dbsm,sigma_vh_dbsm,re_hh_m,im_hh_m,re_vv_m,im_vv_m,re_hv_m,im_hv_m,re_vh_m,im_vh_m\n"
        "0.0000,0.0000,77000000000,-9.3045,-9.3045,-200.0000,-200.0000,-2.3428589e-03,-3.4258286e-01,-2.3428592e-03,-3.4258286e-01,"
        "5.4816604e-19,8.1380183e-19,5.4816604e-19,8.1380183e-19\n"
        "0.5000,0.0000,77000000000,-9.4149,-9.4135,-200.0000,-200.0000,-2.6122803e-03,-3.3825220e-01,-2.0383055e-03,-3.3831183e-01,"
        "-8.1545861e-19,4.1109359e-19,-8.1545861e-19,4.1109359e-19\n";
    rg_table t = {0};
    rg_error err = {{0}};
    ck_assert_msg(read_text(&t, text, &err) == RG_OK, "%s", err.text);
    ck_assert_uint_eq(t.n_rows, 2);
    ck_assert_uint_eq(t.n_head, 4);
    ck_assert_str_eq(t.head_value[1], "moment method, RWG basis (Rao, Wilton, Glisson 1982), 77 GHz");
    ck_assert_double_eq(t.sigma_dbsm[RG_TABLE_VV][1], -9.4135);
    ck_assert_double_eq(cimag(t.s_m[RG_TABLE_HV][0]), 8.1380183e-19);
    for (size_t i = 0; i < t.n_rows; i++)                                      /* tolerance: the level's last digit */
        ck_assert_double_eq_tol(rg_level_db(t.s_m[RG_TABLE_HH][i]), t.sigma_dbsm[RG_TABLE_HH][i], 0.51e-4);
    rg_table_free(&t);
}
END_TEST

START_TEST(bad_tables_are_refused_by_line_and_column)
{
#define HEADER "az_deg,el_deg,freq_hz,sigma_hh_dbsm\n"
    static const struct { const char *text, *says[2]; } bad[] = {
        {"", {"no line with the columns' names", ""}},
        {"# key: value\n", {"no line with the columns' names", ""}},
        {HEADER, {"without rows", ""}},
        {"az_deg,freq_hz,sigma_hh_dbsm\n", {"line 1", "el_deg"}},
        {"az_deg,el_deg,freq_hz\n", {"line 1", "sigma_hh_dbsm"}},
        {"# x: y\naz_deg,az_deg,el_deg,freq_hz,sigma_hh_dbsm\n", {"line 2", "az_deg stands there twice"}},
        {"az_deg,el_deg,freq_hz,sigma_hh_dbsm,re_hh_m\n", {"line 1", "im_hh_m"}},
        {HEADER "0,0,77e9,1\n0,0,77e9,abc\n", {"line 3, column sigma_hh_dbsm", "'abc'"}},
        {HEADER "0,0,77e9,\n", {"line 2, column sigma_hh_dbsm", "''"}},
        {HEADER "0,0,77e9,nan\n", {"line 2, column sigma_hh_dbsm", "nan"}},
        {HEADER "0,0,77e9,1e999\n", {"line 2, column sigma_hh_dbsm", "1e999"}},
        {HEADER "0x10,0,77e9,1\n", {"line 2, column az_deg", "0x10"}},
        {HEADER "0;0;77e9;1\n", {"line 2", "0;0;77e9;1"}},
        {HEADER "0,0,77e9\n", {"line 2", "3 fields where the header has 4"}},
        {HEADER "0,0,77e9,1,2\n", {"line 2", "more fields than the header's 4"}},
        {HEADER "\"0\"1,0,77e9,1\n", {"line 2", "quote"}},
        {HEADER "\r\n\"0,0,77e9,1\n0,0,77e9,1\n", {"line 3", "quote"}}};
    for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
        rg_table t = {.n_rows = 77};
        rg_error err = {{0}};
        ck_assert_msg(read_text(&t, bad[i].text, &err) == RG_BAD_INPUT, "case %zu is taken", i);
        for (int k = 0; k < 2; k++) ck_assert_msg(strstr(err.text, bad[i].says[k]) != NULL, "case %zu: '%s' lacks '%s'", i, err.text, bad[i].says[k]);
        ck_assert_ptr_eq(strstr(err.text, path), err.text);
        ck_assert_uint_eq(t.n_rows, 77);
    }
    rg_table t;
    rg_error err;
    ck_assert_int_eq(rg_table_read(&t, "/nowhere/to/be/found.csv", &err), RG_BAD_INPUT);
    ck_assert_int_eq(rg_table_read(&t, "/tmp", &err), RG_BAD_INPUT);
    ck_assert_ptr_nonnull(strstr(err.text, "directory"));
}
END_TEST

/* A good table with bytes exchanged, cut and doubled: read or refused, and nothing else. */
START_TEST(damaged_tables_do_no_harm)
{
    char good[2000], text[4000];
    write_table(NULL);
    FILE *file = fopen(path, "rb");
    const size_t n_good = fread(good, 1, sizeof good, file);
    fclose(file);
    for (int i = 0; i < 3000; i++) {
        size_t n = n_good;
        memcpy(text, good, n);
        for (long k = lrand48() % 6; k >= 0; k--) {
            static const char salt[] = "\"\"\",,\n\r\0#e9.-+\xff \t";
            const size_t at = (size_t)lrand48() % n;
            text[at] = salt[(size_t)lrand48() % (sizeof salt - 1)];
        }
        if (i % 5 == 0) n = (size_t)lrand48() % n + 1;
        if (i % 7 == 0) {
            memcpy(text + n, text, n);
            n *= 2;
        }
        put_file(text, n);
        rg_table t = {0};
        rg_error err = {{0}};
        const rg_status status = rg_table_read(&t, path, &err);
        ck_assert(status == RG_OK || (status == RG_BAD_INPUT && err.text[0]));
        rg_table_free(&t);
    }
}
END_TEST

START_TEST(many_rows_and_long_lines)
{
    enum { ROWS = 200000, LONG = 300000 };
    const rg_row_format format = {.pol = {true, true}, .complex_columns = true, .part_column = true};
    FILE *out = fopen(path, "wb");
    char *list = malloc(LONG + 1);
    memset(list, '7', LONG);
    list[LONG] = 0;
    rg_csv_head(out, "az", list, NULL);
    rg_csv_header(out, &format, NULL);
    for (int i = 0; i < ROWS; i++) {
        const double complex s_m[RG_TABLE_N_POL] = {CMPLX(1.0 + i, 0.5), CMPLX(0.0, i)};
        rg_csv_row(out, &format, 0.01 * i, 0.0, 77e9, i % 2 ? "body" : "total", s_m, NULL);
    }
    fclose(out);
    rg_table t = {0};
    rg_error err = {{0}};
    ck_assert_msg(rg_table_read(&t, path, &err) == RG_OK, "%s", err.text);
    ck_assert_uint_eq(t.n_rows, ROWS);
    ck_assert_str_eq(t.head_value[0], list);
    for (int i = 0; i < ROWS; i++) {
        ck_assert_double_eq(t.az_deg[i], 0.01 * i);
        ck_assert_double_eq(creal(t.s_m[RG_TABLE_HH][i]), 1.0 + i);
    }
    ck_assert_str_eq(t.part[ROWS - 1], "body");
    rg_table_free(&t);
    free(list);
}
END_TEST

START_TEST(a_full_disk_is_told)
{
    FILE *full = fopen("/dev/full", "wb");
    if (!full) return;                                      /* a system without it */
    rg_error err = {{0}};
    const rg_row_format format = {.pol = {true}};
    const double complex s_m[RG_TABLE_N_POL] = {1.0};
    rg_status status = rg_csv_header(full, &format, &err);
    for (int i = 0; i < 10000 && !status; i++) status = rg_csv_row(full, &format, i, 0.0, 77e9, NULL, s_m, &err);
    ck_assert_int_eq(status, RG_SYSTEM);
    ck_assert_ptr_nonnull(strstr(err.text, "cannot be written"));
    fclose(full);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("table");
    TCase *tests = tcase_create("table");
    tcase_add_checked_fixture(tests, new_path, remove_path);
    tcase_add_test(tests, numbers_are_printed_as_the_c_library_does);
    tcase_add_test(tests, the_shortest_text_reads_back_as_the_same_double);
    tcase_add_test(tests, decimals_are_read_as_the_c_library_does);
    tcase_add_test(tests, well_known_numbers);
    tcase_add_test(tests, level_is_that_of_the_amplitude_and_never_less_than_the_floor);
    tcase_add_test(tests, a_table_is_these_bytes_and_reads_back);
    tcase_add_test(tests, a_locale_with_a_decimal_comma_changes_nothing);
    tcase_add_test(tests, many_forms_of_a_table_are_read);
    tcase_add_test(tests, a_solution_by_moments_is_read);
    tcase_add_test(tests, bad_tables_are_refused_by_line_and_column);
    tcase_add_test(tests, damaged_tables_do_no_harm);
    tcase_add_test(tests, many_rows_and_long_lines);
    tcase_add_test(tests, a_full_disk_is_told);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
