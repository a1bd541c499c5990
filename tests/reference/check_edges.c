/* check_edges.c - which edges are found, what they send back, and what hides them */
#include "mesh/edges.h"
#include "scatter/edge.h"
#include "scatter/scene.h"
#include "scatter/seen.h"
#include "world.h"
#include <stdio.h>

static const double freq_hz = 77e9;
static const unsigned with_edges = RG_SURFACE | RG_EDGE;

/* ---- a square plate by Ross ---- */

/* R. A. Ross, IEEE Trans. AP 14, 1966: square plate, sides a, in its principal plane, th from the normal; sigma over a^2/pi is returned as the
 * amplitude |T1 - T2 (1/cos th +- (T2/4)(T3 + T4))/T5|, upper sign soft (E along the edges that scatter). With edge_to_edge = false without the waves
 * that run across the plate, which a first order has not: T1 alone. */
static double ross(double ka, double th, bool soft, bool edge_to_edge)
{
    const double s = sin(th), x = ka * s;
    const double sign = soft ? 1.0 : -1.0;
    const double complex t1 = cos(x) - sign * I * (s == 0.0 ? ka : sin(x) / s);
    const double complex t2 = soft ? cexp(I * (ka - PI / 4)) / (sqrt(2.0 * PI) * pow(ka, 1.5)) : 4.0 * cexp(I * (ka + PI / 4)) / sqrt(2.0 * PI * ka);
    const double complex t3 = soft ? (1.0 + s) * cexp(-I * x) / ((1.0 - s) * (1.0 - s)) : cexp(-I * x) / (1.0 - s);
    const double complex t4 = soft ? (1.0 - s) * cexp(I * x) / ((1.0 + s) * (1.0 + s)) : cexp(I * x) / (1.0 + s);
    const double complex t5 = soft ? 1.0 - cexp(I * (2.0 * ka - PI / 2)) / (8.0 * PI * ka * ka * ka) : 1.0 - cexp(I * (2.0 * ka + PI / 2)) / (2.0 * PI * ka);
    return edge_to_edge ? cabs(t1 - t2 * (1.0 / cos(th) + sign * t2 / 4.0 * (t3 + t4)) / t5) : cabs(t1);
}

/* What the two edges along the plane of incidence add, which Ross has not: both of length a with sinc(ka sin th); in phase by symmetry in the
 * principal plane. Their coefficient is that of a half plane seen at phi0 = 90 degrees, 1/2 at broadside and no more than 1 anywhere, over sqrt(pi). */
static double side_edges(double ka, double th) { return 2.0 * fabs(sin(ka * sin(th))) / (ka * sin(th)); }

/* In amplitude over a/sqrt(pi), where T1 is 1 to ka. Soft: T2 is 1e-3 and less for ka = 50 .. 161, so the side edges are all the difference.
 * Hard: the wave from edge to edge of |T2|/cos th and what comes of it beside. T1 alone, which is of
 * first order, must hold without that. Soft holds to 60 degrees, hard to 50 (toward grazing Ross blows up). */
