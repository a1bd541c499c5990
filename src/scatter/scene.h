/* scene.h - the scene as the mechanisms read it */
#ifndef RG_SCATTER_SCENE_H
#define RG_SCATTER_SCENE_H
#include "base/cpu.h"
#include "bvh/bvh.h"
#include "mesh/edges.h"
#include "scatter/segment_sum.h"
#include "scatter/triangle_sum.h"
#include <roadglint/scene.h>

/* A run of facets or edges of one part: the unit of work and of summing, so that sums do not depend on who computes them. */
typedef enum { RG_FACET_BLOCK, RG_EDGE_BLOCK } rg_block_kind;
typedef struct { rg_block_kind kind; uint32_t first, n, part; } rg_block;

struct rg_scene {
    const rg_mesh *mesh;            /* lent */
    rg_bvh *bvh;
    size_t n_edges;
    rg_edge *edge;                  /* by part */
    rg_triangle_sum_fn *triangle_sum;
    rg_segment_sum_fn *segment_sum;
    size_t n_blocks;
    rg_block *block;                /* [n_blocks], by part */
};

/* rg_scene_new with the kernels of a lower level, for tests. */
rg_status rg_scene_new_for(rg_scene **out, const rg_mesh *mesh, rg_cpu cpu, rg_error *err);

#endif
