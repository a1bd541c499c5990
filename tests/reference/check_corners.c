/* check_corners.c - corner reflectors by their bounces alone: closed forms, and what must not depend on mesh, place or frequency */
#include "scatter/bounce.h"
#include "scatter/scene.h"
#include "world.h"
#include <stdio.h>

static const double axis_el_deg = 35.264389682754654;   /* of (1, 1, 1), at az 45 */

static void bounces(const world *w, double az_deg, double el_deg, double freq_hz, int n_bounces, double complex s_m[RG_N_POL])
{
    const rg_sweep_plan plan = {.n_el = 1, .n_az = 1, .n_freq = 1, .el_deg = &el_deg, .az_deg = &az_deg, .freq_hz = &freq_hz,
                                .mechanisms = RG_BOUNCE, .n_bounces = n_bounces};
    ck_assert_int_eq(rg_sweep(w->scene, &plan, keep_one, s_m, NULL, NULL), RG_OK);
}

static double db(double x) { return 10.0 * log10(x); }

/* ---- levels ---- */

/* Common practice: 4 pi L^4/(3 lambda^2) for triangles, 12 pi L^4/lambda^2 for squares, 15.60 L^4/lambda^2 for quarter circles. The three
 * pairs of faces are dihedrals rolled by 60 degrees from each other, whose side lobes on the axis cancel: what is left is the last digit of 15.60, 0.0014 dB,
 * and the sagitta of the circle, which keeps its area but not quite its shape. */
START_TEST(trihedrals_on_their_axis)
{
    static const struct { rg_shape_kind kind; double factor; const char *name; } shape[] = {
        {RG_TRIHEDRAL, 4.0 * PI / 3.0, "triangular"}, {RG_TRIHEDRAL_SQUARE, 12.0 * PI, "square"}, {RG_TRIHEDRAL_CIRCULAR, 15.60, "circular"}};
    static const double leg_m[] = {0.06, 0.1, 0.3}, freq_hz[] = {24.125e9, 77e9};
    const double leg = leg_m[_i / 2], f_hz = freq_hz[_i % 2], lambda_m = LIGHT_SPEED_M_PER_S / f_hz;
    for (int k = 0; k < 3; k++) {
        double complex at[RG_N_POL];
        world w = world_of_shape((rg_shape){.kind = shape[k].kind, .size_m = {leg}, .sagitta_m = 1e-3 * leg});
        bounces(&w, 45.0, axis_el_deg, f_hz, 4, at);
        const double want = db(shape[k].factor * pow(leg, 4.0) / (lambda_m * lambda_m));
        printf("trihedral, leg %3.0f mm, %6.3f GHz, %-10s: HH %+.4f dB, VV %+.4f dB, HV %.1f dB\n", leg * 1e3, f_hz / 1e9, shape[k].name, rg_dbsm(at[RG_HH]) - want,
               rg_dbsm(at[RG_VV]) - want, rg_dbsm(at[RG_HV]) - want);
        fflush(stdout);
        ck_assert_msg(fabs(rg_dbsm(at[RG_HH]) - want) <= 0.005 && fabs(rg_dbsm(at[RG_VV]) - want) <= 0.005, "%s, leg %g m, %g GHz: HH %.3f, VV %.3f, want %.3f dBsm",
                      shape[k].name, leg, f_hz / 1e9, rg_dbsm(at[RG_HH]), rg_dbsm(at[RG_VV]), want);
        ck_assert_double_lt(rg_dbsm(at[RG_HV]), want - 30.0);       /* three reflections keep the polarisation */
        free_world(&w);
    }
}
END_TEST

/* A dihedral of faces a x b, rolled about the line of sight: 8 pi a^2 b^2/lambda^2 (common practice) with [[cos 2p, sin 2p], [sin 2p, -cos 2p]] in (V, H). Flat
 * faces, so to 0.001 dB. */
static world rolled_dihedral(double a, double b, double roll_deg)
{
    const double c = cos(roll_deg * RAD_PER_DEG), d = sin(roll_deg * RAD_PER_DEG), r = a / sqrt(2.0);
    vec3 p[6];
    soup s = {0};
    for (int i = 0; i < 6; i++) {
        const double y = r * (i / 2 - 1), z = (i % 2 ? 0.5 : -0.5) * b;
        p[i] = (vec3){fabs(y), c * y - d * z, d * y + c * z};
    }
    add_quad(&s, p[0], p[2], p[3], p[1]);
    add_quad(&s, p[2], p[4], p[5], p[3]);
    return world_of_soup(&s);
}

