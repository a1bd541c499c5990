/* revolve.h - a profile turned about an axis */
#ifndef GENERATOR_REVOLVE_H
#define GENERATOR_REVOLVE_H
#include "facets.h"

/* A point of the profile: its distance from the axis and its place along the axis. */
typedef struct { double r_m, along_m; } profile_point;

/* Turns the profile about the y axis through the origin, in n_segments equal steps. The outside lies to the left of a profile that is
 * drawn with the axis along to the right and the distance r upward. A point on the axis becomes one vertex. */
void revolve(facets *mesh, size_t n, const profile_point profile[], int n_segments, uint32_t part);
/* Segments that keep the chords of a circle within the sagitta. */
int revolve_segments(double radius_m, double sagitta_m);

#endif
