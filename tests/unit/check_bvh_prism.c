/* check_bvh_prism.c - the facets that reach into a prism, against a clipper that is told how far inside counts */
#include "bvh_scenes.h"
#include <stdio.h>

/* Does the facet reach into the prism, its planes moved inward by in_m? What is left of the facet after a cut by each plane, in long
 * doubles; nothing, and it does not. A normal is taken from the middle of the triangle's corners outward. */
typedef struct { int n; long double at[8][3]; } polygon;

static polygon cut(const polygon *p, const long double normal[3], long double limit)
{
    polygon kept = {0};
    for (int i = 0; i < p->n; i++) {
        const long double *a = p->at[i], *b = p->at[(i + 1) % p->n];
        long double da = -limit, db = -limit;
        for (int axis = 0; axis < 3; axis++) da += normal[axis] * a[axis], db += normal[axis] * b[axis];
        if (da <= 0.0L) memcpy(kept.at[kept.n++], a, sizeof kept.at[0]);
        if ((da < 0.0L && db > 0.0L) || (da > 0.0L && db < 0.0L)) {
            for (int axis = 0; axis < 3; axis++) kept.at[kept.n][axis] = a[axis] + (b[axis] - a[axis]) * (da / (da - db));
            kept.n++;
        }
    }
    return kept;
}

static void unit_cross(const long double a[3], const long double b[3], long double out[3])
{
    for (int i = 0; i < 3; i++) out[i] = a[(i + 1) % 3] * b[(i + 2) % 3] - a[(i + 2) % 3] * b[(i + 1) % 3];
    const long double length = sqrtl(out[0] * out[0] + out[1] * out[1] + out[2] * out[2]);
    for (int i = 0; i < 3; i++) out[i] /= length;
}

/* Along its own plane a triangle sweeps out nothing, and what is named is not counted. */
static bool edge_on(const rg_prism *prism)
{
    long double edge[2][3], normal[3], facing = 0.0L;
    for (int i = 0; i < 2; i++)
        for (int axis = 0; axis < 3; axis++) edge[i][axis] = (long double)prism->corner_m[i + 1][axis] - prism->corner_m[0][axis];
    unit_cross(edge[0], edge[1], normal);
    for (int axis = 0; axis < 3; axis++) facing += normal[axis] * prism->toward[axis];
    return fabsl(facing) < 1e-12L;
}

static bool reaches(const soup *s, const rg_prism *prism, size_t facet, long double in_m)
{
    polygon p = {.n = 3};
    long double edge[3][3], normal[4][3], toward[3], limit[4], sides = 0.0L;
    for (int c = 0; c < 3; c++)
        for (int axis = 0; axis < 3; axis++) {
            p.at[c][axis] = s->vertex_m[s->facet[facet][c]][axis];
            edge[c][axis] = (long double)prism->corner_m[(c + 1) % 3][axis] - prism->corner_m[c][axis];
            toward[axis] = prism->toward[axis];
        }
    unit_cross(edge[0], edge[1], normal[3]);
    for (int axis = 0; axis < 3; axis++) sides += normal[3][axis] * toward[axis];
    for (int e = 0; e < 3; e++) unit_cross(edge[e], toward, normal[e]);
    for (int k = 0; k < 4; k++) {
        limit[k] = -in_m;
        for (int axis = 0; axis < 3; axis++) {
            normal[k][axis] *= (k < 3) == (sides > 0.0L) ? 1.0L : -1.0L;
            limit[k] += normal[k][axis] * prism->corner_m[k % 3][axis];
        }
        p = cut(&p, normal[k], limit[k]);
    }
    return p.n > 0;
}

static rg_prism prism_of(const soup *s, size_t facet, int i)
{
    static const double axes[6][3] = {{1, 0, 0}, {0, 1, 0}, {0, 0, 1}, {-1, 0, 0}, {-0.0, -1, 0}, {0, -0.0, -1}};
    rg_prism prism;
    double length = 0.0;
    for (int c = 0; c < 3; c++) memcpy(prism.corner_m[c], s->vertex_m[s->facet[facet][c]], sizeof prism.corner_m[c]);
    for (int axis = 0; axis < 3; axis++) {
        prism.toward[axis] = between(-1.0, 1.0);
        length += prism.toward[axis] * prism.toward[axis];
    }
    for (int axis = 0; axis < 3; axis++) prism.toward[axis] /= sqrt(length);
    if (i % 4 == 0) memcpy(prism.toward, axes[i / 4 % 6], sizeof prism.toward);
    return prism;
}

static soup scene_of(int i)
{
    srand48(300 + i);
    switch (i) {
    case 0: return random_soup(300, 0.3, 0.0);
    case 1: return random_soup(300, 0.1, 1e5);
    case 2: return grid(12);
    default: return bumpy_sphere(20, 0.25);
    }
}

