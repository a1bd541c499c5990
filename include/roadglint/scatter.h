/* roadglint/scatter.h - what a scene sends back to the radar */
#ifndef ROADGLINT_SCATTER_H
#define ROADGLINT_SCATTER_H
#include <roadglint/scene.h>
#include <complex.h>

enum { RG_HH, RG_VV, RG_HV, RG_VH, RG_N_POL };   /* first letter received, second transmitted */

/** Mechanisms, to be joined by |. */
enum {
    RG_SURFACE = 1,     /* physical optics of the first bounce */
    RG_EDGE = 2,        /* fringe currents at edges, first order */
    RG_BOUNCE = 4       /* two reflections and more, physical optics at the last one */
};

/** Level of an amplitude: 20 log10 |s_m|, dBsm; never under -200. */
RG_API double rg_dbsm(double complex s_m);

/** Amplitude of one aspect by physical optics over the lit pieces: first bounce, flat facets, perfect conductor.
 *    S_hh = S_vv = -(jk/sqrt(pi)) Sum_pieces (n.s) Int exp(2jk s.r) dA            docs/physics.md (2.1), (2.2)
 *  The integral is exact for a flat triangle of any size; what of a facet is lit is found by clipping it against all that
 *  stands between it and the radar.
 *
 *    scene                   read only; any number of threads may share it
 *    n_freq                  at least 1
 *    freq_hz[n_freq]         > 0 and at most 1e13, in any order
 *    s_m[n_freq][RG_N_POL]   out: metres, phase reference at the mesh's origin (0, 0, 0), e^{+jwt}; sigma = |s_m|^2
 *
 *  RG_BAD_VALUE (a frequency is not positive or over 1e13, an aspect is not finite), RG_NO_MEMORY. After an error s_m is as
 *  it was.
 */
RG_API rg_status rg_surface(const rg_scene *scene, rg_aspect aspect, size_t n_freq, const double freq_hz[],
                            double complex s_m[][RG_N_POL], rg_error *err);

#endif
