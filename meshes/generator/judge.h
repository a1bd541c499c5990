/* judge.h - the library's measure of how smooth a mesh is, for the mesh that is being made */
#ifndef GENERATOR_JUDGE_H
#define GENERATOR_JUDGE_H
#include "facets.h"

/* [n_facets], for the caller to free: how far each facet stands off the surface it stands for, as the fitness report estimates it from
 * the facets alone. */
double *facets_sagitta_m(const facets *mesh);

#endif
