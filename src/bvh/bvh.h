/* bvh.h - which facets does a ray, or a facet's shadow prism, meet? */
#ifndef RG_BVH_BVH_H
#define RG_BVH_BVH_H
#include "base/cpu.h"
#include <roadglint/status.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

#define RG_NO_HIT UINT32_MAX

typedef struct rg_bvh rg_bvh;

/* A half-line. Hits on the facet `from` (or RG_NO_HIT: none) are passed over, and so are hits no farther from the origin than the
 * rounding of the hit itself; there is no fixed epsilon. */
typedef struct {
    double origin_m[3];
    double direction[3];    /* unit */
    double t_max_m;         /* may be INFINITY */
    uint32_t from;
} rg_ray;

/* The nearest hit; of hits at one distance the facet of the lowest index. facet is RG_NO_HIT when there is none. u and v weigh
 * the facet's corners 1 and 2, 1 - u - v its corner 0. */
typedef struct { double t_m, u, v; uint32_t facet; } rg_hit;

/* What a facet sees along one direction: all points corner + t toward, t >= 0, of all points of a triangle. */
typedef struct { double corner_m[3][3]; double toward[3]; } rg_prism;

/* Binned surface-area heuristic, built in parallel, eight children a node. The arrays are lent until rg_bvh_free; the tree does not
 * depend on the number of threads. cpu picks the variant of the kernels, all of which answer alike. RG_NO_MEMORY. */
rg_status rg_bvh_build(rg_bvh **out, size_t n_vertices, const double vertex_m[][3], size_t n_facets, const uint32_t facet[][3],
                       rg_cpu cpu, rg_error *err);
void rg_bvh_free(rg_bvh *bvh);

/* Watertight: a ray through a shared edge or vertex meets a facet of it (S. Woop, C. Benthin, I. Wald, JCGT 2(1), 2013). */
bool rg_bvh_any(const rg_bvh *bvh, const rg_ray *ray);
rg_hit rg_bvh_closest(const rg_bvh *bvh, const rg_ray *ray);

/* The same answers for n rays, eight at a time that take turns while memory is slow. The order of the rays is free; neighbours in it
 * that are neighbours in space are faster. */
void rg_bvh_any_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], bool hit[]);
void rg_bvh_closest_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], rg_hit hit[]);

/* Facets that may reach into the prism: none that does is missed, some that only come near may be named. What lies behind the
 * triangle's plane or only touches the prism does not reach in: the triangle itself, its neighbours on a convex body, those that share
 * a corner and lean away. Two facets in one plane do, as far as doubles can tell. A triangle that is edge-on to `toward` sweeps out
 * nothing, and then all that comes near its axis-aligned sweep is named. Writes the first max of them to facet[], in no stated order,
 * each once; returns how many there are. */
size_t rg_bvh_in_prism(const rg_bvh *bvh, const rg_prism *prism, size_t max, uint32_t facet[]);

/* Every facet in one leaf, every box around its facets. RG_BAD_INPUT names the first fault. */
rg_status rg_bvh_check(const rg_bvh *bvh, rg_error *err);

#endif
