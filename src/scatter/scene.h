/* scene.h - the scene as the mechanisms read it */
#ifndef RG_SCATTER_SCENE_H
#define RG_SCATTER_SCENE_H
#include "base/cpu.h"
#include "bvh/bvh.h"
#include "mesh/mesh.h"
#include "scatter/triangle_sum.h"
#include <roadglint/scene.h>

/* A run of facets of one part: the unit of work and of summing, so that sums do not depend on who computes them. */
typedef struct { uint32_t first, n, part; } rg_block;

struct rg_scene {
    const rg_mesh *mesh;            /* lent */
    rg_bvh *bvh;
    rg_triangle_sum_fn *triangle_sum;
    size_t n_blocks;
    rg_block *block;                /* [n_blocks], in the order of the facets */
};

/* rg_scene_new with the kernels of a lower level, for tests. */
rg_status rg_scene_new_for(rg_scene **out, const rg_mesh *mesh, rg_cpu cpu, rg_error *err);

#endif
