/* check_mesh.c - each repair on a mesh small enough to count by hand */
#include "mesh/mesh.h"
#include "run.h"
#include <math.h>
#include <string.h>

/* Unit cube, corner i at (i & 1, i >> 1 & 1, i >> 2); wound outward. */
static const uint32_t cube[12][3] = {{0, 2, 3}, {0, 3, 1}, {4, 5, 7}, {4, 7, 6}, {0, 1, 5}, {0, 5, 4},
                                     {2, 6, 7}, {2, 7, 3}, {0, 4, 6}, {0, 6, 2}, {1, 3, 7}, {1, 7, 5}};

static void cube_vertices(double v[8][3], double x, double y, double z, double edge_m)
{
    for (unsigned i = 0; i < 8; i++) {
        v[i][0] = x + (i & 1 ? edge_m : 0.0);
        v[i][1] = y + (i & 2 ? edge_m : 0.0);
        v[i][2] = z + (i & 4 ? edge_m : 0.0);
    }
}

static rg_mesh *mesh_of(size_t n_vertices, double v[][3], size_t n_facets, uint32_t f[][3])
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    const rg_status status = rg_mesh_from_arrays(&mesh, n_vertices, (const double (*)[3])v, n_facets, (const uint32_t (*)[3])f, NULL, 0, NULL, &err);
    ck_assert_msg(status == RG_OK, "%s", err.text);
    ck_assert_msg(rg_mesh_check(mesh, &err) == RG_OK, "%s", err.text);
    return mesh;
}

/* Six times the volume of a closed mesh: positive when it faces outward. */
static double volume_m3(const rg_mesh *mesh)
{
    double six = 0.0;
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const double *a = mesh->vertex_m[mesh->facet[f][0]], *b = mesh->vertex_m[mesh->facet[f][1]], *c = mesh->vertex_m[mesh->facet[f][2]];
        six += a[0] * (b[1] * c[2] - b[2] * c[1]) + a[1] * (b[2] * c[0] - b[0] * c[2]) + a[2] * (b[0] * c[1] - b[1] * c[0]);
    }
    return six / 6.0;
}

