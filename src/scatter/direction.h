/* direction.h - the line of sight and the polarisation basis of an aspect */
#ifndef RG_SCATTER_DIRECTION_H
#define RG_SCATTER_DIRECTION_H
#include "base/vec3.h"
#include <roadglint/scene.h>

/* Unit vectors: s from the target to the radar, h of rising azimuth, v of rising elevation; v = s x h. docs/physics.md (1). */
typedef struct { vec3 s, h, v; } rg_view;

rg_view rg_view_of(rg_aspect aspect);

/* The same of degrees, so that multiples of 90 give exact zeros and ones. */
rg_view rg_view_of_deg(double az_deg, double el_deg);

#endif
