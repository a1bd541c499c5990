/* check_bvh.c - rays against the search tree: every level of the processor, against long doubles and against each other */
#include "bvh_scenes.h"
#include <omp.h>

enum { SCENES = 5, RAYS = 400 };

static soup scene_of(int i)
{
    srand48(100 + i);
    switch (i) {
    case 0: return random_soup(60, 0.3, 0.0);
    case 1: return random_soup(500, 0.1, 0.0);
    case 2: return random_soup(200, 0.2, 1e6);     /* metres: one part in 2^20 of the digits are left */
    case 3: return grid(9);
    default: return bumpy_sphere(12, 0.2);
    }
}

/* Between random points about the scene; some along an axis, some to a corner or the middle of an edge, some of limited length. */
static rg_ray ray_of(const soup *s, int i)
{
    const size_t f = (size_t)lrand48() % s->n_facets;
    double from[3], to[3];
    for (int axis = 0; axis < 3; axis++) {
        const double at = s->vertex_m[s->facet[f][0]][axis], next = s->vertex_m[s->facet[f][1]][axis];
        from[axis] = at + between(-2.0, 2.0);
        to[axis] = i % 4 == 1 ? at : i % 4 == 2 ? 0.5 * (at + next) : at + between(-0.2, 0.2);
        if (i % 8 == 1) from[axis] = at;
    }
    rg_ray ray;
    if (i % 8 == 1) from[i / 8 % 3] -= i % 16 == 1 ? 3.0 : -3.0;
    ray = ray_to(from, to);
    if (i % 5 == 0) ray.t_max_m = between(0.0, 3.0);
    if (i % 7 == 0) ray.from = (uint32_t)f;
    return ray;
}

/* What a volume may be off by, in metres of the margin: corners and origin up to 4 e + reach, e = 2^-52, about 20 roundings in all. */
static double rounding_m(const soup *s, const rg_ray *ray)
{
    double reach = 8.0;
    for (int axis = 0; axis < 3; axis++) reach = fmax(reach, fabs(ray->origin_m[axis]) + fabs(s->vertex_m[0][axis]));
    return 20.0 * DBL_EPSILON * reach;
}

START_TEST(closest_is_the_exact_one)
{
    soup s = scene_of(_i);
    rg_bvh *bvh = tree_of(&s, RG_CPU_PLAIN);
    int met = 0;
    for (int i = 0; i < RAYS; i++) {
        const rg_ray ray = ray_of(&s, i);
        const double slack_m = rounding_m(&s, &ray);
        const rg_hit got = rg_bvh_closest(bvh, &ray);
        long double least = INFINITY;
        size_t at = RG_NO_HIT;
        for (size_t f = 0; f < s.n_facets; f++) {
            const exact_hit hit = meet_exactly(&s, &ray, f);
            const bool sure = hit.margin > slack_m && hit.t_m > 1e-9L && hit.t_m < ray.t_max_m - 1e-9;
            if (f != ray.from && sure && hit.t_m < least) least = hit.t_m, at = f;
        }
        met += got.facet != RG_NO_HIT;
        if (at != RG_NO_HIT)
            ck_assert_msg(got.facet != RG_NO_HIT, "scene %d ray %d misses facet %zu at %Lg", _i, i, at, least);
        if (got.facet == RG_NO_HIT) continue;
        const exact_hit mine = meet_exactly(&s, &ray, got.facet);
        ck_assert_msg(mine.margin >= -slack_m, "scene %d ray %d: facet %u is met %Lg m outside", _i, i, got.facet, mine.margin);
        ck_assert_msg(got.t_m <= (double)least + 1e-6 && got.t_m <= ray.t_max_m, "scene %d ray %d: %g, nearest %Lg", _i, i, got.t_m, least);
        ck_assert_uint_ne(got.facet, ray.from);
        if (mine.margin > 1e3 * slack_m) ck_assert_double_eq_tol(got.t_m, (double)mine.t_m, _i == 2 ? 1e-3 : 1e-6);
    }
    ck_assert_int_gt(met, RAYS / 20);
    rg_bvh_free(bvh);
    soup_free(&s);
}
END_TEST

