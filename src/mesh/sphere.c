/* sphere.c - a sphere as a subdivided icosahedron: no poles, and facets of nearly one size
 *
 * Each face of the icosahedron is cut into n^2 equal triangles, whose corners are moved along their radii onto one sphere. That sphere
 * is a little larger than the true one: so much that the polyhedron has the true sphere's volume. The surface lies then as much inside
 * of the true one as outside, and the phase of what it scatters is right in the mean; with h the largest sagitta it runs from about h/4
 * inside (the facets' middles) to 3h/4 outside (the corners).
 */
#include "base/elementary.h"
#include "base/sum.h"
#include "mesh/patch.h"
#include "mesh/shapes.h"
#include <string.h>

/* Facets are largest in a face's middle, where the radial move stretches all lengths by one over the inradius: with the edge 1.05146
 * and the inradius 0.79465 of the icosahedron in the unit sphere, edges are 1.3232/n, and a facet's sagitta is 0.29179/n^2. */
#define EDGE_N 1.3231691
#define SAGITTA_N2 0.2917961
#define N_FACES 20
#define N_LARGE 30000.0     /* more cuts than any sphere may have */

static vec3 unit(vec3 a) { return vec3_scale(a, 1.0 / vec3_norm(a)); }

/* The 12 cyclic arrangements of (0, +-1, +-golden), whose nearest neighbours are 2 apart. */
static void icosahedron(vec3 face[N_FACES][3])
{
    const double golden = 0.5 * (1.0 + sqrt(5.0));
    vec3 v[12];
    int n = 0;
    for (int i = 0; i < 4; i++) {
        const double a = i & 1 ? 1.0 : -1.0, b = i & 2 ? golden : -golden;
        v[3 * i] = (vec3){0.0, a, b}, v[3 * i + 1] = (vec3){b, 0.0, a}, v[3 * i + 2] = (vec3){a, b, 0.0};
    }
    for (int i = 0; i < 12; i++)
        for (int j = i + 1; j < 12; j++)
            for (int k = j + 1; k < 12; k++) {
                const vec3 ij = vec3_sub(v[j], v[i]), ik = vec3_sub(v[k], v[i]), jk = vec3_sub(v[k], v[j]);
                if (vec3_dot(ij, ij) > 5.0 || vec3_dot(ik, ik) > 5.0 || vec3_dot(jk, jk) > 5.0) continue;
                const bool outward = vec3_dot(vec3_cross(ij, ik), v[i]) > 0.0;
                face[n][0] = v[i], face[n][1] = outward ? v[j] : v[k], face[n][2] = outward ? v[k] : v[j];
                n++;
            }
}

typedef struct { vec3 corner[3]; double radius_m; } face_of;

static vec3 point_of_face(const void *of, double u, double v)
{
    const face_of *f = of;
    const vec3 flat = vec3_add(vec3_scale(f->corner[0], (1.0 - u) - v),
                               vec3_add(vec3_scale(f->corner[1], u), vec3_scale(f->corner[2], v)));
    return vec3_scale(unit(flat), f->radius_m);
}

/* With n cuts and radius 1: the scale that makes the volume right, the largest sagitta and the longest edge. */
typedef struct { double scale, sagitta, edge; rg_sum six_volumes; } fineness;

static void measure_facet(fineness *fine, vec3 a, vec3 b, vec3 c)
{
    const vec3 ab = vec3_sub(b, a), bc = vec3_sub(c, b), ca = vec3_sub(a, c), normal = vec3_cross(ab, bc);
    const double six_volumes = vec3_dot(a, normal);
    fine->sagitta = fmax(fine->sagitta, 1.0 - six_volumes / vec3_norm(normal));
    fine->edge = fmax(fine->edge, sqrt(fmax(vec3_dot(ab, ab), fmax(vec3_dot(bc, bc), vec3_dot(ca, ca)))));
    rg_sum_add(&fine->six_volumes, six_volumes);
}

static fineness measure(size_t n)
{
    vec3 face[N_FACES][3];
    fineness fine = {0};
    icosahedron(face);
    const face_of f = {{face[0][0], face[0][1], face[0][2]}, 1.0};
    const double d = (double)n;
    for (size_t i = 0; i < n; i++)
        for (size_t j = 0; j < n - i; j++) {
            const double u = (double)i, v = (double)j;
            const vec3 b = point_of_face(&f, (u + 1.0) / d, v / d), c = point_of_face(&f, u / d, (v + 1.0) / d);
            measure_facet(&fine, point_of_face(&f, u / d, v / d), b, c);
            if (i + j + 1 < n) measure_facet(&fine, c, b, point_of_face(&f, (u + 1.0) / d, (v + 1.0) / d));
        }
    /* Newton's steps to the cube root; the start is above it, and convergence is quadratic. */
    const double cube = 8.0 * RG_SIN_PI_0 / (N_FACES * rg_sum_value(&fine.six_volumes));
    fine.scale = cube;
    for (int i = 0; i < 12; i++) fine.scale -= (fine.scale - cube / (fine.scale * fine.scale)) / 3.0;
    fine.sagitta *= fine.scale;
    fine.edge *= fine.scale;
    return fine;
}

static double fewest_cuts(const rg_shape *shape)
{
    const double r = shape->size_m[0];
    double n = 2.0;
    if (shape->sagitta_m > 0.0) n = fmax(n, floor(sqrt(SAGITTA_N2 * r / shape->sagitta_m)));
    if (shape->edge_m > 0.0) n = fmax(n, floor(EDGE_N * r / shape->edge_m));
    return n;
}

double rg_sphere_count(const rg_shape *shape)
{
    const double n = fewest_cuts(shape) + 1.0;      /* one more is nearly always needed */
    return N_FACES * n * n;
}

rg_status rg_sphere_build(rg_soup *soup, const rg_shape *shape, rg_error *err)
{
    const double r = shape->size_m[0], start = fmin(fewest_cuts(shape), N_LARGE);
    size_t n = start > 4.0 ? (size_t)start - 1 : 2;
    fineness fine = measure(n);
    while ((shape->sagitta_m > 0.0 && fine.sagitta * r > shape->sagitta_m) || (shape->edge_m > 0.0 && fine.edge * r > shape->edge_m))
        fine = measure(++n);
    vec3 face[N_FACES][3];
    uint32_t part;
    icosahedron(face);
    rg_status status = rg_soup_part(soup, &part, "sphere", strlen("sphere"), err);
    if (!status) status = rg_soup_reserve(soup, N_FACES * (n + 1) * (n + 2) / 2, N_FACES * n * n, err);
    for (int i = 0; i < N_FACES && !status; i++) {
        const face_of f = {{face[i][0], face[i][1], face[i][2]}, r * fine.scale};
        status = rg_patch_triangle(soup, part, n, point_of_face, &f, err);
    }
    return status;
}
