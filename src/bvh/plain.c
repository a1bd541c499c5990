/* plain.c - the queries one box and one facet at a time: the definition */
#include "bvh/prism_frame.h"
#include "bvh/triangle.h"

/* The ray's stretch through child c begins no later than the result; INFINITY: it has none, or none up to t_max_m. In double each of
 * the quotients is off by 2^-52 of itself, beside what the origin's own rounding moves it. */
static double enters(const rg_bvh *bvh, const rg_ray *ray, const rg_node *node, uint32_t c, double t_max_m)
{
    double first = 0.0, last = t_max_m * (1.0 + 2.0 * RG_T_SLACK);
    for (int axis = 0; axis < 3; axis++) {
        const double d = ray->direction[axis], o = ray->origin_m[axis] - bvh->middle_m[axis];
        const double error = 0x1p-51 * (fabs(ray->origin_m[axis]) + fabs(bvh->middle_m[axis]));
        const double low = (double)node->low_m[axis][c] - o - error, high = (double)node->high_m[axis][c] - o + error;
        if (d == 0.0) {
            if (low > 0.0 || high < 0.0) return INFINITY;
            continue;
        }
        const double near = (d > 0.0 ? low : high) / d, far = (d > 0.0 ? high : low) / d;
        first = near > first ? near : first;
        last = far < last ? far : last;
    }
    return first <= last * (1.0 + 0x1p-48) ? first : INFINITY;
}

/* Any hit is enough, or all are weighed: the nearest stays in best. */
static bool walk(const rg_bvh *bvh, const rg_ray *ray, bool any, rg_hit *best)
{
    const rg_ray_frame frame = rg_ray_frame_of(ray);
    uint32_t stack[RG_STACK];
    int top = 0;
    stack[top++] = 0;
    while (top > 0) {
        const rg_node *node = &bvh->node[stack[--top]];
        for (uint32_t c = 0; c < node->n; c++) {
            const double limit_m = best->facet == RG_NO_HIT ? ray->t_max_m : best->t_m;
            if (enters(bvh, ray, node, c, limit_m) == INFINITY) continue;
            if (node->n_facets[c] == 0) {
                stack[top++] = node->child[c];
                continue;
            }
            const rg_leaf *leaf = &bvh->leaf[node->child[c] & ~RG_BLOCK_BIT];
            for (uint32_t i = 0; i < leaf->n; i++) {
                rg_hit hit;
                if (!rg_meets(ray, &frame, leaf, i, &hit)) continue;
                if (best->facet == RG_NO_HIT || rg_nearer(&hit, best)) *best = hit;
                if (any) return true;
            }
        }
    }
    return best->facet != RG_NO_HIT;
}

static const rg_hit no_hit = {INFINITY, 0.0, 0.0, RG_NO_HIT};

static bool any(const rg_bvh *bvh, const rg_ray *ray)
{
    rg_hit best = no_hit;
    return walk(bvh, ray, true, &best);
}

static rg_hit closest(const rg_bvh *bvh, const rg_ray *ray)
{
    rg_hit best = no_hit;
    walk(bvh, ray, false, &best);
    return best;
}

static void any_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], bool hit[])
{
    for (size_t i = 0; i < n; i++) hit[i] = any(bvh, &ray[i]);
}

static void closest_packet(const rg_bvh *bvh, size_t n, const rg_ray ray[], rg_hit hit[])
{
    for (size_t i = 0; i < n; i++) hit[i] = closest(bvh, &ray[i]);
}

static bool beside(const rg_prism_frame *f, const rg_node *node, uint32_t c)
{
    bool out = false;
    for (int axis = 0; axis < 3; axis++) out |= node->high_m[axis][c] < f->low_m[axis] || node->low_m[axis][c] > f->high_m[axis];
    for (int p = 0; p < 4 && !out; p++) {
        float least = 0.0f;
        for (int axis = 0; axis < 3; axis++) {
            const float n = f->plane[p].normal[axis];
            least += n * (n > 0.0f ? node->low_m[axis][c] : node->high_m[axis][c]);
        }
        out = least > f->plane[p].limit;
    }
    return out;
}

static size_t in_prism(const rg_bvh *bvh, const rg_prism *prism, size_t max, uint32_t facet[])
{
    const rg_prism_frame frame = rg_prism_frame_of(bvh, prism);
    uint32_t stack[RG_STACK];
    size_t n = 0;
    int top = 0;
    stack[top++] = 0;
    while (top > 0) {
        const rg_node *node = &bvh->node[stack[--top]];
        for (uint32_t c = 0; c < node->n; c++) {
            if (beside(&frame, node, c)) continue;
            if (node->n_facets[c] == 0) {
                stack[top++] = node->child[c];
                continue;
            }
            const rg_leaf *leaf = &bvh->leaf[node->child[c] & ~RG_BLOCK_BIT];
            for (uint32_t i = 0; i < leaf->n; i++)
                if (rg_may_reach(&frame, leaf, i) && n++ < max) facet[n - 1] = leaf->facet[i];
        }
    }
    return n;
}

const rg_bvh_kernels rg_bvh_plain = {any, closest, any_packet, closest_packet, in_prism};
