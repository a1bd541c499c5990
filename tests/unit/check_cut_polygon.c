/* check_cut_polygon.c - convex polygons minus convex regions: area and membership, against counting points */
#include "scatter/cut_polygon.h"
#include "run.h"
#include <math.h>

enum { ROOM = 64 };

static const rg_polygon whole = {.n = 3, .a = {0.0, 1.0, 0.0}, .b = {0.0, 0.0, 1.0}};

/* The half-plane left of the line from (a0, b0) to (a1, b1). */
static rg_half_plane left_of(double a0, double b0, double a1, double b1)
{
    rg_half_plane plane;
    for (int i = 0; i < 3; i++) plane.at_corner[i] = (a1 - a0) * (whole.b[i] - b0) - (b1 - b0) * (whole.a[i] - a0);
    return plane;
}

static rg_region triangle(const double a[3], const double b[3])
{
    rg_region region = {.n = 3};
    const double turn = (a[1] - a[0]) * (b[2] - b[0]) - (b[1] - b[0]) * (a[2] - a[0]);
    for (int i = 0; i < 3; i++) {
        const int from = turn > 0.0 ? i : (i + 1) % 3, to = turn > 0.0 ? (i + 1) % 3 : i;
        region.edge[i] = left_of(a[from], b[from], a[to], b[to]);
    }
    return region;
}

static bool in_region(const rg_region *region, double a, double b)
{
    for (int e = 0; e < region->n; e++)
        if (rg_half_plane_at(&region->edge[e], a, b) < 0.0) return false;
    return true;
}

/* Two corners may be one but for a rounding, and such an edge has no side: hence the bound, of 2^-52 times a facet of size 1. */
static bool in_polygon(const rg_polygon *p, double a, double b)
{
    for (int i = 0; i < p->n; i++) {
        const int next = (i + 1) % p->n;
        if ((p->a[next] - p->a[i]) * (b - p->b[i]) - (p->b[next] - p->b[i]) * (a - p->a[i]) < -0x1p-52) return false;
    }
    return true;
}

/* Minus several triangles in turn: each point of a fine grid must lie in exactly as many of the pieces as it should: one or none. */
START_TEST(every_point_is_where_it_belongs)
{
    rg_polygon list[2][ROOM];
    rg_region region[5];
    size_t n = 1;
    srand48(_i);
    list[0][0] = whole;
    for (int r = 0; r < 5; r++) {
        double a[3], b[3];
        for (int i = 0; i < 3; i++) { a[i] = 1.4 * drand48() - 0.2; b[i] = 1.4 * drand48() - 0.2; }
        if (_i % 3 == 1 && r > 0) { a[0] = 0.25; b[0] = 0.5; }             /* a shared corner */
        region[r] = triangle(a, b);
        size_t n_to = 0;
        for (size_t i = 0; i < n; i++) {
            size_t added;
            ck_assert(rg_polygon_minus(&list[r % 2][i], &region[r], ROOM - n_to, list[(r + 1) % 2] + n_to, &added));
            n_to += added;
        }
        n = n_to;
    }
    for (int k = 0; k < 4000; k++) {
        const double a = drand48(), b = drand48() * (1.0 - a);
        int hidden = 0, in = 0;
        for (int r = 0; r < 5; r++) hidden += in_region(&region[r], a, b);
        for (size_t i = 0; i < n; i++) in += in_polygon(&list[1][i], a, b);
        ck_assert_msg(in == (hidden == 0), "(%g, %g): hidden by %d, in %d pieces, seed %d", a, b, hidden, in, _i);
    }
}
END_TEST

/* Two triangles that share an edge, each taken with values of exactly opposite sign along it, leave nothing between them. */
START_TEST(neighbours_leave_no_crack)
{
    srand48(_i);
    const double a0 = drand48() * 0.3, b0 = drand48() * 0.3, a1 = 0.3 + 0.3 * drand48(), b1 = 0.3 + 0.1 * drand48();
    rg_region left = triangle((double[3]){a0, a1, a0 - 9.0}, (double[3]){b0, b1, b1 + 9.0});
    rg_region right = triangle((double[3]){a0, a1, a1 + 9.0}, (double[3]){b0, b1, b0 - 9.0});
    left.n = right.n = 1;                                                    /* all that lies on either side of the shared edge */
    left.edge[0] = left_of(a0, b0, a1, b1);
    for (int i = 0; i < 3; i++) right.edge[0].at_corner[i] = -left.edge[0].at_corner[i];
    rg_polygon once[ROOM], twice[ROOM];
    size_t n_once, n_twice;
    ck_assert(rg_polygon_minus(&whole, &left, ROOM, once, &n_once));
    ck_assert_uint_eq(n_once, 1);
    ck_assert(rg_polygon_minus(&once[0], &right, ROOM, twice, &n_twice));
    ck_assert_uint_eq(n_twice, 0);
}
END_TEST

