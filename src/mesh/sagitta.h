/* sagitta.h - how far each flat facet stands off the smooth surface that it stands for */
#ifndef RG_MESH_SAGITTA_H
#define RG_MESH_SAGITTA_H
#include "mesh/mesh.h"

#define RG_FEATURE_TURN_RAD 0.54105206811824215    /* 31 degrees */

typedef struct {
    double *sagitta_m;          /* [n_facets], 0 where flat */
    double *curvature_per_m;    /* [n_facets], the larger principal one */
    size_t n_feature_edges, n_unsure_edges;
    double unsure_sagitta_m;
} rg_sagittas;                  /* as described in roadglint/fitness.h */

/* RG_NO_MEMORY; *out is empty then. */
rg_status rg_sagittas_find(rg_sagittas *out, const rg_mesh *mesh, rg_error *err);
void rg_sagittas_free(rg_sagittas *sagittas);   /* and empties it */

#endif
