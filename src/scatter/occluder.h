/* occluder.h - what one facet hides of another along the line of sight */
#ifndef RG_SCATTER_OCCLUDER_H
#define RG_SCATTER_OCCLUDER_H
#include "scatter/cut_polygon.h"
#include "scatter/lit.h"

/* A facet as the radar sees it: wound counter-clockwise in (h, v), whichever of its sides that shows. */
typedef struct {
    uint32_t index, vertex[3];
    double at_m[3][3];              /* corners along h, v, s */
    double normal_m2[3];            /* along h, v, s; twice the area; toward the radar, so normal_m2[2] > 0 */
} rg_face;

/* False where the radar sees nothing of it: the inner side of a closed shell, or edge-on to within rounding. */
bool rg_face_seen(rg_face *face, const rg_mesh *mesh, const rg_seen *seen, uint32_t facet);

/* The region of face that other hides; false if it hides nothing. Two faces whose planes are nearer than same_m all over one of
 * them lie in one plane: there the lower index hides the other. */
bool rg_occluder_region(rg_region *region, const rg_face *face, const rg_face *other, double same_m);

#endif