START_TEST(dihedrals_on_their_axis)
{
    static const double size_m[][2] = {{0.06, 0.1}, {0.1, 0.1}, {0.3, 0.05}}, freq_hz[] = {24.125e9, 77e9};
    const double a = size_m[_i / 2][0], b = size_m[_i / 2][1], f_hz = freq_hz[_i % 2], lambda_m = LIGHT_SPEED_M_PER_S / f_hz;
    const double want = db(8.0 * PI * a * a * b * b / (lambda_m * lambda_m));
    double complex at[RG_N_POL];
    for (int roll = 0; roll <= 90; roll += 45) {
        world w = rolled_dihedral(a, b, roll);
        bounces(&w, 0.0, 0.0, f_hz, 4, at);
        for (int pol = 0; pol < RG_N_POL; pol++) {
            const bool cross = pol == RG_HV || pol == RG_VH, strong = cross == (roll == 45);
            if (strong) ck_assert_msg(fabs(rg_dbsm(at[pol]) - want) <= 0.001, "%g x %g m, roll %d, pol %d: %.4f dBsm, want %.4f", a, b, roll, pol, rg_dbsm(at[pol]), want);
            else ck_assert_msg(rg_dbsm(at[pol]) <= want - 30.0, "%g x %g m, roll %d, pol %d: %.4f dBsm beside a peak of %.4f", a, b, roll, pol, rg_dbsm(at[pol]), want);
        }
        if (roll != 45) ck_assert_double_lt(creal(at[RG_HH] / at[RG_VV]), 0.0);      /* two reflections turn one of them round */
        free_world(&w);
    }
}
END_TEST

/* The area that a triangular trihedral offers to three bounces (common practice), l <= m <= n direction cosines: 4 pi A^2/lambda^2. The side
 * lobes of the double bounces are some 1/(2k L) of it, 0.2 % for a leg of 77 wavelengths, and a quarter turn off in phase: 0.01 dB holds them. */
START_TEST(triangular_pattern)
{
    const double leg = 0.3, f_hz = 77e9, lambda_m = LIGHT_SPEED_M_PER_S / f_hz;
    double worst_db = 0.0;
    world w = world_of_shape((rg_shape){.kind = RG_TRIHEDRAL, .size_m = {leg}});
    for (int i = -5; i <= 5; i++)
        for (int j = -5; j <= 5; j++) {
            const double az = 45.0 + 3.0 * i, el = axis_el_deg + 3.0 * j;
            const vec3 to = toward(aspect_deg(az, el));
            const double s = to.x + to.y + to.z, n = fmax(to.x, fmax(to.y, to.z)), l = fmin(to.x, fmin(to.y, to.z)), m = s - n - l;
            const double area_m2 = leg * leg * (l + m >= n ? s - 2.0 / s : 4.0 * l * m / s), want = db(4.0 * PI * area_m2 * area_m2 / (lambda_m * lambda_m));
            double complex at[RG_N_POL];
            bounces(&w, az, el, f_hz, 4, at);
            for (int pol = RG_HH; pol <= RG_VV; pol++) {
                worst_db = fmax(worst_db, fabs(rg_dbsm(at[pol]) - want));
                ck_assert_msg(fabs(rg_dbsm(at[pol]) - want) <= 0.01, "az %g el %g, pol %d: %.4f dBsm, want %.4f", az, el, pol, rg_dbsm(at[pol]), want);
            }
        }
    printf("triangular trihedral within 15 deg: %.5f dB at the most\n", worst_db);
    fflush(stdout);
    free_world(&w);
}
END_TEST

START_TEST(three_bounces_need_three)
{
    world w = world_of_shape((rg_shape){.kind = RG_TRIHEDRAL, .size_m = {0.1}});
    double complex two[RG_N_POL], three[RG_N_POL], four[RG_N_POL];
    bounces(&w, 45.0, axis_el_deg, 77e9, 2, two);
    bounces(&w, 45.0, axis_el_deg, 77e9, 3, three);
    bounces(&w, 45.0, axis_el_deg, 77e9, 4, four);
    ck_assert_double_lt(rg_dbsm(two[RG_VV]), rg_dbsm(three[RG_VV]) - 15.0);
    ck_assert_double_le(cabs(four[RG_VV] - three[RG_VV]), 1e-9 * cabs(three[RG_VV]));   /* three planes at right angles: there is no fourth */
    free_world(&w);
}
END_TEST

/* A dihedral on its axis gives back at -y what comes in at y, all in phase. A screen over y0 .. y1 stops what would come in there and what would go out there,
 * in at -y1 .. -y0: of 2 r that the corner is wide, 2 (y1 - y0) are lost. Two bounces: no third off the screen's back. */
