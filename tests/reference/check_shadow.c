/* check_shadow.c - shadows on large facets against finely cut meshes and against analytic parallelograms */
#include "world.h"
#include <stdio.h>

static const double freq_hz = 77e9;

static double sinc(double x) { return fabs(x) < 1e-8 ? 1.0 : sin(x) / x; }

/* A parallelogram from its middle and half edges, whole and alone: (2.1) with I = A exp(2jk s.c) sinc(2k s.u) sinc(2k s.v), the product that
 * every text on apertures has (W. B. Gordon, IEEE Trans. AP 23, 1975, for the rectangle). */
static double complex parallelogram(vec3 c, vec3 u, vec3 v, vec3 s)
{
    const double k = wave_number(freq_hz), phase = 2.0 * k * vec3_dot(s, c);
    const double shown_m2 = 4.0 * fabs(vec3_dot(vec3_cross(u, v), s));
    return -I * k / ROOT_PI * shown_m2 * sinc(2.0 * k * vec3_dot(s, u)) * sinc(2.0 * k * vec3_dot(s, v)) * CMPLX(cos(phase), sin(phase));
}

/* The rectangle in the plane x. */
static double complex rectangle(double x, double y0, double z0, double y1, double z1, vec3 s)
{
    return parallelogram((vec3){x, 0.5 * (y0 + y1), 0.5 * (z0 + z1)}, (vec3){0, 0.5 * (y1 - y0), 0}, (vec3){0, 0, 0.5 * (z1 - z0)}, s);
}

static double peak_of(double area) { return wave_number(freq_hz) / ROOT_PI * area; }

static const double small_aspect[][2] = {{0, 0}, {0.3, 0}, {0, -0.7}, {1.1, 0.4}, {-2.3, 1.9}, {5, 3}, {-8, -4}, {17, -11}, {-26, 20}};
enum { N_SMALL = sizeof small_aspect / sizeof small_aspect[0] };

static void expect(const world *w, double complex want, int i, double peak_m, const char *what)
{
    const double complex got = surface(w, aspect_deg(small_aspect[i][0], small_aspect[i][1]), freq_hz);
    ck_assert_msg(cabs(got - want) <= 1e-9 * peak_m, "%s, az %g el %g: off by %g of the peak (%.4f dBsm, want %.4f)", what, small_aspect[i][0],
                  small_aspect[i][1], cabs(got - want) / peak_m, rg_dbsm(got), rg_dbsm(want));
}

/* ---- a post before a plate ---- */

enum { N_AZ = 431 };    /* -10 .. 10 deg, steps of 0.0465 deg: lobes of a 1 m plate are 0.112 deg apart */

static world plate_behind_post(int n)
{
    soup s = {0};
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5, n);
    add_box(&s, (vec3){0.3, -0.015, -0.6}, (vec3){0.33, 0.015, 0.6});
    return world_of_soup(&s);
}

static rg_status keep_row(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    double complex **next = user;
    (void)err;
    *(*next)++ = aspect->s_m[0][RG_VV];
    return RG_OK;
}

static void cut_of(const world *w, double complex s_m[2 * N_AZ])
{
    static const double el_deg[2] = {0.0, 3.0};
    double az_deg[N_AZ];
    for (int i = 0; i < N_AZ; i++) az_deg[i] = -10.0 + 20.0 * i / (N_AZ - 1);
    const rg_sweep_plan plan = {.n_el = 2, .n_az = N_AZ, .n_freq = 1, .el_deg = el_deg, .az_deg = az_deg, .freq_hz = &freq_hz, .mechanisms = RG_SURFACE};
    ck_assert_int_eq(rg_sweep(w->scene, &plan, keep_row, &s_m, NULL, NULL), RG_OK);
}

/* 0.2 dB within 30 dB of the peak; shadows are cut exactly, so that far more is expected: 1e-9 of the peak. */
START_TEST(a_post_before_a_plate)
{
    static double complex coarse[2 * N_AZ], fine[2 * N_AZ];
    const double start_s = seconds();
    world w = plate_behind_post(1), v = plate_behind_post(100);
    ck_assert_uint_eq(rg_mesh_n_facets(v.mesh), 20012);
    cut_of(&w, coarse);
    const double coarse_s = seconds();
    cut_of(&v, fine);
    double worst_db = 0.0, worst_m = 0.0, peak_m = 0.0;
    for (int i = 0; i < 2 * N_AZ; i++) peak_m = fmax(peak_m, cabs(fine[i]));
    for (int i = 0; i < 2 * N_AZ; i++) {
        worst_m = fmax(worst_m, cabs(coarse[i] - fine[i]));
        if (cabs(fine[i]) > peak_m * pow(10.0, -1.5)) worst_db = fmax(worst_db, fabs(20.0 * log10(cabs(coarse[i]) / cabs(fine[i]))));
    }
    printf("post before a plate: peak %.2f dBsm, 14 against 20012 facets: %.2g dB within 30 dB of it, %.2g of the peak anywhere; %.1f and %.1f s\n",
           rg_dbsm(peak_m), worst_db, worst_m / peak_m, coarse_s - start_s, seconds() - coarse_s);
    fflush(stdout);
    ck_assert_msg(worst_db <= 0.2, "%.4f dB", worst_db);
    ck_assert_msg(worst_m <= 1e-9 * peak_m, "%g of the peak", worst_m / peak_m);
    free_world(&w);
    free_world(&v);
}
END_TEST

