/* query.c - the queries, each by the kernel that the tree was built for */
#include "bvh/tree.h"

bool rg_bvh_any(const rg_bvh *bvh, const rg_ray *ray) { return bvh->kernels->any(bvh, ray); }
rg_hit rg_bvh_closest(const rg_bvh *bvh, const rg_ray *ray) { return bvh->kernels->closest(bvh, ray); }

void rg_bvh_any_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], bool hit[])
{
    for (size_t i = 0; i < n; i += RG_WIDTH) bvh->kernels->any_packet(bvh, n - i < RG_WIDTH ? n - i : RG_WIDTH, ray + i, hit + i);
}

void rg_bvh_closest_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], rg_hit hit[])
{
    for (size_t i = 0; i < n; i += RG_WIDTH) bvh->kernels->closest_packet(bvh, n - i < RG_WIDTH ? n - i : RG_WIDTH, ray + i, hit + i);
}

size_t rg_bvh_in_prism(const rg_bvh *bvh, const rg_prism *prism, size_t max, uint32_t facet[])
{
    return bvh->kernels->in_prism(bvh, prism, max, facet);
}