START_TEST(every_level_answers_alike)
{
    soup s = scene_of(_i);
    rg_bvh *plain = tree_of(&s, RG_CPU_PLAIN);
    static rg_ray ray[4 * RAYS];
    static rg_hit want[4 * RAYS], got[4 * RAYS];
    static bool want_any[4 * RAYS], got_any[4 * RAYS];
    for (int i = 0; i < 4 * RAYS; i++) {
        ray[i] = ray_of(&s, i);
        want[i] = rg_bvh_closest(plain, &ray[i]);
        want_any[i] = rg_bvh_any(plain, &ray[i]);
        ck_assert_msg(want_any[i] == (want[i].facet != RG_NO_HIT), "ray %d", i);
    }
    for (int cpu = RG_CPU_PLAIN; cpu <= (int)rg_cpu_best(); cpu++) {
        rg_bvh *bvh = tree_of(&s, (rg_cpu)cpu);
        for (int i = 0; i < 4 * RAYS; i++) {
            const rg_hit one = rg_bvh_closest(bvh, &ray[i]);
            ck_assert_msg(one.facet == want[i].facet && one.t_m == want[i].t_m && one.u == want[i].u && one.v == want[i].v,
                          "%s, scene %d, ray %d: facet %u at %a, plain %u at %a", rg_cpu_name((rg_cpu)cpu), _i, i, one.facet, one.t_m,
                          want[i].facet, want[i].t_m);
            ck_assert_msg(rg_bvh_any(bvh, &ray[i]) == want_any[i], "%s, scene %d, any of ray %d", rg_cpu_name((rg_cpu)cpu), _i, i);
        }
        for (size_t n = 1; n < 4 * RAYS; n = 3 * n + 2) {      /* bundles of any length, the last one not full */
            rg_bvh_closest_packet(bvh, n, ray, got);
            rg_bvh_any_packet(bvh, n, ray, got_any);
            for (size_t i = 0; i < n; i++) {
                ck_assert_msg(got[i].facet == want[i].facet && got[i].t_m == want[i].t_m, "%s, ray %zu of %zu", rg_cpu_name((rg_cpu)cpu), i, n);
                ck_assert_msg(got_any[i] == want_any[i], "%s, any of ray %zu of %zu", rg_cpu_name((rg_cpu)cpu), i, n);
            }
        }
        rg_bvh_free(bvh);
    }
    rg_bvh_free(plain);
    soup_free(&s);
}
END_TEST

/* Whole numbers leave nothing to rounding: a ray along an axis meets the closed square and nothing else, the lowest index first. */
START_TEST(corners_and_edges_of_a_grid_count)
{
    enum { N = 9 };
    soup s = grid(N);
    for (int cpu = RG_CPU_PLAIN; cpu <= (int)rg_cpu_best(); cpu++) {
        rg_bvh *bvh = tree_of(&s, (rg_cpu)cpu);
        for (int i = -1; i <= 2 * N + 1; i++)
            for (int j = -1; j <= 2 * N + 1; j++) {
                const double x = 0.5 * i, y = 0.5 * j;
                const rg_ray up = {{x, y, -1.0}, {0.0, 0.0, 1.0}, INFINITY, RG_NO_HIT}, down = {{x, y, 1.0}, {0.0, -0.0, -1.0}, 1.0, RG_NO_HIT};
                const rg_ray in = {{0.0, y, 2.0}, {0.0, 0.0, -1.0}, INFINITY, RG_NO_HIT}; /* within the other square's plane */
                const bool inside = i >= 0 && i <= 2 * N && j >= 0 && j <= 2 * N;
                const rg_hit hit = rg_bvh_closest(bvh, &up);
                ck_assert_msg((hit.facet != RG_NO_HIT) == inside, "%s: up from (%g, %g)", rg_cpu_name((rg_cpu)cpu), x, y);
                ck_assert_msg(rg_bvh_any(bvh, &down) == inside, "%s: down on (%g, %g)", rg_cpu_name((rg_cpu)cpu), x, y);
                ck_assert_msg(rg_bvh_any(bvh, &in) == (j >= 0 && j <= 2 * N), "%s: along x = 0, y = %g", rg_cpu_name((rg_cpu)cpu), y);
                if (!inside) continue;
                ck_assert_double_eq(hit.t_m, 1.0);
                size_t lowest = RG_NO_HIT;
                for (size_t f = s.n_facets / 2; f-- > 0;) {
                    const exact_hit exact = meet_exactly(&s, &up, f);
                    if (exact.margin >= 0.0L) lowest = f;
                }
                ck_assert_uint_eq(hit.facet, lowest);
            }
        rg_bvh_free(bvh);
    }
    soup_free(&s);
}
END_TEST

