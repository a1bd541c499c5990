/* check_import_faces.c - faces of many corners: their triangles cover them once, and none takes long */
#include "mesh/soup.h"
#include "run.h"
#include <math.h>
#include <string.h>
#include <time.h>

enum { MANY = 50000 };
static double outline[MANY][3];
static size_t n_corners;

static double seconds(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static rg_status cut(rg_soup *soup, rg_error *err)
{
    static uint32_t corner[MANY];
    for (uint32_t i = 0; i < n_corners; i++) {
        ck_assert_int_eq(rg_soup_vertex(soup, outline[i][0], outline[i][1], outline[i][2], err), RG_OK);
        corner[i] = i;
    }
    return rg_soup_face(soup, n_corners, corner, 0, err);
}

static double facet_area(const rg_soup *soup, size_t f, int axis)
{
    const double *a = soup->vertex[soup->facet[f][0]], *b = soup->vertex[soup->facet[f][1]], *c = soup->vertex[soup->facet[f][2]];
    const int u = (axis + 1) % 3, v = (axis + 2) % 3;
    return 0.5 * ((b[u] - a[u]) * (c[v] - a[v]) - (b[v] - a[v]) * (c[u] - a[u]));
}

static double outline_area(int axis)        /* by the shoelace, which knows nothing of triangles */
{
    const int u = (axis + 1) % 3, v = (axis + 2) % 3;
    double sum = 0.0;
    for (size_t i = 0; i < n_corners; i++) {
        const double *a = outline[i], *b = outline[(i + 1) % n_corners];
        sum += 0.5 * ((a[u] - outline[0][u]) * (b[v] - outline[0][v]) - (a[v] - outline[0][v]) * (b[u] - outline[0][u]));
    }
    return sum;
}

/* n - 2 triangles, all wound as the face is, whose areas add up to the outline's: then they cover it once. */
static void assert_covered(int axis, bool strictly)
{
    rg_soup soup = {0};
    rg_error err = {""};
    ck_assert_msg(cut(&soup, &err) == RG_OK, "%s", err.text);
    ck_assert_uint_eq(soup.n_facets, n_corners - 2);
    const double want = outline_area(axis);
    double sum = 0.0;
    for (size_t f = 0; f < soup.n_facets; f++) {
        const double area = facet_area(&soup, f, axis);
        ck_assert_msg(strictly ? area * want > 0.0 : area * want >= -1e-12 * want * want, "facet %zu has area %g of %g", f, area, want);
        sum += area;
    }
    ck_assert_msg(fabs(sum - want) <= 1e-11 * fabs(want), "areas add up to %.17g, want %.17g", sum, want);
    rg_soup_free(&soup);
}

static void corner_at(double x, double y) { memcpy(outline[n_corners++], (double[]){x, y, 0.0}, sizeof outline[0]); }

/* Corners at rising angles and random distances: simple, and mostly not convex. In each of the six planes and senses, and far away. */
START_TEST(stars_are_covered_once)
{
    srand48(_i);
    const int n = 4 + _i % 60, axis = _i % 3;
    const double sense = _i / 3 % 2 ? -1.0 : 1.0, far_m = _i % 7 == 0 ? 4e6 : 0.0;
    n_corners = (size_t)n;
    for (int i = 0; i < n; i++) {
        const double turn = sense * 2.0 * M_PI * (i + 0.8 * drand48()) / n, r = 0.2 + drand48();
        outline[i][axis] = far_m;
        outline[i][(axis + 1) % 3] = far_m + r * cos(turn);
        outline[i][(axis + 2) % 3] = far_m + r * sin(turn);
    }
    assert_covered(axis, true);
}
END_TEST

START_TEST(corners_on_a_straight_side_make_no_empty_triangle)
{
    n_corners = 0;
    for (int i = 0; i < 8; i++) corner_at(i, 0);
    for (int i = 0; i < 8; i++) corner_at(8, i);
    for (int i = 8; i > 0; i--) corner_at(i, 8);
    for (int i = 8; i > 0; i--) corner_at(0, i);
    assert_covered(2, true);
    n_corners = 0;      /* a quad with a fifth corner on its first side: a fan from corner 0 would begin with nothing */
    corner_at(0, 0), corner_at(1, 0), corner_at(2, 0), corner_at(2, 1), corner_at(0, 1);
    assert_covered(2, true);
}
END_TEST

START_TEST(a_hole_joined_by_a_bridge_stays_open)
{
    n_corners = 0;
    corner_at(0, 0), corner_at(4, 0), corner_at(4, 4), corner_at(0, 4), corner_at(0, 0);
    corner_at(1, 1), corner_at(1, 3), corner_at(3, 3), corner_at(3, 1), corner_at(1, 1);
    assert_covered(2, false);
    ck_assert_double_eq(outline_area(2), 12.0);
}
END_TEST

START_TEST(a_gear_and_a_spiral_are_covered)
{
    n_corners = 0;
    for (int i = 0; i < 4000; i++) corner_at((1.0 + 0.1 * (i / 2 % 2)) * cos(2 * M_PI * i / 4000), (1.0 + 0.1 * (i / 2 % 2)) * sin(2 * M_PI * i / 4000));
    assert_covered(2, false);
    n_corners = 0;
    for (int i = 0; i < 1000; i++) corner_at((1.0 + 0.01 * i) * cos(0.05 * i), (1.0 + 0.01 * i) * sin(0.05 * i));
    for (int i = 999; i >= 0; i--) corner_at((1.5 + 0.01 * i) * cos(0.05 * i), (1.5 + 0.01 * i) * sin(0.05 * i));
    assert_covered(2, false);
}
END_TEST

/* All left turns, yet twice round, as a limacon's inner loop is: a fan would lay triangles with their backs up. */
START_TEST(twice_round_is_not_convex)
{
    n_corners = 0;
    for (int i = 0; i < 24; i++) corner_at((0.5 + cos(2 * M_PI * i / 24)) * cos(2 * M_PI * i / 24), (0.5 + cos(2 * M_PI * i / 24)) * sin(2 * M_PI * i / 24));
    rg_soup soup = {0};
    rg_error err = {""};
    ck_assert_int_eq(cut(&soup, &err), RG_OK);
    size_t n_backward = 0;
    for (size_t f = 0; f < soup.n_facets; f++) n_backward += facet_area(&soup, f, 2) < -1e-15;
    ck_assert_uint_eq(soup.n_facets, 22);
    ck_assert_uint_eq(n_backward, 0);
    rg_soup_free(&soup);
}
END_TEST

/* Convex: at once. A comb of as many teeth as fit: either way it must not take long; 10 s leave room for a slow machine with
 * sanitizers. */
START_TEST(fifty_thousand_corners_take_no_time)
{
    rg_soup soup = {0};
    rg_error err = {""};
    n_corners = MANY;
    for (int i = 0; i < MANY; i++) memcpy(outline[i], (double[]){cos(2 * M_PI * i / MANY), sin(2 * M_PI * i / MANY), 0}, sizeof outline[i]);
    const double start_s = seconds();
    ck_assert_int_eq(cut(&soup, &err), RG_OK);
    ck_assert_uint_eq(soup.n_facets, MANY - 2);
    rg_soup_free(&soup);
    for (int i = 0; i < MANY; i++) memcpy(outline[i], (double[]){i, i % 2 ? 1e3 + i % 13 : i % 7, 0}, sizeof outline[i]);
    memcpy(outline[MANY - 1], (double[]){MANY / 2, -1e6, 0}, sizeof outline[0]);
    const rg_status status = cut(&soup, &err);
    ck_assert_msg(status == RG_OK || (status == RG_BAD_INPUT && strstr(err.text, "50000 corners")), "status %d, %s", status, err.text);
    rg_soup_free(&soup);
    ck_assert_msg(seconds() - start_s < 10.0, "%g s", seconds() - start_s);
}
END_TEST

/* Outlines that cross themselves, run back on themselves or have no plane: some triangles, and an end. */
START_TEST(nonsense_comes_to_an_end)
{
    rg_soup soup = {0};
    rg_error err = {""};
    srand48(_i);
    n_corners = 4 + (size_t)_i;
    for (size_t i = 0; i < n_corners; i++)
        for (int k = 0; k < 3; k++) {
            const double x = floor(drand48() * 5.0);
            outline[i][k] = _i % 5 == 0 && k ? 0.0 : _i % 11 == 0 ? x * 1e300 : _i % 13 == 0 && x == 0.0 ? NAN : x;
        }
    ck_assert_int_eq(cut(&soup, &err), RG_OK);
    ck_assert_uint_le(soup.n_facets, n_corners - 2);
    for (size_t f = 0; f < soup.n_facets; f++)
        for (int c = 0; c < 3; c++) ck_assert_uint_lt(soup.facet[f][c], n_corners);
    rg_soup_free(&soup);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("faces");
    TCase *tests = tcase_create("cut");
    tcase_add_loop_test(tests, stars_are_covered_once, 0, 300);
    tcase_add_test(tests, corners_on_a_straight_side_make_no_empty_triangle);
    tcase_add_test(tests, a_hole_joined_by_a_bridge_stays_open);
    tcase_add_test(tests, a_gear_and_a_spiral_are_covered);
    tcase_add_test(tests, twice_round_is_not_convex);
    tcase_add_test(tests, fifty_thousand_corners_take_no_time);
    tcase_add_loop_test(tests, nonsense_comes_to_an_end, 0, 120);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
