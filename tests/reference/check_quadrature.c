/* check_quadrature.c - facets against numerical integration that shares nothing with the closed form, also where that degenerates
 *
 * Gauss-Legendre over the triangle in collapsed coordinates, with the C library's sines. 1e-9 of the peak is what quadrature itself keeps
 * with ease (its rounding: 2^-52 times a phase of some 1000 rad); 0.02 dB is checked down to 60 dB under the peak. */
#include "world.h"
#include <gsl/gsl_integration.h>

enum { MAX_CORNERS = 12 };

typedef struct { int n; vec3 corner[MAX_CORNERS]; } convex;

static vec3 blend(vec3 a, vec3 b, double t) { return vec3_add(vec3_scale(a, 1.0 - t), vec3_scale(b, t)); }

/* Int exp(2jk s.r) dA over a triangle. Gauss-Legendre of n points holds for phases up to about n (2n wide). */
static double complex integrate_triangle(vec3 a, vec3 b, vec3 c, vec3 s, double k)
{
    const vec3 ab = vec3_sub(b, a), ac = vec3_sub(c, a), bc = vec3_sub(c, b);
    const double wide = 2.0 * k * fmax(fabs(vec3_dot(ab, s)), fmax(fabs(vec3_dot(ac, s)), fabs(vec3_dot(bc, s))));
    const size_t n = (size_t)(0.5 * wide) + 32;
    gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc(n);
    double complex sum = 0.0;
    ck_assert_ptr_nonnull(table);
    for (size_t i = 0; i < n; i++) {
        double u, wu;
        double complex row = 0.0;
        gsl_integration_glfixed_point(0.0, 1.0, i, &u, &wu, table);
        for (size_t j = 0; j < n; j++) {
            double v, wv;
            gsl_integration_glfixed_point(0.0, 1.0, j, &v, &wv, table);
            const double phase = 2.0 * k * vec3_dot(s, vec3_add(a, vec3_scale(blend(ab, ac, v), u)));
            row += wv * CMPLX(cos(phase), sin(phase));
        }
        sum += wu * u * row;
    }
    gsl_integration_glfixed_table_free(table);
    return sum * vec3_norm(vec3_cross(ab, ac));
}

static vec3 area_vector(const convex *p)
{
    vec3 area = {0};
    for (int i = 1; i + 1 < p->n; i++)
        area = vec3_add(area, vec3_scale(vec3_cross(vec3_sub(p->corner[i], p->corner[0]), vec3_sub(p->corner[i + 1], p->corner[0])), 0.5));
    return area;
}

static vec3 middle(const convex *p)
{
    vec3 sum = {0};
    for (int i = 0; i < p->n; i++) sum = vec3_add(sum, p->corner[i]);
    return vec3_scale(sum, 1.0 / p->n);
}

/* -(jk/sqrt(pi)) (n.s) I by quadrature, docs/physics.md (2.1); cut from the middle, unlike the mesh. */
static double complex amplitude_by_quadrature(const convex *p, vec3 s, double k)
{
    const vec3 area = area_vector(p), m = middle(p);
    double complex integral = 0.0;
    for (int i = 0; i < p->n; i++) integral += integrate_triangle(m, p->corner[i], p->corner[(i + 1) % p->n], s, k);
    return -I * k / ROOT_PI * fabs(vec3_dot(area, s)) / vec3_norm(area) * integral;
}

static world world_of_convex(const convex *p)
{
    soup s = {0};
    for (int i = 1; i + 1 < p->n; i++) add_triangle(&s, p->corner[0], p->corner[i], p->corner[i + 1]);
    return world_of_soup(&s);
}

static vec3 unit(vec3 v) { return vec3_scale(v, 1.0 / vec3_norm(v)); }

static vec3 random_unit(uint64_t *state)
{
    const double z = random_between(state, -1.0, 1.0), a = random_between(state, -PI, PI), r = sqrt(1.0 - z * z);
    return (vec3){r * cos(a), r * sin(a), z};
}

/* A convex polygon on an ellipse, somewhere within 0.2 m of the origin, in any plane. The corners stay apart enough for the mesh to keep
 * them; the ellipse may be as flat as 1:200. */
