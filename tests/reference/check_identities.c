/* check_identities.c - what must hold for any target, one answer reached in two ways */
#include "world.h"

static const double freq_hz = 77e9;
static const unsigned all = RG_SURFACE | RG_EDGE | RG_BOUNCE;
/* each alone, so that what fails has a name, and one cannot drown in another */
enum { N_SETS = 3 };
static const unsigned mechanism_sets[N_SETS] = {RG_SURFACE, RG_EDGE, RG_BOUNCE};
static const char *const set_name[N_SETS] = {"surface", "edge", "bounce"};

static soup copy_of(const soup *s)
{
    soup copy = {0};
    for (size_t i = 0; i < s->n; i++) add_triangle(&copy, vec3_from(s->corner_m[i][0]), vec3_from(s->corner_m[i][1]), vec3_from(s->corner_m[i][2]));
    return copy;
}

static void move(soup *s, vec3 d)
{
    for (size_t i = 0; i < 3 * s->n; i++) {
        double *p = s->corner_m[i / 3][i % 3];
        p[0] += d.x;
        p[1] += d.y;
        p[2] += d.z;
    }
}

static void turn_about_z(soup *s, double angle_rad)
{
    const double c = cos(angle_rad), d = sin(angle_rad);
    for (size_t i = 0; i < 3 * s->n; i++) {
        double *p = s->corner_m[i / 3][i % 3];
        const double x = p[0], y = p[1];
        p[0] = c * x - d * y;
        p[1] = d * x + c * y;
    }
}

static double area_m2(const soup *s)
{
    double sum = 0.0;
    for (size_t i = 0; i < s->n; i++) {
        const vec3 a = vec3_from(s->corner_m[i][0]), b = vec3_from(s->corner_m[i][1]), c = vec3_from(s->corner_m[i][2]);
        sum += 0.5 * vec3_norm(vec3_cross(vec3_sub(b, a), vec3_sub(c, a)));
    }
    return sum;
}

enum { N_ASPECTS = 12 };

/* Errors are held against the amplitude of all facets in phase, k A/sqrt(pi): that is what rounding of a phase can cost. */
START_TEST(moving_turns_the_phase)
{
    static const double d_m[][3] = {{0.1, 0, 0}, {1.5, -2.25, 0.75}, {-12.3, 45.6, 7.89}};
    const vec3 d = vec3_from(d_m[_i / N_SETS]);
    const unsigned mechanisms = mechanism_sets[_i % N_SETS];
    uint64_t state = 11;
    soup s = awkward_target(), moved = copy_of(&s);
    const double peak_m = wave_number(freq_hz) / ROOT_PI * area_m2(&s);
    move(&moved, d);
    world w = world_of_soup(&s), v = world_of_soup(&moved);
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        double complex at[RG_N_POL], there[RG_N_POL];
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, freq_hz, mechanisms, at);
        scatter(&v, az, el, freq_hz, mechanisms, there);
        const double phase = 2.0 * wave_number(freq_hz) * vec3_dot(toward(aspect_deg(az, el)), d);
        for (int pol = 0; pol < RG_N_POL; pol++) {
            const double off = cabs(there[pol] - at[pol] * CMPLX(cos(phase), sin(phase)));
            ck_assert_msg(off <= 1e-9 * peak_m, "%s moved by (%g, %g, %g), az %g el %g, pol %d: off by %g of the peak", set_name[_i % N_SETS], d.x, d.y, d.z, az, el, pol,
                          off / peak_m);
        }
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

/* 4,000,000 m from the origin (map coordinates) doubles are 2^-31 m apart: each corner is off by up to half of that across each axis, 0.75 urad
 * of two-way phase, and the mesh is not the same mesh. What is expected: the magnitude within 2e-6 of the peak. d is exact in doubles. */
START_TEST(moving_very_far_costs_what_doubles_cost)
{
    const vec3 d = {4e6, -4e6, 0.0};
    uint64_t state = 12;
    soup s = awkward_target(), moved = copy_of(&s);
    const double k = wave_number(freq_hz), peak_m = k / ROOT_PI * area_m2(&s);
    move(&moved, d);
    world w = world_of_soup(&s), v = world_of_soup(&moved);
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        double complex at[RG_N_POL], there[RG_N_POL];
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, freq_hz, RG_SURFACE, at);
        scatter(&v, az, el, freq_hz, RG_SURFACE, there);
        const double off = fabs(cabs(there[RG_HH]) - cabs(at[RG_HH]));
        ck_assert_msg(off <= 2e-6 * peak_m, "az %g el %g: magnitude off by %g of the peak", az, el, off / peak_m);
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

