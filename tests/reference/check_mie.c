/* check_mie.c - physical optics of spheres against the exact series, and of cylinders against stationary phase */
#include "world.h"
#include <gsl/gsl_sf_bessel.h>
#include <stdio.h>

/* Backscatter of a metal sphere over its geometrical optics: sigma/(pi a^2) for x = ka.
 *   sigma = (lambda^2/4 pi) |Sum (-1)^n (2n+1) (a_n - b_n)|^2, a_n = (x j_n)'/(x h_n)', b_n = j_n/h_n, h = j - j y
 * G. Mie, Annalen der Physik 25, 1908. */
static double mie_over_go(double x)
{
    const int n_max = (int)(x + 4.0 * cbrt(x) + 10.0);      /* Wiscombe's criterion, and some (from memory) */
    double *j = malloc((size_t)(n_max + 1) * sizeof *j), *y = malloc((size_t)(n_max + 1) * sizeof *y);
    double complex sum = 0.0;
    ck_assert(j && y && gsl_sf_bessel_jl_steed_array(n_max, x, j) == 0 && gsl_sf_bessel_yl_array(n_max, x, y) == 0);
    for (int n = 1; n <= n_max; n++) {
        const double complex h = CMPLX(j[n], -y[n]), before = CMPLX(j[n - 1], -y[n - 1]);
        /* (x z_n)' = x z_(n-1) - n z_n */
        const double complex a = (x * j[n - 1] - n * j[n]) / (x * before - n * h), b = j[n] / h;
        sum += (n % 2 ? -1.0 : 1.0) * (2 * n + 1) * (a - b);
    }
    free(j);
    free(y);
    return creal(sum * conj(sum)) / (x * x);
}

static const struct { double ka, want; const char *source; } series[] = {
    {1.0, 3.637567, "computed: the series in long arithmetic; tolerance: the last digit"},
    {1.0281, 3.65495, "computed: its greatest value"},
    {1.7433, 0.28504, "computed: its least value beyond that"},
    {5.0, 1.168837, "computed: the series in long arithmetic"},
    {10.0, 0.929230, "computed: the series in long arithmetic"},
};

START_TEST(series_is_the_listed_one)
{
    const double got = mie_over_go(series[_i].ka);
    ck_assert_msg(fabs(got - series[_i].want) <= 1e-5, "ka %g: %.6f pi a^2, want %.6f (%s)", series[_i].ka, got, series[_i].want, series[_i].source);
}
END_TEST

/* Rayleigh's limit for metal: 9 (ka)^4, the next term is of relative order (ka)^2 (from memory). */
START_TEST(series_has_rayleighs_limit)
{
    ck_assert_double_eq_tol(mie_over_go(0.01) / (9.0 * 1e-8), 1.0, 1e-3);
}
END_TEST

/* Sagitta: what facets cost falls with it (include/roadglint/shape.h). lambda/160 is too coarse for the smallest sphere (0.34 dB at one of
 * the aspects below); lambda/512 leaves most of 0.3 dB to physical optics' own 1/(2ka), 0.05 dB there. */
static const double sphere_radius_m[] = {0.05, 0.1, 0.2, 0.3};

START_TEST(spheres_are_within_a_third_of_a_decibel)
{
    static const double aspect[][2] = {{0, 0}, {17, 3}, {45, 35.264}, {123.4, -56.7}, {-90, 10}, {200, 80}, {31, 0}, {0, 90}};
    const double freq_hz = 77e9, k = wave_number(freq_hz), a = sphere_radius_m[_i], start_s = seconds();
    const double want_db = 10.0 * log10(mie_over_go(k * a) * PI * a * a);
    world w = world_of_shape((rg_shape){.kind = RG_SPHERE, .size_m = {a}, .sagitta_m = 2.0 * PI / k / 512.0});
    double worst_db = 0.0;
    const double built_s = seconds();
    for (size_t i = 0; i < sizeof aspect / sizeof aspect[0]; i++) {
        const double got_db = rg_dbsm(surface(&w, aspect_deg(aspect[i][0], aspect[i][1]), freq_hz));
        worst_db = fmax(worst_db, fabs(got_db - want_db));
        ck_assert_msg(fabs(got_db - want_db) <= 0.3, "sphere %g m, az %g el %g: %.4f dBsm, want %.4f (Mie 1908)", a, aspect[i][0], aspect[i][1],
                      got_db, want_db);
    }
    printf("sphere %g m: %zu facets, %.4f dBsm, worst of 8 aspects %.4f dB off, %.2f s to build, %.2f s to compute\n", a,
           rg_mesh_n_facets(w.mesh), want_db, worst_db, built_s - start_s, seconds() - built_s);
    fflush(stdout);
    free_world(&w);
}
END_TEST