START_TEST(apart_leaves_the_polygon_whole)
{
    const rg_region far_off = triangle((double[3]){2.0, 3.0, 2.0}, (double[3]){2.0, 2.0, 3.0});
    const rg_region touching = triangle((double[3]){0.0, 1.0, 1.0}, (double[3]){1.0, 0.0, 1.0});   /* across the long side */
    rg_polygon out[ROOM];
    size_t n;
    ck_assert(rg_polygon_minus(&whole, &far_off, ROOM, out, &n));
    ck_assert(n == 1 && out[0].n == 3 && rg_polygon_area2(&out[0]) == 1.0);
    ck_assert(rg_polygon_minus(&whole, &touching, ROOM, out, &n));
    ck_assert(n == 1 && out[0].n == 3 && rg_polygon_area2(&out[0]) == 1.0);
}
END_TEST

START_TEST(too_little_room_is_told)
{
    const rg_region inner = triangle((double[3]){0.1, 0.5, 0.1}, (double[3]){0.1, 0.1, 0.5});
    rg_polygon out[ROOM];
    size_t n;
    ck_assert(!rg_polygon_minus(&whole, &inner, 2, out, &n));
    ck_assert(rg_polygon_minus(&whole, &inner, 3, out, &n));
    double area2 = 0.0;
    for (size_t i = 0; i < n; i++) area2 += rg_polygon_area2(&out[i]);
    ck_assert_double_eq_tol(area2, 1.0 - 0.16, 1e-15);
}
END_TEST

/* A corner too many is told and written nowhere else; parted in two, the polygon can be cut again. */
START_TEST(a_corner_too_many)
{
    rg_polygon p = {.n = RG_POLYGON_CORNERS}, inside, outside, half[2];
    for (int i = 0; i < p.n; i++) {
        p.a[i] = 0.3 + 0.2 * cos(6.283185307179586 * (i + 0.5) / p.n);
        p.b[i] = 0.3 + 0.2 * sin(6.283185307179586 * (i + 0.5) / p.n);
    }
    /* through the middles of the two sides at corner 0, which it takes off */
    const rg_half_plane corner = left_of(0.5 * (p.a[0] + p.a[11]), 0.5 * (p.b[0] + p.b[11]), 0.5 * (p.a[0] + p.a[1]), 0.5 * (p.b[0] + p.b[1]));
    const rg_half_plane middle = left_of(0.3, 0.0, 0.3, 1.0);
    ck_assert(!rg_polygon_split(&p, &corner, &inside, &outside));
    ck_assert_int_eq(inside.n > outside.n ? inside.n : outside.n, RG_POLYGON_CORNERS + 1);
    rg_polygon_part(inside.n > outside.n ? &inside : &outside, half);
    ck_assert(half[0].n < RG_POLYGON_CORNERS && half[1].n < RG_POLYGON_CORNERS);
    const double whole_area2 = rg_polygon_area2(inside.n > outside.n ? &inside : &outside);
    ck_assert_double_eq_tol(rg_polygon_area2(&half[0]) + rg_polygon_area2(&half[1]), whole_area2, 1e-15);
    ck_assert(rg_polygon_split(&p, &middle, &inside, &outside));
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("cut_polygon");
    TCase *tests = tcase_create("cut_polygon");
    tcase_add_loop_test(tests, every_point_is_where_it_belongs, 0, 150);
    tcase_add_loop_test(tests, neighbours_leave_no_crack, 0, 200);
    tcase_add_test(tests, apart_leaves_the_polygon_whole);
    tcase_add_test(tests, too_little_room_is_told);
    tcase_add_test(tests, a_corner_too_many);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
