/* check_bvh_build.c - trees of awkward facets: they stand, they are done in time, they find everything, and threads do not show */
#include "bvh_scenes.h"
#include "bvh/tree.h"
#include <omp.h>
#include <time.h>

/* Sets corners of facet i: a small triangle at (x, y, z). */
static void put(soup *s, size_t i, double x, double y, double z, double size_m)
{
    const double corner[3][3] = {{x, y, z}, {x + size_m, y, z}, {x, y + size_m, z + 0.5 * size_m}};
    memcpy(s->vertex_m[3 * i], corner, sizeof corner);
    for (size_t c = 0; c < 3; c++) s->facet[i][c] = (uint32_t)(3 * i + c);
}

static const char *const awkward[] = {"all in one spot", "one middle, all sizes", "a huge one among small ones", "a flat mesh", "a line",
                                      "distances that double", "points", "one facet", "nine facets", "nested clusters"};

static soup awkward_soup(int kind)
{
    static const size_t many = 100000;
    const size_t n = kind == 7 ? 1 : kind == 8 ? 9 : many;
    soup s = soup_new(3 * n, n);
    srand48(7);
    for (size_t i = 0; i < n; i++) {
        const double share = (double)i / (double)many;
        switch (kind) {
        case 0: put(&s, i, 1.0, 2.0, 3.0, 0.1); break;
        case 1: put(&s, i, -0.5 * share, -0.5 * share, -0.25 * share, share); break;
        case 2: put(&s, i, drand48(), drand48(), drand48(), i == many / 2 ? 1e6 : 1e-3); break;
        case 3: put(&s, i, drand48(), drand48(), 0.0, 1e-3); s.vertex_m[3 * i + 2][2] = 0.0; break;
        case 4: put(&s, i, share, 0.0, 0.0, 1e-5); break;
        case 5: put(&s, i, ldexp(1.0, (int)(i % 120)), 0.0, 0.0, ldexp(1e-3, (int)(i % 120))); break;
        case 6: put(&s, i, drand48(), drand48(), drand48(), 0.0); break;
        case 9: put(&s, i, pow(drand48(), 40.0), pow(drand48(), 40.0), pow(drand48(), 40.0), 1e-12); break;
        default: put(&s, i, share, -share, 0.0, 0.3); break;
        }
    }
    return s;
}

START_TEST(awkward_facets_are_built_and_found)
{
    soup s = awkward_soup(_i);
    struct timespec start, end;
    clock_gettime(CLOCK_MONOTONIC, &start);
    rg_bvh *bvh = tree_of(&s, rg_cpu_best());
    clock_gettime(CLOCK_MONOTONIC, &end);
    const double took_s = (double)(end.tv_sec - start.tv_sec) + 1e-9 * (double)(end.tv_nsec - start.tv_nsec);
    ck_assert_msg(took_s < 20.0, "%s: %g s", awkward[_i], took_s);        /* a square law would take minutes */
    if (_i == 6) {
        const rg_ray ray = {{0.5, 0.5, -1.0}, {0.0, 0.0, 1.0}, INFINITY, RG_NO_HIT};
        ck_assert_uint_eq(rg_bvh_closest(bvh, &ray).facet, RG_NO_HIT);     /* points have no inside */
    }
    for (size_t i = 0; _i != 6 && i < s.n_facets; i += s.n_facets / 50 + 1) {
        double middle[3] = {0}, from[3];
        const double size_m = s.vertex_m[3 * i + 1][0] - s.vertex_m[3 * i][0];
        for (int axis = 0; axis < 3; axis++) {
            for (size_t c = 0; c < 3; c++) middle[axis] += s.vertex_m[3 * i + c][axis] / 3.0;
            from[axis] = middle[axis] + (axis == 2 ? 3.0 : 0.2) * size_m;
        }
        if (size_m > 0.0) ck_assert_msg(rg_bvh_any(bvh, &(rg_ray){{from[0], from[1], from[2]}, {0.0, 0.0, -1.0}, INFINITY, RG_NO_HIT}) ||
                                        rg_bvh_any(bvh, &(rg_ray){{middle[0], middle[1], from[2]}, {0.0, 0.0, -1.0}, INFINITY, RG_NO_HIT}),
                                        "%s: facet %zu is not found", awkward[_i], i);
    }
    rg_bvh_free(bvh);
    soup_free(&s);
}
END_TEST

