/* bounce.c - what reaches the radar after two and more reflections */
#include "scatter/bounce.h"
#include "base/room.h"
#include <math.h>
#include <stdlib.h>

/* Corners of a beam: with the three of a target and the horizon's cut they make RG_POLYGON_CORNERS at the most. */
enum { BEAM_CORNERS = RG_POLYGON_CORNERS - 4 };

/* Up to so many facets in a beam it pays to hold each against all; more, and the tree is asked again. */
enum { FEW_TARGETS = 64 };

/* A plane wave e exp(jk (u.r + c)), u the unit vector toward where it comes from; e for H and for V transmitted. (7.1) */
typedef struct { vec3 u, e[2]; double c_m; } plane_wave;

/* What is in hand at one depth of the recursion. */
typedef struct {
    uint32_t *near;
    size_t near_room;
    rg_polygons lit;
} depth;

struct rg_bounce_scratch {
    depth at[RG_MAX_BOUNCES];
    rg_polygons back;               /* what of a footprint the radar sees */
};

typedef struct {
    const rg_scene *scene;
    const rg_seen *seen;
    const rg_cover *cover;
    int n_bounces;
    double grain_m;
    rg_lit_scratch *lit_scratch;
    rg_bounce_scratch *scratch;
    rg_footprints *footprints;
} bounce_job;

rg_bounce_scratch *rg_bounce_scratch_new(void) { return calloc(1, sizeof(rg_bounce_scratch)); }

void rg_bounce_scratch_free(rg_bounce_scratch *scratch)
{
    if (!scratch) return;
    for (int i = 0; i < RG_MAX_BOUNCES; i++) {
        free(scratch->at[i].near);
        free(scratch->at[i].lit.polygon);
    }
    free(scratch->back.polygon);
    free(scratch);
}

void rg_footprints_free(rg_footprints *footprints)
{
    for (int i = 0; i < 3; i++) free(footprints->path_m[i]);
    for (int w = 0; w < RG_FOOTPRINT_WEIGHTS; w++) free(footprints->weight_m2[w]);
    *footprints = (rg_footprints){0};
}

static bool make_footprint_room(rg_footprints *f, size_t n)
{
    double **array[] = {&f->path_m[0], &f->path_m[1], &f->path_m[2], &f->weight_m2[0], &f->weight_m2[1], &f->weight_m2[2]};
    return rg_make_rooms(array, sizeof array / sizeof array[0], &f->room, n);
}

bool rg_footprints_pad(rg_footprints *f)
{
    if (!make_footprint_room(f, f->n + RG_LANES)) return false;
    for (; f->n % RG_LANES; f->n++) {
        for (int i = 0; i < 3; i++) f->path_m[i][f->n] = 0.0;
        for (int w = 0; w < RG_FOOTPRINT_WEIGHTS; w++) f->weight_m2[w][f->n] = 0.0;
    }
    return true;
}

/* The corners of a face in the mesh's axes, and its unit normal on the side that was seen. */
typedef struct { vec3 corner[3], normal; double area2_m2; } placed_face;

static placed_face place(const rg_mesh *mesh, const rg_face *face)
{
    placed_face p;
    for (int i = 0; i < 3; i++) p.corner[i] = vec3_from(mesh->vertex_m[face->vertex[i]]);
    const vec3 n = vec3_cross(vec3_sub(p.corner[1], p.corner[0]), vec3_sub(p.corner[2], p.corner[0]));
    p.area2_m2 = vec3_norm(n);
    p.normal = vec3_scale(n, 1.0 / p.area2_m2);
    return p;
}

static vec3 point_on(const placed_face *p, double a, double b)
{
    return vec3_add(vec3_scale(p->corner[0], 1.0 - a - b), vec3_add(vec3_scale(p->corner[1], a), vec3_scale(p->corner[2], b)));
}

/* (7.2) off metal: u' = u - 2 n (n.u), e' = -e + 2 n (n.e), and one phase on the face */
static plane_wave reflect(const plane_wave *wave, const placed_face *p)
{
    const vec3 n = p->normal;
    const double nu = vec3_dot(n, wave->u);
    plane_wave out = {.u = vec3_sub(wave->u, vec3_scale(n, 2.0 * nu)), .c_m = wave->c_m + 2.0 * nu * vec3_dot(n, p->corner[0])};
    for (int i = 0; i < 2; i++) out.e[i] = vec3_sub(vec3_scale(n, 2.0 * vec3_dot(n, wave->e[i])), wave->e[i]);
    return out;
}