/* exp(2jk s.d) in long doubles: s from degrees, k from the speed of light. */
static double complex turn_of(double az_deg, double el_deg, vec3 d)
{
    const long double pi = 3.14159265358979323846264338327950288L, az = az_deg * pi / 180.0L, el = el_deg * pi / 180.0L;
    const long double s_d = cosl(el) * (cosl(az) * (long double)d.x + sinl(az) * (long double)d.y) + sinl(el) * (long double)d.z;
    const long double phase = 4.0L * pi * (long double)freq_hz / 299792458.0L * s_d;
    return CMPLX((double)cosl(phase), (double)sinl(phase));
}

/* A target whose coordinates are multiples of 2^-20 m moves that far without loss. The phase turns by 2k s.d, up to 1.8e10 rad, in which
 * half a unit in the last place is 2e-6: five roundings, of s, k and their product, may leave 1e-5 rad, and nothing else may change. */
START_TEST(moving_very_far_turns_the_phase)
{
    const unsigned mechanisms = mechanism_sets[_i];
    const vec3 d = {4e6, -4e6, 0.0};
    uint64_t state = 23;
    soup s = awkward_target();
    for (size_t i = 0; i < 9 * s.n; i++) {
        double *x = &s.corner_m[i / 9][i / 3 % 3][i % 3];
        *x = round(*x * 0x1p20) * 0x1p-20;
    }
    soup moved = copy_of(&s);
    const double peak_m = wave_number(freq_hz) / ROOT_PI * area_m2(&s);
    move(&moved, d);
    world w = world_of_soup(&s), v = world_of_soup(&moved);
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        double complex at[RG_N_POL], there[RG_N_POL];
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, freq_hz, mechanisms, at);
        scatter(&v, az, el, freq_hz, mechanisms, there);
        for (int pol = 0; pol < RG_N_POL; pol++) {
            const double complex want = at[pol] * turn_of(az, el, d);
            ck_assert_msg(cabs(there[pol] - want) <= 1e-5 * cabs(want) + 1e-12 * peak_m, "%s, az %g el %g, pol %d: off by %g of its own, %g of the peak",
                          set_name[_i], az, el, pol, cabs(there[pol] - want) / cabs(want), cabs(there[pol] - want) / peak_m);
        }
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

static double off_db(double complex a, double complex b) { return fabs(20.0 * log10(cabs(a) / cabs(b))); }

START_TEST(turning_with_the_radar_changes_nothing)
{
    const unsigned mechanisms = mechanism_sets[_i];
    uint64_t state = 13;
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        const double turn_deg = random_between(&state, -180.0, 180.0);
        double complex at[RG_N_POL], turned[RG_N_POL];
        soup s = awkward_target(), t = copy_of(&s);
        turn_about_z(&t, turn_deg * RAD_PER_DEG);
        world w = world_of_soup(&s), v = world_of_soup(&t);
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, freq_hz, mechanisms, at);
        scatter(&v, az + turn_deg, el, freq_hz, mechanisms, turned);
        for (int pol = 0; pol < RG_N_POL; pol++)
            if (cabs(at[pol]) > 1e-8)
                ck_assert_msg(off_db(turned[pol], at[pol]) <= 1e-6, "%s turned by %g, az %g el %g, pol %d: %.9f dB", set_name[_i], turn_deg, az, el, pol,
                              off_db(turned[pol], at[pol]));
        free_world(&w);
        free_world(&v);
    }
}
END_TEST

/* v turned about an axis (unit) by an angle: O. Rodrigues, 1840. */
static vec3 turned(vec3 v, vec3 axis, double angle_rad)
{
    const vec3 along = vec3_scale(axis, vec3_dot(axis, v) * (1.0 - cos(angle_rad)));
    return vec3_add(along, vec3_add(vec3_scale(v, cos(angle_rad)), vec3_scale(vec3_cross(axis, v), sin(angle_rad))));
}

