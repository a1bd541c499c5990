/* mesh_view.c - a mesh as it looks from one direction */
#include "plot/mesh_view.h"
#include "bvh/bvh.h"
#include <stdlib.h>
#include <string.h>

enum { SUB = 3, STRIP = 8, N_COLOURS = 20, N_SHADES = 2 };    /* rays a pixel's side; pixel rows a thread takes at once */
enum { HATCH = 6 };                             /* pixels from stripe to stripe on back sides */

#define AMBIENT 0.30            /* of the light that a facet edge-on still shows */
#define OUTLINE 0.10            /* what is left of the light at the border of a part */
#define CREASE 0.45             /* and at a sharp edge within one */
#define COS_CREASE 0.90         /* of 26 degrees */
#define STEP_PX 2.5             /* a jump in depth of so many pixels is an outline */

/* Found by search: each the farthest from all before it in CIE Lab, as seen by full and by the three kinds of partial colour vision;
 * next to each other they differ by 12 or more in lightness. */
static const unsigned char colour[N_COLOURS][3] = {
    {180, 153, 56}, {39, 231, 248}, {66, 96, 172}, {216, 84, 118}, {187, 232, 172}, {106, 105, 43}, {124, 165, 242},
    {245, 221, 101}, {152, 154, 182}, {249, 177, 115}, {152, 72, 124}, {137, 227, 215}, {197, 120, 91}, {69, 189, 228},
    {89, 121, 104}, {199, 182, 136}, {79, 128, 226}, {168, 65, 74}, {142, 189, 162}, {155, 99, 161}};

typedef struct { float t_m; uint32_t facet; } seen;     /* t_m tells outlines from slopes only */

typedef struct {
    const rg_mesh *mesh;
    const rg_mesh_view *view;
    const rg_bvh *bvh;
    float linear[N_SHADES * N_COLOURS][3], ground[3];
} painter;

typedef struct {
    rg_ray *ray;            /* [n] of a row of rays */
    rg_hit *hit;
    seen *grid;             /* [SUB * STRIP + 2][n + 2]: one more on every side, to compare with */
    uint64_t *shown;        /* [n_parts], rays */
} brush;

static float to_linear(unsigned c)
{
    const double x = c / 255.0;
    return (float)(x <= 0.04045 ? x / 12.92 : pow((x + 0.055) / 1.055, 2.4));   /* IEC 61966-2-1 */
}

static uint32_t to_byte(double x)
{
    const double y = x <= 0.0031308 ? 12.92 * x : 1.055 * pow(x, 1.0 / 2.4) - 0.055;
    return (uint32_t)(255.0 * fmin(fmax(y, 0.0), 1.0) + 0.5);
}

uint32_t rg_part_colour(size_t part)
{
    const unsigned char *c = colour[part % N_COLOURS];
    const uint32_t tenths = part / N_COLOURS % N_SHADES ? 6 : 10;       /* the second twenty: the same, darker */
    return c[0] * tenths / 10 << 16 | c[1] * tenths / 10 << 8 | c[2] * tenths / 10;
}

rg_mesh_view rg_mesh_view_from(const rg_mesh *mesh, double az_rad, double el_rad, int width, int min_height, int max_height)
{
    const double ca = cos(az_rad), sa = sin(az_rad), ce = cos(el_rad), se = sin(el_rad);
    rg_mesh_view view = {.toward = {ce * ca, ce * sa, se}, .right = {-sa, ca, 0.0}, .up = {-se * ca, -se * sa, ce}, .width = width};
    double low[2] = {INFINITY, INFINITY}, high[2] = {-INFINITY, -INFINITY}, far_m = INFINITY;
    view.near_m = -INFINITY;
    for (size_t v = 0; v < mesh->n_vertices; v++) {
        const vec3 r = vec3_from(mesh->vertex_m[v]);
        const double at[2] = {vec3_dot(view.right, r), vec3_dot(view.up, r)}, depth_m = vec3_dot(view.toward, r);
        for (int i = 0; i < 2; i++) low[i] = fmin(low[i], at[i]), high[i] = fmax(high[i], at[i]);
        view.near_m = fmax(view.near_m, depth_m);
        far_m = fmin(far_m, depth_m);
    }
    const double wide_m = high[0] - low[0], tall_m = high[1] - low[1], deep_m = view.near_m - far_m;
    view.px_m = fmax(wide_m / width, tall_m / max_height);
    if (!(view.px_m > 1e-9 * deep_m)) view.px_m = deep_m / width;       /* a line seen from its end */
    view.height = (int)fmin(fmax(ceil(tall_m / view.px_m), min_height), max_height);
    for (int i = 0; i < 2; i++) view.middle_m[i] = 0.5 * (low[i] + high[i]);
    view.near_m += 0.01 * fmax(deep_m, fmax(wide_m, tall_m));
    return view;
}