static convex random_convex(uint64_t *state, int n)
{
    const vec3 normal = random_unit(state), u = unit(vec3_cross(normal, random_unit(state))), v = vec3_cross(normal, u);
    const vec3 at = {random_between(state, -0.2, 0.2), random_between(state, -0.2, 0.2), random_between(state, -0.2, 0.2)};
    const double size_m = pow(10.0, random_between(state, -3.3, -1.2)), flat = pow(10.0, random_between(state, -2.3, 0.0));
    convex p = {.n = n};
    for (int i = 0; i < n; i++) {
        const double t = 2.0 * PI * (i + random_between(state, 0.05, 0.95)) / n;
        p.corner[i] = vec3_add(at, vec3_add(vec3_scale(u, size_m * cos(t)), vec3_scale(v, size_m * flat * sin(t))));
    }
    return p;
}

static void compare(const world *w, const convex *p, vec3 direction, double freq_hz, const char *what, double step)
{
    const rg_aspect aspect = aspect_of(direction);
    const double k = wave_number(freq_hz), peak_m = k / ROOT_PI * vec3_norm(area_vector(p));
    const double complex want = amplitude_by_quadrature(p, toward(aspect), k), got = surface(w, aspect, freq_hz);
    ck_assert_msg(cabs(got - want) <= 1e-9 * peak_m, "%s, %d corners, step %g, %g GHz: off by %g of the peak", what, p->n, step, freq_hz / 1e9,
                  cabs(got - want) / peak_m);
    if (cabs(want) > 1e-3 * peak_m)
        ck_assert_msg(fabs(20.0 * log10(cabs(got) / cabs(want))) <= 0.02, "%s, %d corners, step %g: %.4f dBsm, want %.4f", what, p->n, step,
                      rg_dbsm(got), rg_dbsm(want));
}

START_TEST(random_facets_at_random_aspects)
{
    uint64_t state = 1000 + (uint64_t)_i;
    for (int i = 0; i < 60; i++) {
        const convex p = random_convex(&state, _i + 3);
        world w = world_of_convex(&p);
        for (int a = 0; a < 4; a++) compare(&w, &p, random_unit(&state), random_between(&state, 10e9, 80e9), "random", 0.0);
        free_world(&w);
    }
}
END_TEST

START_TEST(large_plates)
{
    const convex p = {.n = 4, .corner = {{0, -0.5, -0.3}, {0.1, 0.5, -0.3}, {0.1, 0.5, 0.3}, {0, -0.5, 0.3}}};
    uint64_t state = 7;
    world w = world_of_convex(&p);
    for (int i = 0; i < 4; i++) {
        const vec3 s = unit(vec3_add((vec3){1, -0.1, 0}, vec3_scale(random_unit(&state), pow(10.0, -i))));
        compare(&w, &p, s, 80e9, "1 m plate", 0.0);
    }
    free_world(&w);
}
END_TEST

/* From the degenerate direction on, along a tangent, by 1e-12 .. 1e-2 rad both ways. */
static void walk(const world *w, const convex *p, vec3 from, vec3 along, double freq_hz, const char *what)
{
    compare(w, p, from, freq_hz, what, 0.0);
    for (int i = -36; i <= -6; i++)
        for (int sign = -1; sign <= 1; sign += 2) {
            const double step = sign * pow(10.0, i / 3.0);
            compare(w, p, unit(vec3_add(from, vec3_scale(along, step))), freq_hz, what, step);
        }
}

/* s at right angles to an edge: the phase is constant along it, and the closed form would divide by nothing. */
START_TEST(through_aspects_at_right_angles_to_an_edge)
{
    uint64_t state = 2000 + (uint64_t)_i;
    for (int i = 0; i < 4; i++) {
        const convex p = random_convex(&state, _i + 3);
        const int e = (int)random_between(&state, 0.0, p.n);
        const vec3 edge = unit(vec3_sub(p.corner[(e + 1) % p.n], p.corner[e])), normal = unit(area_vector(&p)), across = vec3_cross(normal, edge);
        const double tilt = random_between(&state, -1.4, 1.4);
        world w = world_of_convex(&p);
        walk(&w, &p, vec3_add(vec3_scale(normal, cos(tilt)), vec3_scale(across, sin(tilt))), edge, random_between(&state, 10e9, 80e9), "edge");
        free_world(&w);
    }
}
END_TEST