/* ---- analytic shadows ---- */

START_TEST(behind_a_larger_plate_is_nothing)
{
    soup s = {0};
    add_rectangle(&s, 0.0, -0.2, -0.3, 0.3, 0.2, 1);
    add_rectangle(&s, 0.1, -0.5, -0.5, 0.5, 0.5, 1);
    world w = world_of_soup(&s);
    for (int i = 0; i < N_SMALL; i++) {
        const vec3 to = toward(aspect_deg(small_aspect[i][0], small_aspect[i][1]));
        expect(&w, rectangle(0.1, -0.5, -0.5, 0.5, 0.5, to), i, peak_of(1.0), "plate behind a larger one");
    }
    free_world(&w);
}
END_TEST

START_TEST(half_covered)
{
    soup s = {0};
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5, 1);
    add_rectangle(&s, 0.2, -2.0, -2.0, 0.0, 2.0, 1);
    world w = world_of_soup(&s);
    for (int i = 0; i < N_SMALL; i++) {
        const vec3 to = toward(aspect_deg(small_aspect[i][0], small_aspect[i][1]));
        const double edge_y = -0.2 * to.y / to.x;       /* the cover's edge y = 0 as the radar sees it on the plate */
        expect(&w, rectangle(0.2, -2.0, -2.0, 0.0, 2.0, to) + rectangle(0.0, edge_y, -0.5, 0.5, 0.5, to), i, peak_of(9.0), "half covered");
    }
    free_world(&w);
}
END_TEST

/* 1 mm by 1 mm of 1 m by 1 m; the error allowed is 1e-3 of what the square's own area could send. */
START_TEST(a_square_millimetre_removes_its_shadow)
{
    const double y = 0.1234, z = -0.0567, half = 0.0005, x = 0.3;
    soup s = {0};
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5, 1);
    add_rectangle(&s, x, y - half, z - half, y + half, z + half, 1);
    world w = world_of_soup(&s);
    for (int i = 0; i < N_SMALL; i++) {
        const vec3 to = toward(aspect_deg(small_aspect[i][0], small_aspect[i][1]));
        const double sy = y - x * to.y / to.x, sz = z - x * to.z / to.x;
        const double complex want = rectangle(0.0, -0.5, -0.5, 0.5, 0.5, to) - rectangle(0.0, sy - half, sz - half, sy + half, sz + half, to) +
                                    rectangle(x, y - half, z - half, y + half, z + half, to);
        expect(&w, want, i, peak_of(1.0), "square millimetre");
    }
    free_world(&w);
}
END_TEST

/* A thousand small squares in a lattice: more occluders on one facet than one cutting takes, which then has to be halved. */
START_TEST(many_small_shadows)
{
    enum { N = 32 };
    const double x = 0.05, half = 0.001;
    soup s = {0};
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5, 1);
    for (int n = 0; n < N * N; n++) {
        const double y = -0.2 + 0.0173 * (n % N), z = -0.2 + 0.0171 * (n / N);
        add_rectangle(&s, x, y - half, z - half, y + half, z + half, 1);
    }
    world w = world_of_soup(&s);
    for (int i = 0; i < N_SMALL; i++) {
        const vec3 to = toward(aspect_deg(small_aspect[i][0], small_aspect[i][1]));
        double complex want = rectangle(0.0, -0.5, -0.5, 0.5, 0.5, to);
        for (int n = 0; n < N * N; n++) {
            const double y = -0.2 + 0.0173 * (n % N), z = -0.2 + 0.0171 * (n / N), sy = y - x * to.y / to.x, sz = z - x * to.z / to.x;
            want += rectangle(x, y - half, z - half, y + half, z + half, to) - rectangle(0.0, sy - half, sz - half, sy + half, sz + half, to);
        }
        expect(&w, want, i, peak_of(1.0), "many small shadows");
    }
    free_world(&w);
}
END_TEST