static vec3 normal_of(const rg_mesh *mesh, uint32_t f)
{
    const uint32_t *c = mesh->facet[f];
    const vec3 a = vec3_from(mesh->vertex_m[c[0]]);
    const vec3 n = vec3_cross(vec3_sub(vec3_from(mesh->vertex_m[c[1]]), a), vec3_sub(vec3_from(mesh->vertex_m[c[2]]), a));
    const double length = vec3_norm(n);
    return length > 0.0 ? vec3_scale(n, 1.0 / length) : n;
}

/* One row of rays, sub-row y from the top, to row[n + 2]. */
static void look_along(const painter *p, brush *b, int y, seen row[])
{
    const rg_mesh_view *v = p->view;
    const size_t n = (size_t)v->width * SUB;
    const double up_m = v->middle_m[1] + (0.5 * v->height - (y + 0.5) / SUB) * v->px_m;
    for (size_t i = 0; i < n; i++) {
        const double right_m = v->middle_m[0] + (((double)i + 0.5) / SUB - 0.5 * v->width) * v->px_m;
        const vec3 o = vec3_add(vec3_scale(v->toward, v->near_m), vec3_add(vec3_scale(v->right, right_m), vec3_scale(v->up, up_m)));
        b->ray[i] = (rg_ray){{o.x, o.y, o.z}, {-v->toward.x, -v->toward.y, -v->toward.z}, INFINITY, RG_NO_HIT};
    }
    rg_bvh_closest_packet(p->bvh, n, b->ray, b->hit);
    for (size_t i = 0; i < n; i++) row[i + 1] = (seen){(float)b->hit[i].t_m, b->hit[i].facet};
    row[0] = row[1];
    row[n + 1] = row[n];
}

/* How much light is left at the border between two rays, side by side along `across`. */
static float border(const painter *p, seen a, seen b, vec3 across)
{
    const rg_mesh *mesh = p->mesh;
    if (a.facet == b.facet) return 1.0f;
    if (a.facet == RG_NO_HIT || b.facet == RG_NO_HIT || mesh->part[a.facet] != mesh->part[b.facet]) return (float)OUTLINE;
    const vec3 m = normal_of(mesh, a.facet), n = normal_of(mesh, b.facet);
    const double m_toward = vec3_dot(m, p->view->toward), n_toward = vec3_dot(n, p->view->toward);
    const double px_m = p->view->px_m, step_m = (double)b.t_m - (double)a.t_m;
    /* A facet's depth grows by (n.across)/(n.toward) a metre; a step that neither plane explains is an outline. */
    const double by_m = fabs(step_m * m_toward - vec3_dot(m, across) * px_m / SUB);
    const double by_n = fabs(step_m * n_toward - vec3_dot(n, across) * px_m / SUB);
    if (by_m > STEP_PX * px_m * fabs(m_toward) && by_n > STEP_PX * px_m * fabs(n_toward) && fabs(step_m) > STEP_PX * px_m)
        return (float)OUTLINE;
    return (m_toward < 0.0) == (n_toward < 0.0) && fabs(vec3_dot(m, n)) < COS_CREASE ? (float)CREASE : 1.0f;
}