START_TEST(a_plate_is_what_ross_says)
{
    static const double side_m[] = {0.03, 0.05, 0.1};
    const double a_m = side_m[_i], ka = wave_number(freq_hz) * a_m;
    double worst[2] = {0.0, 0.0}, worst_db[2] = {0.0, 0.0};
    world w = world_of_shape((rg_shape){.kind = RG_PLATE, .size_m = {a_m, a_m}});
    for (int i = 1; i <= 240; i++) {
        const double az = 0.25 * i, th = az * RAD_PER_DEG;
        double complex at[RG_N_POL];
        scatter(&w, az, 0.0, freq_hz, with_edges, at);
        for (int soft = 0; soft < 2; soft++) {
            if (!soft && az > 50.0) continue;
            const double want = ross(ka, th, soft, true), got = cabs(at[soft ? RG_VV : RG_HH]) * ROOT_PI / a_m;
            const double first = ross(ka, th, soft, false), sides = 1e-6 * ka + side_edges(ka, th), allowed = sides + fabs(first - want);
            worst[soft] = fmax(worst[soft], fabs(got - want) / allowed);
            if (want > 1.0) worst_db[soft] = fmax(worst_db[soft], fabs(20.0 * log10(got / want)));
            ck_assert_msg(fabs(got - want) <= allowed, "plate %g m, az %g, %s: %.6f, Ross %.6f, allowed %.6f", a_m, az, soft ? "soft" : "hard", got, want, allowed);
            ck_assert_msg(fabs(got - first) <= sides, "plate %g m, az %g, %s: %.6f, Ross's T1 %.6f, allowed %.6f", a_m, az, soft ? "soft" : "hard", got, first, sides);
        }
    }
    printf("plate %g m: soft %.3f dB to 60 deg, hard %.3f dB to 50 deg where sigma > a^2/pi; %.2f and %.2f of what is allowed\n", a_m, worst_db[1], worst_db[0],
           worst[1], worst[0]);
    fflush(stdout);
    free_world(&w);
}
END_TEST

/* ---- one edge ---- */

/* A thin sheet seen along itself: the near edge, E along it, is L^2/pi (Knott, Shaeffer, Tuley, Radar Cross Section; from memory). The far edge
 * sends nothing with that polarisation. Free of frequency. */
START_TEST(a_leading_edge_is_its_length_squared_over_pi)
{
    static const double length_m[] = {0.03, 0.1, 0.25}, f_hz[] = {24.125e9, 77e9, 81e9};
    for (int i = 0; i < 9; i++) {
        const double l_m = length_m[i / 3];
        double complex at[RG_N_POL];
        soup s = {0};
        add_quad(&s, (vec3){0, 0, 0}, (vec3){0, 0, l_m}, (vec3){-0.07, 0, l_m}, (vec3){-0.07, 0, 0});
        world w = world_of_soup(&s);
        scatter(&w, 0.0, 0.0, f_hz[i % 3], with_edges, at);
        ck_assert_msg(fabs(rg_dbsm(at[RG_VV]) - 10.0 * log10(l_m * l_m / PI)) < 1e-5, "%g m, %g GHz: %.6f dBsm", l_m, f_hz[i % 3] / 1e9, rg_dbsm(at[RG_VV]));
        free_world(&w);
    }
}
END_TEST

/* One sheet's quadrilateral whose edge on z is cut into n pieces, the other corners as they were. */
static soup sheet_with_cut_edge(int n)
{
    soup s = {0};
    const vec3 far_low = {-0.06, 0.02, -0.05}, far_high = {-0.05, 0.025, 0.06}, low = {0, 0, -0.05}, high = {0.01, 0.002, 0.05};
    const vec3 step = vec3_scale(vec3_sub(high, low), 1.0 / n);
    for (int i = 0; i < n; i++) add_triangle(&s, far_low, vec3_add(low, vec3_scale(step, i)), i == n - 1 ? high : vec3_add(low, vec3_scale(step, i + 1)));
    add_triangle(&s, far_low, high, far_high);
    return s;
}

/* Relative to the sum of all edges in phase: 1e-12 is what some hundred roundings of phases under 400 rad cost. The two triangles of the sheet turn by
 * less than the feature angle, so the line between them carries nothing. */
