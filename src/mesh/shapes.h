/* shapes.h - how shape.c asks for each kind: first how many facets, then the facets */
#ifndef RG_MESH_SHAPES_H
#define RG_MESH_SHAPES_H
#include "mesh/soup.h"
#include <roadglint/shape.h>

/* The number of facets, or a bound near it when it is large; may be infinite. Sizes are finite and positive, at least one of sagitta
 * and edge is there where a shape is curved. */
typedef double rg_shape_count(const rg_shape *shape);

/* Adds the parts and facets. Their number has been found to be within bounds. RG_NO_MEMORY. */
typedef rg_status rg_shape_build(rg_soup *soup, const rg_shape *shape, rg_error *err);

rg_shape_count rg_sphere_count, rg_guardrail_count;
rg_shape_build rg_sphere_build, rg_guardrail_build;

#define RG_GUARDRAIL_SHORTEST_M 0.3     /* a post with its blockout must fit */

#endif