static soup two_plates(void)
{
    soup s = {0};
    add_rectangle(&s, 0.0, -0.05, -0.05, 0.05, 0.05, 1);
    add_quad(&s, (vec3){0.06, -0.02, 0}, (vec3){0.08, 0.03, 0}, (vec3){0.07, 0.03, 0.07}, (vec3){0.05, -0.02, 0.07});
    return s;
}

/* A box without its front: the radar looks in, and the walls hide each other. */
static soup open_box(void)
{
    const double a = 0.05, b = 0.04, c = 0.03;
    soup s = {0};
    add_rectangle(&s, -a, -b, -c, b, c, 1);
    add_quad(&s, (vec3){-a, -b, -c}, (vec3){a, -b, -c}, (vec3){a, b, -c}, (vec3){-a, b, -c});
    add_quad(&s, (vec3){-a, -b, c}, (vec3){-a, b, c}, (vec3){a, b, c}, (vec3){a, -b, c});
    add_quad(&s, (vec3){-a, -b, -c}, (vec3){-a, -b, c}, (vec3){a, -b, c}, (vec3){a, -b, -c});
    add_quad(&s, (vec3){-a, b, -c}, (vec3){a, b, -c}, (vec3){a, b, c}, (vec3){-a, b, c});
    return s;
}

/* Facets of some 3 mm, with a post and a plate that shade it and each other. */
static soup sphere_in_shadows(void)
{
    enum { N = 30 };
    const double a = 0.03;
    soup s = {0};
    for (int i = 0; i < N; i++)
        for (int j = 0; j < 2 * N; j++) {
            vec3 p[4];
            for (int q = 0; q < 4; q++) {
                const double t = PI * (i + (q >> 1)) / N, f = PI * ((j + (q == 1 || q == 2)) % (2 * N)) / N;
                p[q] = (vec3){a * sin(t) * cos(f), a * sin(t) * sin(f), a * cos(t)};
            }
            if (i > 0) add_triangle(&s, p[0], p[2], p[1]);
            if (i < N - 1) add_triangle(&s, p[0], p[3], p[2]);
        }
    add_box(&s, (vec3){0.04, -0.006, -0.05}, (vec3){0.05, 0.004, 0.05});
    add_quad(&s, (vec3){-0.01, 0.04, -0.01}, (vec3){0.02, 0.05, -0.01}, (vec3){0.02, 0.05, 0.02}, (vec3){-0.01, 0.04, 0.02});
    return s;
}

/* About any axis: by the surface alone S is the same for HH and VV, however the basis turns. 1e-6 dB down to 100 dB under the peak: phases of
 * some 300 rad are rounded by 1e-13 rad, 1e-12 of the peak. */
START_TEST(turning_every_way_changes_nothing)
{
    static soup (*const build[])(void) = {two_plates, open_box, sphere_in_shadows};
    uint64_t state = 20 + (uint64_t)_i;
    for (int i = 0; i < 4 * N_ASPECTS; i++) {
        double az, el, axis_az, axis_el;
        soup s = build[_i](), t = copy_of(&s);
        const double angle = random_between(&state, -PI, PI), peak_m = wave_number(freq_hz) / ROOT_PI * area_m2(&s);
        random_aspect(&state, &az, &el);
        random_aspect(&state, &axis_az, &axis_el);
        const vec3 axis = toward(aspect_deg(axis_az, axis_el));
        for (size_t f = 0; f < 3 * t.n; f++) {
            const vec3 p = turned(vec3_from(t.corner_m[f / 3][f % 3]), axis, angle);
            memcpy(t.corner_m[f / 3][f % 3], (double[3]){p.x, p.y, p.z}, sizeof t.corner_m[0][0]);
        }
        world w = world_of_soup(&s), v = world_of_soup(&t);
        const double complex at = surface(&w, aspect_deg(az, el), freq_hz);
        const double complex there = surface(&v, aspect_of(turned(toward(aspect_deg(az, el)), axis, angle)), freq_hz);
        ck_assert_msg(cabs(there - at) <= 1e-12 * peak_m, "target %d, az %g el %g: off by %g of the peak", _i, az, el, cabs(there - at) / peak_m);
        if (cabs(at) > 1e-5 * peak_m)
            ck_assert_msg(off_db(there, at) <= 1e-6, "target %d, az %g el %g: %.9f dB", _i, az, el, off_db(there, at));
        free_world(&w);
        free_world(&v);
    }
}
END_TEST

