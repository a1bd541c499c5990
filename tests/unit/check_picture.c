/* check_picture.c - what a picture of a mesh shows: where, how much of each part, which side, and the same from any number of threads */
#include "plot/mesh_picture.h"
#include "plot/mesh_view.h"
#include "run.h"
#include <math.h>
#include <omp.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

#define PI 3.14159265358979323846

/* The font library keeps its lists until the process ends; a leak check would name them. */
const char *__lsan_default_suppressions(void);
const char *__lsan_default_suppressions(void) { return "leak:libfontconfig"; }

enum { SIDE = 240 };
static double v[4096][3];
static uint32_t f[8192][3], part[8192];
static size_t n_v, n_f;
static const char *const name[] = {"one", "two", "three", "four"};

static void start(void) { n_v = n_f = 0; }

/* A sheet with the corners o, o + a, o + a + b, o + b: faces a x b. */
static void sheet(uint32_t p, vec3 o, vec3 a, vec3 b)
{
    const vec3 c[4] = {o, vec3_add(o, a), vec3_add(vec3_add(o, a), b), vec3_add(o, b)};
    for (int i = 0; i < 4; i++) v[n_v + (size_t)i][0] = c[i].x, v[n_v + (size_t)i][1] = c[i].y, v[n_v + (size_t)i][2] = c[i].z;
    for (uint32_t i = 0; i < 2; i++, n_f++) {
        f[n_f][0] = (uint32_t)n_v, f[n_f][1] = (uint32_t)n_v + 1 + i, f[n_f][2] = (uint32_t)n_v + 2 + i;
        part[n_f] = p;
    }
    n_v += 4;
}

static void box(uint32_t p, vec3 o, double x, double y, double z)
{
    const vec3 ex = {x, 0, 0}, ey = {0, y, 0}, ez = {0, 0, z};
    sheet(p, o, ey, ex), sheet(p, o, ex, ez), sheet(p, o, ez, ey);
    sheet(p, vec3_add(o, ez), ex, ey), sheet(p, vec3_add(o, ey), ez, ex), sheet(p, vec3_add(o, ex), ey, ez);
}

static rg_mesh *made(void)
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    ck_assert_msg(rg_mesh_from_arrays(&mesh, n_v, (const double (*)[3])v, n_f, (const uint32_t (*)[3])f, part, 4, name, &err) == RG_OK,
                  "%s", err.text);
    return mesh;
}

static uint32_t pixel[SIDE * SIDE];
static double shown_px[4];

static rg_mesh_view painted(const rg_mesh *mesh, double az_deg, double el_deg)
{
    const rg_mesh_view view = rg_mesh_view_from(mesh, az_deg * PI / 180, el_deg * PI / 180, SIDE, 10, SIDE);
    ck_assert_int_eq(rg_mesh_view_paint(mesh, &view, pixel, shown_px, NULL), RG_OK);
    return view;
}

static double red_of(uint32_t p) { return p >> 16 & 255u; }
static double blue_of(uint32_t p) { return p & 255u; }

/* Nearer to the hue of which part: part 0 is ochre, part 1 sky blue. */
static bool is_part_0(uint32_t p) { return red_of(p) > blue_of(p) + 20; }
static bool is_part_1(uint32_t p) { return blue_of(p) > red_of(p) + 20; }

static void middle_of(const rg_mesh_view *view, bool which(uint32_t), double *x, double *y)
{
    double n = 0;
    *x = *y = 0;
    for (int i = 0; i < view->height; i++)
        for (int j = 0; j < view->width; j++)
            if (which(pixel[i * view->width + j])) *x += j, *y += i, n++;
    ck_assert_double_gt(n, 50);
    *x /= n, *y /= n;
}

