/* reflection.c - how a surface turns the field that falls on it */
#include "scatter/reflection.h"

rg_reflection rg_reflect_metal(void) { return (rg_reflection){.te = -1.0, .tm = 1.0}; }

void rg_backscatter_dyad(rg_reflection reflection, vec3 n, const rg_view *view, double complex dyad[2][2])
{
    const vec3 across = vec3_cross(view->s, n);
    const double length = vec3_norm(across);
    const vec3 perp = length > 0.0 ? vec3_scale(across, 1.0 / length) : view->h;
    const vec3 par = vec3_cross(perp, view->s);
    const double perp_h = vec3_dot(perp, view->h), perp_v = vec3_dot(perp, view->v);
    const double par_h = vec3_dot(par, view->h), par_v = vec3_dot(par, view->v);
    dyad[0][0] = -reflection.te * perp_h * perp_h + reflection.tm * par_h * par_h;
    dyad[1][1] = -reflection.te * perp_v * perp_v + reflection.tm * par_v * par_v;
    dyad[0][1] = dyad[1][0] = -reflection.te * perp_h * perp_v + reflection.tm * par_h * par_v;
}