/* Each facet in two, from the middle of its longest edge (so that twins stay joined: both sides of an edge cut it in the same place). */
static soup cut_in_two(const soup *s)
{
    soup cut = {0};
    for (size_t i = 0; i < s->n; i++) {
        vec3 p[3];
        int longest = 0;
        double length[3];
        for (int c = 0; c < 3; c++) p[c] = vec3_from(s->corner_m[i][c]);
        for (int c = 0; c < 3; c++) {
            length[c] = vec3_norm(vec3_sub(p[(c + 1) % 3], p[c]));
            if (length[c] > length[longest]) longest = c;
        }
        const vec3 a = p[longest], b = p[(longest + 1) % 3], c = p[(longest + 2) % 3], m = vec3_scale(vec3_add(a, b), 0.5);
        add_triangle(&cut, a, m, c);
        add_triangle(&cut, m, b, c);
    }
    return cut;
}

/* The halves' common edge is flat and carries no fringe currents: the identity holds for all mechanisms. */
START_TEST(cutting_facets_changes_nothing)
{
    const unsigned mechanisms = mechanism_sets[_i];
    uint64_t state = 14;
    soup s = awkward_target(), cut = cut_in_two(&s);
    const double peak_m = wave_number(freq_hz) / ROOT_PI * area_m2(&s);
    world w = world_of_soup(&s), v = world_of_soup(&cut);
    for (int i = 0; i < 2 * N_ASPECTS; i++) {
        double az, el;
        double complex at[RG_N_POL], there[RG_N_POL];
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, freq_hz, mechanisms, at);
        scatter(&v, az, el, freq_hz, mechanisms, there);
        for (int pol = 0; pol < RG_N_POL; pol++)
            ck_assert_msg(cabs(there[pol] - at[pol]) <= 1e-9 * peak_m, "%s cut, az %g el %g, pol %d: off by %g of the peak", set_name[_i], az, el, pol,
                          cabs(there[pol] - at[pol]) / peak_m);
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

START_TEST(order_of_facets_changes_nothing)
{
    const unsigned mechanisms = mechanism_sets[_i];
    uint64_t state = 15;
    soup s = awkward_target(), mixed = copy_of(&s);
    const double peak_m = wave_number(freq_hz) / ROOT_PI * area_m2(&s);
    for (size_t i = mixed.n - 1; i > 0; i--) {
        const size_t j = (size_t)random_between(&state, 0.0, (double)(i + 1));
        double keep[3][3];
        memcpy(keep, mixed.corner_m[i], sizeof keep);
        memcpy(mixed.corner_m[i], mixed.corner_m[j], sizeof keep);
        memcpy(mixed.corner_m[j], keep, sizeof keep);
    }
    world w = world_of_soup(&s), v = world_of_soup(&mixed);
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        double complex at[RG_N_POL], there[RG_N_POL];
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, freq_hz, mechanisms, at);
        scatter(&v, az, el, freq_hz, mechanisms, there);
        for (int pol = 0; pol < RG_N_POL; pol++)
            ck_assert_msg(cabs(there[pol] - at[pol]) <= 1e-12 * peak_m, "%s in another order, az %g el %g, pol %d: off by %g of the peak", set_name[_i], az, el, pol,
                          cabs(there[pol] - at[pol]) / peak_m);
    }
    free_world(&w);
    free_world(&v);
}
END_TEST

/* A flat sheet in x = 0, seen from (az, el) and from its mirror image behind, (180 - az, el): the same amplitude, since the phase at x = 0
 * is the same; HV changes its sign, and is nothing. */
