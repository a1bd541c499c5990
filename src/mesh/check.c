/* check.c - whether a mesh keeps all that its header promises */
#include "mesh/mesh.h"
#include <math.h>
#include <stdlib.h>
#include <string.h>

static rg_status check_facets(const rg_mesh *mesh, rg_error *err)
{
    for (size_t v = 0; v < mesh->n_vertices; v++)
        for (int i = 0; i < 3; i++)
            if (!isfinite(mesh->vertex_m[v][i])) return rg_fail(err, RG_BAD_INPUT, "vertex %zu is not finite", v);
    for (size_t f = 0; f < mesh->n_facets; f++) {
        const uint32_t *c = mesh->facet[f];
        for (int i = 0; i < 3; i++)
            if (c[i] >= mesh->n_vertices) return rg_fail(err, RG_BAD_INPUT, "facet %zu has corner %u of %zu", f, c[i], mesh->n_vertices);
        if (c[0] == c[1] || c[1] == c[2] || c[2] == c[0]) return rg_fail(err, RG_BAD_INPUT, "facet %zu has a corner twice", f);
    }
    return RG_OK;
}

static rg_status check_parts(const rg_mesh *mesh, rg_error *err)
{
    if (mesh->part_first[0] != 0 || mesh->part_first[mesh->n_parts] != mesh->n_facets)
        return rg_fail(err, RG_BAD_INPUT, "the parts do not cover the facets");
    for (size_t p = 0; p < mesh->n_parts; p++) {
        if (!mesh->part_name[p]) return rg_fail(err, RG_BAD_INPUT, "part %zu has no name", p);
        if (mesh->part_first[p] > mesh->part_first[p + 1]) return rg_fail(err, RG_BAD_INPUT, "part %zu ends before it begins", p);
        for (size_t f = mesh->part_first[p]; f < mesh->part_first[p + 1]; f++)
            if (mesh->part[f] != p) return rg_fail(err, RG_BAD_INPUT, "facet %zu lies in part %zu and says %u", f, p, mesh->part[f]);
    }
    return RG_OK;
}

/* The edge of facet g that leads to facet f, or -1. */
static int edge_to(const rg_mesh *mesh, uint32_t g, size_t f)
{
    for (int i = 0; i < 3; i++)
        if (mesh->neighbour[g][i] == f) return i;
    return -1;
}

static rg_status check_neighbours(const rg_mesh *mesh, size_t *n_boundary, rg_error *err)
{
    *n_boundary = 0;
    for (size_t f = 0; f < mesh->n_facets; f++)
        for (int i = 0; i < 3; i++) {
            const uint32_t g = mesh->neighbour[f][i], a = mesh->facet[f][i], b = mesh->facet[f][(i + 1) % 3];
            *n_boundary += g == RG_NO_FACET;
            if (g == RG_NO_FACET || g == RG_MANY_FACETS) continue;
            if (g >= mesh->n_facets || g == f) return rg_fail(err, RG_BAD_INPUT, "facet %zu has neighbour %u of %zu", f, g, mesh->n_facets);
            const int back = edge_to(mesh, g, f);
            if (back < 0) return rg_fail(err, RG_BAD_INPUT, "facet %zu has neighbour %u, but not the other way", f, g);
            const uint32_t c = mesh->facet[g][back], d = mesh->facet[g][(back + 1) % 3];
            if (!((a == c && b == d) || (a == d && b == c)))
                return rg_fail(err, RG_BAD_INPUT, "facets %zu and %u are neighbours over two different edges", f, g);
            if (mesh->shell[f] != mesh->shell[g]) return rg_fail(err, RG_BAD_INPUT, "neighbours %zu and %u are in two shells", f, g);
            if (a == c && mesh->shells[mesh->shell[f]].closed)
                return rg_fail(err, RG_BAD_INPUT, "neighbours %zu and %u of a closed shell are wound against each other", f, g);
        }
    return RG_OK;
}

static rg_status check_shells(const rg_mesh *mesh, rg_error *err)
{
    size_t *n = calloc(mesh->n_shells ? mesh->n_shells : 1, sizeof *n), n_closed = 0;
    rg_status status = n ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory to check %zu shells", mesh->n_shells);
    for (size_t f = 0; f < mesh->n_facets && !status; f++) {
        const uint32_t s = mesh->shell[f];
        const uint32_t *across = mesh->neighbour[f];
        if (s >= mesh->n_shells)
            status = rg_fail(err, RG_BAD_INPUT, "facet %zu lies in shell %u of %zu", f, s, mesh->n_shells);
        else if (mesh->shells[s].closed && (across[0] == RG_NO_FACET || across[1] == RG_NO_FACET || across[2] == RG_NO_FACET))
            status = rg_fail(err, RG_BAD_INPUT, "facet %zu of a closed shell has a free edge", f);
        else
            n[s]++;
    }
    for (size_t s = 0; s < mesh->n_shells && !status; s++) {
        n_closed += mesh->shells[s].closed;
        if (n[s] != mesh->shells[s].n_facets || n[s] == 0)
            status = rg_fail(err, RG_BAD_INPUT, "shell %zu has %zu facets and says %zu", s, n[s], mesh->shells[s].n_facets);
    }
    if (!status && (mesh->report.n_shells != mesh->n_shells || mesh->report.n_closed_shells != n_closed))
        status = rg_fail(err, RG_BAD_INPUT, "the report counts other shells than the mesh has");
    free(n);
    return status;
}

rg_status rg_mesh_check(const rg_mesh *mesh, rg_error *err)
{
    size_t n_boundary = 0;
    if (mesh->n_facets == 0 || mesh->n_vertices == 0 || mesh->n_parts == 0 || mesh->n_shells == 0)
        return rg_fail(err, RG_BAD_INPUT, "the mesh is empty");
    rg_status status = check_facets(mesh, err);
    if (!status) status = check_parts(mesh, err);
    if (!status) status = check_shells(mesh, err);
    if (!status) status = check_neighbours(mesh, &n_boundary, err);
    if (!status && n_boundary != mesh->report.n_boundary_edges)
        status = rg_fail(err, RG_BAD_INPUT, "%zu edges are free, the report says %zu", n_boundary, mesh->report.n_boundary_edges);
    return status;
}
