/* occluder.c - what one facet hides of another along the line of sight */
#include "scatter/occluder.h"
#include <math.h>

/* Twice the signed area of edge e of face with x, in the plane across the line of sight; positive on the face's side. The edge is always
 * taken from its lower vertex, so the two facets of an edge get values of exactly opposite sign, and 0 at the edge's own ends. */
static double beside_edge(const rg_face *face, int e, const double x[3])
{
    const int next = (e + 1) % 3;
    const bool rising = face->vertex[e] < face->vertex[next];
    const double *p = face->at_m[rising ? e : next], *q = face->at_m[rising ? next : e];
    const double area2 = (q[0] - p[0]) * (x[1] - p[1]) - (q[1] - p[1]) * (x[0] - p[0]);
    return rising ? area2 : -area2;
}

/* Some edge of face has all of other on its far side. */
static bool apart(const rg_face *face, const rg_face *other)
{
    for (int e = 0; e < 3; e++) {
        int beyond = 0;
        for (int i = 0; i < 3; i++) beyond += beside_edge(face, e, other->at_m[i]) <= 0.0;
        if (beyond == 3) return true;
    }
    return false;
}

/* Heights of other's corners over face's plane (m, positive toward the radar); exactly 0 at shared vertices. */
static void heights(const rg_face *face, const rg_face *other, double height_m[3])
{
    const double *n = face->normal_m2, length = sqrt(n[0] * n[0] + n[1] * n[1] + n[2] * n[2]);
    for (int i = 0; i < 3; i++) {
        const double *x = other->at_m[i];
        int nearest = 0;
        for (int j = 0; j < 3; j++)
            if (other->vertex[i] == face->vertex[j]) nearest = j;
        const double *o = face->at_m[nearest];
        height_m[i] = (n[0] * (x[0] - o[0]) + n[1] * (x[1] - o[1]) + n[2] * (x[2] - o[2])) / length;
    }
}

static double lowest(const double x[3]) { return fmin(x[0], fmin(x[1], x[2])); }
static double highest(const double x[3]) { return fmax(x[0], fmax(x[1], x[2])); }

/* Sum of the heights of other's corners over face's plane, in the mesh's own axes: there, flush faces along an axis lie in one plane
 * exactly, as the tree sees them too, and no turning has rounded them apart. */
static double sum_of_heights(const rg_mesh *mesh, const rg_face *face, const rg_face *other)
{
    const vec3 o = vec3_from(mesh->vertex_m[face->vertex[0]]);
    const vec3 n = vec3_cross(vec3_sub(vec3_from(mesh->vertex_m[face->vertex[1]]), o), vec3_sub(vec3_from(mesh->vertex_m[face->vertex[2]]), o));
    double sum = 0.0;
    for (int i = 0; i < 3; i++) sum += vec3_dot(n, vec3_sub(vec3_from(mesh->vertex_m[other->vertex[i]]), o));
    return sum / vec3_norm(n);
}

/* Of two faces in one plane, is other the one before? Seen the other way round the sums change places, so just one of the two is. */
static bool is_before(const rg_mesh *mesh, const rg_face *face, const rg_face *other)
{
    const double lead = sum_of_heights(mesh, face, other) - sum_of_heights(mesh, other, face);
    return lead != 0.0 ? lead > 0.0 : other->index < face->index;
}

/* Adds to region what the horizon leaves of other: along the line of sight over each corner of face, how far other lies within it. */
static bool keep_within(const rg_horizon *horizon, rg_region *region, const rg_face *face, const rg_face *other, const double over_other[3])
{
    const double *m = other->normal_m2;
    int n_within = 0;
    if (other->index == horizon->facet) return false;
    for (int i = 0; i < 3; i++) n_within += rg_horizon_height(horizon, other->at_m[i]) > 0.0;
    if (n_within == 0) return false;
    if (n_within == 3) return true;
    const double slant = sqrt(m[0] * m[0] + m[1] * m[1] + m[2] * m[2]) / m[2];
    for (int i = 0; i < 3; i++) {
        const double *x = face->at_m[i], on_other[3] = {x[0], x[1], x[2] - over_other[i] * slant};
        region->edge[region->n].at_corner[i] = rg_horizon_height(horizon, on_other);
    }
    region->n++;
    return true;
}

bool rg_occluder_region(rg_region *region, const rg_mesh *mesh, const rg_face *face, const rg_face *other, const rg_horizon *horizon)
{
    const double same_m = mesh->report.weld_m;
    if (apart(face, other) || apart(other, face)) return false;

    double over_face[3], over_other[3];
    heights(face, other, over_face);
    heights(other, face, over_other);
    const bool same_plane = (highest(over_face) <= same_m && lowest(over_face) >= -same_m) ||
                            (highest(over_other) <= same_m && lowest(over_other) >= -same_m);
    if (same_plane && !is_before(mesh, face, other)) return false;
    if (!same_plane && (highest(over_face) <= 0.0 || lowest(over_other) >= 0.0)) return false;

    region->n = 3;
    for (int e = 0; e < 3; e++)
        for (int i = 0; i < 3; i++) region->edge[e].at_corner[i] = beside_edge(other, e, face->at_m[i]);
    if (!same_plane && highest(over_other) > 0.0) {         /* the planes cross on the face: only what lies behind is hidden */
        region->n = 4;
        for (int i = 0; i < 3; i++) region->edge[3].at_corner[i] = -over_other[i];
    }
    return !horizon || keep_within(horizon, region, face, other, over_other);
}

bool rg_occluder_stretch(double stretch[2], const rg_face *face, const uint32_t vertex[2], const double end_m[2][3], double same_m)
{
    const double *n = face->normal_m2, length = sqrt(n[0] * n[0] + n[1] * n[1] + n[2] * n[2]);
    double f[4][2];                                         /* positive where hidden: beside each edge of the face, and behind its plane */
    for (int i = 0; i < 2; i++) {
        int nearest = 0;
        for (int e = 0; e < 3; e++) {
            f[e][i] = beside_edge(face, e, end_m[i]);
            if (face->vertex[e] == vertex[i]) nearest = e;
        }
        const double *o = face->at_m[nearest], *x = end_m[i];
        f[3][i] = -(n[0] * (x[0] - o[0]) + n[1] * (x[1] - o[1]) + n[2] * (x[2] - o[2])) / length;
    }
    if (fmax(f[3][0], f[3][1]) <= same_m) return false;
    stretch[0] = 0.0;
    stretch[1] = 1.0;
    for (int plane = 0; plane < 4; plane++) {
        const double a = f[plane][0], b = f[plane][1];
        if (a <= 0.0 && b <= 0.0) return false;
        if (a < 0.0) stretch[0] = fmax(stretch[0], a / (a - b));
        if (b < 0.0) stretch[1] = fmin(stretch[1], a / (a - b));
    }
    return stretch[0] < stretch[1];
}