/* A closed surface of 50,000 facets, and from its inside rays at corners and at points of edges: not one gets out. */
START_TEST(closed_surface_does_not_leak)
{
    soup s = bumpy_sphere(158, 0.1);
    const double shift = _i * 1000.0;
    for (size_t i = 0; i < s.n_vertices; i++)
        for (int axis = 0; axis < 3; axis++) s.vertex_m[i][axis] += shift;
    rg_bvh *bvh = tree_of(&s, rg_cpu_best());
    for (int i = 0; i < 200000; i++) {
        const uint32_t *f = s.facet[(size_t)lrand48() % s.n_facets];
        const double share = i % 2 ? drand48() : 0.0;
        double from[3], to[3];
        for (int axis = 0; axis < 3; axis++) {
            from[axis] = i % 3 ? between(-0.3, 0.3) + shift : shift;
            to[axis] = s.vertex_m[f[0]][axis] + share * (s.vertex_m[f[1]][axis] - s.vertex_m[f[0]][axis]);
        }
        const rg_ray ray = ray_to(from, to);
        ck_assert_msg(rg_bvh_any(bvh, &ray), "ray %d leaks", i);
        const rg_hit hit = rg_bvh_closest(bvh, &ray);
        ck_assert_msg(hit.facet != RG_NO_HIT && hit.t_m > 0.4 && hit.t_m < 2.0, "ray %d ends at %g", i, hit.t_m);
    }
    rg_bvh_free(bvh);
    soup_free(&s);
}
END_TEST

/* From a point of a facet, as computed, outward: neither the facet nor a neighbour is in the way of a sphere's normal. */
START_TEST(start_is_no_hit)
{
    soup s = bumpy_sphere(60, 0.0);
    const double shift = _i * 1e5;
    for (size_t i = 0; i < s.n_vertices; i++)
        for (int axis = 0; axis < 3; axis++) s.vertex_m[i][axis] += shift;
    rg_bvh *bvh = tree_of(&s, rg_cpu_best());
    for (int i = 0; i < 100000; i++) {
        const size_t facet = (size_t)lrand48() % s.n_facets;
        const double a = i % 3 ? drand48() : 0.0, b = (1.0 - a) * (i % 2 ? drand48() : 0.0);
        rg_ray ray = {.t_max_m = INFINITY, .from = i % 2 ? (uint32_t)facet : RG_NO_HIT};
        double middle[3] = {shift, shift, shift}, at[3];
        for (int axis = 0; axis < 3; axis++)
            at[axis] = a * s.vertex_m[s.facet[facet][0]][axis] + b * s.vertex_m[s.facet[facet][1]][axis] +
                       (1.0 - a - b) * s.vertex_m[s.facet[facet][2]][axis];
        ray = ray_to(middle, at);
        memcpy(ray.origin_m, at, sizeof at);
        ray.from = i % 2 ? (uint32_t)facet : RG_NO_HIT;
        const rg_hit hit = rg_bvh_closest(bvh, &ray);
        ck_assert_msg(hit.facet == RG_NO_HIT, "ray %d off facet %zu meets %u at %g", i, facet, hit.facet, hit.t_m);
        for (int axis = 0; axis < 3; axis++) ray.direction[axis] = -ray.direction[axis];
        ck_assert_msg(rg_bvh_closest(bvh, &ray).t_m > 1.9, "ray %d into facet %zu", i, facet);
    }
    rg_bvh_free(bvh);
    soup_free(&s);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("bvh");
    TCase *tests = tcase_create("bvh");
    tcase_add_loop_test(tests, closest_is_the_exact_one, 0, SCENES);
    tcase_add_loop_test(tests, every_level_answers_alike, 0, SCENES);
    tcase_add_test(tests, corners_and_edges_of_a_grid_count);
    tcase_add_loop_test(tests, closed_surface_does_not_leak, 0, 2);
    tcase_add_loop_test(tests, start_is_no_hit, 0, 2);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