START_TEST(a_way_back_that_is_blocked)
{
    const double r = 0.1 / sqrt(2.0), y0 = 0.013, y1 = 0.031, f_hz = 77e9;
    soup s = {0};
    add_quad(&s, (vec3){r, -r, -0.05}, (vec3){0, 0, -0.05}, (vec3){0, 0, 0.05}, (vec3){r, -r, 0.05});
    add_quad(&s, (vec3){0, 0, -0.05}, (vec3){r, r, -0.05}, (vec3){r, r, 0.05}, (vec3){0, 0, 0.05});
    add_rectangle(&s, 0.3, y0, -0.2, y1, 0.2, 1);
    world w = world_of_soup(&s), v = rolled_dihedral(0.1, 0.1, 0.0);
    double complex at[RG_N_POL], open[RG_N_POL];
    bounces(&w, 0.0, 0.0, f_hz, 2, at);
    bounces(&v, 0.0, 0.0, f_hz, 2, open);
    for (int pol = RG_HH; pol <= RG_VV; pol++)
        ck_assert_msg(cabs(at[pol] - open[pol] * (1.0 - (y1 - y0) / r)) <= 1e-9 * cabs(open[pol]), "pol %d: %.9f of the open corner, want %.9f", pol,
                      creal(at[pol] / open[pol]), 1.0 - (y1 - y0) / r);
    free_world(&w);
    free_world(&v);
}
END_TEST

/* ---- what must not matter ---- */

static const double look[][2] = {{45, 35.264389682754654}, {45, 0}, {30, 20}, {60, 50}, {7, 33}, {45, 80}, {12.5, 4}, {81, 66}, {120, 30}, {-30, -10}};
enum { N_LOOK = sizeof look / sizeof look[0] };
static const rg_shape_kind corner_kind[] = {RG_DIHEDRAL, RG_TRIHEDRAL, RG_TRIHEDRAL_SQUARE};

/* Facets of a quarter of the leg and less. Relative to the greatest level on the axis, 1e-9: the roundings of some thousand cuts. */
START_TEST(cutting_faces_changes_nothing)
{
    const double size_m[3] = {0.1, 0.1, 0}, axis[2] = {_i ? 45.0 : 0.0, _i ? axis_el_deg : 0.0};
    rg_shape shape = {.kind = corner_kind[_i]};
    memcpy(shape.size_m, size_m, sizeof size_m);
    world w = world_of_shape(shape);
    shape.edge_m = 0.025;
    world v = world_of_shape(shape);
    double complex peak[RG_N_POL], at[RG_N_POL], cut[RG_N_POL];
    double worst = 0.0;
    ck_assert_uint_gt(rg_mesh_n_facets(v.mesh), 8 * rg_mesh_n_facets(w.mesh));
    bounces(&w, axis[0], axis[1], 77e9, 4, peak);
    for (int i = 0; i < N_LOOK; i++) {
        bounces(&w, look[i][0], look[i][1], 77e9, 4, at);
        bounces(&v, look[i][0], look[i][1], 77e9, 4, cut);
        for (int pol = 0; pol < RG_N_POL; pol++) {
            worst = fmax(worst, cabs(at[pol] - cut[pol]) / cabs(peak[RG_VV]));
            ck_assert_msg(cabs(at[pol] - cut[pol]) <= 1e-9 * cabs(peak[RG_VV]), "kind %d, az %g el %g, pol %d: off by %g of the peak", _i, look[i][0], look[i][1], pol,
                          cabs(at[pol] - cut[pol]) / cabs(peak[RG_VV]));
        }
    }
    printf("corner %d: %zu against %zu facets: %.2g of the peak\n", _i, rg_mesh_n_facets(w.mesh), rg_mesh_n_facets(v.mesh), worst);
    fflush(stdout);
    free_world(&w);
    free_world(&v);
}
END_TEST

static world moved_trihedral(vec3 d)
{
    const double leg = 0.1;
    const vec3 x = vec3_add(d, (vec3){leg, 0, 0}), y = vec3_add(d, (vec3){0, leg, 0}), z = vec3_add(d, (vec3){0, 0, leg});
    soup s = {0};
    add_triangle(&s, d, x, y);
    add_triangle(&s, d, y, z);
    add_triangle(&s, d, z, x);
    return world_of_soup(&s);
}