/* Any two vectors across u, for looking along it. */
static rg_view view_along(vec3 u)
{
    const double x = u.x * u.x, y = u.y * u.y, z = u.z * u.z;
    const vec3 axis = x <= y && x <= z ? (vec3){1.0, 0.0, 0.0} : y <= z ? (vec3){0.0, 1.0, 0.0} : (vec3){0.0, 0.0, 1.0};
    const vec3 across = vec3_cross(axis, u), h = vec3_scale(across, 1.0 / vec3_norm(across));
    return (rg_view){.s = u, .h = h, .v = vec3_cross(u, h)};
}

static void in_view(const rg_view *view, vec3 r, double at[3])
{
    at[0] = vec3_dot(view->h, r);
    at[1] = vec3_dot(view->v, r);
    at[2] = vec3_dot(view->s, r);
}

static int by_index(const void *a, const void *b)
{
    const uint32_t x = *(const uint32_t *)a, y = *(const uint32_t *)b;
    return (x > y) - (x < y);
}

/* Names the facets that the beam off a part of a face may meet, rising. False without memory. */
static bool name_targets(const bounce_job *job, const placed_face *from, const rg_polygon *part, vec3 along, depth *here, size_t *n)
{
    rg_prism prism = {.toward = {along.x, along.y, along.z}};
    rg_facet_point corner[3];
    rg_polygon_enclose(part, corner);
    for (int i = 0; i < 3; i++) {
        const vec3 r = point_on(from, corner[i].a, corner[i].b);
        prism.corner_m[i][0] = r.x;
        prism.corner_m[i][1] = r.y;
        prism.corner_m[i][2] = r.z;
    }
    *n = rg_bvh_in_prism(job->scene->bvh, &prism, here->near_room, here->near);
    if (*n > here->near_room) {
        if (!rg_make_room((void **)&here->near, &here->near_room, *n, sizeof *here->near)) return false;
        rg_bvh_in_prism(job->scene->bvh, &prism, here->near_room, here->near);
    }
    if (*n > 1) qsort(here->near, *n, sizeof *here->near, by_index);
    return true;
}

/* What of a target lies in the beam and on its side of the facet that it comes from; n = 0 where nothing does. */
static rg_polygon part_in_beam(const rg_face *target, const double beam[][3], int n_beam, const rg_horizon *horizon, double same_m,
                               double reach_m)
{
    rg_polygon part = rg_whole_facet, rest;
    rg_half_plane plane;
    double highest = 0.0;
    for (int i = 0; i < 3; i++) {
        plane.at_corner[i] = rg_horizon_height(horizon, target->at_m[i]);
        if (plane.at_corner[i] > highest) highest = plane.at_corner[i];
    }
    part.n = highest <= same_m ? 0 : part.n;
    for (int e = -1; e < n_beam && part.n > 0; e++) {
        if (e >= 0) {
            const double *p = beam[e], *q = beam[(e + 1) % n_beam];
            /* Corners carry roundings of some reach * 2^-50; two that are no farther apart are one, and no edge runs between them. */
            if (fabs(q[0] - p[0]) + fabs(q[1] - p[1]) <= 0x1p-44 * reach_m) continue;
            for (int i = 0; i < 3; i++)
                plane.at_corner[i] = (q[0] - p[0]) * (target->at_m[i][1] - p[1]) - (q[1] - p[1]) * (target->at_m[i][0] - p[0]);
        }
        const rg_polygon whole = part;
        rg_polygon_split(&whole, &plane, &part, &rest);     /* 3 corners, and one more for each cut at the most */
    }
    return part;
}

/* (7.3) The part of a footprint that the radar sees radiates back. False without memory. */
static bool radiate(const bounce_job *job, const rg_face *target, const placed_face *p, const rg_polygon *footprint, const plane_wave *wave)
{
    rg_face face;
    rg_polygons *back = &job->scratch->back;
    rg_footprints *f = job->footprints;
    const rg_view *view = &job->seen->view;
    if (!rg_face_seen(&face, job->scene->mesh, job->seen, target->index) || face.vertex[1] != target->vertex[1]) return true;
    back->n = 0;
    if (!rg_lit_from_afar(job->scene, job->seen, job->cover, &face, footprint, job->grain_m, job->lit_scratch, back)) return false;

    const vec3 n = p->normal, to_radar = vec3_add(view->s, wave->u), receive[2] = {view->h, view->v};
    double w[2][2];
    for (int q = 0; q < 2; q++)
        for (int t = 0; t < 2; t++)
            w[q][t] = vec3_dot(receive[q], wave->e[t]) * vec3_dot(n, wave->u) - vec3_dot(receive[q], wave->u) * vec3_dot(n, wave->e[t]);
    const double weight[RG_FOOTPRINT_WEIGHTS] = {w[0][0], w[1][1], 0.5 * (w[0][1] + w[1][0])};
    for (size_t i = 0; i < back->n; i++) {
        const rg_polygon *g = &back->polygon[i];
        if (!make_footprint_room(f, f->n + (size_t)g->n)) return false;
        for (int k = 1; k + 1 < g->n; k++) {
            const int corner[3] = {0, k, k + 1};
            const double share = rg_polygon_fan_area2(g, k);
            if (share <= 0.0) continue;
            for (int c = 0; c < 3; c++)
                f->path_m[c][f->n] = vec3_dot(to_radar, point_on(p, g->a[corner[c]], g->b[corner[c]])) + wave->c_m;
            for (int i_weight = 0; i_weight < RG_FOOTPRINT_WEIGHTS; i_weight++)
                f->weight_m2[i_weight][f->n] = weight[i_weight] * share * p->area2_m2;
            f->n++;
        }
    }
    return true;
}

