/* check_fitness.c - the estimated sagitta against the distance from each facet to the known surface, measured point by point */
#include "mesh/sagitta.h"
#include "run.h"
#include <math.h>
#include <roadglint/fitness.h>
#include <string.h>

#define PI 3.14159265358979323846

enum { MAX_VERTICES = 50000, MAX_FACETS = 90000 };
typedef struct {
    size_t n_vertices, n_facets;
    double v[MAX_VERTICES][3];
    uint32_t f[MAX_FACETS][3];
} soup;
static soup work;

static uint32_t vertex(double x, double y, double z)
{
    ck_assert_uint_lt(work.n_vertices, MAX_VERTICES);
    double *v = work.v[work.n_vertices];
    v[0] = x, v[1] = y, v[2] = z;
    return (uint32_t)work.n_vertices++;
}

static void facet(uint32_t a, uint32_t b, uint32_t c)
{
    ck_assert_uint_lt(work.n_facets, MAX_FACETS);
    uint32_t *f = work.f[work.n_facets++];
    f[0] = a, f[1] = b, f[2] = c;
}

static rg_mesh *made(void)
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    const rg_status status = rg_mesh_from_arrays(&mesh, work.n_vertices, (const double (*)[3])work.v, work.n_facets,
                                                 (const uint32_t (*)[3])work.f, NULL, 0, NULL, &err);
    ck_assert_msg(status == RG_OK, "%s", err.text);
    return mesh;
}

/* Quads of a net of nu by nv points, split along one diagonal, the other, by turns, or at random. */
typedef enum { ONE_WAY, OTHER_WAY, BY_TURNS, AT_RANDOM, N_SPLITS } split;
typedef void net_point(double u, double v, double r[3]);

static rg_mesh *net(size_t nu, size_t nv, net_point *point, split how)
{
    work.n_vertices = work.n_facets = 0;
    srand48(7);
    for (size_t j = 0; j < nv; j++)
        for (size_t i = 0; i < nu; i++) {
            double r[3];
            point((double)i / (double)(nu - 1), (double)j / (double)(nv - 1), r);
            vertex(r[0], r[1], r[2]);
        }
    for (size_t j = 0; j + 1 < nv; j++)
        for (size_t i = 0; i + 1 < nu; i++) {
            const uint32_t a = (uint32_t)(j * nu + i), b = a + 1, c = b + (uint32_t)nu, d = a + (uint32_t)nu;
            const bool one = how == ONE_WAY || (how == BY_TURNS && (i + j) % 2) || (how == AT_RANDOM && drand48() < 0.5);
            facet(a, b, one ? c : d);
            facet(one ? a : b, c, d);
        }
    return made();
}

/* Known surfaces, and the distance to each. */
static double off_sphere(const double r[3]) { return 0.5 - sqrt(r[0] * r[0] + r[1] * r[1] + r[2] * r[2]); }
static double off_tube(const double r[3]) { return 0.05 - hypot(r[0], r[1]); }
static double off_torus(const double r[3]) { return 0.1 - hypot(hypot(r[0], r[1]) - 0.4, r[2]); }

static void on_tube(double u, double v, double r[3])
{
    r[0] = 0.05 * cos(2.0 * PI * u), r[1] = 0.05 * sin(2.0 * PI * u), r[2] = v;
}
static void on_uneven_tube(double u, double v, double r[3])     /* every second chord is twice as long */
{
    const double i = round(u * 32.0), at = (floor(i / 2.0) * 3.0 + fmod(i, 2.0)) / 48.0;
    on_tube(at, v, r);
}
static void on_torus(double u, double v, double r[3])   /* the inner side too, where it is a saddle */
{
    const double a = 1.5 * u, b = 2.0 * PI * v;
    r[0] = (0.4 + 0.1 * cos(b)) * cos(a), r[1] = (0.4 + 0.1 * cos(b)) * sin(a), r[2] = 0.1 * sin(b);
}
/* A door panel: gently curved along z, more so across, and swelling. */
static double panel_y(double x, double z) { return 0.9 - 0.02 * x * x - 0.35 * (z - 0.3) * (z - 0.3) - 0.03 * x * z * z; }
static void on_panel(double u, double v, double r[3])
{
    r[0] = 1.2 * u, r[2] = 0.8 * v * (0.6 + 0.4 * v), r[1] = panel_y(r[0], r[2]);
}
static double off_panel(const double r[3])
{
    const double h = 1e-6, gx = (panel_y(r[0] + h, r[2]) - panel_y(r[0] - h, r[2])) / (2 * h);
    const double gz = (panel_y(r[0], r[2] + h) - panel_y(r[0], r[2] - h)) / (2 * h);
    return (panel_y(r[0], r[2]) - r[1]) / sqrt(1.0 + gx * gx + gz * gz);
}

