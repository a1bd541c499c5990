/* check_shape.c - canonical shapes against their closed forms: areas, volumes, distances from the true surface, edges, sizes
 *
 * Areas and volumes are those of elementary geometry. Tolerances: exact shapes by rounding (1e-12 of the value); curved ones by what the
 * header states, as a share of the sagitta.
 */
#include "mesh/mesh.h"
#include "base/vec3.h"
#include "run.h"
#include <math.h>
#include <roadglint/shape.h>
#include <string.h>

#define PI 3.14159265358979323846
#define SAGITTA_77GHZ_M (3.893409e-3 / 64.0)

static rg_mesh *make(rg_shape shape)
{
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    const rg_status status = rg_shape_mesh(&mesh, &shape, &err);
    ck_assert_msg(status == RG_OK, "kind %d: %s", (int)shape.kind, err.text);
    ck_assert_msg(rg_mesh_check(mesh, &err) == RG_OK, "kind %d: %s", (int)shape.kind, err.text);
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    ck_assert_uint_eq(r->n_degenerate + r->n_duplicate + r->n_facets_turned + r->n_shells_turned + r->n_branch_edges, 0);
    return mesh;
}

static vec3 corner(const rg_mesh *mesh, size_t f, int i)
{
    return vec3_add(vec3_from(mesh->origin_m), vec3_from(mesh->vertex_m[mesh->facet[f][i]]));
}

static vec3 twice_area(const rg_mesh *mesh, size_t f)
{
    const vec3 a = corner(mesh, f, 0);
    return vec3_cross(vec3_sub(corner(mesh, f, 1), a), vec3_sub(corner(mesh, f, 2), a));
}

static double volume_m3(const rg_mesh *mesh)
{
    double six = 0.0;
    for (size_t f = 0; f < mesh->n_facets; f++)
        six += vec3_dot(corner(mesh, f, 0), vec3_cross(corner(mesh, f, 1), corner(mesh, f, 2)));
    return six / 6.0;
}

static double longest_edge_m(const rg_mesh *mesh)
{
    double longest = 0.0;
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) longest = fmax(longest, vec3_norm(vec3_sub(corner(mesh, f, i), corner(mesh, f, (i + 1) % 3))));
    return longest;
}

/* Smallest angle of all facets. */
static double sharpest_deg(const rg_mesh *mesh)
{
    double sharpest = 180.0;
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            const vec3 a = vec3_sub(corner(mesh, f, (i + 1) % 3), corner(mesh, f, i)), b = vec3_sub(corner(mesh, f, (i + 2) % 3), corner(mesh, f, i));
            sharpest = fmin(sharpest, acos(vec3_dot(a, b) / vec3_norm(a) / vec3_norm(b)) * 180.0 / PI);
        }
    return sharpest;
}

static size_t part_named(const rg_mesh *mesh, const char *name)
{
    for (size_t p = 0; p < mesh->n_parts; p++)
        if (strcmp(mesh->part_name[p], name) == 0) return p;
    ck_abort_msg("no part \"%s\"", name);
    return 0;
}

static double area_of(const rg_mesh *mesh, const char *name) { return rg_mesh_part_area_m2(mesh, part_named(mesh, name)); }

static void parts_are(const rg_mesh *mesh, size_t n, const char *const want[])
{
    ck_assert_uint_eq(mesh->n_parts, n);
    for (size_t p = 0; p < n; p++) {
        ck_assert_str_eq(rg_mesh_part_name(mesh, p), want[p]);
        ck_assert_uint_gt(rg_mesh_part_n_facets(mesh, p), 0);
    }
}

static void is_closed(const rg_mesh *mesh)
{
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    ck_assert_uint_eq(r->n_boundary_edges, 0);
    ck_assert_uint_eq(r->n_closed_shells, r->n_shells);
}

/* All facets of a part face along a direction. */
static void part_faces(const rg_mesh *mesh, size_t part, vec3 way)
{
    for (size_t f = mesh->part_first[part]; f < mesh->part_first[part + 1]; f++) {
        const vec3 n = twice_area(mesh, f);
        ck_assert_double_ge(vec3_dot(n, way) / vec3_norm(n) / vec3_norm(way), 1.0 - 1e-12);
    }
}

