/* field.h - a smooth body as a function that is negative inside, and how such functions are joined
 *
 * A field is about the distance to the body's surface in metres, at least near it: its gradient is near 1. Points of the surface
 * are found by Newton's method, so facets lie on it to rounding whatever the shape is. */
#ifndef GENERATOR_FIELD_H
#define GENERATOR_FIELD_H
#include "base/vec3.h"

typedef double field_fn(vec3 p, const void *shape);
typedef struct { field_fn *at; const void *shape; } field;

static inline double field_at(field f, vec3 p) { return f.at(p, f.shape); }
vec3 field_gradient(field f, vec3 p);
vec3 field_normal(field f, vec3 p);
/* The point of the surface near p. A point in the plane of symmetry y = 0 stays there. */
vec3 field_project(field f, vec3 p);
/* The point near p where both fields are zero: on the surface f, along which it moves to the border of region. */
vec3 field_project_on_border(field f, field region, vec3 p);

/* What both bodies have in common (the larger field), with the edge rounded: for two planes at a right angle to the radius r. */
double field_common(double a, double b, double r_m);
/* Both bodies together (the smaller field), with the inner edge filled. */
double field_joined(double a, double b, double r_m);
/* From 0 at x <= from to 1 at x >= to, with two continuous derivatives. */
double field_step(double from, double to, double x);
/* A curve through n points (x[i], y[i]), x rising, without overshoot: the cubic of F. N. Fritsch and R. E. Carlson, 1980, with the
 * harmonic mean of the neighbours' slopes. Constant outside. */
double field_curve(int n, const double x_y[][2], double x);
/* A limb: two balls and the cone that touches both. */
double field_limb(vec3 p, vec3 a, double ra_m, vec3 b, double rb_m);
/* An ellipsoid about c, to first order at its surface. */
double field_ellipsoid(vec3 p, vec3 c, vec3 radius_m);
/* A box about c with rounded edges; half: half the sizes over all. */
double field_box(vec3 p, vec3 c, vec3 half_m, double r_m);

#endif