static double measured_m(const rg_mesh *mesh, size_t f, double off(const double r[3]))
{
    enum { N = 24 };
    double largest = 0.0;
    const uint32_t *c = mesh->facet[f];
    for (int i = 0; i <= N; i++)
        for (int j = 0; i + j <= N; j++) {
            double r[3];
            for (int k = 0; k < 3; k++)
                r[k] = mesh->origin_m[k] + (i * mesh->vertex_m[c[0]][k] + j * mesh->vertex_m[c[1]][k] + (N - i - j) * mesh->vertex_m[c[2]][k]) / N;
            largest = fmax(largest, fabs(off(r)));
        }
    return largest;
}

/* Largest estimate against largest truth within tol; and the share of the area whose facet's own estimate is 0.7 to 1.3 of the truth. */
static void hold_to_truth(rg_mesh *mesh, const char *what, double off(const double r[3]), double tol, double least_share)
{
    rg_sagittas s;
    rg_fitness fitness;
    ck_assert_int_eq(rg_sagittas_find(&s, mesh, NULL), RG_OK);
    ck_assert_int_eq(rg_mesh_fitness(mesh, 77e9, &fitness, NULL), RG_OK);
    double truth_m = 0.0, good = 0.0;
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const double m = measured_m(mesh, f, off), ratio = s.sagitta_m[f] / m;
        truth_m = fmax(truth_m, m);
        good += (ratio > 0.7 && ratio < 1.3) / (double)mesh->n_facets;
    }
    const double ratio = fitness.sagitta_m[2] / truth_m;
    ck_assert_msg(fabs(ratio - 1.0) <= tol, "%s: estimated %.4g m, measured %.4g m", what, fitness.sagitta_m[2], truth_m);
    ck_assert_msg(good >= least_share, "%s: only %.3f of the facets are within 30 %%", what, good);
    ck_assert_double_eq_tol(fitness.fit_up_to_hz * fitness.sagitta_m[2], 299792458.0 / 16.0, 1.0);
    rg_sagittas_free(&s);
    rg_mesh_free(mesh);
}