/* A sheet of 0.2 m that goes through the plate at 45 degrees: the half before it is seen and hides its shadow, the half behind is hidden. */
START_TEST(an_occluder_that_pierces)
{
    soup s = {0};
    add_rectangle(&s, 0.0, -0.5, -0.5, 0.5, 0.5, 1);
    add_quad(&s, (vec3){-0.1, -0.1, -0.1}, (vec3){-0.1, 0.1, -0.1}, (vec3){0.1, 0.1, 0.1}, (vec3){0.1, -0.1, 0.1});
    world w = world_of_soup(&s);
    for (int i = 0; i < N_SMALL; i++) {
        const vec3 to = toward(aspect_deg(small_aspect[i][0], small_aspect[i][1]));
        const vec3 middle = {0.05, 0.0, 0.05}, across = {0.0, 0.1, 0.0}, up = {0.05, 0.0, 0.05};
        /* moved along the line of sight into x = 0 */
        const vec3 shadow = vec3_sub(middle, vec3_scale(to, 0.05 / to.x)), shadow_up = vec3_sub(up, vec3_scale(to, 0.05 / to.x));
        const double complex want = rectangle(0.0, -0.5, -0.5, 0.5, 0.5, to) - parallelogram(shadow, across, shadow_up, to) +
                                    parallelogram(middle, across, up, to);
        expect(&w, want, i, peak_of(1.0), "pierced");
    }
    free_world(&w);
}
END_TEST

/* A rectangle in the plane x, by its sides. */
typedef struct { double y0, z0, y1, z1; } window;

static window moved(window w, double dy, double dz) { return (window){w.y0 + dy, w.z0 + dz, w.y1 + dy, w.z1 + dz}; }

static window overlap(window a, window b)
{
    const window w = {fmax(a.y0, b.y0), fmax(a.z0, b.z0), fmin(a.y1, b.y1), fmin(a.z1, b.z1)};
    return w.y0 < w.y1 && w.z0 < w.z1 ? w : (window){0};
}

static double complex sent(double x, window w, vec3 s) { return rectangle(x, w.y0, w.z0, w.y1, w.z1, s); }

/* All of outer but for the hole. */
static void add_frame(soup *s, double x, window outer, window hole)
{
    add_rectangle(s, x, outer.y0, outer.z0, outer.y1, hole.z0, 1);
    add_rectangle(s, x, outer.y0, hole.z1, outer.y1, outer.z1, 1);
    add_rectangle(s, x, outer.y0, hole.z0, hole.y0, hole.z1, 1);
    add_rectangle(s, x, hole.y1, hole.z0, outer.y1, hole.z1, 1);
}

/* Through the hole a piece of the plate behind is seen, of the hole's size and shape. The frame's rectangles share no whole edges. */
START_TEST(a_plate_behind_a_hole)
{
    const double x = 0.2;
    const window front = {-0.6, -0.6, 0.6, 0.6}, hole = {-0.05, -0.03, 0.08, 0.06}, back = {-0.35, -0.3, 0.35, 0.3};
    soup s = {0};
    add_frame(&s, x, front, hole);
    add_rectangle(&s, 0.0, back.y0, back.z0, back.y1, back.z1, 1);
    world w = world_of_soup(&s);
    for (int i = 0; i < N_SMALL; i++) {
        const vec3 to = toward(aspect_deg(small_aspect[i][0], small_aspect[i][1]));
        const window shown = overlap(back, moved(hole, -x * to.y / to.x, -x * to.z / to.x));
        expect(&w, sent(x, front, to) - sent(x, hole, to) + sent(0.0, shown, to), i, peak_of(1.44), "plate behind a hole");
    }
    free_world(&w);
}
END_TEST

/* A plate before another one that has a hole: its shadow lies partly on the frame, partly in the hole, where there is nothing to hide. */
START_TEST(a_shadow_over_a_hole)
{
    const double x = 0.1;
    const window plate = {-0.5, -0.5, 0.5, 0.5}, hole = {-0.05, -0.03, 0.08, 0.06}, cover = {0.01, -0.12, 0.19, 0.04};
    soup s = {0};
    add_frame(&s, 0.0, plate, hole);
    add_rectangle(&s, x, cover.y0, cover.z0, cover.y1, cover.z1, 1);
    world w = world_of_soup(&s);
    for (int i = 0; i < N_SMALL; i++) {
        const vec3 to = toward(aspect_deg(small_aspect[i][0], small_aspect[i][1]));
        const window shadow = moved(cover, -x * to.y / to.x, -x * to.z / to.x);
        const double complex want = sent(0.0, plate, to) - sent(0.0, hole, to) - sent(0.0, shadow, to) + sent(0.0, overlap(shadow, hole), to) +
                                    sent(x, cover, to);
        expect(&w, want, i, peak_of(1.0), "shadow over a hole");
    }
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("shadow");
    TCase *tests = tcase_create("shadow");
    tcase_set_timeout(tests, 120);
    tcase_add_test(tests, a_post_before_a_plate);
    tcase_add_test(tests, behind_a_larger_plate_is_nothing);
    tcase_add_test(tests, half_covered);
    tcase_add_test(tests, a_square_millimetre_removes_its_shadow);
    tcase_add_test(tests, many_small_shadows);
    tcase_add_test(tests, an_occluder_that_pierces);
    tcase_add_test(tests, a_plate_behind_a_hole);
    tcase_add_test(tests, a_shadow_over_a_hole);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
