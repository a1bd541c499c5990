/* judge.c - the library's measure of how smooth a mesh is, for the mesh that is being made */
#include "judge.h"
#include "mesh/sagitta.h"
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static void stop(const char *why)
{
    fprintf(stderr, "generator: %s\n", why);
    exit(EXIT_FAILURE);
}

double *facets_sagitta_m(const facets *mesh)
{
    size_t room_place = 0, room_corner = 0, room_sagitta = 0;
    double (*place)[3] = grow_array(NULL, &room_place, mesh->n_vertices, sizeof *place);
    uint32_t (*corner)[3] = grow_array(NULL, &room_corner, mesh->n_facets, sizeof *corner);
    double *sagitta_m = grow_array(NULL, &room_sagitta, mesh->n_facets, sizeof *sagitta_m);
    for (size_t i = 0; i < mesh->n_vertices; i++)
        memcpy(place[i], (double[3]){mesh->vertex_m[i].x, mesh->vertex_m[i].y, mesh->vertex_m[i].z}, sizeof place[i]);
    for (size_t i = 0; i < mesh->n_facets; i++) memcpy(corner[i], mesh->facet[i].v, sizeof corner[i]);

    rg_mesh *judged = NULL;
    rg_sagittas found = {0};
    rg_error err;
    if (rg_mesh_from_arrays(&judged, mesh->n_vertices, place, mesh->n_facets, corner, NULL, 0, NULL, &err)) stop(err.text);
    /* One part, so facets keep their order; a dropped one would shift those after it. */
    if (judged->n_facets != mesh->n_facets) stop("facets without area, or twice the same one");
    if (rg_sagittas_find(&found, judged, &err)) stop(err.text);
    memcpy(sagitta_m, found.sagitta_m, mesh->n_facets * sizeof *sagitta_m);
    rg_sagittas_free(&found);
    rg_mesh_free(judged);
    free(place);
    free(corner);
    return sagitta_m;
}