/* Adds what one ray sees to light[3]. (x, y): the pixel, for the hatching. */
static void add_light(const painter *p, const seen *at, size_t stride, int x, int y, double light[3], uint64_t shown[])
{
    const vec3 right = p->view->right, up = p->view->up, left = vec3_scale(right, -1.0), down = vec3_scale(up, -1.0);
    const float edge = fminf(fminf(border(p, *at, at[1], right), border(p, *at, at[-1], left)),
                             fminf(border(p, *at, *(at + stride), down), border(p, *at, *(at - stride), up)));
    if (at->facet == RG_NO_HIT) {       /* the outline's outer half, so that thin things show */
        for (int i = 0; i < 3; i++) light[i] += (double)(p->ground[i] * edge);
        return;
    }
    const size_t part = p->mesh->part[at->facet];
    const double facing = vec3_dot(normal_of(p->mesh, at->facet), p->view->toward);
    const bool back = facing < 0.0 && !p->mesh->shells[p->mesh->shell[at->facet]].closed;
    double share = (AMBIENT + (1.0 - AMBIENT) * facing * facing) * (double)edge;
    if (back) share *= (x + y) % HATCH < HATCH / 2 ? 0.30 : 0.75;
    for (int i = 0; i < 3; i++) light[i] += share * (double)p->linear[part % (N_SHADES * N_COLOURS)][i];
    shown[part]++;
}

static void paint_strip(const painter *p, brush *b, int first, uint32_t pixel[])
{
    const int width = p->view->width, height = p->view->height, rows = height - first < STRIP ? height - first : STRIP;
    const size_t stride = (size_t)width * SUB + 2;
    for (int y = 0; y < rows * SUB + 2; y++)        /* one row above the strip and one below */
        look_along(p, b, first * SUB + y - 1, b->grid + (size_t)y * stride);
    for (int y = 0; y < rows; y++)
        for (int x = 0; x < width; x++) {
            double light[3] = {0};
            for (int i = 0; i < SUB * SUB; i++)
                add_light(p, b->grid + (size_t)(y * SUB + i / SUB + 1) * stride + (size_t)(x * SUB + i % SUB + 1), stride, x, first + y,
                          light, b->shown);
            for (int i = 0; i < 3; i++) light[i] /= SUB * SUB;
            pixel[(size_t)(first + y) * (size_t)width + (size_t)x] = 0xff000000u | to_byte(light[0]) << 16 | to_byte(light[1]) << 8 |
                                                                     to_byte(light[2]);
        }
}

static bool brush_new(brush *b, const painter *p)
{
    const size_t n = (size_t)p->view->width * SUB;
    *b = (brush){malloc(n * sizeof *b->ray), malloc(n * sizeof *b->hit), malloc((n + 2) * (SUB * STRIP + 2) * sizeof *b->grid),
                 calloc(p->mesh->n_parts, sizeof *b->shown)};
    return b->ray && b->hit && b->grid && b->shown;
}

static void brush_free(brush *b)
{
    free(b->ray);
    free(b->hit);
    free(b->grid);
    free(b->shown);
}

rg_status rg_mesh_view_paint(const rg_mesh *mesh, const rg_mesh_view *view, uint32_t pixel[], double shown_px[], rg_error *err)
{
    rg_bvh *bvh = NULL;
    rg_status status = rg_bvh_build(&bvh, mesh->n_vertices, (const double (*)[3])mesh->vertex_m, mesh->n_facets,
                                    (const uint32_t (*)[3])mesh->facet, rg_cpu_best(), err);
    if (status) return status;
    painter p = {.mesh = mesh, .view = view, .bvh = bvh};
    for (int i = 0; i < 3; i++) {
        for (size_t c = 0; c < N_SHADES * N_COLOURS; c++) p.linear[c][i] = to_linear(rg_part_colour(c) >> (16 - 8 * i) & 255u);
        p.ground[i] = to_linear(RG_VIEW_BACKGROUND >> (16 - 8 * i) & 255u);
    }
    for (size_t part = 0; part < mesh->n_parts; part++) shown_px[part] = 0.0;
    bool short_of_memory = false;
#pragma omp parallel
    {
        brush b;
        const bool ready = brush_new(&b, &p);
#pragma omp for schedule(dynamic)
        for (int first = 0; first < view->height; first += STRIP)
            if (ready) paint_strip(&p, &b, first, pixel);
#pragma omp critical(rg_mesh_view_shown)
        {
            short_of_memory = short_of_memory || !ready;
            for (size_t part = 0; ready && part < mesh->n_parts; part++) shown_px[part] += (double)b.shown[part];   /* whole: exact */
        }
        brush_free(&b);
    }
    for (size_t part = 0; part < mesh->n_parts; part++) shown_px[part] /= SUB * SUB;
    rg_bvh_free(bvh);
    return short_of_memory ? rg_fail(err, RG_NO_MEMORY, "no memory to paint %d by %d pixels", view->width, view->height) : RG_OK;
}