/* s along the normal: the phase is constant over the facet. */
START_TEST(through_the_normal)
{
    uint64_t state = 3000 + (uint64_t)_i;
    for (int i = 0; i < 4; i++) {
        const convex p = random_convex(&state, _i + 3);
        const vec3 normal = unit(area_vector(&p)), along = unit(vec3_cross(normal, random_unit(&state)));
        world w = world_of_convex(&p);
        walk(&w, &p, vec3_scale(normal, i % 2 ? -1.0 : 1.0), along, random_between(&state, 10e9, 80e9), "normal");
        free_world(&w);
    }
}
END_TEST

/* Two edges at once: an isosceles triangle seen in its plane of symmetry has two corners of one phase, and the third meets them as the
 * aspect goes to the normal. */
START_TEST(through_both_at_once)
{
    const convex p = {.n = 3, .corner = {{0, -0.02, 0}, {0, 0.02, 0}, {0, 0, 0.03}}};
    world w = world_of_convex(&p);
    for (int i = -36; i <= -6; i++)
        for (int j = -36; j <= -6; j += 5) {
            const double up = pow(10.0, i / 3.0), aside = pow(10.0, j / 3.0);
            compare(&w, &p, unit((vec3){1.0, aside, up}), 77e9, "both", up);
        }
    free_world(&w);
}
END_TEST

/* Phases that are the same to the last bit: edges along the axes, and aspects in which a component of s is a zero. */
START_TEST(through_aspects_that_degenerate_to_the_bit)
{
    static const convex polygon[] = {
        {.n = 3, .corner = {{0, 0, 0}, {0, 0.05, 0}, {0, 0, 0.04}}},
        {.n = 3, .corner = {{0.11, -0.07, 0.02}, {0.11, -0.02, 0.02}, {0.11, -0.03, 0.05}}},
        {.n = 4, .corner = {{-0.2, -0.01, -0.03}, {-0.2, 0.03, -0.03}, {-0.2, 0.03, 0.01}, {-0.2, -0.01, 0.01}}},
        {.n = 6, .corner = {{0, -0.02, -0.03}, {0, 0.02, -0.03}, {0, 0.04, 0}, {0, 0.02, 0.03}, {0, -0.02, 0.03}, {0, -0.04, 0}}},
    };
    static const vec3 y_axis = {0, 1, 0}, z_axis = {0, 0, 1};
    const convex *p = &polygon[_i];
    world w = world_of_convex(p);
    for (int i = 0; i <= 4; i++) {
        const double tilt = 0.35 * i, c = i ? cos(tilt) : 1.0, s = i ? sin(tilt) : 0.0;
        const vec3 upright = {c, 0, s}, level = {c, s, 0};
        ck_assert(toward(aspect_of(upright)).y == 0.0 && toward(aspect_of(level)).z == 0.0);
        walk(&w, p, upright, y_axis, 77e9, "along y");
        walk(&w, p, level, z_axis, 77e9, "along z");
    }
    /* edge-on, to the bit: nothing is turned toward the radar */
    compare(&w, p, y_axis, 77e9, "edge-on", 0.0);
    free_world(&w);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("quadrature");
    TCase *tests = tcase_create("quadrature");
    tcase_set_timeout(tests, 120);
    tcase_add_loop_test(tests, random_facets_at_random_aspects, 0, 8);
    tcase_add_test(tests, large_plates);
    tcase_add_loop_test(tests, through_aspects_at_right_angles_to_an_edge, 0, 5);
    tcase_add_loop_test(tests, through_the_normal, 0, 5);
    tcase_add_test(tests, through_both_at_once);
    tcase_add_loop_test(tests, through_aspects_that_degenerate_to_the_bit, 0, 4);
    suite_add_tcase(suite, tests);
    return run_suite(suite);
}