static double near_to(double want) { return 1e-12 * fabs(want); }

START_TEST(plate_is_two_facets)
{
    rg_mesh *mesh = make((rg_shape){.kind = RG_PLATE, .size_m = {1.0, 0.5}});
    const rg_mesh_report *r = rg_mesh_get_report(mesh);
    parts_are(mesh, 1, (const char *const[]){"plate"});
    ck_assert_uint_eq(mesh->n_facets, 2);
    ck_assert_double_eq_tol(r->area_m2, 0.5, near_to(0.5));
    part_faces(mesh, 0, (vec3){1.0, 0.0, 0.0});
    const double want[] = {0.0, 0.5, 0.25};
    for (int i = 0; i < 3; i++) {
        ck_assert_double_eq(r->high_m[i], want[i]);
        ck_assert_double_eq(r->low_m[i], -want[i]);
    }
    rg_mesh_free(mesh);
    mesh = make((rg_shape){.kind = RG_PLATE, .size_m = {1.0, 0.5}, .edge_m = 0.03});
    ck_assert_double_le(longest_edge_m(mesh), 0.03 * (1.0 + 1e-12));
    ck_assert_double_lt((double)mesh->n_facets, 4.0 * 0.5 / (0.03 * 0.03) + 200.0);     /* 4 A/e^2, and the last row and column */
    ck_assert_double_eq_tol(rg_mesh_get_report(mesh)->area_m2, 0.5, near_to(0.5));
    rg_mesh_free(mesh);
    mesh = make((rg_shape){.kind = RG_PLATE, .size_m = {0.01, 1.0}, .edge_m = 0.1});     /* a strip: one cell wide */
    ck_assert_double_le(longest_edge_m(mesh), 0.1 * (1.0 + 1e-12));
    ck_assert_uint_eq(mesh->n_facets, 22);
    rg_mesh_free(mesh);
}
END_TEST

/* The peak is 4 pi A^2/lambda^2, so that it is as exact as the area; asked for are 0.05 dB. */
START_TEST(disc_has_the_area_of_its_circle)
{
    const double radius_m[] = {0.06, 0.001, 3.0}, edge_m[] = {0.0, 0.005, 0.05, 1.0};
    const double r = radius_m[_i % 3], edge = edge_m[_i / 3];
    rg_mesh *mesh = make((rg_shape){.kind = RG_DISC, .size_m = {r}, .sagitta_m = SAGITTA_77GHZ_M, .edge_m = r > 1.0 && edge == 0.005 ? 0.02 : edge});
    parts_are(mesh, 1, (const char *const[]){"disc"});
    ck_assert_double_eq_tol(mesh->report.area_m2, PI * r * r, near_to(PI * r * r));
    part_faces(mesh, 0, (vec3){1.0, 0.0, 0.0});
    if (edge > 0.0) ck_assert_double_le(longest_edge_m(mesh), fmax(edge, r > 1.0 ? 0.02 : 0.0) * (1.0 + 1e-12));
    double out_m = 0.0, in_m = 0.0;
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            if (mesh->neighbour[f][i] != RG_NO_FACET) continue;
            const vec3 a = corner(mesh, f, i), b = corner(mesh, f, (i + 1) % 3);
            out_m = fmax(out_m, vec3_norm(a) - r);
            in_m = fmax(in_m, r - 0.5 * vec3_norm(vec3_add(a, b)));
        }
    ck_assert_double_gt(out_m, 0.0);
    ck_assert_double_gt(in_m, 0.0);
    ck_assert_double_le(out_m + in_m, SAGITTA_77GHZ_M * (1.0 + 1e-9));
    ck_assert_double_eq_tol(out_m / in_m, 2.0, 0.4);     /* 2h/3 and h/3 for a fine rim; eight corners give 1.7 */
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(fine_disc_has_no_slivers)
{
    rg_mesh *mesh = make((rg_shape){.kind = RG_DISC, .size_m = {0.5}, .edge_m = 0.02});
    ck_assert_double_gt(sharpest_deg(mesh), 20.0);
    ck_assert_double_le(longest_edge_m(mesh), 0.02 * (1.0 + 1e-12));
    ck_assert_double_lt((double)mesh->n_facets, 8.0 * PI * 0.25 / (0.02 * 0.02));    /* twice 4 A/e^2, what right triangles of that hypotenuse take */
    rg_mesh_free(mesh);
}
END_TEST