START_TEST(none_is_missed_and_few_are_too_many)
{
    soup s = scene_of(_i);
    const long double near_m = _i == 1 ? 1e-8L : 1e-12L;   /* a thousand roundings of the coordinates */
    static uint32_t got[4096], want[4096];
    size_t true_ones = 0, surplus = 0;
    rg_bvh *bvh[RG_N_CPU] = {NULL};
    for (int cpu = 0; cpu <= (int)rg_cpu_best(); cpu++) bvh[cpu] = tree_of(&s, (rg_cpu)cpu);
    for (int i = 0; i < 600; i++) {
        const size_t facet = (size_t)lrand48() % s.n_facets;
        const rg_prism prism = prism_of(&s, facet, i);
        const bool flat = edge_on(&prism);
        static bool named[4096];
        memset(named, 0, sizeof named);
        const size_t n = rg_bvh_in_prism(bvh[0], &prism, 4096, want);
        for (size_t k = 0; k < n; k++) {
            ck_assert_msg(!named[want[k]], "facet %u is named twice", want[k]);
            named[want[k]] = true;
        }
        for (size_t f = 0; f < s.n_facets; f++) {
            const bool inside = reaches(&s, &prism, f, near_m);
            ck_assert_msg(!inside || named[f], "scene %d, prism %d of facet %zu misses facet %zu", _i, i, facet, f);
            true_ones += inside;
            surplus += named[f] && !flat && !reaches(&s, &prism, f, -near_m);
        }
        for (int cpu = 0; cpu <= (int)rg_cpu_best(); cpu++) {
            ck_assert_uint_eq(rg_bvh_in_prism(bvh[cpu], &prism, 4096, got), n);
            for (size_t k = 0; k < n; k++) ck_assert_msg(named[got[k]], "%s names facet %u", rg_cpu_name((rg_cpu)cpu), got[k]);
            const uint32_t kept = got[n / 2];
            ck_assert_uint_eq(rg_bvh_in_prism(bvh[cpu], &prism, n / 2, got), n);       /* no room: still counted, nothing written behind */
            if (n > 0) ck_assert_uint_eq(got[n / 2], kept);
        }
    }
    printf("scene %d: %zu reach in, %zu more are named, of 600 prisms\n", _i, true_ones, surplus);
    ck_assert_uint_le(surplus, true_ones / 10);
    for (int cpu = 0; cpu <= (int)rg_cpu_best(); cpu++) rg_bvh_free(bvh[cpu]);
    soup_free(&s);
}
END_TEST

/* Nothing stands before a facet of a convex body that faces the radar, and its neighbours only touch. */
START_TEST(convex_body_names_next_to_nobody)
{
    soup s = bumpy_sphere(100, 0.0);
    rg_bvh *bvh = tree_of(&s, rg_cpu_best());
    size_t prisms = 0, named = 0;
    static uint32_t got[64];
    for (size_t f = 0; f < s.n_facets; f++) {
        const rg_prism prism = prism_of(&s, f, (int)(f % 24));
        long double facing = 0.0L;
        for (int axis = 0; axis < 3; axis++) facing += (long double)prism.corner_m[0][axis] * prism.toward[axis];
        if (facing < 0.05L) continue;
        prisms++;
        const size_t n = rg_bvh_in_prism(bvh, &prism, 64, got);
        for (size_t k = 0; k < n; k++) ck_assert_msg(got[k] != f, "facet %zu stands in its own light", f);
        named += n;
    }
    printf("convex: %zu named of %zu prisms\n", named, prisms);
    ck_assert_uint_le(named, prisms / 100);
    rg_bvh_free(bvh);
    soup_free(&s);
}
END_TEST

/* Edge-on the prism is flat. It may name what comes near it, but must name what it cuts, and survive. */
START_TEST(edge_on_is_not_missed)
{
    soup s = soup_new(6, 2);
    static const double at[6][3] = {{0, 0, 0}, {1, 0, 0}, {0, 0, 1}, {0.2, -1, 2}, {0.3, 1, 2}, {0.4, 0.3, 3}};
    memcpy(s.vertex_m, at, sizeof at);
    for (uint32_t i = 0; i < 6; i++) s.facet[i / 3][i % 3] = i;
    for (int cpu = 0; cpu <= (int)rg_cpu_best(); cpu++) {
        rg_bvh *bvh = tree_of(&s, (rg_cpu)cpu);
        rg_prism prism = {.corner_m = {{0, 0, 0}, {1, 0, 0}, {0, 0, 1}}, .toward = {0, 0, 1}};
        uint32_t got[2] = {9, 9};
        const size_t n = rg_bvh_in_prism(bvh, &prism, 2, got);
        ck_assert_msg(n >= 1 && n <= 2 && (got[0] == 1 || got[1] == 1), "%s: %zu named", rg_cpu_name((rg_cpu)cpu), n);
        prism = (rg_prism){.corner_m = {{0, 0, 5}, {0, 0, 5}, {0, 0, 5}}, .toward = {0, 0, 1}};     /* a point, beyond all */
        ck_assert_uint_eq(rg_bvh_in_prism(bvh, &prism, 2, got), 0);
        rg_bvh_free(bvh);
    }
    soup_free(&s);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("prism");
    TCase *tests = tcase_create("prism");
    tcase_add_loop_test(tests, none_is_missed_and_few_are_too_many, 0, 4);
    tcase_add_test(tests, convex_body_names_next_to_nobody);
    tcase_add_test(tests, edge_on_is_not_missed);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
