/* fringe.h - what the currents near an edge send back beyond those of physical optics */
#ifndef RG_SCATTER_FRINGE_H
#define RG_SCATTER_FRINGE_H
#include "scatter/direction.h"
#include <complex.h>

/* One of the two faces that meet at an edge. Unit vectors: into the face and across the edge; outward normal. */
typedef struct { vec3 into, normal; } rg_edge_face;

/* Backscatter of a straight edge by first-order fringe currents on both faces, perfect conductor, any aspect, docs/physics.md (6.1) to
 * (6.5): the exact currents of the infinite wedge less those of physical optics, integrated over each face along the grazing diffracted
 * ray (A. Michaeli, IEEE Trans. AP 34, 1986). Per metre of edge and without its phase,
 *   S = m L sinc(k L s.e) exp(2jk s.(r0 + r1)/2)
 *
 *    n         exterior wedge angle over pi: 2 a free edge, 1.5 a box's; 1 < n <= 2
 *    face      the two faces; the edge runs along into x normal of each, which are opposite
 *    m[2][2]   out: [received][transmitted], 0 for h, 1 for v; symmetric. Free of frequency. Finite for every aspect; 0 from inside of
 *              the body and end-on.
 */
void rg_fringe(double n, const rg_edge_face face[2], const rg_view *view, double complex m[2][2]);

#endif