/* Distance of corners, edges' middles and centroids from the true sphere. */
START_TEST(sphere_is_round)
{
    static const struct { double radius_m, sagitta_m, edge_m; } sphere[] = {
        {0.1, 6e-5, 0.0}, {0.1, 1e-3, 0.0}, {1.0, 0.0, 0.05}, {0.05, 6e-5, 0.002}, {0.1, 0.05, 0.0}};
    const double r = sphere[_i].radius_m, h = sphere[_i].sagitta_m, e = sphere[_i].edge_m;
    rg_mesh *mesh = make((rg_shape){.kind = RG_SPHERE, .size_m = {r}, .sagitta_m = h, .edge_m = e});
    const double limit_m = h > 0.0 ? h : e * e / (5.0 * r);      /* a facet of edges e has the sagitta e^2/(6r), and a little more */
    double low_m = INFINITY, high_m = 0.0, mean_m = 0.0, middle_m = INFINITY;
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const vec3 n = twice_area(mesh, f);
        const double to_plane_m = vec3_dot(corner(mesh, f, 0), n) / vec3_norm(n);
        middle_m = fmin(middle_m, to_plane_m);
        mean_m += vec3_norm(n);
        for (int i = 0; i < 3; i++) {
            low_m = fmin(low_m, vec3_norm(corner(mesh, f, i)));
            high_m = fmax(high_m, vec3_norm(corner(mesh, f, i)));
        }
    }
    parts_are(mesh, 1, (const char *const[]){"sphere"});
    is_closed(mesh);
    ck_assert_double_le(high_m - low_m, 1e-14 * r);              /* all corners on one sphere */
    ck_assert_double_le(high_m - middle_m, limit_m);             /* the sagitta itself */
    ck_assert_double_le(high_m - r, limit_m);
    ck_assert_double_le(r - middle_m, limit_m);
    ck_assert_double_gt(high_m, r);
    ck_assert_double_lt(middle_m, r);
    const double want_m3 = 4.0 / 3.0 * PI * r * r * r;
    ck_assert_double_eq_tol(volume_m3(mesh), want_m3, 1e-11 * want_m3);
    if (e > 0.0) ck_assert_double_le(longest_edge_m(mesh), e * (1.0 + 1e-12));
    ck_assert_double_gt(sharpest_deg(mesh), 35.0);
    /* not finer than it must be: one cut less would have broken a limit, so it is within two cuts of it */
    const double cuts = sqrt((double)mesh->n_facets / 20.0), shrink = cuts > 3.0 ? (cuts - 2.0) / cuts : 0.0;
    if (h > 0.0 && e == 0.0) ck_assert_double_ge(high_m - middle_m, h * shrink * shrink);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(cylinder_is_closed_and_round)
{
    const double r = 0.05, length = 0.3, edge = _i ? 0.004 * _i : 0.0;
    rg_mesh *mesh = make((rg_shape){.kind = RG_CYLINDER, .size_m = {r, length}, .sagitta_m = 6e-5, .edge_m = edge});
    parts_are(mesh, 3, (const char *const[]){"side", "top", "bottom"});
    is_closed(mesh);
    const double want_m3 = PI * r * r * length;
    ck_assert_double_eq_tol(volume_m3(mesh), want_m3, 1e-11 * want_m3);
    ck_assert_double_eq_tol(area_of(mesh, "top"), PI * r * r, near_to(PI * r * r));
    ck_assert_double_eq_tol(area_of(mesh, "bottom"), PI * r * r, near_to(PI * r * r));
    ck_assert_double_eq_tol(area_of(mesh, "side"), 2.0 * PI * r * length, 2.0 * PI * length * 6e-5 / 3.0);
    part_faces(mesh, part_named(mesh, "top"), (vec3){0.0, 0.0, 1.0});
    part_faces(mesh, part_named(mesh, "bottom"), (vec3){0.0, 0.0, -1.0});
    if (edge > 0.0) ck_assert_double_le(longest_edge_m(mesh), edge * (1.0 + 1e-12));
    else ck_assert_uint_eq(rg_mesh_part_n_facets(mesh, 0), 2 * rg_mesh_part_n_facets(mesh, 1));
    double sum_m3 = 0.0, sum_m2 = 0.0;
    for (size_t f = mesh->part_first[0]; f < mesh->part_first[1]; f++) {
        const vec3 n = twice_area(mesh, f), a = corner(mesh, f, 0);
        const double to_plane_m = vec3_dot(n, a) / vec3_norm(n), to_corner_m = hypot(a.x, a.y);
        ck_assert_double_le(to_corner_m - to_plane_m, 6e-5 * (1.0 + 1e-9));
        ck_assert_double_gt(to_corner_m, r);
        ck_assert_double_lt(to_plane_m, r);
        ck_assert_double_eq_tol(n.z, 0.0, 1e-15);
        sum_m2 += vec3_norm(n);
        sum_m3 += vec3_norm(n) * (to_plane_m + (to_corner_m - to_plane_m) / 3.0);   /* mean of a parabola's arc over its chord */
    }
    ck_assert_double_eq_tol(sum_m3 / sum_m2, r, 6e-5 * 6e-5 / r);     /* to the order of the sagitta */
    for (int i = 0; i < 2; i++) ck_assert_double_eq_tol(mesh->report.high_m[i], r, 2.0 / 3.0 * 6e-5);
    ck_assert_double_eq(mesh->report.high_m[2], 0.15);
    ck_assert_double_eq(mesh->report.low_m[2], -0.15);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(cones_are_closed)
{
    static const struct { double base_m, top_m, height_m, edge_m; } cone[] = {
        {0.1, 0.0, 0.3, 0.0}, {0.1, 0.05, 0.2, 0.0}, {0.1, 0.0, 0.3, 0.01}, {0.03, 0.09, 0.2, 0.01}, {0.1, 0.1, 0.2, 0.02}};
    const double a = cone[_i].base_m, b = cone[_i].top_m, height = cone[_i].height_m, edge = cone[_i].edge_m;
    rg_mesh *mesh = make((rg_shape){.kind = RG_CONE, .size_m = {a, b, height}, .sagitta_m = 6e-5, .edge_m = edge});
    parts_are(mesh, b > 0.0 ? 3 : 2, (const char *const[]){"side", "base", "top"});
    is_closed(mesh);
    const double want_m3 = PI * height * (a * a + a * b + b * b) / 3.0, side_m2 = PI * (a + b) * sqrt(height * height + (a - b) * (a - b));
    ck_assert_double_eq_tol(volume_m3(mesh), want_m3, 1e-11 * want_m3);
    ck_assert_double_eq_tol(area_of(mesh, "base"), PI * a * a, near_to(PI * a * a));
    if (b > 0.0) ck_assert_double_eq_tol(area_of(mesh, "top"), PI * b * b, near_to(PI * b * b));
    ck_assert_double_eq_tol(area_of(mesh, "side"), side_m2, side_m2 * 6e-5 / fmax(a, b));
    if (edge > 0.0) ck_assert_double_le(longest_edge_m(mesh), edge * (1.0 + 1e-12));
    ck_assert_double_eq(mesh->report.low_m[2], 0.0);
    ck_assert_double_eq(mesh->report.high_m[2], height);
    part_faces(mesh, part_named(mesh, "base"), (vec3){0.0, 0.0, -1.0});
    for (size_t f = mesh->part_first[0]; f < mesh->part_first[1]; f++) {
        const vec3 middle = vec3_scale(vec3_add(corner(mesh, f, 0), vec3_add(corner(mesh, f, 1), corner(mesh, f, 2))), 1.0 / 3.0);
        const double true_m = a + (b - a) * middle.z / height;
        ck_assert_double_eq_tol(hypot(middle.x, middle.y), true_m, 6e-5);
    }
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(dihedral_opens_forward)
{
    rg_mesh *mesh = make((rg_shape){.kind = RG_DIHEDRAL, .size_m = {0.1, 0.2}, .edge_m = _i ? 0.03 : 0.0});
    parts_are(mesh, 2, (const char *const[]){"left", "right"});
    if (_i) ck_assert_double_le(longest_edge_m(mesh), 0.03 * (1.0 + 1e-12));
    else ck_assert_uint_eq(mesh->n_facets, 4);
    ck_assert_uint_eq(mesh->n_shells, 1);       /* one sheet: the halves share the fold's corners */
    part_faces(mesh, 0, (vec3){1.0, -1.0, 0.0});
    part_faces(mesh, 1, (vec3){1.0, 1.0, 0.0});
    ck_assert_double_eq_tol(area_of(mesh, "left"), 0.02, near_to(0.02));
    ck_assert_double_eq_tol(area_of(mesh, "right"), 0.02, near_to(0.02));
    ck_assert_double_eq_tol(mesh->report.high_m[1], 0.1 * sqrt(0.5), 1e-15);
    ck_assert_double_eq_tol(mesh->report.low_m[1], -0.1 * sqrt(0.5), 1e-15);
    ck_assert_double_eq(mesh->report.low_m[0], 0.0);
    ck_assert_double_eq(mesh->report.high_m[2], 0.1);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(trihedrals_face_their_corner)
{
    static const rg_shape_kind kind[] = {RG_TRIHEDRAL, RG_TRIHEDRAL_SQUARE, RG_TRIHEDRAL_CIRCULAR};
    static const double area[] = {0.5, 1.0, 0.25 * PI};
    static const size_t fewest[] = {3, 6, 0};
    const double leg = 0.1, edge = _i < 3 ? 0.0 : 0.013;
    rg_mesh *mesh = make((rg_shape){.kind = kind[_i % 3], .size_m = {leg}, .sagitta_m = 6e-5, .edge_m = edge});
    parts_are(mesh, 3, (const char *const[]){"xy", "yz", "zx"});
    ck_assert_uint_eq(mesh->n_shells, 1);
    if (_i < 2) ck_assert_uint_eq(mesh->n_facets, fewest[_i]);
    if (edge > 0.0) ck_assert_double_le(longest_edge_m(mesh), edge * (1.0 + 1e-12));
    const vec3 way[] = {{0.0, 0.0, 1.0}, {1.0, 0.0, 0.0}, {0.0, 1.0, 0.0}};
    for (size_t p = 0; p < 3; p++) {
        part_faces(mesh, p, way[p]);
        ck_assert_double_eq_tol(rg_mesh_part_area_m2(mesh, p), area[_i % 3] * leg * leg, near_to(leg * leg));
        ck_assert_double_eq(mesh->report.low_m[p], 0.0);
        ck_assert_double_eq_tol(mesh->report.high_m[p], leg, _i % 3 == 2 ? 6e-5 : 1e-15);
    }
    rg_mesh_free(mesh);
}
END_TEST

static size_t count_shells(const rg_mesh *mesh, const char *name)
{
    const size_t part = part_named(mesh, name);
    size_t n = 0;
    for (size_t s = 0; s < mesh->n_shells; s++)
        for (size_t f = mesh->part_first[part]; f < mesh->part_first[part + 1]; f++)
            if (mesh->shell[f] == s) {
                n++;
                break;
            }
    return n;
}

/* Section by AASHTO M 180 and the system's figures, as guardrail.c states them. */
START_TEST(guardrail_has_its_published_size)
{
    static const struct { double length_m; size_t pieces, posts, bolts; } rail[] = {
        {3.81, 1, 2, 2}, {7.62, 2, 4, 12}, {1.0, 1, 1, 1}, {13.0, 3, 7, 23}};
    rg_mesh *mesh = make((rg_shape){.kind = RG_GUARDRAIL, .size_m = {rail[_i].length_m}, .sagitta_m = 6e-5});
    parts_are(mesh, 4, (const char *const[]){"rail", "posts", "blockouts", "bolts"});
    is_closed(mesh);
    ck_assert_uint_eq(count_shells(mesh, "rail"), rail[_i].pieces);
    ck_assert_uint_eq(count_shells(mesh, "posts"), rail[_i].posts);
    ck_assert_uint_eq(count_shells(mesh, "blockouts"), rail[_i].posts);
    ck_assert_uint_eq(count_shells(mesh, "bolts"), rail[_i].bolts);
    double low_m[3] = {INFINITY, INFINITY, INFINITY}, high_m[3] = {-INFINITY, -INFINITY, -INFINITY};
    for (size_t f = 0; f < mesh->part_first[1]; f++)
        for (int i = 0; i < 3; i++) {
            const vec3 r = corner(mesh, f, i);
            const double at[] = {r.x, r.y, r.z};
            for (int k = 0; k < 3; k++) low_m[k] = fmin(low_m[k], at[k]), high_m[k] = fmax(high_m[k], at[k]);
        }
    ck_assert_double_eq_tol(high_m[2], 0.787, 1e-12);                    /* 31 in system */
    ck_assert_double_eq_tol(high_m[2] - low_m[2], 0.312, 1e-12);         /* AASHTO M 180, from memory */
    ck_assert_double_eq_tol(high_m[0], 0.0, 1e-12);
    const double lap_m = rail[_i].pieces > 1 ? 0.00287 : 0.0;            /* the lower sheet of a lap lies a sheet and a gap further back */
    ck_assert_double_eq_tol(low_m[0], -0.083 - lap_m, 1e-12);
    ck_assert_double_eq_tol(high_m[1] - low_m[1], rail[_i].length_m, 1e-12);
    ck_assert_double_eq(mesh->report.low_m[2], 0.0);
    ck_assert_double_eq_tol(mesh->report.high_m[2], 1.829 - 1.016, 1e-12);     /* a post of 72 in, 40 in of it in the ground */
    rg_mesh_free(mesh);
}
END_TEST

/* Volume by Pappus and Guldin: the section's length along the sheet's middle times its thickness times the length. */
START_TEST(guardrail_has_its_volumes)
{
    rg_mesh *mesh = make((rg_shape){.kind = RG_GUARDRAIL, .size_m = {3.81}, .sagitta_m = 1e-6});
    double six = 0.0;
    for (size_t f = 0; f < mesh->part_first[1]; f++) six += vec3_dot(corner(mesh, f, 0), vec3_cross(corner(mesh, f, 1), corner(mesh, f, 2)));
    const double radius = 0.024 + 0.5 * 0.00267, turn = 55.0 * PI / 180.0, s = sin(turn), c = cos(turn);
    const double flank = (0.083 - 0.00267 - 2.0 * radius * (1.0 - c)) / s;
    const double valley = 0.097 - 2.0 * radius * s - flank * c;
    const double outer = (0.156 - 0.097 - 0.5 * 0.00267 - radius * (s + 1.0 - s)) / c;
    const double along = 2.0 * (valley + flank + outer + 0.005 + radius * (3.0 * turn + 35.0 * PI / 180.0));
    const double want_m3 = along * 0.00267 * 3.81;
    ck_assert_double_eq_tol(six / 6.0, want_m3, 3e-5 * want_m3);         /* chords of 1 um sagitta are shorter than arcs by 1e-5 */
    /* post: W6 x 8.5 is 8.5 lb/ft or 12.65 kg/m (its name); without the fillets of the rolled section 3 % less */
    const size_t p = part_named(mesh, "posts");
    double post = 0.0;
    for (size_t f = mesh->part_first[p]; f < mesh->part_first[p + 1]; f++)
        post += vec3_dot(corner(mesh, f, 0), vec3_cross(corner(mesh, f, 1), corner(mesh, f, 2))) / 6.0;
    /* head: the cap of a sphere, pi h^2 (3r - h)/3, the sphere being that on 33 mm by 8 mm; h counts from the sheet's middle */
    const size_t b = part_named(mesh, "bolts");
    const double sphere = (0.0165 * 0.0165 + 0.008 * 0.008) / 0.016, h = 0.008 + 0.5 * 0.00267, head_m3 = PI * h * h * (3.0 * sphere - h) / 3.0;
    double heads = 0.0, front_m = -INFINITY;
    for (size_t f = mesh->part_first[b]; f < mesh->part_first[b + 1]; f++) {
        heads += vec3_dot(corner(mesh, f, 0), vec3_cross(corner(mesh, f, 1), corner(mesh, f, 2))) / 6.0;
        front_m = fmax(front_m, corner(mesh, f, 0).x);
    }
    ck_assert_double_eq_tol(heads / 2.0, head_m3, 1e-3 * head_m3);              /* inscribed: short by its area times 1 um at most */
    ck_assert_double_eq_tol(front_m, -0.083 + 0.00267 + 0.008, 1e-12);
    ck_assert_double_eq_tol(post / 2.0 / 0.813 * 7850.0, 12.65, 0.04 * 12.65);
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(guardrail_honours_its_edge)
{
    const double edge_m[] = {0.2, 0.05, 0.012, 0.0035};
    rg_mesh *mesh = make((rg_shape){.kind = RG_GUARDRAIL, .size_m = {_i < 2 ? 7.7 : 0.4}, .sagitta_m = _i % 2 ? 6e-5 : 0.0, .edge_m = edge_m[_i]});
    is_closed(mesh);
    ck_assert_double_le(longest_edge_m(mesh), edge_m[_i]);
    rg_mesh_free(mesh);
}
END_TEST

/* Two chords e of an arc that meet at the angle t stand off it by e tan(t/4)/2. The rail bends about lines along y alone (where a sheet
 * steps forward at a lap is a corner, no bend), a bolt's head in all directions; turns over 0.6 rad are its rim and the rail's ends. */
START_TEST(guardrail_honours_its_sagitta)
{
    const double limit_m = 6e-5;
    rg_mesh *mesh = make((rg_shape){.kind = RG_GUARDRAIL, .size_m = {7.62}, .sagitta_m = limit_m});
    double worst_m[4] = {0.0};
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            const uint32_t g = mesh->neighbour[f][i];
            ck_assert_uint_lt(g, RG_MANY_FACETS);
            const vec3 n = twice_area(mesh, f), m = twice_area(mesh, g), e = vec3_sub(corner(mesh, f, (i + 1) % 3), corner(mesh, f, i));
            const double turn = atan2(vec3_norm(vec3_cross(n, m)), vec3_dot(n, m));
            if (turn > 0.6 || (mesh->part[f] == 0 && fabs(e.y) < 0.99 * vec3_norm(e))) continue;
            /* heights over the edge; where a bend meets a flank its own chord counts */
            const double chord_m = fmin(vec3_norm(n), vec3_norm(m)) / vec3_norm(e);
            worst_m[mesh->part[f]] = fmax(worst_m[mesh->part[f]], 0.5 * chord_m * tan(0.25 * turn));
        }
    for (int p = 0; p < 4; p += 3) {
        ck_assert_msg(worst_m[p] > 0.2 * limit_m, "part %d: %g", p, worst_m[p]);
        ck_assert_msg(worst_m[p] <= limit_m, "part %d: %g", p, worst_m[p]);
    }
    rg_mesh_free(mesh);
}
END_TEST

START_TEST(bad_shapes_are_refused_with_advice)
{
    static const struct { rg_shape shape; const char *says; } bad[] = {
        {{.kind = RG_SPHERE, .size_m = {0.1}}, "--sagitta 0.06mm"},
        {{.kind = RG_GUARDRAIL, .size_m = {3.81}}, "--sagitta 0.06mm"},
        {{.kind = RG_PLATE, .size_m = {0.0, 1.0}}, "plate's width is 0 m"},
        {{.kind = RG_PLATE, .size_m = {1.0, NAN}}, "plate's height is nan m"},
        {{.kind = RG_PLATE, .size_m = {1.0, -1.0}}, "plate's height is -1 m"},
        {{.kind = RG_CONE, .size_m = {0.1, -0.1, 0.2}, .sagitta_m = 1e-4}, "or 0 for a tip"},
        {{.kind = RG_SPHERE, .size_m = {0.1}, .sagitta_m = -1.0}, "--sagitta 0.06mm"},
        {{.kind = RG_SPHERE, .size_m = {0.1}, .edge_m = INFINITY}, "--edge 10mm"},
        /* 20 n^2 facets with n^2 = 0.2918 r/h; 4 A/e^2 */
        {{.kind = RG_SPHERE, .size_m = {10.0}, .sagitta_m = 1e-8}, "5.84e+09 facets, more than 100 million: take --sagitta "},
        {{.kind = RG_PLATE, .size_m = {10.0, 10.0}, .edge_m = 1e-4}, "4e+10 facets, more than 100 million: take --edge "},
        {{.kind = RG_GUARDRAIL, .size_m = {0.2}, .sagitta_m = 1e-4}, "3.81 m"},
        {{.kind = RG_CYLINDER, .size_m = {0.001, 9000.0}, .sagitta_m = 1e-6}, "2^-20"},
        {{.kind = RG_PLATE, .size_m = {1e-6, 10.0}}, "2^-20"},
        {{.kind = (rg_shape_kind)99, .size_m = {1.0}}, "99"}};
    rg_mesh *mesh = NULL;
    rg_error err = {""};
    ck_assert_int_eq(rg_shape_mesh(&mesh, &bad[_i].shape, &err), RG_BAD_VALUE);
    ck_assert_ptr_null(mesh);
    ck_assert_msg(strstr(err.text, bad[_i].says) != NULL, "\"%s\" does not say \"%s\"", err.text, bad[_i].says);
    ck_assert_ptr_null(strchr(err.text, '\n'));
}
END_TEST

/* Values far too small for any machine must end at once, and well. */
START_TEST(absurd_fineness_ends_at_once)
{
    for (int kind = RG_DISC; kind <= RG_GUARDRAIL; kind++)
        for (int e = -320; e <= -9; e += 7) {
            rg_mesh *mesh = NULL;
            rg_error err = {""};
            rg_shape shape = {.kind = (rg_shape_kind)kind, .size_m = {100.0, 100.0, 100.0}, .edge_m = pow(10.0, e), .sagitta_m = e % 2 ? pow(10.0, e) : 0.0};
            ck_assert_int_eq(rg_shape_mesh(&mesh, &shape, &err), RG_BAD_VALUE);
            ck_assert_msg(strstr(err.text, "100 million") != NULL, "%s", err.text);
        }
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("shape");
    TCase *tests = tcase_create("shape");
    tcase_add_test(tests, plate_is_two_facets);
    tcase_add_loop_test(tests, disc_has_the_area_of_its_circle, 0, 12);
    tcase_add_test(tests, fine_disc_has_no_slivers);
    tcase_add_loop_test(tests, sphere_is_round, 0, 5);
    tcase_add_loop_test(tests, cylinder_is_closed_and_round, 0, 6);
    tcase_add_loop_test(tests, cones_are_closed, 0, 5);
    tcase_add_loop_test(tests, dihedral_opens_forward, 0, 2);
    tcase_add_loop_test(tests, trihedrals_face_their_corner, 0, 6);
    tcase_add_loop_test(tests, guardrail_has_its_published_size, 0, 4);
    tcase_add_test(tests, guardrail_has_its_volumes);
    tcase_add_loop_test(tests, guardrail_honours_its_edge, 0, 4);
    tcase_add_test(tests, guardrail_honours_its_sagitta);
    tcase_add_loop_test(tests, bad_shapes_are_refused_with_advice, 0, 14);
    tcase_add_test(tests, absurd_fineness_ends_at_once);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