START_TEST(left_is_right_and_up_is_up_from_the_front)
{
    static const struct { double az, el, dx, dy; vec3 at; } view_of[] = {   /* where part 1, moved to `at`, comes to stand: the sign */
        {0, 0, 1, 0, {0, 3, 0}}, {180, 0, -1, 0, {0, 3, 0}}, {90, 0, -1, 0, {3, 0, 0}}, {0, 0, 0, -1, {0, 0, 3}},
        {0, 90, 1, 0, {0, 3, 0}}, {0, 90, 0, 1, {3, 0, 0}}, {0, -90, 0, -1, {3, 0, 0}}, {-90, 0, 1, 0, {3, 0, 0}}};
    double x0, y0, x1, y1;
    start();
    box(0, (vec3){0, 0, 0}, 1, 1, 1);
    box(1, view_of[_i].at, 1, 1, 1);
    rg_mesh *mesh = made();
    const rg_mesh_view view = painted(mesh, view_of[_i].az, view_of[_i].el);
    middle_of(&view, is_part_0, &x0, &y0);
    middle_of(&view, is_part_1, &x1, &y1);
    const double step_px = 3.0 / view.px_m;
    ck_assert_double_eq_tol(x1 - x0, view_of[_i].dx * step_px, 1.0);
    ck_assert_double_eq_tol(y1 - y0, view_of[_i].dy * step_px, 1.0);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(what_is_shown_is_the_projected_area)
{
    const double az = _i * 17.0, el = 5.0 * _i - 40.0, a = az * PI / 180, e = el * PI / 180;
    start();
    box(0, (vec3){10, -4, 2}, 2.0, 1.0, 0.5);
    rg_mesh *mesh = made();
    const rg_mesh_view view = painted(mesh, az, el);
    const double exact_m2 = 0.5 * fabs(cos(e) * cos(a)) + 1.0 * fabs(cos(e) * sin(a)) + 2.0 * fabs(sin(e));
    /* Rays are a third of a pixel apart; the outline is under 4 sides of the picture long. */
    ck_assert_double_eq_tol(shown_px[0] * view.px_m * view.px_m, exact_m2, 4.0 * SIDE / 6.0 * view.px_m * view.px_m);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(near_hides_far_and_a_hole_shows_what_is_behind)
{
    const vec3 y = {0, 1, 0}, z = {0, 0, 1};
    start();
    sheet(0, (vec3){0, 0, 0}, vec3_scale(y, 3), vec3_scale(z, 3));              /* the wall behind */
    for (int i = 0; i < 9; i++)                                                 /* a screen before it, its middle left out */
        if (i != 4) sheet(1, (vec3){1, i % 3, i / 3}, y, z);
    rg_mesh *mesh = made();
    const rg_mesh_view view = painted(mesh, 0, 0);
    ck_assert_double_eq_tol(shown_px[0] * view.px_m * view.px_m, 1.0, 0.01);
    ck_assert_double_eq_tol(shown_px[1] * view.px_m * view.px_m, 8.0, 0.05);
    ck_assert(is_part_0(pixel[view.height / 2 * view.width + view.width / 2]));
    painted(mesh, 180, 0);
    ck_assert_double_eq(shown_px[1], 0.0);
    rg_mesh_free(mesh);
}
END_TEST

static size_t tones(const rg_mesh_view *view)
{
    size_t n = 0;
    uint32_t tone[64];
    for (int y = view->height / 4; y < view->height * 3 / 4; y++)
        for (int x = view->width / 4; x < view->width * 3 / 4; x++) {
            size_t i = 0;
            while (i < n && tone[i] != pixel[y * view->width + x]) i++;
            if (i == n && n < 64) tone[n++] = pixel[y * view->width + x];
        }
    return n;
}

START_TEST(the_back_of_a_sheet_is_hatched_and_darker)
{
    start();
    sheet(0, (vec3){0, 0, 0}, (vec3){0, 1, 0}, (vec3){0, 0, 1});
    rg_mesh *mesh = made();
    rg_mesh_view view = painted(mesh, 0, 0);
    const uint32_t front = pixel[view.height / 2 * view.width + view.width / 2];
    ck_assert_uint_eq(front & 0xffffff, rg_part_colour(0));     /* seen square on: the colour of the key */
    ck_assert_uint_eq(tones(&view), 1);
    view = painted(mesh, 180, 0);
    ck_assert_uint_eq(tones(&view), 2);
    for (int i = 0; i < 12; i++) ck_assert_double_lt(red_of(pixel[view.height / 2 * view.width + view.width / 2 + i]), red_of(front) - 10);
    rg_mesh_free(mesh);
}
END_TEST

/* Darkest and brightest red of the middle row, its ends left out. */
static void row_reds(const rg_mesh_view *view, double *least, double *most)
{
    *least = 255, *most = 0;
    for (int x = view->width / 8; x < view->width * 7 / 8; x++) {
        const double red = red_of(pixel[view->height / 2 * view->width + x]);
        *least = fmin(*least, red), *most = fmax(*most, red);
    }
}

START_TEST(steps_in_depth_and_sharp_edges_are_darker_and_slopes_are_not)
{
    double least, most;
    start();        /* a sheet before another of the same part */
    sheet(0, (vec3){0, 0, 0}, (vec3){0, 2, 0}, (vec3){0, 0, 2});
    sheet(0, (vec3){0.5, 0.8, 0.8}, (vec3){0, 0.4, 0}, (vec3){0, 0, 0.4});
    rg_mesh *mesh = made();
    rg_mesh_view view = painted(mesh, 0, 0);
    row_reds(&view, &least, &most);
    ck_assert_double_eq(most, red_of(rg_part_colour(0)));
    ck_assert_double_lt(least, most - 20);
    rg_mesh_free(mesh);
    start();        /* a box over its corner: both faces alike, their edge darker */
    box(0, (vec3){0, 0, 0}, 1, 1, 1);
    mesh = made();
    view = painted(mesh, 45, 0);
    row_reds(&view, &least, &most);
    ck_assert_double_lt(least, most - 10);
    rg_mesh_free(mesh);
    start();        /* one sheet, far aslant: deep steps from ray to ray, no outline */
    sheet(0, (vec3){0, 0, 0}, (vec3){2, 0.1, 0}, (vec3){0, 0, 0.1});
    mesh = made();
    view = painted(mesh, 0, 0);
    row_reds(&view, &least, &most);
    ck_assert_double_eq(least, most);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(threads_do_not_change_a_pixel)
{
    static uint32_t one[SIDE * SIDE];
    double one_px[4];
    start();
    for (uint32_t i = 0; i < 4; i++) box(i, (vec3){0.3 * i, 0.7 * i, 0.2 * i * i}, 1, 0.5, 0.8);
    rg_mesh *mesh = made();
    omp_set_num_threads(1);
    const rg_mesh_view view = painted(mesh, 33, 21);
    memcpy(one, pixel, sizeof one);
    memcpy(one_px, shown_px, sizeof one_px);
    memset(pixel, 0, sizeof pixel);
    omp_set_num_threads(5);
    painted(mesh, 33, 21);
    ck_assert_mem_eq(one, pixel, (size_t)(view.width * view.height) * sizeof *pixel);
    ck_assert_mem_eq(one_px, shown_px, sizeof one_px);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(thin_views_are_drawn)        /* a sheet edge-on, a needle from its end, from every side without a crash */
{
    start();
    sheet(0, (vec3){0, 0, 0}, (vec3){0, 1e-3, 0}, (vec3){0, 0, 5});
    rg_mesh *mesh = made();
    static const double way[][2] = {{90, 0}, {0, 90}, {0, -90}, {90, 90}, {-90, 0}, {0, 0}};
    for (size_t i = 0; i < sizeof way / sizeof way[0]; i++) {
        const rg_mesh_view view = painted(mesh, way[i][0], way[i][1]);
        ck_assert(view.px_m > 0.0 && view.height >= 10 && view.height <= SIDE);
        for (int p = 0; p < view.width * view.height; p++) ck_assert_uint_eq(pixel[p] >> 24, 255);
    }
    rg_mesh_free(mesh);
}
END_TEST

static unsigned big_endian(const unsigned char b[4]) { return (unsigned)b[0] << 24 | (unsigned)b[1] << 16 | (unsigned)b[2] << 8 | b[3]; }

START_TEST(a_png_of_the_width_asked_for)
{
    static const int width[] = {300, 601, 1500};
    char folder[] = "/tmp/check_picture.XXXXXX", path[64];
    unsigned char head[24];
    rg_error err = {""};
    ck_assert_ptr_nonnull(mkdtemp(folder));
    snprintf(path, sizeof path, "%s/box.png", folder);
    start();
    for (uint32_t i = 0; i < 4; i++) box(i, (vec3){0, 2.0 * i, 0}, 1, 1, 1);
    rg_mesh *mesh = made();
    const rg_mesh_picture picture = {0.3, 0.2, width[_i], "a title far too long for any width: \xc3\xa4\xc3\xb6\xc3\xbc \xc3\xa4\xc3\xb6\xc3\xbc "
                                     "\xc3\xa4\xc3\xb6\xc3\xbc \xc3\xa4\xc3\xb6\xc3\xbc \xc3\xa4\xc3\xb6\xc3\xbc \xc3\xa4\xc3\xb6\xc3\xbc \xc3\xa4\xc3\xb6\xc3\xbc", {"one", NULL}};
    ck_assert_msg(rg_mesh_picture_write(mesh, &picture, path, &err) == RG_OK, "%s", err.text);
    FILE *file = fopen(path, "rb");
    ck_assert_ptr_nonnull(file);
    ck_assert_uint_eq(fread(head, 1, sizeof head, file), sizeof head);
    fclose(file);
    ck_assert_mem_eq(head, "\x89PNG\r\n\x1a\n", 8);      /* ISO/IEC 15948, 5.2 */
    ck_assert_uint_eq(big_endian(head + 16), (unsigned)width[_i]);
    ck_assert_uint_gt(big_endian(head + 20), (unsigned)width[_i] / 5);
    unlink(path);
    ck_assert_int_eq(rmdir(folder), 0);     /* nothing else was left there */
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(pictures_that_cannot_be_are_refused)
{
    rg_error err = {""};
    start();
    box(0, (vec3){0, 0, 0}, 1, 1, 1);
    rg_mesh *mesh = made();
    rg_mesh_picture picture = {.width_px = 299, .title = "box"};
    ck_assert_int_eq(rg_mesh_picture_write(mesh, &picture, "/tmp/never.png", &err), RG_BAD_VALUE);
    picture.width_px = 4001;
    ck_assert_int_eq(rg_mesh_picture_write(mesh, &picture, "/tmp/never.png", &err), RG_BAD_VALUE);
    picture.width_px = 400, picture.el_rad = NAN;
    ck_assert_int_eq(rg_mesh_picture_write(mesh, &picture, "/tmp/never.png", &err), RG_BAD_VALUE);
    picture.el_rad = 0.0;
    ck_assert_int_eq(rg_mesh_picture_write(mesh, &picture, "/tmp/no such folder/never.png", &err), RG_SYSTEM);
    ck_assert_ptr_nonnull(strstr(err.text, "no such folder"));
    rg_mesh_free(mesh);
}
END_TEST

/* CIE lightness of an sRGB colour: IEC 61966-2-1 and CIE 15, as widely published. */
static double lightness(uint32_t rgb)
{
    static const double weight[3] = {0.2126, 0.7152, 0.0722};
    double y = 0.0;
    for (int i = 0; i < 3; i++) {
        const double c = (rgb >> (16 - 8 * i) & 255u) / 255.0;
        y += weight[i] * (c <= 0.04045 ? c / 12.92 : pow((c + 0.055) / 1.055, 2.4));
    }
    return 116.0 * cbrt(y) - 16.0;
}

START_TEST(neighbours_in_the_list_differ_in_grey)
{
    for (size_t p = 0; p < 60; p++) {
        const double a = lightness(rg_part_colour(p)), b = lightness(rg_part_colour(p + 1));
        const double least = p + 1 < 20 ? 12.0 : 6.0;       /* from the twentieth on they are darker, and nearer in step */
        ck_assert_msg(fabs(a - b) >= least, "parts %zu and %zu: lightness %.1f and %.1f", p, p + 1, a, b);
        ck_assert_double_gt(lightness(RG_VIEW_BACKGROUND) - a, 5.0);
        for (size_t q = p + 1; q < p + 40; q++) ck_assert_uint_ne(rg_part_colour(p), rg_part_colour(q));
    }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("picture");
    TCase *tests = tcase_create("picture");
    tcase_add_loop_test(tests, left_is_right_and_up_is_up_from_the_front, 0, 8);
    tcase_add_loop_test(tests, what_is_shown_is_the_projected_area, 0, 20);
    tcase_add_test(tests, near_hides_far_and_a_hole_shows_what_is_behind);
    tcase_add_test(tests, the_back_of_a_sheet_is_hatched_and_darker);
    tcase_add_test(tests, steps_in_depth_and_sharp_edges_are_darker_and_slopes_are_not);
    tcase_add_test(tests, threads_do_not_change_a_pixel);
    tcase_add_test(tests, thin_views_are_drawn);
    tcase_add_loop_test(tests, a_png_of_the_width_asked_for, 0, 3);
    tcase_add_test(tests, pictures_that_cannot_be_are_refused);
    tcase_add_test(tests, neighbours_in_the_list_differ_in_grey);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