START_TEST(no_facet_is_a_tree_too)
{
    soup s = soup_new(0, 0);
    uint32_t got;
    for (int cpu = 0; cpu <= (int)rg_cpu_best(); cpu++) {
        rg_bvh *bvh = tree_of(&s, (rg_cpu)cpu);
        const rg_ray ray = {{0.0, 0.0, -1.0}, {0.0, 0.0, 1.0}, INFINITY, RG_NO_HIT};
        const rg_prism prism = {{{0, 0, 0}, {1, 0, 0}, {0, 1, 0}}, {0, 0, 1}};
        ck_assert(!rg_bvh_any(bvh, &ray));
        ck_assert_uint_eq(rg_bvh_closest(bvh, &ray).facet, RG_NO_HIT);
        ck_assert_uint_eq(rg_bvh_in_prism(bvh, &prism, 1, &got), 0);
        rg_bvh_free(bvh);
    }
    soup_free(&s);
}
END_TEST

START_TEST(threads_do_not_show)
{
    soup s = bumpy_sphere(250, 0.2);
    rg_bvh *bvh[3];
    for (int i = 0; i < 3; i++) {
        omp_set_num_threads((int[]){1, 2, 7}[i]);
        bvh[i] = tree_of(&s, rg_cpu_best());
        ck_assert_uint_eq(bvh[i]->n_nodes, bvh[0]->n_nodes);
        ck_assert_uint_eq(bvh[i]->n_leaves, bvh[0]->n_leaves);
        ck_assert_mem_eq(bvh[i]->node, bvh[0]->node, bvh[0]->n_nodes * sizeof *bvh[0]->node);
        ck_assert_mem_eq(bvh[i]->leaf, bvh[0]->leaf, bvh[0]->n_leaves * sizeof *bvh[0]->leaf);
    }
    for (int i = 0; i < 3; i++) rg_bvh_free(bvh[i]);
    soup_free(&s);
}
END_TEST

/* Each fault that rg_bvh_check is for, put in by hand. */
START_TEST(check_finds_faults)
{
    soup s = bumpy_sphere(30, 0.1);
    rg_error err = {0};
    for (int fault = 0; fault < 6; fault++) {
        rg_bvh *bvh = tree_of(&s, RG_CPU_PLAIN);
        rg_node *last = &bvh->node[bvh->n_nodes - 1];
        switch (fault) {
        case 0: last->child[0] = RG_BLOCK_BIT | (uint32_t)bvh->n_leaves; break;
        case 1: last->high_m[1][0] = last->low_m[1][0]; break;
        case 2: bvh->leaf[3].facet[0] = bvh->leaf[4].facet[0]; break;
        case 3: bvh->leaf[3].corner_m[1][2][0] += 1e-9; break;
        case 4: bvh->node[0].child[0] = 0; break;
        default: bvh->node[0].n--; break;
        }
        ck_assert_msg(rg_bvh_check(bvh, &err) == RG_BAD_INPUT, "fault %d is passed over", fault);
        ck_assert(err.text[0] != 0);
        rg_bvh_free(bvh);
    }
    soup_free(&s);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("bvh build");
    TCase *tests = tcase_create("build");
    tcase_add_loop_test(tests, awkward_facets_are_built_and_found, 0, (int)(sizeof awkward / sizeof awkward[0]));
    tcase_add_test(tests, no_facet_is_a_tree_too);
    tcase_add_test(tests, threads_do_not_show);
    tcase_add_test(tests, check_finds_faults);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
