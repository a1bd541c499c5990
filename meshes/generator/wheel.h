/* wheel.h - a tyre on its rim */
#ifndef GENERATOR_WHEEL_H
#define GENERATOR_WHEEL_H
#include "facets.h"

/* A wheel that turns about the y axis through the origin, its outer face toward +y. */
facets wheel_mesh(const char *tyre_part, const char *rim_part, double radius_m, double width_m, double sagitta_m);

#endif
