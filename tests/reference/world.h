/* world.h - a scene from facets laid down one by one, and what it sends back */
#ifndef RG_TESTS_WORLD_H
#define RG_TESTS_WORLD_H
#include "base/vec3.h"
#include "run.h"
#include <roadglint/shape.h>
#include <roadglint/sweep.h>
#include <string.h>
#include <time.h>

#define PI 3.14159265358979323846
#define ROOT_PI 1.77245385090551602730
#define LIGHT_SPEED_M_PER_S 299792458.0
#define RAD_PER_DEG (PI / 180.0)

/* Triangles that share no vertex: the mesh welds them. Start with {0}. */
typedef struct { size_t n, room; double (*corner_m)[3][3]; } soup;

typedef struct { rg_mesh *mesh; rg_scene *scene; } world;

static inline void add_triangle(soup *s, vec3 a, vec3 b, vec3 c)
{
    if (s->n == s->room) {
        s->room = s->room ? 2 * s->room : 64;
        s->corner_m = realloc(s->corner_m, s->room * sizeof *s->corner_m);
        ck_assert_ptr_nonnull(s->corner_m);
    }
    const double corner_m[3][3] = {{a.x, a.y, a.z}, {b.x, b.y, b.z}, {c.x, c.y, c.z}};
    memcpy(s->corner_m[s->n++], corner_m, sizeof corner_m);
}

static inline void add_quad(soup *s, vec3 a, vec3 b, vec3 c, vec3 d)
{
    add_triangle(s, a, b, c);
    add_triangle(s, a, c, d);
}

/* Rectangle in the plane x, facing +x, n x n cells of two triangles. */
static inline void add_rectangle(soup *s, double x, double y0, double z0, double y1, double z1, int n)
{
    for (int i = 0; i < n; i++)
        for (int j = 0; j < n; j++) {
            const double ya = y0 + (y1 - y0) * i / n, yb = y0 + (y1 - y0) * (i + 1) / n;
            const double za = z0 + (z1 - z0) * j / n, zb = z0 + (z1 - z0) * (j + 1) / n;
            add_quad(s, (vec3){x, ya, za}, (vec3){x, yb, za}, (vec3){x, yb, zb}, (vec3){x, ya, zb});
        }
}

/* Closed box. */
static inline void add_box(soup *s, vec3 low, vec3 high)
{
    const double x[2] = {low.x, high.x}, y[2] = {low.y, high.y}, z[2] = {low.z, high.z};
    vec3 p[8];
    for (int i = 0; i < 8; i++) p[i] = (vec3){x[i & 1], y[i >> 1 & 1], z[i >> 2]};
    static const int face[6][4] = {{1, 3, 7, 5}, {0, 4, 6, 2}, {2, 6, 7, 3}, {0, 1, 5, 4}, {4, 5, 7, 6}, {0, 2, 3, 1}};
    for (int f = 0; f < 6; f++) add_quad(s, p[face[f][0]], p[face[f][1]], p[face[f][2]], p[face[f][3]]);
}

/* A corner, a box and a tilted plate with a step before them: faces that light, hide and mirror each other. Invented. */
static inline soup awkward_target(void)
{
    soup s = {0};
    add_box(&s, (vec3){-0.05, -0.08, -0.06}, (vec3){0.02, 0.03, 0.05});
    add_box(&s, (vec3){0.05, -0.02, -0.01}, (vec3){0.06, 0.015, 0.02});
    add_quad(&s, (vec3){0, 0.05, -0.05}, (vec3){0.03, 0.11, -0.04}, (vec3){0.04, 0.1, 0.05}, (vec3){0.01, 0.04, 0.04});
    add_triangle(&s, (vec3){0, 0, 0.09}, (vec3){0.07, 0.02, 0.08}, (vec3){0.01, 0.06, 0.12});
    return s;
}

static inline world world_of_mesh(rg_mesh *mesh)
{
    world w = {.mesh = mesh};
    ck_assert_int_eq(rg_scene_new(&w.scene, mesh, NULL), RG_OK);
    return w;
}

