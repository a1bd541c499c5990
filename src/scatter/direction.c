/* direction.c - the line of sight and the polarisation basis of an aspect */
#include "scatter/direction.h"
#include "base/elementary.h"

static rg_view view_of_half_turns(double az, double el)
{
    double ca, sa, ce, se;
    rg_cis_pi(az, &ca, &sa);
    rg_cis_pi(el, &ce, &se);
    return (rg_view){.s = {ce * ca, ce * sa, se}, .h = {-sa, ca, 0.0}, .v = {-se * ca, -se * sa, ce}};
}

rg_view rg_view_of(rg_aspect aspect) { return view_of_half_turns(aspect.az_rad / RG_SIN_PI_0, aspect.el_rad / RG_SIN_PI_0); }

rg_view rg_view_of_deg(double az_deg, double el_deg) { return view_of_half_turns(az_deg / 180.0, el_deg / 180.0); }
