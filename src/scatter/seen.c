/* seen.c - a mesh and its facets as one line of sight sees them */
#include "scatter/seen.h"
#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

rg_status rg_seen_new(rg_seen *seen, const rg_mesh *mesh, rg_error *err)
{
    seen->reach_m = 0.0;
    for (size_t i = 0; i < mesh->n_vertices; i++)
        for (int axis = 0; axis < 3; axis++) seen->reach_m = fmax(seen->reach_m, fabs(mesh->vertex_m[i][axis]));
    seen->at_m = malloc(mesh->n_vertices * sizeof *seen->at_m);
    return seen->at_m ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory for %zu vertices as seen", mesh->n_vertices);
}

static void turn(const rg_view *view, const double vertex_m[3], double at_m[3])
{
    const vec3 r = vec3_from(vertex_m);
    at_m[0] = vec3_dot(view->h, r);
    at_m[1] = vec3_dot(view->v, r);
    at_m[2] = vec3_dot(view->s, r);
}

void rg_seen_turn(rg_seen *seen, const rg_mesh *mesh, const rg_view *view)
{
    seen->view = *view;
    for (size_t i = 0; i < mesh->n_vertices; i++) turn(view, mesh->vertex_m[i], seen->at_m[i]);
}

void rg_seen_free(rg_seen *seen)
{
    free(seen->at_m);
    *seen = (rg_seen){0};
}

void rg_seen_vertex(const rg_seen *seen, const rg_mesh *mesh, uint32_t vertex, double at_m[3])
{
    if (seen->at_m) memcpy(at_m, seen->at_m[vertex], 3 * sizeof *at_m);
    else turn(&seen->view, mesh->vertex_m[vertex], at_m);
}

static void cross(const double a[3], const double b[3], double out[3])
{
    out[0] = a[1] * b[2] - a[2] * b[1];
    out[1] = a[2] * b[0] - a[0] * b[2];
    out[2] = a[0] * b[1] - a[1] * b[0];
}

bool rg_face_seen(rg_face *face, const rg_mesh *mesh, const rg_seen *seen, uint32_t facet)
{
    double edge[2][3], edges_m = 0.0;
    face->index = facet;
    for (int i = 0; i < 3; i++) {
        const uint32_t vertex = face->vertex[i] = mesh->facet[facet][i];
        rg_seen_vertex(seen, mesh, vertex, face->at_m[i]);
    }
    for (int e = 0; e < 2; e++)
        for (int i = 0; i < 3; i++) {
            edge[e][i] = face->at_m[e + 1][i] - face->at_m[0][i];
            edges_m += fabs(edge[e][i]);
        }
    cross(edge[0], edge[1], face->normal_m2);
    /* The corners carry roundings of some reach * 2^-53, and so does the shown area, times the edges. */
    if (fabs(face->normal_m2[2]) <= 4.0 * DBL_EPSILON * seen->reach_m * edges_m) return false;
    if (face->normal_m2[2] > 0.0) return true;
    if (mesh->shells[mesh->shell[facet]].closed) return false;
    const uint32_t vertex = face->vertex[1];
    face->vertex[1] = face->vertex[2];
    face->vertex[2] = vertex;
    for (int i = 0; i < 3; i++) {
        const double at_m = face->at_m[1][i];
        face->at_m[1][i] = face->at_m[2][i];
        face->at_m[2][i] = at_m;
        face->normal_m2[i] = -face->normal_m2[i];
    }
    return true;
}