/* Takes the soup, which is empty afterwards. part[n] is below n_parts <= 4, whose names are a, b, c, d; NULL: one part. */
static inline world world_of_parts(soup *s, const uint32_t part[], size_t n_parts)
{
    static const char *const name[] = {"a", "b", "c", "d"};
    rg_mesh *mesh = NULL;
    rg_error err = {{0}};
    uint32_t(*facet)[3] = malloc(s->n * sizeof *facet);
    ck_assert_ptr_nonnull(facet);
    for (size_t i = 0; i < s->n; i++)
        for (size_t c = 0; c < 3; c++) facet[i][c] = (uint32_t)(3 * i + c);
    ck_assert_msg(rg_mesh_from_arrays(&mesh, 3 * s->n, (const double(*)[3])s->corner_m, s->n, (const uint32_t(*)[3])facet, part, n_parts,
                                      n_parts ? name : NULL, &err) == RG_OK, "%s", err.text);
    free(facet);
    free(s->corner_m);
    *s = (soup){0};
    return world_of_mesh(mesh);
}

static inline world world_of_soup(soup *s) { return world_of_parts(s, NULL, 0); }

static inline world world_of_shape(rg_shape shape)
{
    rg_mesh *mesh = NULL;
    rg_error err = {{0}};
    ck_assert_msg(rg_shape_mesh(&mesh, &shape, &err) == RG_OK, "%s", err.text);
    return world_of_mesh(mesh);
}

static inline void free_world(world *w)
{
    rg_scene_free(w->scene);
    rg_mesh_free(w->mesh);
    *w = (world){0};
}

static inline double wave_number(double freq_hz) { return 2.0 * PI * freq_hz / LIGHT_SPEED_M_PER_S; }

static inline vec3 toward(rg_aspect a)
{
    return (vec3){cos(a.el_rad) * cos(a.az_rad), cos(a.el_rad) * sin(a.az_rad), sin(a.el_rad)};
}

static inline rg_aspect aspect_deg(double az_deg, double el_deg) { return (rg_aspect){az_deg * RAD_PER_DEG, el_deg * RAD_PER_DEG}; }

/* The aspect of a direction; loses nothing near (1, 0, 0). */
static inline rg_aspect aspect_of(vec3 s) { return (rg_aspect){atan2(s.y, s.x), atan2(s.z, hypot(s.x, s.y))}; }

static inline double complex surface(const world *w, rg_aspect aspect, double freq_hz)
{
    double complex s_m[1][RG_N_POL];
    ck_assert_int_eq(rg_surface(w->scene, aspect, 1, &freq_hz, s_m, NULL), RG_OK);
    ck_assert(s_m[0][RG_HH] == s_m[0][RG_VV] && cabs(s_m[0][RG_HV]) == 0.0);
    return s_m[0][RG_HH];
}

static inline rg_status keep_one(void *user, const rg_sweep_aspect *aspect, rg_error *err)
{
    (void)err;
    memcpy(user, aspect->s_m[0], sizeof aspect->s_m[0]);
    return RG_OK;
}

/* All polarisations of one aspect by given mechanisms. */
static inline void scatter(const world *w, double az_deg, double el_deg, double freq_hz, unsigned mechanisms, double complex s_m[RG_N_POL])
{
    const rg_sweep_plan plan = {.n_el = 1, .n_az = 1, .n_freq = 1, .el_deg = &el_deg, .az_deg = &az_deg, .freq_hz = &freq_hz, .mechanisms = mechanisms};
    ck_assert_int_eq(rg_sweep(w->scene, &plan, keep_one, s_m, NULL, NULL), RG_OK);
}

/* splitmix64: the same numbers everywhere. */
static inline double random_between(uint64_t *state, double low, double high)
{
    uint64_t z = *state += 0x9e3779b97f4a7c15u;
    z = (z ^ z >> 30) * 0xbf58476d1ce4e5b9u;
    z = (z ^ z >> 27) * 0x94d049bb133111ebu;
    return low + (high - low) * (double)((z ^ z >> 31) >> 11) * 0x1p-53;
}

static inline void random_aspect(uint64_t *state, double *az_deg, double *el_deg)
{
    *az_deg = random_between(state, -180.0, 180.0);
    *el_deg = random_between(state, -80.0, 80.0);
}

static inline double seconds(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

#endif