START_TEST(cutting_an_edge_changes_nothing)
{
    uint64_t state = 21;
    soup one = sheet_with_cut_edge(1), many = sheet_with_cut_edge(_i);
    world w = world_of_soup(&one), v = world_of_soup(&many);
    for (int i = 0; i < 40; i++) {
        const double az = random_between(&state, -180, 180), el = random_between(&state, -85, 85);
        double complex at[RG_N_POL], cut[RG_N_POL];
        scatter(&w, az, el, freq_hz, RG_EDGE, at);
        scatter(&v, az, el, freq_hz, RG_EDGE, cut);
        for (int pol = 0; pol < RG_N_POL; pol++)
            ck_assert_msg(cabs(cut[pol] - at[pol]) <= 1e-12 * 0.34 / ROOT_PI, "az %g el %g: off by %g m", az, el, cabs(cut[pol] - at[pol]));
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

/* ---- what hides an edge ---- */

/* What one edge of a scene sends back, of the stretches of it that are seen; about the mesh's origin. */
static void one_edge(const world *w, const rg_edge *edge, const rg_view *view, double complex s_m[3])
{
    rg_stretches stretches = {0};
    rg_edge_scratch *scratch = rg_edge_scratch_new();
    rg_seen seen;
    double sum[RG_SEGMENT_WEIGHTS][2];
    ck_assert_int_eq(rg_seen_new(&seen, w->mesh, NULL), RG_OK);
    rg_seen_turn(&seen, w->mesh, view);
    ck_assert_int_eq(rg_edge_stretches(w->scene, &seen, 1, edge, scratch, &stretches, NULL), RG_OK);
    rg_segment_sum_plain(stretches.n, stretches.path_m[0], stretches.path_m[1], stretches.weight_m, 2.0 * freq_hz / LIGHT_SPEED_M_PER_S, sum);
    const double phase = 2.0 * wave_number(freq_hz) * vec3_dot(view->s, vec3_from(w->mesh->origin_m));
    for (int i = 0; i < 3; i++) s_m[i] = CMPLX(sum[i][0], sum[i][1]) * CMPLX(cos(phase), sin(phase));
    rg_seen_free(&seen);
    rg_edge_scratch_free(scratch);
    rg_stretches_free(&stretches);
}

/* The free edge with both ends at y, at x = 0. */
static const rg_edge *edge_at_y(const world *w, double y)
{
    for (size_t i = 0; i < w->scene->n_edges; i++) {
        const rg_edge *e = &w->scene->edge[i];
        bool there = true;
        for (int end = 0; end < 2; end++) {
            const double *r = w->mesh->vertex_m[e->vertex[end]], *o = w->mesh->origin_m;
            there = there && fabs(r[1] + o[1] - y) < 1e-6 && fabs(r[0] + o[0]) < 1e-6;
        }
        if (there) return e;
    }
    ck_abort_msg("no edge at y %g", y);
    return NULL;
}

static const rg_aspect hiding_aspect[] = {{0.3, 0.0}, {-0.4, 0.0}, {0.1, 0.2}, {0.7, -0.3}, {-0.2, 0.5}};
enum { N_HIDING = sizeof hiding_aspect / sizeof hiding_aspect[0] };

/* A cover that hides all above z = 0 of a sheet behind it, shifted so that its lower edge's shadow falls there for this aspect. */
static void add_cover(soup *s, vec3 to)
{
    const double x = 0.1, low = x * to.z / to.x, middle = x * to.y / to.x;
    add_rectangle(s, x, middle - 0.5, low, middle + 0.5, low + 0.5, 1);
}

START_TEST(half_hidden_is_half_as_long)
{
    const rg_view view = rg_view_of(hiding_aspect[_i]);
    soup whole = {0}, half = {0}, behind = {0};
    add_rectangle(&whole, 0.0, -0.03, -0.05, 0.03, 0.05, 1);
    add_rectangle(&half, 0.0, -0.03, -0.05, 0.03, 0.0, 1);
    add_rectangle(&behind, 0.0, -0.03, -0.05, 0.03, 0.05, 1);
    add_cover(&behind, view.s);
    world w = world_of_soup(&whole), h = world_of_soup(&half), b = world_of_soup(&behind);
    for (int side = -1; side <= 1; side += 2) {
        double complex full_m[3], half_m[3], hidden_m[3];
        one_edge(&w, edge_at_y(&w, 0.03 * side), &view, full_m);
        one_edge(&h, edge_at_y(&h, 0.03 * side), &view, half_m);
        one_edge(&b, edge_at_y(&b, 0.03 * side), &view, hidden_m);
        for (int i = 0; i < 3; i++)
            ck_assert_msg(cabs(hidden_m[i] - half_m[i]) <= 1e-12 * 0.1, "aspect %d, edge %+d, sum %d: off by %g m of %g", _i, side, i, cabs(hidden_m[i] - half_m[i]), cabs(half_m[i]));
        ck_assert_double_gt(cabs(full_m[0] - half_m[0]), 1e-6);     /* the halves differ, so a cover that hides nothing would show */
    }
    free_world(&w);
    free_world(&h);
    free_world(&b);
}
END_TEST

/* A sheet wholly behind a cover, through a sweep: the cover alone. */
START_TEST(behind_a_cover_there_is_nothing)
{
    const rg_view view = rg_view_of(hiding_aspect[_i]);
    const double az = hiding_aspect[_i].az_rad / RAD_PER_DEG, el = hiding_aspect[_i].el_rad / RAD_PER_DEG;
    soup both = {0}, alone = {0};
    add_rectangle(&both, 0.0, -0.03, 0.01, 0.03, 0.05, 1);          /* all of it above z = 0 */
    add_cover(&both, view.s);
    add_cover(&alone, view.s);
    world w = world_of_soup(&both), v = world_of_soup(&alone);
    double complex at[RG_N_POL], want[RG_N_POL];
    scatter(&w, az, el, freq_hz, RG_EDGE, at);
    scatter(&v, az, el, freq_hz, RG_EDGE, want);
    for (int pol = 0; pol < RG_N_POL; pol++) ck_assert_msg(cabs(at[pol] - want[pol]) <= 1e-11, "aspect %d, pol %d: %g m too much", _i, pol, cabs(at[pol] - want[pol]));
    free_world(&w);
    free_world(&v);
}
END_TEST

/* ---- which edges there are ---- */

static size_t count_edges(const world *w, double wedge_n, double tolerance)
{
    size_t n = 0;
    for (size_t i = 0; i < w->scene->n_edges; i++) n += fabs(w->scene->edge[i].wedge_n - wedge_n) <= tolerance;
    return n;
}

START_TEST(shapes_have_their_edges)
{
    world plate = world_of_shape((rg_shape){.kind = RG_PLATE, .size_m = {0.1, 0.05}, .edge_m = 0.02});
    world sphere = world_of_shape((rg_shape){.kind = RG_SPHERE, .size_m = {0.05}, .sagitta_m = 5e-4});
    world cylinder = world_of_shape((rg_shape){.kind = RG_CYLINDER, .size_m = {0.05, 0.2}, .sagitta_m = 1e-4});
    soup s = {0}, l = {0};
    add_box(&s, (vec3){0, 0, 0}, (vec3){0.1, 0.2, 0.3});
    world box = world_of_soup(&s);
    ck_assert_uint_eq(box.scene->n_edges, 12);
    ck_assert_uint_eq(count_edges(&box, 1.5, 1e-12), 12);
    add_rectangle(&l, 0, 0, 0, 1, 1, 1);
    world two_facets = world_of_soup(&l);
    ck_assert_uint_eq(two_facets.scene->n_edges, 4);
    ck_assert_uint_eq(count_edges(&two_facets, 2.0, 0.0), 4);

    double around_m = 0.0;                                          /* a cut plate: all free, and as long as its outline */
    for (size_t i = 0; i < plate.scene->n_edges; i++) {
        const rg_edge *e = &plate.scene->edge[i];
        around_m += vec3_norm(vec3_sub(vec3_from(plate.mesh->vertex_m[e->vertex[1]]), vec3_from(plate.mesh->vertex_m[e->vertex[0]])));
    }
    ck_assert_double_eq_tol(around_m, 0.3, 1e-12);
    ck_assert_uint_eq(count_edges(&plate, 2.0, 0.0), plate.scene->n_edges);
    ck_assert_uint_eq(sphere.scene->n_edges, 0);

    size_t rim[2] = {0, 0};                                         /* two rims of right angles and nothing along the side */
    double rim_m = 0.0;
    for (size_t i = 0; i < cylinder.scene->n_edges; i++) {
        const rg_edge *e = &cylinder.scene->edge[i];
        const double *p = cylinder.mesh->vertex_m[e->vertex[0]], *q = cylinder.mesh->vertex_m[e->vertex[1]];
        ck_assert_double_eq_tol(p[2], q[2], 1e-12);
        rim[p[2] > 0.0]++;
        rim_m += vec3_norm(vec3_sub(vec3_from(q), vec3_from(p)));
    }
    ck_assert_uint_eq(rim[0], rim[1]);
    ck_assert_uint_eq(count_edges(&cylinder, 1.5, 1e-9), cylinder.scene->n_edges);
    ck_assert_double_eq_tol(rim_m, 2.0 * 2.0 * PI * 0.05, 0.01 * rim_m);   /* chords of 0.1 mm sagitta on 50 mm: 0.2 % */
    free_world(&box);
    free_world(&plate);
    free_world(&sphere);
    free_world(&cylinder);
    free_world(&two_facets);
}
END_TEST

/* Two rectangles that meet along z at turn_deg, the second toward +y for a positive turn; flip winds both the other way. */
static world folded_sheet(double turn_deg, bool flip)
{
    soup s = {0};
    const double c = cos(turn_deg * RAD_PER_DEG), d = sin(turn_deg * RAD_PER_DEG);
    const vec3 a = {-0.05, 0, 0}, b = {0, 0, 0}, e = {0.05 * c, 0.05 * d, 0}, up = {0, 0, 0.08};
    if (flip) {
        add_quad(&s, a, vec3_add(a, up), vec3_add(b, up), b);
        add_quad(&s, b, vec3_add(b, up), vec3_add(e, up), e);
    } else {
        add_quad(&s, a, b, vec3_add(b, up), vec3_add(a, up));
        add_quad(&s, b, e, vec3_add(e, up), vec3_add(b, up));
    }
    return world_of_soup(&s);
}

/* The fold is a wedge from its outside, whichever way the sheet is wound or folded: normals away from the fold's inner side, exterior angle pi + turn. */
START_TEST(a_fold_is_a_wedge_from_outside)
{
    static const double turn_deg[] = {29.0, 31.0, -29.0, -31.0, 90.0, -90.0, 150.0};
    const double turn = turn_deg[_i / 2];
    const bool sharp = fabs(turn) > 30.0;
    world w = folded_sheet(turn, _i % 2);
    ck_assert_uint_eq(w.scene->n_edges, sharp ? 7 : 6);
    ck_assert_uint_eq(count_edges(&w, 2.0, 0.0), 6);
    ck_assert_uint_eq(count_edges(&w, 1.0 + fabs(turn) / 180.0, 1e-12), sharp);
    for (size_t i = 0; i < w.scene->n_edges; i++) {
        const rg_edge *e = &w.scene->edge[i];
        if (e->wedge_n == 2.0) continue;
        for (int f = 0; f < 2; f++) {
            ck_assert_double_lt(vec3_dot(vec3_from(e->normal[f]), vec3_from(e->into[1 - f])), 0.0);
            ck_assert_double_eq_tol(vec3_dot(vec3_from(e->normal[f]), vec3_from(e->into[f])), 0.0, 1e-12);
        }
    }
    free_world(&w);
}
END_TEST

/* The winding of a sheet has no meaning: the same amplitudes from all sides. */
START_TEST(a_fold_wound_either_way_is_the_same)
{
    uint64_t state = 22;
    world w = folded_sheet(70.0, false), v = folded_sheet(70.0, true);
    for (int i = 0; i < 60; i++) {
        const double az = random_between(&state, -180, 180), el = random_between(&state, -85, 85);
        double complex at[RG_N_POL], flipped[RG_N_POL];
        scatter(&w, az, el, freq_hz, RG_EDGE, at);
        scatter(&v, az, el, freq_hz, RG_EDGE, flipped);
        for (int pol = 0; pol < RG_N_POL; pol++) ck_assert_double_le(cabs(at[pol] - flipped[pol]), 1e-12 * 0.4);
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

/* An L-shaped prism, closed: of its 18 edges the one inside the corner is concave, and its currents are the bounces'. */
START_TEST(a_concave_corner_is_none)
{
    static const double outline[6][2] = {{0, 0}, {0.2, 0}, {0.2, 0.1}, {0.1, 0.1}, {0.1, 0.2}, {0, 0.2}};
    soup s = {0};
    for (int i = 0; i < 6; i++) {
        const double *p = outline[i], *q = outline[(i + 1) % 6];
        add_quad(&s, (vec3){p[0], p[1], 0}, (vec3){q[0], q[1], 0}, (vec3){q[0], q[1], 0.1}, (vec3){p[0], p[1], 0.1});
    }
    for (int i = 0; i < 4; i++) {                                   /* caps as fans from the origin, which sees all corners */
        const double *p = outline[1 + i], *q = outline[2 + i];
        add_triangle(&s, (vec3){0, 0, 0.1}, (vec3){p[0], p[1], 0.1}, (vec3){q[0], q[1], 0.1});
        add_triangle(&s, (vec3){0, 0, 0}, (vec3){q[0], q[1], 0}, (vec3){p[0], p[1], 0});
    }
    world w = world_of_soup(&s);
    ck_assert(w.mesh->shells[0].closed);
    ck_assert_uint_eq(w.scene->n_edges, 17);
    for (size_t i = 0; i < w.scene->n_edges; i++) {
        double middle[2] = {0, 0};
        for (int end = 0; end < 2; end++)
            for (int a = 0; a < 2; a++) middle[a] += 0.5 * (w.mesh->vertex_m[w.scene->edge[i].vertex[end]][a] + w.mesh->origin_m[a]);
        ck_assert(fabs(middle[0] - 0.1) > 1e-6 || fabs(middle[1] - 0.1) > 1e-6);
    }
    free_world(&w);
}
END_TEST

/* Three sheets along one line: no wedge, and left out; what remains are three edges of each sheet. */
START_TEST(a_t_junction_is_none)
{
    soup s = {0};
    const vec3 o = {0, 0, 0}, up = {0, 0, 0.08}, end[3] = {{0.05, 0, 0}, {-0.05, 0, 0}, {0, 0.05, 0}};
    for (int i = 0; i < 3; i++) add_quad(&s, o, end[i], vec3_add(end[i], up), up);
    world w = world_of_soup(&s);
    ck_assert_uint_eq(w.scene->n_edges, 9);
    ck_assert_uint_eq(count_edges(&w, 2.0, 0.0), 9);
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("edges");
    TCase *tests = tcase_create("edges");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, a_plate_is_what_ross_says, 0, 3);
    tcase_add_test(tests, a_leading_edge_is_its_length_squared_over_pi);
    tcase_add_loop_test(tests, cutting_an_edge_changes_nothing, 2, 40);
    tcase_add_loop_test(tests, half_hidden_is_half_as_long, 0, N_HIDING);
    tcase_add_loop_test(tests, behind_a_cover_there_is_nothing, 0, N_HIDING);
    tcase_add_test(tests, shapes_have_their_edges);
    tcase_add_loop_test(tests, a_fold_is_a_wedge_from_outside, 0, 14);
    tcase_add_test(tests, a_fold_wound_either_way_is_the_same);
    tcase_add_test(tests, a_concave_corner_is_none);
    tcase_add_test(tests, a_t_junction_is_none);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