static rg_mesh *icosphere(int level)
{
    static const double t = 1.6180339887498949;
    static const signed char sign[4][2] = {{-1, 1}, {1, 1}, {-1, -1}, {1, -1}};
    static const uint32_t face[20][3] = {{0, 11, 5}, {0, 5, 1}, {0, 1, 7}, {0, 7, 10}, {0, 10, 11}, {1, 5, 9}, {5, 11, 4}, {11, 10, 2},
        {10, 7, 6}, {7, 1, 8}, {3, 9, 4}, {3, 4, 2}, {3, 2, 6}, {3, 6, 8}, {3, 8, 9}, {4, 9, 5}, {2, 4, 11}, {6, 2, 10}, {8, 6, 7}, {9, 8, 1}};
    work.n_vertices = work.n_facets = 0;
    for (int axis = 0; axis < 3; axis++)
        for (int i = 0; i < 4; i++) {
            const double a = sign[i][0], b = sign[i][1] * t;
            if (axis == 0) vertex(a, b, 0);
            if (axis == 1) vertex(0, a, b);
            if (axis == 2) vertex(b, 0, a);
        }
    for (int i = 0; i < 20; i++) facet(face[i][0], face[i][1], face[i][2]);
    for (; level > 0; level--) {
        static uint32_t old[MAX_FACETS][3];
        const size_t n = work.n_facets;
        memcpy(old, work.f, n * sizeof old[0]);
        work.n_facets = 0;
        for (size_t f = 0; f < n; f++) {
            uint32_t m[3];
            for (int i = 0; i < 3; i++) {
                const double *a = work.v[old[f][i]], *b = work.v[old[f][(i + 1) % 3]];
                const double s = sqrt((1.0 + t * t) / (pow(a[0] + b[0], 2) + pow(a[1] + b[1], 2) + pow(a[2] + b[2], 2)));
                m[i] = vertex(s * (a[0] + b[0]), s * (a[1] + b[1]), s * (a[2] + b[2]));
            }
            for (int i = 0; i < 3; i++) facet(old[f][i], m[i], m[(i + 2) % 3]);
            facet(m[0], m[1], m[2]);
        }
    }
    for (size_t v = 0; v < work.n_vertices; v++)
        for (int i = 0; i < 3; i++) work.v[v][i] *= 0.5 / sqrt(1.0 + t * t);
    return made();
}

/* Tolerances: what a quadratic leaves out where a facet's turn is up to 0.4; 30 % where chords of 1 and 2 take turns, for the normals'
 * bound of 2.5 times 0.3. The facet's own figure may also be off where the curvature passes through zero along its longest edge. */
START_TEST(icosphere_is_as_measured) { hold_to_truth(icosphere(_i), "icosphere", off_sphere, 0.05, 0.9999); }
END_TEST

START_TEST(tube_is_as_measured)     /* facets of 1 m by 9 mm, whose diagonals do not turn */
{
    hold_to_truth(net(33, 2, on_tube, (split)_i), "tube of one ring", off_tube, 0.02, 1.0);
    hold_to_truth(net(33, 6, on_tube, (split)_i), "tube of five rings", off_tube, 0.02, 1.0);
    hold_to_truth(net(13, 300, on_tube, (split)_i), "tube of facets across", off_tube, 0.05, 1.0);
    hold_to_truth(net(33, 4, on_uneven_tube, (split)_i), "uneven tube", off_tube, 0.30, 0.9);
}
END_TEST

START_TEST(torus_is_as_measured)
{
    hold_to_truth(net(24, 40, on_torus, (split)_i), "torus", off_torus, 0.05, 0.999);
    hold_to_truth(net(60, 24, on_torus, (split)_i), "torus, long facets", off_torus, 0.05, 0.999);
    hold_to_truth(net(9, 60, on_torus, (split)_i), "torus, facets long the other way", off_torus, 0.05, 0.85);
}
END_TEST

START_TEST(panel_is_as_measured)
{
    hold_to_truth(net(4, 30, on_panel, (split)_i), "panel of long facets", off_panel, 0.05, 0.98);
    hold_to_truth(net(40, 9, on_panel, (split)_i), "panel of high facets", off_panel, 0.05, 0.98);
    hold_to_truth(net(15, 15, on_panel, (split)_i), "panel", off_panel, 0.05, 0.98);
}
END_TEST

/* The net's points anywhere within 0.35 of a cell of their place, as a mesh generator of its own mind puts them. */
static size_t cells_u, cells_v;
static void on_restless_torus(double u, double v, double r[3])
{
    on_torus(u + 0.7 * (drand48() - 0.5) / (double)cells_u, v + 0.7 * (drand48() - 0.5) / (double)cells_v, r);
}

START_TEST(uneven_facets_are_as_measured)
{
    cells_u = 23, cells_v = 39;
    hold_to_truth(net(24, 40, on_restless_torus, (split)_i), "restless torus", off_torus, 0.1, 0.93);
    cells_u = 59, cells_v = 23;
    hold_to_truth(net(60, 24, on_restless_torus, (split)_i), "restless torus, long facets", off_torus, 0.1, 0.93);
}
END_TEST