START_TEST(a_sheet_has_two_like_sides)
{
    uint64_t state = 16;
    soup s = {0};
    add_triangle(&s, (vec3){0, -0.03, -0.02}, (vec3){0, 0.05, -0.01}, (vec3){0, 0.01, 0.06});
    world w = world_of_soup(&s);
    for (int i = 0; i < N_ASPECTS; i++) {
        const double az = random_between(&state, -85.0, 85.0), el = random_between(&state, -80.0, 80.0);
        double complex before[RG_N_POL], behind[RG_N_POL];
        for (int m = 0; m < N_SETS; m++) {
            scatter(&w, az, el, freq_hz, mechanism_sets[m], before);
            scatter(&w, 180.0 - az, el, freq_hz, mechanism_sets[m], behind);
            ck_assert_double_le(cabs(before[RG_HH] - behind[RG_HH]), 1e-10);
            ck_assert_double_le(cabs(before[RG_VV] - behind[RG_VV]), 1e-10);
            ck_assert_double_le(cabs(before[RG_HV] + behind[RG_HV]), 1e-10);
        }
    }
    free_world(&w);
}
END_TEST

START_TEST(a_cube_is_its_visible_faces)
{
    uint64_t state = 17;
    const double a = 0.07, k = wave_number(freq_hz);
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        random_aspect(&state, &az, &el);
        const vec3 s = toward(aspect_deg(az, el));
        const double x = s.x > 0 ? a : -a, y = s.y > 0 ? a : -a, z = s.z > 0 ? a : -a;
        soup cube = {0}, face[3] = {{0}};
        double complex at[RG_N_POL], sum = 0.0;
        add_box(&cube, (vec3){-a, -a, -a}, (vec3){a, a, a});
        add_quad(&face[0], (vec3){x, -a, -a}, (vec3){x, a, -a}, (vec3){x, a, a}, (vec3){x, -a, a});
        add_quad(&face[1], (vec3){-a, y, -a}, (vec3){a, y, -a}, (vec3){a, y, a}, (vec3){-a, y, a});
        add_quad(&face[2], (vec3){-a, -a, z}, (vec3){a, -a, z}, (vec3){a, a, z}, (vec3){-a, a, z});
        for (int f = 0; f < 3; f++) {
            world w = world_of_soup(&face[f]);
            scatter(&w, az, el, freq_hz, RG_SURFACE, at);
            sum += at[RG_HH];
            free_world(&w);
        }
        world w = world_of_soup(&cube);
        /* convex: nothing bounces, so surface and bounce together are the same three faces */
        for (int m = 0; m < 2; m++) {
            scatter(&w, az, el, freq_hz, m ? RG_SURFACE | RG_BOUNCE : RG_SURFACE, at);
            ck_assert_msg(cabs(at[RG_HH] - sum) <= 1e-9 * k / ROOT_PI * 12.0 * a * a, "az %g el %g: %g off", az, el, cabs(at[RG_HH] - sum));
        }
        free_world(&w);
    }
}
END_TEST

/* Area of the outline across s, m^2: the pixels of a grid whose middle any facet covers. */
static double outline_m2(const soup *s, vec3 to)
{
    enum { N = 320 };
    const double half_m = 0.16, pixel_m = 2.0 * half_m / N;
    static bool covered[N][N];
    const vec3 across = vec3_cross((vec3){0, 0, 1}, to), h = vec3_scale(across, 1.0 / vec3_norm(across)), v = vec3_cross(to, h);
    size_t n = 0;
    memset(covered, 0, sizeof covered);
    for (size_t f = 0; f < s->n; f++) {
        double x[3], y[3];
        for (int c = 0; c < 3; c++) {
            x[c] = vec3_dot(h, vec3_from(s->corner_m[f][c]));
            y[c] = vec3_dot(v, vec3_from(s->corner_m[f][c]));
        }
        const double area2 = (x[1] - x[0]) * (y[2] - y[0]) - (y[1] - y[0]) * (x[2] - x[0]);
        for (int i = 0; i < N; i++)
            for (int j = 0; j < N; j++) {
                const double px = (i + 0.5) * pixel_m - half_m, py = (j + 0.5) * pixel_m - half_m;
                bool in = true;
                for (int e = 0; e < 3; e++) {
                    const int to_e = (e + 1) % 3;
                    in = in && ((x[to_e] - x[e]) * (py - y[e]) - (y[to_e] - y[e]) * (px - x[e])) * area2 >= 0.0;
                }
                covered[i][j] |= in;
            }
    }
    for (int i = 0; i < N; i++)
        for (int j = 0; j < N; j++) n += covered[i][j];
    return (double)n * pixel_m * pixel_m;
}

