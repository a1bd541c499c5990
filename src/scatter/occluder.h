/* occluder.h - what one facet hides of another along the line of sight */
#ifndef RG_SCATTER_OCCLUDER_H
#define RG_SCATTER_OCCLUDER_H
#include "scatter/cut_polygon.h"
#include "scatter/seen.h"

/* Nothing beyond this plane hides anything: where the line of sight starts on a facet and not at infinity. In (h, v, s). */
typedef struct { uint32_t facet; double at_m[3], normal[3]; } rg_horizon;

/* Height of a point over it, m; negative beyond. */
static inline double rg_horizon_height(const rg_horizon *horizon, const double at_m[3])
{
    const double *n = horizon->normal, *o = horizon->at_m;
    return n[0] * (at_m[0] - o[0]) + n[1] * (at_m[1] - o[1]) + n[2] * (at_m[2] - o[2]);
}

/* The region of face that other hides; false if it hides nothing. Two faces whose planes are nearer than the welding tolerance all over one of
 * them lie in one plane: there the one before hides the other, and of two just alike the lower index. horizon may be NULL. */
bool rg_occluder_region(rg_region *region, const rg_mesh *mesh, const rg_face *face, const rg_face *other, const rg_horizon *horizon);

/* The stretch of an edge that a face hides, as shares of its length from end_m[0]; false if it hides nothing. An edge that lies in the
 * face's plane, nearer than same_m, is not hidden by it.
 *    vertex[2]    the mesh's vertices at its ends */
bool rg_occluder_stretch(double stretch[2], const rg_face *face, const uint32_t vertex[2], const double end_m[2][3], double same_m);

#endif
