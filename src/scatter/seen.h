/* seen.h - a mesh and its facets as one line of sight sees them */
#ifndef RG_SCATTER_SEEN_H
#define RG_SCATTER_SEEN_H
#include "mesh/mesh.h"
#include "scatter/direction.h"

/* Vertices: metres along h, v and s from the mesh's own middle. */
typedef struct {
    rg_view view;
    double reach_m;                 /* largest coordinate of the mesh */
    double (*at_m)[3];              /* [n_vertices]; NULL: a facet's corners are turned when asked for */
} rg_seen;

rg_status rg_seen_new(rg_seen *seen, const rg_mesh *mesh, rg_error *err);   /* room for any aspect */
void rg_seen_turn(rg_seen *seen, const rg_mesh *mesh, const rg_view *view);
void rg_seen_free(rg_seen *seen);

void rg_seen_vertex(const rg_seen *seen, const rg_mesh *mesh, uint32_t vertex, double at_m[3]);

/* A facet as it is seen: wound counter-clockwise in (h, v), whichever of its sides that shows. */
typedef struct {
    uint32_t index, vertex[3];
    double at_m[3][3];              /* corners along h, v, s */
    double normal_m2[3];            /* along h, v, s; twice the area; toward the viewer, so normal_m2[2] > 0 */
} rg_face;

/* False where nothing of it is seen: the inner side of a closed shell, or edge-on to within rounding. */
bool rg_face_seen(rg_face *face, const rg_mesh *mesh, const rg_seen *seen, uint32_t facet);

#endif