/* A closed prism over a ring of points in the xy plane, axis z. */
static rg_mesh *prism(size_t n, const double ring[][2], double length_m)
{
    work.n_vertices = work.n_facets = 0;
    for (size_t i = 0; i < n; i++) vertex(ring[i][0], ring[i][1], 0), vertex(ring[i][0], ring[i][1], length_m);
    const uint32_t low = vertex(0, 0, 0), high = vertex(0, 0, length_m);
    for (uint32_t i = 0; i < n; i++) {
        const uint32_t a = 2 * i, b = 2 * ((i + 1) % (uint32_t)n);
        facet(a, b, b + 1), facet(a, b + 1, a + 1), facet(low, b, a), facet(high, a + 1, b + 1);
    }
    return made();
}

static rg_mesh *regular_prism(size_t n, double radius_m)
{
    double ring[64][2];
    for (size_t i = 0; i < n; i++) {
        ring[i][0] = radius_m * cos(2 * PI * (double)i / (double)n);
        ring[i][1] = radius_m * sin(2 * PI * (double)i / (double)n);
    }
    return prism(n, (const double (*)[2])ring, 0.4);
}

/* A box 1 m by 0.6 m with round corners of 50 mm in n chords. */
static rg_mesh *rounded_box(size_t n)
{
    static const double middle[4][2] = {{0.45, 0.25}, {-0.45, 0.25}, {-0.45, -0.25}, {0.45, -0.25}};
    double ring[128][2];
    size_t at = 0;
    for (size_t c = 0; c < 4; c++)
        for (size_t i = 0; i <= n; i++, at++) {
            const double a = 0.5 * PI * ((double)c + (double)i / (double)n);
            ring[at][0] = middle[c][0] + 0.05 * cos(a), ring[at][1] = middle[c][1] + 0.05 * sin(a);
        }
    return prism(at, (const double (*)[2])ring, 2.0);
}

static rg_fitness judged(rg_mesh *mesh)
{
    rg_fitness fitness;
    rg_error err = {""};
    ck_assert_msg(rg_mesh_fitness(mesh, 77e9, &fitness, &err) == RG_OK, "%s", err.text);
    rg_mesh_free(mesh);
    return fitness;
}

START_TEST(fillets_are_judged_and_the_flats_between_them_are_not)
{
    const size_t n = (size_t)_i;
    const double exact_m = 0.05 * (1.0 - cos(0.25 * PI / (double)n));   /* radius (1 - cos of half a chord's angle) */
    const rg_fitness fitness = judged(rounded_box(n));
    ck_assert_msg(fitness.sagitta_m[2] > 0.7 * exact_m && fitness.sagitta_m[2] < 1.3 * exact_m, "%zu chords: %g m, exact %g m", n,
                  fitness.sagitta_m[2], exact_m);
    ck_assert_uint_eq(fitness.n_feature_edges, 2 * 4 * (n + 1));        /* the two rims */
}
END_TEST

START_TEST(fillets_of_two_chords_are_unsure)     /* turns of 22.5, 45 and 22.5 degrees */
{
    const rg_fitness fitness = judged(rounded_box(2));
    ck_assert_uint_eq(fitness.n_unsure_edges, 4);
    ck_assert_double_eq_tol(fitness.unsure_sagitta_m, 0.05 * (1.0 - cos(PI / 8)), 1e-9);
}
END_TEST

