/* bvh_scenes.h - facets for the tests of the search tree, and answers by long doubles and patience */
#ifndef RG_TESTS_BVH_SCENES_H
#define RG_TESTS_BVH_SCENES_H
#include "base/vec3.h"
#include "bvh/bvh.h"
#include "run.h"
#include <float.h>
#include <stdbool.h>
#include <string.h>

typedef struct { size_t n_vertices, n_facets; double (*vertex_m)[3]; uint32_t (*facet)[3]; } soup;

static inline soup soup_new(size_t n_vertices, size_t n_facets)
{
    soup s = {n_vertices, n_facets, NULL, NULL};
    s.vertex_m = calloc(n_vertices + 1, sizeof *s.vertex_m);
    s.facet = calloc(n_facets + 1, sizeof *s.facet);
    return s;
}

static inline void soup_free(soup *s)
{
    free(s->vertex_m);
    free(s->facet);
}

static inline double between(double low, double high) { return low + (high - low) * drand48(); }

/* Triangles that share nothing; one in four is a sliver; all moved by offset_m. */
static inline soup random_soup(size_t n, double size_m, double offset_m)
{
    soup s = soup_new(3 * n, n);
    for (size_t i = 0; i < n; i++) {
        double at[3], along[3];
        for (int axis = 0; axis < 3; axis++) at[axis] = between(-1.0, 1.0), along[axis] = between(-size_m, size_m);
        for (size_t c = 0; c < 3; c++) {
            const double stretch = i % 4 == 0 ? between(-1.0, 1.0) : 0.0, width = i % 4 == 0 ? 1e-5 : 1.0;
            for (int axis = 0; axis < 3; axis++)
                s.vertex_m[3 * i + c][axis] = offset_m + at[axis] + stretch * along[axis] + width * between(-size_m, size_m);
            s.facet[i][c] = (uint32_t)(3 * i + c);
        }
    }
    return s;
}

/* A closed surface of 2 n (n - 1) facets about the origin, radius 1, with bumps of height bump. n even. */
static inline soup bumpy_sphere(uint32_t n, double bump)
{
    soup s = soup_new(2 + (size_t)n * (n - 1), 2 * (size_t)n * (n - 1));
    const double pi = 3.14159265358979323846;
    size_t at = 0;
    s.vertex_m[at++][2] = 1.0;
    for (uint32_t i = 1; i < n; i++)
        for (uint32_t j = 0; j < n; j++) {
            const double polar = pi * i / n, az = 2.0 * pi * j / n;
            const double r = 1.0 + bump * sin(7.0 * polar) * sin(11.0 * az) * sin(polar);
            s.vertex_m[at][0] = r * sin(polar) * cos(az);
            s.vertex_m[at][1] = r * sin(polar) * sin(az);
            s.vertex_m[at++][2] = r * cos(polar);
        }
    s.vertex_m[at++][2] = -1.0;
    const uint32_t last = (uint32_t)at - 1;
    size_t f = 0;
    for (uint32_t j = 0; j < n; j++) {
        const uint32_t k = (j + 1) % n;
        memcpy(s.facet[f++], (uint32_t[3]){0, 1 + j, 1 + k}, 12);
        for (uint32_t i = 0; i + 2 < n; i++) {
            const uint32_t a = 1 + i * n + j, b = 1 + i * n + k, c = a + n, d = b + n;
            memcpy(s.facet[f++], (uint32_t[3]){a, c, d}, 12);
            memcpy(s.facet[f++], (uint32_t[3]){a, d, b}, 12);
        }
        memcpy(s.facet[f++], (uint32_t[3]){last, last - n + k, last - n + j}, 12);
    }
    s.n_facets = f;
    return s;
}

/* A square of n x n cells in the plane z = 0 and one in x = 0, whole numbers everywhere. */
static inline soup grid(uint32_t n)
{
    soup s = soup_new(2 * (size_t)(n + 1) * (n + 1), 4 * (size_t)n * n);
    size_t f = 0;
    for (uint32_t k = 0; k < 2; k++)
        for (uint32_t i = 0; i <= n; i++)
            for (uint32_t j = 0; j <= n; j++) {
                const uint32_t a = k * (n + 1) * (n + 1) + i * (n + 1) + j;
                s.vertex_m[a][k ? 2 : 0] = i;
                s.vertex_m[a][1] = j;
                if (i == n || j == n) continue;
                memcpy(s.facet[f++], (uint32_t[3]){a, a + n + 1, a + n + 2}, 12);
                memcpy(s.facet[f++], (uint32_t[3]){a, a + n + 2, a + 1}, 12);
            }
    return s;
}

static inline rg_bvh *tree_of(const soup *s, rg_cpu cpu)
{
    rg_bvh *bvh = NULL;
    rg_error err = {0};
    ck_assert_msg(rg_bvh_build(&bvh, s->n_vertices, (const double (*)[3])s->vertex_m, s->n_facets, (const uint32_t (*)[3])s->facet, cpu,
                               &err) == RG_OK, "%s", err.text);
    ck_assert_msg(rg_bvh_check(bvh, &err) == RG_OK, "%s", err.text);
    return bvh;
}

static inline rg_ray ray_to(const double from[3], const double to[3])
{
    const vec3 d = vec3_sub(vec3_from(to), vec3_from(from));
    const double length = vec3_norm(d);
    return (rg_ray){{from[0], from[1], from[2]}, {d.x / length, d.y / length, d.z / length}, INFINITY, RG_NO_HIT};
}

typedef struct { long double t_m, margin; } exact_hit;

/* By the three volumes that the ray spans with the edges. margin: how far inside the ray passes the nearest edge line (negative:
 * outside), times sin of the angle at which it meets the facet's plane, which is what rounding can be held against. */
static inline exact_hit meet_exactly(const soup *s, const rg_ray *ray, size_t facet)
{
    long double r[3][3], n[3], volume[3], sum = 0.0L, height = 0.0L, far = 0.0L;
    const double *d = ray->direction;
    for (int c = 0; c < 3; c++)
        for (int axis = 0; axis < 3; axis++) r[c][axis] = (long double)s->vertex_m[s->facet[facet][c]][axis] - ray->origin_m[axis];
    exact_hit hit = {0.0L, INFINITY};
    for (int e = 0; e < 3; e++) {
        const long double *a = r[(e + 1) % 3], *b = r[(e + 2) % 3];
        volume[e] = d[0] * (a[1] * b[2] - a[2] * b[1]) + d[1] * (a[2] * b[0] - a[0] * b[2]) + d[2] * (a[0] * b[1] - a[1] * b[0]);
        sum += volume[e];
    }
    for (int e = 0; e < 3; e++) {
        const long double *a = r[(e + 1) % 3], *b = r[(e + 2) % 3];
        long double edge = 0.0L;
        for (int axis = 0; axis < 3; axis++) edge += (b[axis] - a[axis]) * (b[axis] - a[axis]);
        const long double inside = (sum < 0.0L ? -volume[e] : volume[e]) / sqrtl(edge);
        hit.margin = inside < hit.margin ? inside : hit.margin;
    }
    for (int i = 0; i < 3; i++) {
        const int j = (i + 1) % 3, k = (i + 2) % 3;
        n[i] = (r[1][j] - r[0][j]) * (r[2][k] - r[0][k]) - (r[1][k] - r[0][k]) * (r[2][j] - r[0][j]);
        height += n[i] * r[0][i];
        far += n[i] * d[i];
    }
    hit.t_m = height / far;
    return hit;
}

#endif
