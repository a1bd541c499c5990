/* reflection.h - how a surface turns the field that falls on it: the one place that knows a material */
#ifndef RG_SCATTER_REFLECTION_H
#define RG_SCATTER_REFLECTION_H
#include "scatter/direction.h"
#include <complex.h>

/* Fresnel coefficients of a plane surface: E across the plane of incidence, and H across it (the H-ratio). */
typedef struct { double complex te, tm; } rg_reflection;

/* Perfect conductor, at any angle: te = -1, tm = +1. */
rg_reflection rg_reflect_metal(void);

/* Backscatter of a flat piece with normal n (unit, toward the radar), docs/physics.md (2.3):
 *   S = -(jk/sqrt(pi)) D (n.s) Int exp(2jk s.r) dA,   D = -te e_perp e_perp' + tm e_par e_par',  e_perp = s x n / |s x n|
 * dyad[received][transmitted], index 0 for h, 1 for v. At normal incidence, where te = -tm, e_perp is free. */
void rg_backscatter_dyad(rg_reflection reflection, vec3 n, const rg_view *view, double complex dyad[2][2]);

#endif