START_TEST(flat_facets_have_no_limit)
{
    static const double square[4][2] = {{1, 1}, {-1, 1}, {-1, -1}, {1, -1}}, hexagon_bar = 0.3;
    const rg_fitness cube = judged(prism(4, square, 2.0)), bar = judged(regular_prism(6, hexagon_bar));
    ck_assert_double_eq(cube.sagitta_m[2], 0.0);
    ck_assert(isinf(cube.fit_up_to_hz) && isinf(cube.edge_needed_m) && cube.fit);
    ck_assert_double_eq(cube.curved_area_m2, 0.0);
    ck_assert_uint_eq(cube.n_feature_edges, 12);
    ck_assert_uint_eq(cube.n_unsure_edges, 0);
    ck_assert_double_eq_tol(cube.size_m, sqrt(12.0), 1e-12);
    ck_assert_double_eq_tol(cube.aspect_step_rad, 299792458.0 / 77e9 / (4.0 * sqrt(12.0)), 1e-12);
    ck_assert_double_eq_tol(cube.far_field_m, 24.0 / (299792458.0 / 77e9), 1e-6);
    ck_assert_double_eq(bar.sagitta_m[2], 0.0);
}
END_TEST

START_TEST(coarse_tubes_are_named_as_unsure)
{
    const rg_fitness tube = judged(regular_prism(8, 0.1));      /* turns of 45 degrees */
    ck_assert_uint_eq(tube.n_unsure_edges, 8);
    ck_assert_uint_eq(tube.n_feature_edges, 24);
    ck_assert_double_eq(tube.sagitta_m[2], 0.0);
    const double exact_m = 0.1 * (1.0 - cos(PI / 8));
    ck_assert_double_eq_tol(tube.unsure_sagitta_m, exact_m, 1e-9);      /* e tan(t/4)/2 is the arc's own sagitta */
    ck_assert_uint_eq(judged(regular_prism(13, 0.1)).n_unsure_edges, 0);
}
END_TEST

START_TEST(a_lone_crease_is_a_feature)
{
    const double turn = _i * PI / 180.0;
    work.n_vertices = work.n_facets = 0;
    const uint32_t a = vertex(-1, 0, 0), b = vertex(0, 0, 0), c = vertex(cos(turn), 0, sin(turn));
    const uint32_t d = vertex(-1, 1, 0), e = vertex(0, 1, 0), g = vertex(cos(turn), 1, sin(turn));
    facet(a, b, e), facet(a, e, d), facet(b, c, g), facet(b, g, e);
    const rg_fitness fitness = judged(made());
    ck_assert_uint_eq(fitness.n_feature_edges, _i > 10);
    /* Below 10 degrees it counts as two chords of 1 m: e tan(t/4)/2. */
    if (_i <= 10) ck_assert_double_eq_tol(fitness.sagitta_m[2], 0.5 * tan(turn / 4), 0.03 * tan(turn / 4));
    else ck_assert_double_eq(fitness.sagitta_m[2], 0.0);
}
END_TEST

/* A strip of six panels of 100 mm that turn by 2 degrees each, but by 15 in the middle; beside a turn of 8 the same is no crease. */
START_TEST(a_crease_stands_out_of_its_neighbourhood)
{
    const double turn_deg[5] = {2, _i ? 8 : 2, 15, 2, 2};
    double x = 0, z = 0, a = 0;
    work.n_vertices = work.n_facets = 0;
    for (int i = 0; i <= 6; i++) {
        vertex(x, 0, z), vertex(x, 0.5, z);
        if (i > 0 && i < 6) a += turn_deg[i - 1] * PI / 180;
        x += 0.1 * cos(a), z -= 0.1 * sin(a);
    }
    for (uint32_t i = 0; i < 12; i += 2) facet(i, i + 2, i + 3), facet(i, i + 3, i + 1);
    const rg_fitness fitness = judged(made());
    ck_assert_uint_eq(fitness.n_feature_edges, _i ? 0 : 1);
    if (!_i) ck_assert_double_lt(fitness.sagitta_m[2], 1.3 * 0.1 * (2 * PI / 180) / 8);
}
END_TEST

static void on_tilted_plane(double u, double v, double r[3])
{
    r[0] = 3.0 * u + 0.1 * v * v, r[1] = 1.7 * v - 0.2 * u, r[2] = 0.31 * r[0] - 0.47 * r[1];
}

