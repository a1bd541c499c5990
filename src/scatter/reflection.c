/* reflection.c - how a surface turns the field that falls on it */
#include "scatter/reflection.h"

rg_reflection rg_reflect_metal(void) { return (rg_reflection){.te = -1.0, .tm = 1.0}; }

void rg_backscatter_dyad(rg_reflection reflection, vec3 n, const rg_view *view, double complex dyad[2][2])
{
    const vec3 across = vec3_cross(view->s, n);
    const double length = vec3_norm(across);
    const vec3 perp = length > 0.0 ? vec3_scale(across, 1.0 / length) : view->h;
    const vec3 par = vec3_cross(perp, view->s);
    const double par_h = vec3_dot(par, view->h), par_v = vec3_dot(par, view->v);
    /* e_perp e_perp' is 1 - e_par e_par': written so, metal gives the unit matrix to the last bit. */
    const double complex excess = reflection.te + reflection.tm;
    dyad[0][0] = -reflection.te + excess * par_h * par_h;
    dyad[1][1] = -reflection.te + excess * par_v * par_v;
    dyad[0][1] = dyad[1][0] = excess * par_h * par_v;
}
