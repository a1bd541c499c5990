/* edge.h - the stretches of edges that the radar sees, with their fringe coefficients */
#ifndef RG_SCATTER_EDGE_H
#define RG_SCATTER_EDGE_H
#include "mesh/edges.h"
#include "scatter/scene.h"
#include "scatter/seen.h"
#include "scatter/segment_sum.h"

/* As rg_segment_sum takes them. Start with {0}. */
typedef struct {
    size_t n, room;
    double *path_m[2];                          /* 2 s.r of the ends */
    double *weight_m[RG_SEGMENT_WEIGHTS];       /* fringe coefficient times length: hh, vv, hv */
} rg_stretches;

void rg_stretches_free(rg_stretches *stretches);

/* Working memory of one thread. */
typedef struct rg_edge_scratch rg_edge_scratch;
rg_edge_scratch *rg_edge_scratch_new(void);
void rg_edge_scratch_free(rg_edge_scratch *scratch);     /* takes NULL */

/* The visible stretches of edge[0 .. n - 1], padded to a multiple of RG_LANES; what stretches held before is gone. Each edge is held
 * against every facet that reaches before it, and what those hide is cut off exactly. RG_NO_MEMORY. */
rg_status rg_edge_stretches(const rg_scene *scene, const rg_seen *seen, size_t n, const rg_edge edge[], rg_edge_scratch *scratch,
                            rg_stretches *stretches, rg_error *err);

#endif