START_TEST(single_precision_does_not_curve_a_plane)
{
    rg_mesh *mesh = net(50, 50, on_tilted_plane, AT_RANDOM);
    rg_fitness fitness;
    for (size_t v = 0; v < mesh->n_vertices; v++)
        for (int i = 0; i < 3; i++) mesh->vertex_m[v][i] = (float)mesh->vertex_m[v][i];
    ck_assert_int_eq(rg_mesh_fitness(mesh, 77e9, &fitness, NULL), RG_OK);
    ck_assert_double_gt(fitness.sagitta_m[2], 0.0);     /* so the rounding is there to be seen */
    mesh->report.coordinate_step_m = 0x1p-22;           /* of a float from 2 to 4 */
    ck_assert_int_eq(rg_mesh_fitness(mesh, 77e9, &fitness, NULL), RG_OK);
    ck_assert_double_eq(fitness.sagitta_m[2], 0.0);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(figures_follow_the_scale)
{
    rg_mesh *mesh = net(24, 40, on_torus, AT_RANDOM);
    const rg_fitness one = judged(mesh);
    rg_mesh_free(net(24, 40, on_torus, AT_RANDOM));
    for (size_t v = 0; v < work.n_vertices; v++)
        for (int i = 0; i < 3; i++) work.v[v][i] *= 64.0;
    const rg_fitness large = judged(made());
    for (int i = 0; i < 3; i++) ck_assert_double_eq_tol(large.sagitta_m[i], 64.0 * one.sagitta_m[i], 1e-9);
    for (int i = 0; i < 5; i++) ck_assert_double_eq_tol(large.edge_m[i], 64.0 * one.edge_m[i], 1e-9);
    ck_assert_double_le(one.sagitta_m[0], one.sagitta_m[1]);
    ck_assert_double_le(one.sagitta_m[1], one.sagitta_m[2]);
    ck_assert_double_eq_tol(large.curved_area_m2, 4096.0 * one.curved_area_m2, 1e-6);
}
END_TEST

START_TEST(edges_as_short_as_it_asks_for_are_fit)
{
    const rg_fitness coarse = judged(icosphere(2));
    ck_assert(!coarse.fit);
    ck_assert_double_gt(coarse.over_area_m2, 0.99 * coarse.curved_area_m2);
    rg_fitness fine = coarse;
    for (int level = 3; level < 6 && fine.edge_m[4] > coarse.edge_needed_m; level++) fine = judged(icosphere(level));
    ck_assert_double_le(fine.edge_m[4], coarse.edge_needed_m);
    ck_assert(fine.fit);
    ck_assert_double_eq(fine.over_area_m2, 0.0);
}
END_TEST

START_TEST(worst_part_and_each_part)
{
    rg_mesh *mesh = NULL;
    static const char *const name[] = {"panel", "tube"};
    static uint32_t part[MAX_FACETS];
    rg_mesh_free(net(15, 15, on_panel, ONE_WAY));
    const size_t n_vertices = work.n_vertices, n_facets = work.n_facets;
    static soup first;
    first = work;
    rg_mesh_free(net(13, 6, on_tube, ONE_WAY));
    for (size_t f = 0; f < work.n_facets; f++, part[first.n_facets++] = 1)
        for (int i = 0; i < 3; i++) first.f[first.n_facets][i] = work.f[f][i] + (uint32_t)n_vertices;
    memcpy(first.v + n_vertices, work.v, work.n_vertices * sizeof work.v[0]);
    ck_assert_int_eq(rg_mesh_from_arrays(&mesh, n_vertices + work.n_vertices, (const double (*)[3])first.v, first.n_facets,
                                         (const uint32_t (*)[3])first.f, part, 2, name, NULL), RG_OK);
    rg_fitness fitness;
    double sagitta_m[2];
    ck_assert_int_eq(rg_mesh_fitness(mesh, 77e9, &fitness, NULL), RG_OK);
    ck_assert_int_eq(rg_mesh_part_sagitta(mesh, sagitta_m, NULL), RG_OK);
    ck_assert_uint_eq(fitness.worst_part, 1);
    ck_assert_double_eq(sagitta_m[1], fitness.sagitta_m[2]);
    ck_assert(sagitta_m[0] > 0.0 && sagitta_m[0] < sagitta_m[1]);
    ck_assert_uint_gt(n_facets, 0);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(odd_meshes_are_judged)   /* three facets at an edge, a lone facet, a one-sided band: no edge of theirs is taken for a curve */
{
    work.n_vertices = work.n_facets = 0;
    const uint32_t a = vertex(0, 0, 0), b = vertex(1, 0, 0);
    for (int i = 0; i < 3; i++) facet(a, b, vertex(0.5, cos(0.1 * i), sin(0.1 * i)));
    ck_assert_double_eq(judged(made()).sagitta_m[2], 0.0);
    work.n_vertices = work.n_facets = 0;
    facet(vertex(0, 0, 0), vertex(1, 0, 0), vertex(0, 1, 0));
    const rg_fitness lone = judged(made());
    ck_assert_double_eq(lone.edge_m[0], 1.0);
    ck_assert_double_eq(lone.edge_m[4], sqrt(2.0));
    ck_assert_double_eq(lone.size_m, sqrt(2.0));
    work.n_vertices = work.n_facets = 0;
    enum { N = 40 };
    for (int i = 0; i < N; i++) {
        const double t = PI * i / N, u = 2.0 * t;
        for (int side = -1; side <= 1; side += 2)
            vertex((1 + 0.2 * side * cos(t)) * cos(u), (1 + 0.2 * side * cos(t)) * sin(u), 0.2 * side * sin(t));
    }
    for (uint32_t i = 0; i < N; i++) {
        const uint32_t p = 2 * i, q = i + 1 < N ? p + 2 : 1, r = i + 1 < N ? p + 3 : 0;
        facet(p, q, r), facet(p, r, p + 1);
    }
    const rg_fitness band = judged(made());
    ck_assert(isfinite(band.fit_up_to_hz) && band.sagitta_m[2] > 0.0 && band.sagitta_m[2] < 0.05);
}
END_TEST

START_TEST(wrong_frequencies_are_refused)
{
    static const double wrong[] = {0.0, -1.0, INFINITY, NAN};
    rg_mesh *mesh = regular_prism(6, 1.0);
    rg_fitness fitness = {.size_m = 42.0};
    rg_error err;
    ck_assert_int_eq(rg_mesh_fitness(mesh, wrong[_i], &fitness, &err), RG_BAD_VALUE);
    ck_assert_double_eq(fitness.size_m, 42.0);
    rg_mesh_free(mesh);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("fitness");
    TCase *tests = tcase_create("fitness");
    tcase_add_loop_test(tests, icosphere_is_as_measured, 1, 5);
    tcase_add_loop_test(tests, tube_is_as_measured, 0, N_SPLITS);
    tcase_add_loop_test(tests, torus_is_as_measured, 0, N_SPLITS);
    tcase_add_loop_test(tests, panel_is_as_measured, 0, N_SPLITS);
    tcase_add_loop_test(tests, uneven_facets_are_as_measured, 0, N_SPLITS);
    tcase_add_loop_test(tests, fillets_are_judged_and_the_flats_between_them_are_not, 3, 9);
    tcase_add_test(tests, fillets_of_two_chords_are_unsure);
    tcase_add_test(tests, flat_facets_have_no_limit);
    tcase_add_test(tests, coarse_tubes_are_named_as_unsure);
    tcase_add_loop_test(tests, a_lone_crease_is_a_feature, 2, 29);
    tcase_add_loop_test(tests, a_crease_stands_out_of_its_neighbourhood, 0, 2);
    tcase_add_test(tests, single_precision_does_not_curve_a_plane);
    tcase_add_test(tests, figures_follow_the_scale);
    tcase_add_test(tests, edges_as_short_as_it_asks_for_are_fit);
    tcase_add_test(tests, worst_part_and_each_part);
    tcase_add_test(tests, odd_meshes_are_judged);
    tcase_add_loop_test(tests, wrong_frequencies_are_refused, 0, 4);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
