/* edges.h - the edges at which currents break off: free edges of sheets and sharp convex edges */
#ifndef RG_MESH_EDGES_H
#define RG_MESH_EDGES_H
#include "mesh/mesh.h"

/* A turn between neighbours above this is a feature of the shape and no tessellation of a smooth surface (common practice: 30 degrees). */
#define RG_FEATURE_TURN_RAD 0.5235987755982988

/* A straight edge with its two faces. A free edge has one facet, whose two sides are its faces. */
typedef struct {
    uint32_t vertex[2];
    uint32_t facet[2];              /* RG_NO_FACET for the second of a free edge */
    uint32_t part;                  /* of facet[0] */
    double wedge_n;                 /* exterior angle over pi: 2 for a free edge */
    double into[2][3];              /* unit; in each face, across the edge, into the face */
    double normal[2][3];            /* unit; of each face, out of the wedge */
} rg_edge;

/* All edges of a mesh, by part and then by facet. Of edges with two facets those that turn by more than turn_rad: convex ones of closed
 * shells; on sheets every one, as the wedge that it is from its convex side. Edges with three facets or more are left out. The
 * caller frees *out. RG_NO_MEMORY. */
rg_status rg_edges_find(rg_edge **out, size_t *n, const rg_mesh *mesh, double turn_rad, rg_error *err);

#endif
