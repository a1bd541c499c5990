/* check_edges.c - which edges are found, what they send back, and what hides them */
#include "mesh/edges.h"
#include "world.h"

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
 * Hard: the wave from edge to edge of |T2|/cos th and what comes of it beside. Soft holds to 60 degrees, hard to 50 (toward grazing Ross blows up). */
START_TEST(a_plate_is_what_ross_says)
{
    static const double side_m[] = {0.03, 0.05, 0.1};
    const double a_m = side_m[_i], ka = wave_number(freq_hz) * a_m;
    double worst[2] = {0.0, 0.0}, worst_db[2] = {0.0, 0.0};
    world w = world_of_shape((rg_shape){.kind = RG_PLATE, .size_m = {a_m, a_m}});
    for (int i = 1; i <= 600; i++) {
        const double az = 0.1 * i, th = az * RAD_PER_DEG;
        double complex at[RG_N_POL];
        scatter(&w, az, 0.0, freq_hz, with_edges, at);
        for (int soft = 0; soft < 2; soft++) {
            if (!soft && az > 50.0) continue;
            const double want = ross(ka, th, soft, true), got = cabs(at[soft ? RG_VV : RG_HH]) * ROOT_PI / a_m;
            const double running = fabs(ross(ka, th, soft, false) - want), allowed = 1e-6 * ka + side_edges(ka, th) + running;
            worst[soft] = fmax(worst[soft], fabs(got - want) / allowed);
            if (want > 1.0) worst_db[soft] = fmax(worst_db[soft], fabs(20.0 * log10(got / want)));
            ck_assert_msg(fabs(got - want) <= allowed, "plate %g m, az %g, %s: %.6f, Ross %.6f, allowed %.6f", a_m, az, soft ? "soft" : "hard", got, want, allowed);
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
 * gives f1(180 deg) - there 1 - or 0 at the other end: half plane, f1(0) = 0. Free of frequency. The mechanism's own limit along a face is taken 2^-26 off. */
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

/* A sheet in x = 0, its middle at y0, behind a larger one that covers z > 0: what is seen of its edges are those of the half. The cover's own edges are
 * taken off by a scene of the cover alone; the half sheet's fourth edge lies on the cover's shadow, where no edge is, and is taken off by a half plane's
 * edge of the same place: the edge that the whole sheet, cut along z = 0 and shifted, would have. So the pair that is compared is
 *   whole sheet behind the cover - cover   =   half sheet - its upper edge,
 * and the upper edge alone is half of (half sheet + other half sheet - whole sheet), as both halves have the same edge with opposite into: not the same.
 * Therefore by parts: three edges of the half, by the analytic segment below. */
typedef struct { vec3 from, to, into, normal; } free_edge;

static double sinc(double x) { return fabs(x) < 1e-8 ? 1.0 : sin(x) / x; }