START_TEST(a_good_cube_stays_as_it_is)
{
    double v[8][3];
    uint32_t f[12][3];
    cube_vertices(v, 2.0, -1.0, 0.0, 1.0);
    memcpy(f, cube, sizeof f);
    rg_mesh *mesh = mesh_of(8, v, 12, f);
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    ck_assert_uint_eq(rg_mesh_n_facets(mesh), 12);
    ck_assert_uint_eq(rg_mesh_n_vertices(mesh), 8);
    ck_assert_uint_eq(rg_mesh_n_parts(mesh), 1);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 0), "mesh");
    ck_assert_ptr_null(rg_mesh_part_name(mesh, 1));
    ck_assert_mem_eq(mesh->facet, cube, sizeof cube);
    ck_assert_uint_eq(r->n_degenerate + r->n_duplicate + r->n_vertices_welded + r->n_facets_turned + r->n_shells_turned, 0);
    ck_assert_uint_eq(r->n_boundary_edges + r->n_branch_edges, 0);
    ck_assert_uint_eq(r->n_shells, 1);
    ck_assert_uint_eq(r->n_closed_shells, 1);
    ck_assert_double_eq(r->weld_m, 0x1p-20);
    ck_assert_double_eq(r->area_m2, 6.0);
    ck_assert_double_eq(rg_mesh_part_area_m2(mesh, 0), 6.0);
    ck_assert_double_eq(rg_mesh_part_area_m2(mesh, 1), 0.0);
    ck_assert_double_eq(r->low_m[0], 2.0);
    ck_assert_double_eq(r->high_m[0], 3.0);
    ck_assert_double_eq(r->low_m[1], -1.0);
    ck_assert_double_eq(mesh->origin_m[0], 2.5);
    ck_assert_double_eq(mesh->origin_m[1], -0.5);
    ck_assert_double_eq(r->coordinate_step_m, 0x1p-51);     /* doubles from 2 to 4 are that far apart */
    ck_assert_double_eq_tol(volume_m3(mesh), 1.0, 1e-15);
    ck_assert_uint_eq(strlen(r->geometry_sha256), 64);
    ck_assert_str_eq(r->sha256, "");
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(a_cube_inside_out_is_turned_as_a_whole)
{
    double v[8][3];
    uint32_t f[12][3];
    cube_vertices(v, 0, 0, 0, 1.0);
    for (int i = 0; i < 12; i++) f[i][0] = cube[i][0], f[i][1] = cube[i][2], f[i][2] = cube[i][1];
    rg_mesh *mesh = mesh_of(8, v, 12, f);
    ck_assert_uint_eq(mesh->report.n_shells_turned, 1);
    ck_assert_uint_eq(mesh->report.n_facets_turned, 0);
    ck_assert_double_eq_tol(volume_m3(mesh), 1.0, 1e-15);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(one_turned_facet_is_turned_back)     /* also when it is the first, from which the flood starts */
{
    double v[8][3];
    uint32_t f[12][3];
    cube_vertices(v, 0, 0, 0, 1.0);
    memcpy(f, cube, sizeof f);
    f[_i][1] = cube[_i][2];
    f[_i][2] = cube[_i][1];
    rg_mesh *mesh = mesh_of(8, v, 12, f);
    ck_assert_uint_eq(mesh->report.n_facets_turned, 1);
    ck_assert_uint_eq(mesh->report.n_shells_turned, 0);
    ck_assert_uint_eq(mesh->report.n_closed_shells, 1);
    ck_assert_double_eq_tol(volume_m3(mesh), 1.0, 1e-15);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(any_mix_of_windings_comes_out_outward)
{
    double v[8][3];
    uint32_t f[12][3];
    cube_vertices(v, 5, 5, 5, 2.0);
    srand48(_i);
    unsigned n_in = 0;
    for (int i = 0; i < 12; i++) {
        const bool in = drand48() < 0.5;
        const int turn = (int)(drand48() * 3.0);
        for (int c = 0; c < 3; c++) f[i][c] = cube[i][in ? (5 - c - turn) % 3 : (c + turn) % 3];
        n_in += in;
    }
    rg_mesh *mesh = mesh_of(8, v, 12, f);
    ck_assert_uint_eq(mesh->report.n_facets_turned, n_in < 6 ? n_in : 12 - n_in);
    if (n_in != 6) ck_assert_uint_eq(mesh->report.n_shells_turned, n_in > 6);
    ck_assert_double_eq_tol(volume_m3(mesh), 8.0, 1e-13);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(two_sided_facets_become_one)
{
    double v[8][3];
    uint32_t f[36][3];
    cube_vertices(v, 0, 0, 0, 1.0);
    for (int i = 0; i < 12; i++)
        for (int c = 0; c < 3; c++) {
            f[i][c] = cube[i][c];
            f[12 + i][c] = cube[i][2 - c];
            f[24 + i][c] = cube[i][(c + 1) % 3];
        }
    rg_mesh *mesh = mesh_of(8, v, 36, f);
    ck_assert_uint_eq(mesh->n_facets, 12);
    ck_assert_uint_eq(mesh->report.n_facets_read, 36);
    ck_assert_uint_eq(mesh->report.n_duplicate, 24);
    ck_assert_mem_eq(mesh->facet, cube, sizeof cube);
    rg_mesh_free(mesh);
}
END_TEST

/* Three sheets that meet in one edge. */
START_TEST(a_branch_edge_has_no_neighbours)
{
    double v[5][3] = {{0, 0, 0}, {0, 0, 1}, {1, 0, 0}, {-1, 0.5, 0}, {0, -1, 0}};
    uint32_t f[3][3] = {{0, 1, 2}, {0, 1, 3}, {0, 1, 4}};
    rg_mesh *mesh = mesh_of(5, v, 3, f);
    ck_assert_uint_eq(mesh->report.n_branch_edges, 1);
    ck_assert_uint_eq(mesh->report.n_boundary_edges, 6);
    ck_assert_uint_eq(mesh->report.n_shells, 3);
    ck_assert_uint_eq(mesh->report.n_closed_shells, 0);
    for (int i = 0; i < 3; i++) {
        ck_assert_uint_eq(mesh->neighbour[i][0], RG_MANY_FACETS);
        ck_assert_uint_eq(mesh->neighbour[i][1], RG_NO_FACET);
        ck_assert_uint_eq(mesh->neighbour[i][2], RG_NO_FACET);
    }
    rg_mesh_free(mesh);
}
END_TEST

/* Two cubes that share an edge of four facets: each is closed for itself, for it uses that edge once in each direction. One is inside
 * out. */
START_TEST(cubes_that_share_an_edge_are_two_closed_shells)
{
    double v[16][3];
    uint32_t f[24][3];
    cube_vertices(v, 0, 0, 0, 1.0);
    cube_vertices(v + 8, 1, 1, 0, 1.0);
    for (int i = 0; i < 12; i++)
        for (int c = 0; c < 3; c++) {
            f[2 * i][c] = cube[i][c];
            f[2 * i + 1][c] = 8 + cube[i][2 - c];
        }
    rg_mesh *mesh = mesh_of(16, v, 24, f);
    ck_assert_uint_eq(mesh->n_vertices, 14);
    ck_assert_uint_eq(mesh->report.n_vertices_welded, 2);
    ck_assert_uint_eq(mesh->report.n_branch_edges, 1);
    ck_assert_uint_eq(mesh->report.n_shells, 2);
    ck_assert_uint_eq(mesh->report.n_closed_shells, 2);
    ck_assert_uint_eq(mesh->report.n_shells_turned, 1);
    ck_assert_double_eq_tol(volume_m3(mesh), 2.0, 1e-14);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(a_sheet_stays_open_and_as_wound)
{
    double v[4][3] = {{0, 0, 0}, {0, 1, 0}, {0, 1, 1}, {0, 0, 1}};
    uint32_t f[2][3] = {{0, 1, 2}, {0, 2, 3}};
    rg_mesh *mesh = mesh_of(4, v, 2, f);
    ck_assert_uint_eq(mesh->report.n_boundary_edges, 4);
    ck_assert_uint_eq(mesh->report.n_shells, 1);
    ck_assert_uint_eq(mesh->report.n_closed_shells, 0);
    ck_assert_mem_eq(mesh->facet, f, sizeof f);
    ck_assert_uint_eq(mesh->neighbour[0][2], 1);
    ck_assert_uint_eq(mesh->neighbour[1][0], 0);
    rg_mesh_free(mesh);
}
END_TEST

/* A strip of 2 n triangles, its ends joined with half a turn. One-sided: it ends, and it is open. */
START_TEST(a_moebius_strip_ends_and_is_open)
{
    enum { N = 24 };
    double v[2 * N][3];
    uint32_t f[2 * N][3];
    for (uint32_t i = 0; i < N; i++) {
        const double turn = 2.0 * M_PI * i / N;
        for (uint32_t side = 0; side < 2; side++) {
            const double w = side ? 0.3 : -0.3, r = 1.0 + w * cos(turn / 2.0);
            v[2 * i + side][0] = r * cos(turn);
            v[2 * i + side][1] = r * sin(turn);
            v[2 * i + side][2] = w * sin(turn / 2.0);
        }
        const uint32_t a = 2 * i, b = a + 1, c = i + 1 < N ? a + 2 : 1, d = i + 1 < N ? a + 3 : 0;
        memcpy(f[2 * i], (uint32_t[]){a, b, c}, sizeof f[0]);
        memcpy(f[2 * i + 1], (uint32_t[]){b, d, c}, sizeof f[0]);
    }
    rg_mesh *mesh = mesh_of(2 * N, v, 2 * N, f);
    ck_assert_uint_eq(mesh->report.n_shells, 1);
    ck_assert_uint_eq(mesh->report.n_closed_shells, 0);
    ck_assert_uint_eq(mesh->report.n_boundary_edges, 2 * N);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(slivers_and_collapsed_facets_go)
{
    double v[9][3] = {{0, 0, 0}, {1, 0, 0}, {0, 1, 0}, {0.5, 0.4e-6, 0}, {0.5, 3e-6, 0}, {1, 0, 0.5e-6}, {5, 5, 5}, {NAN, 0, 0}, {1e30, 0, 0}};
    uint32_t f[5][3] = {{0, 1, 2}, {0, 1, 3}, {1, 5, 2}, {0, 1, 4}, {2, 2, 0}};
    rg_mesh *mesh = mesh_of(9, v, 5, f);        /* vertices 6 to 8 belong to no facet and count for nothing */
    ck_assert_double_eq(mesh->report.weld_m, 0x1p-20);
    ck_assert_uint_eq(mesh->n_facets, 2);
    ck_assert_uint_eq(mesh->report.n_degenerate, 3);
    ck_assert_uint_eq(mesh->report.n_vertices_welded, 1);
    ck_assert_uint_eq(mesh->n_vertices, 4);
    ck_assert_double_eq(mesh->report.high_m[0], 1.0);
    rg_mesh_free(mesh);
}
END_TEST

/* Points 0.9 weld lengths apart in a row: each welds to a point that was kept, none to one that was welded itself. */
START_TEST(welding_makes_no_chains)
{
    enum { N = 200 };
    static double v[N + 2][3];
    static uint32_t f[N][3];
    const double step_m = 0.9 * 0x1p-20;
    for (uint32_t i = 0; i < N; i++) {
        v[i][0] = 0.25 + i * step_m;
        memcpy(f[i], (uint32_t[]){i, N, N + 1}, sizeof f[i]);
    }
    v[N][0] = 1.0, v[N + 1][0] = 0.0, v[N + 1][1] = 1.0;
    rg_mesh *mesh = mesh_of(N + 2, v, N, f);
    ck_assert_uint_eq(mesh->report.n_vertices_welded, N / 2);
    ck_assert_uint_eq(mesh->n_facets, N / 2);
    for (size_t i = 0; i < N / 2; i++)      /* the even ones, which came first */
        ck_assert_double_eq_tol(mesh->vertex_m[i][0] + mesh->origin_m[0], v[2 * i][0], 1e-15);
    rg_mesh_free(mesh);
}
END_TEST

/* Against every pair: random points so dense that many weld, some across the borders of cells. */
START_TEST(welding_agrees_with_comparing_all)
{
    enum { N = 3000 };
    static double v[N + 3][3];
    static uint32_t f[N][3], kept[N];
    const double weld_m = 0x1p-20;
    srand48(_i);
    for (uint32_t i = 0; i < N; i++) {
        for (int k = 0; k < 3; k++) v[i][k] = (drand48() - 0.5) * 24.0 * weld_m;
        memcpy(f[i], (uint32_t[]){i, N, N + 1}, sizeof f[i]);
    }
    memcpy(v[N], (double[]){0.5, 0.5, 0.5}, sizeof v[0]);       /* the middle stays 0 */
    memcpy(v[N + 1], (double[]){-0.5, -0.5, -0.5}, sizeof v[0]);
    size_t n_kept = 0;
    for (uint32_t i = 0; i < N; i++) {
        bool near = false;
        for (size_t k = 0; k < n_kept && !near; k++) {
            const double *a = v[i], *b = v[kept[k]];
            near = (a[0] - b[0]) * (a[0] - b[0]) + (a[1] - b[1]) * (a[1] - b[1]) + (a[2] - b[2]) * (a[2] - b[2]) < weld_m * weld_m;
        }
        if (!near) kept[n_kept++] = i;
    }
    rg_mesh *mesh = mesh_of(N + 2, v, N, f);
    ck_assert_uint_eq(mesh->report.n_vertices_welded, N - n_kept);
    ck_assert_uint_gt(n_kept, N / 20);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(parts_are_sorted_and_keep_their_order)
{
    double v[8][3];
    uint32_t part[12];
    static const char *const name[] = {"left", "unused", "right"};
    cube_vertices(v, 0, 0, 0, 1.0);
    for (uint32_t i = 0; i < 12; i++) part[i] = i % 2 ? 0 : 2;
    rg_mesh *mesh = NULL;
    rg_error err;
    ck_assert_int_eq(rg_mesh_from_arrays(&mesh, 8, (const double (*)[3])v, 12, cube, part, 3, name, &err), RG_OK);
    ck_assert_msg(rg_mesh_check(mesh, &err) == RG_OK, "%s", err.text);
    ck_assert_uint_eq(mesh->n_parts, 3);
    ck_assert_uint_eq(rg_mesh_part_n_facets(mesh, 0), 6);
    ck_assert_uint_eq(rg_mesh_part_n_facets(mesh, 1), 0);
    ck_assert_uint_eq(rg_mesh_part_n_facets(mesh, 2), 6);
    ck_assert_str_eq(rg_mesh_part_name(mesh, 2), "right");
    ck_assert_double_eq(rg_mesh_part_area_m2(mesh, 2), 3.0);
    for (size_t i = 0; i < 6; i++) {
        ck_assert_mem_eq(mesh->facet[i], cube[2 * i + 1], sizeof cube[0]);
        ck_assert_mem_eq(mesh->facet[6 + i], cube[2 * i], sizeof cube[0]);
    }
    ck_assert_uint_eq(mesh->report.n_closed_shells, 1);     /* shells cross parts */
    rg_mesh_free(mesh);
}
END_TEST

/* A fan of n facets about one edge and a wheel of n about one vertex: nothing may be quadratic. */
START_TEST(crowded_edges_and_vertices_take_linear_time)
{
    enum { N = 300000 };
    double (*v)[3] = calloc(2 * N + 3, sizeof *v);
    uint32_t (*f)[3] = calloc(2 * N, sizeof *f);
    v[0][2] = 1.0, v[1][2] = -1.0;
    for (uint32_t i = 0; i < N; i++) {
        const double turn = 2.0 * M_PI * i / N;
        v[2 + i][0] = cos(turn), v[2 + i][1] = sin(turn);
        v[2 + N + i][0] = 2.0 * cos(turn), v[2 + N + i][1] = 2.0 * sin(turn);
        memcpy(f[i], (uint32_t[]){0, 1, 2 + i}, sizeof f[i]);
        memcpy(f[N + i], (uint32_t[]){0, 2 + N + i, 2 + N + (i + 1) % N}, sizeof f[i]);
    }
    rg_mesh *mesh = mesh_of(2 * N + 2, v, 2 * N, f);
    ck_assert_uint_eq(mesh->n_facets, 2 * N);
    ck_assert_uint_eq(mesh->report.n_branch_edges, 1);
    ck_assert_uint_eq(mesh->report.n_shells, N + 1);
    rg_mesh_free(mesh);
    free(v);
    free(f);
}
END_TEST

START_TEST(the_digest_sees_geometry_and_names)
{
    double v[8][3];
    uint32_t f[12][3], part[12] = {0};
    cube_vertices(v, -0.5, -0.5, -0.5, 1.0);
    memcpy(f, cube, sizeof f);
    rg_mesh *a = mesh_of(8, v, 12, f), *same = mesh_of(8, v, 12, f), *moved, *named = NULL;
    for (int i = 0; i < 8; i++) v[i][2] += 1.0;
    moved = mesh_of(8, v, 12, f);
    for (int i = 0; i < 8; i++) v[i][2] -= 1.0;
    ck_assert_int_eq(rg_mesh_from_arrays(&named, 8, (const double (*)[3])v, 12, cube, part, 1, &(const char *){"cube"}, NULL), RG_OK);
    ck_assert_str_eq(a->report.geometry_sha256, same->report.geometry_sha256);
    ck_assert_str_ne(a->report.geometry_sha256, moved->report.geometry_sha256);
    ck_assert_str_ne(a->report.geometry_sha256, named->report.geometry_sha256);
    rg_mesh_free(a);
    rg_mesh_free(same);
    rg_mesh_free(moved);
    rg_mesh_free(named);
}
END_TEST

static const struct { const char *what; double v[3][3]; uint32_t f[3], part; size_t n_facets; const char *says; } refused[] = {
    {"no facets",       {{0}, {1, 0, 0}, {0, 1, 0}},               {0, 1, 2}, 0, 0, "no triangle"},
    {"a corner beyond", {{0}, {1, 0, 0}, {0, 1, 0}},               {0, 1, 3}, 0, 1, "3"},
    {"a part beyond",   {{0}, {1, 0, 0}, {0, 1, 0}},               {0, 1, 2}, 1, 1, "part 1"},
    {"NaN",             {{0}, {1, NAN, 0}, {0, 1, 0}},             {0, 1, 2}, 0, 1, "vertex 2"},
    {"infinity",        {{0}, {1, 0, 0}, {0, 1, -INFINITY}},       {0, 1, 2}, 0, 1, "finite"},
    {"huge",            {{0}, {100001, 0, 0}, {0, 1, 0}},          {0, 1, 2}, 0, 1, "--units"},
    {"beyond doubles",  {{-1e308, 0, 0}, {1e308, 0, 0}, {0, 1, 0}}, {0, 1, 2}, 0, 1, "--units"},
    {"tiny",            {{0}, {0.9e-6, 0, 0}, {0, 0.9e-6, 0}},     {0, 1, 2}, 0, 1, "--units"},
    {"one point",       {{3, 3, 3}, {3, 3, 3}, {3, 3, 3}},         {0, 1, 2}, 0, 1, "--units"},
    {"a line",          {{0}, {1, 1, 0}, {2, 2, 0}},               {0, 1, 2}, 0, 1, "no facet is left"},
};

START_TEST(what_is_no_mesh_is_refused)
{
    rg_mesh *mesh = (rg_mesh *)&mesh;
    rg_error err = {""};
    const rg_status status = rg_mesh_from_arrays(&mesh, 3, refused[_i].v, refused[_i].n_facets, &refused[_i].f, &refused[_i].part, 1,
                                                 &(const char *){"x"}, &err);
    ck_assert_msg(status == RG_BAD_INPUT, "%s: status %d", refused[_i].what, status);
    ck_assert_msg(strstr(err.text, refused[_i].says) != NULL, "%s: %s", refused[_i].what, err.text);
    ck_assert_ptr_eq(mesh, (rg_mesh *)&mesh);
}
END_TEST

/* A check that never fails is none: break each promise once. */
START_TEST(the_check_finds_what_is_broken)
{
    double v[8][3];
    uint32_t f[12][3];
    rg_error err = {""};
    cube_vertices(v, 0, 0, 0, 1.0);
    memcpy(f, cube, sizeof f);
    rg_mesh *mesh = mesh_of(8, v, 12, f);
    switch (_i) {
    case 0: mesh->facet[3][1] = 8; break;
    case 1: mesh->facet[3][1] = mesh->facet[3][0]; break;
    case 2: mesh->neighbour[3][1] = RG_NO_FACET; break;
    case 3: mesh->neighbour[3][1] = 12; break;
    case 4: { const uint32_t n = mesh->neighbour[5][0]; mesh->neighbour[5][0] = mesh->neighbour[5][1]; mesh->neighbour[5][1] = n; break; }
    case 5: { const uint32_t c = mesh->facet[7][0]; mesh->facet[7][0] = mesh->facet[7][1]; mesh->facet[7][1] = c; break; }
    case 6: mesh->part[4] = 1; break;
    case 7: mesh->part_first[1] = 11; break;
    case 8: mesh->shell[2] = 1; break;
    case 9: mesh->shells[0].n_facets = 11; break;
    case 10: mesh->vertex_m[7][2] = NAN; break;
    case 11: mesh->shells[0].closed = false; break;
    default: mesh->report.n_boundary_edges = 1;
    }
    ck_assert_int_eq(rg_mesh_check(mesh, &err), RG_BAD_INPUT);
    ck_assert_str_ne(err.text, "");
    rg_mesh_free(mesh);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("mesh");
    TCase *tests = tcase_create("repair");
    tcase_add_test(tests, a_good_cube_stays_as_it_is);
    tcase_add_test(tests, a_cube_inside_out_is_turned_as_a_whole);
    tcase_add_loop_test(tests, one_turned_facet_is_turned_back, 0, 12);
    tcase_add_loop_test(tests, any_mix_of_windings_comes_out_outward, 0, 200);
    tcase_add_test(tests, two_sided_facets_become_one);
    tcase_add_test(tests, a_branch_edge_has_no_neighbours);
    tcase_add_test(tests, cubes_that_share_an_edge_are_two_closed_shells);
    tcase_add_test(tests, a_sheet_stays_open_and_as_wound);
    tcase_add_test(tests, a_moebius_strip_ends_and_is_open);
    tcase_add_test(tests, slivers_and_collapsed_facets_go);
    tcase_add_test(tests, welding_makes_no_chains);
    tcase_add_loop_test(tests, welding_agrees_with_comparing_all, 0, 5);
    tcase_add_test(tests, parts_are_sorted_and_keep_their_order);
    tcase_add_test(tests, crowded_edges_and_vertices_take_linear_time);
    tcase_add_test(tests, the_digest_sees_geometry_and_names);
    tcase_add_loop_test(tests, what_is_no_mesh_is_refused, 0, sizeof refused / sizeof refused[0]);
    tcase_add_loop_test(tests, the_check_finds_what_is_broken, 0, 13);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
