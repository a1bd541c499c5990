/* repair.h - the steps from loose facets to a mesh, each over plain arrays */
#ifndef RG_MESH_REPAIR_H
#define RG_MESH_REPAIR_H
#include "mesh/mesh.h"
#include "mesh/soup.h"

/* How a file's numbers become metres in ISO 8855 axes: out[i] = sign[i] * unit_m * in[axis[i]]. */
typedef struct {
    double unit_m;
    int axis[3];
    double sign[3];
} rg_turn;

/* x to the front, z up, y their cross product; so nothing is ever mirrored. Every field of frame is set. RG_BAD_VALUE (a unit that is
 * not finite or not positive; up and front along one axis). */
rg_status rg_turn_of(rg_turn *out, const rg_mesh_frame *frame, rg_error *err);

/* Joins vertices nearer than weld_m to the first of them, which keeps its place, and packs the array; facets follow. No chains: each
 * vertex is within weld_m of the one it became. Coordinates lie within 2^20 weld_m of the origin. weld_m > 0. RG_NO_MEMORY. */
rg_status rg_weld(size_t *n_vertices, double vertex_m[][3], size_t n_facets, uint32_t facet[][3], double weld_m, rg_error *err);

/* Drops facets with two corners in one place or lower than weld_m, and those with the corners of an earlier one. The rest keep their
 * order. RG_NO_MEMORY. */
rg_status rg_drop_facets(size_t *n_facets, uint32_t facet[][3], uint32_t part[], const double vertex_m[][3], double weld_m,
                         size_t *n_degenerate, size_t *n_duplicate, rg_error *err);

/* Fills neighbour, shell and shells of a mesh whose facets are there and sorted, makes the winding one within a shell, turns closed
 * shells outside out, and counts all that in the report. RG_NO_MEMORY. */
rg_status rg_find_shells(rg_mesh *mesh, rg_error *err);

/* All of it. soup gives its arrays away and is empty afterwards, also on failure. report comes with what the reader knows (format,
 * assumed, sha256) and goes into the mesh. RG_BAD_INPUT, RG_NO_MEMORY. */
rg_status rg_mesh_build(rg_mesh **out, rg_soup *soup, const rg_turn *turn, const rg_mesh_report *report, rg_error *err);

#endif