/* 1e-9 of the peak: phases of 2k s.d, some 2e5 rad, to the last digits of a double. */
START_TEST(moving_turns_the_phase)
{
    const vec3 d = {12.5, -31.0, 4.25};
    world w = moved_trihedral((vec3){0, 0, 0}), v = moved_trihedral(d);
    double complex peak[RG_N_POL], at[RG_N_POL], there[RG_N_POL];
    bounces(&w, 45.0, axis_el_deg, 77e9, 4, peak);
    for (int i = 0; i < N_LOOK; i++) {
        bounces(&w, look[i][0], look[i][1], 77e9, 4, at);
        bounces(&v, look[i][0], look[i][1], 77e9, 4, there);
        const double phase = 2.0 * wave_number(77e9) * vec3_dot(toward(aspect_deg(look[i][0], look[i][1])), d);
        for (int pol = 0; pol < RG_N_POL; pol++)
            ck_assert_msg(cabs(there[pol] - at[pol] * CMPLX(cos(phase), sin(phase))) <= 1e-9 * cabs(peak[RG_VV]), "az %g el %g, pol %d: off by %g", look[i][0],
                          look[i][1], pol, cabs(there[pol] - at[pol] * CMPLX(cos(phase), sin(phase))) / cabs(peak[RG_VV]));
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

/* Footprints that one aspect leaves, with the grain of a frequency. */
static size_t count_footprints(const world *w, const rg_view *view, double freq_hz)
{
    const double grain_m = LIGHT_SPEED_M_PER_S / freq_hz / 8.0;
    rg_footprints footprints = {0};
    rg_polygons lit = {0};
    rg_lit_scratch *lit_scratch = rg_lit_scratch_new();
    rg_bounce_scratch *scratch = rg_bounce_scratch_new();
    rg_cover *cover = NULL;
    rg_seen seen;
    ck_assert_int_eq(rg_seen_new(&seen, w->mesh, NULL), RG_OK);
    ck_assert_int_eq(rg_cover_new(&cover, w->mesh, NULL), RG_OK);
    rg_seen_turn(&seen, w->mesh, view);
    rg_cover_draw(cover, w->mesh, &seen);
    for (uint32_t i = 0; i < rg_mesh_n_facets(w->mesh); i++) {
        rg_face face;
        if (!rg_face_seen(&face, w->mesh, &seen, i)) continue;
        lit.n = 0;
        ck_assert(rg_lit_from_afar(w->scene, &seen, cover, &face, &rg_whole_facet, grain_m, lit_scratch, &lit));
        for (size_t k = 0; k < lit.n; k++)
            ck_assert(rg_bounce_follow(w->scene, &seen, cover, &face, &lit.polygon[k], 4, grain_m, lit_scratch, scratch, &footprints));
    }
    const size_t n = footprints.n;
    rg_footprints_free(&footprints);
    free(lit.polygon);
    rg_lit_scratch_free(lit_scratch);
    rg_bounce_scratch_free(scratch);
    rg_cover_free(cover);
    rg_seen_free(&seen);
    return n;
}

/* Nothing is sampled in wavelengths, so the work of a corner is the same at 80 GHz as at 10; footprints are counted because seconds vary. */
START_TEST(work_does_not_grow_with_frequency)
{
    world w = world_of_shape((rg_shape){.kind = corner_kind[_i], .size_m = {0.3, 0.3}}), v = world_of_shape((rg_shape){.kind = corner_kind[_i], .size_m = {0.3, 0.3}, .edge_m = 0.06});
    size_t n_footprints = 0;
    for (int i = 0; i < N_LOOK; i++) {
        const rg_view view = rg_view_of_deg(look[i][0], look[i][1]);
        const size_t low = count_footprints(&w, &view, 10e9), low_cut = count_footprints(&v, &view, 10e9);
        n_footprints += low;
        ck_assert_uint_eq(count_footprints(&w, &view, 80e9), low);
        ck_assert_uint_eq(count_footprints(&v, &view, 80e9), low_cut);
    }
    ck_assert_uint_gt(n_footprints, 10);
    free_world(&w);
    free_world(&v);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("corners");
    TCase *tests = tcase_create("corners");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, trihedrals_on_their_axis, 0, 6);
    tcase_add_loop_test(tests, dihedrals_on_their_axis, 0, 6);
    tcase_add_test(tests, triangular_pattern);
    tcase_add_test(tests, three_bounces_need_three);
    tcase_add_test(tests, a_way_back_that_is_blocked);
    tcase_add_loop_test(tests, cutting_faces_changes_nothing, 0, 3);
    tcase_add_test(tests, moving_turns_the_phase);
    tcase_add_loop_test(tests, work_does_not_grow_with_frequency, 0, 3);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
