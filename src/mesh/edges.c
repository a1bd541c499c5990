/* edges.c - the edges at which currents break off */
#include "mesh/edges.h"
#include "base/elementary.h"
#include "base/vec3.h"
#include <stdlib.h>

static vec3 vertex_of(const rg_mesh *mesh, uint32_t facet, int corner) { return vec3_from(mesh->vertex_m[mesh->facet[facet][corner % 3]]); }

static vec3 unit_normal(const rg_mesh *mesh, uint32_t facet)
{
    const vec3 a = vertex_of(mesh, facet, 0), n = vec3_cross(vec3_sub(vertex_of(mesh, facet, 1), a), vec3_sub(vertex_of(mesh, facet, 2), a));
    return vec3_scale(n, 1.0 / vec3_norm(n));
}

static void store(double out[3], vec3 v)
{
    out[0] = v.x;
    out[1] = v.y;
    out[2] = v.z;
}

/* Unit vector from the edge corner..corner + 1 of a facet into it, at right angles to the edge. */
static vec3 into_facet(const rg_mesh *mesh, uint32_t facet, int corner, vec3 normal)
{
    const vec3 along = vec3_sub(vertex_of(mesh, facet, corner + 1), vertex_of(mesh, facet, corner));
    const vec3 into = vec3_cross(normal, along);
    return vec3_scale(into, 1.0 / vec3_norm(into));
}

static int side_toward(const rg_mesh *mesh, uint32_t facet, uint32_t neighbour)
{
    int side = 0;
    while (side < 2 && mesh->neighbour[facet][side] != neighbour) side++;
    return side;
}

/* Fills edge from side `side` of a facet; false if it is none to keep, or its other facet's to give. */
static bool make_edge(rg_edge *edge, const rg_mesh *mesh, uint32_t facet, int side, double turn_rad)
{
    const uint32_t other = mesh->neighbour[facet][side];
    const vec3 normal = unit_normal(mesh, facet), into = into_facet(mesh, facet, side, normal);
    edge->vertex[0] = mesh->facet[facet][side];
    edge->vertex[1] = mesh->facet[facet][(side + 1) % 3];
    edge->facet[0] = facet;
    edge->facet[1] = other;
    edge->part = mesh->part[facet];
    store(edge->into[0], into);
    store(edge->normal[0], normal);
    if (other == RG_NO_FACET) {
        edge->wedge_n = 2.0;
        store(edge->into[1], into);
        store(edge->normal[1], vec3_scale(normal, -1.0));
        return true;
    }
    if (other == RG_MANY_FACETS || other < facet) return false;
    const vec3 other_normal = unit_normal(mesh, other), other_into = into_facet(mesh, other, side_toward(mesh, other, facet), other_normal);
    const double turn = rg_atan2(vec3_norm(vec3_cross(normal, other_normal)), vec3_dot(normal, other_normal));
    const bool convex = vec3_dot(normal, other_into) < 0.0, closed = mesh->shells[mesh->shell[facet]].closed;
    if (turn <= turn_rad || (closed && !convex)) return false;
    edge->wedge_n = 1.0 + turn / RG_SIN_PI_0;
    store(edge->into[1], other_into);
    store(edge->normal[0], vec3_scale(normal, convex ? 1.0 : -1.0));
    store(edge->normal[1], vec3_scale(other_normal, convex ? 1.0 : -1.0));
    return true;
}

rg_status rg_edges_find(rg_edge **out, size_t *n, const rg_mesh *mesh, double turn_rad, rg_error *err)
{
    rg_edge *edge = NULL, candidate;
    for (int pass = 0; pass < 2; pass++) {                  /* counted first, then kept */
        *n = 0;
        for (uint32_t facet = 0; facet < mesh->n_facets; facet++)
            for (int side = 0; side < 3; side++)
                if (make_edge(pass ? &edge[*n] : &candidate, mesh, facet, side, turn_rad)) (*n)++;
        if (pass == 0 && !(edge = calloc(*n + 1, sizeof *edge))) return rg_fail(err, RG_NO_MEMORY, "no memory for %zu edges", *n);
    }
    *out = edge;
    return RG_OK;
}