static bool follow(const bounce_job *job, const rg_face *face, const rg_polygon *part, const plane_wave *arriving, int n_done);

/* Follows a part of many corners as two of fewer. */
static bool follow_halves(const bounce_job *job, const rg_face *face, const rg_polygon *part, const plane_wave *arriving, int n_done)
{
    rg_polygon half[2];
    rg_polygon_part(part, half);
    return follow(job, face, &half[0], arriving, n_done) && follow(job, face, &half[1], arriving, n_done);
}

/* Follows the reflection of wave off a part of a face. False without memory. */
static bool follow(const bounce_job *job, const rg_face *face, const rg_polygon *part, const plane_wave *arriving, int n_done)
{
    if (part->n > BEAM_CORNERS) return follow_halves(job, face, part, arriving, n_done);
    const rg_mesh *mesh = job->scene->mesh;
    const placed_face from = place(mesh, face);
    const plane_wave wave = reflect(arriving, &from);
    const rg_seen seen = {.view = view_along(wave.u), .reach_m = job->seen->reach_m};
    depth *here = &job->scratch->at[n_done];
    double beam[RG_POLYGON_ROOM][3];
    rg_horizon horizon = {.facet = face->index};
    size_t n_targets;

    for (int i = 0; i < part->n; i++)                       /* from behind, the way round is the other one */
        in_view(&seen.view, point_on(&from, part->a[i], part->b[i]), beam[part->n - 1 - i]);
    in_view(&seen.view, from.corner[0], horizon.at_m);
    in_view(&seen.view, from.normal, horizon.normal);
    if (!name_targets(job, &from, part, vec3_scale(wave.u, -1.0), here, &n_targets)) return false;

    for (size_t t = 0; t < n_targets; t++) {
        rg_face target;
        if (here->near[t] == face->index || !rg_face_seen(&target, mesh, &seen, here->near[t])) continue;
        const rg_polygon met = part_in_beam(&target, (const double(*)[3])beam, part->n, &horizon, mesh->report.weld_m, seen.reach_m);
        if (met.n == 0) continue;
        here->lit.n = 0;
        /* what stands before a target in the beam was named with it; where that is much, what stands before its part is less */
        if (!(n_targets <= FEW_TARGETS
                  ? rg_lit_among(job->scene, &seen, &target, &met, &horizon, n_targets, here->near, job->grain_m, job->lit_scratch, &here->lit)
                  : rg_lit_part(job->scene, &seen, &target, &met, &horizon, job->grain_m, job->lit_scratch, &here->lit)))
            return false;
        const placed_face placed = place(mesh, &target);
        for (size_t i = 0; i < here->lit.n; i++) {
            const rg_polygon footprint = here->lit.polygon[i];
            if (!radiate(job, &target, &placed, &footprint, &wave)) return false;
            if (n_done + 1 < job->n_bounces && !follow(job, &target, &footprint, &wave, n_done + 1)) return false;
        }
    }
    return true;
}

bool rg_bounce_follow(const rg_scene *scene, const rg_seen *seen, const rg_cover *cover, const rg_face *face, const rg_polygon *lit,
                      int n_bounces, double grain_m, rg_lit_scratch *lit_scratch, rg_bounce_scratch *scratch, rg_footprints *footprints)
{
    const bounce_job job = {scene, seen, cover, n_bounces, grain_m, lit_scratch, scratch, footprints};
    const plane_wave incident = {.u = seen->view.s, .e = {seen->view.h, seen->view.v}};
    return n_bounces < 2 || follow(&job, face, lit, &incident, 1);
}