/* Surface alone: |S| <= (k/sqrt(pi)) Int n.s dA over what is lit, which is the area of the outline: no level is over 4 pi A^2/lambda^2. Within
 * 2 %: pixels of 1 mm on an outline of some 0.02 m^2. At 0.1 GHz all is so nearly in phase that the bound is near.
 * No such bound holds with edges and bounces: the dihedral of corners.txt reaches it by bounces alone, and its edges add to that. */
START_TEST(no_level_over_that_of_the_outline)
{
    static const double low_hz[] = {1e8, 2e9, 77e9};
    uint64_t state = 18;
    double nearest = 0.0;
    soup s = awkward_target(), facets = copy_of(&s);
    world w = world_of_soup(&s);
    for (int i = 0; i < 60; i++) {
        double az, el;
        double complex at[RG_N_POL];
        const double f_hz = low_hz[i % 3];
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, f_hz, RG_SURFACE, at);
        const double bound_m = wave_number(f_hz) / ROOT_PI * outline_m2(&facets, toward(aspect_deg(az, el)));
        nearest = fmax(nearest, cabs(at[RG_HH]) / bound_m);
        ck_assert_msg(cabs(at[RG_HH]) <= 1.02 * bound_m, "az %g el %g, %g GHz: %.4f dBsm, bound %.4f", az, el, f_hz / 1e9, rg_dbsm(at[RG_HH]),
                      rg_dbsm(bound_m));
    }
    /* at 0.1 GHz all that is lit adds up: what is counted twice, or forgotten, would show */
    ck_assert_double_ge(nearest, 0.9);
    free(facets.corner_m);
    free_world(&w);
}
END_TEST

/* A plate behind a plate of the same size: the outline is one of them, and at normal incidence the bound is reached. */
START_TEST(the_bound_counts_what_is_lit_once)
{
    soup s = {0};
    double complex at[RG_N_POL];
    add_rectangle(&s, 0.0, -0.05, -0.05, 0.05, 0.05, 1);
    add_rectangle(&s, -0.25 * LIGHT_SPEED_M_PER_S / freq_hz * 4.0, -0.05, -0.05, 0.05, 0.05, 1);    /* a wavelength behind: in phase */
    world w = world_of_soup(&s);
    scatter(&w, 0.0, 0.0, freq_hz, RG_SURFACE, at);
    ck_assert_double_eq_tol(cabs(at[RG_HH]) / (wave_number(freq_hz) / ROOT_PI * 0.01), 1.0, 1e-12);
    free_world(&w);
}
END_TEST

START_TEST(what_is_received_may_be_sent)
{
    uint64_t state = 19;
    soup s = awkward_target();
    world w = world_of_soup(&s);
    for (int i = 0; i < N_ASPECTS; i++) {
        double az, el;
        double complex at[RG_N_POL];
        random_aspect(&state, &az, &el);
        scatter(&w, az, el, freq_hz, all, at);
        ck_assert(at[RG_HV] == at[RG_VH]);
    }
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("identities");
    TCase *tests = tcase_create("identities");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, moving_turns_the_phase, 0, 3 * N_SETS);
    tcase_add_test(tests, moving_very_far_costs_what_doubles_cost);
    tcase_add_loop_test(tests, moving_very_far_turns_the_phase, 0, N_SETS);
    tcase_add_loop_test(tests, turning_with_the_radar_changes_nothing, 0, N_SETS);
    tcase_add_loop_test(tests, turning_every_way_changes_nothing, 0, 3);
    tcase_add_loop_test(tests, cutting_facets_changes_nothing, 0, N_SETS);
    tcase_add_loop_test(tests, order_of_facets_changes_nothing, 0, N_SETS);
    tcase_add_test(tests, a_sheet_has_two_like_sides);
    tcase_add_test(tests, a_cube_is_its_visible_faces);
    tcase_add_test(tests, no_level_over_that_of_the_outline);
    tcase_add_test(tests, the_bound_counts_what_is_lit_once);
    tcase_add_test(tests, what_is_received_may_be_sent);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