static const double cylinder_m[][2] = {{0.01, 0.1}, {0.02, 0.3}, {0.05, 0.3}, {0.05, 1.0}, {0.1, 0.5}, {0.3, 0.2}};

/* 2 pi r L^2/lambda by stationary phase over the side (Knott, Shaeffer, Tuley, Radar Cross Section; from memory as to page). The shadow
 * boundary's share of the integral is some (2ka)^-1.5 of it: 0.15 dB at 10 mm, which the tolerance has to hold. */
START_TEST(cylinders_are_within_a_fifth_of_a_decibel)
{
    static const double az_deg[] = {0, 7.3, 45, 90, 161.8, -77};
    const double freq_hz = 77e9, k = wave_number(freq_hz), r = cylinder_m[_i][0], length = cylinder_m[_i][1], start_s = seconds();
    const double want_db = 10.0 * log10(k * r * length * length);
    world w = world_of_shape((rg_shape){.kind = RG_CYLINDER, .size_m = {r, length}, .sagitta_m = 2.0 * PI / k / 512.0});
    double worst_db = 0.0;
    for (size_t i = 0; i < sizeof az_deg / sizeof az_deg[0]; i++) {
        const double got_db = rg_dbsm(surface(&w, aspect_deg(az_deg[i], 0.0), freq_hz));
        worst_db = fmax(worst_db, fabs(got_db - want_db));
        ck_assert_msg(fabs(got_db - want_db) <= 0.2, "cylinder %g x %g m, az %g: %.4f dBsm, want %.4f", r, length, az_deg[i], got_db, want_db);
    }
    printf("cylinder %g x %g m: %zu facets, %.4f dBsm, worst of 6 aspects %.4f dB off, %.2f s\n", r, length, rg_mesh_n_facets(w.mesh), want_db, worst_db,
           seconds() - start_s);
    fflush(stdout);
    free_world(&w);
}
END_TEST

/* An ellipsoid's glint is pi R1 R2 at the specular point (geometrical optics): along x that is pi (b c/a)^2 for semiaxes a, b, c. */
START_TEST(an_ellipsoid_has_its_radii)
{
    enum { N = 320 };       /* rings nearer than lambda/2 in depth everywhere, or they would add up as a grating */
    const double a = 0.12, b = 0.1, c = 0.08, freq_hz = 77e9;
    soup s = {0};
    for (int i = 0; i < N; i++)
        for (int j = 0; j < 2 * N; j++) {
            vec3 p[4];
            for (int q = 0; q < 4; q++) {
                const double t = PI * (i + (q >> 1)) / N, f = PI * ((j + (q == 1 || q == 2)) % (2 * N)) / N;
                p[q] = (vec3){a * cos(t), b * sin(t) * cos(f), c * sin(t) * sin(f)};
            }
            if (i > 0) add_triangle(&s, p[0], p[2], p[1]);
            if (i < N - 1) add_triangle(&s, p[0], p[3], p[2]);
        }
    world w = world_of_soup(&s);
    const double want_db = 20.0 * log10(ROOT_PI * b * c / a), got_db = rg_dbsm(surface(&w, aspect_deg(0, 0), freq_hz));
    /* chords of 1.2 mm: sagitta 2 um; geometrical optics itself is off by 1/(2ka), 0.02 dB */
    ck_assert_msg(fabs(got_db - want_db) <= 0.1, "ellipsoid: %.4f dBsm, want %.4f", got_db, want_db);
    printf("ellipsoid: %zu facets, %.4f dBsm, want %.4f\n", rg_mesh_n_facets(w.mesh), got_db, want_db);
    fflush(stdout);
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("mie");
    TCase *tests = tcase_create("mie");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, series_is_the_listed_one, 0, sizeof series / sizeof series[0]);
    tcase_add_test(tests, series_has_rayleighs_limit);
    tcase_add_loop_test(tests, spheres_are_within_a_third_of_a_decibel, 0, sizeof sphere_radius_m / sizeof sphere_radius_m[0]);
    tcase_add_loop_test(tests, cylinders_are_within_a_fifth_of_a_decibel, 0, sizeof cylinder_m / sizeof cylinder_m[0]);
    tcase_add_test(tests, an_ellipsoid_has_its_radii);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
